"""Summary, bars, stirrups, cutting and checks of a beam as tables."""

from __future__ import annotations

import math

from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.words import (
    NOT_CHECKED,
    ROLES,
    mass_per_volume,
    mass_unit,
    proof_text,
    value_text,
    volume_unit,
    zones_of,
)
from optimizer.documents.beam_checks import by_kind
from optimizer.documents.beam_inputs import beam_inputs, span_inputs, support_inputs
from optimizer.documents.tables import Cell, Column, Table
from optimizer.documents.wording import VERDICTS
from optimizer.wording import CAUTION

_ANY_SIZE = "[<0.1]0.00000;0.00"
_SUMMARY = (
    Column(name="subject", width=30, wrap=True),
    Column(name="value", width=18, number_format="0.###"),
    Column(name="unit", width=12),
    Column(name="note", width=90, wrap=True),
)


def summary_table(result: BeamDesign | NoDesign) -> Table:
    """Make the table of totals, proof, inputs and notes.

    Parameters
    ----------
    result : BeamDesign or NoDesign
        Result.

    Returns
    -------
    Table
        Totals are numbers; texts stand as notes.
    """
    problem = result.problem
    rows: list[tuple[Cell, ...]] = [
        ("beam", None, None, problem.mark),
        ("title", None, None, problem.title),
        ("code", None, None, problem.edition.name),
    ]
    rows += _totals(result) if isinstance(result, BeamDesign) else _reasons(result)
    rows += [(_flat(name), None, None, value) for name, value in beam_inputs(problem)]
    for mark, length, clear, web, flange, loads in span_inputs(problem):
        text = f"length {length}, clear {clear}, {web}, flange {flange}: {'; '.join(loads)}"
        rows.append((f"span {mark}", None, None, text))
    for mark, width, kind, ends in support_inputs(problem):
        rows.append((f"support {mark}", None, None, f"{kind}, width {width}: {ends}"))
    rows += [("caution", None, None, CAUTION), ("not checked", None, None, NOT_CHECKED)]
    return Table(name="Summary", columns=_SUMMARY, rows=tuple(rows))


def _flat(name: str) -> str:
    """A name without its low and high signs."""
    return name.replace("_{", "").replace("}", "")


def _totals(design: BeamDesign) -> list[tuple[Cell, ...]]:
    unit = mass_unit(design.edition)
    failing = sum(not row.ok for row in design.checks)
    verdict = "passes every check" if design.ok else f"FAILS {failing} checks"
    least = value_text(design.problem)
    volume = f"{unit}/{volume_unit(design.edition)}"
    return [
        ("verdict", None, None, verdict),
        ("mass of steel", design.schedule.mass, unit, None),
        ("steel in the concrete", mass_per_volume(design), volume, None),
        (least, design.cost, unit, "what is least"),
        (f"{least}, bound", min(design.bound, design.cost), unit, proof_text(design)),
        ("bars", sum(item.count for item in design.schedule.marks), None, None),
        ("marks", len(design.schedule.marks), None, None),
        ("stirrups", None, None, design.frame.label),
        ("top bars", None, None, design.top.label),
    ]


def _reasons(result: NoDesign) -> list[tuple[Cell, ...]]:
    verdict = "no arrangement within the rules" if result.proved else "none found, NOT PROVED"
    return [
        ("verdict", None, None, verdict),
        *(("stands in the way", None, None, reason) for reason in result.reasons),
    ]


def bars_table(design: BeamDesign) -> Table:
    """Make the table of bars with their places along the beam.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    Table
        Places count from the left end of the beam, to the outside of hooks.
    """
    length = design.edition.system.trade["length"]
    columns = (
        Column(name="mark", width=8),
        Column(name="count", number_format="0", width=8),
        Column(name="size", width=8),
        Column(name="face", width=9),
        Column(name="layer", number_format="0", width=8),
        Column(name="bars", width=24),
        Column(name="start", unit=length, number_format="0.###", width=12),
        Column(name="end", unit=length, number_format="0.###", width=12),
        Column(name="hook at start", width=10),
        Column(name="hook at end", width=10),
    )
    rows: list[tuple[Cell, ...]] = [
        (
            mark,
            piece.count,
            piece.bar.designation,
            piece.face.value,
            piece.layer,
            ROLES[piece.role],
            piece.start,
            piece.end,
            "yes" if piece.hook_start else "no",
            "yes" if piece.hook_end else "no",
        )
        for piece, mark in zip(design.pieces, design.schedule.of_pieces, strict=True)
    ]
    return Table(name="Bars", columns=columns, rows=tuple(rows))


def stirrups_table(design: BeamDesign) -> Table:
    """Make the table of stirrup zones.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    Table
        A row for each zone with spaces; places count from the left face of the span.
    """
    length = design.edition.system.trade["length"]
    columns = (
        Column(name="span", width=14, wrap=True),
        Column(name="stirrups", number_format="0", width=10),
        Column(name="marks of a set", width=14),
        Column(name="size", width=8),
        Column(name="legs", number_format="0", width=8),
        Column(name="zone", number_format="0", width=8),
        Column(name="spaces", number_format="0", width=9),
        Column(name="spacing", unit=length, number_format="0.###", width=13),
        Column(name="from", unit=length, number_format="0.###", width=11),
        Column(name="to", unit=length, number_format="0.###", width=11),
    )
    rows: list[tuple[Cell, ...]] = []
    spans = zip(
        design.problem.beam.spans, design.stirrups, design.schedule.of_stirrups, strict=True
    )
    for span, plan, marks in spans:
        for number, (spaces, spacing, start, end) in enumerate(zones_of(plan), 1):
            rows.append(
                (
                    span.mark,
                    plan.count if number == 1 else None,
                    " + ".join(marks),
                    design.frame.stirrup.designation,
                    design.frame.legs,
                    number,
                    spaces,
                    spacing,
                    start,
                    end,
                )
            )
    return Table(name="Stirrups", columns=columns, rows=tuple(rows))


def cutting_table(design: BeamDesign) -> Table:
    """Make the table of the bars cut from stock.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    Table
        A row for all stock bars that are cut alike.
    """
    length = design.edition.system.trade["length"]
    columns = (
        Column(name="size", width=8),
        Column(name="bars of stock", number_format="0", width=13),
        Column(name="stock length", unit=length, number_format="0.###", width=14),
        Column(name="pieces of each", width=50, wrap=True),
        Column(name="left over of each", unit=length, number_format="0.###", width=17),
        Column(name="proved least", width=13),
    )
    rows: list[tuple[Cell, ...]] = [
        (
            plan.size,
            bar.count,
            bar.stock_length,
            ", ".join(f"{count} {mark}" for mark, count in bar.pieces),
            bar.left_over,
            "yes" if plan.proved else "NOT PROVED",
        )
        for plan in design.cutting
        for bar in plan.bars
    ]
    return Table(name="Cutting", columns=columns, rows=tuple(rows))


def beam_checks_table(design: BeamDesign) -> Table:
    """Make the table of all checks, the governing one of each kind first.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    Table
        Every check.
    """
    system = design.edition.system
    columns = (
        Column(name="check", width=24),
        Column(name="governs", width=9),
        Column(name="where", width=16, wrap=True),
        Column(name="at", unit=system.trade["length"], number_format="0.0", width=10),
        Column(name="clause", width=14),
        Column(name="demand", number_format=_ANY_SIZE, width=11),
        Column(name="limit", number_format=_ANY_SIZE, width=11),
        Column(name="unit", width=8),
        Column(name="use", number_format="0%", width=7),
        Column(name="verdict", width=14),
        Column(name="note", width=60, wrap=True),
    )
    rows: list[tuple[Cell, ...]] = []
    kinds = by_kind(design.checks)
    ordered = [(row, True) for row, _ in kinds]
    ordered += [(row, False) for governing, own in kinds for row in own if row is not governing]
    for row, governs in ordered:
        demand, limit = (
            _finite(None if value is None else system.to_trade(row.quantity, value))
            for value in (row.demand, row.limit)
        )
        rows.append(
            (
                row.id,
                "yes" if governs else "",
                row.where,
                row.at,
                row.clause,
                demand,
                limit,
                system.trade.get(row.quantity, ""),
                _finite(row.ratio),
                VERDICTS[row.state],
                row.note,
            )
        )
    return Table(name="Checks", columns=columns, rows=tuple(rows))


def _finite(value: float | None) -> float | None:
    """Cells hold no infinite numbers."""
    return value if value is not None and math.isfinite(value) else None
