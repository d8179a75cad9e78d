"""What engineers know of such beams without looking it up; common practice, no source."""

from __future__ import annotations

import pytest

from engine import Flange, Outline, Slab, check_layout, effective_flange_width
from tests.published.beams import bars, beam
from tests.published.solving import SI, US, rectangle, solve, tee


@pytest.mark.parametrize(
    ("thickness", "clear", "span", "overhang"),
    [
        pytest.param(5, 108, 400, 40, id="eight slab thicknesses"),
        pytest.param(6, 80, 400, 40, id="half the clear distance"),
        pytest.param(6, 108, 320, 40, id="an eighth of the clear span"),
    ],
)
def test_flange_on_both_sides(thickness: float, clear: float, span: float, overhang: float) -> None:
    """A side's overhang is the least of 8 h, half the clear distance and ln/8.

    Common practice, no source; it is what Table 6.3.2.1 of ACI 318-14 and -19 says.
    """
    slab = Slab(thickness=thickness, clear_left=clear, clear_right=clear, span=span)
    assert effective_flange_width(slab, 14) == pytest.approx(14 + 2 * overhang)


@pytest.mark.parametrize(
    ("thickness", "clear", "span", "overhang"),
    [
        pytest.param(5, 108, 480, 30, id="six slab thicknesses"),
        pytest.param(6, 60, 480, 30, id="half the clear distance"),
        pytest.param(6, 108, 360, 30, id="a twelfth of the clear span"),
    ],
)
@pytest.mark.parametrize("left", [True, False])
def test_flange_on_one_side(
    thickness: float, clear: float, span: float, overhang: float, left: bool
) -> None:
    """An edge beam's overhang is the least of 6 h, half the clear distance and ln/12.

    Common practice, no source; it is what Table 6.3.2.1 of ACI 318-14 and -19 says.
    """
    slab = Slab(
        thickness=thickness,
        clear_left=clear if left else 0.0,
        clear_right=0.0 if left else clear,
        span=span,
    )
    assert effective_flange_width(slab, 14) == pytest.approx(14 + overhang)


@pytest.mark.parametrize("code", US)
def test_unequal_bays_have_unequal_overhangs(code: str) -> None:
    """Each side has its own half clear distance; common practice, no source."""
    slab = Slab(thickness=8, clear_left=60, clear_right=100, span=400)
    width = effective_flange_width(slab, 14)
    assert width == pytest.approx(14 + 30 + 50)
    outline = Outline(web=14, depth=28, top=Flange(width=width, thickness=8))
    section = beam(outline, code=code, fc=4000, fy=60_000)
    assert section.profile.strips[0] == (width, 8)


@pytest.mark.parametrize("code", US)
def test_block_inside_the_flange_is_a_rectangle(code: str) -> None:
    """While a is not more than hf, a T computes as a rectangle of the flange's width.

    Common practice, no source.
    """
    for area in (2.0, 4.0, 6.0, 8.0):
        whole = solve(tee(48, 5, 14, 24), (area, 24), fc=4000, fy=60_000, code=code)
        wide = solve(rectangle(48, 24), (area, 24), fc=4000, fy=60_000, code=code)
        assert whole.a <= 5
        assert whole == wide
    deeper = solve(tee(48, 5, 14, 24), (16.0, 24), fc=4000, fy=60_000, code=code)
    assert deeper.a > 5
    assert deeper.Mn < solve(rectangle(48, 24), (16.0, 24), fc=4000, fy=60_000, code=code).Mn


@pytest.mark.parametrize(("code", "fy"), [("ACI 318-14", 60_000.0), ("ACI 318M-14", 420.0)])
def test_neutral_axis_at_the_tension_controlled_limit(code: str, fy: float) -> None:
    """Grade 60 (420), older editions: tension-controlled up to c = 3/8 dt.

    Common practice, no source.
    """
    inch = code in US
    width, depth, fc = (12.0, 24.0, 4000.0) if inch else (300.0, 600.0, 28.0)
    area = 0.85 * fc * width * 0.85 * (3 / 8 * depth) / fy
    at = solve(rectangle(width, depth), (area, depth), fc=fc, fy=fy, code=code)
    assert at.c == pytest.approx(3 / 8 * depth, rel=1e-9)
    assert at.eps_t == pytest.approx(0.005, rel=1e-9)
    assert at.phi == pytest.approx(0.9, rel=1e-9)
    beyond = solve(rectangle(width, depth), (1.01 * area, depth), fc=fc, fy=fy, code=code)
    assert beyond.phi < 0.9
    short = solve(rectangle(width, depth), (0.99 * area, depth), fc=fc, fy=fy, code=code)
    assert short.phi == 0.9


@pytest.mark.parametrize("size", ["#5", "#8", "#11"])
@pytest.mark.parametrize("code", US)
def test_two_equal_layers_an_inch_apart(size: str, code: str) -> None:
    """The outer layer lies half the gap and half a bar below the steel's centroid.

    Common practice, no source.
    """
    section = beam(Outline(web=16, depth=30), code=code, fc=4000, fy=60_000)
    checked = check_layout(section, bars(code, f"4 {size}", f"4 {size}"))
    (bar,) = checked.layout.sizes
    assert checked.dt - checked.d == pytest.approx(1.0 / 2 + bar.diameter / 2)


@pytest.mark.parametrize("code", [*US, *SI])
def test_past_the_flange_compression_is_overhangs_and_web(code: str) -> None:
    """C = 0.85 f'c ((bf - bw) hf + bw a), each part with its own arm.

    Common practice, no source.
    """
    inch = code in US
    flange, thickness, web, depth = (30, 4, 12, 26) if inch else (750, 100, 300, 650)
    fc, fy, area = (4000.0, 60_000.0, 9.0) if inch else (28.0, 420.0, 5800.0)
    found = solve(tee(flange, thickness, web, depth), (area, depth), fc=fc, fy=fy, code=code)
    assert found.a > thickness
    overhangs = 0.85 * fc * (flange - web) * thickness
    stem = 0.85 * fc * web * found.a
    assert overhangs + stem == pytest.approx(area * fy, rel=1e-12)
    moment = overhangs * (depth - thickness / 2) + stem * (depth - found.a / 2)
    assert found.Mn == pytest.approx(moment / (12_000 if inch else 1e6), rel=1e-12)
