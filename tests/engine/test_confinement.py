"""What a layout offers its bars along a development length, derived by hand from the geometry.

cb, Ktr and the first row of the short form: ACI 318-14 25.4.2.2, 25.4.2.3; ACI 318-19 25.4.2.3,
25.4.2.4 and 9.7.1.4. Top bars: Table 25.4.2.4 (2014), 25.4.2.5 (2019).
"""

from __future__ import annotations

import math

import pytest

from engine import (
    Flange,
    Outline,
    OutOfRangeError,
    Section,
    confinement_of,
    is_top_bar,
    meets_short_form,
    place,
    straight_length,
)
from tests.engine.builders import inch_bar, si_layout, si_section, us_layout, us_section


def test_half_spacing_governs() -> None:
    """14 in web, 1.5 in cover, #4 stirrups (R = 1 in): 4 #8 stand 8/3 in apart."""
    section = us_section()
    found = confinement_of(section, place(section, us_layout("4 #8")))
    assert found.cb == pytest.approx(8 / 3 / 2, rel=1e-12)
    assert (found.Ktr, found.Ktr_required, found.note) == (0.0, 0.0, "")
    assert found.ratio == pytest.approx(4 / 3, rel=1e-12)


def test_cover_to_the_tension_face_governs() -> None:
    """2 #8: 8 in apart, 3 in from the side, 1.5 + 0.5 + 0.5 in from below."""
    section = us_section()
    found = confinement_of(section, place(section, us_layout("2 #8")))
    assert found.cb == pytest.approx(2.5, rel=1e-12)
    single = confinement_of(section, place(section, us_layout("1 #8")))
    assert single.cb == pytest.approx(2.5, rel=1e-12)


def test_cover_to_the_side_governs() -> None:
    """Two #18 (2.257 in) of an upper layer: 2 + 1.1285 = 3.1285 in from the side.

    The layers are 8.257 in apart, and layer 2 lies 11.3855 in from below.
    """
    section = us_section(layer_gap=6.0)
    placement = place(section, us_layout("2 #18", "2 #18"))
    found = confinement_of(section, placement, layer=2)
    assert found.cb == pytest.approx(3.1285, rel=1e-12)


def test_layers_are_neighbours_too() -> None:
    """2 #8 / 2 #8 with 1 in between: centres 2 in apart, whichever layer is asked."""
    section = us_section()
    placement = place(section, us_layout("2 #8", "2 #8"))
    for layer in (1, 2):
        assert confinement_of(section, placement, layer=layer).cb == pytest.approx(1.0, rel=1e-12)


def test_bars_of_one_size_in_a_mixed_layer() -> None:
    """2 #9 + 1 #5: each size has its own term.

    #9 in the corners at x = 4 in (R = 1 in > db/2), the #5 at the centre: 4 in apart, half is
    2 in; from below they lie 2.564 in and 2.3125 in, which does not govern.
    """
    section = us_section()
    placement = place(section, us_layout("2 #9 + 1 #5"))
    large = confinement_of(section, placement)
    small = confinement_of(section, placement, diameter=0.625)
    assert large.ratio == pytest.approx(2.0 / 1.128, rel=1e-12)
    assert small.ratio == pytest.approx(2.0 / 0.625, rel=1e-12)
    assert confinement_of(section, placement, diameter=1.128) == large


def test_neighbours_of_another_size_do_not_count_for_a_size() -> None:
    """2 #11 + 3 #3: between two #3 the centres are closer than beside a #11."""
    section = us_section()
    placement = place(section, us_layout("2 #11 + 3 #3"))
    (corner, second, third, *_) = placement.layers[0].x
    assert third - second < second - corner
    large = confinement_of(section, placement)
    assert large.cb == pytest.approx((second - corner) / 2, rel=1e-12)
    small = confinement_of(section, placement, diameter=0.375)
    assert small.cb == pytest.approx((third - second) / 2, rel=1e-12)


@pytest.mark.parametrize(
    ("layers", "n"),
    [
        (("4 #8",), 4),
        (("4 #8", "2 #8"), 4),  # the layer with the most bars
        (("2 #8", "2 #8"), 4),  # a plane up through both layers has one leg for two bars
        (("2 #8", "2 #8", "2 #8"), 6),
        (("2 #8",), 2),
    ],
)
def test_transverse_index_in_inches(layers: tuple[str, ...], n: int) -> None:
    """Ktr = 40 x 2 x 0.20/(8 n) with #4 stirrups at 8 in."""
    section = us_section()
    placement = place(section, us_layout(*layers))
    found = confinement_of(section, placement, transverse=8.0)
    assert found.Ktr == pytest.approx(40 * 0.40 / (8 * n), rel=1e-12)
    bare = confinement_of(section, placement)
    assert found.ratio == pytest.approx(bare.ratio + found.Ktr, rel=1e-12)


def test_transverse_index_in_millimetres() -> None:
    """Ktr = 40 x 2 x 129/(200 x 4), No. 13 stirrups at 200 mm."""
    section = si_section()
    found = confinement_of(section, place(section, si_layout("4 25")), transverse=200.0)
    assert found.Ktr == pytest.approx(40 * 258 / 800, rel=1e-12)


@pytest.mark.parametrize(
    ("code", "fy", "required"),
    [
        ("ACI 318-19", 79_999.0, 0.0),
        ("ACI 318-19", 80_000.0, 0.5),
        ("ACI 318-14", 80_000.0, 0.0),
    ],
)
def test_least_transverse_steel_of_high_strength(code: str, fy: float, required: float) -> None:
    """ACI 318-19, 9.7.1.4: Ktr at least 0.5 db from 80 ksi on; 0.5 in needs #4 at 8 in for 4."""
    section = us_section(code=code, fy=fy)
    placement = place(section, us_layout("4 #8"))
    bare = confinement_of(section, placement)
    assert bare.Ktr_required == required
    assert bare.enough_transverse is (required == 0.0)
    assert bool(bare.note) is (required > 0.0)
    tied = confinement_of(section, placement, transverse=8.0)
    assert tied.Ktr == pytest.approx(0.5, rel=1e-12)
    assert (tied.enough_transverse, tied.note) == (True, "")
    wide = confinement_of(section, placement, transverse=8.01)
    assert wide.enough_transverse is (required == 0.0)


def test_note_of_missing_transverse_steel() -> None:
    """It says what there is, what is needed, and where it is written."""
    section = si_section(fy=550.0)
    found = confinement_of(section, place(section, si_layout("4 25")), transverse=300.0)
    assert found.note == (
        "Ktr = 8.6 mm; fy of 550 MPa and more needs 0.5 db = 12.7 mm along development and laps"
        " (9.7.1.4)"
    )


def test_confinement_feeds_the_general_equation() -> None:
    """4 #8 with #4 at 8 in: (4/3 + 0.5)/1.0; ld = (3/40) 60,000/sqrt(4000)/1.8333."""
    section = us_section()
    found = confinement_of(section, place(section, us_layout("4 #8")), transverse=8.0)
    taken = (section.concrete, section.steel, inch_bar("#8"))
    ld = straight_length(*taken, confinement=found.ratio, top=is_top_bar(section))
    expected = 3 / 40 * 60_000 / math.sqrt(4000) / (4 / 3 + 0.5)
    assert ld.length == pytest.approx(expected, rel=1e-12)


def test_bars_that_overlap_are_refused_by_the_equation() -> None:
    """9 #11 do not fit into 14 in; their term is below 0.5."""
    section = us_section()
    found = confinement_of(section, place(section, us_layout("9 #11")))
    assert found.ratio < 0.5
    with pytest.raises(OutOfRangeError, match="hint: bars overlap"):
        straight_length(
            section.concrete, section.steel, inch_bar("#11"), confinement=found.ratio, top=False
        )


@pytest.mark.parametrize("spacing", [0.0, -1.0, math.nan])
def test_stirrup_spacing_out_of_range(spacing: float) -> None:
    """No stirrups are None, not zero."""
    section = us_section()
    placement = place(section, us_layout("4 #8"))
    with pytest.raises(OutOfRangeError, match=rf"^transverse: got {spacing:g}; allowed: above 0$"):
        confinement_of(section, placement, transverse=spacing)


@pytest.mark.parametrize("layer", [0, -1, 3])
def test_layer_that_is_not_there(layer: int) -> None:
    """Layers count from 1."""
    section = us_section()
    placement = place(section, us_layout("2 #8", "2 #8"))
    message = rf"^layer: got {layer}; allowed: 1 to 2$"
    with pytest.raises(OutOfRangeError, match=message):
        confinement_of(section, placement, layer=layer)
    with pytest.raises(OutOfRangeError, match=message):
        is_top_bar(section, placement, layer=layer)
    with pytest.raises(OutOfRangeError, match=message):
        meets_short_form(section, placement, layer=layer, least_stirrups=True)


def test_size_that_is_not_there() -> None:
    """A size of another layer has no place in this one."""
    section = us_section()
    placement = place(section, us_layout("2 #9", "2 #8"))
    message = r"^diameter: got 1; allowed: a diameter of layer 1$"
    with pytest.raises(OutOfRangeError, match=message):
        confinement_of(section, placement, diameter=1.0)
    assert confinement_of(section, placement, layer=2, diameter=1.0).ratio > 0.0


# ---------------------------------------------------------------- the short form's first row


def narrow(gap: float) -> Section:
    """Return a beam in which three #8 have a given clear gap: web = 6 in + 2 (gap + 1 in)."""
    return us_section(outline=Outline(web=8.0 + 2.0 * gap, depth=24.0), aggregate=0.5)


@pytest.mark.parametrize(
    ("gap", "with_stirrups", "without"),
    [(0.99, False, False), (1.0, True, False), (1.99, True, False), (2.0, True, True)],
)
def test_clear_gap_of_the_first_row(gap: float, with_stirrups: bool, without: bool) -> None:
    """Gap of db with the least stirrups, of 2 db without."""
    section = narrow(gap)
    placement = place(section, us_layout("3 #8"))
    assert meets_short_form(section, placement, least_stirrups=True) is with_stirrups
    assert meets_short_form(section, placement, least_stirrups=False) is without


@pytest.mark.parametrize(("cover", "met"), [(0.90, False), (0.91, True)])
def test_cover_of_the_first_row(cover: float, met: bool) -> None:
    """The bar's own cover, 0.5 in of stirrup included, is at least db: #11, 1.41 in."""
    section = us_section(cover=cover, outline=Outline(web=20.0, depth=24.0))
    placement = place(section, us_layout("2 #11"))
    assert meets_short_form(section, placement, least_stirrups=True) is met


@pytest.mark.parametrize(("cover", "met"), [(1.75, False), (1.76, True)])
def test_side_cover_of_the_first_row(cover: float, met: bool) -> None:
    """An upper #18 (2.257 in) lies far from below but against the leg of the #4 stirrup."""
    section = us_section(cover=cover, layer_gap=3.0, outline=Outline(web=20.0, depth=30.0))
    placement = place(section, us_layout("2 #18", "2 #18"))
    assert meets_short_form(section, placement, layer=2, least_stirrups=True) is met


def test_gap_between_layers_of_the_first_row() -> None:
    """#9 (1.128 in) in two layers 1 in apart miss it; 1.13 in apart they do not."""
    for gap, met in ((1.0, False), (1.13, True)):
        section = us_section(layer_gap=gap)
        placement = place(section, us_layout("2 #9", "2 #9"))
        assert meets_short_form(section, placement, least_stirrups=True) is met


# ---------------------------------------------------------------- top bars


@pytest.mark.parametrize(
    ("depth", "top"),
    [(15.0, False), (15.01, True)],
)
def test_top_bars_in_inches(depth: float, top: bool) -> None:
    """Hogging, 1.5 in cover, #4 stirrup, #8 bar: depth - 3 in below it, more than 12 in."""
    section = us_section(outline=Outline(web=14.0, depth=depth), Mu=-1e6)
    assert is_top_bar(section, place(section, us_layout("4 #8"))) is top


@pytest.mark.parametrize(("depth", "top"), [(378.1, False), (378.2, True)])
def test_top_bars_in_millimetres(depth: float, top: bool) -> None:
    """40 mm cover, No. 13 stirrup, No. 25 bar: depth - 78.1 mm below it, more than 300 mm."""
    section = si_section(outline=Outline(web=350.0, depth=depth), Mu=-1e8)
    assert is_top_bar(section, place(section, si_layout("4 25"))) is top


@pytest.mark.parametrize(("depth", "top"), [(14.0, False), (14.01, True)])
def test_top_bars_without_a_placement(depth: float, top: bool) -> None:
    """The concrete below the stirrup counts: depth - 2 in."""
    section = us_section(outline=Outline(web=14.0, depth=depth), Mu=-1e6)
    assert is_top_bar(section) is top


def test_lower_layers_of_top_steel() -> None:
    """16.5 in deep: 13.5 in below layer 1, 11.5 in below layer 2."""
    section = us_section(outline=Outline(web=14.0, depth=16.5), Mu=-1e6)
    placement = place(section, us_layout("2 #8", "2 #8"))
    assert is_top_bar(section, placement)
    assert not is_top_bar(section, placement, layer=2)


def test_thinnest_bar_of_a_top_layer() -> None:
    """15.1 in deep: 12.1 in below a #8, 12.35 in below a #6; 14.9 in: 11.9 in and 12.15 in."""
    for depth, top in ((15.1, True), (14.9, True), (14.7, False)):
        section = us_section(outline=Outline(web=14.0, depth=depth), Mu=-1e6)
        assert is_top_bar(section, place(section, us_layout("2 #8 + 1 #6"))) is top


def test_bottom_bars() -> None:
    """Sagging: a flange on top and a deep beam make no top bars; a layer 12 in up is one."""
    outline = Outline(web=14.0, depth=48.0, top=Flange(width=60.0, thickness=5.0))
    section = us_section(outline=outline, layer_gap=10.0)
    placement = place(section, us_layout("2 #8", "2 #8"))
    assert not is_top_bar(section)
    assert not is_top_bar(section, placement)
    assert is_top_bar(section, placement, layer=2)  # 2 + 1 + 10 = 13 in
