"""Ids for the lines of force diagrams whose marks are gone.

Rays start at their pole and run parallel to the sides of the profile; the load line runs from
one ray's end to the next. That names them without any number of the drawing.
"""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.pairing import pair

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.drawing.recovery.by_place import PlacedSpan
    from dxfcable.model import Point

_TOUCH = 1e-5  # of the size of a diagram
_APART = 1e6  # cost of what cannot be
_OTHER = 0.01  # cost of a title that names another cable, in radians that rays are off
TITLE = "FORCE DIAGRAM "


@dataclass(frozen=True, slots=True, kw_only=True)
class _Star:
    """Lines that start at one point: the rays of a diagram and its closing ray."""

    pole: Point
    lines: tuple[IssuedEntity, ...]

    @property
    def angles(self) -> list[float]:
        """Slopes that parallels on the profile would have, as angles."""
        return sorted(_angle(self.pole, line.end) for line in self.lines if not line.is_chain)


def name_diagrams(
    spans: Sequence[PlacedSpan],
    entities: Sequence[IssuedEntity],
    titles: Sequence[IssuedEntity],
) -> dict[str, IssuedEntity]:
    """Name rays, load lines, closing rays, poles and pole distances.

    Of cables alike the titles below the diagrams tell which is whose.
    """
    lines = [e for e in entities if e.kind == "LINE"]
    stars = _stars(lines)
    costs = [
        [_misfit(star, span) + _mistaken(star, span, titles) for span in spans] for star in stars
    ]
    chosen = {j: i for i, j in pair(costs)} if stars and spans else {}
    named: dict[str, IssuedEntity] = {}
    first: dict[str, int] = {}
    loads: dict[str, int] = {}
    for number, span in enumerate(spans):
        if number not in chosen:
            continue
        star = stars[chosen[number]]
        used = {e.offset for e in named.values()}
        pool = [e for e in lines if e.offset not in used]
        diagram = _Diagram(span, star, pool)
        start, load = first.get(span.prefix, 1), loads.get(span.prefix, 1)
        named |= diagram.named(start, load)
        first[span.prefix] = start + len(diagram.rays)
        loads[span.prefix] = load + max(0, len(diagram.rays) - 1)
        circles = [e for e in entities if e.kind == "CIRCLE"]
        if circles:
            nearest = min(circles, key=lambda c: math.dist(c.start, star.pole))
            named[f"{span.prefix}/pole/{span.number}"] = nearest
    return named


def _stars(lines: Sequence[IssuedEntity]) -> list[_Star]:
    """Group lines that start at one point; two lines are the least that make a star."""
    left = list(lines)
    found = []
    while left:
        at, reach = left[0].start, _TOUCH * math.dist(*left[0].points)
        group = [e for e in left if math.dist(e.start, at) <= reach]
        left = [e for e in left if math.dist(e.start, at) > reach]
        # Steps of a load line and dimensions stand upright or level by themselves.
        if len(group) > 1:
            found.append(_Star(pole=at, lines=tuple(group)))
    return found


def _misfit(star: _Star, span: PlacedSpan) -> float:
    """Tell how badly the outermost rays fit the outermost sides of a profile."""
    sides = sorted(_angle(a, b) for a, b in itertools.pairwise(span.profile.points))
    angles = star.angles
    if not angles or not sides:
        return _APART
    off = abs(angles[0] - sides[0]) + abs(angles[-1] - sides[-1])
    return off + 0.01 * abs(len(angles) - len(sides)) / len(sides)


def _mistaken(star: _Star, span: PlacedSpan, titles: Sequence[IssuedEntity]) -> float:
    """Tell whether the nearest title names another cable."""
    if not titles or not span.mark:
        return 0.0
    tips = [star.pole, *(line.end for line in star.lines)]
    nearest = min(titles, key=lambda e: min(math.dist(e.start, tip) for tip in tips))
    return 0.0 if nearest.text == f"{TITLE}{span.mark}" else _OTHER


class _Diagram:
    """One diagram: its rays in order, the load line between their ends."""

    def __init__(self, span: PlacedSpan, star: _Star, pool: Sequence[IssuedEntity]) -> None:
        self.span, self.pole = span, star.pole
        inside = {e.offset for e in star.lines}
        self.pool = [e for e in pool if e.offset not in inside]
        ends = np.array([e.end for e in star.lines])
        self.size = float(np.max(np.hypot(*(ends - star.pole).T)))
        self.axis = float(np.median(ends[:, 0]))
        sides = list(itertools.pairwise(span.profile.points))
        closing = _angle(span.profile.start, span.profile.end)
        own = [e for e in star.lines if e.is_chain]
        if not own and len(star.lines) > len(sides):
            own = [min(star.lines, key=lambda e: abs(_angle(star.pole, e.end) - closing))]
        own = own or self._strays(is_chain=True)
        self.closing = own[0] if own else None
        rays = [e for e in star.lines if e is not self.closing]
        rays += self._strays(is_chain=False)
        rays = self._once(rays, len(sides))
        self.rays = self._ordered(rays, [_angle(a, b) for a, b in sides])

    def _strays(self, *, is_chain: bool) -> list[IssuedEntity]:
        """Find lines that miss the pole but end on the load line, neither upright nor level."""
        touch = 10 * _TOUCH * self.size
        tips = [p for e in self.pool for p in e.points if abs(p[0] - self.axis) <= touch]
        return [
            e
            for e in self.pool
            if e.is_chain is is_chain
            and abs(e.end[0] - self.axis) <= touch
            and abs(e.start[0] - e.end[0]) > touch
            and (is_chain or sum(math.dist(p, e.end) <= touch for p in tips) > 1)
        ]

    def _once(self, rays: list[IssuedEntity], sides: int) -> list[IssuedEntity]:
        """Leave out rays upon others where there are too many; with weight they come in pairs."""
        touch = _TOUCH * self.size
        kept: list[IssuedEntity] = []
        spare = len(rays) - sides if len(rays) > sides else len(rays) % 2 * (len(rays) < sides)
        for ray in rays:
            if spare and any(math.dist(ray.end, other.end) <= touch for other in kept):
                spare -= 1
            else:
                kept.append(ray)
        return kept

    def _ordered(self, rays: list[IssuedEntity], sides: list[float]) -> list[IssuedEntity]:
        """Put rays in the order of the profile's sides, else down the load line."""
        if len(rays) != len(sides):
            return sorted(rays, key=lambda e: (-e.end[1], e.offset))
        costs = [[abs(_angle(self.pole, e.end) - side) for side in sides] for e in rays]
        return [rays[i] for i, _ in sorted(pair(costs), key=lambda found: found[1])]

    def named(self, first: int, load: int) -> dict[str, IssuedEntity]:
        """Name all lines, rays and steps numbered on from the spans to the left."""
        head, k = self.span.prefix, self.span.number
        named = {f"{head}/ray/{first + i}": ray for i, ray in enumerate(self.rays)}
        if self.closing is not None:
            named[f"{head}/closing-ray/{k}"] = self.closing
        used = {e.offset for e in named.values()}
        upright = [
            e for e in self.pool if e.offset not in used and not e.is_chain and self._is_on_axis(e)
        ]
        joints = list(itertools.pairwise([ray.end for ray in self.rays]))
        touch = _TOUCH * self.size
        steps = [(i, a, b) for i, (a, b) in enumerate(joints) if math.dist(a, b) > touch]
        costs = [
            [math.dist(e.start, a) + math.dist(e.end, b) for _, a, b in steps] for e in upright
        ]
        for i, j in pair(costs) if upright and steps else ():
            if costs[i][j] < 2.0 * self.size:
                named[f"{head}/load-line/{load + steps[j][0]}"] = upright[i]
        return named | self._distances({e.offset for e in named.values()})

    def _is_on_axis(self, line: IssuedEntity) -> bool:
        """Tell whether a line touches a ray's end on the load line."""
        touch = 10 * _TOUCH * self.size
        return any(
            math.dist(p, ray.end) <= touch for p in line.points for ray in self.rays
        ) and any(abs(p[0] - self.axis) <= touch for p in line.points)

    def _distances(self, used: set[int]) -> dict[str, IssuedEntity]:
        """Name the pole distance and its extension lines."""
        name = f"{self.span.prefix}/pole-distance/{self.span.number}"
        pool = [e for e in self.pool if e.offset not in used and not e.is_chain]
        foot = min(self.pole[1], *(ray.end[1] for ray in self.rays)) if self.rays else self.pole[1]
        ends = (self.axis, self.pole[0])
        wanted = {name: ends} | {
            f"{name}/extension-{i}": (x, x) for i, x in enumerate(ends, start=1)
        }
        names = list(wanted)
        costs = [
            [
                abs(e.start[0] - wanted[n][0])
                + abs(e.end[0] - wanted[n][1])
                + 0.1 * abs(e.end[1] - foot)
                for n in names
            ]
            for e in pool
        ]
        found = pair(costs) if pool else []
        return {names[j]: pool[i] for i, j in found if costs[i][j] < self.size}


def _angle(start: Point, end: Point) -> float:
    """Give the angle of a line against the level, whichever way it runs."""
    return (
        math.atan2(end[1] - start[1], end[0] - start[0])
        if end[0] >= start[0]
        else math.atan2(start[1] - end[1], start[0] - end[0])
    )
