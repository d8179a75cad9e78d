"""Lengths that develop straight deformed bars in tension, ACI 318, 25.4.2.

Every length holds for single bars of one size; bundles (25.6) and the reduction for excess
steel (25.4.10) are not taken.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from catalogs import Bar
from engine.development_rules import development_rules
from engine.errors import OutOfRangeError
from engine.materials import Concrete, Steel

MOST_CONFINEMENT = 2.5
"""Largest (cb + Ktr)/db that counts: beyond it bars pull out, 25.4.2.3 and 25.4.2.4. [-]"""
TOP_FACTOR = 1.3
"""psi_t of a top bar, Tables 25.4.2.4 (2014) and 25.4.2.5 (2019). [-]"""
LIGHTWEIGHT = 0.75
"""lambda of every lightweight concrete in the same tables. [-]"""
SMALL_BAR_FACTOR = 0.8
"""psi_s of a small bar in the same tables. [-]"""
MOST_TOP_COATED = 1.7
"""Largest psi_t psi_e that need be taken, 25.4.2.4 and 25.4.2.5. [-]"""
_COATED_CLOSE, _COATED_WIDE = 1.5, 1.2  # psi_e of the same tables
LEAST_CONFINEMENT = 0.5
"""(cb + Ktr)/db of bars that touch one another or the surface. [-]"""
_ROUNDING = 1e-9


@dataclass(frozen=True, slots=True, kw_only=True)
class Development:
    """A development length or lap with what it is made of.

    Attributes
    ----------
    length : float
        Length to provide. [in or mm]
    unlimited : float
        Length before the least one is applied. [in or mm]
    factors : dict of str to float
        Factors that entered, by the code's symbol. [-]
    clause : str
        Clause of the edition.
    """

    length: float
    unlimited: float
    factors: dict[str, float]
    clause: str


def require_one_edition(concrete: Concrete, steel: Steel, bar: Bar) -> None:
    """Refuse materials of two editions and a bar in other units.

    Parameters
    ----------
    concrete, steel : Concrete, Steel
        Materials.
    bar : Bar
        Size of the bar.

    Raises
    ------
    OutOfRangeError
        If the editions or the units differ.
    """
    if steel.edition != concrete.edition:
        msg = f"got {steel.edition.name}; allowed: that of the concrete, {concrete.edition.name}"
        raise OutOfRangeError(msg, what="steel")
    if bar.system != concrete.edition.units:
        msg = f"{bar.designation} has {bar.system} units; allowed: {concrete.edition.units}"
        raise OutOfRangeError(msg, what="bar")


def bond_stress(concrete: Concrete) -> tuple[float, float]:
    """Factor lambda and the limited root of f'c, which all development lengths divide by.

    Parameters
    ----------
    concrete : Concrete
        Concrete that the bar lies in.

    Returns
    -------
    tuple of float
        lambda [-], 0.75 for every lightweight concrete because the tables of factors know no
        value in between, and sqrt(f'c) up to the cap of 25.4.1.4. [psi or MPa]
    """
    lam = 1.0 if concrete.lightweight == 1.0 else LIGHTWEIGHT
    cap = development_rules(concrete.edition).root_cap
    return lam, min(math.sqrt(concrete.fc), cap)


def straight_length(
    concrete: Concrete,
    steel: Steel,
    bar: Bar,
    *,
    confinement: float,
    top: bool,
    coated: bool = False,
    widely_spaced: bool = False,
) -> Development:
    """Development length ld by the general equation.

    Parameters
    ----------
    concrete, steel : Concrete, Steel
        Materials.
    bar : Bar
        Size of the bar.
    confinement : float
        (cb + Ktr)/db; more than 2.5 counts as 2.5. [-]
    top : bool
        Whether it is a top bar.
    coated : bool
        Whether it is coated with epoxy.
    widely_spaced : bool
        Whether cover is at least 3 db and clear spacing at least 6 db; lowers psi_e.

    Returns
    -------
    Development
        ld of 25.4.2.3 in ACI 318-14, 25.4.2.4 in ACI 318-19; at least 12 in or 300 mm.

    Raises
    ------
    OutOfRangeError
        If the confinement is below 0.5, which no bar inside concrete has, or the editions or
        units differ.
    """
    require_one_edition(concrete, steel, bar)
    if not (math.isfinite(confinement) and confinement >= LEAST_CONFINEMENT - _ROUNDING):
        msg = f"got {confinement:.4g}; allowed: at least 0.5; hint: bars overlap or leave the beam"
        raise OutOfRangeError(msg, what="confinement")
    rules = development_rules(concrete.edition)
    factors = _factors(steel, top=top, coated=coated, widely_spaced=widely_spaced)
    factors["psi_s"] = SMALL_BAR_FACTOR if bar.diameter <= rules.small_bar else 1.0
    ratio = min(confinement, MOST_CONFINEMENT)
    lam, root = bond_stress(concrete)
    unlimited = steel.fy / (rules.general * lam * root) * _product(factors) / ratio * bar.diameter
    return Development(
        length=max(unlimited, rules.least),
        unlimited=unlimited,
        factors={**factors, "lambda": lam, "(cb + Ktr)/db": ratio},
        clause=rules.general_clause,
    )


def short_form_length(
    concrete: Concrete,
    steel: Steel,
    bar: Bar,
    *,
    favourable: bool,
    top: bool,
    coated: bool = False,
    widely_spaced: bool = False,
) -> Development:
    """Development length ld by the table that needs no Ktr.

    Parameters
    ----------
    concrete, steel : Concrete, Steel
        Materials.
    bar : Bar
        Size of the bar.
    favourable : bool
        Whether the first row holds: clear spacing and cover at least db with the least
        stirrups of the code along ld, or clear spacing at least 2 db and cover at least db.
    top : bool
        Whether it is a top bar.
    coated : bool
        Whether it is coated with epoxy.
    widely_spaced : bool
        Whether cover is at least 3 db and clear spacing at least 6 db; lowers psi_e.

    Returns
    -------
    Development
        ld of Table 25.4.2.2 in ACI 318-14, Table 25.4.2.3 in ACI 318-19; at least 12 in or
        300 mm. psi_s is part of the table and not among the factors.

    Raises
    ------
    OutOfRangeError
        If the editions or units differ.
    """
    require_one_edition(concrete, steel, bar)
    rules = development_rules(concrete.edition)
    factors = _factors(steel, top=top, coated=coated, widely_spaced=widely_spaced)
    divisors = rules.favourable if favourable else rules.other
    divisor = divisors[0] if bar.diameter <= rules.small_bar else divisors[1]
    lam, root = bond_stress(concrete)
    unlimited = steel.fy * _product(factors) / (divisor * lam * root) * bar.diameter
    return Development(
        length=max(unlimited, rules.least),
        unlimited=unlimited,
        factors={**factors, "lambda": lam},
        clause=rules.short_clause,
    )


def _factors(steel: Steel, *, top: bool, coated: bool, widely_spaced: bool) -> dict[str, float]:
    """psi_t, psi_e and, where the edition has it, psi_g."""
    coating = _COATED_WIDE if widely_spaced else _COATED_CLOSE
    factors = {"psi_t": TOP_FACTOR if top else 1.0, "psi_e": coating if coated else 1.0}
    # Nothing is printed for a grade between two: it takes the factor of the next higher.
    grades = development_rules(steel.edition).grade_factors
    if grades:
        factors["psi_g"] = next(factor for limit, factor in grades if steel.fy <= limit)
    return factors


def _product(factors: dict[str, float]) -> float:
    """All factors multiplied, psi_t psi_e limited."""
    both = factors["psi_t"] * factors["psi_e"]
    return math.prod(factors.values()) * min(both, MOST_TOP_COATED) / both
