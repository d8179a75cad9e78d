"""The answer to a change of a beam as tables of texts."""

from __future__ import annotations

from collections.abc import Sequence

from engine import Edition
from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.positions import DrawnBars, DrawnBeam, drawn
from optimizer.beams.respan import Difference, Respan, Step, Verdict, differences
from optimizer.beams.words import length_text, mass_unit, proof_text, value_text
from optimizer.errors import JobError
from optimizer.job_messages import quoted, short
from optimizer.sections_report import governing_row, row_text
from optimizer.text_tables import Block, Paragraph, TextTable

KINDS = {
    "stays": "Stays",
    "length": "Changes length",
    "shape": "Changes shape",
    "spacing": "Changes spacing",
    "count": "Changes count",
    "size": "Changes size",
    "appears": "Appears",
    "vanishes": "Vanishes",
}
"""Groups of the mark-up table, in the order of a list that goes from little to much."""
LENGTHS_FOLLOW = (
    "A position stays if its layout and the bars that run on stay (stirrups: size, legs, spacings"
    " and end zones). Lengths, ends of bars and the number of stirrups follow from spans and"
    " moments by the rules also where a position stays."
)
LEAST, BEST = "least", "best"


def check_choice(text: str) -> str | int:
    """Read which design of the frontier is wanted.

    Parameters
    ----------
    text : str
        ``least``, ``best`` or a number of changes.

    Returns
    -------
    str or int
        The same, a number as such.

    Raises
    ------
    JobError
        If it is none of them.
    """
    if text in (LEAST, BEST):
        return text
    if text.isascii() and text.isdigit() and len(text) < 6:
        return int(text)
    msg = f"--design: got {short(quoted(text))}; allowed: least, best, or a number of changes"
    raise JobError(msg)


def chosen_step(result: Respan, choice: str | int) -> Step | None:
    """The step of the frontier that is asked for.

    Parameters
    ----------
    result : Respan
        Answer.
    choice : str or int
        ``least``, ``best`` (with locked positions as they are), or most changes.

    Returns
    -------
    Step or None
        None if there is no beam of that kind.
    """
    found = [step for step in result.steps if step.design is not None]
    if isinstance(choice, int):
        found = [step for step in found if step.changes <= choice]
    if not found:
        return None
    return found[0] if choice == LEAST else found[-1]


def respan_blocks(result: Respan, choice: str | int) -> list[Block]:
    """Everything that is told before the design itself.

    Parameters
    ----------
    result : Respan
        Answer.
    choice : str or int
        Which step the differences are those of.

    Returns
    -------
    list of TextTable or Paragraph
        Verdicts, frontier, best beam, differences.
    """
    blocks: list[Block] = [_verdicts(result), _as_a_whole(result)]
    if result.steps:
        blocks.append(_frontier(result))
    blocks += _best(result)
    step = chosen_step(result, choice)
    if step is None or step.design is None:
        blocks.append(Paragraph(text=_none_chosen(result, choice), strong=True))
        return blocks
    return [*blocks, *difference_blocks(result.old, step)]


def _verdicts(result: Respan) -> TextTable:
    return TextTable(
        title="The beam as drawn under the new demands, position by position",
        columns=("position", "as drawn", "*can stay", "governs or fails"),
        rows=tuple(_verdict(item, result) for item in result.verdicts),
    )


def _verdict(item: Verdict, result: Respan) -> tuple[str, ...]:
    edition = result.problem.edition
    answer = "yes" if item.works else "NO"
    if item.position in result.locked:
        answer += ", locked"
    row = governing_row(item.rows)
    told = "" if row is None else row_text(row, edition)
    failing = [other.id for other in item.rows if not other.ok and row and other.id != row.id]
    if failing:
        told += f"; also {', '.join(dict.fromkeys(failing))}"
    if not item.works and (row is None or row.ok):
        told = f"{item.why} ({told})" if told else item.why
    return item.position, item.before, answer, told


def _as_a_whole(result: Respan) -> Paragraph:
    whole = bool(result.steps) and result.steps[0].design is not None
    if whole:
        return Paragraph(text=f"All positions can stay together. {LENGTHS_FOLLOW}")
    failing = sum(not item.works for item in result.verdicts)
    if failing:
        some = "1 position cannot" if failing == 1 else f"{failing} positions cannot"
        text = f"{some} stay."
    else:
        text = "Each position could stay alone, but they cannot all stay together."
    return Paragraph(text=f"{text} {LENGTHS_FOLLOW}")


def _frontier(result: Respan) -> TextTable:
    unit = mass_unit(result.problem.edition)
    lightest = result.problem.ranking.by == "lightest"
    rows: list[tuple[str, ...]] = []
    before: Step | None = None
    for step in result.steps:
        proved = "yes" if step.proved else "NO"
        if step.design is None:
            rows.append((str(step.changes), "none", "", "", proved, "no beam serves"))
            continue
        saved = "" if before is None or before.design is None else (
            f"{before.design.cost - step.design.cost:.1f}"
        )  # fmt: skip
        rows.append(
            (
                str(step.changes),
                f"{step.design.cost:.1f}",
                f"{step.design.schedule.mass:.1f}",
                saved,
                proved,
                changed_text(step.changed),
            )
        )
        before = step
    columns: tuple[str, ...] = (">changes", ">index", ">mass", ">saved", "*proved", "what changes")
    if lightest:
        rows = [(row[0], *row[2:]) if row[1] != "none" else (row[0], "none", *row[3:])
                for row in rows]  # fmt: skip
        columns = (columns[0], *columns[2:])
    what = "mass" if lightest else "placed index and mass"
    return TextTable(
        title=f"Least change: for each number of changes the best beam, {what} [{unit}]",
        columns=columns,
        rows=tuple(rows),
    )


def changed_text(changed: Sequence[str]) -> str:
    """Names of positions in one line."""
    return ", ".join(changed) or "nothing"


def _best(result: Respan) -> list[Block]:
    best = result.best
    if isinstance(best, NoDesign):
        text = (
            "From scratch: no beam meets every rule."
            if best.proved
            else "From scratch: no beam found, and NOT PROVED that there is none. Raise work_limit."
        )
        reasons = [Paragraph(text=f"- {reason}") for reason in best.reasons]
        return [Paragraph(text=text, strong=True), *reasons]
    unit = mass_unit(best.edition)
    text = f"Best from scratch: {value_text(result.problem)} {best.cost:.1f} {unit}"
    if result.problem.ranking.by != "lightest":
        text += f", mass {best.schedule.mass:.1f} {unit}"
    return [Paragraph(text=f"{text}. {proof_text(best)}", strong=not best.proved)]


def _none_chosen(result: Respan, choice: str | int) -> str:
    least = result.least
    if least is not None and isinstance(choice, int):
        some = "no change" if choice == 0 else f"{choice} change{'s' if choice > 1 else ''}"
        return f"No beam serves with {some}; the least is {least.changes}."
    locked = f" with {', '.join(result.locked)} locked" if result.locked else ""
    return f"No beam serves{locked}: there is no design to draw."


def difference_blocks(old: DrawnBeam, step: Step) -> list[Block]:
    """What to mark up on a drawing for one step of the frontier.

    Parameters
    ----------
    old : DrawnBeam
        Beam as drawn.
    step : Step
        Step that has a design.

    Returns
    -------
    list of TextTable or Paragraph
        States of the positions that change, then bars by what becomes of them.
    """
    assert step.design is not None  # the caller has chosen one
    edition, new = step.design.edition, drawn(step.design)
    count = len(step.changed)
    changes = f"{count} position{'' if count == 1 else 's'} changed" if count else "nothing changed"
    blocks: list[Block] = [Paragraph(text=f"To mark up on the drawing: {changes}.", strong=True)]
    if step.changed:
        blocks.append(
            TextTable(
                title="Positions that change",
                columns=("position", "was", "is now"),
                rows=tuple((name, _label(old, name), _label(new, name)) for name in step.changed),
            )
        )
    found = differences(old, new)
    blocks += [
        _group(kind, [item for item in found if item.what == kind], edition)
        for kind in KINDS
        if any(item.what == kind for item in found)
    ]
    return blocks


def _label(beam: DrawnBeam, name: str) -> str:
    state = beam.positions.get(name)
    return "not there" if state is None else state.label


def _group(kind: str, items: Sequence[Difference], edition: Edition) -> TextTable:
    if kind == "stays":
        columns: tuple[str, ...] = ("position", "*was", "*is now", ">bars", "*size", ">length")
        rows = [
            (item.position, *_marks(item), *_bars(item.after or item.before, edition)[1:])
            for item in items
        ]
    elif kind in ("appears", "vanishes"):
        columns = ("position", "*mark", ">bars", "*size", ">length", "shape")
        rows = []
        for item in items:
            bars = item.after or item.before
            shape = "" if bars is None else bars.shape
            rows.append((item.position, *_bars(bars, edition), shape))
    else:
        columns = ("position", "*was", ">bars", "*size", ">length",
                   "*is now", ">bars", "*size", ">length")  # fmt: skip
        if kind == "shape":
            columns = (*columns[:5], "shape", *columns[5:], "shape")
        rows = [_change(kind, item, edition) for item in items]
    return TextTable(title=KINDS[kind], columns=columns, rows=tuple(rows))


def _change(kind: str, item: Difference, edition: Edition) -> tuple[str, ...]:
    before, after = _bars(item.before, edition), _bars(item.after, edition)
    if kind == "shape":
        before = (*before, "" if item.before is None else item.before.shape)
        after = (*after, "" if item.after is None else item.after.shape)
    return (item.position, *before, *after)


def _marks(item: Difference) -> tuple[str, str]:
    before, after = item.before, item.after
    return ("" if before is None else before.mark, "" if after is None else after.mark)


def _bars(bars: DrawnBars | None, edition: Edition) -> tuple[str, ...]:
    if bars is None:
        return ("",) * 4
    return bars.mark, str(bars.count), bars.size, length_text(edition, bars.length)


def design_of(step: Step | None) -> BeamDesign | None:
    """Design of a step, where there is one."""
    return None if step is None else step.design
