"""A cross-section drawn to scale in text.

One column of text is half as wide as it is high, so a column stands for half the length of
a row. The scale is chosen so that neighbouring bars and layers do not fall together; flanges
that are too wide for the page are cut off and deep webs broken, both marked as such.
"""

from __future__ import annotations

import math
import textwrap
from dataclasses import dataclass
from itertools import pairwise

from engine import CheckedLayout, Placement, Section, place
from engine.units import plain

_PAGE = 80  # columns of a page
_WIDEST = 50  # columns for the concrete; the rest of 80 is for the notes beside it
_USUAL, _HIGHEST = 16, 24  # rows: as drawn if bars and layers stay apart, and at most
_OVERHANG = 8  # columns of an overhang that has to be cut


@dataclass(frozen=True, slots=True, kw_only=True)
class Ink:
    """Characters of a drawing."""

    horizontal: str
    vertical: str
    corners: str
    tees: str
    stirrup: str
    bars: str
    cut: str
    broken: str


UNICODE = Ink(
    horizontal="─",
    vertical="│",
    corners="┌┐└┘",
    tees="┐┌┘└",
    stirrup="·",
    bars="●○×",
    cut="╱",
    broken="≈",
)
ASCII = Ink(
    horizontal="-",
    vertical="|",
    corners="++++",
    tees="++++",
    stirrup=".",
    bars="@ox",
    cut="/",
    broken="~",
)


class _Canvas:
    """Characters addressed by column and row."""

    def __init__(self, columns: int, rows: int) -> None:
        self.rows = [[" "] * columns for _ in range(rows)]

    def put(self, column: int, row: int, character: str) -> None:
        if 0 <= row < len(self.rows) and 0 <= column < len(self.rows[row]):
            self.rows[row][column] = character

    def lines(self) -> list[str]:
        return ["".join(row).rstrip() for row in self.rows]


@dataclass(frozen=True, slots=True)
class _Scale:
    """From lengths to characters; the web's left edge is at column `left`."""

    column: float  # length of one column
    left: int
    web_columns: int
    rows: int  # rows that the full depth would take
    hidden: tuple[int, int]  # rows left out, from and to

    def x(self, from_centre: float) -> int:
        # Both sides are rounded alike, so that what is symmetric looks so.
        offset = round(abs(from_centre) / self.column)
        return self.left + self.web_columns // 2 + (offset if from_centre > 0.0 else -offset)

    def y(self, from_top: float) -> int:
        row = round(from_top / (2 * self.column))
        start, end = self.hidden
        if row >= end:
            return row - (end - start)
        return min(row, start)


def draw(checked: CheckedLayout, ink: Ink = UNICODE) -> list[str]:
    """Draw the cross-section of a checked layout.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.
    ink : Ink
        Characters to use.

    Returns
    -------
    list of str
        Lines of text, not wider than 80 columns.
    """
    section = checked.section
    faces = [(checked.placement, section.sagging)]
    if section.opposite is not None:
        opposite = place(section.opposite_face(), section.opposite)
        faces.append((opposite, not section.sagging))
    scale = _scale(section, faces)
    overhangs = _overhangs(section, scale)
    shift = max((left for left, _ in overhangs.values()), default=0)
    right = max((right for _, right in overhangs.values()), default=0)
    scale = _Scale(scale.column, shift, scale.web_columns, scale.rows, scale.hidden)
    height = scale.y(section.outline.depth) + 1
    canvas = _Canvas(shift + scale.web_columns + right + 2, height)
    _outline(canvas, section, scale, overhangs, ink)
    _stirrup(canvas, section, scale, ink)
    notes: dict[int, str] = {}
    for placement, at_bottom in faces:
        _bars(canvas, section, scale, placement, at_bottom, checked, ink)
        _notes(notes, section, scale, placement, at_bottom)
    start, end = scale.hidden
    if end > start:
        for column in range(scale.left + 1, scale.left + scale.web_columns):
            canvas.put(column, scale.y(start * 2 * scale.column), ink.broken)
    lines = [f"  {line}" for line in canvas.lines()]
    width = max(len(line) for line in lines) + 2
    below = []
    if width + max(len(note) for note in notes.values()) <= _PAGE:
        for row, note in notes.items():
            lines[row] = f"{lines[row]:<{width}}{note}"
    else:
        # No room beside the drawing: the notes follow it, from top to bottom.
        below = [notes[row] for row in sorted(notes)]
    text = [*below, _caption(section, overhangs, scale)]
    return lines + [
        f"  {line}" for paragraph in text for line in textwrap.wrap(paragraph, _PAGE - 2)
    ]


def _scale(section: Section, faces: list[tuple[Placement, bool]]) -> _Scale:
    outline = section.outline
    spacings = [
        right - left
        for placement, _ in faces
        for layer in placement.layers
        for left, right in pairwise(layer.x)
    ]
    heights = [
        above.bottom - below.bottom
        for placement, _ in faces
        for below, above in pairwise(placement.layers)
    ]
    column = outline.depth / (2 * _USUAL)
    column = min([column, *(spacing / 2.0 for spacing in spacings if spacing > 0.0)])
    column = min([column, *(height / 2.2 for height in heights)])
    column = max(column, outline.web / _WIDEST)
    web_columns = max(6, 2 * math.ceil(outline.web / column / 2))
    rows = max(4, round(outline.depth / (2 * column)))
    hidden = (0, 0)
    if rows > _HIGHEST:
        # The part between the two faces' steel shows nothing; the middle of it is left out.
        middle, spare = rows // 2, rows - _HIGHEST
        hidden = (middle - spare // 2, middle - spare // 2 + spare)
    return _Scale(column, 0, web_columns, rows, hidden)


def _overhangs(section: Section, scale: _Scale) -> dict[str, tuple[int, int]]:
    """Columns left and right of the web for each flange, cut to what fits."""
    found = {}
    room = max(_OVERHANG, (_WIDEST - scale.web_columns) // 2)
    room = min(room, (_PAGE - 6 - scale.web_columns) // 2)
    for name, flange in (("top", section.outline.top), ("bottom", section.outline.bottom)):
        if flange is None:
            continue
        beyond = flange.width - section.outline.web
        left = beyond / 2 if flange.left is None else flange.left
        found[name] = (
            min(room, round(left / scale.column)),
            min(room, round((beyond - left) / scale.column)),
        )
    return found


def _cuts(section: Section, name: str, columns: tuple[int, int], scale: _Scale) -> list[bool]:
    """Whether the flange goes on beyond what is drawn of it, left and right."""
    flange = section.outline.top if name == "top" else section.outline.bottom
    if flange is None:
        return [False, False]
    beyond = flange.width - section.outline.web
    left = beyond / 2 if flange.left is None else flange.left
    true = (left / scale.column, (beyond - left) / scale.column)
    return [drawn < round(length) for drawn, length in zip(columns, true, strict=True)]


def _outline(
    canvas: _Canvas,
    section: Section,
    scale: _Scale,
    overhangs: dict[str, tuple[int, int]],
    ink: Ink,
) -> None:
    outline = section.outline
    left, right = scale.left, scale.left + scale.web_columns
    top, bottom = 0, scale.y(outline.depth)
    upper, lower = top, bottom
    if outline.top is not None:
        upper = max(1, scale.y(outline.top.thickness))
    if outline.bottom is not None:
        lower = min(bottom - 1, scale.y(outline.depth - outline.bottom.thickness))
    edges = {"top": (left, right), "bottom": (left, right)}
    for name, (before, after) in overhangs.items():
        edges[name] = (left - before, right + after)
    for name, edge_row, inner_row in (("top", top, upper), ("bottom", bottom, lower)):
        first, last = edges[name]
        for column in range(first, last + 1):
            canvas.put(column, edge_row, ink.horizontal)
            if column < left or column > right:
                canvas.put(column, inner_row, ink.horizontal)
        sides = range(min(edge_row, inner_row), max(edge_row, inner_row) + 1)
        cuts = _cuts(section, name, overhangs.get(name, (0, 0)), scale)
        corner = ink.corners[:2] if name == "top" else ink.corners[2:]
        inner = ink.corners[2:] if name == "top" else ink.corners[:2]
        for index, (end, beyond) in enumerate(((first, first < left), (last, last > right))):
            for row in sides:
                canvas.put(end, row, ink.cut if cuts[index] else ink.vertical)
            if not cuts[index]:
                canvas.put(end, edge_row, corner[index])
                if beyond:
                    canvas.put(end, inner_row, inner[index])
    for row in range(upper, lower + 1):
        for column, overhang, tee_top, tee_bottom in (
            (left, edges, ink.tees[0], ink.tees[2]),
            (right, edges, ink.tees[1], ink.tees[3]),
        ):
            character = ink.vertical
            at = 0 if column == left else 1
            beyond_top = overhang["top"][at] != column
            beyond_bottom = overhang["bottom"][at] != column
            if row == upper and outline.top is not None and beyond_top:
                character = tee_top
            elif row == lower and outline.bottom is not None and beyond_bottom:
                character = tee_bottom
            elif row in (top, bottom):
                continue
            canvas.put(column, row, character)


def _stirrup(canvas: _Canvas, section: Section, scale: _Scale, ink: Ink) -> None:
    half = section.outline.web / 2 - section.cover - section.stirrup.diameter / 2
    edge = section.cover + section.stirrup.diameter / 2
    left, right = scale.x(-half), scale.x(half)
    top, bottom = scale.y(edge), scale.y(section.outline.depth - edge)
    top, bottom = max(1, top), min(scale.y(section.outline.depth) - 1, bottom)
    for column in range(left, right + 1, 2):
        canvas.put(column, top, ink.stirrup)
        canvas.put(column, bottom, ink.stirrup)
    for row in range(top, bottom + 1):
        canvas.put(left, row, ink.stirrup)
        canvas.put(right, row, ink.stirrup)


def _layer_rows(section: Section, scale: _Scale, placement: Placement, low: bool) -> list[int]:
    """Row of each layer; in a drawing too coarse to part two layers they still get their own."""
    rows: list[int] = []
    last = scale.y(section.outline.depth) - 1
    for layer in placement.layers:
        centre = layer.bottom + max(layer.diameters) / 2
        row = scale.y(section.outline.depth - centre if low else centre)
        row = min(max(row, 1), last)
        if rows and low:
            row = min(row, rows[-1] - 1)
        elif rows:
            row = max(row, rows[-1] + 1)
        rows.append(row)
    return rows


def _bars(
    canvas: _Canvas,
    section: Section,
    scale: _Scale,
    placement: Placement,
    at_bottom: bool,
    checked: CheckedLayout,
    ink: Ink,
) -> None:
    largest = checked.layout.sizes[0].diameter
    rows = _layer_rows(section, scale, placement, at_bottom)
    for layer, row in zip(placement.layers, rows, strict=True):
        for x, diameter in zip(layer.x, layer.diameters, strict=True):
            kind = 2 if at_bottom != section.sagging else 0 if diameter >= largest else 1
            canvas.put(scale.x(x), row, ink.bars[kind])


def _notes(
    notes: dict[int, str], section: Section, scale: _Scale, placement: Placement, at_bottom: bool
) -> None:
    unit = section.length_unit
    rows = _layer_rows(section, scale, placement, at_bottom)
    for number, (layer, row) in enumerate(zip(placement.layers, rows, strict=True), 1):
        counts: dict[str, int] = {}
        for size in layer.designations:
            counts[size] = counts.get(size, 0) + 1
        bars = " + ".join(f"{count} {size}" for size, count in counts.items())
        gap = f", gap {plain(layer.gap)} {unit}" if math.isfinite(layer.gap) else ""
        name = f"layer {number}" if at_bottom == section.sagging else "opposite"
        notes.setdefault(row, f"{name}: {bars}{gap}")


def _caption(section: Section, overhangs: dict[str, tuple[int, int]], scale: _Scale) -> str:
    outline, unit = section.outline, section.length_unit
    parts = [f"{plain(outline.web)} x {plain(outline.depth)} {unit}"]
    for name, flange in (("top", outline.top), ("bottom", outline.bottom)):
        if flange is not None:
            cut = " (cut)" if any(_cuts(section, name, overhangs[name], scale)) else ""
            parts.append(
                f"{name} flange {plain(flange.width)} x {plain(flange.thickness)} {unit}{cut}"
            )
    parts.append(f"cover {plain(section.cover)} {unit} to {section.stirrup.designation} stirrup")
    return ", ".join(parts)
