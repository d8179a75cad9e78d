"""Stirrups: strength, least area, spacing, and the shear that ends of bars ask for."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from tests.beams.independent.built import Bars, Built
from tests.beams.independent.plain_model import Array
from tests.beams.independent.rules_moment import largest, of_sign

_SLACK = 1e-3
_LITTLE = 2e-3


class Shear:
    """Shear strength of a span."""

    def __init__(self, built: Built, i: int) -> None:
        job, model = built.job, built.model
        self.built, self.i, us = built, i, model.us
        self.bw = job.spans[i].web
        self.root = math.sqrt(job.fc)
        self.Av = built.frame.legs * built.frame.tie.area
        fy = job.stirrup_fy if job.stirrup_fy is not None else job.fy
        self.fyt = min(fy, 60_000.0 if us else 420.0)
        self.low, self.high = model.faces(i)
        self.places = built.stirrups(i)
        self.vc = (2.0 if us else 0.17) * job.light * self.root * self.bw
        self.most = (8.0 if us else 0.66) * self.root * self.bw
        self.heavy = (4.0 if us else 0.33) * self.root * self.bw
        self.least = max(0.75 * self.root, 50.0) if us else max(0.062 * self.root, 0.35)
        self.cap = 24.0 if us else 600.0

    def spacing(self, x: float) -> float:
        """Distance of the stirrups on both sides of a place; at a stirrup the lesser one."""
        own = x - self.low
        gaps = np.diff(self.places)
        near = (self.places[:-1] - 1e-6 <= own) & (own <= self.places[1:] + 1e-6)
        if near.any():
            return float(gaps[near].min())
        return float(gaps[0] if own < self.places[0] else gaps[-1])

    def depth(self, x: float) -> float:
        """Least effective depth of the bars that are in tension under some arrangement."""
        built, i = self.built, self.i
        env = built.model.envelope(i, np.array([x]))
        found = []
        for face, moment in (("bottom", env.Mu_most[0]), ("top", -env.Mu_least[0])):
            bars = built.present(i, face, x + float(built.model.origin[i]))
            if bars and moment > 0.0:
                found.append(built.depth(i, bars))
        # Only just inside a tip there are none.
        return min(found) if found else built.job.spans[i].depth - built.frame.surface

    def strength(self, x: float, d: float) -> float:
        """Phi Vn with an effective depth."""
        return 0.75 * (self.vc * d + self.Av * self.fyt * d / self.spacing(x))

    def at_d(self, left: bool) -> bool:
        """Whether 9.4.3.2 lets the shear be taken at d from a face."""
        built, i = self.built, self.i
        j = built.model.left(i) if left else built.model.right(i)
        if j is None or built.job.supports[j].kind == "girder":
            return False
        d = self.depth(self.low if left else self.high)
        return not any(
            (place <= self.low + d if left else place >= self.high - d)
            and self.low <= place <= self.high
            for _, place in built.model.forces(i)
        )


def shear(built: Built) -> Iterator[str]:
    """Phi Vn, least area, spacing along and across, 9.6.3, 9.7.6.2.2, 22.5.1.2."""
    for i in range(built.model.n):
        own = Shear(built, i)
        x = np.linspace(own.low, own.high, 201)
        forces = [p for _, p in built.model.forces(i) if own.low < p < own.high]
        x = np.unique(np.concatenate((x, own.low + own.places, np.array(forces))))
        Vu = _with_faces(built, own, x)
        across = (own.bw - 2 * built.job.cover - built.frame.tie.db) / (built.frame.legs - 1)
        known: dict[tuple[Bars, ...], float] = {}
        for place, V in zip(x, Vu, strict=True):
            d = _depth(own, float(place), known)
            s = own.spacing(float(place))
            Vs = max(V / 0.75 - own.vc * d, 0.0)
            half = 2.0 if Vs > own.heavy * d * (1 + _SLACK) else 1.0
            rules = {
                "phi Vn": (V, 0.75 * (own.vc * d + own.Av * own.fyt * d / s)),
                "largest Vs": (Vs, own.most * d),
                "least area": (own.least * own.bw * s / own.fyt, own.Av),
                "along": (s, min(d / 2, own.cap) / half),
            }
            if built.job.year == 2019:
                rules["across"] = (across, min(d, own.cap) / half)
            broken = [
                f"{name} span {i} at {place:.1f}: {need:.5g} > {have:.5g}"
                for name, (need, have) in rules.items()
                if need > have * (1 + _SLACK)
            ]
            if broken:
                yield from broken
                break


def _depth(own: Shear, x: float, known: dict[tuple[Bars, ...], float]) -> float:
    """Least effective depth at a place, each set of bars worked out once."""
    built, i = own.built, own.i
    at = x + float(built.model.origin[i])
    found = []
    for face in ("bottom", "top"):
        bars = tuple(built.present(i, face, at))
        if bars and bars not in known:
            known[bars] = built.depth(i, list(bars))
        if bars:
            found.append(known[bars])
    return min(found) if found else own.depth(x)


def _with_faces(built: Built, own: Shear, x: Array) -> Array:
    """Vu with its reduction near supports."""
    i = own.i
    Vu = built.model.envelope(i, x).Vu.copy()
    for left in (True, False):
        if own.at_d(left):
            d = own.depth(own.low if left else own.high)
            at = own.low + d if left else own.high - d
            if not own.low < at < own.high:
                continue
            there = float(built.model.envelope(i, np.array([at])).Vu[0])
            near = x < at if left else x > at
            Vu[near] = np.minimum(Vu[near], there)
    return Vu


def positions(built: Built) -> Iterator[str]:
    """Stirrups cover the clear span from face to face, the first ones close to the faces."""
    nearest = 2.0 if built.model.us else 50.0
    for i in range(built.model.n):
        low, high = built.model.faces(i)
        places, plan = built.stirrups(i), built.design.stirrups[i]
        gaps = np.diff(places)
        if len(places) != plan.count:
            yield f"stirrups of span {i}: {len(places)} for {plan.count}"
        first, last = float(places[0]), high - low - float(places[-1])
        # At a tip the bars that hold it end up to a step of lengths short of the cover.
        tip = built.job.cover + 2 * built.job.length_step + built.frame.tie.db
        for end, gap, support in (
            (first, gaps[0], built.model.left(i)),
            (last, gaps[-1], built.model.right(i)),
        ):
            most = max(nearest, gap / 2) if support is not None else max(nearest, tip)
            if not 0.0 <= end <= most + 1e-6:
                yield f"stirrup of span {i} {end:.2f} from a face"
        if (gaps <= 0.0).any():
            yield f"stirrups of span {i} overlap"
        step = built.job.stirrup_step
        for gap in (*gaps[: plan.spaces[0]], *gaps[len(gaps) - plan.spaces[2] :]):
            if abs(gap / step - round(gap / step)) > 1e-6:
                yield f"stirrup spacing {gap:.3f} of span {i} is no multiple of {step:g}"
                break


def ends_in_tension(built: Built) -> Iterator[str]:
    """Bars that stop in a tension zone, 9.7.3.5 (a) or (b)."""
    model = built.model
    little = _LITTLE * largest(built)
    largest_bar = 1.42 if model.us else 36.0
    for i in range(model.n):
        own = Shear(built, i)
        origin = float(model.origin[i])
        for face in ("bottom", "top"):
            sagging = face == "bottom"
            for bar, _ in built.bars_of(i, face):
                for end, way in ((bar.start, -1), (bar.end, 1)):
                    x = end - origin
                    if not own.low < x < own.high:
                        continue
                    env = model.envelope(i, np.array([x]))
                    moment = float(of_sign(env, sagging)[0][0])
                    j = model.left(i) if way < 0 else model.right(i)
                    room = built.job.cover + 2 * built.job.length_step
                    tip = j is None and min(x - own.low, own.high - x) <= room
                    if moment <= little or tip:
                        continue
                    # The tension that the bars stop in is at their own face.
                    d = built.depth(i, built.present(i, face, end))
                    Vu, have = float(env.Vu[0]), own.strength(x, d)
                    if Vu <= 2 / 3 * have * (1 + _SLACK):
                        continue
                    stay = [
                        other
                        for other in built.present(i, face, end + way * 0.01)
                        if other is not bar
                    ]
                    area = sum(other.area for other in stay)
                    if area and bar.size.db <= largest_bar and Vu <= 0.75 * have * (1 + _SLACK):
                        h = built.job.spans[i].depth
                        half, phi, _ = built.frame.strength(
                            i,
                            sagging,
                            np.array([[other.area / 2 for other in stay]]),
                            np.array([h - o.surface - o.size.db / 2 for o in stay]),
                        )
                        if float(half[0] * phi[0]) >= moment * (1 - _SLACK):
                            continue
                    yield (
                        f"9.7.3.5 {face} span {i} at {x:.1f}: {bar.name} Vu {Vu:.5g}, phi Vn"
                        f" {have:.5g}, ratio {Vu / have:.3f}"
                    )


def corners(built: Built) -> Iterator[str]:
    """Every stirrup has a bar for each of its legs at both faces, 25.7.1.2."""
    for i in range(built.model.n):
        low, _ = built.model.faces(i)
        for place in built.stirrups(i):
            at = float(built.model.origin[i]) + low + float(place)
            for face in ("bottom", "top"):
                count = sum(
                    bar.count
                    for bar in built.bars
                    if bar.face == face
                    and bar.layer == 1
                    and bar.role not in ("skin", "flange")
                    and bar.start <= at + 1e-6
                    and bar.end >= at - 1e-6
                )
                if count < built.frame.legs:
                    yield f"{face} of span {i}: {count} bars in the stirrup at {place:.1f}"
                    return
