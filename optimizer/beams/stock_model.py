"""Search of the cutting plan that buys least: heuristics, bound and the solver.

The model counts how often each pattern is used. Where the relaxation leaves a gap, the solver
decides over every pattern that can occur in a better plan: its answer is then that of all
patterns. Of plans that buy the same it looks for the one with fewest bars in the same way.
"""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Iterable
from fractions import Fraction

from ortools.sat.python import cp_model

from optimizer.beams.stock_patterns import SLACK, Pattern, Task, eligible
from optimizer.beams.stock_relaxation import dive, relax, safe_duals
from optimizer.errors import DefectError

_LEAN = 1e-4  # of the shortest stock's price, added to every bar


class Search:
    """Search of the best plan of one size.

    Parameters
    ----------
    task : Task
        Pieces and stock lengths.
    work : float
        Deterministic time of the solver.

    Attributes
    ----------
    bars : Counter of Pattern
        The best plan so far; a first one from the start.
    bound : int
        What any plan costs at least, in the task's unit of price.
    fewest : bool
        Whether the plan costs as little as any, and of these has the fewest bars.
    spent : float
        Deterministic time taken.
    """

    def __init__(self, task: Task, work: float) -> None:
        self.task, self.work, self.spent = task, work, 0.0
        self.bars = min((self._first_fit(place) for place in self._starts()), key=self._rank)
        self.bound = 0
        self.fewest = False

    @property
    def proved(self) -> bool:
        """Whether the plan costs as little as any."""
        return self.task.bought(self.bars) == self.bound

    def run(self) -> None:
        """Improve the plan and the bound until they meet or the work is spent."""
        # A little more for each bar makes the relaxation prefer long ones among equal prices.
        costs = [price + _LEAN * self.task.price[0] for price in self.task.price]
        leaning = relax(self.task, self.bars, costs)
        relaxed = relax(self.task, leaning.patterns, self.task.price)
        duals = safe_duals(self.task, relaxed.values)
        self.bound = math.ceil(Fraction(duals.total(self.task)) / duals.scale)
        if self._is_fewest():
            self.fewest = True
            return
        dived, patterns = dive(self.task, leaning, costs)
        self.bars = min(self.bars, self._tidy(dived), key=self._rank)
        patterns.update(relaxed.patterns)
        if not self.proved:
            self._solve(patterns)
        if not self.proved:
            better = eligible(self.task, duals, self.task.bought(self.bars) - 1)
            if better is not None:
                self.bound = max(self.bound, self._solve(better))
        bought = self.task.bought(self.bars)
        if bought < self.bound:
            msg = "a cutting plan costs less than its bound"
            raise DefectError(msg)
        self.fewest = self._is_fewest()
        if not self.fewest:
            equal = eligible(self.task, duals, bought) if self.proved else None
            least = self._solve(equal or patterns, bought=bought)
            self.fewest = self._is_fewest() or (equal is not None and least == self.bars.total())

    def _is_fewest(self) -> bool:
        """Whether even the longest stock alone would need as many bars."""
        least = -(-self.task.bought(self.bars) // self.task.price[-1])
        return self.proved and self.bars.total() == least

    def _rank(self, bars: Counter[Pattern]) -> tuple[int, int]:
        return self.task.bought(bars), bars.total()

    def _starts(self) -> list[int]:
        longest = self.task.lengths[0]
        return [place for place, room in enumerate(self.task.room) if room >= longest]

    def _first_fit(self, place: int) -> Counter[Pattern]:
        """Longest piece first into the first bar with room, all bars of one stock length."""
        task = self.task
        rooms: list[int] = []
        cuts: list[list[int]] = []
        for number, length in enumerate(task.lengths):
            first = 0
            for _ in range(task.wanted[number]):
                while first < len(rooms) and rooms[first] < length:
                    first += 1
                if first == len(rooms):
                    rooms.append(task.room[place])
                    cuts.append([0] * len(task.lengths))
                rooms[first] -= length
                cuts[first][number] += 1
        return self._tidy(Counter((place, tuple(counts)) for counts in cuts))

    def _tidy(self, bars: Counter[Pattern]) -> Counter[Pattern]:
        """Leave surplus pieces out, shorten bars, and join two into one of the same price."""
        task, rest = self.task, list(self.task.wanted)
        joined: Counter[Pattern] = Counter()
        for _, counts in sorted(bars.elements(), reverse=True):
            kept = tuple(min(n, left) for n, left in zip(counts, rest, strict=True))
            rest = [left - n for left, n in zip(rest, kept, strict=True)]
            place = task.shortest(task.load(kept))
            if any(kept) and place is not None:
                joined[place, kept] += 1
        # Prices ascend, so a joined bar may be joined again into a longer one.
        for target, price in enumerate(task.price):
            for low in range(target):
                for high in range(low, target):
                    if task.price[low] + task.price[high] == price:
                        self._join(joined, low, high, target)
        return +joined

    def _join(self, bars: Counter[Pattern], low: int, high: int, target: int) -> None:
        """Join pairs of bars of two stock lengths into one of a third."""
        firsts, seconds = self._of(bars, low), self._of(bars, high)
        if low == high:
            firsts, seconds = firsts[::2], firsts[1::2]
        for first, second in zip(firsts, seconds, strict=False):
            both = tuple(a + b for a, b in zip(first[1], second[1], strict=True))
            if self.task.load(both) <= self.task.room[target]:  # two bars spared one cut
                bars.subtract([first, second])
                bars[target, both] += 1

    @staticmethod
    def _of(bars: Counter[Pattern], place: int) -> list[Pattern]:
        return sorted(pattern for pattern in bars.elements() if pattern[0] == place)

    def _solve(self, patterns: Iterable[Pattern], bought: int | None = None) -> int:
        """Take the best plan over some patterns if it is better, and return their bound.

        The bound is one of the price, or of the number of bars where the price is given.
        """
        task, model = self.task, cp_model.CpModel()
        listed = sorted({*patterns, *self.bars})
        uses = []
        for pattern in listed:
            most = max(-(-w // n) for n, w in zip(pattern[1], task.wanted, strict=True) if n)
            uses.append(model.new_int_var(0, max(most, self.bars[pattern]), f"{pattern}"))
            model.add_hint(uses[-1], self.bars[pattern])
        for number, wanted in enumerate(task.wanted):
            counts = [pattern[1][number] for pattern in listed]
            model.add(cp_model.LinearExpr.weighted_sum(uses, counts) >= wanted)
        price = cp_model.LinearExpr.weighted_sum(uses, [task.price[place] for place, _ in listed])
        if bought is None:
            model.add_linear_constraint(price, self.bound, task.bought(self.bars))
            model.minimize(price)
        else:
            model.add(price == bought)
            model.minimize(cp_model.LinearExpr.sum(uses))
        engine = cp_model.CpSolver()
        engine.parameters.num_workers = 1
        engine.parameters.random_seed = 1
        engine.parameters.linearization_level = 2
        # Presolving symmetric patterns aborts OR-Tools 9.15 on some of these models.
        engine.parameters.cp_model_presolve = False
        engine.parameters.symmetry_level = 0
        engine.parameters.max_deterministic_time = min(
            max(self.work - self.spent, 0.0), self.work / 3.0
        )
        status = engine.solve(model)
        self.spent += engine.response_proto.deterministic_time
        if status not in (cp_model.OPTIMAL, cp_model.FEASIBLE):
            return 0
        values = (engine.value(use) for use in uses)
        plan = self._tidy(+Counter(dict(zip(listed, values, strict=True))))
        self.bars = min(self.bars, plan, key=self._rank)
        return math.ceil(engine.best_objective_bound - SLACK)
