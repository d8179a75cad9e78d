"""A beam over a range of one span: each length is designed as if alone."""

from __future__ import annotations

import tomllib
from dataclasses import replace
from functools import cache
from itertools import pairwise

import pytest

from engine.units import SYSTEMS
from optimizer.beams.design import BeamDesign, design_beam
from optimizer.beams.positions import drawn
from optimizer.beams.reader import parse_beam_keys
from optimizer.beams.respan import changed_positions, respan
from optimizer.beams.sweep import Sweep, is_range, lengths_of, sweep
from optimizer.beams.sweep_report import sweep_bars, sweep_blocks, sweep_lines
from optimizer.errors import JobError
from optimizer.text_tables import Paragraph, TextTable
from tests.beams.designs import designed, job_text

US, SI = SYSTEMS["us"], SYSTEMS["si"]
FEET = (22, 24, 25, 60)


@cache
def swept() -> Sweep:
    """Sweep the first span of a beam of two, to a length that no bars serve."""
    problems = {}
    for feet in FEET:
        keys = tomllib.loads(job_text())
        keys["span"][0]["length"] = f"{feet} ft"
        problems[12.0 * feet] = parse_beam_keys(keys)
    return sweep(problems, drawn(designed()), "A-B")


@pytest.mark.parametrize(
    ("text", "system", "expected"),
    [
        ("24 ft..26 ft/1 ft", US, (288.0, 300.0, 312.0)),
        ("24 ft .. 25 ft / 6 in", US, (288.0, 294.0, 300.0)),
        ("24 ft..26.5 ft/1 ft", US, (288.0, 300.0, 312.0)),
        ("24 ft..24 ft/1 ft", US, (288.0,)),
        ("7 m..8 m/0.5 m", SI, (7000.0, 7500.0, 8000.0)),
        ("7 m..7.3 m/0.1 m", SI, (7000.0, 7100.0, 7200.0, 7300.0)),
    ],
)
def test_ranges(text: str, system: object, expected: tuple[float, ...]) -> None:
    """Both ends belong to a range where the step meets the end."""
    assert is_range(text)
    found = lengths_of(text, system, "--span")  # type: ignore[arg-type]
    assert found == pytest.approx(expected)


@pytest.mark.parametrize(
    "text",
    ["24 ft..26 ft", "24 ft../1 ft", "26 ft..24 ft/1 ft", "24 ft..26 ft/0 ft", "0 ft..2 ft/1 ft",
     "24 ft..26 ft/-1 ft", "24..26/1", "24 ft..26 ft/1 kip", "24 ft..90 ft/1 ft", "1 ft..inf/1 ft",
     "../"],
)  # fmt: skip
def test_ranges_that_are_none(text: str) -> None:
    """One message names the option and what a range looks like or may hold."""
    with pytest.raises(JobError, match=r"^--span: "):
        lengths_of(text, US, "--span")


def test_sixty_lengths_are_the_most() -> None:
    """60 lengths pass, 61 do not."""
    assert len(lengths_of("1 ft..60 ft/1 ft", US, "--span")) == 60
    with pytest.raises(JobError, match="61 lengths; allowed: up to 60"):
        lengths_of("1 ft..61 ft/1 ft", US, "--span")


def test_each_length_is_the_best_beam_of_its_own() -> None:
    """Cost and verdict of each length are those of a design and a respan of it alone."""
    result = swept()
    assert [point.length / 12.0 for point in result.points] == list(FEET)
    for point in result.points:
        alone = design_beam(point.result.problem)
        assert isinstance(point.result, BeamDesign) is isinstance(alone, BeamDesign)
        if not isinstance(point.result, BeamDesign) or not isinstance(alone, BeamDesign):
            assert not point.old_works
            continue
        assert point.result.cost == pytest.approx(alone.cost, rel=1e-6, abs=1e-3)
        assert point.result.proved
        assert point.result.bound <= point.result.cost
        assert list(point.changed) == changed_positions(result.old, drawn(point.result))
        answer = respan(point.result.problem, result.old)
        assert point.old_works is (answer.steps[0].design is not None)
        least = next(
            step.changes
            for step in answer.steps
            if step.design is not None and step.design.cost < alone.cost + 2e-3
        )
        assert len(point.changed) <= least  # of beams as good the one with the fewest changes


def test_the_drawn_length_changes_nothing() -> None:
    """At the length as drawn the beam is the one drawn."""
    point = swept().points[FEET.index(24)]
    assert point.old_works
    assert point.changed == ()


def test_a_length_without_a_beam_is_told() -> None:
    """It has reasons, no figures, and the sweep as a whole is not well."""
    result = swept()
    assert not isinstance(result.points[-1].result, BeamDesign)
    assert not result.ok
    assert replace(result, points=result.points[:-1]).ok
    table, *rest = sweep_blocks(result)
    assert isinstance(table, TextTable)
    assert table.rows[-1][1] == "none"
    assert any(isinstance(block, Paragraph) and "60'-0\"" in block.text for block in rest)
    assert any("no beam" in line for line in sweep_bars(result, plain_text=True))


def test_growth_is_mass_over_length() -> None:
    """Mass more per foot, of lengths that both have a beam."""
    lines = sweep_lines(swept())
    assert lines[0].growth is None
    assert lines[-1].growth is None
    for before, line in pairwise(lines[:-1]):
        assert line.design is not None
        assert before.design is not None
        more = line.design.schedule.mass - before.design.schedule.mass
        feet = (line.point.length - before.point.length) / 12.0
        assert line.growth == pytest.approx(more / feet)


def test_bars_are_to_scale() -> None:
    """Bars of text start at zero: their lengths have the ratio of their figures."""
    result = swept()
    lines = [line for line in sweep_bars(result, plain_text=True) if "#" in line]
    masses = [line.design.schedule.mass for line in sweep_lines(result) if line.design]
    for line, mass in zip(lines, masses, strict=False):
        assert line.count("#") == round(48 * mass / max(masses))
        assert line.endswith(f" {mass:.1f}")
