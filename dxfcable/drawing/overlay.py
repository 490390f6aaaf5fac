"""A picture of what was understood: the drawing in grey, and on it what each thing was read as."""

from __future__ import annotations

from typing import TYPE_CHECKING
from xml.etree import ElementTree as ET

from dxfcable.drawing.picture import require
from dxfcable.drawing.picturing.overlay_legend import draw_legend
from dxfcable.drawing.picturing.overlay_marks import Box, Labels, Marks
from dxfcable.drawing.picturing.overlay_understood import STYLE, Understood, is_place
from dxfcable.drawing.picturing.picture_load import load

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from dxfcable.drawing.picturing.picture_page import Page
    from dxfcable.model import Finding, Layout, Point

_LONGER_SIDE = 420.0  # mm
_AROUND = 0.1  # of the longer side of what was understood
_HEIGHT_OF_SPAN = 1 / 110  # height of capitals over the span on the page
_HEIGHTS = (1.9, 3.2)  # mm


def overlay(data: bytes, layout: Layout, findings: Iterable[Finding]) -> bytes:
    """Draw what was understood of a drawing over the drawing itself.

    The picture shows the part of the drawing about the cables. Each kind of mark has a shape
    and a colour of its own, told in the legend below.

    Parameters
    ----------
    data : bytes
        The drawing that was read.
    layout : Layout
        What was understood of it.
    findings : iterable of Finding
        Those with a position are marked with their code there, all are listed below.

    Returns
    -------
    bytes
        SVG; the same input gives the same bytes.

    Raises
    ------
    DrawingError
        Where the drawing cannot be drawn.
    DxfcableError
        `picture-extra` where a library is missing.
    """
    require("svg")
    from dxfcable.drawing.picturing.picture_page import View, draw_page
    from dxfcable.drawing.picturing.picture_svg import UNITS_PER_MM, svg_element

    told = tuple(dict.fromkeys(findings))
    loaded = load(data)
    window = _window(layout, told)
    view = View(
        longer_side=_LONGER_SIDE,
        margin=0.0 if window else 0.03,
        pens=0.5,
        shows_unplotted=True,
        window=window,
    )
    page = draw_page(loaded.doc, loaded.doc.modelspace(), view)
    root = svg_element(page, _grey)
    _clip(root, page, UNITS_PER_MM)
    marks = Marks(root, UNITS_PER_MM)
    marks.style(STYLE)
    height = _text_height(layout, page)
    labels = Labels((0.0, 0.0, page.width, page.height), height)
    Understood(layout, told, page, marks, labels).draw()
    bottom = draw_legend(marks, layout, told, page)
    _grow(root, page, bottom, UNITS_PER_MM)
    whole: bytes = ET.tostring(root, encoding="utf-8", xml_declaration=True)
    return whole


def _window(layout: Layout, findings: Sequence[Finding]) -> Box | None:
    """Return the part of the drawing about what was understood; all of it where nothing was."""
    points: list[Point] = [(s.x, s.y) for s in layout.supports]
    points += [mast.foot for mast in layout.masts] + [stay.foot for stay in layout.stays]
    for cable in layout.cables:
        points += [*cable.deck, *cable.clearance]
        for point in cable.loads:
            stated = point.value_origin
            origins = (point.origin.at, stated.at if stated else None)
            points += [(point.x, point.y), *(at for at in origins if at is not None)]
        if cable.rule is not None:
            points += [at for at in (cable.rule.origin.at, cable.rule.point) if at is not None]
        if cable.frame is not None:
            frame = cable.frame
            points += [(frame.x0, frame.y0), (frame.x1, frame.y1)]
    found = [f.at for f in findings if f.at is not None and is_place(f.at)]
    understood = _around([point for point in points if is_place(point)], 1.0)
    if understood is None:
        return None
    x0, y0, x1, y1 = understood  # a finding far off must not make the cable a speck
    near = [point for point in found if x0 <= point[0] <= x1 and y0 <= point[1] <= y1]
    return _around([point for point in points if is_place(point)] + near, _AROUND)


def _around(points: Sequence[Point], part: float) -> Box | None:
    """Return the box of points, with a part of its longer side about it."""
    if not points:
        return None
    xs, ys = [x for x, _ in points], [y for _, y in points]
    x0, y0, x1, y1 = min(xs), min(ys), max(xs), max(ys)
    around = part * (max(x1 - x0, y1 - y0) or 1.0)
    return x0 - around, y0 - around, x1 + around, y1 + around


def _text_height(layout: Layout, page: Page) -> float:
    """Return the height of labels' capitals, by the shortest span [mm]."""
    spans = [abs(c.supports[-1].x - c.supports[0].x) for c in layout.cables if c.supports]
    wanted = min(spans, default=page.width / page.scale) * page.scale * _HEIGHT_OF_SPAN
    return min(max(wanted, _HEIGHTS[0]), _HEIGHTS[1])


def _grey(color: str) -> str:
    """Turn a colour into a light grey that keeps its lightness."""
    red, green, blue = (int(color[k : k + 2], 16) for k in (1, 3, 5))
    light = round(140 + 0.4 * (0.30 * red + 0.59 * green + 0.11 * blue))
    return f"#{light:02x}{light:02x}{light:02x}{color[7:]}"


def _clip(root: ET.Element, page: Page, units: float) -> None:
    """Keep the grey drawing within its part of the page."""
    definitions, drawing = root.find("defs"), root.find("g")
    assert definitions is not None
    assert drawing is not None
    clip = ET.SubElement(definitions, "clipPath", {"id": "drawing"})
    size = {"width": f"{page.width * units:.0f}", "height": f"{page.height * units:.0f}"}
    ET.SubElement(clip, "rect", {"x": "0", "y": "0", **size})
    drawing.set("clip-path", "url(#drawing)")


def _grow(root: ET.Element, page: Page, bottom: float, units: float) -> None:
    """Make room for the legend below the drawing."""
    width, height = f"{page.width * units:.0f}", f"{bottom * units:.0f}"
    root.set("viewBox", f"0 0 {width} {height}")
    root.set("height", f"{bottom:g}mm")
    background = root.find("rect")
    assert background is not None
    background.set("height", height)
