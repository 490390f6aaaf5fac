"""Two outcomes of one drawing in one line: what the last save changed."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.lengths import format_elevation, format_length
from dxfcable.quantities import format_force

if TYPE_CHECKING:
    from dxfcable.asking import Outcome
    from dxfcable.model import FormedCable, Layout

_DIGITS = 4


def change_line(before: Outcome | None, after: Outcome) -> str:
    """Say in one line what a save changed, or how the drawing stands at first.

    Parameters
    ----------
    before : Outcome or None
        Of the solve before; None at first.
    after : Outcome
        Of this one.
    """
    assert after.layout is not None
    assert after.solution is not None
    layout = after.layout
    old: dict[str, FormedCable] = {}
    if before is not None and before.solution is not None:
        old = {formed.mark: formed for formed in before.solution.cables}
    parts = [_cable(old.get(formed.mark), formed, layout) for formed in after.solution.cables]
    new = {formed.mark for formed in after.solution.cables}
    parts += [f"{mark} is gone" for mark in old if mark not in new]
    changed = [part for part in parts if part]
    warnings = sum(f.severity.value == "warning" for f in after.findings)
    line = "; ".join(changed) or "nothing changed"
    return f"{line}; {warnings} to be seen by an engineer" if warnings else line


def _cable(before: FormedCable | None, after: FormedCable, layout: Layout) -> str:
    """Say what changed of one cable, "" where nothing did."""
    if before == after:
        return ""
    unit, length = layout.force_unit or "", layout.length_unit
    low = min((span.low_point for span in after.spans), key=lambda point: point[1])
    datum = next((c.datum for c in layout.cables if c.mark == after.mark), None)
    level = (
        f"Y {format_length(low[1], length)}"
        if datum is None
        else format_elevation(low[1] + datum, length)
    )
    figures = [
        ("pull", after.horizontal, before.horizontal if before else None),
        ("largest tension", after.max_tension, before.max_tension if before else None),
    ]
    words = []
    for name, now, then in figures:
        new = format_force(now or 0.0, unit, _DIGITS)
        old = "" if then is None else format_force(then, unit, _DIGITS)
        words.append(f"{name} {new}" if old in ("", new) else f"{name} {old} to {new}")
    loads = _loads(before, after, unit)
    return ", ".join([f"{after.mark} {words[0]}", *words[1:], f"low point {level}", *loads])


def _loads(before: FormedCable | None, after: FormedCable, unit: str) -> list[str]:
    """List loads that changed."""
    if before is None:
        return []
    known = {n.mark: n.load for n in before.nodes if not n.is_support}
    return [
        f"{n.mark} {format_force(known[n.mark], unit, _DIGITS)} to "
        f"{format_force(n.load, unit, _DIGITS)}"
        for n in after.nodes
        if not n.is_support and n.mark in known and known[n.mark] != n.load
    ]
