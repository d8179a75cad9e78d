"""Which layouts the enumeration holds to exist, counted by hand and against a printed table."""

from __future__ import annotations

from itertools import pairwise, product

import pytest

from tests.exhaustive.enumeration import enumerate_layouts
from tests.exhaustive.geometry import contents, left_to_right, spread, stacks, stand
from tests.exhaustive.samples import si_case, sizes, us_case

EIGHT, SIX = sizes("#8")[0], sizes("#6")[0]


def test_one_size_in_two_layers_by_hand() -> None:
    """Three #8 are clear by (4.75 - 2)/2 = 1.375 in, four by 0.58 in: two or three in a layer.

    In 24 in of depth five of them are not tension-controlled (eps_t = 0.0049), in 36 in six are.
    """
    deep = us_case(depth=36.0, strips=((10.0, 36.0),))
    found = {layout.counts for layout in enumerate_layouts(deep)}
    two, three = (("#8", 2),), (("#8", 3),)
    assert found == {(two,), (three,), (two, two), (three, two), (three, three)}


def test_two_sizes_in_one_layer_by_hand() -> None:
    """Beside two and three of each size, one #6 fits between two #8; two do not (0.75 in)."""
    found = {
        layout.counts[0] for layout in enumerate_layouts(us_case(sizes=(SIX, EIGHT), max_layers=1))
    }
    single = {((name, count),) for name in ("#6", "#8") for count in (2, 3)}
    assert found == single | {(("#8", 2), ("#6", 1))}


@pytest.mark.parametrize(
    ("changes", "expected"),
    [
        # One layer: 2 and 3 of each size, and 2 #8 + #6. On 2 #8 stand 2 of either size; on 2 #6
        # only those; on 3 #8 and on 2 #8 + #6 any of the five; on 3 #6 two or three of them.
        ({}, 5 + 2 + 1 + 5 + 5 + 2),
        # Each size for itself: 2, 3, 2/2, 3/2, 3/3.
        ({"size_steps": 1}, 10),
        ({"max_sizes": 1}, 10),
        # No room for a second layer: 1.875 + 1 + 1 + 0.75 in do not go into 6.0 - 1.875 in.
        ({"depth": 6.0, "strips": ((10.0, 6.0),)}, 5),
        # Two layers of #8 need 1.875 + 3 in below 24 - 1.875 - 1 - 16.25 = 4.875 in ...
        ({"opposite_height": 16.25}, 20),
        # ... and do not get them here. Of #6 over #8 (2.75 in) and #6 over #6 all remain.
        ({"opposite_height": 16.26}, 5 + 1 + 1 + 2 + 2 + 2),
        # A job's own gap of 1.4 in shuts out 3 #8 (1.375 in) but neither 3 #6 nor 2 #8 + #6.
        ({"min_gap": 1.4}, 4 + 2 + 1 + 4 + 2),
        # So does aggregate of 1.05 in.
        ({"aggregate": 1.05}, 4 + 2 + 1 + 4 + 2),
    ],
)
def test_count_of_layouts_of_two_sizes_by_hand(changes: dict[str, object], expected: int) -> None:
    """The number of layouts of #6 and #8 in a 10 in web is what counting on paper gives."""
    case = us_case(sizes=(SIX, EIGHT), **changes)
    assert sum(1 for _ in stacks(case, case.sizes)) == expected


@pytest.mark.parametrize(
    ("size", "widths"),
    [
        ("#8", (7.3, 9.3, 11.3, 13.3, 15.3, 17.3, 19.3)),
        ("#11", (8.1, 10.9, 13.8, 16.6, 19.4, 22.2, 25.0)),
    ],
)
def test_bars_that_fit_a_web_match_the_printed_table(size: str, widths: tuple[float, ...]) -> None:
    """McCormac & Brown, Design of Reinforced Concrete, 9th ed., Table A.5: least web of 2-8 bars.

    The table rounds up to 0.1 in, so the bars fit the printed width and not one 0.1 in less.
    """
    for bars, width in enumerate(widths, start=2):
        for web, expected in ((width, bars), (width - 0.1, bars - 1)):
            case = us_case(
                sizes=sizes(size),
                web=web,
                tension_width=web,
                strips=((web, 24.0),),
                max_layers=1,
                aggregate=0.0,
            )
            fit = [stack.layers[0][0][1] for stack in stacks(case, case.sizes)]
            assert max(fit, default=1) == expected


def test_corner_bar_sits_in_the_bend_of_the_stirrup() -> None:
    """Its centre is max(R, db/2) inside the leg, R = 2 ds to #5 and 3 ds above (Table 25.3.2)."""
    pair = (EIGHT, EIGHT)
    assert spread(us_case(), pair) == pytest.approx((2.625, 7.375), abs=1e-12)
    assert spread(us_case(ds=0.625), pair)[0] == pytest.approx(1.5 + 0.625 + 1.25, abs=1e-12)
    assert spread(us_case(ds=0.75), pair)[0] == pytest.approx(1.5 + 0.75 + 2.25, abs=1e-12)
    large = sizes("#11")[0]
    assert spread(us_case(ds=0.25), (large, large))[0] == pytest.approx(1.75 + 0.705, abs=1e-12)
    assert spread(si_case(), sizes("25") * 2)[0] == pytest.approx(40 + 9.5 + 19, abs=1e-12)


def test_first_layer_has_equal_clear_gaps() -> None:
    """2 #8 + 3 #6 in 16 in: 5 bars of 4.25 in between the outer faces of the corner bars."""
    bars = left_to_right(((EIGHT, 2), (SIX, 3)))
    assert [bar.name for bar in bars] == ["#8", "#6", "#6", "#6", "#8"]
    lines = spread(us_case(web=16.0), bars)
    # Corner centres are 10.75 in apart, so the outer faces 11.75 in.
    gap = (11.75 - 4.25) / 4
    steps = [x2 - x1 for x1, x2 in pairwise(lines)]
    expected = [gap + 0.875, gap + 0.75, gap + 0.75, gap + 0.875]
    assert steps == pytest.approx(expected, abs=1e-12)


@pytest.mark.parametrize(
    ("below", "above", "expected"),
    [
        (5, 2, (0, 4)),
        (5, 3, (0, 2, 4)),
        (5, 4, (0, 1, 3, 4)),
        # Both choices have neighbours one line apart: the one nearer to the corners.
        (6, 4, (0, 1, 4, 5)),
        (7, 5, (0, 1, 3, 5, 6)),
        # Without the centre line 0 2 4 6 is two lines apart everywhere.
        (7, 4, (0, 2, 4, 6)),
        (9, 5, (0, 2, 4, 6, 8)),
        (10, 4, (0, 3, 6, 9)),
    ],
)
def test_upper_bars_take_the_lines_with_the_largest_gap(
    below: int, above: int, expected: tuple[int, ...]
) -> None:
    """On evenly spaced lines the choice can be read off by eye."""
    lines = tuple(3.0 * index for index in range(below))
    assert stand(lines, (SIX,) * above) == tuple(lines[index] for index in expected)


def test_lines_of_a_third_layer_are_those_of_the_second() -> None:
    """With 7, 4 and 4 bars the third layer stands over the second, not over the first."""
    case = us_case(web=20.0, sizes=sizes("#8"), max_layers=3)
    stack = next(
        stack
        for stack in stacks(case, case.sizes)
        if [layer[0][1] for layer in stack.layers] == [7, 4, 4]
    )
    assert stack.lines[1] == tuple(stack.lines[0][index] for index in (0, 2, 4, 6))
    assert stack.lines[2] == stack.lines[1]
    # 1.5 cover + 0.375 stirrup, then 1 in bars with 1 in between.
    assert stack.bottoms == pytest.approx((1.875, 3.875, 5.875), abs=1e-12)


def test_contents_of_a_layer_are_all_orders_that_the_rules_allow() -> None:
    """Every sequence of 2 to 6 bars of three sizes, sieved by the wording of the rules."""
    three = sizes("#6", "#7", "#8")
    allowed = set()
    for count in range(2, 7):
        for bars in product(three, repeat=count):
            diameters = [bar.db for bar in bars]
            half = diameters[: count // 2]
            used = sorted(set(diameters))
            if (
                diameters == diameters[::-1]
                and half == sorted(half, reverse=True)
                and len(used) <= 2
                and (len(used) == 1 or diameters.count(used[-1]) >= 2)
            ):
                allowed.add(bars)
    made = [left_to_right(layer) for layer in contents(three, 6, mixed=True)]
    assert len(made) == len(set(made))
    assert set(made) == allowed
