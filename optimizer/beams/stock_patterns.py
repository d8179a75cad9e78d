"""What can be cut from a stock bar, and which of that a better plan can hold.

Pieces may be covered more often than asked for. Therefore maximal patterns, into which no
further wanted piece fits, are enough: filling up a pattern leaves what is bought as it is, and a
piece cut too often is left out of the plan in the end. Of these, values of the pieces that bound
every plan leave the few whose reduced cost is small enough.
"""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction

SLACK = 1e-6
"""What a float may be off a whole number, in steps of length or uses of a pattern. [-]"""
_MOST_NODES = 150_000
_MOST_PATTERNS = 6_000

Pattern = tuple[int, tuple[int, ...]]
"""Place of the stock length, and pieces of each length."""


@dataclass(frozen=True, slots=True)
class Task:
    """Cutting of one size in whole numbers.

    Attributes
    ----------
    lengths, wanted : tuple of int
        Length of a piece, descending, and number of pieces of each length.
    room, price : tuple of int
        What the pieces of a stock bar may take together, ascending, and what the bar adds to
        the length bought. The unit of room is that of the lengths, prices have their own.
    """

    lengths: tuple[int, ...]
    wanted: tuple[int, ...]
    room: tuple[int, ...]
    price: tuple[int, ...]

    def load(self, counts: Iterable[int]) -> int:
        """Room that pieces take."""
        return sum(n * length for n, length in zip(counts, self.lengths, strict=True))

    def bought(self, bars: Counter[Pattern]) -> int:
        """Price of all bars."""
        return sum(self.price[place] * n for (place, _), n in bars.items())

    def shortest(self, load: int) -> int | None:
        """Place of the shortest stock with room for a load."""
        return next((place for place, room in enumerate(self.room) if room >= load), None)


@dataclass(frozen=True, slots=True)
class Duals:
    """Whole-number values of the pieces that bound every plan.

    Attributes
    ----------
    values : tuple of int
        Value of a piece of each length.
    scale : Fraction
        This times the price of a stock length is at least the value of any pattern in it.
    """

    values: tuple[int, ...]
    scale: Fraction

    def total(self, task: Task) -> int:
        """Value of all pieces: a plan's price times the scale is at least this."""
        return sum(value * n for value, n in zip(self.values, task.wanted, strict=True))


def eligible(task: Task, duals: Duals, limit: int) -> set[Pattern] | None:
    """List every maximal pattern of a plan that buys at most a limit.

    Parameters
    ----------
    task : Task
        Pieces and stock lengths.
    duals : Duals
        Safe values of the pieces.
    limit : int
        Largest price of the plan, in the task's unit.

    Returns
    -------
    set of Pattern or None
        The patterns; None if they are too many to be listed.

    Notes
    -----
    A plan's reduced costs, scale * price - value of each pattern, are never negative and sum
    to scale * bought - total value or less, so none of them exceeds that.
    """
    gap = duals.scale * limit - duals.total(task)
    order = sorted(
        range(len(task.lengths)), key=lambda n: Fraction(-duals.values[n], task.lengths[n])
    )
    found: set[Pattern] = set()
    nodes = 0
    for place, room in enumerate(task.room):
        least = math.ceil(duals.scale * task.price[place] - gap)
        counts = [0] * len(order)
        # Depth first: position in the order, room left, value so far, pieces of the one before.
        stack = [(0, room, 0, 0)]
        while stack:
            nodes += 1
            if nodes > _MOST_NODES or len(found) > _MOST_PATTERNS:
                return None
            depth, left, value, pieces = stack.pop()
            if depth:
                counts[order[depth - 1]] = pieces
            if depth == len(order):
                full = all(
                    counts[n] == task.wanted[n] or task.lengths[n] > left for n in range(depth)
                )
                if full and any(counts) and value >= least:
                    found.add((place, tuple(counts)))
                continue
            number = order[depth]
            length, worth = task.lengths[number], duals.values[number]
            if value * length + left * worth < least * length:
                continue
            stack.extend(
                (depth + 1, left - more * length, value + more * worth, more)
                for more in range(min(task.wanted[number], left // length) + 1)
            )
    return found
