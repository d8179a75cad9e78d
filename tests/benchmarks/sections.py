"""The benchmark set: sections of one kind or another that engineers meet.

Webs from 10 to 48 in, one to three layers, rectangles and flanged sections, sagging and
hogging, both rankings, in both unit systems. Demands are a share of what a tension-controlled
section of that size bears, so that the set holds easy, ordinary and crowded ones.
"""

from __future__ import annotations

from dataclasses import dataclass

from optimizer import parse_job
from optimizer.problem import Problem

_HEAD = """
code = "{code}"
[materials]
fc = "{fc}"
steel = "A615-60"
[bars]
max_layers = {layers}
[ranking]
by = "{by}"
[[section]]
mark = "{mark}"
Mu = "{moment}"
width = "{width}"
depth = "{depth}"
cover = "{cover}"
stirrup = "{stirrup}"
exposure = "interior"
{more}
"""


@dataclass(frozen=True)
class Case:
    """One section of the set."""

    name: str
    problem: Problem


def _us(width: int, depth: int, moment: float, layers: int, by: str, more: str = "") -> Case:
    name = f"{width}x{depth} in, {moment:+g} kip*ft, {layers} layers, {by}"
    if more:
        name += ", flanged"
    text = _HEAD.format(
        code="ACI 318-19",
        fc="4000 psi",
        layers=layers,
        by=by,
        mark=name,
        moment=f"{moment} kip*ft",
        width=f"{width} in",
        depth=f"{depth} in",
        cover="1.5 in",
        stirrup="#4",
        more=more,
    )
    return Case(name, parse_job(text).problems[0])


def _si(width: int, depth: int, moment: float, layers: int, by: str) -> Case:
    name = f"{width}x{depth} mm, {moment:+g} kN*m, {layers} layers, {by}"
    text = _HEAD.format(
        code="ACI 318M-19",
        fc="28 MPa",
        layers=layers,
        by=by,
        mark=name,
        moment=f"{moment} kN*m",
        width=f"{width} mm",
        depth=f"{depth} mm",
        cover="40 mm",
        stirrup="13",
        more="",
    )
    return Case(name, parse_job(text).problems[0])


def benchmark_set() -> list[Case]:
    """All sections, smallest webs first."""
    flange = 'flange = { width = "72 in", thickness = "5 in" }'
    cases = []
    for by in ("practical", "lightest"):
        cases += [
            _us(10, 18, 95, 2, by),
            _us(12, 22, 180, 2, by),
            _us(12, 22, -290, 2, by, flange),
            _us(14, 24, 260, 2, by),
            _us(14, 24, 370, 2, by),
            _us(14, 24, 340, 1, by),
            _us(16, 28, 520, 2, by),
            _us(16, 30, 900, 3, by, flange),
            _us(18, 32, 700, 2, by),
            _us(20, 30, 900, 3, by),
            _us(24, 36, 1500, 2, by),
            _us(30, 36, 1900, 3, by),
            _us(36, 24, 900, 2, by),
            _us(36, 48, 3500, 3, by),
            _us(48, 20, 700, 1, by),
            _us(48, 30, 2400, 3, by),
            _si(350, 600, 500, 2, by),
            _si(600, 900, 2000, 3, by),
        ]
    return cases
