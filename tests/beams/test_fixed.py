"""Bars that follow from the outline: skin, outer flange, the bottom of cantilevers."""

from __future__ import annotations

import math

import pytest

from optimizer.beams.builder import Builder
from optimizer.beams.design import demands_of
from optimizer.beams.fixed import fixed_pieces
from optimizer.beams.frames import frames
from optimizer.beams.plans import ShearOfSpan
from optimizer.beams.problem import BeamProblem
from optimizer.beams.variants import Face, Piece, Role
from tests.beams.jobs import beam_of

LOADS = 'dead = "1.0 kip/ft"\nlive = "0.8 kip/ft"\n'


def pieces_of(problem: BeamProblem, role: Role) -> list[Piece]:
    demands = demands_of(problem)
    frame = frames(problem)[0]
    shears = [ShearOfSpan(problem, frame, index, item) for index, item in enumerate(demands)]
    found = fixed_pieces(Builder(problem, frame, shears), demands)
    return [piece for piece in found if piece.role is role]


def spans(*lengths: str, more: str = "") -> tuple[str, ...]:
    return tuple(f'length = "{length}"\n{LOADS}{more}' for length in lengths)


def test_no_bars_of_their_own_in_a_plain_beam() -> None:
    """A shallow rectangular beam gets no skin, flange or hanger bars."""
    problem = beam_of(spans=spans("24 ft", "24 ft"))
    for role in (Role.SKIN, Role.FLANGE, Role.HANGER):
        assert pieces_of(problem, role) == []


def test_skin_bars_above_36_in() -> None:
    """9.7.2.3: over h/2 from the tension face, at the spacing of 24.3.2 with 2/3 fy.

    15 x 40/40 - 2.5 x 1.875 = 10.3 in to h/2 = 20 in: two rows on both sides.
    """
    deep = spans("24 ft", more='depth = "40 in"\n')
    found = pieces_of(beam_of(supports=("", ""), spans=deep), Role.SKIN)
    assert [(piece.face, piece.count) for piece in found] == [(Face.BOTTOM, 4)]
    assert found[0].start >= 9.0
    assert found[0].end <= 288.0 - 9.0 + 1e-9
    limit = 36.0
    at_limit = spans("24 ft", more=f'depth = "{limit} in"\n')
    assert pieces_of(beam_of(supports=("", ""), spans=at_limit), Role.SKIN) == []


def test_skin_bars_at_both_faces_of_continuous_spans() -> None:
    """A deep span with moments of both signs gets skin bars for each."""
    deep = spans("24 ft", "24 ft", more='depth = "40 in"\n')
    found = pieces_of(beam_of(spans=deep), Role.SKIN)
    assert [piece.face for piece in found] == [Face.BOTTOM, Face.TOP] * 2


@pytest.mark.parametrize("side", ["left", "right"])
def test_bars_at_the_bottom_of_cantilevers(side: str) -> None:
    """Bottom bars of a cantilever run from its support to the cover at its tip."""
    hang = f'length = "5 ft"\ncantilever = "{side}"\ndepth = "40 in"\n{LOADS}'
    inner = spans("22 ft")[0]
    both = (hang, inner) if side == "left" else (inner, hang)
    problem = beam_of(supports=("", ""), spans=both)
    (piece,) = pieces_of(problem, Role.HANGER)
    length = 60.0 + 264.0
    face = 60.0 - 9.0 if side == "left" else 264.0 + 9.0
    tip = 1.5 if side == "left" else length - 1.5
    assert piece.face is Face.BOTTOM
    assert piece.count == frames(problem)[0].legs
    near, far = (piece.end, piece.start) if side == "left" else (piece.start, piece.end)
    assert abs(near - face) == pytest.approx(6.0, abs=1.0)  # into the support, 9.7.3.8.2
    assert abs(far - tip) <= 1.0 + 1e-9
    assert min(piece.start, length - piece.end) >= 1.5 - 1e-9
    skin = pieces_of(problem, Role.SKIN)
    assert {item.face for item in skin} >= {Face.TOP}
    assert all(item.start >= 1.5 - 1e-9 and item.end <= length - 1.5 + 1e-9 for item in skin)


def test_bars_in_the_outer_flange() -> None:
    """24.3.4: a flange wider than ln/10 has bars outside of it where it is in tension.

    60 in less 27 in leaves 16.5 in each side: 0.0018 x 16.5 x 5 = 0.149 in^2, one #4; not more
    than 5 h or 18 in apart.
    """
    wide = spans("24 ft", "24 ft", more='flange = { width = "60 in", thickness = "5 in" }\n')
    problem = beam_of(beam='flange_bar = "#4"', spans=wide)
    found = pieces_of(problem, Role.FLANGE)
    assert [(piece.face, piece.count) for piece in found] == [(Face.TOP, 2)]
    outer = (60.0 - (288.0 - 18.0) / 10.0) / 2.0
    assert found[0].count / 2 * problem.flange_bar.area >= 0.0018 * outer * 5.0
    assert found[0].count / 2 >= outer / 18.0
    demands = demands_of(problem)
    first = demands[0].x[demands[0].Mu_least < 0.0].min()
    last = 288.0 + demands[1].x[demands[1].Mu_least < 0.0].max()
    reach = 12.0 * problem.flange_bar.diameter
    assert found[0].start <= first - reach + 1e-6
    assert found[0].end >= last + reach - 1e-6
    assert math.isclose(found[0].length % 1.0, 0.0, abs_tol=1e-6)


def test_flange_bars_keep_their_cover_at_tips() -> None:
    """Flange bars end a cover before the tips."""
    flange = 'flange = { width = "70 in", thickness = "5 in" }\n'
    left, right = (
        f'length = "6 ft"\ncantilever = "{side}"\n{flange}{LOADS}' for side in ("left", "right")
    )
    problem = beam_of(
        supports=("", ""),
        spans=(left, spans("22 ft", more=flange)[0], right),
    )
    found = pieces_of(problem, Role.FLANGE)
    length = 2 * 72.0 + 264.0
    assert found
    for piece in found:
        assert piece.start >= 1.5 - 1e-9
        assert piece.end <= length - 1.5 + 1e-9


def test_no_flange_bars_in_a_narrow_flange() -> None:
    """A flange hardly wider than the web gets no bars of its own."""
    narrow = spans("24 ft", "24 ft", more='flange = { width = "26 in", thickness = "5 in" }\n')
    assert pieces_of(beam_of(spans=narrow), Role.FLANGE) == []
