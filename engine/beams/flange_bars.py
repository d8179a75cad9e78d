"""Bars in the outer parts of a flange in tension, ACI 318, 24.3.4 with 24.4.3."""

from __future__ import annotations

from dataclasses import dataclass

from engine.crack_checks import shrinkage_ratio
from engine.sections import Section

_SPAN_PER_WIDTH = 10.0  # bars of the web's layout are spread over ln/10 at most [-]
_THICKNESSES = 5.0  # largest spacing over the slab's thickness, 24.4.3.3 [-]
_LARGEST_SPACING = {"us": 18.0, "si": 450.0}  # [in or mm]


@dataclass(frozen=True, slots=True, kw_only=True)
class OuterFlange:
    """What each outer part of a flange in tension needs.

    Attributes
    ----------
    width : float
        Width of the part on one side. [in or mm]
    area : float
        Area of its bars. [in^2 or mm^2]
    spacing : float
        Largest spacing of its bars. [in or mm]
    """

    width: float
    area: float
    spacing: float


def outer_flange(section: Section, ln: float) -> OuterFlange | None:
    """Outer part of a top flange in tension, one on each side.

    Parameters
    ----------
    section : Section
        Section with its outline and steel.
    ln : float
        Clear span. [in or mm]

    Returns
    -------
    OuterFlange or None
        None without a flange wider than ln/10, or where the web is as wide. The area is that of
        shrinkage and temperature steel, which the 2014 editions leave open ("some").
    """
    top = section.outline.top
    inner = max(ln / _SPAN_PER_WIDTH, section.outline.web)
    if top is None or top.width <= inner:
        return None
    width = (top.width - inner) / 2.0
    limit = _LARGEST_SPACING[section.edition.units]
    return OuterFlange(
        width=width,
        area=shrinkage_ratio(section) * width * top.thickness,
        spacing=min(_THICKNESSES * top.thickness, limit),
    )
