"""Development of the bars of a beam: along the span, at its ends, and in laps.

Stirrups of at least the least area run along every span of a beam designed here, so the
first row of the short form holds wherever cover and spacing allow.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from catalogs import Bar
from engine.confinement import confinement_of, is_top_bar, meets_short_form
from engine.development import (
    LEAST_CONFINEMENT,
    MOST_CONFINEMENT,
    short_form_length,
    straight_length,
)
from engine.development_rules import development_rules
from engine.hooks import hooked_length
from engine.laps import short_form_lap_length
from engine.placement import Placement
from engine.sections import Section

_WIDE = 6.0  # spacing of hooks over db from which 2019's psi_r is 1.0, Table 25.4.3.2 [-]
_ROUNDING = 1e-9


@dataclass(frozen=True, slots=True, kw_only=True)
class EndAnchor:
    """How a bar ends inside a support.

    Attributes
    ----------
    hooked : bool
        Whether it ends in a standard hook.
    embedment : float
        From the face of the support to the end of the bar or the outside of the hook. [in or mm]
    development : float
        Length from there that develops the bar: ld or ldh. [in or mm]
    """

    hooked: bool
    embedment: float
    development: float


def development_in_layout(section: Section, placement: Placement, layer: int, bar: Bar) -> float:
    """Development length ld of the bars of one size in a layer.

    Parameters
    ----------
    section : Section
        Section of the layout.
    placement : Placement
        Bars in place.
    layer : int
        Layer, from 1.
    bar : Bar
        Size.

    Returns
    -------
    float
        The lesser of the general equation with Ktr = 0 and the short form, 25.4.2; infinite for
        bars closer to one another or to the surface than the equations go. [in or mm]
    """
    top = is_top_bar(section, placement, layer=layer)
    favourable = meets_short_form(section, placement, layer=layer, least_stirrups=True)
    table = short_form_length(
        section.concrete, section.steel, bar, favourable=favourable, top=top
    ).length
    held = confinement_of(section, placement, layer=layer, diameter=bar.diameter)
    if held.ratio < LEAST_CONFINEMENT:
        return math.inf
    general = straight_length(
        section.concrete, section.steel, bar, confinement=held.ratio, top=top
    ).length
    return min(table, general)


def shortest_development(section: Section, bar: Bar) -> float:
    """Development length below which no layout brings a size.

    Parameters
    ----------
    section : Section
        Section with a moment of the face's sign.
    bar : Bar
        Size.

    Returns
    -------
    float
        The lesser of the general equation with all the confinement that counts and the better
        row of the short form, both for a bar that is no top bar, 25.4.2. [in or mm]
    """
    general = straight_length(
        section.concrete, section.steel, bar, confinement=MOST_CONFINEMENT, top=False
    )
    table = short_form_length(section.concrete, section.steel, bar, favourable=True, top=False)
    return min(general.length, table.length)


def largest_spacing_for_grade(section: Section, placement: Placement) -> float:
    """Largest stirrup spacing along development and laps of steel of high strength.

    Parameters
    ----------
    section : Section
        Section of the layout.
    placement : Placement
        Bars in place.

    Returns
    -------
    float
        Spacing at which Ktr is 0.5 db, ACI 318-19, 9.7.1.4; infinite where nothing is asked.
        [in or mm]
    """
    largest = math.inf
    for number in range(1, len(placement.layers) + 1):
        at_one = confinement_of(section, placement, layer=number, transverse=1.0)
        if at_one.Ktr_required > 0.0:
            largest = min(largest, at_one.Ktr / at_one.Ktr_required)
    return largest


def schedule_length(section: Section, bar: Bar) -> float:
    """Development length that serves every layout of one layer at a face.

    Parameters
    ----------
    section : Section
        Section with a moment of the face's sign.
    bar : Bar
        Size.

    Returns
    -------
    float
        ld by the short form, 25.4.2, with the row that every layer with the code's gaps, the
        section's cover and the least stirrups meets. [in or mm]
    """
    return short_form_length(
        section.concrete,
        section.steel,
        bar,
        favourable=section.bar_face >= bar.diameter - _ROUNDING,
        top=is_top_bar(section),
    ).length


def lap_of_size(section: Section, bar: Bar) -> float:
    """Lap of class B that serves every layout of one layer at a face: one for each size.

    Parameters
    ----------
    section : Section
        Section with a moment of the face's sign.
    bar : Bar
        Size.

    Returns
    -------
    float
        1.3 ld by the short form, 25.5.2.1. [in or mm]

    Raises
    ------
    OutOfRangeError
        Above No. 11 (36), which 25.5.1.1 does not let lap.
    """
    return short_form_lap_length(
        section.concrete,
        section.steel,
        bar,
        favourable=section.bar_face >= bar.diameter - _ROUNDING,
        top=is_top_bar(section),
    ).length


def can_lap(section: Section, bar: Bar) -> bool:
    """Whether bars of a size may be lapped in tension, 25.5.1.1.

    Parameters
    ----------
    section : Section
        Section of the beam.
    bar : Bar
        Size.

    Returns
    -------
    bool
        False above No. 11 (ACI 318M: No. 36).
    """
    return bar.diameter <= development_rules(section.edition).largest_lapped


def hook_in_support(section: Section, bar: Bar, spacing: float, *, tied: bool = False) -> float:
    """Development length ldh of a standard hook inside a support.

    Parameters
    ----------
    section : Section
        Section of the beam; its cover to the bars counts as the side cover of the hooks.
    bar : Bar
        Size.
    spacing : float
        Least centre-to-centre spacing of the hooks. [in or mm]
    tied : bool
        Whether ties of the support enclose the hooks as 25.4.3 asks.

    Returns
    -------
    float
        ldh of 25.4.3.1. [in or mm]
    """
    wide = section.edition.year >= 2019 and spacing >= _WIDE * bar.diameter - _ROUNDING
    return hooked_length(
        section.concrete,
        section.steel,
        bar,
        side_cover=section.bar_face,
        tail_cover=section.bar_face,
        in_core=False,
        tied=tied or wide,
    ).length


def anchor_at_end(
    section: Section,
    bar: Bar,
    *,
    width: float,
    ld: float,
    spacing: float,
    least: float = 0.0,
    tied: bool = False,
) -> EndAnchor | None:
    """End of a bar that has to be developed at the face of an end support.

    Parameters
    ----------
    section : Section
        Section of the beam.
    bar : Bar
        Size.
    width : float
        Width of the support along the beam. [in or mm]
    ld : float
        Development length of the bar, straight. [in or mm]
    spacing : float
        Least centre-to-centre spacing of the bars there. [in or mm]
    least : float
        Least length into the support. [in or mm]
    tied : bool
        Whether ties of the support enclose the hooks as 25.4.3 asks.

    Returns
    -------
    EndAnchor or None
        Straight where ld fits, else a hook at the far side where ldh fits, else None. The far
        cover is that of the beam's bars.
    """
    room = width - section.bar_face
    if max(ld, least) <= room + _ROUNDING:
        return EndAnchor(hooked=False, embedment=max(ld, least), development=ld)
    ldh = hook_in_support(section, bar, spacing, tied=tied)
    if max(ldh, least) <= room + _ROUNDING:
        return EndAnchor(hooked=True, embedment=room, development=ldh)
    return None
