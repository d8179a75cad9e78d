"""The trade-off set against the independent enumeration: the same layouts on random sections."""

from __future__ import annotations

import pytest

from catalogs import Bar
from optimizer.tradeoff import Aims, Variant, trade_off
from tests.exhaustive.enumeration import Case, Found, enumerate_layouts
from tests.exhaustive.test_search import _counts, _random_twin

SECTIONS = 200
GROUP = 20
_EQUAL = 1e-7


def _aims(bar: Bar) -> tuple[float, ...]:
    """Mass, number and relative labour of one bar."""
    return (bar.mass, 1.0, bar.mass * bar.relative_labour)


def _values(case: Case, found: Found) -> tuple[float, ...]:
    """Mass, bars, labour, sizes and layers, from the enumeration's own records."""
    labour = {size.name: size.mass * size.labour for size in case.sizes}
    total = sum(labour[name] * count for layer in found.counts for name, count in layer)
    return (found.mass, found.bars, total, found.sizes, found.layers)


def _beats(one: tuple[float, ...], other: tuple[float, ...]) -> bool:
    none_worse = all(a <= b + _EQUAL * abs(b) for a, b in zip(one, other, strict=True))
    return none_worse and any(a < b - _EQUAL * abs(b) for a, b in zip(one, other, strict=True))


@pytest.mark.parametrize("first", range(0, SECTIONS, GROUP))
def test_trade_off_equals_enumeration(first: int) -> None:
    """Every layout that no other beats is found, and nothing else."""
    sizes = []
    for seed in range(first, first + GROUP):
        twin = _random_twin(seed)
        everything = [(item, _values(twin.case, item)) for item in enumerate_layouts(twin.case)]
        points = {values for _, values in everything}
        best = {point for point in points if not any(_beats(other, point) for other in points)}
        expected = {item.counts for item, values in everything if values in best}
        variant = Variant(
            problem=twin.problem, changes=(), aims=Aims(per_bar=_aims, constant=(0.0,) * 3)
        )
        found, proved = trade_off([variant])
        assert proved
        labels = [_counts(item.layout) for item in found]
        assert len(set(labels)) == len(labels)
        assert set(labels) == expected, seed
        sizes.append(len(found))
    assert max(sizes) > 1
