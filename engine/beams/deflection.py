"""Deflections of beams, ACI 318, 24.2: immediate, with time, and the limits of Table 24.2.2."""

from __future__ import annotations

from dataclasses import dataclass

from engine.beams.demand import Deflections
from engine.beams.stiffness import StageInertias
from engine.errors import OutOfRangeError
from engine.outlines import FloatArray

TIME_FACTORS = {3: 1.0, 6: 1.2, 12: 1.4, 60: 2.0}
"""Factor xi by months of sustained load, Table 24.2.4.1.3; the last holds for all more. [-]"""


def long_term_factor(ratio: FloatArray, xi: float = 2.0) -> FloatArray:
    """Factor lambda_Delta of the deflection that sustained load adds with time, 24.2.4.1.1.

    Parameters
    ----------
    ratio : ndarray, shape (n,)
        rho' = As'/(b d) of compression bars at midspan, or at a cantilever's support
        (24.2.4.1.2). [-]
    xi : float
        Time-dependent factor, of `TIME_FACTORS`. [-]

    Returns
    -------
    ndarray, shape (n,)
        xi/(1 + 50 rho'). [-]
    """
    return xi / (1.0 + 50.0 * ratio)


@dataclass(frozen=True, slots=True, kw_only=True)
class DeflectionResult:
    """Deflections of n candidates, downwards positive. [in or mm]

    Attributes
    ----------
    dead : ndarray, shape (n,)
        Immediate, under dead load.
    live : ndarray, shape (n,)
        Immediate, of all live load: what it adds to dead load.
    sustained : ndarray, shape (n,)
        Immediate, under dead and sustained live load.
    long_term : ndarray, shape (n,)
        What sustained load adds with time.
    """

    dead: FloatArray
    live: FloatArray
    sustained: FloatArray
    long_term: FloatArray

    @property
    def after_attachment(self) -> FloatArray:
        """What comes after parts are attached, Table 24.2.2: long-term and all live load.

        The parts are taken to be attached before any live load, its sustained part included,
        and before any creep. [in or mm]
        """
        return self.long_term + self.live

    @property
    def final(self) -> FloatArray:
        """Dead and live load and what time adds. [in or mm]"""
        return self.dead + self.live + self.long_term


def deflection(
    unit: Deflections,
    *,
    Ec: float,
    inertias: StageInertias,
    factor: FloatArray,
    back: StageInertias | None = None,
) -> DeflectionResult:
    """Deflections of candidates in one span.

    Parameters
    ----------
    unit : Deflections
        Deflections for a stiffness of one.
    Ec : float
        Modulus of elasticity of concrete. [psi or MPa]
    inertias : StageInertias
        Ie of the span.
    factor : ndarray, shape (n,)
        lambda_Delta. [-]
    back : StageInertias, optional
        Ie of the span next to a cantilever, which decides how much its support rotates; shape
        (n,) or (1,).

    Returns
    -------
    DeflectionResult
        Immediate and long-term deflections.

    Raises
    ------
    OutOfRangeError
        If the support of a cantilever rotates and nothing is given for the span next to it.

    Notes
    -----
    Live load has the deflection of all load less that of dead load, each with Ie of its own
    stage.
    """
    rotating = (unit.dead_back, unit.sustained_back, unit.total_back)
    if back is None and any(part != 0.0 for part in rotating):
        msg = "got none for a cantilever whose support rotates; allowed: Ie of the span next to it"
        raise OutOfRangeError(msg, what="back")
    dead = unit.dead / (Ec * inertias.dead)
    sustained = unit.sustained / (Ec * inertias.sustained)
    total = unit.total / (Ec * inertias.total)
    if back is not None:
        dead = dead + unit.dead_back / (Ec * back.dead)
        sustained = sustained + unit.sustained_back / (Ec * back.sustained)
        total = total + unit.total_back / (Ec * back.total)
    return DeflectionResult(
        dead=dead, live=total - dead, sustained=sustained, long_term=factor * sustained
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class DeflectionLimit:
    """A row of Table 24.2.2.

    Attributes
    ----------
    name : str
        What the beam supports, as a job writes it.
    meaning : str
        The row in words.
    divisor : float
        The limit is the span over it. [-]
    after_attachment : bool
        Whether the deflection after attachment counts, or the immediate one of live load.
    """

    name: str
    meaning: str
    divisor: float
    after_attachment: bool

    def allowed(self, span_length: float) -> float:
        """Largest deflection.

        Parameters
        ----------
        span_length : float
            Span l between centrelines of supports; of a cantilever, its own length, which the
            table does not double. [in or mm]

        Returns
        -------
        float
            Limit. [in or mm]
        """
        return span_length / self.divisor

    def counted(self, found: DeflectionResult) -> FloatArray:
        """Deflection that the row limits. [in or mm]

        Parameters
        ----------
        found : DeflectionResult
            Deflections of the candidates.

        Returns
        -------
        ndarray, shape (n,)
            After attachment, or immediate of live load. [in or mm]
        """
        return found.after_attachment if self.after_attachment else found.live


DEFLECTION_LIMITS = {
    row.name: row
    for row in (
        DeflectionLimit(
            name="roof",
            meaning="flat roof, nothing attached that deflection is likely to damage",
            divisor=180.0,
            after_attachment=False,
        ),
        DeflectionLimit(
            name="floor",
            meaning="floor, nothing attached that deflection is likely to damage",
            divisor=360.0,
            after_attachment=False,
        ),
        DeflectionLimit(
            name="sensitive",
            meaning="parts attached that deflection is likely to damage",
            divisor=480.0,
            after_attachment=True,
        ),
        DeflectionLimit(
            name="tolerant",
            meaning="parts attached that deflection is not likely to damage",
            divisor=240.0,
            after_attachment=True,
        ),
    )
}
"""Rows of Table 24.2.2 by name."""
