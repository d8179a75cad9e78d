"""Bar layouts: layers of bars at one face of a section, the outermost layer first."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from catalogs import Bar, BarCatalog
from engine.errors import LayoutError

# A size that starts with a digit needs a blank before it: "4 16" is four bars, "416" is none.
_GROUP = re.compile(r"^\s*(\d{1,3})(?:\s+(\S{1,20})|([^\d\s]\S{0,19}))\s*$", re.ASCII)
MOST_LAYERS = 9
MOST_BARS = 99


@dataclass(frozen=True, slots=True)
class Layer:
    """Bars side by side at one height.

    Attributes
    ----------
    groups : tuple of (Bar, int)
        Size and count, larger sizes first, each size once.
    """

    groups: tuple[tuple[Bar, int], ...]

    @property
    def count(self) -> int:
        """Number of bars. [-]"""
        return sum(count for _, count in self.groups)

    @property
    def largest(self) -> Bar:
        """Largest size in the layer."""
        return self.groups[0][0]

    @property
    def label(self) -> str:
        """As written on a drawing: ``2 #9 + 2 #7``."""
        return " + ".join(f"{count} {bar.designation}" for bar, count in self.groups)


@dataclass(frozen=True, slots=True)
class Layout:
    """All bars of one face, layer 1 (nearest the face) first."""

    layers: tuple[Layer, ...]

    @property
    def label(self) -> str:
        """Layers separated by a stroke, outermost first: ``4 #8 / 2 #8``."""
        return " / ".join(layer.label for layer in self.layers)

    @property
    def sizes(self) -> tuple[Bar, ...]:
        """Sizes used, largest first."""
        found = {bar.position: bar for layer in self.layers for bar, _ in layer.groups}
        return tuple(found[position] for position in sorted(found, reverse=True))

    @property
    def count(self) -> int:
        """Number of bars. [-]"""
        return sum(layer.count for layer in self.layers)

    @property
    def area(self) -> float:
        """Steel area As. [in^2 or mm^2]"""
        return sum(bar.area * count for layer in self.layers for bar, count in layer.groups)

    @property
    def mass(self) -> float:
        """Steel mass per length. [lb/ft or kg/m]"""
        return sum(bar.mass * count for layer in self.layers for bar, count in layer.groups)


def layer_of(groups: Iterable[tuple[Bar, int]]) -> Layer:
    """Build a layer, merging equal sizes and putting larger ones first.

    Parameters
    ----------
    groups : iterable of (Bar, int)
        Sizes and counts; zero counts are dropped.

    Returns
    -------
    Layer
        The layer.
    """
    counts: dict[int, tuple[Bar, int]] = {}
    for bar, count in groups:
        if count:
            counts[bar.position] = (bar, count + counts.get(bar.position, (bar, 0))[1])
    return Layer(tuple(counts[position] for position in sorted(counts, reverse=True)))


def parse_layout(texts: Sequence[str], catalog: BarCatalog) -> Layout:
    """Read a layout as written in a job: ``["2 #9 + 2 #7", "2 #9"]``.

    Parameters
    ----------
    texts : sequence of str
        One text a layer, the outermost first.
    catalog : BarCatalog
        Catalogue that the sizes come from.

    Returns
    -------
    Layout
        The layout.

    Raises
    ------
    LayoutError
        If a text is not counts and sizes, or there are no or too many layers or bars.
    UnknownNameError
        If a size is not in the catalogue.
    """
    if not 1 <= len(texts) <= MOST_LAYERS:
        msg = f"{len(texts)} layers; allowed: 1 to {MOST_LAYERS}"
        raise LayoutError(msg)
    layers = []
    for given in texts:
        groups = []
        text = str(given)
        for part in text.split("+"):
            match = _GROUP.match(part)
            if match is None or int(match[1]) == 0:
                shown = repr(text) if len(text) <= 60 else repr(text[:60]) + "..."
                example = catalog.bars[min(3, len(catalog.bars) - 1)].designation
                msg = f'got {shown}; expected counts and sizes such as "4 {example}"'
                raise LayoutError(msg)
            groups.append((catalog.bar(match[2] or match[3]), int(match[1])))
        layer = layer_of(groups)
        if layer.count > MOST_BARS:
            msg = f"{layer.count} bars in a layer; allowed: 1 to {MOST_BARS}"
            raise LayoutError(msg)
        layers.append(layer)
    return Layout(tuple(layers))
