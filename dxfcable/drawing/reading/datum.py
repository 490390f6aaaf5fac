"""Elevations stated at supports: the datum of a cable, and whether they agree."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import coordinate

if TYPE_CHECKING:
    from dxfcable.drawing.reading.context import CableDraft, Context, SupportDraft

_ROUNDING = 1e-9


def read_datum(context: Context, supports: list[SupportDraft], cable: CableDraft) -> float | None:
    """Give elevation minus y of a cable.

    Parameters
    ----------
    context : Context
    supports : list of SupportDraft
    cable : CableDraft

    Returns
    -------
    float or None
        By the leftmost support that states an elevation; None where none does.

    Notes
    -----
    Two elevations may differ from the drawn difference by half their last place, or by
    1/16 in or 1 mm if that is more.
    """
    stated = [supports[key] for key in cable.keys if supports[key].elevation is not None]
    if not stated:
        text = (
            f"cable {cable.mark} has no elevation: elevations are as drawn in Y, labels are "
            f"differences from {supports[cable.keys[0]].mark}"
        )
        remedy = f"State EL in block {context.settings.blocks.support}."
        origin = supports[cable.keys[0]].origin
        context.faults.note(Code.NO_DATUM, text, remedy, origin=origin, cable=cable.mark)
        return None
    first = stated[0]
    assert first.elevation is not None
    for other in stated[1:]:
        assert other.elevation is not None
        said = other.elevation.value - first.elevation.value
        drawn = other.at[1] - first.at[1]
        last = max(first.elevation.last_place, other.elevation.last_place)
        allowed = max(last / 2, context.finest())
        if abs(said - drawn) > allowed + _ROUNDING * max(1.0, abs(drawn)):
            text = (
                f"elevations of {first.mark} and {other.mark} differ by {coordinate(said)}, "
                f"drawn is {coordinate(drawn)}"
            )
            remedy = "Correct EL or the drawing."
            context.faults.error(
                Code.DATUM_CONFLICT, text, remedy, origin=other.origin, cable=cable.mark
            )
    return first.elevation.value - first.at[1]
