"""Lap splices of deformed bars in tension, ACI 318, 25.5."""

from __future__ import annotations

from catalogs import Bar
from engine.development import Development, short_form_length, straight_length
from engine.development_rules import development_rules
from engine.editions import Edition
from engine.errors import OutOfRangeError
from engine.materials import Concrete, Steel

CLASS_B = 1.3
"""Lap of class B over ld, Table 25.5.2.1. [-]"""


def lap_length(
    concrete: Concrete,
    steel: Steel,
    bar: Bar,
    *,
    confinement: float,
    top: bool,
    coated: bool = False,
    widely_spaced: bool = False,
    class_a: bool = False,
) -> Development:
    """Tension lap of two bars of one size, ld by the general equation.

    Parameters
    ----------
    concrete, steel : Concrete, Steel
        Materials.
    bar : Bar
        Size of the bars.
    confinement : float
        (cb + Ktr)/db of the bars spliced; more than 2.5 counts as 2.5. [-]
    top, coated, widely_spaced : bool
        As in `straight_length`.
    class_a : bool
        Whether at most half of the steel is lapped there and twice what is required is
        provided, Table 25.5.2.1.

    Returns
    -------
    Development
        1.3 ld, or 1.0 ld in class A, of ld without its own minimum; at least 12 in or 300 mm.

    Raises
    ------
    OutOfRangeError
        As `straight_length`, and above No. 11 (36), which 25.5.1.1 does not let lap.
    """
    straight = straight_length(
        concrete,
        steel,
        bar,
        confinement=confinement,
        top=top,
        coated=coated,
        widely_spaced=widely_spaced,
    )
    return _lap(straight, concrete.edition, bar, class_a=class_a)


def short_form_lap_length(
    concrete: Concrete,
    steel: Steel,
    bar: Bar,
    *,
    favourable: bool,
    top: bool,
    coated: bool = False,
    widely_spaced: bool = False,
    class_a: bool = False,
) -> Development:
    """Tension lap of two bars of one size, ld by the table that needs no Ktr.

    Parameters
    ----------
    concrete, steel : Concrete, Steel
        Materials.
    bar : Bar
        Size of the bars.
    favourable, top, coated, widely_spaced : bool
        As in `short_form_length`.
    class_a : bool
        As in `lap_length`.

    Returns
    -------
    Development
        1.3 ld, or 1.0 ld in class A, of ld without its own minimum; at least 12 in or 300 mm.

    Raises
    ------
    OutOfRangeError
        As `short_form_length`, and above No. 11 (36), which 25.5.1.1 does not let lap.
    """
    straight = short_form_length(
        concrete,
        steel,
        bar,
        favourable=favourable,
        top=top,
        coated=coated,
        widely_spaced=widely_spaced,
    )
    return _lap(straight, concrete.edition, bar, class_a=class_a)


def _lap(straight: Development, edition: Edition, bar: Bar, *, class_a: bool) -> Development:
    rules = development_rules(edition)
    if bar.diameter > rules.largest_lapped:
        largest = "#11" if edition.units == "us" else "No. 36"
        msg = (
            f"got {bar.designation} for a tension lap; allowed: up to {largest} (25.5.1.1);"
            " hint: splice it mechanically"
        )
        raise OutOfRangeError(msg, what="bar")
    share = 1.0 if class_a else CLASS_B
    unlimited = share * straight.unlimited
    return Development(
        length=max(unlimited, rules.least),
        unlimited=unlimited,
        factors={**straight.factors, "lap": share},
        clause="Table 25.5.2.1",
    )
