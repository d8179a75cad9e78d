"""The page of a beam read back: figures of the design, every mark, strength above demand."""

from __future__ import annotations

import re
from dataclasses import replace
from xml.etree import ElementTree as ET

import numpy as np
import pytest

from engine import State
from engine.outlines import FloatArray
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.design import BeamDesign
from optimizer.beams.variants import Role
from optimizer.beams.words import NOT_CHECKED, length_text, proof_text, zones_text
from optimizer.documents.beam_charts import moment_chart, shear_chart, shear_of
from optimizer.documents.beam_checks import by_kind
from optimizer.documents.beam_cross_sections import beam_cross_section
from optimizer.documents.beam_cuts import beam_cuts
from optimizer.documents.beam_elevation import elevations
from optimizer.documents.beam_page import beam_page
from optimizer.documents.beam_sketches import cutting_drawing
from tests.documents.beam_samples import SAMPLES, designed, renamed, without_design
from tests.documents.page_jobs import Reader
from tests.documents.sample_results import HOSTILE

SVG = "{http://www.w3.org/2000/svg}"
# Coordinates are written to a thousandth of a pixel, both ends of a line.
PIXEL = 0.0021


def curve(chart: ET.Element, kind: str, span: int) -> tuple[FloatArray, FloatArray]:
    """Return places on the axis and values of a line, from the points of the drawing."""
    scale = next(item for item in chart.iter(f"{SVG}g") if item.get("class") == "to-scale")
    for group in scale.iter(f"{SVG}g"):
        line = group.find(f"{SVG}polyline")
        if group.get("data-span") == str(span) and line is not None and line.get("class") == kind:
            points = np.array(
                [
                    [float(part) for part in pair.split(",")]
                    for pair in str(line.get("points")).split()
                ]
            )
            x = (points[:, 0] - float(str(scale.get("data-left")))) / float(
                str(scale.get("data-scale"))
            )
            y = (float(str(scale.get("data-zero"))) - points[:, 1]) / float(
                str(scale.get("data-value-scale"))
            )
            return x, y
    msg = f"no {kind} of span {span}"
    raise AssertionError(msg)


def value_of_pixel(chart: ET.Element) -> float:
    """Return the value that the rounding of coordinates may hide."""
    scale = next(item for item in chart.iter(f"{SVG}g") if item.get("class") == "to-scale")
    return PIXEL / float(str(scale.get("data-value-scale")))


@pytest.mark.parametrize("name", SAMPLES)
def test_strength_lies_outside_demand_in_the_drawn_lines(name: str) -> None:
    """At 400 places of each span phi Mn is beyond Mu of both signs, and phi Vn above Vu."""
    design = designed(name)
    moments, shears = ET.fromstring(moment_chart(design)), ET.fromstring(shear_chart(design))
    for span, demand in enumerate(design.demands):
        origin = design.problem.beam.origins[span]
        # No bar reaches into the cover of a free tip, where the moment vanishes.
        free = design.problem.length_step + design.frame.sections[span].cover
        beam = design.problem.beam
        before = free if beam.left_support(span) is None else 0.0
        after = free if beam.right_support(span) is None else 0.0
        x = origin + np.linspace(float(demand.x[0]) + before, float(demand.x[-1]) - after, 400)
        lines = {
            kind: np.interp(x, *curve(moments, kind, span))
            for kind in ("strength sagging", "strength hogging", "demand most", "demand least")
        }
        slack = value_of_pixel(moments) + 1e-6 * max(np.abs(lines["demand most"]))
        sagging = np.maximum(lines["demand most"], 0.0)
        hogging = np.minimum(lines["demand least"], 0.0)
        assert (lines["strength sagging"] >= sagging - slack).all()
        assert (lines["strength hogging"] <= hogging + slack).all()
        strength = np.interp(x, *curve(shears, "strength shear", span))
        wanted = np.interp(x, *curve(shears, "demand shear", span))
        assert (strength >= wanted - value_of_pixel(shears)).all()


@pytest.mark.parametrize("name", SAMPLES)
def test_drawn_lines_are_those_of_the_design(name: str) -> None:
    """Every point of demand and of phi Mn is a station with its value in the trade's unit."""
    design = designed(name)
    chart = ET.fromstring(moment_chart(design))
    shears = ET.fromstring(shear_chart(design))
    factor = {"us": 12_000.0, "si": 1e6}[design.edition.units]
    force = 1000.0
    for span, (demand, strength) in enumerate(zip(design.demands, design.strengths, strict=True)):
        origin = design.problem.beam.origins[span]
        for kind, x, values in (
            ("demand most", demand.x, demand.Mu_most),
            ("demand least", demand.x, demand.Mu_least),
            ("strength sagging", strength.x, strength.sagging),
            ("strength hogging", strength.x, -strength.hogging),
        ):
            places, drawn = curve(chart, kind, span)
            assert places == pytest.approx(x + origin, rel=1e-5, abs=0.1)
            assert drawn == pytest.approx(values / factor, rel=0, abs=value_of_pixel(chart))
        _, drawn = curve(shears, "demand shear", span)
        wanted = shear_of(design, span) / force
        assert drawn == pytest.approx(wanted, rel=0, abs=value_of_pixel(shears))
        assert max(curve(shears, "strength shear", span)[1]) == pytest.approx(
            strength.shear.max() / force, rel=0, abs=value_of_pixel(shears)
        )


@pytest.mark.parametrize("name", SAMPLES)
def test_schedule_is_the_design_s(name: str) -> None:
    """Each mark has a row with number, size, length and mass; totals and proof are said."""
    design = designed(name)
    page = beam_page(design)
    rows = dict(re.findall(r'<tr data-mark="(\w+)">(.*?)</tr>', page, flags=re.DOTALL))
    assert list(rows) == [item.mark for item in design.schedule.marks]
    for item in design.schedule.marks:
        cells = re.findall(r'<td class="n">(.*?)</td>', rows[item.mark])
        length = length_text(design.edition, item.length).replace('"', "&#34;")
        length = length.replace("'", "&#39;")
        assert cells == [str(item.count), length, f"{item.mass_each:.2f}", f"{item.mass:.1f}"]
        assert f"<td>{item.bar.designation}</td>" in rows[item.mark]
    text = Reader(page).text
    assert f"{design.schedule.mass:.1f}" in text
    assert proof_text(design) in text
    assert NOT_CHECKED in text
    for plan in design.stirrups:
        assert zones_text(plan) in text


@pytest.mark.parametrize("name", SAMPLES)
def test_every_bar_is_drawn_in_the_elevation(name: str) -> None:
    """Each piece has its label, and each stirrup its line."""
    design = designed(name)
    words: list[str] = []
    stirrups = 0
    for drawing, factor in elevations(design):
        root = ET.fromstring(drawing)
        assert factor >= 1
        words += [item.text or "" for item in root.iter(f"{SVG}text")]
        stirrups += sum(item.get("class") == "stirrup-line" for item in root.iter(f"{SVG}polyline"))
    for piece, mark in zip(design.pieces, design.schedule.of_pieces, strict=True):
        assert f"{piece.count} {piece.bar.designation} {mark}" in words
    assert stirrups == sum(plan.count for plan in design.stirrups)


@pytest.mark.parametrize("name", SAMPLES)
def test_elevations_stay_within_their_frames(name: str) -> None:
    """No line of a drawing leaves it."""
    for drawing, _ in elevations(designed(name)):
        root = ET.fromstring(drawing)
        width, height = float(str(root.get("width"))), float(str(root.get("height")))
        points = [
            [float(part) for part in pair.split(",")]
            for item in root.iter(f"{SVG}polyline")
            for pair in str(item.get("points")).split()
        ]
        assert all(0.0 <= x <= width and 0.0 <= y <= height for x, y in points)


def of_layouts(design: BeamDesign) -> dict[str, int]:
    """Return for each place of a design the bars of its layout."""
    pairs = zip(design.places, design.chosen, strict=True)
    return {place.mark: variant.layout.count for place, variant in pairs}


@pytest.mark.parametrize("name", SAMPLES)
def test_cross_sections_hold_the_layouts(name: str) -> None:
    """At midspan lie the bars of the bottom layout, all inside the stirrup and apart."""
    design = designed(name)
    layouts = of_layouts(design)
    cuts = beam_cuts(design)
    assert len({cut.title for cut in cuts}) == len(cuts) >= 3
    for cut in cuts:
        section = cut.section
        bars = [bar for row in cut.rows for bar in row.bars]
        half = section.outline.web / 2.0 - section.bar_face
        for bar in bars:
            radius = bar.diameter / 2.0
            assert abs(bar.x) + radius <= half + 1e-6
            assert section.bar_face - 1e-6 <= bar.y - radius
            assert bar.y + radius <= section.outline.depth - section.bar_face + 1e-6
        for number, one in enumerate(bars):
            for other in bars[:number]:
                apart = np.hypot(one.x - other.x, one.y - other.y)
                assert apart >= (one.diameter + other.diameter) / 2.0 - 1e-6
        if cut.title.endswith("at midspan"):
            mark = design.problem.beam.spans[cut.span].mark
            own = [bar for bar in bars if bar.y < section.outline.depth / 2 and bar.role in
                   (Role.RUN, Role.STOP)]  # fmt: skip
            assert len(own) == layouts[f"{mark} bottom"]
        root = ET.fromstring(beam_cross_section(design, cut))
        drawn = [item for item in root.iter(f"{SVG}circle") if item.get("class") == "bar full"]
        assert len(drawn) == len(bars)


@pytest.mark.parametrize("name", SAMPLES)
def test_stock_bars_are_filled_with_their_pieces(name: str) -> None:
    """The pieces drawn on a stock bar take its length less what is left over."""
    design = designed(name)
    for plan in design.cutting:
        root = ET.fromstring(cutting_drawing(design, plan))
        scale = float(str(next(iter(root.iter(f"{SVG}g"))).get("data-scale")))
        used = [
            float(str(item.get("width")))
            for item in root.iter(f"{SVG}rect")
            if item.get("class") == "piece"
        ]
        wanted = [bar.stock_length - bar.left_over for bar in plan.bars]
        assert len(used) == sum(count for bar in plan.bars for _, count in bar.pieces)
        assert sum(used) / scale == pytest.approx(sum(wanted), rel=0, abs=0.001 * len(used) / scale)


def test_checks_begin_with_the_governing_ones() -> None:
    """A failing row governs its kind before any ratio, and no row is lost."""
    rows = [
        BeamCheck(id="one", clause="1", where="A-B", ratio=0.5, state=State.OK),
        BeamCheck(id="two", clause="2", where="A-B", ratio=0.9, state=State.OK),
        BeamCheck(id="one", clause="1", where="B-C", ratio=0.8, state=State.OK),
        BeamCheck(id="two", clause="2", where="B-C", ratio=0.7, state=State.FAILS),
        BeamCheck(id="two", clause="2", where="C-D", state=State.NOT_APPLICABLE, note="no bars"),
    ]
    kinds = by_kind(rows)
    assert [(row.id, row.where) for row, _ in kinds] == [("one", "B-C"), ("two", "B-C")]
    assert sum(len(own) for _, own in kinds) == len(rows)
    page = beam_page(replace(designed(), checks=tuple(rows)))
    assert page.count('data-check="one"') == 1 + 2
    assert page.count('data-check="two"') == 1 + 3
    assert "FAILS: two" in page
    assert "no bars" in page


@pytest.mark.parametrize("name", SAMPLES)
def test_every_check_that_applies_has_a_row(name: str) -> None:
    """Rows that apply stand one by one, in both tables together once more for each kind."""
    design = designed(name)
    page = beam_page(design)
    applying = [row for row in design.checks if row.state is not State.NOT_APPLICABLE]
    assert applying
    for governing, rows in by_kind(design.checks):
        shown = page.count(f'data-check="{governing.id}"')
        own = [row for row in rows if row.state is not State.NOT_APPLICABLE]
        apart = {(row.clause, row.note) for row in rows if row not in own}
        assert shown == 1 + len(own) + len(apart)


def test_page_without_a_design() -> None:
    """Reasons and demand are shown; nothing is said of bars, and a lack of proof is plain."""
    page = beam_page(without_design())
    text = Reader(page).text
    assert without_design().reasons[0] in text
    assert "demand most" in page
    assert "strength sagging" not in page
    assert "Schedule" not in text
    assert "NOT PROVED" not in text
    assert "NOT PROVED" in Reader(beam_page(without_design(proved=False))).text


def test_not_proved_is_said() -> None:
    """A design whose search was stopped says so on its page."""
    design = designed()
    stopped = replace(design, proved=False, bound=0.9 * design.cost)
    assert "NOT PROVED" in beam_page(stopped)
    assert "NOT PROVED" not in beam_page(replace(design, bound=design.cost, proved=True))


@pytest.mark.parametrize("name", SAMPLES)
def test_equal_designs_give_equal_pages(name: str) -> None:
    """The page depends on the design alone, and is made without anything from outside."""
    page = beam_page(designed(name))
    assert page == beam_page(designed(name))
    assert "<script" not in page
    assert not re.search(r"""(src|href)=["'](?!#)""", page)


@pytest.mark.parametrize("text", HOSTILE.values(), ids=HOSTILE)
def test_hostile_texts_are_texts(text: str) -> None:
    """A title full of mark-up makes no element."""
    plain = Reader(beam_page(renamed("Plain")))
    hostile = Reader(beam_page(renamed(text)))
    assert hostile.tags == plain.tags
