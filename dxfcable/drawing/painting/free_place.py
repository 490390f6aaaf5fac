"""Free rectangles in a drawing: a coarse grid of what is taken, asked by sums over windows."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.drawing.excerpt import Obstacles
    from dxfcable.drawing.painting.sketch import Bounds
    from dxfcable.model import Point

_TOLERANCE = 1e-6  # of a cell: what touches a border of cells does not reach over it
_AT_ONCE = 1 << 16  # lines
_PIECES = 1_000_000  # most pieces that sloping lines are cut into


@dataclass(slots=True, eq=False)
class OccupancyGrid:
    """Square cells over a region, each free or taken.

    Attributes
    ----------
    x0, y0 : float
        Lower left corner [length].
    cell : float
        Side of a cell [length].
    columns, rows : int
        Number of cells.
    """

    x0: float
    y0: float
    cell: float
    columns: int
    rows: int
    _edges: NDArray[np.float64] = field(init=False)
    _sums: NDArray[np.float64] | None = field(init=False, default=None)

    def __post_init__(self) -> None:
        self._edges = np.zeros((self.columns + 1, self.rows + 1))

    def add_boxes(self, boxes: NDArray[np.float64]) -> None:
        """Take the cells that boxes reach.

        Parameters
        ----------
        boxes : (n, 4) array
            xmin, ymin, xmax, ymax [length].
        """
        x1, y1 = self.x0 + self.columns * self.cell, self.y0 + self.rows * self.cell
        inside = (boxes[:, 0] < x1) & (boxes[:, 2] > self.x0)
        inside &= (boxes[:, 1] < y1) & (boxes[:, 3] > self.y0)
        boxes = boxes[inside]
        if not len(boxes):
            return
        left, right = self._range(boxes[:, 0], boxes[:, 2], self.x0, self.columns)
        bottom, top = self._range(boxes[:, 1], boxes[:, 3], self.y0, self.rows)
        # A box adds one from its lower left corner on and takes it off again beyond its sides,
        # so that two running sums give how many boxes lie over each cell.
        wide = self.rows + 1
        corners = np.concatenate(
            (left * wide + bottom, right * wide + top, right * wide + bottom, left * wide + top)
        )
        signs = np.repeat((1.0, 1.0, -1.0, -1.0), len(left))
        if len(corners) < self._edges.size // 20:
            np.add.at(self._edges.reshape(-1), corners, signs)
        else:
            counts = np.bincount(corners, signs, self._edges.size)
            self._edges += counts.reshape(self._edges.shape)
        self._sums = None

    def add_segments(self, segments: NDArray[np.float64]) -> None:
        """Take the cells that lines run through; sloping ones are cut into short pieces.

        Parameters
        ----------
        segments : (m, 4) array
            x0, y0, x1, y1 [length].
        """
        for k in range(0, len(segments), _AT_ONCE):
            self._add_some(segments[k : k + _AT_ONCE])

    def _add_some(self, segments: NDArray[np.float64]) -> None:
        """Take the cells of a few lines, so that masks and copies stay small."""
        ax, ay, bx, by = segments.T
        x1, y1 = self.x0 + self.columns * self.cell, self.y0 + self.rows * self.cell
        # Most of a large drawing lies elsewhere: tell so by four columns, then look closer.
        inside = ((ax < x1) | (bx < x1)) & ((ax > self.x0) | (bx > self.x0))
        inside &= ((ay < y1) | (by < y1)) & ((ay > self.y0) | (by > self.y0))
        segments = segments[inside]
        low = np.minimum(segments[:, :2], segments[:, 2:])
        high = np.maximum(segments[:, :2], segments[:, 2:])
        cells = np.min(high - low, axis=1, initial=np.inf) / self.cell
        is_long = cells > 1.0
        self.add_boxes(np.hstack((low, high))[~is_long])
        if is_long.any():
            self.add_boxes(_pieces(segments[is_long], cells[is_long]))

    def _range(
        self, low: NDArray[np.float64], high: NDArray[np.float64], start: float, count: int
    ) -> tuple[NDArray[np.int64], NDArray[np.int64]]:
        """Give first cell and the one after the last, clipped to the grid."""
        first = np.floor(np.clip((low - start) / self.cell + _TOLERANCE, 0, count - 1))
        last = np.ceil(np.clip((high - start) / self.cell - _TOLERANCE, 0, count))
        return first.astype(np.int64), np.maximum(first + 1, last).astype(np.int64)

    def _table(self) -> NDArray[np.float64]:
        """Give sums of taken cells left of and below each corner, (columns + 1, rows + 1)."""
        if self._sums is None:
            counts = np.cumsum(np.cumsum(self._edges, axis=0), axis=1)[:-1, :-1]
            self._sums = np.zeros(self._edges.shape)
            self._sums[1:, 1:] = np.cumsum(np.cumsum(counts > 0.5, axis=0), axis=1)
        return self._sums

    def taken(self, boxes: NDArray[np.float64]) -> NDArray[np.float64]:
        """Count the taken cells under each of (n, 4) boxes; what lies off the grid is free."""
        table = self._table()
        i, k = self._range(boxes[:, 0], boxes[:, 2], self.x0, self.columns)
        j, m = self._range(boxes[:, 1], boxes[:, 3], self.y0, self.rows)
        x1, y1 = self.x0 + self.columns * self.cell, self.y0 + self.rows * self.cell
        outside = (boxes[:, 0] >= x1) | (boxes[:, 2] <= self.x0)
        outside |= (boxes[:, 1] >= y1) | (boxes[:, 3] <= self.y0)
        sums = table[k, m] - table[i, m] - table[k, j] + table[i, j]
        return np.where(outside, 0.0, sums)

    def is_free(
        self, width: float, height: float, corner: Point, within: Bounds | None = None
    ) -> bool:
        """Tell whether a window lies on the grid, within a rectangle, and on nothing taken."""
        x, y = corner
        x1, y1 = self.x0 + self.columns * self.cell, self.y0 + self.rows * self.cell
        left, low, right, high = (self.x0, self.y0, x1, y1) if within is None else within
        is_on = max(self.x0, left) <= x and x + width <= min(x1, right)
        is_on &= max(self.y0, low) <= y and y + height <= min(y1, high)
        return is_on and self.taken(np.array([[x, y, x + width, y + height]]))[0] == 0

    def free_windows(
        self,
        width: float,
        height: float,
        within: Bounds | None = None,
        most: int = 1 << 30,
    ) -> NDArray[np.float64]:
        """Give the lower left corners of free windows of one size, cell by cell.

        Parameters
        ----------
        width, height : float
            Size of the window [length].
        within : rectangle, optional
            That the window must not leave.
        most : int, optional
            How many corners to look at: above that, only every second, third ... row and
            column of cells.

        Returns
        -------
        (n, 2) array
        """
        x1, y1 = self.x0 + self.columns * self.cell, self.y0 + self.rows * self.cell
        left, low, right, high = (self.x0, self.y0, x1, y1) if within is None else within
        across = math.ceil(width / self.cell - _TOLERANCE)
        up = math.ceil(height / self.cell - _TOLERANCE)
        if across > self.columns or up > self.rows:
            return np.zeros((0, 2))
        table = self._table()
        i, j = (
            self._corners(low_end, high_end, start, size, count)
            for low_end, high_end, start, size, count in (
                (left, right, self.x0, width, self.columns + 1 - across),
                (low, high, self.y0, height, self.rows + 1 - up),
            )
        )
        step = max(1, math.isqrt(len(i) * len(j) // most))
        i, j = i[::step, None], j[None, ::step]
        sums = table[i + across, j + up] - table[i, j + up]
        sums = sums - table[i + across, j] + table[i, j]
        columns, rows = np.nonzero(sums == 0)
        at_x = self.x0 + i[columns, 0] * self.cell
        at_y = self.y0 + j[0, rows] * self.cell
        return np.column_stack((at_x, at_y))

    def _corners(
        self, low: float, high: float, start: float, size: float, count: int
    ) -> NDArray[np.intp]:
        """Give the cells from which a window of a size stays between two ordinates."""
        at = start + np.arange(count) * self.cell
        return np.flatnonzero((at >= low) & (at + size <= high))


def _pieces(segments: NDArray[np.float64], cells: NDArray[np.float64]) -> NDArray[np.float64]:
    """Cut lines into pieces about as high or wide as a cell and give their boxes."""
    counts = np.ceil(cells)
    counts = np.ceil(counts * min(1.0, _PIECES / float(counts.sum()))).astype(np.int64)
    owner = np.repeat(np.arange(len(segments)), counts)
    number = np.arange(len(owner)) - np.repeat(np.cumsum(counts) - counts, counts)
    start, run = segments[owner, :2], segments[owner, 2:] - segments[owner, :2]
    share = 1.0 / counts[owner][:, None]
    a = start + run * (number[:, None] * share)
    b = start + run * ((number[:, None] + 1) * share)
    return np.hstack((np.minimum(a, b), np.maximum(a, b)))


def grid_over(region: Bounds, cell: float, most_cells: int) -> OccupancyGrid:
    """Make an empty grid over a region, with larger cells where it would have too many."""
    x0, y0, x1, y1 = region
    cell = max(cell, math.sqrt((x1 - x0) * (y1 - y0) / most_cells))
    columns = max(1, math.ceil((x1 - x0) / cell - _TOLERANCE))
    rows = max(1, math.ceil((y1 - y0) / cell - _TOLERANCE))
    return OccupancyGrid(x0, y0, cell, columns, rows)


def extents(obstacles: Obstacles) -> Bounds | None:
    """Give the rectangle about all obstacles, None where there is none."""
    corners = [
        (
            float(rows[:, i].min()),
            float(rows[:, j].min()),
            float(rows[:, k].max()),
            float(rows[:, m].max()),
        )
        for rows, pairs in (
            (obstacles.segments, ((0, 1, 0, 1), (2, 3, 2, 3))),
            (obstacles.boxes, ((0, 1, 2, 3),)),
        )
        if len(rows)
        for i, j, k, m in pairs
    ]
    if not corners:
        return None
    return join(*corners)


def join(*bounds: Bounds) -> Bounds:
    """Give the rectangle about several rectangles."""
    x0, y0, x1, y1 = zip(*bounds, strict=True)
    return min(x0), min(y0), max(x1), max(y1)


def grown(bounds: Bounds, by: float) -> Bounds:
    """Give a rectangle with a margin about it."""
    x0, y0, x1, y1 = bounds
    return x0 - by, y0 - by, x1 + by, y1 + by
