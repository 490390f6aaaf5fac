"""Bow's letters beside a load line whose loads are short: in a column, with lines that lead there.

The letters keep their order, so no two of these lines cross.
"""

from __future__ import annotations

import re
from dataclasses import fields
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.items import Align, TextItem, VAlign
from dxfcable.drawing.painting import turned_boxes
from dxfcable.drawing.painting.elevation_view import View
from dxfcable.drawing.sheeting.point_strip import spread

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.items import Item
    from dxfcable.drawing.painting.force_polygon import DiagramSketch
    from dxfcable.drawing.painting.sketch import Sketch

_PITCH = 1.4  # from letter to letter, in text heights
_NEAR, _FAR = 0.5, 2.6  # where the lines start and end, from the load line
_TALLER, _MORE = 1.25, 12.0  # how much taller than the load line a column may be
_LETTER = re.compile(r".*/load-line-letter/([^/]+)(/leader)?")


class SparseView(View):
    """A view whose labels may be left out where they have no room."""

    @property
    def is_dense(self) -> bool:
        """Say so of any number of points."""
        return True


def sparse(view: View) -> SparseView:
    """Give a view whose labels may be left out."""
    return SparseView(**{f.name: getattr(view, f.name) for f in fields(view)})


def has_clash(items: Sequence[Item]) -> bool:
    """Tell whether two texts stand on each other."""
    texts = [item for item in items if isinstance(item, TextItem)]
    rows = turned_boxes.of_texts(texts)
    touch = 1e-3 * (texts[0].height if texts else 1.0)
    hits = turned_boxes.touching(rows[:, None, :], rows[None, :, :], touch)
    return bool(np.count_nonzero(hits) > len(texts))


def spread_letters(sketch: Sketch, view: View, drawn: DiagramSketch) -> None:
    """Put the letters of all diagrams into columns, where these are not much too tall.

    Parameters
    ----------
    sketch : Sketch
        The diagrams; letters that stand there are taken out where a column holds them.
    view : View
        On paper.
    drawn : DiagramSketch
        Where the load lines are.
    """
    h = view.height
    for number, (diagram, geometry) in enumerate(
        zip(view.formed.diagrams, drawn.spans, strict=True), start=1
    ):
        line = geometry.load_line
        per_piece = len(line) // len(diagram.letters)
        names = [diagram.letters[k // per_piece] + "'" * (k % per_piece) for k in range(len(line))]
        high = abs(line[-1][1] - line[0][1])
        least = _PITCH * h
        rising = spread([p[1] for p in reversed(line)], least)
        if rising[-1] - rising[0] > _TALLER * high + _MORE * h or number > 1:
            continue  # too tall, or in the way of the diagram to its left
        sketch.items = [i for i in sketch.items if _letter(i) not in names]
        side = -1.0 if geometry.pole[0] >= line[0][0] else 1.0
        align = Align.RIGHT if side < 0 else Align.LEFT
        for name, (x, y), level in zip(names, line, reversed(rising), strict=True):
            key = f"{view.prefix}/load-line-letter/{name}"
            start, end = (x + side * _NEAR * h, y), (x + side * _FAR * h, level)
            sketch.line(f"{key}/leader", "letters", start, end)
            at = (x + side * (_FAR + 0.25) * h, level)
            sketch.text(key, "letters", name, at, h, align=align, valign=VAlign.MIDDLE)


def _letter(item: Item) -> str:
    """Give the letter that an item is, or leads to; "" for another item."""
    match = _LETTER.fullmatch(item.id)
    return match[1] if match else ""
