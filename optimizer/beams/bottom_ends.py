"""Ends of the bottom bars of a span: in supports, in laps over them, and at inflection points."""

from __future__ import annotations

import math

import numpy as np

from catalogs import Bar
from engine import meets_short_form
from engine.beams.anchorage import (
    EndAnchor,
    anchor_at_end,
    can_lap,
    lap_of_size,
    shortest_development,
)
from engine.beams.continuity import continuity_rules
from engine.beams.cutoffs import (
    developed_everywhere,
    extension,
    last_above,
    longest_at_inflection,
)
from optimizer.beams.builder import Builder, Developments
from optimizer.beams.ends import EndRange
from optimizer.beams.frames import round_up
from optimizer.beams.listing import Fitted
from optimizer.beams.places import Place, Side
from optimizer.beams.strengths import (
    RunStrength,
    Strengths,
)

_SLACK = 1e-6
_FAR = 1e9


class BottomEnds:
    """Ends of the bottom bars of one span.

    Parameters
    ----------
    shared : Builder
        What all places share.
    place : Place
        Bottom of the span.
    """

    def __init__(self, shared: Builder, place: Place) -> None:
        self.shared, self.place = shared, place
        self.problem = shared.problem
        assert place.left is not None  # a bottom has two sides
        self.section = place.left.section
        self.strengths = Strengths(self.section)
        self.developments = Developments(self.strengths)
        self.rules = continuity_rules(self.problem.edition)

    def refuse(self, why: str) -> None:
        """Take note of why bars were refused here.

        Parameters
        ----------
        why : str
            Rule in words.
        """
        self.shared.refuse(self.place.mark, why)

    def corner_possible(self, bar: Bar) -> bool:
        """Whether bars of a size can run into the supports at all.

        Parameters
        ----------
        bar : Bar
            Size of the bars in the corners.

        Returns
        -------
        bool
            False where even the shortest development length and the widest hooks do not fit,
            or laps of the fewest bars do not.
        """
        legs = self.shared.frame.legs
        ld = shortest_development(self.section, bar)
        possible = all(
            self.run_end(side, bar, legs, ld, math.inf) is not None for side in self.place.sides
        )
        if not possible:
            self.refuse("its bars cannot be anchored or lapped at the supports")
        return possible

    def past_face(self, side: Side) -> float:
        """How far bars that stop may run into a support. [in or mm]"""
        into = self.rules.into_support
        return into if is_simple(side) else max(into, self.room(side))

    def room(self, side: Side) -> float:
        """Length open to bars past the face of the support. [in or mm]"""
        assert side.support is not None  # bottoms run from support to support
        return side.support.width + side.beyond - self.section.bar_face

    def laps_at(self, side: Side) -> bool:
        """Whether the bars that run on are lapped with those of the next span."""
        return self.shared.integrity and not side.end_of_beam

    def run_end(
        self, side: Side, bar: Bar, run: int, ld: float, spacing: float
    ) -> tuple[EndRange, EndAnchor] | None:
        """Range of an end of the bars that run on, and how it is anchored."""
        assert side.support is not None
        into = self.rules.into_support
        room = self.room(side)
        width = side.support.width
        if self.laps_at(side):
            if not can_lap(self.section, bar) or not self._lap_fits(bar, run):
                return None
            lap = round_up(lap_of_size(self.section, bar), self.shared.step)
            embedment = max(width / 2.0 + lap / 2.0, into)
            anchor = EndAnchor(hooked=False, embedment=embedment, development=ld)
            return self._range(side, embedment, _FAR), anchor
        if not self.shared.integrity:
            if into > room + _SLACK:
                return None
            anchor = EndAnchor(hooked=False, embedment=into, development=ld)
            return self._range(side, into, room), anchor
        if max(ld, into) <= room + _SLACK:  # straight, on into a cantilever where there is one
            anchor = EndAnchor(hooked=False, embedment=max(ld, into), development=ld)
            return self._range(side, anchor.embedment, room), anchor
        found = anchor_at_end(
            self.section,
            bar,
            width=width,
            ld=ld,
            spacing=spacing,
            least=into,
            tied=side.support.ties,
        )
        if found is None:
            return None
        need = max(found.development, into)
        far = width - self.section.bar_face
        anchor = EndAnchor(hooked=True, embedment=need, development=found.development)
        return self._range(side, need, far, hooked=True), anchor

    def _range(
        self, side: Side, embedment: float, limit: float, *, hooked: bool = False
    ) -> EndRange:
        return EndRange(side.at(side.face + embedment), side.at(side.face + limit), hooked)

    def _lap_fits(self, bar: Bar, run: int) -> bool:
        """Whether pairs of lapped bars keep the clear gap over the support, 25.5.1.2."""
        section = self.section
        reach = section.inner_width / 2.0 - section.corner_offset(bar.diameter)
        width = 2.0 * run * bar.diameter + (run - 1) * section.required_gap(bar.diameter)
        return width <= 2.0 * reach + bar.diameter + _SLACK

    def laps_clear(self, fitted: Fitted, run: int, extent: tuple[float, float]) -> bool:
        """Whether bars that stop leave the laps over supports their clear gaps and their row.

        A lap reaches from the support's centre into the span. Where bars that stop lie beside
        it, they and the pairs of lapped bars share the width (25.5.1.2), and a layer too close
        above would void the row of the short form that the lap is taken from.
        """
        section = self.section
        first = fitted.layout.layers[0]
        bar = first.largest
        for side, end in zip(self.place.sides, extent, strict=True):
            if not self.laps_at(side):
                continue
            assert side.support is not None  # bottoms run from support to support
            lap = round_up(lap_of_size(section, bar), self.shared.step)
            zone = side.face + side.support.width / 2.0 - lap / 2.0
            if side.direction * (end - side.origin) <= zone + _SLACK:
                continue
            if not meets_short_form(section, fitted.placements[0], least_stirrups=True):
                return False
            reach = section.inner_width / 2.0 - section.corner_offset(bar.diameter)
            width = sum(other.diameter * count for other, count in first.groups)
            width += run * bar.diameter
            width += (first.count - 1) * section.required_gap(bar.diameter)
            if width > 2.0 * reach + bar.diameter + _SLACK:
                return False
        return True

    def run_is_developed(
        self, side: Side, anchor: EndAnchor, strength: RunStrength, bar: Bar, ld: float
    ) -> bool:
        """Bars that run on carry their share to their ends, and 9.7.3.8.3 holds."""
        assert side.support is not None
        end = side.face + anchor.embedment
        alone = np.minimum(side.demand, strength.phi_Mn)
        if not developed_everywhere(
            side.u,
            alone,
            strength=strength.phi_Mn,
            end=end,
            development=anchor.development,
        ):
            return False
        point = last_above(side.u, side.demand, strength.phi_Mn)
        if end - point < anchor.development - _SLACK:
            return False  # 9.7.3.4, between stations too
        zero = last_above(side.u, side.demand, 0.0)
        if zero < side.face - _SLACK and np.isfinite(zero):
            past = min(end - zero, extension(strength.d, bar.diameter))
            shear = float(np.interp(zero, side.u, side.shear))
            most = longest_at_inflection(
                self.problem.edition,
                Mn=strength.Mn,
                Vu=shear,
                beyond=past,
                compressed=False,
            )
            return ld <= most + _SLACK
        if is_simple(side):
            centre = anchor.embedment - side.support.width / 2.0
            if anchor.hooked and centre >= 0.0:
                return True
            most = longest_at_inflection(
                self.problem.edition,
                Mn=strength.Mn,
                Vu=float(side.shear[-1]),
                beyond=max(centre, 0.0),
                compressed=side.support.compresses,
            )
            return ld <= most + _SLACK
        return True


def is_simple(side: Side) -> bool:
    """Whether a side ends at a simple support."""
    return side.end_of_beam and side.support is not None and side.support.stiffness == 0.0
