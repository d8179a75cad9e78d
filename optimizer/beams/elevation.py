"""The beam seen from the side, drawn in text: bars with their ends, supports and stirrups.

Lengths are to scale, heights are not: each kind of bar has a line of its own. A beam of many
spans is drawn in strips that end at supports, all to one scale.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from optimizer.beams.design import BeamDesign
from optimizer.beams.text_canvas import Canvas, Label, cells, place_labels
from optimizer.beams.variants import Face, Piece, Role
from optimizer.beams.words import length_text, support_lines, zones_of, zones_text

_LEAST_SPAN = 24  # columns of a span on average, that labels want
_MARGIN = 2
_ORDER = (Role.THROUGH, Role.HANGER, Role.RUN, Role.STOP, Role.FLANGE, Role.SKIN)


@dataclass(frozen=True, slots=True, kw_only=True)
class Ink:
    """Characters of an elevation."""

    concrete: str
    face: str
    corners: str
    bar: str
    ends: str
    top_hooks: str
    bottom_hooks: str
    tick: str
    zone: str
    more: str


UNICODE = Ink(
    concrete="─",
    face="│",
    corners="┌┐└┘",
    bar="━",
    ends="╺╸",
    top_hooks="┏┓",
    bottom_hooks="┗┛",
    tick="┼",
    zone="─",
    more="…",
)
ASCII = Ink(
    concrete="-",
    face="|",
    corners="++++",
    bar="=",
    ends="==",
    top_hooks="r7",
    bottom_hooks="LJ",
    tick="+",
    zone="-",
    more="~",
)


@dataclass(frozen=True, slots=True)
class _Line:
    """Equal bars of one place in the drawing."""

    start: float
    end: float
    hook_start: bool
    hook_end: bool
    text: str


@dataclass(frozen=True, slots=True)
class _Strip:
    """Spans drawn side by side, and the part of the axis that they take. [in or mm]"""

    spans: tuple[int, ...]
    start: float
    end: float


def draw_elevation(design: BeamDesign, width: int, ink: Ink = UNICODE) -> list[str]:
    """Draw the elevation of a beam.

    Parameters
    ----------
    design : BeamDesign
        Design.
    width : int
        Columns of the page.
    ink : Ink
        Characters to use.

    Returns
    -------
    list of str
        Lines of text, not wider than the page.
    """
    strips = _strips(design, width)
    room = width - 2 * _MARGIN - 1
    scale = min(room / (strip.end - strip.start) for strip in strips)
    lines: list[str] = []
    for strip in strips:
        if lines:
            lines.append("")
        lines += _StripDrawing(design, strip, scale, width, ink).lines()
    hooks = ink.top_hooks + ink.bottom_hooks
    return [*lines, "", f"{hooks[0]} {hooks[1]} {hooks[2]} {hooks[3]} hooks; heights not to scale"]


def _strips(design: BeamDesign, width: int) -> list[_Strip]:
    """Share the spans out between strips, so that a span has room for its labels."""
    beam = design.problem.beam
    inner = [
        number
        for number in range(len(beam.spans))
        if beam.left_support(number) is not None and beam.right_support(number) is not None
    ]
    most = max(1, (width - 2 * _MARGIN) // _LEAST_SPAN)
    count = math.ceil(len(inner) / most)
    groups = [
        inner[len(inner) * number // count : len(inner) * (number + 1) // count]
        for number in range(count)
    ]
    if inner[0] > 0:
        groups[0].insert(0, 0)
    if inner[-1] < len(beam.spans) - 1:
        groups[-1].append(len(beam.spans) - 1)
    strips = []
    for spans in groups:
        start = beam.origins[spans[0]]
        end = beam.origins[spans[-1]] + beam.spans[spans[-1]].length
        left, right = beam.left_support(spans[0]), beam.right_support(spans[-1])
        # Half of an outer support lies beyond its centreline.
        start -= 0.0 if left is None else beam.supports[left].width / 2.0
        end += 0.0 if right is None else beam.supports[right].width / 2.0
        strips.append(_Strip(tuple(spans), start, end))
    return strips


class _StripDrawing:
    """One strip on its way to the page."""

    def __init__(
        self, design: BeamDesign, strip: _Strip, scale: float, width: int, ink: Ink
    ) -> None:
        self.design, self.strip, self.scale, self.ink = design, strip, scale, ink
        self.canvas = Canvas(width)
        self.first, self.last = self.column(strip.start), self.column(strip.end)

    def column(self, place: float) -> int:
        """Column of a place on the beam's axis."""
        return _MARGIN + round((place - self.strip.start) * self.scale)

    def lines(self) -> list[str]:
        """Draw everything."""
        ink, canvas = self.ink, self.canvas
        top = self._rows([piece for piece in self._numbered() if piece[0].face is Face.TOP])
        bottom = self._rows([piece for piece in self._numbered() if piece[0].face is Face.BOTTOM])
        self._edge(0, ink.corners[:2])
        row = 1
        for number, lines in enumerate((top, list(reversed(bottom)))):
            hooks = ink.bottom_hooks if number else ink.top_hooks
            if number:
                self._sides(row)
                row += 1
            for line_row in lines:
                self._sides(row)
                for line in line_row:
                    self._bar(line, row, hooks)
                row += 1
        self._edge(row, ink.corners[2:])
        row = self._supports(row)
        row = self._spans(row)
        self._zones(row)
        return canvas.lines()

    def _numbered(self) -> list[tuple[Piece, str]]:
        pieces = zip(self.design.pieces, self.design.schedule.of_pieces, strict=True)
        return [
            (piece, mark)
            for piece, mark in pieces
            if piece.start < self.strip.end and piece.end > self.strip.start
        ]

    def _edge(self, row: int, corners: str) -> None:
        """Top or bottom of the concrete; open where the beam goes on."""
        self.canvas.fill(self.first, self.last, row, self.ink.concrete)
        for column, ends, corner in self._ends(corners):
            self.canvas.put(column, row, corner if ends else self.ink.more)

    def _sides(self, row: int) -> None:
        for column, ends, _ in self._ends("  "):
            if ends:
                self.canvas.put(column, row, self.ink.face)

    def _ends(self, corners: str) -> tuple[tuple[int, bool, str], tuple[int, bool, str]]:
        spans = self.strip.spans
        last = len(self.design.problem.beam.spans) - 1
        return (
            (self.first, spans[0] == 0, corners[0]),
            (self.last, spans[-1] == last, corners[1]),
        )

    def _rows(self, pieces: list[tuple[Piece, str]]) -> list[list[_Line]]:
        """Bars of a face in rows without overlap, from the face inwards."""
        pieces = sorted(
            pieces,
            key=lambda item: (item[0].layer, _ORDER.index(item[0].role), item[0].start),
        )
        rows: list[list[tuple[int, int, _Line]]] = []
        lowest: dict[tuple[int, Role], int] = {}
        for piece, mark in pieces:
            line = _Line(
                piece.start,
                piece.end,
                piece.hook_start,
                piece.hook_end,
                f"{piece.count} {piece.bar.designation} {mark}",
            )
            first, last = self._extent(line)
            # Bars of one kind stay side by side; other kinds may fill the room left over
            # in rows of their own layer only.
            key = (piece.layer, piece.role)
            at = lowest.setdefault(key, len(rows))
            while at < len(rows) and any(
                first <= end + 1 and start <= last + 1 for start, end, _ in rows[at]
            ):
                at += 1
            if at == len(rows):
                rows.append([])
            rows[at].append((first, last, line))
        return [[line for _, _, line in row] for row in rows]

    def _columns(self, line: _Line) -> tuple[int, int]:
        first = max(self.first + 1, self.column(line.start))
        last = min(self.last - 1, self.column(line.end))
        return min(first, self.last - 1), max(last, self.first + 1)

    def _extent(self, line: _Line) -> tuple[int, int]:
        """Columns of a bar with its label."""
        first, last = self._columns(line)
        column, width = self._label(line)
        return min(first, column), max(last, column + width - 1)

    def _label(self, line: _Line) -> tuple[int, int]:
        """Column and width of a bar's label: on it, or beside it where it is short."""
        first, last = self._columns(line)
        width = len(cells(line.text))
        if last - first + 1 >= width + 6:
            return (first + last - width) // 2 + 1, width
        if last + 2 + width < self.last:
            return last + 2, width
        return max(self.first + 1, first - 1 - width), width

    def _bar(self, line: _Line, row: int, hooks: str) -> None:
        ink, canvas = self.ink, self.canvas
        first, last = self._columns(line)
        canvas.fill(first, last, row, ink.bar)
        for column, inside, hook, end in (
            (first, line.start >= self.strip.start - 1e-6, line.hook_start, 0),
            (last, line.end <= self.strip.end + 1e-6, line.hook_end, 1),
        ):
            sign = hooks[end] if hook else ink.ends[end]
            canvas.put(column, row, sign if inside else ink.more)
        column = self._label(line)[0]
        on_the_bar = first < column < last
        canvas.put(column - on_the_bar, row, f" {line.text} " if on_the_bar else line.text)

    def _supports(self, row: int) -> int:
        """Faces of the supports below the beam, and their marks."""
        beam, ink = self.design.problem.beam, self.ink
        labels, centres = [], support_lines(beam)
        for number, support in enumerate(beam.supports):
            spans = (beam.left_span(number), beam.right_span(number))
            if not set(spans) & set(self.strip.spans):
                continue
            centre = centres[number]
            ends = [self.column(centre + side * support.width / 2.0) for side in (-1, 1)]
            start, end = max(ends[0], self.first), min(max(ends[1], ends[0] + 1), self.last)
            start = min(start, end - 1)
            for column in (start, end):
                self.canvas.put(column, row + 1, ink.face)
            labels.append(Label((start + end) / 2.0 + 0.5, support.mark))
        return place_labels(self.canvas, row + 2, labels)

    def _spans(self, row: int) -> int:
        """Lengths between centrelines."""
        beam = self.design.problem.beam
        labels = []
        for number in self.strip.spans:
            span = beam.spans[number]
            middle = self.column(beam.origins[number] + span.length / 2.0)
            labels.append(Label(middle + 0.5, length_text(self.design.edition, span.length)))
        return place_labels(self.canvas, row, labels)

    def _zones(self, row: int) -> None:
        """Stirrup zones: their limits to scale, spaces and spacing below."""
        beam, design, labels = self.design.problem.beam, self.design, []
        for number in self.strip.spans:
            plan = design.stirrups[number]
            face = beam.origins[number] + beam.clear_range(number)[0]
            zones = zones_of(plan)
            first = self.column(face + plan.first)
            last = self.column(face + plan.clear - plan.last)
            self.canvas.fill(first, last, row, self.ink.zone)
            for _, _, start, end in zones:
                self.canvas.put(self.column(face + start), row, self.ink.tick)
                self.canvas.put(self.column(face + end), row, self.ink.tick)
            labels.append(Label((first + last) / 2.0 + 0.5, zones_text(plan)))
        place_labels(self.canvas, row + 1, labels)
