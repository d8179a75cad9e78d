"""Layouts of one place, family by family, each as far as it has been asked for."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from catalogs import Bar
from engine import Batch, Layout, Placement, assess
from optimizer.beams.frames import per_length
from optimizer.beams.places import Place
from optimizer.conditions import envelope
from optimizer.families import Family, families
from optimizer.model import Wanted, enumerate_family
from optimizer.problem import BarRules, Ranking
from optimizer.scoring import score
from optimizer.search import Judged, layout_of
from optimizer.totals import Totals, possible_totals

_SLACK = 1e-6
_ROUNDING = 1e-8


@dataclass(frozen=True, slots=True, kw_only=True)
class Fitted:
    """A layout that passes every check of its place, with its figures on each side.

    Attributes
    ----------
    layout : Layout
        Bars.
    placements : tuple of Placement
        Where they lie, one for each side.
    phi_Mn, d : tuple of float
        Design strength and effective depth, one for each side.
    eps_t : float
        Least net tensile strain of the sides. [-]
    extra : float
        Terms of the index that count by length of layout, not by bar. [lb/ft or kg/m]
    """

    layout: Layout
    placements: tuple[Placement, ...]
    phi_Mn: tuple[float, ...]
    d: tuple[float, ...]
    eps_t: float
    extra: float


@dataclass(slots=True)
class _Listed:
    """A family with what has been listed of it."""

    family: Family
    totals: Totals
    cost: tuple[float, ...]
    values: list[float]
    upto: float = -math.inf

    @property
    def end(self) -> float:
        """Largest cost per length of a layout."""
        return self.values[-1]

    @property
    def least(self) -> float:
        """Lower bound of what the bars of an unlisted layout cost per length."""
        return self.upto if math.isfinite(self.upto) else self.totals.least(self.cost)


class Listing:
    """Layouts of one place.

    Parameters
    ----------
    place : Place
        Place.
    rules : BarRules
        Bars allowed.
    ranking : Ranking
        Order.
    work : float
        Work the solver may spend on each family.
    corner : callable
        Whether bars of a size may stand in the corners of the place.
    """

    def __init__(
        self,
        place: Place,
        rules: BarRules,
        ranking: Ranking,
        work: float,
        corner: Callable[[Bar], bool] = lambda _: True,
    ) -> None:
        self.place, self.ranking, self.work = place, ranking, work
        self.complete = True
        self._listed: list[_Listed] = []
        # A layout passes all sections of a place: the families of one hold it.
        for family in families(envelope(place.sections[0]), rules):
            if not corner(family.bars[0]):
                continue
            totals = possible_totals(family)
            cost = tuple(per_length(bar, ranking) for bar in family.bars)
            values = totals.counts @ np.array(cost)
            if len(values):
                distinct = [float(value) for value in np.unique(np.round(values, 9))]
                self._listed.append(_Listed(family, totals, cost, distinct))
        self.found: list[list[Fitted]] = [[] for _ in self._listed]
        self._seen: list[set[Layout]] = [set() for _ in self._listed]

    @property
    def families(self) -> Sequence[Family]:
        """Families of the place, in a fixed order."""
        return [item.family for item in self._listed]

    def values(self, index: int) -> list[float]:
        """Costs per length that layouts of a family may have, ascending. [lb/ft or kg/m]"""
        return self._listed[index].values

    def least(self, index: int) -> float:
        """Least cost per length of the bars of a layout not listed yet; infinite if none is left.

        Parameters
        ----------
        index : int
            Family.

        Returns
        -------
        float
            Lower bound. [lb/ft or kg/m]
        """
        item = self._listed[index]
        return math.inf if item.upto >= item.end else item.least

    def extend(self, index: int, limit: float) -> bool:
        """List a family up to a limit of what its bars cost per length.

        Parameters
        ----------
        index : int
            Family.
        limit : float
            Limit. [lb/ft or kg/m]

        Returns
        -------
        bool
            Whether the family had not been listed as far before.
        """
        item = self._listed[index]
        limit = min(limit, item.end)
        # The values are rounded, the least of them is not.
        if limit <= item.upto or limit < item.least - _ROUNDING:
            return False
        listed = enumerate_family(item.family, Wanted(item.cost, 0.0, limit + 1e-6), self.work)
        self.complete &= listed.complete
        self._judge(index, listed.counts)
        item.upto = limit
        return True

    def include(self, layout: Layout) -> bool:
        """List far enough to hold a layout.

        Parameters
        ----------
        layout : Layout
            Layout.

        Returns
        -------
        bool
            Whether the place has it, that is, whether it passes every check.
        """
        value = sum(
            count * per_length(bar, self.ranking)
            for layer in layout.layers
            for bar, count in layer.groups
        )
        sizes = {bar.designation for bar in layout.sizes}
        for index, item in enumerate(self._listed):
            own = {bar.designation for bar in item.family.bars}
            if own == sizes and item.family.layers == len(layout.layers):
                self.extend(index, value + _SLACK)
                return any(fitted.layout == layout for fitted in self.found[index])
        return False

    def _judge(self, index: int, counts: np.ndarray) -> None:
        family = self._listed[index].family
        judged = [Judged(section, family, counts) for section in self.place.sections]
        if any(not len(item.counts) for item in judged):
            return
        first = judged[0]
        rows = [_rows_of(first.counts, item.counts) for item in judged[1:]]
        batch = Batch(bars=family.bars, counts=first.counts)
        figures = [assess(side.section, batch) for side in self.place.sides]
        for row in range(len(first.counts)):
            layout = layout_of(family, first.counts[row])
            if layout in self._seen[index]:
                continue
            self._seen[index].add(layout)
            others = [found.get(row) for found in rows]
            if any(other is None for other in others):
                continue
            placed = [first.placement(row, layout)]
            placed += [
                item.placement(other, layout)
                for item, other in zip(judged[1:], others, strict=True)
                if other is not None
            ]
            if any(placement is None for placement in placed):
                continue
            own = [placement for placement in placed if placement is not None]
            own = own * len(figures) if len(own) < len(figures) else own
            terms = score(layout, own[0], self.ranking)
            extra = terms.layers + terms.sizes + terms.tight
            self.found[index].append(
                Fitted(
                    layout=layout,
                    placements=tuple(own),
                    phi_Mn=tuple(float(item.phi_Mn[row]) for item in figures),
                    d=tuple(float(item.d[row]) for item in figures),
                    eps_t=min(float(item.eps_t[row]) for item in figures),
                    extra=extra if self.ranking.by == "practical" else 0.0,
                )
            )


def _rows_of(counts: np.ndarray, others: np.ndarray) -> dict[int, int]:
    """Rows of one list found in another."""
    where = {row.tobytes(): number for number, row in enumerate(np.ascontiguousarray(others))}
    found = {}
    for number, row in enumerate(np.ascontiguousarray(counts)):
        other = where.get(row.tobytes())
        if other is not None:
            found[number] = other
    return found
