"""A result as one page of HTML: opens from disk, prints, needs nothing from outside."""

from __future__ import annotations

from dataclasses import dataclass

from optimizer.documents import inputs
from optimizer.documents.options_page import options_html
from optimizer.documents.page_parts import (
    DiagnosisView,
    LayoutView,
    ListLine,
    diagnosis_view,
    labels_of,
    layout_view,
    list_line,
    use_of,
    verdict_of,
)
from optimizer.documents.plot import strength_plot
from optimizer.documents.rendering import render
from optimizer.documents.wording import Figures, visible
from optimizer.options import OptionsResult
from optimizer.results import (
    CheckedSection,
    CheckResult,
    RankedSection,
    RankResult,
)
from optimizer.scoring import TERMS
from optimizer.wording import proof_of

Pair = tuple[str, str]


@dataclass(frozen=True, slots=True, kw_only=True)
class SectionView:
    """One section of the page; empty lists and None where a part does not occur."""

    number: int
    mark: str
    answer: str
    good: bool
    layout: str
    mass: str
    use: str
    inputs: list[Pair]
    search: list[Pair]
    terms: list[Pair]
    ranked_by: str
    lines: list[ListLine]
    plot: str
    proof: str
    layouts: list[LayoutView]
    diagnosis: DiagnosisView | None


def page_html(result: RankResult | CheckResult | OptionsResult) -> str:
    """Write a result as a page.

    Parameters
    ----------
    result : RankResult, CheckResult or OptionsResult
        Result of a job.

    Returns
    -------
    str
        HTML with its style and drawings inside; equal results give equal text.
    """
    if isinstance(result, OptionsResult):
        return options_html(result)
    if isinstance(result, RankResult):
        kind = "Ranked bar layouts"
        sections = [_ranked(item, number) for number, item in enumerate(result.sections, 1)]
    else:
        kind = "Check of given bar layouts"
        sections = [_checked(item, number) for number, item in enumerate(result.sections, 1)]
    return render(
        "page.html.j2",
        edition=result.job.edition,
        title=result.job.title,
        kind=kind,
        terms=TERMS,
        sections=sections,
    )


def _ranked(result: RankedSection, number: int) -> SectionView:
    section, ranking = result.section, result.problem.ranking
    figures = Figures(section.edition)
    labels = labels_of(result.layouts)
    best = result.layouts[0].checked if result.layouts else None
    return SectionView(
        number=number,
        mark=visible(section.mark),
        answer=_answer(result),
        good=best is not None,
        layout="" if best is None else visible(best.layout.label),
        mass="" if best is None else figures.of("mass_per_length", best.layout.mass),
        use="" if best is None else use_of(best),
        inputs=inputs.section_inputs(section),
        search=inputs.search_inputs(result.problem),
        terms=inputs.score_terms(ranking, figures),
        ranked_by=ranking.by,
        lines=[
            list_line(item, label, figures)
            for item, label in zip(result.layouts, labels, strict=True)
        ],
        plot=strength_plot(result, labels) if result.layouts else "",
        proof=proof_of(result) if result.layouts else "",
        layouts=[
            layout_view(item.checked, ", ".join((f"Line {label}", *item.marks)), figures)
            for item, label in zip(result.layouts, labels, strict=True)
            if item.rank == 1 or item.marks
        ],
        diagnosis=None if result.diagnosis is None else diagnosis_view(result.diagnosis, figures),
    )


def _checked(result: CheckedSection, number: int) -> SectionView:
    section, checked = result.section, result.layout.checked
    figures = Figures(section.edition)
    return SectionView(
        number=number,
        mark=visible(section.mark),
        answer=verdict_of(checked),
        good=checked.ok,
        layout=visible(checked.layout.label),
        mass=figures.of("mass_per_length", checked.layout.mass),
        use=use_of(checked),
        inputs=inputs.section_inputs(section),
        search=[],
        terms=[],
        ranked_by="",
        lines=[],
        plot="",
        proof="",
        layouts=[layout_view(checked, "Layout given", figures)],
        diagnosis=None,
    )


def _answer(result: RankedSection) -> str:
    if result.layouts:
        listed = sum(item.rank is not None for item in result.layouts)
        return f"{listed} layout{'' if listed == 1 else 's'} listed"
    return "no layout" if result.proved else "no layout found, not proved"
