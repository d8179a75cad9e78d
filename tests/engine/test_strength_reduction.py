"""phi and the strain limits, on both sides of every limit."""

from __future__ import annotations

import numpy as np
import pytest

from engine import OutOfRangeError, Steel, edition
from engine.strength_reduction import least_strain, phi, tension_controlled_strain
from tests.engine.builders import CODES, array


def steel(code: str, fy: float) -> Steel:
    """Return steel of a yield strength."""
    return Steel(edition=edition(code), fy=fy)


@pytest.mark.parametrize(
    ("code", "fy", "eps_ty", "limit"),
    [
        ("ACI 318-14", 60_000.0, 0.002, 0.005),
        ("ACI 318-14", 80_000.0, 80 / 29_000, 0.005),
        ("ACI 318M-14", 420.0, 0.002, 0.005),
        ("ACI 318M-14", 550.0, 0.00275, 0.005),
        ("ACI 318-19", 60_000.0, 0.002, 0.005),
        ("ACI 318-19", 80_000.0, 80 / 29_000, 80 / 29_000 + 0.003),
        ("ACI 318-19", 100_000.0, 100 / 29_000, 100 / 29_000 + 0.003),
        ("ACI 318M-19", 420.0, 0.002, 0.005),
        ("ACI 318M-19", 690.0, 0.00345, 0.00645),
    ],
)
def test_phi_on_both_sides_of_its_limits(code: str, fy: float, eps_ty: float, limit: float) -> None:
    """Table 21.2.2: 0.65 to eps_ty, linear to the tension-controlled limit, 0.90 from there."""
    step = 1e-6
    slope = 0.25 / (limit - eps_ty)
    eps_t = array(
        -0.001, eps_ty - step, eps_ty, eps_ty + step, (eps_ty + limit) / 2, limit - step, limit, 0.1
    )
    expected = [0.65, 0.65, 0.65, 0.65 + slope * step, 0.775, 0.90 - slope * step, 0.90, 0.90]
    np.testing.assert_allclose(phi(steel(code, fy), eps_t), expected, rtol=1e-12)
    assert tension_controlled_strain(steel(code, fy)) == pytest.approx(limit, rel=1e-12)


def test_phi_at_the_old_floor() -> None:
    """ACI 318-14, Grade 60: phi at eps_t = 0.004 is 0.65 + 0.25 (2/3) = 0.817 (handbook value)."""
    found = phi(steel("ACI 318-14", 60_000.0), array(0.004))
    np.testing.assert_allclose(found, 0.817, atol=0.0005)


@pytest.mark.parametrize("code", CODES)
def test_least_strain_where_tension_control_is_asked_for(code: str) -> None:
    """9.3.3.1 of 2019, and by choice in 2014: the tension-controlled limit."""
    fy = 550.0 if "M" in code else 80_000.0
    found = least_strain(steel(code, fy), tension_controlled=True)
    assert found == tension_controlled_strain(steel(code, fy))


@pytest.mark.parametrize(("code", "fy"), [("ACI 318-14", 60_000.0), ("ACI 318M-14", 420.0)])
def test_least_strain_of_2014(code: str, fy: float) -> None:
    """9.3.3.1 of ACI 318-14: 0.004."""
    assert least_strain(steel(code, fy), tension_controlled=False) == 0.004


@pytest.mark.parametrize(("code", "fy"), [("ACI 318-19", 60_000.0), ("ACI 318M-19", 420.0)])
def test_2019_has_no_transition_beams(code: str, fy: float) -> None:
    """9.3.3.1 of ACI 318-19 asks every beam to be tension-controlled."""
    message = f"false under {code}; allowed: true, since 9.3.3.1 .*; hint: ACI 318-14 permits"
    with pytest.raises(OutOfRangeError, match=message) as caught:
        least_strain(steel(code, fy), tension_controlled=False)
    assert caught.value.what == "tension_controlled"
