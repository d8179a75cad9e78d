"""Concrete and steel: beta1, moduli, yield strain, ranges."""

from __future__ import annotations

import math

import pytest

from engine import Concrete, OutOfRangeError, Steel, edition
from engine.materials import BLOCK, EPS_CU
from tests.engine.builders import CODES


def concrete(fc: float, code: str = "ACI 318-19") -> Concrete:
    """Return concrete of a strength."""
    return Concrete(edition=edition(code), fc=fc)


@pytest.mark.parametrize("code", CODES[:2])
@pytest.mark.parametrize(
    ("fc", "beta1"),
    [
        (2500.0, 0.85),
        (4000.0, 0.85),
        (4001.0, 0.84995),
        (5000.0, 0.80),
        (6000.0, 0.75),
        (7999.0, 0.65005),
        (8000.0, 0.65),
        (8001.0, 0.65),
        (15_000.0, 0.65),
    ],
)
def test_beta1_in_psi(code: str, fc: float, beta1: float) -> None:
    """ACI 318, Table 22.2.2.4.3: 0.85 to 4000 psi, 0.05 less per 1000 psi, 0.65 from 8000 psi."""
    assert concrete(fc, code).beta1 == pytest.approx(beta1, rel=1e-12)


@pytest.mark.parametrize("code", CODES[2:])
@pytest.mark.parametrize(
    ("fc", "beta1"),
    [
        (17.0, 0.85),
        (28.0, 0.85),
        (28.1, 0.85 - 0.05 * 0.1 / 7),
        (35.0, 0.80),
        (42.0, 0.75),
        (54.9, 0.85 - 0.05 * 26.9 / 7),
        (55.0, 0.65),
        (55.5, 0.65),
        (56.0, 0.65),
        (105.0, 0.65),
    ],
)
def test_beta1_in_megapascals(code: str, fc: float, beta1: float) -> None:
    """ACI 318M, Table 22.2.2.4.3: 0.85 to 28, 0.05 less per 7 MPa below 55, 0.65 from 55 MPa."""
    assert concrete(fc, code).beta1 == pytest.approx(beta1, rel=1e-12)


def test_constants_of_the_block() -> None:
    """22.2.2.1 and 22.2.2.4.1."""
    assert (EPS_CU, BLOCK) == (0.003, 0.85)
    assert concrete(4000.0).block_stress == pytest.approx(3400.0, rel=1e-15)


def test_concrete_modulus() -> None:
    """19.2.2.1(b), normalweight: 57,000 sqrt(4000) psi, 4700 sqrt(28) MPa; or as specified."""
    assert concrete(4000.0).Ec == pytest.approx(57_000 * math.sqrt(4000), rel=1e-15)
    assert concrete(28.0, "ACI 318M-19").Ec == pytest.approx(4700 * math.sqrt(28), rel=1e-15)
    given = Concrete(edition=edition("ACI 318-19"), fc=4000.0, modulus=3.0e6)
    assert given.Ec == 3.0e6


@pytest.mark.parametrize(
    ("fy", "code", "eps_ty"),
    [
        (60_000.0, "ACI 318-14", 0.002),
        (60_000.0, "ACI 318-19", 0.002),
        (420.0, "ACI 318M-14", 0.002),
        (420.0, "ACI 318M-19", 0.002),
        (40_000.0, "ACI 318-19", 40 / 29_000),
        (59_999.0, "ACI 318-19", 59.999 / 29_000),
        (80_000.0, "ACI 318-14", 80 / 29_000),
        (100_000.0, "ACI 318-19", 100 / 29_000),
        (550.0, "ACI 318M-14", 0.00275),
        (690.0, "ACI 318M-19", 0.00345),
    ],
)
def test_yield_strain(fy: float, code: str, eps_ty: float) -> None:
    """21.2.2.1: fy/Es, and 0.002 for Grade 60 (420)."""
    assert Steel(edition=edition(code), fy=fy).eps_ty == pytest.approx(eps_ty, rel=1e-12)


@pytest.mark.parametrize(
    ("fc", "code", "allowed"),
    [
        (4.0, "ACI 318-19", "2500 to 15000 psi"),
        (2499.0, "ACI 318-19", "2500 to 15000 psi"),
        (15_001.0, "ACI 318-14", "2500 to 15000 psi"),
        (16.9, "ACI 318M-19", "17 to 105 MPa"),
        (4000.0, "ACI 318M-19", "17 to 105 MPa"),
        (math.nan, "ACI 318-19", "2500 to 15000 psi"),
        (math.inf, "ACI 318-19", "2500 to 15000 psi"),
    ],
)
def test_concrete_strength_out_of_range(fc: float, code: str, allowed: str) -> None:
    """4 psi concrete is a slip of the unit."""
    with pytest.raises(
        OutOfRangeError, match=rf"{fc:g} \w+; allowed: {allowed} \(19\.2\.1\.1; own limits\)$"
    ) as caught:
        concrete(fc, code)
    assert caught.value.what == "fc"


@pytest.mark.parametrize(
    ("fy", "code", "allowed"),
    [
        (60.0, "ACI 318-19", "33000 to 100000 psi"),
        (80_001.0, "ACI 318-14", "33000 to 80000 psi"),
        (100_001.0, "ACI 318-19", "33000 to 100000 psi"),
        (551.0, "ACI 318M-14", "230 to 550 MPa"),
        (691.0, "ACI 318M-19", "230 to 690 MPa"),
        (math.nan, "ACI 318M-19", "230 to 690 MPa"),
    ],
)
def test_yield_strength_out_of_range(fy: float, code: str, allowed: str) -> None:
    """Table 20.2.2.4(a) ends flexure at 80 ksi (550 MPa) in 2014, 100 ksi (690 MPa) in 2019."""
    with pytest.raises(
        OutOfRangeError,
        match=rf"{fy:.6g} \w+; allowed: {allowed} \({code} 20\.2\.2\.4; own limits\)$",
    ) as caught:
        Steel(edition=edition(code), fy=fy)
    assert caught.value.what == "fy"


def test_name_and_note_of_a_grade() -> None:
    """Both are words for a reader: none unless given, and no figure depends on them."""
    plain = Steel(edition=edition("ACI 318-19"), fy=60_000.0)
    named = Steel(edition=edition("ACI 318-19"), fy=60_000.0, name="Grade 60", note="low alloy")
    assert (plain.name, plain.note) == ("", "")
    assert (named.name, named.note) == ("Grade 60", "low alloy")
    assert (named.Es, named.eps_ty) == (plain.Es, plain.eps_ty)


@pytest.mark.parametrize("code", CODES)
def test_ends_of_the_ranges_are_taken(code: str) -> None:
    """The bounds themselves are allowed."""
    taken = edition(code)
    assert [Steel(edition=taken, fy=fy).fy for fy in taken.yield_range] == list(taken.yield_range)
    assert [concrete(fc, code).fc for fc in taken.strength_range] == list(taken.strength_range)


@pytest.mark.parametrize("value", [0.7, 1.1, math.nan])
def test_lightweight_factor_out_of_range(value: float) -> None:
    """19.2.4: lambda is between 0.75 and 1; it has no unit to print."""
    with pytest.raises(
        OutOfRangeError,
        match=rf"\b{value:g}; allowed: 0\.75 to 1 \(19\.2\.4; own limits\)$",
    ) as caught:
        Concrete(edition=edition("ACI 318-19"), fc=4000.0, lightweight=value)
    assert caught.value.what == "lightweight"


@pytest.mark.parametrize("share", [0.29, 2.01])
def test_concrete_modulus_out_of_range(share: float) -> None:
    """A modulus far from that of normalweight concrete is a slip of the unit."""
    modulus = share * 57_000 * math.sqrt(4000)
    with pytest.raises(
        OutOfRangeError,
        match=r"psi; allowed: 1081499 to 7209993 psi \(19\.2\.2\.1; own limits\)$",
    ) as caught:
        Concrete(edition=edition("ACI 318-19"), fc=4000.0, modulus=modulus)
    assert caught.value.what == "Ec"
