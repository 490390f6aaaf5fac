"""A pipe cable over a gulch, in feet, R2004: invented, like its mine.

The cable is not ordered yet: its largest tension is held when what flows gets heavier. The
loads after that are in `loads_gulch_pipe.csv`.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.enums import TextEntityAlignment

from drawings import cable_blocks
from drawings import drafting as kit

if TYPE_CHECKING:
    from ezdxf.document import Drawing

PAPER = 96.0 / 304.8  # one plotted mm in feet at 1/8" = 1'-0"
PANEL, PANELS = 21.0, 9
SPAN = PANEL * PANELS
LEFT, RIGHT = (0.0, 42.0), (SPAN, 46.0)
PIPE = 6.0  # crown of the pipe
DEAD = ("3.2", "3", "3", "3", "4.4", "3", "3", "3.2")  # kip
FLUID = "1.9"
COMBINATIONS = ("D", "D + F")


def draw() -> Drawing:
    """Draw the sheet."""
    sheet = kit.new_sheet("R2004", insunits=2, imperial=True, paper=PAPER, height=0.75)
    cable_blocks.support_block(sheet, is_el_shown=False)
    cable_blocks.data_block(sheet, ("MARK", "MAX_TENSION", "UNDER"))
    _surroundings(sheet)
    _cable(sheet)
    _annotation(sheet)
    return sheet.doc


def _cable(sheet: kit.Sheet) -> None:
    """Draw supports, the pipe, the points that carry it, and the rule."""
    for mark, at, elevation in (("S1", LEFT, "EL 542'-0\""), ("S2", RIGHT, "EL 546'-0\"")):
        sheet.insert("CABLE-SUPPORT", at, "S-CABL-SUPP", {"MARK": mark, "EL": elevation})
    for y in (PIPE, PIPE - 1.0):
        sheet.line((-6.0, y), (SPAN + 6.0, y), "P-PIPE")
    sheet.polyline([(-6.0, PIPE), (SPAN + 6.0, PIPE)], "S-CABL-DECK")
    middle = TextEntityAlignment.TOP_CENTER
    for k, dead in enumerate(DEAD, start=1):
        x = k * PANEL
        sheet.circle((x, PIPE), 0.6, "S-CABL-LOAD")
        words = f"D={dead}k F={FLUID}k"
        sheet.text(words, (x, PIPE - 2.4), "S-CABL-LOAD", align=middle)
    data = {"MARK": "C1", "MAX_TENSION": "58 kip", "UNDER": "D + F"}
    sheet.insert("CABLE-DATA", (SPAN + 12.0, 66.0), "S-CABL-DATA", data)
    sheet.rectangle((-34.0, -98.0), (16.0, -40.0), "S-CABL-FRAM")


def _surroundings(sheet: kit.Sheet) -> None:
    """Draw the gulch and its anchor walls."""
    kit.ground(sheet, [(-34.0, 36.0), (-3.4, 36.0)])
    kit.ground(
        sheet,
        [
            (4.0, 4.0),
            (18.0, -6.0),
            (44.0, -17.0),
            (92.0, -24.0),
            (146.0, -15.0),
            (175.0, -4.0),
            (185.0, 3.0),
        ],
    )
    kit.ground(sheet, [(SPAN + 3.4, 40.0), (SPAN + 40.0, 40.0)])
    for x, top in ((0.0, 40.0), (SPAN, 44.0)):
        outline = [(-3.0, top), (-1.2, top), (1.2, 2.0), (3.0, 2.0), (3.0, -3.0), (-3.0, -3.0)]
        side = 1.0 if x == 0.0 else -1.0
        kit.footing(sheet, [(x + side * dx, y) for dx, y in outline])


def _annotation(sheet: kit.Sheet) -> None:
    """Write grids, dimensions, notes and the title block."""
    stations = [k * PANEL for k in range(PANELS + 1)]
    for x, name in ((0.0, "A"), (SPAN, "B")):
        kit.grid_line(sheet, x, -8.0, 66.0, name)
    kit.dimension_row(sheet, stations, 57.0, ["21'-0\""] * PANELS, 2.0)
    kit.dimension_row(sheet, [0.0, SPAN], 62.0, ["189'-0\""], 2.0)
    kit.leader_note(sheet, (4.6, PIPE), (5.2, 12.0), "10 IN TAILINGS LINE")
    kit.leader_note(sheet, (92.0, -24.0), (97.0, -20.0), "GULCH FLOOR EL 476'-0\"")
    kit.view_title(sheet, (64.0, -32.0), "CABLE ELEVATION LOOKING NORTH", '1/8" = 1\'-0"', 52.0)
    kit.view_title(sheet, (-34.0, -102.0), "FORCE DIAGRAM, CABLE C1", "SEE DIAGRAM", 54.0)
    kit.notes(
        sheet,
        (-40.0, 72.0),
        [
            "INVENTED PROJECT, A DEMONSTRATION.",
            " NOT FOR CONSTRUCTION.",
            "D PIPE, SADDLES, HANGERS; F FLUID.",
            "LARGEST TENSION OF THE CABLE IS GIVEN.",
        ],
    )
    kit.border(
        sheet,
        (-50.0, -110.0),
        (288.0, 192.0),
        (25.0, 12.0),
        [
            ["QUARRY GULCH PIPE CROSSING"],
            ["CABLE ELEVATION"],
            ["PROJECT", "INVENTED, FOR DEMONSTRATION ONLY"],
            ["PLACE", "TALLOW MINE (FICTITIOUS)"],
            ["SCALE", '1/8" = 1\'-0"   SHEET ARCH D, 36 x 24 IN'],
            ["DRAWN", "OWN EXAMPLE   CHECKED  -"],
            ["SHEET", "PC-02   PRELIMINARY"],
        ],
    )
