"""The worked check of one layout: formula, numbers put in, result, clause, verdict."""

from __future__ import annotations

from dataclasses import dataclass

from engine import Check, CheckedLayout
from optimizer.documents import detailing_lines, minimum_lines, strength_lines
from optimizer.documents.forces import BarForce, forces
from optimizer.documents.lines import Line, Part
from optimizer.documents.wording import Figures, check_line, heading, visible


@dataclass(frozen=True, slots=True, kw_only=True)
class Calculation:
    """A worked check.

    Attributes
    ----------
    bars : tuple of dict
        Rows of the table of strains, stresses and forces: column -> text.
    parts : tuple of Part
        Lines by subject.
    """

    bars: tuple[dict[str, str], ...]
    parts: tuple[Part, ...]


def worked_check(checked: CheckedLayout) -> Calculation:
    """Work out the check of one layout for a reader.

    Parameters
    ----------
    checked : CheckedLayout
        Layout with its strength and all rows.

    Returns
    -------
    Calculation
        Every row of the check is the subject of a line at least.
    """
    figures = Figures(checked.section.edition)
    found = forces(checked)
    parts = [
        Part(title="Equilibrium at crushing", lines=strength_lines.equilibrium(checked, found)),
        Part(title="Design strength", lines=strength_lines.strength(checked, found)),
        Part(title="Minimum steel", lines=minimum_lines.minimum(checked)),
        Part(title="Places of the bars", lines=detailing_lines.places(checked)),
        Part(title="Crack control", lines=detailing_lines.cracks(checked, found)),
        Part(title="Cover", lines=detailing_lines.covers(checked)),
    ]
    told = {line.check for part in parts for line in part.lines}
    rest = [row for row in checked.checks if row.id not in told]
    parts.append(Part(title="Further rules", lines=tuple(_as_line(row, figures) for row in rest)))
    return Calculation(
        bars=tuple(_bar_row(bar, figures) for bar in found.bars),
        parts=tuple(part for part in parts if part.lines),
    )


def _as_line(row: Check, figures: Figures) -> Line:
    """A row with no formula of its own: what is asked for and what there is."""
    texts = check_line(row, figures)
    sizes = f"{texts.demand} asked for, {texts.limit} there" if texts.demand else ""
    return Line(
        subject=heading(row.id),
        clause=row.clause,
        numbers=sizes,
        equal=False,
        note=texts.note,
        state=row.state,
        check=row.id,
    )


def _bar_row(bar: BarForce, figures: Figures) -> dict[str, str]:
    return {
        "place": bar.place,
        "bars": visible(f"{bar.count} {bar.bar.designation}"),
        "area": figures.bare("area", bar.area),
        "depth": figures.bare("length", bar.depth),
        "strain": f"{bar.strain:.5f}".replace("-", "−"),
        "stress": figures.bare("stress", bar.stress),
        "force": figures.bare("force", bar.force),
    }
