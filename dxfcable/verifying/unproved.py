"""What stands in an issued drawing and is held against nothing, told as that."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from dxfcable.drawing.recovery.scales import scales_by_place
from dxfcable.drawing.recovery.schedules import schedules_by_place
from dxfcable.model import Finding, Severity

if TYPE_CHECKING:
    from dxfcable.drawing.issued import Issued, IssuedEntity

CODE = "verify-not-proved"
_TITLES = (
    (re.compile(r"STATES OF CABLE "), "states and envelopes"),
    (re.compile(r"LOADED AREAS IN PLAN\Z"), "loaded areas in plan"),
    (re.compile(r"REVISIONS OF CABLE "), "revisions"),
)


def not_proved(issued: Issued) -> tuple[Finding, ...]:
    """Tell the tables without marks that no law was held against.

    Returns
    -------
    tuple of Finding
        One note that names them; none where there are no such tables, or where their marks
        hold their texts.
    """
    texts = [e for e in issued.unmarked if e.text and "table" in e.roles]
    found = [
        (word, entity)
        for pattern, word in _TITLES
        for entity in texts
        if pattern.match(entity.text)
    ]
    if not found and not issued.marked:
        found = [("another kind", e) for e in _unread(issued) if e.text and "table" in e.roles]
    if not found:
        return ()
    words = list(dict.fromkeys(word for word, _ in found))
    names = " and of ".join([", of ".join(words[:-1]), words[-1]] if words[1:] else words)
    entity = found[0][1]
    note = Finding(
        code=CODE,
        severity=Severity.NOTE,
        text=f"tables of {names} are not proved: their marks are lost",
        remedy="Do not rely on them; solve or revise the drawing, and issue it again.",
        handle=entity.handle,
        layer=entity.layer,
        at=entity.start,
        raw=entity.text,
    )
    return (note,)


def _unread(issued: Issued) -> list[IssuedEntity]:
    """List what belongs to no schedule and to no words of a force diagram."""
    left = list(issued.unmarked)
    for find in (schedules_by_place, scales_by_place):
        known = {e.offset for block in find(left) for e in block.entities()}
        left = [e for e in left if e.offset not in known]
    return left
