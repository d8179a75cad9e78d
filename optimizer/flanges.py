"""The flange of a section as its slab or its job gives it."""

from __future__ import annotations

from engine import Flange, Slab, effective_flange_width
from engine.flange_width import overhang


def slab_flange(slab: Slab, web: float) -> Flange:
    """Top flange that a slab makes effective.

    Parameters
    ----------
    slab : Slab
        Slab and span.
    web : float
        Web width. [in or mm]

    Returns
    -------
    Flange
        Effective flange, its overhangs where the slab is.
    """
    both = slab.clear_left > 0.0 and slab.clear_right > 0.0
    return Flange(
        width=effective_flange_width(slab, web),
        thickness=slab.thickness,
        left=overhang(slab, slab.clear_left, both_sides=both),
    )
