"""What a layout offers its bars along a development length: cover, spacing, stirrups, position.

These are the conditions that the equations of `engine.development` ask for.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise

from engine.development_rules import development_rules
from engine.errors import OutOfRangeError
from engine.placement import PlacedLayer, Placement
from engine.sections import Section

_LEGS = 2  # a stirrup crosses the plane of a layer with both legs
_LEAST_TRANSVERSE = 0.5  # Ktr over db, 9.7.1.4 and 25.4.2.2 of ACI 318-19 [-]
_ROUNDING = 1e-9


@dataclass(frozen=True, slots=True, kw_only=True)
class Confinement:
    """The confinement term of the general equation for one size in one layer.

    Attributes
    ----------
    ratio : float
        (cb + Ktr)/db, not limited to 2.5. [-]
    cb : float
        Lesser of bar centre to concrete surface and half the spacing of centres. [in or mm]
    Ktr : float
        Transverse index; zero without stirrups. [in or mm]
    Ktr_required : float
        0.5 db where ACI 318-19 9.7.1.4 asks for it, otherwise zero. [in or mm]
    note : str
        What is missing, or empty.
    """

    ratio: float
    cb: float
    Ktr: float
    Ktr_required: float
    note: str

    @property
    def enough_transverse(self) -> bool:
        """Whether Ktr is at least what steel of that strength needs."""
        return self.Ktr >= self.Ktr_required - _ROUNDING


def confinement_of(
    section: Section,
    placement: Placement,
    *,
    layer: int = 1,
    diameter: float | None = None,
    transverse: float | None = None,
) -> Confinement:
    """(cb + Ktr)/db of the bars of one size in a layer, all bars developed together.

    Parameters
    ----------
    section : Section
        Section; its stirrup is the transverse steel.
    placement : Placement
        Bars of the tension face in place.
    layer : int
        Layer of the bars, from 1 nearest the face.
    diameter : float, optional
        Bar diameter db; the largest of the layer if not given. [in or mm]
    transverse : float, optional
        Stirrup spacing along the length; None leaves Ktr at zero, as 25.4.2 permits. [in or mm]

    Returns
    -------
    Confinement
        Term of 25.4.2.3 in ACI 318-14, 25.4.2.4 in ACI 318-19. The worst bar of the size
        counts. A flange is left out of the cover. The spacing of the layers counts like that
        of the bars, since bars of both layers are developed. Ktr is that of the weaker of the
        plane along a layer, crossed by two legs, and the plane up through the layers, crossed
        by one.

    Raises
    ------
    OutOfRangeError
        If there is no such layer or size, or the spacing is not above zero.
    """
    placed = _layer(placement, layer)
    db = max(placed.diameters) if diameter is None else diameter
    lines = [i for i, size in enumerate(placed.diameters) if abs(size - db) <= _ROUNDING]
    if not lines:
        msg = f"got {db:g}; allowed: a diameter of layer {layer}"
        raise OutOfRangeError(msg, what="diameter")
    centre = placed.bottom + db / 2.0
    half_web = section.outline.web / 2.0
    distances = [centre]
    distances += [half_web - abs(placed.x[i]) for i in lines]
    for i, (left, right) in enumerate(pairwise(placed.x)):
        if i in lines or i + 1 in lines:
            distances.append((right - left) / 2.0)
    for number in (layer - 1, layer + 1):
        if 1 <= number <= len(placement.layers):
            other = placement.layers[number - 1]
            nearest = min(abs(other.bottom + size / 2.0 - centre) for size in other.diameters)
            distances.append(nearest / 2.0)
    cb = min(distances)
    Ktr = 0.0 if transverse is None else _transverse_index(section, placement, transverse)
    rules = development_rules(section.edition)
    required = _LEAST_TRANSVERSE * db if section.steel.fy >= rules.high_strength else 0.0
    note = ""
    if Ktr < required - _ROUNDING:
        unit = section.length_unit
        stress = section.edition.system.inner["stress"]
        note = (
            f"Ktr = {Ktr:.3g} {unit}; fy of {rules.high_strength:g} {stress} and more needs"
            f" 0.5 db = {required:.3g} {unit} along development and laps (9.7.1.4)"
        )
    return Confinement(ratio=(cb + Ktr) / db, cb=cb, Ktr=Ktr, Ktr_required=required, note=note)


def meets_short_form(
    section: Section, placement: Placement, *, layer: int = 1, least_stirrups: bool
) -> bool:
    """Whether the first row of the short form holds for all bars of a layer.

    Parameters
    ----------
    section : Section
        Section of the bars.
    placement : Placement
        Bars of the tension face in place.
    layer : int
        Layer of the bars, from 1 nearest the face.
    least_stirrups : bool
        Whether at least the code's least stirrups run along the length.

    Returns
    -------
    bool
        True if clear spacing and cover are at least db with such stirrups, or clear spacing
        at least 2 db and cover at least db; the gap to the next layer is a spacing too.

    Raises
    ------
    OutOfRangeError
        If there is no such layer.
    """
    placed = _layer(placement, layer)
    largest = max(placed.diameters)
    half_web = section.outline.web / 2.0
    edges = [abs(x) + db / 2.0 for x, db in zip(placed.x, placed.diameters, strict=True)]
    cover = min(placed.bottom, half_web - max(edges))
    spacing = placed.smallest_gap
    if len(placement.layers) > 1:
        spacing = min(spacing, section.layer_gap)
    needed = largest if least_stirrups else 2.0 * largest
    return cover >= largest - _ROUNDING and spacing >= needed - _ROUNDING


def is_top_bar(section: Section, placement: Placement | None = None, *, layer: int = 1) -> bool:
    """Whether more than 12 in (300 mm) of fresh concrete is cast below the tension bars.

    Parameters
    ----------
    section : Section
        Section; a hogging one has its tension bars at the top.
    placement : Placement, optional
        Bars in place; without it bars of no thickness against the stirrup are taken, which
        is on the safe side.
    layer : int
        Layer of the bars, from 1 nearest the face.

    Returns
    -------
    bool
        True if psi_t is 1.3, Table 25.4.2.4 in ACI 318-14, 25.4.2.5 in ACI 318-19.

    Raises
    ------
    OutOfRangeError
        If there is no such layer.
    """
    if placement is None:
        bottom, db = section.bar_face, 0.0
    else:
        placed = _layer(placement, layer)
        # Bars of a layer share the surface towards the face: under a top layer the
        # thinnest bar has the most concrete below it.
        bottom, db = placed.bottom, min(placed.diameters)
    below = bottom if section.sagging else section.outline.depth - bottom - db
    return below > development_rules(section.edition).fresh_concrete + _ROUNDING


def _layer(placement: Placement, layer: int) -> PlacedLayer:
    if not 1 <= layer <= len(placement.layers):
        msg = f"got {layer}; allowed: 1 to {len(placement.layers)}"
        raise OutOfRangeError(msg, what="layer")
    return placement.layers[layer - 1]


def _transverse_index(section: Section, placement: Placement, spacing: float) -> float:
    """Ktr = 40 Atr/(s n) for the plane with the least transverse steel a bar."""
    if not spacing > 0.0:
        msg = f"got {spacing:g}; allowed: above 0"
        raise OutOfRangeError(msg, what="transverse")
    along = max(len(placed.x) for placed in placement.layers)
    # One leg for each of the layers is as much as two legs for twice their number.
    n = max(along, _LEGS * len(placement.layers))
    coefficient = development_rules(section.edition).transverse
    return coefficient * _LEGS * section.stirrup.area / (spacing * n)
