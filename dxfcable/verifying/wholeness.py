"""Entities of ours that are missing, altered or copied, and what else stands on our layers."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.whole import missing

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from dxfcable.drawing.issued import Issued, IssuedEntity
    from dxfcable.model import Finding, Point
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.tally import Tally

WHOLE, READS = "entities as issued", "drawing reads"
# Layers on which nothing may stand that was not proved.
_OURS_ALONE = frozenset(
    (
        *("profile", "force_diagram", "tension", "elevation", "reaction"),
        *("closing_string", "hanger", "letters"),
    )
)
_LONGEST_LEADER = 16.0  # text heights
_SAME_PLACE = 1e-5  # of the larger of the coordinate and one unit: other programs round
_MOVED = 0.01  # of a text height: within a part that was moved as one


def hold_whole(
    tallies: Mapping[str, Tally],
    sheet: Sheet,
    issued: Issued,
    fault: Finding | None,
    places: Sequence[tuple[Point, Point]],
) -> None:
    """Tell copies, edits and strangers, each with the cable that it belongs to.

    Parameters
    ----------
    tallies : mapping of str to Tally
        By the first part of ids.
    fault : Finding or None
        Why the drafter's drawing does not read.
    places : sequence of (Point, Point)
        What labels name, for their leaders.
    """
    if not tallies:
        return
    first = next(iter(tallies.values()))
    strayed = _strayed(issued.marked.values(), sheet.height)
    for prefix, tally in tallies.items():
        own = [e for name, e in sheet.named.items() if name.startswith(f"{prefix}/")]
        for entity in own:
            if entity.was_edited:
                tally.fail(WHOLE, f'{entity.id} was edited by hand: "{entity.text}"', entity)
            elif entity.offset in strayed:
                tally.fail(WHOLE, f"{entity.id} was moved by itself", entity)
            else:
                tally.hold(WHOLE, 0.0, 1.0, "", entity)
        if fault is not None:
            tally.fail(READS, f"the drafter's drawing no longer reads: {fault.text}")
    for copy in issued.copies:
        tally = tallies.get(copy.id.partition("/")[0], first)
        tally.fail(WHOLE, f"{copy.kind} is a copy of {copy.id}", copy)
    strangers = _strangers(sheet, places)
    is_lost = _hold_count(tallies, issued, sheet.loose)
    _hold_leaders(tallies, sheet, places)
    for entity in strangers:
        what = f'{entity.kind} "{entity.text}"' if entity.text else entity.kind
        text = f"{what} on {entity.layer} is none of the entities issued, or "
        text += "its mark is lost" if is_lost else "stands out of place"
        first.fail(WHOLE, text, entity)
    for entity in _doubled(issued):
        first.fail(WHOLE, f'{entity.kind} "{entity.text}" stands twice in one place', entity)


def _strayed(entities: Iterable[IssuedEntity], height: float) -> set[int]:
    """List linework that does not stand where it was put, nor went with its part; by offset."""
    groups: dict[str, list[IssuedEntity]] = {}
    for entity in entities:
        if entity.put is not None:
            groups.setdefault(entity.part, []).append(entity)
    found = set()
    for members in groups.values():
        shifts = np.array([np.subtract(e.start, e.put or e.start) for e in members])
        known = shifts[np.isfinite(shifts).all(axis=1)]
        across, up = np.median(known, axis=0) if known.size else (0.0, 0.0)
        is_moved = len(members) > 1 and math.hypot(across, up) > _MOVED * height
        for entity, (dx, dy) in zip(members, shifts, strict=True):
            off, reach = math.hypot(dx, dy), _SAME_PLACE * max(1.0, *map(abs, entity.start))
            if is_moved:
                off, reach = math.hypot(dx - across, dy - up), _MOVED * height
            if not off <= reach and not entity.text:
                found.add(entity.offset)
    return found


def _hold_count(
    tallies: Mapping[str, Tally], issued: Issued, loose: Sequence[IssuedEntity]
) -> bool:
    """Hold the number of entities, and the sum of their ids, against the record.

    Returns
    -------
    bool
        Whether entities are missing; then what stands on our layers without a mark may be those.
    """
    first = next(iter(tallies.values()))
    if issued.whole is None:
        return False
    lost = missing(issued.whole, {name: e.part for name, e in issued.marked.items()})
    if lost is None:
        first.hold(WHOLE, 0.0, 1.0, "")
        return False
    kinds = sorted({e.kind for e in loose})
    unmarked = f" (or its mark is lost: {', '.join(kinds)} without one)" if kinds else ""
    if lost.extra:
        first.fail(WHOLE, f"{lost.extra} entities carry ids that were not issued")
    elif lost.name:
        tallies.get(lost.name.partition("/")[0], first).fail(
            WHOLE, f"{lost.name} is missing{unmarked}"
        )
    else:
        of_parts = [f"{count} of {part}" for part, count in lost.parts]
        rest = lost.count - sum(count for _, count in lost.parts)
        words = ", ".join([*of_parts, *([f"{rest} elsewhere"] if rest else [])])
        tally = tallies.get(lost.parts[0][0].partition("/")[0], first) if lost.parts else first
        noun = "entity of ours is" if lost.count == 1 else "entities of ours are"
        unmarked = unmarked.replace("its mark is", "their marks are")
        tally.fail(WHOLE, f"{lost.count} {noun} missing{unmarked}: {words}")
    return not lost.extra


def _hold_leaders(
    tallies: Mapping[str, Tally], sheet: Sheet, places: Sequence[tuple[Point, Point]]
) -> None:
    """Hold marked leaders: each ends on an object that a label names."""
    for name, entity in sheet.named.items():
        tally = tallies.get(name.partition("/")[0])
        if tally is not None and name.endswith("/leader") and entity.kind == "LINE":
            off = min((_off(entity.end, place) for place in places), default=0.0)
            tally.hold(WHOLE, off, 8.0 * sheet.grain, f"{name} points at nothing", entity)


def _strangers(sheet: Sheet, places: Sequence[tuple[Point, Point]]) -> list[IssuedEntity]:
    """List what is on our layers and none of ours; leaders end on what their label names."""
    found = []
    leaders: set[tuple[Point, ...]] = set()
    for entity in sheet.loose:
        if not entity.roles & _OURS_ALONE:
            continue
        is_leader = not sheet.has_marks and _is_leader(entity, sheet, places)
        if not is_leader or entity.points in leaders:
            found.append(entity)
        elif is_leader:
            leaders.add(entity.points)
    return found


def _doubled(issued: Issued) -> list[IssuedEntity]:
    """List texts and lines of tables that stand exactly upon another one."""
    seen: set[tuple[object, ...]] = set()
    found = []
    for entity in issued.unmarked:
        if "table" not in entity.roles:
            continue
        key = (entity.kind, entity.layer.casefold(), entity.points, entity.text)
        if key in seen:
            found.append(entity)
        seen.add(key)
    return found


def _is_leader(entity: IssuedEntity, sheet: Sheet, places: Sequence[tuple[Point, Point]]) -> bool:
    """Tell whether a line runs from beside an object to that object."""
    if entity.kind != "LINE" or entity.is_chain or entity.roles == {"profile"}:
        return False
    near = 8.0 * sheet.grain
    is_short = math.dist(entity.start, entity.end) <= _LONGEST_LEADER * sheet.height
    at_end = any(_off(entity.end, place) <= near for place in places)
    at_start = any(_off(entity.start, place) <= near for place in places)
    return is_short and at_end and not at_start


def _off(point: Point, line: tuple[Point, Point]) -> float:
    """Give the distance of a point from a line between two points."""
    (ax, ay), (bx, by) = line
    square = (bx - ax) ** 2 + (by - ay) ** 2
    share = ((point[0] - ax) * (bx - ax) + (point[1] - ay) * (by - ay)) / square if square else 0.0
    share = min(1.0, max(0.0, share))
    return math.dist(point, (ax + share * (bx - ax), ay + share * (by - ay)))
