"""The schedules of an issued drawing as rows of texts, by ids or by places."""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from dxfcable.drawing.issued import IssuedEntity

POINT_COLUMNS = {
    "POINT": "mark",
    "X": "x",
    "LEVEL": "elevation",
    "FROM LEFT": "elevation",
    "LOAD": "load",
    "HANGER": "hanger",
}
PIECE_COLUMNS = {
    "PIECE": "name",
    "T LEFT": "left",
    "T RIGHT": "right",
    "SLOPE": "angle",
    "LENGTH": "length",
    "UNSTRESSED": "unstressed",
}
_TITLE = re.compile(r"CABLE (?P<mark>.*)\Z")
_HEAD = re.compile(r"head(-\d+)?")
_SAME = 0.05  # of a text height: one row, one column

Row = dict[str, "IssuedEntity"]


@dataclass(slots=True, kw_only=True, eq=False)
class Schedule:
    """One cable's schedule.

    Attributes
    ----------
    prefix : str
        First part of its ids, "" while not known.
    title : IssuedEntity or None
        `CABLE` and its mark.
    summary : list of (IssuedEntity or None, IssuedEntity or None)
        Name and value of each row.
    points, pieces : list of dict of str to IssuedEntity
        Rows from the first on, each cell by its column; empty cells are absent.
    keys : dict of str to dict
        Rows of points by their part of ids; empty where ids are not known.
    heads : list of dict of str to IssuedEntity
        Heads of tables by column.
    rest : list of IssuedEntity
        Frame, rules, caution.
    """

    prefix: str = ""
    title: IssuedEntity | None = None
    summary: list[tuple[IssuedEntity | None, IssuedEntity | None]] = field(default_factory=list)
    points: list[Row] = field(default_factory=list)
    pieces: list[Row] = field(default_factory=list)
    keys: dict[str, Row] = field(default_factory=dict)
    heads: list[Row] = field(default_factory=list)
    rest: list[IssuedEntity] = field(default_factory=list)

    @property
    def mark(self) -> str:
        """The cable's mark as its title says it."""
        match = _TITLE.match(self.title.text) if self.title else None
        return match["mark"] if match else ""

    def value(self, name: str) -> IssuedEntity | None:
        """Give the value beside a name of the summary."""
        return next((v for n, v in self.summary if n is not None and n.text == name), None)

    def entities(self) -> list[IssuedEntity]:
        """Give all that belongs to it."""
        found = [*self.rest, *([self.title] if self.title else [])]
        found += [e for pair in self.summary for e in pair if e is not None]
        rows = (*self.points, *self.pieces, *self.heads)
        return found + [e for row in rows for e in row.values()]


def schedules_by_ids(marked: Mapping[str, IssuedEntity]) -> list[Schedule]:
    """Put schedules together from marked entities."""
    found: dict[str, Schedule] = {}
    tables: dict[tuple[str, str, str], Row] = {}
    for name, entity in marked.items():
        head, _, rest = name.partition("/schedule/")
        if not rest:
            continue
        schedule = found.setdefault(head, Schedule(prefix=head))
        table, _, cell = rest.partition("/")
        row, _, column = cell.rpartition("/")
        if rest == "title":
            schedule.title = entity
        elif table in ("summary", "point", "segment") and row:
            tables.setdefault((head, table, row), {})[column] = entity
        else:
            schedule.rest.append(entity)
    for (head, table, row), cells in tables.items():
        schedule = found[head]
        if table == "summary":
            schedule.summary.append((cells.get("name"), cells.get("value")))
        elif _HEAD.fullmatch(row):
            schedule.heads.append(cells)
        elif table == "point":
            schedule.points.append(cells)
            schedule.keys[row] = cells
        else:
            schedule.pieces.append(cells)
    for schedule in found.values():
        schedule.pieces.sort(key=_number)
    return list(found.values())


def _number(cells: Row) -> int:
    """Give the number of a piece's row by its ids."""
    words = next(iter(cells.values())).id.split("/")
    return int(words[-2]) if words[-2].isdigit() else 0


def schedules_by_place(entities: Iterable[IssuedEntity]) -> list[Schedule]:
    """Put schedules together from what stands in a closed frame with a title in it."""
    pool = [e for e in entities if "table" in e.roles]
    found = []
    for frame in (e for e in pool if e.is_closed):
        inside = [e for e in pool if e is not frame and _is_inside(e, frame)]
        top = max((e for e in inside if e.text), key=lambda e: e.start[1], default=None)
        if top is not None and _TITLE.match(top.text):
            found.append(_read(top, frame, [e for e in inside if e is not top]))
    return found


def _is_inside(entity: IssuedEntity, frame: IssuedEntity) -> bool:
    """Tell whether an entity's first point lies in a rectangle."""
    across, up = zip(*frame.points, strict=True)
    x, y = entity.start
    return bool(min(across) <= x <= max(across) and min(up) <= y <= max(up))


def _read(title: IssuedEntity, frame: IssuedEntity, inside: list[IssuedEntity]) -> Schedule:
    """Read rows and columns; texts of one row stand at one height."""
    schedule = Schedule(title=title)
    texts = [e for e in inside if e.text]
    schedule.rest = [frame, *(e for e in inside if not e.text)]
    near = _SAME * title.height
    taken: set[int] = set()
    for columns, rows in ((POINT_COLUMNS, schedule.points), (PIECE_COLUMNS, schedule.pieces)):
        for head in _heads(texts, columns, near):
            schedule.heads.append(head)
            taken |= {e.offset for e in head.values()}
            rows += _rows(texts, head, near, taken)
    left = sorted((e for e in texts if e.offset not in taken), key=lambda e: -e.start[1])
    names = [e for e in left if abs(e.start[0] - title.start[0]) <= near]
    for name in names:
        beside = [
            e
            for e in left
            if abs(e.start[1] - name.start[1]) <= near and e.start[0] > name.start[0]
        ]
        if beside:
            schedule.summary.append((name, min(beside, key=lambda e: e.start[0])))
        else:
            schedule.rest.append(name)
    known = {e.offset for e in schedule.entities()}
    lone = [e for e in left if e.offset not in known]
    values = [v.start[0] for _, v in schedule.summary if v is not None]
    for entity in lone:
        # What stands in the column of values and beside no name has lost it.
        if any(abs(entity.start[0] - x) <= near for x in values):
            schedule.summary.append((None, entity))
        else:
            schedule.rest.append(entity)
    return schedule


def _heads(
    texts: Sequence[IssuedEntity], columns: Mapping[str, str], near: float
) -> list[dict[str, IssuedEntity]]:
    """Find the heads of a kind of table, from left to right, then down."""
    first, *others = columns
    found = []
    for corner in sorted(
        (e for e in texts if e.text == first), key=lambda e: (e.start[0], -e.start[1])
    ):
        row = [e for e in texts if abs(e.start[1] - corner.start[1]) <= near]
        head = {columns[first]: corner}
        for entity in sorted(row, key=lambda e: e.start[0]):
            key = columns.get(entity.text)
            is_next = entity.start[0] > corner.start[0] and key is not None
            if is_next and key not in head and entity.text in others:
                head[str(key)] = entity
        if len(head) > len(set(columns.values())) - 2:
            found.append(head)
    return found


def _rows(
    texts: Sequence[IssuedEntity],
    head: Mapping[str, IssuedEntity],
    near: float,
    taken: set[int],
) -> list[Row]:
    """Read the rows below a head, until a row has none of its columns."""
    top = next(iter(head.values())).start[1]
    cells: dict[int, tuple[float, str, IssuedEntity]] = {}
    for entity in texts:
        for column, over in head.items():
            is_under = abs(entity.start[0] - over.start[0]) <= near and entity.start[1] < top - near
            if is_under and entity.offset not in taken:
                cells[entity.offset] = (entity.start[1], column, entity)
    rows: list[tuple[float, Row]] = []
    for height, column, entity in sorted(cells.values(), key=lambda cell: -cell[0]):
        if not rows or rows[-1][0] - height > near:
            if rows and rows[-1][0] - height > _GAP * entity.height:
                break  # another table begins below
            rows.append((height, {}))
        rows[-1][1][column] = entity
        taken.add(entity.offset)
    return [row for _, row in rows]


_GAP = 2.6  # text heights between rows beyond which a table has ended
