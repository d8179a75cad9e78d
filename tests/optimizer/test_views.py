"""What the terminal shows for a known section, and what it says about proof."""

from __future__ import annotations

import dataclasses
import io

import pytest
from rich.console import Console

from optimizer import check, parse_job
from optimizer.results import RankedSection, rank_section
from optimizer.views import View
from tests.exhaustive.test_search import _random_twin
from tests.optimizer.jobs import job_text, problem_of


def shown(result: RankedSection, *, show: int | None = None, brief: bool = True) -> str:
    """Return the plain text of a ranked section on 80 columns."""
    page = io.StringIO()
    console = Console(file=page, width=80, color_system=None, highlight=False)
    View(console, plain_text=True).ranked(result, show=show, brief=brief)
    return page.getvalue()


@pytest.fixture(scope="module")
def known() -> RankedSection:
    """Return the ranking of 14 x 24 in, 250 kip*ft, one layer of #8 bars only."""
    keys = {"Mu": "250", "sizes": '["#8"]', "max_layers": "1"}
    return rank_section(problem_of("us", section=keys))


def test_row_of_the_short_list(known: RankedSection) -> None:
    """4 #8, by hand: 10.68 lb/ft; score + 0.40 of bars; phi Mn = 0.9 x 189.6 (21.5 - 1.99)/12.

    a = 189.6/47.6 = 3.983 in, c = 4.686 in, eps_t = 0.003 (21.5 - 4.686)/4.686 = 0.0108; gaps of
    (8 - 3)/3 in over the 1 in required; 250/277.4 is 90 %.
    """
    text = shown(known)
    rows = [line.split() for line in text.splitlines()]
    (row,) = [row for row in rows if row[:3] == ["1", "4", "#8"]]
    assert row[3:] == [
        "10.68", "11.08", "10.7", "0.40", "0.00", "0.00", "0.00", "277.4", "90%", "0.0108", "1.67",
    ]  # fmt: skip


def test_heads_and_lines_fit_80_columns(known: RankedSection) -> None:
    """Every column has its head, and no line is wider than the page."""
    text = shown(known, brief=False)
    head = next(line for line in text.splitlines() if line.split()[:2] == ["#", "layout"])
    assert head.split()[2:] == [
        "mass", "score", "steel", "bars", "layers", "sizes", "tight", "phiMn", "use", "eps_t",
        "gap",
    ]  # fmt: skip
    assert max(len(line) for line in text.splitlines()) <= 80


def test_heading_of_a_section(known: RankedSection) -> None:
    """Mark, signed moment and materials in the trade's units."""
    text = shown(known)
    assert " B1 " in text.splitlines()[0]
    for part in ("Mu = +250.0 kip*ft", "f'c 4000 psi", "A615-60 fy 60000 psi", "aggregate 0.75 in"):
        assert part in text


def test_proof_of_a_list_that_holds_everything(known: RankedSection) -> None:
    """A list shorter than its length says that no other kind of layout meets every rule."""
    text = " ".join(shown(known).split())
    assert "Proved: no other kind of layout meets every rule" in text
    assert "NOT PROVED" not in text
    assert "lightest of all: 4 #8 (line 1)" in text
    assert "fewest bars of all: 4 #8 (line 1)" in text


def test_proof_of_a_full_list() -> None:
    """A full list names the value below which nothing was left out."""
    result = rank_section(problem_of("us", section={"by": '"lightest"', "variety": '"off"'}))
    last = result.layouts[9].checked.layout.mass
    text = " ".join(shown(result).split())
    assert f"nothing left out has a mass below {last:.2f}." in text


def test_stopped_search_is_said_plainly() -> None:
    """A search that the work limit stopped is not called proved."""
    text = " ".join(shown(rank_section(problem_of("us", section={"work_limit": "1e-9"}))).split())
    assert "NOT PROVED: the work limit stopped the search" in text
    assert "Proved:" not in text


def test_stopped_search_without_a_find_does_not_claim_that_there_is_none() -> None:
    """Nothing found before the work limit is not the same as nothing there."""
    problem = _random_twin(126).problem
    none = rank_section(problem_of("us", section={"Mu": "3000"}))
    stopped = dataclasses.replace(none, problem=problem, proved=False)
    text = " ".join(shown(stopped).split())
    assert "work limit" in text
    assert "No layout meets every rule." not in text


def test_diagnosis() -> None:
    """Nothing fits: blocking rules, the strongest layout and changes that help."""
    keys = {"Mu": "320", "sizes": '["#8"]', "max_layers": "1", "width": "12"}
    result = rank_section(problem_of("us", section=keys))
    text = " ".join(shown(result).split())
    assert "No layout meets every rule." in text
    assert "flexural_strength (1 of 1)" in text
    assert result.diagnosis is not None
    strongest = result.diagnosis.strongest
    assert strongest is not None
    share = 100 * strongest.phi_Mn / (320 * 12_000)
    assert f"Strongest that fits: {strongest.layout.label}" in text
    assert f"{share:.0f}% of Mu" in text
    for remedy in result.diagnosis.remedies:
        assert f"{remedy.key} " in text


def test_check_of_another_line() -> None:
    """The full check follows the list: line 1, or the line asked for, or a word that it is none."""
    result = rank_section(problem_of("us", section={"keep": "3"}))
    labels = [item.checked.layout.label for item in result.layouts]
    assert f"Line 1: {labels[0]}" in shown(result, brief=False)
    assert f"Line 2: {labels[1]}" in shown(result, show=2, brief=False)
    assert "There is no line 9: the list has 3." in shown(result, show=9, brief=False)
    assert "Line " not in shown(result)


@pytest.mark.parametrize(
    ("layers", "words"), [('["4 #9"]', "passes every check"), ('["2 #5"]', "FAILS: ")]
)
def test_checked_section(layers: str, words: str) -> None:
    """The verdict stands in the title, and every row of the check is printed."""
    (section,) = check(parse_job(job_text(section={"layers": layers}))).sections
    page = io.StringIO()
    console = Console(file=page, width=80, color_system=None, highlight=False)
    View(console, plain_text=True).checked_section(section)
    text = page.getvalue()
    assert words in text
    for row in section.layout.checked.checks:
        assert f"\n{row.id} " in text
