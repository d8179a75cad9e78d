"""Beam job texts that the tests of the reader start from."""

from __future__ import annotations

from pathlib import Path

from optimizer.beams.problem import BeamProblem
from optimizer.beams.reader import parse_beam_job

_HEAD = {
    "us": 'code = "ACI 318-19"\n[materials]\nfc = "4000 psi"\nsteel = "A615-60"\n{materials}\n',
    "si": 'code = "ACI 318M-19"\n[materials]\nfc = "28 MPa"\nsteel = "A615-420"\n{materials}\n',
}
_BEAM = {
    "us": 'mark = "B1"\ncover = "1.5 in"\nwidth = "14 in"\ndepth = "24 in"\n',
    "si": 'mark = "B1"\ncover = "40 mm"\nwidth = "350 mm"\ndepth = "600 mm"\n',
}
_SUPPORT = {"us": 'width = "18 in"\n', "si": 'width = "450 mm"\n'}
_SPANS = {"us": ('length = "28 ft"\n', 'length = "24 ft"\n'), "si": ('length = "8 m"\n',) * 2}


def beam_text(
    units: str = "us",
    *,
    materials: str = "",
    bars: str = "",
    ranking: str = "",
    beam: str = "",
    supports: tuple[str, ...] = ("", "", ""),
    spans: tuple[str, ...] | None = None,
) -> str:
    """Return the text of a job of two spans; lines given are added to its tables.

    `supports` and `spans` hold the lines of each; spans given take the place of the job's own.
    """
    parts = [_HEAD[units].format(materials=materials)]
    parts += [f"[bars]\n{bars}\n[ranking]\n{ranking}\n", f"[beam]\n{_BEAM[units]}{beam}\n"]
    for mark, lines in zip("ABCDEFGHIJ", supports, strict=False):
        given = any(line.startswith("width") for line in lines.splitlines())
        own = "" if given else _SUPPORT[units]
        parts.append(f'[[support]]\nmark = "{mark}"\n{own}{lines}\n')
    for lines in spans or _SPANS[units]:
        parts.append(f"[[span]]\n{lines}\n")
    return "\n".join(parts)


def beam_of(
    units: str = "us",
    *,
    base: Path | None = None,
    materials: str = "",
    bars: str = "",
    ranking: str = "",
    beam: str = "",
    supports: tuple[str, ...] = ("", "", ""),
    spans: tuple[str, ...] | None = None,
) -> BeamProblem:
    """Return the problem of such a job."""
    text = beam_text(
        units,
        materials=materials,
        bars=bars,
        ranking=ranking,
        beam=beam,
        supports=supports,
        spans=spans,
    )
    return parse_beam_job(text, base=base)
