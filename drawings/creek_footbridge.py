"""A suspension footbridge over a creek, in metres, R2010: invented, like its valley.

Unlevel tower heads with elevations, eleven hangers to a cambered deck, dead and live load as
attributes of the load blocks, and a cable whose lowest point is given under dead load.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from drawings import cable_blocks
from drawings import drafting as kit

if TYPE_CHECKING:
    from ezdxf.document import Drawing

PAPER = 0.1  # one plotted mm in metres at 1:100
PANEL, PANELS = 4.0, 12
LEFT, RIGHT = (0.0, 9.6), (48.0, 8.4)
LEFT_ANCHOR, RIGHT_ANCHOR = (-12.6, 0.7), (60.2, 0.3)
DECK_END, CAMBER = 1.2, 0.48
DEAD = ("8.2 kN", "7.6 kN", "7.6 kN", "7.6 kN", "7.6 kN", "9.1 kN")  # to midspan; then mirrored
LIVE = "14.4 kN"


def deck(x: float) -> float:
    """Ordinate of the deck: a parabola of camber over the span."""
    span = PANEL * PANELS
    return DECK_END + 4.0 * CAMBER * x * (span - x) / span**2


def draw() -> Drawing:
    """Draw the sheet."""
    sheet = kit.new_sheet("R2010", insunits=6, imperial=False, paper=PAPER, height=0.25)
    cable_blocks.support_block(sheet)
    cable_blocks.anchor_block(sheet)
    cable_blocks.load_block(sheet, ("D", "L"))
    cable_blocks.data_block(sheet)
    _surroundings(sheet)
    _cable(sheet)
    _annotation(sheet)
    return sheet.doc


def _cable(sheet: kit.Sheet) -> None:
    """Draw what governs the cable: supports, masts, stays, anchors, deck, loads, data, frame."""
    for mark, head, anchor, label, elevation in (
        ("S1", LEFT, LEFT_ANCHOR, "A1", "209.600"),
        ("S2", RIGHT, RIGHT_ANCHOR, "A2", "208.400"),
    ):
        sheet.insert("CABLE-SUPPORT", head, "S-CABL-SUPP", {"MARK": mark, "EL": elevation})
        sheet.line(head, (head[0], 0.6), "S-CABL-MAST")
        sheet.line(head, anchor, "S-CABL-STAY")
        sheet.insert("CABLE-ANCHOR", anchor, "S-CABL-ANCH", {"MARK": label})
    sheet.line(LEFT, RIGHT, "S-CABL-STRG")
    stations = [k * PANEL for k in range(PANELS + 1)]
    sheet.polyline([(x, round(deck(x), 6)) for x in stations], "S-CABL-DECK")
    dead = DEAD + DEAD[-2::-1]
    for k, x in enumerate(stations[1:-1], start=1):
        values = {"MARK": f"P{k}", "D": dead[k - 1], "L": LIVE}
        sheet.insert("CABLE-LOAD", (x, round(deck(x), 6)), "S-CABL-LOAD", values)
    data = {"MARK": "C1", "LOW_POINT": "203.100", "UNDER": "D"}
    sheet.insert("CABLE-DATA", (50.0, 14.6), "S-CABL-DATA", data)
    sheet.rectangle((-14.0, -29.0), (8.0, -11.5), "S-CABL-FRAM")


def _surroundings(sheet: kit.Sheet) -> None:
    """Draw banks, creek, abutments and anchor blocks."""
    kit.ground(sheet, [(-16.0, 0.9), (-13.8, 0.8)])
    kit.ground(sheet, [(-11.4, 0.6), (-0.8, 0.6)])
    kit.ground(
        sheet,
        [
            (0.8, -0.3),
            (4.2, -1.0),
            (13.0, -3.8),
            (20.0, -5.4),
            (27.0, -5.6),
            (33.0, -4.6),
            (41.0, -1.9),
            (47.2, -0.3),
        ],
    )
    kit.ground(sheet, [(48.8, 0.4), (59.0, 0.2)])
    kit.ground(sheet, [(61.4, 0.2), (63.5, 0.3)])
    sheet.line((13.4, -3.9), (35.1, -3.9), "C-WATR")
    sheet.line((6.4, -1.7), (41.8, -1.7), "C-WATR")
    for x in (0.0, 48.0):
        outline = [(-0.8, 0.6), (0.8, 0.6), (0.8, -1.4), (1.5, -1.4), (1.5, -2.2), (-1.5, -2.2)]
        outline += [(-1.5, -1.4), (-0.8, -1.4)]
        kit.footing(sheet, [(x + dx, y) for dx, y in outline])
        sheet.line((x - 0.5, deck(0.0)), (x + 0.5, deck(0.0)), "S-FNDN")
    for x, y in (LEFT_ANCHOR, RIGHT_ANCHOR):
        box = [(x - 1.2, y - 1.1), (x + 1.2, y - 1.1), (x + 1.2, y - 3.3), (x - 1.2, y - 3.3)]
        kit.footing(sheet, box)
        sheet.line((x, y - 0.35), (x, y - 1.1), "S-FNDN")
    for x in (10.0, 26.6):
        kit.person(sheet, (x, deck(x)), 1.75)


def _annotation(sheet: kit.Sheet) -> None:
    """Write grids, dimensions, levels, notes and the title block."""
    stations = [k * PANEL for k in range(PANELS + 1)]
    for x, name in ((0.0, "A"), (48.0, "B")):
        kit.grid_line(sheet, x, -3.2, 15.6, name)
    kit.dimension_row(sheet, [0.0, 48.0], 13.6, ["48 000"], 1.0)
    kit.dimension_row(sheet, stations, 12.2, ["4000"] * PANELS, 0.6)
    kit.dimension_row(sheet, [LEFT_ANCHOR[0], 0.0], -4.6, ["12 600"], -0.6)
    kit.dimension_row(sheet, [48.0, RIGHT_ANCHOR[0]], -4.6, ["12 200"], -0.6)
    kit.level_mark(sheet, (14.5, -1.7), "HIGH WATER 198.300", 4.2)
    kit.level_mark(sheet, (28.0, -3.9), "MEAN WATER 196.100", 4.2)
    kit.level_mark(sheet, (-6.2, 0.6), "BANK 200.600", 3.2)
    kit.leader_note(sheet, (45.0, deck(45.0)), (43.2, 3.0), "TIMBER DECK, CAMBER 480")
    kit.leader_note(sheet, (-6.3, 5.15), (-8.6, 7.4), "BACKSTAY")
    kit.leader_note(sheet, (54.1, 4.35), (56.0, 7.0), "BACKSTAY")
    kit.view_title(sheet, (17.0, -8.2), "ELEVATION LOOKING UPSTREAM", "1:100", 15.0)
    kit.view_title(sheet, (-14.0, -30.4), "FORCE DIAGRAM, CABLE C1", "SEE DIAGRAM", 13.0)
    kit.notes(
        sheet,
        (46.0, -12.0),
        [
            "INVENTED PROJECT, DRAWN AS A DEMONSTRATION.",
            " NOT FOR CONSTRUCTION.",
            "LEVELS IN METRES TO SITE DATUM, DIMENSIONS IN MILLIMETRES.",
            "TWO CABLES, 1800 APART. LOADS ARE THOSE OF ONE CABLE:",
            " D DECK, RAILS AND HANGERS, L CROWD ON THE FULL WIDTH.",
            "CABLE FORMED UNDER D ALONE: LOWEST POINT AT 203.100.",
            "HANGERS ARE TO BE CUT TO THE CAMBERED DECK.",
        ],
    )
    kit.border(
        sheet,
        (-18.5, -36.2),
        (84.1, 59.4),
        (20.0, 10.0),
        [
            ["LINDLE CREEK FOOTBRIDGE"],
            ["CABLE ELEVATION AND FORCE DIAGRAM"],
            ["PROJECT", "INVENTED, FOR DEMONSTRATION ONLY"],
            ["PLACE", "LINDLE VALLEY PARK (FICTITIOUS)"],
            ["SCALE", "1:100   SHEET A1, 841 x 594"],
            ["DRAWN", "OWN EXAMPLE   CHECKED  -"],
            ["SHEET", "FB-02   PRELIMINARY"],
        ],
    )
