"""Tags of a revision: at each point that moved a triangle, and the change in words.

Only what the latest revision changed is tagged, with a triangle about its letter or number
(common practice); the triangle is empty where nobody gave it any. The words of a tag are a label
as any other; triangle, letter and a second row go with them as one part.
"""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align, TextItem, VAlign
from dxfcable.drawing.painting.label_ground import Label
from dxfcable.drawing.painting.label_places import about_block, further_off
from dxfcable.drawing.painting.labels import ASCENT, DESCENT, text_width
from dxfcable.drawing.painting.naming import unique_parts
from dxfcable.drawing.painting.sketch import Sketch

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.model import Point, PointChange, RevisionRow

LAYER = "revision"
MOST_TAGGED = 20  # as with other labels: above that the greatest, and the table has the rest
_STEP = 1.5  # from row to row of a tag, in text heights
_SIDE = 1.55  # of the triangle, beyond the letter's width: the letter's top corners touch it
_GAP = 0.45  # between triangle and words
_FOOT = 0.28  # of the letter above the triangle's base
_MOST_OFF = 3.0  # text heights from the point
_RISE = 0.5 * math.sqrt(3.0)  # of an equilateral triangle over its side


@dataclass(frozen=True, slots=True, kw_only=True)
class Tag:
    """What stands at one point that moved.

    Attributes
    ----------
    name : str
        Id of its words, and of the part that they make with the triangle.
    rows : tuple of str
        The change in words, from the lowest row up.
    sign : str
        Letter or number in the triangle, or "".
    is_upright : bool
        Read from the right, since the panels are too narrow.
    """

    name: str
    at: Point
    rows: tuple[str, ...]
    sign: str
    is_upright: bool
    height: float

    @property
    def side(self) -> float:
        """Side of the triangle [length]."""
        return text_width(self.sign, self.height) + _SIDE * self.height

    @property
    def left(self) -> float:
        """How far the triangle reaches before the words, in their direction [length]."""
        along = _RISE * self.side if self.is_upright else self.side
        return along + _GAP * self.height

    @property
    def wide(self) -> float:
        """Width of the widest row [length]."""
        return max(text_width(row, self.height) for row in self.rows)

    @property
    def tall(self) -> float:
        """Height of the whole across its words [length]."""
        across = self.side if self.is_upright else _RISE * self.side
        rows = (_STEP * (len(self.rows) - 1) + DESCENT + ASCENT) * self.height
        return max(across, rows)

    @property
    def middle(self) -> float:
        """Middle of all rows above that of the lowest [length]."""
        return 0.5 * _STEP * (len(self.rows) - 1) * self.height

    def triangle(self, at: Point) -> tuple[Point, Point, Point]:
        """Give the corners of the triangle, its base first, for words that stand somewhere."""
        # It stands upright always, its middle before the middle of the rows.
        x, y = self.turned(at, -0.5 * (self.left + _GAP * self.height), self.middle)
        half, rise = 0.5 * self.side, _RISE * self.side
        return (x - half, y - 0.5 * rise), (x + half, y - 0.5 * rise), (x, y + 0.5 * rise)

    def off(self, at: Point) -> float:
        """Give the distance of the point from words and triangle, not from the room between."""
        h = self.height
        left, right, top = self.triangle(at)
        pairs = [(left, right), (top, top)]
        for number, row in enumerate(self.rows):
            across = _STEP * number * h
            low = self.turned(at, 0.0, across - (0.5 + DESCENT) * h)
            high = self.turned(at, text_width(row, h), across + (ASCENT - 0.5) * h)
            pairs.append((low, high))
        return min(_gap(self.at, *pair) for pair in pairs)

    def turned(self, origin: Point, along: float, across: float) -> Point:
        """Give a place that is told in the words' own directions from an origin."""
        if self.is_upright:
            return origin[0] - across, origin[1] + along
        return origin[0] + along, origin[1] + across


def _gap(point: Point, one: Point, other: Point) -> float:
    """Give the distance of a point from the upright box between two corners."""
    outside = (
        max(min(a, b) - p, p - max(a, b), 0.0) for p, a, b in zip(point, one, other, strict=True)
    )
    return math.hypot(*outside)


def row_sign(row: RevisionRow) -> str:
    """Give what stands in the triangle: the letter or number given, "" where none was."""
    return row.rev.strip()


def latest_sign(view: View) -> str:
    """Give the letter or number of the latest revision, "" where none was given."""
    return row_sign(view.revisions.rows[-1]) if view.revisions else ""


def plan_tags(view: View) -> tuple[Tag, ...]:
    """Say what stands at each point that the latest revision moved.

    Parameters
    ----------
    view : View
        The cable with its revisions, if any.

    Returns
    -------
    tuple of Tag
        From left to right; of more than 20 only those of the greatest rise, fall and drift.
    """
    revisions = view.revisions
    if revisions is None:
        return ()
    h, sign = view.height, latest_sign(view)
    names = unique_parts([change.mark for change in revisions.changes], "N")
    chosen = _chosen(view, revisions.changes)
    rows = [change_words(view, revisions.changes[k]) for k in chosen]
    widest = max((text_width(text, h) for words in rows for text in words), default=0.0)
    widest += text_width(sign, h) + (_SIDE + _GAP) * h
    stations = sorted(revisions.changes[k].at[0] for k in chosen)
    panel = min((b - a for a, b in itertools.pairwise(stations)), default=math.inf)
    return tuple(
        Tag(
            name=f"{view.prefix}/revision/{names[k]}",
            at=revisions.changes[k].at,
            rows=words,
            sign=sign,
            is_upright=panel < widest + 0.5 * h,
            height=h,
        )
        for k, words in zip(chosen, rows, strict=True)
    )


def _chosen(view: View, changes: Sequence[PointChange]) -> list[int]:
    """List the changes that get a tag."""
    everyone = list(range(len(changes)))
    if len(everyone) <= MOST_TAGGED:
        return everyone
    extremes = {
        max(everyone, key=lambda k: changes[k].dy),
        min(everyone, key=lambda k: changes[k].dy),
    }
    furthest = max(everyone, key=lambda k: abs(changes[k].dx))
    if view.wording.length(changes[furthest].dx) != view.wording.length(0.0):
        extremes.add(furthest)
    return sorted(extremes)


def change_words(view: View, change: PointChange) -> tuple[str, ...]:
    """Write a change, the lowest row first: dy, and dx where it shows."""
    still = view.wording.length(0.0)
    dx, dy = view.wording.length(change.dx), view.wording.length(change.dy)
    rows = tuple(
        f"{word} {_signed(text)}" for word, text in (("dy", dy), ("dx", dx)) if text != still
    )
    return rows or (f"dy {still}",)


def _signed(text: str) -> str:
    return text if text.startswith("-") else f"+{text}"


def tag_labels(view: View) -> Iterator[Label]:
    """Give the words of tags as labels that need room for all that goes with them."""
    for tag in plan_tags(view):
        h = tag.height
        own = text_width(tag.rows[0], h)
        # A text in the middle of its line reaches a little further down than up.
        below = 0.5 * tag.tall - tag.middle - (0.5 + DESCENT) * h
        above = 0.5 * tag.tall + tag.middle - (ASCENT - 0.5) * h
        room = (tag.left, max(0.0, below), tag.wide - own, max(0.0, above))
        size = (tag.left + tag.wide, tag.tall)
        if tag.is_upright:
            size = (size[1], size[0])
        back = (-0.5 * (tag.wide - tag.left), -tag.middle)
        places = [tag.turned(place, *back) for place in about_block(tag.at, size, h)]
        near = [place for place in places if tag.off(place) <= _MOST_OFF * h]
        far = [tag.turned(place, *back) for place in further_off(tag.at, size, h)]
        yield Label(
            id=tag.name,
            layer=LAYER,
            text=tag.rows[0],
            places=(*near, *far),
            rotation=90.0 * tag.is_upright,
            align=Align.LEFT,
            target=(tag.at, tag.at),
            room=room,
            far=len(far),
        )


def draw_tags(view: View, sketch: Sketch) -> list[tuple[str, Point]]:
    """Draw what goes with the words of tags, where those were put.

    Parameters
    ----------
    view : View
        The cable with its revisions, if any.
    sketch : Sketch
        Has the words; gets the rest.

    Returns
    -------
    list of (str, Point)
        Each tag's part and the place of its words.
    """
    tags = plan_tags(view)
    words = {item.id: item for item in sketch.items if isinstance(item, TextItem)}
    placed = [(tag, words[tag.name].at) for tag in tags]
    for tag, at in placed:
        part = Sketch(sketch.rounder, tag.name)
        _draw_tag(tag, at, part)
        sketch.items += part.items
    return [(tag.name, at) for tag, at in placed]


def _draw_tag(tag: Tag, at: Point, sketch: Sketch) -> None:
    """Draw the triangle with its letter, and the second row."""
    h, turn = tag.height, 90.0 * tag.is_upright
    for number, row in enumerate(tag.rows[1:], start=2):
        place = tag.turned(at, 0.0, _STEP * (number - 1) * h)
        name = f"{tag.name}/row-{number}"
        sketch.text(name, LAYER, row, place, h, valign=VAlign.MIDDLE, rotation=turn)
    corners = tag.triangle(at)
    sketch.polyline(f"{tag.name}/triangle", LAYER, corners, is_closed=True)
    (_, base), _, (x, _) = corners
    if tag.sign:
        sketch.text(
            f"{tag.name}/rev", LAYER, tag.sign, (x, base + _FOOT * h), h, align=Align.CENTER
        )
