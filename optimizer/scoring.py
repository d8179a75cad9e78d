"""The practical score: placed cost of a layout in equivalent steel mass per length.

Labour ratios by diameter are published (see the labour table of `catalogs`); the other
constants are judgement and the user's to change. Every term is shown with the result.
"""

from __future__ import annotations

from dataclasses import dataclass

from catalogs import Bar
from engine import Layout, Placement
from optimizer.problem import Ranking

TERMS = ("steel", "bars", "layers", "sizes", "tight")


@dataclass(frozen=True, slots=True, kw_only=True)
class Score:
    """Terms of the practical score. [lb/ft or kg/m of equivalent steel]

    Attributes
    ----------
    steel : float
        Mass, weighted by the relative labour of fixing each size.
    bars, layers, sizes : float
        Pieces, layers beyond the first, sizes beyond the first.
    tight : float
        Bars in layers whose smallest gap is below the preferred one.
    """

    steel: float
    bars: float
    layers: float
    sizes: float
    tight: float

    @property
    def total(self) -> float:
        """Sum of the terms."""
        return self.steel + self.bars + self.layers + self.sizes + self.tight


def steel_per_bar(bar: Bar, ranking: Ranking) -> float:
    """Share of one bar in the term `steel`.

    Parameters
    ----------
    bar : Bar
        Size.
    ranking : Ranking
        Constants.

    Returns
    -------
    float
        mass (1 + k r)/(1 + k), r the relative labour of the size. [lb/ft or kg/m]
    """
    k = ranking.labour_share
    return bar.mass * (1.0 + k * bar.relative_labour) / (1.0 + k)


def score(layout: Layout, placement: Placement, ranking: Ranking) -> Score:
    """Score one layout.

    Parameters
    ----------
    layout : Layout
        Bars.
    placement : Placement
        Where they lie.
    ranking : Ranking
        Constants.

    Returns
    -------
    Score
        All terms.
    """
    tight = sum(
        layer.count * max(0.0, 1.0 - placed.smallest_gap / ranking.preferred_gap)
        for layer, placed in zip(layout.layers, placement.layers, strict=True)
    )
    return Score(
        steel=sum(
            count * steel_per_bar(bar, ranking)
            for layer in layout.layers
            for bar, count in layer.groups
        ),
        bars=ranking.per_bar * layout.count,
        layers=ranking.per_extra_layer * (len(layout.layers) - 1),
        sizes=ranking.per_extra_size * (len(layout.sizes) - 1),
        tight=ranking.tight_gap * tight,
    )
