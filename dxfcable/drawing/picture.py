"""Pictures of drawings as drawn: SVG, PDF, PNG.

Libraries draw: ezdxf's drawing add-on, reportlab for PDF, pypdfium2 for pixels. They come
with `pip install 'dxfcable[picture]'` and are imported only when a picture is made.
"""

from __future__ import annotations

import importlib
import io
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from dxfcable.errors import DxfcableError

if TYPE_CHECKING:
    from ezdxf.document import Drawing
    from ezdxf.layouts.layout import Layout

    from dxfcable.drawing.picturing.picture_page import Page
    from dxfcable.model import Finding

Kind = Literal["svg", "png", "pdf"]
KINDS: tuple[Kind, ...] = ("svg", "png", "pdf")

SIZE = 1600  # pixels
_MM_PER_PIXEL = 25.4 / 96  # as browsers have it
_PENS = 0.7  # drawings are made for larger sheets than a picture is
_SMALLEST, _LARGEST = 64, 20_000
_LIBRARIES = {
    "svg": ("PIL",),
    "pdf": ("PIL", "reportlab"),
    "png": ("PIL", "reportlab", "pypdfium2"),
}


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Picture:
    """A picture, and what of the drawing it does not show."""

    data: bytes
    findings: tuple[Finding, ...]


def picture(
    data: bytes,
    kind: Kind,
    *,
    size: int = SIZE,
    margin: float = 0.03,
    layout: str | None = None,
) -> bytes:
    """Make a picture of a drawing, as `draw_picture`, without its findings."""
    return draw_picture(data, kind, size=size, margin=margin, layout=layout).data


def draw_picture(
    data: bytes,
    kind: Kind,
    *,
    size: int = SIZE,
    margin: float = 0.03,
    layout: str | None = None,
) -> Picture:
    """Make a picture of a drawing as it is plotted, on white.

    Layers that are off, frozen or not plotted are not drawn. The same drawing gives the same
    bytes.

    Parameters
    ----------
    data : bytes
        Any DXF.
    kind : {"svg", "png", "pdf"}
    size : int
        Longer side [pixels]; PDF and SVG take 96 pixels an inch. A layout with a paper size
        keeps it in SVG and PDF.
    margin : float
        About the drawing, as a part of its longer side; layouts with a paper have their own.
    layout : str, optional
        Name of a paper-space layout; model space by default.

    Raises
    ------
    DrawingError
        Where the file is no drawing that can be loaded, or shows nothing.
    DxfcableError
        `picture-extra` where a library is missing, `picture-layout` for an unknown layout,
        `usage` for a size or margin out of range.
    """
    require(kind)
    _check(size, margin)
    from dxfcable.drawing.picturing.picture_load import load

    loaded = load(data)
    page = page_of(loaded.doc, size=size, margin=margin, layout=layout)
    return Picture(data=_write(page, kind, size), findings=(*loaded.findings, *page.findings))


def page_of(
    doc: Drawing, *, size: int = SIZE, margin: float = 0.03, layout: str | None = None
) -> Page:
    """Draw a layout of a document in memory on a page; the document is not changed.

    Raises
    ------
    DrawingError, DxfcableError
        As `draw_picture`.
    """
    from dxfcable.drawing.picturing.picture_page import View, draw_page

    view = View(longer_side=size * _MM_PER_PIXEL, margin=margin, pens=_PENS)
    return draw_page(doc, find_layout(doc, layout), view)


def find_layout(doc: Drawing, name: str | None) -> Layout:
    """Return a layout by its name in any case, model space for None.

    Raises
    ------
    DxfcableError
        Where there is no such layout; names those that there are.
    """
    if name is None:
        return doc.modelspace()
    names = doc.layout_names_in_taborder()
    for known in names:
        if known.casefold() == name.strip().casefold():
            return doc.layouts.get(known)
    msg = f'the drawing has no layout "{name}"'
    raise DxfcableError(msg, code="picture-layout", remedy=f"It has: {', '.join(names)}.")


def require(kind: str) -> None:
    """Check that the libraries for a kind of picture are there.

    Raises
    ------
    DxfcableError
        Names the missing library and the command that installs it.
    """
    if kind not in _LIBRARIES:
        msg = f'"{kind}" is no kind of picture'
        raise DxfcableError(msg, code="usage", remedy=f"Ask for one of {', '.join(KINDS)}.")
    for name in _LIBRARIES[kind]:
        try:
            importlib.import_module(name)
        except ImportError as error:
            library = {"PIL": "pillow"}.get(name, name)
            msg = f"a picture as {kind.upper()} needs the library {library}"
            raise DxfcableError(
                msg,
                code="picture-extra",
                remedy="Install it with: pip install 'dxfcable[picture]'",
            ) from error


def _svg(page: Page) -> bytes:
    """Write a page as SVG."""
    from xml.etree import ElementTree as ET

    from dxfcable.drawing.picturing.picture_svg import svg_element

    whole: bytes = ET.tostring(svg_element(page), encoding="utf-8", xml_declaration=True)
    return whole


def _check(size: int, margin: float) -> None:
    """Refuse sizes and margins that give no picture."""
    if not _SMALLEST <= size <= _LARGEST:
        msg = f"a picture of {size} pixels cannot be made"
        raise DxfcableError(
            msg, code="usage", remedy=f"Give a size from {_SMALLEST} to {_LARGEST}."
        )
    if not 0 <= margin <= 0.4:
        msg = f"a margin of {margin:g} times the drawing cannot be made"
        raise DxfcableError(msg, code="usage", remedy="Give a margin from 0 to 0.4.")


def _write(page: Page, kind: Kind, size: int) -> bytes:
    """Write a page in the wanted kind."""
    if kind == "svg":
        return _svg(page)
    from dxfcable.drawing.picturing.pdf_pages import write_pdf

    pdf = write_pdf([page])
    return pdf if kind == "pdf" else _png(pdf, size)


def _png(pdf: bytes, size: int) -> bytes:
    """Turn the first page of a PDF into pixels."""
    import pypdfium2

    document = pypdfium2.PdfDocument(pdf)
    try:
        page = document[0]
        scale = size / max(page.get_size())
        image = page.render(scale=scale).to_pil()
        stream = io.BytesIO()
        image.save(stream, "PNG")
        return stream.getvalue()
    finally:
        document.close()
