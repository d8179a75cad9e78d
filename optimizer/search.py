"""The search of one section, and its proof.

Families of layouts are taken one after another, most promising first. For each the solver
lists every layout that meets the necessary conditions and could still enter the short list,
be the lightest or have the fewest bars; the engine decides exactly about each. What could
still enter is known from what has been found: a layout worse than the last line of a full
list, or than the last permitted one of its own pattern, never does. So when all families
are done, nothing left out is better than the last line shown.
"""

from __future__ import annotations

import math
from bisect import insort
from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from engine import Batch, Layout, Placement, Section, assess, place
from engine.assessment import ROUNDING
from engine.crack_control import largest_spacing
from engine.detailing_checks import section_rows
from engine.layouts import Layer
from engine.outlines import FloatArray
from engine.service import service_stress
from optimizer.candidates import Candidate, short_list
from optimizer.conditions import SLACK, envelope
from optimizer.families import Family, families
from optimizer.model import Wanted, enumerate_family
from optimizer.problem import Problem, Ranking
from optimizer.scoring import score, steel_per_bar
from optimizer.totals import Totals, possible_totals

_VALUE_SLACK = 2e-6  # values equal to six decimals are ties and have to be compared in full
_FEW = 20  # totals of bars in the first band of a family, and in each further one
_FIRST_LIST = 30  # layouts listed at first in a family
_QUICK_LAYERS = 2
_SEED_TRIES = 8


@dataclass(frozen=True, slots=True, kw_only=True)
class Found:
    """Outcome of a search.

    Attributes
    ----------
    chosen : tuple of Candidate
        The short list, best first; empty if no layout passes.
    lightest, fewest : Candidate or None
        Best of all by mass and by number of bars.
    proved : bool
        Whether nothing left out is better; False if the work limit stopped the search.
    """

    chosen: tuple[Candidate, ...]
    lightest: Candidate | None
    fewest: Candidate | None
    proved: bool


class _Pool:
    """Candidates found so far in their order, and what a further one has to beat."""

    def __init__(self, ranking: Ranking) -> None:
        self.ranking = ranking
        self.candidates: dict[Layout, Candidate] = {}
        self.least_mass = math.inf
        self.fewest_bars = math.inf
        self._ordered: list[Candidate] = []
        self._chosen: list[Candidate] | None = []

    def add(self, candidate: Candidate) -> None:
        """Take a layout in."""
        by = self.ranking.by
        self.candidates[candidate.layout] = candidate
        self.least_mass = min(self.least_mass, candidate.mass + _VALUE_SLACK)
        self.fewest_bars = min(self.fewest_bars, candidate.bars)
        insort(self._ordered, candidate, key=lambda item: item.key(by))
        self._chosen = None

    @property
    def chosen(self) -> list[Candidate]:
        """The short list of what has been found."""
        if self._chosen is None:
            self._chosen = short_list(self._ordered, self.ranking)
        return self._chosen

    def limit(self, pattern: tuple[int, int]) -> float:
        """Greatest value with which a layout of a pattern could still enter the list."""
        limit = math.inf
        chosen, by = self.chosen, self.ranking.by
        if len(chosen) == self.ranking.keep:
            limit = chosen[-1].value(by)
        if self.ranking.per_pattern is not None:
            same = [item for item in chosen if item.pattern == pattern]
            if len(same) >= self.ranking.per_pattern:
                limit = min(limit, same[-1].value(by))
        return limit + _VALUE_SLACK


@dataclass(frozen=True, slots=True, kw_only=True)
class _Prospect:
    """A family with what arithmetic says about it, and linear lower bounds of its values."""

    family: Family
    totals: Totals
    main: Wanted
    mass: Wanted
    bars: Wanted

    @property
    def least(self) -> float:
        """Lower bound of the value the ranking orders by."""
        return self.least_of(self.main)

    def least_of(self, want: Wanted) -> float:
        """Lower bound of a value over the family."""
        return self.totals.least(want.cost) + want.constant

    def bands(self) -> FloatArray:
        """Limits of growing value that part a large family; none for a small one."""
        values = np.sort(self._values(self.main))
        return values[_FEW::_FEW]

    def _values(self, want: Wanted) -> FloatArray:
        values: FloatArray = self.totals.counts @ np.array(want.cost) + want.constant
        return values

    def beyond(self, known: float, want: Wanted, limit: float) -> bool:
        """Whether totals within a limit lie beyond what the main list has covered."""
        return bool(((self._values(want) <= limit) & (self._values(self.main) > known)).any())


def _prospect(family: Family, ranking: Ranking) -> _Prospect:
    mass = Wanted(tuple(bar.mass for bar in family.bars), 0.0, math.inf)
    if ranking.by == "lightest":
        main = mass
    else:
        # The term `tight` is never negative: leaving it out bounds the score from below.
        cost = tuple(steel_per_bar(bar, ranking) + ranking.per_bar for bar in family.bars)
        constant = ranking.per_extra_layer * (family.layers - 1)
        constant += ranking.per_extra_size * (len(family.bars) - 1)
        main = Wanted(cost, constant, math.inf)
    return _Prospect(
        family=family,
        totals=possible_totals(family),
        main=main,
        mass=mass,
        bars=Wanted(tuple(1.0 for _ in family.bars), 0.0, math.inf),
    )


def layout_of(family: Family, counts: NDArray[np.int64]) -> Layout:
    """Turn counts into a layout.

    Parameters
    ----------
    family : Family
        Family of the layout.
    counts : ndarray of int, shape (layers, sizes)
        Bars of each size in each layer.

    Returns
    -------
    Layout
        The layout.
    """
    return Layout(
        tuple(
            Layer(
                tuple(
                    (bar, int(count)) for bar, count in zip(family.bars, row, strict=True) if count
                )
            )
            for row in counts
        )
    )


class Judged:
    """Layouts of a family as the engine judges them, in two steps.

    Strength, ductility, minimum steel and height are decided for all at once; positions of bars
    are worked out one by one, for those that matter.

    Parameters
    ----------
    section : Section
        Section with its demand.
    family : Family
        Family of the layouts.
    counts : ndarray of int, shape (n, layers, sizes)
        Bars of each size in each layer.
    """

    def __init__(self, section: Section, family: Family, counts: NDArray[np.int64]) -> None:
        self.section = section
        if len(counts):
            counts = counts[assess(section, Batch(bars=family.bars, counts=counts)).passes]
        self.counts = counts
        self.batch = Batch(bars=family.bars, counts=counts)
        self._s = np.empty(0)
        if len(counts):
            stress = service_stress(section, self.batch)
            self._s = largest_spacing(section.edition, stress, section.bar_face)

    def placement(self, row: int, layout: Layout) -> Placement | None:
        """Place one of the layouts left.

        Parameters
        ----------
        row : int
            Row of `counts`.
        layout : Layout
            The same layout.

        Returns
        -------
        Placement or None
            Positions, or None if a gap or the spacing for crack control fails.
        """
        placed = place(self.section, layout)
        good = placed.layers[0].spacing <= self._s[row] * (1 + ROUNDING)
        return placed if placed.gaps_fit and good else None


class Search:
    """Search of one section; see the module's text for its logic.

    Parameters
    ----------
    problem : Problem
        Section, bars allowed and ranking.
    confirm : bool
        Whether the answer that nothing passes is confirmed by a second solve.
    """

    def __init__(self, problem: Problem, *, confirm: bool = True) -> None:
        self.problem = problem
        self.confirm = confirm
        self.pool = _Pool(problem.ranking)
        self.work_left = problem.ranking.work_limit
        self.complete = True

    def run(self) -> Found:
        """Search all families.

        Returns
        -------
        Found
            The short list and whether it is proved.
        """
        section, ranking = self.problem.section, self.problem.ranking
        if any(not row.ok for row in section_rows(section)):
            return Found(chosen=(), lightest=None, fewest=None, proved=True)
        members = families(envelope(section), self.problem.rules)
        prospects = [_prospect(family, ranking) for family in members]
        prospects = [item for item in prospects if math.isfinite(item.least)]
        # Families of few layers are quick to list and lower the limits for those of many. The
        # sort is stable: ties keep the families' order.
        prospects.sort(key=lambda item: (item.family.layers > _QUICK_LAYERS, item.least))
        for prospect in prospects:
            if len(prospect.family.bars) == 1:
                self._seed(prospect)
        for prospect in prospects:
            self._explore(prospect)
        if not self.pool.candidates and self.confirm:
            # Nobody is told "none" on one answer of the solver: it is asked again with
            # presolve, another way to the same answer.
            for prospect in prospects:
                listed = enumerate_family(prospect.family, None, self.work_left, presolve=True)
                self.complete &= listed.complete
                self._judge(prospect, listed.counts)
        candidates = self.pool.candidates.values()
        return Found(
            chosen=tuple(self.pool.chosen),
            lightest=min(candidates, key=lambda item: item.lightest_key, default=None),
            fewest=min(candidates, key=lambda item: item.fewest_key, default=None),
            proved=self.complete,
        )

    def _seed(self, prospect: _Prospect) -> None:
        """Find good layouts of one size without the solver, so that limits are low early."""
        counts = one_size_counts(prospect.family)[:, :, None]
        for conditions in prospect.family.conditions.values():
            left = np.tensordot(counts, conditions.coefficients, axes=([1, 2], [1, 2]))
            bounds = conditions.bounds - np.abs(conditions.bounds) * SLACK
            counts = counts[(left >= bounds).all(axis=1)]
        order = np.argsort(counts.sum(axis=(1, 2)), kind="stable")[:_SEED_TRIES]
        self._judge(prospect, counts[order])

    def _explore(self, prospect: _Prospect) -> None:
        """List what may still be of interest in a family, for each reason of interest."""
        pool, pattern = self.pool, prospect.family.pattern
        main = prospect.main
        # In large families bands of growing value come first: what the cheapest members teach
        # keeps the list of the others short.
        for upto in prospect.bands():
            if upto >= pool.limit(pattern):
                break
            self._list(prospect, main, lambda: pool.limit(pattern), upto)
        known = self._list(prospect, main, lambda: pool.limit(pattern))
        if self.problem.ranking.by != "lightest" and prospect.beyond(
            known, prospect.mass, pool.least_mass
        ):
            self._list(prospect, prospect.mass, lambda: pool.least_mass)
        if prospect.beyond(known, prospect.bars, pool.fewest_bars):
            self._list(prospect, prospect.bars, lambda: pool.fewest_bars)

    def _list(
        self,
        prospect: _Prospect,
        want: Wanted,
        limit: Callable[[], float],
        band: float = math.inf,
    ) -> float:
        """List all members up to a limit that what is found may lower, or to the end of a band
        if that is less; return where it ended.

        The solver stops after a few, the engine decides about them, and with the limit that
        follows it starts again, until it says that it has listed all.
        """
        stop_after = _FIRST_LIST
        while True:
            bounded = replace(want, limit=min(limit(), band))
            if prospect.least_of(want) > bounded.limit:
                return bounded.limit
            listed = enumerate_family(
                prospect.family, bounded, self.work_left, stop_after=stop_after
            )
            self.work_left -= listed.work
            self._judge(prospect, listed.counts)
            if listed.complete:
                return bounded.limit
            if len(listed.counts) < stop_after:
                self.complete = False  # the work limit, not the length of the list, ended it
                return bounded.limit
            stop_after *= 4

    def _judge(self, prospect: _Prospect, counts: NDArray[np.int64]) -> None:
        """Let the engine decide about layouts, the cheapest first, as far as they matter."""
        family, pool, ranking = prospect.family, self.pool, self.problem.ranking
        judged = Judged(self.problem.section, family, counts)
        if not len(judged.counts):
            return
        main = judged.batch.quantity(prospect.main.cost) + prospect.main.constant
        mass = judged.batch.quantity(prospect.mass.cost)
        bars = judged.batch.quantity(prospect.bars.cost)
        for row in np.argsort(main, kind="stable"):
            if (
                main[row] > pool.limit(family.pattern)
                and mass[row] > pool.least_mass
                and bars[row] > pool.fewest_bars
            ):
                continue
            layout = layout_of(family, judged.counts[row])
            if layout in pool.candidates:
                continue
            placement = judged.placement(row, layout)
            if placement is not None:
                pool.add(Candidate.of(layout, placement, score(layout, placement, ranking)))


def one_size_counts(family: Family) -> NDArray[np.int64]:
    """Counts of layouts of one size that fill the lower layers well; a start for the search.

    Parameters
    ----------
    family : Family
        Family of one size.

    Returns
    -------
    ndarray of int, shape (n, layers)
        Bars in each layer.
    """
    rows: list[tuple[int, ...]] = [
        (first,) for first in range(family.least_first, family.most[0][0] + 1)
    ]
    for _ in range(1, family.layers):
        rows = [
            (*row, count)
            for row in rows
            for count in range(2, row[-1] + 1)
            if count % 2 == 0 or row[-1] % 2 == 1
        ]
    return np.array(rows, dtype=np.int64).reshape(len(rows), family.layers)
