"""A covered footbridge over a weir, in metres, R2010: invented, like its river.

Its cables have weight and stiffness, and so have the stays, so that heads of masts give. Later
a water main is hung under the left half of the deck, on the downstream cable alone: the loads
after that are in `loads_weir_footbridge.csv`.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from drawings import cable_blocks
from drawings import drafting as kit

if TYPE_CHECKING:
    from ezdxf.document import Drawing

PAPER = 0.1  # one plotted mm in metres at 1:100
PANEL, PANELS = 5.0, 8
SPAN = PANEL * PANELS
LEFT, RIGHT = (0.0, 10.4), (SPAN, 9.8)
LEFT_ANCHOR, RIGHT_ANCHOR = (-11.6, 0.5), (51.2, 0.3)
DECK_END, CAMBER = 1.2, 0.2
ROOF = 4.6  # ridge of the roof over the deck, which the cable stays clear above
DEAD = ("12.4 kN", "12 kN", "12 kN", "13.5 kN", "12 kN", "12 kN", "12.4 kN")
LIVE, SNOW = "21 kN", "5.4 kN"
COMBINATIONS = ("D + L", "1.2D + 1.6L + 0.5S", "1.2D + 1.6S", "D + L [left half]")
DATA = ("MARK", "SAG", "UNDER", "WEIGHT", "EA", "CAPACITY")


def deck(x: float) -> float:
    """Ordinate of the deck: a parabola of camber over the span."""
    return DECK_END + 4.0 * CAMBER * x * (SPAN - x) / SPAN**2


def draw() -> Drawing:
    """Draw the sheet."""
    sheet = kit.new_sheet("R2010", insunits=6, imperial=False, paper=PAPER, height=0.25)
    sheet.doc.layers.add("S-CABL-CLRN", color=10, linetype="DASHED", lineweight=25)
    cable_blocks.support_block(sheet, is_el_shown=False)
    cable_blocks.anchor_block(sheet)
    cable_blocks.load_block(sheet, ("D", "L", "S"))
    cable_blocks.data_block(sheet, DATA)
    _surroundings(sheet)
    _cable(sheet)
    _annotation(sheet)
    return sheet.doc


def _cable(sheet: kit.Sheet) -> None:
    """Draw what governs the cable."""
    for mark, head, anchor, label, elevation in (
        ("S1", LEFT, LEFT_ANCHOR, "A1", "310.400"),
        ("S2", RIGHT, RIGHT_ANCHOR, "A2", "309.800"),
    ):
        sheet.insert("CABLE-SUPPORT", head, "S-CABL-SUPP", {"MARK": mark, "EL": elevation})
        sheet.line(head, (head[0], 0.6), "S-CABL-MAST")
        sheet.line(head, anchor, "S-CABL-STAY")
        values = {"MARK": label, "EA": "150000 kN", "WEIGHT": "2000 kN", "MU": "0.5"}
        sheet.insert("CABLE-ANCHOR", anchor, "S-CABL-ANCH", values)
    sheet.line(LEFT, RIGHT, "S-CABL-STRG")
    stations = [k * PANEL for k in range(PANELS + 1)]
    sheet.polyline([(x, round(deck(x), 6)) for x in stations], "S-CABL-DECK")
    sheet.polyline([(0.8, ROOF), (SPAN - 0.8, ROOF)], "S-CABL-CLRN")
    for k, x in enumerate(stations[1:-1], start=1):
        values = {"MARK": f"P{k}", "D": DEAD[k - 1], "L": LIVE, "S": SNOW}
        sheet.insert("CABLE-LOAD", (x, round(deck(x), 6)), "S-CABL-LOAD", values)
    data = {"MARK": "C1", "SAG": "4.4 m", "UNDER": "D", "WEIGHT": "0.071 kN/m"}
    data |= {"EA": "128000 kN", "CAPACITY": "620 kN"}
    sheet.insert("CABLE-DATA", (44.6, 16.2), "S-CABL-DATA", data)
    sheet.rectangle((-17.0, -27.0), (-1.0, -10.5), "S-CABL-FRAM")


def _surroundings(sheet: kit.Sheet) -> None:
    """Draw banks, weir, abutments, anchor blocks and the roof of the walkway."""
    kit.ground(sheet, [(-16.0, 0.6), (-12.8, 0.6)])
    kit.ground(sheet, [(-10.4, 0.5), (-0.8, 0.5)])
    kit.ground(
        sheet,
        [
            (0.8, -0.6),
            (3.6, -2.2),
            (8.0, -3.4),
            (19.0, -3.9),
            (31.0, -3.7),
            (36.4, -2.4),
            (39.2, -0.6),
        ],
    )
    kit.ground(sheet, [(40.8, 0.4), (50.0, 0.3)])
    kit.ground(sheet, [(52.4, 0.3), (55.0, 0.3)])
    sheet.line((2.9, -1.8), (37.3, -1.8), "C-WATR")
    for x in (0.0, SPAN):
        outline = [(-0.8, 0.6), (0.8, 0.6), (0.8, -1.6), (1.5, -1.6), (1.5, -2.4), (-1.5, -2.4)]
        outline += [(-1.5, -1.6), (-0.8, -1.6)]
        kit.footing(sheet, [(x + dx, y) for dx, y in outline])
        sheet.line((x - 0.5, DECK_END), (x + 0.5, DECK_END), "S-FNDN")
    for x, y in (LEFT_ANCHOR, RIGHT_ANCHOR):
        box = [(x - 1.2, y - 1.1), (x + 1.2, y - 1.1), (x + 1.2, y - 3.3), (x - 1.2, y - 3.3)]
        kit.footing(sheet, box)
        sheet.line((x, y - 0.35), (x, y - 1.1), "S-FNDN")
    eaves = ROOF - 0.5
    sheet.line((0.8, eaves), (SPAN - 0.8, eaves), "A-ELEV-BYND")
    for x in (12.2, 27.6):
        kit.person(sheet, (x, deck(x)), 1.75)


def _annotation(sheet: kit.Sheet) -> None:
    """Write grids, dimensions, levels, notes and the title block."""
    stations = [k * PANEL for k in range(PANELS + 1)]
    for x, name in ((0.0, "1"), (SPAN, "2")):
        kit.grid_line(sheet, x, -3.4, 16.2, name)
    kit.dimension_row(sheet, [0.0, SPAN], 15.0, ["40 000"], 1.0)
    kit.dimension_row(sheet, stations, 13.7, ["5000"] * PANELS, 0.6)
    kit.dimension_row(sheet, [LEFT_ANCHOR[0], 0.0], -4.4, ["11 600"], -0.6)
    kit.dimension_row(sheet, [SPAN, RIGHT_ANCHOR[0]], -4.4, ["11 200"], -0.6)
    kit.level_mark(sheet, (16.2, -1.8), "WEIR POOL 298.200", 4.2)
    kit.level_mark(sheet, (-6.4, 0.5), "BANK 300.500", 3.2)
    kit.leader_note(sheet, (1.2, ROOF), (1.3, 3.5), "RIDGE OF ROOF")
    kit.leader_note(sheet, (37.6, deck(37.6)), (41.6, 2.1), "COVERED DECK")
    kit.view_title(sheet, (13.0, -6.2), "ELEVATION, DOWNSTREAM CABLE", "1:100", 15.0)
    kit.view_title(sheet, (-17.0, -28.6), "FORCE DIAGRAM, CABLE C1", "SEE DIAGRAM", 13.0)
    kit.notes(
        sheet,
        (-18.0, 16.4),
        [
            "INVENTED PROJECT, A DEMONSTRATION.",
            " NOT FOR CONSTRUCTION.",
            "LEVELS IN METRES TO SITE DATUM.",
            "LOADS ARE THOSE OF ONE OF TWO CABLES:",
            " D DECK, ROOF, HANGERS; L CROWD;",
            " S SNOW ON THE ROOF.",
            "CABLE FORMED UNDER D AT A SAG OF 4.400,",
            " CABLE STAYS CLEAR ABOVE THE RIDGE.",
        ],
    )
    kit.border(
        sheet,
        (-21.0, -40.6),
        (84.1, 59.4),
        (20.0, 10.0),
        [
            ["HERON WEIR COVERED FOOTBRIDGE"],
            ["DOWNSTREAM CABLE, ELEVATION"],
            ["PROJECT", "INVENTED, FOR DEMONSTRATION ONLY"],
            ["PLACE", "RIVER ELLET AT HERON WEIR (FICTITIOUS)"],
            ["SCALE", "1:100   SHEET A1, 841 x 594"],
            ["DRAWN", "OWN EXAMPLE   CHECKED  -"],
            ["SHEET", "CF-04   PRELIMINARY"],
        ],
    )
