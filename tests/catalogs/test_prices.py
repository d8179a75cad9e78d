"""Price lists: what the built-in one says, which price wins, costs and carbon by hand.

Sources of the published figures: fixing hours 30 h/t for bars from 25 mm in beams by a quantity
surveyors' table, Malaysia 2024; 11.9 h per short ton (13.1 h/t) by US estimating norms, from
memory; 67.7 h/t by Ameh, 2013. Carbon: limits of the US General Services Administration under the
Inflation Reduction Act for fabricated bars and for concrete. Demo prices are invented.
"""

import dataclasses
import math
import pickle
from pathlib import Path
from typing import Any

import pytest

import catalogs
from catalogs import (
    BANDS,
    BUILTIN_PRICE_LISTS,
    Band,
    CatalogError,
    PriceList,
    Spread,
    TableError,
    UnknownNameError,
    bar_catalog,
    price_list,
)

KG_PER_LB = 0.45359237
TOML = """
system = "si"
currency = "EUR"
steel = 1.25
labour_rate = 48
concrete_price = 160.5
formwork_price = 0
"""
CSV = """key,size,grade,value,unit,source
-,-,-,-,-,-
system,,,us,-,
currency,,,USD,-,
steel,,,0.70,USD/lb,mill
labour_rate,,,65,USD/h,
concrete_price,,,190,USD/yd3,
formwork_price,,,12,USD/ft2,
"""


def spread(*values: float) -> Spread:
    """Return a spread of three values."""
    low, typical, high = values
    return Spread(low=low, typical=typical, high=high, source="own records")


def made(**changes: Any) -> PriceList:
    """Return a list with round figures, changed where asked."""
    figures: dict[str, Any] = {
        "name": "round",
        "currency": "EUR",
        "system": "si",
        "invented": False,
        "steel": {("*", "*"): 1.0},
        "labour_rate": 50.0,
        "fixing_hours": spread(10.0, 20.0, 40.0),
        "concrete_price": 200.0,
        "formwork_price": 100.0,
        "steel_carbon": spread(500.0, 1000.0, 2000.0),
        "concrete_carbon": spread(200.0, 300.0, 400.0),
    }
    return PriceList(**(figures | changes))


def test_demo_of_in_lb_units() -> None:
    """The invented in-lb list has the figures of its file, and says that they are invented."""
    prices = price_list("demo", "us")
    assert (prices.name, prices.currency, prices.system) == ("demo", "DEMO", "us")
    assert prices.invented is True
    assert prices.steel == {
        ("*", "*"): 0.75,
        ("*", "#3"): 0.80,
        ("*", "#4"): 0.80,
        ("A615-80", "*"): 0.79,
        ("A615-80", "#4"): 0.86,
        ("A615-100", "*"): 0.95,
    }
    assert (prices.labour_rate, prices.concrete_price, prices.formwork_price) == (70.0, 180.0, 14.0)
    assert prices.sizes_not_in(bar_catalog("astm-inch")) == ()


def test_demo_of_si_units() -> None:
    """The invented metric list likewise; metric grade names are stored under the grade's name."""
    prices = price_list(" Demo ", "si")
    assert (prices.name, prices.currency, prices.system) == ("demo", "DEMO", "si")
    assert prices.invented is True
    assert prices.steel == {
        ("*", "*"): 1.50,
        ("*", "8"): 1.60,
        ("*", "10"): 1.60,
        ("*", "12"): 1.60,
        ("*", "13"): 1.60,
        ("A615-80", "*"): 1.58,
        ("A615-80", "13"): 1.72,
        ("A615-100", "*"): 1.90,
    }
    assert (prices.labour_rate, prices.concrete_price, prices.formwork_price) == (
        60.0,
        210.0,
        130.0,
    )
    assert BUILTIN_PRICE_LISTS == ("demo",)


@pytest.mark.parametrize("system", ["us", "si"])
def test_published_spreads(system: str) -> None:
    """Hours and carbon of the sources named above, in both systems to their printed digits."""
    prices = price_list("demo", system)
    tonnes = {"us": 2000.0 * KG_PER_LB / 1000.0, "si": 1.0}[system]
    hours = prices.fixing_hours
    assert hours.typical == pytest.approx(30.0 * tonnes, rel=1e-12)
    # Both are rounded to whole hours a tonne.
    assert hours.low == pytest.approx(13.1 * tonnes, abs=0.5)
    assert hours.high == pytest.approx(67.7 * tonnes, abs=0.5)
    steel, concrete = prices.steel_carbon, prices.concrete_carbon
    assert (steel.low, steel.typical, steel.high) == (728.0, 794.0, 850.0)
    assert "610 to 2000" in steel.source
    # 3000 psi "top 20 %", 4000 and 6000 psi "better than average".
    assert (concrete.low, concrete.typical, concrete.high) == (257.0, 352.0, 407.0)
    assert all("General Services Administration" in factor.source for factor in (steel, concrete))


def test_us_norm_in_its_own_unit() -> None:
    """US estimating norm (from memory): 11.9 h per ton of 2000 lb for #8 to #18 in beams."""
    assert price_list("demo", "us").fixing_hours.low == pytest.approx(11.9, abs=0.5)


@pytest.mark.parametrize(
    ("size", "grade", "expected"),
    [
        ("#9", "A615-60", 0.75),
        ("#4", "A615-60", 0.80),
        ("#9", "A615-80", 0.79),
        ("#4", "A615-80", 0.86),
        ("#4", "A615-550", 0.86),
        ("#4", " a615-80 ", 0.86),
        # The grade goes before the size.
        ("#4", "A615-100", 0.95),
        # Steel given by its strength alone has no grade.
        ("#4", "", 0.80),
        ("#9", " ", 0.75),
    ],
)
def test_most_specific_price_wins(size: str, grade: str, expected: float) -> None:
    """Grade and size, then grade, then size, then the price for all."""
    bar = bar_catalog("astm-inch").bar(size)
    assert price_list("demo", "us").steel_price(bar, grade) == expected


def test_case_of_a_size_does_not_matter() -> None:
    """Sizes of a list and of a catalogue are the same whatever their case."""
    prices = made(steel={("*", "10m"): 2.0, ("*", "*"): 1.0})
    catalog = bar_catalog("csa")
    assert prices.steel_price(catalog.bar("10M"), "") == 2.0
    assert prices.sizes_not_in(catalog) == ()


def test_no_price_for_a_bar() -> None:
    """A bar that no price covers is refused, not priced by a guess."""
    prices = made(steel={("A615-60", "*"): 1.0, ("*", "25"): 1.1})
    bar = bar_catalog("en10080").bar("32")
    message = (
        r"price list round: no steel price for 32 of A615-80; "
        r"allowed: \* of A615-60, 25 of \*; hint: add a price without grade and size"
    )
    with pytest.raises(UnknownNameError, match=message) as caught:
        prices.steel_price(bar, "A615-80")
    assert caught.value.name == "32 of A615-80"
    assert caught.value.allowed == ("* of A615-60", "25 of *")
    assert prices.steel_price(bar, "A615-420") == 1.0


def test_unknown_grade_of_a_bar() -> None:
    """A grade that does not exist is no reason to take the price for all grades."""
    bar = bar_catalog("astm-inch").bar("#9")
    with pytest.raises(UnknownNameError, match=r"steel grade 'A615-6O' is not known; .*'A615-60'"):
        price_list("demo", "us").steel_price(bar, "A615-6O")


def test_sizes_not_in_a_catalogue() -> None:
    """Misspelt sizes are found once the catalogue is known."""
    prices = made(
        steel={("*", "*"): 1.0, ("*", "T25"): 1.1, ("A615-60", "T25"): 1.2, ("*", "9"): 1}
    )
    assert prices.sizes_not_in(bar_catalog("en10080")) == ("9", "T25")


@pytest.mark.parametrize(("band", "hours"), [("low", 10.0), ("typical", 20.0), ("high", 40.0)])
@pytest.mark.parametrize(("size", "relative"), [("32", 1.0), ("20", 1.17), ("10", 1.67)])
def test_placed_cost_by_hand(band: Band, hours: float, size: str, relative: float) -> None:
    """Mass times the price, and the hours of the mass at the rate, thin bars taking more."""
    bar = bar_catalog("en10080").bar(size)
    expected = bar.mass * 1.0 + bar.mass / 1000.0 * hours * relative * 50.0
    assert made().placed_cost_per_length(bar, "B500B", band) == pytest.approx(expected, rel=1e-12)


def test_placed_cost_of_a_no_9_bar() -> None:
    """#9, 3.400 lb/ft, 0.75 a lb, 20 h per 2000 lb at 70: 3.400 (0.75 + 0.70) = 4.93 a ft."""
    prices = dataclasses.replace(price_list("demo", "us"), fixing_hours=spread(10.0, 20.0, 40.0))
    bar = bar_catalog("astm-inch").bar("#9")
    cost = prices.placed_cost_per_length(bar, "A615-60", "typical")
    assert cost == pytest.approx(4.93, rel=1e-12)


def test_same_prices_in_both_systems_cost_the_same() -> None:
    """A length of the same bar costs the same in both systems when the prices are converted."""
    si = made()
    ton = 2000.0 * KG_PER_LB / 1000.0
    us = made(system="us", steel={("*", "*"): KG_PER_LB}, fixing_hours=si.fixing_hours.times(ton))
    # Masses of #9 and its metric twin are tabulated: 3.400 lb/ft is 5.0598 kg/m against 5.060.
    inch, metric = bar_catalog("astm-inch").bar("#9"), bar_catalog("astm-metric").bar("29")
    for band in BANDS:
        cost = si.placed_cost_per_length(metric, "A615-60", band)
        assert us.placed_cost_per_length(inch, "A615-60", band) == pytest.approx(
            cost * 0.3048, rel=0.0005 / 5.06 + 0.0005 / 3.4
        )
        carbon = si.steel_carbon_per_length(metric, band)
        assert us.steel_carbon_per_length(inch, band) == pytest.approx(
            carbon * 0.3048, rel=0.0005 / 5.06 + 0.0005 / 3.4
        )


def test_carbon_by_hand() -> None:
    """25 mm bar of 3.85 kg/m at 794 kg/t; concrete is per m3 in both systems."""
    si, us = price_list("demo", "si"), price_list("demo", "us")
    bar = bar_catalog("en10080").bar("25")
    assert bar.mass == 3.85
    assert si.steel_carbon_per_length(bar, "typical") == pytest.approx(3.0569, rel=1e-12)
    assert si.concrete_carbon_per_volume("high") == 407.0
    assert us.concrete_carbon_per_volume("high") == 407.0


@pytest.mark.parametrize("system", ["us", "si"])
def test_bands_are_in_order(system: str) -> None:
    """Cost and carbon rise from low to high for every size."""
    prices = price_list("demo", system)
    for bar in bar_catalog({"us": "astm-inch", "si": "astm-metric"}[system]).bars:
        costs = [prices.placed_cost_per_length(bar, "A615-60", band) for band in BANDS]
        carbon = [prices.steel_carbon_per_length(bar, band) for band in BANDS]
        assert costs[0] < costs[1] < costs[2]
        assert carbon[0] < carbon[1] < carbon[2]


def test_bar_of_the_other_system() -> None:
    """Prices per lb are not multiplied by masses in kg/m."""
    bar = bar_catalog("en10080").bar("25")
    prices = price_list("demo", "us")
    message = "price list demo: bar 25 is in system 'si'; allowed: 'us', prices are per lb"
    with pytest.raises(CatalogError, match=message):
        prices.placed_cost_per_length(bar, "", "typical")
    with pytest.raises(CatalogError, match=message):
        prices.steel_carbon_per_length(bar, "typical")


def test_unknown_band() -> None:
    """A band is one of three, and the nearest is offered."""
    band: Any = "typicl"
    with pytest.raises(
        UnknownNameError,
        match=r"band 'typicl' is not known; allowed: low, typical, high; hint: .* 'typical'",
    ):
        made().concrete_carbon_per_volume(band)


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"low": 2.0}, "low, typical, high 2, 1, 3 cannot be used; allowed: low <= typical <= hi"),
        ({"high": 0.5}, "low, typical, high 1, 1, 0.5 cannot be used; allowed: low <= typical"),
        ({"low": -1.0}, "low, typical, high -1, 1, 3 cannot be used; allowed: finite numbers fr"),
        ({"high": math.inf}, "low, typical, high 1, 1, inf cannot be used; allowed: finite numb"),
        ({"typical": math.nan}, "low, typical, high 1, nan, 3 cannot be used; allowed: finite"),
        ({"source": " "}, "source ' ' cannot be used; allowed: a text saying whose figures"),
    ],
)
def test_spread_that_is_none(changes: dict[str, Any], message: str) -> None:
    """Three finite values in order, and a source; equal ones are in order."""
    figures: dict[str, Any] = {"low": 1.0, "typical": 1.0, "high": 3.0, "source": "records"}
    assert Spread(**figures).at("low") == 1.0
    with pytest.raises(CatalogError, match=message):
        Spread(**(figures | changes))


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"system": "cgs"}, "price list round: system 'cgs' is not known; allowed: us, si"),
        ({"labour_rate": -1.0}, "price list round: labour_rate -1.0; allowed: a finite number fr"),
        ({"concrete_price": math.nan}, "price list round: concrete_price nan; allowed: a finite"),
        ({"formwork_price": math.inf}, "price list round: formwork_price inf; allowed: a finite"),
        ({"steel": {}}, r"price list round: steel \[\]; allowed: finite numbers above 0"),
        ({"steel": {("*", "*"): 0.0}}, r"price list round: steel \[0.0\]; allowed: finite numbers"),
        ({"steel": {("*", "*"): math.inf}}, r"price list round: steel \[inf\]; allowed: finite"),
    ],
)
def test_list_that_is_none(changes: dict[str, Any], message: str) -> None:
    """A list made without a file is checked too."""
    with pytest.raises(CatalogError, match=message):
        made(**changes)


def test_list_can_travel() -> None:
    """Lists are keys of caches and reach worker processes unchanged."""
    prices = price_list("demo", "us")
    copy = pickle.loads(pickle.dumps(prices))
    assert copy == prices
    assert hash(copy) == hash(prices)
    assert price_list("demo", "us") is prices


def test_toml_file_beside_the_job(tmp_path: Path) -> None:
    """A relative path starts at the job's folder; what is left out is published, not invented."""
    (tmp_path / "ours.TOML").write_text(TOML, encoding="utf-8")
    prices = price_list("ours.TOML", "si", tmp_path)
    assert (prices.name, prices.currency, prices.invented) == ("ours.TOML", "EUR", False)
    assert prices.steel == {("*", "*"): 1.25}
    assert (prices.labour_rate, prices.concrete_price, prices.formwork_price) == (48.0, 160.5, 0.0)
    demo = price_list("demo", "si")
    assert prices.steel_carbon == demo.steel_carbon
    assert prices.concrete_carbon == demo.concrete_carbon
    assert prices.fixing_hours.typical == 30.0


def test_csv_file(tmp_path: Path) -> None:
    """The other form: units beside every figure; an absolute path needs no base."""
    path = tmp_path / "ours.csv"
    # As a spreadsheet saves it: byte order mark, CRLF, TRUE in capitals.
    text = CSV + "invented,,,TRUE,-,\nsteel,#9,a615-420,0.72,USD/lb,\nsteel,*,*,0.70,USD/lb,\n"
    text = text.replace("steel,,,0.70,USD/lb,mill\n", "")
    path.write_bytes(text.replace("\n", "\r\n").encode("utf-8-sig"))
    prices = price_list(path, "us")
    assert (prices.name, prices.currency, prices.invented) == ("ours.csv", "USD", True)
    assert prices.steel == {("A615-60", "#9"): 0.72, ("*", "*"): 0.70}
    assert (prices.labour_rate, prices.concrete_price, prices.formwork_price) == (65.0, 190.0, 12.0)
    assert prices.fixing_hours == price_list("demo", "us").fixing_hours


def test_own_spreads_in_toml(tmp_path: Path) -> None:
    """Hours and carbon of the user replace the published ones, each on its own."""
    text = TOML + (
        '[fixing_hours]\nlow = 15\ntypical = 18\nhigh = 25.5\nsource = "time sheets"\n'
        '[steel_carbon]\nlow = 600\ntypical = 650\nhigh = 650\nsource = "declaration 12"\n'
    )
    path = tmp_path / "own.toml"
    path.write_text(text, encoding="utf-8")
    prices = price_list(path, "si")
    assert prices.fixing_hours == Spread(low=15.0, typical=18.0, high=25.5, source="time sheets")
    assert prices.steel_carbon == Spread(low=600, typical=650, high=650, source="declaration 12")
    assert prices.concrete_carbon.typical == 352.0


def test_own_spreads_in_csv(tmp_path: Path) -> None:
    """Sources of the three rows are put together, each once."""
    text = CSV + (
        "concrete_carbon.high,,,330,kgCO2e/m3,plant B\n"
        "concrete_carbon.low,,,250,kgCO2e/m3,plant A\n"
        "concrete_carbon.typical,,,290,kgCO2e/m3,plant A\n"
    )
    path = tmp_path / "own.csv"
    path.write_text(text, encoding="utf-8")
    assert price_list(path, "us").concrete_carbon == Spread(
        low=250.0, typical=290.0, high=330.0, source="plant A; plant B"
    )


def test_demo_files_can_be_copied(tmp_path: Path) -> None:
    """The built-in files are the examples of both forms, so a copy of each is read alike."""
    data = Path(str(catalogs.__file__)).parent / "data"
    for system, file in (("us", "prices_demo_us.toml"), ("si", "prices_demo_si.csv")):
        (tmp_path / file).write_bytes((data / file).read_bytes())
        copy = price_list(file, system, tmp_path)
        assert copy == dataclasses.replace(price_list("demo", system), name=file)


def test_commented_examples_hold(tmp_path: Path) -> None:
    """The commented-out tables of the TOML example are right once their signs are taken away."""
    data = Path(str(catalogs.__file__)).parent / "data"
    lines = (data / "prices_demo_us.toml").read_text(encoding="utf-8").splitlines()
    starts = ("# [", "# low", "# typical", "# high", "# source")
    bare = [line.removeprefix("# ") if line.startswith(starts) else line for line in lines]
    path = tmp_path / "bare.toml"
    path.write_text("\n".join(bare), encoding="utf-8")
    prices = price_list(path, "us")
    assert (prices.fixing_hours.low, prices.fixing_hours.high) == (14.0, 32.0)
    assert (prices.steel_carbon.typical, prices.concrete_carbon.typical) == (700.0, 290.0)


def test_unknown_list() -> None:
    """A name that is neither built in nor a file is refused with what is allowed."""
    message = (
        r"price list 'dmo' is not known; allowed: demo, or a path ending in .toml or .csv; "
        "hint: the nearest name is 'demo'"
    )
    with pytest.raises(UnknownNameError, match=message):
        price_list("dmo", "us")


def test_unknown_system() -> None:
    """The job's system is one of two."""
    with pytest.raises(
        UnknownNameError, match="system of units 'metric' is not known; allowed: us"
    ):
        price_list("demo", "metric")


def test_list_of_the_other_system(tmp_path: Path) -> None:
    """A list per kg is not used for a job in in-lb units, nor the other way round."""
    (tmp_path / "a.toml").write_text(TOML, encoding="utf-8")
    (tmp_path / "a.csv").write_text(CSV, encoding="utf-8")
    with pytest.raises(
        TableError,
        match="key system: 'si' cannot be used; allowed: 'us', the units of the job; "
        "hint: give the prices per lb, per yd3, per ft2",
    ):
        price_list("a.toml", "us", tmp_path)
    with pytest.raises(
        TableError,
        match="row 3, column value: system 'us' cannot be used; allowed: 'si', the units of the "
        "job; hint: give the prices per kg, per m3, per m2",
    ):
        price_list("a.csv", "si", tmp_path)
