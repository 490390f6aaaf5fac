"""What the schedule of one cable says of its checked states: each of them, and their extremes."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.naming import anchor_names, unique_parts
from dxfcable.drawing.painting.schedule_tables import cut_words, level_words
from dxfcable.drawing.painting.text_table import Table

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.model import Anchorage, Envelope, State

_MOST_STATES = 12  # rows; beyond that those that govern
_MOST_POINTS = 20  # load points up to which each has its row
_MOST_NAMED = 8  # slack hangers of one state

_Row = tuple[str, tuple[str, ...]]
_States = tuple[tuple[int, "State"], ...]


def states_title(view: View) -> str:
    """Give the title of all these tables; it says the level where they all have one."""
    level = _one_level(view)
    words = f", ALL {level}{_assumed(view)}" if level else ""
    return f"STATES OF CABLE {view.formed.mark}, UNSTRESSED LENGTHS KEPT{words}"


def state_tables(view: View) -> list[tuple[str, Table]]:
    """List the tables, each with its part of ids; none where no combination was checked.

    Parameters
    ----------
    view : View
        The cable; levels stand beside combinations wherever these are of several.

    Returns
    -------
    list of (str, Table)
    """
    if not view.formed.states:
        return []
    found = [("state", _states(view))]
    if any(state.anchorages for state in view.formed.states):
        found.append(("member", _members(view)))
    if view.formed.envelope is not None:
        found += _envelope(view, view.formed.envelope)
    title = cut_words(view)
    return [(key, replace(table, title=title)) for key, table in found]


def listed_states(view: View) -> tuple[_States, int]:
    """Choose the states that get a row, and count the others.

    Up to twelve all do. Beyond that those without a shape, those that bring the greatest of an
    extreme, those with slack hangers, then those that bring any extreme.

    Returns
    -------
    states : tuple of (int, State)
        With their numbers from 1, in order.
    others : int
    """
    states = view.formed.states
    numbered = tuple(enumerate(states, start=1))
    if len(states) <= _MOST_STATES:
        return numbered, 0
    wanted = [state.combo for state in states if state.fault]
    wanted += _governing(view)[:4]
    wanted += [state.combo for state in states if state.slack]
    wanted += _governing(view)
    kept = set(list(dict.fromkeys(wanted))[:_MOST_STATES])
    # Combinations are told apart by their texts, so no two states share one.
    chosen = tuple(pair for pair in numbered if pair[1].combo in kept)[:_MOST_STATES]
    return chosen, len(states) - len(chosen)


def _governing(view: View) -> list[str]:
    """List the combinations that bring an extreme, those of the whole cable first."""
    found, formed = view.formed.envelope, view.formed
    if found is None:
        return []
    extremes = [found.max_tension, found.min_tension]
    extremes += [found.max_uplift] if found.max_uplift else []
    names = [extreme.combo for extreme in extremes]
    names += [formed.clearance.state] if formed.clearance else []
    for point in found.points:
        names += [point.lowest.combo, point.highest.combo]
    for piece in found.segments:
        names += [piece.most.combo, piece.least.combo]
    known = {state.combo for state in formed.states}
    return [name for name in dict.fromkeys(names) if name in known]


def _levels(view: View) -> dict[str, str]:
    """Give the level of each combination, the formed one among them."""
    formed = view.formed
    levels = {formed.under: formed.level.upper()}
    return levels | {state.combo: state.level.upper() for state in formed.states}


def _one_level(view: View) -> str:
    """Give the level of all combinations, "" where they have several."""
    found = set(_levels(view).values())
    return found.pop() if len(found) == 1 else ""


def _assumed(view: View) -> str:
    """Say that levels are assumed, where any is."""
    formed = view.formed
    every = [formed.level_is_assumed, *(state.level_is_assumed for state in formed.states)]
    return " (ASSUMED)" if any(every) else ""


def _named(state: State) -> str:
    """Name a state: as typed, with its change of temperature."""
    return f"{state.combo}, {state.delta_t:+.6g} K" if state.delta_t else state.combo


def _table(
    columns: Sequence[tuple[str, str, Align]], rows: Iterable[_Row], more: _Row | None = None
) -> Table:
    """Make a table without the columns that are empty in every row."""
    rows = tuple(rows)
    kept = [k for k in range(len(columns)) if k == 0 or any(cells[k] for _, cells in rows)]
    lines = [(key, tuple(cells[k] for k in kept)) for key, cells in rows]
    if more is not None:
        lines.append((more[0], (*more[1], *[""] * (len(kept) - 1))))
    return Table(
        columns=tuple(columns[k][0] for k in kept),
        head=tuple(columns[k][1] for k in kept),
        aligns=tuple(columns[k][2] for k in kept),
        rows=tuple(lines),
    )


def _states(view: View) -> Table:
    """One row a state: pull, largest tension and its piece, low point, slack hangers."""
    wording = view.wording
    lift = view.formed.nodes[0].elevation - view.formed.nodes[0].y
    chosen, others = listed_states(view)
    rows: list[_Row] = []
    for number, state in chosen:
        level = level_words(state.level, is_assumed=state.level_is_assumed)
        level = "" if _one_level(view) else level
        if state.fault:
            rows.append((str(number), (_named(state), level, "", "", "", "", "NO SHAPE")))
            continue
        low = "" if state.low_point is None else wording.level(state.low_point[1] + lift)
        cells = (
            _named(state),
            level,
            wording.force(state.horizontal),
            wording.force(state.max_tension),
            state.governs.segment if state.governs else "",
            low,
            _slack_words(state),
        )
        rows.append((str(number), cells))
    columns = (
        ("combo", "COMBINATION", Align.LEFT),
        ("level", "LEVEL", Align.LEFT),
        ("pull", "PULL H", Align.RIGHT),
        ("tension", "LARGEST T", Align.RIGHT),
        ("piece", "IN", Align.LEFT),
        ("low", "LOW POINT", Align.RIGHT),
        ("remark", "REMARK", Align.LEFT),
    )
    more = ("more", (f"AND {others} MORE, SEE THE REPORT",)) if others else None
    return _table(columns, rows, more)


def _slack_words(state: State) -> str:
    """Name the slack hangers."""
    if not state.slack:
        return ""
    named = state.slack[:_MOST_NAMED]
    more = len(state.slack) - len(named)
    return f"SLACK {', '.join(named)}{f' AND {more} MORE' if more else ''}"


def _members(view: View) -> Table:
    """One row a state: masts, stays, uplift of anchors; as drawn first."""
    formed = view.formed
    chosen, _ = listed_states(view)
    columns = _member_columns(view, [state for _, state in chosen])
    rows = []
    for number, state in chosen:
        forces = dict(_member_forces(view, state.anchorages))
        if forces:
            level = "" if _one_level(view) else _levels(view)[state.combo]
            cells = (_named(state), level, *(forces.get(key, "") for key, _ in columns))
            rows.append((str(number), cells))
    heads = [("combo", "COMBINATION", Align.LEFT), ("level", "LEVEL", Align.LEFT)]
    heads += [(key, word, Align.RIGHT) for key, word in columns]
    own = [anchorage for _, anchorage in view.anchorages]
    if own:
        forces = dict(_member_forces(view, own))
        level = "" if _one_level(view) else _levels(view)[formed.under]
        cells = (f"{formed.under}, AS DRAWN", level, *(forces.get(key, "") for key, _ in columns))
        rows.insert(0, ("formed", cells))
    return _table(heads, rows)


def _member_columns(view: View, states: Sequence[State]) -> list[tuple[str, str]]:
    """Give a column for each mast, stay and anchor: part of ids and head."""
    columns: dict[str, str] = {}
    for state in states:
        for key, word, _ in _member_cells(state.anchorages):
            columns.setdefault(key, word)
    return list(columns.items())


def _member_forces(view: View, anchorages: Sequence[Anchorage]) -> list[tuple[str, str]]:
    """Pair columns and forces."""
    return [(key, view.wording.force(value)) for key, _, value in _member_cells(anchorages)]


def _member_cells(anchorages: Sequence[Anchorage]) -> list[tuple[str, str, float]]:
    """List masts, stays and uplifts: part of ids, head, force."""
    found = []
    names = unique_parts([str(a.support) for a in anchorages], "S")
    for name, joint in zip(names, anchorages, strict=True):
        if joint.mast is not None:
            found.append((f"mast-{name}", f"{joint.mark} MAST", joint.mast))
        for k, stay in enumerate(joint.stays, start=1):
            word = "STAY" if len(joint.stays) == 1 else f"STAY {k}"
            found.append((f"stay-{name}-{k}", f"{joint.mark} {word}", stay))
        words = anchor_names(joint)
        for k, (word, anchor) in enumerate(zip(words, joint.anchors, strict=True), start=1):
            head = f"{word.removeprefix('ANCHOR ')} UPLIFT"
            found.append((f"uplift-{name}-{k}", head, anchor.uplift))
    return found


def _envelope(view: View, found: Envelope) -> list[tuple[str, Table]]:
    """Give the extremes: of the whole cable, of each point, of each piece."""
    force, level = view.wording.force, view.wording.level
    points = [
        (mark, level(low.value), _by(view, low.combo), level(high.value), _by(view, high.combo))
        for mark, low, high in ((p.mark, p.lowest, p.highest) for p in found.points)
    ]
    pieces = [
        (name, force(most.value), _by(view, most.combo), force(least.value), _by(view, least.combo))
        for name, most, least in ((s.name, s.most, s.least) for s in found.segments)
    ]
    lowest = [p.lowest.value for p in found.points]
    most, least = [s.most.value for s in found.segments], [s.least.value for s in found.segments]
    tables = [("extreme", _extremes(view, found))]
    if points:
        kept = range(len(points))
        if len(points) > _MOST_POINTS:
            kept = range(lowest.index(min(lowest)), lowest.index(min(lowest)) + 1)
        rows = [(str(k + 1), points[k]) for k in kept]
        tables.append(("range", _ranges(("POINT", "LOWEST", "HIGHEST"), rows)))
    chosen = list(range(len(pieces)))
    if len(points) > _MOST_POINTS:
        chosen = sorted({most.index(max(most)), least.index(min(least))})
    rows = [(str(k + 1), pieces[k]) for k in chosen]
    tables.append(("tension", _ranges(("PIECE", "LARGEST T", "LEAST T"), rows)))
    return tables


def _by(view: View, combo: str) -> str:
    """Name a combination with its level, where there are several."""
    level = "" if _one_level(view) else _levels(view).get(combo, "")
    return f"{combo}, {level}" if level else combo


def _extremes(view: View, found: Envelope) -> Table:
    """Give what governs the whole cable."""
    wording = view.wording
    rows: list[_Row] = [
        (
            "largest",
            (
                "LARGEST TENSION",
                wording.force(found.max_tension.value),
                _by(view, found.max_tension.combo),
            ),
        ),
        (
            "least",
            (
                "LEAST TENSION",
                wording.force(found.min_tension.value),
                _by(view, found.min_tension.combo),
            ),
        ),
    ]
    if found.max_uplift is not None:
        value = wording.force(found.max_uplift.value)
        rows.append(("uplift", ("LARGEST UPLIFT", value, _by(view, found.max_uplift.combo))))
    clear = view.formed.clearance
    if clear is not None:
        value = wording.length(clear.least)
        rows.append(("clearance", ("LEAST CLEARANCE", value, _by(view, clear.state))))
    columns = (
        ("name", "ENVELOPE", Align.LEFT),
        ("value", "VALUE", Align.RIGHT),
        ("under", "UNDER", Align.LEFT),
    )
    return _table(columns, rows)


def _ranges(heads: tuple[str, str, str], rows: Iterable[_Row]) -> Table:
    """Give the two extremes of each row with their combinations."""
    columns = (
        ("name", heads[0], Align.LEFT),
        ("first", heads[1], Align.RIGHT),
        ("first-under", "UNDER", Align.LEFT),
        ("second", heads[2], Align.RIGHT),
        ("second-under", "UNDER", Align.LEFT),
    )
    return _table(columns, rows)
