"""Which loads count after a change: a text edited since the record, else the value used last."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.loads.load_filling import without_mended
from dxfcable.model import Finding, Severity

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.loads.load_filling import Key
    from dxfcable.model import Cable, Layout, LoadPoint
    from dxfcable.recorded import CableRecord, Cases, RecordedLoad

_SAME_PLACE = 1e-6  # of what the points span
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
    drawn = [id(kept) for _, kept in _paired(cable.loads, record.loads)]
    return tuple(load.mark for load in record.loads if id(load) not in drawn)


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


def partners(
    stations: Sequence[tuple[str, float]], kept: Sequence[tuple[str, float]]
) -> list[int | None]:
    """Find the recorded point of each drawn one.

    Parameters
    ----------
    stations, kept : sequence of (str, float)
        Mark and x of the points, left to right [length].

    Returns
    -------
    list of int or None
        Place among `kept`, None for a point that is new. Marks given by position change when a
        point is added or taken out, so the station counts first, then a mark that is alone on
        both sides, then the order, where as many are left on both sides.
    """
    every = [x for _, x in (*stations, *kept)]
    reach = _SAME_PLACE * (max(every, default=0.0) - min(every, default=0.0))
    found: list[int | None] = [None] * len(stations)
    free = list(range(len(kept)))
    for k, (mark, x) in enumerate(stations):
        near = [j for j in free if abs(kept[j][1] - x) <= reach]
        if near:
            place = next((j for j in near if kept[j][0] == mark), near[0])
            found[k] = place
            free.remove(place)
    left = [k for k, j in enumerate(found) if j is None]
    names, old = [stations[k][0] for k in left], [kept[j][0] for j in free]
    if len(left) == len(free) and len(set(names)) == len(names) and set(names) == set(old):
        for k in left:
            found[k] = next(j for j in free if kept[j][0] == stations[k][0])
    elif len(left) == len(free):
        for k, j in zip(left, free, strict=True):
            found[k] = j
    return found


def _paired(
    loads: Sequence[LoadPoint], kept: Sequence[RecordedLoad]
) -> list[tuple[LoadPoint, RecordedLoad | None]]:
    """Pair drawn and recorded points."""
    places = partners([(p.mark, p.x) for p in loads], [(p.mark, p.x) for p in kept])
    return [(load, None if k is None else kept[k]) for load, k in zip(loads, places, strict=True)]


def _merged(
    load: LoadPoint, kept: RecordedLoad | None, changed: list[str], edits_count: bool
) -> LoadPoint:
    """Give one point the value that counts; a mark is added to `changed` where it was edited."""
    if kept is None:
        changed.append(load.mark)
        return load
    stated = load.cases if load.drawn_cases is None else load.drawn_cases
    is_edited = not same_cases(stated, kept.drawn)
    if is_edited or not (edits_count or same_cases(load.cases, kept.cases)):
        if is_edited or load.source == "csv":
            changed.append(load.mark)
        if edits_count:
            return load
    if same_cases(load.cases, kept.cases) and not is_edited:
        return load
    return replace(
        load,
        cases=kept.cases,
        source=kept.source,
        drawn="" if same_cases(stated, kept.cases) or not stated else _drawn(load, stated),
        # So that the next revision still sees an edit.
        drawn_cases=None if kept.drawn == kept.cases else kept.drawn,
    )


def _drawn(load: LoadPoint, stated: Cases) -> str:
    """Give the drafter's words for a value."""
    raw = load.value_origin.raw if load.value_origin else ""
    if raw and not set(raw) & set("\\{}\n"):
        return raw
    return " ".join(
        f"{value:g}" if case == "load" else f"{case}={value:g}" for case, value in stated
    )
