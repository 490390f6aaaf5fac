"""A suspension footbridge with its framing plan, in metres, R2013: invented, like its weir.

The hangers get their loads from the plan below the elevation: half a deck that spans one way
between cross beams, with an opening, a dead and a live pressure, and a hanger point at the end
of each cross beam.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.enums import TextEntityAlignment

from drawings import cable_blocks
from drawings import drafting as kit

if TYPE_CHECKING:
    from ezdxf.document import Drawing

PAPER = 0.1  # one plotted mm in metres at 1:100
PANEL, PANELS = 4.0, 10
LEFT, RIGHT = (0.0, 9.0), (40.0, 8.6)
LEFT_ANCHOR, RIGHT_ANCHOR = (-11.2, 0.6), (50.8, 0.4)
DECK = 1.4
AXIS, HALF_WIDTH = -15.8, 2.4  # of the deck in plan
OPENING = ((22.4, -15.0), (23.4, -14.2))  # lower left and upper right corner
PRESSURES = "D=1.25 kPa L=5 kPa"
PLAN_LAYERS = {
    "S-CABL-AREA": (94, 35),
    "S-CABL-PLAN": (1, 35),
    "S-BEAM": (7, 35),
}


def draw() -> Drawing:
    """Draw the sheet."""
    sheet = kit.new_sheet("R2013", insunits=6, imperial=False, paper=PAPER, height=0.25)
    for name, (colour, lineweight) in PLAN_LAYERS.items():
        sheet.doc.layers.add(name, color=colour, linetype="Continuous", lineweight=lineweight)
    cable_blocks.support_block(sheet)
    cable_blocks.anchor_block(sheet)
    cable_blocks.load_block(sheet, ())  # marks alone: the values come from the plan
    cable_blocks.data_block(sheet)
    _surroundings(sheet)
    _cable(sheet)
    _plan(sheet)
    _annotation(sheet)
    return sheet.doc


def stations() -> list[float]:
    """Places of the cross beams, abutments at both ends."""
    return [k * PANEL for k in range(PANELS + 1)]


def _cable(sheet: kit.Sheet) -> None:
    """Draw what governs the cable; its load points have marks and no values."""
    for mark, head, anchor, label, elevation in (
        ("S1", LEFT, LEFT_ANCHOR, "A1", "109.000"),
        ("S2", RIGHT, RIGHT_ANCHOR, "A2", "108.600"),
    ):
        sheet.insert("CABLE-SUPPORT", head, "S-CABL-SUPP", {"MARK": mark, "EL": elevation})
        sheet.line(head, (head[0], 0.6), "S-CABL-MAST")
        sheet.line(head, anchor, "S-CABL-STAY")
        sheet.insert("CABLE-ANCHOR", anchor, "S-CABL-ANCH", {"MARK": label})
    sheet.line(LEFT, RIGHT, "S-CABL-STRG")
    sheet.polyline([(0.0, DECK), (PANEL * PANELS, DECK)], "S-CABL-DECK")
    for k, x in enumerate(stations()[1:-1], start=1):
        sheet.insert("CABLE-LOAD", (x, DECK), "S-CABL-LOAD", {"MARK": f"P{k}"})
    data = {"MARK": "C1", "SAG": "4.2 m", "UNDER": "D"}
    sheet.insert("CABLE-DATA", (42.0, 13.6), "S-CABL-DATA", data)
    sheet.rectangle((-15.5, -35.5), (6.5, -20.5), "S-CABL-FRAM")


def _plan(sheet: kit.Sheet) -> None:
    """Draw half the deck in plan: area, opening, direction, cross beams, hanger points."""
    edge = AXIS + HALF_WIDTH
    first, last = PANEL / 2, PANEL * (PANELS - 0.5)  # beyond, the abutments carry
    sheet.rectangle((first, AXIS), (last, edge), "S-CABL-AREA")
    sheet.text(PRESSURES, (2.3, AXIS + 0.15), "S-CABL-AREA")
    low, high = OPENING
    sheet.rectangle(low, high, "S-CABL-AREA")
    sheet.line(low, high, "S-CABL-AREA")
    sheet.line((low[0], high[1]), (high[0], low[1]), "S-CABL-AREA")
    start, end = (28.6, AXIS + 0.3), (31.4, AXIS + 0.3)
    sheet.line(start, end, "S-CABL-AREA")
    for tip, sense in ((start, 1.0), (end, -1.0)):
        for side in (-0.1, 0.1):
            sheet.line(tip, (tip[0] + 0.35 * sense, tip[1] + side), "S-CABL-AREA")
    for k, x in enumerate(stations()):
        for side in (-0.08, 0.08):
            sheet.line((x + side, AXIS - 0.4), (x + side, edge + 0.15), "S-BEAM")
        if 0 < k < PANELS:
            sheet.msp.add_point((x, edge), dxfattribs={"layer": "S-CABL-PLAN"})
            sheet.text(f"P{k}", (x + 0.35, edge + 0.3), "S-CABL-PLAN")
    sheet.line((0.0, edge), (PANEL * PANELS, edge), "S-BEAM")
    sheet.line((-1.5, AXIS), (PANEL * PANELS + 1.5, AXIS), "S-GRID")
    at = (PANEL * PANELS + 1.8, AXIS)
    sheet.text("CENTRE LINE OF DECK", at, align=TextEntityAlignment.MIDDLE_LEFT)


def _surroundings(sheet: kit.Sheet) -> None:
    """Draw banks, weir pool, abutments and anchor blocks."""
    kit.ground(sheet, [(-15.0, 0.7), (-12.4, 0.6)])
    kit.ground(sheet, [(-10.0, 0.5), (-0.8, 0.6)])
    kit.ground(
        sheet,
        [
            (0.8, -0.4),
            (5.0, -1.6),
            (12.0, -3.6),
            (18.0, -4.4),
            (24.0, -4.6),
            (30.0, -3.9),
            (36.0, -1.8),
            (39.2, -0.4),
        ],
    )
    kit.ground(sheet, [(40.8, 0.5), (49.6, 0.4)])
    kit.ground(sheet, [(52.0, 0.4), (55.0, 0.5)])
    sheet.line((7.8, -2.4), (34.1, -2.4), "C-WATR")
    for x in (0.0, 40.0):
        outline = [(-0.8, 0.6), (0.8, 0.6), (0.8, -1.4), (1.5, -1.4), (1.5, -2.2), (-1.5, -2.2)]
        outline += [(-1.5, -1.4), (-0.8, -1.4)]
        kit.footing(sheet, [(x + dx, y) for dx, y in outline])
        sheet.line((x - 0.5, DECK), (x + 0.5, DECK), "S-FNDN")
    for x, y in (LEFT_ANCHOR, RIGHT_ANCHOR):
        box = [(x - 1.2, y - 1.1), (x + 1.2, y - 1.1), (x + 1.2, y - 3.1), (x - 1.2, y - 3.1)]
        kit.footing(sheet, box)
        sheet.line((x, y - 0.35), (x, y - 1.1), "S-FNDN")
    for x in (9.5, 25.8):
        kit.person(sheet, (x, DECK), 1.75)


def _annotation(sheet: kit.Sheet) -> None:
    """Write grids, dimensions, levels, notes and the title block."""
    every = stations()
    for x, name in ((every[0], "A"), (every[-1], "B")):
        kit.grid_line(sheet, x, -3.0, 14.8, name)
    kit.dimension_row(sheet, [every[0], every[-1]], 12.8, ["40 000"], 1.0)
    kit.dimension_row(sheet, every, 11.4, ["4000"] * PANELS, 0.6)
    kit.dimension_row(sheet, [LEFT_ANCHOR[0], 0.0], -4.0, ["11 200"], -0.6)
    kit.dimension_row(sheet, [40.0, RIGHT_ANCHOR[0]], -4.0, ["10 800"], -0.6)
    kit.level_mark(sheet, (14.0, -2.4), "WEIR POOL 97.600", 4.0)
    kit.leader_note(sheet, (37.0, DECK), (35.6, 3.2), "TIMBER DECK ON CROSS BEAMS")
    kit.dimension_row(sheet, every, AXIS + 4.4, ["4000"] * PANELS, 0.6)
    kit.leader_note(sheet, (23.1, -14.7), (24.6, AXIS - 1.0), "OPENING 1000 x 800, BOTH HALVES")
    kit.leader_note(sheet, (31.0, AXIS + 0.3), (33.0, AXIS - 1.0), "DECK SPANS ONE WAY")
    kit.view_title(sheet, (12.5, -7.4), "ELEVATION LOOKING UPSTREAM", "1:100", 15.0)
    kit.view_title(sheet, (2.0, -18.4), "FRAMING PLAN, UPSTREAM HALF", "1:100", 15.0)
    kit.view_title(sheet, (-15.5, -36.7), "FORCE DIAGRAM, CABLE C1", "SEE DIAGRAM", 13.0)
    kit.notes(
        sheet,
        (45.0, -7.5),
        [
            "INVENTED PROJECT, DRAWN AS A DEMONSTRATION.",
            " NOT FOR CONSTRUCTION.",
            "LEVELS IN METRES, DIMENSIONS IN MILLIMETRES.",
            "TWO CABLES ALIKE; ONE CARRIES HALF THE DECK.",
            "LOADS OF THE HANGERS ARE THOSE OF THE PLAN:",
            " D DECK AND RAILS, L CROWD.",
            "BEYOND THE AREA DRAWN THE ABUTMENTS CARRY.",
            "CABLE FORMED UNDER D ALONE: SAG 4200.",
        ],
    )
    kit.border(
        sheet,
        (-18.5, -41.0),
        (84.1, 59.4),
        (20.0, 10.0),
        [
            ["SALLOW WEIR FOOTBRIDGE"],
            ["ELEVATION, FRAMING PLAN, FORCE DIAGRAM"],
            ["PROJECT", "INVENTED, FOR DEMONSTRATION ONLY"],
            ["PLACE", "SALLOW MILL MEADOWS (FICTITIOUS)"],
            ["SCALE", "1:100   SHEET A1, 841 x 594"],
            ["DRAWN", "OWN EXAMPLE   CHECKED  -"],
            ["SHEET", "SW-04   PRELIMINARY"],
        ],
    )
