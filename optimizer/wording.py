"""Sentences that every report shares: what is proved, what is not checked, the caution."""

from __future__ import annotations

from typing import TYPE_CHECKING

from optimizer.results import RankedSection

if TYPE_CHECKING:
    from optimizer.options import OptionsResult, SectionOptions

NOT_CHECKED = (
    "Not checked: shear, torsion, deflection, cut-offs and anchorage, axial force, isolated"
    " T-sections (6.3.2.2), aggregate against form and slab, lateral bracing, seismic detailing,"
    " fire, corrosion, fatigue."
)
CAUTION = (
    "For review by a licensed design professional. The local code and the authority having"
    " jurisdiction govern."
)


def proof_of(result: RankedSection) -> str:
    """Say what the search has proved about a short list.

    Parameters
    ----------
    result : RankedSection
        Section with a short list.

    Returns
    -------
    str
        One paragraph.
    """
    ranking = result.problem.ranking
    if not result.proved:
        return (
            "NOT PROVED: the work limit stopped the search; better layouts may exist."
            " Raise work_limit."
        )
    value = "score" if ranking.by == "practical" else "mass"
    of_kind = variety = ""
    if ranking.per_pattern is not None:
        of_kind = " of another kind"
        variety = (
            " Variety: of layouts with one largest size and number of layers the best"
            f" {ranking.per_pattern} are listed; others of that kind are left out for that reason"
            ' alone (variety = "off" lists them).'
        )
    if result.closing_value is None:
        other = "no other kind of layout" if variety else "no other layout"
        return f"Proved: {other} meets every rule.{variety}"
    closing = f"{result.closing_value:.2f}"
    return f"Proved: nothing{of_kind} left out has a {value} below {closing}.{variety}"


def exemption_of(result: RankedSection) -> str:
    """Say which lines rely on the exemption from minimum steel.

    Parameters
    ----------
    result : RankedSection
        Section with a short list.

    Returns
    -------
    str
        One sentence; empty if none does.
    """
    lines = [
        str(number)
        for number, item in enumerate(result.layouts, 1)
        if any(row.clause == "9.6.1.3" for row in item.checked.checks)
    ]
    if not lines:
        return ""
    return (
        f"Relying on 9.6.1.3 (less steel than 9.6.1.2 asks, but 4/3 of what strength needs, at"
        f" every section of the beam): line {', '.join(lines)}."
    )


def trade_off_proof_of(section: SectionOptions) -> str:
    """Say what is proved about the options of a section.

    Parameters
    ----------
    section : SectionOptions
        Options of a section.

    Returns
    -------
    str
        One or two sentences.
    """
    count = len(section.trade_off)
    if not section.proved:
        found = "better options may exist" if count else "no option was found, but some may exist"
        return f"NOT PROVED: the work limit stopped the search; {found}. Raise work_limit."
    if not count:
        return "Proved: no layout within the levers passes every check."
    priced = section.order_survives is not None
    aims = ["mass", "bars", "sizes", "layers", "labour"]
    if priced:
        aims += ["cost", "carbon"]
    elif section.problem.levers.envelope:
        aims.append("concrete")
    text = (
        f"Proved: the trade-off set holds all {count} layouts that no other within the levers"
        f" beats: none is as good in all of {', '.join(aims)} and better in one."
    )
    if priced:
        orders = (("cost", section.order_survives), ("carbon", section.carbon_order_survives))
        for name, survives in orders:
            keep = "keep" if survives else "do NOT keep"
            text += f" Sorted by {name} they {keep} their order with low and high factors."
    return text


def price_notes_of(result: OptionsResult) -> str:
    """Warn of prices that are for demonstration only, and of sizes that nothing has.

    Parameters
    ----------
    result : OptionsResult
        Options of a job.

    Returns
    -------
    str
        Sentences; empty if there is nothing to warn of.
    """
    prices, unknown = result.job.prices, result.job.unknown_priced
    notes = []
    if prices is not None and prices.invented:
        notes.append(f"Prices of list {prices.name!r} are INVENTED, for demonstration only.")
    if prices is not None and unknown:
        notes.append(
            f"List {prices.name!r} has prices for {', '.join(unknown)}, which no bar catalogue of"
            " the job has: a misspelt size gets the price for all sizes."
        )
    return " ".join(notes)
