"""The best beam for each number of changed positions, by trying every choice.

Layouts, plans and ends come from the enumeration of all beams; what stays, what counts as a
change and what goes together is decided here by code of its own.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace
from itertools import combinations, pairwise, product

import numpy as np

from engine.beams.demand import SpanDemand
from engine.beams.spans import Overhang
from optimizer.beams.frames import frames
from optimizer.beams.plans import ShearOfSpan
from optimizer.beams.positions import TOP, DrawnBeam, StirrupState
from optimizer.beams.problem import BeamProblem
from optimizer.beams.variants import Face, Need, StirrupPlan, TopMode, Variant
from tests.beams.exhaustive.brute import BruteFrame
from tests.beams.exhaustive.plans import cost_of_set, outermost, serves

_Option = tuple[bool, Variant]


def brute_frontier(
    problem: BeamProblem,
    demands: Sequence[SpanDemand],
    old: DrawnBeam,
    cap: float,
    locked: frozenset[str] = frozenset(),
) -> list[float]:
    """Return the least cost for 0, 1, 2, ... changes, as far as below a cap; else infinity."""
    best: list[float] = []
    for frame in frames(problem):
        one = _Frontier(BruteFrame(problem, frame, demands), old, cap, locked)
        own = one.run()
        best = [min(pair) for pair in zip(best or own, own, strict=True)]
    return best


class _Frontier:
    def __init__(
        self, frame: BruteFrame, old: DrawnBeam, cap: float, locked: frozenset[str]
    ) -> None:
        self.frame, self.old, self.locked = frame, old, locked
        self.spans = frame.problem.beam.spans
        count = len(frame.places) + len(self.spans) + 1
        self.best = [cap] * (count + 1)
        self.cap = cap
        inner = sum(span.overhang is Overhang.NONE for span in self.spans)
        problem = frame.problem
        self.laps = inner > 1 and (problem.perimeter or not problem.closed_stirrups)
        depths: list[set[float]] = [set() for _ in self.spans]
        for plans, found in zip(frame.plans, depths, strict=True):
            found |= {plan.depth for plan in plans}
        self.as_drawn = [
            None
            if (state := old.stirrups.get(f"{span.mark} stirrups")) is None
            else self._as_drawn(frame.shears[number], state, sorted(depths[number]))
            for number, span in enumerate(self.spans)
        ]
        self._plans: dict[tuple[int, frozenset[Need]], tuple[float, float]] = {}

    def _as_drawn(
        self, shear: ShearOfSpan, state: StirrupState, depths: list[float]
    ) -> list[StirrupPlan]:
        """Return the plan as drawn with each depth it is enough for."""
        frame = self.frame.frame
        if (state.size, state.legs) != (frame.stirrup.designation, frame.legs):
            return []
        first, last = outermost(shear)
        x = shear.demand.x - shear.demand.x[0]
        clear = float(x[-1])
        left, middle, right = state.spacings
        rest = clear - first - last - state.ends[0] * left - state.ends[1] * right
        if rest < -1e-9:
            return []
        spaces = (state.ends[0], math.ceil(rest / middle - 1e-9), state.ends[1])
        plan = StirrupPlan(
            span=shear.span,
            depth=0.0,
            first=first,
            last=last,
            clear=clear,
            spacings=state.spacings,
            spaces=spaces,
            cost=(sum(spaces) + 1) * cost_of_set(shear),
        )
        at = np.array([plan.spacing_at(float(place)) for place in x])
        return [
            replace(plan, depth=depth)
            for depth in depths
            if (at <= shear.at_face_or_beyond(depth) * (1 + 1e-9)).all()
        ]

    def run(self) -> list[float]:
        """Return the least costs of this frame."""
        frame = self.frame
        names = {bar.designation for bar in frame.problem.rules.sizes}
        names |= {item.mode.bar.designation for item in frame.modes}
        most = min(frame.problem.most_sizes or len(names), len(names))
        for item in frame.modes:
            same = (item.mode.kind.value, item.mode.bar.designation) == (
                self.old.top.kind,
                self.old.top.size,
            )
            if not same and TOP in self.locked:
                continue
            for some in combinations(sorted(names), most):
                if item.mode.bar.designation not in some:
                    continue
                for corner in some if self.laps else (None,):
                    options = [
                        self._options(number, item.mode, set(some), corner)
                        for number in range(len(frame.places))
                    ]
                    if all(options):
                        self._descend(options, frame.constant + item.cost, 0 if same else 1)
        return [math.inf if cost >= self.cap else cost for cost in self.best]

    def _options(
        self, number: int, mode: TopMode, sizes: set[str], corner: str | None
    ) -> list[_Option]:
        """Return the variants of a place in one case, cheapest first, with whether they stay."""
        place = self.frame.places[number]
        state = self.old.places.get(place.mark)
        alike: dict[tuple[object, ...], _Option] = {}
        for variant in sorted(self.frame.variants[number], key=lambda item: item.cost):
            names = {bar.designation for bar in variant.layout.sizes}
            if variant.mode not in (None, mode) or not names <= sizes:
                continue
            first = variant.layout.layers[0].largest.designation
            if corner and place.face is Face.BOTTOM and first != corner:
                continue
            layers = tuple(layer.label for layer in variant.layout.layers)
            stays = state is not None and (layers, variant.run) == (state.layers, state.run)
            if not stays and place.mark in self.locked:
                continue
            key = (stays, variant.needs, variant.inertia, variant.run, variant.continuous)
            alike.setdefault(key, (stays, variant))
        return list(alike.values())

    def _cheapest(self, span: int, needs: frozenset[Need]) -> tuple[float, float]:
        """Return the cost of the plan as drawn and that of the cheapest, if they serve."""
        key = (span, needs)
        if key not in self._plans:
            kept = [plan.cost for plan in self.as_drawn[span] or [] if _all(plan, needs)]
            free = [plan.cost for plan in self.frame.plans[span] if _all(plan, needs)]
            old = min(kept, default=math.inf)
            lock = f"{self.spans[span].mark} stirrups" in self.locked
            self._plans[key] = (old, old if lock else min([*free, old], default=math.inf))
        return self._plans[key]

    def _descend(self, options: Sequence[Sequence[_Option]], base: float, changes: int) -> None:
        least = [min(variant.cost for _, variant in own) for own in options]
        rest = [sum(least[number:]) for number in range(len(options) + 1)]
        chosen: list[Variant] = []
        spans = range(len(self.spans))

        def costs(needs: Sequence[Need]) -> list[tuple[float, float]]:
            return [
                self._cheapest(span, frozenset(need for need in needs if need.span == span))
                for span in spans
            ]

        def go(number: int, cost: float, needs: tuple[Need, ...], changes: int) -> None:
            plans = costs(needs)
            total = cost + rest[number] + sum(free for _, free in plans)
            if total >= self.best[changes] - 1e-9:
                return
            if number == len(options):
                self._finish(chosen, cost, plans, changes)
                return
            for stays, variant in options[number]:
                chosen.append(variant)
                go(
                    number + 1,
                    cost + variant.cost,
                    (*needs, *variant.needs),
                    changes + (0 if stays else 1),
                )
                chosen.pop()

        go(0, base, (), changes)

    def _finish(
        self,
        chosen: Sequence[Variant],
        cost: float,
        plans: Sequence[tuple[float, float]],
        changes: int,
    ) -> None:
        if self.laps:
            places = zip(self.frame.places, chosen, strict=True)
            lapped = [
                variant
                for place, variant in places
                if place.face is Face.BOTTOM and self.spans[place.index].overhang is Overhang.NONE
            ]
            for one, other in pairwise(lapped):
                if one.run < other.continuous or other.run < one.continuous:
                    return
        for free, back, top, bottom in self.frame._hangs():
            if not self.frame._stiff(free, back, chosen[top], chosen[bottom]):
                return
        for which in product((0, 1), repeat=len(plans)):
            total = cost + sum(pair[one] for pair, one in zip(plans, which, strict=True))
            count = changes + sum(which)
            for number in range(count, len(self.best)):
                self.best[number] = min(self.best[number], total)


def _all(plan: StirrupPlan, needs: frozenset[Need]) -> bool:
    return all(serves(plan, need) for need in needs)
