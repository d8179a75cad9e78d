"""Checks of the layouts at the places of a beam: every row of a section, the worst of a side."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from engine.beams.anchorage import largest_spacing_for_grade
from engine.beams.envelopes import redistributed_supports
from engine.beams.redistribution import strain_for_share
from engine.check_row import Check, State, ratio_of, verdict
from engine.units import plain
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.checks_built import SLACK, Built, BuiltPlace, BuiltSide
from optimizer.beams.checks_cutoffs import stays_above_least
from optimizer.beams.problem import Analysis
from optimizer.beams.variants import Face

_ORDER = (State.FAILS, State.PROVIDE, State.OK, State.NOT_APPLICABLE)
_ALONG = "flexural_strength"  # covered along the span
_ELSEWHERE = {"side_face_steel": "skin_bars", "flange_steel": "flange_bars"}


def section_rows(built: Built, provided: dict[str, bool]) -> Iterator[BeamCheck]:
    """Rows of all places.

    Parameters
    ----------
    built : Built
        Finished beam.
    provided : dict
        Whether the skin bars and the flange bars of the beam are as they have to be, by the
        rows that say so; rows that ask for such bars refer to them.

    Yields
    ------
    BeamCheck
        The rows of a layout's check but `flexural_strength`, the worst of both sides; then
        `stirrup_confinement` and `redistribution`.
    """
    for place in built.places:
        if not place.sides:
            yield BeamCheck(
                id="minimum_steel",
                clause="9.6.1.2",
                where=place.place.mark,
                state=State.FAILS,
                note="no bars run through this place",
            )
            continue
        rows = [(side, row) for side in place.sides for row in side.found.checks]
        names = list(dict.fromkeys(row.id for _, row in rows if row.id != _ALONG))
        for name in names:
            side, row = min(
                ((side, row) for side, row in rows if row.id == name),
                key=lambda item: _rank(item[1]),
            )
            yield _beam_row(place, side, _settled(place, row, provided))
        yield _confinement(built, place)
        yield _redistribution(built, place)


def _rank(row: Check) -> tuple[int, float]:
    """The worst state comes first, and of the same state the largest ratio."""
    return _ORDER.index(row.state), -(row.ratio or 0.0)


def _settled(place: BuiltPlace, row: Check, provided: dict[str, bool]) -> Check:
    """A row that asks for something beside the layout, where the beam has it."""
    if row.state is not State.PROVIDE:
        return row
    other = _ELSEWHERE.get(row.id)
    if other is not None:
        state = State.OK if provided[other] else State.PROVIDE
        return replace(row, state=state, note=f"{row.note}; see {other}")
    if row.id == "minimum_steel" and all(stays_above_least(side) for side in place.sides):
        note = f"{row.note}: it does, see cut_off_minimum"
        return replace(row, state=State.OK, note=note)
    return row


def _beam_row(place: BuiltPlace, side: BuiltSide, row: Check) -> BeamCheck:
    return BeamCheck(
        id=row.id,
        clause=row.clause,
        where=place.place.mark,
        at=side.side.at(0.0),
        quantity=row.quantity,
        demand=row.demand,
        limit=row.limit,
        ratio=row.ratio,
        state=row.state,
        note=row.note,
    )


def _confinement(built: Built, place: BuiltPlace) -> BeamCheck:
    """Stirrups along development and laps of bars of high strength, 9.7.1.4."""
    row, clause = "stirrup_confinement", "9.7.1.4"
    worst: tuple[float, float, float] | None = None
    for side in place.sides:
        limit = largest_spacing_for_grade(side.section, side.found.placement)
        if limit == float("inf"):
            continue
        plan = built.design.stirrups[side.side.span]
        s = max(built.spacing(side.side.span, at) for at in (0.0, plan.clear / 2.0, plan.clear))
        if worst is None or s / limit > worst[0]:
            worst = (s / limit, s, limit)
    if worst is None:
        year = built.design.edition.year
        note = "no such rule in 2014" if year < 2019 else "bars are not of high strength"
        return BeamCheck(
            id=row, clause=clause, where=place.place.mark, state=State.NOT_APPLICABLE, note=note
        )
    _, s, limit = worst
    return BeamCheck(
        id=row,
        clause=clause,
        where=place.place.mark,
        quantity="length",
        demand=s,
        limit=limit,
        ratio=ratio_of(s, limit),
        state=verdict(s <= limit + SLACK),
        note="spacing at which Ktr is 0.5 db",
    )


def _redistribution(built: Built, place: BuiltPlace) -> BeamCheck:
    """Strain of the bars finally chosen where moments were lowered, 6.6.5."""
    problem = built.design.problem
    share = problem.redistribution
    blank = BeamCheck(
        id="redistribution", clause="6.6.5", where=place.place.mark, state=State.NOT_APPLICABLE
    )
    if share == 0.0 or problem.analysis is not Analysis.ELASTIC:
        return replace(blank, note="no moments are redistributed")
    if place.place.face is Face.BOTTOM:
        return replace(blank, note="moments are lowered at supports only")
    if not redistributed_supports(problem.beam)[place.place.index]:
        return replace(blank, note="statics decide the moment here")
    need = strain_for_share(share)
    strain = min(side.found.eps_t for side in place.sides)
    return replace(
        blank,
        quantity="strain",
        demand=need,
        limit=strain,
        ratio=ratio_of(need, strain),
        state=verdict(strain >= need * (1 - SLACK)),
        note=f"moment lowered by {plain(100.0 * share)} %; eps_t of the final bars",
    )
