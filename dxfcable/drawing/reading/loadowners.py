"""Which cable carries a load point; two loads of one cable at one x."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.claims import claim
from dxfcable.drawing.reading.faults import coordinate, listed
from dxfcable.drawing.reading.geometry import ordinate

if TYPE_CHECKING:
    from dxfcable.drawing.reading.context import CableDraft, Context, SupportDraft
    from dxfcable.drawing.reading.loadpoints import LoadDraft


@dataclass(slots=True)
class Carried:
    """The loads of one cable: on it, and at its supports with the support's key."""

    loads: list[LoadDraft] = field(default_factory=list)
    at_supports: list[tuple[int, LoadDraft]] = field(default_factory=list)


def share_out(
    context: Context,
    supports: list[SupportDraft],
    cables: list[CableDraft],
    drafts: list[LoadDraft],
) -> list[Carried]:
    """Give each load point to the cable above or below it.

    Parameters
    ----------
    context : Context
    supports, cables, drafts
        As read; `drafts` from left to right.

    Returns
    -------
    list of Carried
        One for each cable.
    """
    carried = [Carried() for _ in cables]
    for draft in drafts:
        i = _cable_of(context, cables, draft)
        _tell_missing(context, draft, None if i is None else cables[i].mark)
        if i is None:
            continue
        key = _support_at(context, supports, cables[i], draft)
        if key is None:
            carried[i].loads.append(draft)
            continue
        carried[i].at_supports.append((key, draft))
        text = f"acts on support {supports[key].mark}, not on the cable"
        context.faults.note(Code.LOAD_AT_SUPPORT, text, origin=draft.origin)
    for i, cable in enumerate(cables):
        carried[i].loads = _one_at_each_x(context, cable, carried[i].loads)
        _check(context, cable, carried[i])
    return carried


def _tell_missing(context: Context, draft: LoadDraft, cable: str | None) -> None:
    """Tell a load point without value, unless its value is told as unreadable already."""
    if not draft.cases and not draft.is_faulty:
        text = f"load point {draft.mark} has no value"
        remedy = "Write its load beside it, or give it by --loads."
        code = Code.LOAD_VALUE_MISSING
        context.faults.error(code, text, remedy, origin=draft.origin, cable=cable)


def _cable_of(context: Context, cables: list[CableDraft], draft: LoadDraft) -> int | None:
    """Find the cable whose string spans a load's x and lies nearest, or tell the doubt."""
    faults = context.faults
    if not cables:
        return None
    if draft.cable:
        for i, cable in enumerate(cables):
            if cable.mark.casefold() == draft.cable.casefold():
                if _spans(context, cable, draft):
                    return i
                _tell_beyond(context, draft)
                return None
        text = f'attribute CABLE names "{draft.cable}", which is not drawn'
        remedy = f"Cables drawn: {listed(c.mark for c in cables)}."
        faults.error(Code.CABLE_UNKNOWN, text, remedy, origin=draft.origin, raw=draft.cable)
        return None
    x, y = draft.at
    gaps = [
        abs(y - ordinate(cable.string, x)) if _spans(context, cable, draft) else math.inf
        for cable in cables
    ]
    found = claim(gaps, context.settings.limits.text_ratio)
    if found.first < 0:
        _tell_beyond(context, draft)
        return None
    if found.is_clear or _is_at_shared_support(context, cables, found.first, found.second, x):
        return found.first
    first, second = cables[found.first], cables[found.second]
    text = (
        f"the load may belong to {first.mark} ({coordinate(found.first_distance)} away) or "
        f"{second.mark} ({coordinate(found.second_distance)} away)"
    )
    remedy = "Name the cable in the load block's attribute CABLE."
    faults.error(Code.LOAD_OWNER_AMBIGUOUS, text, remedy, origin=draft.origin)
    return None


def _spans(context: Context, cable: CableDraft, draft: LoadDraft) -> bool:
    tolerance = context.touch * cable.span
    return cable.string[0][0] - tolerance <= draft.at[0] <= cable.string[-1][0] + tolerance


def _tell_beyond(context: Context, draft: LoadDraft) -> None:
    text = "the load is beyond the supports"
    remedy = "Move it between them; a cable does not cantilever."
    context.faults.error(Code.LOAD_BEYOND_SUPPORTS, text, remedy, origin=draft.origin)


def _is_at_shared_support(
    context: Context, cables: list[CableDraft], first: int, second: int, x: float
) -> bool:
    """Say whether two cables hold a load at one support: it is the support's for both."""
    shared = set(cables[first].keys) & set(cables[second].keys)
    for key in shared:
        at = cables[first].string[cables[first].keys.index(key)]
        if abs(at[0] - x) <= context.touch * cables[first].span:
            return True
    return False


def _support_at(
    context: Context, supports: list[SupportDraft], cable: CableDraft, draft: LoadDraft
) -> int | None:
    for key in cable.keys:
        if abs(supports[key].at[0] - draft.at[0]) <= context.touch * cable.span:
            return key
    return None


def _one_at_each_x(context: Context, cable: CableDraft, loads: list[LoadDraft]) -> list[LoadDraft]:
    """Merge loads drawn twice at one x, and tell those that differ."""
    kept: list[LoadDraft] = []
    tolerance = context.touch * cable.span
    for draft in loads:
        if not kept or draft.at[0] - kept[-1].at[0] > tolerance:
            if kept and draft.at[0] - kept[-1].at[0] <= 100 * tolerance:
                gap = draft.at[0] - kept[-1].at[0]
                text = f"is {gap:.3g} beside another load in x; both are kept"
                context.faults.note(Code.NEAR_DUPLICATE, text, origin=draft.origin)
            kept.append(draft)
            continue
        x = coordinate(draft.at[0])
        if draft.says()[0] == kept[-1].says()[0]:
            text = f"two equal loads at X = {x} are taken as one"
            context.faults.note(Code.LOAD_MERGED, text, origin=draft.origin, cable=cable.mark)
            continue
        text = f"two loads at X = {x}; sum or one?"
        remedy = "Draw one load point there."
        context.faults.error(
            Code.LOAD_CONFLICT, text, remedy, origin=draft.origin, cable=cable.mark
        )
    return kept


def _check(context: Context, cable: CableDraft, carried: Carried) -> None:
    """Tell mixed cases and repeated marks."""
    faults = context.faults
    every = [*carried.loads, *(draft for _, draft in carried.at_supports)]
    bare = [d for d in every if "load" in d.cases]
    cased = [d for d in every if set(d.cases) - {"load"}]
    if bare and cased:
        text = (
            f"cable {cable.mark} has values with load cases and without; "
            f"without: {listed(d.mark for d in bare)}"
        )
        remedy = "Write the case before each value, as D=12k."
        faults.error(Code.CASES_MIXED, text, remedy, origin=bare[0].origin, cable=cable.mark)
    marks = [d.mark for d in carried.loads]
    twice = sorted({mark for mark in marks if marks.count(mark) > 1})
    if twice:
        text = f"cable {cable.mark} has two load points marked {listed(twice)}"
        faults.note(Code.MARK_REPEATED, text, cable=cable.mark)
    if not every:
        text = f"cable {cable.mark} has no load points"
        faults.note(Code.NO_LOADS, text, cable=cable.mark, origin=cable.origin)
