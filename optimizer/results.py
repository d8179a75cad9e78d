"""Results of a job: what `rank` and `check` return, and what every report is made from."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from engine import CheckedLayout, Section, check_layout, check_layouts
from optimizer.candidates import Candidate
from optimizer.conditions import envelope, floor_area
from optimizer.diagnosis import Diagnosis, diagnose
from optimizer.errors import DefectError, JobError
from optimizer.job import Job
from optimizer.problem import Problem
from optimizer.scoring import Score, score
from optimizer.search import Found, Search

LIGHTEST = "lightest"
FEWEST = "fewest bars"

Progress = Callable[[int, int, str], None]


@dataclass(frozen=True, slots=True, kw_only=True)
class RatedLayout:
    """A layout with its check, its score and its place in the list.

    Attributes
    ----------
    rank : int or None
        Line of the short list from 1; None for a layout shown beside the list.
    checked : CheckedLayout
        Positions, strength and all check rows.
    score : Score
        Terms of the practical score.
    marks : tuple of str
        ``lightest`` and ``fewest bars`` of all layouts that pass.
    """

    rank: int | None
    checked: CheckedLayout
    score: Score
    marks: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class RankedSection:
    """Result of one section of a ranking.

    Attributes
    ----------
    problem : Problem
        What was asked.
    layouts : tuple of RatedLayout
        The short list, best first; then the lightest and the one of fewest bars, where they
        are not in it. Empty if no layout passes.
    proved : bool
        Whether nothing left out is better; False if the work limit stopped the search.
    closing_value : float or None
        Score (or mass) of the last line of a full list: nothing left out is below it, variety
        apart. None where the list holds everything that the variety rule lets in. [lb/ft or kg/m]
    mass_floor : float or None
        Mass that no layout can be below; None if no amount of steel is enough. [lb/ft or kg/m]
    diagnosis : Diagnosis or None
        Why there is no layout.
    """

    problem: Problem
    layouts: tuple[RatedLayout, ...]
    proved: bool
    closing_value: float | None
    mass_floor: float | None
    diagnosis: Diagnosis | None

    @property
    def section(self) -> Section:
        """Section that was asked about."""
        return self.problem.section

    @property
    def status(self) -> str:
        """``ranked`` or ``no_layout``."""
        return "ranked" if self.layouts else "no_layout"


@dataclass(frozen=True, slots=True, kw_only=True)
class RankResult:
    """Result of `rank`: one entry a section, in the job's order."""

    job: Job
    sections: tuple[RankedSection, ...]

    @property
    def ok(self) -> bool:
        """Whether every section has a layout that passes."""
        return all(section.layouts for section in self.sections)


@dataclass(frozen=True, slots=True, kw_only=True)
class CheckedSection:
    """Result of one section of a check."""

    problem: Problem
    layout: RatedLayout

    @property
    def section(self) -> Section:
        """Section that was asked about."""
        return self.problem.section

    @property
    def status(self) -> str:
        """``passes`` or ``fails``."""
        return "passes" if self.layout.checked.ok else "fails"


@dataclass(frozen=True, slots=True, kw_only=True)
class CheckResult:
    """Result of `check`: one entry for each section with given layers."""

    job: Job
    sections: tuple[CheckedSection, ...]

    @property
    def ok(self) -> bool:
        """Whether every given layout passes."""
        return all(section.layout.checked.ok for section in self.sections)


def rank(job: Job, progress: Progress | None = None) -> RankResult:
    """Find the short list of every section of a job.

    Parameters
    ----------
    job : Job
        As read by `read_job`.
    progress : callable, optional
        Told the number of sections done, of all, and the mark of the next.

    Returns
    -------
    RankResult
        Ranked and fully checked layouts, or a diagnosis, for each section.
    """
    sections = []
    for number, problem in enumerate(job.problems):
        if progress is not None:
            progress(number, len(job.problems), problem.section.mark)
        sections.append(rank_section(problem))
    return RankResult(job=job, sections=tuple(sections))


def rank_section(problem: Problem) -> RankedSection:
    """Find the short list of one section.

    Parameters
    ----------
    problem : Problem
        Section, bars allowed and ranking.

    Returns
    -------
    RankedSection
        Ranked and fully checked layouts, or a diagnosis.

    Raises
    ------
    DefectError
        If the full check contradicts the search.
    """
    found = Search(problem).run()
    layouts = _rated(problem.section, found)
    full = len(found.chosen) == problem.ranking.keep
    return RankedSection(
        problem=problem,
        layouts=layouts,
        proved=found.proved,
        closing_value=found.chosen[-1].value(problem.ranking.by) if full else None,
        mass_floor=_mass_floor(problem),
        diagnosis=None if layouts else diagnose(problem),
    )


def _rated(section: Section, found: Found) -> tuple[RatedLayout, ...]:
    listed: list[Candidate] = list(found.chosen)
    beside = [item for item in (found.lightest, found.fewest) if item is not None]
    for extra in beside:
        if extra not in listed:
            listed.append(extra)
    checked = check_layouts(section, [candidate.layout for candidate in listed])
    rated = []
    for number, (candidate, check) in enumerate(zip(listed, checked, strict=True), 1):
        if not check.ok:
            broken = ", ".join(row.id for row in check.checks if not row.ok)
            msg = f"{section.mark}: search accepts {check.layout.label}, check refuses it: {broken}"
            raise DefectError(msg)
        marks = ((LIGHTEST, found.lightest), (FEWEST, found.fewest))
        rated.append(
            RatedLayout(
                rank=number if number <= len(found.chosen) else None,
                checked=check,
                score=candidate.score,
                marks=tuple(mark for mark, best in marks if best is candidate),
            )
        )
    return tuple(rated)


def _mass_floor(problem: Problem) -> float | None:
    section, sizes = problem.section, problem.rules.sizes
    deepest = section.outline.depth - section.bar_face - min(bar.diameter for bar in sizes) / 2
    area = floor_area(envelope(section), deepest)
    if math.isinf(area):
        return None
    return area * min(bar.mass / bar.area for bar in sizes)


def check(job: Job) -> CheckResult:
    """Check the layouts that a job gives.

    Parameters
    ----------
    job : Job
        Job in which at least one section has `layers`.

    Returns
    -------
    CheckResult
        The full check of each given layout.

    Raises
    ------
    JobError
        If no section gives a layout.
    """
    sections = []
    for problem in job.problems:
        if problem.drawn is None:
            continue
        checked = check_layout(problem.section, problem.drawn)
        rated = RatedLayout(
            rank=None,
            checked=checked,
            score=score(problem.drawn, checked.placement, problem.ranking),
        )
        sections.append(CheckedSection(problem=problem, layout=rated))
    if not sections:
        msg = 'job: layers: missing; expected in a section, as in layers = ["4 #8", "2 #8"]'
        raise JobError(msg)
    return CheckResult(job=job, sections=tuple(sections))
