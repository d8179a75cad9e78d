"""Terms of the practical score against figures worked out by hand."""

from __future__ import annotations

from dataclasses import replace

import pytest

from engine import place
from optimizer.problem import Ranking
from optimizer.scoring import TERMS, Score, score, steel_per_bar
from tests.engine.builders import METRIC, inch_bar, si_layout, si_section, us_layout, us_section

US = Ranking(
    by="practical",
    keep=10,
    per_pattern=3,
    labour_share=0.8,
    per_bar=0.10,
    per_extra_layer=0.60,
    per_extra_size=0.40,
    tight_gap=0.10,
    preferred_gap=1.5,
    work_limit=60.0,
)
SI = replace(
    US,
    per_bar=0.1488,
    per_extra_layer=0.8928,
    per_extra_size=0.5952,
    tight_gap=0.1488,
    preferred_gap=38.0,
)


@pytest.mark.parametrize(
    ("size", "hours"), [("#3", 50), ("#4", 50), ("#5", 35), ("#6", 35), ("#7", 35), ("#8", 30)]
)
def test_labour_of_inch_bars(size: str, hours: int) -> None:
    """Steel with k = 1 is mass times half of 1 + r, r = hours per tonne over those of large bars.

    Published hours for beams, straight and bent bars: 50, 35 and 30 h/t at 10-12, 16-20 and
    25 mm and above (quantity surveyors' table of fixing hours, Malaysia, 2024). The table rounds
    the ratios to two decimals.
    """
    bar = inch_bar(size)
    ratio = 2 * steel_per_bar(bar, replace(US, labour_share=1.0)) / bar.mass - 1
    assert ratio == pytest.approx(hours / 30, abs=0.005)


@pytest.mark.parametrize(("size", "ratio"), [("10", 1.67), ("16", 1.17), ("25", 1.00)])
def test_steel_of_metric_bars(size: str, ratio: float) -> None:
    """The mass times (1 + 0.8 r)/1.8 with the tabulated ratios at 10, 16 and 25 mm."""
    bar = METRIC.bar(size)
    expected = bar.mass * (1 + 0.8 * ratio) / 1.8
    assert steel_per_bar(bar, SI) == pytest.approx(expected, rel=1e-12)


def test_no_labour_leaves_the_mass() -> None:
    """Labour of k = 0 makes the term `steel` the mass."""
    for name in ("#4", "#6", "#11"):
        bar = inch_bar(name)
        assert steel_per_bar(bar, replace(US, labour_share=0.0)) == bar.mass


def test_terms_of_two_layers_and_two_sizes() -> None:
    """4 #8 / 2 #5 in a 14 in web with #4 stirrups, preferred gap 4 in.

    Corner centres 1.5 + 0.5 + 1.0 in from the side (bend radius 2 x 0.5), so 8 in apart: layer 1
    has gaps of (8 - 3)/3 = 5/3 in, layer 2 of 8 - 0.625 = 7.375 in.
    """
    layout = us_layout("4 #8", "2 #5")
    section = us_section()
    terms = score(layout, place(section, layout), replace(US, preferred_gap=4.0))
    assert terms.steel == pytest.approx(4 * 2.670 + 2 * 1.043 * (1 + 0.8 * 1.17) / 1.8, rel=1e-12)
    assert terms.bars == pytest.approx(0.6, rel=1e-12)
    assert terms.layers == pytest.approx(0.6, rel=1e-12)
    assert terms.sizes == pytest.approx(0.4, rel=1e-12)
    assert terms.tight == pytest.approx(0.10 * 4 * (1 - (5 / 3) / 4), rel=1e-9)
    whole = terms.steel + 0.6 + 0.6 + 0.4 + terms.tight
    assert terms.total == pytest.approx(whole, rel=1e-12)


def test_tight_counts_every_layer_below_the_preferred_gap() -> None:
    """6 #8 / 4 #8: gaps of (8 - 5)/5 = 0.6 in below; above, lines 1, 3, 4, 6, so one gap of 0.6 in.

    Lines are 1.6 in apart: of the symmetric choices of 4 out of 6 each has two neighbours.
    """
    layout = us_layout("6 #8", "4 #8")
    terms = score(layout, place(us_section(), layout), US)
    assert terms.tight == pytest.approx(0.10 * (6 + 4) * (1 - 0.6 / 1.5), rel=1e-9)


def test_one_layer_of_one_size_without_tightness() -> None:
    """Nothing is charged for layers, sizes and gaps that are not there."""
    layout = us_layout("3 #9")
    terms = score(layout, place(us_section(), layout), US)
    assert (terms.steel, terms.bars) == pytest.approx((10.2, 0.3))
    assert (terms.layers, terms.sizes, terms.tight) == (0.0, 0.0, 0.0)


def test_terms_in_kg_per_m() -> None:
    """3 No. 25 / 2 No. 19 in a 350 mm web with No. 13 stirrups (2 x 12.7 mm bends).

    Corner centres 40 + 12.7 + 25.4 mm from the side: 193.8 mm apart, gaps of (193.8 - 50.8)/2.
    """
    layout = si_layout("3 25", "2 19")
    terms = score(layout, place(si_section(), layout), replace(SI, preferred_gap=80.0))
    gap = (350 - 2 * (40 + 12.7 + 25.4) - 2 * 25.4) / 2
    assert terms.steel == pytest.approx(3 * 3.973 + 2 * 2.235 * (1 + 0.8 * 1.17) / 1.8, rel=1e-12)
    assert terms.bars == pytest.approx(5 * 0.1488, rel=1e-12)
    assert terms.layers == pytest.approx(0.8928, rel=1e-12)
    assert terms.sizes == pytest.approx(0.5952, rel=1e-12)
    assert terms.tight == pytest.approx(0.1488 * 3 * (1 - gap / 80), rel=1e-9)


def test_terms_have_the_names_that_are_shown() -> None:
    """Each name is a field, and the total is their sum."""
    values = Score(steel=1.0, bars=2.0, layers=4.0, sizes=8.0, tight=16.0)
    assert [getattr(values, term) for term in TERMS] == [1.0, 2.0, 4.0, 8.0, 16.0]
    assert values.total == 31.0
