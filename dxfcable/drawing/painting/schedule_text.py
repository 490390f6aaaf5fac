"""The schedule of one cable: how its tables stand, their title, frame and caution."""

from __future__ import annotations

import itertools
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.schedule_tables import point_table, segment_table, summary_table
from dxfcable.drawing.painting.sketch import Sketch
from dxfcable.drawing.painting.text_table import ROW, Table, draw_table, table_size

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.rounding import Rounder

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
class Arrangement:
    """How the tables of a schedule stand: columns from left to right, each from the top down.

    Each table goes with its part of ids; `width` and `height` are those of the schedule with
    title, caution and frame [length].
    """

    columns: _Columns
    width: float
    height: float


def arrangements(view: View, temperature: str, held_texts: Mapping[str, str]) -> list[Arrangement]:
    """Give the shapes that a cable's schedule may take, the usual ones first.

    Parameters
    ----------
    view : View
        The cable.
    temperature : str
        Reference temperature to print, or "".
    held_texts : mapping of str to str
        Texts that a drafter put in place of ours.

    Returns
    -------
    list of Arrangement
    """
    h, name = view.height, f"{view.prefix}/schedule"
    sizes: dict[tuple[str, str, int], tuple[float, float]] = {}

    def size(key: str, table: Table) -> tuple[float, float]:
        known = (key, table.part, len(table.rows))
        if known not in sizes:
            sizes[known] = table_size(f"{name}/{key}", table, h, held_texts)
        return sizes[known]

    found = []
    for columns in _shapes(view, temperature):
        measured = [[size(key, table) for key, table in column] for column in columns]
        width = sum(max(wide for wide, _ in column) for column in measured)
        width += _BETWEEN * h * (len(measured) - 1)
        height = max(
            sum(high for _, high in column) + _UNDER * h * (len(column) - 1) for column in measured
        )
        lines = broken(CAUTION, width, h)
        width = max(width, *(text_width(line, h) for line in lines)) + 2.0 * h
        height += (4.0 + ROW * len(lines)) * h
        found.append(Arrangement(columns=columns, width=width, height=height))
    return found


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


def draw_schedule(
    view: View, arrangement: Arrangement, rounder: Rounder, held_texts: Mapping[str, str]
) -> Sketch:
    """Draw the schedule about its upper left corner as origin.

    Parameters
    ----------
    view : View
        The cable.
    arrangement : Arrangement
        Its tables and how they stand.
    rounder : Rounder
        Rounds coordinates about the origin.
    held_texts : mapping of str to str
        Texts that a drafter put in place of ours.

    Returns
    -------
    Sketch
    """
    h, name = view.height, f"{view.prefix}/schedule"
    sketch = Sketch(rounder, held_texts, name)
    margin = h
    top = -margin - 1.5 * h
    sketch.text(f"{name}/title", _LAYER, f"CABLE {view.formed.mark}", (margin, top), h)
    x, bottom = margin, top
    for column in arrangement.columns:
        right, y = x, top - 0.5 * h
        for key, table in column:
            edge, low = draw_table(sketch, f"{name}/{key}", table, (x, y), h)
            right, y, bottom = max(right, edge), low - _UNDER * h, min(bottom, low)
        x = right + _BETWEEN * h
    right = x - _BETWEEN * h
    for number, line in enumerate(broken(CAUTION, right - margin, h), start=1):
        bottom -= ROW * h
        sketch.text(f"{name}/caution/{number}", _LAYER, line, (margin, bottom), h)
        right = max(right, margin + text_width(line, h))
    box = (0.0, bottom - margin, right + margin, 0.0)
    sketch.rectangle(f"{name}/frame", _LAYER, box)
    return sketch


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
