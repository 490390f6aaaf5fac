"""Clamps of a cut cable put elsewhere: its unstressed length shared out anew."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.model import Finding, Severity
from dxfcable.statics.catenary_piece import flexibility
from dxfcable.statics.catenary_width import unstressed_for_width

if TYPE_CHECKING:
    from dxfcable.model import Cable, FormedCable
    from dxfcable.recorded import CableRecord


def with_clamps_moved(
    cable: Cable, record: CableRecord, before: FormedCable
) -> tuple[CableRecord, Finding | None]:
    """Clamp the load points where they are drawn now, on the cable as it stood.

    Parameters
    ----------
    cable : Cable
        As drawn now.
    record : CableRecord
        Of the cut cable.
    before : FormedCable
        The cable as it stood; its whole unstressed length stays.

    Returns
    -------
    CableRecord, Finding or None
        With the stations drawn and new pieces; the note on what was moved.
    """
    if len(cable.loads) != len(record.loads):
        return record, None
    moved = [
        f"{load.mark} from x {kept.x:.6g} to {load.x:.6g}"
        for load, kept in zip(cable.loads, record.loads, strict=True)
        if load.x != kept.x
    ]
    if not moved:
        return record, None
    stations = [_unstressed_up_to(before, record, load.x) for load in cable.loads]
    whole = math.fsum(record.pieces)
    pieces = np.diff([0.0, *stations, whole]).tolist()
    loads = tuple(
        replace(kept, x=load.x, y=load.y)
        for load, kept in zip(cable.loads, record.loads, strict=True)
    )
    note = Finding(
        code="clamps-moved",
        severity=Severity.NOTE,
        text=f"cable {cable.mark}: clamps moved along the cable: {', '.join(moved)}",
        cable=cable.mark,
    )
    return replace(record, loads=loads, pieces=tuple(pieces)), note


def _unstressed_up_to(before: FormedCable, record: CableRecord, x: float) -> float:
    """Return the unstressed length from the left end to a station of the standing cable."""
    pull = before.horizontal or 0.0
    total = 0.0
    for piece in before.segments:
        if x >= piece.end[0]:
            total += piece.unstressed_length
            continue
        left = pull * math.tan(math.radians(piece.angle_left))
        right = pull * math.tan(math.radians(piece.angle_right))
        weight = (right - left) / piece.unstressed_length if before.weight else 0.0
        part = unstressed_for_width(
            np.asarray(pull),
            np.asarray(left),
            weight,
            np.asarray(x - piece.start[0]),
            flexibility(before.ea),
            1.0 + (record.alpha or 0.0) * record.delta_t,
        )
        return total + float(part)
    return total
