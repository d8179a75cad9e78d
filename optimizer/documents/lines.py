"""The lines that a worked check is made of."""

from __future__ import annotations

from dataclasses import dataclass

from engine import Check, CheckedLayout, State
from engine.units import plain
from optimizer.documents.wording import VERDICTS, state_word


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
    equal : bool
        Whether `numbers` is `formula` with its values, and not words beside it.
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
    equal: bool = True
    result: str = ""
    note: str = ""
    state: State | None = None
    check: str = ""

    @property
    def verdict(self) -> str:
        """The verdict in words; empty without one."""
        return "" if self.state is None else VERDICTS[self.state]

    @property
    def kind(self) -> str:
        """The verdict's word for the style sheet."""
        return "" if self.state is None else state_word(self.state)


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


def compared(value: float, limit: float, unit: str, *, least: bool, ok: bool) -> str:
    """Write a value beside its limit, with the sign that the verdict says.

    Parameters
    ----------
    value, limit : float
        Both in the unit of the text. [unit]
    unit : str
        Unit.
    least : bool
        Whether the limit is the least value allowed, not the largest.
    ok : bool
        Verdict.

    Returns
    -------
    str
        ``302.5 ≥ 300 kip·ft``. More digits where four would not part the two.
    """
    sign = {(True, True): "≥", (True, False): "<", (False, True): "≤", (False, False): ">"}[
        (least, ok)
    ]
    first, second = plain(value), plain(limit)
    if not ok and first == second:
        first, second = f"{value:.7g}", f"{limit:.7g}"
    return f"{first} {sign} {second} {unit}".strip()
