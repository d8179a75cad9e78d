"""Check rows of crack control, skin steel and flanges in tension."""

from __future__ import annotations

from engine.assessment import ROUNDING
from engine.check_row import Check, State, ratio_of, verdict
from engine.crack_control import largest_spacing
from engine.placement import Placement
from engine.sections import Section
from engine.units import plain

_OUTER_FLANGE_RATIO = 0.0018  # 24.4.3.2, referred to by 24.3.4 (318-19; from memory for 318-14)


def crack_control(section: Section, placement: Placement, fs: float, s: float) -> Check:
    """Spacing of the bars nearest the tension face, 24.3.2.

    Parameters
    ----------
    section : Section
        Section with its demand.
    placement : Placement
        Where the bars lie.
    fs : float
        Steel stress at service. [psi or MPa]
    s : float
        Largest spacing at that stress. [in or mm]

    Returns
    -------
    Check
        The row.
    """
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
    if section.Ms is not None and section.concrete.lightweight < 1.0:
        basis += "; Ec of normalweight concrete" if section.concrete.modulus is None else ""
    return Check(
        id="crack_control",
        clause=clause,
        quantity="length",
        demand=spacing,
        limit=s,
        ratio=ratio_of(spacing, s),
        state=verdict(spacing <= s * (1 + ROUNDING)),
        note=basis,
    )


def side_face_steel(section: Section, fs: float) -> Check:
    """Whether 9.7.2.3 asks for skin steel, and what it asks for.

    Parameters
    ----------
    section : Section
        Section with its demand.
    fs : float
        Steel stress at service. [psi or MPa]

    Returns
    -------
    Check
        The row.
    """
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


def flange_steel(section: Section) -> Check:
    """What 24.3.4 asks for where a flange is in tension.

    Parameters
    ----------
    section : Section
        Section with its demand.

    Returns
    -------
    Check
        The row.
    """
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
