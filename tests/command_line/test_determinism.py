"""The same job gives the same bytes."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.command_line.program import SMALL_JOB, environment, job_file, run_bytes, run_here

# Wide choice on purpose: many layouts, several layers, ties in the score, and one section
# without a layout, so that the diagnosis is compared as well.
_JOB = SMALL_JOB.replace('["#7", "#8"]', '["#6", "#7", "#8", "#9"]') + SMALL_JOB[
    SMALL_JOB.index("[[section]]") :
].replace("B1", "B2").replace("150 kip*ft", "480 kip*ft")


def test_bytes_do_not_depend_on_the_hash_seed(tmp_path: Path) -> None:
    """JSON and text of two processes with different hash seeds are equal, byte for byte."""
    job_file(tmp_path, _JOB)
    first, second = (
        run_bytes(
            "rank",
            "job.toml",
            "--json",
            f"{seed}.json",
            cwd=tmp_path,
            env=environment(PYTHONHASHSEED=seed),
        )
        for seed in ("1", "2")
    )
    assert first.returncode == second.returncode == 1, first.stderr
    assert (first.stdout, first.stderr) == (second.stdout, second.stderr)
    assert len(first.stdout) > 2000
    json_texts = [(tmp_path / f"{seed}.json").read_bytes() for seed in ("1", "2")]
    assert json_texts[0] == json_texts[1]
    assert b"no_layout" in json_texts[0]


def test_a_second_run_in_one_process_gives_the_same(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Nothing is carried over from run to run; --json - prints the same bytes again."""
    path = str(job_file(tmp_path))
    first = run_here(capsys, "rank", path, "--json", "-")
    assert first.code == 0
    assert run_here(capsys, "rank", path, "--json", "-") == first
