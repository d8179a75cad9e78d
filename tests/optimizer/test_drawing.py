"""The cross-section in text: bars in number and in symmetry, cuts, breaks, width."""

from __future__ import annotations

from typing import Any

import pytest

from engine import CheckedLayout, Flange, Outline, Section, check_layout
from optimizer.drawing import ASCII, UNICODE, Ink, draw
from tests.engine.builders import si_layout, si_section, us_layout, us_section

PAGE = 80


def drawn(*layers: str, **changes: Any) -> CheckedLayout:
    """Return a checked layout of inch bars in a section with some figures changed."""
    return check_layout(us_section(**changes), us_layout(*layers))


def bars_of(checked: CheckedLayout, ink: Ink) -> list[list[int]]:
    """Return the columns of bar characters of each row that has some."""
    rows = []
    for line in draw(checked, ink)[:-1]:
        body = line.split("  layer")[0].split("  opposite")[0]
        columns = [column for column, mark in enumerate(body) if mark in ink.bars]
        if columns:
            rows.append(columns)
    return rows


LAYOUTS = [
    (("2 #5",), {}),
    (("3 #9",), {}),
    (("4 #8", "2 #8"), {}),
    (("2 #9 + 2 #7", "2 #9"), {}),
    (("5 #6", "3 #6", "2 #6"), {}),
    (("2 #8 + 1 #6", "2 #6"), {"Mu": -3e6}),
    (("9 #8", "4 #8"), {"outline": Outline(web=24.0, depth=30.0)}),
    (("20 #5",), {"outline": Outline(web=48.0, depth=20.0)}),
    (("4 #11", "4 #11"), {"outline": Outline(web=18.0, depth=72.0)}),
    (
        ("4 #8", "2 #8"),
        {"outline": Outline(web=14.0, depth=24.0, top=Flange(width=60.0, thickness=5.0))},
    ),
]


@pytest.mark.parametrize("ink", [UNICODE, ASCII], ids=["unicode", "ascii"])
@pytest.mark.parametrize(("layers", "changes"), LAYOUTS)
def test_bars_in_number_and_mirrored(
    layers: tuple[str, ...], changes: dict[str, Any], ink: Ink
) -> None:
    """One character a bar, a row a layer, each row its own mirror image about the same axis."""
    checked = drawn(*layers, **changes)
    rows = bars_of(checked, ink)
    counts = [layer.count for layer in checked.layout.layers]
    assert [len(row) for row in rows] == (counts[::-1] if checked.section.sagging else counts)
    axes = {first + last for row in rows for first, last in zip(row, reversed(row), strict=True)}
    assert len(axes) == 1


@pytest.mark.parametrize("ink", [UNICODE, ASCII], ids=["unicode", "ascii"])
def test_bars_of_both_faces(ink: Ink) -> None:
    """Bars opposite are drawn at the other face with a mark of their own."""
    checked = drawn("3 #9", "2 #7", opposite=us_layout("2 #5"))
    lines = draw(checked, ink)
    assert [len(row) for row in bars_of(checked, ink)] == [2, 2, 3]
    large, small, opposite = ink.bars[0], ink.bars[1], ink.bars[2]
    body = "\n".join(line.split("  layer")[0].split("  opposite")[0] for line in lines[:-1])
    assert (body.count(large), body.count(small), body.count(opposite)) == (3, 2, 2)
    notes = [line for line in lines if "gap" in line]
    assert [note.split(":")[0].split()[-1] for note in notes] == ["opposite", "2", "1"]


def test_hogging_bars_are_at_the_top() -> None:
    """Layer 1 of a hogging section is the uppermost row of bars."""
    lines = draw(drawn("4 #8", "2 #8", Mu=-3e6), ASCII)
    one = next(i for i, line in enumerate(lines) if "layer 1: 4 #8" in line)
    two = next(i for i, line in enumerate(lines) if "layer 2: 2 #8" in line)
    assert one < two < len(lines) / 2


def test_notes_name_counts_and_gaps() -> None:
    """14 in web: 8 in between corner centres, gaps of (8 - 3)/3 and 8 - 1 in."""
    text = "\n".join(draw(drawn("4 #8", "2 #8"), ASCII))
    assert "layer 1: 4 #8, gap 1.667 in" in text
    assert "layer 2: 2 #8, gap 7 in" in text
    assert "14 x 24 in" in text
    assert "cover 1.5 in to #4 stirrup" in text


def test_wide_flange_is_cut_and_marked() -> None:
    """A flange beyond the page ends in the cut mark on both sides and is called cut."""
    outline = Outline(web=14.0, depth=24.0, top=Flange(width=200.0, thickness=5.0))
    for ink in (ASCII, UNICODE):
        lines = draw(drawn("4 #8", outline=outline), ink)
        assert lines[0].strip().startswith(ink.cut)
        assert lines[0].strip().endswith(ink.cut)
        assert "top flange 200 x 5 in (cut)" in lines[-1]


def test_one_sided_flange_is_cut_on_its_side_only() -> None:
    """An L section's flange goes on to the left only."""
    outline = Outline(web=14.0, depth=24.0, top=Flange(width=150.0, thickness=5.0, left=136.0))
    line = draw(drawn("4 #8", outline=outline), ASCII)[0].strip()
    assert line.startswith(ASCII.cut)
    assert not line.endswith(ASCII.cut)


def test_narrow_flange_is_not_cut() -> None:
    """A flange that fits is drawn to its end."""
    outline = Outline(web=14.0, depth=24.0, bottom=Flange(width=24.0, thickness=5.0))
    text = "\n".join(draw(drawn("4 #8", outline=outline), ASCII))
    assert ASCII.cut not in text
    assert "(cut)" not in text
    assert "bottom flange 24 x 5 in" in text


@pytest.mark.parametrize("ink", [UNICODE, ASCII], ids=["unicode", "ascii"])
def test_deep_web_is_broken(ink: Ink) -> None:
    """A deep section is shortened with a row of break marks; an ordinary one is not."""
    deep = draw(drawn("4 #11", "4 #11", outline=Outline(web=12.0, depth=96.0)), ink)
    assert sum(ink.broken in line for line in deep) == 1
    assert len(deep) <= 27
    assert not any(ink.broken in line for line in draw(drawn("4 #8"), ink))


@pytest.mark.parametrize(("layers", "changes"), LAYOUTS)
def test_ascii_ink_is_ascii(layers: tuple[str, ...], changes: dict[str, Any]) -> None:
    """The plain drawing has no character beyond ASCII."""
    assert all(line.isascii() for line in draw(drawn(*layers, **changes), ASCII))


def test_metric_section() -> None:
    """Lengths in mm in the notes and the caption."""
    checked = check_layout(si_section(), si_layout("4 25", "2 25"))
    lines = draw(checked, ASCII)
    assert "350 x 600 mm" in lines[-1]
    assert "cover 40 mm to 13 stirrup" in lines[-1]
    assert sum(line.count("@") for line in lines) == 6


def page_width(section: Section, *layers: str) -> int:
    """Return the length of the longest line of a drawing."""
    return max(len(line) for line in draw(check_layout(section, us_layout(*layers)), ASCII))


@pytest.mark.parametrize(("layers", "changes"), [LAYOUTS[i] for i in (0, 1, 2, 3, 4, 5, 6, 8)])
def test_lines_fit_the_page(layers: tuple[str, ...], changes: dict[str, Any]) -> None:
    """No line is wider than 80 columns."""
    assert page_width(us_section(**changes), *layers) <= PAGE


@pytest.mark.parametrize(
    ("layers", "outline"),
    [
        (("5 #6 + 10 #5",), Outline(web=48.0, depth=20.0)),
        (
            ("23 #5",),
            Outline(web=48.0, depth=20.0, top=Flange(width=120.0, thickness=5.0)),
        ),
        (
            ("2 #11 + 1 #10",),
            Outline(
                web=14.0,
                depth=40.0,
                top=Flange(width=60.0, thickness=5.0),
                bottom=Flange(width=40.0, thickness=6.0),
            ),
        ),
    ],
)
def test_lines_of_wide_sections_fit_the_page(layers: tuple[str, ...], outline: Outline) -> None:
    """Wide webs, cut flanges and long captions stay within 80 columns too."""
    assert page_width(us_section(outline=outline), *layers) <= PAGE


def test_layers_of_a_wide_web_keep_their_rows() -> None:
    """Each layer has a row and a note of its own however wide the web is."""
    checked = drawn("12 #5", "4 #5", outline=Outline(web=72.0, depth=24.0))
    assert [len(row) for row in bars_of(checked, ASCII)] == [4, 12]
