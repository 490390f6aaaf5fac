"""What a block inserted in the drawing is called, says and looks like."""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.dynblkhelper import get_dynamic_block_definition
from ezdxf.entities.attrib import AttDef
from ezdxf.entities.insert import Insert

from dxfcable.drawing.reading import texts
from dxfcable.drawing.reading.pieces import Attribute, Kind
from dxfcable.drawing.reading.shapes import piece_of

if TYPE_CHECKING:
    from ezdxf.layouts.blocklayout import BlockLayout


def true_name(insert: Insert) -> str:
    """Give a block's name; an altered dynamic block is inserted under an anonymous one."""
    name = str(insert.dxf.get("name", ""))
    if name.upper().startswith("*U"):
        definition = get_dynamic_block_definition(insert, insert.doc)
        if definition is not None:
            name = definition.name
    return texts.decoded(name)


def attributes(insert: Insert, block: BlockLayout | None) -> tuple[Attribute, ...]:
    """Read a block's attributes, constant ones from its definition; blank ones are absent."""
    found = [(a.dxf.get("tag", ""), texts.plain_text(a)) for a in insert.attribs]
    if block is not None:
        found += [
            (a.dxf.get("tag", ""), texts.plain_text(a)) for a in block.attdefs() if a.is_const
        ]
    return tuple(
        Attribute(tag=texts.decoded(str(tag)).strip().upper(), text=text)
        for tag, text in found
        if text
    )


def symbol_size(insert: Insert) -> float:
    """Give the height of a block's first attribute, 0 where it has none."""
    return max((texts.height(a) for a in insert.attribs), default=0.0)


def extent(block: BlockLayout) -> tuple[float, float, float, float] | None:
    """Give the box about a block's own points; nested blocks count by their base points."""
    xs: list[float] = []
    ys: list[float] = []
    for entity in block:
        if isinstance(entity, AttDef):
            continue
        if isinstance(entity, Insert):
            at = entity.ocs().to_wcs(entity.dxf.insert)
            points, radius = [(float(at.x), float(at.y))], 0.0
        else:
            piece = piece_of(entity, "", layer="", handle=None, line=0)
            points = list(piece.points)
            radius = piece.size if piece.kind == Kind.CIRCLE else 0.0
        for x, y in points:
            xs += (x - radius, x + radius)
            ys += (y - radius, y + radius)
    return (min(xs), min(ys), max(xs), max(ys)) if xs else None
