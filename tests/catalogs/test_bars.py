"""Looking bars up: exact names, next size up, built-in catalogues and a user's file."""

import dataclasses
import math
from pathlib import Path

import pytest

from catalogs import (
    BUILTIN_CATALOGS,
    Bar,
    BarCatalog,
    CatalogError,
    UnknownNameError,
    bar_catalog,
)

SHOP_CSV = "designation,diameter,area,mass\n-,mm,mm^2,kg/m\nT12,12,113,0.888\nT20,20,314,2.47\n"


def make_bar(**changes: object) -> Bar:
    """Return the #8 bar with some of its figures changed."""
    return dataclasses.replace(bar_catalog("astm-inch").bar("#8"), **changes)  # type: ignore[arg-type]


def test_builtin_names() -> None:
    """The four built-in catalogues, in the order in which they are listed to the user."""
    assert BUILTIN_CATALOGS == ("astm-inch", "astm-metric", "csa", "en10080")


@pytest.mark.parametrize("name", BUILTIN_CATALOGS)
def test_builtin_is_read_once(name: str) -> None:
    """A built-in catalogue is one object, however its name is spelled."""
    assert bar_catalog(name) is bar_catalog(f" {name.upper()} ")
    assert bar_catalog(name).name == name


@pytest.mark.parametrize("designation", ["#8", " #8 ", "\t#8"])
def test_bar_is_found_by_designation(designation: str) -> None:
    """Blanks around a designation do not matter."""
    assert bar_catalog("astm-inch").bar(designation).diameter == 1.0


def test_bar_is_found_whatever_the_case() -> None:
    """Case does not matter."""
    assert bar_catalog("csa").bar("25m").designation == "25M"


@pytest.mark.parametrize("name", BUILTIN_CATALOGS)
def test_every_bar_finds_itself_and_knows_its_place(name: str) -> None:
    """Lookup by name, lookup by diameter and position agree for every size."""
    catalog = bar_catalog(name)
    for place, bar in enumerate(catalog.bars):
        assert catalog.bar(bar.designation) is bar
        assert catalog.smallest_from(bar.diameter) is bar
        assert (bar.position, bar.system) == (place, catalog.system)


@pytest.mark.parametrize(
    ("catalog", "asked", "hint"),
    [
        ("astm-inch", "8", "#8"),
        ("astm-inch", "18", "#18"),
        ("astm-inch", "No. 8", "#8"),
        ("astm-inch", "#8M", "#8"),
        ("astm-metric", "#25", "25"),
        ("csa", "25", "25M"),
        ("en10080", "20 mm", "20"),
        ("en10080", "T16", "16"),
    ],
)
def test_unknown_bar_hints_at_the_nearest(catalog: str, asked: str, hint: str) -> None:
    """A near miss is refused, with the designation that was probably meant."""
    with pytest.raises(UnknownNameError, match=f"hint: the nearest name is '{hint}'$") as caught:
        bar_catalog(catalog).bar(asked)
    assert caught.value.name == asked
    assert caught.value.allowed == tuple(bar.designation for bar in bar_catalog(catalog).bars)


def test_unknown_bar_lists_the_sizes() -> None:
    """Without anything near, the message lists what there is and guesses nothing."""
    with pytest.raises(
        UnknownNameError,
        match=r"^catalogue csa: bar 'wire' is not known; allowed: 10M, 15M,.* 55M$",
    ):
        bar_catalog("csa").bar("wire")


def test_long_name_is_cut_in_the_message() -> None:
    """A name of any length gives a message of bounded length."""
    with pytest.raises(UnknownNameError, match=r"bar 'x{40}\.\.\.' is not known") as caught:
        bar_catalog("csa").bar("x" * 100_000)
    assert len(str(caught.value)) < 200


@pytest.mark.parametrize(
    ("catalog", "diameter", "expected"),
    [
        ("astm-inch", 0.1, "#3"),
        ("astm-inch", 0.7501, "#7"),
        ("astm-inch", 1.411, "#14"),
        ("astm-inch", 2.257, "#18"),
        ("astm-metric", 20.0, "22"),
        ("csa", 16.0, "15M"),
        ("csa", 16.1, "20M"),
        ("en10080", 38.1 / 25.4 * 16.0, "25"),
    ],
)
def test_next_size_up(catalog: str, diameter: float, expected: str) -> None:
    """The thinnest bar that is not thinner than asked."""
    assert bar_catalog(catalog).smallest_from(diameter).designation == expected


def test_next_size_up_forgives_conversion_noise() -> None:
    """A diameter that is above a size by rounding error alone finds that size."""
    assert bar_catalog("en10080").smallest_from(math.nextafter(20.0, 21.0)).designation == "20"


@pytest.mark.parametrize("diameter", [2.26, 1e6, math.inf, math.nan])
def test_next_size_up_raises_past_the_thickest(diameter: float) -> None:
    """When no bar is thick enough, the message gives the thickest."""
    with pytest.raises(
        UnknownNameError, match=r"no bar from .* in; allowed: up to 2\.257 in \(#18\)$"
    ):
        bar_catalog("astm-inch").smallest_from(diameter)


def test_diameter_in_mm() -> None:
    """One inch is 25.4 mm; a metric diameter stays as it is."""
    assert bar_catalog("astm-inch").bar("#8").diameter_mm == pytest.approx(25.4, rel=1e-12)
    assert bar_catalog("csa").bar("25M").diameter_mm == 25.2


@pytest.mark.parametrize(
    ("catalog", "expected"),
    [
        ("astm-inch", [1.67] * 2 + [1.17] * 3 + [1.0] * 6),
        ("astm-metric", [1.67] * 2 + [1.17] * 3 + [1.0] * 6),
        ("csa", [1.67] + [1.17] * 2 + [1.0] * 5),
        ("en10080", [1.67] * 5 + [1.17] * 2 + [1.0] * 4),
    ],
)
def test_relative_labour_of_every_size(catalog: str, expected: list[float]) -> None:
    """The in-lb and metric names of one bar fall into the same labour band."""
    assert [bar.relative_labour for bar in bar_catalog(catalog).bars] == expected


@pytest.mark.parametrize("name", ["astm", "", "shop.txt", "csa.csv.bak"])
def test_unknown_catalogue(name: str) -> None:
    """A name that is neither built in nor a CSV file lists what would be accepted."""
    with pytest.raises(
        UnknownNameError,
        match=r"^bar catalogue .* is not known; "
        r"allowed: astm-inch, astm-metric, csa, en10080, or a path ending in \.csv",
    ) as caught:
        bar_catalog(name)
    assert caught.value.allowed == BUILTIN_CATALOGS


def test_unknown_catalogue_hints_at_the_nearest() -> None:
    """A misspelt built-in name is recognised."""
    with pytest.raises(UnknownNameError, match=r"hint: the nearest name is 'en10080'$"):
        bar_catalog("EN 10080")


@pytest.mark.parametrize("as_text", [True, False])
def test_users_file_is_read_from_the_base(tmp_path: Path, as_text: bool) -> None:
    """A relative path starts from the directory given, text or Path alike."""
    (tmp_path / "Shop.CSV").write_text(SHOP_CSV, encoding="utf-8")
    catalog = bar_catalog("Shop.CSV" if as_text else Path("Shop.CSV"), base=tmp_path)
    assert (catalog.name, catalog.system) == ("Shop.CSV", "si")
    assert catalog.bars == (
        Bar(designation="T12", diameter=12.0, area=113.0, mass=0.888, position=0, system="si"),
        Bar(designation="T20", diameter=20.0, area=314.0, mass=2.47, position=1, system="si"),
    )


def test_users_file_without_a_base(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Without a base, a relative path starts from the working directory."""
    (tmp_path / "shop.csv").write_text(SHOP_CSV, encoding="utf-8")
    monkeypatch.chdir(tmp_path)
    assert len(bar_catalog("shop.csv").bars) == 2


def test_absolute_path_ignores_the_base(tmp_path: Path) -> None:
    """An absolute path is taken as it is."""
    (tmp_path / "shop.csv").write_text(SHOP_CSV, encoding="utf-8")
    assert len(bar_catalog(tmp_path / "shop.csv", base=Path("/nowhere")).bars) == 2


def test_users_file_is_read_again(tmp_path: Path) -> None:
    """A file that has been edited is not remembered from before."""
    path = tmp_path / "shop.csv"
    path.write_text(SHOP_CSV, encoding="utf-8")
    assert len(bar_catalog(path).bars) == 2
    path.write_text(SHOP_CSV + "T25,25,491,3.85\n", encoding="utf-8")
    assert len(bar_catalog(path).bars) == 3


@pytest.mark.parametrize(
    "text",
    [
        "\ufeff" + SHOP_CSV,
        SHOP_CSV.replace("\n", "\r\n"),
        SHOP_CSV.replace("\n", "\n\n"),
        SHOP_CSV.rstrip("\n"),
        SHOP_CSV.replace(",", " , "),
        SHOP_CSV.replace("T12", '"T12"'),
        SHOP_CSV.replace("0.888", "+8.88e-1"),
        "area,mass,designation,diameter\nmm^2,kg/m,-,mm\n113,.888,T12,12.\n314,2.47,T20,20\n",
    ],
    ids=["bom", "crlf", "blank lines", "no end", "blanks", "quotes", "exponent", "order"],
)
def test_harmless_ways_of_writing_a_table(tmp_path: Path, text: str) -> None:
    """What spreadsheets and editors do to a CSV file changes nothing."""
    (tmp_path / "plain.csv").write_bytes(SHOP_CSV.encode())
    (tmp_path / "other.csv").write_bytes(text.encode())
    expected = bar_catalog("plain.csv", base=tmp_path).bars
    assert bar_catalog("other.csv", base=tmp_path).bars == expected


@pytest.mark.parametrize("measure", ["diameter", "area", "mass"])
@pytest.mark.parametrize("value", [0.0, -1.0, math.nan, math.inf])
def test_impossible_bar_is_refused(measure: str, value: float) -> None:
    """A bar made in code is as sane as one from a table."""
    with pytest.raises(CatalogError, match=f"bar #8: {measure} .*; allowed: a finite number above"):
        make_bar(**{measure: value})


def test_bar_of_unknown_system_is_refused() -> None:
    """Only two systems of units exist."""
    with pytest.raises(CatalogError, match="bar #8: system 'metric' is not known; allowed: us, si"):
        make_bar(system="metric")


@pytest.mark.parametrize(
    ("system", "bars"), [("us", ()), ("si", (make_bar(),))], ids=["empty", "mixed units"]
)
def test_unusable_catalogue_is_refused(system: str, bars: tuple[Bar, ...]) -> None:
    """A catalogue has bars, all in its own units."""
    with pytest.raises(CatalogError, match=f"allowed: at least one bar, all of system '{system}'"):
        BarCatalog(name="mine", system=system, bars=bars)


def test_bars_cannot_be_changed() -> None:
    """A cached catalogue must not be altered by one of its users."""
    with pytest.raises(dataclasses.FrozenInstanceError, match="cannot assign to field 'area'"):
        bar_catalog("csa").bar("25M").area = 1.0  # type: ignore[misc]
