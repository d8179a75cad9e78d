"""Bar sizes for the whole job, as the page's templates take them."""

from __future__ import annotations

from dataclasses import dataclass

from engine.units import plain
from optimizer.documents.wording import Figures, visible
from optimizer.options import OptionsResult


@dataclass(frozen=True, slots=True, kw_only=True)
class PaletteChoiceLine:
    """One choice of sizes: what it uses, its total, what its last size saves."""

    sizes: str
    total: str
    saving: str


@dataclass(frozen=True, slots=True, kw_only=True)
class PaletteView:
    """The choices and the layout of every section in each of them.

    Attributes
    ----------
    choices : list of PaletteChoiceLine
        For growing numbers of sizes; empty if no allowed number is enough.
    sections : list of (str, str, list of list of str)
        Mark, length, and for each choice the layers of its layout.
    left_out : str
        Sections without a layout at all.
    note : str
        Where no choice serves every section, that.
    proved : bool
        Whether every search and every choice was completed.
    total : str
        What the totals are, with their unit.
    """

    choices: list[PaletteChoiceLine]
    sections: list[tuple[str, str, list[list[str]]]]
    left_out: str
    note: str
    proved: bool
    total: str


def palette_view(result: OptionsResult) -> PaletteView | None:
    """Write the palette of a job.

    Parameters
    ----------
    result : OptionsResult
        Result of a job.

    Returns
    -------
    PaletteView or None
        Its texts; None if the job asks for no palette.
    """
    palette, job = result.palette, result.job
    if palette is None:
        return None
    figures = Figures(job.edition)
    problems = {problem.section.mark: problem for problem in job.problems}
    per, mass = ("ft", "lb") if job.edition.units == "us" else ("m", "kg")
    kinds = {problems[mark].ranking.by for mark in palette.marks}
    what = {"practical": "score", "lightest": "mass"}
    summed = " or ".join(sorted(what[kind] for kind in kinds)) or "score"
    return PaletteView(
        choices=[
            PaletteChoiceLine(
                sizes=visible(", ".join(bar.designation for bar in choice.sizes)),
                total=f"{choice.total:.2f}",
                saving=f"{choice.saving:.2f}" if choice.saving else "",
            )
            for choice in palette.choices
        ],
        sections=[
            (
                visible(mark),
                f"{plain(problems[mark].length)} {per}",
                [
                    [visible(layer.label) for layer in choice.layouts[index].layout.layers]
                    for choice in palette.choices
                ],
            )
            for index, mark in enumerate(palette.marks)
        ]
        if palette.choices
        else [],
        left_out=visible(", ".join(palette.left_out)),
        note=""
        if palette.choices
        else f"No choice of up to {job.palette} sizes serves every section.",
        proved=palette.proved,
        total=f"{summed} ({figures.unit('mass_per_length')}) times length ({per}) over all"
        f" sections, in {mass}",
    )
