"""Printed figures of development and laps, ACI 318, 25.4.2 and 25.5, one set an edition."""

from __future__ import annotations

from dataclasses import dataclass

from engine.editions import Edition


@dataclass(frozen=True, slots=True, kw_only=True)
class DevelopmentRules:
    """Printed figures of 25.4.2 and 25.5 in one edition. Lengths [in or mm], stresses [psi or MPa].

    Attributes
    ----------
    root_cap : float
        Largest sqrt(f'c), 25.4.1.4. [psi or MPa]
    general : float
        Divisor of fy in the general equation. [-]
    favourable : tuple of float
        Divisors of fy in the first row of the short form: small bars, larger bars. [-]
    other : tuple of float
        Divisors of its second row. [-]
    transverse : float
        Coefficient of Ktr. [-]
    least : float
        Least development length and lap. [in or mm]
    fresh_concrete : float
        Depth of fresh concrete below a bar above which it is a top bar. [in or mm]
    small_bar : float
        Largest diameter that counts as "No. 6 (19) and smaller". [in or mm]
    largest_lapped : float
        Largest diameter that counts as "No. 11 (36) and smaller". [in or mm]
    grade_factors : tuple of (float, float)
        Yield strength up to which a factor psi_g holds, and the factor; empty without psi_g.
    high_strength : float
        Yield strength from which Ktr has a minimum; infinite without one. [psi or MPa]
    general_clause, short_clause : str
        Clauses of the two equations.
    """

    root_cap: float
    general: float
    favourable: tuple[float, float]
    other: tuple[float, float]
    transverse: float
    least: float
    fresh_concrete: float
    small_bar: float
    largest_lapped: float
    grade_factors: tuple[tuple[float, float], ...]
    high_strength: float
    general_clause: str
    short_clause: str


def _us(
    grade_factors: tuple[tuple[float, float], ...], high: float, general: str, short: str
) -> DevelopmentRules:
    return DevelopmentRules(
        root_cap=100.0,
        general=40.0 / 3.0,
        favourable=(25.0, 20.0),
        other=(50.0 / 3.0, 40.0 / 3.0),
        transverse=40.0,
        least=12.0,
        fresh_concrete=12.0,
        small_bar=0.76,
        largest_lapped=1.42,
        grade_factors=grade_factors,
        high_strength=high,
        general_clause=general,
        short_clause=short,
    )


def _si(
    grade_factors: tuple[tuple[float, float], ...], high: float, general: str, short: str
) -> DevelopmentRules:
    return DevelopmentRules(
        root_cap=8.3,
        general=1.1,
        favourable=(2.1, 1.7),
        other=(1.4, 1.1),
        transverse=40.0,
        least=300.0,
        fresh_concrete=300.0,
        small_bar=19.2,
        largest_lapped=36.0,
        grade_factors=grade_factors,
        high_strength=high,
        general_clause=general,
        short_clause=short,
    )


_NO_LIMIT = float("inf")
_IN_2014 = ("25.4.2.3", "Table 25.4.2.2")
_IN_2019 = ("25.4.2.4", "Table 25.4.2.3")
_US_GRADES = ((60_000.0, 1.0), (80_000.0, 1.15), (100_000.0, 1.3))
_SI_GRADES = ((420.0, 1.0), (550.0, 1.15), (690.0, 1.3))
_RULES = {
    "ACI 318-14": _us((), _NO_LIMIT, *_IN_2014),
    "ACI 318-19": _us(_US_GRADES, 80_000.0, *_IN_2019),
    "ACI 318M-14": _si((), _NO_LIMIT, *_IN_2014),
    "ACI 318M-19": _si(_SI_GRADES, 550.0, *_IN_2019),
}


def development_rules(edition: Edition) -> DevelopmentRules:
    """Printed figures of an edition.

    Parameters
    ----------
    edition : Edition
        Edition of the code.

    Returns
    -------
    DevelopmentRules
        Figures of 25.4.2 and 25.5.
    """
    return _RULES[edition.name]
