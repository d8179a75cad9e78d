"""Shapes of bars and the lengths they are cut to, with the bends of ACI 318, 25.3.

Legs are measured out to out, as a bar is checked on site. The length cut is that of the
bar's centreline: straight parts plus arcs of radius R + db/2, where R is the inside radius of
the bend. A bend through 90 degrees between two legs so shortens their sum by
2(R + db) - pi/2 (R + db/2).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import Enum

from catalogs import Bar
from engine.development_rules import development_rules
from engine.editions import Edition
from engine.errors import OutOfRangeError

_ROUNDING = 1e-9
_HOOK_EXTENSION = 12.0  # 90-degree hook of a main bar, Table 25.3.1 [diameters]
_STIRRUP_EXTENSION = 6.0  # 135-degree hook of a stirrup, Table 25.3.2 [diameters]
_LEAST_STIRRUP_EXTENSION = {"us": 3.0, "si": 75.0}  # [in or mm]
_QUARTER_TURN = math.pi / 2.0
# A closed stirrup turns through three corners and two hooks of 135 degrees.
_STIRRUP_TURN = 3.0 * math.radians(90.0) + 2.0 * math.radians(135.0)


class Shape(Enum):
    """What a bar looks like, in plain words."""

    STRAIGHT = "straight"
    HOOK_ONE = "hook at one end"
    HOOK_BOTH = "hook at both ends"
    CLOSED = "closed stirrup"
    """A closed rectangle, also an inner loop; its two 135-degree hooks share a corner."""


@dataclass(frozen=True, slots=True, kw_only=True)
class BentBar:
    """A bar of a shape; build it with `straight`, `hooked` or `closed_stirrup`.

    Attributes
    ----------
    shape : Shape
        What it looks like.
    bar : Bar
        Its size.
    legs : tuple of float
        Out-to-out legs. Straight: the length. Hooked: the hook's leg, the main length and, at
        both ends, the other hook's leg. Closed: width and height. [in or mm]
    radius : float
        Inside radius R of its bends; 0 for a straight bar. [in or mm]
    extension : float
        Straight part beyond each 135-degree bend of a closed stirrup, else 0. [in or mm]
    """

    shape: Shape
    bar: Bar
    legs: tuple[float, ...]
    radius: float = 0.0
    extension: float = 0.0

    @property
    def cut_length(self) -> float:
        """Length of the centreline, which is the length to cut. [in or mm]

        With r = R + db/2: straight L; hooked sum of legs - n (2(R + db) - pi/2 r) for n hooks;
        closed 2(width + height) - 8(R + db) + (3 pi/2 + 2 * 3 pi/4) r + 2 extensions.
        """
        outside = self.radius + self.bar.diameter
        centreline = self.radius + self.bar.diameter / 2.0
        total = math.fsum(self.legs)
        if self.shape is Shape.CLOSED:
            sides = 2.0 * total - 8.0 * outside
            return sides + _STIRRUP_TURN * centreline + 2.0 * self.extension
        hooks = len(self.legs) - 1
        return total - hooks * (2.0 * outside - _QUARTER_TURN * centreline)


def hook_radius(edition: Edition, bar: Bar) -> float:
    """Least inside radius of the standard hook of a main bar.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    bar : Bar
        Size of the bar.

    Returns
    -------
    float
        3 db to No. 8 (25), 4 db to No. 11 (36), 5 db above, Table 25.3.1. [in or mm]

    Raises
    ------
    OutOfRangeError
        If the bar is in other units than the edition.
    """
    _require_units(edition, bar)
    if bar.diameter <= edition.largest_stirrup:
        return 3.0 * bar.diameter
    if bar.diameter <= development_rules(edition).largest_lapped:
        return 4.0 * bar.diameter
    return 5.0 * bar.diameter


def stirrup_radius(edition: Edition, bar: Bar) -> float:
    """Least inside radius of the bends of a stirrup.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    bar : Bar
        Size of the stirrup.

    Returns
    -------
    float
        2 db to No. 5 (16), 3 db to No. 8 (25), Table 25.3.2. [in or mm]

    Raises
    ------
    OutOfRangeError
        If the bar is in other units than the edition or thicker than the table goes.
    """
    _require_units(edition, bar)
    if bar.diameter > edition.largest_stirrup:
        msg = (
            f"got {bar.designation} of {bar.diameter:g}; allowed: up to "
            f"{edition.largest_stirrup:g}, No. 8 (25), the end of Table 25.3.2; "
            "hint: take a thinner stirrup with more legs"
        )
        raise OutOfRangeError(msg, what="stirrup")
    return (2.0 if bar.diameter <= edition.small_bar else 3.0) * bar.diameter


def stirrup_extension(edition: Edition, bar: Bar) -> float:
    """Straight part beyond a 135-degree bend of a stirrup.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    bar : Bar
        Size of the stirrup.

    Returns
    -------
    float
        6 db, at least 3 in or 75 mm, Table 25.3.2. [in or mm]

    Raises
    ------
    OutOfRangeError
        If the bar is in other units than the edition.
    """
    _require_units(edition, bar)
    return max(_STIRRUP_EXTENSION * bar.diameter, _LEAST_STIRRUP_EXTENSION[edition.units])


def hook_leg(edition: Edition, bar: Bar) -> float:
    """Out-to-out leg of the standard 90-degree hook of a main bar.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    bar : Bar
        Size of the bar.

    Returns
    -------
    float
        R + db + 12 db, Table 25.3.1. [in or mm]

    Raises
    ------
    OutOfRangeError
        If the bar is in other units than the edition.
    """
    return hook_radius(edition, bar) + (1.0 + _HOOK_EXTENSION) * bar.diameter


def straight(bar: Bar, length: float) -> BentBar:
    """Describe a straight bar.

    Parameters
    ----------
    bar : Bar
        Size of the bar.
    length : float
        Its length. [in or mm]

    Returns
    -------
    BentBar
        The bar.

    Raises
    ------
    OutOfRangeError
        If the length is not a finite number above 0.
    """
    if not 0.0 < length < math.inf:
        msg = f"got {length:g}; allowed: a finite number above 0"
        raise OutOfRangeError(msg, what="length")
    return BentBar(shape=Shape.STRAIGHT, bar=bar, legs=(length,))


def hooked(edition: Edition, bar: Bar, length: float, ends: int) -> BentBar:
    """Describe a bar with standard 90-degree hooks in one plane.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    bar : Bar
        Size of the bar.
    length : float
        From the outside of the hook to the other end, or to the outside of the other hook.
        [in or mm]
    ends : int
        Ends with a hook, 1 or 2.

    Returns
    -------
    BentBar
        The bar; its first leg is the hook.

    Raises
    ------
    OutOfRangeError
        If `ends` is another number, the length is too short for the bends, or the bar is in
        other units than the edition.
    """
    if ends not in (1, 2):
        msg = f"got {ends}; allowed: 1 or 2; hint: a bar without hooks is straight"
        raise OutOfRangeError(msg, what="ends")
    radius, leg = hook_radius(edition, bar), hook_leg(edition, bar)
    _require_room("length", length, ends * (radius + bar.diameter))
    return BentBar(
        shape=Shape.HOOK_ONE if ends == 1 else Shape.HOOK_BOTH,
        bar=bar,
        legs=(leg, length) if ends == 1 else (leg, length, leg),
        radius=radius,
    )


def closed_stirrup(edition: Edition, bar: Bar, width: float, height: float) -> BentBar:
    """Describe a closed stirrup whose two 135-degree hooks hold one corner bar.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    bar : Bar
        Size of the stirrup.
    width, height : float
        Out-to-out sizes. [in or mm]

    Returns
    -------
    BentBar
        The stirrup.

    Raises
    ------
    OutOfRangeError
        If a side is too short for its two bends, the bar is thicker than Table 25.3.2 goes or
        in other units than the edition.
    """
    radius = stirrup_radius(edition, bar)
    for what, side in (("width", width), ("height", height)):
        _require_room(what, side, 2.0 * (radius + bar.diameter))
    return BentBar(
        shape=Shape.CLOSED,
        bar=bar,
        legs=(width, height),
        radius=radius,
        extension=stirrup_extension(edition, bar),
    )


def _require_units(edition: Edition, bar: Bar) -> None:
    if bar.system != edition.units:
        msg = f"{bar.designation} has {bar.system} units; allowed: {edition.units}"
        raise OutOfRangeError(msg, what="bar")


def _require_room(what: str, length: float, least: float) -> None:
    """Refuse a leg that its bends alone would overrun."""
    if not least - _ROUNDING <= length < math.inf:
        msg = f"got {length:g}; allowed: from {least:g}, the room its bends take"
        raise OutOfRangeError(msg, what=what)
