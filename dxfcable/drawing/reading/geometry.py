"""Distances and touching in the plane of the drawing."""

from __future__ import annotations

import math
from itertools import pairwise
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Point


def distance(a: Point, b: Point) -> float:
    """Give the distance of two points."""
    return math.hypot(a[0] - b[0], a[1] - b[1])


def to_segment(point: Point, start: Point, end: Point) -> float:
    """Give the distance of a point from a straight line between two points."""
    dx, dy = end[0] - start[0], end[1] - start[1]
    square = dx * dx + dy * dy
    if square == 0:
        return distance(point, start)
    along = ((point[0] - start[0]) * dx + (point[1] - start[1]) * dy) / square
    along = min(1.0, max(0.0, along))
    return distance(point, (start[0] + along * dx, start[1] + along * dy))


def to_polyline(point: Point, vertices: Sequence[Point]) -> float:
    """Give the distance of a point from a polyline."""
    if len(vertices) == 1:
        return distance(point, vertices[0])
    return min(to_segment(point, a, b) for a, b in pairwise(vertices))


def between(first: Sequence[Point], second: Sequence[Point]) -> float:
    """Give the distance of two polylines that do not cross."""
    return min(
        min(to_polyline(p, second) for p in first), min(to_polyline(p, first) for p in second)
    )


def ordinate(vertices: Sequence[Point], x: float) -> float:
    """Give y at x of a polyline that runs to the right; its ends are carried on level."""
    if x <= vertices[0][0]:
        return vertices[0][1]
    for (x0, y0), (x1, y1) in pairwise(vertices):
        if x <= x1 and x1 > x0:
            return y0 + (y1 - y0) * (x - x0) / (x1 - x0)
    return vertices[-1][1]


def runs_to_the_right(vertices: Sequence[Point], tolerance: float) -> bool:
    """Say whether each vertex lies to the right of the one before by more than a tolerance."""
    return all(b[0] - a[0] > tolerance for a, b in pairwise(vertices))


class Places:
    """Points by place, so that one within a tolerance is found without trying all.

    Parameters
    ----------
    tolerance : float
        Zero finds equal points only.
    """

    def __init__(self, tolerance: float) -> None:
        self._tolerance = tolerance
        self._cells: dict[tuple[int | float, int | float], list[tuple[Point, int]]] = {}

    def _cell(self, point: Point) -> tuple[int | float, int | float]:
        if self._tolerance <= 0:
            return point
        return math.floor(point[0] / self._tolerance), math.floor(point[1] / self._tolerance)

    def add(self, point: Point, position: int) -> None:
        """Remember a point under a position of the caller's."""
        self._cells.setdefault(self._cell(point), []).append((point, position))

    def find(self, point: Point) -> int:
        """Give the position of the first point added within the tolerance, -1 for none."""
        i, j = self._cell(point)
        found = [
            position
            for di in (-1, 0, 1)
            for dj in (-1, 0, 1)
            for other, position in self._cells.get((i + di, j + dj), ())
            if distance(point, other) <= self._tolerance
        ]
        return min(found, default=-1)


def nearest(point: Point, others: Sequence[Point]) -> tuple[int, float]:
    """Give the position of the nearest of some points, and its distance; -1 for none."""
    best, least = -1, math.inf
    for i, other in enumerate(others):
        gap = distance(point, other)
        if gap < least:
            best, least = i, gap
    return best, least
