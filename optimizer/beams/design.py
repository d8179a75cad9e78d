"""Design of a whole beam, and what is known of it: the result that every output is made from."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

from engine import Edition
from engine.beams.coefficients import coefficient_demands
from engine.beams.demand import SpanDemand
from engine.beams.envelopes import elastic_demands
from optimizer.beams.along import SpanStrength, strength_along
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.choice import Choice, Menu
from optimizer.beams.frames import Frame, frames
from optimizer.beams.lists import all_pieces
from optimizer.beams.modes import ModeBars
from optimizer.beams.places import Place
from optimizer.beams.problem import Analysis, BeamProblem
from optimizer.beams.schedule import Schedule, schedule_of
from optimizer.beams.solving import FrameSearch
from optimizer.beams.stock import CuttingPlan
from optimizer.beams.variants import Piece, StirrupPlan, TopMode, Variant

Progress = Callable[[str], None]


@dataclass(frozen=True, slots=True, kw_only=True)
class BeamDesign:
    """A beam with all its bars.

    Attributes
    ----------
    problem : BeamProblem
        What was asked.
    frame : Frame
        Stirrup and legs.
    demands : tuple of SpanDemand
        Envelopes of the spans.
    places : tuple of Place
        Places with bars of their own, bottoms first.
    chosen : tuple of Variant
        Layout and ends of the bars at each place.
    stirrups : tuple of StirrupPlan
        Stirrups of each span.
    top : TopMode
        Arrangement of the top face.
    pieces : tuple of Piece
        Every bar but the stirrups.
    schedule : Schedule
        Marks.
    cutting : tuple of CuttingPlan
        Bars cut from stock, one plan for each size.
    strengths : tuple of SpanStrength
        Strength along each span.
    checks : tuple of BeamCheck
        All checks.
    cost : float
        Placed index or mass, whichever was to be least. [lb or kg]
    bound : float
        No beam within the rules costs less; zero where nothing is proved. [lb or kg]
    proved : bool
        Whether the bound was reached without a limit on the work.
    """

    problem: BeamProblem
    frame: Frame
    demands: tuple[SpanDemand, ...]
    places: tuple[Place, ...]
    chosen: tuple[Variant, ...]
    stirrups: tuple[StirrupPlan, ...]
    top: TopMode
    pieces: tuple[Piece, ...]
    schedule: Schedule
    cutting: tuple[CuttingPlan, ...]
    strengths: tuple[SpanStrength, ...]
    checks: tuple[BeamCheck, ...]
    cost: float
    bound: float
    proved: bool

    @property
    def edition(self) -> Edition:
        """Edition of the code."""
        return self.problem.edition

    @property
    def ok(self) -> bool:
        """Whether no check fails."""
        return all(row.ok for row in self.checks)


@dataclass(frozen=True, slots=True, kw_only=True)
class NoDesign:
    """A beam that no arrangement within the rules serves.

    Attributes
    ----------
    problem : BeamProblem
        What was asked.
    demands : tuple of SpanDemand
        Envelopes.
    reasons : tuple of str
        What stands in the way, by place.
    proved : bool
        Whether it is proved that there is none.
    """

    problem: BeamProblem
    demands: tuple[SpanDemand, ...]
    reasons: tuple[str, ...]
    proved: bool


def demands_of(problem: BeamProblem) -> tuple[SpanDemand, ...]:
    """Envelopes of a beam, by the analysis that its job asks for.

    Parameters
    ----------
    problem : BeamProblem
        Beam.

    Returns
    -------
    tuple of SpanDemand
        One for each span.
    """
    if problem.analysis is Analysis.GIVEN:
        return problem.given
    modulus = problem.sections[0].concrete.Ec
    if problem.analysis is Analysis.COEFFICIENTS:
        return coefficient_demands(
            problem.beam, problem.edition, sustained=problem.sustained, modulus=modulus
        )
    return elastic_demands(
        problem.beam,
        modulus,
        problem.edition,
        sustained=problem.sustained,
        redistribution=problem.redistribution,
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class Searched:
    """The searches of all frames, with the best choice.

    Attributes
    ----------
    searches : tuple of FrameSearch
        One for each frame.
    best : FrameSearch or None
        Search of the best frame.
    menu : Menu or None
        Its menu.
    choice : Choice or None
        Its choice.
    proved : bool
        Whether all searches are complete.
    """

    searches: tuple[FrameSearch, ...]
    best: FrameSearch | None
    menu: Menu | None
    choice: Choice | None
    proved: bool


def search(
    problem: BeamProblem, demands: Sequence[SpanDemand], progress: Progress | None = None
) -> Searched:
    """Search all frames of a beam.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    demands : sequence of SpanDemand
        Envelopes.
    progress : callable, optional
        Told what is being done.

    Returns
    -------
    Searched
        The searches and the best choice of all.
    """
    best: FrameSearch | None = None
    menu: Menu | None = None
    choice: Choice | None = None
    proved = True
    searches = []
    for frame in frames(problem):
        if progress is not None:
            progress(f"{problem.mark}: stirrups {frame.label}")
        one = FrameSearch(problem, frame, demands)
        solved = one.solve(math.inf if choice is None else choice.cost)
        searches.append(one)
        proved &= solved.proved
        if solved.choice is not None and (
            choice is None or solved.choice.cost < choice.cost - 1e-6
        ):
            best, menu, choice = one, one.last_menu, solved.choice
    return Searched(searches=tuple(searches), best=best, menu=menu, choice=choice, proved=proved)


def design_beam(problem: BeamProblem, progress: Progress | None = None) -> BeamDesign | NoDesign:
    """Design a beam: the best bars of all places together, with proof.

    Parameters
    ----------
    problem : BeamProblem
        Beam.
    progress : callable, optional
        Told what is being done.

    Returns
    -------
    BeamDesign or NoDesign
        The design, or why there is none.
    """
    demands = demands_of(problem)
    found = search(problem, demands, progress)
    if found.best is None or found.menu is None or found.choice is None:
        return NoDesign(
            problem=problem,
            demands=demands,
            reasons=tuple(reasons(found)),
            proved=found.proved,
        )
    return finish(found.best, found.menu, found.choice, proved=found.proved)


def reasons(found: Searched) -> list[str]:
    """What stands in the way of any design, in the frame that comes nearest.

    Parameters
    ----------
    found : Searched
        Searches without a choice.

    Returns
    -------
    list of str
        One line for each place without a layout, or one on the beam as a whole.
    """
    nearest = min(found.searches, key=lambda one: len(one.without_variants()))
    lines = [
        f"{mark}: {why} (stirrups {nearest.frame.label})"
        for mark, why in nearest.without_variants()
    ]
    return lines or [
        "every place has layouts, but no choice of them goes together;"
        " hint: more sizes (most_sizes), other stirrups, or a larger section"
    ]


def finish(one: FrameSearch, menu: Menu, choice: Choice, *, proved: bool) -> BeamDesign:
    """Turn a choice into a design with schedule, strengths and checks.

    Parameters
    ----------
    one : FrameSearch
        Search of the frame.
    menu : Menu
        Menu of the choice.
    choice : Choice
        Choice.
    proved : bool
        Whether it is proved best.

    Returns
    -------
    BeamDesign
        The design.
    """
    problem = one.problem
    chosen = tuple(
        variants[number] for variants, number in zip(menu.places, choice.places, strict=True)
    )
    stirrups = tuple(
        pool.plans[number] for pool, number in zip(menu.pools, choice.plans, strict=True)
    )
    mode: ModeBars = menu.modes[choice.mode]
    pieces = all_pieces(one, menu, choice)
    schedule = schedule_of(problem, one.frame, pieces, stirrups)
    demands = tuple(one.demands)
    strengths = tuple(
        strength_along(problem, one.frame, demands, pieces, stirrups, span)
        for span in range(len(demands))
    )
    design = BeamDesign(
        problem=problem,
        frame=one.frame,
        demands=demands,
        places=tuple(one.places),
        chosen=chosen,
        stirrups=stirrups,
        top=mode.mode,
        pieces=pieces,
        schedule=schedule,
        cutting=schedule.cutting(problem),
        strengths=strengths,
        checks=(),
        cost=choice.cost,
        # Unless proved, another frame or what was not listed could cost less than that.
        bound=choice.bound if proved else 0.0,
        proved=proved,
    )
    from optimizer.beams.checks import check_beam  # needs the finished design

    return replace(design, checks=check_beam(design))
