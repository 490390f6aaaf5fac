"""The schedules of a solved drawing: cables, hangers, anchorages."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.model import Extreme, Finding, Severity
from dxfcable.scheduling.schedule_lengths import cable_lengths, hanger_lengths
from dxfcable.scheduling.schedule_rows import (
    AnchorageRow,
    CableRow,
    HangerRow,
    LevelRange,
    Schedules,
)
from dxfcable.settings_cut_length import ALL
from dxfcable.solving.remarks import Remarks

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Anchorage, Cable, FormedCable, Layout, Solution
    from dxfcable.settings import Settings

__all__ = ["Schedules", "schedules"]

# A value in one state: its level, whether that is assumed, the combination, the value.
_InState = tuple[str, bool, str, float]


def schedules(layout: Layout, solution: Solution, settings: Settings) -> Schedules:
    """Gather the schedules of all cables of a drawing.

    Parameters
    ----------
    layout, solution : Layout, Solution
        Of one drawing: a formed cable for each cable drawn.
    settings : Settings
        Deductions of `[cut_length]`, digits and reference temperature.

    Returns
    -------
    Schedules

    Raises
    ------
    SettingsError
        Where a force of `[cut_length]` does not read in this drawing.
    """
    cables, hangers, findings = [], [], []
    for cable, formed in zip(layout.cables, solution.cables, strict=True):
        remarks = Remarks(cable)
        cables.append(_cable_row(layout, cable, formed, settings, remarks))
        hangers += _hanger_rows(layout, cable, formed, settings, remarks)
        findings += remarks.findings
    findings += _unused(solution, settings)
    return Schedules(
        length_unit=layout.length_unit,
        force_unit=layout.force_unit or "",
        digits=settings.show.force_digits,
        temperature=settings.show.reference_temperature,
        cables=tuple(cables),
        hangers=tuple(hangers),
        anchorages=tuple(_anchorage_rows(layout, solution)),
        findings=tuple(dict.fromkeys(findings)),
    )


def _unused(solution: Solution, settings: Settings) -> list[Finding]:
    """Name the marks of `[cut_length.marks]` that no cable and no hanger has."""
    known = {ALL}
    for formed in solution.cables:
        known.add(formed.mark.casefold())
        for node in formed.nodes:
            if node.hanger is not None and node.hanger_foot is not None:
                known |= {node.mark.casefold(), f"{formed.mark}/{node.mark}".casefold()}
    unused = [mark for mark, _ in settings.cut_length.marks if mark.casefold() not in known]
    return [
        Finding(
            code="mark-unused",
            severity=Severity.NOTE,
            text=f"[cut_length.marks] states values for {mark}: no cable and no hanger of this "
            "drawing has that mark",
            remedy="Write the mark as the drawing has it.",
        )
        for mark in unused
    ]


def _cable_row(
    layout: Layout, cable: Cable, formed: FormedCable, settings: Settings, remarks: Remarks
) -> CableRow:
    """Gather one cable."""
    lengths, pieces = cable_lengths(layout, cable, formed, settings, remarks)
    tensions: list[_InState] = [
        (formed.level, formed.level_is_assumed, formed.under, formed.max_tension)
    ]
    tensions += [
        (s.level, s.level_is_assumed, s.combo, s.max_tension) for s in formed.states if not s.fault
    ]
    return CableRow(
        mark=formed.mark,
        status=formed.status,
        rule=formed.rule,
        under=formed.under,
        level=formed.level,
        level_is_assumed=formed.level_is_assumed,
        horizontal=formed.horizontal,
        max_tension=formed.max_tension,
        governs=formed.governs,
        sag=formed.sag,
        weight=formed.weight,
        ea=formed.ea,
        strand=cable.strand,
        capacity=formed.capacity,
        utilization=formed.utilization,
        length=formed.length,
        unstressed_length=formed.unstressed_length,
        lengths=lengths,
        pieces=pieces,
        tensions=_ranges(tensions),
        faults=tuple((s.combo, s.fault) for s in formed.states if s.fault),
        has_datum=cable.datum is not None,
        reference=formed.nodes[0].elevation,
    )


def _hanger_rows(
    layout: Layout, cable: Cable, formed: FormedCable, settings: Settings, remarks: Remarks
) -> list[HangerRow]:
    """Gather the hangers of one cable, left to right."""
    loads = iter(cable.loads)
    clamped = [not node.is_support and next(loads).clamped for node in formed.nodes]
    rows = []
    for k, node in enumerate(formed.nodes):
        if node.hanger is None or node.hanger_foot is None:
            continue
        names = [f"{formed.mark}/{node.mark}", node.mark, formed.mark]
        ea, lengths = hanger_lengths(layout, names, node.hanger, node.load, settings, remarks)
        first = formed.nodes[0]
        rows.append(
            HangerRow(
                cable=formed.mark,
                mark=node.mark,
                x=node.x,
                along=node.x - first.x,
                elevation=node.elevation,
                deck_elevation=node.hanger_foot + node.elevation - node.y,
                length=node.hanger,
                force=node.load,
                forces=_ranges(_forces(formed, k)),
                slack=() if clamped[k] else _slack(formed, k),
                is_clamped=clamped[k],
                ea=ea,
                lengths=lengths,
                has_datum=cable.datum is not None,
                reference=first.elevation,
            )
        )
    return rows


def _forces(formed: FormedCable, node: int) -> list[_InState]:
    """List what a hanger carries, as formed and in each state that has a shape."""
    result = [
        (formed.level, formed.level_is_assumed, formed.under, formed.nodes[node].load),
    ]
    result += [
        (s.level, s.level_is_assumed, s.combo, s.nodes[node].load) for s in formed.states if s.nodes
    ]
    return result


def _slack(formed: FormedCable, node: int) -> tuple[str, ...]:
    """Name the combinations in which a hanger's net load is zero or up."""
    return tuple(dict.fromkeys(combo for _, _, combo, load in _forces(formed, node) if load <= 0.0))


def _ranges(values: Sequence[_InState]) -> tuple[LevelRange, ...]:
    """Find the extremes of each level apart; of equal ones the first counts."""
    result = []
    for level in dict.fromkeys(level for level, *_ in values):
        of_level = [value for value in values if value[0] == level]
        most = max(of_level, key=lambda value: value[3])
        least = min(of_level, key=lambda value: value[3])
        result.append(
            LevelRange(
                level=level,
                is_assumed=any(is_assumed for _, is_assumed, _, _ in of_level),
                most=Extreme(value=most[3], combo=most[2]),
                least=Extreme(value=least[3], combo=least[2]),
            )
        )
    return tuple(result)


def _anchorage_rows(layout: Layout, solution: Solution) -> list[AnchorageRow]:
    """List each support with mast or stay as formed, then in each state of its cables."""
    pairs = list(zip(layout.cables, solution.cables, strict=True))
    rows = []
    for found in solution.anchorages:
        at_it = [
            (cable, formed)
            for cable, formed in pairs
            if any(node.support == found.support for node in formed.nodes)
        ]
        if not at_it:
            continue
        cables = [formed for _, formed in at_it]
        datum = next((cable.datum for cable, _ in at_it if cable.datum is not None), None)
        formed_row = AnchorageRow(
            found=found,
            combo=", ".join(dict.fromkeys(formed.under for formed in cables)),
            level=", ".join(dict.fromkeys(formed.level for formed in cables)),
            level_is_assumed=any(formed.level_is_assumed for formed in cables),
            is_formed=True,
            stay_angles=_slopes(found),
            elevation=found.at[1] + (datum or 0.0),
            has_datum=datum is not None,
            reference=cables[0].nodes[0].elevation,
        )
        rows += [formed_row, *_in_states(formed_row, cables)]
    return rows


def _in_states(formed_row: AnchorageRow, cables: Sequence[FormedCable]) -> list[AnchorageRow]:
    """List one support in all states; cables that meet there share them."""
    rows: dict[str, AnchorageRow] = {}
    support = formed_row.found.support
    for state in (state for formed in cables for state in formed.states):
        found = next((a for a in state.anchorages if a.support == support), None)
        if found is not None and state.combo not in rows:
            rows[state.combo] = replace(
                formed_row,
                found=found,
                combo=state.combo,
                level=state.level,
                level_is_assumed=state.level_is_assumed,
                is_formed=False,
                stay_angles=_slopes(found),
                elevation=formed_row.elevation + found.at[1] - formed_row.found.at[1],
            )
    return list(rows.values())


def _slopes(found: Anchorage) -> tuple[float, ...]:
    """Give the angle of each stay against the horizontal."""
    x, y = found.at
    return tuple(math.degrees(math.atan2(y - b, abs(x - a))) for a, b in found.stay_feet)
