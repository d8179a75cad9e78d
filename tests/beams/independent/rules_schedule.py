"""What is written down: rows of bars with their gaps, sizes, lengths, masses, stock, sag."""

from __future__ import annotations

import math
from collections import Counter, defaultdict
from collections.abc import Iterator

import numpy as np

from tests.beams.independent.built import Bars, Built
from tests.beams.independent.plain_model import Array

_SLACK = 1e-6


def gaps(built: Built) -> Iterator[str]:
    """Layers, surfaces, standing over one another and clear gaps of every place, 25.2."""
    job, frame = built.job, built.frame
    allowed = set(job.sizes)
    for name, places in (("bottom", built.bottoms), ("top", built.tops)):
        for number, place in places.items():
            if not place.bars:
                continue
            if len(place.layers) > job.max_layers:
                yield f"{name} {number}: {len(place.layers)} layers"
            sizes = {size for layer in place.layers for size in layer}
            if not sizes <= allowed or len(sizes) > job.max_sizes:
                yield f"{name} {number}: sizes {sorted(sizes)}"
            spans = [number] if name == "bottom" else built_spans(built, number)
            for i in spans:
                rows = built.rows(i, place)
                if rows is None:
                    yield f"{name} {number}: layers do not stand on one another"
                    continue
                for k, row in enumerate(rows):
                    for gap, db in row.gaps:
                        if gap < frame.gap(db) - _SLACK:
                            need = frame.gap(db)
                            yield f"{name} {number} layer {k + 1}: gap {gap:.3f} < {need:.3f}"
                    surfaces = {bar.surface for bar in place.bars if bar.layer == k + 1}
                    if any(abs(value - row.surface) > _SLACK for value in surfaces):
                        yield f"{name} {number} layer {k + 1}: surface {surfaces}, {row.surface}"


def built_spans(built: Built, j: int) -> list[int]:
    """Spans that meet at a support."""
    near = (j + built.model.first - 1, j + built.model.first)
    return [i for i in near if 0 <= i < built.model.n]


def _room(built: Built, i: int, bars: list[Bars], pairs: int) -> tuple[float, float]:
    """Width that bars of layer 1 take, `pairs` of them touching, and the width there is."""
    widest = max(bar.size.db for bar in bars)
    count = sum(bar.count for bar in bars)
    width = sum(bar.count * bar.size.db for bar in bars)
    width += (count - pairs - 1) * built.frame.gap(widest)
    return width, 2 * built.frame.reach(i, widest) + widest


def lap_gaps(built: Built) -> Iterator[str]:
    """Clear gaps where bars are lapped side by side, 25.5.1.2."""
    job, model = built.job, built.model
    for i in sorted(built.bottoms):
        if i + 1 not in built.bottoms or (job.closed and not job.perimeter):
            continue
        left = [bar for bar in built.bottoms[i].bars if bar.role == "run"]
        right = [bar for bar in built.bottoms[i + 1].bars if bar.role == "run"]
        start, end = right[0].start, left[0].end
        others = [
            bar
            for k in (i, i + 1)
            for bar in built.bottoms[k].bars
            if bar.role == "stop" and bar.layer == 1 and bar.start < end and bar.end > start
        ]
        pairs = min(left[0].count, right[0].count)
        # Bars that stop on both sides do not lie in one section.
        for k, own in ((i, left), (i + 1, right)):
            stops = [bar for bar in others if bar in built.bottoms[k].bars]
            mates = right if own is left else left
            need, have = _room(built, k, [*own, *mates, *stops], pairs)
            if need > have + 1e-3:
                yield f"bottom lap of spans {i}, {i + 1}: {need:.2f} wide, room {have:.2f}"
    for one, two in zip(built.through[:-1], built.through[1:], strict=True):
        i = int(np.searchsorted(model.origin, (one.end + two.start) / 2)) - 1
        beside = [
            bar
            for bar in built.bars
            if bar.face == "top"
            and bar.role == "stop"
            and bar.layer == 1
            and bar.start < one.end
            and bar.end > two.start
        ]
        need, have = _room(built, i, [one, two, *beside], one.count)
        if need > have + 1e-3:
            yield f"top lap in span {i}: {need:.2f} wide, room {have:.2f}"


def hanger_gaps(built: Built) -> Iterator[str]:
    """Hangers lap with the bars of the supports and leave the gaps."""
    least = 12.0 if built.model.us else 300.0
    hangers = [b for b in built.bars if b.face == "top" and b.role == "hanger"]
    for hanger in hangers:
        i = int(np.searchsorted(built.model.origin, (hanger.start + hanger.end) / 2)) - 1
        for j in (built.model.left(i), built.model.right(i)):
            if j is None or not built.tops[j].bars:
                continue
            place = built.tops[j]
            run = [bar for bar in place.bars if bar.role == "run"]
            lap = min(hanger.end, run[0].end) - max(hanger.start, run[0].start)
            if lap < least - 1e-3:
                yield f"hanger of span {i} laps {lap:.2f} at support {j}"
            beside = [
                bar
                for bar in place.bars
                if bar.layer == 1 and bar.start < hanger.end and bar.end > hanger.start
            ]
            need, have = _room(built, i, [*beside, hanger], min(hanger.count, run[0].count))
            if need > have + 1e-3:
                yield f"hanger lap in span {i} at support {j}: {need:.2f} wide, room {have:.2f}"


def _up(value: float, step: float) -> float:
    return step * math.ceil((value - 1e-6) / step - 1e-12)


def lengths(built: Built) -> Iterator[str]:
    """Cut lengths, counts and mass of the whole schedule, worked out from the bars."""
    job, model, frame = built.job, built.model, built.frame
    step = job.length_step
    wanted: Counter[tuple[str, float]] = Counter()
    for bar in built.bars:
        db = bar.size.db
        limits = (1.01, 1.42) if model.us else (25.6, 36.0)
        bend = 3 * db if db <= limits[0] else 4 * db if db <= limits[1] else 5 * db
        hooks = int(bar.hook_start) + int(bar.hook_end)
        # Straight up to the bend, a quarter circle along the axis, 12 db.
        straight = bar.end - bar.start - hooks * (bend + db)
        length = straight + hooks * (math.pi / 2 * (bend + db / 2) + 12 * db)
        wanted[bar.name, round(_up(length, step), 3)] += bar.count
    tie = built.design.frame.stirrup.designation
    ds, bend = frame.tie.db, frame.bend
    tail = max(6 * ds, 3.0 if model.us else 75.0)
    for i, span in enumerate(job.spans):
        count = len(built.stirrups(i))
        outer, high = span.web - 2 * job.cover, span.depth - 2 * job.cover
        widths = [outer] + [outer / (frame.legs - 1)] * (frame.legs // 2 - 1)
        for width in widths:
            sides = 2 * (width - 2 * (bend + ds)) + 2 * (high - 2 * (bend + ds))
            turns = 3 * math.pi / 2 + 2 * 3 * math.pi / 4
            wanted[tie, round(_up(sides + turns * (bend + ds / 2) + 2 * tail, step), 3)] += count
    got: Counter[tuple[str, float]] = Counter()
    mass = 0.0
    for mark in built.design.schedule.marks:
        got[mark.bar.designation, round(mark.length, 3)] += mark.count
    for (name, length), count in wanted.items():
        mass += count * length / model.unit * model.bars[name].mass
    if wanted != got:
        lacking, extra = sorted((wanted - got).items()), sorted((got - wanted).items())
        yield f"schedule: {lacking[:3]} for {extra[:3]}"
    if abs(mass - built.design.schedule.mass) > 1e-4 * mass:
        yield f"mass {built.design.schedule.mass:.4f}, own {mass:.4f}"
    longest = max(length for _, length in wanted)
    if longest > max(job.stock) + _SLACK:
        yield f"longest bar {longest:.1f} beyond stock {max(job.stock):.1f}"


def cutting(built: Built) -> Iterator[str]:
    """Every piece is cut once, and no stock bar is overfull."""
    marks = {mark.mark: mark for mark in built.design.schedule.marks}
    done: defaultdict[str, int] = defaultdict(int)
    for plan in built.design.cutting:
        for bar in plan.bars:
            used = sum(marks[name].length * count for name, count in bar.pieces)
            if used > bar.stock_length + 1e-3:
                yield f"stock bar of {bar.stock_length:g} holds {used:g}"
            if min(abs(bar.stock_length - length) for length in built.job.stock) > 1e-6:
                yield f"stock length {bar.stock_length:g}"
            for name, count in bar.pieces:
                done[name] += count * bar.count
                if marks[name].bar.designation != plan.size:
                    yield f"{name} cut from {plan.size}"
    for name, mark in marks.items():
        if done[name] != mark.count:
            yield f"{name}: {done[name]} cut of {mark.count}"


def sizes(built: Built) -> Iterator[str]:
    """Sizes of bars in the beam, and the bars that follow from its outline."""
    job = built.job
    used = {bar.name for bar in built.bars if bar.role in ("run", "stop", "through")}
    hangers = {b.name for b in built.bars if b.role == "hanger" and b.face == "top"}
    if len(used | hangers) > job.most_sizes:
        yield f"sizes {sorted(used | hangers)} with most_sizes {job.most_sizes}"
    for i, span in enumerate(job.spans):
        if span.depth <= (36.0 if built.model.us else 900.0):
            continue
        stress = 2 / 3 * job.fy
        reach = span.depth / 2 - built.frame.surface
        rows = math.ceil(reach / built.frame.crack_spacing(stress) - 1e-6)
        origin = float(built.model.origin[i])
        for face in ("bottom", "top") if i not in built.bottoms else ("bottom",):
            have = [
                bar
                for bar in built.bars
                if bar.role == "skin"
                and bar.face == face
                and origin < (bar.start + bar.end) / 2 < origin + span.length
            ]
            if face == "bottom" and i not in built.bottoms:
                continue
            if sum(bar.count for bar in have) < 2 * rows:
                yield f"skin bars of span {i} {face}: {sum(b.count for b in have)} < {2 * rows}"


def sag(built: Built) -> Iterator[str]:
    """Deflection against Table 24.2.2 with Ie of the bars at midspan or a cantilever's face."""
    job, model = built.job, built.model
    divisor, later = {
        "roof": (180, False),
        "floor": (360, False),
        "sensitive": (480, True),
        "tolerant": (240, True),
    }[job.attached]
    for i, span in enumerate(job.spans):
        inertias = _inertias(built, i)
        if inertias is None:
            continue
        x = np.linspace(0.0, span.length, 801)
        if span.hang:
            tip = np.array([0.0 if span.hang == "left" else span.length])
            parts = model.sag(i, tip)[:, 0]
            j = model.right(i) if span.hang == "left" else model.left(i)
            assert j is not None  # a cantilever hangs on a support
            way = 1.0 if span.hang == "left" else -1.0
            turned = way * model.rotation(j) * span.length  # downwards at the tip
            own = parts - turned * model.Ec * model.Ig[i]
            back = i + 1 if span.hang == "left" else i - 1
            behind = _inertias(built, back)
            if behind is None:
                continue
            stages = _stages(own, job.sustained)
            rotated = _stages(turned * model.Ec * model.Ig[back], job.sustained)
            found = [
                s / (model.Ec * one) + r / (model.Ec * two)
                for s, r, one, two in zip(stages, rotated, inertias, behind, strict=True)
            ]
        else:
            parts = model.sag(i, x)
            total = parts[0] + np.maximum(parts[1:], 0.0).sum(axis=0)
            k = int(np.argmax(total))
            stages = _stages(parts[:, k], job.sustained)
            found = [s / (model.Ec * one) for s, one in zip(stages, inertias, strict=True)]
        dead, lasting, total_sag = found
        counted = total_sag - dead + (2.0 * lasting if later else 0.0)
        limit = span.length / divisor
        if abs(counted) > limit * 1.01:
            yield f"sag of span {i}: {counted:.4g} > {limit:.4g}"


def _stages(parts: Array, sustained: float) -> tuple[float, float, float]:
    live = float(np.maximum(parts[1:], 0.0).sum())
    return float(parts[0]), float(parts[0]) + sustained * live, float(parts[0]) + live


def _inertias(built: Built, i: int) -> tuple[float, float, float] | None:
    """Ie under dead, sustained and all load; None where top bars decide a span's middle."""
    job, model = built.job, built.model
    span = job.spans[i]
    low, high = model.faces(i)
    at = span.length / 2 if not span.hang else (high if span.hang == "left" else low)
    M = model.effects(i, np.array([at]))[0][:, 0]
    most = M[0] + np.maximum(M[1:], 0.0).sum()
    least = M[0] + np.minimum(M[1:], 0.0).sum()
    sagging = most >= -least
    if sagging == bool(span.hang):
        return None
    live = (most if sagging else least) - M[0]
    sign = 1.0 if sagging else -1.0
    place = built.bottoms[i] if sagging else built.near(i, "top")[0]
    if not place.bars:
        return None
    bars = [(b.area, span.depth - b.surface - b.size.db / 2) for b in place.bars]
    Ig, yt = model.gross(i, sagging)
    Icr = min(built.frame.cracked(i, sagging, bars)[1], Ig)
    fr = (7.5 if model.us else 0.62) * job.light * math.sqrt(job.fc)
    Mcr = fr * Ig / yt
    found = []
    for part in (0.0, job.sustained, 1.0):
        Ma = max(sign * (M[0] + part * live), 0.0)
        if job.year == 2014:
            ratio = min(1.0, (Mcr / Ma) ** 3) if Ma > 0.0 else 1.0
            found.append(ratio * Ig + (1 - ratio) * Icr)
        elif Ma <= 2 / 3 * Mcr:
            found.append(Ig)
        else:
            found.append(Icr / (1 - (2 / 3 * Mcr / Ma) ** 2 * (1 - Icr / Ig)))
    return found[0], found[1], found[2]
