"""Support points: drawn as points, circles or blocks; merged, marked, with their elevations."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Protocol

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.claims import claim
from dxfcable.drawing.reading.context import SupportDraft
from dxfcable.drawing.reading.faults import listed, place
from dxfcable.drawing.reading.geometry import distance
from dxfcable.drawing.reading.pieces import Kind
from dxfcable.drawing.reading.tags import Tags
from dxfcable.model import SupportKind
from dxfcable.quantities import QuantityError, parse_length

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.reading.context import Context
    from dxfcable.drawing.reading.pieces import Piece

_ELEVATION = re.compile(r"(?:elevation|elev|el)\b[ .:=]*[+-]?\d", re.IGNORECASE)
MARK = re.compile(r"[A-Za-z]{1,4}[-.]?\d{1,4}[A-Za-z']?|[A-Z]\Z", re.ASCII)
_NEAR = 100.0  # times the tolerance: near, though not one point


class Marked(Protocol):
    """Whatever has a mark, "" where none is drawn."""

    mark: str


def read_supports(context: Context) -> list[SupportDraft]:
    """Read the support points of a drawing.

    Parameters
    ----------
    context : Context

    Returns
    -------
    list of SupportDraft
        From left to right, then top to bottom; points within the tolerance are one.
    """
    pieces = context.pieces.of("support", Kind.POINT, Kind.CIRCLE, Kind.BLOCK)
    drafts = [_draft(context, piece) for piece in pieces]
    tolerance = merging_tolerance(context, drafts)
    merged = _merge(context, drafts, tolerance)
    _tell_near(context, merged, tolerance)
    merged.sort(key=lambda s: (round(s.at[0] / tolerance) if tolerance else s.at[0], -s.at[1]))
    _read_texts(context, merged)
    pieces_of_symbols = context.pieces.of("support", Kind.LINE, Kind.POLYLINE, Kind.LEADER)
    if pieces_of_symbols:
        text = f"{len(pieces_of_symbols)} lines on {pieces_of_symbols[0].origin.layer} are symbol"
        remedy = "" if pieces else "Draw a POINT or the support block where the cable is held."
        context.faults.note(Code.SYMBOL_PIECES, text, remedy, origin=pieces_of_symbols[0].origin)
    number_marks(merged, "S")
    return merged


def number_marks(drafts: Sequence[Marked], prefix: str) -> None:
    """Give marks to those without, in their order, leaving out marks that are drawn."""
    taken = {draft.mark for draft in drafts}
    number = 0
    for draft in drafts:
        if draft.mark:
            continue
        number += 1
        while f"{prefix}{number}" in taken:
            number += 1
        draft.mark = f"{prefix}{number}"


def merging_tolerance(context: Context, drafts: list[SupportDraft]) -> float:
    """Give the distance within which supports are one: a share of the shortest string."""
    strings = context.pieces.of("string", Kind.LINE, Kind.POLYLINE)
    spans = [distance(s.points[0], s.points[-1]) for s in strings]
    spans = [span for span in spans if span > 0]
    if spans:
        return context.touch * min(spans)
    return context.touch * max(
        (distance(a.at, b.at) for a in drafts for b in drafts[:2]), default=0.0
    )


def _draft(context: Context, piece: Piece) -> SupportDraft:
    """Read one support with its attributes."""
    draft = SupportDraft(at=piece.at, origin=piece.origin, is_block=piece.kind == Kind.BLOCK)
    if not draft.is_block:
        return draft
    tags = Tags(context, piece)
    draft.mark = tags.text("MARK")
    draft.elevation = tags.length("EL")
    kind = tags.text("KIND")
    if kind:
        try:
            draft.kind = SupportKind(kind.casefold())
        except ValueError:
            tags.unread("KIND", kind, "Write FIXED, ROLLER, SHEAVE or PINNED.")
            draft.kind = SupportKind.FIXED
        if draft.kind is SupportKind.END:
            draft.kind = None
    tags.finish()
    return draft


def _merge(context: Context, drafts: list[SupportDraft], tolerance: float) -> list[SupportDraft]:
    """Make one of supports at one point; a block's attributes win over a bare point."""
    merged: list[SupportDraft] = []
    for draft in drafts:
        for i, known in enumerate(merged):
            if distance(known.at, draft.at) <= tolerance:
                both = known.is_block and draft.is_block
                if both and _says(known) != _says(draft):
                    text = f"two supports at {place(draft.at)} say different things"
                    remedy = "Delete one."
                    context.faults.error(Code.SUPPORT_CONFLICT, text, remedy, origin=draft.origin)
                else:
                    text = "is at another support's point; they are taken as one"
                    context.faults.note(Code.SUPPORT_MERGED, text, origin=draft.origin)
                if draft.is_block and not known.is_block:
                    merged[i] = draft
                break
        else:
            merged.append(draft)
    return merged


def _says(draft: SupportDraft) -> tuple[object, ...]:
    return draft.mark, draft.kind, draft.elevation


def _tell_near(context: Context, drafts: list[SupportDraft], tolerance: float) -> None:
    for i, first in enumerate(drafts):
        for second in drafts[:i]:
            gap = distance(first.at, second.at)
            if tolerance < gap <= _NEAR * tolerance:
                text = f"is {gap:.3g} from the support at {place(second.at)}, and not the same"
                context.faults.note(Code.NEAR_DUPLICATE, text, origin=first.origin)


def _read_texts(context: Context, drafts: list[SupportDraft]) -> None:
    """Give elevations and marks written beside supports to those that have none."""
    limits, faults = context.settings.limits, context.faults
    others: list[str] = []
    for piece in context.pieces.of("support", Kind.TEXT):
        is_elevation = _ELEVATION.match(piece.text) is not None
        if not is_elevation and not MARK.fullmatch(piece.text):
            others.append(f'"{piece.text}"')
            continue
        found = claim([distance(piece.at, d.at) for d in drafts], limits.text_ratio)
        if not found.is_clear or found.first_distance > limits.text_reach * piece.size:
            text = f'"{piece.text}" belongs to no support, or to two'
            if is_elevation:
                remedy = "Move it nearer to its support, or use the attribute EL."
                faults.error(Code.MARK_UNCLAIMED, text, remedy, origin=piece.origin)
            else:
                faults.note(Code.MARK_UNCLAIMED, text, origin=piece.origin)
            continue
        draft = drafts[found.first]
        if not is_elevation:
            draft.mark = draft.mark or piece.text
        elif draft.elevation is None:
            try:
                comma = context.style.decimal_comma
                draft.elevation = parse_length(piece.text, context.unit, decimal_comma=comma)
            except QuantityError as error:
                faults.doubt(error, origin=piece.origin, raw=piece.text)
    if others:
        layer = context.settings.layers.support
        faults.note(Code.TEXTS_LISTED, f"texts on {layer} that are not read: {listed(others)}")
