"""One-way shear of beams with vertical stirrups, ACI 318, 9.6.3, 9.7.6.2 and 22.5.

No axial force and no torsion. What may be a number or an array is the same kind of it in one
call, and so is the result. fyt is always the strength that `usable_yield` leaves.
"""

from __future__ import annotations

import math
from typing import TypeVar

import numpy as np

from engine.beams.shear_rules import shear_rules
from engine.editions import Edition
from engine.materials import Concrete
from engine.outlines import FloatArray

PHI_SHEAR = 0.75
"""Strength reduction factor of shear, Table 21.2.1. [-]"""
_ROUNDING = 1e-9

Number = TypeVar("Number", float, FloatArray)


def concrete_shear(concrete: Concrete, bw: float, d: Number) -> Number:
    """Vc where at least the least stirrups are provided.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the web.
    bw : float
        Width of the web. [in or mm]
    d : float or ndarray, shape (n,)
        Effective depth. [in or mm]

    Returns
    -------
    float or ndarray, shape (n,)
        2 lambda sqrt(f'c) bw d (ACI 318M: 0.17), 22.5.5.1, row (a) in 2019. [lbf or N]

    Notes
    -----
    The stirrups lift the cap of sqrt(f'c), 22.5.3.2. Row (b) of the 2019 table is not taken: it
    gains only above rho_w = 1.6 %, and would change with each bar that stops. The largest Vc,
    22.5.5.1.1, lies above row (a) always.
    """
    coefficient = shear_rules(concrete.edition).concrete
    return coefficient * concrete.lightweight * math.sqrt(concrete.fc) * bw * d


def size_factor(edition: Edition, d: Number) -> Number:
    """Size factor lambda_s of a beam without the least stirrups.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    d : float or ndarray, shape (n,)
        Effective depth. [in or mm]

    Returns
    -------
    float or ndarray, shape (n,)
        sqrt(2/(1 + d/10)) (ACI 318M: 0.004 d), not above 1; 22.5.5.1.3 (2019). The 2014
        editions do not use it. [-]
    """
    factor: Number = np.minimum(np.sqrt(2.0 / (1.0 + shear_rules(edition).size_slope * d)), 1.0)
    return factor


def _capped_root(concrete: Concrete) -> float:
    """Lambda sqrt(f'c) without the least stirrups, 22.5.3.1. [psi or MPa]"""
    cap = shear_rules(concrete.edition).root_cap
    return concrete.lightweight * min(math.sqrt(concrete.fc), cap)


def concrete_shear_unreinforced(concrete: Concrete, bw: float, d: Number, ratio: Number) -> Number:
    """Vc where stirrups are absent or less than the least area.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the web.
    bw : float
        Width of the web. [in or mm]
    d : float or ndarray, shape (n,)
        Effective depth. [in or mm]
    ratio : float or ndarray, shape (n,)
        rho_w = As/(bw d) of the tension bars there; without effect in the 2014 editions. [-]

    Returns
    -------
    float or ndarray, shape (n,)
        8 lambda_s lambda rho_w^(1/3) sqrt(f'c) bw d (ACI 318M: 0.66), not above
        5 lambda sqrt(f'c) bw d (0.42), by Table 22.5.5.1 (c) and 22.5.5.1.1 (2019);
        2 lambda sqrt(f'c) bw d (0.17) by 22.5.5.1 (2014). sqrt(f'c) up to 100 psi (8.3 MPa),
        22.5.3.1. [lbf or N]
    """
    rules = shear_rules(concrete.edition)
    root = _capped_root(concrete)
    if rules.by_ratio is None:
        return rules.concrete * root * bw * d
    by_ratio = rules.by_ratio * size_factor(concrete.edition, d) * np.cbrt(ratio)
    coefficient: Number = np.minimum(by_ratio, rules.most_concrete)
    return coefficient * root * bw * d


def stirrups_required_above(concrete: Concrete, bw: float, d: Number) -> Number:
    """Factored shear above which the least stirrups are required, 9.6.3.1.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the web.
    bw : float
        Width of the web. [in or mm]
    d : float or ndarray, shape (n,)
        Effective depth. [in or mm]

    Returns
    -------
    float or ndarray, shape (n,)
        phi lambda sqrt(f'c) bw d (ACI 318M: 0.083) in the 2019 editions, half of phi Vc without
        stirrups in the 2014 ones. The shallow members that 9.6.3.1 exempts are not told apart.
        [lbf or N]

    Notes
    -----
    Where stirrups are left out, Vu has to stay within phi Vc of `concrete_shear_unreinforced`
    too, which in the 2019 editions can be less.
    """
    rules = shear_rules(concrete.edition)
    if rules.trigger is None:
        return 0.5 * PHI_SHEAR * rules.concrete * _capped_root(concrete) * bw * d
    # 22.5.3.1 caps sqrt(f'c) in Vc only, and this is none.
    return rules.trigger * PHI_SHEAR * concrete.lightweight * math.sqrt(concrete.fc) * bw * d


def usable_yield(edition: Edition, fy: float) -> float:
    """Yield strength fyt that deformed stirrups may count with in shear.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    fy : float
        Specified yield strength. [psi or MPa]

    Returns
    -------
    float
        Up to 60 ksi (420 MPa), Table 20.2.2.4(a). [psi or MPa]
    """
    return min(fy, shear_rules(edition).yield_cap)


def stirrup_shear(area: Number, fyt: float, d: Number, s: Number) -> Number:
    """Vs of vertical stirrups.

    Parameters
    ----------
    area : float or ndarray, shape (n,)
        Av of all legs at one place. [in^2 or mm^2]
    fyt : float
        Usable yield strength. [psi or MPa]
    d, s : float or ndarray, shape (n,)
        Effective depth and spacing along the beam. [in or mm]

    Returns
    -------
    float or ndarray, shape (n,)
        Av fyt d/s, 22.5.10.5.3 (2014) and 22.5.8.5.3 (2019). [lbf or N]
    """
    return area * fyt * d / s


def largest_steel_shear(concrete: Concrete, bw: float, d: Number) -> Number:
    """Vs that the section can take, 22.5.1.2.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the web.
    bw : float
        Width of the web. [in or mm]
    d : float or ndarray, shape (n,)
        Effective depth. [in or mm]

    Returns
    -------
    float or ndarray, shape (n,)
        8 sqrt(f'c) bw d (ACI 318M: 0.66), whatever the density. [lbf or N]
    """
    return shear_rules(concrete.edition).most_steel * math.sqrt(concrete.fc) * bw * d


def _least_per_length(concrete: Concrete, bw: float, fyt: float) -> float:
    """Av,min over s. [in or mm]"""
    rules = shear_rules(concrete.edition)
    return max(rules.least_root * math.sqrt(concrete.fc), rules.least_floor) * bw / fyt


def least_stirrup_area(concrete: Concrete, bw: float, s: Number, fyt: float) -> Number:
    """Least area of stirrups.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the web.
    bw : float
        Width of the web. [in or mm]
    s : float or ndarray, shape (n,)
        Spacing along the beam. [in or mm]
    fyt : float
        Usable yield strength. [psi or MPa]

    Returns
    -------
    float or ndarray, shape (n,)
        Av,min = max(0.75 sqrt(f'c), 50) bw s/fyt (ACI 318M: 0.062 and 0.35), 9.6.3.3 (2014)
        and 9.6.3.4 (2019). [in^2 or mm^2]
    """
    return _least_per_length(concrete, bw, fyt) * s


def largest_spacing_for_area(concrete: Concrete, bw: float, area: Number, fyt: float) -> Number:
    """Spacing at which an area of legs is just the least one.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the web.
    bw : float
        Width of the web. [in or mm]
    area : float or ndarray, shape (n,)
        Av of all legs at one place. [in^2 or mm^2]
    fyt : float
        Usable yield strength. [psi or MPa]

    Returns
    -------
    float or ndarray, shape (n,)
        Spacing along the beam, from `least_stirrup_area`. [in or mm]
    """
    return area / _least_per_length(concrete, bw, fyt)


def _divisor(concrete: Concrete, bw: float, d: Number, Vs: Number) -> Number:
    """Return 2 where Vs is high, else 1: both limits of 9.7.6.2.2 then halve."""
    heavy = shear_rules(concrete.edition).heavy * math.sqrt(concrete.fc) * bw * d
    divisor: Number = np.add(Vs > heavy, 1.0)
    return divisor


def spacing_along(concrete: Concrete, bw: float, d: Number, Vs: Number) -> Number:
    """Largest spacing of stirrups along the beam, 9.7.6.2.2.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the web.
    bw : float
        Width of the web. [in or mm]
    d : float or ndarray, shape (n,)
        Effective depth. [in or mm]
    Vs : float or ndarray, shape (n,)
        Vs that is required of the stirrups. [lbf or N]

    Returns
    -------
    float or ndarray, shape (n,)
        min(d/2, 24 in), from above Vs = 4 sqrt(f'c) bw d on min(d/4, 12 in) (ACI 318M: 600 and
        300 mm, 0.33). [in or mm]
    """
    limit: Number = np.minimum(d / 2.0, shear_rules(concrete.edition).spacing_cap)
    return limit / _divisor(concrete, bw, d, Vs)


def spacing_across(concrete: Concrete, bw: float, d: Number, Vs: Number) -> Number:
    """Largest distance between legs across the web, 9.7.6.2.2.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the web.
    bw : float
        Width of the web. [in or mm]
    d : float or ndarray, shape (n,)
        Effective depth. [in or mm]
    Vs : float or ndarray, shape (n,)
        Vs that is required of the stirrups. [lbf or N]

    Returns
    -------
    float or ndarray, shape (n,)
        min(d, 24 in), from above Vs = 4 sqrt(f'c) bw d on min(d/2, 12 in) (ACI 318M: 600 and
        300 mm, 0.33); infinite in the 2014 editions, which have no such limit. [in or mm]
    """
    rules = shear_rules(concrete.edition)
    limit: Number = np.minimum(d, rules.spacing_cap)
    if not rules.limits_across:
        return limit + math.inf
    return limit / _divisor(concrete, bw, d, Vs)


def least_legs(width: float, limit: float) -> int:
    """Least number of legs that keeps them within a distance across the web.

    Parameters
    ----------
    width : float
        Between the centrelines of the outermost legs. [in or mm]
    limit : float
        Largest distance of neighbouring legs: `spacing_across`. [in or mm]

    Returns
    -------
    int
        Two or more: a stirrup goes around the bars.
    """
    return max(2, 1 + math.ceil(width / limit - _ROUNDING))
