"""Two elevations of one forecourt canopy, in millimetres, R2018: invented, like its station.

The long cable hangs between two masts and carries loads drawn as leaders; the short one hangs
between two walls and carries circles. Values are multiline texts in several formats, supports
on the right are mirrored blocks.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.enums import MTextEntityAlignment, TextEntityAlignment

from drawings import cable_blocks
from drawings import drafting as kit

if TYPE_CHECKING:
    from ezdxf.document import Drawing

PAPER = 100.0  # one plotted mm at 1:100
LONG_PANEL, LONG_PANELS = 4000.0, 8
LONG_LEFT, LONG_RIGHT = (0.0, 9000.0), (32000.0, 8400.0)
LONG_ANCHORS = (-9000.0, 400.0), (40600.0, 400.0)
SHORT_PANEL, SHORT_PANELS, SHORT_X = 3000.0, 5, 50000.0
SHORT_Y, PURLIN = 7600.0, 4300.0
# As two draughtsmen format them: fonts, widths, fixed blanks, a mark on a line of its own.
LONG_LOADS = (
    r"{\fArial|b0|i0|c0|p34;12.5\~kN}",
    "14.25 kN",
    r"\A1;14.25 {\H0.8x;kN}",
    r"K4\P16.75 kN",
    r"\W0.9;14.25 kN",
    r"\C6;14.25 kN",
    r"{\fArial|b0|i0|c0|p34;12.5\~kN}",
)
SHORT_LOADS = (
    r"D=6.4 kN\PL=5.5 kN",
    r"D=7.2 kN\PL=6 kN",
    r"{\fArial;D=7.2 kN}\P{\fArial;L=6 kN}",
    r"D = 6.4 kN\PL = 5.5 kN",
)


def draw() -> Drawing:
    """Draw the sheet."""
    sheet = kit.new_sheet("R2018", insunits=4, imperial=False, paper=PAPER, height=250.0)
    cable_blocks.support_block(sheet)
    cable_blocks.anchor_block(sheet)
    cable_blocks.data_block(sheet)
    _long_cable(sheet)
    _short_cable(sheet)
    _surroundings(sheet)
    _annotation(sheet)
    return sheet.doc


def _mirrored(sheet: kit.Sheet, at: kit.Point, values: dict[str, str]) -> None:
    """Insert the support block mirrored; its texts stay readable, as CAD programs keep them."""
    layer, name = "S-CABL-SUPP", "CABLE-SUPPORT"
    reference = sheet.msp.add_blockref(name, at, dxfattribs={"layer": layer, "xscale": -1.0})
    for definition in sheet.doc.blocks.get(name).attdefs():
        tag, place = str(definition.dxf.tag), definition.dxf.insert
        attribute = reference.add_attrib(
            tag,
            values.get(tag, ""),
            dxfattribs={
                "layer": layer,
                "height": definition.dxf.height,
                "style": kit.STYLE,
                "flags": definition.dxf.flags,
            },
        )
        mirrored = (at[0] - place.x, at[1] + place.y)
        attribute.set_placement(mirrored, align=TextEntityAlignment.RIGHT)


def _value(sheet: kit.Sheet, content: str, at: kit.Point, align: MTextEntityAlignment) -> None:
    """Write a load as multiline text."""
    text = sheet.msp.add_mtext(
        content,
        dxfattribs={"layer": "S-CABL-LOAD", "style": kit.STYLE, "char_height": sheet.height},
    )
    text.set_location(at, attachment_point=align)


def _long_cable(sheet: kit.Sheet) -> None:
    """Draw the cable between the masts, its loads as leaders above it."""
    left = {"MARK": "S1", "EL": "EL 109.000 m"}
    sheet.insert("CABLE-SUPPORT", LONG_LEFT, "S-CABL-SUPP", left)
    _mirrored(sheet, LONG_RIGHT, {"MARK": "S2", "EL": "EL 108.400 m"})
    sheet.line(LONG_LEFT, LONG_RIGHT, "S-CABL-STRG")
    for head, anchor, mark in zip((LONG_LEFT, LONG_RIGHT), LONG_ANCHORS, ("A1", "A2"), strict=True):
        sheet.line(head, (head[0], 400.0), "S-CABL-MAST")
        sheet.line(head, anchor, "S-CABL-STAY")
        sheet.insert("CABLE-ANCHOR", anchor, "S-CABL-ANCH", {"MARK": mark})
    for k, content in enumerate(LONG_LOADS, start=1):
        x = k * LONG_PANEL
        sheet.msp.add_leader(
            [(x, 10400.0), (x, 12100.0)],
            override={"dimasz": 3.5, "dimscale": PAPER, "dimclrd": 256},  # by layer
            dxfattribs={"layer": "S-CABL-LOAD"},
        )
        _value(sheet, content, (x, 12300.0), MTextEntityAlignment.BOTTOM_CENTER)
    data = {"MARK": "C1", "MAX_TENSION": "180 kN"}
    sheet.insert("CABLE-DATA", (33800.0, 16600.0), "S-CABL-DATA", data)
    sheet.rectangle((-9500.0, -27500.0), (9500.0, -8500.0), "S-CABL-FRAM")


def _short_cable(sheet: kit.Sheet) -> None:
    """Draw the cable between the walls, its loads as circles at the purlins below."""
    ends = (SHORT_X, SHORT_Y), (SHORT_X + SHORT_PANEL * SHORT_PANELS, SHORT_Y)
    sheet.insert("CABLE-SUPPORT", ends[0], "S-CABL-SUPP", {"MARK": "S3", "EL": "EL 107.600 m"})
    _mirrored(sheet, ends[1], {"MARK": "S4", "EL": "EL 107.600 m"})
    sheet.line(*ends, "S-CABL-STRG")
    for k, content in enumerate(SHORT_LOADS, start=1):
        at = (SHORT_X + k * SHORT_PANEL, PURLIN)
        sheet.circle(at, 120.0, "S-CABL-LOAD")
        below = (at[0], at[1] - 400.0)
        _value(sheet, content, below, MTextEntityAlignment.TOP_CENTER)
    data = {"MARK": "C2", "SAG": "1500", "UNDER": "D"}
    sheet.insert("CABLE-DATA", (SHORT_X + 4800.0, 15600.0), "S-CABL-DATA", data)
    sheet.rectangle((SHORT_X + 5000.0, -18600.0), (SHORT_X + 18000.0, -8400.0), "S-CABL-FRAM")


def _surroundings(sheet: kit.Sheet) -> None:
    """Draw forecourt, foundations, walls and what stands on them."""
    kit.ground(sheet, [(-12500.0, 0.0), (44000.0, 0.0)])
    kit.ground(sheet, [(SHORT_X + 400.0, 0.0), (SHORT_X + 14600.0, 0.0)])
    for x in (LONG_LEFT[0], LONG_RIGHT[0]):
        outline = [(-500.0, 400.0), (500.0, 400.0), (500.0, -900.0), (1300.0, -900.0)]
        outline += [(1300.0, -1700.0), (-1300.0, -1700.0), (-1300.0, -900.0), (-500.0, -900.0)]
        kit.footing(sheet, [(x + dx, y) for dx, y in outline])
    for x, _ in LONG_ANCHORS:
        box = [(-1500.0, 50.0), (1500.0, 50.0), (1500.0, -2400.0), (-1500.0, -2400.0)]
        kit.footing(sheet, [(x + dx, y) for dx, y in box])
    right = SHORT_X + SHORT_PANEL * SHORT_PANELS
    for x in (SHORT_X, right):
        low, high = (x - 400.0, -1200.0), (x + 400.0, SHORT_Y - 250.0)
        kit.footing(sheet, [low, (high[0], low[1]), high, (low[0], high[1])])
    sheet.line((SHORT_X, PURLIN), (right, PURLIN), "A-ELEV-BYND")
    for x in (9000.0, 22500.0, SHORT_X + 6100.0):
        kit.person(sheet, (x, 0.0), 1750.0)


def _annotation(sheet: kit.Sheet) -> None:
    """Write grids, dimensions, levels, notes and the title block."""
    long_stations = [k * LONG_PANEL for k in range(LONG_PANELS + 1)]
    short_stations = [SHORT_X + k * SHORT_PANEL for k in range(SHORT_PANELS + 1)]
    for x, name in ((0.0, "A"), (32000.0, "H")):
        kit.grid_line(sheet, x, -2600.0, 17400.0, name)
    for x, name in ((SHORT_X, "1"), (short_stations[-1], "2")):
        kit.grid_line(sheet, x, -2600.0, 12000.0, name)
    kit.dimension_row(sheet, [0.0, 32000.0], 15800.0, ["32 000"], 600.0)
    kit.dimension_row(sheet, long_stations, 14400.0, ["4000"] * LONG_PANELS, 600.0)
    kit.dimension_row(sheet, [short_stations[0], short_stations[-1]], 10900.0, ["15 000"], 600.0)
    kit.dimension_row(sheet, short_stations, 2400.0, ["3000"] * SHORT_PANELS, 600.0)
    kit.dimension_row(sheet, [LONG_ANCHORS[0][0], 0.0], -3400.0, ["9000"], -600.0)
    kit.dimension_row(sheet, [32000.0, LONG_ANCHORS[1][0]], -3400.0, ["8600"], -600.0)
    kit.level_mark(sheet, (15000.0, 0.0), "FORECOURT 100.000", 5000.0)
    kit.leader_note(sheet, (-4500.0, 4700.0), (-6800.0, 7000.0), "BACKSTAY")
    kit.leader_note(sheet, (36300.0, 4400.0), (38600.0, 6700.0), "BACKSTAY")
    kit.view_title(sheet, (11000.0, -6000.0), "LONG ELEVATION, CABLE C1", "1:100", 15000.0)
    title = (SHORT_X + 1500.0, -4600.0)
    kit.view_title(sheet, title, "SHORT ELEVATION, CABLE C2", "1:100", 12500.0)
    title = (-9500.0, -29000.0)
    kit.view_title(sheet, title, "FORCE DIAGRAM, CABLE C1", "SEE DIAGRAM", 13000.0)
    title = (SHORT_X + 5000.0, -20000.0)
    kit.view_title(sheet, title, "FORCE DIAGRAM, CABLE C2", "SEE DIAGRAM", 13000.0)
    kit.notes(
        sheet,
        (51000.0, -23600.0),
        [
            "INVENTED PROJECT, DRAWN AS A DEMONSTRATION.",
            " NOT FOR CONSTRUCTION.",
            "DRAWN IN MILLIMETRES, LEVELS IN METRES.",
            "C1: ROOF AND SNOW OF ONE BAY AT EACH PURLIN.",
            "C2: D ROOF AND HANGERS, L SNOW. FORMED UNDER D.",
        ],
    )
    kit.border(
        sheet,
        (-14500.0, -38500.0),
        (84100.0, 59400.0),
        (20.0, 10.0),
        [
            ["HOLLIN STATION FORECOURT"],
            ["CANOPY, CABLES C1 AND C2"],
            ["PROJECT", "INVENTED, FOR DEMONSTRATION ONLY"],
            ["PLACE", "HOLLIN JUNCTION (FICTITIOUS)"],
            ["SCALE", "1:100   SHEET A1, 841 x 594"],
            ["DRAWN", "OWN EXAMPLE   CHECKED  -"],
            ["SHEET", "CN-11   PRELIMINARY"],
        ],
    )
