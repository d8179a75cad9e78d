"""Sections and layouts that the tests of the engine start from."""

from __future__ import annotations

from typing import Any

import numpy as np

from catalogs import Bar, bar_catalog
from engine import (
    BarGroups,
    Check,
    CheckedLayout,
    Concrete,
    Layout,
    Outline,
    Section,
    Steel,
    edition,
    parse_layout,
)
from engine.outlines import FloatArray

INCH = bar_catalog("astm-inch")
METRIC = bar_catalog("astm-metric")
CODES = ("ACI 318-14", "ACI 318-19", "ACI 318M-14", "ACI 318M-19")


def inch_bar(designation: str) -> Bar:
    """Return a bar of the inch catalogue, ``#8``."""
    return INCH.bar(designation)


def us_layout(*layers: str) -> Layout:
    """Return a layout of inch bars, layer 1 first."""
    return parse_layout(layers, INCH)


def si_layout(*layers: str) -> Layout:
    """Return a layout of soft-metric bars, layer 1 first."""
    return parse_layout(layers, METRIC)


def us_section(
    *, code: str = "ACI 318-19", fc: float = 4000.0, fy: float = 60_000.0, **changes: Any
) -> Section:
    """Return a 14 x 24 in beam with #4 stirrups, some of its figures changed."""
    figures: dict[str, Any] = {
        "mark": "B1",
        "outline": Outline(web=14.0, depth=24.0),
        "concrete": Concrete(edition=edition(code), fc=fc),
        "steel": Steel(edition=edition(code), fy=fy),
        "cover": 1.5,
        "stirrup": inch_bar("#4"),
        "aggregate": 0.75,
        "Mu": 3.0e6,
        "layer_gap": 1.0,
    }
    return Section(**(figures | changes))


def si_section(
    *, code: str = "ACI 318M-19", fc: float = 28.0, fy: float = 420.0, **changes: Any
) -> Section:
    """Return a 350 x 600 mm beam with No. 13 stirrups, some of its figures changed."""
    figures: dict[str, Any] = {
        "mark": "B1",
        "outline": Outline(web=350.0, depth=600.0),
        "concrete": Concrete(edition=edition(code), fc=fc),
        "steel": Steel(edition=edition(code), fy=fy),
        "cover": 40.0,
        "stirrup": METRIC.bar("13"),
        "aggregate": 20.0,
        "Mu": 300.0e6,
        "layer_gap": 25.0,
    }
    return Section(**(figures | changes))


def row(checked: CheckedLayout, row_id: str) -> Check:
    """Return the one row of that name."""
    (found,) = [check for check in checked.checks if check.id == row_id]
    return found


def array(*values: float) -> FloatArray:
    """Return numbers as an array of floats."""
    return np.array(values, dtype=np.float64)


def groups(*bars: tuple[float, float, float]) -> BarGroups:
    """Return one layout of (area, depth, diameter) groups."""
    area, depth, diameter = (np.array([column]) for column in zip(*bars, strict=True))
    return BarGroups(area=area, depth=depth, diameter=diameter)
