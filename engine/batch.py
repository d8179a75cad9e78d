"""Many layouts at once, and the depths of their bars in a section."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from catalogs import Bar
from engine.layouts import Layout
from engine.outlines import FloatArray
from engine.sections import Section
from engine.strength import BarGroups


@dataclass(frozen=True, slots=True, kw_only=True)
class Batch:
    """Many layouts made of a few sizes.

    Attributes
    ----------
    bars : tuple of Bar, length s
        Sizes that occur.
    counts : ndarray of int, shape (n, l, s)
        Number of bars of each size in each layer; layer 1 first, missing layers are zero.
    """

    bars: tuple[Bar, ...]
    counts: NDArray[np.int64]

    @classmethod
    def of(cls, layouts: Sequence[Layout]) -> Batch:
        """Gather layouts.

        Parameters
        ----------
        layouts : sequence of Layout
            At least one.

        Returns
        -------
        Batch
            The same layouts in order.
        """
        found = {bar.position: bar for layout in layouts for bar in layout.sizes}
        bars = tuple(found[position] for position in sorted(found, reverse=True))
        column = {bar.position: index for index, bar in enumerate(bars)}
        layers = max(len(layout.layers) for layout in layouts)
        counts = np.zeros((len(layouts), layers, len(bars)), dtype=np.int64)
        for row, layout in enumerate(layouts):
            for number, layer in enumerate(layout.layers):
                for bar, count in layer.groups:
                    counts[row, number, column[bar.position]] = count
        return cls(bars=bars, counts=counts)

    def quantity(self, values: Sequence[float]) -> FloatArray:
        """Sum a value of each size over all bars.

        Parameters
        ----------
        values : sequence of float, length s
            Value of one bar of each size.

        Returns
        -------
        ndarray, shape (n,)
            Totals.
        """
        total: FloatArray = self.counts.sum(axis=1) @ np.asarray(values, dtype=np.float64)
        return total


@dataclass(frozen=True, slots=True, kw_only=True)
class Stacked:
    """Bars of a batch with their depths.

    Attributes
    ----------
    groups : BarGroups
        Bars; the first `own` columns are the batch's, the others lie at the compression face.
    own : int
        Number of the batch's own columns.
    dt, d : ndarray, shape (n,)
        Depth of layer 1 and of the centroid of all own bars. [in or mm]
    height : ndarray, shape (n,)
        Distance of the innermost bar surface from the tension face. [in or mm]
    """

    groups: BarGroups
    own: int
    dt: FloatArray
    d: FloatArray
    height: FloatArray


def stacked_bars(section: Section, batch: Batch) -> Stacked:
    """Depths of the bars of many layouts.

    Parameters
    ----------
    section : Section
        Section; its opposite bars are added where it counts them.
    batch : Batch
        Layouts at its tension face.

    Returns
    -------
    Stacked
        Bars with their depths.
    """
    counts = batch.counts
    rows, layers, sizes = counts.shape
    diameter = np.array([bar.diameter for bar in batch.bars])
    area = np.array([bar.area for bar in batch.bars])
    tallest = np.where(counts > 0, diameter, 0.0).max(axis=2)
    rise = np.where(tallest > 0.0, tallest + section.layer_gap, 0.0)
    bottom = section.bar_face + np.concatenate(
        (np.zeros((rows, 1)), np.cumsum(rise, axis=1)[:, :-1]), axis=1
    )
    depth = section.outline.depth - bottom[:, :, None] - diameter / 2
    steel = counts * area
    total = steel.sum(axis=(1, 2))
    flat_area = steel.reshape(rows, layers * sizes)
    flat_depth = depth.reshape(rows, layers * sizes)
    flat_diameter = np.tile(diameter, (rows, layers))
    if section.count_opposite and section.opposite is not None:
        extra = _opposite_groups(section, section.opposite, rows)
        flat_area = np.concatenate((flat_area, extra.area), axis=1)
        flat_depth = np.concatenate((flat_depth, extra.depth), axis=1)
        flat_diameter = np.concatenate((flat_diameter, extra.diameter), axis=1)
    return Stacked(
        groups=BarGroups(area=flat_area, depth=flat_depth, diameter=flat_diameter),
        own=layers * sizes,
        dt=(steel[:, 0] * depth[:, 0]).sum(axis=1) / steel[:, 0].sum(axis=1),
        d=(steel * depth).sum(axis=(1, 2)) / total,
        height=(np.where(tallest > 0.0, bottom + tallest, 0.0)).max(axis=1),
    )


def _opposite_groups(section: Section, opposite: Layout, rows: int) -> BarGroups:
    """Bars at the compression face: their depths count from that face."""
    face = stacked_bars(section.opposite_face(), Batch.of([opposite]))
    depth = section.outline.depth - face.groups.depth
    return BarGroups(
        area=np.tile(face.groups.area, (rows, 1)),
        depth=np.tile(depth, (rows, 1)),
        diameter=np.tile(face.groups.diameter, (rows, 1)),
    )
