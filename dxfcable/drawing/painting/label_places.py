"""Lists of places for a label: beside a line, about a point, upright in narrow panels.

All offsets are in text heights and such that the nearest edge of a label lies within three
heights of its object; only places further off, where all of those are taken, do not.
"""

from __future__ import annotations

import math
from functools import lru_cache
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.model import Point

_ROWS = (0.95, 2.1, 3.2)  # middle of a text from its line: beside it, and one and two rows on
_SHARES = (0.5, 0.42, 0.58, 0.34, 0.66, 0.26, 0.74, 0.18, 0.82)
_MOST_OFF = 2.8
_RISES = (0.95, 1.5, 2.1, 2.7, 3.3)
_SLIDES = (0.0, -0.25, 0.25, -0.48, 0.48)
_GAPS = (0.45, 0.9, 1.6, 2.3)
_TOO_FAR = 1e9
# Gaps of places further off, and slides in widths. A leader may be 15 heights long.
_FURTHER = (3.6, 4.8, 6.0, 7.2, 8.6, 10.0, 11.5, 13.0)
_FURTHER_SLIDES = (0.0, -0.5, 0.5, -0.25, 0.25)
_CORNERS = (0.35, 0.8, 1.4, 2.0, 2.5)
_TALL = 0.6  # half the height of a text with its room, in text heights
_ASIDE_RISES = (0.0, 0.7, 1.4, 2.1, 2.8)
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


def in_space(
    start: Point, end: Point, height: float, *, first_side: int, rows: tuple[float, ...]
) -> tuple[Point, ...]:
    """List middles of a letter in the space beside a piece of the cable.

    Parameters
    ----------
    start, end : Point
        The piece.
    height : float
        Text height [length].
    first_side : int
        1 for above the cable first, -1 for below.
    rows : tuple of float
        Distances from the piece, the best first, in text heights.

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
        for side in (first_side, -first_side)
        for row in rows
        for share in _SHARES
    )


def about_point(
    at: Point, width: float, height: float, *, first_side: int = 1
) -> tuple[Point, ...]:
    """List middles of level texts about a point, within three heights: near ones first.

    Parameters
    ----------
    at : Point
        The point.
    width, height : float
        Of the text [length].
    first_side : int
        1 for above the point first, -1 for below.

    Returns
    -------
    tuple of Point
    """
    return tuple(
        (at[0] + across * height, at[1] + first_side * rise * height)
        for across, rise in _about(0.5 * width / height)
    )


def about_block(at: Point, size: tuple[float, float], height: float) -> tuple[Point, ...]:
    """List middles of a block about a point, within three heights: near ones and above first.

    Parameters
    ----------
    at : Point
        The point.
    size : tuple of float
        Width and height of the block [length].
    height : float
        Text height [length].

    Returns
    -------
    tuple of Point
    """
    return tuple(
        (at[0] + across * height, at[1] + rise * height)
        for across, rise in _about(0.5 * size[0] / height, 0.5 * size[1] / height, _CORNERS)
    )


def further_off(at: Point, size: tuple[float, float], height: float) -> tuple[Point, ...]:
    """List middles of a block over and under a point beyond three heights, near ones first.

    They follow the near places where everything is drawn full there: a leader runs from them.

    Parameters
    ----------
    at : Point
        The point.
    size : tuple of float
        Width and height of the block [length].
    height : float
        Text height [length].

    Returns
    -------
    tuple of Point
    """
    return tuple(
        (at[0] + slide * size[0], at[1] + side * (0.5 * size[1] + gap * height))
        for gap in _FURTHER
        for slide in _FURTHER_SLIDES
        for side in (1, -1)
    )


@lru_cache(maxsize=256)
def _about(half: float, tall: float = _TALL, corners: tuple[float, ...] = ()) -> tuple[Point, ...]:
    """List offsets from a point for a text of some half width and height, all in heights.

    `corners` are gaps aside and above of places that lie both beside the point and above it.
    """
    more = tall - _TALL
    over = [(2.0 * share * half, rise + more) for rise in _RISES for share in _SLIDES]
    aside = [(half + gap, rise) for gap in _GAPS for rise in _ASIDE_RISES]
    over += [(2.0 * share * half, tall + rise) for rise in corners for share in _SLIDES]
    aside += [(half + gap, tall + rise) for gap in corners for rise in corners]
    places = [
        (round(_cost(across, turn * rise, half, tall), 6), across, turn * rise)
        for across, rise in (*over, *aside, *((-across, rise) for across, rise in aside))
        for turn in (1, -1)
    ]
    places.sort(key=lambda place: place[0])
    return tuple((across, rise) for cost, across, rise in places if cost < _TOO_FAR)


def _cost(across: float, rise: float, half: float, tall: float) -> float:
    """Weigh a place about a point: near, over it, on the first side, without a leader."""
    off = math.hypot(max(abs(across) - half, 0.0), max(abs(rise) - tall, 0.0))
    if off > _MOST_OFF:
        return _TOO_FAR
    is_beside = abs(across) > half
    standing_off = 5.0 if off > 1.2 else 0.0
    return 2.0 * off + 0.7 * abs(across) + 1.6 * (rise < 0) + standing_off - 2.0 * is_beside


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
            and math.hypot(clear / height + step, max(abs(shift) - 0.6, 0.0)) <= _MOST_OFF
        ]
    return tuple(places)
