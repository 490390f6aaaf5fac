"""Hanger points of a framing plan: where they stand, and the load points that they mean."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.claims import claim
from dxfcable.drawing.reading.faults import coordinate, listed, place
from dxfcable.drawing.reading.geometry import Places, distance
from dxfcable.drawing.reading.pieces import Kind
from dxfcable.drawing.reading.supports import MARK
from dxfcable.drawing.reading.tags import Tags
from dxfcable.forces import looks_like_force
from dxfcable.model import PlanPoint

if TYPE_CHECKING:
    from dxfcable.drawing.reading.context import Context
    from dxfcable.drawing.reading.pieces import Piece

_ORDER = (Kind.BLOCK, Kind.POINT, Kind.CIRCLE)  # of several symbols at one place the first counts


def read_plan_points(context: Context, tolerance: float) -> list[PlanPoint]:
    """Read the hanger points of a plan.

    Parameters
    ----------
    context : Context
    tolerance : float
        Points within it are one [drawing unit].

    Returns
    -------
    list of PlanPoint
        In file order; those without a mark are told and left out.
    """
    pieces = sorted(
        context.pieces.of("plan_point", *_ORDER), key=lambda piece: _ORDER.index(piece.kind)
    )
    points: list[PlanPoint] = []
    places = Places(tolerance)
    for piece in pieces:
        point = _point(context, piece)
        known = places.find(point.at)
        if known < 0:
            places.add(point.at, len(points))
            points.append(point)
        else:
            _merge(context, points[known], point)
    points = _read_texts(context, points)
    for point in points:
        if not point.mark:
            text = "the hanger point of the plan has no mark"
            remedy = "Write the mark of its load point beside it, or in the attribute MARK."
            context.faults.error(Code.PLAN_MARK_MISSING, text, remedy, origin=point.origin)
    return sorted((p for p in points if p.mark), key=lambda p: p.origin.line or 0)


def _point(context: Context, piece: Piece) -> PlanPoint:
    """Read a symbol, and a block's attributes."""
    mark = cable = ""
    if piece.kind is Kind.BLOCK:
        tags = Tags(context, piece)
        mark, cable = tags.text("MARK"), tags.text("CABLE")
        tags.finish()
    return PlanPoint(mark=mark, at=piece.at, cable=cable, origin=piece.origin)


def _merge(context: Context, known: PlanPoint, point: PlanPoint) -> None:
    """Take what is drawn at one place as one point, unless it says two things."""
    same = (known.mark.casefold(), known.cable.casefold())
    if point.mark and (point.mark.casefold(), point.cable.casefold()) != same:
        text = f"two hanger points at {place(point.at)}, marked {known.mark} and {point.mark}"
        remedy = "Leave one."
        context.faults.error(Code.PLAN_MARK_REPEATED, text, remedy, origin=point.origin)
    elif known.origin.kind == point.origin.kind:
        text = f"is drawn over {known.origin.handle or 'another'}; they are taken as one"
        context.faults.note(Code.PLAN_MERGED, text, origin=point.origin)


def _read_texts(context: Context, points: list[PlanPoint]) -> list[PlanPoint]:
    """Give each mark to the point beside it."""
    faults, others = context.faults, []
    marks: dict[int, str] = {}
    for piece in context.pieces.of("plan_point", Kind.TEXT):
        if looks_like_force(piece.text) and not MARK.fullmatch(piece.text):
            text = f'"{piece.text}" reads as a force, but points of a plan get theirs from areas'
            remedy = "Write it at the load point in the elevation, or on another layer."
            faults.error(Code.LOAD_TEXT_UNCLAIMED, text, remedy, origin=piece.origin)
        elif MARK.fullmatch(piece.text):
            k = _claimed(context, piece, points)
            if k is None:
                continue
            stated = points[k].mark or marks.get(k, "")
            if stated and stated.casefold() != piece.text.casefold():
                text = f'"{piece.text}" is the second mark of the point at {place(points[k].at)}'
                remedy = f"Leave one of {stated} and {piece.text}."
                faults.error(Code.PLAN_MARK_REPEATED, text, remedy, origin=piece.origin)
                continue
            marks[k] = stated or piece.text
        elif piece.text:
            others.append(f'"{piece.text}"')
    if others:
        layer = context.settings.layers.plan_point
        faults.note(Code.TEXTS_LISTED, f"texts on {layer} that are no marks: {listed(others)}")
    return [
        PlanPoint(mark=marks[k], at=p.at, cable=p.cable, origin=p.origin) if k in marks else p
        for k, p in enumerate(points)
    ]


def _claimed(context: Context, piece: Piece, points: list[PlanPoint]) -> int | None:
    """Find the one point that a mark belongs to, or tell why there is none."""
    limits, faults = context.settings.limits, context.faults
    reach = limits.text_reach * piece.size
    found = claim([distance(piece.at, point.at) for point in points], limits.text_ratio)
    if found.first < 0 or found.first_distance > reach:
        text = f'mark "{piece.text}" has no hanger point within {coordinate(reach)}'
        remedy = "Move it to its point."
        faults.note(Code.MARK_UNCLAIMED, text, remedy, origin=piece.origin)
        return None
    if not found.is_clear and math.isfinite(found.second_distance):
        first, second = points[found.first], points[found.second]
        text = (
            f'mark "{piece.text}" may belong to the hanger point at {place(first.at)} or at '
            f"{place(second.at)}"
        )
        remedy = f"Move it so that the next point is {limits.text_ratio:g} times as far."
        faults.error(Code.MARK_UNCLAIMED, text, remedy, origin=piece.origin)
        return None
    return found.first
