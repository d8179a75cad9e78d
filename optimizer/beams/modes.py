"""Arrangements of the top face: bars through the whole beam, or hangers between the supports."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from catalogs import Bar
from engine import Section
from engine.beams.anchorage import (
    anchor_at_end,
    can_lap,
    hook_in_support,
    lap_of_size,
    schedule_length,
)
from engine.beams.continuity import continuity_rules
from engine.beams.spans import Overhang, Support
from optimizer.beams.builder import Builder, cut_length
from optimizer.beams.ends import EndRange, fit
from optimizer.beams.frames import per_length, round_up
from optimizer.beams.places import Place
from optimizer.beams.variants import Face, Piece, Role, TopKind, TopMode

_NOMINAL_LAP = {"us": 12.0, "si": 300.0}
"""Lap of bars that only hold stirrups: common practice, no source. [in or mm]"""


@dataclass(frozen=True, slots=True, kw_only=True)
class ModeBars:
    """What an arrangement costs by itself.

    Attributes
    ----------
    mode : TopMode
        Arrangement.
    cost : float
        Through bars, or hangers from face to face with their laps. [lb or kg]
    pieces : tuple of Piece
        Through bars; hangers depend on the bars over the supports and follow later.
    """

    mode: TopMode
    cost: float
    pieces: tuple[Piece, ...]


class ModeBuilder:
    """Arrangements of the top face of one beam in one frame.

    Parameters
    ----------
    shared : Builder
        What all places share.
    tops : sequence of Place
        Tops of the supports that have hogging moments.
    """

    def __init__(self, shared: Builder, tops: Sequence[Place]) -> None:
        self.shared = shared
        self.problem, self.beam = shared.problem, shared.problem.beam
        self.hogging = {place.index for place in tops}
        self.into = continuity_rules(self.problem.edition).into_support
        self.lap = _NOMINAL_LAP[self.problem.edition.units]
        self.hogging_sections = [
            replace(section, Mu=-1.0, Ms=None) for section in shared.frame.sections
        ]
        self.total = sum(span.length for span in self.beam.spans)

    def modes(self) -> list[ModeBars]:
        """All arrangements that can be built.

        Returns
        -------
        list of ModeBars
            Through bars of each size allowed, and hangers where integrity permits them.
        """
        found = []
        for bar in self.problem.rules.sizes:
            through = self._through(bar)
            if through is not None:
                found.append(through)
        if not self.problem.perimeter:
            found += [self._hangers(bar) for bar in self.problem.hangers]
        return found

    def _through(self, bar: Bar) -> ModeBars | None:
        left, right = self._end(bar, -1), self._end(bar, 1)
        if left is None or right is None:
            return None
        longest = max(self.problem.stock)
        middles = [
            self.beam.origins[index] + span.length / 2.0
            for index, span in enumerate(self.beam.spans)
            if span.overhang is Overhang.NONE
        ]
        lap = 0.0
        if can_lap(self.hogging_sections[0], bar):
            lap = max(lap_of_size(section, bar) for section in self.hogging_sections)
            lap = round_up(lap, self.shared.step)
        pieces: list[Piece] = []
        start = left
        while True:
            whole = self._piece(bar, start, right)
            if whole is not None and cut_length(self.problem, whole) <= longest + 1e-6:
                pieces.append(whole)
                break
            if not lap:
                return None
            # The farthest lap that the stock reaches: no other choice needs fewer laps.
            chosen = None
            for middle in middles:
                end = EndRange(middle + lap / 2.0, middle + lap / 2.0 + self.shared.step)
                piece = self._piece(bar, start, end)
                far = middle - lap / 2.0 > (start.need if not pieces else pieces[-1].end)
                if piece and far and cut_length(self.problem, piece) <= longest + 1e-6:
                    chosen = (piece, piece.end - lap)
            if chosen is None:
                return None
            pieces.append(chosen[0])
            start = EndRange(chosen[1], chosen[1] - self.shared.step)
        return ModeBars(
            mode=TopMode(TopKind.THROUGH, bar),
            cost=self.shared.cost(pieces),
            pieces=tuple(pieces),
        )

    def _piece(self, bar: Bar, left: EndRange, right: EndRange) -> Piece | None:
        extent = fit(left, right, self.shared.step)
        if extent is None:
            return None
        return Piece(
            face=Face.TOP,
            role=Role.THROUGH,
            bar=bar,
            count=self.shared.frame.legs,
            layer=1,
            start=extent[0],
            end=extent[1],
            surface=self.hogging_sections[0].bar_face,
            hook_start=left.hooked,
            hook_end=right.hooked,
            develop_start=self._developed(bar, left, self.beam.supports[0]),
            develop_end=self._developed(bar, right, self.beam.supports[-1]),
        )

    def _end(self, bar: Bar, direction: int) -> EndRange | None:
        """End of through bars at an end of the beam."""
        index = 0 if direction < 0 else len(self.beam.spans) - 1
        section = replace(self.shared.frame.sections[index], Mu=-1.0, Ms=None)
        edge = 0.0 if direction < 0 else self.total
        if self.beam.spans[index].overhang is not Overhang.NONE:
            tip = edge - direction * section.cover
            return EndRange(tip - direction * self.shared.step, tip)
        number = 0 if direction < 0 else len(self.beam.supports) - 1
        width = self.beam.supports[number].width
        face = edge - direction * width / 2.0
        room = width - section.bar_face
        if number not in self.hogging and not self.problem.perimeter:
            if self.into > room + 1e-9:
                return None
            # To the far side: bars may have to run past the inflection point of the next span.
            need = max(self.into, room - self.shared.step)
            return EndRange(face + direction * need, face + direction * room)
        # One length for each size, so that straight ends suit every layout; whether hooks suit
        # the bars beside them is for the places at the beam's ends to say.
        ld = schedule_length(section, bar)
        spacing = self._spacing(section, bar)
        anchor = anchor_at_end(
            section,
            bar,
            width=width,
            ld=ld,
            spacing=spacing,
            least=self.into,
            tied=self.beam.supports[number].ties,
        )
        if anchor is None:
            return None
        need = max(anchor.development, self.into) if anchor.hooked else anchor.embedment
        return EndRange(face + direction * need, face + direction * room, anchor.hooked)

    def _developed(self, bar: Bar, end: EndRange, support: Support) -> float:
        """Length that develops through bars from one end; hooks lie in a support. [in or mm]"""
        return max(
            hook_in_support(section, bar, self._spacing(section, bar), tied=support.ties)
            if end.hooked
            else schedule_length(section, bar)
            for section in self.hogging_sections
        )

    def _spacing(self, section: Section, bar: Bar) -> float:
        """Spacing of through bars alone. [in or mm]"""
        reach = section.inner_width / 2.0 - section.corner_offset(bar.diameter)
        return max(0.0, 2.0 * reach / (self.shared.frame.legs - 1))

    def _hangers(self, bar: Bar) -> ModeBars:
        length = sum(self.hanger_length(index, 0.0, 0.0) for index in self.hung())
        cost = length * self.shared.frame.legs / self.shared.unit
        return ModeBars(
            mode=TopMode(TopKind.HANGERS, bar),
            cost=cost * per_length(bar, self.problem.ranking),
            pieces=(),
        )

    def hung(self) -> list[int]:
        """Spans that hangers run along: those without long bars over their whole length."""
        found = []
        for index, span in enumerate(self.beam.spans):
            if span.overhang is Overhang.NONE or not self._tops(index):
                found.append(index)
        return found

    def _tops(self, span: int) -> list[int]:
        ends = (self.beam.left_support(span), self.beam.right_support(span))
        return [end for end in ends if end is not None and end in self.hogging]

    def hanger_length(self, span: int, left: float, right: float) -> float:
        """Length of the hangers of a span.

        Parameters
        ----------
        span : int
            Index of the span.
        left, right : float
            How far the long bars of its supports reach past the faces; zero without such bars.
            [in or mm]

        Returns
        -------
        float
            With laps, in whole steps. [in or mm]
        """
        # Long bars end whole steps from the centre of their support, so taking their reach off
        # before or after rounding is the same; that is why a support's bars can be credited
        # with the hangers they replace one by one.
        start, end = self.beam.clear_range(span)
        need, halves = end - start, 0.0
        for support, reach in (
            (self.beam.left_support(span), left),
            (self.beam.right_support(span), right),
        ):
            if support is None:
                need -= self.shared.frame.sections[span].cover
            elif support in self.hogging:
                half = self.beam.supports[support].width / 2.0
                need += self.lap + half
                halves += half + reach
            else:
                need += self.into
        return round_up(need, self.shared.step) - halves

    def hangers(self, mode: TopMode, reaches: dict[int, tuple[float, float]]) -> tuple[Piece, ...]:
        """Hangers of all spans.

        Parameters
        ----------
        mode : TopMode
            Arrangement with hangers.
        reaches : dict
            For each support with long bars their ends on the beam's axis. [in or mm]

        Returns
        -------
        tuple of Piece
            Hangers.
        """
        pieces = []
        for span in self.hung():
            origin = self.beam.origins[span]
            start, end = self.beam.clear_range(span)
            start, end = origin + start, origin + end
            left, right = self.beam.left_support(span), self.beam.right_support(span)
            past_left = reaches[left][1] - start if left in reaches else 0.0
            past_right = end - reaches[right][0] if right in reaches else 0.0
            length = self.hanger_length(span, past_left, past_right)
            if left is None:
                begin = start + self.shared.frame.sections[span].cover
            elif left in reaches:
                begin = start + past_left - self.lap
            else:
                begin = start - self.into
            pieces.append(
                Piece(
                    face=Face.TOP,
                    role=Role.HANGER,
                    bar=mode.bar,
                    count=self.shared.frame.legs,
                    layer=1,
                    start=begin,
                    end=begin + length,
                    surface=self.hogging_sections[0].bar_face,
                )
            )
        return tuple(pieces)
