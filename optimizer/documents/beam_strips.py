"""An elevation in strips: which spans stand side by side, and which bar lies in which lane."""

from __future__ import annotations

from dataclasses import dataclass

from engine.beams.spans import Beam, Overhang
from optimizer.beams.design import BeamDesign
from optimizer.beams.variants import Face, Piece

_MOST_SPANS = 3  # between supports, in one strip
_APART = 1e-6


@dataclass(frozen=True, slots=True, kw_only=True)
class Strip:
    """Spans drawn side by side.

    Attributes
    ----------
    spans : range
        Indices of the spans.
    start, end : float
        Ends on the beam's axis, with the supports at both ends. [in or mm]
    """

    spans: range
    start: float
    end: float

    @property
    def length(self) -> float:
        """Length on the axis. [in or mm]"""
        return self.end - self.start


def strips_of(beam: Beam) -> list[Strip]:
    """Part a beam into strips of a few spans, as equal as they go.

    Parameters
    ----------
    beam : Beam
        Beam.

    Returns
    -------
    list of Strip
        From left to right; cantilevers stay with the span beside them.
    """
    inner = [index for index, span in enumerate(beam.spans) if span.overhang is Overhang.NONE]
    count = -(-len(inner) // _MOST_SPANS)
    size, larger = divmod(len(inner), count)
    strips = []
    first = 0
    for number in range(count):
        last = first + size + (1 if number < larger else 0)
        start = 0 if number == 0 else inner[first]
        end = len(beam.spans) if number == count - 1 else inner[last - 1] + 1
        strips.append(_strip(beam, range(start, end)))
        first = last
    return strips


def _strip(beam: Beam, spans: range) -> Strip:
    start = beam.origins[spans[0]]
    end = beam.origins[spans[-1]] + beam.spans[spans[-1]].length
    left, right = beam.left_support(spans[0]), beam.right_support(spans[-1])
    # Half a support's width beyond its centreline shows all of it.
    before = 0.0 if left is None else beam.supports[left].width / 2.0
    after = 0.0 if right is None else beam.supports[right].width / 2.0
    return Strip(spans=spans, start=start - before, end=end + after)


def centrelines(beam: Beam) -> list[float]:
    """Centrelines of the supports on the beam's axis. [in or mm]"""
    found = []
    for number in range(len(beam.supports)):
        right = beam.right_span(number)
        if right is not None:
            found.append(beam.origins[right])
        else:
            left = number + beam.first_support - 1
            found.append(beam.origins[left] + beam.spans[left].length)
    return found


def nearest_support(beam: Beam, at: float) -> int:
    """Index of the support whose centreline is nearest to a place on the axis."""
    return min(enumerate(centrelines(beam)), key=lambda item: (abs(item[1] - at), item[0]))[0]


def pieces_in(design: BeamDesign, strip: Strip, face: Face) -> list[tuple[Piece, str]]:
    """Bars of a face that a strip shows.

    Parameters
    ----------
    design : BeamDesign
        Design.
    strip : Strip
        Strip.
    face : Face
        Face of the beam.

    Returns
    -------
    list of (Piece, str)
        Bars and their marks, in the order of the design.
    """
    return [
        (piece, mark)
        for piece, mark in zip(design.pieces, design.schedule.of_pieces, strict=True)
        if piece.face is face
        and piece.end > strip.start + _APART
        and piece.start < strip.end - _APART
    ]


def lanes(extents: list[tuple[float, float]]) -> list[int]:
    """Give each extent the first lane in which it touches no other.

    Parameters
    ----------
    extents : list of (float, float)
        Start and end of what stands there. [px, in or mm]

    Returns
    -------
    list of int
        Lane of each, from 0.
    """
    taken: list[list[tuple[float, float]]] = []
    found = []
    for start, end in extents:
        free = (
            number
            for number, lane in enumerate(taken)
            if all(end <= low or start >= high for low, high in lane)
        )
        number = next(free, len(taken))
        if number == len(taken):
            taken.append([])
        taken[number].append((start, end))
        found.append(number)
    return found
