"""Options that the tests of their page start from; sections and prices are invented."""

from __future__ import annotations

from functools import cache

from optimizer import parse_job
from optimizer.options import OptionsResult, options
from tests.optimizer.jobs import job_text

OPTIONS_US = """
title = "Loft, again"
code = "ACI 318-19"
[materials]
fc = "4000 psi"
steel = "A615-60"
[bars]
sizes = ["#6", "#7", "#8", "#9", "#11"]
[options]
grades = ["A615-80"]
stirrups = ["#3"]
prices = "demo"
palette = 3
[[section]]
mark = "too weak"
Mu = "520 kip*ft"
width = "16 in"
depth = "28 in"
cover = "1.5 in"
stirrup = "#4"
layers = ["6 #8"]
length = "24 ft"
[[section]]
mark = "T hogging"
Mu = "-290 kip*ft"
width = "12 in"
depth = "22 in"
cover = "1.5 in"
stirrup = "#3"
flange = { width = "90 in", thickness = "5 in" }
opposite = ["2 #8"]
layers = ["3 #8", "2 #7"]
options = { widths = ["14 in"] }
[[section]]
mark = "nothing passes"
Mu = "440 kip*ft"
width = "10 in"
depth = "20 in"
cover = "1.5 in"
stirrup = "#4"
layers = ["2 #8"]
[[section]]
mark = "not drawn"
Mu = "300 kip*ft"
width = "14 in"
depth = "24 in"
cover = "1.5 in"
stirrup = "#4"
"""
OPTIONS_SI = job_text(
    "si",
    section={
        "layers": '["4 25", "2 22"]',
        "options": '{ mixing = false, stirrups = ["10"] }',
        "slab": '{ thickness = "125 mm", clear_left = "2.7 m", clear_right = "1.7 m",'
        ' span = "8 m" }',
    },
)
_TEXTS = {"us": OPTIONS_US, "si": OPTIONS_SI}


@cache
def optioned(units: str) -> OptionsResult:
    """Return options; computed once for all tests."""
    return options(parse_job(_TEXTS[units]))
