"""A designed beam as a drawing (DXF): elevation, cross-sections and schedule at full size.

One drawing unit is an inch or a millimetre. The elevation's origin is the left end of the
beam's axis at the lowest bottom face; y points upwards.
"""

from __future__ import annotations

import textwrap

from engine.beams.bending import hook_leg
from engine.units import plain
from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.variants import Face, Piece, Role
from optimizer.beams.words import NOT_CHECKED, mass_unit, zones_of
from optimizer.documents.beam_drawing_parts import draw_cuts, draw_schedule
from optimizer.documents.beam_pulled import PulledBar, pulled_bar, set_out
from optimizer.documents.beam_strips import Strip, centrelines, lanes, pieces_in
from optimizer.documents.drawing_paper import (
    BARS,
    CONCRETE,
    STIRRUP,
    TEXT,
    Paper,
    width_of,
)
from optimizer.documents.section_shapes import Point
from optimizer.documents.wording import visible
from optimizer.wording import CAUTION

# 3/32 in at a scale of 1/2 in = 1 ft, 2 mm at 1:25.
_TEXT_HEIGHT = {"us": 2.25, "si": 50.0}
_ORIGIN: Point = (0.0, 0.0)
_LETTER = 0.8
# In heights of text.
_LANE, _BUBBLE, _FOOT = 5.5, 2.5, 4.0
_NOTE_LETTERS, _LONGEST = 110, 80


def beam_drawing(result: BeamDesign | NoDesign) -> str:
    """Draw a beam.

    Parameters
    ----------
    result : BeamDesign or NoDesign
        Result of a beam job.

    Returns
    -------
    str
        DXF of release R2010; equal results give equal text. Without a design the elevation
        shows concrete and supports alone.
    """
    problem = result.problem
    paper = Paper(problem.edition.system, _TEXT_HEIGHT[problem.edition.units])
    h = paper.height
    beam = problem.beam
    total = sum(span.length for span in beam.spans)
    strip = Strip(spans=range(len(beam.spans)), start=0.0, end=total)
    deepest = max(span.outline.depth for span in beam.spans)
    _concrete(paper, result, deepest)
    top = deepest + 3.0 * h
    bottom = -_FOOT * h
    if isinstance(result, BeamDesign):
        _stirrups(paper, result, deepest)
        _bars_in_place(paper, result, deepest)
        _zones(paper, result, deepest)
        top = _pulled(paper, result, strip, Face.TOP, deepest + 3.0 * h)
        bottom = _pulled(paper, result, strip, Face.BOTTOM, bottom - 7.5 * h)
    _gridlines(paper, result, top, bottom)
    bottom = _sizes(paper, result, bottom)
    right = total
    if isinstance(result, BeamDesign):
        right, bottom = draw_cuts(paper, result, (0.0, bottom - 4.0 * h), right)
        reach, bottom = draw_schedule(paper, result, (0.0, bottom - 4.0 * h))
        right = max(right, reach)
    lines = _notes(result)
    bottom -= 4.0 * h
    paper.text(lines, (0.0, bottom), _ORIGIN)
    low = (-14.0 * h, bottom - 1.7 * (len(lines) + 1) * h)
    high = (max(right, width_of(lines, h)) + 14.0 * h, top + (2.0 * _BUBBLE + 2.0) * h)
    return paper.written(low, high)


def _notes(result: BeamDesign | NoDesign) -> list[str]:
    problem = result.problem
    section = problem.sections[0]
    stress = problem.edition.system.trade["stress"]
    title = f"Beam {_short(problem.mark)}"
    title += f": {_short(problem.title)}" if problem.title else ""
    steel = f"{section.steel.name} fy" if section.steel.name else "fy"
    unit = section.length_unit
    lines = [
        f"{title}  ({problem.edition.name})",
        f"f'c {plain(section.concrete.fc)} {stress}, {steel} {plain(section.steel.fy)} {stress},"
        f" cover {plain(section.cover)} {unit}",
    ]
    if isinstance(result, BeamDesign):
        lines.append("passes every check" if result.ok else "FAILS ITS CHECKS")
        lines.append(f"steel {result.schedule.mass:.1f} {mass_unit(result.edition)}")
    else:
        lines.append("no arrangement of bars within the rules: no bars drawn")
    for text in (NOT_CHECKED, CAUTION):
        lines += textwrap.wrap(text, _NOTE_LETTERS)
    return [visible(line) for line in lines]


def _short(text: str) -> str:
    shown = visible(text)
    return shown if len(shown) <= _LONGEST else shown[: _LONGEST - 3] + "..."


def _concrete(paper: Paper, result: BeamDesign | NoDesign, deepest: float) -> None:
    """Spans from face to face, slabs, and supports."""
    beam, foot = result.problem.beam, -_FOOT * paper.height
    for index, span in enumerate(beam.spans):
        start, end = (beam.origins[index] + place for place in beam.clear_range(index))
        low = deepest - span.outline.depth
        corners = [(start, low), (end, low), (end, deepest), (start, deepest)]
        paper.outline(corners, CONCRETE, _ORIGIN)
        if span.outline.top is not None:
            y = deepest - span.outline.top.thickness
            paper.path([(start, y), (end, y)], CONCRETE, _ORIGIN)
    for support, place in zip(beam.supports, centrelines(beam), strict=True):
        half = support.width / 2.0
        corners = [(place - half, foot), (place + half, foot)]
        corners += [(place + half, deepest), (place - half, deepest)]
        paper.outline(corners, CONCRETE, _ORIGIN)


def _stirrups(paper: Paper, design: BeamDesign, deepest: float) -> None:
    """Every stirrup as the line of its leg."""
    beam = design.problem.beam
    for index, span in enumerate(beam.spans):
        face = beam.origins[index] + beam.clear_range(index)[0]
        cover = design.frame.sections[index].cover
        low, high = deepest - span.outline.depth + cover, deepest - cover
        plan = design.stirrups[index]
        places = [plan.first]
        for spaces, spacing, start, _ in zones_of(plan):
            places += [start + spacing * number for number in range(1, spaces + 1)]
        for place in places:
            x = face + place
            paper.path([(x, low), (x, high)], STIRRUP, _ORIGIN)


def _bars_in_place(paper: Paper, design: BeamDesign, deepest: float) -> None:
    """Bars at their height in the concrete, at their centrelines."""
    beam = design.problem.beam
    for piece in design.pieces:
        if piece.role in (Role.SKIN, Role.FLANGE):
            continue
        up = piece.surface + piece.bar.diameter / 2.0
        y = deepest - up
        if piece.face is Face.BOTTOM:
            middle = (piece.start + piece.end) / 2.0
            ends = [
                origin + span.length for origin, span in zip(beam.origins, beam.spans, strict=True)
            ]
            own = next(index for index, end in enumerate(ends) if middle <= end + 1e-6)
            y = deepest - beam.spans[own].outline.depth + up
        paper.path(_with_hooks(design, piece, y), BARS, _ORIGIN)


def _with_hooks(design: BeamDesign, piece: Piece, y: float) -> list[Point]:
    """Centreline of a bar, bends as corners."""
    radius = piece.bar.diameter / 2.0
    leg = hook_leg(design.edition, piece.bar) - radius
    inwards = leg if piece.face is Face.BOTTOM else -leg
    start = piece.start + (radius if piece.hook_start else 0.0)
    end = piece.end - (radius if piece.hook_end else 0.0)
    points: list[Point] = [(start, y), (end, y)]
    if piece.hook_start:
        points.insert(0, (start, y + inwards))
    if piece.hook_end:
        points.append((end, y + inwards))
    return points


def _pulled(paper: Paper, design: BeamDesign, strip: Strip, face: Face, start: float) -> float:
    """Bars pulled out of the concrete, from a height away from it; returns the last height."""
    h = paper.height
    whole = Strip(spans=strip.spans, start=-1e9, end=1e9)
    items = [
        pulled_bar(design, whole, piece, mark, x=float, letter=_LETTER * h, past=h)
        for piece, mark in pieces_in(design, whole, face)
    ]
    rows = lanes([item.extent for item in items])
    count = max(rows, default=-1) + 1
    for item, row in zip(items, rows, strict=True):
        away = (count - row - 0.5) if face is Face.TOP else -(row + 0.5)
        _one_pulled(paper, design, item, start + away * _LANE * h)
    return start + (count if face is Face.TOP else -count) * _LANE * h


def _one_pulled(paper: Paper, design: BeamDesign, item: PulledBar, y: float) -> None:
    h = paper.height
    points = _with_hooks(design, item.piece, y)
    short = [(x, y + max(-1.5 * h, min(1.5 * h, at - y))) for x, at in points]
    paper.path(short, BARS, _ORIGIN)
    width = _LETTER * h * len(item.label)
    paper.text(
        [item.label], ((item.start + item.end - width) / 2.0, y + 1.3 * h), _ORIGIN, low=False
    )
    for end in item.ends:
        if end.inside:
            ends = sorted((end.line, end.column))
            paper.dimension((ends[0], y), (ends[1], y), y - 2.4 * h, _ORIGIN, text=end.text)
        else:
            width = _LETTER * h * len(end.text)
            x = end.column + h if end.outwards > 0.0 else end.column - h - width
            paper.text([end.text], (x, y - 0.9 * h), _ORIGIN, low=False)


def _zones(paper: Paper, design: BeamDesign, deepest: float) -> None:
    """Stirrup zones below the beam: spaces and spacing, then the number of sets."""
    h, beam = paper.height, design.problem.beam
    line = -(_FOOT + 2.5) * h
    for index, span in enumerate(beam.spans):
        face = beam.origins[index] + beam.clear_range(index)[0]
        plan = design.stirrups[index]
        low = deepest - span.outline.depth
        past = -1e9
        for spaces, spacing, start, end in zones_of(plan):
            text = f"{spaces} @ {plain(spacing)}"
            ends = ((face + start, low), (face + end, low))
            if _LETTER * h * len(text) <= end - start:
                paper.dimension(*ends, line, _ORIGIN, text=text)
                continue
            # Too narrow for its text: it stands below the line, clear of the one before.
            paper.dimension(*ends, line, _ORIGIN, text=" ")
            width = _LETTER * h * len(text)
            x = max(face + (start + end - width) / 2.0, past)
            past = x + width + h
            paper.text([text], (x, line - 1.2 * h), _ORIGIN, low=False)
        note = f"{plan.count} {' + '.join(design.schedule.of_stirrups[index])}"
        x = face + (plan.clear - _LETTER * h * len(note)) / 2.0
        paper.text([note], (x, line - 3.0 * h), _ORIGIN, low=False)


def _gridlines(paper: Paper, result: BeamDesign | NoDesign, top: float, bottom: float) -> None:
    """Centrelines of the supports with their marks."""
    beam, h = result.problem.beam, paper.height
    for support, place in zip(beam.supports, centrelines(beam), strict=True):
        paper.path([(place, bottom), (place, top)], TEXT, _ORIGIN)
        centre = (place, top + _BUBBLE * h)
        paper.circle(centre, _BUBBLE * h, TEXT, _ORIGIN)
        mark = visible(support.mark)
        shown = mark if len(mark) <= 4 else f"{mark[:3]}."
        x = place - _LETTER * h * len(shown) / 2.0
        paper.text([shown], (x, centre[1]), _ORIGIN, low=False)


def _sizes(paper: Paper, result: BeamDesign | NoDesign, bottom: float) -> float:
    """Clear spans and supports, then lengths between centrelines; returns the last height."""
    problem, h = result.problem, paper.height
    beam = problem.beam
    line = bottom - 3.0 * h

    def dimension(start: float, end: float, y: float) -> None:
        text = _length(result, end - start)
        paper.dimension((start, bottom), (end, bottom), y, _ORIGIN, text=text)

    for index, span in enumerate(beam.spans):
        start, end = (beam.origins[index] + place for place in beam.clear_range(index))
        dimension(start, end, line)
        dimension(beam.origins[index], beam.origins[index] + span.length, line - 5.5 * h)
    for support, place in zip(beam.supports, centrelines(beam), strict=True):
        half = support.width / 2.0
        dimension(place - half, place + half, line - 2.75 * h)
    return line - 7.5 * h


def _length(result: BeamDesign | NoDesign, value: float) -> str:
    """Length in feet and inches, or as measured in millimetres."""
    return set_out(result.problem.edition, value) if result.problem.edition.units == "us" else "<>"
