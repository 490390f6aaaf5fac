"""What of a plan is nearest to each point, or on its strip of a one-way deck: convex rings."""

from __future__ import annotations

import math
from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

Point = tuple[float, float]
Box = tuple[float, float, float, float]


@dataclass(frozen=True, slots=True, kw_only=True)
class SupportingLine:
    """Points on one line across a one-way deck; `at` is its place along the deck [length]."""

    at: float
    points: tuple[int, ...]


def nearest(points: Mapping[int, Point], box: Box) -> dict[int, list[Point]]:
    """Give the part of a rectangle that is nearest to each point.

    Parameters
    ----------
    points : mapping of int to Point
        Distinct places [length].
    box : tuple of float
        xmin, ymin, xmax, ymax [length]; holds all points.

    Returns
    -------
    dict of int to list of Point
        Corners of each cell, counter-clockwise.
    """
    x0, y0, x1, y1 = box
    cells = {}
    for i, at in points.items():
        ring = [(x0, y0), (x1, y0), (x1, y1), (x0, y1)]
        others = sorted((math.dist(at, p), j) for j, p in points.items() if j != i)
        for gap, j in others:
            if gap > 2 * max(math.dist(at, corner) for corner in ring):
                break  # its bisector, and those of all further points, pass outside
            ring = _nearer(ring, at, points[j])
        cells[i] = ring
    return cells


def _nearer(ring: list[Point], at: Point, other: Point) -> list[Point]:
    """Cut a convex ring along a bisector and keep the side of `at` (Sutherland, Hodgman 1974)."""
    dx, dy = other[0] - at[0], other[1] - at[1]
    half = 0.5 * (dx * dx + dy * dy)
    over = [(x - at[0]) * dx + (y - at[1]) * dy - half for x, y in ring]
    kept: list[Point] = []
    for k, (point, beyond) in enumerate(zip(ring, over, strict=True)):
        before, was = ring[k - 1], over[k - 1]
        if (beyond > 0) != (was > 0):
            part = was / (was - beyond)
            x = before[0] + part * (point[0] - before[0])
            kept.append((x, before[1] + part * (point[1] - before[1])))
        if beyond <= 0:
            kept.append(point)
    return kept


def strips(points: Mapping[int, Point], box: Box, tolerance: float) -> dict[int, list[Point]]:
    """Give the rectangle of a one-way deck that goes to each point.

    Parameters
    ----------
    points : mapping of int to Point
        Places along and across the deck [length].
    box : tuple of float
        First and last place along, first and last across, in the order of `nearest` [length].
    tolerance : float
        Points no further apart along the deck are on one supporting line [length].

    Returns
    -------
    dict of int to list of Point
        Corners of each cell, counter-clockwise; none for a point alone on its line where
        others are not.
    """
    x0, y0, x1, y1 = box
    lines = carrying(supporting_lines(points, tolerance))
    cells = {}
    for line, (left, right) in zip(lines, _halves([s.at for s in lines], x0, x1), strict=True):
        order = sorted(line.points, key=lambda i: points[i][1])
        across = _halves([points[i][1] for i in order], y0, y1)
        for i, (low, high) in zip(order, across, strict=True):
            cells[i] = [(left, low), (right, low), (right, high), (left, high)]
    return cells


def supporting_lines(points: Mapping[int, Point], tolerance: float) -> tuple[SupportingLine, ...]:
    """Group points into lines across a deck, in order along it; also those of a single point."""
    groups: list[list[int]] = []
    for i in sorted(points, key=lambda i: points[i]):
        if groups and points[i][0] - points[groups[-1][0]][0] <= tolerance:
            groups[-1].append(i)
        else:
            groups.append([i])
    # The middle between first and last: exact where all are equal, as a mean is not.
    return tuple(
        SupportingLine(at=0.5 * (points[g[0]][0] + points[g[-1]][0]), points=tuple(sorted(g)))
        for g in groups
    )


def carrying(lines: Sequence[SupportingLine]) -> tuple[SupportingLine, ...]:
    """Leave out lines of a single point, unless all are: those points are on no beam."""
    if any(len(line.points) > 1 for line in lines):
        return tuple(line for line in lines if len(line.points) > 1)
    return tuple(lines)


def _halves(at: Sequence[float], first: float, last: float) -> list[tuple[float, float]]:
    """Give the reach of each of some places in order: to half distance, at the ends all of it."""
    edges = [first, *(0.5 * (a + b) for a, b in pairwise(at)), last]
    return list(pairwise(edges))
