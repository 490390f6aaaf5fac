"""Boxes turned by any angle, many at once: texts, lines (boxes of no width), the drafter's boxes.

A row is centre x, y, direction x, y (a unit vector), half length along it, half width across.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.painting.labels import text_box

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from dxfcable.drawing.items import TextItem
    from dxfcable.drawing.painting.label_ground import Label

    Floats = NDArray[np.float64]

NO_ROWS = np.zeros((0, 6))


def of_lines(lines: Floats, half_width: float = 0.0) -> Floats:
    """Give the rows of lines, (n, 4) to (n, 6); a line of no length is a point."""
    half = 0.5 * (lines[:, 2:] - lines[:, :2])
    length = np.hypot(half[:, 0], half[:, 1])
    is_point = length == 0.0
    safe = np.where(is_point, 1.0, length)
    rows = np.empty((len(lines), 6))
    rows[:, :2] = 0.5 * (lines[:, :2] + lines[:, 2:])
    rows[:, 2] = np.where(is_point, 1.0, half[:, 0] / safe)
    rows[:, 3] = half[:, 1] / safe
    rows[:, 4] = length + half_width
    rows[:, 5] = half_width
    return rows


def of_boxes(boxes: Floats) -> Floats:
    """Give the rows of upright boxes xmin, ymin, xmax, ymax, (n, 4) to (n, 6)."""
    rows = np.empty((len(boxes), 6))
    rows[:, :2] = 0.5 * (boxes[:, :2] + boxes[:, 2:])
    rows[:, 2:4] = (1.0, 0.0)
    rows[:, 4:] = 0.5 * (boxes[:, 2:] - boxes[:, :2])
    return rows


def of_texts(items: Sequence[TextItem]) -> Floats:
    """Give the rows of texts with the room they may take, (n, 6)."""
    if not items:
        return NO_ROWS
    boxes = np.array([text_box(i.text, i.height, i.align, i.valign) for i in items])
    turns = np.radians(np.array([item.rotation for item in items]))
    return _turned(boxes, np.array([item.at for item in items]), turns)


def of_places(label: Label, wording: str, height: float) -> Floats:
    """Give the rows of a label at each of its places, (places, 6)."""
    before, below, behind, above = label.room
    box = np.array([text_box(wording, height, label.align, label.valign)])
    box += (-before, -below, behind, above)
    return _turned(box, np.array(label.places), np.radians(np.array([label.rotation])))


def of_whole(label: Label, item: TextItem, share: float = 1.0) -> Floats:
    """Give the row of a text and all that is drawn about it, (1, 6).

    `share` is how much of the room kept along the text counts.
    """
    x0, y0, x1, y1 = text_box(item.text, item.height, item.align, item.valign)
    before, below, behind, above = label.room
    right = x0 + share * (x1 + behind - x0)
    box = np.array([(x0 - before, y0 - below, right, y1 + above)])
    return _turned(box, np.array([item.at]), np.radians(np.array([item.rotation])))


def of_rooms(label: Label, item: TextItem) -> Floats:
    """Give the rows of what is drawn about a label's text: before, below, behind and above it."""
    x0, y0, x1, y1 = text_box(item.text, item.height, item.align, item.valign)
    before, below, behind, above = label.room
    low, high = y0 - below, y1 + above
    boxes = np.array(
        [
            (x0 - before, low, x0, high),
            (x0, low, x1, y0),
            (x1, low, x1 + behind, high),
            (x0, y1, x1, high),
        ]
    )
    boxes = boxes[np.array(label.room) > 0.0]
    turns = np.radians(np.full(len(boxes), item.rotation))
    return _turned(boxes, np.array([item.at] * len(boxes)), turns)


def _turned(boxes: Floats, at: Floats, turns: Floats) -> Floats:
    """Give the rows of boxes about alignment points, turned."""
    cos, sin = np.cos(turns), np.sin(turns)
    middle = 0.5 * (boxes[:, :2] + boxes[:, 2:])
    rows = np.empty((len(at), 6))
    rows[:, 0] = at[:, 0] + middle[:, 0] * cos - middle[:, 1] * sin
    rows[:, 1] = at[:, 1] + middle[:, 0] * sin + middle[:, 1] * cos
    rows[:, 2], rows[:, 3] = cos, sin
    rows[:, 4:] = 0.5 * (boxes[:, 2:] - boxes[:, :2])
    return rows


def grown(rows: Floats, by: float) -> Floats:
    """Give the rows with a gap about each."""
    wider = rows.copy()
    wider[:, 4:] += by
    return wider


def reaches(rows: Floats) -> tuple[Floats, Floats]:
    """Give the lower left and upper right corners of the upright boxes about rows, (n, 2)."""
    along, across = np.abs(rows[:, 2:4]), np.abs(rows[:, 3:1:-1])
    half = along * rows[:, 4:5] + across * rows[:, 5:6]
    return rows[:, :2] - half, rows[:, :2] + half


def touching(one: Floats, other: Floats, touch: float) -> NDArray[np.bool_]:
    """Tell which boxes overlap, by separating axes.

    Parameters
    ----------
    one, other : (..., 6) arrays
        Rows, broadcast against each other.
    touch : float
        Boxes that overlap by no more than this only touch [length].

    Returns
    -------
    (...) array of bool
    """
    x, y, ex, ey, length, width = np.moveaxis(one, -1, 0)
    x2, y2, fx, fy, length2, width2 = np.moveaxis(other, -1, 0)
    dx, dy = x - x2, y - y2
    same, cross = np.abs(ex * fx + ey * fy), np.abs(ex * fy - ey * fx)
    found = np.abs(dx * ex + dy * ey) < length + length2 * same + width2 * cross - touch
    found &= np.abs(dx * ey - dy * ex) < width + length2 * cross + width2 * same - touch
    found &= np.abs(dx * fx + dy * fy) < length2 + length * same + width * cross - touch
    found &= np.abs(dx * fy - dy * fx) < width2 + length * cross + width * same - touch
    return np.asarray(found)


def pairs_near(
    low: Floats, high: Floats, low2: Floats, high2: Floats
) -> tuple[NDArray[np.intp], NDArray[np.intp]]:
    """Pair the upright boxes of one lot with those of another that they reach into."""
    near = (low[:, None, 0] < high2[None, :, 0]) & (high[:, None, 0] > low2[None, :, 0])
    near &= (low[:, None, 1] < high2[None, :, 1]) & (high[:, None, 1] > low2[None, :, 1])
    first, second = np.nonzero(near)
    return first, second
