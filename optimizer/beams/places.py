"""Places of a beam that need bars: the bottom of each span and the top over each support.

A place is seen from the section where its bars work hardest. From there one or two sides run
along the beam; on each the demand is a function of the distance u, so that bottom and top
bars, left and right ends, follow one set of rules.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from engine import Section
from engine.beams.demand import SpanDemand
from engine.beams.spans import Beam, Overhang, Support
from engine.outlines import FloatArray
from optimizer.beams.frames import Frame
from optimizer.beams.variants import Face

_NOTHING = 1e-9  # share of the largest moment of the beam that is no moment
_NOMINAL = 1e-4  # share of it that a place without any moment is designed for


@dataclass(frozen=True, slots=True, kw_only=True)
class Side:
    """One direction from the section where the bars of a place work hardest.

    Attributes
    ----------
    span : int
        Span that the side lies in.
    section : Section
        Section of the span, with the largest moment of this side.
    origin : float
        Place of u = 0 on the beam's axis. [in or mm]
    direction : int
        1 to the right, -1 to the left.
    u : ndarray, shape (n,)
        Distances, ascending from zero. [in or mm]
    demand, service : ndarray, shape (n,)
        Factored and service moment of the place's sign, in size; zero where there is none.
        [lbf*in or N*mm]
    shear : ndarray, shape (n,)
        Vu. [lbf or N]
    ln : float
        Clear span. [in or mm]
    face : float
        Distance of the far face: the support a bottom bar runs to, or the tip of a cantilever;
        for the top over a support the end of its part of the span. [in or mm]
    support : Support or None
        Support at the far face; None at a free tip.
    end_of_beam : bool
        Whether that support is the beam's last.
    beyond : float
        Length of a cantilever beyond it that bars may run into, its cover apart. [in or mm]
    """

    span: int
    section: Section
    origin: float
    direction: int
    u: FloatArray
    demand: FloatArray
    service: FloatArray
    shear: FloatArray
    ln: float
    face: float
    support: Support | None
    end_of_beam: bool
    beyond: float = 0.0

    def at(self, u: float) -> float:
        """Place of a distance on the beam's axis. [in or mm]"""
        return self.origin + self.direction * u


@dataclass(frozen=True, slots=True, kw_only=True)
class Place:
    """Where a layout is needed.

    Attributes
    ----------
    face : Face
        Bottom or top.
    index : int
        Span at the bottom, support at the top.
    mark : str
        For example ``A-B bottom`` or ``B top``.
    left, right : Side or None
        The two sides; None over an end support where the beam ends.
    support : Support or None
        Support of a top place.
    """

    face: Face
    index: int
    mark: str
    left: Side | None
    right: Side | None
    support: Support | None = None

    @property
    def sides(self) -> tuple[Side, ...]:
        """The sides there are."""
        return tuple(side for side in (self.left, self.right) if side is not None)

    @property
    def sections(self) -> tuple[Section, ...]:
        """Different sections that a layout has to pass."""
        own = [side.section for side in self.sides]
        if len(own) == 2 and _like(own[0], own[1]):
            # One section with the larger moments of both stands for the two.
            worst = max(own, key=lambda section: section.demand)
            service = [section.Ms for section in own if section.Ms is not None]
            return (replace(worst, Ms=max(service, key=abs, default=None)),)
        return tuple(own)


def _like(one: Section, other: Section) -> bool:
    """Whether two sections differ in their moments only."""
    return replace(one, mark="", Mu=1.0, Ms=None, clear_span=None) == replace(
        other, mark="", Mu=1.0, Ms=None, clear_span=None
    )


def largest_moment(demands: Sequence[SpanDemand]) -> float:
    """Largest factored moment of the beam in size. [lbf*in or N*mm]"""
    return max(
        max(float(demand.Mu_most.max()), -float(demand.Mu_least.min())) for demand in demands
    )


def places(beam: Beam, frame: Frame, demands: Sequence[SpanDemand]) -> list[Place]:
    """All places of a beam, bottoms first, each from left to right.

    Parameters
    ----------
    beam : Beam
        Beam.
    frame : Frame
        Stirrup, with the sections.
    demands : sequence of SpanDemand
        Envelopes of the spans.

    Returns
    -------
    list of Place
        Bottoms of spans between supports, and tops of supports with hogging moment.
    """
    scale = largest_moment(demands)
    found = []
    for index, span in enumerate(beam.spans):
        if span.overhang is Overhang.NONE:
            found.append(_bottom(beam, frame, demands[index], index, scale))
    for index in range(len(beam.supports)):
        place = _top(beam, frame, demands, index, scale)
        if place is not None:
            found.append(place)
    return found


def _with_moment(section: Section, mark: str, moment: float, service: float) -> Section:
    """The section with a moment; a service moment of another sign says nothing."""
    Ms = service if service * moment > 0.0 else None
    return replace(section, mark=mark, Mu=moment, Ms=Ms)


def _determinate(beam: Beam) -> bool:
    """Whether statics alone give the moments, for the flange rule of 9.6.1.2."""
    free = all(support.stiffness == 0.0 for support in beam.supports)
    return len(beam.supports) == 2 and free


def _bottom(beam: Beam, frame: Frame, demand: SpanDemand, index: int, scale: float) -> Place:
    sagging = np.maximum(demand.Mu_most, 0.0)
    service = np.maximum(demand.Ms_most, 0.0)
    peak = int(np.argmax(demand.Mu_most))
    mark = f"{beam.spans[index].mark} bottom"
    most = max(float(sagging.max()), _NOMINAL * scale)
    plain = replace(frame.sections[index], statically_determinate=_determinate(beam))
    section = _with_moment(plain, mark, most, float(service.max()))
    origin = beam.origins[index] + float(demand.x[peak])
    sides = []
    for direction in (-1, 1):
        part = slice(peak, None, -1) if direction < 0 else slice(peak, None)
        number = beam.left_support(index) if direction < 0 else beam.right_support(index)
        assert number is not None  # the span lies between two supports
        u = np.abs(demand.x[part] - demand.x[peak])
        neighbour = beam.left_span(number) if direction < 0 else beam.right_span(number)
        beyond = 0.0
        if neighbour is not None and beam.spans[neighbour].overhang is not Overhang.NONE:
            beyond = beam.clear_length(neighbour)
        sides.append(
            Side(
                span=index,
                section=section,
                origin=origin,
                direction=direction,
                u=u,
                demand=sagging[part],
                service=service[part],
                shear=demand.Vu[part],
                ln=beam.clear_length(index),
                face=float(u[-1]),
                support=beam.supports[number],
                end_of_beam=neighbour is None
                or beam.spans[neighbour].overhang is not Overhang.NONE,
                beyond=beyond,
            )
        )
    return Place(face=Face.BOTTOM, index=index, mark=mark, left=sides[0], right=sides[1])


def _top(
    beam: Beam, frame: Frame, demands: Sequence[SpanDemand], index: int, scale: float
) -> Place | None:
    mark = f"{beam.supports[index].mark} top"
    left, right = beam.left_span(index), beam.right_span(index)
    sides: dict[int, Side | None] = {-1: None, 1: None}
    for direction, span in ((-1, left), (1, right)):
        if span is not None:
            sides[direction] = _top_side(beam, frame, demands[span], span, direction, mark)
    most = max((float(side.demand.max()) for side in sides.values() if side), default=0.0)
    if most <= _NOTHING * scale:
        return None
    # Bars run through the support: each side is designed for a moment, if only a small one.
    settled: dict[int, Side | None] = {}
    for direction, side in sides.items():
        if side is None:
            settled[direction] = None
            continue
        moment = -max(float(side.demand.max()), _NOMINAL * scale)
        section = _with_moment(side.section, mark, moment, -float(side.service.max()))
        settled[direction] = replace(side, section=section)
    return Place(
        face=Face.TOP,
        index=index,
        mark=mark,
        left=settled[-1],
        right=settled[1],
        support=beam.supports[index],
    )


def _top_side(
    beam: Beam, frame: Frame, demand: SpanDemand, span: int, direction: int, mark: str
) -> Side:
    """One side of a support, as far as its hogging moment falls."""
    hogging = np.maximum(-demand.Mu_least, 0.0)
    service = np.maximum(-demand.Ms_least, 0.0)
    free = beam.spans[span].overhang is not Overhang.NONE
    count = len(demand.x)
    # Where the smallest moment is largest, the demand passes to the other support's bars.
    turn = int(np.argmax(demand.Mu_least))
    if direction > 0:
        part = slice(0, count if free else turn + 1)
    else:
        part = slice(count - 1, None if free or turn == 0 else turn - 1, -1)
    x = demand.x[part]
    start = float(x[0])
    u = np.abs(x - start)
    return Side(
        span=span,
        section=replace(
            frame.sections[span], mark=mark, Mu=-1.0, Ms=None, statically_determinate=free
        ),
        origin=beam.origins[span] + start,
        direction=direction,
        u=u,
        demand=hogging[part],
        service=service[part],
        shear=demand.Vu[part],
        ln=beam.clear_length(span),
        face=float(u[-1]),
        support=None,
        end_of_beam=free,
    )
