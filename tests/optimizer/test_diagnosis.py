"""The answer "none": strongest layout, blocking rules and remedies."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import numpy as np
import pytest

from engine import check_layout
from optimizer.diagnosis import diagnose
from optimizer.model import Enumeration, enumerate_family
from optimizer.problem import Problem
from optimizer.results import rank_section
from tests.engine.builders import us_layout
from tests.exhaustive.enumeration import Case, bar_groups, covered_sizes, minimum_steel, passing
from tests.exhaustive.geometry import stacks
from tests.exhaustive.test_search import _random_twin
from tests.optimizer.jobs import Keys, problem_of

VALUE = 1e-6  # relative: two solutions of one equilibrium, by bisection and by Newton's method


def strongest_of(case: Case) -> float | None:
    """Return the greatest phi Mn of all stacks that meet every rule but the strength.

    Next to no demand passes every strength; the exemption of 9.6.1.3, which such a demand
    would grant to all, asks for more than Mu and helps no layout that is too weak.
    """
    easy = replace(case, Mu=1.0)
    found = list(stacks(easy, covered_sizes(easy)))
    if not found:
        return None
    groups = bar_groups(easy, found)
    ok, strength, _ = passing(easy, found, groups)
    ok &= groups.total >= minimum_steel(case, groups.d) * (1 - 1e-9)
    return float(strength[ok].max()) if ok.any() else None


def hopeless(first: int, last: int) -> list[tuple[int, Problem, Case]]:
    """Random sections with a demand above their strongest layout, however much they had."""
    found = []
    for seed in range(first, last):
        twin = _random_twin(seed)
        best = strongest_of(twin.case)
        demand = twin.case.Mu if best is None else max(twin.case.Mu, 1.02 * best)
        section = twin.problem.section
        ratio = demand / twin.case.Mu
        section = replace(section, Mu=section.Mu * ratio)
        found.append((seed, replace(twin.problem, section=section), replace(twin.case, Mu=demand)))
    return found


@pytest.mark.parametrize("first", [0, 20, 60, 110, 300])
def test_strongest_equals_brute_force(first: int) -> None:
    """The strongest layout of sections that have none for their demand, by trying all stacks."""
    fitting = 0
    for seed, problem, case in hopeless(first, first + 5):
        expected = strongest_of(case)
        strongest = diagnose(problem).strongest
        assert (strongest is None) == (expected is None), seed
        if strongest is not None:
            assert strongest.phi_Mn == pytest.approx(expected, rel=VALUE), seed
            assert [row.id for row in strongest.checks if not row.ok] == ["flexural_strength"], seed
            fitting += 1
    assert fitting > 0


def test_strongest_under_a_service_moment() -> None:
    """Crack control by a low Ms permits two bars in layer 1 where 2/3 fy asks for three.

    With gaps of 6 in only pairs fit into the 20 in web: 2 #11 / 2 #11 is over-reinforced and
    2 #11 / 2 #10 the strongest of the four layouts of two layers.
    """
    problem = problem_of(
        "us",
        section={
            "width": "20",
            "depth": "19",
            "stirrup": '"#3"',
            "Mu": "900",
            "Ms": "60",
            "min_gap": "6",
            "sizes": '["#10", "#11"]',
        },
    )
    strongest = diagnose(problem).strongest
    assert strongest is not None
    assert strongest.layout.label == "2 #11 / 2 #10"


def test_nothing_is_strongest_where_nothing_fits() -> None:
    """A web without room for two bars has no strongest layout, and the gap rule blocks."""
    found = diagnose(problem_of("us", section={"width": "6", "Mu": "20"}))
    assert found.strongest is None
    assert [block.id for block in found.blocked_by] == ["clear_gap"]
    assert found.blocked_by[0].families == found.blocked_by[0].of


def opposite_too_wide() -> Problem:
    """Return a problem whose given bars at the other face do not fit."""
    return problem_of("us", section={"opposite": '["9 #8"]'})


def test_opposite_bars_that_do_not_fit_block() -> None:
    """The one blocking rule is the check row of the opposite bars, and a wider web helps."""
    problem = opposite_too_wide()
    result = rank_section(problem)
    assert result.status == "no_layout"
    assert result.diagnosis is not None
    checks = check_layout(problem.section, us_layout("3 #8")).checks
    broken = [row.id for row in checks if not row.ok and row.id.startswith("opposite")]
    assert [block.id for block in result.diagnosis.blocked_by] == broken
    assert "width" in {remedy.key for remedy in result.diagnosis.remedies}


def test_no_strongest_beside_opposite_bars_that_do_not_fit() -> None:
    """No layout of this face meets every rule but strength where the other face fails."""
    assert diagnose(opposite_too_wide()).strongest is None


@pytest.mark.parametrize(
    ("units", "section"),
    [
        # 9.7.6.4.2: ties of #4 for bars above #10, of No. 10 for smaller ones.
        ("us", {"stirrup": '"#3"', "opposite": '["2 #11"]'}),
        ("si", {"catalog": '"en10080"', "stirrup": '"8"', "opposite": '["2 16"]'}),
    ],
)
def test_ties_too_thin_for_counted_bars(units: str, section: Keys) -> None:
    """Stirrups too thin to hold counted compression bars leave no layout, and the rule is named."""
    result = rank_section(problem_of(units, section={**section, "count_opposite": "true"}))
    assert result.status == "no_layout"
    assert result.diagnosis is not None
    assert [block.id for block in result.diagnosis.blocked_by] == ["compression_ties"]


def test_diagnosis_ends_under_a_tiny_work_limit(monkeypatch: pytest.MonkeyPatch) -> None:
    """A work limit that stops every solve ends the diagnosis too, not only the search."""
    solves = 0

    def counting(*args: Any, **options: Any) -> Enumeration:
        nonlocal solves
        solves += 1
        if solves > 500:
            pytest.fail("the diagnosis does not end")
        return enumerate_family(*args, **options)

    monkeypatch.setattr("optimizer.diagnosis.enumerate_family", counting)
    problem = _random_twin(126).problem
    diagnose(replace(problem, ranking=replace(problem.ranking, work_limit=1e-9)))


@pytest.mark.parametrize("seed", [7, 13, 40, 44, 77, 93])
def test_blocked_by_names_rules_of_the_check(seed: int) -> None:
    """Blocking rules are ids of check rows, the most frequent first, none in more than all."""
    ((_, problem, case),) = hopeless(seed, seed + 1)
    found = diagnose(problem)
    known = {row.id for row in found.strongest.checks} if found.strongest else None
    assert found.blocked_by
    counts = [block.families for block in found.blocked_by]
    assert counts == sorted(counts, reverse=True)
    for block in found.blocked_by:
        assert 1 <= block.families <= block.of
        assert known is None or block.id in known
    if strongest_of(case) is not None:
        assert "flexural_strength" in {block.id for block in found.blocked_by}


def test_remedies_of_random_sections_pass_their_check() -> None:
    """Every layout that a remedy promises is rated, positive and strong enough for the demand."""
    seen = 0
    for seed, problem, _ in hopeless(0, 12):
        for remedy in diagnose(problem).remedies:
            assert remedy.phi_Mn >= problem.section.demand * (1 - VALUE), seed
            assert remedy.before != remedy.after
            assert np.isfinite(remedy.best.mass)
            seen += 1
    assert seen > 10
