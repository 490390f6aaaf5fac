"""What a drawing keeps of cables that are cut, put before it is solved or revised again."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.built import Standing
from dxfcable.model import Finding, Severity
from dxfcable.recorded import CUT
from dxfcable.recorded_loads import gone, with_recorded
from dxfcable.revising import discarded

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.model import Layout
    from dxfcable.recorded import CableRecord


@dataclass(frozen=True, slots=True, kw_only=True)
class Held:
    """A layout with the loads that cut cables stand under, and what they stand by."""

    layout: Layout
    standing: Mapping[str, Standing]


def with_cut_cables(
    layout: Layout, records: Mapping[str, CableRecord], *, is_reformed: bool
) -> Held:
    """Let cut cables stand as recorded, unless they are to be formed anew.

    Parameters
    ----------
    layout : Layout
        As drawn, a load table's values in it.
    records : mapping of str to CableRecord
        By mark.
    is_reformed : bool
        Whether cut cables are discarded.
    """
    drawn = {cable.mark: cable for cable in layout.cables}
    cut = {mark: r for mark, r in records.items() if r.status == CUT and mark in drawn}
    if is_reformed:
        notes = tuple(discarded(drawn[mark]) for mark in cut)
        return Held(layout=replace(layout, findings=(*layout.findings, *notes)), standing={})
    merged = with_recorded(layout, cut, edits_count=False)
    notes = tuple(
        Finding(
            code="cut-loads-changed",
            severity=Severity.WARNING,
            text=f"cable {mark} is cut and stands as recorded, but its loads changed since: "
            f"{', '.join(marks)}",
            remedy="Give revise --hold cut-length to see what moves, or solve --reform.",
            cable=mark,
            handle=drawn[mark].origin.handle,
            line=drawn[mark].origin.line,
        )
        for mark, marks in merged.edited.items()
        if marks
    )
    whole = merged.layout
    return Held(
        layout=replace(whole, findings=(*whole.findings, *notes)),
        standing={mark: Standing(record=r, delta_t=r.delta_t) for mark, r in cut.items()},
    )


def with_new_loads(layout: Layout, records: Mapping[str, CableRecord]) -> Layout:
    """Take edited load texts as drawn, and for the others the values used last.

    Parameters
    ----------
    layout : Layout
        As drawn, without a load table.
    """
    merged = with_recorded(layout, records, edits_count=True).layout
    notes = tuple(
        Finding(
            code="points-gone",
            severity=Severity.NOTE,
            text=f"cable {cable.mark}: load points {', '.join(missing)} of the record are no "
            "longer drawn",
            cable=cable.mark,
        )
        for cable in layout.cables
        if cable.mark in records and (missing := gone(cable, records[cable.mark]))
    )
    return replace(merged, findings=(*merged.findings, *notes))
