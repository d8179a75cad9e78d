"""Records: a job with the design that was made of it, in one file, for a later change.

A record holds all that its job needs, the tables it reads included, so that it can be moved
and read without them.
"""

from __future__ import annotations

import json
import re
import tempfile
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from optimizer.errors import JobError
from optimizer.job_messages import short
from optimizer.job_text import text_of

FORMAT = "cagewright/record"
RECORD_VERSION = 1
_KINDS = ("beam", "sections")
_MOST_TABLES = 100
_TABLE_KEYS = ("catalog", "envelope", "prices")
_PLAIN_NAME = re.compile(r"[A-Za-z0-9_-][A-Za-z0-9 ._-]{0,79}")


@dataclass(frozen=True, slots=True, kw_only=True)
class Record:
    """A record as read.

    Attributes
    ----------
    kind : str
        ``beam`` or ``sections``.
    name : str
        What to call it in messages.
    job : dict
        Keys of the job.
    tables : dict of str to str
        Text of each table that the job reads, by the name that the job has for it.
    design : dict
        What was designed; its shape depends on the kind.
    """

    kind: str
    name: str
    job: dict[str, Any]
    tables: dict[str, str]
    design: dict[str, Any]


def record_text(
    kind: str,
    job: Mapping[str, Any],
    base: Path | None,
    design: Mapping[str, Any],
    tables: Mapping[str, str] | None = None,
) -> str:
    """Write a record.

    Parameters
    ----------
    kind : str
        ``beam`` or ``sections``.
    job : mapping
        Keys of the job.
    base : Path or None
        Folder that relative paths of the job start from.
    design : mapping
        What was designed.
    tables : mapping of str to str, optional
        Texts of tables that are known already, by the name that the job has for them.

    Returns
    -------
    str
        JSON, the same for the same job and design.
    """
    known = tables or {}
    content = {
        "format": FORMAT,
        "version": RECORD_VERSION,
        "kind": kind,
        "job": job,
        "tables": {
            name: known[name] if name in known else _table(name, base) for name in table_names(job)
        },
        "design": design,
    }
    return json.dumps(content, ensure_ascii=False, indent=1, allow_nan=False) + "\n"


def table_names(job: Mapping[str, Any]) -> list[str]:
    """Names of the files that a job reads beside its own, as the job has them.

    Parameters
    ----------
    job : mapping
        Keys of the job.

    Returns
    -------
    list of str
        Catalogues, envelopes and price lists that look like files.
    """
    groups = [job.get("bars"), job.get("beam"), job.get("options")]
    for table in ("section", "span"):
        entries = job.get(table)
        groups += entries if isinstance(entries, list) else []
    found = []
    for group in groups:
        if not isinstance(group, Mapping):
            continue
        for key in _TABLE_KEYS:
            name = group.get(key)
            if is_table(key, name) and name not in found:
                found.append(str(name))
    return found


def is_table(key: str, value: object) -> bool:
    """Whether the value of a key names a file, not something built in.

    Parameters
    ----------
    key : str
        Key of a job.
    value : object
        Its value.

    Returns
    -------
    bool
        True for catalogues, envelopes and price lists that are files.
    """
    ends = (".csv", ".toml") if key == "prices" else (".csv",)
    return key in _TABLE_KEYS and isinstance(value, str) and value.lower().strip().endswith(ends)


def _table(name: str, base: Path | None) -> str:
    return text_of((base or Path()) / name)


def read_record(path: Path) -> Record:
    """Read a record.

    Parameters
    ----------
    path : Path
        File that a command wrote with ``--save``.

    Returns
    -------
    Record
        The record.

    Raises
    ------
    JobError
        If the file cannot be read, is no record, is cut short, or is of another version.
    """
    name = short(path.name)
    hint = "hint: cagewright beam JOB --save FILE writes one"
    if not path.is_file():
        msg = f"{short(str(path))}: no such file; expected a record; {hint}"
        raise JobError(msg)
    text = text_of(path)
    try:
        data = json.loads(text)
    except (ValueError, RecursionError):
        msg = f"{name}: no record, or cut short: it is not whole JSON; {hint}"
        raise JobError(msg) from None
    if not isinstance(data, dict) or data.get("format") != FORMAT:
        msg = f"{name}: format: expected {FORMAT!r}; {hint}"
        raise JobError(msg)
    version = data.get("version")
    if version != RECORD_VERSION or isinstance(version, bool):
        msg = (
            f"{name}: version: got {short(repr(version))}; allowed: {RECORD_VERSION};"
            " hint: design the job again with this program and save that"
        )
        raise JobError(msg)
    kind = data.get("kind")
    if kind not in _KINDS:
        msg = f"{name}: kind: got {short(repr(kind))}; allowed: {', '.join(_KINDS)}"
        raise JobError(msg)
    for key in ("job", "tables", "design"):
        if not isinstance(data.get(key), dict):
            msg = f"{name}: {key}: missing, or no table of keys; the record is damaged; {hint}"
            raise JobError(msg)
    tables = data["tables"]
    safe = all(isinstance(item, str) and _inside(key) for key, item in tables.items())
    if not safe or len(tables) > _MOST_TABLES:
        msg = f"{name}: tables: expected texts under plain file names; the record is damaged"
        raise JobError(msg)
    return Record(kind=kind, name=name, job=data["job"], tables=tables, design=data["design"])


def _inside(name: str) -> bool:
    """Whether a name can be written below a folder of its own."""
    return bool(name) and "\0" not in name and len(name) <= 500


class TableFolder:
    """A folder with the tables of a record, for as long as its job is read.

    Parameters
    ----------
    record : Record
        Record.
    """

    def __init__(self, record: Record) -> None:
        self._record = record
        self._folder = tempfile.TemporaryDirectory(prefix="cagewright-")

    def __enter__(self) -> tuple[Path, dict[str, str]]:
        """Write the tables; return their folder, and their names there by those of the job."""
        base = Path(self._folder.name)
        names = {}
        for number, (name, text) in enumerate(sorted(self._record.tables.items()), 1):
            # Each in a folder of its own, under its own name: messages show that.
            last = Path(name).name
            plain = last if _PLAIN_NAME.fullmatch(last) else f"table{Path(name).suffix}"
            (base / str(number)).mkdir()
            names[name] = f"{number}/{plain}"
            (base / names[name]).write_text(text, encoding="utf-8", newline="")
        return base, names

    def __exit__(self, *_: object) -> None:
        """Remove the folder."""
        self._folder.cleanup()


def with_tables(job: Mapping[str, Any], names: Mapping[str, str]) -> dict[str, Any]:
    """The keys of a job with other names for the tables it reads.

    Parameters
    ----------
    job : mapping
        Keys.
    names : mapping of str to str
        New names by old ones.

    Returns
    -------
    dict
        Keys with the new names.
    """

    def renamed(group: object) -> object:
        if isinstance(group, Mapping):
            return {
                key: names.get(value, value)
                if key in _TABLE_KEYS and isinstance(value, str)
                else renamed(value)
                for key, value in group.items()
            }
        if isinstance(group, list):
            return [renamed(item) for item in group]
        return group

    result = renamed(job)
    assert isinstance(result, dict)  # a mapping stays a mapping
    return result
