"""The cross-section of a checked layout, to scale, as a scalable drawing."""

from __future__ import annotations

import math
from xml.etree import ElementTree as ET

from engine import CheckedLayout, Placement, place
from optimizer.documents import svg_elements as ink
from optimizer.documents.svg_callouts import dimensions, notes_of, spread
from optimizer.documents.svg_sheet import Sheet, corners, flanges, overhangs, sheet_of
from optimizer.documents.wording import Figures, visible

_WEB = (230.0, 260.0)  # room for the web: width and height [px]
_SMALL = (84.0, 96.0)
_OVERHANG = 62.0  # most that is drawn of a flange beyond the web [px]
_SMALL_OVERHANG = 16.0


def cross_section(checked: CheckedLayout) -> str:
    """Draw a layout in its section with dimensions and call-outs.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.

    Returns
    -------
    str
        An ``svg`` element. Flanges that reach far are cut, and say so by a broken edge.
    """
    section = checked.section
    figures = Figures(section.edition)
    stacked = [name for name, _ in flanges(section)]
    left = 44.0 + (30.0 if stacked else 0.0)
    sheet = sheet_of(section, _WEB, _OVERHANG, (left, 34.0 if "top" in stacked else 12.0))
    notes = spread(notes_of(checked, sheet, figures), sheet)
    column = sheet.far_right + 22.0
    longest = max(max(len(note.first), len(note.second)) for _, note in notes)
    below = 30.0 + (18.0 if "bottom" in stacked else 0.0)
    height = max(sheet.bottom + below, notes[-1][0] + 24.0)
    root = ink.drawing(
        column + longest * ink.LETTER + 4.0,
        height,
        visible(f"Cross-section with {checked.layout.label}"),
        "section-drawing",
    )
    _draw(root, checked, sheet, block=True)
    dimensions(root, sheet, figures)
    for row, note in notes:
        x, y = note.at
        ink.line(root, "leader", (x, y), (column - 12.0, row), (column - 4.0, row))
        ink.words(root, "note strong", (column, row + 4.0), note.first)
        ink.words(root, "note", (column, row + 18.0), note.second)
    return ink.text_of(root)


def small_cross_section(checked: CheckedLayout) -> str:
    """Draw a layout in its section, bars and stirrup only.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.

    Returns
    -------
    str
        An ``svg`` element.
    """
    sheet = sheet_of(checked.section, _SMALL, _SMALL_OVERHANG, (4.0, 4.0))
    root = ink.drawing(
        sheet.far_right + 4.0,
        sheet.bottom + 4.0,
        visible(f"Cross-section with {checked.layout.label}"),
        "section-drawing small",
    )
    _draw(root, checked, sheet, block=False)
    return ink.text_of(root)


def _draw(root: ET.Element, checked: CheckedLayout, sheet: Sheet, *, block: bool) -> None:
    section = checked.section
    shapes = ink.group(
        root,
        "to-scale",
        scale=repr(sheet.scale),
        axis=ink.number(sheet.axis),
        top=ink.number(sheet.top),
    )
    ink.polygon(shapes, "concrete", corners(sheet))
    if block:
        _block(shapes, checked, sheet)
    broken_edges(shapes, sheet)
    stirrup = section.stirrup.diameter
    inset = section.cover + stirrup / 2
    ink.box(
        shapes,
        "stirrup",
        (sheet.x(-section.outline.web / 2 + inset), sheet.y(inset)),
        (
            (section.outline.web - 2 * inset) * sheet.scale,
            (section.outline.depth - 2 * inset) * sheet.scale,
        ),
        radius=(section.bend_radius + stirrup / 2) * sheet.scale,
        stroke=stirrup * sheet.scale,
    )
    largest = checked.layout.sizes[0].diameter
    _bars(shapes, "bar", checked.placement, sheet, largest, at_tension=True)
    if section.opposite is not None:
        other = place(section.opposite_face(), section.opposite)
        _bars(shapes, "opposite", other, sheet, math.inf, at_tension=False)


def _bars(
    shapes: ET.Element,
    kind: str,
    placement: Placement,
    sheet: Sheet,
    largest: float,
    *,
    at_tension: bool,
) -> None:
    """Bars of one face; those of the layout's largest size are filled."""
    for layer in placement.layers:
        for x, diameter in zip(layer.x, layer.diameters, strict=True):
            centre = layer.bottom + diameter / 2
            row = sheet.from_tension(centre) if at_tension else sheet.from_compression(centre)
            fill = "full" if diameter >= largest else "open"
            ink.circle(shapes, f"{kind} {fill}", (sheet.x(x), row), diameter / 2 * sheet.scale)


def _block(shapes: ET.Element, checked: CheckedLayout, sheet: Sheet) -> None:
    """The compression block, strip by strip, and the neutral axis."""
    section = checked.section
    strips = [name for name, _ in flanges(section)]
    order = ["top"] * ("top" in strips) + [""] + ["bottom"] * ("bottom" in strips)
    names = order if section.sagging else order[::-1]
    edge = 0.0
    for name, (_, height) in zip(names, section.profile.strips, strict=True):
        depth = min(checked.a - edge, height)
        if depth <= 0.0:
            break
        rows = sorted((sheet.from_compression(edge), sheet.from_compression(edge + depth)))
        left = sheet.web_left - sheet.left[name]
        right = sheet.web_right + sheet.right[name]
        ink.box(shapes, "block", (left, rows[0]), (right - left, rows[1] - rows[0]))
        edge += height
    if checked.c < section.outline.depth:
        row = sheet.from_compression(checked.c)
        ink.line(shapes, "axis", (sheet.web_left - 8.0, row), (sheet.web_right + 8.0, row))


def broken_edges(shapes: ET.Element, sheet: Sheet) -> None:
    """Draw the broken edge of a flange that goes on.

    Parameters
    ----------
    shapes : Element
        Group of what is to scale.
    sheet : Sheet
        Where the section lies on the drawing.
    """
    for name, flange in flanges(sheet.section):
        rows = (
            (sheet.top, sheet.y(flange.thickness))
            if name == "top"
            else (sheet.y(sheet.section.outline.depth - flange.thickness), sheet.bottom)
        )
        middle = (rows[0] + rows[1]) / 2
        true = overhangs(sheet.section, flange)
        for side, drawn, edge in (
            (0, sheet.left[name], sheet.web_left - sheet.left[name]),
            (1, sheet.right[name], sheet.web_right + sheet.right[name]),
        ):
            if true[side] * sheet.scale <= drawn + 1e-6:
                continue
            points = (
                (edge, rows[0] - 4.0),
                (edge, middle - 4.0),
                (edge - 4.0, middle - 1.5),
                (edge + 4.0, middle + 1.5),
                (edge, middle + 4.0),
                (edge, rows[1] + 4.0),
            )
            ink.line(shapes, "gap", *points)
            ink.line(shapes, "break", *points)
