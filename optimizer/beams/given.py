"""Envelopes of the user's own analysis, one CSV file for each span.

A file has the columns station, Mu_max, Mu_min, Vu, Ms_max and Ms_min, in any order, a row of
units under the header and then a row for each station, from left to right. Stations lie on the
span's axis, which starts at the centreline of its left support; that of a cantilever at the left
end starts at its tip. Between stations the envelopes are straight.
"""

from __future__ import annotations

from itertools import pairwise
from pathlib import Path

import numpy as np

from catalogs.tables import Column, Row, Table, read_table, table_error
from engine import Edition, EngineError, parse_quantity
from engine.beams.demand import SpanDemand
from engine.outlines import FloatArray
from engine.units import unit_named
from optimizer.beams.loads import far_length

MOST_STATIONS = 5000
_KINDS = {
    "station": "length",
    "Mu_max": "moment",
    "Mu_min": "moment",
    "Vu": "force",
    "Ms_max": "moment",
    "Ms_min": "moment",
}
# Two places, and two figures of different rounding, within this share are one.
_SAME_PLACE = 1e-6
_ROUNDING = 1e-3


def read_envelope(
    path: Path, length: float, clear: tuple[float, float], edition: Edition
) -> SpanDemand:
    """Read the envelopes of one span.

    Parameters
    ----------
    path : Path
        CSV file.
    length : float
        Length of the span's axis. [in or mm]
    clear : tuple of float
        Faces of the supports on that axis; a free end is its own face. [in or mm]
    edition : Edition
        Edition, which decides the units of the result.

    Returns
    -------
    SpanDemand
        Envelopes from face to face, with the values at the faces interpolated; without
        deflections.

    Raises
    ------
    TableError
        If the file cannot be read, does not cover the clear span, or contradicts itself.
    """
    table = read_table(path, [Column(name=name, units=()) for name in _KINDS], MOST_STATIONS)
    if len(table.rows) < 2:
        raise table_error(table.file, f"1 station; allowed: 2 to {MOST_STATIONS}")
    read = {name: _column(table, name, edition) for name in _KINDS}
    _check_stations(table, read["station"], length, edition)
    _check_cover(table, read["station"], length, clear, edition)
    _check_moments(table, read)
    return _between_faces(read, clear, _SAME_PLACE * length)


def _column(table: Table, name: str, edition: Edition) -> FloatArray:
    """One column in the inner unit of its kind."""
    kind, system = _KINDS[name], edition.system
    try:
        unit = unit_named(table.units[name], kind, system)
    except EngineError as error:
        row = table.units_row
        raise table_error(table.file, str(error), row=row, column=name) from None
    return np.array([_cell(row, name, kind, edition, unit) for row in table.rows])


def _cell(row: Row, name: str, kind: str, edition: Edition, unit: str) -> float:
    try:
        return parse_quantity(row.value(name), kind, edition.system, unit)
    except EngineError:
        raise row.error(column=name, rule=f"allowed: a {kind} that a beam can have") from None


def _check_stations(table: Table, x: FloatArray, length: float, edition: Edition) -> None:
    stations = list(zip(table.rows, x, strict=True))
    for (_, before), (row, here) in pairwise(stations):
        if here <= before:
            rule = "allowed: stations that ascend, each beyond the one above"
            hint = "for a jump give two stations a little apart"
            raise row.error(column="station", rule=rule, hint=hint)
    for row, here in stations:
        if not -_SAME_PLACE * length <= here <= (1.0 + _SAME_PLACE) * length:
            rule = f"allowed: 0 to {far_length(length, edition)}, the length of the span"
            raise row.error(column="station", rule=rule)


def _check_cover(
    table: Table, x: FloatArray, length: float, clear: tuple[float, float], edition: Edition
) -> None:
    """The clear span has to be covered: nothing is known beyond the last station."""
    slack = _SAME_PLACE * length
    gaps = ((clear[0], float(x[0])), (float(x[-1]), clear[1]))
    for start, end in gaps:
        if end - start > slack:
            faces = " to ".join(far_length(face, edition) for face in clear)
            problem = (
                f"does not cover the clear span: nothing from {far_length(start, edition)}"
                f" to {far_length(end, edition)}; allowed: stations from face to face, {faces}"
            )
            raise table_error(table.file, problem, column="station")


def _check_moments(table: Table, read: dict[str, FloatArray]) -> None:
    """Largest not below smallest, and service moments not beyond the factored ones of a sign."""
    slack = _ROUNDING * max(float(np.abs(read[name]).max()) for name in ("Mu_max", "Mu_min"))
    pairs = (
        ("Mu_min", read["Mu_min"] - read["Mu_max"], 0.0, "allowed: up to Mu_max"),
        ("Ms_min", read["Ms_min"] - read["Ms_max"], 0.0, "allowed: up to Ms_max"),
        (
            "Ms_max",
            read["Ms_max"] - np.maximum(read["Mu_max"], 0.0),
            slack,
            "allowed: a service moment up to the factored Mu_max",
        ),
        (
            "Ms_min",
            np.minimum(read["Mu_min"], 0.0) - read["Ms_min"],
            slack,
            "allowed: a service moment no further below 0 than the factored Mu_min",
        ),
    )
    for column, excess, allowed, rule in pairs:
        if float(excess.max()) > allowed:
            first = int(np.argmax(excess > allowed))
            raise table.rows[first].error(column=column, rule=rule)


def _between_faces(
    read: dict[str, FloatArray], clear: tuple[float, float], slack: float
) -> SpanDemand:
    stations = read["station"]
    inner = stations[(stations > clear[0] + slack) & (stations < clear[1] - slack)]
    x = np.concatenate(([clear[0]], inner, [clear[1]]))

    def at(name: str) -> FloatArray:
        return np.interp(x, stations, read[name])

    return SpanDemand(
        x=x,
        Mu_most=at("Mu_max"),
        Mu_least=at("Mu_min"),
        Vu=np.interp(x, stations, np.abs(read["Vu"])),
        Ms_most=at("Ms_max"),
        Ms_least=at("Ms_min"),
    )
