"""The flange of a section as its slab or its job gives it."""

from __future__ import annotations

from dataclasses import replace

from engine import Flange, Outline, Slab, effective_flange_width
from engine.flange_width import overhang
from optimizer.problem import Problem


def slab_flange(slab: Slab, web: float) -> Flange:
    """Top flange that a slab makes effective.

    Parameters
    ----------
    slab : Slab
        Slab and span.
    web : float
        Web width. [in or mm]

    Returns
    -------
    Flange
        Effective flange, its overhangs where the slab is.
    """
    both = slab.clear_left > 0.0 and slab.clear_right > 0.0
    return Flange(
        width=effective_flange_width(slab, web),
        thickness=slab.thickness,
        left=overhang(slab, slab.clear_left, both_sides=both),
    )


def resized(problem: Problem, web: float, depth: float) -> Problem:
    """Give a section another web, as the job's keys would: a flange given by its size stays as it
    is, one that follows from the slab follows the web.

    Parameters
    ----------
    problem : Problem
        Problem whose section is to change.
    web, depth : float
        New web width and overall depth. [in or mm]

    Returns
    -------
    Problem
        The problem with the new outline.

    Raises
    ------
    OutOfRangeError
        If the new outline is none, or leaves no room for bars.
    """
    outline = problem.section.outline

    def kept(flange: Flange | None) -> Flange | None:
        if flange is None:
            return None
        beyond = flange.width - outline.web
        share = 0.5 if flange.left is None or not beyond else flange.left / beyond
        return replace(flange, left=max(0.0, flange.width - web) * share)

    top = kept(outline.top) if problem.slab is None else slab_flange(problem.slab, web)
    changed = Outline(web=web, depth=depth, top=top, bottom=kept(outline.bottom))
    return replace(problem, section=replace(problem.section, outline=changed))
