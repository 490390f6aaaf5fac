"""Which load text belongs to which load point, and what it says."""

from __future__ import annotations

import math
import statistics
from bisect import bisect_left, bisect_right
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.claims import claim
from dxfcable.drawing.reading.faults import coordinate, listed, place
from dxfcable.drawing.reading.pieces import Kind
from dxfcable.drawing.reading.supports import MARK
from dxfcable.quantities import QuantityError, looks_like_force, parse_load_text

if TYPE_CHECKING:
    from dxfcable.drawing.reading.context import Context
    from dxfcable.drawing.reading.loadpoints import LoadDraft
    from dxfcable.drawing.reading.pieces import Piece


@dataclass(frozen=True, slots=True, kw_only=True)
class _Words:
    """A load text taken apart: mark and force, either may be empty."""

    piece: Piece
    mark: str
    force: str


def read_load_texts(context: Context, drafts: list[LoadDraft]) -> float | None:
    """Give each load text to its point.

    Parameters
    ----------
    context : Context
    drafts : list of LoadDraft
        Filled in.

    Returns
    -------
    float or None
        Median height of the texts that state forces [drawing unit].
    """
    texts, others = _take_apart(context)
    drafts = sorted(drafts, key=lambda d: d.at[0])
    near = _Near(drafts)
    for words in texts:
        draft = _claimed(context, words, drafts, near)
        if draft is None:
            continue
        if words.mark:
            draft.mark = draft.mark or words.mark
        if words.force:
            _read_value(context, words, draft)
    if others:
        layer = context.settings.layers.load
        text = f"texts on {layer} that are no values: {listed(others)}"
        context.faults.note(Code.TEXTS_LISTED, text)
    heights = [w.piece.size for w in texts if w.force and w.piece.size > 0]
    heights += [d.size for d in drafts if d.symbol == "block" and d.cases and d.size > 0]
    return statistics.median(heights) if heights else None


def _take_apart(context: Context) -> tuple[list[_Words], list[str]]:
    """Sort texts into forces, marks and others; texts drawn twice count once."""
    texts: list[_Words] = []
    others: list[str] = []
    seen: set[tuple[object, ...]] = set()
    for piece in context.pieces.of("load", Kind.TEXT):
        key = (piece.text, piece.at)
        if key in seen:
            text = f'"{piece.text}" is drawn twice; it counts once'
            context.faults.note(Code.TEXT_MERGED, text, origin=piece.origin)
            continue
        seen.add(key)
        lines = [line.strip() for line in piece.text.splitlines() if line.strip()]
        first = lines[0] if lines else ""
        has_mark = MARK.fullmatch(first) is not None and not looks_like_force(first)
        rest = " ".join(lines[1:] if has_mark else lines)
        mark = first if has_mark else ""
        if looks_like_force(rest):
            texts.append(_Words(piece=piece, mark=mark, force=rest))
        elif has_mark and not rest:
            texts.append(_Words(piece=piece, mark=mark, force=""))
        elif piece.text:
            others.append(f'"{piece.text}"')
    return texts, others


class _Near:
    """Load points from left to right, so that those near an x need no search of all."""

    def __init__(self, drafts: list[LoadDraft]) -> None:
        self._xs = [d.at[0] for d in drafts]
        self._lean = max((abs(d.shaft[1][0] - d.at[0]) for d in drafts if d.shaft), default=0.0)

    def within(self, x: float, reach: float) -> range:
        """Give the positions of the points that may be within reach of an x."""
        reach += self._lean
        return range(bisect_left(self._xs, x - reach), bisect_right(self._xs, x + reach))


def _claimed(
    context: Context, words: _Words, drafts: list[LoadDraft], near_points: _Near
) -> LoadDraft | None:
    """Find the one point that a text belongs to, or tell why there is none."""
    piece, limits = words.piece, context.settings.limits
    reach = limits.text_reach * piece.size
    # A point further than this decides nothing, but all are needed to say how far the next is.
    window = near_points.within(piece.at[0], reach * limits.text_ratio)
    gaps = [drafts[i].distance(piece.at) for i in window]
    if min(gaps, default=math.inf) > reach:
        window = range(len(drafts))
        gaps = [draft.distance(piece.at) for draft in drafts]
    drafts = [drafts[i] for i in window]
    found = claim(gaps, limits.text_ratio)
    raw = piece.text
    if found.first < 0 or found.first_distance > reach:
        near = ""
        if found.first >= 0:
            near = (
                f"; the nearest, at {place(drafts[found.first].at)}, is "
                f"{coordinate(found.first_distance)} away"
            )
        text = f'"{raw}" has no load point within {coordinate(reach)}{near}'
        remedy = "Move the text to its point, or draw the point; other texts go on another layer."
        _tell(context, words, Code.LOAD_TEXT_UNCLAIMED, text, remedy)
        return None
    if not found.is_clear:
        first, second = drafts[found.first], drafts[found.second]
        text = (
            f'"{raw}" may belong to the load at {place(first.at)} '
            f"({coordinate(found.first_distance)} away) or at {place(second.at)} "
            f"({coordinate(found.second_distance)} away)"
        )
        remedy = f"Move it so that the next point is {limits.text_ratio:g} times as far."
        _tell(context, words, Code.LOAD_TEXT_AMBIGUOUS, text, remedy)
        if words.force:
            first.is_faulty = second.is_faulty = True
        return None
    return drafts[found.first]


def _tell(context: Context, words: _Words, code: Code, text: str, remedy: str) -> None:
    """Stop for a force; a mark alone changes none."""
    faults, origin = context.faults, words.piece.origin
    if words.force:
        faults.error(code, text, remedy, origin=origin)
    else:
        faults.note(Code.MARK_UNCLAIMED, text, remedy, origin=origin)


def _read_value(context: Context, words: _Words, draft: LoadDraft) -> None:
    """Read a text's forces into its point."""
    origin = words.piece.origin
    if draft.value_origin is not None:
        text = f'"{words.piece.text}" is the second value of the load at {place(draft.at)}'
        remedy = "Leave one, or write both by case as D=12k L=6k."
        context.faults.error(Code.LOAD_TEXTS_TWO, text, remedy, origin=origin)
        draft.is_faulty = True
        return
    draft.value_origin = replace(origin, raw=origin.raw or words.piece.text)
    try:
        found = parse_load_text(words.force, context.style, context.settings.cases)
    except QuantityError as error:
        draft.is_faulty = True
        context.faults.doubt(error, origin=origin, raw=words.piece.text)
        return
    draft.cases = {entry.case: entry.force for entry in found.cases}
    for note in found.notes:
        context.faults.note(Code.LOAD_NOTE, note, origin=origin)
