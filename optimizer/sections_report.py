"""The answer to a change of a job of sections as tables of texts."""

from __future__ import annotations

from collections.abc import Sequence

from engine import Edition, Layout
from engine.check_row import Check
from optimizer.respan_sections import SectionsRespan, SectionStep, SectionVerdict
from optimizer.text_tables import Block, Paragraph, TextTable
from optimizer.views import sized

_OF_GEOMETRY = ("cover", "clear_gap", "layer_gap", "arrangement")


def chosen_section_step(result: SectionsRespan, choice: str | int) -> SectionStep | None:
    """The step of the frontier that is asked for.

    Parameters
    ----------
    result : SectionsRespan
        Answer.
    choice : str or int
        ``least``, ``best`` (with locked sections as they are), or most changes.

    Returns
    -------
    SectionStep or None
        None if there is none.
    """
    found = [step for step in result.steps if step.possible]
    if isinstance(choice, int):
        found = [step for step in found if step.changes <= choice]
    if not found:
        return None
    return found[0] if choice == "least" else found[-1]


def layers_after(result: SectionsRespan, step: SectionStep) -> dict[str, list[str]]:
    """Layers of every section after a step.

    Parameters
    ----------
    result : SectionsRespan
        Answer.
    step : SectionStep
        A possible step of it.

    Returns
    -------
    dict of str to list of str
        Layers by mark.
    """
    return {
        item.mark: [layer.label for layer in layout.layers]
        for item in result.verdicts
        if (layout := _layout_after(item, step)) is not None
    }


def _layout_after(item: SectionVerdict, step: SectionStep) -> Layout | None:
    if item.mark in step.changed:
        return item.ranked.layouts[0].checked.layout
    return None if item.checked is None else item.checked.layout


def sections_blocks(result: SectionsRespan, choice: str | int) -> list[Block]:
    """Everything that is told of a job of sections after a change.

    Parameters
    ----------
    result : SectionsRespan
        Answer.
    choice : str or int
        Which step the differences are those of.

    Returns
    -------
    list of TextTable or Paragraph
        Verdicts, frontier, differences.
    """
    edition = result.job.edition
    blocks: list[Block] = [_verdicts(result, edition)]
    blocks += _without_layout(result)
    if result.gone:
        blocks.append(Paragraph(text=f"No longer in the job: {', '.join(result.gone)}."))
    blocks += [_frontier(result, edition), _proof(result)]
    step = chosen_section_step(result, choice)
    if step is None:
        blocks.append(Paragraph(text=_none_chosen(result, choice), strong=True))
        return blocks
    return [*blocks, _differences(result, step, edition)]


def _verdicts(result: SectionsRespan, edition: Edition) -> TextTable:
    unit = edition.system.trade["mass_per_length"]
    return TextTable(
        title=f"The layouts as drawn under the new demands, masses [{unit}]",
        columns=("section", "as drawn", "*can stay", "governs or fails", ">mass", "best", ">mass"),
        rows=tuple(_verdict(item, result, edition) for item in result.verdicts),
    )


def _verdict(item: SectionVerdict, result: SectionsRespan, edition: Edition) -> tuple[str, ...]:
    answer = "yes" if item.works else "NO"
    if item.mark in result.locked:
        answer += ", locked"
    told, mass = "no layout was drawn", ""
    if item.checked is not None:
        row = governing_row(item.checked.checks)
        told = "" if row is None else row_text(row, edition)
        failing = [
            other.id for other in item.checked.checks if not other.ok and row and other.id != row.id
        ]
        if failing:
            told += f"; also {', '.join(failing)}"
        mass = f"{item.checked.layout.mass:.2f}"
    best = item.ranked.layouts[0].checked.layout if item.ranked.layouts else None
    return (
        item.mark,
        item.before or "nothing",
        answer,
        told,
        mass,
        "none" if best is None else best.label,
        "" if best is None else f"{best.mass:.2f}",
    )


def governing_row(checks: Sequence[Check]) -> Check | None:
    """Of the checks of a layout the row to look at.

    Parameters
    ----------
    checks : sequence of Check
        Rows.

    Returns
    -------
    Check or None
        The worst row that fails, else the one used most of those that demands decide; None
        where there is neither.
    """
    failing = [row for row in checks if not row.ok]
    rows = failing or [row for row in checks if row.id not in _OF_GEOMETRY]
    if not failing:
        rows = [row for row in rows if row.ratio is not None]
    return max(rows, key=lambda row: row.ratio or 0.0, default=None)


def row_text(row: Check, edition: Edition) -> str:
    """Write a row of a check in one line.

    Parameters
    ----------
    row : Check
        Row.
    edition : Edition
        Edition, which has the units.

    Returns
    -------
    str
        For example ``flexural_strength 93%: 312 kip*ft, limit 335 kip*ft``.
    """
    text = row.id
    if row.ratio is not None:
        close = not row.ok and row.ratio < 1.005  # 100 % would not look like a failure
        text += f" {100 * row.ratio:{'.1f' if close else '.0f'}}%"
    demand = sized(row.demand, row.quantity, edition.system)
    limit = sized(row.limit, row.quantity, edition.system)
    return f"{text}: {demand}, limit {limit}" if demand and limit else text


def _without_layout(result: SectionsRespan) -> list[Block]:
    found: list[Block] = []
    for item in result.verdicts:
        diagnosis = item.ranked.diagnosis
        if diagnosis is None:
            continue
        sure = "no layout meets every rule" if item.ranked.proved else "no layout found, NOT PROVED"
        blocked = ", ".join(block.id for block in diagnosis.blocked_by)
        text = f"{item.mark}: {sure}; what blocks: {blocked or 'strength alone'}."
        text += " cagewright rank tells more."
        found.append(Paragraph(text=text, strong=True))
    return found


def _frontier(result: SectionsRespan, edition: Edition) -> TextTable:
    unit = edition.system.trade["mass_per_length"]
    mass = "lb" if edition.units == "us" else "kg"
    lightest = all(item.ranked.problem.ranking.by == "lightest" for item in result.verdicts)
    rows = []
    before: float | None = None
    for step in result.steps:
        if step.cost is None or step.mass is None:
            rows.append((str(step.changes), "none", "", "", "not every section has a layout"))
            continue
        rows.append(
            (
                str(step.changes),
                f"{step.cost:.2f}",
                f"{step.mass:.2f}",
                "" if before is None else f"{before - step.cost:.2f}",
                ", ".join(step.changed) or "nothing",
            )
        )
        before = step.cost
    what = "mass" if lightest else "score"
    return TextTable(
        title=f"Least change: for each number of changed sections the best value ({what}) of all"
        f" together [{unit}; sections with a length count with it, in {mass}]",
        columns=(">changes", ">value", ">mass", ">saved", "what changes"),
        rows=tuple(rows),
    )


def _proof(result: SectionsRespan) -> Paragraph:
    unproved = [item.mark for item in result.verdicts if not item.ranked.proved]
    if unproved:
        names = ", ".join(unproved)
        return Paragraph(
            text=f"NOT PROVED for {names}: the work limit stopped the search. Raise work_limit.",
            strong=True,
        )
    return Paragraph(
        text="Proved: sections do not depend on one another, each best layout is proved best, and"
        " with so many changes nothing better remains."
    )


def _none_chosen(result: SectionsRespan, choice: str | int) -> str:
    possible = [step.changes for step in result.steps if step.possible]
    if possible and isinstance(choice, int):
        some = "no change" if choice == 0 else f"{choice} change{'s' if choice > 1 else ''}"
        return f"Not every section is served with {some}; the least is {possible[0]}."
    locked = f" with {', '.join(result.locked)} locked" if result.locked else ""
    return f"Not every section can be served{locked}."


def _differences(result: SectionsRespan, step: SectionStep, edition: Edition) -> TextTable:
    unit = edition.system.trade["mass_per_length"]
    rows = []
    for item in result.verdicts:
        after = _layout_after(item, step)
        before = item.checked.layout if item.checked is not None else None
        changes = "appears" if before is None else "changes"
        what = changes if item.mark in step.changed else "stays"
        rows.append(
            (
                item.mark,
                what,
                "nothing" if before is None else before.label,
                "" if before is None else f"{before.mass:.2f}",
                "" if after is None else after.label,
                "" if after is None else f"{after.mass:.2f}",
            )
        )
    order = {"stays": 0, "changes": 1, "appears": 2}
    rows.sort(key=lambda row: order[row[1]])
    rows += [(mark, "vanishes", "", "", "", "") for mark in result.gone]
    count = len(step.changed)
    return TextTable(
        title=f"To mark up on the drawing: {count} section{'' if count == 1 else 's'} changed,"
        f" masses [{unit}]",
        columns=("section", "*what", "was", ">mass", "is now", ">mass"),
        rows=tuple(rows),
    )
