"""Faults of a job file in one message: where, which key, which value, what is allowed."""

from __future__ import annotations

import difflib
from collections.abc import Mapping
from typing import Any, get_origin

from pydantic import BaseModel, ValidationError
from pydantic_core import ErrorDetails

_LONGEST = 160


def short(text: str) -> str:
    """Make a user's text fit for a message: printable and of bounded length.

    Parameters
    ----------
    text : str
        Any text.

    Returns
    -------
    str
        The text, escaped and cut where needed.
    """
    clean = text if text.isprintable() else repr(text)[1:-1]
    return clean if len(clean) <= _LONGEST else clean[:_LONGEST] + "..."


def quoted(value: object) -> str:
    """Write a value of a job file the way the file would.

    Parameters
    ----------
    value : object
        Value as TOML gives it.

    Returns
    -------
    str
        Its text.
    """
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, str | int | float | list | dict):
        try:
            return repr(value)
        except (ValueError, RecursionError):  # a whole number too long to print
            return "a number of absurd length"
    return str(value)  # dates and times


def first_error(
    error: ValidationError,
    model: type[BaseModel],
    data: Mapping[str, Any],
    name: str,
    first_entry: int = 0,
) -> str:
    """Turn the first fault of a file into one message.

    Entries of a list are counted from `first_entry`, tables such as ``[[section]]`` from 1.
    """
    errors = error.errors(include_url=False)
    # A misspelt key is also a missing one: the misspelling explains it.
    first = min(errors, key=lambda item: item["type"] != "extra_forbidden")
    tables = _tables(model)
    where, key = _place(first, data, tables, first_entry)
    kind, given = first["type"], first["input"]
    if kind == "extra_forbidden":
        known = _known_keys(first, model)
        near = difflib.get_close_matches(key.rpartition(".")[2], known, n=1)
        hint = f"hint: did you mean {near[0]}?" if near else f"allowed: {', '.join(known)}"
        text = f"unknown key; {hint}"
    elif kind == "missing":
        text = f"missing; expected [[{key}]]" if key in tables else "missing; needed here"
    elif kind == "value_error":
        text = str(first["ctx"]["error"])
    else:
        text = f"got {short(quoted(given))}; {_expected(first, tables)}"
    more = f" (and {len(errors) - 1} more)" if len(errors) > 1 else ""
    place = f"{name}: {where}, {key}" if where else f"{name}: {key}"
    return f"{place}: {text}{more}"


def _tables(model: type[BaseModel]) -> list[str]:
    """Keys that stand for tables written one after the other, such as ``[[section]]``."""
    return [name for name, field in model.model_fields.items() if _is_list(field.annotation)]


def _is_list(annotation: Any) -> bool:
    return get_origin(annotation) is list and _model_of(annotation) is not None


def _expected(error: ErrorDetails, tables: list[str]) -> str:
    """What was expected, in the words of a job file."""
    kind = error["type"]
    if kind in ("model_type", "dict_type"):
        return "expected a table of keys"
    if kind == "list_type":
        name, *inner = error["loc"]
        table = name in tables and not inner
        return f"expected [[{name}]] tables" if table else "expected a list in square brackets"
    if kind == "too_short":
        return "expected at least one entry"
    if kind == "finite_number":
        return "expected a finite number"
    words = error["msg"].replace("Input should be", "expected").replace("String", "text")
    return words.replace("a valid string", "a text in quotes").replace("valid ", "")


def _place(
    error: ErrorDetails, data: Mapping[str, Any], tables: list[str], first_entry: int
) -> tuple[str, str]:
    """Table of several (with its number and mark) and dotted key of a fault."""
    location = list(error["loc"])
    where, table = "", str(location[0])
    if table in tables and len(location) >= 2 and isinstance(location[1], int):
        where = f"{table} {location[1] + 1}"
        entries = data.get(table)
        if isinstance(entries, list) and isinstance(entries[location[1]], dict):
            mark = entries[location[1]].get("mark")
            if isinstance(mark, str):
                where += f' "{short(mark)}"'
        location = location[2:]
    parts = [
        str(part + first_entry) if isinstance(part, int) else short(part) or '""'
        for part in location
    ]
    return where, ".".join(parts) or table


def _known_keys(error: ErrorDetails, model: Any) -> list[str]:
    for part in error["loc"][:-1]:
        if isinstance(part, int):
            continue
        field = next(
            (f for n, f in model.model_fields.items() if part in (n, f.alias)),
            None,
        )
        model = _model_of(field.annotation) if field is not None else None
        if model is None:
            return []
    return [field.alias or name for name, field in model.model_fields.items()]


def _model_of(annotation: Any) -> Any:
    """The model class inside an annotation such as ``list[Keys]`` or ``Keys | None``."""
    if isinstance(annotation, type) and hasattr(annotation, "model_fields"):
        return annotation
    for inner in getattr(annotation, "__args__", ()):
        found = _model_of(inner)
        if found is not None:
            return found
    return None
