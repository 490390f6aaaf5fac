"""Ids of items: marks made ASCII and told apart."""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Anchorage

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


def anchor_feet(anchorage: Anchorage) -> tuple[str, ...]:
    """Say for each anchor of a support which member ends there.

    Parameters
    ----------
    anchorage : Anchorage
        Its anchors stand at the feet of its stays and of its mast.

    Returns
    -------
    tuple of str
        "STAY FOOT", "STAY 2 FOOT" where there are several, "MAST BASE".
    """
    stays = len(anchorage.stay_feet)
    feet = [
        (foot, "STAY FOOT" if stays == 1 else f"STAY {number} FOOT")
        for number, foot in enumerate(anchorage.stay_feet, start=1)
    ]
    feet += [(anchorage.mast_foot, "MAST BASE")] if anchorage.mast_foot else []
    # An anchor is that of the first member at its foot, so the nearest foot is its own.
    return tuple(
        min(feet, key=lambda foot: math.dist(foot[0], anchor.at))[1] if feet else "ANCHOR"
        for anchor in anchorage.anchors
    )


def anchor_names(anchorage: Anchorage) -> tuple[str, ...]:
    """Name the anchors of a support so that they can be told apart.

    Returns
    -------
    tuple of str
        "ANCHOR A1" by the mark; without one "ANCHOR S1" by the support where it has a single
        anchor, else by the member too: "S1 STAY FOOT", "S1 MAST BASE".
    """
    is_only = len(anchorage.anchors) == 1
    return tuple(
        f"ANCHOR {anchor.mark or anchorage.mark}".strip()
        if anchor.mark or is_only
        else f"{anchorage.mark} {foot}".strip()
        for anchor, foot in zip(anchorage.anchors, anchor_feet(anchorage), strict=True)
    )
