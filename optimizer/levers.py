"""What may change against a drawn layout, and the variants of a section that follow."""

from __future__ import annotations

from dataclasses import replace
from itertools import product
from typing import TypeVar

from catalogs import PriceList
from engine import EngineError, Section
from engine.units import plain
from optimizer.flanges import resized
from optimizer.measures import per_bar_aims, section_aims
from optimizer.problem import BarRules, Levers, Problem
from optimizer.tradeoff import Aims, Variant

_T = TypeVar("_T")


def variants(problem: Problem, levers: Levers, prices: PriceList | None) -> list[Variant]:
    """All variants of a section, the drawn one first.

    Parameters
    ----------
    problem : Problem
        Section with a drawn layout.
    levers : Levers
        What may change.
    prices : PriceList or None
        Prices and carbon factors.

    Returns
    -------
    list of Variant
        Every combination of grade, stirrup, width and depth that gives a section.
    """
    section = problem.section
    rules = _rules(problem, levers)
    found = []
    choices = product(
        _first(section.steel, levers.steels),
        _first(section.stirrup, levers.stirrups),
        _first(section.outline.web, levers.widths),
        _first(section.outline.depth, levers.depths),
    )
    for steel, stirrup, web, depth in choices:
        try:
            changed = resized(replace(problem, rules=rules), web, depth)
            other = replace(changed.section, steel=steel, stirrup=stirrup)
        except EngineError:
            continue  # an outline too small for the flange, the cover or the bars opposite
        variant = replace(changed, section=other)
        found.append(
            Variant(
                problem=variant,
                changes=_changes(section, other),
                aims=Aims(
                    per_bar=per_bar_aims(other, prices, envelope=levers.envelope),
                    constant=section_aims(other, prices, envelope=levers.envelope),
                ),
            )
        )
    return found


def _first(drawn: _T, others: tuple[_T, ...]) -> list[_T]:
    """The drawn value, then the others in their order."""
    return [drawn, *(other for other in others if other != drawn)]


def _rules(problem: Problem, levers: Levers) -> BarRules:
    rules, drawn = problem.rules, problem.drawn
    if drawn is None:
        return rules
    if not levers.sizes:
        rules = replace(rules, sizes=tuple(reversed(drawn.sizes)))
    if not levers.layers:
        rules = replace(rules, max_layers=min(rules.max_layers, len(drawn.layers)))
    if not levers.mixing:
        rules = replace(rules, max_sizes=1)
    return rules


def _changes(drawn: Section, other: Section) -> tuple[tuple[str, str, str], ...]:
    unit, stress = drawn.length_unit, drawn.edition.system.trade["stress"]

    def steel(section: Section) -> str:
        return section.steel.name or f"fy {plain(section.steel.fy)} {stress}"

    pairs = (
        ("steel", steel(drawn), steel(other)),
        ("stirrup", drawn.stirrup.designation, other.stirrup.designation),
        ("width", f"{plain(drawn.outline.web)} {unit}", f"{plain(other.outline.web)} {unit}"),
        ("depth", f"{plain(drawn.outline.depth)} {unit}", f"{plain(other.outline.depth)} {unit}"),
    )
    return tuple((key, before, after) for key, before, after in pairs if before != after)
