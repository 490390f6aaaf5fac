"""What the drafter changed since a drawing was issued, told where new figures are shown.

Sheets and schedules show the drawing as it stands; what was issued may say something else.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.model import Finding, Severity
from dxfcable.pipeline import Work
from dxfcable.revising.recorded_units import in_units_of
from dxfcable.verifying.staleness import reasons

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.asking import Options
    from dxfcable.model import Layout
    from dxfcable.recorded import CableRecord

_GRAIN = 1e-6  # drawing units: what programs that save a drawing may round off


def changed_since(
    drawn: Layout, records: Mapping[str, CableRecord], shown: str
) -> tuple[Finding, ...]:
    """Say what differs between the cables of a drawing and their records.

    Parameters
    ----------
    drawn : Layout
        As read, before anything of the records or of a load table is put into it.
    records : mapping of str to CableRecord
        By mark; empty for a drawing that was never issued.
    shown : str
        What shows the figures, with its verb, as "the sheet shows".

    Returns
    -------
    tuple of Finding
        A warning `stale` for each cable that changed.
    """
    same = {m: r for m, r in records.items() if r.length_unit == drawn.length_unit}
    own, _ = in_units_of(drawn, same)
    cables = {cable.mark: cable for cable in drawn.cables}
    numbers = [abs(c) for r in own.values() for s in r.supports for c in (s.x, s.y)]
    grain = _GRAIN + math.ulp(max(numbers, default=1.0))
    found = []
    for mark, record in records.items():
        cable = cables.get(mark)
        if mark in own:
            why = reasons(own[mark], cable, drawn.supports, grain)
        else:
            why = [f"it was solved in {record.length_unit}, now read in {drawn.length_unit}"]
        if not why:
            continue
        now = "no such cable" if cable is None else "it as it is drawn now"
        origin = None if cable is None else cable.origin
        found.append(
            Finding(
                code="stale",
                severity=Severity.WARNING,
                cable=mark,
                handle=None if origin is None else origin.handle,
                text=f"cable {mark}: the drawing changed since it was issued: {'; '.join(why)}; "
                f"{shown} {now}",
                remedy="Issue it again with revise, or give back what was drawn.",
            )
        )
    return tuple(found)


def stale_in(data: bytes, options: Options, shown: str) -> tuple[Finding, ...]:
    """Say what `changed_since` finds in a drawing; nothing where it was never issued.

    Parameters
    ----------
    data : bytes
        The drawing.
    options : Options
    shown : str
        As `changed_since` takes it.
    """
    work = Work(data, options)
    if not work.records:
        return ()
    return changed_since(work.layout(with_table=False), work.records, shown)
