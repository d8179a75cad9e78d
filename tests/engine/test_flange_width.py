"""Effective flange width, Table 6.3.2.1 of ACI 318-14 and -19."""

from __future__ import annotations

import math

import pytest

from engine import OutOfRangeError, Slab, effective_flange_width
from engine.flange_width import overhang


def slab(**changes: float) -> Slab:
    """Return a 5 in slab, 9 ft clear on both sides of a beam of 27 ft, with changes."""
    figures = {"thickness": 5.0, "clear_left": 108.0, "clear_right": 108.0, "span": 324.0}
    return Slab(**(figures | changes))


@pytest.mark.parametrize(
    ("changes", "expected"),
    [
        ({}, 40.0),  # 8 h
        ({"clear_left": 60.0}, 30.0),  # sw/2
        ({"span": 200.0}, 25.0),  # ln/8
    ],
)
def test_overhang_of_two_sided_flange(changes: dict[str, float], expected: float) -> None:
    """Each side: least of 8 h, sw/2 and ln/8."""
    given = slab(**changes)
    assert overhang(given, given.clear_left, both_sides=True) == expected


@pytest.mark.parametrize(
    ("changes", "expected"),
    [
        ({"span": 400.0}, 30.0),  # 6 h
        ({"clear_left": 40.0}, 20.0),  # sw/2
        ({}, 27.0),  # ln/12
    ],
)
def test_overhang_of_one_sided_flange(changes: dict[str, float], expected: float) -> None:
    """One side only: least of 6 h, sw/2 and ln/12."""
    given = slab(**changes)
    assert overhang(given, given.clear_left, both_sides=False) == expected


def test_width_of_t_section() -> None:
    """14 in web, 8 h = 40 in on the left and half of 60 in on the right."""
    assert effective_flange_width(slab(clear_right=60.0), 14.0) == 14.0 + 40.0 + 30.0


@pytest.mark.parametrize("side", ["clear_left", "clear_right"])
def test_width_of_l_section(side: str) -> None:
    """A slab on one side follows the one-sided row: ln/12 = 27 in."""
    assert effective_flange_width(slab(**{side: 0.0}), 14.0) == 14.0 + 27.0


def test_no_slab_at_all() -> None:
    """A slab that reaches nowhere is an error."""
    with pytest.raises(
        OutOfRangeError,
        match=r"no clear distance on either side; .* clear_left, clear_right or both",
    ) as caught:
        effective_flange_width(slab(clear_left=0.0, clear_right=0.0), 14.0)
    assert caught.value.what == "slab"


@pytest.mark.parametrize(
    ("name", "value"), [("thickness", 0.0), ("span", -324.0), ("span", math.nan)]
)
def test_slab_without_a_size(name: str, value: float) -> None:
    """A negative span would make the flange narrower than the web."""
    sizes = {"thickness": 5.0, "clear_left": 108.0, "clear_right": 0.0, "span": 324.0}
    with pytest.raises(OutOfRangeError, match=f"slab: {name} .*; allowed: a finite length above 0"):
        Slab(**(sizes | {name: value}))
