"""Checks of the beam as a whole: analysis, bars that hold stirrups, stock, schedule."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import replace

import numpy as np

from engine.beams.coefficients import coefficient_faults
from engine.check_row import State, ratio_of, verdict
from engine.units import plain
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.checks_built import SLACK, Built
from optimizer.beams.problem import Analysis
from optimizer.beams.schedule import shape_of
from optimizer.beams.variants import Face

_MAIN = ("run", "stop", "through", "hanger")


def general_rows(built: Built) -> Iterator[BeamCheck]:
    """Rows of the beam as a whole.

    Parameters
    ----------
    built : Built
        Finished beam.

    Yields
    ------
    BeamCheck
        `coefficients`, `bars_hold_stirrups`, `stock_length`, `schedule`.
    """
    yield _coefficients(built)
    for span in range(len(built.design.demands)):
        for face in Face:
            yield _held(built, span, face)
    yield _stock(built)
    yield _schedule(built)


def _coefficients(built: Built) -> BeamCheck:
    """Conditions of the moment coefficients, 6.5.1."""
    problem = built.design.problem
    blank = BeamCheck(id="coefficients", clause="6.5.1", where="beam", state=State.NOT_APPLICABLE)
    if problem.analysis is not Analysis.COEFFICIENTS:
        return replace(blank, note=f"moments come from elsewhere: {problem.analysis.value}")
    faults = list(coefficient_faults(problem.beam))
    if problem.redistribution > 0.0:
        faults.append("moments by coefficients may not be redistributed, 6.5.3")
    note = "; ".join(faults) or "all conditions hold"
    return replace(blank, state=verdict(not faults), note=note)


def _held(built: Built, span: int, face: Face) -> BeamCheck:
    """A bar in each corner of the stirrups, 25.7.1.2."""
    design = built.design
    origin = design.problem.beam.origins[span]
    plan = design.stirrups[span]
    start = origin + design.problem.beam.clear_range(span)[0]
    places = start + _stirrup_places(built, span)
    counts = np.zeros(len(places), dtype=np.int64)
    for piece in design.pieces:
        if piece.face is face and piece.layer == 1 and piece.role.value in _MAIN:
            inside = (piece.start <= places + SLACK) & (piece.end >= places - SLACK)
            counts += np.where(inside, piece.count, 0)
    worst = int(np.argmin(counts))
    need, given = design.frame.legs, int(counts[worst])
    return BeamCheck(
        id="bars_hold_stirrups",
        clause="25.7.1.2",
        where=f"{design.problem.beam.spans[span].mark} {face.value}",
        at=float(places[worst]),
        ratio=ratio_of(float(need), float(given)),
        state=verdict(given >= need),
        note=f"{given} bars in {need} corners of {plan.count} stirrups",
    )


def _stirrup_places(built: Built, span: int) -> np.ndarray:
    """Places of all stirrups of a span from the left face. [in or mm]"""
    plan = built.design.stirrups[span]
    (_, left), (_, right), _ = plan.zones
    parts = (
        (plan.first, left, plan.spaces[0]),
        (left, right, plan.spaces[1]),
        (right, plan.clear - plan.last, plan.spaces[2]),
    )
    return np.concatenate([np.linspace(a, b, count + 1) for a, b, count in parts])


def _stock(built: Built) -> BeamCheck:
    """Every bar can be cut from the longest stock."""
    design = built.design
    longest = max(design.problem.stock)
    mark = max(design.schedule.marks, key=lambda item: item.length)
    unit = design.frame.sections[0].length_unit
    return BeamCheck(
        id="stock_length",
        clause="stock of the job",
        where=mark.mark,
        quantity="length",
        demand=mark.length,
        limit=longest,
        ratio=ratio_of(mark.length, longest),
        state=verdict(mark.length <= longest + SLACK),
        note=f"longest bar, of stock to {plain(longest)} {unit}",
    )


def _schedule(built: Built) -> BeamCheck:
    """The schedule lists every bar of the beam, with its shape and length."""
    design = built.design
    by_name = {mark.mark: mark for mark in design.schedule.marks}
    counts: Counter[str] = Counter()
    faults: list[str] = []
    if len(design.schedule.of_pieces) != len(design.pieces):
        faults.append("bars without a mark")
    for piece, name in zip(design.pieces, design.schedule.of_pieces, strict=False):
        counts[name] += piece.count
        shape, mark = shape_of(design.problem, piece), by_name.get(name)
        alike = mark is not None and mark.bar == piece.bar and mark.shape.shape is shape.shape
        if mark is None or not alike or mark.length < shape.cut_length - 1e-3:
            faults.append(f"{name} is not the bar it stands for")
    for plan, names in zip(design.stirrups, design.schedule.of_stirrups, strict=True):
        for name in names:
            counts[name] += plan.count
    faults += [
        f"{name} counts {mark.count}, not {counts[name]}"
        for name, mark in by_name.items()
        if mark.count != counts[name]
    ]
    return BeamCheck(
        id="schedule",
        clause="schedule of marks",
        where="beam",
        state=verdict(not faults),
        note="; ".join(dict.fromkeys(faults)) or "every bar has its mark, shape and length",
    )
