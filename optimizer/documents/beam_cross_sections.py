"""Cross-sections of a designed beam as scalable drawings."""

from __future__ import annotations

from xml.etree import ElementTree as ET

from engine.units import plain
from optimizer.beams.design import BeamDesign
from optimizer.documents import svg_elements as ink
from optimizer.documents.beam_cuts import BeamCut, loop_edges
from optimizer.documents.svg import broken_edges
from optimizer.documents.svg_callouts import Note, dimensions, spread
from optimizer.documents.svg_sheet import Sheet, corners, flanges, sheet_of
from optimizer.documents.wording import Figures, visible

_WEB = (120.0, 170.0)  # room for the web [px]
_OVERHANG = 26.0
_BOLD = 1.15  # width of a bold letter over that of another


def beam_cross_section(design: BeamDesign, cut: BeamCut) -> str:
    """Draw a cross-section of a beam with all bars that count there.

    Parameters
    ----------
    design : BeamDesign
        Design.
    cut : BeamCut
        Cross-section.

    Returns
    -------
    str
        An ``svg`` element.
    """
    section = cut.section
    figures = Figures(section.edition)
    stacked = [name for name, _ in flanges(section)]
    left = 44.0 + (30.0 if stacked else 0.0)
    sheet = sheet_of(section, _WEB, _OVERHANG, (left, 34.0 if "top" in stacked else 12.0))
    notes = spread(_notes(cut, sheet, figures), sheet)
    column = sheet.far_right + 22.0
    longest = max(max(_BOLD * len(note.first), len(note.second)) for _, note in notes)
    height = max(sheet.bottom + (48.0 if "bottom" in stacked else 30.0), notes[-1][0] + 24.0)
    root = ink.drawing(
        column + longest * ink.LETTER + 4.0,
        height,
        visible(f"Cross-section of {cut.title}"),
        "beam-section",
    )
    _draw(root, design, cut, sheet)
    dimensions(root, sheet, figures)
    for row, note in notes:
        x, y = note.at
        ink.line(root, "leader", (x, y), (column - 12.0, row), (column - 4.0, row))
        ink.words(root, "note strong", (column, row + 4.0), note.first)
        ink.words(root, "note", (column, row + 18.0), note.second)
    return ink.text_of(root)


def _draw(root: ET.Element, design: BeamDesign, cut: BeamCut, sheet: Sheet) -> None:
    section = cut.section
    shapes = ink.group(
        root,
        "to-scale",
        scale=repr(sheet.scale),
        axis=ink.number(sheet.axis),
        top=ink.number(sheet.top),
    )
    ink.polygon(shapes, "concrete", corners(sheet))
    broken_edges(shapes, sheet)
    stirrup = section.stirrup.diameter
    high = section.cover + stirrup / 2
    for left, right in loop_edges(design, cut.span):
        ink.box(
            shapes,
            "stirrup",
            (sheet.x(left + stirrup / 2), sheet.y(high)),
            (
                (right - left - stirrup) * sheet.scale,
                (section.outline.depth - 2 * high) * sheet.scale,
            ),
            radius=(section.bend_radius + stirrup / 2) * sheet.scale,
            stroke=max(stirrup * sheet.scale, 1.0),
        )
    depth = section.outline.depth
    for row in cut.rows:
        for bar in row.bars:
            at = (sheet.x(bar.x), sheet.y(depth - bar.y))
            ink.circle(shapes, "bar full", at, bar.diameter / 2 * sheet.scale)


def _notes(cut: BeamCut, sheet: Sheet, figures: Figures) -> list[Note]:
    section = cut.section
    depth = section.outline.depth
    notes = []
    for row in cut.rows:
        right = max(row.bars, key=lambda bar: (bar.x, bar.y))
        at = (sheet.x(right.x + right.diameter / 2), sheet.y(depth - right.y))
        notes.append(Note(at=at, first=visible(row.label), second=row.name))
    if cut.flange:
        flange = section.outline.top
        low = section.cover if flange is None else min(section.cover, flange.thickness / 2)
        at = (sheet.far_right - 4.0, sheet.y(low))
        notes.append(Note(at=at, first=visible(cut.flange), second="in the outer flange"))
    at = (sheet.web_right - section.cover * sheet.scale, sheet.y(depth * 0.55))
    spacing = f"at {plain(cut.spacing)} {figures.unit('length')}"
    cover = f"cover {figures.length(section.cover)}"
    notes.append(Note(at=at, first=visible(f"{cut.stirrup} {spacing}"), second=cover))
    return notes
