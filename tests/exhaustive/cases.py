"""What goes into an enumeration and what comes out of it, as plain frozen records."""

from __future__ import annotations

from dataclasses import dataclass, field

#: Lengths, gaps and covers may miss their limit by this much [in or mm] and still pass; strengths,
#: strains, areas and spacings by this share of the limit.
TOLERANCE = 1e-9


@dataclass(frozen=True, slots=True)
class Size:
    """One bar size.

    Parameters
    ----------
    name : str
        Designation, such as ``#8``.
    db : float
        Nominal diameter, [in or mm].
    area : float
        Nominal area, [in^2 or mm^2].
    mass : float
        Nominal mass, [lb/ft or kg/m].
    position : int
        Place in the catalogue, smallest bar first.
    labour : float
        Relative fixing labour per mass, [-].
    """

    name: str
    db: float
    area: float
    mass: float
    position: int
    labour: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Case:
    """One face of one section with everything that decides which layouts pass.

    Parameters
    ----------
    si : bool
        False for in, lbf, psi; True for mm, N, MPa.
    edition : str
        ``"14"`` or ``"19"``.
    strips : tuple of (float, float)
        Width and height of the rectangles of the outline from the compression face to the tension
        face, [in or mm].
    web, depth, tension_width : float
        Web width, total depth and width at the tension face, [in or mm].
    fc, fy, Ec : float
        Concrete strength, yield strength, modulus of concrete, [psi or MPa].
    aggregate, cover, ds, layer_gap, min_gap : float
        Aggregate size, cover to the stirrup, stirrup diameter, clear gap between layers and the
        job's own least clear gap between bars (0 if none), [in or mm].
    sizes : tuple of Size
        Permitted sizes.
    max_layers, max_sizes, size_steps : int
        Most layers, most sizes in a layout, largest difference of catalogue positions.
    Mu, Ms : float
        Factored moment (positive) and service moment or None, [lbf*in or N*mm].
    determinate, flange_in_tension : bool
        Whether the beam is statically determinate, and whether the tension face has the flange.
    tension_controlled : bool
        False only where a job to ACI 318-14 accepts 0.004 <= eps_t < 0.005.
    exposure : str
        ``"interior"``, ``"weather"`` or ``"ground"``.
    opposite : tuple of (float, float, float)
        Bar diameter, total area and depth from the compression face of the groups at the other
        face, [in, in^2, in or mm, mm^2, mm].
    count_opposite : bool
        Whether those groups act as compression steel.
    opposite_height : float
        Height that the opposite bars take up inside the stirrup (0 if none), [in or mm].
    labour_share, per_bar, per_extra_layer, per_extra_size, tight_gap, preferred_gap : float
        Constants of the practical score, already in the case's own units.
    """

    si: bool
    edition: str
    strips: tuple[tuple[float, float], ...]
    web: float
    depth: float
    tension_width: float
    fc: float
    fy: float
    aggregate: float
    cover: float
    ds: float
    layer_gap: float
    min_gap: float
    sizes: tuple[Size, ...]
    max_layers: int
    max_sizes: int
    size_steps: int
    Mu: float
    Ms: float | None
    Ec: float
    determinate: bool
    flange_in_tension: bool
    tension_controlled: bool
    exposure: str
    opposite: tuple[tuple[float, float, float], ...]
    count_opposite: bool
    opposite_height: float
    labour_share: float
    per_bar: float
    per_extra_layer: float
    per_extra_size: float
    tight_gap: float
    preferred_gap: float

    def __post_init__(self) -> None:
        """Refuse a case that contradicts itself, so that no comparison rests on one."""
        height = sum(strip_height for _, strip_height in self.strips)
        if abs(height - self.depth) > TOLERANCE * self.depth:
            msg = f"strips: heights add up to {height:g}, must be the depth {self.depth:g}"
            raise ValueError(msg)
        if self.edition not in {"14", "19"}:
            msg = f"edition: {self.edition!r}, must be '14' or '19'"
            raise ValueError(msg)
        if self.edition == "19" and not self.tension_controlled:
            msg = "tension_controlled: False, must be True with edition '19'"
            raise ValueError(msg)
        if not self.Mu > 0:
            msg = f"Mu: {self.Mu:g}, must be above 0 about the compression face of `strips`"
            raise ValueError(msg)

    def pick(self, us: float, si: float) -> float:
        """Return the coefficient of the case's own standard, ACI 318 or ACI 318M."""
        return si if self.si else us


#: Sizes and counts of one layer, the larger size first.
Layer = tuple[tuple[Size, int], ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Found:
    """One layout that passes every rule.

    Parameters
    ----------
    counts : tuple of tuple of (str, int)
        Size name and count per layer, layer 1 first, larger size first.
    mass : float
        Steel mass per length, [lb/ft or kg/m].
    score : float
        Practical score, [lb/ft or kg/m].
    terms : dict of str to float
        Terms of the score: ``steel``, ``bars``, ``layers``, ``sizes``, ``tight``.
    bars, layers, sizes : int
        How many of each.
    smallest_gap : float
        Smallest clear gap between neighbours of any layer, [in or mm].
    phiMn : float
        Design strength, [lbf*in or N*mm].
    eps_t : float
        Net tensile strain at the centroid of layer 1, [-].
    As : float
        Total area, [in^2 or mm^2].
    tie : tuple of tuple of (int, int)
        Catalogue positions and counts, negated, which settle ties of the rankings.
    """

    counts: tuple[tuple[tuple[str, int], ...], ...]
    mass: float
    score: float
    terms: dict[str, float] = field(hash=False)
    bars: int
    layers: int
    sizes: int
    smallest_gap: float
    phiMn: float
    eps_t: float
    As: float
    tie: tuple[tuple[tuple[int, int], ...], ...]
