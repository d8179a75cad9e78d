"""Faults of a job file in one message: where, which key, which value, what is allowed."""

from __future__ import annotations

import difflib
from collections.abc import Mapping
from typing import Any

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
    error: ValidationError, model: type[BaseModel], data: Mapping[str, Any], name: str
) -> str:
    """Turn the first fault of a file into one message."""
    errors = error.errors(include_url=False)
    # A misspelt key is also a missing one: the misspelling explains it.
    first = min(errors, key=lambda item: item["type"] != "extra_forbidden")
    where, key = _place(first, data)
    kind, given = first["type"], first["input"]
    if kind == "extra_forbidden":
        known = _known_keys(first, model)
        near = difflib.get_close_matches(key.rpartition(".")[2], known, n=1)
        hint = f"hint: did you mean {near[0]}?" if near else f"allowed: {', '.join(known)}"
        text = f"unknown key; {hint}"
    elif kind == "missing":
        text = "missing; needed here" if key != "section" else "missing; expected [[section]]"
    elif kind == "value_error":
        text = str(first["ctx"]["error"])
    else:
        text = f"got {short(quoted(given))}; {_expected(first)}"
    more = f" (and {len(errors) - 1} more)" if len(errors) > 1 else ""
    place = f"{name}: {where}, {key}" if where else f"{name}: {key}"
    return f"{place}: {text}{more}"


def _expected(error: ErrorDetails) -> str:
    """What was expected, in the words of a job file."""
    kind = error["type"]
    if kind in ("model_type", "dict_type"):
        return "expected a table of keys"
    if kind == "list_type":
        table = error["loc"] == ("section",)
        return "expected [[section]] tables" if table else "expected a list in square brackets"
    if kind == "too_short":
        return "expected at least one entry"
    if kind == "finite_number":
        return "expected a finite number"
    words = error["msg"].replace("Input should be", "expected").replace("String", "text")
    return words.replace("a valid string", "a text in quotes").replace("valid ", "")


def _place(error: ErrorDetails, data: Mapping[str, Any]) -> tuple[str, str]:
    """Section (with its mark) and dotted key of a fault."""
    location = list(error["loc"])
    where = ""
    if len(location) >= 2 and location[0] == "section" and isinstance(location[1], int):
        where = f"section {location[1] + 1}"
        sections = data.get("section")
        if isinstance(sections, list) and isinstance(sections[location[1]], dict):
            mark = sections[location[1]].get("mark")
            if isinstance(mark, str):
                where += f' "{short(mark)}"'
        location = location[2:]
    key = ".".join(short(str(part)) or '""' for part in location) or "section"
    return where, key


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
