"""Everything that a section was given, as a table: one row an input, named by its job key."""

from __future__ import annotations

from collections.abc import Iterator

from engine import Flange, Section
from optimizer.documents.short_list_table import Result
from optimizer.documents.tables import Cell, Column, Table
from optimizer.options import OptionsResult
from optimizer.problem import Problem

_COLUMNS = (
    Column(name="section", width=20, wrap=True),
    Column(name="key", width=24),
    Column(name="meaning", width=52, wrap=True),
    Column(name="value", width=24, wrap=True),
    Column(name="unit", width=10),
)
_Input = tuple[str, str, Cell, str]


def inputs_table(result: Result | OptionsResult) -> Table:
    """Make the table of inputs.

    Parameters
    ----------
    result : RankResult, CheckResult or OptionsResult
        Result of a job.

    Returns
    -------
    Table
        Rows of every section, in the job's order, defaults written out.
    """
    rows = [
        (section.section.mark, *row)
        for section in result.sections
        for row in _inputs(section.problem)
    ]
    return Table(name="Inputs", columns=_COLUMNS, rows=tuple(rows))


def _inputs(problem: Problem) -> Iterator[_Input]:
    yield "code", "edition of the code", problem.section.edition.name, ""
    yield from _demand(problem.section)
    yield from _materials(problem.section)
    yield from _outline(problem)
    yield from _reinforcement(problem.section)
    if problem.drawn is not None:
        yield "layers", "layout given, layer 1 first", problem.drawn.label, ""
    yield from _bars(problem)
    yield from _ranking(problem)


def _yes(value: bool) -> str:
    return "yes" if value else "no"


def _demand(section: Section) -> Iterator[_Input]:
    system = section.edition.system
    unit = system.trade["moment"]
    yield "Mu", "factored moment, + sagging", system.to_trade("moment", section.Mu), unit
    if section.Ms is None:
        yield "Ms", "service moment", "not given", ""
    else:
        yield "Ms", "service moment, + sagging", system.to_trade("moment", section.Ms), unit


def _materials(section: Section) -> Iterator[_Input]:
    stress, length = section.edition.system.trade["stress"], section.length_unit
    concrete, steel = section.concrete, section.steel
    modulus = "as given" if concrete.modulus is not None else "by 19.2.2.1"
    yield "fc", "specified strength of the concrete", concrete.fc, stress
    yield "lambda", "lightweight factor", concrete.lightweight, ""
    yield "Ec", f"modulus of the concrete, {modulus}", concrete.Ec, stress
    yield "aggregate", "nominal maximum size of the aggregate", section.aggregate, length
    yield "steel", "grade of the bars", steel.name or "not named", ""
    yield "fy", "yield strength of the bars", steel.fy, stress


def _outline(problem: Problem) -> Iterator[_Input]:
    section, outline = problem.section, problem.section.outline
    unit = section.length_unit
    yield "width", "width of the web", outline.web, unit
    yield "depth", "overall depth", outline.depth, unit
    if outline.top is not None:
        yield from _flange("flange", "top flange", outline.top, outline.web, unit)
    if outline.bottom is not None:
        yield from _flange("bottom_flange", "bottom flange", outline.bottom, outline.web, unit)
    slab = problem.slab
    if slab is not None:
        yield "slab.thickness", "slab that the top flange follows from", slab.thickness, unit
        for side, clear in (("left", slab.clear_left), ("right", slab.clear_right)):
            yield f"slab.clear_{side}", f"clear distance to the next web, {side}", clear, unit
        yield "slab.span", "clear span of the beam", slab.span, unit
    if section.clear_span is not None:
        yield "span", "clear span, for 24.3.4", section.clear_span, unit


def _flange(key: str, name: str, flange: Flange, web: float, unit: str) -> Iterator[_Input]:
    left = (flange.width - web) / 2 if flange.left is None else flange.left
    yield f"{key}.width", f"{name}: whole width", flange.width, unit
    yield f"{key}.thickness", f"{name}: thickness", flange.thickness, unit
    yield f"{key}.side", f"{name}: overhang left of the web", left, unit


def _reinforcement(section: Section) -> Iterator[_Input]:
    unit = section.length_unit
    exposure = section.exposure.value
    yield "cover", "clear cover to the stirrup, all faces", section.cover, unit
    yield (
        "exposure",
        section.exposure.meaning,
        exposure if section.exposure_given else f"{exposure} (not given)",
        "",
    )
    yield "stirrup", "stirrup size", section.stirrup.designation, ""
    yield "stirrup", "diameter of the stirrup", section.stirrup.diameter, unit
    yield "stirrup", "inside radius of its bends, 25.3.2", section.bend_radius, unit
    yield "layer_gap", "clear gap between layers", section.layer_gap, unit
    if section.min_gap > 0.0:
        yield "min_gap", "clear gap between bars, beyond the code", section.min_gap, unit
    if section.opposite is not None:
        yield "opposite", "bars at the compression face", section.opposite.label, ""
        counted = _yes(section.count_opposite)
        yield "count_opposite", "whether they count as compression steel", counted, ""
    yield (
        "statically_determinate",
        "whether the flange rule of 9.6.1.2 applies",
        _yes(section.statically_determinate),
        "",
    )
    yield (
        "tension_controlled",
        "whether the section has to be tension-controlled",
        _yes(section.tension_controlled),
        "",
    )


def _bars(problem: Problem) -> Iterator[_Input]:
    rules = problem.rules
    yield "sizes", "sizes allowed", ", ".join(bar.designation for bar in rules.sizes), ""
    yield "max_layers", "most layers", rules.max_layers, ""
    yield "max_sizes", "most sizes in a layout", rules.max_sizes, ""
    yield "size_steps", "most catalogue positions between them", rules.size_steps, ""


def _ranking(problem: Problem) -> Iterator[_Input]:
    ranking, section = problem.ranking, problem.section
    mass = section.edition.system.trade["mass_per_length"]
    pattern: Cell = "no limit" if ranking.per_pattern is None else ranking.per_pattern
    yield "by", "what the list is ordered by", ranking.by, ""
    yield "keep", "length of the list", ranking.keep, ""
    yield "per_pattern", "most lines of one largest size and number of layers", pattern, ""
    yield "labour_share", "fixing labour over steel cost, large bars", ranking.labour_share, ""
    for key, meaning in (
        ("per_bar", "score of each bar"),
        ("per_extra_layer", "score of each layer beyond the first"),
        ("per_extra_size", "score of each size beyond the first"),
        ("tight_gap", "score of each bar in a layer without any gap"),
    ):
        yield key, meaning, getattr(ranking, key), mass
    yield (
        "preferred_gap",
        "gap from which a layer is not tight",
        ranking.preferred_gap,
        section.length_unit,
    )
    yield "work_limit", "work the search may spend on the section", ranking.work_limit, ""
