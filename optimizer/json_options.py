"""Options as JSON data."""

from __future__ import annotations

from dataclasses import asdict
from typing import Any

from engine.units import UnitSystem
from optimizer.changes import unit_of
from optimizer.json_layouts import layout_data
from optimizer.measures import Measures
from optimizer.options import Option, OptionsResult, SectionOptions
from optimizer.palette import Palette


def options_data(result: OptionsResult) -> dict[str, Any]:
    """Options of a job.

    Parameters
    ----------
    result : OptionsResult
        Result of a job.

    Returns
    -------
    dict
        Ready for JSON.
    """
    system, prices = result.job.edition.system, result.job.prices
    currency = None if prices is None else prices.currency
    data: dict[str, Any] = {
        "prices": None
        if prices is None
        else {"name": prices.name, "currency": prices.currency, "invented": prices.invented},
        "sections": [_section(section, system, currency) for section in result.sections],
        "palette": None if result.palette is None else _palette(result.palette),
    }
    return data


def _section(section: SectionOptions, system: UnitSystem, currency: str | None) -> dict[str, Any]:
    return {
        "mark": section.problem.section.mark,
        "Mu": system.to_trade("moment", section.problem.section.Mu),
        "proved": section.proved,
        "order_survives": section.order_survives,
        "carbon_order_survives": section.carbon_order_survives,
        "drawn": {
            **layout_data(section.drawn, system),
            "ok": section.drawn.checked.ok,
            "measures": _measures(section.drawn_measures),
        },
        "trade_off": [_option(option, system, currency) for option in section.trade_off],
    }


def _measures(measures: Measures) -> dict[str, Any]:
    return asdict(measures)


def _option(option: Option, system: UnitSystem, currency: str | None) -> dict[str, Any]:
    return {
        "number": option.number,
        "best_at": list(option.reasons),
        "levers": [
            {"key": key, "drawn": before, "option": after} for key, before, after in option.levers
        ],
        **layout_data(option.rated, system),
        "measures": _measures(option.measures),
        "differences": [
            {
                "name": row.name,
                "unit": unit_of(row, system, currency),
                "drawn": None if row.drawn is None else system.to_trade(row.kind, row.drawn),
                "option": None if row.option is None else system.to_trade(row.kind, row.option),
                "change": None if row.change is None else system.to_trade(row.kind, row.change),
                "percent": row.percent,
            }
            for row in option.differences
        ],
        "to_be_agreed": list(option.accept),
    }


def _palette(palette: Palette) -> dict[str, Any]:
    return {
        "proved": palette.proved,
        "marks": list(palette.marks),
        "left_out": list(palette.left_out),
        "choices": [
            {
                "limit": choice.limit,
                "sizes": [bar.designation for bar in choice.sizes],
                "total": choice.total,
                "saving": choice.saving,
                "layouts": [candidate.layout.label for candidate in choice.layouts],
            }
            for choice in palette.choices
        ],
    }
