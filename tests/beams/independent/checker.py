"""All rules held against one design."""

from __future__ import annotations

from collections.abc import Callable, Iterator

from optimizer.beams.design import BeamDesign
from tests.beams.independent import rules_ends, rules_moment, rules_schedule, rules_stirrups
from tests.beams.independent.built import Built
from tests.beams.independent.random_jobs import PlainJob

Rule = Callable[[Built], Iterator[str]]

RULES: tuple[Rule, ...] = (
    rules_moment.moments,
    rules_moment.steel_and_strain,
    rules_moment.redistribution,
    rules_moment.cracks,
    rules_ends.cut_off,
    rules_ends.shares,
    rules_ends.bond,
    rules_ends.integrity,
    rules_stirrups.shear,
    rules_stirrups.positions,
    rules_stirrups.ends_in_tension,
    rules_stirrups.corners,
    rules_schedule.gaps,
    rules_schedule.lap_gaps,
    rules_schedule.hanger_gaps,
    rules_schedule.lengths,
    rules_schedule.cutting,
    rules_schedule.sizes,
    rules_schedule.sag,
)


def complaints(job: PlainJob, design: BeamDesign, rules: tuple[Rule, ...] = RULES) -> list[str]:
    """Return what is wrong with a design, one line each; empty if nothing is."""
    built = Built(job, design)
    return [f"{rule.__name__}: {line}" for rule in rules for line in rule(built)]
