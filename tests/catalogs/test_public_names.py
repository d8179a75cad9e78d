"""The names that the package offers, and the shape of its errors."""

import pickle
from importlib import import_module, resources

import pytest

import catalogs


def test_all_is_sorted_and_complete() -> None:
    """Every listed name exists, and the list is sorted so that changes read easily."""
    assert catalogs.__all__ == sorted(catalogs.__all__)
    assert all(hasattr(catalogs, name) for name in catalogs.__all__)


def test_all_holds_what_the_modules_offer() -> None:
    """The package re-exports the public names of all its modules."""
    # By name: the function steel_grades hides the module of that name in the package.
    modules = ["bars", "errors", "labour", "prices", "steel_grades"]
    offered = [name for module in modules for name in import_module(f"catalogs.{module}").__all__]
    assert sorted(offered) == catalogs.__all__


def test_typing_marker_and_sources_lie_in_the_package() -> None:
    """Type checkers find the marker, readers the sources of every table."""
    package = resources.files("catalogs")
    assert package.joinpath("py.typed").is_file()
    sources = package.joinpath("data", "SOURCES.md").read_text(encoding="utf-8")
    tables = [
        entry.name
        for entry in package.joinpath("data").iterdir()
        if entry.name.endswith((".csv", ".toml"))
    ]
    assert len(tables) == 10
    assert [name for name in tables if f"| `{name}` |" not in sources] == []


def test_error_tree() -> None:
    """One class catches every refusal, and each is a ValueError."""
    assert issubclass(catalogs.CatalogError, ValueError)
    assert issubclass(catalogs.UnknownNameError, catalogs.CatalogError)
    assert issubclass(catalogs.TableError, catalogs.CatalogError)


def test_errors_survive_pickling() -> None:
    """An error raised in a worker process reaches the caller with its values."""
    with pytest.raises(catalogs.UnknownNameError, match="'#12' is not known") as caught:
        catalogs.bar_catalog("astm-inch").bar("#12")
    copy = pickle.loads(pickle.dumps(caught.value))
    assert str(copy) == str(caught.value)
    assert (copy.name, copy.allowed) == ("#12", caught.value.allowed)
