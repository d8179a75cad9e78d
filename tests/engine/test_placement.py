"""Positions of bars: layer 1 with equal gaps, upper layers on lines of the layer below."""

from __future__ import annotations

import random
from itertools import combinations, pairwise

import numpy as np
import pytest

from engine import Outline, place
from engine.placement import clear_gaps, equal_gaps, gap_fits, left_to_right, stack
from tests.engine.builders import inch_bar, si_layout, si_section, us_layout, us_section

# 14 in web, 1.5 in cover, #4: the legs are 10 in apart inside, the bend's radius is 1 in,
# so that corner bars up to 2 in thick have their centres 4 in from the centreline.
REACH = 4.0


@pytest.mark.parametrize(
    ("layer", "x", "gap", "required", "spacing"),
    [
        ("2 #8", (-4.0, 4.0), 7.0, 1.0, 8.0),
        ("4 #8", (-4.0, -4 / 3, 4 / 3, 4.0), 8 / 3 - 1, 1.0, 8 / 3),
        ("5 #8", (-4.0, -2.0, 0.0, 2.0, 4.0), 1.0, 1.0, 2.0),
        ("3 #11", (-4.0, 0.0, 4.0), 4 - 1.41, 1.41, 4.0),
        # One #7 at the centre between two #9.
        ("2 #9 + 1 #7", (-4.0, 0.0, 4.0), 4 - (1.128 + 0.875) / 2, 1.128, 4.0),
        # 8 in between the corner centres hold half of two #9, two #7 and three gaps.
        (
            "2 #9 + 2 #7",
            (-4.0, -0.875 / 2 - 5.122 / 6, 0.875 / 2 + 5.122 / 6, 4.0),
            5.122 / 3,
            1.128,
            2.003 / 2 + 5.122 / 3,
        ),
        # 9 bars: the gaps vanish.
        ("9 #8", tuple(float(x) for x in range(-4, 5)), 0.0, 1.0, 1.0),
    ],
)
def test_layer_one(
    layer: str, x: tuple[float, ...], gap: float, required: float, spacing: float
) -> None:
    """Corner bars in the bends, equal clear gaps between."""
    (placed,) = place(us_section(), us_layout(layer)).layers
    np.testing.assert_allclose(placed.x, x, atol=1e-12)
    assert placed.gap == pytest.approx(gap, abs=1e-12)
    assert placed.gap_required == required
    assert placed.spacing == pytest.approx(spacing, rel=1e-12)
    assert placed.aligned
    assert placed.bottom == 2.0


def test_corner_bar_thicker_than_the_bend() -> None:
    """A #18 (2.257 in) touches the leg of a #4 stirrup: its centre lies db/2 inside."""
    (placed,) = place(us_section(), us_layout("2 #18")).layers
    np.testing.assert_allclose(placed.x, [-5 + 2.257 / 2, 5 - 2.257 / 2], rtol=1e-14)


def test_layer_one_in_millimetres() -> None:
    """350 mm web, 40 mm cover, No. 13: legs 244.6 mm apart, radius 25.4 mm."""
    (placed,) = place(si_section(), si_layout("3 25")).layers
    np.testing.assert_allclose(placed.x, [-96.9, 0.0, 96.9], atol=1e-12)
    assert placed.gap == pytest.approx(96.9 - 25.4, rel=1e-12)
    assert placed.gap_required == pytest.approx(80 / 3, rel=1e-14)


def test_order_from_the_corners_inwards() -> None:
    """Larger bars outside, one odd bar at the centre."""
    names = [name for name, _ in left_to_right(us_layout("3 #6 + 4 #8").layers[0])]
    assert names == ["#8", "#8", "#6", "#6", "#6", "#8", "#8"]


def test_single_bar() -> None:
    """One bar has no gap and no spacing; what it would need is still said."""
    placement = place(us_section(), us_layout("1 #9"))
    (placed,) = placement.layers
    assert placed.x == (0.0,)
    assert placed.gap == placement.smallest_gap == float("inf")
    assert (placed.spacing, placed.gap_required) == (0.0, 1.128)
    assert placement.gaps_fit


@pytest.mark.parametrize(
    ("layers", "x"),
    [
        (("4 #8", "2 #8"), (-4.0, 4.0)),
        (("4 #8", "4 #8"), (-4.0, -4 / 3, 4 / 3, 4.0)),
        (("5 #8", "3 #8"), (-4.0, 0.0, 4.0)),
        (("5 #8", "4 #8"), (-4.0, -2.0, 2.0, 4.0)),
        (("5 #8", "1 #8"), (0.0,)),
        # Lines 1.6 apart: the second or the third pair both leave 1.6; the outer one wins.
        (("6 #6", "4 #6"), (-4.0, -2.4, 2.4, 4.0)),
        # Lines 4/3 apart: the third pair leaves 8/3, the second 4/3.
        (("7 #5", "4 #5"), (-4.0, -4 / 3, 4 / 3, 4.0)),
        # With a bar at the centre both leave 4/3; the outer one wins.
        (("7 #5", "5 #5"), (-4.0, -8 / 3, 0.0, 8 / 3, 4.0)),
        # Lines 8/7 apart: pairs two steps apart.
        (("8 #4", "4 #4"), (-4.0, -12 / 7, 12 / 7, 4.0)),
    ],
)
def test_upper_layer(layers: tuple[str, str], x: tuple[float, ...]) -> None:
    """Outermost lines first, then the choice with the largest smallest gap."""
    placed = place(us_section(), us_layout(*layers)).layers[1]
    np.testing.assert_allclose(placed.x, x, atol=1e-12)
    assert placed.aligned


def test_third_layer_stands_on_the_second() -> None:
    """7, 5 and 3 bars: the centre and the corners go all the way up."""
    third = place(us_section(), us_layout("7 #5", "5 #5", "3 #5")).layers[2]
    np.testing.assert_allclose(third.x, [-4.0, 0.0, 4.0], atol=1e-12)


@pytest.mark.parametrize(
    "layers",
    [
        ("2 #8", "3 #8"),  # more bars than lines
        ("4 #8", "5 #8"),
        ("2 #8", "2 #18"),  # too thick to stand over the corner bars
        ("4 #8", "3 #18"),
    ],
)
def test_layer_that_cannot_stack(layers: tuple[str, str]) -> None:
    """It is shown with equal gaps and marked."""
    section, layout = us_section(), us_layout(*layers)
    placed = place(section, layout).layers[1]
    assert not placed.aligned
    alone = place(section, us_layout(layers[1])).layers[0]
    assert placed.x == alone.x


@pytest.mark.parametrize(
    ("layers", "x"),
    [
        (("4 #8", "3 #8"), (-4.0, -4 / 3, 4.0)),  # no line at the centre
        (("4 #8", "1 #8"), (-4.0,)),
        (("2 #8", "1 #8"), (-4.0,)),
        # Lines 1.6 apart.
        (("6 #6", "5 #6"), (-4.0, -2.4, -0.8, 0.8, 4.0)),
        (("6 #6", "3 #6"), (-4.0, -0.8, 4.0)),
        # A layer over one that stands to one side keeps to the lines that are left.
        (("4 #8", "3 #8", "3 #8"), (-4.0, -4 / 3, 4.0)),
        (("4 #8", "3 #8", "2 #8"), (-4.0, 4.0)),
        (("4 #8", "1 #8", "1 #8"), (-4.0,)),
    ],
)
def test_layer_that_cannot_be_symmetric(layers: tuple[str, ...], x: tuple[float, ...]) -> None:
    """It stands on lines of the layer below with the largest smallest gap."""
    *_, below, placed = place(us_section(), us_layout(*layers)).layers
    np.testing.assert_allclose(placed.x, x, atol=1e-12)
    assert placed.aligned
    assert set(placed.x) <= set(below.x)


def test_gap_of_a_layer_that_cannot_be_symmetric() -> None:
    """3 #8 over 4 #8: the pair on neighbouring lines is the tightest, the other the widest."""
    placed = place(us_section(), us_layout("4 #8", "3 #8")).layers[1]
    assert placed.gap == pytest.approx(8 / 3 - 1, rel=1e-12)
    assert placed.spacing == pytest.approx(16 / 3, rel=1e-12)


@pytest.mark.parametrize(
    ("layers", "gap"),
    [(("2 #9 + 4 #4", "3 #9"), 1.128), (("2 #9 + 4 #5", "3 #8"), 1.0)],
)
def test_asymmetric_layer_takes_the_roomiest_lines(layers: tuple[str, ...], gap: float) -> None:
    """Neighbouring lines would be too close for the larger bars above; others are not."""
    placed = place(us_section(), us_layout(*layers)).layers[1]
    assert placed.gap > gap


def test_thick_bar_over_thin_ones_is_not_on_their_line() -> None:
    """A #18 does not fit the corner over #8 bars: it is placed alone and not aligned."""
    placed = place(us_section(), us_layout("2 #8", "1 #18")).layers[1]
    assert (placed.x, placed.aligned) == ((0.0,), False)


def test_layer_over_an_asymmetric_one() -> None:
    """3 #9 + 1 #5 stand unevenly; 4 #5 stand on the same lines, 2 #5 on the corner ones."""
    lower, upper, third = place(us_section(), us_layout("3 #9 + 1 #5", "4 #5", "2 #5")).layers
    assert lower.designations == ("#9", "#9", "#5", "#9")
    assert lower.x[1] != pytest.approx(-lower.x[2])
    assert (upper.x, upper.aligned) == (lower.x, True)
    assert (third.x, third.aligned) == ((lower.x[0], lower.x[-1]), True)


def test_asymmetric_layer() -> None:
    """A #9 and a #5 alone go to the corners, the larger first."""
    (placed,) = place(us_section(), us_layout("1 #9 + 1 #5")).layers
    assert placed.designations == ("#9", "#5")
    np.testing.assert_allclose(placed.x, [-4.0, 4.0], rtol=1e-14)
    assert placed.gap == pytest.approx(8 - (1.128 + 0.625) / 2, rel=1e-14)


def test_heights() -> None:
    """Each layer rests a gap above the largest bar of the one below."""
    placement = place(us_section(layer_gap=1.25), us_layout("2 #9 + 2 #6", "2 #6", "2 #5"))
    bottoms = [layer.bottom for layer in placement.layers]
    np.testing.assert_allclose(bottoms, [2.0, 2.0 + 1.128 + 1.25, 4.378 + 0.75 + 1.25], rtol=1e-14)
    assert placement.height == pytest.approx(6.378 + 0.625, rel=1e-14)


def test_each_pair_is_held_against_its_own_required_gap() -> None:
    """25.2.1 looks at two neighbours: 2 #10 + 2 #8 over 2 #10 + 2 #7 with little to spare.

    The inner #8 stand 1.23 in apart and need 1 in, each #10 stands 1.29 in from a #8 and needs
    1.27 in: every pair has its gap, though the least gap is below the largest required one.
    """
    # Inner width from the gap g wanted in layer 1: 2 R + db(#10)/2 + 2 db(#7) + db(#10)/2 + 3 g.
    g = 1.36
    web = 2 * 2.0 + 2 * 1.0 + 1.27 + 2 * 0.875 + 3 * g
    section = us_section(outline=Outline(web=web, depth=24.0))
    placement = place(section, us_layout("2 #10 + 2 #7", "2 #10 + 2 #8"))
    upper = placement.layers[1]
    gaps = [g - 0.0625, g - 0.125, g - 0.0625]
    np.testing.assert_allclose(clear_gaps(upper.x, upper.diameters), gaps, rtol=1e-12)
    assert placement.gaps_fit
    assert upper.gap >= upper.gap_required


def test_smallest_gap_of_a_layout() -> None:
    """The least over all layers, and whether all fit."""
    section = us_section()
    fitting = place(section, us_layout("4 #8", "2 #8"))
    assert fitting.smallest_gap == pytest.approx(5 / 3, rel=1e-14)
    assert fitting.gaps_fit
    assert not place(section, us_layout("6 #8", "2 #8")).gaps_fit


def test_gap_fits_at_its_limit() -> None:
    """Rounding of floating point is no reason to fail, a thousandth is."""
    assert gap_fits(1.0, 1.0)
    assert gap_fits(0.1 + 0.2, 0.3 + 5e-17)
    assert not gap_fits(0.999, 1.0)


def test_equal_gaps_of_unequal_bars() -> None:
    """Every clear gap is the same, and the ends are where they were put."""
    diameters = (1.41, 1.0, 0.75, 1.0, 1.41)
    x = equal_gaps(diameters, 6.0)
    np.testing.assert_allclose(clear_gaps(x, diameters), [(12 - 4.16) / 4] * 4, rtol=1e-12)
    assert [x[0], x[-1]] == pytest.approx([-6.0, 6.0], rel=1e-14)


def symmetric_choices(
    lines: tuple[float, ...], count: int
) -> list[tuple[tuple[int, ...], tuple[float, ...]]]:
    """Return every symmetric choice of lines that takes the outermost, outer ones first."""
    pairs, odd = divmod(count, 2)
    if odd and len(lines) % 2 == 0:
        return []
    centre = (0.0,) if odd else ()
    left = lines[: len(lines) // 2]
    return [
        (chosen, (*(left[i] for i in chosen), *centre, *(-left[i] for i in reversed(chosen))))
        for chosen in combinations(range(len(left)), pairs)
        if not pairs or chosen[0] == 0
    ]


def mirrored(half: list[float], *, centre: bool) -> tuple[float, ...]:
    """Return lines left and right of the centreline."""
    return (*(-x for x in half), *([0.0] if centre else []), *reversed(half))


@pytest.mark.parametrize("seed", range(40))
def test_stack_equals_brute_force(seed: int) -> None:
    """Lines at random or on a grid (so that ties abound), bars of one or two sizes."""
    rng = random.Random(seed)
    for _ in range(10):
        size = rng.randint(1, 6)
        pool = (
            [0.5 * k for k in range(1, 25)]
            if rng.random() < 0.5
            else [rng.uniform(0.3, 12.0) for _ in range(24)]
        )
        half = sorted(rng.sample(pool, size), reverse=True)
        lines = mirrored(half, centre=rng.random() < 0.5)
        count = rng.randint(1, len(lines) + 1)
        pairs, odd = divmod(count, 2)
        thick = rng.randint(0, pairs)
        side = [1.0] * thick + [0.75] * (pairs - thick)
        diameters = (*side, *([0.5] if odd else []), *reversed(side))
        choices = symmetric_choices(lines, count)
        found = stack(lines, diameters)
        if not choices:
            assert found is None
            continue
        least = {
            chosen: min(clear_gaps(x, diameters), default=float("inf")) for chosen, x in choices
        }
        widest = max(least.values())
        first = min(chosen for chosen, gap in least.items() if gap >= widest - 1e-9)
        assert found == dict(choices)[first]
        assert all(left < right for left, right in pairwise(found))


def test_positions_do_not_depend_on_the_moments_sign() -> None:
    """Bars count from the tension face, whichever that is."""
    layout = us_layout("4 #8", "2 #8")
    assert place(us_section(Mu=-3e6), layout) == place(us_section(), layout)


def test_larger_stirrup_moves_the_corner_bars() -> None:
    """#6 stirrup: 2.25 in to the bars, radius 3 x 0.75 in."""
    (placed,) = place(us_section(stirrup=inch_bar("#6")), us_layout("2 #8")).layers
    assert placed.x == (-(7 - 2.25 - 2.25), 7 - 2.25 - 2.25)
    assert REACH - placed.x[1] == 1.5
