"""Sheets as PDF: vector, true size, texts as texts that can be searched and copied."""

from __future__ import annotations

import io
import math
from typing import TYPE_CHECKING

from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.pdfgen.canvas import Canvas

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
from dxfcable.drawing.sheeting.pens import CHAIN, DASHES, LOOKS, pen_of
from dxfcable.drawing.sheeting.sheet import MARK
from dxfcable.drawing.sheeting.words import plain

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.drawing.sheeting.sheet import Sheet

_POINTS = 72.0 / 25.4
_FACE = "Helvetica"  # one of the fourteen that every reader of PDF has
_CAPITALS = 0.718  # height of its capitals by its size
_SHIFT = {Align.LEFT: 0.0, Align.CENTER: 0.5, Align.RIGHT: 1.0}
_DROP = {VAlign.BASELINE: 0.0, VAlign.BOTTOM: 0.0, VAlign.MIDDLE: 0.5, VAlign.TOP: 1.0}


def sheets_pdf(sheets: Sequence[Sheet], title: str) -> bytes:
    """Write sheets as the pages of one PDF; the same sheets always give the same bytes.

    Parameters
    ----------
    sheets : sequence of Sheet
    title : str
        What a reader's window shows.
    """
    stream = io.BytesIO()
    canvas = Canvas(stream, pageCompression=1, invariant=1)
    canvas.setTitle(title)
    canvas.setSubject(MARK)
    for sheet in sheets:
        paper = sheet.paper
        canvas.setPageSize((paper.width * _POINTS, paper.height * _POINTS))
        canvas.scale(_POINTS, _POINTS)
        canvas.setLineCap(1)
        canvas.setLineJoin(1)
        for item in sheet.items:
            _draw(canvas, item, paper)
        canvas.showPage()
    canvas.save()
    return stream.getvalue()


def unshown(text: str) -> set[str]:
    """Give the characters of an item's text that the face of the PDF does not have."""
    return {c for c in plain(text) if c not in _encodable(c)}


def _encodable(text: str) -> str:
    return text.encode("cp1252", "replace").decode("cp1252")


def _draw(canvas: Canvas, item: Item, paper: Paper) -> None:
    """Draw one item."""
    canvas.setLineWidth(pen_of(item.layer, paper))
    match item:
        case LineItem():
            dashes = CHAIN if item.is_chain else DASHES if LOOKS[item.layer].is_dashed else ()
            canvas.setDash(list(dashes))
            canvas.line(*item.start, *item.end)
        case PolylineItem():
            canvas.setDash(list(DASHES) if LOOKS[item.layer].is_dashed else [])
            _draw_path(canvas, item.points, close=item.is_closed, fill=0)
        case TriangleItem():
            canvas.setDash([])
            _draw_path(canvas, item.points, close=True, fill=1)
        case CircleItem():
            canvas.setDash([])
            canvas.circle(*item.center, item.radius, stroke=1, fill=0)
        case TextItem():
            _write(canvas, item)
        case _:
            message = f"no stroke for {type(item).__name__}"
            raise TypeError(message)


def _draw_path(
    canvas: Canvas, points: Sequence[tuple[float, float]], *, close: bool, fill: int
) -> None:
    path = canvas.beginPath()
    path.moveTo(*points[0])
    for point in points[1:]:
        path.lineTo(*point)
    if close:
        path.close()
    canvas.drawPath(path, stroke=1 - fill, fill=fill)


def _write(canvas: Canvas, item: TextItem) -> None:
    """Write a text, condensed where the face is wider than the room that the sheet keeps."""
    words = _encodable(plain(item.text))
    size = item.height / _CAPITALS
    width = stringWidth(words, _FACE, size)
    share = min(1.0, text_width(item.text, item.height) / width) if width else 1.0
    turn = math.radians(item.rotation)
    cos, sin = math.cos(turn), math.sin(turn)
    u, v = -_SHIFT[item.align] * width * share, -_DROP[item.valign] * item.height
    x, y = item.at
    text = canvas.beginText()
    text.setFont(_FACE, size)
    if share < 1.0:
        text.setHorizScale(100.0 * share)
    text.setTextTransform(cos, sin, -sin, cos, x + u * cos - v * sin, y + u * sin + v * cos)
    text.textOut(words)
    canvas.drawText(text)
