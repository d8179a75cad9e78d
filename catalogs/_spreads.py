"""Figures that sources disagree on: low, typical and high value, with the source.

The published ones, carbon and fixing hours, are tables; `data/SOURCES.md` tells more about them.
"""

import functools
import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal

from catalogs._names import find
from catalogs._tables import Column, Row, read_builtin
from catalogs.errors import CatalogError

Band = Literal["low", "typical", "high"]
BANDS: tuple[Band, ...] = ("low", "typical", "high")

KG_PER_LB = 0.45359237
_LB_PER_TON = 2000.0

_CARBON_COLUMNS = (
    Column(name="material"),
    *(Column(name=band, units=("kgCO2e",)) for band in BANDS),
    Column(name="per"),
    Column(name="source"),
)
_HOURS_COLUMNS = (
    *(Column(name=band, units=("h/t",)) for band in BANDS),
    Column(name="source"),
)


@dataclass(frozen=True, slots=True, kw_only=True)
class Spread:
    """Low, typical and high value of one figure.

    Parameters
    ----------
    low, typical, high : float
        The values, none above the next. [unit of the figure]
    source : str
        Where they come from.
    """

    low: float
    typical: float
    high: float
    source: str

    def __post_init__(self) -> None:
        """Refuse values out of order or of no use, and values that nobody vouches for."""
        values = (self.low, self.typical, self.high)
        shown = ", ".join(f"{value:g}" for value in values)
        if not all(math.isfinite(value) and value >= 0.0 for value in values):
            msg = f"low, typical, high {shown} cannot be used; allowed: finite numbers from 0"
            raise CatalogError(msg)
        if not self.low <= self.typical <= self.high:
            msg = f"low, typical, high {shown} cannot be used; allowed: low <= typical <= high"
            raise CatalogError(msg)
        if not self.source.strip():
            msg = f"source {self.source!r} cannot be used; allowed: a text saying whose figures"
            raise CatalogError(msg)

    def at(self, band: Band) -> float:
        """Return the value of a band.

        Parameters
        ----------
        band : {"low", "typical", "high"}
            Which of the three.

        Returns
        -------
        float
            The value. [unit of the figure]

        Raises
        ------
        UnknownNameError
            If it is none of the three.
        """
        values: dict[str, float] = {name: getattr(self, name) for name in BANDS}
        return find("band", band, values)

    def times(self, factor: float) -> "Spread":
        """Return the same spread in another unit, its source unchanged.

        Parameters
        ----------
        factor : float
            New units in one old unit. [-]

        Returns
        -------
        Spread
            Every value times the factor. [new unit]
        """
        low, typical, high = (factor * value for value in (self.low, self.typical, self.high))
        return Spread(low=low, typical=typical, high=high, source=self.source)


@functools.cache
def published_carbon() -> Mapping[str, Spread]:
    """Carbon factors by material: steel [kgCO2e/t] and concrete [kgCO2e/m3]."""
    rows = read_builtin("carbon_factors.csv", _CARBON_COLUMNS).rows
    return {row.text("material"): _spread(row) for row in rows}


@functools.cache
def published_hours(system: str) -> Spread:
    """Fixing hours of bars from 25 mm in beams [h/ton (2000 lb) or h/t]."""
    (row,) = read_builtin("fixing_hours_range.csv", _HOURS_COLUMNS).rows
    hours = _spread(row)
    return hours.times(_LB_PER_TON * KG_PER_LB / 1000.0) if system == "us" else hours


def _spread(row: Row) -> Spread:
    low, typical, high = (row.value(band) for band in BANDS)
    return Spread(low=low, typical=typical, high=high, source=row.text("source"))
