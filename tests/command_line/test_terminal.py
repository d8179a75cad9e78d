"""The printed text: width, characters, colours, pipes."""

from __future__ import annotations

import re
import subprocess
import sys
from pathlib import Path

import pytest
from rich.cells import cell_len

from tests.command_line.program import (
    SMALL_JOB,
    SMALL_SI_JOB,
    environment,
    job_file,
    run_bytes,
    run_here,
    run_process,
)

_WIDE = """\
title = "{title}"
code = "ACI 318-19"

[materials]
fc = "5000 psi"
steel = "A615-60"
aggregate = "1 in"

[ranking]
keep = 5

[[section]]
mark = "{mark}"
Mu = "-2600 kip*ft"
Ms = "-1650 kip*ft"
width = "24 in"
depth = "42 in"
cover = "2 in"
stirrup = "#4"
exposure = "weather"
max_layers = 3
flange = {{ width = "96 in", thickness = "6 in" }}
opposite = ["4 #9", "2 #9"]
count_opposite = true
"""
_WIDE_JOB = _WIDE.format(title="Three layers over a support", mark="G7 support")

JOBS = {
    "us": ("rank", SMALL_JOB),
    "si": ("rank", SMALL_SI_JOB),
    "three layers, hogging": ("rank", _WIDE_JOB),
    "long mark and title": ("rank", _WIDE.format(title="t" * 200, mark="M" * 80)),
    "no layout": ("rank", SMALL_JOB.replace("150 kip*ft", "460 kip*ft")),
    "no layout in SI": ("rank", SMALL_SI_JOB.replace("200 kN*m", "640 kN*m")),
    "great moment in SI": (
        "rank",
        SMALL_SI_JOB.replace("200 kN*m", "21000 kN*m")
        .replace('"350 mm"', '"1500 mm"')
        .replace('"600 mm"', '"2400 mm"')
        .replace('"22", "25"', '"43", "57"'),
    ),
    "two sizes in three layers": (
        "check",
        SMALL_JOB + 'layers = ["2 #11 + 3 #10", "2 #11 + 1 #9", "2 #9 + 1 #8"]\n',
    ),
    "bars that do not fit": ("check", SMALL_JOB + 'layers = ["40 #8 + 39 #7", "12 #8"]\n'),
    "hundreds of bars in SI": (
        "check",
        SMALL_SI_JOB + 'layers = ["50 25 + 49 22", "50 25 + 49 22", "50 25 + 49 22"]\n',
    ),
}


@pytest.mark.parametrize("name", JOBS)
@pytest.mark.parametrize("plain", [False, True], ids=["drawn", "plain"])
def test_fits_80_columns(
    name: str, plain: bool, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """No line is wider than 80 columns; plain text is ASCII."""
    command, text = JOBS[name]
    options = ["--plain"] if plain else []
    outcome = run_here(capsys, command, str(job_file(tmp_path, text)), *options)
    assert outcome.code in (0, 1), outcome.err
    lines = outcome.out.splitlines()
    assert len(lines) > 10
    assert [line for line in lines if cell_len(line) > 80] == []
    assert outcome.out.isascii() is plain


@pytest.mark.parametrize(
    "arguments", [["demo"], ["bars", "--plain"], ["demo", "--plain"], ["--help"]]
)
def test_other_commands_fit_80_columns(
    arguments: list[str], capsys: pytest.CaptureFixture[str]
) -> None:
    """The demo, the catalogues and the help keep the same width; plain text is ASCII."""
    text = run_here(capsys, *arguments).out
    lines = text.splitlines()
    assert len(lines) > 10
    assert [line for line in lines if cell_len(line) > 80] == []
    assert text.isascii() is (arguments != ["demo"])


@pytest.mark.parametrize("columns", ["20", "200", "0", "wide"])
def test_width_of_the_terminal_does_not_change_a_piped_report(
    columns: str,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
) -> None:
    """Whatever COLUMNS says, a piped report is the same, complete and of 80 columns."""
    path = str(job_file(tmp_path))
    monkeypatch.delenv("COLUMNS", raising=False)
    normal = run_here(capsys, "rank", path)
    monkeypatch.setenv("COLUMNS", columns)
    assert run_here(capsys, "rank", path) == normal
    assert normal.code == 0


def test_no_colour_where_none_is_wanted(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """NO_COLOR takes the colours out even where they are forced; bold may stay."""
    path = str(job_file(tmp_path, SMALL_JOB + 'layers = ["2 #7"]\n'))
    monkeypatch.setenv("FORCE_COLOR", "1")
    monkeypatch.setenv("TERM", "xterm-256color")
    red = "\x1b[1;31m"
    assert red in run_here(capsys, "check", path).out
    monkeypatch.setenv("NO_COLOR", "1")
    assert not re.search(r"\x1b\[[\d;]*3\dm", run_here(capsys, "check", path).out)


def test_pipe_has_no_colour_codes(tmp_path: Path) -> None:
    """Piped output carries no escape sequence at all."""
    job_file(tmp_path)
    outcome = run_process("rank", "job.toml", cwd=tmp_path)
    assert outcome.code == 0
    assert outcome.err == ""
    assert "\x1b" not in outcome.out


@pytest.mark.parametrize("encoding", ["ascii", "cp1252"])
def test_other_encodings_fall_back_to_ascii(
    encoding: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """An output that is not UTF-8 gets the plain drawing, and the program does not stumble."""
    path = str(job_file(tmp_path))
    env = environment(PYTHONIOENCODING=encoding, PYTHONUTF8="0")
    outcome = run_bytes("rank", path, cwd=tmp_path, env=env)
    assert outcome.returncode == 0, outcome.stderr
    plain = run_here(capsys, "rank", path, "--plain").out
    assert outcome.stdout.decode("ascii").splitlines() == plain.splitlines()


@pytest.mark.parametrize("options", [[], ["--plain"], ["--json", "-"]], ids=["", "plain", "json"])
def test_mark_beyond_the_encoding_of_the_output(options: list[str], tmp_path: Path) -> None:
    """A mark that the output cannot show is replaced or escaped: the result still comes."""
    job_file(tmp_path, SMALL_JOB.replace("B1", "Träger 梁"))
    env = environment(PYTHONIOENCODING="ascii", PYTHONUTF8="0")
    outcome = run_bytes("rank", "job.toml", *options, cwd=tmp_path, env=env)
    assert outcome.returncode == 0, outcome.stderr
    assert outcome.stderr == b""
    assert b"#8" in outcome.stdout


@pytest.mark.parametrize(
    "arguments", [["bars"], ["rank", "job.toml", "--json", "-"]], ids=["text", "json"]
)
def test_broken_pipe_is_quiet(arguments: list[str], tmp_path: Path) -> None:
    """A reader that has seen enough (head) gets no traceback, and exit code 1 stays a verdict."""
    job_file(tmp_path)
    process = subprocess.Popen(
        [sys.executable, "-m", "optimizer", *arguments],
        cwd=tmp_path,
        env=environment(),
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
    )
    assert process.stdout is not None
    process.stdout.close()
    process.stdout = None
    _, talk = process.communicate(timeout=60)
    assert talk == b""
    assert process.returncode not in (1, 2)


@pytest.mark.parametrize("options", [[], ["--json", "-"]], ids=["text", "json"])
def test_full_disk_is_no_defect(options: list[str], tmp_path: Path) -> None:
    """Output that cannot be written is said so with exit code 2; it is no fault of ours."""
    full = Path("/dev/full")
    if not full.exists():
        pytest.skip("no /dev/full here")
    job_file(tmp_path)
    with full.open("wb") as device:
        done = subprocess.run(
            [sys.executable, "-m", "optimizer", "rank", "job.toml", *options],
            cwd=tmp_path,
            env=environment(),
            stdout=device,
            stderr=subprocess.PIPE,
            timeout=60,
            check=False,
        )
    message = done.stderr.decode()
    assert "No space left on device" in message
    assert "Traceback" not in message
    assert "defect" not in message
    assert done.returncode == 2
