"""Prices, fixing hours and carbon factors, from which a layout's cost and carbon follow.

A price list is a file of the user, or the built-in ``demo`` whose prices are invented and serve
to try the tool. A file ends in ``.toml`` or ``.csv`` and gives

========================  ======================================  ===================  ==========
key                       what                                    in-lb unit           SI unit
========================  ======================================  ===================  ==========
``system``                units of the list, ``us`` or ``si``     -                    -
``currency``              1 to 8 characters, such as USD          -                    -
``invented``              whether no real prices; false if absent -                    -
``steel``                 bars delivered, by grade and size       currency/lb          /kg
``labour_rate``           an hour of fixing                       currency/h           /h
``concrete_price``        concrete placed                         currency/yd3         /m3
``formwork_price``        formwork in contact                     currency/ft2         /m2
``fixing_hours``          spread, bars from 25 mm; may be absent  h/ton (2000 lb)      h/t
``steel_carbon``          spread; may be absent                   kgCO2e/t             kgCO2e/t
``concrete_carbon``       spread; may be absent                   kgCO2e/m3            kgCO2e/m3
========================  ======================================  ===================  ==========

TOML: one line a key; ``steel`` is a number, or one ``[[steel]]`` table a price with ``price`` and,
where it is not for all, ``grade`` and ``size``; a spread is a table with ``low``, ``typical``,
``high`` and ``source``. `data/prices_demo_us.toml` shows all of it with comments.

CSV: columns key, size, grade, value, unit, source with a units row of dashes; a row a figure, its
unit written out with the currency (``USD/lb``), a spread as three rows ``fixing_hours.low`` and so
on. The source column is free text, needed for spreads. `data/prices_demo_si.csv` shows all of it.

Of several steel prices the most specific wins: grade and size, then grade, then size, then the
one for all. Spreads left out are the published ones of `data/SOURCES.md`.
"""

import functools
import math
from collections.abc import Mapping
from dataclasses import dataclass, field
from pathlib import Path

from catalogs._names import find, key
from catalogs._price_entries import PriceEntries, builtin_entries, read_entries
from catalogs._price_forms import ANY
from catalogs._spreads import BANDS, KG_PER_LB, Band, Spread, published_carbon, published_hours
from catalogs.bars import Bar, BarCatalog
from catalogs.errors import CatalogError, UnknownNameError
from catalogs.steel_grades import steel_grade

__all__ = ["BANDS", "BUILTIN_PRICE_LISTS", "Band", "PriceList", "Spread", "price_list"]

_DEMO_FILES = {"us": "prices_demo_us.toml", "si": "prices_demo_si.csv"}
BUILTIN_PRICE_LISTS: tuple[str, ...] = ("demo",)

# Mass a fixing hour is stated for: short ton [lb] or tonne [kg].
_TON = {"us": 2000.0, "si": 1000.0}
_MASS = {"us": "lb", "si": "kg"}
_RATES = ("labour_rate", "concrete_price", "formwork_price")


@dataclass(frozen=True, slots=True, kw_only=True)
class PriceList:
    """What steel, fixing, concrete and formwork cost, and the carbon of steel and concrete.

    Parameters
    ----------
    name : str
        Name of a built-in list, or the name of the file.
    currency : str
        Currency of every price, 1 to 8 characters.
    system : str
        Units of the list, ``us`` or ``si``.
    invented : bool
        Whether the prices are made up and say nothing about any market.
    steel : mapping of (str, str) to float
        Price of bars by grade and size, ``*`` for any. [currency/lb or currency/kg]
    labour_rate : float
        Price of an hour of fixing. [currency/h]
    fixing_hours : Spread
        Hours of fixing bars of 25 mm and above in beams. [h/ton (2000 lb) or h/t]
    concrete_price : float
        Price of concrete. [currency/yd3 or currency/m3]
    formwork_price : float
        Price of formwork. [currency/ft2 or currency/m2]
    steel_carbon : Spread
        Embodied carbon of bars, whatever the system. [kgCO2e/t]
    concrete_carbon : Spread
        Embodied carbon of concrete, whatever the system. [kgCO2e/m3]
    """

    name: str
    currency: str
    system: str
    invented: bool
    # No part of the hash, so that a list can be an argument of cached functions.
    steel: Mapping[tuple[str, str], float] = field(hash=False)
    labour_rate: float
    fixing_hours: Spread
    concrete_price: float
    formwork_price: float
    steel_carbon: Spread
    concrete_carbon: Spread

    def __post_init__(self) -> None:
        """Refuse a list that no cost could be computed from."""
        if self.system not in _TON:
            msg = f"price list {self.name}: system {self.system!r} is not known; allowed: us, si"
            raise CatalogError(msg)
        for name in _RATES:
            value = getattr(self, name)
            if not (math.isfinite(value) and value >= 0.0):
                msg = f"price list {self.name}: {name} {value!r}; allowed: a finite number from 0"
                raise CatalogError(msg)
        prices = list(self.steel.values())
        if not prices or not all(math.isfinite(price) and price > 0.0 for price in prices):
            msg = f"price list {self.name}: steel {prices!r}; allowed: finite numbers above 0"
            raise CatalogError(msg)

    def steel_price(self, bar: Bar, grade_name: str) -> float:
        """Return the price of a mass of bars: the most specific one of the list.

        Parameters
        ----------
        bar : Bar
            The size.
        grade_name : str
            Name or metric name of the grade; empty if the steel is given by its strength alone,
            which leaves the prices for any grade.

        Returns
        -------
        float
            Price per mass. [currency/lb or currency/kg]

        Raises
        ------
        UnknownNameError
            If the grade is not known, or the list has no price for the bar.
        CatalogError
            If the bar is in the other system of units.
        """
        self._check(bar)
        grade = steel_grade(grade_name).name if grade_name.strip() else ANY
        size = key(bar.designation)
        by_key = {(grade, key(size)): price for (grade, size), price in self.steel.items()}
        for wanted in ((grade, size), (grade, ANY), (ANY, size), (ANY, ANY)):
            if wanted in by_key:
                return by_key[wanted]
        allowed = tuple(f"{size} of {grade}" for grade, size in self.steel)
        name = f"{bar.designation} of {grade}"
        msg = (
            f"price list {self.name}: no steel price for {name}; allowed: {', '.join(allowed)}; "
            "hint: add a price without grade and size, it holds for all others"
        )
        raise UnknownNameError(msg, name=name, allowed=allowed)

    def placed_cost_per_length(self, bar: Bar, grade_name: str, band: Band) -> float:
        """Return the cost of a length of one bar: its steel and the labour of fixing it.

        Parameters
        ----------
        bar : Bar
            The size.
        grade_name : str
            As for `steel_price`.
        band : {"low", "typical", "high"}
            Which of the fixing hours.

        Returns
        -------
        float
            Cost per length. [currency/ft or currency/m]

        Notes
        -----
        mass (price + rate hours r / ton), with r the fixing labour of the size relative to bars
        of 25 mm and above, see `fixing_labour`. Laps, waste and hooks are no part of it.
        """
        hours = self.fixing_hours.at(band) * bar.relative_labour / _TON[self.system]
        return bar.mass * (self.steel_price(bar, grade_name) + self.labour_rate * hours)

    def steel_carbon_per_length(self, bar: Bar, band: Band) -> float:
        """Return the embodied carbon of a length of one bar.

        Parameters
        ----------
        bar : Bar
            The size.
        band : {"low", "typical", "high"}
            Which of the factors.

        Returns
        -------
        float
            Carbon per length. [kgCO2e/ft or kgCO2e/m]
        """
        self._check(bar)
        kilograms = bar.mass * (KG_PER_LB if self.system == "us" else 1.0)
        return kilograms * self.steel_carbon.at(band) / 1000.0

    def concrete_carbon_per_volume(self, band: Band) -> float:
        """Return the embodied carbon of a cubic metre of concrete, whatever the system.

        Parameters
        ----------
        band : {"low", "typical", "high"}
            Which of the factors.

        Returns
        -------
        float
            Carbon per volume. [kgCO2e/m3]
        """
        return self.concrete_carbon.at(band)

    def sizes_not_in(self, catalog: BarCatalog) -> tuple[str, ...]:
        """Return the sizes that have a price here but do not exist in a catalogue.

        A misspelt size is no fault of the list alone: its bars would get the price for all sizes.

        Parameters
        ----------
        catalog : BarCatalog
            The sizes to choose from.

        Returns
        -------
        tuple of str
            Their designations as the list writes them, sorted.
        """
        known = {ANY, *(key(bar.designation) for bar in catalog.bars)}
        return tuple(sorted({size for _, size in self.steel if key(size) not in known}))

    def _check(self, bar: Bar) -> None:
        if bar.system != self.system:
            msg = (
                f"price list {self.name}: bar {bar.designation} is in system {bar.system!r}; "
                f"allowed: {self.system!r}, prices are per {_MASS[self.system]}"
            )
            raise CatalogError(msg)


def price_list(name_or_path: str | Path, system: str, base: Path | None = None) -> PriceList:
    """Return the built-in price list, or read one from a TOML or CSV file.

    Parameters
    ----------
    name_or_path : str or Path
        A name of `BUILTIN_PRICE_LISTS`, or the path of a file ending in ``.toml`` or ``.csv`` as
        the module describes it.
    system : str
        Units of the job, ``us`` or ``si``; those of the file have to be the same.
    base : Path, optional
        Directory that a relative path starts from; the working directory if not given.

    Returns
    -------
    PriceList
        The list, checked.

    Raises
    ------
    UnknownNameError
        If it is neither a built-in name nor a name of such a file, or the system is not known.
    TableError
        If the file cannot be read, or a key is missing, not known or cannot be right.
    """
    units = find("system of units", system, {known: known for known in _TON})
    name = str(name_or_path)
    if key(name).endswith((".toml", ".csv")):
        path = Path(name_or_path)
        full = path if base is None else base / path
        return _list(path.name, read_entries(full, units))
    builtins = {known: known for known in BUILTIN_PRICE_LISTS}
    also = ", or a path ending in .toml or .csv"
    return _builtin(find("price list", name, builtins, also=also), units)


@functools.cache
def _builtin(name: str, system: str) -> PriceList:
    return _list(name, builtin_entries(_DEMO_FILES[system], system))


def _list(name: str, entries: PriceEntries) -> PriceList:
    carbon = published_carbon()
    return PriceList(
        name=name,
        currency=entries.currency,
        system=entries.system,
        invented=entries.invented,
        steel=entries.steel,
        labour_rate=entries.rates["labour_rate"],
        fixing_hours=entries.spreads.get("fixing_hours") or published_hours(entries.system),
        concrete_price=entries.rates["concrete_price"],
        formwork_price=entries.rates["formwork_price"],
        steel_carbon=entries.spreads.get("steel_carbon") or carbon["steel"],
        concrete_carbon=entries.spreads.get("concrete_carbon") or carbon["concrete"],
    )
