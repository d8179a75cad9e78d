"""The schedule of a beam: equal bars under one mark, with shape, length and mass."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence
from dataclasses import dataclass

from catalogs import Bar
from engine.beams.bending import BentBar, closed_stirrup, hooked, straight
from optimizer.beams import stock
from optimizer.beams.frames import Frame, length_unit, round_up
from optimizer.beams.problem import BeamProblem
from optimizer.beams.variants import Face, Piece, Role, StirrupPlan

_LETTERS = {Role.SKIN: "K", Role.FLANGE: "F", Role.HANGER: "H", Role.STIRRUP: "S"}


@dataclass(frozen=True, slots=True, kw_only=True)
class BarMark:
    """One line of the schedule.

    Attributes
    ----------
    mark : str
        ``B1``, ``T2``, ...: bottom, top, hanger (H), skin (K), flange (F), stirrup (S).
    bar : Bar
        Size.
    shape : BentBar
        Shape with its legs.
    count : int
        Number of bars.
    length : float
        Length to cut, rounded up to the job's step. [in or mm]
    mass_each, mass : float
        Mass of one and of all. [lb or kg]
    """

    mark: str
    bar: Bar
    shape: BentBar
    count: int
    length: float
    mass_each: float
    mass: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Schedule:
    """All marks of a beam.

    Attributes
    ----------
    marks : tuple of BarMark
        Lines in order of their marks.
    of_pieces : tuple of str
        Mark of each piece of the design, in its order.
    of_stirrups : tuple of tuple of str
        Marks of the loops of each span's stirrups.
    mass : float
        Mass of all bars. [lb or kg]
    volume : float
        Concrete of the web over its whole depth. [ft^3 or m^3]
    """

    marks: tuple[BarMark, ...]
    of_pieces: tuple[str, ...]
    of_stirrups: tuple[tuple[str, ...], ...]
    mass: float
    volume: float

    @property
    def mass_per_volume(self) -> float:
        """Steel in the concrete. [lb/ft^3 or kg/m^3]"""
        return self.mass / self.volume

    def cutting(self, problem: BeamProblem) -> tuple[stock.CuttingPlan, ...]:
        """Cut all bars from stock.

        Parameters
        ----------
        problem : BeamProblem
            Beam, with its stock lengths.

        Returns
        -------
        tuple of CuttingPlan
            One for each size.
        """
        sizes: dict[str, list[stock.Piece]] = {}
        for item in self.marks:
            piece = stock.Piece(mark=item.mark, length=item.length, count=item.count)
            sizes.setdefault(item.bar.designation, []).append(piece)
        unit = problem.edition.system.inner["length"]
        return stock.cut(sizes, problem.stock, problem.work_limit, unit=unit)


def letter_of(piece: Piece) -> str:
    """Letter that the mark of a bar begins with.

    Parameters
    ----------
    piece : Piece
        Bar with its place.

    Returns
    -------
    str
        For example ``B`` at the bottom.
    """
    face = "B" if piece.face is Face.BOTTOM else "T"
    return _LETTERS.get(piece.role, face)


def shape_of(problem: BeamProblem, piece: Piece) -> BentBar:
    """Shape of a bar.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    piece : Piece
        Bar with its place.

    Returns
    -------
    BentBar
        Straight, or with hooks.
    """
    ends = int(piece.hook_start) + int(piece.hook_end)
    length = round(piece.length, 6)
    if not ends:
        return straight(piece.bar, length)
    return hooked(problem.edition, piece.bar, length, ends)


def schedule_of(
    problem: BeamProblem,
    frame: Frame,
    pieces: Sequence[Piece],
    stirrups: Sequence[StirrupPlan],
) -> Schedule:
    """Number the bars of a beam.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    frame : Frame
        Stirrup and legs.
    pieces : sequence of Piece
        Every bar but the stirrups.
    stirrups : sequence of StirrupPlan
        Stirrups of each span.

    Returns
    -------
    Schedule
        Equal bars under one mark. Within a letter thicker and longer bars come first.
    """
    unit = length_unit(problem)
    counts: defaultdict[tuple[str, BentBar], int] = defaultdict(int)
    keys: list[tuple[str, BentBar]] = []
    for piece in pieces:
        key = (letter_of(piece), shape_of(problem, piece))
        counts[key] += piece.count
        keys.append(key)
    loop_keys: list[list[tuple[str, BentBar]]] = []
    for plan in stirrups:
        own = []
        for width, height in frame.loops(plan.span):
            shape = closed_stirrup(problem.edition, frame.stirrup, width, height)
            key = (_LETTERS[Role.STIRRUP], shape)
            counts[key] += plan.count
            own.append(key)
        loop_keys.append(own)
    names: dict[tuple[str, BentBar], str] = {}
    marks = []
    numbers: defaultdict[str, int] = defaultdict(int)
    order = "BTHKFS"
    for key in sorted(
        counts,
        key=lambda item: (
            order.index(item[0]),
            -item[1].bar.diameter,
            -item[1].cut_length,
            item[1].legs,
        ),
    ):
        letter, shape = key
        numbers[letter] += 1
        names[key] = f"{letter}{numbers[letter]}"
        length = round_up(shape.cut_length, problem.length_step)
        each = shape.bar.mass * length / unit
        marks.append(
            BarMark(
                mark=names[key],
                bar=shape.bar,
                shape=shape,
                count=counts[key],
                length=length,
                mass_each=each,
                mass=each * counts[key],
            )
        )
    volume = sum(span.outline.web * span.outline.depth * span.length for span in problem.beam.spans)
    return Schedule(
        marks=tuple(marks),
        of_pieces=tuple(names[key] for key in keys),
        of_stirrups=tuple(tuple(names[key] for key in own) for own in loop_keys),
        mass=sum(item.mass for item in marks),
        volume=volume / unit**3,
    )
