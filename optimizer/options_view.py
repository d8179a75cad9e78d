"""What a person reads of options in the terminal."""

from __future__ import annotations

from rich.text import Text

from engine.units import UnitSystem, plain
from optimizer.changes import Difference, unit_of
from optimizer.measures import Band
from optimizer.options import Option, OptionsResult, SectionOptions
from optimizer.palette import Palette
from optimizer.views import View
from optimizer.wording import price_notes_of, trade_off_proof_of


def show_options(view: View, result: OptionsResult) -> None:
    """Print the options of a job.

    Parameters
    ----------
    view : View
        Where to print.
    result : OptionsResult
        What to print.
    """
    currency = None if result.job.prices is None else result.job.prices.currency
    for section in result.sections:
        _section(view, section, currency)
    if result.palette is not None:
        _palette(view, result)
    invented = price_notes_of(result)
    if invented:
        view.say(invented, "bold")


def _section(view: View, section: SectionOptions, currency: str | None) -> None:
    view.heading(section.problem.section)
    drawn = section.drawn.checked
    failing = [row.id for row in drawn.checks if not row.ok]
    if failing:
        view.say(f"The drawn layout FAILS: {', '.join(failing)}", "bold red")
    else:
        view.say(f"Drawn: {drawn.layout.label}, passes every check")
    if not section.trade_off:
        view.say(trade_off_proof_of(section), "bold")
        view.say()
        return
    view.say()
    system = drawn.section.edition.system
    view.console.print(_choice(view, section, system, currency))
    view.say()
    view.say(trade_off_proof_of(section), "" if section.proved else "bold")
    for option in section.chosen:
        view.say()
        _against_drawn(view, option, system, currency)
    view.say()


def _choice(
    view: View, section: SectionOptions, system: UnitSystem, currency: str | None
) -> object:
    table = view.table()
    table.add_column("#", justify="right", no_wrap=True)
    table.add_column("layout", min_width=10)
    names = ["mass", "bars", "labour", "phiMn", "use"]
    names += ["cost", "kgCO2e"] if currency else []
    for name in names:
        table.add_column(name, justify="right", no_wrap=True)
    table.add_column("best at; levers")
    rows = [("-", section.drawn, section.drawn_measures, "drawn")]
    for option in section.chosen:
        levers = "; ".join(f"{key} {after}" for key, _, after in option.levers)
        text = ", ".join(option.reasons) + (f"; {levers}" if levers else "")
        rows.append((str(option.number), option.rated, option.measures, text))
    for number, rated, figures, text in rows:
        checked = rated.checked
        cells = [
            number,
            "\n".join(layer.label.replace(" + ", "+") for layer in checked.layout.layers),
            f"{figures.mass:.2f}",
            str(figures.bars),
            f"{figures.labour:.2f}",
            f"{system.to_trade('moment', checked.phi_Mn):.1f}",
            f"{100 * checked.section.demand / checked.phi_Mn:.0f}%",
        ]
        if figures.cost is not None and figures.carbon is not None:
            cells += [f"{figures.cost.typical:.2f}", f"{figures.carbon.typical:.1f}"]
        table.add_row(*(Text(cell) for cell in (*cells, text)))
    return table


def _against_drawn(view: View, option: Option, system: UnitSystem, currency: str | None) -> None:
    view.say(f"Option {option.number}: {option.checked.layout.label}", "bold")
    table = view.table()
    table.add_column("against the drawn layout", min_width=32)
    for name in ("drawn", "option", "change", ""):
        table.add_column(name, justify="right", no_wrap=True)
    for row in option.differences:
        if row.drawn is None and row.option is None:
            continue
        change = "" if row.change is None else _figure(row.change, row, system, signed=True)
        percent = "" if row.percent is None else f"{row.percent:+.1f}%"
        unit = unit_of(row, system, currency)
        name = f"{row.name} [{unit}]" if unit else row.name
        cells = (
            name,
            _figure(row.drawn, row, system),
            _figure(row.option, row, system),
            change,
            percent,
        )
        table.add_row(*(Text(cell) for cell in cells))
    view.console.print(table)
    for name, band in (("placed cost", option.measures.cost), ("carbon", option.measures.carbon)):
        if band is not None:
            view.say(f"{name} with low and high factors: {_range(band)}")
    if option.accept:
        view.say("To be agreed by the engineer of record:")
        for point in option.accept:
            view.say(f"- {point}")


def _range(band: Band) -> str:
    return f"{band.low:.2f} to {band.high:.2f}"


def _figure(
    value: float | None, row: Difference, system: UnitSystem, *, signed: bool = False
) -> str:
    if value is None:
        return "none"
    if row.kind == "count":
        return f"{value:+.0f}" if signed else f"{value:.0f}"
    if row.kind in ("money", "carbon", "mass_per_length"):
        return f"{value:+.2f}" if signed else f"{value:.2f}"
    if row.kind == "percent":
        return f"{value:+.1f}" if signed else f"{value:.1f}"
    size = system.to_trade(row.kind, value)
    text = plain(size)
    return f"+{text}" if signed and size > 0 else text


def _palette(view: View, result: OptionsResult) -> None:
    palette: Palette | None = result.palette
    if palette is None:
        return
    view.say("Bar sizes for the whole job", "bold")
    if palette.left_out:
        view.say(f"Left out, having no layout at all: {', '.join(palette.left_out)}")
    if not palette.choices:
        view.say(f"No choice of up to {result.job.palette} sizes serves every section.")
        return
    table = view.table()
    for name, justify in (("sizes", "left"), ("total", "right"), ("saves", "right")):
        table.add_column(name, justify="right" if justify == "right" else "left", no_wrap=True)
    for choice in palette.choices:
        sizes = ", ".join(bar.designation for bar in choice.sizes)
        saving = f"{choice.saving:.2f}" if choice.saving else ""
        table.add_row(*(Text(cell) for cell in (sizes, f"{choice.total:.2f}", saving)))
    view.console.print(table)
    view.say("total: score (or mass) times length over all sections; saves: against one size fewer")
    last = palette.choices[-1]
    for mark, candidate in zip(palette.marks, last.layouts, strict=True):
        view.say(f"  {mark}: {candidate.layout.label}")
    if not palette.proved:
        view.say("NOT PROVED: a work limit stopped a search.", "bold")
    view.say()
