"""Moments, cracks, least steel and where bars may stop."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from tests.beams.independent.built import Bars, Built
from tests.beams.independent.plain_model import Array, Envelope

_TOLERANCE = 5e-4  # of the largest moment: envelopes bend between stations
_LITTLE = 2e-3  # share of the largest moment of the beam that is none


def stations(built: Built, i: int) -> Array:
    """At least 401 places of a clear span, with both sides of the ends of bars."""
    low, high = built.model.faces(i)
    origin = float(built.model.origin[i])
    ends = [end - origin for bar in built.bars for end in (bar.start, bar.end)]
    at = [place for end in ends for place in (end - 1e-3, end + 1e-3) if low < place < high]
    found = np.unique(np.concatenate((np.linspace(low, high, 401), np.array(at))))
    # Bars end short of a tip by the cover and up to a step of their length, where Mu is nearly
    # none: half a hand's breadth is left out.
    out = built.job.cover + built.job.length_step + (2.0 if built.model.us else 50.0)
    if built.model.left(i) is None:
        found = found[found >= low + out]
    if built.model.right(i) is None:
        found = found[found <= high - out]
    return found


def largest(built: Built) -> float:
    """Largest factored moment of the beam in size."""
    found = 0.0
    for i in range(built.model.n):
        env = built.model.envelope(i, np.linspace(*built.model.faces(i), 101))
        found = max(found, env.Mu_most.max(), -env.Mu_least.min())
    return found


def of_sign(env: Envelope, sagging: bool) -> tuple[Array, Array]:
    """Factored and service moments of a sign, in size."""
    if sagging:
        return np.maximum(env.Mu_most, 0.0), np.maximum(env.Ms_most, 0.0)
    return np.maximum(-env.Mu_least, 0.0), np.maximum(-env.Ms_least, 0.0)


def strength(
    built: Built, i: int, face: str, x: Array, *, developed: bool = True, part: float = 1.0
) -> tuple[Array, Array]:
    """Phi Mn and eps_t at places of a span."""
    own = built.bars_of(i, face)
    if not own:
        return np.zeros_like(x), np.full_like(x, np.inf)
    at, sagging = x + built.model.origin[i], face == "bottom"
    h = built.job.spans[i].depth
    area = np.column_stack(
        [bar.area * built.share(i, bar, place, sagging, at) for bar, place in own]
    )
    if not developed:
        area = np.column_stack([bar.area * ((bar.start <= at) & (at <= bar.end)) for bar, _ in own])
    depth = np.array([h - bar.surface - bar.size.db / 2 for bar, _ in own])
    Mn, phi, eps = built.frame.strength(i, sagging, part * area, depth)
    return phi * Mn, eps


def moments(built: Built) -> Iterator[str]:
    """Developed phi Mn is nowhere below Mu."""
    most = largest(built)
    for i in range(built.model.n):
        x = stations(built, i)
        env = built.model.envelope(i, x)
        for face in ("bottom", "top"):
            demand, _ = of_sign(env, face == "bottom")
            have, _ = strength(built, i, face, x)
            lacking = demand - have
            k = int(np.argmax(lacking))
            if lacking[k] > _TOLERANCE * most:
                yield (
                    f"moment {face} span {i} at {x[k]:.1f}: Mu {demand[k]:.6g} >"
                    f" phi Mn {have[k]:.6g}"
                )


def steel_and_strain(built: Built) -> Iterator[str]:
    """Least steel at every section in tension, and the strain of whole layouts."""
    little = _LITTLE * largest(built)
    for i in range(built.model.n):
        x = stations(built, i)
        env = built.model.envelope(i, x)
        for face in ("bottom", "top"):
            sagging = face == "bottom"
            demand, _ = of_sign(env, sagging)
            have, eps = strength(built, i, face, x, developed=False)
            worst = float(eps.min())
            if worst < built.frame.least_strain() * (1 - 1e-6):
                yield f"strain {face} span {i}: {worst:.5f}"
            spared, _ = strength(built, i, face, x, developed=False, part=0.75)
            for k in np.flatnonzero((demand > little) & (spared < demand * (1 - 2e-3))):
                # Not 4/3 of the required area, 9.6.1.3.
                bars = built.present(i, face, float(x[k] + built.model.origin[i]))
                area = sum(bar.area for bar in bars)
                least = built.frame.least_steel(i, sagging, built.depth(i, bars)) if bars else 1.0
                if area < least * (1 - 1e-6):
                    yield (
                        f"least steel {face} span {i} at {x[k]:.1f}: As {area:.4g} < {least:.4g},"
                        f" phi Mn {have[k]:.5g}, Mu {demand[k]:.5g}"
                    )
                    break


def redistribution(built: Built) -> Iterator[str]:
    """Strain where moments are lowered, 6.6.5."""
    share = built.job.redistribution
    if not share:
        return
    for j in range(len(built.job.supports)):
        if not built.model.movable(j):
            continue
        for i in (j + built.model.first - 1, j + built.model.first):
            if not 0 <= i < built.model.n:
                continue
            low, high = built.model.faces(i)
            face = np.array([high if built.model.right(i) == j else low])
            env = built.model.envelope(i, face)
            if env.Mu_least[0] >= 0.0:
                continue
            _, eps = strength(built, i, "top", face, developed=False)
            if eps[0] < max(0.0075, share / 10) * (1 - 1e-6):
                yield f"redistribution at support {j}: eps_t {eps[0]:.5f}"


def cracks(built: Built) -> Iterator[str]:
    """Spacing of the outermost bars at every station, 24.3.2."""
    frame, model = built.frame, built.model
    for i in range(model.n):
        x = stations(built, i)
        env = model.envelope(i, x)
        h = built.job.spans[i].depth
        for face in ("bottom", "top"):
            sagging = face == "bottom"
            _, service = of_sign(env, sagging)
            known: dict[tuple[Bars, ...], tuple[float, float]] = {}
            for k in np.flatnonzero(service > _LITTLE * max(service.max(), 1.0)):
                at = float(x[k] + model.origin[i])
                bars = built.present(i, face, at)
                if not bars:
                    continue
                key = tuple(bars)
                if key not in known:
                    depths = [(bar.area, h - bar.surface - bar.size.db / 2) for bar in bars]
                    c, inertia = frame.cracked(i, sagging, depths)
                    arm = max(d for _, d in depths) - c
                    known[key] = (
                        _apart(built, i, face, bars),
                        arm / inertia * model.Es / model.Ec,
                    )
                apart, per_moment = known[key]
                # 24.3.2.1 permits two thirds of fy in place of the stress that is worked out.
                stress = min(service[k] * per_moment, 2 / 3 * built.job.fy)
                limit = frame.crack_spacing(stress)
                if apart > limit * (1 + 2e-3):
                    yield (
                        f"cracks {face} span {i} at {x[k]:.1f}: spacing {apart:.2f} >"
                        f" {limit:.2f}, fs {stress:.5g}"
                    )
                    break


def _apart(built: Built, i: int, face: str, bars: list[Bars]) -> float:
    """Largest spacing of the bars of the outermost layer where some bars are."""
    best = np.inf
    for place in built.near(i, face):
        rows = built.rows(i, place)
        if rows and place.bars:
            x = built.staying(rows[0].x, place, [bar for bar in place.bars if bar in bars])
            if len(x) > 1:
                best = min(best, float(np.diff(x).max()))
    return best
