"""Small beams drawn at random: few sizes, narrow webs, one to three spans."""

from __future__ import annotations

import random

from tests.beams.jobs import beam_text


def _names(rng: random.Random, us: bool) -> list[str]:
    sizes = ["#5", "#6", "#7", "#8", "#9"] if us else ["16", "19", "22", "25", "29"]
    count = rng.choice([2, 3, 3, 4])
    start = rng.randrange(len(sizes) - count + 1)
    return sizes[start : start + count]


def _quoted(names: list[str]) -> str:
    return "[" + ", ".join(f'"{name}"' for name in names) + "]"


def _support(rng: random.Random, us: bool, *, outer: bool) -> str:
    width = rng.choice([12, 16, 20, 24] if not outer else [16, 20, 24])
    lines = [f'width = "{width} in"' if us else f'width = "{width * 25} mm"']
    lines.append(f'kind = "{rng.choice(["column", "column", "wall", "girder"])}"')
    if outer and rng.random() < 0.5:
        if rng.random() < 0.3:
            lines.append('ends = "fixed"')
        else:
            size = '{ width = "16 in", depth = "16 in", height = "11 ft" }'
            if not us:
                size = '{ width = "400 mm", depth = "400 mm", height = "3.3 m" }'
            lines += ['ends = "columns"', f"below = {size}"]
    return "\n".join(lines)


def _span(rng: random.Random, us: bool, *, hang: str | None, most: float, weight: float) -> str:
    feet = rng.uniform(4.0, 7.0) if hang else rng.uniform(0.55, 1.0) * most
    feet = round(feet * 2) / 2
    dead, live = weight * rng.uniform(0.2, 0.9), weight * rng.uniform(0.2, 1.0)
    if us:
        lines = [f'length = "{feet} ft"', f'dead = "{dead:.2f} kip/ft"']
        lines.append(f'live = "{live:.2f} kip/ft"')
    else:
        lines = [f'length = "{feet * 0.3:.2f} m"', f'dead = "{dead * 14.6:.1f} kN/m"']
        lines.append(f'live = "{live * 14.6:.1f} kN/m"')
    if rng.random() < 0.25:
        at, force = feet * rng.uniform(0.3, 0.7), weight * rng.uniform(4.0, 16.0)
        where = f"{at:.1f} ft" if us else f"{at * 0.3:.2f} m"
        size = f"{force:.1f} kip" if us else f"{force * 4.4:.1f} kN"
        lines.append(f'loads = [{{ case = "live", force = "{size}", at = "{where}" }}]')
    if hang:
        lines.append(f'cantilever = "{hang}"')
    return "\n".join(lines)


def small_job(seed: int, *, weight: float | None = None) -> str:
    """Return the text of a small beam job; heavy loads come with short spans."""
    rng = random.Random(seed)
    weight = rng.choice([1.0, 1.0, 2.5]) if weight is None else weight
    us = rng.random() < 0.5
    inner = rng.choice([1, 1, 1, 2, 2, 3])
    hangs: list[str | None] = [None] * inner
    if rng.random() < 0.2:
        hangs = ["left", *hangs]
    if rng.random() < 0.2:
        hangs = [*hangs, "right"]
    names = _names(rng, us)
    if inner == 3:
        names = names[:3]
    layers = rng.choice([1, 2])
    web, depth = rng.choice([10, 12, 14]), rng.choice([16, 18, 20, 24])
    edition = rng.choice(["14", "19"])
    bars = [f"sizes = {_quoted(names)}", f"max_layers = {layers}"]
    bars.append(f"max_sizes = {rng.choice([1, 2])}")
    beam = []
    stirrups = ["#3", "#4"] if us else ["10", "13"]
    hangers = ["#4", "#5"] if us else ["13", "16"]
    beam.append(f"stirrups = {_quoted(stirrups[: rng.choice([1, 1, 2])])}")
    beam.append(f"hangers = {_quoted(hangers[: rng.choice([1, 2])])}")
    perimeter = rng.random() < 0.3
    beam.append(f'edge = "{"perimeter" if perimeter else "interior"}"')
    if not perimeter:
        beam.append(f"closed_stirrups = {'true' if rng.random() < 0.5 else 'false'}")
    beam.append(f"most_sizes = {rng.choice([1, 2, 2, 3, 3, 4])}")
    beam.append(f'attached = "{rng.choice(["roof", "floor", "floor", "tolerant", "sensitive"])}"')
    step = rng.choice([1, 3])
    beam.append(f'length_step = "{step} in"' if us else f'length_step = "{step * 25} mm"')
    if inner > 1 and rng.random() < 0.2:
        beam.append("redistribution = 0.10")
    if rng.random() < 0.4:
        beam.append(
            'slab = { thickness = "5 in", clear_left = "8 ft", clear_right = "8 ft" }'
            if us
            else 'slab = { thickness = "125 mm", clear_left = "2.4 m", clear_right = "2.4 m" }'
        )
    head = beam_text(
        "us" if us else "si",
        bars="\n".join(bars),
        ranking=f'by = "{rng.choice(["practical", "lightest"])}"',
        beam="\n".join(beam),
        supports=tuple(
            _support(rng, us, outer=number in (0, inner)) for number in range(inner + 1)
        ),
        spans=tuple(
            _span(rng, us, hang=hang, most=depth * 0.95 / weight**0.5, weight=weight)
            for hang in hangs
        ),
    )
    head = head.replace("-19", f"-{edition}")
    size = f'width = "{web} in"\ndepth = "{depth} in"'
    old = 'width = "14 in"\ndepth = "24 in"'
    if not us:
        size = f'width = "{web * 25} mm"\ndepth = "{depth * 25} mm"'
        old = 'width = "350 mm"\ndepth = "600 mm"'
    return head.replace(old, size)
