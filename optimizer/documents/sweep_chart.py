"""Mass and index of a beam against the length of one span: a scalable drawing."""

from __future__ import annotations

from xml.etree import ElementTree as ET

from engine.units import plain
from optimizer.beams.sweep import Sweep
from optimizer.beams.sweep_report import sweep_lines
from optimizer.beams.words import mass_unit
from optimizer.documents import svg_elements as ink
from optimizer.documents.plot import ticks
from optimizer.documents.wording import visible

_SIZE = (940.0, 320.0)
_FRAME = (72.0, 20.0, 924.0, 262.0)  # left, top, right and bottom [px]


def sweep_chart(result: Sweep) -> str:
    """Plot mass and placed index of the best beam of each length.

    Parameters
    ----------
    result : Sweep
        Sweep.

    Returns
    -------
    str
        An ``svg`` element; the axis of values starts at zero, lengths without a beam leave a gap.
    """
    problem = result.points[0].result.problem
    us = problem.edition.units == "us"
    per, long = (12.0, "ft") if us else (1000.0, "m")
    lines = sweep_lines(result)
    lengths = [line.point.length / per for line in lines]
    mass = [None if line.design is None else line.design.schedule.mass for line in lines]
    index = [None if line.design is None else line.design.cost for line in lines]
    curves = [("strength mass", mass)]
    if problem.ranking.by != "lightest":
        curves.append(("demand index", index))
    most = max((value for _, values in curves for value in values if value is not None), default=1)
    left, top, right, bottom = _FRAME
    first, last = lengths[0], lengths[-1]
    if last <= first:
        first, last = first - 0.5, last + 0.5
    margin = 0.03 * (last - first)
    first, last, high = first - margin, last + margin, 1.08 * most
    title = visible(f"Beam {problem.mark} over the length of {result.span}")
    root = ink.drawing(*_SIZE, title, "beam-drawing chart")

    def at(length: float, value: float) -> tuple[float, float]:
        return (
            left + (length - first) / (last - first) * (right - left),
            bottom - value / high * (bottom - top),
        )

    for value in ticks(0.0, high, 6):
        row = at(first, value)[1]
        ink.line(root, "grid", (left, row), (right, row))
        ink.words(root, "note", (left - 6.0, row + 4.0), plain(value), anchor="end")
    for value in ticks(first, last, 10):
        column = at(value, 0.0)[0]
        ink.line(root, "grid", (column, top), (column, bottom))
        ink.words(root, "note", (column, bottom + 16.0), plain(value), anchor="middle")
    for kind, values in curves:
        own = ink.group(root, "curve", name=kind.split()[1])
        pairs = zip(lengths, values, strict=True)
        _curve(own, kind, [None if value is None else at(x, value) for x, value in pairs])
    ink.box(root, "frame", (left, top), (right - left, bottom - top))
    middle = (left + right) / 2
    text = f"{visible(result.span)}, {long}"
    ink.words(root, "note", (middle, bottom + 34.0), text, anchor="middle")
    unit = mass_unit(problem.edition)
    what = "mass (thick)" + (" and placed index (thin)" if len(curves) > 1 else "")
    ink.words(
        root, "note", (16.0, (top + bottom) / 2), f"{what}, {unit}", anchor="middle", turned=True
    )
    return ink.text_of(root)


def _curve(parent: ET.Element, kind: str, points: list[tuple[float, float] | None]) -> None:
    """Draw a line with its points; it stops where there is none."""
    run: list[tuple[float, float]] = []
    for point in [*points, None]:
        if point is not None:
            run.append(point)
            ink.circle(parent, "piece", point, 2.6)
            continue
        if len(run) > 1:
            ink.line(parent, kind, *run)
        run = []
