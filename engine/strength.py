"""Nominal flexural strength by strain compatibility, for one layout or a million.

Plane sections, crushing of the concrete at 0.003, the equivalent rectangular block and
elastic-perfectly-plastic bars (ACI 318-14 and -19, 22.2). Every group of bars acts at its
own depth with the stress of its own strain.

Displaced concrete: where the block reaches a group of bars, the concrete that the bars
replace is deducted. A group counts as a rectangle as high as its bars and of the same
area, so the deduction grows with the depth of the block instead of jumping. Since bars
stand side by side within the width, the deduction always grows more slowly than the
block: the net compression rises with the depth of the neutral axis, and the equilibrium
is unique.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from engine.materials import EPS_CU, Concrete, Steel
from engine.outlines import FloatArray, Profile

_CHUNK = 1 << 14  # rows solved at once: large enough for numpy, small enough for the cache
_ITERATIONS = 200  # bisection alone would need fewer
_PRECISION = 1e-12


@dataclass(frozen=True, slots=True, kw_only=True)
class BarGroups:
    """Bars of many layouts, in groups that share a depth.

    Attributes
    ----------
    area : ndarray, shape (n, g)
        Area of each group; zero marks an empty place. [in^2 or mm^2]
    depth : ndarray, shape (n, g)
        Distance of its centroid from the compression face. [in or mm]
    diameter : ndarray, shape (n, g)
        Bar diameter; enters the displaced concrete only. [in or mm]
    """

    area: FloatArray
    depth: FloatArray
    diameter: FloatArray


@dataclass(frozen=True, slots=True, kw_only=True)
class FlexuralState:
    """Equilibrium of each layout at crushing.

    Attributes
    ----------
    c : ndarray, shape (n,)
        Depth of the neutral axis. [in or mm]
    a : ndarray, shape (n,)
        Depth of the block, not beyond the section. [in or mm]
    Mn : ndarray, shape (n,)
        Nominal moment. [lbf*in or N*mm]
    """

    c: FloatArray
    a: FloatArray
    Mn: FloatArray


def steel_stress(steel: Steel, depth: FloatArray, c: FloatArray) -> FloatArray:
    """Stress of bars at given depths, tension positive.

    Parameters
    ----------
    steel : Steel
        Longitudinal steel.
    depth : ndarray
        Distance from the compression face. [in or mm]
    c : ndarray
        Depth of the neutral axis, broadcastable to `depth`. [in or mm]

    Returns
    -------
    ndarray
        Stress. [psi or MPa]
    """
    elastic: FloatArray = (steel.Es * EPS_CU) * (depth - c) / c
    return np.clip(elastic, -steel.fy, steel.fy)


def flexural_state(
    profile: Profile,
    concrete: Concrete,
    steel: Steel,
    groups: BarGroups,
    *,
    deduct_displaced: bool = True,
) -> FlexuralState:
    """Solve the equilibrium of every layout.

    Parameters
    ----------
    profile : Profile
        Widths from the compression face.
    concrete : Concrete
        Concrete.
    steel : Steel
        Longitudinal steel.
    groups : BarGroups
        Bars, with at least one group in tension in every row.
    deduct_displaced : bool
        False leaves the displaced concrete in, as many hand calculations do.

    Returns
    -------
    FlexuralState
        Neutral axis, block and nominal moment of each row.

    Notes
    -----
    sum(A f) = 0.85 f'c (area of the block - displaced area), with
    f = clip(0.003 Es (d - c)/c, -fy, fy) and a = beta1 c (ACI 318, 22.2).
    """
    chunks = max(1, len(groups.area) // _CHUNK)
    parts = [
        _solve(profile, concrete, steel, _rows_at(groups, rows), deduct_displaced)
        for rows in np.array_split(np.arange(len(groups.area)), chunks)
    ]
    c = np.concatenate([part[0] for part in parts])
    moment = np.concatenate([part[1] for part in parts])
    return FlexuralState(c=c, a=np.minimum(concrete.beta1 * c, profile.depth), Mn=moment)


def _solve(
    profile: Profile, concrete: Concrete, steel: Steel, groups: BarGroups, deduct: bool
) -> tuple[FloatArray, FloatArray]:
    # Closed form first: if every bar yields in tension and the block touches none, the block
    # balances fy*sum(A) and nothing has to be iterated. Nearly all practical layouts are such.
    block = concrete.block_stress
    tension = steel.fy * groups.area.sum(axis=1)
    a = profile.depth_of_area(tension / block)
    c = a / concrete.beta1
    present = groups.area > 0.0
    nearest = np.where(present, groups.depth, np.inf).min(axis=1)
    nearest_edge = np.where(present, groups.depth - groups.diameter / 2, np.inf).min(axis=1)
    plain = (nearest - c) * (EPS_CU * steel.Es) >= steel.fy * c
    plain &= nearest_edge >= a
    moment = steel.fy * (groups.area * groups.depth).sum(axis=1) - block * profile.moment_above(
        np.where(plain, a, 0.0)
    )
    rest = np.flatnonzero(~plain)
    if rest.size:
        hard = _rows_at(groups, rest)
        start = np.where(np.isfinite(c[rest]), c[rest], profile.depth)
        c[rest], moment[rest] = _iterate(profile, concrete, steel, hard, start, deduct)
    return c, moment


def _rows_at(groups: BarGroups, rows: NDArray[np.intp]) -> BarGroups:
    return BarGroups(
        area=groups.area[rows], depth=groups.depth[rows], diameter=groups.diameter[rows]
    )


def _net_force(
    profile: Profile,
    concrete: Concrete,
    steel: Steel,
    groups: BarGroups,
    c: FloatArray,
    deduct: bool,
) -> tuple[FloatArray, FloatArray]:
    """Net compression at a neutral axis, and its growth with the neutral axis."""
    block, beta1, depth = concrete.block_stress, concrete.beta1, profile.depth
    a = np.minimum(beta1 * c, depth)
    stress = steel_stress(steel, groups.depth, c[:, None])
    force = block * profile.area_above(a) - (groups.area * stress).sum(axis=1)
    steel_slope = (EPS_CU * steel.Es) * groups.depth / (c * c)[:, None]
    elastic = np.abs(stress) < steel.fy
    slope = (groups.area * np.where(elastic, steel_slope, 0.0)).sum(axis=1)
    inside = beta1 * c < depth
    slope += np.where(inside, block * beta1 * profile.width_at(a), 0.0)
    if deduct:
        area, _, growth = _displaced(groups, a)
        force -= block * area.sum(axis=1)
        slope -= np.where(inside, block * beta1 * growth.sum(axis=1), 0.0)
    return force, slope


def _displaced(groups: BarGroups, a: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Area displaced within the block, its centroid, and its growth with the block."""
    upper = groups.depth - groups.diameter / 2
    height = np.clip(a[:, None] - upper, 0.0, groups.diameter)
    per_height = groups.area / groups.diameter
    growing = (height > 0.0) & (height < groups.diameter)
    return per_height * height, upper + height / 2, np.where(growing, per_height, 0.0)


def _iterate(
    profile: Profile,
    concrete: Concrete,
    steel: Steel,
    groups: BarGroups,
    start: FloatArray,
    deduct: bool,
) -> tuple[FloatArray, FloatArray]:
    """Newton's method kept inside a bracket by bisection."""
    block, beta1, depth = concrete.block_stress, concrete.beta1, profile.depth
    c = np.clip(start, 1e-9 * depth, depth)
    low = np.full(len(start), 1e-9 * depth)
    # At a neutral axis this deep every bar is compressed: the net force is compression.
    high = np.full(len(start), 1e3 * depth)
    open_rows = np.arange(len(start))
    for _ in range(_ITERATIONS):
        active = _rows_at(groups, open_rows)
        x = c[open_rows]
        force, slope = _net_force(profile, concrete, steel, active, x, deduct)
        high[open_rows] = np.where(force > 0.0, x, high[open_rows])
        low[open_rows] = np.where(force > 0.0, low[open_rows], x)
        with np.errstate(divide="ignore", invalid="ignore"):
            newton = x - force / slope
        usable = (newton > low[open_rows]) & (newton < high[open_rows])
        c[open_rows] = np.where(usable, newton, (low[open_rows] + high[open_rows]) / 2)
        open_rows = open_rows[np.abs(c[open_rows] - x) > _PRECISION * x]
        if not open_rows.size:
            break
    a = np.minimum(beta1 * c, depth)
    stress = steel_stress(steel, groups.depth, c[:, None])
    moment = (groups.area * stress * groups.depth).sum(axis=1) - block * profile.moment_above(a)
    if deduct:
        area, centroid, _ = _displaced(groups, a)
        moment += block * (area * centroid).sum(axis=1)
    return c, moment
