"""Two pipe cables over a brook, in metres, R12: invented, like its waterworks.

R12 states no unit of length, so the run says it (`--units m`). Line A hangs from eight
points drawn as circles, line B from five drawn as points; a closing string joins the
supports of each.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.enums import TextEntityAlignment

from drawings import cable_blocks
from drawings import drafting as kit

if TYPE_CHECKING:
    from ezdxf.document import Drawing

PAPER = 0.1  # one plotted mm in metres at 1:100
SPAN = 36.0
BASE_A, BASE_B = 0.0, -29.0  # ordinate of the level 80.000 in either elevation
LEFT, RIGHT = 8.0, 9.2  # supports above the level 80.000
PIPE = 3.6  # crown of the pipe above it
LOADS_A = ("11.5 kN", "12.5 kN", "12.5 kN", "15 kN", "15 kN", "12.5 kN", "12.5 kN", "11.5 kN")
LOADS_B = ("8 kN", "8 kN", "9.6 kN", "8 kN", "8 kN")


def draw() -> Drawing:
    """Draw the sheet."""
    sheet = kit.new_sheet("R12", insunits=None, imperial=False, paper=PAPER, height=0.25)
    cable_blocks.data_block(sheet)
    for base, mark, loads, rule in (
        (BASE_A, "A", LOADS_A, {"SAG": "3.60 m"}),
        (BASE_B, "B", LOADS_B, {"PULL": "58 kN"}),
    ):
        _surroundings(sheet, base)
        _cable(sheet, base, mark, loads)
        _elevation_notes(sheet, base, mark, len(loads) + 1)
        sheet.insert("CABLE-DATA", (38.4, base + 8.6), "S-CABL-DATA", {"MARK": mark} | rule)
    sheet.rectangle((45.5, BASE_A - 5.0), (63.5, BASE_A + 11.5), "S-CABL-FRAM")
    sheet.rectangle((45.5, BASE_B - 2.0), (63.5, BASE_B + 11.5), "S-CABL-FRAM")
    _title(sheet)
    return sheet.doc


def _cable(sheet: kit.Sheet, base: float, mark: str, loads: tuple[str, ...]) -> None:
    """Draw one line: supports, closing string, the pipe and the points that carry it."""
    left, right = (0.0, base + LEFT), (SPAN, base + RIGHT)
    for at in (left, right):
        if mark == "A":
            sheet.circle(at, 0.2, "S-CABL-SUPP")
        else:
            sheet.msp.add_point(at, dxfattribs={"layer": "S-CABL-SUPP"})
    sheet.line(left, right, "S-CABL-STRG")
    crown, bore = base + PIPE, 0.4 if mark == "A" else 0.25
    for y in (crown, crown - bore):
        sheet.line((-2.4, y), (SPAN + 2.4, y), "P-PIPE")
    panel = SPAN / (len(loads) + 1)
    for k, words in enumerate(loads, start=1):
        at = (k * panel, crown)
        if mark == "A":
            sheet.circle(at, 0.15, "S-CABL-LOAD")
        else:
            sheet.msp.add_point(at, dxfattribs={"layer": "S-CABL-LOAD"})
        below = (k * panel, crown - bore - 0.3)
        sheet.text(words, below, "S-CABL-LOAD", align=TextEntityAlignment.TOP_CENTER)


def _surroundings(sheet: kit.Sheet, base: float) -> None:
    """Draw the brook and the anchor piers, above the level 80.000."""
    kit.ground(sheet, [(-5.5, base + 3.0), (-1.6, base + 3.0)])
    kit.ground(
        sheet,
        [
            (1.6, base + 2.4),
            (8.0, base + 0.2),
            (14.0, base - 1.6),
            (22.0, base - 1.8),
            (28.0, base + 0.4),
            (34.4, base + 2.6),
        ],
    )
    kit.ground(sheet, [(SPAN + 1.6, base + 3.2), (SPAN + 5.5, base + 3.2)])
    sheet.line((9.4, base - 0.2), (26.4, base - 0.2), "C-WATR")
    for x, top in ((0.0, base + LEFT), (SPAN, base + RIGHT)):
        sheet.rectangle((x - 0.6, base + 2.2), (x + 0.6, top - 0.4), "S-FNDN")
        kit.footing(
            sheet,
            [
                (x - 1.6, base + 0.6),
                (x + 1.6, base + 0.6),
                (x + 1.6, base + 2.2),
                (x - 1.6, base + 2.2),
            ],
        )


def _elevation_notes(sheet: kit.Sheet, base: float, mark: str, panels: int) -> None:
    """Write grids, dimensions and levels of one elevation."""
    stations = [k * SPAN / panels for k in range(panels + 1)]
    panel = f"{1000.0 * SPAN / panels:.0f}"
    for k, x in enumerate((0.0, SPAN), start=1):
        kit.grid_line(sheet, x, base - 0.4, base + 13.2, str(k))
    kit.dimension_row(sheet, [0.0, SPAN], base + 12.2, ["36 000"], 0.6)
    kit.dimension_row(sheet, stations, base + 11.0, [panel] * panels, 0.6)
    kit.level_mark(sheet, (15.0, base - 0.2), "WATER 79.800", 3.0)
    kit.level_mark(sheet, (-4.6, base + 3.0), "83.000", 2.0)
    kit.level_mark(sheet, (SPAN + 3.0, base + 3.2), "83.200", 2.0)
    bore = "DN 400 WATER MAIN" if mark == "A" else "DN 250 RETURN LINE"
    kit.leader_note(sheet, (-1.6, base + PIPE - 0.1), (-2.6, base + 5.6), bore)
    title = f"ELEVATION, LINE {mark}"
    kit.view_title(sheet, (2.0, base - 4.2), title, "1:100", 9.0)
    kit.view_title(sheet, (46.0, base + 12.6), f"FORCE DIAGRAM, CABLE {mark}", "SEE DIAGRAM", 13.0)


def _title(sheet: kit.Sheet) -> None:
    """Write notes, border and title block."""
    kit.notes(
        sheet,
        (17.0, -35.2),
        [
            "INVENTED PROJECT, DRAWN AS A DEMONSTRATION. NOT FOR CONSTRUCTION.",
            "LEVELS IN METRES, DIMENSIONS IN MILLIMETRES. DRAWING UNIT IS THE METRE.",
            "LOADS: PIPE FULL OF WATER, SADDLES AND HANGERS, AT EACH SADDLE.",
            "ONE CABLE OVER EACH PIPE, ANCHORED AT BOTH PIERS.",
            "LINE A BY ITS SAG, LINE B BY ITS PULL.",
        ],
    )
    kit.border(
        sheet,
        (-12.0, -42.0),
        (84.1, 59.4),
        (20.0, 10.0),
        [
            ["SALLOW BROOK PIPE CROSSING"],
            ["CABLES OF LINES A AND B"],
            ["PROJECT", "INVENTED, FOR DEMONSTRATION ONLY"],
            ["PLACE", "SALLOW WATERWORKS (FICTITIOUS)"],
            ["SCALE", "1:100   SHEET A1, 841 x 594"],
            ["DRAWN", "OWN EXAMPLE   CHECKED  -"],
            ["SHEET", "PX-07   PRELIMINARY"],
        ],
    )
