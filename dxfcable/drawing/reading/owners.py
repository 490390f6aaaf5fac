"""Which cable something belongs to: the nearest closing string, if no other is nearly as near."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.claims import claim
from dxfcable.drawing.reading.faults import coordinate

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.reading.context import CableDraft, Context
    from dxfcable.model import Origin


def owner(
    context: Context,
    cables: Sequence[CableDraft],
    distances: Sequence[float],
    what: str,
    origin: Origin,
) -> CableDraft | None:
    """Find the cable that something belongs to, or tell that it may be two.

    Parameters
    ----------
    context : Context
    cables : sequence of CableDraft
    distances : sequence of float
        To each cable's closing string.
    what : str
        For the message, as "the data block".
    origin : Origin

    Returns
    -------
    CableDraft or None
        The only cable whatever its distance; None where it may be two.
    """
    if len(cables) <= 1:
        return cables[0] if cables else None
    found = claim(distances, context.settings.limits.text_ratio)
    if found.is_clear:
        return cables[found.first]
    names = [
        f"the string at {coordinate(cables[i].string[0][0])} to "
        f"{coordinate(cables[i].string[-1][0])} ({coordinate(gap)} away)"
        for i, gap in (
            (found.first, found.first_distance),
            (found.second, found.second_distance),
        )
    ]
    text = f"{what} may belong to {names[0]} or {names[1]}"
    ratio = context.settings.limits.text_ratio
    remedy = f"Move it so that the next string is {ratio:g} times as far."
    context.faults.error(Code.OWNER_AMBIGUOUS, text, remedy, origin=origin)
    return None
