"""Free rectangles of a sheet: what is placed takes its room out of all of them."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.drawing.painting.sketch import Bounds

_TOUCH = 1e-6


class FreeRoom:
    """The largest free rectangles of a region.

    Parameters
    ----------
    region : tuple of float
        Left, bottom, right, top [mm].
    gap : float
        Room kept between blocks [mm].
    """

    def __init__(self, region: Bounds, gap: float) -> None:
        self.gap = gap
        self.rooms: list[Bounds] = [region]

    def find(self, width: float, height: float) -> Bounds | None:
        """Find the free rectangle for a size: the highest, then the leftmost, of those it fits."""
        fitting = [r for r in self.by_place() if _fits(r, width, height)]
        return fitting[0] if fitting else None

    def by_place(self) -> list[Bounds]:
        """List the free rectangles from the top down, then from the left."""
        return sorted(self.rooms, key=lambda r: (-round(r[3], 3), round(r[0], 3), -_area(r)))

    def take(self, box: Bounds) -> None:
        """Take a box, with the gap about it, out of the free rectangles."""
        x0, y0, x1, y1 = (
            box[0] - self.gap,
            box[1] - self.gap,
            box[2] + self.gap,
            box[3] + self.gap,
        )
        left: list[Bounds] = []
        for a0, b0, a1, b1 in self.rooms:
            if x0 >= a1 - _TOUCH or x1 <= a0 + _TOUCH or y0 >= b1 - _TOUCH or y1 <= b0 + _TOUCH:
                left.append((a0, b0, a1, b1))
                continue
            parts = ((a0, b0, x0, b1), (x1, b0, a1, b1), (a0, b0, a1, y0), (a0, y1, a1, b1))
            left += [p for p in parts if p[2] - p[0] > _TOUCH and p[3] - p[1] > _TOUCH]
        self.rooms = [r for k, r in enumerate(left) if not _is_within_another(r, k, left)]


def _fits(room: Bounds, width: float, height: float) -> bool:
    return width <= room[2] - room[0] + _TOUCH and height <= room[3] - room[1] + _TOUCH


def _area(room: Bounds) -> float:
    return (room[2] - room[0]) * (room[3] - room[1])


def _is_within_another(room: Bounds, index: int, rooms: list[Bounds]) -> bool:
    """Tell whether another rectangle holds this one; of equal ones the first stays."""
    for k, other in enumerate(rooms):
        holds = (
            other[0] <= room[0] + _TOUCH
            and other[1] <= room[1] + _TOUCH
            and other[2] >= room[2] - _TOUCH
            and other[3] >= room[3] - _TOUCH
        )
        if k != index and holds and (_area(other) > _area(room) + _TOUCH or k < index):
            return True
    return False
