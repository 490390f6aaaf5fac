"""How much room a text takes, whatever face the reader's program shows it in."""

from __future__ import annotations

import math
import re
from functools import lru_cache
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align, VAlign

if TYPE_CHECKING:
    from dxfcable.drawing.items import TextItem
    from dxfcable.model import Point

# Advance over cap height, per character the widest of a proportional sans serif face and of the
# single-stroke faces of CAD programs (ISO 3098 lettering lies below both). Own measurements on
# the safe side: a label may claim too much room, never too little.
_GROUPS = {
    " ": 0.76,
    ".,:;'!|`": 0.5,
    "()[]{}ijl": 0.62,
    '"tfr*': 0.76,
    "I1": 0.95,
    "023456789": 0.95,
    "abcdeghknopqsuvxyz": 0.92,
    "-+=<>~": 1.24,
    "ABCDEFGHJKLNOPQRSTUVXYZ&$#_?/\\": 1.06,
    "MWm@%w": 1.36,
}
_WIDTHS = {character: width for group, width in _GROUPS.items() for character in group}
_WIDEST = 1.4
_CODES = re.compile(r"\\U\+[0-9A-Fa-f]{4}|%%[cdpCDP]")

DESCENT = 0.22  # below the baseline and above the capitals, in heights: commas, brackets
ASCENT = 1.08


def text_width(text: str, height: float) -> float:
    r"""Give the width that a line of text may take.

    Parameters
    ----------
    text : str
        ASCII; `%%c`, `%%d`, `%%p` and `\U+XXXX` count as one character each.
    height : float
        Height of capitals [length].

    Returns
    -------
    float
        Width [length].

    Examples
    --------
    >>> round(text_width("133 kip", 1.0), 2)
    6.07
    """
    return height * _advance(text)


@lru_cache(maxsize=4096)
def _advance(text: str) -> float:
    """Give the width of a text of height one."""
    plain = _CODES.sub("\u00b0", text)
    return sum([_WIDTHS.get(character, _WIDEST) for character in plain])


_LEFT = {Align.LEFT: 0.0, Align.CENTER: -0.5, Align.RIGHT: -1.0}
_BASE = {VAlign.BASELINE: 0.0, VAlign.BOTTOM: 0.0, VAlign.MIDDLE: -0.5, VAlign.TOP: -1.0}


def text_box(
    text: str, height: float, align: Align, valign: VAlign
) -> tuple[float, float, float, float]:
    """Give a text's box about its alignment point, unrotated: left, bottom, right, top."""
    width = text_width(text, height)
    left = _LEFT[align] * width
    base = _BASE[valign] * height
    return left, base - DESCENT * height, left + width, base + ASCENT * height


def text_corners(item: TextItem) -> tuple[Point, Point, Point, Point]:
    """Give the four corners of a text's box in the drawing, counter-clockwise from lower left."""
    left, bottom, right, top = text_box(item.text, item.height, item.align, item.valign)
    turn = math.radians(item.rotation)
    cos, sin = math.cos(turn), math.sin(turn)
    x, y = item.at

    def corner(u: float, v: float) -> Point:
        return x + u * cos - v * sin, y + u * sin + v * cos

    return corner(left, bottom), corner(right, bottom), corner(right, top), corner(left, top)
