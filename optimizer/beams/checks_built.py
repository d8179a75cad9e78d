"""The bars of a finished beam as its checks see them: taken from the bars, not from the search.

Layouts are put together again from the bars at a place, development lengths and strengths are
worked out anew, so that a bar that is missing or too short shows.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise
from typing import TYPE_CHECKING

from engine import Batch, Section, assess, check_layout
from engine.assessment import Assessed
from engine.beams.anchorage import development_in_layout, hook_in_support, schedule_length
from engine.beams.spans import Overhang
from engine.checks import CheckedLayout
from optimizer.beams.along import SpanStrength, strength_along
from optimizer.beams.checks_bars import (
    ending_with,
    layout_from,
    positions_of,
    true_spacing,
)
from optimizer.beams.places import Place, Side
from optimizer.beams.variants import Face, Piece, Role

if TYPE_CHECKING:
    from optimizer.beams.design import BeamDesign

SLACK = 1e-6
"""Rounding of lengths. [in or mm]"""
STRONG = (Role.RUN, Role.STOP, Role.THROUGH)
"""Bars that are counted in bending."""


@dataclass(frozen=True, kw_only=True)
class BuiltSide:
    """One side of a place with its bars.

    Attributes
    ----------
    side : Side
        Side of the place.
    section : Section
        Its section; a cantilever's is statically determinate, 9.6.1.2.
    pieces : tuple of Piece
        Bars of the place.
    tip : float
        Distance from which bars end at a free tip, a step of their lengths short of its cover;
        infinite without one. [in or mm]
    tied : bool
        Whether ties enclose hooks in the support that its bars end in.
    """

    side: Side
    section: Section
    pieces: tuple[Piece, ...]
    tip: float
    tied: bool

    @cached_property
    def found(self) -> CheckedLayout:
        """All bars together, checked in the section."""
        return check_layout(self.section, layout_from(self.pieces))

    @property
    def word(self) -> str:
        """``left`` or ``right``."""
        return "right" if self.side.direction > 0 else "left"

    def assessed(self, pieces: Sequence[Piece]) -> Assessed:
        """Strength of some of the bars alone.

        Parameters
        ----------
        pieces : sequence of Piece
            At least one.

        Returns
        -------
        Assessed
            Their figures in the section.
        """
        return assess(self.section, Batch.of([layout_from(pieces)])).row(0)

    def end(self, piece: Piece) -> float:
        """Distance of the end of bars on this side. [in or mm]"""
        place = piece.end if self.side.direction > 0 else piece.start
        return self.side.direction * (place - self.side.origin)

    def hooked(self, piece: Piece) -> bool:
        """Whether they end in a hook on this side."""
        return piece.hook_end if self.side.direction > 0 else piece.hook_start

    def straight(self, piece: Piece) -> float:
        """Development length ld of bars, straight. [in or mm]"""
        numbers = sorted({other.layer for other in self.pieces})
        layer = numbers.index(piece.layer) + 1
        return development_in_layout(self.section, self.found.placement, layer, piece.bar)

    def hook(self, piece: Piece, beside: Sequence[Piece]) -> float:
        """Development length ldh of bars with a hook beside others. [in or mm]"""
        lines = positions_of(self.found.placement, beside)
        gaps = [right - left for left, right in pairwise(lines)]
        spacing = min(gaps, default=0.0)
        if any(other.layer > 1 for other in beside):
            spacing = 0.0  # hooks in front of one another
        return hook_in_support(self.section, piece.bar, spacing, tied=self.tied)


def _tied(place: Place, side: Side) -> bool:
    """Whether ties enclose hooks in the support that bars of a side end in."""
    support = side.support if place.support is None else place.support
    return support is not None and support.ties


@dataclass(frozen=True, kw_only=True)
class BuiltPlace:
    """A place with its bars.

    Attributes
    ----------
    place : Place
        Place.
    pieces : tuple of Piece
        Bars that are counted in bending there.
    sides : tuple of BuiltSide
        Its sides; empty without bars.
    """

    place: Place
    pieces: tuple[Piece, ...]
    sides: tuple[BuiltSide, ...]

    @property
    def at_beam_end(self) -> tuple[int, BuiltSide] | None:
        """Direction in which the beam ends in the support of a top place, and the other side."""
        if self.place.face is Face.BOTTOM or len(self.sides) != 1:
            return None
        return -self.sides[0].side.direction, self.sides[0]


@dataclass(frozen=True, kw_only=True)
class Built:
    """A finished beam, seen anew.

    Attributes
    ----------
    design : BeamDesign
        Beam.
    """

    design: BeamDesign

    @cached_property
    def places(self) -> tuple[BuiltPlace, ...]:
        """Places with their bars."""
        found = []
        for place in self.design.places:
            pieces = self._pieces_at(place)
            sides = tuple(
                BuiltSide(
                    side=side,
                    section=self._section(side),
                    pieces=pieces,
                    tip=self._tip(side),
                    tied=_tied(place, side),
                )
                for side in place.sides
                if pieces
            )
            found.append(BuiltPlace(place=place, pieces=pieces, sides=sides))
        return tuple(found)

    @cached_property
    def pieces(self) -> tuple[Piece, ...]:
        """All bars with the lengths that develop them, worked out anew."""
        return tuple(self._developed(piece) for piece in self.design.pieces)

    @cached_property
    def strengths(self) -> tuple[SpanStrength, ...]:
        """Strength along each span, from the bars as they are."""
        design = self.design
        plans = [replace(plan, depth=self.depth(plan.span)) for plan in design.stirrups]
        return tuple(
            strength_along(design.problem, design.frame, design.demands, self.pieces, plans, span)
            for span in range(len(design.demands))
        )

    def bottom(self, span: int) -> BuiltPlace | None:
        """Bottom of a span; None for a cantilever."""
        for built in self.places:
            if built.place.face is Face.BOTTOM and built.place.index == span:
                return built
        return None

    def depth(self, span: int) -> float:
        """Effective depth for shear: the least of all layouts, or less as the plan took it."""
        depths = [self.design.stirrups[span].depth]
        depths += [
            side.found.d for built in self.places for side in built.sides if side.side.span == span
        ]
        return min(depths)

    def spacing(self, span: int, x: float) -> float:
        """Stirrup spacing at a distance from the left face, the wider one where it changes."""
        plan = self.design.stirrups[span]
        return max(true_spacing(plan, x - SLACK), true_spacing(plan, x + SLACK))

    def _pieces_at(self, place: Place) -> tuple[Piece, ...]:
        beam = self.design.problem.beam
        own = [
            piece
            for piece in self.design.pieces
            if piece.face is place.face and piece.role in STRONG
        ]
        if place.face is Face.BOTTOM:
            start, end = beam.clear_range(place.index)
            origin = beam.origins[place.index]
            middle = [(piece.start + piece.end) / 2.0 - origin for piece in own]
            return tuple(piece for piece, at in zip(own, middle, strict=True) if start < at < end)
        own = self._joined(own)
        faces = [side.origin for side in place.sides]
        low, high = min(faces), max(faces)
        return tuple(
            piece for piece in own if piece.start <= low + SLACK and piece.end >= high - SLACK
        )

    @staticmethod
    def _joined(pieces: list[Piece]) -> list[Piece]:
        """Through bars as one as far as they are lapped: they run on at each lap."""
        through = sorted((p for p in pieces if p.role is Role.THROUGH), key=lambda p: p.start)
        joined: list[Piece] = []
        for piece in through:
            if joined and joined[-1].bar == piece.bar and joined[-1].end > piece.start + SLACK:
                joined[-1] = replace(
                    joined[-1],
                    end=piece.end,
                    hook_end=piece.hook_end,
                    count=min(piece.count, joined[-1].count),
                )
            else:
                joined.append(piece)
        return [*(p for p in pieces if p.role is not Role.THROUGH), *joined]

    def _section(self, side: Side) -> Section:
        free = math.isfinite(self._tip(side))
        return replace(side.section, statically_determinate=True) if free else side.section

    def _tip(self, side: Side) -> float:
        problem = self.design.problem
        if problem.beam.spans[side.span].overhang is Overhang.NONE:
            return math.inf
        return side.face - side.section.cover - problem.length_step - SLACK

    def _developed(self, piece: Piece) -> Piece:
        if piece.role not in STRONG:
            return piece
        start = end = 0.0
        for built in self.places:
            through = piece.role is Role.THROUGH and any(
                other.role is Role.THROUGH and other.start <= piece.start and other.end >= piece.end
                for other in built.pieces
            )
            if piece not in built.pieces and not through:
                continue
            for direction in (-1, 1):
                own = [side for side in built.sides if side.side.direction == direction]
                side = own[0] if own else built.sides[0]
                hooked = piece.hook_end if direction > 0 else piece.hook_start
                beside = ending_with(built.pieces, piece, direction)
                length = side.hook(piece, beside) if hooked else side.straight(piece)
                if direction > 0:
                    end = max(end, length)
                else:
                    start = max(start, length)
        if piece.role is Role.THROUGH:
            least = [
                schedule_length(replace(section, Mu=-1.0, Ms=None), piece.bar)
                for section in self.design.frame.sections
            ]
            start = start if piece.hook_start else max(start, *least)
            end = end if piece.hook_end else max(end, *least)
        return replace(
            piece,
            develop_start=start or piece.develop_start,
            develop_end=end or piece.develop_end,
        )
