"""The solver's model of one family: the same members as a brute force of its rules, each once."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from optimizer.conditions import Conditions, envelope
from optimizer.families import Family, families
from optimizer.model import Enumeration, Wanted, build, enumerate_family
from tests.exhaustive.test_search import _random_twin
from tests.optimizer.families import hand_made, members

WORK = 100.0


def as_set(listed: Enumeration) -> set[tuple[tuple[int, ...], ...]]:
    """Return the solutions without order, having asserted that none comes twice."""
    rows = [tuple(map(tuple, counts)) for counts in listed.counts.tolist()]
    assert len(set(rows)) == len(rows)
    return set(rows)


def area_of(family: Family, least: float) -> Conditions:
    """Return the condition that the area is at least something."""
    areas = np.array([bar.area for bar in family.bars])
    return Conditions(np.tile(areas, (1, family.layers, 1)), np.array([least]))


@pytest.mark.parametrize("seed", [2, 5, 11, 13, 23])
def test_members_equal_brute_force(seed: int) -> None:
    """Random sections: the solver lists what a plain loop over counts finds, with and without
    presolve.
    """
    problem = _random_twin(seed).problem
    listed = 0
    for family in families(envelope(problem.section), problem.rules):
        if math.prod(count + 1 for row in family.most for count in row) > 60_000:
            continue
        expected = members(family)
        for presolve in (False, True):
            found = enumerate_family(family, None, WORK, presolve=presolve)
            assert found.complete
            assert as_set(found) == expected
        listed += len(expected)
    assert listed > 0


@pytest.mark.parametrize(
    ("names", "most"),
    [
        (("#8",), ((7,),)),
        (("#8",), ((6,), (7,), (5,))),
        (("#9", "#7"), ((5, 6),)),
        (("#9", "#7"), ((4, 5), (4, 5))),
        (("#9", "#7"), ((3, 4), (3, 4), (3, 4))),
        (("#9", "#8"), ((2, 3), (1, 3))),
    ],
)
def test_rules_of_layers_alone(names: tuple[str, ...], most: tuple[tuple[int, ...], ...]) -> None:
    """Without conditions the rules of symmetry and stacking are left, and nothing else."""
    family = hand_made(names, most)
    assert as_set(enumerate_family(family, None, WORK)) == members(family)


def test_small_families_by_hand() -> None:
    """Members written out: 2 to 4 bars of one size in a layer; two layers of up to 3."""
    one = hand_made(most=((4,),))
    assert as_set(enumerate_family(one, None, WORK)) == {((2,),), ((3,),), ((4,),)}
    two = hand_made(most=((3,), (3,)))
    assert as_set(enumerate_family(two, None, WORK)) == {
        ((2,), (2,)),
        ((3,), (2,)),
        ((3,), (3,)),
    }
    # Of two sizes one count is even; two of the larger at least; the second size occurs.
    mixed = hand_made(("#9", "#7"), ((3, 2),))
    assert as_set(enumerate_family(mixed, None, WORK)) == {
        ((2, 1),),
        ((2, 2),),
        ((3, 2),),
    }


@pytest.mark.parametrize("least", [2, 3, 4, 5])
def test_least_number_in_layer_one(least: int) -> None:
    """Crack control's least number of bars holds for layer 1 only."""
    family = hand_made(most=((5,), (5,)), least_first=least)
    found = as_set(enumerate_family(family, None, WORK))
    assert {row[0][0] for row in found} == set(range(least, 6))
    assert {row[1][0] for row in found} == set(range(2, 6))


@pytest.mark.parametrize("seed", range(12))
def test_edge_of_a_condition(seed: int) -> None:
    """A condition met exactly is met with everything fixed; just past the best member no
    counts are left with everything free.
    """
    rng = np.random.default_rng(seed)
    layers = int(rng.integers(1, 4))
    sizes = int(rng.integers(1, 3))
    most = tuple((4,) * sizes for _ in range(layers))
    family = hand_made(("#9", "#7")[:sizes], most)
    weights = rng.uniform(0.5, 2.0, (1, layers, sizes)) * 10.0 ** rng.uniform(-3, 8)
    values = {
        row: float(np.tensordot(weights, np.array(row), axes=2)[0]) for row in members(family)
    }
    for row, value in list(values.items())[:: 1 + len(values) // 12]:
        limited = hand_made(
            ("#9", "#7")[:sizes],
            row,
            given={"minimum_steel": Conditions(weights, np.array([value]))},
        )
        assert row in as_set(enumerate_family(limited, None, WORK))
    past = Conditions(weights, np.array([max(values.values()) * (1 + 1e-5)]))
    free = hand_made(("#9", "#7")[:sizes], most, given={"minimum_steel": past})
    found = enumerate_family(free, None, WORK)
    assert found.complete
    assert not len(found.counts)


def test_edge_of_a_condition_with_negative_weights() -> None:
    """Room for exactly three bars is used up by three and not by four."""
    width = Conditions(np.array([[[-2.0 / 3.0]]]), np.array([-2.0]))
    family = hand_made(most=((6,),), given={"clear_gap": width})
    assert as_set(enumerate_family(family, None, WORK)) == {((2,),), ((3,),)}


@pytest.mark.parametrize("limit", [4.25, 4.75, 5.5, 7.75])
@pytest.mark.parametrize("cost", [(1.0, 0.5), (0.3, 1.0)])
def test_wanted(cost: tuple[float, float], limit: float) -> None:
    """Only members whose cost is within the limit are listed; one on the limit is."""
    family = hand_made(("#9", "#7"), ((4, 4), (4, 4)))
    expected = {
        row
        for row in members(family)
        if 0.75 + float((np.array(row) @ np.array(cost)).sum()) <= limit + 1e-9
    }
    assert 0 < len(expected) < len(members(family))
    found = enumerate_family(family, Wanted(cost, 0.75, limit), WORK)
    assert as_set(found) == expected


@pytest.mark.parametrize("presolve", [False, True])
@pytest.mark.parametrize("limit", [None, math.inf])
def test_without_a_limit_everything_is_listed(limit: float | None, presolve: bool) -> None:
    """No bound on what is of interest keeps every member; so does an infinite one.

    The second solve before "none" is said, the diagnosis and the strongest layout rely on it.
    """
    family = hand_made(most=((4,),))
    wanted = None if limit is None else Wanted((1.0,), 0.0, limit)
    found = enumerate_family(family, wanted, WORK, presolve=presolve)
    assert as_set(found) == {((2,),), ((3,),), ((4,),)}


@pytest.mark.parametrize("stop_after", [1, 3, 5])
def test_stop_after(stop_after: int) -> None:
    """A broken-off enumeration holds that many members and says that it is not complete."""
    family = hand_made(most=((8,), (8,)))
    found = enumerate_family(family, None, WORK, stop_after=stop_after)
    assert len(found.counts) == stop_after
    assert as_set(found) < members(family)
    assert not found.complete


def test_work_limit() -> None:
    """Without work allowed nothing is complete; work spent is reported."""
    family = hand_made(most=((8,), (8,)))
    assert not enumerate_family(family, None, 0.0).complete
    assert not enumerate_family(family, None, -1.0).complete
    whole = enumerate_family(family, None, WORK)
    assert whole.complete
    assert 0.0 <= whole.work < WORK


def test_shape_of_an_empty_answer() -> None:
    """No members: an array of the right shape, so that callers need no special case."""
    family = hand_made(("#9", "#7"), ((4, 4), (4, 4)))
    family = replace(family, conditions={"minimum_steel": area_of(family, 1e3)})
    found = enumerate_family(family, None, WORK)
    assert found.counts.shape == (0, 2, 2)
    assert found.complete


def test_variable_names_are_unique() -> None:
    """Each variable of a model has a name of its own that says size and layer."""
    family = hand_made(("#9", "#7"), ((4, 4), (4, 4), (3, 3)))
    model, _ = build(family, Wanted((1.0, 1.0), 0.0, 9.0))
    names = [variable.name for variable in model.proto.variables]
    assert len(set(names)) == len(names) == 2 * 2 * 3
    for name in ("pairs of #9 in layer 1", "odd #7 in layer 3"):
        assert name in names


def test_same_answer_twice() -> None:
    """One worker and a fixed seed: solutions come in the same order each time."""
    family = hand_made(("#9", "#7"), ((4, 5), (4, 5)))
    first, second = (enumerate_family(family, None, WORK) for _ in range(2))
    np.testing.assert_array_equal(first.counts, second.counts)
