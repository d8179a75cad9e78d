"""What can go wrong when a catalogue is asked or read.

::

    ValueError
    └── CatalogError              anything a catalogue refuses
        ├── UnknownNameError      a catalogue, bar or grade that is not listed
        └── TableError            a table file that cannot be read or trusted
"""

from collections.abc import Sequence

__all__ = ["CatalogError", "TableError", "UnknownNameError"]


class CatalogError(ValueError):
    """A catalogue was asked for, or given, something it cannot accept."""


class UnknownNameError(CatalogError):
    """The name asked for is not listed.

    Parameters
    ----------
    message : str
        What was asked for and what is allowed.
    name : str
        The name as given by the caller.
    allowed : sequence of str
        The names that would have been found.
    """

    def __init__(self, message: str, *, name: str = "", allowed: Sequence[str] = ()) -> None:
        super().__init__(message)
        self.name = name
        self.allowed = tuple(allowed)


class TableError(CatalogError):
    """A table file is missing, unreadable or holds a value that cannot be right.

    Parameters
    ----------
    message : str
        File, place, value, what is allowed.
    file : str
        The file as shown to the user.
    row : int or None
        Row of the file, counted from 1 as a spreadsheet does; None for the file as a whole.
    column : str or None
        Name of the column; None for the row as a whole.
    """

    def __init__(
        self, message: str, *, file: str = "", row: int | None = None, column: str | None = None
    ) -> None:
        super().__init__(message)
        self.file = file
        self.row = row
        self.column = column
