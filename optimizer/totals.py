"""What arithmetic alone says about a family, before the solver is asked.

Only the total number of bars of each size is looked at: for each pair of totals the
conditions are weakened to the best case over how the bars could be spread over the layers.
Totals that fail even so are impossible; the least cost of the others bounds the family.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from optimizer.conditions import SLACK
from optimizer.families import Family


@dataclass(frozen=True, slots=True)
class Totals:
    """Possible totals of bars of a family.

    Attributes
    ----------
    counts : ndarray of int, shape (n, sizes)
        Totals of each size.
    """

    counts: NDArray[np.int64]

    def least(self, cost: tuple[float, ...]) -> float:
        """Least cost of any member of the family.

        Parameters
        ----------
        cost : tuple of float, length sizes
            Cost of one bar of each size.

        Returns
        -------
        float
            Lower bound; infinite if the family has no member.
        """
        if not len(self.counts):
            return float("inf")
        return float((self.counts @ np.array(cost)).min())


def possible_totals(family: Family) -> Totals:
    """Totals that no condition rules out.

    Parameters
    ----------
    family : Family
        Family with its conditions.

    Returns
    -------
    Totals
        The totals left.
    """
    most = np.array(family.most)
    ranges = [np.arange(2, most[:, 0].sum() + 1)]
    if len(family.bars) == 2:
        ranges.append(np.arange(1, most[:, 1].sum() + 1))
    counts = np.stack(np.meshgrid(*ranges, indexing="ij"), axis=-1).reshape(-1, len(ranges))
    upper_layers = family.layers - 1
    counts = counts[counts.sum(axis=1) >= family.least_first + 2 * upper_layers]
    for rule, conditions in family.conditions.items():
        coefficients, bounds = conditions.coefficients, conditions.bounds
        if rule == "clear_gap":
            # All layers together offer the sum of their widths, at the least weight anywhere.
            weights = coefficients.sum(axis=1).max(axis=0)
            counts = counts[counts @ weights >= bounds.sum() * (1 + SLACK)]
            continue
        best = coefficients.max(axis=1)
        # Each layer above the first holds two bars at least, which count for less there.
        lost = 2 * (best[:, None] - coefficients[:, 1:]).min(axis=2).sum(axis=1)
        reached = counts @ best.T - lost
        counts = counts[(reached >= bounds - SLACK * np.abs(bounds)).all(axis=1)]
    return Totals(counts)
