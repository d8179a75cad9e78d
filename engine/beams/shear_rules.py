"""Printed figures of one-way shear, ACI 318, 9.6.3, 9.7.6.2 and 22.5, one set an edition."""

from __future__ import annotations

from dataclasses import dataclass

from engine.editions import Edition


@dataclass(frozen=True, slots=True, kw_only=True)
class ShearRules:
    """Printed figures of one edition. Lengths [in or mm], stresses [psi or MPa].

    A coefficient of the root is the number before sqrt(f'c). [-]

    Attributes
    ----------
    root_cap : float
        Largest sqrt(f'c) in Vc without the least stirrups, 22.5.3.1. [psi or MPa]
    concrete : float
        Coefficient of the root in Vc with the least stirrups, and in the 2014 editions without
        them.
    by_ratio : float or None
        Coefficient of the root in Vc without the least stirrups, where rho_w and the size
        factor enter; None in the 2014 editions.
    size_slope : float
        Factor of d in the size factor sqrt(2/(1 + slope d)), 22.5.5.1.3. [1/in or 1/mm]
    most_concrete : float
        Coefficient of the root in the largest Vc, 22.5.5.1.1.
    trigger : float or None
        Coefficient of the root in the Vu that asks for stirrups, 9.6.3.1; None where it is half
        of phi Vc.
    most_steel : float
        Coefficient of the root in the Vs that the section can take, 22.5.1.2.
    heavy : float
        Coefficient of the root in the Vs above which spacings halve, 9.7.6.2.2.
    least_root, least_floor : float
        Coefficient of the root, and the stress, in the least area. [-], [psi or MPa]
    yield_cap : float
        Largest fyt of deformed stirrups, Table 20.2.2.4(a). [psi or MPa]
    spacing_cap : float
        Largest spacing before it halves, 9.7.6.2.2. [in or mm]
    limits_across : bool
        Whether 9.7.6.2.2 limits the distance of legs across the web.
    concrete_clause, steel_clause, least_clause : str
        Clauses of Vc, Vs and the least area.
    """

    root_cap: float
    concrete: float
    by_ratio: float | None
    size_slope: float
    most_concrete: float
    trigger: float | None
    most_steel: float
    heavy: float
    least_root: float
    least_floor: float
    yield_cap: float
    spacing_cap: float
    limits_across: bool
    concrete_clause: str
    steel_clause: str
    least_clause: str


def _us(
    by_ratio: float | None, trigger: float | None, across: bool, clauses: tuple[str, str, str]
) -> ShearRules:
    concrete_clause, steel_clause, least_clause = clauses
    return ShearRules(
        root_cap=100.0,
        concrete=2.0,
        by_ratio=by_ratio,
        size_slope=1.0 / 10.0,
        most_concrete=5.0,
        trigger=trigger,
        most_steel=8.0,
        heavy=4.0,
        least_root=0.75,
        least_floor=50.0,
        yield_cap=60_000.0,
        spacing_cap=24.0,
        limits_across=across,
        concrete_clause=concrete_clause,
        steel_clause=steel_clause,
        least_clause=least_clause,
    )


def _si(
    by_ratio: float | None, trigger: float | None, across: bool, clauses: tuple[str, str, str]
) -> ShearRules:
    concrete_clause, steel_clause, least_clause = clauses
    return ShearRules(
        root_cap=8.3,
        concrete=0.17,
        by_ratio=by_ratio,
        size_slope=0.004,
        most_concrete=0.42,
        trigger=trigger,
        most_steel=0.66,
        heavy=0.33,
        least_root=0.062,
        least_floor=0.35,
        yield_cap=420.0,
        spacing_cap=600.0,
        limits_across=across,
        concrete_clause=concrete_clause,
        steel_clause=steel_clause,
        least_clause=least_clause,
    )


_IN_2014 = ("22.5.5.1", "22.5.10.5.3", "9.6.3.3")
_IN_2019 = ("Table 22.5.5.1", "22.5.8.5.3", "9.6.3.4")
_RULES = {
    "ACI 318-14": _us(None, None, False, _IN_2014),
    "ACI 318-19": _us(8.0, 1.0, True, _IN_2019),
    "ACI 318M-14": _si(None, None, False, _IN_2014),
    "ACI 318M-19": _si(0.66, 0.083, True, _IN_2019),
}


def shear_rules(edition: Edition) -> ShearRules:
    """Printed figures of an edition.

    Parameters
    ----------
    edition : Edition
        Edition of the code.

    Returns
    -------
    ShearRules
        Figures of one-way shear.
    """
    return _RULES[edition.name]
