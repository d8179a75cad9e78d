"""Every call and every output that the README shows is what the program does."""

from __future__ import annotations

import re
import shlex
import tomllib
from pathlib import Path

import pytest

from catalogs import BUILTIN_CATALOGS
from optimizer.beams.keys import BeamKeys, ColumnKeys, LoadKeys, SpanKeys, SupportKeys
from optimizer.cli import run
from optimizer.job_keys import JobKeys, SectionKeys
from tests.command_line.readme import README, ROOT, code_blocks, output_of, run_call, shown_outputs


@pytest.mark.parametrize(("call", "text"), shown_outputs())
def test_shown_output(call: str, text: str, tmp_path: Path) -> None:
    """The text in the README is today's output."""
    assert output_of(call, tmp_path) == text
    assert text.strip()


def test_commands_in_the_text(tmp_path: Path) -> None:
    """Every call named in running text runs; metavariables stand for the README's job."""
    text = README.read_text(encoding="utf-8")
    calls = set(re.findall(r"`cagewright ([^`]+)`", text))
    assert len(calls) >= 6
    for call in sorted(calls):
        job = "p7.toml" if call.startswith("beam") else "pump.toml"
        words = call.replace("JOB", job).replace("FILE", "new.toml").replace("RECORD", "p7.json")
        target = tmp_path / str(len(words))
        target.mkdir(exist_ok=True)
        if "rank beams.toml" in words:
            assert run_call("new beams.toml", target).returncode == 0
        (target / "new.toml").unlink(missing_ok=True)
        outcome = run_call(words, target)
        # The README's own layout fails its check, which is what it shows.
        assert outcome.returncode in (0, 1), (call, outcome.stderr)
        assert outcome.stdout


def test_options_exist(capsys: pytest.CaptureFixture[str]) -> None:
    """Options named in the README are options of the program."""
    named = set(re.findall(r"`(--[a-z]+)", README.read_text(encoding="utf-8")))
    known = set()
    for command in ("rank", "check", "options", "beam", "respan", "demo", "new", "bars"):
        assert run([command, "--help"]) == 0
        known |= set(re.findall(r"--[a-z]+", capsys.readouterr().out))
    assert named
    assert named <= known


@pytest.mark.parametrize("number", range(2))
def test_python_snippets(number: int, tmp_path: Path) -> None:
    """The snippets run as they stand, in a folder with the README's job."""
    snippet = code_blocks("python")[number]
    (tmp_path / "pump.toml").write_text(code_blocks("toml")[0], encoding="utf-8")
    namespace: dict[str, object] = {}
    with pytest.MonkeyPatch.context() as patch:
        patch.chdir(tmp_path)
        exec(compile(snippet, "README", "exec"), namespace)
    assert "section" in namespace


def test_set_up_commands() -> None:
    """The two set-up commands come first, name the extra, the demo and the tests."""
    first, second = (shlex.split(block) for block in code_blocks("sh")[:2])
    assert first[-2:] == [".venv/bin/cagewright", "demo"]
    assert ".[test]" in second
    assert second[-2:] == [".venv/bin/pytest", "-q"]
    project = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))
    assert "test" in project["project"]["optional-dependencies"]
    assert project["project"]["scripts"] == {"cagewright": "optimizer.__main__:main"}


def test_every_key_is_documented() -> None:
    """The table of keys names every key of a job, and every built-in catalogue is named."""
    text = README.read_text(encoding="utf-8")
    fields = SectionKeys.model_fields | JobKeys.model_fields
    of_beam = (BeamKeys, ColumnKeys, SupportKeys, LoadKeys, SpanKeys)
    for keys in of_beam:
        for name, field in keys.model_fields.items():
            shown = field.alias or name
            assert re.search(rf"`{shown}`|{{[^`]*\b{shown}\b", text), (keys.__name__, name)
    for name, field in fields.items():
        assert f"`{field.alias or name}`" in text or f"[{name}]" in text, name
    for name in BUILTIN_CATALOGS:
        assert name in text
