"""Checks of a beam as its documents list them: the governing one of each kind, then all."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from engine import Edition, State
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.words import length_text
from optimizer.documents.wording import VERDICTS, Figures, heading, size_of, state_word, visible


@dataclass(frozen=True, slots=True, kw_only=True)
class BeamCheckLine:
    """One check as text; empty where it has nothing to say. `state` is a word for the style."""

    id: str
    name: str
    clause: str
    where: str
    at: str
    demand: str
    limit: str
    use: str
    verdict: str
    state: str
    note: str


def by_kind(checks: Sequence[BeamCheck]) -> list[tuple[BeamCheck, list[BeamCheck]]]:
    """Gather checks of one kind, with the one that governs.

    Parameters
    ----------
    checks : sequence of BeamCheck
        All checks.

    Returns
    -------
    list of (BeamCheck, list of BeamCheck)
        For each kind, in the order in which it first occurs: the check that fails or comes
        nearest to failing, and all.
    """
    kinds: dict[str, list[BeamCheck]] = {}
    for row in checks:
        kinds.setdefault(row.id, []).append(row)
    return [(max(rows, key=_severity), rows) for rows in kinds.values()]


_SEVERITY = {State.FAILS: 3, State.PROVIDE: 2, State.OK: 1, State.NOT_APPLICABLE: 0}


def _severity(row: BeamCheck) -> tuple[bool, float, int]:
    fails = row.state is State.FAILS
    applies = row.state is not State.NOT_APPLICABLE
    ratio = row.ratio if row.ratio is not None and applies else -1.0
    return fails, ratio, _SEVERITY[row.state]


def beam_check_line(row: BeamCheck, edition: Edition) -> BeamCheckLine:
    """Write one check.

    Parameters
    ----------
    row : BeamCheck
        Check.
    edition : Edition
        Decides the units.

    Returns
    -------
    BeamCheckLine
        Its texts.
    """
    figures = Figures(edition)
    demand, limit = (
        "" if value is None else size_of(row.quantity, value, figures)
        for value in (row.demand, row.limit)
    )
    return BeamCheckLine(
        id=row.id,
        name=heading(row.id),
        clause=row.clause,
        where=visible(row.where),
        at="" if row.at is None else length_text(edition, row.at),
        demand=demand,
        limit=limit,
        use="" if row.ratio is None else f"{100 * row.ratio:.0f} %",
        verdict=VERDICTS[row.state],
        state=state_word(row.state),
        note=visible(row.note.replace("^2", "²")),
    )
