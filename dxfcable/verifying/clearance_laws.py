"""The dimension of the least clearance: as long between its arrowheads as its label says."""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.model import Cable, Point
    from dxfcable.verifying.measure import SpanFigures
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.tally import Tally
    from dxfcable.verifying.words import Reader

CLEARANCE = "least clearance"
_WORD = "CLEAR "
_REACH = 30.0  # of the dimension from its label, in text heights
_ROW = 2.0  # of a second row below the first


def name_clearances(sheet: Sheet, spans: Sequence[SpanFigures]) -> None:
    """Find clearance dimensions without marks by their labels, each with the nearest cable."""
    if sheet.has_marks:
        return
    for label in [e for e in sheet.loose if e.text.startswith(_WORD)]:
        near = [s for s in spans if s.curve[0][0] <= label.middle[0] <= s.curve[-1][0]]
        if not near:
            continue
        prefix = min(near, key=lambda s: min(math.dist(p, label.middle) for p in s.curve)).prefix
        _name(sheet, label, f"{prefix}/clearance")


def _name(sheet: Sheet, label: IssuedEntity, name: str) -> None:
    """Name a label's dimension line, heads, strokes and second row."""
    h, near = label.height, 8.0 * sheet.grain
    pool = [e for e in sheet.loose if "closing_string" in e.roles]
    upright = [e for e in pool if e.kind == "LINE" and abs(e.start[0] - e.end[0]) <= near]
    upright = [e for e in upright if _away(e, label) <= _REACH * h]
    if not upright:
        return
    line = min(upright, key=lambda e: _away(e, label))
    x = line.start[0]
    sheet.adopt(f"{name}-label", label)
    sheet.adopt(name, line)
    ends = sorted((line.start[1], line.end[1]))
    heads = [e for e in pool if e.kind == "SOLID" and abs(e.start[0] - x) <= near]
    for number, head in enumerate(sorted(heads, key=lambda e: e.start[1])[:2], start=1):
        sheet.adopt(f"{name}/head-{number}", head)
    level = [
        e
        for e in pool
        if e.kind == "LINE"
        and e is not line
        and abs(e.start[1] - e.end[1]) <= near
        and min(e.start[0], e.end[0]) - h <= x <= max(e.start[0], e.end[0]) + h
        and ends[0] - near <= e.start[1] <= ends[1] + near
    ]
    # A stroke crosses the dimension's line; a level leader ends on it.
    level.sort(key=lambda e: max(e.start[0], e.end[0]) <= x + near)
    level.sort(key=lambda e: min(e.start[0], e.end[0]) >= x - near)
    for number, stroke in enumerate(sorted(level[:2], key=lambda e: e.start[1]), start=1):
        sheet.adopt(f"{name}/level-{number}", stroke)
    below = [
        e
        for e in pool
        if e.text
        and e is not label
        and abs(e.middle[0] - label.middle[0]) <= h
        and 0.0 < label.middle[1] - e.middle[1] <= _ROW * h
    ]
    for row in below[:1]:
        sheet.adopt(f"{name}-label/row-2", row)


def _away(line: IssuedEntity, label: IssuedEntity) -> float:
    """Give the distance of a label from an upright line."""
    low, high = sorted((line.start[1], line.end[1]))
    up = max(0.0, low - label.middle[1], label.middle[1] - high)
    return math.hypot(line.start[0] - label.middle[0], up)


def hold_clearance(
    tally: Tally,
    sheet: Sheet,
    prefix: str,
    cable: Cable,
    spans: Sequence[SpanFigures],
    reader: Reader,
) -> None:
    """Hold the dimension against its label, its foot against the clearance line."""
    name = f"{prefix}/clearance"
    line, label = sheet.named.get(name), sheet.named.get(f"{name}-label")
    if line is None and label is None:
        if _reaches_under(cable.clearance, spans):
            text = "a clearance line is drawn below the cable, the dimension to it is missing"
            tally.fail(CLEARANCE, text)
        return
    if line is None or label is None:
        text = f"{name} is not whole: its {'line' if line is None else 'label'} is missing"
        tally.fail(CLEARANCE, text, line or label)
        return
    near = 4.0 * sheet.grain
    lean = abs(line.start[0] - line.end[0])
    tally.hold(CLEARANCE, lean, near, f"{name} is not upright", line)
    tips = [sheet.named.get(f"{name}/head-{number}") for number in (1, 2)]
    if None in tips:
        tally.fail(CLEARANCE, f"an arrowhead of {name} is missing", line)
        return
    heights = sorted(tip.start[1] for tip in tips if tip is not None)
    for tip in (tip for tip in tips if tip is not None):
        off = abs(tip.start[0] - line.start[0])
        tally.hold(CLEARANCE, off, near, f"{tip.id} is off its line", tip)
    words = label.text.removeprefix(_WORD).partition(",")[0]
    shown = reader.length(words)
    if shown is None:
        tally.fail(CLEARANCE, f'{label.id} says "{label.text}"', label)
        return
    off = abs(abs(shown.value) - (heights[1] - heights[0]))
    text = f'{label.id} says "{label.text}", its dimension is off'
    tally.hold(CLEARANCE, off, shown.half + near, text, label)
    ends = sorted((line.start[1], line.end[1]))
    room = 4.0 * sheet.height  # a short dimension has its arrows outside
    is_long = heights[1] - heights[0] >= 3.0 * sheet.height
    off = max(abs(a - b) for a, b in zip(ends, heights, strict=True))
    tally.hold(CLEARANCE, off, near if is_long else room, f"{name} does not end at its heads", line)
    _hold_strokes(tally, sheet, name, heights, line)
    if cable.clearance:
        foot = heights[0] if shown.value >= 0.0 else heights[1]
        _hold_foot(tally, sheet, name, foot, line, cable.clearance)
    else:
        tally.fail(CLEARANCE, "no clearance line is drawn any more", line)


def _reaches_under(line: Sequence[Point], spans: Sequence[SpanFigures]) -> bool:
    """Tell whether a clearance line reaches under a cable."""
    if not spans:
        return False
    left, right = spans[0].curve[0][0], spans[-1].curve[-1][0]
    near = 4.0 * spans[0].grain
    return any(
        a[0] != b[0] and max(a[0], b[0]) > left + near and min(a[0], b[0]) < right - near
        for a, b in itertools.pairwise(line)
    )


def _hold_foot(
    tally: Tally,
    sheet: Sheet,
    name: str,
    foot: float,
    line: IssuedEntity,
    drawn: Sequence[Point],
) -> None:
    """Hold the foot of the dimension against the drafter's clearance line.

    Strokes reach equally far beyond the place of the least clearance and the dimension, which
    may stand aside: that tells the place.
    """
    x, near = line.start[0], 8.0 * sheet.grain
    found = [sheet.named.get(f"{name}/level-{number}") for number in (1, 2)]
    stroke = next((stroke for stroke in found if stroke is not None), None)
    if stroke is None:
        return  # told as missing
    at = stroke.start[0] + stroke.end[0] - x
    off = math.inf
    for a, b in itertools.pairwise(drawn):
        (ax, ay), (bx, by) = sorted((a, b))
        if not ax - near <= at <= bx + near:
            continue
        if bx - ax <= near:
            off = min(off, max(0.0, min(ay, by) - foot, foot - max(ay, by)))
            continue
        share = min(1.0, max(0.0, (at - ax) / (bx - ax)))
        lean = near * abs(by - ay) / (bx - ax)
        off = min(off, max(0.0, abs(ay + share * (by - ay) - foot) - lean))
    text = f"the foot of {name} does not stand on the clearance line"
    tally.hold(CLEARANCE, off, near, text, line)


def _hold_strokes(
    tally: Tally, sheet: Sheet, name: str, heights: Sequence[float], line: IssuedEntity
) -> None:
    """Hold the level strokes against the ends of the dimension; one stands at the cable."""
    found = [sheet.named.get(f"{name}/level-{number}") for number in (1, 2)]
    strokes = [stroke for stroke in found if stroke is not None]
    if not strokes:
        tally.fail(CLEARANCE, f"the stroke at the cable's place of {name} is missing", line)
    for stroke in strokes:
        off = max(min(abs(p[1] - height) for height in heights) for p in stroke.points)
        off = max(off, abs(stroke.start[1] - stroke.end[1]))
        text = f"{stroke.id} is not level with an end of the dimension"
        tally.hold(CLEARANCE, off, 4.0 * sheet.grain, text, stroke)
