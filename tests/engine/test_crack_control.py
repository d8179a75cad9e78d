"""Largest spacing of the bars nearest the tension face, Table 24.3.2."""

from __future__ import annotations

import numpy as np
import pytest

from engine import edition
from engine.crack_control import WITHOUT_ANALYSIS, largest_spacing
from tests.engine.builders import CODES, array


@pytest.mark.parametrize("code", CODES[:2])
@pytest.mark.parametrize(
    ("fs", "cc", "s"),
    [
        (40_000.0, 2.0, 10.0),  # 15 - 5
        (40_000.0, 1.2, 12.0),  # both expressions meet: 15 - 3 = 12
        (40_000.0, 1.0, 12.0),
        (40_000.0, 2.5, 8.75),
        (40_000.0, 3.0, 7.5),
        (80_000.0 * 2 / 3, 2.0, 11.25 - 5.0),
        (100_000.0 * 2 / 3, 0.5, 7.2),
        (36_000.0, 2.0, 15 / 0.9 - 5.0),
    ],
)
def test_spacing_in_inches(code: str, fs: float, cc: float, s: float) -> None:
    """Lesser of 15 (40,000/fs) - 2.5 cc and 12 (40,000/fs)."""
    assert largest_spacing(edition(code), fs, cc) == pytest.approx(s, rel=1e-12)


@pytest.mark.parametrize("code", CODES[2:])
@pytest.mark.parametrize(
    ("fs", "cc", "s"), [(280.0, 50.0, 255.0), (280.0, 30.0, 300.0), (140.0, 50.0, 600.0)]
)
def test_spacing_in_millimetres(code: str, fs: float, cc: float, s: float) -> None:
    """Lesser of 380 (280/fs) - 2.5 cc and 300 (280/fs)."""
    assert largest_spacing(edition(code), fs, cc) == pytest.approx(s, rel=1e-12)


def test_many_stresses_at_once() -> None:
    """An array gives an array, a number a plain float."""
    found = largest_spacing(edition("ACI 318-19"), array(40_000.0, 20_000.0), 2.0)
    np.testing.assert_allclose(found, [10.0, 24.0], rtol=1e-12)
    assert type(largest_spacing(edition("ACI 318-19"), 40_000.0, 2.0)) is float


def test_stress_without_analysis() -> None:
    """24.3.2.1 permits two thirds of fy."""
    assert WITHOUT_ANALYSIS == 2 / 3
