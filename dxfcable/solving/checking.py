"""The formed cables under every combination asked for: states, envelope, what an engineer sees.

Unstressed lengths are kept; loads are combined first, then each combination is solved.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.model import (
    Finding,
    Node,
    Severity,
    State,
    SupportShift,
)
from dxfcable.solving.anchorages import MovedHead, anchorages
from dxfcable.solving.clearances import least_clearance
from dxfcable.solving.enveloping import envelope
from dxfcable.solving.gathering import governs, reactions, segments
from dxfcable.solving.remarks import Remarks
from dxfcable.solving.responding import respond, temperatures
from dxfcable.solving.state_remarks import (
    say_bowed,
    say_idle,
    say_states,
    say_weightless,
    slack_hangers,
)
from dxfcable.statics.combinations import CombinationError
from dxfcable.statics.expansion import TEMPERATURE, expand

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Anchorage, Cable, FormedCable, Layout, Reaction
    from dxfcable.recorded import RecordedHead
    from dxfcable.settings import Settings
    from dxfcable.solving.built import Built
    from dxfcable.solving.curves import Shape
    from dxfcable.solving.responding import States
    from dxfcable.statics.catenary_shape import Catenary
    from dxfcable.statics.combinations import Combination


@dataclass(frozen=True, slots=True, kw_only=True)
class Checked:
    """Formed cables with their states, and what has to be said of them."""

    cables: tuple[FormedCable, ...]
    findings: tuple[Finding, ...]


def combinations_asked(
    built: Sequence[Built],
    formed: Sequence[FormedCable],
    texts: Sequence[str],
    settings: Settings,
) -> tuple[list[Combination], list[Finding]]:
    """Read what is to be checked; a temperature that no text names gets both its signs.

    Parameters
    ----------
    formed : sequence of FormedCable
        With the combinations that they were formed under.
    texts : sequence of str
        As typed.
    """
    known = list(dict.fromkeys(case for one in built for case in _cases(one.cable)))
    if any(one.delta_t for one in built):
        known.append(TEMPERATURE)
    found: list[Combination] = []
    faults = []
    for text in texts:
        try:
            found += expand(text, known, aliases=dict(settings.cases.alias))
        except CombinationError as error:
            faults.append(_fault(text, str(error)))
    names_heat = any(TEMPERATURE in dict(c.terms) for c in found)
    if TEMPERATURE in known and not names_heat and not faults:
        for one in formed:
            found += expand(
                f"{one.under} + {TEMPERATURE}",
                known,
                aliases=dict(settings.cases.alias),
                level=None if one.level_is_assumed else one.level,
            )
    return list({c.text: c for c in found}.values()), faults


def check(
    layout: Layout,
    built: Sequence[Built],
    formed: Sequence[FormedCable],
    combinations: Sequence[Combination],
    heads: Sequence[tuple[int, RecordedHead]],
    settings: Settings,
) -> Checked:
    """Solve every combination, and gather states, envelopes and clearances.

    Parameters
    ----------
    built, formed : sequence of Built, sequence of FormedCable
        One a cable, in the layout's order; the formed ones as they stand.
    combinations : sequence of Combination
        What to check; none at all leaves only the clearance as formed.
    heads : sequence of (int, RecordedHead)
        Supports that give, by key.
    """
    findings: list[Finding] = []
    if not combinations:
        cables = tuple(
            _with_clearance(layout, one, f, [(f.under, _standing_shape(one))], findings)
            for one, f in zip(built, formed, strict=True)
        )
        return Checked(cables=cables, findings=tuple(findings))
    own = [combinations] * len(built)
    try:
        states = respond(
            layout, built, own, heads, [temperatures(one, combinations) for one in built]
        )
    except CombinationError as error:
        return Checked(cables=tuple(formed), findings=(_fault("", str(error)),))
    all_shapes = [_shapes(states, number) for number in range(len(built))]
    joints = _joints(layout, built, combinations, states, all_shapes, settings, findings)
    results = []
    for number, (one, result) in enumerate(zip(built, formed, strict=True)):
        remarks = Remarks(one.cable)
        shapes = all_shapes[number]
        carried = {*_cases(one.cable), *([TEMPERATURE] if one.delta_t else [])}
        acting = [k for k, c in enumerate(combinations) if carried & set(dict(c.terms))]
        checked = tuple(
            _state(one, result, combinations[k], shapes[k], joints[k], states, (k, number))
            for k in acting
        )
        say_idle(
            [combinations[k].text for k in range(len(combinations)) if k not in acting], remarks
        )
        say_states(layout, one, result, checked, settings, remarks)
        say_bowed(
            [(combinations[k].text, x) for k in acting if (x := shapes[k])], one.cable, remarks
        )
        say_weightless(one.cable, [combinations[k] for k in acting], remarks)
        findings += remarks.findings
        whole = replace(result, states=checked, envelope=envelope(result, checked))
        results.append(
            _with_clearance(
                layout,
                one,
                whole,
                [
                    (result.under, _standing_shape(one)),
                    *((combinations[k].text, shape) for k in acting if (shape := shapes[k])),
                ],
                findings,
            )
        )
    return Checked(cables=tuple(results), findings=tuple(dict.fromkeys(findings)))


def _cases(cable: Cable) -> list[str]:
    """List the cases that a cable's points, supports and weight carry."""
    from dxfcable.solving.governing import weight_case

    points = [*cable.loads, *(point for _, point in cable.support_loads)]
    cases = [case for point in points for case, _ in point.cases]
    own = weight_case(cable) if cable.weight else None
    return [*cases, own] if own else cases


def _fault(text: str, why: str) -> Finding:
    """Refuse a combination."""
    return Finding(
        code="combination",
        severity=Severity.ERROR,
        text=why,
        remedy='Write combinations of the cases drawn, such as --combo "1.2D + 1.6L".',
        raw=text,
    )


def _shapes(states: States, number: int) -> list[Catenary | None]:
    """Return a cable's shape in each state, None where there is none."""
    response = states.cables[number]
    return [
        None if math.isnan(pull) else response.state(k)
        for k, pull in enumerate(response.horizontals.tolist())
    ]


def _joints(
    layout: Layout,
    built: Sequence[Built],
    combinations: Sequence[Combination],
    states: States,
    shapes: Sequence[Sequence[Catenary | None]],
    settings: Settings,
    findings: list[Finding],
) -> list[tuple[Anchorage, ...]]:
    """Find the forces of masts, stays and anchors in each state."""
    if not layout.masts and not layout.stays:
        return [()] * len(combinations)
    result = []
    for k, combination in enumerate(combinations):
        gathered: list[tuple[Reaction, ...]] = []
        for one, of_cable in zip(built, shapes, strict=True):
            shape = of_cable[k]
            gathered.append(reactions(one.cable, shape) if shape else ())
        found, said = anchorages(
            layout,
            gathered,
            {key: float(values[k]) for key, values in states.support_loads.items()},
            settings,
            heads=moved_heads(states, k),
            state=combination.text,
        )
        result.append(found)
        findings += said
    return result


def moved_heads(states: States, state: int) -> dict[int, MovedHead]:
    """Return where the heads that give stand in a state, and how their stays share."""
    result = {}
    for key, head in states.heads.items():
        x, y = head.places[state].tolist()
        if not math.isfinite(x):
            continue
        pulls = head.pulls[state].tolist()  # all of one sign
        total = math.fsum(pulls)
        shares = tuple(p / total for p in pulls) if total else (1.0 / len(pulls),) * len(pulls)
        result[key] = MovedHead(at=(x, y), shares=shares)
    return result


def _state(
    one: Built,
    formed: FormedCable,
    combination: Combination,
    shape: Catenary | None,
    joints: tuple[Anchorage, ...],
    states: States,
    place: tuple[int, int],
) -> State:
    """Gather one state of one cable."""
    k, number = place
    delta_t = one.delta_t * dict(combination.terms).get(TEMPERATURE, 0.0)
    cable = one.cable
    if shape is None:
        loads = [0.0, *states.cables[number].loads[k].tolist(), 0.0]
        idle = [replace(node, load=load) for node, load in zip(formed.nodes, loads, strict=True)]
        return State(
            combo=combination.text,
            level=combination.level,
            level_is_assumed=combination.level_is_assumed,
            horizontal=math.nan,
            max_tension=math.nan,
            delta_t=delta_t,
            fault=states.faults[number][k],
            slack=slack_hangers(idle, cable),
        )
    keys = {s.key for s in cable.supports}
    ends = (cable.supports[0], cable.supports[-1])
    at = ((shape.x[0], shape.y[0]), (shape.x[-1], shape.y[-1]))
    nodes = _nodes(formed, shape, cable.datum or 0.0)
    return State(
        combo=combination.text,
        level=combination.level,
        level_is_assumed=combination.level_is_assumed,
        horizontal=shape.horizontal,
        max_tension=shape.max_tension,
        delta_t=delta_t,
        governs=governs(cable, shape),
        low_point=shape.low_point,
        nodes=nodes,
        segments=segments(shape),
        reactions=reactions(cable, shape),
        anchorages=tuple(joint for joint in joints if joint.support in keys),
        supports=tuple(
            SupportShift(support=s.key, mark=s.mark, dx=float(x) - s.x, dy=float(y) - s.y)
            for s, (x, y) in zip(ends, at, strict=True)
        ),
        slack=slack_hangers(nodes, cable),
    )


def _nodes(formed: FormedCable, shape: Catenary, datum: float) -> tuple[Node, ...]:
    """Move the formed nodes to where they stand in a state; hangers keep their length."""
    loads = [0.0, *shape.loads.tolist(), 0.0]
    return tuple(
        Node(
            mark=node.mark,
            x=x,
            y=y,
            elevation=y + datum,
            load=load,
            is_support=node.is_support,
            support=node.support,
            hanger=node.hanger,
            hanger_foot=node.hanger_foot,
        )
        for node, x, y, load in zip(
            formed.nodes, shape.x.tolist(), shape.y.tolist(), loads, strict=True
        )
    )


def _standing_shape(one: Built) -> Shape:
    """Return a cable's shape as it stands."""
    assert one.shape is not None
    return one.shape


def _with_clearance(
    layout: Layout,
    one: Built,
    formed: FormedCable,
    shapes: Sequence[tuple[str, Shape]],
    findings: list[Finding],
) -> FormedCable:
    """Add the least clearance over all states."""
    if not one.cable.clearance:
        return formed
    remarks = Remarks(one.cable)
    found = least_clearance(layout, one.cable, shapes, remarks)
    findings += remarks.findings
    return replace(formed, clearance=found)
