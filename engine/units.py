"""Quantities as the trade writes them, and the two consistent systems used inside.

Everything inside the engine is a plain float in one of two systems, chosen by the edition
of the code and never mixed: ``us`` (in, lbf, psi) and ``si`` (mm, N, MPa). Texts with
units are turned into those floats here, and only here; exact rational factors are used so
that ``"24 in"`` becomes 24.0 and not its neighbour.
"""

from __future__ import annotations

import difflib
import math
import re
from dataclasses import dataclass
from fractions import Fraction

from engine.errors import QuantityError

_INCH = Fraction(254, 10_000)  # [m], exact by definition (NIST SP 811, appendix B)
_FOOT = 12 * _INCH
_POUND_FORCE = Fraction("4.4482216152605")  # [N], exact by definition (NIST SP 811, B.8)
_KIP = 1000 * _POUND_FORCE
_PSI = _POUND_FORCE / _INCH**2

# Kind of quantity -> spelling -> size in SI base units.
_UNITS: dict[str, dict[str, Fraction]] = {
    "length": {
        "in": _INCH,
        "ft": _FOOT,
        "mm": Fraction(1, 1000),
        "cm": Fraction(1, 100),
        "m": Fraction(1),
    },
    "force": {
        "lbf": _POUND_FORCE,
        "kip": _KIP,
        "N": Fraction(1),
        "kN": Fraction(1000),
        "MN": Fraction(1_000_000),
    },
    "moment": {
        "kip*ft": _KIP * _FOOT,
        "kip*in": _KIP * _INCH,
        "lbf*ft": _POUND_FORCE * _FOOT,
        "lbf*in": _POUND_FORCE * _INCH,
        "kN*m": Fraction(1000),
        "MN*m": Fraction(1_000_000),
        "N*m": Fraction(1),
        "N*mm": Fraction(1, 1000),
    },
    "stress": {
        "psi": _PSI,
        "ksi": 1000 * _PSI,
        "Pa": Fraction(1),
        "kPa": Fraction(1000),
        "MPa": Fraction(1_000_000),
        "GPa": Fraction(1_000_000_000),
        "N/mm^2": Fraction(1_000_000),
    },
    "force_per_length": {
        "kip/ft": _KIP / _FOOT,
        "lbf/ft": _POUND_FORCE / _FOOT,
        "lbf/in": _POUND_FORCE / _INCH,
        "kN/m": Fraction(1000),
        "N/m": Fraction(1),
        "N/mm": Fraction(1000),
    },
    # Weight of a volume, as loads count it; a mass per volume is not taken.
    "density": {
        "lbf/ft^3": _POUND_FORCE / _FOOT**3,
        "lbf/in^3": _POUND_FORCE / _INCH**3,
        "kN/m^3": Fraction(1000),
        "N/mm^3": Fraction(10**9),
    },
}

# Other spellings met on drawings and in calculations; compared without case.
_SPELT_ALSO = {
    "in": '" inch inches',
    "ft": "' foot feet",
    "lbf": "lb",
    "kip": "kips k",
    "kip*ft": "k*ft ft*k ft*kip kips*ft ft*kips",
    "kip*in": "k*in in*kip kips*in in*kips",
    "lbf*ft": "lb*ft ft*lb ft*lbf",
    "lbf*in": "lb*in in*lb in*lbf",
    "N/mm^2": "n/mm2",
    "kip/ft": "k/ft kips/ft klf",
    "lbf/ft": "lb/ft plf",
    "lbf/in": "lb/in",
    "lbf/ft^3": "pcf lb/ft^3 lb/ft3 lbf/ft3",
    "kN/m^3": "kn/m3",
}
_ALIASES = {alias: unit for unit, text in _SPELT_ALSO.items() for alias in text.split()}
_BY_LOWER = {name.lower(): name for kind in _UNITS.values() for name in kind}
# "MN" and "mN", "MPa" and "mPa" differ by case alone; only the spelling of the table is taken.
_CASE_MATTERS = {"MN", "MN*m", "MPa"}

# Typographic characters as word processors write them.
_SPELLINGS = str.maketrans({"’": "'", "′": "'", "”": '"', "″": '"', "−": "-"})

_LARGEST = 10**18  # inner units
_LONGEST = 60  # no honest quantity is longer; keeps hostile input cheap
_UNSIGNED = r"(?:\d{1,15}(?:\.\d{0,15})?|\.\d{1,15})(?:[eE][+-]?\d{1,2})?"
_NUMBER = rf"(?:\d{{1,6}}[ -]\d{{1,4}}/\d{{1,4}}|\d{{1,6}}/\d{{1,4}}|{_UNSIGNED})"
_SIMPLE = re.compile(rf"^([+-]?)\s*({_NUMBER})\s*([^\d\s].*)$", re.ASCII)
_BARE = re.compile(rf"^([+-]?)\s*({_NUMBER})$", re.ASCII)
_FEET_INCHES = re.compile(
    rf"^([+-]?)\s*({_UNSIGNED})\s*(?:ft|feet|foot|')\s*-?\s*({_NUMBER})\s*(?:in|inch|inches|\")$",
    re.IGNORECASE | re.ASCII,
)


@dataclass(frozen=True, slots=True, kw_only=True)
class UnitSystem:
    """One consistent system: what is computed in, and what people read.

    Attributes
    ----------
    name : str
        ``us`` or ``si``.
    inner : dict
        Kind of quantity -> unit of the floats inside.
    trade : dict
        Kind of quantity -> unit of files and reports.
    """

    name: str
    inner: dict[str, str]
    trade: dict[str, str]

    def to_trade(self, kind: str, value: float) -> float:
        """Convert an inner value to the trade's unit of its kind.

        Parameters
        ----------
        kind : str
            Kind of quantity; kinds without two units (area, strain, ...) pass unchanged.
        value : float
            Value in the inner unit.

        Returns
        -------
        float
            Value in the trade's unit.
        """
        if kind not in self.inner or self.inner[kind] == self.trade[kind]:
            return value
        units = _UNITS[kind]
        ratio = units[self.inner[kind]] / units[self.trade[kind]]
        # Two whole numbers keep round figures round (4920000 lbf*in -> 410 kip*ft).
        return value * ratio.numerator / ratio.denominator


US = UnitSystem(
    name="us",
    inner={
        "length": "in",
        "force": "lbf",
        "moment": "lbf*in",
        "stress": "psi",
        "force_per_length": "lbf/in",
        "density": "lbf/in^3",
    },
    trade={
        "length": "in",
        "force": "kip",
        "moment": "kip*ft",
        "stress": "psi",
        "force_per_length": "kip/ft",
        "density": "lbf/ft^3",
        "area": "in^2",
        "mass_per_length": "lb/ft",
    },
)
SI = UnitSystem(
    name="si",
    inner={
        "length": "mm",
        "force": "N",
        "moment": "N*mm",
        "stress": "MPa",
        "force_per_length": "N/mm",
        "density": "N/mm^3",
    },
    trade={
        "length": "mm",
        "force": "kN",
        "moment": "kN*m",
        "stress": "MPa",
        "force_per_length": "kN/m",
        "density": "kN/m^3",
        "area": "mm^2",
        "mass_per_length": "kg/m",
    },
)
SYSTEMS = {"us": US, "si": SI}


def plain(value: float) -> str:
    """Write a number with four significant digits and no exponent.

    Parameters
    ----------
    value : float
        Any number.

    Returns
    -------
    str
        For example ``40000``, ``21.44``, ``0.005``.
    """
    if value == 0.0 or not math.isfinite(value):
        return f"{value:g}"
    decimals = max(0, 3 - math.floor(math.log10(abs(value))))
    text = f"{value:.{decimals}f}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def _normal_unit(text: str) -> str:
    """Bring a unit's spelling to the table's: ``kip-ft``, ``kip ft`` and ``k.ft`` are one."""
    joined = re.sub(r"\s*/\s*", "/", text.strip())
    joined = re.sub(r"\s*[-*·⋅.\s]\s*", "*", joined)
    if joined in _CASE_MATTERS:
        return joined
    lower = joined.lower()
    if lower in _ALIASES:
        return _ALIASES[lower]
    known = _BY_LOWER.get(lower, joined)
    return joined if known in _CASE_MATTERS else known


def _number(text: str) -> Fraction:
    """Read ``3/4``, ``1 1/2``, ``1-1/2``, ``24`` or ``2.5e1`` exactly."""
    if "/" in text:
        whole, _, fraction = text.replace("-", " ").rpartition(" ")
        top, bottom = fraction.split("/")
        if int(bottom) == 0:
            msg = f"the fraction {text!r} divides by zero"
            raise QuantityError(msg)
        return Fraction(int(whole or 0)) + Fraction(int(top), int(bottom))
    return Fraction(text)


def _example(kind: str, system: UnitSystem) -> str:
    examples = {
        ("length", "us"): '"24 in", "3/4 in" or "26 ft 6 in"',
        ("length", "si"): '"600 mm" or "0.6 m"',
        ("moment", "us"): '"410 kip*ft"',
        ("moment", "si"): '"550 kN*m"',
        ("stress", "us"): '"4000 psi" or "60 ksi"',
        ("stress", "si"): '"28 MPa"',
        ("force", "us"): '"12 kip"',
        ("force", "si"): '"50 kN"',
        ("force_per_length", "us"): '"1.2 kip/ft" or "800 plf"',
        ("force_per_length", "si"): '"18 kN/m"',
        ("density", "us"): '"150 pcf"',
        ("density", "si"): '"24 kN/m^3"',
    }
    return examples[kind, system.name]


def _words(kind: str) -> str:
    """Name of a kind in a sentence."""
    return {"force_per_length": "force per length", "density": "weight per volume"}.get(kind, kind)


def unit_named(text: str, kind: str, system: UnitSystem) -> str:
    """Find a unit by any of its spellings, as a table states it over a column.

    Parameters
    ----------
    text : str
        For example ``kip-ft``.
    kind : str
        Kind of quantity that it has to be a unit of.
    system : UnitSystem
        System that the example in a message is written in.

    Returns
    -------
    str
        The unit as `parse_quantity` takes it for plain numbers.

    Raises
    ------
    QuantityError
        If it is no unit of that kind.
    """
    unit = _normal_unit(text.translate(_SPELLINGS))
    if unit not in _UNITS[kind]:
        example = system.trade[kind]
        expected = f"expected a unit of {_words(kind)} such as {example}"
        raise QuantityError(_wrong_unit(text, unit, kind, expected))
    return unit


def _show(text: object) -> str:
    try:
        shown = repr(text)
    except ValueError:  # a whole number with more digits than Python prints
        shown = "a number of absurd length"
    return shown if len(shown) <= _LONGEST else shown[:_LONGEST] + "..."


def parse_quantity(value: object, kind: str, system: UnitSystem, plain_unit: str) -> float:
    """Read one quantity of a job file.

    Parameters
    ----------
    value : object
        Text with a unit, or a plain number in `plain_unit`.
    kind : str
        ``length``, ``force``, ``moment``, ``stress``, ``force_per_length`` or ``density``.
    system : UnitSystem
        System of the result.
    plain_unit : str
        Unit that a plain number is taken in.

    Returns
    -------
    float
        Value in the system's inner unit of that kind.

    Raises
    ------
    QuantityError
        If the text is no quantity, its unit is unknown or of another kind, or the number
        is not finite.
    """
    target = _UNITS[kind][system.inner[kind]]
    expected = f"expected a {_words(kind)} such as {_example(kind, system)}"
    if isinstance(value, bool) or not isinstance(value, int | float | str):
        msg = f"got {_show(value)}; {expected}"
        raise QuantityError(msg)
    if not isinstance(value, str):
        if isinstance(value, float) and not math.isfinite(value):
            msg = f"got {value}; {expected}, a finite number"
            raise QuantityError(msg)
        return _sized(Fraction(value) * _UNITS[kind][plain_unit] / target, value, expected)

    text = value.strip().translate(_SPELLINGS).replace("mm²", "mm^2").replace("m³", "m^3")
    text = text[:-1] if text.endswith(("in.", "ft.")) else text
    if not text or len(text) > _LONGEST:
        msg = f"got {_show(value)}; {expected}"
        raise QuantityError(msg)
    if kind == "length" and (match := _FEET_INCHES.match(text)):
        sign, feet, inches = match.groups()
        metres = _number(feet) * _FOOT + _number(inches) * _INCH
        return _sized((-metres if sign == "-" else metres) / target, value, expected)
    if _BARE.match(text):
        msg = f"got {_show(value)} without a unit; {expected}"
        raise QuantityError(msg)
    match = _SIMPLE.match(text)
    if match is None:
        msg = f"got {_show(value)}; {expected}"
        raise QuantityError(msg)
    sign, digits, unit_text = match.groups()
    unit = _normal_unit(unit_text)
    if unit not in _UNITS[kind]:
        raise QuantityError(_wrong_unit(value, unit, kind, expected))
    size = _number(digits) * _UNITS[kind][unit] / target
    return _sized(-size if sign == "-" else size, value, expected)


def _sized(size: Fraction, value: object, expected: str) -> float:
    if abs(size) > _LARGEST:
        msg = f"got {_show(value)}, beyond any structure; {expected}"
        raise QuantityError(msg)
    return float(size)


def _wrong_unit(value: str, unit: str, kind: str, expected: str) -> str:
    for other, table in _UNITS.items():
        if unit in table:
            return f"got {_show(value)}, a {_words(other)}; {expected}"
    allowed = ", ".join(_UNITS[kind])
    message = f"got {_show(value)} with the unknown unit {_show(unit)}; {expected} ({allowed})"
    near = difflib.get_close_matches(unit, _UNITS[kind], n=1)
    return f"{message}; hint: did you mean {near[0]}?" if near else message
