"""Ends of bars: the shortest bar of whole steps between two ranges."""

from __future__ import annotations

import math

from hypothesis import given, settings
from hypothesis import strategies as st

from optimizer.beams.ends import EndRange, fit

SLACK = 2e-6


@st.composite
def ranges(draw: st.DrawFn) -> tuple[EndRange, EndRange, float]:
    """Two ends with room beyond what each has to reach, and a step."""
    step = draw(st.sampled_from([0.5, 1.0, 3.0, 25.0]))
    left = draw(st.floats(-50.0, 50.0))
    right = left + draw(st.floats(0.1, 200.0))
    rooms = [draw(st.one_of(st.just(0.0), st.floats(0.0, 60.0))) for _ in range(2)]
    return (
        EndRange(left, left - rooms[0], draw(st.booleans())),
        EndRange(right, right + rooms[1], draw(st.booleans())),
        step,
    )


@settings(max_examples=400, deadline=None)
@given(ranges())
def test_a_bar_that_fits_is_right_and_the_shortest(
    case: tuple[EndRange, EndRange, float],
) -> None:
    """A bar covers what is needed, stays within its limits and is in whole steps the shortest."""
    left, right, step = case
    found = fit(left, right, step)
    if found is None:
        return
    start, end = found
    assert left.limit - SLACK <= start <= left.need + SLACK
    assert right.need - SLACK <= end <= right.limit + SLACK
    steps = (end - start) / step
    assert abs(steps - round(steps)) * step <= SLACK
    # A hook lies at its limit; where whole steps do not allow it, less than a step short.
    for own, gap in ((left, start - left.limit), (right, right.limit - end)):
        if own.hooked:
            assert gap < step + SLACK
    if not left.hooked and not right.hooked:
        assert end - start - step < right.need - left.need + SLACK


@settings(max_examples=400, deadline=None)
@given(ranges())
def test_nothing_fits_only_where_no_number_of_steps_does(
    case: tuple[EndRange, EndRange, float],
) -> None:
    """Lengths of whole steps from what has to be reached to what there is room for."""
    left, right, step = case
    if fit(left, right, step) is not None:
        return
    room, need = right.limit - left.limit, right.need - left.need
    if not left.hooked and not right.hooked:
        assert step * math.floor(room / step - SLACK) < need + SLACK
        return
    # One hook lies at its limit; the other end, hooked or not, may lie anywhere within a step.
    whole = step * math.floor(room / step - SLACK)
    if left.hooked and right.hooked:
        assert left.limit + whole < right.need + SLACK
    elif left.hooked:
        assert right.limit - whole > left.need - SLACK or left.limit + whole < right.need + SLACK
    else:
        assert left.limit + whole < right.need + SLACK or right.limit - whole > left.need - SLACK


def test_bars_by_hand() -> None:
    """Straight and hooked bars end where they do by hand."""
    assert fit(EndRange(10.0, 0.0), EndRange(50.4, 60.0), 1.0) == (10.0, 51.0)
    # No room at the right: the bar moves to the left by what it is over.
    assert fit(EndRange(10.0, 0.0), EndRange(50.4, 50.4), 1.0) == (10.0 + 50.4 - 51.0, 50.4)
    assert fit(EndRange(10.0, 10.0), EndRange(50.4, 50.4), 1.0) is None
    # Hooks at their limits.
    assert fit(EndRange(10.0, 2.0, hooked=True), EndRange(50.5, 60.0), 1.0) == (2.0, 51.0)
    assert fit(EndRange(10.0, 0.0), EndRange(50.0, 55.5, hooked=True), 1.0) == (9.5, 55.5)
    # Hooks at both ends with whole steps between: one is less than a step short.
    assert fit(EndRange(10.0, 2.0, hooked=True), EndRange(50.0, 55.5, hooked=True), 1.0) == (
        2.0,
        55.0,
    )
    # A hook that cannot reach its limit because the other end has no more room.
    assert fit(EndRange(10.0, 2.5, hooked=True), EndRange(50.0, 50.0), 1.0) == (3.0, 50.0)
    assert fit(EndRange(10.0, 10.0), EndRange(50.0, 55.5, hooked=True), 1.0) == (10.0, 55.0)
