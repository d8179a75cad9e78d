"""The page says what the result says, holds any text harmlessly and needs nothing else."""

from __future__ import annotations

import dataclasses
import re

import pytest

from engine import CheckedLayout
from engine.units import plain
from optimizer import parse_job, rank
from optimizer.documents.page import page_html
from optimizer.documents.wording import Figures, formula, visible
from optimizer.results import CheckResult, RankResult
from optimizer.wording import CAUTION, NOT_CHECKED, proof_of
from tests.documents.page_jobs import RANKED_SI, Reader, checked, drawings, parts, ranked
from tests.optimizer.jobs import job_text


def results() -> list[RankResult | CheckResult]:
    """Return results of every kind."""
    return [ranked("us"), ranked("si"), checked("us"), checked("si")]


def shown_layouts(result: RankResult | CheckResult) -> list[CheckedLayout]:
    """Return the layouts that the page works out, in its order."""
    if isinstance(result, CheckResult):
        return [section.layout.checked for section in result.sections]
    found = []
    for section in result.sections:
        found += [item.checked for item in section.layouts if item.rank == 1 or item.marks]
        if section.diagnosis is not None and section.diagnosis.strongest is not None:
            found.append(section.diagnosis.strongest)
    return found


KINDS = ["rank us", "rank si", "check us", "check si"]


@pytest.mark.parametrize("result", results(), ids=KINDS)
def test_well_formed_and_alone(result: RankResult | CheckResult) -> None:
    """Elements close in order; no script, no address but those of name spaces and of the page."""
    page = page_html(result)
    read = Reader(page)
    assert page.startswith("<!DOCTYPE html>")
    assert not {"script", "link", "img", "iframe", "object", "embed"} & set(read.tags)
    assert set(re.findall(r"https?://[^\"' ]*", page)) == {"http://www.w3.org/2000/svg"}
    assert "url(" not in page
    assert "@import" not in page
    links = [value for name, value in read.attributes if name in ("href", "src", "srcset")]
    ids = {f"#{value}" for name, value in read.attributes if name == "id"}
    assert links
    assert set(links) <= ids
    assert not [name for name, _ in read.attributes if name.startswith("on") or name == "style"]


@pytest.mark.parametrize("result", results(), ids=KINDS)
def test_ids_are_used_once(result: RankResult | CheckResult) -> None:
    """No two elements share an id."""
    ids = [value for name, value in Reader(page_html(result)).attributes if name == "id"]
    assert len(ids) == len(set(ids))


@pytest.mark.parametrize("result", results(), ids=KINDS)
def test_says_what_is_not_checked(result: RankResult | CheckResult) -> None:
    """Code, caution and what is not checked stand on every page."""
    text = Reader(page_html(result)).text
    assert result.job.edition.name in text
    assert NOT_CHECKED in text
    assert text.count(CAUTION) == 2  # below the head and at the end


@pytest.mark.parametrize("result", results(), ids=KINDS)
def test_every_row_of_every_layout(result: RankResult | CheckResult) -> None:
    """Each layout has a table row and a line of the calculation for each row of its check."""
    page = page_html(result)
    layouts = shown_layouts(result)
    blocks = page.split('<section class="layout">')[1:]
    assert len(blocks) == len(layouts)
    for block, layout in zip(blocks, layouts, strict=True):
        rows = re.findall(r'<tbody class="row (\w+)" data-check="(\w+)">', block)
        assert [name for _, name in rows] == [row.id for row in layout.checks]
        words = {"ok": "ok", "fails": "fails", "provide": "provide", "not applicable": "none"}
        assert [word for word, _ in rows] == [words[row.state.value] for row in layout.checks]
        worked = set(re.findall(r'<li class="line" data-check="(\w+)">', block))
        assert worked == {row.id for row in layout.checks}
        for row in layout.checks:
            assert f"<td>{row.clause}</td>" in block


@pytest.mark.parametrize("result", results(), ids=KINDS)
def test_figures_of_each_layout(result: RankResult | CheckResult) -> None:
    """The main figures beside a drawing are those of the result, to the digits written."""
    figures = Figures(result.job.edition)
    blocks = page_html(result).split('<section class="layout">')[1:]
    for block, layout in zip(blocks, shown_layouts(result), strict=True):
        listed = re.findall(r"<dt>(.*?)</dt><dd>(.*?)</dd>", block)
        shown = {re.sub(r"<[^>]*>", "", name): value for name, value in listed}
        moment = layout.section.edition.system.to_trade("moment", layout.phi_Mn)
        required = layout.As_required
        assert shown == shown | {
            "As": figures.of("area", layout.As),
            "As,required": "no amount of these bars"
            if required is None
            else figures.of("area", required),
            "d": figures.length(layout.d),
            "dt": figures.length(layout.dt),
            "a": figures.length(layout.a),
            "c": figures.length(layout.c),
            "εt": f"{layout.eps_t:.5f}",
            "φ": f"{layout.phi:.3f}",
            "φ Mn": f"{moment:.1f} {figures.unit('moment')}",
        }


def _list_rows(page: str) -> list[tuple[str, str, list[str]]]:
    """Return label, layout with marks, and figures of each line of the first short list."""
    table = page.split('<table class="list">')[1].partition("</table>")[0]
    found = []
    for row in re.findall(r"<tr>(<th scope=\"row\".*?)</tr>", table):
        label, _, cells = row.partition("</th>")
        bars, *figures = re.findall(r"<td[^>]*>(.*?)</td>", cells)
        found.append((re.sub(r"<[^>]*>", "", label), re.sub(r"</div>", "\n", bars), figures))
    return found


def test_short_list_is_the_result() -> None:
    """Each line of the list has its bars, mass, score, terms and strength; marks are named."""
    section = ranked("us").sections[0]
    rows = _list_rows(page_html(ranked("us")))
    assert len(rows) == len(section.layouts)
    for (label, bars, figures), item in zip(rows, section.layouts, strict=True):
        layout, score = item.checked.layout, item.score
        assert label == str(item.rank) if item.rank is not None else label.isalpha()
        lines = re.sub(r"<[^>]*>", "", bars).split("\n")
        assert lines == [
            *(layer.label for layer in layout.layers),
            *([", ".join(item.marks)] if item.marks else []),
            "",
        ]
        terms = [score.steel, score.bars, score.layers, score.sizes, score.tight]
        assert figures[:10] == [
            f"{layout.mass:.2f}",
            f"{score.total:.2f}",
            *(f"{term:.2f}" for term in terms),
            str(layout.count),
            f"{item.checked.phi_Mn / 12_000:.1f}",
            f"{100 * section.section.demand / item.checked.phi_Mn:.0f} %",
        ]


def test_proof_is_said_or_denied() -> None:
    """A proved list says so; a stopped search says that it is not proved."""
    text = Reader(page_html(ranked("us"))).text
    proofs = [proof_of(section) for section in ranked("us").sections if section.layouts]
    assert proofs
    assert all(proof.startswith("Proved: ") and proof in text for proof in proofs)
    assert "NOT PROVED" not in text
    stopped = rank(parse_job(job_text("us", section={"work_limit": "1e-9"})))
    assert "NOT PROVED" in Reader(page_html(stopped)).text


def test_lines_below_the_minimum_steel_say_so() -> None:
    """A line that passes by 9.6.1.3 alone is marked; others are not."""
    little = rank(parse_job(job_text("us", section={"Mu": '"40 kip*ft"', "keep": "3"})))
    by_clause = [
        any(row.clause == "9.6.1.3" for row in item.checked.checks)
        for item in little.sections[0].layouts
    ]
    assert any(by_clause)
    rows = _list_rows(page_html(little))
    assert ["relies on 9.6.1.3" in bars for _, bars, _ in rows] == by_clause


def test_diagnosis_of_a_section_without_a_layout() -> None:
    """Blocking rules, the strongest layout and every remedy are on the page."""
    diagnosis = ranked("us").sections[2].diagnosis
    assert diagnosis is not None
    assert diagnosis.strongest is not None
    assert diagnosis.blocked_by
    assert diagnosis.remedies
    page = page_html(ranked("us"))
    text = Reader(page).text
    assert "No layout meets every rule." in text
    assert f"Strongest that meets every other rule: {diagnosis.strongest.layout.label}" in text
    for block in diagnosis.blocked_by:
        name = block.id.replace("_", " ").capitalize()
        counts = f'<td class="n">{block.families}</td><td class="n">{block.of}</td>'
        assert f'<th scope="row">{name}</th>{counts}' in page
    for remedy in diagnosis.remedies:
        cells = (remedy.before, remedy.after, remedy.best.layout.label)
        row = "".join(f"<td>{cell}</td>" for cell in cells)
        assert f'<th scope="row">{remedy.key}</th>{row}' in page.replace("&#39;", "'")


def test_search_that_found_nothing_and_proved_nothing() -> None:
    """A stopped search without a layout does not claim that there is none."""
    section = dataclasses.replace(ranked("us").sections[2], proved=False)
    text = Reader(page_html(dataclasses.replace(ranked("us"), sections=(section,)))).text
    assert "No layout meets every rule." not in text
    assert "NOT PROVED" in text


def test_nothing_helps() -> None:
    """Without a strongest layout and without remedies the page says both."""
    section = ranked("us").sections[2]
    assert section.diagnosis is not None
    bare = dataclasses.replace(section.diagnosis, strongest=None, remedies=(), blocked_by=())
    result = dataclasses.replace(
        ranked("us"), sections=(dataclasses.replace(section, diagnosis=bare),)
    )
    text = Reader(page_html(result)).text
    assert "No single change that was tried makes a layout possible." in text
    assert "No layout meets the rules other than strength either." in text


def test_failing_layout_says_which_rules() -> None:
    """The verdict of a failing layout names its rules, with a word and not with colour."""
    result = checked("us")
    text = Reader(page_html(result)).text
    failing = [item for item in result.sections if not item.layout.checked.ok]
    assert failing
    for item in failing:
        names = [row.id.replace("_", " ") for row in item.layout.checked.checks if not row.ok]
        assert f"FAILS: {', '.join(names)}" in text


def test_equal_results_give_equal_pages() -> None:
    """The page of a job is the same on a second run."""
    first, second = (page_html(rank(parse_job(RANKED_SI))) for _ in range(2))
    assert first == second


HOSTILE = {
    "script": "<script>alert(1)</script>",
    "closing": "</title></style></svg><img src=x onerror=alert(1)>",
    "entities": "&lt;b&gt; &amp; &#49;",
    "template": "{{ 7 * 7 }} {% raw %}",
    "formula notation": "B_{1}^{2}",
    "quotes": "\"' onload='x'",
    "sheet": "=CMD()|' /C calc'!A0",
    "wide": "梁一号・支点上 😀",
    "long": "B" * 5000,
}


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_texts_are_texts(name: str) -> None:
    """Mark and title of any kind stand on the page as they are, and nowhere as mark-up."""
    text = HOSTILE[name]
    result = ranked("si")
    (section,) = result.sections
    problem = section.problem
    marked = dataclasses.replace(
        section,
        problem=dataclasses.replace(
            problem, section=dataclasses.replace(problem.section, mark=text)
        ),
    )
    job = dataclasses.replace(result.job, title=text)
    page = page_html(dataclasses.replace(result, job=job, sections=(marked,)))
    read, usual = Reader(page), Reader(page_html(result))
    assert read.tags == usual.tags
    assert {name for name, _ in read.attributes} == {name for name, _ in usual.attributes}
    # Title twice; the mark in overview, section and each worked layout.
    assert read.text.count(re.sub(r"\s+", " ", text)) == 4 + len(shown_layouts(result))


def test_control_characters_are_replaced() -> None:
    """What no page may hold is replaced; turned directions and lone surrogates too."""
    assert visible("a\x00b\x1b[2Jc\ud800d\u202ee\tf\u200dg") == (
        "a\ufffdb\ufffd[2Jc\ufffdd\ufffde f\u200dg"
    )
    result = ranked("si")
    job = dataclasses.replace(result.job, title="x\x00\ud800")
    page = page_html(dataclasses.replace(result, job=job))
    assert page.encode("utf-8").count("\ufffd".encode()) == 2 * 2  # in <title> and <h1>


def test_formula_notation() -> None:
    """Braces after a low line or a caret stand low or high; everything else is escaped."""
    assert formula("a_{b}^{2} < c") == "a<sub>b</sub><sup>2</sup> &lt; c"
    assert formula("<i>_{<b>}") == "&lt;i&gt;<sub>&lt;b&gt;</sub>"


def test_small_drawings_of_the_list() -> None:
    """There is a small drawing for each line of each list, with all bars of the line."""
    result = ranked("us")
    listed = [item for section in result.sections for item in section.layouts]
    small = drawings(page_html(result), "section-drawing small")
    assert [len(parts(root, "circle", "bar")) for root in small] == [
        item.checked.layout.count for item in listed
    ]


@pytest.mark.parametrize("units", ["us", "si"])
def test_inputs_are_repeated(units: str) -> None:
    """Moment with its sign, size of the web, cover and materials of each section."""
    result = ranked(units)
    text = Reader(page_html(result)).text
    figures = Figures(result.job.edition)
    for item in result.sections:
        section = item.section
        assert figures.moment(section.Mu, signed=True) in text
        assert f"{plain(section.outline.web)} × {figures.length(section.outline.depth)}" in text
        assert figures.of("stress", section.concrete.fc) in text
        assert figures.of("stress", section.steel.fy) in text


def test_inputs_that_few_jobs_give() -> None:
    """Gap of the job, slab, uneven overhangs and support are repeated as well."""
    text = Reader(page_html(ranked("si"))).text
    for part in (
        "gap between bars, of the job40 mm", "125 thick, clear 2700 left, 1700 right, span 8000 mm",
        "statically determinate (9.6.1.2)", "1000 left and 850 right of the web", "interior",
        "ranked by mass alone", "most lines of a patternany", "clear span8000 mm",
    ):  # fmt: skip
        assert part in text
    assert "not asked for by the job" in Reader(page_html(checked("us"))).text
