"""Minimum flexural steel, 9.6.1.2."""

from __future__ import annotations

import math

import numpy as np
import pytest

from engine import Flange, Outline
from engine.minimum_steel import EXEMPTION, minimum_area, web_for_minimum
from tests.engine.builders import array, si_section, us_section


@pytest.mark.parametrize(
    ("code", "fc", "fy", "stress", "used"),
    [
        ("ACI 318-19", 4000.0, 60_000.0, 200.0, 60_000.0),  # 3 sqrt(4000) = 190 < 200
        ("ACI 318-19", 5000.0, 60_000.0, 3 * math.sqrt(5000), 60_000.0),
        ("ACI 318-19", 5000.0, 80_000.0, 3 * math.sqrt(5000), 80_000.0),
        ("ACI 318-19", 5000.0, 100_000.0, 3 * math.sqrt(5000), 80_000.0),
        ("ACI 318-14", 5000.0, 80_000.0, 3 * math.sqrt(5000), 80_000.0),
    ],
)
def test_minimum_in_inches(code: str, fc: float, fy: float, stress: float, used: float) -> None:
    """max(3 sqrt(f'c), 200) bw d/fy; fy up to 80 ksi in 2019."""
    section = us_section(code=code, fc=fc, fy=fy)
    expected = stress * 14.0 * array(21.5, 20.0) / used
    np.testing.assert_allclose(minimum_area(section, array(21.5, 20.0)), expected, rtol=1e-12)


@pytest.mark.parametrize(
    ("fc", "fy", "stress", "used"),
    [
        (28.0, 420.0, 1.4, 420.0),  # 0.25 sqrt(28) = 1.32 < 1.4
        (35.0, 420.0, 0.25 * math.sqrt(35), 420.0),
        (35.0, 690.0, 0.25 * math.sqrt(35), 550.0),
    ],
)
def test_minimum_in_millimetres(fc: float, fy: float, stress: float, used: float) -> None:
    """max(0.25 sqrt(f'c), 1.4) bw d/fy; fy up to 550 MPa in 2019."""
    found = minimum_area(si_section(fc=fc, fy=fy), array(530.0))
    np.testing.assert_allclose(found, stress * 350.0 * 530.0 / used, rtol=1e-12)


@pytest.mark.parametrize(
    ("flange", "determinate", "moment", "width"),
    [
        (60.0, True, -3e6, 28.0),  # 2 bw
        (20.0, True, -3e6, 20.0),  # bf
        (60.0, False, -3e6, 14.0),
        (60.0, True, 3e6, 14.0),  # flange compressed
    ],
)
def test_flange_in_tension(flange: float, determinate: bool, moment: float, width: float) -> None:
    """Determinate beam, flange in tension: lesser of bf and 2 bw; otherwise the web."""
    outline = Outline(web=14.0, depth=24.0, top=Flange(width=flange, thickness=5.0))
    section = us_section(outline=outline, Mu=moment, statically_determinate=determinate)
    assert web_for_minimum(section) == width


def test_exemption_is_the_inverse_of_four_thirds() -> None:
    """9.6.1.3."""
    assert EXEMPTION * 4 / 3 == 1.0
