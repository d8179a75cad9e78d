"""Bars pulled out of an elevation: where each lies and where its texts stand beside it."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from engine import Edition
from optimizer.beams.design import BeamDesign
from optimizer.beams.variants import Piece
from optimizer.beams.words import length_text
from optimizer.documents.beam_strips import Strip, centrelines, nearest_support
from optimizer.documents.wording import visible

_STUB = 2.8  # what is shown of a bar that goes on in the next strip, in gaps between texts
_SAME = 1e-6


@dataclass(frozen=True, slots=True, kw_only=True)
class PulledEnd:
    """One end of a bar and its distance from the nearest centreline of a support.

    Attributes
    ----------
    column : float
        Where the bar ends on the drawing.
    line : float
        Where the centreline is.
    outwards : float
        1 at a right end, -1 at a left one.
    text : str
        The distance.
    inside : bool
        Whether the text has room between the end and the centreline.
    """

    column: float
    line: float
    outwards: float
    text: str
    inside: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class PulledBar:
    """A bar with its texts.

    Attributes
    ----------
    piece : Piece
        Bar.
    start, end : float
        Where its line begins and ends on the drawing.
    cut_start, cut_end : bool
        Whether it goes on beyond the strip.
    label : str
        Number, size and mark.
    ends : tuple of PulledEnd
        Ends that the strip shows.
    extent : tuple of float
        Room taken with all texts.
    """

    piece: Piece
    start: float
    end: float
    cut_start: bool
    cut_end: bool
    label: str
    ends: tuple[PulledEnd, ...]
    extent: tuple[float, float]


def set_out(edition: Edition, value: float) -> str:
    """Length as drawings write it: ``27'-6 1/2"`` or, in millimetres, ``8235``."""
    return length_text(edition, value).removesuffix(" mm")


def pulled_bar(
    design: BeamDesign,
    strip: Strip,
    piece: Piece,
    mark: str,
    *,
    x: Callable[[float], float],
    letter: float,
    past: float,
) -> PulledBar:
    """Lay a pulled-out bar out.

    Parameters
    ----------
    design : BeamDesign
        Design.
    strip : Strip
        Strip of the elevation.
    piece : Piece
        Bar.
    mark : str
        Its mark.
    x : callable
        Column of a place on the beam's axis.
    letter, past : float
        Width of a letter and gap between texts, as on the drawing.

    Returns
    -------
    PulledBar
        The bar with its texts.
    """
    cut_start, cut_end = piece.start < strip.start - _SAME, piece.end > strip.end + _SAME
    start = x(strip.start) - _STUB * past if cut_start else x(piece.start)
    end = x(strip.end) + _STUB * past if cut_end else x(piece.end)
    label = visible(f"{piece.count} {piece.bar.designation} {mark}")
    ends = []
    if not cut_start:
        ends.append(_end(design, strip, piece.start, -1.0, x, letter, past))
    if not cut_end:
        ends.append(_end(design, strip, piece.end, 1.0, x, letter, past))
    low, high = start, end
    for item in ends:
        reach = item.column + item.outwards * (past + letter * len(item.text))
        places = (item.line, item.column) if item.inside else (reach,)
        low, high = min(low, *places), max(high, *places)
    middle, half = (start + end) / 2.0, letter * len(label) / 2.0
    return PulledBar(
        piece=piece,
        start=start,
        end=end,
        cut_start=cut_start,
        cut_end=cut_end,
        label=label,
        ends=tuple(ends),
        extent=(min(low, middle - half) - past, max(high, middle + half) + past),
    )


def _end(
    design: BeamDesign,
    strip: Strip,
    place: float,
    outwards: float,
    x: Callable[[float], float],
    letter: float,
    past: float,
) -> PulledEnd:
    beam = design.problem.beam
    centre = centrelines(beam)[nearest_support(beam, place)]
    text = set_out(design.edition, abs(place - centre))
    seen = strip.start - _SAME <= centre <= strip.end + _SAME
    room = abs(x(place) - x(centre))
    return PulledEnd(
        column=x(place),
        line=x(centre),
        outwards=outwards,
        text=text,
        inside=seen and room > letter * len(text) + 2.0 * past,
    )
