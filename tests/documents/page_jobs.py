"""Results that the tests of the page start from, and ways to read a page back."""

from __future__ import annotations

import re
from functools import cache
from html.parser import HTMLParser
from xml.etree import ElementTree as ET

from optimizer import check, parse_job, rank
from optimizer.results import CheckResult, RankResult
from tests.optimizer.jobs import job_text

RANKED_US = (
    job_text(
        "us",
        head={"title": '"Loft"', "code": '"ACI 318-19"'},
        section={"Ms": '"190 kip*ft"', "keep": "4"},
    )
    + """
[[section]]
mark = "T hogging"
Mu = "-290 kip*ft"
width = "12 in"
depth = "22 in"
cover = "1.5 in"
stirrup = "#3"
keep = 3
flange = { width = "90 in", thickness = "5 in" }
opposite = ["2 #8"]
[[section]]
mark = "Too small"
Mu = "240 kip*ft"
width = "10 in"
depth = "20 in"
cover = "1.5 in"
stirrup = "#4"
"""
)
RANKED_SI = job_text(
    "si",
    section={
        "keep": "3",
        "Ms": '"250 kN*m"',
        "min_gap": '"40 mm"',
        "statically_determinate": "true",
        "variety": '"off"',
        "by": '"lightest"',
        "exposure": '"interior"',
        "slab": '{ thickness = "125 mm", clear_left = "2.7 m", clear_right = "1.7 m",'
        ' span = "8 m" }',
    },
)
CHECKED_US = """
title = "Given"
code = "ACI 318-14"
[materials]
fc = "5000 psi"
steel = "A615-60"
[bars]
tension_controlled = false
[[section]]
mark = "doubly reinforced"
Mu = "-600 kip*ft"
Ms = "-300 kip*ft"
width = "16 in"
depth = "24 in"
cover = "1.5 in"
stirrup = "#4"
layers = ["5 #9", "4 #9"]
opposite = ["3 #8"]
count_opposite = true
flange = { width = "40 in", thickness = "5 in", side = "left" }
[[section]]
mark = "I"
Mu = "2400 kip*ft"
width = "16 in"
depth = "44 in"
cover = "2 in"
stirrup = "#4"
exposure = "weather"
layers = ["5 #11", "3 #11 + 2 #9", "2 #9"]
flange = { width = "24 in", thickness = "4 in" }
bottom_flange = { width = "60 in", thickness = "9 in" }
[[section]]
mark = "little"
Mu = "40 kip*ft"
width = "14 in"
depth = "24 in"
cover = "1.5 in"
stirrup = "#4"
layers = ["2 #5"]
[[section]]
mark = "one bar"
Mu = "400 kip*ft"
width = "14 in"
depth = "24 in"
cover = "1 in"
stirrup = "#4"
layers = ["1 #11"]
[[section]]
mark = "over-reinforced"
Mu = "300 kip*ft"
width = "12 in"
depth = "16 in"
cover = "1.5 in"
stirrup = "#4"
layers = ["4 #10", "4 #10"]
"""
CHECKED_SI = job_text("si", section={"layers": '["4 25", "2 22"]', "Mu": '"400 kN*m"'})
RANKED = {"us": RANKED_US, "si": RANKED_SI}
CHECKED = {"us": CHECKED_US, "si": CHECKED_SI}


@cache
def ranked(units: str) -> RankResult:
    """Return a ranking; computed once for all tests."""
    return rank(parse_job(RANKED[units]))


@cache
def checked(units: str) -> CheckResult:
    """Return a check; computed once for all tests."""
    return check(parse_job(CHECKED[units]))


_VOID = {"meta", "link", "br", "hr", "img", "input"}


class Reader(HTMLParser):
    """Reads a page strictly: elements have to close in order."""

    def __init__(self, page: str) -> None:
        super().__init__(convert_charrefs=True)
        self.open: list[str] = []
        self.tags: list[str] = []
        self.attributes: list[tuple[str, str]] = []
        self.pieces: list[str] = []
        self.feed(page)
        self.close()
        assert self.open == []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        """Note an element."""
        self.tags.append(tag)
        self.attributes += [(name, value or "") for name, value in attrs]
        if tag not in _VOID:
            self.open.append(tag)

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        """Note an element that is empty."""
        self.tags.append(tag)
        self.attributes += [(name, value or "") for name, value in attrs]

    def handle_endtag(self, tag: str) -> None:
        """See that it is the innermost one which ends."""
        assert self.open.pop() == tag

    def handle_data(self, data: str) -> None:
        """Keep what a person reads."""
        if self.open and self.open[-1] != "style":
            self.pieces.append(data)

    @property
    def text(self) -> str:
        """All that a person reads, with single blanks."""
        return re.sub(r"\s+", " ", "".join(self.pieces))


def drawings(page: str, kind: str) -> list[ET.Element]:
    """Return the drawings of a class in a page."""
    found = [ET.fromstring(text) for text in re.findall(r"<svg.*?</svg>", page, flags=re.DOTALL)]
    return [root for root in found if root.get("class") == kind]


def parts(root: ET.Element, tag: str, kind: str = "") -> list[ET.Element]:
    """Return the shapes of a drawing by tag and first word of their class."""
    found = root.iter(f"{{http://www.w3.org/2000/svg}}{tag}")
    return [item for item in found if not kind or (item.get("class") or "").split()[0] == kind]
