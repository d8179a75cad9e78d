"""Results as JSON, in the trade's units of the job."""

from __future__ import annotations

import json
from dataclasses import asdict
from typing import Any

from engine import Section
from engine.units import UnitSystem
from optimizer.diagnosis import Diagnosis
from optimizer.json_layouts import capacity_data, layout_data, rows_data
from optimizer.json_options import options_data
from optimizer.options import OptionsResult
from optimizer.results import CheckResult, RankedSection, RankResult
from optimizer.wording import CAUTION

VERSION = 1
Result = RankResult | CheckResult | OptionsResult
_UNIT_KINDS = ("length", "area", "moment", "stress", "mass_per_length")


def to_json(result: Result, *, ascii_only: bool = False) -> str:
    """Write a result as JSON text.

    Parameters
    ----------
    result : RankResult, CheckResult or OptionsResult
        Result of a job.
    ascii_only : bool
        Whether other characters are escaped.

    Returns
    -------
    str
        One object; equal results give equal text.
    """
    if isinstance(result, RankResult):
        data = _ranked(result)
    elif isinstance(result, CheckResult):
        data = _checked(result)
    else:
        data = {**_head(result, "options"), **options_data(result)}
    return json.dumps(data, ensure_ascii=ascii_only, indent=1, allow_nan=False) + "\n"


def _head(result: Result, kind: str) -> dict[str, Any]:
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


def _inputs(section: Section, system: UnitSystem) -> dict[str, Any]:
    """What the section was, so that the result can be read alone."""
    outline, opposite = section.outline, section.opposite
    return {
        "width": outline.web,
        "depth": outline.depth,
        "flange": None if outline.top is None else asdict(outline.top),
        "bottom_flange": None if outline.bottom is None else asdict(outline.bottom),
        "fc": section.concrete.fc,
        "lambda": section.concrete.lightweight,
        "steel": section.steel.name,
        "fy": section.steel.fy,
        "aggregate": section.aggregate,
        "cover": section.cover,
        "stirrup": section.stirrup.designation,
        "layer_gap": section.layer_gap,
        "min_gap": section.min_gap,
        "exposure": section.exposure.value if section.exposure_given else None,
        "Ms": None if section.Ms is None else system.to_trade("moment", section.Ms),
        "opposite": None if opposite is None else opposite.label,
        "count_opposite": section.count_opposite,
        "statically_determinate": section.statically_determinate,
        "tension_controlled": section.tension_controlled,
    }


def _ranked_section(section: RankedSection, system: UnitSystem) -> dict[str, Any]:
    data: dict[str, Any] = {
        "mark": section.section.mark,
        "Mu": system.to_trade("moment", section.section.Mu),
        "status": section.status,
        "proved": section.proved,
        "inputs": _inputs(section.section, system),
        "ranked_by": section.problem.ranking.by,
        "per_pattern": section.problem.ranking.per_pattern,
        "mass_floor": section.mass_floor,
    }
    if section.diagnosis is None:
        data["closing_value"] = section.closing_value
        data["candidates"] = [layout_data(layout, system) for layout in section.layouts]
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
                "inputs": _inputs(section.section, system),
                "status": section.status,
                "candidates": [layout_data(section.layout, system)],
            }
            for section in result.sections
        ],
    }


def _diagnosis(diagnosis: Diagnosis, system: UnitSystem) -> dict[str, Any]:
    strongest = diagnosis.strongest
    return {
        "strongest": None
        if strongest is None
        else {**capacity_data(strongest, system), "checks": rows_data(strongest, system)},
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
