"""The least clearance in the elevation: a dimension from the clearance line up to the cable.

The cable is drawn as it stands, and comes nearest in another state: a short level stroke marks
its place then.
"""

from __future__ import annotations

import itertools
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.items import Align, TextItem, VAlign
from dxfcable.drawing.painting import turned_boxes
from dxfcable.drawing.painting.arrows import HEAD
from dxfcable.drawing.painting.label_ground import TOUCH, Label
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.sketch import Sketch, strokes

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.drawing.painting.drawn_ground import DrawnGround
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.model import Clearance, Point

    Floats = NDArray[np.float64]

_LAYER = "closing_string"  # that of all dimensions
_SHIFTS = (0.0, 1.4, -1.4, 2.2, -2.2, 3.0, -3.0)  # of the dimension from its place, text heights
_CLEAR = 0.5  # kept free about the dimension
_OVER = 0.7  # that level strokes go beyond it
_SHORT = 3.0  # a dimension below that has its arrows outside
_TAIL = 2.0  # length of those
_FROM = 0.5  # of the text from the dimension
_STEP = 1.5  # from row to row of the text
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
    rows = _rows(view, found)
    widest = max(text_width(row, h) for row in rows)
    tall = _STEP * (len(rows) - 1) * h
    more = max(0.0, 0.5 * (widest - text_width(rows[0], h)))
    places = _places(line, cable, widest, tall, h)
    return (
        Label(
            id=f"{view.prefix}/clearance-label",
            layer=_LAYER,
            text=rows[0],
            places=tuple((at[0], at[1] + 0.5 * tall) for at in places),
            target=(line, cable),
            room=(more, tall, more, 0.0),
        ),
    )


def draw_clearance_row(view: View, sketch: Sketch) -> list[tuple[str, Point]]:
    """Write the combination below its clearance, where both do not go into one line.

    Parameters
    ----------
    view : View
        The cable.
    sketch : Sketch
        Has the label as placed; gets the second row, which goes with it as one part.

    Returns
    -------
    list of (str, Point)
        The part and the place of its label; none where there is no second row.
    """
    found, name = view.formed.clearance, f"{view.prefix}/clearance-label"
    rows = _rows(view, found) if found else ()
    if len(rows) < 2:
        return []
    at = next(item.at for item in sketch.items if isinstance(item, TextItem) and item.id == name)
    part = Sketch(sketch.rounder, name)
    below = (at[0], at[1] - _STEP * view.height)
    part.text(
        f"{name}/row-2",
        _LAYER,
        rows[1],
        below,
        view.height,
        align=Align.CENTER,
        valign=VAlign.MIDDLE,
    )
    sketch.items += part.items
    return [(name, at)]


def _rows(view: View, found: Clearance) -> tuple[str, ...]:
    """Give the words: in one line, or in two where panels are too narrow for that."""
    h, nodes = view.height, view.formed.nodes
    clear = f"CLEAR {view.wording.length(found.least)}"
    whole = f"{clear}, {found.state}"
    panel = min(b.x - a.x for a, b in itertools.pairwise(nodes))
    room = panel - (_FROM + _SHIFTS[1] + 0.5) * h
    return (whole,) if text_width(whole, h) <= room else (f"{clear},", found.state)


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


def _places(line: Point, cable: Point, width: float, tall: float, h: float) -> tuple[Point, ...]:
    """List middles of the level rows: beside the dimension, then over and under its ends."""
    aside, half = 0.5 * width + _FROM * h, 0.5 * tall
    low, high = sorted((line[1], cable[1]))
    beside = tuple(
        (line[0] + side * (aside + more * h), low + share * (high - low))
        for more in (0.0, 0.8, 1.6, 2.4)
        for share in (0.5, 0.35, 0.65, 0.2, 0.8)
        for side in (1, -1)
    )
    ends = tuple(
        (line[0] + side * (aside + more * h), y + turn * (rise * h + half))
        for rise in (0.9, 1.8, 2.7)
        for y, turn in ((low, -1), (high, 1))
        for more in (0.0, 1.0)
        for side in (1, -1)
    )
    return beside + ends
