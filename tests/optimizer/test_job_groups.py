"""Keys of `[materials]`, `[bars]` and `[ranking]`: inner values, defaults, overrides."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from optimizer import JobError, parse_job, read_job
from optimizer.problem import Problem
from tests.optimizer.jobs import job_text, problem_of

Getter = Callable[[Problem], Any]


def _names(problem: Problem) -> tuple[str, ...]:
    return tuple(bar.designation for bar in problem.rules.sizes)


_GET: dict[str, Getter] = {
    "fc": lambda p: p.section.concrete.fc,
    "steel": lambda p: (p.section.steel.name, p.section.steel.fy),
    "fy": lambda p: (p.section.steel.name, p.section.steel.fy),
    "aggregate": lambda p: p.section.aggregate,
    "lambda": lambda p: p.section.concrete.lightweight,
    "Ec": lambda p: p.section.concrete.Ec,
    "sizes": _names,
    "max_layers": lambda p: p.rules.max_layers,
    "max_sizes": lambda p: p.rules.max_sizes,
    "size_steps": lambda p: p.rules.size_steps,
    "layer_gap": lambda p: p.section.layer_gap,
    "min_gap": lambda p: p.section.min_gap,
    "tension_controlled": lambda p: p.section.tension_controlled,
    "by": lambda p: p.ranking.by,
    "keep": lambda p: p.ranking.keep,
    "per_pattern": lambda p: p.ranking.per_pattern,
    "variety": lambda p: p.ranking.per_pattern,
    "labour_share": lambda p: p.ranking.labour_share,
    "per_bar": lambda p: p.ranking.per_bar,
    "per_extra_layer": lambda p: p.ranking.per_extra_layer,
    "per_extra_size": lambda p: p.ranking.per_extra_size,
    "tight_gap": lambda p: p.ranking.tight_gap,
    "preferred_gap": lambda p: p.ranking.preferred_gap,
    "work_limit": lambda p: p.ranking.work_limit,
}

# Units, group, key, then twice: the TOML value and what becomes of it inside. The second is a
# plain number where the key has a unit, to show the unit that it is read in.
_EITHER = [
    ("bars", "max_layers", "1", 1, "4", 4),
    ("bars", "max_sizes", "1", 1, "2", 2),
    ("bars", "size_steps", "1", 1, "20", 20),
    ("ranking", "by", '"lightest"', "lightest", '"practical"', "practical"),
    ("ranking", "keep", "1", 1, "200", 200),
    ("ranking", "per_pattern", "2", 2, "7", 7),
    ("ranking", "variety", '"off"', None, '"on"', 3),
    ("ranking", "labour_share", "0.5", 0.5, "0", 0.0),
    ("ranking", "per_bar", "0.25", 0.25, "0", 0.0),
    ("ranking", "per_extra_layer", "1.5", 1.5, "2", 2.0),
    ("ranking", "per_extra_size", "0.7", 0.7, "3", 3.0),
    ("ranking", "tight_gap", "0.3", 0.3, "1000", 1000.0),
    ("ranking", "work_limit", "5.0", 5.0, "0.5", 0.5),
    ("materials", "lambda", "0.85", 0.85, "0.75", 0.75),
]
_US = [
    ("materials", "fc", '"5 ksi"', 5000.0, "6000", 6000.0),
    ("materials", "steel", '"A615-80"', ("A615-80", 80e3), '"A706-60"', ("A706-60", 60e3)),
    ("materials", "fy", '"75 ksi"', ("", 75e3), "50000", ("", 50e3)),
    ("materials", "aggregate", '"3/8 in"', 0.375, "1", 1.0),
    ("materials", "Ec", '"4000 ksi"', 4e6, "3.0e6", 3e6),
    ("bars", "sizes", '["#9", "#6"]', ("#6", "#9"), '["#10"]', ("#10",)),
    ("bars", "layer_gap", '"1 1/2 in"', 1.5, "2", 2.0),
    ("bars", "min_gap", '"2 in"', 2.0, "1.75", 1.75),
    ("ranking", "preferred_gap", '"2 in"', 2.0, "2.5", 2.5),
]
_SI = [
    ("materials", "fc", '"35 MPa"', 35.0, "40", 40.0),
    ("materials", "steel", '"A615-550"', ("A615-550", 550.0), '"B500B"', ("B500B", 500.0)),
    ("materials", "fy", '"0.5 GPa"', ("", 500.0), "450", ("", 450.0)),
    ("materials", "aggregate", '"1 cm"', 10.0, "25", 25.0),
    ("materials", "Ec", '"28 GPa"', 28e3, "26000", 26e3),
    ("bars", "sizes", '["29", "19"]', ("19", "29"), '["32"]', ("32",)),
    ("bars", "layer_gap", '"0.04 m"', 40.0, "30", 30.0),
    ("bars", "min_gap", '"5 cm"', 50.0, "45", 45.0),
    ("ranking", "preferred_gap", '"50 mm"', 50.0, "60", 60.0),
]
Row = tuple[str, str, str, Any, str, Any]
ROWS = [
    (units, *row) for units, rows in (("us", _EITHER + _US), ("si", _EITHER + _SI)) for row in rows
]
ids = [f"{row[0]} {row[2]}" for row in ROWS]


@pytest.mark.parametrize(("units", "group", "key", "first", "one", "second", "two"), ROWS, ids=ids)
def test_key_of_a_group(
    units: str, group: str, key: str, first: str, one: Any, second: str, two: Any
) -> None:
    """A key is read in its group; the same key inside a section wins over it."""
    without = ("steel",) if key == "fy" else ()
    for text, value in ((first, one), (second, two)):
        read = _GET[key](problem_of(units, without, **{group: {key: text}}))
        assert read == pytest.approx(value) if isinstance(value, float) else read == value
    both = problem_of(units, without, **{group: {key: first}, "section": {key: second}})
    assert _GET[key](both) == _GET[key](problem_of(units, without, **{group: {key: second}}))
    alone = problem_of(units, (*without, key), section={key: second})
    assert _GET[key](alone) == _GET[key](both)


def test_defaults_us() -> None:
    """Defaults of a job that names none of these keys: constants of the score in lb/ft."""
    problem = problem_of("us")
    section, rules, ranking = problem.section, problem.rules, problem.ranking
    assert _names(problem) == ("#5", "#6", "#7", "#8", "#9", "#10", "#11")
    assert (rules.max_layers, rules.max_sizes, rules.size_steps) == (2, 2, 2)
    assert (section.aggregate, section.layer_gap, section.min_gap) == (0.75, 1.0, 0.0)
    assert section.concrete.lightweight == 1.0
    assert section.concrete.Ec == pytest.approx(57_000 * 4000**0.5)  # 318-19, 19.2.2.1(b)
    assert section.tension_controlled
    assert (ranking.by, ranking.keep, ranking.per_pattern) == ("practical", 10, 3)
    assert ranking.labour_share == 0.8
    assert (ranking.per_bar, ranking.per_extra_layer) == (0.10, 0.60)
    assert (ranking.per_extra_size, ranking.tight_gap) == (0.40, 0.10)
    assert ranking.preferred_gap == 1.5
    assert problem.drawn is None


def test_defaults_si() -> None:
    """Metric defaults: ACI 318M's own 25 mm, aggregate 19 mm, constants times 1.488 in kg/m."""
    problem = problem_of("si")
    section, ranking = problem.section, problem.ranking
    assert _names(problem) == ("16", "19", "22", "25", "29", "32", "36")
    assert (section.aggregate, section.layer_gap, section.min_gap) == (19.0, 25.0, 0.0)
    assert section.concrete.Ec == pytest.approx(4700 * 28**0.5)
    assert (ranking.per_bar, ranking.per_extra_layer) == pytest.approx((0.1488, 0.8928))
    assert (ranking.per_extra_size, ranking.tight_gap) == pytest.approx((0.5952, 0.1488))
    assert ranking.labour_share == 0.8
    assert ranking.preferred_gap == 38.0


@pytest.mark.parametrize(
    ("units", "aggregate", "gap"),
    [("us", "0.5", 1.5), ("us", "1", 2.0), ("si", "19", 38.0), ("si", "25", 50.0)],
)
def test_preferred_gap_follows_the_aggregate(units: str, aggregate: str, gap: float) -> None:
    """The larger of 1.5 in (38 mm) and twice the aggregate, unless given."""
    assert problem_of(units, materials={"aggregate": aggregate}).ranking.preferred_gap == gap


def test_steel_and_fy_replace_each_other_across_levels() -> None:
    """A section's fy beats the job's grade and a section's grade beats the job's fy."""
    own = problem_of("us", section={"fy": '"75 ksi"'})
    assert (own.section.steel.name, own.section.steel.fy) == ("", 75e3)
    graded = problem_of(
        "us", ("steel",), materials={"fy": '"75 ksi"'}, section={"steel": '"A615-80"'}
    )
    assert (graded.section.steel.name, graded.section.steel.fy) == ("A615-80", 80e3)
    with pytest.raises(JobError, match="both steel and fy"):
        problem_of("us", materials={"fy": '"75 ksi"'})


@pytest.mark.parametrize(("units", "code"), [("us", "ACI 318-14"), ("si", "ACI 318M-14")])
def test_tension_controlled(units: str, code: str) -> None:
    """Only the 2014 editions take false; 318-19 asks every beam to be tension-controlled."""
    for where in ("bars", "section"):
        loose = {where: {"tension_controlled": "false"}}
        problem = problem_of(units, head={"code": f'"{code}"'}, **loose)
        assert not problem.section.tension_controlled
        with pytest.raises(JobError, match="tension_controlled"):
            problem_of(units, **loose)
    back = problem_of(
        units,
        head={"code": f'"{code}"'},
        bars={"tension_controlled": "false"},
        section={"tension_controlled": "true"},
    )
    assert back.section.tension_controlled


@pytest.mark.parametrize("where", ["bars", "section"])
def test_catalog(where: str, tmp_path: Path) -> None:
    """A catalogue by name, and one by a path that starts from the job's folder."""
    named = problem_of("si", section={"stirrup": '"10M"'}, bars={"catalog": '"csa"'})
    assert _names(named) == ("15M", "20M", "25M", "30M", "35M")
    table = "designation,diameter,area,mass\n-,mm,mm^2,kg/m\nT12,12,113,0.888\nT20,20,314,2.47\n"
    (tmp_path / "own.csv").write_text(table, encoding="utf-8")
    keys = {"section": {"stirrup": '"T12"'}}
    keys[where] = keys.get(where, {}) | {"catalog": '"own.csv"'}
    path = tmp_path / "job.toml"
    path.write_text(job_text("si", **keys), encoding="utf-8")
    (problem,) = read_job(path).problems
    assert _names(problem) == ("T20",)
    assert problem.section.stirrup.designation == "T12"


def test_head_of_a_job() -> None:
    """Title, code and units; units are optional because the code decides them."""
    job = parse_job(job_text("us", head={"title": '"Hall"', "units": '"us"'}))
    assert (job.title, job.edition.name) == ("Hall", "ACI 318-19")
    bare = parse_job(job_text("si"))
    assert (bare.title, bare.edition.name, bare.edition.units) == ("", "ACI 318M-19", "si")
    with pytest.raises(JobError, match=r"units.*ACI 318M-19"):
        parse_job(job_text("us", head={"units": '"si"'}))


def test_a_second_section_is_not_touched_by_the_overrides_of_the_first() -> None:
    """Keys repeated in a section hold there only."""
    first = job_text("us", section={"fc": '"6000 psi"', "keep": "4", "max_layers": "1"})
    second = job_text("us", section={"mark": '"B2"'}).partition("[[section]]")
    one, two = parse_job(first + "".join(second[1:])).problems
    assert (one.section.concrete.fc, one.ranking.keep, one.rules.max_layers) == (6000.0, 4, 1)
    assert (two.section.concrete.fc, two.ranking.keep, two.rules.max_layers) == (4000.0, 10, 2)
