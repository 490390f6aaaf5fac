"""Laws of the force diagram: closed, to scale, its rays parallel to the cable."""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

from dxfcable.verifying.measure import miss

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.model import Point
    from dxfcable.verifying.loads import Carried
    from dxfcable.verifying.measure import SpanFigures
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.tally import Tally

CLOSED, PARALLEL, CLOSING, LOADS = (
    "polygon closed",
    "rays parallel",
    "closing ray parallel",
    "load line equals loads",
)


def hold_diagram(
    tally: Tally, sheet: Sheet, span: SpanFigures, carried: Sequence[Carried] | None
) -> None:
    """Hold one force diagram against statics.

    Parameters
    ----------
    carried : sequence of Carried or None
        Loads of the span as the layout says, None where it does not read.
    """
    _hold_closed(tally, sheet, span)
    if span.pole is None:
        tally.fail(CLOSED, f"span {span.number} has no force diagram", span.profile)
        return
    if span.per_piece == 1:
        for k, ray in enumerate(span.rays):
            _hold_ray(tally, span, k, ray, span.side(k))
    _hold_closing(tally, sheet, span)
    if carried is not None:
        _hold_loads(tally, span, carried)


def _hold_closed(tally: Tally, sheet: Sheet, span: SpanFigures) -> None:
    """Hold rays against pole and load line, its steps against one another."""
    near = 2.0 * span.grain
    for k, (ray, joint) in enumerate(zip(span.rays, span.joints, strict=True)):
        name = f"{span.prefix}/ray/{span.first_ray + k}"
        if ray is None:
            tally.fail(CLOSED, f"{name} is missing")
        elif span.pole is not None and joint is not None:
            gap = max(math.dist(ray.start, span.pole), math.dist(ray.end, joint))
            tally.hold(CLOSED, gap, near, f"{name} misses the pole or the load line", ray)
    for k, step in enumerate(span.steps):
        start, end = span.joints[k], span.joints[k + 1]
        name = f"{span.prefix}/load-line/{span.first_load + k}"
        if start is None or end is None:
            continue
        if step is None:
            if math.dist(start, end) > 2.0 * near:
                tally.fail(CLOSED, f"{name} is missing")
            continue
        gap = max(math.dist(step.start, start), math.dist(step.end, end))
        tally.hold(CLOSED, gap, near, f"{name} does not join its neighbours", step)
    _hold_upright(tally, span, near)
    ring = sheet.named.get(f"{span.prefix}/pole/{span.number}")
    if ring is None:
        tally.fail(CLOSED, f"the circle at the pole of span {span.number} is missing")
    elif span.pole is not None:
        gap = math.dist(ring.start, span.pole)
        tally.hold(CLOSED, gap, near, "the circle misses the pole", ring)


def _hold_upright(tally: Tally, span: SpanFigures, near: float) -> None:
    """Hold the load line against the vertical."""
    known = [j for j in span.joints if j is not None]
    for k, (a, b) in enumerate(itertools.pairwise(known)):
        entity = span.steps[k] if len(known) == len(span.joints) else None
        text = f"step {span.first_load + k} of the load line is not upright"
        tally.hold(CLOSED, abs(a[0] - b[0]), 2.0 * near, text, entity)


def ray_tolerance(span: SpanFigures, ray: float, side: float) -> float:
    """Give how far rounding may set a ray off the parallel to a side [length]."""
    return 3.0 * span.grain * (1.0 + ray / side) if side else math.inf


def _hold_ray(
    tally: Tally,
    span: SpanFigures,
    number: int,
    ray: IssuedEntity | None,
    side: tuple[Point, Point],
) -> None:
    """Hold a ray as drawn, and its place in the diagram, against a side of the profile."""
    pole, joint = span.pole, span.joints[number]
    assert pole is not None
    if ray is None or joint is None:
        return
    length = math.dist(ray.start, ray.end)
    allowed = ray_tolerance(span, length, math.dist(*side))
    if not length:
        tally.fail(PARALLEL, f"{ray.id} has no length", ray)
        return
    off = miss(ray.start, ray.end, side)
    # A ray in its place in the diagram is not at fault: then the profile is.
    in_place = max(math.dist(ray.start, pole), math.dist(ray.end, joint)) <= 2.0 * span.grain
    text = f"{ray.id} (handle {ray.handle}) is not parallel to piece {number + 1} of the profile"
    entity = span.profile if in_place else ray
    tally.hold(PARALLEL, off / length, allowed / length, text, entity)


def _hold_closing(tally: Tally, sheet: Sheet, span: SpanFigures) -> None:
    """Hold the closing ray against the closing string, its ends against pole and load line."""
    ray = span.closing_ray
    string = sheet.named.get(f"{span.prefix}/closing-string/{span.number}")
    if ray is None or string is None:
        missing = "closing ray" if ray is None else "closing string"
        tally.fail(CLOSING, f"the {missing} of span {span.number} is missing", ray or string)
        return
    pole = span.pole
    assert pole is not None
    near = 2.0 * span.grain
    tally.hold(CLOSED, math.dist(ray.start, pole), near, f"{ray.id} misses the pole", ray)
    axis = next((j[0] for j in span.joints if j is not None), ray.end[0])
    tally.hold(CLOSED, abs(ray.end[0] - axis), near, f"{ray.id} misses the load line", ray)
    length, side = math.dist(*ray.points), (string.start, string.end)
    if not length:
        tally.fail(CLOSING, f"{ray.id} has no length", ray)
        return
    off, allowed = miss(ray.start, ray.end, side), ray_tolerance(span, length, math.dist(*side))
    text = f"{ray.id} is not parallel to the closing string (handle {string.handle})"
    ends = span.curve[0], span.curve[-1]
    is_fair = max(math.dist(string.start, ends[0]), math.dist(string.end, ends[1])) <= near
    tally.hold(CLOSING, off / length, allowed / length, text, ray if is_fair else string)


def _hold_loads(tally: Tally, span: SpanFigures, carried: Sequence[Carried]) -> None:
    """Hold each step of the load line against its load to scale, in order, down for down."""
    if len(carried) != span.pieces - 1:
        text = (
            f"span {span.number} has {span.pieces - 1} points between its ends "
            f"and {len(carried)} loads are drawn"
        )
        tally.fail(LOADS, text, span.profile)
        return
    for k, load in enumerate(carried):
        first = span.per_piece * (k + 1) - 1
        start, end = span.joints[first], span.joints[first + 1]
        if start is None or end is None:
            tally.fail(LOADS, f"load {load.name} has no place on the load line")
            continue
        if not load.point.cases and load.label is None:
            tally.fail(LOADS, f"load {load.name} does not read", span.steps[first])
            continue
        if load.label is not None and not load.label_fits:
            text = f'{load.label.id} says "{load.label.text}", the drafter\'s text is another'
            tally.fail(LOADS, text, load.label)
        drawn = (start[1] - end[1]) * span.scale
        off = abs(drawn - load.value)
        # The scale itself is known to a part of a thousand million.
        allowed = load.half + span.force_error + 1e-9 * abs(load.value)
        text = f"load {load.name}: the load line has {drawn:.9g}, the drawing says {load.value:.9g}"
        tally.hold(LOADS, off, allowed, text, span.steps[first])
