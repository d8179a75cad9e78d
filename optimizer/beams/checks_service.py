"""Checks of service: deflections, least depth, bars at side faces and in flanges."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

import numpy as np

from engine.beams.deflection import DEFLECTION_LIMITS
from engine.beams.demand import Deflections
from engine.beams.flange_bars import outer_flange
from engine.beams.least_depth import Continuity, least_depth
from engine.beams.spans import FIXED, Overhang
from engine.beams.stiffness import StageInertias
from engine.check_row import State, ratio_of, verdict
from engine.crack_control import WITHOUT_ANALYSIS, largest_spacing
from engine.units import plain
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.checks_bars import layout_from
from optimizer.beams.checks_built import SLACK, STRONG, Built
from optimizer.beams.places import largest_moment
from optimizer.beams.problem import Attached
from optimizer.beams.sag import cracked_inertias, deflections, stages
from optimizer.beams.variants import Face, Role

_NOTHING = 1e-6  # share of the beam's largest moment that is no moment


def service_rows(built: Built) -> Iterator[BeamCheck]:
    """Rows of deflection and depth of all spans.

    Parameters
    ----------
    built : Built
        Finished beam.

    Yields
    ------
    BeamCheck
        `deflection`, `least_depth`.
    """
    for span in range(len(built.design.demands)):
        yield _deflection(built, span)
        yield _least_depth(built, span)


def outer_rows(built: Built) -> Iterator[BeamCheck]:
    """Rows of bars at side faces and in flanges.

    Parameters
    ----------
    built : Built
        Finished beam.

    Yields
    ------
    BeamCheck
        `skin_bars`, `flange_bars`.
    """
    for span in range(len(built.design.demands)):
        yield _skin(built, span)
        yield _flange(built, span)


def _inertias(built: Built, span: int, unit: Deflections) -> StageInertias | None:
    """Ie of a span from its bars; None without any where it cracks."""
    design = built.design
    own = design.problem.beam.spans[span]
    sign = 1.0 if unit.sagging else -1.0
    section = replace(design.frame.sections[span], Mu=sign, Ms=None)
    face = Face.BOTTOM if unit.sagging else Face.TOP
    start, end = design.problem.beam.clear_range(span)
    at = (start + end) / 2.0
    if own.overhang is Overhang.LEFT:
        at = end
    elif own.overhang is Overhang.RIGHT:
        at = start
    at += design.problem.beam.origins[span]
    pieces = [
        piece
        for piece in design.pieces
        if piece.face is face
        and (piece.role in STRONG or piece.role is Role.HANGER)
        and piece.start <= at + SLACK
        and piece.end >= at - SLACK
    ]
    strong = [piece for piece in pieces if piece.role in STRONG] or pieces
    if not strong:
        return None
    Icr = cracked_inertias(section, [layout_from(strong)])
    return stages(section, own, unit, Icr)


def _deflection(built: Built, span: int) -> BeamCheck:
    """Deflection against the row of Table 24.2.2 that the job names."""
    design = built.design
    problem = design.problem
    own, unit = problem.beam.spans[span], design.demands[span].deflections
    limit = DEFLECTION_LIMITS[problem.attached.value]
    blank = BeamCheck(id="deflection", clause="24.2.2", where=own.mark, state=State.NOT_APPLICABLE)
    if unit is None:
        return replace(blank, note="moments given: deflections come with their analysis")
    back: StageInertias | None = None
    if own.overhang is not Overhang.NONE:
        behind = span + 1 if own.overhang is Overhang.LEFT else span - 1
        unit_behind = design.demands[behind].deflections
        if unit_behind is not None:
            back = _inertias(built, behind, unit_behind)
    inertias = _inertias(built, span, unit)
    if inertias is None or (own.overhang is not Overhang.NONE and back is None):
        return replace(blank, state=State.FAILS, note="no bars where it cracks")
    found = deflections(design.frame.sections[span], unit, inertias, back)
    given = abs(float(limit.counted(found)[0]))
    most = limit.allowed(own.length)
    length = design.frame.sections[span].length_unit
    parts = ", ".join(
        f"{name} {plain(round(float(value[0]), 6))}"
        for name, value in (
            ("dead", found.dead),
            ("live", found.live),
            ("long-term", found.long_term),
        )
    )
    which = "long-term and live" if limit.after_attachment else "live"
    return replace(
        blank,
        quantity="length",
        demand=given,
        limit=most,
        ratio=ratio_of(given, most),
        state=verdict(given <= most * (1 + SLACK)),
        note=f"{which} against l/{plain(limit.divisor)}: {limit.meaning}; {parts} {length}",
    )


def _least_depth(built: Built, span: int) -> BeamCheck:
    """Depth from which deflections need no calculation: shown beside, the calculation governs."""
    design = built.design
    problem = design.problem
    beam = problem.beam
    own, section = beam.spans[span], design.frame.sections[span]
    held = 0
    for number in (beam.left_support(span), beam.right_support(span)):
        if number is None:
            continue
        sides = (beam.left_span(number), beam.right_span(number))
        held += None not in sides or beam.supports[number].stiffness == FIXED
    rows = (Continuity.SIMPLE, Continuity.ONE_END, Continuity.BOTH_ENDS)
    kind = rows[held] if own.overhang is Overhang.NONE else Continuity.CANTILEVER
    need = least_depth(problem.edition, own.length, kind, section.steel.fy)
    h = own.outline.depth
    words = {
        Continuity.SIMPLE: "simply supported",
        Continuity.ONE_END: "one end continuous",
        Continuity.BOTH_ENDS: "both ends continuous",
        Continuity.CANTILEVER: "cantilever",
    }
    note = f"{words[kind]}, l/{plain(kind.value)}"
    blank = BeamCheck(
        id="least_depth",
        clause="9.3.1.1",
        where=own.mark,
        quantity="length",
        demand=need,
        limit=h,
        ratio=ratio_of(need, h),
        state=State.NOT_APPLICABLE,
        note=note,
    )
    if problem.attached is Attached.SENSITIVE:
        return replace(blank, note=f"{note}; deflections are required here: see deflection")
    if section.concrete.lightweight < 1.0:
        note += "; without the factor of lightweight concrete, whose density is not given"
    if h >= need - SLACK:
        return replace(blank, state=State.OK, note=note)
    return replace(blank, note=f"{note}; shallower, so the calculated deflection counts")


def _skin(built: Built, span: int) -> BeamCheck:
    """Bars at the side faces over half the depth from each face in tension, 9.7.2.3."""
    design = built.design
    beam, section, demand = design.problem.beam, design.frame.sections[span], design.demands[span]
    h, unit = section.outline.depth, section.length_unit
    blank = BeamCheck(
        id="skin_bars", clause="9.7.2.3", where=beam.spans[span].mark, state=State.NOT_APPLICABLE
    )
    if h <= section.edition.skin_depth:
        limit = plain(section.edition.skin_depth)
        return replace(blank, note=f"h of {plain(h)} {unit} is not above {limit} {unit}")
    most = largest_spacing(section.edition, WITHOUT_ANALYSIS * section.steel.fy, section.bar_face)
    scale = largest_moment(design.demands) * _NOTHING
    faces = []
    if float(demand.Mu_most.max()) > scale:
        faces.append(Face.BOTTOM)
    if float(demand.Mu_least.min()) < -scale:
        faces.append(Face.TOP)
    start, end = (beam.origins[span] + at for at in beam.clear_range(span))
    step = design.problem.length_step
    gap = 2.0 * section.cover + 2.0 * step  # a bar may stop short of a face or a tip by that
    worst = 0.0
    for face in faces:
        rows = min(
            (
                piece.count // 2
                for piece in design.pieces
                if piece.role is Role.SKIN
                and piece.face is face
                and piece.start <= start + gap
                and piece.end >= end - gap
            ),
            default=0,
        )
        spacing = (h / 2.0 - section.bar_face) / rows if rows else math.inf
        worst = max(worst, spacing)
    if not faces:
        return replace(blank, note="no face in tension")
    given = worst if math.isfinite(worst) else h / 2.0
    return replace(
        blank,
        quantity="length",
        demand=given,
        limit=most,
        ratio=ratio_of(given, most),
        state=verdict(given <= most * (1 + SLACK)),
        note=f"spacing over h/2 from the {' and the '.join(f.value for f in faces)} face",
    )


def _flange(built: Built, span: int) -> BeamCheck:
    """Bars in the outer parts of a flange in tension, 24.3.4."""
    design = built.design
    beam, section, demand = design.problem.beam, design.frame.sections[span], design.demands[span]
    blank = BeamCheck(
        id="flange_bars", clause="24.3.4", where=beam.spans[span].mark, state=State.NOT_APPLICABLE
    )
    outer = outer_flange(section, beam.clear_length(span))
    if outer is None:
        return replace(blank, note="no top flange wider than ln/10")
    hogging = -demand.Mu_least > _NOTHING * largest_moment(design.demands)
    if not hogging.any():
        return replace(blank, note="the flange is not in tension")
    bar = design.problem.flange_bar
    least = max(outer.area / bar.area, outer.width / outer.spacing)
    places = demand.x[hogging] + beam.origins[span]
    # At a free end bars stop short by their cover.
    tip = section.cover + design.problem.length_step
    ends = [beam.origins[span] + float(demand.x[0]), beam.origins[span] + float(demand.x[-1])]
    if beam.left_support(span) is None:
        places = places[places > ends[0] + tip]
    if beam.right_support(span) is None:
        places = places[places < ends[1] - tip]
    counts = np.zeros(len(places))
    for piece in design.pieces:
        if piece.role is Role.FLANGE:
            counts += np.where(
                (piece.start <= places + SLACK) & (piece.end >= places - SLACK),
                piece.count / 2.0,
                0.0,
            )
    given = float(counts.min())
    at = float(places[int(np.argmin(counts))])
    area, unit = design.edition.system.trade["area"], section.length_unit
    return replace(
        blank,
        at=at,
        quantity="area",
        demand=outer.area,
        limit=given * bar.area,
        ratio=ratio_of(outer.area, given * bar.area),
        state=verdict(given >= least * (1 - SLACK)),
        note=(
            f"{plain(given)} {bar.designation} on each side over {plain(outer.width)} {unit},"
            f" {plain(outer.area)} {area} and spacing to {plain(outer.spacing)} {unit} asked"
        ),
    )
