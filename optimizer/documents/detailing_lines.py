"""Lines of the worked check about the bars' places, crack control and cover."""

from __future__ import annotations

from itertools import pairwise

from engine import Check, CheckedLayout
from engine.check_row import verdict
from engine.crack_control import WITHOUT_ANALYSIS
from engine.placement import PlacedLayer, clear_gaps, gap_fits
from engine.sections import Section
from engine.units import plain
from optimizer.documents.forces import Forces, cracked
from optimizer.documents.lines import Line, compared, row_of
from optimizer.documents.wording import Figures, visible

_CENTRE = 1e-9  # lines nearer the centreline are on it [in or mm]


def places(checked: CheckedLayout) -> tuple[Line, ...]:
    """Lines of the gaps within and between layers, and of the arrangement.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.

    Returns
    -------
    tuple of Line
        Gaps of each layer, of the layers, and the arrangement.
    """
    section = checked.section
    figures = Figures(section.edition)
    lines = []
    for number, layer in enumerate(checked.placement.layers, 1):
        if len(layer.x) > 1:
            lines += _gap_lines(section, number, layer)
    layer_row = row_of(checked, "layer_gap")
    if len(checked.placement.layers) > 1:
        least, given = section.edition.least_gap, section.layer_gap
        lines.append(
            Line(
                subject="Clear gap between layers",
                clause=layer_row.clause,
                formula=f"gap given, at least {figures.length(least)}",
                result=compared(given, least, figures.unit("length"), least=True, ok=layer_row.ok),
                note=layer_row.note,
                state=layer_row.state,
                check="layer_gap",
            )
        )
    return tuple(lines)


def _gap_lines(section: Section, number: int, layer: PlacedLayer) -> list[Line]:
    figures = Figures(section.edition)
    gaps = clear_gaps(layer.x, layer.diameters)
    required = [section.required_gap(max(pair)) for pair in pairwise(layer.diameters)]
    tightest = min(range(len(gaps)), key=lambda index: gaps[index] / required[index])
    left, right = layer.x[tightest], layer.x[tightest + 1]
    d_left, d_right = layer.diameters[tightest], layer.diameters[tightest + 1]
    corner = layer.diameters[0]
    radius = plain(section.bend_radius)
    reach = Line(
        subject="Layer 1, between the centres of its corner bars",
        clause="25.3.2",
        formula="b_{w} − 2 (cover + d_{s} + max(R, d_{b}/2))",
        numbers=f"{plain(section.outline.web)} − 2 ({plain(section.cover)}"
        f" + {plain(section.stirrup.diameter)} + max({radius}, {plain(corner)}/2))",
        result=figures.length(layer.x[-1] - layer.x[0]),
        note=f"R = {radius}: inside radius of the stirrup's bend",
    )
    between = Line(
        subject=f"Layer {number}, tightest clear gap",
        clause="25.2.1",
        formula="x_{right} − x_{left} − (d_{b,left} + d_{b,right})/2",
        numbers=f"{_signed(right)} − {_bracketed(left)} − ({plain(d_left)} + {plain(d_right)})/2",
        result=figures.length(layer.gap),
        note="equal gaps; x from the centreline of the web"
        if number == 1
        else "bars on the lines of the layer below; x from the centreline of the web",
    )
    least, aggregate = plain(section.edition.least_gap), plain(section.aggregate)
    own = f", {plain(section.min_gap)}" if section.min_gap > 0.0 else ""
    fits = gap_fits(layer.gap, layer.gap_required)
    asked = Line(
        subject=f"Layer {number}, least clear gap",
        clause="25.2.1",
        formula=f"max({least}, d_{{b}}, 4/3 d_{{agg}}{', min_gap of the job' if own else ''})",
        numbers=f"max({least}, {plain(max(d_left, d_right))}, 4/3 × {aggregate}{own})",
        result=compared(layer.gap, layer.gap_required, figures.unit("length"), least=True, ok=fits),
        state=verdict(fits),
        check="clear_gap",
    )
    return [reach, between, asked] if number == 1 else [between, asked]


def _signed(value: float) -> str:
    # The line of the centre is found by subtraction: what is left of rounding is no figure.
    return plain(value if abs(value) > _CENTRE else 0.0).replace("-", "−")


def _bracketed(value: float) -> str:
    return f"({_signed(value)})" if value < 0.0 else _signed(value)


def cracks(checked: CheckedLayout, found: Forces) -> tuple[Line, ...]:
    """Lines of 24.3.2.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in place.
    found : Forces
        Its bars, for the cracked section.

    Returns
    -------
    tuple of Line
        Steel stress at service, largest spacing and the verdict.
    """
    section, edition = checked.section, checked.section.edition
    figures = Figures(edition)
    row = row_of(checked, "crack_control")
    fs, cc = plain(checked.service_stress), plain(section.bar_face)
    reference = plain(edition.crack_reference)
    base, cap = plain(edition.crack_base), plain(edition.crack_cap)
    stress = (
        (
            Line(
                subject="Steel stress at service, without a service moment",
                clause="24.3.2.1",
                formula="f_{s} = (2/3) f_{y}",
                numbers=f"{WITHOUT_ANALYSIS:.4f} × {plain(section.steel.fy)}",
                result=figures.of("stress", checked.service_stress),
            ),
        )
        if section.Ms is None
        else _service_lines(checked, found, abs(section.Ms))
    )
    spacing = Line(
        subject="Largest spacing of the bars nearest the tension face",
        clause="24.3.2",
        formula=f"s = min({base} ({reference}/f_{{s}}) − 2.5 c_{{c}}, {cap} ({reference}/f_{{s}}))",
        numbers=f"min({base} × {reference}/{fs} − 2.5 × {cc}, {cap} × {reference}/{fs})",
        result=figures.length(checked.largest_spacing),
        note="c_{c}: least distance from the bars' surface to the tension face",
    )
    provided = Line(
        subject="Spacing there, centre to centre"
        if row.clause == "24.3.2"
        else "One bar: width of the tension face",
        clause=row.clause,
        formula="spacing, at most s",
        result=_spacing(checked, row, figures),
        note=visible(row.note),
        state=row.state,
        check="crack_control",
    )
    return (*stress, spacing, provided)


def _spacing(checked: CheckedLayout, row: Check, figures: Figures) -> str:
    spacing = 0.0 if row.demand is None else row.demand
    unit = figures.unit("length")
    return compared(spacing, checked.largest_spacing, unit, least=False, ok=row.ok)


def _service_lines(checked: CheckedLayout, found: Forces, moment: float) -> tuple[Line, ...]:
    section = checked.section
    figures = Figures(section.edition)
    state = cracked(checked, found.bars)
    x, inertia = float(state.x[0]), float(state.Icr[0])
    n = section.steel.Es / section.concrete.Ec
    length = figures.unit("length")
    # Modulus, inertia and moment in the inner units: a stress comes out in psi or MPa.
    inner = figures.system.inner["moment"].replace("*", "·")
    return (
        Line(
            subject="Modular ratio",
            clause="19.2.2.1",
            formula="n = E_{s} / E_{c}",
            numbers=f"{plain(section.steel.Es)} / {plain(section.concrete.Ec)}",
            result=plain(n),
        ),
        Line(
            subject="Cracked section, neutral axis and inertia",
            formula="S_{c} = Σ n A_{i} (d_{i} − x); I_{cr} = I_{c} + Σ n A_{i} (d_{i} − x)^{2}",
            numbers="n A for bars in tension, (n − 1) A for counted bars opposite"
            if section.count_opposite
            else "concrete in compression only",
            equal=False,
            result=f"x = {figures.length(x)}, I_{{cr}} = {plain(inertia)} {length}^{{4}}",
        ),
        Line(
            subject="Steel stress at service, layer 1",
            clause="24.3.2.1",
            formula="f_{s} = n M_{s} (d_{t} − x) / I_{cr}",
            numbers=f"{plain(n)} × {plain(moment)} {inner} × ({plain(checked.dt)} − {plain(x)})"
            f" / {plain(inertia)}",
            result=figures.of("stress", checked.service_stress),
        ),
    )


def covers(checked: CheckedLayout) -> tuple[Line, ...]:
    """Lines of the cover.

    Parameters
    ----------
    checked : CheckedLayout
        Layout in its section.

    Returns
    -------
    tuple of Line
        One line.
    """
    section = checked.section
    figures = Figures(section.edition)
    row = row_of(checked, "cover")
    required, given = row.demand or 0.0, row.limit or 0.0
    return (
        Line(
            subject="Clear cover",
            clause=row.clause,
            formula="cover given, at least that of the table",
            result=compared(given, required, figures.unit("length"), least=True, ok=row.ok),
            note=visible(row.note),
            state=row.state,
            check="cover",
        ),
    )
