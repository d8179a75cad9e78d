"""Cross-sections and schedule of a beam on its drawing."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

from engine.beams.bending import Shape
from engine.units import plain
from optimizer.beams.design import BeamDesign
from optimizer.beams.schedule import BarMark
from optimizer.beams.words import leg_text, length_text, mass_unit
from optimizer.documents.beam_cuts import BeamCut, beam_cuts, loop_edges
from optimizer.documents.drawing_paper import (
    BARS,
    CONCRETE,
    STIRRUP,
    TEXT,
    Paper,
    next_step,
    width_of,
)
from optimizer.documents.section_shapes import Bend, Point, concrete_corners
from optimizer.documents.wording import visible

_QUARTER_TURN = math.tan(math.pi / 8.0)
_STEP = {"us": 10.0, "si": 250.0}  # origins of cross-sections lie on multiples of it
_PITCH = 2.2  # from one call-out to the next, in heights of text
_HEAD = 1.4  # size of a heading over ordinary text
_MOST_IN_ROW = 12
_BESIDE = 3.0
_ROW = 5.0  # of the schedule


@dataclass(frozen=True, slots=True, kw_only=True)
class _Callout:
    """A text beside a cross-section, and the point that its line leads to."""

    at: Point
    text: str


def draw_cuts(paper: Paper, design: BeamDesign, corner: Point, width: float) -> tuple[float, float]:
    """Draw the cross-sections of a beam in rows.

    Parameters
    ----------
    paper : Paper
        Drawing to add to.
    design : BeamDesign
        Design.
    corner : tuple of float
        Upper left corner of the first row. [in or mm]
    width : float
        Width to fill before a new row starts. [in or mm]

    Returns
    -------
    tuple of float
        Rightmost x and lowest y of what is drawn. [in or mm]
    """
    h, step = paper.height, _STEP[design.edition.units]
    y, farthest = corner[1], corner[0]
    row: list[BeamCut] = []
    rows = []
    reach = corner[0]
    for cut in beam_cuts(design):
        needed = sum(_reach(cut, h))
        if row and (
            reach + needed > max(width, corner[0] + 3.0 * needed) or len(row) == _MOST_IN_ROW
        ):
            rows.append(row)
            row, reach = [], corner[0]
        row.append(cut)
        reach += needed + step
    rows.append(row)
    for own in rows:
        deepest = max(cut.section.outline.depth for cut in own)
        base = -next_step(-(y - 4.0 * h - deepest), step)
        x = corner[0]
        for cut in own:
            left, right = _reach(cut, h)
            x = next_step(x + left, step)
            _draw_cut(paper, design, cut, (x, base))
            x += right
        farthest = max(farthest, x)
        y = base - 10.0 * h
    return farthest, y


def _reach(cut: BeamCut, h: float) -> tuple[float, float]:
    """How far a cross-section reaches left and right of its web's centreline."""
    xs = [x for x, _ in concrete_corners(cut.section.outline)]
    texts = [item.text for item in _callouts(cut)]
    right = max(xs) + _BESIDE * h + width_of(texts, h)
    return -min(xs) + 6.0 * h, max(right, min(xs) + width_of(_caption(cut), _HEAD * h)) + 2.0 * h


def _caption(cut: BeamCut) -> list[str]:
    lines = [cut.title]
    if cut.beside:
        lines.append(f"lapped beside, not drawn: {cut.beside}")
    return [visible(line) for line in lines]


def _draw_cut(paper: Paper, design: BeamDesign, cut: BeamCut, at: Point) -> None:
    """One cross-section: concrete, stirrups, bars, two dimensions and its call-outs."""
    h, section = paper.height, cut.section
    outline = section.outline
    corners = concrete_corners(outline)
    paper.outline(corners, CONCRETE, at)
    for edges in loop_edges(design, cut.span):
        for bends in _loop(cut, edges):
            paper.bent_outline(bends, STIRRUP, at)
    for row in cut.rows:
        for bar in row.bars:
            paper.circle((bar.x, bar.y), bar.diameter / 2.0, BARS, at)
    half = outline.web / 2.0
    low, high = min(x for x, _ in corners), max(x for x, _ in corners)
    paper.dimension((-half, 0.0), (half, 0.0), -2.5 * h, at)
    paper.dimension((low, 0.0), (low, outline.depth), low - 3.0 * h, at, upright=True)
    items = _callouts(cut)
    x = high + _BESIDE * h
    y = outline.depth + h
    rows = []
    for number, item in enumerate(items):
        # From the top down, each as near its bar as those below it leave room for.
        room = _PITCH * h * (len(items) - 1 - number)
        y = min(y - (_PITCH * h if number else 0.0), max(item.at[1], room))
        rows.append(y)
    for item, y in zip(items, rows, strict=True):
        paper.line(item.at, (x - 0.5 * h, y), at)
        paper.text([item.text], (x, y), at, low=False)
    head, *others = _caption(cut)
    paper.text([head], (low, -4.5 * h), at, size=_HEAD)
    if others:
        paper.text(others, (low, -4.5 * h - 1.8 * _HEAD * h), at)


def _loop(cut: BeamCut, edges: tuple[float, float]) -> list[list[Bend]]:
    """Outer and inner face of a closed stirrup."""
    section = cut.section
    size = section.stirrup.diameter
    found = []
    for inset, radius in ((0.0, section.bend_radius + size), (size, section.bend_radius)):
        left, right = edges[0] + inset, edges[1] - inset
        low, high = section.cover + inset, section.outline.depth - section.cover - inset
        r = min(radius, (right - left) / 2.0 - 1e-6, (high - low) / 2.0 - 1e-6)
        found.append(
            [
                (left + r, low, 0.0),
                (right - r, low, _QUARTER_TURN),
                (right, low + r, 0.0),
                (right, high - r, _QUARTER_TURN),
                (right - r, high, 0.0),
                (left + r, high, _QUARTER_TURN),
                (left, high - r, 0.0),
                (left, low + r, _QUARTER_TURN),
            ]
        )
    return found


def _callouts(cut: BeamCut) -> list[_Callout]:
    """What is named beside a cross-section, from the top down."""
    section = cut.section
    items = []
    for row in cut.rows:
        right = max(row.bars, key=lambda bar: (bar.x, bar.y))
        at = (right.x + right.diameter / 2.0, right.y)
        items.append(_Callout(at=at, text=f"{row.label} ({row.name})"))
    half = section.outline.web / 2.0
    if cut.flange and section.outline.top is not None:
        y = section.outline.depth - min(section.cover, section.outline.top.thickness / 2.0)
        edge = max(x for x, _ in concrete_corners(section.outline))
        items.append(_Callout(at=(edge, y), text=f"{cut.flange} (in the outer flange)"))
    unit = section.length_unit
    spacing = f"{cut.stirrup} at {plain(cut.spacing)} {unit}"
    y = section.outline.depth * 0.4
    items.append(_Callout(at=(half - section.cover, y), text=spacing))
    ordered = sorted(items, key=lambda item: (-item.at[1], -item.at[0]))
    return [replace(item, text=visible(item.text)) for item in ordered]


def draw_schedule(paper: Paper, design: BeamDesign, corner: Point) -> tuple[float, float]:
    """Draw the schedule: a row for each mark, with its sketch.

    Parameters
    ----------
    paper : Paper
        Drawing to add to.
    design : BeamDesign
        Design.
    corner : tuple of float
        Upper left corner. [in or mm]

    Returns
    -------
    tuple of float
        Rightmost x and lowest y. [in or mm]
    """
    h, unit = paper.height, mass_unit(design.edition)
    names = ("mark", "number", "size", "shape", "cut length", f"{unit} each", unit)
    rows = [_cells(design, item) for item in design.schedule.marks]
    starts = [corner[0]]
    for number, name in enumerate(names):
        texts = [name, *(row[number] for row in rows)]
        width = 22.0 * h + width_of(texts, h) if number == 3 else width_of(texts, h)
        starts.append(starts[-1] + width + 2.0 * h)
    right = starts[-1]
    paper.text(["Schedule"], corner, (0.0, 0.0), size=_HEAD)
    y = corner[1] - 3.0 * h
    for name, x in zip(names, starts, strict=False):
        paper.text([name], (x, y - 1.5 * h), (0.0, 0.0), low=False)
    y -= 3.0 * h
    paper.path([(corner[0], y), (right, y)], TEXT, (0.0, 0.0))
    for item, row in zip(design.schedule.marks, rows, strict=True):
        middle = y - _ROW * h / 2.0
        for number, (text, x) in enumerate(zip(row, starts, strict=False)):
            place = (x + (22.0 * h if number == 3 else 0.0), middle)
            paper.text([text], place, (0.0, 0.0), low=False)
        _sketch(paper, design, item, (starts[3], middle))
        y -= _ROW * h
        paper.path([(corner[0], y), (right, y)], TEXT, (0.0, 0.0))
    total = f"steel {design.schedule.mass:.1f} {unit}"
    paper.text([total], (corner[0], y - 1.5 * h), (0.0, 0.0), low=False)
    return right, y - 3.0 * h


def _cells(design: BeamDesign, item: BarMark) -> list[str]:
    return [
        item.mark,
        str(item.count),
        visible(item.bar.designation),
        item.shape.shape.value,
        length_text(design.edition, item.length),
        f"{item.mass_each:.2f}",
        f"{item.mass:.1f}",
    ]


def _sketch(paper: Paper, design: BeamDesign, item: BarMark, at: Point) -> None:
    """Shape of a bar with its legs, not to scale."""
    h, edition, shape = paper.height, design.edition, item.shape
    if shape.shape is Shape.CLOSED:
        box = [(6.0 * h, -1.0 * h), (11.0 * h, -1.0 * h), (11.0 * h, 2.0 * h), (6.0 * h, 2.0 * h)]
        paper.outline(box, STIRRUP, at)
        for start in ((6.0 * h, 1.3 * h), (6.7 * h, 2.0 * h)):
            paper.path([start, (start[0] + 0.8 * h, start[1] - 0.8 * h)], STIRRUP, at)
        width, height = (leg_text(edition, leg) for leg in shape.legs)
        paper.text([width], (7.0 * h, -1.7 * h), at, low=False)
        paper.text([height], (11.5 * h, 0.5 * h), at, low=False)
        return
    hooks = len(shape.legs) - 1
    left, right, base = 5.0 * h, 15.0 * h, -0.6 * h
    points = [(left, base), (right, base)]
    if hooks:
        points.insert(0, (left, 1.8 * h))
        text = leg_text(edition, shape.legs[0])
        paper.text([text], (left - 0.5 * h - width_of([text], h), 0.8 * h), at, low=False)
    if hooks == 2:
        points.append((right, 1.8 * h))
        paper.text([leg_text(edition, shape.legs[2])], (right + 0.5 * h, 0.8 * h), at, low=False)
    paper.path(points, BARS, at)
    main = length_text(edition, shape.legs[1 if hooks else 0])
    paper.text([main], (left + 2.0 * h, base - 1.2 * h), at, low=False)
