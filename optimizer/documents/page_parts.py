"""Layouts, list lines and diagnoses as the page's templates take them: texts and drawings."""

from __future__ import annotations

from dataclasses import dataclass
from string import ascii_lowercase

from engine import CheckedLayout
from engine.units import plain
from optimizer.diagnosis import Diagnosis
from optimizer.documents.calculation import Calculation, worked_check
from optimizer.documents.svg import cross_section, small_cross_section
from optimizer.documents.wording import CheckLine, Figures, check_line, heading, visible
from optimizer.results import RatedLayout
from optimizer.scoring import TERMS

Pair = tuple[str, str]


@dataclass(frozen=True, slots=True, kw_only=True)
class LayoutView:
    """One layout with everything that the page says about it.

    Attributes
    ----------
    title, verdict : str
        Heading, and whether it passes.
    passes : bool
        Whether no rule is broken.
    drawing : str
        Cross-section, an ``svg`` element.
    facts : list of (str, str)
        The main figures.
    checks : list of CheckLine
        All rows.
    calculation : Calculation or None
        The worked check, where it is asked for.
    """

    title: str
    verdict: str
    passes: bool
    drawing: str
    facts: list[Pair]
    checks: list[CheckLine]
    calculation: Calculation | None


@dataclass(frozen=True, slots=True, kw_only=True)
class ListLine:
    """One line of the short list as text; `label` names it in list, plot and drawings."""

    label: str
    layers: list[str]
    mass: str
    score: str
    terms: list[str]
    strength: str
    use: str
    strain: str
    gap: str
    gap_aggregate: str
    bars: int
    marks: str
    small: str


@dataclass(frozen=True, slots=True, kw_only=True)
class DiagnosisView:
    """Why a section has no layout, as text."""

    blocked: list[tuple[str, int, int]]
    strongest: LayoutView | None
    remedies: list[tuple[str, str, str, str, str, str]]


def use_of(checked: CheckedLayout) -> str:
    """Write Mu over phi Mn as a percentage; empty without strength."""
    return f"{100 * checked.section.demand / checked.phi_Mn:.0f} %" if checked.phi_Mn > 0 else ""


def labels_of(layouts: tuple[RatedLayout, ...]) -> list[str]:
    """Rank of a line, or a letter for a layout shown beside the list."""
    letters = iter(ascii_lowercase)
    return [next(letters) if item.rank is None else str(item.rank) for item in layouts]


def list_line(rated: RatedLayout, label: str, figures: Figures) -> ListLine:
    """Write one line of the short list.

    Parameters
    ----------
    rated : RatedLayout
        Layout with its score.
    label : str
        Its name in the list.
    figures : Figures
        Units.

    Returns
    -------
    ListLine
        Its texts and small drawing.
    """
    checked = rated.checked
    tightest = min(layer.gap / layer.gap_required for layer in checked.placement.layers)
    return ListLine(
        label=label,
        layers=[visible(layer.label) for layer in checked.layout.layers],
        mass=f"{checked.layout.mass:.2f}",
        score=f"{rated.score.total:.2f}",
        terms=[f"{getattr(rated.score, term):.2f}" for term in TERMS],
        strength=f"{figures.system.to_trade('moment', checked.phi_Mn):.1f}",
        use=use_of(checked),
        strain=f"{checked.eps_t:.4f}",
        gap=f"{tightest:.2f}",
        gap_aggregate=_gap_over_aggregate(checked),
        bars=checked.layout.count,
        marks=", ".join((*rated.marks, *_reliance(checked))),
        small=small_cross_section(checked),
    )


def _reliance(checked: CheckedLayout) -> tuple[str, ...]:
    """The exemption from minimum steel, where a layout relies on it."""
    relies = any(row.id == "minimum_steel" and row.clause == "9.6.1.3" for row in checked.checks)
    return ("relies on 9.6.1.3",) if relies else ()


def _gap_over_aggregate(checked: CheckedLayout) -> str:
    aggregate = checked.section.aggregate
    return f"{checked.placement.smallest_gap / aggregate:.2f}" if aggregate > 0.0 else ""


def verdict_of(checked: CheckedLayout) -> str:
    """Say whether a layout passes, and if not which rules it breaks."""
    failing = [heading(row.id).lower() for row in checked.checks if not row.ok]
    return f"FAILS: {', '.join(failing)}" if failing else "passes every check"


def layout_view(
    checked: CheckedLayout, name: str, figures: Figures, *, work_out: bool = True
) -> LayoutView:
    """Gather what the page says about one checked layout, wherever it comes from.

    Parameters
    ----------
    checked : CheckedLayout
        Layout with all rows.
    name : str
        What it is called in its heading.
    figures : Figures
        Units.
    work_out : bool
        Whether the calculation belongs to it.

    Returns
    -------
    LayoutView
        Drawing, figures, checks and calculation.
    """
    required = "no amount of these bars" if checked.As_required is None else ""
    return LayoutView(
        title=f"{name}: {visible(checked.layout.label)}",
        verdict=verdict_of(checked),
        passes=checked.ok,
        drawing=cross_section(checked),
        facts=[
            ("A_{s}", figures.of("area", checked.As)),
            ("A_{s,required}", required or figures.of("area", checked.As_required or 0.0)),
            ("steel mass", figures.of("mass_per_length", checked.layout.mass)),
            ("d", figures.length(checked.d)),
            ("d_{t}", figures.length(checked.dt)),
            ("a", figures.length(checked.a)),
            ("c", figures.length(checked.c)),
            ("ε_{t}", f"{checked.eps_t:.5f}"),
            ("M_{n}", figures.moment(checked.Mn)),
            ("φ", f"{checked.phi:.3f}"),
            ("φ M_{n}", figures.moment(checked.phi_Mn)),
            ("M_{u}", figures.moment(checked.section.demand)),
        ],
        checks=[check_line(row, figures) for row in checked.checks],
        calculation=worked_check(checked) if work_out else None,
    )


def diagnosis_view(diagnosis: Diagnosis, figures: Figures) -> DiagnosisView:
    """Write why a section has no layout.

    Parameters
    ----------
    diagnosis : Diagnosis
        What blocks and what helps.
    figures : Figures
        Units.

    Returns
    -------
    DiagnosisView
        Its texts.
    """
    strongest = diagnosis.strongest
    return DiagnosisView(
        blocked=[(heading(item.id), item.families, item.of) for item in diagnosis.blocked_by],
        strongest=None
        if strongest is None
        else layout_view(strongest, "Strongest that meets every other rule", figures),
        remedies=[
            (
                remedy.key,
                visible(remedy.before),
                visible(remedy.after),
                visible(remedy.best.layout.label),
                plain(remedy.best.mass),
                f"{figures.system.to_trade('moment', remedy.phi_Mn):.1f}",
            )
            for remedy in diagnosis.remedies
        ],
    )
