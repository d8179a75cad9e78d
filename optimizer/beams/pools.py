"""Stirrup plans of a span as one table, and which of them serve what bars ask."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence

import numpy as np

from optimizer.beams.variants import Need, StirrupPlan, Variant

_SLACK = 1e-9


class PlanPool:
    """Plans of one span.

    Parameters
    ----------
    plans : sequence of StirrupPlan
        Plans, by cost.
    """

    def __init__(self, plans: Sequence[StirrupPlan]) -> None:
        self.plans = tuple(plans)
        self.everything = (1 << len(self.plans)) - 1
        self._known: dict[Need, int] = {}
        self._depth = np.array([plan.depth for plan in self.plans])
        self._widest = np.array([max(plan.spacings) for plan in self.plans])
        spacings = np.array([plan.spacings for plan in self.plans]).reshape(-1, 3)
        zones = [plan.zones for plan in self.plans]
        self._left = np.array([zone[0][1] for zone in zones])
        self._right = np.array([zone[2][0] for zone in zones])
        spaces = np.array([plan.spaces for plan in self.plans]).reshape(-1, 3)
        # An end zone without spaces is part of the middle.
        self._s_middle = spacings[:, 1] if len(self.plans) else np.empty(0)
        self._s_left = np.where(spaces[:, 0] > 0, spacings[:, 0], self._s_middle)
        self._s_right = np.where(spaces[:, 2] > 0, spacings[:, 2], self._s_middle)

    def mask(self, need: Need) -> int:
        """Plans that serve a need.

        Parameters
        ----------
        need : Need
            What bars ask of the stirrups.

        Returns
        -------
        int
            Bit k is set where plan k has the depth, the largest spacing, and the spacing at
            every end in a tension zone that the bars ask for.
        """
        if need not in self._known:
            good = self._depth <= need.depth + _SLACK
            good &= self._widest <= need.most_spacing + _SLACK
            for cut in need.cuts:
                at = np.where(cut.at >= self._right, self._s_right, self._s_middle)
                at = np.where(cut.at <= self._left, self._s_left, at)
                good &= at <= cut.spacing + _SLACK
            packed = np.packbits(good, bitorder="little").tobytes()
            self._known[need] = int.from_bytes(packed, "little")
        return self._known[need]


def undominated(
    variants: Sequence[Variant],
    pools: Sequence[PlanPool],
    stay: frozenset[int] = frozenset(),
    clashes: Sequence[int] | None = None,
) -> list[int]:
    """Variants of a place that no other one beats in everything another choice depends on.

    Parameters
    ----------
    variants : sequence of Variant
        Variants of one place.
    pools : sequence of PlanPool
        Plans of each span.
    stay : frozenset of int
        Variants that stay in any case.
    clashes : sequence of int, optional
        For each variant, as bits, what it does not go with at other places; nothing without it.

    Returns
    -------
    list of int
        Their numbers. One beats another if it costs no more, uses no other size, has the same
        size in its corners and the same arrangement of the top face, is served by every plan
        that serves the other, and clashes with nothing that the other goes with.
    """
    order = sorted(range(len(variants)), key=lambda number: variants[number].key)
    kept: list[int] = []
    by_kind: defaultdict[tuple[object, ...], list[tuple[Variant, list[int]]]] = defaultdict(list)
    for number in order:
        item = variants[number]
        masks = [pools[need.span].mask(need) for need in item.needs]
        # What it goes with counts like the plans that serve it: the more, the better.
        goes_with = [] if clashes is None else [~clashes[number]]
        if number in stay:
            kept.append(number)
        if not all(masks):
            continue
        same = by_kind[item.mode, item.layout.layers[0].largest.designation]
        asked = [*masks, *goes_with]
        if any(_beats(other, have, item, asked) for other, have in same):
            continue
        same.append((item, asked))
        if number not in stay:
            kept.append(number)
    return sorted(kept)


def _beats(one: Variant, have: list[int], other: Variant, masks: list[int]) -> bool:
    """Whether a variant that costs no more asks no more than another."""
    if not one.sizes <= other.sizes:
        return False
    if other.continuous and (one.run < other.run or one.continuous > other.continuous):
        return False
    return all(mine & theirs == theirs for mine, theirs in zip(have, masks, strict=True))
