"""Options against drawn layouts as a page: what changes, what it saves, what to agree to."""

from __future__ import annotations

from dataclasses import dataclass

from optimizer.documents import inputs
from optimizer.documents.page_differences import (
    BandLine,
    DifferenceLine,
    band_lines,
    difference_lines,
    range_of,
    unit_of,
)
from optimizer.documents.page_palette import palette_view
from optimizer.documents.page_parts import LayoutView, layout_view, use_of, verdict_of
from optimizer.documents.plot import options_plot
from optimizer.documents.rendering import render
from optimizer.documents.svg import small_cross_section
from optimizer.documents.wording import Figures, visible
from optimizer.measures import Measures
from optimizer.options import Option, OptionsResult, SectionOptions
from optimizer.results import RatedLayout
from optimizer.wording import price_notes_of, trade_off_proof_of

Pair = tuple[str, str]

_WORKED_OUT = 2  # options with the calculation on the page; the others have the check rows


@dataclass(frozen=True, slots=True, kw_only=True)
class ChoiceLine:
    """The drawn layout or a chosen option in the table of a section, as text."""

    label: str
    layers: list[str]
    mass: str
    bars: int
    labour: str
    strength: str
    use: str
    cost: str
    cost_range: str
    carbon: str
    carbon_range: str
    best_at: str
    levers: list[str]
    small: str


@dataclass(frozen=True, slots=True, kw_only=True)
class OptionView:
    """One chosen option: its layout, what changes and what to agree to."""

    layout: LayoutView
    levers: list[tuple[str, str, str]]
    differences: list[DifferenceLine]
    bands: list[BandLine]
    accept: list[str]


@dataclass(frozen=True, slots=True, kw_only=True)
class OptionsView:
    """One section of the page."""

    number: int
    mark: str
    verdict: str
    good: bool
    drawn_label: str
    mass: str
    use: str
    count: int
    lightest: str
    lightest_mass: str
    inputs: list[Pair]
    levers: list[Pair]
    lines: list[ChoiceLine]
    plot: str
    proof: str
    proved: bool
    drawn: LayoutView
    options: list[OptionView]


def options_html(result: OptionsResult) -> str:
    """Write options as a page.

    Parameters
    ----------
    result : OptionsResult
        Result of a job.

    Returns
    -------
    str
        HTML with its style and drawings inside; equal results give equal text.
    """
    job = result.job
    figures = Figures(job.edition)
    currency = "" if job.prices is None else job.prices.currency
    without = [problem.section.mark for problem in job.problems if problem.drawn is None]
    return render(
        "options.html.j2",
        edition=job.edition,
        title=job.title,
        kind="Options against drawn layouts",
        sections=[_section(item, number, result) for number, item in enumerate(result.sections, 1)],
        without=visible(", ".join(without)),
        palette=palette_view(result),
        invented=visible(price_notes_of(result)),
        money=unit_of("money", figures, currency) if currency else "",
        carbon=unit_of("carbon", figures, currency),
    )


def _section(item: SectionOptions, number: int, result: OptionsResult) -> OptionsView:
    problem, drawn = item.problem, item.drawn.checked
    section, prices = problem.section, result.job.prices
    figures = Figures(section.edition)
    lightest = min(item.trade_off, key=lambda one: one.measures.mass, default=None)
    lines = [_line("drawn", item.drawn, item.drawn_measures, figures)]
    lines += [
        _line(str(option.number), option.rated, option.measures, figures, option)
        for option in item.chosen
    ]
    return OptionsView(
        number=number,
        mark=visible(section.mark),
        verdict=verdict_of(drawn),
        good=drawn.ok,
        drawn_label=visible(drawn.layout.label),
        mass=figures.of("mass_per_length", item.drawn_measures.mass),
        use=use_of(drawn),
        count=len(item.trade_off),
        lightest="" if lightest is None else visible(lightest.checked.layout.label),
        lightest_mass=""
        if lightest is None
        else figures.of("mass_per_length", lightest.measures.mass),
        inputs=inputs.section_inputs(section),
        levers=inputs.lever_inputs(problem, prices),
        lines=lines,
        plot=options_plot(item) if item.trade_off else "",
        proof=trade_off_proof_of(item),
        proved=item.proved,
        drawn=layout_view(drawn, "Drawn", figures),
        options=[
            _option(option, item, figures, "" if prices is None else prices.currency, place)
            for place, option in enumerate(item.chosen)
        ],
    )


def _line(
    label: str,
    rated: RatedLayout,
    measures: Measures,
    figures: Figures,
    option: Option | None = None,
) -> ChoiceLine:
    checked = rated.checked
    cost, carbon = measures.cost, measures.carbon
    return ChoiceLine(
        label=label,
        layers=[visible(layer.label) for layer in checked.layout.layers],
        mass=f"{measures.mass:.2f}",
        bars=measures.bars,
        labour=f"{measures.labour:.2f}",
        strength=f"{figures.system.to_trade('moment', checked.phi_Mn):.1f}",
        use=use_of(checked),
        cost="" if cost is None else f"{cost.typical:.2f}",
        cost_range="" if cost is None else range_of(cost, 2),
        carbon="" if carbon is None else f"{carbon.typical:.1f}",
        carbon_range="" if carbon is None else range_of(carbon, 1),
        best_at=verdict_of(checked) if option is None else ", ".join(option.reasons),
        levers=[]
        if option is None
        else [f"{key} {visible(after)}" for key, _, after in option.levers],
        small=small_cross_section(checked),
    )


def _option(
    option: Option, item: SectionOptions, figures: Figures, currency: str, place: int
) -> OptionView:
    name = f"Option {option.number}, {', '.join(option.reasons)}"
    return OptionView(
        layout=layout_view(option.checked, name, figures, work_out=place < _WORKED_OUT),
        levers=[(key, visible(before), visible(after)) for key, before, after in option.levers],
        differences=difference_lines(option.differences, figures, currency),
        bands=band_lines(item.drawn_measures, option.measures, figures, currency),
        accept=[visible(point) for point in option.accept],
    )
