"""Grades of reinforcing steel, and the editions of ACI 318 they may be used with.

The in-lb and the metric figure of a grade are two entries of its standard, each rounded on its
own; neither is computed from the other. `data/SOURCES.md` tells which figures were recalled.
"""

import functools
from dataclasses import dataclass

from catalogs._names import find
from catalogs._tables import Column, Row, read_builtin
from catalogs.errors import UnknownNameError

__all__ = ["SteelGrade", "steel_grade", "steel_grades"]

_FILE = "steel_grades_astm_csa_bs.csv"
_COLUMNS = (
    Column(name="name"),
    Column(name="alias"),
    Column(name="standard"),
    Column(name="yield_us", units=("psi",)),
    Column(name="ultimate_us", units=("psi",)),
    Column(name="yield_si", units=("MPa",)),
    Column(name="ultimate_si", units=("MPa",)),
    Column(name="editions"),
    Column(name="note"),
)


@dataclass(frozen=True, slots=True, kw_only=True)
class SteelGrade:
    """One grade of reinforcing steel.

    Parameters
    ----------
    name : str
        Name in this catalogue: standard and grade.
    standard : str
        Standard that specifies the bar.
    yield_us, ultimate_us : float or None
        Least yield and tensile strength in in-lb units; None if the standard has none. [psi]
    yield_si, ultimate_si : float
        Least yield and tensile strength in metric units. [MPa]
    editions : tuple of str
        Editions of the code that the grade may be used with.
    note : str
        What the user should know before choosing it; empty if nothing.
    alias : str
        Metric name that finds the same grade; empty if there is none.
    """

    name: str
    standard: str
    yield_us: float | None
    ultimate_us: float | None
    yield_si: float
    ultimate_si: float
    editions: tuple[str, ...]
    note: str
    alias: str = ""

    def yield_strength(self, system: str) -> float:
        """Return the specified yield strength fy in one system of units.

        Parameters
        ----------
        system : str
            ``us`` or ``si``.

        Returns
        -------
        float
            Yield strength as the standard lists it. [psi or MPa]

        Raises
        ------
        UnknownNameError
            If the grade is not listed in that system, or the system is not known.
        """
        strengths = {"us": self.yield_us, "si": self.yield_si}
        if system not in strengths:
            msg = f"system of units {system!r} is not known; allowed: us, si"
            raise UnknownNameError(msg, name=system, allowed=tuple(strengths))
        strength = strengths[system]
        if strength is None:
            listed = tuple(name for name, value in strengths.items() if value is not None)
            msg = (
                f"steel grade {self.name!r} is not listed in system {system!r}; "
                f"allowed: {', '.join(listed)}; hint: give fy instead of a grade"
            )
            raise UnknownNameError(msg, name=system, allowed=listed)
        return strength


def steel_grade(name: str) -> SteelGrade:
    """Find a grade by its name or its metric name.

    Parameters
    ----------
    name : str
        Name such as ``A615-60`` or ``A615-420``; outer blanks and case do not matter.

    Returns
    -------
    SteelGrade
        The grade.

    Raises
    ------
    UnknownNameError
        If no grade has that name; the hint names the nearest.
    """
    grades = {grade.name: grade for grade in steel_grades()}
    grades |= {grade.alias: grade for grade in steel_grades() if grade.alias}
    return find("steel grade", name, grades)


@functools.cache
def steel_grades() -> tuple[SteelGrade, ...]:
    """Return every grade, in the order of the table.

    Returns
    -------
    tuple of SteelGrade
        Grades by standard, then by strength.
    """
    return tuple(_grade(row) for row in read_builtin(_FILE, _COLUMNS).rows)


def _grade(row: Row) -> SteelGrade:
    return SteelGrade(
        name=row.text("name"),
        alias=row.text("alias"),
        standard=row.text("standard"),
        yield_us=row.value_or_none("yield_us"),
        ultimate_us=row.value_or_none("ultimate_us"),
        yield_si=row.value("yield_si"),
        ultimate_si=row.value("ultimate_si"),
        editions=tuple(edition.strip() for edition in row.text("editions").split(";")),
        note=row.text("note"),
    )
