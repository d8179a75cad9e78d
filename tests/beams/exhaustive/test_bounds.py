"""What the search leaves out is not better: lists, lower bounds, and variants beaten by others."""

from __future__ import annotations

import math
from dataclasses import replace
from functools import cache

import pytest

from catalogs import Bar
from engine import Layout
from optimizer.beams.bounds import PlaceBound
from optimizer.beams.design import demands_of
from optimizer.beams.frames import frames
from optimizer.beams.listing import Listing
from optimizer.beams.pools import PlanPool, undominated
from optimizer.beams.reader import parse_beam_job
from optimizer.beams.variants import Variant
from optimizer.problem import Ranking
from tests.beams.exhaustive.brute import BruteFrame
from tests.beams.exhaustive.jobs import small_job
from tests.beams.exhaustive.layouts import fitted_layouts
from tests.beams.exhaustive.plans import serves

SEEDS = range(500, 514)


@cache
def frame_of(seed: int) -> BruteFrame:
    problem = parse_beam_job(small_job(seed))
    return BruteFrame(problem, frames(problem)[0], demands_of(problem))


def per_length(bar: Bar, ranking: Ranking) -> float:
    if ranking.by == "lightest":
        return bar.mass
    k = ranking.labour_share
    return bar.mass * (1 + k * bar.relative_labour) / (1 + k) + ranking.per_bar


def value_of(layout: Layout, ranking: Ranking) -> float:
    return sum(
        count * per_length(bar, ranking) for layer in layout.layers for bar, count in layer.groups
    )


def listing_of(own: BruteFrame, number: int) -> Listing:
    problem = own.problem
    return Listing(own.places[number], problem.rules, problem.ranking, problem.work_limit)


@pytest.mark.parametrize("seed", SEEDS)
def test_lists_hold_every_layout(seed: int) -> None:
    """Listed to the end, a place has the layouts that pass on every side, with their figures."""
    own = frame_of(seed)
    for number, place in enumerate(own.places):
        listing = listing_of(own, number)
        for family in range(len(listing.families)):
            listing.extend(family, math.inf)
            assert listing.least(family) == math.inf
        found = {item.layout: item for family in listing.found for item in family}
        expected = {
            item.layout: item
            for item in fitted_layouts(place, own.problem.rules, own.problem.ranking)
        }
        assert {item.label for item in found} == {item.label for item in expected}
        for layout, item in found.items():
            assert item.phi_Mn == pytest.approx(expected[layout].phi_Mn)
            assert item.d == pytest.approx(expected[layout].d)
            assert item.eps_t == pytest.approx(expected[layout].eps_t)
            assert item.extra == pytest.approx(expected[layout].extra)


@pytest.mark.parametrize("seed", SEEDS)
def test_no_variant_costs_less_than_its_bound(seed: int) -> None:
    """The bound of a family is at most the cost of each variant of it."""
    own = frame_of(seed)
    ranking = own.problem.ranking
    for number, (place, variants) in enumerate(zip(own.places, own.variants, strict=True)):
        bound = PlaceBound(own.shared, place)
        families = {
            (tuple(bar.designation for bar in family.bars), family.layers): family
            for family in listing_of(own, number).families
        }
        for variant in variants:
            layout = variant.layout
            key = tuple(bar.designation for bar in layout.sizes), len(layout.layers)
            value = value_of(layout, ranking)
            for part in (1.0, 0.8):  # a bound for layouts of at least a value per length
                least = bound.least(families[key], value * part, variant.mode)
                assert least <= variant.cost * (1 + 1e-9) + 1e-9, (place.mark, layout.label)


def test_a_bound_says_when_nothing_is_left() -> None:
    """The bound is infinite where no layout of the family is left."""
    own = frame_of(SEEDS[0])
    family = listing_of(own, 0).families[0]
    assert PlaceBound(own.shared, own.places[0]).least(family, math.inf, None) == math.inf


def beats(one: Variant, other: Variant, own: BruteFrame) -> bool:
    """Return whether a variant may stand for another in every beam, tried plan by plan."""
    if one.cost > other.cost + 1e-6 or one.mode != other.mode:
        return False
    if one.layout.layers[0].largest != other.layout.layers[0].largest:
        return False
    if not set(one.layout.sizes) <= set(other.layout.sizes):
        return False
    mine = {need.span: need for need in one.needs}
    return all(
        serves(plan, mine[need.span])
        for need in other.needs
        for plan in own.plans[need.span]
        if serves(plan, need)
    )


@pytest.mark.parametrize("seed", [seed for seed in SEEDS if seed % 2])
def test_only_beaten_variants_are_left_out(seed: int) -> None:
    """Each one left out has one that stays, costs no more and asks no more of anything."""
    own = frame_of(seed)
    pools = [PlanPool(plans) for plans in own.plans]
    for variants in own.variants:
        some = variants[:150]
        kept = undominated(some, pools)
        for number in sorted(set(range(len(some))) - set(kept)):
            nothing = any(
                not any(serves(plan, need) for plan in own.plans[need.span])
                for need in some[number].needs
            )
            assert nothing or any(beats(some[item], some[number], own) for item in kept)


def test_variants_that_stay_in_any_case() -> None:
    """Variants asked for stay although others are better in all."""
    own, some = max(
        ((frame, items) for frame in map(frame_of, SEEDS) for items in frame.variants),
        key=lambda pair: len(pair[1]),
    )
    pools = [PlanPool(plans) for plans in own.plans]
    some = some[:200]
    kept = undominated(some, pools)
    everything = frozenset(range(len(some)))
    assert undominated(some, pools, everything) == sorted(everything)
    assert len(kept) < len(some)


def test_a_variant_that_clashes_with_less_is_not_beaten() -> None:
    """Of two that are alike but for what they go with, both stay unless one clashes with less."""
    own = frame_of(SEEDS[0])
    pools = [PlanPool(plans) for plans in own.plans]
    one = own.variants[0][undominated(own.variants[0], pools)[0]]
    two = [one, replace(one, inertia=one.inertia * 2.0)]
    assert undominated(two, pools) == [0]
    assert undominated(two, pools, clashes=[0b01, 0b10]) == [0, 1]
    assert undominated(two, pools, clashes=[0b01, 0b11]) == [0]


@pytest.mark.parametrize("seed", SEEDS)
def test_pools_know_which_plans_serve(seed: int) -> None:
    """The mask of a need marks just the plans that serve it."""
    own = frame_of(seed)
    pools = [PlanPool(plans) for plans in own.plans]
    needs = {need for variants in own.variants for item in variants for need in item.needs}
    for need in sorted(needs, key=repr)[:25]:
        mask = pools[need.span].mask(need)
        expected = [serves(plan, need) for plan in own.plans[need.span]]
        assert [bool(mask >> number & 1) for number in range(len(expected))] == expected
