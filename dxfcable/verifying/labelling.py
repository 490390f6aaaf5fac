"""Labels held against what they name: found by id, or by where they stand and what they say."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.pairing import pair
from dxfcable.verifying.words import Kind

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.model import Point
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.tally import Tally
    from dxfcable.verifying.words import Reader, Shown

LABELS, ELEVATIONS, LETTERS = "labels to scale", "elevations at their points", "letters in order"
_WRONG_VALUE, _WRONG_WORDS = 8.0, 1000.0  # what a doubtful match costs, in text heights
_EXTRA = 40.0  # a label further off than so many text heights is no label of that object


@dataclass(frozen=True, slots=True, kw_only=True)
class Wanted:
    """A label that is due.

    Attributes
    ----------
    id : str
        As it would be marked.
    role : str
        Of its layer.
    check : str
        Which check it belongs to.
    words : str
        What stands before the number; of kind WORDS the whole text.
    value, slack : float
        What it must state, and how well that is known [force or length].
    at : (Point, Point)
        Ends of what it names.
    is_required : bool
        False where it may be left out.
    """

    id: str
    role: str
    check: str = LABELS
    words: str = ""
    kind: Kind = Kind.FORCE
    value: float = 0.0
    slack: float = 0.0
    at: tuple[Point, Point]
    is_required: bool = True


def find_labels(sheet: Sheet, wanted: Sequence[Wanted], reader: Reader) -> None:
    """Give labels without marks their ids, each layer for itself."""
    if sheet.has_marks:
        return
    for role in dict.fromkeys(w.role for w in wanted):
        due = [w for w in wanted if w.role == role and w.id not in sheet.named]
        pool = [e for e in sheet.loose if e.text and role in e.roles]
        if not due or not pool:
            continue
        costs = [[_cost(e, w, reader, sheet.height) for w in due] for e in pool]
        for i, j in pair(costs):
            if costs[i][j] < _WRONG_WORDS:
                sheet.adopt(due[j].id, pool[i])


def hold_labels(tally: Tally, sheet: Sheet, wanted: Sequence[Wanted], reader: Reader) -> None:
    """Hold each label that is due against its value."""
    for label in wanted:
        entity = sheet.named.get(label.id)
        if entity is None or not entity.text:
            if label.is_required:
                tally.fail(label.check, f"label {label.id} is missing", entity)
            continue
        if label.kind is Kind.WORDS:
            if entity.text.strip() == label.words:
                tally.hold(label.check, 0.0, 1.0, "", entity)
            else:
                text = f'{label.id} says "{entity.text}", not "{label.words}"'
                tally.fail(label.check, text, entity)
            continue
        shown = read(entity.text, label, reader)
        if shown is None:
            what = f'"{label.words}" and ' if label.words else ""
            text = f'{label.id} says "{entity.text}", not {what}a {label.kind.value}'
            tally.fail(label.check, text, entity)
            continue
        off = abs(shown.value - label.value)
        text = f'{label.id} says "{entity.text}", its object measures {label.value:.6g}, off'
        unit = reader.unit_of(label.kind)
        tally.hold(label.check, off, shown.half + label.slack, text, entity, unit)


def read(text: str, label: Wanted, reader: Reader) -> Shown | None:
    """Read a label's number behind its words; None where it does not have this form."""
    text = text.strip()
    if label.words:
        if not text.startswith(f"{label.words} "):
            return None
        text = text.removeprefix(f"{label.words} ")
    match label.kind:
        case Kind.FORCE:
            return reader.force(text)
        case Kind.LOAD:
            return reader.load(text)
        case Kind.LENGTH:
            return reader.length(text)
        case Kind.MOMENT:
            return reader.moment(text)
        case Kind.DEGREES:
            return reader.degrees(text)
        case Kind.WORDS:
            return None


def _cost(entity: IssuedEntity, label: Wanted, reader: Reader, height: float) -> float:
    """Tell how badly a text fits a label that is due, in text heights."""
    away = min(_distance(entity.middle, label.at) / height, _EXTRA)
    if not math.isfinite(away):
        away = _EXTRA
    if label.kind is Kind.WORDS:
        return away + (0.0 if entity.text.strip() == label.words else _WRONG_VALUE)
    shown = read(entity.text, label, reader)
    if shown is None:
        is_like = entity.text.strip().startswith(label.words) if label.words else False
        return away + (_WRONG_VALUE + _EXTRA if is_like else _WRONG_WORDS)
    fits = abs(shown.value - label.value) <= shown.half + label.slack
    return away + (0.0 if fits else _WRONG_VALUE)


def _distance(point: Point, line: tuple[Point, Point]) -> float:
    """Give the distance of a point from a line between two points."""
    (ax, ay), (bx, by) = line
    square = (bx - ax) ** 2 + (by - ay) ** 2
    share = ((point[0] - ax) * (bx - ax) + (point[1] - ay) * (by - ay)) / square if square else 0.0
    share = min(1.0, max(0.0, share))
    return math.dist(point, (ax + share * (bx - ax), ay + share * (by - ay)))
