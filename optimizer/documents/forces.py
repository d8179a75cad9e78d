"""The forces behind a checked layout, bar group by bar group, for the worked check.

The engine solves the equilibrium; here its terms are spelled out at the neutral axis it
found, so that a reader can add them up.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from catalogs import Bar
from engine import CheckedLayout, CrackedSection, Section, cracked_section, place
from engine.materials import EPS_CU
from engine.strength import steel_stress

_YIELD = 1.0 - 1e-9  # share of fy from which a bar counts as yielding


@dataclass(frozen=True, slots=True, kw_only=True)
class BarForce:
    """Bars of one size in one layer at crushing.

    Attributes
    ----------
    place : str
        ``layer 1``, ``opposite 1``.
    bar : Bar
        Size.
    count : int
        Number of bars.
    own : bool
        Whether they are bars of the layout, not counted ones opposite.
    area, depth : float
        Area, and distance of the centroid from the compression face. [in^2 or mm^2], [in or mm]
    strain, stress, force : float
        Tension positive. [-], [psi or MPa], [lbf or N]
    displaced, displaced_depth : float
        Concrete that the bars replace within the block, and its centroid.
        [in^2 or mm^2], [in or mm]
    """

    place: str
    bar: Bar
    count: int
    own: bool
    area: float
    depth: float
    strain: float
    stress: float
    force: float
    displaced: float
    displaced_depth: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Forces:
    """All forces of a section at crushing.

    Attributes
    ----------
    bars : tuple of BarForce
        Layer 1 first; counted bars opposite last.
    block_area, block_depth : float
        Area of the block, and depth of its centroid. [in^2 or mm^2], [in or mm]
    concrete, concrete_depth : float
        Compression of the concrete less what bars displace, and where it acts.
        [lbf or N], [in or mm]
    """

    bars: tuple[BarForce, ...]
    block_area: float
    block_depth: float
    concrete: float
    concrete_depth: float

    @property
    def steel(self) -> float:
        """Sum of the bars' forces, tension positive. [lbf or N]"""
        return sum(bar.force for bar in self.bars)

    @property
    def displaced(self) -> float:
        """Area of the concrete that bars replace within the block. [in^2 or mm^2]"""
        return sum(bar.displaced for bar in self.bars)

    @property
    def moment(self) -> float:
        """Moment of all forces about the compression face. [lbf*in or N*mm]"""
        steel = sum(bar.force * bar.depth for bar in self.bars)
        return steel - self.concrete * self.concrete_depth


def yields(force: BarForce, section: Section) -> bool:
    """Whether bars are at yield in tension.

    Parameters
    ----------
    force : BarForce
        Bars of one size in one layer.
    section : Section
        Section with its steel.

    Returns
    -------
    bool
        True at or beyond the yield strain.
    """
    return force.stress >= section.steel.fy * _YIELD


def forces(checked: CheckedLayout) -> Forces:
    """Spell out the forces of a layout at its neutral axis.

    Parameters
    ----------
    checked : CheckedLayout
        Layout with its strength.

    Returns
    -------
    Forces
        Bars and concrete.
    """
    section = checked.section
    bars = tuple(
        _bar_force(checked, place, bar, count, own, depth)
        for place, bar, count, own, depth in _groups(checked)
    )
    a = np.array([checked.a])
    area = float(section.profile.area_above(a)[0])
    first = float(section.profile.moment_above(a)[0])
    net = area - sum(bar.displaced for bar in bars)
    net_first = first - sum(bar.displaced * bar.displaced_depth for bar in bars)
    return Forces(
        bars=bars,
        block_area=area,
        block_depth=first / area,
        concrete=section.concrete.block_stress * net,
        concrete_depth=net_first / net,
    )


def _groups(checked: CheckedLayout) -> list[tuple[str, Bar, int, bool, float]]:
    section = checked.section
    found = []
    placed = zip(checked.layout.layers, checked.placement.layers, strict=True)
    for number, (layer, at) in enumerate(placed, 1):
        for bar, count in layer.groups:
            depth = section.outline.depth - at.bottom - bar.diameter / 2
            found.append((f"layer {number}", bar, count, True, depth))
    if section.opposite is not None and section.count_opposite:
        other = place(section.opposite_face(), section.opposite)
        for number, (layer, at) in enumerate(
            zip(section.opposite.layers, other.layers, strict=True), 1
        ):
            for bar, count in layer.groups:
                depth = at.bottom + bar.diameter / 2
                found.append((f"opposite {number}", bar, count, False, depth))
    return found


def _bar_force(
    checked: CheckedLayout, where: str, bar: Bar, count: int, own: bool, depth: float
) -> BarForce:
    stress = float(steel_stress(checked.section.steel, np.array(depth), np.array(checked.c)))
    area = bar.area * count
    upper = depth - bar.diameter / 2
    height = min(max(checked.a - upper, 0.0), bar.diameter)
    return BarForce(
        place=where,
        bar=bar,
        count=count,
        own=own,
        area=area,
        depth=depth,
        strain=EPS_CU * (depth - checked.c) / checked.c,
        stress=stress,
        force=area * stress,
        displaced=area * height / bar.diameter,
        displaced_depth=upper + height / 2,
    )


def cracked(checked: CheckedLayout, bars: tuple[BarForce, ...]) -> CrackedSection:
    """Elastic cracked section of a layout, as crack control uses it.

    Parameters
    ----------
    checked : CheckedLayout
        Layout.
    bars : tuple of BarForce
        Its bars, and the counted ones opposite.

    Returns
    -------
    CrackedSection
        Neutral axis and inertia, arrays of one.
    """
    section = checked.section
    n = section.steel.Es / section.concrete.Ec
    transformed = [(n if bar.own else n - 1.0) * bar.area for bar in bars]
    depth = [bar.depth for bar in bars]
    return cracked_section(section.profile, np.array([transformed]), np.array([depth]))
