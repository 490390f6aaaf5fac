"""The views of a drawing: each cable with its results, its ids, its words, its rounding."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.painting.elevation_view import View
from dxfcable.drawing.painting.naming import unique_parts
from dxfcable.drawing.painting.rounding import rounder_for
from dxfcable.drawing.painting.wording import Wording

if TYPE_CHECKING:
    from dxfcable.drawing.painting.rounding import Rounder
    from dxfcable.model import Anchorage, Cable, Layout, Solution
    from dxfcable.settings import Settings


def join_views(
    layout: Layout, solution: Solution, settings: Settings, height: float
) -> tuple[View, ...]:
    """Join each cable with its results, its anchorages and its words.

    An anchorage is shown with the first of the cables that its support holds.
    """
    owned: dict[int, list[Anchorage]] = {}
    for anchorage in solution.anchorages:
        owner = next(
            index
            for index, cable in enumerate(layout.cables)
            if any(support.key == anchorage.support for support in cable.supports)
        )
        owned.setdefault(owner, []).append(anchorage)
    # A cable without rows has no revisions to show.
    revisions = {found.cable: found for found in solution.revisions if found.rows}
    prefixes = unique_parts([cable.mark for cable in layout.cables], "C")
    views = []
    for index, (cable, formed) in enumerate(zip(layout.cables, solution.cables, strict=True)):
        anchorages = owned.get(index, [])
        names = unique_parts([anchorage.mark for anchorage in anchorages], "S")
        wording = Wording(
            length_unit=layout.length_unit,
            force_unit=layout.force_unit or "",
            digits=settings.show.force_digits,
            has_datum=cable.datum is not None,
            reference=cable.supports[0].y,
        )
        views.append(
            View(
                prefix=prefixes[index],
                cable=cable,
                formed=formed,
                anchorages=tuple(zip(names, anchorages, strict=True)),
                wording=wording,
                height=height,
                node_names=unique_parts([node.mark for node in formed.nodes], "N"),
                revisions=revisions.get(cable.mark),
            )
        )
    return tuple(views)


def rounder_of(cable: Cable) -> Rounder:
    """Make the rounder of a cable, the drafter's coordinates verbatim."""
    drawn = [c for support in cable.supports for c in (support.x, support.y)]
    drawn += [c for load in cable.loads for c in (load.x, load.y)]
    return rounder_for(cable.supports[-1].x - cable.supports[0].x, drawn)
