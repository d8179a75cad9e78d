"""Bars and lengths that a beam job names, and those taken where it names none."""

from __future__ import annotations

from pathlib import Path

from catalogs import Bar, BarCatalog
from engine import Edition, Steel
from optimizer.beams.keys import BeamJobKeys
from optimizer.errors import JobError
from optimizer.job_groups import GroupReader
from optimizer.job_messages import short

# Sizes taken when the job names none, by the nearest of the catalogue. [mm]
STIRRUPS = (10.0, 13.0)
HANGERS = (13.0, 16.0)
SKIN = FLANGE = (13.0,)
# Stock lengths common in the trade. [in or mm]
_STOCK = {"us": (240.0, 480.0, 720.0), "si": (6000.0, 12_000.0, 18_000.0)}
STEP = {"us": 1.0, "si": 25.0}


class SizeReader(GroupReader):
    """Reads bars and lengths of `[beam]`, and the groups of the job.

    Parameters
    ----------
    job : BeamJobKeys
        Keys of the job.
    edition : Edition
        Code edition.
    name : str
        What to call the job in messages.
    base : Path or None
        Folder that relative paths start from.
    """

    def __init__(self, job: BeamJobKeys, edition: Edition, name: str, base: Path | None) -> None:
        super().__init__(job, None, edition, f'{name}: beam "{short(job.beam.mark)}"', base)
        self.job, self.keys, self.name = job, job.beam, name

    def _bars(
        self, key: str, names: list[str] | None, catalog: BarCatalog, usual: tuple[float, ...]
    ) -> tuple[Bar, ...]:
        """Sizes named, or those of the catalogue nearest to the usual ones."""
        if names is None:
            return nearest_bars(catalog, usual)
        with self._key(key):
            bars = [catalog.bar(name) for name in names]
        if len({bar.position for bar in bars}) < len(bars):
            msg = f"{self.where}, {key}: a size is listed twice; allowed: each size once"
            raise JobError(msg)
        return tuple(sorted(bars, key=lambda bar: bar.position))

    def _bar(
        self, key: str, name: str | None, catalog: BarCatalog, usual: tuple[float, ...]
    ) -> Bar:
        return self._bars(key, None if name is None else [name], catalog, usual)[0]

    def _check_stirrups(self, stirrups: tuple[Bar, ...]) -> None:
        largest = self.edition.largest_stirrup
        for bar in stirrups:
            if bar.diameter > largest:
                unit = self.edition.system.inner["length"]
                msg = (
                    f"{self.where}, stirrups: got {bar.designation}; allowed: up to {largest:g}"
                    f" {unit} (Table 25.3.2); hint: name sizes up to that"
                )
                raise JobError(msg)

    def _stirrup_steel(self, main: Steel) -> Steel:
        own = self._one_steel(
            self.keys.stirrup_steel, self.keys.stirrup_fy, "stirrup_steel", "stirrup_fy"
        )
        return own or main

    def _closed_stirrups(self) -> bool:
        if self.keys.closed_stirrups and self.keys.edge == "perimeter":
            msg = (
                f"{self.where}, closed_stirrups: true in a perimeter beam, which has them anyway"
                " (9.7.7.1); allowed: in interior beams"
            )
            raise JobError(msg)
        return self.keys.closed_stirrups

    def _stock(self) -> tuple[float, ...]:
        lengths = self.keys.stock
        if lengths is None:
            return _STOCK[self.edition.units]
        if len(set(lengths)) < len(lengths):
            msg = f"{self.where}, stock: a length is listed twice; allowed: each length once"
            raise JobError(msg)
        return tuple(sorted(lengths))


def nearest_bars(catalog: BarCatalog, diameters: tuple[float, ...]) -> tuple[Bar, ...]:
    """Sizes of a catalogue nearest to given diameters, each once.

    Parameters
    ----------
    catalog : BarCatalog
        Sizes to choose from.
    diameters : tuple of float
        Diameters wanted, ascending. [mm]

    Returns
    -------
    tuple of Bar
        For each diameter the nearest size, the thinner of two as near; where that one is taken
        already the next thicker one, if there is one.
    """
    found: list[Bar] = []
    for diameter in diameters:
        after = found[-1].position if found else -1
        rest = [bar for bar in catalog.bars if bar.position > after]
        if rest:
            found.append(min(rest, key=lambda bar: (abs(bar.diameter_mm - diameter), bar.position)))
    return tuple(found)
