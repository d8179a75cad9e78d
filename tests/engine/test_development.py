"""Development of straight bars and hooks, and laps.

Where no source is named a figure is derived by hand from the equation of the clause: ACI 318-14
25.4.2.3, 25.4.2.2, 25.4.3.1, 25.5.2.1; ACI 318-19 25.4.2.4, 25.4.2.3, 25.4.3.1, 25.5.2.1. The
metric divisors 1.1, 1.7, 1.4 and 23 follow from the inch ones by conversion and rounding, 2.1
and 0.24 as reprinted in texts to ACI 318M; 1/15,000 and 1/105 in psi_c from memory.
"""

from __future__ import annotations

import dataclasses
import math
from typing import Any

import pytest

from catalogs import Bar
from engine import (
    Concrete,
    Development,
    OutOfRangeError,
    Steel,
    edition,
    hooked_length,
    lap_length,
    short_form_lap_length,
    short_form_length,
    straight_length,
)
from engine.development_rules import development_rules
from tests.engine.builders import (
    CODES,
    INCH,
    METRIC,
    inch_bar,
)


def materials(
    code: str, fc: float | None = None, fy: float | None = None, lightweight: float = 1.0
) -> tuple[Concrete, Steel]:
    """Return 4000 psi and Grade 60, or 28 MPa and Grade 420, some figures changed."""
    inch = edition(code).units == "us"
    concrete = Concrete(
        edition=edition(code), fc=fc or (4000.0 if inch else 28.0), lightweight=lightweight
    )
    return concrete, Steel(edition=edition(code), fy=fy or (60_000.0 if inch else 420.0))


def bar_of(code: str, number: int) -> Bar:
    """Return a bar by its inch number, in the edition's units."""
    metric = {3: "10", 4: "13", 6: "19", 7: "22", 8: "25", 11: "36", 14: "43", 18: "57"}
    return inch_bar(f"#{number}") if edition(code).units == "us" else METRIC.bar(metric[number])


def straight(code: str, number: int = 8, **changes: Any) -> Development:
    """Return ld of a bottom bar with the largest confinement, some figures changed."""
    kept = {name: changes.pop(name) for name in ("fc", "fy", "lightweight") if name in changes}
    given: dict[str, Any] = {"confinement": 2.5, "top": False}
    return straight_length(*materials(code, **kept), bar_of(code, number), **(given | changes))


def short(code: str, number: int = 8, **changes: Any) -> Development:
    """Return ld of a bottom bar by the favourable row of the short form, some figures changed."""
    kept = {name: changes.pop(name) for name in ("fc", "fy", "lightweight") if name in changes}
    given: dict[str, Any] = {"favourable": True, "top": False}
    return short_form_length(*materials(code, **kept), bar_of(code, number), **(given | changes))


def hook(code: str, number: int = 8, **changes: Any) -> Development:
    """Return ldh of a hook of which nothing is known, some figures changed."""
    kept = {name: changes.pop(name) for name in ("fc", "fy", "lightweight") if name in changes}
    return hooked_length(*materials(code, **kept), bar_of(code, number), **changes)


# ---------------------------------------------------------------- figures of the editions


@pytest.mark.parametrize(
    ("codes", "figures"),
    [
        (
            CODES[:2],
            {
                "root_cap": 100.0,  # 25.4.1.4
                "favourable": (25.0, 20.0),  # Table 25.4.2.2 (2014), 25.4.2.3 (2019)
                "transverse": 40.0,  # 25.4.2.3 (2014), 25.4.2.4 (2019)
                "least": 12.0,  # 25.4.2.1, 25.5.2.1
                "fresh_concrete": 12.0,  # Table 25.4.2.4 (2014), 25.4.2.5 (2019)
            },
        ),
        (
            CODES[2:],
            {
                "root_cap": 8.3,
                "general": 1.1,
                "favourable": (2.1, 1.7),
                "other": (1.4, 1.1),
                "transverse": 40.0,  # from memory; exact conversion gives 40.6
                "least": 300.0,
                "fresh_concrete": 300.0,
            },
        ),
    ],
)
def test_figures_shared_by_both_years(codes: tuple[str, ...], figures: dict[str, Any]) -> None:
    """ACI 318 and ACI 318M keep their own rounded figures from 2014 to 2019."""
    for code in codes:
        rules = development_rules(edition(code))
        assert {name: getattr(rules, name) for name in figures} == figures


@pytest.mark.parametrize("code", CODES[:2])
def test_inch_equations_as_printed(code: str) -> None:
    """3/40 fy in the general equation, 3 fy/50 and 3 fy/40 in the second row."""
    rules = development_rules(edition(code))
    assert 1.0 / rules.general == pytest.approx(3 / 40, rel=1e-15)
    assert [1.0 / value for value in rules.other] == pytest.approx([3 / 50, 3 / 40], rel=1e-15)


@pytest.mark.parametrize(
    ("field", "last", "following"), [("small_bar", 6, 7), ("largest_lapped", 11, 14)]
)
@pytest.mark.parametrize("code", CODES)
def test_limits_lie_between_two_sizes(code: str, field: str, last: int, following: int) -> None:
    """A limit stated as a bar size falls between that size and the next."""
    limit = getattr(development_rules(edition(code)), field)
    assert bar_of(code, last).diameter < limit < bar_of(code, following).diameter


@pytest.mark.parametrize(
    ("code", "general", "table"),
    [
        ("ACI 318-14", "25.4.2.3", "Table 25.4.2.2"),
        ("ACI 318-19", "25.4.2.4", "Table 25.4.2.3"),
        ("ACI 318M-14", "25.4.2.3", "Table 25.4.2.2"),
        ("ACI 318M-19", "25.4.2.4", "Table 25.4.2.3"),
    ],
)
def test_clauses(code: str, general: str, table: str) -> None:
    """The clauses moved by one when psi_g came in."""
    assert (straight(code).clause, short(code).clause) == (general, table)
    assert hook(code).clause == "25.4.3.1"
    lap = lap_length(*materials(code), bar_of(code, 8), confinement=2.5, top=False)
    assert lap.clause == "Table 25.5.2.1"


# ---------------------------------------------------------------- straight bars


@pytest.mark.parametrize("code", CODES[:2])
@pytest.mark.parametrize(
    ("number", "db", "psi_s"), [(6, 0.75, 0.8), (7, 0.875, 1.0), (8, 1.0, 1.0)]
)
def test_general_equation_in_inches(code: str, number: int, db: float, psi_s: float) -> None:
    """(3/40) 60,000/sqrt(4000) psi_s/1.8 db."""
    found = straight(code, number, confinement=1.8)
    expected = 3 / 40 * 60_000 / math.sqrt(4000) * psi_s / 1.8 * db
    assert found.unlimited == pytest.approx(expected, rel=1e-12)
    assert found.length == found.unlimited
    assert found.factors["psi_s"] == psi_s
    assert found.factors["(cb + Ktr)/db"] == 1.8


@pytest.mark.parametrize("code", CODES[2:])
@pytest.mark.parametrize(("number", "db", "psi_s"), [(6, 19.1, 0.8), (7, 22.2, 1.0)])
def test_general_equation_in_millimetres(code: str, number: int, db: float, psi_s: float) -> None:
    """420/(1.1 sqrt(28)) psi_s/1.8 db."""
    found = straight(code, number, confinement=1.8)
    expected = 420 / (1.1 * math.sqrt(28)) * psi_s / 1.8 * db
    assert found.length == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize("code", CODES[:2])
@pytest.mark.parametrize(
    ("number", "favourable", "factor"),
    [(6, True, 1 / 25), (7, True, 1 / 20), (6, False, 3 / 50), (7, False, 3 / 40)],
)
def test_short_form_in_inches(code: str, number: int, favourable: bool, factor: float) -> None:
    """Four cells of the table; psi_s is built in."""
    found = short(code, number, favourable=favourable)
    db = bar_of(code, number).diameter
    assert found.length == pytest.approx(factor * 60_000 / math.sqrt(4000) * db, rel=1e-12)
    assert "psi_s" not in found.factors


@pytest.mark.parametrize("code", CODES[2:])
@pytest.mark.parametrize(
    ("number", "favourable", "divisor"),
    [(6, True, 2.1), (7, True, 1.7), (6, False, 1.4), (7, False, 1.1)],
)
def test_short_form_in_millimetres(
    code: str, number: int, favourable: bool, divisor: float
) -> None:
    """The same cells in ACI 318M."""
    found = short(code, number, favourable=favourable)
    db = bar_of(code, number).diameter
    assert found.length == pytest.approx(420 / (divisor * math.sqrt(28)) * db, rel=1e-12)


@pytest.mark.parametrize("code", CODES)
@pytest.mark.parametrize("number", [6, 7])
def test_short_form_is_the_general_equation_at_two_confinements(code: str, number: int) -> None:
    """The rows stand for (cb + Ktr)/db of 1.5 and 1.0; divisors are rounded, by up to 5 %."""
    for favourable, confinement in ((True, 1.5), (False, 1.0)):
        table = short(code, number, favourable=favourable).unlimited
        general = straight(code, number, confinement=confinement).unlimited
        assert table == pytest.approx(general, rel=0.05)


@pytest.mark.parametrize("code", CODES)
def test_confinement_counts_to_two_and_a_half(code: str) -> None:
    """Both sides of the limit."""
    at_limit = straight(code, confinement=2.5)
    assert straight(code, confinement=2.6) == at_limit
    assert straight(code, confinement=2.4).length == pytest.approx(
        at_limit.length * 2.5 / 2.4, rel=1e-12
    )


@pytest.mark.parametrize(("code", "cap"), [("ACI 318-19", 1e4), ("ACI 318M-19", 8.3**2)])
def test_root_of_strength_is_capped(code: str, cap: float) -> None:
    """25.4.1.4: sqrt(f'c) counts up to 100 psi (8.3 MPa), in every length."""
    for length in (straight, short, hook):
        at_cap = length(code, 18, fc=cap)
        assert length(code, 18, fc=cap * 1.2).unlimited == pytest.approx(
            at_cap.unlimited, rel=1e-12
        )
        assert length(code, 18, fc=cap * 0.99).unlimited > at_cap.unlimited * 1.004


@pytest.mark.parametrize("code", CODES)
@pytest.mark.parametrize("lightweight", [0.75, 0.85, 0.99])
def test_every_lightweight_concrete_counts_as_three_quarters(code: str, lightweight: float) -> None:
    """Tables 25.4.2.4 and 25.4.3.2 (2014), 25.4.2.5 and 25.4.3.2 (2019): 0.75 or 1.0."""
    for length in (straight, short, hook):
        found = length(code, 18, lightweight=lightweight)
        assert found.factors["lambda"] == 0.75
        assert found.unlimited == pytest.approx(length(code, 18).unlimited / 0.75, rel=1e-12)


@pytest.mark.parametrize("code", CODES)
@pytest.mark.parametrize(
    ("top", "coated", "widely_spaced", "factor"),
    [
        (False, False, False, 1.0),
        (False, False, True, 1.0),
        (True, False, False, 1.3),
        (False, True, False, 1.5),
        (False, True, True, 1.2),
        (True, True, True, 1.3 * 1.2),
        (True, True, False, 1.7),  # 1.3 x 1.5 = 1.95 need not be exceeded
    ],
)
def test_top_and_coating(
    code: str, top: bool, coated: bool, widely_spaced: bool, factor: float
) -> None:
    """psi_t, psi_e and the limit of their product; the same in the short form and in laps."""
    plain = {"top": False}
    given: dict[str, Any] = {"top": top, "coated": coated, "widely_spaced": widely_spaced}
    for length in (straight, short):
        expected = length(code, 11, **plain).unlimited * factor
        assert length(code, 11, **given).unlimited == pytest.approx(expected, rel=1e-12)
    taken = (*materials(code), bar_of(code, 11))
    expected = straight(code, 11).unlimited * factor * 1.3
    found = lap_length(*taken, confinement=2.5, **given)
    assert found.unlimited == pytest.approx(expected, rel=1e-12)
    expected = short(code, 11).unlimited * factor * 1.3
    found = short_form_lap_length(*taken, favourable=True, **given)
    assert found.unlimited == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize(
    ("code", "fy", "psi_g"),
    [
        ("ACI 318-19", 40_000.0, 1.0),
        ("ACI 318-19", 60_000.0, 1.0),
        ("ACI 318-19", 60_001.0, 1.15),
        ("ACI 318-19", 75_000.0, 1.15),
        ("ACI 318-19", 80_000.0, 1.15),
        ("ACI 318-19", 80_001.0, 1.3),
        ("ACI 318-19", 100_000.0, 1.3),
        ("ACI 318M-19", 420.0, 1.0),
        ("ACI 318M-19", 421.0, 1.15),
        ("ACI 318M-19", 550.0, 1.15),
        ("ACI 318M-19", 551.0, 1.3),
        ("ACI 318M-19", 690.0, 1.3),
    ],
)
def test_grade_factor_of_2019(code: str, fy: float, psi_g: float) -> None:
    """Table 25.4.2.5, figures from memory; a yield between two grades takes the higher one's."""
    reference = 40_000.0 if code == "ACI 318-19" else 420.0
    for length in (straight, short):
        found, base = length(code, fy=fy), length(code, fy=reference)
        assert found.factors["psi_g"] == psi_g
        assert found.unlimited == pytest.approx(base.unlimited * fy / reference * psi_g, rel=1e-12)


@pytest.mark.parametrize(("code", "fy"), [("ACI 318-14", 80_000.0), ("ACI 318M-14", 550.0)])
def test_no_grade_factor_in_2014(code: str, fy: float) -> None:
    """The length is proportional to fy alone."""
    found, base = straight(code, fy=fy), straight(code, fy=fy / 2)
    assert "psi_g" not in found.factors
    assert found.unlimited == pytest.approx(2 * base.unlimited, rel=1e-12)


@pytest.mark.parametrize(("code", "least"), [("ACI 318-14", 12.0), ("ACI 318M-19", 300.0)])
def test_least_straight_length(code: str, least: float) -> None:
    """25.4.2.1: a thin bar needs 12 in (300 mm) even where the equation gives less."""
    found = straight(code, 3)
    assert found.unlimited < least
    assert found.length == least
    assert straight(code, 8).length > least
    thin = short(code, 3, fy=40_000.0 if least == 12.0 else 280.0)
    assert thin.unlimited < least
    assert thin.length == least


@pytest.mark.parametrize("value", [0.499, -1.0, math.nan, math.inf])
def test_confinement_out_of_range(value: float) -> None:
    """A bar inside concrete that touches its neighbours has 0.5."""
    with pytest.raises(
        OutOfRangeError, match=rf"^confinement: got {value:.4g}; allowed: at least 0\.5; hint: "
    ) as caught:
        straight("ACI 318-19", confinement=value)
    assert caught.value.what == "confinement"
    assert straight("ACI 318-19", confinement=0.5).length > 0.0


def test_steel_of_another_edition() -> None:
    """Materials carry one edition."""
    concrete, _ = materials("ACI 318-14")
    _, steel = materials("ACI 318-19")
    message = r"^steel: got ACI 318-19; allowed: that of the concrete, ACI 318-14$"
    with pytest.raises(OutOfRangeError, match=message):
        straight_length(concrete, steel, inch_bar("#8"), confinement=2.0, top=False)
    with pytest.raises(OutOfRangeError, match=message):
        short_form_length(concrete, steel, inch_bar("#8"), favourable=True, top=False)
    with pytest.raises(OutOfRangeError, match=message):
        hooked_length(concrete, steel, inch_bar("#8"))


def test_bar_in_other_units() -> None:
    """A metric bar under an inch edition is refused."""
    taken = (*materials("ACI 318-19"), METRIC.bar("25"))
    message = r"^bar: 25 has si units; allowed: us$"
    with pytest.raises(OutOfRangeError, match=message):
        straight_length(*taken, confinement=2.0, top=False)
    with pytest.raises(OutOfRangeError, match=message):
        hooked_length(*taken)


def test_result_is_frozen() -> None:
    """A result cannot be changed by accident."""
    with pytest.raises(dataclasses.FrozenInstanceError):
        straight("ACI 318-19").length = 1.0  # type: ignore[misc]


# ---------------------------------------------------------------- laps


@pytest.mark.parametrize("code", CODES)
def test_classes_of_laps(code: str) -> None:
    """Table 25.5.2.1: 1.0 ld in class A, 1.3 ld in class B."""
    taken = (*materials(code), bar_of(code, 8))
    straight_ld, short_ld = straight(code).unlimited, short(code).unlimited
    for class_a, share in ((True, 1.0), (False, 1.3)):
        found = lap_length(*taken, confinement=2.5, top=False, class_a=class_a)
        assert found.length == pytest.approx(share * straight_ld, rel=1e-12)
        assert found.factors == {**straight(code).factors, "lap": share}
        found = short_form_lap_length(*taken, favourable=True, top=False, class_a=class_a)
        assert found.length == pytest.approx(share * short_ld, rel=1e-12)
    assert lap_length(*taken, confinement=2.5, top=False).factors["lap"] == 1.3
    assert short_form_lap_length(*taken, favourable=True, top=False).factors["lap"] == 1.3


@pytest.mark.parametrize("code", CODES)
def test_lap_is_of_the_length_before_its_minimum(code: str) -> None:
    """25.5.1.4 and 25.5.2.1: 1.3 times 8.5 in is 11.1 in, so 12 in and not 15.6 in."""
    least = development_rules(edition(code)).least
    found = lap_length(*materials(code), bar_of(code, 3), confinement=2.5, top=False)
    assert found.unlimited == pytest.approx(1.3 * straight(code, 3).unlimited, rel=1e-12)
    assert found.unlimited < least
    assert found.length == least


@pytest.mark.parametrize("code", CODES)
@pytest.mark.parametrize("number", [14, 18])
def test_no_lap_of_the_thickest_bars(code: str, number: int) -> None:
    """25.5.1.1: No. 11 (36) is the last; the length to develop them exists all the same."""
    assert straight(code, number).length > 0.0
    taken = (*materials(code), bar_of(code, number))
    largest = "#11" if edition(code).units == "us" else r"No\. 36"
    message = (
        rf"^bar: got {bar_of(code, number).designation} for a tension lap;"
        rf" allowed: up to {largest} \(25\.5\.1\.1\); hint: splice it mechanically$"
    )
    with pytest.raises(OutOfRangeError, match=message) as caught:
        lap_length(*taken, confinement=2.5, top=False)
    assert caught.value.what == "bar"
    with pytest.raises(OutOfRangeError, match=message):
        short_form_lap_length(*taken, favourable=True, top=False, class_a=True)


# ---------------------------------------------------------------- hooks


@pytest.mark.parametrize(
    ("conditions", "psi"),
    [
        ({}, 1.0),
        ({"coated": True}, 1.2),
        ({"side_cover": 2.5, "tail_cover": 2.0}, 0.7),
        ({"side_cover": 2.49, "tail_cover": 2.0}, 1.0),
        ({"side_cover": 2.5, "tail_cover": 1.99}, 1.0),
        ({"side_cover": 2.5, "tail_cover": math.inf}, 0.7),
        ({"tied": True}, 0.8),
        ({"side_cover": 3.0, "tail_cover": 3.0, "tied": True}, 0.56),
        ({"in_core": True}, 1.0),
    ],
)
def test_hook_of_2014_in_inches(conditions: dict[str, Any], psi: float) -> None:
    """Psi fy/(50 sqrt(f'c)) db; psi_c from 2.5 in beside and 2 in behind the hook."""
    found = hook("ACI 318-14", 11, **conditions)
    expected = psi * 60_000 / (50 * math.sqrt(4000)) * 1.41
    assert found.length == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize(
    ("conditions", "psi"),
    [
        ({}, 1.0),
        ({"side_cover": 65.0, "tail_cover": 50.0}, 0.7),
        ({"side_cover": 64.9, "tail_cover": 50.0}, 1.0),
        ({"side_cover": 65.0, "tail_cover": 49.9}, 1.0),
        ({"tied": True}, 0.8),
    ],
)
def test_hook_of_2014_in_millimetres(conditions: dict[str, Any], psi: float) -> None:
    """Psi 0.24 fy/sqrt(f'c) db; psi_c from 65 mm and 50 mm."""
    found = hook("ACI 318M-14", 11, **conditions)
    assert found.length == pytest.approx(psi * 0.24 * 420 / math.sqrt(28) * 35.8, rel=1e-12)


@pytest.mark.parametrize(
    ("conditions", "psi"),
    [
        ({}, 1.6 * 1.25),
        ({"coated": True}, 1.6 * 1.25 * 1.2),
        ({"tied": True}, 1.25),
        ({"in_core": True}, 1.6 * 1.25),
        ({"in_core": True, "side_cover": 2.5}, 1.6),
        ({"in_core": True, "side_cover": 2.49}, 1.6 * 1.25),
        ({"side_cover": 6 * 1.41}, 1.6),
        ({"side_cover": 6 * 1.41 - 0.01}, 1.6 * 1.25),
        ({"tail_cover": 9.0}, 1.6 * 1.25),
        ({"in_core": True, "side_cover": 2.5, "tied": True}, 1.0),
    ],
)
def test_hook_of_2019_in_inches(conditions: dict[str, Any], psi: float) -> None:
    """Psi psi_c fy/(55 sqrt(f'c)) db^1.5 with psi_c = 4000/15,000 + 0.6."""
    found = hook("ACI 318-19", 11, **conditions)
    expected = psi * (4 / 15 + 0.6) * 60_000 / (55 * math.sqrt(4000)) * 1.41**1.5
    assert found.length == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize(
    ("conditions", "psi"),
    [
        ({}, 2.0),
        ({"in_core": True, "side_cover": 65.0}, 1.6),
        ({"in_core": True, "side_cover": 64.9}, 2.0),
        ({"tied": True}, 1.25),
    ],
)
def test_hook_of_2019_in_millimetres(conditions: dict[str, Any], psi: float) -> None:
    """Psi psi_c fy/(23 sqrt(f'c)) db^1.5 with psi_c = 28/105 + 0.6."""
    found = hook("ACI 318M-19", 11, **conditions)
    expected = psi * (28 / 105 + 0.6) * 420 / (23 * math.sqrt(28)) * 35.8**1.5
    assert found.length == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize(
    ("code", "fc", "psi_c"),
    [
        ("ACI 318-19", 5999.0, 5999 / 15_000 + 0.6),
        ("ACI 318-19", 6000.0, 1.0),
        ("ACI 318-19", 9000.0, 1.0),
        ("ACI 318M-19", 41.9, 41.9 / 105 + 0.6),
        ("ACI 318M-19", 42.0, 1.0),
    ],
)
def test_strength_factor_of_hooks(code: str, fc: float, psi_c: float) -> None:
    """Table 25.4.3.2 of 2019: f'c/15,000 + 0.6 below 6000 psi, f'c/105 + 0.6 below 42 MPa."""
    assert hook(code, fc=fc).factors["psi_c"] == pytest.approx(psi_c, rel=1e-12)


@pytest.mark.parametrize("code", CODES)
def test_conditions_help_no_hook_above_no_11(code: str) -> None:
    """Table 25.4.3.2: every favourable row is for No. 11 (36) and smaller."""
    helped: dict[str, Any] = {
        "side_cover": 1000.0, "tail_cover": 1000.0, "in_core": True, "tied": True
    }  # fmt: skip
    assert hook(code, 14, **helped) == hook(code, 14)
    assert hook(code, 11, **helped).length < hook(code, 11).length


@pytest.mark.parametrize(
    ("code", "number", "least"),
    [
        ("ACI 318-14", 3, 6.0),
        ("ACI 318M-14", 3, 150.0),
        ("ACI 318-14", 8, 8.0),  # 0.56 x 12 in = 6.7 in at 10,000 psi
        ("ACI 318M-14", 8, 8 * 25.4),
    ],
)
def test_least_hook(code: str, number: int, least: float) -> None:
    """25.4.3.1(b) and (c): 8 db and 6 in (150 mm)."""
    fc = 10_000.0 if edition(code).units == "us" else 70.0
    found = hook(code, number, fc=fc, side_cover=99.0, tail_cover=99.0, tied=True)
    assert found.unlimited < least
    assert found.length == pytest.approx(least, rel=1e-12)


@pytest.mark.parametrize("what", ["side_cover", "tail_cover"])
@pytest.mark.parametrize("value", [-0.1, math.nan])
def test_cover_of_a_hook_out_of_range(what: str, value: float) -> None:
    """A cover is not negative."""
    given: dict[str, Any] = {what: value}
    with pytest.raises(
        OutOfRangeError, match=rf"^{what}: got {value:g}; allowed: 0 or more$"
    ) as caught:
        hooked_length(*materials("ACI 318-19"), inch_bar("#8"), **given)
    assert caught.value.what == what


@pytest.mark.parametrize(("inch", "metric"), list(zip(CODES[:2], CODES[2:], strict=True)))
@pytest.mark.parametrize("length", [straight, short, hook])
def test_inch_and_metric_editions_tell_the_same(length: Any, inch: str, metric: str) -> None:
    """The same beam in both systems: figures rounded on their own stay within 4 %."""
    for number in (4, 7, 11):
        in_mm = length(inch, number).unlimited * 25.4
        assert length(metric, number).unlimited == pytest.approx(in_mm, rel=0.04)


@pytest.mark.parametrize("code", CODES[:2])
def test_every_inch_size_has_a_length(code: str) -> None:
    """Longer for every larger size, up to the thickest bars."""
    taken = materials(code)
    for lengths in (
        [straight_length(*taken, bar, confinement=1.5, top=True) for bar in INCH.bars],
        [short_form_length(*taken, bar, favourable=False, top=True) for bar in INCH.bars],
        [hooked_length(*taken, bar) for bar in INCH.bars],
    ):
        values = [found.unlimited for found in lengths]
        assert values == sorted(set(values))
