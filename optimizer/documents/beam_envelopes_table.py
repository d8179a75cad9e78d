"""Demand and strength along a beam as a table."""

from __future__ import annotations

import numpy as np

from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.documents.beam_charts import shear_of
from optimizer.documents.tables import Cell, Column, Table


def envelopes_table(result: BeamDesign | NoDesign) -> Table:
    """Make the table of demand, and of strength where there is a design, at every station.

    Parameters
    ----------
    result : BeamDesign or NoDesign
        Result.

    Returns
    -------
    Table
        Moments sagging positive; the strengths are sizes. At stations of the strength alone the
        demand is that of the straight line between its own.
    """
    problem = result.problem
    trade = problem.edition.system.trade
    length, moment, force = trade["length"], trade["moment"], trade["force"]
    columns = [
        Column(name="span", width=14, wrap=True),
        Column(name="on the span", unit=length, number_format="0.0", width=13),
        Column(name="on the beam", unit=length, number_format="0.0", width=13),
        Column(name="Mu most", unit=moment, number_format="0.0", width=13),
        Column(name="Mu least", unit=moment, number_format="0.0", width=13),
    ]
    if isinstance(result, BeamDesign):
        names = ("phi Mn sagging", "phi Mn hogging")
        columns += [Column(name=name, unit=moment, number_format="0.0", width=15) for name in names]
    columns.append(Column(name="Vu", unit=force, number_format="0.0", width=10))
    if isinstance(result, BeamDesign):
        columns.append(Column(name="Vu to design for", unit=force, number_format="0.0", width=14))
        columns.append(Column(name="phi Vn", unit=force, number_format="0.0", width=10))
        columns.append(Column(name="stirrup spacing", unit=length, number_format="0.###", width=13))
    rows = [row for index in range(len(result.demands)) for row in _stations(result, index)]
    return Table(name="Envelopes", columns=tuple(columns), rows=tuple(rows))


def _stations(result: BeamDesign | NoDesign, index: int) -> list[tuple[Cell, ...]]:
    problem, demand = result.problem, result.demands[index]
    system = problem.edition.system
    origin = problem.beam.origins[index]
    design = result if isinstance(result, BeamDesign) else None
    x = demand.x if design is None else design.strengths[index].x
    reduced = shear_of(result, index)

    def trade(kind: str, values: object, number: int) -> float:
        return system.to_trade(kind, float(np.asarray(values)[number]))

    most, least, shear, to_design = (
        np.interp(x, demand.x, values)
        for values in (demand.Mu_most, demand.Mu_least, demand.Vu, reduced)
    )
    rows: list[tuple[Cell, ...]] = []
    for number, place in enumerate(x):
        row: list[Cell] = [problem.beam.spans[index].mark, float(place), origin + float(place)]
        row += [trade("moment", most, number), trade("moment", least, number)]
        if design is not None:
            strength = design.strengths[index]
            row += [trade("moment", strength.sagging, number)]
            row += [trade("moment", strength.hogging, number)]
        row.append(trade("force", shear, number))
        if design is not None:
            strength = design.strengths[index]
            row += [trade("force", to_design, number), trade("force", strength.shear, number)]
            row.append(float(strength.spacing[number]))
        rows.append(tuple(row))
    return rows
