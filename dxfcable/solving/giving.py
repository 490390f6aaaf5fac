"""Masts whose stays stretch: which supports give, and from what they start."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.recorded import RecordedHead, RecordedStay

if TYPE_CHECKING:
    from collections.abc import Collection, Iterable, Mapping, Sequence

    from dxfcable.model import Anchorage, Finding, Layout, Mast, Point, Stay
    from dxfcable.solving.built import Standing


_SAME_FOOT = 1e-6


def giving_heads(
    layout: Layout,
    formed: Sequence[Anchorage],
    cut: Collection[int],
    findings: list[Finding],
) -> tuple[tuple[int, RecordedHead], ...]:
    """Find the supports that give after forming, standing where they are drawn.

    Parameters
    ----------
    formed : sequence of Anchorage
        Forces of masts and stays as formed.
    cut : collection of int
        Keys of supports whose cables were cut while they were rigid: they stay so.
    findings : list of Finding
        What has to be said is added.

    Returns
    -------
    tuple of (int, RecordedHead)
        Key of the support, and its members with their unstressed lengths.
    """
    result = []
    for found in formed:
        mast, stays = members_at(layout, found.support)
        if mast is None or not any(_stiffness(stay) for stay in stays):
            continue
        reason = _why_rigid(stays, found)
        if found.support in cut:
            reason = "its cables were cut while it was held; --reform lets it give"
        if reason:
            findings.append(_held_note(found, reason, stays[0]))
            continue
        mast_ea = mast.anchor.ea if mast.anchor else None
        length = math.dist(found.at, mast.foot)
        if mast_ea is not None:
            length = _unstressed(found.at, mast.foot, found.mast or 0.0, mast_ea)
        result.append(
            (
                found.support,
                RecordedHead(
                    support=found.mark,
                    head=found.at,
                    mast_foot=mast.foot,
                    mast_length=length,
                    mast_ea=mast_ea,
                    stays=tuple(_stay(found, s, t) for s, t in _paired(stays, found)),
                ),
            )
        )
    return tuple(result)


def recorded_heads(
    layout: Layout, standing: Mapping[str, Standing], findings: list[Finding]
) -> tuple[tuple[int, RecordedHead], ...]:
    """Return the supports that give under cables already cut, their members as drawn now.

    A head that holds a cable which is formed in this run stays where it is drawn. What was
    changed of the members is added to `findings`.
    """
    result = {}
    for cable in layout.cables:
        if cable.mark not in standing:
            continue
        kept = {head.support: head for head in standing[cable.mark].record.heads}
        for support in cable.supports:
            mast, stays = members_at(layout, support.key)
            head = kept.get(support.mark)
            others = [c for c in layout.cables if support.key in {s.key for s in c.supports}]
            if head is None or mast is None or len(stays) != len(head.stays):
                continue
            if all(c.mark in standing for c in others):
                pairs = zip(head.stays, stays, strict=True)
                result[support.key] = replace(
                    head,
                    mast_foot=mast.foot,
                    stays=tuple(
                        _as_drawn(support.mark, old, stay, findings) for old, stay in pairs
                    ),
                )
    return tuple(result.items())


def _as_drawn(support: str, old: RecordedStay, stay: Stay, findings: list[Finding]) -> RecordedStay:
    """Give a recorded stay the foot and the stiffness that are drawn now; its length stays."""
    said = []
    off = math.dist(old.foot, stay.foot)
    if off > _SAME_FOOT * max(old.length, 1.0):
        said.append(f"its foot was moved by {off:.6g}, its length kept")
    ea = _stiffness(stay) or old.ea
    if not math.isclose(ea, old.ea, rel_tol=1e-9):
        said.append(f"its EA is {ea:g} and was {old.ea:g}; its unstressed length is kept")
    if said:
        findings.append(
            _stay_note("stay-changed", f"stay of support {support}: {', '.join(said)}", stay)
        )
    return replace(old, foot=stay.foot, ea=ea)


def members_at(layout: Layout, support: int) -> tuple[Mast | None, tuple[Stay, ...]]:
    """Return the mast and the stays of a support."""
    masts = [m for m in layout.masts if m.support == support]
    stays = tuple(s for s in layout.stays if s.support == support)
    return (masts[0] if masts else None), stays


def _paired(stays: Sequence[Stay], found: Anchorage) -> Iterable[tuple[Stay, float]]:
    """Pair stays with their forces as formed."""
    return zip(stays, found.stays, strict=True)


def _stay(found: Anchorage, stay: Stay, force: float) -> RecordedStay:
    """Find the length at which a stay carries its force as formed."""
    ea = _stiffness(stay)
    assert ea is not None
    length = _unstressed(found.at, stay.foot, force, ea)
    return RecordedStay(foot=stay.foot, length=length, ea=ea)


def _unstressed(head: Point, foot: Point, force: float, ea: float) -> float:
    """Take the stretch under a force out of a member's length."""
    from dxfcable.statics.heads_layout import unstressed_from

    return unstressed_from(head, foot, force, ea)


def _stiffness(stay: Stay) -> float | None:
    """Return EA of a stay, None where it is not stated."""
    return stay.anchor.ea if stay.anchor else None


def _why_rigid(stays: Sequence[Stay], found: Anchorage) -> str:
    """Say why a head with a stiffness stated is held all the same, "" where it gives."""
    if any(_stiffness(stay) is None for stay in stays):
        return "one of its stays states no EA"
    if any(force <= 0.0 for force in found.stays):
        return "a stay carries no tension as formed"
    return ""


def _held_note(found: Anchorage, reason: str, stay: Stay) -> Finding:
    """Say that a head is held."""
    text = f"support {found.mark} is held rigid in all states: {reason}"
    return _stay_note("supports-rigid", text, stay)


def _stay_note(code: str, text: str, stay: Stay) -> Finding:
    """Make a note about a stay."""
    from dxfcable.model import Finding, Severity

    origin = stay.origin
    return Finding(
        code=code,
        severity=Severity.NOTE,
        text=text,
        handle=origin.handle,
        line=origin.line,
        layer=origin.layer or None,
        at=origin.at,
    )
