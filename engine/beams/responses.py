"""What a set of loads does to a continuous beam, at any place of it and in closed form.

Moment, shear and deflection along a span follow exactly from its end moments and its loads:
each is a sum of powers of the distance beyond a load, so nothing is divided into elements.

Moments are positive where they sag, deflections positive downwards, rotations positive where
the beam's right side turns down, reactions positive upwards.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from engine.beams.spans import Beam, Overhang
from engine.errors import OutOfRangeError
from engine.outlines import FloatArray


def _beyond(x: FloatArray, places: FloatArray, power: int) -> FloatArray:
    """Power of the distance beyond places, zero before them; one more axis at the end."""
    return np.maximum(x[..., None] - places, 0.0) ** power


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Line:
    """A span cut free: what acts at its left end, and its loads.

    Attributes
    ----------
    length : float
        Length of the span. [in or mm]
    moment, shear : float
        Moment and shear at its left end, left of all its loads. [lbf*in, lbf or N*mm, N]
    at, force : ndarray, shape (p,)
        Point loads: place and size. [in, lbf or mm, N]
    start, end, intensity : ndarray, shape (u,)
        Uniform loads: where they begin and end, and force per length.
        [in, lbf/in or mm, N/mm]
    """

    length: float
    moment: float
    shear: float
    at: FloatArray
    force: FloatArray
    start: FloatArray
    end: FloatArray
    intensity: FloatArray

    def integral(self, x: FloatArray, times: int) -> FloatArray:
        """The moment integrated over and over from the left end.

        Parameters
        ----------
        x : ndarray
            Places on the axis. [in or mm]
        times : int
            How often: 0 gives the moment itself.

        Returns
        -------
        ndarray
            Integral. [lbf*in or N*mm, times a length for each time]
        """
        parts = self.moment * x**times / math.factorial(times)
        parts = parts + self.shear * x ** (times + 1) / math.factorial(times + 1)
        points = _beyond(x, self.at, times + 1) @ self.force / math.factorial(times + 1)
        spread = _beyond(x, self.start, times + 2) - _beyond(x, self.end, times + 2)
        return parts - points - spread @ self.intensity / math.factorial(times + 2)

    def shears(self, x: FloatArray, *, left: bool) -> FloatArray:
        """Shear just right of places, or just left of them; at the ends inside the span.

        Parameters
        ----------
        x : ndarray
            Places on the axis. [in or mm]
        left : bool
            Whether the left side is meant.

        Returns
        -------
        ndarray
            Shear. [lbf or N]
        """
        place = x[..., None]
        after = (self.at < place) if left else (self.at <= place)
        # A load at an end goes straight into what is there: a support, or the tip's own edge.
        passed = (after | (self.at <= 0.0)) & (self.at < self.length)
        spread = _beyond(x, self.start, 1) - _beyond(x, self.end, 1)
        return self.shear - passed @ self.force - spread @ self.intensity

    @property
    def right_shear(self) -> float:
        """Shear beyond all loads. [lbf or N]"""
        spread = (self.end - self.start) @ self.intensity
        return float(self.shear - self.force.sum() - spread)


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Response:
    """What one set of loads does to a whole beam.

    Attributes
    ----------
    beam : Beam
        The beam.
    stiffness : tuple of float
        Ec Ig of each span. [lbf*in^2 or N*mm^2]
    rotations : tuple of float
        Rotation of each support. [rad]
    lines : tuple of Line
        Each span cut free.
    """

    beam: Beam
    stiffness: tuple[float, ...]
    rotations: tuple[float, ...]
    lines: tuple[Line, ...]

    def moment(self, span: int, x: ArrayLike) -> FloatArray:
        """Bending moment along a span.

        Parameters
        ----------
        span : int
            Index of the span.
        x : array_like
            Places on its axis. [in or mm]

        Returns
        -------
        ndarray
            Moment, sagging positive. [lbf*in or N*mm]
        """
        return self.lines[span].integral(np.asarray(x, dtype=np.float64), 0)

    def shear(self, span: int, x: ArrayLike, *, left: bool = False) -> FloatArray:
        """Shear along a span, V = dM/dx.

        Parameters
        ----------
        span : int
            Index of the span.
        x : array_like
            Places on its axis. [in or mm]
        left : bool
            Whether the value at a point load is the one to the left of it; otherwise the one
            to the right. At either end of the span it is always the one inside the span.

        Returns
        -------
        ndarray
            Shear. [lbf or N]
        """
        return self.lines[span].shears(np.asarray(x, dtype=np.float64), left=left)

    def shear_size(self, span: int, x: ArrayLike) -> FloatArray:
        """Size of the shear along a span, at a point load the larger of both sides.

        Parameters
        ----------
        span : int
            Index of the span.
        x : array_like
            Places on its axis. [in or mm]

        Returns
        -------
        ndarray
            Largest size of the shear just left and just right. [lbf or N]
        """
        sides = (np.abs(self.shear(span, x, left=left)) for left in (False, True))
        return np.maximum(*sides)

    def reaction(self, support: int) -> float:
        """Force that a support exerts.

        Parameters
        ----------
        support : int
            Index of the support.

        Returns
        -------
        float
            Reaction, upwards positive; loads right above the support included. [lbf or N]
        """
        left, right = self.beam.left_span(support), self.beam.right_span(support)
        before = 0.0 if left is None else self.lines[left].right_shear
        after = 0.0 if right is None else self.lines[right].shear
        return after - before

    def rotation(self, support: int) -> float:
        """Rotation of the beam over a support.

        Parameters
        ----------
        support : int
            Index of the support.

        Returns
        -------
        float
            Rotation, positive where the right side turns down. [rad]
        """
        return self.rotations[support]

    def deflection(self, span: int, x: ArrayLike) -> FloatArray:
        """Deflection along a span for a stiffness EI of one in it.

        Parameters
        ----------
        span : int
            Index of the span.
        x : array_like
            Places on its axis. [in or mm]

        Returns
        -------
        ndarray
            Deflection, downwards positive: zero at both supports; of a cantilever the part of
            its own bending alone, as if its support did not rotate. [lbf*in^3 or N*mm^3]
        """
        place = np.asarray(x, dtype=np.float64)
        line, overhang = self.lines[span], self.beam.spans[span].overhang
        bent = line.integral(place, 2)
        if overhang is Overhang.RIGHT:
            return -bent
        end = np.asarray(line.length)
        if overhang is Overhang.LEFT:
            slope = line.integral(end, 1)
            return line.integral(end, 2) + slope * (place - line.length) - bent
        return place / line.length * line.integral(end, 2) - bent

    def root_rotation(self, span: int) -> float:
        """Rotation of a cantilever's support for a stiffness EI of one in the span next to it.

        Parameters
        ----------
        span : int
            Index of the cantilever.

        Returns
        -------
        float
            Rotation times stiffness, positive where the tip moves down; times the length of
            the cantilever it is the tip's movement. [lbf*in^2 or N*mm^2]

        Raises
        ------
        OutOfRangeError
            If the span is no cantilever.
        """
        overhang = self.beam.spans[span].overhang
        if overhang is Overhang.NONE:
            msg = f"got {self.beam.spans[span].mark}; allowed: cantilevers"
            raise OutOfRangeError(msg, what="span")
        if overhang is Overhang.LEFT:
            return -self.rotations[0] * self.stiffness[span + 1]
        return self.rotations[-1] * self.stiffness[span - 1]
