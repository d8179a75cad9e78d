"""The schedule of a beam as a table, also as CSV."""

from __future__ import annotations

from engine.beams.bending import Shape
from optimizer.beams.design import BeamDesign
from optimizer.beams.words import ROLES, mass_unit
from optimizer.documents.tables import Cell, Column, Table, csv_text


def schedule_table(design: BeamDesign) -> Table:
    """Make the table of all marks.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    Table
        One row for each mark; `hook 1`, `length` and `hook 2` are legs out to out of bars,
        `width` and `height` those of stirrups.
    """
    edition = design.edition
    length, mass = edition.system.trade["length"], mass_unit(edition)
    form = "0.###" if edition.units == "us" else "0.#"
    legs = ("hook 1", "main length", "hook 2", "width", "height")
    columns = (
        Column(name="mark", width=8),
        Column(name="count", number_format="0", width=8),
        Column(name="size", width=8),
        Column(name="bars", width=30, wrap=True),
        Column(name="shape", width=18),
        *(Column(name=name, unit=length, number_format=form, width=12) for name in legs),
        Column(name="inside radius", unit=length, number_format=form, width=12),
        Column(name="cut length", unit=length, number_format=form, width=12),
        Column(name="mass each", unit=mass, number_format="0.00", width=12),
        Column(name="mass", unit=mass, number_format="0.00", width=12),
    )
    return Table(name="Schedule", columns=columns, rows=tuple(_rows(design)))


def _rows(design: BeamDesign) -> list[tuple[Cell, ...]]:
    purposes: dict[str, list[str]] = {}
    for piece, mark in zip(design.pieces, design.schedule.of_pieces, strict=True):
        text = f"{piece.face.value}, {ROLES[piece.role]}"
        if text not in purposes.setdefault(mark, []):
            purposes[mark].append(text)
    rows: list[tuple[Cell, ...]] = []
    for item in design.schedule.marks:
        shape = item.shape
        legs: tuple[Cell, ...]
        if shape.shape is Shape.CLOSED:
            legs = (None, None, None, *shape.legs)
        elif shape.shape is Shape.STRAIGHT:
            legs = (None, shape.legs[0], None, None, None)
        else:
            other = shape.legs[2] if len(shape.legs) > 2 else None
            legs = (shape.legs[0], shape.legs[1], other, None, None)
        rows.append(
            (
                item.mark,
                item.count,
                item.bar.designation,
                "; ".join(purposes.get(item.mark, ["stirrups"])),
                shape.shape.value,
                *legs,
                shape.radius if shape.radius > 0.0 else None,
                item.length,
                item.mass_each,
                item.mass,
            )
        )
    return rows


def schedule_csv(design: BeamDesign) -> str:
    """Write the schedule as CSV.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    str
        Header line with units and a line for each mark.
    """
    return csv_text(schedule_table(design))
