"""The public interface: read_job, rank, check, and what their results say about proof."""

from __future__ import annotations

import dataclasses
import math
from pathlib import Path

import pytest

from optimizer import (
    CheckResult,
    JobError,
    RankResult,
    check,
    parse_job,
    rank,
    read_job,
)
from optimizer.results import FEWEST, LIGHTEST, RankedSection, rank_section
from optimizer.search import Search
from tests.exhaustive.enumeration import enumerate_layouts
from tests.exhaustive.test_search import _random_twin
from tests.optimizer.jobs import job_text, problem_of


@pytest.fixture(scope="module")
def ranked() -> RankResult:
    """Return the ranking of a job with one section that has layouts and one that has none."""
    weak = job_text(section={"mark": '"B2"', "Mu": "1500", "sizes": '["#8"]'})
    return rank(parse_job(job_text() + weak[weak.index("[[section]]") :]))


def test_ranking_of_a_file(tmp_path: Path) -> None:
    """A job read from a file gives the same result as its text."""
    path = tmp_path / "job.toml"
    path.write_text(job_text(), encoding="utf-8")
    assert rank(read_job(path)).sections == rank(parse_job(job_text())).sections


def test_status_and_order(ranked: RankResult) -> None:
    """One result a section in the job's order; the whole is well only if every section is."""
    first, second = ranked.sections
    assert (first.section.mark, first.status, first.proved) == ("B1", "ranked", True)
    assert (second.section.mark, second.status, second.proved) == ("B2", "no_layout", True)
    assert not ranked.ok
    assert first.diagnosis is None
    assert second.diagnosis is not None
    assert second.layouts == ()
    assert rank(parse_job(job_text())).ok


def test_short_list_of_a_ranking(ranked: RankResult) -> None:
    """Ranks count from 1, values rise, every check passes, the marks are on the best ones."""
    section = ranked.sections[0]
    listed = [item for item in section.layouts if item.rank is not None]
    assert [item.rank for item in listed] == list(range(1, 11))
    totals = [item.score.total for item in listed]
    assert totals == sorted(totals)
    assert section.closing_value == totals[-1]
    assert all(item.checked.ok for item in section.layouts)
    for mark, value in ((LIGHTEST, "mass"), (FEWEST, "count")):
        (marked,) = [item for item in section.layouts if mark in item.marks]
        best = min(getattr(item.checked.layout, value) for item in section.layouts)
        assert getattr(marked.checked.layout, value) == best
    assert section.mass_floor is not None
    assert section.mass_floor <= min(item.checked.layout.mass for item in section.layouts)


def test_results_are_frozen(ranked: RankResult) -> None:
    """Nothing of a result can be changed, at any level."""
    section = ranked.sections[0]
    rated = section.layouts[0]
    for item, name in (
        (ranked, "sections"),
        (section, "proved"),
        (rated, "rank"),
        (rated.score, "steel"),
        (rated.checked, "phi_Mn"),
        (rated.checked.checks[0], "state"),
        (ranked.sections[1].diagnosis, "strongest"),
    ):
        with pytest.raises(dataclasses.FrozenInstanceError):
            setattr(item, name, None)
    assert isinstance(ranked.sections, tuple)
    assert isinstance(section.layouts, tuple)


def test_closing_value_only_of_a_full_list() -> None:
    """A list that ends because nothing else passes has no value below which nothing is left."""
    few = rank_section(problem_of(section={"sizes": '["#9"]', "max_layers": "1", "keep": "50"}))
    assert few.status == "ranked"
    assert len(few.layouts) < 50
    assert few.closing_value is None
    lightest = rank_section(problem_of(section={"by": '"lightest"', "keep": "4"}))
    assert lightest.closing_value == lightest.layouts[3].checked.layout.mass


def test_lightest_and_fewest_beside_a_short_list() -> None:
    """Where the list is too short for them, they follow it without a rank."""
    result = rank_section(problem_of(section={"keep": "1", "per_bar": "0.5", "max_layers": "2"}))
    assert result.layouts[0].rank == 1
    assert all(item.rank is None for item in result.layouts[1:])
    marks = {mark for item in result.layouts for mark in item.marks}
    assert marks == {LIGHTEST, FEWEST}


def test_progress_is_told() -> None:
    """The number done, the number of all and the mark of the next section."""
    second = job_text(section={"mark": '"B2"'})
    told: list[tuple[int, int, str]] = []
    job = parse_job(job_text() + second[second.index("[[section]]") :])
    rank(job, lambda done, of, mark: told.append((done, of, mark)))
    assert told == [(0, 2, "B1"), (1, 2, "B2")]


def stopped() -> RankedSection:
    """Return the result of a section whose search is stopped at once by the work limit."""
    return rank_section(problem_of(section={"work_limit": "1e-9"}))


def test_stopped_search_is_not_proved() -> None:
    """With next to no work allowed what was found is shown, checked, and not called proved."""
    result = stopped()
    assert not result.proved
    assert result.status == "ranked"
    assert all(item.checked.ok for item in result.layouts)
    assert rank_section(problem_of()).proved


def test_mass_floor_of_a_hopeless_demand() -> None:
    """No amount of steel is enough for a demand beyond the compression zone: no floor."""
    assert rank_section(problem_of(section={"Mu": "3000"})).mass_floor is None


def test_mass_floor_by_hand() -> None:
    """300 kip*ft in 14 x 24 in: bars at most 24 - 2 - 0.3125 = 21.6875 in deep.

    As fy (d - As fy/(2 x 0.85 fc b)) = 300 x 12/0.9 kip*in has a root As; of all sizes #5 has the
    least mass for its area, 1.043/0.31 lb/ft for each in^2.
    """
    floor = rank_section(problem_of()).mass_floor
    k = 60.0 / (2 * 0.85 * 4 * 14)
    d, need = 24 - 1.5 - 0.5 - 0.3125, 300 * 12 / 0.9 / 60
    area = (d - math.sqrt(d * d - 4 * k * need)) / (2 * k)
    assert floor is not None
    # The floor comes from tangents of the block's moment: it may be a little below.
    assert floor == pytest.approx(area * 1.043 / 0.31, rel=1e-4)


def test_check_of_drawn_layouts() -> None:
    """Sections with layers are checked, the others left out; one that fails fails the whole."""
    good = job_text(section={"layers": '["4 #9"]'})
    other = job_text(section={"mark": '"B2"'})
    bad = job_text(section={"mark": '"B3"', "layers": '["2 #5"]'})
    text = good + "".join(part[part.index("[[section]]") :] for part in (other, bad))
    result = check(parse_job(text))
    assert isinstance(result, CheckResult)
    assert [item.section.mark for item in result.sections] == ["B1", "B3"]
    assert [item.status for item in result.sections] == ["passes", "fails"]
    assert not result.ok
    first = result.sections[0].layout
    assert first.rank is None
    assert first.checked.layout.label == "4 #9"
    # 4 #9: d = 24 - 2 - 0.564 in, a = 240/47.6 = 5.04 in, phi Mn = 0.9 x 240 x 18.91/12.
    assert first.checked.phi_Mn / 12_000 == pytest.approx(340.4, abs=0.1)
    assert check(parse_job(good)).ok


def test_check_without_layers() -> None:
    """A job that gives no layout cannot be checked, and says which key is missing."""
    with pytest.raises(JobError, match=r"^job: layers: missing"):
        check(parse_job(job_text()))


def test_no_layout_of_a_stopped_search_is_not_proved() -> None:
    """A search stopped before its first find does not claim that there is none."""
    twin = _random_twin(126)
    assert enumerate_layouts(twin.case)
    ranking = dataclasses.replace(twin.problem.ranking, work_limit=1e-9)
    found = Search(dataclasses.replace(twin.problem, ranking=ranking)).run()
    assert not found.chosen
    assert not found.proved
