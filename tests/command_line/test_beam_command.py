"""The command for whole beams: files, streams, exit codes, bad input, equal bytes."""

from __future__ import annotations

import csv
import io
import json
import tomllib
from pathlib import Path
from typing import NoReturn

import pytest

from optimizer.beams.outputs import tables_of
from optimizer.beams.reader import parse_beam_job
from optimizer.beams.starter import beam_starter
from tests.beams.designs import job_text
from tests.command_line.program import SMALL_JOB, environment, job_file, run_bytes, run_here

ONE_SPAN = job_text(spans=1)
SHALLOW = ONE_SPAN.replace('depth = "24 in"', 'depth = "10 in"')
ENVELOPE = """\
station,Mu_max,Mu_min,Vu,Ms_max,Ms_min
ft,kip*ft,kip*ft,kip,kip*ft,kip*ft
0,0,0,30,0,0
12,180,0,8,120,0
24,0,0,30,0,0
"""


@pytest.fixture
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A current folder that holds a beam job and nothing else."""
    monkeypatch.chdir(tmp_path)
    job_file(tmp_path, ONE_SPAN)
    return tmp_path


def _names(folder: Path) -> set[str]:
    return {path.name for path in folder.iterdir()}


# ---------------------------------------------------------------- what it prints and writes


def test_report_goes_to_standard_output(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Heading, proof and caution; nothing on standard error; exit code 0."""
    outcome = run_here(capsys, "beam", "job.toml", "--brief")
    assert (outcome.code, outcome.err) == (0, "")
    for part in ("ACI 318-19", "B1", "Proved", "Schedule", "licensed design professional"):
        assert part in outcome.out
    assert "All rows" not in outcome.out
    assert "All rows" in run_here(capsys, "beam", "job.toml").out
    assert run_here(capsys, "beam", "job.toml", "--plain").out.isascii()


def test_json_alone_and_beside(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """--json - prints the data and nothing else; a file holds the same."""
    alone = run_here(capsys, "beam", "job.toml", "--json", "-")
    assert (alone.code, alone.err) == (0, "")
    assert json.loads(alone.out)["format"] == "cagewright/beam"
    beside = run_here(capsys, "beam", "job.toml", "--json", "out.json")
    assert "Schedule" in beside.out
    assert (folder / "out.json").read_text(encoding="utf-8") == alone.out


def test_all_files_are_written(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Page, workbook, drawing, schedule, record and data in one run, each of its kind."""
    files = {
        "--html": "b.html",
        "--xlsx": "b.xlsx",
        "--dxf": "b.dxf",
        "--csv": "b.csv",
        "--save": "b.record",
        "--json": "b.json",
    }
    arguments = [word for pair in files.items() for word in pair]
    outcome = run_here(capsys, "beam", "job.toml", *arguments)
    assert (outcome.code, outcome.err) == (0, "")
    assert _names(folder) == {"job.toml", *files.values()}
    starts = {"b.html": b"<!DOCTYPE html>", "b.xlsx": b"PK", "b.json": b"{"}
    for name, start in starts.items():
        assert (folder / name).read_bytes().lower().startswith(start.lower())
    assert b"SECTION" in (folder / "b.dxf").read_bytes()[:200]
    assert (folder / "b.record").stat().st_size > 200
    data = json.loads((folder / "b.json").read_text(encoding="utf-8"))
    rows = list(csv.reader(io.StringIO((folder / "b.csv").read_text(encoding="utf-8"))))
    marks = [row[rows[0].index("mark")] for row in rows[1:]]
    assert marks == [item["mark"] for item in data["schedule"]]


def test_no_design_is_exit_code_1(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The reasons on standard output; of the files those that need a design are not written."""
    job_file(folder, SHALLOW)
    outcome = run_here(capsys, "beam", "job.toml", "--json", "b.json", "--csv", "b.csv")
    assert outcome.code == 1
    assert "No beam meets every rule." in outcome.out
    assert outcome.err == "cagewright: b.csv: not written: no design\n"
    assert _names(folder) == {"job.toml", "b.json"}
    data = json.loads((folder / "b.json").read_text(encoding="utf-8"))
    assert data["status"] == "no_design"


@pytest.mark.parametrize("units", ["us", "si"])
def test_new_writes_the_beam_starter(
    units: str, folder: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """`new --beam` writes a job that can be read, and names the command for it."""
    outcome = run_here(capsys, "new", "--beam", "new.toml", "--units", units)
    assert (outcome.code, outcome.err) == (0, "")
    assert "cagewright beam new.toml" in outcome.out
    text = (folder / "new.toml").read_text(encoding="utf-8")
    assert text == beam_starter(units)
    assert tomllib.loads(text)["beam"]["mark"] == "B12"
    assert run_here(capsys, "new", "--beam", "new.toml").code == 2
    assert run_here(capsys, "new", "--beam", "other.toml", "--units", "mks").code == 2
    assert _names(folder) == {"job.toml", "new.toml"}


# ---------------------------------------------------------------- bad input


@pytest.mark.parametrize(
    ("arguments", "named"),
    [
        (["beam"], "JOB"),
        (["beam", "absent.toml"], "absent.toml"),
        (["beam", "."], "folder"),
        (["beam", "job.toml", "--show", "1"], "--show"),
        (["beam", "job.toml", "--save"], "--save"),
        (["beam", "job.toml", "--save", "job.toml"], "job.toml"),
        (["beam", "job.toml", "--csv", "job.toml"], "job.toml"),
        (["beam", "job.toml", "--json", "absent/b.json"], "absent/b.json"),
        (["beam", "job.toml", "--html", "b", "--save", "b"], "named twice"),
        (["beam", "job.toml", "--html", "b.html", "--dxf", "."], "folder"),
        (["rank", "job.toml"], "cagewright beam"),
        (["check", "job.toml"], "cagewright beam"),
        (["options", "job.toml"], "cagewright beam"),
    ],
)
def test_bad_use_is_refused(
    arguments: list[str], named: str, folder: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Exit code 2, one message that names the fault, no output, no file."""
    outcome = run_here(capsys, *arguments)
    assert outcome.code == 2
    assert outcome.out == ""
    assert named in outcome.err
    assert "Traceback" not in outcome.err
    assert _names(folder) == {"job.toml"}
    assert (folder / "job.toml").read_text(encoding="utf-8") == ONE_SPAN


def test_job_of_sections_is_refused(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A job of sections is not a beam; the message says which command reads it."""
    job_file(folder, SMALL_JOB)
    outcome = run_here(capsys, "beam", "job.toml", "--json", "b.json")
    assert (outcome.code, outcome.out) == (2, "")
    assert "cagewright rank" in outcome.err
    assert _names(folder) == {"job.toml"}


def test_what_the_job_reads_is_no_target(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """An envelope that the job names survives a slip of the keyboard."""
    lines = [line for line in ONE_SPAN.splitlines() if not line.startswith(("dead", "live"))]
    text = "\n".join(lines) + '\nenvelope = "AB.csv"\n'
    job_file(folder, text)
    (folder / "AB.csv").write_text(ENVELOPE, encoding="utf-8")
    assert tables_of(text, folder) == (folder / "AB.csv",)
    assert len(parse_beam_job(text, base=folder).given) == 1
    outcome = run_here(capsys, "beam", "job.toml", "--csv", "AB.csv")
    assert (outcome.code, outcome.out) == (2, "")
    assert "AB.csv" in outcome.err
    assert (folder / "AB.csv").read_text(encoding="utf-8") == ENVELOPE
    assert run_here(capsys, "beam", "job.toml", "--csv", "out.csv").code == 0


# ---------------------------------------------------------------- whole or not at all


@pytest.mark.parametrize("failing", [1, 2, 3])
def test_files_are_written_together_or_not(
    failing: int, folder: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """A rename that is refused, whichever it is, leaves all places as they were."""
    (folder / "b.csv").write_text("old", encoding="utf-8")
    moved = Path.replace
    calls: list[Path] = []

    def replace(self: Path, target: Path) -> Path:
        calls.append(target)
        if len(calls) == failing:
            raise OSError(28, "No space left on device")
        return moved(self, target)

    monkeypatch.setattr("optimizer.files.Path.replace", replace)
    outcome = run_here(
        capsys, "beam", "job.toml", "--html", "b.html", "--csv", "b.csv", "--json", "b.json"
    )
    monkeypatch.undo()
    assert outcome.code == 2
    assert outcome.out == ""
    assert ("b.html", "b.csv", "b.json")[failing - 1] in outcome.err
    assert "No space left on device" in outcome.err
    assert len(calls) == failing
    assert (folder / "b.csv").read_text(encoding="utf-8") == "old"
    assert _names(folder) == {"job.toml", "b.csv"}


def test_failing_document_leaves_nothing(
    folder: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """A document that cannot be made costs the others too, not only itself."""

    def broken(_: object) -> NoReturn:
        msg = "out of paper"
        raise RuntimeError(msg)

    monkeypatch.setattr("optimizer.documents.beam_schedule_table.schedule_csv", broken)
    outcome = run_here(capsys, "beam", "job.toml", "--html", "b.html", "--csv", "b.csv")
    assert outcome.code == 3
    assert outcome.out == ""
    assert "out of paper" in outcome.err
    assert _names(folder) == {"job.toml"}


def test_record_that_cannot_be_made_leaves_nothing(
    folder: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """The record is written with the other files or not at all."""

    def full(*_: object, **__: object) -> NoReturn:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("optimizer.beams.record.beam_record", full)
    outcome = run_here(capsys, "beam", "job.toml", "--html", "b.html", "--save", "b.record")
    assert (outcome.code, outcome.out) == (2, "")
    assert "No space left on device" in outcome.err
    assert _names(folder) == {"job.toml"}


# ---------------------------------------------------------------- equal bytes


def test_bytes_do_not_depend_on_the_hash_seed(folder: Path) -> None:
    """Text and data of two processes with different hash seeds are equal, byte for byte."""
    job_file(folder, job_text(spans=2))
    outcomes = []
    for seed in ("1", "2"):
        arguments = ("--json", f"{seed}.json", "--csv", f"{seed}.csv", "--save", f"{seed}.record")
        outcomes.append(
            run_bytes(
                "beam", "job.toml", *arguments, cwd=folder, env=environment(PYTHONHASHSEED=seed)
            )
        )
    first, second = outcomes
    assert first.returncode == second.returncode == 0, first.stderr
    assert (first.stdout, first.stderr) == (second.stdout, second.stderr)
    assert len(first.stdout) > 5000
    for kind in ("json", "csv", "record"):
        texts = [(folder / f"{seed}.{kind}").read_bytes() for seed in ("1", "2")]
        assert texts[0] == texts[1]
        assert texts[0]
