"""Where bars may stop, 9.7.3: how far they run on, what the ends of bars ask for.

Distances u count away from the section where the bars work hardest (midspan, or the face of
a support), so that one set of rules serves both faces and both directions. Between the end
of a bar and its development length the bar counts with the share that it has developed
there (9.7.3.1); strength between two amounts of steel is taken straight, which is below the
true one because strength grows less than steel.
"""

from __future__ import annotations

import numpy as np

from catalogs import Bar
from engine.beams.continuity import continuity_rules
from engine.development_rules import development_rules
from engine.editions import Edition
from engine.outlines import FloatArray

DIAMETERS_BEYOND = 12.0
"""Bars run 12 db past the point where they are no longer needed, 9.7.3.3. [-]"""
SPAN_SHARE_BEYOND = 1.0 / 16.0
"""Share of ln that top bars run past the inflection point, 9.7.3.8.4. [-]"""
SHEAR_AT_CUT = 1.5
"""phi Vn over Vu where bars stop in a tension zone, 9.7.3.5 (a). [-]"""
SHEAR_AT_LIGHT_CUT = 4.0 / 3.0
"""The same where the other bars are twice what is required, 9.7.3.5 (b). [-]"""
LIGHT_CUT = 2.0
"""Area of the other bars over the required one in 9.7.3.5 (b). [-]"""


def extension(d: float, diameter: float) -> float:
    """How far a bar runs past the point where it is no longer needed.

    Parameters
    ----------
    d : float
        Effective depth. [in or mm]
    diameter : float
        Bar diameter db. [in or mm]

    Returns
    -------
    float
        max(d, 12 db), 9.7.3.3. [in or mm]
    """
    return max(d, DIAMETERS_BEYOND * diameter)


def extension_past_inflection(d: float, diameter: float, ln: float) -> float:
    """How far a third of the top bars runs past the inflection point.

    Parameters
    ----------
    d, diameter, ln : float
        Effective depth, bar diameter db and clear span. [in or mm]

    Returns
    -------
    float
        max(d, 12 db, ln/16), 9.7.3.8.4. [in or mm]
    """
    return max(extension(d, diameter), SPAN_SHARE_BEYOND * ln)


def last_above(u: FloatArray, demand: FloatArray, level: float) -> float:
    """Largest distance at which a demand exceeds a level.

    Parameters
    ----------
    u : ndarray, shape (n,)
        Distances, ascending. [in or mm]
    demand : ndarray, shape (n,)
        Demand at them, straight in between. [lbf*in or N*mm]
    level : float
        Level. [lbf*in or N*mm]

    Returns
    -------
    float
        The crossing; the last distance if the demand never falls below, and minus infinity if
        it never exceeds. [in or mm]
    """
    above = np.flatnonzero(demand > level)
    if not above.size:
        return -np.inf
    last = int(above[-1])
    if last == len(u) - 1:
        return float(u[-1])
    fall = (demand[last] - level) / (demand[last] - demand[last + 1])
    return float(u[last] + fall * (u[last + 1] - u[last]))


def reach(
    u: FloatArray,
    demand: FloatArray,
    *,
    strong: float,
    weak: float,
    beyond: float,
    development: float,
) -> float:
    """Least distance to which bars have to run so that the others may carry on alone.

    Parameters
    ----------
    u, demand : ndarray, shape (n,)
        Distances and moments in size. [in or mm], [lbf*in or N*mm]
    strong, weak : float
        Design strength with all bars and with those that run on. [lbf*in or N*mm]
    beyond : float
        Extension of 9.7.3.3. [in or mm]
    development : float
        ld of the bars that stop. [in or mm]

    Returns
    -------
    float
        Distance of the end of the bars; zero if the others are enough everywhere, infinite if
        all together are not. [in or mm]
    """
    point = last_above(u, demand, weak)
    if point == -np.inf:
        return 0.0
    if strong <= weak or float(demand.max()) > strong * (1 + 1e-9):
        return float("inf")
    share = (demand - weak) / (strong - weak)
    ramp = u + development * np.minimum(share, 1.0)
    return max(point + beyond, float(ramp[share > 0.0].max()))


def developed_everywhere(
    u: FloatArray, demand: FloatArray, *, strength: float, end: float, development: float
) -> bool:
    """Whether bars that end somewhere carry the demand on the way to their end.

    Parameters
    ----------
    u, demand : ndarray, shape (n,)
        Distances and moments in size that these bars have to carry alone, zero where others
        help. [in or mm], [lbf*in or N*mm]
    strength : float
        Design strength of the bars, developed. [lbf*in or N*mm]
    end : float
        Distance of their end. [in or mm]
    development : float
        Distance from the end at which they are developed. [in or mm]

    Returns
    -------
    bool
        Whether the demand is nowhere above what is developed.
    """
    share = np.clip((end - u) / development, 0.0, 1.0)
    return bool((demand <= strength * share * (1 + 1e-9) + 1e-6 * strength).all())


def shear_factor_at_cut(
    edition: Edition, bar: Bar, moment: float, strength_of_others: float
) -> float:
    """Phi Vn over Vu that the end of bars in a tension zone asks for.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    bar : Bar
        Largest bar that stops.
    moment : float
        Factored moment at the end, in size. [lbf*in or N*mm]
    strength_of_others : float
        phi Mn of the bars that run on. [lbf*in or N*mm]

    Returns
    -------
    float
        4/3 where 9.7.3.5 (b) holds, else the 3/2 of (a). Half of the area has at least half of
        the strength, so twice the moment within the strength of the others is on the safe side.
        [-]
    """
    small = bar.diameter <= development_rules(edition).largest_lapped
    if small and LIGHT_CUT * moment <= strength_of_others:
        return SHEAR_AT_LIGHT_CUT
    return SHEAR_AT_CUT


def longest_at_inflection(
    edition: Edition, *, Mn: float, Vu: float, beyond: float, compressed: bool
) -> float:
    """Largest development length of sagging bars at a simple support or inflection point.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    Mn : float
        Nominal strength of the bars there. [lbf*in or N*mm]
    Vu : float
        Factored shear there. [lbf or N]
    beyond : float
        la: how far the bars run past the support's centre or the inflection point, there not
        above max(d, 12 db). [in or mm]
    compressed : bool
        Whether a reaction compresses the ends of the bars.

    Returns
    -------
    float
        1.3 Mn/Vu + la or Mn/Vu + la, 9.7.3.8.3; infinite without shear. [in or mm]
    """
    if Vu <= 0.0:
        return float("inf")
    rules = continuity_rules(edition)
    return (rules.compressed_end if compressed else 1.0) * Mn / Vu + beyond
