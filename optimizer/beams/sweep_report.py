"""A beam over a range of one span as a table of texts, and as bars in the terminal."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from engine import Edition
from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.beams.respan_report import changed_text
from optimizer.beams.sweep import Sweep, SweepPoint
from optimizer.beams.words import length_text, mass_unit
from optimizer.text_tables import Block, Paragraph, TextTable

_EIGHTHS = " ▏▎▍▌▋▊▉"
_WIDTH = 48  # columns of the longest bar


@dataclass(frozen=True, slots=True, kw_only=True)
class SweepLine:
    """Figures of one length.

    Attributes
    ----------
    point : SweepPoint
        Beam at this length.
    design : BeamDesign or None
        Its design.
    growth : float or None
        Mass more per length more than at the length before; None without either.
        [lb/ft or kg/m]
    """

    point: SweepPoint
    design: BeamDesign | None
    growth: float | None


def sweep_lines(result: Sweep) -> list[SweepLine]:
    """Figures of every length.

    Parameters
    ----------
    result : Sweep
        Sweep.

    Returns
    -------
    list of SweepLine
        By growing length.
    """
    lines: list[SweepLine] = []
    for point in result.points:
        design = point.result if isinstance(point.result, BeamDesign) else None
        before = lines[-1] if lines else None
        growth = None
        if design is not None and before is not None and before.design is not None:
            unit = 12.0 if design.edition.units == "us" else 1000.0
            more = design.schedule.mass - before.design.schedule.mass
            growth = more / ((point.length - before.point.length) / unit)
        lines.append(SweepLine(point=point, design=design, growth=growth))
    return lines


def sweep_blocks(result: Sweep) -> list[Block]:
    """The sweep as a table, with what it tells.

    Parameters
    ----------
    result : Sweep
        Sweep.

    Returns
    -------
    list of TextTable or Paragraph
        The table; reasons where a length has no beam.
    """
    problem = result.points[0].result.problem
    edition, lightest = problem.edition, problem.ranking.by == "lightest"
    unit = mass_unit(edition)
    long = "ft" if edition.units == "us" else "m"
    rows = [_row(line, edition, lightest=lightest) for line in sweep_lines(result)]
    columns = [f">{result.span}", ">index", ">mass", f">per {long}", "*proved", "*old serves",
               ">changes", "what changes"]  # fmt: skip
    if lightest:
        columns.remove(">index")
    what = "mass" if lightest else "placed index, mass"
    blocks: list[Block] = [
        TextTable(
            title=f"Best beam for each length of {result.span}: {what} [{unit}], and mass more"
            f" for each {long} more [{unit}/{long}]",
            columns=tuple(columns),
            rows=tuple(rows),
        )
    ]
    for point in result.points:
        if isinstance(point.result, NoDesign):
            where = f"{result.span} = {length_text(edition, point.length)}"
            blocks += [Paragraph(text=f"{where}: {reason}") for reason in point.result.reasons]
    blocks.append(
        Paragraph(
            text="Changes are counted against the beam as drawn; the old beam serves if all its"
            " positions can stay, lengths apart. Each line is the best beam of its length, not the"
            " one with the least change."
        )
    )
    return blocks


def _row(line: SweepLine, edition: Edition, *, lightest: bool) -> tuple[str, ...]:
    point, design = line.point, line.design
    length, serves = length_text(edition, point.length), "yes" if point.old_works else "no"
    if design is None:
        proved = "yes" if isinstance(point.result, NoDesign) and point.result.proved else "NO"
        figures = ("none", "") if lightest else ("none", "", "")
        return (length, *figures, proved, serves, "", "no beam serves")
    failing = "" if design.ok else "FAILS a check; "
    cells = [
        length,
        f"{design.cost:.1f}",
        f"{design.schedule.mass:.1f}",
        "" if line.growth is None else f"{line.growth:+.1f}",
        "yes" if design.proved else "NO",
        serves,
        str(len(point.changed)),
        failing + changed_text(point.changed),
    ]
    if lightest:
        del cells[1]
    return tuple(cells)


def sweep_bars(result: Sweep, *, plain_text: bool) -> list[str]:
    """Mass and index against the span, as bars of text.

    Parameters
    ----------
    result : Sweep
        Sweep.
    plain_text : bool
        Whether only ASCII characters are used.

    Returns
    -------
    list of str
        Lines; bars start at zero and are to one scale within a plot.
    """
    problem = result.points[0].result.problem
    unit, by = mass_unit(problem.edition), problem.ranking.by
    lines = sweep_lines(result)
    found: list[str] = []
    plots = [("Mass", [None if x.design is None else x.design.schedule.mass for x in lines])]
    if by != "lightest":
        plots.append(("Placed index", [None if x.design is None else x.design.cost for x in lines]))
    names = [length_text(problem.edition, line.point.length) for line in lines]
    for title, values in plots:
        found += [f"{title} [{unit}] against {result.span}", *_bars(names, values, plain_text), ""]
    return found


def _bars(names: Sequence[str], values: Sequence[float | None], plain_text: bool) -> list[str]:
    most = max((value for value in values if value is not None), default=0.0)
    wide = max(len(name) for name in names)
    lines = []
    for name, value in zip(names, values, strict=True):
        if value is None or most <= 0.0:
            lines.append(f"{name:>{wide}} no beam")
            continue
        if plain_text:
            bar = "#" * round(_WIDTH * value / most)
        else:
            whole, part = divmod(round(8 * _WIDTH * value / most), 8)
            bar = "█" * whole + _EIGHTHS[part].strip()
        lines.append(f"{name:>{wide}} {bar} {value:.1f}")
    return lines
