"""The drawing of a beam read back: bars, stirrups, cross-sections, marks, a clean audit."""

from __future__ import annotations

import io
import re
from itertools import pairwise
from typing import Any

import ezdxf
import pytest
from ezdxf.document import Drawing
from ezdxf.tools.text import fast_plain_mtext

from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.variants import Role
from optimizer.documents.beam_cuts import beam_cuts, loop_edges
from optimizer.documents.beam_drawing import beam_drawing
from tests.documents.beam_samples import SAMPLES, designed, renamed, without_design
from tests.documents.sample_results import HOSTILE

CLOSE = 1e-6


def read(result: BeamDesign | NoDesign) -> Drawing:
    """Return the drawing of a beam as ezdxf reads it."""
    return ezdxf.read(io.StringIO(beam_drawing(result)))


def entities(document: Drawing, kind: str) -> list[Any]:
    """Return what a drawing shows of a kind."""
    return list(document.modelspace().query(kind))


def texts(document: Drawing) -> list[str]:
    """Return every line of text."""
    found = entities(document, "MTEXT")
    return [line for item in found for line in str(fast_plain_mtext(item.text)).splitlines()]


@pytest.mark.parametrize("name", SAMPLES)
def test_drawing_needs_no_repair(name: str) -> None:
    """An audit of the file finds no error and mends nothing."""
    audit = read(designed(name)).audit()
    assert audit.errors == []
    assert audit.fixes == []


@pytest.mark.parametrize("name", SAMPLES)
def test_everything_lies_on_a_named_layer(name: str) -> None:
    """Concrete, stirrups, bars, dimensions and texts are apart."""
    document = read(designed(name))
    kinds: dict[str, set[str]] = {}
    for entity in document.modelspace():
        kinds.setdefault(entity.dxf.layer, set()).add(entity.dxftype())
    assert kinds == {
        "CONCRETE": {"LWPOLYLINE"},
        "STIRRUP": {"LWPOLYLINE"},
        "BARS": {"CIRCLE", "LWPOLYLINE"},
        "DIMENSIONS": {"DIMENSION"},
        "TEXT": {"MTEXT", "LINE", "LWPOLYLINE", "CIRCLE"},
    }
    assert all(layer in document.layers for layer in kinds)


@pytest.mark.parametrize("name", SAMPLES)
def test_bars_have_their_places_and_marks(name: str) -> None:
    """Each bar lies in the concrete from end to end, and its label and mark are written."""
    design = designed(name)
    document = read(design)
    lines = [
        [(x, y) for x, y, *_ in item.get_points()]
        for item in entities(document, "LWPOLYLINE[layer=='BARS']")
    ]
    deepest = max(span.outline.depth for span in design.problem.beam.spans)
    inside = [points for points in lines if all(0.0 <= y <= deepest for _, y in points)]
    drawn = [(min(x for x, _ in points), max(x for x, _ in points)) for points in inside]
    written = texts(document)
    for piece, mark in zip(design.pieces, design.schedule.of_pieces, strict=True):
        assert f"{piece.count} {piece.bar.designation} {mark}" in written
        if piece.role in (Role.SKIN, Role.FLANGE):
            continue
        radius = piece.bar.diameter / 2.0
        start = piece.start + (radius if piece.hook_start else 0.0)
        end = piece.end - (radius if piece.hook_end else 0.0)
        assert any(abs(low - start) < CLOSE and abs(high - end) < CLOSE for low, high in drawn)
    for item in design.schedule.marks:
        assert item.mark in written


@pytest.mark.parametrize("name", SAMPLES)
def test_every_stirrup_is_drawn(name: str) -> None:
    """A line for each stirrup set, at equal distances within its zone."""
    design = designed(name)
    lines = [
        item
        for item in entities(read(design), "LWPOLYLINE[layer=='STIRRUP']")
        if not item.closed and len(item) == 2 and item[0][0] == item[1][0]
    ]
    assert len(lines) == sum(plan.count for plan in design.stirrups)
    xs = sorted(item[0][0] for item in lines)
    beam = design.problem.beam
    for index, plan in enumerate(design.stirrups):
        start, end = (beam.origins[index] + place for place in beam.clear_range(index))
        own = [x for x in xs if start < x < end]
        assert own[0] - start == pytest.approx(plan.first)
        assert end - own[-1] == pytest.approx(plan.last)
        gaps = [right - left for left, right in pairwise(own)]
        assert max(gaps) <= max(plan.spacings) + CLOSE


@pytest.mark.parametrize("name", SAMPLES)
def test_cross_sections_have_all_bars(name: str) -> None:
    """A circle for each bar of each cross-section, two closed lines for each loop."""
    design = designed(name)
    document = read(design)
    cuts = beam_cuts(design)
    circles = entities(document, "CIRCLE[layer=='BARS']")
    assert len(circles) == sum(len(row.bars) for cut in cuts for row in cut.rows)
    closed = [item for item in entities(document, "LWPOLYLINE[layer=='STIRRUP']") if item.closed]
    loops = [item for item in closed if len(item) == 8]
    assert len(loops) == 2 * sum(len(loop_edges(design, cut.span)) for cut in cuts)
    written = texts(document)
    for cut in cuts:
        assert cut.title in written


@pytest.mark.parametrize("name", SAMPLES)
def test_dimensions_measure_spans(name: str) -> None:
    """Clear spans, lengths between centrelines and widths of supports are dimensioned."""
    design = designed(name)
    beam = design.problem.beam
    measured = [item.get_measurement() for item in entities(read(design), "DIMENSION")]
    wanted = [span.length for span in beam.spans]
    wanted += [beam.clear_length(index) for index in range(len(beam.spans))]
    wanted += [support.width for support in beam.supports]
    for value in wanted:
        assert any(abs(found - value) < CLOSE for found in measured)


def test_without_a_design() -> None:
    """Concrete and supports stand alone, and the drawing says that there are no bars."""
    document = read(without_design())
    assert entities(document, "LWPOLYLINE[layer=='BARS']") == []
    assert len(entities(document, "LWPOLYLINE[layer=='CONCRETE']")) >= 6
    assert any("no bars drawn" in line for line in texts(document))


@pytest.mark.parametrize("text", [*HOSTILE.values(), "\\P{\\C1;x} %%c ^J"])
def test_hostile_texts_are_texts(text: str) -> None:
    """A title full of control codes neither breaks the file nor adds entities."""
    hostile = read(renamed(text))
    assert hostile.audit().errors == []
    count = len(entities(hostile, "MTEXT"))
    assert count == len(entities(read(renamed("Plain")), "MTEXT"))


@pytest.mark.parametrize("name", SAMPLES)
def test_equal_designs_give_equal_drawings(name: str) -> None:
    """The drawing depends on the design alone, and has no date of today."""
    drawing = beam_drawing(designed(name))
    assert drawing == beam_drawing(designed(name))
    assert not re.search(r"\$TDCREATE\n 40\n2[5-9]\d{5}", drawing)
