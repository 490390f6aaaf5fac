"""Labels in the cells of a plan: where they fit, clear of the drafter's texts and of each other."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.painting import turned_boxes
from dxfcable.drawing.painting.labels import ASCENT, DESCENT, text_width

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from dxfcable.drawing.painting.drawn_ground import DrawnGround
    from dxfcable.model import Point

    Floats = NDArray[np.float64]

STEP = 1.6  # from line to line of a label, in text heights
_CLEAR = 0.3  # kept free about a label, in text heights
_PLACES = (5, 49)  # tried across a cell, and up: about one a text height
_AWAY = 0.01  # by text height from the point wanted
_TURNED = 0.5  # what reading from the side costs
_LATER = 0.3  # what each later shape costs
_AT_ONCE = 500  # things that boxes are held against


@dataclass(frozen=True, slots=True, kw_only=True)
class Shape:
    """How a label stands: its lines, level or turned a quarter to the left."""

    lines: tuple[str, ...]
    is_turned: bool = False

    def size(self, height: float) -> tuple[float, float]:
        """Give width and height in the drawing, with the gap about it [length]."""
        wide = max(text_width(line, height) for line in self.lines) + 2 * _CLEAR * height
        high = (STEP * (len(self.lines) - 1) + ASCENT + DESCENT + 2 * _CLEAR) * height
        return (high, wide) if self.is_turned else (wide, high)

    def places(self, height: float) -> list[Point]:
        """Give the base points of the lines, each in the middle of its line, about the middle."""
        rise = 0.5 * STEP * (len(self.lines) - 1) + 0.5 * (DESCENT - ASCENT)
        levels = [(rise - STEP * k) * height for k in range(len(self.lines))]
        return [(-y, 0.0) if self.is_turned else (0.0, y) for y in levels]


def shapes(name: str, area: str, loads: Sequence[str]) -> list[Shape]:
    """Give the ways in which a cell's label may stand, the usual ones first.

    Parameters
    ----------
    name, area : str
        Mark and area of the cell; no area for a name alone.
    loads : sequence of str
        By case.

    Returns
    -------
    list of Shape
    """
    if not area:
        blocks: list[tuple[str, ...]] = [(name,)]
    else:
        blocks = [
            (f"{name}: {area}", *loads),
            (name, area, *loads),
            (f"{name}: {area}", "  ".join(loads)),
            ("  ".join((f"{name}: {area}", *loads)),),
        ]
    blocks = list(dict.fromkeys(blocks))
    return [Shape(lines=lines, is_turned=turned) for turned in (False, True) for lines in blocks]


class PlanLabels:
    """Finds places for labels, each within its own rings.

    Parameters
    ----------
    drawn : DrawnGround
        The drafter's drawing about the plan.
    height : float
        Of texts [length].
    """

    def __init__(self, drawn: DrawnGround, height: float) -> None:
        self._height = height
        self._taken = drawn.rows

    def add_outline(self, rings: Sequence[Sequence[Point]]) -> None:
        """Keep labels to come off outlines that are drawn."""
        self._taken = np.concatenate((self._taken, turned_boxes.of_lines(_sides(rings))))

    def place(
        self, ways: Sequence[Shape], rings: Sequence[Sequence[Point]], wanted: Point
    ) -> tuple[Shape, Point] | None:
        """Find shape and middle of a label, and keep its place free from then on.

        Parameters
        ----------
        ways : sequence of Shape
            In which the label may stand, the usual ones first.
        rings : sequence of rings
            That it must stand within, openings too.
        wanted : Point
            Where it would best stand.

        Returns
        -------
        shape, middle, or None
            None where it fits nowhere.
        """
        sides = _sides(rings)
        taken = self._within_reach(sides)
        low, high = sides[:, :2].min(axis=0), sides[:, :2].max(axis=0)
        best: tuple[float, Shape, Point] | None = None
        for rank, shape in enumerate(ways):
            half = 0.5 * np.array(shape.size(self._height))
            least = _LATER * rank + _TURNED * shape.is_turned
            if (high - low < 2 * half).any() or (best is not None and best[0] <= least):
                continue
            middles = self._grid(low + half, high - half, np.array(wanted))
            rows = turned_boxes.of_boxes(np.hstack((middles - half, middles + half)))
            fits = _within(middles, sides) & ~self._is_hit(rows, turned_boxes.of_lines(sides))
            middles, rows = middles[fits], rows[fits]
            middles = middles[~self._is_hit(rows, taken)]
            if not len(middles):
                continue
            # Rounded, so that of equally good places the first wins on every machine.
            away = np.round(np.hypot(*(middles - wanted).T) / self._height, 6)
            k = int(np.argmin(away))
            cost = least + _AWAY * float(away[k])
            if best is None or cost < best[0]:
                best = (cost, shape, (float(middles[k, 0]), float(middles[k, 1])))
        if best is None:
            return None
        _, shape, at = best
        half = 0.5 * np.array(shape.size(self._height))
        box = np.concatenate((np.array(at) - half, np.array(at) + half))[None, :]
        self._taken = np.concatenate((self._taken, turned_boxes.of_boxes(box)))
        return shape, at

    def _grid(self, low: Floats, high: Floats, wanted: Floats) -> Floats:
        """Give places over a rectangle, the one wanted, as near as may be, first."""
        counts = np.clip(np.ceil((high - low) / self._height), *_PLACES).astype(np.int64)
        x, y = (np.linspace(low[k], high[k], int(counts[k])) for k in (0, 1))
        places = np.stack(np.meshgrid(x, y), axis=-1).reshape(-1, 2)
        return np.asarray(np.concatenate((np.clip(wanted, low, high)[None, :], places)))

    def _within_reach(self, sides: Floats) -> Floats:
        """Give what stands, or may stand, within some rings."""
        ends = np.concatenate((sides[:, :2], sides[:, 2:]))
        low, high = turned_boxes.reaches(self._taken)
        near = (low < ends.max(axis=0)) & (high > ends.min(axis=0))
        return np.asarray(self._taken[near.all(axis=1)])

    def _is_hit(self, rows: Floats, taken: Floats) -> NDArray[np.bool_]:
        """Say which boxes something stands in."""
        touch = 1e-6 * self._height
        hits = np.zeros(len(rows), dtype=np.bool_)
        for k in range(0, len(taken), _AT_ONCE):
            some = taken[k : k + _AT_ONCE]
            hits |= turned_boxes.touching(rows[:, None, :], some[None, :, :], touch).any(axis=1)
        return hits


def _sides(rings: Sequence[Sequence[Point]]) -> Floats:
    """Give the sides of rings, (n, 4)."""
    return np.array([(*a, *b) for r in rings for a, b in zip(r, (*r[1:], r[0]), strict=True)])


def _within(points: Floats, sides: Floats) -> NDArray[np.bool_]:
    """Say which points an odd number of sides lies right of."""
    x, y = points[:, None, 0], points[:, None, 1]
    x0, y0, x1, y1 = sides.T
    spans = (y0 > y) != (y1 > y)
    rise = np.where(y1 == y0, 1.0, y1 - y0)
    right = x < x0 + (y - y0) / rise * (x1 - x0)
    return np.asarray((spans & right).sum(axis=1) % 2 == 1)
