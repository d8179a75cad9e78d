"""Records of beams: what is written is what is read, tables included."""

from __future__ import annotations

import json
import tomllib
from pathlib import Path

import pytest

from optimizer.beams.design import BeamDesign, design_beam
from optimizer.beams.positions import drawn
from optimizer.beams.reader import parse_beam_job, parse_beam_keys
from optimizer.beams.record import beam_record, drawn_of
from optimizer.errors import JobError
from optimizer.record import Record, TableFolder, read_record, record_text, table_names, with_tables
from tests.beams.designs import designed, job_text


def _record(folder: Path, text: str) -> Record:
    path = folder / "record.json"
    path.write_text(text, encoding="utf-8")
    return read_record(path)


@pytest.mark.parametrize("units", ["us", "si"])
def test_a_beam_comes_back_as_it_was(units: str, tmp_path: Path) -> None:
    """Every position, every bar, cost and mass; and the keys of the job."""
    design = designed(units)
    record = _record(tmp_path, beam_record(job_text(units), design, None))
    assert record.kind == "beam"
    assert record.job == tomllib.loads(job_text(units))
    assert drawn_of(record) == drawn(design)
    assert parse_beam_keys(record.job) == design.problem


def test_equal_designs_give_equal_records() -> None:
    """The text depends on job and design alone."""
    text = job_text()
    again = design_beam(parse_beam_job(text))
    assert isinstance(again, BeamDesign)
    assert beam_record(text, again, None) == beam_record(text, designed(), None)


def test_tables_travel_with_the_record(tmp_path: Path) -> None:
    """Catalogue, envelopes and prices are in the record, under the names that the job has."""
    names = ["sub/bars.csv", "env.csv", "prices.toml"]
    job = {
        "bars": {"catalog": names[0]},
        "span": [{"envelope": names[1]}, {"envelope": names[1]}],
        "options": {"prices": names[2]},
        "beam": {"mark": "not a table.csv"},
    }
    assert sorted(table_names(job)) == sorted(names)
    (tmp_path / "sub").mkdir()
    for name in names:
        (tmp_path / name).write_text(f"text of {name}\r\n", encoding="utf-8", newline="")
    text = record_text("beam", job, tmp_path, {})
    for name in names:
        (tmp_path / name).unlink()
    record = _record(tmp_path, text)
    assert record.tables == {name: f"text of {name}\r\n" for name in names}
    with TableFolder(record) as (base, renamed):
        keys = with_tables(record.job, renamed)
        for name in names:
            file = base / renamed[name]
            assert file.read_bytes().decode() == f"text of {name}\r\n"
            assert file.name == Path(name).name
        assert keys["bars"] == {"catalog": renamed[names[0]]}
        assert keys["beam"] == job["beam"]
        kept = base
    assert not kept.exists()
    assert record_text("beam", job, None, {}, record.tables) == text


@pytest.mark.parametrize(
    "name", ["../../out.csv", "/tmp/out.csv", "a/../../b.csv", ".csv", "a\nb.csv", "C:\\x.csv"]
)
def test_no_table_leaves_its_folder(name: str, tmp_path: Path) -> None:
    """Whatever a record calls its tables, they are written below a folder of their own."""
    record = Record(kind="beam", name="r", job={}, tables={name: "text"}, design={})
    with TableFolder(record) as (base, names):
        file = (base / names[name]).resolve()
        assert file.is_relative_to(base.resolve())
        assert file.read_text(encoding="utf-8") == "text"
    assert list(tmp_path.iterdir()) == []


def test_builtin_names_are_no_tables() -> None:
    """Catalogues and prices that ship with the program are not copied."""
    job = {"bars": {"catalog": "astm-inch"}, "options": {"prices": "demo"}, "span": 3}
    assert table_names(job) == []


@pytest.mark.parametrize(
    ("key", "value", "named"),
    [
        ("cost", -1.0, "design.cost"),
        ("cost", "much", "design.cost"),
        ("mass", None, "design.mass"),
        ("places", {"A-B bottom": {"layers": [], "run": 2}}, "design.places"),
        ("places", {"A-B bottom": {"layers": ["2 #8"], "run": -2}}, "design.places"),
        ("stirrups", {"A-B stirrups": {"size": "#3"}}, "design.stirrups"),
        ("top", {"kind": "through"}, "design.top"),
        ("bars", [{"mark": "B1"}], "design.bars"),
        ("extra", 1, "design.extra"),
    ],
)
def test_damaged_designs_are_refused(key: str, value: object, named: str, tmp_path: Path) -> None:
    """What cannot be a design is named by its key."""
    data = json.loads(beam_record(job_text(), designed(), None))
    data["design"][key] = value
    record = _record(tmp_path, json.dumps(data))
    with pytest.raises(JobError, match=rf"record\.json: {named}.*damaged"):
        drawn_of(record)


def test_records_of_sections_are_no_beams(tmp_path: Path) -> None:
    """The kind is told."""
    record = _record(tmp_path, record_text("sections", {}, None, {"sections": {}}))
    with pytest.raises(JobError, match="a record of sections; expected that of a beam"):
        drawn_of(record)
