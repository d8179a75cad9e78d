"""Bent bars: the figures of 25.3 against detailing tables, lengths against traced centrelines."""

from __future__ import annotations

import math

import numpy as np
import pytest

from catalogs import Bar
from engine import OutOfRangeError, edition
from engine.beams.bending import (
    BentBar,
    Shape,
    closed_stirrup,
    hook_leg,
    hook_radius,
    hooked,
    stirrup_extension,
    stirrup_radius,
    straight,
)
from tests.engine.builders import CODES, INCH, METRIC, us_section

US = [code for code in CODES if "318M" not in code]
SI = [code for code in CODES if "318M" in code]


def sizes(code: str) -> tuple[Bar, ...]:
    """Return the bars in an edition's units."""
    return (METRIC if "318M" in code else INCH).bars


class Bender:
    """Traces a centreline point by point, as a bending machine would feed the bar."""

    STEP_ANGLE = math.radians(0.05)

    def __init__(self, bar: Bar, radius: float) -> None:
        self.radius = radius + bar.diameter / 2.0
        self.points = [np.zeros(2)]
        self.heading = 0.0

    def feed(self, length: float) -> None:
        direction = np.array([math.cos(self.heading), math.sin(self.heading)])
        self.points.append(self.points[-1] + length * direction)

    def bend(self, degrees: float) -> None:
        steps = round(math.radians(degrees) / self.STEP_ANGLE)
        turn = math.radians(degrees) / steps
        for _ in range(steps):
            self.heading += turn / 2.0
            self.feed(2.0 * self.radius * math.sin(turn / 2.0))
            self.heading += turn / 2.0

    @property
    def length(self) -> float:
        return float(np.linalg.norm(np.diff(np.array(self.points), axis=0), axis=1).sum())

    def extent(self, bar: Bar) -> tuple[float, float]:
        """Return the out-to-out sizes in x and y."""
        points = np.array(self.points)
        spread = points.max(axis=0) - points.min(axis=0) + bar.diameter
        return float(spread[0]), float(spread[1])


# ACI 315-99, table of standard hooks: finished inside bend diameter D and A or G of the
# 90-degree hook, the latter to the inch (from memory). [in]
PUBLISHED_HOOKS = {
    "#3": (2.25, 6),
    "#4": (3.0, 8),
    "#5": (3.75, 10),
    "#6": (4.5, 12),
    "#7": (5.25, 14),
    "#8": (6.0, 16),
    "#9": (9.5, 19),
    "#10": (10.75, 22),
    "#11": (12.0, 24),
    "#14": (18.25, 31),
    "#18": (24.0, 41),
}


@pytest.mark.parametrize("code", US)
@pytest.mark.parametrize("designation", PUBLISHED_HOOKS)
def test_hook_leg_is_that_of_the_detailing_table(code: str, designation: str) -> None:
    """Legs of 90-degree hooks are the published ones."""
    bar = INCH.bar(designation)
    diameter, published = PUBLISHED_HOOKS[designation]
    # The table bends the large sizes a little wider than the least diameter of the code.
    wider = diameter / 2.0 - hook_radius(edition(code), bar)
    assert -1e-9 <= wider < 0.75
    assert hook_leg(edition(code), bar) + wider == pytest.approx(published, abs=0.5)


# ACI 315-99, table of stirrup and tie hooks: A or G of the 135-degree hook, the length that it
# adds to the out-to-out sides, rounded by the table to 1/4 or 1/2 in (from memory). [in]
PUBLISHED_STIRRUP_HOOKS = {"#3": 4.25, "#4": 4.5, "#5": 5.5, "#6": 8.0, "#7": 9.0, "#8": 10.5}


@pytest.mark.parametrize("designation", PUBLISHED_STIRRUP_HOOKS)
def test_stirrup_hook_adds_the_length_of_the_detailing_table(designation: str) -> None:
    """A stirrup's hooks add the published length to its sides."""
    code, bar = edition("ACI 318-14"), INCH.bar(designation)
    stirrup = closed_stirrup(code, bar, 12.0, 20.0)
    # Of the sides' sum each of the three plain corners takes what a hooked bar's bend takes.
    outside, centre = stirrup.radius + bar.diameter, stirrup.radius + bar.diameter / 2.0
    corners = 3.0 * (2.0 * outside - math.pi / 2.0 * centre)
    added = (stirrup.cut_length - (2.0 * (12.0 + 20.0) - corners)) / 2.0
    assert added == pytest.approx(PUBLISHED_STIRRUP_HOOKS[designation], abs=0.35)


# ACI 318-14 and -19, Table 25.3.1 and 25.3.2: inside diameter in bar diameters, size by size.
MAIN_BENDS = [6, 6, 6, 6, 6, 6, 8, 8, 8, 10, 10]
STIRRUP_BENDS = [4, 4, 4, 6, 6, 6]


@pytest.mark.parametrize("code", CODES)
def test_bend_diameters_follow_the_tables(code: str) -> None:
    """Bends of bars and stirrups have the diameters of the code, size by size."""
    chosen, bars = edition(code), sizes(code)
    for bar, times in zip(bars, MAIN_BENDS, strict=True):
        assert 2.0 * hook_radius(chosen, bar) == pytest.approx(times * bar.diameter)
        assert hook_leg(chosen, bar) == pytest.approx((times / 2 + 13.0) * bar.diameter)
    for bar, times in zip(bars, STIRRUP_BENDS, strict=False):
        assert 2.0 * stirrup_radius(chosen, bar) == pytest.approx(times * bar.diameter)
    for bar in bars[len(STIRRUP_BENDS) :]:
        with pytest.raises(OutOfRangeError, match=r"stirrup: got .* allowed: up to .* hint"):
            stirrup_radius(chosen, bar)


def test_the_stirrup_bend_is_that_of_the_section() -> None:
    """The section that places bars in the corner bends stirrups alike."""
    for bar in INCH.bars[:6]:
        section = us_section(stirrup=bar)
        assert section.bend_radius == stirrup_radius(edition("ACI 318-19"), bar)


@pytest.mark.parametrize(
    ("code", "designation", "length"),
    [
        ("ACI 318-19", "#3", 3.0),
        ("ACI 318-19", "#4", 3.0),
        ("ACI 318-19", "#5", 3.75),
        ("ACI 318-14", "#8", 6.0),
        ("ACI 318M-19", "10", 75.0),
        ("ACI 318M-14", "13", 76.2),
        ("ACI 318M-14", "25", 152.4),
    ],
)
def test_stirrup_extension_is_six_diameters_or_three_inches(
    code: str, designation: str, length: float
) -> None:
    """The tail of a stirrup is 6 db or 3 in, the larger."""
    catalogue = METRIC if "318M" in code else INCH
    assert stirrup_extension(edition(code), catalogue.bar(designation)) == pytest.approx(length)


@pytest.mark.parametrize("code", CODES)
@pytest.mark.parametrize("ends", [1, 2])
def test_hooked_bars_are_as_long_as_their_traced_centreline(code: str, ends: int) -> None:
    """A bending machine that follows the centreline uses the cut length of a hooked bar."""
    chosen = edition(code)
    for bar in sizes(code):
        length = 70.0 * bar.diameter
        bent = hooked(chosen, bar, length, ends)
        assert bent.shape is (Shape.HOOK_ONE if ends == 1 else Shape.HOOK_BOTH)
        machine = Bender(bar, hook_radius(chosen, bar))
        taken = hook_radius(chosen, bar) + bar.diameter
        machine.feed(12.0 * bar.diameter)
        machine.bend(90.0)
        machine.feed(length - ends * taken)
        if ends == 2:
            machine.bend(90.0)
            machine.feed(12.0 * bar.diameter)
        assert bent.cut_length == pytest.approx(machine.length, rel=1e-6)
        # The trace is one bar diameter longer over a cut end than over the outside of a bend.
        across, along = machine.extent(bar)
        cut_end = bar.diameter / 2.0
        assert across - cut_end == pytest.approx(bent.legs[0])
        assert along - (cut_end if ends == 1 else 0.0) == pytest.approx(bent.legs[1])
        assert len(bent.legs) == ends + 1
        assert bent.legs[0] == bent.legs[-1] or ends == 1


@pytest.mark.parametrize("code", CODES)
def test_closed_stirrups_are_as_long_as_their_traced_centreline(code: str) -> None:
    """A bending machine that follows the centreline uses the cut length of a stirrup."""
    chosen = edition(code)
    for bar in sizes(code)[:6]:
        width, height = 25.0 * bar.diameter, 45.0 * bar.diameter
        bent = closed_stirrup(chosen, bar, width, height)
        assert (bent.shape, bent.legs) == (Shape.CLOSED, (width, height))
        machine = Bender(bar, stirrup_radius(chosen, bar))
        taken = stirrup_radius(chosen, bar) + bar.diameter
        machine.feed(stirrup_extension(chosen, bar))
        machine.bend(135.0)
        for number, side in enumerate((width, height, width, height)):
            machine.feed(side - 2.0 * taken)
            machine.bend(90.0 if number < 3 else 135.0)
        machine.feed(stirrup_extension(chosen, bar))
        assert bent.cut_length == pytest.approx(machine.length, rel=1e-6)
        # Turned so that a side is level, the hooks inside: the trace spans the stirrup.
        turn = -math.radians(135.0)
        rotation = np.array([[math.cos(turn), -math.sin(turn)], [math.sin(turn), math.cos(turn)]])
        machine.points = [rotation @ point for point in machine.points]
        assert machine.extent(bar) == pytest.approx((width, height))


def test_a_stirrup_by_hand() -> None:
    """The cut length of a stirrup is that of a sum by hand."""
    # #4, 11 x 21 in: R = 1, r = 1.25, sides 64 - 8 * 1.5 = 52, arcs 3 pi * 1.25 = 11.781,
    # extensions 2 * 3 in.
    stirrup = closed_stirrup(edition("ACI 318-19"), INCH.bar("#4"), 11.0, 21.0)
    assert stirrup.cut_length == pytest.approx(69.781, abs=5e-4)


def test_a_hooked_bar_by_hand() -> None:
    """The cut length of a hooked bar is that of a sum by hand."""
    # #8, 240 in over one hook: 16 + 240 - 2 * 4 + pi/2 * 3.5 = 253.498.
    bar = hooked(edition("ACI 318-19"), INCH.bar("#8"), 240.0, 1)
    assert bar.cut_length == pytest.approx(253.498, abs=5e-4)


def test_a_straight_bar_is_cut_to_its_length() -> None:
    """A straight bar has one leg, its length, and no bend."""
    bar = straight(INCH.bar("#9"), 267.0)
    assert bar == BentBar(shape=Shape.STRAIGHT, bar=INCH.bar("#9"), legs=(267.0,))
    assert bar.cut_length == 267.0
    assert (bar.radius, bar.extension) == (0.0, 0.0)


def test_shapes_have_plain_names() -> None:
    """Shapes are called as people call them."""
    assert [shape.value for shape in Shape] == [
        "straight",
        "hook at one end",
        "hook at both ends",
        "closed stirrup",
    ]


@pytest.mark.parametrize("length", [0.0, -1.0, math.nan, math.inf])
def test_straight_bars_need_a_length(length: float) -> None:
    """What is no length is refused."""
    with pytest.raises(OutOfRangeError, match="length: got"):
        straight(INCH.bar("#9"), length)


@pytest.mark.parametrize("ends", [-1, 0, 3])
def test_a_bar_has_two_ends(ends: int) -> None:
    """Hooks at any other number of ends than 1 or 2 are refused."""
    with pytest.raises(OutOfRangeError, match=r"ends: got .* allowed: 1 or 2"):
        hooked(edition("ACI 318-19"), INCH.bar("#9"), 100.0, ends)


def test_bends_need_room() -> None:
    """Sides shorter than their bends are refused, those just as long are not."""
    chosen, bar = edition("ACI 318-19"), INCH.bar("#8")
    assert hooked(chosen, bar, 8.0, 2).cut_length > 24.0
    with pytest.raises(OutOfRangeError, match=r"length: got 7\.9; allowed: from 8"):
        hooked(chosen, bar, 7.9, 2)
    tie = INCH.bar("#4")
    assert closed_stirrup(chosen, tie, 3.0, 3.0).legs == (3.0, 3.0)
    with pytest.raises(OutOfRangeError, match=r"width: got 2\.9; allowed: from 3"):
        closed_stirrup(chosen, tie, 2.9, 20.0)
    for height in (2.9, math.nan, math.inf):
        with pytest.raises(OutOfRangeError, match="height: got"):
            closed_stirrup(chosen, tie, 12.0, height)


@pytest.mark.parametrize("code", CODES)
def test_bars_are_in_the_units_of_the_edition(code: str) -> None:
    """Bars of the other units are refused by every function."""
    chosen = edition(code)
    other = (INCH if code in SI else METRIC).bars[0]
    calls = (
        lambda: hook_radius(chosen, other),
        lambda: stirrup_radius(chosen, other),
        lambda: stirrup_extension(chosen, other),
        lambda: hook_leg(chosen, other),
        lambda: hooked(chosen, other, 1000.0, 1),
        lambda: closed_stirrup(chosen, other, 1000.0, 1000.0),
    )
    for call in calls:
        with pytest.raises(OutOfRangeError, match=r"bar: .* units; allowed"):
            call()
