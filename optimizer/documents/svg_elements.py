"""Shapes of scalable drawings, built as an element tree so that every text is escaped."""

from __future__ import annotations

from collections.abc import Sequence
from xml.etree import ElementTree as ET

SVG = "http://www.w3.org/2000/svg"
LETTER = 6.9
"""Width that is set aside for a letter of a note. [px]"""


def number(value: float) -> str:
    """Write a coordinate.

    Parameters
    ----------
    value : float
        Coordinate. [px]

    Returns
    -------
    str
        To a thousandth, without trailing zeros.
    """
    text = f"{value:.3f}".rstrip("0").rstrip(".")
    return "0" if text in ("", "-0") else text


def drawing(width: float, height: float, title: str, kind: str) -> ET.Element:
    """Start a drawing.

    Parameters
    ----------
    width, height : float
        Its size. [px]
    title : str
        What it shows, for who cannot see it.
    kind : str
        Class for the style sheet.

    Returns
    -------
    Element
        The root.
    """
    root = ET.Element(
        "svg",
        {
            "xmlns": SVG,
            "class": kind,
            "viewBox": f"0 0 {number(width)} {number(height)}",
            "width": number(width),
            "height": number(height),
            "role": "img",
            "aria-label": title,
        },
    )
    ET.SubElement(root, "title").text = title
    return root


def group(parent: ET.Element, kind: str, **data: str) -> ET.Element:
    """Add a group; `data` become attributes ``data-...``."""
    given = {f"data-{name.replace('_', '-')}": value for name, value in data.items()}
    return ET.SubElement(parent, "g", {"class": kind, **given})


def line(parent: ET.Element, kind: str, *points: tuple[float, float]) -> None:
    """Add a line through points."""
    path = " ".join(f"{number(x)},{number(y)}" for x, y in points)
    ET.SubElement(parent, "polyline", {"class": kind, "points": path})


def polygon(parent: ET.Element, kind: str, points: Sequence[tuple[float, float]]) -> None:
    """Add a closed outline."""
    path = " ".join(f"{number(x)},{number(y)}" for x, y in points)
    ET.SubElement(parent, "polygon", {"class": kind, "points": path})


def box(
    parent: ET.Element,
    kind: str,
    corner: tuple[float, float],
    size: tuple[float, float],
    *,
    radius: float = 0.0,
    stroke: float | None = None,
) -> None:
    """Add a rectangle by its upper left corner and its size."""
    attributes = {
        "class": kind,
        "x": number(corner[0]),
        "y": number(corner[1]),
        "width": number(max(size[0], 0.0)),
        "height": number(max(size[1], 0.0)),
    }
    if radius:
        attributes["rx"] = number(radius)
    if stroke is not None:
        attributes["stroke-width"] = number(stroke)
    ET.SubElement(parent, "rect", attributes)


def circle(parent: ET.Element, kind: str, centre: tuple[float, float], radius: float) -> None:
    """Add a circle."""
    x, y = centre
    ET.SubElement(
        parent, "circle", {"class": kind, "cx": number(x), "cy": number(y), "r": number(radius)}
    )


def words(
    parent: ET.Element,
    kind: str,
    at: tuple[float, float],
    text: str,
    *,
    anchor: str = "start",
    turned: bool = False,
) -> None:
    """Add a text on its base line; a turned one reads upwards."""
    attributes = {
        "class": kind,
        "x": number(at[0]),
        "y": number(at[1]),
        "text-anchor": anchor,
    }
    if turned:
        attributes["transform"] = f"rotate(-90 {number(at[0])} {number(at[1])})"
    ET.SubElement(parent, "text", attributes).text = text


def text_of(root: ET.Element) -> str:
    """Write a drawing as text for a page.

    Parameters
    ----------
    root : Element
        The drawing.

    Returns
    -------
    str
        One element, every text escaped.
    """
    return ET.tostring(root, encoding="unicode")
