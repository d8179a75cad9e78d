"""Alternatives to a drawn layout: the trade-off set, a readable choice of it, the project."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from engine import CheckedLayout, Section, check_layout, check_layouts, place
from optimizer.changes import Difference, differences, points_to_accept
from optimizer.errors import DefectError, JobError
from optimizer.job import Job
from optimizer.levers import variants
from optimizer.measures import Band, Measures, measure
from optimizer.palette import Palette, choose_palette
from optimizer.problem import Problem
from optimizer.results import Progress, RatedLayout
from optimizer.scoring import score
from optimizer.tradeoff import trade_off


@dataclass(frozen=True, slots=True, kw_only=True)
class Option:
    """One layout of the trade-off set.

    Attributes
    ----------
    number : int
        Its place in the set, from 1.
    reasons : tuple of str
        What it is best at among all of the set; empty for most.
    levers : tuple of (str, str, str)
        Key, value drawn, value here, beyond the bars themselves.
    rated : RatedLayout
        Positions, full check and score.
    measures : Measures
        Mass, bars, labour, cost, carbon.
    differences : tuple of Difference
        What changes against the drawn layout.
    accept : tuple of str
        What the engineer of record has to agree to.
    """

    number: int
    reasons: tuple[str, ...]
    levers: tuple[tuple[str, str, str], ...]
    rated: RatedLayout
    measures: Measures
    differences: tuple[Difference, ...]
    accept: tuple[str, ...]

    @property
    def checked(self) -> CheckedLayout:
        """Layout in place with its check."""
        return self.rated.checked


@dataclass(frozen=True, slots=True, kw_only=True)
class SectionOptions:
    """Options of one section against its drawn layout.

    Attributes
    ----------
    problem : Problem
        Section, bars allowed, drawn layout.
    drawn : RatedLayout
        The drawn layout with its full check; it may fail.
    drawn_measures : Measures
        Its figures.
    trade_off : tuple of Option
        Every layout that no other beats.
    proved : bool
        Whether the set is complete.
    order_survives, carbon_order_survives : bool or None
        Whether options sorted by cost, and by carbon, keep their order with low and with high
        factors; None without prices.
    """

    problem: Problem
    drawn: RatedLayout
    drawn_measures: Measures
    trade_off: tuple[Option, ...]
    proved: bool
    order_survives: bool | None
    carbon_order_survives: bool | None

    @property
    def section(self) -> Section:
        """Section as drawn."""
        return self.problem.section

    @property
    def chosen(self) -> tuple[Option, ...]:
        """The readable choice: options that are best at something."""
        return tuple(option for option in self.trade_off if option.reasons)


@dataclass(frozen=True, slots=True, kw_only=True)
class OptionsResult:
    """Result of `options`.

    Attributes
    ----------
    job : Job
        The job.
    sections : tuple of SectionOptions
        One for each section with a drawn layout, in the job's order.
    palette : Palette or None
        Choice of sizes for the whole job, if it asks for one.
    """

    job: Job
    sections: tuple[SectionOptions, ...]
    palette: Palette | None

    @property
    def ok(self) -> bool:
        """Whether every drawn layout passes its check."""
        return all(item.drawn.checked.ok for item in self.sections)


def options(job: Job, progress: Progress | None = None) -> OptionsResult:
    """Find alternatives for every section of a job that has a drawn layout.

    Parameters
    ----------
    job : Job
        Job in which at least one section has `layers`.
    progress : callable, optional
        Told the number of sections done, of all, and the mark of the next.

    Returns
    -------
    OptionsResult
        Trade-off sets, and the palette if the job asks for one.

    Raises
    ------
    JobError
        If no section gives a layout.
    """
    drawn = [problem for problem in job.problems if problem.drawn is not None]
    if not drawn:
        msg = 'job: layers: missing; expected in a section, as in layers = ["4 #8", "2 #8"]'
        raise JobError(msg)
    sections = []
    for number, problem in enumerate(drawn):
        if progress is not None:
            progress(number, len(drawn), problem.section.mark)
        sections.append(section_options(job, problem))
    palette = None if job.palette is None else choose_palette(job.problems, job.palette)
    return OptionsResult(job=job, sections=tuple(sections), palette=palette)


def section_options(job: Job, problem: Problem) -> SectionOptions:
    """Find the options of one section.

    Parameters
    ----------
    job : Job
        Job with its prices.
    problem : Problem
        Section with a drawn layout.

    Returns
    -------
    SectionOptions
        The drawn layout and every layout that no other beats.

    Raises
    ------
    DefectError
        If the full check contradicts the search.
    """
    assert problem.drawn is not None  # `options` asks for sections with a drawn layout only
    prices = job.prices
    drawn_check = check_layout(problem.section, problem.drawn)
    drawn = _rated(drawn_check, problem)
    drawn_measures = measure(problem.section, problem.drawn, prices)
    unbeaten, proved = trade_off(variants(problem, problem.levers, prices))
    found = []
    for item in unbeaten:
        section = item.variant.problem.section
        (checked,) = check_layouts(section, [item.layout])
        if not checked.ok:
            broken = ", ".join(row.id for row in checked.checks if not row.ok)
            msg = f"{section.mark}: search accepts {item.layout.label}, check refuses it: {broken}"
            raise DefectError(msg)
        found.append((item, checked, measure(section, item.layout, prices)))
    rated = [_rated(checked, item.variant.problem) for item, checked, _ in found]
    figures = [figure for _, _, figure in found]
    reasons = _reasons(rated, figures, [len(item.variant.changes) for item, _, _ in found])
    return SectionOptions(
        problem=problem,
        drawn=drawn,
        drawn_measures=drawn_measures,
        trade_off=tuple(
            Option(
                number=number + 1,
                reasons=reasons[number],
                levers=item.variant.changes,
                rated=rated[number],
                measures=figures[number],
                differences=differences(drawn_check, drawn_measures, checked, figures[number]),
                accept=points_to_accept(drawn_check, checked, item.variant.changes),
            )
            for number, (item, checked, _) in enumerate(found)
        ),
        proved=proved,
        order_survives=_order_survives([figure.cost for figure in figures]),
        carbon_order_survives=_order_survives([figure.carbon for figure in figures]),
    )


def _rated(checked: CheckedLayout, problem: Problem) -> RatedLayout:
    placement = place(checked.section, checked.layout)
    return RatedLayout(
        rank=None,
        checked=checked,
        score=score(checked.layout, placement, problem.ranking),
    )


def _tightest(rated: RatedLayout) -> float:
    return min(layer.gap / layer.gap_required for layer in rated.checked.placement.layers)


def _reasons(
    rated: list[RatedLayout], figures: list[Measures], levers: list[int]
) -> list[tuple[str, ...]]:
    """What each option is best at, given the number of levers each of them uses."""

    def total(number: int) -> float:
        return round(rated[number].score.total, 6)

    aims: list[tuple[str, Callable[[int], bool], Callable[[int], float]]] = [
        ("lightest", lambda _: True, lambda n: figures[n].mass),
        ("fewest bars", lambda _: True, lambda n: figures[n].bars),
        ("most practical", lambda _: True, total),
        ("least labour", lambda _: True, lambda n: figures[n].labour),
        ("one size", lambda n: figures[n].sizes == 1, total),
        ("one layer", lambda n: figures[n].layers == 1, total),
        ("roomiest gaps", lambda _: True, lambda n: -_tightest(rated[n])),
    ]
    if figures and figures[0].cost is not None:
        aims += [
            ("cheapest", lambda _: True, lambda n: _typical(figures[n], "cost")),
            ("lowest carbon", lambda _: True, lambda n: _typical(figures[n], "carbon")),
        ]
    reasons: list[list[str]] = [[] for _ in rated]
    for name, eligible, value in aims:
        numbers = [number for number in range(len(rated)) if eligible(number)]
        if numbers:
            # Of equals the one that changes least besides the bars, then the most practical.
            values = [(round(value(n), 6), levers[n], total(n), n) for n in numbers]
            best = min(values)[3]
            reasons[best].append(name)
    return [tuple(names) for names in reasons]


def _typical(figure: Measures, name: str) -> float:
    band = figure.cost if name == "cost" else figure.carbon
    return 0.0 if band is None else band.typical


def _order_survives(bands: list[Band | None]) -> bool | None:
    """Whether a figure sorts the options alike with low, typical and high factors."""
    known = [band for band in bands if band is not None]
    if not known:
        return None
    columns = (
        [band.low for band in known],
        [band.typical for band in known],
        [band.high for band in known],
    )
    orders = [
        [n for _, n in sorted((round(value, 6), n) for n, value in enumerate(column))]
        for column in columns
    ]
    return orders[0] == orders[1] == orders[2]
