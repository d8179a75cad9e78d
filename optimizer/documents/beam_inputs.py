"""What was asked of a beam, as its page and its workbook repeat it."""

from __future__ import annotations

import math

from engine.beams.spans import Overhang, PointLoad, Span, Support
from engine.units import plain
from optimizer.beams.problem import Analysis, BeamProblem
from optimizer.beams.words import analysis_text, length_text
from optimizer.documents.wording import Figures, visible

Pair = tuple[str, str]


def beam_inputs(problem: BeamProblem) -> list[Pair]:
    """Materials, bars allowed, and what holds for the whole beam.

    Parameters
    ----------
    problem : BeamProblem
        Beam.

    Returns
    -------
    list of (str, str)
        Name, which may hold ``_{...}``, and value.
    """
    section, rules = problem.sections[0], problem.rules
    figures = Figures(problem.edition)
    concrete, steel, stirrups = section.concrete, section.steel, problem.stirrup_steel
    edge = "perimeter" if problem.perimeter else "interior"
    if problem.closed_stirrups:
        edge += ", with closed stirrups (9.7.7.2)"
    return [
        ("moments and shears", analysis_text(problem)),
        ("f′_{c}", figures.of("stress", concrete.fc)),
        ("λ", plain(concrete.lightweight)),
        ("E_{c}", figures.of("stress", concrete.Ec)),
        ("steel", visible(steel.name) or "by its yield strength"),
        ("f_{y}", figures.of("stress", steel.fy)),
        ("stirrups, f_{y}", figures.of("stress", stirrups.fy)),
        ("cover, to the stirrup", figures.length(section.cover)),
        ("exposure", section.exposure.value),
        ("aggregate, largest", figures.length(section.aggregate)),
        ("sizes allowed", visible(", ".join(bar.designation for bar in rules.sizes))),
        ("stirrups allowed", visible(", ".join(bar.designation for bar in problem.stirrups))),
        ("most layers", str(rules.max_layers)),
        ("most sizes in a layout", str(rules.max_sizes)),
        ("most sizes in the beam", _any(problem.most_sizes)),
        ("most marks", _any(problem.most_marks)),
        ("beam", edge),
        ("deflection limit for", problem.attached.value),
        ("live load that stays", f"{100 * problem.sustained:g} %"),
        ("stock", ", ".join(length_text(problem.edition, item) for item in problem.stock)),
        ("lengths in steps of", figures.length(problem.length_step)),
        ("spacings in steps of", figures.length(problem.stirrup_step)),
        ("least", "mass" if problem.ranking.by == "lightest" else "placed index"),
    ]


def _any(number: int | None) -> str:
    return "any" if number is None else str(number)


def span_inputs(problem: BeamProblem) -> list[tuple[str, str, str, str, str, list[str]]]:
    """Spans with their sections and loads.

    Parameters
    ----------
    problem : BeamProblem
        Beam.

    Returns
    -------
    list of (str, str, str, str, str, list of str)
        Mark, length, clear span, web and depth, flange, loads.
    """
    edition, beam = problem.edition, problem.beam
    figures = Figures(edition)
    lines = []
    for index, span in enumerate(beam.spans):
        outline, top = span.outline, span.outline.top
        flange = "none" if top is None else _product(top.width, top.thickness, figures)
        mark = span.mark + ("" if span.overhang is Overhang.NONE else " (cantilever)")
        lines.append(
            (
                visible(mark),
                length_text(edition, span.length),
                length_text(edition, beam.clear_length(index)),
                _product(outline.web, outline.depth, figures),
                flange,
                _loads(problem, span),
            )
        )
    return lines


def _product(one: float, other: float, figures: Figures) -> str:
    return f"{plain(one)} × {figures.length(other)}"


def _loads(problem: BeamProblem, span: Span) -> list[str]:
    if problem.analysis is Analysis.GIVEN:
        return ["envelopes given"]
    edition, figures = problem.edition, Figures(problem.edition)
    texts = []
    for load in span.loads:
        if isinstance(load, PointLoad):
            size = figures.of("force", load.force)
            texts.append(f"{load.case.value} {size} at {length_text(edition, load.at)}")
            continue
        text = f"{load.case.value} {figures.of('force_per_length', load.intensity)}"
        if load.start > 1e-6 or load.end < span.length - 1e-6:
            ends = (length_text(edition, load.start), length_text(edition, load.end))
            text += f" from {ends[0]} to {ends[1]}"
        texts.append(text)
    return texts


def support_inputs(problem: BeamProblem) -> list[tuple[str, str, str, str]]:
    """Supports: mark, width, kind and how they hold the beam.

    Parameters
    ----------
    problem : BeamProblem
        Beam.

    Returns
    -------
    list of (str, str, str, str)
        One line for each.
    """
    return [
        (
            visible(support.mark),
            length_text(problem.edition, support.width),
            support.kind.value,
            _ends(problem, support),
        )
        for support in problem.beam.supports
    ]


def _ends(problem: BeamProblem, support: Support) -> str:
    if problem.analysis is not Analysis.ELASTIC:
        return "not asked for"
    if support.stiffness == 0.0:
        return "free to rotate"
    if math.isinf(support.stiffness):
        return "fixed"
    stiffness = Figures(problem.edition).moment(support.stiffness)
    return f"columns, {stiffness} per radian"
