"""Which beams are deep ones, ACI 318, 9.9.1.1."""

from __future__ import annotations

from collections.abc import Sequence

SPAN_PER_DEPTH = 4.0
"""Clear span over depth up to which a beam is deep. [-]"""
FORCE_PER_DEPTH = 2.0
"""Distance of a concentrated load from the face over depth up to which it is deep. [-]"""


def is_deep(ln: float, h: float, forces: Sequence[float]) -> bool:
    """Whether 9.9 applies to a span between supports.

    Parameters
    ----------
    ln, h : float
        Clear span and depth. [in or mm]
    forces : sequence of float
        Distances of concentrated loads from the left face. [in or mm]

    Returns
    -------
    bool
        True if ln is not above 4 h, or a concentrated load stands within 2 h of a face.
    """
    if ln <= SPAN_PER_DEPTH * h:
        return True
    near = FORCE_PER_DEPTH * h
    return any(at <= near or at >= ln - near for at in forces)
