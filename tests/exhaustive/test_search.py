"""The search against the independent enumeration: same layouts, same order, same values.

Random sections: both unit systems, all four editions, both faces, every outline, one to
three layers (four on small webs), one and two sizes, both rankings, variety on and off,
service moments, compression bars, all exposures. Each section is small enough for a plain
enumeration, and its demand is drawn so that some sections have many layouts, some few and
some none.
"""

from __future__ import annotations

import random
from dataclasses import dataclass, replace
from typing import Literal

import pytest

from catalogs import Bar, bar_catalog
from engine import (
    Concrete,
    Exposure,
    Flange,
    Layout,
    Outline,
    Section,
    Steel,
    edition,
    parse_layout,
    place,
)
from engine.detailing_checks import opposite_bars
from optimizer.candidates import Candidate
from optimizer.problem import SI_MASS_FACTOR, BarRules, Problem, Ranking
from optimizer.search import Search
from tests.exhaustive.enumeration import (
    Case,
    Found,
    Size,
    enumerate_layouts,
    fewest_bars,
    lightest,
    ranked,
)

SECTIONS = 320
GROUP = 20
VALUE = 1e-9  # relative: both sides add the same few products in another order


@dataclass(frozen=True)
class _Twin:
    problem: Problem
    case: Case


def _outline(rng: random.Random, web: float, depth: float) -> Outline:
    def flange() -> Flange:
        return Flange(width=web * rng.uniform(1.5, 5.0), thickness=depth * rng.uniform(0.1, 0.25))

    kind = rng.choice(["rectangle", "rectangle", "T", "L", "inverted T", "I"])
    top = flange() if kind in ("T", "L", "I") else None
    if kind == "L" and top is not None:
        top = replace(top, left=top.width - web)
    bottom = flange() if kind in ("inverted T", "I") else None
    return Outline(web=web, depth=depth, top=top, bottom=bottom)


def _sizes(bars: tuple[Bar, ...]) -> tuple[Size, ...]:
    return tuple(
        Size(bar.designation, bar.diameter, bar.area, bar.mass, bar.position, bar.relative_labour)
        for bar in bars
    )


def _opposite_groups(
    section: Section,
) -> tuple[tuple[tuple[float, float, float], ...], float]:
    """Diameter, area and depth of the bars opposite by hand, and the height they take."""
    if section.opposite is None:
        return (), 0.0
    groups = []
    bottom = section.cover + section.stirrup.diameter
    height = 0.0
    for number, layer in enumerate(section.opposite.layers):
        tallest = max(bar.diameter for bar, _ in layer.groups)
        height += tallest + (section.layer_gap if number else 0.0)
        groups += [
            (bar.diameter, bar.area * count, bottom + bar.diameter / 2)
            for bar, count in layer.groups
        ]
        bottom += tallest + section.layer_gap
    return tuple(groups), height


def _random_twin(seed: int) -> _Twin:
    rng = random.Random(seed)
    si = rng.random() < 0.5
    unit = 25.4 if si else 1.0
    name = rng.choice(["ACI 318M-14", "ACI 318M-19"] if si else ["ACI 318-14", "ACI 318-19"])
    code = edition(name)
    catalog = bar_catalog(rng.choice(["astm-metric", "csa", "en10080"]) if si else "astm-inch")
    layers = rng.choice([1, 2, 2, 3, 3])
    web = rng.choice([10.0, 12.0, 14.0, 16.0, 18.0]) * unit
    if layers == 3:
        web = min(web, 14.0 * unit)
    depth = rng.choice([12.0, 16.0, 20.0, 24.0, 30.0, 40.0]) * unit
    if rng.random() < 0.05:
        layers, web = 4, 10.0 * unit
    usable = [bar for bar in catalog.bars if 12.0 < bar.diameter_mm < 37.0]
    start = rng.randrange(max(1, len(usable) - 2))
    bars = tuple(usable[start : start + rng.choice([2, 3])])
    stirrup = rng.choice([bar for bar in catalog.bars if 9.0 < bar.diameter_mm < 20.0])
    strength = rng.choice([3000.0, 4000.0, 5000.0, 7000.0]) if not si else rng.choice([25, 30, 45])
    yields = {
        "ACI 318-14": [40e3, 60e3, 80e3],
        "ACI 318-19": [60e3, 80e3, 100e3],
        "ACI 318M-14": [420.0, 500.0],
        "ACI 318M-19": [420.0, 500.0, 690.0],
    }[name]
    concrete = Concrete(edition=code, fc=float(strength))
    steel = Steel(edition=code, fy=rng.choice(yields))
    opposite = None
    if rng.random() < 0.3:
        small = usable[rng.randrange(3)].designation
        opposite = parse_layout([f"2 {small}"] * rng.choice([1, 1, 2]), catalog)
    sign = rng.choice([1.0, -1.0])
    outline = _outline(rng, web, depth)
    # Between next to nothing and more than any tension-controlled section of this size bears.
    share = rng.choice([0.01, 0.04, 0.06, 0.08, 0.1, 0.12, 0.16])
    demand = share * concrete.fc * web * depth**2 * rng.uniform(0.6, 1.1)
    section = Section(
        mark=f"random {seed}",
        outline=outline,
        concrete=concrete,
        steel=steel,
        cover=rng.choice([1.5, 1.5, 1.5, 2.0]) * unit * (40 / 38.1 if si else 1.0),
        stirrup=stirrup,
        aggregate=rng.choice([0.5, 0.75, 1.0]) * unit,
        Mu=sign * demand,
        Ms=sign * demand * rng.uniform(0.4, 0.7) if rng.random() < 0.3 else None,
        layer_gap=rng.choice([1.0, 1.0, 1.5]) * unit,
        min_gap=rng.choice([0.0, 0.0, 0.0, 0.0, 1.5]) * unit,
        exposure=rng.choice([Exposure.INTERIOR, Exposure.INTERIOR, Exposure.WEATHER]),
        statically_determinate=rng.random() < 0.3,
        tension_controlled=code.year != 2014 or rng.random() < 0.6,
        opposite=opposite,
        count_opposite=opposite is not None and rng.random() < 0.6,
    )
    factor = SI_MASS_FACTOR if si else 1.0
    ranking = Ranking(
        by=rng.choice(["practical", "lightest"]),
        keep=rng.choice([3, 10, 25]),
        per_pattern=rng.choice([None, 1, 3]),
        labour_share=rng.choice([0.0, 0.8]),
        per_bar=rng.choice([0.0, 0.1, 0.5]) * factor,
        per_extra_layer=0.6 * factor,
        per_extra_size=0.4 * factor,
        tight_gap=rng.choice([0.1, 0.5]) * factor,
        preferred_gap=max(1.5 * unit, 2 * section.aggregate),
        work_limit=100.0,
    )
    if not opposite_bars(section).ok:  # such a section has no layout, whatever is chosen
        section = replace(section, opposite=None, count_opposite=False)
    rules = BarRules(
        sizes=bars,
        max_layers=layers,
        max_sizes=rng.choice([1, 2, 2]),
        size_steps=rng.choice([1, 2]),
    )
    groups, height = _opposite_groups(section)
    strips = section.outline.profile(sagging=section.sagging).strips
    flange = outline.bottom if sign > 0 else outline.top
    case = Case(
        si=si,
        edition="14" if code.year == 2014 else "19",
        strips=strips,
        web=web,
        depth=depth,
        tension_width=strips[-1][0],
        fc=concrete.fc,
        fy=steel.fy,
        aggregate=section.aggregate,
        cover=section.cover,
        ds=stirrup.diameter,
        layer_gap=section.layer_gap,
        min_gap=section.min_gap,
        sizes=_sizes(bars),
        max_layers=layers,
        max_sizes=rules.max_sizes,
        size_steps=rules.size_steps,
        Mu=demand,
        Ms=None if section.Ms is None else abs(section.Ms),
        Ec=(4700.0 if si else 57_000.0) * concrete.fc**0.5,
        determinate=section.statically_determinate,
        flange_in_tension=flange is not None,
        tension_controlled=section.tension_controlled,
        exposure=section.exposure.value,
        opposite=groups,
        count_opposite=section.count_opposite,
        opposite_height=height,
        labour_share=ranking.labour_share,
        per_bar=ranking.per_bar,
        per_extra_layer=ranking.per_extra_layer,
        per_extra_size=ranking.per_extra_size,
        tight_gap=ranking.tight_gap,
        preferred_gap=ranking.preferred_gap,
    )
    return _Twin(Problem(section=section, rules=rules, ranking=ranking), case)


def _counts(layout: Layout) -> tuple[tuple[tuple[str, int], ...], ...]:
    return tuple(
        tuple((bar.designation, count) for bar, count in layer.groups) for layer in layout.layers
    )


def _same(candidate: Candidate, found: Found) -> None:
    assert _counts(candidate.layout) == found.counts
    assert candidate.layout.mass == pytest.approx(found.mass, rel=VALUE)
    assert candidate.score.total == pytest.approx(found.score, rel=VALUE)
    assert candidate.placement.smallest_gap == pytest.approx(found.smallest_gap, rel=1e-7)
    for term, value in found.terms.items():
        assert getattr(candidate.score, term) == pytest.approx(value, rel=VALUE, abs=1e-7)


def _compare(seed: int) -> int:
    twin = _random_twin(seed)
    everything = enumerate_layouts(twin.case)
    ranking = twin.problem.ranking
    by: Literal["practical", "lightest"] = "practical" if ranking.by == "practical" else "lightest"
    expected = ranked(everything, by, ranking.keep, ranking.per_pattern)
    found = Search(twin.problem).run()
    assert found.proved
    assert [_counts(item.layout) for item in found.chosen] == [item.counts for item in expected]
    for candidate, other in zip(found.chosen, expected, strict=True):
        _same(candidate, other)
    for best, twin_best in (
        (found.lightest, lightest(everything)),
        (found.fewest, fewest_bars(everything)),
    ):
        assert (best is None) == (twin_best is None)
        if best is not None and twin_best is not None:
            _same(best, twin_best)
    return len(everything)


@pytest.mark.parametrize("first", range(0, SECTIONS, GROUP))
def test_search_equals_enumeration(first: int) -> None:
    """Lists, marks and values agree on random sections; both kinds of answer occur."""
    passing = [_compare(seed) for seed in range(first, first + GROUP)]
    assert any(count == 0 for count in passing)
    assert any(count > 3 for count in passing)


def test_placement_agrees_on_opposite_depths() -> None:
    """The hand-made groups of this module and the engine put opposite bars at one depth."""
    checked = 0
    for seed in range(80):
        section = _random_twin(seed).problem.section
        if section.opposite is None:
            continue
        groups, _ = _opposite_groups(section)
        placed = place(section.opposite_face(), section.opposite)
        by_engine = [
            layer.bottom + bar.diameter / 2
            for layer, row in zip(placed.layers, section.opposite.layers, strict=True)
            for bar, _ in row.groups
        ]
        assert [depth for _, _, depth in groups] == pytest.approx(by_engine)
        checked += 1
    assert checked > 5
