"""Bars that follow from the outline alone: skin, flange, and the bottom of cantilevers."""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np

from engine.beams.continuity import continuity_rules
from engine.beams.demand import SpanDemand
from engine.beams.flange_bars import outer_flange
from engine.beams.spans import Overhang
from engine.crack_control import WITHOUT_ANALYSIS, largest_spacing
from optimizer.beams.builder import Builder
from optimizer.beams.frames import round_up
from optimizer.beams.places import largest_moment
from optimizer.beams.variants import Face, Piece, Role

_NOTHING = 1e-6  # share of the beam's largest moment that is no moment
_BEYOND = 12.0  # diameters that these bars run past the hogging moment [-]


def fixed_pieces(shared: Builder, demands: Sequence[SpanDemand]) -> tuple[Piece, ...]:
    """All bars that no choice depends on.

    Parameters
    ----------
    shared : Builder
        What all places share.
    demands : sequence of SpanDemand
        Envelopes.

    Returns
    -------
    tuple of Piece
        Skin bars, bars in the outer flange, bottom bars of cantilevers.
    """
    pieces: list[Piece] = []
    for index, span in enumerate(shared.problem.beam.spans):
        pieces += _skin(shared, index, demands[index])
        if span.overhang is not Overhang.NONE:
            pieces.append(_cantilever_bottom(shared, index))
    return (*pieces, *_flange(shared, demands))


def _skin(shared: Builder, index: int, demand: SpanDemand) -> list[Piece]:
    """Skin bars on both side faces over half the depth from each face in tension, 9.7.2.3."""
    section = shared.frame.sections[index]
    h = section.outline.depth
    if h <= section.edition.skin_depth:
        return []
    stress = WITHOUT_ANALYSIS * section.steel.fy
    s = largest_spacing(section.edition, stress, section.bar_face)
    rows = math.ceil((h / 2.0 - section.bar_face) / s - 1e-9)
    start, end = shared.problem.beam.clear_range(index)
    overhang = shared.problem.beam.spans[index].overhang
    start += section.cover if overhang is Overhang.LEFT else 0.0
    end -= section.cover if overhang is Overhang.RIGHT else 0.0
    pieces = []
    faces = (
        (Face.BOTTOM, float(demand.Mu_most.max()) > 0.0),
        (Face.TOP, float(demand.Mu_least.min()) < 0.0),
    )
    for face, in_tension in faces:
        if in_tension:
            origin = shared.problem.beam.origins[index]
            extent = _within_tips(shared, origin + start, round_up(end - start, shared.step))
            pieces.append(
                Piece(
                    face=face,
                    role=Role.SKIN,
                    bar=shared.problem.skin,
                    count=2 * rows,
                    layer=1,
                    start=extent[0],
                    end=extent[1],
                    surface=section.bar_face,
                )
            )
    return pieces


def _flange_count(shared: Builder, index: int) -> int:
    """Bars on each side in the outer part of a flange wider than ln/10; zero for others."""
    outer = outer_flange(shared.frame.sections[index], shared.problem.beam.clear_length(index))
    if outer is None:
        return 0
    by_area = math.ceil(outer.area / shared.problem.flange_bar.area - 1e-9)
    return max(1, by_area, math.ceil(outer.width / outer.spacing - 1e-9))


def _flange(shared: Builder, demands: Sequence[SpanDemand]) -> list[Piece]:
    """Bars in the outer parts of flanges in tension, 24.3.4, through the supports."""
    beam, bar = shared.problem.beam, shared.problem.flange_bar
    reach = _BEYOND * bar.diameter
    scale = largest_moment(demands)
    stretches: list[tuple[float, float, int]] = []
    for index, demand in enumerate(demands):
        count = _flange_count(shared, index)
        if not count:
            continue
        in_tension = demand.Mu_least < -_NOTHING * scale
        hogging = np.concatenate(([False], in_tension, [False]))
        edges = np.flatnonzero(np.diff(hogging.astype(int)))
        first_x, last_x = float(demand.x[0]), float(demand.x[-1])
        for first, last in edges.reshape(-1, 2):
            start, end = float(demand.x[first]) - reach, float(demand.x[last - 1]) + reach
            # A stretch that begins at a face runs on to the support's centre and meets its like.
            start = 0.0 if first == 0 else max(start, first_x)
            end = beam.spans[index].length if last == len(demand.x) else min(end, last_x)
            if first == 0 and beam.left_support(index) is None:
                start = shared.frame.sections[index].cover
            if last == len(demand.x) and beam.right_support(index) is None:
                end -= shared.frame.sections[index].cover
            stretches.append((beam.origins[index] + start, beam.origins[index] + end, count))
    merged: list[tuple[float, float, int]] = []
    for start, end, count in stretches:
        if merged and start <= merged[-1][1] + 1e-6:
            merged[-1] = (merged[-1][0], end, max(count, merged[-1][2]))
        else:
            merged.append((start, end, count))
    pieces = []
    for start, end, count in merged:
        extent = _within_tips(shared, start, round_up(end - start, shared.step))
        pieces.append(
            Piece(
                face=Face.TOP,
                role=Role.FLANGE,
                bar=bar,
                count=2 * count,
                layer=1,
                start=extent[0],
                end=extent[1],
                surface=shared.frame.sections[0].cover,
            )
        )
    return pieces


def _within_tips(shared: Builder, start: float, length: float) -> tuple[float, float]:
    """A bar of whole steps, moved or cut so that it keeps its cover at free ends."""
    beam = shared.problem.beam
    low, high = -math.inf, math.inf
    if beam.spans[0].overhang is not Overhang.NONE:
        low = shared.frame.sections[0].cover
    if beam.spans[-1].overhang is not Overhang.NONE:
        high = sum(span.length for span in beam.spans) - shared.frame.sections[-1].cover
    start = max(low, min(start, high - length))
    if start + length > high + 1e-9:
        length = shared.step * math.floor((high - start) / shared.step + 1e-9)
    return start, start + length


def _cantilever_bottom(shared: Builder, index: int) -> Piece:
    """Bars in the lower corners of the stirrups of a cantilever."""
    section = shared.frame.sections[index]
    start, end = shared.problem.beam.clear_range(index)
    into = continuity_rules(section.edition).into_support
    if shared.problem.beam.spans[index].overhang is Overhang.LEFT:
        start, end = start + section.cover, end + into
    else:
        start, end = start - into, end - section.cover
    length = shared.step * math.floor((end - start) / shared.step + 1e-9)
    origin = shared.problem.beam.origins[index]
    return Piece(
        face=Face.BOTTOM,
        role=Role.HANGER,
        bar=shared.problem.hangers[0],
        count=shared.frame.legs,
        layer=1,
        start=origin + start,
        end=origin + start + length,
        surface=section.bar_face,
    )
