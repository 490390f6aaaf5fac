"""What the schedule says of safety: the capacity used, the anchors and their factors."""

from __future__ import annotations

import re
from collections import Counter
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.naming import anchor_names
from dxfcable.verifying.schedule_cells import SCHEDULE, Cell, compare
from dxfcable.verifying.words import Kind

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable, Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.drawing.recovery.schedules import Schedule
    from dxfcable.model import AnchorForce
    from dxfcable.verifying.cable_labels import SpanLabels
    from dxfcable.verifying.joint_laws import JointFacts
    from dxfcable.verifying.tally import Tally
    from dxfcable.verifying.words import Reader

    Like = Callable[[Schedule, str], IssuedEntity | None]

_CAPACITY, _USED, _FACTOR = "CAPACITY", "UTILIZATION ", " FACTOR"
_RATIO = re.compile(r"\d+\.\d\d\Z", re.ASCII)
_HALF = 0.005 * (1.0 + 1e-9)  # ratios are written to two places


def hold_capacity(
    tally: Tally, schedule: Schedule, spans: Sequence[SpanLabels], reader: Reader
) -> None:
    """Hold the capacity against the data block, what is used of it against the tensions."""
    capacity = spans[0].cable.capacity
    is_named = any(n is not None and n.text == _CAPACITY for n, _ in schedule.summary)
    entity = schedule.value(_CAPACITY)
    if capacity is None or entity is None:
        if is_named:
            tally.fail(SCHEDULE, "CAPACITY is stated, the data block has none", entity)
        elif capacity is not None:
            text = f"CAPACITY is missing, the data block has {capacity:g}"
            tally.fail(SCHEDULE, text, schedule.title)
        return
    words, _, used = entity.text.partition(", ")
    cell = Cell(kind=Kind.LOAD, value=capacity, slack=1e-9 * capacity)
    compare(tally, entity, words, _CAPACITY, cell, reader)
    shown = _ratio(used.removeprefix(_USED)) if used.startswith(_USED) else None
    if shown is None:
        tally.fail(SCHEDULE, f'{_CAPACITY} says "{entity.text}", no utilization', entity)
        return
    governing = max(spans, key=lambda s: s.largest)
    due, slack = governing.largest / capacity, governing.span.force_error / capacity
    text = f'{_CAPACITY} says "{used}", the largest tension uses {due:.4g}, off'
    tally.hold(SCHEDULE, abs(shown - due), _HALF + slack, text, entity, "")


def hold_anchor_rows(
    tally: Tally,
    schedule: Schedule,
    joints: Sequence[JointFacts],
    like: Like,
    reader: Reader,
) -> None:
    """Hold forces on anchors, and the factors that their blocks reach.

    Parameters
    ----------
    like : callable
        Finds the row whose name may once have been another.
    """
    anchors = [
        (name, anchor, joint.error)
        for joint in joints
        for name, anchor in zip(anchor_names(joint.anchorage), joint.anchorage.anchors, strict=True)
    ]
    rows: dict[str, list[IssuedEntity | None]] = {}
    for name_cell, value in schedule.summary:
        if name_cell is not None:
            rows.setdefault(name_cell.text, []).append(value)
    for name, anchor, error in anchors:
        _hold_forces(tally, schedule, name, anchor, error, rows, like, reader)
        _hold_factors(tally, schedule, f"{name}{_FACTOR}", anchor, error, rows, like)
    _hold_counts(tally, schedule, anchors, rows)


def _hold_forces(
    tally: Tally,
    schedule: Schedule,
    name: str,
    anchor: AnchorForce,
    error: float,
    rows: dict[str, list[IssuedEntity | None]],
    like: Like,
    reader: Reader,
) -> None:
    """Hold the row of an anchor's forces; anchors may share a mark: one row must fit."""
    entities = rows.get(name, [])
    if not entities:
        tally.fail(SCHEDULE, f"{name} is missing", like(schedule, name))
        return
    values = (("H", anchor.horizontal), ("UPLIFT", anchor.uplift))
    if any(_is_both(e, values, error, reader) for e in entities):
        return
    said = entities[0].text if entities[0] else ""
    text = f'{name} says "{said}", not H {values[0][1]:.6g}, UPLIFT {values[1][1]:.6g}'
    tally.fail(SCHEDULE, text, entities[0])


def _hold_factors(
    tally: Tally,
    schedule: Schedule,
    name: str,
    anchor: AnchorForce,
    error: float,
    rows: dict[str, list[IssuedEntity | None]],
    like: Like,
) -> None:
    """Hold the row of an anchor's factors: from its block's weight and the forces proved."""
    due = _factors_due(anchor, error)
    entities = rows.get(name, [])
    if not due:
        return
    if not entities:
        tally.fail(SCHEDULE, f"{name} is missing", like(schedule, name))
        return
    worst = [_off(entity, due) for entity in entities]
    best = min(range(len(worst)), key=worst.__getitem__)
    entity = entities[best]
    wanted = ", ".join(f"{word} {value:.4g}" for word, value, _ in due)
    if worst[best] > 1.0:
        said = entity.text if entity else ""
        tally.fail(SCHEDULE, f'{name} says "{said}", not {wanted}', entity)
    else:
        tally.hold(SCHEDULE, worst[best], 1.0, "", entity, "")


def _factors_due(anchor: AnchorForce, error: float) -> list[tuple[str, float, float]]:
    """List word, value and slack of each factor; those of forces next to nothing are left out."""
    found = []
    across, up = abs(anchor.horizontal), anchor.uplift
    sliding, lifting = anchor.sliding_factor, anchor.uplift_factor
    if sliding is not None and across > 10.0 * error:
        # The friction is at most one in practice, so uplift counts as much as pull.
        found.append(("SLIDING", sliding, error * (1.0 + sliding) / across))
    if lifting is not None and up > 10.0 * error:
        found.append(("UPLIFT", lifting, error * lifting / up))
    return found


def _off(entity: IssuedEntity | None, due: Sequence[tuple[str, float, float]]) -> float:
    """Give how far a row is off, in tolerances; without end where it says something else."""
    said: dict[str, str] = {}
    for part in entity.text.split(", ") if entity else []:
        word, _, number = part.partition(" ")
        said[word] = number
    if not {word for word, _, _ in due} <= said.keys() <= {"SLIDING", "UPLIFT"}:
        return float("inf")
    worst = 0.0
    for word, value, slack in due:
        shown = _ratio(said[word])
        if shown is None:
            return float("inf")
        worst = max(worst, abs(shown - value) / (_HALF + 2.0 * slack))
    return worst


def _hold_counts(
    tally: Tally,
    schedule: Schedule,
    anchors: Iterable[tuple[str, AnchorForce, float]],
    rows: dict[str, list[IssuedEntity | None]],
) -> None:
    """Tell rows of anchors beyond those that are due, and those that lost their name."""
    due: Counter[str] = Counter()
    most: Counter[str] = Counter()
    for name, anchor, error in anchors:
        row = f"{name}{_FACTOR}"
        due.update([name, row] if _factors_due(anchor, error) else [name])
        is_reached = anchor.sliding_factor is not None or anchor.uplift_factor is not None
        most.update([name, row] if is_reached else [name])
    for name, found in rows.items():
        is_anchor = name.startswith("ANCHOR ") or name.endswith(_FACTOR)
        if is_anchor and len(found) > most[name]:
            text = f'a row says "{name}", no such anchor or no weight is drawn'
            tally.fail(SCHEDULE, text, found[-1] or schedule.title)
    for name, count in due.items():
        if 0 < len(rows.get(name, [])) < count:
            text = f"{name} has {len(rows[name])} rows, {count} are due"
            tally.fail(SCHEDULE, text, schedule.title)


def _is_both(
    entity: IssuedEntity | None,
    values: Sequence[tuple[str, float]],
    error: float,
    reader: Reader,
) -> bool:
    """Tell whether a cell states two forces."""
    parts = entity.text.split(", ") if entity else []
    if len(parts) != len(values):
        return False
    for part, (word, value) in zip(parts, values, strict=True):
        shown = reader.force(part.removeprefix(f"{word} ")) if part.startswith(word) else None
        if shown is None or abs(shown.value - value) > shown.half + error:
            return False
    return True


def _ratio(words: str) -> float | None:
    """Read a ratio as it is written, with two places."""
    return float(words) if _RATIO.match(words.strip()) else None
