"""Reading a beam job into a problem ready for design.

Every fault of a file is one `JobError` that names the key, the value and what is allowed.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from pathlib import Path
from typing import Any

from catalogs import Bar
from engine import Edition, Outline, Section, Slab
from engine.beams.demand import SpanDemand
from engine.beams.spans import Beam, Overhang, Span, Support
from optimizer.beams.given import read_envelope
from optimizer.beams.keys import BeamJobKeys, SpanKeys
from optimizer.beams.loads import far_length, read_loads
from optimizer.beams.problem import Analysis, Attached, BeamProblem
from optimizer.beams.sizes import FLANGE, HANGERS, SKIN, STEP, STIRRUPS, SizeReader
from optimizer.beams.supports import read_overhangs, read_supports, span_marks
from optimizer.errors import JobError
from optimizer.job_messages import quoted, short
from optimizer.job_text import check_title, parse_toml, read_keys, text_of

# Normalweight concrete with its bars: 150 lbf/ft^3, 24 kN/m^3. [lbf/in^3 or N/mm^3]
_CONCRETE_WEIGHT = {"us": 150.0 / 1728.0, "si": 24e-6}
_WORK_LIMIT = 30.0  # a beam is one search for all its spans
_OF_SHORT_LISTS = ("keep", "variety", "per_pattern")


def read_beam_job(path: str | Path) -> BeamProblem:
    """Read a beam job.

    Parameters
    ----------
    path : str or Path
        TOML file.

    Returns
    -------
    BeamProblem
        The beam, ready for design.

    Raises
    ------
    JobError
        If the file cannot be read or anything in it cannot be used.
    """
    path = Path(path)
    return parse_beam_job(text_of(path), name=short(path.name), base=path.parent)


def parse_beam_job(text: str, *, name: str = "job", base: Path | None = None) -> BeamProblem:
    """Read a beam job from its text.

    Parameters
    ----------
    text : str
        TOML.
    name : str
        What to call it in messages.
    base : Path, optional
        Folder that relative paths of catalogues and envelopes start from.

    Returns
    -------
    BeamProblem
        The beam, ready for design.

    Raises
    ------
    JobError
        If anything in it cannot be used.
    """
    return parse_beam_keys(parse_toml(text, name), name=name, base=base)


def parse_beam_keys(
    data: Mapping[str, Any], *, name: str = "job", base: Path | None = None
) -> BeamProblem:
    """Read a beam job from its keys.

    Parameters
    ----------
    data : mapping
        Keys as TOML or JSON gives them.
    name : str
        What to call it in messages.
    base : Path, optional
        Folder that relative paths of catalogues and envelopes start from.

    Returns
    -------
    BeamProblem
        The beam, ready for design.

    Raises
    ------
    JobError
        If anything in it cannot be used.
    """
    if "section" in data and "beam" not in data:
        msg = f"{name}: section: a job of sections, no [beam]; hint: cagewright rank reads it"
        raise JobError(msg)
    keys, edition = read_keys(data, BeamJobKeys, name, first_entry=1)
    check_title(keys.title, name)
    return _BeamReader(keys, edition, name, base).problem()


class _BeamReader(SizeReader):
    """Builds the problem from the keys and the defaults."""

    def __init__(self, job: BeamJobKeys, edition: Edition, name: str, base: Path | None) -> None:
        mark = job.beam.mark
        if not mark.isprintable() or not mark.strip():
            msg = f"{name}: beam.mark: got {short(repr(mark))}; allowed: printable text"
            raise JobError(msg)
        super().__init__(job, edition, name, base)
        self.of_beam = self.where

    def problem(self) -> BeamProblem:
        """Build the problem."""
        keys, units = self.keys, self.edition.units
        for key in _OF_SHORT_LISTS:
            if (value := getattr(self.job.ranking, key)) is not None:
                msg = (
                    f"{self.name}: ranking.{key}: got {quoted(value)}; a beam has one best design"
                    " and no short list; hint: leave it out"
                )
                raise JobError(msg)
        catalog, concrete, steel = self.catalog(), self._concrete(), self._steel()
        stirrups = self._bars("stirrups", keys.stirrups, catalog, STIRRUPS)
        self._check_stirrups(stirrups)
        supports = read_supports(self.job.support, concrete, self.name)
        overhangs = read_overhangs(self.job, self.name)
        marks = span_marks(supports, overhangs)
        analysis = self._analysis()
        bare = self._beam(supports, overhangs, marks, analysis)
        spans, sections, given = [], [], []
        for number, (span, own) in enumerate(zip(bare.spans, self.job.span, strict=True)):
            self.where = self._place(number, span.mark)
            outline = self._span_outline(own, bare.clear_length(number))
            spans.append(replace(span, outline=outline))
            sections.append(
                self._span_section(
                    mark=span.mark,
                    outline=outline,
                    concrete=concrete,
                    steel=steel,
                    stirrups=stirrups,
                    clear_span=bare.clear_length(number),
                )
            )
            if analysis is Analysis.GIVEN:
                given.append(self._envelope(own, bare, number))
        self.where = self.of_beam
        ranking = self._ranking(_WORK_LIMIT)
        return BeamProblem(
            title=self.job.title,
            mark=keys.mark,
            edition=self.edition,
            beam=Beam(spans=tuple(spans), supports=supports),
            sections=tuple(sections),
            catalog=catalog,
            rules=self._rules(catalog),
            ranking=ranking,
            analysis=analysis,
            given=tuple(given),
            redistribution=keys.redistribution,
            stirrups=stirrups,
            stirrup_steel=self._stirrup_steel(steel),
            stirrup_step=keys.stirrup_step or STEP[units],
            hangers=self._bars("hangers", keys.hangers, catalog, HANGERS),
            skin=self._bar("skin_bar", keys.skin_bar, catalog, SKIN),
            flange_bar=self._bar("flange_bar", keys.flange_bar, catalog, FLANGE),
            perimeter=keys.edge == "perimeter",
            closed_stirrups=self._closed_stirrups(),
            attached=Attached(keys.attached),
            sustained=keys.sustained,
            stock=self._stock(),
            length_step=keys.length_step or STEP[units],
            most_sizes=keys.most_sizes,
            most_marks=keys.most_marks,
            work_limit=ranking.work_limit,
        )

    def _place(self, number: int, mark: str) -> str:
        return f'{self.name}: span {number + 1} "{mark}"'

    def _beam(
        self,
        supports: tuple[Support, ...],
        overhangs: list[Overhang],
        marks: list[str],
        analysis: Analysis,
    ) -> Beam:
        """The beam with its loads, of webs only: flanges follow from its clear spans."""
        spans = []
        for number, (own, mark) in enumerate(zip(self.job.span, marks, strict=True)):
            self.where = self._place(number, mark)
            web, depth = self._size(own, "width"), self._size(own, "depth")
            spans.append(
                Span(
                    mark=mark,
                    length=own.length,
                    outline=Outline(web=web, depth=depth),
                    loads=()
                    if analysis is Analysis.GIVEN
                    else read_loads(own, self._weight(web, depth), self.edition, self.where),
                    overhang=overhangs[number],
                )
            )
            self._check_clear(number, supports, overhangs)
        self.where = self.of_beam
        if analysis is not Analysis.GIVEN and not any(span.loads for span in spans):
            msg = (
                f"{self.where}, self_weight: false, and no span has a load; hint: give dead, live"
                " or loads"
            )
            raise JobError(msg)
        with self._key("span"):
            return Beam(spans=tuple(spans), supports=supports)

    def _check_clear(
        self, number: int, supports: tuple[Support, ...], overhangs: list[Overhang]
    ) -> None:
        """Something has to be left between the faces of the supports."""
        first = number - (1 if overhangs[0] is Overhang.LEFT else 0)
        ends = [supports[i] for i in (first, first + 1) if 0 <= i < len(supports)]
        taken = sum(support.width for support in ends) / 2.0
        length = self.job.span[number].length
        if length <= taken:
            msg = (
                f"{self.where}, length: got {far_length(length, self.edition)}, of which supports"
                f" take {far_length(taken, self.edition)}; allowed: more than that"
            )
            raise JobError(msg)

    def _size(self, own: SpanKeys, key: str) -> float:
        value: float | None = getattr(own, key)
        value = getattr(self.keys, key) if value is None else value
        if value is None:
            msg = f"{self.where}, {key}: missing; expected in [beam] or in the span"
            raise JobError(msg)
        return value

    def _span_outline(self, own: SpanKeys, clear: float) -> Outline:
        """Outline of a span; a flange or slab of its own takes the place of the beam's."""
        level = own if own.slab is not None or own.flange is not None else self.keys
        slab = None
        if level.slab is not None:
            with self._key("slab"):
                slab = Slab(**level.slab.model_dump(), span=clear)
        web, depth = self._size(own, "width"), self._size(own, "depth")
        return self._outline(web, depth, flange=level.flange, slab=slab)

    def _span_section(self, *, stirrups: tuple[Bar, ...], **parts: Any) -> Section:
        """Section of a span; every stirrup allowed has to leave room for bars in it."""
        options = [
            self._section_of(
                Mu=1.0,  # replaced by the demand at each place of the beam
                cover=self.keys.cover,
                exposure=self.keys.exposure,
                stirrup=stirrup,
                **parts,
            )
            for stirrup in stirrups
        ]
        return options[0]

    def _weight(self, web: float, depth: float) -> float:
        """Weight of the web over its whole depth; a slab belongs to the dead load. [lbf/in, N/mm]

        The corner that web and slab share is so counted here, and the slab beyond it is not.
        """
        if self.keys.self_weight is False:
            return 0.0
        density = self.keys.concrete_weight or _CONCRETE_WEIGHT[self.edition.units]
        return density * web * depth

    def _analysis(self) -> Analysis:
        """Where the moments come from; keys that only loads give a meaning are refused."""
        keys = self.keys
        if keys.self_weight is False and keys.concrete_weight is not None:
            msg = f"{self.where}, concrete_weight: of no use with self_weight = false"
            raise JobError(msg)
        given = [span.envelope is not None for span in self.job.span]
        if not any(given):
            analysis = Analysis(keys.analysis or "elastic")
            if analysis is Analysis.COEFFICIENTS and keys.redistribution > 0.0:
                msg = (
                    f"{self.where}, redistribution: got {keys.redistribution:g}; allowed with"
                    " coefficients: 0 (6.5.3)"
                )
                raise JobError(msg)
            return analysis
        for number, span in enumerate(self.job.span, 1):
            where = f"{self.name}: span {number}"
            if span.envelope is None:
                msg = f"{where}, envelope: missing; allowed: in all spans or in none"
                raise JobError(msg)
            for key in ("dead", "live", "loads"):
                if getattr(span, key) is not None:
                    msg = f"{where}, {key}: got loads and an envelope; allowed: one of them"
                    raise JobError(msg)
        refused = {
            "analysis": keys.analysis,
            "redistribution": keys.redistribution or None,
            "self_weight": keys.self_weight or None,
            "concrete_weight": keys.concrete_weight,
        }
        for key, value in refused.items():
            if value is not None:
                msg = (
                    f"{self.where}, {key}: of no use beside envelopes of your own;"
                    " hint: leave it out"
                )
                raise JobError(msg)
        return Analysis.GIVEN

    def _envelope(self, own: SpanKeys, beam: Beam, number: int) -> SpanDemand:
        path = Path(own.envelope or "")
        full = path if self.base is None else self.base / path
        with self._key("envelope"):
            return read_envelope(full, own.length, beam.clear_range(number), self.edition)
