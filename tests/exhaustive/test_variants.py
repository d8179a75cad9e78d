"""The trade-off over grades, stirrups and outlines against the independent enumeration.

Each variant of a random section becomes a case of its own, whose values are added up here from
the figures of a price list; what no other beats over all cases together has to be the set found.
"""

from __future__ import annotations

import random
from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import cache
from itertools import product

import numpy as np
import pytest

from catalogs import Bar, PriceList, Spread, bar_catalog
from engine import Outline, Section, Steel
from engine.detailing_checks import opposite_bars
from optimizer.levers import variants
from optimizer.problem import Levers
from optimizer.tradeoff import trade_off
from tests.exhaustive.enumeration import Case, Found, enumerate_layouts
from tests.exhaustive.test_search import _counts, _opposite_groups, _random_twin, _Twin

SECTIONS = 40
GROUP = 20
_EQUAL = 1e-7  # relative: values that differ by less are the same sum added in another order

# Yield strengths of ASTM A615/A615M by edition, those of 100 ksi (690 MPa) not in 318-14.
_GRADES = {
    "ACI 318-14": (("A615-60", 60e3), ("A615-80", 80e3)),
    "ACI 318-19": (("A615-60", 60e3), ("A615-80", 80e3), ("A615-100", 100e3)),
    "ACI 318M-14": (("A615-420", 420.0), ("A615-550", 550.0)),
    "ACI 318M-19": (("A615-420", 420.0), ("A615-550", 550.0), ("A615-690", 690.0)),
}
_PRICE_OF = {60e3: 0.7, 80e3: 0.8, 100e3: 0.95, 420.0: 1.5, 550.0: 1.6, 690.0: 2.1}
_LB, _FOOT = 0.45359237, 0.3048  # [kg, m], exact by definition (NIST SP 811)

Key = tuple[tuple[tuple[str, str, str], ...], tuple[tuple[tuple[str, int], ...], ...]]


def _spread(typical: float) -> Spread:
    return Spread(low=typical / 2, typical=typical, high=typical * 2, source="random")


def _prices(rng: random.Random, units: str) -> PriceList:
    """Prices that leave steel, labour, concrete and formwork each a say."""
    names = {
        "us": {"A615-60": 60e3, "A615-80": 80e3, "A615-100": 100e3},
        "si": {"A615-60": 420.0, "A615-80": 550.0, "A615-100": 690.0},
    }[units]
    steel = {(name, "*"): _PRICE_OF[fy] for name, fy in names.items()}
    steel["*", "*"] = rng.choice([0.5, 1.2])
    return PriceList(
        name="random",
        currency="X",
        system=units,
        invented=True,
        steel=steel,
        labour_rate=rng.choice([0.0, 60.0]),
        fixing_hours=_spread(rng.choice([10.0, 60.0])),
        concrete_price=rng.choice([0.0, 40.0, 200.0]),
        formwork_price=rng.choice([0.0, 2.0, 15.0]),
        steel_carbon=_spread(rng.choice([500.0, 2000.0])),
        concrete_carbon=_spread(rng.choice([20.0, 350.0])),
    )


@dataclass(frozen=True)
class _Choice:
    """One variant by hand: grade (name, fy), stirrup, web, depth."""

    name: str
    fy: float
    stirrup: Bar
    web: float
    depth: float


def _case(twin: _Twin, choice: _Choice) -> tuple[Case, Section]:
    """Case of a variant, and its section for the bars opposite."""
    drawn, outline = twin.problem.section, twin.problem.section.outline
    top, bottom = outline.top, outline.bottom
    strips = []
    if top is not None:
        strips.append((top.width, top.thickness))
    rest = sum(flange.thickness for flange in (top, bottom) if flange is not None)
    strips.append((choice.web, choice.depth - rest))
    if bottom is not None:
        strips.append((bottom.width, bottom.thickness))
    if drawn.Mu < 0:
        strips.reverse()
    whole = Outline(
        web=choice.web,
        depth=choice.depth,
        top=None if top is None else replace(top, left=None),
        bottom=None if bottom is None else replace(bottom, left=None),
    )
    steel = Steel(edition=drawn.edition, fy=choice.fy, name=choice.name)
    section = replace(drawn, stirrup=choice.stirrup, outline=whole, steel=steel)
    groups, height = _opposite_groups(section)
    return replace(
        twin.case,
        fy=choice.fy,
        ds=choice.stirrup.diameter,
        web=choice.web,
        depth=choice.depth,
        strips=tuple(strips),
        tension_width=strips[-1][0],
        opposite=groups,
        opposite_height=height,
    ), section


def _values(
    case: Case, found: Found, choice: _Choice, prices: PriceList | None, slab: float, envelope: bool
) -> tuple[float, ...]:
    """All aims of a layout, from the enumeration's own records."""
    sizes = {size.name: size for size in case.sizes}
    bars = [(sizes[name], count) for layer in found.counts for name, count in layer]
    labour = sum(size.mass * size.labour * count for size, count in bars)
    values: list[float] = [found.mass, found.bars, labour]
    area = sum(width * height for width, height in case.strips)
    contact = case.web + 2 * (case.depth - slab)
    if prices is None:
        values += [area] if envelope else []
    else:
        per_mass = _PRICE_OF[choice.fy] if choice.name else prices.steel["*", "*"]
        hours = prices.fixing_hours.typical / case.pick(2000.0, 1000.0)
        cost = found.mass * per_mass + labour * hours * prices.labour_rate
        # yd3 and ft2 a foot; m3 and m2 a metre.
        cost += area * prices.concrete_price / case.pick(144.0 * 27.0, 1e6)
        cost += contact * prices.formwork_price / case.pick(12.0, 1e3)
        carbon = found.mass * case.pick(_LB, 1.0) / 1e3 * prices.steel_carbon.typical
        volume = area / case.pick(144.0 / _FOOT**3, 1e6)
        values += [cost, carbon + volume * prices.concrete_carbon.typical]
    return (*values, found.sizes, found.layers)


def _unbeaten(values: dict[Key, tuple[float, ...]]) -> set[Key]:
    """Keys that no other beats: nowhere worse and somewhere better."""
    keys = list(values)
    table = np.array(list(values.values()))
    left = np.arange(len(keys))
    for row in range(len(keys)):
        if row not in left:
            continue  # what beats it beats whatever it would beat
        others = table[left]
        slack = _EQUAL * np.abs(others)
        none_worse = (table[row] <= others + slack).all(axis=1)
        one_better = (table[row] < others - slack).any(axis=1)
        left = left[~(none_worse & one_better)]
    return {keys[row] for row in left}


def _others(twin: _Twin, rng: random.Random, *, envelope: bool) -> Levers:
    """One or two grades and stirrups; with the envelope other webs and depths too."""
    section = twin.problem.section
    edition, step = section.edition, 25.0 if twin.case.si else 1.0
    catalogs = ["astm-metric", "csa", "en10080"] if twin.case.si else ["astm-inch"]
    bars = next(
        bar_catalog(name).bars for name in catalogs if section.stirrup in bar_catalog(name).bars
    )
    grades = rng.sample(_GRADES[edition.name], k=1 if envelope else rng.choice([1, 2]))
    ties = [bar for bar in bars if 9.0 < bar.diameter_mm < 20.0 and bar != section.stirrup]
    count = 1 if envelope else rng.choice([1, 2])
    return Levers(
        steels=tuple(Steel(edition=edition, fy=fy, name=name) for name, fy in grades),
        stirrups=tuple(rng.sample(ties, k=min(count, len(ties)))),
        widths=(section.outline.web + rng.choice([-1.0, 2.0]) * step,) if envelope else (),
        depths=(section.outline.depth + rng.choice([-2.0, 2.0]) * step,) if envelope else (),
    )


def _choices(twin: _Twin, levers: Levers) -> Iterator[_Choice]:
    section = twin.problem.section
    grades = [("", section.steel.fy), *((steel.name, steel.fy) for steel in levers.steels)]
    stirrups = [section.stirrup, *levers.stirrups]
    webs = [section.outline.web, *levers.widths]
    depths = [section.outline.depth, *levers.depths]
    for (name, fy), stirrup, web, depth in product(grades, stirrups, webs, depths):
        yield _Choice(name, fy, stirrup, web, depth)


def _named(drawn: _Choice, other: _Choice, case: Case) -> tuple[tuple[str, str, str], ...]:
    """The levers as the result has to name them."""
    stress, length = ("MPa", "mm") if case.si else ("psi", "in")
    unnamed = f"fy {drawn.fy:.6g} {stress}"
    pairs = (
        ("steel", unnamed, other.name or unnamed),
        ("stirrup", drawn.stirrup.designation, other.stirrup.designation),
        ("width", f"{drawn.web:.6g} {length}", f"{other.web:.6g} {length}"),
        ("depth", f"{drawn.depth:.6g} {length}", f"{other.depth:.6g} {length}"),
    )
    return tuple(pair for pair in pairs if pair[1] != pair[2])


@dataclass(frozen=True)
class _Listed:
    """A section with its levers, a price list, and all layouts of all its variants."""

    twin: _Twin
    levers: Levers
    prices: PriceList
    variants: tuple[tuple[_Choice, Case, tuple[Found, ...]], ...]


@cache
def _listed(seed: int, envelope: bool) -> _Listed:
    twin, rng = _random_twin(seed), random.Random(seed)
    if envelope:
        # Eight times as many cases as without: two layers at most, so that each is small.
        most = min(2, twin.problem.rules.max_layers)
        rules = replace(twin.problem.rules, max_layers=most)
        twin = _Twin(replace(twin.problem, rules=rules), replace(twin.case, max_layers=most))
    levers = _others(twin, rng, envelope=envelope)
    listed = []
    for choice in _choices(twin, levers):
        case, varied = _case(twin, choice)
        if opposite_bars(varied).ok:
            listed.append((choice, case, tuple(enumerate_layouts(case))))
    prices = _prices(rng, twin.problem.section.edition.units)
    return _Listed(twin, levers, prices, tuple(listed))


def _compare(seed: int, *, envelope: bool, priced: bool) -> tuple[int, int]:
    """Size of the set, and number of variants it has layouts of."""
    listed = _listed(seed, envelope)
    problem, prices = listed.twin.problem, listed.prices if priced else None
    top = problem.section.outline.top
    slab = 0.0 if top is None else top.thickness
    drawn, *_ = _choices(listed.twin, listed.levers)
    values: dict[Key, tuple[float, ...]] = {
        (_named(drawn, choice, case), item.counts): _values(
            case, item, choice, prices, slab, envelope
        )
        for choice, case, items in listed.variants
        # Without prices a grade as strong as the drawn one is the same steel by another name.
        if priced or not choice.name or choice.fy != drawn.fy
        for item in items
    }
    expected = _unbeaten(values)
    found, proved = trade_off(variants(problem, listed.levers, prices))
    assert proved
    keys = [(item.variant.changes, _counts(item.layout)) for item in found]
    assert len(set(keys)) == len(keys), seed
    assert set(keys) == expected, seed
    for key, unbeaten in zip(keys, found, strict=True):
        assert unbeaten.values == pytest.approx(values[key], rel=1e-9), seed
    return len(keys), len({changes for changes, _ in keys})


@pytest.mark.parametrize("priced", [False, True], ids=["bare", "priced"])
@pytest.mark.parametrize("first", range(2000, 2000 + SECTIONS, GROUP))
def test_grades_and_stirrups(first: int, priced: bool) -> None:
    """One or two further grades and stirrups: the same layouts of the same variants."""
    found = [_compare(seed, envelope=False, priced=priced) for seed in range(first, first + GROUP)]
    assert max(size for size, _ in found) > 3
    assert max(count for _, count in found) > 1


def test_envelope_with_prices() -> None:
    """Another web and another depth as well, weighed in cost and carbon."""
    found = [_compare(seed, envelope=True, priced=True) for seed in range(3000, 3000 + GROUP)]
    assert max(size for size, _ in found) > 3
    assert max(count for _, count in found) > 1


def test_envelope_without_prices() -> None:
    """The same without a price list: the area of concrete is an aim of its own."""
    found = [_compare(seed, envelope=True, priced=False) for seed in range(3000, 3000 + GROUP)]
    assert max(count for _, count in found) > 1
