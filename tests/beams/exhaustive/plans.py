"""Every stirrup plan of a span, none left out for being beaten by another."""

from __future__ import annotations

import math
from collections.abc import Iterable

import numpy as np

from optimizer.beams.plans import ShearOfSpan
from optimizer.beams.variants import Need, StirrupPlan

_FIRST = {"us": 2.0, "si": 50.0}  # first stirrup from the face [in or mm]
_CLOSEST = {"us": 3.0, "si": 75.0}  # [in or mm]
_ROUNDING = 1e-9


def cost_of_set(shear: ShearOfSpan) -> float:
    """Return mass or index of one set of stirrups by its cut length. [lb or kg]"""
    problem, bar = shear.problem, shear.frame.stirrup
    ranking = problem.ranking
    per = bar.mass
    if ranking.by == "practical":
        k = ranking.labour_share
        per = bar.mass * (1.0 + k * bar.relative_labour) / (1.0 + k) + ranking.per_bar
    unit = 12.0 if problem.edition.units == "us" else 1000.0
    return per * shear.frame.set_length(shear.span, problem.length_step) / unit


def outermost(shear: ShearOfSpan) -> tuple[float, float]:
    """Return the distances of the outermost stirrups from the ends of the span.

    At a tip bars may end a step of lengths short of the cover; the stirrup still has to hold them.
    """
    problem, found = shear.problem, []
    beam, step = problem.beam, problem.length_step
    for support in (beam.left_support(shear.span), beam.right_support(shear.span)):
        usual = _FIRST[problem.edition.units]
        cover = shear.frame.sections[shear.span].cover
        inside = step * math.ceil((cover + step + shear.frame.stirrup.diameter) / step - 1e-6)
        found.append(usual if support is not None else max(usual, inside))
    return found[0], found[1]


def every_plan(shear: ShearOfSpan, depths: Iterable[float]) -> list[StirrupPlan]:
    """Return all plans of some depths: each middle spacing, each spacing of both end zones.

    An end zone runs from the face to the first station from which on, up to the place where the
    widest spacing is allowed, the middle spacing is close enough.
    """
    step, units = shear.problem.stirrup_step, shear.problem.edition.units
    least = step * math.ceil(_CLOSEST[units] / step - _ROUNDING)
    each = cost_of_set(shear)
    first, last = outermost(shear)
    x = shear.demand.x - shear.demand.x[0]
    clear = float(x[-1])
    found = []
    for d in sorted(set(depths)):
        allowed = shear.at_face_or_beyond(d)
        if allowed.min() < least - _ROUNDING:
            continue
        turn = int(np.argmax(allowed))
        middle = least
        while middle <= allowed[turn] + _ROUNDING:
            short = [i for i in range(len(x)) if allowed[i] < middle * (1 - _ROUNDING)]
            ends = []
            for side in (
                [i for i in short if x[i] <= x[turn]],
                [i for i in short if x[i] > x[turn]][::-1],
            ):
                if not side:
                    ends.append([(middle, 0)])
                    continue
                inward = side[-1] + (1 if side[-1] <= turn else -1)
                length = x[inward] if side[-1] <= turn else clear - x[inward]
                whole = range(side[-1] + 1) if side[-1] <= turn else range(side[-1], len(x))
                tightest = min(middle, *(float(allowed[i]) for i in whole))
                choices = []
                spacing = least
                while spacing <= tightest + _ROUNDING:
                    edge = first if side[-1] <= turn else last
                    n = math.ceil((length - edge) / spacing - _ROUNDING)
                    choices.append((spacing, max(n, 0)))
                    spacing += step
                ends.append(choices)
            for s_left, n_left in ends[0]:
                for s_right, n_right in ends[1]:
                    rest = clear - first - last - n_left * s_left - n_right * s_right
                    if rest < -_ROUNDING:
                        continue
                    n_middle = math.ceil(rest / middle - _ROUNDING)
                    found.append(
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
            middle += step
    return sorted(found, key=lambda plan: plan.cost)


def serves(plan: StirrupPlan, need: Need) -> bool:
    """Return whether a plan does all that some bars ask of it."""
    return (
        plan.depth <= need.depth + _ROUNDING
        and max(plan.spacings) <= need.most_spacing + _ROUNDING
        and all(plan.spacing_at(cut.at) <= cut.spacing + _ROUNDING for cut in need.cuts)
    )
