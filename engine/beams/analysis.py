"""Elastic analysis of a continuous beam: the stiffness method, in closed form.

The unknowns are the rotations of the supports, which do not settle. Spans are prismatic, so
the moments at their ends follow exactly from those rotations and the moments of held ends;
cantilevers are statically determinate and load their support with a known moment.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from engine.beams.responses import Line, Response
from engine.beams.spans import Beam, Load, LoadCase, Overhang, PointLoad, Span, UniformLoad
from engine.errors import OutOfRangeError
from engine.outlines import FloatArray

__all__ = ["Analysis", "Response", "analyse"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Analysis:
    """Responses of a beam from which every arrangement of its loads follows.

    Attributes
    ----------
    dead : Response
        All dead load.
    live : tuple of Response
        For each span, the whole beam's response to the live load of that span alone.
    """

    dead: Response
    live: tuple[Response, ...]


def analyse(beam: Beam, modulus: float) -> Analysis:
    """Analyse a beam with gross sections.

    Parameters
    ----------
    beam : Beam
        Spans, supports and loads.
    modulus : float
        Ec, the same in all spans. [psi or MPa]

    Returns
    -------
    Analysis
        Responses to the dead load and to the live load of each span.

    Raises
    ------
    OutOfRangeError
        If the modulus is not above 0 or a support has a stiffness below 0.
    """
    if not (math.isfinite(modulus) and modulus > 0.0):
        msg = f"got {modulus:g}; allowed: a finite modulus above 0"
        raise OutOfRangeError(msg, what="modulus")
    for support in beam.supports:
        if not support.stiffness >= 0.0:
            msg = f"{support.mark}: got {support.stiffness:g}; allowed: 0 and above"
            raise OutOfRangeError(msg, what="stiffness")
    stiffness = tuple(modulus * span.gross_inertia for span in beam.spans)
    matrix = _joint_matrix(beam, stiffness)
    turning = np.array([math.isfinite(support.stiffness) for support in beam.supports])
    matrix = matrix[np.ix_(turning, turning)]

    def respond(loads: list[tuple[Load, ...]]) -> Response:
        held = [_held_moments(*pair) for pair in zip(beam.spans, loads, strict=True)]
        rotations = np.zeros(len(beam.supports))
        unbalanced = np.zeros(len(beam.supports))
        for index in range(len(beam.supports)):
            left, right = beam.left_span(index), beam.right_span(index)
            before = 0.0 if left is None else held[left][1]
            after = 0.0 if right is None else held[right][0]
            unbalanced[index] = before - after
        rotations[turning] = np.linalg.solve(matrix, unbalanced[turning])
        lines = tuple(
            _line(beam, number, loads[number], held[number], rotations, stiffness[number])
            for number in range(len(beam.spans))
        )
        turned = tuple(float(value) for value in rotations)
        return Response(beam=beam, stiffness=stiffness, rotations=turned, lines=lines)

    cases = {
        case: [tuple(load for load in span.loads if load.case is case) for span in beam.spans]
        for case in LoadCase
    }
    live = tuple(
        respond(
            [loads if loaded == number else () for number, loads in enumerate(cases[LoadCase.LIVE])]
        )
        for loaded in range(len(beam.spans))
    )
    return Analysis(dead=respond(cases[LoadCase.DEAD]), live=live)


def _joint_matrix(beam: Beam, stiffness: tuple[float, ...]) -> FloatArray:
    """Moments at the supports for unit rotations; only the diagonal may be infinite."""
    matrix = np.diag([support.stiffness for support in beam.supports])
    for number, span in enumerate(beam.spans):
        left, right = beam.left_support(number), beam.right_support(number)
        if left is not None and right is not None:
            unit = stiffness[number] / span.length
            matrix[[left, right], [left, right]] += 4.0 * unit
            matrix[[left, right], [right, left]] += 2.0 * unit
    return matrix


def _resultants(loads: tuple[Load, ...], length: float) -> FloatArray:
    """Total force, its centre and the length it is spread over, for each load."""
    rows = []
    for load in loads:
        if isinstance(load, PointLoad):
            rows.append((load.force, _inside(load.at, length), 0.0))
        else:
            start, end = _inside(load.start, length), _inside(load.end, length)
            rows.append((load.intensity * (end - start), (start + end) / 2.0, end - start))
    return np.array(rows, dtype=np.float64).reshape(-1, 3)


def _inside(place: float, length: float) -> float:
    """A place on the axis without the rounding that a beam allows beyond it."""
    return min(max(place, 0.0), length)


def _held_moments(span: Span, loads: tuple[Load, ...]) -> tuple[float, float]:
    """Moments at the left and right end of a span whose supports are held."""
    force, centre, spread = _resultants(loads, span.length).T
    rest = span.length - centre
    if span.overhang is Overhang.LEFT:
        return 0.0, float(-(force @ rest))
    if span.overhang is Overhang.RIGHT:
        return float(-(force @ centre)), 0.0
    # A point load's x (L - x)^2 / L^2 averaged over the load's length: exact, as it is a cubic.
    wide = spread**2 / 24.0
    left = centre * rest**2 + wide * (6.0 * centre - 4.0 * span.length)
    right = centre**2 * rest + wide * (2.0 * span.length - 6.0 * centre)
    return float(-(force @ left)) / span.length**2, float(-(force @ right)) / span.length**2


def _line(
    beam: Beam,
    number: int,
    loads: tuple[Load, ...],
    held: tuple[float, float],
    rotations: FloatArray,
    stiffness: float,
) -> Line:
    """A span cut free after its supports have rotated."""
    span = beam.spans[number]
    length = span.length
    force, centre, _ = _resultants(loads, length).T
    left, right = beam.left_support(number), beam.right_support(number)
    moment = held[0]
    if left is None:
        shear = 0.0
    elif right is None:
        shear = float(force.sum())
    else:
        unit = 2.0 * stiffness / length
        moment += unit * (2.0 * rotations[left] + rotations[right])
        end = held[1] - unit * (rotations[left] + 2.0 * rotations[right])
        shear = (end - moment + float(force @ (length - centre))) / length
    points = [load for load in loads if isinstance(load, PointLoad)]
    spread = [load for load in loads if isinstance(load, UniformLoad)]
    return Line(
        length=length,
        moment=float(moment),
        shear=float(shear),
        at=np.array([_inside(load.at, length) for load in points]),
        force=np.array([load.force for load in points]),
        start=np.array([_inside(load.start, length) for load in spread]),
        end=np.array([_inside(load.end, length) for load in spread]),
        intensity=np.array([load.intensity for load in spread]),
    )
