"""The loads of a span of a beam job."""

from __future__ import annotations

from itertools import pairwise

from engine import Edition
from engine.beams.spans import Load, LoadCase, PointLoad, UniformLoad
from engine.units import plain
from optimizer.beams.keys import LoadKeys, SpanKeys
from optimizer.errors import JobError

_SAME_PLACE = 1e-9  # share of the span within which two places are one


def far_length(value: float, edition: Edition) -> str:
    """Write a length along a beam as its job would.

    Parameters
    ----------
    value : float
        Length. [in or mm]
    edition : Edition
        Edition, which decides the units.

    Returns
    -------
    str
        For example ``28 ft`` or ``8.5 m``.
    """
    return f"{plain(value / 12.0)} ft" if edition.units == "us" else f"{plain(value / 1000.0)} m"


def read_loads(
    keys: SpanKeys, self_weight: float, edition: Edition, where: str
) -> tuple[Load, ...]:
    """Read the loads of a span.

    Parameters
    ----------
    keys : SpanKeys
        Keys of the span.
    self_weight : float
        Weight of the beam itself along the span; 0 where it does not count. [lbf/in or N/mm]
    edition : Edition
        Edition, which decides the units of messages.
    where : str
        Place that messages start with.

    Returns
    -------
    tuple of Load
        Own weight first, then the loads over the whole span, then the others as listed.

    Raises
    ------
    JobError
        If a load is none, lies outside the span, or two uniform loads of one case overlap.
    """
    found: list[Load] = []
    whole = (
        (LoadCase.DEAD, self_weight),
        (LoadCase.DEAD, keys.dead or 0.0),
        (LoadCase.LIVE, keys.live or 0.0),
    )
    for case, intensity in whole:
        if intensity > 0.0:
            found.append(UniformLoad(case=case, intensity=intensity, start=0.0, end=keys.length))
    parts: list[UniformLoad] = []
    for number, load in enumerate(keys.loads or (), 1):
        at = f"{where}, loads.{number}"
        one = _load(load, keys.length, edition, at)
        found.append(one)
        if isinstance(one, UniformLoad):
            parts.append(one)
    _check_overlaps(parts, keys.length, edition, where)
    return tuple(found)


def _load(load: LoadKeys, length: float, edition: Edition, at: str) -> Load:
    case = LoadCase(load.case)
    if load.force is not None and load.uniform is not None:
        msg = f"{at}: got both force and uniform; allowed: one of them"
        raise JobError(msg)
    if load.force is not None:
        _refuse(load, ("from", "to"), "a force has a place, at", at)
        place = _place(load.at, "at", length, edition, at)
        return PointLoad(case=case, force=load.force, at=place)
    if load.uniform is not None:
        _refuse(load, ("at",), "a uniform load has from and to", at)
        start = _place(load.start, "from", length, edition, at)
        end = _place(load.end, "to", length, edition, at)
        if end - start <= _SAME_PLACE * length:
            got = f"from {far_length(start, edition)} to {far_length(end, edition)}"
            msg = f"{at}.to: got {got}; allowed: an end beyond the start"
            raise JobError(msg)
        return UniformLoad(case=case, intensity=load.uniform, start=start, end=end)
    msg = f"{at}: neither force nor uniform; allowed: one of them"
    raise JobError(msg)


def _refuse(load: LoadKeys, names: tuple[str, ...], reason: str, at: str) -> None:
    given = {"at": load.at, "from": load.start, "to": load.end}
    for name in names:
        if given[name] is not None:
            msg = f"{at}.{name}: not for this load; {reason}"
            raise JobError(msg)


def _place(value: float | None, key: str, length: float, edition: Edition, at: str) -> float:
    if value is None:
        hint = "; hint: dead and live of the span lie over all of it" if key != "at" else ""
        msg = f"{at}.{key}: missing; needed here{hint}"
        raise JobError(msg)
    if value > length * (1.0 + _SAME_PLACE):
        msg = (
            f"{at}.{key}: got {far_length(value, edition)}, outside the span;"
            f" allowed: 0 to {far_length(length, edition)}, from the left end of the span"
        )
        raise JobError(msg)
    return min(value, length)


def _check_overlaps(parts: list[UniformLoad], length: float, edition: Edition, where: str) -> None:
    """Two partial loads of a case one over the other are taken for a slip, not for their sum."""
    for case in LoadCase:
        ordered = sorted((part for part in parts if part.case is case), key=lambda p: p.start)
        for left, right in pairwise(ordered):
            if right.start < left.end - _SAME_PLACE * length:
                ranges = " and ".join(
                    f"{far_length(part.start, edition)} to {far_length(part.end, edition)}"
                    for part in (left, right)
                )
                msg = (
                    f"{where}, loads: uniform {case.value} loads overlap, {ranges}; allowed: one"
                    " beside the other; hint: add them up where both lie"
                )
                raise JobError(msg)
