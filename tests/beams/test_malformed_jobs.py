"""Beam jobs with one defect each: refused with one line that names the key.

The first line of a file says which key the message must name; a second line, where there is
one, says what it must contain.
"""

from __future__ import annotations

import time
from pathlib import Path

import pytest

from optimizer import parse_job
from optimizer.beams.reader import parse_beam_job, read_beam_job
from optimizer.beams.starter import beam_starter
from optimizer.errors import JobError
from tests.command_line.complaints import assert_names

FILES = sorted(Path(__file__).with_name("malformed").glob("*.toml"))
_LONGEST = 700  # characters; several lines of a terminal
_TIME_LIMIT = 2.0  # [s]


def test_folder_is_full() -> None:
    """The folder is found, and holds many files."""
    assert len(FILES) >= 140


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_refused_with_the_key_named(path: Path) -> None:
    """One printable line that starts with the file's name and names the key, in no time."""
    names, says, *_ = path.read_text(encoding="utf-8").splitlines()
    assert names.startswith("# names: ")
    start = time.perf_counter()
    with pytest.raises(JobError) as caught:
        read_beam_job(path)
    assert time.perf_counter() - start < _TIME_LIMIT
    message = str(caught.value)
    assert message.startswith(f"{path.name}: ")
    assert message.isprintable()
    assert len(message) <= _LONGEST
    assert_names(message.removeprefix(path.name), names.removeprefix("# names: "))
    if says.startswith("# says: "):
        assert says.removeprefix("# says: ") in message


def test_span_is_named_by_number_and_mark() -> None:
    """A message about a span says which, as counted and as drawn."""
    text = beam_starter("us").replace('at = "9 ft"', 'at = "90 ft"')
    with pytest.raises(JobError, match=r'^job: span 2 "B-C", loads\.1\.at: got 90 ft, outside'):
        parse_beam_job(text)


def test_job_of_a_beam_is_no_job_of_sections() -> None:
    """Each reader says which command reads the other's files."""
    with pytest.raises(JobError, match=r"^job: beam: .*hint: cagewright beam"):
        parse_job(beam_starter("us"))


@pytest.mark.parametrize("content", [b"\xff\xfe\x00", b"a" * 2_000_001])
def test_file_that_is_no_job(content: bytes, tmp_path: Path) -> None:
    """Binary files and huge ones are refused as they are for sections."""
    path = tmp_path / "job.toml"
    path.write_bytes(content)
    with pytest.raises(JobError, match=r"job\.toml: (not a text file|2000001 bytes)"):
        read_beam_job(path)


def test_file_that_is_not_there(tmp_path: Path) -> None:
    """A path that leads nowhere, and one that leads to a folder."""
    for path in (tmp_path / "absent.toml", tmp_path):
        with pytest.raises(JobError, match=r"does not exist|is a folder"):
            read_beam_job(path)
