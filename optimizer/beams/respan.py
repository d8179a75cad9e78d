"""A beam designed before, under new demands: what still works, and what least to change."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

from engine import Layout, check_layout
from engine.check_row import Check
from optimizer.beams.choice import Choice, Menu
from optimizer.beams.design import BeamDesign, NoDesign, demands_of, finish, reasons, search
from optimizer.beams.frontier import FrontierOfFrame, layout_as_drawn
from optimizer.beams.places import Place
from optimizer.beams.positions import TOP, DrawnBars, DrawnBeam, drawn, stirrups_mark
from optimizer.beams.problem import BeamProblem
from optimizer.beams.solving import FrameSearch
from optimizer.errors import JobError

Progress = Callable[[str], None]
_MOST_COST = 2.0  # beams of more than this times the best are left out of the frontier
_SLACK = 1e-6


@dataclass(frozen=True, slots=True, kw_only=True)
class Verdict:
    """What becomes of one position under the new demands.

    Attributes
    ----------
    position : str
        Name.
    before : str
        As drawn.
    works : bool
        Whether it can stay.
    rows : tuple of Check
        Rows of its section's check, governing first; empty for stirrups and the top face.
    why : str
        What stands in the way, or empty.
    """

    position: str
    before: str
    works: bool
    rows: tuple[Check, ...]
    why: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Step:
    """One step of the frontier.

    Attributes
    ----------
    changes : int
        Positions that may change.
    design : BeamDesign or None
        Best beam with so many changes; None if there is none.
    changed : tuple of str
        Positions that differ from the beam as drawn.
    proved : bool
        Whether it is proved best, or that there is none.
    """

    changes: int
    design: BeamDesign | None
    changed: tuple[str, ...]
    proved: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Difference:
    """One line to mark up a drawing from.

    Attributes
    ----------
    position : str
        Position.
    what : str
        ``stays``, ``length``, ``shape``, ``count``, ``spacing`` (of stirrups), ``size``,
        ``appears`` or ``vanishes``; of several the first in the order size, spacing, count,
        shape, length.
    before, after : DrawnBars or None
        Bars before and after.
    """

    position: str
    what: str
    before: DrawnBars | None
    after: DrawnBars | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Respan:
    """Answer to a change.

    Attributes
    ----------
    problem : BeamProblem
        Beam after the change.
    old : DrawnBeam
        Beam as drawn.
    verdicts : tuple of Verdict
        One for each position.
    steps : tuple of Step
        The frontier, from no change until the best beam is met.
    best : BeamDesign or NoDesign
        Best beam from scratch.
    locked : tuple of str
        Positions that were not allowed to change.
    """

    problem: BeamProblem
    old: DrawnBeam
    verdicts: tuple[Verdict, ...]
    steps: tuple[Step, ...]
    best: BeamDesign | NoDesign
    locked: tuple[str, ...]

    @property
    def least(self) -> Step | None:
        """First step that has a beam: the least change."""
        return next((step for step in self.steps if step.design is not None), None)

    @property
    def ok(self) -> bool:
        """Whether some beam serves, with the locked positions as they are."""
        least = self.least
        return least is not None and least.design is not None and least.design.ok


def respan(
    problem: BeamProblem,
    old: DrawnBeam,
    locked: Sequence[str] = (),
    progress: Progress | None = None,
) -> Respan:
    """Design a changed beam again, keeping as much of the old one as pays.

    Parameters
    ----------
    problem : BeamProblem
        Beam after the change.
    old : DrawnBeam
        Beam as drawn before.
    locked : sequence of str
        Positions that must stay.
    progress : callable, optional
        Told what is being done.

    Returns
    -------
    Respan
        Verdicts, frontier and the best beam from scratch.

    Raises
    ------
    JobError
        If a locked position is unknown.
    """
    for name in locked:
        if name not in old.positions:
            msg = f"--lock: no position {name!r}; allowed: {', '.join(old.positions)}"
            raise JobError(msg)
    demands = demands_of(problem)
    found = search(problem, demands, progress)
    best: BeamDesign | NoDesign
    if found.best is None or found.menu is None or found.choice is None:
        best = NoDesign(
            problem=problem, demands=demands, reasons=tuple(reasons(found)), proved=found.proved
        )
    else:
        best = finish(found.best, found.menu, found.choice, proved=found.proved)
    frames = [FrontierOfFrame(one, old, frozenset(locked)) for one in found.searches]
    own = next((item for item in frames if _same_frame(item.search, old)), frames[0])
    steps: tuple[Step, ...] = ()
    if isinstance(best, BeamDesign):
        steps = tuple(_steps(frames, old, best, bool(locked), progress))
    return Respan(
        problem=problem,
        old=old,
        verdicts=tuple(_verdicts(own, old)),
        steps=steps,
        best=best,
        locked=tuple(locked),
    )


def _same_frame(one: FrameSearch, old: DrawnBeam) -> bool:
    states = list(old.stirrups.values())
    return bool(states) and all(
        item.size == one.frame.stirrup.designation and item.legs == one.frame.legs
        for item in states
    )


def _steps(
    frames: Sequence[FrontierOfFrame],
    old: DrawnBeam,
    best: BeamDesign,
    locked: bool,
    progress: Progress | None,
) -> list[Step]:
    """The frontier, until the best beam is met or all positions may change."""
    found: list[Step] = []
    goal, bound = best.cost, best.bound
    known = _MOST_COST * goal
    for changes in range(len(frames[0].names) + 1):
        if progress is not None:
            progress(f"{changes} changes")
        chosen: tuple[FrontierOfFrame, Choice, Menu] | None = None
        proved, limit = True, known
        for frame in frames:
            answer = frame.best(changes, limit)
            if isinstance(answer, bool):
                proved &= answer
                continue
            choice, menu, sure = answer
            proved &= sure
            chosen, limit = (frame, choice, menu), choice.cost
        if chosen is None:
            if found and found[-1].design is not None:
                continue  # one more change gains nothing
            found.append(Step(changes=changes, design=None, changed=(), proved=proved))
            continue
        frame, choice, menu = chosen
        design = finish(frame.search, menu, choice, proved=proved)
        # The bound of the choice holds for so few changes; what a design states holds for all.
        design = replace(design, bound=min(bound, design.cost))
        known = choice.cost
        found.append(
            Step(
                changes=changes,
                design=design,
                changed=tuple(changed_positions(old, drawn(design))),
                proved=proved,
            )
        )
        if choice.cost <= goal * (1 + _SLACK) + _SLACK and not locked:
            break
    return found


def changed_positions(old: DrawnBeam, new: DrawnBeam) -> list[str]:
    """Positions that differ between two beams.

    Parameters
    ----------
    old, new : DrawnBeam
        Beams before and after.

    Returns
    -------
    list of str
        Names: those of the new beam in its order, then those that are gone.
    """
    before, after = old.positions, new.positions
    changed = [name for name, state in after.items() if before.get(name) != state]
    return changed + [name for name in before if name not in after]


def _verdicts(frame: FrontierOfFrame, old: DrawnBeam) -> list[Verdict]:
    """What becomes of each position of the old beam."""
    search, kept = frame.search, frame.kept()
    states = old.positions
    found = []
    there = set()
    for place, own in zip(search.places, kept.places, strict=True):
        there.add(place.mark)
        if place.mark not in states:
            continue
        layout = layout_as_drawn(old, place.mark, search.problem.catalog)
        rows = _rows(place, layout[0]) if layout is not None else ()
        works = bool(own)
        why = ""
        if not works:
            failing = [row for row in rows if not row.ok]
            why = ", ".join(row.id for row in failing)
            if not failing:
                why = "its bars cannot be cut, anchored or lapped by the rules, or it sags"
            if layout is None:
                why = "the catalogue no longer has its sizes"
        found.append(
            Verdict(
                position=place.mark,
                before=states[place.mark].label,
                works=works,
                rows=rows,
                why=why,
            )
        )
    for span, good in enumerate(kept.plans):
        name = stirrups_mark(search.problem.beam, span)
        there.add(name)
        if name in states:
            why = "" if good else "too far apart for the shear, or of a size no longer allowed"
            found.append(
                Verdict(position=name, before=states[name].label, works=good, rows=(), why=why)
            )
    good = kept.mode is not None
    why = "" if good else "it cannot be anchored, lapped or bent at the ends"
    found.append(Verdict(position=TOP, before=old.top.label, works=good, rows=(), why=why))
    found += [
        Verdict(
            position=name,
            before=state.label,
            works=False,
            rows=(),
            why="the beam no longer has this position",
        )
        for name, state in states.items()
        if name not in there and name != TOP
    ]
    return found


def _rows(place: Place, layout: Layout) -> tuple[Check, ...]:
    """Rows of the check of a layout in every section of its place, worst first."""
    rows: list[Check] = []
    for section in place.sections:
        rows += check_layout(section, layout).checks
    return tuple(sorted(rows, key=lambda row: (row.ok, -(row.ratio or 0.0))))


def differences(old: DrawnBeam, new: DrawnBeam) -> list[Difference]:
    """What to mark up on a drawing.

    Parameters
    ----------
    old, new : DrawnBeam
        Beams before and after.

    Returns
    -------
    list of Difference
        One line for each group of bars, by position.
    """
    before = {(bars.position, bars.part): bars for bars in old.bars}
    after = {(bars.position, bars.part): bars for bars in new.bars}
    order = [*before, *(key for key in after if key not in before)]
    found = []
    for key in sorted(order, key=lambda item: _rank(item[0], old, new)):
        one, other = before.get(key), after.get(key)
        if one is None:
            what = "appears"
        elif other is None:
            what = "vanishes"
        elif one.size != other.size:
            what = "size"
        elif key[0] in old.stirrups and old.stirrups[key[0]] != new.stirrups.get(key[0]):
            what = "spacing"
        elif one.count != other.count:
            what = "count"
        elif one.shape != other.shape:
            what = "shape"
        elif abs(one.length - other.length) > _SLACK:
            what = "length"
        else:
            what = "stays"
        found.append(Difference(position=key[0], what=what, before=one, after=other))
    return found


def _rank(position: str, old: DrawnBeam, new: DrawnBeam) -> int:
    names = [*new.positions, *old.positions]
    return names.index(position) if position in names else len(names)
