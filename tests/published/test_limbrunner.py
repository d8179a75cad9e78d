"""Limbrunner & Aghayere, Reinforced Concrete Design, problem 3-9, and a posted solution of it.

The solution is of a university homework set (FIU, CES 4720, 2009).
"""

from __future__ import annotations

import pytest

from engine import Slab, effective_flange_width
from tests.published.printed import printed
from tests.published.solving import US, solve, tee

SECTION = tee(60, 4, 12, 25)
ROWS = ((6.24, 23.5), (4.68, 27.0))
"""Seven #11 in rows of 2, 2 and 3: the upper four lumped, so that the centroid is at 25 in."""


@pytest.mark.parametrize("code", US)
def test_moment_of_seven_no_11(code: str) -> None:
    """Mn = 1246 and phi Mn = 1121 kip*ft: flange 60 x 4 in, web 12 in, 3000 psi, Grade 60."""
    found = solve(SECTION, *ROWS, fc=3000, fy=60_000, code=code)
    assert found.Mn == printed("1246")
    # The solution takes 0.9 of 1246, 1121.4, and cuts it off; exact is 1121.45.
    assert found.phi_Mn == printed("1121")


@pytest.mark.parametrize("code", US)
def test_block_of_the_posted_solution_is_wrong(code: str) -> None:
    """The posted a = 4.27 in, c = 5.03 in and eps_t = 0.0174 cannot be right.

    It calls a = 4.27 in less than the flange's 4 in and treats the section as a rectangle. In the
    flange 612 kip of the 655.2 are carried, so the block is 43.2/(0.85 x 3 x 12) = 1.41 in deep in
    the web; its moment is the same within 0.1 % since that part is small.
    """
    found = solve(SECTION, *ROWS, fc=3000, fy=60_000, code=code)
    assert found.a == pytest.approx(4 + (10.92 * 60 - 0.85 * 3 * 60 * 4) / (0.85 * 3 * 12))
    assert found.a == printed("5.41")
    assert found.c == printed("6.37")
    assert found.eps_t == printed("0.0097")
    rectangle_block = 10.92 * 60 / (0.85 * 3 * 60)
    assert rectangle_block == printed("4.28")
    assert rectangle_block > 4


def test_effective_width() -> None:
    """Be = 60 in is a quarter of the 20 ft span, the rule of ACI 318-11 and before.

    Table 6.3.2.1 of ACI 318-14 and -19 takes an eighth of the clear span beyond each face of the
    web instead: with the same 20 ft, 12 + 2 x 30 = 72 in.
    """
    slab = Slab(thickness=4, clear_left=84, clear_right=84, span=240)
    assert min(240 / 4, 16 * 4 + 12, 96) == 60
    assert effective_flange_width(slab, 12) == pytest.approx(72)
