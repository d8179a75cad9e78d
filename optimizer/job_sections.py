"""From the keys of one section, its job and the defaults to a problem for the search."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import TypeVar

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
    parse_layout,
)
from engine.units import plain
from optimizer.errors import JobError
from optimizer.flanges import slab_flange
from optimizer.job_keys import MOST_VARIANTS, FlangeKeys, JobKeys, SectionKeys
from optimizer.job_messages import short
from optimizer.problem import MM_PER_IN, SI_MASS_FACTOR, BarRules, Levers, Problem, Ranking

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


def _first_given(levels: tuple[object, ...], key: str, default: _T) -> _T:
    """Value of a key at the first level that gives it, else the default."""
    for level in levels:
        value: _T | None = getattr(level, key)
        if value is not None:
            return value
    return default


class SectionReader:
    """Builds the problem of one section from its keys, the job's and the defaults."""

    def __init__(
        self,
        job: JobKeys,
        section: SectionKeys,
        edition: Edition,
        where: str,
        base: Path | None,
    ) -> None:
        self.job, self.keys, self.edition = job, section, edition
        self.where, self.base = where, base
        self.unit = MM_PER_IN if edition.units == "si" else 1.0

    @contextmanager
    def _key(self, key: str) -> Iterator[None]:
        """Name the key in whatever the engine or a catalogue says about it."""
        try:
            yield
        except (EngineError, CatalogError) as error:
            at_fault, text = key, str(error)
            if isinstance(error, OutOfRangeError) and error.what:
                at_fault, text = _KEY_NAMES.get(error.what, error.what), error.message
            msg = f"{self.where}, {at_fault}: {text}"
            raise JobError(msg) from None

    def _own_or(self, group: object, key: str, default: _T) -> _T:
        """The section's value of a key, else its group's, else the default."""
        return _first_given((self.keys, group), key, default)

    def problem(self) -> Problem:
        """Build the problem.

        Returns
        -------
        Problem
            Section, bars allowed, ranking and the layout given, if any.
        """
        catalog = self._catalog()
        section = self._section(catalog)
        drawn = None
        if self.keys.layers is not None:
            with self._key("layers"):
                drawn = parse_layout(self.keys.layers, catalog)
        return Problem(
            section=section,
            rules=self._rules(catalog),
            ranking=self._ranking(section.aggregate),
            drawn=drawn,
            slab=self._slab(),
            levers=self._levers(catalog),
            length=self._length(),
        )

    def _length(self) -> float:
        """Length in the unit that mass per length counts in, ft or m."""
        if self.keys.length is None:
            return 1.0
        return self.keys.length / (12.0 if self.unit == 1.0 else 1000.0)

    def _levers(self, catalog: BarCatalog) -> Levers:
        own, job = self.keys.options, self.job.options

        def given(key: str, default: _T) -> _T:
            return _first_given((own, job), key, default)

        none: list[str] = []
        with self._key("options.grades"):
            steels = tuple(self._graded(name, "options.grades") for name in given("grades", none))
        with self._key("options.stirrups"):
            stirrups = tuple(catalog.bar(name) for name in given("stirrups", none))
        for bar in stirrups:
            if bar.diameter > self.edition.largest_stirrup:
                msg = (
                    f"{self.where}, options.stirrups: got {bar.designation}; allowed: up to"
                    f" {self.edition.largest_stirrup:g} {self.edition.system.inner['length']}"
                )
                raise JobError(msg)
        sizes: list[float] = []
        levers = Levers(
            sizes=given("sizes", True),
            layers=given("layers", True),
            mixing=given("mixing", True),
            steels=steels,
            stirrups=stirrups,
            widths=tuple(given("widths", sizes)),
            depths=tuple(given("depths", sizes)),
        )
        if levers.combinations > MOST_VARIANTS:
            msg = (
                f"{self.where}, options: {levers.combinations} combinations of grades, stirrups,"
                f" widths and depths; allowed: up to {MOST_VARIANTS}"
            )
            raise JobError(msg)
        return levers

    def _catalog(self) -> BarCatalog:
        name = self._own_or(self.job.bars, "catalog", _CATALOGS[self.edition.units])
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
        materials = self.job.materials
        fc = self._own_or(materials, "fc", None)
        if fc is None:
            msg = f"{self.where}, fc: missing; expected in [materials] or in the section"
            raise JobError(msg)
        with self._key("fc"):
            return Concrete(
                edition=self.edition,
                fc=fc,
                lightweight=self._own_or(materials, "lightweight", 1.0),
                modulus=self._own_or(materials, "Ec", None),
            )

    def _steel(self) -> Steel:
        for level in (self.keys, self.job.materials):
            if level.steel is not None and level.fy is not None:
                msg = f"{self.where}, steel: got both steel and fy; allowed: one of them"
                raise JobError(msg)
            if level.fy is not None:
                with self._key("fy"):
                    return Steel(edition=self.edition, fy=level.fy)
            if level.steel is not None:
                with self._key("steel"):
                    return self._graded(level.steel)
        msg = (
            f'{self.where}, steel: missing; expected steel = "A615-60" or fy = "60 ksi"'
            " in [materials] or in the section"
        )
        raise JobError(msg)

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

    def _outline(self) -> Outline:
        keys = self.keys
        if keys.flange is not None and keys.slab is not None:
            msg = f"{self.where}, flange: got both flange and slab; allowed: one of them"
            raise JobError(msg)
        top = bottom = None
        if keys.flange is not None:
            top = self._flange(keys.flange)
        if keys.bottom_flange is not None:
            bottom = self._flange(keys.bottom_flange)
        slab = self._slab()
        if slab is not None:
            with self._key("slab"):
                top = slab_flange(slab, keys.width)
        with self._key("flange"):
            return Outline(web=keys.width, depth=keys.depth, top=top, bottom=bottom)

    def _flange(self, given: FlangeKeys) -> Flange:
        beyond = max(0.0, given.width - self.keys.width)
        left = {"both": beyond / 2, "left": beyond, "right": 0.0}[given.side]
        return Flange(width=given.width, thickness=given.thickness, left=left)

    def _slab(self) -> Slab | None:
        if self.keys.slab is None:
            return None
        with self._key("slab"):
            return Slab(**self.keys.slab.model_dump())

    def _section(self, catalog: BarCatalog) -> Section:
        keys, bars = self.keys, self.job.bars
        with self._key("stirrup"):
            stirrup = catalog.bar(keys.stirrup)
        opposite = None
        if keys.opposite is not None:
            with self._key("opposite"):
                opposite = parse_layout(keys.opposite, catalog)
        elif keys.count_opposite:
            msg = f"{self.where}, count_opposite: true without opposite bars; hint: give opposite"
            raise JobError(msg)
        if keys.Ms is not None and keys.Ms * keys.Mu <= 0.0:
            msg = f"{self.where}, Ms: its sign differs from Mu's; allowed: both + or both -"
            raise JobError(msg)
        if keys.Ms is not None and abs(keys.Ms) > abs(keys.Mu):
            msg = f"{self.where}, Ms: larger than Mu; allowed: a service moment up to Mu"
            raise JobError(msg)
        exposure = keys.exposure or "interior"
        materials = self.job.materials
        span = keys.span if keys.span is not None else keys.slab.span if keys.slab else None
        outline, concrete, steel = self._outline(), self._concrete(), self._steel()
        aggregate = self._own_or(materials, "aggregate", 0.75 if self.unit == 1.0 else 19.0)
        with self._key("cover"):
            return Section(
                mark=keys.mark,
                outline=outline,
                concrete=concrete,
                steel=steel,
                cover=keys.cover,
                stirrup=stirrup,
                aggregate=aggregate,
                Mu=keys.Mu,
                Ms=keys.Ms,
                layer_gap=self._own_or(bars, "layer_gap", self.edition.least_gap),
                min_gap=self._own_or(bars, "min_gap", 0.0),
                exposure=Exposure(exposure),
                exposure_given=keys.exposure is not None,
                statically_determinate=keys.statically_determinate,
                tension_controlled=self._own_or(bars, "tension_controlled", True),
                opposite=opposite,
                count_opposite=keys.count_opposite,
                clear_span=span,
                stirrup_spacing=keys.stirrup_spacing,
            )

    def _rules(self, catalog: BarCatalog) -> BarRules:
        bars = self.job.bars
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

    def _ranking(self, aggregate: float) -> Ranking:
        group = self.job.ranking
        factor = 1.0 if self.unit == 1.0 else SI_MASS_FACTOR
        constants = {
            key: self._own_or(group, key, default * factor)
            for key, default in _MASS_CONSTANTS.items()
        }
        per_pattern = self._own_or(group, "per_pattern", _PER_PATTERN)
        usual = max(1.5 if self.unit == 1.0 else 38.0, 2.0 * aggregate)
        return Ranking(
            by=self._own_or(group, "by", "practical"),
            keep=self._own_or(group, "keep", _KEEP),
            per_pattern=per_pattern if self._own_or(group, "variety", "on") == "on" else None,
            labour_share=self._own_or(group, "labour_share", _LABOUR_SHARE),
            preferred_gap=self._own_or(group, "preferred_gap", usual),
            work_limit=self._own_or(group, "work_limit", _WORK_LIMIT),
            **constants,
        )
