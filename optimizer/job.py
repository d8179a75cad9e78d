"""Reading a job file into problems ready for the search.

Every fault of a file is one `JobError` that names the key, the value and what is allowed.
"""

from __future__ import annotations

import difflib
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from pydantic import ValidationError

from catalogs import CatalogError, PriceList, price_list
from engine import (
    EDITIONS,
    Edition,
)
from engine.units import SYSTEMS
from optimizer.errors import JobError
from optimizer.job_keys import JobKeys
from optimizer.job_messages import first_error, quoted, short
from optimizer.job_sections import SectionReader
from optimizer.problem import Problem

_LARGEST_FILE = 2_000_000
_MOST_DOTS = 100  # in a line: dotted keys nest, and nesting is read in quadratic time


@dataclass(frozen=True, slots=True, kw_only=True)
class Job:
    """A job file, read and understood.

    Attributes
    ----------
    title : str
        Title of the job.
    edition : Edition
        Code edition, which also decides the units.
    problems : tuple of Problem
        One for each section, in the file's order.
    prices : PriceList or None
        Prices and carbon factors for options.
    palette : int or None
        Most bar sizes on the whole job, for options.
    """

    title: str
    edition: Edition
    problems: tuple[Problem, ...]
    prices: PriceList | None = None
    palette: int | None = None


def read_job(path: str | Path) -> Job:
    """Read a job file.

    Parameters
    ----------
    path : str or Path
        TOML file.

    Returns
    -------
    Job
        Its sections as problems.

    Raises
    ------
    JobError
        If the file cannot be read or anything in it cannot be used.
    """
    path = Path(path)
    return parse_job(_text_of(path), name=short(path.name), base=path.parent)


def parse_job(text: str, *, name: str = "job", base: Path | None = None) -> Job:
    """Read a job from its text.

    Parameters
    ----------
    text : str
        TOML.
    name : str
        What to call it in messages.
    base : Path, optional
        Folder that relative catalogue paths start from.

    Returns
    -------
    Job
        Its sections as problems.

    Raises
    ------
    JobError
        If anything in it cannot be used.
    """
    for number, line in enumerate(text.splitlines(), 1):
        if line.count(".") > _MOST_DOTS and not line.lstrip().startswith("#"):
            msg = f"{name}: line {number}: nested too deeply; allowed: the keys of a job"
            raise JobError(msg)
    try:
        data = tomllib.loads(text)
    except RecursionError:
        msg = f"{name}: nested too deeply; allowed: the keys of a job, two levels deep"
        raise JobError(msg) from None
    except ValueError as error:
        # Covers TOML syntax and numbers of absurd length.
        msg = f"{name}: not valid TOML: {short(str(error))}"
        raise JobError(msg) from None
    edition = _edition(data, name)
    try:
        keys = JobKeys.model_validate(data, context={"system": edition.system})
    except ValidationError as error:
        raise JobError(first_error(error, JobKeys, data, name)) from None
    except RecursionError:
        msg = f"{name}: nested too deeply; allowed: the keys of a job, two levels deep"
        raise JobError(msg) from None
    marks: set[str] = set()
    problems = []
    for number, section in enumerate(keys.section, 1):
        where = f'{name}: section {number} "{short(section.mark)}"'
        if not section.mark.isprintable() or not section.mark.strip():
            msg = f"{name}: section {number}, mark: got {section.mark!r}; allowed: printable text"
            raise JobError(msg)
        if section.mark in marks:
            msg = f"{where}, mark: used twice; allowed: a different mark for each section"
            raise JobError(msg)
        marks.add(section.mark)
        problems.append(SectionReader(keys, section, edition, where, base).problem())
    if not keys.title.isprintable():
        msg = f"{name}: title: got {short(repr(keys.title))}; allowed: printable text on one line"
        raise JobError(msg)
    return Job(
        title=keys.title,
        edition=edition,
        problems=tuple(problems),
        prices=_prices(keys, edition, name, base),
        palette=keys.options.palette,
    )


def _prices(keys: JobKeys, edition: Edition, name: str, base: Path | None) -> PriceList | None:
    if keys.options.prices is None:
        return None
    try:
        return price_list(keys.options.prices, edition.units, base)
    except CatalogError as error:
        msg = f"{name}: options.prices: {error}"
        raise JobError(msg) from None


def _text_of(path: Path) -> str:
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
