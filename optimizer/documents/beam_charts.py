"""Moments and shears along a beam with the strength that its bars give: scalable drawings."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from xml.etree import ElementTree as ET

import numpy as np

from engine.beams.demand import SpanDemand
from engine.beams.spans import Beam
from engine.outlines import FloatArray
from engine.units import plain
from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.plans import shear_at_depth
from optimizer.documents import svg_elements as ink
from optimizer.documents.beam_strips import centrelines
from optimizer.documents.plot import ticks
from optimizer.documents.wording import Figures, visible

_SIZE = (940.0, 300.0)
_FRAME = (64.0, 26.0, 924.0, 268.0)  # left, top, right and bottom [px]


@dataclass(frozen=True, slots=True, kw_only=True)
class _Curve:
    """One line of a chart, span by span.

    Attributes
    ----------
    kind : str
        Class for the style sheet.
    span : int
        Index of the span.
    x : ndarray, shape (n,)
        Places on the beam's axis. [in or mm]
    y : ndarray, shape (n,)
        Values in the trade's unit.
    """

    kind: str
    span: int
    x: FloatArray
    y: FloatArray


def moment_chart(result: BeamDesign | NoDesign) -> str:
    """Draw the envelopes of the factored moment, and phi Mn where there is a design.

    Parameters
    ----------
    result : BeamDesign or NoDesign
        Result.

    Returns
    -------
    str
        An ``svg`` element: sagging above the axis, hogging below it.
    """
    curves = []
    for index, (origin, demand) in enumerate(_spans(result)):
        for values, kind in ((demand.Mu_most, "most"), (demand.Mu_least, "least")):
            y = _trade(result, "moment", values)
            curves.append(_Curve(kind=f"demand {kind}", span=index, x=demand.x + origin, y=y))
        if isinstance(result, BeamDesign):
            strength = result.strengths[index]
            for values, kind in ((strength.sagging, "sagging"), (-strength.hogging, "hogging")):
                y = _trade(result, "moment", values)
                x = strength.x + origin
                curves.append(_Curve(kind=f"strength {kind}", span=index, x=x, y=y))
    return _chart(result, curves, "moment", "Moments along the beam")


def shear_chart(result: BeamDesign | NoDesign) -> str:
    """Draw the envelope of the factored shear, and phi Vn where there is a design.

    Parameters
    ----------
    result : BeamDesign or NoDesign
        Result.

    Returns
    -------
    str
        An ``svg`` element. With a design the shear within d of a face is that at d where
        9.4.3.2 permits.
    """
    curves = []
    for index, (origin, demand) in enumerate(_spans(result)):
        values = shear_of(result, index)
        y = _trade(result, "force", values)
        curves.append(_Curve(kind="demand shear", span=index, x=demand.x + origin, y=y))
        if isinstance(result, BeamDesign):
            strength = result.strengths[index]
            x, y = _stepped(strength.x + origin, _trade(result, "force", strength.shear))
            curves.append(_Curve(kind="strength shear", span=index, x=x, y=y))
    return _chart(result, curves, "force", "Shears along the beam")


def shear_of(result: BeamDesign | NoDesign, index: int) -> FloatArray:
    """Shear that a span is designed for, at the stations of its demand. [lbf or N]"""
    demand = result.demands[index]
    if isinstance(result, NoDesign):
        return demand.Vu
    depth = result.stirrups[index].depth
    return shear_at_depth(result.problem.beam, index, demand, depth)


def _spans(result: BeamDesign | NoDesign) -> Iterable[tuple[float, SpanDemand]]:
    return zip(result.problem.beam.origins, result.demands, strict=True)


def _trade(result: BeamDesign | NoDesign, kind: str, values: FloatArray) -> FloatArray:
    system = result.problem.edition.system
    return np.array([system.to_trade(kind, float(value)) for value in values])


def _stepped(x: FloatArray, y: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Make a line that changes between stations change at once, on the safe side.

    Strength at both stations is known; between them the lower one is drawn.
    """
    places, values = [float(x[0])], [float(y[0])]
    for number in range(1, len(x)):
        before, after = values[-1], float(y[number])
        if after < before - 1e-9 * abs(before):
            places.append(places[-1])
            values.append(after)
        elif after > before + 1e-9 * abs(before):
            places.append(float(x[number]))
            values.append(before)
        places.append(float(x[number]))
        values.append(after)
    return np.array(places), np.array(values)


def _chart(
    result: BeamDesign | NoDesign, curves: Sequence[_Curve], quantity: str, title: str
) -> str:
    beam = result.problem.beam
    figures = Figures(result.problem.edition)
    first, last = _ends(beam)
    left, top, right, bottom = _FRAME
    every = [float(value) for curve in curves for value in (curve.y.min(), curve.y.max())]
    low, high = min(0.0, *every), max(0.0, *every)
    margin = 0.06 * ((high - low) or 1.0)
    low, high = (low - margin if low < 0.0 else 0.0), high + margin
    per_length, per_value = (right - left) / (last - first), (bottom - top) / (high - low)
    root = ink.drawing(*_SIZE, visible(f"{title} {result.problem.mark}"), "beam-drawing chart")
    shapes = ink.group(
        root,
        "to-scale",
        scale=repr(per_length),
        left=repr(left - first * per_length),
        value_scale=repr(per_value),
        zero=repr(bottom + low * per_value),
        unit=figures.system.trade[quantity],
    )

    def at(place: float, value: float) -> tuple[float, float]:
        return left + (place - first) * per_length, bottom - (value - low) * per_value

    _supports(shapes, beam, at, (top, bottom))
    for value in ticks(low, high, 6):
        row = at(first, value)[1]
        ink.line(shapes, "grid", (left, row), (right, row))
        text = plain(value).replace("-", "−")
        ink.words(shapes, "note", (left - 6.0, row + 4.0), text, anchor="end")
    for curve in curves:
        points = [at(float(x), float(y)) for x, y in zip(curve.x, curve.y, strict=True)]
        if curve.kind.startswith("demand"):
            base = [at(float(curve.x[-1]), 0.0), at(float(curve.x[0]), 0.0)]
            ink.polygon(shapes, "wanted", [*points, *base])
    for curve in curves:
        own = ink.group(shapes, "curve", span=str(curve.span))
        points = [at(float(x), float(y)) for x, y in zip(curve.x, curve.y, strict=True)]
        ink.line(own, curve.kind, *points)
    ink.line(shapes, "frame", at(first, 0.0), at(last, 0.0))
    ink.box(root, "frame", (left, top), (right - left, bottom - top))
    letter = {"moment": "M", "force": "V"}[quantity]
    unit = figures.unit(quantity)
    name = (
        f"φ{letter}n and {letter}u, {unit}"
        if isinstance(result, BeamDesign)
        else f"{letter}u, {unit}"
    )
    ink.words(root, "note", (14.0, (top + bottom) / 2), name, anchor="middle", turned=True)
    return ink.text_of(root)


def _ends(beam: Beam) -> tuple[float, float]:
    """Ends of the beam on its axis, the outer supports whole. [in or mm]"""
    total = sum(span.length for span in beam.spans)
    before = 0.0 if beam.left_support(0) is None else beam.supports[0].width / 2.0
    beyond = beam.right_support(len(beam.spans) - 1) is not None
    return -before, total + (beam.supports[-1].width / 2.0 if beyond else 0.0)


def _supports(
    shapes: ET.Element,
    beam: Beam,
    at: Callable[[float, float], tuple[float, float]],
    rows: tuple[float, float],
) -> None:
    """Supports as bands over the height of the chart, with their marks."""
    for support, place in zip(beam.supports, centrelines(beam), strict=True):
        left, right = (at(place + side * support.width / 2.0, 0.0)[0] for side in (-1.0, 1.0))
        ink.box(shapes, "support", (left, rows[0]), (right - left, rows[1] - rows[0]))
        mark = visible(support.mark)
        shown = mark if len(mark) <= 6 else f"{mark[:5]}."
        ink.words(shapes, "note strong", ((left + right) / 2, rows[0] - 6.0), shown,
                  anchor="middle")  # fmt: skip
