"""Strength of random sections against an independent integration over polygons.

The outline is a shapely polygon, the block its intersection with a half plane; scipy's `brentq`
finds the neutral axis. Nothing of the engine's mechanics is used: depths of the bars, strains,
the block, phi and the displaced concrete are written out again here. As in the engine, a group
of bars displaces concrete as a rectangle as high as its bars and of the group's area.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import pytest
from scipy.optimize import brentq
from shapely.geometry import Polygon, box
from shapely.ops import unary_union

from catalogs import Bar, bar_catalog
from engine import (
    Batch,
    Concrete,
    Flange,
    Layer,
    Layout,
    Outline,
    Section,
    Steel,
    assess,
    edition,
)

SHAPES = ("rectangle", "tee", "ell", "inverted tee", "i", "i uneven")
CODES = ("ACI 318-14", "ACI 318-19", "ACI 318M-14", "ACI 318M-19")


def layer(groups: list[tuple[Bar, int]]) -> Layer:
    """Make a layer, larger sizes first."""
    return Layer(tuple(sorted(groups, key=lambda group: -group[0].diameter)))


def random_layout(
    rng: np.random.Generator, bars: tuple[Bar, ...], layers: int, most: int
) -> Layout:
    """Make a layout of one or two neighbouring sizes; it need not fit sideways."""
    made = []
    for _ in range(layers):
        first = int(rng.integers(1, len(bars)))
        groups = [(bars[first], int(rng.integers(2, most + 1)))]
        if rng.random() < 0.4:
            groups.append((bars[first - 1], int(rng.integers(1, 4))))
        made.append(layer(groups))
    return Layout(tuple(made))


def random_outline(rng: np.random.Generator, shape: str, unit: float) -> Outline:
    """Make an outline of a given shape; `unit` is an inch in the system's length."""
    web = round(float(rng.uniform(10, 24)), 2) * unit
    depth = round(float(rng.uniform(24, 48)), 2) * unit

    def flange(*, one_side: bool = False) -> Flange:
        width = web + round(float(rng.uniform(2, 40)), 2) * unit
        thickness = round(float(rng.uniform(2.5, 7)), 2) * unit
        left = float(rng.choice([0.0, width - web])) if one_side else None
        return Flange(width=width, thickness=thickness, left=left)

    if shape == "rectangle":
        return Outline(web=web, depth=depth)
    if shape in {"tee", "ell"}:
        return Outline(web=web, depth=depth, top=flange(one_side=shape == "ell"))
    if shape == "inverted tee":
        return Outline(web=web, depth=depth, bottom=flange())
    top = flange()
    return Outline(web=web, depth=depth, top=top, bottom=top if shape == "i" else flange())


@dataclass(frozen=True, slots=True, kw_only=True)
class Case:
    """One random section with its bars."""

    shape: str
    section: Section
    layout: Layout


def random_case(number: int) -> Case:
    """Make a case; every shape meets both faces and every edition."""
    rng = np.random.default_rng(20_240 + number)
    shape = SHAPES[number % 6]
    sagging = number // 6 % 2 == 0
    rules = edition(CODES[number // 12 % 4])
    inch = rules.units == "us"
    unit = 1.0 if inch else 25.4
    catalog = bar_catalog("astm-inch" if inch else "astm-metric")
    heavy = rng.random() < 0.3  # enough steel that the block is deep and bars stay elastic
    layout = random_layout(rng, catalog.bars[2:9], int(rng.integers(1, 4)), 14 if heavy else 5)
    counted = rng.random() < 0.6
    opposite = random_layout(rng, catalog.bars[2:8], int(rng.integers(1, 3)), 5)
    fc = float(rng.choice([3000, 4000, 6000, 9000] if inch else [21, 28, 40, 60]))
    fy = float(rng.choice([40_000, 60_000, 80_000] if inch else [300, 420, 550]))
    section = Section(
        mark=f"case {number}",
        outline=random_outline(rng, shape, unit),
        concrete=Concrete(edition=rules, fc=fc),
        steel=Steel(edition=rules, fy=fy),
        cover=1.5 * unit,
        stirrup=catalog.bars[int(rng.integers(0, 2))],
        aggregate=0.75 * unit,
        Mu=1e6 if sagging else -1e6,
        layer_gap=round(float(rng.uniform(1.0, 2.0)), 2) * unit,
        opposite=opposite if counted else None,
        count_opposite=counted,
    )
    return Case(shape=shape, section=section, layout=layout)


CASES = [random_case(number) for number in range(96)]


@dataclass(frozen=True, slots=True, kw_only=True)
class Result:
    """Independent strength of one section."""

    a: float
    c: float
    Mn: float
    eps_t: float
    phi_Mn: float
    block_reaches_bars: bool
    tension_bar_elastic: bool
    compression_bar_elastic: bool


def outline_polygon(section: Section) -> Polygon:
    """Draw the outline with the compression face at y = 0 and the tension face at y = h."""
    outline, sagging = section.outline, section.Mu > 0
    h, web = outline.depth, outline.web
    pieces = [box(-web / 2, 0, web / 2, h)]
    for flange, at_top in ((outline.top, True), (outline.bottom, False)):
        if flange is None:
            continue
        left = (flange.width - web) / 2 if flange.left is None else flange.left
        x0 = -web / 2 - left
        x1 = x0 + flange.width
        compressed = at_top == sagging
        y0, y1 = (0.0, flange.thickness) if compressed else (h - flange.thickness, h)
        pieces.append(box(x0, y0, x1, y1))
    return unary_union(pieces)


def bar_groups(section: Section, layout: Layout) -> list[tuple[float, float, float, bool]]:
    """Area, depth, diameter and whether at the tension face, of each size in each layer."""
    h = section.outline.depth
    found = []
    for face, is_tension in ((layout, True), (section.opposite, False)):
        if face is None:
            continue
        rise = section.cover + section.stirrup.diameter
        for stacked in face.layers:
            for bar, count in stacked.groups:
                from_face = rise + bar.diameter / 2
                depth = h - from_face if is_tension else from_face
                found.append((bar.area * count, depth, bar.diameter, is_tension))
            rise += max(bar.diameter for bar, _ in stacked.groups) + section.layer_gap
    return found


def beta1_of(section: Section) -> float:
    """Table 22.2.2.4.3, in psi and in MPa."""
    start, step = (4000.0, 1000.0) if section.edition.units == "us" else (28.0, 7.0)
    fc = section.concrete.fc
    return 0.85 if fc <= start else max(0.65, 0.85 - 0.05 * (fc - start) / step)


def phi_of(section: Section, eps_t: float) -> float:
    """Table 21.2.2, other than spirals."""
    inch = section.edition.units == "us"
    fy, modulus = section.steel.fy, 29e6 if inch else 200e3
    eps_ty = 0.002 if fy == (60_000 if inch else 420) else fy / modulus
    limit = 0.005 if section.edition.name.endswith("14") else eps_ty + 0.003
    if eps_t >= limit:
        return 0.9
    return max(0.65, 0.65 + 0.25 * (eps_t - eps_ty) / (limit - eps_ty))


def integrate(case: Case) -> Result:
    """Equilibrium and moment over polygons."""
    section, layout = case.section, case.layout
    concrete = outline_polygon(section)
    h = section.outline.depth
    left, _, right, _ = concrete.bounds
    groups = bar_groups(section, layout)
    bars = [
        (area, depth, box(-area / db / 2, depth - db / 2, area / db / 2, depth + db / 2), tension)
        for area, depth, db, tension in groups
    ]
    modulus = 29e6 if section.edition.units == "us" else 200e3
    fy, stress, beta1 = section.steel.fy, 0.85 * section.concrete.fc, beta1_of(section)

    def bar_stress(depth: float, c: float) -> float:
        return max(-fy, min(fy, modulus * 0.003 * (c - depth) / c))  # compression positive

    def resultants(c: float) -> tuple[float, float]:
        """Axial force, and moment about mid-depth."""
        half_plane = box(left, 0, right, min(beta1 * c, h))
        block = concrete.intersection(half_plane)
        force = stress * block.area
        moment = force * (h / 2 - block.centroid.y)
        for area, depth, shape, _ in bars:
            bar_force = area * bar_stress(depth, c)
            force += bar_force
            moment += bar_force * (h / 2 - depth)
            hole = shape.intersection(box(-1e9, 0, 1e9, min(beta1 * c, h)))
            if not hole.is_empty:
                force -= stress * hole.area
                moment -= stress * hole.area * (h / 2 - hole.centroid.y)
        return force, moment

    c = float(brentq(lambda axis: resultants(axis)[0], 1e-3 * h, 20 * h, xtol=1e-12 * h))
    a = min(beta1 * c, h)
    moment = resultants(c)[1]
    outer = [bar for bar in groups if bar[3] and bar[1] + bar[2] / 2 > h - section.bar_face - 1e-6]
    dt = sum(area * depth for area, depth, _, _ in outer) / sum(area for area, *_ in outer)
    eps_t = 0.003 * (dt - c) / c
    return Result(
        a=a,
        c=c,
        Mn=moment,
        eps_t=eps_t,
        phi_Mn=phi_of(section, eps_t) * moment,
        block_reaches_bars=any(depth - db / 2 < a for _, depth, db, _ in groups),
        tension_bar_elastic=any(
            tension and abs(bar_stress(depth, c)) < fy for _, depth, _, tension in bars
        ),
        compression_bar_elastic=any(
            not tension and abs(bar_stress(depth, c)) < fy for _, depth, _, tension in bars
        ),
    )


@pytest.mark.parametrize("case", CASES, ids=lambda case: f"{case.section.mark}, {case.shape}")
def test_random_section(case: Case) -> None:
    """c, a, Mn, eps_t and phi Mn of the engine and of the integration agree to 1e-6."""
    found = assess(case.section, Batch.of([case.layout])).row(0)
    expected = integrate(case)
    assert found.c == pytest.approx(expected.c, rel=1e-6)
    assert found.a == pytest.approx(expected.a, rel=1e-6)
    assert found.Mn == pytest.approx(expected.Mn, rel=1e-6)
    # A strain near zero is a difference of nearly equal depths.
    assert found.eps_t == pytest.approx(expected.eps_t, rel=1e-6, abs=1e-9)
    assert found.phi_Mn == pytest.approx(expected.phi_Mn, rel=1e-6)


def test_the_sample_is_varied() -> None:
    """Every outline under both faces, 1 to 3 layers and each state of the steel occur."""
    results = [integrate(case) for case in CASES]
    combinations = {(case.shape, case.section.Mu > 0, case.section.edition.name) for case in CASES}
    assert len(combinations) == len(SHAPES) * 2 * len(CODES)
    assert {len(case.layout.layers) for case in CASES} == {1, 2, 3}
    assert sum(case.section.count_opposite for case in CASES) >= 40
    assert sum(result.block_reaches_bars for result in results) >= 30
    assert sum(result.tension_bar_elastic for result in results) >= 15
    assert sum(result.compression_bar_elastic for result in results) >= 15
    factors = [result.phi_Mn / result.Mn for result in results]
    assert sum(0.65 < factor < 0.9 - 1e-9 for factor in factors) >= 5
    assert sum(factor > 0.9 - 1e-9 for factor in factors) >= 30
