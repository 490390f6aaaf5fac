"""What the drawing keeps of a cable, taken from what was drawn and how it was formed."""

from __future__ import annotations

from collections import Counter
from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.model import Origin
from dxfcable.recorded import CUT, CableRecord, RecordedLoad, RecordedSupport

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Cable, CableRevisions, FormedCable, Layout, LoadPoint, Support
    from dxfcable.recorded import RecordedHead

_FROM_RECORD = "record"  # source of a load whose value was neither drawn nor given this time


def record_of(
    layout: Layout,
    cable: Cable,
    formed: FormedCable,
    *,
    drawn: Cable | None = None,
    before: CableRecord | None = None,
    combos: tuple[str, ...] = (),
    delta_t: float = 0.0,
    heads: tuple[RecordedHead, ...] = (),
    revisions: CableRevisions | None = None,
) -> CableRecord:
    """Make the record of one cable.

    Parameters
    ----------
    layout, cable : Layout, Cable
        As drawn, with the loads used.
    formed : FormedCable
        With its status, and the unstressed lengths of its pieces.
    drawn : Cable, optional
        The cable as the drafter's drawing has it, whatever rule and combination it was given
        since; left out, nothing is kept of what the data block said.
    before : CableRecord, optional
        The record of the drawing handed in. A cut cable was formed where and under what that
        says; leave it out where a cable is cut that was formed in this very run.
    combos : tuple of str
        Combinations to check, as typed.
    delta_t : float
        Change from the reference temperature that the cable stands at [K].
    heads : tuple of RecordedHead
        Masts whose stays stretch.
    revisions : CableRevisions, optional
        Rows and changes that stand in the drawing.

    Returns
    -------
    CableRecord
    """
    formerly = before if formed.status == CUT else None
    marks = {support.key: support.mark for support in cable.supports}
    old_supports = formerly.supports if formerly else ()
    old_loads = formerly.loads if formerly else ()
    known = before.loads if before else ()
    old_at_supports = tuple(load for _, load in formerly.support_loads) if formerly else ()
    known_at_supports = tuple(load for _, load in before.support_loads) if before else ()
    at_supports = [load for _, load in cable.support_loads]
    stated = drawn.rule if drawn else None
    return CableRecord(
        mark=cable.mark,
        status=formed.status,
        length_unit=layout.length_unit,
        force_unit=layout.force_unit,
        rule=replace(formed.rule, origin=Origin()),
        under=formed.under,
        level=None if formed.level_is_assumed else formed.level,
        weight=formed.weight,
        weight_case=formed.weight_case,
        ea=formed.ea,
        alpha=cable.alpha,
        delta_t=delta_t,
        datum=cable.datum,
        supports=_supports(cable.supports, old_supports),
        loads=_loads(cable.loads, old_loads, known),
        support_loads=tuple(
            (marks[key], load)
            for (key, _), load in zip(
                cable.support_loads,
                _loads(at_supports, old_at_supports, known_at_supports),
                strict=True,
            )
        ),
        pieces=tuple(segment.unstressed_length for segment in formed.segments),
        heads=heads,
        combos=combos,
        revisions=revisions,
        stated_rule=replace(stated, origin=Origin()) if stated else None,
        stated_under=drawn.under if drawn else None,
    )


def _supports(
    supports: Sequence[Support], old: Sequence[RecordedSupport]
) -> tuple[RecordedSupport, ...]:
    """Record supports where they stand, and where they stood when the cable was formed."""
    partners = _partners([s.mark for s in supports], [s.mark for s in old])
    return tuple(
        RecordedSupport(
            mark=support.mark,
            x=support.x,
            y=support.y,
            formed=(support.x, support.y) if k is None else old[k].formed,
        )
        for support, k in zip(supports, partners, strict=True)
    )


def _loads(
    loads: Sequence[LoadPoint], old: Sequence[RecordedLoad], known: Sequence[RecordedLoad]
) -> tuple[RecordedLoad, ...]:
    """Record loads: those used and drawn now, and those that the cable was formed under.

    `old` are those of a cut cable's record, `known` those of whatever record there was.
    """
    marks = [load.mark for load in loads]
    partners = _partners(marks, [load.mark for load in old])
    sources = _partners(marks, [load.mark for load in known])
    found = []
    for load, k, s in zip(loads, partners, sources, strict=True):
        source = load.source
        if source == _FROM_RECORD:
            source = "csv" if s is None else known[s].source
        found.append(
            RecordedLoad(
                mark=load.mark,
                x=load.x if k is None else old[k].x,
                y=load.y if k is None else old[k].y,
                cases=load.cases,
                drawn=load.cases if load.drawn_cases is None else load.drawn_cases,
                formed=load.cases if k is None else old[k].formed,
                source=source,
            )
        )
    return tuple(found)


def _partners(new: Sequence[str], old: Sequence[str]) -> list[int | None]:
    """Give each of the new marks its place among the old ones, None where it has none.

    A mark that each side has once counts; others go by their place from the left, if there are
    as many on both sides.
    """
    counts, counts_before = Counter(new), Counter(old)
    places = {mark: k for k, mark in enumerate(old)}
    found: list[int | None] = []
    for k, mark in enumerate(new):
        if counts[mark] == counts_before[mark] == 1:
            found.append(places[mark])
            continue
        # Marks that repeat keep their order; a mark of neither side was written anew.
        is_here = len(new) == len(old) and (
            old[k] == mark or (mark not in places and old[k] not in counts)
        )
        found.append(k if is_here else None)
    return found
