"""The answer to a change of a beam or of sections as one page of HTML."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass, field

from optimizer.beams.design import BeamDesign
from optimizer.beams.respan import Respan
from optimizer.beams.respan_report import chosen_step, respan_blocks
from optimizer.beams.sweep import Sweep
from optimizer.beams.sweep_report import sweep_blocks
from optimizer.beams.words import (
    NOT_CHECKED,
    legs_text,
    length_text,
    mass_unit,
    proof_text,
    zones_text,
)
from optimizer.documents.beam_elevation import elevations
from optimizer.documents.rendering import render
from optimizer.documents.sweep_chart import sweep_chart
from optimizer.documents.wording import visible
from optimizer.respan_sections import SectionsRespan
from optimizer.sections_report import sections_blocks
from optimizer.text_tables import Block, TextTable
from optimizer.wording import NOT_CHECKED as NOT_CHECKED_OF_SECTIONS

_PRODUCT = re.compile(r"\b(kip|kN)\*(ft|m)\b")
_AREA = re.compile(r"\b(in|mm)\^2")
_Cells = list[tuple[str, bool]]


@dataclass(frozen=True, slots=True, kw_only=True)
class Item:
    """A drawing, a table or a paragraph; the other fields are empty."""

    drawing: str = ""
    title: str = ""
    head: _Cells = field(default_factory=list)
    rows: list[_Cells] = field(default_factory=list)
    text: str = ""
    strong: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class Part:
    """What stands under one heading."""

    heading: str
    items: list[Item]
    answer: str = ""
    good: bool = True


def respan_page(result: Respan, choice: str | int) -> str:
    """Write the answer to a change of a beam as a page.

    Parameters
    ----------
    result : Respan
        Answer.
    choice : str or int
        Design that is drawn: least, best, or most changes.

    Returns
    -------
    str
        HTML with its style and drawings inside; equal results give equal text.
    """
    problem = result.problem
    least, step = result.least, chosen_step(result, choice)
    if least is None:
        answer = "no beam serves"
    elif least.changes == 0:
        answer = "the beam as drawn still serves"
    else:
        answer = f"serves with {least.changes} change{'s' if least.changes > 1 else ''}"
    parts = [
        Part(
            heading=f"Beam {visible(problem.mark)} after the change",
            answer=answer,
            good=result.ok,
            items=_items(respan_blocks(result, choice)),
        )
    ]
    if step is not None and step.design is not None:
        parts.append(_design(step.design))
    return render(
        "respan.html.j2",
        edition=problem.edition,
        title=problem.title or f"Beam {problem.mark}",
        kind="Beam after a change",
        limits=NOT_CHECKED,
        parts=parts,
    )


def sweep_page(result: Sweep) -> str:
    """Write a beam over a range of one span as a page.

    Parameters
    ----------
    result : Sweep
        Sweep.

    Returns
    -------
    str
        HTML.
    """
    problem = result.points[0].result.problem
    table, *rest = _items(sweep_blocks(result))
    return render(
        "respan.html.j2",
        edition=problem.edition,
        title=problem.title or f"Beam {problem.mark}",
        kind="Beam over a range of one span",
        limits=NOT_CHECKED,
        parts=[
            Part(
                heading=f"Beam {visible(problem.mark)} over the length of {visible(result.span)}",
                items=[table, Item(drawing=sweep_chart(result)), *rest],
            )
        ],
    )


def sections_page(result: SectionsRespan, choice: str | int) -> str:
    """Write the answer to a change of sections as a page.

    Parameters
    ----------
    result : SectionsRespan
        Answer.
    choice : str or int
        Step whose layouts are shown: least, best, or most changes.

    Returns
    -------
    str
        HTML.
    """
    job = result.job
    return render(
        "respan.html.j2",
        edition=job.edition,
        title=job.title,
        kind="Sections after a change",
        limits=NOT_CHECKED_OF_SECTIONS,
        parts=[
            Part(
                heading="Sections after the change",
                answer="" if result.ok else "not every section can be served",
                good=result.ok,
                items=_items(sections_blocks(result, choice)),
            )
        ],
    )


def _items(blocks: Iterable[Block]) -> list[Item]:
    return [
        _table(block)
        if isinstance(block, TextTable)
        else Item(text=_shown(block.text), strong=block.strong)
        for block in blocks
    ]


def _table(table: TextTable) -> Item:
    numbers = [table.is_number(at) for at in range(len(table.columns))]
    return Item(
        title=_shown(table.title),
        head=[(visible(name), number) for name, number in zip(table.names, numbers, strict=True)],
        rows=[
            [(_shown(cell), number) for cell, number in zip(row, numbers, strict=True)]
            for row in table.rows
        ],
    )


def _design(design: BeamDesign) -> Part:
    failing = dict.fromkeys(row.id for row in design.checks if not row.ok)
    marks = [span.mark for span in design.problem.beam.spans]
    unit = design.edition.system.trade["length"]
    zones = TextTable(
        title=f"Stirrups, {design.frame.label}, spacings [{unit}] from left to right",
        columns=("span", ">sets", "spaces"),
        rows=tuple(
            (marks[plan.span], str(plan.count), zones_text(plan)) for plan in design.stirrups
        ),
    )
    return Part(
        heading="The chosen beam",
        answer=f"FAILS: {', '.join(failing)}" if failing else "passes every check",
        good=design.ok,
        items=[
            *(Item(drawing=drawing) for drawing, _ in elevations(design)),
            _table(zones),
            _table(_schedule(design)),
            Item(text=proof_text(design), strong=not design.proved),
        ],
    )


def _schedule(design: BeamDesign) -> TextTable:
    edition, unit = design.edition, mass_unit(design.edition)
    return TextTable(
        title=f"Schedule, legs out to out, mass [{unit}]",
        columns=("mark", ">bars", "size", "shape", "legs", ">length", ">each", ">mass"),
        rows=tuple(
            (
                item.mark,
                str(item.count),
                item.bar.designation,
                item.shape.shape.value,
                legs_text(edition, item),
                length_text(edition, item.length),
                f"{item.mass_each:.2f}",
                f"{item.mass:.1f}",
            )
            for item in design.schedule.marks
        ),
    )


def _shown(text: str) -> str:
    """A text with units as they are printed."""
    text = _PRODUCT.sub(r"\1·\2", visible(text))
    return _AREA.sub(r"\1²", text)
