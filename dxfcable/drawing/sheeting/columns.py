"""Schedules set in columns about the views of a sheet.

A column keeps its left edge over the whole height of the room: what is free in it above, between
and below the views is filled from the top down before the next column begins. Where columns
begin and how wide they are is searched for, so that as much as possible finds a place.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.sheeting.ruled_table import RuledTable

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from dxfcable.drawing.painting.sketch import Bounds
    from dxfcable.drawing.sheeting.blocks import Block

_LONG = 24  # rows from which a table may be continued in the next column
_PART = 15  # rows that each part shows at least
_MOST_TRIED = 1200  # columns in one search; beyond, each is as wide as its first block
_ACROSS = 0.25  # of a distance from the left edge, against one from the top
_TOUCH = 1e-6


@dataclass(frozen=True, slots=True, kw_only=True)
class Room:
    """Where columns may stand.

    Attributes
    ----------
    region : tuple of float
        Left, bottom, right, top [mm].
    taken : tuple of tuples of float
        Boxes of it that are taken.
    gap : float
        Room kept between blocks [mm].
    in_order : bool
        Blocks keep their order; else a later one may fill what an earlier one cannot.
    """

    region: Bounds
    taken: tuple[Bounds, ...] = ()
    gap: float
    in_order: bool = True

    def runs(self, left: float, right: float) -> list[tuple[float, float]]:
        """List the free heights between two abscissas, from the top down: lower, upper end."""
        y0, top = self.region[1], self.region[3]
        over = sorted(
            (
                (b - self.gap, d + self.gap)
                for a, b, c, d in self.taken
                if a - self.gap < right - _TOUCH and c + self.gap > left + _TOUCH
            ),
            key=lambda span: -span[1],
        )
        found = []
        for low, high in over:
            if high < top - _TOUCH:
                found.append((max(high, y0), top))
            top = min(top, low)
        found.append((y0, top))
        return [(low, high) for low, high in found if high - low > _TOUCH]

    @property
    def area(self) -> float:
        """What is free at most [mm2]."""
        boxes = (self.region, *self.taken)
        whole, *taken = ((c - a) * (d - b) for a, b, c, d in boxes)
        return whole - sum(taken)

    def edges(self) -> list[float]:
        """List the abscissas at which what is free changes."""
        x0, _, x1, _ = self.region
        found = {x for a, _, c, _ in self.taken for x in (a, c + self.gap)}
        return sorted(x for x in found if x0 < x < x1)


@dataclass(frozen=True, slots=True, kw_only=True)
class Filling:
    """Blocks put in columns, and the rest.

    Attributes
    ----------
    placed : tuple of (Block, tuple of float)
        With their boxes.
    rest : tuple of Block
    broken : int
        How often a table is continued.
    passed : int
        How many blocks stand before one that should come first, each counted for itself.
    weight : float
        How far off the upper left corner what is placed stands [mm3], see `weight`.
    """

    placed: tuple[tuple[Block, Bounds], ...] = ()
    rest: tuple[Block, ...] = ()
    broken: int = 0
    passed: int = 0
    weight: float = 0.0

    @property
    def cost(self) -> tuple[float, int, int, float]:
        """What is left over [mm2], tables broken, blocks passed, weight: the less the better."""
        left = sum(block.area for block in self.rest)
        return round(left, 3), self.broken, self.passed, round(self.weight, 3)


def weight(box: Bounds, region: Bounds) -> float:
    """Give a box's area times its distance from the top of a region [mm3].

    A little of that from the left edge is added. Summed over all boxes it is least where what
    is free lies together below.
    """
    across = 0.5 * (box[0] + box[2]) - region[0]
    down = region[3] - 0.5 * (box[1] + box[3])
    return (box[2] - box[0]) * (box[3] - box[1]) * (down + _ACROSS * across)


def fill(blocks: Sequence[Block], room: Room) -> Filling:
    """Put blocks in columns.

    Parameters
    ----------
    blocks : sequence of Block
        In the order that they are read in.
    room : Room

    Returns
    -------
    Filling
        Of those tried the one of least cost.
    """
    return _Search(room=room).best(room.region[0], tuple(blocks))


@dataclass(slots=True, kw_only=True, eq=False)
class _Search:
    """A search for columns; what is left of the same blocks from the same place on is the same."""

    room: Room
    tried: int = 0
    _known: dict[tuple[float, tuple[int, ...]], Filling] = field(default_factory=dict)
    _parts: dict[tuple[int, float, int], tuple[RuledTable | None, RuledTable | None]] = field(
        default_factory=dict
    )
    _kept: list[Block] = field(default_factory=list)  # so that no identity is used twice

    def best(self, left: float, rest: tuple[Block, ...]) -> Filling:
        """Fill from an abscissa on."""
        key = (round(left, 4), tuple(id(block) for block in rest))
        if not rest or left >= self.room.region[2] - _TOUCH:
            return Filling(rest=rest)
        if key not in self._known:
            self._kept += rest
            self._known[key] = min(self._options(left, rest), key=lambda found: found.cost)
        return self._known[key]

    def _options(self, left: float, rest: tuple[Block, ...]) -> Iterator[Filling]:
        """Give what follows from each column that may begin at an abscissa, and from none."""
        seen = set()
        for width, may_break in self._widths(left, rest):
            self.tried += 1
            column = self._column(left, width, rest, may_break=may_break)
            key = tuple(id(block) for block in column.rest)
            if not column.placed or key in seen:
                continue
            seen.add(key)
            right = max(box[2] for _, box in column.placed)
            after = self.best(right + self.room.gap, column.rest)
            yield replace(
                after,
                placed=(*column.placed, *after.placed),
                broken=after.broken + column.broken,
                passed=after.passed + column.passed,
                weight=after.weight + column.weight,
            )
        following = next((x for x in self.room.edges() if x > left + _TOUCH), None)
        yield Filling(rest=rest) if following is None else self.best(following, rest)

    def _widths(self, left: float, rest: tuple[Block, ...]) -> list[tuple[float, bool]]:
        """List the widths that a column may have, without and with tables broken in it."""
        most = self.room.region[2] - left + _TOUCH
        least = rest[0].size[0] if self.room.in_order else 0.0
        widths = sorted({w for w, _ in (b.size for b in rest) if least - _TOUCH <= w <= most})
        if self.tried > _MOST_TRIED:
            widths = widths[:1] if self.room.in_order else widths[-1:]
        breaks = (False, True) if any(self._is_long(block) for block in rest) else (False,)
        return [(width, may_break) for width in widths for may_break in breaks]

    def _is_long(self, block: Block) -> bool:
        """Tell whether a block may be broken: a table with many rows, or higher than the room."""
        if not isinstance(block, RuledTable):
            return False
        _, y0, _, y1 = self.room.region
        return block.count >= _LONG or block.size[1] > y1 - y0

    def _column(
        self, left: float, width: float, blocks: tuple[Block, ...], *, may_break: bool
    ) -> Filling:
        """Fill one column from the top down."""
        rest, broken, passed = list(blocks), 0, 0
        placed: list[tuple[Block, Bounds]] = []
        for low, top in self.room.runs(left, left + width):
            y, k = top, 0
            while k < len(rest):
                if _is_behind(rest, k):
                    k += 1
                    continue
                wide, high = rest[k].size
                if wide <= width + _TOUCH and high <= y - low + _TOUCH:
                    placed.append((rest.pop(k), (left, y - high, left + wide, y)))
                    y -= high + self.room.gap
                    passed += k
                    continue
                part, other = None, None
                if may_break and wide <= width + _TOUCH and self._is_long(rest[k]):
                    part, other = self._broken(rest[k], y - low, is_top=y == top)
                if part is not None and other is not None:
                    placed.append((part, (left, y - part.size[1], left + wide, y)))
                    rest[k], broken, passed = other, broken + 1, passed + k
                    break
                if self.room.in_order:
                    break
                k += 1
        load = sum(weight(box, self.room.region) for _, box in placed)
        return Filling(
            placed=tuple(placed), rest=tuple(rest), broken=broken, passed=passed, weight=load
        )

    def _broken(
        self, block: Block, height: float, *, is_top: bool
    ) -> tuple[RuledTable | None, RuledTable | None]:
        """Break a table at a height; the same table at the same height gives the same parts."""
        assert isinstance(block, RuledTable)
        # At the top of a column of an empty sheet there is no better place for it.
        least = 1 if is_top and not self.room.taken else _PART
        key = (id(block), round(height, 3), least)
        if key not in self._parts:
            self._kept.append(block)
            self._parts[key] = block.fitting(height, least)
        return self._parts[key]


def _is_behind(rest: Sequence[Block], place: int) -> bool:
    """Tell whether a block continues one that has no place yet."""
    chain = rest[place].chain
    return bool(chain) and any(block.chain == chain for block in rest[:place])
