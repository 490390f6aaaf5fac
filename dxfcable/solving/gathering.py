"""A shape that statics found, put together as the model's cable: nodes, pieces, reactions."""

from __future__ import annotations

import functools
from typing import TYPE_CHECKING

from dxfcable.model import (
    Cable,
    FormedCable,
    Governs,
    Layout,
    Node,
    Reaction,
    Rule,
    Segment,
    Severity,
    SpanShape,
)
from dxfcable.quantities import format_force
from dxfcable.recorded import FORMED
from dxfcable.solving.curves import curves
from dxfcable.solving.governing import weight_case
from dxfcable.solving.hangers import hanger_feet
from dxfcable.statics.force_diagram import bow_letters, force_diagram
from dxfcable.units import convert

if TYPE_CHECKING:
    from dxfcable.settings import Settings
    from dxfcable.solving.curves import Shape
    from dxfcable.solving.remarks import Remarks
    from dxfcable.statics.combinations import Combination


def gather(
    layout: Layout,
    cable: Cable,
    rule: Rule,
    combination: Combination,
    shape: Shape,
    settings: Settings,
    remarks: Remarks,
    *,
    status: str = FORMED,
) -> FormedCable:
    """Put one cable's result together.

    Parameters
    ----------
    status : str
        `formed`, or `cut` where its unstressed lengths are kept.
    """
    diagram = force_diagram(shape)
    span = SpanShape(
        start=cable.supports[0].mark,
        end=cable.supports[-1].mark,
        horizontal=shape.horizontal,
        sag=shape.sag,
        sag_at=shape.sag_point,
        low_point=shape.low_point,
    )
    return FormedCable(
        mark=cable.mark,
        status=status,
        rule=rule,
        under=combination.text,
        level=combination.level,
        level_is_assumed=combination.level_is_assumed,
        supports_rigid=True,
        weight=cable.weight,
        weight_case=weight_case(cable),
        ea=cable.ea,
        capacity=cable.capacity,
        utilization=_utilization(layout, cable, shape, settings, remarks),
        loads_source="+".join(sorted({load.source for load in cable.loads})),
        horizontal=shape.horizontal,
        max_tension=shape.max_tension,
        governs=governs(cable, shape),
        sag=shape.sag,
        length=shape.length,
        unstressed_length=shape.unstressed_length,
        nodes=nodes(cable, shape, remarks),
        segments=segments(shape),
        spans=(span,),
        reactions=reactions(cable, shape),
        diagrams=(diagram,),
        curves=curves(shape, convert(1.0, "mm", layout.length_unit)),
    )


def _utilization(
    layout: Layout, cable: Cable, shape: Shape, settings: Settings, remarks: Remarks
) -> float | None:
    """Hold the largest tension against the capacity, if one is stated."""
    if cable.capacity is None:
        return None
    utilization = shape.max_tension / cable.capacity
    if utilization > 1.0:
        unit, digits = layout.force_unit or "", settings.show.force_digits
        remarks.say(
            "over-capacity",
            f"cable {cable.mark}: largest tension "
            f"{format_force(shape.max_tension, unit, digits)} is over its CAPACITY "
            f"{format_force(cable.capacity, unit, digits)} (utilization {utilization:.3f})",
            Severity.WARNING,
        )
    return utilization


def reactions(cable: Cable, shape: Shape) -> tuple[Reaction, ...]:
    """Return what each support gives."""
    ends = (cable.supports[0], cable.supports[-1])
    forces = (shape.reaction_left, shape.reaction_right)
    return tuple(
        Reaction(support=s.key, mark=s.mark, horizontal=h, vertical=v)
        for s, (h, v) in zip(ends, forces, strict=True)
    )


@functools.cache
def names(count: int) -> tuple[str, ...]:
    """Name the pieces by their rays."""
    return tuple(f"{letter}O" for letter in bow_letters(count))


def governs(cable: Cable, shape: Shape) -> Governs:
    """Say where the largest tension acts."""
    governing = shape.governing_segment
    ends = {(0, "left"): cable.supports[0], (shape.lengths.size - 1, "right"): cable.supports[-1]}
    support = ends.get((governing, shape.governing_end))
    return Governs(
        segment=names(shape.lengths.size)[governing],
        end=shape.governing_end,
        support=support.mark if support else None,
    )


def segments(shape: Shape) -> tuple[Segment, ...]:
    """Return the pieces; without weight both ends of one are alike."""
    points = list(zip(shape.x.tolist(), shape.y.tolist(), strict=True))
    columns = (
        shape.tensions_left.tolist(),
        shape.tensions_right.tolist(),
        shape.angles_left.tolist(),
        shape.angles_right.tolist(),
        shape.lengths.tolist(),
        shape.unstressed_lengths.tolist(),
    )
    return tuple(
        Segment(
            name=name,
            start=start,
            end=end,
            tension_left=left,
            tension_right=right,
            angle_left=first,
            angle_right=second,
            length=length,
            unstressed_length=unstressed,
        )
        for name, start, end, left, right, first, second, length, unstressed in zip(
            names(shape.lengths.size), points, points[1:], *columns, strict=False
        )
    )


def nodes(cable: Cable, shape: Shape, remarks: Remarks) -> tuple[Node, ...]:
    """Return supports and load points with their hangers, left to right."""
    datum = cable.datum or 0.0
    x, y = shape.x.tolist(), shape.y.tolist()
    feet = hanger_feet(cable, y[1:-1], remarks)
    inner = [
        Node(
            mark=load.mark,
            x=a,
            y=b,
            elevation=b + datum,
            load=weight,
            is_support=False,
            hanger=None if foot is None else b - foot,
            hanger_foot=foot,
        )
        for load, a, b, weight, foot in zip(
            cable.loads, x[1:-1], y[1:-1], shape.loads.tolist(), feet, strict=True
        )
    ]
    first, last = (
        Node(
            mark=support.mark,
            x=at,
            y=height,
            elevation=height + datum,
            load=0.0,
            is_support=True,
            support=support.key,
        )
        for support, at, height in (
            (cable.supports[0], x[0], y[0]),
            (cable.supports[-1], x[-1], y[-1]),
        )
    )
    return first, *inner, last
