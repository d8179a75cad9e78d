"""Marks and titles are shown as they are: no mark-up, no escape, no broken JSON."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest
from rich.cells import cell_len

from tests.command_line.program import SMALL_JOB, job_file, run_here

TEXTS = {
    "rich mark-up": "[red]x[/red]",
    "closing mark-up alone": "x[/]",
    "rich link": "[link=file:///etc]x[/link]",
    "rich emoji code": ":boom: x",
    "script": "<script>alert(1)</script>",
    "entities": "&lt;B&#49;&gt;",
    "format strings": "{0} {section} %s %(x)d",
    "quotes": "it's 26'-6\\\" \\\\ `x`",
    "emoji": "😀 B1 🏗",
    "wide": "梁一号・支点上",
    "accents": "Träger Ä1 – façade",
    "right-to-left": "קורה א׳",
    "combining": "B̈1 x́",
    "mathematics": "∑ M ≤ φMₙ",
    "80 characters": "B" * 80,
    "80 wide characters": "梁" * 80,
    "starts like an option": "--only",
    "formula of a sheet": "=1+1|cmd",
}


def _decoded(text: str) -> str:
    """The text as TOML reads it."""
    return text.replace('\\"', '"').replace("\\\\", "\\")


@pytest.mark.parametrize("name", TEXTS)
def test_shown_literally(name: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Mark and title stand in the text and in the JSON exactly as in the job."""
    text = TEXTS[name]
    shown = _decoded(text)
    job = SMALL_JOB.replace('"B1"', f'"{text}"').replace('"Small job"', f'"{text}"')
    path = str(job_file(tmp_path, job))
    outcome = run_here(capsys, "rank", path, "--brief")
    assert outcome.code == 0, outcome.err
    lines = outcome.out.splitlines()
    assert [line for line in lines if cell_len(line) > 80] == []
    assert "\x1b" not in outcome.out
    joined = "".join(line.strip() for line in lines).replace(" ", "")
    assert joined.count(shown.replace(" ", "")) == 2
    data = json.loads(run_here(capsys, "rank", path, "--json", "-").out)
    assert data["title"] == shown
    assert data["sections"][0]["mark"] == shown


@pytest.mark.parametrize("text", ["😀 B1", "梁一号", "B" * 40], ids=["emoji", "wide", "narrow"])
def test_heading_is_one_line(text: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The rule beside a mark ends at column 80, however wide the characters are."""
    path = str(job_file(tmp_path, SMALL_JOB.replace("B1", text)))
    lines = run_here(capsys, "rank", path, "--brief").out.splitlines()
    (heading,) = [line for line in lines if text in line]
    assert cell_len(heading) == 80


def test_only_takes_a_hostile_mark(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """--only compares marks as texts, whatever is in them."""
    path = str(job_file(tmp_path, SMALL_JOB.replace("B1", "[red]x[/red]")))
    assert run_here(capsys, "rank", path, "--brief", "--only", "[red]x[/red]").code == 0


@pytest.mark.parametrize("mark", ["[red]x[/red]", "😀", "<b>"])
def test_message_shows_the_mark_literally(
    mark: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Error messages quote such marks unchanged."""
    job = SMALL_JOB.replace("B1", mark).replace("24 in", "24 inn")
    outcome = run_here(capsys, "rank", str(job_file(tmp_path, job)))
    assert outcome.code == 2
    assert f'section 1 "{mark}", depth: ' in outcome.err


def test_unknown_only_mark_cannot_reach_the_terminal(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """An escape sequence in --only is shown escaped."""
    outcome = run_here(capsys, "rank", str(job_file(tmp_path)), "--only", "\x1b[2J")
    assert outcome.code == 2
    assert "\x1b" not in outcome.err


@pytest.mark.parametrize("size", ["[b]8", "=8", "8&9", "№8"])
def test_designations_of_a_table_are_shown_literally(
    size: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """A size named in a user's own table is text as well, in list, check and catalogue."""
    monkeypatch.chdir(tmp_path)
    rows = ["designation,diameter,area,mass", "-,in,in^2,lb/ft", "#4,0.500,0.20,0.668"]
    rows.append(f"{size},1.000,0.79,2.670")
    (tmp_path / "mine.csv").write_text("\n".join(rows), encoding="utf-8")
    job = SMALL_JOB.replace('["#7", "#8"]', f'["{size}"]').replace(
        "[bars]", '[bars]\ncatalog = "mine.csv"'
    )
    job_file(tmp_path, job)
    listed = run_here(capsys, "rank", "job.toml")
    assert listed.code == 0, listed.err
    assert re.search(rf"^1 \d {re.escape(size)} ", listed.out, flags=re.MULTILINE)
    printed = run_here(capsys, "bars", "--catalog", "mine.csv")
    assert printed.code == 0, printed.err
    assert re.search(rf"^{re.escape(size)} +1 ", printed.out, flags=re.MULTILINE)
