"""A job of sections after changes, with the layouts of its record."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from optimizer.change_request import (
    Asked,
    ChangedJob,
    Entries,
    changed_job,
    changes_of,
    job_before_changes,
)
from optimizer.errors import JobError
from optimizer.job import Job, parse_job_keys
from optimizer.record import Record
from optimizer.respan_sections import layers_of, with_layers

_GROUPS = ("materials", "bars", "ranking", "options")


@dataclass(frozen=True, slots=True, kw_only=True)
class ChangedSections:
    """A job of sections after changes.

    Attributes
    ----------
    keys : ChangedJob
        Keys and tables, with the layouts that the job itself gives.
    job : Job
        Job with the layouts of the record.
    layers : dict of str to tuple of str
        Layouts of the record by mark.
    """

    keys: ChangedJob
    job: Job
    layers: dict[str, tuple[str, ...]]


def changed_sections(record: Record, path: Path, asked: Asked) -> ChangedSections:
    """Make the changes asked for to the sections of a record.

    Parameters
    ----------
    record : Record
        Record of sections.
    path : Path
        Its file.
    asked : Asked
        What is asked.

    Returns
    -------
    ChangedSections
        The job after them.

    Raises
    ------
    JobError
        If the record is damaged, a change is none, or the job after them is none.
    """
    layers = layers_of(record)
    for option, given in (
        ("--span", asked.spans),
        ("--support", asked.supports),
        ("--load", asked.loads),
    ):
        if given:
            msg = (
                f"{option}: {record.name} is a record of sections, which have none;"
                " hint: --set 'MARK.KEY=VALUE'"
            )
            raise JobError(msg)
    before = job_before_changes(record, path, asked)
    # The job before the changes has to be sound, for its marks to be relied on.
    found = _read(before, {})
    entries: Entries = {
        problem.section.mark: ("section", number) for number, problem in enumerate(found.problems)
    }
    changes = changes_of(asked, {}, {}, entries, _GROUPS)
    after = changed_job(before, changes, entries, _GROUPS)
    if asked.fc is not None:
        after = after.with_keys(_strength_of_all(after.keys))
    return ChangedSections(keys=after, job=_read(after, layers), layers=layers)


def _strength_of_all(keys: Mapping[str, Any]) -> dict[str, Any]:
    """Sections with a strength of their own take that of the job, too."""
    sections = [
        {key: value for key, value in section.items() if key != "fc"} for section in keys["section"]
    ]
    return {**keys, "section": sections}


def _read(job: ChangedJob, layers: Mapping[str, tuple[str, ...]]) -> Job:
    def parse(keys: Mapping[str, Any], base: Path) -> Job:
        own = with_layers(keys, layers) if layers else keys
        return parse_job_keys(own, name=job.name, base=base)

    return job.read(parse)
