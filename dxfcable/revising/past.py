"""Recorded cables as they stood: when the drawing was issued last, and when they were formed."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.model import Layout, LoadPoint, LoadSymbol
from dxfcable.revising.recorded_loads import partners
from dxfcable.solving.built import Standing
from dxfcable.solving.governing import Forming
from dxfcable.solving.solve import solve

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.model import Cable, FormedCable, Mast, Stay
    from dxfcable.recorded import CableRecord, RecordedLoad
    from dxfcable.settings import Settings


def as_issued(
    layout: Layout, records: Mapping[str, CableRecord], settings: Settings
) -> dict[str, FormedCable]:
    """Find how the recorded cables stood in the drawing handed in.

    Parameters
    ----------
    layout : Layout
        As drawn now; it gives what no load change moves, such as decks.
    records : mapping of str to CableRecord
        By mark; cables without one are left out.

    Returns
    -------
    dict of str to FormedCable
        By mark.

    Raises
    ------
    LayoutError
        Where a recorded cable has no shape.
    """
    return _solved(layout, records, settings, was_formed=False)


def hangers_of(formed: FormedCable | None) -> tuple[float | None, ...]:
    """Return the lengths of a cable's hangers as formed, none where that is not known."""
    return () if formed is None else tuple(n.hanger for n in formed.nodes if not n.is_support)


def as_formed(
    layout: Layout, records: Mapping[str, CableRecord], settings: Settings
) -> dict[str, FormedCable]:
    """Find how the recorded cables stood when they were formed; see `as_issued`."""
    return _solved(layout, records, settings, was_formed=True)


def _solved(
    layout: Layout, records: Mapping[str, CableRecord], settings: Settings, *, was_formed: bool
) -> dict[str, FormedCable]:
    places: dict[int, tuple[float, float]] = {}
    cables = []
    for cable in layout.cables:
        record = records.get(cable.mark)
        if record is None:
            continue
        ends = (cable.supports[0], cable.supports[-1])
        for support, kept in zip(ends, record.supports, strict=False):
            places[support.key] = kept.formed if was_formed else (kept.x, kept.y)
        cables.append(_cable(cable, record, was_formed=was_formed))
    supports = tuple(
        replace(s, x=places[s.key][0], y=places[s.key][1]) if s.key in places else s
        for s in layout.supports
    )
    by_key = {s.key: s for s in supports}
    masts, stays = _members(layout, records)
    past = replace(
        layout,
        supports=supports,
        cables=tuple(replace(c, supports=tuple(by_key[s.key] for s in c.supports)) for c in cables),
        masts=masts,
        stays=stays,
    )
    standing = {
        mark: Standing(record=record, delta_t=0.0 if was_formed else record.delta_t)
        for mark, record in records.items()
    }
    solution = solve(past, Forming(), settings, standing)
    return {
        formed.mark: replace(formed, status=records[formed.mark].status)
        for formed in solution.cables
    }


def _cable(cable: Cable, record: CableRecord, *, was_formed: bool) -> Cable:
    """Put a cable back to what its record says."""
    loads = tuple(_load(kept, was_formed=was_formed) for kept in record.loads)
    marks = {s.mark: s.key for s in cable.supports}
    at_supports = tuple(
        (marks[name], _load(kept, was_formed=was_formed))
        for name, kept in record.support_loads
        if name in marks
    )
    places = partners([(p.mark, p.x) for p in loads], [(p.mark, p.x) for p in cable.loads])
    loads = tuple(  # hangers go by how the points are drawn
        load if k is None else replace(cable.loads[k], x=load.x, cases=load.cases)
        for load, k in zip(loads, places, strict=True)
    )
    return replace(
        cable,
        loads=loads,
        support_loads=at_supports,
        rule=record.rule,
        under=record.under,
        ea=record.ea,
        alpha=record.alpha,
        delta_t=None,
        weight=record.weight,
        weight_case=record.weight_case,
        datum=record.datum,
        clearance=(),
        capacity=None,
    )


def _load(kept: RecordedLoad, *, was_formed: bool) -> LoadPoint:
    """Make a load point of a recorded one."""
    return LoadPoint(
        mark=kept.mark,
        x=kept.x,
        y=kept.y,
        cases=kept.formed if was_formed else kept.cases,
        symbol=LoadSymbol.POINT,
        source=kept.source,
    )


def _members(
    layout: Layout, records: Mapping[str, CableRecord]
) -> tuple[tuple[Mast, ...], tuple[Stay, ...]]:
    """Put the feet of masts and stays that give back to where they were recorded."""
    masts, stays = list(layout.masts), list(layout.stays)
    for cable in layout.cables:
        keys = {s.mark: s.key for s in cable.supports}
        for head in records[cable.mark].heads if cable.mark in records else ():
            key = keys.get(head.support)
            masts = [replace(m, foot=head.mast_foot) if m.support == key else m for m in masts]
            own = [k for k, stay in enumerate(stays) if stay.support == key]
            for k, kept in zip(own, head.stays, strict=False):
                stays[k] = replace(stays[k], foot=kept.foot)
    return tuple(masts), tuple(stays)
