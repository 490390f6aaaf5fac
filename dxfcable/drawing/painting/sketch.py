"""A sheet of items in the making: every number rounded, every text ASCII, every id once."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.bytes.decode import escape
from dxfcable.drawing.items import (
    Align,
    CircleItem,
    Item,
    LineItem,
    PolylineItem,
    TextItem,
    TriangleItem,
    VAlign,
)
from dxfcable.drawing.painting import turned_boxes
from dxfcable.drawing.painting.labels import text_corners

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from numpy.typing import NDArray

    from dxfcable.drawing.painting.rounding import Rounder
    from dxfcable.model import Point

Bounds = tuple[float, float, float, float]


class Sketch:
    """Collects items.

    Parameters
    ----------
    rounder : Rounder
        Rounds every coordinate that goes in.
    part : str
        Part of every item, or "" where each item is its own part.
    """

    def __init__(self, rounder: Rounder, part: str = "") -> None:
        self.rounder = rounder
        self.part = part
        self.items: list[Item] = []

    def line(
        self, name: str, layer: str, start: Point, end: Point, *, is_chain: bool = False
    ) -> None:
        """Add a straight line, unless rounding leaves nothing of it."""
        start, end = self.rounder.point(start), self.rounder.point(end)
        if start != end:
            part = self.part or name
            item = LineItem(
                id=name, layer=layer, part=part, start=start, end=end, is_chain=is_chain
            )
            self.items.append(item)

    def polyline(
        self, name: str, layer: str, points: Iterable[Point], *, is_closed: bool = False
    ) -> None:
        """Add a polyline."""
        vertices = tuple(self.rounder.point(p) for p in points)
        part = self.part or name
        self.items.append(
            PolylineItem(id=name, layer=layer, part=part, points=vertices, is_closed=is_closed)
        )

    def rectangle(self, name: str, layer: str, bounds: Bounds) -> None:
        """Add an upright rectangle."""
        x0, y0, x1, y1 = bounds
        corners = ((x0, y0), (x1, y0), (x1, y1), (x0, y1))
        points = tuple(self.rounder.point(p) for p in corners)
        part = self.part or name
        self.items.append(
            PolylineItem(id=name, layer=layer, part=part, points=points, is_closed=True)
        )

    def circle(self, name: str, layer: str, center: Point, radius: float) -> None:
        """Add a circle."""
        self.items.append(
            CircleItem(
                id=name,
                layer=layer,
                part=self.part or name,
                center=self.rounder.point(center),
                radius=self.rounder.value(radius),
            )
        )

    def arrowhead(self, name: str, layer: str, tip: Point, towards: Point, size: float) -> None:
        """Add a filled arrowhead whose tip points along the vector `towards`."""
        length = math.hypot(*towards)
        if length == 0.0 or size <= 0.0:
            return
        ux, uy = towards[0] / length, towards[1] / length
        x, y = tip[0] - size * ux, tip[1] - size * uy
        half = 0.18 * size
        corners = (tip, (x - half * uy, y + half * ux), (x + half * uy, y - half * ux))
        first, second, third = (self.rounder.point(p) for p in corners)
        if first not in (second, third):
            self.items.append(
                TriangleItem(
                    id=name, layer=layer, part=self.part or name, points=(first, second, third)
                )
            )

    def text(
        self,
        name: str,
        layer: str,
        text: str,
        at: Point,
        height: float,
        *,
        align: Align = Align.LEFT,
        valign: VAlign = VAlign.BASELINE,
        rotation: float = 0.0,
    ) -> TextItem:
        """Add a line of text."""
        item = TextItem(
            id=name,
            layer=layer,
            part=self.part or name,
            text=shown(text),
            at=self.rounder.point(at),
            height=self.rounder.value(height),
            rotation=round(rotation, 9) + 0.0,
            align=align,
            valign=valign,
        )
        self.items.append(item)
        return item

    def bounds(self) -> Bounds:
        """Give the rectangle about everything, texts with the room they may take."""
        texts = [item for item in self.items if isinstance(item, TextItem)]
        rest = [p for i in self.items if not isinstance(i, TextItem) for p in item_points(i)]
        low, high = turned_boxes.reaches(turned_boxes.of_texts(texts))
        xy = np.concatenate((np.array(rest, dtype=np.float64).reshape(-1, 2), low, high))
        low, high = xy.min(axis=0), xy.max(axis=0)
        return float(low[0]), float(low[1]), float(high[0]), float(high[1])

    def moved(self, by: Point, rounder: Rounder) -> list[Item]:
        """Give the items moved, and rounded where they come to lie."""
        return [moved(item, by, rounder) for item in self.items]


def shown(text: str) -> str:
    """Give a text in ASCII."""
    return text if text.isascii() and text.isprintable() else escape(text)


def item_points(item: Item) -> Sequence[Point]:
    """Give points whose bounding box is the item's."""
    match item:
        case LineItem():
            return item.start, item.end
        case PolylineItem() | TriangleItem():
            return item.points
        case CircleItem():
            (x, y), r = item.center, item.radius
            return (x - r, y - r), (x + r, y + r)
        case TextItem():
            return text_corners(item)
    message = f"no extent for {type(item).__name__}"
    raise TypeError(message)


def moved(item: Item, by: Point, rounder: Rounder) -> Item:
    """Give an item at another place."""

    def there(point: Point) -> Point:
        return rounder.point((point[0] + by[0], point[1] + by[1]))

    match item:
        case LineItem():
            return replace(item, start=there(item.start), end=there(item.end))
        case PolylineItem():
            return replace(item, points=tuple(there(p) for p in item.points))
        case TriangleItem():
            first, second, third = item.points
            return replace(item, points=(there(first), there(second), there(third)))
        case CircleItem():
            return replace(item, center=there(item.center))
        case TextItem():
            return replace(item, at=there(item.at))
    message = f"cannot move {type(item).__name__}"
    raise TypeError(message)


def strokes(items: Iterable[Item]) -> NDArray[np.float64]:
    """Give the straight pieces of lines and polylines, (n, 4): what labels stay clear of."""
    rows: list[tuple[float, float, float, float]] = []
    for item in items:
        match item:
            case LineItem():
                rows.append((*item.start, *item.end))
            case PolylineItem():
                pieces = zip(item.points, item.points[1:], strict=False)
                rows += [(*a, *b) for a, b in pieces]
            case TriangleItem():
                a, b, c = item.points
                rows += [(*a, *b), (*b, *c), (*c, *a)]
            case CircleItem():
                (x, y), r = item.center, item.radius
                rows += [(x - r, y, x + r, y), (x, y - r, x, y + r)]
            case _:
                continue
    return np.array(rows, dtype=np.float64).reshape(-1, 4)
