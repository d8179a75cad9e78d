"""Results as JSON, in the trade's units of the job."""

from __future__ import annotations

import json
import math
from typing import Any

from engine import CheckedLayout
from engine.units import UnitSystem
from optimizer.diagnosis import Diagnosis
from optimizer.results import CheckResult, RankedSection, RankResult, RatedLayout
from optimizer.scoring import TERMS

VERSION = 1
_UNIT_KINDS = ("length", "area", "moment", "stress", "mass_per_length")
CAUTION = (
    "For review by a licensed design professional; local codes and the authority having"
    " jurisdiction govern."
)


def to_json(result: RankResult | CheckResult, *, ascii_only: bool = False) -> str:
    """Write a result as JSON text.

    Parameters
    ----------
    result : RankResult or CheckResult
        Result of a job.
    ascii_only : bool
        Whether other characters are escaped.

    Returns
    -------
    str
        One object; equal results give equal text.
    """
    data = _ranked(result) if isinstance(result, RankResult) else _checked(result)
    return json.dumps(data, ensure_ascii=ascii_only, indent=1, allow_nan=False) + "\n"


def _head(result: RankResult | CheckResult, kind: str) -> dict[str, Any]:
    system = result.job.edition.system
    return {
        "format": f"cagewright/{kind}",
        "version": VERSION,
        "title": result.job.title,
        "code": result.job.edition.name,
        "units": {name: system.trade[name] for name in _UNIT_KINDS},
        "caution": CAUTION,
    }


def _ranked(result: RankResult) -> dict[str, Any]:
    system = result.job.edition.system
    return {
        **_head(result, "rank"),
        "sections": [_ranked_section(section, system) for section in result.sections],
    }


def _ranked_section(section: RankedSection, system: UnitSystem) -> dict[str, Any]:
    data: dict[str, Any] = {
        "mark": section.section.mark,
        "Mu": system.to_trade("moment", section.section.Mu),
        "status": section.status,
        "proved": section.proved,
        "ranked_by": section.problem.ranking.by,
        "mass_floor": section.mass_floor,
    }
    if section.diagnosis is None:
        data["closing_value"] = section.closing_value
        data["candidates"] = [_layout(layout, system) for layout in section.layouts]
    else:
        data |= _diagnosis(section.diagnosis, system)
    return data


def _checked(result: CheckResult) -> dict[str, Any]:
    system = result.job.edition.system
    return {
        **_head(result, "check"),
        "sections": [
            {
                "mark": section.section.mark,
                "Mu": system.to_trade("moment", section.section.Mu),
                "status": section.status,
                "candidates": [_layout(section.layout, system)],
            }
            for section in result.sections
        ],
    }


def _finite(value: float) -> float | None:
    return value if math.isfinite(value) else None


def _layout(rated: RatedLayout, system: UnitSystem) -> dict[str, Any]:
    return {
        "rank": rated.rank,
        "marks": list(rated.marks),
        **_capacity(rated.checked, system),
        "score": rated.score.total,
        "score_terms": {term: getattr(rated.score, term) for term in TERMS},
        "checks": _rows(rated.checked, system),
    }


def _capacity(checked: CheckedLayout, system: UnitSystem) -> dict[str, Any]:
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


def _rows(checked: CheckedLayout, system: UnitSystem) -> list[dict[str, Any]]:
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


def _diagnosis(diagnosis: Diagnosis, system: UnitSystem) -> dict[str, Any]:
    strongest = diagnosis.strongest
    return {
        "strongest": None
        if strongest is None
        else {**_capacity(strongest, system), "checks": _rows(strongest, system)},
        "blocked_by": [
            {"id": block.id, "families": block.families, "of": block.of}
            for block in diagnosis.blocked_by
        ],
        "remedies": [
            {
                "key": remedy.key,
                "from": remedy.before,
                "to": remedy.after,
                "label": remedy.best.layout.label,
                "mass_per_length": remedy.best.mass,
                "phi_Mn": system.to_trade("moment", remedy.phi_Mn),
            }
            for remedy in diagnosis.remedies
        ],
    }
