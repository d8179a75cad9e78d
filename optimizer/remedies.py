"""Single changes of a job that make layouts possible where there were none."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from typing import Any

from catalogs import Bar, BarCatalog, bar_catalog, steel_grades
from engine import (
    Concrete,
    EngineError,
    Section,
    Steel,
    check_layout,
)
from engine.cover import required_cover
from engine.units import plain
from optimizer.candidates import Candidate
from optimizer.flanges import resized
from optimizer.problem import MM_PER_IN, BarRules, Problem
from optimizer.search import Search

_MOST_LAYERS = 4
_WIDTH_STEPS, _DEPTH_STEPS, _STRENGTH_STEPS = 6, 12, 4


@dataclass(frozen=True, slots=True, kw_only=True)
class Remedy:
    """One change that, alone, makes layouts possible; verified by a search.

    Attributes
    ----------
    key : str
        Key of the job.
    before, after : str
        Its value now, and the smallest change found to work.
    best : Candidate
        Best layout after the change.
    phi_Mn : float
        Its design strength. [lbf*in or N*mm]
    """

    key: str
    before: str
    after: str
    best: Candidate
    phi_Mn: float


def remedies(problem: Problem) -> Iterator[Remedy]:
    """Try single changes, each key from the smallest change on.

    Parameters
    ----------
    problem : Problem
        Problem in which no layout passes.

    Yields
    ------
    Remedy
        For each key the smallest change with which a layout passes.
    """
    for key, before, options in _changes(problem):
        for after, build in options:
            try:
                changed = build()
            except EngineError:
                continue
            ranking = replace(changed.ranking, keep=1, per_pattern=None)
            found = Search(replace(changed, ranking=ranking), confirm=False).run()
            if found.chosen:
                best = found.chosen[0]
                strength = check_layout(changed.section, best.layout).phi_Mn
                yield Remedy(key=key, before=before, after=after, best=best, phi_Mn=strength)
                break


_Option = tuple[str, Callable[[], Problem]]


def _changes(problem: Problem) -> Iterator[tuple[str, str, list[_Option]]]:
    """Single changes worth trying: key, present value, and new values from small to large."""
    section, rules = problem.section, problem.rules
    outline, edition = section.outline, section.edition
    unit = section.length_unit
    metric = edition.units == "si"
    inch = MM_PER_IN if metric else 1.0

    def in_section(**changes: Any) -> Callable[[], Problem]:
        return lambda: replace(problem, section=replace(section, **changes))

    def in_rules(**changes: Any) -> Callable[[], Problem]:
        return lambda: replace(problem, rules=replace(rules, **changes))

    def length(value: float) -> str:
        return f"{plain(value)} {unit}"

    def layers(count: int) -> str:
        return f"{count}"

    more = range(rules.max_layers + 1, _MOST_LAYERS + 1)
    yield (
        "max_layers",
        layers(rules.max_layers),
        [(layers(n), in_rules(max_layers=n)) for n in more],
    )
    if rules.max_sizes == 1:
        yield "max_sizes", "1", [("2", in_rules(max_sizes=2))]
    yield (
        "sizes",
        ", ".join(bar.designation for bar in rules.sizes),
        _wider_sizes(problem, in_rules),
    )

    step = 50.0 if metric else 2.0
    yield (
        "width",
        length(outline.web),
        [
            (
                length(outline.web + n * step),
                _resized(problem, outline.web + n * step, outline.depth),
            )
            for n in range(1, _WIDTH_STEPS + 1)
        ],
    )
    step = 25.0 if metric else 1.0
    yield (
        "depth",
        length(outline.depth),
        [
            (
                length(outline.depth + n * step),
                _resized(problem, outline.web, outline.depth + n * step),
            )
            for n in range(1, _DEPTH_STEPS + 1)
        ],
    )
    yield (
        "cover",
        length(section.cover),
        [(length(cover), in_section(cover=cover)) for cover in _larger_covers(problem)],
    )
    yield (
        "stirrup",
        section.stirrup.designation,
        [(bar.designation, in_section(stirrup=bar)) for bar in _thinner_stirrups(section)],
    )
    stones = (37.5, 25.0, 19.0, 12.5, 9.5) if metric else (1.5, 1.0, 0.75, 0.5, 0.375)
    yield (
        "aggregate",
        length(section.aggregate),
        [
            (length(stone), in_section(aggregate=stone))
            for stone in stones
            if stone < section.aggregate - 0.02 * inch
        ],
    )
    if section.layer_gap > edition.least_gap:
        least = edition.least_gap
        yield "layer_gap", length(section.layer_gap), [(length(least), in_section(layer_gap=least))]
    if section.min_gap > 0.0:
        yield "min_gap", length(section.min_gap), [("none", in_section(min_gap=0.0))]
    if edition.year == 2014 and section.tension_controlled:
        yield "tension_controlled", "true", [("false", in_section(tension_controlled=False))]
    stress = edition.system.trade["stress"]
    step = 5.0 if metric else 1000.0
    yield (
        "fc",
        f"{plain(section.concrete.fc)} {stress}",
        [
            (
                f"{plain(section.concrete.fc + n * step)} {stress}",
                _stronger_concrete(problem, section.concrete.fc + n * step),
            )
            for n in range(1, _STRENGTH_STEPS + 1)
        ],
    )
    yield (
        "steel",
        section.steel.name or f"{plain(section.steel.fy)} {stress}",
        [
            (name, in_section(steel=Steel(edition=edition, fy=fy, name=name)))
            for name, fy in _higher_grades(section)
        ],
    )


def _larger_covers(problem: Problem) -> list[float]:
    """Covers that the table asks for with one size or another, above the present one."""
    section, sizes = problem.section, problem.rules.sizes
    edition, exposure, stirrup = section.edition, section.exposure, section.stirrup.diameter
    least = required_cover(edition, exposure, stirrup)
    covers = {
        max(least, required_cover(edition, exposure, bar.diameter) - stirrup) for bar in sizes
    }
    return sorted(cover for cover in covers if cover > section.cover)


def _resized(problem: Problem, web: float, depth: float) -> Callable[[], Problem]:
    return lambda: resized(problem, web, depth)


def _stronger_concrete(problem: Problem, fc: float) -> Callable[[], Problem]:
    def build() -> Problem:
        # A modulus given for the present concrete does not hold for a stronger one.
        concrete = Concrete(
            edition=problem.section.edition,
            fc=fc,
            lightweight=problem.section.concrete.lightweight,
        )
        return replace(problem, section=replace(problem.section, concrete=concrete))

    return build


def _catalog_of(bar: Bar) -> BarCatalog | None:
    """Built-in catalogue that a bar comes from; None for a user's own table."""
    for name in ("astm-inch", "astm-metric", "csa", "en10080"):
        catalog = bar_catalog(name)
        if catalog.system == bar.system and bar in catalog.bars:
            return catalog
    return None


def _wider_sizes(problem: Problem, in_rules: Callable[..., Callable[[], Problem]]) -> list[_Option]:
    """The permitted sizes with the next larger, or the next smaller, one added."""
    rules: BarRules = problem.rules
    catalog = _catalog_of(rules.sizes[0])
    if catalog is None:
        return []
    options = []
    for position in (rules.sizes[-1].position + 1, rules.sizes[0].position - 1):
        if 0 <= position < len(catalog.bars) and 9.0 < catalog.bars[position].diameter_mm < 45.0:
            added = catalog.bars[position]
            sizes = tuple(sorted((*rules.sizes, added), key=lambda bar: bar.position))
            options.append((f"also {added.designation}", in_rules(sizes=sizes)))
    return options


def _thinner_stirrups(section: Section) -> list[Bar]:
    catalog = _catalog_of(section.stirrup)
    if catalog is None:
        return []
    thinner = [
        bar
        for bar in catalog.bars
        if bar.diameter_mm > 9.0 and bar.diameter < section.stirrup.diameter
    ]
    return list(reversed(thinner))


def _higher_grades(section: Section) -> list[tuple[str, float]]:
    edition = section.edition
    found = {}
    for grade in steel_grades():
        if edition.name in grade.editions and grade.standard.startswith("ASTM A615"):
            fy = grade.yield_strength(edition.units)
            if fy > section.steel.fy:
                found[fy] = grade.name
    return [(found[fy], fy) for fy in sorted(found)]
