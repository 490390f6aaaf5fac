"""Tables and lines for a pipe or a file, laid out without loading rich.

What rich would print there at a fixed width is laid out here to the same letters, which
`tests/test_plain_output.py` holds side by side. What is not plain - letters of other than one
column, a word or a table wider than the page - is handed on to rich.
"""

from __future__ import annotations

import os
import re
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, TextIO

if TYPE_CHECKING:
    from rich.console import Console
    from rich.table import Table as RichTable

WIDTH = 110
_GAP = "   "
_WORD = re.compile(r"\s*\S+\s*")
_COLORING = ("FORCE_COLOR", "TTY_COMPATIBLE")  # by which rich is told to treat a pipe as a terminal


def is_plain(stream: TextIO) -> bool:
    """Tell whether a stream takes text as it is: no terminal, nor to be treated as one."""
    encoding = (stream.encoding or "utf-8").lower()
    asked = any(os.environ.get(name) for name in _COLORING)
    return not stream.isatty() and not asked and encoding.startswith("utf")


def rich_console(stream: TextIO) -> Console:
    """Return rich's console, which prints text as it is."""
    from rich.console import Console

    width = None if stream.isatty() else WIDTH
    return Console(file=stream, highlight=False, markup=False, emoji=False, width=width)


@dataclass(frozen=True, slots=True, eq=False)
class Table:
    """A table whose first column is text and whose others are numbers."""

    columns: tuple[str, ...]
    rows: list[tuple[str, ...]] = field(default_factory=list)

    def add_row(self, *cells: str) -> None:
        """Add a row, a cell for each column."""
        self.rows.append(cells)

    def lines(self) -> list[str] | None:
        """Lay the table out, None where that takes rich."""
        whole = [self.columns, *self.rows]
        if not all(_is_simple(cell) for row in whole for cell in row):
            return None
        widths = [max(map(len, column)) for column in zip(*whole, strict=True)]
        total = sum(widths) + len(_GAP) * (len(widths) - 1)
        if not 0 < total <= WIDTH - 2:
            return None
        head, *body = [_row(cells, widths) for cells in whole]
        blank = " " * (total + 2)
        return [blank, head, f" {total * chr(0x2500)} ", *body, blank]

    def __rich__(self) -> RichTable:
        """Return the same table for a terminal."""
        from rich.box import SIMPLE_HEAD
        from rich.table import Table as RichTable

        table = RichTable(box=SIMPLE_HEAD, pad_edge=False)
        for number, column in enumerate(self.columns):
            table.add_column(column, justify="left" if number == 0 else "right", no_wrap=True)
        for row in self.rows:
            table.add_row(*row)
        return table


class PlainConsole:
    """Prints to a stream that is no terminal; styles are left out."""

    def __init__(self, stream: TextIO) -> None:
        self._stream = stream

    def print(
        self, what: str | Table = "", *, style: str | None = None, soft_wrap: bool = False
    ) -> None:
        """Print a text, its long lines parted at blanks unless `soft_wrap`, or a table."""
        lines = what.lines() if isinstance(what, Table) else _lines(what, soft_wrap=soft_wrap)
        if lines is None:
            rich_console(self._stream).print(what, style=style, soft_wrap=soft_wrap)
        else:
            self._stream.write("".join(f"{line}\n" for line in lines))


def _is_simple(text: str) -> bool:
    """Tell whether every letter takes one column."""
    return text.isascii() and (text.isprintable() or not text)


def _row(cells: tuple[str, ...], widths: list[int]) -> str:
    """Lay out one row."""
    first, *others = zip(cells, widths, strict=True)
    words = [first[0].ljust(first[1]), *(cell.rstrip().rjust(width) for cell, width in others)]
    return f" {_GAP.join(words)} "


def _lines(text: str, *, soft_wrap: bool) -> list[str] | None:
    """Part a text into lines, None where that takes rich."""
    lines: list[str] = []
    for line in text.split("\n"):
        if not _is_simple(line):
            return None
        if soft_wrap or len(line) <= WIDTH:
            lines.append(line)
            continue
        parts = _parted(line)
        if parts is None:
            return None
        lines += parts
    return lines


def _parted(line: str) -> list[str] | None:
    """Part a line before the words that pass the page; None where a word is wider than that."""
    parts: list[str] = []
    start, used = 0, 0
    for word in _WORD.finditer(line):
        size = len(word[0].rstrip())
        if size > WIDTH:
            return None
        if used + size > WIDTH:
            parts.append(line[start : word.start()][:WIDTH])
            start, used = word.start(), 0
        used += len(word[0])
    return [*parts, line[start:][:WIDTH]]
