"""A sheet as SVG of true size, texts as texts; made from the items alone, without a library."""

from __future__ import annotations

from typing import TYPE_CHECKING
from xml.sax.saxutils import escape, quoteattr

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
from dxfcable.drawing.sheeting.pens import CHAIN, DASHES, LOOKS, layer_of, pen_of
from dxfcable.drawing.sheeting.sheet import MARK
from dxfcable.drawing.sheeting.words import plain

if TYPE_CHECKING:
    from collections.abc import Iterable

    from dxfcable.drawing.sheeting.sheet import Sheet
    from dxfcable.model import Point
    from dxfcable.settings import Settings

_FACES = "Helvetica, Arial, 'Liberation Sans', sans-serif"
_CAPITALS = 0.718  # height of the capitals by the size of such faces
_ANCHOR = {Align.LEFT: "start", Align.CENTER: "middle", Align.RIGHT: "end"}
_DROP = {VAlign.BASELINE: 0.0, VAlign.BOTTOM: 0.0, VAlign.MIDDLE: 0.5, VAlign.TOP: 1.0}


def sheet_svg(sheet: Sheet, settings: Settings) -> bytes:
    """Write a sheet as SVG, one group for each layer."""
    paper = sheet.paper
    wide, high = _number(paper.width), _number(paper.height)
    lines = [
        '<?xml version="1.0" encoding="UTF-8"?>',
        f'<svg xmlns="http://www.w3.org/2000/svg" width="{wide}mm" height="{high}mm" '
        f'viewBox="0 0 {wide} {high}" role="img">',
        f"<desc>{MARK}</desc>",
        f"<title>{_safe(plain(sheet.title))}</title>",
        f'<rect width="{wide}" height="{high}" fill="#ffffff"/>',
    ]
    roles = list(dict.fromkeys(item.layer for item in sheet.items))
    for role in roles:
        name = quoteattr(plain(layer_of(role, settings.layers)))
        lines.append(
            f'<g data-layer={name} fill="none" stroke="#000000" '
            f'stroke-width="{_number(pen_of(role, paper))}" stroke-linecap="round" '
            f'stroke-linejoin="round" font-family="{_FACES}">'
        )
        lines += [_element(item, paper.height) for item in sheet.items if item.layer == role]
        lines.append("</g>")
    lines.append("</svg>")
    return ("\n".join(lines) + "\n").encode("utf-8", "xmlcharrefreplace")


def _element(item: Item, top: float) -> str:
    """Write one item; SVG counts downwards."""
    match item:
        case LineItem():
            dashes = CHAIN if item.is_chain else DASHES if LOOKS[item.layer].is_dashed else ()
            return f'<path d="{_path((item.start, item.end), top)}"{_dashes(dashes)}/>'
        case PolylineItem():
            dashes = DASHES if LOOKS[item.layer].is_dashed else ()
            close = "Z" if item.is_closed else ""
            return f'<path d="{_path(item.points, top)}{close}"{_dashes(dashes)}/>'
        case TriangleItem():
            return f'<path d="{_path(item.points, top)}Z" fill="#000000" stroke="none"/>'
        case CircleItem():
            x, y = item.center
            return f'<circle cx="{_number(x)}" cy="{_number(top - y)}" r="{_number(item.radius)}"/>'
        case TextItem():
            return _text(item, top)
    message = f"no element for {type(item).__name__}"
    raise TypeError(message)


def _text(item: TextItem, top: float) -> str:
    x, y = item.at
    drop = _DROP[item.valign] * item.height
    turn = f" rotate({_number(-item.rotation)})" if item.rotation else ""
    return (
        f'<text transform="translate({_number(x)} {_number(top - y)}){turn}" y="{_number(drop)}" '
        f'font-size="{_number(item.height / _CAPITALS)}" text-anchor="{_ANCHOR[item.align]}" '
        f'fill="#000000" stroke="none">{_safe(plain(item.text))}</text>'
    )


def _safe(text: str) -> str:
    """Escape markup, and replace what XML cannot hold: bytes that did not decode."""
    held = "".join(
        c if c.isprintable() and not "\ud800" <= c <= "\udfff" else "\ufffd" for c in text
    )
    return escape(held)


def _path(points: Iterable[Point], top: float) -> str:
    return "M" + "L".join(f"{_number(x)} {_number(top - y)}" for x, y in points)


def _dashes(lengths: tuple[float, ...]) -> str:
    return f' stroke-dasharray="{" ".join(_number(v) for v in lengths)}"' if lengths else ""


def _number(value: float) -> str:
    """Write a number to the micrometre."""
    text = f"{value:.3f}".rstrip("0").rstrip(".")
    return "0" if text == "-0" else text
