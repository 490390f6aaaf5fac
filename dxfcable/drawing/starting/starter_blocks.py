"""The blocks of a starter drawing: symbols with an attribute for every value that is read."""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.lldxf.const import ATTRIB_INVISIBLE

from dxfcable.drawing.bytes.decode import escape

if TYPE_CHECKING:
    from collections.abc import Sequence

    from ezdxf.layouts.blocklayout import BlockLayout

    from dxfcable.drawing.starting.starter_board import Board
    from dxfcable.model import Point
    from dxfcable.settings import Settings

# What the usual case letters stand for (common practice); others are named by their letter.
_CASES = {
    "D": "dead",
    "L": "live",
    "Lr": "roof live",
    "S": "snow",
    "R": "rain",
    "W": "wind",
    "E": "earthquake",
    "H": "earth pressure",
    "F": "fluid",
    "T": "temperature",
    "G": "permanent",
    "P": "prestress",
    "Q": "variable",
    "A": "accidental",
}
_SUPPORT = {
    "MARK": "Mark of the support, as S1",
    "EL": "Elevation of the cable here, as {elevation}; blank: as drawn",
    "KIND": "Saddle between cable ends: FIXED, ROLLER, SHEAVE or PINNED; an end: blank",
}
_LOAD = {
    "MARK": "Mark of the load point, as P1",
    "CABLE": "Mark of its cable, where two cables may carry it; else blank",
    "CLAMPED": "yes where the cable is held down here as well; else blank",
}
_RULES = {
    "MAX_TENSION": "Rule: largest tension anywhere, as {force}",
    "SAG": "Rule: greatest drop below the closing string, as {sag}",
    "LOW_POINT": "Rule: elevation of the lowest point, as {elevation}",
    "PULL": "Rule: horizontal component, as {force}",
    "LENGTH": "Rule: stretched length as formed",
    "CUT_LENGTH": "Rule: unstressed length",
}
_DATA = {
    "MARK": "Mark of the cable, as C1",
    **_RULES,
    "UNDER": "Load combination that forms the cable, as {case}",
    "WEIGHT": "Weight of the cable by length, as {weight}; blank: weightless",
    "WEIGHT_CASE": "Load case of that weight; blank: the dead case",
    "EA": "Axial stiffness, as {stiffness}; blank: does not stretch",
    "STRAND": "Strand of the office's table; blank: none",
    "ALPHA": "Thermal expansion, as 12e-6 /C; blank: none",
    "DELTA_T": "Change of temperature to check, as 30 K; blank: none",
    "CAPACITY": "Tension that the cable may carry, as {force}; blank: not checked",
    "SPAN": "Span that the rule is for, 1 from the left; blank: the nearest",
    "FITTING_L": "End fitting on the left, by its name in the settings",
    "FITTING_R": "End fitting on the right, by its name in the settings",
}
_ANCHOR = {
    "MARK": "Mark of the anchor, as A1",
    "EA": "Axial stiffness of the stay or mast that ends here; blank: rigid",
    "STRAND": "Strand of the stay; blank: none",
    "SHARE": "Share of this stay where a support has two, as 0.5; else blank",
    "WEIGHT": "Weight of the anchor block, as {force}; blank: not checked",
    "MU": "Friction under the block, as 0.5; blank: not checked",
    "FS_SLIDE": "Factor on sliding that is wanted, as 1.5",
    "FS_UPLIFT": "Factor on uplift that is wanted, as 1.5",
}
_COLUMN = 11  # rows of the data table
_NAME, _VALUE, _ROW = 11.0, 10.0, 2.0  # widths and height of its cells, in text heights


def add_blocks(board: Board, settings: Settings, examples: dict[str, str]) -> None:
    """Define the four blocks.

    Parameters
    ----------
    board : Board
    settings : Settings
        For the blocks' names and the load cases.
    examples : dict of str to str
        Values in the drawing's units that the prompts show.
    """
    names = settings.blocks
    _Form(board, names.support, examples).support()
    _Form(board, names.load, examples).load(settings.cases.letters)
    _Form(board, names.data, examples).data()
    _Form(board, names.anchor, examples).anchor()


class _Form:
    """One block in work; lengths are in text heights, from its base point."""

    def __init__(self, board: Board, name: str, examples: dict[str, str]) -> None:
        self._board = board
        self._block: BlockLayout = board.doc.blocks.new(escape(name))
        self._examples = examples

    def support(self) -> None:
        """Draw a pin on a bearing; mark and elevation above it."""
        self._circle((0, 0), 0.6)
        self._outline([(-0.9, -1.6), (0.9, -1.6), (0, -0.6)])
        self._line((-1.4, -1.6), (1.4, -1.6))
        self._attribute("MARK", _SUPPORT["MARK"], (-3.4, 1.4), size=1.4)
        self._attribute("EL", _SUPPORT["EL"], (0.9, 2.2))
        self._attribute("KIND", _SUPPORT["KIND"], (0.9, 4.2), is_shown=False)

    def load(self, letters: Sequence[str]) -> None:
        """Draw a hanger pin; mark and the first two load cases below it, the others hidden."""
        self._circle((0, 0), 0.45)
        self._line((0, -0.45), (0, -5.6))
        self._attribute("MARK", _LOAD["MARK"], (0.6, -2.2))
        for k, letter in enumerate(letters[:2]):
            y = -3.9 - 1.7 * k
            self._text(letter, (0.6, y))
            self._attribute(letter.upper(), self._case(letter), (2.4, y))
        hidden = [(tag, _LOAD[tag]) for tag in ("CABLE", "CLAMPED")]
        hidden += [(letter.upper(), self._case(letter)) for letter in letters[2:]]
        for k, (tag, prompt) in enumerate(hidden):
            self._attribute(tag, prompt, (0.6, -7.3 - 1.7 * k), is_shown=False)

    def data(self) -> None:
        """Draw a table of two columns, names on the left of each, values on the right."""
        tags = list(_DATA)
        width = _NAME + _VALUE
        for column in range(2):
            x = column * width
            own = tags[column * _COLUMN : (column + 1) * _COLUMN]
            for k, tag in enumerate(own):
                y = -(k + 1) * _ROW
                self._line((x, y), (x + width, y))
                self._text(tag.replace("_", " "), (x + 0.5, y + 0.5))
                self._attribute(tag, _DATA[tag], (x + _NAME + 0.5, y + 0.5))
            self._line((x + _NAME, 0), (x + _NAME, -len(own) * _ROW))
            self._line((x, 0), (x, -_COLUMN * _ROW))
        right = 2 * width
        self._line((0, 0), (right, 0))
        self._line((right, 0), (right, -(len(tags) - _COLUMN) * _ROW))

    def anchor(self) -> None:
        """Draw an anchor plate; its mark beside it, its values hidden."""
        self._line((-1.4, 0), (1.4, 0))
        self._outline([(-0.9, 0), (0.9, 0), (0, 1.4)])
        self._attribute("MARK", _ANCHOR["MARK"], (1.6, 0.3), size=1.4)
        for k, tag in enumerate([tag for tag in _ANCHOR if tag != "MARK"]):
            self._attribute(tag, _ANCHOR[tag], (1.8, -1.9 - 1.7 * k), is_shown=False)

    def _case(self, letter: str) -> str:
        what = f"Load of case {letter}"
        if letter in _CASES:
            what += f", {_CASES[letter]}"
        return what + ", with its unit, as {load}; blank: none"

    def _place(self, at: Point) -> Point:
        return round(at[0] * self._board.height, 6), round(at[1] * self._board.height, 6)

    def _line(self, start: Point, end: Point) -> None:
        self._block.add_line(self._place(start), self._place(end))

    def _circle(self, center: Point, radius: float) -> None:
        self._block.add_circle(self._place(center), round(radius * self._board.height, 6))

    def _outline(self, points: Sequence[Point]) -> None:
        self._block.add_lwpolyline([self._place(p) for p in points], close=True)

    def _text(self, words: str, at: Point) -> None:
        board = self._board
        board.write(self._block, words, self._place(at), {"style": board.style})

    def _attribute(
        self, tag: str, prompt: str, at: Point, *, size: float = 1.0, is_shown: bool = True
    ) -> None:
        """Define an attribute, blank by default."""
        attributes = {
            "height": self._board.height * size,
            "style": self._board.style,
            "prompt": escape(prompt.format(**self._examples)),
            "flags": 0 if is_shown else ATTRIB_INVISIBLE,
        }
        self._block.add_attdef(tag, self._place(at), dxfattribs=attributes)
