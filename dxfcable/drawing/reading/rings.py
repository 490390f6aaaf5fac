"""Closed outlines: how large they are, and what lies in them."""

from __future__ import annotations

import math
from itertools import pairwise
from typing import TYPE_CHECKING

from dxfcable.drawing.reading.geometry import to_polyline

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Point


def enclosed(ring: Sequence[Point]) -> float:
    """Give the area within a ring whose last corner joins the first.

    Examples
    --------
    >>> enclosed([(0, 0), (4, 0), (4, 2), (0, 2)])
    8.0
    """
    x0, y0 = ring[0]  # about a corner, so that large coordinates cost no digits
    closed = [(x - x0, y - y0) for x, y in (*ring, ring[0])]
    return 0.5 * abs(math.fsum(a[0] * b[1] - b[0] * a[1] for a, b in pairwise(closed)))


def holds(ring: Sequence[Point], point: Point, tolerance: float) -> bool:
    """Say whether a point lies within a ring, or on it within a tolerance."""
    closed = (*ring, ring[0])
    x, y = point
    inside = False
    for (x0, y0), (x1, y1) in pairwise(closed):
        if (y0 > y) != (y1 > y) and x < x0 + (y - y0) / (y1 - y0) * (x1 - x0):
            inside = not inside
    return inside or to_polyline(point, closed) <= tolerance


def holds_all(ring: Sequence[Point], points: Sequence[Point], tolerance: float) -> bool:
    """Say whether all of some points lie within a ring."""
    return all(holds(ring, point, tolerance) for point in points)


def innermost(rings: Sequence[Sequence[Point]], points: Sequence[Point], tolerance: float) -> int:
    """Find the smallest ring that holds all of some points.

    Parameters
    ----------
    rings : sequence of rings
    points : sequence of Point
        One or more.
    tolerance : float

    Returns
    -------
    int
        Position of the ring, -1 where none holds them, -2 where rings that do not lie in each
        other do.
    """
    found = [k for k, ring in enumerate(rings) if holds_all(ring, points, tolerance)]
    found.sort(key=lambda k: enclosed(rings[k]))
    for inner, outer in pairwise(found):
        if not holds_all(rings[outer], rings[inner], tolerance):
            return -2
    return found[0] if found else -1
