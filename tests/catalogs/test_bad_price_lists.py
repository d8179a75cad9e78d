"""Price lists that must be refused: the message names file, place, key, value and what is allowed.

Limits of the figures are the project's own; they lie wide of every published figure.
"""

import contextlib
import os
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from catalogs import TableError, price_list

TOML = {
    "system": '"si"',
    "currency": '"EUR"',
    "steel": "1.25",
    "labour_rate": "48",
    "concrete_price": "160",
    "formwork_price": "90",
}
CSV = """key,size,grade,value,unit,source
-,-,-,-,-,-
system,,,si,-,
currency,,,EUR,-,
steel,,,1.25,EUR/kg,
labour_rate,,,48,EUR/h,
concrete_price,,,160,EUR/m3,
formwork_price,,,90,EUR/m2,
"""
HUGE = "9" * 400
HUGER = "0x" + "f" * 5000
DEEP = "[" * 5000 + "]" * 5000
LOOP = ".a" * 20000


def toml(more: str = "", **changes: str | None) -> str:
    """Return a sound TOML list, changed; None takes a key away."""
    lines = [f"{name} = {value}" for name, value in (TOML | changes).items() if value is not None]
    return "\n".join(lines) + "\n" + more


def hours(low: str, typical: str, high: str, source: str = '"sheets"') -> str:
    """Return a TOML table of fixing hours."""
    return f"[fixing_hours]\nlow = {low}\ntypical = {typical}\nhigh = {high}\nsource = {source}\n"


def prices(*tables: str) -> str:
    """Return a TOML list with these [[steel]] tables."""
    return toml("\n".join(f"[[steel]]\n{table}" for table in tables), steel=None)


BAD_TOML = {
    # name: (text, message after the file)
    "empty": ("", "key 'system' is missing; allowed: a list with system, currency, steel, labour"),
    "no currency": (toml(currency=None), "key 'currency' is missing; allowed: a list with system"),
    "no steel": (toml(steel=None), "key 'steel' is missing"),
    "steel empty": (toml(steel="[]"), "key 'steel' is missing"),
    "no formwork": (toml(formwork_price=None), "key 'formwork_price' is missing"),
    "syntax": (toml("labour rate = 5"), r"is not TOML \(.*line 7.*\); allowed: TOML; hint: texts"),
    "bare text": (toml(currency="EUR"), r"is not TOML \(.*\); allowed: TOML; hint: texts stand in"),
    "decimal comma": (toml(labour_rate="48,5"), r"is not TOML \("),
    "key twice": (toml("labour_rate = 50"), r"is not TOML \(Cannot overwrite a value"),
    "too deep": (toml(labour_rate=DEEP), r"is nested too deeply; allowed: keys, \[tables\] and"),
    "unknown key": (
        toml("labor_rate = 50"),
        "unknown key 'labor_rate'; allowed: system, .*; hint: the nearest name is 'labour_rate'",
    ),
    "nothing near": (toml("zzz = 50"), r"unknown key 'zzz'; allowed: [^;]*$"),
    "unknown table": (toml("[fixing_hour]\nlow = 5"), "unknown key 'fixing_hour.low'; allowed: "),
    "empty table": (toml("[fixing_hours]"), "unknown key 'fixing_hours'; .*fixing_hours.low, "),
    "hours no table": (toml("fixing_hours = 30"), "unknown key 'fixing_hours'; .*fixing_hours.low"),
    "loop of tables": (toml(f"x{LOOP} = 1"), "row 7: is nested too deeply; allowed: keys, "),
    "unknown system": (
        toml(system='"metric"'),
        "key system: 'metric' cannot be used; allowed: 'si', the units of the job; hint",
    ),
    "system a number": (toml(system="1"), "key system: 1 cannot be used; allowed: 'si'"),
    "no name": (
        toml(currency='" "'),
        "key currency: ' ' cannot be used; allowed: a text of 1 to 8 printable char",
    ),
    "long currency": (
        toml(currency='"EUROEUROS"'),
        "key currency: 'EUROEUROS' cannot be used; allow",
    ),
    "currency of two": (
        toml(currency='"E U"'),
        "key currency: 'E U' cannot .* characters without bla",
    ),
    "invisible": (
        toml(currency=r'"E\u200bR"'),
        "key currency: .* cannot be used; allowed: a text of",
    ),
    "currency a number": (
        toml(currency="978"),
        "key currency: 978 cannot be used; allowed: a text of",
    ),
    "invented as text": (
        toml('invented = "false"'),
        "key invented: 'false' cannot be used; allowed: true or false, without quotes",
    ),
    "invented as number": (
        toml("invented = 0"),
        "key invented: 0 cannot be used; allowed: true or fa",
    ),
    "rate as text": (
        toml(labour_rate='"48"'),
        r"key labour_rate: '48' cannot be used; allowed: a number from 0 to 1e\+09 "
        "EUR/h",
    ),
    "rate negative": (
        toml(labour_rate="-1"),
        "key labour_rate: -1 cannot be used; allowed: a number",
    ),
    "rate true": (
        toml(labour_rate="true"),
        "key labour_rate: true cannot be used; allowed: a number",
    ),
    "rate nan": (toml(labour_rate="nan"), "key labour_rate: nan cannot be used; allowed: a number"),
    "rate inf": (toml(concrete_price="inf"), "key concrete_price: inf cannot be used; .* EUR/m3"),
    "rate a day": (
        toml(formwork_price="2024-05-01"),
        "key formwork_price: 2024-05-01 cannot .* EUR/m2",
    ),
    "rate huge": (
        toml(labour_rate=HUGE),
        r"key labour_rate: 9{40}\.\.\. cannot be used; allowed: a n",
    ),
    "rate huger": (
        toml(labour_rate=HUGER),
        "key labour_rate: a value too long to show cannot be used",
    ),
    "rate a list": (toml(labour_rate="[48]"), r"key labour_rate: \[48\] cannot be used; allowed"),
    "rate a table": (toml("labour_rate.eur = 48", labour_rate=None), "unknown key 'labour_rate.e"),
    "steel zero": (
        toml(steel="0"),
        r"key steel: 0 cannot be used; allowed: a number from 1e-09 to 1e\+09 EUR/kg",
    ),
    "steel of numbers": (
        toml(steel="[1.25]"),
        r"key steel\[1\]: 1.25 has no price; allowed: a table with price, grade, size; hint: ",
    ),
    "no price": (
        prices("price = 1.2", 'size = "25"'),
        r"key steel\[2\]: .*'size': '25'.* has no price; allowed: a table with price",
    ),
    "price of a kind": (
        prices('price = 1.2\nsizes = "25"'),
        r"key steel\[1\]: unknown key 'sizes'; allowed: price, grade, size; .* name is 'size'",
    ),
    "price negative": (
        prices("price = 1.2", 'size = "25"\nprice = -1'),
        r"key steel\[2\]: -1 cannot be used; allowed: a number from 1e-09",
    ),
    "grade misspelt": (
        prices('grade = "A615-6O"\nprice = 1.2'),
        r"key steel\[1\].grade: 'A615-6O' cannot be used; allowed: \*, A615-40, .*"
        "hint: the nearest name is 'A615-60'",
    ),
    "grade a number": (
        prices("grade = 60\nprice = 1.2"),
        r"key steel\[1\].grade: 60 cannot be used; allowed: a text of 1 to 20",
    ),
    "size a number": (
        prices("size = 25\nprice = 1.2"),
        r"key steel\[1\].size: 25 cannot be used; allowed: a text of 1 to 20",
    ),
    "size empty": (prices('size = ""\nprice = 1.2'), "size: '' cannot be used; allowed"),
    "price twice": (
        prices(
            'grade = "A615-60"\nsize = "10m"\nprice = 1', 'grade="A615-420"\nsize="10M"\nprice=2'
        ),
        r"key steel\[2\]: 2 cannot be used; allowed: one price for size 10M of grade A615",
    ),
    "hours out of order": (
        toml(hours("20", "15", "30")),
        "key fixing_hours: low, typical, high 20, 15, 30 cannot be used; allowed: low <= typ",
    ),
    "hours typical above high": (
        toml(hours("10", "35", "30")),
        "key fixing_hours: low, typical, high 10, 35, 30 cannot be used; allowed: low <= typic",
    ),
    "hours zero": (
        toml(hours("0", "15", "30")),
        "key fixing_hours.low: 0 cannot be used; allowed: a number from 0.5 to 500 h/t",
    ),
    "hours without source": (
        toml(hours("10", "15", "30", '" "')),
        "key fixing_hours.source: ' ' cannot be used; allowed: a text of 1",
    ),
    "hours a loop": (
        toml(f"fixing_hours.low{'.a' * 99} = 1\nfixing_hours.typical = 2\nfixing_hours.high = 3"),
        "key fixing_hours.low: {'a': {'a': .* cannot be used; allowed: a number from 0.5 to 500",
    ),
    "part of a spread": (
        toml('[steel_carbon]\ntypical = 700\nsource = "x"'),
        "key 'steel_carbon.low' is missing; allowed: all of low, typical, high; hint: leave steel_",
    ),
    "source alone": (toml('[steel_carbon]\nsource = "x"'), "key 'steel_carbon.low' is missing"),
    "no source": (
        toml("[steel_carbon]\nlow = 600\ntypical = 700\nhigh = 800"),
        "key steel_carbon: source '' cannot be used; allowed: a text saying whose figures",
    ),
    "carbon per kg": (
        toml('[steel_carbon]\nlow = 0.6\ntypical = 0.7\nhigh = 0.8\nsource = "x"'),
        "key steel_carbon.low: 0.6 cannot be used; allowed: a number from 10 to 10000 kgCO2e/t",
    ),
    "concrete carbon per kg": (
        toml('[concrete_carbon]\nlow = 0.1\ntypical = 0.2\nhigh = 0.3\nsource = "x"'),
        "key concrete_carbon.low: 0.1 cannot be used; allowed: a number from 5 to 2000 kgCO2e/m3",
    ),
}

BAD_CSV = {
    # name: (text, message after the file)
    "unknown key": (
        CSV + "labor_rate,,,50,EUR/h,",
        "row 9, column key: unknown key 'labor_rate'; allowed: .*; hint: .*'labour_rate'",
    ),
    "key twice": (
        CSV + "labour_rate,,,50,EUR/h,",
        "row 9, column value: labour_rate '50' cannot be used; allowed: every key but steel once",
    ),
    "key missing": (CSV.replace("labour_rate,,,48,EUR/h,\n", ""), "key 'labour_rate' is missing"),
    "price twice": (
        CSV + "steel,*,*,1.3,EUR/kg,",
        r"row 9, column value: steel '1.3' cannot be used; allowed: one price for size \* of grade",
    ),
    "per lb": (
        CSV.replace("EUR/kg", "EUR/lb"),
        "row 5, column unit: unit of steel 'EUR/lb' cannot be used; allowed: EUR/kg",
    ),
    "other currency": (
        CSV.replace("EUR/h", "USD/h"),
        "row 6, column unit: unit of labour_rate 'USD/h' cannot be used; allowed: EUR/h",
    ),
    "no unit": (CSV.replace("EUR/m3", ""), "row 7, column unit: unit of concrete_price '' cannot"),
    "unit of none": (
        CSV.replace("EUR,-", "EUR,m"),
        "row 4, column unit: unit of currency 'm' cann",
    ),
    "word": (
        CSV.replace("48", "much"),
        "row 6, column value: labour_rate 'much' cannot be used; allowed: a number from 0 to",
    ),
    "decimal comma": (
        CSV.replace("48", '"48,5"'),
        "row 6, column value: labour_rate '48,5' cannot .*; hint: write a decimal point and no tho",
    ),
    "no value": (CSV.replace("160", ""), "row 7, column value: concrete_price '' cannot be used"),
    "infinite": (CSV.replace("160", "1e999"), "row 7, column value: concrete_price '1e999' cannot"),
    "truth": (
        CSV.replace("160", "true"),
        "row 7, column value: concrete_price true cannot be used",
    ),
    "grade of a rate": (
        CSV.replace("labour_rate,,", "labour_rate,,A615-60"),
        "row 6, column grade: grade of labour_rate 'A615-60' cannot be used; allowed: a grade for",
    ),
    "size of a rate": (
        CSV.replace("labour_rate,", "labour_rate,25"),
        "row 6, column size: size of labour_rate '25' cannot be used; allowed: a size for steel al",
    ),
    "unknown grade": (
        CSV + "steel,,B500C,1.3,EUR/kg,",
        r"row 9, column grade: grade of steel 'B500C' cannot be used; allowed: \*, .*'B500B'",
    ),
    "hours per ton": (
        CSV + "fixing_hours.low,,,12,h/ton,x",
        "row 9, column unit: unit of fixing_hours.low 'h/ton' cannot be used; allowed: h/t",
    ),
    "long source": (
        CSV
        + "".join(f"fixing_hours.{b},,,12,h/t,{'x' * 301}\n" for b in ("low", "typical", "high")),
        "row 9, column source: source of fixing_hours.low 'x{40}...' cannot be used; allowed: a te",
    ),
    "no source": (
        CSV + "".join(f"fixing_hours.{b},,,12,h/t,\n" for b in ("low", "typical", "high")),
        "key fixing_hours: source '' cannot be used; allowed: a text saying whose figures",
    ),
    "header": (CSV.replace("source", "origin"), "row 1: unknown column 'origin'; allowed: key,"),
    "no units row": (CSV.replace("-,-,-,-,-,-\n", ""), "row 2, column key: 'system' is not a unit"),
}


def refused(path: Path, message: str) -> None:
    """Read a list that must be refused with the message given."""
    with pytest.raises(TableError, match=message) as caught:
        price_list(path, "si")
    assert caught.value.file == str(path)
    assert str(caught.value).startswith(str(path))
    assert len(str(caught.value)) < len(str(path)) + 700


def test_lists_are_sound_unchanged(tmp_path: Path) -> None:
    """The faults below are the only ones of their files."""
    (tmp_path / "a.toml").write_text(toml(hours("10", "15", "30")), encoding="utf-8")
    (tmp_path / "a.csv").write_text(CSV, encoding="utf-8")
    assert price_list("a.toml", "si", tmp_path).fixing_hours.high == 30.0
    assert price_list("a.csv", "si", tmp_path).steel == {("*", "*"): 1.25}


@pytest.mark.parametrize(("text", "message"), BAD_TOML.values(), ids=BAD_TOML)
def test_bad_toml(tmp_path: Path, text: str, message: str) -> None:
    """One fault, one message."""
    path = tmp_path / "bad.toml"
    path.write_text(text, encoding="utf-8")
    refused(path, message)


@pytest.mark.parametrize(("text", "message"), BAD_CSV.values(), ids=BAD_CSV)
def test_bad_csv(tmp_path: Path, text: str, message: str) -> None:
    """One fault, one message, with the row as a spreadsheet counts it."""
    path = tmp_path / "bad.csv"
    path.write_text(text, encoding="utf-8")
    refused(path, message)


@pytest.mark.parametrize(
    ("name", "data", "message"),
    [
        ("a.toml", b'currency = "\xff"', "byte 0xff is not UTF-8; allowed: UTF-8 text"),
        ("b.toml", b"#" * 200_001, "is larger than allowed; allowed: 200 kB"),
        ("c.toml", b"a = 1\x00", r"is not TOML \("),
        ("d.csv", b"key\xff", "row 1: byte 0xff is not UTF-8"),
        ("e.csv", b"", "is empty; allowed: a header row key,size,grade,value,unit,source"),
    ],
)
def test_bytes_that_are_no_list(tmp_path: Path, name: str, data: bytes, message: str) -> None:
    """Files of another kind are refused as what they are."""
    path = tmp_path / name
    path.write_bytes(data)
    refused(path, message)


@pytest.mark.parametrize("suffix", [".toml", ".csv"])
def test_files_that_are_not_there(tmp_path: Path, suffix: str) -> None:
    """A missing file, a folder and a pipe are told apart from a bad list."""
    refused(tmp_path / f"none{suffix}", "does not exist; allowed: the path of a (TOML|CSV) file")
    (tmp_path / f"folder{suffix}").mkdir()
    refused(tmp_path / f"folder{suffix}", "is not a regular file; allowed: the path of a")
    os.mkfifo(tmp_path / f"pipe{suffix}")
    refused(tmp_path / f"pipe{suffix}", "is not a regular file; allowed: the path of a")


def test_file_that_cannot_be_opened(tmp_path: Path) -> None:
    """The system's own reason is passed on: here a name longer than any file's."""
    refused(tmp_path / ("n" * 300 + ".toml"), "cannot be read: File name too long")


def test_name_that_no_terminal_can_show() -> None:
    """The message about such a file is printable."""
    with pytest.raises(TableError, match="does not exist") as caught:
        price_list("a\x1b[2J.toml", "si")
    assert str(caught.value).isprintable()


@given(text=st.text(max_size=200))
def test_any_text_is_read_or_refused(tmp_path_factory: pytest.TempPathFactory, text: str) -> None:
    """Text behind a sound list leaves its prices alone or makes a TableError, nothing else."""
    path = tmp_path_factory.getbasetemp() / "any.toml"
    path.write_text(toml() + text, encoding="utf-8", errors="replace", newline="")
    with contextlib.suppress(TableError):
        assert price_list(path, "si").steel == {("*", "*"): 1.25}
