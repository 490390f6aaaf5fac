"""Extents of block definitions by the raw points in them, nested blocks included."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.bytes.decode import layer_key

if TYPE_CHECKING:
    from dxfcable.drawing.bytes.pairs import Pair
    from dxfcable.drawing.bytes.scan import Scan

Box = tuple[float, float, float, float]  # xmin, ymin, xmax, ymax
UNKNOWN: Box = (math.nan, math.nan, math.nan, math.nan)
_INSERT_CODES = (2, 10, 20, 41, 42, 50)
_DEPTH = 8


class BlockExtents:
    """Boxes of block definitions about their base points, each worked out once."""

    def __init__(self, drawing: Scan) -> None:
        self._drawing = drawing
        self._spans: dict[str, tuple[int, int]] | None = None
        self._known: dict[str, Box] = {}

    def box(self, name: bytes) -> Box:
        """Return a block's box, not-a-numbers where it is unknown or empty."""
        return self._box(layer_key(name, "latin-1"), _DEPTH)

    def _box(self, key: str, depth: int) -> Box:
        """Return a block's box, down to some depth of nesting."""
        span = self._by_name().get(key)
        if span is None or depth == 0:
            return UNKNOWN
        if key not in self._known:
            self._known[key] = self._measure(*span, depth)
        return self._known[key]

    def _by_name(self) -> dict[str, tuple[int, int]]:
        """Return the records that open and close each block."""
        if self._spans is None:
            drawing = self._drawing
            section = drawing.section("BLOCKS")
            inside = np.arange(section.first, section.last) if section else np.empty(0, np.int64)
            opens = inside[drawing.kinds[inside] == b"BLOCK"].tolist()
            closes = inside[drawing.kinds[inside] == b"ENDBLK"].tolist()
            self._spans = {
                layer_key(drawing.first_tag(a, 2) or b"", "latin-1"): (a, b)
                for a, b in zip(opens, closes, strict=False)
            }
        return self._spans

    def _measure(self, first: int, last: int, depth: int) -> Box:
        """Measure raw points, and nested blocks."""
        base = {p.code: number(p.value) for p in self._pairs(first) if p.code in (10, 20)}
        xs: list[float] = []
        ys: list[float] = []
        for record in range(first + 1, last):
            if self._drawing.kinds[record] == b"ATTDEF":
                continue  # shown by the attributes of each insert, in places of their own
            if self._drawing.kinds[record] == b"INSERT":
                box = self._inserted(record, depth - 1)
                xs += [box[0], box[2]]
                ys += [box[1], box[3]]
                continue
            for pair in self._pairs(record):
                if pair.code in (10, 11):
                    xs.append(number(pair.value))
                elif pair.code in (20, 21):
                    ys.append(number(pair.value))
        xs = [x for x in xs if math.isfinite(x)]
        ys = [y for y in ys if math.isfinite(y)]
        if not xs or not ys:
            return UNKNOWN
        dx, dy = base.get(10, 0.0), base.get(20, 0.0)
        return min(xs) - dx, min(ys) - dy, max(xs) - dx, max(ys) - dy

    def _inserted(self, record: int, depth: int) -> Box:
        """Return the box of one INSERT in the block that it stands in."""
        facts: dict[int, bytes] = {}
        for pair in self._pairs(record):
            if pair.code in _INSERT_CODES:
                facts.setdefault(pair.code, pair.value)
        box = self._box(layer_key(facts.get(2, b""), "latin-1"), depth)
        x, y = number(facts.get(10, b"")), number(facts.get(20, b""))
        scale_x, scale_y = number(facts.get(41, b"1")), number(facts.get(42, b"1"))
        turn = math.radians(number(facts.get(50, b"0")))
        cos, sin = math.cos(turn), math.sin(turn)
        corners = [(a * scale_x, b * scale_y) for a in (box[0], box[2]) for b in (box[1], box[3])]
        xs = [x + a * cos - b * sin for a, b in corners]
        ys = [y + a * sin + b * cos for a, b in corners]
        return min(xs), min(ys), max(xs), max(ys)

    def _pairs(self, record: int) -> list[Pair]:
        """Return a record's tags; none where they do not pair, since nothing is sure then."""
        try:
            return list(self._drawing.pairs(record))
        except ValueError:
            return []


def number(raw: bytes) -> float:
    """Read one number; what is none reads as not a number."""
    try:
        return float(raw)
    except ValueError:
        return math.nan
