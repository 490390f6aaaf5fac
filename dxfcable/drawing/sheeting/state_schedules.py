"""Schedules of what was checked: combinations, their reactions and anchorages, the envelope."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.sheeting.schedules import (
    ANCHORAGE_HEAD,
    anchorage_rows,
    reaction_rows,
    schedule,
)

if TYPE_CHECKING:
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.sheeting.ruled_table import Schedule
    from dxfcable.model import Extreme, State


def state_schedules(view: View) -> list[Schedule]:
    """List the schedules of all checked combinations; none where the drawing has none."""
    found = []
    if view.formed.states:
        found.append(_combinations(view))
        found += _reactions(view)
        found += _anchorages(view)
    if view.formed.envelope is not None:
        found += _envelope(view)
    return found


def level_words(state: State) -> str:
    """Say the level of a combination, and whether it is assumed."""
    return f"{state.level.upper()}{' (ASSUMED)' if state.level_is_assumed else ''}"


def _name(state: State) -> str:
    """Give the combination with its change of temperature."""
    change = f", {state.delta_t:+.6g} K" if state.delta_t else ""
    return f"{state.combo}{change}"


def _combinations(view: View) -> Schedule:
    """One row for each combination."""
    wording = view.wording
    lift = view.formed.nodes[0].elevation - view.formed.nodes[0].y
    rows = []
    for state in view.formed.states:
        if state.fault:
            rows.append((_name(state), level_words(state), "", "", "", "", state.fault))
            continue
        tensions = [t for p in state.segments for t in (p.tension_left, p.tension_right)]
        low = "" if state.low_point is None else wording.level(state.low_point[1] + lift)
        rows.append(
            (
                _name(state),
                level_words(state),
                wording.force(state.horizontal),
                wording.force(state.max_tension),
                wording.force(min(tensions)) if tensions else "",
                low,
                f"SLACK {', '.join(state.slack)}" if state.slack else "",
            )
        )
    head = ("COMBINATION", "LEVEL", "PULL H", "MAX T", "MIN T", "LOW POINT", "REMARK")
    title = f"COMBINATIONS ON CABLE {view.formed.mark}, UNSTRESSED LENGTHS FIXED"
    return schedule("combinations", title, head, rows, lefts=(0, 1, 6))


def _reactions(view: View) -> list[Schedule]:
    """Give H and V at each support under each combination."""
    marks = [r.mark for r in view.formed.reactions]
    rows = [
        (
            _name(state),
            level_words(state),
            *(words for row in reaction_rows(view, state.reactions) for words in row[1:]),
        )
        for state in view.formed.states
        if state.reactions
    ]
    if not rows:
        return []
    head = ["COMBINATION", "LEVEL"]
    for mark in marks:
        head += [f"{mark} H", f"{mark} V"]
    title = f"REACTIONS ON CABLE {view.formed.mark} BY COMBINATION"
    return [schedule("reactions-by", title, head, rows, lefts=(0, 1))]


def _anchorages(view: View) -> list[Schedule]:
    """Give masts, stays and anchors under each combination."""
    rows = [
        (_name(state), level_words(state), *row)
        for state in view.formed.states
        for row in anchorage_rows(view, state.anchorages)
    ]
    if not rows:
        return []
    head = ("COMBINATION", "LEVEL", *ANCHORAGE_HEAD)
    title = "MASTS, STAYS AND ANCHORS BY COMBINATION"
    return [schedule("anchorages-by", title, head, rows, lefts=(0, 1, 2, 3))]


def _envelope(view: View) -> list[Schedule]:
    """Give extremes with the combinations that bring them."""
    formed, wording, envelope = view.formed, view.wording, view.formed.envelope
    assert envelope is not None
    levels = {state.combo: level_words(state) for state in formed.states}
    assumed = " (ASSUMED)" if formed.level_is_assumed else ""
    levels.setdefault(formed.under, f"{formed.level.upper()}{assumed}")

    def by(extreme: Extreme) -> str:
        level = levels.get(extreme.combo, "")
        return f"{extreme.combo} - {level}" if level else extreme.combo

    rows = [
        ("LARGEST TENSION", wording.force(envelope.max_tension.value), by(envelope.max_tension)),
        ("LEAST TENSION", wording.force(envelope.min_tension.value), by(envelope.min_tension)),
    ]
    if envelope.max_uplift is not None:
        uplift = envelope.max_uplift
        rows.append(("LARGEST UPLIFT", wording.force(uplift.value), by(uplift)))
    if formed.clearance is not None:
        least = formed.clearance
        state = f"{least.state} - {levels[least.state]}" if least.state in levels else least.state
        rows.append(("LEAST CLEARANCE", wording.length(least.least), state))
    head = ("ENVELOPE", "VALUE", "UNDER")
    found = [schedule("envelope", f"ENVELOPE OF CABLE {formed.mark}", head, rows, lefts=(0, 2))]
    points = [
        (
            point.mark,
            wording.level(point.lowest.value),
            by(point.lowest),
            wording.level(point.highest.value),
            by(point.highest),
        )
        for point in envelope.points
    ]
    head_points = ("POINT", "LOWEST", "UNDER", "HIGHEST", "UNDER")
    pieces = [
        (
            piece.name,
            wording.force(piece.most.value),
            by(piece.most),
            wording.force(piece.least.value),
            by(piece.least),
        )
        for piece in envelope.segments
    ]
    head_pieces = ("PIECE", "MAX T", "UNDER", "MIN T", "UNDER")
    if points:
        title = f"ENVELOPE OF LEVELS, CABLE {formed.mark}"
        found.append(schedule("levels", title, head_points, points, lefts=(0, 2, 4)))
    if pieces:
        title = f"ENVELOPE OF TENSIONS, CABLE {formed.mark}"
        found.append(schedule("tensions", title, head_pieces, pieces, lefts=(0, 2, 4)))
    return found
