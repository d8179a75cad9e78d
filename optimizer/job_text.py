"""The text of a job file: read, understood as TOML, and its keys checked."""

from __future__ import annotations

import difflib
import tomllib
from collections.abc import Mapping
from pathlib import Path
from typing import Any, TypeVar

from pydantic import BaseModel, ValidationError

from engine import EDITIONS, Edition
from engine.units import SYSTEMS
from optimizer.errors import JobError
from optimizer.job_messages import first_error, quoted, short

_LARGEST_FILE = 2_000_000
_MOST_DOTS = 100  # in a line: dotted keys nest, and nesting is read in quadratic time

_Model = TypeVar("_Model", bound=BaseModel)


def text_of(path: Path) -> str:
    """Read the text of a job file.

    Parameters
    ----------
    path : Path
        TOML file.

    Returns
    -------
    str
        Its text.

    Raises
    ------
    JobError
        If there is no such file, or it is too large or no text.
    """
    try:
        shown = short(str(path))
        if not path.is_file():
            what = "is a folder" if path.is_dir() else "is no file"
            what = what if path.exists() else "does not exist"
            msg = f"{shown}: {what}; expected a job file; hint: cagewright new FILE writes one"
            raise JobError(msg)
        if path.stat().st_size > _LARGEST_FILE:
            msg = f"{shown}: {path.stat().st_size} bytes; allowed: up to {_LARGEST_FILE} bytes"
            raise JobError(msg)
        return path.read_bytes().decode("utf-8-sig")
    except UnicodeDecodeError:
        msg = f"{short(str(path))}: not a text file in UTF-8; expected a job file in TOML"
        raise JobError(msg) from None
    except (OSError, ValueError) as error:
        if isinstance(error, JobError):
            raise
        msg = f"{short(str(path))}: cannot be read: {short(str(error))}"
        raise JobError(msg) from None


def parse_toml(text: str, name: str) -> dict[str, Any]:
    """Read the text of a job as TOML.

    Parameters
    ----------
    text : str
        TOML.
    name : str
        What to call it in messages.

    Returns
    -------
    dict
        Its keys.

    Raises
    ------
    JobError
        If it is no TOML, or nested beyond the keys of a job.
    """
    for number, line in enumerate(text.splitlines(), 1):
        if line.count(".") > _MOST_DOTS and not line.lstrip().startswith("#"):
            msg = f"{name}: line {number}: nested too deeply; allowed: the keys of a job"
            raise JobError(msg)
    try:
        return tomllib.loads(text)
    except RecursionError:
        raise JobError(_too_deep(name)) from None
    except ValueError as error:
        # Covers TOML syntax and numbers of absurd length.
        msg = f"{name}: not valid TOML: {short(str(error))}"
        raise JobError(msg) from None


def read_keys(
    data: Mapping[str, Any], model: type[_Model], name: str, *, first_entry: int = 0
) -> tuple[_Model, Edition]:
    """Check the keys of a job, all quantities in the system of its code edition.

    Parameters
    ----------
    data : dict
        Keys as TOML gives them.
    model : type
        Class of the keys expected.
    name : str
        What to call the job in messages.
    first_entry : int
        Number of the first entry of a list in messages.

    Returns
    -------
    tuple
        The keys, and the edition.

    Raises
    ------
    JobError
        If a key is missing, unknown, or holds what it cannot hold.
    """
    edition = _edition(data, name)
    try:
        return model.model_validate(data, context={"system": edition.system}), edition
    except ValidationError as error:
        raise JobError(first_error(error, model, data, name, first_entry)) from None
    except RecursionError:
        raise JobError(_too_deep(name)) from None


def check_title(title: str, name: str) -> None:
    """Refuse a title that no drawing could show.

    Parameters
    ----------
    title : str
        Title of the job.
    name : str
        What to call the job in messages.

    Raises
    ------
    JobError
        If it holds what cannot be printed, or a line break.
    """
    if not title.isprintable():
        msg = f"{name}: title: got {short(repr(title))}; allowed: printable text on one line"
        raise JobError(msg)


def _too_deep(name: str) -> str:
    return f"{name}: nested too deeply; allowed: the keys of a job, two levels deep"


def _edition(data: Mapping[str, Any], name: str) -> Edition:
    """Code and units come first: all quantities are read in their system."""
    allowed = ", ".join(EDITIONS)
    code = data.get("code")
    if code is None:
        msg = f'{name}: code: missing; expected one of {allowed}, as in code = "ACI 318-19"'
        raise JobError(msg)
    if not isinstance(code, str) or code not in EDITIONS:
        near = difflib.get_close_matches(quoted(code)[:40], EDITIONS, n=1)
        hint = f"; hint: did you mean {near[0]}?" if near else ""
        msg = f"{name}: code: got {short(quoted(code))}; allowed: {allowed}{hint}"
        raise JobError(msg)
    edition = EDITIONS[code]
    units = data.get("units", edition.units)
    if not isinstance(units, str) or units not in SYSTEMS:
        msg = f"{name}: units: got {short(quoted(units))}; allowed: us, si"
        raise JobError(msg)
    if units != edition.units:
        twin = code.replace("318-", "318M-") if units == "si" else code.replace("318M-", "318-")
        msg = (
            f"{name}: units: got {units!r} with code {code!r}, which computes in"
            f" {edition.units!r}; hint: the edition in {units!r} is {twin}"
        )
        raise JobError(msg)
    return edition
