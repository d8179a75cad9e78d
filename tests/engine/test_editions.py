"""Figures of the four editions, and both sides of every limit that depends on them.

Compared with the clause named beside each figure: ACI 318-14, 318-19 and their metric
companions 318M-14, 318M-19. Where the standard itself was not at hand the line says
"from memory".
"""

from __future__ import annotations

import dataclasses
import math
from typing import Any

import pytest

from engine import EDITIONS, UnknownEditionError, edition
from engine.units import SI, US
from tests.engine.builders import CODES, INCH, METRIC

# field: (ACI 318, ACI 318M)
BOTH_YEARS: dict[str, tuple[Any, Any]] = {
    "units": ("us", "si"),
    "steel_modulus": (29_000_000.0, 200_000.0),  # 20.2.2.2
    "concrete_modulus": (57_000.0, 4700.0),  # 19.2.2.1(b)
    "beta1_start": (4000.0, 28.0),  # Table 22.2.2.4.3
    "beta1_step": (1000.0, 7.0),  # Table 22.2.2.4.3
    "beta1_end": (8000.0, 55.0),  # Table 22.2.2.4.3
    "eps_ty_permitted_for": (60_000.0, 420.0),  # 21.2.2.1
    "minimum_steel_root": (3.0, 0.25),  # 9.6.1.2(a)
    "minimum_steel_floor": (200.0, 1.4),  # 9.6.1.2(b)
    "crack_reference": (40_000.0, 280.0),  # Table 24.3.2
    "crack_base": (15.0, 380.0),  # Table 24.3.2
    "crack_cap": (12.0, 300.0),  # Table 24.3.2
    "least_gap": (1.0, 25.0),  # 25.2.1, 25.2.2
    "skin_depth": (36.0, 900.0),  # 9.7.2.3
    "cover_interior": (1.5, 40.0),  # cover table, beams not exposed
    "cover_weather_small": (1.5, 40.0),  # cover table, No. 5 (16) and smaller
    "cover_weather_large": (2.0, 50.0),  # cover table, No. 6 (19) to No. 18 (57)
    "cover_ground": (3.0, 75.0),  # cover table, cast against ground
    "tie_small": (0.375, 9.5),  # 9.7.6.4.2, No. 3 (10)
    "tie_large": (0.5, 12.7),  # 9.7.6.4.2, No. 4 (13)
    "tie_reach": (6.0, 150.0),  # 9.7.6.4.4
}
# field: a figure for each of CODES
BY_YEAR: dict[str, tuple[Any, Any, Any, Any]] = {
    "year": (2014, 2019, 2014, 2019),
    # 9.6.1.2: 318-19 limits fy to 80 ksi (550 MPa); 318-14 has no such limit.
    "minimum_steel_yield_cap": (math.inf, 80_000.0, math.inf, 550.0),
    # Table number of the specified cover for cast-in-place nonprestressed members.
    "cover_clause": ("20.6.1.3.1", "20.5.1.3.1", "20.6.1.3.1", "20.5.1.3.1"),
}
# The upper bounds of strength and the lower bounds of yield are this tool's own.
RANGES: dict[str, tuple[tuple[float, float], ...]] = {
    # Least f'c: Table 19.2.1.1.
    "strength_range": ((2500.0, 15_000.0),) * 2 + ((17.0, 105.0),) * 2,
    # Greatest fy in flexure: Table 20.2.2.4(a), 318-14 from memory.
    "yield_range": (
        (33_000.0, 80_000.0),
        (33_000.0, 100_000.0),
        (230.0, 550.0),
        (230.0, 690.0),
    ),
}


@pytest.mark.parametrize("code", CODES)
@pytest.mark.parametrize("field", BOTH_YEARS)
def test_figure_that_both_years_share(code: str, field: str) -> None:
    """ACI 318 and ACI 318M keep their own rounded figures, unchanged from 2014 to 2019."""
    assert getattr(edition(code), field) == BOTH_YEARS[field]["M" in code]


@pytest.mark.parametrize(("place", "code"), list(enumerate(CODES)))
@pytest.mark.parametrize("field", [*BY_YEAR, *RANGES])
def test_figure_of_one_edition(place: int, code: str, field: str) -> None:
    """Figures that changed between the editions, and the ranges taken."""
    assert getattr(edition(code), field) == (BY_YEAR | RANGES)[field][place]


def test_no_figure_is_left_out() -> None:
    """A figure added to the editions needs a source above or a limit below."""
    fields = {field.name for field in dataclasses.fields(edition("ACI 318-19"))}
    limits = {"name", "small_bar", "largest_stirrup", "tie_large_from"}
    assert fields == set(BOTH_YEARS) | set(BY_YEAR) | set(RANGES) | limits


@pytest.mark.parametrize(
    ("field", "last", "next_size"),
    [
        ("small_bar", "#5", "#6"),  # Table 25.3.2 and the cover table
        ("largest_stirrup", "#8", "#9"),  # Table 25.3.2
        ("tie_large_from", "#10", "#11"),  # 9.7.6.4.2
    ],
)
def test_limit_lies_between_two_inch_sizes(field: str, last: str, next_size: str) -> None:
    """A limit stated as a bar size falls between that size and the next."""
    for code in CODES[:2]:
        limit = getattr(edition(code), field)
        assert INCH.bar(last).diameter <= limit < INCH.bar(next_size).diameter


@pytest.mark.parametrize(
    ("field", "last", "next_size"),
    [("small_bar", "16", "19"), ("largest_stirrup", "25", "29"), ("tie_large_from", "32", "36")],
)
def test_limit_lies_between_two_metric_sizes(field: str, last: str, next_size: str) -> None:
    """The same limits among soft-metric sizes."""
    for code in CODES[2:]:
        limit = getattr(edition(code), field)
        assert METRIC.bar(last).diameter <= limit < METRIC.bar(next_size).diameter


def test_lookup_and_system() -> None:
    """An edition is found by its name and knows its units."""
    assert tuple(EDITIONS) == CODES
    assert edition("ACI 318-19").name == "ACI 318-19"
    assert edition("ACI 318-19").system is US
    assert edition("ACI 318M-14").system is SI


@pytest.mark.parametrize("name", ["ACI 318-25", "aci 318-19", "", "318"])
def test_unknown_edition(name: str) -> None:
    """What is carried is listed."""
    allowed = ", ".join(CODES)
    with pytest.raises(
        UnknownEditionError, match=f"^code edition '{name}' is not carried; allowed: {allowed}$"
    ):
        edition(name)
