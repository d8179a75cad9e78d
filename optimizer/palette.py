"""Few bar sizes for a whole job: sizes and layouts chosen together, exactly.

For every section and every size set a layout may use (one size, or two of the permitted pairs)
the best layout is found by the ordinary search with those sizes alone. Which sizes the job keeps
is then a small assignment model: each section takes one of its size sets, a size set needs its
sizes in the palette, the palette holds at most so many. Since the best layout of a size set does
not depend on the palette, the choice is exact.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

from ortools.sat.python import cp_model

from catalogs import Bar
from optimizer.candidates import Candidate
from optimizer.problem import Problem
from optimizer.search import Search

_SCALE = 10_000


@dataclass(frozen=True, slots=True, kw_only=True)
class PaletteChoice:
    """The best choice with at most so many sizes on the job.

    Attributes
    ----------
    limit : int
        Number of sizes allowed.
    sizes : tuple of Bar
        Sizes used, smallest first.
    layouts : tuple of Candidate
        Layout of each section, in the job's order.
    total : float
        Sum of score (or mass) times length over the sections.
    saving : float
        What the last size allowed saves against one fewer; zero for the first.
    """

    limit: int
    sizes: tuple[Bar, ...]
    layouts: tuple[Candidate, ...]
    total: float
    saving: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Palette:
    """Choices for growing numbers of sizes.

    Attributes
    ----------
    marks : tuple of str
        Sections taken in: those with a layout at all.
    left_out : tuple of str
        Sections without one.
    choices : tuple of PaletteChoice
        One for each number of sizes that is enough, up to the limit of the job.
    proved : bool
        Whether every search and every choice was completed.
    """

    marks: tuple[str, ...]
    left_out: tuple[str, ...]
    choices: tuple[PaletteChoice, ...]
    proved: bool


def choose_palette(problems: tuple[Problem, ...], limit: int) -> Palette:
    """Choose sizes and layouts for growing numbers of sizes.

    Parameters
    ----------
    problems : tuple of Problem
        Sections of the job.
    limit : int
        Most sizes on the job.

    Returns
    -------
    Palette
        The choices, each exact.
    """
    proved = True
    members: list[tuple[Problem, dict[frozenset[int], Candidate]]] = []
    left_out = []
    for problem in problems:
        found, complete = best_of_size_sets(problem)
        proved &= complete
        if found:
            members.append((problem, found))
        else:
            left_out.append(problem.section.mark)
    choices: list[PaletteChoice] = []
    for number in range(1, limit + 1):
        choice = _choose(members, number)
        if choice is None:
            continue
        if choices:
            choice = replace(choice, saving=choices[-1].total - choice.total)
            if choice.saving <= 1e-9:
                break  # a further size is of no use, and neither is any beyond it
        choices.append(choice)
    return Palette(
        marks=tuple(problem.section.mark for problem, _ in members),
        left_out=tuple(left_out),
        choices=tuple(choices),
        proved=proved,
    )


def best_of_size_sets(problem: Problem) -> tuple[dict[frozenset[int], Candidate], bool]:
    """Best layout of a section for each set of sizes that a layout may use.

    Parameters
    ----------
    problem : Problem
        Section and bars allowed.

    Returns
    -------
    best : dict of frozenset of int to Candidate
        From catalogue positions to the best layout that uses no other size.
    proved : bool
        Whether every search was completed.
    """
    rules = problem.rules
    ranking = replace(problem.ranking, keep=1, per_pattern=None)
    best: dict[frozenset[int], Candidate] = {}
    proved = True
    for number, larger in enumerate(rules.sizes):
        partners = [()] + [
            (smaller,)
            for smaller in rules.sizes[:number]
            if rules.max_sizes > 1 and larger.position - smaller.position <= rules.size_steps
        ]
        for partner in partners:
            sizes = tuple(sorted((larger, *partner), key=lambda bar: bar.position))
            limited = replace(problem, rules=replace(rules, sizes=sizes), ranking=ranking)
            found = Search(limited, confirm=False).run()
            proved &= found.proved
            if found.chosen:
                best[frozenset(bar.position for bar in sizes)] = found.chosen[0]
    return best, proved


def _choose(
    members: list[tuple[Problem, dict[frozenset[int], Candidate]]], limit: int
) -> PaletteChoice | None:
    bars = {bar.position: bar for problem, _ in members for bar in problem.rules.sizes}
    model = cp_model.CpModel()
    used = {position: model.new_bool_var(f"size {position}") for position in sorted(bars)}
    model.add(cp_model.LinearExpr.sum(list(used.values())) <= limit)
    picks: list[list[tuple[cp_model.IntVar, Candidate]]] = []
    costs: list[int] = []
    variables: list[cp_model.IntVar] = []
    for number, (problem, found) in enumerate(members):
        row = []
        for sizes in sorted(found, key=sorted):
            pick = model.new_bool_var(f"section {number} uses {sorted(sizes)}")
            for position in sizes:
                model.add_implication(pick, used[position])
            variables.append(pick)
            costs.append(round(_value(problem, found[sizes]) * _SCALE))
            row.append((pick, found[sizes]))
        model.add_exactly_one([pick for pick, _ in row])
        picks.append(row)
    model.minimize(cp_model.LinearExpr.weighted_sum(variables, costs))
    engine = cp_model.CpSolver()
    engine.parameters.num_workers = 1
    engine.parameters.random_seed = 1
    engine.parameters.linearization_level = 2
    if not members or engine.solve(model) != cp_model.OPTIMAL:
        return None
    layouts = tuple(
        next(candidate for pick, candidate in row if engine.boolean_value(pick)) for row in picks
    )
    total = math.fsum(
        _value(problem, layout) for (problem, _), layout in zip(members, layouts, strict=True)
    )
    kept = {bar.position: bar for layout in layouts for bar in layout.layout.sizes}
    return PaletteChoice(
        limit=limit,
        sizes=tuple(kept[position] for position in sorted(kept)),
        layouts=layouts,
        total=total,
        saving=0.0,
    )


def _value(problem: Problem, candidate: Candidate) -> float:
    """Score or mass per length, times the length where the job gives one."""
    return candidate.value(problem.ranking.by) * problem.length
