"""Effective flange width of a beam cast with its slab, 6.3.2."""

from __future__ import annotations

import math
from dataclasses import dataclass

from engine.errors import OutOfRangeError


@dataclass(frozen=True, slots=True, kw_only=True)
class Slab:
    """The slab on top of a beam.

    Attributes
    ----------
    thickness : float
        Slab thickness h. [in or mm]
    clear_left, clear_right : float
        Clear distance to the next web on each side; zero where there is no slab. [in or mm]
    span : float
        Clear span of the beam. [in or mm]

    Raises
    ------
    OutOfRangeError
        If thickness or span is not a length.
    """

    thickness: float
    clear_left: float
    clear_right: float
    span: float

    def __post_init__(self) -> None:
        for name in ("thickness", "span"):
            value = getattr(self, name)
            if not (math.isfinite(value) and value > 0.0):
                msg = f"{name} {value:g}; allowed: a finite length above 0"
                raise OutOfRangeError(msg, what="slab")


def overhang(slab: Slab, clear: float, *, both_sides: bool) -> float:
    """Effective overhang of one side, Table 6.3.2.1.

    Parameters
    ----------
    slab : Slab
        Slab and span.
    clear : float
        Clear distance to the next web on this side. [in or mm]
    both_sides : bool
        Whether the beam has a flange on both sides.

    Returns
    -------
    float
        Width beyond the face of the web. [in or mm]

    Notes
    -----
    ACI 318-14 and -19, Table 6.3.2.1: both sides, least of 8h, sw/2 and ln/8; one side, least of
    6h, sw/2 and ln/12.
    """
    if clear <= 0.0:
        return 0.0
    if both_sides:
        return min(8.0 * slab.thickness, clear / 2.0, slab.span / 8.0)
    return min(6.0 * slab.thickness, clear / 2.0, slab.span / 12.0)


def effective_flange_width(slab: Slab, web: float) -> float:
    """Effective flange width of a T or L section.

    Parameters
    ----------
    slab : Slab
        Slab and span.
    web : float
        Web width. [in or mm]

    Returns
    -------
    float
        Web plus effective overhangs, 6.3.2. [in or mm]

    Raises
    ------
    OutOfRangeError
        If there is a slab on neither side.
    """
    if slab.clear_left <= 0.0 and slab.clear_right <= 0.0:
        msg = "no clear distance on either side; expected clear_left, clear_right or both"
        raise OutOfRangeError(msg, what="slab")
    both = slab.clear_left > 0.0 and slab.clear_right > 0.0
    return (
        web
        + overhang(slab, slab.clear_left, both_sides=both)
        + overhang(slab, slab.clear_right, both_sides=both)
    )
