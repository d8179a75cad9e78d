"""The drawing read back: bars where the placement has them, shapes, dimensions, texts."""

from __future__ import annotations

import io
import math
import re
from itertools import pairwise
from typing import Any

import ezdxf
import pytest
from ezdxf.document import Drawing
from ezdxf.tools.text import fast_plain_mtext

from engine import CheckedLayout, Flange, Outline, check_layout, place
from optimizer import CheckResult, RankResult
from optimizer.documents.section_drawing import drawing_dxf
from optimizer.documents.section_shapes import concrete_corners, drawn_layers, stirrup_bends
from optimizer.documents.short_list_table import layouts_of
from tests.documents.sample_results import HOSTILE, RESULTS, checked, ranked, renamed
from tests.engine.builders import us_layout, us_section

# Lengths of some thousand units in double precision, added to an origin and read back.
CLOSE = 1e-9
OUTLINES = [
    Outline(web=14.0, depth=24.0),
    Outline(web=14.0, depth=24.0, top=Flange(width=60.0, thickness=5.0)),
    Outline(web=14.0, depth=24.0, top=Flange(width=40.0, thickness=5.0, left=0.0)),
    Outline(web=14.0, depth=24.0, top=Flange(width=40.0, thickness=5.0, left=26.0)),
    Outline(web=14.0, depth=24.0, bottom=Flange(width=30.0, thickness=7.0)),
    Outline(web=14.0, depth=24.0, top=Flange(width=14.0, thickness=5.0)),
    Outline(
        web=14.0,
        depth=30.0,
        top=Flange(width=40.0, thickness=5.0),
        bottom=Flange(width=24.0, thickness=6.0, left=3.0),
    ),
]


def read(result: RankResult | CheckResult) -> Drawing:
    """Return the drawing of a result as ezdxf reads it."""
    return ezdxf.read(io.StringIO(drawing_dxf(result)))


def entities(document: Drawing, kind: str) -> list[Any]:
    """Return what a drawing shows of a kind, in its order."""
    return list(document.modelspace().query(kind))


def origins_of(document: Drawing) -> list[float]:
    """Return the middle of each stirrup, which is that of its web, left to right."""
    outer = entities(document, "LWPOLYLINE[layer=='STIRRUP']")[::2]
    xs = [[point[0] for point in line.get_points()] for line in outer]
    return [(min(x) + max(x)) / 2 for x in xs]


def chosen(result: RankResult | CheckResult) -> list[CheckedLayout | None]:
    """Return what is to be drawn of each section."""
    return [
        layouts_of(section)[0].checked if layouts_of(section) else None
        for section in result.sections
    ]


def expected_bars(layout: CheckedLayout) -> list[tuple[float, float, float]]:
    """Return x, y from the bottom face and radius of each bar of both faces."""
    section, depth = layout.section, layout.section.outline.depth
    faces = [(layout.placement, section.sagging)]
    if section.opposite is not None:
        faces.append((place(section.opposite_face(), section.opposite), not section.sagging))
    bars = []
    for placement, at_bottom in faces:
        for layer in placement.layers:
            for x, diameter in zip(layer.x, layer.diameters, strict=True):
                inside = layer.bottom + diameter / 2
                bars.append((x, inside if at_bottom else depth - inside, diameter / 2))
    return bars


@pytest.mark.parametrize("name", RESULTS)
def test_bars_are_where_the_placement_has_them(name: str) -> None:
    """Centre and radius of every bar of both faces, and no bar more."""
    result = RESULTS[name]()
    document = read(result)
    expected = [
        (origin + x, y, radius)
        for origin, layout in zip(origins_of(document), chosen(result), strict=True)
        if layout is not None
        for x, y, radius in expected_bars(layout)
    ]
    circles = entities(document, "CIRCLE")
    found = [(*circle.dxf.center.vec2, circle.dxf.radius) for circle in circles]
    assert len(found) == len(expected) >= 6
    for is_at, should in zip(sorted(found), sorted(expected), strict=True):
        assert is_at == pytest.approx(should, rel=0, abs=CLOSE)
    assert {circle.dxf.layer for circle in circles} == {"BARS"}


@pytest.mark.parametrize("name", RESULTS)
def test_drawing_needs_no_repair(name: str) -> None:
    """An audit of the file finds no error and mends nothing."""
    audit = read(RESULTS[name]()).audit()
    assert audit.errors == []
    assert audit.fixes == []


@pytest.mark.parametrize(("units", "insert", "metric"), [("us", 1, 0), ("si", 4, 1)])
def test_units_are_set(units: str, insert: int, metric: int) -> None:
    """One unit is an inch or a millimetre ($INSUNITS 1 and 4, DXF reference)."""
    document = read(ranked(units))
    assert document.header["$INSUNITS"] == insert
    assert document.header["$MEASUREMENT"] == metric
    assert document.dxfversion == "AC1024"


def test_everything_lies_on_a_named_layer() -> None:
    """Concrete, stirrups, bars, dimensions and texts are apart."""
    document = read(ranked())
    kinds: dict[str, set[str]] = {}
    for entity in document.modelspace():
        kinds.setdefault(entity.dxf.layer, set()).add(entity.dxftype())
    assert kinds == {
        "CONCRETE": {"LWPOLYLINE"},
        "STIRRUP": {"LWPOLYLINE"},
        "BARS": {"CIRCLE"},
        "DIMENSIONS": {"DIMENSION"},
        "TEXT": {"MTEXT", "LINE"},
    }
    assert all(name in document.layers for name in kinds)


@pytest.mark.parametrize("outline", OUTLINES)
def test_concrete_encloses_the_gross_area(outline: Outline) -> None:
    """The corners enclose the section's area counter-clockwise, every one a right angle."""
    corners = concrete_corners(outline)
    around = list(pairwise([*corners, corners[0]]))
    area = sum(x1 * y2 - x2 * y1 for (x1, y1), (x2, y2) in around) / 2
    assert area == pytest.approx(outline.area, rel=1e-12)
    assert len(corners) >= 4
    turns = [abs(x2 - x1) > CLOSE for (x1, _), (x2, _) in around]
    assert all(before is not after for before, after in pairwise([*turns, turns[0]]))
    heights = [y for _, y in corners]
    assert (min(heights), max(heights)) == (0.0, outline.depth)


def test_concrete_is_drawn_closed() -> None:
    """One closed line a section, as wide as its widest part."""
    result = ranked()
    lines = entities(read(result), "LWPOLYLINE[layer=='CONCRETE']")
    widths = [14.0, None, 36.0, 30.0, 10.0]
    assert len(lines) == len(widths)
    for line, width, section in zip(lines, widths, result.sections, strict=True):
        xs = [point[0] for point in line.get_points()]
        expected = section.section.outline.top.width if width is None else width  # type: ignore[union-attr]
        assert line.closed
        assert max(xs) - min(xs) == pytest.approx(expected, abs=CLOSE)


def length_of(bends: list[tuple[float, float, float]]) -> float:
    """Length of a closed line of straights and arcs: chord, and bulge of the arc on it."""
    total = 0.0
    for (x1, y1, bulge), (x2, y2, _) in zip(bends, [*bends[1:], bends[0]], strict=True):
        chord = math.dist((x1, y1), (x2, y2))
        angle = 4.0 * math.atan(bulge)
        total += chord if bulge == 0.0 else chord / (2.0 * math.sin(angle / 2.0)) * angle
    return total


@pytest.mark.parametrize(
    ("stirrup", "radius"),
    [("#3", 0.75), ("#4", 1.0), ("#5", 1.25), ("#6", 2.25)],
)
def test_stirrup_is_bent_as_the_table_has_it(stirrup: str, radius: float) -> None:
    """Inside radius 2 db to No. 5 and 3 db above: Table 25.3.2 has inside bend diameters of
    4 db and 6 db. The faces are parallel, so the outer radius is larger by the diameter.
    """
    section = us_section(stirrup=us_layout(f"1 {stirrup}").sizes[0])
    ds = section.stirrup.diameter
    for outside, inset, bend in ((False, 1.5 + ds, radius), (True, 1.5, radius + ds)):
        width, depth = 14.0 - 2 * inset, 24.0 - 2 * inset
        perimeter = 2 * (width + depth) - (8 - 2 * math.pi) * bend
        bends = stirrup_bends(section, outside=outside)
        assert length_of(bends) == pytest.approx(perimeter, rel=1e-12)
        xs, ys = [x for x, _, _ in bends], [y for _, y, _ in bends]
        assert (min(xs), max(xs)) == pytest.approx((-width / 2, width / 2), rel=1e-12)
        assert (min(ys), max(ys)) == pytest.approx((inset, 24.0 - inset), rel=1e-12)


def test_stirrup_in_a_narrow_web_closes() -> None:
    """Legs closer than two radii are joined by half circles."""
    section = us_section(outline=Outline(web=5.0, depth=24.0))
    bends = stirrup_bends(section, outside=False)
    assert len(bends) == 6
    assert length_of(bends) == pytest.approx(2 * (20.0 - 1.0) + math.pi * 1.0, rel=1e-12)


def test_dimensions_measure_the_section() -> None:
    """Width, depth, flange, cover and each layer's height are dimensioned, to scale."""
    result = checked("us")
    document = read(result)
    measured = [round(float(item.get_measurement()), 6) for item in entities(document, "DIMENSION")]
    wanted = []
    for section in result.sections:
        outline, layout = section.section.outline, section.layout.checked
        wanted += [outline.web, outline.depth, section.section.cover]
        wanted += [
            size for part in (outline.top, outline.bottom) if part is not None
            for size in (part.width, part.thickness)
        ]  # fmt: skip
        # From the tension face to the centroid of each layer.
        wanted += [outline.depth - depth for depth in layout.layer_depths]
    assert len(wanted) >= 15
    for value in wanted:
        assert round(value, 6) in measured, value
    # Each has its picture, so that viewers need not make one.
    for item in entities(document, "DIMENSION"):
        assert len(document.blocks.get(item.dxf.geometry)) > 3


def texts_of(document: Drawing) -> list[str]:
    """Return all texts of a drawing without their codes."""
    return [str(fast_plain_mtext(item.text)) for item in entities(document, "MTEXT")]


def test_layers_and_marks_are_named() -> None:
    """Each layer has its call-out, each section its mark, demand and strength."""
    text = "\n".join(texts_of(read(checked("us"))))
    for label in (
        "R1 rectangle",
        "layer 1: 3 #8",
        "layer 2: 2 #8",
        "layer 1: 2 #9 + 1 #8",
        "opposite, layer 1: 2 #8",
        "opposite, layer 2: 2 #7",
        "Mu = +300.0 kip*ft",
        "stirrup #4, inside radius 1 in, cover 1.5 in",
        "LAYOUT GIVEN: FAILS ITS CHECK",
        "For review by a licensed design professional",
        "Not checked:",
        "Quay sheds  (ACI 318-19)",
    ):
        assert label in text, label


def test_section_without_layout_shows_no_bars() -> None:
    """It says so; nobody takes the strongest layout that fits for one that passes."""
    document = read(ranked())
    assert any("no layout meets every rule" in text for text in texts_of(document))
    last = origins_of(document)[-1]
    circles = entities(document, "CIRCLE")
    assert all(circle.dxf.center.x < last - 5.0 for circle in circles)


@pytest.mark.parametrize("name", ["ranked us", "ranked si", "checked us"])
def test_sections_stand_apart_on_round_origins(name: str) -> None:
    """Webs stand on multiples of 10 in or 250 mm, no concrete on another's dimensions."""
    result = RESULTS[name]()
    document = read(result)
    step = 10.0 if result.job.edition.units == "us" else 250.0
    for x in origins_of(document):
        assert x / step == pytest.approx(round(x / step), abs=CLOSE)
    lines = entities(document, "LWPOLYLINE[layer=='CONCRETE']")
    spans = [
        (min(point[0] for point in line.get_points()), max(point[0] for point in line.get_points()))
        for line in lines
    ]
    for (_, end), (start, _) in pairwise(spans):
        assert end < start
    notes = [item.dxf.insert.x for item in entities(document, "MTEXT")]
    assert min(notes) <= spans[0][0]


@pytest.mark.parametrize("sagging", [True, False])
def test_layer_centroids_are_those_of_the_check(sagging: bool) -> None:
    """A drawn layer's centroid is as far from the compression face as the check has it."""
    section = us_section(Mu=3e6 if sagging else -3e6)
    layout = check_layout(section, us_layout("2 #9 + 2 #7", "2 #9"))
    heights = [24.0 - depth if sagging else depth for depth in layout.layer_depths]
    assert [layer.centroid for layer in drawn_layers(layout)] == pytest.approx(heights, rel=1e-12)


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_texts_are_harmless(name: str) -> None:
    """The drawing can be encoded, read and audited; the text adds no entity and no code."""
    text = HOSTILE[name]
    written = drawing_dxf(renamed(text))
    again = ezdxf.read(io.StringIO(written.encode("utf-8").decode("utf-8")))
    audit = again.audit()
    assert (audit.errors, audit.fixes) == ([], [])
    plain_name = read(renamed("B1"))
    assert len(again.modelspace()) == len(plain_name.modelspace())
    for shown in texts_of(again):
        assert max(len(line) for line in shown.splitlines()) <= 100
        assert not re.search(r"[\x00-\x09\x0b-\x1f\x7f-\x9f]", shown)
    if text.isprintable() and len(text) <= 80 and name != "codes of a drawing":
        assert texts_of(again).count(text) == 2


def test_control_codes_of_drawings_are_shown_as_text() -> None:
    """Braces, backslashes and carets are shown; codes of characters are broken by a blank."""
    shown = texts_of(read(renamed(HOSTILE["codes of a drawing"])))
    assert shown.count(r"{\C1;red}\P% %c100 ^J\U +0041 \M +1815C") == 2


def test_equal_results_give_equal_text() -> None:
    """No date and no random identifier is in it."""
    first = drawing_dxf(ranked())
    assert drawing_dxf(ranked()) == first
    assert not ezdxf.options.write_fixed_meta_data_for_testing
