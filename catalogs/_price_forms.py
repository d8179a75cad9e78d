"""The two forms of a price list, TOML and CSV, read into the same entries.

`catalogs.prices` describes both. Here only the form is checked; what the entries say is checked in
`catalogs._price_entries`.
"""

import contextlib
import math
import tomllib
from collections.abc import Sequence
from dataclasses import dataclass
from importlib import resources
from pathlib import Path
from typing import Any

from catalogs._names import key, nearest, shown
from catalogs._tables import MAX_BYTES, Column, Row, Table, read_builtin, read_file, table_error
from catalogs.errors import TableError

ANY = "*"

_COLUMNS = tuple(Column(name=name) for name in ("key", "size", "grade", "value", "unit", "source"))
_MOST_DOTS = 100
_PRICE_KEYS = ("price", "grade", "size")


@dataclass(frozen=True, slots=True, kw_only=True)
class Entry:
    """One figure or text of a file; a CSV file also gives its row and its unit."""

    file: str
    key: str
    place: str
    value: object
    grade: object = ANY
    size: object = ANY
    source: str = ""
    row: Row | None = None

    def error(self, rule: str, hint: str | None = None, *, part: str = "value") -> TableError:
        """Make the error that says which part of the entry breaks which rule."""
        value = self.row.text("unit") if self.row and part == "unit" else getattr(self, part)
        text = shown(value) if isinstance(value, str) else shown(_plain(value))[1:-1]
        problem = f"{text} cannot be used; {rule}"
        if self.row is None:
            place = self.place if part == "value" else f"{self.place}.{part}"
            return key_error(self.file, place, problem, hint)
        what = self.key if part == "value" else f"{part} of {self.key}"
        return table_error(self.file, f"{what} {problem}", hint, row=self.row.number, column=part)

    def text(self, *, longest: int, part: str = "value", blanks: bool = True) -> str:
        """Return a part as text without outer blanks."""
        value = getattr(self, part)
        text = value.strip() if isinstance(value, str) else ""
        if not (0 < len(text) <= longest and text.isprintable() and (blanks or " " not in text)):
            rule = f"allowed: a text of 1 to {longest} printable characters"
            raise self.error(rule + ("" if blanks else " without blanks"), part=part)
        return text

    def number(self, low: float, high: float, unit: str) -> float:
        """Return the value as a number within limits [in the unit given]."""
        number = math.nan
        hint = None
        if self.row is not None:
            with contextlib.suppress(TableError):
                number = self.row.value("value")
            if "," in self.row.text("value"):
                hint = "write a decimal point and no thousands separators"
        elif isinstance(self.value, int | float) and not isinstance(self.value, bool):
            # A whole number of TOML may be longer than any float.
            with contextlib.suppress(OverflowError):
                number = float(self.value)
        if not low <= number <= high:
            rule = f"allowed: a number from {low:g} to {high:g} {unit}"
            raise self.error(rule, hint)
        return number


def read_user_file(path: Path) -> tuple[str, list[Entry]]:
    """Read a file of the user.

    Parameters
    ----------
    path : Path
        A file ending in ``.csv``, or else a TOML file.

    Returns
    -------
    str
        The file as messages show it.
    list of Entry
        Its entries, in order.

    Raises
    ------
    TableError
        If it cannot be read or is not of that form.
    """
    if key(path.name).endswith(".csv"):
        table = read_file(path, _COLUMNS)
        return table.file, _from_table(table)
    file = str(path) if str(path).isprintable() else repr(str(path))
    try:
        # A pipe or a device would block or never end.
        if not path.is_file():
            found = "is not a regular file" if path.exists() else "does not exist"
            raise table_error(file, f"{found}; allowed: the path of a TOML file")
        with path.open("rb") as stream:
            data = stream.read(MAX_BYTES + 1)
    except OSError as error:
        raise table_error(file, f"cannot be read: {error.strerror}") from error
    return file, _from_toml(file, data)


def read_builtin_file(file: str) -> list[Entry]:
    """Read a file that comes with this package."""
    if file.endswith(".csv"):
        return _from_table(read_builtin(file, _COLUMNS))
    return _from_toml(file, resources.files(__package__).joinpath("data", file).read_bytes())


def key_error(file: str, place: str, problem: str, hint: str | None = None) -> TableError:
    """Make a TableError about a key of a file that has no rows and columns."""
    message = f"{file}, key {place}: {problem}" + (f"; hint: {hint}" if hint else "")
    return TableError(message, file=file, column=place)


def near(name: str, allowed: Sequence[str]) -> str | None:
    """Make the hint at the name that was most likely meant, if there is one."""
    guess = nearest(name, allowed)
    return f"the nearest name is {guess!r}" if guess else None


def _from_table(table: Table) -> list[Entry]:
    return [
        Entry(
            file=table.file,
            key=row.text("key"),
            place=row.text("key"),
            # Spreadsheets write the two in capitals.
            value={"true": True, "false": False}.get(key(row.text("value")), row.text("value")),
            grade=row.text("grade") or ANY,
            size=row.text("size") or ANY,
            source=row.text("source"),
            row=row,
        )
        for row in table.rows
    ]


def _from_toml(file: str, data: bytes) -> list[Entry]:
    if len(data) > MAX_BYTES:
        raise table_error(file, f"is larger than allowed; allowed: {MAX_BYTES // 1000} kB")
    too_deep = "is nested too deeply; allowed: keys, [tables] and [[steel]]"
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        problem = f"byte 0x{data[error.start]:02x} is not UTF-8; allowed: UTF-8 text"
        raise table_error(file, problem) from error
    for number, line in enumerate(text.splitlines(), 1):
        # The time that a dotted key takes grows with the square of its length.
        if line.count(".") > _MOST_DOTS and not line.lstrip().startswith("#"):
            raise table_error(file, too_deep, row=number)
    try:
        document = tomllib.loads(text)
    except RecursionError:
        raise table_error(file, too_deep) from None
    except ValueError as error:
        hint = "texts stand in quotes, numbers do not"
        raise table_error(file, f"is not TOML ({error}); allowed: TOML", hint) from error
    entries: list[Entry] = []
    for name, value in document.items():
        if name == "steel" and isinstance(value, list):
            entries += [_steel_price(file, number, item) for number, item in enumerate(value, 1)]
        elif isinstance(value, dict) and value:
            entries += [
                Entry(file=file, key=f"{name}.{part}", place=f"{name}.{part}", value=given)
                for part, given in value.items()
            ]
        else:
            entries.append(Entry(file=file, key=name, place=name, value=value))
    return entries


def _steel_price(file: str, number: int, item: Any) -> Entry:
    place = f"steel[{number}]"
    if not isinstance(item, dict) or "price" not in item:
        problem = (
            f"{shown(_plain(item))[1:-1]} has no price; allowed: a table with price, grade, size"
        )
        raise key_error(file, place, problem, "write [[steel]] and price below it")
    for name in item:
        if name not in _PRICE_KEYS:
            problem = f"unknown key {shown(name)}; allowed: {', '.join(_PRICE_KEYS)}"
            raise key_error(file, place, problem, near(name, _PRICE_KEYS))
    return Entry(
        file=file,
        key="steel",
        place=place,
        value=item["price"],
        grade=item.get("grade", ANY),
        size=item.get("size", ANY),
    )


def _plain(value: object) -> str:
    """Write a value of TOML for a message."""
    if isinstance(value, bool):
        return str(value).lower()
    try:
        return str(value)
    except (ValueError, RecursionError):
        # A number of thousands of digits, or tables within tables without end.
        return "a value too long to show"
