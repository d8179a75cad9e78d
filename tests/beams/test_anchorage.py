"""Development of the bars of a beam against the equations written out by hand."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from engine import OutOfRangeError, Section, place
from engine.beams.anchorage import (
    EndAnchor,
    anchor_at_end,
    can_lap,
    development_in_layout,
    hook_in_support,
    lap_of_size,
    largest_spacing_for_grade,
    schedule_length,
)
from tests.engine.builders import INCH, METRIC, si_layout, si_section, us_layout, us_section


def hogging(section: Section) -> Section:
    return replace(section, Mu=-section.Mu)


def test_one_size_has_one_short_form_length() -> None:
    """Table 25.4.2.3, first row: fy db/(25 lambda sqrt f'c) to #6, /20 above; top 1.3."""
    section = us_section()
    six, eight = INCH.bar("#6"), INCH.bar("#8")
    assert schedule_length(section, six) == pytest.approx(60e3 * 0.75 / (25 * math.sqrt(4000)))
    assert schedule_length(section, eight) == pytest.approx(60e3 / (20 * math.sqrt(4000)))
    assert schedule_length(hogging(section), eight) == pytest.approx(
        1.3 * 60e3 / (20 * math.sqrt(4000))
    )


def test_a_bar_thicker_than_its_cover_takes_the_other_row() -> None:
    """Table 25.4.2.3 asks for a clear cover of db: else 3/50 and 3/40."""
    section = us_section(cover=0.75, stirrup=INCH.bar("#3"), exposure_given=False)
    ten = INCH.bar("#10")
    assert section.bar_face < ten.diameter
    assert schedule_length(section, ten) == pytest.approx(3 * 60e3 * 1.27 / (40 * math.sqrt(4000)))


def test_metric_short_form() -> None:
    """ACI 318M, Table 25.4.2.3: 2.1 and 1.7; at least 300 mm."""
    section = si_section()
    assert schedule_length(section, METRIC.bar("25")) == pytest.approx(
        420 * 25.4 / (1.7 * math.sqrt(28))
    )
    assert schedule_length(si_section(fc=60.0), METRIC.bar("10")) == pytest.approx(300.0)


def test_lap_is_class_b() -> None:
    """25.5.2.1: 1.3 ld."""
    section, bar = us_section(), INCH.bar("#8")
    assert lap_of_size(section, bar) == pytest.approx(1.3 * 60e3 / (20 * math.sqrt(4000)))


def test_large_bars_are_not_lapped() -> None:
    """25.5.1.1."""
    section = us_section()
    assert can_lap(section, INCH.bar("#11"))
    assert not can_lap(section, INCH.bar("#14"))
    assert can_lap(si_section(), METRIC.bar("36"))
    assert not can_lap(si_section(), METRIC.bar("43"))
    with pytest.raises(OutOfRangeError):
        lap_of_size(section, INCH.bar("#14"))


def test_the_general_equation_is_taken_where_it_gives_less() -> None:
    """25.4.2.4 with cb = min(2.0 + 0.5, s/2) and Ktr = 0, #8 at 2.5 db: 3/40 fy db/(sqrt f'c 2.5).

    Two bars in 14 in are far apart, so cb is the distance to the surface.
    """
    section, layout = us_section(), us_layout("2 #8")
    found = development_in_layout(section, place(section, layout), 1, INCH.bar("#8"))
    assert found == pytest.approx(3 / 40 * 60e3 / (math.sqrt(4000) * 2.5))
    assert found < schedule_length(section, INCH.bar("#8"))


def test_no_development_length_where_the_bars_are_too_close() -> None:
    """Below (cb + Ktr)/db of 0.5 + the bars' own half the equation says nothing."""
    section = us_section(cover=0.75, stirrup=INCH.bar("#3"))
    layout = us_layout("3 #8")
    placement = place(section, layout)
    tight = replace(
        placement,
        layers=tuple(replace(layer, x=(-0.5, 0.0, 0.5)) for layer in placement.layers),
    )
    assert development_in_layout(section, tight, 1, INCH.bar("#8")) == math.inf


def test_spacing_for_high_strength_steel() -> None:
    """ACI 318-19, 9.7.1.4: Ktr = 40 Atr/(s n) >= 0.5 db for fy of 80 ksi and more.

    Two legs of #4 and four #8: s = 40 x 0.40/(4 x 0.5).
    """
    strong = us_section(fy=80_000.0)
    layout = us_layout("4 #8")
    assert largest_spacing_for_grade(strong, place(strong, layout)) == pytest.approx(8.0)
    two = us_layout("4 #8", "2 #8")
    assert largest_spacing_for_grade(strong, place(strong, two)) == pytest.approx(8.0)
    plain = us_section()
    assert largest_spacing_for_grade(plain, place(plain, layout)) == math.inf
    older = us_section(code="ACI 318-14", fy=80_000.0)
    assert largest_spacing_for_grade(older, place(older, layout)) == math.inf


def test_hooks_far_apart_are_shorter_in_2019_only() -> None:
    """25.4.3.2 (2019): psi_r is 1.0 at 6 db on centres, else 1.6; 2014 knows ties only."""
    section, bar = us_section(), INCH.bar("#8")
    close, wide = hook_in_support(section, bar, 5.9), hook_in_support(section, bar, 6.0)
    assert close == pytest.approx(1.6 * wide)
    # fy psi_r psi_o psi_c/(55 sqrt f'c) db^1.5 with psi_o = 1.25, psi_c = 4000/15000 + 0.6
    expected = 60e3 * 1.25 * (4 / 15 + 0.6) / (55 * math.sqrt(4000))
    assert wide == pytest.approx(expected)
    older = us_section(code="ACI 318-14")
    assert hook_in_support(older, bar, 5.9) == hook_in_support(older, bar, 100.0)


def test_side_cover_of_hooks_in_2014() -> None:
    """25.4.3.2 (2014): psi_c = 0.7 with 2.5 in beside and 2 in behind; 0.02 fy db/sqrt f'c."""
    bar = INCH.bar("#8")
    full = 0.02 * 60e3 / math.sqrt(4000)
    thin = us_section(code="ACI 318-14", cover=1.5)  # 2.0 in to the bars
    thick = us_section(code="ACI 318-14", cover=2.0)  # 2.5 in
    assert hook_in_support(thin, bar, 3.0) == pytest.approx(full)
    assert hook_in_support(thick, bar, 3.0) == pytest.approx(0.7 * full)


def test_ends_are_straight_where_they_can_be_else_hooked() -> None:
    """A hook is taken only where the straight bar finds no room, and nothing where neither fits."""
    section, bar = us_section(), INCH.bar("#8")
    ldh = hook_in_support(section, bar, 3.0)
    assert anchor_at_end(section, bar, width=24.0, ld=20.0, spacing=3.0) == EndAnchor(
        hooked=False, embedment=20.0, development=20.0
    )
    assert anchor_at_end(section, bar, width=24.0, ld=22.0, spacing=3.0, least=6.0) == EndAnchor(
        hooked=False, embedment=22.0, development=22.0
    )
    assert anchor_at_end(section, bar, width=14.0, ld=5.0, spacing=3.0, least=6.0) == EndAnchor(
        hooked=False, embedment=6.0, development=5.0
    )
    wide = ldh + section.bar_face
    found = anchor_at_end(section, bar, width=wide, ld=60.0, spacing=3.0)
    assert found is not None
    assert (found.hooked, found.development) == (True, ldh)
    assert found.embedment == pytest.approx(ldh)
    assert anchor_at_end(section, bar, width=wide - 0.01, ld=60.0, spacing=3.0) is None
    assert anchor_at_end(section, bar, width=wide, ld=60.0, spacing=3.0, least=ldh + 1) is None


def test_metric_layout_in_two_layers() -> None:
    """Bars of the second layer have a length of their own, not below that of free bars."""
    section, layout = si_section(), si_layout("4 25", "2 25")
    placement = place(section, layout)
    bar = METRIC.bar("25")
    first = development_in_layout(section, placement, 1, bar)
    second = development_in_layout(section, placement, 2, bar)
    least = 420 * 25.4 / (1.1 * math.sqrt(28) * 2.5)
    assert first >= least * (1 - 1e-9)
    assert second >= least * (1 - 1e-9)
