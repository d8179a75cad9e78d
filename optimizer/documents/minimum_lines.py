"""Lines of the worked check about minimum steel."""

from __future__ import annotations

import numpy as np

from engine import CheckedLayout
from engine.minimum_steel import minimum_area, web_for_minimum
from engine.units import plain
from optimizer.documents.lines import Line, compared, row_of
from optimizer.documents.wording import Figures, visible


def minimum(checked: CheckedLayout) -> tuple[Line, ...]:
    """Lines of 9.6.1.

    Parameters
    ----------
    checked : CheckedLayout
        Layout with its strength.

    Returns
    -------
    tuple of Line
        As,min, and the exemption where it is needed.
    """
    section, edition = checked.section, checked.section.edition
    figures = Figures(edition)
    row = row_of(checked, "minimum_steel")
    least = float(minimum_area(section, np.array([checked.d]))[0])
    root, floor = plain(edition.minimum_steel_root), plain(edition.minimum_steel_floor)
    fy = min(section.steel.fy, edition.minimum_steel_yield_cap)
    fc, bw, d = plain(section.concrete.fc), plain(web_for_minimum(section)), plain(checked.d)
    by_area = Line(
        subject="Least steel",
        clause="9.6.1.2",
        formula=f"A_{{s,min}} = max({root} √f′_{{c}}, {floor}) b_{{w}} d / f_{{y}}",
        numbers=f"max({root} √{fc}, {floor}) × {bw} × {d} / {plain(fy)}",
        result=figures.of("area", least),
        note="" if fy == section.steel.fy else f"f_{{y}} taken as {figures.of('stress', fy)}",
    )
    exempt: tuple[Line, ...] = ()
    if row.clause != "9.6.1.2" and checked.As_required is not None:
        required = checked.As_required
        exempt = (
            Line(
                subject="Area that brings φ Mn to Mu at the same depths, plus a third",
                clause="9.6.1.3",
                formula="(4/3) A_{s,required}",
                numbers=f"4/3 × {plain(required)}",
                result=figures.of("area", required * 4.0 / 3.0),
            ),
        )
    demand = least if row.demand is None else row.demand
    verdict = Line(
        subject="Steel provided",
        clause=row.clause,
        formula="A_{s}, at least the least area",
        result=compared(checked.As, demand, figures.unit("area"), least=True, ok=row.ok),
        note=visible(row.note.replace("^2", "²")),
        state=row.state,
        check="minimum_steel",
    )
    return (by_area, *exempt, verdict)
