"""Hangers: from the cable down to the deck, else to the load points as drawn."""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING

from dxfcable.model import LoadSymbol

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Cable, LoadPoint, Point
    from dxfcable.solving.remarks import Remarks


def hanger_feet(
    cable: Cable, heights: Sequence[float], remarks: Remarks
) -> tuple[float | None, ...]:
    """Find the lower end of each load point's hanger.

    Parameters
    ----------
    heights : sequence of float
        Ordinates of the cable at its load points [length].

    Returns
    -------
    tuple of float or None
        Ordinates; None where there is no hanger: at arrows, and where the deck or the drawn
        point lies on or above the cable.
    """
    feet = [_foot(cable, load) for load in cable.loads]
    below = [
        foot if foot is not None and foot < height else None
        for foot, height in zip(feet, heights, strict=True)
    ]
    if cable.deck:
        above = [
            load.mark
            for load, foot, kept in zip(cable.loads, feet, below, strict=True)
            if foot is not None and kept is None
        ]
        if above:
            remarks.say(
                "deck-above-cable",
                f"cable {cable.mark}: the cable lies on or under the deck at {', '.join(above)}; "
                "no hanger there",
            )
        beyond = [load.mark for load in cable.loads if ordinate_at(cable.deck, load.x) is None]
        if beyond:
            remarks.say(
                "deck-too-short",
                f"cable {cable.mark}: the deck line does not reach {', '.join(beyond)}; "
                "no hanger there",
            )
    elif any(foot is not None for foot in below):
        remarks.say(
            "hangers-to-points",
            f"cable {cable.mark}: no deck line is drawn, so hangers run down to the load points "
            "as drawn",
        )
    return tuple(below)


def _foot(cable: Cable, load: LoadPoint) -> float | None:
    """Return what a hanger would run down to."""
    if cable.deck:
        return ordinate_at(cable.deck, load.x)
    return None if load.symbol is LoadSymbol.ARROW else load.y


def ordinate_at(line: Sequence[Point], x: float) -> float | None:
    """Return the ordinate of a polyline at x, None outside it; the lowest where it folds back.

    Examples
    --------
    >>> ordinate_at([(0.0, 1.0), (10.0, 3.0)], 5.0)
    2.0
    """
    found = []
    for (x0, y0), (x1, y1) in pairwise(line):
        if x0 == x1 == x:
            found.append(min(y0, y1))
        elif min(x0, x1) <= x <= max(x0, x1):
            found.append(y0 + (x - x0) / (x1 - x0) * (y1 - y0))
    return min(found, default=None)
