"""A beam in words: lengths as they are set out, shapes, and what is proved."""

from __future__ import annotations

import math

from engine import Edition
from engine.beams.bending import Shape
from engine.beams.spans import Beam
from engine.units import plain
from optimizer.beams.checks import NOT_CHECKED as UNCHECKED
from optimizer.beams.design import BeamDesign
from optimizer.beams.problem import Analysis, BeamProblem
from optimizer.beams.schedule import BarMark
from optimizer.beams.variants import Role, StirrupPlan

NOT_CHECKED = f"Not checked: {', '.join(UNCHECKED)}."
ROLES = {
    Role.RUN: "run on",
    Role.STOP: "stop",
    Role.THROUGH: "run through the beam",
    Role.HANGER: "hold stirrups",
    Role.SKIN: "at the faces of the web",
    Role.FLANGE: "in the flange",
    Role.STIRRUP: "stirrups",
}
_PARTS = 8  # of an inch, that places are set out to


def length_text(edition: Edition, value: float) -> str:
    """Write a length as it is set out: ``27'-6 1/2"`` or ``8235 mm``.

    Parameters
    ----------
    edition : Edition
        Edition, which has the units.
    value : float
        Length, also below zero. [in or mm]

    Returns
    -------
    str
        To 1/8 in or 1 mm.
    """
    if edition.units == "si":
        return f"{round(value)} mm"
    eighths = round(abs(value) * _PARTS)
    sign = "-" if value < 0.0 and eighths else ""
    feet, rest = divmod(eighths, 12 * _PARTS)
    whole, part = divmod(rest, _PARTS)
    inches = str(whole)
    if part:
        shared = math.gcd(part, _PARTS)
        fraction = f"{part // shared}/{_PARTS // shared}"
        inches = f"{whole} {fraction}" if whole or feet else fraction
    return f"{sign}{feet}'-{inches}\"" if feet else f'{sign}{inches}"'


def support_lines(beam: Beam) -> list[float]:
    """Centrelines of the supports on the beam's axis. [in or mm]"""
    ends = [0.0]
    for span in beam.spans:
        ends.append(ends[-1] + span.length)
    return ends[beam.first_support :][: len(beam.supports)]


def place_text(problem: BeamProblem, place: float) -> str:
    """Write a place as it is set out: from the centreline of the nearest support.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    place : float
        Place on the beam's axis. [in or mm]

    Returns
    -------
    str
        For example ``B - 9'-3"``.
    """
    lines = support_lines(problem.beam)
    number = min(range(len(lines)), key=lambda at: abs(place - lines[at]))
    offset = place - lines[number]
    sign = "-" if offset < 0.0 else "+"
    mark = problem.beam.supports[number].mark
    return f"{mark} {sign} {length_text(problem.edition, abs(offset))}"


def leg_text(edition: Edition, value: float) -> str:
    """Write the leg of a bend, inches without feet. [in or mm]"""
    return f'{plain(value)}"' if edition.units == "us" else f"{plain(value)} mm"


def mass_unit(edition: Edition) -> str:
    """Unit of masses: lb or kg."""
    return "lb" if edition.units == "us" else "kg"


def volume_unit(edition: Edition) -> str:
    """Unit of concrete that mass per volume counts by: yd^3 or m^3."""
    return "yd^3" if edition.units == "us" else "m^3"


def mass_per_volume(design: BeamDesign) -> float:
    """Steel in the concrete. [lb/yd^3 or kg/m^3]"""
    return design.schedule.mass_per_volume * (27.0 if design.edition.units == "us" else 1.0)


def legs_text(edition: Edition, item: BarMark) -> str:
    """Legs of a mark out to out: hook + length + hook, or width x height of a stirrup."""
    shape = item.shape
    if shape.shape is Shape.STRAIGHT:
        return ""
    if shape.shape is Shape.CLOSED:
        return " x ".join(leg_text(edition, leg) for leg in shape.legs)
    hook, main, *other = shape.legs
    parts = [leg_text(edition, hook), length_text(edition, main)]
    return " + ".join([*parts, *(leg_text(edition, leg) for leg in other)])


def zones_of(plan: StirrupPlan) -> list[tuple[int, float, float, float]]:
    """Zones of stirrups that have spaces.

    Parameters
    ----------
    plan : StirrupPlan
        Stirrups of a span.

    Returns
    -------
    list of (int, float, float, float)
        Spaces, true spacing, start and end from the left face; the outer zones reach to the
        first and last stirrup. [-, in or mm]
    """
    (_, left), (_, right), _ = plan.zones
    ends = (plan.first, left, right, plan.clear - plan.last)
    spacings = (plan.spacings[0], plan.middle_spacing, plan.spacings[2])
    return [
        (spaces, spacing, ends[number], ends[number + 1])
        for number, (spaces, spacing) in enumerate(zip(plan.spaces, spacings, strict=True))
        if spaces
    ]


def zones_text(plan: StirrupPlan) -> str:
    """Zones of stirrups from left to right: ``6 @ 5, 20 @ 10, 6 @ 5``."""
    return ", ".join(f"{spaces} @ {plain(spacing)}" for spaces, spacing, _, _ in zones_of(plan))


def analysis_text(problem: BeamProblem) -> str:
    """Say where moments and shears come from."""
    if problem.analysis is Analysis.GIVEN:
        return "moments and shears as given in the envelopes of the job"
    if problem.analysis is Analysis.COEFFICIENTS:
        return "moment coefficients of 6.5"
    text = "elastic analysis, live load arranged by 6.4"
    if problem.redistribution > 0.0:
        text += f", moments at supports lowered by {100 * problem.redistribution:g} % (6.6.5)"
    return text


def value_text(problem: BeamProblem) -> str:
    """Name of what is to be least."""
    return "mass" if problem.ranking.by == "lightest" else "placed index"


def gap_of(design: BeamDesign) -> float:
    """Share by which the cost may lie above the least possible. [-]"""
    return max(0.0, design.cost - design.bound) / design.cost if design.cost > 0.0 else 0.0


def rules_text(problem: BeamProblem) -> str:
    """What the proof covers: the rules that every beam looked at keeps."""
    rules = problem.rules
    sizes = ", ".join(bar.designation for bar in rules.sizes)
    parts = [
        f"bars {sizes}",
        f"up to {rules.max_layers} layers and {rules.max_sizes} sizes in a layout",
    ]
    if problem.most_sizes is not None:
        parts.append(f"up to {problem.most_sizes} sizes in the beam")
    if problem.most_marks is not None:
        parts.append(f"up to {problem.most_marks} marks")
    unit = "in" if problem.edition.units == "us" else "mm"
    stirrups = ", ".join(bar.designation for bar in problem.stirrups)
    parts.append(
        f"stirrups {stirrups} in up to three zones a span, spacings in steps of"
        f" {plain(problem.stirrup_step)} {unit}"
    )
    parts.append("in each place bars that run on and bars that stop where the code lets them")
    return "; ".join(parts)


def proof_text(design: BeamDesign) -> str:
    """Say what is proved about a design.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    str
        One paragraph.
    """
    problem = design.problem
    value, unit = value_text(problem), mass_unit(design.edition)
    bound = min(design.bound, design.cost)
    text = (
        f"No beam within the rules has a {value} below {bound:.1f} {unit}; this one has"
        f" {design.cost:.1f} {unit}, {100 * gap_of(design):.2f} % above at most."
    )
    if not design.proved:
        return f"NOT PROVED least: the work limit stopped the search. Raise work_limit. {text}"
    if gap_of(design) < 5e-5:
        return (
            f"Proved: no beam within the rules has a {value} below {bound:.1f} {unit}, this one's."
        )
    return f"Proved: {text}"
