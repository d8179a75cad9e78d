"""Where bars may stop, 9.7.3, held against the rules evaluated place by place."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from engine import edition
from engine.beams.continuity import continuity_rules
from engine.beams.cutoffs import (
    developed_everywhere,
    extension,
    extension_past_inflection,
    last_above,
    longest_at_inflection,
    reach,
    shear_factor_at_cut,
)
from engine.outlines import FloatArray
from tests.engine.builders import CODES, INCH, METRIC

DENSE = 4001


@st.composite
def moments(draw: st.DrawFn) -> tuple[FloatArray, FloatArray]:
    """Distances from zero and a demand that is straight between them, somewhere above zero."""
    count = draw(st.integers(3, 12))
    steps = draw(st.lists(st.floats(1.0, 30.0), min_size=count - 1, max_size=count - 1))
    values = draw(st.lists(st.floats(0.0, 100.0), min_size=count, max_size=count))
    if draw(st.booleans()):  # as an envelope does: falling
        values = sorted(values, reverse=True)
    return np.concatenate(([0.0], np.cumsum(steps))), np.array(values)


def dense(u: FloatArray, demand: FloatArray) -> tuple[FloatArray, FloatArray]:
    """The stations and many places between them."""
    places = np.union1d(u, np.linspace(0.0, float(u[-1]), DENSE))
    return places, np.interp(places, u, demand)


@pytest.mark.parametrize(
    ("d", "db", "expected"), [(21.5, 1.0, 21.5), (10.0, 1.0, 12.0), (12.0, 1.0, 12.0)]
)
def test_extension_is_the_larger_of_d_and_12_db(d: float, db: float, expected: float) -> None:
    """9.7.3.3."""
    assert extension(d, db) == pytest.approx(expected)


def test_extension_past_inflection_adds_a_sixteenth_of_the_span() -> None:
    """9.7.3.8.4."""
    assert extension_past_inflection(21.5, 1.0, 480.0) == pytest.approx(30.0)
    assert extension_past_inflection(21.5, 1.0, 240.0) == pytest.approx(21.5)
    assert extension_past_inflection(10.0, 1.27, 160.0) == pytest.approx(15.24)


@settings(max_examples=300, deadline=None)
@given(moments(), st.floats(0.0, 110.0))
def test_last_above_is_the_last_crossing(
    moment: tuple[FloatArray, FloatArray], level: float
) -> None:
    """Nowhere beyond it is the demand above the level, and just before it, it is."""
    u, demand = moment
    found = last_above(u, demand, level)
    places, values = dense(u, demand)
    if found == -np.inf:
        assert (values <= level).all()
        return
    assert 0.0 <= found <= u[-1]
    beyond = values[places > found + 1e-9 * u[-1]]
    assert (beyond <= level + 1e-9 * 100.0).all()
    if found < u[-1]:
        assert float(np.interp(found, u, demand)) == pytest.approx(level, abs=1e-6)
    else:
        assert demand[-1] > level or found == pytest.approx(u[-1])


@settings(max_examples=300, deadline=None)
@given(
    moments(),
    st.floats(1.0, 120.0),
    st.floats(1.01, 2.0),
    st.floats(0.0, 30.0),
    st.floats(0.0, 60.0),
)
def test_bars_that_run_to_reach_carry_the_demand_everywhere(
    moment: tuple[FloatArray, FloatArray],
    weak: float,
    more: float,
    beyond: float,
    development: float,
) -> None:
    """At every place between, the developed share of the bars that stop is enough (9.7.3.1),
    the extension is kept (9.7.3.3), and a shorter reach would break one of the two.
    """
    u, demand = moment
    strong = max(float(demand.max()), weak) * more
    end = reach(u, demand, strong=strong, weak=weak, beyond=beyond, development=development)
    places, values = dense(u, demand)
    above = values > weak
    if not above.any():
        assert end == 0.0
        return
    assert end >= places[above].max() + beyond - 1e-6
    share = np.clip((end - places) / max(development, 1e-9), 0.0, 1.0)
    strength = weak + (strong - weak) * share
    enough = values <= np.maximum(strength, weak) * (1 + 1e-6) + 1e-6
    # With no length to develop, what the bars do at the very place of their end is open.
    assert (enough | (np.abs(places - end) <= 1e-6)).all()
    shorter = end - 1e-3 * max(1.0, end)
    share = np.clip((shorter - places) / max(development, 1e-9), 0.0, 1.0)
    weaker = (values > weak + (strong - weak) * share + 1e-12).any()
    assert weaker or shorter < last_above(u, demand, weak) + beyond


def test_reach_where_all_bars_together_are_too_weak() -> None:
    """No length of bars helps where all of them are too weak."""
    u, demand = np.array([0.0, 50.0, 100.0]), np.array([90.0, 60.0, 0.0])
    assert reach(u, demand, strong=80.0, weak=40.0, beyond=5.0, development=20.0) == math.inf
    assert reach(u, demand, strong=40.0, weak=40.0, beyond=5.0, development=20.0) == math.inf


def test_reach_by_hand() -> None:
    """A straight line from 100 to 0 over 100, half of the strength runs on.

    The others are needed up to 50, so 50 + 12; developed over 60 they have to reach the place
    where all of the moment counts plus all of the length: 0 + 60 at the start, 50 at the end.
    """
    u, demand = np.array([0.0, 100.0]), np.array([100.0, 0.0])
    by_rule = reach(u, demand, strong=100.0, weak=50.0, beyond=12.0, development=0.0)
    by_bond = reach(u, demand, strong=100.0, weak=50.0, beyond=0.0, development=60.0)
    assert (by_rule, by_bond) == pytest.approx((62.0, 60.0))


@settings(max_examples=200, deadline=None)
@given(moments(), st.floats(20.0, 150.0), st.floats(0.0, 300.0), st.floats(1.0, 60.0))
def test_developed_everywhere_is_true_station_by_station(
    moment: tuple[FloatArray, FloatArray], strength: float, end: float, development: float
) -> None:
    """The answer for the whole beam is that of each station."""
    u, demand = moment
    expected = all(
        load <= strength * min(1.0, max(0.0, (end - place) / development)) + 1e-5 * strength
        for place, load in zip(u, demand, strict=True)
    )
    found = developed_everywhere(u, demand, strength=strength, end=end, development=development)
    if found != expected:  # within the slack of the rule either answer is right
        margin = [
            load - strength * min(1.0, max(0.0, (end - place) / development))
            for place, load in zip(u, demand, strict=True)
        ]
        assert abs(max(margin)) <= 2e-5 * strength


@pytest.mark.parametrize("code", CODES)
def test_shear_at_a_cut(code: str) -> None:
    """9.7.3.5 (a) and (b): 3/2, or 4/3 for No. 11 (36) and smaller beside twice the steel."""
    metric = "318M" in code
    catalog = METRIC if metric else INCH
    small, large = (
        (catalog.bar("36"), catalog.bar("43"))
        if metric
        else (
            catalog.bar("#11"),
            catalog.bar("#14"),
        )
    )
    own = edition(code)
    assert shear_factor_at_cut(own, small, 50.0, 100.0) == pytest.approx(4.0 / 3.0)
    assert shear_factor_at_cut(own, small, 50.1, 100.0) == pytest.approx(1.5)
    assert shear_factor_at_cut(own, large, 50.0, 100.0) == pytest.approx(1.5)


@pytest.mark.parametrize("code", CODES)
def test_longest_at_inflection(code: str) -> None:
    """9.7.3.8.3: Mn/Vu + la, 1.3 Mn/Vu + la where a reaction compresses the ends."""
    own = edition(code)
    plain = longest_at_inflection(own, Mn=2.0e6, Vu=50e3, beyond=9.0, compressed=False)
    held = longest_at_inflection(own, Mn=2.0e6, Vu=50e3, beyond=9.0, compressed=True)
    assert (plain, held) == pytest.approx((49.0, 61.0))
    assert longest_at_inflection(own, Mn=2.0e6, Vu=0.0, beyond=9.0, compressed=True) == math.inf


@pytest.mark.parametrize("code", CODES)
def test_shares_that_run_into_supports(code: str) -> None:
    """9.7.3.8.1 to .4 and 9.7.7.1: one third, one fourth, one sixth, 6 in or 150 mm."""
    rules = continuity_rules(edition(code))
    assert rules.into_support == (150.0 if "318M" in code else 6.0)
    assert rules.at_simple_support == pytest.approx(1 / 3)
    assert rules.at_other_support == pytest.approx(1 / 4)
    assert rules.past_inflection == pytest.approx(1 / 3)
    assert rules.through_bottom == pytest.approx(1 / 4)
    assert rules.through_top == pytest.approx(1 / 6)
    assert (rules.least_bars, rules.compressed_end) == (2, 1.3)
