"""One cross-section on a drawing: shapes, dimensions, call-outs and what is written under it."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise

from engine import CheckedLayout, Outline, Section
from engine.units import plain
from optimizer.documents.drawing_paper import BARS, CONCRETE, STIRRUP, Paper, width_of
from optimizer.documents.section_shapes import (
    DrawnLayer,
    Point,
    concrete_corners,
    drawn_layers,
    overhangs,
    stirrup_bends,
)

# Distances in text heights: dimension lines from the concrete and from each other, texts.
_FIRST_LINE, _NEXT_LINE = 3.0, 2.5
_CAPTION, _ASIDE = 10.0, 2.0
_LINE = 1.7  # from one line of text to the next
_TITLE = 1.5  # size of a mark over ordinary text


@dataclass(frozen=True, slots=True, kw_only=True)
class Panel:
    """One section of a drawing: what is drawn, and what is written under it.

    Attributes
    ----------
    section : Section
        Section to draw.
    checked : CheckedLayout or None
        Its layout; None draws the concrete and the stirrup alone.
    caption : tuple of str
        Lines under it, the mark first.
    """

    section: Section
    checked: CheckedLayout | None
    caption: tuple[str, ...]


def draw_panel(paper: Paper, panel: Panel, at: Point) -> None:
    """Draw one section with its bars, dimensions and texts.

    Parameters
    ----------
    paper : Paper
        Drawing to add to.
    panel : Panel
        What to draw.
    at : tuple of float
        Bottom of the web's centreline on the drawing. [in or mm]
    """
    section = panel.section
    paper.outline(concrete_corners(section.outline), CONCRETE, at)
    for outside in (True, False):
        paper.bent_outline(stirrup_bends(section, outside=outside), STIRRUP, at)
    _widths(paper, section, at)
    _heights(paper, section.outline, _left_end(panel, paper.height), at)
    for face in _faces(panel.checked):
        for layer in face:
            for centre, radius in layer.bars:
                paper.circle(centre, radius, BARS, at)
        _face(paper, section, face, at)
    _stirrup_note(paper, section, at)
    left, _ = _edges(section.outline)
    mark, *facts = panel.caption
    y = -_CAPTION * paper.height
    paper.text([mark], (left, y), at, size=_TITLE)
    paper.text(facts, (left, y - (_TITLE + 1.0) * paper.height), at)


def reach(panel: Panel, h: float) -> tuple[float, float]:
    """Tell how far a panel reaches to the left and to the right of its origin.

    Parameters
    ----------
    panel : Panel
        What to draw.
    h : float
        Height of text. [in or mm]

    Returns
    -------
    tuple of float
        Both as positive distances. [in or mm]
    """
    section = panel.section
    left, right = _edges(section.outline)
    ends = [right, section.outline.web / 2 + _ASIDE * h + width_of([_stirrup_text(section)], h)]
    for face in _faces(panel.checked):
        _, side = _beside(section, face, h)
        ends.append(side + _ASIDE * h + width_of([_layer_text(layer) for layer in face], h))
    mark, *facts = panel.caption
    ends.append(left + max(width_of([mark], _TITLE * h), width_of(facts, h)))
    return -_left_end(panel, h) + (_FIRST_LINE + _NEXT_LINE + 2.0) * h, max(ends)


def rise(panel: Panel, h: float) -> tuple[float, float]:
    """Tell how far a panel reaches below and above its origin.

    Parameters
    ----------
    panel : Panel
        What to draw.
    h : float
        Height of text. [in or mm]

    Returns
    -------
    tuple of float
        Both as positive distances. [in or mm]
    """
    above = panel.section.outline.depth + (_FIRST_LINE + _NEXT_LINE + 2.0) * h
    return (_CAPTION + _TITLE + 1.0 + _LINE * len(panel.caption)) * h, above


def _edges(outline: Outline) -> tuple[float, float]:
    """Leftmost and rightmost x of the concrete."""
    xs = [x for x, _ in concrete_corners(outline)]
    return min(xs), max(xs)


def _side(outline: Outline, low: float, high: float) -> tuple[float, float]:
    """Leftmost and rightmost x of the concrete between two heights."""
    left = right = 0.0
    if outline.bottom is not None and low < outline.bottom.thickness:
        left, right = overhangs(outline, "bottom")
    if outline.top is not None and high > outline.depth - outline.top.thickness:
        above = overhangs(outline, "top")
        left, right = max(left, above[0]), max(right, above[1])
    return -outline.web / 2 - left, outline.web / 2 + right


def _faces(checked: CheckedLayout | None) -> list[list[DrawnLayer]]:
    """Layers by the face that they lie at."""
    layers = [] if checked is None else drawn_layers(checked)
    faces = [[layer for layer in layers if layer.at_bottom is low] for low in (True, False)]
    return [face for face in faces if face]


def _beside(section: Section, face: list[DrawnLayer], h: float) -> tuple[float, float]:
    """Leftmost and rightmost x of the concrete beside the layers of a face and their texts."""
    heights = [face[0].face, *(layer.centroid for layer in face)]
    return _side(section.outline, min(heights) - h, max(heights) + h)


def _left_end(panel: Panel, h: float) -> float:
    """Leftmost x of the concrete and of the layers' dimension lines."""
    ends = [_edges(panel.section.outline)[0]]
    for face in _faces(panel.checked):
        side, _ = _beside(panel.section, face, h)
        ends.append(side - (_FIRST_LINE + _NEXT_LINE * (len(face) - 1)) * h)
    return min(ends)


def _widths(paper: Paper, section: Section, at: Point) -> None:
    """Dimension the widths below and above, the cover among them."""
    outline, h = section.outline, paper.height
    half, depth = outline.web / 2, outline.depth
    line = -_FIRST_LINE * h
    paper.dimension((-half, 0.0), (-half + section.cover, section.cover), line, at)
    line -= _NEXT_LINE * h
    paper.dimension((-half, 0.0), (half, 0.0), line, at)
    _flange_widths(paper, outline, "bottom", 0.0, line - _NEXT_LINE * h, at)
    _flange_widths(paper, outline, "top", depth, depth + _FIRST_LINE * h, at)


def _heights(paper: Paper, outline: Outline, start: float, at: Point) -> None:
    """Dimension the flanges' thickness and the depth, left of a given x."""
    edge, _ = _edges(outline)
    line = start - (_FIRST_LINE if start == edge else _NEXT_LINE) * paper.height
    stops = [0.0]
    if outline.bottom is not None:
        stops.append(outline.bottom.thickness)
    if outline.top is not None:
        stops.append(outline.depth - outline.top.thickness)
    stops.append(outline.depth)
    if len(stops) > 2:
        for low, high in pairwise(stops):
            paper.dimension((edge, low), (edge, high), line, at, upright=True)
        line -= _NEXT_LINE * paper.height
    paper.dimension((edge, 0.0), (edge, outline.depth), line, at, upright=True)


def _flange_widths(
    paper: Paper, outline: Outline, name: str, y: float, line: float, at: Point
) -> None:
    """Dimension a flange's width, and its overhangs where they differ."""
    left, right = overhangs(outline, name)
    if left + right <= 0.0:
        return
    half = outline.web / 2
    outwards = 1.0 if y > 0.0 else -1.0
    if abs(left - right) > 1e-6 * (left + right):
        stops = [-half - left, -half, half, half + right]
        for start, stop in pairwise(stops):
            if stop - start > 0.0:
                paper.dimension((start, y), (stop, y), line, at)
        line += outwards * _NEXT_LINE * paper.height
    paper.dimension((-half - left, y), (half + right, y), line, at)


def _layer_text(layer: DrawnLayer) -> str:
    return f"{layer.name}: {layer.label}"


def _face(paper: Paper, section: Section, face: list[DrawnLayer], at: Point) -> None:
    """Dimension the centroid of each layer from its face, and name the layers."""
    h = paper.height
    left, right = _beside(section, face, h)
    text_x = right + _ASIDE * h
    for number, layer in enumerate(face):
        reach = layer.placed.x[-1] + layer.placed.diameters[-1] / 2
        line = left - (_FIRST_LINE + number * _NEXT_LINE) * h
        ends = sorted([(left, layer.face), (-reach, layer.centroid)], key=lambda point: point[1])
        paper.dimension(ends[0], ends[1], line, at, upright=True)
        paper.line((reach, layer.centroid), (text_x - 0.5 * h, layer.centroid), at)
        paper.text([_layer_text(layer)], (text_x, layer.centroid), at, low=False)


def _stirrup_text(section: Section) -> str:
    unit = section.length_unit
    return (
        f"stirrup {section.stirrup.designation}, inside radius {plain(section.bend_radius)} {unit},"
        f" cover {plain(section.cover)} {unit}"
    )


def _stirrup_note(paper: Paper, section: Section, at: Point) -> None:
    """Name the stirrup beside the middle of its right leg."""
    outline, h = section.outline, paper.height
    low = 0.0 if outline.bottom is None else outline.bottom.thickness
    high = outline.depth - (0.0 if outline.top is None else outline.top.thickness)
    y = (low + high) / 2
    x = outline.web / 2 + _ASIDE * h
    paper.line((outline.web / 2 - section.cover, y), (x - 0.5 * h, y), at)
    paper.text([_stirrup_text(section)], (x, y), at, low=False)
