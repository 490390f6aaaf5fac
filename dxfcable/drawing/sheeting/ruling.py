"""Schedules ruled for a paper: columns as narrow as it asks for, too wide ones in parts."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.drawing.sheeting.ruled_table import CONTINUED, RuledTable
from dxfcable.drawing.sheeting.title_block import places
from dxfcable.drawing.sheeting.title_texts import fitted

if TYPE_CHECKING:
    from collections.abc import Iterable

    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.drawing.sheeting.ruled_table import Schedule

_WIDEST = (44.0, 30.0, 22.0, 16.0, 11.0, 8.0)  # columns of tables, in text heights


def ruled(schedules: Iterable[Schedule], name: str, paper: Paper) -> list[RuledTable]:
    """Rule schedules, their columns as narrow as the paper asks for; too wide ones in parts."""
    x0, _, x1, _ = places(paper).main
    return [table for content in schedules for table in _ruled(content, name, paper.text, x1 - x0)]


def _ruled(content: Schedule, name: str, height: float, room: float) -> list[RuledTable]:
    """Rule one schedule; one with too many columns is parted, its first column in each part."""
    content = replace(content, title=fitted(content.title + CONTINUED, room, height)[0])
    content = replace(content, title=content.title.removesuffix(CONTINUED))
    for widest in _WIDEST:
        table = RuledTable(schedule=content, name=name, height=height, widest=widest)
        if table.size[0] <= room:
            return [table]
    count = len(content.head)
    if count <= 2:
        return [table]
    middle = 1 + (count - 1) // 2
    return [
        part
        for number, kept in enumerate(((0, *range(1, middle)), (0, *range(middle, count))))
        for part in _ruled(_with_columns(content, kept, number), name, height, room)
    ]


def _with_columns(content: Schedule, kept: tuple[int, ...], number: int) -> Schedule:
    """Give a schedule with some of its columns."""
    return replace(
        content,
        key=f"{content.key}-{number}",
        head=tuple(content.head[k] for k in kept),
        aligns=tuple(content.aligns[k] for k in kept),
        rows=tuple(tuple(row[k] for k in kept) for row in content.rows),
    )
