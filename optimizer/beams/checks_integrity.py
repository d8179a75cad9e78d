"""Checks of structural integrity, 9.7.7: bars through the beam, and closed stirrups."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from itertools import pairwise

from engine.beams.bending import Shape
from engine.beams.continuity import continuity_rules
from engine.check_row import State, ratio_of, verdict
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.checks_built import SLACK, Built, BuiltPlace
from optimizer.beams.checks_laps import running_bars, through_bars
from optimizer.beams.variants import Face, Piece, Role


def integrity_rows(built: Built) -> Iterator[BeamCheck]:
    """Rows of continuous bars.

    Parameters
    ----------
    built : Built
        Finished beam.

    Yields
    ------
    BeamCheck
        `integrity_bottom`, `integrity_top`, `integrity_stirrups`.
    """
    for place in built.places:
        if place.place.face is Face.BOTTOM:
            yield _bottom(built, place)
        else:
            yield _top(built, place)
    yield from _stirrups(built)


def _bottom(built: Built, place: BuiltPlace) -> BeamCheck:
    """A quarter of the sagging steel, two bars, from end to end of the beam."""
    problem = built.design.problem
    rules = continuity_rules(problem.edition)
    blank = BeamCheck(
        id="integrity_bottom",
        clause="9.7.7.1" if problem.perimeter else "9.7.7.2",
        where=place.place.mark,
        state=State.NOT_APPLICABLE,
    )
    if problem.closed_stirrups and not problem.perimeter:
        return replace(blank, note="closed stirrups instead, 9.7.7.2 (b): see integrity_stirrups")
    beam, span = problem.beam, place.place.index
    own = running_bars(built, span)
    for side in place.sides:
        face = side.side.at(side.side.face)
        own = [piece for piece in own if side.end(piece) > side.side.face + SLACK]
        if side.side.end_of_beam:
            continue
        number = beam.left_support(span) if side.side.direction < 0 else beam.right_support(span)
        assert number is not None  # an inner support
        other = span + side.side.direction
        met = [
            piece
            for piece in running_bars(built, other)
            if side.side.direction
            * (face - (piece.start if side.side.direction > 0 else piece.end))
            > -beam.supports[number].width - SLACK
        ]
        least = sum(piece.count for piece in met)
        counted: list[Piece] = []
        for piece in own:
            count = min(piece.count, least)
            least -= count
            if count:
                counted.append(replace(piece, count=count))
        own = counted
    need = rules.through_bottom * sum(p.bar.area * p.count for p in place.pieces)
    given = sum(p.bar.area * p.count for p in own)
    bars = sum(p.count for p in own)
    good = given >= need * (1 - SLACK) and bars >= rules.least_bars
    return replace(
        blank,
        quantity="area",
        demand=need,
        limit=given,
        ratio=ratio_of(need, given),
        state=verdict(good),
        note=f"1/4 of the bars and 2 or more continuous: {bars} are; lengths in laps, development",
    )


def _top(built: Built, place: BuiltPlace) -> BeamCheck:
    """A sixth of the hogging steel, two bars, from end to end of a perimeter beam."""
    problem = built.design.problem
    blank = BeamCheck(
        id="integrity_top",
        clause="9.7.7.1",
        where=place.place.mark,
        state=State.NOT_APPLICABLE,
    )
    if not problem.perimeter:
        return replace(blank, note="asked for in perimeter beams only")
    rules = continuity_rules(problem.edition)
    through = [piece for piece in place.pieces if piece.role is Role.THROUGH]
    whole = _through_is_whole(built)
    need = rules.through_top * sum(p.bar.area * p.count for p in place.pieces)
    given = sum(p.bar.area * p.count for p in through) if whole else 0.0
    bars = sum(p.count for p in through) if whole else 0
    return replace(
        blank,
        quantity="area",
        demand=need,
        limit=given,
        ratio=ratio_of(need, given),
        state=verdict(given >= need * (1 - SLACK) and bars >= rules.least_bars),
        note=f"1/6 of the bars and 2 or more continuous: {bars} are",
    )


def _through_is_whole(built: Built) -> bool:
    """Whether the through bars run from the first to the last support without a gap."""
    through = through_bars(built)
    beam = built.design.problem.beam
    if not through:
        return False
    start = beam.origins[beam.first_support] + beam.supports[0].width / 2.0
    index = beam.first_support + len(beam.supports) - 2
    end = beam.origins[index] + beam.spans[index].length - beam.supports[-1].width / 2.0
    joined = all(a.end > b.start + SLACK for a, b in pairwise(through))
    return joined and through[0].start <= start - SLACK and through[-1].end >= end + SLACK


def _stirrups(built: Built) -> Iterator[BeamCheck]:
    """Closed stirrups along the clear spans, 9.7.7.1 and 9.7.7.2 (b)."""
    design = built.design
    problem = design.problem
    shapes = {mark.mark: mark.shape.shape for mark in design.schedule.marks}
    for plan, names in zip(design.stirrups, design.schedule.of_stirrups, strict=True):
        where = problem.beam.spans[plan.span].mark
        clause = "9.7.7.1" if problem.perimeter else "9.7.7.2"
        blank = BeamCheck(
            id="integrity_stirrups", clause=clause, where=where, state=State.NOT_APPLICABLE
        )
        if not problem.perimeter and not problem.closed_stirrups:
            yield replace(blank, note="continuous bottom bars instead: see integrity_bottom")
            continue
        closed = bool(names) and all(shapes.get(name) is Shape.CLOSED for name in names)
        clear = problem.beam.clear_length(plan.span)
        (_, left), (_, right), _ = plan.zones
        covered = abs(plan.clear - clear) <= SLACK and left <= right + SLACK
        yield replace(
            blank,
            state=verdict(closed and covered),
            note="closed stirrups with 135-degree hooks (25.7.1.6) along the clear span",
        )
