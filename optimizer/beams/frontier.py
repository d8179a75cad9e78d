"""The least-change frontier: the best beam for each number of positions that may change.

For a number k of changes the model of the beam gets one constraint more. Which layouts can
matter then is bounded more tightly than for the best beam: all but k positions are as they
were, so of what the others could save only the k largest savings count.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from catalogs import BarCatalog, CatalogError
from engine import EngineError, Layout, parse_layout
from engine.outlines import FloatArray
from optimizer.beams.cases import PlaceTable
from optimizer.beams.choice import Choice, Keep, Menu, choose
from optimizer.beams.positions import TOP, DrawnBeam, TopState, stirrups_mark
from optimizer.beams.solving import FrameSearch

_SLACK = 1e-6


@dataclass(frozen=True, slots=True, kw_only=True)
class Kept:
    """What of a beam as drawn a frame can keep.

    Attributes
    ----------
    places : tuple of frozenset of int
        Variants of each place that leave it as it was.
    plans : tuple of bool
        Whether the stirrups of each span are there as they were.
    mode : int or None
        Number of the arrangement of the top face as it was.
    """

    places: tuple[frozenset[int], ...]
    plans: tuple[bool, ...]
    mode: int | None


def layout_as_drawn(old: DrawnBeam, mark: str, catalog: BarCatalog) -> tuple[Layout, int] | None:
    """Layout of a place as drawn, with the number of bars that run on.

    Parameters
    ----------
    old : DrawnBeam
        Beam as drawn.
    mark : str
        Mark of the place.
    catalog : BarCatalog
        Catalogue of its sizes.

    Returns
    -------
    tuple of Layout and int, or None
        None where the place was not there, or the catalogue no longer has its sizes.
    """
    state = old.places.get(mark)
    if state is None:
        return None
    try:
        return parse_layout(state.layers, catalog), state.run
    except (EngineError, CatalogError):
        return None


class FrontierOfFrame:
    """The frontier of one frame.

    Parameters
    ----------
    search : FrameSearch
        Search of the frame; its lists are extended as needed.
    old : DrawnBeam
        Beam as drawn.
    locked : frozenset of str
        Positions that must stay.
    """

    def __init__(
        self,
        search: FrameSearch,
        old: DrawnBeam,
        locked: frozenset[str],
    ) -> None:
        self.search, self.old, self.locked = search, old, locked
        beam = search.problem.beam
        self._layouts: list[tuple[Layout, int] | None] = []
        for place, listing in zip(search.places, search.listings, strict=True):
            state = layout_as_drawn(old, place.mark, search.problem.catalog)
            self._layouts.append(state)
            if state is not None:
                listing.include(state[0])
        self._drawn = {}
        for span in range(len(beam.spans)):
            own = old.stirrups.get(stirrups_mark(beam, span))
            frame = search.frame
            if own and own.size == frame.stirrup.designation and own.legs == frame.legs:
                self._drawn[span] = (own.spacings, own.ends)
        search.set_drawn(self._drawn)
        search.build()

    def kept(self) -> Kept:
        """What can be kept, as far as listed."""
        search = self.search
        places = []
        for state, variants in zip(self._layouts, search.variants, strict=True):
            places.append(
                frozenset(
                    number
                    for number, variant in enumerate(variants)
                    if state == (variant.layout, variant.run)
                )
            )
        plans = []
        for span, pool in enumerate(search.pools):
            drawn = self._drawn.get(span)
            plans.append(drawn is not None and any(plan.is_drawn(*drawn) for plan in pool.plans))
        modes = [
            number
            for number, item in enumerate(search.modes)
            if TopState.of(item.mode) == self.old.top
        ]
        return Kept(places=tuple(places), plans=tuple(plans), mode=modes[0] if modes else None)

    @property
    def names(self) -> list[str]:
        """Names of the positions: places, stirrups, top face."""
        search = self.search
        spans = range(len(search.problem.beam.spans))
        return [
            *(place.mark for place in search.places),
            *(stirrups_mark(search.problem.beam, span) for span in spans),
            TOP,
        ]

    def best(self, changes: int, known: float) -> tuple[Choice, Menu, bool] | bool:
        """Best beam of the frame with some number of changes.

        Parameters
        ----------
        changes : int
            Most positions that may change.
        known : float
            Cost of a beam that would do; only cheaper ones are of interest. [lb or kg]

        Returns
        -------
        tuple of Choice, Menu and bool, or bool
            The choice, its menu and whether it is proved; else whether it is proved that there
            is none.
        """
        search = self.search
        if not search.modes:
            return True
        best: tuple[Choice, Menu] | None = None
        limit = known
        proved = True
        while True:
            numbers, limits = self._limits(limit, changes)
            if not len(numbers):
                break
            extended = search.extend_to(numbers, limits)
            if extended:
                search.build()
                numbers, limits = self._limits(limit, changes)
            kept = self.kept()
            menu, chosen = search.menu(search.within(numbers, limits), kept.places)
            solved = choose(menu, search.work, self._keep(menu, chosen, kept, changes))
            search.work -= solved.work
            proved &= solved.proved
            if solved.choice is not None and solved.choice.cost < limit - _SLACK:
                best, limit = (solved.choice, menu), solved.choice.cost
            if not extended:
                break
        complete = all(listing.complete for listing in search.listings)
        if best is None:
            return proved and complete
        return (*best, proved and complete)

    def _keep(self, menu: Menu, chosen: Sequence[Sequence[int]], kept: Kept, changes: int) -> Keep:
        places = tuple(
            frozenset(where for where, number in enumerate(numbers) if number in own)
            for numbers, own in zip(chosen, kept.places, strict=True)
        )
        plans = []
        for span, pool in enumerate(menu.pools):
            drawn = self._drawn.get(span)
            plans.append(
                frozenset(
                    number
                    for number, plan in enumerate(pool.plans)
                    if drawn is not None and plan.is_drawn(*drawn)
                )
            )
        return Keep(
            places=places,
            plans=tuple(plans),
            modes=frozenset() if kept.mode is None else frozenset({kept.mode}),
            most_changes=changes,
            locked=frozenset(
                number for number, name in enumerate(self.names) if name in self.locked
            ),
        )

    def _limits(self, best: float, changes: int) -> tuple[NDArray[np.intp], FloatArray]:
        """Cases that may hold a beam as good, and what each place may cost in them."""
        search, cases = self.search, self.search.cases()
        kept = self.kept()
        least = np.array([table.least() for table in search.tables()])
        old = np.array(
            [
                PlaceTable(
                    cases,
                    [variants[number] for number in sorted(own)],
                    (),
                    lapped=place in search.lapped,
                ).least()
                for place, (variants, own) in enumerate(
                    zip(search.variants, kept.places, strict=True)
                )
            ]
        )
        groups = len(cases.mode)
        plan_least = np.tile(search.least_plans()[:, None], (1, groups))
        plan_old = np.full((len(search.pools), groups), math.inf)
        for span, there in enumerate(kept.plans):
            if there:
                plans = search.pools[span].plans
                cost = min(plan.cost for plan in plans if plan.is_drawn(*self._drawn[span]))
                plan_old[span] = cost
        all_least = np.concatenate((least, plan_least))
        all_old = np.concatenate((old, plan_old))
        for number, name in enumerate(self.names[:-1]):
            if name in self.locked:
                all_least[number] = all_old[number]
        forced = np.isinf(all_old)
        left = changes - forced.sum(axis=0)
        left = left - (1 if kept.mode is None else cases.mode != kept.mode)
        mode_cost = np.array([item.cost for item in search.modes])[cases.mode]
        base = search.constant + mode_cost
        base = base + np.where(forced, all_least, all_old).sum(axis=0)
        with np.errstate(invalid="ignore"):  # where a case has no bars at all
            saving = np.where(forced, 0.0, np.maximum(all_old - all_least, 0.0))
        ordered = -np.sort(-saving, axis=0)
        summed = np.concatenate((np.zeros((1, groups)), np.cumsum(ordered, axis=0)))
        count = np.clip(left, 0, len(saving))
        column = np.arange(groups)
        most = summed[count, column]  # what k changes can save at most
        good = (left >= 0) & np.isfinite(base)
        if TOP in self.locked and kept.mode is not None:
            good &= cases.mode == kept.mode
        slack = best + _SLACK * abs(best) if math.isfinite(best) else best
        good &= base - most <= slack
        numbers = np.flatnonzero(good)
        fewer = summed[np.maximum(count - 1, 0), column]
        threshold = ordered[np.clip(count - 1, 0, len(saving) - 1), column]
        limits = np.empty((len(search.places), len(numbers)))
        for place in range(len(search.places)):
            # Savings of the others, if this place takes one of the changes.
            others = np.where(saving[place] >= threshold, most - saving[place], fewer)
            own = np.where(forced[place], all_least[place], all_old[place])
            with np.errstate(invalid="ignore"):
                allowed = slack - (base - own - np.where(forced[place], most, others))
            may = forced[place] | (count >= 1)
            if self.names[place] in self.locked:
                may = np.zeros(groups, dtype=np.bool_)
            limits[place] = np.where(may, allowed, -math.inf)[numbers]
        return numbers, limits
