"""From what is drawn to what follows: each cable formed, each support in equilibrium.

Units are the drawing's, as in `Layout`. All faults of all cables are collected before
anything is refused.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.anchorages import anchorages
from dxfcable.errors import LayoutError, RuleError
from dxfcable.gathering import gather, is_rigid
from dxfcable.governing import (
    Forming,
    combination_for,
    offer_sags,
    refuse_later_work,
    rule_for,
    rule_value,
    weight_under,
)
from dxfcable.model import (
    Cable,
    Finding,
    FormedCable,
    Layout,
    Rule,
    RuleKind,
    Severity,
    Solution,
)
from dxfcable.quantities import format_force
from dxfcable.remarks import Remarks
from dxfcable.statics.catenary_forming import form_catenary
from dxfcable.statics.combinations import combine
from dxfcable.statics.forming import form

if TYPE_CHECKING:
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
    return gather(layout, cable, rule, combination, shape, settings, remarks)


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
    if any(stay.support in keys for stay in layout.stays) and is_rigid(layout, cable):
        remarks.say("supports-rigid", f"cable {cable.mark}: supports held rigid")
    if any(stay.support in keys for stay in layout.stays) and not is_rigid(layout, cable):
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
