"""The force diagrams of a chain of spans set in rows, where side by side is too wide."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.painting.sketch import Sketch, moved
from dxfcable.drawing.sheeting.paper_view import ROUNDER

if TYPE_CHECKING:
    from dxfcable.drawing.items import Item
    from dxfcable.drawing.painting.elevation_view import View

_APART = 4.0  # between diagrams, in text heights


def in_rows(sketch: Sketch, view: View, width: float) -> list[Item]:
    """Give the items of diagrams that stand side by side, set in rows no wider than a room.

    Parameters
    ----------
    sketch : Sketch
        Items span after span, each span's beginning with its first ray.
    view : View
    width : float
        Of the room [mm].

    Returns
    -------
    list of Item
    """
    left, _, right, _ = sketch.bounds()
    parts = _parts(sketch.items, view)
    if right - left <= width or len(parts) == 1:
        return sketch.items
    gap = _APART * view.height
    items: list[Item] = []
    x, top, low = 0.0, 0.0, 0.0
    for part in parts:
        alone = Sketch(ROUNDER)
        alone.items = part
        a, b, c, d = alone.bounds()
        if x > 0.0 and x + (c - a) > width:
            x, top = 0.0, low - gap
        items += [moved(item, (x - a, top - d), ROUNDER) for item in part]
        low = min(low, top - (d - b))
        x += c - a + gap
    return items


def _parts(items: list[Item], view: View) -> list[list[Item]]:
    """Part items by spans."""
    first, starts = 1, set()
    for diagram in view.formed.diagrams:
        starts.add(f"{view.prefix}/ray/{first}")
        first += len(diagram.load_line)
    parts: list[list[Item]] = []
    for item in items:
        if item.id in starts or not parts:
            parts.append([])
        parts[-1].append(item)
    return parts
