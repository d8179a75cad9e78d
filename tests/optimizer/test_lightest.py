"""The lightest layout against a mixed-integer program of the same section, solved by HiGHS.

The program is written here from the code's formulas and shares nothing with the optimizer:
one size, one or two layers, a rectangle, binary variables for the number of bars of each
layer. Strength is fy sum(A d) - G(N), G the moment of the block that N bars at yield need;
G is convex and its tangents at every whole N make the linear program exact.
"""

from __future__ import annotations

import random
from dataclasses import replace

import numpy as np
import pytest
from scipy.optimize import Bounds, LinearConstraint, milp

from engine import Outline, Section
from engine.outlines import FloatArray
from optimizer.problem import BarRules, Problem
from optimizer.search import Search
from tests.engine.builders import INCH, us_section
from tests.optimizer.test_scoring import US

SIZES = ("#5", "#6", "#7", "#8", "#9", "#10", "#11")
FC, FY, CODE_GAP, BEND = 4000.0, 60_000.0, 1.0, 2.0


def lightest_of_size(section: Section, name: str, layers: int) -> float | None:
    """Return the least mass of layouts of one size in ACI 318-19, None where there is none.

    Clauses: 9.5.1.1, 9.3.3.1, 24.3.2, 25.2.1, 25.2.2 and 25.3.2; 9.6.1.2 is left out, so the
    demand has to need more than that. Units in, lbf, psi.
    """
    bar = INCH.bar(name)
    b, h = section.outline.web, section.outline.depth
    edge = section.cover + section.stirrup.diameter
    depths = [h - edge - bar.diameter / 2 - k * (bar.diameter + CODE_GAP) for k in range(layers)]
    span = b - 2 * edge - 2 * max(BEND * section.stirrup.diameter, bar.diameter / 2)
    gap = max(CODE_GAP, bar.diameter, 4 / 3 * section.aggregate)
    fs = 2 / 3 * FY
    spacing = min(15 * 40_000 / fs - 2.5 * edge, 12 * 40_000 / fs)
    most = int(span / (bar.diameter + gap) + 1e-9) + 1
    # One binary variable for each number of bars of each layer; variable 0 of a layer is none.
    columns = layers * (most + 1)
    number = np.tile(np.arange(most + 1.0), layers)

    def of_layer(layer: int, values: FloatArray) -> FloatArray:
        row = np.zeros((layers, most + 1))
        row[layer] = values
        return row.ravel()

    ones, bars = np.ones(most + 1), np.arange(most + 1.0)
    upper = np.ones(columns)
    rows: list[FloatArray] = []
    low: list[float] = []
    high: list[float] = []

    def require(row: FloatArray, least: float, greatest: float) -> None:
        rows.append(row)
        low.append(least)
        high.append(greatest)

    for layer in range(layers):
        require(of_layer(layer, ones), 1.0, 1.0)
        forbidden = {1}
        if layer == 0:
            wide = {n for n in range(2, most + 1) if span / (n - 1) > spacing + 1e-9}
            forbidden |= {0} | wide
        for n in forbidden:
            upper[layer * (most + 1) + n] = 0.0
    for layer in range(1, layers):
        require(of_layer(layer, bars) - of_layer(layer - 1, bars), -np.inf, 0.0)
        require(of_layer(layer, bars % 2) - of_layer(layer - 1, bars % 2), -np.inf, 0.0)
    force = FY * bar.area
    arms = np.zeros(columns)
    for layer, depth in enumerate(depths):
        arms += of_layer(layer, force * depth * bars)
    for total in range(2, layers * most + 1):
        # G(N) = (force N)^2 / (2 x 0.85 fc b), from below by its tangent at `total`.
        curve = force**2 / (2 * 0.85 * FC * b)
        row = arms - curve * 2 * total * number
        require(row, section.Mu / 0.9 - curve * total**2, np.inf)
    # c <= 0.375 dt for eps_t >= 0.005 (eps_ty = 0.002 for Grade 60).
    ductile = 0.85 * FC * b * 0.85 * 0.375 * depths[0] / force
    require(number, 0.0, ductile)
    found = milp(
        bar.mass * number,
        constraints=LinearConstraint(np.array(rows), np.array(low), np.array(high)),
        bounds=Bounds(np.zeros(columns), upper),
        integrality=np.ones(columns, dtype=np.int64),
    )
    return float(found.fun) if found.success else None


def demand_above_minimum(web: float, depth: float, share: float) -> float:
    """Return a demand between the strength of minimum steel and that of ductile steel.

    Singly reinforced at 2.5 in from the tension face: As = 200 b d/fy (9.6.1.2) to
    0.85 fc b (0.85 x 0.375 d)/fy.
    """
    d = depth - 2.375

    def strength(area: float) -> float:
        return 0.9 * FY * area * (d - FY * area / (1.7 * FC * web))

    least = strength(200 * web * d / FY)
    most = strength(0.85 * FC * web * 0.85 * 0.375 * d / FY)
    return least * 1.02 + share * (most - least)


@pytest.mark.parametrize("layers", [1, 2])
@pytest.mark.parametrize("seed", range(11))
def test_same_mass_as_the_mixed_integer_program(seed: int, layers: int) -> None:
    """Least mass over all sizes, one size in a layout; the few hopeless sections agree too."""
    rng = random.Random(100 * layers + seed)
    web, depth = rng.choice([10.0, 12.0, 14.0, 18.0, 24.0]), rng.choice([18.0, 22.0, 27.0, 33.0])
    section = us_section(
        outline=Outline(web=web, depth=depth),
        stirrup=INCH.bar(rng.choice(["#3", "#4"])),
        aggregate=rng.choice([0.5, 0.75, 1.0]),
        Mu=demand_above_minimum(web, depth, rng.uniform(0.1, 1.1)),
    )
    masses = [
        mass
        for name in SIZES
        for count in range(1, layers + 1)
        if (mass := lightest_of_size(section, name, count)) is not None
    ]
    rules = BarRules(
        sizes=tuple(INCH.bar(name) for name in SIZES),
        max_layers=layers,
        max_sizes=1,
        size_steps=1,
    )
    found = Search(
        Problem(section=section, rules=rules, ranking=replace(US, by="lightest", per_pattern=None))
    ).run()
    assert found.proved
    assert (found.lightest is None) == (not masses)
    if found.lightest is not None:
        assert found.lightest.mass == pytest.approx(min(masses), rel=1e-9)
        assert found.chosen[0] == found.lightest


def test_program_against_a_figure_worked_out_by_hand() -> None:
    """14 x 24 in, #4 stirrups, #8 only, Mu = 250 kip*ft: 4 #8, 10.68 lb/ft.

    d = 24 - 2 - 0.5 = 21.5 in. 3 #8: a = 2.37 x 60/(3.4 x 14) = 2.99 in, phi Mn =
    0.9 x 142.2 (21.5 - 1.49)/12 = 213 kip*ft; 4 #8: a = 3.98 in, 277 kip*ft.
    """
    section = us_section(Mu=250 * 12_000.0)
    assert lightest_of_size(section, "#8", 1) == pytest.approx(10.68, abs=0.005)
    assert lightest_of_size(replace(section, Mu=213.5 * 12_000.0), "#8", 1) == pytest.approx(
        10.68, abs=0.005
    )
    assert lightest_of_size(replace(section, Mu=213.0 * 12_000.0), "#8", 1) == pytest.approx(
        8.01, abs=0.005
    )
    assert lightest_of_size(replace(section, Mu=900 * 12_000.0), "#8", 1) is None
