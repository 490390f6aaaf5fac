"""Everything drawn in model space as lines and boxes, taken by pattern, to find free places."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.bytes.decode import layer_key
from dxfcable.drawing.bytes.pairs import Tags, find_tags, texts
from dxfcable.drawing.excerpt import Obstacles

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.drawing.bytes.scan import Block, Scan

_CODES = (10, 11, 20, 21, 40)
_WORD_CODES = (1, 3, 41, 50, 71, 72)
_INSERT_CODES = (2, 10, 20, 41, 42, 50)
_JOINED = (b"LINE", b"LWPOLYLINE", b"POLYLINE", b"SPLINE", b"LEADER", b"MLINE")
_ROUND = (b"CIRCLE", b"ARC")
_WORDS = (b"TEXT", b"MTEXT", b"ATTDEF")
_NO_PLACE = (b"POLYLINE", b"HATCH", b"VIEWPORT", b"SEQEND")  # their 10/20 is no point of theirs
_ENDLESS = (b"RAY", b"XLINE")  # their 11/21 is a direction
_WIDTH = 0.9  # of the height a character, generous
_NUMBER_WIDTH = 32
_DEPTH = 8


def obstacles(drawing: Scan) -> Obstacles:
    """Collect lines, points and boxes of all model-space entities.

    Text boxes and blocks are estimates on the generous side; paper space is left out.
    """
    entities = drawing.section("ENTITIES")
    if entities is None or not drawing.heads.size:
        return Obstacles(np.empty((0, 4)), np.empty((0, 4)))
    points = _Points(drawing, entities)
    boxes = [points.boxes, _text_boxes(drawing), _insert_boxes(drawing)]
    return Obstacles(points.segments, np.concatenate(boxes))


class _Points:
    """Points of one section, joined to lines where their entity is one."""

    def __init__(self, drawing: Scan, section: Block) -> None:
        start, end = drawing.span(section.first)[1], drawing.span(section.last)[0]
        tags = find_tags(drawing.data, _CODES, start, end)
        record = np.searchsorted(drawing.starts[:-1], tags.starts, side="right") - 1
        outside = _in_paper_space(drawing)
        head = drawing.heads[np.searchsorted(drawing.heads, record, side="right") - 1]
        value = numbers(drawing.data, tags)
        opens = np.flatnonzero((tags.codes[:-1] < 12) & (tags.codes[1:] == tags.codes[:-1] + 10))
        kinds = drawing.kinds
        good = (record[opens] == record[opens + 1]) & ~np.isin(head[opens], outside)
        good &= ~np.isin(kinds[record[opens]], _NO_PLACE)
        good &= ~(np.isin(kinds[record[opens]], _ENDLESS) & (tags.codes[opens] == 11))
        good &= np.isfinite(value[opens]) & np.isfinite(value[opens + 1])
        opens = opens[good]
        x, y, owner = value[opens], value[opens + 1], head[opens]
        joined = (owner[:-1] == owner[1:]) & np.isin(kinds[owner[:-1]], _JOINED)
        lines = np.column_stack([x[:-1], y[:-1], x[1:], y[1:]])[joined]
        single = ~np.isin(kinds[owner], _JOINED)
        dots = np.column_stack([x, y, x, y])[single]
        self.segments = np.concatenate([lines, dots])
        self.boxes = self._circles(tags, record, value, x, y, record[opens], kinds)

    @staticmethod
    def _circles(
        tags: Tags,
        record: NDArray[np.int64],
        value: NDArray[np.float64],
        x: NDArray[np.float64],
        y: NDArray[np.float64],
        point_record: NDArray[np.int64],
        kinds: NDArray[np.bytes_],
    ) -> NDArray[np.float64]:
        """Return the boxes of circles and arcs."""
        which = np.flatnonzero((tags.codes == 40) & np.isin(kinds[record], _ROUND))
        owners, first = np.unique(point_record, return_index=True)
        slot = np.searchsorted(owners, record[which])
        slot_ok = slot < owners.size
        which, slot = which[slot_ok], slot[slot_ok]
        has = owners[slot] == record[which]
        which, slot = which[has], slot[has]
        radius = np.abs(value[which])
        cx, cy = x[first[slot]], y[first[slot]]
        boxes = np.column_stack([cx - radius, cy - radius, cx + radius, cy + radius])
        finite: NDArray[np.float64] = boxes[np.isfinite(boxes).all(axis=1)]
        return finite


def numbers(data: bytes, tags: Tags) -> NDArray[np.float64]:
    """Read values as numbers; what is none reads as not a number."""
    raw = texts(data, tags.values, tags.ends, _NUMBER_WIDTH)
    try:
        return raw.astype(np.float64)
    except ValueError:
        return np.array([_number(bytes(r)) for r in raw])


def _number(raw: bytes) -> float:
    """Read one number or nan."""
    try:
        return float(raw)
    except ValueError:
        return float("nan")


def _in_paper_space(drawing: Scan) -> NDArray[np.int64]:
    """Return the records that say they are in paper space."""
    records, which = drawing.first_tags(67)
    flags = [drawing.data[drawing.tags.values[k] : drawing.tags.ends[k]] == b"1" for k in which]
    return records[np.array(flags, np.bool_)] if records.size else records


def _text_boxes(drawing: Scan) -> NDArray[np.float64]:
    """Return generous boxes of texts."""
    entities = drawing.section("ENTITIES")
    assert entities is not None
    heads = drawing.heads[np.isin(drawing.kinds[drawing.heads], _WORDS)]
    heads = heads[~np.isin(heads, _in_paper_space(drawing))]
    if not heads.size:
        return np.empty((0, 4))
    start, end = int(drawing.starts[heads[0]]), int(drawing.starts[heads[-1] + 1])
    tags = find_tags(drawing.data, (*_CODES, *_WORD_CODES), start, end)
    record = np.searchsorted(drawing.starts[:-1], tags.starts, side="right") - 1
    slot = np.searchsorted(heads, record)
    inside = (slot < heads.size) & (heads[np.minimum(slot, heads.size - 1)] == record)
    column = {code: np.full(heads.size, np.nan) for code in (10, 11, 20, 21, 40, 41, 50, 71, 72)}
    for code, target in column.items():
        which = np.flatnonzero(inside & (tags.codes == code))[::-1]  # the first one wins
        part = Tags(
            tags.codes[which], tags.starts[which], tags.values[which], tags.ends[which], 0, None
        )
        target[slot[which]] = numbers(drawing.data, part)
    length, lines = np.zeros(heads.size), np.ones(heads.size)
    for k in np.flatnonzero(inside & ((tags.codes == 1) | (tags.codes == 3))):
        words = drawing.data[tags.values[k] : tags.ends[k]]
        lines[slot[k]] += words.count(b"\\P")
        length[slot[k]] += len(words)
    is_long = drawing.kinds[heads] == b"MTEXT"
    return _rotated_boxes(column, length, lines, is_long)


def _rotated_boxes(
    column: dict[int, NDArray[np.float64]],
    length: NDArray[np.float64],
    lines: NDArray[np.float64],
    is_long: NDArray[np.bool_],
) -> NDArray[np.float64]:
    """Turn text sizes to boxes: TEXT by its alignment, MTEXT to all sides of its point."""
    height = np.nan_to_num(column[40], nan=0.0)
    width = length / lines * height * _WIDTH
    given = np.nan_to_num(column[41], nan=0.0)
    wraps = is_long & (given > 0) & (width > given)
    lines = np.where(wraps, np.ceil(width / np.maximum(given, 1e-300)) + lines, lines)
    width = np.where(wraps, given, width)
    place = np.nan_to_num(column[72], nan=0.0)
    aligned = ~is_long & (place != 0) & np.isfinite(column[11])
    x = np.where(aligned, column[11], column[10])
    y = np.where(aligned, column[21], column[20])
    share = np.where(place == 2, 1.0, np.where(place != 0, 0.5, 0.0)) * ~is_long
    left = np.where(is_long, width, share * width)
    right = np.where(is_long, width, width - share * width)
    down = np.where(is_long, lines * 1.7 * height, 0.5 * height)
    up = np.where(is_long, lines * 1.7 * height, 1.5 * height)
    turn = np.radians(np.nan_to_num(column[50], nan=0.0))
    cos, sin = np.cos(turn), np.sin(turn)
    corner_x = np.stack([x + a * cos - b * sin for a in (-left, right) for b in (-down, up)])
    corner_y = np.stack([y + a * sin + b * cos for a in (-left, right) for b in (-down, up)])
    boxes = np.column_stack(
        [corner_x.min(axis=0), corner_y.min(axis=0), corner_x.max(axis=0), corner_y.max(axis=0)]
    )
    finite: NDArray[np.float64] = boxes[np.isfinite(boxes).all(axis=1)]
    return finite


def _insert_boxes(drawing: Scan) -> NDArray[np.float64]:
    """Return the boxes of inserted blocks, by the raw points of their definitions."""
    heads = drawing.heads[drawing.kinds[drawing.heads] == b"INSERT"]
    heads = heads[~np.isin(heads, _in_paper_space(drawing))]
    section = drawing.section("BLOCKS")
    if not heads.size or section is None:
        return np.empty((0, 4))
    extents = _Extents(drawing, section)
    boxes = [box for k in heads.tolist() if (box := extents.inserted(k, _DEPTH)) is not None]
    return np.array(boxes).reshape(-1, 4)


class _Extents:
    """Extents of block definitions, each worked out once."""

    def __init__(self, drawing: Scan, section: Block) -> None:
        self._drawing = drawing
        inside = np.arange(section.first, section.last)
        opens = inside[drawing.kinds[inside] == b"BLOCK"].tolist()
        closes = inside[drawing.kinds[inside] == b"ENDBLK"].tolist()
        self._spans = {
            layer_key(drawing.first_tag(a, 2) or b"", "latin-1"): (a, b)
            for a, b in zip(opens, closes, strict=False)
        }
        self._known: dict[str, tuple[float, float, float, float] | None] = {}

    def inserted(self, record: int, depth: int) -> tuple[float, float, float, float] | None:
        """Return the box of one INSERT in the space it stands in."""
        facts: dict[int, bytes] = {}
        for pair in self._drawing.pairs(record):
            if pair.code in _INSERT_CODES:
                facts.setdefault(pair.code, pair.value.strip())
        key = layer_key(facts.get(2, b""), "latin-1")
        box = self._block(key, depth)
        x, y = _number(facts.get(10, b"")), _number(facts.get(20, b""))
        if box is None or not (np.isfinite(x) and np.isfinite(y)):
            return None
        scale_x, scale_y = _number(facts.get(41, b"1")), _number(facts.get(42, b"1"))
        turn = np.radians(_number(facts.get(50, b"0")))
        cos, sin = np.cos(turn), np.sin(turn)
        corners = [(a * scale_x, b * scale_y) for a in (box[0], box[2]) for b in (box[1], box[3])]
        xs = [x + a * cos - b * sin for a, b in corners]
        ys = [y + a * sin + b * cos for a, b in corners]
        result = (min(xs), min(ys), max(xs), max(ys))
        return result if np.isfinite(result).all() else None

    def _block(self, key: str, depth: int) -> tuple[float, float, float, float] | None:
        """Return a definition's extents about its base point, None where it is empty."""
        if key not in self._spans or depth == 0:
            return None
        if key not in self._known:
            self._known[key] = self._measure(*self._spans[key], depth)
        return self._known[key]

    def _measure(
        self, first: int, last: int, depth: int
    ) -> tuple[float, float, float, float] | None:
        """Measure raw points, and nested blocks."""
        drawing = self._drawing
        base = {p.code: _number(p.value) for p in drawing.pairs(first) if p.code in (10, 20)}
        nested = [k for k in range(first + 1, last) if drawing.kinds[k] == b"INSERT"]
        boxes = [box for k in nested if (box := self.inserted(k, depth - 1)) is not None]
        tags = find_tags(
            drawing.data,
            (10, 11, 20, 21),
            int(drawing.starts[first + 1]),
            int(drawing.starts[last]),
        )
        if tags.codes.size:
            value = numbers(drawing.data, tags)
            x, y = value[tags.codes < 12], value[tags.codes > 19]
            x, y = x[np.isfinite(x)], y[np.isfinite(y)]
            if x.size and y.size:
                boxes.append((float(x.min()), float(y.min()), float(x.max()), float(y.max())))
        if not boxes:
            return None
        lows, highs = np.min(boxes, axis=0), np.max(boxes, axis=0)
        dx, dy = base.get(10, 0.0), base.get(20, 0.0)
        return (
            float(lows[0]) - dx,
            float(lows[1]) - dy,
            float(highs[2]) - dx,
            float(highs[3]) - dy,
        )
