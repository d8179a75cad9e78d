"""Deflections: McCormac & Brown, Design of Reinforced Concrete, 9th ed. (ACI 318-11), and others.

The effective inertia of 318-11 went unchanged into 318-14.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from engine.beams.deflection import (
    DEFLECTION_LIMITS,
    TIME_FACTORS,
    DeflectionResult,
    deflection,
    long_term_factor,
)
from engine.beams.demand import Deflections
from engine.beams.least_depth import Continuity, least_depth
from engine.beams.stiffness import (
    StageInertias,
    cracking_moment,
    effective_inertia,
    modulus_of_rupture,
    stage_inertias,
)
from engine.cracked_section import cracked_section
from engine.editions import EDITIONS, edition
from engine.errors import OutOfRangeError
from engine.materials import Concrete
from engine.outlines import FloatArray, Profile
from tests.published.printed import printed
from tests.published.solving import SI, US

KIP_FT = 12_000.0  # lbf*in
KLF = 1000 / 12  # lbf/in


def of(code: str, fc: float, lightweight: float = 1.0) -> Concrete:
    """Return concrete of an edition [psi or MPa]."""
    return Concrete(edition=edition(code), fc=fc, lightweight=lightweight)


def simple_span(length: float, dead: float, sustained: float, total: float) -> Deflections:
    """Return a simple span under uniform loads: 5 w l^4/384 and w l^2/8 [in, lbf/in]."""
    loads = (dead, sustained, total)
    deflections = [5 * load * length**4 / 384 for load in loads]
    moments = [load * length**2 / 8 for load in loads]
    return Deflections(
        dead=deflections[0],
        sustained=deflections[1],
        total=deflections[2],
        moment_dead=moments[0],
        moment_sustained=moments[1],
        moment_total=moments[2],
        sagging=True,
    )


# McCormac & Brown, example 6.1: 12 in by 20 in, d = 17 in, 3 #9, f'c = 3000 psi, 20 ft, dead
# load 1.0 and live load 0.7 kip/ft, of which 30 % is sustained; n = 9.

_EXAMPLE_6_1 = simple_span(240.0, 1.0 * KLF, 1.21 * KLF, 1.7 * KLF)


def _cracked_6_1() -> FloatArray:
    profile = Profile(((12.0, 20.0),))
    return cracked_section(profile, np.array([[9 * 3.0]]), np.array([[17.0]])).Icr


def test_inertias_of_mccormac_example_6_1() -> None:
    """Mcr = 27.4 kip*ft, Icr = 4067 in^4; Ie = 4714, 4432 and 4199 in^4 for D, sustained, D + L."""
    concrete = of("ACI 318-14", 3000)
    assert cracking_moment(concrete, 8000.0, 10.0) / KIP_FT == printed("27.4")
    assert float(_cracked_6_1()[0]) == printed("4067")
    # The book goes on with these two figures.
    found = stage_inertias(
        concrete.edition, _EXAMPLE_6_1, 27.4 * KIP_FT, 8000.0, np.array([4067.0])
    )
    assert float(found.dead[0]) == printed("4714")
    assert float(found.sustained[0]) == printed("4432")
    assert float(found.total[0]) == printed("4199")


def test_deflections_of_mccormac_example_6_1() -> None:
    """0.245 in of D, 0.467 of D + L, 0.222 of L, 0.315 sustained, 0.070 of it live; 0.838 at last.

    The long-term figure has xi = 2.0 for dead load and 1.8 for live load sustained three years,
    and all live load.
    """
    concrete = of("ACI 318-14", 3000)
    mcr = cracking_moment(concrete, 8000.0, 10.0)
    inertias = stage_inertias(concrete.edition, _EXAMPLE_6_1, mcr, 8000.0, _cracked_6_1())
    found = deflection(
        _EXAMPLE_6_1,
        Ec=concrete.Ec,
        inertias=inertias,
        factor=long_term_factor(np.array([0.0])),
    )
    dead, live, sustained = (float(part[0]) for part in (found.dead, found.live, found.sustained))
    assert dead == printed("0.245")
    assert dead + live == printed("0.467")
    assert live == printed("0.222")
    assert sustained == printed("0.315")
    assert sustained - dead == printed("0.070")
    lasting = float(long_term_factor(np.array([0.0]))[0])
    three_years = float(long_term_factor(np.array([0.0]), 1.8)[0])
    assert lasting * dead + three_years * (sustained - dead) + live == printed("0.838")
    # With xi = 2.0 for both, the creep of the sustained live load is 0.2 of 0.070 in more.
    assert float(found.after_attachment[0]) == pytest.approx(0.838 + 0.2 * 0.070, abs=0.0006)


def test_t_beam_of_a_homework_note() -> None:
    """A student's note in a public repository; only its midspan is right, and taken here.

    Flange 30 in by 5 in, web 12 in, h = 30 in, d = 27.5 in, 4.0 in^2 and 2.0 in^2 at 2.5 in,
    n = 8.0556, Ma = 170 kip*ft: Mcr = 1 041 854 lbf*in, Icr = 17 161 in^4, Ie = 19 995 in^4.
    """
    concrete = of("ACI 318-14", 4000)
    assert modulus_of_rupture(concrete) == printed("474.34")
    mcr = cracking_moment(concrete, 38_437.5, 17.5)
    # The note goes on with fr as printed, to 0.001 %.
    assert mcr == pytest.approx(1_041_853.93, rel=1e-5)
    n = 8.055556
    profile = Profile(((30.0, 5.0), (12.0, 25.0)))
    steel = np.array([[n * 4.0, (n - 1) * 2.0]])
    cracked = cracked_section(profile, steel, np.array([[27.5, 2.5]]))
    assert float(cracked.x[0]) == printed("6.53")
    # The note takes x = 6.53 in; one in^4 is 0.006 %.
    assert float(cracked.Icr[0]) == printed("17161", units=1.0)
    found = effective_inertia(concrete.edition, 170 * KIP_FT, mcr, 38_437.5, cracked.Icr)
    assert float(found[0]) == printed("19995", units=1.0)


# Worked by hand from the clauses.


@pytest.mark.parametrize(
    ("code", "fc", "expected"),
    [("ACI 318-14", 4900, 525.0), ("ACI 318-19", 4900, 525.0), ("ACI 318M-14", 25, 3.1)],
)
def test_modulus_of_rupture(code: str, fc: float, expected: float) -> None:
    """Modulus fr is the code's coefficient times sqrt(f'c), and less in lightweight concrete."""
    assert modulus_of_rupture(of(code, fc)) == pytest.approx(expected)
    assert modulus_of_rupture(of(code, fc, 0.8)) == pytest.approx(0.8 * expected)


@pytest.mark.parametrize(
    ("code", "expected"),
    [
        # Ma = 2 Mcr, Icr = Ig/4: 1/8 + 7/8 of 1/4.
        ("ACI 318-14", 1 / 8 + 7 / 8 / 4),
        # 1/4 over 1 - (1/3)^2 (3/4).
        ("ACI 318M-19", 0.25 / (1 - 0.75 / 9)),
    ],
)
def test_effective_inertia_by_hand(code: str, expected: float) -> None:
    """Ie is that worked out by hand, edition by edition."""
    found = effective_inertia(edition(code), 200.0, 100.0, 1000.0, np.array([250.0]))
    assert found == pytest.approx([1000 * expected])


@pytest.mark.parametrize(("code", "limit"), [("ACI 318-14", 1.0), ("ACI 318-19", 2 / 3)])
def test_uncracked_section_has_its_gross_inertia(code: str, limit: float) -> None:
    """Up to Mcr, or to two thirds of it, and without a jump there; no moment at all included."""
    Icr = np.array([200.0, 500.0])
    for Ma in (0.0, 0.5 * limit, limit):
        assert effective_inertia(edition(code), Ma, 1.0, 1000.0, Icr).tolist() == [1000.0, 1000.0]
    just_above = effective_inertia(edition(code), limit * (1 + 1e-9), 1.0, 1000.0, Icr)
    assert just_above == pytest.approx([1000.0, 1000.0])
    assert (effective_inertia(edition(code), limit * 1.01, 1.0, 1000.0, Icr) < 999).all()


def test_long_term_factor() -> None:
    """Sustained for five years, xi = 2.0; 1 % of compression bars takes a third off."""
    assert TIME_FACTORS == {3: 1.0, 6: 1.2, 12: 1.4, 60: 2.0}
    assert long_term_factor(np.array([0.0, 0.01, 0.02])) == pytest.approx([2.0, 4 / 3, 1.0])
    assert long_term_factor(np.array([0.01]), TIME_FACTORS[6]) == pytest.approx([0.8])


def _cantilever(back: float) -> Deflections:
    return Deflections(
        dead=100.0,
        sustained=140.0,
        total=300.0,
        dead_back=-0.5 * back,
        sustained_back=0.2 * back,
        total_back=back,
        moment_dead=10.0,
        moment_sustained=14.0,
        moment_total=30.0,
        sagging=False,
    )


def test_tip_of_a_cantilever_moves_with_its_support() -> None:
    """Own parts 100/(2 x 25), 140/(2 x 20), 300/(2 x 10); the others with Ie of the next span."""
    own = StageInertias(dead=np.array([25.0]), sustained=np.array([20.0]), total=np.array([10.0]))
    back = StageInertias(dead=np.array([5.0]), sustained=np.array([4.0]), total=np.array([2.0]))
    found = deflection(_cantilever(40.0), Ec=2.0, inertias=own, factor=np.array([1.5]), back=back)
    assert found.dead == pytest.approx([2.0 - 2.0])
    assert found.sustained == pytest.approx([3.5 + 1.0])
    assert found.live == pytest.approx([15.0 + 10.0])
    assert found.long_term == pytest.approx([6.75])
    assert found.after_attachment == pytest.approx([31.75])
    assert found.final == pytest.approx([31.75])


def test_rotating_support_needs_the_next_span() -> None:
    """A cantilever on a rotating support is refused without the span behind it."""
    own = StageInertias(dead=np.ones(1), sustained=np.ones(1), total=np.ones(1))
    with pytest.raises(OutOfRangeError, match=r"back: got none .*; allowed: Ie of the span next"):
        deflection(_cantilever(1.0), Ec=1.0, inertias=own, factor=np.ones(1))
    fixed = deflection(_cantilever(0.0), Ec=1.0, inertias=own, factor=np.ones(1))
    assert fixed.live == pytest.approx([200.0])


@pytest.mark.parametrize(
    ("name", "divisor", "counted"),
    [("roof", 180, 2.0), ("floor", 360, 2.0), ("sensitive", 480, 7.0), ("tolerant", 240, 7.0)],
)
def test_limits_of_table_24_2_2(name: str, divisor: float, counted: float) -> None:
    """Each limit has the table's divisor and counts the table's deflection."""
    limit = DEFLECTION_LIMITS[name]
    found = DeflectionResult(
        dead=np.array([1.0]), live=np.array([2.0]), sustained=np.array([3.0]),
        long_term=np.array([5.0]),
    )  # fmt: skip
    assert limit.name == name
    assert limit.meaning
    assert limit.allowed(720.0) == pytest.approx(720 / divisor)
    assert limit.counted(found) == pytest.approx([counted])


@pytest.mark.parametrize(
    ("continuity", "depth"),
    [
        (Continuity.SIMPLE, 22.5),
        (Continuity.ONE_END, 360 / 18.5),
        (Continuity.BOTH_ENDS, 360 / 21),
        (Continuity.CANTILEVER, 45.0),
    ],
)
@pytest.mark.parametrize("code", US)
def test_least_depth(code: str, continuity: Continuity, depth: float) -> None:
    """Table 9.3.1.1: l/16, l/18.5, l/21 and l/8 for Grade 60."""
    assert least_depth(edition(code), 360.0, continuity, 60_000) == pytest.approx(depth)


@pytest.mark.parametrize(
    ("code", "fy", "density", "factor"),
    [
        ("ACI 318-19", 80_000, None, 1.2),
        ("ACI 318-14", 40_000, None, 0.8),
        ("ACI 318M-19", 420, None, 1.0),
        ("ACI 318M-14", 280, None, 0.8),
        ("ACI 318-19", 60_000, 90, 1.2),
        ("ACI 318-19", 60_000, 115, 1.09),
        ("ACI 318-19", 60_000, 116, 1.0),
        ("ACI 318-19", 80_000, 100, 1.2 * 1.15),
        ("ACI 318M-19", 420, 1500, 1.2),
        ("ACI 318M-19", 420, 1840, 1.098),
        ("ACI 318M-19", 420, 2300, 1.0),
    ],
)
def test_factors_of_the_least_depth(
    code: str, fy: float, density: float | None, factor: float
) -> None:
    """The least depth changes with fy and density as the table's notes say."""
    found = least_depth(edition(code), 160.0, Continuity.SIMPLE, fy, density)
    assert found == pytest.approx(10 * factor)


@pytest.mark.parametrize("density", [89.9, math.nan])
def test_least_depth_knows_no_lighter_concrete(density: float) -> None:
    """Densities below those of the table's note are refused."""
    with pytest.raises(OutOfRangeError, match=r"density: got .*; allowed: 90 or more"):
        least_depth(edition("ACI 318-19"), 160.0, Continuity.SIMPLE, 60_000, density)


# Properties.


@pytest.mark.parametrize(("us", "si"), tuple(zip(US, SI, strict=True)))
def test_unit_twins_agree(us: str, si: str) -> None:
    """0.62 for 7.5 is 0.45 % low."""
    inch, metric = of(us, 4000), of(si, 4000 * 0.00689476)
    found = modulus_of_rupture(metric) / 0.00689476
    assert found == pytest.approx(modulus_of_rupture(inch), rel=0.005)


_EDITION = st.sampled_from(sorted(EDITIONS))


@given(
    code=_EDITION,
    Ma=st.floats(0.0, 10.0),
    more=st.floats(1.0, 3.0),
    shares=st.lists(st.floats(0.02, 2.0), min_size=1, max_size=8),
)
def test_effective_inertia_lies_between(
    code: str, Ma: float, more: float, shares: list[float]
) -> None:
    """Icr <= Ie <= Ig (Ig where Icr is above it); Ie falls with Ma and rises with Icr."""
    Icr = np.sort(np.array(shares)) * 1000.0
    found = effective_inertia(edition(code), Ma, 1.0, 1000.0, Icr)
    rounding = 1e-9
    assert (found >= np.minimum(Icr, 1000.0) - rounding).all()
    assert (found <= 1000.0 + rounding).all()
    assert (np.diff(found) >= -rounding).all()
    assert (effective_inertia(edition(code), Ma * more, 1.0, 1000.0, Icr) <= found + rounding).all()
    alone = [float(effective_inertia(edition(code), Ma, 1.0, 1000.0, Icr[i : i + 1])[0])
             for i in range(len(Icr))]  # fmt: skip
    assert found.tolist() == alone


@given(
    code=_EDITION,
    dead=st.floats(0.1, 100.0),
    live=st.floats(0.1, 100.0),
    share=st.floats(0.0, 1.0),
    Icr=st.floats(500.0, 8000.0),
)
def test_stages_follow_one_another(
    code: str, dead: float, live: float, share: float, Icr: float
) -> None:
    """More load never deflects less; all live load sustained makes it the total."""
    unit = simple_span(240.0, dead, dead + share * live, dead + live)
    inertias = stage_inertias(edition(code), unit, 300_000.0, 8000.0, np.array([Icr]))
    found = deflection(unit, Ec=3e6, inertias=inertias, factor=np.array([2.0]))
    rounding = 1e-12
    assert found.live[0] > 0
    assert found.dead[0] <= found.sustained[0] + rounding
    assert found.sustained[0] <= found.dead[0] + found.live[0] + rounding
    if share == 1.0:
        assert found.sustained == pytest.approx(found.dead + found.live)
    # The stiffest and the softest section bound the deflection.
    w, span = dead + live, 240.0**4 * 5 / 384 / 3e6
    assert w * span / 8000 <= (found.dead + found.live)[0] * (1 + 1e-9)
    assert (found.dead + found.live)[0] <= w * span / Icr * (1 + 1e-9)
