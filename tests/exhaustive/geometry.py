"""Which layouts exist: bars on lines, layers on layers, gaps and heights."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import combinations, pairwise

from tests.exhaustive.cases import TOLERANCE, Case, Layer, Size


@dataclass(frozen=True, slots=True, kw_only=True)
class Stack:
    """Layers of bars that keep every rule of geometry.

    Parameters
    ----------
    layers : tuple of Layer
        Sizes and counts, layer 1 first.
    lines : tuple of tuple of float
        Bar centres of each layer, measured from the side of the web, [in or mm].
    gaps : tuple of float
        Smallest clear gap of each layer, [in or mm].
    bottoms : tuple of float
        Height of the underside of each layer above the tension face, [in or mm].
    """

    layers: tuple[Layer, ...]
    lines: tuple[tuple[float, ...], ...]
    gaps: tuple[float, ...]
    bottoms: tuple[float, ...]


def left_to_right(layer: Layer) -> tuple[Size, ...]:
    """Return the bars of a layer in order: larger first from each corner, odd bar at the centre."""
    half = [size for size, count in layer for _ in range(count // 2)]
    centre = [size for size, count in layer if count % 2]
    return (*half, *centre, *reversed(half))


def contents(sizes: tuple[Size, ...], most: int, *, mixed: bool) -> Iterator[Layer]:
    """Yield every content a layer of 2 to `most` bars can have, of one size or (`mixed`) two."""
    for size in sizes:
        for count in range(2, most + 1):
            yield ((size, count),)
    if not mixed:
        return
    descending = sorted(sizes, key=lambda size: -size.db)
    for larger, smaller in combinations(descending, 2):
        for large in range(2, most):
            for small in range(1, most - large + 1):
                if large % 2 == 0 or small % 2 == 0:  # only one bar can be at the centre
                    yield ((larger, large), (smaller, small))


def clear_gaps(bars: tuple[Size, ...], lines: tuple[float, ...]) -> list[float]:
    """Return the clear gaps of neighbouring bars, left to right, [in or mm]."""
    placed = zip(lines, bars, strict=True)
    return [x2 - x1 - (b1.db + b2.db) / 2 for (x1, b1), (x2, b2) in pairwise(placed)]


def least_gap(case: Case) -> float:
    """Return the least clear gap of bars of any size (ACI 318, 25.2.1), [in or mm]."""
    return max(case.pick(1.0, 25.0), 4 / 3 * case.aggregate, case.min_gap)


def wide_enough(case: Case, bars: tuple[Size, ...], gaps: list[float]) -> bool:
    """Return whether every clear gap is what its two bars require (ACI 318, 25.2.1)."""
    least = least_gap(case)
    return all(
        gap >= max(least, b1.db, b2.db) - TOLERANCE
        for gap, (b1, b2) in zip(gaps, pairwise(bars), strict=True)
    )


def bend_radius(case: Case) -> float:
    """Return the inside radius of the stirrup's bend (ACI 318, Table 25.3.2), [in or mm]."""
    return (2 if case.ds <= case.pick(0.625, 16.0) else 3) * case.ds


def spread(case: Case, bars: tuple[Size, ...]) -> tuple[float, ...]:
    """Return the centres of the bars of layer 1, at equal clear gaps between the corners."""
    corner = bars[0].db
    first = case.cover + case.ds + max(bend_radius(case), corner / 2)
    span = case.web - 2 * first
    # Between the two corner centres lie all bars but half of each corner bar.
    gap = (span - (sum(bar.db for bar in bars) - corner)) / (len(bars) - 1)
    lines = [first]
    for b1, b2 in pairwise(bars):
        lines.append(lines[-1] + b1.db / 2 + gap + b2.db / 2)
    return tuple(lines)


def stand(lines: tuple[float, ...], bars: tuple[Size, ...]) -> tuple[float, ...]:
    """Return the lines of the layer below on which the bars of the next layer stand.

    Of the symmetric choices with the outermost lines, the one whose smallest clear gap is largest;
    of equal ones the one that stays nearest to the corners.
    """
    below, half = len(lines), len(bars) // 2
    centre = (below // 2,) if len(bars) % 2 else ()
    choices = []
    for inner in combinations(range(1, below // 2), half - 1):
        left = (0, *inner)
        right = tuple(below - 1 - index for index in reversed(left))
        choices.append(tuple(lines[index] for index in (*left, *centre, *right)))
    smallest = [min(clear_gaps(bars, choice)) for choice in choices]
    largest = max(smallest)
    # `combinations` counts up from the corner, so the first of equals is the one wanted.
    return next(
        choice for choice, gap in zip(choices, smallest, strict=True) if gap >= largest - TOLERANCE
    )


def sizes_agree(case: Case, layers: tuple[Layer, ...]) -> bool:
    """Return whether the sizes of all layers together are few and near enough."""
    positions = {size.position for layer in layers for size, _ in layer}
    return len(positions) <= case.max_sizes and max(positions) - min(positions) <= case.size_steps


def may_follow(below: Layer, above: Layer) -> bool:
    """Return whether a layer may stand on another by counts and by largest size."""
    n_below = sum(count for _, count in below)
    n_above = sum(count for _, count in above)
    return (
        n_above <= n_below
        and (n_above % 2 == 0 or n_below % 2 == 1)
        and above[0][0].db <= below[0][0].db
    )


def stacks(case: Case, sizes: tuple[Size, ...]) -> Iterator[Stack]:
    """Yield every stack of the given sizes that keeps all rules of geometry."""
    if not sizes:
        return
    inside, least = case.web - 2 * (case.cover + case.ds), least_gap(case)
    # Bars and least gaps side by side from leg to leg: nothing wider can fit in any layer.
    most = int((inside + least) / (min(size.db for size in sizes) + least)) + 1
    every = [
        layer
        for layer in contents(sizes, most, mixed=case.max_sizes > 1)
        if sum(count * (size.db + least) for size, count in layer)
        <= inside + least + TOLERANCE * most
    ]
    ceiling = case.depth - case.cover - case.ds
    if case.opposite_height > 0:
        ceiling -= case.opposite_height + case.layer_gap

    def grow(stack: Stack) -> Iterator[Stack]:
        if len(stack.layers) == case.max_layers:
            return
        for layer in every:
            layers = (*stack.layers, layer)
            if not sizes_agree(case, layers):
                continue
            if stack.layers:
                below = stack.layers[-1]
                if not may_follow(below, layer):
                    continue
                bottom = stack.bottoms[-1] + below[0][0].db + case.layer_gap
            else:
                bottom = case.cover + case.ds
            if bottom + layer[0][0].db > ceiling + TOLERANCE:
                continue
            bars = left_to_right(layer)
            lines = stand(stack.lines[-1], bars) if stack.layers else spread(case, bars)
            gaps = clear_gaps(bars, lines)
            if not wide_enough(case, bars, gaps):
                continue
            grown = Stack(
                layers=layers,
                lines=(*stack.lines, lines),
                gaps=(*stack.gaps, min(gaps)),
                bottoms=(*stack.bottoms, bottom),
            )
            yield grown
            yield from grow(grown)

    yield from grow(Stack(layers=(), lines=(), gaps=(), bottoms=()))
