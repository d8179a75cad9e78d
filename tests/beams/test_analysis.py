"""Elastic analysis against printed formulas, a general-purpose frame library and statics."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from Pynite import FEModel3D

from engine.beams.analysis import Response, analyse
from engine.beams.spans import (
    FIXED,
    Beam,
    LoadCase,
    Overhang,
    PointLoad,
    Span,
    Support,
    SupportKind,
    UniformLoad,
)
from engine.errors import OutOfRangeError
from engine.outlines import FloatArray
from tests.beams.random_beams import MODULUS, plain_beam, random_beam

L, W, P = 240.0, 100.0, 5e3  # span [in], load [lbf/in], force [lbf]


def with_force(beam: Beam, span: int, at: float) -> Beam:
    """Put a dead force P on a span."""
    spans = list(beam.spans)
    force = PointLoad(case=LoadCase.DEAD, force=P, at=at)
    spans[span] = replace(spans[span], loads=(*spans[span].loads, force))
    return replace(beam, spans=tuple(spans))


def dead(beam: Beam) -> Response:
    """Return the response to dead load."""
    return analyse(beam, MODULUS).dead


def value(found: FloatArray) -> float:
    """Return a single number."""
    return float(found)


# ------------------------------------------------------------------- printed formulas


@pytest.mark.parametrize(("load", "printed"), [(2.8, 134.4), (7.9, 379.2)])
def test_fixed_end_moments_of_mccormac(load: float, printed: float) -> None:
    """McCormac & Brown, 9th ed., Ex. 14.2: spans of 24 ft, moments of held ends in ft-kip."""
    beam = plain_beam([24 * 12.0], dead=load * 1000 / 12, stiffness=(FIXED, FIXED))
    ends = dead(beam).moment(0, [0.0, 288.0]) / 12_000
    assert ends == pytest.approx([-printed, -printed], rel=1e-12)


def test_inertia_of_mccormac() -> None:
    """The same example takes I of a 12 x 24 in web, doubled for its flange, as 27,648 in^4."""
    assert 2 * plain_beam([288.0]).spans[0].gross_inertia == pytest.approx(27_648)


def test_simple_beam() -> None:
    """W L^2/8, W L/2 and 5 W L^4/384: AISC Manual, Table 3-23, case 1 (from memory)."""
    found = dead(plain_beam([L], dead=W))
    assert value(found.moment(0, L / 2)) == pytest.approx(W * L**2 / 8)
    assert value(found.deflection(0, L / 2)) == pytest.approx(5 * W * L**4 / 384)
    assert found.shear(0, [0.0, L]) == pytest.approx([W * L / 2, -W * L / 2])
    inertia = found.beam.spans[0].gross_inertia
    assert found.rotation(0) == pytest.approx(W * L**3 / 24 / (MODULUS * inertia))
    assert found.rotation(1) == pytest.approx(-found.rotation(0))


def test_simple_beam_with_a_force() -> None:
    """P a b/L and P a^2 b^2/(3 L) under the force: AISC Table 3-23, case 8 (from memory)."""
    a, b = 90.0, L - 90.0
    found = dead(with_force(plain_beam([L]), 0, a))
    assert value(found.moment(0, a)) == pytest.approx(P * a * b / L)
    assert value(found.deflection(0, a)) == pytest.approx(P * a**2 * b**2 / (3 * L))
    assert value(found.shear(0, a, left=True)) == pytest.approx(P * b / L)
    assert value(found.shear(0, a)) == pytest.approx(-P * a / L)
    assert value(found.shear_size(0, a)) == pytest.approx(P * b / L)


def test_held_beam() -> None:
    """W L^2/12 and /24, W L^4/384; P a b^2/L^2: AISC cases 15 and 17 (from memory)."""
    held = plain_beam([L], dead=W, stiffness=(FIXED, FIXED))
    found = dead(held)
    sixth = W * L**2 / 24
    assert found.moment(0, [0.0, L / 2, L]) == pytest.approx([-2 * sixth, sixth, -2 * sixth])
    assert value(found.deflection(0, L / 2)) == pytest.approx(W * L**4 / 384)
    a, b = 80.0, L - 80.0
    forced = dead(with_force(plain_beam([L], stiffness=(FIXED, FIXED)), 0, a))
    ends = [-P * a * b**2 / L**2, -P * a**2 * b / L**2]
    assert forced.moment(0, [0.0, L]) == pytest.approx(ends)
    assert value(forced.deflection(0, a)) == pytest.approx(P * a**3 * b**3 / (3 * L**3))


def test_propped_cantilever() -> None:
    """3/8 and 5/8 W L, W L^2/8, 9/128 W L^2, W L^4/185: AISC case 12 (from memory)."""
    found = dead(plain_beam([L], dead=W, stiffness=(0.0, FIXED)))
    assert [found.reaction(0), found.reaction(1)] == pytest.approx([3 * W * L / 8, 5 * W * L / 8])
    peak = [9 * W * L**2 / 128, -W * L**2 / 8]
    assert found.moment(0, [3 * L / 8, L]) == pytest.approx(peak)
    assert value(found.deflection(0, 0.4215 * L)) == pytest.approx(W * L**4 / 185, rel=2e-3)


@pytest.mark.parametrize(
    ("spans", "reactions", "moment"),
    [
        (2, [0.375, 1.25, 0.375], 0.125),
        (3, [0.4, 1.1, 1.1, 0.4], 0.1),
        (4, [11 / 28, 32 / 28, 26 / 28, 32 / 28, 11 / 28], 3 / 28),
    ],
)
def test_equal_spans(spans: int, reactions: list[float], moment: float) -> None:
    """Continuous beams of equal spans: AISC Tables 3-22c and 3-23 (from memory)."""
    found = dead(plain_beam([L] * spans, dead=W))
    given = [found.reaction(support) / (W * L) for support in range(spans + 1)]
    assert given == pytest.approx(reactions)
    assert value(found.moment(0, L)) == pytest.approx(-moment * W * L**2)


def test_cantilever_of_its_own() -> None:
    """W a^4/8 and P a^3/3 at the tip, at both ends: AISC cases 19 and 22 (from memory)."""
    a = 60.0
    beam = plain_beam([a, L, a], dead=W, stiffness=(FIXED, FIXED), hangs=(True, True))
    found = dead(with_force(with_force(beam, 0, 0.0), 2, a))
    tip = W * a**4 / 8 + P * a**3 / 3
    assert value(found.deflection(0, 0.0)) == pytest.approx(tip)
    assert value(found.deflection(2, a)) == pytest.approx(tip)
    assert value(found.deflection(0, a)) == pytest.approx(0.0, abs=1e-9 * tip)
    assert value(found.deflection(2, 0.0)) == 0.0
    assert [found.root_rotation(0), found.root_rotation(2)] == [0.0, 0.0]
    assert value(found.shear(2, a)) == pytest.approx(P)
    assert value(found.shear_size(0, 0.0)) == pytest.approx(P)


@pytest.mark.parametrize("left", [True, False])
def test_beam_overhanging_one_support(left: bool) -> None:
    """P a^2 (L + a)/3 at the tip of an overhang: AISC case 26 (from memory)."""
    a = 70.0
    lengths, span, at = ([a, L], 0, 0.0) if left else ([L, a], 1, a)
    beam = with_force(plain_beam(lengths, hangs=(left, not left)), span, at)
    found = dead(beam)
    tip = value(found.deflection(span, at)) + a * found.root_rotation(span)
    assert tip == pytest.approx(P * a**2 * (L + a) / 3)
    inner, near, far = (1, 0, 1) if left else (0, 1, 0)
    assert found.reaction(near) == pytest.approx(P * (L + a) / L)
    assert found.reaction(far) == pytest.approx(-P * a / L)
    lift = -P * a * L**2 / (9 * math.sqrt(3))
    place = L * (1 - 1 / math.sqrt(3)) if left else L / math.sqrt(3)
    assert value(found.deflection(inner, place)) == pytest.approx(lift)


def test_support_that_holds_a_little() -> None:
    """A held moment W L^2/12 shrinks by the springs' share s/(s + 2 E I/L), slope deflection."""
    spring = 3e8
    found = dead(plain_beam([L], dead=W, stiffness=(spring, spring)))
    beam = 2 * MODULUS * found.beam.spans[0].gross_inertia / L
    expected = -W * L**2 / 12 * spring / (spring + beam)
    assert found.moment(0, [0.0, L]) == pytest.approx([expected, expected])


def test_live_load_stands_apart() -> None:
    """Each span's live load has a response of its own; a span without has one of zeros."""
    beam = plain_beam([L, L], live=W)
    beam = replace(beam, spans=(beam.spans[0], replace(beam.spans[1], loads=())))
    found = analyse(beam, MODULUS)
    assert value(found.live[0].moment(0, L)) == pytest.approx(-W * L**2 / 16)
    x = np.linspace(0.0, L, 9)
    for response in (found.live[1], found.dead):
        for span in range(2):
            assert not response.moment(span, x).any()
            assert not response.shear_size(span, x).any()
            assert not response.deflection(span, x).any()


def test_loads_right_over_supports_go_into_them() -> None:
    """A force over a support changes its reaction and nothing else."""
    plain = plain_beam([L, L], dead=W)
    for span, at, support in ((0, 0.0, 0), (0, L, 1), (1, 0.0, 1), (1, L, 2)):
        before, after = dead(plain), dead(with_force(plain, span, at))
        assert after.reaction(support) == pytest.approx(before.reaction(support) + P)
        x = np.linspace(0.0, L, 13)
        for number in range(2):
            assert after.moment(number, x) == pytest.approx(before.moment(number, x), rel=1e-9)
            assert after.shear(number, x) == pytest.approx(before.shear(number, x), rel=1e-9)
            assert after.shear_size(number, x) == pytest.approx(before.shear_size(number, x))


@pytest.mark.parametrize("modulus", [0.0, -1.0, math.inf, math.nan])
def test_modulus_is_refused(modulus: float) -> None:
    """A modulus that is none is refused by name."""
    with pytest.raises(
        OutOfRangeError, match=r"modulus: got .*; allowed: a finite modulus above 0"
    ):
        analyse(plain_beam([L]), modulus)


@pytest.mark.parametrize("stiffness", [-1.0, math.nan])
def test_stiffness_is_refused(stiffness: float) -> None:
    """A support cannot push a rotation on."""
    with pytest.raises(OutOfRangeError, match=r"stiffness: 1: got .*; allowed: 0 and above"):
        analyse(plain_beam([L], stiffness=(0.0, stiffness)), MODULUS)


def test_root_rotation_is_of_cantilevers() -> None:
    """Spans between supports have none."""
    with pytest.raises(OutOfRangeError, match="span: got span 0; allowed: cantilevers"):
        dead(plain_beam([L])).root_rotation(0)


# ------------------------------------------------------------------- against a frame library


def frame(beam: Beam) -> FEModel3D:
    """Build the same beam as a plane frame with one combination for each response."""
    model = FEModel3D()
    model.add_material("concrete", MODULUS, MODULUS / 2.4, 0.2, 0.0)
    places = [*beam.origins, beam.origins[-1] + beam.spans[-1].length]
    for joint, place in enumerate(places):
        model.add_node(f"N{joint}", place, 0.0, 0.0)
    for index, support in enumerate(beam.supports):
        node = f"N{index + beam.first_support}"
        held = support.stiffness == FIXED
        model.def_support(node, True, True, True, True, True, held)
        if 0.0 < support.stiffness < FIXED:
            model.def_support_spring(node, "RZ", support.stiffness)
    for number, span in enumerate(beam.spans):
        inertia = span.gross_inertia
        model.add_section(f"S{number}", span.outline.area, inertia, inertia, inertia)
        member = model.add_member(
            f"M{number}", f"N{number}", f"N{number + 1}", "concrete", f"S{number}"
        )
        for load in span.loads:
            case = "D" if load.case is LoadCase.DEAD else f"L{number}"
            if isinstance(load, PointLoad):
                model.add_member_pt_load(member, "Fy", -load.force, load.at, case)
            else:
                size = -load.intensity
                model.add_member_dist_load(member, "Fy", size, size, load.start, load.end, case)
    for case in ("D", *(f"L{number}" for number in range(len(beam.spans)))):
        model.add_load_combo(case, {case: 1.0})
    model.analyze(check_statics=False)
    return model


@pytest.mark.parametrize("seed", range(60))
def test_against_a_frame_library(seed: int) -> None:
    """PyNiteFEA finds the same moments, shears, reactions, rotations and deflections."""
    beam = random_beam(seed)
    model, found = frame(beam), analyse(beam, MODULUS)
    responses = {"D": found.dead} | {f"L{n}": live for n, live in enumerate(found.live)}
    for case, response in responses.items():
        ours: dict[str, list[float]] = {}
        theirs: dict[str, list[float]] = {}

        def note(
            what: str,
            mine: float,
            other: float,
            ours: dict[str, list[float]] = ours,
            theirs: dict[str, list[float]] = theirs,
        ) -> None:
            ours.setdefault(what, []).append(mine)
            theirs.setdefault(what, []).append(float(other))

        for index in range(len(beam.supports)):
            node = model.nodes[f"N{index + beam.first_support}"]
            note("reaction", response.reaction(index), node.RxnFY[case])
            note("rotation", response.rotation(index), -node.RZ[case])
        for number, span in enumerate(beam.spans):
            member = model.members[f"M{number}"]
            x = np.linspace(0.0, span.length, 14)
            moments, shears = response.moment(number, x), response.shear(number, x)
            moved = response.deflection(number, x) / response.stiffness[number]
            if span.overhang is not Overhang.NONE:
                left = span.overhang is Overhang.LEFT
                turned = response.root_rotation(number)
                turned /= response.stiffness[number + 1 if left else number - 1]
                moved = moved + turned * (span.length - x if left else x)
            for place, moment, shear, move in zip(x, moments, shears, moved, strict=True):
                note("moment", moment, -member.moment("Mz", place, case))
                note("shear", shear, member.shear("Fy", place, case))
                note("deflection", move, -member.deflection("dy", place, case))
        assert set(ours) == {"reaction", "rotation", "moment", "shear", "deflection"}
        for what, values in ours.items():
            size = max(abs(value) for value in theirs[what])
            assert values == pytest.approx(theirs[what], rel=1e-6, abs=1e-6 * size), what


# ------------------------------------------------------------------- statics


def total_load(span: Span, case: LoadCase) -> tuple[float, float]:
    """Return the sum of a span's loads and their moment about its left end."""
    force = moment = 0.0
    for load in span.loads:
        if load.case is not case:
            continue
        if isinstance(load, UniformLoad):
            size = load.intensity * (load.end - load.start)
            force, moment = force + size, moment + size * (load.start + load.end) / 2
        else:
            force, moment = force + load.force, moment + load.force * load.at
    return force, moment


@given(st.integers(1000, 10**6))
@settings(max_examples=60, deadline=None)
def test_equilibrium_of_the_whole(seed: int) -> None:
    """Reactions and the supports' moments balance the loads, forces and moments alike."""
    beam = random_beam(seed)
    response = dead(beam)
    forces = moments = 0.0
    for span, origin in zip(beam.spans, beam.origins, strict=True):
        force, moment = total_load(span, LoadCase.DEAD)
        forces, moments = forces + force, moments + moment + force * origin
    size = max(forces, 1.0)
    pushed = about = 0.0
    for index in range(len(beam.supports)):
        left, right = beam.left_span(index), beam.right_span(index)
        before = 0.0 if left is None else value(response.moment(left, beam.spans[left].length))
        after = 0.0 if right is None else value(response.moment(right, 0.0))
        place = 0.0 if right is None else beam.origins[right]
        if left is not None:
            place = beam.origins[left] + beam.spans[left].length
        pushed += response.reaction(index)
        about += response.reaction(index) * place + (before - after)
        if beam.supports[index].stiffness < FIXED:
            spring = beam.supports[index].stiffness * response.rotation(index)
            assert before - after == pytest.approx(spring, rel=1e-8, abs=1e-8 * size * 100)
    assert pushed == pytest.approx(forces, rel=1e-9, abs=1e-9)
    assert about == pytest.approx(moments, rel=1e-9, abs=1e-7)


@given(st.integers(1000, 10**6), st.floats(0.0, 1.0))
@settings(max_examples=60, deadline=None)
def test_shear_is_the_slope_of_the_moment(seed: int, part: float) -> None:
    """Between loads, the moment grows by the shear halfway, as both are closed forms."""
    beam = random_beam(seed, most_spans=3)
    response = dead(beam)
    for number, span in enumerate(beam.spans):
        breaks = {0.0, span.length}
        for load in span.loads:
            at = (load.at,) if isinstance(load, PointLoad) else (load.start, load.end)
            breaks |= set(at)
        edges = np.array(sorted(breaks))
        index = min(int(part * (len(edges) - 1)), len(edges) - 2)
        low, high = edges[index], edges[index + 1]
        start, end = response.moment(number, [low, high])
        slope = value(response.shear(number, (low + high) / 2))
        size = np.abs(response.moment(number, edges)).max() + 1.0
        assert end - start == pytest.approx(slope * (high - low), rel=1e-9, abs=1e-9 * size)


def test_support_kinds_do_not_matter() -> None:
    """The analysis asks a support for its stiffness alone."""
    beams = [plain_beam([L, L], dead=W, kind=kind) for kind in SupportKind]
    moments = [value(dead(beam).moment(0, 100.0)) for beam in beams]
    assert moments[0] == moments[1] == moments[2]
    assert isinstance(beams[0].supports[0], Support)
