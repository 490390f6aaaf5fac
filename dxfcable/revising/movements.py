"""One cable before and after a load change: what moved, by how much."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.model import Movement, PointChange
from dxfcable.units import convert, is_imperial

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Cable, FormedCable, Node


def movements(
    cable: Cable,
    before: FormedCable,
    after: FormedCable,
    as_formed: FormedCable,
    places: Sequence[int | None],
) -> tuple[Movement, ...]:
    """Compare the nodes of one cable.

    Parameters
    ----------
    cable : Cable
        As drawn now: a hanger's foot stays at the x of its load point.
    before, after : FormedCable
        As the drawing handed in shows it, and as it stands now.
    as_formed : FormedCable
        As it was formed.
    places : sequence of int or None
        For each load point its place among those of before, None for one that is new.

    Returns
    -------
    tuple of Movement
        Supports and load points that both have, left to right.
    """
    earlier, first = _by_place(before, places), _by_place(as_formed, places)
    feet = [None, *(load.x for load in cable.loads), None]
    result = []
    for k, node in enumerate(after.nodes):
        old, start = earlier.get(k), first.get(k)
        if old is None or start is None:
            continue
        lean, change = _hanger(node, before=start[1], foot=feet[k])
        result.append(
            Movement(
                mark=node.mark,
                is_support=node.is_support,
                at=(node.x, node.y),
                dx=node.x - old[1].x,
                dy=node.y - old[1].y,
                sum_dx=node.x - start[1].x,
                sum_dy=node.y - start[1].y,
                load_before=old[1].load,
                load_after=node.load,
                elevation_before=old[1].elevation,
                elevation_after=node.elevation,
                tension_before=_tension_at(before, old[0]),
                tension_after=_tension_at(after, k),
                lean_deg=lean,
                hanger_change=change,
            )
        )
    return tuple(result)


def changes_of(moved: tuple[Movement, ...], least: float) -> tuple[PointChange, ...]:
    """Return the nodes that moved more than `least` [length]."""
    return tuple(
        PointChange(mark=m.mark, at=m.at, dx=m.dx, dy=m.dy)
        for m in moved
        if math.hypot(m.dx, m.dy) > least
    )


def least_shown(length_unit: str) -> float:
    """Return half of the last place that elevations show, 1/16 in or 1 mm, in the unit."""
    last = convert(1.0, "in", length_unit) / 16.0
    return 0.5 * (last if is_imperial(length_unit) else convert(1.0, "mm", length_unit))


def _by_place(past: FormedCable, places: Sequence[int | None]) -> dict[int, tuple[int, Node]]:
    """Pair nodes with those of the past: ends with ends, points as they are paired."""
    last = len(past.nodes) - 1
    pairs = {0: 0, len(places) + 1: last}
    pairs |= {k: j + 1 for k, j in enumerate(places, start=1) if j is not None}
    return {k: (j, past.nodes[j]) for k, j in pairs.items()}


def _tension_at(formed: FormedCable, node: int) -> float:
    """Return the largest tension in the pieces that meet at a node [force]."""
    pieces = formed.segments
    left = [pieces[node - 1].tension_right] if node > 0 else []
    right = [pieces[node].tension_left] if node < len(pieces) else []
    return max(left + right)


def _hanger(node: Node, *, before: Node, foot: float | None) -> tuple[float | None, float | None]:
    """Return the lean of a hanger [degrees], and what must be added to it to hold the deck."""
    if foot is None or before.hanger is None or before.hanger_foot is None:
        return None, None
    height = node.y - before.hanger_foot
    across = node.x - foot
    lean = math.degrees(math.atan2(abs(across), abs(height) or before.hanger))
    return lean, math.copysign(math.hypot(across, height), height) - before.hanger
