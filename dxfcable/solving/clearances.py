"""The least clearance of a cable above the line drawn below it, over all its states."""

from __future__ import annotations

import math
from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.lengths import format_length
from dxfcable.model import Clearance, Severity
from dxfcable.statics.catenary_shape import Catenary

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Cable, Layout, Point
    from dxfcable.solving.curves import Shape
    from dxfcable.solving.remarks import Remarks


def clearance_of(shape: Shape, line: Sequence[Point]) -> tuple[float, Point, Point] | None:
    """Find the least vertical distance of a curve above a line.

    Parameters
    ----------
    shape : Funicular or Catenary
        One span.
    line : sequence of Point
        Vertices; upright steps and lines that fold back are looked at side by side.

    Returns
    -------
    tuple or None
        The least, the point on the curve and the one on the line [length]; None where the line
        does not reach under the cable.
    """
    best: tuple[float, Point, Point] | None = None
    for part in _runs(line):
        if part[-1][0] <= float(shape.x[0]) or part[0][0] >= float(shape.x[-1]):
            continue
        least, x = _over(shape, part)
        below = float(np.interp(x, [p[0] for p in part], [p[1] for p in part]))
        if best is None or least < best[0]:
            best = least, (x, below + least), (x, below)
    return best


def _runs(line: Sequence[Point]) -> list[list[Point]]:
    """Part a line into runs that go on to the right; upright steps belong to none."""
    runs: list[list[Point]] = []
    for a, b in pairwise(line):
        first, last = sorted((a, b))
        if first[0] == last[0]:
            continue
        if runs and a is first and runs[-1][-1] == first:
            runs[-1].append(last)
        else:
            runs.append([first, last])
    return runs


def _over(shape: Shape, line: Sequence[Point]) -> tuple[float, float]:
    """Find the least distance over one run, and where."""
    if isinstance(shape, Catenary) and shape.weight:
        return shape.least_clearance(line)
    corners = np.asarray(line)
    x0, x1 = max(line[0][0], float(shape.x[0])), min(line[-1][0], float(shape.x[-1]))
    at = np.concatenate([shape.x, corners[:, 0], [x0, x1]])  # between those both are straight
    at = np.unique(at[(at >= x0) & (at <= x1)])
    heights = np.interp(at, shape.x, shape.y) - np.interp(at, corners[:, 0], corners[:, 1])
    least = int(np.argmin(heights))
    return float(heights[least]), float(at[least])


def _candidates(
    shapes: Sequence[tuple[str, Shape]], line: Sequence[Point]
) -> list[tuple[str, Shape]]:
    """Leave out shapes that another one is surely below.

    Notes
    -----
    Between its nodes a curve departs from its chords by at most an eighth of the width of a
    piece times the change of its slope, and always downwards.
    """
    chords = [(min(_chord_heights(shape, line), default=math.inf), shape) for _, shape in shapes]
    lowest = min(height for height, _ in chords)
    return [
        one
        for one, (height, shape) in zip(shapes, chords, strict=True)
        if math.isinf(lowest) or height - _depth(shape) <= lowest
    ]


def _chord_heights(shape: Shape, line: Sequence[Point]) -> list[float]:
    """Return the heights of the chords above a line where either has a corner or an end."""
    heights: list[float] = []
    for part in _runs(line):
        corners = np.asarray(part)
        at = np.concatenate([shape.x, corners[:, 0]])
        first, last = max(corners[0, 0], shape.x[0]), min(corners[-1, 0], shape.x[-1])
        at = at[(at >= first) & (at <= last)]
        if at.size:
            above = np.interp(at, shape.x, shape.y) - np.interp(at, corners[:, 0], corners[:, 1])
            heights.append(float(np.min(above)))
    return heights


def _depth(shape: Shape) -> float:
    """Bound how far a curve hangs below its chords."""
    turns = (shape.verticals_right - shape.verticals_left) / shape.horizontal
    return float(np.max(np.diff(shape.x) * turns)) / 8.0


def least_clearance(
    layout: Layout,
    cable: Cable,
    shapes: Sequence[tuple[str, Shape]],
    remarks: Remarks,
) -> Clearance | None:
    """Find the least clearance over all states; less than nothing must be seen.

    Parameters
    ----------
    shapes : sequence of (str, Shape)
        Combinations and the shapes under them.
    """
    found: Clearance | None = None
    for combo, shape in _candidates(shapes, cable.clearance):
        here = clearance_of(shape, cable.clearance)
        if here is not None and (found is None or here[0] < found.least):
            found = Clearance(least=here[0], at=here[1], to=here[2], state=combo)
    if found is None:
        remarks.say(
            "clearance-beyond",
            f"cable {cable.mark}: the clearance line does not reach under the cable",
        )
    elif found.least < 0.0:
        short = format_length(-found.least, layout.length_unit)
        remarks.say(
            "clearance",
            f"cable {cable.mark}: the cable lies {short} under its clearance line at "
            f"x {found.at[0]:.6g}, under {found.state}",
            Severity.WARNING,
        )
    return found
