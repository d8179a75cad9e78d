"""Everything about many layouts of one section that numpy can say at once.

The search asks it of thousands of layouts, the check of a single one: there is one
implementation. What depends on the bars' horizontal positions (clear gaps, spacing) is in
`engine.placement`.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from engine.batch import Batch, Stacked, stacked_bars
from engine.materials import EPS_CU
from engine.minimum_steel import EXEMPTION, minimum_area
from engine.outlines import FloatArray
from engine.sections import Section
from engine.strength import BarGroups, FlexuralState, flexural_state
from engine.strength_reduction import least_strain, phi

ROUNDING = 1e-9
"""Relative slack of comparisons, for floating point only. [-]"""
_ROOT_PRECISION = 1e-10  # relative error of the moment at the required area
_STEPS = 60
_LARGEST_SHARE = 16.0  # of a layout's own area that more of the same bars is looked for
_HALVINGS = 45


@dataclass(frozen=True, slots=True, kw_only=True)
class Assessed:
    """One row of an `Assessment`, in plain numbers."""

    As: float
    As_min: float
    d: float
    dt: float
    a: float
    c: float
    Mn: float
    eps_t: float
    phi: float
    phi_Mn: float
    height: float
    strong: bool
    ductile: bool
    enough_steel: bool
    stack_fits: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Assessment:
    """Strength, ductility and minimum steel of many layouts, each array of shape (n,).

    Attributes
    ----------
    As, As_min : ndarray
        Steel area, and 9.6.1.2 at the layout's d. [in^2 or mm^2]
    d, dt : ndarray
        Depth of the centroid of all bars, and of those of layer 1. [in or mm]
    state : FlexuralState
        Neutral axis, block and nominal moment.
    eps_t : ndarray
        Net tensile strain at dt. [-]
    phi, phi_Mn : ndarray
        Reduction factor and design strength. [-], [lbf*in or N*mm]
    height : ndarray
        Distance of the innermost bar surface from the tension face. [in or mm]
    strong, ductile, enough_steel, stack_fits : ndarray of bool
        Verdicts of 9.5.1.1, of 9.3.3.1, of 9.6.1 and on the height of the stack.
    """

    As: FloatArray
    As_min: FloatArray
    d: FloatArray
    dt: FloatArray
    state: FlexuralState
    eps_t: FloatArray
    phi: FloatArray
    phi_Mn: FloatArray
    height: FloatArray
    strong: NDArray[np.bool_]
    ductile: NDArray[np.bool_]
    enough_steel: NDArray[np.bool_]
    stack_fits: NDArray[np.bool_]

    @property
    def passes(self) -> NDArray[np.bool_]:
        """Rows with every verdict true."""
        return self.strong & self.ductile & self.enough_steel & self.stack_fits

    def row(self, index: int) -> Assessed:
        """One layout's figures.

        Parameters
        ----------
        index : int
            Row of the batch.

        Returns
        -------
        Assessed
            Its figures as plain numbers.
        """
        return Assessed(
            As=float(self.As[index]),
            As_min=float(self.As_min[index]),
            d=float(self.d[index]),
            dt=float(self.dt[index]),
            a=float(self.state.a[index]),
            c=float(self.state.c[index]),
            Mn=float(self.state.Mn[index]),
            eps_t=float(self.eps_t[index]),
            phi=float(self.phi[index]),
            phi_Mn=float(self.phi_Mn[index]),
            height=float(self.height[index]),
            strong=bool(self.strong[index]),
            ductile=bool(self.ductile[index]),
            enough_steel=bool(self.enough_steel[index]),
            stack_fits=bool(self.stack_fits[index]),
        )


def _scaled(stacked: Stacked, share: FloatArray, rows: NDArray[np.intp]) -> BarGroups:
    """The layouts' own bars with their areas scaled; bars opposite stay as they are."""
    area = stacked.groups.area[rows].copy()
    area[:, : stacked.own] *= share[:, None]
    return BarGroups(
        area=area, depth=stacked.groups.depth[rows], diameter=stacked.groups.diameter[rows]
    )


def _design_strength(
    section: Section, groups: BarGroups, dt: FloatArray
) -> tuple[FlexuralState, FloatArray, FloatArray, FloatArray]:
    state = flexural_state(section.profile, section.concrete, section.steel, groups)
    eps_t = EPS_CU * (dt - state.c) / state.c
    factor = phi(section.steel, eps_t)
    return state, eps_t, factor, factor * state.Mn


def assess(section: Section, batch: Batch) -> Assessment:
    """Assess every layout of a batch in its section.

    Parameters
    ----------
    section : Section
        Section with its demand.
    batch : Batch
        Layouts at the section's tension face.

    Returns
    -------
    Assessment
        Strength, ductility and minimum steel of each.

    Notes
    -----
    9.6.1.3 asks for As >= 4/3 of what analysis requires: with phi Mn rising with the area,
    that is the same as three quarters of every bar being strong enough.
    """
    stacked = stacked_bars(section, batch)
    own_area = stacked.groups.area[:, : stacked.own].sum(axis=1)
    state, eps_t, factor, strength = _design_strength(section, stacked.groups, stacked.dt)
    needed = section.demand * (1 - ROUNDING)
    limit = least_strain(section.steel, tension_controlled=section.tension_controlled)
    least = minimum_area(section, stacked.d)
    enough = own_area >= least * (1 - ROUNDING)
    short = np.flatnonzero(~enough)
    if short.size:
        share = np.full(len(short), EXEMPTION)
        groups = _scaled(stacked, share, short)
        enough[short] = _design_strength(section, groups, stacked.dt[short])[3] >= needed
    return Assessment(
        As=own_area,
        As_min=least,
        d=stacked.d,
        dt=stacked.dt,
        state=state,
        eps_t=eps_t,
        phi=factor,
        phi_Mn=strength,
        height=stacked.height,
        strong=strength >= needed,
        ductile=eps_t >= limit * (1 - ROUNDING),
        enough_steel=enough,
        stack_fits=stacked.height - section.bar_face <= section.stack_height + ROUNDING,
    )


def required_share(section: Section, batch: Batch) -> FloatArray:
    """Share of each layout's bars that brings phi Mn to Mu at the same depths.

    Parameters
    ----------
    section : Section
        Section with its demand.
    batch : Batch
        Layouts at the section's tension face.

    Returns
    -------
    ndarray, shape (n,)
        Required over provided area; infinite where no amount of the same bars reaches Mu within
        the permitted strains. [-]
    """
    stacked = stacked_bars(section, batch)
    rows = np.arange(len(stacked.d))
    limit = least_strain(section.steel, tension_controlled=section.tension_controlled)

    def excess(share: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Strength beyond Mu, and eps_t beyond its limit."""
        groups = _scaled(stacked, share, rows)
        _, strain, _, strength = _design_strength(section, groups, stacked.dt)
        return strength - section.demand, strain - limit

    # phi Mn rises with the area up to the end of the permitted strains: the root lies below
    # the layout itself where that is strong and ductile, else below the share at that end.
    high = np.ones(len(rows))
    above, spare = excess(high)
    unsure = (above < 0.0) | (spare < 0.0)
    if unsure.any():
        ductile, brittle = np.zeros(len(rows)), np.full(len(rows), _LARGEST_SHARE)
        for _ in range(_HALVINGS):
            middle = np.where(unsure, (ductile + brittle) / 2, 1.0)
            good = excess(middle)[1] >= 0.0
            ductile, brittle = np.where(good, middle, ductile), np.where(good, brittle, middle)
        high = np.where(unsure, ductile, 1.0)
        above = np.where(unsure, excess(high)[0], above)
    found = above >= 0.0
    low, below = np.zeros(len(rows)), np.full(len(rows), -section.demand)
    share, active = high.copy(), found.copy()
    # False position with the Illinois rule: the retained end's value is halved. A row that is
    # done stays as it is, whatever the others still need.
    for _ in range(_STEPS):
        with np.errstate(divide="ignore", invalid="ignore"):
            share = np.where(active, high - above * (high - low) / (above - below), share)
        value, _ = excess(share)
        active &= np.abs(value) > _ROOT_PRECISION * section.demand
        if not active.any():
            break
        up = value >= 0.0
        low, high = np.where(up, low, share), np.where(up, share, high)
        below, above = np.where(up, below / 2, value), np.where(up, value, above / 2)
    return np.where(found, share, np.inf)
