"""The worked cable of a starter drawing, an invented canopy, with notes on what each thing is.

Places are those of the composition: one unit is a metre, or three feet, at the usual
plotting scale; texts are 0.25 high.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from ezdxf.enums import TextEntityAlignment

from dxfcable.quantities import format_elevation, format_length

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.starting.starter_board import Board
    from dxfcable.model import Point
    from dxfcable.settings import Settings

PANEL = 4.0
LEFT, RIGHT = (0.0, 8.0), (24.0, 7.5)
MAST_FOOT, ANCHOR = (0.0, 0.5), (-9.0, 0.5)
DECK_ENDS, DECK_RISE = 2.9, 0.3
CLEAR = 1.2
FRAME = (-11.5, -19.5), (2.5, -5.5)
_GROUND = 100.0  # elevation of the ground, in metres or feet
_NOTES, _TABLE = (28.5, 9.1), (28.5, 15.4)  # top left corners
_LOW, _HIGH = (-13.0, -21.0), (44.5, 16.0)  # what all of it fits into


@dataclass(frozen=True, slots=True, kw_only=True)
class Numbers:
    """Quantities of the example as text; lengths in composition units where they are numbers."""

    dead: tuple[str, ...]
    live: str
    sag: float
    stiffness: str
    capacity: str
    block: str
    weight: str


_METRIC = Numbers(
    dead=("9 kN", "10 kN", "10 kN", "10 kN", "9 kN"),
    live="7 kN",
    sag=2.4,
    stiffness="24000 kN",
    capacity="120 kN",
    block="260 kN",
    weight="30 N/m",
)
_IMPERIAL = Numbers(
    dead=("2.5 kip", "3 kip", "3 kip", "3 kip", "2.5 kip"),
    live="2 kip",
    sag=7.25 / 3.0,
    stiffness="6500 kip",
    capacity="35 kip",
    block="80 kip",
    weight="2 plf",
)


class Example:
    """The example on a board.

    Parameters
    ----------
    board : Board
    settings : Settings
        For names, load cases and the decimal comma.
    """

    def __init__(self, board: Board, settings: Settings) -> None:
        self._board = board
        self._settings = settings
        self._numbers = _IMPERIAL if board.is_imperial else _METRIC
        self._cases = settings.cases.letters[:2]

    def prompts(self) -> dict[str, str]:
        """Give values in the drawing's units for the prompts of the blocks."""
        numbers = self._numbers
        return {
            "elevation": self._elevation(LEFT[1]).removeprefix("EL "),
            "force": self._said(numbers.capacity),
            "sag": self._length(numbers.sag),
            "load": self._said(numbers.dead[0]),
            "stiffness": self._said(numbers.stiffness),
            "weight": self._said(numbers.weight),
            "case": self._cases[0],
        }

    def draw(self) -> None:
        """Draw everything."""
        self._structure()
        self._cable()
        self._loads()
        self._callouts()
        self._notes()
        self._titles()

    def corners(self) -> tuple[Point, Point]:
        """Give lower left and upper right corner of the whole [drawing unit]."""
        return self._board.at(_LOW), self._board.at(_HIGH)

    def _cable(self) -> None:
        """Draw supports, string, mast, stay, anchor, deck, clearance, data and frame."""
        board, numbers, blocks = self._board, self._numbers, self._settings.blocks
        for mark, at in (("S1", LEFT), ("S2", RIGHT)):
            board.insert(
                blocks.support, at, "support", {"MARK": mark, "EL": self._elevation(at[1])}
            )
        board.line(LEFT, RIGHT, "string")
        board.line(LEFT, MAST_FOOT, "mast")
        board.line(LEFT, ANCHOR, "stay")
        anchor = {"MARK": "A1", "WEIGHT": self._said(numbers.block)}
        anchor |= {"MU": "0.6", "FS_SLIDE": "1.5", "FS_UPLIFT": "1.5"}
        board.insert(blocks.anchor, ANCHOR, "anchor", anchor)
        stations = [0.5 * PANEL, *(k * PANEL for k in range(1, 6)), 5.5 * PANEL]
        board.polyline([(x, deck(x)) for x in stations], "deck")
        board.polyline([(0.5 * PANEL, CLEAR), (5.5 * PANEL, CLEAR)], "clearance")
        data = {
            "MARK": "C1",
            "SAG": self._length(numbers.sag),
            "UNDER": self._cases[0],
            "EA": self._said(numbers.stiffness),
            "CAPACITY": self._said(numbers.capacity),
        }
        board.insert(blocks.data, _TABLE, "data", data)
        board.rectangle(*FRAME, "frame")

    def _loads(self) -> None:
        """Draw four loads as blocks and the fifth as an arrow with its text."""
        board, numbers = self._board, self._numbers
        for k, dead in enumerate(numbers.dead[:-1], start=1):
            values = [self._said(dead), self._said(numbers.live)]
            tags = {case.upper(): value for case, value in zip(self._cases, values, strict=False)}
            at = (k * PANEL, deck(k * PANEL))
            name = self._settings.blocks.load
            board.insert(name, at, "load", {"MARK": f"P{k}"} | tags)
        x = 5 * PANEL
        top, tip = (x, deck(x)), (x, deck(x) - 1.4)
        board.line(top, tip, "load")
        for side in (-0.12, 0.12):
            board.line(tip, (x + side, tip[1] + 0.4), "load")
        values = [self._said(numbers.dead[-1]), self._said(numbers.live)]
        words = [f"{c}={v}" for c, v in zip(self._cases, values, strict=False)]
        board.text(" ".join(words), (x + 0.25, tip[1] + 0.1), "load")

    def _structure(self) -> None:
        """Draw ground, foundations and the pier that holds the right end; not read."""
        board, role = self._board, "structure"
        for start, end in ((-12.0, -10.4), (-7.6, -0.7), (0.7, 23.6), (24.4, 26.5)):
            board.line((start, 0.0), (end, 0.0), role)
        board.polyline(
            [*_step(-0.3, 0.3), (0.7, 0.0), (0.7, -0.8), (-0.7, -0.8), (-0.7, 0.0)],
            role,
            close=True,
        )
        board.polyline(
            [*_step(-9.5, -8.5), (-7.6, 0.0), (-7.6, -1.8), (-10.4, -1.8), (-10.4, 0.0)],
            role,
            close=True,
        )
        left, right, bottom, top = 23.6, 24.4, -0.8, RIGHT[1] - 0.4
        board.rectangle((left, bottom), (right, top), role)
        for k in range(10):
            y = bottom + 0.1 + 0.7 * k
            board.line((left, y), (right, y + 0.8), role)

    def _callouts(self) -> None:
        """Give the things of the example the numbers that the notes have."""
        for number, bubble, tip in (
            (1, (2.2, 5.5), (0.25, 7.6)),
            (2, (6.6, 9.9), (7.0, 7.87)),
            (3, (2.6, 2.0), (3.9, 3.0)),
            (4, (18.4, 1.9), (19.95, 2.3)),
            (6, (1.4, 1.0), (0.0, 2.0)),
            (7, (-7.2, 6.0), (-5.1, 3.75)),
            (8, (-11.2, 1.9), (-9.2, 0.7)),
            (9, (22.9, 4.1), (21.9, 3.0)),
            (10, (9.8, 0.5), (10.4, CLEAR)),
        ):
            self._bubble(number, bubble)
            way = math.dist(bubble, tip)
            reach = 0.4 / way
            start = tuple(b + (t - b) * reach for b, t in zip(bubble, tip, strict=True))
            self._board.line((start[0], start[1]), tip, "notes")
        self._bubble(5, (_TABLE[0] - 0.8, _TABLE[1] - 0.5))
        self._bubble(11, (FRAME[0][0] - 0.9, FRAME[1][1] - 0.5))

    def _bubble(self, number: int, at: Point) -> None:
        board = self._board
        board.circle(at, 0.4 * board.factor, "notes")
        middle = TextEntityAlignment.MIDDLE_CENTER
        board.text(str(number), at, align=middle)

    def _notes(self) -> None:
        """Write what each thing is, and what to do next."""
        board = self._board
        x, y = _NOTES
        board.text("What is drawn, and on which layer", (x, y), size=1.4)
        y -= 0.8
        for number, lines in enumerate(self._explanations(), start=1):
            board.text(f"{number}", (x, y))
            for line in lines:
                board.text(line, (x + 0.9, y))
                y -= 0.45
            y -= 0.1
        y -= 0.5
        board.text("How to begin", (x, y), size=1.4)
        y -= 0.8
        for line in _BEGIN:
            board.text(line, (x, y))
            y -= 0.45

    def _explanations(self) -> list[tuple[str, ...]]:
        layers, blocks, cases = self._settings.layers, self._settings.blocks, self._cases
        values = " and ".join(cases)
        return [
            (
                f"Support: block {blocks.support} on {layers.support}, at the point where the",
                "cable is held. MARK, and EL, its elevation.",
            ),
            (f"Closing string: a line from support to support on {layers.string}.",),
            (
                f"Load point: block {blocks.load} on {layers.load}. One value with its unit",
                f"for each load case; {values} are shown, the other cases are hidden attributes.",
            ),
            (
                "Load point drawn as an arrow: a vertical line, its lower end is the point, and",
                "a text near it. A POINT or CIRCLE with a text serves as well.",
            ),
            (
                f"What governs: block {blocks.data} on {layers.data}, near its cable. Fill in one",
                "rule (here SAG) and leave the other rules blank. UNDER: the loads that form it.",
            ),
            (f"Mast: a line from the support down to its base, on {layers.mast}.",),
            (f"Stay: a line from the support down to its anchor, on {layers.stay}.",),
            (
                f"Anchor: block {blocks.anchor} on {layers.anchor}, at the foot of the stay.",
                "Its weight, friction and factors are hidden attributes.",
            ),
            (f"Deck: a polyline on {layers.deck}. Hangers run from the cable down to it.",),
            (f"Clearance: a polyline on {layers.clearance}. The cable must stay above it.",),
            (f"Frame: a rectangle on {layers.frame}, where the force diagram goes.",),
        ]

    def _titles(self) -> None:
        """Write titles; the border is the office's."""
        board = self._board
        x, y = _LOW[0] + 0.5, _HIGH[1] - 1.0
        board.text("STARTER DRAWING: CABLE OF A CANOPY", (x, y), size=2.0)
        board.text("Invented example. Not for construction.", (x, y - 0.8))
        unit = {"m": "metre", "mm": "millimetre", "ft": "foot", "in": "inch"}[board.unit]
        board.text(f"Drawing unit: {unit}. Ground is {self._elevation(0.0)}.", (x, y - 1.3))
        title = (8.0, -2.0)
        board.text("CABLE ELEVATION", title, size=1.6)
        under = (FRAME[0][0], FRAME[0][1] - 0.8)
        board.text("FORCE DIAGRAM OF CABLE C1", under, size=1.4)

    def _said(self, text: str) -> str:
        """Write a quantity with the office's decimal mark."""
        return text.replace(".", ",") if self._settings.units.decimal_comma else text

    def _length(self, composed: float) -> str:
        unit = self._board.unit
        return self._said(format_length(composed * self._board.factor, unit))

    def _elevation(self, composed: float) -> str:
        """Give the elevation of an ordinate of the composition; the ground has a round one."""
        board = self._board
        ground = _GROUND * {"mm": 1000.0, "in": 12.0}.get(board.unit, 1.0)
        return self._said(format_elevation(ground + composed * board.factor, board.unit))


_BEGIN: Sequence[str] = (
    "1. Solve this drawing to see what comes:  dxfcable solve THIS.dxf -o SOLVED.dxf",
    "2. Erase the example and these notes; keep layers and blocks.",
    "3. Draw your cable at full size, X to the right and Y up.",
    "4. See what is understood of it:  dxfcable read YOURS.dxf",
    "5. Solve it. Results come on layers of their own; what you drew stays as it is.",
)


def deck(x: float) -> float:
    """Give the ordinate of the deck: it rises to midspan."""
    span = RIGHT[0] - LEFT[0]
    return round(DECK_ENDS + 4.0 * DECK_RISE * x * (span - x) / span**2, 4)


def _step(left: float, right: float) -> list[Point]:
    """Give the outline of a pedestal on the ground."""
    top = MAST_FOOT[1]
    return [(left, 0.0), (left, top), (right, top), (right, 0.0)]
