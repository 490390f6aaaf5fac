"""Every handle of a drawing as a number, read all at once."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.bytes.pairs import texts

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.drawing.bytes.pairs import Tags
    from dxfcable.drawing.bytes.scan import Block

_AT_ONCE = 1 << 14
_HEX = np.full(256, 255, np.uint8)
for _digits in (b"0123456789abcdef", b"0123456789ABCDEF"):
    _HEX[np.frombuffer(_digits, np.uint8)] = np.arange(16, dtype=np.uint8)


def read_handles(
    data: bytes, tags: Tags, record_of: NDArray[np.int32], sections: tuple[Block, ...]
) -> tuple[NDArray[np.uint64], bool]:
    """Read all handles, and tell whether an entity has one."""
    named = {section.name: section for section in sections}
    which = np.flatnonzero(np.isin(tags.codes, (5, 105)))
    record = record_of[which]
    is_entity = np.zeros(which.size, np.bool_)
    if (entities := named.get("ENTITIES")) is not None:
        is_entity = (record > entities.first) & (record < entities.last)
        is_entity &= (tags.codes[which] == 5) & (tags.ends[which] > tags.values[which])
    if (header := named.get("HEADER")) is not None:
        # $HANDSEED stands at code 5 too, and is no handle in use.
        which = which[(record < header.first) | (record > header.last)]
    blocks = [which[k : k + _AT_ONCE] for k in range(0, which.size, _AT_ONCE)]
    found = [_values(data, tags, block) for block in blocks]
    return np.concatenate([np.empty(0, np.uint64), *found]), bool(is_entity.any())


def _values(data: bytes, tags: Tags, which: NDArray[np.intp]) -> NDArray[np.uint64]:
    """Read some handles as numbers, leaving out what is none."""
    raw = texts(data, tags.values[which], tags.ends[which], 16)
    grid = raw.view(np.uint8).reshape(-1, 16)
    value = np.zeros(which.size, np.uint64)
    good = tags.ends[which] - tags.values[which] <= 16
    for column in grid.T:
        digit = _HEX[column]
        there = column != 0
        good &= ~there | (digit < 16)
        value = np.where(there, value * np.uint64(16) + digit, value)
    found: NDArray[np.uint64] = value[good & (grid[:, 0] != 0)]
    return found
