"""Reading a job file into problems ready for the search.

Every fault of a file is one `JobError` that names the key, the value and what is allowed.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from catalogs import BarCatalog, CatalogError, PriceList, price_list
from engine import Edition
from optimizer.errors import JobError
from optimizer.job_keys import JobKeys
from optimizer.job_messages import short
from optimizer.job_sections import SectionReader
from optimizer.job_text import check_title, parse_toml, read_keys, text_of
from optimizer.problem import Problem


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
    unknown_priced : tuple of str
        Sizes of the price list that no catalogue of the job has.
    """

    title: str
    edition: Edition
    problems: tuple[Problem, ...]
    prices: PriceList | None = None
    palette: int | None = None
    unknown_priced: tuple[str, ...] = ()


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
    return parse_job(text_of(path), name=short(path.name), base=path.parent)


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
    return parse_job_keys(parse_toml(text, name), name=name, base=base)


def parse_job_keys(data: Mapping[str, Any], *, name: str = "job", base: Path | None = None) -> Job:
    """Read a job from its keys.

    Parameters
    ----------
    data : mapping
        Keys as TOML or JSON gives them.
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
    if "beam" in data and "section" not in data:
        msg = f"{name}: beam: a job of a whole beam; hint: cagewright beam designs it"
        raise JobError(msg)
    keys, edition = read_keys(data, JobKeys, name)
    marks: set[str] = set()
    problems, catalogs = [], []
    for number, section in enumerate(keys.section, 1):
        where = f'{name}: section {number} "{short(section.mark)}"'
        if not section.mark.isprintable() or not section.mark.strip():
            msg = f"{name}: section {number}, mark: got {section.mark!r}; allowed: printable text"
            raise JobError(msg)
        if section.mark in marks:
            msg = f"{where}, mark: used twice; allowed: a different mark for each section"
            raise JobError(msg)
        marks.add(section.mark)
        reader = SectionReader(keys, section, edition, where, base)
        problems.append(reader.problem())
        catalogs.append(reader.catalog())
    check_title(keys.title, name)
    prices = _prices(keys, edition, name, base)
    return Job(
        title=keys.title,
        edition=edition,
        problems=tuple(problems),
        prices=prices,
        palette=keys.options.palette,
        unknown_priced=_unknown_sizes(prices, catalogs),
    )


def _unknown_sizes(prices: PriceList | None, catalogs: Sequence[BarCatalog]) -> tuple[str, ...]:
    """Sizes with a price that no catalogue of the job has; one list may serve several jobs."""
    if prices is None:
        return ()
    missing = [set(prices.sizes_not_in(catalog)) for catalog in catalogs]
    return tuple(sorted(set.intersection(*missing)))


def _prices(keys: JobKeys, edition: Edition, name: str, base: Path | None) -> PriceList | None:
    if keys.options.prices is None:
        return None
    try:
        return price_list(keys.options.prices, edition.units, base)
    except CatalogError as error:
        msg = f"{name}: options.prices: {error}"
        raise JobError(msg) from None
