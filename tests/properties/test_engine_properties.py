"""Properties that hold for every section and every layout."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from engine import (
    BarGroups,
    Batch,
    Concrete,
    Flange,
    FlexuralState,
    Layout,
    Outline,
    Profile,
    Section,
    Steel,
    assess,
    cracked_section,
    edition,
    flexural_state,
    required_share,
)
from engine.layouts import layer_of
from engine.outlines import FloatArray
from engine.strength_reduction import tension_controlled_strain
from tests.engine.builders import INCH, array, us_section

examples = settings(max_examples=60, deadline=None, derandomize=True)
CODE = edition("ACI 318-19")


def flanges(web: float, depth: float) -> st.SearchStrategy[Flange | None]:
    """Draw a flange of a section, or none."""
    return st.none() | st.builds(
        Flange,
        width=st.floats(web, 6 * web),
        thickness=st.floats(0.1 * depth, 0.4 * depth),
    )


@st.composite
def outlines(draw: st.DrawFn) -> Outline:
    """Draw a rectangle, T, L, inverted T or I."""
    web, depth = draw(st.floats(8.0, 48.0)), draw(st.floats(12.0, 60.0))
    return Outline(
        web=web,
        depth=depth,
        top=draw(flanges(web, depth)),
        bottom=draw(flanges(web, depth)),
    )


concretes = st.builds(Concrete, edition=st.just(CODE), fc=st.floats(2500.0, 12_000.0))
steels = st.builds(
    Steel,
    edition=st.just(CODE),
    fy=st.sampled_from([40_000.0, 60_000.0, 80_000.0, 100_000.0]) | st.floats(4e4, 1e5),
)


@st.composite
def bar_groups(draw: st.DrawFn, outline: Outline) -> BarGroups:
    """Draw one layout: up to four layers from the tension face, bars opposite or not.

    The bars of a layer fit beside each other: their area is less than pi/4 of what a row of
    them over the web would have.
    """
    h, web = outline.depth, outline.web
    rows = []
    depth = h - draw(st.floats(2.0, 3.0))
    for _ in range(draw(st.integers(1, 4))):
        diameter = draw(st.floats(0.375, 1.41))
        if depth < h / 3:
            break
        rows.append((draw(st.floats(0.05, 0.6)) * web * diameter, depth, diameter))
        depth -= diameter + draw(st.floats(1.0, 3.0))
    if draw(st.booleans()):
        rows.append((draw(st.floats(0.01, 0.4)) * web, draw(st.floats(1.5, 3.0)), 1.0))
    area, depths, diameters = (array(*column)[None, :] for column in zip(*rows, strict=True))
    return BarGroups(area=area, depth=depths, diameter=diameters)


@st.composite
def cases(draw: st.DrawFn) -> tuple[Outline, Concrete, Steel, BarGroups]:
    """Draw a section and its bars."""
    outline = draw(outlines())
    return outline, draw(concretes), draw(steels), draw(bar_groups(outline))


def forces(
    profile: Profile, concrete: Concrete, steel: Steel, bars: BarGroups, state: FlexuralState
) -> tuple[FloatArray, FloatArray]:
    """Return every force of the equilibrium, tension positive, and the depth it acts at.

    Strip by strip and bar by bar, apart from the way the engine sums them.
    """
    c, depth = float(state.c[0]), profile.depth
    a = min(concrete.beta1 * c, depth)
    found: list[tuple[float, float]] = []
    upper = 0.0
    for width, height in profile.strips:
        lower = min(upper + height, a)
        if lower > upper:
            found.append((-0.85 * concrete.fc * width * (lower - upper), (lower + upper) / 2))
        upper += height
    for area, d, diameter in zip(bars.area[0], bars.depth[0], bars.diameter[0], strict=True):
        strain = 0.003 * (d - c) / c
        found.append((area * math.copysign(min(abs(strain) * steel.Es, steel.fy), strain), d))
        top = d - diameter / 2
        reached = min(max(a - top, 0.0), diameter)
        found.append((0.85 * concrete.fc * area * reached / diameter, top + reached / 2))
    return array(*(force for force, _ in found)), array(*(at for _, at in found))


@examples
@given(cases(), st.booleans())
def test_resultants_balance(
    case: tuple[Outline, Concrete, Steel, BarGroups], sagging: bool
) -> None:
    """The forces at c sum to nothing, and their moment is Mn about any axis."""
    outline, concrete, steel, bars = case
    profile = outline.profile(sagging=sagging)
    state = flexural_state(profile, concrete, steel, bars)
    force, depth = forces(profile, concrete, steel, bars, state)
    total = np.abs(force).sum()
    assert abs(force.sum()) <= 1e-9 * total
    for axis in (0.0, profile.depth, float(state.c[0])):
        moment = (force * (depth - axis)).sum()
        np.testing.assert_allclose(moment, state.Mn[0], atol=1e-9 * total * profile.depth)


@examples
@given(cases(), st.integers(0, 4), st.floats(1.001, 1.5))
def test_more_tension_steel_never_lowers_the_moment(
    case: tuple[Outline, Concrete, Steel, BarGroups], which: int, factor: float
) -> None:
    """While the section stays tension-controlled, any group that yields may grow.

    The bars below it yield too and keep their force; what balances it acts at lesser depths. More
    compression steel can lower the moment: bars below the block's centroid shorten the lever.
    """
    outline, concrete, steel, bars = case
    profile = outline.profile(sagging=True)
    which %= bars.area.shape[1]
    more = bars.area.copy()
    more[0, which] *= factor
    before = flexural_state(profile, concrete, steel, bars)
    after = flexural_state(profile, concrete, steel, replace(bars, area=more))
    strain = 0.003 * (bars.depth[0] - after.c[0]) / after.c[0]
    yields = strain[which] * steel.Es >= steel.fy
    if yields and strain.max() >= tension_controlled_strain(steel):
        assert after.Mn[0] >= before.Mn[0] * (1 - 1e-12)


@examples
@given(cases(), st.booleans())
def test_outline_upside_down_and_moment_reversed(
    case: tuple[Outline, Concrete, Steel, BarGroups], sagging: bool
) -> None:
    """What is at the top in sagging is at the bottom in hogging."""
    outline, concrete, steel, bars = case
    turned = Outline(web=outline.web, depth=outline.depth, top=outline.bottom, bottom=outline.top)
    first = flexural_state(outline.profile(sagging=sagging), concrete, steel, bars)
    second = flexural_state(turned.profile(sagging=not sagging), concrete, steel, bars)
    # The web's height is a difference taken in another order.
    np.testing.assert_allclose(second.Mn, first.Mn, rtol=1e-9)
    np.testing.assert_allclose(second.c, first.c, rtol=1e-9)


@examples
@given(cases())
def test_lengths_doubled(case: tuple[Outline, Concrete, Steel, BarGroups]) -> None:
    """Lengths x 2 and areas x 4: depths of axis and block x 2, moment x 8."""
    outline, concrete, steel, bars = case
    profile = outline.profile(sagging=True)
    double = Profile(tuple((2 * width, 2 * height) for width, height in profile.strips))
    larger = BarGroups(area=4 * bars.area, depth=2 * bars.depth, diameter=2 * bars.diameter)
    first = flexural_state(profile, concrete, steel, bars)
    second = flexural_state(double, concrete, steel, larger)
    np.testing.assert_allclose(second.c, 2 * first.c, rtol=1e-10)
    np.testing.assert_allclose(second.a, 2 * first.a, rtol=1e-10)
    np.testing.assert_allclose(second.Mn, 8 * first.Mn, rtol=1e-9)


@examples
@given(cases())
def test_many_rows_are_as_good_as_one(case: tuple[Outline, Concrete, Steel, BarGroups]) -> None:
    """Rows of a batch do not see each other."""
    outline, concrete, steel, bars = case
    profile = outline.profile(sagging=True)
    shares = np.linspace(0.25, 1.0, 7)[:, None]
    many = BarGroups(
        area=bars.area * shares,
        depth=np.repeat(bars.depth, 7, axis=0),
        diameter=np.repeat(bars.diameter, 7, axis=0),
    )
    together = flexural_state(profile, concrete, steel, many)
    alone = flexural_state(profile, concrete, steel, bars)
    np.testing.assert_allclose(together.Mn[-1], alone.Mn[0], rtol=1e-12)
    np.testing.assert_allclose(together.c[-1], alone.c[0], rtol=1e-11)


@st.composite
def layouts(draw: st.DrawFn) -> Layout:
    """Draw a layout of one to three layers of one or two sizes."""
    layers = []
    for _ in range(draw(st.integers(1, 3))):
        sizes = draw(st.lists(st.sampled_from(INCH.bars[2:9]), min_size=1, max_size=2))
        layers.append(layer_of([(size, draw(st.integers(2, 4))) for size in sizes]))
    return Layout(tuple(layers))


@st.composite
def sections(draw: st.DrawFn) -> Section:
    """Draw a section of at least 12 x 20 in, hogging or sagging."""
    web, depth = draw(st.floats(12.0, 30.0)), draw(st.floats(20.0, 48.0))
    outline = Outline(web=web, depth=depth, top=draw(flanges(web, depth)))
    opposite = draw(st.none() | layouts()) if depth > 36.0 else None
    return us_section(
        outline=outline,
        Mu=draw(st.sampled_from([1.0, -1.0])),
        opposite=opposite,
        count_opposite=opposite is not None,
    )


@examples
@given(sections(), layouts(), st.floats(0.5, 1.2))
def test_required_share_reproduces_the_moment(
    section: Section, layout: Layout, share: float
) -> None:
    """Phi Mn of the bars' areas times the share is Mu, for a moment that some share does carry."""
    batch = Batch.of([layout])
    scaled = replace(batch, bars=tuple(replace(bar, area=bar.area * share) for bar in batch.bars))
    enough = assess(section, scaled)
    assume(bool(enough.ductile[0]))
    strength = enough.phi_Mn[0]
    asked = replace(section, Mu=math.copysign(float(strength), section.Mu))
    found = required_share(asked, batch)[0]
    assert math.isfinite(found)
    bars = tuple(replace(bar, area=bar.area * found) for bar in batch.bars)
    reproduced = assess(asked, replace(batch, bars=bars)).phi_Mn[0]
    assert reproduced == pytest.approx(strength, rel=1e-9)


@examples
@given(sections(), layouts())
def test_verdicts_follow_the_figures(section: Section, layout: Layout) -> None:
    """The same section turned upside down, with its moment reversed, is assessed alike."""
    outline = section.outline
    turned = replace(
        section,
        outline=Outline(web=outline.web, depth=outline.depth, bottom=outline.top),
        Mu=-section.Mu,
    )
    first = assess(section, Batch.of([layout])).row(0)
    second = assess(turned, Batch.of([layout])).row(0)
    assert second.Mn == pytest.approx(first.Mn, rel=1e-9)
    assert second.phi == pytest.approx(first.phi, rel=1e-9)
    assert (second.d, second.dt, second.As_min) == (first.d, first.dt, first.As_min)


@examples
@given(outlines(), st.floats(1.0, 200.0), st.floats(0.0, 30.0), st.booleans())
def test_first_moments_of_the_cracked_section_balance(
    outline: Outline, lower: float, upper: float, sagging: bool
) -> None:
    """Concrete above the axis against steel about it; Icr is the integral of b (x - y)^2."""
    profile = outline.profile(sagging=sagging)
    depth = array(profile.depth - 2.5, 2.5)
    steel = array(lower, upper)
    found = cracked_section(profile, steel[None, :], depth[None, :])
    x = float(found.x[0])
    first, second, top = 0.0, 0.0, 0.0
    for width, height in profile.strips:
        bottom = min(top + height, x)
        if bottom > top:
            first += width * (bottom - top) * (x - (bottom + top) / 2)
            thick = bottom - top
            second += width * thick * (thick**2 / 12 + (x - (bottom + top) / 2) ** 2)
        top += height
    moments = steel * (depth - x)
    assert abs(first - moments.sum()) <= 1e-9 * (first + np.abs(moments).sum())
    np.testing.assert_allclose(found.Icr[0], second + (steel * (depth - x) ** 2).sum(), rtol=1e-9)


@examples
@given(outlines(), st.booleans(), st.lists(st.floats(0.0, 1.0), min_size=1, max_size=8))
def test_depth_of_area_inverts_area_above(
    outline: Outline, sagging: bool, shares: list[float]
) -> None:
    """There and back, at every depth of the section and at its edges."""
    profile = outline.profile(sagging=sagging)
    edges = np.cumsum([height for _, height in profile.strips])
    depth = np.minimum(np.concatenate((array(*shares) * profile.depth, edges)), profile.depth)
    back = profile.depth_of_area(profile.area_above(depth))
    np.testing.assert_allclose(back, depth, rtol=1e-9, atol=1e-9)
    assert profile.area_above(array(profile.depth))[0] == pytest.approx(outline.area, rel=1e-12)


@examples
@given(outlines(), st.lists(st.floats(0.0, 1.0), min_size=2, max_size=8))
def test_area_and_moment_are_integrals_of_the_width(outline: Outline, shares: list[float]) -> None:
    """Midpoint sums over each strip, exact for constant widths."""
    profile = outline.profile(sagging=True)
    for depth in profile.depth * np.array(shares):
        edges = [0.0, *np.cumsum([height for _, height in profile.strips])]
        cuts = array(*(min(edge, depth) for edge in edges))
        middle, step = (cuts[1:] + cuts[:-1]) / 2, np.diff(cuts)
        width = np.where(step > 0.0, profile.width_at(middle), 0.0)
        area = (width * step).sum()
        moment = (width * step * middle).sum()
        at = array(depth)
        np.testing.assert_allclose(profile.area_above(at), area, rtol=1e-10, atol=1e-9)
        np.testing.assert_allclose(profile.moment_above(at), moment, rtol=1e-10, atol=1e-9)
