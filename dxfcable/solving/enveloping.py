"""The extremes of a cable over its states, each with the combination that brings it."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.model import Envelope, Extreme, PointRange, SegmentRange

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import FormedCable, State


def envelope(formed: FormedCable, states: Sequence[State]) -> Envelope:
    """Find the extremes over the states that have a shape, the formed one among them."""
    good = [s for s in states if not s.fault]
    names = [formed.under, *(s.combo for s in good)]
    pieces = [formed.segments, *(s.segments for s in good)]
    nodes = [formed.nodes, *(s.nodes for s in good)]

    def most(values: Sequence[float]) -> Extreme:
        k = max(range(len(values)), key=lambda i: values[i])
        return Extreme(value=values[k], combo=names[k])

    def least(values: Sequence[float]) -> Extreme:
        k = min(range(len(values)), key=lambda i: values[i])
        return Extreme(value=values[k], combo=names[k])

    tensions = [[s.tension for s in row] for row in pieces]
    lows = [[min(s.tension_left, s.tension_right) for s in row] for row in pieces]
    heights = [[n.elevation for n in row] for row in nodes]
    uplifts = [(a.uplift, s.combo) for s in good for j in s.anchorages for a in j.anchors]
    top = max(uplifts, key=lambda pair: pair[0], default=None)
    return Envelope(
        max_tension=most([max(row) for row in tensions]),
        min_tension=least([min(row) for row in lows]),
        max_uplift=Extreme(value=top[0], combo=top[1]) if top else None,
        points=tuple(
            PointRange(
                mark=node.mark,
                lowest=least([row[k] for row in heights]),
                highest=most([row[k] for row in heights]),
            )
            for k, node in enumerate(formed.nodes)
            if not node.is_support
        ),
        segments=tuple(
            SegmentRange(
                name=piece.name,
                most=most([row[k] for row in tensions]),
                least=least([row[k] for row in lows]),
            )
            for k, piece in enumerate(formed.segments)
        ),
    )
