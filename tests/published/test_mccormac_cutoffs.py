"""Theoretical cut-off points: McCormac & Brown, Design of Reinforced Concrete, 9th ed., Ex 7.1.

The rules of the example, ACI 318-11, passed unchanged into 9.7.3 of ACI 318-14 and -19. A beam
of 30 ft with wu = 5.5 kip/ft has six No. 9 bars at d = 27 in in a width of 18 in; f'c is 3000 psi
and fy 60 ksi. Printed are the strengths with four and with two bars, and the lengths of the bars
that stop there between their theoretical points.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from catalogs import bar_catalog
from engine import Batch, Outline, Section, assess
from engine.beams.cutoffs import extension, last_above, reach
from tests.published.beams import beam
from tests.published.solving import US

FOOT, KIP_FT = 12.0, 12_000.0
SPAN, LOAD = 30.0, 5.5  # [ft], [kip/ft]
PRINTED = ((4, 439.0, 16.16), (2, 231.0, 23.75))  # bars, phi Mn [kip ft], length [ft]
BARS = bar_catalog("astm-inch")


def section(code: str) -> Section:
    """The example's section: cover and stirrup put one layer of No. 9 bars at d = 27 in."""
    depth = 27.0 + BARS.bar("#9").diameter / 2 + BARS.bar("#4").diameter + 1.5
    outline = Outline(web=18.0, depth=depth)
    plain = beam(outline, code=code, fc=3000, fy=60_000, stirrup="#4", cover=1.5)
    return replace(plain, Mu=LOAD * SPAN**2 / 8.0 * KIP_FT)


def strength(code: str, count: int) -> float:
    """Phi Mn of some No. 9 bars. [lbf*in]"""
    batch = Batch(bars=(BARS.bar("#9"),), counts=np.full((1, 1, 1), count))
    return float(assess(section(code), batch).phi_Mn[0])


def half_span() -> tuple[np.ndarray, np.ndarray]:
    """Distances from midspan [in] and moments there [lbf*in]."""
    u = np.linspace(0.0, SPAN / 2.0, 3001)
    return u * FOOT, LOAD * (SPAN**2 / 8.0 - u**2 / 2.0) * KIP_FT


@pytest.mark.parametrize("code", US)
@pytest.mark.parametrize(("count", "moment"), [row[:2] for row in PRINTED])
def test_strength_of_the_bars_that_stay_is_the_printed_one(
    code: str, count: int, moment: float
) -> None:
    """Strength phi Mn of the bars that stay is the printed moment."""
    assert strength(code, count) / KIP_FT == pytest.approx(moment, abs=0.5)


@pytest.mark.parametrize(("moment", "length"), [row[1:] for row in PRINTED])
def test_theoretical_points_lie_where_printed(moment: float, length: float) -> None:
    """Theoretical cut-off points lie where the example prints them."""
    u, demand = half_span()
    point = last_above(u, demand, moment * KIP_FT)
    # Printed to 0.01 ft, from a moment printed to 1 kip ft: that moves the point by 0.01 ft.
    assert 2.0 * point / FOOT == pytest.approx(length, abs=0.02)


@pytest.mark.parametrize("code", US)
def test_bars_run_the_extension_further(code: str) -> None:
    """Bars run past the theoretical point by the larger of d and 12 db."""
    # 9.7.3.3: d = 27 in governs over 12 db = 13.5 in.
    bar = BARS.bar("#9")
    assert extension(27.0, bar.diameter) == 27.0
    u, demand = half_span()
    end = reach(
        u,
        demand,
        strong=strength(code, 6),
        weak=strength(code, 4),
        beyond=extension(27.0, bar.diameter),
        development=0.0,
    )
    assert end == pytest.approx(last_above(u, demand, strength(code, 4)) + 27.0)
