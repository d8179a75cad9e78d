"""Ends of top bars over one support: of those that run on, and of those that stop."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from itertools import pairwise, product

import numpy as np

from catalogs import Bar
from engine import Section
from engine.beams.anchorage import anchor_at_end, hook_in_support
from engine.beams.continuity import continuity_rules
from engine.beams.cutoffs import developed_everywhere, extension_past_inflection, last_above
from optimizer.beams.builder import Builder, Developments, stopping_bars
from optimizer.beams.ends import EndRange, StopEnd, Stopping, fit, stop_ends
from optimizer.beams.frames import round_up
from optimizer.beams.listing import Fitted
from optimizer.beams.places import Place, Side
from optimizer.beams.strengths import Strengths, hook_spacing, run_spacing
from optimizer.beams.variants import Face, Piece

_SLACK = 1e-6


class TopEnds:
    """Ends of the bars over one support.

    Parameters
    ----------
    shared : Builder
        What all places share.
    place : Place
        Top over the support.
    """

    def __init__(self, shared: Builder, place: Place) -> None:
        self.shared, self.place = shared, place
        self.problem = shared.problem
        assert place.support is not None  # tops lie over supports
        self.support = place.support
        self.strengths = [Strengths(side.section) for side in place.sides]
        self.developments = [Developments(item) for item in self.strengths]
        self.rules = continuity_rules(self.problem.edition)

    def refuse(self, why: str) -> None:
        """Take note of why bars were refused here.

        Parameters
        ----------
        why : str
            Rule in words.
        """
        self.shared.refuse(self.place.mark, why)

    def directions(self) -> tuple[tuple[int, Side | None], ...]:
        """Both directions, each with its side; None where the beam ends in the support."""
        return ((-1, self.place.left), (1, self.place.right))

    def _half(self, side: Side) -> float:
        """Farthest end of bars on a side: the middle of the span, or short of a tip."""
        if side.end_of_beam:
            return side.face - side.section.cover
        return side.ln / 2.0

    def number(self, index: int) -> int:
        """Index among the sides there are."""
        return index if self.place.left is not None else 0

    def _on_step(self, end: float) -> float:
        """An end that lies whole steps from the support's centre, so that hangers fit too."""
        half = self.support.width / 2.0
        return round_up(end + half, self.shared.step) - half

    def run_reaches(self, fitted: Fitted, bar: Bar, run: int) -> tuple[EndRange, EndRange] | None:
        """Ends of the long bars: past the inflection points, at a tip, or in the support."""
        found: list[EndRange] = []
        for index, (direction, side) in enumerate(self.directions()):
            if side is None:
                anchored = self._in_support(fitted, bar, direction)
                if anchored is None:
                    return None
                found.append(anchored)
                continue
            number = self.number(index)
            strength = self.strengths[number].of_run(bar, run)
            ld = self.developments[number].of(fitted.placements[number], 1, bar)
            if side.end_of_beam:
                # At a tip the last step of the length is free, so that whole steps fit.
                limit = self._half(side)
                end = limit - self.shared.step
                found.append(EndRange(side.at(end), side.at(limit)))
                if not _developed_at_tip(side, fitted.d[number], strength.phi_Mn, end, ld):
                    return None
            else:
                if side.demand[-1] > _SLACK * side.section.demand:
                    return None  # no inflection point: hangers would carry tension
                zero = max(last_above(side.u, side.demand, 0.0), 0.0)
                d, db = fitted.d[number], bar.diameter
                end = zero + extension_past_inflection(d, db, side.ln)
                # 9.7.3.4: developed where the others are no longer needed.
                point = last_above(side.u, side.demand, strength.phi_Mn)
                end = self._on_step(max(end, ld - self.support.width, point + ld))
                if end > self._half(side) + _SLACK:
                    return None
                found.append(EndRange(side.at(end), side.at(end)))
                alone = np.minimum(side.demand, strength.phi_Mn)
                if not developed_everywhere(
                    side.u, alone, strength=strength.phi_Mn, end=end, development=ld
                ):
                    return None
        return found[0], found[1]

    def _in_support(
        self, fitted: Fitted, bar: Bar, direction: int, layer: int = 1
    ) -> EndRange | None:
        """End of bars inside an end support, where they are developed at its face."""
        side = self.place.sides[0]
        ld = self.developments[0].of(fitted.placements[0], layer, bar)
        section: Section = side.section
        spacing = hook_spacing(fitted.placements[0])
        anchor = anchor_at_end(
            section,
            bar,
            width=self.support.width,
            ld=ld,
            spacing=spacing,
            tied=self.support.ties,
        )
        if anchor is None:
            self.refuse("its bars cannot be anchored in the end support (25.4)")
            return None
        face = side.origin  # the face towards the span
        room = self.support.width - section.bar_face
        need = anchor.development if anchor.hooked else anchor.embedment
        return EndRange(face + direction * need, face + direction * room, anchor.hooked)

    def stops(
        self, fitted: Fitted, bar: Bar, run: int, *, enough: bool
    ) -> list[tuple[tuple[Piece, ...], tuple[StopEnd | None, StopEnd | None]]]:
        """Bars that stop, for each choice of their ends; one empty choice if none stop."""
        stopping = stopping_bars(fitted, run)
        if not stopping:
            return [((), (None, None))]
        largest = max((other for _, other, _ in stopping), key=lambda item: item.diameter)
        needed = False
        bars_of: list[Stopping] = []
        for number, side in enumerate(self.place.sides):
            strength = self.strengths[number].of_run(bar, run)
            placement = fitted.placements[number]
            limit = strength.service_limit(side.section, run_spacing(placement, bar, run))
            ld = max(
                self.developments[number].of(placement, layer, other)
                for layer, other, _ in stopping
            )
            needed |= float(side.demand.max()) > strength.usable
            needed |= float(side.service.max()) > limit
            bars_of.append(
                Stopping(
                    strong=fitted.phi_Mn[number],
                    run=strength,
                    service_limit=limit,
                    d=fitted.d[number],
                    largest=largest,
                    ld=ld,
                    least=max(
                        ld - self.support.width, fitted.d[number], 12.0 * largest.diameter, 0.0
                    ),
                )
            )
        if not needed:
            return []  # the bars that run on are enough: a layout of their own
        choices: list[list[tuple[StopEnd | None, EndRange]]] = []
        for index, (direction, one_side) in enumerate(self.directions()):
            if one_side is None:
                anchored = self._stop_in_support(fitted, stopping, direction)
                if anchored is None:
                    return []
                choices.append([(None, anchored)])
                continue
            number = self.number(index)
            past = 0.0
            if not enough:
                past = extension_past_inflection(fitted.d[number], largest.diameter, one_side.ln)
            farthest = self._half(one_side)
            ends = stop_ends(
                self.problem.edition,
                one_side,
                bars_of[number],
                farthest=farthest,
                nearest=farthest,
                exempt=one_side.end_of_beam,
                past_inflection=past,
            )
            choices.append(
                [(end, EndRange(one_side.at(end.u), one_side.at(farthest))) for end in ends]
            )
        found = []
        for left, right in product(*choices):
            extent = fit(left[1], right[1], self.shared.step)
            if extent is not None:
                pieces = self._stop_pieces(fitted, run, left[1], right[1], extent)
                found.append((pieces, (left[0], right[0])))
        return found

    def _stop_in_support(
        self, fitted: Fitted, stopping: Sequence[tuple[int, Bar, int]], direction: int
    ) -> EndRange | None:
        """Common end, inside the support, of all bars that stop on the other side."""
        ends = [self._in_support(fitted, other, direction, layer) for layer, other, _ in stopping]
        good = [end for end in ends if end is not None]
        if len(good) < len(ends):
            return None
        need = max(end.need * direction for end in good) * direction
        return EndRange(need, good[0].limit, any(end.hooked for end in good))

    def _stop_pieces(
        self,
        fitted: Fitted,
        run: int,
        left: EndRange,
        right: EndRange,
        extent: tuple[float, float],
    ) -> tuple[Piece, ...]:
        plain = self.shared.stop_pieces(Face.TOP, fitted, run, extent, self.developments)
        return tuple(
            replace(
                piece,
                hook_start=left.hooked,
                hook_end=right.hooked,
                develop_start=self._hook(fitted, piece.bar) if left.hooked else piece.develop_start,
                develop_end=self._hook(fitted, piece.bar) if right.hooked else piece.develop_end,
            )
            for piece in plain
        )

    def developed(self, fitted: Fitted, bar: Bar, end: EndRange, number: int) -> float:
        """Length that develops long bars from one end. [in or mm]"""
        if end.hooked:
            return self._hook(fitted, bar)
        return self.developments[number].of(fitted.placements[number], 1, bar)

    def _hook(self, fitted: Fitted, bar: Bar) -> float:
        """Development length of a hook among all bars of the place. [in or mm]"""
        spacing = hook_spacing(fitted.placements[0])
        section = self.place.sides[0].section
        return hook_in_support(section, bar, spacing, tied=self.support.ties)

    def through_bars_end_well(self, fitted: Fitted, through: Sequence[Piece]) -> bool:
        """Whether the ends of through bars suit the bars here.

        Parameters
        ----------
        fitted : Fitted
            Layout of the place.
        through : sequence of Piece
            Through bars of the beam, from left to right.

        Returns
        -------
        bool
            False where a hook beside the other bars would need more than it has, or where the
            bars end too soon past the inflection point of this support, 9.7.3.8.4.
        """
        ends = {-1: through[0], 1: through[-1]}
        for number, side in enumerate(self.place.sides):
            if len(self.place.sides) == 1:
                last = ends[-side.direction]
                end = last.start if side.direction > 0 else last.end
                hooked = last.hook_start if side.direction > 0 else last.hook_end
                embedment = abs(side.origin - end)
                if hooked and self._hook(fitted, last.bar) > embedment + _SLACK:
                    return False
            if side.end_of_beam or side.demand[-1] > _SLACK * side.section.demand:
                continue  # at a tip, or where hogging never ends, there is no inflection point
            last = ends[side.direction]
            end = last.end if side.direction > 0 else last.start
            zero = max(last_above(side.u, side.demand, 0.0), 0.0)
            past = extension_past_inflection(fitted.d[number], last.bar.diameter, side.ln)
            if side.at(zero + past) * side.direction > end * side.direction + _SLACK:
                return False
        return True

    def laps_clear(
        self,
        fitted: Fitted,
        run: int,
        through: Sequence[Piece],
        stops: Sequence[Piece],
    ) -> bool:
        """Whether bars that stop leave the laps of through bars their clear gaps, 25.5.1.2.

        Parameters
        ----------
        fitted : Fitted
            Layout of the place.
        run : int
            Number of through bars.
        through, stops : sequence of Piece
            Through bars of the beam, and bars of the place that stop.

        Returns
        -------
        bool
            False where bars that stop reach into a lap and do not fit beside its pairs.
        """
        first = fitted.layout.layers[0]
        zones = [(right.start, left.end) for left, right in pairwise(through)]
        for piece in stops:
            if all(
                piece.end <= low + _SLACK or piece.start >= high - _SLACK for low, high in zones
            ):
                continue
            for side in self.place.sides:
                section = side.section
                reach = section.inner_width / 2.0 - section.corner_offset(first.largest.diameter)
                width = sum(bar.diameter * count for bar, count in first.groups)
                width += run * first.largest.diameter
                width += (first.count - 1) * section.required_gap(first.largest.diameter)
                if width > 2.0 * reach + first.largest.diameter + _SLACK:
                    return False
        return True

    def developed_at_tips(
        self,
        fitted: Fitted,
        run: int,
        through: Sequence[Piece],
        ends: tuple[StopEnd | None, StopEnd | None],
    ) -> bool:
        """Whether through bars are developed before a tip where others stop, 9.7.3.4.

        Parameters
        ----------
        fitted : Fitted
            Layout of the place.
        run : int
            Number of through bars.
        through : sequence of Piece
            Through bars of the beam, from left to right.
        ends : tuple of StopEnd or None
            Ends of the bars that stop, to the left and to the right.

        Returns
        -------
        bool
            False where through bars, left alone, are stressed beyond what they have developed.
        """
        bar = through[0].bar
        for index, (direction, side) in enumerate(self.directions()):
            stop = ends[index]
            if side is None or not side.end_of_beam:
                continue
            if stop is not None and stop.u >= self._half(side) - _SLACK:
                continue  # all bars end at the tip
            number = self.number(index)
            strength = self.strengths[number].of_run(bar, run).phi_Mn
            last = through[0].start if direction < 0 else through[-1].end
            # The length that through bars have for all layouts.
            ld = through[0].develop_start if direction < 0 else through[-1].develop_end
            if not _developed_at_tip(side, fitted.d[number], strength, abs(last - side.origin), ld):
                return False
        return True


def _developed_at_tip(side: Side, d: float, strength: float, end: float, ld: float) -> bool:
    """Whether bars that run to a tip are developed where they work alone, 9.7.3.1 and .4.

    The last stretch of a depth is left out: there the moment has all but vanished, and the bars
    end at their cover.
    """
    point = last_above(side.u, side.demand, strength)
    if np.isfinite(point) and end - point < ld - _SLACK:
        return False
    inside = side.u <= side.face - min(d, side.ln / 4.0)
    return developed_everywhere(
        side.u[inside],
        np.minimum(side.demand[inside], strength),
        strength=strength,
        end=end,
        development=ld,
    )
