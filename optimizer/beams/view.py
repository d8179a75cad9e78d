"""What a person reads of a beam in the terminal."""

from __future__ import annotations

from rich.table import Table
from rich.text import Text

from engine.beams.spans import Overhang
from engine.units import plain
from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.elevation import ASCII, UNICODE, draw_elevation
from optimizer.beams.figures import PlaceFigures, extremes, place_figures, span_marks
from optimizer.beams.problem import BeamProblem
from optimizer.beams.view_checks import show_checks
from optimizer.beams.words import (
    NOT_CHECKED,
    ROLES,
    analysis_text,
    leg_text,
    legs_text,
    length_text,
    mass_per_volume,
    mass_unit,
    place_text,
    proof_text,
    rules_text,
    value_text,
    volume_unit,
    zones_text,
)
from optimizer.views import View

_WIDEST = 160  # columns; beyond them a drawing is no longer seen as one


def show_beam(view: View, result: BeamDesign | NoDesign, *, brief: bool) -> None:
    """Print a beam: its design, or why there is none.

    Parameters
    ----------
    view : View
        Where to print.
    result : BeamDesign or NoDesign
        What to print.
    brief : bool
        Whether only the checks that govern are listed.
    """
    _heading(view, result.problem)
    if isinstance(result, NoDesign):
        _no_design(view, result)
    else:
        _design(view, result, brief=brief)
    view.footer(NOT_CHECKED)


def show_schedule(view: View, design: BeamDesign) -> None:
    """Print the bars of a design and no more: schedule and stirrups.

    Parameters
    ----------
    view : View
        Where to print.
    design : BeamDesign
        Design.
    """
    _schedule(view, design)
    _stirrups(view, design)


def _heading(view: View, problem: BeamProblem) -> None:
    view.head_line(problem.mark)
    beam, edition = problem.beam, problem.edition
    stress = edition.system.trade["stress"]
    concrete, steel = problem.sections[0].concrete, problem.sections[0].steel
    overhangs = sum(span.overhang is not Overhang.NONE for span in beam.spans)
    spans = len(beam.spans) - overhangs
    facts = [f"{spans} span{'s' if spans > 1 else ''}"]
    if overhangs:
        facts.append(f"{overhangs} cantilever{'s' if overhangs > 1 else ''}")
    facts.append(f"f'c {plain(concrete.fc)} {stress}")
    facts.append(f"{steel.name or 'steel'} fy {plain(steel.fy)} {stress}")
    if concrete.lightweight < 1.0:
        facts.append(f"lambda {concrete.lightweight:g}")
    facts.append(f"cover {leg_text(edition, problem.sections[0].cover)}")
    view.say(", ".join(facts))
    view.say(f"Analysis: {analysis_text(problem)}.")
    outlines = dict.fromkeys(
        f"{plain(span.outline.web)} x {plain(span.outline.depth)}" for span in beam.spans
    )
    unit = edition.system.trade["length"]
    view.say(f"Web width x depth [{unit}]: {', '.join(outlines)}.")


def _design(view: View, design: BeamDesign, *, brief: bool) -> None:
    view.say(f"Stirrups: {design.frame.label}. Top face: {design.top.label}.")
    view.say()
    width = min(view.console.width, _WIDEST)
    for line in draw_elevation(design, width, ASCII if view.plain_text else UNICODE):
        view.console.print(Text(line), no_wrap=True, crop=False, overflow="ignore")
    view.say()
    _places(view, design)
    _extents(view, design)
    _schedule(view, design)
    _stirrups(view, design)
    _totals(view, design)
    _cutting(view, design)
    show_checks(view, design, brief=brief)


class _Rows:
    """A table on its way to the page."""

    def __init__(self, view: View, table: Table) -> None:
        self.view, self.table = view, table

    def add(self, *cells: str) -> None:
        self.table.add_row(*(Text(cell) for cell in cells))

    def show(self) -> None:
        self.view.console.print(self.table)
        self.view.say()


def _table(view: View, title: str, columns: str) -> _Rows:
    """Start a table; a column whose name starts with > is of numbers."""
    view.say(title, "bold")
    table = view.table()
    for name in columns.split("|"):
        number = name.startswith(">")
        table.add_column(
            name.lstrip(">*"), justify="right" if number else "left", no_wrap=name[:1] in (">", "*")
        )
    return _Rows(view, table)


def _places(view: View, design: BeamDesign) -> None:
    moment = design.edition.system.trade["moment"]
    rows = _table(view, f"Bars by place, moments [{moment}]", "place|>Mu|>phiMn|>use|layout|bars")
    for figures in place_figures(design):
        rows.add(
            figures.place.mark,
            _moment(design.problem, figures.demand),
            _moment(design.problem, figures.strength),
            _percent(figures.demand, figures.strength),
            figures.variant.layout.label,
            _bars(design, figures),
        )
    rows.show()


def _bars(design: BeamDesign, figures: PlaceFigures) -> str:
    own = [
        f"{piece.count} {piece.bar.designation} {mark} {ROLES[piece.role]},"
        f" {length_text(design.edition, piece.length)}"
        for mark, piece in figures.pieces
    ]
    return "; ".join(own) or f"the {design.top.label} bars do"


def _extents(view: View, design: BeamDesign) -> None:
    title = "Where bars end, from centrelines of supports; hooks to their outside"
    rows = _table(view, title, "*mark|*bars|face|>layer|from|to|>length|for")
    for mark, piece in zip(design.schedule.of_pieces, design.pieces, strict=True):
        start, end = (place_text(design.problem, at) for at in (piece.start, piece.end))
        rows.add(
            mark,
            f"{piece.count} {piece.bar.designation}",
            piece.face.value,
            str(piece.layer),
            f"{start}, hook" if piece.hook_start else start,
            f"{end}, hook" if piece.hook_end else end,
            length_text(design.edition, piece.length),
            ROLES[piece.role],
        )
    rows.show()


def _schedule(view: View, design: BeamDesign) -> None:
    edition, unit = design.edition, mass_unit(design.edition)
    title = f"Schedule, legs out to out, mass [{unit}]"
    rows = _table(view, title, "*mark|>count|*size|shape|legs|>length|>each|>mass")
    for item in design.schedule.marks:
        rows.add(
            item.mark,
            str(item.count),
            item.bar.designation,
            item.shape.shape.value,
            legs_text(edition, item),
            length_text(edition, item.length),
            f"{item.mass_each:.2f}",
            f"{item.mass:.1f}",
        )
    rows.show()


def _stirrups(view: View, design: BeamDesign) -> None:
    unit = design.edition.system.trade["length"]
    title = f"Stirrups, {design.frame.label}, spacings [{unit}] from left to right"
    rows = _table(view, title, "*span|marks|>sets|>first at|spaces")
    marks = span_marks(design)
    for plan, loops in zip(design.stirrups, design.schedule.of_stirrups, strict=True):
        first = leg_text(design.edition, plan.first)
        rows.add(marks[plan.span], " + ".join(loops), str(plan.count), first, zones_text(plan))
    rows.show()


def _totals(view: View, design: BeamDesign) -> None:
    unit, volume = mass_unit(design.edition), volume_unit(design.edition)
    share = f"{mass_per_volume(design):.1f} {unit}/{volume}"
    view.say(f"Mass {design.schedule.mass:.1f} {unit}, {share} of concrete in webs.", "bold")
    if design.problem.ranking.by != "lightest":
        view.say(
            f"{value_text(design.problem).capitalize()} {design.cost:.1f} {unit}:"
            " steel, fixing, layers and sizes in equivalent mass."
        )
    view.say(proof_text(design), "" if design.proved else "bold")
    view.say(f"The rules: {rules_text(design.problem)}.")
    view.say()


def _cutting(view: View, design: BeamDesign) -> None:
    edition = design.edition
    rows = _table(view, "Cut from stock", "*size|>bars|>stock|pieces of each|>left over")
    for plan in design.cutting:
        for bar in plan.bars:
            rows.add(
                plan.size,
                str(bar.count),
                length_text(edition, bar.stock_length),
                ", ".join(f"{count} {mark}" for mark, count in bar.pieces),
                length_text(edition, bar.left_over),
            )
    rows.show()
    for plan in design.cutting:
        waste = f"{100 * plan.waste / plan.bought:.1f} %"
        proved = (
            "proved least"
            if plan.proved
            else f"NOT PROVED least: at least {length_text(edition, plan.bound)} is bought"
        )
        bought = length_text(edition, plan.bought)
        view.say(f"{plan.size}: {bought} bought, waste {waste}, {proved}")
    view.say()


def _no_design(view: View, result: NoDesign) -> None:
    view.say()
    if result.proved:
        view.say("No beam meets every rule.", "bold")
    else:
        view.say(
            "No beam found, and NOT PROVED that there is none: the work limit stopped the search."
            " Raise work_limit.",
            "bold",
        )
    for reason in result.reasons:
        view.say(f"- {reason}")
    view.say(
        "What helps: a larger section, more sizes or layers, stronger concrete, other stirrups,"
        " or deeper supports where bars have to be anchored."
    )
    view.say(f"The rules: {rules_text(result.problem)}.")
    view.say()
    problem = result.problem
    system = problem.edition.system
    title = (
        f"Largest moments [{system.trade['moment']}] and shears [{system.trade['force']}] by span,"
        " with places from the left face"
    )
    rows = _table(view, title, "*span|>sagging|>at|>hogging left|>hogging right|>Vu|>at")
    for mark, demand in zip(span_marks(result), result.demands, strict=True):
        most = extremes(demand)
        rows.add(
            mark,
            _moment(problem, most.sagging[0]),
            length_text(problem.edition, most.sagging[1]),
            _moment(problem, most.hogging_left[0]),
            _moment(problem, most.hogging_right[0]),
            f"{system.to_trade('force', most.shear[0]):.1f}",
            length_text(problem.edition, most.shear[1]),
        )
    rows.show()


def _moment(problem: BeamProblem, value: float) -> str:
    return f"{problem.edition.system.to_trade('moment', value):.1f}"


def _percent(demand: float, strength: float) -> str:
    return f"{100 * demand / strength:.0f}%" if strength > 0.0 else ""
