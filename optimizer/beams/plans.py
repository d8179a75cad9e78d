"""Stirrup plans of one span: three zones, each with the spacing it needs.

For each spacing in the middle the zones at the ends are as short as shear allows. A plan is
made for an effective depth and serves every larger one: strength grows with depth, and the
largest spacing too. Plans that another one beats in every respect are left out.
"""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np

from engine.beams.demand import SpanDemand
from engine.beams.shear import (
    PHI_SHEAR,
    concrete_shear,
    largest_spacing_for_area,
    largest_steel_shear,
    spacing_across,
    spacing_along,
)
from engine.beams.spans import Beam, PointLoad
from engine.outlines import FloatArray
from optimizer.beams.frames import Frame, length_unit, per_length, round_up, stirrup_yield
from optimizer.beams.problem import BeamProblem
from optimizer.beams.variants import StirrupPlan

_FIRST = {"us": 2.0, "si": 50.0}  # first stirrup from the face, common practice [in or mm]
_LEAST = {"us": 3.0, "si": 75.0}  # closest stirrups, common practice [in or mm]
_DEPTH_STEP = {"us": 0.25, "si": 5.0}
_SLACK = 1e-9


def depth_for_shear(problem: BeamProblem, d: float) -> float:
    """Effective depth rounded down to the step that shear is worked out with. [in or mm]"""
    step = _DEPTH_STEP[problem.edition.units]
    return step * math.floor(d / step + 1e-9)


def shear_at_depth(beam: Beam, span: int, demand: SpanDemand, d: float) -> FloatArray:
    """Factored shear to design for at the stations of a span.

    Parameters
    ----------
    beam : Beam
        Beam.
    span : int
        Index of the span.
    demand : SpanDemand
        Its envelopes.
    d : float
        Effective depth. [in or mm]

    Returns
    -------
    ndarray, shape (n,)
        Vu, within d of a face not above that at d where 9.4.3.2 allows: the reaction
        compresses the end, and no point load stands within the depth h of it. Loads count as
        applied near the top. [lbf or N]
    """
    x, shear = demand.x, demand.Vu.copy()
    start, end = float(x[0]), float(x[-1])
    forces = [load.at for load in beam.spans[span].loads if isinstance(load, PointLoad)]
    left, right = beam.left_support(span), beam.right_support(span)
    h = beam.spans[span].outline.depth
    # Point loads are looked for within the whole depth h: then a larger d never asks for more.
    if end - start < 2.0 * h:
        return shear
    if _reducible(beam, left) and not any(at <= start + h for at in forces):
        near = x < start + d
        shear[near] = np.minimum(shear[near], _largest(demand, start + d, start + h))
    if _reducible(beam, right) and not any(at >= end - h for at in forces):
        near = x > end - d
        shear[near] = np.minimum(shear[near], _largest(demand, end - h, end - d))
    return shear


def _largest(demand: SpanDemand, low: float, high: float) -> float:
    """Largest shear between two places: so a larger d never asks for more than a smaller."""
    ends = np.interp([low, high], demand.x, demand.Vu)
    between = demand.Vu[(demand.x > low) & (demand.x < high)]
    return float(max(ends.max(), between.max(initial=0.0)))


def _reducible(beam: Beam, support: int | None) -> bool:
    """Whether the reaction at an end of a span compresses it."""
    return support is not None and beam.supports[support].compresses


class ShearOfSpan:
    """Stirrups that a span needs at any effective depth.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    frame : Frame
        Stirrup and legs.
    span : int
        Index of the span.
    demand : SpanDemand
        Its envelopes.
    """

    def __init__(self, problem: BeamProblem, frame: Frame, span: int, demand: SpanDemand) -> None:
        self.problem, self.frame, self.span, self.demand = problem, frame, span, demand
        section = frame.sections[span]
        self.concrete, self.bw = section.concrete, section.outline.web
        self.fyt = stirrup_yield(problem)
        self.across = self.bw - 2.0 * section.cover - frame.stirrup.diameter
        self._widest: dict[float, float] = {}
        beam = problem.beam
        self.first = self._from_end(free=beam.left_support(span) is None)
        self.last = self._from_end(free=beam.right_support(span) is None)
        self.by_area = largest_spacing_for_area(self.concrete, self.bw, frame.leg_area, self.fyt)

    def _from_end(self, *, free: bool) -> float:
        """Distance of the outermost stirrup from a face, or from a tip. [in or mm]

        Bars end up to a step of lengths short of the cover at a tip: the stirrup stands where
        they still hold it.
        """
        first = _FIRST[self.problem.edition.units]
        if not free:
            return first
        step = self.problem.length_step
        cover = self.frame.sections[self.span].cover
        return max(first, round_up(cover + step + self.frame.stirrup.diameter, step))

    def spacing(self, d: float, shear: FloatArray) -> FloatArray:
        """Largest spacing that carries a shear with a depth.

        Parameters
        ----------
        d : float
            Effective depth. [in or mm]
        shear : ndarray, shape (n,)
            Vu. [lbf or N]

        Returns
        -------
        ndarray, shape (n,)
            Least of strength, least area, 9.7.6.2.2; zero where the section is too small or
            the legs are too far apart. [in or mm]
        """
        Vs = np.maximum(shear / PHI_SHEAR - concrete_shear(self.concrete, self.bw, d), 0.0)
        with np.errstate(divide="ignore"):
            by_strength = self.frame.leg_area * self.fyt * d / Vs
        depth = np.full(len(Vs), d)
        along = spacing_along(self.concrete, self.bw, depth, Vs)
        legs_apart = spacing_across(self.concrete, self.bw, depth, Vs) * (self.frame.legs - 1)
        refused = self.across > legs_apart * (1 + _SLACK)
        refused = refused | (Vs > largest_steel_shear(self.concrete, self.bw, d) * (1 + _SLACK))
        found = np.minimum(np.minimum(by_strength, along), self.by_area)
        return np.where(refused, 0.0, found)

    def at_face_or_beyond(self, d: float) -> FloatArray:
        """Largest spacing at every station, the shear near supports taken at d. [in or mm]"""
        shear = shear_at_depth(self.problem.beam, self.span, self.demand, d)
        return self.spacing(d, shear)

    def widest(self, d: float) -> float:
        """Largest spacing anywhere in the span. [in or mm]"""
        if d not in self._widest:
            self._widest[d] = float(self.at_face_or_beyond(d).max())
        return self._widest[d]

    def at_cut(self, d: float, x: float, factor: float) -> float:
        """Largest spacing where bars stop in a tension zone. [in or mm]"""
        shear = np.array([factor * float(np.interp(x, self.demand.x, self.demand.Vu))])
        return float(self.spacing(d, shear)[0])


def plans_of_span(shear: ShearOfSpan, depths: list[float]) -> list[StirrupPlan]:
    """All plans of a span that no other beats.

    Parameters
    ----------
    shear : ShearOfSpan
        Span.
    depths : list of float
        Effective depths that occur, as `depth_for_shear` gives them. [in or mm]

    Returns
    -------
    list of StirrupPlan
        By cost.
    """
    problem, frame, span = shear.problem, shear.frame, shear.span
    step = problem.stirrup_step
    least = step * math.ceil(_LEAST[problem.edition.units] / step - 1e-9)
    each = frame.set_length(span, problem.length_step) / length_unit(problem)
    each *= per_length(frame.stirrup, problem.ranking)
    found: list[StirrupPlan] = []
    for d in sorted(set(depths)):
        allowed = shear.at_face_or_beyond(d)
        x = shear.demand.x - shear.demand.x[0]
        tightest = float(allowed.min())
        largest = step * math.floor(float(allowed.max()) / step + 1e-9)
        if tightest < least - 1e-9:
            continue
        middles = np.arange(least, largest + step / 2, step)
        for middle in middles:
            found += _with_middle(shear, d, x, allowed, float(middle), least, each)
    return _undominated(found)


def _with_middle(
    shear: ShearOfSpan,
    d: float,
    x: FloatArray,
    allowed: FloatArray,
    middle: float,
    least: float,
    each: float,
) -> list[StirrupPlan]:
    """Plans of one depth and middle spacing."""
    step = shear.problem.stirrup_step
    first, last = shear.first, shear.last
    clear = float(x[-1])
    short = np.flatnonzero(allowed < middle - _SLACK * middle)
    half = x[int(np.argmax(allowed))] if short.size else clear / 2.0
    left = short[x[short] <= half]
    right = short[x[short] > half]
    # A zone ends at the first station that the middle spacing is enough for.
    left_end = float(x[min(int(left[-1]) + 1, len(x) - 1)]) if left.size else 0.0
    right_end = clear - float(x[max(int(right[0]) - 1, 0)]) if right.size else 0.0
    lefts = _zone(allowed[: int(left[-1]) + 1] if left.size else None, middle, least, step)
    rights = _zone(allowed[int(right[0]) :] if right.size else None, middle, least, step)
    plans = []
    for s_left in lefts:
        n_left = _spaces(left_end, first, s_left)
        for s_right in rights:
            n_right = _spaces(right_end, last, s_right)
            rest = clear - first - last - n_left * s_left - n_right * s_right
            if rest < -1e-9:
                continue
            n_middle = math.ceil(rest / middle - 1e-9)
            plans.append(
                StirrupPlan(
                    span=shear.span,
                    depth=d,
                    first=first,
                    last=last,
                    clear=clear,
                    spacings=(s_left, middle, s_right),
                    spaces=(n_left, n_middle, n_right),
                    cost=(n_left + n_middle + n_right + 1) * each,
                )
            )
    return plans


def plan_as_drawn(
    shear: ShearOfSpan,
    depths: list[float],
    spacings: tuple[float, float, float],
    ends: tuple[int, int],
) -> StirrupPlan | None:
    """Stirrups drawn before, in a span that may have changed: the end zones stay as they were.

    Parameters
    ----------
    shear : ShearOfSpan
        Span.
    depths : list of float
        Effective depths that occur. [in or mm]
    spacings : tuple of float
        Spacing at the left end, in the middle and at the right end. [in or mm]
    ends : tuple of int
        Spaces in the end zones; the middle fills what is left.

    Returns
    -------
    StirrupPlan or None
        The plan for the least depth that it is enough for, or None if it is not enough for any.
    """
    problem, frame = shear.problem, shear.frame
    first, last = shear.first, shear.last
    clear = float(shear.demand.x[-1] - shear.demand.x[0])
    rest = clear - first - last - ends[0] * spacings[0] - ends[1] * spacings[2]
    if rest < -1e-9:
        return None
    spaces = (ends[0], math.ceil(rest / spacings[1] - 1e-9), ends[1])
    each = frame.set_length(shear.span, problem.length_step) / length_unit(problem)
    plan = StirrupPlan(
        span=shear.span,
        depth=0.0,
        first=first,
        last=last,
        clear=clear,
        spacings=spacings,
        spaces=spaces,
        cost=(sum(spaces) + 1) * each * per_length(frame.stirrup, problem.ranking),
    )
    at = np.array([plan.spacing_at(float(x)) for x in shear.demand.x - shear.demand.x[0]])
    for d in sorted(set(depths)):
        if (at <= shear.at_face_or_beyond(d) * (1 + _SLACK)).all():
            return replace(plan, depth=d)
    return None


def _zone(allowed: FloatArray | None, middle: float, least: float, step: float) -> list[float]:
    """Spacings of an end zone: all from the least to what it allows; the middle's if none."""
    if allowed is None:
        return [middle]
    largest = min(float(allowed.min()), middle)
    count = math.floor((largest - least) / step + 1e-9) + 1
    return [least + number * step for number in range(count)]


def _spaces(length: float, first: float, spacing: float) -> int:
    """Spaces that cover a zone."""
    return max(0, math.ceil((length - first) / spacing - 1e-9)) if length > 0.0 else 0


def _undominated(plans: list[StirrupPlan]) -> list[StirrupPlan]:
    """Leave out plans that another one of no more cost and depth beats at every place."""
    plans = sorted(plans, key=lambda plan: (round(plan.cost, 6), plan.depth, plan.key))
    if not plans:
        return []
    kept: list[StirrupPlan] = []
    rows = np.empty((len(plans), 6))
    count = 0
    for plan in plans:
        (_, left), (_, right), _ = plan.zones
        end = plan.clear - right
        s = plan.spacings
        new = np.array([plan.depth, s[0], s[1], s[2], left, end])
        have = rows[:count]
        # Closer everywhere: in the middle, at each end, and where its own end zone is the
        # shorter one, its middle spacing is close enough for the rest of the other's.
        beats = (have[:, 0] <= new[0]) & (have[:, 2] <= s[1])
        beats &= (have[:, 1] <= s[0]) & ((have[:, 4] >= left) | (have[:, 2] <= s[0]))
        beats &= (have[:, 3] <= s[2]) & ((have[:, 5] >= end) | (have[:, 2] <= s[2]))
        if not beats.any():
            rows[count] = new
            count += 1
            kept.append(plan)
    return kept
