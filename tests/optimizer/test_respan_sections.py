"""Sections after a change: verdicts by the check, frontier by trying every choice."""

from __future__ import annotations

import itertools
import json
import math
import tomllib
from pathlib import Path
from typing import Any

import pytest

from engine import check_layout
from optimizer.errors import JobError
from optimizer.job import parse_job, parse_job_keys
from optimizer.record import read_record, record_text
from optimizer.respan_sections import (
    SectionsRespan,
    drawn_sections,
    layers_of,
    respan_sections,
    with_layers,
)
from optimizer.results import rank

HEAD = """\
title = "Sections"
code = "ACI 318-19"
[materials]
fc = "4000 psi"
steel = "A615-60"
aggregate = "3/4 in"
[bars]
sizes = ["#6", "#7", "#8"]
[ranking]
by = "{by}"
keep = 3
"""
SECTION = """\
[[section]]
mark = "{mark}"
Mu = "{Mu} kip*ft"
width = "14 in"
depth = "24 in"
cover = "1.5 in"
stirrup = "#4"
exposure = "interior"
length = "{length} ft"
"""
MARKS = ("A", "B", "C", "D")
BEFORE = (150, 250, 200, 120)
LENGTHS = (20, 10, 30, 5)


def keys_of(moments: tuple[int, ...], by: str = "practical") -> dict[str, Any]:
    """Return the keys of a job of four sections."""
    sections = [
        SECTION.format(mark=mark, Mu=Mu, length=length)
        for mark, Mu, length in zip(MARKS, moments, LENGTHS, strict=True)
    ]
    return tomllib.loads(HEAD.format(by=by) + "".join(sections))


def answer_to(
    moments: tuple[int, ...], locked: tuple[str, ...] = (), by: str = "practical"
) -> SectionsRespan:
    """Return the answer to other moments on the four sections."""
    old = {mark: tuple(item["layers"]) for mark, item in _drawn(by)["sections"].items()}
    job = parse_job_keys(with_layers(keys_of(moments, by), old))
    return respan_sections(job, old, locked)


def _drawn(by: str) -> Any:
    return drawn_sections(rank(parse_job_keys(keys_of(BEFORE, by))))


@pytest.mark.parametrize("by", ["practical", "lightest"])
@pytest.mark.parametrize(
    "moments",
    [(150, 250, 200, 120), (100, 250, 200, 120), (260, 250, 120, 60), (80, 90, 100, 110),
     (190, 300, 220, 140)],
)  # fmt: skip
@pytest.mark.parametrize("locked", [(), ("C",)])
def test_frontier_equals_every_choice(
    moments: tuple[int, ...], by: str, locked: tuple[str, ...]
) -> None:
    """For each number of changes no choice of sections that change costs less."""
    answer = answer_to(moments, locked, by)
    for changes in range(len(MARKS) + 1):
        best = math.inf
        for some in itertools.combinations(range(len(MARKS)), changes):
            if any(MARKS[number] in locked for number in some):
                continue
            costs = [
                item.cost_best if number in some else item.cost_before
                for number, item in enumerate(answer.verdicts)
            ]
            if all(cost is not None for cost in costs):
                best = min(best, sum(cost for cost in costs if cost is not None))
        found = min(
            (step.cost for step in answer.steps
             if step.possible and step.cost is not None and step.changes <= changes),
            default=math.inf,
        )  # fmt: skip
        within = min([best, *(_cost_within(answer, locked, fewer) for fewer in range(changes))])
        assert found == pytest.approx(within)


def _cost_within(answer: SectionsRespan, locked: tuple[str, ...], changes: int) -> float:
    best = math.inf
    for some in itertools.combinations(range(len(MARKS)), changes):
        if any(MARKS[number] in locked for number in some):
            continue
        total = 0.0
        for number, item in enumerate(answer.verdicts):
            cost = item.cost_best if number in some else item.cost_before
            total += math.inf if cost is None else cost
        best = min(best, total)
    return best


def test_verdicts_are_those_of_the_check() -> None:
    """A layout works exactly if it passes every check under the new moment."""
    answer = answer_to((260, 250, 120, 60))
    for item in answer.verdicts:
        assert item.ranked.problem.drawn is not None
        checked = check_layout(item.ranked.section, item.ranked.problem.drawn)
        assert item.works is checked.ok
        assert item.before == checked.layout.label
        if item.works:
            assert item.mass_before == pytest.approx(
                checked.layout.mass * item.ranked.problem.length
            )
    assert [item.works for item in answer.verdicts] == [False, True, True, True]


def test_no_change_needs_none() -> None:
    """Under the moments as drawn everything stays, and nothing can be saved."""
    answer = answer_to(BEFORE)
    assert [(step.changes, step.possible) for step in answer.steps] == [(0, True)]
    assert answer.ok


def test_a_section_that_nothing_serves() -> None:
    """Where one section has no layout the job has no answer, however many may change."""
    answer = answer_to((150, 900, 200, 120))
    assert not answer.ok
    assert not any(step.possible for step in answer.steps)


def test_a_locked_section_that_fails() -> None:
    """A section that fails and may not change leaves no answer; an unknown one is refused."""
    assert not answer_to((260, 250, 200, 120), ("A",)).ok
    with pytest.raises(JobError, match="--lock: no section 'E'; allowed: A, B, C, D"):
        answer_to(BEFORE, ("E",))


def test_record_comes_back(tmp_path: Path) -> None:
    """Layouts of a record are those ranked first; sections without one are left out."""
    keys = keys_of((150, 900, 200, 120))
    result = rank(parse_job_keys(keys))
    path = tmp_path / "record.json"
    path.write_text(record_text("sections", keys, None, drawn_sections(result)), encoding="utf-8")
    record = read_record(path)
    assert record.job == keys
    layers = layers_of(record)
    assert set(layers) == {"A", "C", "D"}
    for section in result.sections:
        if section.layouts:
            first = section.layouts[0].checked.layout
            assert layers[section.section.mark] == tuple(layer.label for layer in first.layers)
    job = parse_job_keys(with_layers(record.job, layers))
    assert [problem.drawn is None for problem in job.problems] == [False, True, False, False]
    answer = respan_sections(job, layers)
    assert answer.verdicts[1].before == ""


@pytest.mark.parametrize(
    "design",
    [{}, {"sections": 3}, {"sections": {"A": {"layers": []}}}, {"sections": {"A": {}}},
     {"sections": {"A": {"layers": ["2 #8"], "more": 1}}}, {"sections": {"A": {"layers": [2]}}}],
    ids=json.dumps,
)  # fmt: skip
def test_damaged_records_are_refused(design: dict[str, Any], tmp_path: Path) -> None:
    """What cannot be layouts is named by its key."""
    path = tmp_path / "record.json"
    path.write_text(record_text("sections", keys_of(BEFORE), None, design), encoding="utf-8")
    with pytest.raises(JobError, match=r"record\.json: design\.sections.*damaged"):
        layers_of(read_record(path))


def test_keys_and_text_give_the_same_job() -> None:
    """A job read from its keys is the one read from its text."""
    text = HEAD.format(by="practical") + SECTION.format(mark="A", Mu=150, length=20)
    assert parse_job_keys(tomllib.loads(text)) == parse_job(text)
