"""What sheets show of a drawing: solved on the way, or as it was solved before.

A drawing that was solved keeps what it was solved with: rules and combinations of the command
line, values of a load table, cables that are cut. Sheets take all of that from its record; a
load text that was edited since counts as it is now.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.asking import Outcome
from dxfcable.pipeline import Work, unique
from dxfcable.recorded import CUT

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.asking import Options
    from dxfcable.model import Finding, Layout
    from dxfcable.recorded import CableRecord

# What a drafter did to labels in the drawing does not show on sheets.
_OF_LABELS = frozenset({"moved", "edited", "restyled"})


def solved_for_sheets(data: bytes, options: Options) -> Outcome:
    """Solve a drawing for its sheets; nothing is painted and nothing written.

    Parameters
    ----------
    data : bytes
        The drawing, solved before or not.
    options : Options

    Returns
    -------
    Outcome
        With layout and solution.

    Raises
    ------
    DrawingError
        Where the file is no drawing that can be read.
    LayoutError
        With all findings, where what is drawn cannot be solved.
    """
    records = Work(data, options).records
    combos = tuple(dict.fromkeys(c for record in records.values() for c in record.combos))
    unit = options.units
    if unit is None and records:  # the drawing's own header may have lost it
        unit = next(iter(records.values())).length_unit
    work = Work(data, replace(options, units=unit, combos=options.combos or combos))
    layout = work.layout(with_table=False)
    stale: tuple[Finding, ...] = ()
    if records:
        from dxfcable.sheets.changed_since import changed_since

        stale = changed_since(layout, records, "the sheet shows")
        layout = _as_used(layout, records)
    if options.loads is not None:
        layout = work.with_loads(layout)
    standing = {}
    if any(record.status == CUT for record in records.values()):
        from dxfcable.revising.keeping import with_cut_cables

        held = with_cut_cables(layout, records, options.settings, is_reformed=False)
        layout, standing = held.layout, dict(held.standing)
    solution = work.solution(layout, standing)
    if any(record.revisions for record in records.values()):
        from dxfcable.revising.revise import kept_revisions

        solution = replace(solution, revisions=kept_revisions(solution, records))
    own = (f for f in work.stripping.findings if f.code not in _OF_LABELS)
    findings = unique((*own, *stale, *layout.findings, *solution.findings))
    return Outcome(findings=findings, layout=layout, solution=solution)


def _as_used(layout: Layout, records: Mapping[str, CableRecord]) -> Layout:
    """Put loads, rules and UNDER as used last where the drawing does not say another."""
    from dxfcable.revising.keeping import with_new_loads

    formed = {mark: record for mark, record in records.items() if record.status != CUT}
    layout = with_new_loads(layout, formed)
    cables = []
    for cable in layout.cables:
        record = records.get(cable.mark)
        if record is None:
            cables.append(cable)
            continue
        rule, under = cable.rule or record.rule, cable.under or record.under
        cables.append(replace(cable, rule=rule, under=under))
    return replace(layout, cables=tuple(cables))
