"""Cracking and effective inertia of beams under service load, ACI 318, 19.2.3 and 24.2.3."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from engine.beams.demand import Deflections
from engine.editions import Edition
from engine.materials import Concrete
from engine.outlines import FloatArray

_RUPTURE = {"us": 7.5, "si": 0.62}  # coefficient of the root, 19.2.3.1
_CRACKED_SHARE = 2.0 / 3.0  # of Mcr, Table 24.2.3.5 of the 2019 editions


def modulus_of_rupture(concrete: Concrete) -> float:
    """Modulus of rupture fr.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the beam.

    Returns
    -------
    float
        7.5 lambda sqrt(f'c) (ACI 318M: 0.62), 19.2.3.1. [psi or MPa]
    """
    return _RUPTURE[concrete.edition.units] * concrete.lightweight * math.sqrt(concrete.fc)


def cracking_moment(concrete: Concrete, Ig: float, yt: float) -> float:
    """Cracking moment Mcr = fr Ig/yt, 24.2.3.5.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the beam.
    Ig : float
        Second moment of the gross concrete about its centroid. [in^4 or mm^4]
    yt : float
        From the centroid to the tension face. [in or mm]

    Returns
    -------
    float
        Mcr. [lbf*in or N*mm]
    """
    return modulus_of_rupture(concrete) * Ig / yt


def effective_inertia(
    edition: Edition, Ma: float, Mcr: float, Ig: float, Icr: FloatArray
) -> FloatArray:
    """Effective second moment Ie, 24.2.3.5.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    Ma : float
        Largest service moment at the load stage, in size. [lbf*in or N*mm]
    Mcr : float
        Cracking moment. [lbf*in or N*mm]
    Ig : float
        Second moment of the gross concrete. [in^4 or mm^4]
    Icr : ndarray, shape (n,)
        Second moments of cracked sections. [in^4 or mm^4]

    Returns
    -------
    ndarray, shape (n,)
        2014: (Mcr/Ma)^3 Ig + (1 - (Mcr/Ma)^3) Icr, and Ig up to Ma = Mcr. 2019:
        Icr/(1 - (2/3 Mcr/Ma)^2 (1 - Icr/Ig)), and Ig up to Ma = 2/3 Mcr. [in^4 or mm^4]

    Notes
    -----
    Ig leaves the bars out, so much steel can bring Icr above it. The 2014 editions stop at Ig;
    the 2019 table does not say so, and Ig is taken there as well, on the safe side.
    """
    cracked = np.minimum(Icr, Ig)
    limit = Mcr if edition.year == 2014 else _CRACKED_SHARE * Mcr
    if limit >= Ma:
        return np.full(cracked.shape, Ig)
    if edition.year == 2014:
        share = (limit / Ma) ** 3
        return share * Ig + (1.0 - share) * cracked
    return cracked / (1.0 - (limit / Ma) ** 2 * (1.0 - cracked / Ig))


@dataclass(frozen=True, slots=True, kw_only=True)
class StageInertias:
    """Ie of n candidates at three load stages.

    Attributes
    ----------
    dead, sustained, total : ndarray, shape (n,)
        Under dead load, with the sustained live load, with all live load. [in^4 or mm^4]
    """

    dead: FloatArray
    sustained: FloatArray
    total: FloatArray


def stage_inertias(
    edition: Edition, unit: Deflections, Mcr: float, Ig: float, Icr: FloatArray
) -> StageInertias:
    """Ie of a span at each load stage, from the moment of that stage.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    unit : Deflections
        Where the moments come from: midspan, or a cantilever's support (24.2.3.7).
    Mcr, Ig : float
        Cracking moment and gross second moment there. [lbf*in or N*mm], [in^4 or mm^4]
    Icr : ndarray, shape (n,)
        Cracked second moments there. [in^4 or mm^4]

    Returns
    -------
    StageInertias
        Effective second moments.
    """
    dead, sustained, total = (
        effective_inertia(edition, Ma, Mcr, Ig, Icr)
        for Ma in (unit.moment_dead, unit.moment_sustained, unit.moment_total)
    )
    return StageInertias(dead=dead, sustained=sustained, total=total)
