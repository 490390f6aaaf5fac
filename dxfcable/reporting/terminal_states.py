"""Checked states, envelope, clearance and load changes as tables for a person at a terminal."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.painting.naming import anchor_feet
from dxfcable.lengths import format_elevation, format_length
from dxfcable.quantities import format_force
from dxfcable.recorded import CUT
from dxfcable.reporting.plain_output import Table
from dxfcable.units import FORCE_UNITS

if TYPE_CHECKING:
    from collections.abc import Iterator

    from rich.console import Console

    from dxfcable.model import (
        Anchorage,
        Clearance,
        Envelope,
        Extreme,
        FormedCable,
        Layout,
        Movement,
        Revised,
        Solution,
        State,
    )
    from dxfcable.reporting.plain_output import PlainConsole

    Out = Console | PlainConsole

_DIGITS = 4
_LONGEST = 30  # letters of a combination, before tables name it by its number


def show_states(out: Out, formed: FormedCable, layout: Layout) -> None:
    """Print the states of a cable, their extremes and the least clearance, where it has any.

    Parameters
    ----------
    out : Console or PlainConsole
    formed : FormedCable
        Without a state or clearance nothing is printed of it.
    layout : Layout
        Gives the units.
    """
    if formed.states:
        names = _names(formed)
        out.print(f"states, unstressed lengths kept{head_words(formed)}")
        for combo, name in names.items():
            if combo != name:
                out.print(_safe(f"{name}: {combo}"))
        out.print(_states_table(formed, layout, names))
        for line in _remarks(formed):
            out.print(_safe(line))
        if any(state.anchorages for state in formed.states):
            out.print(f"masts, stays and uplift of anchors{head_words(formed)}")
            out.print(_members_table(formed, layout, names))
        if formed.envelope is not None:
            _show_envelope(out, formed, formed.envelope, layout, names)
    if formed.clearance is not None:
        out.print(_safe(_clearance_words(formed, formed.clearance, layout)))


def show_changes(out: Out, solution: Solution, layout: Layout) -> None:
    """Print what a load change did to each cable: what was held, before, after, what moved."""
    after = {formed.mark: formed for formed in solution.cables}
    for revised in solution.revised:
        out.print()
        now = after[revised.cable]
        words = f"Cable {revised.cable} revised, {_held_words(revised)}{head_words(now)}"
        out.print(_safe(words), style="bold")
        out.print(_before_after(revised.before, now, layout))
        out.print(f"movement{head_words(now)}; up and to the right positive")
        for table in _movement_tables(revised.movement, layout):
            out.print(table)


def head_words(formed: FormedCable) -> str:
    """Say in a table's head that a cable already cut runs as inextensible; "" for any other."""
    return " (cut, inextensible)" if formed.status == CUT and not formed.ea else ""


def _names(formed: FormedCable) -> dict[str, str]:
    """Name the combinations as typed, or by their numbers where one is long."""
    combos = [formed.under, *(state.combo for state in formed.states)]
    unique = list(dict.fromkeys(combos))
    if max(map(len, unique)) <= _LONGEST:
        return {combo: combo for combo in unique}
    return {combo: f"state {number}" for number, combo in enumerate(unique, start=1)}


def _level(level: str, *, is_assumed: bool) -> str:
    return f"{level}, assumed" if is_assumed else level


def _states_table(formed: FormedCable, layout: Layout, names: dict[str, str]) -> Table:
    """List pull, largest tension and low point of each state, as drawn first."""
    table = Table(("state", "level", "pull H", "largest tension", "in", "low point"))
    lift = formed.nodes[0].elevation - formed.nodes[0].y
    low = min(span.low_point[1] for span in formed.spans)
    table.add_row(
        _safe(f"{names[formed.under]}, as drawn"),
        _level(formed.level, is_assumed=formed.level_is_assumed),
        "" if formed.horizontal is None else _force(formed.horizontal, layout),
        _force(formed.max_tension, layout),
        _safe(formed.governs.segment),
        _elevation(low + lift, layout),
    )
    for state in formed.states:
        name, level = (
            _state_name(state, names),
            _level(state.level, is_assumed=state.level_is_assumed),
        )
        if state.fault:
            table.add_row(_safe(name), level, "no shape", "", "", "")
            continue
        table.add_row(
            _safe(name),
            level,
            _force(state.horizontal, layout),
            _force(state.max_tension, layout),
            _safe(state.governs.segment) if state.governs else "",
            _elevation(state.low_point[1] + lift, layout) if state.low_point else "",
        )
    return table


def _state_name(state: State, names: dict[str, str]) -> str:
    """Name a state, with its change of temperature."""
    change = f", {state.delta_t:+.6g} K" if state.delta_t else ""
    return f"{names[state.combo]}{change}"


def _remarks(formed: FormedCable) -> Iterator[str]:
    """Say which hangers are slack, and why a state has no shape."""
    for state in formed.states:
        if state.fault:
            yield f"no shape under {state.combo}: {state.fault}"
        if state.slack:
            word = "hanger" if len(state.slack) == 1 else "hangers"
            yield f"slack under {state.combo}: {word} {', '.join(state.slack)}"


def _members_table(formed: FormedCable, layout: Layout, names: dict[str, str]) -> Table:
    """List forces of masts, stays and anchors, a row for each state and support."""
    table = Table(("state", "level", "at", "mast", "stays", "uplift"))
    for state in formed.states:
        for joint in state.anchorages:
            table.add_row(
                _safe(_state_name(state, names)),
                _level(state.level, is_assumed=state.level_is_assumed),
                _safe(joint.mark),
                "" if joint.mast is None else _force(joint.mast, layout),
                ", ".join(_force(stay, layout) for stay in joint.stays),
                _safe(_uplifts(joint, layout)),
            )
    return table


def _uplifts(joint: Anchorage, layout: Layout) -> str:
    """Write the uplift of each anchor, named by mark or member where there are several."""
    forces = [_force(anchor.uplift, layout) for anchor in joint.anchors]
    if len(forces) < 2:
        return ", ".join(forces)
    names = [
        anchor.mark or foot.lower()
        for anchor, foot in zip(joint.anchors, anchor_feet(joint), strict=True)
    ]
    return ", ".join(f"{name} {force}" for name, force in zip(names, forces, strict=True))


def _show_envelope(
    out: Out, formed: FormedCable, found: Envelope, layout: Layout, names: dict[str, str]
) -> None:
    """Print the extremes: of the cable, of each point, of each piece."""
    levels = {formed.under: formed.level}
    levels |= {state.combo: state.level for state in formed.states}
    is_mixed = len(set(levels.values())) > 1

    def by(extreme: Extreme) -> str:
        level = f", {levels[extreme.combo]}" if is_mixed else ""
        return _safe(f"{names[extreme.combo]}{level}")

    level = "" if is_mixed else f", {next(iter(levels.values()))} level"
    out.print(f"envelope{level}{head_words(formed)}")
    table = Table(("", "value", "under"))
    rows = [("largest tension", found.max_tension), ("least tension", found.min_tension)]
    rows += [("largest uplift", found.max_uplift)] if found.max_uplift else []
    for name, extreme in rows:
        table.add_row(name, _force(extreme.value, layout), by(extreme))
    out.print(table)
    if found.points:
        table = Table(("point", "lowest", "under", "highest", "under"))
        for point in found.points:
            low, high = point.lowest, point.highest
            table.add_row(
                _safe(point.mark),
                _elevation(low.value, layout),
                by(low),
                _elevation(high.value, layout),
                by(high),
            )
        out.print(table)
    table = Table(("segment", "largest tension", "under", "least tension", "under"))
    for piece in found.segments:
        most, least = piece.most, piece.least
        table.add_row(
            _safe(piece.name),
            _force(most.value, layout),
            by(most),
            _force(least.value, layout),
            by(least),
        )
    out.print(table)


def _clearance_words(formed: FormedCable, found: Clearance, layout: Layout) -> str:
    """Say where and under what the cable comes nearest to its clearance line."""
    level = {formed.under: formed.level} | {s.combo: s.level for s in formed.states}
    below = ", under the line" if found.least < 0.0 else ""
    return (
        f"least clearance {_length(found.least, layout)}{below} at x {found.at[0]:.6g}, "
        f"under {found.state} ({level.get(found.state, formed.level)}){head_words(formed)}"
    )


def _held_words(revised: Revised) -> str:
    return "its rule held" if revised.held == "rule" else "its cut length held"


def _before_after(before: FormedCable, after: FormedCable, layout: Layout) -> Table:
    """Set the main figures side by side."""
    table = Table(("", "before", "after"))
    pulls = [
        "" if cable.horizontal is None else _force(cable.horizontal, layout)
        for cable in (before, after)
    ]
    table.add_row("pull H", *pulls)
    table.add_row("largest tension", *(_largest(cable, layout) for cable in (before, after)))
    table.add_row("sag", *(_length(cable.sag, layout) for cable in (before, after)))
    table.add_row(
        "unstressed length",
        *(_length(cable.unstressed_length, layout) for cable in (before, after)),
    )
    table.add_row("under", *(_safe(f"{c.under}, {c.level}") for c in (before, after)))
    if before.delta_t or after.delta_t:
        table.add_row("from reference", *(f"{c.delta_t:+.6g} K" for c in (before, after)))
    return table


def _largest(cable: FormedCable, layout: Layout) -> str:
    return f"{_force(cable.max_tension, layout)} in {_safe(cable.governs.segment)}"


def _movement_tables(moved: tuple[Movement, ...], layout: Layout) -> Iterator[Table]:
    """List loads and movements, then levels, tensions and hangers: one table were too wide."""
    table = Table(
        ("point", "load before", "load after", "dx", "dy", "dx since forming", "dy since forming")
    )
    for row in moved:
        table.add_row(
            _safe(row.mark),
            "" if row.is_support else _force(row.load_before, layout),
            "" if row.is_support else _force(row.load_after, layout),
            *(_signed(value, layout) for value in (row.dx, row.dy, row.sum_dx, row.sum_dy)),
        )
    yield table
    table = Table(("point", "elevation before", "after", "tension before", "after"))
    for row in moved:
        table.add_row(
            _safe(row.mark),
            _elevation(row.elevation_before, layout),
            _elevation(row.elevation_after, layout),
            _force(row.tension_before, layout),
            _force(row.tension_after, layout),
        )
    yield table
    hung = [row for row in moved if row.lean_deg is not None]
    if not hung:
        return
    table = Table(("hanger", "leans", "longer by this it holds the deck"))
    for row in hung:
        change = "" if row.hanger_change is None else _signed(row.hanger_change, layout)
        table.add_row(_safe(row.mark), f"{row.lean_deg:.2f} deg", change)
    yield table


def _signed(value: float, layout: Layout) -> str:
    """Write a movement with its sign, none for what does not show."""
    text = _length(value, layout)
    if text == _length(0.0, layout) or text.startswith("-"):
        return text
    return f"+{text}"


def _length(value: float, layout: Layout) -> str:
    return format_length(value, layout.length_unit)


def _elevation(value: float, layout: Layout) -> str:
    return format_elevation(value, layout.length_unit)


def _force(value: float, layout: Layout) -> str:
    """Write a force, bare while its unit is not known."""
    if layout.force_unit not in FORCE_UNITS:
        return f"{value:.{_DIGITS}g}"
    return format_force(value, layout.force_unit, _DIGITS)


def _safe(text: str) -> str:
    """Replace what a terminal cannot show: bytes that did not decode."""
    return text.encode("utf-8", "backslashreplace").decode("utf-8")
