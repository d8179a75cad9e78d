"""Minimum flexural steel, 9.6.1."""

from __future__ import annotations

import math

from engine.outlines import FloatArray
from engine.sections import Section

EXEMPTION = 0.75
"""9.6.1.3: As is at least 4/3 of what analysis asks for, that is, 3/4 of it is enough. [-]"""


def web_for_minimum(section: Section) -> float:
    """Width bw of 9.6.1.2.

    Parameters
    ----------
    section : Section
        Section with its demand.

    Returns
    -------
    float
        The web's width or, for a statically determinate beam with its flange in tension, the
        lesser of the flange's and twice the web's. [in or mm]
    """
    web = section.outline.web
    flange = section.profile.tension_width
    if section.statically_determinate and flange > web:
        return min(flange, 2.0 * web)
    return web


def minimum_area(section: Section, d: FloatArray) -> FloatArray:
    """As,min of 9.6.1.2.

    Parameters
    ----------
    section : Section
        Section with its demand.
    d : ndarray, shape (n,)
        Effective depth: compression face to the centroid of the tension bars. [in or mm]

    Returns
    -------
    ndarray, shape (n,)
        max(3 sqrt(f'c), 200) bw d/fy in ACI 318; max(0.25 sqrt(f'c), 1.4) bw d/fy in
        ACI 318M; fy not above 80 ksi (550 MPa) in the 2019 editions. [in^2 or mm^2]
    """
    edition = section.edition
    fy = min(section.steel.fy, edition.minimum_steel_yield_cap)
    stress = max(
        edition.minimum_steel_root * math.sqrt(section.concrete.fc), edition.minimum_steel_floor
    )
    return stress * web_for_minimum(section) * d / fy
