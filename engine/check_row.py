"""One rule held against one layout: the row that every check is made of."""

from __future__ import annotations

from dataclasses import dataclass
from enum import Enum


class State(Enum):
    """Verdict of a row."""

    OK = "ok"
    FAILS = "fails"
    PROVIDE = "provide"
    """Met only if what the note asks for is provided beside this layout."""
    NOT_APPLICABLE = "not applicable"


@dataclass(frozen=True, slots=True, kw_only=True)
class Check:
    """One rule held against one layout.

    Attributes
    ----------
    id : str
        Name of the rule.
    clause : str
        Clause in the section's edition.
    quantity : str
        Kind of `demand` and `limit`: ``moment``, ``strain``, ``area``, ``length`` or ``none``.
    demand, limit : float or None
        What is asked for and what it is held against, in the edition's inner units.
    ratio : float or None
        Demand over capacity; 1.0 is the limit. None where it has no meaning.
    state : State
        Verdict.
    note : str
        What a reader needs to know beside the numbers.
    """

    id: str
    clause: str
    quantity: str = "none"
    demand: float | None = None
    limit: float | None = None
    ratio: float | None = None
    state: State
    note: str = ""

    @property
    def ok(self) -> bool:
        """Whether the rule is not broken."""
        return self.state is not State.FAILS


def ratio_of(demand: float, capacity: float) -> float | None:
    """Demand over capacity.

    Parameters
    ----------
    demand, capacity : float
        Both in the same unit. [-]

    Returns
    -------
    float or None
        Their ratio, or None where the capacity is not positive. [-]
    """
    return demand / capacity if capacity > 0.0 else None


def verdict(good: bool) -> State:
    """State of a row that holds or fails.

    Parameters
    ----------
    good : bool
        Whether the rule holds.

    Returns
    -------
    State
        OK or FAILS.
    """
    return State.OK if good else State.FAILS
