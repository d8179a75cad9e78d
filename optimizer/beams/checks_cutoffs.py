"""Checks of bars that stop within a span: 9.7.3.3 to 9.7.3.5, least steel, crack control."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from itertools import pairwise

import numpy as np

from engine import Section
from engine.assessment import Assessed
from engine.batch import Batch
from engine.beams.cutoffs import extension, last_above, shear_factor_at_cut
from engine.beams.shear import PHI_SHEAR, concrete_shear, stirrup_shear
from engine.check_row import State, ratio_of, verdict
from engine.crack_control import largest_spacing
from engine.minimum_steel import EXEMPTION
from engine.service import service_stress
from engine.units import plain
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.checks_bars import layout_from, positions_of
from optimizer.beams.checks_built import SLACK, Built, BuiltPlace, BuiltSide
from optimizer.beams.frames import stirrup_yield
from optimizer.beams.plans import depth_for_shear
from optimizer.beams.variants import Face, Piece, Role

_NOTHING = 1e-6  # share of a side's largest moment that is no moment
_ROUNDING = 1e-6


@dataclass(frozen=True, slots=True, kw_only=True)
class _Cut:
    """Bars that end at one place of a side, and those that run farther."""

    side: BuiltSide
    u: float
    stopping: tuple[Piece, ...]
    running: tuple[Piece, ...]
    rest: Assessed | None

    @property
    def largest(self) -> Piece:
        """Thickest of the bars that end."""
        return max(self.stopping, key=lambda piece: piece.bar.diameter)

    @property
    def where(self) -> str:
        """Place, side and bars."""
        bars = ", ".join(f"{piece.count} {piece.bar.designation}" for piece in self.stopping)
        return f"{self.side.side.section.mark} {self.side.word}: {bars}"


def cuts_of(side: BuiltSide) -> list[_Cut]:
    """All places where bars of a side end that are not the last to run on.

    Parameters
    ----------
    side : BuiltSide
        Side with its bars.

    Returns
    -------
    list of _Cut
        From the section where the bars work hardest outwards; bars that run to a free tip do
        not stop.
    """
    found = []
    stopping = [p for p in side.pieces if p.role is Role.STOP and side.end(p) < side.tip]
    for u in sorted({round(side.end(p), 6) for p in stopping}):
        here = tuple(p for p in stopping if abs(side.end(p) - u) <= SLACK)
        on = tuple(p for p in side.pieces if side.end(p) > u + SLACK)
        rest = side.assessed(on) if on else None
        found.append(_Cut(side=side, u=u, stopping=here, running=on, rest=rest))
    return found


def stays_above_least(side: BuiltSide) -> bool:
    """Whether the steel of a side is the least one or 4/3 of what is required all along it.

    Parameters
    ----------
    side : BuiltSide
        Side with its bars.

    Returns
    -------
    bool
        At its start, and beyond each theoretical point for the bars that run on.
    """
    all_bars = side.assessed(side.pieces)
    if float(side.side.demand.max()) > _usable(all_bars) * (1 + _ROUNDING):
        return False
    return all(_least_steel(cut).state is not State.FAILS for cut in cuts_of(side))


def cut_off_rows(built: Built) -> Iterator[BeamCheck]:
    """Rows of the ends of bars that stop.

    Parameters
    ----------
    built : Built
        Finished beam.

    Yields
    ------
    BeamCheck
        `cut_off`, `continuing_bars`, `cut_off_shear`, `cut_off_minimum`, `cut_off_cracks`; for
        a place where no bars stop the first alone, which says so.
    """
    for place in built.places:
        for side in place.sides:
            cuts = cuts_of(side)
            if not cuts:
                yield BeamCheck(
                    id="cut_off",
                    clause="9.7.3.3",
                    where=f"{place.place.mark} {side.word}",
                    state=State.NOT_APPLICABLE,
                    note="all bars run on",
                )
            for cut in cuts:
                yield _extension(place, cut)
                yield _continuing(place, cut)
                yield _shear(built, cut)
                yield _least_steel(cut)
                yield _cracks(cut)


def _row(cut: _Cut, row: str, clause: str, note: str = "") -> BeamCheck:
    return BeamCheck(
        id=row,
        clause=clause,
        where=cut.where,
        at=cut.side.side.at(cut.u),
        state=State.NOT_APPLICABLE,
        note=note,
    )


def _point(cut: _Cut) -> float:
    """Distance at which the bars that run on are enough by themselves. [in or mm]"""
    side = cut.side.side
    strength = 0.0 if cut.rest is None else cut.rest.phi_Mn
    return max(0.0, last_above(side.u, side.demand, strength * (1 + 1e-9)))


def _in_support(place: BuiltPlace, cut: _Cut) -> str:
    """Why the bars' end is none within the span; empty where it is one."""
    side = cut.side.side
    simple = side.support is not None and side.support.stiffness == 0.0
    inside = cut.u >= side.face - SLACK
    if place.place.face is Face.BOTTOM and side.end_of_beam and simple and inside:
        return "the bars run into a simple support, which 9.7.3.3 exempts"
    return ""


def _extension(place: BuiltPlace, cut: _Cut) -> BeamCheck:
    """How far bars run past the point where they are no longer needed, 9.7.3.3."""
    blank = _row(cut, "cut_off", "9.7.3.3")
    exempt = _in_support(place, cut)
    if exempt:
        return replace(blank, note=exempt)
    unit = cut.side.section.length_unit
    need = extension(cut.side.found.d, cut.largest.bar.diameter)
    point = _point(cut)
    given = cut.u - point
    return replace(
        blank,
        quantity="length",
        demand=need,
        limit=given,
        ratio=ratio_of(need, given),
        state=verdict(given >= need - SLACK),
        note=f"not needed from {plain(cut.side.side.at(point))} {unit} on; max(d, 12 db) beyond",
    )


def _continuing(place: BuiltPlace, cut: _Cut) -> BeamCheck:
    """Whether the bars that run on are developed where the others are not needed, 9.7.3.4."""
    blank = _row(cut, "continuing_bars", "9.7.3.4")
    side, point = cut.side, _point(cut)
    support = place.place.support
    enough = cut.rest is not None and float(side.side.demand.max()) <= cut.rest.phi_Mn
    if support is not None and enough:
        # Not needed on this side at all: the point lies in the support, at most at its far face.
        point = -support.width
    beyond = [
        (side.straight(p) - (side.end(p) - point), p) for p in cut.running if not side.hooked(p)
    ]
    if not beyond:
        return replace(blank, note="the bars that run on end in hooks: see development")
    _, piece = max(beyond, key=lambda item: item[0])
    need, given = side.straight(piece), side.end(piece) - point
    return replace(
        blank,
        quantity="length",
        demand=need,
        limit=given,
        ratio=ratio_of(need, given),
        state=verdict(given >= need - SLACK),
        note=f"ld of the {piece.bar.designation} that run on, past that point",
    )


def _shear(built: Built, cut: _Cut) -> BeamCheck:
    """Shear strength where bars end in a tension zone, 9.7.3.5."""
    blank = _row(cut, "cut_off_shear", "9.7.3.5")
    own = cut.side
    side = own.side
    moment = float(np.interp(cut.u, side.u, side.demand))
    past = cut.u >= side.face - SLACK and side.support is not None
    if past or moment <= _NOTHING * max(float(side.demand.max()), 1e-30):
        return replace(blank, note="the bars end outside the tension zone")
    design = built.design
    demand = design.demands[side.span]
    x = side.at(cut.u) - design.problem.beam.origins[side.span]
    Vu = float(np.interp(x, demand.x, demand.Vu))
    # The depth of these bars, rounded as that of the span is.
    d, section = depth_for_shear(design.problem, own.found.d), own.section
    s = built.spacing(side.span, x - float(demand.x[0]))
    fyt, area = stirrup_yield(design.problem), design.frame.leg_area
    Vn = concrete_shear(section.concrete, section.outline.web, d)
    strength = PHI_SHEAR * (Vn + stirrup_shear(area, fyt, d, s))
    others = 0.0 if cut.rest is None else cut.rest.phi_Mn
    factor = shear_factor_at_cut(design.edition, cut.largest.bar, moment, others)
    rule = "3/2 (a)" if factor >= 1.5 else "4/3 (b): the other bars are twice what is required"
    return replace(
        blank,
        quantity="force",
        demand=factor * Vu,
        limit=strength,
        ratio=ratio_of(factor * Vu, strength),
        state=verdict(factor * Vu <= strength * (1 + _ROUNDING)),
        note=f"Vu times {rule}; stirrups at {plain(s)} {section.length_unit}",
    )


def _usable(rest: Assessed) -> float:
    enough = rest.As >= rest.As_min * (1 - 1e-9)
    return rest.phi_Mn * (1.0 if enough else EXEMPTION)


def _least_steel(cut: _Cut) -> BeamCheck:
    """As,min, or 4/3 of what is required, beyond the end of the bars, 9.6.1."""
    blank = _row(cut, "cut_off_minimum", "9.6.1")
    side = cut.side.side
    if cut.u >= side.face - SLACK and side.support is not None:
        return replace(blank, note="the bars run into the support")
    beyond = side.u >= cut.u
    moment = float(np.interp(cut.u, side.u, side.demand))
    most = max(moment, float(side.demand[beyond].max(initial=0.0)))
    if most <= _NOTHING * float(side.demand.max()):
        return replace(blank, note="no moment beyond the end of the bars")
    if cut.rest is None:
        return replace(blank, state=State.FAILS, note="no bars run on")
    if cut.rest.As >= cut.rest.As_min * (1 - _ROUNDING):
        return replace(
            blank,
            quantity="area",
            demand=cut.rest.As_min,
            limit=cut.rest.As,
            ratio=ratio_of(cut.rest.As_min, cut.rest.As),
            state=State.OK,
            note="the bars that run on are the least steel (9.6.1.2)",
        )
    usable = EXEMPTION * cut.rest.phi_Mn
    return replace(
        blank,
        clause="9.6.1.3",
        quantity="moment",
        demand=most,
        limit=usable,
        ratio=ratio_of(most, usable),
        state=verdict(most <= usable * (1 + _ROUNDING)),
        note="less than the least steel: 3/4 of the bars that run on have to be enough",
    )


def _cracks(cut: _Cut) -> BeamCheck:
    """Spacing of the bars that run on, under the service moment beyond the others' end."""
    blank = _row(cut, "cut_off_cracks", "24.3.2")
    side, section = cut.side.side, cut.side.section
    beyond = side.u >= cut.u
    if cut.u >= side.face - SLACK and side.support is not None:
        return replace(blank, note="the bars run into the support")
    moment = float(np.interp(cut.u, side.u, side.service))
    Ms = max(moment, float(side.service[beyond].max(initial=0.0)))
    if Ms <= _NOTHING * max(float(side.service.max()), 1e-30):
        return replace(blank, note="no tension at service beyond the end of the bars")
    if cut.rest is None:
        return replace(blank, state=State.FAILS, note="no bars run on")
    fs = _stress(section, cut.running, Ms)
    lines = positions_of(cut.side.found.placement, cut.running)
    spacing = max((b - a for a, b in pairwise(lines)), default=0.0)
    limit = largest_spacing(section.edition, fs, section.bar_face)
    unit = section.edition.system.trade["stress"]
    return replace(
        blank,
        quantity="length",
        demand=spacing,
        limit=limit,
        ratio=ratio_of(spacing, limit),
        state=verdict(spacing <= limit * (1 + _ROUNDING)),
        note=f"fs = {plain(fs)} {unit} under Ms in the bars that run on",
    )


def _stress(section: Section, pieces: tuple[Piece, ...], Ms: float) -> float:
    sign = 1.0 if section.sagging else -1.0
    loaded = replace(section, Mu=sign * 2.0 * Ms, Ms=sign * Ms)
    return float(service_stress(loaded, Batch.of([layout_from(pieces)]))[0])
