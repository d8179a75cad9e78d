"""What is asked for one section: the section, the bars allowed and the ranking wanted."""

from __future__ import annotations

import math
from dataclasses import dataclass

from catalogs import Bar
from engine import Layout, Section, Slab, Steel

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
class Levers:
    """Switches of `[options]`.

    Attributes
    ----------
    sizes, layers, mixing : bool
        Whether other sizes than the drawn ones, more layers, and two sizes in a layout may be
        used, within the job's bars.
    steels : tuple of Steel
        Grades to try beside the section's own.
    stirrups : tuple of Bar
        Stirrup sizes to try beside the section's own.
    widths, depths : tuple of float
        Web widths and overall depths to try beside the section's own. [in or mm]
    """

    sizes: bool = True
    layers: bool = True
    mixing: bool = True
    steels: tuple[Steel, ...] = ()
    stirrups: tuple[Bar, ...] = ()
    widths: tuple[float, ...] = ()
    depths: tuple[float, ...] = ()

    @property
    def combinations(self) -> int:
        """Number of variants at most, the drawn one included. [-]"""
        numbers = (self.steels, self.stirrups, self.widths, self.depths)
        return math.prod(1 + len(others) for others in numbers)

    @property
    def envelope(self) -> bool:
        """Whether the outline may change."""
        return bool(self.widths or self.depths)


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
    levers : Levers
        What options against the drawn layout may change.
    length : float
        Length of beam that the section stands for, in totals of the job; 1 where none is given.
        [ft or m]
    """

    section: Section
    rules: BarRules
    ranking: Ranking
    drawn: Layout | None = None
    slab: Slab | None = None
    levers: Levers = Levers()
    length: float = 1.0
