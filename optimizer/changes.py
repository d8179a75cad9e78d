"""What an option changes against the drawn layout, and what has to be agreed to."""

from __future__ import annotations

from dataclasses import dataclass

from catalogs import Bar
from engine import CheckedLayout, Section
from engine.confinement import confinement_of, is_top_bar
from engine.development import LEAST_CONFINEMENT, straight_length
from engine.development_rules import development_rules
from engine.hooks import hooked_length
from engine.laps import lap_length
from engine.units import UnitSystem, plain
from optimizer.measures import Band, Measures


@dataclass(frozen=True, slots=True, kw_only=True)
class Difference:
    """One figure drawn and of an option.

    Attributes
    ----------
    name : str
        What it is.
    kind : str
        ``length``, ``area``, ``moment``, ``mass_per_length``, ``money``, ``carbon``, ``percent``
        or ``count``.
    drawn, option : float or None
        Values in inner units; None where there is none.
    """

    name: str
    kind: str
    drawn: float | None
    option: float | None

    @property
    def change(self) -> float | None:
        """Option less drawn."""
        if self.drawn is None or self.option is None:
            return None
        return self.option - self.drawn

    @property
    def percent(self) -> float | None:
        """Change over drawn. [%]"""
        if self.change is None or not self.drawn or self.kind == "percent":
            return None
        return 100.0 * self.change / self.drawn


def unit_of(row: Difference, system: UnitSystem, currency: str | None) -> str:
    """Unit that a figure is shown in.

    Parameters
    ----------
    row : Difference
        Figure.
    system : UnitSystem
        Units of the job.
    currency : str or None
        Currency of its prices.

    Returns
    -------
    str
        Unit; empty for counts.
    """
    per = "ft" if system.name == "us" else "m"
    own = {"money": f"{currency}/{per}", "carbon": f"kgCO2e/{per}", "percent": "%"}
    return own.get(row.kind, system.trade.get(row.kind, ""))


@dataclass(frozen=True, slots=True, kw_only=True)
class Anchorage:
    """Lengths of the largest bars of a layout, in their least favourable layer.

    Attributes
    ----------
    straight, lap : float or None
        Development length and class B lap; None where bars lie too close to develop, and for
        laps where bars may not be lapped. [in or mm]
    hooked : float
        Development length of hooks. [in or mm]
    may_lap : bool
        Whether bars of this size may be lapped, 25.5.1.1.
    note : str
        What stirrups lack along development and laps, or empty.
    """

    straight: float | None
    hooked: float
    lap: float | None
    may_lap: bool
    note: str


def anchorage(checked: CheckedLayout) -> Anchorage:
    """Development of a layout's largest bars.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.

    Returns
    -------
    Anchorage
        Lengths by the section's edition: uncoated bars, no reduction for excess steel, hooks not
        tied; stirrups count where the job gives their spacing.
    """
    section, placement = checked.section, checked.placement
    bar = checked.layout.sizes[0]
    worst = min(
        (
            confinement_of(
                section,
                placement,
                layer=number,
                diameter=bar.diameter,
                transverse=section.stirrup_spacing,
            )
            for number, layer in enumerate(placement.layers, 1)
            if any(abs(size - bar.diameter) < 1e-9 for size in layer.diameters)
        ),
        key=lambda found: found.ratio,
    )
    top = is_top_bar(section, placement)
    rules = development_rules(section.edition)
    may_lap = bar.diameter <= rules.largest_lapped
    straight = lap = None
    if worst.ratio >= LEAST_CONFINEMENT:
        materials = (section.concrete, section.steel, bar)
        straight = straight_length(*materials, confinement=worst.ratio, top=top).length
        if may_lap:
            lap = lap_length(*materials, confinement=worst.ratio, top=top).length
    hooked = hooked_length(section.concrete, section.steel, bar)
    return Anchorage(
        straight=straight, hooked=hooked.length, lap=lap, may_lap=may_lap, note=worst.note
    )


def tie_spacing(section: Section, smallest: Bar) -> float:
    """Largest stirrup spacing if these bars are counted in compression, 9.7.6.4.3.

    Parameters
    ----------
    section : Section
        Section with its stirrup.
    smallest : Bar
        Smallest bar.

    Returns
    -------
    float
        Lesser of 16 db, 48 ds and the least dimension. [in or mm]
    """
    least = min(section.outline.web, section.outline.depth)
    return min(16.0 * smallest.diameter, 48.0 * section.stirrup.diameter, least)


def differences(
    drawn: CheckedLayout, drawn_figures: Measures, option: CheckedLayout, figures: Measures
) -> tuple[Difference, ...]:
    """Set the figures of an option beside the drawn ones.

    Parameters
    ----------
    drawn, option : CheckedLayout
        Both layouts, checked in their own sections.
    drawn_figures, figures : Measures
        Their measures.

    Returns
    -------
    tuple of Difference
        Every figure that a reader compares.
    """
    before, after = anchorage(drawn), anchorage(option)

    def row(name: str, kind: str, one: float | None, other: float | None) -> Difference:
        return Difference(name=name, kind=kind, drawn=one, option=other)

    def typical(band: Band | None) -> float | None:
        return None if band is None else band.typical

    def reserve(checked: CheckedLayout) -> float:
        return 100.0 * (checked.phi_Mn / checked.section.demand - 1.0)

    def row_of(checked: CheckedLayout, name: str) -> float | None:
        return next(check.demand for check in checked.checks if check.id == name)

    rows = [
        row("steel mass", "mass_per_length", drawn_figures.mass, figures.mass),
        row("bars", "count", drawn_figures.bars, figures.bars),
        row("sizes", "count", drawn_figures.sizes, figures.sizes),
        row("layers", "count", drawn_figures.layers, figures.layers),
        row("relative labour", "mass_per_length", drawn_figures.labour, figures.labour),
    ]
    if figures.cost is not None:
        rows += [
            row("placed cost", "money", typical(drawn_figures.cost), typical(figures.cost)),
            row("carbon", "carbon", typical(drawn_figures.carbon), typical(figures.carbon)),
        ]
    rows += [
        row("d", "length", drawn.d, option.d),
        row("phi Mn", "moment", drawn.phi_Mn, option.phi_Mn),
        row("reserve over Mu", "percent", reserve(drawn), reserve(option)),
        row("steel area", "area", drawn.As, option.As),
        row(
            "minimum steel",
            "area",
            row_of(drawn, "minimum_steel"),
            row_of(option, "minimum_steel"),
        ),
        row("bar spacing", "length", *(x.placement.layers[0].spacing for x in (drawn, option))),
        row("largest spacing, 24.3", "length", drawn.largest_spacing, option.largest_spacing),
        row("smallest clear gap", "length", *(_gap(x) for x in (drawn, option))),
        row("straight development", "length", before.straight, after.straight),
        row("hooked development, no ties", "length", before.hooked, after.hooked),
        row("class B lap", "length", before.lap, after.lap),
        row(
            "stirrup spacing if in compression",
            "length",
            *(tie_spacing(x.section, x.layout.sizes[-1]) for x in (drawn, option)),
        ),
    ]
    return tuple(rows)


def _gap(checked: CheckedLayout) -> float | None:
    gap = checked.placement.smallest_gap
    return None if gap == float("inf") else gap


def points_to_accept(
    drawn: CheckedLayout,
    option: CheckedLayout,
    levers: tuple[tuple[str, str, str], ...],
) -> tuple[str, ...]:
    """What the engineer of record has to agree to, in plain sentences.

    Parameters
    ----------
    drawn, option : CheckedLayout
        Both layouts.
    levers : tuple of (str, str, str)
        Key, value drawn, value of the option.

    Returns
    -------
    tuple of str
        The points, those that change most first.
    """
    unit = option.section.length_unit
    points: list[str] = []
    points += [_LEVER_POINTS[key].format(before=old, after=new) for key, old, new in levers]
    if drawn.layout != option.layout:
        points.append(f"bars {option.layout.label} in place of {drawn.layout.label}")
    before, after = anchorage(drawn), anchorage(option)
    for what, one, other in (
        ("straight development", before.straight, after.straight),
        ("hooked development", before.hooked, after.hooked),
        ("class B lap", before.lap, after.lap),
    ):
        if one is not None and other is not None and other > one * 1.0001:
            text = f"{what} grows from {plain(one)} to {plain(other)} {unit}"
            points.append(f"{text}: cut-offs and ends to be checked")
    if before.may_lap and not after.may_lap:
        points.append("bars above No. 11 may not be lapped (25.5.1.1)")
    if option.d < drawn.d * 0.9999:
        points.append(f"d falls from {plain(drawn.d)} to {plain(option.d)} {unit}: shear strength")
    if option.As < drawn.As * 0.9999:
        points.append("less steel: deflection and service stress to be checked again")
    if option.layout.sizes[-1].diameter < 0.9999 * drawn.layout.sizes[-1].diameter:
        points.append("smaller bars: where they are counted in compression stirrups stand closer")
    if option.section.steel.fy > drawn.section.steel.fy:
        points += [f"stirrups along development and laps: {after.note}"] if after.note else []
    reserves = [100.0 * (item.phi_Mn / item.section.demand - 1.0) for item in (drawn, option)]
    if reserves[1] < reserves[0] - 1.0:
        points.append(f"reserve over Mu falls from {reserves[0]:.1f} to {reserves[1]:.1f} %")
    gap, drawn_gap = _gap(option), _gap(drawn)
    if gap is not None and drawn_gap is not None and gap < drawn_gap * 0.9999:
        points.append(f"clear gap falls from {plain(drawn_gap)} to {plain(gap)} {unit}")
    return tuple(points)


_LEVER_POINTS = {
    "steel": "grade {after} in place of {before}: availability, mill certificates, higher stress"
    " at service",
    "stirrup": "stirrup {after} in place of {before}: shear to be designed again",
    "width": "web {after} wide in place of {before}: formwork, loads, stiffness",
    "depth": "depth {after} in place of {before}: headroom, loads, stiffness",
}
