"""The short list as a table: one row a layout, of all sections of a result."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import NamedTuple

from engine import CheckedLayout
from engine.check_row import ratio_of
from engine.placement import PlacedLayer
from engine.units import UnitSystem
from optimizer.documents.tables import Cell, Column, Table, csv_text
from optimizer.results import CheckedSection, CheckResult, RankedSection, RankResult, RatedLayout
from optimizer.scoring import TERMS

Result = RankResult | CheckResult
ResultSection = RankedSection | CheckedSection


class Decimals(NamedTuple):
    """Number formats that suit a unit system's sizes."""

    length: str
    area: str
    moment: str = "0.0"
    mass: str = "0.00"
    strain: str = "0.0000"
    share: str = "0%"
    ratio: str = "0.00"


_DECIMALS = {"us": Decimals("0.00", "0.00"), "si": Decimals("0.0", "0")}


def decimals(system: UnitSystem) -> Decimals:
    """Return the number formats of a unit system.

    Parameters
    ----------
    system : UnitSystem
        System of the job.

    Returns
    -------
    Decimals
        Formats by kind of quantity.
    """
    return _DECIMALS[system.name]


def layouts_of(section: ResultSection) -> tuple[RatedLayout, ...]:
    """Return what a section shows: its short list, or the layout given.

    Parameters
    ----------
    section : RankedSection or CheckedSection
        Section of a result.

    Returns
    -------
    tuple of RatedLayout
        Best first; empty where no layout passes.
    """
    return section.layouts if isinstance(section, RankedSection) else (section.layout,)


def tightest_layer(checked: CheckedLayout) -> PlacedLayer:
    """Return the layer that has the least to spare of its required clear gap.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.

    Returns
    -------
    PlacedLayer
        Of equal ones the outermost.
    """
    return min(checked.placement.layers, key=lambda layer: layer.gap / layer.gap_required)


def finite(value: float | None) -> float | None:
    """Return a number, or None for what no cell can hold."""
    return value if value is not None and math.isfinite(value) else None


def short_list_table(result: Result) -> Table:
    """Make the table of all layouts listed.

    Parameters
    ----------
    result : RankResult or CheckResult
        Result of a job.

    Returns
    -------
    Table
        One row a layout; one with empty figures for a section that has none.
    """
    rows = tuple(row for section in result.sections for row in _rows(section))
    return Table(name="Short list", columns=_columns(result.job.edition.system), rows=rows)


def short_list_csv(result: Result) -> str:
    """Write the short list as comma-separated values.

    Parameters
    ----------
    result : RankResult or CheckResult
        Result of a job.

    Returns
    -------
    str
        CSV with units in the header; equal results give equal text.
    """
    return csv_text(short_list_table(result))


def _columns(system: UnitSystem) -> tuple[Column, ...]:
    form = decimals(system)
    mass, area = system.trade["mass_per_length"], system.trade["area"]
    moment, length = system.trade["moment"], system.trade["length"]
    return (
        Column(name="section", width=20, wrap=True),
        Column(name="status", width=10),
        Column(name="proved", width=8),
        Column(name="line", number_format="0", width=6),
        Column(name="layout", width=26, wrap=True),
        Column(name="number of bars", number_format="0", width=9),
        Column(name="number of layers", number_format="0", width=9),
        Column(name="number of sizes", number_format="0", width=9),
        Column(name="mass", unit=mass, number_format=form.mass, width=9),
        Column(name="score", unit=mass, number_format=form.mass, width=9),
        *(
            Column(name=f"score, {term}", unit=mass, number_format=form.mass, width=9)
            for term in TERMS
        ),
        Column(name="As", unit=area, number_format=form.area, width=9),
        Column(name="As required", unit=area, number_format=form.area, width=10),
        Column(name="phi Mn", unit=moment, number_format=form.moment),
        Column(name="Mu", unit=moment, number_format=form.moment),
        Column(name="use", number_format=form.share, width=7),
        Column(name="eps_t", number_format=form.strain, width=8),
        Column(name="smallest gap", unit=length, number_format=form.length),
        Column(name="smallest gap over required", number_format=form.ratio, width=11),
        Column(name="marks", width=16, wrap=True),
    )


def _rows(section: ResultSection) -> Iterator[tuple[Cell, ...]]:
    asked = section.section
    system = asked.edition.system
    mark, Mu = asked.mark, system.to_trade("moment", asked.Mu)
    proved = ("yes" if section.proved else "no") if isinstance(section, RankedSection) else None
    layouts = layouts_of(section)
    if not layouts:
        columns = [column.name for column in _columns(system)]
        known: dict[str, Cell] = {
            "section": mark,
            "status": section.status,
            "proved": proved,
            "Mu": Mu,
        }
        yield tuple(known.get(name) for name in columns)
    for rated in layouts:
        checked = rated.checked
        tightest = tightest_layer(checked)
        yield (
            mark,
            section.status,
            proved,
            rated.rank,
            checked.layout.label,
            checked.layout.count,
            len(checked.layout.layers),
            len(checked.layout.sizes),
            checked.layout.mass,
            rated.score.total,
            *(getattr(rated.score, term) for term in TERMS),
            checked.As,
            finite(checked.As_required),
            system.to_trade("moment", checked.phi_Mn),
            Mu,
            ratio_of(asked.demand, checked.phi_Mn),
            checked.eps_t,
            finite(tightest.gap),
            finite(tightest.gap / tightest.gap_required),
            ", ".join(rated.marks) or None,
        )
