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

from catalogs import Bar
from optimizer.candidates import Candidate
from optimizer.palette_model import Identity, SizeSet, choose_size_sets
from optimizer.problem import Problem
from optimizer.search import Search


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
        What it saves against the choice of fewer sizes before it; zero for the first.
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
    members: list[tuple[Problem, dict[SizeSet, Candidate]]] = []
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
                continue  # one size more is of no use; two more may be
        choices.append(choice)
    return Palette(
        marks=tuple(problem.section.mark for problem, _ in members),
        left_out=tuple(left_out),
        choices=tuple(choices),
        proved=proved,
    )


def best_of_size_sets(problem: Problem) -> tuple[dict[SizeSet, Candidate], bool]:
    """Best layout of a section for each set of sizes that a layout may use.

    Parameters
    ----------
    problem : Problem
        Section and bars allowed.

    Returns
    -------
    best : dict of SizeSet to Candidate
        From the sizes to the best layout that uses no other size.
    proved : bool
        Whether every search was completed.
    """
    rules = problem.rules
    ranking = replace(problem.ranking, keep=1, per_pattern=None)
    best: dict[SizeSet, Candidate] = {}
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
                best[frozenset(_identity(bar) for bar in sizes)] = found.chosen[0]
    return best, proved


def _choose(
    members: list[tuple[Problem, dict[SizeSet, Candidate]]], limit: int
) -> PaletteChoice | None:
    costs = [
        {sizes: _value(problem, candidate) for sizes, candidate in found.items()}
        for problem, found in members
    ]
    chosen = choose_size_sets(costs, limit)
    if chosen is None:
        return None
    layouts = tuple(found[sizes] for (_, found), sizes in zip(members, chosen, strict=True))
    kept = {_identity(bar): bar for layout in layouts for bar in layout.layout.sizes}
    return PaletteChoice(
        limit=limit,
        sizes=tuple(kept[identity] for identity in sorted(kept)),
        layouts=layouts,
        total=math.fsum(row[sizes] for row, sizes in zip(costs, chosen, strict=True)),
        saving=0.0,
    )


def _identity(bar: Bar) -> Identity:
    """What makes two bars the same on a job: sections may take theirs from several tables."""
    return (round(bar.diameter, 6), bar.designation)


def _value(problem: Problem, candidate: Candidate) -> float:
    """Score or mass per length, times the length where the job gives one."""
    return candidate.value(problem.ranking.by) * problem.length
