"""The elevation of a designed beam as scalable drawings, one for each strip of spans.

Lengths are to scale. Bars are drawn twice: in the concrete at their height, and pulled out of
it, each on a line of its own with mark, number and the distance of its ends from the nearest
centreline of a support.
"""

from __future__ import annotations

from dataclasses import dataclass
from xml.etree import ElementTree as ET

from engine.beams.bending import hook_leg
from engine.beams.spans import Overhang
from engine.units import plain
from optimizer.beams.design import BeamDesign
from optimizer.beams.variants import Face, Piece, Role
from optimizer.beams.words import zones_of
from optimizer.documents import svg_elements as ink
from optimizer.documents.beam_pulled import PulledBar, pulled_bar, set_out
from optimizer.documents.beam_strips import Strip, centrelines, lanes, pieces_in, strips_of
from optimizer.documents.wording import visible

_WIDTH = 940.0
_MARGIN = 56.0  # left and right of the strip [px]
_LANE = 31.0  # from one pulled-out bar to the next [px]
_LEAST_DEPTH, _MOST_DEPTH = 58.0, 110.0  # of the deepest section as drawn [px]
_TICK = 3.5
_PAST = 5.0  # gap between texts [px]


@dataclass(frozen=True, slots=True, kw_only=True)
class _View:
    """Where a strip lies on its drawing."""

    design: BeamDesign
    strip: Strip
    scale: float
    heights: float
    top: float

    def x(self, place: float) -> float:
        """Column of a place on the axis. [px]"""
        return _MARGIN + (place - self.strip.start) * self.scale

    def y(self, depth: float) -> float:
        """Row of a depth below the top face. [px]"""
        return self.top + depth * self.heights

    def text(self, value: float) -> str:
        """A length as it is set out."""
        return set_out(self.design.edition, value)


def elevations(design: BeamDesign) -> list[tuple[str, int]]:
    """Draw the elevation of a beam.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    list of (str, int)
        An ``svg`` element for each strip, and how many times the heights are enlarged.
    """
    strips = strips_of(design.problem.beam)
    longest = max(strip.length for strip in strips)
    scale = (_WIDTH - 2 * _MARGIN) / longest
    deepest = max(span.outline.depth for span in design.problem.beam.spans)
    scale = min(scale, _MOST_DEPTH / deepest)
    factor = 1
    while deepest * scale * factor < _LEAST_DEPTH:
        factor += 1
    return [(_strip(design, strip, scale, scale * factor), factor) for strip in strips]


def _strip(design: BeamDesign, strip: Strip, scale: float, heights: float) -> str:
    view = _View(design=design, strip=strip, scale=scale, heights=heights, top=0.0)
    tops, bottoms = (
        [_drawn(view, piece, mark) for piece, mark in pieces_in(design, strip, face)]
        for face in (Face.TOP, Face.BOTTOM)
    )
    top_lanes, bottom_lanes = (lanes([item.extent for item in items]) for items in (tops, bottoms))
    above, below = (max(found, default=-1) + 1 for found in (top_lanes, bottom_lanes))
    top = 34.0 + above * _LANE + 14.0
    view = _View(design=design, strip=strip, scale=scale, heights=heights, top=top)
    deepest = max(design.problem.beam.spans[index].outline.depth for index in strip.spans)
    face = view.y(deepest)
    stirrup_row = face + 46.0
    first_lane = stirrup_row + 36.0
    sizes_row = first_lane + below * _LANE + 8.0
    marks = [design.problem.beam.spans[index].mark for index in strip.spans]
    root = ink.drawing(
        _WIDTH,
        sizes_row + 48.0,
        visible(f"Elevation of {design.problem.mark}: {', '.join(marks)}"),
        "beam-drawing",
    )
    _gridlines(root, view, sizes_row + 26.0)
    _concrete(root, view, face)
    _bars_in_place(root, view)
    for item, lane in zip(tops, top_lanes, strict=True):
        _pulled_out(root, item, 34.0 + (lane + 0.5) * _LANE)
    for item, lane in zip(bottoms, bottom_lanes, strict=True):
        _pulled_out(root, item, first_lane + (lane + 0.5) * _LANE)
    _zones(root, view, stirrup_row)
    _sizes(root, view, sizes_row)
    return ink.text_of(root)


def _drawn(view: _View, piece: Piece, mark: str) -> PulledBar:
    return pulled_bar(view.design, view.strip, piece, mark, x=view.x, letter=ink.LETTER, past=_PAST)


def _pulled_out(root: ET.Element, item: PulledBar, row: float) -> None:
    """One bar on its line, label above, distances of its ends below."""
    piece = item.piece
    kind = "rebar light" if piece.role in (Role.HANGER, Role.SKIN, Role.FLANGE) else "rebar"
    hook = 8.0 if piece.face is Face.TOP else -8.0
    points = [(item.start, row), (item.end, row)]
    if piece.hook_start and not item.cut_start:
        points.insert(0, (item.start, row + hook))
    if piece.hook_end and not item.cut_end:
        points.append((item.end, row + hook))
    ink.line(root, kind, *points)
    for cut, column in ((item.cut_start, item.start), (item.cut_end, item.end)):
        if cut:
            ink.line(
                root, "break", (column - 3.0, row + 5.0), (column, row - 1.5),
                (column, row + 1.5), (column + 3.0, row - 5.0),
            )  # fmt: skip
    ink.words(root, "note strong", ((item.start + item.end) / 2.0, row - 4.0), item.label,
              anchor="middle")  # fmt: skip
    for end in item.ends:
        if end.inside:
            ink.line(root, "dimension", (end.line, row + 3.5), (end.column, row + 3.5))
            middle = (end.line + end.column) / 2.0
            ink.words(root, "small", (middle, row + 14.0), end.text, anchor="middle")
        else:
            at = (end.column + end.outwards * _PAST, row + 8.0)
            anchor = "start" if end.outwards > 0.0 else "end"
            ink.words(root, "small", at, end.text, anchor=anchor)


def _gridlines(root: ET.Element, view: _View, bottom: float) -> None:
    """Centrelines of the supports with their marks."""
    beam = view.design.problem.beam
    for support, place in zip(beam.supports, centrelines(beam), strict=True):
        if not view.strip.start - 1e-6 <= place <= view.strip.end + 1e-6:
            continue
        x = view.x(place)
        ink.line(root, "centreline", (x, 26.0), (x, bottom))
        ink.circle(root, "bubble", (x, 14.0), 11.0)
        mark = visible(support.mark)
        shown = mark if len(mark) <= 3 else f"{mark[:2]}."
        ink.words(root, "note strong", (x, 18.0), shown, anchor="middle")


def _concrete(root: ET.Element, view: _View, face: float) -> None:
    """Concrete, supports below, slabs, and every stirrup."""
    design, beam = view.design, view.design.problem.beam
    shapes = ink.group(root, "to-scale", scale=repr(view.scale), start=repr(view.strip.start))
    for support, place in zip(beam.supports, centrelines(beam), strict=True):
        if view.strip.start - 1e-6 <= place <= view.strip.end + 1e-6:
            left, right = (view.x(place + side * support.width / 2.0) for side in (-1.0, 1.0))
            ink.box(shapes, "support", (left, view.top), (right - left, face + 18.0 - view.top))
    for index in view.strip.spans:
        span, origin = beam.spans[index], beam.origins[index]
        start, end = (origin + place for place in beam.clear_range(index))
        left, right = view.x(start), view.x(end)
        depth = view.y(span.outline.depth) - view.top
        ink.box(shapes, "concrete", (left, view.top), (right - left, depth))
        plan, inset = design.stirrups[index], design.frame.sections[index].cover
        places = [plan.first]
        for spaces, spacing, _, _ in zones_of(plan):
            places += [places[-1] + spacing * number for number in range(1, spaces + 1)]
        for place in places:
            x = view.x(start + place)
            ink.line(
                shapes, "stirrup-line", (x, view.y(inset)), (x, view.y(span.outline.depth - inset))
            )
    for index in view.strip.spans:
        top = beam.spans[index].outline.top
        if top is not None:
            start, end = (beam.origins[index] + place for place in beam.clear_range(index))
            row = view.y(top.thickness)
            ink.line(shapes, "slab", (view.x(start), row), (view.x(end), row))


def _bars_in_place(root: ET.Element, view: _View) -> None:
    """Bars at their height in the concrete."""
    beam, strip = view.design.problem.beam, view.strip
    for piece in view.design.pieces:
        start, end = max(piece.start, strip.start), min(piece.end, strip.end)
        if end <= start or piece.role is Role.SKIN or piece.role is Role.FLANGE:
            continue
        middle = (start + end) / 2.0
        own = next(
            index
            for index in strip.spans
            if middle <= beam.origins[index] + beam.spans[index].length + strip.length * 1e-9
            or index == strip.spans[-1]
        )
        depth = beam.spans[own].outline.depth
        up = piece.surface + piece.bar.diameter / 2.0
        row = view.y(up if piece.face is Face.TOP else depth - up)
        points = [(view.x(start), row), (view.x(end), row)]
        leg = hook_leg(view.design.edition, piece.bar) - piece.bar.diameter / 2.0
        inwards = leg * view.heights * (1.0 if piece.face is Face.TOP else -1.0)
        if piece.hook_start and piece.start >= strip.start - 1e-6:
            points.insert(0, (view.x(start), row + inwards))
        if piece.hook_end and piece.end <= strip.end + 1e-6:
            points.append((view.x(end), row + inwards))
        ink.line(root, "rebar in-place", *points)


def _zones(root: ET.Element, view: _View, row: float) -> None:
    """Dimension lines of the stirrup zones: spaces and spacing; the marks stand below."""
    design, beam = view.design, view.design.problem.beam
    for index in view.strip.spans:
        start, end = (beam.origins[index] + place for place in beam.clear_range(index))
        plan = design.stirrups[index]
        marks = visible(" + ".join(design.schedule.of_stirrups[index]))
        wide = [
            (f"{spaces} @ {plain(spacing)}", view.x(start + low), view.x(start + high))
            for spaces, spacing, low, high in zones_of(plan)
        ]
        low_row = [-1e9]
        for text, left, right in wide:
            ink.line(root, "dimension", (left, row), (right, row))
            for column in (left, right):
                _tick(root, column, row)
            width = ink.LETTER * len(text)
            middle = (left + right) / 2.0
            if width + 4.0 <= right - left:
                ink.words(root, "note", (middle, row - 4.0), text, anchor="middle")
            else:
                # Too narrow for its text: it goes below the line, clear of the one before.
                middle = max(middle, low_row[-1] + width / 2.0 + _PAST)
                low_row.append(middle + width / 2.0)
                ink.words(root, "note", (middle, row + 13.0), text, anchor="middle")
        note = f"{plan.count} {marks}, first {view.text(plan.first)}"
        if ink.LETTER * len(note) > view.x(end) - view.x(start):
            note = f"{plan.count} {marks}"
        middle = (view.x(start) + view.x(end)) / 2.0
        ink.words(root, "small", (middle, row + 26.0), note, anchor="middle")


def _sizes(root: ET.Element, view: _View, row: float) -> None:
    """Dimensions: clear spans and widths of supports, then lengths between centrelines."""
    beam = view.design.problem.beam
    for index in view.strip.spans:
        start, end = (beam.origins[index] + place for place in beam.clear_range(index))
        _across(root, view, start, end, row, view.text(end - start))
        first = beam.origins[index]
        last = first + beam.spans[index].length
        name = beam.spans[index].mark
        text = f"{visible(name)}  {view.text(last - first)}"
        if beam.spans[index].overhang is not Overhang.NONE:
            text = view.text(last - first)
        _across(root, view, first, last, row + 26.0, text)
    for support, place in zip(beam.supports, centrelines(beam), strict=True):
        if view.strip.start - 1e-6 <= place <= view.strip.end + 1e-6:
            half = support.width / 2.0
            _across(root, view, place - half, place + half, row, view.text(support.width),
                    below=True)  # fmt: skip


def _across(
    root: ET.Element, view: _View, start: float, end: float, row: float, text: str,
    *, below: bool = False,
) -> None:  # fmt: skip
    left, right = view.x(start), view.x(end)
    ink.line(root, "dimension", (left, row), (right, row))
    for column in (left, right):
        _tick(root, column, row)
    at = ((left + right) / 2.0, row + 13.0 if below else row - 4.0)
    ink.words(root, "small" if below else "note", at, text, anchor="middle")


def _tick(root: ET.Element, x: float, y: float) -> None:
    ink.line(root, "tick", (x - _TICK, y + _TICK), (x + _TICK, y - _TICK))
