"""Check rows of crack control, skin steel and flanges in tension."""

from __future__ import annotations

from engine.assessment import ROUNDING
from engine.check_row import Check, State, ratio_of, verdict
from engine.crack_control import largest_spacing
from engine.placement import Placement
from engine.sections import Section
from engine.units import plain


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


def shrinkage_ratio(section: Section) -> float:
    """Ratio of shrinkage and temperature steel, 24.4.3.2.

    Parameters
    ----------
    section : Section
        Section with its steel and edition.

    Returns
    -------
    float
        0.0018 in the 2019 editions; in those of 2014 (from memory) 0.0020 below Grade 60 (420),
        else max(0.0018 fy60/fy, 0.0014). [-]
    """
    edition, fy = section.edition, section.steel.fy
    if edition.year != 2014:
        return 0.0018
    if fy < edition.eps_ty_permitted_for:
        return 0.0020
    return max(0.0018 * edition.eps_ty_permitted_for / fy, 0.0014)


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
    unit, web = section.length_unit, section.outline.web
    note = f"all bars lie over the web; be = {plain(flange.width)} {unit}"
    state = State.PROVIDE
    if section.clear_span is None:
        note += ", and where it exceeds ln/10 (ln not given) bonded bars in the outer flange"
    elif flange.width <= section.clear_span / 10.0:
        state = State.OK
        note += f" does not exceed ln/10 = {plain(section.clear_span / 10.0)} {unit}"
    else:
        tenth = section.clear_span / 10.0
        outer = flange.width - max(tenth, web)
        area = shrinkage_ratio(section) * outer * flange.thickness
        note += (
            f" exceeds ln/10 = {plain(tenth)} {unit}: bonded bars of {plain(area)}"
            f" {section.edition.system.trade['area']} in all in the outer flange (24.4.3.2)"
        )
    return Check(id="flange_steel", clause="24.3.4", state=state, note=note)
