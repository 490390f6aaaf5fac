"""One cell of a schedule held against what it must state."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.verifying.labelling import Wanted, read

if TYPE_CHECKING:
    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.verifying.tally import Tally
    from dxfcable.verifying.words import Kind, Reader

SCHEDULE = "schedule"
_HERE = ((0.0, 0.0), (0.0, 0.0))


@dataclass(frozen=True, slots=True, kw_only=True)
class Cell:
    """What a cell must state."""

    kind: Kind
    value: float
    slack: float
    words: str = ""


def hold_cell(
    tally: Tally, entity: IssuedEntity | None, where: str, cell: Cell, reader: Reader
) -> None:
    """Hold one cell against its number."""
    if entity is None:
        tally.fail(SCHEDULE, f"{where} is missing")
        return
    compare(tally, entity, entity.text, where, cell, reader)


def compare(
    tally: Tally,
    entity: IssuedEntity,
    words: str,
    where: str,
    cell: Cell,
    reader: Reader,
) -> None:
    """Hold words of an entity against a number."""
    wanted = Wanted(id=where, role="table", words=cell.words, kind=cell.kind, at=_HERE)
    shown = read(words, wanted, reader)
    if shown is None:
        tally.fail(SCHEDULE, f'{where} says "{words}", not a {cell.kind.value}', entity)
        return
    text = f'{where} says "{words}", the drawing has {cell.value:.6g}, off'
    off, allowed = abs(shown.value - cell.value), shown.half + cell.slack
    tally.hold(SCHEDULE, off, allowed, text, entity, reader.unit_of(cell.kind))


def hold_words(tally: Tally, entity: IssuedEntity | None, where: str, words: str) -> None:
    """Hold a cell of words."""
    if entity is None:
        if words:
            tally.fail(SCHEDULE, f"{where} is missing")
    elif entity.text.strip() != words.strip():
        tally.fail(SCHEDULE, f'{where} says "{entity.text}", not "{words}"', entity)
