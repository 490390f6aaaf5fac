"""The cables of a drawing as views in its own units: what sheets are made from."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.painting.elevation_view import View
from dxfcable.drawing.painting.naming import unique_parts
from dxfcable.drawing.painting.wording import Wording

if TYPE_CHECKING:
    from dxfcable.model import Layout, Solution
    from dxfcable.settings import Settings


def sheet_views(layout: Layout, solution: Solution, settings: Settings) -> tuple[View, ...]:
    """Join each cable with its results; a mast that two cables share is shown with both."""
    prefixes = unique_parts([cable.mark for cable in layout.cables], "C")
    views = []
    for index, (cable, formed) in enumerate(zip(layout.cables, solution.cables, strict=True)):
        keys = {support.key for support in cable.supports}
        anchorages = [a for a in solution.anchorages if a.support in keys]
        names = unique_parts([anchorage.mark for anchorage in anchorages], "S")
        wording = Wording(
            length_unit=layout.length_unit,
            force_unit=layout.force_unit or "",
            digits=settings.show.force_digits,
            has_datum=cable.datum is not None,
            reference=formed.nodes[0].elevation,
        )
        views.append(
            View(
                prefix=prefixes[index],
                cable=cable,
                formed=formed,
                anchorages=tuple(zip(names, anchorages, strict=True)),
                wording=wording,
                height=1.0,
                node_names=unique_parts([node.mark for node in formed.nodes], "N"),
            )
        )
    return tuple(views)
