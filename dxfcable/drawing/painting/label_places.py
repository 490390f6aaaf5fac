"""Lists of places for a label: beside a line, about a point, upright in narrow panels.

All offsets are in text heights and such that the nearest edge of a label lies within three
heights of its object.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.model import Point

_ROWS = (0.95, 2.1, 3.2)  # middle of a text from its line: beside it, and one and two rows on
_SHARES = (0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8)
_STEPS = (0.0, 0.7, 1.4, 2.1, 2.5)
_SHIFTS = (0.0, -0.35, 0.35, -0.7, 0.7, -1.05, 1.05, -1.4, 1.4, -1.75, 1.75, -2.1, 2.1)


def readable_angle(start: Point, end: Point) -> float:
    """Give the angle of a line in degrees so that text along it is read from below or right."""
    angle = math.degrees(math.atan2(end[1] - start[1], end[0] - start[0]))
    if angle <= -90.0 + 1e-9:
        angle += 180.0
    elif angle > 90.0 + 1e-9:
        angle -= 180.0
    return angle


def beside_line(start: Point, end: Point, height: float, *, first_side: int) -> tuple[Point, ...]:
    """List middles of texts along a line.

    Parameters
    ----------
    start, end : Point
        The line, of any direction.
    height : float
        Text height [length].
    first_side : int
        1 for above the line (left of an upright one) first, -1 for below first.

    Returns
    -------
    tuple of Point
    """
    turn = math.radians(readable_angle(start, end))
    normal = -math.sin(turn), math.cos(turn)
    return tuple(
        (
            start[0] + share * (end[0] - start[0]) + side * row * height * normal[0],
            start[1] + share * (end[1] - start[1]) + side * row * height * normal[1],
        )
        for row in _ROWS
        for side in (first_side, -first_side)
        for share in _SHARES
    )


def in_space(start: Point, end: Point, height: float) -> tuple[Point, ...]:
    """List middles of a letter in the space above a piece of the cable, then below it."""
    turn = math.radians(readable_angle(start, end))
    normal = -math.sin(turn), math.cos(turn)
    return tuple(
        (
            start[0] + share * (end[0] - start[0]) + side * row * height * normal[0],
            start[1] + share * (end[1] - start[1]) + side * row * height * normal[1],
        )
        for side in (1, -1)
        for row in (1.35, 2.2, 3.1)
        for share in _SHARES
    )


def about_point(
    at: Point, width: float, height: float, *, first_side: int = 1
) -> tuple[Point, ...]:
    """List middles of level texts above, beside and below a point, or below first."""
    x, y = at
    beside = 0.5 * width + 0.5 * height
    rows = [
        (x + share * width, y + side * row * height)
        for side in (first_side, -first_side)
        for row in _ROWS
        for share in (0.0, -0.25, 0.25, -0.48, 0.48)
    ]
    sides = [
        (x + side * beside, y + rise * height)
        for rise in (0.0, 1.0, -1.0, 2.0, -2.0, 3.0, -3.0)
        for side in (1, -1)
    ]
    far = [
        (x + side * (beside + 1.2 * height), y + rise * height)
        for rise in (0.0, 1.2, -1.2, 2.4, -2.4)
        for side in (1, -1)
    ]
    return tuple(rows + sides + far)


def upright_over(
    at: Point,
    slope: float,
    width: float,
    height: float,
    *,
    first_side: int,
    near_end: int,
    reach: float,
) -> tuple[Point, ...]:
    """List places of upright texts (turned by 90 degrees) over and under a point of the cable.

    Parameters
    ----------
    at : Point
        Point of the cable.
    slope : float
        Greatest slope of the cable beside it: the text keeps clear of the rising side.
    width, height : float
        Of the text [length].
    first_side : int
        1 for over the cable first, -1 for under it.
    near_end : int
        1 where the alignment point is the text's start, i.e. its lower end, -1 for its end.
    reach : float
        How far left and right of the point a text may stand, so that it is not taken for a
        neighbour's [length].

    Returns
    -------
    tuple of Point
        Alignment points.
    """
    clear = (0.35 + 0.9 * min(abs(slope), 2.0)) * height
    places = []
    for side in (first_side, -first_side):
        # An alignment point at the far end lies a whole text further off.
        extra = 0.0 if side == near_end else width
        places += [
            (at[0] + shift * height, at[1] + side * (clear + step * height + extra))
            for step in _STEPS
            for shift in _SHIFTS
            if abs(shift) * height <= reach
        ]
    return tuple(places)
