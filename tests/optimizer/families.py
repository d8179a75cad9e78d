"""Counts of layouts by family, and an enumeration of a family's linear rules of its own."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterator, Mapping, Sequence
from itertools import pairwise, product

import numpy as np
from numpy.typing import NDArray

from catalogs import Bar
from optimizer.conditions import Conditions
from optimizer.families import Family
from tests.engine.builders import INCH

Counts = NDArray[np.int64]
Named = tuple[tuple[tuple[str, int], ...], ...]


def by_family(
    layouts: Sequence[Named], sizes: Sequence[Bar]
) -> Iterator[tuple[tuple[Bar, ...], int, list[int], Counts]]:
    """Group layouts by sizes and layers.

    Yields the sizes, larger first, the number of layers, the places in `layouts` and the counts
    as an array of (layouts, layers, sizes).
    """
    bar_of = {bar.designation: bar for bar in sizes}
    groups: dict[tuple[tuple[str, ...], int], list[int]] = defaultdict(list)
    for place, layout in enumerate(layouts):
        used = {name for layer in layout for name, _ in layer}
        names = tuple(sorted(used, key=lambda name: -bar_of[name].position))
        groups[names, len(layout)].append(place)
    for (names, layers), places in groups.items():
        counts = np.array(
            [
                [[dict(layer).get(name, 0) for name in names] for layer in layouts[place]]
                for place in places
            ],
            dtype=np.int64,
        )
        yield tuple(bar_of[name] for name in names), layers, places, counts


def _layers(most: Sequence[int]) -> list[tuple[int, ...]]:
    """All contents of one layer that keep the rules of symmetry."""
    found = []
    for counts in product(*(range(limit + 1) for limit in most)):
        odd = sum(count % 2 for count in counts)
        mixed = len(counts) == 2 and min(counts) > 0
        if sum(counts) >= 2 and odd <= 1 and not (mixed and counts[0] < 2):
            if len(counts) == 2 and counts[0] == 1:
                continue
            found.append(counts)
    return found


def members(family: Family) -> set[tuple[tuple[int, ...], ...]]:
    """Every member of a family by brute force: rules of layers and its linear conditions."""
    found = set()
    for rows in product(*(_layers(most) for most in family.most)):
        totals = [sum(row) for row in rows]
        stands = all(
            above <= below and not (above % 2 and below % 2 == 0)
            for below, above in pairwise(totals)
        )
        smaller = all(not above[0] or below[0] for below, above in pairwise(rows))
        if not (stands and smaller and rows[0][0] >= 2 and totals[0] >= family.least_first):
            continue
        if len(family.bars) == 2 and not any(row[1] for row in rows):
            continue
        counts = np.array(rows)
        if all(
            (
                np.tensordot(item.coefficients, counts, axes=2)
                >= item.bounds - 1e-9 * np.abs(item.bounds)
            ).all()
            for item in family.conditions.values()
        ):
            found.add(rows)
    return found


def hand_made(
    names: tuple[str, ...] = ("#8",),
    most: tuple[tuple[int, ...], ...] = ((6,),),
    least_first: int = 2,
    given: Mapping[str, Conditions] | None = None,
) -> Family:
    """Return a family with the given conditions, and room for `most` bars of each size."""
    bars = tuple(INCH.bar(name) for name in names)
    places = len(most) * len(bars)
    none = Conditions(np.zeros((0, len(most), len(bars))), np.zeros(0))
    room = Conditions(
        -np.eye(places).reshape(places, len(most), len(bars)), -np.array(most, dtype=float).ravel()
    )
    conditions = {"clear_gap": room, **(given or {})}
    rules = ("flexural_strength", "net_tensile_strain", "minimum_steel", "clear_gap")
    return Family(
        bars=bars,
        layers=len(most),
        most=most,
        least_first=least_first,
        conditions={rule: conditions.get(rule, none) for rule in rules},
    )
