"""Measured against computed flexural strength; run ``python -m tests.published.experiments``.

Matthews, Palermo & Scott (University of Canterbury), Monotonic Flexural Testing of Corroded
Reinforced Concrete Beams Database v1.0.0, DOI 10.5281/zenodo.8062007: the uncorroded control
specimens, 74 rows. Computed is Mn of ACI 318M-19 with the measured material strengths, without
phi, with compression bars counted and the concrete they displace deducted.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from engine import BarGroups, Concrete, OutOfRangeError, Profile, Steel, edition, flexural_state
from tests.published.tables import read_table

_EDITION = edition("ACI 318M-19")
_DIAMETER = 10.0  # not recorded; enters where the block's edge crosses the bars only [mm]
_LEAST_DEPTH = 150.0  # thinner specimens are ruled by placing tolerances [mm]
_LEAST_SHEAR_SPAN = 2.5  # shorter ones arch instead of bending [-]
_EXCESS = 1.05  # a moment that far above the strength with fsu cannot be flexure as recorded [-]
_PLAIN_TESTS = {"SS_FPB_MONO", "SS_TPB_MONO"}
"""Simple spans loaded at one or two points once: no sustained load, no continuity."""


@dataclass(frozen=True, slots=True, kw_only=True)
class FlexuralTest:
    """One specimen of the database.

    Attributes
    ----------
    row : int
        Row of the database.
    test : str
        Arrangement, as the database names it.
    bar_type : str
        ``deformed`` or ``plain``.
    b, h, d, dp : float
        Width, depth, effective depth, depth of the compression bars. [mm]
    As, Asc : float
        Tension and compression steel. [mm^2]
    fy, fsu, fc : float
        Yield and tensile strength of the bars, concrete strength, as measured. [MPa]
    shear_span : float
        Distance from support to load. [mm]
    moment : float
        Largest measured moment. [kN*m]
    """

    row: int
    test: str
    bar_type: str
    b: float
    h: float
    d: float
    dp: float
    As: float
    Asc: float
    fy: float
    fsu: float
    fc: float
    shear_span: float
    moment: float

    @property
    def Mn(self) -> float | None:  # noqa: N802 - symbol of the code
        """Computed strength; None where a strength is outside the edition's range. [kN*m]."""
        try:
            concrete = Concrete(edition=_EDITION, fc=self.fc)
            steel = Steel(edition=_EDITION, fy=self.fy)
        except OutOfRangeError:
            return None
        groups = BarGroups(
            area=np.array([[self.As, self.Asc]]),
            depth=np.array([[self.d, self.dp]]),
            diameter=np.full((1, 2), _DIAMETER),
        )
        state = flexural_state(Profile(((self.b, self.h),)), concrete, steel, groups)
        return float(state.Mn[0]) / 1e6

    @property
    def plausible(self) -> bool:
        """Whether the moment could be reached with the tension bars at their tensile strength."""
        force = self.As * self.fsu
        block = force / (0.85 * self.fc * self.b)
        return self.moment <= _EXCESS * force * (self.d - block / 2) / 1e6

    @property
    def recommended(self) -> bool:
        """Whether the specimen is a fair test of flexure: see the limits of this module."""
        return (
            self.plausible
            and self.bar_type == "deformed"
            and self.test in _PLAIN_TESTS
            and self.d >= _LEAST_DEPTH
            and self.shear_span >= _LEAST_SHEAR_SPAN * self.d
        )


@dataclass(frozen=True, slots=True, kw_only=True)
class Summary:
    """Statistics of measured over computed strength.

    Attributes
    ----------
    count, left_out : int
        Specimens compared, and those outside the edition's range of strengths.
    mean, deviation, least, most : float
        Of the ratio; `deviation` is the standard deviation of the sample. [-]
    """

    count: int
    left_out: int
    mean: float
    deviation: float
    least: float
    most: float

    @property
    def variation(self) -> float:
        """Coefficient of variation. [-]."""
        return self.deviation / self.mean


def read_tests() -> list[FlexuralTest]:
    """Read all specimens.

    Returns
    -------
    list of FlexuralTest
        In the database's order.
    """
    texts = {"test", "bar_type"}
    return [
        FlexuralTest(
            row=int(line["row"]),
            test=line["test"],
            bar_type=line["bar_type"],
            **{name: float(line[name]) for name in line if name not in texts | {"row"}},
        )
        for line in read_table("flexural_tests")
    ]


def ratios(tests: Sequence[FlexuralTest]) -> list[float]:
    """Measured over computed strength of the specimens within range.

    Parameters
    ----------
    tests : sequence of FlexuralTest
        Specimens.

    Returns
    -------
    list of float
        Ratios. [-]
    """
    return [test.moment / test.Mn for test in tests if test.Mn is not None]


def summarise(tests: Sequence[FlexuralTest]) -> Summary:
    """Summarise the ratios of some specimens.

    Parameters
    ----------
    tests : sequence of FlexuralTest
        Specimens, at least two of them within range.

    Returns
    -------
    Summary
        Their statistics.
    """
    found = ratios(tests)
    mean = math.fsum(found) / len(found)
    spread = math.fsum((ratio - mean) ** 2 for ratio in found) / (len(found) - 1)
    return Summary(
        count=len(found),
        left_out=len(tests) - len(found),
        mean=mean,
        deviation=math.sqrt(spread),
        least=min(found),
        most=max(found),
    )


def lines(tests: Sequence[FlexuralTest]) -> list[str]:
    """Write the table and its summaries.

    Parameters
    ----------
    tests : sequence of FlexuralTest
        Specimens.

    Returns
    -------
    list of str
        Lines of text.
    """
    head = " row  b [mm]  d [mm]  As [mm2]  fy [MPa]  fc [MPa]  measured  computed  ratio"
    text = [f"{head}  subset", ""]
    for test in tests:
        given = f"{test.row:4d}{test.b:8.0f}{test.d:8.1f}{test.As:10.1f}{test.fy:10.1f}"
        given += f"{test.fc:10.1f}{test.moment:10.2f}"
        found = "   outside range" if test.Mn is None else f"{test.Mn:10.2f}"
        if test.Mn is not None:
            found += f"{test.moment / test.Mn:7.3f}"
        subset = "recommended" if test.recommended else "plausible" if test.plausible else "-"
        text.append(f"{given}{found}  {subset}")
    text += ["", "measured and computed in kN*m; ratio is measured over computed", ""]
    for name, chosen in subsets(tests).items():
        found_summary = summarise(chosen)
        text.append(
            f"{name}: {found_summary.count} specimens, mean {found_summary.mean:.3f},"
            f" standard deviation {found_summary.deviation:.3f},"
            f" COV {found_summary.variation:.3f},"
            f" {found_summary.least:.3f} to {found_summary.most:.3f};"
            f" {found_summary.left_out} outside the range of strengths"
        )
    return text


def subsets(tests: Sequence[FlexuralTest]) -> dict[str, list[FlexuralTest]]:
    """Sort specimens into the recommended ones and all plausible ones.

    Parameters
    ----------
    tests : sequence of FlexuralTest
        Specimens.

    Returns
    -------
    dict
        Name of the subset -> specimens.
    """
    return {
        "recommended": [test for test in tests if test.recommended],
        "plausible": [test for test in tests if test.plausible],
    }


if __name__ == "__main__":
    print("\n".join(lines(read_tests())))
