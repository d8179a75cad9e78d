"""What may change against a drawn layout, and the variants of a section that follow."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from itertools import product
from typing import TypeVar

import numpy as np

from catalogs import PriceList
from engine import EngineError, Section, Steel
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
        _distinct(section.steel, levers.steels, lambda steel: _traits(steel, rules, prices)),
        _distinct(section.stirrup, levers.stirrups, lambda bar: (bar.diameter,)),
        _distinct(section.outline.web, levers.widths, lambda web: (web,)),
        _distinct(section.outline.depth, levers.depths, lambda depth: (depth,)),
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


def _distinct(
    drawn: _T, others: tuple[_T, ...], traits: Callable[[_T], tuple[float, ...]]
) -> list[_T]:
    """The drawn value, then the others in their order, each once by what tells them apart."""
    found = [drawn]
    for other in others:
        mine = traits(other)
        if not any(np.allclose(mine, traits(known), rtol=1e-6, atol=0.0) for known in found):
            found.append(other)
    return found


def _traits(steel: Steel, rules: BarRules, prices: PriceList | None) -> tuple[float, ...]:
    """Strength and prices: two names for the same of both are one steel."""
    if prices is None:
        return (steel.fy,)
    return (steel.fy, *(prices.steel_price(bar, steel.name) for bar in rules.sizes))


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
        ("width", f"{drawn.outline.web:.6g} {unit}", f"{other.outline.web:.6g} {unit}"),
        ("depth", f"{drawn.outline.depth:.6g} {unit}", f"{other.outline.depth:.6g} {unit}"),
    )
    return tuple((key, before, after) for key, before, after in pairs if before != after)
