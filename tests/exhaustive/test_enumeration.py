"""The rules that decide which layouts pass, their score and their order."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from tests.exhaustive.cases import Case, Found
from tests.exhaustive.enumeration import (
    crack_spacing,
    enumerate_layouts,
    fewest_bars,
    lightest,
    minimum_steel,
    ranked,
)
from tests.exhaustive.samples import si_case, sizes, us_case

VARIED = [
    us_case(sizes=sizes("#6", "#7", "#8"), web=14.0, strips=((14.0, 24.0),), Mu=2.4e6),
    us_case(
        sizes=sizes("#5", "#6", "#7"),
        web=16.0,
        depth=30.0,
        strips=((48.0, 5.0), (16.0, 25.0)),
        tension_width=16.0,
        max_layers=3,
        Mu=4.5e6,
        Ms=3.0e6,
    ),
    us_case(
        sizes=sizes("#8", "#9"),
        edition="14",
        tension_controlled=False,
        Mu=2.6e6,
        opposite=((0.75, 0.88, 2.25),),
        count_opposite=True,
        opposite_height=0.75,
    ),
    si_case(sizes=sizes("19", "22", "25"), Mu=250e6, max_layers=3),
]


def find(case: Case, *counts: tuple[tuple[str, int], ...]) -> Found | None:
    """Return the named layout if it passes."""
    return next((found for found in enumerate_layouts(case) if found.counts == counts), None)


@pytest.mark.parametrize("case", VARIED)
def test_every_layout_found_keeps_the_simple_rules(case: Case) -> None:
    """Counts, parity, order, sizes, area, score, strength and strain, each stated anew."""
    found = enumerate_layouts(case)
    assert len(found) > 3
    assert len({layout.counts for layout in found}) == len(found)
    by_name = {size.name: size for size in case.sizes}
    limit = 0.004 if not case.tension_controlled else 0.005
    for layout in found:
        totals = [sum(n for _, n in layer) for layer in layout.counts]
        assert min(totals) >= 2
        assert totals == sorted(totals, reverse=True)
        assert len(totals) == layout.layers <= case.max_layers
        odd_started = [total % 2 for total in totals]
        assert odd_started == sorted(odd_started, reverse=True)
        for layer in layout.counts:
            diameters = [by_name[name].db for name, _ in layer]
            assert diameters == sorted(diameters, reverse=True)
            assert sum(n % 2 for _, n in layer) <= 1
            assert layer[0][1] >= 2
        used = {name for layer in layout.counts for name, _ in layer}
        positions = {by_name[name].position for name in used}
        assert len(used) == layout.sizes <= case.max_sizes
        assert max(positions) - min(positions) <= case.size_steps
        largest = max(by_name[name].db for name in used)
        assert by_name[layout.counts[0][0][0]].db == largest
        assert layout.smallest_gap >= (25 if case.si else 1) - 1e-9
        assert layout.phiMn >= case.Mu * (1 - 1e-9)
        assert layout.eps_t >= limit * (1 - 1e-9)
        bars = [(by_name[name], n) for layer in layout.counts for name, n in layer]
        assert layout.As == pytest.approx(sum(size.area * n for size, n in bars))
        assert layout.mass == pytest.approx(sum(size.mass * n for size, n in bars))
        assert layout.bars == sum(totals)
        assert layout.score == pytest.approx(sum(layout.terms.values()))


@pytest.mark.parametrize("case", VARIED)
def test_a_larger_moment_only_takes_layouts_away(case: Case) -> None:
    """What carries 1.2 Mu carries Mu too, and some of what carries Mu does not carry 1.2 Mu."""
    base = {layout.counts for layout in enumerate_layouts(case)}
    more = {layout.counts for layout in enumerate_layouts(replace(case, Mu=1.2 * case.Mu))}
    assert more < base


def test_strength_decides_at_the_moment_itself() -> None:
    """A layout passes with Mu equal to its phi Mn and fails a millionth above."""
    three = (("#8", 3),)
    base = find(us_case(), three)
    assert base is not None
    a = 2.37 * 60_000 / 34_000
    assert base.phiMn == pytest.approx(0.9 * 2.37 * 60_000 * (24 - 2.375 - a / 2), rel=1e-9)
    assert find(us_case(Mu=base.phiMn), three) is not None
    assert find(us_case(Mu=base.phiMn * (1 + 1e-6)), three) is None


def test_strength_and_strain_of_two_layers() -> None:
    """3 #8 under 2 #8, all at yield: centroid 33.625 - 2 * 2/5 in, strain taken at layer 1."""
    found = find(us_case(depth=36.0, strips=((10.0, 36.0),)), (("#8", 3),), (("#8", 2),))
    assert found is not None
    a = 3.95 * 60_000 / 34_000
    assert found.phiMn == pytest.approx(0.9 * 3.95 * 60_000 * (32.825 - a / 2), rel=1e-9)
    assert found.eps_t == pytest.approx(0.003 * (33.625 * 0.85 / a - 1), rel=1e-9)


def test_strain_is_taken_at_the_centroid_of_a_mixed_layer() -> None:
    """2 #8 and 1 #6 on the stirrup: dt = 24 - 1.875 - (1.58 * 0.5 + 0.44 * 0.375)/2.02 in."""
    found = find(us_case(sizes=sizes("#6", "#8")), (("#8", 2), ("#6", 1)))
    assert found is not None
    a = 2.02 * 60_000 / 34_000
    dt = 22.125 - (1.58 * 0.5 + 0.44 * 0.375) / 2.02
    assert found.eps_t == pytest.approx(0.003 * (dt * 0.85 / a - 1), rel=1e-9)


def test_strain_limit_of_each_edition() -> None:
    """3 #11 in 10.9 x 24 in of 4000 psi: c = 8.91 in at dt = 21.42 in, eps_t = 0.0042."""
    three = (("#11", 3),)
    web = {"web": 10.9, "strips": ((10.9, 24.0),), "tension_width": 10.9, "aggregate": 0.5}
    base = us_case(sizes=sizes("#11"), edition="14", tension_controlled=False, **web)
    found = find(base, three)
    assert found is not None
    c = 4.68 * 60_000 / (0.85 * 4000 * 10.9 * 0.85)
    assert found.eps_t == pytest.approx(0.003 * (24 - 1.875 - 0.705 - c) / c, rel=1e-9)
    assert 0.004 < found.eps_t < 0.005
    assert find(replace(base, tension_controlled=True), three) is None
    assert find(replace(base, edition="19", tension_controlled=True), three) is None


def test_minimum_steel_or_a_third_more_than_needed() -> None:
    """2 #5 (0.62 in^2) are below 200 * 14 * 27.8/60,000 = 1.30 in^2 in a 14 x 30 in web.

    They pass while 3/4 of them carry Mu (9.6.1.3) and not once only the whole does.
    """
    two = (("#5", 2),)
    base = us_case(
        sizes=sizes("#5"), web=14.0, strips=((14.0, 30.0),), depth=30.0, tension_width=14.0
    )
    found = find(base, two)
    assert found is not None
    d, area = 30 - 1.875 - 0.3125, 0.75 * 0.62
    reduced = 0.9 * area * 60_000 * (d - area * 60_000 / (0.85 * 4000 * 14) / 2)
    assert find(replace(base, Mu=reduced), two) is not None
    assert find(replace(base, Mu=reduced * (1 + 1e-6)), two) is None
    assert reduced < 0.8 * found.phiMn


@pytest.mark.parametrize(
    ("changes", "expected"),
    [
        ({}, 200 * 10 * 20 / 60_000),
        ({"fc": 5000.0}, 3 * 5000**0.5 * 10 * 20 / 60_000),
        ({"fy": 100_000.0}, 200 * 10 * 20 / 80_000),
        ({"fy": 100_000.0, "edition": "14"}, 200 * 10 * 20 / 100_000),
        ({"determinate": True}, 200 * 10 * 20 / 60_000),
        # Determinate with the flange in tension: the lesser of its width and twice the web.
        (
            {"determinate": True, "flange_in_tension": True, "tension_width": 15.0},
            200 * 15 * 20 / 60_000,
        ),
        (
            {"determinate": True, "flange_in_tension": True, "tension_width": 60.0},
            200 * 20 * 20 / 60_000,
        ),
        ({"flange_in_tension": True, "tension_width": 60.0}, 200 * 10 * 20 / 60_000),
    ],
)
def test_minimum_area(changes: dict[str, object], expected: float) -> None:
    """ACI 318-19, 9.6.1.2, with its cap of fy and its rule for flanges in tension."""
    assert minimum_steel(us_case(**changes), np.array([20.0]))[0] == pytest.approx(expected)


def test_minimum_area_in_si() -> None:
    """ACI 318M-19, 9.6.1.2: 1.4 bw d/fy governs below 31 MPa, 0.25 sqrt(fc) above."""
    d = np.array([500.0])
    assert minimum_steel(si_case(), d)[0] == pytest.approx(1.4 * 300 * 500 / 420)
    assert minimum_steel(si_case(fc=49.0), d)[0] == pytest.approx(1.75 * 300 * 500 / 420)
    assert minimum_steel(si_case(fy=690.0), d)[0] == pytest.approx(1.4 * 300 * 500 / 550)


def test_printed_crack_spacing() -> None:
    """McCormac & Brown, 9th ed., Ex. 6.4: fy = 420 MPa, cc = 60.65 mm, s = 228 mm, cap 300 mm."""
    case = si_case(cover=40.0, ds=20.65)
    assert crack_spacing(case, np.array([280.0]))[0] == pytest.approx(228, abs=0.5)
    assert crack_spacing(si_case(cover=20.0), np.array([280.0]))[0] == pytest.approx(300, abs=0.5)


def test_crack_spacing_shuts_out_wide_pairs() -> None:
    """At fs = 40 ksi and cc = 1.875 in bars may be 15 - 4.6875 = 10.3125 in apart.

    Two corner bars are web - 5.25 in apart: 15.5625 in is the widest web for two.
    """
    two = (("#8", 2),)
    for web, passes in ((15.5625, True), (15.57, False)):
        assert (find(us_case(web=web, strips=((web, 24.0),)), two) is not None) == passes
    # A service moment with low stress lets them: the cap 12 * 40,000/fs grows too.
    wide = us_case(web=15.57, strips=((15.57, 24.0),), Ms=2e5)
    assert find(wide, two) is not None


def test_crack_spacing_looks_at_the_widest_neighbours() -> None:
    """2 #8 + 3 #6 in 16 in: 2.75 in between #8 and #6, 2.625 in between #6 and #6.

    With fs = 2/3 fy the limit 600,000/fs - 4.6875 in is set a little above and below 2.75 in.
    """
    mixed = (("#8", 2), ("#6", 3))
    base = us_case(sizes=sizes("#6", "#8"), web=16.0, depth=36.0, strips=((16.0, 36.0),))
    for limit, passes in ((2.76, True), (2.74, False)):
        fy = 1.5 * 600_000 / (limit + 4.6875)
        assert (find(replace(base, fy=fy), mixed) is not None) == passes


@pytest.mark.parametrize(
    ("changes", "names"),
    [
        ({}, {"#5", "#6"}),
        ({"cover": 1.4}, set()),
        # 1.5 + 0.375 in is less than the 2 in that #6 and larger need in weather.
        ({"exposure": "weather"}, {"#5"}),
        ({"exposure": "weather", "cover": 1.625}, {"#5", "#6"}),
        ({"exposure": "weather", "ds": 0.75}, set()),
        ({"exposure": "ground"}, set()),
        ({"exposure": "ground", "cover": 3.0}, {"#5", "#6"}),
    ],
)
def test_cover_by_exposure(changes: dict[str, object], names: set[str]) -> None:
    """ACI 318-19, Table 20.5.1.3.1, for stirrup and main bars each by its own size."""
    case = us_case(web=14.0, strips=((14.0, 24.0),), sizes=sizes("#5", "#6"), **changes)
    found = enumerate_layouts(case)
    assert {name for layout in found for layer in layout.counts for name, _ in layer} == names


def test_score_by_hand() -> None:
    """3 #8 under 2 #6 in a 10 in web, every term worked out on paper."""
    found = find(us_case(sizes=sizes("#6", "#8")), (("#8", 3),), (("#6", 2),))
    assert found is not None
    assert found.terms == pytest.approx(
        {
            "steel": 3 * 2.67 + 2 * 1.502 * (1 + 0.8 * 1.17) / 1.8,
            "bars": 0.5,
            "layers": 0.6,
            "sizes": 0.4,
            # Layer 1: 1.375 of 1.5 in clear; layer 2: 4 in.
            "tight": 0.1 * 3 * (1 - 1.375 / 1.5),
        },
        abs=1e-12,
    )
    assert found.mass == pytest.approx(11.014)
    assert found.smallest_gap == pytest.approx(1.375)
    assert found.As == pytest.approx(3.25)


def made(name: str, bars: int, layers: int, mass: float, score: float, gap: float = 2.0) -> Found:
    """Return a record with what the rankings read; 2 bars in each upper layer."""
    per_layer = [bars - 2 * (layers - 1), *[2] * (layers - 1)]
    return Found(
        counts=tuple(((name, count),) for count in per_layer),
        mass=mass,
        score=score,
        terms={},
        bars=bars,
        layers=layers,
        sizes=1,
        smallest_gap=gap,
        phiMn=1.0,
        eps_t=0.01,
        As=1.0,
        tie=tuple(((-int(name[1:]), -count),) for count in per_layer),
    )


def test_rankings_and_their_ties() -> None:
    """Score, then mass, bars, layers, sizes, larger gap, larger bars; digits past six are noise."""
    a = made("#8", 4, 1, 10.0, 12.0)
    b = made("#7", 5, 1, 9.5, 12.0 + 1e-9)
    c = made("#6", 6, 1, 9.0, 13.0)
    d = made("#6", 6, 2, 9.0 - 1e-9, 13.5)
    e = made("#6", 6, 2, 9.0, 13.5, gap=2.5)
    every = [e, d, c, b, a]
    assert ranked(every, "practical", 10, None) == [b, a, c, e, d]
    assert ranked(every, "lightest", 10, None) == [c, e, d, b, a]
    assert lightest(every) is c
    assert fewest_bars(every) is a
    larger = replace(d, counts=(), tie=(((-9, -4),), ((-9, -2),)))
    assert lightest([d, larger]) is larger


def test_ranking_keeps_a_few_of_each_pattern() -> None:
    """One of each largest size and number of layers, and no more than `keep` in all."""
    a = made("#8", 4, 1, 10.0, 12.0)
    b = made("#8", 5, 1, 12.5, 13.0)
    c = made("#8", 6, 2, 15.0, 14.0)
    d = made("#7", 6, 1, 12.0, 15.0)
    every = [a, b, c, d]
    assert ranked(every, "practical", 10, 1) == [a, c, d]
    assert ranked(every, "practical", 10, 2) == every
    assert ranked(every, "practical", 2, 1) == [a, c]
    assert ranked(every, "lightest", 3, None) == [a, d, b]


def test_nothing_fits() -> None:
    """A web too narrow for two bars has no layout, and no best one."""
    found = enumerate_layouts(us_case(web=6.0, strips=((6.0, 24.0),)))
    assert found == []
    assert lightest(found) is None
    assert fewest_bars(found) is None
    assert ranked(found, "practical", 10, 3) == []


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"depth": 25.0}, "strips: heights add up to 24, must be the depth 25"),
        ({"edition": "11"}, "edition: '11'"),
        ({"tension_controlled": False}, "tension_controlled"),
        ({"Mu": 0.0}, "Mu: 0"),
    ],
)
def test_contradictory_case_is_refused(changes: dict[str, object], words: str) -> None:
    """A comparison on a case that cannot be meant would prove nothing."""
    with pytest.raises(ValueError, match=words):
        us_case(**changes)
