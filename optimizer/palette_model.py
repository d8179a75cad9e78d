"""The assignment model of a palette: which sizes a job keeps, and what each section takes."""

from __future__ import annotations

from collections.abc import Sequence

from ortools.sat.python import cp_model

_SCALE = 10_000
_WORK = 20.0  # deterministic time; the model is small and ends far below


def choose_size_sets(
    costs: Sequence[dict[frozenset[int], float]], limit: int
) -> tuple[frozenset[int], ...] | None:
    """Give each section one of its size sets, with at most so many sizes in all.

    Parameters
    ----------
    costs : sequence of dict of frozenset of int to float
        For each section the cost of every size set it can use, by catalogue positions.
    limit : int
        Most sizes on the job.

    Returns
    -------
    tuple of frozenset of int, or None
        The cheapest choice, proved; None if so few sizes serve no choice.
    """
    model = cp_model.CpModel()
    positions = sorted({position for row in costs for sizes in row for position in sizes})
    used = {position: model.new_bool_var(f"size {position}") for position in positions}
    model.add(cp_model.LinearExpr.sum(list(used.values())) <= limit)
    picks: list[list[tuple[cp_model.IntVar, frozenset[int]]]] = []
    variables: list[cp_model.IntVar] = []
    weights: list[int] = []
    for number, row in enumerate(costs):
        picks.append([])
        for sizes in sorted(row, key=sorted):
            pick = model.new_bool_var(f"section {number} uses {sorted(sizes)}")
            for position in sizes:
                model.add_implication(pick, used[position])
            variables.append(pick)
            weights.append(round(row[sizes] * _SCALE))
            picks[-1].append((pick, sizes))
        model.add_exactly_one([pick for pick, _ in picks[-1]])
    model.minimize(cp_model.LinearExpr.weighted_sum(variables, weights))
    engine = cp_model.CpSolver()
    engine.parameters.num_workers = 1
    engine.parameters.random_seed = 1
    engine.parameters.linearization_level = 2
    engine.parameters.max_deterministic_time = _WORK
    if not costs or engine.solve(model) != cp_model.OPTIMAL:
        return None
    return tuple(next(sizes for pick, sizes in row if engine.boolean_value(pick)) for row in picks)
