"""Design answers: McCormac & Brown, Design of Reinforced Concrete, 9th ed. (ACI 318-11).

Problems whose answers the book prints as "one answer": each has to be adequate in the tool's
full check. Factored moments follow from the given loads: 1.2 D + 1.6 L, concrete of 150 pcf.
"""

from __future__ import annotations

import pytest

from engine import Flange, Outline, State, check_layout
from tests.published.beams import bars, beam, row
from tests.published.solving import US


def span_moment(span: float, dead: float, live: float) -> float:
    """Factored midspan moment of a simple span [ft] under line loads [kip/ft]. [kip*ft]."""
    return (1.2 * dead + 1.6 * live) * span**2 / 8


def self_weight(area: float) -> float:
    """Weight of a concrete area [in^2] at 150 pcf. [kip/ft]."""
    return area / 144 * 0.150


@pytest.mark.parametrize("code", US)
@pytest.mark.parametrize(
    ("width", "depth", "layer", "span", "dead", "live", "fc"),
    [
        pytest.param(16, 29, "4 #10", 30, 2.0, 1.0, 4000, id="problem 4.5"),
        pytest.param(18, 26, "6 #8", 25, 1.8, 1.5, 3000, id="problem 4.9"),
    ],
)
def test_one_answer_is_adequate(
    width: float,
    depth: float,
    layer: str,
    span: float,
    dead: float,
    live: float,
    fc: float,
    code: str,
) -> None:
    """Problems 4.5 and 4.9: strength, ductility, least steel and fit in one layer."""
    moment = span_moment(span, dead + self_weight(width * depth), live)
    section = beam(Outline(web=width, depth=depth), code=code, fc=fc, fy=60_000, Mu=moment)
    checked = check_layout(section, bars(code, layer))
    assert checked.phi == pytest.approx(0.9)
    # The book takes d = h - 2.5 in; the bars themselves lie at most 1/8 in off that.
    assert checked.d == pytest.approx(depth - 2.5, abs=0.13)
    assert [check.id for check in checked.checks if not check.ok] == []
    strength = row(checked, "flexural_strength")
    assert strength.ratio is not None
    assert 0.9 < strength.ratio < 1.0


@pytest.mark.parametrize("code", US)
def test_loads_of_the_problems(code: str) -> None:
    """Problem 4.5: derived Mu of 515.25 kip*ft against 541.75 of 4 #10 at d = 26.5 in."""
    moment = span_moment(30, 2.0 + self_weight(16 * 29), 1.0)
    assert moment == pytest.approx(515.25, abs=0.005)
    section = beam(Outline(web=16, depth=29), code=code, fc=4000, fy=60_000, Mu=moment, cover=1.49)
    checked = check_layout(section, bars(code, "4 #10"))
    assert checked.d == pytest.approx(26.5)
    assert checked.phi_Mn / 12_000 == pytest.approx(541.75, abs=0.005)


@pytest.mark.parametrize("code", US)
def test_four_no_10_do_not_fit_side_by_side_in_12_in(code: str) -> None:
    """Problem 5.57: T beam, 12 in web, 32 in deep, 4 #10: strong enough, but not in one layer.

    4 #10 need 12.9 in of web, so the printed answer implies two layers or bundles. 6 in slab,
    webs 18 ft apart, 30 ft span, flange of 90 in; the live load of 125 psf is assumed.
    """
    dead = 18 * 6 / 12 * 0.150 + self_weight(12 * (32 - 6))
    moment = span_moment(30, dead, 18 * 0.125)
    outline = Outline(web=12, depth=32, top=Flange(width=90, thickness=6))
    section = beam(outline, code=code, fc=4000, fy=60_000, Mu=moment)
    one = check_layout(section, bars(code, "4 #10"))
    assert row(one, "flexural_strength").ok
    # Derived: 5.08 in^2 at d = 29.49 in, a = 0.996 in.
    assert one.phi_Mn / 12_000 == pytest.approx(662.76, abs=0.005)
    assert row(one, "clear_gap").state is State.FAILS
    assert [check.id for check in one.checks if not check.ok] == ["clear_gap"]
    two = check_layout(section, bars(code, "2 #10", "2 #10"))
    assert row(two, "clear_gap").ok
    assert two.phi_Mn < one.phi_Mn


@pytest.mark.parametrize("code", US)
def test_design_of_example_4_2(code: str) -> None:
    """Example 4.2: 14 x 27 in, 22 ft span, 1 and 2 kip/ft: Mu = 294.8 kip*ft, 3 #9 pass."""
    moment = span_moment(22, 1.0 + self_weight(14 * 27), 2.0)
    # The book rounds the self weight up to 0.394 kip/ft: 0.02 kip*ft.
    assert moment == pytest.approx(294.8, abs=0.07)
    section = beam(Outline(web=14, depth=27), code=code, fc=4000, fy=60_000, Mu=moment)
    checked = check_layout(section, bars(code, "3 #9"))
    assert [check.id for check in checked.checks if not check.ok] == []
