"""The beam of a job in plain numbers, with an elastic analysis by beam elements."""

from __future__ import annotations

import csv
import math
from dataclasses import dataclass
from functools import cache
from itertools import product
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

import catalogs
from tests.beams.independent.random_jobs import PlainJob

Array = NDArray[np.float64]
_FILES = {
    "astm-inch": "bars_astm_a615_inch.csv",
    "astm-metric": "bars_astm_a615_metric.csv",
    "csa": "bars_csa_g30_18.csv",
}
_JUST = 1e-6  # beside a place, to see both sides of a force [in or mm]


@dataclass(frozen=True, slots=True)
class Size:
    """Diameter, area and mass of a bar size."""

    db: float
    area: float
    mass: float


@cache
def sizes_of(catalog: str) -> dict[str, Size]:
    """Read a table of bar sizes."""
    assert catalogs.__file__ is not None
    path = Path(catalogs.__file__).parent / "data" / _FILES[catalog]
    with path.open(encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    return {
        row["designation"]: Size(float(row["diameter"]), float(row["area"]), float(row["mass"]))
        for row in rows[1:]
    }


@dataclass(frozen=True, slots=True)
class Envelope:
    """Largest and smallest effects of all arrangements at places of one span."""

    x: Array
    Mu_most: Array
    Mu_least: Array
    Vu: Array
    Ms_most: Array
    Ms_least: Array


class Model:
    """Geometry, materials and effects of loads of a job.

    All lengths are in or mm, forces lbf or N. Places are on a span's own axis.
    """

    def __init__(self, job: PlainJob) -> None:
        self.job = job
        self.us = job.us
        self.bars = sizes_of(job.catalog)
        self.n = len(job.spans)
        self.first = 1 if job.spans[0].hang == "left" else 0
        self.origin = np.concatenate(([0.0], np.cumsum([span.length for span in job.spans])))
        root = math.sqrt(job.fc)
        self.Ec = (57_000.0 if self.us else 4700.0) * root
        self.Es = 29e6 if self.us else 200_000.0
        self.unit = 12.0 if self.us else 1000.0
        self.flange = [self._flange(i) for i in range(self.n)]
        self.Ig = [self._inertia(i)[0] for i in range(self.n)]
        self._solve()

    # --- geometry

    def left(self, i: int) -> int | None:
        """Support at the left end of a span."""
        number = i - self.first
        return number if number >= 0 else None

    def right(self, i: int) -> int | None:
        """Support at the right end of a span."""
        number = i - self.first + 1
        return number if number < len(self.job.supports) else None

    def faces(self, i: int) -> tuple[float, float]:
        """Clear span of a span."""
        left, right = self.left(i), self.right(i)
        start = 0.0 if left is None else self.job.supports[left].width / 2
        end = self.job.spans[i].length
        return start, end if right is None else end - self.job.supports[right].width / 2

    def centre(self, j: int) -> float:
        """Place of a support on the beam's axis."""
        return float(self.origin[j + self.first])

    def _flange(self, i: int) -> tuple[float, float] | None:
        span = self.job.spans[i]
        if span.flange is not None:
            return span.flange
        if span.slab is None:
            return None
        h, one, two = span.slab
        start, end = self.faces(i)
        ln = end - start
        if one > 0.0 and two > 0.0:
            return span.web + sum(min(8 * h, s / 2, ln / 8) for s in (one, two)), h
        return span.web + min(6 * h, max(one, two) / 2, ln / 12), h

    def _inertia(self, i: int) -> tuple[float, float]:
        """Ig and the distance of the centroid from the top."""
        span = self.job.spans[i]
        parts = [(span.web, span.depth, span.depth / 2)]
        if self.flange[i] is not None:
            width, thick = self.flange[i]  # type: ignore[misc]
            parts.append((width - span.web, thick, thick / 2))
        area = sum(b * h for b, h, _ in parts)
        y = sum(b * h * c for b, h, c in parts) / area
        return sum(b * h**3 / 12 + b * h * (c - y) ** 2 for b, h, c in parts), y

    def gross(self, i: int, sagging: bool) -> tuple[float, float]:
        """Ig and the distance of the centroid from the tension face."""
        inertia, y = self._inertia(i)
        return inertia, self.job.spans[i].depth - y if sagging else y

    # --- analysis

    def _uniform(self, i: int, case: str) -> list[tuple[float, float, float]]:
        span = self.job.spans[i]
        whole = span.dead if case == "dead" else span.live
        if case == "dead":
            density = 150.0 / 1728.0 if self.us else 24e-6
            whole += density * span.web * span.depth
        found = [(whole, 0.0, span.length)]
        found += [
            (load.size, load.start, load.end)
            for load in span.loads
            if load.case == case and not load.is_force
        ]
        return found

    def forces(self, i: int, case: str | None = None) -> list[tuple[float, float]]:
        """Forces on a span and their places."""
        return [
            (load.size, load.start)
            for load in self.job.spans[i].loads
            if load.is_force and case in (None, load.case)
        ]

    def _solve(self) -> None:
        job = self.job
        nodes = {float(value) for value in self.origin}
        for i in range(self.n):
            for load in job.spans[i].loads:
                nodes |= {float(self.origin[i] + load.start), float(self.origin[i] + load.end)}
        self.node = np.array(sorted(nodes))
        # Places that differ by rounding only are one.
        self.node = self.node[np.diff(self.node, prepend=-1e9) > 1e-6]
        length = np.diff(self.node)
        count = len(self.node)
        middle = (self.node[1:] + self.node[:-1]) / 2
        self.of_element = np.searchsorted(self.origin, middle) - 1
        EI = self.Ec * np.array([self.Ig[i] for i in self.of_element])
        K = np.zeros((2 * count, 2 * count))
        stiff = []
        for e, (L, ei) in enumerate(zip(length, EI, strict=True)):
            k = (
                ei
                / L**3
                * np.array(
                    [
                        [12, 6 * L, -12, 6 * L],
                        [6 * L, 4 * L * L, -6 * L, 2 * L * L],
                        [-12, -6 * L, 12, -6 * L],
                        [6 * L, 2 * L * L, -6 * L, 4 * L * L],
                    ]
                )
            )
            stiff.append(k)
            K[2 * e : 2 * e + 4, 2 * e : 2 * e + 4] += k
        held = []
        for j, support in enumerate(job.supports):
            at = int(np.argmin(np.abs(self.node - self.centre(j))))
            held.append(2 * at)
            if support.ends == "fixed":
                held.append(2 * at + 1)
            for column in support.columns:
                far = 4.0 if column.far == "fixed" else 3.0
                inertia = column.width * column.depth**3 / 12
                K[2 * at + 1, 2 * at + 1] += far * self.Ec * inertia / column.height
        free = np.setdiff1d(np.arange(2 * count), held)
        self.length, self.EI = length, EI
        self.cases = []  # dead load, then the live load of each span
        for case, loaded in (("dead", None), *(("live", i) for i in range(self.n))):
            w = np.zeros(len(length))
            F = np.zeros(2 * count)
            for i in range(self.n):
                if loaded not in (None, i):
                    continue
                for size, start, end in self._uniform(i, case):
                    at = self.origin[i]
                    w[(middle > at + start) & (middle < at + end)] += size
                for size, place in self.forces(i, case):
                    F[2 * int(np.argmin(np.abs(self.node - (self.origin[i] + place))))] -= size
            equal = [
                np.array([-q * L / 2, -q * L * L / 12, -q * L / 2, q * L * L / 12])
                for q, L in zip(w, length, strict=True)
            ]
            for e, f in enumerate(equal):
                F[2 * e : 2 * e + 4] += f
            u = np.zeros(2 * count)
            u[free] = np.linalg.solve(K[np.ix_(free, free)], F[free])
            ends = np.array([k @ u[2 * e : 2 * e + 4] - equal[e] for e, k in enumerate(stiff)])
            self.cases.append((w, u, ends))

    def _element(self, i: int, x: Array) -> tuple[NDArray[np.intp], Array]:
        place = self.origin[i] + x
        e = np.clip(np.searchsorted(self.node, place, side="right") - 1, 0, len(self.length) - 1)
        own = np.flatnonzero(self.of_element == i)
        e = np.clip(e, own[0], own[-1])
        return e, place - self.node[e]

    def effects(self, i: int, x: Array) -> tuple[Array, Array]:
        """Moments and shears of each case, shape (1 + spans, n)."""
        e, s = self._element(i, x)
        M = np.array([-f[e, 1] + f[e, 0] * s - w[e] * s * s / 2 for w, _, f in self.cases])
        V = np.array([f[e, 0] - w[e] * s for w, _, f in self.cases])
        return M, V

    def sag(self, i: int, x: Array) -> Array:
        """Downward deflections of each case times EI of the span, shape (1 + spans, n)."""
        e, s = self._element(i, x)
        L = self.length[e]
        t = s / L
        found = []
        for w, u, _ in self.cases:
            v = (
                (1 - 3 * t**2 + 2 * t**3) * u[2 * e]
                + (t - 2 * t**2 + t**3) * L * u[2 * e + 1]
                + (3 * t**2 - 2 * t**3) * u[2 * e + 2]
                + (t**3 - t**2) * L * u[2 * e + 3]
                - w[e] * s**2 * (L - s) ** 2 / (24 * self.EI[e])
            )
            found.append(-v * self.EI[e])
        return np.array(found)

    def rotation(self, j: int) -> Array:
        """Rotation of a support under each case, anticlockwise positive."""
        at = int(np.argmin(np.abs(self.node - self.centre(j))))
        return np.array([u[2 * at + 1] for _, u, _ in self.cases])

    def shares(self, i: int) -> tuple[float, float]:
        """Share of the moments at the ends of a span that is redistributed."""
        left, right = (
            0.0 if j is None or not self.movable(j) else self.job.redistribution
            for j in (self.left(i), self.right(i))
        )
        return left, right

    def movable(self, j: int) -> bool:
        """Whether the moment at a support is not settled by statics."""
        near = [k for k in (j + self.first - 1, j + self.first) if 0 <= k < self.n]
        if any(self.job.spans[k].hang for k in near):
            return False
        return len(near) == 2 or self.job.supports[j].ends != "free"

    def envelope(self, i: int, x: Array) -> Envelope:
        """Effects of all 2^n arrangements of live load."""
        L = self.job.spans[i].length
        ends, _ = self.effects(i, np.array([0.0, L]))
        one, two = self.shares(i)
        M, _ = self.effects(i, x)
        off_left, off_right = ends[:, :1] * one, ends[:, 1:] * two
        moved = M - off_left * (1 - x / L) - off_right * x / L
        low, high = self.faces(i)
        sides = []
        for place in (np.maximum(x - _JUST, low), np.minimum(x + _JUST, high)):
            _, V = self.effects(i, place)
            sides.append(V - (off_right - off_left) / L)
        on = np.array(list(product((0.0, 1.0), repeat=self.n)))
        factored = [1.4 * moved[:1], 1.2 * moved[0] + 1.6 * (on @ moved[1:])]
        shears = [part for V in sides for part in (1.4 * V[:1], 1.2 * V[0] + 1.6 * (on @ V[1:]))]
        service = M[0] + on @ M[1:]
        every = np.concatenate(factored)
        return Envelope(
            x=x,
            Mu_most=every.max(axis=0),
            Mu_least=every.min(axis=0),
            Vu=np.abs(np.concatenate(shears)).max(axis=0),
            Ms_most=service.max(axis=0),
            Ms_least=service.min(axis=0),
        )
