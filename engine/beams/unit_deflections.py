"""Deflections of a span for a stiffness of one, with the live load arranged to add to them."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from engine.beams.analysis import Analysis
from engine.beams.demand import Deflections
from engine.beams.spans import Overhang
from engine.beams.superposition import SERVICE, Effects, superposed
from engine.errors import OutOfRangeError
from engine.outlines import FloatArray

_FIRST, _ZOOMS, _ZOOM = 161, 5, 33  # places looked at first; rounds around the best, places each


def span_deflections(analysis: Analysis, span: int, *, sustained: float) -> Deflections:
    """Deflections of a span for a stiffness of one, with the moments that decide Ie.

    Parameters
    ----------
    analysis : Analysis
        Responses of the beam.
    span : int
        Index of the span.
    sustained : float
        Share of the live load that stays, 0 to 1. [-]

    Returns
    -------
    Deflections
        Where all load together deflects the span most, so that the part of live load is the
        difference of two deflections of one place; of a cantilever at its tip. Moments
        at midspan, or at the face of a cantilever's support, 24.2.3.7.

    Raises
    ------
    OutOfRangeError
        If the share is not between 0 and 1.
    """
    if not 0.0 <= sustained <= 1.0:
        msg = f"got {sustained:g}; allowed: 0 to 1"
        raise OutOfRangeError(msg, what="sustained")
    beam = analysis.dead.beam
    length, overhang = beam.spans[span].length, beam.spans[span].overhang
    clear = beam.clear_range(span)

    def worst(x: FloatArray) -> tuple[FloatArray, FloatArray]:
        live = [response.deflection(span, x) for response in analysis.live]
        return analysis.dead.deflection(span, x), np.maximum(live, 0.0).sum(axis=0)

    back = (0.0, 0.0)
    if overhang is Overhang.NONE:
        place, section = _deepest(worst, length), length / 2.0
    else:
        tip = 0.0 if overhang is Overhang.LEFT else length
        place, section = np.array([tip]), clear[1] if overhang is Overhang.LEFT else clear[0]
        turned = [response.root_rotation(span) for response in analysis.live]
        adding = float(np.maximum(turned, 0.0).sum())
        back = (analysis.dead.root_rotation(span) * length, adding * length)
    dead, live = (float(part[0]) for part in worst(place))
    effects = Effects(analysis=analysis, span=span)
    moments = effects.moments(np.array([section]))
    most, least = (float(value) for value in superposed(moments, SERVICE).ravel())
    sagging = most >= -least
    sign = 1.0 if sagging else -1.0
    own = float(moments[0][0])
    added = (most if sagging else least) - own
    stages = [max(0.0, sign * (own + share * added)) for share in (0.0, sustained, 1.0)]
    return Deflections(
        dead=dead,
        sustained=dead + sustained * live,
        total=dead + live,
        dead_back=back[0],
        sustained_back=back[0] + sustained * back[1],
        total_back=back[0] + back[1],
        moment_dead=stages[0],
        moment_sustained=stages[1],
        moment_total=stages[2],
        sagging=sagging,
    )


def _deepest(
    worst: Callable[[FloatArray], tuple[FloatArray, FloatArray]], length: float
) -> FloatArray:
    """Place where dead and live load together deflect most, shape (1,)."""
    low, high = 0.0, length
    x = np.linspace(low, high, _FIRST)
    for _ in range(_ZOOMS):
        best = int(np.argmax(sum(worst(x))))
        low, high = x[max(best - 1, 0)], x[min(best + 1, len(x) - 1)]
        x = np.linspace(low, high, _ZOOM)
    return x[[int(np.argmax(sum(worst(x))))]]
