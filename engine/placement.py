"""Where every bar of a layout lies: stirrup bends, equal gaps, layers stacked on layers.

Layer 1 rests on the stirrup between its two bends with equal clear gaps. A layer above
stands on the vertical lines of bars of the layer below (25.2.2): on the outermost ones
and, of the symmetric choices, on those that leave the largest smallest gap.
"""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from itertools import combinations, islice, pairwise

from engine.layouts import Layer, Layout
from engine.sections import Section

_TIE = 1e-9  # gaps closer than this are the same gap [in or mm]

_MOST_CHOICES = 20_000  # of lines for an asymmetric layer; only drawn layouts have such
_SYMMETRY = 1e-6  # lines further off their mirror image are not symmetric [in or mm]


@dataclass(frozen=True, slots=True, kw_only=True)
class PlacedLayer:
    """A layer with its bars in place.

    Attributes
    ----------
    x : tuple of float
        Bar centres from the web's centreline, left to right. [in or mm]
    diameters : tuple of float
        Bar diameters, left to right. [in or mm]
    designations : tuple of str
        Sizes, left to right.
    bottom : float
        Distance of the bars' surface from the tension face. [in or mm]
    smallest_gap : float
        Smallest clear gap; infinite for a single bar. [in or mm]
    gap, gap_required : float
        Clear gap of the tightest pair and what it has to be, 25.2.1 or the job's. Between
        large bars a gap may be tighter than a smaller one between small bars. [in or mm]
    spacing : float
        Largest centre-to-centre spacing of neighbours; zero for a single bar. [in or mm]
    aligned : bool
        Whether every bar stands on a bar of the layer below.
    """

    x: tuple[float, ...]
    diameters: tuple[float, ...]
    designations: tuple[str, ...]
    bottom: float
    smallest_gap: float
    gap: float
    gap_required: float
    spacing: float
    aligned: bool


@dataclass(frozen=True, slots=True)
class Placement:
    """All layers of one face in place, the outermost first."""

    layers: tuple[PlacedLayer, ...]

    @property
    def smallest_gap(self) -> float:
        """Smallest clear gap of the layout. [in or mm]"""
        return min(layer.smallest_gap for layer in self.layers)

    @property
    def height(self) -> float:
        """Distance of the innermost bar surface from the tension face. [in or mm]"""
        last = self.layers[-1]
        return last.bottom + max(last.diameters)

    @property
    def gaps_fit(self) -> bool:
        """Whether every layer's gaps are at least the required ones."""
        return all(gap_fits(layer.gap, layer.gap_required) for layer in self.layers)


def gap_fits(gap: float, required: float) -> bool:
    """Whether a clear gap is enough, rounding of floating point apart.

    Parameters
    ----------
    gap, required : float
        Provided and required clear gap. [in or mm]

    Returns
    -------
    bool
        True if the gap is not smaller.
    """
    return gap >= required - _TIE


def left_to_right(layer: Layer) -> tuple[tuple[str, float], ...]:
    """Order of the bars in a layer: larger sizes from the corners inwards.

    Parameters
    ----------
    layer : Layer
        Bars of the layer.

    Returns
    -------
    tuple of (str, float)
        Designation and diameter of each bar [in or mm], left to right. One odd bar stands at
        the centre; where several sizes are odd no symmetric order exists and they stand there
        side by side, the larger first.
    """
    half = []
    centre = []
    for bar, count in layer.groups:
        half += [(bar.designation, bar.diameter)] * (count // 2)
        centre += [(bar.designation, bar.diameter)] * (count % 2)
    return (*half, *centre, *reversed(half))


def place(section: Section, layout: Layout) -> Placement:
    """Put every bar of a layout in its place.

    Parameters
    ----------
    section : Section
        Section whose tension face the bars lie at.
    layout : Layout
        Bars, layer 1 first.

    Returns
    -------
    Placement
        Positions and gaps. Gaps may be too small or negative: that is for the checks to say.
    """
    placed: list[PlacedLayer] = []
    bottom = section.bar_face
    lines: tuple[float, ...] = ()
    for number, layer in enumerate(layout.layers):
        order = left_to_right(layer)
        diameters = tuple(diameter for _, diameter in order)
        reach = section.inner_width / 2 - section.corner_offset(diameters[0])
        aligned = True
        if number == 0:
            x = equal_gaps(diameters, reach)
        else:
            chosen = stack(lines, diameters) or _stand(lines, diameters)
            aligned = chosen is not None and max(map(abs, (chosen[0], chosen[-1]))) <= reach + _TIE
            x = chosen if chosen is not None and aligned else equal_gaps(diameters, reach)
        placed.append(_measure(section, order, x, bottom, aligned))
        lines = x
        bottom += max(diameters) + section.layer_gap
    return Placement(tuple(placed))


def _stand(lines: tuple[float, ...], diameters: tuple[float, ...]) -> tuple[float, ...] | None:
    """Lines for a layer that cannot be symmetric over them: of the choices that keep both
    outermost lines the one with the largest smallest gap.
    """
    between = len(diameters) - 2
    if len(diameters) > len(lines):
        return None
    if between < 0:
        return lines[:1]
    choices = (
        (lines[0], *inner, lines[-1])
        for inner in islice(combinations(lines[1:-1], between), _MOST_CHOICES)
    )
    return max(choices, key=lambda x: min(clear_gaps(x, diameters)))


def _measure(
    section: Section,
    order: Sequence[tuple[str, float]],
    x: tuple[float, ...],
    bottom: float,
    aligned: bool,
) -> PlacedLayer:
    diameters = tuple(diameter for _, diameter in order)
    gaps = clear_gaps(x, diameters)
    required = [section.required_gap(max(pair)) for pair in pairwise(diameters)]
    # The tightest pair is the one with the least to spare, not the one with the least gap.
    pairs = list(zip(gaps, required, strict=True))
    single = (float("inf"), section.required_gap(diameters[0]))
    gap, gap_required = min(pairs, key=lambda pair: pair[0] / pair[1], default=single)
    return PlacedLayer(
        x=x,
        diameters=diameters,
        designations=tuple(name for name, _ in order),
        bottom=bottom,
        smallest_gap=min(gaps, default=float("inf")),
        gap=gap,
        gap_required=gap_required,
        spacing=max((right - left for left, right in pairwise(x)), default=0.0),
        aligned=aligned,
    )


def clear_gaps(x: Sequence[float], diameters: Sequence[float]) -> list[float]:
    """Clear gaps between neighbours.

    Parameters
    ----------
    x : sequence of float
        Bar centres in order. [in or mm]
    diameters : sequence of float
        Bar diameters in the same order. [in or mm]

    Returns
    -------
    list of float
        One gap for each pair of neighbours. [in or mm]
    """
    return [
        right - left - (d_left + d_right) / 2
        for (left, right), (d_left, d_right) in zip(pairwise(x), pairwise(diameters), strict=True)
    ]


def equal_gaps(diameters: Sequence[float], reach: float) -> tuple[float, ...]:
    """Centres of bars with equal clear gaps.

    Parameters
    ----------
    diameters : sequence of float
        Bar diameters, left to right. [in or mm]
    reach : float
        Distance of the corner bars' centres from the centreline. [in or mm]

    Returns
    -------
    tuple of float
        Bar centres from the centreline; a single bar stands on it. [in or mm]
    """
    if len(diameters) == 1:
        return (0.0,)
    inner = sum(diameters) - (diameters[0] + diameters[-1]) / 2
    gap = (2 * reach - inner) / (len(diameters) - 1)
    centres = [-reach]
    for left, right in pairwise(diameters):
        centres.append(centres[-1] + (left + right) / 2 + gap)
    return tuple(centres)


@lru_cache(maxsize=4096)
def stack(lines: tuple[float, ...], diameters: tuple[float, ...]) -> tuple[float, ...] | None:
    """Choose the lines of the layer below that a layer stands on.

    Parameters
    ----------
    lines : tuple of float
        Bar centres of the layer below, left to right. [in or mm]
    diameters : tuple of float
        Bar diameters of the layer, left to right. [in or mm]

    Returns
    -------
    tuple of float or None
        Bar centres, or None where no symmetric choice exists: more bars than lines, an odd
        count over an even one, or lines that are not symmetric themselves. Of choices with the
        same smallest gap the outermost lines win. [in or mm]
    """
    count = len(diameters)
    if count > len(lines) or (count % 2 and len(lines) % 2 == 0):
        return None
    if any(abs(left + right) > _SYMMETRY for left, right in zip(lines, lines[::-1], strict=True)):
        return None
    pairs, centred = count // 2, count % 2 == 1
    if pairs == 0:
        return (0.0,)
    half = lines[: len(lines) // 2]  # left half, the outermost first
    widths = [(left + right) / 2 for left, right in pairwise(diameters[:pairs])]
    # The innermost bar closes with its mirror image, or with the bar at the centre.
    reach, last = (1.0, (diameters[pairs - 1] + diameters[pairs]) / 2) if centred else (2.0, 0.0)
    closing = last if centred else diameters[pairs - 1]

    def outermost(least: float) -> list[int] | None:
        """Lines nearest the corners that leave gaps of at least a value, if any do.

        Taking each line as far out as the gap allows leaves the most room for the rest, so
        this finds a choice if there is one, and of several the outermost.
        """
        chosen = [0]
        for width in widths:
            start = half[chosen[-1]] + width + least
            index = bisect_left(half, start, lo=chosen[-1] + 1)
            if index == len(half):
                return None
            chosen.append(index)
        return chosen if -reach * half[chosen[-1]] - closing >= least else None

    # The largest smallest gap is one of the gaps that two lines can leave.
    values = {-reach * line - closing for line in half}
    for width in set(widths):
        values |= {right - left - width for left, right in combinations(half, 2)}
    gaps = sorted(values)
    too_large = bisect_left(gaps, True, key=lambda gap: outermost(gap - _TIE) is None)
    chosen = outermost(gaps[too_large - 1] - _TIE)
    assert chosen is not None  # the least gap of all can always be left
    left = tuple(half[index] for index in chosen)
    centre = (0.0,) if centred else ()
    return (*left, *centre, *(-value for value in reversed(left)))
