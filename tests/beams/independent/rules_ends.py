"""Ends of bars: 9.7.3, the shares that run on, and structural integrity, 9.7.7."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from tests.beams.independent.built import Bars, Built, Place
from tests.beams.independent.plain_model import Array
from tests.beams.independent.rules_moment import largest, stations

_SLACK = 1e-4
_LITTLE = 2e-3


def _into(built: Built) -> float:
    return 6.0 if built.model.us else 150.0


def simple(built: Built, j: int) -> bool:
    """Whether a support is the beam's last and holds no moment."""
    return built.job.supports[j].ends == "free" and _last(built, j)


def _last(built: Built, j: int) -> bool:
    near = (j + built.model.first - 1, j + built.model.first)
    inner = [k for k in near if 0 <= k < built.model.n and not built.job.spans[k].hang]
    return len(inner) < 2


def _alone(built: Built, i: int, face: str, bars: list[Bars]) -> float:
    """Phi Mn of some bars, all developed."""
    h = built.job.spans[i].depth
    area = np.array([[bar.area for bar in bars]])
    depth = np.array([h - bar.surface - bar.size.db / 2 for bar in bars])
    Mn, phi, _ = built.frame.strength(i, face == "bottom", area, depth)
    return float(phi[0] * Mn[0])


def _peaks(built: Built, i: int, face: str) -> list[tuple[Place, float, int, Array, Array]]:
    """Places of a span's face, each with its peak, direction and the moments from there."""
    x = stations(built, i)
    env = built.model.envelope(i, x)
    demand = env.Mu_most if face == "bottom" else -env.Mu_least
    if face == "bottom":
        if i not in built.bottoms:
            return []
        k = int(np.argmax(demand))
        return [
            (built.bottoms[i], float(x[k]), 1, x[k:], demand[k:]),
            (built.bottoms[i], float(x[k]), -1, x[k::-1], demand[k::-1]),
        ]
    turn = int(np.argmax(env.Mu_least))
    found = []
    left, right = built.model.left(i), built.model.right(i)
    if left is not None:
        stop = len(x) if right is None else turn + 1
        found.append((built.tops[left], float(x[0]), 1, x[:stop], demand[:stop]))
    if right is not None:
        start = 0 if left is None else turn
        found.append((built.tops[right], float(x[-1]), -1, x[start:][::-1], demand[start:][::-1]))
    return found


def _crossing(x: Array, demand: Array, level: float) -> float | None:
    """Farthest place from the peak where a demand exceeds a level."""
    above = np.flatnonzero(demand > level)
    if not above.size:
        return None
    k = int(above[-1])
    if k == len(x) - 1:
        return float(x[-1])
    part = (demand[k] - level) / (demand[k] - demand[k + 1])
    return float(x[k] + part * (x[k + 1] - x[k]))


def cut_off(built: Built) -> Iterator[str]:
    """Bars stop max(d, 12 db) past where they are needed; the others run ld on, 9.7.3.3, .4."""
    model = built.model
    for i in range(model.n):
        origin = float(model.origin[i])
        low, high = model.faces(i)
        for face in ("bottom", "top"):
            for place, _, way, x, demand in _peaks(built, i, face):
                stops = [bar for bar in place.bars if bar.role == "stop"]
                stay = [bar for bar in place.bars if bar.role != "stop"]
                if not stops or not stay:
                    continue
                point = _crossing(x, demand, _alone(built, i, face, stay))
                if point is None:
                    continue
                d = built.depth(i, list(place.bars))
                j = model.right(i) if way > 0 else model.left(i)
                for bar in stops:
                    end = (bar.end if way > 0 else bar.start) - origin
                    past = way * (end - point)
                    need = max(d, 12 * bar.size.db)
                    if past >= need * (1 - 4e-3):
                        continue
                    tip = j is None
                    inside = end >= high - 1e-6 if way > 0 else end <= low + 1e-6
                    if tip and way * ((high if way > 0 else low) - end) <= built.job.cover + 3 * (
                        built.job.length_step
                    ):
                        continue
                    if inside and (face == "top" or (j is not None and simple(built, j))):
                        continue
                    yield (
                        f"9.7.3.3 {face} span {i} way {way:+d}: {bar.name} ends {past:.2f} past"
                        f" {point:.1f}, needs {need:.2f}{' in support' if inside else ''}"
                    )
                for bar in stay:
                    end = (bar.end if way > 0 else bar.start) - origin
                    hooked = bar.hook_end if way > 0 else bar.hook_start
                    ld = (
                        built.hook(i, bar, place)
                        if hooked
                        else built.develop(i, bar, [place], face == "bottom")
                    )
                    if way * (end - point) < ld * (1 - 2e-3):
                        yield (
                            f"9.7.3.4 {face} span {i} way {way:+d}: {bar.name} runs"
                            f" {way * (end - point):.2f} past {point:.1f}, ld {ld:.2f}"
                        )


def shares(built: Built) -> Iterator[str]:
    """Sagging bars run into supports and hogging bars past the inflection point, 9.7.3.8."""
    model, into = built.model, _into(built)
    little = _LITTLE * largest(built)
    for i in range(model.n):
        origin = float(model.origin[i])
        low, high = model.faces(i)
        if i in built.bottoms:
            place = built.bottoms[i]
            for j, way in ((model.left(i), -1), (model.right(i), 1)):
                assert j is not None  # the span lies between two supports
                share = 1 / 3 if simple(built, j) else 1 / 4
                far = [
                    bar
                    for bar in place.bars
                    if (bar.end - origin >= high + into - 1e-6) * (way > 0)
                    + (bar.start - origin <= low - into + 1e-6) * (way < 0)
                ]
                area = sum(bar.area for bar in far)
                if area < share * place.area * (1 - 1e-9):
                    yield (
                        f"9.7.3.8.{1 if share > 0.3 else 2} span {i} way {way:+d}:"
                        f" {area:.4g} of {place.area:.4g}"
                    )
        for place, _, way, x, demand in _peaks(built, i, "top"):
            if float(demand.max(initial=0.0)) <= little or built.job.spans[i].hang:
                continue
            zero = _crossing(x, demand, 0.0)
            if zero is None:
                continue
            support = model.right(i) if way > 0 else model.left(i)
            if support is not None and _last(built, support) and zero in (low, high):
                continue  # hogging all along: the bars are anchored at the end of the beam
            d = built.depth(i, list(place.bars))
            total, area = place.area, 0.0
            for bar in place.bars:
                end = (bar.end if way > 0 else bar.start) - origin
                need = max(d, 12 * bar.size.db, (high - low) / 16)
                if way * (end - zero) >= need * (1 - _SLACK):
                    area += bar.area
            if area < total / 3 * (1 - 1e-9):
                yield (
                    f"9.7.3.8.4 span {i} way {way:+d}: {area:.4g} of {total:.4g} past {zero:.1f}"
                )


def bond(built: Built) -> Iterator[str]:
    """Ld of sagging bars at simple supports and inflection points, 9.7.3.8.3."""
    model = built.model
    for i, place in built.bottoms.items():
        origin = float(model.origin[i])
        low, high = model.faces(i)
        stay = [bar for bar in place.bars if bar.role == "run"]
        for _, _, way, x, demand in _peaks(built, i, "bottom"):
            j = model.right(i) if way > 0 else model.left(i)
            assert j is not None  # the span lies between two supports
            face = high if way > 0 else low
            zero = _crossing(x, demand, 0.0)
            if zero is None:
                continue
            inner = way * (face - zero) > 1e-3
            if not inner and not simple(built, j):
                continue
            at = zero if inner else face
            Vu = float(model.envelope(i, np.array([at])).Vu[0])
            bars = [
                bar
                for bar in place.bars
                if way * ((bar.end if way > 0 else bar.start) - origin - at) > 0
            ]
            h = built.job.spans[i].depth
            Mn, _, _ = built.frame.strength(
                i,
                True,
                np.array([[bar.area for bar in bars]]),
                np.array([h - bar.surface - bar.size.db / 2 for bar in bars]),
            )
            for bar in stay:
                end = (bar.end if way > 0 else bar.start) - origin
                hooked = bar.hook_end if way > 0 else bar.hook_start
                ld = built.develop(i, bar, [place], True)
                centre = model.centre(j) - origin
                if inner:
                    la = min(way * (end - zero), max(built.depth(i, bars), 12 * bar.size.db))
                    most = float(Mn[0]) / Vu + la
                else:
                    la = max(way * (end - centre), 0.0)
                    if hooked and way * (end - centre) >= 0.0:
                        continue
                    pressed = built.job.supports[j].kind != "girder"
                    most = (1.3 if pressed else 1.0) * float(Mn[0]) / Vu + la
                if ld > most * (1 + 1e-3):
                    yield f"9.7.3.8.3 span {i} way {way:+d}: ld {ld:.2f} > {most:.2f}"


def integrity(built: Built) -> Iterator[str]:
    """Continuous bars, their laps and their anchorage at the ends, 9.7.7."""
    job, model = built.job, built.model
    if job.perimeter:
        whole = built.whole_through()
        if whole is None:
            yield "9.7.7.1: no continuous top bars"
            return
        for j, place in built.tops.items():
            if whole.area < place.area / 6 * (1 - 1e-9) or whole.count < 2:
                yield f"9.7.7.1 top at support {j}"
    for left, right in zip(built.through[:-1], built.through[1:], strict=True):
        overlap = left.end - right.start
        middle = (left.end + right.start) / 2
        i = int(np.searchsorted(model.origin, middle)) - 1
        lap = max(built.frame.lap(k, False, left.size) for k in range(model.n))
        centre = float(model.origin[i]) + job.spans[i].length / 2
        if overlap < lap * (1 - _SLACK):
            yield f"lap of through bars: {overlap:.2f} < {lap:.2f}"
        if abs(middle - centre) > job.spans[i].length / 6 or job.spans[i].hang:
            yield f"lap of through bars in span {i} is {middle - centre:.1f} off midspan"
        if left.name != right.name or left.count != right.count:
            yield "through bars differ"
    if job.closed and not job.perimeter:
        return
    spans = sorted(built.bottoms)
    for i in spans:
        place = built.bottoms[i]
        run = [bar for bar in place.bars if bar.role == "run"]
        if sum(bar.count for bar in run) < 2 or sum(bar.area for bar in run) < place.area / 4 * (
            1 - 1e-9
        ):
            yield f"9.7.7 bottom of span {i}: too few run on"
        for end_support, way in ((model.left(i), -1), (model.right(i), 1)):
            assert end_support is not None  # the span lies between two supports
            j = end_support
            support = job.supports[j]
            face = model.centre(j) - way * support.width / 2
            other = i + way
            continuous = other in built.bottoms
            for bar in run:
                end = bar.end if way > 0 else bar.start
                hooked = bar.hook_end if way > 0 else bar.hook_start
                if not continuous:
                    need = (
                        built.hook(i, bar, place)
                        if hooked
                        else built.develop(i, bar, [place], True)
                    )
                    if way * (end - face) < need * (1 - _SLACK):
                        yield (
                            f"9.7.7.4 span {i} way {way:+d}: {way * (end - face):.2f} <"
                            f" {need:.2f} hook {hooked}"
                        )
                    room = support.width - built.frame.surface
                    if not hooked and 0 <= other < model.n and job.spans[other].hang:
                        room += job.spans[other].length - support.width / 2  # on to the tip
                    if way * (end - face) > room + 1e-6:
                        yield f"bottom bar of span {i} leaves support {j}"
                elif way > 0:
                    theirs = [b for b in built.bottoms[other].bars if b.role == "run"]
                    mate = theirs[0]
                    overlap = bar.end - mate.start
                    lap = max(
                        built.frame.lap(k, True, size.size)
                        for k in (i, other)
                        for size in (bar, mate)
                    )
                    if overlap < lap * (1 - _SLACK):
                        yield f"bottom lap at support {j}: {overlap:.2f} < {lap:.2f}"
                    if not mate.start < model.centre(j) < bar.end:
                        yield f"bottom lap at support {j} lies beside it"
                    if bar.size.db > (1.42 if model.us else 36.0):
                        yield f"bottom lap of {bar.name}"
                    both = min(bar.count, mate.count)
                    for number, one in ((i, bar), (other, mate)):
                        share = both * one.size.area / built.bottoms[number].area
                        if share < 1 / 4 * (1 - 1e-9):
                            yield (
                                f"9.7.7 support {j}: {both} {one.name} spliced are {share:.3f} of"
                                f" the bars of span {number}"
                            )
