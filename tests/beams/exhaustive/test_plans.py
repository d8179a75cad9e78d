"""Stirrup plans: each is enough at every station and depth, and none that matters is lost."""

from __future__ import annotations

import math
import random
from functools import cache

import numpy as np
import pytest

from optimizer.beams.design import demands_of
from optimizer.beams.frames import frames
from optimizer.beams.plans import ShearOfSpan, depth_for_shear, plans_of_span
from optimizer.beams.reader import parse_beam_job
from optimizer.beams.variants import Cut, Need
from tests.beams.exhaustive.jobs import small_job
from tests.beams.exhaustive.plans import every_plan, serves

SEEDS = range(700, 730)


@cache
def shears_of(seed: int) -> tuple[ShearOfSpan, ...]:
    problem = parse_beam_job(small_job(seed, weight=1.0 + seed % 5))
    frame = frames(problem)[0]
    return tuple(
        ShearOfSpan(problem, frame, index, demand)
        for index, demand in enumerate(demands_of(problem))
    )


def depths_of(shear: ShearOfSpan) -> list[float]:
    """Three depths as layouts of one and two layers have them."""
    section = shear.frame.sections[shear.span]
    room = section.outline.depth - section.bar_face
    return sorted({depth_for_shear(shear.problem, room * share) for share in (0.85, 0.91, 0.97)})


@pytest.mark.parametrize("seed", SEEDS)
def test_plans_are_enough_at_every_station_and_larger_depth(seed: int) -> None:
    """Stirrups are nowhere wider than shear allows, at their depth and at larger ones."""
    for shear in shears_of(seed):
        x = shear.demand.x - shear.demand.x[0]
        depths = depths_of(shear)
        h = shear.frame.sections[shear.span].outline.depth
        allowed = {d: shear.at_face_or_beyond(d) for d in (*depths, h)}
        for plan in plans_of_span(shear, depths):
            spacing = np.array([plan.spacing_at(float(place)) for place in x])
            for d, most in allowed.items():
                if d >= plan.depth:
                    assert (spacing <= most * (1 + 1e-9)).all(), (plan, d)


@pytest.mark.parametrize("seed", SEEDS)
def test_plans_fill_the_clear_span(seed: int) -> None:
    """All spaces and both first distances add up to the clear span; the middle is even."""
    for shear in shears_of(seed):
        for plan in plans_of_span(shear, depths_of(shear)):
            s_left, s_middle, s_right = plan.spacings
            n_left, n_middle, n_right = plan.spaces
            ends = plan.first + plan.last + n_left * s_left + n_right * s_right
            assert ends + n_middle * plan.middle_spacing == pytest.approx(plan.clear)
            assert plan.middle_spacing <= s_middle * (1 + 1e-9)
            assert plan.count == n_left + n_middle + n_right + 1


@pytest.mark.parametrize("seed", SEEDS)
def test_no_need_is_served_cheaper_by_a_plan_left_out(seed: int) -> None:
    """Of all plans none left out serves a need at less cost than those kept."""
    rng = random.Random(seed)
    for shear in shears_of(seed):
        depths = depths_of(shear)
        kept, everything = plans_of_span(shear, depths), every_plan(shear, depths)
        clear = float(shear.demand.x[-1] - shear.demand.x[0])
        for _ in range(40):
            cuts = tuple(
                Cut(rng.uniform(0.0, clear), rng.uniform(0.1, 0.6) * depths[0])
                for _ in range(rng.choice([0, 1, 1, 2, 2]))
            )
            most = rng.choice([math.inf, math.inf, rng.uniform(0.15, 0.5) * depths[0]])
            need = Need(shear.span, rng.choice(depths), cuts, most)
            costs = [
                min((plan.cost for plan in plans if serves(plan, need)), default=math.inf)
                for plans in (kept, everything)
            ]
            assert costs[0] == pytest.approx(costs[1]), need


def test_some_spans_have_zones_and_some_none_at_all() -> None:
    """The plans tried above are of every kind."""
    plans = [
        plan
        for seed in SEEDS
        for shear in shears_of(seed)
        for plan in plans_of_span(shear, depths_of(shear))
    ]
    assert any(plan.spaces[0] and plan.spaces[2] for plan in plans)
    assert any(not plan.spaces[0] and not plan.spaces[2] for plan in plans)
    assert any(len(set(plan.spacings)) == 3 for plan in plans)
