"""What a span has to resist, station by station: the border between analysis and design."""

from __future__ import annotations

from dataclasses import dataclass

from engine.outlines import FloatArray


@dataclass(frozen=True, slots=True, kw_only=True)
class Deflections:
    """Deflections of a span for a stiffness EI of one, from which those with Ie follow.

    A cantilever's tip also moves with the rotation of its support, which the stiffness of the
    span next to it decides: that part stands apart. Both parts are zero where they do not apply.

    Attributes
    ----------
    dead, sustained, total : float
        Downward deflection under dead load, dead and sustained live load, dead and all live
        load (live load of each span where it adds), all three where the last is largest.
        [lbf*in^3 or N*mm^3]
    dead_back, sustained_back, total_back : float
        The part of a cantilever's tip that comes with the rotation of its support, for a
        stiffness of one in the span next to it. [lbf*in^3 or N*mm^3]
    moment_dead, moment_sustained, moment_total : float
        Moment Ma of the section that Ie is taken at, in size: midspan, or a cantilever's
        support. [lbf*in or N*mm]
    sagging : bool
        Sign of those moments.
    """

    dead: float
    sustained: float
    total: float
    dead_back: float = 0.0
    sustained_back: float = 0.0
    total_back: float = 0.0
    moment_dead: float
    moment_sustained: float
    moment_total: float
    sagging: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class SpanDemand:
    """Envelopes along the clear span; between stations they are straight.

    Attributes
    ----------
    x : ndarray, shape (n,)
        Stations on the span's axis, ascending, from face to face of the supports. [in or mm]
    Mu_most, Mu_least : ndarray, shape (n,)
        Largest and smallest factored moment, sagging positive. [lbf*in or N*mm]
    Vu : ndarray, shape (n,)
        Largest factored shear in size. [lbf or N]
    Ms_most, Ms_least : ndarray, shape (n,)
        Largest and smallest service moment. [lbf*in or N*mm]
    deflections : Deflections or None
        None where the moments came from elsewhere.
    """

    x: FloatArray
    Mu_most: FloatArray
    Mu_least: FloatArray
    Vu: FloatArray
    Ms_most: FloatArray
    Ms_least: FloatArray
    deflections: Deflections | None = None
