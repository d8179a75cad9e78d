"""The CP-SAT model of a whole beam: one layout a place, one stirrup plan a span, one top face.

All variables are zero-one choices and all constraints linear: exactly one variant at each
place and one plan in each span; a variant excludes the plans that are not enough for it;
sizes used are counted over the beam; bars that are lapped over a support have one size.
Costs are rounded to whole ten-thousandths, far below the step of lengths.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

from ortools.sat.python import cp_model

from optimizer.beams.marks import Hung, Key, MarkRule
from optimizer.beams.modes import ModeBars
from optimizer.beams.pools import PlanPool
from optimizer.beams.variants import TopKind, TopMode, Variant

SCALE = 10_000
"""Whole units of the model in one unit of cost. [-]"""


@dataclass(frozen=True, slots=True, kw_only=True)
class Menu:
    """Everything that may be chosen in one frame.

    Attributes
    ----------
    places : tuple of tuple of Variant
        Variants of each place.
    pools : tuple of PlanPool
        Stirrup plans of each span.
    modes : tuple of ModeBars
        Arrangements of the top face.
    lapped : tuple of int
        Places whose bars that run on are lapped with one another, and so have one size.
    pairs : tuple of (int, int, tuple of tuple of int)
        Two places, and pairs of variants of them that do not go together.
    most_sizes : int or None
        Most sizes of longitudinal bars.
    constant : float
        Cost of all bars that no choice depends on. [lb or kg]
    marks : MarkRule or None
        Marks of all that is offered, where their number is limited.
    """

    places: tuple[tuple[Variant, ...], ...]
    pools: tuple[PlanPool, ...]
    modes: tuple[ModeBars, ...]
    lapped: tuple[int, ...]
    pairs: tuple[tuple[int, int, tuple[tuple[int, int], ...]], ...]
    most_sizes: int | None
    constant: float
    marks: MarkRule | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Choice:
    """One complete choice.

    Attributes
    ----------
    places : tuple of int
        Variant of each place.
    plans : tuple of int
        Plan of each span.
    mode : int
        Arrangement of the top face.
    cost : float
        Its cost. [lb or kg]
    bound : float
        No choice of the menu costs less. [lb or kg]
    """

    places: tuple[int, ...]
    plans: tuple[int, ...]
    mode: int
    cost: float
    bound: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Solved:
    """Outcome of a solve.

    Attributes
    ----------
    choice : Choice or None
        Best choice found.
    proved : bool
        Whether it is proved best, or that there is none.
    work : float
        Deterministic time spent.
    """

    choice: Choice | None
    proved: bool
    work: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Keep:
    """Positions that a design had before, and how many may change.

    Attributes
    ----------
    places : tuple of frozenset of int
        Variants of each place that leave it as it was.
    plans : tuple of frozenset of int
        The same for each span's stirrups.
    modes : frozenset of int
        The same for the arrangement of the top face.
    most_changes : int
        Most positions that may change.
    locked : frozenset of int
        Positions that must stay, numbered as places, stirrups, top face.
    """

    places: tuple[frozenset[int], ...]
    plans: tuple[frozenset[int], ...]
    modes: frozenset[int]
    most_changes: int
    locked: frozenset[int] = frozenset()


class _Model:
    """Variables and constraints of one menu."""

    def __init__(self, menu: Menu) -> None:
        self.menu = menu
        self.model = cp_model.CpModel()
        self.modes = [self.model.new_bool_var(item.mode.label) for item in menu.modes]
        self.places = [
            [self.model.new_bool_var(f"place {number} variant {v}") for v in range(len(variants))]
            for number, variants in enumerate(menu.places)
        ]
        self.plans = [
            [self.model.new_bool_var(f"span {number} plan {k}") for k in range(len(pool.plans))]
            for number, pool in enumerate(menu.pools)
        ]
        for group in (*self.places, *self.plans, self.modes):
            self.model.add_exactly_one(group)
        self._add_modes()
        self._add_needs()
        self._add_sizes()
        self._add_laps()
        if menu.marks is not None:
            self._add_marks(menu.marks)
        for one, other, clashes in menu.pairs:
            for first, second in clashes:
                self.model.add_at_most_one(self.places[one][first], self.places[other][second])

    def _add_modes(self) -> None:
        position = {item.mode: number for number, item in enumerate(self.menu.modes)}
        for variants, variables in zip(self.menu.places, self.places, strict=True):
            by_mode: defaultdict[TopMode, list[cp_model.IntVar]] = defaultdict(list)
            for variant, variable in zip(variants, variables, strict=True):
                if variant.mode is not None:
                    by_mode[variant.mode].append(variable)
            if by_mode:
                for mode, number in position.items():
                    # One variant a place: those of a mode add up to whether it is chosen.
                    self.model.add(sum(by_mode.get(mode, [])) == self.modes[number])

    def _add_needs(self) -> None:
        for variants, variables in zip(self.menu.places, self.places, strict=True):
            alike: defaultdict[tuple[int, int], list[cp_model.IntVar]] = defaultdict(list)
            for variant, variable in zip(variants, variables, strict=True):
                for need in variant.needs:
                    pool = self.menu.pools[need.span]
                    good = pool.mask(need)
                    if good != pool.everything:
                        alike[need.span, good].append(variable)
            # One variant a place: those that ask the same of the stirrups share a constraint.
            for (span, good), same in alike.items():
                served = [plan for k, plan in enumerate(self.plans[span]) if good >> k & 1]
                self.model.add(sum(same) <= sum(served))

    def _add_sizes(self) -> None:
        if self.menu.most_sizes is None:
            return
        used: dict[str, cp_model.IntVar] = {}

        def size(name: str) -> cp_model.IntVar:
            if name not in used:
                used[name] = self.model.new_bool_var(f"size {name}")
            return used[name]

        for variants, variables in zip(self.menu.places, self.places, strict=True):
            with_size: defaultdict[str, list[cp_model.IntVar]] = defaultdict(list)
            for variant, variable in zip(variants, variables, strict=True):
                for name in sorted(variant.sizes):
                    with_size[name].append(variable)
            for name, same in with_size.items():
                self.model.add(sum(same) <= size(name))
        for item, variable in zip(self.menu.modes, self.modes, strict=True):
            self.model.add_implication(variable, size(item.mode.bar.designation))
        self.model.add(sum(used.values()) <= self.menu.most_sizes)

    def _add_marks(self, rule: MarkRule) -> None:
        """Count marks: those of what is chosen, and the different lengths of hangers."""
        used: dict[Key, cp_model.IntVar] = {}
        offered = zip((*self.places, self.modes), (*rule.places, rule.modes), strict=True)
        for variables, keys in offered:
            with_key: defaultdict[Key, list[cp_model.IntVar]] = defaultdict(list)
            for variable, own in zip(variables, keys, strict=True):
                for key in own:
                    if key not in rule.always:
                        with_key[key].append(variable)
            for key, same in with_key.items():
                if key not in used:
                    used[key] = self.model.new_bool_var(f"mark {len(used)}")
                self.model.add(sum(same) <= used[key])
        total = sum(used.values()) + sum(self._fresh_hangers(rule))
        self.model.add(total <= rule.most - len(rule.always))

    def _fresh_hangers(self, rule: MarkRule) -> list[cp_model.IntVar]:
        """For each span with hangers whether they need a mark that no others have."""
        lengths = [self._hanger_length(item) for item in rule.hung]
        found = []
        for mode, (item, fixed) in enumerate(zip(self.menu.modes, rule.fixed_hangers, strict=True)):
            if item.mode.kind is not TopKind.HANGERS:
                continue
            for number, length in enumerate(lengths):
                alike = []
                for other in (*lengths[:number], *fixed):
                    same = self.model.new_bool_var("as long")
                    self.model.add(length == other).only_enforce_if(same)
                    alike.append(same)
                own = self.model.new_bool_var(f"hangers of span {number}, mode {mode}")
                self.model.add_bool_or([own, *alike, self.modes[mode].negated()])
                found.append(own)
        return found

    def _hanger_length(self, item: Hung) -> cp_model.LinearExprT:
        """Length of the hangers of a span, linear in what is chosen at its supports."""
        variables = [variable for place, _ in item.taken for variable in self.places[place]]
        weights = [-value for _, taken in item.taken for value in taken]
        return cp_model.LinearExpr.weighted_sum(variables, weights) + item.base

    def _add_laps(self) -> None:
        if len(self.menu.lapped) < 2:
            return
        names = sorted(
            {
                variant.layout.layers[0].largest.designation
                for place in self.menu.lapped
                for variant in self.menu.places[place]
            }
        )
        sizes = {name: self.model.new_bool_var(f"bottom bars {name}") for name in names}
        for place in self.menu.lapped:
            for name, chosen in sizes.items():
                same = [
                    variable
                    for variant, variable in zip(
                        self.menu.places[place], self.places[place], strict=True
                    )
                    if variant.layout.layers[0].largest.designation == name
                ]
                self.model.add(sum(same) == chosen)
        # As many bars run on from each side of a support as the spans next to it need continuous.
        for one, other in pairwise(self.menu.lapped):
            for place, beyond in ((one, other), (other, one)):
                run = self._sum(place, [variant.run for variant in self.menu.places[place]])
                needed = [variant.continuous for variant in self.menu.places[beyond]]
                self.model.add(run >= self._sum(beyond, needed))

    def _sum(self, place: int, values: Sequence[int]) -> cp_model.LinearExprT:
        """Value of the variant chosen at a place."""
        return cp_model.LinearExpr.weighted_sum(self.places[place], values)

    def add_keep(self, keep: Keep) -> None:
        """Limit the positions that differ from a design before."""
        groups = [
            *zip(self.places, keep.places, strict=True),
            *zip(self.plans, keep.plans, strict=True),
            (self.modes, keep.modes),
        ]
        same = []
        for number, (variables, old) in enumerate(groups):
            kept = sum(variables[item] for item in sorted(old))
            if number in keep.locked:
                self.model.add(kept == 1) if old else self.model.add_bool_or([])
            same.append(kept)
        self.model.add(sum(same) >= len(groups) - keep.most_changes)

    def minimise(self) -> None:
        """Set the objective."""
        terms = [
            round(variant.cost * SCALE) * variable
            for variants, variables in zip(self.menu.places, self.places, strict=True)
            for variant, variable in zip(variants, variables, strict=True)
        ]
        terms += [
            round(plan.cost * SCALE) * variable
            for pool, variables in zip(self.menu.pools, self.plans, strict=True)
            for plan, variable in zip(pool.plans, variables, strict=True)
        ]
        terms += [
            round(item.cost * SCALE) * variable
            for item, variable in zip(self.menu.modes, self.modes, strict=True)
        ]
        self.model.minimize(sum(terms))


def cost_of(menu: Menu, places: Sequence[int], plans: Sequence[int], mode: int) -> float:
    """Cost of a choice.

    Parameters
    ----------
    menu : Menu
        What may be chosen.
    places, plans : sequence of int
        Variant of each place and plan of each span.
    mode : int
        Arrangement of the top face.

    Returns
    -------
    float
        Cost, the constant part included. [lb or kg]
    """
    total = menu.constant + menu.modes[mode].cost
    total += sum(
        variants[number].cost for variants, number in zip(menu.places, places, strict=True)
    )
    return total + sum(pool.plans[k].cost for pool, k in zip(menu.pools, plans, strict=True))


def choose(menu: Menu, work: float, keep: Keep | None = None) -> Solved:
    """Find the best choice of a menu.

    Parameters
    ----------
    menu : Menu
        What may be chosen.
    work : float
        Deterministic time allowed.
    keep : Keep, optional
        Positions of a design before, and how many of them may change.

    Returns
    -------
    Solved
        The best choice with its bound.
    """
    if not all(menu.places) or not all(pool.plans for pool in menu.pools) or not menu.modes:
        return Solved(choice=None, proved=True, work=0.0)
    built = _Model(menu)
    built.minimise()
    if keep is not None:
        built.add_keep(keep)
    engine = cp_model.CpSolver()
    engine.parameters.num_workers = 1
    engine.parameters.random_seed = 1
    engine.parameters.linearization_level = 2
    engine.parameters.symmetry_level = 0  # with presolve, symmetries have ended the process
    engine.parameters.max_deterministic_time = max(work, 0.0)
    status = engine.solve(built.model)
    spent = engine.response_proto.deterministic_time
    if status not in (cp_model.OPTIMAL, cp_model.FEASIBLE):
        return Solved(choice=None, proved=status == cp_model.INFEASIBLE, work=spent)
    places = tuple(_chosen(engine, group) for group in built.places)
    plans = tuple(_chosen(engine, group) for group in built.plans)
    mode = _chosen(engine, built.modes)
    cost = cost_of(menu, places, plans, mode)
    # Rounding of costs in the model aside, the bound is not above what was found.
    bound = min(cost, engine.best_objective_bound / SCALE + menu.constant)
    return Solved(
        choice=Choice(
            places=places,
            plans=plans,
            mode=mode,
            cost=cost,
            bound=bound,
        ),
        proved=status == cp_model.OPTIMAL,
        work=spent,
    )


def _chosen(engine: cp_model.CpSolver, group: Sequence[cp_model.IntVar]) -> int:
    return next(number for number, variable in enumerate(group) if engine.boolean_value(variable))
