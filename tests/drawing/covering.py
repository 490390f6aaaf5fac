"""How much of boxes and lines lies on each other: by clipping, unlike the painter's own tests."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.labels import text_corners

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.items import TextItem
    from dxfcable.model import Point


def common_area(one: Sequence[Point], other: Sequence[Point]) -> float:
    """Give the area that two convex polygons share, both counter-clockwise (Sutherland-Hodgman)."""
    left = list(one)
    for start, end in zip(other, [*other[1:], other[0]], strict=True):
        before, left = left, []
        for a, b in zip(before, before[1:] + before[:1], strict=True):
            of_a, of_b = _side(start, end, a), _side(start, end, b)
            if of_a >= 0.0:
                left.append(a)
            if (of_a > 0.0) != (of_b > 0.0) and of_a != of_b:
                share = of_a / (of_a - of_b)
                left.append((a[0] + share * (b[0] - a[0]), a[1] + share * (b[1] - a[1])))
        if not left:
            return 0.0
    pairs = zip(left, left[1:] + left[:1], strict=True)
    return 0.5 * abs(sum(a[0] * b[1] - b[0] * a[1] for a, b in pairs))


def common_length(line: tuple[Point, Point], polygon: Sequence[Point]) -> float:
    """Give the length of a line within a convex polygon, counter-clockwise (Cyrus-Beck)."""
    enter, leave = 0.0, 1.0
    for start, end in zip(polygon, [*polygon[1:], polygon[0]], strict=True):
        of_a, of_b = _side(start, end, line[0]), _side(start, end, line[1])
        if of_a < 0.0 and of_b < 0.0:
            return 0.0
        if of_a < 0.0:
            enter = max(enter, of_a / (of_a - of_b))
        elif of_b < 0.0:
            leave = min(leave, of_a / (of_a - of_b))
    return max(0.0, leave - enter) * math.dist(*line)


def _side(start: Point, end: Point, point: Point) -> float:
    return (end[0] - start[0]) * (point[1] - start[1]) - (end[1] - start[1]) * (point[0] - start[0])


def distance(corners: Sequence[Point], line: tuple[Point, Point]) -> float:
    """Give the least distance of a box from a line, both being apart."""
    sides = list(zip(corners, [*corners[1:], corners[0]], strict=True))
    return min(
        *(_from_line(corner, line) for corner in corners),
        *(_from_line(end, side) for end in line for side in sides),
    )


def _from_line(point: Point, line: tuple[Point, Point]) -> float:
    (ax, ay), (bx, by) = line
    square = (bx - ax) ** 2 + (by - ay) ** 2
    share = 0.0
    if square > 0.0:
        share = ((point[0] - ax) * (bx - ax) + (point[1] - ay) * (by - ay)) / square
        share = min(1.0, max(0.0, share))
    return math.dist(point, (ax + share * (bx - ax), ay + share * (by - ay)))


def covered_texts(texts: Sequence[TextItem]) -> list[tuple[str, str]]:
    """List the pairs of texts whose boxes share more than a hair."""
    corners = [text_corners(item) for item in texts]
    boxes = [_around(c) for c in corners]
    found = []
    for i, item in enumerate(texts):
        for k in range(i):
            if not _apart(boxes[i], boxes[k]):
                shared = common_area(corners[i], corners[k])
                if shared > 1e-4 * item.height**2:
                    found.append((texts[k].id, item.id))
    return found


def struck_texts(
    texts: Sequence[TextItem], lines: Sequence[tuple[float, float, float, float]]
) -> list[str]:
    """List the texts that a line runs through for more than a hair."""
    found = []
    for item in texts:
        corners = text_corners(item)
        box = _around(corners)
        for ax, ay, bx, by in lines:
            reach = (min(ax, bx), min(ay, by), max(ax, bx), max(ay, by))
            if _apart(box, reach):
                continue
            if common_length(((ax, ay), (bx, by)), corners) > 1e-3 * item.height:
                found.append(item.id)
                break
    return found


def boxed_texts(
    texts: Sequence[TextItem], boxes: Sequence[tuple[float, float, float, float]]
) -> list[str]:
    """List the texts that stand on an upright box."""
    found = []
    for item in texts:
        corners = text_corners(item)
        for x0, y0, x1, y1 in boxes:
            if _apart(_around(corners), (x0, y0, x1, y1)):
                continue
            polygon = ((x0, y0), (x1, y0), (x1, y1), (x0, y1))
            if common_area(corners, polygon) > 1e-4 * item.height**2:
                found.append(item.id)
                break
    return found


Box = tuple[float, float, float, float]


def _around(corners: Sequence[Point]) -> Box:
    across, up = [x for x, _ in corners], [y for _, y in corners]
    return min(across), min(up), max(across), max(up)


def _apart(a: Box, b: Box) -> bool:
    return a[0] > b[2] or b[0] > a[2] or a[1] > b[3] or b[1] > a[3]
