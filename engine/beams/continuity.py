"""Bars that run into supports and through the beam: 9.7.3.8 and structural integrity, 9.7.7."""

from __future__ import annotations

from dataclasses import dataclass

from engine.editions import Edition


@dataclass(frozen=True, slots=True, kw_only=True)
class ContinuityRules:
    """Printed figures of 9.7.3.8 and 9.7.7 in one system. Lengths [in or mm].

    Attributes
    ----------
    into_support : float
        Least length of bottom bars past the face of a support, 9.7.3.8.1 and .2. [in or mm]
    at_simple_support, at_other_support : float
        Least share of the largest sagging steel that runs into a support. [-]
    past_inflection : float
        Least share of the hogging steel that runs past the inflection point, 9.7.3.8.4. [-]
    through_bottom, through_top : float
        Least share of the largest sagging and of the hogging steel that is continuous in a
        perimeter beam, 9.7.7.1; the first also in others, 9.7.7.2. [-]
    least_bars : int
        Least number of continuous bars. [-]
    compressed_end : float
        Factor of Mn/Vu where a reaction compresses the ends of the bars, 9.7.3.8.3. [-]
    """

    into_support: float
    at_simple_support: float = 1.0 / 3.0
    at_other_support: float = 1.0 / 4.0
    past_inflection: float = 1.0 / 3.0
    through_bottom: float = 1.0 / 4.0
    through_top: float = 1.0 / 6.0
    least_bars: int = 2
    compressed_end: float = 1.3


_RULES = {"us": ContinuityRules(into_support=6.0), "si": ContinuityRules(into_support=150.0)}


def continuity_rules(edition: Edition) -> ContinuityRules:
    """Printed figures of an edition.

    Parameters
    ----------
    edition : Edition
        Edition of the code.

    Returns
    -------
    ContinuityRules
        Figures of 9.7.3.8 and 9.7.7, equal in 2014 and 2019.
    """
    return _RULES[edition.units]
