"""The workbook read back: numbers, texts that stay texts, sheets ready to print, equal bytes."""

from __future__ import annotations

import io
import math
import re
import time
import zipfile
from dataclasses import replace
from pathlib import Path
from typing import Any
from xml.etree import ElementTree as ET

import openpyxl
import pandas as pd
import pytest

from engine import State
from optimizer import CheckResult, OutputError, RankResult
from optimizer.documents.inputs_table import inputs_table
from optimizer.documents.short_list_table import layouts_of, short_list_table
from optimizer.documents.tables import Column, Table
from optimizer.documents.workbook import bytes_of_tables, workbook_bytes
from optimizer.documents.workbook_tables import checks_table, notes_table
from optimizer.files import write_bytes
from optimizer.scoring import TERMS
from optimizer.wording import CAUTION, NOT_CHECKED, proof_of
from tests.documents.sample_results import HOSTILE, RESULTS, checked, ranked, renamed

SHEETS = ["Short list", "Checks", "Inputs", "Notes"]
MAIN = "{http://schemas.openxmlformats.org/spreadsheetml/2006/main}"
# A float written to the file and read back is the same one; only units are converted.
SAME = 1e-12


def frames(result: RankResult | CheckResult) -> dict[str, Any]:
    """Return the sheets as pandas reads them, empty texts kept as texts."""
    data = io.BytesIO(workbook_bytes(result))
    return dict(pd.read_excel(data, sheet_name=None, keep_default_na=False))


def book_of(data: bytes) -> Any:
    """Return a workbook as openpyxl reads it."""
    return openpyxl.load_workbook(io.BytesIO(data))


@pytest.mark.parametrize("name", RESULTS)
def test_short_list_holds_the_figures_of_the_result(name: str) -> None:
    """Every figure is a number, equal to the result's in the unit of its heading."""
    result = RESULTS[name]()
    trade = result.job.edition.system.trade
    mass, moment = trade["mass_per_length"], trade["moment"]
    factor = {"us": 12_000.0, "si": 1e6}[result.job.edition.units]
    sheet = frames(result)["Short list"]
    shown = [(section, rated) for section in result.sections for rated in layouts_of(section)]
    listed = sheet[sheet["layout"] != ""]
    assert len(listed) == len(shown)
    for (section, rated), row in zip(shown, listed.to_dict("records"), strict=True):
        layout = rated.checked
        assert row["section"] == section.section.mark
        assert row["layout"] == layout.layout.label
        assert row["line"] == ("" if rated.rank is None else rated.rank)
        expected = {
            f"mass [{mass}]": layout.layout.mass,
            f"score [{mass}]": rated.score.total,
            **{f"score, {term} [{mass}]": getattr(rated.score, term) for term in TERMS},
            f"phi Mn [{moment}]": layout.phi_Mn / factor,
            f"Mu [{moment}]": section.section.Mu / factor,
            "use": abs(section.section.Mu) / layout.phi_Mn,
            "eps_t": layout.eps_t,
        }
        for heading, value in expected.items():
            assert isinstance(row[heading], int | float), heading
            assert math.isclose(row[heading], value, rel_tol=SAME), heading


@pytest.mark.parametrize("name", RESULTS)
def test_every_check_row_is_there(name: str) -> None:
    """All rows of all layouts shown, in order, with clause, figures, verdict and note."""
    result = RESULTS[name]()
    system = result.job.edition.system
    layouts = [rated.checked for section in result.sections for rated in layouts_of(section)]
    if isinstance(result, RankResult):
        layouts += [
            section.diagnosis.strongest
            for section in result.sections
            if section.diagnosis is not None and section.diagnosis.strongest is not None
        ]
    expected = [row for layout in layouts for row in layout.checks]
    rows = frames(result)["Checks"].to_dict("records")
    assert len(rows) == len(expected) > 10
    for check, row in zip(expected, rows, strict=True):
        assert (row["check"], row["clause"], row["note"]) == (check.id, check.clause, check.note)
        assert (row["verdict"] == "FAILS") is not check.ok
        assert row["verdict"].lower() == check.state.value
        for heading, value in (("demand", check.demand), ("limit", check.limit)):
            if value is None or not math.isfinite(value):
                assert row[heading] == ""
            else:
                shown = system.to_trade(check.quantity, value)
                assert math.isclose(row[heading], shown, rel_tol=SAME, abs_tol=1e-300)
        assert row["use"] == ("" if check.ratio is None else pytest.approx(check.ratio, rel=SAME))


def test_checks_say_which_layout_they_are_of() -> None:
    """Listed lines carry their number; the strongest of a section without layout has none."""
    sheet = frames(ranked())["Checks"]
    first = sheet[sheet["section"] == "R1 rectangle"]
    assert set(first[first["shown as"] == "listed"]["line"]) == {1, 2, 3}
    last = sheet[sheet["section"] == "N1 too small"]
    assert set(last["shown as"]) == {"strongest fit"}
    assert list(last[last["verdict"] == "FAILS"]["check"]) == ["flexural_strength"]
    given = frames(checked())["Checks"]
    assert set(given["shown as"]) == {"given"}
    failing = given[given["verdict"] == State.FAILS.value.upper()]
    assert set(failing["section"]) >= {"L1 hogging"}


def test_inputs_are_those_of_the_job() -> None:
    """Values of the job text above, converted to the unit written beside them."""
    sheet = frames(ranked())["Inputs"]
    first = sheet[sheet["section"] == "R1 rectangle"].set_index("key")
    for key, value, unit in (
        ("Mu", 300, "kip*ft"),
        ("Ms", 190, "kip*ft"),
        ("fc", 4000, "psi"),
        ("fy", 60000, "psi"),
        ("aggregate", 0.75, "in"),
        ("width", 14, "in"),
        ("depth", 24, "in"),
        ("cover", 1.5, "in"),
        ("keep", 3, ""),
        ("per_bar", 0.1, "lb/ft"),
    ):
        assert first.loc[key, "value"] == pytest.approx(value, rel=SAME)
        assert first.loc[key, "unit"] == unit
    assert first.loc["layers", "value"] == "3 #8 / 2 #8"
    slab = sheet[sheet["section"] == "T1 slab"].set_index("key")
    assert slab.loc["slab.span", "value"] == 26 * 12
    assert slab.loc["exposure", "value"] == "interior (not given)"
    girder = sheet[sheet["section"] == "L1 hogging"].set_index("key")
    assert girder.loc["Mu", "value"] == -210
    assert girder.loc["flange.side", "value"] == 24
    assert girder.loc["opposite", "value"] == "2 #8 / 2 #7"


def test_score_constants_are_inputs_of_each_section() -> None:
    """Whoever reads a score finds every constant it was made with."""
    table = inputs_table(ranked("si"))
    by_section: dict[Any, set[Any]] = {}
    for row in table.rows:
        by_section.setdefault(row[0], set()).add(row[1])
    constants = {"labour_share", "per_bar", "per_extra_layer", "per_extra_size", "tight_gap"}
    assert all(constants | {"preferred_gap"} <= keys for keys in by_section.values())
    assert len(by_section) == 2


def test_notes_hold_caution_limits_and_proof() -> None:
    """What is not checked, the caution, the edition, and one proof sentence a section."""
    notes = frames(ranked())["Notes"]
    texts = list(notes["note"])
    assert CAUTION in texts
    assert NOT_CHECKED in texts
    assert "ACI 318-19" in texts
    proofs = notes[notes["subject"] == "proof"].set_index("section")["note"]
    assert list(proofs.index) == [section.section.mark for section in ranked().sections]
    assert proofs["R1 rectangle"] == proof_of(ranked().sections[0])
    assert proofs["R1 rectangle"].startswith("Proved: ")
    assert proofs["N1 too small"] == "Proved: no layout meets every rule."
    stopped = replace(
        ranked(), sections=tuple(replace(item, proved=False) for item in ranked().sections)
    )
    notes = frames(stopped)["Notes"]
    assert all("NOT PROVED" in note for note in notes[notes["subject"] == "proof"]["note"])
    assert not set(frames(checked())["Notes"]["subject"]) & {"proof", "score"}


def test_remedies_only_where_a_section_has_no_layout() -> None:
    """A sheet of verified changes, and none where everything has a layout."""
    found = frames(ranked())
    assert list(found) == [*SHEETS, "Remedies"]
    diagnosis = ranked().sections[-1].diagnosis
    assert diagnosis is not None
    rows = found["Remedies"].to_dict("records")
    assert [(row["key"], row["change to"]) for row in rows] == [
        (remedy.key, remedy.after) for remedy in diagnosis.remedies
    ]
    assert all(row["phi Mn [kip*ft]"] >= row["Mu [kip*ft]"] == 240 for row in rows)
    for name in ("ranked si", "checked us"):
        assert list(frames(RESULTS[name]())) == SHEETS


@pytest.mark.parametrize("name", RESULTS)
def test_sheets_are_ready_to_filter_and_print(name: str) -> None:
    """Frozen and repeated header, filter over all rows, A4 landscape, all columns on a page."""
    for sheet in book_of(workbook_bytes(RESULTS[name]())):
        assert sheet.freeze_panes == "A2"
        assert sheet.auto_filter.ref == sheet.dimensions
        assert sheet.print_title_rows in ("1:1", "$1:$1")
        assert (sheet.page_setup.orientation, int(sheet.page_setup.paperSize)) == ("landscape", 9)
        assert sheet.sheet_properties.pageSetUpPr.fitToPage
        assert (sheet.page_setup.fitToWidth, sheet.page_setup.fitToHeight) == (1, 0)
        for cell in sheet[1]:
            assert cell.font.bold
            assert sheet.column_dimensions[cell.column_letter].width >= 6


def test_numbers_have_formats() -> None:
    """Use is a percentage, moments have one decimal, strains four."""
    sheet = book_of(workbook_bytes(ranked()))["Short list"]
    formats = {cell.value: below.number_format for cell, below in zip(*sheet["1:2"], strict=True)}
    assert formats["use"] == "0%"
    assert formats["phi Mn [kip*ft]"] == "0.0"
    assert formats["mass [lb/ft]"] == "0.00"
    assert formats["eps_t"] == "0.0000"


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_texts_stay_texts(name: str) -> None:
    """No cell is a formula or an error; the text is the mark without what cannot be shown."""
    text = HOSTILE[name]
    data = workbook_bytes(renamed(text))
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        for part in archive.namelist():
            if part.endswith(".xml"):
                ET.fromstring(archive.read(part))
        sheets = [ET.fromstring(archive.read(f"xl/worksheets/sheet{n}.xml")) for n in range(1, 6)]
    for root in sheets:
        assert not list(root.iter(f"{MAIN}f"))
        assert {cell.get("t") for cell in root.iter(f"{MAIN}c")} <= {"s", "inlineStr", "n"}
    cell = book_of(data)["Short list"]["A2"]
    assert cell.data_type == "s"
    if text.isprintable():
        # A spreadsheet reads _x005F_ as _ (ECMA-376 part 1, ST_Xstring); openpyxl does not here.
        assert cell.value.replace("_x005F_", "_") == text
    assert not re.search(r"[\x00-\x1f\x7f-\x9f\ud800-\udfff]", cell.value)


@pytest.mark.parametrize(
    ("text", "quoted"), [("=1+1", True), ("+1", True), ("-1", True), ("@x", True), ("B1", False)]
)
def test_formula_like_texts_stay_texts_when_edited(text: str, quoted: bool) -> None:
    """Their cells carry the mark by which a spreadsheet keeps a text a text after editing."""
    table = Table(name="t", columns=(Column(name="a"),), rows=((text,),))
    cell = book_of(bytes_of_tables([table]))["t"]["A2"]
    assert (cell.value, cell.data_type, bool(cell.quotePrefix)) == (text, "s", quoted)


def test_equal_results_give_equal_bytes() -> None:
    """Neither the time of day nor that of the file's parts is in it."""
    first = workbook_bytes(ranked())
    # The file format counts in steps of two seconds.
    time.sleep(2.1)
    assert workbook_bytes(ranked()) == first
    with zipfile.ZipFile(io.BytesIO(first)) as archive:
        assert {part.date_time for part in archive.infolist()} == {(1980, 1, 1, 0, 0, 0)}


def test_sheets_agree_with_their_tables() -> None:
    """Headings and number of rows of each sheet are those of the table behind it."""
    result = ranked("si")
    found = frames(result)
    for make in (short_list_table, checks_table, inputs_table, notes_table):
        table = make(result)
        sheet = found[table.name]
        assert list(sheet.columns) == [column.heading for column in table.columns]
        assert len(sheet) == len(table.rows)


def test_bytes_are_written_whole(tmp_path: Path) -> None:
    """The file holds the bytes and nothing is left beside it; one to be kept is kept."""
    path = tmp_path / "list.xlsx"
    data = workbook_bytes(ranked("si"))
    write_bytes(path, data)
    assert path.read_bytes() == data
    with pytest.raises(OutputError, match="exists already"):
        write_bytes(path, b"", replace=False)
    assert path.read_bytes() == data
    assert [item.name for item in tmp_path.iterdir()] == ["list.xlsx"]


def test_section_that_nothing_helps_says_so() -> None:
    """Where no single change helps and nothing fits at all, that is written, not left out."""
    result = ranked()
    last = result.sections[-1]
    assert last.diagnosis is not None
    bare = replace(last.diagnosis, strongest=None, blocked_by=(), remedies=())
    hopeless = replace(result, sections=(replace(last, diagnosis=bare),))
    found = frames(hopeless)
    (row,) = found["Remedies"].to_dict("records")
    assert row["key"] == "no single change that was tried helps"
    notes = found["Notes"].set_index("subject")["note"]
    assert notes["no layout"] == "No layout meets the rules other than strength either."
    assert len(found["Checks"]) == 0
