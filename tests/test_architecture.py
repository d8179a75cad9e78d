"""Who may import whom, and what every module and docstring has to have."""

from __future__ import annotations

import ast
import re
import sys
from collections.abc import Iterator
from functools import cache
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent
PACKAGES = ("catalogs", "engine", "optimizer")
ALLOWED = {
    "catalogs": {"catalogs"},
    "engine": {"engine", "catalogs"},
    "optimizer": {"optimizer", "engine", "catalogs"},
}
LONGEST = 400
SOLVER = {
    "optimizer/beams/choice.py",
    "optimizer/beams/stock_model.py",
    "optimizer/beams/stock_relaxation.py",
    "optimizer/model.py",
    "optimizer/palette_model.py",
}
TERMINAL = {
    "optimizer/beams/respan_view.py",
    "optimizer/beams/view.py",
    "optimizer/cli.py",
    "optimizer/cli_beam.py",
    "optimizer/cli_options.py",
    "optimizer/cli_respan.py",
    "optimizer/options_view.py",
    "optimizer/outputs.py",
    "optimizer/views.py",
}


def modules(*folders: str) -> list[Path]:
    """Return the modules of the given folders."""
    return sorted(path for folder in folders for path in (ROOT / folder).rglob("*.py"))


def name_of(path: Path) -> str:
    """Return a module's path within the repository."""
    return path.relative_to(ROOT).as_posix()


@cache
def tree_of(path: Path) -> ast.Module:
    """Return a module's syntax tree."""
    return ast.parse(path.read_text(encoding="utf-8"))


def imported(path: Path) -> set[str]:
    """Return the top-level names of everything a module imports, at any depth of it."""
    found = set()
    for node in ast.walk(tree_of(path)):
        if isinstance(node, ast.Import):
            found |= {alias.name.partition(".")[0] for alias in node.names}
        elif isinstance(node, ast.ImportFrom):
            # Relative imports would slip past the names looked for here.
            assert node.level == 0, f"{name_of(path)}: relative import"
            found.add((node.module or "").partition(".")[0])
    return found


def test_modules_are_found() -> None:
    """The tests below look at all packages, not at an empty folder."""
    for package in (*PACKAGES, "tests"):
        assert len(modules(package)) > 5


@pytest.mark.parametrize("path", modules(*PACKAGES), ids=name_of)
def test_import_direction(path: Path) -> None:
    """Imports go catalogs <- engine <- optimizer, and nothing imports the tests."""
    package = name_of(path).partition("/")[0]
    ours = imported(path) & {*PACKAGES, "tests"}
    assert ours <= ALLOWED[package]


@pytest.mark.parametrize(
    ("library", "places"), [("ortools", SOLVER), ("rich", TERMINAL), ("typer", TERMINAL)]
)
def test_heavy_libraries_stay_in_their_modules(library: str, places: set[str]) -> None:
    """The solver is used in the model only, the terminal's libraries where it is printed to."""
    users = {name_of(path) for path in modules(*PACKAGES) if library in imported(path)}
    assert users
    assert users <= places


def test_packages_need_nothing_else() -> None:
    """Other than the declared dependencies only the standard library is imported."""
    declared = {"numpy", "ortools", "pydantic", "pydantic_core", "rich", "typer"}
    of_documents = {"ezdxf", "jinja2", "markupsafe", "openpyxl"}
    for path in modules(*PACKAGES):
        own = declared | (of_documents if "documents" in path.parts else set())
        foreign = imported(path) - set(sys.stdlib_module_names) - {*PACKAGES, *own}
        assert not foreign, name_of(path)


def test_every_folder_of_modules_is_a_package() -> None:
    """Each folder with modules has its __init__.py, the tests' folders too."""
    folders = {path.parent for path in modules(*PACKAGES, "tests")}
    for folder in folders:
        assert (folder / "__init__.py").is_file(), name_of(folder)


def test_every_module_says_what_it_is() -> None:
    """Each module starts with a docstring."""
    for path in modules(*PACKAGES, "tests"):
        assert ast.get_docstring(tree_of(path)), name_of(path)


def test_modules_are_short() -> None:
    """No module grows beyond 400 lines."""
    long = {
        name_of(path): count
        for path in modules(*PACKAGES)
        if (count := len(path.read_text(encoding="utf-8").splitlines())) >= LONGEST
    }
    assert not long


def test_test_functions_have_docstrings() -> None:
    """Each test says what it holds."""
    for path in modules("tests"):
        for node in ast.walk(tree_of(path)):
            if isinstance(node, ast.FunctionDef) and node.name.startswith("test_"):
                assert ast.get_docstring(node), f"{name_of(path)}: {node.name}"


def test_comparisons_can_fail() -> None:
    """No comparison whose answer is dropped, and none with the tolerances of old helpers."""
    for path in modules("tests"):
        for node in ast.walk(tree_of(path)):
            where = f"{name_of(path)}: {getattr(node, 'lineno', 0)}"
            if isinstance(node, ast.Expr) and isinstance(node.value, ast.Call):
                called = ast.unparse(node.value.func)
                assert not called.endswith((".allclose", ".isclose")), where
            if isinstance(node, ast.Attribute):
                assert not node.attr.startswith(("assert_almost", "assertAlmost")), where


# ---------------------------------------------------------------- docstrings of the engine

_ENTRY = re.compile(r"^(\*{0,2}\w[\w, *]*?) : (.+)$")


def public_functions() -> Iterator[tuple[str, ast.FunctionDef]]:
    """Yield public functions and methods of the engine that take or return something."""
    for path in modules("engine"):
        scopes: list[tuple[str, list[ast.stmt]]] = [("", tree_of(path).body)]
        scopes += [
            (f"{node.name}.", node.body)
            for node in tree_of(path).body
            if isinstance(node, ast.ClassDef) and not node.name.startswith("_")
        ]
        for prefix, body in scopes:
            for node in body:
                if not isinstance(node, ast.FunctionDef) or node.name.startswith("_"):
                    continue
                decorators = {ast.unparse(item) for item in node.decorator_list}
                if not decorators & {"overload", "property"}:
                    yield f"{name_of(path)}: {prefix}{node.name}", node


FUNCTIONS = dict(public_functions())


def sections(node: ast.FunctionDef) -> dict[str, list[str]]:
    """Return the lines of each underlined section of a docstring."""
    lines = (ast.get_docstring(node) or "").splitlines()
    found: dict[str, list[str]] = {}
    current = ""
    for line, below in zip(lines, [*lines[1:], ""], strict=True):
        if below and set(below) == {"-"}:
            current = line
            found[current] = []
        elif current and not (line and set(line) == {"-"}):
            found[current].append(line)
    return found


def entries(lines: list[str]) -> dict[str, tuple[str, str]]:
    """Return type and description of each name of a section."""
    found: dict[str, tuple[str, str]] = {}
    names: list[str] = []
    for line in lines:
        match = _ENTRY.match(line)
        if match:
            names = [name.strip() for name in match[1].split(",")]
            found |= dict.fromkeys(names, (match[2], ""))
        elif line.startswith(" "):
            for name in names:
                kind, text = found[name]
                found[name] = (kind, f"{text} {line.strip()}")
    return found


def measured(annotation: ast.expr | None) -> bool:
    """Whether a value is a number with a unit: a float or an array of them."""
    text = "" if annotation is None else ast.unparse(annotation)
    return bool(re.search(r"\bfloat\b|FloatArray|float64", text))


def arguments(node: ast.FunctionDef) -> list[ast.arg]:
    """Return the arguments of a function without self and cls."""
    given = [*node.args.posonlyargs, *node.args.args, *node.args.kwonlyargs]
    return [item for item in given if item.arg not in ("self", "cls")]


@pytest.mark.parametrize("name", FUNCTIONS)
def test_documented_parameters_are_those_of_the_signature(name: str) -> None:
    """Parameters in a docstring are the function's own, in its order."""
    node = FUNCTIONS[name]
    documented = entries(sections(node).get("Parameters", []))
    assert list(documented) == [item.arg for item in arguments(node)]


# Their numbers carry whatever unit they are given.
OF_ANY_UNIT = {
    "engine/batch.py: Batch.quantity",
    "engine/units.py: UnitSystem.to_trade",
    "engine/units.py: parse_quantity",
    "engine/units.py: plain",
}


@pytest.mark.parametrize("name", sorted(FUNCTIONS.keys() - OF_ANY_UNIT))
def test_numbers_have_units(name: str) -> None:
    """Every float of a signature has its unit in square brackets; so has a float returned."""
    node = FUNCTIONS[name]
    documented = entries(sections(node).get("Parameters", []))
    for item in arguments(node):
        if measured(item.annotation):
            assert re.search(r"\[[^\]]+\]", documented[item.arg][1]), item.arg
    returns = node.returns
    if returns is not None and ast.unparse(returns) != "None":
        text = " ".join(sections(node)["Returns"])
        assert not measured(returns) or re.search(r"\[[^\]]+\]", text)
