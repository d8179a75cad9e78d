"""Elastic cracked section: neutral axis, inertia and steel stress under service moment."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from engine.outlines import FloatArray, Profile


@dataclass(frozen=True, slots=True, kw_only=True)
class CrackedSection:
    """Transformed section with concrete in compression only.

    Attributes
    ----------
    x : ndarray, shape (n,)
        Depth of the neutral axis. [in or mm]
    Icr : ndarray, shape (n,)
        Second moment about it. [in^4 or mm^4]
    """

    x: FloatArray
    Icr: FloatArray


def cracked_section(profile: Profile, transformed: FloatArray, depth: FloatArray) -> CrackedSection:
    """Neutral axis and inertia of cracked sections.

    Parameters
    ----------
    profile : Profile
        Widths from the compression face.
    transformed : ndarray, shape (n, g)
        Transformed steel areas: n A of tension bars, (n - 1) A' of compression bars (or
        (2n - 1) A' for long-term loads). [in^2 or mm^2]
    depth : ndarray, shape (n, g)
        Their distances from the compression face. [in or mm]

    Returns
    -------
    CrackedSection
        Neutral axis and cracked inertia of each row.

    Notes
    -----
    First moments balance about the axis: S(x) = sum(At (d - x)), S of the concrete above it.
    """
    total = transformed.sum(axis=1)
    moment = (transformed * depth).sum(axis=1)
    x = np.full(len(transformed), profile.depth)
    settled = np.zeros(len(transformed), dtype=np.bool_)
    upper = area = first = 0.0  # edge, and area and first moment above it
    for width, height in profile.strips:
        # Within a strip the balance is w x^2/2 + b x + c = 0, and it rises with x.
        b = area - width * upper + total
        c = width * upper**2 / 2.0 - first - moment
        # Below zero only in strips past the axis, whose root is not used.
        root = (np.sqrt(np.maximum(b * b - 2.0 * width * c, 0.0)) - b) / width
        here = ~settled & (root <= upper + height)
        x = np.where(here, root, x)
        settled |= here
        first += width * height * (upper + height / 2.0)
        area += width * height
        upper += height
    inertia = (transformed * (depth - x[:, None]) ** 2).sum(axis=1)
    upper = 0.0
    for width, height in profile.strips:
        # Each strip contributes the part of it above the axis.
        above_axis = np.clip(x - upper, 0.0, height)
        far, near = x - upper, x - upper - above_axis
        inertia = inertia + width * (far**3 - near**3) / 3.0
        upper += height
    return CrackedSection(x=x, Icr=inertia)
