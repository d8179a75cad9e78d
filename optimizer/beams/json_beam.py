"""A beam as JSON, in the trade's units of its job.

Places along the beam (`start`, `end`, `at`) are on its axis, whose zero is the centreline of the
first support or the tip of a cantilever at the left; `x` of demands and strengths is on the axis
of their span, and zones of stirrups start at the left face.
"""

from __future__ import annotations

import json
import math
from collections.abc import Iterable
from typing import Any

from engine.beams.demand import SpanDemand
from engine.units import UnitSystem
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.figures import PlaceFigures, place_figures
from optimizer.beams.problem import BeamProblem
from optimizer.beams.schedule import BarMark
from optimizer.beams.stock import CuttingPlan
from optimizer.beams.variants import Piece, StirrupPlan
from optimizer.beams.words import gap_of, mass_unit, support_lines, zones_of
from optimizer.wording import CAUTION

VERSION = 1
_UNIT_KINDS = ("length", "area", "moment", "force", "stress", "mass_per_length")


def beam_json(result: BeamDesign | NoDesign, *, ascii_only: bool = False) -> str:
    """Write a beam as JSON text.

    Parameters
    ----------
    result : BeamDesign or NoDesign
        Design, or why there is none.
    ascii_only : bool
        Whether other characters are escaped.

    Returns
    -------
    str
        One object; equal results give equal text.
    """
    data = head_data(result)
    if isinstance(result, NoDesign):
        data |= {"proved": result.proved, "reasons": list(result.reasons)}
    else:
        data |= design_data(result)
    data["demands"] = _demands(result)
    if isinstance(result, BeamDesign):
        data["strengths"] = _strengths(result)
        data["checks"] = [_check(row, result.edition.system) for row in result.checks]
    return json.dumps(data, ensure_ascii=ascii_only, indent=1, allow_nan=False) + "\n"


def head_data(result: BeamDesign | NoDesign) -> dict[str, Any]:
    """What a beam is: title, units, supports and spans, ready for JSON."""
    problem = result.problem
    system = problem.edition.system
    unit = mass_unit(problem.edition)
    length = "ft" if problem.edition.units == "us" else "m"
    return {
        "format": "cagewright/beam",
        "version": VERSION,
        "title": problem.title,
        "code": problem.edition.name,
        "units": {name: system.trade[name] for name in _UNIT_KINDS}
        | {"mass": unit, "mass_per_volume": f"{unit}/{length}^3"},
        "caution": CAUTION,
        "mark": problem.mark,
        "status": "designed" if isinstance(result, BeamDesign) else "no_design",
        "analysis": {
            "by": problem.analysis.value,
            "redistribution": problem.redistribution,
            "sustained": problem.sustained,
        },
        "ranked_by": problem.ranking.by,
        "supports": _supports(problem),
        "spans": _spans(problem),
    }


def _supports(problem: BeamProblem) -> list[dict[str, Any]]:
    lines = support_lines(problem.beam)
    return [
        {"mark": support.mark, "at": at, "width": support.width, "kind": support.kind.value}
        for support, at in zip(problem.beam.supports, lines, strict=True)
    ]


def _spans(problem: BeamProblem) -> list[dict[str, Any]]:
    beam = problem.beam
    found = []
    for number, span in enumerate(beam.spans):
        start, end = beam.clear_range(number)
        found.append(
            {
                "mark": span.mark,
                "cantilever": span.overhang.value,
                "start": beam.origins[number],
                "length": span.length,
                "clear_from": start,
                "clear_to": end,
                "width": span.outline.web,
                "depth": span.outline.depth,
            }
        )
    return found


def design_data(design: BeamDesign) -> dict[str, Any]:
    """What a design consists of: bars, stirrups, schedule and cutting list, ready for JSON."""
    system = design.edition.system
    schedule = design.schedule
    own = sum(len(variant.pieces) for variant in design.chosen)
    marked = list(zip(schedule.of_pieces, design.pieces, strict=True))
    return {
        "ok": design.ok,
        "stirrup_frame": {
            "size": design.frame.stirrup.designation,
            "legs": design.frame.legs,
            "area": design.frame.leg_area,
        },
        "top": {"arrangement": design.top.kind.value, "size": design.top.bar.designation},
        "mass": schedule.mass,
        "concrete": schedule.volume,
        "mass_per_volume": schedule.mass_per_volume,
        "cost": design.cost,
        "bound": design.bound,
        "gap": gap_of(design),
        "proved": design.proved,
        "places": [_place(figures, system) for figures in place_figures(design)],
        "other_bars": [_piece(mark, piece) for mark, piece in marked[own:]],
        "stirrups": [
            _stirrups(design, plan, loops)
            for plan, loops in zip(design.stirrups, schedule.of_stirrups, strict=True)
        ],
        "schedule": [_mark(item) for item in schedule.marks],
        "cutting": [_cutting(plan) for plan in design.cutting],
    }


def _place(figures: PlaceFigures, system: UnitSystem) -> dict[str, Any]:
    variant = figures.variant
    return {
        "mark": figures.place.mark,
        "face": figures.place.face.value,
        "label": variant.layout.label,
        "layers": [
            [{"size": bar.designation, "count": count} for bar, count in layer.groups]
            for layer in variant.layout.layers
        ],
        "run": variant.run,
        "cost": variant.cost,
        "Mu": system.to_trade("moment", figures.demand),
        "phi_Mn": system.to_trade("moment", figures.strength),
        "bars": [_piece(mark, piece) for mark, piece in figures.pieces],
    }


def _piece(mark: str, piece: Piece) -> dict[str, Any]:
    return {
        "mark": mark,
        "face": piece.face.value,
        "role": piece.role.value,
        "layer": piece.layer,
        "count": piece.count,
        "size": piece.bar.designation,
        "start": piece.start,
        "end": piece.end,
        "hook_start": piece.hook_start,
        "hook_end": piece.hook_end,
        "develop_start": piece.develop_start,
        "develop_end": piece.develop_end,
        "surface": piece.surface,
    }


def _stirrups(design: BeamDesign, plan: StirrupPlan, loops: tuple[str, ...]) -> dict[str, Any]:
    return {
        "span": design.problem.beam.spans[plan.span].mark,
        "marks": list(loops),
        "sets": plan.count,
        "depth": plan.depth,
        "first": plan.first,
        "last": plan.last,
        "clear": plan.clear,
        "zones": [
            {"spaces": spaces, "spacing": spacing, "from": start, "to": end}
            for spaces, spacing, start, end in zones_of(plan)
        ],
    }


def _mark(item: BarMark) -> dict[str, Any]:
    return {
        "mark": item.mark,
        "count": item.count,
        "size": item.bar.designation,
        "shape": item.shape.shape.value,
        "legs": list(item.shape.legs),
        "bend_radius": item.shape.radius,
        "extension": item.shape.extension,
        "length": item.length,
        "mass_each": item.mass_each,
        "mass": item.mass,
    }


def _cutting(plan: CuttingPlan) -> dict[str, Any]:
    return {
        "size": plan.size,
        "bought": plan.bought,
        "used": plan.used,
        "waste": plan.waste,
        "bound": plan.bound,
        "proved": plan.proved,
        "fewest": plan.fewest,
        "bars": [
            {
                "count": bar.count,
                "stock_length": bar.stock_length,
                "pieces": [{"mark": mark, "count": count} for mark, count in bar.pieces],
                "left_over": bar.left_over,
            }
            for bar in plan.bars
        ],
    }


def _demands(result: BeamDesign | NoDesign) -> list[dict[str, Any]]:
    system = result.problem.edition.system
    spans = result.problem.beam.spans
    return [
        {"span": span.mark, "x": _values(demand.x), **_envelopes(demand, system)}
        for span, demand in zip(spans, result.demands, strict=True)
    ]


def _envelopes(demand: SpanDemand, system: UnitSystem) -> dict[str, list[float]]:
    moments = {
        name: _values(getattr(demand, name), system, "moment")
        for name in ("Mu_most", "Mu_least", "Ms_most", "Ms_least")
    }
    return {**moments, "Vu": _values(demand.Vu, system, "force")}


def _strengths(design: BeamDesign) -> list[dict[str, Any]]:
    system = design.edition.system
    return [
        {
            "span": span.mark,
            "x": _values(along.x),
            "phi_Mn_sagging": _values(along.sagging, system, "moment"),
            "phi_Mn_hogging": _values(along.hogging, system, "moment"),
            "phi_Vn": _values(along.shear, system, "force"),
            "spacing": _values(along.spacing),
        }
        for span, along in zip(design.problem.beam.spans, design.strengths, strict=True)
    ]


def _values(
    values: Iterable[float], system: UnitSystem | None = None, kind: str = ""
) -> list[float]:
    # Twelve digits: far beyond what is meant, and a third shorter than all of a float.
    own = (float(value) for value in values)
    return [
        float(f"{value if system is None else system.to_trade(kind, value):.12g}") for value in own
    ]


def _check(row: BeamCheck, system: UnitSystem) -> dict[str, Any]:
    demand, limit = (
        None if value is None or not math.isfinite(value) else system.to_trade(row.quantity, value)
        for value in (row.demand, row.limit)
    )
    return {
        "id": row.id,
        "clause": row.clause,
        "where": row.where,
        "at": row.at,
        "unit": system.trade.get(row.quantity, ""),
        "demand": demand,
        "limit": limit,
        "ratio": row.ratio if row.ratio is None or math.isfinite(row.ratio) else None,
        "ok": row.ok,
        "state": row.state.value,
        "note": row.note,
    }
