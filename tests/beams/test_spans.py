"""Spans, supports and loads: what a beam refuses, and where its parts lie."""

from __future__ import annotations

import math
from collections.abc import Sequence

import pytest

from engine import Flange, Outline, OutOfRangeError
from engine.beams.spans import (
    Beam,
    Load,
    LoadCase,
    Overhang,
    PointLoad,
    Span,
    Support,
    SupportKind,
    UniformLoad,
)
from tests.beams.random_beams import random_beam

OUTLINE = Outline(web=12.0, depth=24.0)


def span(
    length: float = 200.0, overhang: Overhang = Overhang.NONE, loads: tuple[Load, ...] = ()
) -> Span:
    return Span(mark="S", length=length, outline=OUTLINE, loads=loads, overhang=overhang)


def supports(*widths: float) -> tuple[Support, ...]:
    return tuple(
        Support(mark=chr(65 + number), width=width, kind=SupportKind.COLUMN)
        for number, width in enumerate(widths)
    )


def beam(*spans: Span, widths: Sequence[float]) -> Beam:
    return Beam(spans=spans, supports=supports(*widths))


def uniform(start: float, end: float, intensity: float = 10.0) -> UniformLoad:
    return UniformLoad(case=LoadCase.DEAD, intensity=intensity, start=start, end=end)


def point(at: float, force: float = 10.0) -> PointLoad:
    return PointLoad(case=LoadCase.LIVE, force=force, at=at)


LEFT, RIGHT = span(50.0, Overhang.LEFT), span(60.0, Overhang.RIGHT)


@pytest.mark.parametrize(
    ("spans", "widths", "what", "words"),
    [
        ((), (12.0,), "span", "none between two supports"),
        ((LEFT,), (12.0,), "span", "none between two supports"),
        ((span(),), (12.0,), "support", "1 for 1 spans; allowed: one more"),
        ((span(), span()), (12.0, 12.0, 12.0, 12.0), "support", "4 for 2 spans"),
        ((span(), LEFT), (12.0, 12.0), "span", "allowed: the first span only"),
        ((RIGHT, span()), (12.0, 12.0), "span", "allowed: the last span only"),
        ((span(12.0),), (12.0, 12.0), "length", "12 leaves nothing between its supports"),
        ((span(-5.0),), (12.0, 12.0), "length", "-5 leaves nothing"),
        ((span(), span(6.0, Overhang.RIGHT)), (12.0, 12.0), "length", "6 leaves nothing"),
    ],
)
def test_a_beam_without_order_is_refused(
    spans: tuple[Span, ...], widths: tuple[float, ...], what: str, words: str
) -> None:
    """Spans and supports that do not match are refused with the key at fault."""
    with pytest.raises(OutOfRangeError, match=words) as caught:
        beam(*spans, widths=widths)
    assert caught.value.what == what


@pytest.mark.parametrize(
    ("load", "words"),
    [
        (point(-1.0), "at -1; allowed: within 0 to 200"),
        (point(200.5), "at 200.5; allowed: within 0 to 200"),
        (uniform(-1.0, 100.0), "at -1 to 100"),
        (uniform(0.0, 201.0), "at 0 to 201"),
        (uniform(100.0, 50.0), "at 100 to 50"),
        (uniform(70.0, 70.0), "at 70; allowed"),
        (point(math.nan), "no finite number"),
        (point(50.0, force=math.inf), "no finite number"),
        (uniform(0.0, math.inf), "no finite number"),
        (uniform(0.0, 10.0, intensity=math.nan), "no finite number"),
    ],
)
def test_a_load_outside_its_span_is_refused(load: Load, words: str) -> None:
    """A load that is not within its span is refused."""
    with pytest.raises(OutOfRangeError, match=words) as caught:
        beam(span(loads=(load,)), widths=(12.0, 12.0))
    assert caught.value.what == "load"


def test_loads_at_the_very_ends_are_taken() -> None:
    """Loads may lie at both ends of a span."""
    own = (point(0.0), point(200.0), uniform(0.0, 200.0))
    assert beam(span(loads=own), widths=(12.0, 12.0)).spans[0].loads == own


def test_neighbours_with_cantilevers_at_both_ends() -> None:
    """Supports, spans and clear lengths find each other between cantilevers."""
    found = beam(LEFT, span(200.0), span(150.0), RIGHT, widths=(12.0, 16.0, 20.0))
    assert found.first_support == 1
    assert [found.left_support(index) for index in range(4)] == [None, 0, 1, 2]
    assert [found.right_support(index) for index in range(4)] == [0, 1, 2, None]
    assert [found.left_span(index) for index in range(3)] == [0, 1, 2]
    assert [found.right_span(index) for index in range(3)] == [1, 2, 3]
    assert found.origins == (0.0, 50.0, 250.0, 400.0)
    assert [found.clear_range(index) for index in range(4)] == [
        (0.0, 44.0),
        (6.0, 192.0),
        (8.0, 140.0),
        (10.0, 60.0),
    ]
    assert [found.clear_length(index) for index in range(4)] == [44.0, 186.0, 132.0, 50.0]


def test_neighbours_without_cantilevers() -> None:
    """The outer supports have a span at one side only."""
    found = beam(span(200.0), span(150.0), widths=(12.0, 16.0, 20.0))
    assert found.first_support == 0
    assert [found.left_span(index) for index in range(3)] == [None, 0, 1]
    assert [found.right_span(index) for index in range(3)] == [0, 1, None]


@pytest.mark.parametrize("seed", range(20))
def test_neighbours_name_each_other(seed: int) -> None:
    """Going to a neighbour and back is where one was; clear spans and widths fill the beam."""
    found = random_beam(seed)
    for number in range(len(found.supports)):
        left, right = found.left_span(number), found.right_span(number)
        assert left is None or found.right_support(left) == number
        assert right is None or found.left_support(right) == number
        if left is not None and right is not None:
            end = found.origins[left] + found.clear_range(left)[1]
            start = found.origins[right] + found.clear_range(right)[0]
            assert start - end == pytest.approx(found.supports[number].width)


def test_only_girders_do_not_compress_the_end() -> None:
    """9.4.3.2 (a): the reaction introduces compression into the end region."""
    found = {kind: Support(mark="A", width=12.0, kind=kind).compresses for kind in SupportKind}
    assert found == {
        SupportKind.COLUMN: True,
        SupportKind.WALL: True,
        SupportKind.GIRDER: False,
    }


def test_gross_inertia_of_a_rectangle() -> None:
    """Ig of a rectangle is b h^3/12."""
    assert span().gross_inertia == pytest.approx(12.0 * 24.0**3 / 12.0)


def test_gross_inertia_of_a_tee_by_thin_slices() -> None:
    """Against a sum over 24 000 slices of a T of 60 x 5 on 12 x 19."""
    outline = Outline(web=12.0, depth=24.0, top=Flange(width=60.0, thickness=5.0))
    own = Span(mark="S", length=200.0, outline=outline, loads=())
    h = 24.0 / 24_000
    middles = [(number + 0.5) * h for number in range(24_000)]
    widths = [60.0 if y < 5.0 else 12.0 for y in middles]
    area = sum(widths) * h
    centre = sum(b * y for b, y in zip(widths, middles, strict=True)) * h / area
    second = sum(b * (y - centre) ** 2 for b, y in zip(widths, middles, strict=True)) * h
    assert own.gross_inertia == pytest.approx(second, rel=1e-6)
