"""Layouts as JSON data: what every kind of result shares."""

from __future__ import annotations

import math
from typing import Any

from engine import CheckedLayout
from engine.units import UnitSystem
from optimizer.results import RatedLayout
from optimizer.scoring import TERMS


def _finite(value: float) -> float | None:
    return value if math.isfinite(value) else None


def layout_data(rated: RatedLayout, system: UnitSystem) -> dict[str, Any]:
    """One rated layout.

    Parameters
    ----------
    rated : RatedLayout
        Layout with its check and score.
    system : UnitSystem
        Units of the job.

    Returns
    -------
    dict
        Ready for JSON.
    """
    return {
        "rank": rated.rank,
        "marks": list(rated.marks),
        **capacity_data(rated.checked, system),
        "score": rated.score.total,
        "score_terms": {term: getattr(rated.score, term) for term in TERMS},
        "checks": rows_data(rated.checked, system),
    }


def capacity_data(checked: CheckedLayout, system: UnitSystem) -> dict[str, Any]:
    """Bars, positions and capacity of a layout.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.
    system : UnitSystem
        Units of the job.

    Returns
    -------
    dict
        Ready for JSON.
    """
    layers = zip(checked.layout.layers, checked.placement.layers, checked.layer_depths, strict=True)
    return {
        "label": checked.layout.label,
        "layers": [
            {
                "bars": [{"size": bar.designation, "count": count} for bar, count in layer.groups],
                "depth": depth,
                "gap": _finite(placed.gap),
                "gap_required": placed.gap_required,
                "positions": [
                    {"size": size, "x": x, "diameter": diameter}
                    for size, x, diameter in zip(
                        placed.designations, placed.x, placed.diameters, strict=True
                    )
                ],
            }
            for layer, placed, depth in layers
        ],
        "As": checked.As,
        "As_required": checked.As_required,
        "mass_per_length": checked.layout.mass,
        "d": checked.d,
        "dt": checked.dt,
        "Mn": system.to_trade("moment", checked.Mn),
        "phi": checked.phi,
        "phi_Mn": system.to_trade("moment", checked.phi_Mn),
        "a": checked.a,
        "c": checked.c,
        "eps_t": checked.eps_t,
    }


def rows_data(checked: CheckedLayout, system: UnitSystem) -> list[dict[str, Any]]:
    """All check rows of a layout.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.
    system : UnitSystem
        Units of the job.

    Returns
    -------
    list of dict
        Ready for JSON.
    """
    rows = []
    for check in checked.checks:
        demand, limit = (
            None if value is None else system.to_trade(check.quantity, value)
            for value in (check.demand, check.limit)
        )
        rows.append(
            {
                "id": check.id,
                "clause": check.clause,
                "unit": system.trade.get(check.quantity, ""),
                "demand": demand,
                "limit": limit,
                "ratio": check.ratio,
                "ok": check.ok,
                "state": check.state.value,
                "note": check.note,
            }
        )
    return rows
