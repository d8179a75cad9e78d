"""Depth of a beam from which deflections need no calculation, ACI 318, 9.3.1.1."""

from __future__ import annotations

from dataclasses import dataclass
from enum import Enum

from engine.editions import Edition
from engine.errors import OutOfRangeError
from engine.units import plain


class Continuity(Enum):
    """Rows of Table 9.3.1.1: the value is the divisor of the span."""

    SIMPLE = 16.0
    ONE_END = 18.5
    BOTH_ENDS = 21.0
    CANTILEVER = 8.0


@dataclass(frozen=True, slots=True, kw_only=True)
class _DepthRules:
    """Figures of 9.3.1.1.1 and 9.3.1.1.2. [psi or MPa], [lb/ft^3 or kg/m^3]"""

    stress: float
    slope: float
    light: tuple[float, float]


_DEPTH = {
    "us": _DepthRules(stress=100_000.0, slope=0.005, light=(90.0, 115.0)),
    "si": _DepthRules(stress=700.0, slope=0.0003, light=(1440.0, 1840.0)),
}


def least_depth(
    edition: Edition,
    span_length: float,
    continuity: Continuity,
    fy: float,
    density: float | None = None,
) -> float:
    """Depth from which deflections need no calculation, 9.3.1.1.

    It does not serve where parts are attached that deflection is likely to damage.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    span_length : float
        Span l between centrelines; of a cantilever, its length. [in or mm]
    continuity : Continuity
        Row of the table.
    fy : float
        Yield strength of the longitudinal bars. [psi or MPa]
    density : float, optional
        Density wc of the concrete; normalweight if not given. [lb/ft^3 or kg/m^3]

    Returns
    -------
    float
        Table 9.3.1.1 times 0.4 + fy/100 000 (ACI 318M: fy/700), times
        max(1.65 - 0.005 wc, 1.09) (0.0003) for wc of 90 to 115 lb/ft^3 (1440 to 1840 kg/m^3).
        Denser concrete has no factor. [in or mm]

    Raises
    ------
    OutOfRangeError
        If the density is below the range of 9.3.1.1.2.
    """
    rules = _DEPTH[edition.units]
    factor = 0.4 + fy / rules.stress
    if density is not None:
        low, high = rules.light
        if not density >= low:
            msg = f"got {density:.6g}; allowed: {plain(low)} or more (9.3.1.1.2)"
            raise OutOfRangeError(msg, what="density")
        if density <= high:
            factor *= max(1.65 - rules.slope * density, 1.09)
    return span_length / continuity.value * factor
