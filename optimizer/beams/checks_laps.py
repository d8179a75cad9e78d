"""Checks of laps, 25.5: bars over supports and within spans, and bars that hold stirrups."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise

from engine import Section
from engine.beams.anchorage import can_lap, lap_of_size, schedule_length
from engine.beams.spans import Overhang
from engine.check_row import State, ratio_of, verdict
from engine.units import plain
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.checks_built import SLACK, Built
from optimizer.beams.variants import Face, Piece, Role

_NOMINAL_LAP = {"us": 12.0, "si": 300.0}  # of bars that only hold stirrups, common practice
_PRACTICE = "common practice"


@dataclass(frozen=True, slots=True, kw_only=True)
class _Lap:
    """Bars of two lengths side by side.

    Attributes
    ----------
    where : str
        Support or span.
    left, right : Piece
        Bars that come from the left and from the right.
    zone : tuple of float
        Where the lap has to lie: its middle. [in or mm]
    beside : tuple of Piece
        Other bars of the same layer there.
    section : Section
        Section with the narrowest web.
    meaning : str
        Place in words.
    """

    where: str
    left: Piece
    right: Piece
    zone: tuple[float, float]
    beside: tuple[Piece, ...]
    section: Section
    meaning: str

    @property
    def length(self) -> float:
        """Length of the lap. [in or mm]"""
        return self.left.end - self.right.start

    @property
    def middle(self) -> float:
        """Place of its middle. [in or mm]"""
        return (self.left.end + self.right.start) / 2.0


def lap_rows(built: Built) -> Iterator[BeamCheck]:
    """Rows of laps.

    Parameters
    ----------
    built : Built
        Finished beam.

    Yields
    ------
    BeamCheck
        `laps`, `lap_gap`, `hanger_laps`.
    """
    laps = [*_bottom_laps(built), *_top_laps(built)]
    if not laps:
        for row, clause in (("laps", "25.5.2.1"), ("lap_gap", "25.5.1.2")):
            yield BeamCheck(
                id=row,
                clause=clause,
                where="beam",
                state=State.NOT_APPLICABLE,
                note="no bars in tension are lapped",
            )
    for lap in laps:
        yield _length(lap)
        yield _gap(lap)
    yield from _hanger_laps(built)


def running_bars(built: Built, span: int | None) -> list[Piece]:
    """Bottom bars of a span that run on; none without such a span."""
    place = None if span is None else built.bottom(span)
    return [] if place is None else [p for p in place.pieces if p.role is Role.RUN]


def through_bars(built: Built) -> list[Piece]:
    """Through bars from left to right."""
    found = [piece for piece in built.design.pieces if piece.role is Role.THROUGH]
    return sorted(found, key=lambda piece: piece.start)


def _bottom_laps(built: Built) -> Iterator[_Lap]:
    """Laps of bottom bars over the inner supports."""
    problem = built.design.problem
    if problem.closed_stirrups and not problem.perimeter:
        return
    beam = problem.beam
    for number, support in enumerate(beam.supports):
        left, right = beam.left_span(number), beam.right_span(number)
        if left is None or right is None:
            continue
        own, other = running_bars(built, left), running_bars(built, right)
        if not own or not other:
            continue
        centre = beam.origins[right]
        one = min(own, key=lambda piece: piece.end)
        two = max(other, key=lambda piece: piece.start)
        sections = [replace(built.design.frame.sections[s], Mu=1.0, Ms=None) for s in (left, right)]
        yield _Lap(
            where=f"{support.mark} bottom",
            left=one,
            right=two,
            zone=(centre - support.width, centre + support.width),
            beside=_beside(built, Face.BOTTOM, [*own, *other], one.end, two.start),
            section=min(sections, key=lambda section: section.outline.web),
            meaning="over the support",
        )


def _top_laps(built: Built) -> Iterator[_Lap]:
    """Laps of through bars within the spans."""
    beam = built.design.problem.beam
    through = through_bars(built)
    for one, two in pairwise(through):
        middle = (one.end + two.start) / 2.0
        span = max(
            index for index, start in enumerate(beam.origins) if start <= middle or index == 0
        )
        start, end = (beam.origins[span] + at for at in beam.clear_range(span))
        third = (end - start) / 3.0
        free = beam.spans[span].overhang is not Overhang.NONE
        section = replace(built.design.frame.sections[span], Mu=-1.0, Ms=None)
        yield _Lap(
            where=f"{beam.spans[span].mark} top",
            left=one,
            right=two,
            zone=(end, start) if free else (start + third, end - third),
            beside=_beside(built, Face.TOP, [one, two], one.end, two.start),
            section=section,
            meaning="near midspan",
        )


def _beside(
    built: Built, face: Face, lapped: Sequence[Piece], end: float, start: float
) -> tuple[Piece, ...]:
    """Other bars of layer 1 along a lap."""
    return tuple(
        piece
        for piece in built.design.pieces
        if piece.face is face
        and piece.layer == 1
        and piece.role in (Role.STOP, Role.RUN)
        and piece not in lapped
        and piece.start < end - SLACK
        and piece.end > start + SLACK
    )


def _length(lap: _Lap) -> BeamCheck:
    """Lap of class B, where it may be, of bars that may be lapped."""
    section, bars = lap.section, (lap.left.bar, lap.right.bar)
    blank = BeamCheck(
        id="laps",
        clause="25.5.2.1",
        where=lap.where,
        at=lap.middle,
        state=State.FAILS,
    )
    if not all(can_lap(section, bar) for bar in bars):
        note = "bars of this size may not be lapped in tension"
        return replace(blank, clause="25.5.1.1", note=note)
    large, small = sorted(bars, key=lambda bar: -bar.diameter)
    need = lap_of_size(section, large)
    if small != large:
        need = max(schedule_length(section, large), lap_of_size(section, small))
    inside = lap.zone[0] - SLACK <= lap.middle <= lap.zone[1] + SLACK
    note = f"class B, {lap.meaning} (9.7.7.5)" + ("" if inside else ": it is not there")
    return replace(
        blank,
        quantity="length",
        demand=need,
        limit=lap.length,
        ratio=ratio_of(need, lap.length),
        state=verdict(inside and lap.length >= need - SLACK),
        note=note,
    )


def _gap(lap: _Lap) -> BeamCheck:
    """Clear gap between pairs of lapped bars and their neighbours, 25.5.1.2."""
    section = lap.section
    one, two = lap.left, lap.right
    groups = max(one.count, two.count) + sum(piece.count for piece in lap.beside)
    largest = max(p.bar.diameter for p in (one, two, *lap.beside))
    taken = sum(p.bar.diameter * p.count for p in (one, two, *lap.beside))
    corner = max(one.bar.diameter, two.bar.diameter)
    width = section.inner_width - 2.0 * section.corner_offset(corner) + corner
    need = section.required_gap(largest)
    gap = (width - taken) / (groups - 1) if groups > 1 else width
    others = f", {sum(p.count for p in lap.beside)} others beside" if lap.beside else ""
    return BeamCheck(
        id="lap_gap",
        clause="25.5.1.2",
        where=lap.where,
        at=lap.middle,
        quantity="length",
        demand=need,
        limit=gap,
        ratio=ratio_of(need, gap),
        state=verdict(gap >= need - SLACK),
        note=f"{one.count} bars with {two.count}, side by side{others}",
    )


def _hanger_laps(built: Built) -> Iterator[BeamCheck]:
    """Bars that only hold stirrups, lapped with those over the supports."""
    design = built.design
    beam = design.problem.beam
    need = _NOMINAL_LAP[design.edition.units]
    tops = {
        place.place.index: [p for p in place.pieces if p.role is Role.RUN]
        for place in built.places
        if place.place.face is Face.TOP
    }
    hangers = [p for p in design.pieces if p.role is Role.HANGER and p.face is Face.TOP]
    if not hangers:
        yield BeamCheck(
            id="hanger_laps",
            clause=_PRACTICE,
            where="beam",
            state=State.NOT_APPLICABLE,
            note="no hangers: bars run through",
        )
    for piece in hangers:
        middle = (piece.start + piece.end) / 2.0
        span = max(index for index, start in enumerate(beam.origins) if start <= middle)
        laps = []
        for number, sign in ((beam.left_support(span), -1), (beam.right_support(span), 1)):
            long = tops.get(number, []) if number is not None else []
            if sign < 0:
                laps += [other.end - piece.start for other in long]
            else:
                laps += [piece.end - other.start for other in long]
        blank = BeamCheck(
            id="hanger_laps",
            clause=_PRACTICE,
            where=f"{beam.spans[span].mark} top",
            state=State.NOT_APPLICABLE,
        )
        if not laps:
            yield replace(blank, note="no bars over the supports to lap with")
            continue
        given = min(laps)
        yield replace(
            blank,
            quantity="length",
            demand=need,
            limit=given,
            ratio=ratio_of(need, given),
            state=verdict(given >= need - SLACK),
            note=f"{plain(need)} {design.frame.sections[span].length_unit}; they carry no tension",
        )
