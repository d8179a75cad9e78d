"""Results that the tests of workbook, table and drawing start from; sections are invented."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from functools import cache

from optimizer import CheckResult, RankResult, check, parse_job, rank

_US = """\
title = "Quay sheds"
code = "ACI 318-19"
[materials]
fc = "4000 psi"
steel = "A615-60"
[bars]
sizes = ["#6", "#7", "#8", "#9"]
[ranking]
keep = 3

[[section]]
mark = "R1 rectangle"
Mu = "300 kip*ft"
Ms = "190 kip*ft"
width = "14 in"
depth = "24 in"
cover = "1.5 in"
stirrup = "#4"
exposure = "interior"
layers = ["3 #8", "2 #8"]

[[section]]
mark = "T1 slab"
Mu = "260 kip*ft"
width = "12 in"
depth = "22 in"
cover = "1.5 in"
stirrup = "#3"
slab = { thickness = "5 in", clear_left = "7 ft", clear_right = "7 ft", span = "26 ft" }
layers = ["2 #9 + 1 #8"]

[[section]]
mark = "L1 hogging"
Mu = "-210 kip*ft"
width = "12 in"
depth = "22 in"
cover = "1.5 in"
stirrup = "#3"
exposure = "interior"
flange = { width = "36 in", thickness = "5 in", side = "left" }
opposite = ["2 #8", "2 #7"]
layers = ["2 #6"]

[[section]]
mark = "I1 girder"
Mu = "240 kip*ft"
width = "12 in"
depth = "30 in"
cover = "2 in"
stirrup = "#4"
exposure = "weather"
flange = { width = "30 in", thickness = "5 in" }
bottom_flange = { width = "20 in", thickness = "6 in" }

[[section]]
mark = "N1 too small"
Mu = "240 kip*ft"
width = "10 in"
depth = "18 in"
cover = "1.5 in"
stirrup = "#4"
exposure = "interior"
"""
_SI = """\
title = "Quay sheds in SI"
code = "ACI 318M-19"
[materials]
fc = "28 MPa"
steel = "A615-420"
[bars]
sizes = ["19", "22", "25"]
[ranking]
keep = 3

[[section]]
mark = "R1"
Mu = "380 kN*m"
width = "350 mm"
depth = "600 mm"
cover = "40 mm"
stirrup = "13"
exposure = "interior"
layers = ["4 25", "2 25"]

[[section]]
mark = "T1"
Mu = "-250 kN*m"
width = "300 mm"
depth = "550 mm"
cover = "40 mm"
stirrup = "10"
exposure = "interior"
flange = { width = "1200 mm", thickness = "120 mm" }
opposite = ["2 25"]
"""
_JOBS = {"us": _US, "si": _SI}

HOSTILE = {
    "script": "<script>alert(1)</script> & <b>",
    "formula": '=HYPERLINK("http://x","y")',
    "plus": "+1+1",
    "minus": "-2+3|cmd",
    "at": "@SUM(A1)",
    "blank before a formula": "  =1+1",
    "control characters": "\x00B\x07\t=1\r\n2\x1b[31m\x7f\x85",
    "joiner before a formula": "\u200b=1+1",
    "unpaired surrogate": "B\ud800 1",
    "turned direction": "B\u202e1\ufeff",
    "cell escape": "_x0041_ _x000D_",
    "error value": "#REF!",
    "quotes and commas": "a,\"b\";'c'",
    "codes of a drawing": r"{\C1;red}\P%%c100 ^J\U+0041 \M+1815C",
    "group codes of a drawing": "x\n  0\nLINE\n  8\n0",
    "number": "12",
    "long": "B" * 5000,
    "wide": "梁一号" * 20,
}


@cache
def ranked(units: str = "us") -> RankResult:
    """Return the ranking of the sample job: the last section of `us` has no layout."""
    return rank(parse_job(_JOBS[units]))


@cache
def checked(units: str = "us") -> CheckResult:
    """Return the check of the layouts given in the sample job: the last of `us` fails."""
    return check(parse_job(_JOBS[units]))


def renamed(text: str) -> RankResult:
    """Return a ranking whose title and marks, of a layout and of none, are a given text."""
    result = ranked()
    sections = tuple(
        replace(item, problem=replace(item.problem, section=replace(item.section, mark=text)))
        for item in (result.sections[0], result.sections[-1])
    )
    layouts = tuple(
        replace(item, checked=replace(item.checked, section=sections[0].section))
        for item in sections[0].layouts
    )
    job = replace(result.job, title=text)
    return replace(result, job=job, sections=(replace(sections[0], layouts=layouts), sections[1]))


RESULTS: dict[str, Callable[[], RankResult | CheckResult]] = {
    "ranked us": lambda: ranked("us"),
    "ranked si": lambda: ranked("si"),
    "checked us": lambda: checked("us"),
    "checked si": lambda: checked("si"),
}
