"""Cutting the bars of a schedule from stock lengths with the least length bought.

What is used is fixed, so least bought is least waste; of plans that buy the same the one with
fewer stock bars is taken. Here lengths become whole numbers and plans get their marks back;
`stock_patterns` says what can be cut from a bar, `stock_relaxation` bounds what is bought, and
`stock_model` searches the plan.
"""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from optimizer.beams.stock_model import Search
from optimizer.beams.stock_patterns import SLACK, Pattern, Task
from optimizer.errors import DefectError, JobError

_STEPS = 8000  # of a length unit, whole in 1/1000 and 1/64; pieces go up to a step, stock down


@dataclass(frozen=True, slots=True, kw_only=True)
class Piece:
    """Equal pieces of a schedule: mark, length to cut [in or mm] and number."""

    mark: str
    length: float
    count: int


@dataclass(frozen=True, slots=True, kw_only=True)
class StockBar:
    """Stock bars that are cut alike.

    Attributes
    ----------
    stock_length : float
        Length bought. [in or mm]
    pieces : tuple of (str, int)
        Mark and number of pieces cut from one bar, longest first.
    count : int
        Number of such bars.
    left_over : float
        What remains of one bar. [in or mm]
    """

    stock_length: float
    pieces: tuple[tuple[str, int], ...]
    count: int
    left_over: float


@dataclass(frozen=True, slots=True, kw_only=True)
class CuttingPlan:
    """How the pieces of one size are cut.

    Attributes
    ----------
    size : str
        Designation of the bars.
    bars : tuple of StockBar
        What is bought and cut, longest stock first.
    bought, used, waste : float
        Length bought, length of the pieces, and their difference. [in or mm]
    proved : bool
        Whether no plan buys less.
    fewest : bool
        Whether, besides, no plan that buys as little has fewer stock bars.
    bound : float
        Length that any plan buys at least. [in or mm]
    """

    size: str
    bars: tuple[StockBar, ...]
    bought: float
    used: float
    waste: float
    proved: bool
    fewest: bool
    bound: float


def cut(
    pieces_by_size: Mapping[str, Sequence[Piece]],
    stock: Sequence[float],
    work_limit: float,
    *,
    kerf: float = 0.0,
    unit: str = "",
) -> tuple[CuttingPlan, ...]:
    """Plan the cutting of every size.

    Parameters
    ----------
    pieces_by_size : mapping of str to sequence of Piece
        Pieces of each size; each mark once in its size.
    stock : sequence of float
        Lengths that can be bought, in any number. [in or mm]
    work_limit : float
        Deterministic time of the solver for all sizes together. It comes after a first plan
        and bound, which are found in any case.
    kerf : float
        Length lost in a cut. [in or mm]
    unit : str
        Unit of all lengths, for messages.

    Returns
    -------
    tuple of CuttingPlan
        One plan a size, in the order given. Lengths count to 1/8000 of their unit, a piece up.

    Raises
    ------
    JobError
        If a piece is longer than the longest stock, or a number cannot be used.
    """
    _require_lengths(stock, kerf)
    for size, pieces in pieces_by_size.items():
        _require_pieces(size, pieces, max(stock), f" {unit}".rstrip())
    plans: list[CuttingPlan] = []
    left = work_limit
    for size, pieces in pieces_by_size.items():
        share = left / (len(pieces_by_size) - len(plans))
        plan, work = _plan(size, pieces, sorted(set(stock)), kerf, share)
        plans.append(plan)
        left = max(0.0, left - work)
    return tuple(plans)


def _require_lengths(stock: Sequence[float], kerf: float) -> None:
    if not stock:
        msg = "stock: got no length; allowed: at least one"
        raise JobError(msg)
    for length in stock:
        if not 1.0 / _STEPS <= length < math.inf:
            msg = f"stock: got {length:g}; allowed: finite lengths above 0"
            raise JobError(msg)
    if not 0.0 <= kerf < math.inf:
        msg = f"kerf: got {kerf:g}; allowed: 0 or more"
        raise JobError(msg)


def _require_pieces(size: str, pieces: Sequence[Piece], longest: float, unit: str) -> None:
    marks = Counter(piece.mark for piece in pieces)
    for piece in pieces:
        name = f"bars {size}, mark {piece.mark}"
        if marks[piece.mark] > 1:
            msg = f"{name}: given {marks[piece.mark]} times; allowed: each mark once"
            raise JobError(msg)
        if piece.count < 1:
            msg = f"{name}: got {piece.count} pieces; allowed: 1 or more"
            raise JobError(msg)
        if not piece.length > 0.0:
            msg = f"{name}: got length {piece.length:g}; allowed: above 0"
            raise JobError(msg)
        if math.isinf(piece.length) or _up(piece.length) > _down(longest):
            msg = (
                f"{name}: got length {piece.length:.10g}{unit}; "
                f"allowed: up to {longest:.10g}{unit}, the longest stock; "
                "hint: lap the bar or allow a longer stock length"
            )
            raise JobError(msg)


def _up(length: float) -> int:
    return math.ceil(length * _STEPS - SLACK)


def _down(length: float) -> int:
    return math.floor(length * _STEPS + SLACK)


def _plan(
    size: str, pieces: Sequence[Piece], stock: Sequence[float], kerf: float, work: float
) -> tuple[CuttingPlan, float]:
    """Plan of one size and the deterministic time it took."""
    if not pieces:
        nothing = CuttingPlan(
            size=size, bars=(), bought=0.0, used=0.0, waste=0.0, proved=True, fewest=True, bound=0.0
        )
        return nothing, 0.0
    # n pieces need n cuts, or n - 1 if nothing remains: so each takes its kerf along and the
    # stock has room for one kerf more.
    alike: dict[int, list[Piece]] = {}
    for piece in sorted(pieces, key=lambda item: -item.length):
        alike.setdefault(_up(piece.length + kerf), []).append(piece)
    lengths, rooms = list(alike), [_down(length + kerf) for length in stock]
    prices = [_down(length) for length in stock]
    unit, price_unit = math.gcd(*lengths, *rooms), math.gcd(*prices)
    task = Task(
        lengths=tuple(length // unit for length in lengths),
        wanted=tuple(sum(piece.count for piece in group) for group in alike.values()),
        room=tuple(room // unit for room in rooms),
        price=tuple(price // price_unit for price in prices),
    )
    answer = Search(task, work)
    answer.run()
    bars = _with_marks(answer.bars, list(alike.values()), stock, kerf)
    bought = math.fsum(bar.stock_length * bar.count for bar in bars)
    used = math.fsum(piece.length * piece.count for piece in pieces)
    plan = CuttingPlan(
        size=size,
        bars=bars,
        bought=bought,
        used=used,
        waste=bought - used,
        proved=answer.proved,
        fewest=answer.fewest,
        bound=bought if answer.proved else answer.bound * price_unit / _STEPS,
    )
    return plan, answer.spent


def _with_marks(
    bars: Counter[Pattern], alike: list[list[Piece]], stock: Sequence[float], kerf: float
) -> tuple[StockBar, ...]:
    """Deal the marks of equal lengths out to the bars and join bars that are cut alike."""
    waiting = [iter([piece for piece in group for _ in range(piece.count)]) for group in alike]
    cuts: Counter[tuple[int, tuple[tuple[Piece, int], ...]]] = Counter()
    for place, counts in sorted(bars.elements(), reverse=True):
        taken = Counter(
            next(queue) for queue, n in zip(waiting, counts, strict=True) for _ in range(n)
        )
        cuts[place, tuple(taken.items())] += 1
    if any(next(queue, None) is not None for queue in waiting):
        msg = "a cutting plan leaves pieces uncut"
        raise DefectError(msg)
    return tuple(
        StockBar(
            stock_length=stock[place],
            pieces=tuple((piece.mark, count) for piece, count in taken),
            count=number,
            left_over=max(
                0.0,
                math.fsum(
                    (stock[place], *(-count * (piece.length + kerf) for piece, count in taken))
                ),
            ),
        )
        for (place, taken), number in cuts.items()
    )
