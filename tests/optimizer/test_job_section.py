"""Keys of a `[[section]]`: moments, lengths, flanges, slabs, bars given."""

from __future__ import annotations

import pytest

from engine import Exposure
from optimizer import JobError
from tests.optimizer.jobs import problem_of


@pytest.mark.parametrize(
    ("units", "text", "value"),
    [
        ("us", '"410 kip*ft"', 410 * 12_000.0),
        ("us", '"-410 kip*ft"', -410 * 12_000.0),
        ("us", "410", 410 * 12_000.0),
        ("us", "-35.5", -35.5 * 12_000.0),
        ("us", '"4920 kip*in"', 4.92e6),
        ("si", '"550 kN*m"', 550e6),
        ("si", "550", 550e6),
        ("si", "-0.5", -0.5e6),
        ("si", '"0.55 MN*m"', 550e6),
    ],
)
def test_moment(units: str, text: str, value: float) -> None:
    """Moments in lbf*in or N*mm inside; plain numbers are kip*ft or kN*m."""
    section = problem_of(units, section={"Mu": text}).section
    assert section.Mu == pytest.approx(value, rel=1e-12)
    assert section.sagging == (value > 0)
    assert section.demand == abs(section.Mu)
    assert section.Ms is None


@pytest.mark.parametrize(
    ("units", "Mu", "Ms", "value"),
    [
        ("us", "400", "265", 3.18e6),
        ("us", "-400", '"-3180 kip*in"', -3.18e6),
        ("si", 400, 270, 27e7),
    ],
)
def test_service_moment(units: str, Mu: str, Ms: str, value: float) -> None:
    """The service moment is read as Mu is, and has to have its sign and not more than its size."""
    section = problem_of(units, section={"Mu": str(Mu), "Ms": str(Ms)}).section
    assert section.Ms == pytest.approx(value, rel=1e-12)
    for wrong, message in (("1000", "larger than Mu"), ("-10", "sign")):
        with pytest.raises(JobError, match=f"Ms.*{message}"):
            problem_of(units, section={"Mu": "400", "Ms": wrong})


@pytest.mark.parametrize("key", ["width", "depth", "cover"])
@pytest.mark.parametrize(
    ("units", "text", "value"),
    [
        ("us", '"7 1/2 in"', 7.5),
        ("us", "7.5", 7.5),
        ("us", '"0.625 ft"', 7.5),
        ("us", '"0\'-7 1/2\\""', 7.5),
        ("si", '"120 mm"', 120.0),
        ("si", "120", 120.0),
        ("si", '"0.12 m"', 120.0),
    ],
)
def test_lengths_of_the_section(key: str, units: str, text: str, value: float) -> None:
    """Lengths of the section: plain numbers are in or mm."""
    room = {"width": "40", "depth": "40"} if units == "us" else {"width": "1000", "depth": "1000"}
    cover = {"cover": "0.5"} if units == "us" else {"cover": "20"}
    stirrup = {"stirrup": '"#3"' if units == "us" else '"10"'}
    section = problem_of(units, section=room | cover | stirrup | {key: text}).section
    found = {
        "width": section.outline.web,
        "depth": section.outline.depth,
        "cover": section.cover,
    }[key]
    assert found == pytest.approx(value, rel=1e-12)


def test_stirrup_exposure_and_determinacy() -> None:
    """Names and switches, and what holds where they are left out."""
    bare = problem_of("us").section
    assert bare.stirrup.designation == "#4"
    assert (bare.exposure, bare.exposure_given) == (Exposure.INTERIOR, False)
    assert not bare.statically_determinate
    given = problem_of(
        "us",
        section={"stirrup": '"#3"', "exposure": '"weather"', "statically_determinate": "true"},
    ).section
    assert given.stirrup.designation == "#3"
    assert (given.exposure, given.exposure_given) == (Exposure.WEATHER, True)
    assert given.statically_determinate
    assert problem_of("us", section={"exposure": '"ground"'}).section.exposure is Exposure.GROUND


@pytest.mark.parametrize(
    ("side", "left"), [('"both"', 23.0), ('"left"', 46.0), ('"right"', 0.0), (None, 23.0)]
)
@pytest.mark.parametrize("key", ["flange", "bottom_flange"])
def test_flange(key: str, side: str | None, left: float) -> None:
    """A flange by its size: whole width, thickness, and the side it lies on."""
    given = 'width = "60 in", thickness = 5' + (f", side = {side}" if side else "")
    outline = problem_of("us", section={key: f"{{{given}}}"}).section.outline
    flange, other = outline.top, outline.bottom
    if key == "bottom_flange":
        flange, other = other, flange
    assert other is None
    assert flange is not None
    assert (flange.width, flange.thickness, flange.left) == (60.0, 5.0, left)


@pytest.mark.parametrize(
    ("units", "slab", "width", "left", "span"),
    [
        # Both sides, least of 8h = 40, sw/2 = 54 and ln/8 = 40.5 in (318-19, Table 6.3.2.1).
        ("us", 'thickness = "5 in", clear_left = 9, clear_right = 9, span = 27', 94, 40, 324),
        ("us", 'thickness = 5, clear_left = "9 ft", clear_right = "108 in", span = "27 ft"', 94, 40,
         324),
        # One side, least of 6h = 30, sw/2 = 54 and ln/12 = 27 in.
        ("us", "thickness = 5, clear_left = 9, span = 27", 41, 27, 324),
        ("us", "thickness = 5, clear_right = 9, span = 27", 41, 0, 324),
        # Unequal: 40 in left, sw/2 = 24 in right.
        ("us", "thickness = 5, clear_left = 9, clear_right = 4, span = 27", 78, 40, 324),
        # Least of 8h = 960, sw/2 = 1350 and ln/8 = 1025 mm.
        ("si", "thickness = 120, clear_left = 2.7, clear_right = 2.7, span = 8.2", 2270, 960, 8200),
        ("si", 'thickness = "0.12 m", clear_right = "2.7 m", span = "8200 mm"', 350 + 8200 / 12, 0,
         8200),
    ],
)  # fmt: skip
def test_slab(units: str, slab: str, width: float, left: float, span: float) -> None:
    """The effective flange of a slab; plain numbers of its distances are ft or m."""
    section = problem_of(units, section={"slab": f"{{{slab}}}"}).section
    flange = section.outline.top
    assert flange is not None
    assert flange.width == pytest.approx(width, rel=1e-12)
    assert flange.left == pytest.approx(left, rel=1e-12)
    assert section.clear_span == pytest.approx(span, rel=1e-12)


def test_span_of_its_own_beats_the_slab() -> None:
    """`span` in ft or m; without it the slab's span counts, without both there is none."""
    assert problem_of("us").section.clear_span is None
    assert problem_of("us", section={"span": "26.5"}).section.clear_span == 318.0
    assert problem_of("us", section={"span": '"26 ft 6 in"'}).section.clear_span == 318.0
    assert problem_of("si", section={"span": "8.1"}).section.clear_span == pytest.approx(8100.0)
    slab = "{thickness = 5, clear_left = 9, span = 27}"
    both = problem_of("us", section={"slab": slab, "span": "20"}).section
    assert both.clear_span == 240.0


def test_flange_and_slab_exclude_each_other() -> None:
    """Two sources of one flange are refused."""
    keys = {
        "flange": "{width = 60, thickness = 5}",
        "slab": "{thickness = 5, clear_left = 9, span = 27}",
    }
    with pytest.raises(JobError, match="both flange and slab"):
        problem_of("us", section=keys)


def test_given_layers_and_opposite_bars() -> None:
    """Layers of a drawn layout and of the other face, layer 1 first; counting is off by default."""
    problem = problem_of(
        "us",
        section={
            "layers": '["2 #9 + 2 #7", "2 #9"]',
            "opposite": '["3 #5", "2 #5"]',
        },
    )
    assert problem.drawn is not None
    assert problem.drawn.label == "2 #9 + 2 #7 / 2 #9"
    assert problem.section.opposite is not None
    assert problem.section.opposite.label == "3 #5 / 2 #5"
    assert not problem.section.count_opposite
    counted = problem_of("us", section={"opposite": '["2 #5"]', "count_opposite": "true"})
    assert counted.section.count_opposite
    with pytest.raises(JobError, match="count_opposite"):
        problem_of("us", section={"count_opposite": "true"})


@pytest.mark.parametrize(
    ("key", "text", "limit"),
    [
        ("width", "3.9", "4 to 600 in"),
        ("cover", '"13 in"', "0.375 to 12 in"),
        ("span", "1.9", "2 to 400 ft"),
        ("Mu", "0", "0.01 to 1000000 kip.ft"),
        ("fc", '"4 psi"', "500 to 20000 psi"),
        ("aggregate", '"4 in"', "0.25 to 3 in"),
        ("layer_gap", '"0.9 in"', "1 to 24 in"),
    ],
)
def test_absurd_values_name_key_and_range(key: str, text: str, limit: str) -> None:
    """An absurd value is refused with its key and the range in the unit of plain numbers."""
    with pytest.raises(JobError, match=f"{key}: .*allowed: {limit}"):
        problem_of("us", section={key: text})
