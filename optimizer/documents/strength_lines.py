"""Lines of the worked check about block, strains, strength and minimum steel."""

from __future__ import annotations

from itertools import accumulate

import numpy as np

from engine import CheckedLayout, Section
from engine.materials import BLOCK, EPS_CU
from engine.strength_reduction import (
    PHI_COMPRESSION,
    PHI_TENSION,
    least_strain,
    tension_controlled_strain,
)
from engine.units import plain
from optimizer.documents.forces import Forces, yields
from optimizer.documents.lines import Line, compared, row_of
from optimizer.documents.wording import Figures


def equilibrium(checked: CheckedLayout, found: Forces) -> tuple[Line, ...]:
    """Lines from the bars to block and neutral axis.

    Parameters
    ----------
    checked : CheckedLayout
        Layout with its strength.
    found : Forces
        Its forces.

    Returns
    -------
    tuple of Line
        Steel, depths, beta1, a and c.
    """
    section = checked.section
    figures = Figures(section.edition)
    own = [bar for bar in found.bars if bar.own]
    areas = [f"{bar.count} × {plain(bar.bar.area)}" for bar in own]
    first = [bar for bar in own if bar.place == "layer 1"]
    steel = Line(
        subject="Steel area",
        formula="A_{s} = Σ n A_{b}",
        numbers=" + ".join(areas),
        result=figures.of("area", checked.As),
    )
    depths = [
        Line(
            subject=subject,
            formula=f"{symbol} = Σ A_{{i}} d_{{i}} / Σ A_{{i}}",
            numbers=f"({_terms([(bar.area, bar.depth) for bar in bars])})"
            f" / {plain(sum(bar.area for bar in bars))}",
            result=figures.length(value),
        )
        for subject, symbol, bars, value in (
            ("Effective depth, all tension bars", "d", own, checked.d),
            ("Depth of layer 1", "d_{t}", first, checked.dt),
        )
    ]
    return (steel, *depths, _beta1(section), *_block(checked, found, figures))


def _terms(pairs: list[tuple[float, float]]) -> str:
    return " + ".join(f"{plain(one)} × {plain(other)}" for one, other in pairs)


def _beta1(section: Section) -> Line:
    edition = section.edition
    start, step = plain(edition.beta1_start), plain(edition.beta1_step)
    return Line(
        subject="Block over neutral axis",
        clause="22.2.2.4.3",
        formula=f"β_{{1}} = 0.85 − 0.05 (f′_{{c}} − {start})/{step}, from 0.85 down to 0.65",
        numbers=f"0.85 − 0.05 ({plain(section.concrete.fc)} − {start})/{step}, within 0.65 to 0.85",
        result=plain(section.concrete.beta1),
    )


def _block(checked: CheckedLayout, found: Forces, figures: Figures) -> tuple[Line, ...]:
    """A and c: in closed form where every bar yields and none lies in the block."""
    section = checked.section
    beta1 = section.concrete.beta1
    closed = found.displaced == 0.0 and all(yields(bar, section) for bar in found.bars)
    if not closed:
        balance = Line(
            subject="Equilibrium, strains from the neutral axis",
            clause="22.2.1",
            formula="Σ A_{i} f_{si} = 0.85 f′_{c} (A_{c} − Σ A_{displaced})",
            numbers=f"{figures.of('force', found.steel)} = {BLOCK:g} × {plain(section.concrete.fc)}"
            f" × ({plain(found.block_area)} − {plain(found.displaced)})"
            f" = {figures.of('force', found.concrete)}",
            equal=False,
            result=f"c = {figures.length(checked.c)}",
            note="c is the depth at which both sides are equal, found by iteration; forces of the"
            " bars in the table below",
        )
        block = Line(
            subject="Depth of the block",
            clause="22.2.2.4.1",
            formula="a = β_{1} c, not beyond h",
            numbers=f"{plain(beta1)} × {plain(checked.c)}",
            result=figures.length(checked.a),
        )
        return balance, block
    fy, fc = plain(section.steel.fy), plain(section.concrete.fc)
    axis = Line(
        subject="Depth of the neutral axis",
        clause="22.2.2.4.1",
        formula="c = a / β_{1}",
        numbers=f"{plain(checked.a)} / {plain(beta1)}",
        result=figures.length(checked.c),
    )
    width, height = section.profile.strips[0]
    if checked.a <= height * (1.0 + 1e-12):
        block = Line(
            subject="Depth of the block",
            clause="22.2.2.4.1",
            formula="a = A_{s} f_{y} / (0.85 f′_{c} b)",
            numbers=f"{plain(checked.As)} × {fy} / ({BLOCK:g} × {fc} × {plain(width)})",
            result=figures.length(checked.a),
            note="every bar yields, as the table below shows",
        )
        return block, axis
    area = Line(
        subject="Area of the block",
        clause="22.2.2.4.1",
        formula="A_{c} = A_{s} f_{y} / (0.85 f′_{c})",
        numbers=f"{plain(checked.As)} × {fy} / ({BLOCK:g} × {fc})",
        result=figures.of("area", found.block_area),
        note="every bar yields, as the table below shows",
    )
    above, strip = _strip_of(section, checked.a)
    upper = float(section.profile.area_above(np.array([above]))[0])
    block = Line(
        subject="Depth of the block, which reaches beyond the flange",
        clause="22.2.2.4.1",
        formula="a = h_{f} + (A_{c} − A_{f}) / b",
        numbers=f"{plain(above)} + ({plain(found.block_area)} − {plain(upper)}) / {plain(strip)}",
        result=figures.length(checked.a),
        note="h_{f}, A_{f}: depth and area of what lies above the strip of width b",
    )
    return area, block, axis


def _strip_of(section: Section, a: float) -> tuple[float, float]:
    """Upper edge and width of the strip that a depth lies in."""
    strips = section.profile.strips
    edges = accumulate((height for _, height in strips), initial=0.0)
    return next(
        (edge, width)
        for edge, (width, height) in zip(edges, strips, strict=False)
        if a <= edge + height
    )


def strength(checked: CheckedLayout, found: Forces) -> tuple[Line, ...]:
    """Lines from the forces to phi Mn.

    Parameters
    ----------
    checked : CheckedLayout
        Layout with its strength.
    found : Forces
        Its forces.

    Returns
    -------
    tuple of Line
        Mn, eps_t, phi and the two verdicts.
    """
    section = checked.section
    figures = Figures(section.edition)
    demand = section.demand
    terms = " + ".join(
        f"{figures.bare('force', bar.force)} × {plain(bar.depth)}" for bar in found.bars
    ).replace("+ −", "− ")
    concrete = f"{figures.bare('force', found.concrete)} × {plain(found.concrete_depth)}"
    limit = least_strain(section.steel, tension_controlled=section.tension_controlled)
    strain_row = row_of(checked, "net_tensile_strain")
    moment_row = row_of(checked, "flexural_strength")
    return (
        Line(
            subject="Nominal strength, moments about the compression face",
            clause="22.2",
            formula="M_{n} = Σ T_{i} d_{i} − C y_{C}",
            numbers=f"({terms} − {concrete}) / {figures.per_moment:g}",
            result=figures.moment(checked.Mn),
            note="C = 0.85 f′_{c} (A_{c} − Σ A_{displaced}), y_{C} its depth"
            if found.displaced
            else "C = 0.85 f′_{c} A_{c}, y_{C} its depth",
        ),
        Line(
            subject="Net tensile strain",
            clause=strain_row.clause,
            formula="ε_{t} = 0.003 (d_{t} − c) / c",
            numbers=f"{EPS_CU:g} ({plain(checked.dt)} − {plain(checked.c)}) / {plain(checked.c)}",
            result=f"{checked.eps_t:.5f} {'≥' if strain_row.ok else '<'} {limit:.5f}",
            note=strain_row.note,
            state=strain_row.state,
            check="net_tensile_strain",
        ),
        _phi(checked),
        Line(
            subject="Design strength",
            clause=moment_row.clause,
            formula="φ M_{n}, at least M_{u}",
            numbers=f"{checked.phi:.4g} × {figures.moment(checked.Mn)}",
            result=compared(
                figures.system.to_trade("moment", checked.phi_Mn),
                figures.system.to_trade("moment", demand),
                figures.unit("moment"),
                least=True,
                ok=moment_row.ok,
            ),
            state=moment_row.state,
            check="flexural_strength",
        ),
    )


def _phi(checked: CheckedLayout) -> Line:
    steel = checked.section.steel
    equal = True
    limit = tension_controlled_strain(steel)
    spread = PHI_TENSION - PHI_COMPRESSION
    if checked.eps_t >= limit:
        formula = f"φ = {PHI_TENSION:.2f} where ε_{{t}} ≥ {limit:.5f}"
        numbers, equal = "tension-controlled", False
    elif checked.eps_t <= steel.eps_ty:
        formula = f"φ = {PHI_COMPRESSION:.2f} where ε_{{t}} ≤ ε_{{ty}} = {steel.eps_ty:.5f}"
        numbers, equal = "compression-controlled", False
    else:
        formula = (
            f"φ = {PHI_COMPRESSION:.2f} + {spread:.2f} (ε_{{t}} − ε_{{ty}})"
            f" / ({limit:.5f} − ε_{{ty}})"
        )
        numbers = (
            f"{PHI_COMPRESSION:.2f} + {spread:.2f} ({checked.eps_t:.5f} − {steel.eps_ty:.5f})"
            f" / ({limit:.5f} − {steel.eps_ty:.5f})"
        )
    return Line(
        subject="Strength reduction factor",
        clause="21.2.2",
        formula=formula,
        numbers=numbers,
        equal=equal,
        result=f"{checked.phi:.3f}",
    )
