"""What a user asks to be changed, and the keys of a job after it."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any, TypeVar

from optimizer.changes_text import Change, apply_changes, parse_change
from optimizer.errors import JobError
from optimizer.job_messages import quoted, short
from optimizer.job_text import parse_toml, text_of
from optimizer.record import Record, TableFolder, is_table, table_names, with_tables

Entries = Mapping[str, tuple[str, int]]
_Read = TypeVar("_Read")


@dataclass(frozen=True, slots=True, kw_only=True)
class Asked:
    """Changes as the options of the command give them.

    Attributes
    ----------
    spans, supports, loads, sets : tuple of str
        Texts of ``--span``, ``--support``, ``--load`` and ``--set``.
    fc : str or None
        Concrete strength.
    job : Path or None
        Job that takes the place of the record's.
    """

    spans: tuple[str, ...] = ()
    supports: tuple[str, ...] = ()
    loads: tuple[str, ...] = ()
    sets: tuple[str, ...] = ()
    fc: str | None = None
    job: Path | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class ChangedJob:
    """The keys of a job, with the tables they name.

    Attributes
    ----------
    keys : dict
        Keys.
    tables : dict of str to str
        Text of each table by the name that the keys have for it.
    name : str
        What to call the job in messages.
    sources : tuple of Path
        Files that all this comes from.
    """

    keys: dict[str, Any]
    tables: dict[str, str]
    name: str
    sources: tuple[Path, ...]

    def read(self, parse: Callable[[Mapping[str, Any], Path], _Read]) -> _Read:
        """Read the keys with their tables at hand.

        Parameters
        ----------
        parse : callable
            Takes keys, in which tables have other names, and the folder of the tables.

        Returns
        -------
        object
            What it makes of them.
        """
        record = Record(kind="", name=self.name, job={}, tables=self.tables, design={})
        with TableFolder(record) as (base, names):
            return parse(with_tables(self.keys, names), base)

    def with_keys(self, keys: Mapping[str, Any]) -> ChangedJob:
        """The same tables with other keys."""
        return replace(self, keys=dict(keys))


def job_before_changes(record: Record, path: Path, asked: Asked) -> ChangedJob:
    """The job that changes are made to: the record's, or the one given in its place.

    Parameters
    ----------
    record : Record
        Record.
    path : Path
        File of the record.
    asked : Asked
        What is asked.

    Returns
    -------
    ChangedJob
        Its keys and tables.

    Raises
    ------
    JobError
        If the job given cannot be read as TOML, or a table is missing.
    """
    if asked.job is None:
        missing = [name for name in table_names(record.job) if name not in record.tables]
        if missing:
            msg = f"{record.name}: tables: {short(missing[0])} is missing; the record is damaged"
            raise JobError(msg)
        return ChangedJob(keys=record.job, tables=record.tables, name=record.name, sources=(path,))
    name = short(asked.job.name)
    keys = parse_toml(text_of(asked.job), name)
    files = {item: asked.job.parent / item for item in table_names(keys)}
    return ChangedJob(
        keys=keys,
        tables={item: text_of(file) for item, file in files.items()},
        name=name,
        sources=(path, asked.job, *files.values()),
    )


def changes_of(
    asked: Asked, spans: Entries, supports: Entries, entries: Entries, groups: Sequence[str]
) -> list[Change]:
    """Read all changes asked for.

    Parameters
    ----------
    asked : Asked
        What is asked.
    spans, supports, entries : mapping of str to (str, int)
        List and number of each span, each support, and of all entries that have marks.
    groups : sequence of str
        Groups of keys that may be changed.

    Returns
    -------
    list of Change
        In the order of the options, those of one option as given.

    Raises
    ------
    JobError
        If one cannot be read, names what is not there, or contradicts another.
    """
    of_options: list[tuple[str, tuple[str, ...], str | None, Entries]] = [
        ("--span", asked.spans, "length", spans),
        ("--support", asked.supports, "width", supports),
        ("--load", asked.loads, None, spans),
        ("--set", asked.sets, None, entries),
    ]
    found: list[Change] = []
    if asked.fc is not None:
        found.append(parse_change("--fc", f"materials={asked.fc}", key="fc"))
    for option, texts, key, targets in of_options:
        for text in texts:
            change = parse_change(option, text, key=key)
            own_groups = groups if option == "--set" else ()
            if change.target not in targets and change.target not in own_groups:
                allowed = ", ".join([*targets, *own_groups][:30])
                what = "entry" if option == "--set" else option.removeprefix("--")
                what = "span" if option == "--load" else what
                msg = (
                    f"{option}: no {what} is marked {short(quoted(change.target))};"
                    f" allowed: {allowed}"
                )
                raise JobError(msg)
            found.append(change)
    seen: set[tuple[str, str]] = set()
    for change in found:
        place = (change.target, change.key)
        if place in seen:
            msg = f"{change.option}: {short('.'.join(place))} is changed twice; allowed: once"
            raise JobError(msg)
        seen.add(place)
    return found


def changed_job(
    job: ChangedJob, changes: Sequence[Change], entries: Entries, groups: Sequence[str]
) -> ChangedJob:
    """Make changes to a job; tables that they name are read.

    Parameters
    ----------
    job : ChangedJob
        Job before.
    changes : sequence of Change
        Changes.
    entries : mapping of str to (str, int)
        List and number of each entry that has a mark.
    groups : sequence of str
        Groups of keys that may be changed.

    Returns
    -------
    ChangedJob
        Job after.

    Raises
    ------
    JobError
        If a table cannot be read.
    """
    keys = apply_changes(job.keys, changes, entries, groups)
    tables = dict(job.tables)
    sources = list(job.sources)
    for change in changes:
        if is_table(change.key, change.value):
            name = str(change.value)
            tables[name] = text_of(Path(name))
            sources.append(Path(name))
    return replace(job, keys=keys, tables=tables, sources=tuple(sources))
