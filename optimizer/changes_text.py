"""Changes to a job as they are written on the command line: ``B-C=31 ft``."""

from __future__ import annotations

import copy
import tomllib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from optimizer.errors import JobError
from optimizer.job_messages import quoted, short

_LONGEST = 300


@dataclass(frozen=True, slots=True, kw_only=True)
class Change:
    """One change of a job.

    Attributes
    ----------
    option : str
        Option it came with, for messages.
    target : str
        Mark or group that it concerns.
    key : str
        Key that gets the value.
    value : object
        Value as a job file would give it.
    """

    option: str
    target: str
    key: str
    value: object


def parse_change(option: str, text: str, *, key: str | None = None) -> Change:
    """Read ``TARGET=VALUE`` with a known key, or ``TARGET.KEY=VALUE``.

    Parameters
    ----------
    option : str
        Option, for messages.
    text : str
        What the user wrote.
    key : str, optional
        Key where the option says it.

    Returns
    -------
    Change
        The change.

    Raises
    ------
    JobError
        If it is not of that form.
    """
    form = "MARK=VALUE" if key else "MARK.KEY=VALUE"
    left, equals, right = text.partition("=")
    if not equals or not left.strip() or not right.strip() or len(text) > _LONGEST:
        msg = f"{option}: got {short(quoted(text))}; expected {form}"
        raise JobError(msg)
    target = left.strip()
    if key is None:
        target, dot, key = target.rpartition(".")
        if not dot or not target or not key:
            msg = f"{option}: got {short(quoted(text))}; expected {form}"
            raise JobError(msg)
    return Change(option=option, target=target, key=key.strip(), value=_value(right.strip()))


def _value(text: str) -> object:
    """A value as TOML reads it; what TOML does not read is a text."""
    try:
        return tomllib.loads(f"value = {text}")["value"]
    except (ValueError, RecursionError):
        return text


def apply_changes(
    job: Mapping[str, Any],
    changes: Sequence[Change],
    entries: Mapping[str, tuple[str, int]],
    groups: Sequence[str],
) -> dict[str, Any]:
    """Make changes to the keys of a job.

    Parameters
    ----------
    job : mapping
        Keys.
    changes : sequence of Change
        Changes, in order.
    entries : mapping of str to (str, int)
        List and number of each entry that has a mark.
    groups : sequence of str
        Groups of keys that may be changed.

    Returns
    -------
    dict
        New keys.

    Raises
    ------
    JobError
        If a target is unknown.
    """
    result: dict[str, Any] = copy.deepcopy(dict(job))
    for change in changes:
        if change.target in entries:
            name, number = entries[change.target]
            group = result[name][number]
        elif change.target in groups:
            group = result.setdefault(change.target, {})
        else:
            allowed = ", ".join([*entries, *groups][:30])
            msg = f"{change.option}: nothing is marked {quoted(change.target)}; allowed: {allowed}"
            raise JobError(msg)
        group[change.key] = change.value
    return result
