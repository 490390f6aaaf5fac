"""Composes one cable in its room of a sheet: which diagram, which arrangement, which columns."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.sheeting.arranging import Views, arrangements
from dxfcable.drawing.sheeting.columns import Room, fill, weight
from dxfcable.drawing.sheeting.diagram_blocks import MOST_DIAGRAM

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from dxfcable.drawing.painting.sketch import Bounds
    from dxfcable.drawing.sheeting.arranging import Arrangement
    from dxfcable.drawing.sheeting.blocks import Block, Drawing
    from dxfcable.drawing.sheeting.columns import Filling
    from dxfcable.drawing.sheeting.diagram_blocks import DiagramMaker
    from dxfcable.drawing.sheeting.papers import Paper

_WIDE = (0.76, 0.55)  # of the room's width that the diagrams of a chain may have
_LARGE = 48.0  # text heights: a diagram so large need be no larger if schedules keep order then
_SCALES = 3  # usual force scales tried
_EVEN = 16.0  # text heights: views that end less apart end level
_AIR = (2.0, 1.5)  # of the gap, where all has room with it
_SAME = 0.01  # mm
_HALVINGS = 5  # of the heights tried for columns that end as high as can be
# What one more of these is worth, against the mean distance from the top in heights of the room.
_LONE, _LEFT, _PASSED = 0.03, 0.004, 0.004


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Composed:
    """Views in their places and schedules about them."""

    views: tuple[tuple[Drawing, Bounds], ...]
    filling: Filling
    arrangement: str
    level: float

    @property
    def boxes(self) -> list[Bounds]:
        """All that stands there."""
        return [box for _, box in (*self.views, *self.filling.placed)]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Composer:
    """What is to be composed.

    Attributes
    ----------
    region : tuple of float
        Left, bottom, right, top [mm].
    paper : Paper
    elevation : Drawing
    diagrams : DiagramMaker
    joints : tuple of Drawing
    schedules : tuple of Block
    """

    region: Bounds
    paper: Paper
    elevation: Drawing
    diagrams: DiagramMaker
    joints: tuple[Drawing, ...]
    schedules: tuple[Block, ...]

    def best(self) -> Composed | None:
        """Compose: the diagram as large as can be; None where none has room.

        All on one sheet and in order is best with any diagram that is large; then all on one
        sheet out of order; else as much as possible.
        """
        every = self._drawn()
        first = next(every, None)
        if first is None:
            return None
        if self._may_all_fit():
            diagrams = [first, *every]
            large = [d for d, size in diagrams if size >= _LARGE * self.paper.text] or [first[0]]
            for in_order, tried in ((True, large), (False, [d for d, _ in diagrams])):
                for diagram in tried:
                    found = self._complete(diagram, in_order=in_order)
                    if found is not None:
                        return self._aired(found, diagram, in_order=in_order)
        some = self._all(first[0], self.paper.gap, 0.0, in_order=False, whole=False)
        return min(some, key=self._cost)

    def _drawn(self) -> Iterator[tuple[Drawing, float]]:
        """Draw diagrams that have room beside or below the elevation, the largest first."""
        x0, y0, x1, y1 = self.region
        width, height = x1 - x0, y1 - y0
        beside = width - self.elevation.size[0] - self.paper.gap
        scales: list[float] = []
        for per_paper, size in self.diagrams.scales(width, height, MOST_DIAGRAM * self.paper.text):
            seen: list[Drawing] = []
            for wide in (beside, *(share * width for share in _WIDE)):
                if wide <= 0.0:
                    continue
                diagram = self.diagrams.drawn(per_paper, wide)
                if diagram in seen or diagram.size[0] > wide + 1e-6:
                    continue
                seen.append(diagram)
                if any(True for _ in self._arranged(diagram, self.paper.gap, 0.0, ())):
                    yield diagram, size
                    scales.append(per_paper)
            if len(set(scales)) == _SCALES:
                return

    def _may_all_fit(self) -> bool:
        """Tell by their bare areas whether all may have room."""
        x0, y0, x1, y1 = self.region
        blocks = (self.elevation, *self.joints, *self.schedules)
        return sum(each.area for each in blocks) <= (x1 - x0) * (y1 - y0)

    def _arranged(
        self, diagram: Drawing, gap: float, level: float, joints: tuple[Drawing, ...]
    ) -> Iterator[Arrangement]:
        views = Views(
            elevation=self.elevation.size,
            diagram=diagram.size,
            joints=tuple(joint.size for joint in joints),
        )
        return arrangements(views, self.region, gap, level)

    def _all(
        self,
        diagram: Drawing,
        gap: float,
        level: float,
        *,
        in_order: bool,
        name: str = "",
        whole: bool = True,
    ) -> Iterator[Composed]:
        """Compose each arrangement, or the one of a name; where asked, only if all may fit."""
        for arrangement in self._arranged(diagram, gap, level, self.joints):
            if name not in ("", arrangement.name):
                continue
            views = (self.elevation, diagram, *self.joints)[: len(arrangement.boxes)]
            others = (*self.joints[len(arrangement.boxes) - 2 :], *self.schedules)
            room = Room(region=self.region, taken=arrangement.taken, gap=gap, in_order=in_order)
            if whole and room.area < sum(each.area for each in others):
                continue
            yield Composed(
                views=tuple(zip(views, arrangement.boxes, strict=True)),
                # What finds room only out of order fills the sheet in any case.
                filling=_high(others, room) if in_order else fill(others, room),
                arrangement=arrangement.name,
                level=level,
            )

    def _complete(self, diagram: Drawing, *, in_order: bool) -> Composed | None:
        """Find the most aligned composition in which nothing is left over."""
        for level in (_EVEN * self.paper.text, 0.0):
            every = self._all(diagram, self.paper.gap, level, in_order=in_order)
            found = [each for each in every if not each.filling.rest]
            if found:
                return min(found, key=self._cost)
        return None

    def _cost(self, composed: Composed) -> tuple[float, int, float]:
        """Tell what is left over and broken, then how scattered the whole is."""
        left, broken, passed, _ = composed.filling.cost
        scattered = scatter(composed.boxes, self.region) + _PASSED * passed
        return left, broken, round(scattered, 6)

    def _aired(self, composed: Composed, diagram: Drawing, *, in_order: bool) -> Composed:
        """Widen all gaps alike where nothing loses its place by it."""
        for factor in _AIR:
            gap = factor * self.paper.gap
            every = self._all(
                diagram, gap, composed.level, in_order=in_order, name=composed.arrangement
            )
            found = next(every, None)
            if (
                found is not None
                and not found.filling.rest
                and found.filling.broken <= composed.filling.broken
            ):
                return found
        return composed


def _high(blocks: Sequence[Block], room: Room) -> Filling:
    """Fill a room; where nothing is left over, with columns that end as high as can be."""
    best = fill(blocks, room)
    x0, y0, x1, y1 = room.region
    low, high = y0, min((box[1] for box in room.taken), default=y1)
    if best.rest or high <= low:
        return best
    for number in range(_HALVINGS + 1):
        floor = high if number == 0 else 0.5 * (low + high)
        found = fill(blocks, replace(room, region=(x0, floor, x1, y1)))
        if found.rest or found.broken > best.broken:
            high = floor
        else:
            best, low = found, floor
        if number == 0 and best is found:
            break
    return best


def scatter(boxes: Sequence[Bounds], region: Bounds) -> float:
    """Tell how scattered blocks stand: the less the better.

    Adds up how low they reach, how far they stand from the upper left corner, the tops that no
    other block begins at (of blocks that do not continue a column), and the left edges.

    Examples
    --------
    >>> row = scatter([(0, 50, 20, 80), (25, 60, 40, 80)], (0, 0, 100, 80))
    >>> row < scatter([(0, 50, 20, 80), (25, 45, 40, 65)], (0, 0, 100, 80))
    True
    """
    y0, y1 = region[1], region[3]
    area = sum((c - a) * (d - b) for a, b, c, d in boxes)
    away = sum(weight(box, region) for box in boxes) / (area * (y1 - y0))
    depth = (y1 - min(box[1] for box in boxes)) / (y1 - y0)
    lefts = {round(box[0], 2) for box in boxes}
    tops = Counter(round(box[3], 2) for box in boxes)
    lone = sum(1 for box in boxes if tops[round(box[3], 2)] == 1 and not _continues(box, boxes))
    return depth + away + _LONE * lone + _LEFT * len(lefts)


def _continues(box: Bounds, boxes: Sequence[Bounds]) -> bool:
    """Tell whether a block of the same left edge stands above."""
    return any(abs(q[0] - box[0]) < _SAME and q[1] > box[3] for q in boxes)
