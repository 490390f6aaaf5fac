"""The drafter's kit behind the demonstration drawings: sheet, layers, dimensions, notes.

Everything is drawn in model space at full size, the border and title block too, as small
offices do. Sizes named `paper` are plotted sizes (mm or inch) and grow by the plotting scale.
"""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from ezdxf.document import Drawing
from ezdxf.enums import TextEntityAlignment

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from ezdxf.entities.attrib import AttDef
    from ezdxf.layouts.layout import Modelspace

Point = tuple[float, float]

# Name: colour, linetype, lineweight in 1/100 mm.
CABLE_LAYERS = {
    "S-CABL-SUPP": (1, "Continuous", 35),
    "S-CABL-STRG": (8, "DASHDOT", 18),
    "S-CABL-LOAD": (6, "Continuous", 25),
    "S-CABL-DATA": (5, "Continuous", 18),
    "S-CABL-MAST": (3, "Continuous", 70),
    "S-CABL-STAY": (3, "Continuous", 50),
    "S-CABL-ANCH": (1, "Continuous", 35),
    "S-CABL-DECK": (30, "Continuous", 50),
    "S-CABL-FRAM": (8, "DASHED", 13),
}
SHEET_LAYERS = {
    "S-GRID": (8, "CENTER", 13),
    "S-ANNO-DIMS": (8, "Continuous", 18),
    "S-ANNO-TEXT": (7, "Continuous", 25),
    "S-ANNO-TTLB": (7, "Continuous", 50),
    "S-FNDN": (7, "Continuous", 35),
    "S-FNDN-PATT": (8, "Continuous", 13),
    "C-TOPO": (36, "Continuous", 50),
    "C-WATR": (150, "DASHED", 25),
    "A-ELEV-BYND": (9, "HIDDEN", 13),
    "P-PIPE": (140, "Continuous", 35),
}
# Patterns in plotted millimetres: length, then dashes and gaps.
LINETYPES = {
    "CENTER": ("Center ____ _ ____ _", (16.0, 10.0, -2.0, 2.0, -2.0)),
    "DASHED": ("Dashed __ __ __ __", (6.0, 4.0, -2.0)),
    "HIDDEN": ("Hidden _ _ _ _ _ _", (3.0, 2.0, -1.0)),
    "DASHDOT": ("Dash dot __ . __ .", (9.0, 6.0, -1.5, 0.0, -1.5)),
}
STYLE = "OFFICE"


def _neat(at: Point) -> Point:
    """Round as a drafter's snap would: no drawing needs more than a micron."""
    return round(at[0], 6), round(at[1], 6)


@dataclass(frozen=True, slots=True, kw_only=True)
class Sheet:
    """A drawing in work.

    `paper` is the length in drawing units of one plotted millimetre; `height` that of the
    usual text.
    """

    doc: Drawing
    msp: Modelspace
    paper: float
    height: float

    @property
    def is_r12(self) -> bool:
        """Whether the format has neither LWPOLYLINE nor HATCH."""
        return self.doc.dxfversion == "AC1009"

    def line(self, start: Point, end: Point, layer: str) -> None:
        """Draw a line."""
        self.msp.add_line(_neat(start), _neat(end), dxfattribs={"layer": layer})

    def polyline(self, points: Sequence[Point], layer: str, *, close: bool = False) -> None:
        """Draw a polyline of the kind that the format has."""
        vertices = [_neat(p) for p in points]
        if self.is_r12:
            self.msp.add_polyline2d(vertices, close=close, dxfattribs={"layer": layer})
        else:
            self.msp.add_lwpolyline(vertices, close=close, dxfattribs={"layer": layer})

    def circle(self, center: Point, radius: float, layer: str) -> None:
        """Draw a circle."""
        self.msp.add_circle(_neat(center), round(radius, 6), dxfattribs={"layer": layer})

    def rectangle(self, low: Point, high: Point, layer: str) -> None:
        """Draw an upright rectangle."""
        self.polyline([low, (high[0], low[1]), high, (low[0], high[1])], layer, close=True)

    def text(
        self,
        words: str,
        at: Point,
        layer: str = "S-ANNO-TEXT",
        *,
        size: float = 1.0,
        align: TextEntityAlignment = TextEntityAlignment.LEFT,
        rotation: float = 0.0,
    ) -> None:
        """Write one line of text, `size` times the usual height."""
        self.msp.add_text(
            words,
            height=self.height * size,
            rotation=rotation,
            dxfattribs={"layer": layer, "style": STYLE},
        ).set_placement(_neat(at), align=align)

    def insert(self, name: str, at: Point, layer: str, values: Mapping[str, str]) -> None:
        """Insert a block with its attributes; those without a value are left blank."""
        reference = self.msp.add_blockref(name, at, dxfattribs={"layer": layer})
        reference.add_auto_attribs(
            {str(a.dxf.tag): values.get(str(a.dxf.tag), "") for a in self._definitions(name)}
        )

    def _definitions(self, name: str) -> list[AttDef]:
        return list(self.doc.blocks.get(name).attdefs())


def new_sheet(
    version: str, *, insunits: int | None, imperial: bool, paper: float, height: float
) -> Sheet:
    """Start a drawing with the office's layers, linetypes and text style.

    Parameters
    ----------
    version : str
        DXF release, e.g. "R2000".
    insunits : int or None
        $INSUNITS; None for R12, whose header has no such variable.
    imperial : bool
        $MEASUREMENT.
    paper : float
        Length of one plotted millimetre [drawing units].
    height : float
        Usual text height [drawing units].
    """
    doc = Drawing.new(version)
    doc.header["$MEASUREMENT"] = 0 if imperial else 1
    doc.header["$LUNITS"] = 2  # decimal: architectural units would take one unit for an inch
    doc.header["$LTSCALE"] = paper
    doc.header["$PDMODE"] = 35  # a point shows as a circle with a cross
    doc.header["$PDSIZE"] = 2.4 * paper
    if insunits is not None:
        doc.units = insunits
    doc.styles.add(STYLE, font="txt" if version == "R12" else "arial.ttf")
    for name, (description, pattern) in LINETYPES.items():
        doc.linetypes.add(name, pattern, description=description)
    for name, (colour, linetype, lineweight) in (CABLE_LAYERS | SHEET_LAYERS).items():
        row = doc.layers.add(name, color=colour, linetype=linetype)
        if version != "R12":
            row.dxf.lineweight = lineweight
    return Sheet(doc=doc, msp=doc.modelspace(), paper=paper, height=height)


# --- annotation -----------------------------------------------------------------------------


def grid_line(sheet: Sheet, x: float, bottom: float, top: float, name: str) -> None:
    """Draw a grid line with its bubble on top."""
    radius = 5.0 * sheet.paper
    sheet.line((x, bottom), (x, top), "S-GRID")
    sheet.circle((x, top + radius), radius, "S-GRID")
    middle = TextEntityAlignment.MIDDLE_CENTER
    sheet.text(name, (x, top + radius), "S-GRID", size=1.4, align=middle)


def dimension_row(
    sheet: Sheet,
    stations: Sequence[float],
    y: float,
    labels: Sequence[str],
    reach: float,
    shift: float = 0.0,
) -> None:
    """Draw a chain of dimensions at height `y`; witness lines come down by `reach`.

    Labels stand over the middle, or `shift` to the right of it, clear of a grid line.
    """
    layer, tick = "S-ANNO-DIMS", 1.2 * sheet.paper
    sheet.line((stations[0] - tick, y), (stations[-1] + tick, y), layer)
    for x in stations:
        sheet.line((x, y + tick), (x, y - reach), layer)
        sheet.line((x - tick, y - tick), (x + tick, y + tick), layer)
    for left, right, label in zip(stations, stations[1:], labels, strict=False):
        at = ((left + right) / 2 + shift, y + 0.8 * sheet.paper)
        sheet.text(label, at, layer, align=TextEntityAlignment.BOTTOM_CENTER)


def level_mark(sheet: Sheet, at: Point, words: str, run: float) -> None:
    """Draw a level: a triangle on the line, a shelf of length `run`, the value on it."""
    x, y = at
    side = 2.5 * sheet.paper
    layer = "S-ANNO-DIMS"
    sheet.polyline([(x, y), (x - side / 2, y + side), (x + side / 2, y + side)], layer, close=True)
    sheet.line((x, y + side), (x + run, y + side), layer)
    sheet.text(words, (x + side, y + side + 0.8 * sheet.paper), layer)


def arrow(sheet: Sheet, tip: Point, length: float, words: str) -> None:
    """Draw a load: a shaft down to `tip`, two strokes for the head, the value over its tail."""
    x, y = tip
    barb = 1.6 * sheet.paper
    sheet.line((x, y + length), tip, "S-CABL-LOAD")
    sheet.line(tip, (x - barb / 2, y + 2 * barb), "S-CABL-LOAD")
    sheet.line(tip, (x + barb / 2, y + 2 * barb), "S-CABL-LOAD")
    at = (x, y + length + 1.5 * sheet.paper)
    sheet.text(words, at, "S-CABL-LOAD", align=TextEntityAlignment.BOTTOM_CENTER)


def leader_note(sheet: Sheet, tip: Point, knee: Point, words: str) -> None:
    """Draw a note with a line that leads to what it is about."""
    shelf = 3.0 * sheet.paper * (1 if knee[0] >= tip[0] else -1)
    end = (knee[0] + shelf, knee[1])
    sheet.line(tip, knee, "S-ANNO-TEXT")
    sheet.line(knee, end, "S-ANNO-TEXT")
    right = shelf > 0
    align = TextEntityAlignment.MIDDLE_LEFT if right else TextEntityAlignment.MIDDLE_RIGHT
    gap = sheet.paper if right else -sheet.paper
    sheet.text(words, (end[0] + gap, end[1]), align=align)


def view_title(sheet: Sheet, at: Point, title: str, scale: str, width: float) -> None:
    """Write the name of a view, a line under it, and its scale."""
    sheet.text(title, at, size=1.8)
    y = at[1] - 1.5 * sheet.paper
    sheet.line((at[0], y), (at[0] + width, y), "S-ANNO-TEXT")
    sheet.text(f"SCALE {scale}", (at[0], y - 2.0 * sheet.height))


def notes(sheet: Sheet, at: Point, lines: Sequence[str]) -> None:
    """Write numbered notes; a line that begins with a blank continues the one above."""
    sheet.text("NOTES", at, size=1.4)
    number = 0
    for k, words in enumerate(lines):
        y = at[1] - (2.6 + 1.8 * k) * sheet.height
        if not words.startswith(" "):
            number += 1
            sheet.text(f"{number}.", (at[0], y))
        sheet.text(words.strip(), (at[0] + 2.4 * sheet.height, y))


def footing(sheet: Sheet, outline: Sequence[Point]) -> None:
    """Draw concrete in section, hatched at 45 degrees."""
    sheet.polyline(outline, "S-FNDN", close=True)
    if not sheet.is_r12:
        pattern = sheet.msp.add_hatch(dxfattribs={"layer": "S-FNDN-PATT"})
        unit = 25.4 if sheet.doc.header["$MEASUREMENT"] == 0 else 1.0  # of the pattern, in mm
        pattern.set_pattern_fill("ANSI31", scale=unit * sheet.paper)
        pattern.paths.add_polyline_path(outline, is_closed=True)
        return
    # R12 has no HATCH: strokes across the upright box about the outline.
    low = (min(p[0] for p in outline), min(p[1] for p in outline))
    high = (max(p[0] for p in outline), max(p[1] for p in outline))
    step = 3.0 * sheet.paper
    for k in range(1, math.ceil((high[0] - low[0] + high[1] - low[1]) / step)):
        across = k * step
        start = (
            low[0] + min(across, high[0] - low[0]),
            low[1] + max(0.0, across - high[0] + low[0]),
        )
        end = (low[0] + max(0.0, across - high[1] + low[1]), low[1] + min(across, high[1] - low[1]))
        sheet.line(start, end, "S-FNDN-PATT")


def ground(sheet: Sheet, points: Sequence[Point]) -> None:
    """Draw the ground with short strokes of earth under it."""
    sheet.polyline(points, "C-TOPO")
    stroke, every = 2.0 * sheet.paper, 9.0 * sheet.paper
    for (x0, y0), (x1, y1) in itertools.pairwise(points):
        length = math.hypot(x1 - x0, y1 - y0)
        for k in range(int(length / every)):
            t = (k + 0.5) * every / length
            x, y = x0 + t * (x1 - x0), y0 + t * (y1 - y0)
            for j in range(3):
                start = (x + 0.5 * j * stroke, y + 0.5 * j * stroke * (y1 - y0) / (x1 - x0))
                sheet.line(start, (start[0] - stroke, start[1] - stroke), "S-FNDN-PATT")


def person(sheet: Sheet, at: Point, tall: float) -> None:
    """Draw a figure for scale."""
    x, y = at
    layer = "A-ELEV-BYND"
    sheet.circle((x, y + 0.92 * tall), 0.08 * tall, layer)
    sheet.line((x, y + 0.84 * tall), (x, y + 0.45 * tall), layer)
    sheet.line((x - 0.16 * tall, y + 0.6 * tall), (x + 0.16 * tall, y + 0.72 * tall), layer)
    sheet.line((x, y + 0.45 * tall), (x - 0.12 * tall, y), layer)
    sheet.line((x, y + 0.45 * tall), (x + 0.12 * tall, y), layer)


def border(
    sheet: Sheet,
    low: Point,
    size: Point,
    margins: tuple[float, float],
    rows: Sequence[Sequence[str]],
) -> None:
    """Draw the edge of the sheet, the border and a title block in its lower right corner.

    Parameters
    ----------
    low : Point
        Lower left corner of the trimmed sheet.
    size : Point
        Width and height of the trimmed sheet [drawing units].
    margins : tuple of float
        Margin on the left (filing), and on the other sides [plotted mm].
    rows : sequence of sequence of str
        Title block from the top; every row is a label and its value, or the title alone.
    """
    left, other = margins[0] * sheet.paper, margins[1] * sheet.paper
    high = (low[0] + size[0], low[1] + size[1])
    sheet.rectangle(low, high, "S-ANNO-DIMS")
    inner_high = (high[0] - other, high[1] - other)
    sheet.rectangle((low[0] + left, low[1] + other), inner_high, "S-ANNO-TTLB")
    width, row = 180.0 * sheet.paper, 3.2 * sheet.height
    x0, y0 = inner_high[0] - width, low[1] + other
    top = y0 + len(rows) * row
    sheet.rectangle((x0, y0), (inner_high[0], top), "S-ANNO-TTLB")
    for k, cells in enumerate(rows):
        y = top - (k + 1) * row
        if k:
            sheet.line((x0, y + row), (inner_high[0], y + row), "S-ANNO-TTLB")
        for j, words in enumerate(cells):
            x = x0 + 2.0 * sheet.paper + j * 40.0 * sheet.paper
            size_of = 1.4 if len(cells) == 1 else 1.0
            sheet.text(words, (x, y + 1.0 * sheet.height), "S-ANNO-TTLB", size=size_of)
