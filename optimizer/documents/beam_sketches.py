"""Bars of the schedule as sketches, and bars of stock with the pieces cut from them."""

from __future__ import annotations

from xml.etree import ElementTree as ET

from engine.beams.bending import Shape
from optimizer.beams.design import BeamDesign
from optimizer.beams.schedule import BarMark
from optimizer.beams.stock import CuttingPlan
from optimizer.beams.words import leg_text, length_text
from optimizer.documents import svg_elements as ink
from optimizer.documents.wording import visible

_SKETCH = (236.0, 50.0)
_STOCK_WIDTH, _STOCK_ROW, _STOCK_LEFT = 940.0, 25.0, 150.0


def bar_sketch(design: BeamDesign, item: BarMark) -> str:
    """Sketch the shape of a bar with its legs, not to scale.

    Parameters
    ----------
    design : BeamDesign
        Design.
    item : BarMark
        Line of the schedule.

    Returns
    -------
    str
        An ``svg`` element.
    """
    edition, shape = design.edition, item.shape
    root = ink.drawing(*_SKETCH, visible(f"{item.mark}: {shape.shape.value}"), "sketch")
    if shape.shape is Shape.CLOSED:
        _closed(root, *(leg_text(edition, leg) for leg in shape.legs))
        return ink.text_of(root)
    hooks = len(shape.legs) - 1
    left, right, row = 60.0, 176.0, 30.0
    main = length_text(edition, shape.legs[1 if hooks else 0])
    points = [(left, row), (right, row)]
    if hooks:
        leg = leg_text(edition, shape.legs[0])
        points = [(left, row - 19.0), (left + 1.0, row - 4.0), (left + 5.0, row), *points[1:]]
        ink.words(root, "small", (left - 4.0, row - 8.0), leg, anchor="end")
        if hooks == 2:
            leg = leg_text(edition, shape.legs[2])
            points = [*points[:-1], (right - 5.0, row), (right - 1.0, row - 4.0)]
            points.append((right, row - 19.0))
            ink.words(root, "small", (right + 4.0, row - 8.0), leg)
    ink.line(root, "rebar", *points)
    ink.words(root, "small", ((left + right) / 2, row + 14.0), main, anchor="middle")
    return ink.text_of(root)


def _closed(root: ET.Element, width: str, height: str) -> None:
    """A closed stirrup with both hooks around its upper left corner."""
    ink.box(root, "rebar", (91.0, 5.0), (54.0, 28.0), radius=4.0)
    ink.line(root, "rebar", (92.5, 11.5), (101.0, 19.0))
    ink.line(root, "rebar", (97.5, 6.5), (106.0, 14.0))
    ink.words(root, "small", (118.0, 46.0), width, anchor="middle")
    ink.words(root, "small", (150.0, 23.0), height)


def cutting_drawing(design: BeamDesign, plan: CuttingPlan) -> str:
    """Draw how bars of one size are cut from stock, lengths to scale.

    Parameters
    ----------
    design : BeamDesign
        Design.
    plan : CuttingPlan
        Cutting of a size.

    Returns
    -------
    str
        An ``svg`` element: a strip for all stock bars that are cut alike, with its pieces and,
        hatched, what is left over.
    """
    edition = design.edition
    lengths = {item.mark: item.length for item in design.schedule.marks}
    longest = max(design.problem.stock)
    scale = (_STOCK_WIDTH - _STOCK_LEFT - 6.0) / longest
    height = _STOCK_ROW * len(plan.bars) + 4.0
    root = ink.drawing(
        _STOCK_WIDTH, height, visible(f"Cutting of {plan.size}"), "beam-drawing cutting"
    )
    shapes = ink.group(root, "to-scale", scale=repr(scale), left=repr(_STOCK_LEFT))
    for number, bar in enumerate(plan.bars):
        top = 3.0 + number * _STOCK_ROW
        text = f"{bar.count} × {length_text(edition, bar.stock_length)}"
        ink.words(shapes, "note strong", (_STOCK_LEFT - 8.0, top + 14.0), text, anchor="end")
        size = (bar.stock_length * scale, 19.0)
        ink.box(shapes, "left-over", (_STOCK_LEFT, top), size)
        x = _STOCK_LEFT
        for mark, count in bar.pieces:
            width = lengths[mark] * scale
            for piece in range(count):
                ink.box(shapes, "piece", (x + piece * width, top), (width, 19.0))
            label = visible(f"{count} {mark}" if count > 1 else mark)
            room = count * width
            if ink.LETTER * len(label) <= room:
                _on_piece(shapes, label, x + room / 2, top, split=count > 1)
            x += room
    return ink.text_of(root)


def _on_piece(shapes: ET.Element, label: str, x: float, top: float, *, split: bool) -> None:
    """Write on pieces, over a blank where lines between them run through the text."""
    width = ink.LETTER * len(label)
    if split:
        ink.box(shapes, "blank", (x - width / 2, top + 3.0), (width, 13.0))
    ink.words(shapes, "note", (x, top + 14.0), label, anchor="middle")


def cutting_text(design: BeamDesign, plan: CuttingPlan) -> str:
    """Say what is bought and left over, and what is proved.

    Parameters
    ----------
    design : BeamDesign
        Design.
    plan : CuttingPlan
        Cutting of a size.

    Returns
    -------
    str
        One sentence or two.
    """
    edition = design.edition
    text = (
        f"Bought {length_text(edition, plan.bought)}, used {length_text(edition, plan.used)},"
        f" left over {length_text(edition, plan.waste)} ({100 * plan.waste / plan.bought:.1f} %)."
    )
    if plan.proved:
        return f"{text} Proved: no plan buys less."
    return f"{text} NOT PROVED least; any plan buys at least {length_text(edition, plan.bound)}."
