"""Cables already cut: they keep their unstressed lengths and stand where equilibrium puts them."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.built import Built
from dxfcable.checking import moved_heads
from dxfcable.gathering import gather
from dxfcable.model import Severity
from dxfcable.recorded import CUT
from dxfcable.remarks import Remarks
from dxfcable.responding import respond
from dxfcable.statics.combinations import CombinationError, parse

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.anchorages import MovedHead
    from dxfcable.built import Standing
    from dxfcable.model import Cable, Finding, FormedCable, Layout
    from dxfcable.recorded import CableRecord, RecordedHead
    from dxfcable.settings import Settings
    from dxfcable.statics.combinations import Combination

_SAME_PLACE = 1e-6  # of the span: a load point farther off was moved


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Stood:
    """A cut cable as it stands."""

    formed: FormedCable
    combination: Combination
    built: Built


def fitted(cable: Cable, record: CableRecord, remarks: Remarks) -> Cable:
    """Give a cable what only its record knows, and say where drawing and record differ.

    Parameters
    ----------
    cable : Cable
        As drawn, its loads as they are to be used.
    record : CableRecord
        Of the same cable.
    remarks : Remarks
        What stops is added: load points that came, went or moved.
    """
    tolerance = _SAME_PLACE * (cable.supports[-1].x - cable.supports[0].x)
    drawn, kept = len(cable.loads), len(record.pieces) - 1
    if drawn != kept:
        remarks.stop(
            "cut-points",
            f"cable {cable.mark} was cut with {kept} load points, and {drawn} are drawn",
            remedy="Draw the points it was cut with, or form it anew with --reform.",
        )
        return cable
    for load, before in zip(cable.loads, record.loads, strict=True):
        if abs(load.x - before.x) > tolerance:
            remarks.stop(
                "clamp-moved",
                f"cable {cable.mark}: load point {load.mark} is drawn at x {load.x:.6g} and was at "
                f"{before.x:.6g} when the cable was cut; a clamp stays where it is on the cable",
                remedy="Move it back, or give --move-clamps.",
                origin=load.origin,
            )
    for name, now, kept_value in (
        ("EA", cable.ea, record.ea),
        ("WEIGHT", cable.weight or None, record.weight or None),
        ("ALPHA", cable.alpha, record.alpha),
    ):
        if now is not None and kept_value is not None and now != kept_value:
            remarks.say(
                "cut-data-changed",
                f"cable {cable.mark}: {name} is {now:g} in the drawing and was {kept_value:g} when "
                "it was cut; the drawing's is used",
            )
    return replace(
        cable,
        ea=record.ea if cable.ea is None else cable.ea,
        alpha=record.alpha if cable.alpha is None else cable.alpha,
        weight=cable.weight or record.weight,
        weight_case=cable.weight_case or record.weight_case,
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
            _say_inextensible(cable, remarks)
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
            formed = replace(formed, delta_t=standing.delta_t)
            own = replace(built[number], shape=shape)
            result.append(Stood(formed=formed, combination=combination, built=own))
        findings += remarks.findings
    return result, moved_heads(states, 0)


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


def _say_inextensible(cable: Cable, remarks: Remarks) -> None:
    """Say that a cut cable without EA is taken as inextensible: an engineer must see that."""
    if cable.ea is None:
        remarks.say(
            "cut-inextensible",
            f"cable {cable.mark} keeps its cut length and states no EA: it runs as inextensible",
            Severity.WARNING,
        )
