"""What a layout weighs, takes to place, costs and emits; the aims of the trade-off.

Money and carbon come with the band that low and high fixing hours and carbon factors give.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cache
from typing import Literal

from catalogs import Bar, PriceList
from engine import Layout, Section

_IN2_PER_FT2, _IN2_FT_PER_YD3 = 144.0, 144.0 * 27.0
_MM2_PER_M2, _MM_PER_M, _IN_PER_FT = 1e6, 1000.0, 12.0
_FT_M3 = 0.3048**3  # [m^3 in a cubic foot]


BandName = Literal["low", "typical", "high"]


@dataclass(frozen=True, slots=True)
class Band:
    """A figure with the range that its uncertain factors give."""

    low: float
    typical: float
    high: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Measures:
    """Figures of a layout in its section, per length of beam [ft or m].

    Attributes
    ----------
    mass : float
        Steel mass. [lb/ft or kg/m]
    bars, sizes, layers : int
        Pieces, sizes and layers. [-]
    labour : float
        Relative fixing labour: mass times the ratio of each size. [lb/ft or kg/m]
    concrete : float
        Gross concrete area. [in^2 or mm^2]
    cost : Band or None
        Bars placed, concrete and formwork. [currency/ft or /m]
    carbon : Band or None
        Of bars and concrete. [kgCO2e/ft or /m]
    """

    mass: float
    bars: int
    sizes: int
    layers: int
    labour: float
    concrete: float
    cost: Band | None
    carbon: Band | None


BANDS: tuple[BandName, ...] = ("low", "typical", "high")


def per_bar_aims(
    section: Section, prices: PriceList | None, *, envelope: bool = False
) -> Callable[[Bar], tuple[float, ...]]:
    """What one bar of a size adds to mass, bars, labour, and with prices to cost and carbon.

    Parameters
    ----------
    section : Section
        Section whose grade the bars have.
    prices : PriceList or None
        Prices and carbon factors.
    envelope : bool
        Whether the outline may change: without prices its concrete is an aim of its own then, to
        which bars add nothing.

    Returns
    -------
    callable
        From a size to its values.
    """
    grade = section.steel.name

    @cache  # every family of a variant asks for the same few sizes
    def aims(bar: Bar) -> tuple[float, ...]:
        plain = (bar.mass, 1.0, bar.mass * bar.relative_labour)
        if prices is None:
            return (*plain, 0.0) if envelope else plain
        return (
            *plain,
            prices.placed_cost_per_length(bar, grade, "typical"),
            prices.steel_carbon_per_length(bar, "typical"),
        )

    return aims


def section_aims(
    section: Section, prices: PriceList | None, *, envelope: bool
) -> tuple[float, ...]:
    """What the section itself adds to the same aims.

    Parameters
    ----------
    section : Section
        Section.
    prices : PriceList or None
        Prices and carbon factors.
    envelope : bool
        Whether the outline may change: without prices its concrete is an aim of its own then.

    Returns
    -------
    tuple of float
        Values in the order of `per_bar_aims`; the concrete area last if it is an aim.
    """
    base = (0.0, 0.0, 0.0)
    if prices is not None:
        return (
            *base,
            _section_cost(section, prices),
            _concrete_volume(section) * prices.concrete_carbon_per_volume("typical"),
        )
    return (*base, section.outline.area) if envelope else base


def measure(section: Section, layout: Layout, prices: PriceList | None) -> Measures:
    """Measure one layout in its section.

    Parameters
    ----------
    section : Section
        Section.
    layout : Layout
        Bars.
    prices : PriceList or None
        Prices and carbon factors.

    Returns
    -------
    Measures
        All figures.
    """
    groups = [group for layer in layout.layers for group in layer.groups]
    cost = carbon = None
    if prices is not None:
        grade, own = section.steel.name, _section_cost(section, prices)
        volume = _concrete_volume(section)
        cost = Band(
            *(
                own + sum(n * prices.placed_cost_per_length(bar, grade, band) for bar, n in groups)
                for band in BANDS
            )
        )
        carbon = Band(
            *(
                volume * prices.concrete_carbon_per_volume(band)
                + sum(n * prices.steel_carbon_per_length(bar, band) for bar, n in groups)
                for band in BANDS
            )
        )
    return Measures(
        mass=layout.mass,
        bars=layout.count,
        sizes=len(layout.sizes),
        layers=len(layout.layers),
        labour=sum(count * bar.mass * bar.relative_labour for bar, count in groups),
        concrete=section.outline.area,
        cost=cost,
        carbon=carbon,
    )


def _concrete_volume(section: Section) -> float:
    """Gross concrete per length of beam. [m^3/ft or m^3/m]"""
    if section.edition.units == "us":
        return section.outline.area / _IN2_PER_FT2 * _FT_M3
    return section.outline.area / _MM2_PER_M2


def _section_cost(section: Section, prices: PriceList) -> float:
    """Concrete and formwork per length of beam: soffit and sides below a top flange.

    [currency/ft or /m]
    """
    outline = section.outline
    slab = 0.0 if outline.top is None else outline.top.thickness
    contact = outline.web + 2.0 * (outline.depth - slab)
    if section.edition.units == "us":
        concrete = outline.area / _IN2_FT_PER_YD3
        return concrete * prices.concrete_price + contact / _IN_PER_FT * prices.formwork_price
    concrete = outline.area / _MM2_PER_M2
    return concrete * prices.concrete_price + contact / _MM_PER_M * prices.formwork_price
