"""Envelopes of the elastic moments and shears along each span, and deflections.

Live load may stand on each span or not. A span's live load is counted at a section where it
makes the effect there worse, which covers every arrangement of loaded spans and so is at least
as severe as the two that 6.4 asks for.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np

from engine.beams.analysis import analyse
from engine.beams.demand import SpanDemand
from engine.beams.peaks import crossings, vertices
from engine.beams.spans import Beam, Overhang, PointLoad
from engine.beams.superposition import FACTORED, SERVICE, Effects, Factors, superposed
from engine.beams.unit_deflections import span_deflections
from engine.editions import Edition
from engine.errors import OutOfRangeError
from engine.outlines import FloatArray

MOST_REDISTRIBUTION = 0.20
"""Largest share of 6.6.5.3. [-]"""
_SPACING = {"us": 3.0, "si": 75.0}  # between stations [in or mm]
_LEAST_INTERVALS = 80
_SAME = 1e-9  # stations closer than this share of the span are one


def redistributed_supports(beam: Beam) -> tuple[bool, ...]:
    """Whether moments at a support may be redistributed, 6.6.5.

    Parameters
    ----------
    beam : Beam
        Spans and supports.

    Returns
    -------
    tuple of bool
        For each support: False where it carries a cantilever, whose moment statics decide, and
        at a free end, where there is none.
    """
    found = []
    for index, support in enumerate(beam.supports):
        sides = (beam.left_span(index), beam.right_span(index))
        spans = [beam.spans[side] for side in sides if side is not None]
        hangs = any(span.overhang is not Overhang.NONE for span in spans)
        found.append(not hangs and (len(spans) > 1 or support.stiffness > 0.0))
    return tuple(found)


def span_stations(
    beam: Beam, span: int, edition: Edition, spacing: float | None = None
) -> FloatArray:
    """Places along a clear span: the faces, wherever a load acts or ends, and an even grid.

    Parameters
    ----------
    beam : Beam
        Spans and supports.
    span : int
        Index of the span.
    edition : Edition
        Code edition, for its units.
    spacing : float or None
        Greatest distance of neighbours; None for 3 in or 75 mm. There are at least 80
        intervals in any case. [in or mm]

    Returns
    -------
    ndarray, shape (n,)
        Places on the span's axis, ascending; midspan is among them. [in or mm]

    Raises
    ------
    OutOfRangeError
        If the spacing is not above 0.
    """
    spacing = _SPACING[edition.units] if spacing is None else spacing
    if not spacing > 0.0:
        msg = f"got {spacing:g}; allowed: above 0"
        raise OutOfRangeError(msg, what="stations")
    start, end = beam.clear_range(span)
    count = max(_LEAST_INTERVALS, math.ceil((end - start) / spacing - _SAME))
    grid = np.linspace(start, end, count + count % 2 + 1)
    places: list[float] = []
    for load in beam.spans[span].loads:
        places += [load.at] if isinstance(load, PointLoad) else [load.start, load.end]
    inside = np.array([place for place in places if start < place < end])
    groups = (np.array([start, end]), inside, grid)
    return merged(groups, tolerance=_SAME * beam.spans[span].length)


def merged(groups: Sequence[FloatArray], *, tolerance: float) -> FloatArray:
    """Join groups of places; of two that coincide, the one of the earlier group stays.

    Parameters
    ----------
    groups : sequence of ndarray
        Places. [in or mm]
    tolerance : float
        Places not further apart than this coincide. [in or mm]

    Returns
    -------
    ndarray, shape (n,)
        Places, ascending. [in or mm]
    """
    kept = groups[0]
    for group in groups[1:]:
        new = np.unique(group)
        new = new[np.diff(new, prepend=-np.inf) > tolerance]
        apart = np.min(np.abs(new[:, None] - kept), axis=1, initial=np.inf) > tolerance
        kept = np.concatenate((kept, new[apart]))
    return np.sort(kept)


def _peaks(effects: Effects, x: FloatArray, factors: Factors, tolerance: float) -> FloatArray:
    """Places where a combination of `factors` peaks between stations."""
    # Between places where a live moment changes sign the arrangement is one and the same, and
    # the moment a parabola.
    middle = (x[:-1] + x[1:]) / 2.0
    breaks = crossings(x, effects.moments(x)[1], effects.moments(middle)[1])
    x = merged((x, breaks), tolerance=tolerance)
    middle = (x[:-1] + x[1:]) / 2.0
    at, between = (superposed(effects.moments(places), factors) for places in (x, middle))
    return vertices(x, at.reshape(-1, at.shape[-1]), between.reshape(-1, between.shape[-1]))


def elastic_demands(
    beam: Beam,
    modulus: float,
    edition: Edition,
    *,
    sustained: float,
    redistribution: float = 0.0,
    stations: float | None = None,
) -> tuple[SpanDemand, ...]:
    """Envelopes of all spans by elastic analysis with gross sections.

    Parameters
    ----------
    beam : Beam
        Spans, supports and loads.
    modulus : float
        Ec. [psi or MPa]
    edition : Edition
        Code edition.
    sustained : float
        Share of the live load that stays, 0 to 1. [-]
    redistribution : float
        Share, up to 0.20, by which factored moments at supports are lowered: under every
        arrangement alike, the moments between rise and the shears change by equilibrium. Moments
        of cantilevers and service moments stay elastic. Whether the bars' eps_t permits
        it, 6.6.5.1, is for the design to show. [-]
    stations : float or None
        Greatest distance between stations; None for 3 in or 75 mm. [in or mm]

    Returns
    -------
    tuple of SpanDemand
        For each span, factored by 5.3.1 (a) and (b), 1.4 D and 1.2 D + 1.6 L. Every peak of the
        moments is a station; the shear at a point load is the larger of both sides.
        [in, lbf*in, lbf or mm, N*mm, N]

    Raises
    ------
    OutOfRangeError
        If a share is out of its range, the spacing is not above 0, or the analysis refuses
        the modulus or a stiffness.
    """
    if not 0.0 <= redistribution <= MOST_REDISTRIBUTION:
        msg = f"got {redistribution:g}; allowed: 0 to {MOST_REDISTRIBUTION:g}"
        raise OutOfRangeError(msg, what="redistribution")
    analysis = analyse(beam, modulus)
    may = redistributed_supports(beam)
    demands = []
    for span in range(len(beam.spans)):
        ends = (beam.left_support(span), beam.right_support(span))
        shares = [0.0 if end is None or not may[end] else redistribution for end in ends]
        strength = Effects(analysis=analysis, span=span, shares=(shares[0], shares[1]))
        service = Effects(analysis=analysis, span=span)
        x = span_stations(beam, span, edition, stations)
        tolerance = _SAME * beam.spans[span].length
        pairs = ((strength, FACTORED), (service, SERVICE))
        peaks = [_peaks(effects, x, factors, tolerance) for effects, factors in pairs]
        x = merged((x, *peaks), tolerance=tolerance)
        factored = superposed(strength.moments(x), FACTORED)
        lasting = superposed(service.moments(x), SERVICE)
        sides = [superposed(strength.shears(x, left=left), FACTORED) for left in (False, True)]
        demands.append(
            SpanDemand(
                x=x,
                Mu_most=factored[0].max(axis=0),
                Mu_least=factored[1].min(axis=0),
                Vu=np.abs(sides).max(axis=(0, 1, 2)),
                Ms_most=lasting[0].max(axis=0),
                Ms_least=lasting[1].min(axis=0),
                deflections=span_deflections(analysis, span, sustained=sustained),
            )
        )
    return tuple(demands)
