"""Checked states for the painter's tests: the formed cable with its loads scaled as a whole.

A weightless inextensible cable whose loads all grow by one factor keeps its shape, and every
force grows by that factor (common practice): so no solver is needed here.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.model import (
    Clearance,
    Envelope,
    Extreme,
    PointRange,
    SegmentRange,
    State,
)

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import FormedCable, Layout, Solution


@dataclass(frozen=True, kw_only=True)
class Asked:
    """A combination: its name, the factor on all loads, its level."""

    combo: str
    factor: float
    level: str = "service"
    is_assumed: bool = True
    slack: tuple[str, ...] = ()
    fault: str = ""
    delta_t: float = 0.0


def state_of(formed: FormedCable, asked: Asked) -> State:
    """Scale the formed cable."""
    k = asked.factor
    if asked.fault:
        return State(
            combo=asked.combo,
            level=asked.level,
            level_is_assumed=asked.is_assumed,
            horizontal=math.nan,
            max_tension=math.nan,
            fault=asked.fault,
        )
    return State(
        combo=asked.combo,
        level=asked.level,
        level_is_assumed=asked.is_assumed,
        horizontal=k * (formed.horizontal or 0.0),
        max_tension=k * formed.max_tension,
        delta_t=asked.delta_t,
        governs=formed.governs,
        low_point=formed.spans[0].low_point,
        nodes=tuple(replace(n, load=k * n.load) for n in formed.nodes),
        segments=tuple(
            replace(s, tension_left=k * s.tension_left, tension_right=k * s.tension_right)
            for s in formed.segments
        ),
        slack=asked.slack,
    )


def envelope_of(formed: FormedCable, states: Sequence[State]) -> Envelope:
    """Find the extremes."""
    good = [s for s in states if not s.fault]
    names = [formed.under, *(s.combo for s in good)]
    pieces = [formed.segments, *(s.segments for s in good)]
    nodes = [formed.nodes, *(s.nodes for s in good)]

    def extreme(values: list[float], sign: int) -> Extreme:
        at = max(range(len(values)), key=lambda i: sign * values[i])
        return Extreme(value=values[at], combo=names[at])

    tensions = [[s.tension for s in row] for row in pieces]
    return Envelope(
        max_tension=extreme([max(row) for row in tensions], 1),
        min_tension=extreme([min(row) for row in tensions], -1),
        max_uplift=None,
        points=tuple(
            PointRange(
                mark=node.mark,
                lowest=extreme([row[k].elevation for row in nodes], -1),
                highest=extreme([row[k].elevation for row in nodes], 1),
            )
            for k, node in enumerate(formed.nodes)
            if not node.is_support
        ),
        segments=tuple(
            SegmentRange(
                name=piece.name,
                most=extreme([row[k] for row in tensions], 1),
                least=extreme([row[k] for row in tensions], -1),
            )
            for k, piece in enumerate(formed.segments)
        ),
    )


def with_states(drawn: tuple[Layout, Solution], *asked: Asked) -> tuple[Layout, Solution]:
    """Give every cable of a solution the states asked for."""
    layout, solution = drawn
    cables = []
    for formed in solution.cables:
        states = tuple(
            replace(
                state_of(formed, one),
                anchorages=tuple(
                    replace(
                        joint,
                        mast=None if joint.mast is None else one.factor * joint.mast,
                        stays=tuple(one.factor * stay for stay in joint.stays),
                        anchors=tuple(
                            replace(a, uplift=one.factor * a.uplift) for a in joint.anchors
                        ),
                    )
                    for joint in solution.anchorages
                    if not one.fault
                    and joint.support in {n.support for n in formed.nodes if n.is_support}
                ),
            )
            for one in asked
        )
        cables.append(replace(formed, states=states, envelope=envelope_of(formed, states)))
    return layout, replace(solution, cables=tuple(cables))


def with_clearance(
    drawn: tuple[Layout, Solution], x: float, above: float, least: float, state: str
) -> tuple[Layout, Solution]:
    """Give the first cable a least clearance over a level line at the ordinate `above`."""
    layout, solution = drawn
    found = Clearance(least=least, at=(x, above + least), to=(x, above), state=state)
    first = replace(solution.cables[0], clearance=found)
    return layout, replace(solution, cables=(first, *solution.cables[1:]))
