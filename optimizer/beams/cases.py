"""The cases that the bound of a beam is taken for, and the least cost of a place in each.

In a case the arrangement of the top face, the sizes that may occur and the size of the lapped
bottom bars are fixed; what places still share then is little, so that the sum of their least
costs is a good bound. All cases are worked out at once with numpy.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, field
from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from engine.outlines import FloatArray
from optimizer.beams.modes import ModeBars
from optimizer.beams.problem import BeamProblem
from optimizer.beams.variants import Variant
from optimizer.families import Family

_SLACK = 1e-6


@dataclass(frozen=True, slots=True, kw_only=True)
class Groups:
    """All cases of a beam, each array of shape (g,).

    Attributes
    ----------
    mode : ndarray of int
        Arrangement of the top face.
    sizes : ndarray of int
        Sizes that may occur, as bits.
    lapped : ndarray of int
        Size of the lapped bottom bars, as a bit; all bits where they are not lapped.
    bits : dict of str to int
        Bit of each size.
    modes : dict
        Number of each arrangement.
    """

    mode: NDArray[np.int64]
    sizes: NDArray[np.int64]
    lapped: NDArray[np.int64]
    bits: dict[str, int]
    modes: dict[object, int]
    _fits: dict[tuple[int, int, int], NDArray[np.bool_]] = field(default_factory=dict)

    def fit(self, mode: int, sizes: int, corner: int) -> NDArray[np.bool_]:
        """Cases that allow bars of a kind.

        Parameters
        ----------
        mode : int
            Arrangement that they belong to; -1 for any.
        sizes : int
            Their sizes, as bits.
        corner : int
            Size that is lapped with others, as a bit; -1 for bars that are not.

        Returns
        -------
        ndarray of bool, shape (g,)
            Cases.
        """
        key = (mode, sizes, corner)
        if key not in self._fits:
            good: NDArray[np.bool_] = (sizes & ~self.sizes) == 0
            if mode >= 0:
                good = good & (self.mode == mode)
            self._fits[key] = good & ((self.lapped & corner) != 0)
        return self._fits[key]


def groups_of(problem: BeamProblem, modes: Sequence[ModeBars], *, lapped: bool) -> Groups:
    """Cases of a beam.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    modes : sequence of ModeBars
        Arrangements of the top face.
    lapped : bool
        Whether bottom bars of two or more spans are lapped with one another.

    Returns
    -------
    Groups
        Every arrangement with every set of as many sizes as are allowed that holds its own.
    """
    names = sorted(
        {bar.designation for bar in problem.rules.sizes}
        | {item.mode.bar.designation for item in modes}
    )
    bits = {name: 1 << number for number, name in enumerate(names)}
    most = len(names) if problem.most_sizes is None else min(problem.most_sizes, len(names))
    rows = []
    for number, item in enumerate(modes):
        for some in combinations(names, most):
            if item.mode.bar.designation not in some:
                continue
            mask = sum(bits[name] for name in some)
            corners = [bits[name] for name in some] if lapped else [-1]
            rows += [(number, mask, corner) for corner in corners]
    table = np.array(rows, dtype=np.int64).reshape(-1, 3)
    return Groups(
        mode=table[:, 0],
        sizes=table[:, 1],
        lapped=table[:, 2],
        bits=bits,
        modes={item.mode: number for number, item in enumerate(modes)},
    )


class PlaceTable:
    """Costs of one place, its unlisted layouts included.

    Parameters
    ----------
    cases : Groups
        Cases.
    variants : sequence of Variant
        Variants of the place.
    unlisted : sequence of (int or None, Family, float)
        Arrangement, family and least cost of layouts that have not been listed.
    lapped : bool
        Whether bars of the place are lapped with those of other spans.
    """

    def __init__(
        self,
        cases: Groups,
        variants: Sequence[Variant],
        unlisted: Sequence[tuple[int | None, Family, float]],
        *,
        lapped: bool,
    ) -> None:
        self.cases, self.lapped = cases, lapped
        self.costs = np.array([variant.cost for variant in variants], dtype=np.float64)
        rows = [
            (
                -1 if variant.mode is None else cases.modes[variant.mode],
                sum(cases.bits[name] for name in variant.sizes),
                cases.bits[variant.layout.layers[0].largest.designation],
            )
            for variant in variants
        ]
        self._kinds: dict[tuple[int, int, int], int] = {}
        self._kind = np.array(
            [self._kinds.setdefault(row, len(self._kinds)) for row in rows], dtype=np.int64
        )
        least = np.full(len(self._kinds), math.inf)
        np.minimum.at(least, self._kind, self.costs)
        kinds = list(self._kinds)
        values = [float(value) for value in least]
        for mode, family, value in unlisted:
            kinds.append((-1 if mode is None else mode, *self._of_family(family)))
            values.append(value)
        self._least = self._least_of(kinds, np.array(values, dtype=np.float64))

    def _of_family(self, family: Family) -> tuple[int, int]:
        mask = sum(self.cases.bits[bar.designation] for bar in family.bars)
        return mask, self.cases.bits[family.bars[0].designation]

    def _fit(self, kind: tuple[int, int, int]) -> NDArray[np.bool_]:
        """Cases that allow bars of a kind."""
        mode, sizes, corner = kind
        return self.cases.fit(mode, sizes, corner if self.lapped else -1)

    def _least_of(self, kinds: Sequence[tuple[int, int, int]], values: FloatArray) -> FloatArray:
        found = np.full(len(self.cases.mode), math.inf)
        for kind, value in zip(kinds, values, strict=True):
            good = self._fit(kind)
            found[good] = np.minimum(found[good], value)
        return found

    def least(self) -> FloatArray:
        """Least cost of the place in each case, shape (g,). [lb or kg]"""
        return self._least

    def fits_family(self, family: Family) -> NDArray[np.bool_]:
        """Cases that allow a family, whatever the arrangement of the top face.

        Parameters
        ----------
        family : Family
            Family.

        Returns
        -------
        ndarray of bool, shape (g,)
            Cases.
        """
        return self._fit((-1, *self._of_family(family)))

    def within(self, numbers: NDArray[np.intp], limits: FloatArray) -> list[int]:
        """Variants that cost no more than a limit in some case that allows them.

        Parameters
        ----------
        numbers : ndarray of int, shape (g,)
            Cases.
        limits : ndarray, shape (g,)
            Limit in each. [lb or kg]

        Returns
        -------
        list of int
            Numbers of the variants.
        """
        limit_of = np.full(max(1, len(self._kinds)), -math.inf)
        for kind, index in self._kinds.items():
            good = self._fit(kind)[numbers]
            if good.any():
                limit_of[index] = float(limits[good].max())
        if not len(self.costs):
            return []
        return [int(item) for item in np.flatnonzero(self.costs <= limit_of[self._kind] + _SLACK)]
