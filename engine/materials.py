"""Concrete and reinforcing steel as the flexural provisions see them."""

from __future__ import annotations

import math
from dataclasses import dataclass

from engine.editions import Edition
from engine.errors import OutOfRangeError
from engine.units import plain

EPS_CU = 0.003
"""Strain of concrete at crushing, ACI 318-14 and -19, 22.2.2.1. [-]"""
BLOCK = 0.85
"""Stress of the equivalent block over f'c, 22.2.2.4.1. [-]"""


def _in_range(what: str, value: float, limits: tuple[float, float], unit: str, where: str) -> None:
    low, high = limits
    if not (math.isfinite(value) and low <= value <= high):
        of = f"{value:.6g} {unit}".strip()
        msg = (
            f"got {of}; allowed: {plain(low)} to {plain(high)} {unit}".strip()
            + f" ({where}; own limits)"
        )
        raise OutOfRangeError(msg, what=what)


@dataclass(frozen=True, slots=True, kw_only=True)
class Concrete:
    """Concrete of one member.

    Attributes
    ----------
    edition : Edition
        Edition whose coefficients apply.
    fc : float
        Specified compressive strength f'c. [psi or MPa]
    lightweight : float
        Factor lambda of 19.2.4; it enters the checks of shear and development. [-]
    modulus : float or None
        Ec where it is specified or tested; None takes 19.2.2.1(b), which holds for
        normalweight concrete. [psi or MPa]

    Raises
    ------
    OutOfRangeError
        If a value is outside the edition's range.
    """

    edition: Edition
    fc: float
    lightweight: float = 1.0
    modulus: float | None = None

    def __post_init__(self) -> None:
        unit = self.edition.system.trade["stress"]
        _in_range("fc", self.fc, self.edition.strength_range, unit, "19.2.1.1")
        _in_range("lightweight", self.lightweight, (0.75, 1.0), "", "19.2.4")
        if self.modulus is not None:
            reference = self.edition.concrete_modulus * math.sqrt(self.fc)
            limits = (0.3 * reference, 2.0 * reference)
            _in_range("Ec", self.modulus, limits, unit, "19.2.2.1")

    @property
    def Ec(self) -> float:  # noqa: N802 - symbol of the code
        """Modulus of elasticity, 19.2.2.1. [psi or MPa]"""
        if self.modulus is not None:
            return self.modulus
        return self.edition.concrete_modulus * math.sqrt(self.fc)

    @property
    def beta1(self) -> float:
        """Depth of the block over the neutral axis, Table 22.2.2.4.3. [-]"""
        if self.fc >= self.edition.beta1_end:
            return 0.65
        drop = 0.05 * (self.fc - self.edition.beta1_start) / self.edition.beta1_step
        return min(0.85, 0.85 - drop)

    @property
    def block_stress(self) -> float:
        """0.85 f'c. [psi or MPa]"""
        return BLOCK * self.fc


@dataclass(frozen=True, slots=True, kw_only=True)
class Steel:
    """Longitudinal reinforcing steel: elastic, then perfectly plastic (20.2.2.1).

    Attributes
    ----------
    edition : Edition
        Edition whose coefficients apply.
    fy : float
        Specified yield strength. [psi or MPa]
    name : str
        Grade as written in the job, or empty where only fy was given.
    note : str
        What a reader has to know about the grade.

    Raises
    ------
    OutOfRangeError
        If fy is outside the edition's range.
    """

    edition: Edition
    fy: float
    name: str = ""
    note: str = ""

    def __post_init__(self) -> None:
        unit = self.edition.system.trade["stress"]
        where = f"{self.edition.name} 20.2.2.4"
        _in_range("fy", self.fy, self.edition.yield_range, unit, where)

    @property
    def Es(self) -> float:  # noqa: N802 - symbol of the code
        """Modulus of elasticity, 20.2.2.2. [psi or MPa]"""
        return self.edition.steel_modulus

    @property
    def eps_ty(self) -> float:
        """Yield strain that phi is measured from; 0.002 for Grade 60 (420), 21.2.2.1. [-]"""
        if math.isclose(self.fy, self.edition.eps_ty_permitted_for, rel_tol=1e-9):
            return 0.002
        return self.fy / self.Es
