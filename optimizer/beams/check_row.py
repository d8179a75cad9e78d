"""One rule held against one place of a beam."""

from __future__ import annotations

from dataclasses import dataclass

from engine.check_row import State


@dataclass(frozen=True, slots=True, kw_only=True)
class BeamCheck:
    """One rule held against one place of a beam.

    Attributes
    ----------
    id : str
        Name of the rule.
    clause : str
        Clause of the edition.
    where : str
        Span or support, and what of it: ``A-B``, ``B top``.
    at : float or None
        Place on the beam's axis that governs, where there is one. [in or mm]
    quantity : str
        Kind of `demand` and `limit`: ``moment``, ``force``, ``length``, ``area``, ``strain``
        or ``none``.
    demand, limit : float or None
        What is asked for and what it is held against, in inner units.
    ratio : float or None
        Demand over capacity; 1.0 is the limit.
    state : State
        Verdict.
    note : str
        What a reader needs to know beside the numbers.
    """

    id: str
    clause: str
    where: str
    at: float | None = None
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
