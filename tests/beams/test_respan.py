"""The least-change frontier against every choice of small beams, and what it promises."""

from __future__ import annotations

import copy
import math
import random
import tomllib
from dataclasses import dataclass, replace
from functools import cache
from typing import Any

import pytest

from optimizer.beams.design import BeamDesign, demands_of, design_beam
from optimizer.beams.positions import TOP, DrawnBeam, drawn
from optimizer.beams.problem import BeamProblem
from optimizer.beams.reader import parse_beam_keys
from optimizer.beams.respan import Respan, Step, changed_positions, differences, respan
from optimizer.errors import JobError
from tests.beams.exhaustive.frontier import brute_frontier
from tests.beams.exhaustive.jobs import small_job
from tests.beams.jobs import beam_text

SEEDS = range(24)
ROUNDING = 1e-3  # the model counts in ten-thousandths, a few dozen of them
CAP = 1.25  # dearer beams than so many times the best are not enumerated
CHANGES = (
    ("span", "length", 1.2),
    ("span", "length", 0.8),
    ("span", "live", 0.2),
    ("span", "live", 1.9),
)
_COLUMN = """\
width = "16 in"
ends = "columns"
below = { width = "16 in", depth = "16 in", height = "11 ft" }"""


@dataclass(frozen=True, slots=True, kw_only=True)
class Changed:
    """A small beam as drawn, and after a change."""

    problem: BeamProblem
    old: DrawnBeam
    answer: Respan


def loaded_job(seed: int) -> str:
    """Return the text of a small beam under loads that all its bars are needed for."""
    rng = random.Random(seed)
    sizes = rng.choice(['"#6", "#7", "#8"', '"#5", "#6", "#8"', '"#6", "#8"'])
    spans = rng.choice([1, 2, 2])
    supports = tuple(_COLUMN if rng.random() < 0.6 else "" for _ in range(spans + 1))
    lines = tuple(
        f'length = "{rng.randint(15, 21)} ft"\ndead = "{rng.choice([1.5, 2.0, 2.5])} kip/ft"\n'
        f'live = "{rng.choice([1.0, 1.5, 2.0])} kip/ft"'
        for _ in range(spans)
    )
    layers, mixed = rng.choice([1, 2]), rng.choice([1, 2])
    closed = "true" if rng.random() < 0.7 else "false"
    by = rng.choice(["practical", "practical", "lightest"])
    stirrups = rng.choice(['"#3"', '"#3"', '"#3", "#4"'])
    return beam_text(
        bars=f"sizes = [{sizes}]\nmax_layers = {layers}\nmax_sizes = {mixed}",
        ranking=f'by = "{by}"',
        beam=f'stirrups = [{stirrups}]\nhangers = ["#4"]\nclosed_stirrups = {closed}\n'
        'stirrup_step = "2 in"',
        supports=supports,
        spans=lines,
    )


def job_of(seed: int) -> str:
    """Return the text of a beam: most heavily loaded, every fourth of all kinds."""
    return small_job(seed) if seed % 4 == 3 else loaded_job(seed)


def _scaled(keys: dict[str, Any], seed: int) -> dict[str, Any]:
    table, key, share = CHANGES[seed // 2 % len(CHANGES)]
    keys = copy.deepcopy(keys)
    entries = keys[table]
    entry = next(item for item in entries if "cantilever" not in item)
    value, unit = entry[key].split()
    entry[key] = f"{float(value) * share:.2f} {unit}"
    return keys


@cache
def changed(seed: int) -> Changed | None:
    """Return a small beam after a change; None where it cannot be built before or after."""
    keys = tomllib.loads(job_of(seed))
    before = design_beam(parse_beam_keys(keys))
    if not isinstance(before, BeamDesign):
        return None
    problem = parse_beam_keys(_scaled(keys, seed))
    old = drawn(before)
    answer = respan(problem, old)
    if not isinstance(answer.best, BeamDesign):
        return None
    return Changed(problem=problem, old=old, answer=answer)


def cost_within(answer: Respan, changes: int) -> float:
    """Return the cost of the frontier for at most so many changes; infinite if there is none."""
    found = [
        step.design.cost
        for step in answer.steps
        if step.design is not None and step.changes <= changes
    ]
    return min(found, default=math.inf)


def assert_equals_brute(item: Changed, answer: Respan, locked: frozenset[str]) -> None:
    """Assert that each step costs what the best of all choices costs."""
    assert isinstance(item.answer.best, BeamDesign)
    assert all(step.proved for step in answer.steps)
    cap = CAP * item.answer.best.cost
    best = brute_frontier(item.problem, demands_of(item.problem), item.old, cap, locked)
    for changes, cost in enumerate(best):
        found = cost_within(answer, changes)
        if cost > 0.999 * cap:
            continue  # at the cap either answer is right
        assert found == pytest.approx(cost, rel=1e-6, abs=ROUNDING), changes


@pytest.mark.parametrize("seed", SEEDS)
def test_frontier_equals_every_choice(seed: int) -> None:
    """For each number of changes no choice of all positions costs less."""
    item = changed(seed)
    if item is not None:
        assert_equals_brute(item, item.answer, frozenset())


def test_many_of_the_beams_can_be_built() -> None:
    """The comparison is of frontiers with several steps, not of nothing with nothing."""
    items = [item for seed in SEEDS if (item := changed(seed)) is not None]
    assert len(items) >= 10
    steps = [len([step for step in item.answer.steps if step.design]) for item in items]
    assert sum(count >= 2 for count in steps) >= 5
    forced = [item for item in items if item.answer.steps[0].design is None]
    assert len(forced) >= 3


@pytest.mark.parametrize("seed", SEEDS[1::5])
def test_locked_positions_stay(seed: int) -> None:
    """With a position locked, the frontier is that of all beams that keep it."""
    item = changed(seed)
    if item is None:
        return
    for name in list(item.old.positions)[:: max(1, len(item.old.positions) // 3)]:
        answer = respan(item.problem, item.old, (name,))
        assert answer.locked == (name,)
        assert_equals_brute(item, answer, frozenset({name}))
        for step in answer.steps:
            assert name not in step.changed
            if step.design is not None:
                assert drawn(step.design).positions[name] == item.old.positions[name]


def _steps(item: Changed) -> list[tuple[Step, BeamDesign]]:
    return [(step, step.design) for step in item.answer.steps if step.design is not None]


@pytest.mark.parametrize("seed", SEEDS)
def test_each_step_costs_less_and_keeps_its_promise(seed: int) -> None:
    """Steps count what they change, keep the rest in all its bars, and end at the best."""
    item = changed(seed)
    if item is None:
        return
    found = _steps(item)
    assert isinstance(item.answer.best, BeamDesign)
    costs = [design.cost for _, design in found]
    assert costs == sorted(costs, reverse=True)
    assert len(set(costs)) == len(costs)
    assert costs[-1] == pytest.approx(item.answer.best.cost, abs=ROUNDING)
    for step, design in found:
        assert len(step.changed) <= step.changes
        assert design.cost >= design.bound - ROUNDING
        assert design.bound <= item.answer.best.cost + ROUNDING
        for place, variant in zip(design.places, design.chosen, strict=True):
            if place.mark not in step.changed:
                layers = tuple(layer.label for layer in variant.layout.layers)
                before = item.old.places[place.mark]
                assert (layers, variant.run) == (before.layers, before.run)
        for plan in design.stirrups:
            name = f"{item.problem.beam.spans[plan.span].mark} stirrups"
            if name not in step.changed:
                state = item.old.stirrups[name]
                assert plan.spacings == pytest.approx(state.spacings)
                assert (plan.spaces[0], plan.spaces[2]) == state.ends
                assert (design.frame.stirrup.designation, design.frame.legs) == (
                    state.size,
                    state.legs,
                )
        if TOP not in step.changed:
            top = (design.top.kind.value, design.top.bar.designation)
            assert top == (item.old.top.kind, item.old.top.size)
        assert list(step.changed) == changed_positions(item.old, drawn(design))


@pytest.mark.parametrize("seed", SEEDS[::3])
def test_a_verdict_is_what_a_lock_would_find(seed: int) -> None:
    """A position that works can be kept by some beam; one that does not, by none."""
    item = changed(seed)
    if item is None:
        return
    assert {verdict.position for verdict in item.answer.verdicts} == set(item.old.positions)
    for verdict in item.answer.verdicts:
        assert verdict.works is (verdict.why == "")
        if not verdict.works:
            locked = respan(item.problem, item.old, (verdict.position,))
            assert all(step.design is None for step in locked.steps), verdict.position
    if item.answer.steps[0].design is not None:
        assert all(verdict.works for verdict in item.answer.verdicts)


@pytest.mark.parametrize("seed", SEEDS[::3])
def test_differences_account_for_every_bar(seed: int) -> None:
    """Lines of the mark-up list hold each bar of both beams once; what stays is equal."""
    item = changed(seed)
    if item is None:
        return
    for _, design in _steps(item):
        lines = differences(item.old, drawn(design))
        before = sum(line.before.count for line in lines if line.before is not None)
        after = sum(line.after.count for line in lines if line.after is not None)
        assert before == sum(bars.count for bars in item.old.bars)
        assert after == sum(mark.count for mark in design.schedule.marks)
        masses = {mark.mark: mark.mass_each for mark in design.schedule.marks}
        mass = sum(
            line.after.count * masses[line.after.mark] for line in lines if line.after is not None
        )
        assert mass == pytest.approx(design.schedule.mass)
        for line in lines:
            one, other = line.before, line.after
            assert (one is None) is (line.what == "appears")
            assert (other is None) is (line.what == "vanishes")
            if one is None or other is None:
                continue
            alike = {
                "size": one.size == other.size,
                "count": one.count == other.count,
                "shape": one.shape == other.shape,
                "length": one.length == pytest.approx(other.length),
            }
            if line.what == "stays":
                assert all(alike.values())
                assert line.position not in changed_positions(item.old, drawn(design)) or (
                    line.position in item.old.places or line.position == TOP
                )
            elif line.what != "spacing":
                assert not alike[line.what]


@pytest.mark.parametrize("seed", SEEDS[::4])
def test_no_change_keeps_everything(seed: int) -> None:
    """A beam that is not changed keeps all positions at its own cost, and stays the best."""
    keys = tomllib.loads(job_of(seed))
    problem = parse_beam_keys(keys)
    before = design_beam(problem)
    if not isinstance(before, BeamDesign):
        return
    old = drawn(before)
    answer = respan(problem, old)
    assert [step.changes for step in answer.steps] == [0]
    least = answer.least
    assert least is not None
    assert least.design is not None
    assert least.changed == ()
    assert least.design.cost == pytest.approx(before.cost)
    assert replace(drawn(least.design), cost=old.cost) == old  # sums differ in their last bit
    assert {line.what for line in differences(old, drawn(least.design))} == {"stays"}
    assert all(verdict.works for verdict in answer.verdicts)


def test_unknown_position_is_refused() -> None:
    """Only positions of the beam as drawn can be locked."""
    item = next(item for seed in SEEDS if (item := changed(seed)) is not None)
    with pytest.raises(JobError, match=r"--lock: no position 'A bottom'; allowed: A-B bottom"):
        respan(item.problem, item.old, ("A bottom",))
