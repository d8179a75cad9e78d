"""Beam jobs drawn at random, as plain numbers and as the text of a job file."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TypeVar

import numpy as np

T = TypeVar("T")
CODES = ("ACI 318-14", "ACI 318-19", "ACI 318M-14", "ACI 318M-19")


@dataclass(frozen=True, slots=True)
class Column:
    """A column at a support; lengths in the system's own unit, in or mm."""

    width: float
    depth: float
    height: float
    far: str


@dataclass(frozen=True, slots=True, kw_only=True)
class PlainSupport:
    """A support as a job writes it."""

    mark: str
    width: float
    kind: str
    ends: str
    columns: tuple[Column, ...] = ()


@dataclass(frozen=True, slots=True)
class PlainLoad:
    """A force (start equal to end) or a uniform load; in lbf and lbf/in, or N and N/mm."""

    case: str
    size: float
    start: float
    end: float

    @property
    def is_force(self) -> bool:
        """Whether it acts at one place."""
        return self.start == self.end


@dataclass(frozen=True, slots=True, kw_only=True)
class PlainSpan:
    """A span as a job writes it; uniform loads over the whole of it are among `loads`."""

    length: float
    hang: str
    web: float
    depth: float
    slab: tuple[float, float, float] | None
    flange: tuple[float, float] | None
    dead: float
    live: float
    loads: tuple[PlainLoad, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class PlainJob:
    """A whole job in plain numbers: in, lbf, psi or mm, N, MPa."""

    code: str
    fc: float
    steel: str
    fy: float
    light: float
    aggregate: float
    catalog: str
    sizes: tuple[str, ...]
    max_layers: int
    max_sizes: int
    tension_controlled: bool
    by: str
    cover: float
    stirrups: tuple[str, ...]
    stirrup_fy: float | None
    stirrup_step: float
    hangers: tuple[str, ...]
    perimeter: bool
    closed: bool
    attached: str
    sustained: float
    stock: tuple[float, ...]
    length_step: float
    most_sizes: int
    redistribution: float
    supports: tuple[PlainSupport, ...]
    spans: tuple[PlainSpan, ...]
    title: str = field(default="random", compare=False)

    @property
    def us(self) -> bool:
        """Whether its lengths are inches."""
        return self.code in CODES[:2]

    @property
    def year(self) -> int:
        """Year of the edition."""
        return 2014 if self.code.endswith("14") else 2019

    def text(self) -> str:
        """Return the job file."""
        length, stress = ("in", "psi") if self.us else ("mm", "MPa")
        line, force = ("kip/ft", "kip") if self.us else ("kN/m", "kN")

        def size(value: float) -> str:
            return f'"{value:.10g} {length}"'

        def spread(value: float) -> str:
            return f'"{value * 12 / 1000 if self.us else value:.12g} {line}"'

        def names(values: tuple[str, ...]) -> str:
            return "[" + ", ".join(f'"{value}"' for value in values) + "]"

        rows = [
            f'title = "{self.title}"',
            f'code = "{self.code}"',
            "[materials]",
            f'fc = "{self.fc:.10g} {stress}"',
            f'steel = "{self.steel}"',
            f"aggregate = {size(self.aggregate)}",
            f"lambda = {self.light}",
            "[bars]",
            f'catalog = "{self.catalog}"',
            f"sizes = {names(self.sizes)}",
            f"max_layers = {self.max_layers}",
            f"max_sizes = {self.max_sizes}",
        ]
        if not self.tension_controlled:
            rows.append("tension_controlled = false")
        rows += [
            "[ranking]",
            f'by = "{self.by}"',
            "[beam]",
            'mark = "R"',
            f"cover = {size(self.cover)}",
            'exposure = "interior"',
            f"stirrups = {names(self.stirrups)}",
            f"stirrup_step = {size(self.stirrup_step)}",
            f"hangers = {names(self.hangers)}",
            f'edge = "{"perimeter" if self.perimeter else "interior"}"',
            f'attached = "{self.attached}"',
            f"sustained = {self.sustained}",
            f"stock = [{', '.join(size(value) for value in self.stock)}]",
            f"length_step = {size(self.length_step)}",
            f"most_sizes = {self.most_sizes}",
            f"redistribution = {self.redistribution}",
        ]
        if self.stirrup_fy is not None:
            rows.append(f'stirrup_fy = "{self.stirrup_fy:.10g} {stress}"')
        if self.closed:
            rows.append("closed_stirrups = true")
        for support in self.supports:
            rows += [
                "[[support]]",
                f'mark = "{support.mark}"',
                f"width = {size(support.width)}",
                f'kind = "{support.kind}"',
                f'ends = "{support.ends}"',
            ]
            for key, column in zip(("below", "above"), support.columns, strict=False):
                rows.append(
                    f"{key} = {{ width = {size(column.width)}, depth = {size(column.depth)},"
                    f' height = {size(column.height)}, far = "{column.far}" }}'
                )
        for span in self.spans:
            rows += [
                "[[span]]",
                f"length = {size(span.length)}",
                f"width = {size(span.web)}",
                f"depth = {size(span.depth)}",
                f"dead = {spread(span.dead)}",
                f"live = {spread(span.live)}",
            ]
            if span.hang:
                rows.append(f'cantilever = "{span.hang}"')
            if span.slab is not None:
                thick, left, right = span.slab
                rows.append(
                    f"slab = {{ thickness = {size(thick)}, clear_left = {size(left)},"
                    f" clear_right = {size(right)} }}"
                )
            if span.flange is not None:
                width, thick = span.flange
                rows.append(f"flange = {{ width = {size(width)}, thickness = {size(thick)} }}")
            items = []
            for load in span.loads:
                if load.is_force:
                    items.append(
                        f'{{ case = "{load.case}", force = "{load.size / 1000:.12g} {force}",'
                        f" at = {size(load.start)} }}"
                    )
                else:
                    items.append(
                        f'{{ case = "{load.case}", uniform = {spread(load.size)},'
                        f" from = {size(load.start)}, to = {size(load.end)} }}"
                    )
            if items:
                rows.append(f"loads = [{', '.join(items)}]")
        return "\n".join(rows) + "\n"


class _Draw:
    """Draws a job of a seed."""

    def __init__(self, seed: int) -> None:
        self.seed = seed
        self.random = np.random.default_rng([31805, seed])
        self.code = CODES[seed % 4]
        self.us = self.code in CODES[:2]

    def chance(self, share: float) -> bool:
        return bool(self.random.random() < share)

    def pick(self, items: tuple[T, ...], weights: tuple[float, ...] | None = None) -> T:
        odds = None if weights is None else np.array(weights) / sum(weights)
        return items[int(self.random.choice(len(items), p=odds))]

    def between(self, low: float, high: float, step: float) -> float:
        """A multiple of a step."""
        return step * round(float(self.random.uniform(low, high)) / step)

    def lengths(self, us: tuple[float, float, float], si: tuple[float, float, float]) -> float:
        return self.between(*us) if self.us else self.between(*si)

    def job(self) -> PlainJob:
        deep = self.chance(0.06)
        wide = not deep and self.chance(0.07)
        inner = int(self.pick((1, 2, 3, 4), (3, 4, 3, 1)))
        hangs = [self.chance(0.22), self.chance(0.22)]
        limit = 5 - sum(hangs)
        inner = min(inner, limit)
        lengths = [
            self.lengths((144, 336, 6), (3600, 8500, 250)) * (1.35 if deep else 1.0)
            for _ in range(inner)
        ]
        unit = 1.0 if self.us else 25.4
        web = self.lengths((10, 20, 1), (250, 500, 25))
        depth = (2.0 if self.us else 50) * math.ceil(
            max(lengths) / self.random.uniform(9.5, 14.5) / (2.0 if self.us else 50)
        )
        depth = max(depth, 14.0 if self.us else 350.0)
        if deep:
            depth = self.lengths((38, 46, 2), (950, 1200, 50))
        if wide:
            web = self.lengths((26, 40, 2), (650, 1000, 50))
        kind = self.pick(("slab", "edge slab", "flange", "none"), (4, 2, 2, 3))
        thick = self.lengths((4, 7, 0.5), (100, 180, 10))
        level = float(self.random.uniform(0.5, 1.3)) * (1.6 if deep or wide else 1.0)
        spans = []
        kinds = ["left"] * hangs[0] + [""] * inner + ["right"] * hangs[1]
        inner_lengths = iter(lengths)
        changes = self.chance(0.25)
        for hang in kinds:
            length = (
                next(inner_lengths) if not hang else self.lengths((42, 78, 3), (1000, 2000, 50))
            )
            own = depth
            if changes and self.chance(0.5) and not deep:
                own = max(depth - self.pick((2.0, 4.0)) * (1 if self.us else 25), 12.0 * unit)
            slab = flange = None
            if kind in ("slab", "edge slab"):
                clear = self.lengths((60, 120, 6), (1500, 3000, 100))
                slab = (thick, 0.0 if kind == "edge slab" else clear, clear)
            elif kind == "flange":
                flange = (web + self.lengths((12, 50, 2), (300, 1200, 50)), thick)
            spans.append(self.span(length, hang, web, own, slab, flange, level))
        supports = tuple(self.support(number, inner + 1) for number in range(inner + 1))
        year14 = self.code.endswith("14")
        fc = (
            self.pick((3000.0, 4000.0, 5000.0, 6000.0))
            if self.us
            else self.pick((25.0, 28.0, 35.0, 42.0))
        )
        grade = self.pick(("A615-60", "A706-60", "A615-80"), (7, 1, 0.7))
        fy = (
            {"60": 60_000.0, "80": 80_000.0}[grade[-2:]]
            if self.us
            else {"60": 420.0, "80": 550.0}[grade[-2:]]
        )
        csa = not self.us and self.chance(0.15)
        if self.us:
            catalog = "astm-inch"
            sizes: tuple[str, ...] = ("#4", "#5", "#6", "#7", "#8", "#9", "#10", "#11")
            ties: tuple[str, ...] = ("#3", "#4")
            hangers: tuple[str, ...] = ("#4", "#5")
        elif csa:
            catalog, sizes = "csa", ("15M", "20M", "25M", "30M")
            ties, hangers = ("10M",), ("10M", "15M")
        else:
            catalog = "astm-metric"
            sizes = ("13", "16", "19", "22", "25", "29", "32", "36")
            ties, hangers = ("10", "13"), ("13", "16")
        count = int(self.random.integers(2, min(5, len(sizes)) + 1))
        start = int(self.random.integers(0, min(3, len(sizes) - count) + 1))
        chosen = tuple(sizes[start : start + count])
        if deep or wide:
            chosen = sizes[-4:]
        if self.chance(0.4):
            ties = ties[-1:]
        perimeter = self.chance(0.3)
        return PlainJob(
            title=f"random {self.seed}",
            code=self.code,
            fc=fc,
            steel=grade,
            fy=fy,
            light=self.pick((1.0, 0.85, 0.75), (9, 0.5, 0.5)),
            aggregate=self.pick((0.5, 0.75, 1.0)) if self.us else self.pick((13.0, 19.0, 25.0)),
            catalog=catalog,
            sizes=chosen,
            max_layers=int(self.pick((1, 2, 3), (2, 5, 1.5))),
            max_sizes=int(self.pick((1, 2))),
            tension_controlled=not (year14 and self.chance(0.3)),
            by=self.pick(("practical", "lightest")),
            cover=1.5 if self.us else 40.0,
            stirrups=ties,
            stirrup_fy=self.pick(
                (None, 40_000.0 if self.us else 280.0, 80_000.0 if self.us else 550.0), (6, 1, 1)
            ),
            stirrup_step=self.pick((1.0, 2.0)) if self.us else self.pick((25.0, 50.0)),
            hangers=hangers,
            perimeter=perimeter,
            closed=not perimeter and self.chance(0.3),
            attached=self.pick(("roof", "floor", "sensitive", "tolerant"), (2, 4, 1, 2)),
            sustained=self.pick((0.0, 0.25, 0.5, 1.0)),
            stock=self.pick(((240.0, 480.0, 720.0), (480.0,), (360.0, 720.0)))
            if self.us
            else self.pick(((6000.0, 12000.0, 18000.0), (12000.0,), (9000.0, 18000.0))),
            length_step=self.pick((1.0, 3.0), (3, 1)) if self.us else self.pick((25.0, 50.0, 10.0)),
            most_sizes=int(self.pick((2, 3, 4))),
            redistribution=self.pick((0.0, 0.05, 0.1, 0.15), (8, 1, 1, 1)),
            supports=supports,
            spans=tuple(spans),
        )

    def support(self, number: int, count: int) -> PlainSupport:
        last = number in (0, count - 1)
        kind = self.pick(("column", "wall", "girder"), (4, 1, 1))
        width = self.lengths((18, 30, 2), (450, 750, 50))
        if not last:
            width = self.lengths((10, 24, 2), (250, 600, 50))
        ends = self.pick(("free", "columns", "fixed"), (4, 4, 0.5 if last else 0.0))
        columns: tuple[Column, ...] = ()
        if ends == "columns":
            columns = tuple(
                Column(
                    self.lengths((12, 20, 2), (300, 500, 50)),
                    width,
                    self.lengths((108, 168, 6), (2750, 4250, 250)),
                    self.pick(("fixed", "pinned")),
                )
                for _ in range(int(self.pick((1, 2))))
            )
        return PlainSupport(
            mark=chr(ord("A") + number), width=width, kind=kind, ends=ends, columns=columns
        )

    def span(
        self,
        length: float,
        hang: str,
        web: float,
        depth: float,
        slab: tuple[float, float, float] | None,
        flange: tuple[float, float] | None,
        level: float,
    ) -> PlainSpan:
        def spread(low: float, high: float) -> float:
            # Drawn in trade units: kip/ft or kN/m.
            if self.us:
                return self.between(low, high, 0.05) * 1000 / 12
            return self.between(low * 14.6, high * 14.6, 0.5)

        dead = spread(0.3 * level, 1.2 * level)
        live = 0.0 if self.chance(0.08) else spread(0.2 * level, 1.0 * level)
        loads: list[PlainLoad] = []
        step = 3.0 if self.us else 50.0
        for case in ("dead", "live"):
            if self.chance(0.15):
                start = self.between(0, 0.5 * length, step)
                end = min(length, self.between(0.55 * length, length, step))
                loads.append(PlainLoad(case, spread(0.2, 0.8), start, end))
            if self.chance(0.15):
                at = min(length, self.between(0.1 * length, 0.9 * length, step))
                force = self.between(2, 14, 0.5) * 1000.0 * (1 if self.us else 4)
                loads.append(PlainLoad(case, force * (0.3 if hang else 1.0), at, at))
        return PlainSpan(
            length=length,
            hang=hang,
            web=web,
            depth=depth,
            slab=slab,
            flange=flange,
            dead=max(dead, spread(0.1, 0.1)),
            live=live,
            loads=tuple(loads),
        )


def random_job(seed: int) -> PlainJob:
    """Draw the job of a seed."""
    return _Draw(seed).job()
