"""From the keys of `[materials]`, `[bars]` and `[ranking]` and the defaults to what they mean.

Jobs of sections and jobs of beams share these three groups.
"""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any, Protocol, TypeVar

from catalogs import BarCatalog, CatalogError, bar_catalog, steel_grade
from engine import (
    Concrete,
    Edition,
    EngineError,
    Exposure,
    Flange,
    Outline,
    OutOfRangeError,
    Section,
    Slab,
    Steel,
)
from engine.units import plain
from optimizer.errors import JobError
from optimizer.flanges import slab_flange
from optimizer.job_keys import BarKeys, FlangeKeys, MaterialKeys, RankingKeys
from optimizer.job_messages import short
from optimizer.problem import MM_PER_IN, SI_MASS_FACTOR, BarRules, Ranking

_T = TypeVar("_T")

# Sizes taken when the job names none: No. 5 to No. 11 and their like. [mm]
_USUAL_DIAMETERS = (15.0, 37.0)
_CATALOGS = {"us": "astm-inch", "si": "astm-metric"}

# Defaults of the score in lb/ft; kg/m are these times 1.488.
_LABOUR_SHARE = 0.8
_MASS_CONSTANTS = {
    "per_bar": 0.10,
    "per_extra_layer": 0.60,
    "per_extra_size": 0.40,
    "tight_gap": 0.10,
}
_KEY_NAMES = {"lightweight": "lambda"}
_KEEP, _PER_PATTERN, _WORK_LIMIT = 10, 3, 3.0


class Groups(Protocol):
    """The three groups of a job."""

    @property
    def materials(self) -> MaterialKeys:
        """Keys of `[materials]`."""

    @property
    def bars(self) -> BarKeys:
        """Keys of `[bars]`."""

    @property
    def ranking(self) -> RankingKeys:
        """Keys of `[ranking]`."""


def first_given(levels: tuple[object, ...], key: str, default: _T) -> _T:
    """Value of a key at the first level that gives it, else the default."""
    for level in levels:
        value: _T | None = getattr(level, key)
        if value is not None:
            return value
    return default


class GroupReader:
    """Reads the three groups of a job, of which `own` may give any key closer by.

    Parameters
    ----------
    groups : Groups
        The groups of the job.
    own : object
        Keys that come before the groups'; an object without those keys gives none.
    edition : Edition
        Code edition.
    where : str
        Place that messages start with.
    base : Path or None
        Folder that relative catalogue paths start from.
    """

    places = "in [materials]"
    """Where keys of materials may stand, for messages."""

    def __init__(
        self, groups: Groups, own: object, edition: Edition, where: str, base: Path | None
    ) -> None:
        self.groups, self.own, self.edition = groups, own, edition
        self.where, self.base = where, base
        self.unit = MM_PER_IN if edition.units == "si" else 1.0

    @contextmanager
    def _key(self, key: str, *, always: bool = False) -> Iterator[None]:
        """Name the key in whatever the engine or a catalogue says about it.

        What the engine itself names comes before the key, unless this one is `always` at fault.
        """
        try:
            yield
        except (EngineError, CatalogError) as error:
            at_fault, text = key, str(error)
            if isinstance(error, OutOfRangeError) and error.what:
                named = _KEY_NAMES.get(error.what, error.what)
                at_fault, text = key if always else named, error.message
            msg = f"{self.where}, {at_fault}: {text}"
            raise JobError(msg) from None

    def _own_or(self, group: object, key: str, default: _T) -> _T:
        """The value of a key given closer by, else its group's, else the default."""
        return first_given(self._levels(group), key, default)

    def _levels(self, group: object) -> tuple[object, ...]:
        return (group,) if self.own is None else (self.own, group)

    def catalog(self) -> BarCatalog:
        """Catalogue that sizes are looked up in.

        Returns
        -------
        BarCatalog
            That of the job, or the usual one of its units.

        Raises
        ------
        JobError
            If it cannot be read, or is in other units.
        """
        name = self._own_or(self.groups.bars, "catalog", _CATALOGS[self.edition.units])
        with self._key("catalog"):
            catalog = bar_catalog(name, self.base)
        if catalog.system != self.edition.units:
            msg = (
                f"{self.where}, catalog: got {short(name)!r}, a table in {catalog.system!r} units;"
                f" allowed with {self.edition.name}: tables in {self.edition.units!r} units"
            )
            raise JobError(msg)
        return catalog

    def _concrete(self) -> Concrete:
        materials = self.groups.materials
        fc = self._own_or(materials, "fc", None)
        if fc is None:
            msg = f"{self.where}, fc: missing; expected {self.places}"
            raise JobError(msg)
        with self._key("fc"):
            return Concrete(
                edition=self.edition,
                fc=fc,
                lightweight=self._own_or(materials, "lightweight", 1.0),
                modulus=self._own_or(materials, "Ec", None),
            )

    def _steel(self) -> Steel:
        for level in self._levels(self.groups.materials):
            name: str | None = first_given((level,), "steel", None)
            fy: float | None = first_given((level,), "fy", None)
            found = self._one_steel(name, fy, "steel", "fy")
            if found is not None:
                return found
        msg = (
            f'{self.where}, steel: missing; expected steel = "A615-60" or fy = "60 ksi"'
            f" {self.places}"
        )
        raise JobError(msg)

    def _one_steel(
        self, name: str | None, fy: float | None, name_key: str, fy_key: str
    ) -> Steel | None:
        """Steel by its grade or by its strength; None where neither is given."""
        if name is not None and fy is not None:
            msg = (
                f"{self.where}, {name_key}: got both {name_key} and {fy_key}; allowed: one of them"
            )
            raise JobError(msg)
        if fy is not None:
            with self._key(fy_key, always=True):
                return Steel(edition=self.edition, fy=fy)
        if name is not None:
            with self._key(name_key):
                return self._graded(name, name_key)
        return None

    def _graded(self, name: str, key: str = "steel") -> Steel:
        grade = steel_grade(name)
        if self.edition.name not in grade.editions:
            msg = (
                f"{self.where}, {key}: got {name!r}; {self.edition.name} does not take it for"
                f" flexure; allowed with: {', '.join(grade.editions)}"
            )
            raise JobError(msg)
        fy = grade.yield_strength(self.edition.units)
        shown = grade.alias if self.edition.units == "si" and grade.alias else grade.name
        return Steel(edition=self.edition, fy=fy, name=shown, note=grade.note)

    def _rules(self, catalog: BarCatalog) -> BarRules:
        bars = self.groups.bars
        names = self._own_or(bars, "sizes", None)
        if names is None:
            low, high = _USUAL_DIAMETERS
            sizes = [bar for bar in catalog.bars if low <= bar.diameter_mm <= high]
        else:
            with self._key("sizes"):
                sizes = [catalog.bar(name) for name in names]
            if len({bar.position for bar in sizes}) < len(sizes):
                msg = f"{self.where}, sizes: a size is listed twice; allowed: each size once"
                raise JobError(msg)
        if not sizes:
            msg = (
                f"{self.where}, sizes: missing, and the catalogue has no bar of the usual"
                f" {plain(low)} to {plain(high)} mm; hint: name the sizes"
            )
            raise JobError(msg)
        return BarRules(
            sizes=tuple(sorted(sizes, key=lambda bar: bar.position)),
            max_layers=self._own_or(bars, "max_layers", 2),
            max_sizes=self._own_or(bars, "max_sizes", 2),
            size_steps=self._own_or(bars, "size_steps", 2),
        )

    def _ranking(self, work_limit: float = _WORK_LIMIT) -> Ranking:
        group = self.groups.ranking
        factor = 1.0 if self.unit == 1.0 else SI_MASS_FACTOR
        constants = {
            key: self._own_or(group, key, default * factor)
            for key, default in _MASS_CONSTANTS.items()
        }
        per_pattern = self._own_or(group, "per_pattern", _PER_PATTERN)
        usual = max(1.5 if self.unit == 1.0 else 38.0, 2.0 * self._aggregate())
        return Ranking(
            by=self._own_or(group, "by", "practical"),
            keep=self._own_or(group, "keep", _KEEP),
            per_pattern=per_pattern if self._own_or(group, "variety", "on") == "on" else None,
            labour_share=self._own_or(group, "labour_share", _LABOUR_SHARE),
            preferred_gap=self._own_or(group, "preferred_gap", usual),
            work_limit=self._own_or(group, "work_limit", work_limit),
            **constants,
        )

    def _aggregate(self) -> float:
        usual = 0.75 if self.unit == 1.0 else 19.0
        return self._own_or(self.groups.materials, "aggregate", usual)

    def _outline(
        self,
        web: float,
        depth: float,
        *,
        flange: FlangeKeys | None,
        slab: Slab | None,
        bottom: FlangeKeys | None = None,
    ) -> Outline:
        if flange is not None and slab is not None:
            msg = f"{self.where}, flange: got both flange and slab; allowed: one of them"
            raise JobError(msg)
        top = None if flange is None else self._flange(flange, web)
        if slab is not None:
            with self._key("slab"):
                top = slab_flange(slab, web)
        under = None if bottom is None else self._flange(bottom, web)
        with self._key("flange"):
            return Outline(web=web, depth=depth, top=top, bottom=under)

    def _section_of(self, *, exposure: str | None, **others: Any) -> Section:
        """Build a section of what is its own, materials and gaps from the groups."""
        bars = self.groups.bars
        with self._key("cover"):
            return Section(
                layer_gap=self._own_or(bars, "layer_gap", self.edition.least_gap),
                min_gap=self._own_or(bars, "min_gap", 0.0),
                tension_controlled=self._own_or(bars, "tension_controlled", True),
                aggregate=self._aggregate(),
                exposure=Exposure(exposure or "interior"),
                exposure_given=exposure is not None,
                **others,
            )

    @staticmethod
    def _flange(given: FlangeKeys, web: float) -> Flange:
        beyond = max(0.0, given.width - web)
        left = {"both": beyond / 2, "left": beyond, "right": 0.0}[given.side]
        return Flange(width=given.width, thickness=given.thickness, left=left)
