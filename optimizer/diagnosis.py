"""What to say when no layout passes: how close it gets, what blocks, and what would help."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from catalogs import Bar, BarCatalog, bar_catalog, steel_grades
from engine import (
    Batch,
    CheckedLayout,
    Concrete,
    EngineError,
    Flange,
    Outline,
    Section,
    Steel,
    assess,
    check_layout,
    place,
)
from engine.assessment import ROUNDING, service_stress
from engine.cover import required_cover
from engine.crack_control import largest_spacing
from engine.detailing_checks import opposite_bars
from engine.units import plain
from optimizer.candidates import Candidate
from optimizer.conditions import envelope
from optimizer.families import Empty, Family, all_families, family_of
from optimizer.model import blocking_rules, enumerate_family
from optimizer.problem import MM_PER_IN, BarRules, Problem
from optimizer.search import Search, layout_of, one_size_counts
from optimizer.totals import possible_totals

_WEAKEST = 1e-3  # share of Mu from which the strongest layout is looked for
_ROUND = 64  # layouts listed at a time while looking for the strongest
_REJECTED_SHOWN = 40  # layouts checked in full to see why the engine rejects them
_MOST_LAYERS = 4
_WIDTH_STEPS, _DEPTH_STEPS, _STRENGTH_STEPS = 6, 12, 4


@dataclass(frozen=True, slots=True, kw_only=True)
class Block:
    """A rule that leaves layouts out.

    Attributes
    ----------
    id : str
        Check row.
    families : int
        Families of layouts (largest size, second size, layers) in which it takes part.
    of : int
        Number of all families.
    """

    id: str
    families: int
    of: int


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


@dataclass(frozen=True, slots=True, kw_only=True)
class Diagnosis:
    """Why a section has no layout.

    Attributes
    ----------
    strongest : CheckedLayout or None
        Layout of greatest design strength among those that meet every other rule.
    blocked_by : tuple of Block
        Rules that together leave nothing, the most frequent first.
    remedies : tuple of Remedy
        Single changes that help.
    """

    strongest: CheckedLayout | None
    blocked_by: tuple[Block, ...]
    remedies: tuple[Remedy, ...]


def diagnose(problem: Problem) -> Diagnosis:
    """Explain a section in which no layout passes.

    Parameters
    ----------
    problem : Problem
        Problem whose search found nothing.

    Returns
    -------
    Diagnosis
        Strongest layout, blocking rules and remedies.
    """
    return Diagnosis(
        strongest=_strongest(problem),
        blocked_by=_blocked_by(problem),
        remedies=tuple(_remedies(problem)),
    )


def _blocked_by(problem: Problem) -> tuple[Block, ...]:
    section, work = problem.section, problem.ranking.work_limit
    if not opposite_bars(section).ok:
        return (Block(id="opposite_bars", families=1, of=1),)
    found: Counter[str] = Counter()
    everything = all_families(envelope(section), problem.rules)
    for item in everything:
        if isinstance(item, Empty):
            found.update(item.rules)
            continue
        rules = blocking_rules(item, work)
        found.update(rules or _rejecting_rules(section, item, work))
    return tuple(
        Block(id=rule, families=count, of=len(everything)) for rule, count in found.most_common()
    )


def _rejecting_rules(section: Section, family: Family, work: float) -> set[str]:
    """Rules by which the engine rejects counts that the necessary conditions leave in."""
    listed = enumerate_family(family, (), work, stop_after=_REJECTED_SHOWN)
    rules: set[str] = set()
    for counts in listed.counts:
        checks = check_layout(section, layout_of(family, counts)).checks
        rules |= {check.id for check in checks if not check.ok}
    return rules


def _strongest(problem: Problem) -> CheckedLayout | None:
    """Layout of greatest phi Mn that meets every rule but the strength itself.

    The search is for layouts stronger than the best so far: its strength is set as the
    demand, the solver lists a few layouts, the engine picks the strongest, and so on until
    a family has none left.
    """
    section, work = problem.section, problem.ranking.work_limit
    best: tuple[float, Family, np.ndarray[tuple[int, ...], np.dtype[np.int64]]] | None = None

    def improve(family: Family, counts: np.ndarray[tuple[int, ...], np.dtype[np.int64]]) -> bool:
        nonlocal best
        if not len(counts):
            return False
        batch = Batch(bars=family.bars, counts=counts)
        found = assess(section, batch)
        # Layouts weaker than Mu cannot use the exemption of 9.6.1.3: it asks for more than Mu.
        sound = found.ductile & found.stack_fits & (found.As >= found.As_min * (1 - ROUNDING))
        s = largest_spacing(section.edition, service_stress(section, batch), section.bar_face)
        for row in np.argsort(-found.phi_Mn, kind="stable"):
            value = float(found.phi_Mn[row])
            if best is not None and value <= best[0] * (1 + ROUNDING):
                return False
            if not sound[row]:
                continue
            placement = place(section, layout_of(family, counts[row]))
            if placement.gaps_fit and placement.layers[0].spacing <= s[row] * (1 + ROUNDING):
                best = (value, family, counts[row])
                return True
        return False

    def stronger(value: float) -> Section:
        # The demand enters the conditions on strength and minimum steel only; the latter's
        # exemption asks for less at a lower demand, so nothing is lost.
        return replace(section, Mu=value if section.sagging else -value, Ms=None)

    shared = envelope(section)
    members = [item for item in all_families(shared, problem.rules) if isinstance(item, Family)]
    for family in members:
        if len(family.bars) == 1:
            improve(family, one_size_counts(family)[:, :, None])
    for member in members:
        limit = _ROUND
        while True:
            target = section.demand * _WEAKEST if best is None else best[0]
            raised = family_of(envelope(stronger(target)), member.bars, member.layers)
            if isinstance(raised, Empty) or not len(possible_totals(raised).counts):
                break
            listed = enumerate_family(raised, (), work, stop_after=limit)
            if not improve(raised, listed.counts):
                if listed.complete:
                    break
                limit *= 4
    if best is None:
        return None
    return check_layout(section, layout_of(best[1], best[2]))


def _remedies(problem: Problem) -> Iterator[Remedy]:
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
                in_section(outline=_resized(outline, n * step, 0.0)),
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
                in_section(outline=_resized(outline, 0.0, n * step)),
            )
            for n in range(1, _DEPTH_STEPS + 1)
        ],
    )
    needed = required_cover(edition, section.exposure, rules.sizes[-1].diameter)
    if needed > section.cover:
        yield "cover", length(section.cover), [(length(needed), in_section(cover=needed))]
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


def _resized(outline: Outline, wider: float, deeper: float) -> Outline:
    """A web that grows with its overhangs unchanged."""

    def grown(flange: Flange | None) -> Flange | None:
        return None if flange is None else replace(flange, width=flange.width + wider)

    return Outline(
        web=outline.web + wider,
        depth=outline.depth + deeper,
        top=grown(outline.top),
        bottom=grown(outline.bottom),
    )


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
