"""Marks of a beam as the model counts them, where their number is limited.

Bars of one letter, size, shape and length share a mark, whatever place they belong to. All
lengths are known with the choice but those of hangers, which lie between the long bars of two
supports: their length is linear in what is chosen there.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from engine.beams.bending import BentBar, closed_stirrup
from optimizer.beams.frames import Frame
from optimizer.beams.modes import ModeBars, ModeBuilder
from optimizer.beams.places import Place
from optimizer.beams.problem import BeamProblem
from optimizer.beams.schedule import letter_of, shape_of
from optimizer.beams.variants import Face, Piece, Role, TopKind, Variant

LENGTH_SCALE = 1000
"""Whole units of the model in one unit of length. [-]"""

Key = tuple[str, BentBar]


@dataclass(frozen=True, slots=True, kw_only=True)
class Hung:
    """Hangers of one span: their length is `base` less what the long bars take off.

    Attributes
    ----------
    base : int
        Length from face to face with laps. [in or mm, times LENGTH_SCALE]
    taken : tuple of (int, tuple of int)
        Place of a support and what each of its variants takes off.
    """

    base: int
    taken: tuple[tuple[int, tuple[int, ...]], ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class MarkRule:
    """Most marks, and the marks that each choice brings.

    Attributes
    ----------
    most : int
        Most marks of the beam.
    places : tuple of tuple of tuple
        Marks of each variant of each place.
    modes : tuple of tuple
        Marks of each arrangement of the top face, hangers apart.
    always : frozenset
        Marks that the beam has in any case.
    hung : tuple of Hung
        Spans with hangers, under arrangements that have them.
    fixed_hangers : tuple of tuple of int
        For each arrangement lengths of straight hangers of its size that the beam has anyhow.
    """

    most: int
    places: tuple[tuple[tuple[Key, ...], ...], ...]
    modes: tuple[tuple[Key, ...], ...]
    always: frozenset[Key]
    hung: tuple[Hung, ...]
    fixed_hangers: tuple[tuple[int, ...], ...]


def mark_rule(
    problem: BeamProblem,
    frame: Frame,
    places: Sequence[Place],
    chosen: Sequence[Sequence[Variant]],
    modes: Sequence[ModeBars],
    hangers: ModeBuilder,
    fixed: Sequence[Piece],
) -> MarkRule | None:
    """Marks of everything that a menu offers.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    frame : Frame
        Stirrup and legs.
    places : sequence of Place
        Places.
    chosen : sequence of sequence of Variant
        Variants offered at each.
    modes : sequence of ModeBars
        Arrangements of the top face.
    hangers : ModeBuilder
        Knows the length of hangers.
    fixed : sequence of Piece
        Bars that no choice depends on.

    Returns
    -------
    MarkRule or None
        None where the number of marks is not limited.
    """
    if problem.most_marks is None:
        return None

    def keys(pieces: Sequence[Piece]) -> tuple[Key, ...]:
        # Each once, in the order of the bars: the model is built the same every time.
        found = [(letter_of(piece), shape_of(problem, piece)) for piece in pieces]
        return tuple(dict.fromkeys(found))

    loops = frozenset(
        ("S", closed_stirrup(problem.edition, frame.stirrup, width, height))
        for span in range(len(problem.beam.spans))
        for width, height in frame.loops(span)
    )
    held = [piece for piece in fixed if piece.role is Role.HANGER]
    return MarkRule(
        most=problem.most_marks,
        places=tuple(tuple(keys(item.pieces) for item in variants) for variants in chosen),
        modes=tuple(keys(item.pieces) for item in modes),
        always=frozenset(keys(fixed)) | loops,
        hung=tuple(_hung(problem, span, places, chosen, hangers) for span in hangers.hung()),
        fixed_hangers=tuple(
            tuple(
                _whole(piece.length)
                for piece in held
                if item.mode.kind is TopKind.HANGERS and piece.bar == item.mode.bar
            )
            for item in modes
        ),
    )


def _whole(length: float) -> int:
    return round(length * LENGTH_SCALE)


def _hung(
    problem: BeamProblem,
    span: int,
    places: Sequence[Place],
    chosen: Sequence[Sequence[Variant]],
    hangers: ModeBuilder,
) -> Hung:
    beam = problem.beam
    origin = beam.origins[span]
    start, end = (origin + face for face in beam.clear_range(span))
    taken = []
    for support, at_start in ((beam.left_support(span), True), (beam.right_support(span), False)):
        for number, place in enumerate(places):
            if place.face is not Face.TOP or place.index != support:
                continue
            reaches = []
            for variant in chosen[number]:
                long = [piece for piece in variant.pieces if piece.role is Role.RUN]
                past = 0.0
                if long:
                    past = long[0].end - start if at_start else end - long[0].start
                reaches.append(_whole(past))
            taken.append((number, tuple(reaches)))
    return Hung(base=_whole(hangers.hanger_length(span, 0.0, 0.0)), taken=tuple(taken))
