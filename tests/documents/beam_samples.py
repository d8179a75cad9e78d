"""Designed beams that the tests of their documents start from; the jobs are invented."""

from __future__ import annotations

from dataclasses import replace
from functools import cache
from pathlib import Path

import optimizer
from optimizer.beams.design import BeamDesign, NoDesign, design_beam
from optimizer.beams.reader import parse_beam_job

_DATA = Path(optimizer.__file__).parent / "data"
_DEEP = """\
title = "Deep girder"
code = "ACI 318-19"
[materials]
fc = "5 ksi"
steel = "A615-60"
[bars]
sizes = ["#6", "#7", "#8", "#9"]
[beam]
mark = "G4"
cover = "2 in"
width = "18 in"
depth = "44 in"
edge = "perimeter"
stirrups = ["#4"]
[[support]]
mark = "A"
width = "24 in"
[[support]]
mark = "B"
width = "24 in"
[[span]]
length = "7 ft"
cantilever = "left"
dead = "2 kip/ft"
live = "1.5 kip/ft"
[[span]]
length = "34 ft"
dead = "2.5 kip/ft"
live = "2 kip/ft"
"""
SAMPLES = ("us", "si", "deep")


@cache
def designed(name: str = "us") -> BeamDesign:
    """Return the design of a job: of a template, or of a deep girder with skin bars."""
    text = _DEEP
    if name != "deep":
        text = (_DATA / f"beam_{name}.toml").read_text(encoding="utf-8")
    result = design_beam(parse_beam_job(text))
    assert isinstance(result, BeamDesign)
    return result


def without_design(*, proved: bool = True) -> NoDesign:
    """Return an answer without a design, for the demand of a template."""
    design = designed()
    reasons = ("A-B bottom: no layout is strong enough (stirrups #3, 2 legs)",)
    return NoDesign(problem=design.problem, demands=design.demands, reasons=reasons, proved=proved)


def renamed(text: str) -> BeamDesign:
    """Return a design whose title and mark are a text."""
    design = designed()
    return replace(design, problem=replace(design.problem, title=text, mark=text))
