"""Cracked elastic section against closed forms."""

from __future__ import annotations

import math

import numpy as np

from engine import Profile, cracked_section
from tests.engine.builders import array

B, D, AT = 12.0, 20.0, 24.0  # web, depth of the steel, transformed steel area n As


def test_rectangle() -> None:
    """B x^2/2 = At (d - x), Icr = b x^3/3 + At (d - x)^2."""
    x = (-AT + math.sqrt(AT**2 + 2 * B * AT * D)) / B
    found = cracked_section(Profile(((B, 24.0),)), np.array([[AT]]), np.array([[D]]))
    np.testing.assert_allclose(found.x, x, rtol=1e-12)
    np.testing.assert_allclose(found.Icr, B * x**3 / 3 + AT * (D - x) ** 2, rtol=1e-12)


def test_axis_in_the_web_of_a_t() -> None:
    """Flange 30 x 2 and web 12: 30 2 (x - 1) + 12 (x - 2)^2/2 = At (d - x)."""
    # 6 x^2 + (60 - 24 + At) x - (60 - 24 + At D) = 0
    linear, constant = 36.0 + AT, -(36.0 + AT * D)
    x = (-linear + math.sqrt(linear**2 - 24 * constant)) / 12
    assert x > 2.0
    inertia = 30 * 2**3 / 12 + 60 * (x - 1) ** 2 + B * (x - 2) ** 3 / 3 + AT * (D - x) ** 2
    profile = Profile(((30.0, 2.0), (B, 22.0)))
    found = cracked_section(profile, np.array([[AT]]), np.array([[D]]))
    np.testing.assert_allclose(found.x, x, rtol=1e-12)
    np.testing.assert_allclose(found.Icr, inertia, rtol=1e-12)


def test_compression_steel_and_several_rows() -> None:
    """(n - 1) A's at 2.5 in joins the first moments; an empty place changes nothing."""
    upper = 6.0
    total = AT + upper
    x = (-total + math.sqrt(total**2 + 2 * B * (AT * D + upper * 2.5))) / B
    single = (-AT + math.sqrt(AT**2 + 2 * B * AT * D)) / B
    found = cracked_section(
        Profile(((B, 24.0),)),
        np.array([[AT, upper], [AT, 0.0]]),
        np.array([[D, 2.5], [D, 2.5]]),
    )
    inertia = B * x**3 / 3 + AT * (D - x) ** 2 + upper * (x - 2.5) ** 2
    np.testing.assert_allclose(found.x, array(x, single), rtol=1e-12)
    np.testing.assert_allclose(found.Icr[0], inertia, rtol=1e-12)
