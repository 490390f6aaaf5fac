"""The least clearance in the elevation: a dimension from the clearance line up to the cable.

The cable is drawn as it stands, and comes nearest in another state: a short level stroke marks
its place then.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.painting import turned_boxes
from dxfcable.drawing.painting.arrows import HEAD
from dxfcable.drawing.painting.label_ground import TOUCH, Label
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.sketch import strokes

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.drawing.painting.drawn_ground import DrawnGround
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import Clearance, Point

    Floats = NDArray[np.float64]

_LAYER = "closing_string"  # that of all dimensions
_SHIFTS = (0.0, 1.4, -1.4, 2.2, -2.2, 3.0, -3.0)  # of the dimension from its place, text heights
_CLEAR = 0.5  # kept free about the dimension
_OVER = 0.7  # that level strokes go beyond it
_SHORT = 3.0  # a dimension below that has its arrows outside
_TAIL = 2.0  # length of those
_ON_LINE, _ON_BOX, _ON_OWN, _FURTHER = 30.0, 100.0, 60.0, 4.0


def draw_clearance(view: View, sketch: Sketch, drawn: DrawnGround) -> tuple[Label, ...]:
    """Draw the dimension of the least clearance, if the cable has one.

    Parameters
    ----------
    view : View
        The cable.
    sketch : Sketch
        Has all other linework of the view; gets the dimension.
    drawn : DrawnGround
        The drafter's drawing.

    Returns
    -------
    tuple of Label
        Its label, still to be placed.
    """
    found = view.formed.clearance
    if found is None:
        return ()
    h, name = view.height, f"{view.prefix}/clearance"
    x = _place(found, view.height, sketch, drawn)
    line, cable = (x, found.to[1]), (x, found.at[1])
    if found.least:
        _draw_dimension(sketch, name, line, cable, h)
    for number, at in enumerate((found.to, found.at), start=1):
        # Where the dimension stands aside, its ends are carried over to it.
        near, far = min(at[0], x) - _OVER * h, max(at[0], x) + _OVER * h
        if at is found.at or x != at[0]:
            sketch.line(f"{name}/level-{number}", _LAYER, (near, at[1]), (far, at[1]))
    text = f"CLEAR {view.wording.length(found.least)}, {found.state}"
    return (
        Label(
            id=f"{view.prefix}/clearance-label",
            layer=_LAYER,
            text=text,
            places=_places(line, cable, text_width(text, h), h),
            target=(line, cable),
        ),
    )


def _place(found: Clearance, h: float, sketch: Sketch, drawn: DrawnGround) -> float:
    """Choose the dimension's x: where the least is, or a little beside hangers and the like."""
    low, high = sorted((found.at[1], found.to[1]))
    inset = min(0.2 * h, 0.25 * (high - low))  # lines that only end there are no hindrance
    x = found.at[0] + h * np.array(_SHIFTS)
    count = len(x)
    lines = np.column_stack((x, np.full(count, low + inset), x, np.full(count, high - inset)))
    rows, touch = turned_boxes.of_lines(lines, _CLEAR * h), TOUCH * h
    own = turned_boxes.of_lines(_upright(strokes(sketch.items)))
    hits = turned_boxes.touching(rows[:, None, :], own[None, :, :], touch).sum(axis=1)
    costs = _FURTHER * np.abs(np.array(_SHIFTS)) + _ON_OWN * hits
    costs += drawn.burdens(rows, touch, _ON_LINE, _ON_BOX)
    return float(x[int(np.argmin(np.round(costs, 6)))])


def _upright(lines: Floats) -> Floats:
    """Keep lines that are nearly upright: any other is crossed, and hides nothing."""
    across, up = np.abs(lines[:, 2] - lines[:, 0]), np.abs(lines[:, 3] - lines[:, 1])
    return lines[across <= 0.2 * up]


def _draw_dimension(sketch: Sketch, name: str, line: Point, cable: Point, h: float) -> None:
    """Draw line and arrowheads, these outside where there is no room between."""
    up = 1.0 if cable[1] > line[1] else -1.0
    size = HEAD * h
    if abs(cable[1] - line[1]) >= _SHORT * h:
        sketch.line(name, _LAYER, line, cable)
        sketch.arrowhead(f"{name}/head-1", _LAYER, line, (0.0, -up), size)
        sketch.arrowhead(f"{name}/head-2", _LAYER, cable, (0.0, up), size)
        return
    start, end = (line[0], line[1] - up * _TAIL * h), (cable[0], cable[1] + up * _TAIL * h)
    sketch.line(name, _LAYER, start, end)
    sketch.arrowhead(f"{name}/head-1", _LAYER, line, (0.0, up), size)
    sketch.arrowhead(f"{name}/head-2", _LAYER, cable, (0.0, -up), size)


def _places(line: Point, cable: Point, width: float, h: float) -> tuple[Point, ...]:
    """List middles of the level text: beside the dimension, then over and under its ends."""
    aside = 0.5 * width + 0.5 * h
    low, high = sorted((line[1], cable[1]))
    beside = tuple(
        (line[0] + side * (aside + more * h), low + share * (high - low))
        for more in (0.0, 0.8, 1.6, 2.4)
        for share in (0.5, 0.35, 0.65, 0.2, 0.8)
        for side in (1, -1)
    )
    ends = tuple(
        (line[0] + side * aside, y + turn * rise * h)
        for rise in (0.9, 1.8, 2.7)
        for y, turn in ((low, -1), (high, 1))
        for side in (1, -1)
    )
    return beside + ends
