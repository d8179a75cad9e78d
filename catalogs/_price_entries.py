"""What the entries of a price list say, checked one by one.

`catalogs.prices` describes the keys. A fault is reported with the file, the place in it, the
key, the value and what is allowed.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path

from catalogs._names import key, shown
from catalogs._price_forms import ANY, Entry, key_error, near, read_builtin_file, read_user_file
from catalogs._spreads import BANDS, Spread
from catalogs._tables import table_error
from catalogs.errors import CatalogError, UnknownNameError
from catalogs.steel_grades import steel_grade

_PER = {
    "us": {"steel": "lb", "labour_rate": "h", "concrete_price": "yd3", "formwork_price": "ft2"},
    "si": {"steel": "kg", "labour_rate": "h", "concrete_price": "m3", "formwork_price": "m2"},
}
_RATES = ("labour_rate", "concrete_price", "formwork_price")
_SPREAD_UNITS = {
    "us": {"fixing_hours": "h/ton", "steel_carbon": "kgCO2e/t", "concrete_carbon": "kgCO2e/m3"},
    "si": {"fixing_hours": "h/t", "steel_carbon": "kgCO2e/t", "concrete_carbon": "kgCO2e/m3"},
}
# Wide of every published figure: they find a slip of the unit, such as carbon per kg.
_SPREAD_LIMITS = {
    "fixing_hours": (0.5, 500.0),
    "steel_carbon": (10.0, 10_000.0),
    "concrete_carbon": (5.0, 2_000.0),
}
_REQUIRED = ("system", "currency", "steel", *_RATES)
_KNOWN = (
    *_REQUIRED,
    "invented",
    *(f"{spread}.{part}" for spread in _SPREAD_LIMITS for part in (*BANDS, "source")),
)
_MAX_PRICE = 1e9
_MAX_CURRENCY = 8
_MAX_SIZE = 20
_MAX_SOURCE = 300


@dataclass(frozen=True, slots=True, kw_only=True)
class PriceEntries:
    """Everything that a price list gives, checked."""

    system: str
    currency: str
    invented: bool
    steel: Mapping[tuple[str, str], float]
    rates: Mapping[str, float]
    spreads: Mapping[str, Spread]


def read_entries(path: Path, system: str) -> PriceEntries:
    """Read a price list of the user.

    Parameters
    ----------
    path : Path
        A file ending in ``.toml`` or ``.csv``.
    system : str
        Units that the list has to be in, ``us`` or ``si``.

    Returns
    -------
    PriceEntries
        Its entries.

    Raises
    ------
    TableError
        If the file cannot be read or an entry cannot be right.
    """
    file, entries = read_user_file(path)
    return _checked(file, entries, system)


def builtin_entries(file: str, system: str) -> PriceEntries:
    """Read a price list that comes with this package."""
    return _checked(file, read_builtin_file(file), system)


def _checked(file: str, entries: Sequence[Entry], system: str) -> PriceEntries:
    single = _by_key(entries)
    missing = [name for name in _REQUIRED if name not in single]
    if missing:
        problem = f"key {missing[0]!r} is missing; allowed: a list with {', '.join(_REQUIRED)}"
        raise table_error(file, problem)
    stated = single["system"]
    if stated.value != system:
        per = ", ".join(f"per {unit}" for unit in _PER[system].values() if unit != "h")
        rule = f"allowed: {system!r}, the units of the job"
        raise stated.error(rule, f"give the prices {per}")
    currency = single["currency"].text(longest=_MAX_CURRENCY, blanks=False)
    units = {name: f"{currency}/{per}" for name, per in _PER[system].items()}
    for spread, unit in _SPREAD_UNITS[system].items():
        units |= {f"{spread}.{band}": unit for band in BANDS}
    for entry in entries:
        _check_unit(entry, units.get(entry.key, "-"))
    invented = single["invented"].value if "invented" in single else False
    if not isinstance(invented, bool):
        rule = "allowed: true or false, without quotes"
        raise single["invented"].error(rule)
    return PriceEntries(
        system=system,
        currency=currency,
        invented=invented,
        steel=_steel(entries, units["steel"]),
        rates={name: single[name].number(0.0, _MAX_PRICE, units[name]) for name in _RATES},
        spreads={
            name: _spread(name, single, unit)
            for name, unit in _SPREAD_UNITS[system].items()
            if any(f"{name}.{part}" in single for part in (*BANDS, "source"))
        },
    )


def _by_key(entries: Sequence[Entry]) -> Mapping[str, Entry]:
    """Entries by key, each known and given once; of the steel prices one."""
    single: dict[str, Entry] = {}
    for entry in entries:
        if entry.key not in _KNOWN:
            problem = f"unknown key {shown(entry.key)}; allowed: {', '.join(_KNOWN)}"
            number, column = (entry.row.number, "key") if entry.row else (None, None)
            guess = near(entry.key, _KNOWN)
            raise table_error(entry.file, problem, guess, row=number, column=column)
        if entry.key != "steel":
            if entry.key in single:
                rule = "allowed: every key but steel once"
                raise entry.error(rule)
            for part in ("grade", "size"):
                if getattr(entry, part) != ANY:
                    rule = f"allowed: a {part} for steel alone"
                    raise entry.error(rule, part=part)
        single[entry.key] = entry
    return single


def _check_unit(entry: Entry, unit: str) -> None:
    if entry.row is not None and entry.row.text("unit") != unit:
        rule = f"allowed: {unit}"
        raise entry.error(rule, part="unit")


def _steel(entries: Sequence[Entry], unit: str) -> Mapping[tuple[str, str], float]:
    prices: dict[tuple[str, str], float] = {}
    taken: set[tuple[str, str]] = set()
    for entry in entries:
        if entry.key != "steel":
            continue
        grade = entry.text(longest=_MAX_SIZE, part="grade")
        if grade != ANY:
            try:
                grade = steel_grade(grade).name
            except UnknownNameError as error:
                rule = f"allowed: {ANY}, {', '.join(error.allowed)}"
                raise entry.error(rule, near(grade, error.allowed), part="grade") from error
        size = entry.text(longest=_MAX_SIZE, part="size")
        if (grade, key(size)) in taken:
            rule = f"allowed: one price for size {size} of grade {grade}"
            raise entry.error(rule)
        taken.add((grade, key(size)))
        prices[grade, size] = entry.number(1.0 / _MAX_PRICE, _MAX_PRICE, unit)
    return prices


def _spread(name: str, single: Mapping[str, Entry], unit: str) -> Spread:
    low_limit, high_limit = _SPREAD_LIMITS[name]
    values: list[float] = []
    sources: list[str] = []
    given = next(entry for part, entry in single.items() if part.startswith(f"{name}."))
    for band in BANDS:
        if f"{name}.{band}" not in single:
            problem = f"key '{name}.{band}' is missing; allowed: all of {', '.join(BANDS)}"
            raise table_error(given.file, problem, f"leave {name} out for the published figures")
        entry = single[f"{name}.{band}"]
        values.append(entry.number(low_limit, high_limit, unit))
        if entry.source and entry.source not in sources:
            sources.append(entry.text(longest=_MAX_SOURCE, part="source"))
    if f"{name}.source" in single:
        sources.append(single[f"{name}.source"].text(longest=_MAX_SOURCE))
    low, typical, high = values
    try:
        return Spread(low=low, typical=typical, high=high, source="; ".join(sources))
    except CatalogError as error:
        raise key_error(given.file, name, str(error)) from error
