"""Take bytes out of a file and put bytes in, leaving every other byte where it was."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable


@dataclass(frozen=True, slots=True)
class Change:
    """Bytes `start` to `end` of the file are replaced by `new`."""

    start: int
    end: int
    new: bytes = b""


def line_end_before(data: bytes, at: int) -> bytes:
    """Return the line end that stands before byte `at`, which begins a line."""
    if at >= 2 and data[at - 2 : at] == b"\r\n":
        return b"\r\n"
    return b"\n"


def line_end_of(data: bytes, at: int) -> bytes:
    """Return the line end of the line that begins at `at`."""
    end = data.find(b"\n", at)
    if end < 0:
        return line_end_before(data, at)
    return b"\r\n" if end > at and data[end - 1 : end] == b"\r" else b"\n"


def pieces(data: bytes, changes: Iterable[Change]) -> list[memoryview]:
    """Return the changed file as pieces to be written one after the other.

    Raises
    ------
    ValueError
        Where two changes overlap.
    """
    view = memoryview(data)
    result: list[memoryview] = []
    at = 0
    for change in sorted(changes, key=lambda c: (c.start, c.end)):
        if change.start < at:
            message = f"changes overlap at byte {change.start}"
            raise ValueError(message)
        if change.start > at:
            result.append(view[at : change.start])
        if change.new:
            result.append(memoryview(change.new))
        at = change.end
    result.append(view[at:])
    return result


def apply(data: bytes, changes: Iterable[Change]) -> bytes:
    """Return the changed file."""
    return b"".join(pieces(data, changes))
