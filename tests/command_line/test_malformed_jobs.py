"""Job files with one defect each: refused with one message that names the key.

The first line of a file says which key the message must name; a second line, where there is
one, says which name the hint must offer.
"""

from __future__ import annotations

import time
from pathlib import Path

import pytest

from tests.command_line.complaints import assert_refused
from tests.command_line.program import run_here, run_process

FOLDER = Path(__file__).with_name("malformed")
FILES = sorted(FOLDER.glob("*.toml"))
_TIME_LIMIT = 2.0  # [s] a refusal needs no search; the slowest takes a few hundredths


def _expectation(path: Path) -> tuple[str, str | None]:
    """Key that the message must name, and the name its hint must offer."""
    lines = path.read_text(encoding="utf-8").splitlines()
    assert lines[0].startswith("# names: "), path.name
    hint = lines[1].removeprefix("# hints: ") if lines[1].startswith("# hints: ") else None
    return lines[0].removeprefix("# names: "), hint


def test_folder_is_full() -> None:
    """The folder is found, and holds many files."""
    assert len(FILES) >= 150


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_refused_with_the_key_named(
    path: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """Exit code 2, one message, nothing on standard output, nothing written, in no time."""
    monkeypatch.chdir(tmp_path)
    key, hint = _expectation(path)
    start = time.perf_counter()
    outcome = run_here(capsys, "rank", str(path), "--json", "out.json")
    duration = time.perf_counter() - start
    assert_refused(outcome, key, file=path.name, hint=hint)
    assert list(tmp_path.iterdir()) == []
    assert duration < _TIME_LIMIT


@pytest.mark.parametrize("command", ["rank", "check"])
@pytest.mark.parametrize("stem", ["size_tower_of_powers", "control_escape_in_mark"])
def test_refused_as_a_process(command: str, stem: str, tmp_path: Path) -> None:
    """The same holds for the program as users start it, with either command."""
    path = FOLDER / f"{stem}.toml"
    outcome = run_process(command, str(path), "--json", "out.json", cwd=tmp_path)
    key, hint = _expectation(path)
    assert_refused(outcome, key, file=path.name, hint=hint)
    assert list(tmp_path.iterdir()) == []
