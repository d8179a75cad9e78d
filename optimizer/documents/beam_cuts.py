"""Cross-sections of a designed beam: where they are cut and which bars are there, in place."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace

from engine import Layer, Layout, Section, place
from engine.beams.spans import Overhang
from engine.placement import PlacedLayer
from optimizer.beams.design import BeamDesign
from optimizer.beams.variants import Face, Piece, Role, Variant

_SAME = 1e-6


@dataclass(frozen=True, slots=True, kw_only=True)
class CutBar:
    """One bar of a cross-section.

    Attributes
    ----------
    x : float
        Centre, from the web's centreline. [in or mm]
    y : float
        Centre, above the bottom face. [in or mm]
    diameter : float
        Diameter. [in or mm]
    mark : str
        Mark in the schedule.
    role : Role
        What it is for.
    """

    x: float
    y: float
    diameter: float
    mark: str
    role: Role


@dataclass(frozen=True, slots=True, kw_only=True)
class CutRow:
    """Bars of a cross-section that are named together.

    Attributes
    ----------
    label : str
        ``2 #5 B1 + 3 #5 B3``.
    name : str
        ``bottom, layer 1``.
    bars : tuple of CutBar
        The bars, in no order.
    """

    label: str
    name: str
    bars: tuple[CutBar, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class BeamCut:
    """One cross-section of a beam.

    Attributes
    ----------
    title : str
        ``A-B at midspan``, ``A-B at the face of B``.
    span : int
        Index of the span.
    at : float
        Place on the beam's axis. [in or mm]
    section : Section
        Section of the span.
    rows : tuple of CutRow
        Bars that count here, bottom to top.
    flange : str
        Bars in the outer flange; empty without.
    beside : str
        Bars that reach past this place beside those drawn, lapped with them; empty without.
    stirrup : str
        Marks, size and spacing of the stirrups.
    spacing : float
        Spacing of the stirrups. [in or mm]
    """

    title: str
    span: int
    at: float
    section: Section
    rows: tuple[CutRow, ...]
    flange: str
    beside: str
    stirrup: str
    spacing: float


_Present = tuple[Piece, str]


def beam_cuts(design: BeamDesign) -> list[BeamCut]:
    """Cut a beam at midspan and at each face of a support.

    Parameters
    ----------
    design : BeamDesign
        Design.

    Returns
    -------
    list of BeamCut
        From left to right; cantilevers are cut at their support alone.
    """
    beam = design.problem.beam
    cuts = []
    for index, span in enumerate(beam.spans):
        start, end = (beam.origins[index] + place for place in beam.clear_range(index))
        left, right = beam.left_support(index), beam.right_support(index)
        if left is not None:
            title = f"{span.mark} at the face of {beam.supports[left].mark}"
            cuts.append(_cut(design, index, start, title))
        if span.overhang is Overhang.NONE:
            cuts.append(_cut(design, index, (start + end) / 2.0, f"{span.mark} at midspan"))
        if right is not None:
            title = f"{span.mark} at the face of {beam.supports[right].mark}"
            cuts.append(_cut(design, index, end, title))
    return cuts


def _cut(design: BeamDesign, index: int, at: float, title: str) -> BeamCut:
    beam = design.problem.beam
    section = design.frame.sections[index]
    here = [
        (piece, mark)
        for piece, mark in zip(design.pieces, design.schedule.of_pieces, strict=True)
        if piece.start - _SAME <= at <= piece.end + _SAME
    ]
    low = [item for item in here if item[0].face is Face.BOTTOM]
    high = [item for item in here if item[0].face is Face.TOP]
    clear = tuple(beam.origins[index] + place for place in beam.clear_range(index))
    own = [
        item
        for item in low
        if item[0].role is not Role.SKIN and clear[0] < (item[0].start + item[0].end) / 2 < clear[1]
    ]
    bottom = _variant_of(design, Face.BOTTOM, own)
    rows = _rows(section, own, bottom, Face.BOTTOM)
    main = [item for item in high if item[0].role in (Role.RUN, Role.STOP)]
    top = _variant_of(design, Face.TOP, _nearest(design, main, at))
    kept = [] if top is None else [item for item in main if item[0] in top.pieces]
    through = [item for item in high if item[0].role is Role.THROUGH][:1]
    hangers = [item for item in high if item[0].role is Role.HANGER]
    tops = [*through, *kept] or hangers[:1]
    rows += _rows(section, tops, top, Face.TOP)
    rows += _skin_rows(section, here)
    flange = [item for item in high if item[0].role is Role.FLANGE]
    shown = {id(item[0]) for item in (*own, *tops, *flange)}
    beside = [item for item in here if id(item[0]) not in shown and item[0].role is not Role.SKIN]
    plan = design.stirrups[index]
    spacing = plan.spacing_at(at - clear[0])
    if spacing == plan.spacings[1]:
        spacing = plan.middle_spacing or spacing
    return BeamCut(
        title=title,
        span=index,
        at=at,
        section=section,
        rows=tuple(sorted(rows, key=lambda row: min(bar.y for bar in row.bars))),
        flange=_named(flange),
        beside=_named(beside),
        stirrup=" + ".join(design.schedule.of_stirrups[index])
        + f" {design.frame.stirrup.designation}",
        spacing=spacing,
    )


def _named(items: Iterable[_Present]) -> str:
    """Name pieces: ``2 #5 B1 + 3 #5 B3``."""
    return " + ".join(f"{piece.count} {piece.bar.designation} {mark}" for piece, mark in items)


def _nearest(design: BeamDesign, items: list[_Present], at: float) -> list[_Present]:
    """Bars of the one support nearest to a place, of those that reach it."""
    beam = design.problem.beam
    found: list[tuple[float, list[_Present]]] = []
    for own, variant in zip(design.places, design.chosen, strict=True):
        if own.face is not Face.TOP:
            continue
        present = [item for item in items if item[0] in variant.pieces]
        if present:
            span = beam.left_span(own.index)
            centre = 0.0 if span is None else beam.origins[span] + beam.spans[span].length
            found.append((abs(at - centre), present))
    return min(found, key=lambda pair: pair[0])[1] if found else []


def _variant_of(design: BeamDesign, face: Face, items: list[_Present]) -> Variant | None:
    """The layout that bars belong to."""
    for own, variant in zip(design.places, design.chosen, strict=True):
        if own.face is face and any(item[0] in variant.pieces for item in items):
            return variant
    return None


def _rows(
    section: Section, items: list[_Present], variant: Variant | None, face: Face
) -> list[CutRow]:
    """Put bars where their layout has them; those that have ended leave their places empty."""
    if not items:
        return []
    turned = replace(section, Mu=1.0 if face is Face.BOTTOM else -1.0, Ms=None)
    layout = _of_items(items) if variant is None else variant.layout
    if not _fits(layout, items):
        layout = _of_items(items)
    placed = place(turned, layout)
    rows = []
    for number, layer in enumerate(placed.layers, 1):
        own = [item for item in items if item[0].layer == number]
        if own:
            bars = tuple(_bars(section, layer, own, face))
            name = f"{face.value}, layer {number}" if len(placed.layers) > 1 else face.value
            rows.append(CutRow(label=_named(_order(own)), name=name, bars=bars))
    return rows


def _of_items(items: list[_Present]) -> Layout:
    """Layout of bars as they are present, larger sizes first."""
    layers = []
    for number in range(1, max(piece.layer for piece, _ in items) + 1):
        counts: dict[str, int] = {}
        sizes = {}
        for piece, _ in items:
            if piece.layer == number:
                name = piece.bar.designation
                counts[name] = counts.get(name, 0) + piece.count
                sizes[name] = piece.bar
        ordered = sorted(sizes.values(), key=lambda bar: -bar.diameter)
        layers.append(Layer(tuple((bar, counts[bar.designation]) for bar in ordered)))
    return Layout(tuple(layer for layer in layers if layer.groups))


def _fits(layout: Layout, items: list[_Present]) -> bool:
    """Whether a layout has a place for every bar."""
    room = {
        (number, bar.designation): count
        for number, layer in enumerate(layout.layers, 1)
        for bar, count in layer.groups
    }
    for piece, _ in items:
        key = (piece.layer, piece.bar.designation)
        room[key] = room.get(key, 0) - piece.count
    return all(count >= 0 for count in room.values())


_ORDER = {Role.THROUGH: 0, Role.HANGER: 1, Role.RUN: 2, Role.STOP: 3}


def _order(items: list[_Present]) -> list[_Present]:
    """Bars from the corners inwards: those that run farthest first."""
    return sorted(items, key=lambda item: (_ORDER[item[0].role], -item[0].length, item[1]))


def _bars(
    section: Section, layer: PlacedLayer, items: list[_Present], face: Face
) -> Iterable[CutBar]:
    """Give each bar its place in the layer: of its size the outermost that are left."""
    free: dict[str, list[float]] = {}
    for x, name in zip(layer.x, layer.designations, strict=True):
        free.setdefault(name, []).append(x)
    for places in free.values():
        places.sort(key=lambda x: (-round(abs(x), 6), x))
    for piece, mark in _order(items):
        places = free[piece.bar.designation]
        count = piece.count
        taken = places[:count]
        if count % 2 and len(places) % 2 and count < len(places):
            # An odd bar stands at the centre, the others in pairs outside it.
            taken = [*places[: count - 1], places[-1]]
        for x in taken:
            places.remove(x)
            up = layer.bottom + piece.bar.diameter / 2.0
            y = up if face is Face.BOTTOM else section.outline.depth - up
            yield CutBar(x=x, y=y, diameter=piece.bar.diameter, mark=mark, role=piece.role)


def _skin_rows(section: Section, here: list[_Present]) -> list[CutRow]:
    """Skin bars at both side faces, at equal distances within half the depth."""
    skin = [item for item in here if item[0].role is Role.SKIN]
    h, edge = section.outline.depth, section.bar_face
    rows = []
    for piece, mark in skin:
        count = piece.count // 2
        # Where both faces have them, the two innermost rows are as far apart as the others.
        step = (h / 2.0 - edge) / (count + (0.5 if len({p.face for p, _ in skin}) > 1 else 0.0))
        x = section.inner_width / 2.0 - piece.bar.diameter / 2.0
        bars = []
        for number in range(1, count + 1):
            up = edge + number * step
            y = up if piece.face is Face.BOTTOM else h - up
            bars += [
                CutBar(x=side * x, y=y, diameter=piece.bar.diameter, mark=mark, role=piece.role)
                for side in (-1.0, 1.0)
            ]
        label = _named([(piece, mark)])
        rows.append(CutRow(label=label, name=f"skin, {piece.face.value}", bars=tuple(bars)))
    return rows


def loop_edges(design: BeamDesign, span: int) -> list[tuple[float, float]]:
    """Sides of the loops of a stirrup set, out to out, from the web's centreline.

    Parameters
    ----------
    design : BeamDesign
        Design.
    span : int
        Index of the span.

    Returns
    -------
    list of (float, float)
        Left and right side: the outer loop, then the inner ones at equal distances of legs.
        [in or mm]
    """
    (outer, _), *inner = design.frame.loops(span)
    edges = [(-outer / 2.0, outer / 2.0)]
    for number, (width, _) in enumerate(inner):
        left = -outer / 2.0 + (2 * number + 1) * width
        edges.append((left, left + width))
    return edges
