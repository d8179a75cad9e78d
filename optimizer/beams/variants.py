"""What the model chooses between: bars of one place with their ends, and stirrups of one span."""

from __future__ import annotations

from dataclasses import dataclass
from enum import Enum

from catalogs import Bar
from engine import Layout


class Face(Enum):
    """Face of the beam that bars lie at."""

    BOTTOM = "bottom"
    TOP = "top"


class Role(Enum):
    """What a bar is for."""

    RUN = "run"
    """Runs from support to support, or past the inflection points."""
    STOP = "stop"
    """Ends where it is no longer needed."""
    THROUGH = "through"
    """Runs through the whole beam."""
    HANGER = "hanger"
    """Holds the stirrups where no bar is needed for strength."""
    SKIN = "skin"
    FLANGE = "flange"
    STIRRUP = "stirrup"


class TopKind(Enum):
    """What stands in the top corners of the stirrups between the supports."""

    THROUGH = "through"
    """Bars of the supports run through the whole beam."""
    HANGERS = "hangers"
    """Separate bars, lapped with those of the supports."""


@dataclass(frozen=True, slots=True)
class TopMode:
    """Arrangement of the top face, one for the whole beam.

    Attributes
    ----------
    kind : TopKind
        Through bars or hangers.
    bar : Bar
        Their size.
    """

    kind: TopKind
    bar: Bar

    @property
    def label(self) -> str:
        """As written in lists: ``#6 through`` or ``#4 hangers``."""
        return f"{self.bar.designation} {self.kind.value}"


@dataclass(frozen=True, slots=True, kw_only=True)
class Piece:
    """Equal bars side by side, with their place along the beam.

    Attributes
    ----------
    face : Face
        Face they lie at.
    role : Role
        What they are for.
    bar : Bar
        Size.
    count : int
        Number.
    layer : int
        Layer from the face, from 1.
    start, end : float
        Ends on the beam's axis, to the outside of hooks. [in or mm]
    hook_start, hook_end : bool
        Whether they end in a hook.
    surface : float
        Distance of the bars' surface from the face. [in or mm]
    develop_start, develop_end : float
        Length from each end, or from the outside of its hook, that develops the bar; zero for
        bars that carry no tension. [in or mm]
    """

    face: Face
    role: Role
    bar: Bar
    count: int
    layer: int
    start: float
    end: float
    surface: float
    hook_start: bool = False
    hook_end: bool = False
    develop_start: float = 0.0
    develop_end: float = 0.0

    @property
    def length(self) -> float:
        """Length from end to end, hook legs apart. [in or mm]"""
        return self.end - self.start


@dataclass(frozen=True, slots=True)
class Cut:
    """End of bars in a tension zone and the stirrup spacing that 9.7.3.5 asks for there.

    Attributes
    ----------
    at : float
        Distance from the left face of the span. [in or mm]
    spacing : float
        Largest spacing. [in or mm]
    """

    at: float
    spacing: float


@dataclass(frozen=True, slots=True)
class Need:
    """What bars ask of the stirrups of a span.

    Attributes
    ----------
    span : int
        Index of the span.
    depth : float
        Effective depth that shear is worked out with, rounded down to a step. [in or mm]
    cuts : tuple of Cut
        Ends in tension zones.
    most_spacing : float
        Largest spacing anywhere; infinite for no such limit. [in or mm]
    """

    span: int
    depth: float
    cuts: tuple[Cut, ...]
    most_spacing: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Variant:
    """A layout at one place with the ends of its bars.

    Attributes
    ----------
    layout : Layout
        Bars where all are present.
    run : int
        Bars of the largest size in layer 1 that run on; the others stop.
    mode : TopMode or None
        Arrangement of the top face it belongs to; None at the bottom.
    cost : float
        Placed index or mass of its bars, whichever is to be least. [lb or kg]
    pieces : tuple of Piece
        Bars.
    needs : tuple of Need
        What it asks of the stirrups of its spans.
    inertia : float
        Icr at midspan, or at the support of a cantilever; zero at other supports. [in^4 or mm^4]
    continuous : int
        Bars that have to run on into the next span for integrity, 9.7.7; zero where none have.
    sizes : frozenset of str
        Designations of its bars; follows from the layout.
    key : tuple
        Order of variants that cost the same; follows from the rest.
    """

    layout: Layout
    run: int
    mode: TopMode | None
    cost: float
    pieces: tuple[Piece, ...]
    needs: tuple[Need, ...]
    inertia: float = 0.0
    continuous: int = 0
    sizes: frozenset[str] = frozenset()
    key: tuple[object, ...] = ()

    def __post_init__(self) -> None:
        # Asked for so often that they are kept.
        sizes = frozenset(bar.designation for bar in self.layout.sizes)
        object.__setattr__(self, "sizes", sizes)
        ends = tuple((piece.start, piece.end) for piece in self.pieces)
        key = (round(self.cost, 6), self.layout.label, self.run, ends)
        object.__setattr__(self, "key", key)


@dataclass(frozen=True, slots=True, kw_only=True)
class StirrupPlan:
    """Stirrups of one span: three zones of equal spacing.

    Attributes
    ----------
    span : int
        Index of the span.
    depth : float
        Least effective depth that it is enough for. [in or mm]
    first, last : float
        Distance of the first stirrup from the left face and of the last from the right one; at
        a free end from the tip. [in or mm]
    clear : float
        Clear span. [in or mm]
    spacings : tuple of float
        Spacing at the left end, in the middle and at the right end. [in or mm]
    spaces : tuple of int
        Spaces in each zone; the middle ones are equal and not above their spacing.
    cost : float
        Placed index or mass. [lb or kg]
    """

    span: int
    depth: float
    first: float
    last: float
    clear: float
    spacings: tuple[float, float, float]
    spaces: tuple[int, int, int]
    cost: float

    @property
    def count(self) -> int:
        """Number of stirrups."""
        return sum(self.spaces) + 1

    @property
    def zones(self) -> tuple[tuple[float, float], tuple[float, float], tuple[float, float]]:
        """Start and end of each zone, from the left face. [in or mm]"""
        left = self.first + self.spaces[0] * self.spacings[0]
        right = self.clear - self.last - self.spaces[2] * self.spacings[2]
        return ((0.0, left), (left, right), (right, self.clear))

    @property
    def middle_spacing(self) -> float:
        """True spacing in the middle; zero without spaces there. [in or mm]"""
        (_, _), (start, end), _ = self.zones
        return (end - start) / self.spaces[1] if self.spaces[1] else 0.0

    def spacing_at(self, x: float) -> float:
        """Spacing that counts at a distance from the left face. [in or mm]"""
        (_, left), (_, right), _ = self.zones
        if x <= left and self.spaces[0]:
            return self.spacings[0]
        if x >= right and self.spaces[2]:
            return self.spacings[2]
        return self.spacings[1]

    def is_drawn(self, spacings: tuple[float, float, float], ends: tuple[int, int]) -> bool:
        """Whether it has the spacings and end zones of a plan drawn before."""
        same = all(abs(a - b) < 1e-6 for a, b in zip(self.spacings, spacings, strict=True))
        return same and (self.spaces[0], self.spaces[2]) == ends

    @property
    def key(self) -> tuple[object, ...]:
        """Order of plans that cost the same."""
        return (round(self.cost, 6), self.spacings, self.spaces)
