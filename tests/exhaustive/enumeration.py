"""Every layout that passes, found by trying all of them, with rankings of its own.

Shares no code with the packages: it says whether a search lost a layout or showed a wrong one.
"""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Sequence
from itertools import pairwise
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from tests.exhaustive.cases import TOLERANCE, Case, Found, Size
from tests.exhaustive.geometry import Stack, stacks
from tests.exhaustive.mechanics import (
    Array,
    Groups,
    flexure,
    pack,
    service_stress,
    tension_controlled_strain,
)

__all__ = ["Case", "Found", "Size", "enumerate_layouts", "fewest_bars", "lightest", "ranked"]


def required_cover(case: Case, db: float) -> float:
    """Return the least cover of a bar (ACI 318-19, Table 20.5.1.3.1), [in or mm]."""
    if case.exposure == "ground":
        return case.pick(3.0, 75.0)
    if case.exposure == "weather" and db > case.pick(0.625, 16.0):
        return case.pick(2.0, 50.0)
    return case.pick(1.5, 40.0)


def covered_sizes(case: Case) -> tuple[Size, ...]:
    """Return the permitted sizes with enough cover; none if the stirrup itself has too little."""
    if case.cover < required_cover(case, case.ds) - TOLERANCE:
        return ()
    outside = case.cover + case.ds + TOLERANCE
    return tuple(size for size in case.sizes if required_cover(case, size.db) <= outside)


def bar_groups(case: Case, found: Sequence[Stack]) -> Groups:
    """Return depth, area and diameter of every size in every layer of every stack."""
    rows, dt = [], []
    for stack in found:
        by_layer = [
            [
                (case.depth - bottom - size.db / 2, count * size.area, size.db)
                for size, count in layer
            ]
            for layer, bottom in zip(stack.layers, stack.bottoms, strict=True)
        ]
        rows.append([group for layer in by_layer for group in layer])
        first = by_layer[0]
        dt.append(sum(y * area for y, area, _ in first) / sum(area for _, area, _ in first))
    return pack(rows, dt)


def minimum_steel(case: Case, d: Array) -> Array:
    """Return the least area of reinforcement (ACI 318, 9.6.1.2), [in^2 or mm^2]."""
    root = math.sqrt(case.fc)
    stress = max(case.pick(3.0, 0.25) * root, case.pick(200.0, 1.4))
    fy = min(case.fy, case.pick(80_000.0, 550.0)) if case.edition == "19" else case.fy
    width = case.web
    if case.determinate and case.flange_in_tension:
        width = min(case.tension_width, 2 * case.web)
    return stress * width * d / fy


def crack_spacing(case: Case, fs: Array) -> Array:
    """Return the largest centre spacing of layer 1 (ACI 318, Table 24.3.2), [in or mm]."""
    clear = case.cover + case.ds
    if case.si:
        return np.minimum(380 * 280 / fs - 2.5 * clear, 300 * 280 / fs)
    return np.minimum(15 * 40_000 / fs - 2.5 * clear, 12 * 40_000 / fs)


def passing(
    case: Case, found: Sequence[Stack], groups: Groups
) -> tuple[NDArray[np.bool_], Array, Array]:
    """Return which stacks pass, and phi Mn and eps_t of all of them."""
    strong = case.Mu * (1 - TOLERANCE)
    result = flexure(case, groups)
    strength = result.phi * result.Mn
    limit = tension_controlled_strain(case) if case.tension_controlled else 0.004
    spacing = np.array([max(x2 - x1 for x1, x2 in pairwise(stack.lines[0])) for stack in found])
    ok = (
        (strength >= strong)
        & (result.eps_t >= limit * (1 - TOLERANCE))
        & (spacing <= crack_spacing(case, service_stress(case, groups)) * (1 + TOLERANCE))
    )
    enough = groups.total >= minimum_steel(case, groups.d) * (1 - TOLERANCE)
    short = ok & ~enough
    if short.any():
        # ACI 318, 9.6.1.3: the area is 4/3 of what is needed if 3/4 of it still carries Mu.
        reduced = flexure(case, groups.only(short, 0.75))
        enough[short] = reduced.phi * reduced.Mn >= strong
    return ok & enough, strength, result.eps_t


def describe(case: Case, stack: Stack, strength: float, eps_t: float) -> Found:
    """Return the record of a passing stack, with mass and practical score."""
    bars = [(size, count) for layer in stack.layers for size, count in layer]
    sizes = {size.name for size, _ in bars}
    k = case.labour_share
    crowded = sum(
        sum(count for _, count in layer) * max(0.0, 1 - gap / case.preferred_gap)
        for layer, gap in zip(stack.layers, stack.gaps, strict=True)
    )
    terms = {
        "steel": sum(n * size.mass * (1 + k * size.labour) / (1 + k) for size, n in bars),
        "bars": case.per_bar * sum(n for _, n in bars),
        "layers": case.per_extra_layer * (len(stack.layers) - 1),
        "sizes": case.per_extra_size * (len(sizes) - 1),
        "tight": case.tight_gap * crowded,
    }
    return Found(
        counts=tuple(tuple((size.name, n) for size, n in layer) for layer in stack.layers),
        mass=sum(n * size.mass for size, n in bars),
        score=sum(terms.values()),
        terms=terms,
        bars=sum(n for _, n in bars),
        layers=len(stack.layers),
        sizes=len(sizes),
        smallest_gap=min(stack.gaps),
        phiMn=strength,
        eps_t=eps_t,
        As=sum(n * size.area for size, n in bars),
        tie=tuple(tuple((-size.position, -n) for size, n in layer) for layer in stack.layers),
    )


def enumerate_layouts(case: Case) -> list[Found]:
    """Return every layout of the case that passes all rules, in no particular order."""
    found = list(stacks(case, covered_sizes(case)))
    if not found:
        return []
    ok, strength, eps_t = passing(case, found, bar_groups(case, found))
    return [
        describe(case, found[row], float(strength[row]), float(eps_t[row]))
        for row in np.flatnonzero(ok)
    ]


Key = tuple[object, ...]


def _tail(found: Found) -> Key:
    return (found.layers, found.sizes, -round(found.smallest_gap, 6), found.tie)


def _by_score(found: Found) -> Key:
    return (round(found.score, 6), round(found.mass, 6), found.bars, *_tail(found))


def _by_mass(found: Found) -> Key:
    return (round(found.mass, 6), found.bars, *_tail(found))


def _by_bars(found: Found) -> Key:
    return (found.bars, round(found.mass, 6), *_tail(found))


def ranked(
    found: Sequence[Found],
    by: Literal["practical", "lightest"],
    keep: int,
    per_pattern: int | None,
) -> list[Found]:
    """Return the first `keep` layouts, best first.

    Parameters
    ----------
    found : sequence of Found
        All passing layouts.
    by : {"practical", "lightest"}
        Ranking by score or by mass.
    keep : int
        Most layouts to return.
    per_pattern : int or None
        Most layouts with the same largest size and number of layers; None for no such limit.
    """
    key = {"practical": _by_score, "lightest": _by_mass}[by]
    taken: Counter[tuple[str, int]] = Counter()
    listed: list[Found] = []
    for layout in sorted(found, key=key):
        if len(listed) == keep:
            break
        pattern = (layout.counts[0][0][0], layout.layers)
        if per_pattern is None or taken[pattern] < per_pattern:
            taken[pattern] += 1
            listed.append(layout)
    return listed


def lightest(found: Sequence[Found]) -> Found | None:
    """Return the layout with the least mass, None where nothing passes."""
    return min(found, key=_by_mass, default=None)


def fewest_bars(found: Sequence[Found]) -> Found | None:
    """Return the layout with the fewest bars, None where nothing passes."""
    return min(found, key=_by_bars, default=None)
