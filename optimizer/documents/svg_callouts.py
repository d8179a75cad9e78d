"""Call-outs and dimensions of a cross-section drawing."""

from __future__ import annotations

import math
from dataclasses import dataclass
from xml.etree import ElementTree as ET

from engine import CheckedLayout, place
from engine.units import plain
from optimizer.documents import svg_elements as ink
from optimizer.documents.svg_sheet import Sheet, flanges
from optimizer.documents.wording import Figures, visible

_NOTE_PITCH = 33.0  # two lines of a call-out [px]
_TICK = 3.5  # half of the stroke that ends a dimension line [px]


@dataclass(frozen=True, slots=True, kw_only=True)
class Note:
    """A call-out: two lines of text and the place that its leader points at."""

    at: tuple[float, float]
    first: str
    second: str


def notes_of(checked: CheckedLayout, sheet: Sheet, figures: Figures) -> list[Note]:
    """Call-outs of a layout: each layer, bars opposite, neutral axis, stirrup.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.
    sheet : Sheet
        Where the section lies on the drawing.
    figures : Figures
        Units.

    Returns
    -------
    list of Note
        In no order.
    """
    section = checked.section
    notes = []
    for number, (layer, placed, depth) in enumerate(
        zip(checked.layout.layers, checked.placement.layers, checked.layer_depths, strict=True), 1
    ):
        radius = placed.diameters[-1] / 2
        row = sheet.from_tension(placed.bottom + radius)
        notes.append(
            Note(
                at=(sheet.x(placed.x[-1] + radius), row),
                first=visible(layer.label),
                second=f"layer {number}, d {figures.length(depth)}{_gap(placed.gap, figures)}",
            )
        )
    if section.opposite is not None:
        other = place(section.opposite_face(), section.opposite)
        counted = "counted" if section.count_opposite else "not counted"
        for layer, placed in zip(section.opposite.layers, other.layers, strict=True):
            radius = placed.diameters[-1] / 2
            row = sheet.from_compression(placed.bottom + radius)
            notes.append(
                Note(
                    at=(sheet.x(placed.x[-1] + radius), row),
                    first=visible(layer.label),
                    second=f"opposite, {counted}{_gap(placed.gap, figures)}",
                )
            )
    if checked.c < section.outline.depth:
        notes.append(
            Note(
                at=(sheet.web_right + 8.0, sheet.from_compression(checked.c)),
                first=f"c {figures.length(checked.c)}",
                second=f"block a {figures.length(checked.a)}",
            )
        )
    notes.append(
        Note(
            at=(sheet.web_right - section.cover * sheet.scale, _cover_row(sheet)),
            first=visible(f"stirrup {section.stirrup.designation}"),
            second=f"cover {figures.length(section.cover)}",
        )
    )
    return notes


def _gap(gap: float, figures: Figures) -> str:
    return f", gap {figures.length(gap)}" if math.isfinite(gap) else ""


def _cover_row(sheet: Sheet) -> float:
    return sheet.y(sheet.section.outline.depth * 0.55)


def spread(notes: list[Note], sheet: Sheet) -> list[tuple[float, Note]]:
    """Part call-outs far enough to be read.

    Parameters
    ----------
    notes : list of Note
        Call-outs.
    sheet : Sheet
        Where the section lies on the drawing.

    Returns
    -------
    list of (float, Note)
        Row of each, top to bottom. [px]
    """
    ordered = sorted(notes, key=lambda note: (note.at[1], note.at[0]))
    rows = [note.at[1] for note in ordered]
    lowest = max(sheet.bottom, sheet.top + _NOTE_PITCH * (len(rows) - 1))
    for index in range(len(rows) - 1, -1, -1):
        rows[index] = min(rows[index], lowest - _NOTE_PITCH * (len(rows) - 1 - index))
    for index, row in enumerate(rows):
        least = sheet.top + 2.0 if index == 0 else rows[index - 1] + _NOTE_PITCH
        rows[index] = max(row, least)
    return list(zip(rows, ordered, strict=True))


def dimensions(root: ET.Element, sheet: Sheet, figures: Figures) -> None:
    """Add dimension lines of web, depth, flanges and cover.

    Parameters
    ----------
    root : Element
        The drawing.
    sheet : Sheet
        Where the section lies on it.
    figures : Figures
        Units.
    """
    outline = sheet.section.outline
    _across(root, (sheet.web_left, sheet.web_right), sheet.bottom + 16.0, plain(outline.web))
    left = sheet.far_left - 16.0
    names = [name for name, _ in flanges(sheet.section)]
    if names:
        left -= 28.0
    _along(root, (sheet.top, sheet.bottom), left, plain(outline.depth))
    for name, flange in flanges(sheet.section):
        inner = sheet.far_left - 14.0
        edges = (sheet.web_left - sheet.left[name], sheet.web_right + sheet.right[name])
        if name == "top":
            _across(root, edges, sheet.top - 12.0, plain(flange.width))
            _along(root, (sheet.top, sheet.y(flange.thickness)), inner, plain(flange.thickness))
        else:
            _across(root, edges, sheet.bottom + 38.0, plain(flange.width))
            rows = (sheet.y(outline.depth - flange.thickness), sheet.bottom)
            _along(root, rows, inner, plain(flange.thickness))
    row = _cover_row(sheet)
    face = sheet.web_right - sheet.section.cover * sheet.scale
    ink.line(root, "dimension", (face, row), (sheet.web_right, row))
    for column in (face, sheet.web_right):
        _tick(root, column, row)
    unit = figures.unit("length")
    ink.words(root, "note", (2.0, sheet.bottom + 20.0), unit)


def _tick(root: ET.Element, x: float, y: float) -> None:
    ink.line(root, "tick", (x - _TICK, y + _TICK), (x + _TICK, y - _TICK))


def _across(root: ET.Element, columns: tuple[float, float], row: float, text: str) -> None:
    ink.line(root, "dimension", (columns[0], row), (columns[1], row))
    for column in columns:
        _tick(root, column, row)
    ink.words(root, "note", ((columns[0] + columns[1]) / 2, row - 4.0), text, anchor="middle")


def _along(root: ET.Element, rows: tuple[float, float], column: float, text: str) -> None:
    ink.line(root, "dimension", (column, rows[0]), (column, rows[1]))
    for row in rows:
        _tick(root, column, row)
    middle = (rows[0] + rows[1]) / 2
    ink.words(root, "note", (column - 4.0, middle), text, anchor="middle", turned=True)
