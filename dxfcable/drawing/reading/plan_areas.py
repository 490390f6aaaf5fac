"""Loaded areas of a framing plan: outlines, openings, pressures, the direction of the deck."""

from __future__ import annotations

import math
from dataclasses import dataclass, field, replace
from itertools import pairwise
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import listed, place
from dxfcable.drawing.reading.geometry import distance, to_segment
from dxfcable.drawing.reading.pieces import Kind
from dxfcable.drawing.reading.rings import enclosed, innermost
from dxfcable.forces import looks_like_force
from dxfcable.pressures import parse_pressure_text
from dxfcable.units import QuantityError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.reading.context import Context
    from dxfcable.drawing.reading.pieces import Piece
    from dxfcable.model import Origin, Point
    from dxfcable.pressures import Pressure

_XY = (0, 1)
_PARALLEL = math.sin(math.radians(1.0))


@dataclass(slots=True, kw_only=True)
class AreaDraft:
    """A closed outline on the area layer while it is being understood.

    One without a text of its own that lies in another is an opening of that.
    """

    ring: tuple[Point, ...]
    origin: Origin
    holes: list[tuple[Point, ...]] = field(default_factory=list)
    pressures: tuple[tuple[str, Pressure], ...] = ()
    value_origin: Origin | None = None
    text_height: float = 0.0
    direction: tuple[Point, Point] | None = None


def read_areas(context: Context, tolerance: float) -> list[AreaDraft]:
    """Read the loaded areas of a drawing.

    Parameters
    ----------
    context : Context
    tolerance : float
        Points within it touch [drawing unit].

    Returns
    -------
    list of AreaDraft
        From left to right, then top to bottom; without pressures where those do not read.
    """
    drafts, lines = _outlines(context, tolerance)
    rings = [draft.ring for draft in drafts]
    _read_texts(context, drafts, rings, tolerance)
    areas = _sort_openings(context, drafts, tolerance)
    _read_directions(context, drafts, rings, lines, tolerance)
    step = tolerance or 1.0
    areas.sort(key=lambda d: (round(min(x for x, _ in d.ring) / step), -max(y for _, y in d.ring)))
    return areas


def _outlines(context: Context, tolerance: float) -> tuple[list[AreaDraft], list[Piece]]:
    """Sort pieces into closed outlines and lines; tell what is neither."""
    faults = context.faults
    drafts: list[AreaDraft] = []
    lines: list[Piece] = []
    for piece in context.pieces.of("area", Kind.LINE, Kind.POLYLINE, Kind.CIRCLE):
        if piece.kind is Kind.CIRCLE:
            text = "a circle is not read as a loaded area or opening"
            faults.error(Code.AREA_SHAPE, text, "Draw it as a polyline.", origin=piece.origin)
            continue
        points = piece.points
        meets = len(points) > 3 and distance(points[0], points[-1]) <= tolerance
        ring = points[:-1] if meets else points
        if not (piece.is_closed or meets):
            lines.append(piece)
        elif len(ring) < 3 or enclosed(ring) <= tolerance**2:
            text = "the outline encloses nothing"
            faults.error(Code.AREA_SHAPE, text, "Draw its corners.", origin=piece.origin)
        elif _crosses_itself(ring):
            text = "the outline crosses itself"
            remedy = "Draw its corners in order, or two areas."
            faults.error(Code.AREA_SHAPE, text, remedy, origin=piece.origin)
        elif any(_is_same(draft.ring, ring, tolerance) for draft in drafts):
            text = "the outline is drawn twice; it counts once"
            faults.note(Code.AREA_MERGED, text, origin=piece.origin)
        else:
            drafts.append(AreaDraft(ring=ring, origin=piece.origin))
    return drafts, lines


def _crosses_itself(ring: Sequence[Point]) -> bool:
    """Say whether two sides of a ring that are not neighbours cross or touch."""
    sides = list(pairwise((*ring, ring[0])))
    for i, (a, b) in enumerate(sides):
        for k, (c, d) in enumerate(sides[i + 2 :], start=i + 2):
            if (i, k) == (0, len(sides) - 1):
                continue
            if any(
                max(a[v], b[v]) < min(c[v], d[v]) or max(c[v], d[v]) < min(a[v], b[v]) for v in _XY
            ):
                continue
            if _turn(a, b, c) * _turn(a, b, d) <= 0 and _turn(c, d, a) * _turn(c, d, b) <= 0:
                return True
    return False


def _turn(a: Point, b: Point, c: Point) -> float:
    """Give twice the area of a triangle, positive counter-clockwise."""
    return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])


def _is_same(one: Sequence[Point], other: Sequence[Point], tolerance: float) -> bool:
    """Say whether two outlines are one, drawn twice."""
    return len(one) == len(other) and all(
        any(distance(a, b) <= tolerance for b in other) for a in one
    )


def _read_texts(
    context: Context, drafts: list[AreaDraft], rings: Sequence[Sequence[Point]], tolerance: float
) -> None:
    """Give each pressure to the innermost outline about it."""
    faults = context.faults
    others: list[str] = []
    seen: set[tuple[str, Point]] = set()
    for piece in context.pieces.of("area", Kind.TEXT):
        if (piece.text, piece.at) in seen:
            text = f'"{piece.text}" is drawn twice; it counts once'
            faults.note(Code.TEXT_MERGED, text, origin=piece.origin)
            continue
        seen.add((piece.text, piece.at))
        lines = [line.strip() for line in piece.text.splitlines() if line.strip()]
        words = " ".join(line for line in lines if looks_like_force(line))
        others += [f'"{line}"' for line in lines if not looks_like_force(line)]
        if not words:
            continue
        k = innermost(rings, [piece.at], tolerance)
        if k < 0:
            where = "no loaded area" if k == -1 else "several areas that overlap"
            text = f'"{piece.text}" stands in {where}'
            remedy = "Place its alignment point inside the one area that it is for."
            faults.error(Code.AREA_TEXT_STRAY, text, remedy, origin=piece.origin)
            continue
        draft = drafts[k]
        if draft.value_origin is not None:
            text = f'"{piece.text}" is the second pressure of one area'
            remedy = "Write all cases in one text, as D=1.2 kPa L=4 kPa."
            faults.error(Code.AREA_TEXTS_TWO, text, remedy, origin=piece.origin)
            draft.pressures = ()
            continue
        _read_pressures(context, piece, words, draft)
    if others:
        text = f"texts on {context.settings.layers.area} that are no values: {listed(others)}"
        faults.note(Code.TEXTS_LISTED, text)


def _read_pressures(context: Context, piece: Piece, words: str, draft: AreaDraft) -> None:
    """Read a text's pressures into its area."""
    faults, origin = context.faults, piece.origin
    draft.value_origin = replace(origin, raw=origin.raw or piece.text)
    draft.text_height = piece.size
    try:
        found = parse_pressure_text(words, context.style, context.settings.cases)
    except QuantityError as error:
        faults.doubt(error, origin=origin, raw=piece.text)
        return
    draft.pressures = found.cases
    for note in found.notes:
        faults.note(Code.LOAD_NOTE, note, origin=origin)


def _sort_openings(context: Context, drafts: list[AreaDraft], tolerance: float) -> list[AreaDraft]:
    """Give outlines without a text to the area that they lie in; tell those that lie in none."""
    areas = [draft for draft in drafts if draft.value_origin is not None]
    for draft in drafts:
        if draft.value_origin is not None:
            continue
        others = [d for d in drafts if d is not draft and enclosed(d.ring) > enclosed(draft.ring)]
        k = innermost([d.ring for d in others], draft.ring, tolerance)
        if k >= 0 and others[k].value_origin is not None:
            others[k].holes.append(draft.ring)
            continue
        text = "the loaded area has no pressure"
        remedy = "Write it inside, as D=1.2 kPa; an opening lies wholly inside one area."
        if k >= 0:
            text = "the outline lies in another without a pressure"
            remedy = "Write a pressure inside it if it is loaded; openings lie in loaded areas."
        context.faults.error(Code.AREA_TEXT_MISSING, text, remedy, origin=draft.origin)
    return areas


def _read_directions(
    context: Context,
    drafts: list[AreaDraft],
    rings: Sequence[Sequence[Point]],
    lines: list[Piece],
    tolerance: float,
) -> None:
    """Give each line to the innermost outline about it; the strokes of its arrows are symbol."""
    faults = context.faults
    found: dict[int, list[Piece]] = {}
    for piece in lines:
        k = innermost(rings, piece.points, tolerance)
        if k >= 0:
            found.setdefault(k, []).append(piece)
            continue
        text = "the line stands in no loaded area, and encloses none"
        remedy = "Close the outline of an area; draw the direction of a deck inside its area."
        faults.error(Code.AREA_DIRECTION, text, remedy, origin=piece.origin)
    for k, pieces in found.items():
        if drafts[k].value_origin is None:
            continue  # strokes across an opening
        pieces.sort(key=_length, reverse=True)
        first = pieces[0]
        start, end = first.points[0], first.points[-1]
        if any(to_segment(p, start, end) > tolerance for p in first.points):
            text = "the line is neither closed nor straight"
            remedy = "Close it for an area, or draw one LINE for the direction of the deck."
            faults.error(Code.AREA_DIRECTION, text, remedy, origin=first.origin)
            continue
        drafts[k].direction = (start, end)
        for piece in pieces[1:]:
            ends = (piece.points[0], piece.points[-1])
            is_stroke = any(distance(a, b) <= tolerance for a in ends for b in (start, end))
            if not is_stroke and not _is_along(ends, (start, end)):
                text = f"the area has another direction already, from {place(start)}"
                remedy = "Leave one line for the direction of the deck."
                faults.error(Code.AREA_DIRECTION, text, remedy, origin=piece.origin)


def _length(piece: Piece) -> float:
    return distance(piece.points[0], piece.points[-1])


def _is_along(one: tuple[Point, Point], other: tuple[Point, Point]) -> bool:
    """Say whether two lines run the same way within a degree."""
    (ax, ay), (bx, by) = ((q[0] - p[0], q[1] - p[1]) for p, q in (one, other))
    return abs(ax * by - ay * bx) <= _PARALLEL * math.hypot(ax, ay) * math.hypot(bx, by)
