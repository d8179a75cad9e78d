"""Tables as data, and their spelling as CSV: what workbook sheets and text tables are made of."""

from __future__ import annotations

import csv
import io
from dataclasses import dataclass

from optimizer.documents.wording import visible

Cell = str | float | int | None

# What spreadsheets may take for the start of a formula, wide forms of East Asian text included.
_FORMULA_STARTS = frozenset("=+-@\uff1d\uff0b\uff0d\uff20")


@dataclass(frozen=True, slots=True, kw_only=True)
class Column:
    """One column of a table.

    Attributes
    ----------
    name : str
        What it holds.
    unit : str
        Unit of its numbers; empty for texts and bare numbers.
    number_format : str
        How a spreadsheet shows its numbers.
    width : float
        Width in characters of a sheet.
    wrap : bool
        Whether long texts are broken into lines.
    """

    name: str
    unit: str = ""
    number_format: str = "General"
    width: float = 10.0
    wrap: bool = False

    @property
    def heading(self) -> str:
        """Name with its unit: ``mass [lb/ft]``."""
        return f"{self.name} [{self.unit}]" if self.unit else self.name


@dataclass(frozen=True, slots=True, kw_only=True)
class Table:
    """Rows under named columns.

    Attributes
    ----------
    name : str
        Name of the table, which a sheet takes over.
    columns : tuple of Column
        Columns, left to right.
    rows : tuple of tuple
        One cell a column; None is an empty cell.
    """

    name: str
    columns: tuple[Column, ...]
    rows: tuple[tuple[Cell, ...], ...]

    def column(self, name: str) -> list[Cell]:
        """Return the cells of a column by its name, without its unit."""
        at = [column.name for column in self.columns].index(name)
        return [row[at] for row in self.rows]


def looks_like_formula(text: str) -> bool:
    """Whether a spreadsheet could take a text for a formula.

    Parameters
    ----------
    text : str
        Text of a cell.

    Returns
    -------
    bool
        True if its first visible character starts formulas.
    """
    first = next((sign for sign in text if sign.isprintable() and not sign.isspace()), "")
    return first in _FORMULA_STARTS


def csv_text(table: Table) -> str:
    """Write a table as comma-separated values (RFC 4180).

    Parameters
    ----------
    table : Table
        Table to write.

    Returns
    -------
    str
        Header line with units and one line a row, ended by CR LF. Texts that a spreadsheet
        would take for a formula start with an apostrophe; numbers have ten significant digits.
    """
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\r\n")
    writer.writerow([column.heading for column in table.columns])
    writer.writerows([_spelled(cell) for cell in row] for row in table.rows)
    return out.getvalue()


def _spelled(cell: Cell) -> str:
    if cell is None:
        return ""
    if isinstance(cell, str):
        text = visible(cell)
        return f"'{text}" if looks_like_formula(text) else text
    return f"{cell:.10g}"
