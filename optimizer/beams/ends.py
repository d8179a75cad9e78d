"""Ends of bars: where those that stop may stop, and lengths rounded up to whole steps."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from catalogs import Bar
from engine.beams.cutoffs import extension, last_above, reach, shear_factor_at_cut
from engine.editions import Edition
from optimizer.beams.places import Side
from optimizer.beams.strengths import RunStrength

_SLACK = 1e-6


@dataclass(frozen=True, slots=True)
class StopEnd:
    """A place where bars may stop.

    Attributes
    ----------
    u : float
        Distance from the start of the side. [in or mm]
    factor : float or None
        phi Vn over Vu that 9.7.3.5 asks for there; None outside tension zones.
    """

    u: float
    factor: float | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Stopping:
    """Bars that stop and those that run on, as one side sees them.

    Attributes
    ----------
    strong : float
        phi Mn of all bars. [lbf*in or N*mm]
    run : RunStrength
        Bars that run on.
    service_limit : float
        Service moment up to which these control cracks alone. [lbf*in or N*mm]
    d : float
        Effective depth of all bars. [in or mm]
    largest : Bar
        Largest bar that stops.
    ld : float
        Longest development length of the bars that stop. [in or mm]
    least : float
        Least distance for other reasons. [in or mm]
    """

    strong: float
    run: RunStrength
    service_limit: float
    d: float
    largest: Bar
    ld: float
    least: float = 0.0


def stop_ends(
    edition: Edition,
    side: Side,
    bars: Stopping,
    *,
    farthest: float,
    nearest: float,
    exempt: bool,
    past_inflection: float = 0.0,
) -> list[StopEnd]:
    """Where bars may stop on one side: as early as the rules permit, or out of tension.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    side : Side
        Side of the place.
    bars : Stopping
        Bars.
    farthest, nearest : float
        Where bars end that run into a support or to a tip: at most and at least; in the middle of
        a span both are the end of the way. [in or mm]
    exempt : bool
        Whether 9.7.3.3 asks for no extension there: at simple supports and free tips.
    past_inflection : float
        Extension past the inflection point where the bars that run on are fewer than 9.7.3.8.4
        asks for; zero otherwise. [in or mm]

    Returns
    -------
    list of StopEnd
        None, one or two.
    """
    u, demand = side.u, side.demand
    closed = side.support is not None or side.end_of_beam
    if not closed and demand[-1] > bars.run.usable:
        return []  # all bars are needed where the next support's take over
    beyond = extension(bars.d, bars.largest.diameter)
    by_rule = reach(
        u, demand, strong=bars.strong, weak=bars.run.usable, beyond=beyond, development=0.0
    )
    by_bond = reach(
        u, demand, strong=bars.strong, weak=bars.run.usable, beyond=0.0, development=bars.ld
    )
    by_cracks = last_above(u, side.service, bars.service_limit)
    soonest = max(by_rule, by_bond, by_cracks, bars.least)
    zero = last_above(u, demand, 0.0)
    outside = max(zero + past_inflection, soonest)
    if past_inflection:
        soonest = outside
    if outside >= side.face - _SLACK and closed:
        outside = farthest if exempt else max(outside, nearest)
    found = []
    if soonest < zero - _SLACK and soonest <= side.face - _SLACK:
        moment = float(np.interp(soonest, u, demand))
        factor = shear_factor_at_cut(edition, bars.largest, moment, bars.run.phi_Mn)
        found.append(StopEnd(soonest, factor))
    if soonest > farthest + _SLACK and exempt and max(by_bond, bars.least) <= farthest + _SLACK:
        soonest = outside = farthest  # 9.7.3.3 asks for nothing beyond a support or a tip
    if soonest <= outside + _SLACK and outside <= farthest + _SLACK:
        found.append(StopEnd(outside, None))
    return found


@dataclass(frozen=True, slots=True)
class EndRange:
    """Where one end of a bar has to lie.

    Attributes
    ----------
    need : float
        Place that the bar has to reach. [in or mm]
    limit : float
        Place that it must not pass. [in or mm]
    hooked : bool
        Whether it ends in a hook, which then lies at the limit.
    """

    need: float
    limit: float
    hooked: bool = False


def fit(left: EndRange, right: EndRange, step: float) -> tuple[float, float] | None:
    """Shortest bar of a whole number of steps between two ends.

    Parameters
    ----------
    left, right : EndRange
        Ranges of its ends, on the beam's axis.
    step : float
        Step of lengths. [in or mm]

    Returns
    -------
    tuple of float or None
        Start and end, or None where no such length fits. [in or mm]
    """
    room = right.limit - left.limit
    most = step * math.floor(room / step + _SLACK)
    if right.hooked and not left.hooked:
        start = right.limit - step * math.ceil((right.limit - left.need) / step - _SLACK)
        end = right.limit
        if start < left.limit - _SLACK:  # the hook stays less than a step short of its place
            start, end = left.limit, left.limit + most
    elif left.hooked:
        start = left.limit
        end = start + step * math.ceil((right.need - start) / step - _SLACK)
        if right.hooked or end > right.limit + _SLACK:
            end = right.limit if not right.hooked else start + most
            start = end - most
    else:
        start = left.need
        end = start + step * math.ceil((right.need - start) / step - _SLACK)
        over = max(0.0, end - right.limit)
        start, end = start - over, end - over
    inside = start >= left.limit - _SLACK and end <= right.limit + _SLACK
    reached = start <= left.need + _SLACK and end >= right.need - _SLACK
    return (start, end) if inside and reached else None
