"""Results as a drawing (DXF): each section's chosen layout at full size, side by side.

One drawing unit is an inch or a millimetre. A section's origin is the bottom of its web's
centreline; origins lie on round coordinates along the x axis.
"""

from __future__ import annotations

import textwrap

from engine import Section
from engine.units import plain
from optimizer.documents.drawing_paper import Paper, next_step, width_of
from optimizer.documents.section_panel import Panel, draw_panel, reach, rise
from optimizer.documents.short_list_table import Result
from optimizer.documents.wording import visible
from optimizer.options import OptionsResult
from optimizer.results import CheckedSection, RatedLayout
from optimizer.wording import CAUTION, NOT_CHECKED

_BETWEEN = 4.0  # from panel to panel and to the notes, in text heights
_NOTE_LINE = 1.7
_LONGEST = 80  # letters of a mark or title that are shown
_CAPTION_LETTERS, _NOTE_LETTERS = 48, 100
_STEP = {"us": 10.0, "si": 250.0}  # origins lie on multiples of it [in or mm]


def drawing_dxf(result: Result | OptionsResult) -> str:
    """Draw the chosen layout of every section.

    Parameters
    ----------
    result : RankResult, CheckResult or OptionsResult
        Result of a job: line 1 of each short list, or the layouts given, or those and the chosen
        options beside them.

    Returns
    -------
    str
        DXF of release R2010; equal results give equal text.
    """
    panels = _panels(result)
    job = result.job
    title = f"{_short(job.title)}  ({job.edition.name})" if job.title else job.edition.name
    return drawing_of(panels, Paper(job.edition.system), title)


def drawing_of(panels: list[Panel], paper: Paper, title: str) -> str:
    """Draw panels side by side with a title and the caution.

    Parameters
    ----------
    panels : list of Panel
        What to draw, left to right.
    paper : Paper
        Empty drawing.
    title : str
        Title of the drawing.

    Returns
    -------
    str
        DXF.
    """
    h = paper.height
    start = end = 0.0
    for number, (panel, x) in enumerate(zip(panels, origins(panels, h), strict=True)):
        draw_panel(paper, panel, (x, 0.0))
        left, right = reach(panel, h)
        start = x - left if number == 0 else start
        end = x + right
    heights = [rise(panel, h) for panel in panels]
    top = max((above for _, above in heights), default=0.0)
    below = -max((under for under, _ in heights), default=0.0) - _BETWEEN * h
    notes = [
        title,
        *textwrap.wrap(NOT_CHECKED, _NOTE_LETTERS),
        *textwrap.wrap(CAUTION, _NOTE_LETTERS),
    ]
    paper.text(notes, (start, below), (0.0, 0.0))
    bottom = below - _NOTE_LINE * (len(notes) + 1) * h
    return paper.written((start, bottom), (max(end, start + width_of(notes, h)), top))


def origins(panels: list[Panel], height: float) -> list[float]:
    """Place panels side by side, the first at zero.

    Parameters
    ----------
    panels : list of Panel
        Panels, left to right.
    height : float
        Height of text. [in or mm]

    Returns
    -------
    list of float
        x of each web's centreline, on round coordinates. [in or mm]
    """
    found: list[float] = []
    taken = 0.0
    for panel in panels:
        left, right = reach(panel, height)
        step = _STEP[panel.section.edition.units]
        x = next_step(taken + _BETWEEN * height + left, step) if found else 0.0
        found.append(x)
        taken = x + right
    return found


def _short(text: str) -> str:
    shown = visible(text)
    return shown if len(shown) <= _LONGEST else shown[: _LONGEST - 3] + "..."


def _panels(result: Result | OptionsResult) -> list[Panel]:
    if isinstance(result, OptionsResult):
        return [
            panel
            for section in result.sections
            for panel in (
                _panel(section.section, section.drawn, _as_given(section.drawn)),
                *(
                    _panel(item.checked.section, item.rated, f"option {item.number}")
                    for item in section.chosen
                ),
            )
        ]
    panels = []
    for section in result.sections:
        if isinstance(section, CheckedSection):
            panels.append(_panel(section.section, section.layout, _as_given(section.layout)))
        elif section.layouts:
            panels.append(_panel(section.section, section.layouts[0], "line 1 of the short list"))
        else:
            none = "no layout meets every rule: no bars drawn"
            panels.append(_panel(section.section, None, none))
    return panels


def _as_given(rated: RatedLayout) -> str:
    return "layout given: passes" if rated.checked.ok else "LAYOUT GIVEN: FAILS ITS CHECK"


def _panel(asked: Section, rated: RatedLayout | None, verdict: str) -> Panel:
    system = asked.edition.system
    moment = system.trade["moment"]
    strength = f"Mu = {system.to_trade('moment', asked.Mu):+.1f} {moment}"
    bars = "no bars"
    if rated is not None:
        bars = rated.checked.layout.label
        capacity = system.to_trade("moment", rated.checked.phi_Mn)
        strength += f", phi Mn = {capacity:.1f} {moment}"
    stress = system.trade["stress"]
    steel = f"{asked.steel.name} fy" if asked.steel.name else "fy"
    facts = [
        f"{plain(asked.outline.web)} x {plain(asked.outline.depth)} {asked.length_unit}: {bars}",
        strength,
        f"f'c {plain(asked.concrete.fc)} {stress}, {steel} {plain(asked.steel.fy)} {stress}",
        verdict,
    ]
    lines = [line for fact in facts for line in textwrap.wrap(visible(fact), _CAPTION_LETTERS)]
    return Panel(
        section=asked,
        checked=None if rated is None else rated.checked,
        caption=(_short(asked.mark), *lines),
    )
