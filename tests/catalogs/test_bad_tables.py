"""Tables that must be refused: every message names the file, the place and what is allowed."""

import os
import re
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from catalogs import TableError, bar_catalog
from catalogs._tables import Column, parse

HEAD = "designation,diameter,area,mass\n"
US = HEAD + "-,in,in^2,lb/ft\n"
SI = HEAD + "-,mm,mm^2,kg/m\n"
T12 = "T12,12,113,0.888\n"


def refused(path: Path, message: str) -> TableError:
    """Read a file that must be refused with the message given, and return the error."""
    with pytest.raises(TableError, match=message) as caught:
        bar_catalog(path)
    assert caught.value.file == str(path)
    return caught.value


def many_bars(count: int) -> str:
    """Return a table of so many bars, each a little thicker than the last."""
    diameters = [6.0 + 0.05 * place for place in range(count)]
    rows = [f"B{d:.2f},{d:.2f},{0.785398 * d * d:.4f},{0.00616538 * d * d:.5f}" for d in diameters]
    return SI + "\n".join(rows) + "\n"


BAD_ROWS = {
    # name: (text, row, column, message after the place)
    "empty cell": (SI + "T12,12,,0.888", 3, "area", "'' cannot be used; allowed: a plain decimal"),
    "word": (SI + "T12,twelve,113,0.888", 3, "diameter", "'twelve' cannot be used; allowed: a pl"),
    "nan": (SI + "T12,nan,113,0.888", 3, "diameter", "'nan' cannot be used"),
    "infinite": (SI + "T12,12,inf,0.888", 3, "area", "'inf' cannot be used"),
    "overflow": (SI + "T12,12,113,1e999", 3, "mass", "'1e999' cannot be used"),
    "underscore": (SI + "T12,1_2,113,0.888", 3, "diameter", "'1_2' cannot be used"),
    "other digits": (SI + "T12,\uff11\uff12,113,0.888", 3, "diameter", "cannot be used"),
    "hexadecimal": (SI + "T12,0xC,113,0.888", 3, "diameter", "'0xC' cannot be used"),
    "formula": (SI + "T12,=6*2,113,0.888", 3, "diameter", "'=6\\*2' cannot be used"),
    "unit in cell": (SI + "T12,12 mm,113,0.888", 3, "diameter", "'12 mm' cannot be used"),
    "quoted decimal comma": (
        SI + 'T12,12,113,"0,888"',
        3,
        "mass",
        "'0,888' cannot be used; .*; hint: write a decimal point",
    ),
    "zero": (
        SI + "T12,0,113,0.888",
        3,
        "diameter",
        "'0' cannot be used; allowed: a number above 0",
    ),
    "negative area": (SI + "T12,12,-113,0.888", 3, "area", "'-113' cannot be used; allowed: a num"),
    "negative mass": (SI + "T12,12,113,-1", 3, "mass", "'-1' cannot be used; allowed: a number ab"),
    "no designation": (SI + " ,12,113,0.888", 3, "designation", "'' cannot be used; allowed: 1 to"),
    "long designation": (
        SI + "T" * 21 + ",12,113,0.888",
        3,
        "designation",
        "'T{21}' cannot be used; allowed: 1 to 20 printable characters without \\+ and /",
    ),
    "plus": (
        SI + "T12+,12,113,0.888",
        3,
        "designation",
        "'T12\\+' cannot be used; allowed: 1 to 20",
    ),
    "slash": (SI + "1/2,12,113,0.888", 3, "designation", "'1/2' cannot be used; allowed: 1 to 20"),
    "invisible": (SI + "T\u200b12,12,113,0.888", 3, "designation", "cannot be used; allowed: 1 to"),
    "twice": (
        SI + T12 + "t12,16,201,1.58",
        4,
        "designation",
        "'t12' cannot be used; allowed: every designation once, whatever its case",
    ),
    "descending": (
        SI + T12 + "T10,10,78.5,0.617",
        4,
        "diameter",
        "'10' cannot be used; allowed: above 12 mm of T12; hint: list the bars from thin to thick",
    ),
    "same diameter": (SI + T12 + "T12b,12,113,0.888", 4, "diameter", "allowed: above 12 mm of T12"),
    "inches as mm": (
        SI + "#3,0.375,0.11,0.376",
        3,
        "diameter",
        "'0.375' cannot be used; allowed: 3 to 80 mm; hint: the file gives diameters in mm",
    ),
    "mm as inches": (
        US + T12,
        3,
        "diameter",
        "'12' cannot be used; allowed: 3 to 80 mm; hint: .* in$",
    ),
    "thin": (SI + "W,2.99,7.02,0.0551", 3, "diameter", "'2.99' cannot be used; allowed: 3 to 80"),
    "thick": (SI + "B,80.1,5039,39.56", 3, "diameter", "'80.1' cannot be used; allowed: 3 to 80"),
    "huge": (SI + "B,1e300,1,1", 3, "diameter", "'1e300' cannot be used; allowed: 3 to 80 mm"),
    "area high": (
        SI + "T12,12,117.7,0.888",
        3,
        "area",
        "'117.7' cannot be used; allowed: within 4% of pi/4 d\\^2 = 113.1 mm\\^2",
    ),
    "area low": (SI + "T12,12,108.5,0.888", 3, "area", "allowed: within 4% of pi/4 d\\^2 = 113.1"),
    "us area": (US + "#8,1,0.82,2.67", 3, "area", "within 4% of pi/4 d\\^2 = 0.7854 in\\^2"),
    "mass high": (
        SI + "T12,12,113,0.950",
        3,
        "mass",
        "'0.950' cannot be used; allowed: within 7% of area times the density of steel = 0.887 kg",
    ),
    "mass low": (SI + "T12,12,113,0.824", 3, "mass", "within 7% of area times the density"),
    "metric mass in us": (US + "#8,1,0.79,3.973", 3, "mass", "density of steel = 2.688 lb/ft"),
    "unit unknown": (
        HEAD + "-,cm,mm^2,kg/m\n" + T12,
        2,
        "diameter",
        "'cm' is not a unit of it; allowed: in or mm; hint: the row below the header states the un",
    ),
    "no unit": (
        HEAD + "-,mm,,kg/m\n" + T12,
        2,
        "area",
        "'' is not a unit of it; allowed: in\\^2 or",
    ),
    "units row left out": (HEAD + T12, 2, "designation", "'T12' is not a unit of it; allowed: -"),
    "mixed units": (
        HEAD + "-,mm,in^2,kg/m\n" + T12,
        2,
        None,
        "mixed units mm,in\\^2,kg/m; allowed: in,in\\^2,lb/ft or mm,mm\\^2,kg/m$",
    ),
    "unknown column": (
        SI.replace("mass", "masss") + T12,
        1,
        None,
        "unknown column 'masss'; allowed: designation,diameter,area,mass; hint: .* 'mass'$",
    ),
    "column too many": (
        "designation,diameter,area,mass,X\n-,mm,mm^2,kg/m,-\n",
        1,
        None,
        "unknown column 'X'; allowed: designation,diameter,area,mass$",
    ),
    "unnamed column": ("designation,diameter,area,mass,\n", 1, None, "unknown column ''; allowed"),
    "upper case": (SI.replace("mass", "Mass") + T12, 1, None, "unknown column 'Mass'; .* 'mass'"),
    "column twice": ("designation,diameter,area,area\n", 1, None, "column 'area' appears twice"),
    "column missing": (
        "designation,diameter,area\n-,mm,mm^2\n",
        1,
        None,
        "column 'mass' is missin",
    ),
    "semicolons": (
        (SI + T12).replace(",", ";"),
        1,
        None,
        "no columns in 'designation;diameter;area;mass'; .*; hint: separate the columns by commas",
    ),
    "comment": ("# my bars\n" + SI + T12, 1, None, "unknown column '# my bars'; allowed: designat"),
    "decimal comma": (
        SI + "T12,12,113,0,888",
        3,
        None,
        "has 5 cells; allowed: 4 .designation,diameter,area,mass.; hint: look for a decimal comma",
    ),
    "short row": (SI + T12 + "T16,16", 4, None, "has 2 cells; allowed: 4"),
    "short units": (HEAD + "-,mm\n" + T12, 2, None, "has 2 cells; allowed: 4"),
    "row after blank lines": (SI + "\n\n" + "T12,12", 5, None, "has 2 cells; allowed: 4"),
    "open quote": (SI + '"T12,12,113,0.888', 3, None, "is not CSV .*; allowed: cells separated by"),
    "text after quote": (SI + '"T"12,12,113,0.888', 3, None, "is not CSV"),
    "two lines in a cell": (
        SI + '"T\n12",12,113,0.888',
        4,
        None,
        "a cell runs over two lines; allowed: one line a row; hint: look for a lone quote",
    ),
    "tabs": (
        (SI + T12).replace(",", "\t"),
        1,
        None,
        r"control character '\\t' found; allowed: printable text; hint: separate the columns by",
    ),
    "nul": (
        SI + "T12\x00,12,113,0.888",
        3,
        None,
        r"control character '\\x00' found; allowed: print",
    ),
    "escape": (SI + "\x1b[31mT12,12,113,0.888", 3, None, r"control character '\\x1b' found"),
    "long cell": (SI + "T12," + "9" * 5000 + "x,113,1", 3, "diameter", "'9{40}...' cannot be used"),
    "too long for a cell": (SI + "T" * 140_000 + ",12,113,1", 3, None, "is not CSV .field larger"),
    "many rows": (SI + T12 * 501, 503, None, "more data rows than allowed; allowed: 500"),
}


@pytest.mark.parametrize("case", BAD_ROWS)
def test_bad_place(tmp_path: Path, case: str) -> None:
    """The message starts with file, row and column of the fault, then says what is allowed."""
    text, row, column, message = BAD_ROWS[case]
    path = tmp_path / "shop.csv"
    path.write_bytes(text.encode())
    place = f"^{re.escape(str(path))}, row {row}" + (f", column {column}" if column else "")
    error = refused(path, f"(?s){place}: .*{message}")
    assert (error.row, error.column) == (row, column)


BAD_FILES = {
    "empty": (b"", "is empty; allowed: a header row designation,diameter,area,mass"),
    "blank": (b"\n\r\n\n", "is empty"),
    "mark only": (b"\xef\xbb\xbf", "is empty"),
    "header only": (HEAD.encode(), "has no units row; allowed: a row of units under designation,"),
    "no data": (SI.encode(), "has no data rows; allowed: at least 1 below the units row"),
    "61 bars": (many_bars(61).encode(), "has 61 bars; allowed: 1 to 60"),
    "large": (SI.encode() + b"\n" * 200_001, "is larger than allowed; allowed: 200 kB"),
    "utf-16": (
        (SI + T12).encode("utf-16"),
        "row 1: byte 0xff is not UTF-8; allowed: UTF-8 text; hint: save the file as CSV in UTF-8",
    ),
    "latin-1": (
        (SI + "Stab \u00f812,12,113,0.888").encode("latin-1"),
        "row 3: byte 0xf8 is not UT",
    ),
    "binary": (b"\x89PNG\r\n\x1a\n" + bytes(range(256)), "row 1: byte 0x89 is not UTF-8"),
    "archive": (b"PK\x03\x04" + bytes(100), r"row 1: control character '\\x03' found"),
}


@pytest.mark.parametrize("case", BAD_FILES)
def test_bad_file(tmp_path: Path, case: str) -> None:
    """A file that is no table at all is refused as a whole or at its first odd byte."""
    data, message = BAD_FILES[case]
    path = tmp_path / "shop.csv"
    path.write_bytes(data)
    error = refused(path, f"^{re.escape(str(path))}(: |, ){message}")
    assert error.column is None


PIECES = st.sampled_from(
    [
        b",",
        b"\n",
        b"\r",
        b'"',
        b";",
        b"\x00",
        b"\xff",
        b"-",
        b"mm",
        b"1",
        b"1e999",
        b"name",
        b"size",
        b" ",
    ]
)


@settings(max_examples=200, deadline=None, derandomize=True, database=None)
@given(pieces=st.lists(PIECES | st.binary(max_size=3), max_size=12), headed=st.booleans())
def test_any_bytes_are_read_or_refused(pieces: list[bytes], headed: bool) -> None:
    """Whatever a file holds, the reader returns whole rows or raises its own error."""
    columns = (Column(name="name"), Column(name="size", units=("mm",)))
    data = (b"name,size\n-,mm\n" if headed else b"") + b"".join(pieces)
    refusal = None
    try:
        table = parse("any.csv", data, columns)
    except TableError as error:
        refusal = str(error)
    if refusal is not None:
        assert refusal.startswith("any.csv")
        assert "; allowed: " in refusal
    else:
        assert table.units == {"name": "-", "size": "mm"}
        assert all(set(row.cells) == {"name", "size"} for row in table.rows)
        assert len(table.rows) >= 1


def test_limits_are_still_allowed(tmp_path: Path) -> None:
    """Sixty bars, and a file of just the largest size, are read."""
    text = many_bars(60)
    path = tmp_path / "shop.csv"
    path.write_text(text + "\n" * (200_000 - len(text)), encoding="utf-8")
    assert path.stat().st_size == 200_000
    assert len(bar_catalog(path).bars) == 60


@pytest.mark.parametrize(
    "row",
    ["A,3,7.07,0.0555", "B,80,5027,39.5", "C,12,117.6,0.93", "D,12,108.6,0.86", "E,12,113,0.949"],
)
def test_just_inside_the_bounds(tmp_path: Path, row: str) -> None:
    """Bounds refuse what is past them and nothing else."""
    path = tmp_path / "shop.csv"
    path.write_text(SI + row, encoding="utf-8")
    assert bar_catalog(path).bars[0].designation == row[0]


def test_missing_file(tmp_path: Path) -> None:
    """A path that leads nowhere is named in full."""
    refused(tmp_path / "none.csv", "none.csv: does not exist; allowed: the path of a CSV file")


def test_directory(tmp_path: Path) -> None:
    """A directory is not read."""
    (tmp_path / "folder.csv").mkdir()
    refused(tmp_path / "folder.csv", "folder.csv: is not a regular file; allowed: the path")


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="named pipes need POSIX")
def test_pipe(tmp_path: Path) -> None:
    """A named pipe is refused rather than waited for."""
    os.mkfifo(tmp_path / "pipe.csv")
    refused(tmp_path / "pipe.csv", "pipe.csv: is not a regular file")


def test_file_that_cannot_be_opened(tmp_path: Path) -> None:
    """What the operating system says is passed on."""
    refused(tmp_path / ("x" * 300 + ".csv"), "cannot be read: File name too long")


def test_name_that_cannot_be_shown(tmp_path: Path) -> None:
    """A file name with control characters reaches no terminal as it is."""
    with pytest.raises(TableError, match=r"\\x1b\[31m\.csv'\: does not exist") as caught:
        bar_catalog(tmp_path / "\x1b[31m.csv")
    assert "\x1b" not in str(caught.value)
