"""The full check of one layout in its section, one row a rule."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from enum import Enum

from engine.assessment import (
    ROUNDING,
    Assessed,
    Batch,
    assess,
    required_share,
    service_stress,
)
from engine.cover import required_cover
from engine.crack_control import largest_spacing
from engine.layouts import Layout
from engine.minimum_steel import web_for_minimum
from engine.placement import Placement, gap_fits, place
from engine.sections import Section
from engine.strength_reduction import least_strain, tension_controlled_strain
from engine.units import plain

_BARS_HELD_BY_CORNERS = 3  # two in the corners of the stirrup, one between them (9.7.6.4.4)
_OUTER_FLANGE_RATIO = 0.0018  # 24.4.3.2, referred to by 24.3.4 (318-19; from memory for 318-14)


class State(Enum):
    """Verdict of a row."""

    OK = "ok"
    FAILS = "fails"
    PROVIDE = "provide"
    """Met only if what the note asks for is provided beside this layout."""
    NOT_APPLICABLE = "not applicable"


@dataclass(frozen=True, slots=True, kw_only=True)
class Check:
    """One rule held against one layout.

    Attributes
    ----------
    id : str
        Name of the rule.
    clause : str
        Clause in the section's edition.
    quantity : str
        Kind of `demand` and `limit`: ``moment``, ``strain``, ``area``, ``length`` or ``none``.
    demand, limit : float or None
        What is asked for and what it is held against, in the edition's inner units.
    ratio : float or None
        Demand over capacity; 1.0 is the limit. None where it has no meaning.
    state : State
        Verdict.
    note : str
        What a reader needs to know beside the numbers.
    """

    id: str
    clause: str
    quantity: str = "none"
    demand: float | None = None
    limit: float | None = None
    ratio: float | None = None
    state: State
    note: str = ""

    @property
    def ok(self) -> bool:
        """Whether the rule is not broken."""
        return self.state is not State.FAILS


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
    """
    if not layouts:
        return []
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
            _strength(section, found),
            _strain(section, found),
            _minimum(section, found, required),
            _gap_row("clear_gap", placement),
            _layer_gap(section, layout),
            _arrangement(section, layout, placement, found),
            _crack_control(section, placement, stress, spacing),
            _cover(section, layout),
            _side_face(section, stress),
            _flange_steel(section),
            _opposite_gap(section),
            _compression_ties(section),
        ),
    )


def _ratio(demand: float, capacity: float) -> float | None:
    return demand / capacity if capacity > 0.0 else None


def _verdict(good: bool) -> State:
    return State.OK if good else State.FAILS


def _strength(section: Section, found: Assessed) -> Check:
    capacity = found.phi_Mn
    return Check(
        id="flexural_strength",
        clause="9.5.1.1",
        quantity="moment",
        demand=section.demand,
        limit=capacity,
        ratio=_ratio(section.demand, capacity),
        state=_verdict(found.strong),
        note=f"phi = {found.phi:.3f}",
    )


def _strain(section: Section, found: Assessed) -> Check:
    limit = least_strain(section.steel, tension_controlled=section.tension_controlled)
    strain = found.eps_t
    controlled = tension_controlled_strain(section.steel)
    if strain >= controlled * (1 - ROUNDING):
        note = "tension-controlled"
    elif strain > section.steel.eps_ty:
        note = f"transition, phi reduced; tension-controlled from {controlled:.5f}"
    else:
        note = f"compression-controlled; tension-controlled from {controlled:.5f}"
    return Check(
        id="net_tensile_strain",
        clause="9.3.3.1",
        quantity="strain",
        demand=limit,
        limit=strain,
        ratio=_ratio(limit, strain),
        state=_verdict(found.ductile),
        note=note,
    )


def _minimum(section: Section, found: Assessed, required: float | None) -> Check:
    area, least = found.As, found.As_min
    unit = section.edition.system.trade["area"]
    web = section.outline.web
    if area >= least * (1 - ROUNDING):
        note = "" if web_for_minimum(section) == web else "bw of the flange in tension"
        clause, demand, state = "9.6.1.2", least, State.OK
    else:
        # The exemption is the lesser demand here; where it fails too it is the nearer miss.
        exempt = math.inf if required is None else required * 4.0 / 3.0
        clause, demand = ("9.6.1.3", exempt) if exempt < least else ("9.6.1.2", least)
        state = _verdict(found.enough_steel)
        note = f"9.6.1.2 asks for {plain(least)} {unit}"
        if math.isfinite(exempt):
            note += f", 4/3 of the required area is {plain(exempt)} {unit}"
        if state is State.OK:
            note += "; to be kept at every section of the beam"
    return Check(
        id="minimum_steel",
        clause=clause,
        quantity="area",
        demand=demand,
        limit=area,
        ratio=_ratio(demand, area),
        state=state,
        note=note,
    )


def _gap_row(row_id: str, placement: Placement) -> Check:
    several = [
        (number, layer) for number, layer in enumerate(placement.layers, 1) if len(layer.x) > 1
    ]
    if not several:
        return Check(
            id=row_id, clause="25.2.1", state=State.NOT_APPLICABLE, note="no neighbouring bars"
        )
    number, layer = max(several, key=lambda item: item[1].gap_required / max(item[1].gap, 1e-12))
    return Check(
        id=row_id,
        clause="25.2.1",
        quantity="length",
        demand=layer.gap_required,
        limit=layer.gap,
        ratio=_ratio(layer.gap_required, layer.gap),
        state=_verdict(gap_fits(layer.gap, layer.gap_required)),
        note=f"layer {number} is the tightest" if len(placement.layers) > 1 else "",
    )


def _layer_gap(section: Section, layout: Layout) -> Check:
    least = section.edition.least_gap
    if len(layout.layers) == 1:
        return Check(id="layer_gap", clause="25.2.2", state=State.NOT_APPLICABLE, note="one layer")
    return Check(
        id="layer_gap",
        clause="25.2.2",
        quantity="length",
        demand=least,
        limit=section.layer_gap,
        ratio=least / section.layer_gap,
        state=_verdict(gap_fits(section.layer_gap, least)),
        note="above the largest bar of the layer below",
    )


def _arrangement(section: Section, layout: Layout, placement: Placement, found: Assessed) -> Check:
    faults, remarks = [], []
    below = None
    for number, layer in enumerate(layout.layers, 1):
        if layer.count < 2:
            faults.append(f"layer {number} leaves a stirrup corner without a bar (25.7.1.2)")
        if not placement.layers[number - 1].aligned:
            faults.append(f"layer {number} cannot stand on the bars of the layer below (25.2.2)")
        if sum(count % 2 for _, count in layer.groups) > 1:
            remarks.append(f"layer {number} is not symmetric")
        if below is not None and layer.largest.diameter > below.largest.diameter:
            remarks.append(f"layer {number} has larger bars than the layer below")
        below = layer
    if not found.stack_fits:
        room = section.stack_height
        taken = found.height - section.bar_face
        unit = section.length_unit
        faults.append(f"the layers are {plain(taken)} {unit} high in {plain(room)} {unit} of room")
    clause = "25.2.2" if all(layer.count >= 2 for layer in layout.layers) else "25.7.1.2"
    return Check(
        id="arrangement",
        clause=clause,
        state=_verdict(not faults),
        note="; ".join(faults + remarks),
    )


def _crack_control(section: Section, placement: Placement, fs: float, s: float) -> Check:
    layer = placement.layers[0]
    unit = section.edition.system.trade["stress"]
    basis = (
        f"2/3 fy = {plain(fs)} {unit}"
        if section.Ms is None
        else f"fs = {plain(fs)} {unit} under Ms"
    )
    if len(layer.x) == 1:
        clause, spacing = "24.3.3", section.profile.tension_width
        basis += "; one bar: width of the tension face"
    else:
        clause, spacing = "24.3.2", layer.spacing
    if section.Ms is not None and fs > section.steel.fy:
        basis += "; the steel yields at service"
    return Check(
        id="crack_control",
        clause=clause,
        quantity="length",
        demand=spacing,
        limit=s,
        ratio=_ratio(spacing, s),
        state=_verdict(spacing <= s * (1 + ROUNDING)),
        note=basis,
    )


def cover_fits(section: Section, diameter: float) -> bool:
    """Whether the cover of the stirrup and of main bars of a size is enough.

    Parameters
    ----------
    section : Section
        Section with its cover and exposure.
    diameter : float
        Diameter of the main bars. [in or mm]

    Returns
    -------
    bool
        True if both are.
    """
    return all(given >= required - ROUNDING for required, given, _ in _covers(section, diameter))


def _covers(section: Section, diameter: float) -> tuple[tuple[float, float, str], ...]:
    """Required and given cover of the stirrup and of the main bars."""
    stirrup = required_cover(section.edition, section.exposure, section.stirrup.diameter)
    main = required_cover(section.edition, section.exposure, diameter)
    return ((stirrup, section.cover, "stirrup"), (main, section.bar_face, "main bars"))


def _cover(section: Section, layout: Layout) -> Check:
    pairs = _covers(section, layout.sizes[0].diameter)
    required, given, what = max(pairs, key=lambda pair: pair[0] / max(pair[1], 1e-12))
    note = f"{what}; {section.exposure.meaning}"
    if not section.exposure_given:
        note += " (taken, since the job gives no exposure)"
    return Check(
        id="cover",
        clause=section.edition.cover_clause,
        quantity="length",
        demand=required,
        limit=given,
        ratio=_ratio(required, given),
        state=_verdict(given >= required - ROUNDING),
        note=note,
    )


def _side_face(section: Section, fs: float) -> Check:
    depth, limit = section.outline.depth, section.edition.skin_depth
    unit = section.length_unit
    if depth <= limit:
        note = f"h of {plain(depth)} {unit} is not above {plain(limit)} {unit}"
        return Check(id="side_face_steel", clause="9.7.2.3", state=State.NOT_APPLICABLE, note=note)
    # Skin bars lie inside the stirrup, so their cover is the main bars'.
    s = largest_spacing(section.edition, fs, section.bar_face)
    note = (
        f"skin steel on both side faces over h/2 = {plain(depth / 2)} {unit} from the tension face,"
        f" spacing at most {plain(s)} {unit}"
    )
    return Check(id="side_face_steel", clause="9.7.2.3", state=State.PROVIDE, note=note)


def _flange_steel(section: Section) -> Check:
    flange = section.outline.bottom if section.sagging else section.outline.top
    if flange is None:
        return Check(
            id="flange_steel",
            clause="24.3.4",
            state=State.NOT_APPLICABLE,
            note="no flange in tension",
        )
    unit = section.length_unit
    note = "bars over the web only; tension bars beyond it are to be spread over "
    if section.clear_span is None:
        note += f"the lesser of be = {plain(flange.width)} {unit} and ln/10 (ln not given)"
    else:
        tenth = section.clear_span / 10.0
        note += f"{plain(min(flange.width, tenth))} {unit} (lesser of be and ln/10)"
        if flange.width > tenth:
            outer = flange.width - max(tenth, section.outline.web)
            area = _OUTER_FLANGE_RATIO * outer * flange.thickness
            note += (
                f"; ln/10 governs: in the outer flange also bonded bars of"
                f" {plain(area)} {section.edition.system.trade['area']} in all"
            )
    return Check(id="flange_steel", clause="24.3.4", state=State.PROVIDE, note=note)


def _opposite_gap(section: Section) -> Check:
    if section.opposite is None:
        return Check(
            id="opposite_gap",
            clause="25.2.1",
            state=State.NOT_APPLICABLE,
            note="no bars given at the other face",
        )
    return _gap_row("opposite_gap", place(section.opposite_face(), section.opposite))


def _compression_ties(section: Section) -> Check:
    if not section.count_opposite or section.opposite is None:
        return Check(
            id="compression_ties",
            clause="9.7.6.4",
            state=State.NOT_APPLICABLE,
            note="no compression steel counted",
        )
    edition, unit = section.edition, section.length_unit
    largest = section.opposite.sizes[0].diameter
    least = edition.tie_large if largest > edition.tie_large_from else edition.tie_small
    dimension = min(section.outline.web, section.outline.depth)
    smallest = section.opposite.sizes[-1].diameter
    s = min(16.0 * smallest, 48.0 * section.stirrup.diameter, dimension)
    good = section.stirrup.diameter >= least - ROUNDING
    note = f"closed stirrups at most {plain(s)} {unit} apart wherever these bars are counted"
    outer = place(section.opposite_face(), section.opposite).layers[0]
    if len(outer.x) > _BARS_HELD_BY_CORNERS or (len(outer.x) > 2 and outer.gap > edition.tie_reach):
        note += "; further legs or crossties to hold the bars between the corners"
    return Check(
        id="compression_ties",
        clause="9.7.6.4",
        quantity="length",
        demand=least,
        limit=section.stirrup.diameter,
        ratio=least / section.stirrup.diameter,
        state=State.PROVIDE if good else State.FAILS,
        note=note,
    )
