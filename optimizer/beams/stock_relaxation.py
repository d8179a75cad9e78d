"""Linear relaxation of a cutting plan: patterns worth a use, and a bound of what is bought.

Patterns are generated as they pay (Gilmore and Gomory, Operations Research 9 and 11, 1961 and
1963). The dual prices, rounded to integers and checked by an exact knapsack, bound what any plan
buys.
"""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction

import numpy as np
from numpy.typing import NDArray
from ortools.linear_solver.python import model_builder

from optimizer.beams.stock_patterns import SLACK, Duals, Pattern, Task
from optimizer.errors import DefectError

_VALUE_SCALE = 10**12
_FINEST = 20_000  # cells of the knapsack; beyond them lengths are rounded to its safe side
_MOST_ROUNDS = 300
_GAIN = 1e-9


class _Knapsack:
    """Best value that fits into every stock length, each length at most as often as wanted."""

    def __init__(self, task: Task, values: Sequence[int], *, relaxed: bool) -> None:
        self.unit = -(-task.room[-1] // _FINEST)
        # Rounded up a pattern found is one; rounded down none is lost. In units of 1 both agree.
        weights = [
            length // self.unit if relaxed else -(-length // self.unit) for length in task.lengths
        ]
        self.room = [room // self.unit for room in task.room]
        self.chunks: list[tuple[int, int, int]] = []  # length, pieces, weight
        for number, (weight, most) in enumerate(zip(weights, task.wanted, strict=True)):
            rest, part = min(most, task.room[-1] // task.lengths[number]), 1
            while rest:
                part = min(part, rest)
                self.chunks.append((number, part, part * weight))
                rest, part = rest - part, 2 * part
        row = np.zeros(self.room[-1] + 1, dtype=np.int64)
        self.rows: list[NDArray[np.int64]] = [row]
        for number, part, weight in self.chunks:
            if weight < row.size:
                better = row.copy()
                with_it = row[: row.size - weight] + part * values[number]
                np.maximum(better[weight:], with_it, out=better[weight:])
                row = better
            self.rows.append(row)

    def value(self, place: int) -> int:
        """Best value in a stock length."""
        return int(self.rows[-1][self.room[place]])

    def counts(self, place: int, lengths: int) -> tuple[int, ...]:
        """Pieces that make it."""
        counts, room = [0] * lengths, self.room[place]
        for step in range(len(self.chunks), 0, -1):
            if self.rows[step][room] != self.rows[step - 1][room]:
                number, part, weight = self.chunks[step - 1]
                counts[number] += part
                room -= weight
        return tuple(counts)


@dataclass(frozen=True, slots=True)
class Relaxed:
    """Linear relaxation.

    Attributes
    ----------
    patterns : tuple of Pattern
        Patterns generated.
    uses : tuple of float
        How often each is used. [-]
    values : tuple of int
        Values of the pieces: the dual prices, scaled and rounded down.
    """

    patterns: tuple[Pattern, ...]
    uses: tuple[float, ...]
    values: tuple[int, ...]


def relax(task: Task, patterns: Iterable[Pattern], costs: Sequence[float]) -> Relaxed:
    """Solve the relaxation by generating patterns.

    Parameters
    ----------
    task : Task
        Pieces and stock lengths.
    patterns : iterable of Pattern
        Patterns to start from, among them those of a plan.
    costs : sequence of float
        Cost of a bar of each stock length, in the task's unit of price.

    Returns
    -------
    Relaxed
        Least cost over all patterns but for rounding.
    """
    known = set(patterns)
    for _ in range(_MOST_ROUNDS):
        relaxed = _solve_relaxation(task, sorted(known), costs)
        knapsack = _Knapsack(task, relaxed.values, relaxed=False)
        scale = _VALUE_SCALE // task.price[-1]
        found = {
            (place, knapsack.counts(place, len(task.lengths)))
            for place, cost in enumerate(costs)
            if knapsack.value(place) > cost * scale * (1.0 + _GAIN)
        }
        if found <= known:
            break
        known |= found
    return relaxed


def _solve_relaxation(task: Task, patterns: Sequence[Pattern], costs: Sequence[float]) -> Relaxed:
    """Solve the relaxation over some patterns; values are its dual prices in whole numbers."""
    model = model_builder.Model()  # type: ignore[no-untyped-call]  # its only untyped method
    uses = [model.new_num_var(0.0, math.inf, f"pattern {n}") for n in range(len(patterns))]
    rows = {
        number: model.add(
            sum(
                counts[number] * use
                for use, (_, counts) in zip(uses, patterns, strict=True)
                if counts[number]
            )
            >= wanted
        )
        for number, wanted in enumerate(task.wanted)
        if wanted
    }
    model.minimize(sum(costs[place] * use for use, (place, _) in zip(uses, patterns, strict=True)))
    engine = model_builder.Solver("glop")
    if engine.solve(model) != model_builder.SolveStatus.OPTIMAL:
        msg = "the relaxation of a cutting plan was not solved"
        raise DefectError(msg)
    scale = _VALUE_SCALE // task.price[-1]
    values = [0] * len(task.wanted)
    for number, row in rows.items():
        values[number] = max(0, math.floor(engine.dual_value(row) * scale))
    return Relaxed(
        patterns=tuple(patterns),
        uses=tuple(engine.value(use) for use in uses),
        values=tuple(values),
    )


def safe_duals(task: Task, values: tuple[int, ...]) -> Duals:
    """Make values of pieces safe: the scale comes from the best pattern of all.

    Parameters
    ----------
    task : Task
        Pieces and stock lengths.
    values : tuple of int
        Value of a piece of each length.

    Returns
    -------
    Duals
        The values with a scale that no pattern exceeds.
    """
    exact = _Knapsack(task, values, relaxed=True)
    ratios = (Fraction(exact.value(place), price) for place, price in enumerate(task.price))
    return Duals(values, max(ratios))


def dive(
    task: Task, relaxed: Relaxed, costs: Sequence[float]
) -> tuple[Counter[Pattern], set[Pattern]]:
    """Round a relaxation down and relax the rest again, until every piece is cut.

    Parameters
    ----------
    task : Task
        Pieces and stock lengths.
    relaxed : Relaxed
        Relaxation of the task.
    costs : sequence of float
        Cost of a bar of each stock length, in the task's unit of price.

    Returns
    -------
    plan : Counter
        The plan so found.
    patterns : set
        All patterns met on the way.
    """
    plan: Counter[Pattern] = Counter()
    met = set(relaxed.patterns)
    while any(task.wanted):
        fixed = Counter(
            {
                pattern: math.floor(use + SLACK)
                for pattern, use in zip(relaxed.patterns, relaxed.uses, strict=True)
            }
        )
        if not fixed.total():
            best = max(range(len(relaxed.uses)), key=relaxed.uses.__getitem__)
            fixed[relaxed.patterns[best]] = 1
        plan.update(+fixed)
        done = [
            sum(pattern[1][number] * n for pattern, n in fixed.items())
            for number in range(len(task.wanted))
        ]
        rest = tuple(max(0, n - cut) for n, cut in zip(task.wanted, done, strict=True))
        task = replace(task, wanted=rest)
        kept = {
            (place, tuple(min(n, left) for n, left in zip(counts, rest, strict=True)))
            for place, counts in relaxed.patterns
        }
        kept = {pattern for pattern in kept if any(pattern[1])}
        if kept:
            relaxed = relax(task, kept, costs)
            met.update(relaxed.patterns)
    return plan, met
