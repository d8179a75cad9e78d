"""Bars in a section: where they lie, what they carry, and how they are developed."""

from __future__ import annotations

import math
from dataclasses import dataclass
from itertools import combinations, pairwise

import numpy as np

from tests.beams.independent.plain_model import Array, Model, Size

_SLACK = 1e-6


@dataclass(frozen=True, slots=True)
class Row:
    """A layer of bars: centres from the web's axis, diameters, surface from the face."""

    x: tuple[float, ...]
    db: tuple[float, ...]
    surface: float

    @property
    def gaps(self) -> list[tuple[float, float]]:
        """Clear gap of each pair of neighbours and the larger diameter of the two."""
        pairs = zip(pairwise(self.x), pairwise(self.db), strict=True)
        return [(b - a - (m + n) / 2, max(m, n)) for (a, b), (m, n) in pairs]


class Frame:
    """Stirrup of a design in a model: what the bars lie in."""

    def __init__(self, model: Model, stirrup: str, legs: int) -> None:
        self.model, self.job = model, model.job
        self.tie, self.legs = model.bars[stirrup], legs
        self.surface = self.job.cover + self.tie.db
        small = 0.63 if model.us else 16.1
        self.bend = (2.0 if self.tie.db <= small else 3.0) * self.tie.db
        self.layer_gap = 1.0 if model.us else 25.0

    def reach(self, i: int, db: float) -> float:
        """Distance of a corner bar's centre from the web's axis."""
        return self.job.spans[i].web / 2 - self.surface - max(self.bend, db / 2)

    def gap(self, db: float) -> float:
        """Least clear gap between bars, 25.2.1."""
        return max(1.0 if self.model.us else 25.0, db, 4 / 3 * self.job.aggregate)

    def rows(self, i: int, layers: list[dict[str, int]]) -> list[Row] | None:
        """Bars of a layout in place; None where bars of a layer cannot stand on those below."""
        found: list[Row] = []
        surface = self.surface
        for layer in layers:
            order = sorted(layer.items(), key=lambda item: -self.model.bars[item[0]].db)
            half: list[float] = []
            middle: list[float] = []
            for name, count in order:
                db = self.model.bars[name].db
                half += [db] * (count // 2)
                middle += [db] * (count % 2)
            db_row = (*half, *middle, *half[::-1])
            if not found:
                x = self._equal(db_row, self.reach(i, db_row[0]))
            else:
                stood = _stand(found[-1].x, db_row)
                if stood is None:
                    return None
                x = stood
            found.append(Row(x, db_row, surface))
            surface += max(db_row) + self.layer_gap
        return found

    @staticmethod
    def _equal(db: tuple[float, ...], reach: float) -> tuple[float, ...]:
        if len(db) == 1:
            return (0.0,)
        free = 2 * reach + (db[0] + db[-1]) / 2 - sum(db)
        gap = free / (len(db) - 1)
        x = [-reach]
        for one, two in pairwise(db):
            x.append(x[-1] + (one + two) / 2 + gap)
        return tuple(x)

    # --- strength

    def width(self, i: int, sagging: bool) -> list[tuple[float, float]]:
        """Strips (width, height) from the compression face."""
        span, flange = self.job.spans[i], self.model.flange[i]
        if flange is None:
            return [(span.web, span.depth)]
        strips = [flange, (span.web, span.depth - flange[1])]
        return strips if sagging else strips[::-1]

    def block(self, i: int, sagging: bool, a: Array) -> tuple[Array, Array]:
        """Area above a depth a and its first moment about the compression face."""
        area, first, top = np.zeros_like(a), np.zeros_like(a), 0.0
        for width, height in self.width(i, sagging):
            part = np.clip(a - top, 0.0, height)
            area += width * part
            first += width * part * (top + part / 2)
            top += height
        return area, first

    def strength(
        self, i: int, sagging: bool, area: Array, depth: Array
    ) -> tuple[Array, Array, Array]:
        """Mn, phi and eps_t of bars; area of shape (n, bars), depth of shape (bars,)."""
        job, model = self.job, self.model
        fc = 0.85 * job.fc
        start, drop, least = (4000.0, 1000.0, 8000.0) if model.us else (28.0, 7.0, 55.0)
        beta = 0.65 if job.fc >= least else min(0.85, 0.85 - 0.05 * (job.fc - start) / drop)
        h = job.spans[i].depth
        low = np.full(len(area), 1e-9 * h)
        high = np.full(len(area), h)

        def steel(c: Array) -> Array:
            stress = np.clip(model.Es * 0.003 * (depth - c[:, None]) / c[:, None], -job.fy, job.fy)
            inside = depth < beta * c[:, None]
            return area * (stress + np.where(inside, fc, 0.0))

        for _ in range(60):
            c = (low + high) / 2
            short = steel(c).sum(axis=1) > fc * self.block(i, sagging, beta * c)[0]
            low, high = np.where(short, c, low), np.where(short, high, c)
        c = (low + high) / 2
        Mn = (steel(c) * depth).sum(axis=1) - fc * self.block(i, sagging, beta * c)[1]
        dt = np.where(area > 0.0, depth, 0.0).max(axis=1)
        eps = 0.003 * (dt - c) / c
        grade60 = 60_000.0 if model.us else 420.0
        yielding = 0.002 if job.fy == grade60 else job.fy / model.Es
        full = 0.005 if job.year == 2014 else yielding + 0.003
        phi = np.clip(0.65 + 0.25 * (eps - yielding) / (full - yielding), 0.65, 0.9)
        some = area.sum(axis=1) > 0.0
        return np.where(some, Mn, 0.0), phi, np.where(some, eps, np.inf)

    def least_strain(self) -> float:
        """Least eps_t of 9.3.3.1."""
        job = self.job
        if job.year == 2014:
            return 0.005 if job.tension_controlled else 0.004
        grade60 = 60_000.0 if self.model.us else 420.0
        return (0.002 if job.fy == grade60 else job.fy / self.model.Es) + 0.003

    def cracked(
        self, i: int, sagging: bool, bars: list[tuple[float, float]]
    ) -> tuple[float, float]:
        """Neutral axis and second moment of the cracked section; bars are (area, depth)."""
        n = self.model.Es / self.model.Ec
        low, high = 0.0, self.job.spans[i].depth
        for _ in range(60):
            c = (low + high) / 2
            area, first = self.block(i, sagging, np.array([c]))
            pull = sum(n * A * (d - c) for A, d in bars)
            if area[0] * c - first[0] < pull:
                low = c
            else:
                high = c
        c = (low + high) / 2
        inertia = sum(n * A * (d - c) ** 2 for A, d in bars)
        top = 0.0
        for width, height in self.width(i, sagging):
            part = min(max(c - top, 0.0), height)
            inertia += width * part**3 / 12 + width * part * (c - top - part / 2) ** 2
            top += height
        return c, inertia

    def least_steel(self, i: int, sagging: bool, d: float) -> float:
        """As,min of 9.6.1.2."""
        job, us = self.job, self.model.us
        fy = job.fy if job.year == 2014 else min(job.fy, 80_000.0 if us else 550.0)
        root = math.sqrt(job.fc)
        stress = max(3 * root, 200.0) if us else max(0.25 * root, 1.4)
        bw, flange = job.spans[i].web, self.model.flange[i]
        if job.spans[i].hang and not sagging and flange is not None:
            bw = min(flange[0], 2 * bw)  # statically determinate, flange in tension
        return stress * bw * d / fy

    # --- development

    def _bond(self) -> tuple[float, float]:
        """Fy over lambda times the limited root, and psi_g."""
        job, us = self.job, self.model.us
        light = 1.0 if job.light == 1.0 else 0.75
        root = min(math.sqrt(job.fc), 100.0 if us else 8.3)
        grade = 1.0
        if job.year == 2019:
            limits = (60_000.0, 80_000.0) if us else (420.0, 550.0)
            grade = 1.0 if job.fy <= limits[0] else 1.15 if job.fy <= limits[1] else 1.3
        return job.fy / (light * root), grade

    def is_top(self, i: int, sagging: bool, surface: float, db: float) -> bool:
        """More than 12 in or 300 mm of concrete below."""
        below = surface if sagging else self.job.spans[i].depth - surface - db
        return below > (12.0 if self.model.us else 300.0) + _SLACK

    def short_form(self, size: Size, *, good: bool, top: bool) -> float:
        """Development length by the table of 25.4.2, before the least length."""
        bond, grade = self._bond()
        small = size.db <= (0.76 if self.model.us else 19.6)
        if self.model.us:
            divisor = (25.0 if small else 20.0) * (1.0 if good else 2 / 3)
        else:
            divisor = (2.1 if small else 1.7) if good else (1.4 if small else 1.1)
        return bond * grade * (1.3 if top else 1.0) / divisor * size.db

    def length(self, i: int, sagging: bool, rows: list[Row], layer: int, size: Size) -> float:
        """Development length of a bar of a layer, Ktr = 0."""
        row = rows[layer - 1]
        top = self.is_top(i, sagging, row.surface, min(row.db))
        half = self.job.spans[i].web / 2
        side = min(half - abs(x) - db / 2 for x, db in zip(row.x, row.db, strict=True))
        gap = min((gap for gap, _ in row.gaps), default=math.inf)
        if len(rows) > 1:
            gap = min(gap, self.layer_gap)
        largest = max(row.db)
        good = min(row.surface, side) >= largest - _SLACK and gap >= largest - _SLACK
        by_table = self.short_form(size, good=good, top=top)
        cb = row.surface + size.db / 2
        for k, (x, db) in enumerate(zip(row.x, row.db, strict=True)):
            if abs(db - size.db) > _SLACK:
                continue
            near = [abs(row.x[m] - x) / 2 for m in (k - 1, k + 1) if 0 <= m < len(row.x)]
            cb = min(cb, half - abs(x), *near)
        for m in (layer - 2, layer):
            if 0 <= m < len(rows):
                own = row.surface + size.db / 2
                cb = min(cb, *(abs(rows[m].surface + db / 2 - own) / 2 for db in rows[m].db))
        bond, grade = self._bond()
        psi = (1.3 if top else 1.0) * grade
        psi *= 0.8 if size.db <= (0.76 if self.model.us else 19.6) else 1.0
        general = bond * psi / min(cb / size.db, 2.5) * size.db
        general *= 3 / 40 if self.model.us else 1 / 1.1
        return max(min(by_table, general), 12.0 if self.model.us else 300.0)

    def lap(self, i: int, sagging: bool, size: Size) -> float:
        """Class B lap of bars of one layer with the code's gaps."""
        db = 0.0 if not sagging else size.db
        top = self.is_top(i, sagging, self.surface, db)
        good = self.surface >= size.db - _SLACK
        length = 1.3 * self.short_form(size, good=good, top=top)
        return max(length, 12.0 if self.model.us else 300.0)

    def hook(self, size: Size, apart: float) -> float:
        """Development length of a hook without ties; `apart` is between centres."""
        job, us = self.job, self.model.us
        light = 1.0 if job.light == 1.0 else 0.75
        root = light * min(math.sqrt(job.fc), 100.0 if us else 8.3)
        cover = self.surface
        if job.year == 2014:
            psi = 0.7 if cover >= (2.5 if us else 65.0) - _SLACK else 1.0
            length = job.fy * psi / root * size.db * (1 / 50 if us else 0.24)
        else:
            psi = 1.0 if apart >= 6 * size.db - _SLACK else 1.6
            psi *= 1.0 if cover >= 6 * size.db - _SLACK else 1.25
            if us:
                psi *= job.fc / 15_000 + 0.6 if job.fc < 6000 else 1.0
            else:
                psi *= job.fc / 105 + 0.6 if job.fc < 42 else 1.0
            length = job.fy * psi / root * size.db**1.5 / (55 if us else 23)
        return max(length, 8 * size.db, 6.0 if us else 150.0)

    # --- cracks

    def crack_spacing(self, stress: float) -> float:
        """Largest spacing of Table 24.3.2 at a steel stress."""
        if stress <= 0.0:
            return math.inf
        if self.model.us:
            ratio = 40_000.0 / stress
            return min(15 * ratio - 2.5 * self.surface, 12 * ratio)
        ratio = 280.0 / stress
        return min(380 * ratio - 2.5 * self.surface, 300 * ratio)


def _stand(lines: tuple[float, ...], db: tuple[float, ...]) -> tuple[float, ...] | None:
    """Symmetric choice of lines for a layer with the largest smallest gap, outermost first."""
    pairs, odd = divmod(len(db), 2)
    half = lines[: len(lines) // 2]
    if pairs > len(half) or (odd and len(lines) % 2 == 0) or pairs == 0:
        return None
    best: tuple[float, tuple[float, ...]] | None = None
    for inner in combinations(half[1:], pairs - 1):
        left = (half[0], *inner)
        x = (*left, *((0.0,) if odd else ()), *(-value for value in left[::-1]))
        gap = min(row_gap for row_gap, _ in Row(x, db, 0.0).gaps)
        if best is None or gap > best[0] + 1e-9:
            best = (gap, x)
    return best[1] if best else None
