"""Arrows and arrowheads held against what they show."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.naming import unique_parts
from dxfcable.pairing import pair

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping, Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.model import Point, Reaction
    from dxfcable.verifying.joint_laws import JointFacts
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.tally import Tally

ARROWS = "arrows point as forces act"
_STRAIGHT = 1e-3  # of a head's size: how far its tip may be off its axis
_APART = 1e6
_SHORT_MEMBER = 4.5  # text heights: shorter members need not have arrowheads


@dataclass(frozen=True, slots=True, kw_only=True)
class WantedArrow:
    """An arrow beside a support or an anchor.

    Attributes
    ----------
    towards : Point
        Unit vector along its force; level or upright.
    """

    id: str
    at: Point
    towards: Point


@dataclass(frozen=True, slots=True, kw_only=True)
class WantedHead:
    """An arrowhead at the end of a line; on a member it may stand anywhere."""

    id: str
    tip: Point
    towards: Point
    member: tuple[Point, Point] | None = None


def name_arrows(sheet: Sheet, wanted: Sequence[WantedArrow]) -> None:
    """Find arrows without marks: level and upright lines near their points."""
    pool = [e for e in sheet.loose if e.kind == "LINE" and "reaction" in e.roles]
    if sheet.has_marks or not pool or not wanted:
        return
    costs = [[_arrow_cost(line, arrow, sheet.height) for arrow in wanted] for line in pool]
    for i, j in pair(costs):
        if costs[i][j] < _APART:
            sheet.adopt(wanted[j].id, pool[i])


def _arrow_cost(line: IssuedEntity, arrow: WantedArrow, height: float) -> float:
    run = (line.end[0] - line.start[0], line.end[1] - line.start[1])
    length = math.hypot(*run)
    if not length or not math.isfinite(length):
        return _APART
    along = (run[0] * arrow.towards[0] + run[1] * arrow.towards[1]) / length
    away = min(math.dist(line.start, arrow.at), math.dist(line.end, arrow.at))
    return away + 40.0 * height * (1.0 - along)


def hold_arrows(tally: Tally, sheet: Sheet, wanted: Sequence[WantedArrow]) -> None:
    """Hold the direction of each arrow against the force it shows."""
    for arrow in wanted:
        line = sheet.named.get(arrow.id)
        if line is None or len(line.points) < 2:
            tally.fail(ARROWS, f"{arrow.id} is missing")
            continue
        run = (line.end[0] - line.start[0], line.end[1] - line.start[1])
        length = math.hypot(*run)
        along = run[0] * arrow.towards[0] + run[1] * arrow.towards[1]
        off = math.hypot(run[0] - along * arrow.towards[0], run[1] - along * arrow.towards[1])
        off = off if along > 0.0 else length + off
        text = f"{arrow.id} does not point as its force acts"
        tally.hold(ARROWS, off, 4.0 * sheet.grain, text, line)
    pairs: dict[str, list[IssuedEntity]] = {}
    for arrow in wanted:
        line = sheet.named.get(arrow.id)
        if line is not None and len(line.points) > 1:
            pairs.setdefault(arrow.id.rpartition("/")[0], []).append(line)
    for name, lines in pairs.items():
        if len(lines) == 2:
            first, second = lines
            gap = min(math.dist(p, q) for p in first.points for q in second.points)
            text = f"the arrows of {name} do not meet in a corner"
            tally.hold(ARROWS, gap, 4.0 * sheet.grain, text, first)
            uneven = abs(math.dist(*first.points) - math.dist(*second.points))
            text = f"the arrows of {name} are not alike"
            tally.hold(ARROWS, uneven, 8.0 * sheet.grain, text, second)


def heads_of_lines(sheet: Sheet, prefix: str, without: frozenset[str]) -> Iterator[WantedHead]:
    """Give the arrowheads that lines of a cable must have; `without` names those that have none."""
    for name, line in list(sheet.named.items()):
        if not name.startswith(f"{prefix}/") or line.kind != "LINE" or line.start == line.end:
            continue
        run = (line.end[0] - line.start[0], line.end[1] - line.start[1])
        back = (-run[0], -run[1])
        rest = name.removeprefix(f"{prefix}/")
        if re.fullmatch(r"(sag|span|pole-distance)/\d+", rest):
            yield WantedHead(id=f"{name}/head-1", tip=line.start, towards=back)
            yield WantedHead(id=f"{name}/head-2", tip=line.end, towards=run)
        elif re.fullmatch(r"load-line/\d+", rest):
            if name not in without:
                yield WantedHead(id=f"{name}/head", tip=line.end, towards=run)
        elif rest.endswith("-arrow"):
            yield WantedHead(id=f"{name.removesuffix('-arrow')}-head", tip=line.end, towards=run)
        elif "/side/" in name and rest.startswith("joint/"):
            yield WantedHead(id=name.replace("/side/", "/head/"), tip=line.end, towards=run)


def reaction_arrows(
    prefix: str,
    names: Mapping[int, str],
    places: Mapping[int, Point],
    reactions: Sequence[Reaction],
    error: float,
) -> Iterator[WantedArrow]:
    """Give the arrows of what the supports give to a cable."""
    first = reactions[0].support
    for found in reactions:
        outward = -1.0 if found.support == first else 1.0
        name, at = f"{prefix}/reaction/{names[found.support]}", places[found.support]
        if abs(found.horizontal) > error:
            side = outward if found.horizontal > 0.0 else -outward
            yield WantedArrow(id=f"{name}/H-arrow", at=at, towards=(side, 0.0))
        if abs(found.vertical) > error:
            up = 1.0 if found.vertical > 0.0 else -1.0
            yield WantedArrow(id=f"{name}/V-arrow", at=at, towards=(0.0, up))


def anchor_arrows(joint: JointFacts) -> Iterator[WantedArrow]:
    """Give the arrows of a joint's anchors: pulled towards the head, lifted or pressed."""
    found = joint.anchorage
    marks = unique_parts([anchor.mark for anchor in found.anchors], "anchor")
    for mark, anchor in zip(marks, found.anchors, strict=True):
        name = f"{joint.prefix}/anchorage/{joint.name}/{mark}"
        if abs(anchor.horizontal) > joint.error:
            side = 1.0 if anchor.at[0] > found.at[0] else -1.0
            towards = (-side if anchor.horizontal > 0.0 else side, 0.0)
            yield WantedArrow(id=f"{name}/H-arrow", at=anchor.at, towards=towards)
        if abs(anchor.uplift) > joint.error:
            up = 1.0 if anchor.uplift > 0.0 else -1.0
            yield WantedArrow(id=f"{name}/uplift-arrow", at=anchor.at, towards=(0.0, up))


def member_heads(joint: JointFacts, height: float) -> Iterator[WantedHead]:
    """Give the arrowheads on stays and masts: away from both joints in tension, else to them."""
    found = joint.anchorage
    name = f"{joint.prefix}/anchorage/{joint.name}"
    rows = [
        (f"{name}/stay-{n}", foot, force)
        for n, (foot, force) in enumerate(zip(found.stay_feet, found.stays, strict=False), 1)
    ]
    if found.mast is not None and found.mast_foot is not None:
        rows.append((f"{name}/mast", found.mast_foot, found.mast))
    for key, foot, force in rows:
        if abs(force) <= joint.error or math.dist(found.at, foot) < _SHORT_MEMBER * height:
            continue
        turn = 1.0 if force > 0.0 else -1.0
        for number, (here, there) in enumerate(((found.at, foot), (foot, found.at)), start=1):
            towards = (turn * (there[0] - here[0]), turn * (there[1] - here[1]))
            yield WantedHead(
                id=f"{key}/head-{number}", tip=here, towards=towards, member=(here, there)
            )


def name_heads(sheet: Sheet, wanted: Sequence[WantedHead]) -> None:
    """Find arrowheads without marks by their tips."""
    pool = [e for e in sheet.loose if e.kind == "SOLID"]
    if sheet.has_marks or not pool or not wanted:
        return
    costs = [[_head_cost(solid, head, sheet.height) for head in wanted] for solid in pool]
    for i, j in pair(costs):
        if costs[i][j] < _APART:
            sheet.adopt(wanted[j].id, pool[i])


def _head_cost(solid: IssuedEntity, head: WantedHead, height: float) -> float:
    """Tell how far a solid is from being a head, its direction counting for some heights."""
    ax, ay = _axis(solid)
    bx, by = _unit(head.towards)
    if head.member is None:
        away = math.dist(solid.start, head.tip)
    else:
        away = _off_line(solid.start, head.member) + 0.01 * math.dist(solid.start, head.tip)
    cost = away + height * (1.0 - ax * bx - ay * by)
    return cost if math.isfinite(cost) else _APART


def hold_heads(tally: Tally, sheet: Sheet, wanted: Sequence[WantedHead]) -> None:
    """Hold each arrowhead: its tip at the end of its line, its axis along it."""
    for head in wanted:
        solid = sheet.named.get(head.id)
        if solid is None or len(solid.points) < 3:
            tally.fail(ARROWS, f"arrowhead {head.id} is missing")
            continue
        off = (
            math.dist(solid.start, head.tip)
            if head.member is None
            else _off_line(solid.start, head.member)
        )
        text = f"arrowhead {head.id} is off its line"
        tally.hold(ARROWS, off, 4.0 * sheet.grain, text, solid)
        (ax, ay), (bx, by) = _axis(solid), _unit(head.towards)
        size = math.dist(solid.start, solid.points[1])
        turn = abs(ax * by - ay * bx) if ax * bx + ay * by > 0.0 else 2.0
        allowed = _STRAIGHT + 8.0 * sheet.grain / size if size else 0.0
        text = f"arrowhead {head.id} does not point along its line"
        tally.hold(ARROWS, turn, allowed, text, solid)


def _axis(solid: IssuedEntity) -> Point:
    """Give the direction from the middle of a solid's back to its tip."""
    if len(solid.points) < 3:
        return math.nan, math.nan
    tip, a, b = solid.points[:3]
    return _unit((tip[0] - 0.5 * (a[0] + b[0]), tip[1] - 0.5 * (a[1] + b[1])))


def _unit(vector: Point) -> Point:
    length = math.hypot(*vector)
    return (vector[0] / length, vector[1] / length) if length else (math.nan, math.nan)


def _off_line(point: Point, line: tuple[Point, Point]) -> float:
    """Give the distance of a point from a line through two points."""
    (ax, ay), (bx, by) = line
    length = math.dist(*line)
    if not length:
        return math.inf
    return abs((point[0] - ax) * (by - ay) - (point[1] - ay) * (bx - ax)) / length
