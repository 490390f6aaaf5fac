"""The drafter's lines and boxes about our labels, sorted by columns so that few are looked at."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.painting import turned_boxes

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.drawing.excerpt import Obstacles
    from dxfcable.drawing.painting.sketch import Bounds
    from dxfcable.model import Point

    Floats = NDArray[np.float64]
    Indices = NDArray[np.intp]

_MOST_NEAR = 120  # looked at for one label: where there are more, no place is clear anyway
_AT_ONCE = 1 << 16


class DrawnGround:
    """What the drafter drew within a region.

    Parameters
    ----------
    obstacles : Obstacles
        The drafter's drawing.
    region : tuple of float
        Rectangle beyond which nothing is asked.
    column : float
        Width of the columns that rows are sorted into [length].

    Attributes
    ----------
    rows : (n, 6) array
        Lines, then boxes, as `turned_boxes` has them.
    is_box : (n,) array of bool
        True for texts, blocks and circles.
    """

    def __init__(self, obstacles: Obstacles, region: Bounds, column: float) -> None:
        lines = _within(obstacles.segments, region)
        boxes = _within(obstacles.boxes, region)
        self.rows: Floats = np.concatenate(
            (turned_boxes.of_lines(lines), turned_boxes.of_boxes(boxes))
        )
        self.is_box = np.arange(len(self.rows)) >= len(lines)
        self._low, self._high = turned_boxes.reaches(self.rows)
        self._x0, self._column = region[0], column
        self._count = max(1, int(np.ceil((region[2] - region[0]) / column)))
        first, last = self._columns(self._low[:, 0]), self._columns(self._high[:, 0])
        counts = last - first + 1
        owner = np.repeat(np.arange(len(self.rows)), counts)
        column_of = np.arange(len(owner)) - np.repeat(np.cumsum(counts) - counts, counts)
        column_of += np.repeat(first, counts)
        order = np.argsort(column_of, kind="stable")
        self._owner, self._first = owner[order], first
        self._starts = np.searchsorted(column_of[order], np.arange(self._count + 1))

    def _columns(self, x: Floats) -> Indices:
        """Give the column of each ordinate, the outer ones for what lies beyond."""
        inside = np.clip((x - self._x0) / self._column, 0, self._count - 1)
        return np.asarray(np.floor(inside), dtype=np.intp)

    def near(self, low: Floats, high: Floats) -> tuple[Indices, Indices]:
        """Pair each of several upright boxes with the rows that reach into it.

        Parameters
        ----------
        low, high : (m, 2) arrays
            Corners of the boxes [length].

        Returns
        -------
        box, row : (p,) arrays
            No more than a few hundred rows for each box.
        """
        first, last = self._columns(low[:, 0]), self._columns(high[:, 0])
        found: list[Indices] = []
        for k in range(len(low)):
            rows = self._owner[self._starts[first[k]] : self._starts[last[k] + 1]]
            if last[k] > first[k]:
                # A row in several columns counts in the first that both reach.
                columns = np.repeat(
                    np.arange(first[k], last[k] + 1),
                    np.diff(self._starts[first[k] : last[k] + 2]),
                )
                rows = rows[columns == np.maximum(self._first[rows], first[k])]
            inside = (self._low[rows] < high[k]) & (self._high[rows] > low[k])
            found.append(rows[inside[:, 0] & inside[:, 1]][:_MOST_NEAR])
        counts = [len(rows) for rows in found]
        return np.repeat(np.arange(len(low)), counts), np.concatenate([*found, self._owner[:0]])

    def strips(
        self, levels: Floats, half: float, band: Bounds, thin: float
    ) -> tuple[Floats, Floats]:
        """Count what lies along and what runs across level strips.

        Parameters
        ----------
        levels : (n,) array
            Middles of the strips, rising [length].
        half : float
            Half the height of a strip [length].
        band : tuple of float
            Rectangle about all strips.
        thin : float
            What is no wider than this within the band runs across [length].

        Returns
        -------
        along, across : (n,) arrays
        """
        x0, y0, x1, y1 = band
        inside = (self._low < (x1, y1)) & (self._high > (x0, y0))
        rows = np.flatnonzero(inside[:, 0] & inside[:, 1])
        width = np.minimum(self._high[rows, 0], x1) - np.maximum(self._low[rows, 0], x0)
        first = np.searchsorted(levels, self._low[rows, 1] - half, side="right")
        last = np.searchsorted(levels, self._high[rows, 1] + half, side="left")
        counts = []
        for chosen in (width > thin, width <= thin):
            steps = np.bincount(first[chosen], minlength=len(levels) + 1).astype(np.float64)
            steps -= np.bincount(np.maximum(first, last)[chosen], minlength=len(levels) + 1)
            counts.append(np.cumsum(steps)[:-1])
        return counts[0], counts[1]

    def weights(
        self,
        row: Indices,
        line: tuple[Floats, Floats],
        on_line: float,
        on_box: float,
    ) -> Floats:
        """Weigh rows, each as seen from an object named.

        A box about an end of the object is its own symbol with some air in the corners: a text
        beside it may reach into that, so it weighs as a line does.

        Parameters
        ----------
        row : (p,) array
            Rows.
        line : tuple of (p, 2) arrays
            Ends of the object that each row is looked at from; not numbers for none.
        on_line, on_box : float
            What to stand on a line or box costs.
        """
        low, high = self._low[row], self._high[row]
        is_own = np.zeros(len(row), dtype=np.bool_)
        for end in line:
            is_own |= ((low <= end) & (end <= high)).all(axis=1)
        return np.where(self.is_box[row] & ~is_own, on_box, on_line)

    def burdens(
        self, rows: Floats, touch: float, on_line: float, on_box: float, at: Point | None = None
    ) -> Floats:
        """Give what each of a few boxes close together costs for what the drafter drew under it.

        Parameters
        ----------
        rows : (m, 6) array
            The boxes.
        touch : float
            Overlap that is only touching [length].
        on_line, on_box : float
            What to stand on a line or box costs.
        at : Point, optional
            What they name, if anything.
        """
        low, high = turned_boxes.reaches(rows)
        _, near = self.near(low.min(axis=0)[None, :], high.max(axis=0)[None, :])
        hit = turned_boxes.touching(rows[:, None, :], self.rows[near][None, :, :], touch)
        end = np.broadcast_to(np.array(at or (np.nan, np.nan)), (len(near), 2))
        return np.asarray(hit @ self.weights(near, (end, end), on_line, on_box))


def _within(rows: Floats, region: Bounds) -> Floats:
    """Give the lines or boxes that reach into a region, a lot at a time."""
    x0, y0, x1, y1 = region
    kept = [np.zeros((0, 4))]
    for k in range(0, len(rows), _AT_ONCE):
        some = rows[k : k + _AT_ONCE]
        ax, ay, bx, by = some.T
        inside = ((ax < x1) | (bx < x1)) & ((ax > x0) | (bx > x0))
        inside &= ((ay < y1) | (by < y1)) & ((ay > y0) | (by > y0))
        kept.append(some[inside])
    return np.concatenate(kept)
