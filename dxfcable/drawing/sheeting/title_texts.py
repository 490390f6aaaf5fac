"""Texts of the title block: as large as they fit, in two lines where there is room, else cut.

A number identifies a document, so it is never cut: what does not fit is refused.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.sketch import shown
from dxfcable.drawing.sheeting.ruled_table import wrapped
from dxfcable.drawing.sheeting.saying import characters
from dxfcable.errors import DxfcableError

if TYPE_CHECKING:
    from collections.abc import Iterable

NUMBER = "NUMBER"  # name of that field
STEP = 1.4  # from line to line of a field, in text heights
_EASE = 0.01  # of a width, so that no noise of a sum cuts what fits [mm]
_BREAKS = "-./_ "  # a number is broken behind one of these


@dataclass(frozen=True, slots=True, kw_only=True)
class Lines:
    """A text in lines of one height, the first on top; `is_cut` where words are left out."""

    texts: tuple[str, ...]
    height: float
    is_cut: bool = False


def fitted(text: str, width: float, *heights: float) -> tuple[str, float]:
    """Give a text in the first of some heights by which it fits, else cut short in the last.

    Examples
    --------
    >>> fitted("AB", 100.0, 2.5, 1.8)
    ('AB', 2.5)
    """
    plain = shown(text)
    for height in heights:
        if text_width(plain, height) <= width:
            return plain, height
    least = heights[-1]
    return wrapped(plain, width - text_width("..", least), least)[0] + "..", least


def in_lines(text: str, width: float, rise: float, *heights: float) -> Lines:
    """Give a text in one line or in two, in the first height that fits, else cut short.

    Parameters
    ----------
    text : str
    width, rise : float
        Of the room [mm]; two lines are tried only where they have room one over the other.
    *heights : float
        Text heights to try, the largest first [mm].

    Examples
    --------
    >>> in_lines("AB", 100.0, 3.0, 2.5, 1.8).texts
    ('AB',)
    """
    plain = shown(text)
    for height in heights:
        if text_width(plain, height) <= width:
            return Lines(texts=(plain,), height=height)
        lines = wrapped(plain, width, height)
        if len(lines) <= 2 and _has_room(rise, height):
            return Lines(texts=tuple(lines), height=height)
    least = heights[-1]
    count = 2 if _has_room(rise, least) else 1
    lines = wrapped(plain, width - text_width("..", least), least)[:count]
    return Lines(texts=(*lines[:-1], f"{lines[-1]}.."), height=least, is_cut=True)


def number_lines(number: str, width: float, rise: float, *heights: float) -> Lines:
    """Give a document's number whole, in one line or in two.

    Raises
    ------
    DxfcableError
        With code `settings`, where even the least letters do not fit.
    """
    plain = shown(number)
    for height in heights:
        if text_width(plain, height) <= width:
            return Lines(texts=(plain,), height=height)
        lines = _broken(plain, width, height)
        if len(lines) <= 2 and _has_room(rise, height):
            return Lines(texts=tuple(lines), height=height)
    message = f'the number "{number}" does not fit the title block of a sheet'
    remedy = "Give a shorter number_prefix in [sheet] of the settings."
    raise DxfcableError(message, code="settings", remedy=remedy)


def _has_room(rise: float, height: float) -> bool:
    return (1.0 + STEP) * height <= rise + 1e-6


def _broken(plain: str, width: float, height: float) -> list[str]:
    """Break a number behind its separators, a part that is too long anywhere."""
    parts = [""]
    for character in characters(plain):
        parts[-1] += character
        if character in _BREAKS:
            parts.append("")
    lines = _joined([""], parts, width, height)
    if len(lines) > 2 or any(text_width(line, height) > width for line in lines):
        lines = _joined([""], characters(plain), width, height)
    return lines


def _joined(lines: list[str], parts: Iterable[str], width: float, height: float) -> list[str]:
    """Add parts to lines of a width."""
    for part in parts:
        if lines[-1] and text_width(lines[-1] + part, height) > width:
            lines.append("")
        lines[-1] += part
    return lines


def widths(
    row: tuple[tuple[str, str, float], ...], total: float, pad: float, heights: tuple[float, float]
) -> list[float]:
    """Give the widths of the fields of a row: by their shares, but more for a long number.

    Parameters
    ----------
    row : tuple of (str, str, float)
        Name, value and share of each.
    total, pad : float
        Width of the row; what stands free beside a text [mm].
    heights : tuple of float
        Of values and of names, which is the least [mm].
    """
    usual = [share * total for _, _, share in row]
    place = next((k for k, (name, _, _) in enumerate(row) if name == NUMBER), None)
    if place is None:
        return usual
    wanted = _needed(row[place], (heights[1], heights[1]), pad)
    spare = [
        max(0.0, width - _needed(each, heights, pad))
        for each, width in zip(row, usual, strict=True)
    ]
    more = min(wanted - usual[place], sum(spare))
    if more <= 0.0:
        return usual
    result = [width - more * free / sum(spare) for width, free in zip(usual, spare, strict=True)]
    result[place] += more
    return result


def _needed(field: tuple[str, str, float], heights: tuple[float, float], pad: float) -> float:
    """Give the width that a field's name and value need."""
    (name, value, _), (text, small) = field, heights
    words = max(text_width(shown(value), text), text_width(name, small))
    return words + 2 * pad + _EASE
