"""Check rows of the bars' places: gaps, layers, stirrup corners, cover, bars opposite."""

from __future__ import annotations

from dataclasses import replace

from engine.assessment import ROUNDING, Assessed
from engine.check_row import Check, State, ratio_of, verdict
from engine.cover import required_cover
from engine.layouts import Layout
from engine.placement import Placement, gap_fits, place
from engine.sections import Section
from engine.units import plain

_OFF_CENTRE = 1e-6  # sum of the bars' distances from the centreline, zero by symmetry
_BARS_HELD_BY_CORNERS = 3  # two in the corners of the stirrup, one between them (9.7.6.4.4)


def gap_row(row_id: str, section: Section, placement: Placement) -> Check:
    """Clear gaps within layers, 25.2.1.

    Parameters
    ----------
    row_id : str
        Id of the row.
    section : Section
        Section with its aggregate.
    placement : Placement
        Where the bars lie.

    Returns
    -------
    Check
        The row.
    """
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
        ratio=ratio_of(layer.gap_required, layer.gap),
        state=verdict(gap_fits(layer.gap, layer.gap_required)),
        note=_governing(section, layer.gap_required, max(layer.diameters))
        + (f"; layer {number} is the tightest" if len(placement.layers) > 1 else ""),
    )


def _governing(section: Section, required: float, diameter: float) -> str:
    """Which of the terms of a required gap is the largest."""
    if gap_fits(section.edition.least_gap, required):
        return f"{plain(section.edition.least_gap)} {section.length_unit} governs"
    if gap_fits(4.0 / 3.0 * section.aggregate, required):
        return "4/3 of the aggregate governs"
    if gap_fits(diameter, required):
        return "db governs"
    return "min_gap of the job, more than 25.2.1 asks"


def layer_gap(section: Section, layout: Layout) -> Check:
    """Clear gap between layers, 25.2.2.

    Parameters
    ----------
    section : Section
        Section with its demand.
    layout : Layout
        Bars at the tension face.

    Returns
    -------
    Check
        The row.
    """
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
        state=verdict(gap_fits(section.layer_gap, least)),
        note="above the largest bar of the layer below",
    )


def _stacking_faults(layout: Layout, placement: Placement) -> list[str]:
    """Stirrup corners left without a bar, and layers off the lines of the layer below."""
    faults = []
    for number, (layer, placed) in enumerate(zip(layout.layers, placement.layers, strict=True), 1):
        if layer.count < 2:
            faults.append(f"layer {number} leaves a stirrup corner without a bar (25.7.1.2)")
        if not placed.aligned:
            faults.append(f"layer {number} cannot stand on the bars of the layer below (25.2.2)")
    return faults


def arrangement(section: Section, layout: Layout, placement: Placement, found: Assessed) -> Check:
    """Layers in line, stirrup corners filled, stack within the depth.

    Parameters
    ----------
    section : Section
        Section with its demand.
    layout : Layout
        Bars at the tension face.
    placement : Placement
        Where the bars lie.
    found : Assessed
        The layout's strength and verdicts.

    Returns
    -------
    Check
        The row.
    """
    faults = _stacking_faults(layout, placement)
    remarks = []
    for number, layer in enumerate(layout.layers, 1):
        x = placement.layers[number - 1].x
        odd = sum(count % 2 for _, count in layer.groups)
        if odd > 1 or abs(sum(x)) > _OFF_CENTRE:
            remarks.append(f"layer {number} is not symmetric")
        below = layout.layers[number - 2] if number > 1 else layer
        if layer.largest.diameter > below.largest.diameter:
            remarks.append(f"layer {number} has larger bars than the layer below")
    if not found.stack_fits:
        room = section.stack_height
        taken = found.height - section.bar_face
        unit = section.length_unit
        faults.append(f"the layers are {plain(taken)} {unit} high in {plain(room)} {unit} of room")
    clause = "25.2.2" if all(layer.count >= 2 for layer in layout.layers) else "25.7.1.2"
    return Check(
        id="arrangement",
        clause=clause,
        state=verdict(not faults),
        note="; ".join(faults + remarks),
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


def cover(section: Section, layout: Layout) -> Check:
    """Cover of stirrup and main bars against the table for the exposure.

    Parameters
    ----------
    section : Section
        Section with its demand.
    layout : Layout
        Bars at the tension face.

    Returns
    -------
    Check
        The row.
    """
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
        ratio=ratio_of(required, given),
        state=verdict(given >= required - ROUNDING),
        note=note,
    )


def opposite_bars(section: Section) -> Check:
    """Check the bars given at the other face: gaps, lines, stirrup corners and cover.

    Parameters
    ----------
    section : Section
        Section with or without such bars.

    Returns
    -------
    Check
        One row; it does not depend on the layout at the tension face.
    """
    row_id = "opposite_bars"
    if section.opposite is None:
        note = "no bars given at the other face"
        return Check(id=row_id, clause="25.2", state=State.NOT_APPLICABLE, note=note)
    placement = place(section.opposite_face(), section.opposite)
    row = gap_row(row_id, section, placement)
    faults = _stacking_faults(section.opposite, placement)
    if not cover_fits(section, section.opposite.sizes[0].diameter):
        faults.append(f"too little cover ({section.edition.cover_clause})")
    if not faults:
        return replace(row, state=State.OK) if row.state is State.NOT_APPLICABLE else row
    note = "; ".join([row.note, *faults] if row.note else faults)
    return replace(row, state=State.FAILS, note=note)


def section_rows(section: Section) -> tuple[Check, ...]:
    """Rows that no layout at the tension face changes; where one fails, every layout does.

    Parameters
    ----------
    section : Section
        Section with its demand.

    Returns
    -------
    tuple of Check
        Bars given at the other face, and the support of counted ones.
    """
    return (opposite_bars(section), compression_ties(section))


def compression_ties(section: Section) -> Check:
    """Lateral support of counted compression bars, 9.7.6.4.

    Parameters
    ----------
    section : Section
        Section with its demand.

    Returns
    -------
    Check
        The row.
    """
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
