"""Strength and service stress of many layouts at once, by bisection of the neutral axis."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from tests.exhaustive.cases import Case

Array = NDArray[np.float64]

#: Strain at the extreme compression fibre (ACI 318, 22.2.2.1) [-].
EPS_CU = 0.003

#: Halvings of the bracket of a neutral axis: past them floating point has no digits left.
HALVINGS = 64


def steel_modulus(case: Case) -> float:
    """Return the modulus of steel (ACI 318, 20.2.2.2), [psi or MPa]."""
    return case.pick(29e6, 200_000.0)


def yield_strain(case: Case) -> float:
    """Return eps_ty, 0.002 for Grade 60 (420) (ACI 318, 21.2.2.1), [-]."""
    return 0.002 if case.fy == case.pick(60_000.0, 420.0) else case.fy / steel_modulus(case)


def tension_controlled_strain(case: Case) -> float:
    """Return the least eps_t of a tension-controlled section (ACI 318, Table 21.2.2), [-]."""
    return 0.005 if case.edition == "14" else yield_strain(case) + 0.003


def beta1(case: Case) -> float:
    """Return block depth over neutral axis depth (ACI 318, Table 22.2.2.4.3), [-]."""
    over = (case.fc - case.pick(4000.0, 28.0)) / case.pick(1000.0, 7.0)
    return min(0.85, max(0.65, 0.85 - 0.05 * over))


@dataclass(frozen=True, slots=True)
class Groups:
    """Bar groups of the tension face of many layouts: one row a layout, one column a group.

    Rows with fewer groups than columns are filled up with groups without area.

    Parameters
    ----------
    y, area, db : Array
        Depth from the compression face, total area, bar diameter, [in or mm, squared for area].
    dt : Array
        Depth of the centroid of layer 1, one a layout, [in or mm].
    """

    y: Array
    area: Array
    db: Array
    dt: Array

    def only(self, rows: NDArray[np.bool_], share: float = 1.0) -> Groups:
        """Return the chosen rows with `share` of every area."""
        return Groups(self.y[rows], self.area[rows] * share, self.db[rows], self.dt[rows])

    @property
    def total(self) -> Array:
        """Total area of each layout, [in^2 or mm^2]."""
        total: Array = np.sum(self.area, axis=1)
        return total

    @property
    def d(self) -> Array:
        """Depth of the centroid of all bars of each layout, [in or mm]."""
        depth: Array = np.sum(self.area * self.y, axis=1) / self.total
        return depth


def pack(layouts: Sequence[Sequence[tuple[float, float, float]]], dt: Sequence[float]) -> Groups:
    """Return the (depth, area, diameter) triples of every layout as one record of arrays."""
    columns = max(len(layout) for layout in layouts)
    table = np.zeros((len(layouts), columns, 3))
    table[:, :, 2] = 1.0  # a filler needs a diameter that can be divided by
    for row, layout in enumerate(layouts):
        table[row, : len(layout)] = layout
    return Groups(table[:, :, 0], table[:, :, 1], table[:, :, 2], np.asarray(dt, dtype=float))


def bisect(balance: Callable[[Array], Array], low: Array, high: Array) -> Array:
    """Return the roots of a function that rises from below 0 at `low` to above 0 at `high`."""
    for _ in range(HALVINGS):
        middle = (low + high) / 2
        above = balance(middle) > 0
        low, high = np.where(above, low, middle), np.where(above, middle, high)
    return (low + high) / 2


@dataclass(frozen=True, slots=True)
class Flexure:
    """Flexural strength of many layouts.

    Parameters
    ----------
    c, Mn, eps_t, phi : Array
        Neutral axis depth [in or mm], nominal strength [lbf*in or N*mm], strain at dt [-] and
        strength reduction factor [-], one a layout.
    """

    c: Array
    Mn: Array
    eps_t: Array
    phi: Array


def flexure(case: Case, groups: Groups) -> Flexure:
    """Return the strength by strain compatibility with the rectangular stress block.

    Notes
    -----
    ACI 318, 22.2: plane strains with 0.003 at the compression face, 0.85 fc over a = beta1 c,
    elastic-perfectly-plastic steel. The axial balance rises with c: more concrete is compressed,
    and the strain of every bar moves towards compression. At c = 10 depths all is compressed.
    """
    counted = case.opposite if case.count_opposite else ()
    rows = len(groups.dt)
    fixed = np.array(counted, dtype=float).reshape(-1, 3)
    db = np.hstack([groups.db, np.tile(fixed[:, 0], (rows, 1))])
    area = np.hstack([groups.area, np.tile(fixed[:, 1], (rows, 1))])
    y = np.hstack([groups.y, np.tile(fixed[:, 2], (rows, 1))])
    modulus, ratio, stress = steel_modulus(case), beta1(case), 0.85 * case.fc

    def resultants(c: Array) -> tuple[Array, Array]:
        """Return axial force (compression positive) and moment about the compression face."""
        a = np.minimum(ratio * c, case.depth)
        strain = EPS_CU * (c[:, None] - y) / c[:, None]
        bar = np.clip(modulus * strain, -case.fy, case.fy) * area
        top = y - db / 2
        inside = np.clip(a[:, None] - top, 0.0, db)
        displaced = stress * area * inside / db
        force = np.sum(bar - displaced, axis=1)
        moment = np.sum(bar * y - displaced * (top + inside / 2), axis=1)
        strip_top = 0.0
        for width, height in case.strips:
            part = np.clip(a - strip_top, 0.0, height)
            force = force + stress * width * part
            moment = moment + stress * width * part * (strip_top + part / 2)
            strip_top += height
        return force, moment

    c = bisect(lambda trial: resultants(trial)[0], np.zeros(rows), np.full(rows, 10 * case.depth))
    eps_t = EPS_CU * (groups.dt - c) / c
    start, end = yield_strain(case), tension_controlled_strain(case)
    # ACI 318, Table 21.2.2: 0.65 to 0.90 between the two limits, linear in eps_t.
    phi = 0.65 + 0.25 * np.clip((eps_t - start) / (end - start), 0.0, 1.0)
    return Flexure(c, -resultants(c)[1], eps_t, phi)


def service_stress(case: Case, groups: Groups) -> Array:
    """Return the steel stress that crack control asks for (ACI 318, 24.3.2.1), [psi or MPa].

    Notes
    -----
    Without a service moment 2/3 fy; with one, the stress at dt of the elastic cracked section with
    n times the tension bars and n - 1 times the opposite bars where they are counted.
    """
    rows = len(groups.dt)
    if case.Ms is None:
        return np.full(rows, 2 / 3 * case.fy)
    n = steel_modulus(case) / case.Ec
    counted = case.opposite if case.count_opposite else ()

    def concrete(x: Array, power: int) -> Array:
        """Return the integral of width * (x - y)**power over the part above x."""
        total: Array = np.zeros(rows)
        strip_top = 0.0
        for width, height in case.strips:
            near = np.maximum(x - strip_top, 0.0)
            far = np.maximum(x - strip_top - height, 0.0)
            total += width * (near ** (power + 1) - far ** (power + 1)) / (power + 1)
            strip_top += height
        return total

    def first_moment(x: Array) -> Array:
        """Return the first moment of the transformed section about x."""
        bars: Array = n * np.sum(groups.area * (x[:, None] - groups.y), axis=1)
        other = sum(((n - 1) * area * (x - y) for _, area, y in counted), np.zeros(rows))
        return concrete(x, 1) + bars + other

    x = bisect(first_moment, np.zeros(rows), np.full(rows, case.depth))
    inertia: Array = (
        concrete(x, 2)
        + n * np.sum(groups.area * (x[:, None] - groups.y) ** 2, axis=1)
        + sum(((n - 1) * area * (x - y) ** 2 for _, area, y in counted), np.zeros(rows))
    )
    stress: Array = n * case.Ms * (groups.dt - x) / inertia
    return stress
