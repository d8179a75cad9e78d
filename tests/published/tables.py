"""The printed tables kept beside the tests: a line naming the source, a header, the cells."""

from __future__ import annotations

import csv
from importlib import resources


def read_table(name: str) -> list[dict[str, str]]:
    """Read a table of this folder's data.

    Parameters
    ----------
    name : str
        File name without its ending.

    Returns
    -------
    list of dict
        One dict a row, header -> cell, as printed.
    """
    text = resources.files(__package__).joinpath("data", f"{name}.csv").read_text("utf-8")
    source, *lines = text.splitlines()
    if not source.startswith("# "):
        message = f"{name}.csv starts with {source!r}; allowed: '# ' and the source"
        raise ValueError(message)
    return list(csv.DictReader(lines))
