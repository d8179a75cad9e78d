"""The command that answers a change: outputs, exit codes, and what it refuses."""

from __future__ import annotations

import csv
import io
import json
from pathlib import Path
from typing import Any

import pytest

from tests.beams.jobs import beam_text
from tests.command_line.complaints import assert_refused
from tests.command_line.program import SMALL_JOB, Outcome, job_file, run_here, run_process

JOB = beam_text(
    bars='sizes = ["#6", "#8"]\nmax_sizes = 1',
    beam='stirrups = ["#3"]\nhangers = ["#4"]\n',
    spans=(
        'length = "22 ft"\ndead = "1.2 kip/ft"\nlive = "1.0 kip/ft"',
        'length = "18 ft"\ndead = "1.2 kip/ft"\nlive = "1.0 kip/ft"',
    ),
)
CHANGED = ["--span", "A-B=24 ft"]


@pytest.fixture(scope="module")
def record(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Return the record of a small beam."""
    folder = tmp_path_factory.mktemp("record")
    job = job_file(folder, JOB)
    outcome = run_process("beam", str(job), "--save", "beam.json", "--brief", cwd=folder)
    assert outcome.code == 0, outcome.err
    return folder / "beam.json"


@pytest.fixture(scope="module")
def of_sections(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Return the record of a job of two sections."""
    folder = tmp_path_factory.mktemp("sections")
    section = SMALL_JOB[SMALL_JOB.index("[[section]]") :]
    job = job_file(folder, SMALL_JOB + section.replace("B1", "B3 midspan"))
    outcome = run_process("rank", str(job), "--save", "sections.json", "--brief", cwd=folder)
    assert outcome.code == 0, outcome.err
    return folder / "sections.json"


@pytest.fixture(scope="module")
def answered(record: Path, tmp_path_factory: pytest.TempPathFactory) -> tuple[Outcome, Path]:
    """Return the answer to a grown span, with all files it is written to."""
    folder = tmp_path_factory.mktemp("answer")
    outcome = run_process(
        "respan", str(record), *CHANGED, "--json", "a.json", "--html", "a.html", "--csv", "a.csv",
        "--save", "next.json", cwd=folder,
    )  # fmt: skip
    assert outcome.code == 0, outcome.err
    return outcome, folder


def data_of(folder: Path) -> dict[str, Any]:
    """Return the JSON of the answer."""
    data: dict[str, Any] = json.loads((folder / "a.json").read_text(encoding="utf-8"))
    return data


def test_text_tells_verdicts_frontier_best_and_differences(
    answered: tuple[Outcome, Path],
) -> None:
    """All four answers stand in the text, in this order, with the caution at the end."""
    outcome, folder = answered
    data = data_of(folder)
    wanted = [
        "position by position",
        "Least change",
        "Best from scratch",
        "To mark up on the drawing",
        "Schedule",
        "licensed design professional",
    ]
    places = [outcome.out.index(text) for text in wanted]
    assert places == sorted(places)
    for verdict in data["verdicts"]:
        assert verdict["position"].split()[0] in outcome.out
    assert outcome.out.count("licensed design professional") == 1
    for step in data["steps"]:
        if step["cost"] is not None:
            assert f"{step['cost']:.1f}" in outcome.out


def test_json_holds_the_whole_answer(answered: tuple[Outcome, Path]) -> None:
    """Format, verdicts, steps with their schedules, the best beam and both differences."""
    data = data_of(answered[1])
    assert (data["format"], data["version"], data["kind"]) == ("cagewright/respan", 1, "beam")
    found = [step for step in data["steps"] if step["cost"] is not None]
    assert found
    for step in found:
        assert len(step["changed"]) <= step["changes"]
        masses = [line["mass"] for line in step["design"]["schedule"]]
        assert sum(masses) == pytest.approx(step["mass"])
    costs = [step["cost"] for step in found]
    assert costs == sorted(costs, reverse=True)
    assert costs[-1] == pytest.approx(data["best"]["cost"])
    assert data["chosen"] == {"design": "least", "changes": found[0]["changes"]}
    for which, step in (("least", found[0]), ("best", found[-1])):
        after = [item["after"] for item in data["differences"][which] if item["after"]]
        bars = sum(item["count"] for item in after)
        assert bars == _bars(step["design"])


def _bars(design: dict[str, Any]) -> int:
    return sum(line["count"] for line in design["schedule"])


def test_table_is_the_differences_of_the_chosen_design(answered: tuple[Outcome, Path]) -> None:
    """The CSV has a line for each group of bars of the mark-up list."""
    data = data_of(answered[1])
    text = (answered[1] / "a.csv").read_text(encoding="utf-8")
    rows = list(csv.DictReader(io.StringIO(text)))
    wanted = data["differences"]["least"]
    assert [(row["position"], row["what"]) for row in rows] == [
        (item["position"], item["what"]) for item in wanted
    ]
    for row, item in zip(rows, wanted, strict=True):
        if item["after"]:
            assert float(row["length after [in]"]) == pytest.approx(item["after"]["length"])


def test_page_shows_the_answer(answered: tuple[Outcome, Path]) -> None:
    """The page holds every position, the drawn beam, and nothing from outside."""
    data = data_of(answered[1])
    page = (answered[1] / "a.html").read_text(encoding="utf-8")
    for verdict in data["verdicts"]:
        assert verdict["position"] in page
    assert "<svg" in page
    assert "Least change" in page
    assert "licensed design professional" in page
    assert "<script" not in page
    assert "src=" not in page


def test_saved_design_is_where_the_next_change_starts(
    answered: tuple[Outcome, Path], capsys: pytest.CaptureFixture[str]
) -> None:
    """The record of the answer serves as it is: no change at all is needed."""
    folder = answered[1]
    outcome = run_here(capsys, "respan", str(folder / "next.json"), "--json", "-")
    assert outcome.code == 0
    data = json.loads(outcome.out)
    first = data["steps"][0]
    before = data_of(folder)["steps"][data_of(folder)["chosen"]["changes"]]
    assert first["changes"] == 0
    assert first["cost"] == pytest.approx(before["cost"])
    assert first["changed"] == []
    assert {item["what"] for item in data["differences"]["least"]} == {"stays"}
    assert next(span for span in data["spans"] if span["mark"] == "A-B")["length"] == 288.0


def test_equal_calls_give_equal_bytes(
    record: Path, answered: tuple[Outcome, Path], tmp_path: Path
) -> None:
    """Text and all files are the same to the byte in another process and folder."""
    outcome, folder = answered
    again = run_process(
        "respan", str(record), *CHANGED, "--json", "a.json", "--html", "a.html", "--csv", "a.csv",
        "--save", "next.json", cwd=tmp_path,
    )  # fmt: skip
    assert again == outcome
    for name in ("a.json", "a.html", "a.csv", "next.json"):
        assert (tmp_path / name).read_bytes() == (folder / name).read_bytes()


def test_design_chooses_the_step(record: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """--design best takes the last step; too few changes are an answer of exit code 1."""
    call = ["respan", str(record), *CHANGED, "--json", "-"]
    data = json.loads(run_here(capsys, *call, "--design", "best").out)
    found = [step["changes"] for step in data["steps"] if step["cost"] is not None]
    assert data["chosen"]["changes"] == found[-1]
    none = [step["changes"] for step in data["steps"] if step["cost"] is None]
    assert none, "the change should make some position fail"
    few = run_here(capsys, *call, "--design", str(none[-1]))
    assert few.code == 1
    assert json.loads(few.out)["chosen"]["changes"] is None


def test_no_design_writes_no_record(
    record: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Where no beam serves, exit code 1, reasons in the text, and the record is left out."""
    target = tmp_path / "next.json"
    target.write_text("before", encoding="utf-8")
    outcome = run_here(
        capsys, "respan", str(record), "--load", "A-B.live=60 kip/ft", "--save", str(target)
    )
    assert outcome.code == 1
    assert "no beam meets every rule" in outcome.out
    assert "not written" in outcome.err
    assert target.read_text(encoding="utf-8") == "before"


def test_plain_text_is_ascii(record: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """--plain keeps to ASCII, also in the bars of a sweep."""
    for change in ("A-B=23 ft", "A-B=22 ft..23 ft/1 ft"):
        out = run_here(capsys, "respan", str(record), "--span", change, "--plain").out
        assert out.isascii()


def test_sweep(record: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A range gives a line for each length, as text, page, table and JSON alike."""
    outcome = run_here(
        capsys, "respan", str(record), "--span", "A-B=21 ft..23 ft/1 ft", "--json",
        str(tmp_path / "s.json"), "--csv", str(tmp_path / "s.csv"), "--html",
        str(tmp_path / "s.html"),
    )  # fmt: skip
    assert (outcome.code, outcome.err) == (0, "")
    data = json.loads((tmp_path / "s.json").read_text(encoding="utf-8"))
    assert (data["format"], data["version"], data["span"]) == ("cagewright/sweep", 1, "A-B")
    points = data["points"]
    assert [point["length"] for point in points] == pytest.approx([252.0, 264.0, 276.0])
    assert points[1]["old_works"]
    assert points[1]["changed"] == []
    rows = list(csv.DictReader(io.StringIO((tmp_path / "s.csv").read_text(encoding="utf-8"))))
    page = (tmp_path / "s.html").read_text(encoding="utf-8")
    assert "<svg" in page
    for row, point in zip(rows, points, strict=True):
        assert float(row["mass [lb]"]) == pytest.approx(point["mass"], rel=1e-9)
        assert f"{point['mass']:.1f}" in outcome.out
        assert f"{point['mass']:.1f}" in page
    growth = points[2]["mass"] - points[1]["mass"]  # for one foot
    assert points[2]["mass_per_length_more"] == pytest.approx(growth)
    assert "█" in outcome.out


def test_sections(of_sections: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A record of sections is answered alike, and its answer can be changed again."""
    saved = tmp_path / "next.json"
    outcome = run_here(
        capsys, "respan", str(of_sections), "--set", "B3 midspan.Mu=190 kip*ft", "--save",
        str(saved), "--json", str(tmp_path / "a.json"), "--csv", str(tmp_path / "a.csv"), "--html",
        str(tmp_path / "a.html"),
    )  # fmt: skip
    assert (outcome.code, outcome.err) == (0, "")
    data = json.loads((tmp_path / "a.json").read_text(encoding="utf-8"))
    assert (data["format"], data["kind"]) == ("cagewright/respan", "sections")
    assert [item["works"] for item in data["verdicts"]] == [True, False]
    assert data["chosen"]["changes"] == 1
    rows = list(csv.DictReader(io.StringIO((tmp_path / "a.csv").read_text(encoding="utf-8"))))
    assert [(row["section"], row["what"]) for row in rows] == [
        ("B1", "stays"),
        ("B3 midspan", "changes"),
    ]
    assert "B3 midspan" in (tmp_path / "a.html").read_text(encoding="utf-8")
    again = run_here(capsys, "respan", str(saved), "--json", "-")
    assert again.code == 0
    first = json.loads(again.out)["steps"][0]
    assert (first["changes"], first["possible"]) == (0, True)


def test_concrete_of_all_sections(of_sections: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """--fc changes the strength that moments are held against."""

    def strengths(*arguments: str) -> list[float]:
        outcome = run_here(capsys, "respan", str(of_sections), "--json", "-", *arguments)
        data = json.loads(outcome.out)
        return [item["checks"][0]["limit"] for item in data["verdicts"]]

    for before, after in zip(strengths(), strengths("--fc", "6000 psi"), strict=True):
        assert after > before


@pytest.mark.parametrize(
    ("arguments", "key", "hint"),
    [
        (["--span", "A-D=30 ft"], "--span", None),
        (["--span", "B=30 ft"], "--span", None),
        (["--span", "A-B"], "--span", None),
        (["--span", "=30 ft"], "--span", None),
        (["--span", "A-B=0 ft"], "length", None),
        (["--span", "A-B=-20 ft"], "length", None),
        (["--span", "A-B=1 ft"], "length", None),
        (["--span", "A-B=7 kip"], "length", None),
        (["--span", "A-B=nan"], "length", None),
        (["--span", "A-B=2000-01-01"], "length", None),
        (["--span", "A-B=20 ft", "--span", "A-B=21 ft"], "--span", None),
        (["--support", "A-B=20 in"], "--support", None),
        (["--support", "B=-20 in"], "width", None),
        (["--load", "B.live=1 kip/ft"], "--load", None),
        (["--load", "A-B=1 kip/ft"], "--load", None),
        (["--load", "A-B.life=1 kip/ft"], "life", "live"),
        (["--load", "A-B.live=-1 kip/ft"], "live", None),
        (["--set", "D.width=20 in"], "--set", None),
        (["--set", "beams.cover=2 in"], "--set", None),
        (["--set", "beam.covr=2 in"], "covr", "cover"),
        (["--set", "beam"], "--set", None),
        (["--set", "A-B.slab={ thickness = 5"], "slab", None),
        (["--set", "bars.catalog=absent.csv"], r"absent\.csv", None),
        (["--fc", "0 psi"], "fc", None),
        (["--fc", "5 ft"], "fc", None),
        (["--fc", ""], "--fc", None),
        (["--span", "A-B=20 ft..30 ft"], "--span", None),
        (["--span", "A-B=20 ft..30 ft/0 ft"], "--span", None),
        (["--span", "A-B=30 ft..20 ft/1 ft"], "--span", None),
        (["--span", "A-B=20 ft..30 ft/1 in"], "--span", "step"),
        (["--span", "A-B=1 ft..30 ft/1 ft"], "length", None),
        (["--span", "A-B=20 ft..21 ft/1 ft", "--span", "B-C=20 ft..21 ft/1 ft"], "--span", None),
        (["--support", "B=20 in..24 in/1 in"], "--support", None),
        (["--span", "A-B=20 ft..21 ft/1 ft", "--save", "new.json"], "--save", None),
        (["--span", "A-B=20 ft..21 ft/1 ft", "--lock", "B top"], "--lock", None),
        (["--span", "A-B=20 ft..21 ft/1 ft", "--design", "best"], "--design", None),
        (["--lock", "B bottom"], "--lock", None),
        (["--lock", ""], "--lock", None),
        (["--design", "most"], "--design", None),
        (["--design", "-1"], "--design", None),
        (["--job", "absent.toml"], r"absent\.toml", None),
        (["--html", "absent/a.html"], "a.html", None),
        (["--html", "a", "--csv", "a"], "a", None),
    ],
)  # fmt: skip
def test_bad_input(
    arguments: list[str],
    key: str,
    hint: str | None,
    record: Path,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
) -> None:
    """One message that names what is wrong, exit code 2, no file written."""
    monkeypatch.chdir(tmp_path)
    outcome = run_here(capsys, "respan", str(record), *arguments)
    if key in ("a.html", "a") or key.endswith(("csv", "toml")):
        assert outcome.code == 2
        assert key.replace("\\", "") in outcome.err
        assert outcome.err.count("cagewright: ") == 1
    else:
        assert_refused(outcome, key, file="beam.json", hint=hint)
    assert list(tmp_path.iterdir()) == []


def test_record_is_never_overwritten(record: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The record that an answer is made from is no place for the answer."""
    before = record.read_bytes()
    for option in ("--save", "--json", "--html", "--csv"):
        outcome = run_here(capsys, "respan", str(record), *CHANGED, option, str(record))
        assert outcome.code == 2
        assert "made from" in outcome.err
    assert record.read_bytes() == before


def _damaged(record: Path) -> dict[str, str]:
    text = record.read_text(encoding="utf-8")
    data = json.loads(text)

    def changed(**keys: object) -> str:
        return json.dumps({**data, **keys})

    design = data["design"]
    return {
        "cut short": text[: len(text) // 2],
        "empty": "",
        "list": "[]",
        "nested": "[" * 100_000,
        "other format": changed(format="cagewright/beam"),
        "no format": json.dumps({"job": {}}),
        "version 2": changed(version=2),
        "version true": changed(version=True),
        "version 1.5": changed(version=1.5),
        "unknown kind": changed(kind="slab"),
        "kind of a list": changed(kind=["beam"]),
        "no job": changed(job=None),
        "empty job": changed(job={}),
        "job of sections": changed(kind="sections"),
        "no design": changed(design={}),
        "tables of a number": changed(tables={"a.csv": 1}),
        "negative cost": changed(design={**design, "cost": -1.0}),
        "places of text": changed(design={**design, "places": "none"}),
        "bars without length": changed(
            design={
                **design,
                "bars": [{k: v for k, v in bar.items() if k != "length"} for bar in design["bars"]],
            }
        ),
        "not a number": text.replace('"cost": ', '"cost": NaN, "price": '),
        "unknown spans": changed(job={**data["job"], "span": 3}),
    }


@pytest.mark.parametrize("kind", [
    "cut short", "empty", "list", "nested", "other format", "no format", "version 2",
    "version true", "version 1.5", "unknown kind", "kind of a list", "no job", "empty job",
    "job of sections", "no design", "tables of a number", "negative cost", "places of text",
    "bars without length", "not a number", "unknown spans",
])  # fmt: skip
def test_damaged_record(
    kind: str, record: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """A record that is cut short, damaged or of another version is refused in one message."""
    path = tmp_path / "bad.json"
    path.write_text(_damaged(record)[kind], encoding="utf-8")
    outcome = run_here(capsys, "respan", str(path), "--save", str(tmp_path / "new.json"))
    assert outcome.code == 2, outcome.out
    assert outcome.out == ""
    assert outcome.err.startswith("cagewright: bad.json: ")
    assert outcome.err.count("cagewright: ") == 1
    assert "defect" not in outcome.err
    assert list(tmp_path.iterdir()) == [path]


def test_sections_have_no_spans(of_sections: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Options of beams are refused on sections, unknown sections named."""
    for arguments, key in (
        (["--span", "B1=20 ft"], "--span"),
        (["--support", "B1=20 in"], "--support"),
        (["--load", "B1.live=20 kip/ft"], "--load"),
        (["--set", "B9.Mu=20 kip*ft"], "--set"),
        (["--set", "B1.Mu=20 kN"], "Mu"),
        (["--lock", "B9"], "--lock"),
    ):
        outcome = run_here(capsys, "respan", str(of_sections), *arguments)
        assert_refused(outcome, key, file="sections.json")


ENVELOPE = """\
station,Mu_max,Mu_min,Vu,Ms_max,Ms_min
ft,kip*ft,kip*ft,kip,kip*ft,kip*ft
0.75,0,-60,40,0,-40
{middle},110,0,10,70,0
{end},0,-60,40,0,-40
"""


def test_envelopes_of_another_span(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Given moments do not follow a span; a record goes on without its tables and takes new."""
    folder = tmp_path / "made"
    folder.mkdir()
    job = JOB
    for loads in ('dead = "1.2 kip/ft"\n', 'live = "1.0 kip/ft"'):
        job = job.replace(loads, "")
    first, second = 'length = "22 ft"\n', 'length = "18 ft"\n'
    job = job.replace(first, f'{first}envelope = "ab.csv"\n')
    job = job.replace(second, f'{second}envelope = "bc.csv"\n')
    for name, length in (("ab.csv", 22.0), ("bc.csv", 18.0), ("ab2.csv", 23.0)):
        text = ENVELOPE.format(middle=length / 2, end=length - 0.75)
        (folder / name).write_text(text, encoding="utf-8")
    path = job_file(folder, job)
    record = tmp_path / "given.json"
    assert run_here(capsys, "beam", str(path), "--save", str(record)).code == 0
    new = (folder / "ab2.csv").read_text(encoding="utf-8")
    for item in folder.iterdir():
        item.unlink()
    assert run_here(capsys, "respan", str(record), "--support", "B=20 in").code == 0
    outcome = run_here(capsys, "respan", str(record), "--span", "A-B=23 ft")
    assert_refused(outcome, "--span", file="given.json", hint="--set")
    outcome = run_here(capsys, "respan", str(record), "--span", "A-B=22 ft..23 ft/1 ft")
    assert_refused(outcome, "--span", file="given.json")
    (folder / "ab2.csv").write_text(new, encoding="utf-8")
    bc = folder / "bc.csv"
    bc.write_text(ENVELOPE.format(middle=9, end=17.25), encoding="utf-8")
    saved = tmp_path / "next.json"
    outcome = run_here(
        capsys, "respan", str(record), "--span", "A-B=23 ft", "--set",
        f"A-B.envelope={folder / 'ab2.csv'}", "--set", f"B-C.envelope={bc}", "--save", str(saved),
    )  # fmt: skip
    assert outcome.code == 0, outcome.err
    for item in folder.iterdir():
        item.unlink()
    assert run_here(capsys, "respan", str(saved)).code == 0


def test_new_job_in_place_of_the_old(
    record: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """--job takes a whole new job; positions that are gone or new are told as such."""
    longer = JOB.replace('mark = "C"\n', 'mark = "C"\nwidth = "16 in"\n[[support]]\nmark = "D"\n')
    longer += '\n[[span]]\nlength = "18 ft"\ndead = "1.2 kip/ft"\nlive = "1.0 kip/ft"\n'
    path = job_file(tmp_path, longer)
    outcome = run_here(capsys, "respan", str(record), "--job", str(path), "--json", "-")
    assert outcome.code == 0, outcome.err
    data = json.loads(outcome.out)
    assert [span["mark"] for span in data["spans"]] == ["A-B", "B-C", "C-D"]
    changed = data["steps"][-1]["changed"]
    assert {"C-D bottom", "C top", "C-D stirrups"} <= set(changed)
    shorter = JOB[: JOB.index('mark = "C"')].rpartition("[[support]]")[0]
    shorter += JOB[JOB.index("[[span]]") : JOB.rindex("[[span]]")]
    path = job_file(tmp_path, shorter)
    outcome = run_here(capsys, "respan", str(record), "--job", str(path), "--json", "-")
    assert outcome.code == 0, outcome.err
    data = json.loads(outcome.out)
    gone = {item["position"] for item in data["verdicts"] if "no longer" in item["why"]}
    assert gone == {"B-C bottom", "B top", "B-C stirrups"}
    path = job_file(tmp_path, SMALL_JOB)
    outcome = run_here(capsys, "respan", str(record), "--job", str(path))
    assert outcome.code == 2
    assert outcome.err.startswith("cagewright: job.toml: ")
