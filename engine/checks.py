"""The full check of layouts in their section: every rule, one row each."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from engine import capacity_checks, crack_checks, detailing_checks
from engine.assessment import Assessed, assess, required_share
from engine.batch import Batch
from engine.check_row import Check
from engine.crack_control import largest_spacing
from engine.errors import LayoutError
from engine.layouts import Layout
from engine.placement import Placement, place
from engine.sections import Section
from engine.service import service_stress


@dataclass(frozen=True, slots=True, kw_only=True)
class CheckedLayout:
    """A layout in place with its strength and every check.

    Attributes
    ----------
    section : Section
        Section checked.
    layout : Layout
        Bars.
    placement : Placement
        Where they lie.
    As, As_required : float, float or None
        Area, and the area that brings phi Mn to Mu at the same depths; None where no amount
        of the same bars does. [in^2 or mm^2]
    d, dt : float
        Depth of the centroid of all bars, and of layer 1. [in or mm]
    Mn, phi, phi_Mn : float
        Nominal moment, reduction factor, design strength. [lbf*in or N*mm], [-]
    a, c : float
        Depth of block and neutral axis. [in or mm]
    eps_t : float
        Net tensile strain at dt. [-]
    service_stress, largest_spacing : float
        fs and s of 24.3.2. [psi or MPa], [in or mm]
    checks : tuple of Check
        All rows.
    """

    section: Section
    layout: Layout
    placement: Placement
    As: float
    As_required: float | None
    d: float
    dt: float
    Mn: float
    phi: float
    phi_Mn: float
    a: float
    c: float
    eps_t: float
    service_stress: float
    largest_spacing: float
    checks: tuple[Check, ...]

    @property
    def ok(self) -> bool:
        """Whether no rule is broken."""
        return all(check.ok for check in self.checks)

    @property
    def layer_depths(self) -> tuple[float, ...]:
        """Depth of the centroid of each layer. [in or mm]"""
        depths = []
        for layer, placed in zip(self.layout.layers, self.placement.layers, strict=True):
            area = sum(bar.area * count for bar, count in layer.groups)
            first = sum(bar.area * count * bar.diameter / 2 for bar, count in layer.groups)
            depths.append(self.section.outline.depth - placed.bottom - first / area)
        return tuple(depths)


def check_layout(section: Section, layout: Layout) -> CheckedLayout:
    """Check one layout against every rule.

    Parameters
    ----------
    section : Section
        Section with its demand.
    layout : Layout
        Bars at the tension face.

    Returns
    -------
    CheckedLayout
        Strength, positions and all rows; nothing is left out, a rule that does not apply
        says so.
    """
    return check_layouts(section, [layout])[0]


def check_layouts(section: Section, layouts: Sequence[Layout]) -> list[CheckedLayout]:
    """Check several layouts of one section; see `check_layout`.

    Parameters
    ----------
    section : Section
        Section with its demand.
    layouts : sequence of Layout
        Bars at the tension face.

    Returns
    -------
    list of CheckedLayout
        One for each layout, in order.

    Raises
    ------
    LayoutError
        If a layout's bars are in the other unit system than the section.
    """
    if not layouts:
        return []
    units = section.edition.units
    foreign = [bar for layout in layouts for bar in layout.sizes if bar.system != units]
    if foreign:
        msg = f"{foreign[0].designation} has {foreign[0].system} units; allowed: {units}"
        raise LayoutError(msg)
    batch = Batch.of(layouts)
    found = assess(section, batch)
    shares = required_share(section, batch)
    stresses = service_stress(section, batch)
    return [
        _checked(section, layout, found.row(index), float(shares[index]), float(stresses[index]))
        for index, layout in enumerate(layouts)
    ]


def _checked(
    section: Section, layout: Layout, found: Assessed, share: float, stress: float
) -> CheckedLayout:
    placement = place(section, layout)
    required = found.As * share if math.isfinite(share) else None
    spacing = largest_spacing(section.edition, stress, section.bar_face)
    return CheckedLayout(
        section=section,
        layout=layout,
        placement=placement,
        As=found.As,
        As_required=required,
        d=found.d,
        dt=found.dt,
        Mn=found.Mn,
        phi=found.phi,
        phi_Mn=found.phi_Mn,
        a=found.a,
        c=found.c,
        eps_t=found.eps_t,
        service_stress=stress,
        largest_spacing=spacing,
        checks=(
            capacity_checks.flexural_strength(section, found),
            capacity_checks.net_tensile_strain(section, found),
            capacity_checks.minimum_steel(section, found, required),
            detailing_checks.gap_row("clear_gap", section, placement),
            detailing_checks.layer_gap(section, layout),
            detailing_checks.arrangement(section, layout, placement, found),
            crack_checks.crack_control(section, placement, stress, spacing),
            detailing_checks.cover(section, layout),
            crack_checks.side_face_steel(section, stress),
            crack_checks.flange_steel(section),
            *detailing_checks.section_rows(section),
        ),
    )
