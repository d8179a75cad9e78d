"""A beam after changes: its problem, or one problem for each length of a range."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from optimizer.beams.problem import Analysis, BeamProblem
from optimizer.beams.reader import parse_beam_keys
from optimizer.beams.sweep import is_range, lengths_of
from optimizer.change_request import (
    Asked,
    ChangedJob,
    Entries,
    changed_job,
    changes_of,
    job_before_changes,
)
from optimizer.changes_text import Change
from optimizer.errors import JobError
from optimizer.record import Record

_GROUPS = ("materials", "bars", "ranking", "beam")


@dataclass(frozen=True, slots=True, kw_only=True)
class ChangedBeam:
    """A beam after changes.

    Attributes
    ----------
    job : ChangedJob
        Its job; of a range, that of the shortest span.
    problem : BeamProblem
        The beam; of a range, that of the shortest span.
    span : str
        Mark of the span that has a range; empty without one.
    of_lengths : mapping of float to BeamProblem
        Beam for each length of the range. [in or mm]
    """

    job: ChangedJob
    problem: BeamProblem
    span: str = ""
    of_lengths: Mapping[float, BeamProblem]


def changed_beam(record: Record, path: Path, asked: Asked) -> ChangedBeam:
    """Make the changes asked for to the beam of a record.

    Parameters
    ----------
    record : Record
        Record of a beam.
    path : Path
        Its file.
    asked : Asked
        What is asked.

    Returns
    -------
    ChangedBeam
        The beam after them.

    Raises
    ------
    JobError
        If the record's job is damaged, a change is none, or the beam after them is none.
    """
    before = job_before_changes(record, path, asked)
    problem = _read(before)
    spans: Entries = {span.mark: ("span", n) for n, span in enumerate(problem.beam.spans)}
    supports: Entries = {
        support.mark: ("support", n) for n, support in enumerate(problem.beam.supports)
    }
    entries = {**spans, **supports}
    changes = changes_of(asked, spans, supports, entries, _GROUPS)
    ranges = [change for change in changes if is_range(change.value)]
    _check_envelopes(problem, changes, spans, new=asked.job is not None)
    if not ranges:
        after = changed_job(before, changes, entries, _GROUPS)
        return ChangedBeam(job=after, problem=_read(after), of_lengths={})
    first = ranges[0]
    if len(ranges) > 1 or first.key != "length" or first.target not in spans:
        msg = f"{ranges[-1].option}: got a range; allowed: one range, of the length of a span"
        raise JobError(msg)
    system = problem.edition.system
    unit = system.inner["length"]
    jobs = {}
    for length in lengths_of(str(first.value), system, first.option):
        at = Change(
            option=first.option,
            target=first.target,
            key=first.key,
            value=f"{length:.9g} {unit}",
        )
        own = [at if change is first else change for change in changes]
        jobs[length] = changed_job(before, own, entries, _GROUPS)
    # All are read before any work, so that a fault of one is told at once.
    problems = {length: _read(job) for length, job in jobs.items()}
    shortest = min(jobs)
    return ChangedBeam(
        job=jobs[shortest],
        problem=problems[shortest],
        span=first.target,
        of_lengths=problems,
    )


def _read(job: ChangedJob) -> BeamProblem:
    def parse(keys: Mapping[str, Any], base: Path) -> BeamProblem:
        return parse_beam_keys(keys, name=job.name, base=base)

    return job.read(parse)


def _check_envelopes(
    problem: BeamProblem, changes: Sequence[Change], spans: Entries, *, new: bool
) -> None:
    """Moments that the user has given are those of the spans and loads they were made for."""
    if problem.analysis is not Analysis.GIVEN:
        return
    renewed = {change.target for change in changes if change.key == "envelope"}
    for change in changes:
        if change.key != "length" or change.target not in spans:
            continue
        if not renewed >= set(spans) or is_range(change.value):
            hint = "give the new envelope of every span by --set, or a new job by --job"
            if new:
                hint = "change the length in the new job, with its envelopes"
            msg = (
                f"{change.option}: moments of this beam are given in envelopes, and all of them"
                f" change with the span {change.target}; hint: {hint}"
            )
            raise JobError(msg)
