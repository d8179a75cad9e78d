"""Effects of dead load and of any arrangement of live load, superposed."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from engine.beams.analysis import Analysis, Response
from engine.outlines import FloatArray

Factors = tuple[tuple[float, float], ...]

FACTORED = ((1.4, 0.0), (1.2, 1.6))
"""Factors of dead and live load that strength needs, 5.3.1 (a) and (b). [-]"""
SERVICE = ((1.0, 1.0),)
"""Factors of dead and live load at service. [-]"""


@dataclass(frozen=True, slots=True, kw_only=True)
class Effects:
    """Moments and shears of one span, dead load apart from the live load of each span.

    Attributes
    ----------
    analysis : Analysis
        Responses of the beam.
    span : int
        Index of the span.
    shares : tuple of float
        Share of the moment at its left and right end that is redistributed, 6.6.5: under each
        load the moments between change linearly and the shear by a constant. [-]
    """

    analysis: Analysis
    span: int
    shares: tuple[float, float] = (0.0, 0.0)

    def _ends(self, response: Response) -> tuple[float, float, float]:
        """Moments taken off at the left and the right end, and the span's length."""
        length = response.beam.spans[self.span].length
        left, right = response.moment(self.span, np.array([0.0, length]))
        return float(left) * self.shares[0], float(right) * self.shares[1], length

    def _each(self, of: Callable[[Response], FloatArray]) -> tuple[FloatArray, FloatArray]:
        live = [of(response) for response in self.analysis.live]
        return of(self.analysis.dead), np.array(live)

    def moments(self, x: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Moments along the span.

        Parameters
        ----------
        x : ndarray, shape (n,)
            Places on its axis. [in or mm]

        Returns
        -------
        tuple of ndarray
            Dead moment, shape (n,), and for the live load of each span its moment, shape
            (spans, n). [lbf*in or N*mm]
        """

        def of(response: Response) -> FloatArray:
            left, right, length = self._ends(response)
            return response.moment(self.span, x) - left - (right - left) * x / length

        return self._each(of)

    def shears(self, x: FloatArray, *, left: bool) -> tuple[FloatArray, FloatArray]:
        """Shears along the span.

        Parameters
        ----------
        x : ndarray, shape (n,)
            Places on its axis. [in or mm]
        left : bool
            Whether just left of the places; otherwise just right of them.

        Returns
        -------
        tuple of ndarray
            Dead shear, shape (n,), and for the live load of each span its shear, shape
            (spans, n). [lbf or N]
        """

        def of(response: Response) -> FloatArray:
            start, end, length = self._ends(response)
            return response.shear(self.span, x, left=left) - (end - start) / length

        return self._each(of)


def superposed(parts: tuple[FloatArray, FloatArray], factors: Factors) -> FloatArray:
    """Superpose dead load and the live load of those spans that make an effect worse.

    Parameters
    ----------
    parts : tuple of ndarray
        Effect of dead load, shape (n,), and of the live load of each span, shape (spans, n).
        [any unit]
    factors : tuple of (float, float)
        Factors of dead and live load of each combination. [-]

    Returns
    -------
    ndarray, shape (2, combinations, n)
        Largest effects, then smallest ones. [same unit]
    """
    dead, live = parts
    most, least = np.maximum(live, 0.0).sum(axis=0), np.minimum(live, 0.0).sum(axis=0)
    return np.array([[d * dead + share * part for d, share in factors] for part in (most, least)])
