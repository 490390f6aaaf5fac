"""Everything drawn in model space as lines and boxes, taken by pattern, to find free places.

Entities are taken a few thousand at a time: their tags found, their numbers read, lines and
boxes kept, the rest forgotten.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.block_extents import BlockExtents, number
from dxfcable.drawing.bytes.growing import Growing
from dxfcable.drawing.bytes.pairs import Tags, distinct, find_tags, texts
from dxfcable.drawing.excerpt import Obstacles

if TYPE_CHECKING:
    from collections.abc import Iterator

    from numpy.typing import NDArray

    from dxfcable.drawing.bytes.scan import Scan

    Floats = NDArray[np.float64]

_AT_ONCE = 4096
_NUMBER_WIDTH = 24
_NAME_WIDTH = 64
_PLACE = (10, 11, 20, 21)
_FACTS = (12, 13, 22, 23, 40, 41, 42, 44, 45, 50, 70, 71, 72)
_WORD = (1, 3)
_CODES = (2, *_PLACE, *_FACTS, *_WORD)
_JOINED = (b"LINE", b"LWPOLYLINE", b"POLYLINE", b"SPLINE", b"LEADER", b"MLINE")
_ROUND = (b"CIRCLE", b"ARC")
_CLOSABLE = (b"LWPOLYLINE", b"POLYLINE")
_TEXTS = (b"TEXT", b"MTEXT", b"ATTDEF", b"ATTRIB")
_FILLED = (b"SOLID", b"TRACE", b"3DFACE", b"HATCH")
_IMAGES = (b"IMAGE", b"WIPEOUT", b"OLE2FRAME")
_NO_PLACE = (b"POLYLINE", b"HATCH", b"VIEWPORT", b"SEQEND")  # their 10/20 is no point of theirs
_RELATIVE = (b"RAY", b"XLINE", b"ELLIPSE", b"IMAGE", b"WIPEOUT")  # their 11/21 is a direction
_FAR = 4.0  # how far lines without end are followed, in sizes of all else
_WIDTH = 0.9  # of the height a character, generous


def obstacles(drawing: Scan) -> Obstacles:
    """Collect lines, points and boxes of all model-space entities.

    Text boxes and blocks are estimates on the generous side; paper space is left out.
    """
    segments, boxes, endless = (Growing(np.float64) for _ in range(3))
    extents = BlockExtents(drawing)
    for batch in _batches(drawing):
        segments.add(_segments(batch))
        boxes.add(_circles(batch))
        boxes.add(_words(batch))
        boxes.add(_inserts(batch, extents))
        for make in (_filled, _images, _bulges):
            boxes.add(make(batch))
        endless.add(_endless(batch))
    lines, areas, followed = (rows.taken().reshape(-1, 4) for rows in (segments, boxes, endless))
    if len(followed):
        lines = np.concatenate([lines, _followed(followed, lines, areas)])
    return Obstacles(lines, areas)


@dataclass(frozen=True, slots=True, eq=False)
class _Batch:
    """Some entities with the tags that tell where they are.

    `head` and `record` give each tag's entity and record; `kinds` are of all records.
    """

    drawing: Scan
    heads: NDArray[np.int64]
    tags: Tags
    head: NDArray[np.int64]
    record: NDArray[np.int64]
    value: Floats

    @property
    def kinds(self) -> NDArray[np.bytes_]:
        """Types of all records of the drawing."""
        return self.drawing.kinds

    def first(self, owners: NDArray[np.int64], code: int, default: float = np.nan) -> Floats:
        """Return the first value of a code in each of some records."""
        result = np.full(owners.size, default)
        which = np.flatnonzero(self.tags.codes == code)[::-1]
        slot = np.searchsorted(owners, self.record[which])
        fits = slot < owners.size
        which, slot = which[fits], slot[fits]
        fits = owners[slot] == self.record[which]
        result[slot[fits]] = self.value[which[fits]]
        return result

    def of_kind(self, kinds: tuple[bytes, ...]) -> NDArray[np.int64]:
        """Return the heads of some types."""
        return self.heads[np.isin(self.kinds[self.heads], kinds)]

    def texts(self) -> NDArray[np.int64]:
        """Return the records of texts, attributes of inserts among them."""
        records = self.record[np.isin(self.head, self.heads)]  # ascending, as tags are
        records = records[np.diff(records, prepend=-1) > 0]
        return records[np.isin(self.kinds[records], _TEXTS)]


def _batches(drawing: Scan) -> Iterator[_Batch]:
    """Part the model-space entities."""
    paper = _in_paper_space(drawing)
    for k in range(0, drawing.heads.size, _AT_ONCE):
        heads = drawing.heads[k : k + _AT_ONCE]
        start = int(drawing.starts[heads[0]])
        _, end = drawing.entity_span(int(heads[-1]))
        tags = find_tags(drawing.data, _CODES, start, end)
        record = np.searchsorted(drawing.starts[:-1], tags.starts, side="right") - 1
        head = heads[np.searchsorted(heads, record, side="right") - 1]
        is_number = ~np.isin(tags.codes, (2, *_WORD))
        value = np.full(tags.codes.size, np.nan)
        value[is_number] = numbers(drawing.data, tags.some(np.flatnonzero(is_number)))
        model = heads[~np.isin(heads, paper)] if paper.size else heads
        yield _Batch(drawing, model, tags, head, record, value)


def numbers(data: bytes, tags: Tags) -> Floats:
    """Read values as numbers; what is none reads as not a number."""
    raw = texts(data, tags.values, tags.ends, _NUMBER_WIDTH)
    try:
        return raw.astype(np.float64)
    except ValueError:
        return np.array([number(bytes(r)) for r in raw])


def _in_paper_space(drawing: Scan) -> NDArray[np.int64]:
    """Return the records that say they are in paper space."""
    records, which = drawing.first_tags(67)
    flags = [drawing.data[drawing.tags.values[k] : drawing.tags.ends[k]] == b"1" for k in which]
    return records[np.array(flags, np.bool_)] if records.size else records


def _segments(batch: _Batch) -> Floats:
    """Return lines and polyline sides, and all other points as lines of no length."""
    place = np.flatnonzero(np.isin(batch.tags.codes, _PLACE))
    codes = batch.tags.codes[place]
    opens = np.flatnonzero((codes[:-1] < 12) & (codes[1:] == codes[:-1] + 10))
    low, high = place[opens], place[opens + 1]
    record, head = batch.record[low], batch.head[low]
    x, y = batch.value[low], batch.value[high]
    good = (record == batch.record[high]) & np.isin(head, batch.heads)
    good &= ~np.isin(batch.kinds[record], _NO_PLACE)
    good &= ~(np.isin(batch.kinds[record], _RELATIVE) & (codes[opens] == 11))
    good &= np.isfinite(x) & np.isfinite(y)
    x, y, head = x[good], y[good], head[good]
    is_line = np.isin(batch.kinds[head], _JOINED)
    joined = (head[:-1] == head[1:]) & is_line[:-1]
    lines = np.column_stack([x[:-1], y[:-1], x[1:], y[1:]])[joined]
    dots = np.column_stack([x, y, x, y])[~is_line]
    return np.concatenate([lines, dots, _closing_sides(batch, head, x, y)])


def _closing_sides(batch: _Batch, head: NDArray[np.int64], x: Floats, y: Floats) -> Floats:
    """Return the last side of closed polylines, whose points are given."""
    closable = batch.of_kind(_CLOSABLE)
    flags = np.nan_to_num(batch.first(closable, 70, 0.0)).astype(np.int64)
    closed = closable[(flags & 1) == 1]
    first = np.searchsorted(head, closed, side="left")
    last = np.searchsorted(head, closed, side="right") - 1
    has = last > first
    first, last = first[has], last[has]
    return np.column_stack([x[last], y[last], x[first], y[first]])


def _circles(batch: _Batch) -> Floats:
    """Return the boxes of circles, arcs and ellipses."""
    heads = batch.of_kind((*_ROUND, b"ELLIPSE"))
    x, y = batch.first(heads, 10), batch.first(heads, 20)
    axis = np.hypot(batch.first(heads, 11), batch.first(heads, 21))
    radius = np.where(batch.kinds[heads] == b"ELLIPSE", axis, np.abs(batch.first(heads, 40)))
    return _finite(np.column_stack([x - radius, y - radius, x + radius, y + radius]))


def _filled(batch: _Batch) -> Floats:
    """Return the boxes of filled faces and hatches, by all their corners."""
    heads = batch.of_kind(_FILLED)
    is_hatch = batch.kinds[batch.head] == b"HATCH"
    own = np.isin(batch.head, heads) & np.isfinite(batch.value)
    sides = []
    for codes in ((10, 11, 12, 13), (20, 21, 22, 23)):
        which = np.flatnonzero(own & np.isin(batch.tags.codes, codes))
        # A hatch begins with its elevation point, which is no corner.
        seen = batch.head[which]
        is_first = np.append(True, seen[1:] != seen[:-1]) if seen.size else np.empty(0, np.bool_)
        which = which[~(is_first & is_hatch[which])]
        slot = np.searchsorted(heads, batch.head[which])
        low, high = np.full(heads.size, np.inf), np.full(heads.size, -np.inf)
        np.minimum.at(low, slot, batch.value[which])
        np.maximum.at(high, slot, batch.value[which])
        sides.append((low, high))
    (left, right), (bottom, top) = sides
    return _finite(np.column_stack([left, bottom, right, top]))


def _images(batch: _Batch) -> Floats:
    """Return the boxes of images: a corner, two directions a pixel long, and the pixels."""
    heads = batch.of_kind(_IMAGES)
    x, y = batch.first(heads, 10), batch.first(heads, 20)
    wide, high = batch.first(heads, 13), batch.first(heads, 23)
    u = (batch.first(heads, 11) * wide, batch.first(heads, 21) * wide)
    v = (batch.first(heads, 12) * high, batch.first(heads, 22) * high)
    xs = np.stack([x, x + u[0], x + v[0], x + u[0] + v[0]])
    ys = np.stack([y, y + u[1], y + v[1], y + u[1] + v[1]])
    return _finite(
        np.column_stack([xs.min(axis=0), ys.min(axis=0), xs.max(axis=0), ys.max(axis=0)])
    )


def _bulges(batch: _Batch) -> Floats:
    """Return generous boxes of polylines with arcs in them: every side as bulged as the most."""
    heads = batch.of_kind(_CLOSABLE)
    is_bulge = (batch.tags.codes == 42) & np.isin(batch.head, heads) & (batch.value != 0.0)
    bent, group = np.unique(batch.head[is_bulge], return_inverse=True)
    if not bent.size:
        return np.empty((0, 4))
    most = np.zeros(bent.size)
    np.maximum.at(most, group, np.abs(np.nan_to_num(batch.value[is_bulge])))
    boxes = []
    for head, bulge in zip(bent, most, strict=True):
        own = (batch.head == head) & (batch.kinds[batch.record] != b"POLYLINE")
        x = batch.value[own & (batch.tags.codes == 10)]
        y = batch.value[own & (batch.tags.codes == 20)]
        if x.size != y.size or x.size < 2:
            continue
        x, y = np.append(x, x[0]), np.append(y, y[0])
        reach = bulge * np.hypot(np.diff(x), np.diff(y)) / 2.0
        low_x, low_y = np.minimum(x[:-1], x[1:]) - reach, np.minimum(y[:-1], y[1:]) - reach
        high_x, high_y = np.maximum(x[:-1], x[1:]) + reach, np.maximum(y[:-1], y[1:]) + reach
        boxes.append(np.column_stack([low_x, low_y, high_x, high_y])[:-1])
    return _finite(np.concatenate(boxes)) if boxes else np.empty((0, 4))


def _endless(batch: _Batch) -> Floats:
    """Return origin and direction of rays, and of construction lines both ways."""
    rays, lines = batch.of_kind((b"RAY",)), batch.of_kind((b"XLINE",))
    heads = np.concatenate([rays, lines])
    order = np.argsort(heads, kind="stable")
    heads = heads[order]
    columns = np.column_stack([batch.first(heads, code) for code in (10, 20, 11, 21)])
    is_line = np.isin(heads, lines)
    back = columns[is_line] * np.array([1.0, 1.0, -1.0, -1.0])
    return _finite(np.concatenate([columns, back]))


def _followed(endless: Floats, segments: Floats, boxes: Floats) -> Floats:
    """Follow lines without end well beyond everything else."""
    points = np.concatenate([segments.reshape(-1, 2), boxes.reshape(-1, 2), endless[:, :2]])
    size = float(np.max(np.ptp(points, axis=0), initial=1.0))
    direction = endless[:, 2:] / np.maximum(np.hypot(*endless[:, 2:].T), 1e-300)[:, None]
    return np.hstack([endless[:, :2], endless[:, :2] + _FAR * size * direction])


def _words(batch: _Batch) -> Floats:
    """Return generous boxes: TEXT by its alignment, MTEXT to all sides of its point."""
    heads = batch.texts()
    length, lines = np.zeros(heads.size), np.ones(heads.size)
    is_word = np.isin(batch.tags.codes, _WORD) & np.isin(batch.record, heads)
    slots = np.searchsorted(heads, batch.record)
    for k in np.flatnonzero(is_word):
        words = batch.drawing.data[batch.tags.values[k] : batch.tags.ends[k]]
        lines[slots[k]] += words.count(b"\\P")
        length[slots[k]] += len(words)
    said = length > 0
    heads, length, lines = heads[said], length[said], lines[said]
    is_long = batch.kinds[heads] == b"MTEXT"
    height = batch.first(heads, 40, 0.0)
    width = length / lines * height * _WIDTH
    given = batch.first(heads, 41, 0.0)
    wraps = is_long & (given > 0) & (width > given)
    lines = np.where(wraps, np.ceil(width / np.where(wraps, given, 1.0)) + lines, lines)
    width = np.where(wraps, given, width)
    place = batch.first(heads, 72, 0.0)
    aligned = ~is_long & (place != 0) & np.isfinite(batch.first(heads, 11))
    x = np.where(aligned, batch.first(heads, 11), batch.first(heads, 10))
    y = np.where(aligned, batch.first(heads, 21), batch.first(heads, 20))
    share = np.where(place == 2, 1.0, np.where(place != 0, 0.5, 0.0)) * ~is_long
    rise = lines * 1.7 * height
    return _turned(
        x,
        y,
        (
            np.where(is_long, -width, -share * width),
            np.where(is_long, width, width - share * width),
        ),
        (np.where(is_long, -rise, -0.5 * height), np.where(is_long, rise, 1.5 * height)),
        batch.first(heads, 50, 0.0),
    )


def _inserts(batch: _Batch, extents: BlockExtents) -> Floats:
    """Return the boxes of inserted blocks."""
    heads = batch.of_kind((b"INSERT",))
    named = np.flatnonzero((batch.tags.codes == 2) & np.isin(batch.record, heads))
    _, first = np.unique(batch.record[named], return_index=True)
    named = named[first]
    heads = batch.record[named]
    if not heads.size:
        return np.empty((0, 4))
    tags = batch.tags
    names = texts(batch.drawing.data, tags.values[named], tags.ends[named], _NAME_WIDTH)
    one, group = distinct(names)
    own = np.array([extents.box(bytes(names[k])) for k in one])[group]
    scale_x, scale_y = batch.first(heads, 41, 1.0), batch.first(heads, 42, 1.0)
    # A block inserted in rows and columns reaches as far as its last copy.
    more_x = (np.maximum(batch.first(heads, 70, 1.0), 1.0) - 1.0) * batch.first(heads, 44, 0.0)
    more_y = (np.maximum(batch.first(heads, 71, 1.0), 1.0) - 1.0) * batch.first(heads, 45, 0.0)
    return _turned(
        batch.first(heads, 10),
        batch.first(heads, 20),
        (own[:, 0] * scale_x + np.minimum(more_x, 0), own[:, 2] * scale_x + np.maximum(more_x, 0)),
        (own[:, 1] * scale_y + np.minimum(more_y, 0), own[:, 3] * scale_y + np.maximum(more_y, 0)),
        batch.first(heads, 50, 0.0),
    )


def _turned(
    x: Floats, y: Floats, across: tuple[Floats, Floats], up: tuple[Floats, Floats], turn: Floats
) -> Floats:
    """Return upright boxes around boxes turned about (x, y) by degrees."""
    cos, sin = np.cos(np.radians(turn)), np.sin(np.radians(turn))
    corner_x = np.stack([x + a * cos - b * sin for a in across for b in up])
    corner_y = np.stack([y + a * sin + b * cos for a in across for b in up])
    columns = [
        corner_x.min(axis=0),
        corner_y.min(axis=0),
        corner_x.max(axis=0),
        corner_y.max(axis=0),
    ]
    return _finite(np.column_stack(columns))


def _finite(boxes: Floats) -> Floats:
    """Leave out what is not known."""
    kept: Floats = boxes[np.isfinite(boxes).all(axis=1)]
    return kept
