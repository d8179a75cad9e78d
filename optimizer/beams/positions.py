"""Positions of a beam: what can stay or change by itself, and the bars of each.

A position is the bottom of a span, the top over a support, the stirrups of a span, or the
arrangement of the top face. It stays as it was if its layout stays, with the bars that run on
(a place); if size, legs, spacings and end zones stay (stirrups); if kind and size stay (top
face). Lengths follow the span and the moments: they may change where the position stays.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from engine.beams.spans import Beam
from optimizer.beams.design import BeamDesign
from optimizer.beams.frames import Frame
from optimizer.beams.variants import Face, Piece, Role, StirrupPlan, TopMode, Variant

TOP = "top bars between supports"
"""Name of the position of the arrangement of the top face."""
OTHERS = "other bars"
"""Bars that follow from the outline: skin, flange, bottom of cantilevers."""


def stirrups_mark(beam: Beam, span: int) -> str:
    """Name of the position of a span's stirrups."""
    return f"{beam.spans[span].mark} stirrups"


@dataclass(frozen=True, slots=True, kw_only=True)
class PlaceState:
    """A place as drawn.

    Attributes
    ----------
    layers : tuple of str
        Layout, layer 1 first.
    run : int
        Bars of the largest size in layer 1 that run on.
    """

    layers: tuple[str, ...]
    run: int

    @classmethod
    def of(cls, variant: Variant) -> PlaceState:
        """State of a variant."""
        layers = tuple(layer.label for layer in variant.layout.layers)
        return cls(layers=layers, run=variant.run)

    @property
    def label(self) -> str:
        """As written in tables: ``4 #8 / 2 #8, 2 run on``."""
        return f"{' / '.join(self.layers)}, {self.run} run on"


@dataclass(frozen=True, slots=True, kw_only=True)
class StirrupState:
    """The stirrups of a span as drawn.

    Attributes
    ----------
    size : str
        Designation.
    legs : int
        Legs.
    spacings : tuple of float
        Spacing at the left end, in the middle and at the right end. [in or mm]
    ends : tuple of int
        Spaces in the end zones.
    """

    size: str
    legs: int
    spacings: tuple[float, float, float]
    ends: tuple[int, int]

    @classmethod
    def of(cls, frame: Frame, plan: StirrupPlan) -> StirrupState:
        """State of a plan."""
        return cls(
            size=frame.stirrup.designation,
            legs=frame.legs,
            spacings=plan.spacings,
            ends=(plan.spaces[0], plan.spaces[2]),
        )

    @property
    def label(self) -> str:
        """As written in tables: ``#3, 2 legs, 5 at 4, then 10, 5 at 4``."""
        left, middle, right = (f"{spacing:g}" for spacing in self.spacings)
        start = f"{self.ends[0]} at {left}, then " if self.ends[0] else ""
        end = f", {self.ends[1]} at {right}" if self.ends[1] else ""
        return f"{self.size}, {self.legs} legs, {start}{middle}{end}"


@dataclass(frozen=True, slots=True, kw_only=True)
class TopState:
    """The arrangement of the top face as drawn.

    Attributes
    ----------
    kind : str
        ``through`` or ``hangers``.
    size : str
        Designation.
    """

    kind: str
    size: str

    @classmethod
    def of(cls, mode: TopMode) -> TopState:
        """State of an arrangement."""
        return cls(kind=mode.kind.value, size=mode.bar.designation)

    @property
    def label(self) -> str:
        """As written in tables: ``#6 through``."""
        return f"{self.size} {self.kind}"


@dataclass(frozen=True, slots=True, kw_only=True)
class DrawnBars:
    """Equal bars of one position under their mark.

    Attributes
    ----------
    position : str
        Position they belong to.
    part : str
        What they are in it, the same before and after a change: role, layer and number.
    mark, size, shape : str
        Mark, designation and shape in words.
    count : int
        Number.
    length : float
        Cut length. [in or mm]
    """

    position: str
    part: str
    mark: str
    size: str
    shape: str
    count: int
    length: float


@dataclass(frozen=True, slots=True, kw_only=True)
class DrawnBeam:
    """A beam as drawn: the state of every position, and its bars.

    Attributes
    ----------
    places : mapping of str to PlaceState
        By mark of the place.
    stirrups : mapping of str to StirrupState
        By name of the position.
    top : TopState
        Arrangement of the top face.
    bars : tuple of DrawnBars
        All bars.
    cost, mass : float
        Placed index or mass, and mass. [lb or kg]
    """

    places: Mapping[str, PlaceState]
    stirrups: Mapping[str, StirrupState]
    top: TopState
    bars: tuple[DrawnBars, ...]
    cost: float
    mass: float

    @property
    def positions(self) -> dict[str, PlaceState | StirrupState | TopState]:
        """State of every position by its name."""
        return {**self.places, **self.stirrups, TOP: self.top}


def drawn(design: BeamDesign) -> DrawnBeam:
    """A design as drawn.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    DrawnBeam
        Its positions and bars.
    """
    beam = design.problem.beam
    return DrawnBeam(
        places={
            place.mark: PlaceState.of(variant)
            for place, variant in zip(design.places, design.chosen, strict=True)
        },
        stirrups={
            stirrups_mark(beam, plan.span): StirrupState.of(design.frame, plan)
            for plan in design.stirrups
        },
        top=TopState.of(design.top),
        bars=tuple(_bars(design)),
        cost=design.cost,
        mass=design.schedule.mass,
    )


def _bars(design: BeamDesign) -> list[DrawnBars]:
    lines = {item.mark: item for item in design.schedule.marks}
    owners: list[str] = []
    for place, variant in zip(design.places, design.chosen, strict=True):
        owners += [place.mark] * len(variant.pieces)
    rest = design.pieces[len(owners) :]
    owners += [TOP if _of_top_face(piece) else OTHERS for piece in rest]
    found = []
    numbers: dict[str, int] = {}

    def add(position: str, part: str, mark: str, count: int) -> None:
        key = f"{position} {part}"
        numbers[key] = numbers.get(key, 0) + 1
        item = lines[mark]
        found.append(
            DrawnBars(
                position=position,
                part=f"{part} {numbers[key]}",
                mark=mark,
                size=item.bar.designation,
                shape=item.shape.shape.value,
                count=count,
                length=item.length,
            )
        )

    for piece, position, mark in zip(design.pieces, owners, design.schedule.of_pieces, strict=True):
        add(position, _part(piece), mark, piece.count)
    for plan, marks in zip(design.stirrups, design.schedule.of_stirrups, strict=True):
        for mark in marks:
            add(stirrups_mark(design.problem.beam, plan.span), "loop", mark, plan.count)
    return found


def _of_top_face(piece: Piece) -> bool:
    """Whether bars belong to the arrangement of the top face."""
    return piece.face is Face.TOP and piece.role in (Role.THROUGH, Role.HANGER)


def _part(piece: Piece) -> str:
    return f"{piece.face.value} {piece.role.value} layer {piece.layer}"
