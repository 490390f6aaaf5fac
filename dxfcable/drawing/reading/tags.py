"""Attributes of one block, taken tag by tag; what does not read, or is left over, is told."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, TypeVar

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import listed
from dxfcable.quantities import (
    QuantityError,
    looks_like_force,
    parse_force,
    parse_length,
    parse_line_load,
    parse_stiffness,
)

if TYPE_CHECKING:
    from collections.abc import Callable

    from dxfcable.drawing.reading.context import Context
    from dxfcable.drawing.reading.pieces import Piece
    from dxfcable.quantities import Force, Length, LineLoad

_T = TypeVar("_T")
_YES = {"yes": True, "y": True, "true": True, "1": True}
_NO = {"no": False, "n": False, "false": False, "0": False}
_NUMBER = re.compile(r"\d+(?:\.\d+)?|\.\d+", re.ASCII)


class Tags:
    """The attributes of a block; each method takes one away and gives None where it is absent.

    Parameters
    ----------
    context : Context
    piece : Piece
        A block.
    """

    def __init__(self, context: Context, piece: Piece) -> None:
        self._context = context
        self._piece = piece
        self._left: list[tuple[str, str]] = [(a.tag, a.text) for a in piece.attributes]

    def text(self, tag: str) -> str:
        """Take a text, "" where it is absent."""
        values = [text for name, text in self._left if name == tag]
        self._left = [(name, text) for name, text in self._left if name != tag]
        if len(set(values)) > 1:
            said = f"attribute {tag} stands twice: {listed(values)}"
            remedy = "Leave one value."
            self._context.faults.error(Code.VALUE_UNREAD, said, remedy, origin=self._piece.origin)
        return values[0] if values else ""

    def peek(self, tag: str) -> str:
        """Give a text and leave it, "" where it is absent."""
        return next((text for name, text in self._left if name == tag), "")

    def left(self) -> tuple[tuple[str, str], ...]:
        """List tags and texts that were not taken."""
        return tuple(self._left)

    def drop(self, tag: str) -> None:
        """Take a tag without reading it."""
        self._left = [(name, text) for name, text in self._left if name != tag]

    def force(self, tag: str) -> Force | None:
        """Take a force."""
        return self._parsed(tag, lambda text: parse_force(text, self._context.style))

    def stiffness(self, tag: str) -> Force | None:
        """Take a stiffness."""
        return self._parsed(tag, lambda text: parse_stiffness(text, self._context.style))

    def line_load(self, tag: str) -> LineLoad | None:
        """Take a weight by length."""
        return self._parsed(tag, lambda text: parse_line_load(text, self._context.style))

    def length(self, tag: str) -> Length | None:
        """Take a length or an elevation in the drawing's unit."""
        comma = self._context.style.decimal_comma
        unit = self._context.unit
        return self._parsed(tag, lambda text: parse_length(text, unit, decimal_comma=comma))

    def other(self, tag: str, parse: Callable[[str], float]) -> float | None:
        """Take a quantity that another parser reads."""
        return self._parsed(tag, parse)

    def number(self, tag: str) -> float | None:
        """Take a number without unit, zero or more."""
        text = self.text(tag)
        if not text:
            return None
        if _NUMBER.fullmatch(text):
            return float(text)
        self.unread(tag, text, "Write a number, as 0.5.")
        return None

    def yes(self, tag: str) -> bool:
        """Take yes or no; absent is no."""
        text = self.text(tag)
        known = {**_YES, **_NO, "": False}
        if text.casefold() not in known:
            self.unread(tag, text, "Write yes or no.")
        return known.get(text.casefold(), False)

    def unread(self, tag: str, text: str, remedy: str) -> None:
        """Tell that a value is none of those that a tag may have."""
        said = f'attribute {tag} is "{text}"'
        faults = self._context.faults
        faults.error(Code.VALUE_UNREAD, said, remedy, origin=self._piece.origin, raw=text)

    def finish(self) -> None:
        """Tell what was not taken: a force stops, other attributes are listed."""
        faults, origin = self._context.faults, self._piece.origin
        others = []
        for tag, text in self._left:
            if looks_like_force(text):
                said = f'attribute {tag} is not known, but "{text}" reads as a force'
                remedy = "Rename the tag, add an alias in [cases], or blank it."
                faults.error(Code.TAG_UNKNOWN_FORCE, said, remedy, origin=origin, raw=text)
            else:
                others.append(f'{tag} "{text}"')
        if others:
            faults.note(Code.TAG_UNKNOWN, f"attributes not known: {listed(others)}", origin=origin)

    def _parsed(self, tag: str, parse: Callable[[str], _T]) -> _T | None:
        text = self.text(tag)
        if not text:
            return None
        try:
            return parse(text)
        except QuantityError as error:
            self._context.faults.doubt(
                error, origin=self._piece.origin, raw=text, what=f"attribute {tag}"
            )
            return None
