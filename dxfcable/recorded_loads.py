"""Which loads count after a change: a text edited since the record, else the value used last."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.load_filling import without_mended
from dxfcable.model import Finding, Severity

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.load_filling import Key
    from dxfcable.model import Cable, Layout, LoadPoint
    from dxfcable.recorded import CableRecord, Cases, RecordedLoad

_SAME = 1e-9  # relative: a text read again gives the same number


@dataclass(frozen=True, slots=True, kw_only=True)
class Merged:
    """A layout with the loads that count, and the marks edited since the record, by cable."""

    layout: Layout
    edited: Mapping[str, tuple[str, ...]]


def with_recorded(
    layout: Layout, records: Mapping[str, CableRecord], *, edits_count: bool
) -> Merged:
    """Give each load point of a recorded cable the value that counts.

    Parameters
    ----------
    layout : Layout
        As drawn.
    records : mapping of str to CableRecord
        By mark of the cable; cables without one stay as drawn.
    edits_count : bool
        Whether a text edited since the record wins; else the value used last stands.

    Returns
    -------
    Merged
        Findings about values that only the record has are gone.
    """
    cables, edited, filled = [], {}, {}
    for number, cable in enumerate(layout.cables):
        record = records.get(cable.mark)
        if record is None:
            cables.append(cable)
            continue
        names = {s.key: s.mark for s in cable.supports}
        changed: list[str] = []
        loads = []
        for k, (load, kept) in enumerate(_paired(cable.loads, record.loads)):
            loads.append(_merged(load, kept, changed, edits_count))
            filled[(number, False, k)] = loads[-1]
        at_supports = []
        for k, (key, load) in enumerate(cable.support_loads):
            known = [r for name, r in record.support_loads if name == names.get(key)]
            kept_there = next((r for r in known if r.mark == load.mark), None)
            at_supports.append((key, _merged(load, kept_there, changed, edits_count)))
            filled[(number, True, k)] = at_supports[-1][1]
        edited[cable.mark] = tuple(changed)
        cables.append(replace(cable, loads=tuple(loads), support_loads=tuple(at_supports)))
    merged = replace(layout, cables=tuple(cables))
    valued: dict[Key, LoadPoint] = {key: load for key, load in filled.items() if load.cases}
    findings = tuple(without_mended(layout, merged, valued))
    unit = layout.force_unit or next((r.force_unit for r in records.values()), None)
    return Merged(layout=replace(merged, findings=findings, force_unit=unit), edited=edited)


def gone(cable: Cable, record: CableRecord) -> tuple[str, ...]:
    """List load points of the record that are no longer drawn."""
    drawn = [load.mark for load in cable.loads]
    return tuple(load.mark for load in record.loads if load.mark not in drawn)


def same_cases(first: Cases, second: Cases) -> bool:
    """Tell whether two points carry the same; a case at zero counts as none."""
    a = {case: value for case, value in first if value}
    b = {case: value for case, value in second if value}
    return a.keys() == b.keys() and all(math.isclose(a[k], b[k], rel_tol=_SAME) for k in a)


def listing(cable: Cable, record: CableRecord, unit: str) -> Finding | None:
    """List the loads that differ from those used last, None where none does."""
    words = []
    for load, kept in _paired(cable.loads, record.loads):
        before = kept.cases if kept else ()
        if not same_cases(load.cases, before):
            source = "load table" if load.source == "csv" else "drawing"
            words.append(
                f"{load.mark} {_words(load.cases, unit)} ({source}; was {_words(before, unit)})"
            )
    if not words:
        return None
    return Finding(
        code="loads-changed",
        severity=Severity.NOTE,
        text=f"cable {cable.mark}: loads changed: {', '.join(words)}",
        cable=cable.mark,
    )


def _words(cases: Cases, unit: str) -> str:
    """Write a point's cases."""
    if not cases:
        return "nothing"
    return " ".join(
        f"{value:g} {unit}" if case == "load" else f"{case}={value:g} {unit}"
        for case, value in cases
    )


def _paired(
    loads: Sequence[LoadPoint], kept: Sequence[RecordedLoad]
) -> list[tuple[LoadPoint, RecordedLoad | None]]:
    """Pair drawn and recorded points: in order where the marks agree, else by mark."""
    if [load.mark for load in loads] == [one.mark for one in kept]:
        return list(zip(loads, kept, strict=True))
    known = {one.mark: one for one in kept}
    return [(load, known.get(load.mark)) for load in loads]


def _merged(
    load: LoadPoint, kept: RecordedLoad | None, changed: list[str], edits_count: bool
) -> LoadPoint:
    """Give one point the value that counts; a mark is added to `changed` where it was edited."""
    if kept is None:
        changed.append(load.mark)
        return load
    stated = load.cases
    if not same_cases(load.cases, kept.drawn):
        changed.append(load.mark)
        if edits_count:
            return load
        stated = kept.drawn  # so that the next revision still sees the edit
    if same_cases(load.cases, kept.cases):
        return load
    return replace(
        load,
        cases=kept.cases,
        source=kept.source,
        drawn=_drawn(load) if load.cases else "",
        drawn_cases=stated,
    )


def _drawn(load: LoadPoint) -> str:
    """Give the drafter's words for a value."""
    raw = load.value_origin.raw if load.value_origin else ""
    return (
        raw
        if raw and not set(raw) & set("\\{}\n")
        else " ".join(
            f"{value:g}" if case == "load" else f"{case}={value:g}" for case, value in load.cases
        )
    )
