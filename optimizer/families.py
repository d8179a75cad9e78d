"""Families of layouts: largest size, second size and number of layers are fixed.

What is left to choose in a family is counts. Layer 1 always holds the largest size, so
heights of layers and the required gap of layer 1 are known, and all rules become linear in
the counts or get a linear condition that is necessary for them (`optimizer.conditions`).
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from catalogs import Bar
from engine import Section
from engine.assessment import ROUNDING
from engine.crack_control import WITHOUT_ANALYSIS, largest_spacing
from engine.detailing_checks import cover_fits
from optimizer.conditions import (
    SLACK,
    Conditions,
    Envelope,
    ductility,
    minimum_steel,
    strength,
)
from optimizer.problem import BarRules


@dataclass(frozen=True, slots=True, kw_only=True)
class Family:
    """Layouts with the same largest size, second size and number of layers.

    Attributes
    ----------
    bars : tuple of Bar
        The largest size and, if any, the second.
    layers : int
        Number of layers.
    most : tuple of tuple of int
        Most bars of each size in each layer.
    least_first : int
        Least number of bars in layer 1, for crack control.
    conditions : dict of str to Conditions
        Necessary conditions by the id of the check row they belong to.
    """

    bars: tuple[Bar, ...]
    layers: int
    most: tuple[tuple[int, ...], ...]
    least_first: int
    conditions: dict[str, Conditions]

    @property
    def pattern(self) -> tuple[int, int]:
        """Largest size and number of layers: what the variety rule counts."""
        return (self.bars[0].position, self.layers)


@dataclass(frozen=True, slots=True)
class Empty:
    """A family without members, and the rules that leave it none."""

    rules: tuple[str, ...]


def families(shared: Envelope, rules: BarRules) -> list[Family]:
    """All families of a section that are not empty at first sight.

    Parameters
    ----------
    shared : Envelope
        Figures of the section.
    rules : BarRules
        Bars allowed.

    Returns
    -------
    list of Family
        In a fixed order.
    """
    if math.isinf(shared.exempt_area):
        return []  # no steel at any depth is strong enough within the permitted strains
    return [item for item in all_families(shared, rules) if isinstance(item, Family)]


def all_families(shared: Envelope, rules: BarRules) -> list[Family | Empty]:
    """All families of a section, those without members too.

    Parameters
    ----------
    shared : Envelope
        Figures of the section.
    rules : BarRules
        Bars allowed.

    Returns
    -------
    list of Family or Empty
        In a fixed order.
    """
    section = shared.section
    sizes = [bar for bar in rules.sizes if cover_fits(section, bar.diameter)]
    found: list[Family | Empty] = [Empty(("cover",))] * (len(rules.sizes) - len(sizes))
    for largest in sizes:
        steps = range(1, rules.size_steps + 1) if rules.max_sizes > 1 else ()
        seconds = [bar for bar in sizes if largest.position - bar.position in steps]
        for bars in ((largest,), *((largest, second) for second in seconds)):
            found += [family_of(shared, bars, n) for n in range(1, rules.max_layers + 1)]
    return found


def family_of(shared: Envelope, bars: tuple[Bar, ...], layers: int) -> Family | Empty:
    """Set up one family.

    Parameters
    ----------
    shared : Envelope
        Figures of the section.
    bars : tuple of Bar
        Largest and, if any, second size.
    layers : int
        Number of layers.

    Returns
    -------
    Family or Empty
        The family, or the rules that leave it without members.
    """
    section = shared.section
    largest, smallest = bars[0], bars[-1]
    lowest_stack = (layers - 1) * (section.layer_gap + smallest.diameter) + largest.diameter
    if lowest_stack > section.stack_height + ROUNDING:
        return Empty(("arrangement",))
    reach = section.inner_width / 2 - section.corner_offset(largest.diameter)
    if reach <= 0.0:
        return Empty(("clear_gap",))
    least_first = _least_first(section, reach)
    if least_first is None:
        return Empty(("crack_control",))
    widths = _widths(section, bars, layers, reach)
    most = tuple(
        tuple(
            int(widths.bounds[layer] / widths.coefficients[layer, layer, size])
            for size in range(len(bars))
        )
        for layer in range(layers)
    )
    if most[0][0] < 2:
        return Empty(("clear_gap",))
    if max(most[0]) < least_first:
        return Empty(("clear_gap", "crack_control"))
    return Family(
        bars=bars,
        layers=layers,
        most=most,
        least_first=least_first,
        conditions={
            "flexural_strength": strength(shared, bars, layers),
            "net_tensile_strain": ductility(shared, bars, layers),
            "minimum_steel": minimum_steel(shared, bars, layers),
            "clear_gap": widths,
        },
    )


def _least_first(section: Section, reach: float) -> int | None:
    """Least number of bars in layer 1 for crack control; None if no number is enough.

    Without Ms there is one limit s of the spacing. The average spacing is not larger than the
    largest, so (n - 1) s has to cover the distance between the corner bars.
    """
    if section.Ms is not None:
        return 2
    stress = WITHOUT_ANALYSIS * section.steel.fy
    s = largest_spacing(section.edition, stress, section.bar_face)
    if s <= 0.0:
        return None
    return max(2, 1 + math.ceil(2 * reach / s - SLACK))


def _widths(section: Section, bars: tuple[Bar, ...], layers: int, reach: float) -> Conditions:
    """Bars and least gaps fit between the outermost bar surfaces, for each layer.

    Layer 1 holds at least two of the largest size, so one of its equal gaps, and with it all
    of them, must suit that size: its condition is exact. Above, a pair of small bars may stand
    closer and lines of the layer below may be skipped: the condition is necessary only.
    """
    diameters = np.array([bar.diameter for bar in bars])
    coefficients = np.zeros((layers, layers, len(bars)))
    bounds = np.zeros(layers)
    for layer in range(layers):
        gap = section.required_gap(bars[0].diameter if layer == 0 else bars[-1].diameter)
        coefficients[layer, layer] = -(diameters + gap)
        bounds[layer] = -(2 * reach + bars[0].diameter + gap + 1e-6)
    return Conditions(coefficients=coefficients, bounds=bounds)
