"""Loaded areas of a plan shared out to the points that carry them.

This module alone needs shapely; import it only where there is a plan.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import shapely

from dxfcable.statics.tributary_cells import SupportingLine, nearest, strips, supporting_lines

if TYPE_CHECKING:
    from collections.abc import Sequence

    from shapely.geometry.base import BaseGeometry

Point = tuple[float, float]
Ring = tuple[Point, ...]

_SAME = 1e-9  # relative: sum of cells against net area
_SLIVER = 1e-12  # of the net area: what rounding leaves along an edge
_STRAIGHT = 1e-9  # of the area's size: a vertex so near to the line of its neighbours is none


@dataclass(frozen=True, slots=True, kw_only=True)
class LoadedArea:
    """A loaded area in plan.

    Attributes
    ----------
    outline : tuple of Point
        Corners in order, the first not repeated [length].
    holes : tuple of tuple of Point
        Openings; they may touch or overlap each other.
    pressures : tuple of (str, float)
        Case and load on the plan area [force/length^2], down positive.
    direction : Point or None
        Any vector along which a one-way deck spans; None for nearest-point cells.
    """

    outline: Ring
    holes: tuple[Ring, ...] = ()
    pressures: tuple[tuple[str, float], ...] = ()
    direction: Point | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Cell:
    """What one point carries of one area.

    Attributes
    ----------
    point : int
        Position of the point in the list given.
    rings : tuple of tuple of Point
        Outer rings counter-clockwise, holes clockwise, each from its lowest corner in x (then
        y) on, without corners that lie on a straight side [length].
    area : float
        Of the rings [length^2].
    loads : tuple of (str, float)
        Case and pressure times area [force].
    """

    point: int
    rings: tuple[Ring, ...]
    area: float
    loads: tuple[tuple[str, float], ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Shares:
    """One area shared out.

    Attributes
    ----------
    cells : tuple of Cell
        One for each point on the area, in the order of the points.
    net_area : float
        Of the outline less holes [length^2].
    sum_of_areas : float
        Of all cells [length^2]; equal to the net area but for rounding.
    sums : tuple of (str, float)
        Case and sum of the cells' loads [force].
    lines : tuple of SupportingLine
        Of a one-way deck, in order along it; also those of a point alone.
    """

    cells: tuple[Cell, ...]
    net_area: float
    sum_of_areas: float
    sums: tuple[tuple[str, float], ...]
    lines: tuple[SupportingLine, ...] = ()


def share_area(area: LoadedArea, points: Sequence[Point], *, tolerance: float) -> Shares:
    """Share a loaded area out to the points that stand on it.

    Parameters
    ----------
    area : LoadedArea
    points : sequence of Point
        All points of the plan [length]; those off the outline by more than the tolerance get
        nothing of this area. A point in a hole counts: a hanger may pass through a slot.
    tolerance : float
        Distance within which points touch the outline or a common line [length], >= 0.

    Returns
    -------
    Shares

    Raises
    ------
    ValueError
        If the outline crosses itself or encloses nothing, no point stands on the area, two
        points stand at one place, or the cells do not sum up to the net area within 1e-9.

    Notes
    -----
    Without direction each spot belongs to its nearest point: cells are bounded by the
    perpendicular bisectors between points, clipped to the net area (Voronoi 1908; for
    tributary areas common practice). On an orthogonal grid of points these are the usual
    strips to half distance.

    With direction the deck spans one way. Points on a common line across the direction form a
    supporting line; each line takes the strip to half distance, measured along the direction,
    to the next lines, and along the line its points share the strip at half distance to each
    other. Where at least one line has two points or more, a point alone on its line is on no
    beam that carries the deck and gets nothing; where every point is alone (one row of
    hangers), each stands for its line. Common practice; from memory.

    In both the last strip or cell reaches to the edge: an overhang belongs to the last point.
    Each cell's area is right by itself and never scaled to fit a sum. Continuity over supports
    is left out, as tributary areas do.

    Examples
    --------
    >>> deck = LoadedArea(outline=((0, 0), (9, 0), (9, 2), (0, 2)), pressures=(("D", 3.0),))
    >>> [c.loads for c in share_area(deck, [(2, 1), (6, 1)], tolerance=1e-6).cells]
    [(('D', 24.0),), (('D', 30.0),)]
    """
    _check_numbers(area, points)
    origin = area.outline[0] if area.outline else (0.0, 0.0)
    frame = _Frame(origin, area.direction)
    net = _net_polygon(frame, area)
    whole = shapely.Polygon([frame.into(p) for p in area.outline])
    placed = {
        i: frame.into(p)
        for i, p in enumerate(points)
        if whole.distance(shapely.Point(frame.into(p))) <= tolerance
    }
    if not placed:
        message = "no point stands on the area"
        raise ValueError(message)
    _check_apart(placed, points, tolerance)
    x0, y0, x1, y1 = whole.bounds
    by = (x1 - x0) + (y1 - y0)
    box = (x0 - by, y0 - by, x1 + by, y1 + by)
    found = nearest(placed, box) if area.direction is None else strips(placed, box, tolerance)
    cells = []
    for i in placed:
        part = shapely.intersection(net, shapely.Polygon(found.get(i)))
        loads = tuple((case, pressure * part.area) for case, pressure in area.pressures)
        rings = _rings(frame, part, net)
        cells.append(Cell(point=i, rings=rings, area=part.area, loads=loads))
    lines = () if area.direction is None else supporting_lines(placed, tolerance)
    return _summed(area, tuple(cells), net.area, lines)


def overlap(one: LoadedArea, other: LoadedArea) -> float:
    """Give the area that two loaded areas share, openings taken off [length^2].

    Raises
    ------
    ValueError
        If an outline crosses itself or encloses nothing.
    """
    frame = _Frame(one.outline[0], None)
    common = _net_polygon(frame, one).intersection(_net_polygon(frame, other))
    return float(common.area)


class _Frame:
    """Axes along and across the deck from a corner of the area, so that digits are not lost."""

    def __init__(self, origin: Point, direction: Point | None) -> None:
        self._origin = origin
        x, y = direction or (1.0, 0.0)
        length = math.hypot(x, y)
        if not length > 0:
            message = "the direction of the deck has no length"
            raise ValueError(message)
        self._x, self._y = x / length, y / length

    def into(self, point: Point) -> Point:
        """Give a point of the plan by its places along and across."""
        x, y = point[0] - self._origin[0], point[1] - self._origin[1]
        return x * self._x + y * self._y, y * self._x - x * self._y

    def back(self, point: Point) -> Point:
        """Give the point of the plan."""
        s, t = point
        x, y = s * self._x - t * self._y, s * self._y + t * self._x
        return x + self._origin[0], y + self._origin[1]


def _check_numbers(area: LoadedArea, points: Sequence[Point]) -> None:
    """Refuse what is no number, before anything is computed with it."""
    numbers = [v for ring in (area.outline, *area.holes, points) for p in ring for v in p]
    numbers += [pressure for _, pressure in area.pressures]
    if not all(map(math.isfinite, numbers)):
        message = "a coordinate or pressure is no finite number"
        raise ValueError(message)


def _net_polygon(frame: _Frame, area: LoadedArea) -> BaseGeometry:
    """Give the outline less its holes."""
    rings = []
    for ring, name in ((area.outline, "outline"), *((hole, "opening") for hole in area.holes)):
        polygon = shapely.Polygon([frame.into(p) for p in ring]) if len(ring) > 2 else None
        if polygon is None or polygon.convex_hull.area == 0:
            message = f"the {name} encloses nothing"
            raise ValueError(message)
        if not polygon.is_valid:
            message = f"the {name} crosses or touches itself"
            raise ValueError(message)
        rings.append(polygon)
    net = rings[0].difference(shapely.union_all(rings[1:])) if area.holes else rings[0]
    if net.area <= _SLIVER * rings[0].area:
        message = "the openings leave nothing of the area"
        raise ValueError(message)
    return net


def _check_apart(placed: dict[int, Point], points: Sequence[Point], tolerance: float) -> None:
    """Refuse two points at one place: neither would be the nearest."""
    order = sorted(placed, key=lambda i: placed[i])
    for k, i in enumerate(order):
        for j in order[k + 1 :]:
            if placed[j][0] - placed[i][0] > tolerance:
                break
            if math.dist(placed[i], placed[j]) <= tolerance:
                message = f"two points stand at ({points[i][0]:g}, {points[i][1]:g})"
                raise ValueError(message)


def _rings(frame: _Frame, part: BaseGeometry, net: BaseGeometry) -> tuple[Ring, ...]:
    """Give the rings of a part in an order that does not depend on how it was cut."""
    x0, y0, x1, y1 = net.bounds
    straight = _STRAIGHT * math.hypot(x1 - x0, y1 - y0)
    found = []
    for piece in shapely.get_parts(part):
        if not isinstance(piece, shapely.Polygon) or piece.area <= _SLIVER * net.area:
            continue
        inner = sorted(_ring(frame, hole, straight, is_hole=True) for hole in piece.interiors)
        outer = _ring(frame, piece.exterior, straight, is_hole=False)
        found.append((outer, *(ring for ring in inner if len(ring) > 2)))
    return tuple(ring for piece in sorted(found) for ring in piece)


def _ring(frame: _Frame, ring: shapely.LinearRing, straight: float, *, is_hole: bool) -> Ring:
    """Give a ring's true corners, turned the usual way, from the lowest on."""
    corners = [(float(x), float(y)) for x, y in ring.coords[:-1]]
    if bool(ring.is_ccw) == is_hole:
        corners.reverse()
    kept = [
        frame.back(corner)
        for k, corner in enumerate(corners)
        if _stands_off(corner, corners[k - 1], corners[(k + 1) % len(corners)]) > straight
    ]
    start = kept.index(min(kept)) if kept else 0
    return tuple(kept[start:] + kept[:start])


def _stands_off(point: Point, before: Point, after: Point) -> float:
    """Give the distance of a point from the line through its neighbours."""
    dx, dy = after[0] - before[0], after[1] - before[1]
    length = math.hypot(dx, dy)
    if length == 0:
        return math.dist(point, before)
    return abs((point[0] - before[0]) * dy - (point[1] - before[1]) * dx) / length


def _summed(
    area: LoadedArea,
    cells: tuple[Cell, ...],
    net_area: float,
    lines: tuple[SupportingLine, ...],
) -> Shares:
    """Sum up areas and loads; refuse where cells and net area differ."""
    total = math.fsum(cell.area for cell in cells)
    if abs(total - net_area) > _SAME * net_area:
        message = f"the cells sum up to {total!r}, the net area is {net_area!r}"
        raise ValueError(message)
    sums = tuple(
        (case, math.fsum(cell.loads[k][1] for cell in cells))
        for k, (case, _) in enumerate(area.pressures)
    )
    return Shares(cells=cells, net_area=net_area, sum_of_areas=total, sums=sums, lines=lines)
