"""Job texts and problems that the tests of the optimizer start from."""

from __future__ import annotations

from collections.abc import Mapping

from optimizer import parse_job
from optimizer.problem import Problem

Keys = Mapping[str, str]

_US: dict[str, Keys] = {
    "": {"code": '"ACI 318-19"'},
    "materials": {"fc": '"4000 psi"', "steel": '"A615-60"'},
    "bars": {},
    "ranking": {},
    "section": {
        "mark": '"B1"',
        "Mu": '"300 kip*ft"',
        "width": '"14 in"',
        "depth": '"24 in"',
        "cover": '"1.5 in"',
        "stirrup": '"#4"',
    },
}
_SI: dict[str, Keys] = {
    "": {"code": '"ACI 318M-19"'},
    "materials": {"fc": '"28 MPa"', "steel": '"A615-420"'},
    "bars": {},
    "ranking": {},
    "section": {
        "mark": '"B1"',
        "Mu": '"400 kN*m"',
        "width": '"350 mm"',
        "depth": '"600 mm"',
        "cover": '"40 mm"',
        "stirrup": '"13"',
    },
}
_BASE = {"us": _US, "si": _SI}


def job_text(units: str = "us", without: tuple[str, ...] = (), /, **groups: Keys) -> str:
    """Return the text of a job of one section.

    Values are written as TOML has them. Keys of `head`, `materials`, `bars`, `ranking` and
    `section` are added to the base job or replace its own; keys in `without` are left out.
    """
    lines = []
    for group, base in _BASE[units].items():
        keys = {k: v for k, v in base.items() if k not in without} | dict(
            groups.get(group or "head", {})
        )
        if group:
            lines.append(f"[[{group}]]" if group == "section" else f"[{group}]")
        lines += [f"{key} = {value}" for key, value in keys.items()]
    return "\n".join(lines) + "\n"


def problem_of(units: str = "us", without: tuple[str, ...] = (), /, **groups: Keys) -> Problem:
    """Return the problem of the one section of such a job."""
    (problem,) = parse_job(job_text(units, without, **groups)).problems
    return problem
