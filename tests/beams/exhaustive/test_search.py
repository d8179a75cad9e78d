"""The best beam of the search costs what the best of all beams costs."""

from __future__ import annotations

import math

import pytest

from optimizer.beams.design import demands_of, search
from optimizer.beams.frames import frames
from optimizer.beams.reader import parse_beam_job
from tests.beams.exhaustive.brute import BruteFrame, brute_force
from tests.beams.exhaustive.jobs import small_job

BEAMS, GROUP = 24, 6
ROUNDING = 1e-3  # the model counts in ten-thousandths, a few dozen of them


def compared(seed: int) -> bool:
    """Compare search and enumeration of one beam; return whether the beam can be built."""
    problem = parse_beam_job(small_job(seed))
    demands = demands_of(problem)
    found = search(problem, demands)
    assert found.proved, seed
    best = brute_force(problem, demands)
    if found.choice is None:
        assert math.isinf(best.cost), f"{seed}: lost {best.frame}, {best.mode}, {best.variants}"
        return False
    assert found.choice.cost == pytest.approx(best.cost, rel=1e-6, abs=ROUNDING), seed
    assert found.choice.bound <= found.choice.cost + 1e-6, seed
    assert found.choice.bound == pytest.approx(best.cost, rel=1e-6, abs=ROUNDING), seed
    return True


@pytest.mark.parametrize("first", range(0, BEAMS, GROUP))
def test_search_equals_every_choice(first: int) -> None:
    """The least cost of the search is that of trying every choice."""
    built = [compared(seed) for seed in range(first, first + GROUP)]
    assert sum(built) >= 2  # beams are compared, not nothing with nothing


def test_the_best_of_all_keeps_every_coupling() -> None:
    """What the enumeration calls a beam is one: sizes counted, one lapped size, plans enough."""
    seen = 0
    for seed in range(6):
        problem = parse_beam_job(small_job(seed))
        demands = demands_of(problem)
        for frame in frames(problem):
            own = BruteFrame(problem, frame, demands)
            best = own.best(math.inf)
            if best.mode is None:
                continue
            seen += 1
            names = {bar.designation for item in best.variants for bar in item.layout.sizes}
            assert len(names | {best.mode.bar.designation}) <= (problem.most_sizes or 99)
            for variant in best.variants:
                assert variant.mode in (None, best.mode)
                for need in variant.needs:
                    assert best.plans[need.span].depth <= need.depth
            total = sum(item.cost for item in best.variants) + sum(item.cost for item in best.plans)
            (top,) = [item for item in own.modes if item.mode == best.mode]
            assert best.cost == pytest.approx(total + top.cost + own.constant)
    assert seen >= 2
