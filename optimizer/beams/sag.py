"""Deflection of a span as its bottom bars decide it, for all its layouts at once."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from engine import Batch, Layout, Section
from engine.beams.deflection import (
    DEFLECTION_LIMITS,
    DeflectionResult,
    deflection,
    long_term_factor,
)
from engine.beams.demand import Deflections
from engine.beams.spans import Span
from engine.beams.stiffness import StageInertias, cracking_moment, stage_inertias
from engine.outlines import FloatArray
from engine.service import cracked_inertia
from optimizer.beams.problem import BeamProblem


def cracked_inertias(section: Section, layouts: Sequence[Layout]) -> FloatArray:
    """Icr of a section with each of some layouts. [in^4 or mm^4]

    Parameters
    ----------
    section : Section
        Section with a moment of the layouts' sign.
    layouts : sequence of Layout
        At least one.

    Returns
    -------
    ndarray, shape (n,)
        Icr.
    """
    return cracked_inertia(section, Batch.of(layouts))


def stages(section: Section, span: Span, unit: Deflections, Icr: FloatArray) -> StageInertias:
    """Effective inertias of a span at its three stages of loading.

    Parameters
    ----------
    section : Section
        Section of the span.
    span : Span
        Span.
    unit : Deflections
        Its deflections for a stiffness of one, with the moments of the stages.
    Icr : ndarray, shape (n,)
        Cracked inertia. [in^4 or mm^4]

    Returns
    -------
    StageInertias
        Ie of 24.2.3.5, at midspan or at a cantilever's support, as 24.2.3.7 permits.
    """
    Ig = span.gross_inertia
    strips = section.outline.profile(sagging=unit.sagging).strips
    upper, area, first = 0.0, 0.0, 0.0
    for width, height in strips:
        area += width * height
        first += width * height * (upper + height / 2.0)
        upper += height
    yt = section.outline.depth - first / area
    Mcr = cracking_moment(section.concrete, Ig, yt)
    return stage_inertias(section.edition, unit, Mcr, Ig, Icr)


def deflections(
    section: Section,
    unit: Deflections,
    inertias: StageInertias,
    back: StageInertias | None = None,
) -> DeflectionResult:
    """Deflections of a span with effective inertias; compression bars are not counted on.

    Parameters
    ----------
    section : Section
        Section of the span.
    unit : Deflections
        Deflections for a stiffness of one.
    inertias : StageInertias
        Ie of the span.
    back : StageInertias, optional
        Ie of the span next to a cantilever.

    Returns
    -------
    DeflectionResult
        Immediate and long-term deflections, with lambda_Delta of five years and more.
    """
    factor = long_term_factor(np.zeros(1))
    return deflection(unit, Ec=section.concrete.Ec, inertias=inertias, factor=factor, back=back)


def within_limit(problem: BeamProblem, span: Span, found: DeflectionResult) -> FloatArray:
    """Deflection over the limit of Table 24.2.2; up to one is good.

    Parameters
    ----------
    problem : BeamProblem
        Beam, which says what is attached.
    span : Span
        Span.
    found : DeflectionResult
        Deflections.

    Returns
    -------
    ndarray, shape (n,)
        Ratio. [-]
    """
    limit = DEFLECTION_LIMITS[problem.attached.value]
    return np.abs(limit.counted(found)) / limit.allowed(span.length)
