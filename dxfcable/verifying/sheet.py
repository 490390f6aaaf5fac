"""An issued drawing laid out for its proof: entities by id, and those that no id fits yet."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.recovery.by_place import name_by_place
from dxfcable.drawing.recovery.scales import ScaleBlock, scales_by_ids, scales_by_place
from dxfcable.drawing.recovery.schedules import Schedule, schedules_by_ids, schedules_by_place

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from dxfcable.drawing.issued import Issued, IssuedEntity
    from dxfcable.drawing.recovery.by_place import ExpectedSpan

_STEP = 1e-9  # of the span: the painter's rounding
_FINE, _COARSE = 1e-8, 1e-6  # drawing units: how other programs round


@dataclass(slots=True, kw_only=True, eq=False)
class Sheet:
    """All entities of ours while they are told apart.

    Attributes
    ----------
    named : dict of str to IssuedEntity
        By id, from marks or by place.
    loose : list of IssuedEntity
        On our layers and not named.
    has_marks : bool
        Whether ids come from marks.
    height : float
        Usual height of our texts [length].
    grain : float
        Greatest error of a coordinate by rounding [length].
    """

    named: dict[str, IssuedEntity]
    loose: list[IssuedEntity]
    has_marks: bool
    height: float
    grain: float
    schedules: list[Schedule] = field(default_factory=list)
    scales: list[ScaleBlock] = field(default_factory=list)

    def adopt(self, name: str, entity: IssuedEntity) -> None:
        """Give a loose entity its id."""
        self.named[name] = entity.named(name)
        self.release([entity])

    def release(self, entities: Iterable[IssuedEntity]) -> None:
        """Take entities off the loose ones."""
        known = {e.offset for e in entities}
        self.loose = [e for e in self.loose if e.offset not in known]

    def numbers(self, stem: str) -> list[int]:
        """Give the numbers of ids that are a stem and a number, in order."""
        found = [name.removeprefix(stem) for name in self.named if name.startswith(stem)]
        return sorted(int(rest) for rest in found if rest.isdigit())


def lay_out(issued: Issued, expected: Sequence[ExpectedSpan]) -> Sheet:
    """Tell the entities of a drawing apart.

    Parameters
    ----------
    issued : Issued
        As read.
    expected : sequence of ExpectedSpan
        Supports of each span, for drawings without marks.

    Returns
    -------
    Sheet
    """
    everything = [*issued.marked.values(), *issued.unmarked]
    has_marks = bool(issued.marked)
    sheet = Sheet(
        named=dict(issued.marked),
        loose=list(issued.unmarked),
        has_marks=has_marks,
        height=_height(issued.marked.values() if has_marks else everything),
        grain=_grain(everything),
    )
    if has_marks:
        sheet.schedules = schedules_by_ids(issued.marked)
        sheet.scales = scales_by_ids(issued.marked)
        return sheet
    for name, entity in name_by_place(issued.unmarked, expected).items():
        sheet.adopt(name, entity)
    sheet.schedules = schedules_by_place(sheet.loose)
    for schedule in sheet.schedules:
        sheet.release(schedule.entities())
    sheet.scales = scales_by_place(sheet.loose)
    for block in sheet.scales:
        sheet.release(block.entities())
    return sheet


def _height(entities: Iterable[IssuedEntity]) -> float:
    """Give the middle one of the text heights."""
    heights = sorted(e.height for e in entities if e.text and e.height > 0.0)
    return heights[len(heights) // 2] if heights else 1.0


def _grain(entities: Sequence[IssuedEntity]) -> float:
    """Judge how coordinates were rounded: by our own step, and by a program that saved them."""
    profiles = [e for e in entities if "profile" in e.roles and len(e.points) > 1]
    span = max((abs(e.end[0] - e.start[0]) for e in profiles), default=1.0)
    numbers = np.array([c for e in entities for p in e.points for c in p], dtype=np.float64)
    numbers = numbers[np.isfinite(numbers)]
    is_coarse = bool(np.all(np.abs(numbers - np.round(numbers, 6)) <= 1e-10 * np.abs(numbers)))
    largest = float(np.max(np.abs(numbers), initial=1.0))
    step = _COARSE if is_coarse else _FINE
    return _STEP * span + step + math.ulp(largest)
