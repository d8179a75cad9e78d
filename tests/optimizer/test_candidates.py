"""Orders of layouts: keys, ties and the variety of the short list."""

from __future__ import annotations

from dataclasses import replace

import pytest

from engine import place
from optimizer.candidates import Candidate, short_list
from optimizer.scoring import Score
from tests.engine.builders import us_layout, us_section
from tests.optimizer.test_scoring import US

SECTION = us_section()


def rated(*layers: str, total: float | None = None, mass: float | None = None) -> Candidate:
    """Return a layout in place with a score of the given total and, if given, another mass."""
    layout = us_layout(*layers)
    value = layout.mass if total is None else total
    terms = Score(steel=value, bars=0.0, layers=0.0, sizes=0.0, tight=0.0)
    found = Candidate.of(layout, place(SECTION, layout), terms)
    if mass is None:
        return found
    return replace(
        found,
        mass=mass,
        lightest_key=(mass, *found.lightest_key[1:]),
        practical_key=(*found.practical_key[:1], mass, *found.practical_key[2:]),
        fewest_key=(*found.fewest_key[:1], mass, *found.fewest_key[2:]),
    )


def labels(found: list[Candidate]) -> list[str]:
    """Return the labels of a list."""
    return [item.layout.label for item in found]


def listed(by: str, *items: Candidate, keep: int = 10, per_pattern: int | None = None) -> list[str]:
    """Return the labels of the short list of layouts sorted by their keys."""
    wanted = replace(US, by=by, keep=keep, per_pattern=per_pattern)
    return labels(short_list(sorted(items, key=lambda item: item.key(by)), wanted))


def test_facts_of_a_candidate() -> None:
    """Mass, number of bars and pattern are the layout's: 3 #9 + 2 #7 below 2 #9."""
    found = rated("3 #9 + 2 #7", "2 #9")
    assert found.mass == pytest.approx(5 * 3.400 + 2 * 2.044)
    assert found.bars == 7
    assert found.pattern == (us_layout("2 #9").sizes[0].position, 2)
    assert found.value("lightest") == found.mass
    assert rated("2 #9", total=3.25).value("practical") == 3.25


def test_order_by_score_and_by_mass() -> None:
    """The first value decides, whatever the others say."""
    heavy = rated("6 #9", "4 #9", total=1.0)
    light = rated("2 #5", total=2.0)
    assert listed("practical", light, heavy) == ["6 #9 / 4 #9", "2 #5"]
    assert listed("lightest", light, heavy) == ["2 #5", "6 #9 / 4 #9"]


@pytest.mark.parametrize("by", ["practical", "lightest"])
@pytest.mark.parametrize(
    ("better", "worse"),
    [
        (("3 #8",), ("4 #7",)),  # fewer bars
        (("6 #8",), ("3 #8", "3 #8")),  # fewer layers
        (("4 #8",), ("2 #8 + 2 #7",)),  # fewer sizes
        # Larger smallest gap: the same bars and layers, 2 in layer 1 instead of 3.
        (("2 #9 + 2 #7",), ("2 #9 + 2 #8",)),
    ],
)
def test_ties(by: str, better: tuple[str, ...], worse: tuple[str, ...]) -> None:
    """At equal score and mass: fewer bars, layers, sizes, then the larger smallest gap."""
    one, two = rated(*better, total=5.0, mass=5.0), rated(*worse, total=5.0, mass=5.0)
    assert listed(by, two, one) == [one.layout.label, two.layout.label]
    assert one.fewest_key < two.fewest_key


def test_equal_scores_are_settled_by_mass() -> None:
    """In the practical order mass comes before the number of bars; in the other it comes first."""
    light, few = rated("4 #6", total=5.0), rated("3 #8", total=5.0)
    assert listed("practical", few, light) == ["4 #6", "3 #8"]
    assert light.fewest_key > few.fewest_key


def test_differences_beyond_six_decimals_are_ties() -> None:
    """Scores that differ by rounding only leave the decision to mass."""
    light = rated("2 #6", total=5.0 + 3e-7)
    heavy = rated("2 #8", total=5.0)
    assert listed("practical", heavy, light) == ["2 #6", "2 #8"]
    clearly = rated("2 #6", total=5.0 + 3e-6)
    assert listed("practical", heavy, clearly) == ["2 #8", "2 #6"]


@pytest.mark.parametrize("by", ["practical", "lightest"])
def test_larger_bars_in_outer_layers_settle_the_rest(by: str) -> None:
    """All facts equal, larger smallest gap included: larger bars further out come first.

    Three layers of pairs: the outer two have 8 in between centres, whichever comes first.
    """
    outer = rated("2 #9", "2 #9", "2 #8", total=5.0)
    inner = rated("2 #9", "2 #8", "2 #9", total=5.0)
    assert outer.placement.smallest_gap == pytest.approx(inner.placement.smallest_gap)
    assert listed(by, inner, outer) == ["2 #9 / 2 #9 / 2 #8", "2 #9 / 2 #8 / 2 #9"]


@pytest.mark.parametrize("keep", [1, 2, 5])
def test_length(keep: int) -> None:
    """Not more than `keep` lines, the best ones."""
    items = [rated(f"{count} #6") for count in range(2, 8)]
    assert listed("lightest", *items, keep=keep) == [f"{n} #6" for n in range(2, 2 + keep)]


def test_variety() -> None:
    """At most so many of one largest size and number of layers; others move up."""
    items = [
        rated("2 #8", total=1.0),
        rated("2 #8 + 1 #7", total=2.0),
        rated("3 #8", total=3.0),
        rated("2 #8", "2 #8", total=4.0),
        rated("2 #7", total=5.0),
        rated("4 #8", total=6.0),
    ]
    by_two = ["2 #8", "2 #8 + 1 #7", "2 #8 / 2 #8", "2 #7"]
    assert listed("practical", *items, per_pattern=2) == by_two
    assert listed("practical", *items, per_pattern=1) == ["2 #8", "2 #8 / 2 #8", "2 #7"]
    assert listed("practical", *items, per_pattern=2, keep=3) == by_two[:3]
    assert len(listed("practical", *items)) == 6


def test_nothing_in_nothing_out() -> None:
    """No candidates make an empty list."""
    assert short_list([], US) == []
