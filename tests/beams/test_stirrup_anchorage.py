"""Anchorage of stirrups by hooks, 25.7.1.3; the clause is from memory."""

from __future__ import annotations

import math

import pytest

from catalogs import bar_catalog
from engine import Concrete, edition
from engine.beams.stirrup_anchorage import embedment_of_hook


def test_small_stirrups_need_no_more_than_a_hook() -> None:
    """(a): up to No. 5 whatever the steel, up to No. 8 of fyt up to 40 ksi."""
    concrete = Concrete(edition=edition("ACI 318-19"), fc=4000.0)
    bars = bar_catalog("astm-inch")
    assert embedment_of_hook(concrete, bars.bar("#5"), 60_000.0) == 0.0
    assert embedment_of_hook(concrete, bars.bar("#8"), 40_000.0) == 0.0


@pytest.mark.parametrize(
    ("code", "catalog", "size", "fc", "fyt", "coefficient"),
    [
        ("ACI 318-19", "astm-inch", "#6", 4000.0, 60_000.0, 0.014),
        ("ACI 318M-14", "astm-metric", "19", 28.0, 420.0, 0.17),
    ],
)
def test_thicker_stirrups_need_an_embedment(
    code: str, catalog: str, size: str, fc: float, fyt: float, coefficient: float
) -> None:
    """(b): 0.014 db fyt/(lambda sqrt f'c), and 0.17 in ACI 318M."""
    bar = bar_catalog(catalog).bar(size)
    found = embedment_of_hook(Concrete(edition=edition(code), fc=fc), bar, fyt)
    assert found == pytest.approx(coefficient * bar.diameter * fyt / math.sqrt(fc))


def test_a_no_6_stirrup_of_60_ksi_by_hand() -> None:
    """0.014 (0.75 in) (60000 psi)/63.25 psi = 9.96 in."""
    bar = bar_catalog("astm-inch").bar("#6")
    concrete = Concrete(edition=edition("ACI 318-14"), fc=4000.0)
    assert embedment_of_hook(concrete, bar, 60_000.0) == pytest.approx(9.96, abs=0.005)
