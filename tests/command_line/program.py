"""Running the program from tests: in this process, or as a process of its own."""

from __future__ import annotations

import os
import subprocess
import sys
from dataclasses import dataclass
from pathlib import Path

import pytest

from optimizer.cli import run

ROOT = Path(__file__).resolve().parents[2]

SMALL_JOB = """\
title = "Small job"
code = "ACI 318-19"

[materials]
fc = "4000 psi"
steel = "A615-60"
aggregate = "3/4 in"

[bars]
sizes = ["#7", "#8"]

[ranking]
keep = 3

[[section]]
mark = "B1"
Mu = "150 kip*ft"
width = "14 in"
depth = "24 in"
cover = "1.5 in"
stirrup = "#4"
exposure = "interior"
"""

SMALL_SI_JOB = """\
title = "Small job in SI"
code = "ACI 318M-19"

[materials]
fc = "28 MPa"
steel = "A615-420"
aggregate = "19 mm"

[bars]
sizes = ["22", "25"]

[ranking]
keep = 3

[[section]]
mark = "B1"
Mu = "200 kN*m"
width = "350 mm"
depth = "600 mm"
cover = "40 mm"
stirrup = "13"
exposure = "interior"
"""


@dataclass(frozen=True, slots=True, kw_only=True)
class Outcome:
    """What a run left behind."""

    code: int
    out: str
    err: str


def run_here(capsys: pytest.CaptureFixture[str], *arguments: str) -> Outcome:
    """Run the command line in this process."""
    capsys.readouterr()
    code = run(list(arguments))
    captured = capsys.readouterr()
    return Outcome(code=code, out=captured.out, err=captured.err)


def environment(**extra: str) -> dict[str, str]:
    """Environment of a child: this one without what would colour or resize its output."""
    dropped = {"COLUMNS", "LINES", "FORCE_COLOR", "NO_COLOR", "PYTHONHASHSEED", "PYTHONIOENCODING"}
    kept = {name: value for name, value in os.environ.items() if name not in dropped}
    return kept | {"PYTHONPATH": str(ROOT), "PYTHONUTF8": "1"} | extra


def run_bytes(
    *arguments: str, cwd: Path, env: dict[str, str] | None = None
) -> subprocess.CompletedProcess[bytes]:
    """Run ``python -m optimizer`` as a process of its own, output piped."""
    return subprocess.run(
        [sys.executable, "-m", "optimizer", *arguments],
        cwd=cwd,
        env=environment() if env is None else env,
        stdin=subprocess.DEVNULL,
        capture_output=True,
        timeout=60,
        check=False,
    )


def run_process(*arguments: str, cwd: Path, env: dict[str, str] | None = None) -> Outcome:
    """Run ``python -m optimizer`` as a process of its own; output as text."""
    done = run_bytes(*arguments, cwd=cwd, env=env)
    return Outcome(
        code=done.returncode, out=done.stdout.decode("utf-8"), err=done.stderr.decode("utf-8")
    )


def job_file(folder: Path, text: str = SMALL_JOB, name: str = "job.toml") -> Path:
    """Write a job file."""
    path = folder / name
    path.write_text(text, encoding="utf-8", newline="")
    return path
