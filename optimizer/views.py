"""What a person reads in the terminal: short list, cross-section, check, diagnosis.

Everything works at 80 columns, without colour and piped into a file: words and places carry
the meaning, styles only repeat it.
"""

from __future__ import annotations

import textwrap

from rich.cells import cell_len
from rich.console import Console
from rich.table import Table
from rich.text import Text

from catalogs import BarCatalog
from engine import Check, CheckedLayout, Section, State
from engine.units import UnitSystem, plain
from optimizer.diagnosis import Diagnosis
from optimizer.drawing import ASCII, UNICODE, draw
from optimizer.results import CheckedSection, RankedSection, RatedLayout
from optimizer.scoring import TERMS
from optimizer.wording import CAUTION, NOT_CHECKED, exemption_of, proof_of

VERDICTS = {
    State.OK: ("ok", ""),
    State.FAILS: ("FAILS", "bold red"),
    State.PROVIDE: ("provide", "bold"),
    State.NOT_APPLICABLE: ("-", "dim"),
}


class View:
    """Prints results to a console.

    Parameters
    ----------
    console : Console
        Where to print.
    plain_text : bool
        Draw with ASCII characters only.
    """

    def __init__(self, console: Console, *, plain_text: bool) -> None:
        self.console = console
        self.plain_text = plain_text
        self.rule = "-" if plain_text else "─"

    def say(self, text: str = "", style: str = "") -> None:
        """Print one paragraph, wrapped, with no mark-up read into it."""
        self.console.print(Text(text, style=style), highlight=False)

    def title(self, title: str, code: str) -> None:
        """Print the head of a report."""
        self.say(f"{title}  ({code})" if title else code, "bold")
        self.say()

    def footer(self, not_checked: str = NOT_CHECKED) -> None:
        """Print what is not checked, and the caution."""
        self.say(not_checked)
        self.say(CAUTION)

    def head_line(self, mark: str) -> None:
        """Print the line that a section or beam starts with."""
        width = min(self.console.width, 80)
        name = f" {mark} "
        self.say(f"{self.rule * 2}{name}{self.rule * max(0, width - cell_len(name) - 2)}", "bold")

    def heading(self, section: Section) -> None:
        """Print what a section is and what is asked of it."""
        self.head_line(section.mark)
        system = section.edition.system
        steel = section.steel.name or "steel"
        unit = system.trade["stress"]
        facts = [
            f"Mu = {self._moment(section.Mu, system, signed=True)}",
            f"f'c {plain(section.concrete.fc)} {unit}",
            f"{steel} fy {plain(section.steel.fy)} {unit}",
            f"aggregate {plain(section.aggregate)} {section.length_unit}",
        ]
        if section.Ms is not None:
            facts.insert(1, f"Ms = {self._moment(section.Ms, system, signed=True)}")
        if section.concrete.lightweight < 1.0:
            facts.append(f"lambda {section.concrete.lightweight:g}")
        self.say(", ".join(facts))
        if section.steel.note:
            self.say(f"{section.steel.name}: {section.steel.note}")

    def _moment(self, value: float, system: UnitSystem, *, signed: bool = False) -> str:
        size = system.to_trade("moment", value)
        return f"{size:+.1f} {system.trade['moment']}" if signed else f"{size:.1f}"

    def ranked(self, result: RankedSection, *, show: int | None, brief: bool) -> None:
        """Print the short list of a section and one check, or the diagnosis."""
        self.heading(result.section)
        if result.diagnosis is not None:
            self._diagnosis(result.section, result.diagnosis, proved=result.proved)
            return
        system = result.section.edition.system
        mass, moment = system.trade["mass_per_length"], system.trade["moment"]
        self.say(
            f"mass, score and its terms in {mass}, phiMn in {moment},"
            " gap: smallest clear gap over required",
            "dim",
        )
        self.say()
        self.console.print(self._short_list(result))
        self.say()
        self._proof(result)
        if brief:
            self.say()
            return
        number = show or 1
        if number > len(result.layouts):
            self.say(f"There is no line {number}: the list has {len(result.layouts)}.", "bold")
            number = 1
        chosen = result.layouts[number - 1]
        self.say()
        self.checked(chosen, f"Line {number}: {chosen.checked.layout.label}")

    def table(self) -> Table:
        """Start a table of this program's look."""
        return Table(box=None, padding=(0, 0, 0, 1), pad_edge=False, header_style="underline")

    def _row_of(self, table: Table, *cells: str) -> None:
        """Add a row whose texts are shown as they are, whatever mark-up they look like."""
        table.add_row(*(Text(cell) for cell in cells))

    def _short_list(self, result: RankedSection) -> Table:
        system = result.section.edition.system
        table = self.table()
        table.add_column("#", justify="right", no_wrap=True)
        table.add_column("layout", min_width=10)
        for name in ("mass", "score", *TERMS, "phiMn", "use", "eps_t", "gap"):
            table.add_column(name, justify="right", no_wrap=True)
        for number, rated in enumerate(result.layouts, 1):
            checked = rated.checked
            tightest = min(layer.gap / layer.gap_required for layer in checked.placement.layers)
            self._row_of(
                table,
                f"{number}+" if rated.rank is None else str(number),
                "\n".join(layer.label.replace(" + ", "+") for layer in checked.layout.layers),
                _fixed(checked.layout.mass, 5),
                _fixed(rated.score.total, 5),
                *(_fixed(getattr(rated.score, term), 4) for term in TERMS),
                _fixed(system.to_trade("moment", checked.phi_Mn), 5),
                f"{100 * result.section.demand / checked.phi_Mn:.0f}%",
                f"{checked.eps_t:.4f}",
                f"{tightest:.2f}",
            )
        return table

    def _proof(self, result: RankedSection) -> None:
        system = result.section.edition.system
        unit = system.trade["mass_per_length"]
        for mark in ("lightest", "fewest bars"):
            best = next((item for item in result.layouts if mark in item.marks), None)
            if best is not None:
                where = f"line {result.layouts.index(best) + 1}"
                self.say(f"{mark} of all: {best.checked.layout.label} ({where})")
        self.say(proof_of(result), "" if result.proved else "bold")
        reliance = exemption_of(result)
        if reliance:
            self.say(reliance)
        if result.mass_floor is not None:
            floor = f"{result.mass_floor:.2f} {unit}"
            self.say(f"Mass floor, for divisible steel at the best depth: {floor}.")

    def checked(self, rated: RatedLayout, title: str) -> None:
        """Print the cross-section of a layout and every row of its check."""
        checked = rated.checked
        self.say(title, "bold")
        for line in draw(checked, ASCII if self.plain_text else UNICODE):
            self.console.print(Text(line), no_wrap=True, crop=False, overflow="ignore")
        self.say(_state_line(checked))
        self.say()
        head = f"{'check':<18} {'clause':<10} {'demand':>14} {'limit':>14} {'use':>5}  verdict"
        self.say(head, "underline")
        for row in checked.checks:
            self._row(row, checked.section.edition.system)
        self.say()

    def _row(self, row: Check, system: UnitSystem) -> None:
        """Print one check: its figures on a line, its note below."""
        word, style = VERDICTS[row.state]
        start = f"{row.id:<18} {row.clause:<10} "
        if row.state is State.NOT_APPLICABLE:
            self.say(f"{start}does not apply: {row.note}", style)
            return
        demand = sized(row.demand, row.quantity, system)
        limit = sized(row.limit, row.quantity, system)
        use = "" if row.ratio is None else f"{100 * row.ratio:.0f}%"
        self.say(f"{start}{demand:>14} {limit:>14} {use:>5}  {word}", style)
        for line in textwrap.wrap(row.note, min(self.console.width, 80) - 19):
            self.say(f"{'':<19}{line}", "dim")

    def checked_section(self, result: CheckedSection) -> None:
        """Print the check of a given layout."""
        self.heading(result.section)
        verdict = "passes every check" if result.layout.checked.ok else "FAILS"
        failing = [row.id for row in result.layout.checked.checks if not row.ok]
        if failing:
            verdict += f": {', '.join(failing)}"
        self.checked(result.layout, f"{result.layout.checked.layout.label}  {verdict}")

    def _diagnosis(self, section: Section, diagnosis: Diagnosis, *, proved: bool) -> None:
        system = section.edition.system
        unit = system.trade["moment"]
        if proved:
            self.say("No layout meets every rule.", "bold")
        else:
            self.say(
                "No layout found, and NOT PROVED that there is none: the work limit stopped the"
                " search. Raise work_limit.",
                "bold",
            )
        blocked = ", ".join(
            f"{block.id} ({block.families} of {block.of})" for block in diagnosis.blocked_by
        )
        if blocked:
            self.say(f"What blocks, in how many combinations of sizes and layers: {blocked}")
        strongest = diagnosis.strongest
        if strongest is None:
            self.say("No layout meets the rules other than strength either.")
        else:
            value = self._moment(strongest.phi_Mn, system)
            share = 100 * strongest.phi_Mn / section.demand
            self.say(
                f"Strongest that fits: {strongest.layout.label}, phi Mn = {value} {unit},"
                f" {share:.0f}% of Mu"
            )
        if not diagnosis.remedies:
            self.say("No single change that was tried makes a layout possible.")
            self.say()
            return
        self.say("Single changes that make a layout possible, each verified by a search:")
        table = self.table()
        mass = system.trade["mass_per_length"]
        for name in ("key", "now", "change to", "best layout then"):
            table.add_column(name)
        for name in (mass, f"phi Mn {unit}"):
            table.add_column(name, justify="right", no_wrap=True)
        for remedy in diagnosis.remedies:
            self._row_of(
                table,
                remedy.key,
                remedy.before,
                remedy.after,
                remedy.best.layout.label,
                f"{remedy.best.mass:.2f}",
                self._moment(remedy.phi_Mn, system),
            )
        self.console.print(table)

    def catalog(self, catalog: BarCatalog) -> None:
        """Print a bar catalogue."""
        metric = catalog.system == "si"
        length, mass = ("mm", "kg/m") if metric else ("in", "lb/ft")
        self.say(catalog.name, "bold")
        table = self.table()
        table.add_column("size", no_wrap=True)
        for name in (f"db [{length}]", f"Ab [{length}^2]", f"mass [{mass}]", "relative labour"):
            table.add_column(name, justify="right", no_wrap=True, min_width=9)
        for bar in catalog.bars:
            self._row_of(
                table,
                bar.designation,
                f"{bar.diameter:g}",
                f"{bar.area:g}",
                f"{bar.mass:g}",
                f"{bar.relative_labour:.2f}",
            )
        self.console.print(table)


def _fixed(value: float, width: int) -> str:
    """A number that fills a column: fewer decimals where it is large."""
    for decimals in (2, 1):
        text = f"{value:.{decimals}f}"
        if len(text) <= width:
            return text
    return f"{value:.0f}"


def sized(value: float | None, quantity: str, system: UnitSystem) -> str:
    """Write a value of a check in the trade's unit of its kind; empty for none."""
    if value is None:
        return ""
    size = system.to_trade(quantity, value)
    unit = system.trade.get(quantity, "")
    number = f"{size:.5f}" if quantity == "strain" else plain(size)
    return f"{number} {unit}".strip()


def _state_line(checked: CheckedLayout) -> str:
    section = checked.section
    system, unit = section.edition.system, section.length_unit
    area = system.trade["area"]
    required = "" if checked.As_required is None else f" ({plain(checked.As_required)} required)"
    moment = system.trade["moment"]
    return (
        f"As = {plain(checked.As)} {area}{required}, d = {plain(checked.d)} {unit},"
        f" dt = {plain(checked.dt)} {unit}, a = {plain(checked.a)} {unit},"
        f" c = {plain(checked.c)} {unit}, eps_t = {checked.eps_t:.5f},"
        f" Mn = {system.to_trade('moment', checked.Mn):.1f} {moment}, phi = {checked.phi:.3f},"
        f" phi Mn = {system.to_trade('moment', checked.phi_Mn):.1f} {moment}"
    )
