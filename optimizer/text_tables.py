"""Tables of texts: what the terminal and the page show alike."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True, kw_only=True)
class TextTable:
    """Rows of texts under a title.

    Attributes
    ----------
    title : str
        What the table shows.
    columns : tuple of str
        Names; one that starts with ``>`` is of numbers, one with ``*`` of short texts that are
        never broken into lines.
    rows : tuple of tuple of str
        Cells.
    """

    title: str
    columns: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]

    @property
    def names(self) -> list[str]:
        """Names of the columns without what they start with."""
        return [column.lstrip(">*") for column in self.columns]

    def is_number(self, column: int) -> bool:
        """Whether a column holds numbers."""
        return self.columns[column].startswith(">")

    def is_whole(self, column: int) -> bool:
        """Whether the cells of a column are never broken into lines."""
        return self.columns[column][:1] in (">", "*")


@dataclass(frozen=True, slots=True, kw_only=True)
class Paragraph:
    """One paragraph between tables.

    Attributes
    ----------
    text : str
        Text.
    strong : bool
        Whether it stands out.
    """

    text: str
    strong: bool = False


Block = TextTable | Paragraph
