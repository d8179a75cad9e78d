"""Sections designed before, under new moments or outlines: what works, what least to change.

Sections do not depend on one another, so the least-change frontier needs no search beyond
their own: those that must change do, and of the others the largest savings come first.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Annotated, Any

from pydantic import BaseModel, ConfigDict, Field, ValidationError

from engine import CheckedLayout, check_layout
from optimizer.errors import JobError
from optimizer.job import Job
from optimizer.job_messages import short
from optimizer.record import Record
from optimizer.results import Progress, RankedSection, RankResult, rank
from optimizer.scoring import score


class _Section(BaseModel):
    model_config = ConfigDict(extra="forbid", frozen=True)
    layers: Annotated[
        list[Annotated[str, Field(max_length=200)]], Field(min_length=1, max_length=9)
    ]


class _Sections(BaseModel):
    model_config = ConfigDict(extra="forbid", frozen=True)
    sections: dict[str, _Section]


def drawn_sections(result: RankResult) -> dict[str, object]:
    """What the record of a ranking holds: the first line of every section.

    Parameters
    ----------
    result : RankResult
        Ranking.

    Returns
    -------
    dict
        Layers by mark of the section; sections without a layout are left out.
    """
    return {
        "sections": {
            item.section.mark: {
                "layers": [layer.label for layer in item.layouts[0].checked.layout.layers]
            }
            for item in result.sections
            if item.layouts
        }
    }


def layers_of(record: Record) -> dict[str, tuple[str, ...]]:
    """Layouts that a record of sections holds.

    Parameters
    ----------
    record : Record
        Record.

    Returns
    -------
    dict of str to tuple of str
        Layers by mark.

    Raises
    ------
    JobError
        If the record is of a beam, or its design is damaged.
    """
    if record.kind != "sections":
        msg = f"{record.name}: a record of a {record.kind}; expected that of sections"
        raise JobError(msg)
    try:
        keys = _Sections.model_validate(record.design)
    except ValidationError as error:
        first = error.errors(include_url=False)[0]
        where = ".".join(short(str(part)) for part in first["loc"])
        msg = f"{record.name}: design.{where}: {first['msg']}; the record is damaged"
        raise JobError(msg) from None
    return {mark: tuple(item.layers) for mark, item in keys.sections.items()}


def with_layers(job: Mapping[str, Any], old: Mapping[str, Sequence[str]]) -> dict[str, Any]:
    """The keys of a job with the layouts of a record as its given layouts.

    Parameters
    ----------
    job : mapping
        Keys of the job.
    old : mapping of str to sequence of str
        Layers by mark.

    Returns
    -------
    dict
        Keys in which each section of the record has its layers, and no other section any.
    """
    sections = []
    for section in job.get("section", []):
        keys = {key: value for key, value in section.items() if key != "layers"}
        if section.get("mark") in old:
            keys["layers"] = list(old[section["mark"]])
        sections.append(keys)
    return {**job, "section": sections}


@dataclass(frozen=True, slots=True, kw_only=True)
class SectionVerdict:
    """What becomes of one section.

    Attributes
    ----------
    ranked : RankedSection
        The short list under the new demands.
    before : str
        Layout as drawn, or empty where there was none.
    checked : CheckedLayout or None
        Check of that layout under the new demands; None where there was none.
    cost_before, cost_best : float or None
        Value that the ranking orders by, times the length: of the layout as drawn, where it
        works, and of the best. [lb/ft or kg/m; lb or kg with lengths]
    mass_before, mass_best : float or None
        Mass in the same way.
    """

    ranked: RankedSection
    before: str
    checked: CheckedLayout | None
    cost_before: float | None
    cost_best: float | None
    mass_before: float | None
    mass_best: float | None

    @property
    def mark(self) -> str:
        """Mark of the section."""
        return self.ranked.section.mark

    @property
    def works(self) -> bool:
        """Whether the layout as drawn passes every check."""
        return self.cost_before is not None


@dataclass(frozen=True, slots=True, kw_only=True)
class SectionStep:
    """One step of the frontier.

    Attributes
    ----------
    changes : int
        Sections that may change.
    changed : tuple of str
        Those that do; empty where there is no answer.
    possible : bool
        Whether so few changes are enough.
    cost, mass : float or None
        Totals of the job.
    """

    changes: int
    changed: tuple[str, ...]
    possible: bool
    cost: float | None
    mass: float | None


@dataclass(frozen=True, slots=True, kw_only=True)
class SectionsRespan:
    """Answer to a change of a job of sections.

    Attributes
    ----------
    job : Job
        Job after the change.
    verdicts : tuple of SectionVerdict
        One for each section, in the job's order.
    steps : tuple of SectionStep
        The frontier, until nothing is left to gain.
    locked : tuple of str
        Sections that were not allowed to change.
    gone : tuple of str
        Marks of the record that the job no longer has.
    """

    job: Job
    verdicts: tuple[SectionVerdict, ...]
    steps: tuple[SectionStep, ...]
    locked: tuple[str, ...]
    gone: tuple[str, ...]

    @property
    def ok(self) -> bool:
        """Whether some step serves every section."""
        return any(step.possible for step in self.steps)


def respan_sections(
    job: Job,
    old: Mapping[str, Sequence[str]],
    locked: Sequence[str] = (),
    progress: Progress | None = None,
) -> SectionsRespan:
    """Design changed sections again, keeping as much of the old as pays.

    Parameters
    ----------
    job : Job
        Job after the change, read from keys that `with_layers` gave the layouts as drawn.
    old : mapping of str to sequence of str
        Layers as drawn, by mark.
    locked : sequence of str
        Marks of sections that must stay.
    progress : callable, optional
        Told what is being done.

    Returns
    -------
    SectionsRespan
        Verdicts and frontier.

    Raises
    ------
    JobError
        If a locked section is unknown.
    """
    for name in locked:
        if name not in old:
            msg = f"--lock: no section {name!r}; allowed: {', '.join(old)}"
            raise JobError(msg)
    ranked = rank(job, progress)
    verdicts = tuple(_verdict(item, old.get(item.section.mark)) for item in ranked.sections)
    marks = {item.mark for item in verdicts}
    return SectionsRespan(
        job=job,
        verdicts=verdicts,
        steps=tuple(_steps(verdicts, frozenset(locked))),
        locked=tuple(locked),
        gone=tuple(mark for mark in old if mark not in marks),
    )


def _verdict(ranked: RankedSection, layers: Sequence[str] | None) -> SectionVerdict:
    problem = ranked.problem
    checked = None
    if layers is not None and problem.drawn is not None:
        checked = check_layout(problem.section, problem.drawn)
    best = ranked.layouts[0] if ranked.layouts else None
    by, length = problem.ranking.by, problem.length
    before = mass_before = cost_best = mass_best = None
    if checked is not None and checked.ok:
        mass_before = checked.layout.mass * length
        total = score(checked.layout, checked.placement, problem.ranking).total
        before = mass_before if by == "lightest" else total * length
    if best is not None:
        mass_best = best.checked.layout.mass * length
        cost_best = mass_best if by == "lightest" else best.score.total * length
    return SectionVerdict(
        ranked=ranked,
        before=" / ".join(layers or ()),
        checked=checked,
        cost_before=before,
        cost_best=cost_best,
        mass_before=mass_before,
        mass_best=mass_best,
    )


def _steps(verdicts: Sequence[SectionVerdict], locked: frozenset[str]) -> list[SectionStep]:
    forced = [item for item in verdicts if not item.works]
    impossible = any(item.cost_best is None or item.mark in locked for item in forced)
    free = [item for item in verdicts if item.works and item.mark not in locked]
    gains = sorted(
        (item for item in free if _gain(item) > 1e-6), key=lambda item: (-_gain(item), item.mark)
    )
    steps = [
        SectionStep(changes=count, changed=(), possible=False, cost=None, mass=None)
        for count in range(len(forced))
    ]
    if impossible:
        count = len(forced)
        steps.append(SectionStep(changes=count, changed=(), possible=False, cost=None, mass=None))
        return steps
    for count in range(len(gains) + 1):
        changing = {item.mark for item in (*forced, *gains[:count])}
        cost = mass = 0.0
        for item in verdicts:
            new = item.mark in changing
            cost += (item.cost_best if new else item.cost_before) or 0.0
            mass += (item.mass_best if new else item.mass_before) or 0.0
        steps.append(
            SectionStep(
                changes=len(changing),
                changed=tuple(item.mark for item in verdicts if item.mark in changing),
                possible=True,
                cost=cost,
                mass=mass,
            )
        )
    return steps


def _gain(item: SectionVerdict) -> float:
    """What a change of a section that works would save."""
    if item.cost_before is None or item.cost_best is None:
        return 0.0
    return item.cost_before - item.cost_best
