"""Starting among foreign packages of the same plain names."""

from __future__ import annotations

import importlib.metadata
import os
from pathlib import Path

import pytest

from tests.command_line.program import ROOT, environment, run_process


@pytest.mark.parametrize(
    ("name", "source"),
    [
        ("engine", ""),
        ("engine", "raise RuntimeError('foreign')\n"),
        ("catalogs", "def __getattr__(name):\n    return object\n"),
    ],
    ids=["empty engine", "engine that fails", "catalogs with every name"],
)
def test_foreign_package_stops_the_program(name: str, source: str, tmp_path: Path) -> None:
    """A foreign `engine` or `catalogs` earlier on the path is named, not computed with."""
    foreign = tmp_path / "foreign" / name
    foreign.mkdir(parents=True)
    (foreign / "__init__.py").write_text(source, encoding="utf-8")
    here = tmp_path / "here"
    here.mkdir()
    path = os.pathsep.join([str(foreign.parent), str(ROOT)])
    outcome = run_process("bars", cwd=here, env=environment(PYTHONPATH=path))
    assert outcome.code not in (0, 1, 2)
    assert outcome.out == ""
    assert outcome.err.startswith(f"cagewright: package {name} comes from ")
    assert "environment of its own" in outcome.err
    assert "Traceback" not in outcome.err


@pytest.mark.parametrize("name", ["catalogs", "engine", "optimizer"])
def test_no_other_distribution_provides_our_names(name: str) -> None:
    """In the environment of the tests nobody else installs these plain names."""
    owners = importlib.metadata.packages_distributions().get(name, [])
    assert set(owners) <= {"cagewright"}
