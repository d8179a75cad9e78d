"""Bars in one layer: McCormac & Brown, Design of Reinforced Concrete, 9th ed. (ACI 318-11).

Tables A.5 and B.5 and the statements of sections 4.2 and 4.4: the corner bar's centre lies 2 ds,
or half its diameter where larger, inside the stirrup's leg. The widths are rounded up to
0.1 in and 1 mm.
"""

from __future__ import annotations

import itertools

import pytest

from engine import Outline, place
from tests.published.bar_fit import least_width, rounded_up
from tests.published.beams import bars, beam
from tests.published.printed import printed
from tests.published.solving import SI, US
from tests.published.tables import read_table

COUNTS = [str(count) for count in range(2, 9)]
TABLE_A5 = read_table("mccormac_table_a5")
TABLE_B5 = read_table("mccormac_table_b5")

# Table B.5, No. 36: 352 and 495 mm by the rule. The row was continued by adding 71.6 to its
# rounded 209: 352.2 and 495.4, printed 353 and 496.
CARRIED_ON = {("36", "4"), ("36", "6")}


@pytest.mark.parametrize("line", TABLE_A5, ids=lambda line: line["bar"])
@pytest.mark.parametrize("code", US)
def test_table_a5(line: dict[str, str], code: str) -> None:
    """Table A.5: least web widths of 2 to 8 bars, #3 stirrups, cover 1.5 in."""
    widths = [least_width(code, f"{count} {line['bar']}") for count in COUNTS]
    for count, width in zip(COUNTS, widths, strict=True):
        assert rounded_up(width, 0.1) == pytest.approx(float(line[count])), count
    for few, more in itertools.pairwise(widths):
        # Four decimals of #18, 2.257 + 2.257 = 4.514, are printed 4.51.
        assert more - few == pytest.approx(float(line["more"]), abs=0.005)


@pytest.mark.parametrize("line", TABLE_B5, ids=lambda line: line["bar"])
@pytest.mark.parametrize("code", SI)
def test_table_b5(line: dict[str, str], code: str) -> None:
    """Table B.5: least web widths of 2 to 8 bars, No. 10 stirrups, cover 40 mm."""
    widths = [least_width(code, f"{count} {line['bar']}") for count in COUNTS]
    for count, width in zip(COUNTS, widths, strict=True):
        expected = float(line[count]) - ((line["bar"], count) in CARRIED_ON)
        assert rounded_up(width, 1.0) == pytest.approx(expected), count
    for few, more in itertools.pairwise(widths):
        assert more - few == pytest.approx(float(line["more"]), abs=1e-5)


@pytest.mark.parametrize(
    ("where", "layer", "text"),
    [
        ("example 4.2", "3 #9", "9.8"),
        ("example 4.2", "5 #7", "12.8"),
        ("example 4.4", "5 #9", "14.3"),
        ("section 4.2", "3 #10", "10.4"),
    ],
)
@pytest.mark.parametrize("code", US)
def test_statements_of_the_text(where: str, layer: str, text: str, code: str) -> None:
    """Least widths quoted in the text, rounded up to 0.1 in."""
    assert rounded_up(least_width(code, layer), 0.1) == pytest.approx(float(text)), where


@pytest.mark.parametrize("code", US)
def test_width_of_three_no_10_before_rounding(code: str) -> None:
    """Section 4.2: 10.33 in for 3 #10."""
    assert least_width(code, "3 #10") == printed("10.33")


@pytest.mark.parametrize("code", US)
def test_edge_distance_of_a_corner_bar(code: str) -> None:
    """Section 4.2, figure 4.1: a #10 in a #3 stirrup has its centre 2.625 in from the side."""
    section = beam(Outline(web=14, depth=24), code=code, fc=4000, fy=60_000)
    (layer,) = place(section, bars(code, "3 #10")).layers
    assert 14 / 2 + layer.x[0] == printed("2.625")
    assert 14 / 2 - layer.x[-1] == printed("2.625")
