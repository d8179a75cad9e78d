"""Quantities as written in job files, read exactly, and refused where they are none."""

from __future__ import annotations

import math
import re

import pint
import pytest

from engine import QuantityError, parse_quantity
from engine.units import _UNITS, SI, SYSTEMS, US, UnitSystem, plain, unit_named

PINT: pint.UnitRegistry[float] = pint.UnitRegistry()
# Every spelling of the table beside the same unit in pint, a general library of units.
PINT_NAMES = {
    "length": {"in": "inch", "ft": "foot", "mm": "mm", "cm": "cm", "m": "m"},
    "force": {"lbf": "lbf", "kip": "kip", "N": "N", "kN": "kN", "MN": "MN"},
    "moment": {
        "kip*ft": "kip*foot",
        "kip*in": "kip*inch",
        "lbf*ft": "lbf*foot",
        "lbf*in": "lbf*inch",
        "kN*m": "kN*m",
        "MN*m": "MN*m",
        "N*m": "N*m",
        "N*mm": "N*mm",
    },
    "stress": {
        "psi": "psi",
        "ksi": "ksi",
        "Pa": "Pa",
        "kPa": "kPa",
        "MPa": "MPa",
        "GPa": "GPa",
        "N/mm^2": "N/mm**2",
    },
    "force_per_length": {
        "kip/ft": "kip/foot",
        "lbf/ft": "lbf/foot",
        "lbf/in": "lbf/inch",
        "kN/m": "kN/m",
        "N/m": "N/m",
        "N/mm": "N/mm",
    },
    "density": {
        "lbf/ft^3": "lbf/foot**3",
        "lbf/in^3": "lbf/inch**3",
        "kN/m^3": "kN/m**3",
        "N/mm^3": "N/mm**3",
    },
}
EVERY_UNIT = [(kind, unit) for kind, units in PINT_NAMES.items() for unit in units]


def inches(text: object) -> float:
    """Read a length, plain numbers in inches."""
    return parse_quantity(text, "length", US, "in")


def test_every_unit_is_compared_with_pint() -> None:
    """A unit added to the table needs its partner above."""
    assert {kind: set(units) for kind, units in _UNITS.items()} == {
        kind: set(units) for kind, units in PINT_NAMES.items()
    }


@pytest.mark.parametrize("system", [US, SI], ids=lambda system: system.name)
@pytest.mark.parametrize(("kind", "unit"), EVERY_UNIT)
def test_conversion_agrees_with_pint(kind: str, unit: str, system: UnitSystem) -> None:
    """7.25 of every unit in both systems; 1e-12 is the floating point of pint's own chain."""
    target = PINT_NAMES[kind][system.inner[kind]]
    expected = (7.25 * PINT(PINT_NAMES[kind][unit])).to(target).magnitude
    found = parse_quantity(f"7.25 {unit}", kind, system, system.inner[kind])
    assert found == pytest.approx(expected, rel=1e-12)
    assert parse_quantity(7.25, kind, system, unit) == found


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("24 in", 24.0),
        ("24in", 24.0),
        ("24 IN", 24.0),
        (' 24" ', 24.0),
        ("24 inch", 24.0),
        ("24 inches", 24.0),
        ("+24 in", 24.0),
        ("-24 in", -24.0),
        ("24. in", 24.0),
        (".5 in", 0.5),
        ("2.4e1 in", 24.0),
        ("240E-1 in", 24.0),
        ("3/4 in", 0.75),
        ("1 1/2 in", 1.5),
        ("1-1/2 in", 1.5),
        ('1 3/4"', 1.75),
        ("2 ft", 24.0),
        ("2 feet", 24.0),
        ("1 foot", 12.0),
        ("2'", 24.0),
        ("26 ft 6 in", 318.0),
        ("26ft6in", 318.0),
        ("26 feet 6 inches", 318.0),
        ("26'-6\"", 318.0),
        ("26' 6\"", 318.0),
        ("26'-6 1/2\"", 318.5),
        ("26' 1/2\"", 312.5),
        ("-26 ft 6 in", -318.0),
        ("26.5 ft", 318.0),
        ("0.1 ft", 1.2),
        ("609.6 mm", 24.0),
        ("60.96 cm", 24.0),
        ("0.6096 m", 24.0),
        ("26\u2019 6\u2033", 318.0),
        ("26\u2032-6\u2033", 318.0),
    ],
)
def test_lengths_are_read_exactly(text: str, expected: float) -> None:
    """Every spelling of a length gives the very float that the number has."""
    assert inches(text) == expected


@pytest.mark.parametrize(
    "unit",
    [
        *("kip*ft", "kip-ft", "kip ft", "kip.ft", "kip\u00b7ft", "kip\u22c5ft", "kip * ft"),
        *("KIP-FT", "kips*ft", "ft*kip", "ft-kips", "k*ft", "k-ft", "K-FT", "ft-k"),
    ],
)
def test_kip_feet_are_read_exactly(unit: str) -> None:
    """410 kip*ft is 410 x 12,000 lbf*in however the unit is joined."""
    assert parse_quantity(f"410 {unit}", "moment", US, "kip*ft") == 4_920_000.0


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("5 kip*in", 5000.0),
        ("5 k-in", 5000.0),
        ("5 in-kip", 5000.0),
        ("5 kips*in", 5000.0),
        ("5 in-kips", 5000.0),
        ("5 lbf*ft", 60.0),
        ("5 lb-ft", 60.0),
        ("5 ft-lb", 60.0),
        ("5 ft-lbf", 60.0),
        ("5 lbf*in", 5.0),
        ("5 lb-in", 5.0),
        ("5 in-lb", 5.0),
        ("5 in-lbf", 5.0),
    ],
)
def test_other_us_moments_are_read_exactly(text: str, expected: float) -> None:
    """Pounds, kips, feet and inches in either order."""
    assert parse_quantity(text, "moment", US, "kip*ft") == expected


@pytest.mark.parametrize(
    ("text", "kind", "expected"),
    [
        ("550 kN*m", "moment", 550e6),
        ("550 kN m", "moment", 550e6),
        ("550 kN\u00b7m", "moment", 550e6),
        ("0.55 MN*m", "moment", 550e6),
        ("28 MPa", "stress", 28.0),
        ("28 N/mm^2", "stress", 28.0),
        ("28 N/mm2", "stress", 28.0),
        ("28 n/mm2", "stress", 28.0),
        ("0.028 GPa", "stress", 28.0),
        ("28000 kpa", "stress", 28.0),
        ("3 kN", "force", 3000.0),
    ],
)
def test_metric_quantities_are_read_exactly(text: str, kind: str, expected: float) -> None:
    """Metric values land on the float of their number."""
    assert parse_quantity(text, kind, SI, SI.trade[kind]) == expected


@pytest.mark.parametrize(
    ("text", "kind", "expected"),
    [
        ("4 ksi", "stress", 4000.0),
        ("4000 psi", "stress", 4000.0),
        ("3 kips", "force", 3000.0),
        ("3 k", "force", 3000.0),
        ("3 lb", "force", 3.0),
    ],
)
def test_us_stress_and_force(text: str, kind: str, expected: float) -> None:
    """Kips and pounds."""
    assert parse_quantity(text, kind, US, US.trade[kind]) == expected


@pytest.mark.parametrize(
    ("text", "kind", "system", "expected"),
    [
        ("1.2 kip/ft", "force_per_length", US, 100.0),
        ("1.2 kips/ft", "force_per_length", US, 100.0),
        ("1.2 k/ft", "force_per_length", US, 100.0),
        ("1.2 KLF", "force_per_length", US, 100.0),
        ("1.2 kip / ft", "force_per_length", US, 100.0),
        ("1200 lbf/ft", "force_per_length", US, 100.0),
        ("1200 lb/ft", "force_per_length", US, 100.0),
        ("1200 plf", "force_per_length", US, 100.0),
        ("100 lb/in", "force_per_length", US, 100.0),
        ("18 kN/m", "force_per_length", SI, 18.0),
        ("18 kn/m", "force_per_length", SI, 18.0),
        ("18 N/mm", "force_per_length", SI, 18.0),
        ("18000 N/m", "force_per_length", SI, 18.0),
        ("172.8 pcf", "density", US, 0.1),
        ("172.8 lb/ft^3", "density", US, 0.1),
        ("172.8 lb/ft3", "density", US, 0.1),
        ("172.8 lbf/ft3", "density", US, 0.1),
        ("24 kN/m^3", "density", SI, 24e-6),
        ("24 kN/m3", "density", SI, 24e-6),
        ("24 kN/m\u00b3", "density", SI, 24e-6),
    ],
)
def test_line_loads_and_weights(text: str, kind: str, system: UnitSystem, expected: float) -> None:
    """Loads along a beam and the weight of concrete, in the trade's spellings."""
    assert parse_quantity(text, kind, system, system.trade[kind]) == expected


@pytest.mark.parametrize(
    ("text", "kind", "unit"),
    [
        *((" kip-ft ", "moment", "kip*ft"), ("k-ft", "moment", "kip*ft"), ("FT", "length", "ft")),
        *(("klf", "force_per_length", "kip/ft"), ("kNm", "moment", None), ("MN", "force", "MN")),
        *(("mN", "force", None), ("ft", "moment", None), ("", "length", None)),
    ],
)
def test_unit_over_a_column(text: str, kind: str, unit: str | None) -> None:
    """A unit alone is found by the same spellings, or refused with those allowed."""
    if unit is not None:
        assert unit_named(text, kind, US) == unit
        return
    with pytest.raises(QuantityError, match=rf"expected a unit of {kind} such as"):
        unit_named(text, kind, US)


@pytest.mark.parametrize("kip_per_foot", [-1.2, -0.001])
def test_sign_of_a_line_load_is_kept(kip_per_foot: float) -> None:
    """Whether a sign makes sense is for the key to say."""
    found = parse_quantity(f"{kip_per_foot} kip/ft", "force_per_length", US, "kip/ft")
    assert found == pytest.approx(kip_per_foot * 1000 / 12, rel=1e-15)


@pytest.mark.parametrize(("value", "unit", "expected"), [(24, "in", 24.0), (26.5, "ft", 318.0)])
def test_plain_numbers_are_in_the_unit_of_their_key(
    value: float, unit: str, expected: float
) -> None:
    """A number without a unit is taken in the unit that the caller names."""
    assert parse_quantity(value, "length", US, unit) == expected


@pytest.mark.parametrize(
    "text",
    [
        *("", "   ", "in", "nan in", "inf in", "-inf in", "--24 in", "+-24 in", "\u00b2 in"),
        *("1/0", "24 in\n5", "\x00", "1234567890123456 in"),
    ],
)
def test_text_that_is_no_quantity(text: str) -> None:
    """What is neither number nor unit is quoted back with an example."""
    with pytest.raises(QuantityError, match=r"^got .*; expected a length such as .24 in."):
        inches(text)


def test_length_without_a_unit() -> None:
    """A number in quotes has no unit to go by."""
    with pytest.raises(QuantityError, match=r"^got '24' without a unit; expected a length such as"):
        inches("24")


@pytest.mark.parametrize("text", ["1e99 in", "1e19 in", "-1e99 ft", "1e99 ft 1 in"])
def test_absurdly_large_text(text: str) -> None:
    """A text is bounded like a plain number is."""
    with pytest.raises(QuantityError, match="beyond any structure"):
        inches(text)


@pytest.mark.parametrize(
    ("text", "unit"),
    [
        ("9**9**9 in", r"'\*\*9\*\*9\*in'"),
        ("24 furlong", "'furlong'"),
        ("24\x00 in", r"'\\x00\*in'"),
        ("24 \x07", r"'\\x07'"),
        ("0x10 in", r"'x10\*in'"),
        ("1,000 in", r"',000\*in'"),
        ("1e400 in", r"'e400\*in'"),
        ("24\u00b2 in", r"'²\*in'"),
        ("1/2/3 in", r"'/3\*in'"),
    ],
)
def test_unknown_unit(text: str, unit: str) -> None:
    """An unknown unit is quoted, and the known ones are listed."""
    allowed = r"\(in, ft, mm, cm, m\)"
    with pytest.raises(QuantityError, match=rf"with the unknown unit {unit}; .* {allowed}"):
        inches(text)


@pytest.mark.parametrize(
    ("text", "kind", "hint"),
    [
        ("24 inc", "length", "in"),
        ("550 kNm", "moment", r"kN\*m"),
        ("410 kipft", "moment", r"kip\*ft"),
        ("28 Mpa", "stress", "MPa"),
        ("4 kpsi", "stress", "psi"),
        ("1 kip/f", "force_per_length", "kip/ft"),
    ],
)
def test_unknown_unit_with_a_near_one(text: str, kind: str, hint: str) -> None:
    """A near miss is answered with the unit that was likely meant."""
    with pytest.raises(QuantityError, match=rf"unknown unit .*; hint: did you mean {hint}\?$"):
        parse_quantity(text, kind, US, US.trade[kind])


@pytest.mark.parametrize(
    ("text", "kind"), [("5 mN*m", "moment"), ("28 mPa", "stress"), ("5 mN", "force")]
)
def test_milli_is_not_mega(text: str, kind: str) -> None:
    """Case is ignored only where it cannot turn a thousandth into a million."""
    with pytest.raises(QuantityError, match=f"unknown unit '{text.split()[1][:2]}"):
        parse_quantity(text, kind, SI, SI.trade[kind])


@pytest.mark.parametrize(
    ("text", "asked", "given"),
    [
        ("24 psi", "length", "stress"),
        ("24 in", "moment", "length"),
        ("24 kip*ft", "stress", "moment"),
        ("24 kip", "moment", "force"),
        ("24 kip", "force_per_length", "force"),
        ("24 plf", "force", "force per length"),
        ("24 pcf", "force", "weight per volume"),
        ("26 ft 6 in", "stress", None),
    ],
)
def test_unit_of_another_kind(text: str, asked: str, given: str | None) -> None:
    """The kind that the unit has is named beside the kind that was expected."""
    problem = rf"'{re.escape(text)}', a {given}; " if given else r"unknown unit 'ft\*6\*in'; "
    with pytest.raises(
        QuantityError, match=rf"{problem}expected a {asked.replace('_', ' ')} such as"
    ):
        parse_quantity(text, asked, US, US.trade[asked])


@pytest.mark.parametrize("text", ["1/0 in", "2 1/0 in", "5 ft 1/0 in", "0/0 in"])
def test_division_by_zero(text: str) -> None:
    """A fraction over nothing is an error of the text, not of arithmetic."""
    with pytest.raises(QuantityError, match=r"^the fraction '.*/0' divides by zero$"):
        inches(text)


@pytest.mark.parametrize("text", ["x" * 10_000, "24 " + "x" * 10_000, "9" * 10_000 + " in"])
def test_ten_thousand_characters(text: str) -> None:
    """A long text is cut in the message."""
    with pytest.raises(QuantityError, match=r"^got '.{59}\.\.\.; expected a length") as caught:
        inches(text)
    assert len(str(caught.value)) < 200


@pytest.mark.parametrize("value", [True, False, None, [], ["24 in"], {}, b"24 in", 2j])
def test_value_of_another_type(value: object) -> None:
    """Only texts and numbers can be quantities; True is no 1."""
    with pytest.raises(QuantityError, match=r"^got .*; expected a length such as"):
        inches(value)


@pytest.mark.parametrize("value", [math.nan, math.inf, -math.inf])
def test_number_that_is_not_finite(value: float) -> None:
    """Not a number, and infinity, are refused as numbers too."""
    with pytest.raises(QuantityError, match=r"^got -?(nan|inf); .*, a finite number$"):
        inches(value)


@pytest.mark.parametrize("value", [1.1e18, -1.1e18, 10**400])
def test_number_beyond_all_measure(value: float) -> None:
    """Numbers that no beam can have are refused before they overflow."""
    with pytest.raises(QuantityError, match=r"beyond any structure; expected a length"):
        inches(value)
    assert inches(1e18) == 1e18


@pytest.mark.parametrize("text", ["\uff12\uff14 in", "\u0662\u0664 in"])
def test_digits_of_other_scripts(text: str) -> None:
    """A number in digits that most readers cannot read is refused."""
    with pytest.raises(QuantityError, match="expected a length"):
        inches(text)


@pytest.mark.parametrize(
    ("kind", "system", "example"),
    [
        ("length", SI, '"600 mm" or "0.6 m"'),
        ("moment", US, r'"410 kip\*ft"'),
        ("moment", SI, r'"550 kN\*m"'),
        ("stress", US, '"4000 psi" or "60 ksi"'),
        ("stress", SI, '"28 MPa"'),
        ("force", US, '"12 kip"'),
        ("force", SI, '"50 kN"'),
        ("force per length", US, '"1.2 kip/ft" or "800 plf"'),
        ("force per length", SI, '"18 kN/m"'),
        ("weight per volume", US, '"150 pcf"'),
        ("weight per volume", SI, r'"24 kN/m\^3"'),
    ],
)
def test_example_fits_kind_and_system(kind: str, system: UnitSystem, example: str) -> None:
    """The example is of the kind asked for, in the job's own system."""
    key = {"weight per volume": "density"}.get(kind, kind.replace(" ", "_"))
    with pytest.raises(QuantityError, match=f"expected a {kind} such as {example}"):
        parse_quantity("?", key, system, system.trade[key])


@pytest.mark.parametrize(
    ("system", "kind", "value", "expected"),
    [
        ("us", "moment", 4_920_000.0, 410.0),
        ("us", "force", 3000.0, 3.0),
        ("us", "length", 21.5, 21.5),
        ("us", "stress", 4000.0, 4000.0),
        ("us", "area", 4.74, 4.74),
        ("us", "strain", 0.005, 0.005),
        ("us", "force_per_length", 1200 / 12, 1.2),
        ("us", "density", 150 / 1728, 150.0),
        ("si", "force_per_length", 18.0, 18.0),
        ("si", "density", 24e-6, 24.0),
        ("si", "moment", 550e6, 550.0),
        ("si", "force", 3000.0, 3.0),
        ("si", "length", 600.0, 600.0),
    ],
)
def test_round_figures_stay_round_in_trade_units(
    system: str, kind: str, value: float, expected: float
) -> None:
    """Reports show 410 kip*ft, not 409.99999999999994; kinds of one unit pass unchanged."""
    assert SYSTEMS[system].to_trade(kind, value) == expected


def test_trade_unit_smaller_than_inner() -> None:
    """The other direction multiplies: 2 ft are 24 in."""
    system = UnitSystem(name="x", inner={"length": "ft"}, trade={"length": "in"})
    assert system.to_trade("length", 2.0) == 24.0


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (40_000.0, "40000"),
        (123_456.7, "123457"),
        (21.4375, "21.44"),
        (0.005, "0.005"),
        (0.00123456, "0.001235"),
        (9.9996, "10"),
        (1.0, "1"),
        (-2.5, "-2.5"),
        (0.0, "0"),
        (math.inf, "inf"),
        (math.nan, "nan"),
    ],
)
def test_plain_writes_four_digits_without_exponent(value: float, text: str) -> None:
    """Numbers in notes read like numbers on a drawing."""
    assert plain(value) == text


def test_number_too_long_to_print() -> None:
    """Python does not print whole numbers of more than 4300 digits; the message does without."""
    with pytest.raises(QuantityError, match="a number of absurd length, beyond any structure"):
        inches(10**5000)
