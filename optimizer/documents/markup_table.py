"""What to mark up on a drawing after a change, and sweeps, as tables for CSV."""

from __future__ import annotations

from optimizer.beams.positions import DrawnBars, drawn
from optimizer.beams.respan import Respan, Step, differences
from optimizer.beams.sweep import Sweep
from optimizer.beams.sweep_report import sweep_lines
from optimizer.beams.words import mass_unit
from optimizer.documents.tables import Cell, Column, Table, csv_text
from optimizer.respan_sections import SectionsRespan, SectionStep
from optimizer.sections_report import layers_after


def markup_csv(result: Respan, step: Step) -> str:
    """Write the differences of a step as CSV.

    Parameters
    ----------
    result : Respan
        Answer.
    step : Step
        Step of it that has a design.

    Returns
    -------
    str
        One line for each group of bars.
    """
    assert step.design is not None  # the caller has chosen one
    unit = result.problem.edition.system.trade["length"]
    columns = [Column(name="position"), Column(name="what")]
    for when in ("before", "after"):
        columns += [Column(name=f"{name} {when}") for name in ("mark", "bars", "size", "shape")]
        columns.append(Column(name=f"length {when}", unit=unit))
    rows = tuple(
        (item.position, item.what, *_bars(item.before), *_bars(item.after))
        for item in differences(result.old, drawn(step.design))
    )
    return csv_text(Table(name="Mark-up", columns=tuple(columns), rows=rows))


def _bars(bars: DrawnBars | None) -> tuple[Cell, ...]:
    if bars is None:
        return (None,) * 5
    return bars.mark, bars.count, bars.size, bars.shape, bars.length


def sweep_csv(result: Sweep) -> str:
    """Write a sweep as CSV.

    Parameters
    ----------
    result : Sweep
        Sweep.

    Returns
    -------
    str
        One line for each length.
    """
    edition = result.points[0].result.problem.edition
    mass = mass_unit(edition)
    long = "ft" if edition.units == "us" else "m"
    columns = (
        Column(name=f"length of {result.span}", unit=edition.system.trade["length"]),
        Column(name="cost", unit=mass),
        Column(name="mass", unit=mass),
        Column(name="mass more per length", unit=f"{mass}/{long}"),
        Column(name="proved"),
        Column(name="old serves"),
        Column(name="changes"),
        Column(name="what changes"),
    )
    rows: list[tuple[Cell, ...]] = []
    for line in sweep_lines(result):
        design, point = line.design, line.point
        rows.append(
            (
                point.length,
                None if design is None else design.cost,
                None if design is None else design.schedule.mass,
                line.growth,
                "yes" if point.result.proved else "no",
                "yes" if point.old_works else "no",
                None if design is None else len(point.changed),
                ", ".join(point.changed) if design is not None else "no beam",
            )
        )
    return csv_text(Table(name="Sweep", columns=columns, rows=tuple(rows)))


def sections_csv(result: SectionsRespan, step: SectionStep) -> str:
    """Write the layouts of a step of a job of sections as CSV.

    Parameters
    ----------
    result : SectionsRespan
        Answer.
    step : SectionStep
        Possible step of it.

    Returns
    -------
    str
        One line for each section.
    """
    columns = tuple(Column(name=name) for name in ("section", "what", "before", "after"))
    after = layers_after(result, step)
    rows: list[tuple[Cell, ...]] = [
        (
            item.mark,
            ("changes" if item.before else "appears") if item.mark in step.changed else "stays",
            item.before or None,
            " / ".join(after[item.mark]),
        )
        for item in result.verdicts
    ]
    rows += [(mark, "vanishes", None, None) for mark in result.gone]
    return csv_text(Table(name="Mark-up", columns=columns, rows=tuple(rows)))
