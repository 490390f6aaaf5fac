"""The schedule held against the linework: every cell that states what can be measured."""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

from dxfcable.drawing.recovery.schedules import PIECE_COLUMNS, POINT_COLUMNS
from dxfcable.job import CAUTION
from dxfcable.verifying.schedule_cells import SCHEDULE, Cell, hold_cell, hold_words
from dxfcable.verifying.schedule_summary import hold_joint_rows, hold_summary, length_slack
from dxfcable.verifying.words import Kind

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.drawing.recovery.schedules import Row, Schedule
    from dxfcable.model import Cable
    from dxfcable.verifying.cable_labels import SpanLabels
    from dxfcable.verifying.joint_laws import JointFacts
    from dxfcable.verifying.tally import Tally
    from dxfcable.verifying.words import Reader


def hold_schedule(
    tally: Tally,
    schedule: Schedule | None,
    spans: Sequence[SpanLabels],
    joints: Sequence[JointFacts],
    reader: Reader,
) -> None:
    """Hold one cable's schedule against its spans and joints."""
    if schedule is None:
        tally.fail(SCHEDULE, "the schedule is missing")
        return
    if not spans:
        text = "the cable is not whole, so its schedule cannot be held"
        tally.fail(SCHEDULE, text, schedule.title)
        return
    if schedule.mark != spans[0].cable.mark:
        said = f'"{schedule.title.text}"' if schedule.title else "nothing"
        text = f"its title says {said}, the cable is {spans[0].cable.mark}"
        tally.fail(SCHEDULE, text, schedule.title)
    hold_summary(tally, schedule, spans, reader)
    hold_joint_rows(tally, schedule, joints, reader)
    _hold_points(tally, schedule, spans, reader)
    _hold_pieces(tally, schedule, spans, reader)
    _hold_heads(tally, schedule)
    _hold_caution(tally, schedule)


def _hold_points(
    tally: Tally, schedule: Schedule, spans: Sequence[SpanLabels], reader: Reader
) -> None:
    """Hold the table of points: one row a node, saddles once."""
    rows = schedule.points
    due: list[tuple[str, str, dict[str, Cell]]] = []
    marks = _marks(spans[0].cable)
    for facts in spans:
        for k, (node, name) in enumerate(zip(facts.span.nodes, facts.names, strict=False)):
            if k == 0 and due:
                continue
            mark = marks[len(due)] if len(due) < len(marks) else ""
            due.append((name, mark, _point_cells(facts, k, node[0] - facts.left, node[1])))
    if len(rows) != len(due):
        text = f"the table of points has {len(rows)} rows, {len(due)} are due"
        tally.fail(SCHEDULE, text, schedule.title)
        return
    by_key = [schedule.keys.get(name) for name, _, _ in due]
    for row, key, (name, mark, cells) in zip(rows, by_key, due, strict=True):
        found = row if key is None else key
        hold_words(tally, found.get("mark"), f"point {name}, mark", mark)
        _hold_row(tally, found, f"point {name}", cells, reader)


def _marks(cable: Cable) -> list[str]:
    """Give the marks of all nodes, left to right."""
    nodes = [(s.x, s.mark) for s in cable.supports] + [(p.x, p.mark) for p in cable.loads]
    return [mark for _, mark in sorted(nodes, key=lambda node: node[0])]


def _point_cells(facts: SpanLabels, k: int, x: float, ordinate: float) -> dict[str, Cell]:
    grain = facts.span.grain
    level = ordinate + facts.lift - (facts.reference or 0.0)
    words = "EL" if facts.reference is None else ""
    cells = {
        "x": Cell(kind=Kind.LENGTH, value=x, slack=2.0 * grain),
        "elevation": Cell(kind=Kind.LENGTH, value=level, slack=2.0 * grain, words=words),
    }
    if 0 < k < facts.span.pieces and len(facts.carried) == facts.span.pieces - 1:
        load, hanger = facts.carried[k - 1], facts.hangers[k - 1]
        slack = load.half + 1e-9 * abs(load.value)
        if load.point.cases or load.label is not None:
            cells["load"] = Cell(kind=Kind.LOAD, value=load.value, slack=slack)
        if hanger is not None:
            cells["hanger"] = Cell(kind=Kind.LENGTH, value=hanger, slack=2.0 * grain)
    return cells


def _hold_pieces(
    tally: Tally, schedule: Schedule, spans: Sequence[SpanLabels], reader: Reader
) -> None:
    """Hold the table of pieces."""
    rows = schedule.pieces
    count = sum(facts.span.pieces for facts in spans)
    if len(rows) != count:
        text = f"the table of pieces has {len(rows)} rows, {count} are due"
        tally.fail(SCHEDULE, text, schedule.title)
        return
    at = iter(rows)
    for facts in spans:
        for k in range(facts.span.pieces):
            row, name = next(at), f"{facts.letters[k]}O"
            hold_words(tally, row.get("name"), f"piece {name}", name)
            _hold_row(tally, row, f"piece {name}", _piece_cells(facts, k), reader)


def _piece_cells(facts: SpanLabels, k: int) -> dict[str, Cell]:
    span, shape = facts.span, facts.shape
    (ax, ay), (bx, by) = span.side(k)
    length = math.dist(*span.side(k))
    cells = {
        "left": Cell(kind=Kind.FORCE, value=span.tension(k, 0), slack=span.force_error),
        "right": Cell(kind=Kind.FORCE, value=span.tension(k, 1), slack=span.force_error),
    }
    if shape is not None:
        slack = length_slack(facts)
        cells["length"] = Cell(kind=Kind.LENGTH, value=shape.lengths[k], slack=slack)
        cells["unstressed"] = Cell(kind=Kind.LENGTH, value=shape.unstressed[k], slack=slack)
    slope = math.degrees(math.atan2(by - ay, bx - ax))
    turn = math.degrees(4.0 * span.grain / length) if length else 0.0
    cells["angle"] = Cell(kind=Kind.DEGREES, value=slope, slack=turn)
    return cells


def _hold_row(
    tally: Tally, row: Row, where: str, cells: Mapping[str, Cell], reader: Reader
) -> None:
    for column, cell in cells.items():
        hold_cell(tally, row.get(column), f"{where}, {column}", cell, reader)


def _hold_heads(tally: Tally, schedule: Schedule) -> None:
    """Hold the heads of both tables: without one a column says nothing."""
    for columns in (POINT_COLUMNS, PIECE_COLUMNS):
        due = set(columns.values())
        heads = [head for head in schedule.heads if set(head) <= due and _is_of(head, columns)]
        if not heads:
            tally.fail(SCHEDULE, f"the head of the table {next(iter(columns))} is missing")
    rules = [e for e in schedule.rest if e.kind == "LINE"]
    frames = [e for e in schedule.rest if e.is_closed]
    if len(rules) != len(schedule.heads) or len(frames) != 1:
        tally.fail(
            SCHEDULE, "its frame and the lines under its heads are not whole", schedule.title
        )
    _hold_lines(tally, rules, frames)
    for columns in (POINT_COLUMNS, PIECE_COLUMNS):
        due = set(columns.values())
        for head in [h for h in schedule.heads if set(h) <= due and _is_of(h, columns)]:
            for column in sorted(due - set(head)):
                tally.fail(SCHEDULE, f"the head over {column} is missing", schedule.title)
            for column, entity in head.items():
                if columns.get(entity.text) != column:
                    tally.fail(SCHEDULE, f'a head says "{entity.text}"', entity)


def _hold_lines(
    tally: Tally, rules: Sequence[IssuedEntity], frames: Sequence[IssuedEntity]
) -> None:
    """Hold frame and rules: level and upright."""
    for line in rules:
        off, near = abs(line.start[1] - line.end[1]), 1e-6 * math.dist(line.start, line.end)
        tally.hold(SCHEDULE, off / near if near else math.inf, 1.0, f"{line.id} is not level", line)
    for frame in frames:
        sides = list(itertools.pairwise((*frame.points, frame.points[0])))
        size = max(math.dist(a, b) for a, b in sides)
        off = max(min(abs(a[0] - b[0]), abs(a[1] - b[1])) for a, b in sides)
        near = 1e-6 * size
        tally.hold(SCHEDULE, off / near, 1.0, "the frame is no upright rectangle", frame)


def _is_of(head: Row, columns: Mapping[str, str]) -> bool:
    """Tell whether a head is that of a kind of table, by most of its words."""
    return sum(columns.get(e.text) == column for column, e in head.items()) >= 0.5 * len(head)


def _hold_caution(tally: Tally, schedule: Schedule) -> None:
    """Hold the caution word for word."""
    lines = [e for e in schedule.rest if e.text and e.text.strip() in CAUTION]
    said = " ".join(e.text.strip() for e in sorted(lines, key=lambda e: -e.start[1]))
    if said != CAUTION:
        odd = [e for e in schedule.rest if e.text and e not in lines]
        tally.fail(SCHEDULE, "the caution is not whole", next(iter(odd or lines), schedule.title))
    else:
        tally.hold(SCHEDULE, 0.0, 1.0, "", lines[0])
