"""Which rules leave a family without members: enough of them, and none to spare."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import numpy as np
import pytest

from engine import Outline
from optimizer.conditions import Conditions, envelope
from optimizer.families import Empty, all_families, families
from optimizer.model import blocking_rules, enumerate_family
from optimizer.problem import BarRules
from tests.engine.builders import INCH, us_section
from tests.optimizer.families import hand_made

WORK = 100.0
RULES = BarRules(
    sizes=tuple(INCH.bar(name) for name in ("#7", "#8", "#9")),
    max_layers=3,
    max_sizes=2,
    size_steps=2,
)


def width_for(count: float, layers: int = 1) -> Conditions:
    """Return room for a number of bars in each layer."""
    rows = np.zeros((layers, layers, 1))
    for layer in range(layers):
        rows[layer, layer] = -1.0
    return Conditions(rows, np.full(layers, -count))


def test_nothing_blocks_where_counts_are_left() -> None:
    """A family with members has no blocking rules."""
    assert blocking_rules(hand_made(most=((4,),)), WORK) == ()


@pytest.mark.parametrize(
    ("most", "least_first", "strength", "strain", "minimum", "expected"),
    [
        # Too narrow for the bars that the strength needs.
        (4, 2, 5.0, None, None, {"flexural_strength", "clear_gap"}),
        # Over-reinforced: strength needs 4, ductility permits 3.
        (9, 2, 4.0, 3.0, None, {"flexural_strength", "net_tensile_strain"}),
        # Ductility permits less than two bars: no other rule is needed.
        (9, 2, 3.0, 1.5, None, {"net_tensile_strain"}),
        # Crack control needs more bars than fit; the weak strength condition is innocent.
        (4, 6, 3.0, None, None, {"crack_control", "clear_gap"}),
        # Minimum steel against ductility.
        (9, 2, 2.0, 4.0, 5.0, {"minimum_steel", "net_tensile_strain"}),
    ],
)
def test_blocking_rules(
    most: int,
    least_first: int,
    strength: float,
    strain: float | None,
    minimum: float | None,
    expected: set[str],
) -> None:
    """Conditions on the number of bars that exclude each other by hand; no rule to spare."""
    one = np.ones((1, 1, 1))
    conditions = {
        "flexural_strength": Conditions(one, np.array([strength])),
        "clear_gap": width_for(most),
    }
    if strain is not None:
        conditions["net_tensile_strain"] = Conditions(-one, np.array([-strain]))
    if minimum is not None:
        conditions["minimum_steel"] = Conditions(one, np.array([minimum]))
    family = hand_made(most=((most,),), least_first=least_first, given=conditions)
    assert set(blocking_rules(family, WORK)) == expected


def test_blocking_rules_of_real_sections() -> None:
    """A demand above what fits or stays ductile; each rule named is needed and they suffice."""
    section = us_section(Mu=12e6)
    checked = 0
    for family in all_families(envelope(section), RULES):
        if isinstance(family, Empty):
            continue
        blocking = blocking_rules(family, WORK)
        assert blocking
        for left_out in ("", *blocking):
            kept = set(blocking) - {left_out}
            loose = replace(
                family,
                most=tuple(tuple(40 for _ in row) for row in family.most),
                least_first=family.least_first if "crack_control" in kept else 2,
                conditions={rule: item for rule, item in family.conditions.items() if rule in kept},
            )
            found = enumerate_family(loose, None, WORK, stop_after=1)
            assert bool(len(found.counts)) == bool(left_out)
        checked += 1
    assert checked > 5


@pytest.mark.parametrize(
    ("changes", "rules"),
    [
        ({"cover": 5.0}, ("clear_gap",)),  # 14 in web: legs 3 in apart, bends 1 in each
        ({"cover": 1.4}, ("cover",)),
        ({"outline": Outline(web=14.0, depth=5.0)}, ("arrangement",)),
        ({"min_gap": 9.0}, ("clear_gap",)),
    ],
)
def test_families_empty_at_first_sight(changes: dict[str, Any], rules: tuple[str, ...]) -> None:
    """Sections too narrow, too shallow or with too little cover have empty families."""
    section = us_section(**changes)
    found = all_families(envelope(section), replace(RULES, max_layers=2, max_sizes=1))
    assert all(isinstance(item, Empty) for item in found if rules != ("arrangement",))
    named = {item.rules for item in found if isinstance(item, Empty)}
    assert rules in named
    assert len(families(envelope(section), RULES)) == 0 or rules == ("arrangement",)
