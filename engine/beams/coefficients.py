"""Moments and shears by the coefficients of ACI 318, 6.5, for beams that they are made for."""

from __future__ import annotations

import itertools
from dataclasses import dataclass

import numpy as np

from engine.beams.analysis import analyse
from engine.beams.demand import SpanDemand
from engine.beams.envelopes import merged, span_stations
from engine.beams.spans import Beam, LoadCase, Overhang, Span, SupportKind, UniformLoad
from engine.beams.superposition import FACTORED, SERVICE, Factors
from engine.beams.unit_deflections import span_deflections
from engine.editions import Edition
from engine.errors import OutOfRangeError
from engine.outlines import FloatArray

MOST_LIVE = 3.0
"""Largest live load per dead load, 6.5.1 (c). [-]"""
MOST_RATIO = 1.2
"""Largest ratio of neighbouring spans, 6.5.1 (e). [-]"""
STIFF_COLUMNS = 8.0
"""Stiffness of columns per stiffness of the beam above which 1/12 holds, Table 6.5.2. [-]"""
_END_FREE, _END_HELD, _INNER = 1.0 / 11.0, 1.0 / 14.0, 1.0 / 16.0  # sagging
_OUTER_COLUMN, _OUTER_GIRDER, _OUTER_STIFF = 1.0 / 16.0, 1.0 / 24.0, 1.0 / 12.0  # hogging
_FIRST_OF_TWO, _FIRST, _OTHER = 1.0 / 9.0, 1.0 / 10.0, 1.0 / 11.0
_FIRST_SHEAR = 1.15
_ROUNDING = 1e-9


def coefficient_faults(beam: Beam) -> tuple[str, ...]:
    """Why the coefficients do not hold for a beam.

    Spans are compared by their clear lengths, which the coefficients are multiplied by.

    Parameters
    ----------
    beam : Beam
        Spans, supports and loads.

    Returns
    -------
    tuple of str
        One sentence for each condition of 6.5.1 that is not met; empty if all are.
    """
    spans = beam.spans
    faults = [
        f"{span.mark} is a cantilever" for span in spans if span.overhang is not Overhang.NONE
    ]
    if len(beam.supports) < 3:
        faults.append("there is one span between supports; 6.5.1 (d) asks for two or more")
    # The width of a flange that counts follows from the span and may change with it.
    if len({_stem(span) for span in spans}) > 1:
        faults.append("the section is not the same in all spans, 6.5.1 (a)")
    for span in spans:
        if not all(_is_uniform(span, load) for load in span.loads):
            faults.append(
                f"{span.mark} has loads other than uniform ones over all of it, 6.5.1 (b)"
            )
            continue
        dead, live = _intensities(span)
        if min(dead, live) < 0.0:
            faults.append(f"{span.mark} is loaded upwards, 6.5.1 (b)")
        elif live > MOST_LIVE * dead * (1.0 + _ROUNDING):
            faults.append(
                f"{span.mark} has a live load of {live:g}, more than 3 times the dead load "
                f"of {dead:g}, 6.5.1 (c)"
            )
    clear = [beam.clear_length(number) for number in range(len(spans))]
    for (left, one), (right, other) in itertools.pairwise(zip(spans, clear, strict=True)):
        if max(one, other) > MOST_RATIO * min(one, other) * (1.0 + _ROUNDING):
            faults.append(
                f"clear spans {left.mark} and {right.mark}, {one:g} and {other:g}, differ by "
                "more than 20 %, 6.5.1 (e)"
            )
    return tuple(faults)


def _stem(span: Span) -> tuple[float, ...]:
    """Measures of a section without the widths of its flanges."""
    outline = span.outline
    flanges = (outline.top, outline.bottom)
    thicknesses = (0.0 if flange is None else flange.thickness for flange in flanges)
    return (outline.web, outline.depth, *thicknesses)


def _is_uniform(span: Span, load: object) -> bool:
    """Whether a load is uniform over the whole span."""
    tolerance = _ROUNDING * span.length
    return (
        isinstance(load, UniformLoad)
        and load.start <= tolerance
        and load.end >= span.length - tolerance
    )


def _intensities(span: Span) -> tuple[float, float]:
    """Dead and live load per length of a span with uniform loads only."""
    loads = [load for load in span.loads if isinstance(load, UniformLoad)]
    dead, live = (
        sum(load.intensity for load in loads if load.case is case)
        for case in (LoadCase.DEAD, LoadCase.LIVE)
    )
    return dead, live


@dataclass(frozen=True, slots=True, kw_only=True)
class _Frame:
    """A beam within the conditions of 6.5.1."""

    beam: Beam
    modulus: float

    @property
    def last(self) -> int:
        """Index of the last span."""
        return len(self.beam.spans) - 1

    def total(self, span: int, factors: tuple[float, float]) -> float:
        """Load wu of a span."""
        dead, live = _intensities(self.beam.spans[span])
        return factors[0] * dead + factors[1] * live

    def sagging(self, span: int) -> float:
        """Coefficient of the moment near midspan."""
        ends = [end for end in (0, self.last + 1) if end in (span, span + 1)]
        if not ends:
            return _INNER
        return _END_HELD if self.beam.supports[ends[0]].stiffness > 0.0 else _END_FREE

    def hogging(self, support: int, span: int) -> float:
        """Coefficient of the moment at the face of a support in a span."""
        if 0 < support <= self.last:
            if self.last == 1:
                return _FIRST_OF_TWO
            return _FIRST if span in (0, self.last) else _OTHER
        held = self.beam.supports[support]
        if held.stiffness == 0.0:
            return 0.0
        measures = self.beam.spans[span]
        own = 4.0 * self.modulus * measures.gross_inertia / measures.length
        if held.stiffness > STIFF_COLUMNS * own:
            return _OUTER_STIFF
        return _OUTER_GIRDER if held.kind is SupportKind.GIRDER else _OUTER_COLUMN

    def face_moment(self, support: int, span: int, factors: tuple[float, float]) -> float:
        """Size of the moment at the face of a support in a span."""
        sides = (self.beam.left_span(support), self.beam.right_span(support))
        spans = [side for side in sides if side is not None]
        clear = sum(self.beam.clear_length(side) for side in spans) / len(spans)
        load = max(self.total(side, factors) for side in spans)
        return self.hogging(support, span) * load * clear**2

    def plateau(self, span: int) -> tuple[float, float]:
        """Part of the clear span, from its left face, where the sagging moment is largest."""
        clear = self.beam.clear_length(span)
        reach = float(np.sqrt(2.0 * _END_FREE)) * clear
        left = span == 0 and self.beam.supports[0].stiffness == 0.0
        right = span == self.last and self.beam.supports[-1].stiffness == 0.0
        return (
            reach if left else clear / 2.0,
            clear - reach if right else clear / 2.0,
        )

    def most(self, span: int, y: FloatArray, factors: tuple[float, float]) -> FloatArray:
        """Largest moment at distances from the left face."""
        load, clear = self.total(span, factors), self.beam.clear_length(span)
        start, end = self.plateau(span)
        away = np.maximum(np.maximum(start - y, y - end), 0.0)
        return np.maximum(self.sagging(span) * load * clear**2 - load * away**2 / 2.0, 0.0)

    def least(self, span: int, y: FloatArray, factors: tuple[float, float]) -> FloatArray:
        """Smallest moment at distances from the left face."""
        clear = self.beam.clear_length(span)
        left, right = (self.face_moment(end, span, factors) for end in (span, span + 1))
        dead = self.total(span, (factors[0], 0.0))
        hung = -left - (right - left) * y / clear + dead * y * (clear - y) / 2.0
        return np.minimum(hung, 0.0)

    def shear(self, span: int, y: FloatArray, factors: tuple[float, float]) -> FloatArray:
        """Largest shear in size at distances from the left face."""
        clear = self.beam.clear_length(span)
        dead, live = self.total(span, (factors[0], 0.0)), self.total(span, (0.0, factors[1]))
        sides = []
        for support, away in ((span, y), (span + 1, clear - y)):
            # Part of it is constant: what the moment at the first inner support adds.
            first = 0 < support <= self.last and span in (0, self.last)
            added = (_FIRST_SHEAR - 1.0) * (dead + live) * clear / 2.0 if first else 0.0
            partial = live * (clear - away) ** 2 / (2.0 * clear)
            sides.append(dead * (clear / 2.0 - away) + partial + added)
        return np.maximum(*sides)


def coefficient_demands(
    beam: Beam, edition: Edition, *, sustained: float, modulus: float
) -> tuple[SpanDemand, ...]:
    """Envelopes of all spans by the coefficients of Tables 6.5.2 and 6.5.4.

    Parameters
    ----------
    beam : Beam
        Spans, supports and loads.
    edition : Edition
        Code edition.
    sustained : float
        Share of the live load that stays, 0 to 1. [-]
    modulus : float
        Ec, for deflections and to compare the beam's stiffness with its columns'.
        [psi or MPa]

    Returns
    -------
    tuple of SpanDemand
        For each span; deflections by elastic analysis. [in, lbf*in, lbf or mm, N*mm, N]

    Raises
    ------
    OutOfRangeError
        If the conditions of 6.5.1 are not met, or `sustained`, the modulus or a stiffness is
        out of its range.

    Notes
    -----
    The tables give moments near midspan and at the faces, and shears at the faces. Between:

    - Largest moments follow the parabola of the span's whole load with its peak at midspan.
      At an end that turns freely the parabola through zero at the face peaks nearer to it;
      between the two peaks the moment stays, so that both parabolas are covered.
    - Smallest moments follow the parabola of the dead load alone, hung between the moments of
      both faces. Those are largest with live load on neighbouring spans; live load on the span
      itself only lifts the curve, and with less live load about, the moments at the faces are
      smaller. So no arrangement goes below it.
    - Shears are those of live load on the part of the span beyond the section, wu ln / 2 at
      the face and a quarter of the live part of it at midspan. The 15 % at the first inner
      support, which come from the moment there, stay constant along the span.

    At a face, the larger load of the neighbouring spans counts. A column or wall with a
    stiffness is integral with the beam; one without lets it turn. Where columns are more than 8
    times as stiff as the beam, an outer face takes 1/12, whatever the span's other end; inner
    faces keep their larger coefficients.
    """
    faults = coefficient_faults(beam)
    if faults:
        msg = f"got a beam outside 6.5: {'; '.join(faults)}; hint: use the elastic analysis"
        raise OutOfRangeError(msg, what="analysis")
    analysis = analyse(beam, modulus)
    frame = _Frame(beam=beam, modulus=modulus)
    demands = []
    for span in range(len(beam.spans)):
        start, _ = beam.clear_range(span)
        edges = start + np.array(frame.plateau(span))
        tolerance = _ROUNDING * beam.spans[span].length
        x = merged((span_stations(beam, span, edition), edges), tolerance=tolerance)
        y = x - start

        def envelope(
            factors: Factors, span: int = span, y: FloatArray = y
        ) -> tuple[FloatArray, FloatArray]:
            most = [frame.most(span, y, pair) for pair in factors]
            least = [frame.least(span, y, pair) for pair in factors]
            return np.max(most, axis=0), np.min(least, axis=0)

        Mu_most, Mu_least = envelope(FACTORED)
        Ms_most, Ms_least = envelope(SERVICE)
        demands.append(
            SpanDemand(
                x=x,
                Mu_most=Mu_most,
                Mu_least=Mu_least,
                Vu=np.max([frame.shear(span, y, pair) for pair in FACTORED], axis=0),
                Ms_most=Ms_most,
                Ms_least=Ms_least,
                deflections=span_deflections(analysis, span, sustained=sustained),
            )
        )
    return tuple(demands)
