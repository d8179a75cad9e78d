"""The exact trade-off: every layout that no other beats in all that counts.

What counts is mass, number of bars, of sizes and of layers, relative fixing labour, and what
prices add. In a family of layouts all of it follows from the totals of bars of each size, and
grows with them. So in each family the least totals that can be reached are looked for: of the
totals that nothing known beats, the ones with no lesser among them are put to the solver, which
lists all their layouts; the engine decides about each; what passes beats the totals above it,
what does not is crossed off; and so on until none is left. A layout left out is beaten by one in
the set, or passes no check.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from catalogs import Bar
from engine import Layout, Placement
from engine.detailing_checks import section_rows
from engine.outlines import FloatArray
from optimizer.conditions import envelope
from optimizer.families import Family, families
from optimizer.model import enumerate_family
from optimizer.problem import Problem
from optimizer.search import Judged, layout_of
from optimizer.totals import possible_totals

_EQUAL = 1e-7  # relative: values that differ by less are the same sum added in another order


@dataclass(frozen=True, slots=True, kw_only=True)
class Aims:
    """What layouts of one variant of a section are compared by; less is better in each.

    Attributes
    ----------
    per_bar : callable
        Values of one bar of a size: how much it adds to each aim.
    constant : tuple of float
        What the variant itself adds to each aim, for example its concrete.
    """

    per_bar: Callable[[Bar], tuple[float, ...]]
    constant: tuple[float, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Variant:
    """A section with one choice of grade, stirrup and envelope.

    Attributes
    ----------
    problem : Problem
        The section as changed, and the bars allowed.
    changes : tuple of (str, str, str)
        Key, value drawn, value here; empty for the section as drawn.
    aims : Aims
        What its layouts are compared by.
    """

    problem: Problem
    changes: tuple[tuple[str, str, str], ...]
    aims: Aims


@dataclass(frozen=True, slots=True, kw_only=True)
class Unbeaten:
    """A layout of the trade-off set.

    Attributes
    ----------
    variant : Variant
        Variant it belongs to.
    layout : Layout
        Bars.
    placement : Placement
        Where they lie.
    values : tuple of float
        Its value in each aim; the last two are numbers of sizes and layers.
    """

    variant: Variant
    layout: Layout
    placement: Placement
    values: tuple[float, ...]


class _Front:
    """Values reached so far, none of them beaten by another."""

    def __init__(self, aims: int) -> None:
        self.values: FloatArray = np.empty((0, aims))

    def beats(self, values: FloatArray) -> NDArray[np.bool_]:
        """For each row whether something reached is at least as good in all and better in one."""
        if not len(self.values):
            return np.zeros(len(values), dtype=np.bool_)
        slack = _EQUAL * np.abs(values)[:, None, :]
        reached = self.values[None, :, :]
        none_worse = np.all(reached <= values[:, None, :] + slack, axis=2)
        one_better = np.any(reached < values[:, None, :] - slack, axis=2)
        beaten: NDArray[np.bool_] = np.any(none_worse & one_better, axis=1)
        return beaten

    def add(self, values: FloatArray) -> None:
        """Take a row in and drop those it beats."""
        single = _Front(len(values))
        single.values = values[None]
        self.values = np.vstack((self.values[~single.beats(self.values)], values))


def trade_off(variants: Iterable[Variant]) -> tuple[tuple[Unbeaten, ...], bool]:
    """Find every layout, over all variants, that no other beats.

    Parameters
    ----------
    variants : iterable of Variant
        What may be chosen besides the bars, the section as drawn among them.

    Returns
    -------
    unbeaten : tuple of Unbeaten
        The complete set, sorted by its values.
    proved : bool
        False if a work limit stopped the solver.
    """
    front: _Front | None = None
    found: list[Unbeaten] = []
    proved = True
    work: float | None = None  # the limit is the section's, whatever its variants
    for variant in variants:
        section = variant.problem.section
        if any(not row.ok for row in section_rows(section)):
            continue
        members = families(envelope(section), variant.problem.rules)
        # Families of one size and few layers first: what they reach beats much of the others.
        members.sort(key=lambda family: (len(family.bars), family.layers))
        for family in members:
            front = front or _Front(len(variant.aims.constant) + 2)
            work = variant.problem.ranking.work_limit if work is None else work
            spent = _explore(variant, family, front, found, work)
            proved &= spent is not None
            work -= spent or 0.0
    if front is None or not found:
        return (), proved
    values = np.array([item.values for item in found])
    kept = [item for item, beaten in zip(found, front.beats(values), strict=True) if not beaten]
    kept.sort(key=lambda item: (tuple(round(value, 6) for value in item.values), _order(item)))
    return tuple(kept), proved


def _order(item: Unbeaten) -> tuple[object, ...]:
    sizes = tuple(
        tuple((-bar.position, -count) for bar, count in layer.groups)
        for layer in item.layout.layers
    )
    return (item.variant.changes, sizes)


def _explore(
    variant: Variant, family: Family, front: _Front, found: list[Unbeaten], work: float
) -> float | None:
    """Look for the least totals of a family that nothing known beats.

    Returns the work spent, or None if there was not enough of it.
    """
    spent = 0.0
    totals = possible_totals(family).counts
    per_bar = np.array([variant.aims.per_bar(bar) for bar in family.bars])
    rest = (float(len(family.bars)), float(family.layers))
    values = np.hstack(
        (
            totals @ per_bar + np.array(variant.aims.constant),
            np.broadcast_to(np.array(rest), (len(totals), 2)),
        )
    )
    while len(totals):
        open_rows = ~front.beats(values)
        totals, values = totals[open_rows], values[open_rows]
        if not len(totals):
            break
        least = _minimal(totals)
        listed = enumerate_family(family, None, work - spent, totals=totals[least])
        spent += listed.work
        if not listed.complete:
            return None
        judged = Judged(variant.problem.section, family, listed.counts)
        for row in range(len(judged.counts)):
            layout = layout_of(family, judged.counts[row])
            placement = judged.placement(row, layout)
            if placement is None:
                continue
            own = judged.counts[row].sum(axis=0)
            reached = values[(totals == own).all(axis=1)][0]
            front.add(reached)
            found.append(
                Unbeaten(
                    variant=variant,
                    layout=layout,
                    placement=placement,
                    values=tuple(reached.tolist()),
                )
            )
        keep = np.ones(len(totals), dtype=np.bool_)
        keep[least] = False
        totals, values = totals[keep], values[keep]
    return spent


def _minimal(totals: NDArray[np.int64]) -> NDArray[np.intp]:
    """Rows with no other row that is nowhere greater."""
    order = np.lexsort(totals.T[::-1])
    minimal = []
    least_second = np.inf
    for row in order:
        # Sorted by the first size, a row is minimal if its second is below all before it.
        second = totals[row, 1] if totals.shape[1] == 2 else 0
        if second < least_second:
            minimal.append(row)
            least_second = second
    return np.array(minimal, dtype=np.intp)
