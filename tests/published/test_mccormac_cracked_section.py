"""Cracked sections: McCormac & Brown, Design of Reinforced Concrete, 9th ed. (ACI 318-11).

Elastic stresses of chapter 2. The cracking moment of example 2.1 and the deflections of
example 6.1 need a modulus of rupture, which no rule of the tool uses.
"""

from __future__ import annotations

import numpy as np
import pytest

from engine import Outline, Profile, check_layout, cracked_section
from tests.published.beams import bars, beam
from tests.published.printed import printed
from tests.published.solving import US


def test_rectangle_with_three_no_9() -> None:
    """Examples 2.3, 2.4, 2.12 and 6.1: 12 in by d = 17 in, 3 #9, n = 9, M = 70 kip*ft."""
    profile = Profile(((12.0, 20.0),))
    found = cracked_section(profile, np.array([[9 * 3.0]]), np.array([[17.0]]))
    x, inertia = float(found.x[0]), float(found.Icr[0])
    assert x == printed("6.78")
    assert inertia == printed("4067")
    assert 70 * 12_000 * x / inertia == printed("1401")
    assert 9 * 70 * 12_000 * (17 - x) / inertia == printed("18996")
    # Example 2.4: the moment at 0.45 f'c = 1350 psi, which governs over fs = 20 ksi.
    assert 1350 * inertia / x / 12_000 == printed("67.5")


@pytest.mark.parametrize("code", US)
def test_service_stress_of_the_check(code: str) -> None:
    """Example 2.3 as a checked layout: fs = 18 996 psi, with Es/Ec = 9 as the book rounds it."""
    outline = Outline(web=12, depth=17 + 1.5 + 0.375 + 1.128 / 2)
    section = beam(outline, code=code, fc=3000, fy=60_000, Mu=100.0, Ms=70.0, modulus=29e6 / 9)
    checked = check_layout(section, bars(code, "3 #9"))
    assert checked.service_stress == printed("18996")


def test_rectangle_with_compression_steel() -> None:
    """Example 2.7: 14 in by d = 17.5 in, 4.0 in^2 and 2.0 in^2 at 2.5 in, n = 10, M = 118 kip*ft.

    Compression steel is transformed by 2n - 1 and its stress doubled, for creep.
    """
    profile = Profile(((14.0, 20.0),))
    found = cracked_section(profile, np.array([[10 * 4.0, 19 * 2.0]]), np.array([[17.5, 2.5]]))
    x, inertia = float(found.x[0]), float(found.Icr[0])
    assert x == printed("6.45")
    assert inertia == printed("6729")
    moment = 118 * 12_000
    # The book's stresses follow from its rounded x = 6.45 and Icr = 6729 (exactly 6.4541); 0.004 in
    # of x are 0.1 % of the compression steel's lever and less of the others.
    assert moment * x / inertia == pytest.approx(1357, rel=0.0011)
    assert 2 * 10 * moment * (x - 2.5) / inertia == pytest.approx(16_624, rel=0.0011)
    assert 10 * moment * (17.5 - x) / inertia == pytest.approx(23_253, rel=0.0011)
    assert 10 * moment * (17.5 - 6.45) / 6729 == printed("23253")
