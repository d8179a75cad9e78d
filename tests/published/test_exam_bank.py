"""A university exam-bank item and a homework note: unnamed authors, low authority.

Kept for what they show alone: beta1 at its floor to six figures, and a cracked T section with
compression steel.
"""

from __future__ import annotations

import numpy as np
import pytest

from engine import Concrete, Profile, cracked_section, edition
from tests.published.printed import printed
from tests.published.solving import US, rectangle, solve


@pytest.mark.parametrize("code", US)
def test_beta1_above_8000_psi(code: str) -> None:
    """Exam item: 3 #6, 14 in by d = 21.5 in, 8800 psi: beta1 = 0.65."""
    found = solve(rectangle(14, 21.5), (1.32, 21.5), fc=8800, fy=60_000, code=code)
    assert Concrete(edition=edition(code), fc=8800).beta1 == pytest.approx(0.65)
    assert found.a == printed("0.756303")
    assert found.eps_t == printed("0.052434")


def test_cracked_t_section_at_midspan() -> None:
    """Homework note, fixed-ended T beam at midspan: x = 6.53 in, Icr = 17 161 in^4.

    Flange 30 x 5 in, web 12 in, d = 27.5 in; 4.0 in^2, and 2.0 in^2 at 2.5 in counted n - 1
    times, n = 8.055556. The note's Icr follows from its rounded x: 1 in^4 off. Its support
    figures are not used: there it swaps tension and compression steel.
    """
    n = 8.055556
    profile = Profile(((30.0, 5.0), (12.0, 25.0)))
    found = cracked_section(profile, np.array([[n * 4, (n - 1) * 2]]), np.array([[27.5, 2.5]]))
    assert found.x == printed("6.53")
    assert found.Icr == printed("17161", units=1.5)


def test_cracked_t_section_at_the_support() -> None:
    """Homework note, support, derived: with the steel the right way round x = 11.49 in.

    7.12 in^2 in tension and 2.0 in^2 compressed; the web is compressed, so 12 in wide.
    """
    n = 8.055556
    profile = Profile(((12.0, 25.0), (30.0, 5.0)))
    found = cracked_section(profile, np.array([[n * 7.12, (n - 1) * 2]]), np.array([[27.5, 2.5]]))
    x = float(found.x[0])
    assert 12 * x**2 / 2 + (n - 1) * 2 * (x - 2.5) == pytest.approx(n * 7.12 * (27.5 - x), rel=1e-9)
    assert x == printed("11.487")
    assert found.Icr == printed("21909")
