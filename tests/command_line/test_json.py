"""The JSON of `rank` and `check`: keys, types, trade units."""

from __future__ import annotations

import json
import math
from pathlib import Path
from typing import Any

import pytest

from tests.command_line.program import SMALL_JOB, SMALL_SI_JOB, job_file, run_here

JOBS = {"us": SMALL_JOB, "si": SMALL_SI_JOB}
IMPOSSIBLE = {
    "us": SMALL_JOB.replace("150 kip*ft", "450 kip*ft"),
    "si": SMALL_SI_JOB.replace("200 kN*m", "600 kN*m"),
}
UNITS = {
    "us": {
        "length": "in",
        "area": "in^2",
        "moment": "kip*ft",
        "stress": "psi",
        "mass_per_length": "lb/ft",
    },
    "si": {
        "length": "mm",
        "area": "mm^2",
        "moment": "kN*m",
        "stress": "MPa",
        "mass_per_length": "kg/m",
    },
}
# ASTM A615/A615M-20, Table 1: nominal diameter, area, mass of a size in each job.
BARS = {
    "us": {"#7": (0.875, 0.60, 2.044), "#8": (1.000, 0.79, 2.670)},
    "si": {"22": (22.2, 387.0, 3.042), "25": (25.4, 510.0, 3.973)},
}
TERMS = {"steel", "bars", "layers", "sizes", "tight"}
ROW = {"id", "clause", "demand", "limit", "ratio", "ok", "note"}


def _no_constant(name: str) -> float:
    """Refuse NaN and Infinity, which are no JSON (RFC 8259, section 6)."""
    message = f"{name} in JSON"
    raise ValueError(message)


def _result(capsys: pytest.CaptureFixture[str], command: str, path: Path) -> dict[str, Any]:
    outcome = run_here(capsys, command, str(path), "--json", "-")
    assert outcome.err == ""
    data: dict[str, Any] = json.loads(outcome.out, parse_constant=_no_constant)
    return data


@pytest.fixture(params=["us", "si"])
def system(request: pytest.FixtureRequest) -> str:
    """System of units of the job."""
    return str(request.param)


def _assert_layout(layout: dict[str, Any], system: str, Mu: float) -> None:
    """Types and the sums that a reader can make by hand."""
    bars = BARS[system]
    counts = [
        (group["size"], group["count"]) for layer in layout["layers"] for group in layer["bars"]
    ]
    assert all(type(count) is int and count > 0 for _, count in counts)
    # Sums of table values, exact but for the last bit of binary fractions.
    assert layout["As"] == pytest.approx(sum(bars[s][1] * n for s, n in counts), rel=1e-12)
    mass = sum(bars[s][2] * n for s, n in counts)
    assert layout["mass_per_length"] == pytest.approx(mass, rel=1e-12)
    label = " / ".join(
        " + ".join(f"{group['count']} {group['size']}" for group in layer["bars"])
        for layer in layout["layers"]
    )
    assert layout["label"] == label
    for name in ("Mn", "phi", "phi_Mn", "a", "c", "eps_t", "score", "d", "dt", "As_required"):
        assert isinstance(layout[name], float), name
    assert layout["phi_Mn"] == pytest.approx(layout["phi"] * layout["Mn"], rel=1e-12)
    assert set(layout["score_terms"]) == TERMS
    assert layout["score"] == pytest.approx(sum(layout["score_terms"].values()), rel=1e-9)
    for layer in layout["layers"]:
        assert layer["gap"] >= layer["gap_required"] > 0.0
        assert layer["depth"] > 0.0
        assert len(layer["positions"]) == sum(group["count"] for group in layer["bars"])
    for row in layout["checks"]:
        assert set(row) >= ROW
        assert type(row["ok"]) is bool
        assert isinstance(row["id"], str)
        assert isinstance(row["note"], str)
        assert row["clause"]
        for name in ("demand", "limit", "ratio"):
            assert row[name] is None or isinstance(row[name], float)
        assert row["unit"] in {*UNITS[system].values(), ""}
    strength = next(row for row in layout["checks"] if row["id"] == "flexural_strength")
    assert strength["demand"] == pytest.approx(abs(Mu), rel=1e-12)
    assert strength["limit"] == pytest.approx(layout["phi_Mn"], rel=1e-12)
    assert strength["ratio"] == pytest.approx(abs(Mu) / layout["phi_Mn"], rel=1e-12)


def test_rank(system: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Keys and types of a ranking, in order of its score."""
    data = _result(capsys, "rank", job_file(tmp_path, JOBS[system]))
    assert data["format"] == "cagewright/rank"
    assert data["version"] == 1
    assert data["title"].startswith("Small job")
    assert data["code"] == {"us": "ACI 318-19", "si": "ACI 318M-19"}[system]
    assert data["units"] == UNITS[system]
    (section,) = data["sections"]
    assert section["mark"] == "B1"
    assert section["Mu"] == {"us": 150.0, "si": 200.0}[system]
    assert section["status"] == "ranked"
    assert section["proved"] is True
    listed = [layout for layout in section["candidates"] if layout["rank"] is not None]
    assert [layout["rank"] for layout in listed] == list(range(1, len(listed) + 1))
    scores = [layout["score"] for layout in listed]
    assert scores == sorted(scores)
    assert len(listed) == 3
    for layout in section["candidates"]:
        _assert_layout(layout, system, section["Mu"])
        assert all(row["ok"] for row in layout["checks"])
        assert 0.0 < section["mass_floor"] <= layout["mass_per_length"]


@pytest.mark.parametrize(("bars", "passes"), [(2, False), (3, True)])
def test_check(
    system: str, bars: int, passes: bool, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """A check carries the same keys, also where the layout fails."""
    size = {"us": "#8", "si": "25"}[system]
    path = job_file(tmp_path, JOBS[system] + f'layers = ["{bars} {size}"]\n')
    data = _result(capsys, "check", path)
    assert data["format"] == "cagewright/check"
    assert data["units"] == UNITS[system]
    (section,) = data["sections"]
    (layout,) = section["candidates"]
    _assert_layout(layout, system, section["Mu"])
    assert layout["label"] == f"{bars} {size}"
    assert all(row["ok"] for row in layout["checks"]) is passes


def test_no_layout(system: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Where nothing fits: strongest, blockers and remedies in place of candidates."""
    data = _result(capsys, "rank", job_file(tmp_path, IMPOSSIBLE[system]))
    (section,) = data["sections"]
    assert section["status"] == "no_layout"
    assert "candidates" not in section
    assert 0.0 < section["strongest"]["phi_Mn"] < section["Mu"]
    assert section["blocked_by"]
    assert all(block["id"] for block in section["blocked_by"])
    assert section["remedies"]
    for remedy in section["remedies"]:
        assert remedy["phi_Mn"] >= section["Mu"]
        assert remedy["key"]
        assert remedy["from"] != remedy["to"]


@pytest.mark.parametrize("system_name", ["us", "si"])
def test_figures_by_hand(
    system_name: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """One layer worked by hand in trade units, so a slip of unit or factor shows.

    318-19: a = As fy/(0.85 f'c b), Mn = As fy (d - a/2), c = a/beta1, eps_t = 0.003 (d - c)/c;
    the displaced concrete is none, the bars are in tension.
    """
    if system_name == "us":
        path = job_file(tmp_path, SMALL_JOB + 'layers = ["3 #8"]\n')
        As, d = 3 * 0.79, 24.0 - 1.5 - 0.5 - 0.5
        a = As * 60.0 / (0.85 * 4.0 * 14.0)
        Mn = As * 60.0 * (d - a / 2) / 12.0  # [kip*ft]
    else:
        path = job_file(tmp_path, SMALL_SI_JOB + 'layers = ["3 25"]\n')
        As, d = 3 * 510.0, 600.0 - 40.0 - 12.7 - 25.4 / 2
        a = As * 420.0 / (0.85 * 28.0 * 350.0)
        Mn = As * 420.0 * (d - a / 2) / 1e6  # [kN*m]
    c = a / 0.85
    layout = _result(capsys, "check", path)["sections"][0]["candidates"][0]
    # Plain arithmetic on both sides: only binary rounding may differ.
    assert layout["layers"][0]["depth"] == pytest.approx(d, rel=1e-9)
    assert layout["d"] == pytest.approx(d, rel=1e-9)
    assert layout["a"] == pytest.approx(a, rel=1e-9)
    assert layout["c"] == pytest.approx(c, rel=1e-9)
    assert layout["eps_t"] == pytest.approx(0.003 * (d - c) / c, rel=1e-9)
    assert layout["phi"] == pytest.approx(0.9, rel=1e-12)
    assert layout["Mn"] == pytest.approx(Mn, rel=1e-9)


def test_numbers_keep_their_digits(
    system: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Numbers are written in full, never rounded for show: phi Mn is no four-digit figure."""
    data = _result(capsys, "rank", job_file(tmp_path, JOBS[system]))
    value = data["sections"][0]["candidates"][0]["phi_Mn"]
    assert not math.isclose(value, float(f"{value:.6g}"), rel_tol=1e-9)


def test_plain_units_in_other_spelling_give_the_same(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """24 in is 2 ft, 4000 psi is 4 ksi, 150 kip*ft is 1800 kip*in: equal bytes."""
    other = (
        SMALL_JOB.replace('"24 in"', '"2 ft"')
        .replace('"4000 psi"', '"4 ksi"')
        .replace('"150 kip*ft"', '"1800 kip-in"')
        .replace('"14 in"', '"1\'-2\\""')
        .replace('"1.5 in"', "1.5")
    )
    first = run_here(capsys, "rank", str(job_file(tmp_path)), "--json", "-")
    second = run_here(capsys, "rank", str(job_file(tmp_path, other)), "--json", "-")
    assert first.code == 0
    assert first == second


def test_dash_prints_json_and_nothing_else(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """--json - writes one object to standard output and no file called "-"."""
    monkeypatch.chdir(tmp_path)
    path = job_file(tmp_path)
    outcome = run_here(capsys, "rank", path.name, "--json", "-", "--brief", "--plain")
    assert outcome.out.startswith("{")
    assert outcome.out.endswith("}\n")
    assert json.loads(outcome.out)["format"] == "cagewright/rank"
    assert list(tmp_path.iterdir()) == [path]


def test_file_and_dash_agree(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """The file holds what --json - prints, and the terminal text still comes."""
    monkeypatch.chdir(tmp_path)
    job_file(tmp_path)
    dash = run_here(capsys, "rank", "job.toml", "--json", "-")
    text = run_here(capsys, "rank", "job.toml")
    both = run_here(capsys, "rank", "job.toml", "--json", "out.json")
    assert both == text
    assert (tmp_path / "out.json").read_bytes() == dash.out.encode("utf-8")
