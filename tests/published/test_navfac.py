"""NAVFAC DM-2.08, Blast Resistant Structures (US Navy design manual), pp. 2.08-108 and -109.

Dynamic strengths: 1.1 x 60 ksi and 1.25 x 4 ksi; the manual uses no phi.
"""

from __future__ import annotations

import pytest

from engine import Outline, check_layout, edition
from engine.materials import Concrete, Steel
from tests.published.beams import bars, beam
from tests.published.printed import printed
from tests.published.solving import US


@pytest.mark.parametrize("code", US)
def test_midspan(code: str) -> None:
    """18 x 30 in, 5 #6, #4 ties, cover 1.5 in at midspan: d = 27.625 in, p = 0.0044."""
    section = beam(Outline(web=18, depth=30), code=code, fc=5000, fy=66_000, stirrup="#4")
    checked = check_layout(section, bars(code, "5 #6"))
    assert checked.As == printed("2.20")
    assert checked.d == printed("27.625")
    assert checked.a == printed("1.898")
    assert checked.As / (18 * checked.d) == printed("0.0044")
    # The manual's moment follows from its rounded a: half a unit of 0.001 in is 36 lbf*in.
    assert checked.Mn == pytest.approx(322.77958333 * 12_000, abs=36)


@pytest.mark.parametrize("code", US)
def test_effective_depth_at_the_support(code: str) -> None:
    """Cover 2.0 in at the support: d = 30 - 2.0 - 0.5 - 0.375 = 27.125 in."""
    section = beam(
        Outline(web=18, depth=30), code=code, fc=5000, fy=66_000, stirrup="#4", cover=2.0, Mu=-1.0
    )
    assert check_layout(section, bars(code, "5 #6")).d == printed("27.125")


@pytest.mark.parametrize("code", US)
def test_balanced_ratio(code: str) -> None:
    """rho_b = 0.0293, from 87 000/(87 000 + fy): the modulus of 29 000 ksi times 0.003."""
    concrete = Concrete(edition=edition(code), fc=5000)
    steel = Steel(edition=edition(code), fy=66_000)
    share = 0.003 * steel.Es / (0.003 * steel.Es + steel.fy)
    assert concrete.beta1 * concrete.block_stress / steel.fy * share == printed("0.0293")
