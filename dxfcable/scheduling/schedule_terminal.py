"""The schedules as tables for a person at a terminal; the caution stands below each.

A table is never cut to the page: a length without its last figures would be another length.
"""

from __future__ import annotations

import unicodedata
from typing import TYPE_CHECKING

from dxfcable.job import CAUTION
from dxfcable.scheduling.schedule_fields import (
    LEVELS,
    Field,
    Kind,
    anchor_fields,
    anchorage_fields,
    cable_fields,
    hanger_fields,
    level_words,
    stay_fields,
    words_for,
)

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable, Sequence

    from dxfcable.scheduling.schedule_fields import Words
    from dxfcable.scheduling.schedule_rows import AnchorageRow, CableRow, Schedules

    Print = Callable[[str], None]
    Lines = Sequence[tuple[Words, Sequence[Field]]]

_GAP = "   "
_RULE = "\N{BOX DRAWINGS LIGHT HORIZONTAL}"
_GEOMETRY = ("mark", "along", "elevation", "deck_elevation", "length", "force", "clamped", "slack")
_OF_LEVEL = ("largest_{}", "largest_{}_combo", "least_{}", "least_{}_combo")


def show_schedules(whole: Schedules, write: Print) -> None:
    """Print all schedules of a drawing.

    Parameters
    ----------
    whole : Schedules
    write : callable
        Prints a line or several as they are.
    """
    for row in whole.cables:
        _show_cable(whole, row, write)
        _show_hangers(whole, row.mark, write)
    _show_anchorages(whole, write)


def _show_cable(whole: Schedules, row: CableRow, write: Print) -> None:
    """Print one cable: its figures one below the other, then its pieces."""
    words = words_for(whole, row)
    known = [(f.label, words.of(f)) for f in cable_fields(whole, row) if words.of(f)]
    write(f"\nCable schedule: {_safe(row.mark)}\n")
    width = max(len(label) for label, _ in known)
    for label, text in known:
        write(f" {label.ljust(width)}{_GAP}{_safe(text)}")
    for combo, why in row.faults:
        write(f" {_safe(combo)}: no determinate shape: {_safe(why)}")
    write("")
    pieces = [
        (
            words,
            (
                Field("name", "piece", Kind.TEXT, piece.name),
                Field("from", "from", Kind.TEXT, piece.start),
                Field("to", "to", Kind.TEXT, piece.end),
                Field("unstressed", "unstressed", Kind.LENGTH, piece.unstressed_length),
                Field("mark", "mark from left pin", Kind.LENGTH, piece.mark),
                Field("measured", "mark as measured", Kind.LENGTH, piece.measured_mark),
            ),
        )
        for piece in row.pieces
    ]
    _table(pieces, write)
    write(f"\n{CAUTION}")


def _show_hangers(whole: Schedules, cable: str, write: Print) -> None:
    """Print the hangers of one cable: geometry, forces of each level, cut lengths."""
    rows = [row for row in whole.hangers if row.cable == cable]
    if not rows:
        return
    lines = [(words_for(whole, row), hanger_fields(whole, row)) for row in rows]
    under = next(row.under for row in whole.cables if row.mark == cable)
    write(f"\nHanger schedule: {_safe(cable)}, lengths and forces under {_safe(under)}\n")
    _table(_only(lines, _GEOMETRY), write)
    if any(
        r.most.combo != r.least.combo or len(row.forces) > 1 for row in rows for r in row.forces
    ):
        for level in LEVELS:
            found = [r for row in rows for r in row.forces if r.level == level]
            if found:
                said = level_words(level, is_assumed=any(r.is_assumed for r in found))
                write(f"\nForces over all states of level {said}\n")
                keys = [key.format(level) for key in _OF_LEVEL]
                _table(_only(lines, ("mark", *keys)), write)
    if any(row.ea or any((*row.lengths.offsets, *row.lengths.fittings)) for row in rows):
        write("\nCut lengths\n")
        all_keys = [field.key for field in lines[0][1]]
        keys = ["mark", *all_keys[all_keys.index("ea") :]]
        shared = _shared(_only(lines, keys))
        if shared:
            write(f" all: {'; '.join(f'{label} {text}' for _, label, text in shared)}\n")
        told = {key for key, _, _ in shared}
        _table(_only(lines, [key for key in keys if key not in told]), write)
    write(f"\n{CAUTION}")


def _show_anchorages(whole: Schedules, write: Print) -> None:
    """Print supports with mast or stay, as formed and in each state."""
    if not whole.anchorages:
        return
    write("\nAnchorage schedule (tension +, compression -, uplift +)\n")
    _table([(words_for(whole, row), _anchorage(whole, row)) for row in whole.anchorages], write)
    write(f"\n{CAUTION}")


def _anchorage(whole: Schedules, row: AnchorageRow) -> list[Field]:
    """Give one line of a support: all its stays and anchors beside each other."""
    fields = [f for f in anchorage_fields(whole, row) if f.key != "heights"]
    counts = [(len(r.found.stays), len(r.found.anchors)) for r in whole.anchorages]
    stays, anchors = (max(column) for column in zip(*counts, strict=True))
    for k in range(stays):
        fields += stay_fields(row, k if k < len(row.found.stays) else None)
    for k in range(anchors):
        fields += anchor_fields(row, k if k < len(row.found.anchors) else None)
    return fields


def _shared(lines: Lines) -> list[tuple[str, str, str]]:
    """Give key, label and words of the columns that say the same in all of several rows."""
    result = []
    for field, *cells in zip(lines[0][1], *(_words_of(line) for line in lines), strict=True):
        if len(cells) > 1 and cells[0] and len(set(cells)) == 1:
            result.append((field.key, field.label, cells[0]))
    return result


def _words_of(line: tuple[Words, Sequence[Field]]) -> list[str]:
    words, fields = line
    return [_safe(words.of(field)) for field in fields]


def _only(lines: Lines, keys: Iterable[str]) -> Lines:
    """Keep some columns, in their order."""
    return [
        (words, [next(f for f in fields if f.key == key) for key in keys])
        for words, fields in lines
    ]


def _table(lines: Lines, write: Print) -> None:
    """Print a table without the columns that are empty in all rows."""
    whole = [_words_of(line) for line in lines]
    heads = lines[0][1]
    columns = []
    for field, *cells in zip(heads, *whole, strict=True):
        if any(cells):
            width = max(_width(text) for text in (field.label, *cells))
            is_text = field.kind is Kind.TEXT
            columns.append([_padded(t, width, is_text=is_text) for t in (field.label, *cells)])
    rows = [f" {_GAP.join(row)}".rstrip() for row in zip(*columns, strict=True)]
    rows.insert(1, f" {_RULE * (sum(_width(c[0]) for c in columns) + 3 * (len(columns) - 1))}")
    for row in rows:
        write(row)


def _padded(text: str, width: int, *, is_text: bool) -> str:
    """Set texts left and quantities right."""
    blanks = " " * (width - _width(text))
    return f"{text}{blanks}" if is_text else f"{blanks}{text}"


def _width(text: str) -> int:
    """Count the columns that a text takes."""
    return sum(1 + (unicodedata.east_asian_width(letter) in "WF") for letter in text)


def _safe(text: str) -> str:
    """Replace what a terminal cannot show: bytes that did not decode, control characters."""
    plain = "".join(c if c.isprintable() else repr(c)[1:-1] for c in text)
    return plain.encode("utf-8", "backslashreplace").decode("utf-8")
