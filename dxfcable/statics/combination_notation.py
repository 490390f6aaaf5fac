"""The notation of combinations with alternatives, read into a tree.

A sum of terms, each with its sign, factor and what it stands for: a case ("1.2D"), or a bracket
with a sum, or several between "or" ("1.6(Lr or S)"). The sign "+-" (also "+/-" and "±") stands
for both. A pattern in square brackets belongs to the term or bracket right before it.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from typing import NoReturn

from dxfcable.statics.combinations import CombinationError
from dxfcable.statics.patterns import pattern_names

DEEPEST = 20

_BLANKS = re.compile(r"\s*")
_BOTH = re.compile(r"(±|\+\s*/?\s*-)|-\s*/?\s*\+")
_SIGN = re.compile(r"[+-]")
_NUMBER = re.compile(r"(\d+(?:\.\d*)?|\.\d+)\s*\*?", re.ASCII)
_NAME = re.compile(r"[A-Za-z][A-Za-z0-9_]*")
_OR = re.compile(r"or\b", re.IGNORECASE)
_OPEN, _CLOSE, _SQUARE, _COLON = (re.compile(c) for c in (r"\(", r"\)", r"\[", ":"))
_PATTERN = re.compile(r"\[([^\[\]]*)\]")
_HINT = 'write factors before cases and a sign between terms, as in "1.2D + 1.6L"'
_NO_CASE = 'a case or a bracket belongs here, as in "1.2D + 1.6L"'


@dataclass(frozen=True, slots=True, kw_only=True)
class Item:
    """One term of a sum.

    Attributes
    ----------
    is_negative : tuple of bool
        One sign, or two where both are meant, in the order typed.
    factor : str
        As typed, "" where there is none.
    name : str
        Of the case as typed, "" for a bracket.
    choices : tuple of tuples of Item
        The sums of a bracket: one, or several between "or".
    patterns : tuple of str
        Parts of the span, one alternative each; "" is all of it.
    """

    is_negative: tuple[bool, ...]
    factor: str
    name: str = ""
    choices: tuple[tuple[Item, ...], ...] = ()
    patterns: tuple[str, ...] = ("",)

    @property
    def is_placed(self) -> bool:
        """Whether it, or anything inside it, carries a pattern."""
        inner = (item.is_placed for choice in self.choices for item in choice)
        return any(self.patterns) or any(inner)


def read_notation(body: str) -> tuple[Item, ...]:
    """Read a combination with alternatives.

    Parameters
    ----------
    body : str
        Without a level prefix.

    Returns
    -------
    tuple of Item
        The terms of the outermost sum.

    Raises
    ------
    CombinationError
        If it does not read; the message quotes the text from the place on.

    Examples
    --------
    >>> dead, choice = read_notation("1.2D + 1.6(Lr or S)")
    >>> dead.factor, dead.name, [item.name for sum_ in choice.choices for item in sum_]
    ('1.2', 'D', ['Lr', 'S'])
    """
    reader = _Reader(body)
    items = reader.terms()
    if reader.sees(_OR):
        reader.fail(
            'put alternatives in brackets, as in "1.2D + 1.6(Lr or S)", or give each '
            "combination for itself (--combo twice)"
        )
    if reader.sees(_CLOSE):
        reader.fail("no bracket is open here")
    if reader.sees(_COLON):
        reader.fail("the level before a colon is service or factored")
    if not reader.is_at_end:
        reader.fail(_HINT)
    return items


class _Reader:
    """Reads from left to right; its place is always behind blanks."""

    def __init__(self, body: str) -> None:
        self._body = body
        self._at = 0
        self._depth = 0
        self.take(_BLANKS)

    @property
    def is_at_end(self) -> bool:
        return self._at == len(self._body)

    def sees(self, pattern: re.Pattern[str]) -> bool:
        return pattern.match(self._body, self._at) is not None

    def take(self, pattern: re.Pattern[str]) -> re.Match[str] | None:
        """Step over what matches here, and the blanks behind it."""
        match = pattern.match(self._body, self._at)
        if match is not None:
            behind = _BLANKS.match(self._body, match.end())
            self._at = behind.end() if behind else match.end()
        return match

    def fail(self, why: str, at: int | None = None) -> NoReturn:
        """Refuse the text, quoted from here or from `at` on."""
        rest = self._body[self._at if at is None else at :]
        place = f'from "{rest}" on' if rest else "at its end"
        message = f'"{self._body}" is not a combination {place}: {why}.'
        raise CombinationError(message)

    def terms(self) -> tuple[Item, ...]:
        """Read a sum up to what is no sign: a closing bracket, an "or", the end."""
        items: list[Item] = []
        while True:
            signs = self._signs()
            if items and not signs:
                return tuple(items)
            items.append(self._item(signs or (False,)))

    def _signs(self) -> tuple[bool, ...]:
        """Read a sign, or two in one; empty where there is none."""
        both = self.take(_BOTH)
        if both is not None:
            return (False, True) if both.group(1) else (True, False)
        single = self.take(_SIGN)
        return () if single is None else (single.group() == "-",)

    def _item(self, signs: tuple[bool, ...]) -> Item:
        start = self._at
        number = self.take(_NUMBER)
        factor = number.group(1) if number else ""
        if self.sees(_OPEN):
            item = Item(is_negative=signs, factor=factor, choices=self._bracket())
        else:
            name = None if self.sees(_OR) else self.take(_NAME)
            if name is None:
                self.fail(_NO_CASE)
            item = Item(is_negative=signs, factor=factor, name=name.group())
        return self._placed(item, start)

    def _bracket(self) -> tuple[tuple[Item, ...], ...]:
        """Read a bracket: the sums between its "or"."""
        opened = self._at
        self._depth += 1
        if self._depth > DEEPEST:
            self.fail(f"brackets stand more than {DEEPEST} deep")
        self.take(_OPEN)
        choices = [self.terms()]
        while self.take(_OR):
            choices.append(self.terms())
        if self.is_at_end:
            self.fail("this bracket is not closed", at=opened)
        if not self.take(_CLOSE):
            self.fail(_HINT)
        self._depth -= 1
        return tuple(choices)

    def _placed(self, item: Item, start: int) -> Item:
        """Give a term the pattern that follows it."""
        opened = self._at
        pattern = self.take(_PATTERN)
        if pattern is None:
            if self.sees(_SQUARE):
                self.fail("this square bracket is not closed")
            return item
        if item.is_placed or self.sees(_SQUARE):
            self.fail("a term takes one pattern, here there are two", at=start)
        try:
            return replace(item, patterns=pattern_names(pattern.group(1)))
        except CombinationError as error:
            self.fail(error.message, at=opened)
