"""Job files too large or too binary to be stored: refused as well, and valid oddities accepted."""

from __future__ import annotations

import random
import time
from collections.abc import Callable
from pathlib import Path

import pytest

from tests.command_line.complaints import assert_refused
from tests.command_line.program import SMALL_JOB, Outcome, job_file, run_here

_HEX = "0x" + "f" * 100_000  # TOML puts no limit on the digits of an integer
_TIME_LIMIT = 4.0  # [s] files of megabytes have to be read first


def _swap(old: str, new: str) -> str:
    assert old in SMALL_JOB
    return SMALL_JOB.replace(old, new, 1)


# What the defect is -> key to be named (a pattern), and the file.
GENERATED: dict[str, tuple[str, Callable[[], str]]] = {
    "integer of 100000 digits": ("TOML", lambda: _swap('"150 kip*ft"', "1" + "0" * 100_000)),
    "hexadecimal moment": ("Mu", lambda: _swap('"150 kip*ft"', _HEX)),
    "hexadecimal keep": ("keep", lambda: _swap("keep = 3", f"keep = {_HEX}")),
    "hexadecimal mark": ("mark", lambda: _swap('"B1"', _HEX)),
    "hexadecimal title": ("title", lambda: _swap('"Small job"', _HEX)),
    "hexadecimal code": ("code", lambda: _swap('"ACI 318-19"', _HEX)),
    "hexadecimal units": ("units", lambda: f"units = {_HEX}\n{SMALL_JOB}"),
    "length of 100000 digits": ("depth", lambda: _swap('"24 in"', f'"{"9" * 100_000} in"')),
    "mark of 100000 letters": ("mark", lambda: _swap('"B1"', f'"{"B" * 100_000}"')),
    "key of 100000 letters": ("k+\\.\\.\\.", lambda: SMALL_JOB + "k" * 100_000 + " = 1\n"),
    "20000 nested lists": (
        "job.toml: nested too deeply|nested too deeply",
        lambda: SMALL_JOB + "layers = " + "[" * 20_000 + "]" * 20_000,
    ),
    "300 nested tables": (
        "flange",
        lambda: SMALL_JOB + "flange = " + "{a=" * 300 + "1" + "}" * 300,
    ),
    "20000 dotted keys": ("a|job\\.toml", lambda: SMALL_JOB + "a." * 20_000 + "a = 1\n"),
    "50000 unknown keys": (
        "k0",
        lambda: SMALL_JOB + "".join(f"k{number} = 1\n" for number in range(50_000)),
    ),
    "50000 sections": ("section", lambda: SMALL_JOB + "[[section]]\n" * 50_000),
    "50000 sizes": ("sizes", lambda: _swap('["#7", "#8"]', "[" + '"#7",' * 50_000 + "]")),
    "50000 layers": ("layers", lambda: SMALL_JOB + "layers = [" + '"2 #8",' * 50_000 + "]\n"),
    "empty": ("code", lambda: ""),
    "only blanks": ("code", lambda: " \n\n"),
    "only a comment": ("code", lambda: "# nothing here"),
}


def _rank(capsys: pytest.CaptureFixture[str], path: Path) -> Outcome:
    return run_here(capsys, "rank", path.name, "--json", "out.json")


@pytest.mark.parametrize("name", GENERATED)
def test_generated_file_is_refused(
    name: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """Exit code 2, one short message that names the key, and no endless reading."""
    monkeypatch.chdir(tmp_path)
    key, make = GENERATED[name]
    path = job_file(tmp_path, make())
    start = time.perf_counter()
    outcome = _rank(capsys, path)
    duration = time.perf_counter() - start
    if "nested" in key:
        assert "nested too deeply" in outcome.err
        key = "job\\.toml"
        assert_refused(outcome, key)
    else:
        assert_refused(outcome, key)
    assert list(tmp_path.iterdir()) == [path]
    assert duration < _TIME_LIMIT


_NOT_TEXT = {
    "random bytes": random.Random(318).randbytes(100_000),
    "invalid UTF-8": SMALL_JOB.replace("B1", "B\udcff").encode("utf-8", "surrogateescape"),
    "UTF-16": SMALL_JOB.encode("utf-16"),
    "Latin-1": SMALL_JOB.replace("B1", "Träger").encode("latin-1"),
}


@pytest.mark.parametrize("name", _NOT_TEXT)
def test_file_that_is_no_text_is_refused(
    name: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """The message says that the file is not text in UTF-8."""
    monkeypatch.chdir(tmp_path)
    path = tmp_path / "job.toml"
    path.write_bytes(_NOT_TEXT[name])
    outcome = _rank(capsys, path)
    assert_refused(outcome, "job\\.toml")
    assert "UTF-8" in outcome.err
    assert list(tmp_path.iterdir()) == [path]


def test_null_bytes_are_refused(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """A file of zeros, as a crashed machine leaves it, is no TOML."""
    monkeypatch.chdir(tmp_path)
    path = tmp_path / "job.toml"
    path.write_bytes(bytes(4096))
    assert_refused(_rank(capsys, path), "TOML")


def test_file_beyond_the_limit_is_refused_unread(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """A file above 5 MB is refused by its size."""
    monkeypatch.chdir(tmp_path)
    path = tmp_path / "job.toml"
    with path.open("wb") as file:
        file.truncate(2**33)
    outcome = _rank(capsys, path)
    assert_refused(outcome, "job\\.toml")
    assert "2000000 bytes" in outcome.err


@pytest.mark.parametrize("name", ["absent.toml", ".", "a" * 300, "a\x1b[31m.toml", ""])
def test_path_that_is_no_file_is_refused(
    name: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """A job that is not there, a folder or an impossible name gives one clean message."""
    monkeypatch.chdir(tmp_path)
    outcome = run_here(capsys, "rank", name)
    assert outcome.code == 2
    assert outcome.out == ""
    assert outcome.err.startswith("cagewright: ")
    assert outcome.err.rstrip("\n").isprintable()


@pytest.mark.parametrize(
    ("name", "data"),
    [
        ("byte order mark", b"\xef\xbb\xbf" + SMALL_JOB.encode()),
        ("CRLF line ends", SMALL_JOB.replace("\n", "\r\n").encode()),
        ("both", b"\xef\xbb\xbf" + SMALL_JOB.replace("\n", "\r\n").encode()),
        ("no line end at the end", SMALL_JOB.rstrip("\n").encode()),
    ],
)
def test_what_editors_do_to_a_file_is_accepted(
    name: str, data: bytes, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """A byte order mark and Windows line ends change nothing in the result."""
    plain = run_here(capsys, "rank", str(job_file(tmp_path)))
    path = tmp_path / "edited.toml"
    path.write_bytes(data)
    assert run_here(capsys, "rank", str(path)) == plain
    assert plain.code == 0
