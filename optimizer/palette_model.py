"""The assignment model of a palette: which sizes a job keeps, and what each section takes."""

from __future__ import annotations

from collections.abc import Sequence

from ortools.sat.python import cp_model

Identity = tuple[float, str]
"""Diameter and designation of a bar."""
SizeSet = frozenset[Identity]
_SCALE = 10_000
_WORK = 20.0  # deterministic time; the model is small and ends far below


def choose_size_sets(
    costs: Sequence[dict[SizeSet, float]], limit: int
) -> tuple[SizeSet, ...] | None:
    """Give each section one of its size sets, with at most so many sizes in all.

    Parameters
    ----------
    costs : sequence of dict of SizeSet to float
        For each section the cost of every size set it can use, by the identities of its sizes.
    limit : int
        Most sizes on the job.

    Returns
    -------
    tuple of SizeSet, or None
        The cheapest choice, proved; None if so few sizes serve no choice.
    """
    model = cp_model.CpModel()
    identities = sorted({identity for row in costs for sizes in row for identity in sizes})
    used = {identity: model.new_bool_var(f"size {identity}") for identity in identities}
    model.add(cp_model.LinearExpr.sum(list(used.values())) <= limit)
    picks: list[list[tuple[cp_model.IntVar, SizeSet]]] = []
    variables: list[cp_model.IntVar] = []
    weights: list[int] = []
    for number, row in enumerate(costs):
        picks.append([])
        for sizes in sorted(row, key=sorted):
            pick = model.new_bool_var(f"section {number} uses {sorted(sizes)}")
            for identity in sizes:
                model.add_implication(pick, used[identity])
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
