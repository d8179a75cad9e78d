"""The answer to a change of sections as JSON, in the trade's units of the job."""

from __future__ import annotations

import json
from typing import Any

from engine.units import UnitSystem
from optimizer.json_layouts import layout_data, rows_data
from optimizer.respan_sections import SectionsRespan, SectionStep, SectionVerdict
from optimizer.sections_report import chosen_section_step, layers_after
from optimizer.wording import CAUTION

VERSION = 1
_UNIT_KINDS = ("length", "area", "moment", "stress", "mass_per_length")


def sections_json(result: SectionsRespan, choice: str | int, *, ascii_only: bool = False) -> str:
    """Write the answer to a change of sections as JSON text.

    Parameters
    ----------
    result : SectionsRespan
        Answer.
    choice : str or int
        Step that is chosen: least, best, or most changes.
    ascii_only : bool
        Whether other characters are escaped.

    Returns
    -------
    str
        One object; equal results give equal text.
    """
    system = result.job.edition.system
    step = chosen_section_step(result, choice)
    data = {
        "format": "cagewright/respan",
        "version": VERSION,
        "kind": "sections",
        "title": result.job.title,
        "code": result.job.edition.name,
        "units": {name: system.trade[name] for name in _UNIT_KINDS},
        "caution": CAUTION,
        "ok": result.ok,
        "locked": list(result.locked),
        "gone": list(result.gone),
        "verdicts": [_verdict(item, system) for item in result.verdicts],
        "steps": [_step(result, item) for item in result.steps],
        "chosen": {"design": choice, "changes": None if step is None else step.changes},
    }
    return json.dumps(data, ensure_ascii=ascii_only, indent=1, allow_nan=False) + "\n"


def _verdict(item: SectionVerdict, system: UnitSystem) -> dict[str, Any]:
    ranked = item.ranked
    return {
        "mark": item.mark,
        "Mu": system.to_trade("moment", ranked.section.Mu),
        "before": item.before,
        "works": item.works,
        "checks": [] if item.checked is None else rows_data(item.checked, system),
        "cost_before": item.cost_before,
        "mass_before": item.mass_before,
        "cost_best": item.cost_best,
        "mass_best": item.mass_best,
        "proved": ranked.proved,
        "best": layout_data(ranked.layouts[0], system) if ranked.layouts else None,
    }


def _step(result: SectionsRespan, step: SectionStep) -> dict[str, Any]:
    return {
        "changes": step.changes,
        "possible": step.possible,
        "changed": list(step.changed),
        "cost": step.cost,
        "mass": step.mass,
        "layers": layers_after(result, step) if step.possible else None,
    }
