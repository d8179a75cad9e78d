"""Worked examples solved by the engine: given widths, areas and depths, no bar positions."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from engine import BarGroups, Concrete, Profile, Steel, edition, flexural_state
from engine.materials import EPS_CU
from engine.strength_reduction import phi

US = ("ACI 318-14", "ACI 318-19")
SI = ("ACI 318M-14", "ACI 318M-19")
_DIAMETER = {"us": 1.0, "si": 25.0}  # moves nothing while the block misses or covers the bars


@dataclass(frozen=True, slots=True, kw_only=True)
class Solved:
    """One section at its nominal strength.

    Attributes
    ----------
    a, c : float
        Depth of the block and of the neutral axis. [in or mm]
    Mn, phi_Mn : float
        Nominal moment and design strength. [kip*ft or kN*m]
    eps_t : float
        Net tensile strain of the deepest bars, or of those at `dt`. [-]
    phi : float
        Strength reduction factor. [-]
    """

    a: float
    c: float
    Mn: float
    phi_Mn: float
    eps_t: float
    phi: float

    def strain_at(self, depth: float) -> float:
        """Strain at a depth, compression positive.

        Parameters
        ----------
        depth : float
            Distance from the compression face. [in or mm]

        Returns
        -------
        float
            Strain. [-]
        """
        return EPS_CU * (self.c - depth) / self.c


def rectangle(width: float, depth: float) -> Profile:
    """Profile of a rectangle whose bars lie at an effective depth.

    Parameters
    ----------
    width, depth : float
        Width, and effective depth d; the concrete below d is in tension and of no account, so
        a fifth of d stands for it. [in or mm]

    Returns
    -------
    Profile
        The rectangle.
    """
    return Profile(((width, 1.2 * depth),))


def tee(flange: float, thickness: float, web: float, depth: float) -> Profile:
    """Profile of a T section with its flange in compression.

    Parameters
    ----------
    flange, thickness, web, depth : float
        Flange width and thickness, web width, effective depth d (see `rectangle`). [in or mm]

    Returns
    -------
    Profile
        The T section.
    """
    return Profile(((flange, thickness), (web, 1.2 * depth - thickness)))


def solve(
    profile: Profile,
    *bars: tuple[float, float],
    fc: float,
    fy: float,
    code: str,
    deduct: bool = True,
) -> Solved:
    """Solve one section.

    Parameters
    ----------
    profile : Profile
        Widths from the compression face.
    *bars : tuple of (float, float)
        Area [in^2 or mm^2] and depth [in or mm] of each group of bars.
    fc, fy : float
        Strengths. [psi or MPa]
    code : str
        Edition.
    deduct : bool
        Whether the concrete that bars displace is deducted.

    Returns
    -------
    Solved
        The section at its nominal strength.
    """
    rules = edition(code)
    steel = Steel(edition=rules, fy=fy)
    areas, depths = (np.array([column]) for column in zip(*bars, strict=True))
    groups = BarGroups(
        area=areas, depth=depths, diameter=np.full_like(depths, _DIAMETER[rules.units])
    )
    concrete = Concrete(edition=rules, fc=fc)
    state = flexural_state(profile, concrete, steel, groups, deduct_displaced=deduct)
    eps_t = EPS_CU * (depths.max(axis=1) - state.c) / state.c
    factor = phi(steel, eps_t)
    moment = rules.system.to_trade("moment", float(state.Mn[0]))
    return Solved(
        a=float(state.a[0]),
        c=float(state.c[0]),
        Mn=moment,
        phi_Mn=float(factor[0]) * moment,
        eps_t=float(eps_t[0]),
        phi=float(factor[0]),
    )
