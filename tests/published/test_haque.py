"""Bars in one layer: M. E. Haque, reinforced-concrete class tables (university handout), Table 2.

The table lets the corner bars touch the stirrup's legs. The tool counts the stirrup's bend:
the bar stands where the bend begins, so that more width is needed for thin bars. Both are
tested: the table's rule gives the table, and the tool never needs less.
"""

from __future__ import annotations

import math

import pytest

from catalogs import bar_catalog
from tests.published.bar_fit import least_width, rounded_up
from tests.published.solving import US
from tests.published.tables import read_table

TABLE_2 = read_table("haque_table_2")
BARS = bar_catalog("astm-inch")

# Six #11 need 19.26 in by the table's rule, which rounds up everywhere else; printed is 19.0.
ROUNDED_DOWN = ("6", "#11")


def touching_width(count: int, diameter: float) -> float:
    """Least width by the table's rule: #3 stirrup, cover 1.5 in, bars touching the legs. [in]."""
    return 2 * (1.5 + 0.375) + count * diameter + (count - 1) * max(1.0, diameter)


@pytest.mark.parametrize("line", TABLE_2, ids=lambda line: line["bars"])
def test_the_rule_of_the_table(line: dict[str, str]) -> None:
    """Bars touching the legs, rounded up to 0.5 in, give every printed width but one."""
    for size, text in line.items():
        if size == "bars":
            continue
        width = touching_width(int(line["bars"]), BARS.bar(size).diameter)
        expected = 19.5 if (line["bars"], size) == ROUNDED_DOWN else float(text)
        assert rounded_up(width, 0.5) == pytest.approx(expected), size


@pytest.mark.parametrize("code", US)
@pytest.mark.parametrize("line", TABLE_2, ids=lambda line: line["bars"])
def test_the_bend_never_needs_less(line: dict[str, str], code: str) -> None:
    """The tool's width exceeds the touching one by 2 (2 ds - db/2) for every size to #11."""
    count = int(line["bars"])
    for size in line:
        if size == "bars":
            continue
        diameter = BARS.bar(size).diameter
        width = least_width(code, f"{count} {size}")
        bend = 2 * (2 * 0.375 - diameter / 2)
        assert bend > 0
        assert width >= touching_width(count, diameter)
        assert math.isclose(width, touching_width(count, diameter) + bend, abs_tol=1e-5)
