"""Layouts that passed every check, and the orders they are listed in."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass

from engine import Layout, Placement
from optimizer.problem import Ranking
from optimizer.scoring import Score

_DECIMALS = 6  # values equal to this many decimals are equal: sums differ by rounding only

Key = tuple[object, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Candidate:
    """A layout that passes every check of its section.

    Attributes
    ----------
    layout : Layout
        Bars.
    placement : Placement
        Where they lie.
    score : Score
        Terms of the practical score.
    mass : float
        Steel mass per length. [lb/ft or kg/m]
    bars : int
        Number of bars. [-]
    pattern : tuple of (int, int)
        Largest size and number of layers: what the variety rule counts.
    practical_key, lightest_key, fewest_key : tuple
        Sort keys: by score, then mass; by mass; by number of bars, then mass; then in each by
        bars, layers, sizes, the larger smallest gap, and larger bars in outer layers.
    """

    layout: Layout
    placement: Placement
    score: Score
    mass: float
    bars: int
    pattern: tuple[int, int]
    practical_key: Key
    lightest_key: Key
    fewest_key: Key

    @classmethod
    def of(cls, layout: Layout, placement: Placement, score: Score) -> Candidate:
        """Rate a layout once, so that sorting costs nothing.

        Parameters
        ----------
        layout : Layout
            Bars.
        placement : Placement
            Where they lie.
        score : Score
            Terms of the practical score.

        Returns
        -------
        Candidate
            The layout with its keys.
        """
        sizes, bars, mass = layout.sizes, layout.count, layout.mass
        tie = tuple(
            tuple((-bar.position, -count) for bar, count in layer.groups) for layer in layout.layers
        )
        gap = -round(placement.smallest_gap, _DECIMALS)
        facts = (len(layout.layers), len(sizes), gap, tie)
        by_mass = round(mass, _DECIMALS)
        return cls(
            layout=layout,
            placement=placement,
            score=score,
            mass=mass,
            bars=bars,
            pattern=(sizes[0].position, len(layout.layers)),
            practical_key=(round(score.total, _DECIMALS), by_mass, bars, *facts),
            lightest_key=(by_mass, bars, *facts),
            fewest_key=(bars, by_mass, *facts),
        )

    def value(self, by: str) -> float:
        """Value that a ranking orders by first.

        Parameters
        ----------
        by : str
            ``practical`` or ``lightest``.

        Returns
        -------
        float
            Score or mass. [lb/ft or kg/m]
        """
        return self.score.total if by == "practical" else self.mass

    def key(self, by: str) -> Key:
        """Sort key of a ranking.

        Parameters
        ----------
        by : str
            ``practical`` or ``lightest``.

        Returns
        -------
        tuple
            Key; smaller is better.
        """
        return self.practical_key if by == "practical" else self.lightest_key


def short_list(candidates: Iterable[Candidate], ranking: Ranking) -> list[Candidate]:
    """The best candidates, not more than a few of one pattern.

    Parameters
    ----------
    candidates : iterable of Candidate
        All that are known, in the ranking's order.
    ranking : Ranking
        Order, length and variety wanted.

    Returns
    -------
    list of Candidate
        Best first.
    """
    taken: Counter[tuple[int, int]] = Counter()
    chosen: list[Candidate] = []
    for candidate in candidates:
        if ranking.per_pattern is not None and taken[candidate.pattern] >= ranking.per_pattern:
            continue
        taken[candidate.pattern] += 1
        chosen.append(candidate)
        if len(chosen) == ranking.keep:
            break
    return chosen
