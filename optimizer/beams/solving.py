"""The search of one frame: list layouts, choose, list what could still matter, choose again.

The first lists are short. The beam chosen from them is an upper bound. Then every place is
listed as far as any of its layouts could belong to a beam that is no worse, by the bounds of
`optimizer.beams.bounds`, taken for each arrangement of the top face, each set of sizes and
each size of the lapped bottom bars apart. The choice from these lists is the best beam.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from engine.outlines import FloatArray
from optimizer.beams.bounds import next_value
from optimizer.beams.cases import Groups, PlaceTable, groups_of
from optimizer.beams.choice import Choice, Solved, choose
from optimizer.beams.lists import FrameLists
from optimizer.beams.plans import depth_for_shear, plans_of_span
from optimizer.beams.variants import Face, TopMode

_FIRST_BAND = 1.08  # first lists go this far beyond the least cost per length
_WIDER = 1.25
_STEP = 1.35  # lists grow by this in cost per length, and bounds with them
_TRIES = 8
_SLACK = 1e-6


class FrameSearch(FrameLists):
    """Search of one beam with one stirrup size and number of legs; see the module's text."""

    def first_lists(self) -> bool:
        """List every place until it has variants; False if one has none at all."""
        # All are listed even so: what stands in the way is to be said of each.
        served = [self._list_place(number) for number in range(len(self.places))]
        return all(served)

    def _list_place(self, number: int) -> bool:
        """List one place until it has variants; False if it has none at all."""
        listing = self.listings[number]
        least = [listing.least(family) for family in range(len(listing.families))]
        cheapest = min(least, default=math.inf)
        if not math.isfinite(cheapest):
            return False
        band = _FIRST_BAND
        while True:
            for family, item in enumerate(listing.families):
                # Bars that have to match those of other places need a choice of sizes.
                if len(item.bars) == 1 and math.isfinite(least[family]):
                    listing.extend(family, least[family] * band)
                listing.extend(family, cheapest * band)
            self.build()
            if self.variants[number]:
                return True
            left = min(listing.least(family) for family in range(len(listing.families)))
            if not math.isfinite(left):
                return False
            band = max(band * _WIDER, left / cheapest * _FIRST_BAND)

    def _serve_modes(self) -> None:
        """List tops further until each arrangement of the top face is served, if it can be."""
        for number, place in enumerate(self.places):
            if place.face is not Face.TOP:
                continue
            listing = self.listings[number]
            for mode in (item.mode for item in self.modes):
                for _ in range(_TRIES):
                    if any(variant.mode == mode for variant in self.variants[number]):
                        break
                    grown = False
                    for family, item in enumerate(listing.families):
                        bound = self.bounds[number].least(item, listing.least(family), mode)
                        if len(item.bars) == 1 and math.isfinite(bound):
                            grown |= listing.extend(family, listing.least(family) * _STEP)
                    if not grown:
                        break
                    self.build()

    def widen(self) -> bool:
        """List every place further; False if all are listed to their ends."""
        wider = False
        for listing in self.listings:
            least = [listing.least(family) for family in range(len(listing.families))]
            if math.isfinite(min(least)):
                limit = min(least) * _WIDER
                for family in range(len(listing.families)):
                    wider |= listing.extend(family, limit)
        self.build()
        return wider

    def solve(self, best_known: float) -> Solved:
        """Best beam of the frame, if it is better than one known.

        Parameters
        ----------
        best_known : float
            Cost of the best beam of other frames; infinite without one. [lb or kg]

        Returns
        -------
        Solved
            Best choice; its numbers refer to `last_menu`.
        """
        limit = best_known
        if math.isfinite(limit):
            if not self.modes:
                return self._none()
            self.build()
        else:
            # Lists come first even where nothing can come of them: they say what is in the way.
            if not self.first_lists() or not self.modes:
                return self._none()
            self._serve_modes()
            everything = [list(range(len(items))) for items in self.variants]
            first = self._choose(everything)
            while first is None:
                if not self.widen():
                    return self._none()
                everything = [list(range(len(items))) for items in self.variants]
                first = self._choose(everything)
            limit = first.cost
        best = None
        while True:
            extended = self.extend_to(*self._limits(limit))
            if extended:
                self.build()
            allowed = self.within(*self._limits(limit))
            # With a place left empty nothing of this frame is as good, unless lists still grow.
            best = self._choose(allowed) if all(allowed) else None
            if best is not None:
                limit = min(limit, best.cost)
            if not extended:
                break
        return Solved(choice=best, proved=self._sure(), work=0.0)

    def _none(self) -> Solved:
        """No choice at all."""
        return Solved(choice=None, proved=self._sure(), work=0.0)

    def _sure(self) -> bool:
        """Whether no limit on the work has cut anything short."""
        return self._complete() and self.proved

    def without_variants(self) -> list[tuple[str, str]]:
        """Places for which nothing was found, each with what stands in the way.

        Returns
        -------
        list of (str, str)
            Mark of the place and the reason.
        """
        found = []
        for place, listing, variants in zip(self.places, self.listings, self.variants, strict=True):
            if not any(listing.found):
                found.append((place.mark, "no layout passes the checks of its section"))
            elif not variants:
                why = "; ".join(self.shared.refusals(place.mark)[:2])
                found.append((place.mark, f"layouts pass, but none can be used: {why}"))
        for shear, pool in zip(self.shears, self.pools, strict=False):
            if not pool.plans:
                mark = self.problem.beam.spans[shear.span].mark
                found.append((mark, "no stirrups of this size carry the shear"))
        if not self.modes:
            found.append(("top bars", "none can be anchored at the ends of the beam"))
        return found

    def _complete(self) -> bool:
        return all(listing.complete for listing in self.listings)

    def _choose(self, allowed: Sequence[Sequence[int]]) -> Choice | None:
        menu, _ = self.menu(allowed)
        solved = choose(menu, self.work)
        self.work -= solved.work
        self.proved &= solved.proved
        self.last_menu = menu
        return solved.choice

    def cases(self) -> Groups:
        """All cases of the bound."""
        if self._cases is None:
            self._cases = groups_of(self.problem, self.modes, lapped=len(self.lapped) > 1)
        return self._cases

    def tables(self) -> list[PlaceTable]:
        """Costs of every place by what the cases of the bound ask for."""
        if self._tables is None:
            self._tables = [self._table(number) for number in range(len(self.places))]
        return self._tables

    def _table(self, number: int) -> PlaceTable:
        listing, bound = self.listings[number], self.bounds[number]
        bottom = self.places[number].face is Face.BOTTOM
        unlisted = []
        for mode, item in enumerate(self.modes):
            if bottom and mode:
                break
            for family, own in enumerate(listing.families):
                top = None if bottom else item.mode
                value = bound.least(own, listing.least(family), top)
                if math.isfinite(value):
                    unlisted.append((None if bottom else mode, own, value))
        return PlaceTable(
            self.cases(),
            self.variants[number],
            unlisted,
            lapped=number in self.lapped,
        )

    def least_plans(self) -> FloatArray:
        """Least cost of the stirrups of each span with any bars, shape (spans,). [lb or kg]"""
        if self._plans_bound is not None:
            return self._plans_bound
        found = []
        for shear in self.shears:
            section = self.frame.sections[shear.span]
            d = section.outline.depth - section.bar_face
            plans = plans_of_span(shear, [depth_for_shear(self.problem, d)])
            found.append(min((plan.cost for plan in plans), default=math.inf))
        self._plans_bound = np.array(found)
        return self._plans_bound

    def _limits(self, best: float) -> tuple[NDArray[np.intp], FloatArray]:
        """Cases that may hold a beam as good, and what each place may cost in them.

        Returns
        -------
        tuple of ndarray
            Numbers of the cases, shape (g,), and limits, shape (places, g).
        """
        least = np.array([table.least() for table in self.tables()])
        cases = self.cases()
        costs = np.array([item.cost for item in self.modes])[cases.mode]
        total = self.constant + self.least_plans().sum() + costs + least.sum(axis=0)
        slack = best + _SLACK * abs(best) - total
        good = np.flatnonzero(np.isfinite(total) & (slack >= 0.0))
        return good, least[:, good] + slack[good]

    def extend_to(self, numbers: NDArray[np.intp], limits: FloatArray) -> bool:
        """List places a step further towards limits of their cost.

        Parameters
        ----------
        numbers : ndarray of int, shape (g,)
            Cases of the bound.
        limits : ndarray, shape (places, g)
            What each place may cost in them. [lb or kg]

        Returns
        -------
        bool
            False if nothing is left to list.
        """
        extended = False
        for number, listing in enumerate(self.listings):
            table = self.tables()[number]
            for family, item in enumerate(listing.families):
                fits = table.fits_family(item)[numbers]
                if not fits.any():
                    continue
                own = limits[number][fits]
                limit_of: dict[TopMode | None, float] = {}
                if self.places[number].face is Face.BOTTOM:
                    limit_of[None] = float(own.max())
                else:
                    modes = self.cases().mode[numbers][fits]
                    for mode in np.unique(modes):
                        limit_of[self.modes[mode].mode] = float(own[modes == mode].max())
                least = listing.least(family)
                bound = self.bounds[number]
                if not any(bound.least(item, least, m) <= top for m, top in limit_of.items()):
                    continue
                value = next_value(bound, item, limit_of, listing.values(family))
                # Step by step: what is listed lifts the bounds, and with them less matters.
                if least <= value:
                    extended |= listing.extend(family, min(value, least * _STEP))
        return extended

    def within(self, numbers: NDArray[np.intp], limits: FloatArray) -> list[list[int]]:
        """Variants of each place within limits of their cost, given as to `extend_to`."""
        return [
            table.within(numbers, own) for table, own in zip(self.tables(), limits, strict=True)
        ]
