"""Remedies typed back into the job: each helps as written, and the step before it does not."""

from __future__ import annotations

import pytest

from optimizer.remedies import Remedy
from optimizer.results import RankedSection, rank_section
from tests.optimizer.jobs import Keys, problem_of

# Jobs without a layout; each fails for another reason and is near enough to be helped.
JOBS: dict[str, tuple[str, dict[str, Keys]]] = {
    "too weak": ("us", {"section": {"Mu": "620", "max_layers": "1", "sizes": '["#7", "#8"]'}}),
    "one size": ("us", {"section": {"Mu": "116", "width": "13", "depth": "14.5", "max_layers": "1",
                                    "max_sizes": "1", "sizes": '["#7", "#9"]'}}),
    "wide gaps": ("us", {"section": {"Mu": "400", "min_gap": "3", "layer_gap": "3"}}),
    "coarse stones": ("us", {"section": {"Mu": "270", "width": "12", "aggregate": '"1.5 in"',
                                         "max_layers": "1"}}),
    "high layers": ("us", {"section": {"Mu": "100", "width": "12", "depth": "16",
                                       "layer_gap": "9", "sizes": '["#5", "#6"]'}}),
    "over-reinforced": ("us", {"section": {"Mu": "560", "width": "12"}}),
    "fat stirrup": ("us", {"section": {"Mu": "260", "width": "10", "stirrup": '"#6"',
                                       "max_layers": "1"}}),
    "strict strain": ("us", {"head": {"code": '"ACI 318-14"'},
                             "section": {"Mu": "360", "width": "12"}}),
    "cover": ("us", {"section": {"cover": "1.25"}}),
    "hogging": ("us", {"section": {"Mu": "-560", "width": "12"}}),
    "metric": ("si", {"section": {"Mu": "700", "width": "300"}}),
    "metric gaps": ("si", {"section": {"Mu": "450", "min_gap": "70", "max_layers": "1",
                                       "aggregate": "37.5"}}),
    "metric strain": ("si", {"head": {"code": '"ACI 318M-14"'},
                             "section": {"Mu": "480", "width": "300"}}),
}  # fmt: skip
STEPS = {
    ("us", "width"): 2.0,
    ("us", "depth"): 1.0,
    ("us", "fc"): 1000.0,
    ("si", "width"): 50.0,
    ("si", "depth"): 25.0,
    ("si", "fc"): 5.0,
    ("us", "max_layers"): 1,
    ("si", "max_layers"): 1,
}
# What a job may be built with, from the coarsest (ASTM C33 size numbers; mm from ASTM E11).
STONES = {"us": (1.5, 1.0, 0.75, 0.5, 0.375), "si": (37.5, 25.0, 19.0, 12.5, 9.5)}
STIRRUPS = {"us": ("#6", "#5", "#4", "#3"), "si": ("19", "16", "13", "10")}
GRADES = {"us": ("A615-60", "A615-80", "A615-100"), "si": ("A615-60", "A615-80", "A615-100")}


def changed(name: str, key: str, value: str) -> RankedSection:
    """Return the result of a job with one key of its section set to a TOML value."""
    units, groups = JOBS[name]
    section = {**groups.get("section", {}), key: value}
    return rank_section(problem_of(units, **{**groups, "section": section}))


def sizes_with(name: str, added: str) -> str:
    """Return the sizes of a job and one more, as TOML has them."""
    units, groups = JOBS[name]
    problem = problem_of(units, **groups)
    names = [f'"{bar.designation}"' for bar in problem.rules.sizes]
    return f"[{', '.join([*names, f'{added!r}'])}]"


def as_toml(name: str, remedy: Remedy) -> str:
    """Return the value of a remedy as a user would type it."""
    if remedy.key == "sizes":
        return sizes_with(name, remedy.after.removeprefix("also "))
    if remedy.key == "min_gap":
        return "0"
    if remedy.key in ("max_layers", "max_sizes", "tension_controlled"):
        return remedy.after
    return f'"{remedy.after}"'


def before(name: str, remedy: Remedy) -> str | None:
    """Return the value one step before a remedy's, None where that is the job's own value."""
    units = JOBS[name][0]
    key = remedy.key
    if (units, key) in STEPS:
        size = float(remedy.after.split()[0]) - STEPS[units, key]
        return f"{size:g}" if size > float(remedy.before.split()[0]) + 1e-9 else None
    ladder: tuple[str, ...] = {
        "aggregate": tuple(f"{stone:g}" for stone in STONES[units]),
        "stirrup": STIRRUPS[units],
        "steel": GRADES[units],
    }.get(key, ())
    after = remedy.after.split()[0]
    place = ladder.index(after) if after in ladder else 0
    own = remedy.before.split()[0]
    if place == 0 or ladder[place - 1] == own:
        return None
    return ladder[place - 1] if key == "aggregate" else f'"{ladder[place - 1]}"'


@pytest.fixture(scope="module")
def results() -> dict[str, RankedSection]:
    """Return the result of every job."""
    return {
        name: rank_section(problem_of(units, **groups)) for name, (units, groups) in JOBS.items()
    }


@pytest.mark.parametrize("name", JOBS)
def test_remedies_work_as_written(name: str, results: dict[str, RankedSection]) -> None:
    """Each remedy, typed into the job, gives the layout it promises; the step before gives none."""
    diagnosis = results[name].diagnosis
    assert diagnosis is not None
    assert diagnosis.remedies
    for remedy in diagnosis.remedies:
        after = changed(name, remedy.key, as_toml(name, remedy))
        assert after.status == "ranked", remedy.key
        best = after.layouts[0].checked
        assert best.layout.label == remedy.best.layout.label, remedy.key
        assert best.phi_Mn == pytest.approx(remedy.phi_Mn), remedy.key
        lesser = before(name, remedy)
        if lesser is not None:
            assert changed(name, remedy.key, lesser).status == "no_layout", remedy.key


def test_every_kind_of_remedy_occurs(results: dict[str, RankedSection]) -> None:
    """The jobs above together need every change that the diagnosis knows."""
    found = {
        remedy.key
        for result in results.values()
        if result.diagnosis is not None
        for remedy in result.diagnosis.remedies
    }
    assert found == {
        "aggregate", "cover", "depth", "fc", "layer_gap", "max_layers", "max_sizes", "min_gap",
        "sizes", "steel", "stirrup", "tension_controlled", "width",
    }  # fmt: skip


def test_cover_remedy_is_the_smallest() -> None:
    """Weather, #8 bars in #3 stirrups: 2 in to the bars (Table 20.5.1.3.1) is 1.625 in outside."""
    keys = {"exposure": '"weather"', "stirrup": '"#3"', "sizes": '["#8"]'}
    assert rank_section(problem_of("us", section={**keys, "cover": "1.625"})).status == "ranked"
    diagnosis = rank_section(problem_of("us", section=keys)).diagnosis
    assert diagnosis is not None
    assert {remedy.after for remedy in diagnosis.remedies if remedy.key == "cover"} == {"1.625 in"}


def test_width_remedy_of_a_section_with_a_given_flange() -> None:
    """The width that a remedy names gives a layout in the job with just this key changed."""
    keys = {"Mu": "250", "width": "10", "depth": "20", "flange": "{width = 12, thickness = 4}"}
    diagnosis = rank_section(problem_of("us", section=keys)).diagnosis
    assert diagnosis is not None
    for remedy in diagnosis.remedies:
        if remedy.key == "width":
            after = rank_section(problem_of("us", section=keys | {"width": f'"{remedy.after}"'}))
            assert after.status == "ranked"
