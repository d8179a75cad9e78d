"""What is asked for one section: the section, the bars allowed and the ranking wanted."""

from __future__ import annotations

from dataclasses import dataclass

from catalogs import Bar
from engine import Layout, Section, Slab

MM_PER_IN = 25.4
SI_MASS_FACTOR = 1.488
"""Constants of the score in lb/ft become kg/m with this factor. [-]"""


@dataclass(frozen=True, slots=True, kw_only=True)
class BarRules:
    """Bars and layers that a layout may use.

    Attributes
    ----------
    sizes : tuple of Bar
        Permitted sizes, smallest first.
    max_layers : int
        Most layers.
    max_sizes : int
        Most sizes in one layout, 1 or 2.
    size_steps : int
        Most catalogue positions between two sizes of a layout.
    """

    sizes: tuple[Bar, ...]
    max_layers: int
    max_sizes: int
    size_steps: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Ranking:
    """What makes one layout better than another.

    Attributes
    ----------
    by : str
        ``practical`` or ``lightest``.
    keep : int
        Length of the short list.
    per_pattern : int or None
        Most layouts of the same largest size and number of layers; None for no such limit.
    labour_share : float
        Fixing labour over steel cost of large bars, k of the term `steel`. [-]
    per_bar, per_extra_layer, per_extra_size, tight_gap : float
        Constants of the terms, in equivalent steel mass per length. [lb/ft or kg/m]
    preferred_gap : float
        Clear gap from which on a layer is not tight. [in or mm]
    work_limit : float
        Work the solver may spend on a section, in its own deterministic measure; a unit takes
        some seconds. [-]
    """

    by: str
    keep: int
    per_pattern: int | None
    labour_share: float
    per_bar: float
    per_extra_layer: float
    per_extra_size: float
    tight_gap: float
    preferred_gap: float
    work_limit: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Problem:
    """One section of a job, ready for the search.

    Attributes
    ----------
    section : Section
        Geometry, materials, demand.
    rules : BarRules
        Bars allowed.
    ranking : Ranking
        Order wanted.
    drawn : Layout or None
        Layout given in the job, for the check.
    slab : Slab or None
        Slab that the top flange follows from, if it was not given by its size.
    """

    section: Section
    rules: BarRules
    ranking: Ranking
    drawn: Layout | None = None
    slab: Slab | None = None
