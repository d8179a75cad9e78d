"""The model of a menu: what may be chosen together, and what it says when nothing may."""

from __future__ import annotations

from dataclasses import replace
from functools import cache
from itertools import product

import pytest

from optimizer.beams.choice import Choice, Keep, Menu, choose, cost_of
from optimizer.beams.design import demands_of, search
from optimizer.beams.pools import PlanPool
from tests.beams.jobs import beam_of

WORK = 50.0


@cache
def found() -> tuple[Menu, Choice]:
    load = 'dead = "1.0 kip/ft"\nlive = "0.8 kip/ft"\n'
    problem = beam_of(
        bars='sizes = ["#6", "#7"]\nmax_layers = 1',
        beam='stirrups = ["#3"]\nhangers = ["#4"]',
        spans=(f'length = "22 ft"\n{load}', f'length = "18 ft"\n{load}'),
    )
    result = search(problem, demands_of(problem))
    assert result.best is not None
    menu, _ = result.best.menu([range(len(items)) for items in result.best.variants])
    solved = choose(menu, WORK)
    assert solved.choice is not None
    assert result.choice is not None
    assert solved.choice.cost == pytest.approx(result.choice.cost)
    return menu, solved.choice


def unkept(menu: Menu) -> Keep:
    return Keep(
        places=tuple(frozenset[int]() for _ in menu.places),
        plans=tuple(frozenset[int]() for _ in menu.pools),
        modes=frozenset(),
        most_changes=len(menu.places) + len(menu.pools) + 1,
    )


def test_the_choice_is_the_least_of_its_menu() -> None:
    """The choice costs as little as the best of trying every one."""
    menu, best = found()
    solved = choose(menu, WORK)
    assert solved.proved
    assert solved.choice is not None
    assert solved.choice.cost == pytest.approx(best.cost)
    own = solved.choice
    assert own.cost == pytest.approx(cost_of(menu, own.places, own.plans, own.mode))
    costs = []
    for mode, places in product(
        range(len(menu.modes)), product(*(range(len(items)) for items in menu.places))
    ):
        variants = [items[n] for items, n in zip(menu.places, places, strict=True)]
        top = menu.modes[mode].mode
        names = {bar.designation for item in variants for bar in item.layout.sizes}
        corners = {variants[n].layout.layers[0].largest for n in menu.lapped}
        if (
            any(item.mode not in (None, top) for item in variants)
            or len(names | {top.bar.designation}) > (menu.most_sizes or 99)
            or len(corners) > 1
        ):
            continue
        masks = [pool.everything for pool in menu.pools]
        for item in variants:
            for need in item.needs:
                masks[need.span] &= menu.pools[need.span].mask(need)
        if all(masks):
            cheapest = [
                min((plan.cost, k) for k, plan in enumerate(pool.plans) if mask >> k & 1)[1]
                for pool, mask in zip(menu.pools, masks, strict=True)
            ]
            costs.append(cost_of(menu, places, cheapest, mode))
    assert min(costs) == pytest.approx(own.cost, abs=1e-3)


def test_nothing_to_choose_from_is_no_choice() -> None:
    """An empty place, pool or list of modes proves that there is no choice."""
    menu, _ = found()
    for nothing in (
        replace(menu, places=((), *menu.places[1:])),
        replace(menu, pools=(PlanPool([]), *menu.pools[1:])),
        replace(menu, modes=()),
    ):
        solved = choose(nothing, WORK)
        assert solved.choice is None
        assert solved.proved


def test_sizes_are_counted_over_the_beam() -> None:
    """The limit of sizes holds for all bars of the beam together."""
    menu, best = found()
    assert choose(replace(menu, most_sizes=0), WORK).choice is None
    free = choose(replace(menu, most_sizes=None), WORK).choice
    assert free is not None
    assert free.cost <= best.cost + 1e-3
    one = choose(replace(menu, most_sizes=1), WORK).choice
    if one is not None:
        names = {
            bar.designation
            for items, n in zip(menu.places, one.places, strict=True)
            for bar in items[n].layout.sizes
        }
        assert names | {menu.modes[one.mode].mode.bar.designation} == names
        assert len(names) == 1


def test_variants_that_do_not_go_together() -> None:
    """A forbidden pair of variants is not chosen."""
    menu, best = found()
    pair = (0, 1, ((best.places[0], best.places[1]),))
    other = choose(replace(menu, pairs=(pair,)), WORK).choice
    assert other is None or other.places[:2] != best.places[:2]


def test_no_work_is_no_proof() -> None:
    """Without work nothing is called proved."""
    menu, _ = found()
    solved = choose(menu, 0.0)
    assert not solved.proved


def test_a_design_before_is_kept() -> None:
    """A design that allows no change comes back, and an unmet one is no choice."""
    menu, best = found()
    keep = Keep(
        places=tuple(frozenset({n}) for n in best.places),
        plans=tuple(frozenset({k}) for k in best.plans),
        modes=frozenset({best.mode}),
        most_changes=0,
    )
    solved = choose(menu, WORK, keep)
    assert solved.choice is not None
    assert solved.choice.places == best.places
    assert solved.choice.plans == best.plans
    assert solved.choice.mode == best.mode
    nothing = unkept(menu)
    assert choose(menu, WORK, nothing).choice is not None
    assert choose(menu, WORK, replace(nothing, most_changes=0)).choice is None
    assert choose(menu, WORK, replace(nothing, locked=frozenset({0}))).choice is None


def test_a_locked_position_stays() -> None:
    """A locked place keeps its variant though another is cheaper."""
    menu, best = found()
    number = next(n for n, items in enumerate(menu.places) if len(items) > 1)
    other = next(n for n in range(len(menu.places[number])) if n != best.places[number])
    keep = unkept(menu)
    places = tuple(
        frozenset({other}) if n == number else frozenset[int]() for n in range(len(menu.places))
    )
    solved = choose(menu, WORK, replace(keep, places=places, locked=frozenset({number})))
    if solved.choice is not None:
        assert solved.choice.places[number] == other
        assert solved.choice.cost >= best.cost - 1e-3
