"""Items to tags: each item one entity of the file's own release, with its mark.

The tags are written here and not by a library, so that the bytes of an issued drawing depend
on nothing that may be installed in another version tomorrow.
"""

from __future__ import annotations

import math
import zlib
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.bytes.decode import plain
from dxfcable.drawing.dialect import APPID, Dialect, Tag
from dxfcable.drawing.items import (
    Align,
    CircleItem,
    Item,
    LineItem,
    PolylineItem,
    TextItem,
    TriangleItem,
    VAlign,
)
from dxfcable.drawing.painting.labels import text_width

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping, Sequence

    from dxfcable.model import Point

_HORIZONTAL = {Align.LEFT: 0, Align.CENTER: 1, Align.RIGHT: 2}
_VERTICAL = {VAlign.BASELINE: 0, VAlign.BOTTOM: 1, VAlign.MIDDLE: 2, VAlign.TOP: 3}
_RISE = {VAlign.BASELINE: 0.0, VAlign.BOTTOM: 0.0, VAlign.MIDDLE: 0.5, VAlign.TOP: 1.0}
_SHARE = {Align.LEFT: 0.0, Align.CENTER: 0.5, Align.RIGHT: 1.0}


@dataclass(frozen=True, slots=True, kw_only=True)
class Surroundings:
    """What an entity needs to know of the file it goes into.

    Attributes
    ----------
    layers : mapping of str to str
        Role to layer name.
    style, chain : str
        Text style and chain linetype, "" where the file has no such table.
    owner : str
        Handle of the model space's block record, "" where unknown.
    allot : callable or None
        Gives a handle for (id, follower number); None where the drawing has no handles.
    """

    dialect: Dialect
    layers: Mapping[str, str]
    style: str
    chain: str
    owner: str
    allot: Callable[[str, int], str] | None


def text_sum(text: str) -> str:
    """Return a short checksum of a text as a person reads it."""
    return f"{zlib.crc32(plain(text).strip().encode('utf-8', 'surrogatepass')):08X}"


def look_sum(look: tuple[str, ...]) -> str:
    """Return a short checksum of how an entity looks: its layer, style, size and turn."""
    return f"{zlib.crc32('|'.join(look).casefold().encode('utf-8', 'surrogatepass')):08X}"


def look_number(value: float) -> str:
    """Write a size as it survives programs that round."""
    return f"{value + 0.0:.4g}"


def _look(item: Item, around: Surroundings) -> tuple[str, ...]:
    """Return what `marks` finds again unless a drafter changed the look."""
    layer = around.layers[item.layer]
    if not isinstance(item, TextItem):
        return (layer,)
    sizes = (look_number(item.height), look_number(item.rotation % 360.0))
    return (layer, around.style, *sizes)


def place_of(item: Item) -> Point:
    """Return the point that tells where an item stands: the one that `marks` finds again."""
    match item:
        case LineItem():
            return item.start
        case PolylineItem():
            return item.points[0]
        case CircleItem():
            return item.center
        case TriangleItem():
            return item.points[0]
        case TextItem():
            return item.at
    message = f"no place for {type(item).__name__}"
    raise TypeError(message)


def entity(item: Item, around: Surroundings, record: Sequence[str] = ()) -> list[Tag]:
    """Return the tags of one item.

    Parameters
    ----------
    item : Item
        What is drawn.
    around : Surroundings
        The file it goes into.
    record : sequence of str
        Strings of the record that this entity carries.
    """
    handle = around.allot(item.id, 0) if around.allot else ""
    mark: list[Tag] = [(1001, APPID), (1000, f"id={item.id}"), (1000, f"handle={handle}")]
    if item.part != item.id:
        mark.append((1000, f"part={item.part}"))
    if isinstance(item, TextItem):
        mark.append((1000, f"text={text_sum(item.text)}"))
    mark.append((1000, f"look={look_sum(_look(item, around))}"))
    x, y = place_of(item)
    mark += [(1010, float(x)), (1020, float(y)), (1030, 0.0)]
    mark += [(1000, line) for line in record]
    match item:
        case LineItem():
            return _line(item, around, handle) + mark
        case PolylineItem():
            if around.dialect.has_light_polylines:
                return _light_polyline(item, around, handle) + mark
            return _heavy_polyline(item, around, handle, mark)
        case CircleItem():
            own: list[Tag] = [*_point(10, item.center), (40, float(item.radius))]
            return _head("CIRCLE", item, around, handle, "AcDbCircle") + own + mark
        case TriangleItem():
            first, second, third = item.points
            own = [*_point(10, first), *_point(11, second), *_point(12, third), *_point(13, third)]
            return _head("SOLID", item, around, handle, "AcDbTrace") + own + mark
        case TextItem():
            return _text(item, around, handle) + mark
    message = f"no entity for {type(item).__name__}"
    raise TypeError(message)


def _head(
    kind: str, item: Item, around: Surroundings, handle: str, subclass: str, linetype: str = ""
) -> list[Tag]:
    """Return the tags that all entities begin with."""
    tags: list[Tag] = [(0, kind)]
    if handle:
        tags.append((5, handle))
    if around.dialect.has_owners and around.owner:
        tags.append((330, around.owner))
    if around.dialect.has_subclasses:
        tags.append((100, "AcDbEntity"))
    tags.append((8, around.layers[item.layer]))
    if linetype:
        tags.append((6, linetype))
    if around.dialect.has_subclasses and subclass:
        tags.append((100, subclass))
    return tags


def _point(code: int, point: Point) -> list[Tag]:
    """Return a point as three tags."""
    return [(code, float(point[0])), (code + 10, float(point[1])), (code + 20, 0.0)]


def _line(item: LineItem, around: Surroundings, handle: str) -> list[Tag]:
    linetype = around.chain if item.is_chain else ""
    tags = _head("LINE", item, around, handle, "AcDbLine", linetype)
    return [*tags, *_point(10, item.start), *_point(11, item.end)]


def _light_polyline(item: PolylineItem, around: Surroundings, handle: str) -> list[Tag]:
    tags = _head("LWPOLYLINE", item, around, handle, "AcDbPolyline")
    # 90 first, or the close flag is lost.
    tags += [(90, len(item.points)), (70, int(item.is_closed))]
    for x, y in item.points:
        tags += [(10, float(x)), (20, float(y))]
    return tags


def _heavy_polyline(
    item: PolylineItem, around: Surroundings, handle: str, mark: list[Tag]
) -> list[Tag]:
    """POLYLINE with its vertices and end mark, before R14."""
    tags = _head("POLYLINE", item, around, handle, "AcDb2dPolyline")
    tags += [(66, 1), *_point(10, (0.0, 0.0)), (70, int(item.is_closed)), *mark]
    for number, point in enumerate(item.points, start=1):
        own = around.allot(item.id, number) if around.allot else ""
        tags += _head("VERTEX", item, around, own, "AcDbVertex")
        if around.dialect.has_subclasses:
            tags.append((100, "AcDb2dVertex"))
        tags += [*_point(10, point), (70, 0)]
    own = around.allot(item.id, len(item.points) + 1) if around.allot else ""
    return tags + _head("SEQEND", item, around, own, "")


def _text(item: TextItem, around: Surroundings, handle: str) -> list[Tag]:
    """TEXT; group 10 is the lower left even where 11 counts, for readers that take only 10."""
    tags = _head("TEXT", item, around, handle, "AcDbText")
    is_aligned = item.align is not Align.LEFT or item.valign is not VAlign.BASELINE
    tags += _point(10, _lower_left(item) if is_aligned else item.at)
    tags += [(40, float(item.height)), (1, item.text)]
    if item.rotation:
        tags.append((50, float(item.rotation)))
    if around.style:
        tags.append((7, around.style))
    if is_aligned:
        tags += [(72, _HORIZONTAL[item.align]), *_point(11, item.at)]
    if around.dialect.has_subclasses:
        tags.append((100, "AcDbText"))
    if is_aligned and item.valign is not VAlign.BASELINE:
        tags.append((73, _VERTICAL[item.valign]))
    return tags


def _lower_left(item: TextItem) -> Point:
    """Return where the text begins, by our own width table."""
    left = _SHARE[item.align] * text_width(item.text, item.height)
    down = _RISE[item.valign] * item.height
    turn = math.radians(item.rotation)
    cos, sin = math.cos(turn), math.sin(turn)
    grain = item.height * 1e-6
    x = item.at[0] - left * cos + down * sin
    y = item.at[1] - left * sin - down * cos
    digits = max(0, -math.floor(math.log10(grain)))
    return round(x, digits), round(y, digits)
