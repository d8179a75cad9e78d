"""Limit on the marks of a beam: the model against every choice of a small menu."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from functools import cache
from itertools import pairwise, product

import pytest

from optimizer.beams.choice import Menu, choose, cost_of
from optimizer.beams.design import BeamDesign, demands_of, design_beam
from optimizer.beams.frames import frames
from optimizer.beams.lists import all_pieces
from optimizer.beams.problem import BeamProblem
from optimizer.beams.reader import parse_beam_job
from optimizer.beams.schedule import schedule_of
from optimizer.beams.solving import FrameSearch
from tests.beams.exhaustive.jobs import small_job

SEEDS = [seed for seed in range(40) if seed % 3 == 0]
FEW = 7


@cache
def problem_of(seed: int) -> BeamProblem:
    """Small random beam without a limit on its marks."""
    return replace(parse_beam_job(small_job(seed)), most_marks=None)


@cache
def limited(seed: int, most: int) -> tuple[FrameSearch, Menu] | None:
    """Search of the first frame with a short menu and a limit on the marks."""
    problem = replace(problem_of(seed), most_marks=most)
    search = FrameSearch(problem, frames(problem)[0], demands_of(problem))
    if not search.modes or not search.first_lists():
        return None
    kept = []
    for items in search.variants:
        order = sorted((item.key, number) for number, item in enumerate(items))
        kept.append([number for _, number in order[:FEW]])
    return search, search.menu_of(kept)


def choices(search: FrameSearch, menu: Menu) -> Iterator[tuple[float, int]]:
    """Cost and number of marks of every choice of the menu that goes together."""
    for mode, bars in enumerate(menu.modes):
        for numbers in product(*(range(len(items)) for items in menu.places)):
            own = [items[number] for items, number in zip(menu.places, numbers, strict=True)]
            if any(item.mode not in (None, bars.mode) for item in own):
                continue
            names = {name for item in own for name in item.sizes} | {bars.mode.bar.designation}
            if menu.most_sizes is not None and len(names) > menu.most_sizes:
                continue
            lapped = [own[place] for place in menu.lapped]
            if len({item.layout.layers[0].largest.designation for item in lapped}) > 1:
                continue
            pairs = pairwise(lapped)
            if any(min(a.run, b.run) < max(a.continuous, b.continuous) for a, b in pairs):
                continue
            clash = any(
                (numbers[one], numbers[other]) in clashes for one, other, clashes in menu.pairs
            )
            plans = [
                next(
                    (
                        k
                        for k in range(len(pool.plans))
                        if all(
                            pool.mask(need) >> k & 1
                            for item in own
                            for need in item.needs
                            if need.span == span
                        )
                    ),
                    None,
                )
                for span, pool in enumerate(menu.pools)
            ]
            if clash or any(plan is None for plan in plans):
                continue
            served = [plan for plan in plans if plan is not None]
            choice = _Chosen(numbers, mode)
            pieces = all_pieces(search, menu, choice)  # type: ignore[arg-type]
            stirrups = [pool.plans[k] for pool, k in zip(menu.pools, served, strict=True)]
            schedule = schedule_of(search.problem, search.frame, pieces, stirrups)
            yield cost_of(menu, numbers, served, mode), len(schedule.marks)


class _Chosen:
    """What `all_pieces` reads of a choice."""

    def __init__(self, places: tuple[int, ...], mode: int) -> None:
        self.places, self.mode = places, mode


@pytest.mark.parametrize("seed", SEEDS)
def test_the_model_counts_marks_as_the_schedule_does(seed: int) -> None:
    """For every limit the best choice equals that of an enumeration with real schedules."""
    found = limited(seed, 99)
    if found is None:
        return
    everything = list(choices(*found))
    if not everything:
        return
    for most in range(min(marks for _, marks in everything) - 1, 12):
        case = limited(seed, most)
        assert case is not None
        search, menu = case
        wanted = min((cost for cost, marks in everything if marks <= most), default=None)
        solved = choose(menu, search.work)
        assert solved.proved
        assert (solved.choice is None) == (wanted is None)
        if solved.choice is not None and wanted is not None:
            assert solved.choice.cost == pytest.approx(wanted, abs=2e-3)


def test_many_limits_bind() -> None:
    """The comparison has cases with few marks and with many."""
    bound = 0
    for seed in SEEDS:
        found = limited(seed, 99)
        counts = {marks for _, marks in choices(*found)} if found else set()
        bound += len(counts) > 1
    assert bound >= 3


def test_a_design_keeps_the_limit_and_costs_no_less() -> None:
    """A beam with fewer marks is found where one exists, and is no cheaper."""
    tried = 0
    for seed in SEEDS:
        free = design_beam(problem_of(seed))
        if not isinstance(free, BeamDesign):
            continue
        most = len(free.schedule.marks) - 1
        fewer = design_beam(replace(problem_of(seed), most_marks=most))
        if isinstance(fewer, BeamDesign):
            tried += 1
            assert len(fewer.schedule.marks) <= most
            assert fewer.cost >= free.cost - 1e-6
            assert fewer.ok == free.ok
    assert tried >= 2
