"""Hanger points of a framing plan and the load points of the elevation, matched by their marks."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import listed, place
from dxfcable.loads.load_filling import list_spots

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.reading.faults import Faults
    from dxfcable.loads.load_filling import Spot
    from dxfcable.model import Layout, PlanPoint


def match(layout: Layout, faults: Faults) -> dict[int, Spot]:
    """Find the load point that each hanger point means.

    Parameters
    ----------
    layout : Layout
    faults : Faults
        Takes points that mean none or several, two for one, and load points with a value of
        their own.

    Returns
    -------
    dict of int to Spot
        By position in `Layout.plan_points`.
    """
    every = list_spots(layout)
    found: dict[int, Spot] = {}
    for k, point in enumerate(layout.plan_points):
        spot = _matching(layout, point, every, faults)
        if spot is None:
            continue
        first = next((j for j, known in found.items() if known.key == spot.key), None)
        if first is not None:
            text = (
                f"two hanger points are marked {point.mark}; the other stands at "
                f"{place(layout.plan_points[first].at)}"
            )
            remedy = "Give each the mark of its own load point."
            faults.error(Code.PLAN_MARK_REPEATED, text, remedy, origin=point.origin)
            continue
        found[k] = spot
        if spot.load.cases:
            text = (
                f"two loads at {spot.load.mark} of cable {spot.name}: its value in the "
                "elevation, and its share of the plan"
            )
            remedy = "Take the value away, or the hanger point off the plan."
            origin = spot.load.value_origin or spot.load.origin
            faults.error(Code.LOAD_CONFLICT, text, remedy, origin=origin, cable=spot.name)
    return found


def _matching(
    layout: Layout, point: PlanPoint, every: Sequence[Spot], faults: Faults
) -> Spot | None:
    """Find the load point of one hanger point, None where there is none or a doubt."""
    marks = [cable.mark for cable in layout.cables]
    spots = list(every)
    if point.cable:
        spots = [s for s in spots if s.name.casefold() == point.cable.casefold()]
        if point.cable.casefold() not in {mark.casefold() for mark in marks}:
            text = f'attribute CABLE names "{point.cable}", which is not drawn'
            remedy = f"Cables drawn: {listed(marks) or 'none'}."
            faults.error(Code.CABLE_UNKNOWN, text, remedy, origin=point.origin, raw=point.cable)
            return None
    exact = [s for s in spots if s.load.mark == point.mark]
    folded = [s for s in spots if s.load.mark.casefold() == point.mark.casefold()]
    found = exact or folded
    if len(found) == 1:
        return found[0]
    if not found:
        on = f" of cable {point.cable}" if point.cable else ""
        text = f"no load point{on} is marked {point.mark}"
        known = listed(dict.fromkeys(s.load.mark for s in spots))
        remedy = f"Marks in the elevation: {known or 'none'}."
        faults.error(Code.PLAN_MARK_UNKNOWN, text, remedy, origin=point.origin, raw=point.mark)
        return None
    cables = list(dict.fromkeys(s.name for s in found))
    text = f"mark {point.mark} is at {len(found)} load points, of {listed(cables)}"
    remedy = "Give each its own mark in the elevation."
    if len(cables) == len(found):
        remedy = "Draw the hanger point as a block, and name the cable in its attribute CABLE."
    faults.error(Code.PLAN_MARK_AMBIGUOUS, text, remedy, origin=point.origin, raw=point.mark)
    return None
