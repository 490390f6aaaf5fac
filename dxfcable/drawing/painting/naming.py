"""Ids of items: marks made ASCII and told apart."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

_LONGEST = 40  # an id of several marks must stay below the 255 bytes of a DXF string
_UNFIT = re.compile(r"[^A-Za-z0-9._+'-]")


def id_part(mark: str, fallback: str) -> str:
    """Turn a mark into a part of an id: ASCII, without blanks and slashes.

    Examples
    --------
    >>> id_part("P 1/2", "P")
    'P_1_2'
    """
    return _UNFIT.sub("_", mark.strip())[:_LONGEST] or fallback


def unique_parts(marks: Sequence[str], fallback: str) -> tuple[str, ...]:
    """Turn marks into parts of ids; the second of equal ones gets `~2`, the third `~3`.

    Examples
    --------
    >>> unique_parts(["S", "P1", "S"], "N")
    ('S', 'P1', 'S~2')
    """
    seen: dict[str, int] = {}
    parts = []
    for mark in marks:
        part = id_part(mark, fallback)
        # CAD programs and drafters read marks without regard to case, so ids do too.
        folded = part.casefold()
        seen[folded] = seen.get(folded, 0) + 1
        parts.append(part if seen[folded] == 1 else f"{part}~{seen[folded]}")
    return tuple(parts)
