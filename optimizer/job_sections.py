"""From the keys of one section, its job and the defaults to a problem for the search."""

from __future__ import annotations

from pathlib import Path
from typing import TypeVar

from catalogs import BarCatalog
from engine import Edition, Section, Slab, parse_layout
from optimizer.errors import JobError
from optimizer.job_groups import GroupReader, first_given
from optimizer.job_keys import MOST_VARIANTS, JobKeys, SectionKeys
from optimizer.problem import Levers, Problem

_T = TypeVar("_T")


class SectionReader(GroupReader):
    """Builds the problem of one section from its keys, the job's and the defaults."""

    places = "in [materials] or in the section"

    def __init__(
        self,
        job: JobKeys,
        section: SectionKeys,
        edition: Edition,
        where: str,
        base: Path | None,
    ) -> None:
        super().__init__(job, section, edition, where, base)
        self.job, self.keys = job, section

    def problem(self) -> Problem:
        """Build the problem.

        Returns
        -------
        Problem
            Section, bars allowed, ranking and the layout given, if any.
        """
        catalog = self.catalog()
        section = self._section(catalog)
        drawn = None
        if self.keys.layers is not None:
            with self._key("layers"):
                drawn = parse_layout(self.keys.layers, catalog)
        return Problem(
            section=section,
            rules=self._rules(catalog),
            ranking=self._ranking(),
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
            return first_given((own, job), key, default)

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

    def _slab(self) -> Slab | None:
        if self.keys.slab is None:
            return None
        with self._key("slab"):
            return Slab(**self.keys.slab.model_dump())

    def _section(self, catalog: BarCatalog) -> Section:
        keys = self.keys
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
        span = keys.span if keys.span is not None else keys.slab.span if keys.slab else None
        return self._section_of(
            mark=keys.mark,
            outline=self._outline(
                keys.width,
                keys.depth,
                flange=keys.flange,
                slab=self._slab(),
                bottom=keys.bottom_flange,
            ),
            concrete=self._concrete(),
            steel=self._steel(),
            cover=keys.cover,
            stirrup=stirrup,
            Mu=keys.Mu,
            Ms=keys.Ms,
            exposure=keys.exposure,
            statically_determinate=keys.statically_determinate,
            opposite=opposite,
            count_opposite=keys.count_opposite,
            clear_span=span,
            stirrup_spacing=keys.stirrup_spacing,
        )
