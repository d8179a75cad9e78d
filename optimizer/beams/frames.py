"""Stirrup size and legs: what is settled before bars are chosen, one frame at a time.

The size of the stirrup moves every bar, and its legs say how many bars run along each face.
So the beam is solved once for each pair, and the best of all is taken.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

from catalogs import Bar
from engine import Section
from engine.beams.bending import closed_stirrup
from engine.beams.shear import least_legs, spacing_across, usable_yield
from engine.errors import OutOfRangeError
from optimizer.beams.problem import BeamProblem
from optimizer.problem import Ranking
from optimizer.scoring import steel_per_bar

_MOST_LEGS = 8


def per_length(bar: Bar, ranking: Ranking) -> float:
    """What one bar of a size costs in the value that is to be least.

    Parameters
    ----------
    bar : Bar
        Size.
    ranking : Ranking
        Order and constants.

    Returns
    -------
    float
        Mass, or the index of steel and piece. [lb/ft or kg/m]
    """
    if ranking.by == "lightest":
        return bar.mass
    return steel_per_bar(bar, ranking) + ranking.per_bar


def length_unit(problem: BeamProblem) -> float:
    """Inner units in the length that masses count by: 12 in a foot, 1000 mm a metre."""
    return 12.0 if problem.edition.units == "us" else 1000.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Frame:
    """One stirrup size with a number of legs.

    Attributes
    ----------
    stirrup : Bar
        Size.
    legs : int
        Legs that cross the section, even.
    sections : tuple of Section
        Sections of the spans with this stirrup.
    """

    stirrup: Bar
    legs: int
    sections: tuple[Section, ...]

    @property
    def label(self) -> str:
        """As written in lists: ``#3, 2 legs``."""
        return f"{self.stirrup.designation}, {self.legs} legs"

    @property
    def leg_area(self) -> float:
        """Area Av of all legs. [in^2 or mm^2]"""
        return self.legs * self.stirrup.area

    def loops(self, span: int) -> tuple[tuple[float, float], ...]:
        """Out-to-out width and height of the closed loops of one set. [in or mm]

        The outer loop follows the cover; each further pair of legs is an inner loop that takes
        an equal part of the width.
        """
        section = self.sections[span]
        width = section.outline.web - 2.0 * section.cover
        height = section.outline.depth - 2.0 * section.cover
        inner = width / (self.legs - 1)
        return ((width, height), *(((inner, height),) * (self.legs // 2 - 1)))

    def set_length(self, span: int, step: float) -> float:
        """Cut length of all loops of one set, each rounded up to a step. [in or mm]"""
        edition = self.sections[span].edition
        total = 0.0
        for width, height in self.loops(span):
            total += round_up(closed_stirrup(edition, self.stirrup, width, height).cut_length, step)
        return total


def round_up(value: float, step: float) -> float:
    """Round a length up to a step, apart from rounding of floating point. [in or mm]"""
    return step * -(-(value - 1e-6) // step)


def frames(problem: BeamProblem) -> list[Frame]:
    """Frames worth a try.

    Parameters
    ----------
    problem : BeamProblem
        Beam.

    Returns
    -------
    list of Frame
        For each stirrup size the least number of legs that 9.7.6.2.2 permits at the full depth
        of the section, and two more; only even numbers, so that loops close. Loops too narrow
        to be bent are left out.
    """
    found = []
    for stirrup in problem.stirrups:
        sections = tuple(replace(section, stirrup=stirrup) for section in problem.sections)
        least = 2
        for section in sections:
            width = section.outline.web - 2.0 * section.cover - stirrup.diameter
            limit = spacing_across(
                section.concrete, section.outline.web, section.outline.depth, 0.0
            )
            least = max(least, least_legs(width, limit))
        least += least % 2
        found += [
            (more, Frame(stirrup=stirrup, legs=least + more, sections=sections))
            for more in (0, 2)
            if least + more <= _MOST_LEGS
        ]
    # Few legs are usual: what they cost lets the others end early.
    some = [frame for _, frame in sorted(found, key=lambda item: item[0])]
    return [frame for frame in some if _can_be_bent(frame, problem.length_step)]


def _can_be_bent(frame: Frame, step: float) -> bool:
    """Whether the inner loops leave room for their bends: narrow webs take two legs only."""
    try:
        for span in range(len(frame.sections)):
            frame.set_length(span, step)
    except OutOfRangeError:
        return False
    return True


def stirrup_yield(problem: BeamProblem) -> float:
    """Yield strength fyt that counts in shear, 20.2.2.4. [psi or MPa]"""
    return usable_yield(problem.edition, problem.stirrup_steel.fy)
