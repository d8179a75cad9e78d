"""The cheapest beam of all, by trying every choice of every place.

The rules of the bars' ends come from the builders of the search, which other tests check. The
layouts, the stirrup plans and what goes together with what are listed here by code of its own.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from itertools import combinations, pairwise

import numpy as np

from engine.beams.demand import SpanDemand
from engine.beams.envelopes import redistributed_supports
from engine.beams.spans import Overhang
from optimizer.beams.bottom import BottomBuilder
from optimizer.beams.builder import Builder
from optimizer.beams.fixed import fixed_pieces
from optimizer.beams.frames import Frame, frames
from optimizer.beams.modes import ModeBuilder
from optimizer.beams.places import Place, places
from optimizer.beams.plans import ShearOfSpan, depth_for_shear
from optimizer.beams.problem import BeamProblem
from optimizer.beams.sag import deflections, stages, within_limit
from optimizer.beams.top import TopBuilder
from optimizer.beams.variants import Face, Need, StirrupPlan, TopMode, Variant
from tests.beams.exhaustive.layouts import fitted_layouts
from tests.beams.exhaustive.plans import every_plan, serves


@dataclass(frozen=True, slots=True, kw_only=True)
class Best:
    """The cheapest beam of a frame or of all.

    Attributes
    ----------
    cost : float
        Its cost; infinite if there is none. [lb or kg]
    variants : tuple of Variant
        Bars of each place.
    plans : tuple of StirrupPlan
        Stirrups of each span.
    mode : TopMode or None
        Top face.
    frame : str
        Stirrup size and legs.
    """

    cost: float
    variants: tuple[Variant, ...] = ()
    plans: tuple[StirrupPlan, ...] = ()
    mode: TopMode | None = None
    frame: str = ""


class BruteFrame:
    """All choices of one frame."""

    def __init__(self, problem: BeamProblem, frame: Frame, demands: Sequence[SpanDemand]) -> None:
        self.problem, self.frame, self.demands = problem, frame, demands
        self.shears = [
            ShearOfSpan(problem, frame, index, demand) for index, demand in enumerate(demands)
        ]
        self.shared = Builder(problem, frame, self.shears)
        self.places: list[Place] = places(problem.beam, frame, demands)
        tops = [place for place in self.places if place.face is Face.TOP]
        self.modes = ModeBuilder(self.shared, tops).modes()
        self.variants = [self._variants(place) for place in self.places]
        self.plans = self._plans()
        self.constant = self.shared.cost(fixed_pieces(self.shared, demands))
        self._cheapest: dict[tuple[int, frozenset[Need]], StirrupPlan | None] = {}
        self._sag: dict[tuple[int, float, float], bool] = {}

    def _variants(self, place: Place) -> list[Variant]:
        fitted = fitted_layouts(place, self.problem.rules, self.problem.ranking)
        if place.face is Face.BOTTOM:
            return BottomBuilder(self.shared, place).variants(fitted)
        lowered = redistributed_supports(self.problem.beam)[place.index]
        changed = self.problem.redistribution > 0.0 and lowered
        builder = TopBuilder(self.shared, place, redistributed=changed)
        return builder.variants(fitted, self.modes)

    def _plans(self) -> list[list[StirrupPlan]]:
        found = []
        for span, shear in enumerate(self.shears):
            depths = {
                need.depth
                for variants in self.variants
                for variant in variants
                for need in variant.needs
                if need.span == span
            }
            if not depths:  # a cantilever without hogging moment: its hangers give the depth
                section = self.frame.sections[span]
                hanger = self.problem.hangers[0].diameter
                depths = {
                    depth_for_shear(self.problem, section.outline.depth - section.bar_face - hanger)
                }
            found.append(every_plan(shear, depths))
        return found

    def _plan(self, span: int, needs: frozenset[Need]) -> StirrupPlan | None:
        key = (span, needs)
        if key not in self._cheapest:
            self._cheapest[key] = next(
                (plan for plan in self.plans[span] if all(serves(plan, need) for need in needs)),
                None,
            )
        return self._cheapest[key]

    def _hangs(self) -> list[tuple[int, int, int, int]]:
        """Return cantilever, next span, and the places of their top and bottom bars."""
        found = []
        spans = self.problem.beam.spans
        where = {(place.face, place.index): n for n, place in enumerate(self.places)}
        for free, back, support in (
            (0, 1, 0),
            (len(spans) - 1, len(spans) - 2, len(self.problem.beam.supports) - 1),
        ):
            wanted = Overhang.LEFT if free == 0 else Overhang.RIGHT
            if spans[free].overhang is wanted and (Face.TOP, support) in where:
                found.append((free, back, where[Face.TOP, support], where[Face.BOTTOM, back]))
        return found

    def _continuous(self, chosen: Sequence[Variant]) -> bool:
        """Return whether a quarter of the bars of each span is lapped with the next, 9.7.7."""
        if self.problem.closed_stirrups and not self.problem.perimeter:
            return True
        bottoms = [
            variant
            for place, variant in zip(self.places, chosen, strict=True)
            if place.face is Face.BOTTOM
        ]
        for one, other in pairwise(bottoms):
            lapped = min(one.run, other.run)
            area = lapped * one.layout.layers[0].largest.area
            most = max(one.layout.area, other.layout.area)
            if lapped < 2 or area < most / 4.0 * (1 - 1e-6):
                return False
        return True

    def _stiff(self, free: int, back: int, top: Variant, bottom: Variant) -> bool:
        unit, unit_back = self.demands[free].deflections, self.demands[back].deflections
        if unit is None or unit_back is None:
            return True
        key = (free, top.inertia, bottom.inertia)
        if key not in self._sag:
            spans = self.problem.beam.spans
            section = replace(self.frame.sections[free], Mu=-1.0, Ms=None)
            behind = replace(self.frame.sections[back], Mu=1.0, Ms=None)
            own = stages(section, spans[free], unit, np.array([top.inertia]))
            other = stages(behind, spans[back], unit_back, np.array([bottom.inertia]))
            found = deflections(section, unit, own, other)
            ratio = within_limit(self.problem, spans[free], found)
            self._sag[key] = bool(ratio[0] <= 1.0 + 1e-6)
        return self._sag[key]

    def best(self, known: float) -> Best:
        """Return the cheapest beam of the frame that is cheaper than one known."""
        result = Best(cost=known)
        names = {bar.designation for bar in self.problem.rules.sizes}
        names |= {item.mode.bar.designation for item in self.modes}
        most = min(self.problem.most_sizes or len(names), len(names))
        inner = sum(span.overhang is Overhang.NONE for span in self.problem.beam.spans)
        laps = inner > 1 and (self.problem.perimeter or not self.problem.closed_stirrups)
        for item in self.modes:
            for some in combinations(sorted(names), most):
                if item.mode.bar.designation not in some:
                    continue
                for corner in some if laps else (None,):
                    kept = [
                        self._allowed(place, variants, item.mode, set(some), corner)
                        for place, variants in zip(self.places, self.variants, strict=True)
                    ]
                    result = self._descend(kept, item.mode, self.constant + item.cost, result)
        return result

    @staticmethod
    def _allowed(
        place: Place,
        variants: Sequence[Variant],
        mode: TopMode,
        sizes: set[str],
        corner: str | None,
    ) -> list[Variant]:
        """Return the variants of a place in one case, the cheapest of those alike to others."""
        alike: dict[tuple[object, ...], Variant] = {}
        for variant in sorted(variants, key=lambda item: item.cost):
            names = {bar.designation for layer in variant.layout.layers for bar, _ in layer.groups}
            if variant.mode not in (None, mode) or not names <= sizes:
                continue
            first = max(variant.layout.layers[0].groups, key=lambda group: group[0].diameter)[0]
            if corner and place.face is Face.BOTTOM and first.designation != corner:
                continue
            own = (variant.needs, variant.inertia, variant.run, variant.layout.area)
            alike.setdefault(own, variant)
        return list(alike.values())

    def _descend(
        self, kept: Sequence[Sequence[Variant]], mode: TopMode, base: float, best: Best
    ) -> Best:
        if not all(kept):
            return best
        least = [items[0].cost for items in kept]
        rest = [sum(least[number:]) for number in range(len(kept) + 1)]
        spans = range(len(self.shears))
        hangs = self._hangs()
        chosen: list[Variant] = []

        def plans_for(needs: Sequence[Need]) -> list[StirrupPlan] | None:
            found = []
            for span in spans:
                own = frozenset(need for need in needs if need.span == span)
                plan = self._plan(span, own)
                if plan is None:
                    return None
                found.append(plan)
            return found

        def go(number: int, cost: float, needs: tuple[Need, ...]) -> None:
            nonlocal best
            plans = plans_for(needs)
            if plans is None:
                return
            total = cost + sum(plan.cost for plan in plans)
            if total + rest[number] >= best.cost - 1e-9:
                return
            if number == len(kept):
                if not self._continuous(chosen):
                    return
                for free, back, top, bottom in hangs:
                    if not self._stiff(free, back, chosen[top], chosen[bottom]):
                        return
                best = Best(
                    cost=total,
                    variants=tuple(chosen),
                    plans=tuple(plans),
                    mode=mode,
                    frame=self.frame.label,
                )
                return
            for variant in kept[number]:
                if total + variant.cost + rest[number + 1] >= best.cost - 1e-9:
                    break  # the others cost more
                chosen.append(variant)
                go(number + 1, cost + variant.cost, (*needs, *variant.needs))
                chosen.pop()

        go(0, base, ())
        return best


def brute_force(problem: BeamProblem, demands: Sequence[SpanDemand]) -> Best:
    """Return the cheapest beam of all frames; its cost is infinite if there is none."""
    best = Best(cost=math.inf)
    for frame in frames(problem):
        best = BruteFrame(problem, frame, demands).best(best.cost)
    return best
