"""Deck and clearance lines below the cables, and frames for force diagrams."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.claims import claim
from dxfcable.drawing.reading.faults import coordinate
from dxfcable.drawing.reading.geometry import between, ordinate, runs_to_the_right
from dxfcable.drawing.reading.owners import owner
from dxfcable.drawing.reading.pieces import Kind
from dxfcable.model import Rectangle

if TYPE_CHECKING:
    from dxfcable.drawing.reading.context import CableDraft, Context
    from dxfcable.drawing.reading.pieces import Piece
    from dxfcable.model import Origin, Point

_Line = tuple[tuple["Point", ...], "Origin"]


def read_lines(context: Context, cables: list[CableDraft], role: str) -> list[tuple[Point, ...]]:
    """Read deck or clearance lines.

    Parameters
    ----------
    context : Context
    cables : list of CableDraft
    role : str
        `deck` or `clearance`.

    Returns
    -------
    list of tuple of Point
        For each cable its line from left to right, () where there is none.
    """
    lines = [
        line
        for piece in context.pieces.of(role, Kind.LINE, Kind.POLYLINE)
        if (line := _to_the_right(context, piece)) is not None
    ]
    parts: list[list[_Line]] = [[] for _ in cables]
    for line in lines:
        taken = [i for i in range(len(cables)) if _is_under(context, cables, i, line)]
        for i in taken:
            parts[i].append(line)
        if cables and not taken:
            text = f"the {role} line is under no cable"
            context.faults.note(Code.OWNER_MISSING, text, origin=line[1])
    return [_chain(context, cables[i], parts[i], role) for i in range(len(cables))]


def _to_the_right(context: Context, piece: Piece) -> _Line | None:
    """Give a line's vertices from left to right, None where it runs back."""
    points = piece.points
    if len(points) > 1 and points[0][0] > points[-1][0]:
        points = points[::-1]
    if piece.is_closed or len(points) < 2 or not runs_to_the_right(points, 0.0):
        text = "the line closes, runs back in x or has a vertical part"
        remedy = "Draw it from left to right, one y for each x."
        context.faults.error(Code.POLYLINE_BACK, text, remedy, origin=piece.origin)
        return None
    return points, piece.origin


def _is_under(context: Context, cables: list[CableDraft], i: int, line: _Line) -> bool:
    """Say whether a line belongs to a cable: it overlaps in x, and no other cable is as near."""
    points, origin = line
    string = cables[i].string
    left, right = max(points[0][0], string[0][0]), min(points[-1][0], string[-1][0])
    tolerance = context.touch * cables[i].span
    if right - left <= tolerance:
        return False
    middle = (left + right) / 2
    rivals = [
        cable
        for cable in cables
        if cable is cables[i] or cable.string[0][0] < middle < cable.string[-1][0]
    ]
    y = ordinate(points, middle)
    gaps = [abs(y - ordinate(cable.string, middle)) for cable in rivals]
    found = claim(gaps, context.settings.limits.text_ratio)
    if not found.is_clear and cables[i] is rivals[found.first]:
        text = (
            f"the line at {coordinate(middle)} may belong to {rivals[found.first].mark} or "
            f"{rivals[found.second].mark}"
        )
        remedy = "Draw the cables in views that are further apart."
        context.faults.error(Code.OWNER_AMBIGUOUS, text, remedy, origin=origin)
    return rivals[found.first] is cables[i]


def _chain(context: Context, cable: CableDraft, parts: list[_Line], role: str) -> tuple[Point, ...]:
    """Join the lines of one cable end to end."""
    parts = sorted(parts, key=lambda line: line[0][0])
    result: list[Point] = []
    tolerance = context.touch * cable.span
    for points, origin in parts:
        if result and tuple(points) == tuple(result[-len(points) :]):
            text = f"the {role} line is drawn twice; it counts once"
            context.faults.note(Code.LINE_MERGED, text, origin=origin, cable=cable.mark)
            continue
        if result and points[0][0] < result[-1][0] - tolerance:
            text = f"is a second {role} line over the same x"
            remedy = "Keep one, or let them follow each other."
            context.faults.error(Code.POLYLINE_TWO, text, remedy, origin=origin, cable=cable.mark)
            continue
        is_joined = bool(result) and points[0][0] - result[-1][0] <= tolerance
        result.extend(points[1:] if is_joined else points)
    return tuple(result)


def read_frames(context: Context, cables: list[CableDraft]) -> dict[int, Rectangle]:
    """Read the rectangles that force diagrams go into.

    Parameters
    ----------
    context : Context
    cables : list of CableDraft

    Returns
    -------
    dict of int to Rectangle
        By the cable's position in `cables`.
    """
    frames: dict[int, Rectangle] = {}
    for piece in context.pieces.of("frame", Kind.POLYLINE, Kind.LINE):
        rectangle = _rectangle(context, piece)
        if rectangle is None:
            text = "the frame is no upright rectangle drawn as one closed polyline"
            remedy = "Draw it with the rectangle command."
            context.faults.error(Code.FRAME_UNCLEAR, text, remedy, origin=piece.origin)
            continue
        outline = (*piece.points, piece.points[0])
        gaps = [between(outline, cable.string) for cable in cables]
        cable = owner(context, cables, gaps, "the frame", piece.origin)
        if cable is None:
            continue
        i = next(n for n, known in enumerate(cables) if known is cable)
        if i in frames:
            text = f"is the second frame of cable {cable.mark}"
            context.faults.error(Code.FRAME_UNCLEAR, text, "Keep one.", origin=piece.origin)
        else:
            frames[i] = rectangle
    return frames


def _rectangle(context: Context, piece: Piece) -> Rectangle | None:
    points = list(piece.points)
    if len(points) == 5 and points[0] == points[-1]:
        points.pop()
    elif not piece.is_closed:
        return None
    if len(points) != 4:
        return None
    xs, ys = [p[0] for p in points], [p[1] for p in points]
    x0, y0, x1, y1 = min(xs), min(ys), max(xs), max(ys)
    slack = context.touch * max(x1 - x0, y1 - y0)
    if min(x1 - x0, y1 - y0) <= slack:
        return None
    corners = {(abs(x - x0) <= slack, abs(y - y0) <= slack) for x, y in points}
    is_square = all(
        min(abs(x - x0), abs(x - x1)) <= slack and min(abs(y - y0), abs(y - y1)) <= slack
        for x, y in points
    )
    return Rectangle(x0=x0, y0=y0, x1=x1, y1=y1) if is_square and len(corners) == 4 else None
