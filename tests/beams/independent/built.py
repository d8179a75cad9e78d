"""A finished design as plain numbers: bars by place, stirrups by position, marks."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from optimizer.beams.design import BeamDesign
from tests.beams.independent.plain_model import Array, Model, Size
from tests.beams.independent.random_jobs import PlainJob
from tests.beams.independent.sections import Frame, Row


@dataclass(frozen=True, slots=True)
class Bars:
    """Equal bars, with places on the beam's axis."""

    face: str
    role: str
    name: str
    size: Size
    count: int
    layer: int
    start: float
    end: float
    hook_start: bool
    hook_end: bool
    surface: float

    @property
    def area(self) -> float:
        """Area of all of them."""
        return self.count * self.size.area


@dataclass(frozen=True, slots=True)
class Place:
    """Bars of one place with their rows where all of them are present."""

    bars: tuple[Bars, ...]
    layers: tuple[dict[str, int], ...]

    @property
    def area(self) -> float:
        """Area where all are present."""
        return sum(bar.area for bar in self.bars)


class Built:
    """A design, taken apart."""

    def __init__(self, job: PlainJob, design: BeamDesign) -> None:
        self.job, self.design = job, design
        self.model = model = Model(job)
        self.frame = Frame(model, design.frame.stirrup.designation, design.frame.legs)
        self.bars = [
            Bars(
                face=piece.face.value,
                role=piece.role.value,
                name=piece.bar.designation,
                size=model.bars[piece.bar.designation],
                count=piece.count,
                layer=piece.layer,
                start=piece.start,
                end=piece.end,
                hook_start=piece.hook_start,
                hook_end=piece.hook_end,
                surface=piece.surface,
            )
            for piece in design.pieces
        ]
        through = [bar for bar in self.bars if bar.role == "through"]
        through.sort(key=lambda bar: bar.start)
        self.through = tuple(through)
        self.bottoms: dict[int, Place] = {}
        for i, span in enumerate(job.spans):
            if span.hang:
                continue
            start, end = (float(model.origin[i]) + face for face in model.faces(i))
            own = [
                bar
                for bar in self.bars
                if bar.face == "bottom"
                and bar.role in ("run", "stop")
                and start < (bar.start + bar.end) / 2 < end
            ]
            self.bottoms[i] = self._place(own)
        self.tops: dict[int, Place] = {}
        for j, support in enumerate(job.supports):
            low = model.centre(j) - support.width / 2
            high = model.centre(j) + support.width / 2
            own = [
                bar
                for bar in self.bars
                if bar.face == "top"
                and bar.role in ("run", "stop")
                and bar.start < high + 1e-6
                and bar.end > low - 1e-6
            ]
            whole = self.whole_through()
            if whole is not None:
                own.append(whole)
            self.tops[j] = self._place(own)

    def _place(self, bars: list[Bars]) -> Place:
        layers: dict[int, dict[str, int]] = {}
        for bar in bars:
            layer = layers.setdefault(bar.layer, {})
            layer[bar.name] = layer.get(bar.name, 0) + bar.count
        return Place(tuple(bars), tuple(layers[number] for number in sorted(layers)))

    def whole_through(self) -> Bars | None:
        """Through bars as one, their laps closed."""
        if not self.through:
            return None
        last = self.through[-1]
        return replace(self.through[0], end=last.end, hook_end=last.hook_end)

    def rows(self, i: int, place: Place) -> list[Row] | None:
        """Rows of a place in the section of a span."""
        return self.frame.rows(i, list(place.layers))

    def near(self, i: int, face: str) -> list[Place]:
        """Places that give a span its bars of a face."""
        if face == "bottom":
            return [self.bottoms[i]] if i in self.bottoms else []
        ends = (self.model.left(i), self.model.right(i))
        return [self.tops[j] for j in ends if j is not None]

    def bars_of(self, i: int, face: str) -> list[tuple[Bars, Place]]:
        """Bars of a face that carry moments in a span, each with its place, each once."""
        found: list[tuple[Bars, Place]] = []
        for place in self.near(i, face):
            for bar in place.bars:
                if bar.role != "through" or not any(b.role == "through" for b, _ in found):
                    found.append((bar, place))
        return found

    def develop(self, i: int, bar: Bars, places: list[Place], sagging: bool) -> float:
        """Straight development length in a span's section."""
        found = []
        for place in places:
            rows = self.rows(i, place)
            if rows is not None and len(rows) >= bar.layer:
                found.append(self.frame.length(i, sagging, rows, bar.layer, bar.size))
        if bar.role == "through":
            alone = self.frame.rows(i, [{bar.name: bar.count}])
            assert alone is not None  # one layer always stands
            found.append(self.frame.length(i, sagging, alone, 1, bar.size))
        return max(found)

    def hook(self, i: int, bar: Bars, place: Place) -> float:
        """Development length of its hook at an end support, all bars with hooks there apart."""
        hooked = [b for b in place.bars if b.hook_start or b.hook_end]
        rows = self.rows(i, place) or []
        apart = 0.0
        if rows and all(b.layer == 1 for b in hooked):
            x = self.staying(rows[0].x, place, hooked)
            apart = float(np.diff(x).min()) if len(x) > 1 else 0.0
        return self.frame.hook(bar.size, apart)

    def staying(self, x: tuple[float, ...], place: Place, bars: list[Bars]) -> list[float]:
        """Centres of some bars of the outermost layer: pairs from the corners inwards."""
        order = sorted(place.layers[0].items(), key=lambda item: -self.model.bars[item[0]].db)
        half = [name for name, count in order for _ in range(count // 2)]
        middle = [name for name, count in order for _ in range(count % 2)]
        names = [*half, *middle, *half[::-1]]
        found: list[float] = []
        for name in place.layers[0]:
            count = sum(bar.count for bar in bars if bar.name == name and bar.layer == 1)
            own = [value for value, other in zip(x, names, strict=True) if other == name]
            pairs = count // 2
            found += own[:pairs] + ([0.0] if count % 2 else []) + own[len(own) - pairs :]
        return sorted(found)

    def share(self, i: int, bar: Bars, place: Place, sagging: bool, at: Array) -> Array:
        """Developed share of a bar at places on the beam's axis."""
        places = [place] if bar.role != "through" else self.near(i, "top")
        straight = self.develop(i, bar, places, sagging)
        lengths = [
            self.hook(i, bar, place) if hooked else straight
            for hooked in (bar.hook_start, bar.hook_end)
        ]
        share = np.minimum((at - bar.start) / lengths[0], (bar.end - at) / lengths[1])
        return np.clip(share, 0.0, 1.0)

    def present(self, i: int, face: str, place: float) -> list[Bars]:
        """Bars of a face that carry moments and are there at a place on the axis."""
        return [
            bar for bar, _ in self.bars_of(i, face) if bar.start - 1e-6 <= place <= bar.end + 1e-6
        ]

    def depth(self, i: int, bars: list[Bars]) -> float:
        """Effective depth of some bars."""
        h = self.job.spans[i].depth
        area = sum(bar.area for bar in bars)
        return sum(bar.area * (h - bar.surface - bar.size.db / 2) for bar in bars) / area

    def stirrups(self, i: int) -> Array:
        """Places of all stirrups of a span, from its left face."""
        plan = self.design.stirrups[i]
        start, end = self.model.faces(i)
        clear = end - start
        one, _, three = plan.spacings
        left, middle, right = plan.spaces
        x = [plan.first + k * one for k in range(left + 1)]
        stop = clear - plan.last - right * three
        if middle:
            own = (stop - x[-1]) / middle
            x += [x[-1] + own * (k + 1) for k in range(middle)]
        x += [stop + three * (k + 1) for k in range(right)]
        return np.array(x)
