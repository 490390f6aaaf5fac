"""Cables already cut: they keep their unstressed lengths and stand where equilibrium puts them."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.model import Severity
from dxfcable.recorded import CUT
from dxfcable.solving.built import Built
from dxfcable.solving.checking import moved_heads
from dxfcable.solving.gathering import gather
from dxfcable.solving.remarks import Remarks, say_inextensible
from dxfcable.solving.responding import respond
from dxfcable.solving.state_remarks import say_pull, say_shape
from dxfcable.statics.combinations import CombinationError, parse

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Cable, Finding, FormedCable, Layout, Node
    from dxfcable.recorded import CableRecord, RecordedHead
    from dxfcable.settings import Settings
    from dxfcable.solving.anchorages import MovedHead
    from dxfcable.solving.built import Standing
    from dxfcable.statics.combinations import Combination

_SAME_PLACE = 1e-6  # of the span: a load point farther off was moved


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Stood:
    """A cut cable as it stands."""

    formed: FormedCable
    combination: Combination
    built: Built


def fitted(cable: Cable, standing: Standing, remarks: Remarks) -> Cable:
    """Give a cable what only its record knows, and say where drawing and record differ.

    Parameters
    ----------
    cable : Cable
        As drawn, its loads as they are to be used.
    standing : Standing
        With the record of the same cable.
    remarks : Remarks
        What stops is added: load points that came, went or moved.
    """
    record = standing.record
    if not _points_fit(cable, record, remarks):
        return cable
    _say_governing(cable, record, remarks)
    weight = _kept("WEIGHT", cable.weight or None, record.weight or None, standing, remarks)
    ea = _kept("EA", cable.ea, record.ea, standing, remarks)
    if record.ea is None and cable.ea is not None:
        ea = None
        remarks.say(
            "cut-ea-added",
            f"{remarks.name} states EA {cable.ea:g} now and stated none when it was cut: its "
            "lengths were found without stretch, so the EA is not used; --reform forms it with EA",
            Severity.WARNING,
        )
    return replace(
        cable,
        ea=ea,
        alpha=record.alpha if cable.alpha is None else cable.alpha,
        weight=weight or 0.0,
        weight_case=cable.weight_case or record.weight_case,
    )


def _points_fit(cable: Cable, record: CableRecord, remarks: Remarks) -> bool:
    """Stop where load points came, went or moved."""
    tolerance = _SAME_PLACE * (cable.supports[-1].x - cable.supports[0].x)
    drawn, kept = len(cable.loads), len(record.pieces) - 1
    if drawn != kept:
        remarks.stop(
            "cut-points",
            f"{remarks.name} was cut with {kept} load points, and {drawn} are drawn",
            remedy="Draw the points it was cut with, or form it anew: solve --reform, or revise "
            "--hold rule.",
        )
        return False
    for load, before in zip(cable.loads, record.loads, strict=True):
        if abs(load.x - before.x) > tolerance:
            remarks.stop(
                "clamp-moved",
                f"{remarks.name}: load point {load.mark} is drawn at x {load.x:.6g} and was at "
                f"{before.x:.6g} when the cable was cut; a clamp stays where it is on the cable",
                remedy="Move it back, or give revise --hold cut-length --move-clamps.",
                origin=load.origin,
            )
    return True


def _kept(
    name: str, now: float | None, before: float | None, standing: Standing, remarks: Remarks
) -> float | None:
    """Choose between what the drawing says now and what was recorded, and say it."""
    if now == before or (name == "EA" and before is None):
        return now
    was = "not stated" if before is None else f"{before:g}"
    said = "not stated" if now is None else f"{now:g}"
    text = f"{remarks.name}: {name} is {said} in the drawing and was {was} when it was last solved"
    if now is None:
        remarks.say("cut-data-changed", f"{text}; the recorded one is used")
        return before
    if standing.is_revised:
        remarks.say("cut-data-changed", f"{text}; the drawing's is used")
        return now
    remarks.say(
        "cut-data-changed",
        f"{text}; the cable is cut and stands as recorded. Give revise --hold cut-length to see "
        "what moves, or solve --reform",
        Severity.WARNING,
    )
    return before


def _say_governing(cable: Cable, record: CableRecord, remarks: Remarks) -> None:
    """Say that rule and UNDER of a drawing do not govern a cable that is cut."""
    rule, under = record.stated_rule or record.rule, record.stated_under or record.under
    drawn = cable.rule
    if drawn is not None and (drawn.kind, drawn.value, drawn.point) != (
        rule.kind,
        rule.value,
        rule.point,
    ):
        remarks.say(
            "rule-unused",
            f"{remarks.name} is cut: {drawn.text or drawn.kind.name} of the drawing does not "
            "govern it any more; --reform forms it anew",
        )
    if cable.under is not None and cable.under != under:
        remarks.say(
            "under-unused",
            f'{remarks.name} is cut: it was formed under "{record.under}", not "{cable.under}"; '
            "--reform forms it anew",
        )


def say_supports_moved(cable: Cable, standing: Standing, remarks: Remarks) -> None:
    """Say that supports stand elsewhere than when the drawing was issued."""
    reach = _SAME_PLACE * (cable.supports[-1].x - cable.supports[0].x)
    ends = (cable.supports[0], cable.supports[-1])
    moved = [
        f"{s.mark} by ({s.x - k.x:+.6g}, {s.y - k.y:+.6g})"
        for s, k in zip(ends, standing.record.supports, strict=False)
        if max(abs(s.x - k.x), abs(s.y - k.y)) > reach
    ]
    if moved:
        remarks.say(
            "supports-moved",
            f"{remarks.name}: supports were moved since it was issued and are solved as moved: "
            f"{', '.join(moved)}",
            Severity.NOTE if standing.is_revised else Severity.WARNING,
        )


def stand(
    layout: Layout,
    cables: Sequence[tuple[Cable, Standing]],
    heads: Sequence[tuple[int, RecordedHead]],
    settings: Settings,
    findings: list[Finding],
) -> tuple[list[Stood], dict[int, MovedHead]]:
    """Find how cut cables stand, all at once where they share heads that give.

    Parameters
    ----------
    cables : sequence of (Cable, Standing)
        As `fitted` returns them.
    heads : sequence of (int, RecordedHead)
        Supports that give, by key.
    findings : list of Finding
        What has to be said, and what stops, is added.

    Returns
    -------
    list of Stood, dict of int to MovedHead
        Empty where something stops.
    """
    combinations = [_combination(c, s, settings, findings) for c, s in cables]
    read = [c for c in combinations if c is not None]
    if len(read) < len(cables):
        return [], {}
    built = [Built(cable=c, pieces=s.record.pieces, delta_t=c.delta_t or 0.0) for c, s in cables]
    states = respond(
        layout,
        built,
        [[combination] for combination in read],
        heads,
        [np.array([s.delta_t]) for _, s in cables],
    )
    result = []
    for number, ((cable, standing), combination) in enumerate(zip(cables, read, strict=True)):
        remarks = Remarks(cable)
        response = states.cables[number]
        if np.isnan(response.horizontals[0]):
            fault = states.faults[number][0]
            text = f"cable {cable.mark}, kept at its cut length, has no determinate shape: {fault}"
            remarks.stop("no-shape", text)
        else:
            shape = response.state(0)
            if cable.ea is None:
                say_inextensible(remarks)
            formed = gather(
                layout,
                cable,
                standing.record.rule,
                combination,
                shape,
                settings,
                remarks,
                status=CUT,
            )
            formed = replace(
                formed, delta_t=standing.delta_t, nodes=_with_hangers(formed, standing)
            )
            say_shape(formed, cable, shape, remarks)
            say_supports_moved(cable, standing, remarks)
            say_pull(formed, standing.formed_pull, settings, remarks)
            own = replace(built[number], shape=shape)
            result.append(Stood(formed=formed, combination=combination, built=own))
        findings += remarks.findings
    return result, moved_heads(states, 0)


def _with_hangers(formed: FormedCable, standing: Standing) -> tuple[Node, ...]:
    """Let hangers keep their lengths: the deck moves with them."""
    inner = formed.nodes[1:-1]
    if len(standing.hangers) != len(inner):
        return formed.nodes
    kept = [
        node if length is None else replace(node, hanger=length, hanger_foot=node.y - length)
        for node, length in zip(inner, standing.hangers, strict=True)
    ]
    return formed.nodes[0], *kept, formed.nodes[-1]


def _combination(
    cable: Cable, standing: Standing, settings: Settings, findings: list[Finding]
) -> Combination | None:
    """Read what a cut cable was formed under."""
    record = standing.record
    cases = list(dict.fromkeys(case for load in cable.loads for case, _ in load.cases))
    if cable.weight and cable.weight_case and cable.weight_case not in cases:
        cases.append(cable.weight_case)
    try:
        return parse(record.under, cases, aliases=dict(settings.cases.alias), level=record.level)
    except CombinationError as error:
        remarks = Remarks(cable)
        text = f"cable {cable.mark}: {error}"
        remarks.stop("combination", text, remedy="Give its loads the cases it was formed under.")
        findings += remarks.findings
        return None
