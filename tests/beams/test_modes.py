"""Arrangements of the top face: through bars with laps, and hangers between long bars."""

from __future__ import annotations

from dataclasses import replace

import pytest

from optimizer.beams.builder import Builder, cut_length
from optimizer.beams.design import demands_of
from optimizer.beams.frames import frames
from optimizer.beams.modes import ModeBars, ModeBuilder
from optimizer.beams.places import places
from optimizer.beams.plans import ShearOfSpan
from optimizer.beams.problem import BeamProblem
from optimizer.beams.variants import Face, Role, TopKind
from tests.beams.jobs import beam_of

LOADS = 'dead = "1.0 kip/ft"\nlive = "0.8 kip/ft"\n'
COLUMN = 'ends = "columns"\nbelow = { width = "18 in", depth = "18 in", height = "11 ft" }\n'
TWO = (f'length = "24 ft"\n{LOADS}', f'length = "24 ft"\n{LOADS}')


def builder_of(problem: BeamProblem) -> ModeBuilder:
    demands = demands_of(problem)
    frame = frames(problem)[0]
    shears = [ShearOfSpan(problem, frame, index, item) for index, item in enumerate(demands)]
    tops = [item for item in places(problem.beam, frame, demands) if item.face is Face.TOP]
    return ModeBuilder(Builder(problem, frame, shears), tops)


def labels(modes: list[ModeBars]) -> list[str]:
    return [item.mode.label for item in modes]


def test_through_bars_and_hangers_of_an_interior_beam() -> None:
    """Each size makes through bars in stock length, and each hanger size a mode."""
    problem = beam_of(
        bars='sizes = ["#6", "#8"]',
        beam='hangers = ["#4"]\nstock = ["60 ft"]',
        spans=TWO,
    )
    found = builder_of(problem).modes()
    assert labels(found) == ["#6 through", "#8 through", "#4 hangers"]
    for item in found[:2]:
        (piece,) = item.pieces
        assert piece.role is Role.THROUGH
        assert piece.count == frames(problem)[0].legs
        assert cut_length(problem, piece) <= 720.0
    assert found[2].pieces == ()
    assert found[2].cost > 0.0


def test_a_perimeter_beam_has_no_hangers() -> None:
    """9.7.7.1: continuous top bars."""
    problem = beam_of(
        bars='sizes = ["#6"]', beam='edge = "perimeter"\nstock = ["60 ft"]', spans=TWO
    )
    assert {item.mode.kind for item in builder_of(problem).modes()} == {TopKind.THROUGH}


def test_through_bars_longer_than_stock_are_lapped_in_the_middle_of_spans() -> None:
    """Two bars within stock lap by a Class B length at midspan."""
    problem = beam_of(bars='sizes = ["#6"]', beam='stock = ["40 ft"]', spans=TWO)
    (through, *_) = builder_of(problem).modes()
    first, second = through.pieces
    assert cut_length(problem, first) <= 480.0
    assert cut_length(problem, second) <= 480.0
    lap = first.end - second.start
    middle = (first.end + second.start) / 2.0
    assert lap >= 1.3 * 1.3 * 60e3 * 0.75 / (25.0 * 4000**0.5) - 1e-6
    assert min(abs(middle - 144.0), abs(middle - 432.0)) <= 1.0


def test_no_through_bars_where_stock_reaches_no_lap() -> None:
    """Stock too short for a lap at midspan leaves hangers."""
    problem = beam_of(bars='sizes = ["#6"]', beam='stock = ["12 ft"]', spans=TWO)
    assert labels(builder_of(problem).modes()) == ["#4 hangers", "#5 hangers"]


def test_no_through_bars_of_sizes_that_may_not_be_lapped() -> None:
    """25.5.1.1: not above No. 11."""
    problem = beam_of(bars='sizes = ["#11", "#14"]', beam='stock = ["40 ft"]', spans=TWO)
    assert "#14 through" not in labels(builder_of(problem).modes())


def test_through_bars_are_hooked_in_narrow_end_supports() -> None:
    """A hook develops the bar where the support is narrow, none where it is wide."""
    spans, wide = TWO, f'width = "60 in"\n{COLUMN}'
    narrow = beam_of(
        bars='sizes = ["#6"]',
        beam='stock = ["60 ft"]',
        supports=(f'width = "24 in"\n{COLUMN}', "", wide),
        spans=spans,
    )
    (piece,) = builder_of(narrow).modes()[0].pieces
    assert (piece.hook_start, piece.hook_end) == (True, False)
    assert 0.0 < piece.develop_start < piece.develop_end


def test_no_through_bars_where_neither_hook_nor_length_fits() -> None:
    """A support too narrow for a hook leaves hangers."""
    problem = beam_of(
        bars='sizes = ["#9"]',
        beam='stock = ["60 ft"]',
        supports=(f'width = "10 in"\n{COLUMN}', "", ""),
        spans=TWO,
    )
    assert all(item.mode.kind is TopKind.HANGERS for item in builder_of(problem).modes())


def test_no_through_bars_into_a_support_without_room() -> None:
    """Bottom figure of 9.7.3.8: 6 in into the support leave no cover in one of 7 in."""
    problem = beam_of(
        bars='sizes = ["#6"]',
        beam='stock = ["60 ft"]',
        supports=('width = "7 in"', "", ""),
        spans=TWO,
    )
    assert all(item.mode.kind is TopKind.HANGERS for item in builder_of(problem).modes())


def test_hangers_cost_what_their_pieces_cost() -> None:
    """From face to face they are counted once; long bars take off what they reach."""
    problem = beam_of(
        bars='sizes = ["#6"]', beam='hangers = ["#4"]', ranking='by = "lightest"', spans=TWO
    )
    builder = builder_of(problem)
    (mode,) = [item for item in builder.modes() if item.mode.kind is TopKind.HANGERS]
    assert builder.hogging == {1}
    for reach in (48.0, 73.0):  # whole steps from the centre of the support, at 288 in
        pieces = builder.hangers(mode.mode, {1: (288.0 - reach, 288.0 + reach)})
        assert len(pieces) == 2
        own = builder.shared.cost(pieces)
        bar, legs = mode.mode.bar, builder.shared.frame.legs
        saved = 2 * (reach - 9.0) * legs * bar.mass / 12.0
        assert own == pytest.approx(mode.cost - saved)
        left, right = pieces
        assert left.end - (288.0 - reach) == pytest.approx(12.0, abs=1.0)
        assert 288.0 + reach - right.start == pytest.approx(12.0)
        assert left.start <= 9.0 - 6.0 + 1e-9


def test_hangers_of_a_span_with_a_cantilever() -> None:
    """Long bars lie over the whole cantilever, so hangers stand in the other span alone."""
    problem = beam_of(
        bars='sizes = ["#6"]',
        beam='hangers = ["#4"]',
        supports=("", ""),
        spans=(f'length = "22 ft"\n{LOADS}', f'length = "5 ft"\ncantilever = "right"\n{LOADS}'),
    )
    builder = builder_of(problem)
    mode = next(item.mode for item in builder.modes() if item.mode.kind is TopKind.HANGERS)
    pieces = builder.hangers(mode, {1: (200.0, 320.0)})
    assert len(pieces) == 1
    assert pieces[0].end >= 200.0


def test_a_cantilever_without_hogging_moment_has_hangers_to_its_tip() -> None:
    """Hangers run from the support to the cover at the tip."""
    problem = beam_of(
        "us",
        bars='sizes = ["#6"]',
        beam='hangers = ["#4"]',
        supports=("", ""),
        spans=(f'length = "5 ft"\ncantilever = "left"\n{LOADS}', f'length = "22 ft"\n{LOADS}'),
    )
    builder = builder_of(problem)
    builder.hogging = set()
    mode = next(item.mode for item in builder.modes() if item.mode.kind is TopKind.HANGERS)
    tip, inner = builder.hangers(mode, {})
    assert tip.start == pytest.approx(1.5)  # the cover
    assert tip.end >= 60.0 - 9.0 + 6.0 - 1e-6
    assert inner.start == pytest.approx(69.0 - 6.0)


def test_labels_name_size_and_kind() -> None:
    """The label of a mode says its size and what the bars are."""
    mode = builder_of(beam_of(spans=TWO)).modes()[-1].mode
    assert mode.label == f"{mode.bar.designation} hangers"
    assert replace(mode, kind=TopKind.THROUGH).label.endswith("through")
