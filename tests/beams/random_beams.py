"""Beams drawn at random: spans, cantilevers, supports that hold, sections and loads."""

from __future__ import annotations

import numpy as np

from engine.beams.spans import (
    FIXED,
    Beam,
    Load,
    LoadCase,
    Overhang,
    PointLoad,
    Span,
    Support,
    SupportKind,
    UniformLoad,
)
from engine.outlines import Flange, Outline

MODULUS = 3.6e6  # [psi]


def random_loads(random: np.random.Generator, length: float) -> tuple[Load, ...]:
    """Draw up to five loads; some spans have none of a case."""
    loads: list[Load] = []
    for case in LoadCase:
        for _ in range(random.integers(0, 3)):
            start, end = np.sort(random.uniform(0.0, length, 2))
            if random.random() < 0.4:
                start, end = 0.0, length
            intensity = random.uniform(20.0, 300.0)
            loads.append(
                UniformLoad(case=case, intensity=intensity, start=float(start), end=float(end))
            )
        if random.random() < 0.4:
            force, at = random.uniform(2e3, 4e4), random.uniform(0.0, length)
            loads.append(PointLoad(case=case, force=force, at=at))
    return tuple(loads)


def random_beam(seed: int, *, most_spans: int = 6) -> Beam:
    """Draw a beam of 1 to `most_spans` spans; four in ten have a cantilever at an end."""
    random = np.random.default_rng(seed)
    kinds = [Overhang.NONE] * int(random.integers(1, most_spans + 1))
    if random.random() < 0.4:
        kinds.insert(0, Overhang.LEFT)
    if random.random() < 0.4:
        kinds.append(Overhang.RIGHT)
    supports = tuple(
        Support(
            mark=chr(ord("A") + index),
            width=random.uniform(8.0, 24.0),
            kind=SupportKind.COLUMN,
            stiffness=float(
                random.choice([0.0, random.uniform(1e8, 5e9), FIXED], p=[0.5, 0.4, 0.1])
            ),
        )
        for index in range(sum(kind is Overhang.NONE for kind in kinds) + 1)
    )
    spans = []
    for number, kind in enumerate(kinds):
        inner = kind is Overhang.NONE
        length = random.uniform(150.0, 420.0) if inner else random.uniform(40.0, 110.0)
        web, depth = random.uniform(10.0, 20.0), random.uniform(16.0, 36.0)
        flange = Flange(width=web + random.uniform(0.0, 60.0), thickness=random.uniform(3.0, 7.0))
        spans.append(
            Span(
                mark=f"span {number}",
                length=length,
                outline=Outline(
                    web=web, depth=depth, top=flange if random.random() < 0.5 else None
                ),
                loads=random_loads(random, length),
                overhang=kind,
            )
        )
    return Beam(spans=tuple(spans), supports=supports)


def plain_beam(
    lengths: list[float],
    *,
    dead: float = 0.0,
    live: float = 0.0,
    width: float = 12.0,
    stiffness: tuple[float, ...] | None = None,
    kind: SupportKind = SupportKind.COLUMN,
    outline: Outline | None = None,
    hangs: tuple[bool, bool] = (False, False),
) -> Beam:
    """Return a beam of one section with uniform loads on all spans."""
    overhangs = [Overhang.NONE] * len(lengths)
    if hangs[0]:
        overhangs[0] = Overhang.LEFT
    if hangs[1]:
        overhangs[-1] = Overhang.RIGHT
    count = overhangs.count(Overhang.NONE) + 1
    held = (0.0,) * count if stiffness is None else stiffness
    return Beam(
        spans=tuple(
            Span(
                mark=f"span {number}",
                length=length,
                outline=outline or Outline(web=12.0, depth=24.0),
                loads=tuple(
                    UniformLoad(case=case, intensity=intensity, start=0.0, end=length)
                    for case, intensity in ((LoadCase.DEAD, dead), (LoadCase.LIVE, live))
                    if intensity != 0.0
                ),
                overhang=overhang,
            )
            for number, (length, overhang) in enumerate(zip(lengths, overhangs, strict=True))
        ),
        supports=tuple(
            Support(mark=str(index), width=width, kind=kind, stiffness=held[index])
            for index in range(count)
        ),
    )
