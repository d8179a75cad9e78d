"""Envelopes against every arrangement of live load, hand solutions and statics."""

from __future__ import annotations

import itertools
from dataclasses import fields, replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import brentq, minimize_scalar

from engine.beams.analysis import Response, analyse
from engine.beams.demand import Deflections
from engine.beams.envelopes import elastic_demands, merged, redistributed_supports, span_stations
from engine.beams.peaks import crossings, vertices
from engine.beams.spans import (
    FIXED,
    Beam,
    Load,
    LoadCase,
    Overhang,
    PointLoad,
    SupportKind,
    UniformLoad,
)
from engine.beams.superposition import FACTORED, Effects
from engine.beams.unit_deflections import span_deflections
from engine.editions import EDITIONS
from engine.errors import OutOfRangeError
from engine.outlines import FloatArray
from tests.beams.random_beams import MODULUS, plain_beam, random_beam

US, SI = EDITIONS["ACI 318-19"], EDITIONS["ACI 318M-19"]
L, D, Q = 288.0, 150.0, 200.0  # span [in], dead and live load [lbf/in]


def scaled(load: Load, factor: float) -> Load:
    """Return a load as dead load of another size."""
    if isinstance(load, PointLoad):
        return replace(load, force=load.force * factor, case=LoadCase.DEAD)
    return replace(load, intensity=load.intensity * factor, case=LoadCase.DEAD)


def arranged(beam: Beam, factors: tuple[float, float], loaded: tuple[bool, ...]) -> Response:
    """Analyse one combination with live load on some of the spans, all as one set of loads."""
    spans = []
    for span, there in zip(beam.spans, loaded, strict=True):
        share = {LoadCase.DEAD: factors[0], LoadCase.LIVE: factors[1] if there else 0.0}
        loads = tuple(scaled(load, share[load.case]) for load in span.loads)
        spans.append(replace(span, loads=loads))
    return analyse(replace(beam, spans=tuple(spans)), MODULUS).dead


def arrangements(beam: Beam, *combinations: tuple[float, float]) -> list[Response]:
    """Analyse every arrangement of every combination."""
    patterns = itertools.product((False, True), repeat=len(beam.spans))
    return [
        arranged(beam, pair, loaded) for loaded, pair in itertools.product(patterns, combinations)
    ]


# ------------------------------------------------------------------- every arrangement


@pytest.mark.parametrize("seed", range(12))
def test_envelopes_are_those_of_every_arrangement(seed: int) -> None:
    """Moments and shears at all stations equal the worst of all 2^n arrangements."""
    beam = random_beam(seed, most_spans=4)
    factored, service = arrangements(beam, *FACTORED), arrangements(beam, (1.0, 1.0))
    for number, found in enumerate(elastic_demands(beam, MODULUS, US, sustained=0.3)):
        strong = np.array([each.moment(number, found.x) for each in factored])
        lasting = np.array([each.moment(number, found.x) for each in service])
        shears = np.array([each.shear_size(number, found.x) for each in factored])
        size = np.abs(strong).max() + 1.0
        for ours, theirs in (
            (found.Mu_most, strong.max(axis=0)),
            (found.Mu_least, strong.min(axis=0)),
            (found.Ms_most, lasting.max(axis=0)),
            (found.Ms_least, lasting.min(axis=0)),
        ):
            assert ours == pytest.approx(theirs, rel=1e-9, abs=1e-10 * size)
        worst = shears.max(axis=0)
        assert found.Vu == pytest.approx(worst, rel=1e-9, abs=1e-9 * (worst.max() + 1.0))


@pytest.mark.parametrize("seed", range(12))
def test_deflections_are_those_of_every_arrangement(seed: int) -> None:
    """The largest deflection is that of the worst arrangement at the worst place."""
    beam = random_beam(seed, most_spans=4)
    service = arrangements(beam, (1.0, 1.0))
    for number, span in enumerate(beam.spans):
        found = span_deflections(analyse(beam, MODULUS), number, sustained=0.4)
        if span.overhang is Overhang.NONE:
            x = np.linspace(0.0, span.length, 400)
            curves = [each.deflection(number, x) for each in service]
            best = max(range(len(curves)), key=lambda index: curves[index].max())
            middle = x[np.argmax(curves[best])]

            def upwards(place: float, best: int = best, number: int = number) -> float:
                return -float(service[best].deflection(number, place))

            near = (max(middle - x[1], 0.0), min(middle + x[1], span.length))
            fine = minimize_scalar(upwards, bounds=near, method="bounded", options={"xatol": 1e-8})
            assert found.total == pytest.approx(max(-fine.fun, 0.0), rel=1e-9, abs=1e-3)
            assert found.total_back == 0.0
        else:
            tip = 0.0 if span.overhang is Overhang.LEFT else span.length
            own = max(float(each.deflection(number, tip)) for each in service)
            back = max(each.root_rotation(number) for each in service) * span.length
            assert found.total == pytest.approx(own, rel=1e-9)
            assert found.total_back == pytest.approx(back, rel=1e-9, abs=1e-9)
        middle_share = 0.6 * found.dead + 0.4 * found.total
        assert found.sustained == pytest.approx(middle_share, rel=1e-9, abs=1e-3)


# ------------------------------------------------------------------- peaks and stations


@pytest.mark.parametrize("redistribution", [0.0, 0.15])
@pytest.mark.parametrize("seed", range(20, 40))
def test_peaks_are_stations(seed: int, redistribution: float) -> None:
    """The largest moment at a station is the largest anywhere, to 1e-9."""
    beam = random_beam(seed, most_spans=4)
    analysis, may = analyse(beam, MODULUS), redistributed_supports(beam)
    demands = elastic_demands(beam, MODULUS, US, sustained=0.0, redistribution=redistribution)
    for number, found in enumerate(demands):
        ends = (beam.left_support(number), beam.right_support(number))
        shares = [redistribution if end is not None and may[end] else 0.0 for end in ends]
        effects = Effects(analysis=analysis, span=number, shares=(shares[0], shares[1]))

        def envelope(x: FloatArray, sign: float, effects: Effects = effects) -> FloatArray:
            dead, live = effects.moments(x)
            added = np.maximum(sign * live, 0.0).sum(axis=0)
            first, second = (d * sign * dead + q * added for d, q in FACTORED)
            worst: FloatArray = np.maximum(first, second)
            return worst

        for sign, ours in ((1.0, found.Mu_most), (-1.0, -found.Mu_least)):
            best = int(np.argmax(ours))
            attained = envelope(found.x[[best]], sign)[0]
            assert ours[best] == pytest.approx(attained, rel=1e-12, abs=1e-6)
            x = np.linspace(found.x[0], found.x[-1], 2000)
            rough = envelope(x, sign)
            place, step = x[np.argmax(rough)], x[1] - x[0]
            near = (max(place - step, x[0]), min(place + step, x[-1]))
            fine = minimize_scalar(
                lambda at, sign=sign, envelope=envelope: -envelope(np.array([at]), sign)[0],
                bounds=near,
                method="bounded",
                options={"xatol": 1e-9},
            )
            anywhere = max(-fine.fun, rough.max())
            assert ours[best] >= anywhere - 1e-9 * abs(anywhere) - 1e-6


def test_peak_of_a_partial_load() -> None:
    """R1 (a + R1/(2 w)) for a uniform load from a to b: AISC case 4 (from memory)."""
    a, b, load = 50.0, 133.0, 120.0
    left = load * (b - a) * (L - (a + b) / 2) / L
    spread = UniformLoad(case=LoadCase.LIVE, intensity=load, start=a, end=b)
    beam = plain_beam([L])
    beam = replace(beam, spans=(replace(beam.spans[0], loads=(spread,)),))
    (found,) = elastic_demands(beam, MODULUS, US, sustained=0.0)
    peak = left * (a + left / (2 * load))
    assert found.Ms_most.max() == pytest.approx(peak, rel=1e-12)
    assert found.Mu_most.max() == pytest.approx(1.6 * peak, rel=1e-12)
    assert found.x[np.argmax(found.Mu_most)] == pytest.approx(a + left / load, rel=1e-9)


def test_peak_beside_a_change_of_arrangement() -> None:
    """The peak is found where a neighbour's live load stops adding between two stations.

    Load on the second span turns the support they share; with its other end held, the moment
    that this carries over the first span is zero at a third of it.
    """
    length = 290.0
    zero, own_place = length / 3, length / 3 + 0.5

    def loaded(end: float) -> Beam:
        beam = plain_beam([length, L], dead=10.0, live=2.0, width=1e-3, stiffness=(FIXED, 0.0, 0.0))
        part = UniformLoad(case=LoadCase.LIVE, intensity=Q, start=0.0, end=end)
        first = replace(beam.spans[0], loads=(beam.spans[0].loads[0], part))
        return replace(beam, spans=(first, beam.spans[1]))

    def slope(end: float) -> float:
        only = arranged(loaded(end), (1.2, 1.6), (True, False))
        return only.shear(0, own_place).item()

    beam = loaded(brentq(slope, 0.3 * length, 0.6 * length))
    first, _ = elastic_demands(beam, MODULUS, US, sustained=0.0)
    grid = span_stations(beam, 0, US)
    assert np.searchsorted(grid, zero) == np.searchsorted(grid, own_place)
    peak = arranged(beam, (1.2, 1.6), (True, False)).moment(0, own_place).item()
    assert first.Mu_most.max() == pytest.approx(peak, rel=1e-12)
    assert first.x[np.argmax(first.Mu_most)] == pytest.approx(own_place, rel=1e-8)


@pytest.mark.parametrize("edition", [US, SI])
def test_stations_are_dense(edition: object) -> None:
    """From face to face, at most 3 in or 75 mm apart, 80 intervals or more, loads' places."""
    code, most = (US, 3.0) if edition is US else (SI, 75.0)
    for length, places in ((120.0, 81), (90.0 * most, 91), (90.5 * most, 93)):
        beam = plain_beam([length + 12.0], dead=1.0)
        x = span_stations(beam, 0, code)
        assert len(x) == places
        assert (x[0], x[-1]) == (6.0, length + 6.0)
        assert np.diff(x).max() <= most * (1 + 1e-12)
        assert np.abs(x - (length / 2 + 6.0)).min() < 1e-9
    force = PointLoad(case=LoadCase.DEAD, force=1.0, at=77.7)
    part = UniformLoad(case=LoadCase.DEAD, intensity=1.0, start=2.0, end=99.9)
    beam = replace(beam, spans=(replace(beam.spans[0], loads=(force, part)),))
    x = span_stations(beam, 0, code, 1.0)
    assert {77.7, 99.9} <= set(x)
    assert 2.0 not in x
    assert np.diff(x).max() <= 1.0 + 1e-12


def test_stations_that_coincide_are_one() -> None:
    """The earlier group keeps its place."""
    joined = merged(
        [np.array([0.0, 10.0]), np.array([5.0, 5.0, 10.05]), np.array([5.05, 7.0])], tolerance=0.1
    )
    assert joined.tolist() == [0.0, 5.0, 7.0, 10.0]
    assert merged([np.array([1.0]), np.array([])], tolerance=0.1).tolist() == [1.0]


def test_spacing_is_refused() -> None:
    """A distance of stations that is none is refused by name."""
    with pytest.raises(OutOfRangeError, match="stations: got 0; allowed: above 0"):
        elastic_demands(plain_beam([L]), MODULUS, US, sustained=0.0, stations=0.0)


@given(st.lists(st.floats(-5.0, 5.0), min_size=3, max_size=3), st.floats(0.5, 4.0))
def test_crossings_and_vertices_of_parabolas(factors: list[float], width: float) -> None:
    """They are where polynomial roots are; what is beyond the interval is left out."""
    a, b, c = (round(factor, 3) for factor in factors)

    def curve(t: FloatArray) -> FloatArray:
        return a * t**2 + b * t + c

    x = np.array([0.0, width])
    at, middle = curve(x)[None], curve(x[:1] + width / 2)[None]
    for zero in np.roots([a, b, c]) if a else np.roots([b, c]):
        if abs(zero.imag) == 0.0 and 1e-6 < zero.real < width - 1e-6:
            found = crossings(x, at, middle)
            assert np.abs(found - zero.real).min() < 1e-5
    tops = vertices(x, at, middle)
    if a and 1e-6 < -b / (2 * a) < width - 1e-6:
        assert tops == pytest.approx([-b / (2 * a)], rel=1e-6)
    elif not a:
        assert tops.size == 0


# ------------------------------------------------------------------- known envelopes


def test_two_spans() -> None:
    """Hand solution: 1/8 over the support with both spans loaded; shear 5/8 at its face."""
    beam = plain_beam([L, L], dead=D, live=Q)
    first, second = elastic_demands(beam, MODULUS, US, sustained=0.0)
    wu, face = 1.2 * D + 1.6 * Q, 6.0
    assert first.Mu_least[-1] == pytest.approx(
        -wu * L**2 / 8 + 5 / 8 * wu * L * face - wu * face**2 / 2
    )
    assert first.Vu[-1] == pytest.approx(5 / 8 * wu * L - wu * face)
    # Live load on this span alone: moments over the support 1/8 of dead, 1/16 of live.
    end = (wu * L / 2) - (1.2 * D / 8 + 1.6 * Q / 16) * L
    assert first.Mu_most.max() == pytest.approx(end**2 / (2 * wu), rel=1e-9)
    assert second.Mu_most == pytest.approx(first.Mu_most[::-1])
    assert second.Mu_least == pytest.approx(first.Mu_least[::-1])


def test_dead_load_alone_takes_the_first_combination() -> None:
    """1.4 D decides where there is no live load."""
    (found,) = elastic_demands(plain_beam([L], dead=D), MODULUS, US, sustained=0.0)
    assert found.Mu_most.max() == pytest.approx(1.4 * D * L**2 / 8)
    assert found.Vu[0] == pytest.approx(1.4 * D * (L / 2 - 6.0))
    assert found.Ms_most.max() == pytest.approx(D * L**2 / 8)


def test_cantilever() -> None:
    """Moments at the face, with the length to the face; nothing at the tip."""
    a = 72.0
    beam = plain_beam([L, a], dead=D, live=Q, hangs=(False, True))
    found = elastic_demands(beam, MODULUS, US, sustained=0.25, redistribution=0.2)[1]
    wu, face = 1.2 * D + 1.6 * Q, 6.0
    assert (found.x[0], found.x[-1]) == (face, a)
    assert found.Mu_least[0] == pytest.approx(-wu * (a - face) ** 2 / 2)
    assert found.Mu_least[-1] == pytest.approx(0.0, abs=1e-6)
    assert found.Vu[0] == pytest.approx(wu * (a - face))
    moved = found.deflections
    assert moved is not None
    assert moved.total == pytest.approx((D + Q) * a**4 / 8)
    assert moved.sustained == pytest.approx((D + 0.25 * Q) * a**4 / 8)
    # The support turns with M L/3 down and with w L^3/24 up; live load of the span only lifts.
    down, up = a**2 / 2 * L / 3 * a, L**3 / 24 * a
    assert moved.dead_back == pytest.approx(D * (down - up))
    assert moved.total_back == pytest.approx(D * (down - up) + Q * down)
    assert moved.sustained_back == pytest.approx(D * (down - up) + 0.25 * Q * down)
    assert not moved.sagging
    assert moved.moment_total == pytest.approx((D + Q) * (a - face) ** 2 / 2)
    assert moved.moment_dead == pytest.approx(D * (a - face) ** 2 / 2)


def test_cantilevers_at_both_ends_mirror() -> None:
    """A symmetrical beam has symmetrical envelopes and deflections."""
    beam = plain_beam([60.0, L, 60.0], dead=D, live=Q, hangs=(True, True))
    left, inner, right = elastic_demands(beam, MODULUS, US, sustained=0.5)
    assert left.Mu_least == pytest.approx(right.Mu_least[::-1], rel=1e-9, abs=1e-5)
    assert left.Vu == pytest.approx(right.Vu[::-1], rel=1e-9, abs=1e-5)
    assert inner.Mu_most == pytest.approx(inner.Mu_most[::-1], rel=1e-9, abs=1e-3)
    assert left.deflections is not None
    assert right.deflections is not None
    for field in fields(Deflections):
        ours, theirs = (getattr(side.deflections, field.name) for side in (left, right))
        assert ours == pytest.approx(theirs), field.name


def test_deflections_of_a_simple_beam() -> None:
    """5 w L^4/384 and w L^2/8 at each stage: AISC case 1 (from memory)."""
    found = span_deflections(analyse(plain_beam([L], dead=D, live=Q), MODULUS), 0, sustained=0.25)
    stages = [D, D + 0.25 * Q, D + Q]
    moved = [5 * load * L**4 / 384 for load in stages]
    assert [found.dead, found.sustained, found.total] == pytest.approx(moved)
    moments = [found.moment_dead, found.moment_sustained, found.moment_total]
    assert moments == pytest.approx([load * L**2 / 8 for load in stages])
    assert found.sagging
    assert [found.dead_back, found.sustained_back, found.total_back] == [0.0, 0.0, 0.0]


def test_deflection_of_a_span_that_hogs_at_midspan() -> None:
    """A short span between long ones: the moment that decides Ie hogs."""
    beam = plain_beam([L, L / 4, L], dead=D, live=0.1 * D)
    found = span_deflections(analyse(beam, MODULUS), 1, sustained=1.0)
    assert not found.sagging
    middle = [each.moment(1, L / 8).item() for each in arrangements(beam, (1.0, 1.0))]
    assert found.moment_total == pytest.approx(-min(middle))
    assert found.moment_sustained == pytest.approx(-min(middle))
    assert 0.0 < found.moment_dead < found.moment_total


def test_live_deflection_is_that_of_one_place() -> None:
    """All three deflections belong to the place of the largest total."""
    beam = plain_beam([L, 0.8 * L], dead=D, live=2 * D)
    analysis = analyse(beam, MODULUS)
    found = span_deflections(analysis, 0, sustained=0.5)
    x = np.linspace(0.0, L, 20_001)
    dead = analysis.dead.deflection(0, x)
    live = np.maximum([each.deflection(0, x) for each in analysis.live], 0.0).sum(axis=0)
    place = np.argmax(dead + live)
    assert found.total == pytest.approx((dead + live)[place], rel=1e-7)
    assert found.dead == pytest.approx(dead[place], rel=1e-4)
    assert found.total - found.dead == pytest.approx(live[place], rel=1e-4)
    assert found.dead < dead.max()


@pytest.mark.parametrize("sustained", [-0.1, 1.1, float("nan")])
def test_sustained_share_is_refused(sustained: float) -> None:
    """A share that is none is refused by name."""
    with pytest.raises(OutOfRangeError, match=r"sustained: got .*; allowed: 0 to 1"):
        elastic_demands(plain_beam([L]), MODULUS, US, sustained=sustained)


# ------------------------------------------------------------------- redistribution


def test_redistributed_supports() -> None:
    """Inner supports and held ends; neither free ends nor supports of cantilevers."""
    assert redistributed_supports(plain_beam([L] * 3)) == (False, True, True, False)
    held = plain_beam([L] * 2, stiffness=(FIXED, 0.0, 1e9))
    assert redistributed_supports(held) == (True, True, True)
    hung = plain_beam([60.0, L, L, 60.0], stiffness=(1e9,) * 3, hangs=(True, True))
    assert redistributed_supports(hung) == (False, True, False)


def test_redistribution_of_two_spans() -> None:
    """Hand solution: the moment over the support falls by the share, the span's follows."""
    beam, share, wu = plain_beam([L, L], dead=D, width=1e-6), 0.1, 1.4 * D
    found, _ = elastic_demands(beam, MODULUS, US, sustained=0.0, redistribution=share)
    over = (1 - share) * wu * L**2 / 8
    left = wu * L / 2 - over / L
    assert found.Mu_least[-1] == pytest.approx(-over, rel=1e-6)
    assert found.Mu_most.max() == pytest.approx(left**2 / (2 * wu), rel=1e-9)
    assert found.Vu[0] == pytest.approx(left, rel=1e-6)
    assert found.Vu[-1] == pytest.approx(wu * L - left, rel=1e-6)
    assert found.Ms_least[-1] == pytest.approx(-D * L**2 / 8, rel=1e-6)


@given(st.integers(0, 10**6), st.floats(0.0, 0.2))
@settings(max_examples=40, deadline=None)
def test_redistribution_keeps_statics(seed: int, share: float) -> None:
    """End moments shrink by the share, shears stay the slope; the simple moment stays."""
    beam = random_beam(seed, most_spans=3)
    analysis = analyse(beam, MODULUS)
    for number, span in enumerate(beam.spans):
        if span.overhang is not Overhang.NONE:
            continue
        elastic = Effects(analysis=analysis, span=number)
        changed = Effects(analysis=analysis, span=number, shares=(share, share / 2))
        x = np.linspace(0.0, span.length, 11)
        before = np.vstack([part.reshape(-1, 11) for part in elastic.moments(x)])
        after = np.vstack([part.reshape(-1, 11) for part in changed.moments(x)])
        size = np.abs(before).max() + 1.0

        def simple(moments: FloatArray, part: FloatArray = x / span.length) -> FloatArray:
            """Return the moments less those between the ends."""
            return moments - moments[:, :1] * (1 - part) - moments[:, -1:] * part

        assert simple(after) == pytest.approx(simple(before), rel=1e-9, abs=1e-9 * size)
        factors = [1 - share, 1 - share / 2]
        ends = after[:, [0, -1]]
        assert ends == pytest.approx(before[:, [0, -1]] * factors, rel=1e-9, abs=1e-9 * size)
        slopes = np.diff(after - before, axis=1) / np.diff(x)
        for left in (False, True):
            parts = [effects.shears(x, left=left) for effects in (elastic, changed)]
            old, new = (np.vstack([part.reshape(-1, 11) for part in pair]) for pair in parts)
            assert (new - old)[:, 1:] == pytest.approx(slopes, rel=1e-6, abs=1e-8 * size)


@pytest.mark.parametrize("share", [-0.01, 0.21, float("nan")])
def test_redistribution_is_refused(share: float) -> None:
    """A share beyond 6.6.5.3 is refused by name."""
    with pytest.raises(OutOfRangeError, match=r"redistribution: got .*; allowed: 0 to 0\.2"):
        elastic_demands(plain_beam([L]), MODULUS, US, sustained=0.0, redistribution=share)


def test_uplift_is_an_arrangement_too() -> None:
    """Live load of a neighbour lifts an unloaded light span: hogging at its midspan."""
    beam = plain_beam([L, L, L], dead=1.0, live=Q, kind=SupportKind.WALL)
    inner = elastic_demands(beam, MODULUS, US, sustained=0.0)[1]
    middle = len(inner.x) // 2
    assert inner.Mu_least[middle] < 0.0 < inner.Mu_most[middle]
