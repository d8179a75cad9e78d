"""A beam over supports as its analysis sees it: spans, supports and loads.

Lengths run from left to right. Each span has its own axis from the centreline of its left
support (a cantilever at the left end: from its tip) to the centreline of its right support
(a cantilever at the right end: to its tip).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import Enum

from engine.errors import OutOfRangeError
from engine.outlines import Outline

FIXED = math.inf
"""Stiffness of a support that does not rotate."""


class LoadCase(Enum):
    """Source of a load, for the combinations of 5.3.1."""

    DEAD = "dead"
    LIVE = "live"


class SupportKind(Enum):
    """What a beam rests on or frames into."""

    COLUMN = "column"
    WALL = "wall"
    GIRDER = "girder"


class Overhang(Enum):
    """Whether a span is supported at both ends or hangs over one support."""

    NONE = "none"
    LEFT = "left"
    """Free at its left end: the first span of the beam."""
    RIGHT = "right"
    """Free at its right end: the last span."""


@dataclass(frozen=True, slots=True, kw_only=True)
class UniformLoad:
    """A uniform load over a part of a span, downwards positive.

    Attributes
    ----------
    case : LoadCase
        Dead or live.
    intensity : float
        Force per length. [lbf/in or N/mm]
    start, end : float
        Where it begins and ends on the span's axis. [in or mm]
    """

    case: LoadCase
    intensity: float
    start: float
    end: float


@dataclass(frozen=True, slots=True, kw_only=True)
class PointLoad:
    """A force at one place of a span, downwards positive.

    Attributes
    ----------
    case : LoadCase
        Dead or live.
    force : float
        Size. [lbf or N]
    at : float
        Place on the span's axis. [in or mm]
    """

    case: LoadCase
    force: float
    at: float


Load = UniformLoad | PointLoad


@dataclass(frozen=True, slots=True, kw_only=True)
class Support:
    """A support.

    Attributes
    ----------
    mark : str
        Name on the drawing.
    width : float
        Width along the beam. [in or mm]
    kind : SupportKind
        Column, wall or girder.
    stiffness : float
        Moment per rotation that the columns above and below add: 0 for a free bearing,
        infinite for a fixed end. [lbf*in or N*mm, per rad]
    ties : bool
        Whether ties of the support enclose hooks that end in it as 25.4.3 asks: Ath of at least
        0.4 Ahs in ACI 318-19, at most 3 db apart along ldh in ACI 318-14.
    """

    mark: str
    width: float
    kind: SupportKind
    stiffness: float = 0.0
    ties: bool = False

    @property
    def compresses(self) -> bool:
        """Whether its reaction compresses the end of the beam, 9.4.3.2 (a)."""
        return self.kind is not SupportKind.GIRDER


@dataclass(frozen=True, slots=True, kw_only=True)
class Span:
    """A span or cantilever of constant section.

    Attributes
    ----------
    mark : str
        ``"A-B"``, or ``"-A"`` and ``"D-"`` for a cantilever at the left or right end.
    length : float
        Between centrelines of supports, or from centreline to tip. [in or mm]
    outline : Outline
        Concrete outline.
    loads : tuple of Load
        All loads on it, its own weight included.
    overhang : Overhang
        Whether it is a cantilever.
    """

    mark: str
    length: float
    outline: Outline
    loads: tuple[Load, ...]
    overhang: Overhang = Overhang.NONE

    @property
    def gross_inertia(self) -> float:
        """Second moment Ig of the concrete outline about its centroid. [in^4 or mm^4]"""
        strips = self.outline.profile(sagging=True).strips
        upper, area, first, second = 0.0, 0.0, 0.0, 0.0
        for width, height in strips:
            centre = upper + height / 2.0
            area += width * height
            first += width * height * centre
            second += width * height**3 / 12.0 + width * height * centre**2
            upper += height
        return second - first**2 / area


@dataclass(frozen=True, slots=True, kw_only=True)
class Beam:
    """A beam over one or more spans.

    Attributes
    ----------
    spans : tuple of Span
        From left to right, cantilevers included.
    supports : tuple of Support
        From left to right: one more than the spans that are no cantilevers.

    Raises
    ------
    OutOfRangeError
        If spans and supports do not match, a length is no length, or a load lies outside its
        span.
    """

    spans: tuple[Span, ...]
    supports: tuple[Support, ...]

    def __post_init__(self) -> None:
        inner = [span for span in self.spans if span.overhang is Overhang.NONE]
        if not inner:
            msg = "none between two supports; allowed: one or more"
            raise OutOfRangeError(msg, what="span")
        if len(self.supports) != len(inner) + 1:
            msg = f"{len(self.supports)} for {len(inner)} spans; allowed: one more than spans"
            raise OutOfRangeError(msg, what="support")
        for number, span in enumerate(self.spans):
            if span.overhang is Overhang.LEFT and number != 0:
                msg = f"{span.mark} hangs over at the left; allowed: the first span only"
                raise OutOfRangeError(msg, what="span")
            if span.overhang is Overhang.RIGHT and number != len(self.spans) - 1:
                msg = f"{span.mark} hangs over at the right; allowed: the last span only"
                raise OutOfRangeError(msg, what="span")
            if self.clear_range(number)[1] <= self.clear_range(number)[0]:
                msg = f"{span.mark}: {span.length:g} leaves nothing between its supports"
                raise OutOfRangeError(msg, what="length")
            self._check_loads(span)

    @staticmethod
    def _check_loads(span: Span) -> None:
        for load in span.loads:
            ends = (load.at, load.at) if isinstance(load, PointLoad) else (load.start, load.end)
            size = load.force if isinstance(load, PointLoad) else load.intensity
            if not all(math.isfinite(value) for value in (*ends, size)):
                msg = f"{span.mark}: no finite number; allowed: finite numbers"
                raise OutOfRangeError(msg, what="load")
            inside = -1e-9 <= ends[0] <= ends[1] <= span.length * (1 + 1e-12) + 1e-9
            if not inside or (isinstance(load, UniformLoad) and ends[0] == ends[1]):
                where = f"{ends[0]:g} to {ends[1]:g}" if ends[0] != ends[1] else f"{ends[0]:g}"
                msg = f"{span.mark}: at {where}; allowed: within 0 to {span.length:g}"
                raise OutOfRangeError(msg, what="load")

    @property
    def first_support(self) -> int:
        """1 if the beam starts with a cantilever, else 0: spans before the first support."""
        return 1 if self.spans[0].overhang is Overhang.LEFT else 0

    def left_support(self, span: int) -> int | None:
        """Support at the left end of a span.

        Parameters
        ----------
        span : int
            Index of the span.

        Returns
        -------
        int or None
            Index of the support; None at a free end.
        """
        index = span - self.first_support
        return index if 0 <= index < len(self.supports) else None

    def right_support(self, span: int) -> int | None:
        """Support at the right end of a span.

        Parameters
        ----------
        span : int
            Index of the span.

        Returns
        -------
        int or None
            Index of the support; None at a free end.
        """
        index = span - self.first_support + 1
        return index if 0 <= index < len(self.supports) else None

    def left_span(self, support: int) -> int | None:
        """Span that ends at a support from the left.

        Parameters
        ----------
        support : int
            Index of the support.

        Returns
        -------
        int or None
            Index of the span; None at the beam's end.
        """
        index = support + self.first_support - 1
        return index if 0 <= index < len(self.spans) else None

    def right_span(self, support: int) -> int | None:
        """Span that starts at a support.

        Parameters
        ----------
        support : int
            Index of the support.

        Returns
        -------
        int or None
            Index of the span; None at the beam's end.
        """
        index = support + self.first_support
        return index if 0 <= index < len(self.spans) else None

    def clear_range(self, span: int) -> tuple[float, float]:
        """Faces of the supports on the axis of a span; a free end is its own face.

        Parameters
        ----------
        span : int
            Index of the span.

        Returns
        -------
        tuple of float
            Left and right end of the clear span. [in or mm]
        """
        left, right = self.left_support(span), self.right_support(span)
        start = 0.0 if left is None else self.supports[left].width / 2.0
        end = self.spans[span].length
        return start, end if right is None else end - self.supports[right].width / 2.0

    def clear_length(self, span: int) -> float:
        """Length of a span between the faces of its supports.

        Parameters
        ----------
        span : int
            Index of the span.

        Returns
        -------
        float
            Clear span ln. [in or mm]
        """
        start, end = self.clear_range(span)
        return end - start

    @property
    def origins(self) -> tuple[float, ...]:
        """Place of each span's axis on the beam's own, which starts at its left end. [in or mm]"""
        starts, total = [], 0.0
        for span in self.spans:
            starts.append(total)
            total += span.length
        return tuple(starts)
