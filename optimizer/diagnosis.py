"""What to say when no layout passes: how close it gets, what blocks, and what would help."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass, replace

import numpy as np

from engine import (
    Batch,
    CheckedLayout,
    Section,
    assess,
    check_layout,
    place,
)
from engine.assessment import ROUNDING
from engine.crack_control import largest_spacing
from engine.detailing_checks import section_rows
from engine.service import service_stress
from optimizer.conditions import envelope
from optimizer.families import Empty, Family, all_families, family_of
from optimizer.model import blocking_rules, enumerate_family
from optimizer.problem import Problem
from optimizer.remedies import Remedy, remedies
from optimizer.search import layout_of, one_size_counts
from optimizer.totals import possible_totals

_WEAKEST = 1e-3  # share of Mu from which the strongest layout is looked for
_ROUND = 64  # layouts listed at a time while looking for the strongest
_REJECTED_SHOWN = 40  # layouts checked in full to see why the engine rejects them


@dataclass(frozen=True, slots=True, kw_only=True)
class Block:
    """A rule that leaves layouts out.

    Attributes
    ----------
    id : str
        Check row.
    families : int
        Families of layouts (largest size, second size, layers) in which it takes part.
    of : int
        Number of all families.
    """

    id: str
    families: int
    of: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Diagnosis:
    """Why a section has no layout.

    Attributes
    ----------
    strongest : CheckedLayout or None
        Layout of greatest design strength among those that meet every other rule.
    blocked_by : tuple of Block
        Rules that together leave nothing, the most frequent first.
    remedies : tuple of Remedy
        Single changes that help.
    """

    strongest: CheckedLayout | None
    blocked_by: tuple[Block, ...]
    remedies: tuple[Remedy, ...]


def diagnose(problem: Problem) -> Diagnosis:
    """Explain a section in which no layout passes.

    Parameters
    ----------
    problem : Problem
        Problem whose search found nothing.

    Returns
    -------
    Diagnosis
        Strongest layout, blocking rules and remedies.
    """
    return Diagnosis(
        strongest=_strongest(problem),
        blocked_by=_blocked_by(problem),
        remedies=tuple(remedies(problem)),
    )


def _blocked_by(problem: Problem) -> tuple[Block, ...]:
    section, work = problem.section, problem.ranking.work_limit
    failing = [row.id for row in section_rows(section) if not row.ok]
    if failing:
        return tuple(Block(id=rule, families=1, of=1) for rule in failing)
    found: Counter[str] = Counter()
    everything = all_families(envelope(section), problem.rules)
    for item in everything:
        if isinstance(item, Empty):
            found.update(item.rules)
            continue
        rules = blocking_rules(item, work)
        found.update(rules or _rejecting_rules(section, item, work))
    return tuple(
        Block(id=rule, families=count, of=len(everything)) for rule, count in found.most_common()
    )


def _rejecting_rules(section: Section, family: Family, work: float) -> set[str]:
    """Rules by which the engine rejects counts that the necessary conditions leave in."""
    listed = enumerate_family(family, None, work, stop_after=_REJECTED_SHOWN)
    rules: set[str] = set()
    for counts in listed.counts:
        checks = check_layout(section, layout_of(family, counts)).checks
        rules |= {check.id for check in checks if not check.ok}
    return rules


def _strongest(problem: Problem) -> CheckedLayout | None:
    """Layout of greatest phi Mn that meets every rule but the strength itself.

    The search is for layouts stronger than the best so far: its strength is set as the
    demand, the solver lists a few layouts, the engine picks the strongest, and so on until
    a family has none left.
    """
    section, work = problem.section, problem.ranking.work_limit
    if any(not row.ok for row in section_rows(section)):
        return None
    best: tuple[float, Family, np.ndarray[tuple[int, ...], np.dtype[np.int64]]] | None = None

    def improve(family: Family, counts: np.ndarray[tuple[int, ...], np.dtype[np.int64]]) -> bool:
        nonlocal best
        if not len(counts):
            return False
        batch = Batch(bars=family.bars, counts=counts)
        found = assess(section, batch)
        # Layouts weaker than Mu cannot use the exemption of 9.6.1.3: it asks for more than Mu.
        sound = found.ductile & found.stack_fits & (found.As >= found.As_min * (1 - ROUNDING))
        s = largest_spacing(section.edition, service_stress(section, batch), section.bar_face)
        for row in np.argsort(-found.phi_Mn, kind="stable"):
            value = float(found.phi_Mn[row])
            if best is not None and value <= best[0] * (1 + ROUNDING):
                return False
            if not sound[row]:
                continue
            placement = place(section, layout_of(family, counts[row]))
            if placement.gaps_fit and placement.layers[0].spacing <= s[row] * (1 + ROUNDING):
                best = (value, family, counts[row])
                return True
        return False

    def stronger(value: float) -> Section:
        # The demand enters the conditions on strength and minimum steel only; the latter's
        # exemption asks for less at a lower demand, so nothing is lost.
        return replace(section, Mu=value if section.sagging else -value)

    shared = envelope(section)
    members = [item for item in all_families(shared, problem.rules) if isinstance(item, Family)]
    for family in members:
        if len(family.bars) == 1:
            improve(family, one_size_counts(family)[:, :, None])
    for member in members:
        limit = _ROUND
        while True:
            target = section.demand * _WEAKEST if best is None else best[0]
            raised = family_of(envelope(stronger(target)), member.bars, member.layers)
            if isinstance(raised, Empty) or not len(possible_totals(raised).counts):
                break
            listed = enumerate_family(raised, None, work, stop_after=limit)
            if not improve(raised, listed.counts):
                if listed.complete or len(listed.counts) < limit:
                    break  # all listed, or the work limit reached
                limit *= 4
    if best is None:
        return None
    return check_layout(section, layout_of(best[1], best[2]))
