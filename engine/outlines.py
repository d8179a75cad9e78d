"""Section outlines built of rectangles, and the compression block inside them.

An `Outline` is what the drawing shows: web, depth, and a flange at the top, the bottom or
both (rectangle, T, L, inverted T, I). Bending about the horizontal axis needs its width at
each depth only, so an `Outline` is turned into a `Profile`: strips counted from the
compression face.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from engine.errors import OutOfRangeError

FloatArray = NDArray[np.float64]


def _positive(value: float, name: str, what: str) -> None:
    if not (math.isfinite(value) and value > 0.0):
        msg = f"{name} {value:g}; allowed: a finite length above 0"
        raise OutOfRangeError(msg, what=what)


@dataclass(frozen=True, slots=True, kw_only=True)
class Flange:
    """A flange at the top or the bottom of a web.

    Attributes
    ----------
    width : float
        Whole width, web included. [in or mm]
    thickness : float
        Thickness. [in or mm]
    left : float or None
        Overhang to the left of the web; None splits the overhangs evenly. [in or mm]
    """

    width: float
    thickness: float
    left: float | None = None


@lru_cache(maxsize=256)
def _edges(
    strips: tuple[tuple[float, float], ...],
) -> tuple[FloatArray, FloatArray, FloatArray, FloatArray]:
    """Strip widths, and depth, area and first moment above each strip's upper edge."""
    widths = np.array([width for width, _ in strips])
    heights = np.array([height for _, height in strips])
    top = np.concatenate(([0.0], np.cumsum(heights)))
    area = np.concatenate(([0.0], np.cumsum(widths * heights)))
    moment = np.concatenate(([0.0], np.cumsum(widths * heights * (top[:-1] + heights / 2))))
    return widths, top, area, moment


@dataclass(frozen=True, slots=True)
class Profile:
    """Widths of a section from the compression face to the tension face.

    Attributes
    ----------
    strips : tuple of (float, float)
        Width and thickness of each strip, compression face first. [in or mm]
    """

    strips: tuple[tuple[float, float], ...]

    @property
    def depth(self) -> float:
        """Overall depth h. [in or mm]"""
        return sum(thickness for _, thickness in self.strips)

    @property
    def tension_width(self) -> float:
        """Width at the tension face. [in or mm]"""
        return self.strips[-1][0]

    def width_at(self, depth: FloatArray) -> FloatArray:
        """Width at given depths, zero beyond the section.

        Parameters
        ----------
        depth : ndarray
            Distance from the compression face. [in or mm]

        Returns
        -------
        ndarray
            Width. [in or mm]
        """
        widths, top, _, _ = _edges(self.strips)
        strip = np.searchsorted(top[1:], depth, side="right")
        return np.append(widths, 0.0)[strip]

    def area_above(self, depth: FloatArray) -> FloatArray:
        """Area between the compression face and given depths.

        Parameters
        ----------
        depth : ndarray
            Distance from the compression face; beyond the section counts as its edge. [in or mm]

        Returns
        -------
        ndarray
            Area. [in^2 or mm^2]
        """
        widths, top, area, _ = _edges(self.strips)
        depth = np.clip(depth, 0.0, top[-1])
        strip = np.minimum(np.searchsorted(top[1:], depth), len(widths) - 1)
        return area[strip] + widths[strip] * (depth - top[strip])

    def moment_above(self, depth: FloatArray) -> FloatArray:
        """First moment, about the compression face, of the area above given depths.

        Parameters
        ----------
        depth : ndarray
            Distance from the compression face; beyond the section counts as its edge. [in or mm]

        Returns
        -------
        ndarray
            First moment of area. [in^3 or mm^3]
        """
        widths, top, _, moment = _edges(self.strips)
        depth = np.clip(depth, 0.0, top[-1])
        strip = np.minimum(np.searchsorted(top[1:], depth), len(widths) - 1)
        return moment[strip] + widths[strip] * (depth**2 - top[strip] ** 2) / 2

    def depth_of_area(self, area: FloatArray) -> FloatArray:
        """Depth that cuts off a given area at the compression face.

        Parameters
        ----------
        area : ndarray
            Area, not negative. [in^2 or mm^2]

        Returns
        -------
        ndarray
            Depth; infinite where the section has less area. [in or mm]
        """
        widths, top, areas, _ = _edges(self.strips)
        strip = np.minimum(np.searchsorted(areas[1:], area), len(widths) - 1)
        depth = top[strip] + (area - areas[strip]) / widths[strip]
        return np.where(area > areas[-1] * (1 + 1e-12), np.inf, depth)


@dataclass(frozen=True, slots=True, kw_only=True)
class Outline:
    """Concrete outline of a beam section.

    Attributes
    ----------
    web : float
        Web width bw. [in or mm]
    depth : float
        Overall depth h. [in or mm]
    top : Flange or None
        Flange at the top.
    bottom : Flange or None
        Flange at the bottom.

    Raises
    ------
    OutOfRangeError
        If a flange is narrower than the web or the flanges leave no web between them.
    """

    web: float
    depth: float
    top: Flange | None = None
    bottom: Flange | None = None

    def __post_init__(self) -> None:
        for name in ("web", "depth"):
            _positive(getattr(self, name), name, name)
        parts = (("flange", self.top), ("bottom_flange", self.bottom))
        flanges = [(where, flange) for where, flange in parts if flange is not None]
        for where, flange in flanges:
            _positive(flange.width, "width", where)
            _positive(flange.thickness, "thickness", where)
            beyond = flange.width - self.web
            if beyond < 0.0:
                msg = f"width {flange.width:g}; allowed: at least the web's {self.web:g}"
                raise OutOfRangeError(msg, what=where)
            if not 0.0 <= (flange.left or 0.0) <= beyond * (1 + 1e-9):
                msg = f"left overhang {flange.left:g}; allowed: 0 to {beyond:g}"
                raise OutOfRangeError(msg, what=where)
        taken = sum(flange.thickness for _, flange in flanges)
        if taken >= self.depth:
            msg = f"thickness {taken:g} leaves no web in a depth of {self.depth:g}"
            raise OutOfRangeError(msg, what=flanges[0][0])

    def profile(self, *, sagging: bool) -> Profile:
        """Strips from the compression face.

        Parameters
        ----------
        sagging : bool
            True where the top face is compressed.

        Returns
        -------
        Profile
            The section's widths, compression face first.
        """
        strips = []
        if self.top is not None:
            strips.append((self.top.width, self.top.thickness))
        rest = self.depth - sum(f.thickness for f in (self.top, self.bottom) if f is not None)
        strips.append((self.web, rest))
        if self.bottom is not None:
            strips.append((self.bottom.width, self.bottom.thickness))
        return Profile(tuple(strips if sagging else reversed(strips)))

    @property
    def area(self) -> float:
        """Gross area. [in^2 or mm^2]"""
        return sum(width * height for width, height in self.profile(sagging=True).strips)
