"""A table of texts: columns as wide as their texts may be, a rule under the head."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.sketch import shown

if TYPE_CHECKING:
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import Point

ROW = 1.8  # from row to row, in text heights
_GUTTER = 1.5  # between columns
_HEAD, _FOOT = 0.3, 0.5  # more below the head, below the last row


@dataclass(frozen=True, slots=True, kw_only=True)
class Table:
    """Rows of a table; `rows` pairs the part of ids with its cells.

    `columns` names the columns for the ids, `head` for the reader ("" all: no head). `part`
    sets the ids of head and rule apart where one table is drawn as several. `title` is a line
    above the head, "" for none.
    """

    columns: tuple[str, ...]
    head: tuple[str, ...]
    aligns: tuple[Align, ...]
    rows: tuple[tuple[str, tuple[str, ...]], ...]
    part: str = ""
    title: str = ""


def _lines(table: Table) -> list[tuple[str, tuple[str, ...]]]:
    """Give the head, if there is one, and the rows."""
    head = [(f"head{table.part}", table.head)] if any(table.head) else []
    return [*head, *table.rows]


def _widths(table: Table, height: float) -> list[float]:
    """Give the widths of the columns, as wide as their texts may be."""
    widths = []
    for index in range(len(table.columns)):
        texts = [shown(cells[index]) for _, cells in _lines(table)]
        widths.append(max((text_width(text, height) for text in texts), default=0.0))
    if table.title:
        # The last column gives way to a title that is wider than all of them.
        title = shown(table.title)
        taken = sum(widths) + _GUTTER * height * (len(widths) - 1)
        widths[-1] += max(0.0, text_width(title, height) - taken)
    return widths


def table_size(table: Table, height: float) -> tuple[float, float]:
    """Give width and height of a table as `draw_table` draws it [length]."""
    widths = _widths(table, height)
    rise = ROW * (len(_lines(table)) + bool(table.title)) + _FOOT
    rise += _HEAD if any(table.head) else 0.0
    return sum(widths) + _GUTTER * height * (len(widths) - 1), rise * height


def draw_table(
    sketch: Sketch,
    name: str,
    table: Table,
    top_left: Point,
    height: float,
    *,
    layer: str = "table",
) -> tuple[float, float]:
    """Draw a table from its upper left corner on.

    Parameters
    ----------
    sketch : Sketch
        Gets the items.
    name : str
        First part of the ids.
    table : Table
        What it says.
    top_left : Point
        Corner [length].
    height : float
        Text height [length].
    layer : str
        Role of the layer.

    Returns
    -------
    tuple of float
        Right and bottom end [length].
    """
    lines = _lines(table)
    edges = [top_left[0]]
    for width in _widths(table, height):
        edges.append(edges[-1] + width + _GUTTER * height)
    right = edges[-1] - _GUTTER * height
    y = top_left[1]
    if table.title:
        y -= ROW * height
        sketch.text(f"{name}/title{table.part}", layer, table.title, (top_left[0], y), height)
    for key, cells in lines:
        y -= ROW * height
        for index, (column, text) in enumerate(zip(table.columns, cells, strict=True)):
            if text:
                align = table.aligns[index]
                x = edges[index]
                if align is Align.RIGHT:
                    x = edges[index + 1] - _GUTTER * height
                cell = f"{name}/{key}/{column}"
                sketch.text(cell, layer, text, (x, y), height, align=align)
        if key == f"head{table.part}":
            rule = y - 0.5 * height
            sketch.line(f"{name}/rule{table.part}", layer, (top_left[0], rule), (right, rule))
            y -= _HEAD * height
    return right, y - _FOOT * height
