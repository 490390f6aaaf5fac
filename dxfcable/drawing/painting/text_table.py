"""A table of texts: columns as wide as their texts may be, a rule under the head."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.labels import text_width

if TYPE_CHECKING:
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import Point

_LAYER = "table"
ROW = 1.8  # from row to row, in text heights
_GUTTER = 1.5  # between columns


@dataclass(frozen=True, slots=True, kw_only=True)
class Table:
    """Rows of a table; `rows` pairs the part of ids with its cells.

    `columns` names the columns for the ids, `head` for the reader ("" all: no head).
    """

    columns: tuple[str, ...]
    head: tuple[str, ...]
    aligns: tuple[Align, ...]
    rows: tuple[tuple[str, tuple[str, ...]], ...]


def draw_table(
    sketch: Sketch, name: str, table: Table, top_left: Point, height: float
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

    Returns
    -------
    tuple of float
        Right and bottom end [length].
    """
    lines = [(key, cells) for key, cells in table.rows]
    if any(table.head):
        lines.insert(0, ("head", table.head))
    edges = [top_left[0]]
    for index, column in enumerate(table.columns):
        texts = [sketch.wording(f"{name}/{key}/{column}", cells[index]) for key, cells in lines]
        widest = max((text_width(text, height) for text in texts), default=0.0)
        edges.append(edges[-1] + widest + _GUTTER * height)
    right = edges[-1] - _GUTTER * height
    y = top_left[1]
    for key, cells in lines:
        y -= ROW * height
        for index, (column, text) in enumerate(zip(table.columns, cells, strict=True)):
            if text:
                align = table.aligns[index]
                x = edges[index]
                if align is Align.RIGHT:
                    x = edges[index + 1] - _GUTTER * height
                cell = f"{name}/{key}/{column}"
                sketch.text(cell, _LAYER, text, (x, y), height, align=align)
        if key == "head":
            rule = y - 0.5 * height
            sketch.line(f"{name}/rule", _LAYER, (top_left[0], rule), (right, rule))
            y -= 0.3 * height
    return right, y - 0.5 * height
