"""The lines that a worked check is made of."""

from __future__ import annotations

from dataclasses import dataclass

from engine import Check, CheckedLayout, State


@dataclass(frozen=True, slots=True, kw_only=True)
class Line:
    """One step of a worked check.

    Attributes
    ----------
    subject : str
        What is worked out, in words.
    clause : str
        Clause of the edition; empty for plain mechanics.
    formula, numbers, result : str
        The formula in the code's symbols, the same with numbers, and what comes out.
        ``_{...}`` and ``^{...}`` stand low and high.
    note : str
        What a reader needs to know beside them.
    state : State or None
        Verdict, where the line ends in one.
    check : str
        Id of the check row that it belongs to.
    """

    subject: str
    clause: str = ""
    formula: str = ""
    numbers: str = ""
    result: str = ""
    note: str = ""
    state: State | None = None
    check: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Part:
    """Lines of one subject."""

    title: str
    lines: tuple[Line, ...]


def row_of(checked: CheckedLayout, row_id: str) -> Check:
    """Find a row of a check.

    Parameters
    ----------
    checked : CheckedLayout
        Layout with all rows.
    row_id : str
        Name of the row.

    Returns
    -------
    Check
        The row.
    """
    return next(row for row in checked.checks if row.id == row_id)
