"""One-way shear of beams: worked figures of textbooks, the code's own tables, unit twins."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from engine.beams.shear import (
    PHI_SHEAR,
    concrete_shear,
    concrete_shear_unreinforced,
    largest_spacing_for_area,
    largest_steel_shear,
    least_legs,
    least_stirrup_area,
    size_factor,
    spacing_across,
    spacing_along,
    stirrup_shear,
    stirrups_required_above,
    usable_yield,
)
from engine.beams.shear_rules import shear_rules
from engine.editions import EDITIONS, edition
from engine.materials import Concrete
from tests.published.printed import printed
from tests.published.solving import SI, US

TWINS = tuple(zip(US, SI, strict=True))
INCH, PSI, POUND = 25.4, 0.00689476, 4.44822  # mm, MPa, N
# ACI 318M rounds its figures: 0.083 for 1/12.04 is the furthest off, but for 0.35 MPa for
# 50 psi and 0.062 for 0.75, within 1.6 %; 0.17 for 2 is 2.4 % high.
ROUNDED = 0.025


def of(code: str, fc: float, lightweight: float = 1.0) -> Concrete:
    """Return concrete of an edition [psi or MPa]."""
    return Concrete(edition=edition(code), fc=fc, lightweight=lightweight)


# McCormac & Brown, Design of Reinforced Concrete, 9th ed. (ACI 318-11), chapter 8, from memory.
# bw = 14 in, d = 24 in, f'c = 3000 psi, Grade 60, #3 stirrups of two legs.


def test_concrete_of_mccormac_example_8_2() -> None:
    """Vc = 36 807 lb; phi Vc = 27 605 lb; no stirrups up to half of it, 13 803 lb."""
    concrete = of("ACI 318-14", 3000)
    assert concrete_shear(concrete, 14, 24.0) == printed("36,807")
    assert PHI_SHEAR * concrete_shear(concrete, 14, 24.0) == printed("27,605")
    assert stirrups_required_above(concrete, 14, 24.0) == printed("13,803")


@pytest.mark.parametrize(
    ("Vu", "Vs", "spacing"), [(40_000, "16,527", "19.17"), (60_000, "43,193", "7.33")]
)
def test_spacing_of_mccormac_example_8_2(Vu: float, Vs: str, spacing: str) -> None:
    """Theoretical spacings: 19.17 in (of which d/2 = 12 in is taken) and 7.33 in."""
    concrete = of("ACI 318-14", 3000)
    # The book takes phi Vc as 27 605 lb.
    required = (Vu - 27_605) / PHI_SHEAR
    assert required == printed(Vs)
    found = stirrup_shear(0.22, 60_000, 24.0, 1.0) / required
    assert found == printed(spacing)
    assert spacing_along(concrete, 14, 24.0, required) == 12.0
    # Av fy/(50 bw): the other limit that the book sets beside it, 18.86 in.
    assert largest_spacing_for_area(concrete, 14, 0.22, 60_000) == printed("18.86")


def test_section_of_mccormac_example_8_2() -> None:
    """Vu = 150 kip asks for Vs = 163 193 lb, above 8 sqrt(f'c) bw d = 147 228 lb."""
    assert largest_steel_shear(of("ACI 318-14", 3000), 14, 24.0) == printed("147,228")


def test_beam_without_stirrups_of_mccormac_example_8_1() -> None:
    """Vu = 38 kip, f'c = 4000 psi: no stirrups from bw d = 801 in^2 on."""
    assert 38_000 / stirrups_required_above(of("ACI 318-14", 4000), 1, 1.0) == printed("801")


# Worked by hand from the clauses.


@pytest.mark.parametrize(
    ("code", "fc", "bw", "d", "expected"),
    [
        ("ACI 318-19", 4900, 12, 20.0, 2 * 70 * 12 * 20),
        ("ACI 318M-14", 25, 300, 500.0, 0.17 * 5 * 300 * 500),
        ("ACI 318M-19", 36, 300, 500.0, 0.17 * 6 * 300 * 500),
        # Least stirrups lift the cap of 100 psi (8.3 MPa), 22.5.3.2.
        ("ACI 318-14", 14_400, 10, 10.0, 2 * 120 * 10 * 10),
        ("ACI 318M-19", 100, 100, 100.0, 0.17 * 10 * 100 * 100),
    ],
)
def test_concrete_with_stirrups(code: str, fc: float, bw: float, d: float, expected: float) -> None:
    """Vc is the code's coefficient times sqrt(f'c) bw d."""
    assert concrete_shear(of(code, fc), bw, d) == pytest.approx(expected)


def test_lightweight_enters_where_the_concrete_carries() -> None:
    """Lambda lowers what the concrete carries, not the largest Vs."""
    light, normal = of("ACI 318-19", 4000, 0.75), of("ACI 318-19", 4000)
    for shear in (concrete_shear, stirrups_required_above):
        assert shear(light, 12, 20.0) == pytest.approx(0.75 * shear(normal, 12, 20.0))
    assert concrete_shear_unreinforced(light, 12, 20.0, 0.01) == pytest.approx(
        0.75 * concrete_shear_unreinforced(normal, 12, 20.0, 0.01)
    )
    assert largest_steel_shear(light, 12, 20.0) == largest_steel_shear(normal, 12, 20.0)


@pytest.mark.parametrize(
    ("d", "factor"), [(17.5, "0.853"), (20.0, "0.816"), (30.0, "0.707"), (60.0, "0.535")]
)
def test_size_factor(d: float, factor: str) -> None:
    """sqrt(2/(1 + d/10)), worked by hand."""
    assert size_factor(edition("ACI 318-19"), d) == printed(factor)


@pytest.mark.parametrize(("code", "d"), [("ACI 318-19", 10.0), ("ACI 318M-19", 250.0)])
def test_size_factor_ends_at_one(code: str, d: float) -> None:
    """The size factor is 1 up to its depth, and falls with the root beyond."""
    assert size_factor(edition(code), np.array([d / 2, d, 3 * d])) == pytest.approx(
        [1.0, 1.0, math.sqrt(0.5)]
    )


def test_unreinforced_in_2019_by_the_ratio() -> None:
    """rho_w = 1/64 has the cube root 1/4, so that 8 lambda_s of it is 2 at d = 10 in."""
    concrete = of("ACI 318-19", 4900)
    assert concrete_shear_unreinforced(concrete, 12, 10.0, 1 / 64) == pytest.approx(
        2 * 70 * 12 * 10
    )
    assert concrete_shear_unreinforced(concrete, 12, 30.0, 0.008) == pytest.approx(
        8 * math.sqrt(0.5) * 0.2 * 70 * 12 * 30
    )
    metric = of("ACI 318M-19", 25)
    assert concrete_shear_unreinforced(metric, 300, 750.0, 0.008) == pytest.approx(
        0.66 * math.sqrt(0.5) * 0.2 * 5 * 300 * 750
    )


@pytest.mark.parametrize(("code", "most"), [("ACI 318-19", 5.0), ("ACI 318M-19", 0.42)])
def test_unreinforced_in_2019_has_a_largest_value(code: str, most: float) -> None:
    """At d with a size factor of one, rho_w = 0.5 would give 6.3 (0.52)."""
    concrete = of(code, 25 if "M" in code else 4900)
    root = math.sqrt(concrete.fc)
    assert concrete_shear_unreinforced(concrete, 10, 8.0, 0.5) == pytest.approx(most * root * 80)


@pytest.mark.parametrize(
    ("code", "fc", "cap", "coefficient"),
    [("ACI 318-14", 14_400, 100.0, 2.0), ("ACI 318M-14", 100, 8.3, 0.17)],
)
def test_unreinforced_in_2014_keeps_the_cap(
    code: str, fc: float, cap: float, coefficient: float
) -> None:
    """sqrt(f'c) counts up to its cap in 2014, in the trigger of stirrups too."""
    concrete = of(code, fc)
    expected = coefficient * cap * 10 * 20
    assert concrete_shear_unreinforced(concrete, 10, 20.0, 0.01) == pytest.approx(expected)
    assert stirrups_required_above(concrete, 10, 20.0) == pytest.approx(0.375 * expected)


def test_unreinforced_in_2019_keeps_the_cap() -> None:
    """sqrt(f'c) counts up to its cap in 2019."""
    high, at_cap = of("ACI 318-19", 14_400), of("ACI 318-19", 10_000)
    assert concrete_shear_unreinforced(high, 10, 20.0, 0.01) == pytest.approx(
        concrete_shear_unreinforced(at_cap, 10, 20.0, 0.01)
    )


@pytest.mark.parametrize(
    ("code", "fc", "stress"), [("ACI 318-19", 4900, 70.0), ("ACI 318M-19", 25, 0.083 * 5)]
)
def test_trigger_of_2019(code: str, fc: float, stress: float) -> None:
    """Stirrups are required above phi times a stress of its own in 2019, without the cap."""
    found = stirrups_required_above(of(code, fc), 10, 20.0)
    assert found == pytest.approx(0.75 * stress * 10 * 20)


@pytest.mark.parametrize("code", US)
def test_stirrups_in_inches(code: str) -> None:
    """Usable yield and least area are those of the code in inches."""
    rules = edition(code)
    assert usable_yield(rules, 80_000) == 60_000
    assert usable_yield(rules, 40_000) == 40_000
    # 0.75 sqrt(f'c) is above 50 psi from f'c = 4444 psi on.
    assert least_stirrup_area(of(code, 4000), 12, 10.0, 60_000) == pytest.approx(50 * 2 / 1000)
    assert least_stirrup_area(of(code, 6400), 12, 10.0, 60_000) == pytest.approx(60 * 2 / 1000)


@pytest.mark.parametrize("code", SI)
def test_stirrups_in_millimetres(code: str) -> None:
    """Usable yield and least area are those of the code in millimetres."""
    rules = edition(code)
    assert usable_yield(rules, 550) == 420
    assert usable_yield(rules, 280) == 280
    assert least_stirrup_area(of(code, 25), 300, 200.0, 420) == pytest.approx(
        0.35 * 300 * 200 / 420
    )
    assert least_stirrup_area(of(code, 49), 300, 200.0, 420) == pytest.approx(
        0.062 * 7 * 300 * 200 / 420
    )


@pytest.mark.parametrize(
    ("code", "d", "along", "across"),
    [
        ("ACI 318-14", 20.0, (10.0, 5.0), (math.inf, math.inf)),
        ("ACI 318-14", 60.0, (24.0, 12.0), (math.inf, math.inf)),
        ("ACI 318-19", 20.0, (10.0, 5.0), (20.0, 10.0)),
        ("ACI 318-19", 36.0, (18.0, 9.0), (24.0, 12.0)),
        ("ACI 318-19", 60.0, (24.0, 12.0), (24.0, 12.0)),
        ("ACI 318M-14", 500.0, (250.0, 125.0), (math.inf, math.inf)),
        ("ACI 318M-19", 500.0, (250.0, 125.0), (500.0, 250.0)),
        ("ACI 318M-19", 1500.0, (600.0, 300.0), (600.0, 300.0)),
    ],
)
def test_spacing_limits(
    code: str, d: float, along: tuple[float, float], across: tuple[float, float]
) -> None:
    """Vs at 4 sqrt(f'c) bw d (0.33) still has the wider spacing."""
    inch = edition(code).units == "us"
    concrete = of(code, 4900 if inch else 25)
    limit = (4 * 70 if inch else 0.33 * 5) * 10 * d
    Vs, depth = np.array([0.999, 1.001]) * limit, np.full(2, d)
    assert spacing_along(concrete, 10, depth, Vs) == pytest.approx(along)
    assert spacing_across(concrete, 10, depth, Vs) == pytest.approx(across)
    assert spacing_along(concrete, 10, d, 0.999 * limit) == pytest.approx(along[0])
    assert spacing_across(concrete, 10, d, 1.001 * limit) == pytest.approx(across[1])


@pytest.mark.parametrize(
    ("width", "limit", "legs"),
    [(9, 20, 2), (20, 20, 2), (20.01, 20, 3), (36, 12, 4), (0.3, 0.1, 4), (60, math.inf, 2)],
)
def test_least_legs(width: float, limit: float, legs: int) -> None:
    """Legs are as many as the distance across the web asks for, two at least."""
    assert least_legs(width, limit) == legs


def test_clauses_are_those_of_the_edition() -> None:
    """Each edition cites its own clauses."""
    old, new = shear_rules(edition("ACI 318-14")), shear_rules(edition("ACI 318M-19"))
    assert (old.concrete_clause, old.steel_clause) == ("22.5.5.1", "22.5.10.5.3")
    assert (new.concrete_clause, new.least_clause) == ("Table 22.5.5.1", "9.6.3.4")


# Properties.


@pytest.mark.parametrize(("us", "si"), TWINS)
@pytest.mark.parametrize("fc", [3000, 6000])
@pytest.mark.parametrize("d", [16.0, 40.0])
def test_unit_twins_agree(us: str, si: str, fc: float, d: float) -> None:
    """One beam in either unit system has the same shear strengths but for printed rounding."""
    inch, metric = of(us, fc), of(si, fc * PSI)
    bw, depth = 14 * INCH, d * INCH
    pairs = (
        (concrete_shear(inch, 14, d), concrete_shear(metric, bw, depth)),
        (largest_steel_shear(inch, 14, d), largest_steel_shear(metric, bw, depth)),
        (stirrups_required_above(inch, 14, d), stirrups_required_above(metric, bw, depth)),
        (
            concrete_shear_unreinforced(inch, 14, d, 0.01),
            concrete_shear_unreinforced(metric, bw, depth, 0.01),
        ),
    )
    for pounds, newtons in pairs:
        assert newtons / POUND == pytest.approx(pounds, rel=ROUNDED)
    area = least_stirrup_area(inch, 14, d / 2, 60_000)
    assert least_stirrup_area(metric, bw, depth / 2, 60_000 * PSI) / INCH**2 == pytest.approx(
        area, rel=ROUNDED
    )


@pytest.mark.parametrize("code", EDITIONS)
def test_arrays_give_what_numbers_give(code: str) -> None:
    """An array gives for each item what the number alone gives."""
    rules = edition(code)
    concrete = of(code, rules.beta1_start)
    d = np.array([0.5, 1.0, 2.0]) * 20 * rules.least_gap
    ratio = np.array([0.004, 0.01, 0.02])
    for shear in (concrete_shear, stirrups_required_above, largest_steel_shear):
        assert shear(concrete, 10, d).tolist() == [shear(concrete, 10, one) for one in d.tolist()]
    found = concrete_shear_unreinforced(concrete, 10, d, ratio)
    one_by_one = [
        concrete_shear_unreinforced(concrete, 10, *both)
        for both in zip(d.tolist(), ratio.tolist(), strict=True)
    ]
    assert found == pytest.approx(one_by_one)


@given(
    code=st.sampled_from(sorted(EDITIONS)),
    share=st.floats(0.0, 1.0),
    bw=st.floats(8.0, 1000.0),
    area=st.floats(0.1, 5000.0),
)
def test_least_area_and_its_spacing_are_inverse(
    code: str, share: float, bw: float, area: float
) -> None:
    """At the largest spacing for an area the least area is that area."""
    low, high = edition(code).strength_range
    concrete = of(code, low + share * (high - low))
    fyt = shear_rules(concrete.edition).yield_cap
    spacing = largest_spacing_for_area(concrete, bw, area, fyt)
    assert least_stirrup_area(concrete, bw, spacing, fyt) == pytest.approx(area)


@given(d=st.floats(4.0, 100.0), ratio=st.floats(0.001, 0.04), growth=st.floats(1.0, 2.0))
def test_unreinforced_rises_with_depth_and_ratio(d: float, ratio: float, growth: float) -> None:
    """The force rises with d although its stress falls, and with rho_w."""
    concrete = of("ACI 318-19", 4000)
    one = concrete_shear_unreinforced(concrete, 12, d, ratio)
    rounding = 1 - 1e-12
    assert concrete_shear_unreinforced(concrete, 12, d * growth, ratio) >= one * rounding
    assert concrete_shear_unreinforced(concrete, 12, d, ratio * growth) >= one * rounding
    assert concrete_shear_unreinforced(concrete, 12, d * growth, ratio) <= one * growth / rounding
