"""What a drawing keeps of cables that are cut, put before it is solved or revised again."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.errors import LayoutError
from dxfcable.model import Finding, Severity
from dxfcable.recorded import CUT
from dxfcable.revising.past import as_formed, hangers_of
from dxfcable.revising.recorded_loads import gone, listing, with_recorded
from dxfcable.revising.revise import discarded
from dxfcable.solving.built import Standing

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.model import Layout
    from dxfcable.recorded import CableRecord
    from dxfcable.settings import Settings


@dataclass(frozen=True, slots=True, kw_only=True)
class Held:
    """A layout with the loads that cut cables stand under, and what they stand by."""

    layout: Layout
    standing: Mapping[str, Standing]


def with_cut_cables(
    layout: Layout, records: Mapping[str, CableRecord], settings: Settings, *, is_reformed: bool
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
        listed = [listing(drawn[mark], r, layout.force_unit or "") for mark, r in cut.items()]
        notes = (*(discarded(drawn[mark]) for mark in cut), *(n for n in listed if n))
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
            layer=drawn[mark].origin.layer or None,
            at=drawn[mark].origin.at,
        )
        for mark, marks in merged.edited.items()
        if marks
    )
    whole = merged.layout
    try:
        start = as_formed(whole, cut, settings)
    except LayoutError:  # its own solve says why
        start = {}
    return Held(
        layout=replace(whole, findings=(*whole.findings, *notes)),
        standing={
            mark: Standing(
                record=record,
                delta_t=record.delta_t,
                hangers=hangers_of(start.get(mark)),
                formed_pull=start[mark].horizontal if mark in start else None,
            )
            for mark, record in cut.items()
        },
    )


def dropped_tables(layout: Layout, records: Mapping[str, CableRecord]) -> tuple[Finding, ...]:
    """Say of formed cables which values of an earlier load table the drawing overrules again."""
    notes = []
    for cable in layout.cables:
        record = records.get(cable.mark)
        if record is None or record.status == CUT:
            continue
        merged = with_recorded(layout, {cable.mark: record}, edits_count=True).layout
        kept = next(c for c in merged.cables if c.mark == cable.mark)
        marks = [
            after.mark
            for now, after in zip(cable.loads, kept.loads, strict=True)
            if after.source == "csv" and after.cases != now.cases
        ]
        if marks:
            text = f"cable {cable.mark}: values of an earlier load table are not used at"
            notes.append(
                Finding(
                    code="table-dropped",
                    severity=Severity.NOTE,
                    text=f"{text} {', '.join(marks)}; the drawing's are",
                    remedy="Give --loads again, or revise --hold rule, which keeps them.",
                    cable=cable.mark,
                    handle=cable.origin.handle,
                    line=cable.origin.line,
                    layer=cable.origin.layer or None,
                    at=cable.origin.at,
                )
            )
    return tuple(notes)


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
