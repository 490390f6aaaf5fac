"""A walkway over a wet meadow on sixty hangers, in feet, R2007: invented, like its meadow.

Sixty load points are drawn as points, each with its value beside it; the cable has no data
block, only the point that it must pass through.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.enums import TextEntityAlignment

from drawings import cable_blocks
from drawings import drafting as kit

if TYPE_CHECKING:
    from ezdxf.document import Drawing

PAPER = 192.0 / 304.8  # one plotted mm in feet at 1/16" = 1'-0"
PANEL, PANELS = 5.0, 61
SPAN = PANEL * PANELS
LEFT, RIGHT = (0.0, 64.0), (SPAN, 61.0)
ANCHORS = (-72.0, 3.0), (SPAN + 70.0, 2.0)
DECK, CAMBER = 21.0, 5.0
THROUGH = (152.5, 36.5)
# Deck and people on 5'-0"; every tenth hanger carries a bench as well, the middle four a lookout.
USUAL, BENCH, LOOKOUT = "1.8 kip", "2.15 kip", "2.6 kip"


def deck(x: float) -> float:
    """Ordinate of the deck: a parabola of camber over the span."""
    return round(DECK + 4.0 * CAMBER * x * (SPAN - x) / SPAN**2, 4)


def load(k: int) -> str:
    """Value at the k-th of the sixty hangers."""
    if 29 <= k <= 32:
        return LOOKOUT
    return BENCH if k % 10 == 0 else USUAL


def draw() -> Drawing:
    """Draw the sheet."""
    sheet = kit.new_sheet("R2007", insunits=2, imperial=True, paper=PAPER, height=1.5)
    cable_blocks.support_block(sheet)
    cable_blocks.anchor_block(sheet)
    _cable(sheet)
    _surroundings(sheet)
    _annotation(sheet)
    return sheet.doc


def _cable(sheet: kit.Sheet) -> None:
    """Draw what governs the cable: supports, masts, stays, anchors, deck, loads, point, frame."""
    for mark, head, anchor, label, elevation in (
        ("S1", LEFT, ANCHORS[0], "A1", "EL 464.00"),
        ("S2", RIGHT, ANCHORS[1], "A2", "EL 461.00"),
    ):
        sheet.insert("CABLE-SUPPORT", head, "S-CABL-SUPP", {"MARK": mark, "EL": elevation})
        sheet.line(head, (head[0], 4.0), "S-CABL-MAST")
        sheet.line(head, anchor, "S-CABL-STAY")
        sheet.insert("CABLE-ANCHOR", anchor, "S-CABL-ANCH", {"MARK": label})
    stations = [k * PANEL for k in range(PANELS + 1)]
    sheet.polyline([(x, deck(x)) for x in stations], "S-CABL-DECK")
    for k, x in enumerate(stations[1:-1], start=1):
        sheet.msp.add_point((x, deck(x)), dxfattribs={"layer": "S-CABL-LOAD"})
        below = (x, deck(x) - 1.8)
        # Read from the right: sixty values side by side leave no room for level ones.
        middle = TextEntityAlignment.MIDDLE_RIGHT
        sheet.text(load(k), below, "S-CABL-LOAD", align=middle, rotation=90.0)
    sheet.msp.add_point(THROUGH, dxfattribs={"layer": "S-CABL-DATA"})
    sheet.rectangle((-76.0, -152.0), (60.0, -44.0), "S-CABL-FRAM")


def _surroundings(sheet: kit.Sheet) -> None:
    """Draw meadow, ditch, foundations and walkers."""
    kit.ground(sheet, [(-95.0, 1.5), (-79.0, 1.0)])
    kit.ground(sheet, [(-65.0, 1.0), (-5.0, 1.0)])
    meadow = [(5.0, 0.0), (38.0, -5.0), (92.0, -9.0), (150.0, -12.0), (204.0, -10.0)]
    kit.ground(sheet, [*meadow, (262.0, -5.5), (300.0, 0.0)])
    kit.ground(sheet, [(310.0, 0.5), (368.0, 0.0)])
    kit.ground(sheet, [(382.0, 0.0), (398.0, 0.5)])
    sheet.line((58.0, -6.4), (252.0, -6.4), "C-WATR")
    for x in (0.0, SPAN):
        outline = [(-3.0, 4.0), (3.0, 4.0), (3.0, -7.0), (8.0, -7.0)]
        outline += [(8.0, -12.0), (-8.0, -12.0), (-8.0, -7.0), (-3.0, -7.0)]
        kit.footing(sheet, [(x + dx, y) for dx, y in outline])
        sheet.line((x - 2.5, DECK), (x + 2.5, DECK), "S-FNDN")
    for x, y in ANCHORS:
        box = [(-7.0, -2.2), (7.0, -2.2), (7.0, -18.0), (-7.0, -18.0)]
        kit.footing(sheet, [(x + dx, y + dy) for dx, dy in box])
        sheet.line((x, y - 2.1), (x, y - 2.2), "S-FNDN")
    for x in (41.0, 118.0, 163.0, 247.0):
        kit.person(sheet, (x, deck(x)), 5.7)


def _annotation(sheet: kit.Sheet) -> None:
    """Write grids, dimensions, levels, notes and the title block."""
    for x, name in ((0.0, "1"), (SPAN, "2")):
        kit.grid_line(sheet, x, -24.0, 92.0, name)
    kit.dimension_row(sheet, [0.0, SPAN], 86.0, ["61 PANELS AT 5'-0\" = 305'-0\""], 4.0)
    kit.dimension_row(sheet, [ANCHORS[0][0], 0.0], -28.0, ["72'-0\""], -4.0)
    kit.dimension_row(sheet, [SPAN, ANCHORS[1][0]], -28.0, ["70'-0\""], -4.0)
    kit.level_mark(sheet, (90.0, -6.4), "WET SEASON EL 393.60", 34.0)
    kit.level_mark(sheet, (-40.0, 1.0), "EL 401.00", 17.0)
    kit.leader_note(sheet, THROUGH, (168.0, 47.0), "CABLE THROUGH THIS POINT")
    kit.leader_note(sheet, (-36.0, 33.5), (-48.0, 46.0), "BACKSTAY")
    kit.leader_note(sheet, (340.0, 31.5), (352.0, 44.0), "BACKSTAY")
    kit.leader_note(sheet, (22.0, deck(22.0)), (28.0, 34.0), "BOARDWALK, CAMBER 5'-0\"")
    kit.view_title(sheet, (110.0, -28.0), "ELEVATION LOOKING NORTH", '1/16" = 1\'-0"', 92.0)
    kit.view_title(sheet, (-76.0, -157.0), "FORCE DIAGRAM", "SEE DIAGRAM", 60.0)
    kit.notes(
        sheet,
        (292.0, -60.0),
        [
            "INVENTED PROJECT, DRAWN AS A DEMONSTRATION.",
            " NOT FOR CONSTRUCTION.",
            "ELEVATIONS IN FEET TO SITE DATUM.",
            "LOADS OF ONE OF TWO CABLES AT EACH HANGER:",
            " BOARDWALK, RAILS, HANGERS AND WALKERS.",
            "HANGERS EVERY 5'-0\", SIXTY IN ALL.",
        ],
    )
    kit.border(
        sheet,
        (-112.0, -212.0),
        (576.0, 384.0),
        (25.0, 12.0),
        [
            ["FENLEIGH MEADOW WALKWAY"],
            ["CABLE ELEVATION AND FORCE DIAGRAM"],
            ["PROJECT", "INVENTED, FOR DEMONSTRATION ONLY"],
            ["PLACE", "FENLEIGH RESERVE (FICTITIOUS)"],
            ["SCALE", '1/16" = 1\'-0"   SHEET ARCH D, 36 x 24 IN'],
            ["DRAWN", "OWN EXAMPLE   CHECKED  -"],
            ["SHEET", "WB-04   PRELIMINARY"],
        ],
    )
