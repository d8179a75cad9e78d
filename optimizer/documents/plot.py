"""Design strength against steel mass of layouts, as a scalable drawing."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from xml.etree import ElementTree as ET

from engine import Section
from engine.units import plain
from optimizer.documents import svg_elements as ink
from optimizer.documents.wording import Figures
from optimizer.options import SectionOptions
from optimizer.results import RankedSection, RatedLayout

_SIZE = (400.0, 270.0)
_PLOT = (58.0, 14.0, 386.0, 222.0)  # left, top, right and bottom of the frame [px]
_MARK = 4.5
_LARGER = {"mark best": 1.0, "mark rest": -1.5}  # beside an ordinary mark [px]
_STEPS = (1.0, 2.0, 2.5, 5.0, 10.0)


@dataclass(frozen=True, slots=True, kw_only=True)
class _Axis:
    """One axis: values at its ends and where they lie. [trade's unit], [px]"""

    low: float
    high: float
    start: float
    end: float

    def at(self, value: float) -> float:
        """Place of a value. [px]"""
        share = (value - self.low) / (self.high - self.low)
        return self.start + share * (self.end - self.start)


def ticks(low: float, high: float, about: int = 5) -> list[float]:
    """Round values within a range.

    Parameters
    ----------
    low, high : float
        Ends of the range. [any unit]
    about : int
        Number of values aimed at.

    Returns
    -------
    list of float
        Multiples of 1, 2, 2.5 or 5 times a power of ten. [same unit]
    """
    raw = (high - low) / about
    power = 10.0 ** math.floor(math.log10(raw))
    step = next(power * size for size in _STEPS if power * size >= raw * (1 - 1e-9))
    first, last = math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9)
    return [index * step for index in range(first, last + 1)]


def _range(values: Sequence[float]) -> tuple[float, float]:
    low, high = min(values), max(values)
    margin = 0.1 * (high - low) or 0.1 * abs(high) or 1.0
    return low - margin, high + margin


@dataclass(frozen=True, slots=True, kw_only=True)
class _Point:
    """One layout in a plot: mass, strength [trade's units], name if any, class of its mark."""

    mass: float
    strength: float
    label: str
    kind: str


def strength_plot(result: RankedSection, labels: Sequence[str]) -> str:
    """Plot the layouts of a ranked section.

    Parameters
    ----------
    result : RankedSection
        Section with a short list.
    labels : sequence of str
        Name of each layout in the list, as its table has them.

    Returns
    -------
    str
        An ``svg`` element: a mark for each layout, the line of Mu and that of the mass floor.
    """
    points = [
        _point(item, label, "mark best" if item.rank == 1 else "mark")
        for item, label in zip(result.layouts, labels, strict=True)
    ]
    title = "Design strength against steel mass of the listed layouts"
    return _plot(title, result.section, points, result.mass_floor)


def options_plot(result: SectionOptions) -> str:
    """Plot the drawn layout of a section and every layout that no other beats.

    Parameters
    ----------
    result : SectionOptions
        Options of the section.

    Returns
    -------
    str
        An ``svg`` element: small marks for the trade-off set, those of the chosen options full
        and with their numbers, a diamond for the drawn layout, the line of Mu.
    """
    points = [_point(item.rated, "", "mark rest") for item in result.trade_off if not item.reasons]
    points += [_point(item.rated, str(item.number), "mark best") for item in result.chosen]
    points.append(_point(result.drawn, "drawn", "mark drawn"))
    title = "Design strength against steel mass of the drawn layout and the options"
    return _plot(title, result.problem.section, points, None)


def _point(rated: RatedLayout, label: str, kind: str) -> _Point:
    checked = rated.checked
    strength = checked.section.edition.system.to_trade("moment", checked.phi_Mn)
    return _Point(mass=checked.layout.mass, strength=strength, label=label, kind=kind)


def _plot(title: str, section: Section, points: Sequence[_Point], mass_floor: float | None) -> str:
    figures = Figures(section.edition)
    demand = figures.system.to_trade("moment", section.demand)
    floor = [] if mass_floor is None else [mass_floor]
    left, top, right, bottom = _PLOT
    low, high = _range([point.mass for point in points] + floor)
    x = _Axis(low=low, high=high, start=left, end=right)
    low, high = _range([point.strength for point in points] + [demand])
    y = _Axis(low=low, high=high, start=bottom, end=top)
    root = ink.drawing(*_SIZE, title, "plot")
    _axes(root, x, y, figures)
    places = [(x.at(point.mass), y.at(point.strength)) for point in points]
    taken = [(px - 6.0, py - 6.0, px + 6.0, py + 6.0) for px, py in places]
    ink.line(root, "demand", (left, y.at(demand)), (right, y.at(demand)))
    for value in floor:
        ink.line(root, "floor", (x.at(value), top), (x.at(value), bottom))
        text = f"mass floor {value:.2f}"
        ink.words(
            root, "note strong", (x.at(value) - 5.0, top + 6.0), text, anchor="end", turned=True
        )
        taken.append((x.at(value) - 18.0, top, x.at(value) + 2.0, top + 8.0 + 7.5 * len(text)))
    box = _beside_line(f"Mu {demand:.1f}", y.at(demand), taken)
    ink.words(root, "note strong", (box[0], box[3] - 3.0), f"Mu {demand:.1f}")
    taken += [box, (left, y.at(demand) - 2.0, right, y.at(demand) + 2.0)]
    for point, place in zip(points, places, strict=True):
        _mark(root, point.kind, place)
    named = [(point.label, at) for point, at in zip(points, places, strict=True) if point.label]
    for label, place in _joined(named):
        box, anchor = _free(label, place, taken)
        taken.append(box)
        column = box[0] if anchor == "start" else box[2] if anchor == "end" else place[0]
        ink.words(root, "note strong", (column, box[3] - 3.0), label, anchor=anchor)
    return ink.text_of(root)


def _axes(root: ET.Element, x: _Axis, y: _Axis, figures: Figures) -> None:
    """Grid, frame and what the axes are."""
    left, top, right, bottom = _PLOT
    for value in ticks(x.low, x.high):
        ink.line(root, "grid", (x.at(value), top), (x.at(value), bottom))
        ink.words(root, "note", (x.at(value), bottom + 16.0), plain(value), anchor="middle")
    for value in ticks(y.low, y.high):
        ink.line(root, "grid", (left, y.at(value)), (right, y.at(value)))
        ink.words(root, "note", (left - 6.0, y.at(value) + 4.0), plain(value), anchor="end")
    ink.box(root, "frame", (left, top), (right - left, bottom - top))
    mass = f"steel mass, {figures.unit('mass_per_length')}"
    ink.words(root, "note", ((left + right) / 2, bottom + 36.0), mass, anchor="middle")
    moment = f"φMn, {figures.unit('moment')}"
    ink.words(root, "note", (14.0, (top + bottom) / 2), moment, anchor="middle", turned=True)


def _mark(root: ET.Element, kind: str, place: tuple[float, float]) -> None:
    x, y = place
    if kind == "mark drawn":
        reach = _MARK + 2.5
        ink.polygon(root, kind, [(x, y - reach), (x + reach, y), (x, y + reach), (x - reach, y)])
    else:
        ink.circle(root, kind, place, _MARK + _LARGER.get(kind, 0.0))


def _joined(
    named: Sequence[tuple[str, tuple[float, float]]],
) -> list[tuple[str, tuple[float, float]]]:
    """Labels of layouts that lie on one another become one."""
    found: dict[tuple[float, float], list[str]] = {}
    for label, (x, y) in named:
        near = next((at for at in found if abs(at[0] - x) < 2.0 and abs(at[1] - y) < 2.0), (x, y))
        found.setdefault(near, []).append(label)
    return [(", ".join(names), place) for place, names in found.items()]


_Box = tuple[float, float, float, float]


def _free(label: str, place: tuple[float, float], taken: Sequence[_Box]) -> tuple[_Box, str]:
    """The place around a mark that covers least of what stands there already."""
    x, y = place
    width, height = 7.5 * len(label), 13.0
    choices: list[tuple[_Box, str]] = []
    for reach in (8.0, 16.0):
        choices += [
            ((x + reach, y - 6.0, x + reach + width, y + 7.0), "start"),
            ((x - width / 2, y - reach - height, x + width / 2, y - reach), "middle"),
            ((x - width / 2, y + reach, x + width / 2, y + reach + height), "middle"),
            ((x - reach - width, y - 6.0, x - reach, y + 7.0), "end"),
        ]
    return min(choices, key=lambda choice: _covered(choice[0], taken))


def _beside_line(text: str, row: float, taken: Sequence[_Box]) -> _Box:
    """The place along a level line, above or below it, that covers least."""
    left, _, right, _ = _PLOT
    width = 7.5 * len(text)
    choices = [
        (column, upper, column + width, upper + 14.0)
        for upper in (row + 2.0, row - 16.0)
        for column in (right - width - 4.0, left + 24.0, (left + right - width) / 2)
    ]
    return min(choices, key=lambda choice: _covered(choice, taken))


def _covered(box: _Box, taken: Sequence[_Box]) -> float:
    """Area that a box shares with others, or has outside the frame. [px^2]"""
    left, top, right, bottom = _PLOT
    inside = max(0.0, min(box[2], right) - max(box[0], left))
    inside *= max(0.0, min(box[3], bottom) - max(box[1], top))
    shared = (box[2] - box[0]) * (box[3] - box[1]) - inside
    for other in taken:
        across = max(0.0, min(box[2], other[2]) - max(box[0], other[0]))
        shared += across * max(0.0, min(box[3], other[3]) - max(box[1], other[1]))
    return shared
