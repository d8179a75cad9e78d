"""The least width in which bars fit, found from the engine's own placement."""

from __future__ import annotations

import math

from engine import Outline, edition, place
from tests.published.beams import bars, beam

_PRECISION = 1e-7


def gaps_fit(code: str, layer: str, width: float, *, stirrup: str | None = None) -> bool:
    """Whether a layer of bars stands in a web with enough clear gaps.

    Parameters
    ----------
    code : str
        Edition.
    layer : str
        Bars of the layer.
    width : float
        Web width. [in or mm]
    stirrup : str, optional
        Stirrup size; #3 or No. 10 if not given.

    Returns
    -------
    bool
        True if every gap is at least the required one.
    """
    inch = edition(code).units == "us"
    fc, fy, depth = (4000.0, 60_000.0, 40.0) if inch else (28.0, 420.0, 1000.0)
    outline = Outline(web=width, depth=depth)
    section = beam(outline, code=code, fc=fc, fy=fy, stirrup=stirrup)
    return place(section, bars(code, layer)).gaps_fit


def least_width(code: str, layer: str) -> float:
    """Find the least web width for a layer by halving; #3 or No. 10 stirrups.

    Parameters
    ----------
    code : str
        Edition.
    layer : str
        Bars of the layer.

    Returns
    -------
    float
        Width. [in or mm]
    """
    low, high = (4.0, 60.0) if edition(code).units == "us" else (101.0, 1500.0)
    assert gaps_fit(code, layer, high)
    assert not gaps_fit(code, layer, low)
    while high - low > _PRECISION:
        middle = (low + high) / 2
        low, high = (low, middle) if gaps_fit(code, layer, middle) else (middle, high)
    return high


def rounded_up(value: float, step: float) -> float:
    """Round up to a multiple of a step, as the tables of widths do.

    Parameters
    ----------
    value, step : float
        Value and step. [in or mm]

    Returns
    -------
    float
        The least multiple that is not smaller, up to the precision of `least_width`.
    """
    return math.ceil((value - 10 * _PRECISION) / step) * step
