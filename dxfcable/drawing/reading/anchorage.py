"""Masts, stays and the anchor blocks at their feet."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import coordinate, place
from dxfcable.drawing.reading.geometry import distance, nearest
from dxfcable.drawing.reading.pieces import Kind
from dxfcable.drawing.reading.tags import Tags
from dxfcable.model import Anchor, Mast, Stay
from dxfcable.quantities import convert

if TYPE_CHECKING:
    from dxfcable.drawing.reading.context import Context, SupportDraft
    from dxfcable.drawing.reading.pieces import Piece
    from dxfcable.model import Origin, Point
    from dxfcable.quantities import Force

_Leg = tuple[int, "Point", "Origin"]
_CODES = {
    "mast": (Code.MAST_FREE, Code.MAST_UP),
    "stay": (Code.STAY_FREE, Code.STAY_UP),
}


class Anchorages:
    """Masts and stays of a drawing, with forces as written until the force unit is known.

    Parameters
    ----------
    context : Context
    supports : list of SupportDraft
    tolerance : float
        Within which a line touches a point [drawing unit].
    """

    def __init__(self, context: Context, supports: list[SupportDraft], tolerance: float) -> None:
        self._context = context
        self._supports = supports
        self._tolerance = tolerance
        self._masts = self._legs("mast")
        self._stays = self._legs("stay")
        self._anchors: list[tuple[Anchor, Force | None, Force | None]] = []
        self._check_masts()
        self._read_anchors()

    def forces(self) -> list[Force]:
        """List the forces stated, in file order."""
        return [f for _, ea, weight in self._anchors for f in (ea, weight) if f is not None]

    def masts(self, force_unit: str) -> tuple[Mast, ...]:
        """Give the masts, forces in `force_unit`."""
        return tuple(
            Mast(support=key, foot=foot, anchor=self._anchor_at(foot, force_unit), origin=origin)
            for key, foot, origin in self._masts
        )

    def stays(self, force_unit: str) -> tuple[Stay, ...]:
        """Give the stays, forces in `force_unit`."""
        return tuple(
            Stay(support=key, foot=foot, anchor=self._anchor_at(foot, force_unit), origin=origin)
            for key, foot, origin in self._stays
        )

    def _legs(self, role: str) -> list[_Leg]:
        """Read lines from a support down to a foot; lines drawn twice count once."""
        legs: list[_Leg] = []
        for piece in self._context.pieces.of(role, Kind.LINE, Kind.POLYLINE):
            leg = self._leg(piece, role)
            if leg is None:
                continue
            if any(
                k == leg[0] and distance(foot, leg[1]) <= self._tolerance for k, foot, _ in legs
            ):
                text = f"the {role} is drawn twice; it counts once"
                self._context.faults.note(Code.LINE_MERGED, text, origin=piece.origin)
                continue
            legs.append(leg)
        return legs

    def _leg(self, piece: Piece, role: str) -> _Leg | None:
        faults, free, up = self._context.faults, *_CODES[role]
        points = [s.at for s in self._supports]
        if not points:
            return None
        if len(piece.points) != 2:
            text = f"the {role} is no straight line"
            remedy = "Draw one line from the support to the foot."
            faults.error(free, text, remedy, origin=piece.origin)
            return None
        ends = sorted(piece.points, key=lambda p: nearest(p, points)[1])
        key, gap = nearest(ends[0], points)
        if gap > self._tolerance:
            text = (
                f"the {role} starts at no support; {self._supports[key].mark} is "
                f"{coordinate(gap)} away from {place(ends[0])}"
            )
            faults.error(free, text, "Snap it to the support.", origin=piece.origin)
            return None
        foot = ends[1]
        if nearest(foot, points)[1] <= self._tolerance or foot[1] >= points[key][1]:
            text = f"the {role} does not run down from support {self._supports[key].mark}"
            remedy = "Draw it from the support down to base or anchor."
            faults.error(up, text, remedy, origin=piece.origin)
            return None
        return key, foot, piece.origin

    def _check_masts(self) -> None:
        seen: set[int] = set()
        for key, _, origin in self._masts:
            if key in seen:
                text = f"support {self._supports[key].mark} has a second mast"
                self._context.faults.error(Code.MAST_TWO, text, "Keep one.", origin=origin)
            seen.add(key)

    def _read_anchors(self) -> None:
        """Read the anchor blocks; each stands at a foot."""
        context = self._context
        feet = [foot for _, foot, _ in (*self._masts, *self._stays)]
        for piece in context.pieces.of("anchor", Kind.BLOCK):
            if piece.block.casefold() != context.settings.blocks.anchor.casefold():
                text = f"block {piece.block} is no {context.settings.blocks.anchor}"
                remedy = "Use that block, or name yours in [blocks]."
                context.faults.error(Code.BLOCK_UNKNOWN, text, remedy, origin=piece.origin)
                continue
            entry = self._anchor(piece)
            i, gap = nearest(piece.at, feet)
            if gap > self._tolerance:
                near = f"; the nearest is {coordinate(gap)} away" if i >= 0 else ""
                text = f"the anchor block is at no foot of a stay or mast{near}"
                remedy = "Snap it to the foot."
                context.faults.error(Code.ANCHOR_FREE, text, remedy, origin=piece.origin)
            elif any(distance(a.at, piece.at) <= self._tolerance for a, _, _ in self._anchors):
                text = "is the second anchor block at one foot"
                context.faults.error(Code.ANCHOR_TWO, text, "Keep one.", origin=piece.origin)
            else:
                self._anchors.append(entry)

    def _anchor(self, piece: Piece) -> tuple[Anchor, Force | None, Force | None]:
        tags = Tags(self._context, piece)
        mark, ea, weight = tags.text("MARK"), tags.stiffness("EA"), tags.force("WEIGHT")
        strand = tags.text("STRAND")
        if strand:
            text = f'STRAND "{strand}" of an anchor block is not read in this version'
            remedy = "State EA instead."
            faults = self._context.faults
            faults.error(Code.LATER_STRAND, text, remedy, origin=piece.origin, raw=strand)
        anchor = Anchor(
            mark=mark,
            at=piece.at,
            share=tags.number("SHARE"),
            mu=tags.number("MU"),
            fs_slide=tags.number("FS_SLIDE"),
            fs_uplift=tags.number("FS_UPLIFT"),
            origin=piece.origin,
        )
        tags.finish()
        return anchor, ea, weight

    def _anchor_at(self, foot: Point, force_unit: str) -> Anchor | None:
        for anchor, ea, weight in self._anchors:
            if distance(anchor.at, foot) <= self._tolerance:
                return Anchor(
                    mark=anchor.mark,
                    at=anchor.at,
                    ea=convert(ea.value, ea.unit, force_unit) if ea else None,
                    share=anchor.share,
                    weight=convert(weight.value, weight.unit, force_unit) if weight else None,
                    mu=anchor.mu,
                    fs_slide=anchor.fs_slide,
                    fs_uplift=anchor.fs_uplift,
                    origin=anchor.origin,
                )
        return None
