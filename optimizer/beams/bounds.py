"""Lower bounds of layouts that have not been listed, and how far listing has to go.

A place that is not listed to its end could hide a better layout. What one would cost at
least follows from its bars' cost per length alone: those that run on have a known length, and
those that stop span at least the stretch where the others are too weak, with the extension of
9.7.3.3 at both ends. With such a bound for every place, and the best beam found so far, a
layout matters only if its bound, with the least of all other places, is not above that beam.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from catalogs import Bar
from engine.beams.anchorage import can_lap, lap_of_size
from engine.beams.continuity import continuity_rules
from engine.beams.cutoffs import SPAN_SHARE_BEYOND, extension, last_above
from optimizer.beams.builder import Builder
from optimizer.beams.frames import per_length
from optimizer.beams.places import Place, Side
from optimizer.beams.strengths import Strengths
from optimizer.beams.variants import Face, TopKind, TopMode
from optimizer.families import Family

_NOTHING = 1e-6


@dataclass(frozen=True, slots=True)
class _Split:
    """One number of bars that run on: their cost, and the least length of the others."""

    run_per_length: float
    run_cost: float
    stop_length: float


class PlaceBound:
    """Least cost of layouts of one place from what their bars cost per length.

    Parameters
    ----------
    shared : Builder
        What all places share.
    place : Place
        Place.
    """

    def __init__(self, shared: Builder, place: Place) -> None:
        self.shared, self.place = shared, place
        self.strengths = [Strengths(side.section) for side in place.sides]
        self._splits: dict[tuple[int, TopMode | None], tuple[list[_Split], float, float]] = {}
        self.into = continuity_rules(shared.problem.edition).into_support

    def least(self, family: Family, value: float, mode: TopMode | None) -> float:
        """Least cost of a layout whose bars cost at least a value per length.

        Parameters
        ----------
        family : Family
            Family of the layout.
        value : float
            Cost of its bars per length. [lb/ft or kg/m]
        mode : TopMode or None
            Arrangement of the top face; None at the bottom.

        Returns
        -------
        float
            Lower bound; infinite where the family cannot serve the arrangement. [lb or kg]
        """
        if math.isinf(value):
            return math.inf
        splits, length, saved = self._of(family, mode)
        if not splits:
            return math.inf
        found = [
            split.run_cost + (value - split.run_per_length) * split.stop_length - saved
            for split in splits
            if split.run_per_length < value
        ]
        through = mode is not None and mode.kind is TopKind.THROUGH
        # All bars may run on; through bars are paid for with the arrangement.
        if not through:
            found.append(value * length - saved)
        elif not found:
            found.append(0.0)
        return min(found)

    def _of(self, family: Family, mode: TopMode | None) -> tuple[list[_Split], float, float]:
        key = (id(family), mode)
        if key not in self._splits:
            self._splits[key] = self._work_out(family, mode)
        return self._splits[key]

    def _work_out(self, family: Family, mode: TopMode | None) -> tuple[list[_Split], float, float]:
        largest, smallest = family.bars[0], family.bars[-1]
        legs = self.shared.frame.legs
        ranking, unit = self.shared.problem.ranking, self.shared.unit
        each = per_length(largest, ranking)
        most = family.most[0][0]
        through = mode is not None and mode.kind is TopKind.THROUGH
        if through and (mode is None or mode.bar != largest or most < legs):
            return [], 0.0, 0.0
        if mode is not None and not through and not self._can_end(family, largest):
            return [], 0.0, 0.0
        counts = [legs] if through else range(legs, most + 1)
        length = 0.0 if through else self._run_length(family, largest) / unit
        saved = self._saved(family, largest, mode) / unit
        splits = []
        for count in counts:
            stop = self._stop_length(family, largest, smallest, count) / unit
            per = count * each
            splits.append(_Split(per, per * length, stop))
        return splits, length, saved

    def _can_end(self, family: Family, bar: Bar) -> bool:
        """Whether long top bars end within their half of each span, as hangers ask."""
        for side in self.place.sides:
            if side.end_of_beam:
                continue
            if side.demand[-1] > _NOTHING * side.section.demand:
                return False
            if self._least_reach(family, bar, side) > side.ln / 2.0 + _NOTHING:
                return False
        return True

    def _least_reach(self, family: Family, bar: Bar, side: Side) -> float:
        """Least reach of long top bars past the face on one side. [in or mm]"""
        zero = max(last_above(side.u, side.demand, 0.0), 0.0)
        beyond = extension(self._lowest_depth(family, side), bar.diameter)
        return zero + max(beyond, SPAN_SHARE_BEYOND * side.ln)

    def _lowest_depth(self, family: Family, side: Side) -> float:
        """No layout of the family has its centroid nearer the compression face. [in or mm]"""
        section = side.section
        stack = family.layers * family.bars[0].diameter
        stack += (family.layers - 1) * section.layer_gap
        return section.outline.depth - section.bar_face - stack

    def _run_length(self, family: Family, bar: Bar) -> float:
        """Least length of the bars that run on. [in or mm]"""
        place = self.place
        if place.face is Face.BOTTOM:
            total = 0.0
            for side in place.sides:
                embedment = self.into
                if self.shared.integrity and not side.end_of_beam and side.support is not None:
                    if not can_lap(side.section, bar):
                        return math.inf
                    lap = lap_of_size(side.section, bar)
                    embedment = max(self.into, side.support.width / 2.0 + lap / 2.0)
                total += side.face + embedment
            return total
        return self._reaches(family, bar) + self._width()

    def _width(self) -> float:
        """Width of the support where bars run across it. [in or mm]"""
        both = len(self.place.sides) == 2
        return self.place.support.width if both and self.place.support is not None else 0.0

    def _reaches(self, family: Family, bar: Bar) -> float:
        """Least sum of the reaches of long top bars past the faces. [in or mm]"""
        total = 0.0
        for side in self.place.sides:
            if side.end_of_beam:
                total += side.face - side.section.cover - self.shared.step
            else:
                total += self._least_reach(family, bar, side)
        return total

    def _saved(self, family: Family, bar: Bar, mode: TopMode | None) -> float:
        """Cost of the hangers that long bars stand for, times the length unit.

        Longer reaches cost more bars than they save in hangers where the bars cost more per
        length: the least reach bounds both. Else the longest reach is counted.
        """
        if mode is None or mode.kind is TopKind.THROUGH:
            return 0.0
        ranking = self.shared.problem.ranking
        each, hanger = per_length(bar, ranking), per_length(mode.bar, ranking)
        inner = [side for side in self.place.sides if not side.end_of_beam]
        if not inner:
            return 0.0
        legs = self.shared.frame.legs
        least = 0.0
        for side in inner:
            low = self._least_reach(family, bar, side)
            least += low if each >= hanger else side.ln / 2.0
        return least * legs * hanger

    def _stop_length(self, family: Family, largest: Bar, smallest: Bar, count: int) -> float:
        """Least length of bars that stop beside a number that runs on. [in or mm]"""
        total = self._width() if self.place.face is Face.TOP else 0.0
        for side, strengths in zip(self.place.sides, self.strengths, strict=True):
            usable = strengths.of_run(largest, count).usable
            region = max(last_above(side.u, side.demand, usable), 0.0)
            beyond = extension(self._lowest_depth(family, side), smallest.diameter)
            reach = region + beyond
            closed = side.support is not None or side.end_of_beam
            if closed:
                past = self.into if side.support is not None else -side.section.cover
                reach = min(reach, side.face + past)
            total += max(reach, 0.0)
        return total


def next_value(
    bound: PlaceBound,
    family: Family,
    limit_of: Mapping[TopMode | None, float],
    values: Sequence[float],
) -> float:
    """Largest cost per length at which a layout of a family may still matter.

    Parameters
    ----------
    bound : PlaceBound
        Bounds of the place.
    family : Family
        Family.
    limit_of : mapping
        For each arrangement of the top face the most that a layout of this place may cost; None
        stands for all at the bottom. [lb or kg]
    values : sequence of float
        Costs per length that layouts of the family have, ascending. [lb/ft or kg/m]

    Returns
    -------
    float
        The value; minus infinity if none matters. [lb/ft or kg/m]
    """
    low, high = 0, len(values)
    while low < high:
        middle = (low + high) // 2
        matters = any(
            bound.least(family, values[middle], mode) <= limit for mode, limit in limit_of.items()
        )
        if matters:
            low = middle + 1
        else:
            high = middle
    return values[low - 1] if low else -math.inf
