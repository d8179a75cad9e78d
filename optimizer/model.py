"""The CP-SAT model of one family: its variables are the bars.

Each layer holds 2p + o bars of each size: p pairs, symmetric about the centreline, and at
most one bar o at the centre. Conditions come from `optimizer.families` as real numbers and
are scaled to integers here, coefficients rounded up and bounds down, so that rounding never
cuts off a layout. All variables are counts, none is auxiliary: each solution is a layout
and comes once.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from ortools.sat.python import cp_model

from optimizer.conditions import Conditions
from optimizer.families import Family

_SCALE = 10_000_000  # size of a scaled bound; counts stay far below the solver's limits
_COST_SCALE = 1_000_000
_GUARDED = (
    "flexural_strength",
    "net_tensile_strain",
    "minimum_steel",
    "clear_gap",
    "crack_control",
)
_WIDE = 60  # bars of a size in a layer when the width does not limit them


@dataclass(frozen=True, slots=True)
class Wanted:
    """A layout is wanted if constant + sum(cost of its bars) <= limit.

    Attributes
    ----------
    cost : tuple of float
        Cost of one bar of each size of the family, not above the true one.
    constant : float
        Cost of the family's layers and sizes.
    limit : float
        Most that is of interest; infinite for everything.
    """

    cost: tuple[float, ...]
    constant: float
    limit: float


@dataclass(frozen=True, slots=True)
class Enumeration:
    """Solutions of a model.

    Attributes
    ----------
    counts : ndarray of int, shape (n, layers, sizes)
        Bars of each size in each layer.
    complete : bool
        False if the work limit stopped the solver.
    work : float
        Deterministic time spent.
    """

    counts: NDArray[np.int64]
    complete: bool
    work: float


class _Model(cp_model.CpModel):
    """A model without the old spellings of its methods: making them takes longer than the
    rest of a small model.
    """

    def _add_pre_pep8_methods(self) -> None:
        pass


@dataclass(frozen=True, slots=True)
class _Counts:
    """Variables of a family, indexed by layer and size."""

    pairs: list[list[cp_model.IntVar]]
    odd: list[list[cp_model.IntVar]]

    def weighted(self, weights: Sequence[Sequence[int]]) -> cp_model.LinearExprT:
        """Sum of weight times number of bars."""
        variables, factors = [], []
        for pairs, odd, row in zip(self.pairs, self.odd, weights, strict=True):
            for pair, single, weight in zip(pairs, odd, row, strict=True):
                if weight:
                    variables += [pair, single]
                    factors += [2 * weight, weight]
        return cp_model.LinearExpr.weighted_sum(variables, factors)

    def in_layer(self, layer: int) -> cp_model.LinearExprT:
        """Number of bars in a layer."""
        sizes = len(self.pairs[layer])
        weights = [[int(number == layer)] * sizes for number in range(len(self.pairs))]
        return self.weighted(weights)


def _variables(model: cp_model.CpModel, family: Family, *, wide: bool = False) -> _Counts:
    pairs, odd = [], []
    for layer, most in enumerate(family.most):
        limits = [_WIDE if wide else count for count in most]
        names = [f"{bar.designation} in layer {layer + 1}" for bar in family.bars]
        named = list(zip(limits, names, strict=True))
        pairs.append([model.new_int_var(0, n // 2, f"pairs of {name}") for n, name in named])
        odd.append([model.new_int_var(0, min(1, n), f"odd {name}") for n, name in named])
    return _Counts(pairs, odd)


def _add_symmetry(model: cp_model.CpModel, family: Family, counts: _Counts) -> None:
    """Rules 2 and 4: two bars at least in a layer, one odd bar, two of the larger at least."""
    for pairs, odd in zip(counts.pairs, counts.odd, strict=True):
        model.add(cp_model.LinearExpr.sum(pairs) >= 1)
        if len(odd) == 2:
            model.add(odd[0] + odd[1] <= 1)
        model.add(odd[0] <= pairs[0])
    model.add(counts.pairs[0][0] >= 1)  # the largest size of the layout lies in layer 1
    if len(family.bars) == 2:
        # A layout without the second size belongs to the family of one size.
        second = [[0, 1]] * family.layers
        model.add(counts.weighted(second) >= 1)


def _add_stacking(model: cp_model.CpModel, family: Family, counts: _Counts) -> None:
    """Rule 5: no more bars than below, none odd over even, no size larger than below."""
    for layer in range(1, family.layers):
        model.add(counts.in_layer(layer) <= counts.in_layer(layer - 1))
        model.add(
            cp_model.LinearExpr.sum(counts.odd[layer])
            <= cp_model.LinearExpr.sum(counts.odd[layer - 1])
        )
        if layer >= 2 and len(family.bars) == 2:
            # Layer 1 always holds the largest size; above it only over a layer that does.
            most = family.most[layer][0] // 2
            model.add(counts.pairs[layer][0] <= most * counts.pairs[layer - 1][0])


def _add_conditions(
    model: cp_model.CpModel,
    counts: _Counts,
    conditions: Conditions,
    guard: cp_model.IntVar | None = None,
) -> None:
    """Add conditions scaled to integers, under a switch if one is given."""
    size = np.maximum(np.abs(conditions.bounds), np.abs(conditions.coefficients).max(axis=(1, 2)))
    factor = _SCALE / size
    weights = np.ceil(conditions.coefficients * factor[:, None, None]).astype(np.int64)
    bounds = np.floor(conditions.bounds * factor).astype(np.int64)
    for rows, bound in zip(weights.tolist(), bounds.tolist(), strict=True):
        if bound <= 0 and all(weight >= 0 for row in rows for weight in row):
            continue
        added = model.add(counts.weighted(rows) >= bound)
        if guard is not None:
            added.only_enforce_if(guard)


def build(family: Family, wanted: Wanted | None) -> tuple[cp_model.CpModel, _Counts]:
    """Build the model of a family.

    Parameters
    ----------
    family : Family
        What may be chosen and the conditions on it.
    wanted : Wanted or None
        Bound on what is of interest; None for everything.

    Returns
    -------
    model : CpModel
        The model, without an objective.
    counts : _Counts
        Its variables.
    """
    model = _Model()
    counts = _variables(model, family)
    _add_symmetry(model, family, counts)
    _add_stacking(model, family, counts)
    model.add(counts.in_layer(0) >= family.least_first)
    for conditions in family.conditions.values():
        _add_conditions(model, counts, conditions)
    if wanted is not None and math.isfinite(wanted.limit):
        weights = [[math.floor(cost * _COST_SCALE) for cost in wanted.cost]] * family.layers
        limit = math.ceil((wanted.limit - wanted.constant) * _COST_SCALE)
        model.add(counts.weighted(weights) <= limit)
    return model, counts


def _add_totals(
    model: cp_model.CpModel, family: Family, counts: _Counts, totals: NDArray[np.int64]
) -> None:
    """Tie variables to the totals of each size and list what they may be together.

    They follow from the counts, so they do not multiply solutions.
    """
    variables = []
    for size, bar in enumerate(family.bars):
        weights = [[int(number == size) for number in range(len(family.bars))]] * family.layers
        values = totals[:, size]
        total = model.new_int_var(int(values.min()), int(values.max()), f"all {bar.designation}")
        model.add(counts.weighted(weights) == total)
        variables.append(total)
    model.add_allowed_assignments(variables, totals.tolist())


class _Collector(cp_model.CpSolverSolutionCallback):
    """Gathers every solution as counts of bars."""

    def __init__(self, counts: _Counts, stop_after: int | None) -> None:
        super().__init__()
        self._stop_after = stop_after
        self._pairs = [var for row in counts.pairs for var in row]
        self._odd = [var for row in counts.odd for var in row]
        self.rows: list[list[int]] = []

    def on_solution_callback(self) -> None:
        """Store one solution."""
        self.rows.append(
            [2 * self.value(p) + self.value(o) for p, o in zip(self._pairs, self._odd, strict=True)]
        )
        if self._stop_after is not None and len(self.rows) >= self._stop_after:
            self.stop_search()


def solver(work: float, *, layers: int = 1, presolve: bool = False) -> cp_model.CpSolver:
    """Set up the solver: one worker and a fixed seed, so that equal jobs give equal answers.

    Parameters
    ----------
    work : float
        Deterministic time allowed.
    layers : int
        Layers of the family: with three the linear relaxation pays, with fewer it does not.
    presolve : bool
        These models are so small that presolve costs more than it saves; it is switched on to
        confirm an infeasible answer by another way.

    Returns
    -------
    CpSolver
        Ready to solve.
    """
    engine = cp_model.CpSolver()
    engine.parameters.num_workers = 1
    engine.parameters.random_seed = 1
    engine.parameters.cp_model_presolve = presolve
    engine.parameters.linearization_level = 1 if layers > 2 else 0
    engine.parameters.cut_level = 0
    engine.parameters.add_lp_constraints_lazily = False
    engine.parameters.symmetry_level = 0
    engine.parameters.cp_model_probing_level = 0
    engine.parameters.max_deterministic_time = max(work, 0.0)
    return engine


def enumerate_family(
    family: Family,
    wanted: Wanted | None,
    work: float,
    *,
    presolve: bool = False,
    stop_after: int | None = None,
    totals: NDArray[np.int64] | None = None,
) -> Enumeration:
    """List every member of a family that meets its conditions and is of interest.

    Parameters
    ----------
    family : Family
        What may be chosen and the conditions on it.
    wanted : Wanted or None
        Bound on what is of interest; None for everything.
    work : float
        Deterministic time allowed.
    presolve : bool
        See `solver`.
    stop_after : int, optional
        Number of solutions after which the enumeration is broken off.
    totals : ndarray of int, shape (n, sizes), optional
        Totals of bars of each size that a layout may have; others are left out.

    Returns
    -------
    Enumeration
        All solutions, or those found before a limit.
    """
    model, counts = build(family, wanted)
    if totals is not None:
        _add_totals(model, family, counts, totals)
    engine = solver(work, layers=family.layers, presolve=presolve)
    engine.parameters.enumerate_all_solutions = True
    collector = _Collector(counts, stop_after)
    status = engine.solve(model, collector)
    shape = (len(collector.rows), family.layers, len(family.bars))
    return Enumeration(
        counts=np.array(collector.rows, dtype=np.int64).reshape(shape),
        complete=status in (cp_model.OPTIMAL, cp_model.INFEASIBLE),
        work=engine.response_proto.deterministic_time,
    )


def blocking_rules(family: Family, work: float) -> tuple[str, ...]:
    """Smallest set of rules that together leave a family without members.

    Parameters
    ----------
    family : Family
        What may be chosen and the conditions on it.
    work : float
        Deterministic time allowed for each solve.

    Returns
    -------
    tuple of str
        Ids of check rows; empty if the necessary conditions leave some counts. Each of them is
        needed: without it the rest can be met.

    Notes
    -----
    Every rule has a switch that the solver is told to assume. From the assumptions that the
    solver names as sufficient for infeasibility, one after another is dropped while the rest
    stays infeasible.
    """
    model = _Model()
    counts = _variables(model, family, wide=True)
    _add_symmetry(model, family, counts)
    _add_stacking(model, family, counts)
    guards = {rule: model.new_bool_var(rule) for rule in _GUARDED}
    model.add(counts.in_layer(0) >= family.least_first).only_enforce_if(guards["crack_control"])
    for rule, conditions in family.conditions.items():
        _add_conditions(model, counts, conditions, guards[rule])

    def core(rules: Sequence[str]) -> list[str] | None:
        """Rules the solver names, or None if the given ones can be met together."""
        model.clear_assumptions()
        model.add_assumptions([guards[rule] for rule in rules])
        engine = solver(work, layers=family.layers)
        if engine.solve(model) != cp_model.INFEASIBLE:
            return None
        named = set(engine.sufficient_assumptions_for_infeasibility())
        return [rule for rule in rules if guards[rule].index in named]

    blocking = core(_GUARDED)
    if blocking is None:
        return ()
    for rule in list(blocking):
        rest = [other for other in blocking if other != rule]
        smaller = core(rest)
        if smaller is not None:
            blocking = smaller
    return tuple(blocking)
