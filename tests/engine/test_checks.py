"""Every row of the check in every state, with the numbers that its note gives.

The beam is 14 x 24 in, 4000 psi, Grade 60, 1.5 in cover, #4 stirrup, so that bars start 2 in
from the face; 0.85 f'c b is 47.6 kip/in.
"""

from __future__ import annotations

import math
from typing import Any

import pytest

from catalogs import bar_catalog
from engine import (
    Concrete,
    Exposure,
    Flange,
    LayoutError,
    Outline,
    OutOfRangeError,
    State,
    check_layout,
    check_layouts,
    edition,
    parse_layout,
)
from engine.crack_checks import shrinkage_ratio
from engine.detailing_checks import cover_fits
from tests.engine.builders import inch_bar, row, si_layout, si_section, us_layout, us_section

BLOCK = 3400.0 * 14.0
FOUR = us_layout("4 #8")
T_BEAM = Outline(web=14.0, depth=24.0, top=Flange(width=60.0, thickness=5.0))


def capacity(area: float, d: float) -> float:
    """Return 0.9 Mn of tension-controlled Grade 60 bars with their centroid at d."""
    return 0.9 * area * 60_000 * (d - area * 60_000 / BLOCK / 2)


def test_rows_of_every_check() -> None:
    """The same rows in the same order, whether they apply or not."""
    names = [
        *("flexural_strength", "net_tensile_strain", "minimum_steel", "clear_gap", "layer_gap"),
        *("arrangement", "crack_control", "cover", "side_face_steel", "flange_steel"),
        *("opposite_bars", "compression_ties"),
    ]
    for section, layout in (
        (us_section(), FOUR),
        (us_section(outline=T_BEAM, Mu=-3e6, opposite=FOUR), us_layout("4 #8", "2 #8")),
    ):
        assert [check.id for check in check_layout(section, layout).checks] == names


def test_figures_beside_the_rows() -> None:
    """What the check reports of 4 #8 / 2 #8 under 3000 kip*in, by hand."""
    checked = check_layout(us_section(), us_layout("4 #8", "2 #8"))
    a = 4.74 * 60_000 / BLOCK
    d = (4 * 21.5 + 2 * 19.5) / 6
    required = BLOCK * (d - math.sqrt(d * d - 2 * 3e6 / 0.9 / BLOCK)) / 60_000
    assert checked.ok
    assert checked.As == pytest.approx(4.74)
    assert checked.As_required == pytest.approx(required, rel=1e-9)
    assert [checked.d, checked.dt] == pytest.approx([d, 21.5])
    assert checked.phi_Mn == pytest.approx(capacity(4.74, d), rel=1e-12)
    assert checked.Mn == pytest.approx(checked.phi_Mn / checked.phi, rel=1e-12)
    assert [checked.a, checked.c] == pytest.approx([a, a / 0.85])
    assert checked.eps_t == pytest.approx(0.003 * (21.5 - checked.c) / checked.c, rel=1e-12)
    assert checked.service_stress == pytest.approx(40_000.0)
    assert checked.largest_spacing == pytest.approx(10.0)
    assert checked.layer_depths == pytest.approx((21.5, 19.5))


def test_layer_depths_of_mixed_sizes() -> None:
    """The centroid of 2 #9 and 2 #7 on the stirrup, and of 2 #7 above the #9."""
    checked = check_layout(us_section(), us_layout("2 #9 + 2 #7", "2 #7"))
    first = 22 - (2.0 * 0.564 + 1.2 * 0.4375) / 3.2
    assert checked.layer_depths == pytest.approx((first, 24 - 2 - 1.128 - 1 - 0.4375), rel=1e-12)
    assert checked.layer_depths[0] == pytest.approx(checked.dt, rel=1e-12)


def test_several_layouts_in_order() -> None:
    """The same as one by one; none gives none."""
    section, layouts = us_section(), [FOUR, us_layout("2 #8"), us_layout("4 #8", "2 #8")]
    together = check_layouts(section, layouts)
    for found, layout in zip(together, layouts, strict=True):
        alone = check_layout(section, layout)
        assert (found.layout, found.placement) == (layout, alone.placement)
        assert (found.phi_Mn, found.eps_t) == (alone.phi_Mn, alone.eps_t)
        # The share is found by iteration that goes on until the last of the batch is there.
        assert found.As_required == pytest.approx(alone.As_required, rel=1e-8)
        assert [check.state for check in found.checks] == [check.state for check in alone.checks]
    assert check_layouts(section, []) == []


@pytest.mark.parametrize(("share", "state"), [(0.999, State.OK), (1.001, State.FAILS)])
def test_flexural_strength(share: float, state: State) -> None:
    """Phi Mn against Mu."""
    found = row(
        check_layout(us_section(Mu=capacity(3.16, 21.5) * share), FOUR), "flexural_strength"
    )
    assert (found.clause, found.quantity, found.state) == ("9.5.1.1", "moment", state)
    assert found.demand == pytest.approx(capacity(3.16, 21.5) * share)
    assert found.limit == pytest.approx(capacity(3.16, 21.5))
    assert found.ratio == pytest.approx(share, rel=1e-9)
    assert found.ok is (state is State.OK)
    assert found.note == "phi = 0.900"


@pytest.mark.parametrize(
    ("layers", "state", "note"),
    [
        (("4 #8",), State.OK, "tension-controlled"),
        (
            ("6 #9", "2 #9"),
            State.FAILS,
            "transition, phi reduced; tension-controlled from 0.00500",
        ),
        (
            ("6 #9", "6 #9", "4 #9"),
            State.FAILS,
            "compression-controlled; tension-controlled from 0.00500",
        ),
    ],
)
def test_net_tensile_strain(layers: tuple[str, ...], state: State, note: str) -> None:
    """9.3.3.1: demand is the least strain, capacity the strain that is there."""
    checked = check_layout(us_section(), us_layout(*layers))
    found = row(checked, "net_tensile_strain")
    assert (found.clause, found.quantity, found.state) == ("9.3.3.1", "strain", state)
    assert [found.demand, found.limit] == pytest.approx([0.005, checked.eps_t])
    assert found.ratio == pytest.approx(0.005 / checked.eps_t, rel=1e-12)
    assert found.note == note


def test_net_tensile_strain_of_2014() -> None:
    """ACI 318-14 on request: 0.004, with phi on the slope."""
    section = us_section(code="ACI 318-14", tension_controlled=False)
    checked = check_layout(section, us_layout("6 #9"))
    found = row(checked, "net_tensile_strain")
    c = 6 * 60_000 / BLOCK / 0.85
    eps_t = 0.003 * (22 - 0.564 - c) / c
    assert 0.004 < eps_t < 0.005
    assert (found.clause, found.state, found.demand) == ("9.3.3.1", State.OK, 0.004)
    assert found.limit == pytest.approx(eps_t, rel=1e-9)
    assert checked.phi == pytest.approx(0.65 + 0.25 * (eps_t - 0.002) / 0.003, rel=1e-9)
    assert row(checked, "flexural_strength").note == f"phi = {checked.phi:.3f}"
    assert found.note == "transition, phi reduced; tension-controlled from 0.00500"


@pytest.mark.parametrize(
    ("layer", "state", "verdict"),
    [
        ("4 #8", State.OK, "tension-controlled"),
        ("6 #9", State.FAILS, "transition, phi reduced; tension-controlled from 0.00500"),
    ],
)
def test_more_strain_than_2014_asks_for(layer: str, state: State, verdict: str) -> None:
    """0.005 is Table 21.2.2's; 9.3.3.1 of ACI 318-14 itself stops at 0.004."""
    found = row(check_layout(us_section(code="ACI 318-14"), us_layout(layer)), "net_tensile_strain")
    assert (found.clause, found.state) == ("21.2.2", state)
    assert found.demand == pytest.approx(0.005)
    assert found.note.startswith(f"{verdict}; ")
    assert found.note.endswith("9.3.3.1 permits 0.004 (tension_controlled = false)")


def test_more_strain_than_2014_asks_for_in_millimetres() -> None:
    """The same in ACI 318M-14, and no word of it in ACI 318M-19, where 9.3.3.1 asks for it."""
    old, new = (
        row(check_layout(si_section(code=code), si_layout("4 25")), "net_tensile_strain")
        for code in ("ACI 318M-14", "ACI 318M-19")
    )
    assert (old.clause, new.clause) == ("21.2.2", "9.3.3.1")
    assert "9.3.3.1 permits 0.004" in old.note
    assert new.note == "tension-controlled"


def test_transition_is_refused_in_2019() -> None:
    """There the request itself is an error."""
    with pytest.raises(OutOfRangeError, match="false under ACI 318-19; allowed: true"):
        check_layout(us_section(tension_controlled=False), FOUR)


def test_minimum_steel_met() -> None:
    """200 bw d/fy = 1.003 in^2."""
    found = row(check_layout(us_section(), FOUR), "minimum_steel")
    least = 200 * 14 * 21.5 / 60_000
    assert (found.clause, found.quantity, found.state) == ("9.6.1.2", "area", State.OK)
    assert [found.demand, found.limit] == pytest.approx([least, 3.16])
    assert found.ratio == pytest.approx(least / 3.16)
    assert found.note == ""


@pytest.mark.parametrize(("flange", "width"), [(60.0, 28.0), (20.0, 20.0)])
def test_minimum_steel_of_a_flange_in_tension(flange: float, width: float) -> None:
    """A determinate beam counts the lesser of its flange and twice its web, and says so."""
    outline = Outline(web=14.0, depth=24.0, top=Flange(width=flange, thickness=5.0))
    section = us_section(outline=outline, Mu=-3e6, statically_determinate=True)
    found = row(check_layout(section, FOUR), "minimum_steel")
    assert found.demand == pytest.approx(200 * width * 21.5 / 60_000)
    assert (found.clause, found.state) == ("9.6.1.2", State.OK)
    assert found.note == f"bw taken as min(bf, 2 bw) = {width:g} in"


def test_minimum_steel_of_a_flange_in_tension_of_a_frame() -> None:
    """An indeterminate beam counts its web; what changes that is said beside it."""
    found = row(check_layout(us_section(outline=T_BEAM, Mu=-3e6), FOUR), "minimum_steel")
    assert found.demand == pytest.approx(200 * 14 * 21.5 / 60_000)
    assert (found.clause, found.state) == ("9.6.1.2", State.OK)
    assert (
        found.note
        == "flange in tension: min(bf, 2 bw) counts if the beam is statically determinate"
    )


@pytest.mark.parametrize("determinate", [True, False])
def test_minimum_steel_of_a_flange_in_compression(determinate: bool) -> None:
    """Only a flange in tension enters 9.6.1.2."""
    section = us_section(outline=T_BEAM, statically_determinate=determinate)
    found = row(check_layout(section, FOUR), "minimum_steel")
    assert found.demand == pytest.approx(200 * 14 * 21.5 / 60_000)
    assert found.note == ""


def small_moment(share: float) -> float:
    """Return the moment for which 0.62 in^2 at 21.6875 in is 4/3 of the need, times a share."""
    return capacity(0.75 * 0.62, 21.6875) * share


def test_minimum_steel_by_exemption() -> None:
    """2 #5 are below 9.6.1.2 and above 4/3 of the required area: 9.6.1.3, if kept to throughout."""
    checked = check_layout(us_section(Mu=small_moment(0.9)), us_layout("2 #5"))
    found = row(checked, "minimum_steel")
    assert checked.As_required is not None
    exempt = 4 / 3 * checked.As_required
    assert (found.clause, found.state, found.ok) == ("9.6.1.3", State.PROVIDE, True)
    assert [found.demand, found.limit] == pytest.approx([exempt, 0.62])
    assert found.ratio is not None
    assert found.ratio < 1.0
    # 200 (14) 21.6875/60,000 = 1.0121; 0.9 of the moment needs 0.418 in^2, 4/3 of it 0.5575.
    assert found.note == (
        f"9.6.1.2 asks for 1.012 in^2, 4/3 of the required area is {exempt:.4g} in^2"
        "; the exemption has to hold at every section of the beam"
    )


@pytest.mark.parametrize(("share", "clause"), [(1.1, "9.6.1.3"), (3.0, "9.6.1.2")])
def test_minimum_steel_missed(share: float, clause: str) -> None:
    """The nearer of the two ways out is the one that is shown."""
    checked = check_layout(us_section(Mu=small_moment(share)), us_layout("2 #5"))
    found = row(checked, "minimum_steel")
    assert checked.As_required is not None
    least, exempt = 200 * 14 * 21.6875 / 60_000, 4 / 3 * checked.As_required
    assert (found.clause, found.state) == (clause, State.FAILS)
    assert found.demand == pytest.approx(min(least, exempt), rel=1e-12)
    assert found.note.startswith("9.6.1.2 asks for 1.012 in^2, 4/3 of the required area is ")
    assert "every section" not in found.note


def test_minimum_steel_where_no_area_is_required() -> None:
    """A moment beyond all bars has no 4/3 to speak of."""
    checked = check_layout(us_section(Mu=3e8), us_layout("2 #5"))
    found = row(checked, "minimum_steel")
    assert checked.As_required is None
    assert (found.clause, found.note) == ("9.6.1.2", "9.6.1.2 asks for 1.012 in^2")
    assert found.state is State.FAILS


@pytest.mark.parametrize(
    ("layers", "state", "gap", "note"),
    [
        (("4 #8",), State.OK, 5 / 3, ""),
        (("5 #8",), State.OK, 1.0, ""),
        (("6 #8",), State.FAILS, 0.6, ""),
        (("9 #8",), State.FAILS, 0.0, ""),
        (("10 #8",), State.FAILS, 8 / 9 - 1, ""),
        (("4 #8", "2 #8"), State.OK, 5 / 3, "; layer 1 is the tightest"),
        (("6 #8", "2 #8"), State.FAILS, 0.6, "; layer 1 is the tightest"),
        (("4 #6", "4 #8"), State.OK, 5 / 3, "; layer 2 is the tightest"),
    ],
)
def test_clear_gap(layers: tuple[str, ...], state: State, gap: float, note: str) -> None:
    """25.2.1 at the real positions; layer and gap of the tightest."""
    found = row(check_layout(us_section(), us_layout(*layers)), "clear_gap")
    assert (found.clause, found.quantity, found.state) == ("25.2.1", "length", state)
    assert [found.demand, found.limit] == pytest.approx([1.0, gap], abs=1e-12)
    if gap > 1e-9:
        assert found.ratio == pytest.approx(1.0 / gap, rel=1e-9)
    elif gap < 0.0:
        assert found.ratio is None
    assert found.note == f"1 in governs{note}"


@pytest.mark.parametrize(
    ("changes", "layers", "required", "note"),
    [
        ({}, ("2 #7",), 1.0, "1 in governs"),
        ({}, ("2 #9",), 1.128, "db governs"),
        ({}, ("2 #9 + 2 #7",), 1.128, "db governs"),
        ({"aggregate": 1.5}, ("2 #9",), 2.0, "4/3 of the aggregate governs"),
        ({"aggregate": 0.8}, ("2 #9",), 1.128, "db governs"),
        ({"min_gap": 1.5}, ("2 #9",), 1.5, "min_gap of the job, more than 25.2.1 asks"),
        ({"min_gap": 1.1}, ("2 #9",), 1.128, "db governs"),
        ({"min_gap": 1.5, "aggregate": 1.5}, ("2 #9",), 2.0, "4/3 of the aggregate governs"),
        # Layer 1 has (8 - 3 x 1.27)/3 in for 1.27 in, layer 2 all of 8 in less a bar.
        ({}, ("4 #10", "2 #7"), 1.27, "db governs; layer 1 is the tightest"),
    ],
)
def test_what_governs_the_clear_gap(
    changes: dict[str, Any], layers: tuple[str, ...], required: float, note: str
) -> None:
    """25.2.1 is the largest of 1 in, db and 4/3 of the aggregate; the job may ask for more."""
    found = row(check_layout(us_section(**changes), us_layout(*layers)), "clear_gap")
    assert found.demand == pytest.approx(required)
    assert found.note == note


@pytest.mark.parametrize(
    ("aggregate", "layer", "required", "note"),
    [
        (18.0, "3 25", 25.4, "db governs"),
        (18.0, "3 22", 25.0, "25 mm governs"),
        (20.0, "3 25", 80 / 3, "4/3 of the aggregate governs"),
    ],
)
def test_what_governs_the_clear_gap_in_millimetres(
    aggregate: float, layer: str, required: float, note: str
) -> None:
    """The same with 25 mm for 1 in."""
    found = row(check_layout(si_section(aggregate=aggregate), si_layout(layer)), "clear_gap")
    assert found.demand == pytest.approx(required)
    assert found.note == note


def test_clear_gap_of_single_bars() -> None:
    """No neighbours, no gap."""
    found = row(check_layout(us_section(), us_layout("1 #8")), "clear_gap")
    assert (found.state, found.note) == (State.NOT_APPLICABLE, "no neighbouring bars")
    assert (found.demand, found.limit, found.ratio, found.ok) == (None, None, None, True)


def test_layer_gap() -> None:
    """25.2.2: 1 in between layers; the section refuses less, one layer has none."""
    found = row(check_layout(us_section(layer_gap=1.25), us_layout("2 #8", "2 #8")), "layer_gap")
    assert (found.clause, found.quantity, found.state) == ("25.2.2", "length", State.OK)
    assert (found.demand, found.limit, found.ratio) == (1.0, 1.25, 0.8)
    assert found.note == "above the largest bar of the layer below"
    single = row(check_layout(us_section(), FOUR), "layer_gap")
    assert (single.state, single.note) == (State.NOT_APPLICABLE, "one layer")


@pytest.mark.parametrize(
    ("layers", "clause", "state", "note"),
    [
        (("4 #8", "2 #8"), "25.2.2", State.OK, ""),
        (
            ("1 #8",),
            "25.7.1.2",
            State.FAILS,
            "layer 1 leaves a stirrup corner without a bar (25.7.1.2)",
        ),
        (
            ("2 #8", "3 #8"),
            "25.2.2",
            State.FAILS,
            "layer 2 cannot stand on the bars of the layer below (25.2.2)",
        ),
        (("1 #9 + 1 #8",), "25.2.2", State.OK, "layer 1 is not symmetric"),
        (("4 #8", "3 #8"), "25.2.2", State.OK, "layer 2 is not symmetric"),
        (
            ("4 #8", "3 #8", "3 #8"),
            "25.2.2",
            State.OK,
            "layer 2 is not symmetric; layer 3 is not symmetric",
        ),
        # Over an odd layer that stands to one side the corners are in line again.
        (("4 #8", "3 #8", "2 #8"), "25.2.2", State.OK, "layer 2 is not symmetric"),
        (
            ("4 #6", "2 #8"),
            "25.2.2",
            State.OK,
            "layer 2 has larger bars than the layer below",
        ),
        (
            ("2 #8", "1 #9"),
            "25.7.1.2",
            State.FAILS,
            "layer 2 leaves a stirrup corner without a bar (25.7.1.2); layer 2 is not symmetric;"
            " layer 2 has larger bars than the layer below",
        ),
    ],
)
def test_arrangement(layers: tuple[str, ...], clause: str, state: State, note: str) -> None:
    """Corners, stacking, symmetry: faults first, then remarks."""
    found = row(check_layout(us_section(), us_layout(*layers)), "arrangement")
    assert (found.clause, found.state, found.note) == (clause, state, note)


def test_arrangement_that_is_too_high() -> None:
    """5 layers of #8 take 9 in; 8 in are between the stirrup's legs in 12 in."""
    section = us_section(outline=Outline(web=14.0, depth=12.0))
    found = row(check_layout(section, us_layout(*["2 #8"] * 5)), "arrangement")
    assert found.state is State.FAILS
    assert found.note == "the layers are 9 in high in 8 in of room"


@pytest.mark.parametrize(
    ("layer", "state", "spacing"), [("2 #8", State.OK, 8.0), ("2 #18", State.OK, 7.743)]
)
def test_crack_control(layer: str, state: State, spacing: float) -> None:
    """2/3 of 60 ksi and cc = 2 in allow 10 in."""
    found = row(check_layout(us_section(), us_layout(layer)), "crack_control")
    assert (found.clause, found.quantity, found.state) == ("24.3.2", "length", state)
    assert [found.demand, found.limit] == pytest.approx([spacing, 10.0])
    assert found.ratio == pytest.approx(spacing / 10)
    assert found.note == "2/3 fy = 40000 psi"


def test_crack_control_of_a_wide_beam() -> None:
    """2 bars 12 in apart are too few; the spacing of 10 in is the limit."""
    section = us_section(outline=Outline(web=18.0, depth=24.0))
    found = row(check_layout(section, us_layout("2 #8")), "crack_control")
    assert (found.state, found.demand, found.ok) == (State.FAILS, 12.0, False)


def test_crack_control_under_a_service_moment() -> None:
    """Fs = Ms/(As j d) by hand, and the spacing that it allows."""
    section = us_section(Ms=1.8e6)
    ratio = 29e6 / (57_000 * math.sqrt(4000)) * 3.16 / (14 * 21.5)
    k = math.sqrt(ratio**2 + 2 * ratio) - ratio
    fs = 1.8e6 / (3.16 * (1 - k / 3) * 21.5)
    found = row(check_layout(section, FOUR), "crack_control")
    assert found.limit == pytest.approx(min(600_000 / fs - 5.0, 480_000 / fs), rel=1e-12)
    assert found.note == f"fs = {fs:.0f} psi under Ms"
    assert found.state is State.OK


def test_crack_control_of_steel_that_yields_at_service() -> None:
    """A service moment beyond the bars is said to be one."""
    found = row(check_layout(us_section(Ms=5e6), FOUR), "crack_control")
    assert found.note.endswith(" psi under Ms; the steel yields at service")


def test_crack_control_without_any_spacing_left() -> None:
    """7 in of cover leave no spacing: 15 - 2.5 (7.5) is negative, a ratio has no meaning."""
    section = us_section(cover=7.0, outline=Outline(web=24.0, depth=24.0))
    found = row(check_layout(section, FOUR), "crack_control")
    assert (found.state, found.ratio) == (State.FAILS, None)
    assert found.limit == pytest.approx(15 - 2.5 * 7.5)


@pytest.mark.parametrize(("web", "state"), [(10.0, State.OK), (10.1, State.FAILS)])
def test_crack_control_of_a_single_bar(web: float, state: State) -> None:
    """24.3.3: the tension face is not wider than s = 10 in."""
    section = us_section(outline=Outline(web=web, depth=24.0))
    found = row(check_layout(section, us_layout("1 #8")), "crack_control")
    assert (found.clause, found.demand, found.state) == ("24.3.3", web, state)
    assert found.note == "2/3 fy = 40000 psi; one bar: width of the tension face"


@pytest.mark.parametrize(
    ("changes", "layer", "state", "demand", "limit", "note"),
    [
        (
            {"exposure_given": False},
            "4 #8",
            State.OK,
            1.5,
            1.5,
            "stirrup; not exposed to weather or in contact with ground"
            " (taken, since the job gives no exposure)",
        ),
        (
            {"cover": 1.25},
            "4 #8",
            State.FAILS,
            1.5,
            1.25,
            "stirrup; not exposed to weather or in contact with ground",
        ),
        (
            {"exposure": Exposure.WEATHER},
            "4 #8",
            State.OK,
            1.5,
            1.5,
            "stirrup; exposed to weather or in contact with ground",
        ),
        (
            {"exposure": Exposure.WEATHER, "stirrup": us_layout("1 #3").sizes[0]},
            "4 #6",
            State.FAILS,
            2.0,
            1.875,
            "main bars; exposed to weather or in contact with ground",
        ),
        (
            {"exposure": Exposure.WEATHER, "stirrup": us_layout("1 #3").sizes[0]},
            "4 #5",
            State.OK,
            1.5,
            1.5,
            "stirrup; exposed to weather or in contact with ground",
        ),
        (
            {"exposure": Exposure.GROUND},
            "4 #8",
            State.FAILS,
            3.0,
            1.5,
            "stirrup; cast against and permanently in contact with ground",
        ),
    ],
)
def test_cover(
    changes: dict[str, Any], layer: str, state: State, demand: float, limit: float, note: str
) -> None:
    """Stirrup and main bars apart; the nearer to its limit is shown."""
    section, layout = us_section(**changes), us_layout(layer)
    found = row(check_layout(section, layout), "cover")
    assert (found.clause, found.quantity, found.state) == ("20.5.1.3.1", "length", state)
    assert (found.demand, found.limit, found.note) == (demand, limit, note)
    assert found.ratio == pytest.approx(demand / limit)
    assert cover_fits(section, layout.sizes[0].diameter) is (state is State.OK)


def test_cover_clause_of_2014() -> None:
    """The table has another number there."""
    found = row(check_layout(us_section(code="ACI 318-14"), FOUR), "cover")
    assert found.clause == "20.6.1.3.1"


def test_side_face_steel_up_to_36_inches() -> None:
    """9.7.2.3 starts above 36 in."""
    section = us_section(outline=Outline(web=14.0, depth=36.0))
    found = row(check_layout(section, FOUR), "side_face_steel")
    assert (found.clause, found.state) == ("9.7.2.3", State.NOT_APPLICABLE)
    assert found.note == "h of 36 in is not above 36 in"


def test_side_face_steel_above_36_inches() -> None:
    """Over h/2, spaced like the bars of 24.3.2 with the skin bars' cover of 2 in."""
    section = us_section(outline=Outline(web=14.0, depth=36.1))
    found = row(check_layout(section, FOUR), "side_face_steel")
    assert (found.state, found.ok) == (State.PROVIDE, True)
    assert found.note == (
        "skin steel on both side faces over h/2 = 18.05 in from the tension face,"
        " spacing at most 10 in"
    )


@pytest.mark.parametrize(
    ("depth", "state"), [(900.0, State.NOT_APPLICABLE), (901.0, State.PROVIDE)]
)
def test_side_face_steel_in_millimetres(depth: float, state: State) -> None:
    """ACI 318M: above 900 mm; cc = 52.7 mm leaves 380 - 131.75 mm."""
    section = si_section(outline=Outline(web=350.0, depth=depth))
    found = row(check_layout(section, si_layout("4 25")), "side_face_steel")
    assert found.state is state
    if state is State.PROVIDE:
        assert found.note.endswith(
            "over h/2 = 450.5 mm from the tension face, spacing at most 248.2 mm"
        )


@pytest.mark.parametrize(
    ("outline", "moment"),
    [(T_BEAM, 3e6), (Outline(web=14.0, depth=24.0), -3e6)],
)
def test_flange_steel_without_a_flange_in_tension(outline: Outline, moment: float) -> None:
    """24.3.4 is about flanges in tension."""
    found = row(check_layout(us_section(outline=outline, Mu=moment), FOUR), "flange_steel")
    assert (found.clause, found.state) == ("24.3.4", State.NOT_APPLICABLE)
    assert found.note == "no flange in tension"


@pytest.mark.parametrize(
    ("span", "state", "note"),
    [
        (
            None,
            State.PROVIDE,
            ", and where it exceeds ln/10 (ln not given) bonded bars in the outer flange",
        ),
        (601.0, State.OK, " does not exceed ln/10 = 60.1 in"),
        (600.0, State.OK, " does not exceed ln/10 = 60 in"),
        # Outer flange: 60 - 30 = 30 in, 0.0018 (30) 5 = 0.27 in^2.
        (
            300.0,
            State.PROVIDE,
            " exceeds ln/10 = 30 in: bonded bars of 0.27 in^2 in all in the outer flange"
            " (24.4.3.2)",
        ),
        # ln/10 below the web: outside the web 60 - 14 = 46 in, 0.0018 (46) 5 = 0.414 in^2.
        (
            120.0,
            State.PROVIDE,
            " exceeds ln/10 = 12 in: bonded bars of 0.414 in^2 in all in the outer flange"
            " (24.4.3.2)",
        ),
    ],
)
@pytest.mark.parametrize("sagging", [True, False])
def test_flange_steel_in_tension(
    span: float | None, state: State, note: str, sagging: bool
) -> None:
    """Bars over the web do up to be = ln/10; beyond, the outer flange has 0.0018 of its area."""
    flange = Flange(width=60.0, thickness=5.0)
    outline = (
        Outline(web=14.0, depth=24.0, bottom=flange)
        if sagging
        else Outline(web=14.0, depth=24.0, top=flange)
    )
    section = us_section(outline=outline, Mu=3e6 if sagging else -3e6, clear_span=span)
    found = row(check_layout(section, FOUR), "flange_steel")
    assert (found.clause, found.state, found.ok) == ("24.3.4", state, True)
    assert found.note == f"all bars lie over the web; be = 60 in{note}"


@pytest.mark.parametrize(
    ("code", "fy", "area"),
    [
        ("ACI 318-14", 40_000.0, "0.3"),  # 0.0020 (30) 5
        ("ACI 318-14", 75_000.0, "0.216"),  # 0.00144 (30) 5
        ("ACI 318-19", 40_000.0, "0.27"),  # 0.0018 (30) 5
    ],
)
def test_flange_steel_by_edition_and_grade(code: str, fy: float, area: str) -> None:
    """The outer flange's steel takes the ratio of its edition and grade."""
    section = us_section(code=code, fy=fy, outline=T_BEAM, Mu=-3e6, clear_span=300.0)
    found = row(check_layout(section, FOUR), "flange_steel")
    assert f"bonded bars of {area} in^2 in all" in found.note


def test_flange_steel_in_millimetres() -> None:
    """ACI 318M-19: be 1500, ln/10 = 800 mm, 0.0018 (700) 120 = 151.2 mm^2."""
    outline = Outline(web=350.0, depth=600.0, top=Flange(width=1500.0, thickness=120.0))
    section = si_section(outline=outline, Mu=-300e6, clear_span=8000.0)
    found = row(check_layout(section, si_layout("4 25")), "flange_steel")
    assert found.state is State.PROVIDE
    assert found.note == (
        "all bars lie over the web; be = 1500 mm exceeds ln/10 = 800 mm:"
        " bonded bars of 151.2 mm^2 in all in the outer flange (24.4.3.2)"
    )


@pytest.mark.parametrize(
    ("code", "fy", "ratio"),
    [
        ("ACI 318-14", 40_000.0, 0.0020),
        ("ACI 318-14", 59_999.0, 0.0020),
        ("ACI 318-14", 60_000.0, 0.0018),
        ("ACI 318-14", 75_000.0, 0.00144),
        ("ACI 318-14", 80_000.0, 0.0014),  # 0.00135 is below the floor
        ("ACI 318-19", 40_000.0, 0.0018),
        ("ACI 318-19", 60_000.0, 0.0018),
        ("ACI 318-19", 100_000.0, 0.0018),
    ],
)
def test_shrinkage_ratio(code: str, fy: float, ratio: float) -> None:
    """24.4.3.2: 0.0018 in 2019; in 2014, from memory, it falls with the grade to 0.0014."""
    assert shrinkage_ratio(us_section(code=code, fy=fy)) == pytest.approx(ratio, rel=1e-12)


@pytest.mark.parametrize(
    ("code", "fy", "ratio"),
    [
        ("ACI 318M-14", 280.0, 0.0020),
        ("ACI 318M-14", 420.0, 0.0018),
        ("ACI 318M-14", 500.0, 0.0018 * 420 / 500),
        ("ACI 318M-14", 550.0, 0.0014),  # 0.001375 is below the floor
        ("ACI 318M-19", 280.0, 0.0018),
        ("ACI 318M-19", 690.0, 0.0018),
    ],
)
def test_shrinkage_ratio_in_megapascals(code: str, fy: float, ratio: float) -> None:
    """The same about Grade 420; 2014 from memory."""
    assert shrinkage_ratio(si_section(code=code, fy=fy)) == pytest.approx(ratio, rel=1e-12)


@pytest.mark.parametrize(
    ("opposite", "state", "gap", "note"),
    [
        (["2 #5"], State.OK, 8 - 0.625, "1 in governs"),
        (["2 #9"], State.OK, 8 - 1.128, "db governs"),
        (["8 #5"], State.FAILS, 8 / 7 - 0.625, "1 in governs"),
        # On the lines of the layer below, half from each side.
        (["4 #5", "3 #5"], State.OK, 8 / 3 - 0.625, "1 in governs; layer 1 is the tightest"),
        (
            ["1 #5"],
            State.FAILS,
            None,
            "no neighbouring bars; layer 1 leaves a stirrup corner without a bar (25.7.1.2)",
        ),
        (
            ["2 #5", "3 #5"],
            State.FAILS,
            4 - 0.625,
            "1 in governs; layer 2 is the tightest;"
            " layer 2 cannot stand on the bars of the layer below (25.2.2)",
        ),
    ],
)
def test_opposite_bars(opposite: list[str], state: State, gap: float | None, note: str) -> None:
    """Bars at the other face keep 25.2.1, their lines and the stirrup's corners too."""
    section = us_section(opposite=us_layout(*opposite))
    found = row(check_layout(section, FOUR), "opposite_bars")
    assert (found.clause, found.state, found.note) == ("25.2.1", state, note)
    assert found.limit == (gap if gap is None else pytest.approx(gap))


def test_opposite_bars_with_too_little_cover() -> None:
    """Exposed to weather, #8 bars need 2 in where 1.5 in and a #3 stirrup give 1.875 in."""
    section = us_section(
        opposite=us_layout("2 #8"), exposure=Exposure.WEATHER, stirrup=inch_bar("#3")
    )
    found = row(check_layout(section, us_layout("3 #5")), "opposite_bars")
    assert found.state is State.FAILS
    assert found.note == f"1 in governs; too little cover ({section.edition.cover_clause})"


def test_no_opposite_bars() -> None:
    """Without bars at the other face the row says so."""
    found = row(check_layout(us_section(), FOUR), "opposite_bars")
    assert (found.clause, found.state) == ("25.2", State.NOT_APPLICABLE)
    assert found.note == "no bars given at the other face"


def test_bars_of_the_other_unit_system() -> None:
    """A layout in millimetres in a section in inches would be silently wrong."""
    metric = parse_layout(["4 16"], bar_catalog("en10080"))
    with pytest.raises(LayoutError, match="16 has si units; allowed: us"):
        check_layout(us_section(), metric)


def test_nothing_to_check() -> None:
    """No layouts give no results."""
    assert check_layouts(us_section(), []) == []


def test_modulus_of_lightweight_concrete_is_named() -> None:
    """Under Ms the modulus enters fs: taking normalweight concrete's for lightweight is said."""
    concrete = Concrete(edition=edition("ACI 318-19"), fc=4000.0, lightweight=0.75)
    section = us_section(concrete=concrete, Ms=1e6)
    note = row(check_layout(section, FOUR), "crack_control").note
    assert note.endswith("Ec of normalweight concrete")


@pytest.mark.parametrize("opposite", [None, us_layout("2 #8")])
def test_compression_ties_where_none_are_counted(opposite: object) -> None:
    """9.7.6.4 follows from counting the bars."""
    found = row(check_layout(us_section(opposite=opposite), FOUR), "compression_ties")
    assert (found.clause, found.state) == ("9.7.6.4", State.NOT_APPLICABLE)
    assert found.note == "no compression steel counted"


LEGS = "; further legs or crossties to hold the bars between the corners"


@pytest.mark.parametrize(
    ("opposite", "web", "stirrup", "state", "least", "spacing", "legs"),
    [
        ("2 #5", 14.0, "#3", State.PROVIDE, 0.375, "10", ""),  # 16 (0.625)
        ("2 #8", 14.0, "#3", State.PROVIDE, 0.375, "14", ""),  # the web
        ("2 #10", 24.0, "#3", State.PROVIDE, 0.375, "18", ""),  # 48 (0.375)
        ("2 #11", 24.0, "#3", State.FAILS, 0.5, "18", ""),
        ("2 #11", 24.0, "#4", State.PROVIDE, 0.5, "22.56", ""),  # 16 (1.41)
        ("2 #8 + 1 #5", 14.0, "#4", State.PROVIDE, 0.375, "10", ""),  # the thinnest bar
        ("3 #8", 14.0, "#4", State.PROVIDE, 0.375, "14", ""),  # 3 in clear
        ("3 #8", 24.0, "#4", State.PROVIDE, 0.375, "16", LEGS),  # 8 in clear
        ("4 #8", 14.0, "#4", State.PROVIDE, 0.375, "14", LEGS),
    ],
)
def test_compression_ties(
    opposite: str, web: float, stirrup: str, state: State, least: float, spacing: str, legs: str
) -> None:
    """Size by the thickest bar, spacing by thinnest bar, tie and beam, legs by reach."""
    section = us_section(
        outline=Outline(web=web, depth=24.0),
        stirrup=us_layout(f"1 {stirrup}").sizes[0],
        opposite=us_layout(opposite),
        count_opposite=True,
    )
    found = row(check_layout(section, FOUR), "compression_ties")
    assert (found.quantity, found.state, found.demand) == ("length", state, least)
    assert found.limit == section.stirrup.diameter
    assert found.ratio == pytest.approx(least / section.stirrup.diameter)
    assert found.note == (
        f"closed stirrups at most {spacing} in apart wherever these bars are counted{legs}"
    )


def test_one_failing_row_fails_the_layout() -> None:
    """Rows to provide do not, rows that fail do."""
    deep = us_section(outline=Outline(web=14.0, depth=40.0))
    assert check_layout(deep, FOUR).ok
    assert not check_layout(us_section(Mu=1e8), FOUR).ok
