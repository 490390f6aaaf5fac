"""Where a block of ours goes: the nearest place free of all that is drawn, else beyond it."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.items import TextItem
from dxfcable.drawing.painting.free_place import extents, grid_over, grown, join
from dxfcable.drawing.painting.labels import text_corners
from dxfcable.drawing.painting.sketch import strokes

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from dxfcable.drawing.excerpt import Obstacles
    from dxfcable.drawing.items import Item
    from dxfcable.drawing.painting.sketch import Bounds
    from dxfcable.model import Point, Rectangle

_CELLS = 50_000


def free_corner(
    size: tuple[float, float],
    wanted: Point,
    *,
    margin: float,
    view: Bounds,
    items: Sequence[Item],
    obstacles: Obstacles,
    frames: Sequence[Rectangle],
) -> tuple[Point, str]:
    """Find the free place nearest to the wanted one.

    Parameters
    ----------
    size : tuple of float
        Width and height of the block [length].
    wanted : Point
        Where its lower left corner would best be.
    margin : float
        Kept free about it [length].
    view : Bounds
        The elevation that it belongs to: near is what lies about it.
    items : sequence of Item
        Ours, painted so far.
    obstacles : Obstacles
        The drafter's drawing.
    frames : sequence of Rectangle
        Frames of force diagrams, kept for those.

    Returns
    -------
    corner : Point
        Lower left corner.
    where : str
        How it was found, in words.
    """
    width, height = size
    reach = 2.0 * max(width, height) + 2.0 * margin
    around = (*wanted, wanted[0] + width, wanted[1] + height)
    region = grown(join(view, around), reach)
    grid = grid_over(region, margin / 3.0, _CELLS)
    grid.add_segments(obstacles.segments)
    grid.add_boxes(obstacles.boxes)
    grid.add_boxes(np.array([(f.x0, f.y0, f.x1, f.y1) for f in frames]).reshape(-1, 4))
    lines, boxes = strokes(items), text_boxes(items)
    grid.add_segments(lines)
    grid.add_boxes(boxes)
    window = (wanted[0] - margin, wanted[1] - margin)
    drawn = extents(obstacles)
    size = (width + 2 * margin, height + 2 * margin)
    found = None
    if drawn is not None:
        # A near place among what is drawn goes first: it does not leave a sheet's border.
        found = grid.nearest_free(*size, window, drawn)
    if found is None:
        found = grid.nearest_free(*size, window)
    if found is not None:
        return (found[0] + margin, found[1] + margin), "at the nearest free place"
    points = np.vstack((lines[:, :2], lines[:, 2:], boxes[:, :2], boxes[:, 2:]))
    right = max(view[2], float(points[:, 0].max(initial=view[2])))
    if drawn is not None:
        right = max(right, drawn[2])
    return (right + margin, view[3] - height), "right of everything drawn, nothing nearer is free"


def text_boxes(items: Sequence[Item]) -> NDArray[np.float64]:
    """Give the upright boxes about all texts, (n, 4)."""
    corners = np.array(
        [text_corners(item) for item in items if isinstance(item, TextItem)], dtype=np.float64
    ).reshape(-1, 4, 2)
    return np.hstack((corners.min(axis=1), corners.max(axis=1)))
