"""Where a section lies on its drawing: scale, axis, faces, and how far flanges are drawn."""

from __future__ import annotations

from dataclasses import dataclass

from engine import Flange, Section


@dataclass(frozen=True, slots=True, kw_only=True)
class Sheet:
    """Where the section lies on the drawing.

    `scale` is in px for each in or mm; `axis` the web's centreline, `top` the top face [px];
    `left` and `right` the overhangs drawn at the top and at the bottom [px].
    """

    section: Section
    scale: float
    axis: float
    top: float
    left: dict[str, float]
    right: dict[str, float]

    def x(self, length: float) -> float:
        """Column of a distance from the centreline. [px]"""
        return self.axis + length * self.scale

    def y(self, depth: float) -> float:
        """Row of a distance from the top face. [px]"""
        return self.top + depth * self.scale

    @property
    def web_left(self) -> float:
        """Column of the left face of the web. [px]"""
        return self.x(-self.section.outline.web / 2)

    @property
    def web_right(self) -> float:
        """Column of the right face of the web. [px]"""
        return self.x(self.section.outline.web / 2)

    @property
    def far_left(self) -> float:
        """Column of the leftmost edge drawn. [px]"""
        return self.web_left - max(self.left.values())

    @property
    def far_right(self) -> float:
        """Column of the rightmost edge drawn. [px]"""
        return self.web_right + max(self.right.values())

    @property
    def bottom(self) -> float:
        """Row of the bottom face. [px]"""
        return self.y(self.section.outline.depth)

    def from_tension(self, distance: float) -> float:
        """Row of a distance from the tension face. [px]"""
        depth = self.section.outline.depth
        return self.y(depth - distance if self.section.sagging else distance)

    def from_compression(self, distance: float) -> float:
        """Row of a distance from the compression face. [px]"""
        return self.from_tension(self.section.outline.depth - distance)


def flanges(section: Section) -> list[tuple[str, Flange]]:
    """List the flanges of a section.

    Parameters
    ----------
    section : Section
        Section.

    Returns
    -------
    list of (str, Flange)
        ``top`` or ``bottom``, and the flange.
    """
    outline = section.outline
    pairs = (("top", outline.top), ("bottom", outline.bottom))
    return [(name, flange) for name, flange in pairs if flange is not None]


def overhangs(section: Section, flange: Flange) -> tuple[float, float]:
    """Measure a flange beyond the web.

    Parameters
    ----------
    section : Section
        Section.
    flange : Flange
        One of its flanges.

    Returns
    -------
    tuple of float
        Overhang to the left and to the right. [in or mm]
    """
    beyond = flange.width - section.outline.web
    left = beyond / 2 if flange.left is None else flange.left
    return left, beyond - left


def sheet_of(
    section: Section, room: tuple[float, float], most: float, margin: tuple[float, float]
) -> Sheet:
    """Lay a section out on a drawing.

    Parameters
    ----------
    section : Section
        Section.
    room : tuple of float
        Largest width and height of its web. [px]
    most : float
        Most that is drawn of a flange beyond the web. [px]
    margin : tuple of float
        Left and upper margin. [px]

    Returns
    -------
    Sheet
        Scale and places.
    """
    outline = section.outline
    scale = min(room[0] / outline.web, room[1] / outline.depth)
    left, right = {"": 0.0}, {"": 0.0}
    for name, flange in flanges(section):
        before, after = overhangs(section, flange)
        left[name] = min(before * scale, most)
        right[name] = min(after * scale, most)
    axis = margin[0] + max(left.values()) + outline.web * scale / 2
    return Sheet(section=section, scale=scale, axis=axis, top=margin[1], left=left, right=right)


def corners(sheet: Sheet) -> list[tuple[float, float]]:
    """Corners of the concrete, clockwise from the upper left."""
    outline = sheet.section.outline
    left, right = sheet.web_left, sheet.web_right
    points_right, points_left = [], []
    if outline.top is not None:
        row = sheet.y(outline.top.thickness)
        edge = right + sheet.right["top"]
        points_right += [(edge, sheet.top), (edge, row), (right, row)]
        edge = left - sheet.left["top"]
        points_left += [(edge, sheet.top), (edge, row), (left, row)]
    else:
        points_right.append((right, sheet.top))
        points_left.append((left, sheet.top))
    if outline.bottom is not None:
        row = sheet.y(outline.depth - outline.bottom.thickness)
        edge = right + sheet.right["bottom"]
        points_right += [(right, row), (edge, row), (edge, sheet.bottom)]
        edge = left - sheet.left["bottom"]
        points_left += [(left, row), (edge, row), (edge, sheet.bottom)]
    else:
        points_right.append((right, sheet.bottom))
        points_left.append((left, sheet.bottom))
    return [*points_right, *reversed(points_left)]
