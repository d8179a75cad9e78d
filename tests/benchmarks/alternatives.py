"""Two things a user might do instead of a solver, on the same score and the same engine."""

from __future__ import annotations

import time
from dataclasses import dataclass
from itertools import product

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import Bounds, differential_evolution

from engine import Batch, assess, place
from engine.assessment import ROUNDING
from engine.crack_control import largest_spacing
from engine.service import service_stress
from optimizer.conditions import envelope
from optimizer.families import Family, families
from optimizer.problem import Problem
from optimizer.scoring import score
from optimizer.search import layout_of

_CHUNK = 200_000


@dataclass(frozen=True)
class Outcome:
    """Best score found and the time it took [s]; a score of None means given up."""

    seconds: float
    score: float | None


def _layer_rows(family: Family, layer: int) -> list[tuple[int, ...]]:
    """Counts of one layer that keep the rules within a layer."""
    rows = []
    for counts in product(*(range(most + 1) for most in family.most[layer])):
        odd = sum(count % 2 for count in counts)
        fits = sum(counts) >= 2 and odd <= 1 and counts[0] != 1
        if fits and (layer > 0 or counts[0] >= 2):
            rows.append(counts)
    return rows


def _stackings(family: Family, limit: float) -> NDArray[np.int64] | None:
    """All counts of a family by the rules of stacking; None if there are too many."""
    found: list[tuple[tuple[int, ...], ...]] = [(row,) for row in _layer_rows(family, 0)]
    for layer in range(1, family.layers):
        rows = _layer_rows(family, layer)
        found = [
            (*below, row)
            for below in found
            for row in rows
            if sum(row) <= sum(below[-1])
            and (sum(row) % 2 == 0 or sum(below[-1]) % 2)
            and (row[0] == 0 or below[-1][0] > 0)
        ]
        if len(found) > limit:
            return None
    return np.array(found, dtype=np.int64).reshape(len(found), family.layers, len(family.bars))


def _value(problem: Problem, family: Family, counts: NDArray[np.int64], s: float) -> float | None:
    layout = layout_of(family, counts)
    placement = place(problem.section, layout)
    if placement.gaps_fit and placement.layers[0].spacing <= s * (1 + ROUNDING):
        return score(layout, placement, problem.ranking).total
    return None


def enumerate_everything(problem: Problem, limit: float = 3e6) -> Outcome:
    """Every layout there is, through the vectorised engine; given up beyond a number."""
    start = time.perf_counter()
    best = np.inf
    section = problem.section
    for family in families(envelope(section), problem.rules):
        everything = _stackings(family, limit)
        if everything is None:
            return Outcome(time.perf_counter() - start, None)
        for first in range(0, len(everything), _CHUNK):
            counts = everything[first : first + _CHUNK]
            if len(family.bars) == 2:
                counts = counts[counts[:, :, 1].sum(axis=1) > 0]
            if not len(counts):
                continue
            counts = counts[assess(section, Batch(bars=family.bars, counts=counts)).passes]
            if not len(counts):
                continue
            batch = Batch(bars=family.bars, counts=counts)
            stress = service_stress(section, batch)
            s = largest_spacing(section.edition, stress, section.bar_face)
            for row in range(len(counts)):
                value = _value(problem, family, counts[row], float(s[row]))
                if value is not None:
                    best = min(best, value)
    return Outcome(time.perf_counter() - start, float(best) if np.isfinite(best) else None)


def evolve(problem: Problem) -> Outcome:
    """Differential evolution over family and counts, infeasible layouts penalised."""
    start = time.perf_counter()
    section = problem.section
    members = families(envelope(section), problem.rules)
    layers = max(family.layers for family in members)

    def cost(x: NDArray[np.float64]) -> float:
        family = members[min(int(x[0]), len(members) - 1)]
        counts = np.zeros((1, family.layers, len(family.bars)), dtype=np.int64)
        for layer in range(family.layers):
            for size in range(len(family.bars)):
                share = x[1 + 2 * layer + size]
                counts[0, layer, size] = round(share * family.most[layer][size])
        if (counts.sum(axis=2) < 2).any():
            return 1e6
        found = assess(section, Batch(bars=family.bars, counts=counts))
        missing = max(0.0, 1 - float(found.phi_Mn[0]) / section.demand)
        if not found.passes[0]:
            return 1e5 * (1 + missing)
        rows = [_layer_rows(family, layer) for layer in range(family.layers)]
        if any(tuple(counts[0, n].tolist()) not in rows[n] for n in range(family.layers)):
            return 1e4
        batch = Batch(bars=family.bars, counts=counts)
        s = largest_spacing(section.edition, service_stress(section, batch), section.bar_face)
        layout = layout_of(family, counts[0])
        if any(not layer.aligned for layer in place(section, layout).layers):
            return 1e4
        value = _value(problem, family, counts[0], float(s[0]))
        return 1e4 if value is None else value

    low = np.zeros(1 + 2 * layers)
    high = np.ones(1 + 2 * layers)
    high[0] = len(members) - 1e-9
    result = differential_evolution(
        cost, Bounds(low, high), rng=1, maxiter=60, popsize=12, polish=False
    )
    best = float(result.fun)
    return Outcome(time.perf_counter() - start, best if best < 1e4 else None)
