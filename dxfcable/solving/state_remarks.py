"""What has to be said of the states of a cable, and what an engineer must see in them."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.model import Severity
from dxfcable.quantities import format_force
from dxfcable.solving.governing import weight_case

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Cable, FormedCable, Layout, Node, State
    from dxfcable.settings import Settings
    from dxfcable.solving.built import Built
    from dxfcable.solving.curves import Shape
    from dxfcable.solving.remarks import Remarks
    from dxfcable.statics.combinations import Combination

_SHOWN = 4  # states that a finding names before it only counts
_SEE = Severity.WARNING


def say_states(
    layout: Layout,
    one: Built,
    formed: FormedCable,
    states: Sequence[State],
    settings: Settings,
    remarks: Remarks,
) -> None:
    """Say what an engineer must see in the states."""
    name = f"cable {formed.mark}"
    unit, digits = layout.force_unit or "", settings.show.force_digits
    for state in states:
        if state.fault:
            remarks.say(
                "no-shape",
                f"{name}: no determinate shape under {state.combo}: {state.fault}",
                Severity.WARNING,
            )
    slack: dict[str, list[str]] = {}
    for state in states:
        for mark in state.slack:
            slack.setdefault(mark, []).append(state.combo)
    for mark, combos in slack.items():
        remarks.say("slack-hanger", f"{name}: hanger {mark} is slack {_under(combos)}", _SEE)
    pull = formed.horizontal or 0.0
    low = [s.combo for s in states if s.horizontal < settings.limits.min_pull * pull]
    if low:
        remarks.say(
            "slack-cable",
            f"{name}: its pull falls under {settings.limits.min_pull:g} of the formed pull "
            f"{_under(low)}",
            _SEE,
        )
    if one.cable.capacity is not None:
        over = [s for s in states if s.max_tension > one.cable.capacity]
        for level in dict.fromkeys(s.level for s in over):
            here = [s for s in over if s.level == level]
            worst = max(here, key=lambda s: s.max_tension)
            remarks.say(
                "over-capacity",
                f"{name}: largest tension {format_force(worst.max_tension, unit, digits)} "
                f"({level} level, {worst.combo}) is over its CAPACITY "
                f"{format_force(one.cable.capacity, unit, digits)} (utilization "
                f"{worst.max_tension / one.cable.capacity:.3f}), {_under([s.combo for s in here])}",
                _SEE,
            )


def _under(combos: Sequence[str]) -> str:
    """Name combinations, or the first of them and how many there are."""
    if len(combos) <= _SHOWN:
        return f"under {', '.join(combos)}"
    return f"under {', '.join(combos[:_SHOWN])} and {len(combos) - _SHOWN} more"


def say_shape(formed: FormedCable, cable: Cable, shape: Shape, remarks: Remarks) -> None:
    """Say of a cable as it stands which hangers are slack and what is bowed up."""
    slack = slack_hangers(formed.nodes, cable)
    if slack:
        text = f"{remarks.name}: hangers {', '.join(slack)} are slack under {formed.under}"
        remarks.say("slack-hanger", text, _SEE)
    if shape.has_uplift:
        marks = ", ".join(cable.loads[k - 1].mark for k in shape.above_string)
        remarks.say(
            "above-string",
            f"{remarks.name}: uplift holds {marks} above the closing string under {formed.under}; "
            "the cable is in tension, and this is no simple hanging shape",
        )


def say_pull(
    formed: FormedCable, formed_pull: float | None, settings: Settings, remarks: Remarks
) -> None:
    """Say that a cable nearly hangs loose as it stands."""
    least = settings.limits.min_pull
    if formed_pull and (formed.horizontal or 0.0) < least * formed_pull:
        text = f"{remarks.name}: its pull falls under {least:g} of the formed pull"
        remarks.say("slack-cable", f"{text} under {formed.under}", _SEE)


def say_bowed(shapes: Sequence[tuple[str, Shape]], cable: Cable, remarks: Remarks) -> None:
    """Say which states bow the cable up."""
    found = [
        (combo, [cable.loads[k - 1].mark for k in shape.above_string])
        for combo, shape in shapes
        if shape.has_uplift
    ]
    if found:
        marks = dict.fromkeys(mark for _, some in found for mark in some)
        remarks.say(
            "above-string",
            f"{remarks.name}: uplift holds {', '.join(marks)} above the closing string "
            f"{_under([combo for combo, _ in found])}; the cable is in tension",
        )


def slack_hangers(nodes: Sequence[Node], cable: Cable) -> tuple[str, ...]:
    """Name the hangers whose net load is zero or up, clamped ones left out."""
    return tuple(
        node.mark
        for node, load in zip(nodes[1:-1], cable.loads, strict=True)
        if node.hanger is not None and node.load <= 0.0 and not load.clamped
    )


def say_idle(combos: Sequence[str], remarks: Remarks) -> None:
    """Say which combinations load other cables only."""
    if combos:
        remarks.say(
            "combination-of-others",
            f"{remarks.name} carries no case of {', '.join(combos)}: not checked under it",
        )


def say_weightless(cable: Cable, combinations: Sequence[Combination], remarks: Remarks) -> None:
    """Say which combinations leave the cable's own weight out."""
    case = weight_case(cable) if cable.weight else None
    without = [c.text for c in combinations if case is not None and case not in dict(c.terms)]
    if without:
        remarks.say(
            "no-cable-weight",
            f"{remarks.name}: no {case}, so no weight of the cable, {_under(without)}",
        )
