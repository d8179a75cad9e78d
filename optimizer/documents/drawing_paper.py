"""An empty DXF drawing with our layers and styles, and the few things that are put on it."""

from __future__ import annotations

import io
import math
import re
import threading
from collections.abc import Iterator, Sequence
from contextlib import contextmanager

import ezdxf
from ezdxf.document import Drawing
from ezdxf.enums import MTextEntityAlignment

from engine.units import UnitSystem
from optimizer.documents.section_shapes import Bend, Point
from optimizer.documents.wording import visible

CONCRETE, STIRRUP, BARS, DIMENSIONS, TEXT = "CONCRETE", "STIRRUP", "BARS", "DIMENSIONS", "TEXT"
_STYLE = "CAGEWRIGHT"
# Colour index and line weight [1/100 mm] of each layer.
_LAYERS = {
    CONCRETE: (7, 50),
    STIRRUP: (4, 35),
    BARS: (1, 35),
    DIMENSIONS: (8, 18),
    TEXT: (7, 18),
}
# 3/32 in at a scale of 1-1/2 in = 1 ft, 2 mm at 1:10.
_TEXT_HEIGHT = {"us": 0.75, "si": 20.0}
_DECIMALS = {"us": 2, "si": 1}
_INSERT_UNITS = {"us": 1, "si": 4}  # $INSUNITS: inches, millimetres
_LETTER = 0.8  # width of a letter over its height, on the safe side
_OUR_OPTIONS = threading.Lock()


@contextmanager
def _undated() -> Iterator[None]:
    """Write no dates and no random identifiers, so that equal results give equal drawings."""
    with _OUR_OPTIONS:
        before = ezdxf.options.write_fixed_meta_data_for_testing
        ezdxf.options.write_fixed_meta_data_for_testing = True
        try:
            yield
        finally:
            ezdxf.options.write_fixed_meta_data_for_testing = before


def _literal(line: str) -> str:
    """A line of text that no reader takes for control codes."""
    text = re.sub(r"\\([UM])\+", r"\\\1 +", visible(line))  # would be read as a character's number
    text = text.replace("%%", "% %")
    text = re.sub(r"([\\{}])", r"\\\1", text)
    return text.replace("^", "^ ")


def width_of(lines: Sequence[str], height: float) -> float:
    """Width that lines of text take at most, wide characters apart.

    Parameters
    ----------
    lines : sequence of str
        Lines.
    height : float
        Height of a capital letter. [in or mm]

    Returns
    -------
    float
        Width of the longest. [in or mm]
    """
    return _LETTER * height * max((len(line) for line in lines), default=0)


class Paper:
    """A drawing at full size in one unit.

    Parameters
    ----------
    system : UnitSystem
        Decides the unit.
    height : float, optional
        Height of ordinary text; that of cross-sections if not given. [in or mm]

    Attributes
    ----------
    height : float
        Height of ordinary text. [in or mm]
    """

    def __init__(self, system: UnitSystem, height: float | None = None) -> None:
        self.height = _TEXT_HEIGHT[system.name] if height is None else height
        self._name = system.name
        with _undated():
            self.document = self._empty()
        self._space = self.document.modelspace()

    def _empty(self) -> Drawing:
        document = ezdxf.new("R2010", units=_INSERT_UNITS[self._name])
        document.header["$MEASUREMENT"] = 0 if self._name == "us" else 1
        document.header["$LUNITS"] = 2  # decimal
        document.styles.new(_STYLE, dxfattribs={"font": "arial.ttf"})
        for name, (color, weight) in _LAYERS.items():
            document.layers.add(name, color=color, lineweight=weight)
        style = document.dimstyles.new(_STYLE)
        style.dxf.dimtxsty = _STYLE
        style.dxf.dimtxt = self.height
        style.dxf.dimtsz = 0.5 * self.height  # oblique strokes in place of arrows
        style.dxf.dimasz = 0.5 * self.height
        style.dxf.dimexe = 0.5 * self.height
        style.dxf.dimexo = 0.5 * self.height
        style.dxf.dimgap = 0.4 * self.height
        style.dxf.dimdle = 0.5 * self.height
        style.dxf.dimtad = 1  # text above the line
        style.dxf.dimtih = style.dxf.dimtoh = 0  # and along it
        style.dxf.dimlunit = 2  # decimal
        style.dxf.dimdec = _DECIMALS[self._name]
        style.dxf.dimdsep = ord(".")
        style.dxf.dimzin = 8  # no zeros at the end
        return document

    def outline(self, points: Sequence[Point], layer: str, at: Point) -> None:
        """Draw a closed line of straight edges."""
        self.bent_outline([(x, y, 0.0) for x, y in points], layer, at)

    def bent_outline(self, bends: Sequence[Bend], layer: str, at: Point) -> None:
        """Draw a closed line with rounded corners."""
        moved = [(at[0] + x, at[1] + y, bulge) for x, y, bulge in bends]
        self._space.add_lwpolyline(moved, format="xyb", close=True, dxfattribs={"layer": layer})

    def path(self, points: Sequence[Point], layer: str, at: Point) -> None:
        """Draw an open line of straight parts."""
        moved = [(at[0] + x, at[1] + y) for x, y in points]
        self._space.add_lwpolyline(moved, dxfattribs={"layer": layer})

    def circle(self, centre: Point, radius: float, layer: str, at: Point) -> None:
        """Draw a circle."""
        middle = (at[0] + centre[0], at[1] + centre[1])
        self._space.add_circle(middle, radius, dxfattribs={"layer": layer})

    def line(self, start: Point, end: Point, at: Point) -> None:
        """Draw a line that leads to a text."""
        self._space.add_line(
            (at[0] + start[0], at[1] + start[1]),
            (at[0] + end[0], at[1] + end[1]),
            dxfattribs={"layer": TEXT},
        )

    def text(
        self, lines: Sequence[str], place: Point, at: Point, *, size: float = 1.0, low: bool = True
    ) -> None:
        """Write lines of text to the right of a place: below it, or level with it."""
        written = self._space.add_mtext(
            "\\P".join(_literal(line) for line in lines),
            dxfattribs={"layer": TEXT, "style": _STYLE, "char_height": size * self.height},
        )
        corner = MTextEntityAlignment.TOP_LEFT if low else MTextEntityAlignment.MIDDLE_LEFT
        written.set_location((at[0] + place[0], at[1] + place[1]), attachment_point=corner)

    def dimension(
        self,
        first: Point,
        second: Point,
        line: float,
        at: Point,
        *,
        upright: bool = False,
        text: str = "<>",
    ) -> None:
        """Dimension the level or upright distance of two points, on a line at y or x.

        A text takes the place of the measured length; ``<>`` in it stands for that length.
        """
        base = (line, first[1]) if upright else (first[0], line)
        (bx, by), (x1, y1), (x2, y2) = ((at[0] + x, at[1] + y) for x, y in (base, first, second))
        drawn = self._space.add_linear_dim(
            base=(bx, by),
            p1=(x1, y1),
            p2=(x2, y2),
            angle=90.0 if upright else 0.0,
            text=text,
            dimstyle=_STYLE,
            dxfattribs={"layer": DIMENSIONS},
        )
        drawn.render()

    def written(self, lower: Point, upper: Point) -> str:
        """Set the view to a rectangle and write the drawing as DXF."""
        width, height = upper[0] - lower[0], upper[1] - lower[1]
        middle = (lower[0] + width / 2, lower[1] + height / 2)
        document = self.document
        # Screens are about half as wide again as high.
        document.set_modelspace_vport(max(height, width / 1.5), center=middle)
        document.header["$EXTMIN"] = (*lower, 0.0)
        document.header["$EXTMAX"] = (*upper, 0.0)
        self._space.dxf.extmin, self._space.dxf.extmax = (*lower, 0.0), (*upper, 0.0)
        out = io.StringIO()
        with _undated():
            document.write(out)
        return out.getvalue()


def next_step(value: float, step: float) -> float:
    """Round up to a multiple of a step.

    Parameters
    ----------
    value, step : float
        Both in the same unit. [in or mm]

    Returns
    -------
    float
        Least multiple that is not below the value. [in or mm]
    """
    return math.ceil(value / step - 1e-9) * step
