"""What an option changes against the drawn layout: every figure by hand, every point both ways.

The formulas are written out here from ACI 318-19, ACI 318M-14 and their tables; nothing of the
development modules enters. Bars by ASTM A615/A615M Table 1.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import Any

import pytest

from catalogs import price_list
from engine import CheckedLayout, Layout, Outline, Section, Steel, check_layout, edition
from optimizer.changes import (
    Difference,
    anchorage,
    differences,
    points_to_accept,
    tie_spacing,
)
from optimizer.measures import measure
from tests.engine.builders import inch_bar, si_layout, si_section, us_layout, us_section

EXACT = 1e-9  # relative: the same formulas; strength comes from a root found to about 1e-12
STRENGTH = 1e-7


def _rows(
    drawn: tuple[Section, Layout], option: tuple[Section, Layout], *, priced: bool = False
) -> dict[str, Difference]:
    units = drawn[0].edition.units
    prices = price_list("demo", units) if priced else None
    one, other = check_layout(*drawn), check_layout(*option)
    rows = differences(one, measure(*drawn, prices), other, measure(*option, prices))
    assert len({row.name for row in rows}) == len(rows)
    return {row.name: row for row in rows}


def _assert_figures(rows: dict[str, Difference], expected: dict[str, tuple[float, float]]) -> None:
    """Both values, their difference and its share of the drawn one."""
    assert set(rows) == set(expected)
    for name, (drawn, option) in expected.items():
        row = rows[name]
        close = STRENGTH if row.kind in ("moment", "percent") else EXACT
        assert row.drawn == pytest.approx(drawn, rel=close), name
        assert row.option == pytest.approx(option, rel=close), name
        # A difference of two figures is less exact, relative to itself, than they are.
        assert row.change == pytest.approx(option - drawn, rel=1e-5, abs=1e-9), name
        if row.kind == "percent":
            assert row.percent is None, name
        else:
            assert row.percent == pytest.approx(100 * (option - drawn) / drawn, abs=1e-5), name


# ---------------------------------------------------------------- in-lb, ACI 318-19

GRADE_80 = Steel(edition=edition("ACI 318-19"), fy=80_000.0, name="A615-80")


def test_figures_by_hand() -> None:
    """14 x 24 in, 4000 psi, #4: 4 #8 / 2 #8 of 60 ksi against 3 #9 of 80 ksi, ACI 318-19.

    Stirrup inside 2.0 in from each face; corner bars 1.0 in (2 ds) further in, 8 in apart.
    """
    root = math.sqrt(4000.0)
    # Layer 1 at 24 - 2.5 = 21.5 in, layer 2 at 2 in less.
    drawn_d, option_d = (4 * 21.5 + 2 * 19.5) / 6, 24.0 - 2.0 - 0.564
    drawn_a, option_a = 4.74 * 60.0 / (3.4 * 14.0), 3.0 * 80.0 / (3.4 * 14.0)
    drawn_M = 0.9 * 4.74 * 60e3 * (drawn_d - drawn_a / 2)
    option_M = 0.9 * 3.0 * 80e3 * (option_d - option_a / 2)
    # 25.4.2.4: cb is half the 2 in between layers, or half the 4 in between bars.
    drawn_ld = 3 / 40 * 60e3 / root * 1.0 / (1.0 / 1.0) * 1.0
    option_ld = 3 / 40 * 80e3 / root * 1.15 / (2.0 / 1.128) * 1.128
    # 25.4.3.1: psi_r 1.6, psi_o 1.25, psi_c 4000/15000 + 0.6.
    hook = 1.6 * 1.25 * (4.0 / 15.0 + 0.6) / (55.0 * root)
    rows = _rows(
        (us_section(), us_layout("4 #8", "2 #8")), (us_section(steel=GRADE_80), us_layout("3 #9"))
    )
    _assert_figures(
        rows,
        {
            "steel mass": (6 * 2.670, 3 * 3.400),
            "bars": (6, 3),
            "sizes": (1, 1),
            "layers": (2, 1),
            "relative labour": (16.02, 10.20),
            "d": (drawn_d, option_d),
            "phi Mn": (drawn_M, option_M),
            "reserve over Mu": (100 * (drawn_M / 3e6 - 1), 100 * (option_M / 3e6 - 1)),
            "steel area": (4.74, 3.0),
            # 9.6.1.2: 200 psi, more than 3 sqrt(4000) = 190 psi.
            "minimum steel": (200 * 14 * drawn_d / 60e3, 200 * 14 * option_d / 80e3),
            "bar spacing": (8 / 3, 4.0),
            # 24.3.2: 15 (40/fs) - 2.5 * 2 in, fs 40 and 53.3 ksi.
            "largest spacing, 24.3": (10.0, 6.25),
            "smallest clear gap": (8 / 3 - 1.0, 4.0 - 1.128),
            "straight development": (drawn_ld, option_ld),
            "hooked development, no ties": (60e3 * hook, 80e3 * hook * 1.128**1.5),
            "class B lap": (1.3 * drawn_ld, 1.3 * option_ld),
            # 9.7.6.4.3: the web's 14 in, less than 16 db and 48 ds.
            "stirrup spacing if in compression": (14.0, 14.0),
        },
    )
    assert rows["straight development"].drawn == pytest.approx(71.15, abs=5e-3)
    assert rows["phi Mn"].option == pytest.approx(340.5 * 12e3, rel=2e-4)
    assert rows["steel mass"].percent == pytest.approx(-36.33, abs=5e-3)
    kinds = {"length", "area", "moment", "mass_per_length", "percent", "count"}
    assert {row.kind for row in rows.values()} == kinds


# ---------------------------------------------------------------- SI, ACI 318M-14, top bars


def test_figures_by_hand_si() -> None:
    """Hogging, 28 MPa, 420 MPa, No. 13: 4 No. 25 in 350 x 600 against 5 No. 22 in 350 x 550 mm.

    Stirrup inside 52.7 mm from each face; corner bars 25.4 mm (2 ds) further in, 193.8 mm apart;
    more than 300 mm of concrete below the bars: psi_t 1.3.
    """
    section = si_section(code="ACI 318M-14", Mu=-300e6, aggregate=19.0)
    lower = replace(section, outline=Outline(web=350.0, depth=550.0))
    root = math.sqrt(28.0)
    drawn_d, option_d = 600.0 - 52.7 - 12.7, 550.0 - 52.7 - 11.1
    block = 0.85 * 28.0 * 350.0
    drawn_M = 0.9 * 2040 * 420 * (drawn_d - 2040 * 420 / block / 2)
    option_M = 0.9 * 1935 * 420 * (option_d - 1935 * 420 / block / 2)
    # 25.4.2.3: cb is half the spacing, 193.8/3 and 193.8/4 mm; psi_s 1.0 above No. 19.
    drawn_ld = 420 / (1.1 * root) * 1.3 / (32.3 / 25.4) * 25.4
    option_ld = 420 / (1.1 * root) * 1.3 / (24.225 / 22.2) * 22.2
    _assert_figures(
        _rows((section, si_layout("4 25")), (lower, si_layout("5 22"))),
        {
            "steel mass": (4 * 3.973, 5 * 3.042),
            "bars": (4, 5),
            "sizes": (1, 1),
            "layers": (1, 1),
            "relative labour": (15.892, 1.17 * 15.21),
            "d": (drawn_d, option_d),
            "phi Mn": (drawn_M, option_M),
            "reserve over Mu": (100 * (drawn_M / 300e6 - 1), 100 * (option_M / 300e6 - 1)),
            "steel area": (2040, 1935),
            # 9.6.1.2: 1.4 MPa, more than 0.25 sqrt(28) = 1.32 MPa.
            "minimum steel": (1.4 * 350 * drawn_d / 420, 1.4 * 350 * option_d / 420),
            "bar spacing": (193.8 / 3, 193.8 / 4),
            # 24.3.2: 380 (280/fs) - 2.5 * 52.7 mm, fs 280 MPa.
            "largest spacing, 24.3": (248.25, 248.25),
            "smallest clear gap": (64.6 - 25.4, 48.45 - 22.2),
            "straight development": (drawn_ld, option_ld),
            # 25.4.3.1 of the 2014 edition: 0.24 fy/sqrt(f'c) db, nothing for top bars.
            "hooked development, no ties": (
                0.24 * 420 / root * 25.4,
                0.24 * 420 / root * 22.2,
            ),
            "class B lap": (1.3 * drawn_ld, 1.3 * option_ld),
            # 9.7.6.4.3: the web's 350 mm, less than 16 db and 48 ds.
            "stirrup spacing if in compression": (350.0, 350.0),
        },
    )


# ---------------------------------------------------------------- parts


def test_tie_spacing() -> None:
    """ACI 318-19, 9.7.6.4.3: 16 db = 10 in for #5; 48 ds = 18 in for #3; the least dimension."""
    section = us_section(outline=Outline(web=20.0, depth=24.0))
    small_ties = replace(section, stirrup=inch_bar("#3"))
    assert tie_spacing(section, inch_bar("#5")) == 10.0
    assert tie_spacing(small_ties, inch_bar("#11")) == 18.0
    assert tie_spacing(section, inch_bar("#11")) == 20.0
    assert tie_spacing(us_section(outline=Outline(web=30.0, depth=14.0)), inch_bar("#11")) == 14.0


def test_tie_spacing_takes_the_smallest_bar() -> None:
    """2 #8 + 2 #5: the #5 decide, 10 in."""
    rows = _rows((us_section(), us_layout("4 #8")), (us_section(), us_layout("2 #8 + 2 #5")))
    assert rows["stirrup spacing if in compression"].option == 10.0


def test_anchorage_takes_the_largest_bar() -> None:
    """2 #9 + 2 #7: length of the #9; half of the 8 in less two bars between them is cb."""
    checked = check_layout(us_section(), us_layout("2 #9 + 2 #7"))
    # Equal gaps: 8 in between corner centres less 1.128 in and 2 * 0.875 in, over three.
    gap = (8.0 - 1.128 - 2 * 0.875) / 3
    cb = (gap + (1.128 + 0.875) / 2) / 2
    expected = 3 / 40 * 60e3 / math.sqrt(4000.0) / (cb / 1.128) * 1.128
    assert anchorage(checked).straight == pytest.approx(expected, rel=EXACT)


def test_lengths_have_their_least_values() -> None:
    """ACI 318-19: ld and lap at least 12 in, ldh at least 8 db and 6 in."""
    section = us_section(fc=10_000.0, outline=Outline(web=40.0, depth=30.0), cover=3.0)
    found = anchorage(check_layout(section, us_layout("2 #3")))
    ldh = 60e3 * 1.6 * 1.25 / (55.0 * 100.0) * 0.375**1.5
    assert ldh < 6.0
    # 3/40 * 60000/100 * 0.8/2.5 * 0.375 = 5.4 in; 1.3 of it is below 12 in as well.
    assert (found.straight, found.hooked, found.lap) == (12.0, 6.0, 12.0)


def test_no_lap_above_no_11() -> None:
    """ACI 318-19, 25.5.1.1: #14 is not lapped; there is no figure, difference or share."""
    rows = _rows((us_section(), us_layout("4 #8")), (us_section(), us_layout("2 #14")))
    lap = rows["class B lap"]
    assert lap.drawn is not None
    assert (lap.option, lap.change, lap.percent) == (None, None, None)
    back = _rows((us_section(), us_layout("2 #14")), (us_section(), us_layout("4 #8")))
    assert (back["class B lap"].drawn, back["class B lap"].change) == (None, None)


def test_single_bar_has_no_gap() -> None:
    """A drawing with one bar has no gap between bars, and no infinite one."""
    rows = _rows((us_section(), us_layout("1 #8")), (us_section(), us_layout("2 #8")))
    gap = rows["smallest clear gap"]
    assert (gap.drawn, gap.change, gap.percent) == (None, None, None)
    assert gap.option == pytest.approx(7.0)
    spacing = rows["bar spacing"]
    assert (spacing.drawn, spacing.option, spacing.percent) == (0.0, 8.0, None)


def test_largest_bars_above_smaller_ones() -> None:
    """A drawing may have 2 #9 over 4 #7: their own cb and db count.

    Centres at 2 + 0.4375 in and 2 + 0.875 + 1 + 0.564 in from the face: cb is half of 2.0015 in.
    """
    checked = check_layout(us_section(), us_layout("4 #7", "2 #9"))
    cb = (0.4375 + 1.0 + 0.564) / 2
    expected = 3 / 40 * 60e3 / math.sqrt(4000.0) / (cb / 1.128) * 1.128
    assert anchorage(checked).straight == pytest.approx(expected, rel=EXACT)


@pytest.mark.parametrize("units", ["us", "si"])
def test_money_and_carbon_only_with_prices(units: str) -> None:
    """Two more rows with prices: the typical figures of both, and their difference."""
    section = us_section() if units == "us" else si_section()
    one, other = (
        (us_layout("4 #8", "2 #8"), us_layout("3 #9"))
        if units == "us"
        else (si_layout("4 25", "2 25"), si_layout("3 29"))
    )
    bare = _rows((section, one), (section, other))
    rows = _rows((section, one), (section, other), priced=True)
    assert set(rows) - set(bare) == {"placed cost", "carbon"}
    prices = price_list("demo", units)
    figures = [measure(section, layout, prices) for layout in (one, other)]
    costs = [figure.cost.typical for figure in figures if figure.cost is not None]
    carbons = [figure.carbon.typical for figure in figures if figure.carbon is not None]
    for name, kind, values in (("placed cost", "money", costs), ("carbon", "carbon", carbons)):
        row = rows[name]
        assert row.kind == kind
        assert [row.drawn, row.option] == values
        assert row.change == values[1] - values[0] < 0.0
        assert row.percent == pytest.approx(100 * (values[1] / values[0] - 1), rel=1e-9)


def test_a_section_against_itself_changes_nothing() -> None:
    """All differences are zero, all shares zero or none, nothing has to be agreed to."""
    section, layout = us_section(), us_layout("4 #8", "2 #8")
    rows = _rows((section, layout), (section, layout), priced=True)
    assert {row.change for row in rows.values()} == {0.0}
    assert {row.percent for row in rows.values()} == {0.0, None}
    checked = check_layout(section, layout)
    assert points_to_accept(checked, checked, ()) == ()


# ---------------------------------------------------------------- points to accept


@dataclass(frozen=True)
class _Pair:
    """A drawn layout and an option: layers, and what differs in the section."""

    drawn: tuple[str, ...]
    option: tuple[str, ...]
    before: dict[str, Any]
    after: dict[str, Any]
    levers: tuple[tuple[str, str, str], ...] = ()

    def points(self) -> tuple[str, ...]:
        one = _checked(self.before, self.drawn)
        return points_to_accept(one, _checked(self.after, self.option), self.levers)


def _checked(changes: dict[str, Any], layers: tuple[str, ...]) -> CheckedLayout:
    return check_layout(us_section(**changes), us_layout(*layers))


def _pair(drawn: str, option: str, **changes: Any) -> _Pair:
    """Pair of one section, layers parted by a stroke."""
    one, other = (tuple(text.split(" / ")) for text in (drawn, option))
    return _Pair(one, other, changes, changes)


def _lever(key: str, old: str, new: str, **after: Any) -> _Pair:
    return _Pair(("4 #8",), ("4 #8",), {}, after, ((key, old, new),))


NARROW = Outline(web=12.0, depth=24.0)
LOWER = Outline(web=14.0, depth=22.0)
# Start of a point, how it goes on, a pair that has it, a pair that has none of its kind.
POINTS: dict[str, tuple[str, str, _Pair, _Pair]] = {
    "grade": (
        "grade ",
        "A615-80 in place of A615-60: availability",
        _lever("steel", "A615-60", "A615-80", fy=80_000.0),
        _pair("4 #8", "3 #9"),
    ),
    "stirrup": (
        "stirrup ",
        "#3 in place of #4: shear",
        _lever("stirrup", "#4", "#3", stirrup=inch_bar("#3")),
        _pair("4 #8", "3 #9"),
    ),
    "width": (
        "web ",
        "12 in wide in place of 14 in: formwork",
        _lever("width", "14 in", "12 in", outline=NARROW),
        _pair("4 #8", "3 #9"),
    ),
    "depth": (
        "depth ",
        "22 in in place of 24 in: headroom",
        _lever("depth", "24 in", "22 in", outline=LOWER),
        _pair("4 #8", "3 #9"),
    ),
    "bars": (
        "bars ",
        "3 #9 in place of 4 #8 / 2 #8",
        _pair("4 #8 / 2 #8", "3 #9"),
        _lever("depth", "24 in", "22 in", outline=LOWER),
    ),
    # ld 53.36 in (cb 1.333 in) against 71.15 in (cb 1.0 in), by the formula of the test above.
    "straight": (
        "straight development ",
        "grows from 53.36 to 71.15 in: ",
        _pair("4 #8", "4 #8 / 2 #8"),
        _pair("4 #8 / 2 #8", "4 #8"),
    ),
    "lap": (
        "class B lap ",
        "grows from 69.37 to 92.5 in: ",
        _pair("4 #8", "4 #8 / 2 #8"),
        _pair("4 #8 / 2 #8", "4 #8"),
    ),
    # 29.90 in times 1.128^1.5.
    "hook": (
        "hooked development ",
        "grows from 29.9 to 35.82 in: ",
        _pair("4 #8", "3 #9"),
        _pair("3 #9", "4 #8"),
    ),
    "no lap": (
        "bars above ",
        "No. 11 may not be lapped (25.5.1.1)",
        _pair("4 #8", "2 #14"),
        _pair("4 #8", "2 #11"),
    ),
    "no lap before": (
        "bars above ",
        "No. 11 may not be lapped (25.5.1.1)",
        _pair("4 #8", "2 #18"),
        _pair("3 #14", "2 #14"),
    ),
    "d": (
        "d ",
        "falls from 21.5 to 20.83 in: shear",
        _pair("4 #8", "4 #8 / 2 #8"),
        _pair("4 #8 / 2 #8", "4 #8"),
    ),
    "area": (
        "less steel",
        ": deflection",
        _pair("4 #8 / 2 #8", "4 #8"),
        _pair("4 #8", "4 #8 / 2 #8"),
    ),
    "ties": (
        "smaller bars",
        ": where they are counted",
        _pair("4 #8", "6 #6"),
        _pair("6 #6", "4 #8"),
    ),
    "smallest of two sizes": (
        "smaller bars",
        ": where they are counted",
        _pair("3 #9", "2 #9 + 2 #6"),
        _pair("2 #9 + 2 #6", "4 #6"),
    ),
    # 0.9 * 60 As (d - As/0.7933/2)/12 over 250 kip*ft: As 3.16 and 3.00 in2, d 21.5 and 21.436 in.
    "reserve": (
        "reserve over Mu ",
        "falls from 11.0 to 5.5 %",
        _pair("4 #8", "3 #9"),
        _pair("3 #9", "4 #8"),
    ),
    "transverse": (
        "stirrups along development",
        " and laps: Ktr = 0 in; ",
        _Pair(("4 #8",), ("4 #8",), {}, {"fy": 80_000.0}),
        _Pair(("4 #8",), ("4 #8",), {"fy": 80_000.0}, {"fy": 80_000.0}),
    ),
    # 9.7.1.4 is new in 2019.
    "transverse by edition": (
        "stirrups along development",
        " and laps: Ktr = 0 in; ",
        _Pair(("3 #9",), ("3 #9",), {"fy": 60_000.0}, {"fy": 100_000.0}),
        _Pair(
            ("3 #9",),
            ("3 #9",),
            {"code": "ACI 318-14"},
            {"code": "ACI 318-14", "fy": 80_000.0},
        ),
    ),
    "gap": (
        "clear gap ",
        "falls from 1.667 to 1 in",
        _pair("4 #8", "5 #8"),
        _pair("5 #8", "4 #8"),
    ),
}


@pytest.mark.parametrize("name", POINTS)
def test_points_appear_when_they_should(name: str) -> None:
    """Each point is there for one pair, once, and not for another."""
    start, rest, has, has_not = POINTS[name]
    (there,) = [point for point in has.points() if point.startswith(start)]
    assert there.removeprefix(start).startswith(rest)
    assert not any(point.startswith(start) for point in has_not.points())


def test_what_grows_needs_cut_offs_checked() -> None:
    """Each growing length says where to look."""
    points = _pair("4 #8", "4 #8 / 2 #8").points()
    grown = [point for point in points if " grows from " in point]
    assert len(grown) == 2
    assert all(point.endswith("cut-offs and ends to be checked") for point in grown)


def test_levers_and_bars_come_first() -> None:
    """Grade, stirrup, outline in their order, then the bars, then what follows from them."""
    levers = (("steel", "A615-60", "A615-80"), ("width", "14 in", "12 in"))
    pair = _Pair(("4 #8",), ("3 #9",), {}, {"fy": 80_000.0, "outline": NARROW}, levers)
    points = pair.points()
    assert [point.split(" ")[0] for point in points[:3]] == ["grade", "web", "bars"]
    assert len(points) > 4


def test_points_in_si() -> None:
    """Lengths in mm: ld of 4 No. 25 and 4 / 2 No. 25, cb 32.3 and 25.2 mm, ACI 318M-19."""
    section = si_section()
    one, other = (
        check_layout(section, si_layout(*layers)) for layers in (["4 25"], ["4 25", "2 25"])
    )
    first = 420 / (1.1 * math.sqrt(28.0)) / (32.3 / 25.4) * 25.4
    second = 420 / (1.1 * math.sqrt(28.0)) / (25.2 / 25.4) * 25.4
    text = f"straight development grows from {first:.0f} to {second:.0f} mm: "
    assert [point for point in points_to_accept(one, other, ()) if point.startswith(text)]


@pytest.mark.parametrize(
    ("layers", "after"),
    [
        ("3 #9", {"outline": NARROW}),
        ("4 #8", {"outline": NARROW}),
        ("4 #8", {"outline": Outline(web=14.0, depth=12.0)}),
    ],
)
def test_larger_bars_are_not_called_smaller(layers: str, after: dict[str, Any]) -> None:
    """Stirrups stand closer in a narrower web; the bars are as large or larger all the same."""
    pair = _Pair(("4 #8",), (layers,), {}, after)
    assert not [point for point in pair.points() if point.startswith("smaller bars")]
