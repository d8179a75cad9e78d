"""Development and laps: McCormac & Brown, Design of Reinforced Concrete, 9th ed. (ACI 318-11).

The equations for straight bars went unchanged from 318-11 into 318-14 and, for Grade 60, into
318-19; that of hooks into 318-14 only. Example 7.7 (bars in compression) and the headed bar of
example 7.9 are not carried. Nor is the reduction for excess steel of example 7.4.
"""

from __future__ import annotations

import math

import pytest

from engine import (
    Concrete,
    Development,
    Outline,
    Steel,
    confinement_of,
    edition,
    hooked_length,
    place,
    short_form_lap_length,
    short_form_length,
    straight_length,
)
from tests.published.beams import bars, beam
from tests.published.printed import printed
from tests.published.solving import US


def grade_60(code: str, fc: float, lightweight: float = 1.0) -> tuple[Concrete, Steel]:
    """Return concrete of a strength [psi] and Grade 60 steel."""
    rules = edition(code)
    return (
        Concrete(edition=rules, fc=fc, lightweight=lightweight),
        Steel(edition=rules, fy=60_000.0),
    )


def in_diameters(found: Development, db: float) -> float:
    """Return a length before its minimum over the diameter [in]."""
    return found.unlimited / db


@pytest.mark.parametrize("code", US)
def test_straight_bars_of_example_7_2(code: str) -> None:
    """#8 bottom bars, f'c = 3000 psi, cb = 1.5 in: 55 db, and 44 db with #3 at 8 in for three."""
    taken = (*grade_60(code, 3000), bars(code, "1 #8").sizes[0])
    bare = straight_length(*taken, confinement=1.5, top=False)
    assert in_diameters(bare, 1.0) == printed("55")
    tied = straight_length(*taken, confinement=1.5 + 0.367, top=False)
    assert in_diameters(tied, 1.0) == printed("44")


@pytest.mark.parametrize("code", US)
def test_confinement_of_example_7_2(code: str) -> None:
    """Cover term cb = 1.5 in (half of 3 in between the bars), Ktr = 40 (0.22)/(8 x 3) = 0.367 in.

    The width is ours: 11.25 in puts three bars between the bends of a #3 stirrup 3 in apart.
    """
    section = beam(Outline(web=11.25, depth=20), code=code, fc=3000, fy=60_000)
    found = confinement_of(section, place(section, bars(code, "3 #8")), transverse=8.0)
    assert found.cb == printed("1.5")
    assert found.Ktr == printed("0.367")
    ld = straight_length(
        section.concrete,
        section.steel,
        bars(code, "1 #8").sizes[0],
        confinement=found.ratio,
        top=False,
    )
    assert in_diameters(ld, 1.0) == printed("44")


@pytest.mark.parametrize("code", US)
def test_lightweight_top_bars_of_example_7_4(code: str) -> None:
    """#8 top bars, lightweight, f'c = 3500 psi: 88 db by the table; 66 and 58 db by cb = 2 in.

    Ktr = 40 x 0.22/(8 x 4) = 0.275 in.
    """
    taken = (*grade_60(code, 3500, 0.75), bars(code, "1 #8").sizes[0])
    table = short_form_length(*taken, favourable=True, top=True)
    assert in_diameters(table, 1.0) == printed("88")
    bare = straight_length(*taken, confinement=2.0, top=True)
    assert in_diameters(bare, 1.0) == printed("66")
    tied = straight_length(*taken, confinement=2.275, top=True)
    assert in_diameters(tied, 1.0) == printed("58")


@pytest.mark.parametrize("code", US)
def test_coated_top_bar_of_example_7_6(code: str) -> None:
    """#9 coated top bar, f'c = 4000 psi, cb = 2.25 in, psi_t psi_e cut to 1.7: 61 db, 69 in."""
    taken = (*grade_60(code, 4000), bars(code, "1 #9").sizes[0])
    found = straight_length(*taken, confinement=2.25 / 1.128, top=True, coated=True)
    assert in_diameters(found, 1.128) == printed("61")
    # One unit: the book multiplies the rounded 61 db (68.8 in), unrounded it is 68.4 in.
    assert found.length == printed("69", units=1.0)


def test_coated_hook_of_example_7_6() -> None:
    """#9 coated hook, f'c = 4000 psi: 1.2 (60,000)/(50 sqrt(4000)) 1.128 = 25.68 in."""
    code = "ACI 318-14"
    found = hooked_length(*grade_60(code, 4000), bars(code, "1 #9").sizes[0], coated=True)
    assert found.length == printed("25.68")


@pytest.mark.parametrize("code", US)
def test_positive_steel_of_example_14_3(code: str) -> None:
    """#9 bottom bars, f'c = 3000 psi, cb = 2.564 in: 36.14 db, 41 in."""
    taken = (*grade_60(code, 3000), bars(code, "1 #9").sizes[0])
    found = straight_length(*taken, confinement=2.564 / 1.128, top=False)
    assert in_diameters(found, 1.128) == printed("36.14")
    assert found.length == printed("41")


@pytest.mark.parametrize("code", US)
def test_cover_of_example_14_3(code: str) -> None:
    """The cb of 1.5 + 0.5 + 1.128/2 = 2.564 in is the distance from below with #4 stirrups.

    The stirrup and the width of our beam are derived from that sum: two bars lie 12 in apart.
    """
    section = beam(Outline(web=18, depth=30), code=code, fc=3000, fy=60_000, stirrup="#4")
    found = confinement_of(section, place(section, bars(code, "2 #9")))
    assert found.cb == printed("2.564")


@pytest.mark.parametrize("code", US)
@pytest.mark.parametrize(
    ("size", "ld", "class_b"),
    [
        ("#3", 15, 19),
        ("#4", 19, 25),
        ("#5", 24, 31),
        ("#6", 29, 37),  # 28 or 29 remembered
        ("#7", 42, 54),
        ("#8", 48, 62),
        ("#9", 54, 70),
        ("#10", 61, 79),
        ("#11", 67, 87),
    ],
)
def test_detailers_table(code: str, size: str, ld: int, class_b: int) -> None:
    """Tables of the kind detailers use: Grade 60, f'c = 4000 psi, bottom, first row. From memory.

    They are made from the same equation and rounded up to the inch, so they show that a figure
    of practice is met, not that the equation is right.
    """
    taken = (*grade_60(code, 4000), bars(code, f"1 {size}").sizes[0])
    straight = short_form_length(*taken, favourable=True, top=False)
    assert math.ceil(straight.length) == ld
    lap = short_form_lap_length(*taken, favourable=True, top=False)
    assert math.ceil(lap.length) == class_b


@pytest.mark.parametrize("code", US)
def test_derived_straight_lengths(code: str) -> None:
    """Grade 60, f'c = 4000 psi, bottom: figures derived by hand, no source."""
    concrete, steel = grade_60(code, 4000)
    (six,), (eight,) = bars(code, "1 #6").sizes, bars(code, "1 #8").sizes
    taken = (concrete, steel)
    assert short_form_length(*taken, six, favourable=True, top=False).length == printed("28.5")
    assert short_form_length(*taken, eight, favourable=True, top=False).length == printed("47.4")
    assert short_form_length(*taken, eight, favourable=False, top=False).length == printed("71.2")
    assert straight_length(*taken, eight, confinement=2.5, top=False).length == printed("28.5")


def test_derived_hooks_of_2014() -> None:
    """#8, Grade 60, f'c = 4000 psi: 19.0 in, with psi_c = 0.7 13.3 in; derived, no source."""
    taken = (*grade_60("ACI 318-14", 4000), bars("ACI 318-14", "1 #8").sizes[0])
    assert hooked_length(*taken).length == printed("19.0")
    assert hooked_length(*taken, side_cover=2.5, tail_cover=2.0).length == printed("13.3")


@pytest.mark.parametrize(
    ("size", "lengths"),
    [
        ("#6", ("9.7", "15.5", "19.4")),
        ("#8", ("14.9", "23.9", "29.9")),
        ("#11", ("25.0", "40.0", "50.1")),
    ],
)
def test_derived_hooks_of_2019(size: str, lengths: tuple[str, str, str]) -> None:
    """Grade 60, f'c = 4000 psi, (psi_r, psi_o) = (1, 1), (1.6, 1), (1.6, 1.25); no source."""
    taken = (*grade_60("ACI 318-19", 4000), bars("ACI 318-19", f"1 {size}").sizes[0])
    helped = hooked_length(*taken, in_core=True, side_cover=2.5, tied=True)
    untied = hooked_length(*taken, in_core=True, side_cover=2.5)
    assert helped.length == printed(lengths[0])
    assert untied.length == printed(lengths[1])
    assert hooked_length(*taken).length == printed(lengths[2])
