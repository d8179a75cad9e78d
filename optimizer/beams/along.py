"""Strength along a beam as it is built: bars count with what they have developed."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from engine import BarGroups, Section, flexural_state
from engine.beams.demand import SpanDemand
from engine.beams.shear import PHI_SHEAR, concrete_shear, stirrup_shear
from engine.materials import EPS_CU
from engine.outlines import FloatArray
from engine.strength_reduction import phi
from optimizer.beams.frames import Frame, stirrup_yield
from optimizer.beams.problem import BeamProblem
from optimizer.beams.variants import Face, Piece, Role, StirrupPlan

_BOTTOM = (Role.RUN, Role.STOP)
_TOP = (Role.RUN, Role.STOP, Role.THROUGH)


@dataclass(frozen=True, slots=True, kw_only=True)
class SpanStrength:
    """Design strength along the clear span.

    Attributes
    ----------
    x : ndarray, shape (n,)
        Stations on the span's axis, ascending. [in or mm]
    sagging, hogging : ndarray, shape (n,)
        phi Mn of the bottom and of the top bars, in size. [lbf*in or N*mm]
    shear : ndarray, shape (n,)
        phi Vn. [lbf or N]
    spacing : ndarray, shape (n,)
        Stirrup spacing. [in or mm]
    depth : float
        Effective depth that shear is worked out with. [in or mm]
    """

    x: FloatArray
    sagging: FloatArray
    hogging: FloatArray
    shear: FloatArray
    spacing: FloatArray
    depth: float


def strength_along(
    problem: BeamProblem,
    frame: Frame,
    demands: Sequence[SpanDemand],
    pieces: Sequence[Piece],
    stirrups: Sequence[StirrupPlan],
    span: int,
) -> SpanStrength:
    """Strength along one span.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    frame : Frame
        Stirrup and legs.
    demands : sequence of SpanDemand
        Envelopes; their stations are among those of the result.
    pieces : sequence of Piece
        Every bar but the stirrups.
    stirrups : sequence of StirrupPlan
        Stirrups of each span.
    span : int
        Index of the span.

    Returns
    -------
    SpanStrength
        Strength at the stations of the demand, at the ends of bars and where they are
        developed.
    """
    origin = problem.beam.origins[span]
    demand = demands[span]
    low, high = float(demand.x[0]), float(demand.x[-1])
    bottom = [
        piece
        for piece in pieces
        if piece.face is Face.BOTTOM
        and piece.role in _BOTTOM
        and low < (piece.start + piece.end) / 2.0 - origin < high
    ]
    top = _joined([piece for piece in pieces if piece.face is Face.TOP and piece.role in _TOP])
    extra = []
    for piece in (*bottom, *top):
        extra += [piece.start, piece.start + piece.develop_start]
        extra += [piece.end, piece.end - piece.develop_end]
    inside = [place - origin for place in extra if low < place - origin < high]
    x = np.unique(np.concatenate((demand.x, np.array(inside))))
    section = frame.sections[span]
    plan = stirrups[span]
    spacing = np.array([plan.spacing_at(float(place)) for place in x - low])
    fyt = stirrup_yield(problem)
    depth = np.full(len(x), plan.depth)
    Vn = concrete_shear(section.concrete, section.outline.web, depth)
    Vn = Vn + stirrup_shear(np.full(len(x), frame.leg_area), fyt, depth, spacing)
    return SpanStrength(
        x=x,
        sagging=_bending(replace(section, Mu=1.0, Ms=None), bottom, x + origin),
        hogging=_bending(replace(section, Mu=-1.0, Ms=None), top, x + origin),
        shear=PHI_SHEAR * Vn,
        spacing=spacing,
        depth=plan.depth,
    )


def _joined(pieces: Sequence[Piece]) -> list[Piece]:
    """Through bars as one: their laps carry what the bars do."""
    through = [piece for piece in pieces if piece.role is Role.THROUGH]
    others = [piece for piece in pieces if piece.role is not Role.THROUGH]
    if len(through) < 2:
        return [*others, *through]
    first, last = through[0], through[-1]
    whole = replace(first, end=last.end, hook_end=last.hook_end, develop_end=last.develop_end)
    return [*others, whole]


def developed_share(piece: Piece, place: FloatArray) -> FloatArray:
    """Share of a bar's strength that is developed at places on the beam's axis. [-]

    Parameters
    ----------
    piece : Piece
        Bar.
    place : ndarray, shape (n,)
        Places. [in or mm]

    Returns
    -------
    ndarray, shape (n,)
        From zero at and beyond its ends to one.
    """
    from_start = (place - piece.start) / max(piece.develop_start, 1e-9)
    from_end = (piece.end - place) / max(piece.develop_end, 1e-9)
    return np.clip(np.minimum(from_start, from_end), 0.0, 1.0)


def _bending(section: Section, pieces: Sequence[Piece], place: FloatArray) -> FloatArray:
    """Phi Mn of bars as far as they are developed. [lbf*in or N*mm]"""
    strength = np.zeros(len(place))
    if not pieces:
        return strength
    area = np.column_stack(
        [piece.count * piece.bar.area * developed_share(piece, place) for piece in pieces]
    )
    h = section.outline.depth
    depth = np.array([h - piece.surface - piece.bar.diameter / 2.0 for piece in pieces])
    diameter = np.array([piece.bar.diameter for piece in pieces])
    rows = np.flatnonzero(area.sum(axis=1) > 1e-9 * area.max(initial=0.0))
    if not rows.size:
        return strength
    groups = BarGroups(
        area=area[rows],
        depth=np.tile(depth, (len(rows), 1)),
        diameter=np.tile(diameter, (len(rows), 1)),
    )
    state = flexural_state(section.profile, section.concrete, section.steel, groups)
    dt = np.where(groups.area > 0.0, groups.depth, 0.0).max(axis=1)
    factor = phi(section.steel, EPS_CU * (dt - state.c) / state.c)
    strength[rows] = factor * state.Mn
    return strength
