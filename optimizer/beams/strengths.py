"""Strength of the bars that run on alone, and of whole layouts, on one side of a place."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from itertools import pairwise

import numpy as np

from catalogs import Bar
from engine import Batch, Placement, Section, assess
from engine.crack_control import largest_spacing
from engine.minimum_steel import EXEMPTION
from engine.service import service_stress


@dataclass(frozen=True, slots=True, kw_only=True)
class RunStrength:
    """Bars of one size in layer 1 on their own.

    Attributes
    ----------
    area, d : float
        Area and effective depth. [in^2 or mm^2], [in or mm]
    Mn, phi_Mn : float
        Nominal and design strength. [lbf*in or N*mm]
    usable : float
        Moment up to which they may stand alone: phi Mn, or three quarters of it where they are
        less than the least steel, so that they are 4/3 of what is required (9.6.1.3).
        [lbf*in or N*mm]
    stress_per_moment : float
        Steel stress at service per moment. [1/in^3 or 1/mm^3]
    """

    area: float
    d: float
    Mn: float
    phi_Mn: float
    usable: float
    stress_per_moment: float

    def service_limit(self, section: Section, spacing: float) -> float:
        """Service moment up to which a spacing of these bars controls cracks, 24.3.2.

        Parameters
        ----------
        section : Section
            Section of the side.
        spacing : float
            Largest centre-to-centre spacing. [in or mm]

        Returns
        -------
        float
            Moment; zero if no stress is low enough. [lbf*in or N*mm]
        """
        edition = section.edition
        # Both branches of Table 24.3.2 fall with the stress: each gives a stress of its own.
        cc = section.bar_face
        reference = edition.crack_reference
        by_cover = edition.crack_base * reference / (spacing + 2.5 * cc) if spacing > 0.0 else 0.0
        by_cap = edition.crack_cap * reference / spacing if spacing > 0.0 else math.inf
        stress = min(by_cover, by_cap) if spacing > 0.0 else math.inf
        if largest_spacing(edition, min(stress, section.steel.fy), cc) < spacing * (1 - 1e-6):
            return 0.0
        return stress / self.stress_per_moment


class Strengths:
    """Strengths in one section, each worked out once.

    Parameters
    ----------
    section : Section
        Section with a moment of the place's sign.
    """

    def __init__(self, section: Section) -> None:
        self.section = section
        self._known: dict[tuple[str, int], RunStrength] = {}

    def of_run(self, bar: Bar, count: int) -> RunStrength:
        """Strength of a number of bars of one size in layer 1.

        Parameters
        ----------
        bar : Bar
            Size.
        count : int
            Number.

        Returns
        -------
        RunStrength
            Their strength.
        """
        key = (bar.designation, count)
        if key not in self._known:
            counts = np.full((1, 1, 1), count, dtype=np.int64)
            batch = Batch(bars=(bar,), counts=counts)
            found = assess(self.section, batch).row(0)
            unit = _with_service(self.section, found.phi_Mn / 2.0)
            stress = float(service_stress(unit, batch)[0]) / (found.phi_Mn / 2.0)
            enough = found.As >= found.As_min * (1 - 1e-9)
            self._known[key] = RunStrength(
                area=found.As,
                d=found.d,
                Mn=found.Mn,
                phi_Mn=found.phi_Mn,
                usable=found.phi_Mn * (1.0 if enough else EXEMPTION),
                stress_per_moment=stress,
            )
        return self._known[key]


def _with_service(section: Section, moment: float) -> Section:
    sign = 1.0 if section.sagging else -1.0
    return replace(section, Mu=sign * 2.0 * moment, Ms=sign * moment)


def run_positions(placement: Placement, bar: Bar, count: int) -> list[float]:
    """Places across the web of the bars that run on.

    Parameters
    ----------
    placement : Placement
        Whole layout in place.
    bar : Bar
        Size of the bars that run on.
    count : int
        Their number in layer 1: pairs from the corners inwards, and one at the centre if odd.

    Returns
    -------
    list of float
        From left to right. [in or mm]
    """
    first = placement.layers[0]
    own = [
        x
        for x, designation in zip(first.x, first.designations, strict=True)
        if designation == bar.designation
    ]
    pairs = count // 2
    return own[:pairs] + ([0.0] if count % 2 else []) + own[len(own) - pairs :]


def run_spacing(placement: Placement, bar: Bar, count: int) -> float:
    """Largest centre-to-centre spacing of the bars that run on, which crack control looks at.

    Parameters
    ----------
    placement, bar, count
        As for `run_positions`.

    Returns
    -------
    float
        Spacing. [in or mm]
    """
    stay = run_positions(placement, bar, count)
    return max((right - left for left, right in pairwise(stay)), default=0.0)


def run_hook_spacing(placement: Placement, bar: Bar, count: int) -> float:
    """Least centre-to-centre spacing of the bars that run on, which their hooks have.

    Parameters
    ----------
    placement, bar, count
        As for `run_positions`.

    Returns
    -------
    float
        Spacing. [in or mm]
    """
    stay = run_positions(placement, bar, count)
    return min((right - left for left, right in pairwise(stay)), default=0.0)


def hook_spacing(placement: Placement) -> float:
    """Least centre-to-centre spacing of bars that are hooked together.

    Parameters
    ----------
    placement : Placement
        Whole layout in place.

    Returns
    -------
    float
        Spacing in layer 1; zero where hooks of more layers stand in front of one another.
        [in or mm]
    """
    if len(placement.layers) > 1:
        return 0.0
    return min((right - left for left, right in pairwise(placement.layers[0].x)), default=0.0)
