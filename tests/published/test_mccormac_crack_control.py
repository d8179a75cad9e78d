"""Spacing and skin steel: McCormac & Brown, Design of Reinforced Concrete, 9th ed. (ACI 318-11).

The crack widths of example 6.3 are by the Gergely-Lutz expression, which is not a rule of
ACI 318-14 or -19 and not carried here: 24.3.2 limits the spacing instead.
"""

from __future__ import annotations

import pytest

from engine import Outline, State, check_layout, edition
from engine.crack_control import largest_spacing
from tests.published.beams import bars, beam, row
from tests.published.printed import printed
from tests.published.solving import SI, US


@pytest.mark.parametrize("code", SI)
def test_largest_spacing_in_si(code: str) -> None:
    """Example 6.4: fy = 420 MPa, cc = 60.65 mm: 228 mm, below the cap of 300 mm."""
    fs = 2 / 3 * 420
    assert largest_spacing(edition(code), fs, 60.65) == printed("228")
    assert largest_spacing(edition(code), fs, 30.0) == printed("300")


@pytest.mark.parametrize("code", SI)
def test_largest_spacing_of_the_check_in_si(code: str) -> None:
    """Example 6.4 as a row: No. 29 bars whose surface lies 60.65 mm from the tension face."""
    outline = Outline(web=400, depth=600)
    section = beam(outline, code=code, fc=28, fy=420, cover=60.65 - 9.5)
    found = row(check_layout(section, bars(code, "4 29")), "crack_control")
    assert found.limit == printed("228")
    assert found.clause == "24.3.2"


@pytest.mark.parametrize("code", US)
def test_skin_steel_of_a_deep_beam(code: str) -> None:
    """Section 4.4 (9.7.2.3): over h/2 on both sides where h exceeds 36 in.

    The rule is printed, the figures derived: 24 in of 48 in, and 15 - 2.5 (2.0) = 10 in at 40 ksi.
    """
    section = beam(Outline(web=16, depth=48), code=code, fc=4000, fy=60_000, stirrup="#4")
    found = row(check_layout(section, bars(code, "4 #9")), "side_face_steel")
    assert (found.clause, found.state) == ("9.7.2.3", State.PROVIDE)
    assert "both side faces over h/2 = 24 in from the tension face" in found.note
    assert "spacing at most 10 in" in found.note


@pytest.mark.parametrize("code", US)
@pytest.mark.parametrize(("depth", "asked"), [(36.0, False), (36.1, True)])
def test_threshold_of_skin_steel(depth: float, asked: bool, code: str) -> None:
    """Section 4.4: only where h is more than 36 in."""
    section = beam(Outline(web=16, depth=depth), code=code, fc=4000, fy=60_000)
    found = row(check_layout(section, bars(code, "4 #9")), "side_face_steel")
    assert found.state is (State.PROVIDE if asked else State.NOT_APPLICABLE)
