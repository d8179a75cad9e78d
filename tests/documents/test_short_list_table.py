"""The short list as CSV: figures of the result, harmless texts, RFC 4180."""

from __future__ import annotations

import csv
import io
import math
from dataclasses import replace

import pytest

from optimizer import CheckResult, RankResult
from optimizer.documents.short_list_table import layouts_of, short_list_csv, short_list_table
from optimizer.documents.tables import Column, Table, csv_text, looks_like_formula
from tests.documents.sample_results import HOSTILE, RESULTS, checked, ranked, renamed

# Numbers are written with ten significant digits.
DIGITS = 1e-9


def rows_of(result: RankResult | CheckResult) -> list[dict[str, str]]:
    """Return the rows of the CSV by heading."""
    return list(csv.DictReader(io.StringIO(short_list_csv(result), newline="")))


@pytest.mark.parametrize("name", RESULTS)
def test_figures_are_those_of_the_result(name: str) -> None:
    """Each layout is a row with its own figures in the units of the heading."""
    result = RESULTS[name]()
    trade = result.job.edition.system.trade
    mass, moment = trade["mass_per_length"], trade["moment"]
    factor = {"us": 12_000.0, "si": 1e6}[result.job.edition.units]  # lbf*in in a kip*ft, N*mm, kN*m
    rows = iter(rows_of(result))
    for section in result.sections:
        for rated in layouts_of(section):
            row, layout = next(rows), rated.checked
            assert row["section"] == section.section.mark
            assert row["status"] == section.status
            assert row["line"] == ("" if rated.rank is None else str(rated.rank))
            assert row["layout"] == layout.layout.label
            assert row["marks"] == ", ".join(rated.marks)
            gap = min(item.gap / item.gap_required for item in layout.placement.layers)
            expected = {
                "number of bars": sum(len(item.x) for item in layout.placement.layers),
                "number of layers": len(layout.placement.layers),
                f"mass [{mass}]": layout.layout.mass,
                f"score [{mass}]": rated.score.total,
                f"score, tight [{mass}]": rated.score.tight,
                f"As [{trade['area']}]": layout.As,
                f"phi Mn [{moment}]": layout.phi_Mn / factor,
                f"Mu [{moment}]": section.section.Mu / factor,
                "use": abs(section.section.Mu) / layout.phi_Mn,
                "eps_t": layout.eps_t,
                "smallest gap over required": gap,
            }
            for heading, value in expected.items():
                assert math.isclose(float(row[heading]), value, rel_tol=DIGITS), heading
        if not layouts_of(section):
            next(rows)
    assert next(rows, None) is None


@pytest.mark.parametrize("units", ["us", "si"])
def test_terms_add_up_to_the_score(units: str) -> None:
    """The five terms of a row are all of its score."""
    rows = rows_of(ranked(units))
    scored = [row for row in rows if row["layout"]]
    assert len(scored) >= 6
    for row in scored:
        terms = [float(value) for name, value in row.items() if name.startswith("score, ")]
        (total,) = [float(value) for name, value in row.items() if name.startswith("score [")]
        assert len(terms) == 5
        assert math.isclose(sum(terms), total, rel_tol=5 * DIGITS)


def test_section_without_layout_is_a_row_without_figures() -> None:
    """It shows mark, status, proof and demand, and nothing else."""
    last = rows_of(ranked())[-1]
    filled = {name: value for name, value in last.items() if value}
    assert filled == {
        "section": "N1 too small",
        "status": "no_layout",
        "proved": "yes",
        "Mu [kip*ft]": "240",
    }


def test_search_stopped_short_is_said() -> None:
    """A list without proof says so on each row; a check has nothing to prove."""
    result = ranked("si")
    stopped = replace(
        result, sections=tuple(replace(section, proved=False) for section in result.sections)
    )
    assert {row["proved"] for row in rows_of(stopped)} == {"no"}
    assert {row["proved"] for row in rows_of(result)} == {"yes"}
    assert {row["proved"] for row in rows_of(checked("si"))} == {""}


def test_lines_end_as_the_standard_has_it() -> None:
    """Records end in CR LF, all with as many fields as the header (RFC 4180, 2.1 and 2.4)."""
    text = short_list_csv(ranked())
    assert text.endswith("\r\n")
    assert text.count("\r\n") == text.count("\n") == text.count("\r")
    records = list(csv.reader(io.StringIO(text, newline=""), strict=True))
    assert {len(record) for record in records} == {len(records[0])}


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_marks_are_harmless(name: str) -> None:
    """No field starts like a formula, none holds a control character, and all can be encoded."""
    text = short_list_csv(renamed(HOSTILE[name]))
    text.encode("utf-8")
    records = list(csv.reader(io.StringIO(text, newline=""), strict=True))
    count = len(short_list_table(renamed(HOSTILE[name])).rows)
    assert len(records) == count + 1
    marks = {record[0] for record in records[1:]}
    assert len(marks) == 1
    (mark,) = marks
    assert mark.strip()[:1] not in tuple("=+-@\t\r")
    assert not any(ord(sign) < 32 or 127 <= ord(sign) < 160 for sign in mark)


@pytest.mark.parametrize("text", ["=1", "+1", "-1", "@x", " =1", "\t=1", "\r=1", "\u200b=1", "＝1"])
def test_texts_like_formulas_get_an_apostrophe(text: str) -> None:
    """A text that a spreadsheet would compute starts with an apostrophe in the file."""
    table = Table(name="t", columns=(Column(name="a"),), rows=((text,),))
    (record,) = list(csv.reader(io.StringIO(csv_text(table), newline="")))[1:]
    assert looks_like_formula(text)
    assert record[0].startswith("'")


def test_numbers_are_not_taken_for_formulas() -> None:
    """A hogging moment is a negative number, not a text that starts with a minus."""
    table = Table(name="t", columns=(Column(name="a", unit="in"),), rows=((-1.5,), (None,), (3,)))
    assert csv_text(table) == 'a [in]\r\n-1.5\r\n""\r\n3\r\n'


def test_equal_results_give_equal_text() -> None:
    """Nothing of the moment is written."""
    assert short_list_csv(ranked()) == short_list_csv(ranked())


def test_columns_by_name() -> None:
    """A table gives a column by its name without the unit."""
    table = short_list_table(ranked())
    assert table.column("section")[0] == "R1 rectangle"
    assert table.column("Mu")[0] == pytest.approx(300.0, rel=1e-12)
