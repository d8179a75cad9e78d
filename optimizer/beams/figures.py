"""Figures of a design that every output shows: what each place asks for and has."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from engine.beams.demand import SpanDemand
from engine.check_row import State
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.places import Place, Side
from optimizer.beams.variants import Face, Piece, Variant


@dataclass(frozen=True, slots=True, kw_only=True)
class PlaceFigures:
    """One place of a design.

    Attributes
    ----------
    place : Place
        Place.
    variant : Variant
        Its layout with the ends of its bars.
    pieces : tuple of (str, Piece)
        Bars of its own with their marks; bars that run through the beam are not among them.
    demand, strength : float
        Mu and phi Mn in size on the side where the bars are used most. [lbf*in or N*mm]
    """

    place: Place
    variant: Variant
    pieces: tuple[tuple[str, Piece], ...]
    demand: float
    strength: float


def place_figures(design: BeamDesign) -> list[PlaceFigures]:
    """Gather the figures of each place.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    list of PlaceFigures
        In the order of the design's places.
    """
    # The bars of the places come first among the pieces, place by place.
    marked = iter(zip(design.schedule.of_pieces, design.pieces, strict=True))
    found = []
    for place, variant in zip(design.places, design.chosen, strict=True):
        own = tuple(next(marked) for _ in variant.pieces)
        sides = [_side(design, place, side) for side in place.sides]
        demand, strength = max(sides, key=_use)
        found.append(
            PlaceFigures(place=place, variant=variant, pieces=own, demand=demand, strength=strength)
        )
    return found


def _use(figures: tuple[float, float]) -> float:
    demand, strength = figures
    return demand / strength if strength > 0.0 else 0.0


def _side(design: BeamDesign, place: Place, side: Side) -> tuple[float, float]:
    """Demand where it is largest, and strength there. [lbf*in or N*mm]"""
    along = design.strengths[side.span]
    values = along.sagging if place.face is Face.BOTTOM else along.hogging
    at = int(np.argmax(side.demand))
    x = side.at(float(side.u[at])) - design.problem.beam.origins[side.span]
    return float(side.demand[at]), float(np.interp(x, along.x, values))


@dataclass(frozen=True, slots=True, kw_only=True)
class SpanExtremes:
    """Largest values of a span's envelopes, with their places from the left face.

    Attributes
    ----------
    sagging, hogging_left, hogging_right : tuple of float
        Factored moment in size at its place; hogging at the two halves of the clear span.
        [lbf*in or N*mm, in or mm]
    shear : tuple of float
        Vu and its place. [lbf or N, in or mm]
    """

    sagging: tuple[float, float]
    hogging_left: tuple[float, float]
    hogging_right: tuple[float, float]
    shear: tuple[float, float]


def extremes(demand: SpanDemand) -> SpanExtremes:
    """Find the largest values of a span's envelopes.

    Parameters
    ----------
    demand : SpanDemand
        Envelopes.

    Returns
    -------
    SpanExtremes
        Values and places.
    """
    x = demand.x - demand.x[0]
    left = x <= x[-1] / 2.0
    hogging = np.maximum(-demand.Mu_least, 0.0)
    return SpanExtremes(
        sagging=_peak(np.maximum(demand.Mu_most, 0.0), x),
        hogging_left=_peak(np.where(left, hogging, -1.0), x),
        hogging_right=_peak(np.where(left, -1.0, hogging)[::-1], x[::-1]),
        shear=_peak(demand.Vu, x),
    )


def _peak(values: np.ndarray, x: np.ndarray) -> tuple[float, float]:
    at = int(np.argmax(values))
    return max(0.0, float(values[at])), float(x[at])


def governing(checks: Sequence[BeamCheck]) -> list[BeamCheck]:
    """Pick the row of each kind of check that says most.

    Parameters
    ----------
    checks : sequence of BeamCheck
        Rows.

    Returns
    -------
    list of BeamCheck
        For each kind, in the order of first mention, a row that fails before one that does
        not, then the one with the largest ratio.
    """
    best: dict[str, BeamCheck] = {}
    for row in checks:
        if row.id not in best or _weight(row) > _weight(best[row.id]):
            best[row.id] = row
    return list(best.values())


def _weight(row: BeamCheck) -> tuple[int, float]:
    order = (State.NOT_APPLICABLE, State.OK, State.PROVIDE, State.FAILS)
    return order.index(row.state), -1.0 if row.ratio is None else row.ratio


def span_marks(result: BeamDesign | NoDesign) -> list[str]:
    """Marks of the spans."""
    return [span.mark for span in result.problem.beam.spans]
