"""Commands, options, exit codes, and what goes to which stream."""

from __future__ import annotations

import json
import re
import tomllib
from pathlib import Path

import pytest

from catalogs import BUILTIN_CATALOGS, bar_catalog
from optimizer._version import VERSION
from tests.command_line.program import (
    SMALL_JOB,
    Outcome,
    job_file,
    run_here,
    run_process,
)

IMPOSSIBLE = SMALL_JOB.replace("150 kip*ft", "900 kip*ft")
TWO = SMALL_JOB + SMALL_JOB[SMALL_JOB.index("[[section]]") :].replace("B1", "B2")
# Mu of 150 kip*ft asks for about 1.65 in^2: three #8 have 2.37, two #7 have 1.20.
GOOD_LAYERS = SMALL_JOB + 'layers = ["3 #8"]\n'
WEAK_LAYERS = SMALL_JOB + 'layers = ["2 #7"]\n'
COMMANDS = ("rank", "check", "options", "beam", "respan", "demo", "new", "bars")


def _lines(outcome: Outcome) -> list[str]:
    """Ranks in the first column of a printed short list."""
    return re.findall(r"^(\d+|\+) \d+ #", outcome.out, flags=re.MULTILINE)


def test_no_arguments_show_the_usage(capsys: pytest.CaptureFixture[str]) -> None:
    """Without a command the program lists its commands and reports wrong usage."""
    outcome = run_here(capsys)
    assert outcome.code == 2
    shown = outcome.out + outcome.err
    assert all(re.search(rf"^  {name} ", shown, flags=re.MULTILINE) for name in COMMANDS)


def test_help_lists_commands(capsys: pytest.CaptureFixture[str]) -> None:
    """Help is data: standard output, exit code 0, nothing on standard error."""
    outcome = run_here(capsys, "--help")
    assert (outcome.code, outcome.err) == (0, "")
    assert all(re.search(rf"^  {name} ", outcome.out, flags=re.MULTILINE) for name in COMMANDS)


@pytest.mark.parametrize(
    ("command", "options"),
    [
        ("rank", ["--json", "--show", "--brief", "--only", "--save", "--plain"]),
        ("check", ["--json", "--only", "--plain"]),
        ("options", ["--json", "--html", "--xlsx", "--dxf", "--csv", "--only", "--plain"]),
        ("beam", ["--json", "--html", "--xlsx", "--dxf", "--csv", "--save", "--brief", "--plain"]),
        ("respan", ["--span", "--support", "--load", "--fc", "--set", "--job", "--lock"]),
        ("respan", ["--design", "--save", "--json", "--html", "--csv", "--brief", "--plain"]),
        ("demo", ["--json", "--show", "--brief", "--plain", "--job", "--folder"]),
        ("new", ["--units", "--beam"]),
        ("bars", ["--catalog", "--plain"]),
    ],
)
def test_help_of_a_command_lists_its_options(
    command: str, options: list[str], capsys: pytest.CaptureFixture[str]
) -> None:
    """Each command explains its options and needs no file for that."""
    outcome = run_here(capsys, command, "--help")
    assert (outcome.code, outcome.err) == (0, "")
    assert all(option in outcome.out for option in options)


def test_version_is_the_one_of_the_project(tmp_path: Path) -> None:
    """The version printed is the one the distribution is built with, installed or not."""
    outcome = run_process("--version", cwd=tmp_path)
    assert outcome.code == 0
    assert outcome.out == f"cagewright {VERSION}\n"


@pytest.mark.parametrize(
    ("arguments", "named"),
    [
        (["rnak"], "rnak"),
        (["rank"], "JOB"),
        (["rank", "job.toml", "more.toml"], "more.toml"),
        (["rank", "job.toml", "--breif"], "--breif"),
        (["rank", "job.toml", "--show", "0"], "--show"),
        (["rank", "job.toml", "--show", "first"], "--show"),
        (["rank", "job.toml", "--json"], "--json"),
        (["check", "job.toml", "--show", "1"], "--show"),
        (["new"], "FILE"),
        (["new", "other.toml", "--units", "imperial"], "--units"),
        (["bars", "--catalog", "astm"], "astm"),
        (["bars", "--catalog", "absent.csv"], "absent.csv"),
        (["bars", "--catalog", "csa", "--catalog", "astm"], "astm"),
        (["--verbose", "bars"], "--verbose"),
        (["rank", "job.toml", "--only", "B9"], "B9"),
        (["rank", "job.toml", "--only", ""], "--only"),
        (["check", "job.toml", "--only", "b1"], "b1"),
    ],
)
def test_wrong_usage_is_named(
    arguments: list[str],
    named: str,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
) -> None:
    """Wrong usage: exit code 2, the wrong word on standard error, nothing on standard output."""
    monkeypatch.chdir(tmp_path)
    path = job_file(tmp_path)
    outcome = run_here(capsys, *arguments)
    assert outcome.code == 2
    assert outcome.out == ""
    assert named in outcome.err
    assert "Traceback" not in outcome.err
    assert list(tmp_path.iterdir()) == [path]


@pytest.mark.parametrize(
    ("text", "command", "code"),
    [
        (SMALL_JOB, "rank", 0),
        (IMPOSSIBLE, "rank", 1),
        (GOOD_LAYERS, "check", 0),
        (WEAK_LAYERS, "check", 1),
        (SMALL_JOB, "check", 2),
    ],
    ids=["ranked", "no layout", "passes", "fails", "nothing to check"],
)
def test_exit_code_tells_the_result(
    text: str, command: str, code: int, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """0 all well, 1 a section without a passing layout, 2 bad input; with --json - alike."""
    path = str(job_file(tmp_path, text))
    outcome = run_here(capsys, command, path)
    assert outcome.code == code
    assert (outcome.out == "") is (code == 2)
    assert (outcome.err == "") is (code != 2)
    assert run_here(capsys, command, path, "--json", "-").code == code


def test_one_failing_section_decides_the_exit_code(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """One section without a layout is enough for 1, wherever it stands; --only looks past it."""
    impossible = IMPOSSIBLE[IMPOSSIBLE.index("[[section]]") :].replace("B1", "B0")
    head, section = SMALL_JOB.split("[[section]]")
    for text in (f"{head}{impossible}[[section]]{section}", f"{SMALL_JOB}{impossible}"):
        path = str(job_file(tmp_path, text))
        assert run_here(capsys, "rank", path, "--brief").code == 1
        assert run_here(capsys, "rank", path, "--brief", "--only", "B1").code == 0
        assert run_here(capsys, "rank", path, "--brief", "--only", "B0").code == 1


def test_no_layout_names_blockers_and_remedies(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Where nothing fits, the text says so, and what would help."""
    outcome = run_here(capsys, "rank", str(job_file(tmp_path, IMPOSSIBLE)))
    assert "No layout meets every rule." in outcome.out
    assert "flexural_strength" in outcome.out
    assert "Strongest that fits" in outcome.out


def test_show_chooses_the_checked_line(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Without --show line 1 is checked, with it the line asked for."""
    path = str(job_file(tmp_path))
    data = json.loads(run_here(capsys, "rank", path, "--json", "-").out)
    labels = [layout["label"] for layout in data["sections"][0]["candidates"]]
    assert f"Line 1: {labels[0]}\n" in run_here(capsys, "rank", path).out
    shown = run_here(capsys, "rank", path, "--show", "2").out
    assert f"Line 2: {labels[1]}\n" in shown
    assert "Line 1:" not in shown


def test_show_beyond_the_list_says_so(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A line that is not there is not silently another one."""
    outcome = run_here(capsys, "rank", str(job_file(tmp_path)), "--show", "99")
    assert "no line 99" in outcome.out + outcome.err


def test_brief_leaves_the_checks_out(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """--brief keeps list, proof and caution, and drops drawing and check rows."""
    path = str(job_file(tmp_path))
    full, brief = run_here(capsys, "rank", path), run_here(capsys, "rank", path, "--brief")
    assert "crack_control" in full.out
    assert "crack_control" not in brief.out
    assert "Line 1:" not in brief.out
    assert _lines(brief) == _lines(full)
    assert len(_lines(brief)) >= 3
    for text in ("Proved:", "licensed design professional", "Not checked:"):
        assert text in brief.out


def test_only_selects_sections(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """--only takes marks, may be repeated, and keeps the file's order."""
    path = str(job_file(tmp_path, TWO))

    def marks(*arguments: str) -> list[str]:
        text = run_here(capsys, "rank", path, "--json", "-", *arguments).out
        return [section["mark"] for section in json.loads(text)["sections"]]

    assert marks() == ["B1", "B2"]
    assert marks("--only", "B2") == ["B2"]
    assert marks("--only", "B2", "--only", "B1") == ["B1", "B2"]


def test_check_says_how_many_sections_it_skipped(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Sections without layers are counted, not forgotten."""
    path = job_file(tmp_path, GOOD_LAYERS + TWO[len(SMALL_JOB) :])
    outcome = run_here(capsys, "check", str(path))
    assert outcome.code == 0
    assert "1 of 2 sections give no layers" in outcome.out


def test_check_prints_every_row_and_the_failing_one(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """No row is dropped from a printed check; what fails is named in the title."""
    path = str(job_file(tmp_path, WEAK_LAYERS))
    data = json.loads(run_here(capsys, "check", path, "--json", "-").out)
    rows = [row["id"] for row in data["sections"][0]["candidates"][0]["checks"]]
    text = run_here(capsys, "check", path).out
    assert [row for row in rows if not re.search(rf"^{row} ", text, flags=re.MULTILINE)] == []
    assert "FAILS: flexural_strength" in text
    assert {
        "flexural_strength",
        "net_tensile_strain",
        "minimum_steel",
        "clear_gap",
        "layer_gap",
        "crack_control",
        "cover",
        "side_face_steel",
    } <= set(rows)


@pytest.mark.parametrize("units", ["us", "si"])
def test_new_job_ranks(
    units: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """The starter job is written where asked, and ranks with exit code 0 as it stands."""
    monkeypatch.chdir(tmp_path)
    written = run_here(capsys, "new", "start.toml", "--units", units)
    assert (written.code, written.err) == (0, "")
    assert "start.toml" in written.out
    text = (tmp_path / "start.toml").read_text(encoding="utf-8")
    assert ("318M" in text.split("#")[1]) is (units == "si")
    ranked = run_here(capsys, "rank", "start.toml", "--brief", "--json", "out.json")
    assert ranked.code == 0, ranked.err
    data = json.loads((tmp_path / "out.json").read_text(encoding="utf-8"))
    assert data["units"]["length"] == {"us": "in", "si": "mm"}[units]


def test_new_job_is_american_unless_asked(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """Without --units the starter job is the one in inches."""
    monkeypatch.chdir(tmp_path)
    run_here(capsys, "new", "plain.toml")
    run_here(capsys, "new", "us.toml", "--units", "us")
    assert (tmp_path / "plain.toml").read_bytes() == (tmp_path / "us.toml").read_bytes()


def test_demo_needs_no_input(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """The demo shows a section that cannot be reinforced and still ends with 0."""
    monkeypatch.chdir(tmp_path)
    outcome = run_here(capsys, "demo", "--brief")
    assert (outcome.code, outcome.err) == (0, "")
    assert "invented" in outcome.out
    assert "No layout meets every rule." in outcome.out
    grown = outcome.out[outcome.out.index("Then the span Q-P grows to 24 ft.") :]
    for text in ("Least change", "Best from scratch", "To mark up", "passes every check"):
        assert text in grown
    assert list(tmp_path.iterdir()) == []


def test_demo_writes_the_page_of_its_options(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """--folder takes a folder that is there; the page is the one of the drawn section."""
    folder = tmp_path / "pages"
    missing = run_here(capsys, "demo", "--folder", str(folder))
    assert (missing.code, missing.out) == (2, "")
    assert "make the folder first" in missing.err
    folder.mkdir()
    assert run_here(capsys, "demo", "--folder", str(folder)).code == 0
    (page,) = folder.iterdir()
    text = page.read_text(encoding="utf-8")
    assert "Options against drawn layouts" in text
    assert "Drawn: 4 #8 / 2 #8" in text


def test_demo_job_can_be_written_but_not_over_a_file(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """--job writes the demo's job file once, and it is a job."""
    monkeypatch.chdir(tmp_path)
    assert run_here(capsys, "demo", "--job", "demo.toml").code == 0
    data = tomllib.loads((tmp_path / "demo.toml").read_text(encoding="utf-8"))
    assert len(data["section"]) == 5
    again = run_here(capsys, "demo", "--job", "demo.toml")
    assert again.code == 2
    assert "exists already" in again.err


@pytest.mark.parametrize("name", BUILTIN_CATALOGS)
def test_bars_prints_a_catalogue(name: str, capsys: pytest.CaptureFixture[str]) -> None:
    """Every size of the catalogue stands on a line with its diameter, area and mass."""
    outcome = run_here(capsys, "bars", "--catalog", name)
    assert (outcome.code, outcome.err) == (0, "")
    for bar in bar_catalog(name).bars:
        figures = rf"{bar.diameter:g}\s+{bar.area:g}\s+{bar.mass:g}"
        assert re.search(rf"^{bar.designation}\s+{figures}\s", outcome.out, flags=re.MULTILINE)


def test_bars_prints_all_catalogues(capsys: pytest.CaptureFixture[str]) -> None:
    """Without --catalog all of them are printed."""
    outcome = run_here(capsys, "bars")
    assert all(
        re.search(rf"^{name}$", outcome.out, flags=re.MULTILINE) for name in BUILTIN_CATALOGS
    )


def test_bars_reads_a_file(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A table of one's own is printed like the built-in ones."""
    path = tmp_path / "mine.csv"
    path.write_text(
        "designation,diameter,area,mass\n-,in,in^2,lb/ft\nQ8,1.000,0.79,2.670\n", encoding="utf-8"
    )
    outcome = run_here(capsys, "bars", "--catalog", str(path))
    assert outcome.code == 0
    assert re.search(r"^Q8\s+1\s+0\.79\s+2\.67\s", outcome.out, flags=re.MULTILINE)


def test_debug_shows_where(tmp_path: Path) -> None:
    """--debug lets a traceback through; every other test sees none."""
    assert "Traceback" in run_process("--debug", "rank", "absent.toml", cwd=tmp_path).err


def test_defect_is_called_one(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """A fault of the program is neither 0, 1 nor 2, shows no traceback and no half result."""

    def broken(*_: object) -> None:
        message = "a line\nand another"
        raise ZeroDivisionError(message)

    monkeypatch.setattr("optimizer.results.rank", broken)
    outcome = run_here(capsys, "rank", str(job_file(tmp_path)))
    assert outcome.code not in (0, 1, 2)
    assert outcome.out == ""
    assert outcome.err.startswith("cagewright: defect: ZeroDivisionError")
    assert "Traceback" not in outcome.err


def test_search_and_check_agree_on_ties_of_compression_steel(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Counted #14 bars need #4 ties (9.7.6.4.2): with #3 stirrups no layout, not a contradiction.

    ACI 318-19, 9.7.6.4.2: No. 3 ties enclose bars to No. 10, at least No. 4 from No. 11 up.
    """
    job = SMALL_JOB.replace('stirrup = "#4"', 'stirrup = "#3"')
    path = str(job_file(tmp_path, job + 'opposite = ["2 #14"]\ncount_opposite = true\n'))
    outcome = run_here(capsys, "rank", path)
    assert outcome.code == 1, outcome.err
    assert "compression_ties" in outcome.out
