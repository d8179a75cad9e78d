"""Few bar sizes for a whole job, against brute force over all choices of sizes.

The best layout of a section with some sizes comes from the independent enumeration of all its
layouts; the brute force tries every set of sizes of every number.
"""

from __future__ import annotations

import random
from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import cache
from itertools import combinations

import pytest

from catalogs import BUILTIN_CATALOGS, Bar, bar_catalog
from optimizer import parse_job
from optimizer.palette import Palette, best_of_size_sets, choose_palette
from optimizer.problem import Problem
from tests.exhaustive.enumeration import Found, enumerate_layouts
from tests.exhaustive.test_search import _random_twin, _Twin
from tests.optimizer.jobs import job_text

PROJECTS = 25
LIMIT = 4
# The model counts in ten-thousandths: each section may be off by half of one.
ROUNDING = 0.5e-4


@dataclass(frozen=True)
class _Member:
    """A section with all its layouts, from the enumeration."""

    problem: Problem
    layouts: tuple[tuple[frozenset[str], float], ...]

    def best(self, sizes: frozenset[str]) -> float:
        """Least value times length with these sizes alone; infinite if none passes."""
        values = [value for used, value in self.layouts if used <= sizes]
        return min(values, default=float("inf")) * self.problem.length


def _catalog(bars: tuple[Bar, ...]) -> str:
    """Name of the catalogue that the sizes come from."""
    return next(name for name in BUILTIN_CATALOGS if set(bars) <= set(bar_catalog(name).bars))


@cache
def _twins() -> dict[str, list[_Twin]]:
    """Random sections with at most two layers and some layout, by their catalogue."""
    found: dict[str, list[_Twin]] = {}
    for seed in range(5000, 5160):
        twin = _random_twin(seed)
        if twin.problem.rules.max_layers <= 2:
            found.setdefault(_catalog(twin.problem.rules.sizes), []).append(twin)
    return found


def _value(found: Found, by: str) -> float:
    return found.mass if by == "lightest" else found.score


def _member(twin: _Twin, by: str, length: float) -> _Member:
    ranking = replace(twin.problem.ranking, by=by)
    layouts = tuple(
        (frozenset(name for layer in found.counts for name, _ in layer), _value(found, by))
        for found in enumerate_layouts(twin.case)
    )
    return _Member(replace(twin.problem, ranking=ranking, length=length), layouts)


def _project(seed: int) -> list[_Member]:
    """Two to four sections of one catalogue, ranked alike."""
    rng = random.Random(seed)
    twins = _twins()
    pool = twins[rng.choice(sorted(name for name, group in twins.items() if len(group) > 5))]
    by = rng.choice(["practical", "lightest"])
    chosen = rng.sample(pool, k=rng.choice([2, 3, 4]))
    return [_member(twin, by, rng.choice([1.0, 6.0, 20.5])) for twin in chosen]


def _brute_force(members: list[_Member], limit: int) -> Iterator[tuple[int, float]]:
    """Each number of sizes that is of use, and the least total with it."""
    sizes = sorted({bar.designation for one in members for bar in one.problem.rules.sizes})
    least = float("inf")
    for number in range(1, limit + 1):
        totals = [
            sum(member.best(frozenset(chosen)) for member in members)
            for chosen in combinations(sizes, min(number, len(sizes)))
        ]
        if min(totals) < least - len(members) * 2 * ROUNDING:
            least = min(totals)
            yield number, least


def _found(members: list[_Member], limit: int = LIMIT) -> Palette:
    return choose_palette(tuple(member.problem for member in members), limit)


@pytest.mark.parametrize("seed", range(PROJECTS))
def test_palette_equals_brute_force(seed: int) -> None:
    """Numbers of sizes, totals, savings and layouts of a random project."""
    project = _project(seed)
    members = [member for member in project if member.layouts]
    found = _found(project)
    assert found.proved
    assert found.marks == tuple(member.problem.section.mark for member in members)
    left = [member.problem.section.mark for member in project if not member.layouts]
    assert found.left_out == tuple(left)
    expected = list(_brute_force(members, LIMIT)) if members else []
    assert [choice.limit for choice in found.choices] == [number for number, _ in expected]
    before = None
    for choice, (number, total) in zip(found.choices, expected, strict=True):
        assert choice.total == pytest.approx(total, rel=0, abs=2 * ROUNDING * len(members))
        assert len(choice.sizes) <= number
        assert [bar.position for bar in choice.sizes] == sorted({b.position for b in choice.sizes})
        used = {bar for candidate in choice.layouts for bar in candidate.layout.sizes}
        assert used == set(choice.sizes)
        # The total is what its layouts add up to, and each is the best of its own sizes.
        by = members[0].problem.ranking.by
        parts = [
            candidate.value(by) * member.problem.length
            for candidate, member in zip(choice.layouts, members, strict=True)
        ]
        assert choice.total == pytest.approx(sum(parts), rel=1e-12)
        names = frozenset(bar.designation for bar in choice.sizes)
        for part, member in zip(parts, members, strict=True):
            assert part == pytest.approx(member.best(names), rel=0, abs=2 * ROUNDING)
        assert choice.saving == (0.0 if before is None else before - choice.total)
        before = choice.total


def test_projects_are_of_all_kinds() -> None:
    """Among the random projects are some with sections left out, some that need several sizes."""
    projects = [_project(seed) for seed in range(PROJECTS)]
    full = [[member for member in project if member.layouts] for project in projects]
    assert any(len(some) < len(every) for some, every in zip(full, projects, strict=True))
    numbers = [[number for number, _ in _brute_force(some, LIMIT)] for some in full if some]
    assert any(found and found[0] > 1 for found in numbers)
    assert sum(len(found) > 1 for found in numbers) > 5
    assert {member.problem.section.edition.units for every in projects for member in every} == {
        "us",
        "si",
    }


@pytest.mark.parametrize("seed", range(0, PROJECTS, 5))
def test_best_of_size_sets_equals_enumeration(seed: int) -> None:
    """Every single size and every pair that may be mixed has its best layout, and no other."""
    for member in _project(seed):
        rules, by = member.problem.rules, member.problem.ranking.by
        found, proved = best_of_size_sets(member.problem)
        assert proved
        names = {bar.position: bar.designation for bar in rules.sizes}
        identities = {
            bar.position: (round(bar.diameter, 6), bar.designation) for bar in rules.sizes
        }
        pairs = [
            pair
            for pair in combinations(names, 2)
            if rules.max_sizes > 1 and abs(pair[0] - pair[1]) <= rules.size_steps
        ]
        for positions in [*((position,) for position in names), *pairs]:
            best = member.best(frozenset(names[position] for position in positions))
            candidate = found.get(frozenset(identities[position] for position in positions))
            if candidate is None:
                assert best == float("inf")
            else:
                value = candidate.value(by) * member.problem.length
                assert value == pytest.approx(best, rel=1e-9)
        possible = [*((position,) for position in names), *pairs]
        assert set(found) <= {
            frozenset(identities[position] for position in positions) for positions in possible
        }


# ---------------------------------------------------------------- jobs made by hand


def _job(*sections: dict[str, str], units: str = "us", **bars: str) -> tuple[Problem, ...]:
    """Sections of one job, ranked by mass."""
    texts = [
        job_text(units, section={"mark": f'"S{number}"', **keys}, ranking={"by": '"lightest"'})
        for number, keys in enumerate(sections)
    ]
    head = texts[0].replace(
        "[bars]\n", "[bars]\n" + "".join(f"{k} = {v}\n" for k, v in bars.items())
    )
    rest = [text[text.index("[[section]]") :] for text in texts[1:]]
    return parse_job("".join([head, *rest])).problems


def test_a_section_without_a_layout_is_named() -> None:
    """It is left out; the others get their sizes all the same."""
    problems = _job({"Mu": "200"}, {"Mu": "900"}, {"Mu": "150"})
    found = choose_palette(problems, 3)
    assert found.left_out == ("S1",)
    assert found.marks == ("S0", "S2")
    assert all(len(choice.layouts) == 2 for choice in found.choices)
    assert found.choices


def test_nothing_to_choose() -> None:
    """If no section has a layout there is no choice, and it is proved."""
    found = choose_palette(_job({"Mu": "900"}), 2)
    assert (found.marks, found.left_out, found.choices) == ((), ("S0",), ())
    assert found.proved


def test_too_few_sizes_for_every_section() -> None:
    """Two sections with no size in common need two: one size has no choice."""
    problems = _job({"Mu": "200", "sizes": '["#8"]'}, {"Mu": "200", "sizes": '["#7"]'})
    assert choose_palette(problems, 1).choices == ()
    (choice,) = choose_palette(problems, 3).choices
    assert choice.limit == 2
    assert [bar.designation for bar in choice.sizes] == ["#7", "#8"]
    assert choice.saving == 0.0


def test_a_length_weighs_a_section() -> None:
    """A long section decides which single size the job keeps.

    By ASTM A615 Table 1: alike, 6 #9 of 3.400 lb/ft are 20.40, less than 8 #8 of 2.670 lb/ft;
    over 400 ft the 5 #8 of the second weigh 13.35 lb/ft against 13.60 of 4 #9.
    """
    short, long = ({"Mu": "330", "length": f'"{feet} ft"'} for feet in (4, 400))
    found = [
        choose_palette(_job(*sections), 1).choices[0]
        for sections in (
            ({"Mu": "150"}, {"Mu": "330"}),
            ({"Mu": "150", "length": '"4 ft"'}, short),
            ({"Mu": "150", "length": '"4 ft"'}, long),
        )
    ]
    assert [[bar.designation for bar in one.sizes] for one in found] == [["#9"], ["#9"], ["#8"]]
    totals = [20.40, 4 * 20.40, 4 * 8.01 + 400 * 13.35]
    assert [one.total for one in found] == pytest.approx(totals, rel=1e-12)


def test_lengths_in_si_are_metres() -> None:
    """6 m of a beam weigh six times a metre of it."""
    (bare,), (six,) = (
        choose_palette(_job(keys, units="si"), 1).choices
        for keys in ({"Mu": "300"}, {"Mu": "300", "length": '"6000 mm"'})
    )
    assert six.total == pytest.approx(6 * bare.total)


def test_a_further_size_that_saves_nothing_ends_the_list() -> None:
    """One section that is lightest with one size has one choice, whatever the limit."""
    (problem,) = _job({"Mu": "150", "sizes": '["#8", "#9"]', "max_sizes": "1"})
    (choice,) = choose_palette((problem,), 12).choices
    assert choice.limit == len(choice.sizes) == 1


def test_work_limit_is_told() -> None:
    """With next to no work nothing is proved."""
    problems = _job({"Mu": "300"}, {"Mu": "200"})
    starved = tuple(
        replace(problem, ranking=replace(problem.ranking, work_limit=1e-9)) for problem in problems
    )
    assert not choose_palette(starved, 2).proved
    assert choose_palette(problems, 2).proved


def test_two_further_sizes_may_save_where_one_does_not() -> None:
    """A second size is of no use, a second and a third together are.

    5 #8 are the lightest of #8 alone, and with #7 or #9 beside them; #7 and #9 together are
    lighter, but the other section needs its #8.
    """
    mixed = {"Mu": "306", "width": "12", "sizes": '["#7", "#8", "#9"]'}
    problems = _job(mixed, {"Mu": "100", "sizes": '["#8"]'})
    found = choose_palette(problems, 3)
    assert [choice.limit for choice in found.choices] == [1, 3]
    assert found.choices[-1].saving == pytest.approx(13.35 - 12.932, abs=1e-9)


def test_sizes_of_two_catalogues_are_different_sizes() -> None:
    """No. 25 of ASTM and 35M of CSA are sixth in their tables: two sizes on the job."""
    first = {"Mu": "300", "catalog": '"astm-metric"', "sizes": '["25"]'}
    second = {"Mu": "300", "catalog": '"csa"', "sizes": '["35M"]', "stirrup": '"15M"'}
    problems = _job(first, second, units="si")
    assert choose_palette(problems, 1).choices == ()
    (choice,) = choose_palette(problems, 2).choices
    assert {bar.designation for bar in choice.sizes} == {"25", "35M"}
