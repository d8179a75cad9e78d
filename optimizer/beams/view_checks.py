"""The checks of a beam in the terminal: what governs, then every row."""

from __future__ import annotations

import textwrap

from engine.check_row import State
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.design import BeamDesign
from optimizer.beams.figures import governing
from optimizer.beams.words import length_text
from optimizer.views import VERDICTS, View, sized

_INDENT = 21
_DEMAND_ENDS = 46  # column


def show_checks(view: View, design: BeamDesign, *, brief: bool) -> None:
    """Print the checks of a design.

    Parameters
    ----------
    view : View
        Where to print.
    design : BeamDesign
        Design.
    brief : bool
        Whether only the rows that govern are printed.
    """
    failing = [row for row in design.checks if not row.ok]
    if failing:
        places = dict.fromkeys(f"{row.id} ({row.where})" for row in failing)
        view.say(f"FAILS: {', '.join(places)}", "bold red")
    else:
        view.say(f"Passes every check, {len(design.checks)} rows.", "bold")
    view.say()
    _rows(view, design, governing(design.checks), "Of each kind the row that governs")
    if not brief:
        _rows(view, design, list(design.checks), "All rows")


def _rows(view: View, design: BeamDesign, rows: list[BeamCheck], title: str) -> None:
    view.say(title, "bold")
    head = f"{'check':<20} {'clause':<10} {'demand':>14} {'limit':>14} {'use':>5}  verdict"
    view.say(head, "underline")
    for row in rows:
        _row(view, design, row)
    view.say()


def _row(view: View, design: BeamDesign, row: BeamCheck) -> None:
    word, style = VERDICTS[row.state]
    start = f"{row.id:<20} {row.clause:<10}"
    where = row.where
    if row.at is not None:
        where += f" at {length_text(design.edition, row.at)}"
    if row.state is State.NOT_APPLICABLE:
        _fold(view, f"{start} does not apply: {where}: {row.note}", style)
        return
    system = design.edition.system
    demand = sized(row.demand, row.quantity, system)
    limit = sized(row.limit, row.quantity, system)
    use = "" if row.ratio is None else f"{100 * row.ratio:.0f}%"
    # A long name takes its room from the blanks before the demand.
    room = max(0, _DEMAND_ENDS - len(start) - 1)
    view.say(f"{start} {demand:>{room}} {limit:>14} {use:>5}  {word}", style)
    note = f"{where}; {row.note}" if row.note else where
    for line in textwrap.wrap(note, min(view.console.width, 80) - _INDENT):
        view.say(f"{'':<{_INDENT}}{line}", "dim")


def _fold(view: View, text: str, style: str) -> None:
    width = min(view.console.width, 80)
    for line in textwrap.wrap(text, width, subsequent_indent=" " * _INDENT):
        view.say(line, style)
