"""Handles for what we add: above all others, or in gaps at the very end of the range."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.bytes.scan import HANDLE_LIMIT

if TYPE_CHECKING:
    from collections.abc import Iterator

    from dxfcable.drawing.bytes.scan import Scan


class Allotter:
    """Gives out handles that stand nowhere in a drawing.

    `seed` afterwards is the next free handle as $HANDSEED wants it, or None where handles
    came from gaps and the seed need not change.
    """

    def __init__(self, drawing: Scan, taken: frozenset[int] = frozenset()) -> None:
        greatest = int(drawing.handles.max()) if drawing.handles.size else 0
        greatest = max([greatest, *taken])
        raw = drawing.header_value("$HANDSEED") or b""
        try:
            seed = int(raw, 16)
        except ValueError:
            seed = 0
        self._drawing = drawing
        self._taken = taken
        self._next = max(seed if 0 < seed < HANDLE_LIMIT else 0, greatest + 1)
        self._gaps: Iterator[int] | None = None
        self._given: set[int] = set()

    def __call__(self) -> str:
        """Return a new handle."""
        if self._gaps is None and self._next + 1 < HANDLE_LIMIT:
            handle = self._next
            self._next += 1
            self._given.add(handle)
            return f"{handle:X}"
        if self._gaps is None:
            self._gaps = self._free()
        return f"{next(self._gaps):X}"

    @property
    def seed(self) -> str | None:
        """The next free handle, None where no seed above all handles exists."""
        return None if self._gaps is not None else f"{self._next:X}"

    def _free(self) -> Iterator[int]:
        """Yield handles not in use, from the top of the range downwards."""
        used = {int(h) for h in self._drawing.handles} | self._taken | self._given
        for handle in range(HANDLE_LIMIT - 2, 0, -1):
            if handle not in used:
                yield handle
