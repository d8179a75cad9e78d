"""Strength reduction factor and strain limits of flexural members, 21.2.2 and 9.3.3.1."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from engine.errors import OutOfRangeError
from engine.materials import Steel

PHI_TENSION = 0.90
PHI_COMPRESSION = 0.65  # "other" row of Table 21.2.2: beams have ties or stirrups
_EPS_T_FLOOR_2014 = 0.004  # ACI 318-14, 9.3.3.1
_TENSION_CONTROLLED_2014 = 0.005  # ACI 318-14, Table 21.2.2


def tension_controlled_strain(steel: Steel) -> float:
    """Least eps_t of a tension-controlled section.

    Parameters
    ----------
    steel : Steel
        Longitudinal steel.

    Returns
    -------
    float
        0.005 in ACI 318-14, eps_ty + 0.003 in ACI 318-19 (Table 21.2.2). [-]
    """
    if steel.edition.year == 2014:
        return _TENSION_CONTROLLED_2014
    return steel.eps_ty + 0.003


def least_strain(steel: Steel, *, tension_controlled: bool) -> float:
    """Least eps_t that a beam may have.

    Parameters
    ----------
    steel : Steel
        Longitudinal steel.
    tension_controlled : bool
        Whether the section has to be tension-controlled. ACI 318-19, 9.3.3.1, asks for it
        always; ACI 318-14 stops at 0.004.

    Returns
    -------
    float
        Limit of eps_t. [-]

    Raises
    ------
    OutOfRangeError
        If ACI 318-19 is asked for less than tension-controlled.
    """
    if tension_controlled:
        return tension_controlled_strain(steel)
    if steel.edition.year != 2014:
        msg = (
            f"got false under {steel.edition.name}; allowed: true, since 9.3.3.1 asks every beam"
            " to be tension-controlled; hint: ACI 318-14 permits eps_t >= 0.004"
        )
        raise OutOfRangeError(msg, what="tension_controlled")
    return _EPS_T_FLOOR_2014


def phi(steel: Steel, eps_t: NDArray[np.float64]) -> NDArray[np.float64]:
    """Strength reduction factor.

    Parameters
    ----------
    steel : Steel
        Longitudinal steel.
    eps_t : ndarray, shape (n,)
        Net tensile strain of the extreme layer, tension positive. [-]

    Returns
    -------
    ndarray, shape (n,)
        phi of Table 21.2.2, linear in the transition. [-]
    """
    limit = tension_controlled_strain(steel)
    share = (eps_t - steel.eps_ty) / (limit - steel.eps_ty)
    return PHI_COMPRESSION + (PHI_TENSION - PHI_COMPRESSION) * np.clip(share, 0.0, 1.0)
