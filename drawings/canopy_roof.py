"""A cable roof over a market street, in feet, R2000: invented, like its town.

Two masts of unequal height, a backstay at each end, nine purlins drawn as load arrows, and
a cable whose largest tension is given.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from drawings import cable_blocks
from drawings import drafting as kit

if TYPE_CHECKING:
    from ezdxf.document import Drawing

PAPER = 96.0 / 304.8  # one plotted mm in feet at 1/8" = 1'-0"
PANEL, PANELS = 14.0, 10
LEFT, RIGHT = (0.0, 44.0), (140.0, 40.0)
LEFT_ANCHOR, RIGHT_ANCHOR = (-58.0, 0.0), (194.0, 0.0)
LOADS = ("14 kip", "16 kip", "18 kip", "18 kip", "21 kip", "18 kip", "18 kip", "16 kip", "14 kip")


def draw() -> Drawing:
    """Draw the sheet."""
    sheet = kit.new_sheet("R2000", insunits=2, imperial=True, paper=PAPER, height=0.75)
    cable_blocks.support_block(sheet)
    cable_blocks.anchor_block(sheet)
    cable_blocks.data_block(sheet)
    _surroundings(sheet)
    _cable(sheet)
    _annotation(sheet)
    return sheet.doc


def _cable(sheet: kit.Sheet) -> None:
    """Draw what governs the cable: supports, masts, stays, anchors, loads, data, frame."""
    for mark, head, foot, anchor, label, elevation in (
        ("S1", LEFT, (0.0, 1.5), LEFT_ANCHOR, "A1", "EL 144'-0\""),
        ("S2", RIGHT, (140.0, 1.5), RIGHT_ANCHOR, "A2", "EL 140'-0\""),
    ):
        sheet.insert("CABLE-SUPPORT", head, "S-CABL-SUPP", {"MARK": mark, "EL": elevation})
        sheet.line(head, foot, "S-CABL-MAST")
        sheet.line(head, anchor, "S-CABL-STAY")
        sheet.insert("CABLE-ANCHOR", anchor, "S-CABL-ANCH", {"MARK": label})
    for k, words in enumerate(LOADS, start=1):
        kit.arrow(sheet, (k * PANEL, 49.0), 5.0, words)
    sheet.insert(
        "CABLE-DATA", (147.0, 62.0), "S-CABL-DATA", {"MARK": "C1", "MAX_TENSION": "240 kip"}
    )
    sheet.rectangle((-60.0, -88.0), (20.0, -28.0), "S-CABL-FRAM")


def _surroundings(sheet: kit.Sheet) -> None:
    """Draw ground, foundations, slab and the hall beyond."""
    kit.ground(sheet, [(-68.0, 0.0), (-9.0, 0.0)])
    kit.ground(sheet, [(149.0, 0.0), (204.0, 0.0)])
    sheet.line((-9.0, 0.0), (149.0, 0.0), "S-FNDN")
    sheet.line((4.0, -1.0), (136.0, -1.0), "S-FNDN")
    for x in (0.0, 140.0):
        outline = [(-2.0, 1.5), (-2.0, -3.0), (-5.0, -3.0), (-5.0, -5.5), (5.0, -5.5)]
        outline += [(5.0, -3.0), (2.0, -3.0), (2.0, 1.5)]
        kit.footing(sheet, [(x + dx, y) for dx, y in outline])
    for x, y in (LEFT_ANCHOR, RIGHT_ANCHOR):
        box = [(x - 7.0, y - 4.5), (x + 7.0, y - 4.5), (x + 7.0, y - 13.0), (x - 7.0, y - 13.0)]
        kit.footing(sheet, box)
        sheet.line((x, y - 1.05), (x, y - 4.5), "S-FNDN")
    for k in range(5):
        x = 14.0 + 24.0 * k
        sheet.polyline(
            [(x, 0.0), (x, 11.0), (x + 8.0, 13.5), (x + 16.0, 11.0), (x + 16.0, 0.0)], "A-ELEV-BYND"
        )
        sheet.line((x, 3.5), (x + 16.0, 3.5), "A-ELEV-BYND")
    for x in (34.0, 82.0, 105.0):
        kit.person(sheet, (x, 0.0), 5.8)


def _annotation(sheet: kit.Sheet) -> None:
    """Write grids, dimensions, levels, notes and the title block."""
    stations = [k * PANEL for k in range(PANELS + 1)]
    for k, x in enumerate(stations):
        kit.grid_line(sheet, x, 59.0 if 0 < k < PANELS else -8.0, 72.0, str(k + 1))
    kit.dimension_row(sheet, stations, 61.0, ["14'-0\""] * PANELS, 2.0)
    kit.dimension_row(sheet, [stations[0], stations[-1]], 66.0, ["140'-0\""], 2.0, PANEL / 2)
    ends = [LEFT_ANCHOR[0], LEFT[0]], [RIGHT[0], RIGHT_ANCHOR[0]]
    kit.dimension_row(sheet, ends[0], -17.0, ["58'-0\""], -2.0)
    kit.dimension_row(sheet, ends[1], -17.0, ["54'-0\""], -2.0)
    kit.level_mark(sheet, (63.0, 0.0), "MARKET FLOOR EL 100'-0\"", 17.0)
    kit.leader_note(sheet, (-30.0, 21.2), (-36.0, 32.0), "BACKSTAY, GRID 1")
    kit.leader_note(sheet, (168.0, 19.3), (174.0, 30.0), "BACKSTAY, GRID 11")
    kit.leader_note(sheet, (0.0, 16.0), (-9.0, 12.0), "MAST, TYP.")
    kit.leader_note(sheet, (38.0, 11.0), (40.0, 19.0), "STALLS BEYOND")
    sheet.text("LOAD OF ONE CABLE AT EACH PURLIN, ROOF AND SNOW", (3.0, 57.0))
    kit.view_title(sheet, (40.0, -18.0), "CABLE ELEVATION, GRID C", '1/8" = 1\'-0"', 50.0)
    kit.view_title(sheet, (-60.0, -92.0), "FORCE DIAGRAM, CABLE C1", "SEE DIAGRAM", 50.0)
    kit.notes(
        sheet,
        (150.0, -30.0),
        [
            "INVENTED PROJECT, DRAWN AS A DEMONSTRATION.",
            " NOT FOR CONSTRUCTION.",
            "ELEVATIONS ARE TO CENTER LINE OF CABLE.",
            " MARKET FLOOR IS EL 100'-0\".",
            "CABLES ARE 30'-0\" APART, GRIDS A TO F.",
            "PURLINS SIT ON THE CABLE AT GRIDS 2 TO 10.",
            "SHAPE OF CABLE BY ITS LARGEST TENSION,",
            " SEE TABLE C1.",
        ],
    )
    kit.border(
        sheet,
        (-76.0, -104.0),
        (288.0, 192.0),
        (25.0, 12.0),
        [
            ["QUARROW MARKET HALL"],
            ["CANOPY ROOF, CABLE ELEVATION"],
            ["PROJECT", "INVENTED, FOR DEMONSTRATION ONLY"],
            ["PLACE", "TOWN OF QUARROW (FICTITIOUS)"],
            ["SCALE", '1/8" = 1\'-0"   SHEET ARCH D, 36 x 24 IN'],
            ["DRAWN", "OWN EXAMPLE   CHECKED  -"],
            ["SHEET", "S-301   PRELIMINARY"],
        ],
    )
