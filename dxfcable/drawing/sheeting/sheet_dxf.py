"""A sheet as DXF: a paper-space layout of true size, everything in it at one to one."""

from __future__ import annotations

import io
from typing import TYPE_CHECKING

from ezdxf._options import options
from ezdxf.document import Drawing
from ezdxf.enums import InsertUnits, TextEntityAlignment

from dxfcable.drawing.bytes.decode import escape
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

if TYPE_CHECKING:
    from collections.abc import Iterable

    from ezdxf.layouts.layout import Paperspace

    from dxfcable.drawing.sheeting.sheet import Sheet
    from dxfcable.model import Point
    from dxfcable.settings import Settings

_RELEASE = "R2010"
_STYLE, _CHAIN, _DASHED = "SHEET", "SHEET-CHAIN", "SHEET-DASHED"
_ALIGNS = {
    (Align.LEFT, VAlign.BASELINE): TextEntityAlignment.LEFT,
    (Align.CENTER, VAlign.BASELINE): TextEntityAlignment.CENTER,
    (Align.RIGHT, VAlign.BASELINE): TextEntityAlignment.RIGHT,
    (Align.LEFT, VAlign.BOTTOM): TextEntityAlignment.BOTTOM_LEFT,
    (Align.CENTER, VAlign.BOTTOM): TextEntityAlignment.BOTTOM_CENTER,
    (Align.RIGHT, VAlign.BOTTOM): TextEntityAlignment.BOTTOM_RIGHT,
    (Align.LEFT, VAlign.MIDDLE): TextEntityAlignment.MIDDLE_LEFT,
    (Align.CENTER, VAlign.MIDDLE): TextEntityAlignment.MIDDLE_CENTER,
    (Align.RIGHT, VAlign.MIDDLE): TextEntityAlignment.MIDDLE_RIGHT,
    (Align.LEFT, VAlign.TOP): TextEntityAlignment.TOP_LEFT,
    (Align.CENTER, VAlign.TOP): TextEntityAlignment.TOP_CENTER,
    (Align.RIGHT, VAlign.TOP): TextEntityAlignment.TOP_RIGHT,
}


def sheet_dxf(sheet: Sheet, settings: Settings) -> bytes:
    """Write a sheet as a drawing of its own.

    Parameters
    ----------
    sheet : Sheet
    settings : Settings
        Names of the layers, and the office's text style.

    Returns
    -------
    bytes
        DXF of release R2010; the same at every run. Its layout has the paper's size, in
        millimetres, or in inches for papers that are sized so.
    """
    before = options.write_fixed_meta_data_for_testing
    options.write_fixed_meta_data_for_testing = True  # no times, no new GUIDs, when made or written
    try:
        doc = _new(sheet, settings)
        _Writer(sheet, settings, _layout(doc, sheet)).write(sheet.items)
        return _written(doc)
    finally:
        options.write_fixed_meta_data_for_testing = before


def _new(sheet: Sheet, settings: Settings) -> Drawing:
    """Start a drawing with linetypes, style and the layers that the sheet uses."""
    paper = sheet.paper
    doc = Drawing.new(_RELEASE)
    doc.units = InsertUnits.Inches if paper.is_inch else InsertUnits.Millimeters
    doc.header["$MEASUREMENT"] = 0 if paper.is_inch else 1
    doc.header["$LUNITS"] = 2
    doc.header["$LTSCALE"] = 1.0
    doc.header["$TILEMODE"] = 0  # opens on the sheet
    doc.header.custom_vars.append("KIND", MARK)
    for name, words, dashes in (
        (_CHAIN, "Chain __ . __ . __", CHAIN),
        (_DASHED, "Dashed __ __ __ __", DASHES),
    ):
        lengths = [d / paper.unit * (-1) ** k for k, d in enumerate(dashes)]
        pattern = [round(v, 6) for v in (sum(abs(v) for v in lengths), *lengths)]
        doc.linetypes.add(name, pattern, description=words)
    style = settings.show.text_style
    doc.styles.add(escape(style) if style else _STYLE, font="arial.ttf")
    for role in dict.fromkeys(item.layer for item in sheet.items):
        name = escape(layer_of(role, settings.layers))
        if name not in doc.layers:
            weight = round(100 * pen_of(role, paper))
            doc.layers.add(name, color=7, linetype="CONTINUOUS", lineweight=weight)
    return doc


def _layout(doc: Drawing, sheet: Sheet) -> Paperspace:
    """Make the sheet's layout the only one, in full view."""
    paper = sheet.paper
    wide, high = round(paper.width / paper.unit, 6), round(paper.height / paper.unit, 6)
    name = escape(sheet.fields.number or sheet.stem)[:60] or "SHEET"
    layout = doc.layouts.new(_legal(name))
    units = "inch" if paper.is_inch else "mm"
    layout.page_setup(size=(wide, high), margins=(0, 0, 0, 0), units=units, scale=(1, 1))
    layout.dxf.limmin, layout.dxf.limmax = (0.0, 0.0), (wide, high)
    layout.dxf.extmin, layout.dxf.extmax = (0.0, 0.0, 0.0), (wide, high, 0.0)
    layout.dxf.paper_size = (
        f"{paper.name}_({wide:g}_x_{high:g}_{'Inches' if paper.is_inch else 'MM'})"
    )
    layout.reset_main_viewport(center=(0.5 * wide, 0.5 * high), size=(1.05 * wide, 1.05 * high))
    for viewport in layout.query("VIEWPORT"):
        viewport.dxf.layer = "0"  # the library names a layer that has no row
    doc.layouts.set_active_layout(layout.name)
    doc.layouts.delete("Layout1")
    return layout


def _legal(name: str) -> str:
    """Leave out what names of layouts may not have."""
    return "".join(c if c not in '<>/\\":;?*|,=`' else "_" for c in name)


class _Writer:
    """Writes items into a layout, in its unit."""

    def __init__(self, sheet: Sheet, settings: Settings, layout: Paperspace) -> None:
        self._paper, self._layout = sheet.paper, layout
        self._layers = settings.layers
        self._style = escape(settings.show.text_style) or _STYLE

    def write(self, items: Iterable[Item]) -> None:
        """Write all items."""
        for item in items:
            self._write(item)

    def _at(self, point: Point) -> Point:
        unit = self._paper.unit
        return round(point[0] / unit, 7) + 0.0, round(point[1] / unit, 7) + 0.0

    def _attributes(self, item: Item) -> dict[str, str]:
        attributes = {"layer": escape(layer_of(item.layer, self._layers))}
        if isinstance(item, LineItem) and item.is_chain:
            attributes["linetype"] = _CHAIN
        elif LOOKS[item.layer].is_dashed and isinstance(item, LineItem | PolylineItem):
            attributes["linetype"] = _DASHED
        return attributes

    def _write(self, item: Item) -> None:
        attributes = self._attributes(item)
        match item:
            case LineItem():
                ends = self._at(item.start), self._at(item.end)
                self._layout.add_line(*ends, dxfattribs=attributes)
            case PolylineItem():
                self._layout.add_lwpolyline(
                    [self._at(p) for p in item.points], close=item.is_closed, dxfattribs=attributes
                )
            case CircleItem():
                radius = round(item.radius / self._paper.unit, 7)
                self._layout.add_circle(self._at(item.center), radius, dxfattribs=attributes)
            case TriangleItem():
                first, second, third = (self._at(p) for p in item.points)
                # A filled triangle is a SOLID whose last two corners are one.
                self._layout.add_solid([first, second, third, third], dxfattribs=attributes)
            case TextItem():
                text = self._layout.add_text(
                    item.text,
                    height=round(item.height / self._paper.unit, 7),
                    rotation=item.rotation,
                    dxfattribs=attributes | {"style": self._style},
                )
                align = _ALIGNS[item.align, item.valign]
                text.set_placement(self._at(item.at), align=align)
            case _:
                message = f"no entity for {type(item).__name__}"
                raise TypeError(message)


def _written(doc: Drawing) -> bytes:
    """Write a drawing, its CLASS rows in order: the library makes them from a set."""
    doc.classes.add_required_classes(doc.dxfversion)
    rows = sorted(doc.classes.classes.items())
    doc.classes.classes.clear()
    doc.classes.classes.update(rows)
    stream = io.StringIO()
    doc.write(stream)
    return stream.getvalue().encode(doc.output_encoding)
