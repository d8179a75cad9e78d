"""Nominal strength: closed forms, and equilibria built backwards from a chosen neutral axis."""

from __future__ import annotations

import numpy as np
import pytest

from engine import BarGroups, Concrete, Flange, Outline, Profile, Steel, edition, flexural_state
from engine.strength import steel_stress
from tests.engine.builders import array, groups

CODE = edition("ACI 318-19")
CONCRETE = Concrete(edition=CODE, fc=4000.0)  # beta1 = 0.85, block stress 3400 psi
STEEL = Steel(edition=CODE, fy=60_000.0)
RECTANGLE = Profile(((14.0, 24.0),))
ES_CU = 29e6 * 0.003


def test_steel_is_elastic_then_plastic() -> None:
    """F = Es 0.003 (d - c)/c, held at fy either way; yield at c = d 87/(87 + 60)."""
    depth = array(20.0, 11.0, 10.0, 9.0, 1.0)
    expected = [60_000.0, ES_CU * 0.1, 0.0, -ES_CU * 0.1, -60_000.0]
    np.testing.assert_allclose(steel_stress(STEEL, depth, array(10.0)), expected, atol=1e-9)


@pytest.mark.parametrize("bars", [(4.74, 20.8, 1.0), (0.22, 22.0, 0.375)])
def test_one_layer_that_yields(bars: tuple[float, float, float]) -> None:
    """A = As fy/(0.85 f'c b), Mn = As fy (d - a/2)."""
    area, depth, _ = bars
    a = area * 60_000 / (3400 * 14)
    state = flexural_state(RECTANGLE, CONCRETE, STEEL, groups(bars))
    np.testing.assert_allclose(state.a, a, rtol=1e-12)
    np.testing.assert_allclose(state.c, a / 0.85, rtol=1e-12)
    np.testing.assert_allclose(state.Mn, area * 60_000 * (depth - a / 2), rtol=1e-12)


def test_two_layers_that_yield() -> None:
    """3.16 in^2 at 21.5 in and 1.58 in^2 at 19.5 in act at their own depths."""
    a = 4.74 * 60_000 / (3400 * 14)
    moment = 60_000 * (3.16 * (21.5 - a / 2) + 1.58 * (19.5 - a / 2))
    state = flexural_state(RECTANGLE, CONCRETE, STEEL, groups((3.16, 21.5, 1.0), (1.58, 19.5, 1.0)))
    np.testing.assert_allclose(state.Mn, moment, rtol=1e-12)


def test_block_in_the_web_of_a_t() -> None:
    """Flange 30 x 3 carries 306 kip, the web the rest."""
    profile = Outline(web=12.0, depth=26.0, top=Flange(width=30.0, thickness=3.0)).profile(
        sagging=True
    )
    area, depth = 8.0, 23.0
    a = (area * 60_000 - 3400 * (30 - 12) * 3) / (3400 * 12)
    assert a > 3.0
    moment = 3400 * (18 * 3 * (depth - 1.5) + 12 * a * (depth - a / 2))
    state = flexural_state(profile, CONCRETE, STEEL, groups((area, depth, 1.0)))
    np.testing.assert_allclose(state.a, a, rtol=1e-12)
    np.testing.assert_allclose(state.Mn, moment, rtol=1e-12)


def test_steel_that_does_not_yield() -> None:
    """Over-reinforced: 3400 14 0.85 c^2 + As 87,000 c - As 87,000 d = 0."""
    area, depth = 10.0, 20.0
    quadratic, linear = 3400 * 14 * 0.85, area * ES_CU
    c = (-linear + np.sqrt(linear**2 + 4 * quadratic * linear * depth)) / (2 * quadratic)
    a = 0.85 * c
    state = flexural_state(RECTANGLE, CONCRETE, STEEL, groups((area, depth, 1.0)))
    assert ES_CU * (depth - c) / c < 60_000
    np.testing.assert_allclose(state.c, c, rtol=1e-12)
    np.testing.assert_allclose(state.Mn, 3400 * 14 * a * (depth - a / 2), rtol=1e-12)


@pytest.mark.parametrize("deduct", [True, False])
@pytest.mark.parametrize(("c", "upper_depth"), [(6.0, 2.5), (6.0, 5.4), (6.0, 4.7), (10.5, 2.5)])
def test_compression_bars(deduct: bool, c: float, upper_depth: float) -> None:
    """Choose c, find the tension steel that balances it, ask for c and Mn.

    Bars of 1 in: whole in the block (2.5), partly (4.7, 5.4 with the block at 5.1), beyond yield
    (c = 10.5).
    """
    a, upper, bottom = 0.85 * c, 2.0, 21.5
    f_upper = np.clip(ES_CU * (upper_depth - c) / c, -60_000, 60_000)
    height = min(max(a - (upper_depth - 0.5), 0.0), 1.0) if deduct else 0.0
    hole, hole_depth = upper * height, upper_depth - 0.5 + height / 2
    concrete = 3400 * (14 * a - hole)
    f_bottom = min(ES_CU * (bottom - c) / c, 60_000)
    area = (concrete - upper * f_upper) / f_bottom
    moment = (
        area * f_bottom * bottom
        + upper * f_upper * upper_depth
        - 3400 * (14 * a * a / 2 - hole * hole_depth)
    )
    state = flexural_state(
        RECTANGLE,
        CONCRETE,
        STEEL,
        groups((area, bottom, 1.0), (upper, upper_depth, 1.0)),
        deduct_displaced=deduct,
    )
    np.testing.assert_allclose(state.c, c, rtol=1e-11)
    np.testing.assert_allclose(state.a, a, rtol=1e-11)
    np.testing.assert_allclose(state.Mn, moment, rtol=1e-11)


def test_upper_tension_layer_inside_the_block() -> None:
    """An inverted T's narrow web: layer 3 at 9 in does not yield and lies in the block."""
    c = 14.0
    a = 0.85 * c
    profile = Profile(((6.0, 18.0), (30.0, 6.0)))
    f_third = ES_CU * (9.0 - c) / c
    force = 3400 * (6 * a - 0.5) - 0.5 * f_third
    f_first = min(ES_CU * (21.5 - c) / c, 60_000)
    area = force / f_first
    moment = area * f_first * 21.5 + 0.5 * f_third * 9.0 - 3400 * (6 * a * a / 2 - 0.5 * 9.0)
    state = flexural_state(profile, CONCRETE, STEEL, groups((area, 21.5, 1.0), (0.5, 9.0, 0.75)))
    np.testing.assert_allclose(state.c, c, rtol=1e-11)
    np.testing.assert_allclose(state.Mn, moment, rtol=1e-11)


def test_neutral_axis_just_above_the_steel() -> None:
    """A 2 in web whose steel at 9 in reaches 5.1 ksi only: c = 8.5 in, the block 7.2 in deep."""
    c, depth = 8.5, 9.0
    a, stress = 0.85 * c, ES_CU * (depth - c) / c
    force = 3400 * 2 * a
    state = flexural_state(
        Profile(((2.0, 10.0),)), CONCRETE, STEEL, groups((force / stress, depth, 1.0))
    )
    np.testing.assert_allclose(state.c, c, rtol=1e-11)
    np.testing.assert_allclose(state.Mn, force * (depth - a / 2), rtol=1e-11)


def test_empty_places_change_nothing() -> None:
    """A group of no area, wherever it lies, is no group."""
    one = flexural_state(RECTANGLE, CONCRETE, STEEL, groups((4.0, 21.0, 1.0)))
    two = flexural_state(RECTANGLE, CONCRETE, STEEL, groups((4.0, 21.0, 1.0), (0.0, 1.0, 1.0)))
    assert (two.c[0], two.Mn[0]) == (one.c[0], one.Mn[0])


def test_many_rows_are_solved_in_parts() -> None:
    """40,000 layouts give what each gives alone, in order."""
    area = np.linspace(0.5, 12.0, 40_000)[:, None]
    many = BarGroups(area=area, depth=np.full_like(area, 21.0), diameter=np.ones_like(area))
    state = flexural_state(RECTANGLE, CONCRETE, STEEL, many)
    for index in (0, 13_333, 16_384, 39_999):
        alone = flexural_state(
            RECTANGLE, CONCRETE, STEEL, groups((float(area[index, 0]), 21.0, 1.0))
        )
        np.testing.assert_allclose(state.c[index], alone.c, rtol=1e-12)
        np.testing.assert_allclose(state.Mn[index], alone.Mn, rtol=1e-12)


def test_hardest_rows_stop_at_the_iteration_limit(monkeypatch: pytest.MonkeyPatch) -> None:
    """Even cut short after 60 steps, the bracket has closed on the neutral axis."""
    monkeypatch.setattr("engine.strength._ITERATIONS", 60)
    monkeypatch.setattr("engine.strength._PRECISION", -1.0)
    state = flexural_state(RECTANGLE, CONCRETE, STEEL, groups((10.0, 20.0, 1.0)))
    quadratic, linear = 3400 * 14 * 0.85, 10.0 * ES_CU
    c = (-linear + np.sqrt(linear**2 + 4 * quadratic * linear * 20.0)) / (2 * quadratic)
    np.testing.assert_allclose(state.c, c, rtol=1e-12)
