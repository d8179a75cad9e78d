"""Reinforcing-bar sizes: the built-in catalogues and a user's own.

A catalogue is in one system of units, stated by the units row of its table: in, in^2 and lb/ft
(``us``), or mm, mm^2 and kg/m (``si``). Figures are the nominal ones of the standards, as
tabulated; `data/SOURCES.md` names standard and table.
"""

import functools
import math
from dataclasses import dataclass
from pathlib import Path

from catalogs._names import find, key
from catalogs._tables import Column, Row, Table, read_builtin, read_file, table_error
from catalogs.errors import CatalogError, UnknownNameError
from catalogs.labour import fixing_labour

__all__ = ["BUILTIN_CATALOGS", "Bar", "BarCatalog", "bar_catalog"]

_BUILTIN_FILES = {
    "astm-inch": "bars_astm_a615_inch.csv",
    "astm-metric": "bars_astm_a615_metric.csv",
    "csa": "bars_csa_g30_18.csv",
    "en10080": "bars_en_10080_2005.csv",
}
BUILTIN_CATALOGS: tuple[str, ...] = tuple(_BUILTIN_FILES)

_UNITS = {"us": ("in", "in^2", "lb/ft"), "si": ("mm", "mm^2", "kg/m")}
_MEASURES = ("diameter", "area", "mass")
_COLUMNS = (
    Column(name="designation"),
    *(
        Column(name=name, units=(us, si))
        for name, us, si in zip(_MEASURES, _UNITS["us"], _UNITS["si"], strict=True)
    ),
)

_MM_PER_INCH = 25.4
# Mass of a bar a unit of length and area: 7850 kg/m3, and 490 lb/ft3 over 144 in^2/ft^2.
_DENSITY = {"us": 490.0 / 144.0, "si": 7850.0e-6}
# Standards round areas and masses; the widest rounding of the built-in tables is 2 % in area.
_AREA_TOLERANCE = 0.04
_MASS_TOLERANCE = 0.07
_DIAMETER_RANGE_MM = (3.0, 80.0)
_MAX_BARS = 60
_MAX_DESIGNATION = 20
# A layout is written "2 #9 + 2 #7 / 2 #7": these two signs would make it ambiguous.
_RESERVED = "+/"
# A diameter that went through a unit conversion still finds the size it names.
_SAME_DIAMETER = 1e-9


@dataclass(frozen=True, slots=True, kw_only=True)
class Bar:
    """One size of reinforcing bar.

    Parameters
    ----------
    designation : str
        Name of the size, as the standard writes it.
    diameter : float
        Nominal diameter. [in or mm]
    area : float
        Nominal cross-sectional area, as tabulated. [in^2 or mm^2]
    mass : float
        Nominal mass (weight) per length. [lb/ft or kg/m]
    position : int
        Place in its catalogue, from 0, thinnest first. [-]
    system : str
        Units of the figures, ``us`` or ``si``.
    """

    designation: str
    diameter: float
    area: float
    mass: float
    position: int
    system: str

    def __post_init__(self) -> None:
        """Refuse a bar that no calculation could use."""
        if self.system not in _UNITS:
            msg = f"bar {self.designation}: system {self.system!r} is not known; allowed: us, si"
            raise CatalogError(msg)
        for name in _MEASURES:
            value = getattr(self, name)
            if not (math.isfinite(value) and value > 0.0):
                msg = f"bar {self.designation}: {name} {value!r}; allowed: a finite number above 0"
                raise CatalogError(msg)

    @property
    def diameter_mm(self) -> float:
        """Nominal diameter, whatever the system [mm]."""
        return self.diameter * _MM_PER_INCH if self.system == "us" else self.diameter

    @property
    def relative_labour(self) -> float:
        """Fixing labour per mass relative to the thickest bars [-]; see `fixing_labour`."""
        return fixing_labour(self.diameter_mm)


@dataclass(frozen=True, slots=True, kw_only=True)
class BarCatalog:
    """The bar sizes to choose from, thinnest first.

    Parameters
    ----------
    name : str
        Name of a built-in catalogue, or the name of the file.
    system : str
        Units of every bar, ``us`` or ``si``.
    bars : tuple of Bar
        The sizes, diameters ascending.
    """

    name: str
    system: str
    bars: tuple[Bar, ...]

    def __post_init__(self) -> None:
        """Refuse an empty catalogue and one of mixed units."""
        if not self.bars or any(bar.system != self.system for bar in self.bars):
            msg = f"catalogue {self.name}: allowed: at least one bar, all of system {self.system!r}"
            raise CatalogError(msg)

    def bar(self, designation: str) -> Bar:
        """Find a size by its designation.

        Parameters
        ----------
        designation : str
            Exact designation; outer blanks and case do not matter.

        Returns
        -------
        Bar
            The size of that name.

        Raises
        ------
        UnknownNameError
            If the catalogue has no such size; the hint names the nearest.
        """
        by_designation = {bar.designation: bar for bar in self.bars}
        return find(f"catalogue {self.name}: bar", designation, by_designation)

    def smallest_from(self, diameter: float) -> Bar:
        """Find the thinnest size that is not thinner than a diameter.

        Parameters
        ----------
        diameter : float
            Least nominal diameter. [in or mm]

        Returns
        -------
        Bar
            The next size up, or the size of just that diameter.

        Raises
        ------
        UnknownNameError
            If every size is thinner.
        """
        for bar in self.bars:
            if bar.diameter >= diameter * (1.0 - _SAME_DIAMETER):
                return bar
        thickest = self.bars[-1]
        unit = _UNITS[self.system][0]
        msg = (
            f"catalogue {self.name}: no bar from {diameter:g} {unit}; "
            f"allowed: up to {thickest.diameter:g} {unit} ({thickest.designation})"
        )
        allowed = [bar.designation for bar in self.bars]
        raise UnknownNameError(msg, name=f"{diameter:g} {unit}", allowed=allowed)


def bar_catalog(name_or_path: str | Path, base: Path | None = None) -> BarCatalog:
    """Return a built-in bar catalogue, or read one from a CSV file.

    Parameters
    ----------
    name_or_path : str or Path
        A name of `BUILTIN_CATALOGS`, or the path of a file ending in ``.csv`` with the columns
        designation, diameter, area, mass and a row of units under the header.
    base : Path, optional
        Directory that a relative path starts from; the working directory if not given.

    Returns
    -------
    BarCatalog
        The catalogue, checked.

    Raises
    ------
    UnknownNameError
        If it is neither a built-in name nor a name ending in ``.csv``.
    TableError
        If the file cannot be read or one of its figures cannot be right.
    """
    name = str(name_or_path)
    if key(name).endswith(".csv"):
        path = Path(name_or_path)
        table = read_file(path if base is None else base / path, _COLUMNS)
        return _catalog(path.name, table)
    builtins = {known: known for known in BUILTIN_CATALOGS}
    return _builtin(find("bar catalogue", name, builtins, also=", or a path ending in .csv"))


@functools.cache
def _builtin(name: str) -> BarCatalog:
    return _catalog(name, read_builtin(_BUILTIN_FILES[name], _COLUMNS))


def _catalog(name: str, table: Table) -> BarCatalog:
    system = _system(table)
    if len(table.rows) > _MAX_BARS:
        raise table_error(table.file, f"has {len(table.rows)} bars; allowed: 1 to {_MAX_BARS}")
    bars: list[Bar] = []
    for row in table.rows:
        _check_designation(row, bars)
        bar = Bar(
            designation=row.text("designation"),
            diameter=_positive(row, "diameter"),
            area=_positive(row, "area"),
            mass=_positive(row, "mass"),
            position=len(bars),
            system=system,
        )
        _check_figures(row, bar, bars)
        bars.append(bar)
    return BarCatalog(name=name, system=system, bars=tuple(bars))


def _system(table: Table) -> str:
    units = tuple(table.units[name] for name in _MEASURES)
    for system, expected in _UNITS.items():
        if units == expected:
            return system
    choices = " or ".join(",".join(expected) for expected in _UNITS.values())
    problem = f"mixed units {','.join(units)}; allowed: {choices}"
    raise table_error(table.file, problem, row=table.units_row)


def _positive(row: Row, column: str) -> float:
    value = row.value(column)
    if value <= 0.0:
        raise row.error(column=column, rule="allowed: a number above 0")
    return value


def _check_designation(row: Row, above: list[Bar]) -> None:
    designation = row.text("designation")
    if not (
        0 < len(designation) <= _MAX_DESIGNATION
        and designation.isprintable()
        and not any(sign in designation for sign in _RESERVED)
    ):
        rule = f"allowed: 1 to {_MAX_DESIGNATION} printable characters without + and /"
        raise row.error(column="designation", rule=rule)
    if key(designation) in {key(bar.designation) for bar in above}:
        rule = "allowed: every designation once, whatever its case"
        raise row.error(column="designation", rule=rule)


def _check_figures(row: Row, bar: Bar, above: list[Bar]) -> None:
    diameter_unit, area_unit, mass_unit = _UNITS[bar.system]
    low, high = _DIAMETER_RANGE_MM
    if not low <= bar.diameter_mm <= high:
        rule = f"allowed: {low:g} to {high:g} mm"
        hint = f"the file gives diameters in {diameter_unit}"
        raise row.error(column="diameter", rule=rule, hint=hint)
    if above and bar.diameter <= above[-1].diameter:
        rule = f"allowed: above {above[-1].diameter:g} {diameter_unit} of {above[-1].designation}"
        raise row.error(column="diameter", rule=rule, hint="list the bars from thin to thick")
    circle = math.pi / 4.0 * bar.diameter**2
    if abs(bar.area - circle) > _AREA_TOLERANCE * circle:
        rule = f"allowed: within {_AREA_TOLERANCE:.0%} of pi/4 d^2 = {circle:.4g} {area_unit}"
        raise row.error(column="area", rule=rule)
    solid = bar.area * _DENSITY[bar.system]
    if abs(bar.mass - solid) > _MASS_TOLERANCE * solid:
        rule = (
            f"allowed: within {_MASS_TOLERANCE:.0%} of area times the density of steel "
            f"= {solid:.4g} {mass_unit}"
        )
        raise row.error(column="mass", rule=rule)
