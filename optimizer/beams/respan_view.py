"""What a person reads in the terminal after a change of a beam or of sections."""

from __future__ import annotations

from collections.abc import Sequence

from rich.text import Text

from optimizer.beams.respan import Respan
from optimizer.beams.respan_report import chosen_step, respan_blocks
from optimizer.beams.sweep import Sweep
from optimizer.beams.sweep_report import sweep_bars, sweep_blocks
from optimizer.beams.view import show_beam, show_schedule
from optimizer.beams.words import NOT_CHECKED
from optimizer.respan_sections import SectionsRespan
from optimizer.sections_report import sections_blocks
from optimizer.text_tables import Block, TextTable
from optimizer.views import View


def show_respan(view: View, result: Respan, choice: str | int, *, brief: bool) -> None:
    """Print the answer to a change of a beam.

    Parameters
    ----------
    view : View
        Where to print.
    result : Respan
        What to print.
    choice : str or int
        Design of the frontier to print: least, best, or most changes.
    brief : bool
        Whether of the design only schedule and stirrups are printed.
    """
    view.head_line(f"{result.problem.mark} after the change")
    _blocks(view, respan_blocks(result, choice))
    step = chosen_step(result, choice)
    if step is None or step.design is None:
        view.footer(NOT_CHECKED)
    elif brief:
        show_schedule(view, step.design)
        _failures(view, [row.id for row in step.design.checks if not row.ok])
        view.footer(NOT_CHECKED)
    else:
        show_beam(view, step.design, brief=True)


def show_sweep(view: View, result: Sweep) -> None:
    """Print a beam over a range of one span.

    Parameters
    ----------
    view : View
        Where to print.
    result : Sweep
        What to print.
    """
    problem = result.points[0].result.problem
    view.head_line(f"{problem.mark} over the length of {result.span}")
    table, *rest = sweep_blocks(result)
    _blocks(view, [table])
    for line in sweep_bars(result, plain_text=view.plain_text):
        view.console.print(Text(line), no_wrap=True, crop=False, overflow="ignore")
    _blocks(view, rest)
    view.footer(NOT_CHECKED)


def show_sections(view: View, result: SectionsRespan, choice: str | int) -> None:
    """Print the answer to a change of sections.

    Parameters
    ----------
    view : View
        Where to print.
    result : SectionsRespan
        What to print.
    choice : str or int
        Step of the frontier to print: least, best, or most changes.
    """
    _blocks(view, sections_blocks(result, choice))
    view.footer()


def _blocks(view: View, blocks: Sequence[Block]) -> None:
    for block in blocks:
        if isinstance(block, TextTable):
            _table(view, block)
        else:
            view.say(block.text, "bold" if block.strong else "")
        view.say()


def _table(view: View, table: TextTable) -> None:
    view.say(table.title, "bold")
    shown = view.table()
    for number, name in enumerate(table.names):
        shown.add_column(
            name,
            justify="right" if table.is_number(number) else "left",
            no_wrap=table.is_whole(number),
        )
    for row in table.rows:
        shown.add_row(*(Text(cell) for cell in row))
    view.console.print(shown)


def _failures(view: View, failing: Sequence[str]) -> None:
    if failing:
        view.say(f"FAILS: {', '.join(dict.fromkeys(failing))}", "bold red")
    else:
        view.say("The design passes every check.", "bold")
    view.say()
