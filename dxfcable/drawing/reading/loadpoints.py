"""Load points as drawn: points, circles, blocks and vertical arrows, and what is only symbol."""

from __future__ import annotations

import math
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import coordinate, place
from dxfcable.drawing.reading.geometry import Places, distance, to_segment
from dxfcable.drawing.reading.pieces import Kind
from dxfcable.drawing.reading.tags import Tags
from dxfcable.model import LoadSymbol
from dxfcable.quantities import QuantityError, add, parse_force, parse_load_text

if TYPE_CHECKING:
    from dxfcable.drawing.reading.context import Context
    from dxfcable.drawing.reading.pieces import Piece
    from dxfcable.forces import Force
    from dxfcable.model import Origin, Point

_VERTICAL = math.tan(math.radians(1.0))
_SYMBOLS = {
    Kind.POINT: LoadSymbol.POINT,
    Kind.CIRCLE: LoadSymbol.CIRCLE,
    Kind.BLOCK: LoadSymbol.BLOCK,
}
_ORDER = (LoadSymbol.BLOCK, LoadSymbol.POINT, LoadSymbol.CIRCLE, LoadSymbol.ARROW)


@dataclass(slots=True, kw_only=True)
class LoadDraft:
    """A load point while it is being understood.

    `shaft` is an arrow's line from its lower to its upper end. `is_faulty` means that its
    value was found but does not read, so that it is not told as missing too.
    """

    at: Point
    symbol: LoadSymbol
    origin: Origin
    shaft: tuple[Point, Point] | None = None
    size: float = 0.0
    mark: str = ""
    cable: str = ""
    clamped: bool = False
    cases: dict[str, Force] = field(default_factory=dict)
    value_origin: Origin | None = None
    is_faulty: bool = False

    def distance(self, point: Point) -> float:
        """Give the distance of a point from the load point, or from its whole shaft."""
        gap = distance(point, self.at)
        return min(gap, to_segment(point, *self.shaft)) if self.shaft else gap

    def says(self) -> tuple[object, ...]:
        """Give what two drafts of one load have in common."""
        values = tuple((case, force.value, force.unit) for case, force in self.cases.items())
        return values, self.mark, self.cable, self.clamped


def read_load_points(context: Context, tolerance: float) -> list[LoadDraft]:
    """Read where loads act.

    Parameters
    ----------
    context : Context
    tolerance : float
        Points within it are one [drawing unit].

    Returns
    -------
    list of LoadDraft
        In file order, one for each place; values from attributes only.
    """
    drafts: list[LoadDraft] = []
    slanted: list[Piece] = []
    kinds = (Kind.POINT, Kind.CIRCLE, Kind.BLOCK, Kind.LINE, Kind.POLYLINE, Kind.LEADER)
    for piece in context.pieces.of("load", *kinds):
        symbol = _SYMBOLS.get(piece.kind)
        if symbol is None:
            shaft = _shaft(context, piece)
            if shaft is None:
                slanted.append(piece)
            else:
                drafts.append(
                    LoadDraft(
                        at=shaft[0], symbol=LoadSymbol.ARROW, origin=piece.origin, shaft=shaft
                    )
                )
            continue
        draft = LoadDraft(at=piece.at, symbol=symbol, origin=piece.origin, size=piece.size)
        if symbol is LoadSymbol.BLOCK:
            _read_attributes(context, piece, draft)
        drafts.append(draft)
    drafts = _merge_places(context, _merge_shafts(drafts, tolerance), tolerance)
    _sort_out(context, slanted, drafts, tolerance)
    return drafts


def _shaft(context: Context, piece: Piece) -> tuple[Point, Point] | None:
    """Give lower and upper end of a line within 1 degree of vertical, None for others."""
    if piece.is_closed or len(piece.points) < 2:
        return None
    points = piece.points[:2] if piece.kind is Kind.LEADER else piece.points
    (x0, y0), (x1, y1) = points[0], points[-1]
    if abs(y1 - y0) == 0 or abs(x1 - x0) > _VERTICAL * abs(y1 - y0):
        return None
    if any(to_segment(p, points[0], points[-1]) > _VERTICAL * abs(y1 - y0) for p in points):
        return None
    if piece.kind is Kind.LEADER:
        if y1 < y0:
            text = "the leader points up"
            remedy = "Start it at the load point and lead it upward; uplift is said by the text."
            context.faults.error(Code.LEADER_UP, text, remedy, origin=piece.origin)
        return points[0], points[1]
    return (points[0], points[-1]) if y0 < y1 else (points[-1], points[0])


def _read_attributes(context: Context, piece: Piece, draft: LoadDraft) -> None:
    """Read mark, cable and values of a block."""
    tags = Tags(context, piece)
    draft.mark, draft.cable = tags.text("MARK"), tags.text("CABLE")
    draft.clamped = tags.yes("CLAMPED")
    cases = context.settings.cases
    faults = context.faults
    seen: dict[str, str] = {}
    for tag, text in tags.left():
        case = cases.find(tag)
        if case is None and tag != "LOAD":
            continue
        tags.drop(tag)
        draft.value_origin = draft.value_origin or replace(piece.origin, raw=f"{tag}={text}")
        try:
            if case is None:
                found = parse_load_text(text, context.style, cases)
                entries = [(c.case, c.force) for c in found.cases]
            else:
                entries = [(case, parse_force(text, context.style))]
        except QuantityError as error:
            draft.is_faulty = True
            faults.doubt(error, origin=piece.origin, raw=text)
            continue
        for name, force in entries:
            if force.note:
                faults.note(Code.LOAD_NOTE, force.note, origin=piece.origin, raw=text)
            if name in draft.cases:
                said = f"{seen[name]} and {tag} are both case {name}; their values are added"
                faults.note(Code.TAG_REPEATED, said, origin=piece.origin)
                draft.cases[name] = add(draft.cases[name], force)
            else:
                draft.cases[name] = force
            seen.setdefault(name, tag)
    tags.finish()


def _merge_shafts(drafts: list[LoadDraft], tolerance: float) -> list[LoadDraft]:
    """Make one arrow of vertical lines that lie on, or end at, one another."""
    arrows = sorted((d for d in drafts if d.shaft), key=lambda d: d.at[1])
    widths = [abs(d.shaft[1][0] - d.shaft[0][0]) for d in arrows if d.shaft]
    cell = max(widths, default=0.0) + tolerance or 1.0
    columns: dict[int, list[LoadDraft]] = {}
    dropped: set[int] = set()
    for draft in arrows:
        column = math.floor(draft.at[0] / cell)
        near = [d for k in (-1, 0, 1) for d in columns.get(column + k, ())]
        if any(_continues(known, draft, tolerance) for known in near):
            dropped.add(id(draft))
        else:
            columns.setdefault(column, []).append(draft)
    return [d for d in drafts if id(d) not in dropped]


def _continues(known: LoadDraft, draft: LoadDraft, tolerance: float) -> bool:
    """Say whether a line starts on an arrow's shaft, and lengthen the shaft by it."""
    if known.shaft is None or draft.shaft is None or draft.at == known.at:
        return False
    low, high = known.shaft
    if to_segment(draft.at, low, high) > tolerance:
        return False
    if draft.shaft[1][1] > high[1]:
        known.shaft = (low, draft.shaft[1])
    return True


def _merge_places(context: Context, drafts: list[LoadDraft], tolerance: float) -> list[LoadDraft]:
    """Make one load point of what is drawn at one place."""
    merged: list[LoadDraft] = []
    places = Places(tolerance)
    for draft in drafts:
        i = places.find(draft.at)
        if i >= 0:
            merged[i] = _merged(context, merged[i], draft)
        else:
            places.add(draft.at, len(merged))
            merged.append(draft)
    return merged


def _merged(context: Context, known: LoadDraft, draft: LoadDraft) -> LoadDraft:
    """Keep the better of two symbols at one place, with an arrow's shaft."""
    if known.symbol is draft.symbol:
        if known.symbol is LoadSymbol.BLOCK and known.says() != draft.says():
            text = f"two loads at {place(draft.at)}; sum or one?"
            remedy = "Draw one load point with one value for each case."
            context.faults.error(Code.LOAD_CONFLICT, text, remedy, origin=draft.origin)
        elif known.symbol is not LoadSymbol.CIRCLE or known.size == draft.size:
            text = f"is drawn over {known.origin.handle or 'another'}; they are taken as one"
            context.faults.note(Code.LOAD_MERGED, text, origin=draft.origin)
    first, second = sorted((known, draft), key=lambda d: _ORDER.index(d.symbol))
    first.shaft = first.shaft or second.shaft
    first.is_faulty = first.is_faulty or second.is_faulty
    return first


def _sort_out(
    context: Context, slanted: list[Piece], drafts: list[LoadDraft], tolerance: float
) -> None:
    """Take lines that hang together with a load point as symbol; tell the others."""
    ends = Places(tolerance)
    for i, draft in enumerate(drafts):
        for end in draft.shaft or (draft.at,):
            ends.add(end, i)
    left, symbols = list(slanted), 0
    is_growing = True
    while is_growing:
        is_growing = False
        for piece in list(left):
            if _touches(piece, ends, drafts, tolerance):
                left.remove(piece)
                for vertex in piece.points:
                    ends.add(vertex, 0)
                symbols += 1
                is_growing = True
    if symbols:
        text = f"{symbols} lines that touch load points are taken as symbol"
        context.faults.note(Code.SYMBOL_PIECES, text)
    for piece in left:
        if piece.is_closed:
            text = "is closed, so no arrow: taken as symbol"
            context.faults.note(Code.SYMBOL_PIECES, text, origin=piece.origin)
            continue
        far = piece.points[-1] if piece.points else (0.0, 0.0)
        text = f"runs to ({coordinate(far[0])}, {coordinate(far[1])}), not vertical"
        remedy = "Loads act vertically: draw a vertical arrow, or move it to another layer."
        context.faults.error(Code.ARROW_SLANTED, text, remedy, origin=piece.origin)


def _touches(piece: Piece, ends: Places, drafts: list[LoadDraft], tolerance: float) -> bool:
    """Say whether a line shares an end with a symbol, stands on a shaft or within a circle."""
    for vertex in piece.points:
        if ends.find(vertex) >= 0:
            return True
        for draft in drafts:
            if draft.shaft and to_segment(vertex, *draft.shaft) <= tolerance:
                return True
            is_circle = draft.symbol is LoadSymbol.CIRCLE
            if is_circle and distance(vertex, draft.at) <= draft.size + tolerance:
                return True
    return False
