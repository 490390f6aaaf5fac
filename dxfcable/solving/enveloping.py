"""The extremes of a cable over its states, each with the combination that brings it."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.model import Envelope, Extreme, PointRange, SegmentRange
from dxfcable.statics.envelopes import governing

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import FormedCable, State


def envelope(formed: FormedCable, states: Sequence[State]) -> Envelope:
    """Find the extremes over the states that have a shape, the formed one among them."""
    good = [s for s in states if not s.fault]
    names = [formed.under, *(s.combo for s in good)]
    pieces = [formed.segments, *(s.segments for s in good)]
    nodes = [formed.nodes, *(s.nodes for s in good)]

    def extremes(rows: Sequence[Sequence[float]]) -> list[tuple[Extreme, Extreme]]:
        most, least = governing(rows)
        return [
            (
                Extreme(value=rows[i][k], combo=names[i]),
                Extreme(value=rows[j][k], combo=names[j]),
            )
            for k, (i, j) in enumerate(zip(most.tolist(), least.tolist(), strict=True))
        ]

    tensions = [[s.tension for s in row] for row in pieces]
    lows = [[min(s.tension_left, s.tension_right) for s in row] for row in pieces]
    heights = [[n.elevation for n in row] for row in nodes]
    uplifts = [(a.uplift, s.combo) for s in good for j in s.anchorages for a in j.anchors]
    top = max(uplifts, key=lambda pair: pair[0], default=None)
    largest = extremes([[max(row)] for row in tensions])[0][0]
    smallest = extremes([[min(row)] for row in lows])[0][1]
    levels, most, least = extremes(heights), extremes(tensions), extremes(lows)
    return Envelope(
        max_tension=largest,
        min_tension=smallest,
        max_uplift=Extreme(value=top[0], combo=top[1]) if top else None,
        points=tuple(
            PointRange(mark=node.mark, lowest=low, highest=high)
            for node, (high, low) in zip(formed.nodes, levels, strict=True)
            if not node.is_support
        ),
        segments=tuple(
            SegmentRange(name=piece.name, most=high, least=low)
            for piece, (high, _), (_, low) in zip(formed.segments, most, least, strict=True)
        ),
    )
