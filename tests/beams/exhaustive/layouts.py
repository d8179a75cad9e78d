"""Every layout of a place, listed by the rules of geometry and then checked one by one."""

from __future__ import annotations

from collections.abc import Sequence

from catalogs import Bar
from engine import Batch, Layer, Layout, Section, assess, check_layouts, place
from optimizer.beams.listing import Fitted
from optimizer.beams.places import Place
from optimizer.problem import BarRules, Ranking
from tests.exhaustive.cases import Case, Size
from tests.exhaustive.enumeration import covered_sizes
from tests.exhaustive.geometry import stacks


def _case(section: Section, rules: BarRules) -> Case:
    """Return the section as the independent enumeration wants it; its demand has no part."""
    si = section.edition.units == "si"
    return Case(
        si=si,
        edition="19" if section.edition.year >= 2019 else "14",
        strips=((section.outline.web, section.outline.depth),),
        web=section.outline.web,
        depth=section.outline.depth,
        tension_width=section.outline.web,
        fc=section.concrete.fc,
        fy=section.steel.fy,
        aggregate=section.aggregate,
        cover=section.cover,
        ds=section.stirrup.diameter,
        layer_gap=section.layer_gap,
        min_gap=section.min_gap,
        sizes=tuple(
            Size(bar.designation, bar.diameter, bar.area, bar.mass, bar.position, 1.0)
            for bar in rules.sizes
        ),
        max_layers=rules.max_layers,
        max_sizes=rules.max_sizes,
        size_steps=rules.size_steps,
        Mu=1.0,
        Ms=None,
        Ec=section.concrete.Ec,
        determinate=False,
        flange_in_tension=False,
        tension_controlled=True,
        exposure=section.exposure.value,
        opposite=(),
        count_opposite=False,
        opposite_height=0.0,
        labour_share=0.0,
        per_bar=0.0,
        per_extra_layer=0.0,
        per_extra_size=0.0,
        tight_gap=0.0,
        preferred_gap=1.0,
    )


def _layout(counts: Sequence[Sequence[tuple[Bar, int]]]) -> Layout:
    return Layout(layers=tuple(Layer(groups=tuple(groups)) for groups in counts))


def _extra(section: Section, layout: Layout, ranking: Ranking) -> float:
    """Return the terms of the index that count layers, sizes and tight gaps, by hand."""
    if ranking.by == "lightest":
        return 0.0
    tight = 0.0
    for layer, placed in zip(layout.layers, place(section, layout).layers, strict=True):
        count = sum(number for _, number in layer.groups)
        tight += count * max(0.0, 1.0 - placed.smallest_gap / ranking.preferred_gap)
    sizes = {bar.designation for layer in layout.layers for bar, _ in layer.groups}
    return (
        ranking.per_extra_layer * (len(layout.layers) - 1)
        + ranking.per_extra_size * (len(sizes) - 1)
        + ranking.tight_gap * tight
    )


def fitted_layouts(where: Place, rules: BarRules, ranking: Ranking) -> list[Fitted]:
    """Return every layout that passes all checks of the sections of all sides of a place."""
    sections = [side.section for side in where.sides]
    bars = {bar.designation: bar for bar in rules.sizes}
    common: set[Layout] | None = None
    for section in sections:
        case = _case(section, rules)
        layouts = [
            _layout([[(bars[size.name], n) for size, n in layer] for layer in stack.layers])
            for stack in stacks(case, covered_sizes(case))
        ]
        good = {
            layout
            for layout, checked in zip(layouts, check_layouts(section, layouts), strict=True)
            if checked.ok
        }
        common = good if common is None else common & good
    found = sorted(common or set(), key=lambda layout: layout.label)
    if not found:
        return []
    figures = [assess(section, Batch.of(found)) for section in sections]
    return [
        Fitted(
            layout=layout,
            placements=tuple(place(section, layout) for section in sections),
            phi_Mn=tuple(float(item.phi_Mn[row]) for item in figures),
            d=tuple(float(item.d[row]) for item in figures),
            eps_t=min(float(item.eps_t[row]) for item in figures),
            extra=_extra(sections[0], layout, ranking),
        )
        for row, layout in enumerate(found)
    ]
