"""How the views of a cable may stand on a sheet: elevation, force diagram, joints."""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from dxfcable.drawing.painting.sketch import Bounds

Size = tuple[float, float]
_TOUCH = 1e-6


@dataclass(frozen=True, slots=True, kw_only=True)
class Views:
    """Sizes of the views [mm]."""

    elevation: Size
    diagram: Size
    joints: tuple[Size, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Arrangement:
    """Views in their places.

    Attributes
    ----------
    name : str
        The same for the same arrangement with another gap.
    boxes : tuple of tuples of float
        Of elevation, diagram and joints, as far as these are placed.
    taken : tuple of tuples of float
        What schedules keep clear of.
    """

    name: str
    boxes: tuple[Bounds, ...]
    taken: tuple[Bounds, ...]


def arrangements(
    views: Views, region: Bounds, gap: float, even: float = 0.0
) -> Iterator[Arrangement]:
    """List the arrangements that have room.

    The elevation stands at the upper left, the diagram beside or below it, the joints in a row
    or one below the other beside or below these two, or with the schedules.

    Parameters
    ----------
    views : Views
    region : tuple of float
        Left, bottom, right, top [mm].
    gap : float
        Room between views [mm].
    even : float
        Views of the upper row count as level below if they differ by less [mm].
    """
    for is_beside in (True, False):
        for spot, is_row in _spots(views):
            boxes = _placed(views, region, gap, (is_beside, spot, is_row), even)
            if boxes is None or not _has_room(boxes, region, gap):
                continue
            name = f"{'beside' if is_beside else 'below'}/{spot}/{'row' if is_row else 'stack'}"
            yield Arrangement(name=name, boxes=boxes, taken=_evened(boxes, region[3], even))


def _spots(views: Views) -> list[tuple[str, bool]]:
    """List where the joints may stand, in a row or not."""
    if not views.joints:
        return [("none", True)]
    spots = ("right", "under-elevation", "under-diagram", "beside-diagram")
    rows = (True, False) if len(views.joints) > 1 else (True,)
    return [*itertools.product(spots, rows), ("with-schedules", True)]


def _placed(
    views: Views, region: Bounds, gap: float, how: tuple[bool, str, bool], even: float
) -> tuple[Bounds, ...] | None:
    """Place the views; None where a way is the same as another."""
    (is_beside, spot, is_row), (x0, _, _, y1) = how, region
    elevation = _box(x0, y1, views.elevation)
    if is_beside:
        diagram = _box(elevation[2] + gap, y1, views.diagram)
        at = {
            "right": (diagram[2] + gap, y1),
            "under-elevation": (x0, elevation[1] - gap),
            "under-diagram": (diagram[0], diagram[1] - gap),
            "beside-diagram": (x0, min(elevation[1], diagram[1]) - gap),
        }
        if spot == "beside-diagram" and elevation[1] <= diagram[1]:
            return None
    else:
        first = _group(views.joints, (elevation[2] + gap, y1), gap, is_row=is_row)
        row = [elevation, *first] if spot == "right" else [elevation]
        low = min(box[1] for box in row)
        top = low if elevation[1] - low <= even else elevation[1]
        diagram = _box(x0, top - gap, views.diagram)
        at = {
            "right": (elevation[2] + gap, y1),
            "under-diagram": (x0, diagram[1] - gap),
            "beside-diagram": (diagram[2] + gap, diagram[3]),
        }
    if spot in ("none", "with-schedules"):
        return elevation, diagram
    if spot not in at:
        return None
    return elevation, diagram, *_group(views.joints, at[spot], gap, is_row=is_row)


def _box(x: float, top: float, size: Size) -> Bounds:
    return x, top - size[1], x + size[0], top


def _group(
    sizes: Sequence[Size], at: tuple[float, float], gap: float, *, is_row: bool
) -> list[Bounds]:
    """Set views in a row, or one below the other, from an upper left corner on."""
    (x, y), boxes = at, []
    for size in sizes:
        boxes.append(_box(x, y, size))
        if is_row:
            x += size[0] + gap
        else:
            y -= size[1] + gap
    return boxes


def _has_room(boxes: Sequence[Bounds], region: Bounds, gap: float) -> bool:
    """Tell whether boxes lie within a region and clear of each other."""
    x0, y0, x1, y1 = region
    for a, b, c, d in boxes:
        if a < x0 - _TOUCH or b < y0 - _TOUCH or c > x1 + _TOUCH or d > y1 + _TOUCH:
            return False
    return all(
        max(p[0] - q[2], q[0] - p[2], p[1] - q[3], q[1] - p[3]) >= gap - _TOUCH
        for p, q in itertools.combinations(boxes, 2)
    )


def _evened(boxes: Sequence[Bounds], top: float, even: float) -> tuple[Bounds, ...]:
    """Let boxes that begin or lie in the upper row end level where they nearly do."""
    upper = [box for box in boxes if box[3] >= top - _TOUCH]
    low = min(box[1] for box in upper)
    return tuple(
        (a, low, c, d) if 0.0 < b - low <= even and d > low else (a, b, c, d)
        for a, b, c, d in boxes
    )
