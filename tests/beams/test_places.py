"""Places that need bars, frames of stirrups, and the strength of bars that run on."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from engine import check_layout, parse_layout, place
from engine.crack_control import largest_spacing
from engine.minimum_steel import EXEMPTION
from optimizer.beams.design import demands_of
from optimizer.beams.frames import Frame, frames, length_unit, per_length, round_up, stirrup_yield
from optimizer.beams.places import Place, largest_moment, places
from optimizer.beams.problem import BeamProblem
from optimizer.beams.strengths import Strengths, hook_spacing, run_spacing
from optimizer.beams.variants import Face
from tests.beams.jobs import beam_of
from tests.engine.builders import INCH, us_layout, us_section

LOADS = 'dead = "1.0 kip/ft"\nlive = "0.8 kip/ft"\n'
COLUMN = 'ends = "columns"\nbelow = { width = "18 in", depth = "18 in", height = "11 ft" }\n'
TWO = (f'length = "24 ft"\n{LOADS}', f'length = "20 ft"\n{LOADS}')


def places_of(problem: BeamProblem) -> list[Place]:
    return places(problem.beam, frames(problem)[0], demands_of(problem))


def test_bottoms_come_first_and_free_ends_have_no_top() -> None:
    """Only supports that hold a moment have a place at the top."""
    found = places_of(beam_of(spans=TWO))
    assert [item.mark for item in found] == ["A-B bottom", "B-C bottom", "B top"]
    held = places_of(beam_of(supports=(COLUMN, "", ""), spans=TWO))
    assert [item.mark for item in held] == ["A-B bottom", "B-C bottom", "A top", "B top"]
    (end,) = [item for item in held if item.mark == "A top"]
    assert end.left is None
    assert end.right is not None
    assert end.sides == (end.right,)


@pytest.mark.parametrize("units", ["us", "si"])
def test_sides_hold_the_moments_of_their_span(units: str) -> None:
    """Every station of a span is on one side of each of its places, with the right moment."""
    spans = None
    if units == "us":
        spans = TWO
    problem = beam_of(
        units,
        spans=spans
        or tuple(f'length = "{n} m"\ndead = "14 kN/m"\nlive = "10 kN/m"\n' for n in (7, 6)),
    )
    demands = demands_of(problem)
    for item in places_of(problem):
        sign = 1.0 if item.face is Face.BOTTOM else -1.0
        assert item.sides
        for side in item.sides:
            demand = demands[side.span]
            start = problem.beam.origins[side.span]
            assert side.u[0] == 0.0
            assert (np.diff(side.u) > 0.0).all()
            assert side.at(float(side.u[-1])) == pytest.approx(
                side.origin + side.direction * side.face
            )
            wanted = demand.Mu_most if sign > 0 else -demand.Mu_least
            at = np.array([side.at(float(u)) - start for u in side.u])
            assert side.demand == pytest.approx(
                np.maximum(np.interp(at, demand.x, wanted), 0.0), abs=1.0
            )
            assert sign * side.section.Mu >= float(side.demand.max()) * (1 - 1e-9)
            assert side.ln == problem.beam.clear_length(side.span)
    bottoms = [item for item in places_of(problem) if item.face is Face.BOTTOM]
    for number, item in enumerate(bottoms):
        assert item.left is not None
        assert item.right is not None
        covered = item.left.face + item.right.face
        assert covered == pytest.approx(problem.beam.clear_length(number))
        assert (item.left.end_of_beam, item.right.end_of_beam) == (number == 0, number == 1)
        assert item.left.support == problem.beam.supports[number]


def test_cantilevers_run_to_their_tip() -> None:
    """The top bars of an end support cover the cantilever, which has no bottom place."""
    problem = beam_of(
        supports=("", ""),
        spans=(
            f'length = "5 ft"\ncantilever = "left"\n{LOADS}',
            f'length = "20 ft"\n{LOADS}',
            f'length = "6 ft"\ncantilever = "right"\n{LOADS}',
        ),
    )
    found = places_of(problem)
    assert [item.mark for item in found] == ["A-B bottom", "A top", "B top"]
    bottom, left, right = found
    assert all(side.end_of_beam for side in bottom.sides)
    assert left.left is not None
    assert right.right is not None
    assert left.left.end_of_beam
    assert right.right.end_of_beam
    assert left.left.face == pytest.approx(60.0 - 9.0)
    assert right.right.face == pytest.approx(72.0 - 9.0)
    assert left.left.at(left.left.face) == pytest.approx(0.0)
    assert right.right.support is None


def test_sides_of_one_section_are_one_section() -> None:
    """Only the larger moment counts where the sections are alike; else each has its own."""
    (top,) = [item for item in places_of(beam_of(spans=TWO)) if item.face is Face.TOP]
    assert len(top.sections) == 1
    assert top.sections[0].demand == max(side.section.demand for side in top.sides)
    deeper = (TWO[0] + 'depth = "26 in"\n', TWO[1])
    (top,) = [item for item in places_of(beam_of(spans=deeper)) if item.face is Face.TOP]
    assert [section.outline.depth for section in top.sections] == [26.0, 24.0]


def test_largest_moment_of_the_beam() -> None:
    """The largest moment is that of all spans, of either sign."""
    demands = demands_of(beam_of(spans=TWO))
    every = [abs(value) for item in demands for value in (*item.Mu_most, *item.Mu_least)]
    assert largest_moment(demands) == pytest.approx(max(every))


def test_frames_have_the_least_legs_and_two_more() -> None:
    """9.7.6.2.2: legs not more than d or 24 in apart; 2014 has no such limit."""
    narrow = beam_of(beam='stirrups = ["#3", "#4"]', spans=TWO)
    assert sorted(frame.label for frame in frames(narrow)) == [
        "#3, 2 legs",
        "#3, 4 legs",
        "#4, 2 legs",
        "#4, 4 legs",
    ]
    wide = tuple(span + 'width = "40 in"\n' for span in TWO)
    assert {frame.legs for frame in frames(beam_of(beam='stirrups = ["#3"]', spans=wide))} == {4, 6}


def test_loops_too_narrow_to_be_bent_are_left_out() -> None:
    """A web of 10 in leaves inner loops of 2.33 in; the bends of a #4 take 3 in, of a #3 2.25."""
    slim = tuple(span + 'width = "10 in"\n' for span in TWO)
    found = frames(beam_of(beam='stirrups = ["#3", "#4"]', spans=slim))
    assert sorted(frame.label for frame in found) == ["#3, 2 legs", "#3, 4 legs", "#4, 2 legs"]


def test_loops_of_four_legs() -> None:
    """The outer loop follows the cover, the inner one takes a third of its width."""
    frame = next(item for item in frames(beam_of(spans=TWO)) if item.legs == 4)
    outer, inner = frame.loops(0)
    assert outer == (14.0 - 3.0, 24.0 - 3.0)
    assert inner == pytest.approx((11.0 / 3.0, 21.0))
    assert frame.leg_area == pytest.approx(4 * frame.stirrup.area)
    two = replace(frame, legs=2)
    assert isinstance(two, Frame)
    assert two.set_length(0, 1.0) < frame.set_length(0, 1.0)


def test_lengths_are_rounded_up() -> None:
    """Lengths go up to the next step, but for what a float is off."""
    assert round_up(10.2, 1.0) == 11.0
    assert round_up(11.0 + 1e-9, 1.0) == 11.0
    assert round_up(51.0, 25.0) == 75.0


def test_cost_per_length_in_both_orders() -> None:
    """A bar costs its mass, or the index of steel and labour."""
    bar = INCH.bar("#5")
    light = beam_of(ranking='by = "lightest"', spans=TWO).ranking
    index = beam_of(spans=TWO).ranking
    assert per_length(bar, light) == bar.mass
    expected = bar.mass * (1 + 0.8 * bar.relative_labour) / 1.8 + 0.10
    assert per_length(bar, index) == pytest.approx(expected)


def test_units_and_stirrup_yield() -> None:
    """20.2.2.4: fyt counts up to 60 ksi or 420 MPa."""
    assert length_unit(beam_of(spans=TWO)) == 12.0
    assert length_unit(beam_of("si", spans=None)) == 1000.0
    assert stirrup_yield(beam_of(spans=TWO)) == 60e3
    strong = beam_of(beam='stirrup_steel = "A615-80"', spans=TWO)
    assert stirrup_yield(strong) == 60e3


def test_strength_of_bars_that_run_on() -> None:
    """2 #8 on their own: a = 1.58 x 60/(0.85 x 4 x 14) = 1.99 in, d = 21.5 in."""
    section = us_section(Mu=1e5)
    found = Strengths(section).of_run(INCH.bar("#8"), 2)
    checked = check_layout(section, us_layout("2 #8"))
    assert found.area == pytest.approx(1.58)
    assert found.d == pytest.approx(21.5)
    a = 1.58 * 60e3 / (0.85 * 4000 * 14)
    assert found.Mn == pytest.approx(1.58 * 60e3 * (21.5 - a / 2))
    assert found.phi_Mn == pytest.approx(checked.phi_Mn)
    assert found.usable == pytest.approx(found.phi_Mn)


def test_bars_below_the_least_steel_count_three_quarters() -> None:
    """9.6.1.3: 4/3 of what is required in place of the least steel."""
    section = us_section(Mu=1e5)
    own = Strengths(section)
    found = own.of_run(INCH.bar("#5"), 2)
    assert found.area < 200 * 14 * found.d / 60e3
    assert found.usable == pytest.approx(EXEMPTION * found.phi_Mn)
    assert own.of_run(INCH.bar("#5"), 2) is found


def test_service_moment_that_a_spacing_bears() -> None:
    """At the moment found the stress is the one that Table 24.3.2 allows the spacing for."""
    section = us_section(Mu=1e5)
    found = Strengths(section).of_run(INCH.bar("#8"), 2)
    moment = found.service_limit(section, 9.0)
    stress = moment * found.stress_per_moment
    assert largest_spacing(section.edition, stress, section.bar_face) == pytest.approx(9.0)
    assert found.service_limit(section, 0.0) == np.inf
    # So far apart that no stress would do, but one: the other branch stands at 12 x 40000/fs.
    assert found.service_limit(section, 30.0) < moment


def test_spacing_of_bars_that_run_on() -> None:
    """Spacing is that of the bars that run on, not of those that stop."""
    layout = us_layout("4 #8 + 2 #6")
    placement = place(us_section(), layout)
    x = placement.layers[0].x
    assert run_spacing(placement, INCH.bar("#8"), 2) == pytest.approx(x[-1] - x[0])
    assert run_spacing(placement, INCH.bar("#8"), 4) == pytest.approx(max(x[1] - x[0], x[4] - x[1]))
    odd = place(us_section(), us_layout("5 #8"))
    own = odd.layers[0].x
    assert run_spacing(odd, INCH.bar("#8"), 3) == pytest.approx(own[2] - own[0])


def test_spacing_of_hooks() -> None:
    """Hooks in two layers have no spacing: they lie above each other."""
    section = us_section()
    one = place(section, parse_layout(["3 #8"], INCH))
    assert hook_spacing(one) == pytest.approx(one.layers[0].x[1] - one.layers[0].x[0])
    assert hook_spacing(place(section, parse_layout(["3 #8", "2 #8"], INCH))) == 0.0
