"""Linear conditions on the counts of a family that every layout which passes meets.

Every number here errs on the side that loses no layout; the engine decides exactly about
each one found.

**Strength.** With T_i the tension of a group of bars at depth d_i, D_i the concrete it
displaces (counted as tension, at depth e_i) and F'_j the compression of counted bars
opposite at d'_j, equilibrium and moment about the compression face read

    C = sum T_i + sum D_i - sum F'_j,    Mn = sum T_i d_i + sum D_i e_i - sum F'_j d'_j - G(C)

where G(C) is the first moment of the block. dG/dC is the depth a of the block, which grows
with C, so G is convex for every outline and lies above its tangent at any a0:

    Mn <= sum T_i (d_i - a0) + sum D_i (e_i - a0) + sum F'_j (a0 - d'_j) + a0 C(a0) - G(a0).

A layout that passes has eps_t at or above its limit, so c <= c_lim and a <= a_lim with the
greatest dt of the family. Bars below c_lim whose surface lies below a_lim are in tension and
displace nothing: T_i <= fy A_i, and d_i - a0 >= 0 for a0 <= a_lim, so the term is at most
fy A_i (d_i - a0). Any other bar gives at most fy A_i |d_i - a0| + 0.85 f'c A_i (|d_i - a0| +
db/2). F'_j grows with c, so it lies between -fy A'_j and its value at c_lim. With
Mn >= Mu/0.9 this is a linear condition on the counts for each a0.

**Ductility.** At c <= c_lim every T_i is at least its value at c_lim, and the compression at
most that at c_lim; equilibrium makes the first sum not exceed the second.

**Minimum steel.** As is at least the lesser of 9.6.1.2 at the least d of the family and
4/3 of what infinitely divisible steel at the greatest depth would need.

**Crack control** without Ms has one limit s; the average spacing of layer 1 is not larger
than its largest, so (n - 1) s covers the distance between its corner bars.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from catalogs import Bar
from engine import Section, place
from engine.assessment import ROUNDING
from engine.materials import EPS_CU
from engine.minimum_steel import minimum_area
from engine.outlines import FloatArray
from engine.strength import steel_stress
from engine.strength_reduction import PHI_TENSION, least_strain

_GRID = 600  # depths of the block at which it is tabulated once for a section
_TANGENTS = 8
SLACK = 1e-7
"""Relative slack that keeps rounding from turning a bound into a cut. [-]"""


@dataclass(frozen=True, slots=True)
class Conditions:
    """Conditions sum(coefficients * counts) >= bounds.

    Attributes
    ----------
    coefficients : ndarray, shape (m, layers, sizes)
        Weight of one bar of each size in each layer.
    bounds : ndarray, shape (m,)
        Right sides.
    """

    coefficients: FloatArray
    bounds: FloatArray


@dataclass(frozen=True, kw_only=True)
class Envelope:
    """Figures of a section that all its families share.

    Attributes
    ----------
    section : Section
        Section with its demand.
    nominal_demand : float
        Mu/0.9: least nominal moment of a layout that passes. [lbf*in or N*mm]
    strain_ratio : float
        c/dt at the least strain permitted. [-]
    opposite : tuple of (float, float)
        Area and depth of each counted group of bars opposite. [in^2 or mm^2], [in or mm]
    block_depth, block_force, block_moment : ndarray
        Depths a, and C and G there. [in or mm], [lbf or N], [lbf*in or N*mm]
    """

    section: Section
    nominal_demand: float
    strain_ratio: float
    opposite: tuple[tuple[float, float], ...]
    block_depth: FloatArray
    block_force: FloatArray
    block_moment: FloatArray

    @cached_property
    def exempt_area(self) -> float:
        """Least area that 9.6.1.3 can exempt: 4/3 of the least that strength needs, with steel
        as deep as its surface may be. [in^2 or mm^2]
        """
        section = self.section
        return 4.0 / 3.0 * floor_area(self, section.outline.depth - section.bar_face)


def envelope(section: Section) -> Envelope:
    """Tabulate the compression block of a section.

    Parameters
    ----------
    section : Section
        Section with its demand.

    Returns
    -------
    Envelope
        Figures shared by its families.
    """
    strain = least_strain(section.steel, tension_controlled=section.tension_controlled)
    ratio = EPS_CU / (EPS_CU + strain * (1 - ROUNDING))
    deepest = section.concrete.beta1 * ratio * section.outline.depth
    a = np.linspace(0.0, deepest, _GRID)
    profile, block = section.profile, section.concrete.block_stress
    return Envelope(
        section=section,
        nominal_demand=section.demand / PHI_TENSION * (1 - SLACK),
        strain_ratio=ratio,
        opposite=_counted_opposite(section),
        block_depth=a,
        block_force=block * profile.area_above(a),
        block_moment=block * profile.moment_above(a),
    )


def _counted_opposite(section: Section) -> tuple[tuple[float, float], ...]:
    if section.opposite is None or not section.count_opposite:
        return ()
    face = place(section.opposite_face(), section.opposite)
    return tuple(
        (bar.area * count, placed.bottom + bar.diameter / 2)
        for layer, placed in zip(section.opposite.layers, face.layers, strict=True)
        for bar, count in layer.groups
    )


def floor_area(shared: Envelope, depth: float) -> float:
    """Area that infinitely divisible steel at one depth needs, never more than the truth.

    Parameters
    ----------
    shared : Envelope
        Figures of the section.
    depth : float
        Depth of the steel. [in or mm]

    Returns
    -------
    float
        Area; infinite where no section ductile enough at that depth is strong enough.
        [in^2 or mm^2]
    """
    fy = shared.section.steel.fy
    a0 = shared.block_depth
    constant = a0 * shared.block_force - shared.block_moment
    constant = constant + _opposite_help(shared, a0, shared.strain_ratio * depth)
    # Each tangent gives a lower bound of the area; the best of them is kept.
    useful = depth - a0 > 1e-6 * depth
    needed = (shared.nominal_demand - constant[useful]) / (fy * (depth - a0[useful]))
    area = max(0.0, float(needed.max()))
    return area if fy * area <= _balanced_force(shared, depth) * (1 + SLACK) else math.inf


def _balanced_force(shared: Envelope, dt: float) -> float:
    """Most tension that the compression zone balances at the strain limit."""
    section = shared.section
    c = shared.strain_ratio * dt
    a = np.array([min(section.concrete.beta1 * c, section.outline.depth)])
    force = section.concrete.block_stress * float(section.profile.area_above(a)[0])
    return force + sum(
        max(0.0, -area * _stress(section, depth, c)) for area, depth in shared.opposite
    )


def _stress(section: Section, depth: float, c: float) -> float:
    return float(steel_stress(section.steel, np.array(depth), np.array(c)))


def _opposite_help(shared: Envelope, a0: FloatArray, c: float) -> FloatArray:
    """Most that counted bars opposite add to each tangent: F'_j (a0 - d'_j) at its greatest."""
    total = np.zeros_like(a0)
    for area, depth in shared.opposite:
        # Compression up to its value at c_lim where that helps, tension up to yield where
        # the bar lies deeper than a0.
        most = -area * _stress(shared.section, depth, c)
        least = -area * shared.section.steel.fy
        total += np.maximum(most * (a0 - depth), least * (a0 - depth))
    return total


def greatest_depths(section: Section, bars: tuple[Bar, ...], layers: int) -> FloatArray:
    """Greatest depth of each size in each layer.

    Parameters
    ----------
    section : Section
        Section.
    bars : tuple of Bar
        Largest and, if any, second size of the family.
    layers : int
        Number of layers.

    Returns
    -------
    ndarray, shape (layers, sizes)
        Depths. Layer 1 holds the largest size and rises by it; a later layer rises at least
        by the smallest. [in or mm]
    """
    diameters = np.array([bar.diameter for bar in bars])
    rises = np.array([bars[0].diameter] + [bars[-1].diameter] * (layers - 1)) + section.layer_gap
    bottoms = section.bar_face + np.concatenate(([0.0], np.cumsum(rises)[:-1]))
    return section.outline.depth - bottoms[:, None] - diameters / 2


def _least_depths(bars: tuple[Bar, ...], greatest: FloatArray) -> FloatArray:
    """Depths when every layer above layer 1 rises by the larger size."""
    steps = np.maximum(0, np.arange(len(greatest)) - 1)
    return greatest - steps[:, None] * (bars[0].diameter - bars[-1].diameter)


def strength(shared: Envelope, bars: tuple[Bar, ...], layers: int) -> Conditions:
    """Tangents of the strength condition.

    Parameters
    ----------
    shared : Envelope
        Figures of the section.
    bars : tuple of Bar
        Largest and, if any, second size of the family.
    layers : int
        Number of layers.

    Returns
    -------
    Conditions
        A few conditions with non-negative coefficients.
    """
    section = shared.section
    fy, block = section.steel.fy, section.concrete.block_stress
    areas = np.array([bar.area for bar in bars])
    radii = np.array([bar.diameter / 2 for bar in bars])
    depth = greatest_depths(section, bars, layers)
    least = _least_depths(bars, depth)
    c_limit = shared.strain_ratio * float(depth[0].max())
    a_limit = min(section.concrete.beta1 * c_limit, section.outline.depth)
    points = _tangent_points(shared, float(depth.max()), float(least.min()), a_limit)
    a0 = shared.block_depth[points]
    arm = np.maximum(np.abs(depth - a0[:, None, None]), np.abs(least - a0[:, None, None]))
    in_tension = (least >= c_limit) & (least - radii >= a_limit)
    other = fy * arm + block * (arm + radii)
    constant = a0 * shared.block_force[points] - shared.block_moment[points]
    constant = constant + _opposite_help(shared, a0, c_limit)
    return Conditions(
        coefficients=areas * np.where(in_tension, fy * arm, other),
        bounds=shared.nominal_demand - constant,
    )


def _tangent_points(shared: Envelope, greatest: float, least: float, a_limit: float) -> list[int]:
    """Places of the tangents: from the block of the least steel to that of the most that a
    layout of just enough strength can have.
    """
    a = shared.block_depth
    help_from_opposite = _opposite_help(shared, a, shared.strain_ratio * greatest)
    ends = []
    for depth in (greatest, least):
        moment = shared.block_force * depth - shared.block_moment + help_from_opposite
        strong = moment >= shared.nominal_demand
        ends.append(int(np.argmax(strong)) if strong.any() else len(a) - 1)
    last = int(np.searchsorted(a, a_limit, side="right")) - 1
    low, high = max(0, min(ends[0], last) - 1), min(ends[1], last)
    return sorted({round(value) for value in np.linspace(low, high, _TANGENTS).tolist()})


def ductility(shared: Envelope, bars: tuple[Bar, ...], layers: int) -> Conditions:
    """Condition that eps_t reaches its limit.

    Parameters
    ----------
    shared : Envelope
        Figures of the section.
    bars : tuple of Bar
        Largest and, if any, second size of the family.
    layers : int
        Number of layers.

    Returns
    -------
    Conditions
        One condition, with negative coefficients for bars in tension.
    """
    section = shared.section
    greatest = greatest_depths(section, bars, layers)
    dt = float(greatest[0].max())
    areas = np.array([bar.area for bar in bars])
    c = np.full_like(greatest, shared.strain_ratio * dt)
    stress = steel_stress(section.steel, _least_depths(bars, greatest), c)
    bound = -_balanced_force(shared, dt) * (1 + SLACK)
    return Conditions(coefficients=-(areas * stress)[None], bounds=np.array([bound]))


def minimum_steel(shared: Envelope, bars: tuple[Bar, ...], layers: int) -> Conditions:
    """Condition that the steel is at least the minimum.

    Parameters
    ----------
    shared : Envelope
        Figures of the section.
    bars : tuple of Bar
        Largest and, if any, second size of the family.
    layers : int
        Number of layers.

    Returns
    -------
    Conditions
        One condition on the area.
    """
    section = shared.section
    depth = greatest_depths(section, bars, layers)
    shallow = max(0.0, float(_least_depths(bars, depth).min()))
    by_clause = float(minimum_area(section, np.array([shallow]))[0])
    areas = np.array([bar.area for bar in bars])
    return Conditions(
        coefficients=np.tile(areas, (1, layers, 1)),
        bounds=np.array([min(by_clause, shared.exempt_area) * (1 - SLACK)]),
    )
