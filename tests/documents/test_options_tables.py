"""Options as workbook, CSV and drawing, read back with pandas and ezdxf."""

from __future__ import annotations

import csv
import io

import ezdxf
import openpyxl
import pandas as pd
import pytest

from optimizer import parse_job
from optimizer.documents.options_tables import trade_off_csv
from optimizer.documents.section_drawing import drawing_dxf
from optimizer.documents.workbook import workbook_bytes
from optimizer.options import OptionsResult, options

_JOB = """
title = "{title}"
code = "ACI 318-19"
[materials]
fc = "4000 psi"
steel = "A615-60"
[options]
grades = ["A615-80"]
prices = "demo"
palette = 3
[[section]]
mark = "{mark}"
Mu = "370 kip*ft"
width = "14 in"
depth = "24 in"
cover = "1.5 in"
stirrup = "#4"
layers = ["4 #8", "2 #8"]
length = "20 ft"
[[section]]
mark = "weak"
Mu = "520 kip*ft"
width = "16 in"
depth = "28 in"
cover = "1.5 in"
stirrup = "#4"
layers = ["6 #8"]
"""


@pytest.fixture(scope="module")
def result() -> OptionsResult:
    """Options of two sections, one drawn layout failing."""
    return options(parse_job(_JOB.format(title="Options", mark="B1")))


def test_sheets(result: OptionsResult) -> None:
    """Every kind of figure has its sheet."""
    book = openpyxl.load_workbook(io.BytesIO(workbook_bytes(result)))
    assert book.sheetnames == [
        "Trade-off set",
        "Differences",
        "To be agreed",
        "Checks",
        "Palette",
        "Inputs",
        "Notes",
    ]


def test_trade_off_sheet_holds_the_whole_set(result: OptionsResult) -> None:
    """Drawn layouts and every layout that no other beats, with their figures as numbers."""
    frame = pd.read_excel(io.BytesIO(workbook_bytes(result)), sheet_name="Trade-off set")
    assert len(frame) == sum(1 + len(section.trade_off) for section in result.sections)
    for section in result.sections:
        rows = frame[frame["section"] == section.section.mark]
        drawn, *others = rows.to_dict("records")
        assert drawn["best at"] == "drawn"
        assert drawn["passes"] == ("yes" if section.drawn.checked.ok else "NO")
        for row, option in zip(others, section.trade_off, strict=True):
            assert row["layout"] == option.checked.layout.label
            assert row["mass [lb/ft]"] == pytest.approx(option.measures.mass)
            assert option.measures.cost is not None
            assert row["placed cost, high [DEMO/ft]"] == pytest.approx(option.measures.cost.high)
            assert row["phi Mn [kip*ft]"] == pytest.approx(option.checked.phi_Mn / 12_000)


def test_differences_and_agreement(result: OptionsResult) -> None:
    """Every difference and every point of the chosen options has its row."""
    data = io.BytesIO(workbook_bytes(result))
    chosen = [option for section in result.sections for option in section.chosen]
    rows = pd.read_excel(data, sheet_name="Differences")
    assert len(rows) == sum(len(option.differences) for option in chosen)
    mass = rows[rows["figure"] == "steel mass"]
    expected = [option.differences[0].change for option in chosen]
    assert mass["change"].tolist() == pytest.approx(expected)
    points = pd.read_excel(data, sheet_name="To be agreed")
    assert len(points) == sum(len(option.accept) for option in chosen)


def test_palette_sheet(result: OptionsResult) -> None:
    """A row for each section of each choice, with the choice's total."""
    frame = pd.read_excel(io.BytesIO(workbook_bytes(result)), sheet_name="Palette")
    assert result.palette is not None
    assert len(frame) == sum(len(choice.layouts) for choice in result.palette.choices)
    totals = frame["total, score or mass times length"].tolist()
    assert totals[-1] == pytest.approx(result.palette.choices[-1].total)


def test_invented_prices_are_named(result: OptionsResult) -> None:
    """The demo list is said to be invented in the notes."""
    frame = pd.read_excel(io.BytesIO(workbook_bytes(result)), sheet_name="Notes")
    assert frame.astype(str).apply(lambda column: column.str.contains("INVENTED")).any().any()


def test_csv_equals_the_sheet(result: OptionsResult) -> None:
    """The CSV has the rows of the trade-off sheet."""
    rows = list(csv.DictReader(io.StringIO(trade_off_csv(result))))
    frame = pd.read_excel(io.BytesIO(workbook_bytes(result)), sheet_name="Trade-off set")
    assert [row["layout"] for row in rows] == frame["layout"].tolist()
    assert [float(row["mass [lb/ft]"]) for row in rows] == pytest.approx(
        frame["mass [lb/ft]"].tolist()
    )


def test_drawing_shows_drawn_and_chosen(result: OptionsResult) -> None:
    """Bars of every drawn layout and every chosen option are circles; the audit is clean."""
    drawing = ezdxf.read(io.StringIO(drawing_dxf(result)))
    audit = drawing.audit()
    assert not audit.errors
    assert not audit.fixes
    bars = sum(
        section.drawn.checked.layout.count
        + sum(option.checked.layout.count for option in section.chosen)
        for section in result.sections
    )
    assert len(drawing.modelspace().query("CIRCLE")) == bars


def test_equal_results_give_equal_bytes(result: OptionsResult) -> None:
    """A second run of the same job writes the same files."""
    again = options(parse_job(_JOB.format(title="Options", mark="B1")))
    assert workbook_bytes(again) == workbook_bytes(result)
    assert drawing_dxf(again) == drawing_dxf(result)
    assert trade_off_csv(again) == trade_off_csv(result)


@pytest.mark.parametrize("mark", ["=1+1", "<script>alert(1)</script>", "@x", "+9"])
def test_hostile_marks_are_text(mark: str) -> None:
    """A mark that looks like a formula stays text in the CSV and the workbook."""
    found = options(parse_job(_JOB.format(title=mark, mark=mark)))
    first = trade_off_csv(found).splitlines()[1]
    assert not first.startswith(("=", "+", "@", "-"))
    book = openpyxl.load_workbook(io.BytesIO(workbook_bytes(found)))
    cell = book["Trade-off set"]["A2"]
    assert cell.data_type == "s"
    assert cell.value == mark
