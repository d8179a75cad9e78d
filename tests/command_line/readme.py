"""The README's calls and output; ``python -m tests.command_line.readme`` renews the latter."""

from __future__ import annotations

import re
import shlex
import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
README = ROOT / "README.md"
_BLOCK = re.compile(r"(<!-- output: (?P<call>[^>]*) -->\n```text\n)(?P<text>.*?)(```)", re.DOTALL)


def code_blocks(language: str) -> list[str]:
    """Texts of the README's code blocks in a language."""
    return re.findall(rf"```{language}\n(.*?)```", README.read_text(encoding="utf-8"), re.DOTALL)


def beam_job() -> str:
    """Job of a whole beam that the README shows."""
    return next(block for block in code_blocks("toml") if "[beam]" in block)


def shown_outputs() -> list[tuple[str, str]]:
    """Calls whose output the README shows, and what it shows."""
    text = README.read_text(encoding="utf-8")
    return [(match["call"], match["text"]) for match in _BLOCK.finditer(text)]


def run_call(call: str, folder: Path) -> subprocess.CompletedProcess[str]:
    """Run one of the program's calls in a folder that holds the README's jobs."""
    (folder / "pump.toml").write_text(code_blocks("toml")[0], encoding="utf-8")
    (folder / "p7.toml").write_text(beam_job(), encoding="utf-8")
    if "p7.json" in call and not (folder / "p7.json").exists():
        _run(["beam", "p7.toml", "--save", "p7.json"], folder).check_returncode()
    return _run(shlex.split(call), folder)


def _run(arguments: list[str], folder: Path) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "optimizer", *arguments],
        cwd=folder,
        env={"PYTHONPATH": str(ROOT), "PATH": "/usr/bin:/bin", "PYTHONIOENCODING": "utf-8"},
        capture_output=True,
        text=True,
        encoding="utf-8",
        check=False,
    )


def output_of(call: str, folder: Path) -> str:
    """Return standard output of a call, without blanks at the ends of lines."""
    return "".join(f"{line.rstrip()}\n" for line in run_call(call, folder).stdout.splitlines())


def main(folder: Path) -> None:
    """Write today's output into the README."""
    text = README.read_text(encoding="utf-8")
    renewed = _BLOCK.sub(lambda match: match[1] + output_of(match["call"], folder) + match[4], text)
    README.write_text(renewed, encoding="utf-8")


if __name__ == "__main__":
    import tempfile

    with tempfile.TemporaryDirectory() as name:
        main(Path(name))
