"""Options as tables: the whole trade-off set, what changes, what has to be agreed to."""

from __future__ import annotations

from collections.abc import Iterator

from engine import CheckedLayout
from engine.check_row import ratio_of
from engine.units import UnitSystem
from optimizer.changes import unit_of
from optimizer.documents.inputs_table import inputs_table
from optimizer.documents.short_list_table import decimals, finite, tightest_layer
from optimizer.documents.tables import Cell, Column, Table, csv_text
from optimizer.documents.workbook_tables import GENERAL_NOTES, NOTE_COLUMNS, table_of_checks
from optimizer.measures import Measures
from optimizer.options import Option, OptionsResult, SectionOptions
from optimizer.results import RatedLayout
from optimizer.scoring import TERMS
from optimizer.wording import price_notes_of, trade_off_proof_of

_MONEY = "0.00"


def options_tables(result: OptionsResult) -> list[Table]:
    """Make all tables of options.

    Parameters
    ----------
    result : OptionsResult
        Result of a job.

    Returns
    -------
    list of Table
        Trade-off set, differences, points to agree, checks, palette, inputs, notes.
    """
    tables = [
        trade_off_table(result),
        _differences(result),
        _agreement(result),
        table_of_checks(shown for section in result.sections for shown in _shown(section)),
    ]
    if result.palette is not None:
        tables.append(_palette(result))
    return [*tables, inputs_table(result), _notes(result)]


def trade_off_csv(result: OptionsResult) -> str:
    """Write the trade-off set as comma-separated values.

    Parameters
    ----------
    result : OptionsResult
        Result of a job.

    Returns
    -------
    str
        CSV with units in the header.
    """
    return csv_text(trade_off_table(result))


def trade_off_table(result: OptionsResult) -> Table:
    """Make the table of the drawn layouts and of every layout that no other beats.

    Parameters
    ----------
    result : OptionsResult
        Result of a job.

    Returns
    -------
    Table
        One row a layout.
    """
    rows: list[tuple[Cell, ...]] = []
    for section in result.sections:
        rows.append(_row(section, None, section.drawn, section.drawn_measures))
        rows += [_row(section, item, item.rated, item.measures) for item in section.trade_off]
    system, currency = result.job.edition.system, _currency(result)
    return Table(name="Trade-off set", columns=_columns(system, currency), rows=tuple(rows))


def _currency(result: OptionsResult) -> str:
    return "" if result.job.prices is None else result.job.prices.currency


def _columns(system: UnitSystem, currency: str) -> tuple[Column, ...]:
    form, per = decimals(system), "ft" if system.name == "us" else "m"
    mass, area = system.trade["mass_per_length"], system.trade["area"]
    money, carbon = f"{currency}/{per}", f"kgCO2e/{per}"
    bands = [
        Column(name=f"{name}, {band}", unit=unit, number_format=_MONEY, width=10)
        for name, unit in (("placed cost", money), ("carbon", carbon))
        for band in ("low", "typical", "high")
    ]
    return (
        Column(name="section", width=20, wrap=True),
        Column(name="option", number_format="0", width=8),
        Column(name="best at", width=24, wrap=True),
        Column(name="levers", width=24, wrap=True),
        Column(name="layout", width=26, wrap=True),
        Column(name="passes", width=8),
        Column(name="mass", unit=mass, number_format=form.mass, width=9),
        Column(name="number of bars", number_format="0", width=9),
        Column(name="number of sizes", number_format="0", width=9),
        Column(name="number of layers", number_format="0", width=9),
        Column(name="relative labour", unit=mass, number_format=form.mass, width=10),
        Column(name="concrete", unit=area, number_format="0", width=10),
        *bands,
        Column(name="score", unit=mass, number_format=form.mass, width=9),
        *(
            Column(name=f"score, {term}", unit=mass, number_format=form.mass, width=9)
            for term in TERMS
        ),
        Column(name="phi Mn", unit=system.trade["moment"], number_format=form.moment),
        Column(name="use", number_format=form.share, width=7),
        Column(name="eps_t", number_format=form.strain, width=8),
        Column(name="smallest gap over required", number_format=form.ratio, width=11),
    )


def _row(
    section: SectionOptions, option: Option | None, rated: RatedLayout, figures: Measures
) -> tuple[Cell, ...]:
    checked = rated.checked
    system = checked.section.edition.system
    bands: list[Cell] = []
    for band in (figures.cost, figures.carbon):
        bands += [None] * 3 if band is None else [band.low, band.typical, band.high]
    tightest = tightest_layer(checked)
    levers = [] if option is None else [f"{key} {after}" for key, _, after in option.levers]
    return (
        section.section.mark,
        None if option is None else option.number,
        "drawn" if option is None else ", ".join(option.reasons) or None,
        "; ".join(levers) or None,
        checked.layout.label,
        "yes" if checked.ok else "NO",
        figures.mass,
        figures.bars,
        figures.sizes,
        figures.layers,
        figures.labour,
        figures.concrete,
        *bands,
        rated.score.total,
        *(getattr(rated.score, term) for term in TERMS),
        system.to_trade("moment", checked.phi_Mn),
        ratio_of(checked.section.demand, checked.phi_Mn),
        checked.eps_t,
        finite(tightest.gap / tightest.gap_required),
    )


def _shown(section: SectionOptions) -> Iterator[tuple[str, int | None, CheckedLayout]]:
    yield "drawn", None, section.drawn.checked
    for option in section.chosen:
        yield "option", option.number, option.checked


def _differences(result: OptionsResult) -> Table:
    system, currency = result.job.edition.system, _currency(result)
    rows: list[tuple[Cell, ...]] = []
    for section in result.sections:
        for option in section.chosen:
            for row in option.differences:
                drawn, other, change = (
                    None if value is None else system.to_trade(row.kind, value)
                    for value in (row.drawn, row.option, row.change)
                )
                unit = unit_of(row, system, currency) or None
                start = (section.section.mark, option.number, option.checked.layout.label)
                share = None if row.percent is None else row.percent / 100.0
                rows.append((*start, row.name, unit, drawn, other, change, share))
    columns = (
        Column(name="section", width=20, wrap=True),
        Column(name="option", number_format="0", width=8),
        Column(name="layout", width=26, wrap=True),
        Column(name="figure", width=34),
        Column(name="unit", width=12),
        Column(name="drawn", number_format="0.00##", width=12),
        Column(name="of the option", number_format="0.00##", width=12),
        Column(name="change", number_format="+0.00##;-0.00##;0", width=12),
        Column(name="change, share", number_format="+0.0%;-0.0%;0%", width=10),
    )
    return Table(name="Differences", columns=columns, rows=tuple(rows))


def _agreement(result: OptionsResult) -> Table:
    rows = tuple(
        (section.section.mark, option.number, option.checked.layout.label, point)
        for section in result.sections
        for option in section.chosen
        for point in option.accept
    )
    columns = (
        Column(name="section", width=20, wrap=True),
        Column(name="option", number_format="0", width=8),
        Column(name="layout", width=26, wrap=True),
        Column(name="to be agreed by the engineer of record", width=90, wrap=True),
    )
    return Table(name="To be agreed", columns=columns, rows=rows)


def _palette(result: OptionsResult) -> Table:
    palette = result.palette
    assert palette is not None  # asked for only where there is one
    rows: list[tuple[Cell, ...]] = []
    for choice in palette.choices:
        sizes = ", ".join(bar.designation for bar in choice.sizes)
        for mark, candidate in zip(palette.marks, choice.layouts, strict=True):
            values = (choice.total, choice.saving or None)
            rows.append((choice.limit, sizes, *values, mark, candidate.layout.label))
    rows += [(None, None, None, None, mark, "no layout at all") for mark in palette.left_out]
    columns = (
        Column(name="most sizes", number_format="0", width=8),
        Column(name="sizes", width=24, wrap=True),
        Column(name="total, score or mass times length", number_format="0.00", width=14),
        Column(name="saves against one fewer", number_format="0.00", width=12),
        Column(name="section", width=20, wrap=True),
        Column(name="layout", width=26, wrap=True),
    )
    return Table(name="Palette", columns=columns, rows=tuple(rows))


def _notes(result: OptionsResult) -> Table:
    rows: list[tuple[Cell, ...]] = [
        ("job", None, result.job.title or "without a title"),
        ("code", None, result.job.edition.name),
    ]
    rows += [(subject, None, note) for subject, note in GENERAL_NOTES]
    invented = price_notes_of(result)
    if invented:
        rows.append(("prices", None, invented))
    rows += [
        ("proof", section.section.mark, trade_off_proof_of(section)) for section in result.sections
    ]
    return Table(name="Notes", columns=NOTE_COLUMNS, rows=tuple(rows))
