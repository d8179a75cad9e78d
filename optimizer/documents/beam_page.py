"""A designed beam as one page of HTML: opens from disk, prints, needs nothing from outside."""

from __future__ import annotations

from dataclasses import dataclass

from engine import Edition, State
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.words import (
    NOT_CHECKED,
    ROLES,
    length_text,
    mass_per_volume,
    mass_unit,
    proof_text,
    volume_unit,
    zones_text,
)
from optimizer.documents.beam_charts import moment_chart, shear_chart
from optimizer.documents.beam_checks import BeamCheckLine, beam_check_line, by_kind
from optimizer.documents.beam_cross_sections import beam_cross_section
from optimizer.documents.beam_cuts import beam_cuts
from optimizer.documents.beam_elevation import elevations
from optimizer.documents.beam_inputs import beam_inputs, span_inputs, support_inputs
from optimizer.documents.beam_sketches import bar_sketch, cutting_drawing, cutting_text
from optimizer.documents.rendering import render
from optimizer.documents.wording import heading, state_word, visible

Pair = tuple[str, str]

_NO_MATTER = state_word(State.NOT_APPLICABLE)


@dataclass(frozen=True, slots=True, kw_only=True)
class MarkLine:
    """One line of the schedule as text, with its sketch."""

    mark: str
    count: int
    size: str
    purpose: str
    shape: str
    sketch: str
    length: str
    each: str
    mass: str


@dataclass(frozen=True, slots=True, kw_only=True)
class KindView:
    """Checks of one kind: those that apply, and places with clause and reason of the others."""

    id: str
    name: str
    lines: list[BeamCheckLine]
    apart: list[tuple[str, str, str]]


def beam_page(result: BeamDesign | NoDesign) -> str:
    """Write a beam as a page.

    Parameters
    ----------
    result : BeamDesign or NoDesign
        Result of a beam job.

    Returns
    -------
    str
        HTML with its style and drawings inside; equal results give equal text.
    """
    problem = result.problem
    common: dict[str, object] = {
        "mark": visible(problem.mark),
        "inputs": beam_inputs(problem),
        "spans": span_inputs(problem),
        "supports": support_inputs(problem),
        "moments": moment_chart(result),
        "shears": shear_chart(result),
        "limits": NOT_CHECKED,
    }
    parts = _design_parts(result) if isinstance(result, BeamDesign) else _reasons(result)
    return render(
        "beam.html.j2",
        edition=problem.edition,
        title=problem.title or f"Beam {problem.mark}",
        kind="Bars of a beam",
        **common,
        **parts,
    )


def _reasons(result: NoDesign) -> dict[str, object]:
    if result.proved:
        answer = "no arrangement of bars within the rules"
    else:
        answer = "no arrangement found, NOT PROVED that there is none: raise work_limit"
    return {
        "design": False,
        "good": False,
        "answer": answer,
        "reasons": [visible(reason) for reason in result.reasons],
    }


def _design_parts(design: BeamDesign) -> dict[str, object]:
    edition, schedule = design.edition, design.schedule
    beam = design.problem.beam
    failing = [heading(kind.id).lower() for kind, _ in by_kind(design.checks) if not kind.ok]
    answer = "passes every check" if design.ok else f"FAILS: {', '.join(failing)}"
    kinds = by_kind(design.checks)
    drawn = elevations(design)
    return {
        "design": True,
        "good": design.ok,
        "answer": answer,
        "reasons": [],
        "totals": _totals(design),
        "proof": proof_text(design),
        "elevations": [drawing for drawing, _ in drawn],
        "enlarged": drawn[0][1],
        "zones": [
            (
                visible(span.mark),
                plan.count,
                visible(" + ".join(marks)),
                zones_text(plan),
                length_text(edition, plan.first),
            )
            for span, plan, marks in zip(
                beam.spans, design.stirrups, schedule.of_stirrups, strict=True
            )
        ],
        "cuts": [
            (visible(cut.title), beam_cross_section(design, cut), visible(cut.beside))
            for cut in beam_cuts(design)
        ],
        "marks": _mark_lines(design),
        "unit": mass_unit(edition),
        "cutting": [
            (visible(plan.size), cutting_drawing(design, plan), cutting_text(design, plan))
            for plan in design.cutting
        ],
        "governing": [beam_check_line(row, edition) for row, _ in kinds],
        "kinds": [_kind(rows, edition) for _, rows in kinds],
    }


def _kind(rows: list[BeamCheck], edition: Edition) -> KindView:
    """All checks of a kind; those that do not apply are named together by their reason."""
    lines = [beam_check_line(row, edition) for row in rows]
    apart: dict[tuple[str, str], list[str]] = {}
    for line in lines:
        if line.state == _NO_MATTER:
            places = apart.setdefault((line.clause, line.note), [])
            if line.where not in places:
                places.append(line.where)
    return KindView(
        id=rows[0].id,
        name=heading(rows[0].id),
        lines=[line for line in lines if line.state != _NO_MATTER],
        apart=[(", ".join(places), *key) for key, places in apart.items()],
    )


def _totals(design: BeamDesign) -> list[Pair]:
    schedule, unit = design.schedule, mass_unit(design.edition)
    bought = sum(bar.count for plan in design.cutting for bar in plan.bars)
    volume = volume_unit(design.edition).replace("^3", "³")
    pairs = [
        ("steel", f"{schedule.mass:.1f} {unit}"),
        ("steel in the concrete", f"{mass_per_volume(design):.1f} {unit}/{volume}"),
        ("bars", str(sum(item.count for item in schedule.marks))),
        ("marks", str(len(schedule.marks))),
        ("stirrups", visible(design.frame.label)),
        ("top bars", visible(design.top.label)),
        ("bars of stock", str(bought)),
    ]
    if design.problem.ranking.by != "lightest":
        pairs.append(("placed index", f"{design.cost:.1f} {unit}"))
    return pairs


def _mark_lines(design: BeamDesign) -> list[MarkLine]:
    edition, schedule = design.edition, design.schedule
    roles: dict[str, list[str]] = {}
    for piece, mark in zip(design.pieces, schedule.of_pieces, strict=True):
        text = f"{piece.face.value}, {ROLES[piece.role]}"
        if text not in roles.setdefault(mark, []):
            roles[mark].append(text)
    return [
        MarkLine(
            mark=item.mark,
            count=item.count,
            size=visible(item.bar.designation),
            purpose="; ".join(roles.get(item.mark, ["stirrup"])),
            shape=item.shape.shape.value,
            sketch=bar_sketch(design, item),
            length=length_text(edition, item.length),
            each=f"{item.mass_each:.2f}",
            mass=f"{item.mass:.1f}",
        )
        for item in schedule.marks
    ]
