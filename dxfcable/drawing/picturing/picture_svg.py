"""A page as SVG, written by the drawing library."""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.addons.drawing.layout import Page as SvgPage
from ezdxf.addons.drawing.layout import Settings, Units
from ezdxf.addons.drawing.svg import SVGRenderBackend

if TYPE_CHECKING:
    from collections.abc import Callable
    from xml.etree.ElementTree import Element

    from ezdxf.addons.drawing.backend import ImageData
    from ezdxf.addons.drawing.properties import BackendProperties

    from dxfcable.drawing.picturing.picture_page import Page

UNITS_PER_MM = 200  # of the view box, which has whole numbers


def svg_element(page: Page, color: Callable[[str], str] | None = None) -> Element:
    """Return a page as the root of an SVG tree; its user unit is 1 / `UNITS_PER_MM` mm.

    Parameters
    ----------
    page : Page
        Can be written once.
    color : callable, optional
        Turns each #RRGGBB[AA] into another.
    """
    backend = _Backend(page)
    page.replay(backend, flip_y=True, scale=UNITS_PER_MM, color=color)
    root = backend.get_xml_root_element()
    root.set("role", "img")
    root.set("overflow", "hidden")
    return root


class _Backend(SVGRenderBackend):
    """The library's writer with our pens."""

    def __init__(self, page: Page) -> None:
        longer = max(page.width, page.height)
        settings = Settings(output_coordinate_space=longer * UNITS_PER_MM)
        super().__init__(SvgPage(page.width, page.height, Units.mm), settings)
        self._page = page

    def resolve_stroke_width(self, width: float) -> int:
        """Return the width of a stroke in the view box."""
        return round(self._page.pen(width) * UNITS_PER_MM)

    def draw_image(self, image_data: ImageData, properties: BackendProperties) -> None:
        """Refuse images: a picture opens no file that a drawing names, so none is ever loaded."""
        raise NotImplementedError
