"""All checks of a designed beam, worked out anew from its bars, stirrups and demands."""

from __future__ import annotations

from typing import TYPE_CHECKING

from optimizer.beams.check_row import BeamCheck
from optimizer.beams.checks_anchorage import anchorage_rows
from optimizer.beams.checks_built import Built
from optimizer.beams.checks_cutoffs import cut_off_rows
from optimizer.beams.checks_general import general_rows
from optimizer.beams.checks_integrity import integrity_rows
from optimizer.beams.checks_laps import lap_rows
from optimizer.beams.checks_sections import section_rows
from optimizer.beams.checks_service import outer_rows, service_rows
from optimizer.beams.checks_strength import strength_rows

if TYPE_CHECKING:
    from optimizer.beams.design import BeamDesign

NOT_CHECKED: tuple[str, ...] = (
    "torsion",
    "axial force",
    "deep beams (9.9)",
    "hanger steel where the beam meets a girder (9.7.6.2.1)",
    "joints with columns and the bars' way past those of columns (9.7.7.3)",
    "isolated T-sections (6.3.2.2)",
    "bending of the slab across the beam and of its flanges (6.3.2)",
    "lateral bracing (9.2.3)",
    "stages of construction and shoring",
    "seismic detailing (chapter 18)",
    "fire",
    "corrosion",
    "fatigue",
    "vibration",
)
"""What no row of `check_beam` looks at."""


def check_beam(design: BeamDesign) -> tuple[BeamCheck, ...]:
    """Check a designed beam by every rule, from what is built and not from how it was found.

    Layouts, strengths and development lengths are worked out anew from the design's bars and
    stirrups, under its demands.

    Parameters
    ----------
    design : BeamDesign
        Beam with its bars, stirrups, schedule and demands; its strengths and checks are not
        looked at.

    Returns
    -------
    tuple of BeamCheck
        All rows; a rule that does not apply says so.
    """
    built = Built(design=design)
    outer = list(outer_rows(built))
    provided = {
        name: all(row.ok for row in outer if row.id == name)
        for name in ("skin_bars", "flange_bars")
    }
    return (
        *strength_rows(built),
        *section_rows(built, provided),
        *cut_off_rows(built),
        *anchorage_rows(built),
        *integrity_rows(built),
        *lap_rows(built),
        *service_rows(built),
        *outer,
        *general_rows(built),
    )
