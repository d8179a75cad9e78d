"""Files are written whole or not at all, and nothing that is not ours is replaced."""

from __future__ import annotations

import json
import os
import stat
import sys
from pathlib import Path
from typing import NoReturn

import pytest

from tests.command_line.program import job_file, run_here

posix_only = pytest.mark.skipif(sys.platform == "win32", reason="POSIX files")


@pytest.fixture
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A current folder that holds a job and nothing else."""
    monkeypatch.chdir(tmp_path)
    job_file(tmp_path)
    return tmp_path


def _names(folder: Path) -> set[str]:
    return {path.name for path in folder.iterdir()}


@pytest.mark.parametrize(
    "target", ["absent/out.json", ".", "", "job.toml/out.json", "a" * 300 + ".json", "a\0.json"]
)
def test_impossible_target_is_refused(
    target: str, folder: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """A missing folder, a folder, an impossible name: exit code 2 and nothing written."""
    outcome = run_here(capsys, "rank", "job.toml", "--json", target)
    assert outcome.code == 2, outcome.err
    assert outcome.out == ""
    assert outcome.err.startswith("cagewright: ")
    assert outcome.err.count("\n") == 1
    assert outcome.err.rstrip("\n").isprintable()
    assert _names(folder) == {"job.toml"}


@pytest.mark.parametrize("target", ["absent/new.toml", ".", "a" * 300])
def test_impossible_new_job_is_refused(
    target: str, folder: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """The same for `new` and `demo --job`."""
    for arguments in (["new", target], ["demo", "--job", target]):
        outcome = run_here(capsys, *arguments)
        assert outcome.code == 2, outcome.err
        assert outcome.out == ""
    assert _names(folder) == {"job.toml"}


@posix_only
def test_read_only_place_is_refused(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A folder that takes no files: /proc refuses even the superuser."""
    if not Path("/proc/self").is_dir():
        pytest.skip("no /proc here")
    outcome = run_here(capsys, "rank", "job.toml", "--json", "/proc/out.json")
    assert outcome.code == 2
    assert outcome.out == ""
    assert "cannot be written" in outcome.err


def test_new_does_not_overwrite(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """`new` leaves a file that is there alone, byte for byte."""
    before = (folder / "job.toml").read_bytes()
    outcome = run_here(capsys, "new", "job.toml")
    assert outcome.code == 2
    assert "exists already" in outcome.err
    assert (folder / "job.toml").read_bytes() == before
    assert _names(folder) == {"job.toml"}


def test_existing_result_is_replaced(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """An older result is replaced by the new one, and no temporary file stays behind."""
    (folder / "out.json").write_text("old " * 100_000, encoding="utf-8")
    assert run_here(capsys, "rank", "job.toml", "--json", "out.json").code == 0
    data = json.loads((folder / "out.json").read_text(encoding="utf-8"))
    assert data["format"] == "cagewright/rank"
    assert _names(folder) == {"job.toml", "out.json"}


@pytest.mark.parametrize("step", ["write", "replace"])
def test_failure_keeps_the_old_result(
    step: str, folder: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """A disk that fills up while writing, or a refused rename, leaves the old file as it was."""

    def full(*_: object, **__: object) -> NoReturn:
        raise OSError(28, "No space left on device")

    (folder / "out.json").write_text("old", encoding="utf-8")
    if step == "write":
        opened = os.fdopen

        class Full:
            """A file that takes a part and then no more."""

            def __init__(self, handle: int, *_: object, **__: object) -> None:
                self.file = opened(handle, "wb")

            def __enter__(self) -> Full:
                return self

            def __exit__(self, *_: object) -> None:
                self.file.close()

            def write(self, data: bytes) -> int:
                self.file.write(data[:100])
                full()

        monkeypatch.setattr("optimizer.files.os.fdopen", Full)
    else:
        monkeypatch.setattr("optimizer.files.Path.replace", full)
    outcome = run_here(capsys, "rank", "job.toml", "--json", "out.json")
    assert outcome.code == 2
    assert "No space left on device" in outcome.err
    assert outcome.out == ""
    monkeypatch.undo()
    assert (folder / "out.json").read_text(encoding="utf-8") == "old"
    assert _names(folder) == {"job.toml", "out.json"}


def test_job_file_is_never_the_target(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A slip of the keyboard must not cost the user the job file."""
    before = (folder / "job.toml").read_bytes()
    outcome = run_here(capsys, "rank", "job.toml", "--json", "job.toml")
    assert (folder / "job.toml").read_bytes() == before
    assert outcome.code == 2


@posix_only
def test_pipe_is_not_replaced_by_a_file(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A named pipe or a device (/dev/null, /dev/stdout) stays what it is."""
    os.mkfifo(folder / "pipe")
    reader = os.open(folder / "pipe", os.O_RDONLY | os.O_NONBLOCK)
    try:
        outcome = run_here(capsys, "rank", "job.toml", "--json", "pipe")
    finally:
        os.close(reader)
    assert stat.S_ISFIFO((folder / "pipe").stat().st_mode)
    assert outcome.code in (0, 2)


@posix_only
def test_link_is_followed(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A result kept elsewhere by a symbolic link is written there; the link stays."""
    (folder / "kept.json").write_text("old", encoding="utf-8")
    (folder / "out.json").symlink_to("kept.json")
    assert run_here(capsys, "rank", "job.toml", "--json", "out.json").code == 0
    assert (folder / "out.json").is_symlink()
    assert json.loads((folder / "kept.json").read_text(encoding="utf-8"))["version"] == 1


@posix_only
def test_permissions_follow_the_user(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A new file obeys the umask: who keeps files private gets a private one."""
    before = os.umask(0o077)
    try:
        assert run_here(capsys, "rank", "job.toml", "--json", "out.json").code == 0
    finally:
        os.umask(before)
    assert stat.S_IMODE((folder / "out.json").stat().st_mode) == 0o600
