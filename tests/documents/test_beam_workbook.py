"""The workbook of a beam read back: numbers of the design, texts that stay texts, equal bytes."""

from __future__ import annotations

import csv
import io
from typing import Any

import numpy as np
import openpyxl
import pandas as pd
import pytest

from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.documents.beam_charts import shear_of
from optimizer.documents.beam_schedule_table import schedule_csv
from optimizer.documents.beam_workbook import beam_workbook
from tests.documents.beam_samples import SAMPLES, designed, renamed, without_design
from tests.documents.sample_results import HOSTILE

SHEETS = ["Summary", "Schedule", "Bars", "Stirrups", "Cutting", "Checks", "Envelopes"]
# A float written to the file and read back is the same one; only units are converted.
SAME = 1e-12


def sheets(result: BeamDesign | NoDesign) -> dict[str, Any]:
    """Return the sheets as pandas reads them, without units in the headings."""
    data = io.BytesIO(beam_workbook(result))
    found = dict(pd.read_excel(data, sheet_name=None, keep_default_na=False))
    for sheet in found.values():
        sheet.columns = [str(name).split(" [")[0] for name in sheet.columns]
    return found


@pytest.mark.parametrize("name", SAMPLES)
def test_schedule_holds_every_mark(name: str) -> None:
    """Marks, numbers, lengths and masses are the design's, and add up to its mass."""
    design = designed(name)
    read = sheets(design)
    assert list(read) == SHEETS
    sheet = read["Schedule"]
    marks = design.schedule.marks
    assert list(sheet["mark"]) == [item.mark for item in marks]
    assert list(sheet["count"]) == [item.count for item in marks]
    for column, values in (
        ("cut length", [item.length for item in marks]),
        ("mass each", [item.mass_each for item in marks]),
        ("mass", [item.mass for item in marks]),
    ):
        assert list(sheet[column]) == pytest.approx(values, rel=SAME)
    assert sheet["mass"].sum() == pytest.approx(design.schedule.mass, rel=SAME)


@pytest.mark.parametrize("name", SAMPLES)
def test_bars_and_stirrups_make_up_the_schedule(name: str) -> None:
    """Numbers of bars by mark add up to the schedule; zones hold all spaces of a span."""
    design = designed(name)
    read = sheets(design)
    counts = read["Bars"].groupby("mark")["count"].sum().to_dict()
    for item in design.schedule.marks:
        if not item.mark.startswith("S"):
            assert counts[item.mark] == item.count
    zones = read["Stirrups"].groupby("span")["spaces"].sum().to_dict()
    for span, plan in zip(design.problem.beam.spans, design.stirrups, strict=True):
        assert zones[span.mark] + 1 == plan.count
    rows = read["Stirrups"]
    reach = (rows["to"] - rows["from"]) / rows["spaces"]
    assert list(rows["spacing"]) == pytest.approx(list(reach), rel=1e-9)


@pytest.mark.parametrize("name", SAMPLES)
def test_cutting_buys_what_the_plan_buys(name: str) -> None:
    """Stock lengths times numbers give the length bought of each size."""
    design = designed(name)
    sheet = sheets(design)["Cutting"]
    sheet["bought"] = sheet["bars of stock"] * sheet["stock length"]
    bought = {str(size): value for size, value in sheet.groupby("size")["bought"].sum().items()}
    assert bought == pytest.approx({plan.size: plan.bought for plan in design.cutting}, rel=SAME)


@pytest.mark.parametrize("name", SAMPLES)
def test_envelopes_are_the_design_s(name: str) -> None:
    """Demand and strength at each station, in the units of the headings."""
    design = designed(name)
    sheet = sheets(design)["Envelopes"]
    moment = {"us": 12_000.0, "si": 1e6}[design.edition.units]
    begin = 0
    for index, (demand, strength) in enumerate(zip(design.demands, design.strengths, strict=True)):
        part = sheet[begin : begin + len(strength.x)]
        begin += len(strength.x)
        assert list(part["on the span"]) == pytest.approx(list(strength.x), rel=SAME)
        assert list(part["phi Mn sagging"] * moment) == pytest.approx(list(strength.sagging))
        assert list(part["phi Mn hogging"] * moment) == pytest.approx(list(strength.hogging))
        assert list(part["phi Vn"] * 1000.0) == pytest.approx(list(strength.shear))
        most = np.interp(strength.x, demand.x, demand.Mu_most)
        assert list(part["Mu most"] * moment) == pytest.approx(list(most), abs=1e-3)
        designed_for = np.interp(strength.x, demand.x, shear_of(design, index))
        assert list(part["Vu to design for"] * 1000.0) == pytest.approx(list(designed_for))
    assert begin == len(sheet)


@pytest.mark.parametrize("name", SAMPLES)
def test_checks_are_all_there(name: str) -> None:
    """Every check has a row, one of each kind governs."""
    design = designed(name)
    sheet = sheets(design)["Checks"]
    assert len(sheet) == len(design.checks) > 0
    governing = sheet[sheet["governs"] == "yes"]
    assert sorted(governing["check"]) == sorted({row.id for row in design.checks})
    ratios = sorted(row.ratio for row in design.checks if row.ratio is not None)
    read = sorted(float(value) for value in sheet["use"] if value != "")
    assert read == pytest.approx([ratio for ratio in ratios if np.isfinite(ratio)], rel=SAME)


def test_summary_tells_totals_as_numbers() -> None:
    """Mass, index and bound stand in the column of values."""
    design = designed()
    sheet = sheets(design)["Summary"]
    values = dict(zip(sheet["subject"], sheet["value"], strict=True))
    assert values["mass of steel"] == pytest.approx(design.schedule.mass, rel=SAME)
    assert values["placed index"] == pytest.approx(design.cost, rel=SAME)
    assert values["placed index, bound"] == pytest.approx(min(design.bound, design.cost), rel=SAME)


def test_sheets_are_ready_to_read() -> None:
    """The first row stays in view, and every sheet prints on the width of a page."""
    book = openpyxl.load_workbook(io.BytesIO(beam_workbook(designed())))
    for sheet in book:
        assert sheet.freeze_panes == "A2"
        assert sheet.page_setup.fitToWidth == 1


@pytest.mark.parametrize("text", [*HOSTILE.values(), "=1+1"])
def test_texts_never_become_formulas(text: str) -> None:
    """No cell is a formula, whatever the title and the mark are."""
    book = openpyxl.load_workbook(io.BytesIO(beam_workbook(renamed(text))))
    kinds = {cell.data_type for sheet in book for row in sheet.iter_rows() for cell in row}
    assert kinds <= {"n", "s", "inlineStr"}


def test_without_a_design() -> None:
    """The summary gives the reasons; the envelopes hold the demand alone."""
    result = without_design()
    read = sheets(result)
    assert list(read) == ["Summary", "Envelopes"]
    assert result.reasons[0] in list(read["Summary"]["note"])
    assert "phi Vn" not in read["Envelopes"].columns
    assert len(read["Envelopes"]) == sum(len(demand.x) for demand in result.demands)


@pytest.mark.parametrize("name", SAMPLES)
def test_equal_designs_give_equal_bytes(name: str) -> None:
    """Workbook and CSV depend on the design alone."""
    assert beam_workbook(designed(name)) == beam_workbook(designed(name))
    assert schedule_csv(designed(name)) == schedule_csv(designed(name))


def test_csv_holds_the_schedule() -> None:
    """One line for each mark, with the mass."""
    design = designed()
    head, *rows = list(csv.reader(io.StringIO(schedule_csv(design))))
    assert head[0] == "mark"
    assert [row[0] for row in rows] == [item.mark for item in design.schedule.marks]
    masses = [float(row[-1]) for row in rows]
    assert masses == pytest.approx([item.mass for item in design.schedule.marks], rel=1e-9)
