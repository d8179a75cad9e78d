"""The editions of the design code, each with its own printed coefficients.

ACI 318 and ACI 318M are two standards: the metric one has its own rounded figures, so
nothing is computed in one and converted to the other. An `Edition` is data only; the
provisions that use it live in the modules named after their subject.
"""

from __future__ import annotations

from dataclasses import dataclass

from engine.errors import UnknownEditionError
from engine.units import SYSTEMS, UnitSystem


@dataclass(frozen=True, slots=True, kw_only=True)
class Edition:
    """Coefficients of one edition. Lengths [in or mm], stresses [psi or MPa].

    Attributes
    ----------
    name : str
        As written in a job file, for example ``ACI 318-19``.
    year : int
        2014 or 2019.
    units : str
        ``us`` or ``si``.
    steel_modulus : float
        Es, 20.2.2.2. [psi or MPa]
    concrete_modulus : float
        Coefficient of the square root in Ec of normalweight concrete, 19.2.2.1. [-]
    strength_range : tuple of float
        Specified concrete strengths taken: least of Table 19.2.1.1, largest of this tool.
    beta1_start, beta1_step, beta1_end : float
        beta1 falls by 0.05 for each step above the start and is 0.65 from the end on,
        Table 22.2.2.4.3. [psi or MPa]
    yield_range : tuple of float
        Yield strengths taken in flexure; the upper one from Table 20.2.2.4(a).
    eps_ty_permitted_for : float
        Yield strength for which eps_ty may be taken as 0.002, 21.2.2.1. [psi or MPa]
    minimum_steel_root, minimum_steel_floor : float
        The two coefficients of 9.6.1.2. [-], [psi or MPa]
    minimum_steel_yield_cap : float
        Largest fy used in 9.6.1.2; infinite where the edition sets none. [psi or MPa]
    crack_reference : float
        Steel stress at which Table 24.3.2 is normalised. [psi or MPa]
    crack_base, crack_cap : float
        Leading spacings of Table 24.3.2. [in or mm]
    least_gap : float
        Least clear spacing of 25.2.1 and 25.2.2. [in or mm]
    skin_depth : float
        Depth above which 9.7.2.3 asks for skin steel. [in or mm]
    cover_interior, cover_weather_small, cover_weather_large, cover_ground : float
        Rows of the cover table for beams. [in or mm]
    cover_clause : str
        Clause of that table in this edition.
    small_bar : float
        Largest diameter that counts as "No. 5 (16) and smaller". [in or mm]
    largest_stirrup : float
        Largest diameter of Table 25.3.2, No. 8 (25). [in or mm]
    tie_small, tie_large : float
        Least tie diameters of 9.7.6.4.2. [in or mm]
    tie_large_from : float
        Bars thicker than this need the larger tie. [in or mm]
    tie_reach : float
        Greatest clear distance of an unheld bar from a held one, 9.7.6.4.4. [in or mm]
    """

    name: str
    year: int
    units: str
    steel_modulus: float
    concrete_modulus: float
    strength_range: tuple[float, float]
    beta1_start: float
    beta1_step: float
    beta1_end: float
    yield_range: tuple[float, float]
    eps_ty_permitted_for: float
    minimum_steel_root: float
    minimum_steel_floor: float
    minimum_steel_yield_cap: float
    crack_reference: float
    crack_base: float
    crack_cap: float
    least_gap: float
    skin_depth: float
    cover_interior: float
    cover_weather_small: float
    cover_weather_large: float
    cover_ground: float
    cover_clause: str
    small_bar: float
    largest_stirrup: float
    tie_small: float
    tie_large: float
    tie_large_from: float
    tie_reach: float

    @property
    def system(self) -> UnitSystem:
        """Unit system that this edition computes in."""
        return SYSTEMS[self.units]


def _us(name: str, year: int, cap: float, fy_cap: float, cover_clause: str) -> Edition:
    return Edition(
        name=name,
        year=year,
        units="us",
        steel_modulus=29_000_000.0,
        concrete_modulus=57_000.0,
        strength_range=(2500.0, 15_000.0),
        beta1_start=4000.0,
        beta1_step=1000.0,
        beta1_end=8000.0,
        yield_range=(33_000.0, cap),
        eps_ty_permitted_for=60_000.0,
        minimum_steel_root=3.0,
        minimum_steel_floor=200.0,
        minimum_steel_yield_cap=fy_cap,
        crack_reference=40_000.0,
        crack_base=15.0,
        crack_cap=12.0,
        least_gap=1.0,
        skin_depth=36.0,
        cover_interior=1.5,
        cover_weather_small=1.5,
        cover_weather_large=2.0,
        cover_ground=3.0,
        cover_clause=cover_clause,
        small_bar=0.63,
        largest_stirrup=1.0,
        tie_small=0.375,
        tie_large=0.5,
        tie_large_from=1.28,
        tie_reach=6.0,
    )


def _si(name: str, year: int, cap: float, fy_cap: float, cover_clause: str) -> Edition:
    return Edition(
        name=name,
        year=year,
        units="si",
        steel_modulus=200_000.0,
        concrete_modulus=4700.0,
        strength_range=(17.0, 105.0),
        beta1_start=28.0,
        beta1_step=7.0,
        beta1_end=55.0,
        yield_range=(230.0, cap),
        eps_ty_permitted_for=420.0,
        minimum_steel_root=0.25,
        minimum_steel_floor=1.4,
        minimum_steel_yield_cap=fy_cap,
        crack_reference=280.0,
        crack_base=380.0,
        crack_cap=300.0,
        least_gap=25.0,
        skin_depth=900.0,
        cover_interior=40.0,
        cover_weather_small=40.0,
        cover_weather_large=50.0,
        cover_ground=75.0,
        cover_clause=cover_clause,
        small_bar=16.0,
        largest_stirrup=25.5,
        tie_small=9.5,
        tie_large=12.7,
        tie_large_from=32.5,
        tie_reach=150.0,
    )


_NO_CAP = float("inf")
EDITIONS: dict[str, Edition] = {
    edition.name: edition
    for edition in (
        _us("ACI 318-14", 2014, 80_000.0, _NO_CAP, "20.6.1.3.1"),
        _us("ACI 318-19", 2019, 100_000.0, 80_000.0, "20.5.1.3.1"),
        _si("ACI 318M-14", 2014, 550.0, _NO_CAP, "20.6.1.3.1"),
        _si("ACI 318M-19", 2019, 690.0, 550.0, "20.5.1.3.1"),
    )
}


def edition(name: str) -> Edition:
    """Find an edition by its name.

    Parameters
    ----------
    name : str
        For example ``ACI 318-19``.

    Returns
    -------
    Edition
        The edition's coefficients.

    Raises
    ------
    UnknownEditionError
        If the edition is not carried.
    """
    try:
        return EDITIONS[name]
    except KeyError:
        msg = f"code edition {name!r} is not carried; allowed: {', '.join(EDITIONS)}"
        raise UnknownEditionError(msg) from None
