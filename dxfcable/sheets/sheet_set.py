"""A set of sheets: names of files, numbers that stay, the index.

Numbers are given in the order of the drawings' names, then of their cables. They are read back
from the index of the last run, so that a sheet keeps its number when others come or go.
"""

from __future__ import annotations

import csv
import io
import re
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.drawing.sheets import Table
from dxfcable.errors import DxfcableError

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

INDEX = "index.csv"
_HEAD = ("number", "rev", "title", "drawing", "cables", "file", "sheets", "size", "scale", "status")
_CHECK = "-check"


@dataclass(frozen=True, slots=True, kw_only=True)
class IndexRow:
    """One line of the index: the sheets of one cable, or of those that share sheets."""

    number: str
    rev: str
    title: str
    drawing: str
    cables: str
    file: str
    sheets: int
    size: str
    scale: str
    status: str

    def cells(self) -> tuple[str, ...]:
        """Give its fields as texts, in the order of the head."""
        return tuple(str(getattr(self, name)) for name in _HEAD)


def read_index(text: str, name: str) -> tuple[IndexRow, ...]:
    """Read the index of an earlier run.

    Parameters
    ----------
    text : str
        CSV as `write_index` writes it.
    name : str
        Of the file, for messages.

    Returns
    -------
    tuple of IndexRow

    Raises
    ------
    DxfcableError
        With code `output`, where it is something else, which must not be overwritten.
    """
    rows = list(csv.reader(io.StringIO(text)))
    if not rows or tuple(rows[0]) != _HEAD:
        raise _foreign(name)
    found = []
    for row in rows[1:]:
        if len(row) != len(_HEAD) or not row[6].isdecimal():
            raise _foreign(name)
        facts = dict(zip(_HEAD, row, strict=True))
        count = int(facts.pop("sheets"))
        found.append(IndexRow(sheets=count, **facts))
    return tuple(found)


def _foreign(name: str) -> DxfcableError:
    message = f"{name} is no index of sheets, and would be overwritten"
    return DxfcableError(message, code="output", remedy="Name another folder, or move that file.")


def write_index(rows: Iterable[IndexRow]) -> str:
    """Write the index as CSV, by number."""
    stream = io.StringIO()
    writer = csv.writer(stream, lineterminator="\n")
    writer.writerow(_HEAD)
    writer.writerows(row.cells() for row in in_order(rows))
    return stream.getvalue()


def in_order(rows: Iterable[IndexRow]) -> list[IndexRow]:
    """Sort rows by number: the letters before it, then its value."""
    return sorted(rows, key=lambda row: (*_split(row.number), row.file))


def _split(number: str) -> tuple[str, int]:
    match = re.fullmatch(r"(.*?)(\d*)", number, re.DOTALL)
    assert match is not None
    return match[1], int(match[2] or 0)


@dataclass(slots=True)
class Numbers:
    """Gives numbers: known files keep theirs, new ones get the next.

    Attributes
    ----------
    known : dict of str to str
        Number of each file of earlier runs.
    """

    known: dict[str, str] = field(default_factory=dict)

    def number(self, file: str, prefix: str) -> str:
        """Give the number of a file."""
        held = self.known.get(file)
        if held is not None and _split(held)[0] == prefix:
            return held
        taken = [_split(number) for number in self.known.values()]
        last = max((value for before, value in taken if before == prefix), default=0)
        given = f"{prefix}{last + 1:03d}"
        self.known[file] = given
        return given


def page_names(stem: str, count: int, taken: Iterable[str]) -> tuple[str, ...]:
    """Name the files of one cable's sheets: the second has `-2` behind, the third `-3`.

    Parameters
    ----------
    stem : str
        Of the first.
    count : int
        Number of sheets.
    taken : iterable of str
        First sheets of other cables; where one of them is called so, `-sheet-2` is used.

    Examples
    --------
    >>> page_names("roof-C1", 3, [])
    ('roof-C1', 'roof-C1-2', 'roof-C1-3')
    """
    folded = {name.casefold() for name in taken}
    names = [stem]
    for number in range(2, count + 1):
        name = f"{stem}-{number}"
        names.append(f"{stem}-sheet-{number}" if name.casefold() in folded else name)
    return tuple(names)


def check_name(stem: str, taken: Iterable[str]) -> str:
    """Name the file of a checker's page."""
    name = f"{stem}{_CHECK}"
    return f"{name}-page" if name.casefold() in {n.casefold() for n in taken} else name


def index_table(rows: Sequence[IndexRow]) -> Table:
    """Give the table of the index sheet."""
    ordered = in_order(rows)
    return Table(
        key="index",
        title="INDEX OF SHEETS",
        head=tuple(name.upper() for name in _HEAD),
        rows=tuple(row.cells() for row in ordered),
        lefts=(0, 1, 2, 3, 4, 5, 7, 8, 9),
    )
