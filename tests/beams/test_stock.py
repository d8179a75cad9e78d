"""Cutting plans against an independent exhaustive search, and instances of the literature."""

from __future__ import annotations

import math
import random
from collections import Counter
from fractions import Fraction
from functools import cache
from itertools import product

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from optimizer.beams.stock import CuttingPlan, Piece, StockBar, cut
from optimizer.beams.stock_patterns import Duals, Task, eligible
from optimizer.errors import JobError

FEET = (240.0, 480.0, 720.0)
WORK = 3.0


def schedule(*figures: tuple[float, int]) -> list[Piece]:
    """Return pieces from lengths and counts, marked A, B, ..."""
    return [
        Piece(mark=chr(ord("A") + number), length=length, count=count)
        for number, (length, count) in enumerate(figures)
    ]


def plan_of(
    pieces: list[Piece], stock: tuple[float, ...], work: float = WORK, kerf: float = 0.0
) -> CuttingPlan:
    """Return the checked plan of one size."""
    (plan,) = cut({"#8": pieces}, stock, work, kerf=kerf)
    assert_sound(plan, pieces, stock, kerf)
    return plan


def assert_sound(
    plan: CuttingPlan, pieces: list[Piece], stock: tuple[float, ...], kerf: float
) -> None:
    """Assert that every piece is cut once, no bar is overfull and the sums are right."""
    lengths = {piece.mark: piece.length for piece in pieces}
    made: Counter[str] = Counter()
    for bar in plan.bars:
        assert bar.count >= 1
        assert bar.pieces
        assert bar.stock_length in stock
        made.update({mark: count * bar.count for mark, count in bar.pieces})
        taken = sum(lengths[mark] * count for mark, count in bar.pieces)
        number = sum(count for _, count in bar.pieces)
        lost = kerf * (number - 1)
        assert taken + lost <= bar.stock_length + 1e-6
        assert bar.left_over == pytest.approx(max(0.0, bar.stock_length - taken - kerf * number))
        assert [lengths[mark] for mark, _ in bar.pieces] == sorted(
            (lengths[mark] for mark, _ in bar.pieces), reverse=True
        )
    assert made == {piece.mark: piece.count for piece in pieces}
    alike = [(bar.stock_length, bar.pieces) for bar in plan.bars]
    assert len(set(alike)) == len(alike)
    assert plan.bought == pytest.approx(sum(bar.stock_length * bar.count for bar in plan.bars))
    assert plan.used == pytest.approx(sum(piece.length * piece.count for piece in pieces))
    assert plan.waste == pytest.approx(plan.bought - plan.used)
    assert plan.used - 1e-6 <= plan.bought
    assert plan.bound <= plan.bought
    assert plan.proved == (plan.bound == plan.bought)
    assert plan.proved or not plan.fewest


def bars_of(plan: CuttingPlan) -> int:
    return sum(bar.count for bar in plan.bars)


def least(
    lengths: list[int], counts: list[int], stock: tuple[int, ...], kerf: int = 0
) -> tuple[int, int]:
    """Least length bought and fewest bars, by trying every way to fill one bar after another."""

    @cache
    def best(left: tuple[int, ...]) -> tuple[int, int]:
        if not any(left):
            return (0, 0)
        first = next(number for number, count in enumerate(left) if count)
        found = []
        for taken in product(*(range(count + 1) for count in left)):
            if not taken[first]:
                continue  # bars can be put in an order in which the next holds this piece
            load = sum(n * length for n, length in zip(taken, lengths, strict=True))
            load += kerf * (sum(taken) - 1)
            fits = [length for length in stock if length >= load]
            if not fits:
                continue
            rest = best(tuple(a - b for a, b in zip(left, taken, strict=True)))
            # The shortest that fits is the cheapest bar for these pieces.
            found.append((rest[0] + min(fits), rest[1] + 1))
        return min(found)

    return best(tuple(counts))


@pytest.mark.parametrize("seed", range(60))
def test_small_plans_equal_exhaustive_search(seed: int) -> None:
    """Plans of a few pieces buy what trying everything buys, with as few bars."""
    chance = random.Random(seed)
    stock = tuple(sorted(chance.sample(range(20, 61), chance.choice([1, 2, 3]))))
    kinds = chance.randint(2, 4)
    lengths = chance.sample(range(5, stock[-1] + 1), kinds)
    counts = [chance.randint(1, 3) for _ in range(kinds)]
    kerf = chance.choice([0, 0, 1])
    pieces = schedule(*((float(length), n) for length, n in zip(lengths, counts, strict=True)))
    plan = plan_of(pieces, tuple(map(float, stock)), kerf=float(kerf))
    assert plan.proved
    assert plan.fewest
    assert (plan.bought, bars_of(plan)) == least(lengths, counts, stock, kerf)


@pytest.mark.parametrize("seed", range(20))
def test_regular_stock_equals_exhaustive_search(seed: int) -> None:
    """So they do from the stock lengths of the trade."""
    chance = random.Random(seed)
    lengths = chance.sample(range(50, 720), 4)
    counts = [chance.randint(1, 3) for _ in lengths]
    pieces = schedule(*((float(length), n) for length, n in zip(lengths, counts, strict=True)))
    plan = plan_of(pieces, FEET)
    assert (plan.proved, plan.fewest) == (True, True)
    assert (plan.bought, bars_of(plan)) == least(lengths, counts, (240, 480, 720))


@pytest.mark.parametrize("seed", range(20))
def test_lengths_off_every_step_equal_exhaustive_search(seed: int) -> None:
    """So they do where lengths have no common step."""
    chance = random.Random(seed)
    lengths = [chance.uniform(60.0, 700.0) for _ in range(4)]
    counts = [chance.randint(1, 3) for _ in lengths]
    plan = plan_of(schedule(*zip(lengths, counts, strict=True)), (300.0, 475.5, 720.0))
    whole = [math.ceil(length * 8000) for length in lengths]
    bought, bars = least(whole, counts, (2_400_000, 3_804_000, 5_760_000))
    assert plan.proved
    assert (plan.bought * 8000, bars_of(plan)) == (bought, bars)


def test_paper_rolls_of_the_literature() -> None:
    """A published instance is cut as well as printed."""
    # Chvatal, Linear Programming (1983), chapter 13: rolls of 100 in; the relaxation needs
    # 452.25, 453 are enough (from memory).
    orders = schedule((45.0, 97), (36.0, 610), (31.0, 395), (14.0, 211))
    plan = plan_of(orders, (100.0,))
    assert (plan.proved, bars_of(plan), plan.bound) == (True, 453, 45_300.0)


def test_paper_machine_of_the_literature() -> None:
    """A larger published instance is cut with the printed rolls and waste."""
    # The example of the article "Cutting stock problem" in Wikipedia: rolls of 5600 mm, best
    # plan 73 rolls with a waste of 0.401 % (from memory).
    orders = schedule(
        (1380.0, 22),
        (1520.0, 25),
        (1560.0, 12),
        (1710.0, 14),
        (1820.0, 18),
        (1880.0, 18),
        (1930.0, 20),
        (2000.0, 10),
        (2050.0, 12),
        (2100.0, 14),
        (2140.0, 16),
        (2150.0, 18),
        (2200.0, 20),
    )
    plan = plan_of(orders, (5600.0,))
    assert (plan.proved, bars_of(plan)) == (True, 73)
    assert plan.waste / plan.bought == pytest.approx(0.00401, abs=5e-6)


def test_a_gap_above_the_material_is_closed() -> None:
    """A plan that buys more than the material fills is proved all the same."""
    # By hand: 15 + 2 * 10 + 4 * 6 = 59 of 2 * 30, but beside the 15 goes 10 or 6 + 6 at most,
    # which leaves 32 or more for the second bar.
    plan = plan_of(schedule((15.0, 1), (10.0, 2), (6.0, 4)), (30.0,))
    assert (plan.proved, plan.fewest, plan.bought, plan.bound) == (True, True, 90.0, 90.0)


# Stock lengths without a common step leave a gap between relaxation and best plan.
UNEVEN = ((34, 1), (29, 1), (13, 2), (9, 3))


def test_work_closes_the_gap_of_the_relaxation() -> None:
    """What the relaxation leaves open the solver decides."""
    pieces = schedule(*((float(length), n) for length, n in UNEVEN))
    without = plan_of(pieces, (26.0, 39.0), work=0.0)
    assert (without.proved, without.fewest) == (False, False)
    plan = plan_of(pieces, (26.0, 39.0))
    assert (plan.proved, plan.fewest) == (True, True)
    lengths, counts = zip(*UNEVEN, strict=True)
    assert (plan.bought, bars_of(plan)) == least([*lengths], [*counts], (26, 39))
    assert without.bound <= plan.bought <= without.bought


def test_stock_shorter_than_every_piece_is_left_alone() -> None:
    """Stock too short for any piece changes nothing."""
    pieces = schedule(*((float(length), n) for length, n in UNEVEN))
    assert plan_of(pieces, (4.0, 26.0, 39.0)) == plan_of(pieces, (26.0, 39.0))


@pytest.mark.parametrize("seed", range(40))
def test_no_pattern_of_a_better_plan_is_left_out(seed: int) -> None:
    """Eligible patterns are those of trying every one."""
    chance = random.Random(seed)
    stock = sorted(chance.sample(range(20, 61), 2))
    task = Task(
        lengths=tuple(sorted(chance.sample(range(5, 21), 4), reverse=True)),
        wanted=tuple(chance.randint(1, 3) for _ in range(4)),
        room=tuple(stock),
        price=tuple(stock),
    )
    # Prices of the pieces in thousandths, any that are safe: less than their share of a bar.
    values = tuple(length * chance.randint(600, 1000) for length in task.lengths)
    duals = Duals(values, Fraction(1000))
    limit = math.ceil(duals.total(task) / 1000) + chance.randint(0, 15)
    expected = set()
    for place, room in enumerate(stock):
        for counts in product(*(range(wanted + 1) for wanted in task.wanted)):
            left = room - task.load(counts)
            open_lengths = [
                length
                for length, n, wanted in zip(task.lengths, counts, task.wanted, strict=True)
                if n < wanted
            ]
            if left < 0 or any(length <= left for length in open_lengths):
                continue
            worth = sum(n * value for n, value in zip(counts, values, strict=True))
            if 1000 * room - worth <= 1000 * limit - duals.total(task):
                expected.add((place, counts))
    assert eligible(task, duals, limit) == expected


def test_plans_that_are_not_proved_say_so() -> None:
    """A plan above its bound is not called proved."""
    # So many patterns that neither all can be listed nor the bound be met.
    chance = random.Random(0)
    pieces = schedule(
        *((float(chance.randint(40, 100)), chance.randint(10, 30)) for _ in range(15))
    )
    plan = plan_of(pieces, (239.0, 487.0, 721.0), work=0.1)
    assert not plan.proved
    assert plan.used <= plan.bound < plan.bought < 1.02 * plan.bound


def test_long_bars_are_preferred_among_equal_prices() -> None:
    """Of plans that buy the same the one with fewer bars is taken."""
    # 6 pieces of 10 ft: one 60 ft bar, not three of 20 ft; by hand.
    plan = plan_of(schedule((120.0, 6)), FEET)
    assert plan.bars == (StockBar(stock_length=720.0, pieces=(("A", 6),), count=1, left_over=0.0),)
    assert (plan.waste, plan.fewest) == (0.0, True)


def test_marks_of_one_length_share_bars() -> None:
    """Pieces of two marks and one length are cut from one bar."""
    pieces = schedule((360.0, 3), (360.0, 1))
    plan = plan_of(pieces, (720.0,))
    assert plan.bars == (
        StockBar(stock_length=720.0, pieces=(("A", 2),), count=1, left_over=0.0),
        StockBar(stock_length=720.0, pieces=(("A", 1), ("B", 1)), count=1, left_over=0.0),
    )


def test_the_saw_takes_its_part() -> None:
    """Each cut loses the kerf, and a bar used whole loses none."""
    # Two halves of a bar need a cut; two pieces, each shorter by half of it, leave nothing.
    assert plan_of(schedule((360.0, 2)), (720.0,), kerf=0.125).bought == 1440.0
    assert plan_of(schedule((359.9375, 2)), (720.0,), kerf=0.125).bought == 720.0
    assert plan_of(schedule((720.0, 1)), (720.0,), kerf=0.125).bought == 720.0


def test_bars_bought_to_length_need_no_cut() -> None:
    """Stock of a piece's length is taken where cuts cost."""
    # Three pieces of 20 ft are three bars of 20 ft; one of 60 ft would lose two cuts.
    plan = plan_of(schedule((240.0, 3)), FEET, kerf=0.125)
    assert (plan.bought, bars_of(plan), plan.proved, plan.fewest) == (720.0, 3, True, True)


def test_pieces_a_hair_too_long_or_just_right_are_told_apart() -> None:
    """The least step of length decides whether pieces fit."""
    # The short stock spoils every common step, so that lengths are rounded for the relaxation.
    stock = (720.0, 30.000125)
    exact = plan_of(schedule((240.0, 60)), stock)
    assert (exact.proved, bars_of(exact)) == (True, 20)
    # Two halves fill a bar; a half and a hair leaves too little for either. By hand 15 + 30.
    over = plan_of(schedule((360.000125, 30), (360.0, 30)), stock)
    assert (over.proved, bars_of(over)) == (True, 45)


@pytest.mark.parametrize("seed", range(4))
def test_a_beam_schedule_is_proved_within_its_work(seed: int) -> None:
    """A usual schedule gets a proved plan with little waste."""
    chance = random.Random(seed)
    pieces = schedule(*((float(chance.randint(40, 400)), chance.randint(2, 6)) for _ in range(15)))
    plan = plan_of(pieces, FEET)
    assert plan.proved
    assert plan.bought - 240.0 < plan.used * 1.1


@pytest.mark.parametrize("seed", range(3))
def test_many_short_pieces_keep_an_honest_bound(seed: int) -> None:
    """The bound is not below the material, and the plan near it."""
    chance = random.Random(seed)
    pieces = schedule(
        *((float(chance.randint(40, 100)), chance.randint(10, 30)) for _ in range(15))
    )
    plan = plan_of(pieces, FEET, work=1.0)
    # Whatever the plan, the material itself is a bound that the one proved cannot be under.
    assert plan.bound >= math.ceil(plan.used / 240.0) * 240.0
    assert plan.bought <= plan.bound + 240.0


@settings(max_examples=60, deadline=None)
@given(
    figures=st.lists(st.tuples(st.floats(1.0, 480.0), st.integers(1, 12)), min_size=1, max_size=10),
    stock=st.lists(st.floats(480.0, 900.0), min_size=1, max_size=3),
    kerf=st.sampled_from([0.0, 0.125, 3.0]),
    work=st.sampled_from([0.0, 0.05]),
)
def test_any_plan_is_sound(
    figures: list[tuple[float, int]], stock: list[float], kerf: float, work: float
) -> None:
    """Whatever is asked for, every piece is cut once and no bar is overfull."""
    plan_of(schedule(*figures), tuple(stock), work=work, kerf=kerf)


def test_equal_schedules_give_equal_plans() -> None:
    """Plans repeat, whatever the order of the stock."""
    chance = random.Random(5)
    pieces = schedule(*((chance.uniform(40.0, 400.0), chance.randint(1, 6)) for _ in range(12)))
    first = cut({"#8": pieces, "#5": pieces[:5]}, FEET, WORK)
    again = cut({"#8": pieces, "#5": pieces[:5]}, (720.0, 240.0, 480.0, 240.0), WORK)
    assert first == again
    assert [plan.size for plan in first] == ["#8", "#5"]


def test_no_pieces_need_no_bars() -> None:
    """Nothing to cut is a proved plan of no bars."""
    (plan,) = cut({"#8": []}, FEET, WORK)
    assert (plan.bars, plan.bought, plan.bound, plan.proved) == ((), 0.0, 0.0, True)
    assert cut({}, FEET, WORK) == ()


def test_a_piece_longer_than_stock_is_named() -> None:
    """The message names size, mark, both lengths with their unit, and a way out."""
    pieces = schedule((100.0, 2), (720.5, 1))
    hint = "the longest stock; hint: lap the bar"
    with pytest.raises(
        JobError,
        match=rf"bars #8, mark B: got length 720\.5 in; allowed: up to 720 in, {hint}",
    ):
        cut({"#8": pieces}, FEET, WORK, unit="in")
    with pytest.raises(JobError, match=rf"got length 720\.5; allowed: up to 720, {hint}"):
        cut({"#8": pieces}, FEET, WORK)


@pytest.mark.parametrize("length", [0.0, -1.0, math.nan, math.inf])
def test_lengths_are_above_zero(length: float) -> None:
    """What is no length is refused."""
    with pytest.raises(JobError, match="bars #8, mark A: got length"):
        cut({"#8": schedule((length, 1))}, FEET, WORK)


@pytest.mark.parametrize("count", [0, -2])
def test_counts_are_above_zero(count: int) -> None:
    """Counts below 1 are refused."""
    with pytest.raises(JobError, match=r"mark A: got -?\d pieces; allowed: 1 or more"):
        cut({"#8": schedule((100.0, count))}, FEET, WORK)


def test_marks_are_given_once() -> None:
    """A mark given twice is refused."""
    pieces = [*schedule((100.0, 1)), *schedule((120.0, 1))]
    with pytest.raises(JobError, match="mark A: given 2 times; allowed: each mark once"):
        cut({"#8": pieces}, FEET, WORK)


@pytest.mark.parametrize("stock", [(), (0.0,), (720.0, -1.0), (math.nan,), (math.inf,)])
def test_stock_has_lengths(stock: tuple[float, ...]) -> None:
    """Stock without lengths, or with what is none, is refused."""
    with pytest.raises(JobError, match=r"stock: got .*; allowed"):
        cut({"#8": schedule((100.0, 1))}, stock, WORK)


@pytest.mark.parametrize("kerf", [-0.1, math.nan, math.inf])
def test_a_kerf_is_a_length(kerf: float) -> None:
    """What is no kerf is refused."""
    with pytest.raises(JobError, match="kerf: got"):
        cut({"#8": schedule((100.0, 1))}, FEET, WORK, kerf=kerf)
