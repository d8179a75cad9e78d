"""The proof of the search: no condition of a family cuts off a layout that passes.

Passing layouts come from the independent enumeration, or from the engine with the demand set
to a layout's own strength, where the bounds are tightest.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from catalogs import Bar
from engine import Batch, Concrete, Flange, Outline, Section, Steel, assess, edition
from optimizer.conditions import envelope, floor_area
from optimizer.families import Family, family_of
from optimizer.problem import Problem
from optimizer.results import rank_section
from optimizer.scoring import steel_per_bar
from optimizer.totals import possible_totals
from tests.engine.builders import INCH, us_layout
from tests.exhaustive.enumeration import Case, Found, bar_groups, covered_sizes, enumerate_layouts
from tests.exhaustive.enumeration import minimum_steel as minimum_of_case
from tests.exhaustive.geometry import stacks
from tests.exhaustive.mechanics import flexure, tension_controlled_strain
from tests.exhaustive.test_search import _random_twin
from tests.optimizer.families import Counts, by_family

SEEDS = 160
GROUP = 20
# Sums of a few products in another order; the model rounds by 1e-7 of a condition's size, and
# always to the lenient side, so a layout this near to a bound is not lost.
ROUNDING = 1e-9


def deepest_bar(section: Section, sizes: tuple[Bar, ...]) -> float:
    """Return the greatest depth that a bar of any size can have."""
    return section.outline.depth - section.bar_face - min(bar.diameter for bar in sizes) / 2


def assert_kept(section: Section, bars: tuple[Bar, ...], layers: int, counts: Counts) -> Family:
    """Assert that a family keeps all of the given layouts, and return it."""
    family = family_of(envelope(section), bars, layers)
    assert isinstance(family, Family), f"family of {bars[0].designation} is empty: {family}"
    assert (counts <= np.array(family.most)).all()
    assert (counts[:, 0].sum(axis=1) >= family.least_first).all()
    for rule, item in family.conditions.items():
        left = np.tensordot(counts, item.coefficients, axes=([1, 2], [1, 2]))
        slack = ROUNDING * np.maximum(np.abs(item.bounds), np.abs(item.coefficients).max())
        assert (left >= item.bounds - slack).all(), rule
    possible = {tuple(row) for row in possible_totals(family).counts.tolist()}
    assert {tuple(row) for row in counts.sum(axis=1).tolist()} <= possible
    return family


def assert_costs(problem: Problem, family: Family, counts: Counts, found: list[Found]) -> None:
    """Assert that linear costs stay below the exact values, layout by layout and at least."""
    ranking = problem.ranking
    totals = counts.sum(axis=1)
    constant = ranking.per_extra_layer * (family.layers - 1)
    constant += ranking.per_extra_size * (len(family.bars) - 1)
    cost = tuple(steel_per_bar(bar, ranking) + ranking.per_bar for bar in family.bars)
    score = np.array([item.score for item in found])
    mass = np.array([item.mass for item in found])
    assert (totals @ np.array(cost) + constant <= score * (1 + ROUNDING)).all()
    possible = possible_totals(family)
    assert possible.least(cost) + constant <= score.min() * (1 + ROUNDING)
    assert possible.least(tuple(bar.mass for bar in family.bars)) <= mass.min() * (1 + ROUNDING)


def check_section(problem: Problem, found: list[Found]) -> None:
    """Assert all of it for one section and the layouts that pass in it."""
    section, sizes = problem.section, problem.rules.sizes
    floor = floor_area(envelope(section), deepest_bar(section, sizes))
    assert floor <= min(item.As for item in found) * (1 + ROUNDING)
    for bars, layers, places, counts in by_family([item.counts for item in found], sizes):
        family = assert_kept(section, bars, layers, counts)
        assert_costs(problem, family, counts, [found[place] for place in places])


@pytest.mark.parametrize("first", range(0, SEEDS, GROUP))
def test_no_passing_layout_is_cut_off(first: int) -> None:
    """Each layout that the independent enumeration passes meets every condition."""
    sections = 0
    for seed in range(first, first + GROUP):
        twin = _random_twin(seed)
        found = enumerate_layouts(twin.case)
        if found:
            sections += 1
            check_section(twin.problem, found)
    assert sections > GROUP / 4


def _ductile(case: Case) -> tuple[list[Found], np.ndarray[tuple[int, ...], np.dtype[np.float64]]]:
    """Layouts that pass under next to no demand without the exemption from minimum steel."""
    easy = replace(case, Mu=case.Mu * 1e-9, Ms=None)
    rows = list(stacks(easy, covered_sizes(easy)))
    if not rows:
        return [], np.zeros(0)
    groups = bar_groups(easy, rows)
    found = {item.counts: item for item in enumerate_layouts(easy)}
    names = [
        tuple(tuple((size.name, n) for size, n in layer) for layer in row.layers) for row in rows
    ]
    state = flexure(easy, groups)
    enough = groups.total >= minimum_of_case(easy, groups.d)
    enough &= state.eps_t >= tension_controlled_strain(easy)
    kept = [i for i, name in enumerate(names) if enough[i] and name in found]
    return [found[names[i]] for i in kept], (state.phi * state.Mn)[kept]


@pytest.mark.parametrize("first", range(0, 60, GROUP))
def test_no_layout_is_cut_off_at_its_own_strength(first: int) -> None:
    """With Mu at the very strength of a layout, its conditions and the floor of area hold."""
    tried = 0
    for seed in range(first, first + GROUP):
        twin = _random_twin(seed)
        found, strengths = _ductile(twin.case)
        # The strongest layouts, and every so many of the others.
        order = np.argsort(-strengths)
        for index in {*order[:5].tolist(), *order[:: max(1, len(order) // 10)].tolist()}:
            layout, strength = found[index], float(strengths[index])
            own = replace(
                twin.problem.section,
                Mu=strength if twin.problem.section.sagging else -strength,
                Ms=None,
            )
            ((bars, layers, _, counts),) = by_family([layout.counts], twin.problem.rules.sizes)
            assert_kept(own, bars, layers, counts)
            floor = floor_area(envelope(own), deepest_bar(own, twin.problem.rules.sizes))
            assert floor <= layout.As * (1 + ROUNDING)
            tried += 1
    assert tried > 3 * GROUP


def test_mass_floor_is_a_floor() -> None:
    """The mass floor shown with a ranking is not above the mass of any layout that passes."""
    seen = 0
    for seed in range(40):
        twin = _random_twin(seed)
        found = enumerate_layouts(twin.case)
        floor = rank_section(twin.problem).mass_floor if found else None
        if floor is not None:
            assert floor <= min(item.mass for item in found) * (1 + ROUNDING)
            seen += 1
        assert floor is not None or not found
    assert seen > 10


CODE_19, CODE_14 = edition("ACI 318-19"), edition("ACI 318-14")


@st.composite
def shallow_sections(draw: st.DrawFn) -> tuple[Section, Batch]:
    """Draw a section whose layers may lie in its compression block, and layouts of one family.

    Up to four layers, the innermost near the other face; a web that the tension of layer 1
    brings near the end of ductility; flanges at both faces, counted bars opposite, both bending
    signs, low and high grades.
    """
    code = draw(st.sampled_from([CODE_14, CODE_19]))
    fy = draw(st.sampled_from([40e3, 60e3, 80e3] + ([100e3] if code is CODE_19 else [])))
    concrete = Concrete(edition=code, fc=draw(st.floats(2500.0, 9000.0)))
    layers = draw(st.integers(1, 4))
    names = draw(st.sampled_from([("#5",), ("#8",), ("#11",), ("#7", "#5"), ("#11", "#9")]))
    bars = tuple(INCH.bar(name) for name in names)
    pairs = st.lists(st.integers(1, 8), min_size=layers, max_size=layers)
    rows = draw(st.lists(pairs, min_size=1, max_size=8))
    counts = np.zeros((len(rows), layers, len(bars)), dtype=np.int64)
    counts[:, :, 0] = 2 * np.array([sorted(row, reverse=True) for row in rows])
    if len(bars) == 2:
        counts[:, :, 1] = 2
        counts[:, 1:, 0] -= 2
    layer_gap = draw(st.floats(1.0, 4.0))
    opposite = draw(st.sampled_from([None, None, ("2 #5",), ("2 #11",), ("3 #6", "2 #6")]))
    whole = None if opposite is None else us_layout(*opposite)
    taken = 0.0 if whole is None else sum(x.largest.diameter + layer_gap for x in whole.layers)
    stack = layers * bars[0].diameter + (layers - 1) * layer_gap
    depth = stack + taken + 3.75 + draw(st.floats(0.0, 3.0))
    pull = fy * float(counts[0, 0] @ np.array([bar.area for bar in bars]))
    deepest = 0.85 * 0.375 * (depth - 2.5)
    web = max(8.0, pull / (concrete.block_stress * deepest * draw(st.floats(0.6, 1.4))))

    def flange() -> Flange | None:
        if draw(st.sampled_from([True, True, False])):
            return None
        width = web * draw(st.floats(1.0, 3.0))
        return Flange(width=width, thickness=depth * draw(st.floats(0.1, 0.4)))

    section = Section(
        mark="shallow",
        outline=Outline(web=web, depth=depth, top=flange(), bottom=flange()),
        concrete=concrete,
        steel=Steel(edition=code, fy=fy),
        cover=1.5,
        stirrup=INCH.bar("#3"),
        aggregate=0.5,
        Mu=draw(st.sampled_from([1.0, -1.0])),
        layer_gap=layer_gap,
        tension_controlled=code is CODE_19 or draw(st.booleans()),
        opposite=whole,
        count_opposite=whole is not None and draw(st.booleans()),
    )
    return section, Batch(bars=bars, counts=counts)


@settings(max_examples=400, deadline=None, derandomize=True)
@given(shallow_sections())
def test_outer_approximation_of_shallow_sections(drawn: tuple[Section, Batch]) -> None:
    """Tangents stay outside where layers lie in the block, with bars opposite and flanges.

    Each layout is held against the demand that is just its own strength.
    """
    section, batch = drawn
    bars, layers = batch.bars, batch.counts.shape[1]
    found = assess(section, batch)
    for row in np.flatnonzero(found.ductile & found.stack_fits & (found.phi_Mn > 0.0)):
        strength = float(found.phi_Mn[row])
        own = replace(section, Mu=strength if section.sagging else -strength)
        family = family_of(envelope(own), bars, layers)
        if not isinstance(family, Family):
            # Gaps and spacing are not looked at here: such a width has no layouts at all.
            assert family.rules != ("arrangement",)
            continue
        for rule in ("flexural_strength", "net_tensile_strain"):
            item = family.conditions[rule]
            left = np.tensordot(item.coefficients, batch.counts[row], axes=2)
            size = np.maximum(np.abs(item.bounds), np.abs(item.coefficients).max())
            assert (left >= item.bounds - ROUNDING * size).all(), rule
        floor = floor_area(envelope(own), deepest_bar(own, bars))
        assert floor <= float(found.As[row]) * (1 + ROUNDING)
