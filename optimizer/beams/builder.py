"""Shared by the builders of bottom and top variants: lengths, costs, what stirrups have to do."""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Sequence

from catalogs import Bar
from engine import Placement
from engine.beams.anchorage import development_in_layout, largest_spacing_for_grade
from engine.beams.bending import hooked, straight
from engine.development_rules import development_rules
from optimizer.beams.ends import StopEnd
from optimizer.beams.frames import Frame, length_unit, per_length, round_up
from optimizer.beams.listing import Fitted
from optimizer.beams.places import Side
from optimizer.beams.plans import ShearOfSpan, depth_for_shear
from optimizer.beams.problem import BeamProblem
from optimizer.beams.strengths import Strengths
from optimizer.beams.variants import Cut, Face, Need, Piece, Role


def cut_length(problem: BeamProblem, piece: Piece) -> float:
    """Length that a bar is cut to, rounded up to the job's step. [in or mm]

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    piece : Piece
        Bars.

    Returns
    -------
    float
        Length along the bar, hooks included. [in or mm]
    """
    ends = int(piece.hook_start) + int(piece.hook_end)
    if not ends:
        length = straight(piece.bar, piece.length).cut_length
    else:
        length = hooked(problem.edition, piece.bar, piece.length, ends).cut_length
    return round_up(length, problem.length_step)


class Builder:
    """What variants of all places share in one frame.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    frame : Frame
        Stirrup and legs.
    shears : sequence of ShearOfSpan
        Shear of each span.
    """

    def __init__(self, problem: BeamProblem, frame: Frame, shears: Sequence[ShearOfSpan]) -> None:
        self.problem, self.frame, self.shears = problem, frame, shears
        self.unit = length_unit(problem)
        self.step = problem.length_step
        self.integrity = problem.perimeter or not problem.closed_stirrups
        self._refused: dict[str, Counter[str]] = {}

    def refuse(self, mark: str, why: str) -> None:
        """Take note of why bars were refused at a place.

        Parameters
        ----------
        mark : str
            Mark of the place.
        why : str
            Rule in words.
        """
        self._refused.setdefault(mark, Counter())[why] += 1

    def refusals(self, mark: str) -> list[str]:
        """Why bars were refused at a place, the most frequent reason first.

        Parameters
        ----------
        mark : str
            Mark of the place.

        Returns
        -------
        list of str
            Reasons.
        """
        return [why for why, _ in self._refused.get(mark, Counter()).most_common()]

    def from_stock(self, pieces: Sequence[Piece]) -> bool:
        """Whether every bar can be cut from the longest stock.

        Parameters
        ----------
        pieces : sequence of Piece
            Bars.

        Returns
        -------
        bool
            False if one is longer.
        """
        longest = max(self.problem.stock) + 1e-6
        return all(cut_length(self.problem, piece) <= longest for piece in pieces)

    def cost(self, pieces: Sequence[Piece], extra: float = 0.0) -> float:
        """Placed index or mass of some bars. [lb or kg]

        Parameters
        ----------
        pieces : sequence of Piece
            Bars.
        extra : float
            Terms by length of layout, over the shortest of the bars. [lb/ft or kg/m]

        Returns
        -------
        float
            Their cost.
        """
        total = sum(
            piece.count
            * per_length(piece.bar, self.problem.ranking)
            * cut_length(self.problem, piece)
            for piece in pieces
        )
        if extra and pieces:
            total += extra * min(piece.length for piece in pieces)
        return total / self.unit

    def need(self, side: Side, d: float, ends: Sequence[StopEnd], most_spacing: float) -> Need:
        """What a side asks of the stirrups of its span."""
        depth = depth_for_shear(self.problem, d)
        start = self.problem.beam.origins[side.span]
        shear = self.shears[side.span]
        cuts = []
        for end in ends:
            if end.factor is not None:
                # Whole steps of length may move the end outwards by less than a step.
                for u in (end.u, min(end.u + self.step, float(side.u[-1]))):
                    x = side.at(u) - start
                    spacing = shear.at_cut(depth, x, end.factor)
                    # No plan for this depth is wider: a limit beyond that says nothing.
                    if spacing < shear.widest(depth) - 1e-9:
                        cuts.append(Cut(x - float(shear.demand.x[0]), spacing))
        return Need(side.span, depth, tuple(cuts), most_spacing)

    def stop_pieces(
        self,
        face: Face,
        fitted: Fitted,
        run: int,
        extent: tuple[float, float],
        developments: Sequence[Developments],
    ) -> tuple[Piece, ...]:
        """All bars of a layout but those that run on.

        Parameters
        ----------
        face : Face
            Face they lie at.
        fitted : Fitted
            Layout.
        run : int
            Bars of the largest size in layer 1 that run on.
        extent : tuple of float
            Start and end of the bars that stop. [in or mm]
        developments : sequence of Developments
            Development lengths, one for each side of the place.

        Returns
        -------
        tuple of Piece
            One for each size in each layer.
        """
        pieces = []
        for layer, bar, count in stopping_bars(fitted, run):
            lengths = [
                own.of(placement, layer, bar)
                for own, placement in zip(developments, fitted.placements, strict=True)
            ]
            pieces.append(
                Piece(
                    face=face,
                    role=Role.STOP,
                    bar=bar,
                    count=count,
                    layer=layer,
                    start=extent[0],
                    end=extent[1],
                    surface=fitted.placements[0].layers[layer - 1].bottom,
                    develop_start=lengths[0],
                    develop_end=lengths[-1],
                )
            )
        return tuple(pieces)


def stopping_bars(fitted: Fitted, run: int) -> list[tuple[int, Bar, int]]:
    """Layer, size and number of the bars that stop."""
    largest = fitted.layout.layers[0].largest
    found = []
    for number, layer in enumerate(fitted.layout.layers, 1):
        for bar, count in layer.groups:
            own = count - run if number == 1 and bar == largest else count
            if own:
                found.append((number, bar, own))
    return found


def runs_of(fitted: Fitted, least: int) -> list[int]:
    """Numbers of bars of the largest size in layer 1 that may run on, symmetric.

    Parameters
    ----------
    fitted : Fitted
        Layout.
    least : int
        Least number.

    Returns
    -------
    list of int
        Even numbers, and odd ones where such a bar stands at the centre.
    """
    first = fitted.layout.layers[0]
    count = first.groups[0][1]
    steps = range(least, count + 1)
    # Bars go from the centre outwards: an odd number keeps the bar at the centre, if any.
    return [number for number in steps if number % 2 == 0 or count % 2 == 1]


class Developments:
    """Development lengths in one section, each layout and size worked out once."""

    def __init__(self, strengths: Strengths) -> None:
        self.section = strengths.section
        rules = development_rules(self.section.edition)
        self._strong = self.section.steel.fy >= rules.high_strength
        self._known: dict[tuple[object, ...], float] = {}

    def of(self, placement: Placement, layer: int, bar: Bar) -> float:
        """Development length of the bars of one size in a layer. [in or mm]"""
        placed = placement.layers[layer - 1]
        around = tuple(
            (other.bottom, max(other.diameters), min(other.diameters)) for other in placement.layers
        )
        key = (layer, bar.designation, placed.x, placed.diameters, around)
        if key not in self._known:
            self._known[key] = development_in_layout(self.section, placement, layer, bar)
        return self._known[key]

    def spacing_for_grade(self, placement: Placement) -> float:
        """Largest stirrup spacing for steel of high strength. [in or mm]"""
        if not self._strong:
            return math.inf
        return largest_spacing_for_grade(self.section, placement)
