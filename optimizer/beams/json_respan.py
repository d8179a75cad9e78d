"""The answer to a change as JSON, in the trade's units of the job."""

from __future__ import annotations

import json
from typing import Any

from engine.check_row import Check
from engine.units import UnitSystem
from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.json_beam import design_data, head_data
from optimizer.beams.positions import DrawnBars, DrawnBeam, drawn
from optimizer.beams.respan import Difference, Respan, Step, Verdict, differences
from optimizer.beams.respan_report import BEST, LEAST, chosen_step
from optimizer.beams.sweep import Sweep
from optimizer.beams.sweep_report import SweepLine, sweep_lines

VERSION = 1


def respan_json(result: Respan, choice: str | int, *, ascii_only: bool = False) -> str:
    """Write the answer to a change of a beam as JSON text.

    Parameters
    ----------
    result : Respan
        Answer.
    choice : str or int
        Design that is chosen: least, best, or most changes.
    ascii_only : bool
        Whether other characters are escaped.

    Returns
    -------
    str
        One object; equal results give equal text.
    """
    system = result.problem.edition.system
    step = chosen_step(result, choice)
    data = {
        **head_data(result.best),
        "format": "cagewright/respan",
        "version": VERSION,
        "kind": "beam",
        "status": "designed" if result.least is not None else "no_design",
        "ok": result.ok,
        "locked": list(result.locked),
        "before": _before(result.old),
        "verdicts": [_verdict(item, system) for item in result.verdicts],
        "steps": _steps(result),
        "best": _best(result.best),
        "chosen": {"design": choice, "changes": None if step is None else step.changes},
        "differences": {
            LEAST: _differences(result.old, chosen_step(result, LEAST)),
            BEST: _differences(result.old, chosen_step(result, BEST)),
        },
    }
    return _text(data, ascii_only=ascii_only)


def sweep_json(result: Sweep, *, ascii_only: bool = False) -> str:
    """Write a beam over a range of one span as JSON text.

    Parameters
    ----------
    result : Sweep
        Sweep.
    ascii_only : bool
        Whether other characters are escaped.

    Returns
    -------
    str
        One object; equal results give equal text.
    """
    head = head_data(result.points[0].result)
    for key in ("status", "supports", "spans"):
        del head[key]  # of one length only
    data = {
        **head,
        "format": "cagewright/sweep",
        "version": VERSION,
        "ok": result.ok,
        "span": result.span,
        "before": _before(result.old),
        "points": [_point(line) for line in sweep_lines(result)],
    }
    return _text(data, ascii_only=ascii_only)


def _text(data: dict[str, Any], *, ascii_only: bool) -> str:
    return json.dumps(data, ensure_ascii=ascii_only, indent=1, allow_nan=False) + "\n"


def _before(old: DrawnBeam) -> dict[str, Any]:
    return {
        "cost": old.cost,
        "mass": old.mass,
        "positions": {name: state.label for name, state in old.positions.items()},
        "bars": [_bars(item) for item in old.bars],
    }


def _verdict(item: Verdict, system: UnitSystem) -> dict[str, Any]:
    return {
        "position": item.position,
        "before": item.before,
        "works": item.works,
        "why": item.why,
        "checks": [check_data(row, system) for row in item.rows],
    }


def check_data(row: Check, system: UnitSystem) -> dict[str, Any]:
    """A row of a check, ready for JSON.

    Parameters
    ----------
    row : Check
        Row.
    system : UnitSystem
        Units.

    Returns
    -------
    dict
        Its figures in the trade's units.
    """
    demand, limit = (
        None if value is None else system.to_trade(row.quantity, value)
        for value in (row.demand, row.limit)
    )
    return {
        "id": row.id,
        "clause": row.clause,
        "unit": system.trade.get(row.quantity, ""),
        "demand": demand,
        "limit": limit,
        "ratio": row.ratio,
        "ok": row.ok,
        "state": row.state.value,
        "note": row.note,
    }


def _steps(result: Respan) -> list[dict[str, Any]]:
    found = []
    before: BeamDesign | None = None
    for step in result.steps:
        design = step.design
        saved = None if design is None or before is None else before.cost - design.cost
        found.append(
            {
                "changes": step.changes,
                "proved": step.proved,
                "changed": list(step.changed),
                "cost": None if design is None else design.cost,
                "mass": None if design is None else design.schedule.mass,
                "saved": saved,
                "design": None if design is None else design_data(design),
            }
        )
        before = design or before
    return found


def _best(best: BeamDesign | NoDesign) -> dict[str, Any]:
    if isinstance(best, NoDesign):
        return {"status": "no_design", "proved": best.proved, "reasons": list(best.reasons)}
    return {"status": "designed", **design_data(best)}


def _differences(old: DrawnBeam, step: Step | None) -> list[dict[str, Any]] | None:
    if step is None or step.design is None:
        return None
    return [_difference(item) for item in differences(old, drawn(step.design))]


def _difference(item: Difference) -> dict[str, Any]:
    return {
        "position": item.position,
        "what": item.what,
        "before": None if item.before is None else _bars(item.before),
        "after": None if item.after is None else _bars(item.after),
    }


def _bars(bars: DrawnBars) -> dict[str, Any]:
    return {
        "position": bars.position,
        "part": bars.part,
        "mark": bars.mark,
        "count": bars.count,
        "size": bars.size,
        "shape": bars.shape,
        "length": bars.length,
    }


def _point(line: SweepLine) -> dict[str, Any]:
    design, point = line.design, line.point
    return {
        "length": point.length,
        "old_works": point.old_works,
        "changed": list(point.changed),
        "mass_per_length_more": line.growth,
        "cost": None if design is None else design.cost,
        "mass": None if design is None else design.schedule.mass,
        "result": _best(point.result),
    }
