"""The page of options says what the result says, and holds any text harmlessly."""

from __future__ import annotations

import dataclasses
import html
import re
from xml.etree import ElementTree as ET

import pytest

from engine import CheckedLayout
from optimizer import parse_job
from optimizer.documents.page import page_html
from optimizer.documents.page_differences import difference_lines
from optimizer.documents.plot import options_plot
from optimizer.documents.wording import Figures
from optimizer.options import Option, OptionsResult, options
from optimizer.wording import CAUTION, NOT_CHECKED, price_notes_of, trade_off_proof_of
from tests.documents.options_jobs import OPTIONS_SI, optioned
from tests.documents.page_jobs import Reader, drawings, parts

UNITS = ["us", "si"]
_WORKED_OUT = 2  # options of a section with their calculation on the page


def blocks_of(page: str) -> list[str]:
    """Return the part of each layout."""
    return page.split('<section class="layout">')[1:]


def sections_of(page: str) -> list[str]:
    """Return the part of each section with its layouts."""
    return page.partition('id="palette"')[0].split('id="section-')[1:]


def shown(result: OptionsResult) -> list[tuple[CheckedLayout, Option | None, bool]]:
    """Return layouts of the page in its order, and whether their calculation belongs to it."""
    found: list[tuple[CheckedLayout, Option | None, bool]] = []
    for section in result.sections:
        found.append((section.drawn.checked, None, True))
        found += [
            (option.checked, option, place < _WORKED_OUT)
            for place, option in enumerate(section.chosen)
        ]
    return found


def cells(row: str) -> list[str]:
    """Return what can be read in the cells of a row; parts of a cell are parted by bars."""
    found = re.findall(r"<t[hd][^>]*>(.*?)</t[hd]>", row, flags=re.DOTALL)
    parted = [re.sub(r"</?div[^>]*>", "|", cell) for cell in found]
    plain = [html.unescape(re.sub(r"<[^>]*>", "", cell)) for cell in parted]
    return [re.sub(r"\|+", "|", cell).strip("|") for cell in plain]


def rows(page: str, kind: str) -> list[list[str]]:
    """Return the cells of the body of the first table of a class."""
    table = page.split(f'<table class="{kind}">')[1].partition("</table>")[0]
    return [cells(row) for row in re.findall(r"<tr[^>]*>(.*?)</tr>", table, re.DOTALL)[1:]]


def number(text: str) -> float:
    """Read a number as the page writes it."""
    return float(text.replace("−", "-").removesuffix(" %"))


@pytest.mark.parametrize("units", UNITS)
def test_well_formed_and_alone(units: str) -> None:
    """Elements close in order, ids are used once, nothing is fetched or run."""
    page = page_html(optioned(units))
    read = Reader(page)
    assert page.startswith("<!DOCTYPE html>")
    assert not {"script", "link", "img", "iframe", "object", "embed"} & set(read.tags)
    assert set(re.findall(r"https?://[^\"' ]*", page)) == {"http://www.w3.org/2000/svg"}
    assert "url(" not in page
    assert "@import" not in page
    ids = [value for name, value in read.attributes if name == "id"]
    links = [value for name, value in read.attributes if name in ("href", "src", "srcset")]
    assert len(ids) == len(set(ids))
    assert links
    assert {link.removeprefix("#") for link in links} <= set(ids)
    assert not [name for name, _ in read.attributes if name.startswith("on") or name == "style"]
    assert NOT_CHECKED in read.text
    assert read.text.count(CAUTION) == 2  # below the head and at the end


@pytest.mark.parametrize("units", UNITS)
def test_equal_results_give_equal_pages(units: str) -> None:
    """Written twice, and after the job was read again, the page is the same."""
    assert page_html(optioned(units)) == page_html(optioned(units))
    if units == "si":
        assert page_html(options(parse_job(OPTIONS_SI))) == page_html(optioned("si"))


@pytest.mark.parametrize("units", UNITS)
def test_drawn_layout_comes_first_with_its_verdict(units: str) -> None:
    """The drawn layout heads its section and its layouts; a failing one names its rows."""
    result = optioned(units)
    page = page_html(result)
    for section, part in zip(result.sections, sections_of(page), strict=True):
        checked = section.drawn.checked
        failing = [row.id.replace("_", " ") for row in checked.checks if not row.ok]
        verdict = f"FAILS: {', '.join(failing)}" if failing else "passes every check"
        words = Reader(part[part.index("<h2>") :].partition("</section>")[0]).text
        assert f"Drawn {checked.layout.label}: {verdict}" in words
        first = blocks_of(part)[0]
        assert f"<h3>Drawn: {checked.layout.label}</h3>" in first
        assert verdict in first
    assert {section.drawn.checked.ok for section in optioned("us").sections} == {False}
    assert {section.drawn.checked.ok for section in optioned("si").sections} == {True}


@pytest.mark.parametrize("units", UNITS)
def test_overview(units: str) -> None:
    """Each section with its drawn layout, the number of options and the lightest of them."""
    result = optioned(units)
    figures = Figures(result.job.edition)
    table = rows(page_html(result), "overview wide")
    for section, row in zip(result.sections, table, strict=True):
        masses = [option.measures.mass for option in section.trade_off]
        assert row[:2] == [section.problem.section.mark, section.drawn.checked.layout.label]
        assert row[3] == figures.of("mass_per_length", section.drawn_measures.mass)
        assert row[5] == str(len(masses))
        assert row[7] == (figures.of("mass_per_length", min(masses)) if masses else "")


def test_sections_without_a_drawn_layout_are_named() -> None:
    """A section that has nothing drawn is said to be left out; without any nothing is said."""
    assert (
        "Without a drawn layout, so not here: not drawn" in Reader(page_html(optioned("us"))).text
    )
    assert "Without a drawn layout" not in Reader(page_html(optioned("si"))).text


@pytest.mark.parametrize("units", UNITS)
def test_chosen_options_beside_the_drawn_layout(units: str) -> None:
    """The table has the drawn layout first, then each chosen option with its figures."""
    result = optioned(units)
    to_trade = result.job.edition.system.to_trade
    for section, part in zip(result.sections, sections_of(page_html(result)), strict=True):
        if not section.trade_off:
            assert '<table class="list options">' not in part
            continue
        expected = [("drawn", section.drawn, section.drawn_measures)]
        expected += [(str(item.number), item.rated, item.measures) for item in section.chosen]
        table = rows(part, "list options")
        assert len(table) == len(expected)
        for row, (label, rated, measures) in zip(table, expected, strict=True):
            checked = rated.checked
            assert row[:7] == [
                label,
                "|".join(layer.label for layer in checked.layout.layers),
                f"{measures.mass:.2f}",
                str(measures.bars),
                f"{measures.labour:.2f}",
                f"{to_trade('moment', checked.phi_Mn):.1f}",
                f"{100 * checked.section.demand / checked.phi_Mn:.0f} %",
            ]
            if measures.cost is not None and measures.carbon is not None:
                cost, carbon = measures.cost, measures.carbon
                assert row[7:9] == [
                    f"{cost.typical:.2f}|{cost.low:.2f}–{cost.high:.2f}",
                    f"{carbon.typical:.1f}|{carbon.low:.1f}–{carbon.high:.1f}",
                ]
        for row, option in zip(table[1:], section.chosen, strict=True):
            levers = [f"{key} {after}" for key, _, after in option.levers]
            assert row[-1] == "|".join([", ".join(option.reasons), *levers])


@pytest.mark.parametrize("units", UNITS)
def test_what_is_proved_is_said(units: str) -> None:
    """Each section has the sentences that the terminal has, on proof and on order by cost."""
    result = optioned(units)
    for section, part in zip(result.sections, sections_of(page_html(result)), strict=True):
        assert html.escape(trade_off_proof_of(section)) in part
    text = Reader(page_html(result)).text
    assert ("Sorted by cost" in text) == (result.job.prices is not None)


def test_a_stopped_search_is_not_called_proved() -> None:
    """Neither with options nor without any does a stopped search claim that it is complete."""
    result = optioned("us")
    stopped = tuple(dataclasses.replace(item, proved=False) for item in result.sections)
    assert result.palette is not None
    palette = dataclasses.replace(result.palette, proved=False)
    page = page_html(dataclasses.replace(result, sections=stopped, palette=palette))
    text = Reader(page).text
    assert "Proved: " not in text
    assert text.count("NOT PROVED") == len(stopped) + 1
    assert "No layout found." in text
    assert "No layout found." not in Reader(page_html(result)).text


def test_invented_prices_are_called_so() -> None:
    """At the head, at every table with money and beside the name of the list; never otherwise."""
    result = optioned("us")
    read = Reader(page_html(result))
    with_money = sum(bool(section.chosen) for section in result.sections)
    with_money += sum(len(section.chosen) for section in result.sections)
    assert read.text.count(price_notes_of(result)) == 1 + with_money
    assert read.text.count("demo (INVENTED)") == len(result.sections)
    assert "INVENTED" not in Reader(page_html(optioned("si"))).text
    assert result.job.prices is not None
    own = dataclasses.replace(result.job.prices, invented=False, name="yard.csv")
    job = dataclasses.replace(result.job, prices=own)
    text = Reader(page_html(dataclasses.replace(result, job=job))).text
    assert "INVENTED" not in text
    assert "yard.csv" in text


@pytest.mark.parametrize("units", UNITS)
def test_differences_of_each_option(units: str) -> None:
    """Every figure drawn and of the option, and a change that is their difference."""
    result = optioned(units)
    figures = Figures(result.job.edition)
    page = page_html(result)
    for block, (_, option, _) in zip(blocks_of(page), shown(result), strict=True):
        if option is None:
            assert '<table class="against">' not in block
            continue
        table = rows(block, "against")
        given = [row for row in option.differences if (row.drawn, row.option) != (None, None)]
        assert len(table) == len(given)
        for row, difference in zip(table, given, strict=True):
            named = difference.name.replace("phi", "φ")
            assert row[0] == named
            for text, value in zip(row[2:4], (difference.drawn, difference.option), strict=True):
                if value is None:
                    assert text == "none"
                    continue
                size = figures.system.to_trade(difference.kind, value)
                if difference.kind in ("length", "area"):  # written to four digits
                    assert number(text) == pytest.approx(size, rel=0.000501, abs=0.0)
                else:
                    half = 0.500001 * 10 ** -len(text.partition(".")[2])
                    assert number(text) == pytest.approx(size, rel=0.0, abs=half)
            if difference.change is None:
                assert row[4] == ""
            elif row[4] == "–":
                assert difference.change == pytest.approx(0.0, abs=1e-6)
            else:
                change = figures.system.to_trade(difference.kind, difference.change)
                decimals = len(row[4].partition(".")[2])
                assert number(row[4]) == pytest.approx(
                    change, rel=0.0, abs=0.500001 * 10**-decimals
                )
                assert row[4][0] in "+−"
            if row[5]:
                assert difference.percent is not None
                assert number(row[5]) == pytest.approx(difference.percent, rel=0.0, abs=0.0500001)


def test_units_of_the_differences() -> None:
    """Units stand beside figures: those of the trade, money and carbon per length."""
    (option, *_) = optioned("us").sections[0].chosen
    lines = difference_lines(option.differences, Figures(optioned("us").job.edition), "DEMO")
    units = {line.name: line.unit for line in lines}
    assert units == units | {
        "steel mass": "lb/ft",
        "bars": "",
        "placed cost": "DEMO/ft",
        "carbon": "kgCO₂e/ft",
        "d": "in",
        "φ M_{n}": "kip·ft",
        "reserve over M_{u}": "%",
        "steel area": "in²",
    }


def test_a_lap_that_is_not_allowed_is_none() -> None:
    """A figure that one side lacks is called none and has no change."""
    (option, *_) = optioned("us").sections[0].chosen
    (row,) = [item for item in option.differences if item.name == "class B lap"]
    figures = Figures(optioned("us").job.edition)
    one, other = (
        dataclasses.replace(row, option=None),
        dataclasses.replace(row, drawn=None, option=None),
    )
    (line,) = difference_lines((one, other), figures, "")
    assert (line.option, line.change, line.percent) == ("none", "", "")


def test_bands_of_money_and_carbon() -> None:
    """Low, typical and high of the drawn layout and the option, and the changes of each."""
    result = optioned("us")
    drawn = {id(o): s.drawn_measures for s in result.sections for o in s.chosen}
    checked = 0
    for block, (_, option, _) in zip(blocks_of(page_html(result)), shown(result), strict=True):
        if option is None:
            continue
        table = rows(block, "bands")
        before, after = drawn[id(option)], option.measures
        assert before.cost is not None
        assert after.cost is not None
        assert before.carbon is not None
        assert after.carbon is not None
        for place, (one, other) in enumerate(
            ((before.cost, after.cost), (before.carbon, after.carbon))
        ):
            for row, band in zip(table[3 * place :], (one, other), strict=False):
                assert row[2:] == [f"{band.low:.2f}", f"{band.typical:.2f}", f"{band.high:.2f}"]
            changes = [
                other.low - one.low,
                other.typical - one.typical,
                other.high - one.high,
            ]
            shown_changes = [number(text) for text in table[3 * place + 2][2:]]
            assert shown_changes == pytest.approx(changes, rel=0.0, abs=0.00500001)
        checked += 1
    assert checked > 3
    assert '<table class="bands">' not in page_html(optioned("si"))


@pytest.mark.parametrize("units", UNITS)
def test_points_to_be_agreed(units: str) -> None:
    """Every point that the engineer of record has to accept stands at its option, word by word."""
    result = optioned(units)
    for block, (_, option, _) in zip(blocks_of(page_html(result)), shown(result), strict=True):
        listed = [html.unescape(text) for text in re.findall(r"<li>(.*?)</li>", block)]
        assert listed == ([] if option is None else list(option.accept))
        for key, before, after in () if option is None else option.levers:
            text = Reader(block.partition("</section>")[0]).text
            assert f"{key} {before} → {after}" in text


@pytest.mark.parametrize("units", UNITS)
def test_rows_of_every_layout_and_calculation_of_the_first(units: str) -> None:
    """All layouts have every check row; drawn and first two options are worked out as well."""
    result = optioned(units)
    page = page_html(result)
    assert len(blocks_of(page)) == len(shown(result))
    for block, (checked, _, worked) in zip(blocks_of(page), shown(result), strict=True):
        names = {row.id for row in checked.checks}
        found = re.findall(r'<tbody class="row \w+" data-check="(\w+)">', block)
        assert found == [row.id for row in checked.checks]
        lines = set(re.findall(r'<li class="line" data-check="(\w+)">', block))
        assert lines == (names if worked else set())
    bars = [len(parts(root, "circle", "bar")) for root in drawings(page, "section-drawing")]
    assert bars == [checked.layout.count for checked, _, _ in shown(result)]


@pytest.mark.parametrize("units", UNITS)
def test_whole_trade_off_in_the_plot(units: str) -> None:
    """A mark for each layout of the set, full ones for the chosen, a diamond for the drawn."""
    for section in optioned(units).sections:
        if not section.trade_off:
            continue
        root = ET.fromstring(options_plot(section))
        marks = parts(root, "circle", "mark")
        assert len(marks) == len(section.trade_off)
        assert sum(mark.get("class") == "mark best" for mark in marks) == len(section.chosen)
        (diamond,) = parts(root, "polygon", "mark")
        texts = " ".join(text.text or "" for text in parts(root, "text")).replace(",", " ").split()
        for label in ("drawn", *(str(option.number) for option in section.chosen)):
            assert label in texts
        # Two known masses fix the scale; the drawn layout and every option have to agree.
        corner = [point.split(",") for point in diamond.get("points", "").split()]
        at = [(float(mark.get("cx", "nan")), float(mark.get("cy", "nan"))) for mark in marks]
        at.append((float(corner[0][0]), (float(corner[0][1]) + float(corner[2][1])) / 2))
        ordered = [o for o in section.trade_off if not o.reasons] + list(section.chosen)
        layouts = [option.checked for option in ordered] + [section.drawn.checked]
        places = sorted(zip(layouts, at, strict=True), key=lambda pair: pair[0].layout.mass)
        (low, (left, _)), (high, (right, _)) = places[0], places[-1]
        scale = (right - left) / (high.layout.mass - low.layout.mass)
        places.sort(key=lambda pair: pair[0].phi_Mn)
        (weak, (_, bottom)), (strong, (_, top)) = places[0], places[-1]
        rise = (top - bottom) / (strong.phi_Mn - weak.phi_Mn)
        for layout, (x, y) in places:
            assert x == pytest.approx(
                left + scale * (layout.layout.mass - low.layout.mass), abs=0.01
            )
            assert y == pytest.approx(bottom + rise * (layout.phi_Mn - weak.phi_Mn), abs=0.01)


def test_palette_of_the_job() -> None:
    """Sizes, total and saving of each choice; the layout of every section in each of them."""
    result = optioned("us")
    palette = result.palette
    assert palette is not None
    assert len(palette.choices) > 1
    page = page_html(result)
    assert rows(page, "palette") == [
        [
            ", ".join(bar.designation for bar in choice.sizes),
            f"{choice.total:.2f}",
            f"{choice.saving:.2f}" if choice.saving else "",
        ]
        for choice in palette.choices
    ]
    lengths = {"too weak": "24 ft"}  # one foot where the job gives none
    assert rows(page, "palette layouts") == [
        [
            mark,
            lengths.get(mark, "1 ft"),
            *(
                "|".join(layer.label for layer in choice.layouts[index].layout.layers)
                for choice in palette.choices
            ),
        ]
        for index, mark in enumerate(palette.marks)
    ]
    text = Reader(page).text
    assert palette.left_out == ("nothing passes",)
    assert "Left out, having no layout at all: nothing passes" in text
    assert "score (lb/ft) times length (ft)" in text
    assert 'id="palette"' not in page_html(optioned("si"))


def test_no_palette_is_enough() -> None:
    """If no number of sizes serves every section, that is what the page says."""
    result = optioned("us")
    assert result.palette is not None
    none = dataclasses.replace(result.palette, choices=())
    text = Reader(page_html(dataclasses.replace(result, palette=none))).text
    assert "No choice of up to 3 sizes serves every section." in text
    assert "every choice is the best" not in text


@pytest.mark.parametrize("units", UNITS)
def test_levers_are_repeated(units: str) -> None:
    """What was tried besides stands with the inputs."""
    text = Reader(page_html(optioned(units))).text
    wanted = {
        "us": ("sizes tried#6, #7, #8, #9, #11", "grades tried besidesA615-80",
               "stirrups tried besides#3", "widths tried besides14 in"),
        "si": ("stirrups tried besides10", "most sizes in a layout1", "pricesnone",
               "125 thick, clear 2700 left, 1700 right, span 8000 mm"),
    }  # fmt: skip
    for part in wanted[units]:
        assert part in text


HOSTILE = {
    "script": "<script>alert(1)</script>",
    "closing": "</title></style></svg><img src=x onerror=alert(1)>",
    "entities": "&lt;b&gt; &amp; &#49;",
    "template": "{{ 7 * 7 }} {% raw %}",
    "formula notation": "B_{1}^{2}",
    "quotes": "\"' onload='x'",
    "long": "B" * 5000,
}


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_texts_are_texts(name: str) -> None:
    """Marks, title, levers, points, currency and name of the prices are never mark-up."""
    text = HOSTILE[name]
    result = optioned("us")
    assert result.palette is not None
    assert result.job.prices is not None

    def marked(option: Option) -> Option:
        return dataclasses.replace(
            option, levers=(("steel", text, text),), accept=(*option.accept, text)
        )

    first, *others = result.sections
    section = dataclasses.replace(first.problem.section, mark=text)
    problem = dataclasses.replace(first.problem, section=section)
    changed = dataclasses.replace(
        first, problem=problem, trade_off=tuple(marked(option) for option in first.trade_off)
    )
    job = dataclasses.replace(
        result.job,
        title=text,
        problems=(problem, *result.job.problems[1:]),
        prices=dataclasses.replace(result.job.prices, name=text, currency=text),
    )
    palette = dataclasses.replace(
        result.palette, marks=(text, *result.palette.marks[1:]), left_out=(text,)
    )
    page = page_html(
        dataclasses.replace(result, job=job, sections=(changed, *others), palette=palette)
    )
    read, harmless = Reader(page), Reader(page_html(optioned("us")))
    assert set(read.tags) == set(harmless.tags)
    assert {name for name, _ in read.attributes} == {name for name, _ in harmless.attributes}
    # Title twice; the mark in overview, section, palette and each of its layouts; the section
    # left out of the palette; the name of the prices at the head, at each input and table.
    invented = 1 + sum(bool(item.chosen) + len(item.chosen) for item in result.sections)
    least = 2 + 3 + 1 + len(first.chosen) + 1 + len(result.sections) + invented
    # Each option has its lever twice, once in the table, and the point to be agreed.
    least += 4 * len(first.chosen)
    assert read.text.count(re.sub(r"\s+", " ", text)) > least  # and the currency
