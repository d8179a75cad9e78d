"""Layouts as written in a job, and their totals."""

from __future__ import annotations

import pytest

from catalogs import UnknownNameError, bar_catalog
from engine import LayoutError, parse_layout
from engine.layouts import MOST_BARS, MOST_LAYERS, Layer, layer_of
from tests.engine.builders import INCH, inch_bar, us_layout


@pytest.mark.parametrize(
    ("texts", "label"),
    [
        (["4 #8"], "4 #8"),
        (["4 #8", "2 #8"], "4 #8 / 2 #8"),
        (["2#9+2#7", " 2  #9 "], "2 #9 + 2 #7 / 2 #9"),
        (["2 #7 + 2 #9"], "2 #9 + 2 #7"),
        (["2 #8 + 2 #8"], "4 #8"),
        (["1 #8"], "1 #8"),
        (["99 #3"], "99 #3"),
    ],
)
def test_label_of_what_was_read(texts: list[str], label: str) -> None:
    """Larger sizes come first, equal ones are merged; the label reads like a drawing."""
    assert parse_layout(texts, INCH).label == label


def test_metric_sizes_are_bare_numbers() -> None:
    """Count and size are told apart by the blank between them."""
    layout = parse_layout(["4 25", "2 16"], bar_catalog("en10080"))
    assert [layer.label for layer in layout.layers] == ["4 25", "2 16"]


@pytest.mark.parametrize("text", ["416", "48"])
def test_bare_number_without_a_blank_is_not_guessed(text: str) -> None:
    """Text 416 may be 4 bars of 16 or 41 of 6: it has to be written apart."""
    with pytest.raises(LayoutError, match=f"^got '{text}'; expected counts and sizes"):
        parse_layout([text], bar_catalog("en10080"))


def test_totals() -> None:
    """Areas and masses of ASTM A615: #9 1.00 in^2, 3.400 lb/ft; #7 0.60 in^2, 2.044 lb/ft."""
    layout = us_layout("2 #9 + 2 #7", "2 #9")
    assert layout.count == 6
    assert layout.area == pytest.approx(4 * 1.00 + 2 * 0.60, rel=1e-14)
    assert layout.mass == pytest.approx(4 * 3.400 + 2 * 2.044, rel=1e-14)
    assert [bar.designation for bar in layout.sizes] == ["#9", "#7"]
    assert layout.layers[0].count == 4
    assert layout.layers[0].largest.designation == "#9"


def test_layer_of_drops_and_merges() -> None:
    """Zero counts vanish, equal sizes add up, the larger leads."""
    eight, six = inch_bar("#8"), inch_bar("#6")
    assert layer_of([(six, 2), (eight, 0), (eight, 2), (six, 1)]) == Layer(((eight, 2), (six, 3)))


@pytest.mark.parametrize(
    "text", ["", "#8", "4", "0 #8", "000 #8", "4 #8 +", "4 #8 2 #8", "-4 #8", "1234 #8"]
)
def test_text_that_is_no_layer(text: str) -> None:
    """What cannot be read is quoted beside an example of the catalogue's own."""
    with pytest.raises(LayoutError, match=r'^got .*; expected counts and sizes such as "4 #6"$'):
        parse_layout([text], INCH)


def test_long_text_is_cut() -> None:
    """A page of text does not flood the message."""
    with pytest.raises(LayoutError, match=r"^got 'x{60}'\.\.\.; expected counts and sizes"):
        parse_layout(["x" * 10_000], INCH)


def test_value_that_is_no_text() -> None:
    """A bare number in the list is answered like any other slip."""
    with pytest.raises(LayoutError, match=r"^got .*; expected counts and sizes"):
        parse_layout([4], INCH)  # type: ignore[list-item]


def test_unknown_size() -> None:
    """Sizes come from the catalogue."""
    with pytest.raises(UnknownNameError, match="bar '#12' is not known"):
        parse_layout(["4 #12"], INCH)


@pytest.mark.parametrize("count", [0, MOST_LAYERS + 1])
def test_number_of_layers(count: int) -> None:
    """No layer is no layout; nor are ten."""
    with pytest.raises(LayoutError, match=rf"^{count} layers; allowed: 1 to 9$"):
        parse_layout(["2 #8"] * count, INCH)
    assert len(parse_layout(["2 #8"] * MOST_LAYERS, INCH).layers) == MOST_LAYERS


def test_number_of_bars() -> None:
    """A hundred bars in a layer are a slip."""
    with pytest.raises(LayoutError, match=r"^100 bars in a layer; allowed: 1 to 99$"):
        parse_layout([f"{MOST_BARS} #3 + 1 #4"], INCH)
