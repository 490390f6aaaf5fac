"""The board that a starter drawing is drawn on: its size, its layers, lines and texts."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from ezdxf.document import Drawing
from ezdxf.enums import InsertUnits, TextEntityAlignment

from dxfcable.drawing.bytes.decode import escape
from dxfcable.drawing.rows import LOOKS
from dxfcable.quantities import convert, is_imperial, read_plot_scale

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from ezdxf.layouts.base import BaseLayout

    from dxfcable.model import Point
    from dxfcable.settings import Settings

# R2000: the earliest release with lineweights and LWPOLYLINE, so every program in use reads it.
_RELEASE = "R2000"
_INSUNITS = {
    "in": InsertUnits.Inches,
    "ft": InsertUnits.Feet,
    "mm": InsertUnits.Millimeters,
    "m": InsertUnits.Meters,
}
_DECIMAL, _ARCHITECTURAL = 2, 4  # $LUNITS; architectural takes one unit for an inch
_STYLE = "CABLE-TEXT"
# Colour index, linetype, pen width [1/100 mm] of the layers that the drafter draws on.
_INPUT_LOOKS = {
    "support": (1, "CONTINUOUS", 35),
    "string": (8, "CABLE-CHAIN", 18),
    "load": (6, "CONTINUOUS", 25),
    "data": (5, "CONTINUOUS", 18),
    "mast": (3, "CONTINUOUS", 70),
    "stay": (3, "CONTINUOUS", 50),
    "anchor": (1, "CONTINUOUS", 35),
    "deck": (30, "CONTINUOUS", 50),
    "clearance": (40, "CABLE-DASHED", 25),
    "hold_down": (94, "CONTINUOUS", 35),
    "area": (9, "CONTINUOUS", 18),
    "plan_point": (6, "CONTINUOUS", 25),
    "frame": (8, "CABLE-DASHED", 13),
}
_OTHER_LOOKS = {"notes": (7, 25), "structure": (8, 25)}
_LINETYPES = {  # plotted mm
    "CABLE-CHAIN": ("Chain __ . __ . __", (12.0, -1.5, 1.5, -1.5)),
    "CABLE-DASHED": ("Dashed __ __ __ __", (4.0, -2.0)),
}
# The example is composed for a text height of 0.25 on its own scale; the example grows in
# quarters with the height that the settings ask for, so that nothing runs into another.
_COMPOSED_HEIGHT = 0.25
_USUAL_SCALE = {True: 96.0, False: 100.0}  # 1/8" = 1'-0" and 1:100
_UNITS_PER_COMPOSED = {"in": 36.0, "ft": 3.0, "mm": 1000.0, "m": 1.0}


@dataclass(frozen=True, slots=True, kw_only=True)
class Board:
    """A starter drawing in work.

    Attributes
    ----------
    doc : Drawing
    unit : str
        Of the drawing.
    height : float
        Of usual texts [drawing unit].
    paper : float
        One plotted millimetre [drawing unit].
    size : float
        Growth of the example; 1 at the usual plotting scale.
    layers : mapping of str to str
        Role (also `notes`, `structure`) to layer name.
    style : str
        Text style.
    """

    doc: Drawing
    unit: str
    height: float
    paper: float
    size: float
    layers: Mapping[str, str]
    style: str

    @property
    def is_imperial(self) -> bool:
        """Whether the drawing is in feet or inches."""
        return is_imperial(self.unit)

    @property
    def factor(self) -> float:
        """Drawing units of one unit of the composition."""
        return _UNITS_PER_COMPOSED[self.unit] * self.size

    def at(self, composed: Point) -> Point:
        """Give a point of the composition in the drawing."""
        return _neat(composed[0] * self.factor), _neat(composed[1] * self.factor)

    def line(self, start: Point, end: Point, role: str) -> None:
        """Draw a line between points of the composition."""
        attributes = {"layer": self.layers[role]}
        self.doc.modelspace().add_line(self.at(start), self.at(end), dxfattribs=attributes)

    def polyline(self, points: Sequence[Point], role: str, *, close: bool = False) -> None:
        """Draw a polyline through points of the composition."""
        attributes = {"layer": self.layers[role]}
        self.doc.modelspace().add_lwpolyline(
            [self.at(p) for p in points], close=close, dxfattribs=attributes
        )

    def rectangle(self, low: Point, high: Point, role: str) -> None:
        """Draw an upright rectangle."""
        corners = [low, (high[0], low[1]), high, (low[0], high[1])]
        self.polyline(corners, role, close=True)

    def circle(self, center: Point, radius: float, role: str) -> None:
        """Draw a circle; the radius is the drawing's."""
        attributes = {"layer": self.layers[role]}
        self.doc.modelspace().add_circle(self.at(center), _neat(radius), dxfattribs=attributes)

    def text(
        self,
        words: str,
        at: Point,
        role: str = "notes",
        *,
        size: float = 1.0,
        align: TextEntityAlignment = TextEntityAlignment.LEFT,
    ) -> None:
        """Write a line of text at a point of the composition, `size` times the usual height."""
        attributes = {"layer": self.layers[role], "style": self.style}
        self.write(self.doc.modelspace(), words, self.at(at), attributes, size=size, align=align)

    def write(
        self,
        space: BaseLayout,
        words: str,
        at: Point,
        attributes: Mapping[str, str],
        *,
        size: float = 1.0,
        align: TextEntityAlignment = TextEntityAlignment.LEFT,
    ) -> None:
        """Write a line of text into a space of the drawing at a point of its own."""
        text = space.add_text(escape(words), height=self.height * size, dxfattribs=attributes)
        text.set_placement(at, align=align)

    def insert(self, name: str, at: Point, role: str, values: Mapping[str, str]) -> None:
        """Insert a block with attributes; those without a value are blank."""
        layer = self.layers[role]
        reference = self.doc.modelspace().add_blockref(
            escape(name), self.at(at), dxfattribs={"layer": layer}
        )
        reference.add_auto_attribs(dict(values))
        for attribute in reference.attribs:
            attribute.dxf.layer = layer


def _neat(value: float) -> float:
    """Round as a drafter's snap would."""
    return round(value, 6)


def new_board(unit: str, settings: Settings) -> Board:
    """Start a drawing with the layers, linetypes and text style of the settings.

    Parameters
    ----------
    unit : str
        in, ft, mm or m.
    settings : Settings

    Returns
    -------
    Board
    """
    show = settings.show
    imperial = is_imperial(unit)
    scale = read_plot_scale(show.plot_scale) if show.plot_scale else _USUAL_SCALE[imperial]
    plotted = convert(show.text_in, "in", "mm") if imperial else show.text_mm
    paper = convert(scale, "mm", unit)
    height = float(f"{plotted * paper:.9g}")
    needed = height / (_COMPOSED_HEIGHT * _UNITS_PER_COMPOSED[unit])
    doc = Drawing.new(_RELEASE)
    _set_header(doc, unit, height, scale)
    for name, (description, pattern) in _LINETYPES.items():
        lengths = [length * paper for length in pattern]
        doc.linetypes.add(
            name, [sum(abs(length) for length in lengths), *lengths], description=description
        )
    style = escape(show.text_style or _STYLE)
    if style not in doc.styles:
        doc.styles.add(style, font="arial.ttf")
    return Board(
        doc=doc,
        unit=unit,
        height=height,
        paper=paper,
        size=max(1, math.ceil(4 * needed * (1 - 1e-6))) / 4,
        layers=_add_layers(doc, settings),
        style=style,
    )


def _set_header(doc: Drawing, unit: str, height: float, scale: float) -> None:
    """Say the unit, and what new texts and dimensions of a drafter take."""
    imperial = is_imperial(unit)
    doc.units = _INSUNITS[unit]
    doc.modelspace().units = _INSUNITS[unit]
    doc.header["$MEASUREMENT"] = 0 if imperial else 1
    doc.header["$LUNITS"] = _ARCHITECTURAL if unit == "in" else _DECIMAL
    doc.header["$LUPREC"] = 4 if unit == "in" else {"ft": 2, "mm": 0, "m": 3}[unit]
    doc.header["$LTSCALE"] = 1.0  # patterns are in drawing units already
    doc.header["$TEXTSIZE"] = height
    doc.header["$DIMSCALE"] = float(f"{convert(scale, 'in' if imperial else 'mm', unit):.9g}")
    doc.header["$PDMODE"] = 35  # a point shows as a circle with a cross
    doc.header["$PDSIZE"] = height


def _add_layers(doc: Drawing, settings: Settings) -> dict[str, str]:
    """Add all layers of the settings, and two for what is not read."""
    layers = settings.layers
    looks = {role: _INPUT_LOOKS[role] for role in layers.input_roles()}
    for role in layers.output_roles():
        looks[role] = (LOOKS[role].color, "CONTINUOUS", LOOKS[role].lineweight)
    names = {role: layers.name(role) for role in looks}
    taken = {name.casefold() for name in names.values()}
    for role, name in (("notes", "S-ANNO-NOTE"), ("structure", "S-FNDN")):
        while name.casefold() in taken:
            name += "-1"
        names[role] = name
        looks[role] = (_OTHER_LOOKS[role][0], "CONTINUOUS", _OTHER_LOOKS[role][1])
    names = {role: escape(name) for role, name in names.items()}
    for role, (color, linetype, lineweight) in looks.items():
        if names[role] not in doc.layers:  # written roles may share a layer
            doc.layers.add(names[role], color=color, linetype=linetype, lineweight=lineweight)
    return names
