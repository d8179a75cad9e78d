"""Bars of a finished beam put together: layouts, places across the web, spacings."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Sequence

from catalogs import Bar
from engine import Layout, Placement
from engine.layouts import layer_of
from optimizer.beams.variants import Piece, StirrupPlan


def layout_from(pieces: Iterable[Piece]) -> Layout:
    """Layout of bars side by side, from the bars themselves.

    Parameters
    ----------
    pieces : iterable of Piece
        At least one.

    Returns
    -------
    Layout
        Layers that have bars, the outermost first.
    """
    layers: dict[int, list[tuple[Bar, int]]] = {}
    for piece in pieces:
        layers.setdefault(piece.layer, []).append((piece.bar, piece.count))
    return Layout(tuple(layer_of(layers[number]) for number in sorted(layers)))


def positions_of(placement: Placement, pieces: Sequence[Piece]) -> list[float]:
    """Places across the web of those bars of layer 1 that are among some pieces.

    Parameters
    ----------
    placement : Placement
        All bars in place.
    pieces : sequence of Piece
        Bars looked for: of each size pairs from the corners inwards, an odd one at the centre.

    Returns
    -------
    list of float
        From left to right. [in or mm]
    """
    first = placement.layers[0]
    counts: Counter[str] = Counter()
    for piece in pieces:
        if piece.layer == 1:
            counts[piece.bar.designation] += piece.count
    found: list[float] = []
    for name, count in counts.items():
        own = [x for x, other in zip(first.x, first.designations, strict=True) if other == name]
        pairs = min(count, len(own)) // 2
        found += own[:pairs] + own[len(own) - pairs :]
        if count % 2 and len(own) % 2:
            found.append(own[len(own) // 2])
    return sorted(found)


def ending_with(pieces: Sequence[Piece], piece: Piece, direction: int) -> list[Piece]:
    """Bars of a place that end in the same hooks as some of them.

    Parameters
    ----------
    pieces : sequence of Piece
        Bars of the place.
    piece : Piece
        Bars looked at.
    direction : int
        1 for their right ends, -1 for their left ones.

    Returns
    -------
    list of Piece
        Those with a hook within 12 diameters along the beam, themselves included.
    """
    near = 12.0 * piece.bar.diameter
    found = []
    for other in pieces:
        hooked = other.hook_end if direction > 0 else other.hook_start
        away = other.end - piece.end if direction > 0 else other.start - piece.start
        if hooked and abs(away) <= near:
            found.append(other)
    return found


def true_spacing(plan: StirrupPlan, x: float) -> float:
    """Stirrup spacing as it is built, not less than the one named.

    Parameters
    ----------
    plan : StirrupPlan
        Stirrups of a span.
    x : float
        Distance from the left face. [in or mm]

    Returns
    -------
    float
        Spacing. [in or mm]
    """
    (_, left), (_, right), _ = plan.zones
    named = plan.spacing_at(x)
    if left < x < right:
        return max(named, plan.middle_spacing if plan.spaces[1] else right - left)
    return named
