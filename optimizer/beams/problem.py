"""What is asked for one beam: spans, materials, bars allowed and the order wanted."""

from __future__ import annotations

from dataclasses import dataclass
from enum import Enum

from catalogs import Bar, BarCatalog
from engine import Edition, Section, Steel
from engine.beams.demand import SpanDemand
from engine.beams.spans import Beam
from optimizer.problem import BarRules, Ranking


class Analysis(Enum):
    """Where moments and shears come from."""

    ELASTIC = "elastic"
    COEFFICIENTS = "coefficients"
    GIVEN = "given"
    """Envelopes of the user's own analysis."""


class Attached(Enum):
    """What the deflection limit of Table 24.2.2 protects; one name for each of its rows."""

    ROOF = "roof"
    FLOOR = "floor"
    SENSITIVE = "sensitive"
    """Supports elements likely to be damaged by large deflections."""
    TOLERANT = "tolerant"
    """Supports elements not likely to be damaged."""


@dataclass(frozen=True, slots=True, kw_only=True)
class BeamProblem:
    """One beam, ready for design.

    Attributes
    ----------
    title, mark : str
        Title of the job and name of the beam.
    edition : Edition
        Code edition.
    beam : Beam
        Spans, supports and loads.
    sections : tuple of Section
        For each span its section with the first stirrup size allowed; its moment says nothing.
    catalog : BarCatalog
        Catalogue of the sizes.
    rules : BarRules
        Longitudinal bars allowed.
    ranking : Ranking
        What is least: placed index or mass; constants of the index.
    analysis : Analysis
        Source of the envelopes.
    given : tuple of SpanDemand
        Envelopes of the user's own analysis, one for each span; empty otherwise.
    redistribution : float
        Share by which moments at supports are lowered, 6.6.5; 0 for none. [-]
    stirrups : tuple of Bar
        Stirrup sizes allowed, smallest first.
    stirrup_steel : Steel
        Steel of the stirrups; its fy counts as fyt up to the cap of the code.
    stirrup_step : float
        Spacings are multiples of it. [in or mm]
    hangers : tuple of Bar
        Sizes allowed for bars that only hold stirrups, smallest first.
    skin, flange_bar : Bar
        Size of skin bars and of bars in the outer flange.
    perimeter : bool
        Whether it is a perimeter beam, 9.7.7.1.
    closed_stirrups : bool
        Whether an interior beam meets 9.7.7.2 by closed stirrups instead of continuous bars.
    attached : Attached
        What the deflection limit protects.
    sustained : float
        Share of the live load that stays, for long-term deflection. [-]
    stock : tuple of float
        Stock lengths, shortest first. [in or mm]
    length_step : float
        Lengths of bars are rounded up to it. [in or mm]
    most_sizes, most_marks : int or None
        Most sizes of longitudinal bars, and most marks in the schedule.
    work_limit : float
        Work the solver may spend, in its own deterministic measure. [-]
    """

    title: str
    mark: str
    edition: Edition
    beam: Beam
    sections: tuple[Section, ...]
    catalog: BarCatalog
    rules: BarRules
    ranking: Ranking
    analysis: Analysis
    given: tuple[SpanDemand, ...]
    redistribution: float
    stirrups: tuple[Bar, ...]
    stirrup_steel: Steel
    stirrup_step: float
    hangers: tuple[Bar, ...]
    skin: Bar
    flange_bar: Bar
    perimeter: bool
    closed_stirrups: bool
    attached: Attached
    sustained: float
    stock: tuple[float, ...]
    length_step: float
    most_sizes: int | None
    most_marks: int | None
    work_limit: float
