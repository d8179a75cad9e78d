"""The drawings: bars where the placement has them, to scale, and points where the list has them."""

from __future__ import annotations

import dataclasses
from itertools import pairwise
from typing import Any
from xml.etree import ElementTree as ET

import pytest

from engine import CheckedLayout, Flange, Layer, Layout, Outline, check_layout, place
from optimizer.documents.plot import strength_plot, ticks
from optimizer.documents.svg import cross_section, small_cross_section
from tests.documents.page_jobs import parts, ranked
from tests.engine.builders import si_layout, si_section, us_layout, us_section

_ROUNDED = 0.0006  # coordinates are written to a thousandth [px]

T = Outline(web=14.0, depth=24.0, top=Flange(width=60.0, thickness=5.0))
L = Outline(web=14.0, depth=24.0, top=Flange(width=30.0, thickness=5.0, left=16.0))
I_SHAPE = Outline(
    web=14.0,
    depth=40.0,
    top=Flange(width=20.0, thickness=5.0),
    bottom=Flange(width=48.0, thickness=6.0),
)
CASES: list[tuple[tuple[str, ...], dict[str, Any]]] = [
    (("4 #8",), {}),
    (("4 #8", "2 #8"), {"Mu": -3e6}),
    (("2 #9 + 2 #7", "2 #9"), {"opposite": us_layout("3 #5")}),
    (("5 #6", "3 #6", "2 #6"), {"outline": T}),
    (("2 #8 + 1 #6", "2 #6"), {"outline": T, "Mu": -3e6, "opposite": us_layout("2 #9")}),
    (("3 #9",), {"outline": L}),
    (("4 #11", "4 #11"), {"outline": I_SHAPE, "Mu": 9e6}),
    (("1 #11",), {}),
    (("30 #5",), {"outline": Outline(web=60.0, depth=16.0)}),
]


def drawn(layers: tuple[str, ...], changes: dict[str, Any]) -> tuple[CheckedLayout, ET.Element]:
    """Return a layout and its drawing."""
    checked = check_layout(us_section(**changes), us_layout(*layers))
    return checked, ET.fromstring(cross_section(checked))


def real_bars(root: ET.Element, kind: str) -> list[tuple[float, float, float]]:
    """Return x from the axis, depth from the top and diameter of drawn bars, in real lengths."""
    (group,) = parts(root, "g", "to-scale")
    scale = float(group.get("data-scale", "nan"))
    axis, top = float(group.get("data-axis", "nan")), float(group.get("data-top", "nan"))
    return [
        (
            (float(bar.get("cx", "nan")) - axis) / scale,
            (float(bar.get("cy", "nan")) - top) / scale,
            2 * float(bar.get("r", "nan")) / scale,
        )
        for bar in parts(root, "circle", kind)
    ]


def expected(checked: CheckedLayout, *, opposite: bool) -> list[tuple[float, float, float]]:
    """Return the same of the placement."""
    section = checked.section
    if opposite:
        assert section.opposite is not None
        placement = place(section.opposite_face(), section.opposite)
    else:
        placement = checked.placement
    at_bottom = section.sagging != opposite
    found = []
    for layer in placement.layers:
        for x, diameter in zip(layer.x, layer.diameters, strict=True):
            centre = layer.bottom + diameter / 2
            found.append((x, section.outline.depth - centre if at_bottom else centre, diameter))
    return found


@pytest.mark.parametrize("small", [False, True], ids=["full", "small"])
@pytest.mark.parametrize(("layers", "changes"), CASES)
def test_bars_are_where_the_placement_has_them(
    layers: tuple[str, ...], changes: dict[str, Any], small: bool
) -> None:
    """Every bar, of both faces, to scale and in its place."""
    checked, root = drawn(layers, changes)
    if small:
        root = ET.fromstring(small_cross_section(checked))
    (group,) = parts(root, "g", "to-scale")
    slack = 2 * _ROUNDED / float(group.get("data-scale", "nan"))
    kinds = [("bar", False)] + ([("opposite", True)] if "opposite" in changes else [])
    for kind, opposite in kinds:
        found, real = real_bars(root, kind), expected(checked, opposite=opposite)
        assert len(found) == len(real)
        for one, other in zip(found, real, strict=True):
            assert one == pytest.approx(other, abs=slack)


@pytest.mark.parametrize(("layers", "changes"), CASES)
def test_everything_lies_on_the_sheet(layers: tuple[str, ...], changes: dict[str, Any]) -> None:
    """Points, circles and texts are inside the view box, call-outs two lines apart."""
    _, root = drawn(layers, changes)
    _, _, width, height = (float(value) for value in root.get("viewBox", "").split())
    points = [
        tuple(float(value) for value in pair.split(","))
        for tag in ("polyline", "polygon")
        for shape in parts(root, tag)
        for pair in shape.get("points", "").split()
    ]
    points += [(float(t.get("x", "nan")), float(t.get("y", "nan"))) for t in parts(root, "text")]
    assert points
    for x, y in points:
        assert 0.0 <= x <= width
        assert 0.0 <= y <= height
    rows = [
        float(text.get("y", "nan"))
        for text in parts(root, "text")
        if text.get("class") == "note strong"
    ]
    assert all(below - above >= 32.0 for above, below in pairwise(rows))


def test_call_outs_name_layers_and_sizes() -> None:
    """Size and number of bars, layer, depth and gap; 14 in web: gaps of (8 - 3)/3 and 8 - 1 in."""
    _, root = drawn(("4 #8", "2 #8"), {"opposite": us_layout("2 #5")})
    texts = [text.text for text in parts(root, "text")]
    for text in (
        "4 #8", "layer 1, d 21.5 in, gap 1.667 in", "2 #8", "layer 2, d 19.5 in, gap 7 in",
        "2 #5", "stirrup #4", "cover 1.5 in", "14", "24",
    ):  # fmt: skip
        assert text in texts


@pytest.mark.parametrize(("outline", "cuts"), [(T, 2), (L, 1), (Outline(web=14.0, depth=24.0), 0)])
def test_flanges_that_go_on_are_broken(outline: Outline, cuts: int) -> None:
    """A flange that is not drawn to its end has a broken edge there; its true width is noted."""
    _, root = drawn(("3 #9",), {"outline": outline})
    assert len(parts(root, "polyline", "break")) == cuts
    texts = [text.text for text in parts(root, "text")]
    if outline.top is not None:
        assert f"{outline.top.width:g}" in texts
        assert f"{outline.top.thickness:g}" in texts


def test_second_size_differs_by_more_than_colour() -> None:
    """Bars of the largest size are filled, the others are not."""
    _, root = drawn(("2 #9 + 2 #7",), {})
    kinds = [bar.get("class") for bar in parts(root, "circle", "bar")]
    assert kinds == ["bar full", "bar open", "bar open", "bar full"]


def test_block_is_to_scale() -> None:
    """The shaded block is as deep as a, through flange and web."""
    checked, root = drawn(("4 #11", "4 #11"), {"outline": I_SHAPE, "Mu": 9e6})
    (group,) = parts(root, "g", "to-scale")
    boxes = parts(root, "rect", "block")
    assert checked.a > 5.0
    assert len(boxes) == 2
    drawn_depth = sum(float(box.get("height", "nan")) for box in boxes)
    assert drawn_depth / float(group.get("data-scale", "nan")) == pytest.approx(checked.a, abs=1e-3)


def test_designation_of_a_foreign_catalogue_is_escaped() -> None:
    """A size from a user's own table is text in the drawing as well."""
    bar = dataclasses.replace(si_layout("4 25").sizes[0], designation="<b>&")
    root = ET.fromstring(cross_section(check_layout(si_section(), Layout((Layer(((bar, 4),)),)))))
    assert "4 <b>&" in [text.text for text in parts(root, "text")]


@pytest.mark.parametrize(("units", "index"), [("us", 0), ("us", 1), ("si", 0)])
def test_points_of_the_plot(units: str, index: int) -> None:
    """Marks lie where mass and phi Mn have them on the axes, strong ones above the line of Mu."""
    section = ranked(units).sections[index]
    labels = [str(number) for number, _ in enumerate(section.layouts)]
    root = ET.fromstring(strength_plot(section, labels))
    marks = parts(root, "circle", "mark")
    assert len(marks) == len(section.layouts)
    to_trade = section.section.edition.system.to_trade
    at = [(float(mark.get("cx", "nan")), float(mark.get("cy", "nan"))) for mark in marks]
    masses = [item.checked.layout.mass for item in section.layouts]
    moments = [to_trade("moment", item.checked.phi_Mn) for item in section.layouts]
    (demand,) = parts(root, "polyline", "demand")
    level = float(demand.get("points", "").split()[0].split(",")[1])
    (floor,) = parts(root, "polyline", "floor")
    column = float(floor.get("points", "").split()[0].split(",")[0])
    assert section.mass_floor is not None
    # One scale an axis: two known values fix it, and every mark has to agree.
    far = max(range(len(at)), key=lambda i: masses[i])
    per_mass = (at[far][0] - column) / (masses[far] - section.mass_floor)
    high = max(range(len(at)), key=lambda i: moments[i])
    asked = to_trade("moment", section.section.demand)
    per_moment = (at[high][1] - level) / (moments[high] - asked)
    assert per_mass > 0.0 > per_moment
    for (x, y), mass, moment in zip(at, masses, moments, strict=True):
        assert x == pytest.approx(column + per_mass * (mass - section.mass_floor), abs=0.01)
        assert y == pytest.approx(level + per_moment * (moment - asked), abs=0.01)
        assert y <= level


def test_labels_of_the_plot_are_all_there() -> None:
    """Each layout's name can be read, joined with others where marks coincide."""
    section = ranked("us").sections[0]
    labels = [f"n{number}" for number, _ in enumerate(section.layouts)]
    root = ET.fromstring(strength_plot(section, labels))
    texts = " ".join(text.text or "" for text in parts(root, "text")).replace(",", " ").split()
    assert [text for text in sorted(texts) if text in labels] == sorted(labels)


@pytest.mark.parametrize(
    ("low", "high", "values"),
    [
        (0.0, 10.0, [0.0, 2.0, 4.0, 6.0, 8.0, 10.0]),
        (298.0, 311.0, [300.0, 305.0, 310.0]),
        (13.9, 14.4, [13.9, 14.0, 14.1, 14.2, 14.3, 14.4]),
    ],
)
def test_ticks_are_round(low: float, high: float, values: list[float]) -> None:
    """Multiples of 1, 2, 2.5 or 5 times a power of ten inside the range."""
    assert ticks(low, high) == pytest.approx(values)
