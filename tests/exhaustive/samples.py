"""A small beam in each system of units, to be varied key by key."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from tests.exhaustive.cases import Case, Size

#: Nominal diameter [in], area [in^2] and mass [lb/ft]: ASTM A615/A615M, Table 1.
_INCH = {
    "#5": (0.625, 0.31, 1.043),
    "#6": (0.750, 0.44, 1.502),
    "#7": (0.875, 0.60, 2.044),
    "#8": (1.000, 0.79, 2.670),
    "#9": (1.128, 1.00, 3.400),
    "#10": (1.270, 1.27, 4.303),
    "#11": (1.410, 1.56, 5.313),
}

#: Nominal diameter [mm], area [mm^2] and mass [kg/m]: ASTM A615/A615M, Table 1.
_METRIC = {
    "16": (15.9, 199.0, 1.552),
    "19": (19.1, 284.0, 2.235),
    "22": (22.2, 387.0, 3.042),
    "25": (25.4, 510.0, 3.973),
}


def sizes(*names: str) -> tuple[Size, ...]:
    """Return the named sizes, of either table."""
    picked = []
    for table, inch in ((_INCH, 1.0), (_METRIC, 25.4)):
        for position, (name, (db, area, mass)) in enumerate(table.items()):
            if name in names:
                labour = 1.67 if db < 0.59 * inch else 1.17 if db < 0.9055 * inch else 1.0
                picked.append(Size(name, db, area, mass, position, labour))
    return tuple(picked)


_US = Case(
    si=False,
    edition="19",
    strips=((10.0, 24.0),),
    web=10.0,
    depth=24.0,
    tension_width=10.0,
    fc=4000.0,
    fy=60_000.0,
    aggregate=0.75,
    cover=1.5,
    ds=0.375,
    layer_gap=1.0,
    min_gap=0.0,
    sizes=sizes("#8"),
    max_layers=2,
    max_sizes=2,
    size_steps=2,
    Mu=1.0,  # every layout carries this, so the geometry alone decides
    Ms=None,
    Ec=57_000 * 4000**0.5,
    determinate=False,
    flange_in_tension=False,
    tension_controlled=True,
    exposure="interior",
    opposite=(),
    count_opposite=False,
    opposite_height=0.0,
    labour_share=0.8,
    per_bar=0.10,
    per_extra_layer=0.60,
    per_extra_size=0.40,
    tight_gap=0.10,
    preferred_gap=1.5,
)

_SI = replace(
    _US,
    si=True,
    strips=((300.0, 600.0),),
    web=300.0,
    depth=600.0,
    tension_width=300.0,
    fc=28.0,
    fy=420.0,
    aggregate=19.0,
    cover=40.0,
    ds=9.5,
    layer_gap=25.0,
    sizes=sizes("22", "25"),
    Ec=4700 * 28**0.5,
    per_bar=0.1488,
    per_extra_layer=0.8928,
    per_extra_size=0.5952,
    tight_gap=0.1488,
    preferred_gap=38.0,
)


def us_case(**changes: Any) -> Case:
    """Return a 10 x 24 in beam of 4000 psi concrete with #3 stirrups and `changes`."""
    return replace(_US, **changes)


def si_case(**changes: Any) -> Case:
    """Return a 300 x 600 mm beam of 28 MPa concrete with No. 10 stirrups and `changes`."""
    return replace(_SI, **changes)
