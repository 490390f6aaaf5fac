"""Schedules of a sheet: ruled tables that can be continued further on, cells that wrap."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.sketch import Sketch, shown
from dxfcable.drawing.sheeting.paper_view import ROUNDER
from dxfcable.drawing.sheeting.saying import characters

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Point

_LINE = 1.6  # from line to line of a cell, in text heights
_ABOVE, _BELOW = 0.45, 0.55  # of the text in a cell
_PAD = 0.75
_MOST_LINES = 12  # of a cell
_LEAST_ROWS = 5  # that a part of a table may have
CONTINUED = " (CONTINUED)"


@dataclass(frozen=True, slots=True, kw_only=True)
class Schedule:
    """What a table says.

    Attributes
    ----------
    key : str
        Part of ids.
    title : str
        Stands above.
    head : tuple of str
        Names of the columns; all "" for none.
    aligns : tuple of Align
        Of the columns.
    rows : tuple of tuples of str
        Cells.
    """

    key: str
    title: str
    head: tuple[str, ...]
    aligns: tuple[Align, ...]
    rows: tuple[tuple[str, ...], ...]


@dataclass(frozen=True, kw_only=True)
class RuledTable:
    """A schedule, or a run of its rows, with the widths that the whole of it needs.

    Attributes
    ----------
    schedule : Schedule
    name : str
        First part of ids.
    height : float
        Text height [mm].
    widest : float
        Width of a column before its texts wrap, in text heights.
    first, last : int
        Rows shown, the last excluded.
    """

    schedule: Schedule
    name: str
    height: float
    widest: float = 44.0
    first: int = 0
    last: int = -1

    @property
    def _end(self) -> int:
        return len(self.schedule.rows) if self.last < 0 else self.last

    @property
    def count(self) -> int:
        """Number of rows shown."""
        return self._end - self.first

    @cached_property
    def _lines(self) -> list[list[list[str]]]:
        """Wrap the cells of the head and of all rows."""
        most = self.widest * self.height
        rows = [self.schedule.head, *self.schedule.rows]
        return [[_few(wrapped(cell, most, self.height)) for cell in row] for row in rows]

    @cached_property
    def widths(self) -> list[float]:
        """Give the widths of the columns with their padding [mm]."""
        pads = 2 * _PAD * self.height
        return [
            pads + max(text_width(line, self.height) for row in self._lines for line in row[column])
            for column in range(len(self.schedule.head))
        ]

    def _rise(self, number: int) -> float:
        """Give the height of a row; 0 is the head."""
        if number == 0 and not any(self.schedule.head):
            return 0.0
        lines = max(len(cell) for cell in self._lines[number])
        return (_ABOVE + _BELOW + 1.0 + _LINE * (lines - 1)) * self.height

    @property
    def title(self) -> str:
        """Give the title; a run that does not begin the schedule says so."""
        return self.schedule.title + (CONTINUED if self.first else "")

    @property
    def chain(self) -> str:
        """Name what is the same of all parts of a schedule, which stand in their order."""
        return f"{self.name}/{self.schedule.title.removesuffix(CONTINUED)}"

    @cached_property
    def size(self) -> tuple[float, float]:
        """Width and height with the title [mm]."""
        rows = sum(self._rise(1 + k) for k in range(self.first, self._end))
        width = max(sum(self.widths), text_width(self.title, self.height))
        return width, self._title_rise + self._rise(0) + rows

    @property
    def area(self) -> float:
        """Area with the title [mm2]."""
        return self.size[0] * self.size[1]

    @property
    def _title_rise(self) -> float:
        return 2.1 * self.height

    def fitting(
        self, height: float, least: int = _LEAST_ROWS
    ) -> tuple[RuledTable | None, RuledTable | None]:
        """Give the part that fits a height, and the rest.

        The part has no fewer rows than `least`, and does not leave fewer than a few.
        """
        if self.size[1] <= height + 1e-9:
            return self, None
        room = height - self._title_rise - self._rise(0)
        count = 0
        for k in range(self.first, self._end):
            room -= self._rise(1 + k)
            if room < -1e-9:
                break
            count += 1
        count = min(count, self._end - self.first - _LEAST_ROWS)
        if count < least:
            return None, self
        middle = self.first + count
        return replace(self, last=middle), replace(self, first=middle, last=self._end)

    def draw(self, sketch: Sketch, top_left: Point) -> None:
        """Draw the table from its upper left corner on."""
        x, y = top_left
        h, part = self.height, f"{self.name}/{self.schedule.key}-{self.first}"
        sketch.text(f"{part}/title", "table", self.title, (x, y - 1.25 * h), h)
        y -= self._title_rise
        top, right = y, x + sum(self.widths)
        numbers = [0, *range(self.first + 1, self._end + 1)]
        for number in numbers:
            rise = self._rise(number)
            if rise:
                sketch.line(f"{part}/rule-{number}", "table", (x, y), (right, y))
                self._draw_row(sketch, f"{part}/{number}", number, (x, y))
            y -= rise
        edge = x
        for column, width in enumerate(self.widths[:-1]):
            edge += width
            sketch.line(f"{part}/edge-{column}", "table", (edge, top), (edge, y))
        sketch.rectangle(f"{part}/frame", "title", (x, y, right, top))

    def _draw_row(self, sketch: Sketch, name: str, number: int, at: Point) -> None:
        h, left = self.height, at[0]
        for column, (cell, width) in enumerate(zip(self._lines[number], self.widths, strict=True)):
            align = self.schedule.aligns[column]
            x = {
                Align.LEFT: left + _PAD * h,
                Align.CENTER: left + 0.5 * width,
                Align.RIGHT: left + width - _PAD * h,
            }[align]
            for k, line in enumerate(cell):
                y = at[1] - (_ABOVE + 1.0 + k * _LINE) * h
                if line:
                    sketch.text(f"{name}/{column}-{k}", "table", line, (x, y), h, align=align)
            left += width


def wrapped(text: str, width: float, height: float) -> list[str]:
    """Break a text at blanks, a word that is too long anywhere, into lines of some width."""
    lines = [""]
    for word in shown(text).split(" "):
        for piece in _pieces(word, width, height):
            longer = f"{lines[-1]} {piece}" if lines[-1] else piece
            if text_width(longer, height) <= width or not lines[-1]:
                lines[-1] = longer
            else:
                lines.append(piece)
    return lines


def _few(lines: list[str]) -> list[str]:
    """Keep the first lines of a cell that has far too many."""
    return lines if len(lines) <= _MOST_LINES else [*lines[: _MOST_LINES - 1], ".."]


def _pieces(word: str, width: float, height: float) -> Sequence[str]:
    """Break a word that is wider than a line."""
    if text_width(word, height) <= width:
        return [word]
    most = max(1, int(width / text_width("W", height)))
    found = characters(word)
    return ["".join(found[k : k + most]) for k in range(0, len(found), most)]


def table_sketch(table: RuledTable, top_left: Point = (0.0, 0.0)) -> Sketch:
    """Draw a table on a sketch of its own."""
    sketch = Sketch(ROUNDER)
    table.draw(sketch, top_left)
    return sketch
