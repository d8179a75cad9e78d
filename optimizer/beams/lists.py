"""Everything that may be chosen in one frame, listed as far as the search has asked for."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import replace

import numpy as np

from engine.beams.demand import SpanDemand
from engine.beams.envelopes import redistributed_supports
from engine.beams.spans import Overhang
from engine.outlines import FloatArray
from optimizer.beams.bottom import BottomBuilder
from optimizer.beams.bounds import PlaceBound
from optimizer.beams.builder import Builder
from optimizer.beams.cases import Groups, PlaceTable
from optimizer.beams.choice import Choice, Menu
from optimizer.beams.fixed import fixed_pieces
from optimizer.beams.frames import Frame
from optimizer.beams.listing import Fitted, Listing
from optimizer.beams.marks import mark_rule
from optimizer.beams.modes import ModeBars, ModeBuilder
from optimizer.beams.places import places
from optimizer.beams.plans import ShearOfSpan, depth_for_shear, plan_as_drawn, plans_of_span
from optimizer.beams.pools import PlanPool, undominated
from optimizer.beams.problem import BeamProblem
from optimizer.beams.sag import deflections, stages, within_limit
from optimizer.beams.top import TopBuilder
from optimizer.beams.variants import Face, Piece, TopMode, Variant

Drawn = tuple[tuple[float, float, float], tuple[int, int]]
"""Three stirrup spacings [in or mm] and the spaces in the two end zones."""
_SLACK = 1e-6


class FrameLists:
    """Layouts, plans and arrangements of one beam in one frame, as far as listed.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    frame : Frame
        Stirrup and legs.
    demands : sequence of SpanDemand
        Envelopes.
    """

    def __init__(self, problem: BeamProblem, frame: Frame, demands: Sequence[SpanDemand]) -> None:
        self.problem, self.frame, self.demands = problem, frame, demands
        self.shears = [
            ShearOfSpan(problem, frame, index, demand) for index, demand in enumerate(demands)
        ]
        self.shared = Builder(problem, frame, self.shears)
        self.places = places(problem.beam, frame, demands)
        moved = redistributed_supports(problem.beam)
        self.builders: list[BottomBuilder | TopBuilder] = []
        for place in self.places:
            if place.face is Face.BOTTOM:
                self.builders.append(BottomBuilder(self.shared, place))
            else:
                changed = problem.redistribution > 0.0 and moved[place.index]
                self.builders.append(TopBuilder(self.shared, place, redistributed=changed))
        self.listings = [
            Listing(
                place, problem.rules, problem.ranking, problem.work_limit, builder.corner_possible
            )
            for place, builder in zip(self.places, self.builders, strict=True)
        ]
        self.bounds = [PlaceBound(self.shared, place) for place in self.places]
        tops = [place for place in self.places if place.face is Face.TOP]
        self.mode_builder = ModeBuilder(self.shared, tops)
        self.modes: list[ModeBars] = [
            item for item in self.mode_builder.modes() if self._possible(item.mode)
        ]
        self.fixed = fixed_pieces(self.shared, demands)
        self.variants: list[list[Variant]] = [[] for _ in self.places]
        self._taken = [[0] * len(listing.families) for listing in self.listings]
        self.pools: list[PlanPool] = []
        self._depths: list[set[float]] = []
        self.drawn: dict[int, Drawn] = {}
        self._cases: Groups | None = None
        self._tables: list[PlaceTable] | None = None
        self._plans_bound: FloatArray | None = None
        self.work = problem.work_limit
        self.proved = True
        self.last_menu: Menu | None = None

    def _possible(self, mode: TopMode) -> bool:
        """Whether every top has a family that could serve an arrangement."""
        return all(
            any(
                math.isfinite(bound.least(family, listing.least(number), mode))
                for number, family in enumerate(listing.families)
            )
            for place, bound, listing in zip(self.places, self.bounds, self.listings, strict=True)
            if place.face is Face.TOP
        )

    @property
    def lapped(self) -> tuple[int, ...]:
        """Places whose running bars are lapped with those of the next span."""
        inner = [number for number, place in enumerate(self.places) if place.face is Face.BOTTOM]
        if not self.shared.integrity:
            return ()
        return tuple(
            number
            for number in inner
            if any(not side.end_of_beam for side in self.places[number].sides)
        )

    @property
    def constant(self) -> float:
        """Cost of the bars that no choice depends on. [lb or kg]"""
        return self.shared.cost(self.fixed)

    def build(self) -> None:
        """Make variants of all layouts listed since the last time, and plans for all depths."""
        for number, (listing, builder) in enumerate(zip(self.listings, self.builders, strict=True)):
            new: list[Fitted] = []
            for family, found in enumerate(listing.found):
                new += found[self._taken[number][family] :]
                self._taken[number][family] = len(found)
            if isinstance(builder, BottomBuilder):
                self.variants[number] += builder.variants(new)
            else:
                self.variants[number] += builder.variants(new, self.modes)
        depths: list[set[float]] = [set() for _ in self.problem.beam.spans]
        for variants in self.variants:
            for variant in variants:
                for need in variant.needs:
                    depths[need.span].add(need.depth)
        for span, found_depths in enumerate(depths):
            if not found_depths:
                section = self.frame.sections[span]
                d = section.outline.depth - section.bar_face - self.problem.hangers[0].diameter
                found_depths.add(depth_for_shear(self.problem, d))
        if self._depths != depths:
            self._depths = depths
            self.pools = [
                self._pool(shear, sorted(found))
                for shear, found in zip(self.shears, depths, strict=True)
            ]
        self._tables = None

    def _pool(self, shear: ShearOfSpan, depths: list[float]) -> PlanPool:
        plans = plans_of_span(shear, depths)
        drawn = self.drawn.get(shear.span)
        plan = None if drawn is None else plan_as_drawn(shear, depths, *drawn)
        if plan is not None and plan not in plans:
            plans.append(plan)
        return PlanPool(plans)

    def set_drawn(self, drawn: dict[int, Drawn]) -> None:
        """Offer stirrups drawn before among the plans of their spans.

        Parameters
        ----------
        drawn : dict
            For each span the three spacings [in or mm] and the spaces in the end zones.
        """
        self.drawn = drawn
        self._depths = []

    def menu(
        self, allowed: Sequence[Sequence[int]], stay: Sequence[frozenset[int]] | None = None
    ) -> tuple[Menu, list[list[int]]]:
        """The model's menu from some variants of each place.

        Parameters
        ----------
        allowed : sequence of sequence of int
            Variants of each place.
        stay : sequence of frozenset of int, optional
            Variants of each place that are offered in any case.

        Returns
        -------
        tuple of Menu and list of list of int
            Menu, and for each place the numbers of its variants.
        """
        always = stay if stay is not None else [frozenset()] * len(allowed)
        offered = [sorted(set(few) | own) for few, own in zip(allowed, always, strict=True)]
        some = [
            [variants[number] for number in numbers]
            for variants, numbers in zip(self.variants, offered, strict=True)
        ]
        kept = []
        for numbers, own, chosen, clashes in zip(
            offered, always, some, self._sagging(some), strict=True
        ):
            fixed = frozenset(where for where, number in enumerate(numbers) if number in own)
            if self.problem.most_marks is None:
                best = undominated(chosen, self.pools, fixed, clashes)
            else:  # a dearer variant may share its marks with others
                best = list(range(len(chosen)))
            kept.append([numbers[item] for item in best])
        return self.menu_of(kept), kept

    def _sagging(self, chosen: Sequence[Sequence[Variant]]) -> list[list[int]]:
        """For each variant, as bits, the stiffnesses at other places that it sags too much with.

        More stiffness is not always better: a stiffer span behind a cantilever lifts its tip
        less, and deflections of live load are differences.
        """
        few = [list({item.inertia: item for item in variants}.values()) for variants in chosen]
        bits = [dict.fromkeys((item.inertia for item in variants), 0) for variants in few]
        used = [0] * len(few)
        for one, other, clashes in self._cantilever_pairs(few):
            for first, second in clashes:
                bits[one][few[one][first].inertia] |= 1 << (used[one] + second)
                bits[other][few[other][second].inertia] |= 1 << (used[other] + first)
            used[one] += len(few[other])
            used[other] += len(few[one])
        return [
            [own[item.inertia] for item in variants]
            for own, variants in zip(bits, chosen, strict=True)
        ]

    def menu_of(self, kept: Sequence[Sequence[int]]) -> Menu:
        """Menu of exactly some variants of each place."""
        chosen = tuple(
            tuple(variants[number] for number in numbers)
            for variants, numbers in zip(self.variants, kept, strict=True)
        )
        return Menu(
            places=chosen,
            pools=tuple(self.pools),
            modes=tuple(self.modes),
            lapped=self.lapped,
            pairs=tuple(self._cantilever_pairs(chosen)),
            most_sizes=self.problem.most_sizes,
            constant=self.constant,
            marks=mark_rule(
                self.problem,
                self.frame,
                self.places,
                chosen,
                self.modes,
                self.mode_builder,
                self.fixed,
            ),
        )

    def _cantilever_pairs(
        self, chosen: Sequence[Sequence[Variant]]
    ) -> Iterator[tuple[int, int, tuple[tuple[int, int], ...]]]:
        """Top bars of a cantilever and bottom bars of the next span that sag too much."""
        beam = self.problem.beam
        for number, place in enumerate(self.places):
            if place.face is not Face.TOP:
                continue
            for side in place.sides:
                unit = self.demands[side.span].deflections
                if not side.end_of_beam or unit is None:
                    continue
                left = beam.spans[side.span].overhang is Overhang.LEFT
                back = side.span + 1 if left else side.span - 1
                other = next(
                    index
                    for index, item in enumerate(self.places)
                    if item.face is Face.BOTTOM and item.index == back
                )
                yield (
                    number,
                    other,
                    tuple(self._clashes(side.span, back, chosen[number], chosen[other])),
                )

    def _clashes(
        self, free: int, back: int, tops: Sequence[Variant], bottoms: Sequence[Variant]
    ) -> Iterator[tuple[int, int]]:
        unit = self.demands[free].deflections
        unit_back = self.demands[back].deflections
        if unit is None or unit_back is None or not tops or not bottoms:
            return
        span = self.problem.beam.spans[free]
        section = replace(self.frame.sections[free], Mu=-1.0, Ms=None)
        behind = replace(self.frame.sections[back], Mu=1.0, Ms=None)
        Icr = np.array([variant.inertia for variant in bottoms])
        stage_back = stages(behind, self.problem.beam.spans[back], unit_back, Icr)
        for first, top in enumerate(tops):
            own = stages(section, span, unit, np.full(len(bottoms), top.inertia))
            found = deflections(section, unit, own, stage_back)
            for second in np.flatnonzero(within_limit(self.problem, span, found) > 1.0 + _SLACK):
                yield first, int(second)


def all_pieces(search: FrameLists, menu: Menu, choice: Choice) -> tuple[Piece, ...]:
    """Every bar of a choice but the stirrups, hangers included.

    Parameters
    ----------
    search : FrameLists
        Lists of the frame.
    menu : Menu
        Menu of the choice.
    choice : Choice
        Choice.

    Returns
    -------
    tuple of Piece
        Bars by place.
    """
    pieces: list[Piece] = []
    reaches: dict[int, tuple[float, float]] = {}
    for place, variants, number in zip(search.places, menu.places, choice.places, strict=True):
        variant = variants[number]
        pieces += variant.pieces
        if place.face is Face.TOP and variant.mode is not None:
            long = [piece for piece in variant.pieces if piece.role.value == "run"]
            if long:
                reaches[place.index] = (long[0].start, long[0].end)
    mode = menu.modes[choice.mode]
    pieces += mode.pieces
    if not mode.pieces:
        pieces += search.mode_builder.hangers(mode.mode, reaches)
    pieces += search.fixed
    return tuple(pieces)
