"""Outlines of rectangles, and area and first moment of the block inside them."""

from __future__ import annotations

import math
from typing import Any

import numpy as np
import pytest

from engine import Flange, Outline, OutOfRangeError, Profile
from tests.engine.builders import array

I_SHAPE = Outline(
    web=10.0,
    depth=30.0,
    top=Flange(width=40.0, thickness=4.0),
    bottom=Flange(width=20.0, thickness=6.0, left=10.0),
)
T_PROFILE = Profile(((40.0, 4.0), (10.0, 20.0)))


@pytest.mark.parametrize(
    ("outline", "strips", "area"),
    [
        (Outline(web=10.0, depth=30.0), ((10.0, 30.0),), 300.0),
        (
            Outline(web=10.0, depth=24.0, top=Flange(width=40.0, thickness=4.0)),
            ((40.0, 4.0), (10.0, 20.0)),
            360.0,
        ),
        (
            Outline(web=10.0, depth=24.0, bottom=Flange(width=40.0, thickness=4.0, left=0.0)),
            ((10.0, 20.0), (40.0, 4.0)),
            360.0,
        ),
        (I_SHAPE, ((40.0, 4.0), (10.0, 20.0), (20.0, 6.0)), 480.0),
    ],
)
def test_profile_counts_from_the_compression_face(
    outline: Outline, strips: tuple[tuple[float, float], ...], area: float
) -> None:
    """Sagging reads the outline from the top, hogging from the bottom."""
    assert outline.profile(sagging=True).strips == strips
    assert outline.profile(sagging=False).strips == strips[::-1]
    assert outline.area == area
    assert outline.profile(sagging=True).depth == outline.depth
    assert outline.profile(sagging=False).tension_width == strips[0][0]


def test_width_at_depths() -> None:
    """At an edge the strip below counts; beyond the section there is none."""
    depth = array(0.0, 3.9, 4.0, 23.9, 24.0, 99.0)
    np.testing.assert_array_equal(T_PROFILE.width_at(depth), [40.0, 40.0, 10.0, 10.0, 0.0, 0.0])


def test_area_and_first_moment_above() -> None:
    """By hand: 40 x 4 flange centred at 2, web of 10 below; ends held at the section's."""
    depth = array(-1.0, 0.0, 2.0, 4.0, 10.0, 24.0, 99.0)
    area = [0.0, 0.0, 80.0, 160.0, 220.0, 360.0, 360.0]
    full = 160.0 * 2 + 200.0 * 14
    moment = [0.0, 0.0, 80.0, 320.0, 320.0 + 60.0 * 7, full, full]
    np.testing.assert_allclose(T_PROFILE.area_above(depth), area, rtol=1e-14)
    np.testing.assert_allclose(T_PROFILE.moment_above(depth), moment, rtol=1e-14)


def test_depth_of_area() -> None:
    """The block's depth for its area; infinite where the section has less."""
    area = array(0.0, 80.0, 160.0, 220.0, 360.0, 361.0)
    np.testing.assert_allclose(
        T_PROFILE.depth_of_area(area), [0.0, 2.0, 4.0, 10.0, 24.0, np.inf], rtol=1e-14
    )


@pytest.mark.parametrize(("where", "name"), [("top", "flange"), ("bottom", "bottom_flange")])
def test_flange_narrower_than_web(where: str, name: str) -> None:
    """A flange includes its web."""
    flanges = {where: Flange(width=8.0, thickness=4.0)}
    with pytest.raises(
        OutOfRangeError, match=r"width 8; allowed: at least the web's 10$"
    ) as caught:
        Outline(web=10.0, depth=24.0, **flanges)
    assert caught.value.what == name


@pytest.mark.parametrize("left", [-0.1, 30.1])
def test_overhang_beyond_the_flange(left: float) -> None:
    """The overhang on the left is part of what the flange has beside the web."""
    with pytest.raises(
        OutOfRangeError, match=f"left overhang {left:g}; allowed: 0 to 30$"
    ) as caught:
        Outline(web=10.0, depth=24.0, top=Flange(width=40.0, thickness=4.0, left=left))
    assert caught.value.what == "flange"


@pytest.mark.parametrize("left", [None, 0.0, 12.5, 30.0])
def test_overhang_changes_nothing_but_the_drawing(left: float | None) -> None:
    """Bending about the horizontal axis sees widths only."""
    outline = Outline(web=10.0, depth=24.0, top=Flange(width=40.0, thickness=4.0, left=left))
    assert outline.profile(sagging=True) == T_PROFILE


@pytest.mark.parametrize("depth", [10.0, 9.0])
def test_flanges_that_leave_no_web(depth: float) -> None:
    """Flanges as thick as the beam are no beam of this kind."""
    with pytest.raises(
        OutOfRangeError, match=f"thickness 10 leaves no web in a depth of {depth:g}$"
    ) as caught:
        Outline(
            web=10.0,
            depth=depth,
            top=Flange(width=40.0, thickness=4.0),
            bottom=Flange(width=20.0, thickness=6.0),
        )
    assert caught.value.what == "flange"


def test_bottom_flange_that_leaves_no_web() -> None:
    """The flange that is there is the one named."""
    with pytest.raises(
        OutOfRangeError, match=r"thickness 24 leaves no web in a depth of 24$"
    ) as caught:
        Outline(web=10.0, depth=24.0, bottom=Flange(width=20.0, thickness=24.0))
    assert caught.value.what == "bottom_flange"


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"web": 0.0}, "^web: web 0; allowed: a finite length above 0"),
        ({"web": math.nan}, "^web: web nan"),
        ({"depth": math.inf}, "^depth: depth inf"),
        ({"top": Flange(width=math.nan, thickness=4.0)}, "^flange: width nan"),
        ({"bottom": Flange(width=40.0, thickness=0.0)}, "^bottom_flange: thickness 0"),
        (
            {"top": Flange(width=40.0, thickness=4.0, left=31.0)},
            "left overhang 31; allowed: 0",
        ),
    ],
)
def test_lengths_that_are_none(changes: dict[str, Any], message: str) -> None:
    """Widths, depths and thicknesses are finite and above zero, overhangs within the flange."""
    with pytest.raises(OutOfRangeError, match=message):
        Outline(**({"web": 10.0, "depth": 24.0} | changes))


def test_full_overhang_on_one_side() -> None:
    """Rounding of width minus web does not refuse an overhang that takes all of it."""
    flange = Flange(width=9.8 + 3.53, thickness=4.0, left=3.53)
    assert Outline(web=9.8, depth=30.0, top=flange).top == flange
