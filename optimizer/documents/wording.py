"""Numbers, units and texts as the page writes them; nothing here is read as mark-up."""

from __future__ import annotations

import html
import re
import unicodedata
from dataclasses import dataclass

from engine import Check, Edition, State
from engine.units import UnitSystem, plain

VERDICTS = {
    State.OK: "OK",
    State.FAILS: "FAILS",
    State.PROVIDE: "PROVIDE",
    State.NOT_APPLICABLE: "does not apply",
}
_HIDDEN = "\ufffd"  # the replacement character: something stood here
# Control characters, lone surrogates and unassigned places cannot be written to a page.
# Format characters stay, since joiners belong to some scripts; those that turn the direction
# of what follows do not.
_REFUSED = {"Cc", "Cs", "Cn"}
_TURNING = {*"\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069"}
_SUB = re.compile(r"_\{([^{}]*)\}")
_SUP = re.compile(r"\^\{([^{}]*)\}")


def visible(text: str) -> str:
    """Make a foreign text fit to stand on a page.

    Parameters
    ----------
    text : str
        Mark, title or designation, as given.

    Returns
    -------
    str
        The same with blanks for breaks, and the replacement character for what cannot be shown.
        Mark-up is left as it is: to escape it is the writer's part.
    """
    shown = []
    for character in text:
        if character in "\t\n\r":
            shown.append(" ")
        elif unicodedata.category(character) in _REFUSED or character in _TURNING:
            shown.append(_HIDDEN)
        else:
            shown.append(character)
    return "".join(shown)


def formula(text: str) -> str:
    """Write a formula as HTML.

    Parameters
    ----------
    text : str
        With ``_{...}`` for what stands low and ``^{...}`` for what stands high.

    Returns
    -------
    str
        Escaped HTML with sub and sup elements.
    """
    escaped = html.escape(visible(text))
    return _SUP.sub(r"<sup>\1</sup>", _SUB.sub(r"<sub>\1</sub>", escaped))


def heading(name: str) -> str:
    """Turn an id into words.

    Parameters
    ----------
    name : str
        ``clear_gap``.

    Returns
    -------
    str
        ``Clear gap``.
    """
    return name.replace("_", " ").capitalize()


@dataclass(frozen=True, slots=True)
class Figures:
    """Writes quantities of one edition with their units.

    Attributes
    ----------
    edition : Edition
        Decides the units.
    """

    edition: Edition

    @property
    def system(self) -> UnitSystem:
        """Unit system of the edition."""
        return self.edition.system

    @property
    def per_moment(self) -> float:
        """Force times length over the trade's unit of moment: 12 in/ft or 1000 mm/m. [-]"""
        return 12.0 if self.system.name == "us" else 1000.0

    def unit(self, kind: str) -> str:
        """Unit of the trade with raised numbers: ``in²``, ``kip·ft``."""
        return self.system.trade.get(kind, "").replace("^2", "²").replace("*", "·")

    def of(self, kind: str, value: float) -> str:
        """A quantity to four digits with its unit."""
        if kind == "strain":
            return f"{value:.5f}"
        return f"{self.bare(kind, value)} {self.unit(kind)}".strip()

    def bare(self, kind: str, value: float) -> str:
        """A quantity to four digits in its unit, which is not written."""
        return plain(self.system.to_trade(kind, value)).replace("-", "−")

    def length(self, value: float) -> str:
        """A length with its unit."""
        return self.of("length", value)

    def moment(self, value: float, *, signed: bool = False) -> str:
        """A moment to one decimal with its unit."""
        size = self.system.to_trade("moment", value)
        text = f"{size:+.1f}" if signed else f"{size:.1f}"
        return f"{text} {self.unit('moment')}".replace("-", "−")


@dataclass(frozen=True, slots=True, kw_only=True)
class CheckLine:
    """One check row as text.

    Attributes
    ----------
    id, name, clause, demand, limit, use, verdict, state, note : str
        Texts; empty where the row has none. `state` is a word for the style.
    """

    id: str
    name: str
    clause: str
    demand: str
    limit: str
    use: str
    verdict: str
    state: str
    note: str


def check_line(row: Check, figures: Figures) -> CheckLine:
    """Write one check row.

    Parameters
    ----------
    row : Check
        As the engine made it.
    figures : Figures
        Units.

    Returns
    -------
    CheckLine
        Its texts.
    """
    demand, limit = (
        "" if value is None else size_of(row.quantity, value, figures)
        for value in (row.demand, row.limit)
    )
    return CheckLine(
        id=row.id,
        name=heading(row.id),
        clause=row.clause,
        demand=demand,
        limit=limit,
        use="" if row.ratio is None else f"{100 * row.ratio:.0f} %",
        verdict=VERDICTS[row.state],
        state=state_word(row.state),
        note=visible(row.note.replace("^2", "²")),
    )


def state_word(state: State) -> str:
    """Word for the style sheet.

    Parameters
    ----------
    state : State
        Verdict.

    Returns
    -------
    str
        ``ok``, ``fails``, ``provide`` or ``none``.
    """
    return "none" if state is State.NOT_APPLICABLE else state.value


def size_of(quantity: str, value: float, figures: Figures) -> str:
    """Write the demand or the limit of a row.

    Parameters
    ----------
    quantity : str
        Kind of quantity of the row.
    value : float
        In the edition's inner unit. [in, in^2, lbf*in, psi or mm, mm^2, N*mm, MPa]
    figures : Figures
        Units.

    Returns
    -------
    str
        With its unit.
    """
    return figures.moment(value) if quantity == "moment" else figures.of(quantity, value)
