"""The force polygon of a joint: the forces on a mast head, end to end, at a stated scale."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.label_ground import Label, LabelGround
from dxfcable.drawing.painting.label_places import beside_line, readable_angle
from dxfcable.drawing.painting.label_placing import Group, put_labels
from dxfcable.drawing.painting.naming import unique_parts
from dxfcable.drawing.painting.scale_words import draw_force_scale, under_words
from dxfcable.drawing.painting.sketch import Sketch

if TYPE_CHECKING:
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.plotting import Plotting
    from dxfcable.drawing.painting.rounding import Rounder
    from dxfcable.model import Anchorage, Point

_LAYER = "force_diagram"


def joint_corners(anchorage: Anchorage) -> tuple[Point, ...]:
    """Give the corners of a joint's force polygon from the origin on [force]."""
    corners = [(0.0, 0.0)]
    for side in anchorage.sides:
        x, y = corners[-1]
        corners.append((x + side.force[0], y + side.force[1]))
    return tuple(corners)


def joint_size(anchorage: Anchorage) -> float:
    """Give the larger of width and height of a joint's force polygon [force]."""
    corners = joint_corners(anchorage)
    across, up = [x for x, _ in corners], [y for _, y in corners]
    return max(max(across) - min(across), max(up) - min(up))


def draw_joint(
    view: View,
    name: str,
    anchorage: Anchorage,
    plotting: Plotting,
    per_paper: float,
    rounder: Rounder,
) -> Sketch:
    """Draw one joint's force polygon about its first corner as origin.

    Parameters
    ----------
    view : View
        The cable it is shown with.
    name : str
        Part of ids of the joint.
    anchorage : Anchorage
        The forces on it.
    plotting : Plotting
        Plotting scale and text height.
    per_paper : float
        Force scale: force by paper unit.
    rounder : Rounder
        Rounds coordinates about the origin.

    Returns
    -------
    Sketch
    """
    part = f"{view.prefix}/joint/{name}"
    scale, h = plotting.force_per_length(per_paper), plotting.text_height
    sketch = Sketch(rounder, part)
    corners = [rounder.point((x / scale, y / scale)) for x, y in joint_corners(anchorage)]
    labels: list[Label] = []
    names = unique_parts([side.name for side in anchorage.sides], "side")
    for key, side, start, end in zip(names, anchorage.sides, corners, corners[1:], strict=False):
        run = (end[0] - start[0], end[1] - start[1])
        length = math.hypot(*run)
        if length == 0.0:
            continue
        sketch.line(f"{part}/side/{key}", _LAYER, start, end)
        sketch.arrowhead(f"{part}/head/{key}", _LAYER, end, run, min(1.1 * h, 0.4 * length))
        labels.append(
            Label(
                id=f"{part}/value/{key}",
                layer=_LAYER,
                text=f"{side.name.upper()} {view.wording.force(math.hypot(*side.force))}",
                places=beside_line(start, end, h, first_side=_outside(corners, start, end)),
                rotation=readable_angle(start, end),
            )
        )
    ground = LabelGround(h, sketch.items)
    put_labels([Group(labels=tuple(labels), sketch=sketch)], ground)
    title = (f"JOINT {anchorage.mark}", under_words(view), "FORCES ON THE JOINT")
    draw_force_scale(sketch, part, plotting, per_paper, view.wording.force_unit, title)
    return sketch


def _outside(corners: list[Point], start: Point, end: Point) -> int:
    """Tell on which side of its line, read upright, a side has the other corners not."""
    turn = math.radians(readable_angle(start, end))
    normal = -math.sin(turn), math.cos(turn)
    lean = sum((p[0] - start[0]) * normal[0] + (p[1] - start[1]) * normal[1] for p in corners)
    return -1 if lean > 0 else 1
