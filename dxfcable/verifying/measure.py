"""What the linework of a span says: nodes on the profile, pole, load line, forces to scale.

Of each point of the force diagram several lines tell where it is: two steps of the load line
and a ray. The place on which most agree counts, so that one line that was moved shows as that
line and spoils nothing else.
"""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.model import Point
    from dxfcable.verifying.sheet import Sheet


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SpanFigures:
    """One span as measured; all lines are None where they are missing.

    Attributes
    ----------
    prefix, number : str, int
        First part of ids, number of the span.
    first_ray, first_load : int
        Numbers that its rays and load-line steps begin with.
    curve : tuple of Point
        Vertices of the profile from left to right.
    places : tuple of int
        Which of them are nodes.
    per_piece : int
        Rays a piece: two with weight.
    pole : Point or None
        On which most rays agree.
    joints : tuple of (Point or None)
        Places on the load line from the first letter on.
    scale : float
        Force by length of the drawing.
    grain : float
        Error of a coordinate [length].
    """

    prefix: str
    number: int
    first_ray: int
    first_load: int
    curve: tuple[Point, ...]
    places: tuple[int, ...]
    per_piece: int
    pole: Point | None
    joints: tuple[Point | None, ...]
    scale: float
    grain: float
    profile: IssuedEntity
    rays: tuple[IssuedEntity | None, ...]
    steps: tuple[IssuedEntity | None, ...]
    closing_ray: IssuedEntity | None

    @property
    def nodes(self) -> tuple[Point, ...]:
        """Supports and load points."""
        return tuple(self.curve[k] for k in self.places)

    @property
    def pieces(self) -> int:
        """How many pieces there are."""
        return len(self.places) - 1

    @property
    def is_whole(self) -> bool:
        """Whether every point of the force diagram is known."""
        return self.pole is not None and all(j is not None for j in self.joints)

    @property
    def force_error(self) -> float:
        """What rounding makes of a force [force]."""
        return 4.0 * self.grain * self.scale

    @property
    def pull(self) -> float:
        """Pole distance to scale [force]."""
        pole, first = self.pole, self.joints[0]
        return (pole[0] - first[0]) * self.scale if pole and first else math.nan

    def vertical(self, piece: int, end: int) -> float:
        """Vertical force in a piece at its left (0) or right (1) end [force]."""
        joint = self._joint(piece, end)
        return (self.pole[1] - joint[1]) * self.scale if self.pole and joint else math.nan

    def tension(self, piece: int, end: int) -> float:
        """Length of a ray to scale [force]."""
        joint = self._joint(piece, end)
        return math.dist(self.pole, joint) * self.scale if self.pole and joint else math.nan

    def largest(self, piece: int) -> float:
        """Larger tension of a piece [force]."""
        return max(self.tension(piece, 0), self.tension(piece, 1))

    def _joint(self, piece: int, end: int) -> Point | None:
        return self.joints[self.per_piece * piece + (end if self.per_piece == 2 else 0)]

    def side(self, piece: int) -> tuple[Point, Point]:
        """Give the ends of a piece on the profile."""
        return self.curve[self.places[piece]], self.curve[self.places[piece + 1]]


def measure_span(
    sheet: Sheet,
    prefix: str,
    number: int,
    *,
    stations: Sequence[float],
    per_piece: int,
    scale: float,
    first_ray: int,
    first_load: int,
) -> SpanFigures | None:
    """Measure one span; None without a profile.

    Parameters
    ----------
    stations : sequence of float
        Where supports and load points are drawn, from left to right [length]; empty where the
        drafter's drawing does not read.
    per_piece, first_ray, first_load : int
        As in `SpanFigures`.
    scale : float
        Force by length of the drawing.
    """
    profile = sheet.named.get(f"{prefix}/profile/{number}")
    if profile is None or len(profile.points) < 2:
        return None
    curve = profile.points if profile.start[0] <= profile.end[0] else profile.points[::-1]
    kinks = len(sheet.numbers(f"{prefix}/ray/")) // 2 - 1 if per_piece == 2 else 0
    places = _places(curve, stations, per_piece, sheet.grain, kinks)
    count = per_piece * (len(places) - 1)
    named = sheet.named
    rays = tuple(named.get(f"{prefix}/ray/{first_ray + i}") for i in range(count))
    steps = tuple(named.get(f"{prefix}/load-line/{first_load + i}") for i in range(count - 1))
    closing = named.get(f"{prefix}/closing-ray/{number}")
    ring = named.get(f"{prefix}/pole/{number}")
    lines = [*rays, closing]
    near = 3.0 * sheet.grain
    pole = agreed([e.start for e in lines if e] + ([ring.start] if ring else []), near)
    ends = [(a, b if per_piece == 1 else a + 1) for a, b in itertools.pairwise(places)]
    starts = [(b - 1, b) for _, b in itertools.pairwise(places)] if per_piece == 2 else []
    sides = [(curve[a], curve[b]) for a, b in sorted((*ends, *starts))]
    return SpanFigures(
        prefix=prefix,
        number=number,
        first_ray=first_ray,
        first_load=first_load,
        curve=curve,
        places=places,
        per_piece=per_piece,
        pole=pole,
        joints=_joints(rays, steps, pole, sides, near),
        scale=scale,
        grain=sheet.grain,
        profile=profile,
        rays=rays,
        steps=steps,
        closing_ray=closing,
    )


def _places(
    curve: Sequence[Point], stations: Sequence[float], per_piece: int, grain: float, kinks: int
) -> tuple[int, ...]:
    """Find the nodes among the vertices: at the stations, else where the curve has its kinks."""
    last = len(curve) - 1
    is_polygon = per_piece == 1
    if is_polygon and (not stations or len(stations) == len(curve)):
        return tuple(range(len(curve)))
    if not stations:
        inner = sorted(range(1, last), key=lambda i: -_kink(curve, i))
        return 0, *sorted(inner[:kinks]), last
    found = [0]
    for k in range(1, len(stations) - 1):
        x = stations[k]
        room = 0.5 * min(x - stations[k - 1], stations[k + 1] - x)
        exact = [i for i in range(1, last) if abs(curve[i][0] - x) <= 3.0 * grain]
        near = [i for i in range(1, last) if abs(curve[i][0] - x) <= room]
        if exact:
            found.append(exact[0])
        elif near:
            found.append(max(near, key=lambda i: _kink(curve, i)))
    return (*dict.fromkeys(found), last)


def _kink(curve: Sequence[Point], at: int) -> float:
    """Tell how sharply a polyline turns at a vertex."""
    (ax, ay), (bx, by), (cx, cy) = curve[at - 1 : at + 2]
    return abs(math.atan2(cy - by, cx - bx) - math.atan2(by - ay, bx - ax))


def _joints(
    rays: Sequence[IssuedEntity | None],
    steps: Sequence[IssuedEntity | None],
    pole: Point | None,
    sides: Sequence[tuple[Point, Point]],
    near: float,
) -> tuple[Point | None, ...]:
    """Find each place on the load line; where lines disagree by halves, the profile decides."""
    axis = agreed([(e.end[0], 0.0) for e in rays if e], near)
    found: list[Point | None] = []
    for k, ray in enumerate(rays):
        told = [ray.end] if ray else []
        before = steps[k - 1] if k else None
        after = steps[k] if k < len(steps) else None
        told += [before.end] if before else []
        told += [after.start] if after else []

        def fits(point: Point, side: int = k) -> float:
            off = abs(point[0] - axis[0]) if axis else 0.0
            return off + (miss(pole, point, sides[side]) if pole and sides else 0.0)

        place = agreed(told, near, fits)
        if place is None and found:
            place = found[-1]  # a load of zero has no step
        found.append(place)
    return tuple(found)


def miss(pole: Point, end: Point, side: tuple[Point, Point]) -> float:
    """Give the distance of a ray's end from the parallel to a side through the pole."""
    (ax, ay), (bx, by) = side
    length = math.hypot(bx - ax, by - ay)
    across, up = end[0] - pole[0], end[1] - pole[1]
    return abs(across * (by - ay) - up * (bx - ax)) / length if length else math.nan


def agreed(
    told: Sequence[Point], near: float, cost: Callable[[Point], float] | None = None
) -> Point | None:
    """Give the point on which most agree, the one of least cost among equals."""
    if not told:
        return None

    def rank(point: Point) -> tuple[int, float]:
        return -sum(math.dist(point, other) <= near for other in told), cost(point) if cost else 0.0

    return min(told, key=rank)
