"""Read a CSV table with a header row, a units row and then its data.

The one reader of this package: its own tables and a user's file pass the same checks. A file is
data from outside, so it is bounded in size, plain UTF-8 text, and every failure names the file,
the row as a spreadsheet counts it, the column, the value and what is allowed.
"""

import csv
import io
import math
import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from importlib import resources
from pathlib import Path

from catalogs._names import nearest, shown
from catalogs.errors import TableError

MAX_BYTES = 200_000
MAX_ROWS = 500
_BYTES_PER_ROW = MAX_BYTES // MAX_ROWS

# Python's own float() also takes "1_000", "nan" and digits of other scripts: none is meant here.
_NUMBER = re.compile(r"[+-]?(\d+(\.\d*)?|\.\d+)([eE][+-]?\d+)?", re.ASCII)
_CONTROL = re.compile(r"[\x00-\x09\x0b\x0c\x0e-\x1f\x7f-\x9f]")


@dataclass(frozen=True, slots=True, kw_only=True)
class Column:
    """A column that a table must have, with the entries its units row may show; none for any."""

    name: str
    units: tuple[str, ...] = ("-",)


@dataclass(frozen=True, slots=True, kw_only=True)
class Row:
    """One data row: its place in the file and its cells, read by type."""

    file: str
    number: int
    cells: Mapping[str, str]

    def text(self, column: str) -> str:
        """Return the cell as text without outer blanks; may be empty."""
        return self.cells[column]

    def value(self, column: str) -> float:
        """Return the cell as a finite number [in the unit of the units row].

        Raises
        ------
        TableError
            If the cell is no plain decimal number.
        """
        cell = self.cells[column]
        if _NUMBER.fullmatch(cell) and math.isfinite(float(cell)):
            return float(cell)
        hint = "write a decimal point and no thousands separators" if "," in cell else None
        rule = "allowed: a plain decimal number such as 0.375"
        raise self.error(column=column, rule=rule, hint=hint)

    def value_or_none(self, column: str) -> float | None:
        """Return the cell as a number, None if it is empty [in the unit of the units row]."""
        return self.value(column) if self.cells[column] else None

    def error(self, *, column: str, rule: str, hint: str | None = None) -> TableError:
        """Make the error that says which cell breaks which rule."""
        problem = f"{shown(self.cells[column])} cannot be used; {rule}"
        return table_error(self.file, problem, hint, row=self.number, column=column)


@dataclass(frozen=True, slots=True, kw_only=True)
class Table:
    """A table read in full: the unit of every column, and at least one data row."""

    file: str
    units: Mapping[str, str]
    units_row: int
    rows: tuple[Row, ...]


def table_error(
    file: str,
    problem: str,
    hint: str | None = None,
    *,
    row: int | None = None,
    column: str | None = None,
) -> TableError:
    """Make a TableError whose message starts with the place."""
    place = file
    if row is not None:
        place += f", row {row}"
    if column is not None:
        place += f", column {column}"
    message = f"{place}: {problem}" + (f"; hint: {hint}" if hint else "")
    return TableError(message, file=file, row=row, column=column)


def read_builtin(file: str, columns: Sequence[Column]) -> Table:
    """Read a table that comes with this package."""
    data = resources.files(__package__).joinpath("data", file).read_bytes()
    return parse(file, data, columns)


def read_file(path: Path, columns: Sequence[Column], most_rows: int = MAX_ROWS) -> Table:
    """Read a table of the user, of so many data rows at most.

    Raises
    ------
    TableError
        If the file cannot be opened, or as `parse` does.
    """
    # A name that no terminal can show must not break the message about it.
    file = str(path) if str(path).isprintable() else repr(str(path))
    try:
        # A pipe or a device would block or never end.
        if not path.is_file():
            found = "is not a regular file" if path.exists() else "does not exist"
            raise table_error(file, f"{found}; allowed: the path of a CSV file")
        with path.open("rb") as stream:
            data = stream.read(most_rows * _BYTES_PER_ROW + 1)
    except OSError as error:
        raise table_error(file, f"cannot be read: {error.strerror}") from error
    return parse(file, data, columns, most_rows)


def parse(file: str, data: bytes, columns: Sequence[Column], most_rows: int = MAX_ROWS) -> Table:
    """Turn the bytes of a CSV file into a table.

    Parameters
    ----------
    file : str
        Name of the file for messages.
    data : bytes
        Its content.
    columns : sequence of Column
        The columns it must have, in any order, and no others.
    most_rows : int
        Most data rows; the size of the file is bounded with them.

    Returns
    -------
    Table
        Units and data rows.

    Raises
    ------
    TableError
        If it is not such a table.
    """
    lines = _split(file, _decode(file, data, most_rows * _BYTES_PER_ROW), most_rows)
    if not lines:
        raise table_error(file, f"is empty; allowed: a header row {_header(columns)}")
    names = _check_header(file, *lines[0], columns)
    if len(lines) < 2:
        raise table_error(
            file, f"has no units row; allowed: a row of units under {','.join(names)}"
        )
    units = _check_units(file, *lines[1], names, columns)
    if len(lines) < 3:
        raise table_error(file, "has no data rows; allowed: at least 1 below the units row")
    rows = tuple(
        Row(file=file, number=number, cells=_pair(file, number, cells, names))
        for number, cells in lines[2:]
    )
    return Table(file=file, units=units, units_row=lines[1][0], rows=rows)


def _decode(file: str, data: bytes, most_bytes: int) -> str:
    if len(data) > most_bytes:
        raise table_error(file, f"is larger than allowed; allowed: {most_bytes // 1000} kB")
    try:
        # Spreadsheets put a byte order mark in front of UTF-8; it is no part of the header.
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        row = data.count(b"\n", 0, error.start) + 1
        problem = f"byte 0x{data[error.start]:02x} is not UTF-8; allowed: UTF-8 text"
        raise table_error(file, problem, "save the file as CSV in UTF-8", row=row) from error
    control = _CONTROL.search(text)
    if control:
        row = text.count("\n", 0, control.start()) + 1
        problem = f"control character {control.group()!r} found; allowed: printable text"
        hint = "separate the columns by commas" if control.group() == "\t" else None
        raise table_error(file, problem, hint, row=row)
    return text


def _split(file: str, text: str, most_rows: int) -> list[tuple[int, list[str]]]:
    """Cut the text into numbered rows of trimmed cells, leaving blank lines out."""
    reader = csv.reader(io.StringIO(text, newline=""), strict=True)
    lines: list[tuple[int, list[str]]] = []
    try:
        for cells in reader:
            if any("\n" in cell or "\r" in cell for cell in cells):
                problem = "a cell runs over two lines; allowed: one line a row"
                raise table_error(file, problem, "look for a lone quote", row=reader.line_num)
            if cells:
                lines.append((reader.line_num, [cell.strip() for cell in cells]))
            if len(lines) > most_rows + 2:
                problem = f"more data rows than allowed; allowed: {most_rows}"
                raise table_error(file, problem, row=reader.line_num)
    except csv.Error as error:
        problem = f"is not CSV ({error}); allowed: cells separated by commas"
        raise table_error(file, problem, row=reader.line_num) from error
    return lines


def _check_header(file: str, number: int, names: list[str], columns: Sequence[Column]) -> list[str]:
    known = [column.name for column in columns]
    rule = f"allowed: {_header(columns)}"
    if len(names) == 1 and ";" in names[0]:
        hint = "separate the columns by commas and write decimals with a point"
        raise table_error(file, f"no columns in {shown(names[0])}; {rule}", hint, row=number)
    for name in names:
        if name not in known:
            guess = nearest(name, known)
            near = f"the nearest name is {guess!r}" if guess else None
            raise table_error(file, f"unknown column {shown(name)}; {rule}", near, row=number)
        if names.count(name) > 1:
            raise table_error(file, f"column {name!r} appears twice; {rule}", row=number)
    missing = [name for name in known if name not in names]
    if missing:
        raise table_error(file, f"column {missing[0]!r} is missing; {rule}", row=number)
    return names


def _check_units(
    file: str, number: int, cells: list[str], names: list[str], columns: Sequence[Column]
) -> Mapping[str, str]:
    units = _pair(file, number, cells, names)
    for column in columns:
        unit = units[column.name]
        if column.units and unit not in column.units:
            problem = f"{shown(unit)} is not a unit of it; allowed: {' or '.join(column.units)}"
            hint = "the row below the header states the units"
            raise table_error(file, problem, hint, row=number, column=column.name)
    return units


def _pair(file: str, number: int, cells: list[str], names: list[str]) -> Mapping[str, str]:
    if len(cells) != len(names):
        problem = f"has {len(cells)} cells; allowed: {len(names)} ({','.join(names)})"
        hint = "look for a decimal comma or a missing value"
        raise table_error(file, problem, hint, row=number)
    return dict(zip(names, cells, strict=True))


def _header(columns: Sequence[Column]) -> str:
    return ",".join(column.name for column in columns)
