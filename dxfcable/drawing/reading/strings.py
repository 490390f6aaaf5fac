"""Closing strings: which supports one cable joins."""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.context import CableDraft
from dxfcable.drawing.reading.faults import coordinate, listed, place
from dxfcable.drawing.reading.geometry import distance, nearest, to_segment
from dxfcable.drawing.reading.pieces import Kind
from dxfcable.model import Origin

if TYPE_CHECKING:
    from dxfcable.drawing.reading.context import Context, SupportDraft
    from dxfcable.drawing.reading.pieces import Piece

_DRAW = "Draw a line from support to support on {layer} for each cable."


def read_strings(context: Context, supports: list[SupportDraft]) -> list[CableDraft]:
    """Find the cables of a drawing.

    Parameters
    ----------
    context : Context
    supports : list of SupportDraft

    Returns
    -------
    list of CableDraft
        From left to right, then top to bottom, each with two supports or more.
    """
    pieces = context.pieces.of("string", Kind.LINE, Kind.POLYLINE)
    if len(supports) < 2:
        _tell_few(context, supports)
        return []
    if not pieces:
        chains = _without_strings(context, supports)
    else:
        chains = _joined(context, supports, _drawn(context, supports, pieces))
        _tell_unused(context, supports, chains)
    cables = [
        CableDraft(keys=keys, string=tuple(supports[k].at for k in keys), origin=origin)
        for keys, origin in chains
    ]
    cables = [cable for cable in cables if _has_width(context, supports, cable)]
    for cable in cables:
        _check_saddles(context, supports, cable)
    cables.sort(key=lambda c: (c.string[0][0], -c.string[0][1], c.keys))
    return cables


_Chain = tuple[tuple[int, ...], Origin]


def _tell_few(context: Context, supports: list[SupportDraft]) -> None:
    layer = context.settings.layers.support
    remedy = f"Draw a POINT, a CIRCLE or the support block on {layer} at each end of the cable."
    if supports:
        text = "is the only support; a cable needs two"
        context.faults.error(Code.ONE_SUPPORT, text, remedy, origin=supports[0].origin)
    else:
        context.faults.error(Code.NO_SUPPORTS, f"no support is drawn on {layer}", remedy)


def _without_strings(context: Context, supports: list[SupportDraft]) -> list[_Chain]:
    """Join two supports, or two ends and the saddles between them."""
    keys = tuple(sorted(range(len(supports)), key=lambda k: supports[k].at[0]))
    if len(keys) == 2:
        return [(keys, supports[keys[0]].origin)]
    if all(supports[k].kind for k in keys[1:-1]) and not (
        supports[keys[0]].kind or supports[keys[-1]].kind
    ):
        names = listed(supports[k].mark for k in keys)
        text = f"no closing string: one cable is taken from {names.replace(', ', ' over ')}"
        context.faults.note(Code.SADDLES_WITHOUT_STRING, text)
        return [(keys, supports[keys[0]].origin)]
    layer = context.settings.layers.string
    text = f"{len(keys)} supports ({listed(supports[k].mark for k in keys)}) and no closing string"
    context.faults.error(Code.STRING_MISSING, text, _DRAW.format(layer=layer))
    return []


def _drawn(
    context: Context, supports: list[SupportDraft], pieces: tuple[Piece, ...]
) -> list[_Chain]:
    """Turn each line into the supports it joins; lines drawn twice count once."""
    chains: list[_Chain] = []
    for piece in pieces:
        keys = _supports_of(context, supports, piece)
        if not keys:
            continue
        chains.append((keys, piece.origin))
    chains.sort(key=lambda chain: -len(chain[0]))  # long ones first, so that parts find them
    kept: list[_Chain] = []
    for keys, origin in chains:
        whole = next((k for k, _ in kept if _holds(k, keys)), None)
        if whole is None:
            kept.append((keys, origin))
        else:
            text = "lies on another closing string; they are taken as one"
            context.faults.note(Code.STRING_MERGED, text, origin=origin)
    return kept


def _holds(whole: tuple[int, ...], part: tuple[int, ...]) -> bool:
    n = len(part)
    return any(whole[i : i + n] == part for i in range(len(whole) - n + 1))


def _supports_of(context: Context, supports: list[SupportDraft], piece: Piece) -> tuple[int, ...]:
    """Give the supports that a line joins from left to right, () where it is at fault."""
    faults, points = context.faults, [s.at for s in supports]
    vertices = piece.points
    size = max(distance(vertices[0], vertex) for vertex in vertices)
    tolerance = context.touch * size
    for vertex in vertices:
        i, gap = nearest(vertex, points)
        if gap > tolerance:
            text = (
                f"the closing string's vertex {place(vertex)} touches no support; "
                f"{supports[i].mark} is {coordinate(gap)} away"
            )
            faults.error(Code.STRING_FREE, text, "Snap it to the support.", origin=piece.origin)
            return ()
    keys: list[int] = []
    for start, end in pairwise(vertices):
        on = [k for k, p in enumerate(points) if to_segment(p, start, end) <= tolerance]
        on.sort(key=lambda k, start=start: distance(start, points[k]))  # type: ignore[misc]
        keys += [k for k in on if not keys or keys[-1] != k]
    if len(keys) < 2:
        text = "the closing string joins fewer than two supports"
        faults.error(Code.STRING_FREE, text, "Draw it to the next one.", origin=piece.origin)
        return ()
    if points[keys[0]][0] > points[keys[-1]][0]:
        keys.reverse()
    if any(points[b][0] < points[a][0] - tolerance for a, b in pairwise(keys)):
        text = "the closing string runs back in x"
        remedy = "Draw it from left to right, one line for each cable."
        faults.error(Code.STRING_BACK, text, remedy, origin=piece.origin)
        return ()
    return tuple(keys)


def _joined(context: Context, supports: list[SupportDraft], chains: list[_Chain]) -> list[_Chain]:
    """Join strings that meet at a support with a saddle's KIND."""
    for key, support in enumerate(supports):
        if support.kind is None:
            continue
        left = [c for c in chains if c[0][-1] == key]
        right = [c for c in chains if c[0][0] == key]
        through = [c for c in chains if key in c[0][1:-1]]
        if len(left) == 1 and len(right) == 1 and not through:
            chains = [c for c in chains if c is not left[0] and c is not right[0]]
            chains.append((left[0][0] + right[0][0][1:], left[0][1]))
        elif len(left) + len(right) + 2 * len(through) > 2:
            text = f"more than two closing strings meet at saddle {support.mark}"
            remedy = "Leave KIND blank where cables end, and draw one polyline over a saddle."
            context.faults.error(Code.STRING_BRANCH, text, remedy, origin=support.origin)
    return chains


def _tell_unused(context: Context, supports: list[SupportDraft], chains: list[_Chain]) -> None:
    used = {key for keys, _ in chains for key in keys}
    for key, support in enumerate(supports):
        if key not in used:
            text = f"support {support.mark} is joined by no closing string"
            remedy = _DRAW.format(layer=context.settings.layers.string)
            context.faults.error(Code.SUPPORT_UNUSED, text, remedy, origin=support.origin)


def _has_width(context: Context, supports: list[SupportDraft], cable: CableDraft) -> bool:
    """Tell neighbouring supports at one x."""
    result = True
    for a, b in pairwise(cable.keys):
        (x0, y0), (x1, y1) = supports[a].at, supports[b].at
        if x1 - x0 <= context.touch * max(distance((x0, y0), (x1, y1)), abs(cable.span)):
            text = f"supports {supports[a].mark} and {supports[b].mark} are at one x"
            remedy = "A cable hangs between supports that are apart; X is horizontal."
            context.faults.error(Code.SAME_X, text, remedy, origin=supports[b].origin)
            result = False
    return result


def _check_saddles(context: Context, supports: list[SupportDraft], cable: CableDraft) -> None:
    """Tell saddles that do not say how the cable passes."""
    for key in cable.keys[1:-1]:
        support = supports[key]
        if support.kind is None:
            block = context.settings.blocks.support
            text = f"saddle {support.mark} does not say how the cable passes"
            remedy = f"Use block {block} with KIND = FIXED, ROLLER, SHEAVE or PINNED."
            context.faults.error(Code.SADDLE_KIND_MISSING, text, remedy, origin=support.origin)
