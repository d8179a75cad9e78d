"""Where curves that are parabolas between stations cross zero and where they peak."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from engine.outlines import FloatArray

_FLAT = 1e-12  # a curve that bends less than this share of its size is straight


def _parabolas(at: FloatArray, middle: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Coefficients a, b, c of a t^2 + b t + c over each interval, t from 0 to 1."""
    first, last = at[:, :-1], at[:, 1:]
    bend = 2.0 * (first - 2.0 * middle + last)
    size = np.maximum(np.max(np.abs(at), axis=1, keepdims=True), np.finfo(np.float64).tiny)
    bend = np.where(np.abs(bend) > _FLAT * size, bend, 0.0)
    return bend, last - first - bend, first


def _places(x: FloatArray, top: FloatArray, bottom: FloatArray) -> FloatArray:
    """Places inside the intervals at t = top/bottom, where there is such a t."""
    inside: NDArray[np.bool_] = (top * np.sign(bottom) > 0.0) & (np.abs(top) < np.abs(bottom))
    t = np.divide(top, bottom, out=np.zeros_like(top), where=inside)
    return (x[:-1] + t * np.diff(x))[inside]


def vertices(x: FloatArray, at: FloatArray, middle: FloatArray) -> FloatArray:
    """Places between stations where curves peak.

    Parameters
    ----------
    x : ndarray, shape (n,)
        Stations, ascending. [in or mm]
    at : ndarray, shape (curves, n)
        Values at the stations, each curve a parabola between two of them. [any unit]
    middle : ndarray, shape (curves, n - 1)
        Values halfway between stations. [same unit]

    Returns
    -------
    ndarray
        Places of all vertices strictly between stations. [in or mm]
    """
    bend, slope, _ = _parabolas(at, middle)
    return _places(x, -slope, 2.0 * bend)


def crossings(x: FloatArray, at: FloatArray, middle: FloatArray) -> FloatArray:
    """Places between stations where curves are zero.

    Parameters
    ----------
    x : ndarray, shape (n,)
        Stations, ascending. [in or mm]
    at : ndarray, shape (curves, n)
        Values at the stations, each curve a parabola between two of them. [any unit]
    middle : ndarray, shape (curves, n - 1)
        Values halfway between stations. [same unit]

    Returns
    -------
    ndarray
        Places of all zeros strictly between stations. [in or mm]
    """
    bend, slope, start = _parabolas(at, middle)
    root = np.sqrt(np.maximum(slope**2 - 4.0 * bend * start, 0.0))
    # This sum loses no digits; the two zeros are q/a and c/q. Without a real zero the two
    # places are no zeros, and needless but harmless.
    q = -(slope + np.where(slope < 0.0, -root, root)) / 2.0
    return np.concatenate((_places(x, q, bend), _places(x, start, q)))
