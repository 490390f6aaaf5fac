"""From what is drawn to what follows: each cable formed, each support in equilibrium.

Units are the drawing's, as in `Layout`. All faults of all cables are collected before
anything is refused.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.anchorages import anchorages
from dxfcable.curves import curves
from dxfcable.errors import LayoutError, RuleError
from dxfcable.governing import (
    Forming,
    combination_for,
    offer_sags,
    refuse_later_work,
    rule_for,
    rule_value,
    weight_case,
    weight_under,
)
from dxfcable.hangers import hanger_feet
from dxfcable.model import (
    Cable,
    Finding,
    FormedCable,
    Governs,
    Layout,
    Node,
    Reaction,
    Rule,
    RuleKind,
    Segment,
    Severity,
    Solution,
    SpanShape,
)
from dxfcable.quantities import format_force
from dxfcable.remarks import Remarks
from dxfcable.statics.catenary_forming import form_catenary
from dxfcable.statics.combinations import combine
from dxfcable.statics.force_diagram import force_diagram
from dxfcable.statics.forming import form
from dxfcable.units import convert

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.curves import Shape
    from dxfcable.settings import Settings
    from dxfcable.statics.combinations import Combination

__all__ = ["Forming", "solve"]

_EXACT = 6  # digits, where a bound is shown
_REFUSED = "the drawing cannot be solved as it is"


def solve(layout: Layout, forming: Forming, settings: Settings) -> Solution:
    """Form every cable and find the forces at every mast and stay.

    Raises
    ------
    LayoutError
        With all findings, where one of them stops.
    """
    notes = _unknown_cable(layout, forming)
    formed: list[FormedCable] = []
    combinations: list[Combination] = []
    for cable in layout.cables:
        remarks = Remarks(cable)
        combination = combination_for(cable, forming, settings, remarks)
        result = _form(layout, cable, combination, forming, settings, remarks)
        notes += remarks.findings
        if result is not None and combination is not None:
            formed.append(result)
            combinations.append(combination)
    if any(f.severity is Severity.ERROR for f in notes):
        raise LayoutError(_REFUSED, tuple(notes))
    found, joint_findings = anchorages(layout, tuple(formed), tuple(combinations), settings)
    notes += joint_findings
    if any(f.severity is Severity.ERROR for f in joint_findings):
        raise LayoutError(_REFUSED, tuple(notes))
    return Solution(cables=tuple(formed), anchorages=found, findings=tuple(notes))


def _unknown_cable(layout: Layout, forming: Forming) -> list[Finding]:
    """Refuse a rule for a cable that is not there."""
    marks = [cable.mark for cable in layout.cables]
    if forming.cable is None or forming.cable in marks:
        return []
    return [
        Finding(
            code="unknown-cable",
            severity=Severity.ERROR,
            text=f'there is no cable "{forming.cable}" in this drawing',
            remedy=f"Its cables are {', '.join(marks) or 'none'}.",
        )
    ]


def _form(
    layout: Layout,
    cable: Cable,
    combination: Combination | None,
    forming: Forming,
    settings: Settings,
    remarks: Remarks,
) -> FormedCable | None:
    """Form one cable, None where a finding stops it."""
    refuse_later_work(cable, remarks)
    rule = rule_for(cable, forming, remarks)
    if remarks.is_stopped or combination is None:
        return None
    weight = weight_under(cable, combination, remarks)
    loads = combine([load.cases for load in cable.loads], combination)
    x = [cable.supports[0].x, *(load.x for load in cable.loads), cable.supports[-1].x]
    if rule is None:
        offer_sags(layout, cable, x, loads.tolist(), settings, remarks)
        return None
    ends = cable.supports[0].y, cable.supports[-1].y
    value = rule_value(cable, rule)
    shape: Shape
    try:
        if weight:
            shape = form_catenary(
                x, loads, *ends, rule.kind, value, point=rule.point, weight=weight, ea=cable.ea
            )
        else:
            shape = form(x, loads, *ends, rule.kind, value, point=rule.point, ea=cable.ea)
    except (RuleError, ValueError) as error:
        text = f"cable {cable.mark}: {_refusal(layout, rule, error)}"
        remarks.stop("rule", text, origin=rule.origin, raw=rule.text)
        return None
    _remark(layout, cable, shape, settings, remarks)
    return _gather(layout, cable, rule, combination, shape, settings, remarks)


def _refusal(layout: Layout, rule: Rule, error: Exception) -> str:
    """Say why a rule cannot be met, the least tension with its unit."""
    least = getattr(error, "least", None)
    if rule.kind is not RuleKind.MAX_TENSION or least is None:
        words = str(error).rstrip(".")
        return f"{words} (forces in {layout.force_unit}, lengths in {layout.length_unit})"
    more = "more than " if getattr(error, "is_limit", False) else ""
    unit = layout.force_unit or ""
    return (
        f"MAX_TENSION {format_force(rule.value, unit, _EXACT)} cannot be met: the least tension "
        f"possible under these loads is {more}{format_force(least, unit, _EXACT)}"
    )


def _gather(
    layout: Layout,
    cable: Cable,
    rule: Rule,
    combination: Combination,
    shape: Shape,
    settings: Settings,
    remarks: Remarks,
) -> FormedCable:
    """Put one cable's result together."""
    diagram = force_diagram(shape)
    names = tuple(f"{letter}O" for letter in diagram.letters)
    governing = shape.governing_segment
    ends = {(0, "left"): cable.supports[0], (len(names) - 1, "right"): cable.supports[-1]}
    support = ends.get((governing, shape.governing_end))
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
        status="formed",
        rule=rule,
        under=combination.text,
        level=combination.level,
        level_is_assumed=combination.level_is_assumed,
        supports_rigid=_is_rigid(layout, cable),
        weight=cable.weight,
        weight_case=weight_case(cable),
        ea=cable.ea,
        capacity=cable.capacity,
        utilization=_utilization(layout, cable, shape, settings, remarks),
        loads_source="+".join(sorted({load.source for load in cable.loads})),
        horizontal=shape.horizontal,
        max_tension=shape.max_tension,
        governs=Governs(
            segment=names[governing],
            end=shape.governing_end,
            support=support.mark if support else None,
        ),
        sag=shape.sag,
        length=shape.length,
        unstressed_length=shape.unstressed_length,
        nodes=_nodes(cable, shape, remarks),
        segments=_segments(shape, names),
        spans=(span,),
        reactions=_reactions(cable, shape),
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


def _reactions(cable: Cable, shape: Shape) -> tuple[Reaction, ...]:
    """Return what each support gives."""
    ends = (cable.supports[0], cable.supports[-1])
    forces = (shape.reaction_left, shape.reaction_right)
    return tuple(
        Reaction(support=s.key, mark=s.mark, horizontal=h, vertical=v)
        for s, (h, v) in zip(ends, forces, strict=True)
    )


def _segments(shape: Shape, names: Sequence[str]) -> tuple[Segment, ...]:
    """Return the pieces; without weight both ends of one are alike."""
    points = [(float(a), float(b)) for a, b in zip(shape.x, shape.y, strict=True)]
    return tuple(
        Segment(
            name=name,
            start=points[k],
            end=points[k + 1],
            tension_left=float(shape.tensions_left[k]),
            tension_right=float(shape.tensions_right[k]),
            angle_left=float(shape.angles_left[k]),
            angle_right=float(shape.angles_right[k]),
            length=float(shape.lengths[k]),
            unstressed_length=float(shape.unstressed_lengths[k]),
        )
        for k, name in enumerate(names)
    )


def _nodes(cable: Cable, shape: Shape, remarks: Remarks) -> tuple[Node, ...]:
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
            x=support.x,
            y=support.y,
            elevation=support.y + datum,
            load=0.0,
            is_support=True,
            support=support.key,
        )
        for support in (cable.supports[0], cable.supports[-1])
    )
    return first, *inner, last


def _remark(
    layout: Layout, cable: Cable, shape: Shape, settings: Settings, remarks: Remarks
) -> None:
    """Say what an engineer should know of this shape."""
    if shape.has_uplift:
        marks = ", ".join(cable.loads[k - 1].mark for k in shape.above_string)
        remarks.say(
            "above-string",
            f"cable {cable.mark}: uplift holds {marks} above the closing string; "
            "this is no simple hanging shape",
        )
    ratio = shape.sag / shape.span
    low, high = settings.limits.sag_ratio
    if not low <= ratio <= high:
        remarks.say(
            "sag-ratio",
            f"cable {cable.mark}: sag over span is {ratio:.4f}, outside {low:g} to {high:g}",
        )
    keys = {s.key for s in cable.supports}
    if any(stay.support in keys for stay in layout.stays) and _is_rigid(layout, cable):
        remarks.say("supports-rigid", f"cable {cable.mark}: supports held rigid")
    if any(stay.support in keys for stay in layout.stays) and not _is_rigid(layout, cable):
        remarks.say(
            "stays-give-later",
            f"cable {cable.mark}: the stretch of its stays acts in states after forming; the "
            "formed state stands as drawn",
        )
    if cable.ea is None:
        remarks.say(
            "inextensible",
            f"cable {cable.mark}: no EA is given; the unstressed length is taken as the length",
        )


def _is_rigid(layout: Layout, cable: Cable) -> bool:
    """Whether no stay of this cable's supports states its stiffness."""
    keys = {s.key for s in cable.supports}
    stays = [s for s in layout.stays if s.support in keys]
    return not any(s.anchor is not None and s.anchor.ea is not None for s in stays)
