"""The revision layer in the elevation: the profile before, its name, and the tags of a revision."""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.painting.label_ground import Label
from dxfcable.drawing.painting.label_places import beside_line, readable_angle
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.revision_tags import LAYER, latest_sign, tag_labels

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import Point

_FINE = 0.02  # text heights: vertices of the old profile nearer to a line than this are left out
_APART = 1.0  # text heights that the profiles must lie apart for the old one to be named


def revision_labels(view: View) -> Iterator[Label]:
    """Give the labels of the revision layer: tags, and the name of the old profile."""
    yield from tag_labels(view)
    yield from _old_labels(view)


def draw_old_profile(view: View, sketch: Sketch) -> None:
    """Draw the profile before the latest revision, in chain lines; none where nothing moved."""
    for number, points in enumerate(_old(view), start=1):
        kept = thinned(points, _FINE * view.height)
        for piece, (start, end) in enumerate(itertools.pairwise(kept), start=1):
            name = f"{view.prefix}/revision/old/{number}/{piece}"
            sketch.line(name, LAYER, start, end, is_chain=True)


def _old_labels(view: View) -> Iterator[Label]:
    """Name the old profile where it lies furthest from the present one, if there is room."""
    h = view.height
    now = np.array([view.node_point(k) for k in range(len(view.formed.nodes))])
    for number, points in enumerate(_old(view), start=1):
        kept = thinned(points, _FINE * h)
        sign = latest_sign(view)
        text = f"BEFORE REV {sign}" if sign else "BEFORE REVISION"
        long = [
            (start, end)
            for start, end in itertools.pairwise(kept)
            if math.dist(start, end) > text_width(text, h) + h
        ]
        apart = [
            abs(0.5 * (a[1] + b[1]) - float(np.interp(0.5 * (a[0] + b[0]), now[:, 0], now[:, 1])))
            for a, b in long
        ]
        if not apart or max(apart) < _APART * h:
            continue
        start, end = long[int(np.argmax(np.round(apart, 9)))]
        middle = 0.5 * (start[0] + end[0])
        is_above = 0.5 * (start[1] + end[1]) > np.interp(middle, now[:, 0], now[:, 1])
        yield Label(
            id=f"{view.prefix}/revision/old-label/{number}",
            layer=LAYER,
            text=text,
            places=beside_line(start, end, h, first_side=1 if is_above else -1)[:9],
            rotation=readable_angle(start, end),
            is_optional=True,
        )


def _old(view: View) -> tuple[tuple[Point, ...], ...]:
    """Give the old profiles to draw: where no point moved they lie under the present one."""
    return view.revisions.old if view.revisions and view.revisions.changes else ()


def thinned(points: Sequence[Point], off: float) -> list[Point]:
    """Leave out vertices that lie within a distance of the line through their neighbours.

    The pattern of a chain line starts anew with each piece, so that a fine curve would show
    none. Method: Douglas and Peucker, "Algorithms for the reduction of the number of points
    required to represent a digitized line", 1973 (MEM).
    """
    line = np.array(points, dtype=np.float64)
    kept = {0, len(points) - 1}
    open_pieces = [(0, len(points) - 1)]
    while open_pieces:
        first, last = open_pieces.pop()
        if last - first < 2:
            continue
        run = line[last] - line[first]
        between = line[first + 1 : last] - line[first]
        length = float(np.hypot(*run))
        aside = np.abs(between[:, 0] * run[1] - between[:, 1] * run[0])
        distances = aside / length if length else np.hypot(between[:, 0], between[:, 1])
        furthest = int(np.argmax(distances))
        if distances[furthest] > off:
            middle = first + 1 + furthest
            kept.add(middle)
            open_pieces += [(first, middle), (middle, last)]
    return [points[k] for k in sorted(kept)]
