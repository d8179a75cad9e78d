"""Checks of the ends of bars that run on: development, supports, inflection points."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

import numpy as np

from engine.beams.continuity import continuity_rules
from engine.beams.cutoffs import (
    extension,
    extension_past_inflection,
    last_above,
    longest_at_inflection,
)
from engine.beams.spans import Overhang
from engine.check_row import State, ratio_of, verdict
from engine.units import plain
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.checks_bars import ending_with
from optimizer.beams.checks_built import SLACK, Built, BuiltPlace, BuiltSide
from optimizer.beams.variants import Face, Piece, Role

_NOTHING = 1e-6  # share of a side's largest moment that is no moment


def anchorage_rows(built: Built) -> Iterator[BeamCheck]:
    """Rows of the ends of bars.

    Parameters
    ----------
    built : Built
        Finished beam.

    Yields
    ------
    BeamCheck
        `development`, `bars_into_support`, `development_at_inflection`,
        `top_bars_past_inflection`, `end_cover`.
    """
    for place in built.places:
        if place.place.face is Face.BOTTOM:
            for side in place.sides:
                yield _bottom_development(built, place, side)
                yield _into_support(built, place, side)
                yield _at_inflection(built, place, side)
        else:
            yield from _top_development(place)
            for side in place.sides:
                yield _past_inflection(built, place, side)
    yield from _end_cover(built)


def _worst_anchor(
    side: BuiltSide, pieces: list[Piece], direction: int, face: float
) -> tuple[float, float, str]:
    """Need, embedment and note of the bars that are nearest to too short.

    `face` is the place of the support's face, `direction` that from it into the support.
    """
    found = []
    for piece in pieces:
        place = piece.end if direction > 0 else piece.start
        hooked = piece.hook_end if direction > 0 else piece.hook_start
        given = direction * (place - face)
        beside = ending_with(side.pieces, piece, direction)
        need = side.hook(piece, beside) if hooked else side.straight(piece)
        kind = "hook, ldh" if hooked else "straight, ld"
        found.append((need / max(given, 1e-9), need, given, f"{piece.bar.designation} {kind}"))
    _, need, given, note = max(found)
    return need, given, note


def _anchor_row(blank: BeamCheck, need: float, given: float, note: str) -> BeamCheck:
    return replace(
        blank,
        quantity="length",
        demand=need,
        limit=given,
        ratio=ratio_of(need, given),
        state=verdict(given >= need - SLACK),
        note=note,
    )


def _bottom_development(built: Built, place: BuiltPlace, side: BuiltSide) -> BeamCheck:
    """Bars of the bottom developed at the face of an end support, 9.7.7.4."""
    blank = BeamCheck(
        id="development",
        clause="9.7.7.4",
        where=f"{place.place.mark} {side.word}",
        at=side.side.at(side.side.face),
        state=State.NOT_APPLICABLE,
    )
    problem = built.design.problem
    if not side.side.end_of_beam:
        return replace(blank, note="inner support: see laps, bars_into_support")
    if problem.closed_stirrups:
        return replace(blank, note="closed stirrups serve integrity; see bars_into_support")
    running = [piece for piece in side.pieces if piece.role is Role.RUN]
    if not running:
        return replace(blank, state=State.FAILS, note="no bars run into the support")
    face = side.side.at(side.side.face)
    return _anchor_row(blank, *_worst_anchor(side, running, side.side.direction, face))


def _top_development(place: BuiltPlace) -> Iterator[BeamCheck]:
    """Bars of the top developed at the face of an end support, 9.7.3.1."""
    blank = BeamCheck(
        id="development", clause="9.7.3.1", where=place.place.mark, state=State.NOT_APPLICABLE
    )
    ends = place.at_beam_end
    if not place.sides:
        return
    if ends is None:
        yield replace(blank, note="the bars run through the support")
        return
    direction, side = ends
    face = side.side.origin
    yield _anchor_row(
        replace(blank, at=face), *_worst_anchor(side, list(place.pieces), direction, face)
    )


def _simple(side: BuiltSide) -> bool:
    """Whether the side's support is an end support that lets the beam turn."""
    support = side.side.support
    return side.side.end_of_beam and support is not None and support.stiffness == 0.0


def _into_support(built: Built, place: BuiltPlace, side: BuiltSide) -> BeamCheck:
    """Share of the bottom bars that runs into the support, 9.7.3.8.1 and .2."""
    rules = continuity_rules(built.design.edition)
    simple = _simple(side)
    share = rules.at_simple_support if simple else rules.at_other_support
    need = share * sum(piece.bar.area * piece.count for piece in place.pieces)
    given = sum(
        piece.bar.area * piece.count
        for piece in place.pieces
        if side.end(piece) >= side.side.face + rules.into_support - SLACK
    )
    unit = side.section.length_unit
    return BeamCheck(
        id="bars_into_support",
        clause="9.7.3.8.1" if simple else "9.7.3.8.2",
        where=f"{place.place.mark} {side.word}",
        at=side.side.at(side.side.face),
        quantity="area",
        demand=need,
        limit=given,
        ratio=ratio_of(need, given),
        state=verdict(given >= need * (1 - SLACK)),
        note=f"{'1/3' if simple else '1/4'} of the bars, {plain(rules.into_support)} {unit} in",
    )


def _at_inflection(built: Built, place: BuiltPlace, side: BuiltSide) -> BeamCheck:
    """Size of bottom bars at a simple support or an inflection point, 9.7.3.8.3."""
    own = side.side
    blank = BeamCheck(
        id="development_at_inflection",
        clause="9.7.3.8.3",
        where=f"{place.place.mark} {side.word}",
        state=State.NOT_APPLICABLE,
    )
    running = [piece for piece in place.pieces if piece.role is Role.RUN]
    if not running:
        return replace(blank, state=State.FAILS, note="no bars run on")
    alone = side.assessed(running)
    piece = max(running, key=lambda item: item.bar.diameter)
    end = min(side.end(item) for item in running)
    ld = max(side.straight(item) for item in running)
    zero = last_above(own.u, own.demand, _NOTHING * float(own.demand.max()))
    zero = max(zero, 0.0)
    edition = built.design.edition
    if zero < own.face - SLACK:
        past = min(end - zero, extension(alone.d, piece.bar.diameter))
        Vu = float(np.interp(zero, own.u, own.shear))
        most = longest_at_inflection(edition, Mn=alone.Mn, Vu=Vu, beyond=past, compressed=False)
        note = "at the inflection point: Mn/Vu + la"
    elif _simple(side) and own.support is not None:
        zero = own.face
        centre = end - own.face - own.support.width / 2.0
        if all(side.hooked(item) for item in running) and centre >= 0.0:
            return replace(blank, note="hooks beyond the centre of the simple support")
        compressed = own.support.compresses
        most = longest_at_inflection(
            edition,
            Mn=alone.Mn,
            Vu=float(own.shear[-1]),
            beyond=max(centre, 0.0),
            compressed=compressed,
        )
        note = f"at the simple support: {'1.3 Mn/Vu' if compressed else 'Mn/Vu'} + la"
    else:
        return replace(blank, note="neither a simple support nor an inflection point")
    at = own.at(zero)
    if not np.isfinite(most):
        return replace(blank, at=at, state=State.OK, note="no shear there")
    return _anchor_row(replace(blank, at=at), ld, float(most), note)


def _past_inflection(built: Built, place: BuiltPlace, side: BuiltSide) -> BeamCheck:
    """A third of the top bars past the inflection point, 9.7.3.8.4."""
    own = side.side
    blank = BeamCheck(
        id="top_bars_past_inflection",
        clause="9.7.3.8.4",
        where=f"{place.place.mark} {side.word}",
        state=State.NOT_APPLICABLE,
    )
    rules = continuity_rules(built.design.edition)
    total = sum(piece.bar.area * piece.count for piece in place.pieces)
    need = rules.past_inflection * total
    zero = max(last_above(own.u, own.demand, _NOTHING * float(own.demand.max())), 0.0)
    if math.isfinite(side.tip):
        # Hogging runs to the tip: a third of the bars does too.
        enough = [piece for piece in place.pieces if side.end(piece) >= side.tip]
        note = "of the bars run to the free end"
    else:
        enough = [
            piece
            for piece in place.pieces
            if side.end(piece)
            >= zero + extension_past_inflection(side.found.d, piece.bar.diameter, own.ln) - SLACK
        ]
        note = "of the bars, max(d, 12 db, ln/16) past the inflection point"
    given = sum(piece.bar.area * piece.count for piece in enough)
    return replace(
        blank,
        at=own.at(zero),
        quantity="area",
        demand=need,
        limit=given,
        ratio=ratio_of(need, given),
        state=verdict(given >= need * (1 - SLACK)),
        note=f"1/3 {note}",
    )


def _end_cover(built: Built) -> Iterator[BeamCheck]:
    """Whether all bars end within the concrete, with the cover of the beam."""
    design = built.design
    beam = design.problem.beam
    last = len(beam.spans) - 1
    total = sum(span.length for span in beam.spans)
    for word, index, direction in (("left", 0, -1), ("right", last, 1)):
        free = beam.spans[index].overhang is not Overhang.NONE
        half = beam.supports[0 if direction < 0 else -1].width / 2.0
        edge = (0.0 if direction < 0 else total) + (0.0 if free else direction * half)
        reach = [
            direction * (edge - (piece.end if direction > 0 else piece.start))
            for piece in design.pieces
        ]
        section = design.frame.sections[index]
        given = min(reach)
        piece = design.pieces[reach.index(given)]
        yield BeamCheck(
            id="end_cover",
            clause=section.edition.cover_clause,
            where=f"{'free end' if free else 'end support'} {word}",
            at=edge,
            quantity="length",
            demand=section.cover,
            limit=given,
            ratio=ratio_of(section.cover, given),
            state=verdict(given >= section.cover - SLACK),
            note=f"{piece.bar.designation} {piece.face.value} {piece.role.value} to the end face",
        )
