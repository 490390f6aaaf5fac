"""The schedule of one cable: how its tables stand, their titles, frames and cautions."""

from __future__ import annotations

import itertools
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.schedule_tables import point_table, segment_table, summary_table
from dxfcable.drawing.painting.sketch import Sketch, shown
from dxfcable.drawing.painting.state_tables import state_tables, states_title
from dxfcable.drawing.painting.text_table import ROW, Table, draw_table, table_size

if TYPE_CHECKING:
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.rounding import Rounder
    from dxfcable.model import Point

CAUTION = (
    "Preliminary calculation aid. Results depend on the loads and geometry drawn. "
    "To be checked and approved by a licensed engineer under the local code before use."
)
_LAYER = "table"
_BETWEEN = 3.0  # between the tables, in text heights
_UNDER = 1.2  # between tables one below the other
_MOST_ROWS = 32  # of a table, before it is split
_LONGEST = 190  # characters in a line of the caution

_Columns = tuple[tuple[tuple[str, Table], ...], ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Box:
    """Tables in one frame with title and caution.

    `name` is the first part of ids; each table goes with its own part. Columns stand from left
    to right, each from the top down; `width` and `height` are those of the frame [length].
    """

    name: str
    title: str
    columns: _Columns
    width: float
    height: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Arrangement:
    """How the boxes of a schedule stand: each with its upper left corner, the first at (0, 0).

    The first box is the cable as it stands, a second one holds its checked states. `width` and
    `height` are those of the whole [length].
    """

    boxes: tuple[tuple[Box, Point], ...]
    width: float
    height: float


def arrangements(view: View, temperature: str) -> list[Arrangement]:
    """Give the shapes that a cable's schedule may take, the usual ones first.

    Parameters
    ----------
    view : View
        The cable.
    temperature : str
        Reference temperature to print, or "".

    Returns
    -------
    list of Arrangement
    """
    measure = _Measure(view.height)
    name, title = f"{view.prefix}/schedule", f"CABLE {view.formed.mark}"
    own = [measure.box(name, title, columns) for columns in _shapes(view, temperature)]
    if not view.formed.states:
        return [_together((box, (0.0, 0.0))) for box in own]
    # Ids of their own: what the drawing shows is held against the first box alone.
    name, title = f"{view.prefix}/states", states_title(view)
    states = [measure.box(name, title, columns) for columns in _state_shapes(view)]
    found = [_stacked(box, _most_alike(box, states)) for box in own]
    return [*found, *(_beside(box, _as_tall(box, states)) for box in own[:2])]


def _most_alike(box: Box, others: list[Box]) -> Box:
    """Choose the box that fills the width of another one best."""
    return min(others, key=lambda other: max(box.width, other.width) * (box.height + other.height))


def _as_tall(box: Box, others: list[Box]) -> Box:
    """Choose the box that fills the height of another one best."""
    return min(others, key=lambda other: max(box.height, other.height) * (box.width + other.width))


def _stacked(upper: Box, lower: Box) -> Arrangement:
    """Put one box below the other, both of one width."""
    width = max(upper.width, lower.width)
    upper, lower = replace(upper, width=width), replace(lower, width=width)
    return _together((upper, (0.0, 0.0)), (lower, (0.0, -upper.height)))


def _beside(left: Box, right: Box) -> Arrangement:
    """Put one box right of the other, both of one height."""
    height = max(left.height, right.height)
    left, right = replace(left, height=height), replace(right, height=height)
    return _together((left, (0.0, 0.0)), (right, (left.width, 0.0)))


def _together(*boxes: tuple[Box, Point]) -> Arrangement:
    return Arrangement(
        boxes=boxes,
        width=max(x + box.width for box, (x, _) in boxes),
        height=max(box.height - y for box, (_, y) in boxes),
    )


class _Measure:
    """Measures boxes; a table is measured once, however many boxes it stands in."""

    def __init__(self, height: float) -> None:
        self.height = height
        self._known: dict[tuple[str, str, int], tuple[float, float]] = {}

    def box(self, name: str, title: str, columns: _Columns) -> Box:
        """Frame columns of tables."""
        h = self.height
        measured = [[self._size(f"{name}/{key}", table) for key, table in c] for c in columns]
        width = sum(max(wide for wide, _ in column) for column in measured)
        width += _BETWEEN * h * (len(measured) - 1)
        height = max(
            sum(high for _, high in column) + _UNDER * h * (len(column) - 1) for column in measured
        )
        lines = broken(CAUTION, width, h)
        shown_title = shown(title)
        width = max(width, *(text_width(line, h) for line in (*lines, shown_title))) + 2.0 * h
        height += (4.0 + ROW * len(lines)) * h
        return Box(name=name, title=title, columns=columns, width=width, height=height)

    def _size(self, name: str, table: Table) -> tuple[float, float]:
        known = (name, table.part, len(table.rows))
        if known not in self._known:
            self._known[known] = table_size(table, self.height)
        return self._known[known]


def _state_shapes(view: View) -> list[_Columns]:
    """Give the ways in which the tables of states may stand."""
    tables = state_tables(view)
    forces = [pair for pair in tables if pair[0] in ("state", "member")]
    extremes = [pair for pair in tables if pair not in forces]
    return [
        (tuple(forces), *((pair,) for pair in extremes)),
        (tuple(forces), tuple(extremes)),
        ((*forces, *extremes[:1]), tuple(extremes[1:])),
        (tuple(tables),),
        (*((pair,) for pair in forces), tuple(extremes)),
        ((*forces, *extremes[:1]), *((pair,) for pair in extremes[1:])),
        tuple((pair,) for pair in tables),
    ]


def _shapes(view: View, temperature: str) -> list[_Columns]:
    """Give the ways in which the tables may stand; long ones in parts side by side."""
    summary = ("summary", summary_table(view, temperature))
    points, pieces = point_table(view), segment_table(view)
    count = -(-len(points.rows) // _MOST_ROWS)
    shapes: list[_Columns] = []
    for many in (1,) if count == 1 else (count, count + 1, 1):
        first, second = _split("point", points, many), _split("segment", pieces, many)
        shapes += [
            ((summary,), *((table,) for table in (*first, *second))),
            ((summary,), *zip(first, second, strict=True)),
        ]
        if many == 1:
            shapes += [
                ((summary, first[0]), (second[0],)),
                ((summary, first[0], second[0]),),
            ]
    return shapes


def _split(key: str, table: Table, lots: int) -> list[tuple[str, Table]]:
    """Split a long table into about equal ones to stand side by side."""
    count = len(table.rows)
    bounds = [count * number // lots for number in range(lots + 1)]
    return [
        (key, replace(table, rows=table.rows[start:end], part=f"-{number}" if number > 1 else ""))
        for number, (start, end) in enumerate(itertools.pairwise(bounds), start=1)
    ]


def draw_schedule(view: View, arrangement: Arrangement, rounder: Rounder) -> Sketch:
    """Draw the schedule about its upper left corner as origin; all of it is one part.

    Parameters
    ----------
    view : View
        The cable.
    arrangement : Arrangement
        Its tables and how they stand.
    rounder : Rounder
        Rounds coordinates about the origin.

    Returns
    -------
    Sketch
    """
    sketch = Sketch(rounder, f"{view.prefix}/schedule")
    for box, corner in arrangement.boxes:
        _draw_box(sketch, box, corner, view.height)
    return sketch


def _draw_box(sketch: Sketch, box: Box, corner: Point, h: float) -> None:
    """Draw title, tables, caution and frame of a box from its upper left corner on."""
    left, top = corner[0] + h, corner[1] - 2.5 * h
    sketch.text(f"{box.name}/title", _LAYER, box.title, (left, top), h)
    x, bottom = left, top
    for column in box.columns:
        right, y = x, top - 0.5 * h
        for key, table in column:
            edge, low = draw_table(sketch, f"{box.name}/{key}", table, (x, y), h)
            right, y, bottom = max(right, edge), low - _UNDER * h, min(bottom, low)
        x = right + _BETWEEN * h
    for number, line in enumerate(broken(CAUTION, x - _BETWEEN * h - left, h), start=1):
        bottom -= ROW * h
        sketch.text(f"{box.name}/caution/{number}", _LAYER, line, (left, bottom), h)
    frame = (corner[0], corner[1] - box.height, corner[0] + box.width, corner[1])
    sketch.rectangle(f"{box.name}/frame", _LAYER, frame)


def broken(text: str, width: float, height: float) -> list[str]:
    """Break a text at blanks into few lines, about equally long and no wider than given."""
    lines = _broken(text, width, height)
    for parts in range(len(lines), 0, -1):
        narrow = min(width, 1.08 * text_width(text, height) / parts)
        even = _broken(text, narrow, height)
        if len(even) <= len(lines):
            return even
    return lines


def _broken(text: str, width: float, height: float) -> list[str]:
    lines = [""]
    for word in text.split():
        longer = f"{lines[-1]} {word}".strip()
        fits = text_width(longer, height) <= width and len(longer) <= _LONGEST
        if fits or not lines[-1]:
            lines[-1] = longer
        else:
            lines.append(word)
    return lines
