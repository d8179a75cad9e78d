"""Shapes of a cross-section at full size: concrete, stirrup and bars, for drawings to scale.

Coordinates: x to the right of the web's centreline, y upwards from the bottom face, both in
the section's own unit.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass

from engine import CheckedLayout, Layout, Outline, Placement, Section, place
from engine.placement import PlacedLayer

Point = tuple[float, float]
Bend = tuple[float, float, float]
"""A corner of a path: x, y, and the tangent of a quarter of the arc that starts there."""

_QUARTER_TURN = math.tan(math.pi / 8.0)
_SAME = 1e-9  # points closer than this are one [in or mm]


@dataclass(frozen=True, slots=True, kw_only=True)
class DrawnLayer:
    """A layer of bars where a drawing has it.

    Attributes
    ----------
    name : str
        ``layer 1`` or ``opposite``, ``opposite, layer 2`` where there are several.
    label : str
        Bars of the layer: ``2 #9 + 2 #7``.
    placed : PlacedLayer
        Positions across and diameters.
    at_bottom : bool
        Whether it lies at the bottom face.
    face : float
        Height of its face above the bottom face. [in or mm]
    centroid : float
        Height of the bars' centroid above the bottom face. [in or mm]
    """

    name: str
    label: str
    placed: PlacedLayer
    at_bottom: bool
    face: float
    centroid: float

    @property
    def bars(self) -> Iterator[tuple[Point, float]]:
        """Centre and radius of each bar, left to right. [in or mm]"""
        inwards = 1.0 if self.at_bottom else -1.0
        for x, diameter in zip(self.placed.x, self.placed.diameters, strict=True):
            yield (x, self.face + inwards * (self.placed.bottom + diameter / 2)), diameter / 2


def concrete_corners(outline: Outline) -> list[Point]:
    """Corners of the concrete, counter-clockwise from the lower left one.

    Parameters
    ----------
    outline : Outline
        Rectangle, T, L, inverted T or I.

    Returns
    -------
    list of (float, float)
        Corners only: no point lies on a straight edge. [in or mm]
    """
    half, depth = outline.web / 2, outline.depth
    left: list[Point] = []
    right: list[Point] = []
    if outline.bottom is not None:
        before, beyond = overhangs(outline, "bottom")
        height = outline.bottom.thickness
        left += [(-half - before, 0.0), (-half - before, height), (-half, height)]
        right += [(half + beyond, 0.0), (half + beyond, height), (half, height)]
    else:
        left.append((-half, 0.0))
        right.append((half, 0.0))
    if outline.top is not None:
        before, beyond = overhangs(outline, "top")
        height = depth - outline.top.thickness
        left += [(-half, height), (-half - before, height), (-half - before, depth)]
        right += [(half, height), (half + beyond, height), (half + beyond, depth)]
    else:
        left.append((-half, depth))
        right.append((half, depth))
    return _corners([left[0], *right, *reversed(left[1:])])


def overhangs(outline: Outline, name: str) -> tuple[float, float]:
    """Overhangs of a flange beyond the web.

    Parameters
    ----------
    outline : Outline
        Outline of the concrete.
    name : str
        ``top`` or ``bottom``.

    Returns
    -------
    tuple of float
        Left and right; zeros where there is no such flange. [in or mm]
    """
    flange = outline.top if name == "top" else outline.bottom
    if flange is None:
        return 0.0, 0.0
    beyond = flange.width - outline.web
    left = beyond / 2 if flange.left is None else flange.left
    return left, max(0.0, beyond - left)


def _corners(points: list[Point]) -> list[Point]:
    """Drop repeated points and those on a straight edge; edges are level or upright."""
    distinct = [
        point
        for before, point in zip([points[-1], *points[:-1]], points, strict=True)
        if math.dist(before, point) > _SAME
    ]
    before_each, after_each = [distinct[-1], *distinct[:-1]], [*distinct[1:], distinct[0]]
    kept = []
    for before, point, after in zip(before_each, distinct, after_each, strict=True):
        straight = any(
            abs(point[axis] - before[axis]) <= _SAME and abs(after[axis] - point[axis]) <= _SAME
            for axis in (0, 1)
        )
        if not straight:
            kept.append(point)
    return kept


def stirrup_bends(section: Section, *, outside: bool) -> list[Bend]:
    """Path of a stirrup's outer or inner face, counter-clockwise, closed.

    Parameters
    ----------
    section : Section
        Section with cover and stirrup.
    outside : bool
        Outer face instead of inner.

    Returns
    -------
    list of (float, float, float)
        Points and the bulge of what follows them: a quarter circle of the bend's radius, or a
        straight line. Where legs are closer than two radii the radius is half their distance.
        [in or mm]
    """
    inset = section.cover if outside else section.bar_face
    half = section.outline.web / 2 - inset
    low, high = inset, section.outline.depth - inset
    # The radius that the inner face has room for decides; the outer face runs parallel to it.
    room = min(section.inner_width, section.outline.depth - 2 * section.bar_face) / 2
    radius = min(section.bend_radius, room) + (section.stirrup.diameter if outside else 0.0)
    path = [
        (-half + radius, low, 0.0),
        (half - radius, low, _QUARTER_TURN),
        (half, low + radius, 0.0),
        (half, high - radius, _QUARTER_TURN),
        (half - radius, high, 0.0),
        (-half + radius, high, _QUARTER_TURN),
        (-half, high - radius, 0.0),
        (-half, low + radius, _QUARTER_TURN),
    ]
    # A straight part of no length, where the bends meet, is left out.
    following = [*path[1:], path[0]]
    return [
        point
        for point, after in zip(path, following, strict=True)
        if point[2] != 0.0 or math.dist(point[:2], after[:2]) > _SAME
    ]


def drawn_layers(checked: CheckedLayout) -> list[DrawnLayer]:
    """Layers of both faces where a drawing has them.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.

    Returns
    -------
    list of DrawnLayer
        Layers at the tension face from the outermost inwards, then those opposite.
    """
    section = checked.section
    found = _at_face(
        section,
        checked.placement,
        checked.layout,
        [f"layer {number}" for number in range(1, len(checked.layout.layers) + 1)],
        at_bottom=section.sagging,
    )
    if section.opposite is not None:
        count = len(section.opposite.layers)
        names = [f"opposite, layer {number}" for number in range(1, count + 1)]
        found += _at_face(
            section,
            place(section.opposite_face(), section.opposite),
            section.opposite,
            names if count > 1 else ["opposite"],
            at_bottom=not section.sagging,
        )
    return found


def _at_face(
    section: Section, placement: Placement, layout: Layout, names: list[str], *, at_bottom: bool
) -> list[DrawnLayer]:
    face, inwards = (0.0, 1.0) if at_bottom else (section.outline.depth, -1.0)
    layers = []
    for name, layer, placed in zip(names, layout.layers, placement.layers, strict=True):
        area = sum(bar.area * count for bar, count in layer.groups)
        first = sum(bar.area * count * bar.diameter / 2 for bar, count in layer.groups)
        layers.append(
            DrawnLayer(
                name=name,
                label=layer.label,
                placed=placed,
                at_bottom=at_bottom,
                face=face,
                centroid=face + inwards * (placed.bottom + first / area),
            )
        )
    return layers
