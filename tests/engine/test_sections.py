"""A section's derived lengths and what it refuses."""

from __future__ import annotations

import math
from typing import Any

import pytest

from catalogs import bar_catalog
from engine import Outline, OutOfRangeError, Section, parse_layout
from tests.engine.builders import METRIC, inch_bar, si_section, us_layout, us_section


@pytest.mark.parametrize(("size", "times"), [("#3", 2), ("#4", 2), ("#5", 2), ("#6", 3), ("#8", 3)])
def test_bend_radius_in_inches(size: str, times: int) -> None:
    """Table 25.3.2: inside diameter of stirrup bends 4 ds to #5, 6 ds for #6 to #8."""
    section = us_section(stirrup=inch_bar(size))
    assert section.bend_radius == times * inch_bar(size).diameter


@pytest.mark.parametrize(("size", "times"), [("16", 2), ("19", 3)])
def test_bend_radius_in_millimetres(size: str, times: int) -> None:
    """Table 25.3.2, both sides of No. 16/19."""
    section = si_section(stirrup=METRIC.bar(size))
    assert section.bend_radius == times * METRIC.bar(size).diameter


def test_lengths_inside_the_stirrup() -> None:
    """1.5 in cover and a #4: bars start 2 in from each face."""
    section = us_section()
    assert section.bar_face == 2.0
    assert section.inner_width == 10.0
    assert section.stack_height == 20.0
    assert section.corner_offset(1.0) == 1.0  # the bend's radius
    assert section.corner_offset(2.257) == 2.257 / 2  # a #18 does not fit into it
    assert section.length_unit == "in"
    assert si_section().length_unit == "mm"


def test_bars_opposite_take_height() -> None:
    """2 #8 + 2 #6 over 2 #6: 1 + 0.75 in of bars and a gap inside each layer."""
    section = us_section(opposite=us_layout("2 #8 + 2 #6", "2 #6"))
    assert section.stack_height == 20.0 - (1.0 + 0.75 + 2 * 1.0)


@pytest.mark.parametrize(
    ("diameter", "changes", "gap"),
    [
        (0.5, {"aggregate": 0.5}, 1.0),  # 1 in
        (1.41, {}, 1.41),  # db
        (0.5, {"aggregate": 1.5}, 2.0),  # 4/3 of the aggregate
        (0.5, {"min_gap": 1.75}, 1.75),  # the job's
        (1.41, {"min_gap": 1.25}, 1.41),
    ],
)
def test_required_gap(diameter: float, changes: dict[str, Any], gap: float) -> None:
    """25.2.1: max(1 in, db, 4/3 aggregate), and the job's own where larger."""
    assert us_section(**changes).required_gap(diameter) == pytest.approx(gap, rel=1e-14)


def test_required_gap_in_millimetres() -> None:
    """25.2.1 of ACI 318M: 25 mm, db, 4/3 of 20 mm."""
    assert si_section(aggregate=10.0).required_gap(19.1) == 25.0
    assert si_section().required_gap(19.1) == pytest.approx(80 / 3, rel=1e-14)
    assert si_section().required_gap(35.8) == 35.8


def test_sign_of_the_moment() -> None:
    """Sagging compresses the top; demand has no sign."""
    hogging = us_section(Mu=-2e6, Ms=-1e6)
    assert not hogging.sagging
    assert us_section().sagging
    assert hogging.demand == 2e6


def test_opposite_face() -> None:
    """The same section bent the other way carries no bars opposite."""
    section = us_section(Ms=1e6, opposite=us_layout("2 #8"), count_opposite=True)
    other = section.opposite_face()
    assert (other.Mu, other.Ms, other.opposite, other.count_opposite) == (-3e6, None, None, False)
    assert other.outline is section.outline


@pytest.mark.parametrize(
    ("changes", "what", "message"),
    [
        ({"Mu": 0.0}, "Mu", r"^Mu: got 0; allowed: any other moment, \+ sagging, - hogging$"),
        (
            {"Ms": -1e6},
            "Ms",
            r"^Ms: its sign differs from Mu's; allowed: both sagging",
        ),
        ({"Ms": 0.0}, "Ms", "^Ms: its sign differs"),
        ({"count_opposite": True}, "count_opposite", "without opposite bars; hint: give opposite$"),
        (
            {"stirrup": inch_bar("#9")},
            "stirrup",
            r"#9; allowed: .*up to 1 in \(Table 25\.3\.2\)$",
        ),
        ({"layer_gap": 0.99}, "layer_gap", r"0\.99 in; allowed: at least 1 in \(25\.2\.2\)$"),
        (
            {"outline": Outline(web=4.0, depth=24.0)},
            "cover",
            "1.5 in .* stirrup #4 .* no room for bars in 4 x 24 in; hint: check width",
        ),
        ({"outline": Outline(web=14.0, depth=4.0)}, "cover", "no room for bars in 14 x 4 in; hint"),
        (
            {"opposite": us_layout(*["2 #8"] * 9), "layer_gap": 1.5},
            "opposite",
            "no height",
        ),
        ({"cover": -2.0}, "cover", "got -2; allowed: a finite value, not negative"),
        ({"cover": math.nan}, "cover", "got nan; allowed: a finite value"),
        ({"aggregate": -0.5}, "aggregate", "got -0.5"),
        ({"layer_gap": math.inf}, "layer_gap", "got inf"),
        ({"min_gap": math.nan}, "min_gap", "got nan"),
        ({"Mu": math.nan}, "Mu", "got nan; allowed: a finite value$"),
        ({"Ms": math.inf}, "Ms", "got inf"),
        ({"clear_span": -1.0}, "clear_span", "got -1"),
        ({"steel": si_section().steel}, "steel", "steel to ACI 318M-.* in concrete to ACI 318-"),
        ({"stirrup": si_section().stirrup}, "stirrup", "has si units; allowed: us"),
        ({"opposite": parse_layout(["2 13"], bar_catalog("astm-metric"))}, "opposite", "si units"),
    ],
)
def test_what_a_section_refuses(changes: dict[str, Any], what: str, message: str) -> None:
    """Signs, sizes and room; the parameter at fault is named."""
    with pytest.raises(OutOfRangeError, match=message) as caught:
        us_section(**changes)
    assert caught.value.what == what


def test_limits_are_taken() -> None:
    """A #8 stirrup and a layer gap of exactly 1 in are allowed."""
    section: Section = us_section(stirrup=inch_bar("#8"), layer_gap=1.0)
    assert section.bar_face == 2.5
