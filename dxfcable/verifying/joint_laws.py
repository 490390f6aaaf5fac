"""Laws of the joints: forces of masts, stays and anchors, and their polygons."""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.naming import unique_parts
from dxfcable.model import Reaction
from dxfcable.pairing import pair
from dxfcable.solving.anchorages import MovedHead, anchorages, loads_at_supports
from dxfcable.verifying.labelling import Wanted
from dxfcable.verifying.measure import agreed
from dxfcable.verifying.words import Kind

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping, Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.drawing.recovery.scales import ScaleBlock
    from dxfcable.model import Anchorage, Layout, Point
    from dxfcable.settings import Settings
    from dxfcable.statics.combinations import Combination
    from dxfcable.verifying.measure import SpanFigures
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.tally import Tally

JOINTS = "joint polygons closed"


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class JointFacts:
    """A joint as statics has it from the measured reactions.

    Attributes
    ----------
    prefix, name : str
        Parts of its ids.
    block : ScaleBlock or None
        Its words and bar.
    scale : float
        Force by length of its polygon.
    error : float
        How well its forces are known [force].
    """

    prefix: str
    name: str
    anchorage: Anchorage
    block: ScaleBlock | None
    scale: float
    error: float

    @property
    def part(self) -> str:
        """First part of the ids of its polygon."""
        return f"{self.prefix}/joint/{self.name}"

    @property
    def sides(self) -> list[tuple[str, str, Point]]:
        """Part of ids, word and vector on the drawing of each side."""
        sides = self.anchorage.sides
        keys = unique_parts([side.name for side in sides], "side")
        return [
            (key, side.name, (side.force[0] / self.scale, side.force[1] / self.scale))
            for key, side in zip(keys, sides, strict=True)
        ]


def reactions_of(layout: Layout, number: int, spans: Sequence[SpanFigures]) -> tuple[Reaction, ...]:
    """Give what each support gives to a cable, from the rays of its force diagrams."""
    supports = layout.cables[number].supports
    found = []
    for k, support in enumerate(supports):
        before = spans[k - 1] if k else None
        after = spans[k] if k < len(spans) else None
        across, up = 0.0, 0.0
        if before is not None:
            across += before.pull
            up += before.vertical(before.pieces - 1, 1)
        if after is not None:
            across -= after.pull
            up -= after.vertical(0, 0)
        across = -across if k == 0 else across  # outward at the ends, to the right at saddles
        found.append(
            Reaction(support=support.key, mark=support.mark, horizontal=across, vertical=up)
        )
    return tuple(found)


def joints_of(
    layout: Layout,
    reactions: Sequence[tuple[Reaction, ...]],
    combinations: Sequence[Combination],
    settings: Settings,
    moved: Mapping[int, Point],
) -> list[tuple[int, str, Anchorage]]:
    """Find the forces at all joints: number of the cable, part of ids, forces.

    `moved` has the heads of masts that do not stand where they are drawn.
    """
    loads = loads_at_supports(layout, combinations)
    heads = {key: MovedHead(at=at, shares=_shares(layout, key)) for key, at in moved.items()}
    found, _ = anchorages(layout, reactions, loads, settings, heads=heads)
    owned: dict[int, list[Anchorage]] = {}
    for anchorage in found:
        holders = (
            k
            for k, cable in enumerate(layout.cables)
            if any(s.key == anchorage.support for s in cable.supports)
        )
        owner = next(holders, None)
        if owner is not None:  # a support that was moved away from its cable holds none
            owned.setdefault(owner, []).append(anchorage)
    return [
        (owner, name, anchorage)
        for owner, group in owned.items()
        for name, anchorage in zip(unique_parts([a.mark for a in group], "S"), group, strict=True)
    ]


def _shares(layout: Layout, support: int) -> tuple[float, ...]:
    """Give the shares of the stays at a support, equal ones where none are stated."""
    stays = [stay for stay in layout.stays if stay.support == support]
    stated = [stay.anchor.share for stay in stays if stay.anchor and stay.anchor.share is not None]
    if len(stated) == len(stays):
        return tuple(stated)
    return tuple(1.0 / len(stays) for _ in stays)


def name_joints(sheet: Sheet, joints: Sequence[JointFacts]) -> None:
    """Find the polygons of joints among the lines that touch each other, by their sides."""
    pool = [e for e in sheet.loose if e.kind == "LINE" and "force_diagram" in e.roles]
    groups = _touching(pool, 4.0 * sheet.grain)
    if sheet.has_marks or not groups or not joints:
        return
    costs = [[_misfit(group, joint) for joint in joints] for group in groups]
    for i, j in pair(costs):
        sides = _drawn(joints[j])
        for k, s in pair(_off(groups[i], sides)):
            sheet.adopt(f"{joints[j].part}/side/{sides[s][0]}", groups[i][k])


def _drawn(joint: JointFacts) -> list[tuple[str, str, Point]]:
    """Leave out sides of no length, which are not drawn."""
    return [side for side in joint.sides if math.hypot(*side[2]) > 0.0]


def _off(
    lines: Sequence[IssuedEntity], sides: Sequence[tuple[str, str, Point]]
) -> list[list[float]]:
    return [
        [
            math.hypot(e.end[0] - e.start[0] - run[0], e.end[1] - e.start[1] - run[1])
            for _, _, run in sides
        ]
        for e in lines
    ]


def _misfit(lines: Sequence[IssuedEntity], joint: JointFacts) -> float:
    sides = _drawn(joint)
    table = _off(lines, sides)
    size = sum(math.hypot(*run) for _, _, run in sides)
    return sum(table[i][j] for i, j in pair(table)) + size * abs(len(lines) - len(sides))


def _touching(lines: Sequence[IssuedEntity], near: float) -> list[list[IssuedEntity]]:
    """Group lines that are joined end to end."""
    left, groups = list(lines), []
    while left:
        group, front = [], [left.pop(0)]
        while front:
            line = front.pop()
            group.append(line)
            joined = [
                e for e in left for p in e.points for q in line.points if math.dist(p, q) <= near
            ]
            front += dict.fromkeys(joined)
            left = [e for e in left if e not in joined]
        if len(group) > 1:
            groups.append(group)
    return groups


def hold_joint(tally: Tally, sheet: Sheet, joint: JointFacts) -> None:
    """Hold a joint's polygon against the forces on it, laid end to end."""
    corner, corners = (0.0, 0.0), [(0.0, 0.0)]
    for _, _, run in joint.sides:
        corner = (corner[0] + run[0], corner[1] + run[1])
        corners.append(corner)
    rows = list(zip(joint.sides, itertools.pairwise(corners), strict=True))
    lines = [(sheet.named.get(f"{joint.part}/side/{key}"), ends) for (key, _, _), ends in rows]
    near = 3.0 * sheet.grain + joint.error / joint.scale
    told = [
        (p[0] - c[0], p[1] - c[1])
        for line, ends in lines
        if line
        for p, c in zip((line.start, line.end), ends, strict=True)
    ]
    origin = agreed(told, near)
    for ((key, word, run), _), (line, ends) in zip(rows, lines, strict=True):
        if line is None or origin is None:
            if math.hypot(*run) > near:
                tally.fail(JOINTS, f"{joint.part}/side/{key} is missing")
            continue
        off = max(
            math.dist(p, (origin[0] + c[0], origin[1] + c[1]))
            for p, c in zip((line.start, line.end), ends, strict=True)
        )
        text = f"{line.id}, the force of {word}, is not in its place in the polygon"
        tally.hold(JOINTS, off, near, text, line)
    if any(joint.anchorage.residual):
        return
    present = [line for line, _ in lines if line]
    if present and len(present) == len([side for side in joint.sides if _is_drawn(side, near)]):
        gap = math.dist(present[0].start, present[-1].end)
        tally.hold(JOINTS, gap, near, f"{joint.part} is not closed", present[-1])


def _is_drawn(side: tuple[str, str, Point], near: float) -> bool:
    return math.hypot(*side[2]) > near


def joint_labels(sheet: Sheet, joint: JointFacts) -> Iterator[Wanted]:
    """Give the labels of a joint: its polygon's sides, its members, its anchors."""
    for key, word, run in _drawn(joint):
        line = sheet.named.get(f"{joint.part}/side/{key}")
        yield Wanted(
            id=f"{joint.part}/value/{key}",
            role="force_diagram",
            words=word.upper(),
            value=math.hypot(*run) * joint.scale,
            slack=joint.error,
            at=(line.start, line.end) if line else ((0.0, 0.0), run),
        )
    found = joint.anchorage
    name = f"{joint.prefix}/anchorage/{joint.name}"
    for number, (force, foot) in enumerate(zip(found.stays, found.stay_feet, strict=False), 1):
        yield _reaction(joint, f"{name}/stay-{number}", "STAY", force, (found.at, foot))
    if found.mast is not None and found.mast_foot is not None:
        yield _reaction(joint, f"{name}/mast", "MAST", found.mast, (found.at, found.mast_foot))
    if abs(found.head_shear) > joint.error:
        at = (found.at, found.at)
        yield _reaction(joint, f"{name}/head-shear", "HEAD SHEAR", found.head_shear, at)
    if abs(found.base_moment) > joint.error and found.mast_foot is not None:
        yield Wanted(
            id=f"{name}/base-moment",
            role="reaction",
            words="BASE MOMENT",
            kind=Kind.MOMENT,
            value=found.base_moment,
            slack=joint.error * math.dist(found.at, found.mast_foot),
            at=(found.mast_foot, found.mast_foot),
        )
    marks = unique_parts([anchor.mark for anchor in found.anchors], "anchor")
    for mark, anchor in zip(marks, found.anchors, strict=True):
        at = (anchor.at, anchor.at)
        yield _reaction(joint, f"{name}/{mark}/H", "H", anchor.horizontal, at)
        yield _reaction(joint, f"{name}/{mark}/uplift", "UPLIFT", anchor.uplift, at)


def _reaction(
    joint: JointFacts, name: str, words: str, value: float, at: tuple[Point, Point]
) -> Wanted:
    return Wanted(id=name, role="reaction", words=words, value=value, slack=joint.error, at=at)


def reaction_labels(
    prefix: str,
    names: Mapping[int, str],
    places: Mapping[int, Point],
    reactions: Sequence[Reaction],
    error: float,
) -> Iterator[Wanted]:
    """Give the labels of what the supports give to a cable; names and places by support."""
    for found in reactions:
        at = (places[found.support], places[found.support])
        for word, value in (("H", found.horizontal), ("V", found.vertical)):
            yield Wanted(
                id=f"{prefix}/reaction/{names[found.support]}/{word}",
                role="reaction",
                words=word,
                value=value,
                slack=error,
                at=at,
            )
