"""Relative labour of fixing bars in beams, by diameter.

Published hours a tonne differ between sources by a factor of five, their ratios between
diameters agree; so only the ratio to the thickest bars is offered. `data/SOURCES.md` names the
source.
"""

import functools
import math

from catalogs._tables import Column, read_builtin
from catalogs.errors import CatalogError

__all__ = ["fixing_labour"]

_FILE = "fixing_labour_2024.csv"
_COLUMNS = (
    Column(name="diameter_from", units=("mm",)),
    Column(name="hours", units=("h/t",)),
    Column(name="relative_labour", units=("-",)),
)


def fixing_labour(diameter_mm: float) -> float:
    """Labour of fixing a mass of bars, relative to the same mass of the thickest bars.

    Parameters
    ----------
    diameter_mm : float
        Nominal bar diameter. [mm]

    Returns
    -------
    float
        Hours per mass over the hours per mass of bars of 23 mm and above. [-]

    Raises
    ------
    CatalogError
        If the diameter is not a finite number above 0.

    Notes
    -----
    Steps, not a curve: 50, 35 and 30 h/t are published for bars of 10-12, 16-20 and 25 mm and
    above in beams [1]_; the steps lie between the published sizes. Bars of 6-8 mm are published
    at 70 h/t (2.33); they count as the smallest band here.

    References
    ----------
    .. [1] Quantity surveyors' table of fixing hours, Malaysia, 2024; see ``data/SOURCES.md``.
    """
    if not (math.isfinite(diameter_mm) and diameter_mm > 0.0):
        msg = f"bar diameter {diameter_mm!r} mm cannot be used; allowed: a finite number above 0"
        raise CatalogError(msg)
    return [relative for start, relative in _bands() if start <= diameter_mm][-1]


@functools.cache
def _bands() -> tuple[tuple[float, float], ...]:
    """Lower bound [mm] and relative labour [-] of every band, thinnest first."""
    rows = read_builtin(_FILE, _COLUMNS).rows
    return tuple((row.value("diameter_from"), row.value("relative_labour")) for row in rows)
