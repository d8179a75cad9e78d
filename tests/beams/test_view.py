"""A beam in the terminal: elevation to scale, tables, and what is proved."""

from __future__ import annotations

import io
import re
from dataclasses import replace

import pytest
from rich.cells import cell_len
from rich.console import Console

from engine import EDITIONS
from engine.check_row import State
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.elevation import ASCII, UNICODE, draw_elevation
from optimizer.beams.figures import governing, place_figures
from optimizer.beams.text_canvas import Canvas, Label, cells, place_labels
from optimizer.beams.variants import Role
from optimizer.beams.view import show_beam
from optimizer.beams.words import (
    gap_of,
    length_text,
    place_text,
    proof_text,
    support_lines,
    zones_of,
)
from optimizer.views import View
from tests.beams.designs import designed, not_designed

US, SI = EDITIONS["ACI 318-19"], EDITIONS["ACI 318M-19"]
_BARS = re.compile(r"(\d+) (#\d+|\d+) ([BTHFK]\d+)")


def _printed(
    result: BeamDesign | NoDesign, *, width: int = 80, plain: bool = False, brief: bool = False
) -> str:
    out = io.StringIO()
    console = Console(file=out, width=width, highlight=False, color_system=None)
    show_beam(View(console, plain_text=plain), result, brief=brief)
    return out.getvalue()


# ---------------------------------------------------------------- words


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (335.0, "27'-11\""),
        (0.0, '0"'),
        (12.0, "1'-0\""),
        (12.25, "1'-0 1/4\""),
        (0.375, '3/8"'),
        (-7.125, '-7 1/8"'),
        (-30.5, "-2'-6 1/2\""),
        (11.99, "1'-0\""),
        (-0.01, '0"'),
    ],
)
def test_lengths_in_feet_and_inches(value: float, text: str) -> None:
    """To 1/8 in, whole feet carried over, signs kept."""
    assert length_text(US, value) == text


def test_lengths_in_millimetres() -> None:
    """Whole millimetres."""
    assert length_text(SI, 8234.6) == "8235 mm"


def test_places_are_set_out_from_the_nearest_support() -> None:
    """Left of a support and right of it; 24 ft to B, 20 ft on to C."""
    problem = designed().problem
    assert support_lines(problem.beam) == [0.0, 288.0, 528.0]
    assert place_text(problem, 282.0) == 'B - 6"'
    assert place_text(problem, 300.0) == "B + 1'-0\""
    assert place_text(problem, -6.0) == 'A - 6"'
    assert place_text(problem, 540.0) == "C + 1'-0\""


@pytest.mark.parametrize("units", ["us", "si"])
def test_zones_fill_the_span(units: str) -> None:
    """Zones follow each other from the first stirrup to the last; spaces times spacing fit."""
    for plan in designed(units).stirrups:
        zones = zones_of(plan)
        assert zones[0][2] == pytest.approx(plan.first, abs=1e-9)
        assert zones[-1][3] == pytest.approx(plan.clear - plan.last, abs=1e-9)
        assert sum(spaces for spaces, _, _, _ in zones) + 1 == plan.count
        for spaces, spacing, start, end in zones:
            assert spaces * spacing == pytest.approx(end - start, abs=1e-6)


def test_proof_says_what_is_known() -> None:
    """Proved, proved up to a gap, not proved: three different texts, each with its numbers."""
    design = replace(designed(), cost=200.0, bound=200.0, proved=True)
    assert proof_text(design).startswith("Proved: no beam within the rules")
    assert gap_of(replace(design, bound=200.0001)) == 0.0
    gap = replace(design, bound=190.0)
    assert gap_of(gap) == pytest.approx(0.05)
    assert "190.0 lb" in proof_text(gap)
    assert "5.00 %" in proof_text(gap)
    assert proof_text(replace(gap, proved=False)).startswith("NOT PROVED")


# ---------------------------------------------------------------- elevation


@pytest.mark.parametrize("ink", [UNICODE, ASCII])
@pytest.mark.parametrize("width", [80, 100, 150])
@pytest.mark.parametrize("spans", [1, 2, 5])
def test_elevation_fits_the_page(spans: int, width: int, ink: object) -> None:
    """Never wider than the page, at every number of spans; plain ink is ASCII alone."""
    lines = draw_elevation(designed(spans=spans), width, UNICODE if ink is UNICODE else ASCII)
    assert max(cell_len(line) for line in lines) <= width
    if ink is ASCII:
        assert "\n".join(lines).isascii()


@pytest.mark.parametrize("spans", [1, 2, 5])
def test_elevation_shows_every_bar(spans: int) -> None:
    """Every piece is drawn with its count, size and mark; every support has its name."""
    design = designed(spans=spans)
    text = "\n".join(draw_elevation(design, 80))
    pieces = zip(design.pieces, design.schedule.of_pieces, strict=True)
    wanted = [(str(piece.count), piece.bar.designation, mark) for piece, mark in pieces]
    shown = _BARS.findall(text)
    for item in wanted:
        assert shown.count(item) >= wanted.count(item), item
    for support in design.problem.beam.supports:
        assert re.search(rf"^[ A-J]* {support.mark}( |$)", text, re.MULTILINE)


@pytest.mark.parametrize("units", ["us", "si"])
def test_elevation_is_to_scale(units: str) -> None:
    """A bar's line begins and ends where its length says, to a column."""
    design = designed(units)
    width = 120
    lines = draw_elevation(design, width)
    beam = design.problem.beam
    left = -beam.supports[0].width / 2.0
    whole = sum(span.length for span in beam.spans) + beam.supports[-1].width / 2.0 - left
    scale = (width - 5) / whole
    checked = 0
    for piece, mark in zip(design.pieces, design.schedule.of_pieces, strict=True):
        label = f" {piece.count} {piece.bar.designation} {mark} "
        line = next(text for text in lines if label in text)
        at = line.index(label)
        before = re.search(r"[╺┏┗]━*$", line[:at])
        after = re.match(r"━*[╸┓┛]", line[at + len(label) :])
        if before is None or after is None:
            continue  # the label stands beside a short bar
        assert abs(before.start() - 2 - (piece.start - left) * scale) <= 1.0
        last = at + len(label) + after.end() - 1
        assert abs(last - 2 - (piece.end - left) * scale) <= 1.0
        assert (line[before.start()] in "┏┗") is piece.hook_start
        assert (line[last] in "┓┛") is piece.hook_end
        checked += 1
    assert checked >= 5


def test_many_spans_take_several_strips() -> None:
    """Five spans on 80 columns: two strips that share a support, cut ends marked on both."""
    design = designed(spans=5)
    lines = draw_elevation(design, 80)
    names = [line.split() for line in lines if re.fullmatch(r"[ A-F]+", line) and line.strip()]
    assert [name for strip in names for name in strip] == ["A", "B", "C", "C", "D", "E", "F"]
    assert "…" in "\n".join(lines)
    assert "…" not in "\n".join(draw_elevation(designed(spans=2), 80))


def test_cantilever_is_drawn() -> None:
    """The tip of a cantilever ends the drawing, with its stirrups below."""
    design = designed("si", cantilever=True)
    lines = draw_elevation(design, 80)
    assert sum("1500 mm" in line for line in lines) == 1
    assert sum("@" in line for line in lines) >= 1
    spaces = "\n".join(lines).count("@")
    assert spaces == sum(len(zones_of(plan)) for plan in design.stirrups)


def test_labels_do_not_overlap() -> None:
    """What has no room in a row goes to the next one; nothing leaves the page."""
    canvas = Canvas(20)
    below = place_labels(canvas, 0, [Label(1, "abcdef"), Label(3, "ghi"), Label(19.5, "long")])
    assert below == 2
    assert canvas.lines() == ["abcdef          long", "  ghi"]


def test_wide_and_combining_characters_take_their_cells() -> None:
    """A wide character takes two columns, a combining one none."""
    assert cells("柱1") == ["柱", "", "1"]
    assert cells("e\u0301x") == ["e\u0301", "x"]
    canvas = Canvas(6)
    canvas.put(0, 0, "柱柱")
    canvas.put(4, 0, "|")
    assert canvas.lines() == ["柱柱|"]
    assert cell_len(canvas.lines()[0]) == 5


# ---------------------------------------------------------------- report


@pytest.mark.parametrize("width", [80, 120])
@pytest.mark.parametrize("units", ["us", "si"])
def test_report_fits_and_is_complete(units: str, width: int) -> None:
    """Every part of the report is there, no line is wider than the page."""
    design = designed(units)
    text = _printed(design, width=width)
    assert max(cell_len(line) for line in text.splitlines()) <= width
    for part in (
        "Bars by place",
        "Where bars end",
        "Schedule",
        "Stirrups",
        "Cut from stock",
        "Proved",
        "Of each kind the row that governs",
        "All rows",
        "Not checked",
        "licensed design professional",
        f"Mass {design.schedule.mass:.1f}",
        f"{len(design.checks)} rows",
    ):
        assert part in text, part
    for item in design.schedule.marks:
        assert re.search(rf"^ ?{item.mark} +{item.count} ", text, re.MULTILINE), item.mark


def test_plain_report_is_ascii() -> None:
    """Plain mode keeps to ASCII from the first line to the last."""
    assert _printed(designed(), plain=True).isascii()
    assert not _printed(designed()).isascii()


def test_brief_report_keeps_what_governs() -> None:
    """Without all rows, but with the governing row of each kind."""
    brief, full = _printed(designed(), brief=True), _printed(designed())
    assert "All rows" not in brief
    assert "Of each kind the row that governs" in brief
    assert len(brief) < len(full)
    for row in governing(designed().checks):
        assert row.id in brief


def test_failing_row_is_named_first() -> None:
    """A design that fails says where, and shows the failing row as governing its kind."""
    good = designed()
    bad = replace(good.checks[0], state=State.FAILS, ratio=0.5, where="X-Y")
    text = _printed(replace(good, checks=(*good.checks, bad)), brief=True)
    assert f"FAILS: {bad.id} (X-Y)" in text
    assert "Passes every check" not in text


def test_governing_row_of_each_kind() -> None:
    """Fails before ok, then the largest ratio, then the first."""

    def row(id: str, where: str, state: State, ratio: float | None) -> BeamCheck:
        return BeamCheck(id=id, clause="1", where=where, state=state, ratio=ratio)

    rows = (
        row("a", "1", State.NOT_APPLICABLE, None),
        row("a", "2", State.OK, 0.4),
        row("b", "3", State.OK, 0.9),
        row("a", "4", State.OK, 0.6),
        row("b", "5", State.FAILS, 0.5),
        row("b", "6", State.OK, 0.95),
        row("a", "7", State.OK, 0.6),
    )
    assert [item.where for item in governing(rows)] == ["4", "5"]


@pytest.mark.parametrize("units", ["us", "si"])
def test_figures_of_places(units: str) -> None:
    """Strength covers demand at every place, and bars come with marks of their own size."""
    design = designed(units, cantilever=units == "si")
    sizes = {item.mark: item.bar for item in design.schedule.marks}
    found = place_figures(design)
    assert [figures.place.mark for figures in found] == [place.mark for place in design.places]
    own = 0
    for figures in found:
        assert 0.0 < figures.demand <= figures.strength * (1 + 1e-9)
        assert tuple(piece for _, piece in figures.pieces) == figures.variant.pieces
        own += len(figures.pieces)
        for mark, piece in figures.pieces:
            assert sizes[mark] == piece.bar
            assert piece.role in (Role.RUN, Role.STOP)
    assert 0 < own <= len(design.pieces)


def test_no_design_says_why() -> None:
    """Reasons by place, what helps, and the largest moments of each span."""
    result = not_designed()
    text = _printed(result)
    joined = " ".join(text.split())
    assert "No beam meets every rule." in text
    for reason in result.reasons:
        assert " ".join(reason.split()) in joined
    assert "What helps" in text
    most = max(float(demand.Mu_most.max()) for demand in result.demands) / 12_000.0
    assert f"{most:.1f}" in text
    assert "Schedule" not in text
    unproved = _printed(replace(result, proved=False))
    assert "NOT PROVED" in unproved
