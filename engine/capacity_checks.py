"""Check rows of strength, ductility and minimum steel."""

from __future__ import annotations

import math

from engine.assessment import ROUNDING, Assessed
from engine.check_row import Check, State, ratio_of, verdict
from engine.minimum_steel import web_for_minimum
from engine.sections import Section
from engine.strength_reduction import least_strain, tension_controlled_strain
from engine.units import plain


def flexural_strength(section: Section, found: Assessed) -> Check:
    """Phi Mn against Mu, 9.5.1.1.

    Parameters
    ----------
    section : Section
        Section with its demand.
    found : Assessed
        The layout's strength and verdicts.

    Returns
    -------
    Check
        The row.
    """
    capacity = found.phi_Mn
    return Check(
        id="flexural_strength",
        clause="9.5.1.1",
        quantity="moment",
        demand=section.demand,
        limit=capacity,
        ratio=ratio_of(section.demand, capacity),
        state=verdict(found.strong),
        note=f"phi = {found.phi:.3f}",
    )


def net_tensile_strain(section: Section, found: Assessed) -> Check:
    """eps_t against its limit, 9.3.3.1.

    Parameters
    ----------
    section : Section
        Section with its demand.
    found : Assessed
        The layout's strength and verdicts.

    Returns
    -------
    Check
        The row.
    """
    limit = least_strain(section.steel, tension_controlled=section.tension_controlled)
    strain = found.eps_t
    controlled = tension_controlled_strain(section.steel)
    clause = "9.3.3.1"
    if strain >= controlled * (1 - ROUNDING):
        note = "tension-controlled"
    elif strain > section.steel.eps_ty:
        note = f"transition, phi reduced; tension-controlled from {controlled:.5f}"
    else:
        note = f"compression-controlled; tension-controlled from {controlled:.5f}"
    if section.edition.year == 2014 and section.tension_controlled:
        # 318-14 itself stops at 0.004; more is what the job asks for.
        clause = "21.2.2"
        note += "; 9.3.3.1 permits 0.004 (tension_controlled = false)"
    return Check(
        id="net_tensile_strain",
        clause=clause,
        quantity="strain",
        demand=limit,
        limit=strain,
        ratio=ratio_of(limit, strain),
        state=verdict(found.ductile),
        note=note,
    )


def minimum_steel(section: Section, found: Assessed, required: float | None) -> Check:
    """As against 9.6.1.2, or against the exemption of 9.6.1.3.

    Parameters
    ----------
    section : Section
        Section with its demand.
    found : Assessed
        The layout's strength and verdicts.
    required : float or None
        Area that brings phi Mn to Mu, if any amount does. [in^2 or mm^2]

    Returns
    -------
    Check
        The row.
    """
    area, least = found.As, found.As_min
    unit = section.edition.system.trade["area"]
    web = section.outline.web
    if area >= least * (1 - ROUNDING):
        unit_in = section.length_unit
        if web_for_minimum(section) != web:
            note = f"bw taken as min(bf, 2 bw) = {plain(web_for_minimum(section))} {unit_in}"
        elif section.profile.tension_width > web:
            note = "flange in tension: min(bf, 2 bw) counts if the beam is statically determinate"
        else:
            note = ""
        clause, demand, state = "9.6.1.2", least, State.OK
    else:
        # The exemption is the lesser demand here; where it fails too it is the nearer miss.
        exempt = math.inf if required is None else required * 4.0 / 3.0
        clause, demand = ("9.6.1.3", exempt) if exempt < least else ("9.6.1.2", least)
        state = verdict(found.enough_steel)
        note = f"9.6.1.2 asks for {plain(least)} {unit}"
        if math.isfinite(exempt):
            note += f", 4/3 of the required area is {plain(exempt)} {unit}"
        if state is State.OK:
            state = State.PROVIDE
            note += "; the exemption has to hold at every section of the beam"
    return Check(
        id="minimum_steel",
        clause=clause,
        quantity="area",
        demand=demand,
        limit=area,
        ratio=ratio_of(demand, area),
        state=state,
        note=note,
    )
