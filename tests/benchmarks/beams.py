"""Whole beams for the benchmarks, and what their design and a change of span take."""

from __future__ import annotations

import time
from dataclasses import dataclass
from string import ascii_uppercase

from optimizer.beams.design import BeamDesign, design_beam
from optimizer.beams.positions import drawn
from optimizer.beams.reader import parse_beam_job
from optimizer.beams.respan import respan

_SPANS = (28, 24, 30, 26, 22, 30, 27, 25)  # [ft]
_HEAD = """
code = "ACI 318-19"
[materials]
fc = "4000 psi"
steel = "A615-60"
[bars]
sizes = ["#5", "#6", "#7", "#8", "#9", "#10", "#11"]
[beam]
mark = "B"
cover = "1.5 in"
width = "16 in"
depth = "26 in"
slab = { thickness = "5 in", clear_left = "9 ft", clear_right = "9 ft" }
"""
_SUPPORT = """
[[support]]
mark = "{mark}"
width = "20 in"
ties = true
below = {{ width = "20 in", depth = "20 in", height = "12 ft" }}
above = {{ width = "20 in", depth = "20 in", height = "12 ft" }}
"""
_SPAN = """
[[span]]
length = "{length} ft"
dead = "1.6 kip/ft"
live = "1.4 kip/ft"
"""


@dataclass(frozen=True, slots=True, kw_only=True)
class Timed:
    """One benchmark of a beam.

    Attributes
    ----------
    what : str
        What was done.
    seconds : float
        Time. [s]
    cost, gap : float
        Placed index [lb], and what the bound leaves open as a share of it. [-]
    proved : bool
        Whether the bound was reached without a limit on the work.
    """

    what: str
    seconds: float
    cost: float
    gap: float
    proved: bool


def beam_text(lengths: tuple[float, ...]) -> str:
    """Job of a beam on columns with spans of some lengths. [ft]"""
    supports = "".join(_SUPPORT.format(mark=mark) for mark in ascii_uppercase[: len(lengths) + 1])
    spans = "".join(_SPAN.format(length=length) for length in lengths)
    return _HEAD + supports + spans


def _designed(lengths: tuple[float, ...]) -> BeamDesign:
    found = design_beam(parse_beam_job(beam_text(lengths)))
    assert isinstance(found, BeamDesign)
    return found


def _timed(what: str, design: BeamDesign, seconds: float) -> Timed:
    return Timed(
        what=what,
        seconds=seconds,
        cost=design.cost,
        gap=1.0 - design.bound / design.cost,
        proved=design.proved,
    )


def beam_benchmarks() -> list[Timed]:
    """Design of one, three and eight spans, and the frontier of three after a change.

    Returns
    -------
    list of Timed
        Best of two runs each; the modules are loaded by the first.
    """
    _designed(_SPANS[:1])
    found = []
    for count in (1, 3, 8):
        runs = []
        for _ in range(2):
            start = time.perf_counter()
            design = _designed(_SPANS[:count])
            runs.append(time.perf_counter() - start)
        found.append(_timed(f"design of {count} spans", design, min(runs)))
    old = drawn(_designed(_SPANS[:3]))
    changed = parse_beam_job(beam_text((_SPANS[0], 27.0, _SPANS[2])))
    runs = []
    for _ in range(2):
        start = time.perf_counter()
        answer = respan(changed, old)
        runs.append(time.perf_counter() - start)
    assert isinstance(answer.best, BeamDesign)
    what = f"respan of 3 spans, {len(answer.steps)} steps of the frontier"
    found.append(_timed(what, answer.best, min(runs)))
    return found
