"""Marks and labels over a picture: SVG elements in millimetres, labels clear of each other."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING
from xml.etree import ElementTree as ET

from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.picturing.picture_load import shown

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from dxfcable.model import Point

Box = tuple[float, float, float, float]

_CAP = 0.72  # height of capitals over font size, of usual faces
_LEAD = 1.7  # from line to line, in heights of capitals
_PAD = 0.45  # about a label, in heights
_TURNS = (-45, 45, -135, 135, -90, 90, 0, 180)  # degrees, y down: first above to the right
_DISTANCES = (1.6, 3.0, 5.0, 8.0, 12.0, 17.0)  # from the marked point, in heights


class Marks:
    """A group of marks on a page of some size; coordinates in mm, y down.

    Parameters
    ----------
    root : Element
        SVG to draw in.
    units_per_mm : float
        Of its view box.
    """

    def __init__(self, root: ET.Element, units_per_mm: float) -> None:
        self._group = ET.SubElement(
            root,
            "g",
            {"transform": f"scale({units_per_mm:g})", "font-family": "sans-serif"},
        )

    def style(self, rules: str) -> None:
        """Add the style of the classes."""
        ET.SubElement(self._group, "style").text = rules

    def group(self, name: str, title: str) -> Marks:
        """Return a group of one thing; viewers show its title under the pointer."""
        inner = Marks.__new__(Marks)
        inner._group = ET.SubElement(self._group, "g", {"class": name})
        ET.SubElement(inner._group, "title").text = clean(title)
        return inner

    def line(self, name: str, points: Sequence[Point]) -> None:
        """Draw a polyline."""
        self._add("polyline", name, points=_points(points))

    def polygon(self, name: str, points: Sequence[Point]) -> None:
        """Draw a closed shape."""
        self._add("polygon", name, points=_points(points))

    def circle(self, name: str, center: Point, radius: float) -> None:
        """Draw a circle."""
        x, y = center
        self._add("circle", name, cx=f"{x:.2f}", cy=f"{y:.2f}", r=f"{radius:.2f}")

    def rect(self, name: str, box: Box) -> None:
        """Draw a rectangle."""
        x0, y0, x1, y1 = box
        self._add(
            "rect",
            name,
            x=f"{x0:.2f}",
            y=f"{y0:.2f}",
            width=f"{x1 - x0:.2f}",
            height=f"{y1 - y0:.2f}",
        )

    def arrow(self, name: str, start: Point, end: Point, size: float) -> None:
        """Draw a line with a filled head at its end."""
        self.line(name, (start, end))
        along = math.atan2(end[1] - start[1], end[0] - start[0])
        wings = [
            (end[0] - size * math.cos(along + turn), end[1] - size * math.sin(along + turn))
            for turn in (0.35, -0.35)
        ]
        self.polygon(f"{name} head", [end, *wings])

    def text(self, name: str, at: Point, text: str, height: float) -> None:
        """Write a line of text from its left end on the base line; `height` is of capitals."""
        x, y = at
        size = height / _CAP
        element = self._add(
            "text", name, x=f"{x:.2f}", y=f"{y:.2f}", **{"font-size": f"{size:.2f}"}
        )
        element.text = clean(text)

    def label(self, name: str, box: Box, lines: Sequence[str], height: float) -> None:
        """Write lines on a sheet of white."""
        self.rect(f"{name} sheet", box)
        for row, line in enumerate(lines):
            base = box[1] + _PAD * height + height * (1 + _LEAD * row)
            self.text(f"{name} words", (box[0] + _PAD * height, base), line, height)

    def _add(self, tag: str, name: str, **facts: str) -> ET.Element:
        """Add an element of a class."""
        return ET.SubElement(self._group, tag, {"class": name, **facts})


class Labels:
    """Finds places for labels, clear of marks and of each other where there is room.

    Parameters
    ----------
    page : tuple of float
        Left, top, right, bottom that labels stay within [mm].
    height : float
        Of capitals [mm].
    """

    def __init__(self, page: Box, height: float) -> None:
        self._page = page
        self._taken: list[Box] = []
        self.height = height

    def keep_clear(self, point: Point, radius: float) -> None:
        """Let no label cover a mark."""
        x, y = point
        self._taken.append((x - radius, y - radius, x + radius, y + radius))

    def place(self, point: Point, lines: Sequence[str]) -> Box:
        """Return a box for a label near a point: the nearest that covers the least."""
        wide = max(text_width(clean(line), self.height) for line in lines) * 0.85
        width = wide + 2 * _PAD * self.height
        high = self.height * (1 + _LEAD * (len(lines) - 1)) + 2 * _PAD * self.height
        best: tuple[float, Box] | None = None
        for distance in _DISTANCES:
            for turn in _TURNS:
                box = self._beside(point, distance * self.height, turn, width, high)
                covered = sum(_overlap(box, other) for other in self._taken)
                covered += 2 * (width * high - _overlap(box, self._page))
                if best is None or covered < best[0] - 1e-9:
                    best = covered, box
            if best is not None and best[0] <= 1e-9:
                break
        assert best is not None
        self._taken.append(best[1])
        return best[1]

    @staticmethod
    def _beside(point: Point, distance: float, turn: int, width: float, high: float) -> Box:
        """Return the box whose nearest edge lies at a distance from a point."""
        cos, sin = math.cos(math.radians(turn)), math.sin(math.radians(turn))
        x = point[0] + distance * cos + width / 2 * (round(cos, 1) > 0) - width / 2 * (cos < -0.1)
        y = point[1] + distance * sin + high / 2 * (sin > 0.1) - high / 2 * (sin < -0.1)
        return x - width / 2, y - high / 2, x + width / 2, y + high / 2


def nearest_on(box: Box, point: Point) -> Point:
    """Return the point of a box nearest to a point."""
    return min(max(point[0], box[0]), box[2]), min(max(point[1], box[1]), box[3])


def clean(text: str) -> str:
    """Return text that XML can hold, as a person reads it."""
    readable = shown(text)
    for code, character in (("%%c", "\u00d8"), ("%%d", "\u00b0"), ("%%p", "\u00b1")):
        readable = readable.replace(code, character).replace(code.upper(), character)
    return "".join(c if c.isprintable() else " " for c in readable)


def _points(points: Iterable[Point]) -> str:
    """Write points as SVG has them."""
    return " ".join(f"{x:.2f},{y:.2f}" for x, y in points)


def _overlap(a: Box, b: Box) -> float:
    """Return the area that two boxes share."""
    wide = min(a[2], b[2]) - max(a[0], b[0])
    high = min(a[3], b[3]) - max(a[1], b[1])
    return max(wide, 0.0) * max(high, 0.0)
