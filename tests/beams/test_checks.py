"""Checks of a finished beam: every rule speaks, good designs pass, changed ones are caught."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import replace
from functools import cache

import pytest

from engine.beams.deep import is_deep
from engine.beams.redistribution import strain_for_share
from engine.check_row import State
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.checks import NOT_CHECKED, check_beam
from optimizer.beams.design import BeamDesign, design_beam
from optimizer.beams.variants import Face, Piece, Role
from tests.beams.jobs import beam_of

ROWS = {
    "flexural_strength",
    "shear_strength",
    "shear_section",
    "stirrup_area",
    "stirrup_spacing",
    "stirrup_legs",
    "first_stirrup",
    "stirrup_anchorage",
    "deep_beam",
    "net_tensile_strain",
    "minimum_steel",
    "clear_gap",
    "layer_gap",
    "arrangement",
    "crack_control",
    "cover",
    "side_face_steel",
    "flange_steel",
    "opposite_bars",
    "compression_ties",
    "stirrup_confinement",
    "redistribution",
    "cut_off",
    "continuing_bars",
    "cut_off_shear",
    "cut_off_minimum",
    "cut_off_cracks",
    "development",
    "bars_into_support",
    "development_at_inflection",
    "top_bars_past_inflection",
    "end_cover",
    "integrity_bottom",
    "integrity_top",
    "integrity_stirrups",
    "laps",
    "lap_gap",
    "hanger_laps",
    "deflection",
    "least_depth",
    "skin_bars",
    "flange_bars",
    "coefficients",
    "bars_hold_stirrups",
    "stock_length",
    "schedule",
}
US = ('length = "26 ft"\ndead = "1.1 kip/ft"\nlive = "0.9 kip/ft"\n',) * 2
SI = ('length = "7 m"\ndead = "16 kN/m"\nlive = "12 kN/m"\n',) * 2
COLUMN = 'below = { width = "18 in", depth = "18 in", height = "12 ft" }\n'


@cache
def designed(kind: str = "plain") -> BeamDesign:
    """Return the design of one of the beams below."""
    problems = {
        "plain": lambda: beam_of(spans=US),
        "si": lambda: beam_of("si", spans=SI),
        "slab": lambda: beam_of(
            spans=US,
            beam='slab = { thickness = "5 in", clear_left = "9 ft", clear_right = "9 ft" }\n',
            supports=(COLUMN, "", ""),
        ),
        "perimeter": lambda: beam_of(spans=US, beam='edge = "perimeter"\n'),
        "closed": lambda: beam_of(spans=US, beam="closed_stirrups = true\n"),
        "deep": lambda: beam_of(
            spans=tuple(
                'length = "34 ft"\ndepth = "42 in"\ndead = "1.4 kip/ft"\nlive = "1 kip/ft"\n'
                for _ in range(2)
            ),
        ),
        "single": lambda: beam_of(
            spans=('length = "20 ft"\ndead = "1 kip/ft"\nlive = "1 kip/ft"\n',),
            supports=("", ""),
        ),
        "moved": lambda: beam_of(spans=US, beam="redistribution = 0.1\n"),
        "coefficients": lambda: beam_of(spans=US, beam='analysis = "coefficients"\n'),
    }
    found = design_beam(problems[kind]())
    assert isinstance(found, BeamDesign), kind
    return found


def failing(design: BeamDesign) -> set[str]:
    """Ids of the rows that fail."""
    return {row.id for row in check_beam(design) if not row.ok}


def rows(design: BeamDesign, name: str) -> list[BeamCheck]:
    """Rows of an id."""
    found = [row for row in check_beam(design) if row.id == name]
    assert found
    return found


def with_pieces(
    design: BeamDesign, wanted: Callable[[Piece], bool], change: Callable[[Piece], Piece | None]
) -> BeamDesign:
    """Change, or leave out, the first of the bars looked for."""
    pieces = list(design.pieces)
    index = next(number for number, piece in enumerate(pieces) if wanted(piece))
    changed = change(pieces[index])
    pieces[index : index + 1] = [] if changed is None else [changed]
    return replace(design, pieces=tuple(pieces))


@pytest.mark.parametrize("kind", ["plain", "si", "slab", "perimeter", "closed", "moved"])
def test_good_designs_pass_every_row(kind: str) -> None:
    """A fresh design breaks no rule, and every rule has a row."""
    design = designed(kind)
    assert design.ok
    assert failing(design) == set()
    assert design.checks == check_beam(design)
    for row in design.checks:
        assert row.clause
        assert row.where
        assert row.note or row.demand is not None or row.id == "arrangement"


def test_every_rule_has_a_row() -> None:
    """All ids occur, and a beam shows each of them but those of ends that it does not have."""
    of_ends = {"continuing_bars", "cut_off_shear", "cut_off_minimum", "cut_off_cracks"}
    kinds = ("plain", "si", "slab", "perimeter", "closed", "deep", "single", "moved")
    together = set()
    for kind in kinds:
        own = {row.id for row in designed(kind).checks}
        of_tops = {"integrity_top", "top_bars_past_inflection"} if kind == "single" else set()
        assert ROWS - of_ends - of_tops <= own
        together |= own
    assert together == ROWS


def test_rows_of_a_simple_beam_by_hand() -> None:
    """20 ft, 14 in by 24 in, 1.35 and 1 kip/ft: figures worked out by hand, own example."""
    design = designed("single")
    span, w = 240.0, (1.2 * 1.35 + 1.6 * 1.0) * 1000.0 / 12.0
    bars, stop = design.pieces[0], design.pieces[1]
    assert (bars.bar.designation, bars.count, stop.bar.designation, stop.count) == (
        "#7",
        2,
        "#7",
        1,
    )
    d, s = 24.0 - 1.5 - 0.375 - 0.875 / 2.0, 10.0
    assert set(design.stirrups[0].spacings) == {s}

    row = rows(design, "flexural_strength")[0]
    assert row.at is not None
    assert row.demand == pytest.approx(w * row.at * (span - row.at) / 2.0, rel=1e-4)

    row = rows(design, "shear_strength")[0]
    shear_d = design.stirrups[0].depth  # d of 21.69 in, rounded down to a quarter or further
    assert 20.5 <= shear_d <= 21.5
    assert row.demand == pytest.approx(w * (span / 2.0 - 9.0 - shear_d), rel=1e-4)
    strength = 2.0 * math.sqrt(4000.0) * 14.0 * shear_d + 0.22 * 60_000.0 * shear_d / s
    assert row.limit == pytest.approx(0.75 * strength, rel=1e-6)
    assert row.at == pytest.approx(9.0)

    row = rows(design, "shear_section")[0]
    assert row.limit == pytest.approx(0.75 * 10.0 * math.sqrt(4000.0) * 14.0 * shear_d, rel=1e-6)
    row = rows(design, "stirrup_area")[0]
    assert (row.demand, row.limit) == pytest.approx((50.0 * 14.0 * s / 60_000.0, 0.22), rel=1e-6)
    row = rows(design, "stirrup_spacing")[0]
    assert (row.demand, row.limit) == pytest.approx((s, shear_d / 2.0), rel=1e-6)
    row = rows(design, "stirrup_legs")[0]
    assert (row.demand, row.limit) == pytest.approx((14.0 - 3.0 - 0.375, shear_d), rel=1e-6)
    row = rows(design, "minimum_steel")[0]
    assert (row.demand, row.limit) == pytest.approx((200.0 * 14.0 * d / 60_000.0, 1.8), rel=1e-6)
    row = rows(design, "bars_into_support")[0]
    assert (row.demand, row.limit) == pytest.approx((0.6, 1.2), rel=1e-6)
    row = rows(design, "least_depth")[0]
    assert (row.demand, row.limit) == pytest.approx((15.0, 24.0))
    assert row.state is State.OK
    row = rows(design, "deep_beam")[0]
    assert (row.demand, row.limit, row.state) == (96.0, 222.0, State.OK)

    # Two bars are enough from where w x (L - x)/2 falls to their phi Mn.
    a = 1.2 * 60_000.0 / (0.85 * 4000.0 * 14.0)
    two = 0.9 * 1.2 * 60_000.0 * (d - a / 2.0)
    point = span / 2.0 - math.sqrt(span**2 / 4.0 - 2.0 * two / w)
    row = rows(design, "cut_off")[0]
    assert row.demand == pytest.approx(d, rel=1e-6)
    assert row.limit == pytest.approx(point - stop.start, abs=0.02)
    # Bars of 0.875 in need 60 000/(20 sqrt(4000)) db, as bottom bars above No. 6.
    ld = 60_000.0 / (20.0 * math.sqrt(4000.0)) * 0.875
    held = rows(design, "continuing_bars")
    assert all(row.state is State.NOT_APPLICABLE for row in held)  # they end in hooks
    assert stop.develop_start <= ld


TAMPERED: dict[str, tuple[str, Callable[[BeamDesign], BeamDesign], set[str], set[str]]] = {
    "a lap too short": (
        "plain",
        lambda d: with_pieces(
            d,
            lambda p: p.face is Face.BOTTOM and p.role is Role.RUN,
            lambda p: replace(p, end=p.end - 2.0),
        ),
        {"laps"},
        set(),
    ),
    "hangers forgotten": (
        "plain",
        lambda d: with_pieces(d, lambda p: p.role is Role.HANGER, lambda _: None),
        {"bars_hold_stirrups", "schedule"},
        set(),
    ),
    "hangers too short": (
        "plain",
        lambda d: with_pieces(
            d, lambda p: p.role is Role.HANGER, lambda p: replace(p, end=p.end - 2.0)
        ),
        {"hanger_laps"},
        set(),
    ),
    "a hook forgotten": (
        "plain",
        lambda d: with_pieces(
            d, lambda p: p.hook_start and p.role is Role.RUN, lambda p: replace(p, hook_start=False)
        ),
        {"development", "schedule"},
        {"flexural_strength", "continuing_bars", "development_at_inflection"},
    ),
    "bars into the cover": (
        "plain",
        lambda d: with_pieces(d, lambda p: p.hook_start, lambda p: replace(p, start=-8.0)),
        {"end_cover"},
        {"schedule"},
    ),
    "bars that stop too soon": (
        "single",
        lambda d: with_pieces(
            d, lambda p: p.role is Role.STOP, lambda p: replace(p, start=p.start + 30.0)
        ),
        {"cut_off", "flexural_strength"},
        {"cut_off_shear", "cut_off_minimum", "cut_off_cracks"},
    ),
    "bars that stop left out": (
        "single",
        lambda d: with_pieces(d, lambda p: p.role is Role.STOP, lambda _: None),
        {"flexural_strength", "schedule"},
        {"crack_control"},
    ),
    "top bars too short": (
        "plain",
        lambda d: with_pieces(
            d,
            lambda p: p.face is Face.TOP and p.role is Role.RUN,
            lambda p: replace(p, start=p.start + 6.0),
        ),
        {"top_bars_past_inflection", "hanger_laps"},
        {"bars_hold_stirrups"},
    ),
    "bottom bars short of the support": (
        "closed",
        lambda d: with_pieces(
            d,
            lambda p: p.face is Face.BOTTOM and p.role is Role.RUN,
            lambda p: replace(p, start=p.start + 2.0),
        ),
        {"bars_into_support"},
        {"development_at_inflection", "flexural_strength"},
    ),
    "through bars left out": (
        "perimeter",
        lambda d: with_pieces(d, lambda p: p.role is Role.THROUGH, lambda _: None),
        {"integrity_top", "bars_hold_stirrups", "schedule"},
        {
            "flexural_strength",
            "minimum_steel",
            "cut_off",
            "cut_off_minimum",
            "cut_off_cracks",
            "top_bars_past_inflection",
        },
    ),
    "skin bars left out": (
        "deep",
        lambda d: with_pieces(d, lambda p: p.role is Role.SKIN, lambda _: None),
        {"skin_bars", "schedule"},
        set(),
    ),
    "fewer skin bars": (
        "deep",
        lambda d: with_pieces(d, lambda p: p.role is Role.SKIN, lambda p: replace(p, count=2)),
        {"skin_bars", "schedule"},
        set(),
    ),
    "flange bars left out": (
        "slab",
        lambda d: with_pieces(d, lambda p: p.role is Role.FLANGE, lambda _: None),
        {"flange_bars", "schedule"},
        set(),
    ),
    "stirrups too far apart": (
        "plain",
        lambda d: replace(d, stirrups=(replace(d.stirrups[0], spaces=(0, 24, 0)), *d.stirrups[1:])),
        {"stirrup_spacing", "schedule"},
        {"shear_strength", "cut_off_shear"},
    ),
    "stirrups that start late": (
        "plain",
        lambda d: replace(d, stirrups=(replace(d.stirrups[0], first=9.0), *d.stirrups[1:])),
        {"first_stirrup"},
        set(),
    ),
    "no closed stirrups over part of a span": (
        "closed",
        lambda d: replace(d, stirrups=(replace(d.stirrups[0], clear=250.0), *d.stirrups[1:])),
        {"integrity_stirrups"},
        {"shear_strength", "stirrup_spacing"},
    ),
    "stock too short": (
        "plain",
        lambda d: replace(d, problem=replace(d.problem, stock=(240.0,))),
        {"stock_length"},
        set(),
    ),
    "three times the shear": (
        "plain",
        lambda d: replace(
            d, demands=(replace(d.demands[0], Vu=3.0 * d.demands[0].Vu), *d.demands[1:])
        ),
        {"shear_strength"},
        {
            "shear_section",
            "stirrup_spacing",
            "stirrup_legs",
            "cut_off_shear",
            "development_at_inflection",
        },
    ),
}


@pytest.mark.parametrize("name", TAMPERED)
def test_a_fault_shows_in_its_row(name: str) -> None:
    """A changed design fails in the rows that it has to, and in none that it must not."""
    kind, change, must, may = TAMPERED[name]
    found = failing(change(designed(kind)))
    assert must <= found <= must | may


def test_deflection_counts_the_limit() -> None:
    """Ten times the flexibility breaks the limit of Table 24.2.2 and nothing else."""
    design = designed()
    demand = design.demands[0]
    assert demand.deflections is not None
    unit = replace(demand.deflections, total=10.0 * demand.deflections.total)
    softer = replace(design, demands=(replace(demand, deflections=unit), *design.demands[1:]))
    assert failing(softer) == {"deflection"}
    given = replace(design, demands=(replace(demand, deflections=None), *design.demands[1:]))
    assert rows(given, "deflection")[0].state is State.NOT_APPLICABLE


def test_coefficients_are_held_to_their_conditions() -> None:
    """6.5 holds for the equal spans of the job, and is not asked of other analyses."""
    assert rows(designed("coefficients"), "coefficients")[0].state is State.OK
    assert rows(designed(), "coefficients")[0].state is State.NOT_APPLICABLE
    design = designed("coefficients")
    moved = replace(design, problem=replace(design.problem, redistribution=0.1))
    assert rows(moved, "coefficients")[0].state is State.FAILS


def test_strain_for_redistribution() -> None:
    """0.0075, or the percentage over 1000 (6.6.5.1, 6.6.5.3): 10 % asks for 0.010."""
    assert strain_for_share(0.05) == 0.0075
    assert strain_for_share(0.10) == pytest.approx(0.010)
    assert strain_for_share(0.20) == pytest.approx(0.020)
    row = next(r for r in rows(designed("moved"), "redistribution") if r.state is State.OK)
    assert row.demand == pytest.approx(0.010)


def test_deep_beams_are_named() -> None:
    """9.9.1.1: a clear span up to four depths, or a force within two depths of a face."""
    assert is_deep(96.0, 24.0, ())
    assert not is_deep(96.1, 24.0, ())
    assert is_deep(300.0, 24.0, (48.0,))
    assert is_deep(300.0, 24.0, (252.0,))
    assert not is_deep(300.0, 24.0, (150.0,))


def test_what_is_not_checked_is_no_row() -> None:
    """The list of what is left out names nothing twice."""
    assert len(set(NOT_CHECKED)) == len(NOT_CHECKED)
    assert "torsion" in NOT_CHECKED
