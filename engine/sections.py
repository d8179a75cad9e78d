"""A beam section with everything but its bars: what a layout is designed into."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

from catalogs import Bar
from engine.cover import Exposure
from engine.editions import Edition
from engine.errors import OutOfRangeError
from engine.layouts import Layout
from engine.materials import Concrete, Steel
from engine.outlines import Outline, Profile
from engine.strength_reduction import least_strain

_NUMBERS = (
    *("cover", "aggregate", "layer_gap", "min_gap"),
    *("Mu", "Ms", "clear_span", "stirrup_spacing"),
)


@dataclass(frozen=True, slots=True, kw_only=True)
class Section:
    """Geometry, materials and demand of one section.

    Attributes
    ----------
    mark : str
        Name on the drawing.
    outline : Outline
        Concrete outline.
    concrete, steel : Concrete, Steel
        Materials; both carry the same edition.
    cover : float
        Clear cover to the stirrup, all faces. [in or mm]
    stirrup : Bar
        Stirrup size.
    aggregate : float
        Nominal maximum size of the coarse aggregate. [in or mm]
    Mu : float
        Factored moment, sagging positive. [lbf*in or N*mm]
    Ms : float or None
        Service moment of the same sign, for crack control. [lbf*in or N*mm]
    layer_gap : float
        Clear gap between layers. [in or mm]
    min_gap : float
        Clear gap between bars that the job asks for beyond the code; 0 for none. [in or mm]
    exposure : Exposure
        Exposure that the cover is checked for.
    exposure_given : bool
        False where the job did not say and interior was taken.
    statically_determinate : bool
        Whether the flange rule of 9.6.1.2 applies.
    tension_controlled : bool
        False accepts eps_t down to 0.004 under ACI 318-14.
    opposite : Layout or None
        Bars at the compression face.
    count_opposite : bool
        Whether those bars count as compression steel.
    clear_span : float or None
        Clear span ln, where known, for 24.3.4. [in or mm]
    stirrup_spacing : float or None
        Spacing of the stirrups along the beam, where known, for development. [in or mm]

    Raises
    ------
    OutOfRangeError
        If the moments disagree in sign or a length is out of its range.
    """

    mark: str
    outline: Outline
    concrete: Concrete
    steel: Steel
    cover: float
    stirrup: Bar
    aggregate: float
    Mu: float
    Ms: float | None = None
    layer_gap: float
    min_gap: float = 0.0
    exposure: Exposure = Exposure.INTERIOR
    exposure_given: bool = True
    statically_determinate: bool = False
    tension_controlled: bool = True
    opposite: Layout | None = None
    count_opposite: bool = False
    clear_span: float | None = None
    stirrup_spacing: float | None = None

    def __post_init__(self) -> None:
        unit = self.length_unit
        self._check_numbers()
        least_strain(self.steel, tension_controlled=self.tension_controlled)
        if self.Mu == 0.0:
            msg = "got 0; allowed: any other moment, + sagging, - hogging"
            raise OutOfRangeError(msg, what="Mu")
        if self.Ms is not None and self.Ms * self.Mu <= 0.0:
            msg = "its sign differs from Mu's; allowed: both sagging (+) or both hogging (-)"
            raise OutOfRangeError(msg, what="Ms")
        if self.count_opposite and self.opposite is None:
            msg = "true without opposite bars; hint: give opposite"
            raise OutOfRangeError(msg, what="count_opposite")
        largest, least = self.edition.largest_stirrup, self.edition.least_gap
        if self.stirrup.diameter > largest:
            msg = (
                f"got {self.stirrup.designation}; allowed: up to {largest:g} {unit} (Table 25.3.2)"
            )
            raise OutOfRangeError(msg, what="stirrup")
        if self.layer_gap < least - 1e-9:
            msg = f"got {self.layer_gap:g} {unit}; allowed: at least {least:g} {unit} (25.2.2)"
            raise OutOfRangeError(msg, what="layer_gap")
        if self.inner_width > 0.0 and self.stack_height <= 0.0 and self.opposite is not None:
            msg = f"{self.opposite.label} leaves no height for bars at the other face"
            raise OutOfRangeError(msg, what="opposite")
        if self.inner_width <= 0.0 or self.stack_height <= 0.0:
            msg = (
                f"{self.cover:g} {unit} with stirrup {self.stirrup.designation} leaves no room for"
                f" bars in {self.outline.web:g} x {self.outline.depth:g} {unit};"
                " hint: check width, depth and cover"
            )
            raise OutOfRangeError(msg, what="cover")

    def _check_numbers(self) -> None:
        """Refuse what no later check could make sense of."""
        for name in _NUMBERS:
            value = getattr(self, name)
            signed = name in ("Mu", "Ms")
            if value is not None and not (math.isfinite(value) and (signed or value >= 0.0)):
                msg = f"got {value:g}; allowed: a finite value{'' if signed else ', not negative'}"
                raise OutOfRangeError(msg, what=name)
        if self.steel.edition != self.edition:
            msg = f"steel to {self.steel.edition.name} in concrete to {self.edition.name}"
            raise OutOfRangeError(msg, what="steel")
        bars = [("stirrup", self.stirrup)]
        bars += [("opposite", bar) for bar in (self.opposite.sizes if self.opposite else ())]
        for what, bar in bars:
            if bar.system != self.edition.units:
                msg = f"{bar.designation} has {bar.system} units; allowed: {self.edition.units}"
                raise OutOfRangeError(msg, what=what)

    @property
    def edition(self) -> Edition:
        """Edition of the code."""
        return self.concrete.edition

    @property
    def length_unit(self) -> str:
        """Unit of lengths, for messages."""
        return self.edition.system.inner["length"]

    @property
    def sagging(self) -> bool:
        """Whether the bottom face is in tension."""
        return self.Mu > 0.0

    @property
    def demand(self) -> float:
        """Factored moment without its sign. [lbf*in or N*mm]"""
        return abs(self.Mu)

    @property
    def profile(self) -> Profile:
        """Widths from the compression face."""
        return self.outline.profile(sagging=self.sagging)

    @property
    def bend_radius(self) -> float:
        """Inside radius of the stirrup's bend: 2 ds to No. 5, 3 ds above (25.3.2). [in or mm]"""
        times = 2.0 if self.stirrup.diameter <= self.edition.small_bar else 3.0
        return times * self.stirrup.diameter

    @property
    def bar_face(self) -> float:
        """Distance of layer 1's surface from the tension face. [in or mm]"""
        return self.cover + self.stirrup.diameter

    @property
    def inner_width(self) -> float:
        """Clear width between the legs of the stirrup. [in or mm]"""
        return self.outline.web - 2.0 * self.bar_face

    @property
    def stack_height(self) -> float:
        """Height open to layers, from the inside of the stirrup to what is opposite. [in or mm]"""
        height = self.outline.depth - 2.0 * self.bar_face
        if self.opposite is None:
            return height
        layers = self.opposite.layers
        taken = sum(layer.largest.diameter for layer in layers) + self.layer_gap * len(layers)
        return height - taken

    def corner_offset(self, diameter: float) -> float:
        """Distance of a corner bar's centre from the inner face of the stirrup leg.

        Parameters
        ----------
        diameter : float
            Diameter of the corner bar. [in or mm]

        Returns
        -------
        float
            max(R, db/2): the bar rests on the stirrup where its bend begins. [in or mm]
        """
        return max(self.bend_radius, diameter / 2.0)

    def required_gap(self, diameter: float) -> float:
        """Least clear gap between two neighbours in a layer.

        Parameters
        ----------
        diameter : float
            Diameter of the larger of the two. [in or mm]

        Returns
        -------
        float
            max(1 in or 25 mm, db, 4/3 of the aggregate), 25.2.1, or the job's if larger. [in or mm]
        """
        code = max(self.edition.least_gap, diameter, 4.0 / 3.0 * self.aggregate)
        return max(code, self.min_gap)

    def opposite_face(self) -> Section:
        """The same section bent the other way, so that its opposite bars can be placed.

        Returns
        -------
        Section
            Section whose tension face is this one's compression face.
        """
        return replace(self, Mu=-self.Mu, Ms=None, opposite=None, count_opposite=False)
