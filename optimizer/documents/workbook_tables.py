"""Check rows, notes and remedies of a result as tables."""

from __future__ import annotations

from collections.abc import Iterable, Iterator

from engine import CheckedLayout
from engine.units import plain
from optimizer._version import VERSION
from optimizer.diagnosis import Diagnosis
from optimizer.documents.short_list_table import Result, ResultSection, decimals, finite, layouts_of
from optimizer.documents.tables import Cell, Column, Table
from optimizer.results import CheckResult, RankedSection
from optimizer.wording import CAUTION, NOT_CHECKED, exemption_of, proof_of

# Strains need more decimals than moments, areas and lengths, and share their column.
_ANY_SIZE = "[<0.1]0.00000;0.00"

_CHECK_COLUMNS = (
    Column(name="section", width=18, wrap=True),
    Column(name="shown as", width=15),
    Column(name="line", number_format="0", width=6),
    Column(name="layout", width=22, wrap=True),
    Column(name="check", width=19),
    Column(name="clause", width=13),
    Column(name="demand", number_format=_ANY_SIZE, width=11),
    Column(name="limit", number_format=_ANY_SIZE, width=11),
    Column(name="unit", width=8),
    Column(name="use", number_format="0%", width=7),
    Column(name="verdict", width=14),
    Column(name="note", width=60, wrap=True),
)
NOTE_COLUMNS = (
    Column(name="subject", width=24, wrap=True),
    Column(name="section", width=20, wrap=True),
    Column(name="note", width=100, wrap=True),
)

GENERAL_NOTES = (
    ("caution", CAUTION),
    ("not checked", NOT_CHECKED),
    ("basis", "Strength by strain compatibility with the equivalent rectangular stress block,"
     " every bar at its own depth, steel elastic and then perfectly plastic."),
    ("signs", "Mu and Ms are positive where the bottom face is in tension."),
    ("mass", "Of the bars of the layout alone, per length of beam: without stirrups, laps, hooks"
     " and the bars opposite."),
    ("use", "Demand over capacity; 100 % is the limit. In the short list: Mu over phi Mn."),
    ("eps_t", "Net tensile strain at the centroid of layer 1."),
    ("smallest gap", "Clear gap of the pair of bars with the least to spare, and what it is"
     " of the gap required (25.2.1, or the job's where larger)."),
)  # fmt: skip
_RANK_NOTES = (
    ("line", "Place in the list, best first. Layouts without a number stand beside the list: the"
     " lightest and the one of fewest bars of all that pass, where they are not in it."),
    ("score", "Placed cost in equivalent steel mass per length: the sum of its terms. Not an"
     " official index; none exists."),
    ("score, steel", "Mass times (1 + k r) / (1 + k) for each size: k is labour_share, r the"
     " fixing labour of its diameter relative to thick bars. r is published; k is judgement."),
    ("score, other terms", "per_bar for each bar, per_extra_layer and per_extra_size for each"
     " layer and size beyond the first, tight_gap for each bar times what its layer's smallest"
     " gap lacks of preferred_gap. These constants are judgement; the job may set them."),
)  # fmt: skip


def checks_table(result: Result) -> Table:
    """Make the table of all check rows.

    Parameters
    ----------
    result : RankResult or CheckResult
        Result of a job.

    Returns
    -------
    Table
        Every row of every layout shown; where none passes, those of the strongest that fits.
    """
    return table_of_checks(shown for section in result.sections for shown in _shown(section))


def table_of_checks(shown: Iterable[tuple[str, int | None, CheckedLayout]]) -> Table:
    """Make the table of the check rows of any layouts.

    Parameters
    ----------
    shown : iterable of (str, int or None, CheckedLayout)
        What the layout is, its line, and its check.

    Returns
    -------
    Table
        Every row of every layout.
    """
    rows = [
        row for shown_as, line, checked in shown for row in _check_rows(checked, shown_as, line)
    ]
    return Table(name="Checks", columns=_CHECK_COLUMNS, rows=tuple(rows))


def _shown(section: ResultSection) -> Iterator[tuple[str, int | None, CheckedLayout]]:
    for rated in layouts_of(section):
        if not isinstance(section, RankedSection):
            yield "given", None, rated.checked
        else:
            yield "listed" if rated.rank else "beside the list", rated.rank, rated.checked
    diagnosis = section.diagnosis if isinstance(section, RankedSection) else None
    if diagnosis is not None and diagnosis.strongest is not None:
        yield "strongest fit", None, diagnosis.strongest


def _check_rows(
    checked: CheckedLayout, shown_as: str, line: int | None
) -> Iterator[tuple[Cell, ...]]:
    system = checked.section.edition.system
    for check in checked.checks:
        demand, limit = (
            None if value is None else finite(system.to_trade(check.quantity, value))
            for value in (check.demand, check.limit)
        )
        yield (
            checked.section.mark,
            shown_as,
            line,
            checked.layout.label,
            check.id,
            check.clause,
            demand,
            limit,
            system.trade.get(check.quantity) if check.demand is not None else None,
            finite(check.ratio),
            check.state.value if check.ok else check.state.value.upper(),
            check.note or None,
        )


def notes_table(result: Result) -> Table:
    """Make the table of what has to be known beside the figures.

    Parameters
    ----------
    result : RankResult or CheckResult
        Result of a job.

    Returns
    -------
    Table
        Assumptions, what is not checked, the caution, and each section's proof.
    """
    job = result.job
    rows: list[tuple[Cell, ...]] = [
        ("job", None, job.title or "without a title"),
        ("code", None, job.edition.name),
        ("made with", None, f"Cagewright {VERSION}"),
    ]
    notes = GENERAL_NOTES if isinstance(result, CheckResult) else GENERAL_NOTES + _RANK_NOTES
    rows += [(subject, None, note) for subject, note in notes]
    rows += [
        (subject, section.section.mark, note)
        for section in result.sections
        for subject, note in _section_notes(section)
    ]
    return Table(name="Notes", columns=NOTE_COLUMNS, rows=tuple(rows))


def _proof(section: RankedSection) -> str:
    if section.layouts:
        return proof_of(section)
    if section.proved:
        return "Proved: no layout meets every rule."
    return (
        "No layout found, and NOT PROVED that there is none: the work limit stopped the search."
        " Raise work_limit."
    )


def _section_notes(section: ResultSection) -> Iterator[tuple[str, str]]:
    asked = section.section
    if isinstance(section, RankedSection):
        yield "proof", _proof(section)
        exempt = exemption_of(section)
        if exempt:
            yield "minimum steel", exempt
        if section.mass_floor is not None:
            unit = asked.edition.system.trade["mass_per_length"]
            floor = f"{section.mass_floor:.2f} {unit}"
            yield (
                "mass floor",
                f"{floor}: divisible steel at the greatest depth of any bar allowed.",
            )
        if section.diagnosis is not None:
            yield "no layout", _why(section, section.diagnosis)
    if asked.Ms is None:
        yield "crack control", "No service moment given: steel stress 2/3 fy, as 24.3.2.1 permits."
    if not asked.exposure_given:
        yield "exposure", f"Not given: {asked.exposure.value} taken, {asked.exposure.meaning}."
    if asked.opposite is not None and not asked.count_opposite:
        yield "opposite bars", f"{asked.opposite.label}: placed, not counted in the strength."


def _why(section: RankedSection, diagnosis: Diagnosis) -> str:
    system = section.section.edition.system
    parts = []
    blocks = [f"{block.id} ({block.families} of {block.of})" for block in diagnosis.blocked_by]
    if blocks:
        parts.append(f"What blocks, in how many families of layouts: {', '.join(blocks)}.")
    strongest = diagnosis.strongest
    if strongest is None:
        parts.append("No layout meets the rules other than strength either.")
    else:
        moment = f"{system.to_trade('moment', strongest.phi_Mn):.1f} {system.trade['moment']}"
        share = f"{plain(100 * strongest.phi_Mn / section.section.demand)} % of Mu"
        parts.append(f"Strongest that fits: {strongest.layout.label}, phi Mn {moment}, {share}.")
    return " ".join(parts)


def remedies_table(result: Result) -> Table | None:
    """Make the table of single changes that make a layout possible.

    Parameters
    ----------
    result : RankResult or CheckResult
        Result of a job.

    Returns
    -------
    Table or None
        One row a change, verified by a search; None if every section has a layout.
    """
    found = [
        (section, section.diagnosis)
        for section in result.sections
        if isinstance(section, RankedSection) and section.diagnosis is not None
    ]
    if not found:
        return None
    system = result.job.edition.system
    form = decimals(system)
    rows: list[tuple[Cell, ...]] = []
    for section, diagnosis in found:
        mark, Mu = section.section.mark, system.to_trade("moment", section.section.Mu)
        for item in diagnosis.remedies:
            best, strength = item.best, system.to_trade("moment", item.phi_Mn)
            change = (item.key, item.before, item.after)
            rows.append((mark, *change, best.layout.label, best.mass, strength, Mu))
        if not diagnosis.remedies:
            none = "no single change that was tried helps"
            rows.append((mark, none, None, None, None, None, None, Mu))
    columns = (
        Column(name="section", width=20, wrap=True),
        Column(name="key", width=22, wrap=True),
        Column(name="now", width=24, wrap=True),
        Column(name="change to", width=20, wrap=True),
        Column(name="best layout then", width=26, wrap=True),
        Column(
            name="mass",
            unit=system.trade["mass_per_length"],
            number_format=form.mass,
            width=12,
        ),
        Column(name="phi Mn", unit=system.trade["moment"], number_format=form.moment, width=14),
        Column(name="Mu", unit=system.trade["moment"], number_format=form.moment, width=14),
    )
    return Table(name="Remedies", columns=columns, rows=tuple(rows))
