"""PDF pages: strokes and fillings of drawings passed on to the PDF library."""

from __future__ import annotations

import io
from typing import TYPE_CHECKING

from ezdxf.addons.drawing.backend import BackendInterface
from ezdxf.path import Curve3To, Curve4To, LineTo
from reportlab.pdfgen.canvas import FILL_EVEN_ODD, Canvas

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from ezdxf.addons.drawing.backend import ImageData
    from ezdxf.addons.drawing.config import Configuration
    from ezdxf.addons.drawing.properties import BackendProperties, Properties
    from ezdxf.entities.dxfgfx import DXFGraphic
    from ezdxf.math import Vec2
    from ezdxf.npshapes import NumpyPath2d, NumpyPoints2d
    from reportlab.pdfgen.pathobject import PDFPathObject

    from dxfcable.drawing.picturing.picture_page import Page

POINTS_PER_MM = 72.0 / 25.4


def write_pdf(pages: Sequence[Page], title: str = "") -> bytes:
    """Write pages as one PDF; the same pages always give the same bytes.

    Parameters
    ----------
    pages : sequence of Page
        Drawings placed on paper, one after the other; each can be written once.
    title : str
        What a reader's window shows.
    """
    stream = io.BytesIO()
    canvas = Canvas(stream, pageCompression=1, invariant=1)
    canvas.setTitle(title)
    for page in pages:
        canvas.setPageSize((page.width * POINTS_PER_MM, page.height * POINTS_PER_MM))
        canvas.scale(POINTS_PER_MM, POINTS_PER_MM)
        canvas.setLineCap(1)
        canvas.setLineJoin(1)
        page.replay(PdfBackend(canvas, page), flip_y=False, scale=1.0)
        canvas.showPage()
    canvas.save()
    return stream.getvalue()


class PdfBackend(BackendInterface):
    """Draws on one page of a canvas, in millimetres from the lower left corner."""

    def __init__(self, canvas: Canvas, page: Page) -> None:
        self._canvas = canvas
        self._page = page

    def set_background(self, color: str) -> None:
        """Fill the page."""
        self._set_fill(color)
        self._canvas.rect(0, 0, self._page.width, self._page.height, stroke=0, fill=1)

    def draw_point(self, pos: Vec2, properties: BackendProperties) -> None:
        """Draw a dot as wide as the pen."""
        self.draw_line(pos, pos, properties)

    def draw_line(self, start: Vec2, end: Vec2, properties: BackendProperties) -> None:
        """Draw a line."""
        self._set_stroke(properties)
        self._canvas.line(*_place(start), *_place(end))

    def draw_solid_lines(
        self, lines: Iterable[tuple[Vec2, Vec2]], properties: BackendProperties
    ) -> None:
        """Draw lines of one kind."""
        path = self._canvas.beginPath()
        for start, end in lines:
            path.moveTo(*_place(start))
            path.lineTo(*_place(end))
        self._set_stroke(properties)
        self._canvas.drawPath(path, stroke=1, fill=0)

    def draw_path(self, path: NumpyPath2d, properties: BackendProperties) -> None:
        """Draw the outline of a path."""
        shape = self._canvas.beginPath()
        _add(shape, path, close=False)
        self._set_stroke(properties)
        self._canvas.drawPath(shape, stroke=1, fill=0)

    def draw_filled_paths(
        self, paths: Iterable[NumpyPath2d], properties: BackendProperties
    ) -> None:
        """Fill paths that belong together; one within another is a hole."""
        shape = self._canvas.beginPath()
        for path in paths:
            _add(shape, path, close=True)
        self._set_fill(properties.color)
        self._canvas.drawPath(shape, stroke=0, fill=1, fillMode=FILL_EVEN_ODD)

    def draw_filled_polygon(self, points: NumpyPoints2d, properties: BackendProperties) -> None:
        """Fill a polygon."""
        first, *others = points.vertices()
        shape = self._canvas.beginPath()
        shape.moveTo(*_place(first))
        for point in others:
            shape.lineTo(*_place(point))
        shape.close()
        self._set_fill(properties.color)
        self._canvas.drawPath(shape, stroke=0, fill=1, fillMode=FILL_EVEN_ODD)

    def draw_image(self, image_data: ImageData, properties: BackendProperties) -> None:
        """Refuse images: a picture opens no file that a drawing names, so none is ever loaded."""
        raise NotImplementedError

    def configure(self, config: Configuration) -> None:
        """Take no settings: the page has resolved them."""

    def enter_entity(self, entity: DXFGraphic, properties: Properties) -> None:
        """Need no entity."""

    def exit_entity(self, entity: DXFGraphic) -> None:
        """Need no entity."""

    def clear(self) -> None:
        """Refuse: what is on a page stays."""
        raise NotImplementedError

    def finalize(self) -> None:
        """Leave the page to `write_pdf`."""

    def _set_stroke(self, properties: BackendProperties) -> None:
        """Take a pen."""
        red, green, blue, alpha = _color(properties.color)
        self._canvas.setStrokeColorRGB(red, green, blue, alpha=alpha)
        self._canvas.setLineWidth(self._page.pen(properties.lineweight))

    def _set_fill(self, color: str) -> None:
        """Take a filling."""
        red, green, blue, alpha = _color(color)
        self._canvas.setFillColorRGB(red, green, blue, alpha=alpha)


def _place(point: Vec2) -> tuple[float, float]:
    """Return a point to the micrometre: more digits make a file larger, not a line truer."""
    return round(point.x, 3), round(point.y, 3)


def _color(text: str) -> tuple[float, float, float, float]:
    """Read #RRGGBB or #RRGGBBAA."""
    red, green, blue, alpha = (int(f"{text[1:]}ff"[k : k + 2], 16) / 255 for k in (0, 2, 4, 6))
    return red, green, blue, alpha


def _add(shape: PDFPathObject, path: NumpyPath2d, *, close: bool) -> None:
    """Add a path; quadratic curves become cubic ones, which is all that PDF has."""
    current = path.start
    shape.moveTo(*_place(current))
    for part in path.commands():
        end = part.end
        if isinstance(part, LineTo):
            shape.lineTo(*_place(end))
        elif isinstance(part, Curve3To):
            first, second = current.lerp(part.ctrl, 2 / 3), end.lerp(part.ctrl, 2 / 3)
            shape.curveTo(*_place(first), *_place(second), *_place(end))
        elif isinstance(part, Curve4To):
            first, second = part.ctrl1, part.ctrl2
            shape.curveTo(*_place(first), *_place(second), *_place(end))
        else:
            if close:
                shape.close()
            shape.moveTo(*_place(end))
        current = end
    if close:
        shape.close()
