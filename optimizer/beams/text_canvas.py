"""A page of characters: lines and texts at columns and rows."""

from __future__ import annotations

import unicodedata
from collections.abc import Iterable
from dataclasses import dataclass


def cells(text: str) -> list[str]:
    """Split a text into terminal cells.

    Parameters
    ----------
    text : str
        Printable text.

    Returns
    -------
    list of str
        One entry a column; the second column of a wide character is empty, and what combines
        with a character stands in its cell.
    """
    found: list[str] = []
    for character in text:
        if found and unicodedata.combining(character):
            # The second half of a wide character is empty: the mark belongs to the first.
            at = -2 if not found[-1] and len(found) > 1 else -1
            found[at] += character
            continue
        found.append(character)
        if unicodedata.east_asian_width(character) in "WF":
            found.append("")
    return found


class Canvas:
    """Characters addressed by column and row; rows come as they are needed.

    Parameters
    ----------
    columns : int
        Width; what lies beyond is dropped.
    """

    def __init__(self, columns: int) -> None:
        self.columns = columns
        self.rows: list[list[str]] = []

    def put(self, column: int, row: int, text: str) -> None:
        """Write a text from a column on."""
        while row >= len(self.rows):
            self.rows.append([" "] * self.columns)
        for number, cell in enumerate(cells(text)):
            if 0 <= column + number < self.columns:
                self.rows[row][column + number] = cell

    def fill(self, first: int, last: int, row: int, character: str) -> None:
        """Draw a line from column to column, both included."""
        self.put(first, row, character * max(0, last - first + 1))

    def lines(self) -> list[str]:
        """Rows without the blanks at their ends."""
        return ["".join(row).rstrip() for row in self.rows]


@dataclass(frozen=True, slots=True)
class Label:
    """A text around a column."""

    centre: float
    text: str


def place_labels(canvas: Canvas, row: int, labels: Iterable[Label]) -> int:
    """Write labels without overlap, in as few rows as a simple order needs.

    Parameters
    ----------
    canvas : Canvas
        Page.
    row : int
        First row.
    labels : iterable of Label
        Texts, from left to right.

    Returns
    -------
    int
        Row below the last one used.
    """
    ends: list[int] = []
    for label in labels:
        width = len(cells(label.text))
        column = round(label.centre - width / 2.0)
        column = max(0, min(column, canvas.columns - width))
        at = next((number for number, end in enumerate(ends) if column > end + 1), len(ends))
        if at == len(ends):
            ends.append(-2)
        ends[at] = column + width - 1
        canvas.put(column, row + at, label.text)
    return row + len(ends)
