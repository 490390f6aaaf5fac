"""A cable's record in the units that its drawing speaks now."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.errors import LayoutError
from dxfcable.model import Finding, RuleKind, Severity
from dxfcable.units import convert

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.model import Layout, Rule
    from dxfcable.recorded import CableRecord, Cases, RecordedLoad

_FORCES = (RuleKind.MAX_TENSION, RuleKind.PULL)


def in_units_of(
    layout: Layout, records: Mapping[str, CableRecord]
) -> tuple[dict[str, CableRecord], tuple[Finding, ...]]:
    """Give records in the layout's force unit.

    Parameters
    ----------
    layout : Layout
        As drawn now; the first load text decides on the unit of force.
    records : mapping of str to CableRecord
        By mark.

    Returns
    -------
    dict of str to CableRecord, tuple of Finding
        The note says what was converted.

    Raises
    ------
    LayoutError
        Where the drawing's unit of length is another than the record's: nothing can be held.
    """
    result, notes = {}, []
    for mark, record in records.items():
        if record.length_unit != layout.length_unit:
            fault = Finding(
                code="record-units",
                severity=Severity.ERROR,
                text=f"cable {mark} was solved in {record.length_unit}, and the drawing is now "
                f"read in {layout.length_unit}",
                remedy=f"Give back the unit {record.length_unit}, or strip the drawing and solve "
                "it anew.",
                cable=mark,
            )
            raise LayoutError(fault.text, (*layout.findings, fault))
        unit = layout.force_unit
        if unit and record.force_unit and unit != record.force_unit:
            notes.append(
                Finding(
                    code="record-converted",
                    severity=Severity.NOTE,
                    text=f"cable {mark}: its record in {record.force_unit} is used in {unit}",
                    cable=mark,
                )
            )
            record = _converted(record, record.force_unit, unit)
        result[mark] = record
    return result, tuple(notes)


def _converted(record: CableRecord, old: str, new: str) -> CableRecord:
    """Convert every force of a record."""

    def force(value: float) -> float:
        return convert(value, old, new)

    def some(value: float | None) -> float | None:
        return None if value is None else force(value)

    def cases(found: Cases) -> Cases:
        return tuple((case, force(value)) for case, value in found)

    def load(found: RecordedLoad) -> RecordedLoad:
        return replace(
            found, cases=cases(found.cases), drawn=cases(found.drawn), formed=cases(found.formed)
        )

    def rule(found: Rule) -> Rule:
        return replace(found, value=force(found.value)) if found.kind in _FORCES else found

    return replace(
        record,
        force_unit=new,
        rule=rule(record.rule),
        weight=force(record.weight),
        ea=some(record.ea),
        loads=tuple(load(one) for one in record.loads),
        support_loads=tuple((mark, load(one)) for mark, one in record.support_loads),
        heads=tuple(
            replace(
                head,
                mast_ea=some(head.mast_ea),
                stays=tuple(replace(stay, ea=force(stay.ea)) for stay in head.stays),
            )
            for head in record.heads
        ),
    )
