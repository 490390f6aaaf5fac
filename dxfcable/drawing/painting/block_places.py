"""Where a block of ours goes: a free place near what it belongs to, else beyond everything."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.items import TextItem
from dxfcable.drawing.painting import turned_boxes
from dxfcable.drawing.painting.free_place import extents, grid_over, grown, join
from dxfcable.drawing.painting.sketch import strokes

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from numpy.typing import NDArray

    from dxfcable.drawing.excerpt import Obstacles
    from dxfcable.drawing.items import Item
    from dxfcable.drawing.painting.sketch import Bounds
    from dxfcable.model import Point, Rectangle

    Floats = NDArray[np.float64]

_CELLS = 160_000
_CORNERS = 8_000  # looked at for one block
_ASIDE = 0.3  # of the way from the place wanted: counts less than being near its own
_STRANGE = 2.0  # how much being nearer to another cable counts
_INSIDE = 60.0  # what standing in an elevation costs, in margins
_GOOD = 2.5  # margins: the place wanted is taken at once where it costs less
_LATER = 6.0  # what each later shape of a block costs, in margins


class BlockPlaces:
    """Elevations and blocks of all cables, and where a further block may stand.

    Parameters
    ----------
    obstacles : Obstacles
        The drafter's drawing.
    margin : float
        Kept free about each block [length].

    Attributes
    ----------
    bounds : dict of str to rectangle
        Elevation of each cable by its prefix.
    blocks : dict of str to list of rectangles
        What stands already for each cable.
    """

    def __init__(self, obstacles: Obstacles, margin: float) -> None:
        self._obstacles, self._drawn = obstacles, extents(obstacles)
        self._margin = margin
        self.bounds: dict[str, Bounds] = {}
        self.blocks: dict[str, list[Bounds]] = {}
        self._frames: dict[str, Bounds] = {}
        self._grounds: dict[str, FreeGround] = {}
        self._items: list[Item] = []

    def add_view(
        self, prefix: str, bounds: Bounds, frame: Rectangle | None, items: Sequence[Item]
    ) -> None:
        """Take a cable's elevation, and keep its frame free for its diagram."""
        self.bounds[prefix], self.blocks[prefix] = bounds, []
        self._items += items
        if frame is not None:
            self._frames[prefix] = (frame.x0, frame.y0, frame.x1, frame.y1)

    def add_items(self, items: Sequence[Item]) -> None:
        """Take the room of what belongs to no cable, before any cable's ground is prepared."""
        self._items += items

    def add_block(self, prefix: str, bounds: Bounds, items: Sequence[Item]) -> None:
        """Take the room of a block of a cable."""
        self.blocks[prefix].append(bounds)
        self._items += items
        for ground in self._grounds.values():
            ground.add(items)

    def join_blocks(self, prefix: str, first: int) -> None:
        """Make one block of a cable's last ones."""
        self.blocks[prefix][first:] = [join(*self.blocks[prefix][first:])]

    def beside(self, prefix: str, size: tuple[float, float]) -> Point:
        """Give the corner of a block right of a cable's last one, tops level."""
        _, _, right, top = (self.blocks[prefix] or [self.bounds[prefix]])[-1]
        # A cell more, since cells that the last block only reaches into count as taken.
        cell = self._grounds[prefix].grid.cell
        return right + self._margin + cell, top - size[1]

    def below(self, prefix: str, size: tuple[float, float]) -> Point:
        """Give the corner of a block below a cable's last one, left sides level."""
        left, bottom, _, _ = (self.blocks[prefix] or [self.bounds[prefix]])[-1]
        return left, bottom - self._margin - self._grounds[prefix].grid.cell - size[1]

    def find(
        self, prefix: str, sizes: Sequence[tuple[float, float]], wanted: Sequence[Point]
    ) -> tuple[int, Point, str]:
        """Find a free place near a cable's own view and blocks, not nearer to another's.

        Parameters and results are those of `FreeGround.place`.
        """
        own = [self.bounds[prefix], *self.blocks[prefix]]
        others = [
            bounds
            for other in self.bounds
            if other != prefix
            for bounds in (self.bounds[other], *self.blocks[other])
        ]
        others += [frame for other, frame in self._frames.items() if other != prefix]
        return self._grounds[prefix].place(sizes, wanted, own, others)

    def prepare(self, prefix: str, sizes: Sequence[tuple[float, float]]) -> None:
        """Find what is taken about a cable's view and frame.

        The region does not depend on where blocks stand, so that holding a block where it is
        changes nothing for the next one.

        Parameters
        ----------
        prefix : str
            The cable.
        sizes : sequence of tuple of float
            Width and height of blocks to come [length].
        """
        x0, y0, x1, y1 = self.bounds[prefix]
        largest = max(x1 - x0, y1 - y0, *(side for size in sizes for side in size))
        around = [self.bounds[prefix]]
        around += [self._frames[prefix]] if prefix in self._frames else []
        found = FreeGround(
            join(*around),
            2.0 * largest + 2.0 * self._margin,
            self._margin,
            self._obstacles,
            self._drawn,
        )
        found.add(self._items)
        found.add_boxes(self._frames.values())
        self._grounds[prefix] = found


class FreeGround:
    """What is taken about one cable's elevation.

    Parameters
    ----------
    view : tuple of float
        The elevation that blocks belong to: near is what lies about it.
    reach : float
        How far off a block may go [length].
    margin : float
        Kept free about each block [length].
    obstacles : Obstacles
        The drafter's drawing.
    drawn : tuple of float or None
        The rectangle about all of that.
    """

    def __init__(
        self,
        view: Bounds,
        reach: float,
        margin: float,
        obstacles: Obstacles,
        drawn: Bounds | None,
    ) -> None:
        self.margin, self.view, self.drawn = margin, view, drawn
        x0, y0, x1, y1 = grown(view, reach)
        if drawn is not None:
            # Beyond the drawing a little more than a block is enough.
            a0, b0, a1, b1 = grown(join(drawn, view), 0.6 * reach)
            x0, y0, x1, y1 = max(x0, a0), max(y0, b0), min(x1, a1), min(y1, b1)
        self.grid = grid_over((x0, y0, x1, y1), margin / 3.0, _CELLS)
        self.grid.add_segments(obstacles.segments)
        self.grid.add_boxes(obstacles.boxes)
        self.right = view[2] if drawn is None else max(view[2], drawn[2])

    def add(self, items: Sequence[Item]) -> None:
        """Take the room of items of ours."""
        lines, boxes = strokes(items), text_boxes(items)
        self.grid.add_segments(lines)
        self.grid.add_boxes(boxes)
        right = np.concatenate((lines[:, 0], lines[:, 2], boxes[:, 2]))
        self.right = max(self.right, float(right.max(initial=self.right)))

    def add_boxes(self, boxes: Iterable[Bounds]) -> None:
        """Keep rectangles free."""
        self.grid.add_boxes(np.array(list(boxes), dtype=np.float64).reshape(-1, 4))

    def place(
        self,
        sizes: Sequence[tuple[float, float]],
        wanted: Sequence[Point],
        own: Sequence[Bounds],
        others: Sequence[Bounds],
    ) -> tuple[int, Point, str]:
        """Find the best place for a block that may have one of several shapes.

        Parameters
        ----------
        sizes : sequence of tuple of float
            Width and height of each shape, the usual ones first [length].
        wanted : sequence of Point
            Where the lower left corner of each would best be.
        own, others : sequence of rectangles
            What it belongs to, its elevation first; what belongs to other cables.

        Returns
        -------
        shape : int
            Which of the sizes.
        corner : Point
            Lower left corner.
        where : str
            How it was found, in words.
        """
        for within in (self.drawn, None) if self.drawn is not None else (None,):
            # A near place among what is drawn goes first: it does not leave a sheet's border.
            found = []
            for shape, (size, at) in enumerate(zip(sizes, wanted, strict=True)):
                best = self._best(size, at, own, others, within)
                if best is not None:
                    cost = best[0] + _LATER * self.margin * shape
                    found.append((round(cost / self.margin, 6), shape, best[1]))
                if found and min(found)[0] < _LATER * (shape + 1):
                    break  # no later shape can cost less
            if found:
                _, shape, corner = min(found)
                return shape, corner, "at the nearest free place"
        corner = (self.right + self.margin, self.view[3] - sizes[0][1])
        return 0, corner, "right of everything drawn, nothing nearer is free"

    def _best(
        self,
        size: tuple[float, float],
        wanted: Point,
        own: Sequence[Bounds],
        others: Sequence[Bounds],
        within: Bounds | None,
    ) -> tuple[float, Point] | None:
        """Give cost and corner of the best free place for one shape."""
        margin, (width, height) = self.margin, size
        window = (width + 2.0 * margin, height + 2.0 * margin)
        at = (wanted[0] - margin, wanted[1] - margin)
        if self.grid.is_free(*window, at, within):
            cost = self._costs(np.array([wanted]), size, wanted, own, others)[0]
            if cost < _GOOD:
                return float(cost) * margin, wanted
        corners = margin + self.grid.free_windows(*window, within, _CORNERS)
        if not len(corners):
            return None
        costs = self._costs(corners, size, wanted, own, others)
        best = int(np.argmin(costs))
        return float(costs[best]) * margin, (float(corners[best, 0]), float(corners[best, 1]))

    def _costs(
        self,
        corners: Floats,
        size: tuple[float, float],
        wanted: Point,
        own: Sequence[Bounds],
        others: Sequence[Bounds],
    ) -> Floats:
        """Weigh places, in margins; rounded, so that of equally good ones the first wins."""
        boxes = np.hstack((corners, corners + size))
        costs = _gaps(boxes, own)
        # A hole in an elevation is free, but no place for a table.
        is_inside = _gaps(boxes, own[:1]) == 0.0
        if others:
            strange = costs - _gaps(boxes, others)
            costs = costs + _STRANGE * np.maximum(strange + self.margin, 0.0)
            is_inside |= _gaps(boxes, others) == 0.0
        costs = costs + _INSIDE * self.margin * is_inside
        aside = np.hypot(corners[:, 0] - wanted[0], corners[:, 1] - wanted[1])
        return np.asarray(np.round((costs + _ASIDE * aside) / self.margin, 4))


def _gaps(boxes: Floats, rectangles: Sequence[Bounds]) -> Floats:
    """Give the gap between each box and the nearest of some rectangles."""
    least = np.full(len(boxes), np.inf)
    for x0, y0, x1, y1 in rectangles:
        across = np.maximum(np.maximum(x0 - boxes[:, 2], boxes[:, 0] - x1), 0.0)
        up = np.maximum(np.maximum(y0 - boxes[:, 3], boxes[:, 1] - y1), 0.0)
        least = np.minimum(least, np.hypot(across, up))
    return least


def text_boxes(items: Sequence[Item]) -> Floats:
    """Give the upright boxes about all texts, (n, 4)."""
    rows = turned_boxes.of_texts([item for item in items if isinstance(item, TextItem)])
    return np.hstack(turned_boxes.reaches(rows))
