"""Leaders: thin lines from labels that stand off to what they name."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.painting import turned_boxes

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.drawing.items import Item, TextItem
    from dxfcable.drawing.painting.drawn_ground import DrawnGround
    from dxfcable.drawing.painting.label_ground import Label, LabelGround
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import Point

_LONGEST = 15.0  # a label moved further off is on its own
_SHORT_OF = 0.12  # a leader ends this short of the text's box
# What a leader may run over, in text heights that it would rather be longer; a text never.
_ON_LINE, _ON_BOX, _ON_STROKE, _ON_LABEL = 1.0, 3.0, 2.0, 1e6
_UPON, _SLANT = 12.0, 0.06  # times that for one along a line of ours, which would hide it
_LIKELY = 0.84  # of the room kept for a text: how wide it is shown at least
_STARTS = (
    *((u, v) for v in (-1.0, 1.0) for u in (0.0, -0.5, 0.5, -0.9, 0.9)),
    *((u, v) for u in (-1.0, 1.0) for v in (0.0, -1.0, 1.0)),
)


def nearest_on(line: tuple[Point, Point], point: Point) -> Point:
    """Give the point of a line that is nearest to a point."""
    (ax, ay), (bx, by) = line
    square = (bx - ax) ** 2 + (by - ay) ** 2
    share = ((point[0] - ax) * (bx - ax) + (point[1] - ay) * (by - ay)) / square if square else 0.0
    share = min(1.0, max(0.0, share))
    return ax + share * (bx - ax), ay + share * (by - ay)


def _corners(row: NDArray[np.float64]) -> list[Point]:
    """Give the corners of a turned box, (1, 6)."""
    x, y, cos, sin, half, rise = row[0].tolist()
    return [
        (x + u * half * cos - v * rise * sin, y + u * half * sin + v * rise * cos)
        for u, v in ((-1.0, -1.0), (1.0, -1.0), (1.0, 1.0), (-1.0, 1.0))
    ]


def distance(corners: list[Point], line: tuple[Point, Point]) -> float:
    """Give the least distance of a box from a line, both being apart [length]."""
    sides = [(corners[k], corners[(k + 1) % 4]) for k in range(4)]
    from_corners = min(math.dist(corner, nearest_on(line, corner)) for corner in corners)
    from_ends = min(math.dist(end, nearest_on(side, end)) for end in line for side in sides)
    return min(from_corners, from_ends)


def draw_leaders(
    pairs: list[tuple[Label, TextItem]],
    sketch: Sketch,
    ground: LabelGround,
    drawn: DrawnGround | None = None,
) -> None:
    """Draw a leader for each label that stands off its object.

    Parameters
    ----------
    pairs : list of (Label, TextItem)
        Labels as placed.
    sketch : Sketch
        Gets the leaders, each with its label's id and `/leader`.
    ground : LabelGround
        What leaders keep clear of; gets them too.
    drawn : DrawnGround, optional
        The drafter's drawing about them.
    """
    h, leaders = ground.height, []
    for label, item in pairs:
        if label.target is None:
            continue
        gap = distance(_corners(turned_boxes.of_whole(label, item)), label.target)
        if label.leader_from * h < gap <= _LONGEST * h:
            leaders += _draw(label, label.target, item, sketch, ground, drawn)
    ground.add(leaders)


def _draw(
    label: Label,
    target: tuple[Point, Point],
    item: TextItem,
    sketch: Sketch,
    ground: LabelGround,
    drawn: DrawnGround | None,
) -> list[Item]:
    """Draw the shortest leader that covers nothing, from a side or corner of the text.

    None is drawn where each would run over a text: so it is where two texts of one object are
    stacked, and the upper one is read with the lower.
    """
    h = ground.height
    own = turned_boxes.of_texts([item])
    if any(label.room):
        # What is drawn about a text is met first.
        likely = turned_boxes.of_whole(label, item, _LIKELY)
        own = np.concatenate((own, turned_boxes.of_rooms(label, item)))
    else:
        # A text may be narrower than the room kept for it, and a leader is to reach it.
        likely = own.copy()
        likely[:, 4] *= _LIKELY
    x, y, cos, sin, half, rise = likely[0].tolist()
    starts = [
        (x + u * half * cos - v * rise * sin, y + u * half * sin + v * rise * cos)
        for u, v in _STARTS
    ]
    lines = []
    for start in starts:
        end = nearest_on(target, start)
        run = math.dist(start, end)
        if run > 0.5 * h:
            cut = _SHORT_OF * h / run
            lines.append(
                (
                    start[0] + cut * (end[0] - start[0]),
                    start[1] + cut * (end[1] - start[1]),
                    *end,
                )
            )
    rows = np.array(lines)
    is_own = (ground.labels[:, None, :] == own[None, :, :]).all(axis=2).any(axis=1)
    others = np.concatenate((ground.labels[~is_own], likely))
    costs = _costs(rows, ground, others, drawn) + _lengths(rows, (x, y)) / h
    best = int(np.argmin(np.round(costs, 6)))
    if costs[best] >= _ON_LABEL:
        return []
    sketch.line(f"{label.id}/leader", label.layer, lines[best][:2], lines[best][2:])
    return sketch.items[-1:]


def _lengths(lines: NDArray[np.float64], middle: Point) -> NDArray[np.float64]:
    """Give lengths, with a little for starts away from the text's middle."""
    aside = np.hypot(lines[:, 0] - middle[0], lines[:, 1] - middle[1])
    run = lines[:, 2:] - lines[:, :2]
    return np.asarray(np.hypot(run[:, 0], run[:, 1]) + 0.1 * aside)


def _costs(
    lines: NDArray[np.float64],
    ground: LabelGround,
    texts: NDArray[np.float64],
    drawn: DrawnGround | None,
) -> NDArray[np.float64]:
    """Weigh leaders by the texts and lines that they run over; the last bit may touch."""
    shortened = lines.copy()
    shortened[:, 2:] -= 0.1 * (lines[:, 2:] - lines[:, :2])
    rows, touch = turned_boxes.of_lines(shortened), ground.touch
    costs = np.zeros(len(lines))
    low, high = turned_boxes.reaches(rows)
    low, high = low.min(axis=0), high.max(axis=0)
    for others, weight in ((texts, _ON_LABEL), (ground.strokes, _ON_STROKE)):
        bottom, top = turned_boxes.reaches(others)
        near = others[((bottom < high) & (top > low)).all(axis=1)]
        hit = turned_boxes.touching(rows[:, None, :], near[None, :, :], touch)
        slant = np.abs(rows[:, None, 2] * near[None, :, 3] - rows[:, None, 3] * near[None, :, 2])
        upon = np.where((slant < _SLANT) & (weight < _ON_LABEL), _UPON, 1.0)
        costs += weight * (hit * upon).sum(axis=1)
    if drawn is not None:
        costs += drawn.burdens(rows, touch, _ON_LINE, _ON_BOX)
    return costs
