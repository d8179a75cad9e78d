"""Envelopes of the user's own analysis: read at the faces, refused where they cannot be right."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from optimizer.beams.given import MOST_STATIONS
from optimizer.beams.problem import Analysis, BeamProblem
from optimizer.errors import JobError
from tests.beams.jobs import beam_of

HEADER = "station,Mu_max,Mu_min,Vu,Ms_max,Ms_min"
UNITS = "ft, kip*ft, kip*ft, kip, kip*ft, kip*ft"
# A span of 28 ft between supports of 18 in: clear from 0.75 ft to 27.25 ft.
ROWS = (
    "0, -20, -320, 80, -15, -200",
    "4, 20, -100, 55, 15, -60",
    "14, 200, 40, 0, 130, 30",
    "24, 20, -100, -55, 15, -60",
    "28, -20, -320, -80, -15, -200",
)
GOOD = (HEADER, UNITS, *ROWS)


def read(
    tmp_path: Path, lines: tuple[str, ...], units: str = "us", data: bytes | None = None
) -> BeamProblem:
    """Read a beam of one span with that envelope."""
    text = "\n".join(lines) + "\n"
    (tmp_path / "own.csv").write_bytes(text.encode() if data is None else data)
    span = 'length = "28 ft"\nenvelope = "own.csv"'
    return beam_of(units, base=tmp_path, supports=("", ""), spans=(span,))


def test_envelope_from_face_to_face(tmp_path: Path) -> None:
    """Stations between the faces as given; at the faces the straight line between two rows."""
    problem = read(tmp_path, GOOD)
    assert problem.analysis is Analysis.GIVEN
    assert problem.beam.spans[0].loads == ()
    (demand,) = problem.given
    assert demand.deflections is None
    assert demand.x.tolist() == [9.0, 48.0, 168.0, 288.0, 327.0]
    share = 0.75 / 4
    face = np.array([-20 + 40 * share, -320 + 220 * share]) * 12e3
    assert [demand.Mu_most[0], demand.Mu_least[0]] == pytest.approx(face.tolist(), rel=1e-12)
    assert demand.Mu_most[1:-1].tolist() == [20 * 12e3, 200 * 12e3, 20 * 12e3]
    assert demand.Mu_least[1:-1].tolist() == [-100 * 12e3, 40 * 12e3, -100 * 12e3]
    assert demand.Vu[1:-1].tolist() == [55e3, 0.0, 55e3]
    assert demand.Vu[[0, -1]].tolist() == pytest.approx([(80 - 25 * share) * 1e3] * 2, rel=1e-12)
    assert demand.Ms_most[1:-1].tolist() == [15 * 12e3, 130 * 12e3, 15 * 12e3]
    assert demand.Ms_least[0] == pytest.approx((-200 + 140 * share) * 12e3, rel=1e-12)


@pytest.mark.parametrize("units", ["us", "si"])
def test_units_of_the_file_are_its_own(units: str, tmp_path: Path) -> None:
    """Any unit of the kind, in any spelling, gives the values in the job's system."""
    length, force = (12.0, 1000.0) if units == "us" else (304.8, 4448.2216152605)
    rows = []
    for row in ROWS:
        feet, _, others = row.partition(",")
        rows.append(f"{12 * float(feet)},{others}")
    lines = (HEADER, "in, k-ft, kip-ft, kips, ft-k, kip*ft", *rows)
    (demand,) = read(tmp_path, lines, units).given
    assert demand.x[2] == pytest.approx(14 * length, rel=1e-12)
    assert demand.Mu_most[2] == pytest.approx(200 * length * force, rel=1e-12)
    assert demand.Vu[1] == pytest.approx(55 * force, rel=1e-12)


def test_columns_in_any_order_with_byte_order_mark(tmp_path: Path) -> None:
    """A file as a spreadsheet saves it."""
    order = [3, 0, 2, 1, 5, 4]
    mixed = "\r\n".join(",".join(line.split(",")[i] for i in order) for line in GOOD)
    assert_equal(read(tmp_path, (), data=mixed.encode("utf-8-sig")), read(tmp_path, GOOD))


def assert_equal(one: BeamProblem, other: BeamProblem) -> None:
    """Compare the envelopes of two problems."""
    for left, right in zip(one.given, other.given, strict=True):
        for name in ("x", "Mu_most", "Mu_least", "Vu", "Ms_most", "Ms_least"):
            assert getattr(left, name).tolist() == getattr(right, name).tolist()


def test_stations_from_face_to_face_are_enough(tmp_path: Path) -> None:
    """Two rows at the faces: the least that covers the span."""
    lines = (HEADER, UNITS, "0.75,10,-5,9,8,-4", "27.25,10,-5,9,8,-4")
    (demand,) = read(tmp_path, lines).given
    assert demand.x.tolist() == [9.0, 327.0]
    assert demand.Mu_most.tolist() == [120e3, 120e3]


def test_hogging_all_along(tmp_path: Path) -> None:
    """A service moment nearer to zero than the factored one is no excess, of either sign."""
    lines = (HEADER, UNITS, "0,-12,-40,9,-10,-25", "28,12,10,9,10,9")
    assert len(read(tmp_path, lines).given) == 1


def test_cantilever_at_the_left_starts_at_its_tip(tmp_path: Path) -> None:
    """Stations of a cantilever at the left end count from its tip."""
    tip = (HEADER, UNITS, "0,0,0,0,0,0", "5.25,0,-60,20,0,-40")
    (tmp_path / "tip.csv").write_text("\n".join(tip))
    (tmp_path / "span.csv").write_text("\n".join(GOOD))
    spans = (
        'length = "6 ft"\ncantilever = "left"\nenvelope = "tip.csv"',
        'length = "28 ft"\nenvelope = "span.csv"',
    )
    first, second = beam_of(base=tmp_path, supports=("", ""), spans=spans).given
    assert first.x.tolist() == [0.0, 63.0]
    assert first.Mu_least.tolist() == [0.0, -60 * 12e3]
    assert second.x[0] == 9.0


def test_most_stations(tmp_path: Path) -> None:
    """As many rows as are allowed, and one more."""
    step = 28.0 / MOST_STATIONS
    rows = [f"{i * step:.6f},10,-5,9,8,-4" for i in range(MOST_STATIONS + 2)]
    assert len(read(tmp_path, (HEADER, UNITS, *rows[1:-1])).given[0].x) > MOST_STATIONS * 0.9
    with pytest.raises(JobError, match="more data rows than allowed; allowed: 5000"):
        read(tmp_path, (HEADER, UNITS, *rows[:-1]))


BAD = {
    "starts beyond the face": ((*GOOD[:2], "1, 20, -300, 80, 15, -200", *GOOD[3:]), "0.75 ft to 1"),
    "ends before the face": (GOOD[:-1], r"nothing from 24 ft to 27\.25 ft"),
    "one station": (GOOD[:3], "1 station; allowed: 2 to 5000"),
    "no station": (GOOD[:2], "no data rows"),
    "no units": (GOOD[:1], "no units row"),
    "empty": ((), "is empty"),
    "descends": ((*GOOD[:4], GOOD[5], GOOD[4], GOOD[6]), "row 6, column station: .*ascend"),
    "station twice": ((*GOOD[:4], GOOD[3], *GOOD[4:]), "row 5, column station: .*ascend"),
    "beyond the span": ((*GOOD, "29,1,-1,1,1,-1"), "row 8, column station: .*0 to 28 ft"),
    "before the span": ((*GOOD[:2], "-1,1,-1,1,1,-1", *GOOD[2:]), "row 3, column station"),
    "largest below smallest": ((*GOOD[:5], "24,-110,-100,5,15,-60", GOOD[6]), "column Mu_min"),
    "service upside down": ((*GOOD[:5], "24,20,-100,5,-61,-60", GOOD[6]), "column Ms_min"),
    "service beyond factored": ((*GOOD[:5], "24,20,-100,5,21,-60", GOOD[6]), "row 6, column Ms_m"),
    "service below factored": ((*GOOD[:5], "24,20,-100,5,15,-101", GOOD[6]), "column Ms_min"),
    "service of other sign": ((*GOOD[:5], "24,-20,-100,5,15,-60", GOOD[6]), "column Ms_max"),
    "no number": ((*GOOD[:5], "24,20,nan,5,15,-60", GOOD[6]), "row 6, column Mu_min: 'nan'"),
    "beyond any structure": ((*GOOD[:5], "24,9e99,-1,5,15,0", GOOD[6]), "column Mu_max: '9e99'"),
    "unit of other kind": (
        (HEADER, UNITS.replace("kip,", "ft,"), *ROWS),
        "row 2, column Vu: .*force",
    ),
    "unit unknown": (
        (HEADER, UNITS.replace("ft, kip*ft", "yd, kip*ft", 1), *ROWS),
        "column station",
    ),
    "no unit": ((HEADER, "-,-,-,-,-,-", *ROWS), "row 2, column station"),
    "column missing": (
        tuple(line.rpartition(",")[0] for line in GOOD),
        "column 'Ms_min' is missing",
    ),
    "column unknown": (
        (HEADER.replace("Vu", "Tu"), *GOOD[1:]),
        "unknown column 'Tu'.*allowed: station",
    ),
    "decimal commas": ((HEADER.replace(",", ";"), *GOOD[1:]), "no columns in"),
}


@pytest.mark.parametrize("name", BAD)
def test_envelope_refused(name: str, tmp_path: Path) -> None:
    """One line that names span, key, file, and the row and column where there is one."""
    lines, message = BAD[name]
    with pytest.raises(JobError, match=message) as caught:
        read(tmp_path, lines)
    text = str(caught.value)
    assert text.startswith('job: span 1 "A-B", envelope: ')
    assert "own.csv" in text
    assert text.isprintable()


@pytest.mark.parametrize(
    ("data", "message"),
    [
        (b"\xff\xfe station", "not UTF-8"),
        (b"station\x00", "control character"),
        (b"x" * 3_000_000, "larger than allowed; allowed: 2000 kB"),
        (b'station,"Mu\n', "not CSV|runs over two lines"),
    ],
)
def test_file_that_is_no_table(data: bytes, message: str, tmp_path: Path) -> None:
    """The limits of every table hold here too."""
    with pytest.raises(JobError, match=message):
        read(tmp_path, (), data=data)
