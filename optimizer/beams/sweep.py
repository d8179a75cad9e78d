"""A beam over a range of one span: mass, index and what changes, length by length."""

from __future__ import annotations

import math
import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace

from engine.errors import QuantityError
from engine.units import UnitSystem, parse_quantity
from optimizer.beams.design import BeamDesign, NoDesign, demands_of, finish, reasons, search
from optimizer.beams.frontier import FrontierOfFrame
from optimizer.beams.positions import DrawnBeam, drawn
from optimizer.beams.problem import BeamProblem
from optimizer.beams.respan import changed_positions
from optimizer.errors import JobError
from optimizer.job_messages import quoted, short

Progress = Callable[[str], None]
MOST_LENGTHS = 60
_SLACK = 1e-6
_RANGE = re.compile(r"^(.+?)\.\.(.+?)/(.+)$")


@dataclass(frozen=True, slots=True, kw_only=True)
class SweepPoint:
    """The beam at one length of the span.

    Attributes
    ----------
    length : float
        Length of the span. [in or mm]
    result : BeamDesign or NoDesign
        Best beam.
    changed : tuple of str
        Positions in which it differs from the beam as drawn.
    old_works : bool
        Whether the beam as drawn serves with all positions as they are, lengths apart.
    """

    length: float
    result: BeamDesign | NoDesign
    changed: tuple[str, ...]
    old_works: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Sweep:
    """A beam over a range of one span.

    Attributes
    ----------
    span : str
        Mark of the span.
    old : DrawnBeam
        Beam as drawn.
    points : tuple of SweepPoint
        By growing length.
    """

    span: str
    old: DrawnBeam
    points: tuple[SweepPoint, ...]

    @property
    def ok(self) -> bool:
        """Whether every length has a beam that passes its checks."""
        return all(
            isinstance(point.result, BeamDesign) and point.result.ok for point in self.points
        )


def is_range(text: object) -> bool:
    """Whether a value is written as a range: ``24 ft..32 ft/1 ft``."""
    return isinstance(text, str) and ".." in text


def lengths_of(text: str, system: UnitSystem, option: str) -> tuple[float, ...]:
    """Read a range of lengths.

    Parameters
    ----------
    text : str
        ``24 ft..32 ft/1 ft``: from, to and step.
    system : UnitSystem
        System of the beam.
    option : str
        Option, for messages.

    Returns
    -------
    tuple of float
        Lengths, ascending, both ends included where the step meets the end. [in or mm]

    Raises
    ------
    JobError
        If it is no such range, or has too many lengths.
    """
    match = _RANGE.match(text.strip())
    example = "24 ft..32 ft/1 ft" if system.name == "us" else "7 m..9 m/0.5 m"
    if match is None:
        msg = f"{option}: got {short(quoted(text))}; expected a range such as {example!r}"
        raise JobError(msg)
    plain = "ft" if system.name == "us" else "m"
    try:
        start, end, step = (
            parse_quantity(part.strip(), "length", system, plain) for part in match.groups()
        )
    except QuantityError as error:
        msg = f"{option}: {error}"
        raise JobError(msg) from None
    if not (0.0 < start <= end and step > 0.0):
        msg = f"{option}: got {short(quoted(text))}; allowed: from at most to, and a step above 0"
        raise JobError(msg)
    count = int((end - start) / step + 1e-9) + 1
    if count > MOST_LENGTHS:
        msg = f"{option}: {count} lengths; allowed: up to {MOST_LENGTHS}; hint: a larger step"
        raise JobError(msg)
    return tuple(start + number * step for number in range(count))


def sweep(
    problems: Mapping[float, BeamProblem],
    old: DrawnBeam,
    span: str,
    progress: Progress | None = None,
) -> Sweep:
    """Design a beam for each length of a span.

    Parameters
    ----------
    problems : mapping of float to BeamProblem
        Beam for each length of the span. [in or mm]
    old : DrawnBeam
        Beam as drawn.
    span : str
        Mark of the span.
    progress : callable, optional
        Told what is being done.

    Returns
    -------
    Sweep
        One point for each length.
    """
    points = []
    for length, problem in sorted(problems.items()):
        if progress is not None:
            unit = problem.edition.system.inner["length"]
            progress(f"{span} = {length:g} {unit}")
        result, changed, works = _at_length(problem, old)
        points.append(SweepPoint(length=length, result=result, changed=changed, old_works=works))
    return Sweep(span=span, old=old, points=tuple(points))


def _at_length(
    problem: BeamProblem, old: DrawnBeam
) -> tuple[BeamDesign | NoDesign, tuple[str, ...], bool]:
    """The best beam, of several as good the one with the fewest changes."""
    demands = demands_of(problem)
    found = search(problem, demands)
    frames = [FrontierOfFrame(one, old, frozenset()) for one in found.searches]
    works = any(not isinstance(frame.best(0, math.inf), bool) for frame in frames)
    if found.best is None or found.menu is None or found.choice is None:
        none = NoDesign(
            problem=problem,
            demands=demands,
            reasons=tuple(reasons(found)),
            proved=found.proved,
        )
        return none, (), works
    best = finish(found.best, found.menu, found.choice, proved=found.proved)
    changed = tuple(changed_positions(old, drawn(best)))
    limit = best.cost + 2.0 * _SLACK * max(1.0, best.cost)
    for changes in range(len(changed)):
        for frame in frames:
            answer = frame.best(changes, limit)
            if isinstance(answer, bool):
                continue
            choice, menu, _ = answer
            design = finish(frame.search, menu, choice, proved=found.proved)
            design = replace(design, bound=min(best.bound, design.cost))
            return design, tuple(changed_positions(old, drawn(design))), works
    return best, changed, works
