"""Relative labour of fixing bars.

Source of the hours: quantity surveyors' table of fixing hours, a teaching table, Malaysia 2024,
beams: 50 h/t for 10-12 mm, 35 for 16-20 mm, 30 for 25 mm and above. The limits between the bands
are the project's own.
"""

import math

import pytest

from catalogs import CatalogError, fixing_labour


@pytest.mark.parametrize(
    ("sizes_mm", "hours"), [((10, 12), 50.0), ((16, 20), 35.0), ((25, 28, 32, 40), 30.0)]
)
def test_published_hours(sizes_mm: tuple[int, ...], hours: float) -> None:
    """Every published size has its hours over those of the thickest, to two decimals."""
    for size in sizes_mm:
        assert fixing_labour(size) == pytest.approx(hours / 30.0, abs=0.005)


@pytest.mark.parametrize(
    ("diameter", "expected"),
    [
        (5.5, 1.67),
        (math.nextafter(15.0, 0.0), 1.67),
        (15.0, 1.17),
        (math.nextafter(23.0, 0.0), 1.17),
        (23.0, 1.0),
        (57.3, 1.0),
    ],
)
def test_both_sides_of_the_limits(diameter: float, expected: float) -> None:
    """A limit belongs to the thicker band."""
    assert fixing_labour(diameter) == expected


def test_thicker_bars_never_take_longer() -> None:
    """The relative labour falls with the diameter and ends at 1."""
    labours = [fixing_labour(0.5 * step) for step in range(1, 120)]
    assert labours == sorted(labours, reverse=True)
    assert labours[-1] == 1.0


@pytest.mark.parametrize("diameter", [0.0, -12.0, math.nan, math.inf])
def test_impossible_diameter(diameter: float) -> None:
    """No band is guessed for a diameter that is none."""
    with pytest.raises(CatalogError, match=r"bar diameter .* mm cannot be used; allowed: a finite"):
        fixing_labour(diameter)
