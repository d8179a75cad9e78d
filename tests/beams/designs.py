"""Designs that several tests look at, each made once."""

from __future__ import annotations

from functools import cache

from optimizer.beams.design import BeamDesign, NoDesign, design_beam
from optimizer.beams.reader import parse_beam_job
from tests.beams.jobs import beam_text

_LOADS = {
    "us": 'dead = "1 kip/ft"\nlive = "0.8 kip/ft"\n',
    "si": 'dead = "12 kN/m"\nlive = "10 kN/m"\n',
}
_LENGTHS = {"us": ("24 ft", "20 ft", "5 ft"), "si": ("7.2 m", "6 m", "1.5 m")}
_BARS = {"us": 'sizes = ["#5", "#6", "#7"]', "si": 'sizes = ["16", "19", "22"]'}


def job_text(units: str = "us", *, spans: int = 2, cantilever: bool = False, beam: str = "") -> str:
    """Text of a job of some spans, with a cantilever at its right end if asked for."""
    lengths = [_LENGTHS[units][number % 2] for number in range(spans)]
    lines = [f'length = "{length}"\n{_LOADS[units]}' for length in lengths]
    if cantilever:
        lines.append(f'length = "{_LENGTHS[units][2]}"\ncantilever = "right"\n{_LOADS[units]}')
    supports = ("",) * (spans + 1)
    return beam_text(units, bars=_BARS[units], beam=beam, supports=supports, spans=tuple(lines))


@cache
def designed(units: str = "us", *, spans: int = 2, cantilever: bool = False) -> BeamDesign:
    """Design of such a job."""
    result = design_beam(parse_beam_job(job_text(units, spans=spans, cantilever=cantilever)))
    assert isinstance(result, BeamDesign)
    return result


@cache
def not_designed(units: str = "us") -> NoDesign:
    """A beam that is much too shallow."""
    text = job_text(units)
    for depth, shallow in (('depth = "24 in"', 'depth = "10 in"'), ("600 mm", "250 mm")):
        text = text.replace(depth, shallow)
    result = design_beam(parse_beam_job(text))
    assert isinstance(result, NoDesign)
    return result
