"""Beams of worked examples with real bars, for the tests that need positions or check rows."""

from __future__ import annotations

from collections.abc import Sequence

from catalogs import bar_catalog
from engine import (
    Check,
    CheckedLayout,
    Concrete,
    Layout,
    Outline,
    Section,
    Steel,
    edition,
    parse_layout,
)

_CATALOG = {"us": "astm-inch", "si": "astm-metric"}


def bars(code: str, *layers: str) -> Layout:
    """Read a layout with the sizes of the edition's units.

    Parameters
    ----------
    code : str
        Edition.
    *layers : str
        Layers, the outermost first.

    Returns
    -------
    Layout
        The layout.
    """
    return parse_layout(layers, bar_catalog(_CATALOG[edition(code).units]))


def beam(
    outline: Outline,
    *,
    code: str,
    fc: float,
    fy: float,
    cover: float | None = None,
    stirrup: str | None = None,
    aggregate: float | None = None,
    Mu: float = 1.0,
    Ms: float | None = None,
    modulus: float | None = None,
    opposite: Sequence[str] = (),
    tension_controlled: bool = True,
    statically_determinate: bool = False,
    clear_span: float | None = None,
) -> Section:
    """Make a section with the bars, cover and aggregate that the examples take for granted.

    Parameters
    ----------
    outline : Outline
        Concrete outline.
    code : str
        Edition.
    fc, fy : float
        Strengths. [psi or MPa]
    cover : float, optional
        Clear cover to the stirrup; 1.5 in or 40 mm if not given. [in or mm]
    stirrup : str, optional
        Stirrup size; #3 or No. 10 if not given.
    aggregate : float, optional
        Nominal aggregate size; if not given 3/4 in or 18.75 mm, at which the least gap of 1 in
        or 25 mm still governs. [in or mm]
    Mu : float
        Factored moment, sagging positive. [kip*ft or kN*m]
    Ms : float, optional
        Service moment. [kip*ft or kN*m]
    modulus : float, optional
        Ec where the example gives it. [psi or MPa]
    opposite : sequence of str
        Layers at the compression face, counted as compression steel.
    tension_controlled, statically_determinate, clear_span
        As in `Section`.

    Returns
    -------
    Section
        The section.
    """
    rules = edition(code)
    inch = rules.units == "us"
    trade = 12_000.0 if inch else 1e6  # kip*ft -> lbf*in, kN*m -> N*mm
    return Section(
        mark="example",
        outline=outline,
        concrete=Concrete(edition=rules, fc=fc, modulus=modulus),
        steel=Steel(edition=rules, fy=fy),
        cover=(1.5 if inch else 40.0) if cover is None else cover,
        stirrup=bar_catalog(_CATALOG[rules.units]).bar(stirrup or ("#3" if inch else "10")),
        aggregate=(0.75 if inch else 18.75) if aggregate is None else aggregate,
        Mu=Mu * trade,
        Ms=None if Ms is None else Ms * trade,
        layer_gap=1.0 if inch else 25.0,
        tension_controlled=tension_controlled,
        statically_determinate=statically_determinate,
        opposite=bars(code, *opposite) if opposite else None,
        count_opposite=bool(opposite),
        clear_span=clear_span,
    )


def row(checked: CheckedLayout, row_id: str) -> Check:
    """Find a row of a check.

    Parameters
    ----------
    checked : CheckedLayout
        A layout with its check.
    row_id : str
        Name of the rule.

    Returns
    -------
    Check
        The one row of that name.
    """
    (found,) = [check for check in checked.checks if check.id == row_id]
    return found
