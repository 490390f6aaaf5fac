"""An outcome as tables and sentences for a person at a terminal."""

from __future__ import annotations

import sys
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.naming import anchor_feet
from dxfcable.job import CAUTION
from dxfcable.lengths import format_elevation, format_length
from dxfcable.model import Cable, Finding, FormedCable, Layout, Rule, RuleKind, Severity
from dxfcable.quantities import format_force
from dxfcable.recorded import CUT
from dxfcable.reporting.plain_output import PlainConsole, Table, is_plain, rich_console
from dxfcable.reporting.report import sentence
from dxfcable.reporting.terminal_states import head_words, show_changes, show_states
from dxfcable.units import FORCE_UNITS

if TYPE_CHECKING:
    from collections.abc import Sequence

    from rich.console import Console

    from dxfcable.job import Outcome
    from dxfcable.model import Anchorage

    Out = Console | PlainConsole

_DIGITS = 4
_COLORS = {Severity.ERROR: "bold red", Severity.WARNING: "yellow", Severity.NOTE: ""}
_FORCE_RULES = (RuleKind.MAX_TENSION, RuleKind.PULL)


def console(*, is_error: bool = False) -> Out:
    """Return a console that prints text as it is."""
    stream = sys.stderr if is_error else sys.stdout
    return PlainConsole(stream) if is_plain(stream) else rich_console(stream)


def show_understood(out: Out, outcome: Outcome) -> None:
    """Print what was read: supports, loads and rule of each cable."""
    layout = outcome.layout
    assert layout is not None
    release = layout.version or "no release stated"
    out.print(
        f"{release}, lengths in {layout.length_unit or '?'}, forces in {layout.force_unit or '?'}"
    )
    for cable in layout.cables:
        out.print()
        out.print(f"Cable {_safe(cable.mark)}", style="bold")
        out.print(_drawn_table(layout, cable))
        out.print(f"rule: {rule_words(cable.rule, layout)}; under: {cable.under or 'not stated'}")
        _show_members(out, layout, cable)
    if outcome.solution is None and not layout.cables:
        out.print("no cable was understood")


def show_revised(out: Out, outcome: Outcome) -> None:
    """Print what a load change did to each cable, then all that `show_solved` prints."""
    assert outcome.layout is not None
    assert outcome.solution is not None
    show_changes(out, outcome.solution, outcome.layout)
    show_solved(out, outcome)


def show_solved(out: Out, outcome: Outcome) -> None:
    """Print pull, tensions, points, reactions and anchorages of each cable."""
    layout, solution = outcome.layout, outcome.solution
    assert layout is not None
    assert solution is not None
    for formed in solution.cables:
        out.print()
        out.print(_safe(f"Cable {formed.mark}{head_words(formed)}"), style="bold")
        out.print(_summary(formed, layout))
        out.print(_points_table(formed, layout))
        out.print(_segments_table(formed, layout))
        keys = {n.support for n in formed.nodes if n.is_support}
        for found in solution.anchorages:
            if found.support in keys:
                out.print(_anchorage_words(found, layout))
        if formed.states or formed.clearance is not None:
            show_states(out, formed, layout)
    if outcome.layers:
        out.print()
        out.print(f"layers written: {', '.join(_safe(name) for name in outcome.layers)}")
    out.print()
    out.print(CAUTION)


def show_findings(out: Out, findings: Sequence[Finding]) -> None:
    """Print findings, those that stop first."""
    for severity in (Severity.ERROR, Severity.WARNING, Severity.NOTE):
        for finding in findings:
            if finding.severity is severity:
                out.print(_safe(sentence(finding)), style=_COLORS[severity], soft_wrap=True)


def rule_words(rule: Rule | None, layout: Layout) -> str:
    """Write a rule in words."""
    if rule is None:
        return "none stated"
    name = rule.kind.name
    if rule.kind is RuleKind.THROUGH and rule.point:
        return f"{name} ({rule.point[0]:.6g}, {rule.point[1]:.6g})"
    if rule.kind in _FORCE_RULES:
        return f"{name} {_force(rule.value, layout)}"
    if rule.kind is RuleKind.LOW_POINT:
        return f"{name} {_elevation(rule.value, layout)}"
    if not layout.length_unit:
        return f"{name} {rule.value:.6g}"
    return f"{name} {format_length(rule.value, layout.length_unit)}"


def _table(*columns: str) -> Table:
    """Make a table whose first column is text and whose others are numbers."""
    return Table(columns)


def _drawn_table(layout: Layout, cable: Cable) -> Table:
    """List supports and loads as drawn, left to right."""
    table = _table("mark", "what", "x", "elevation", "load", "read from")
    datum = cable.datum or 0.0
    rows: list[tuple[float, tuple[str, ...]]] = []
    for support in cable.supports:
        height = _elevation(support.y + datum, layout)
        origin = _origin(support.origin.kind, support.origin.handle, support.origin.line)
        kind = "support" if support.kind.value == "end" else f"{support.kind.value} saddle"
        rows.append((support.x, (support.mark, kind, f"{support.x:.6g}", height, "", origin)))
    at_supports = [point for _, point in cable.support_loads]
    for point in (*cable.loads, *at_supports):
        words = ", ".join(
            f"{_force(value, layout)}" if case == "load" else f"{case} {_force(value, layout)}"
            for case, value in point.cases
        )
        source = point.value_origin or point.origin
        origin = _origin(source.kind, source.handle, source.line)
        what = "at support" if point in at_supports else f"load ({point.symbol.value})"
        rows.append((point.x, (point.mark, what, f"{point.x:.6g}", "", words, origin)))
    for _, row in sorted(rows, key=lambda r: r[0]):
        table.add_row(*(_safe(cell) for cell in row))
    return table


def _show_members(out: Out, layout: Layout, cable: Cable) -> None:
    """List masts and stays, deck and frame."""
    keys = {s.key: s.mark for s in cable.supports}
    for name, members in (("mast", layout.masts), ("stay", layout.stays)):
        for member in members:
            if member.support in keys:
                block = f", anchor {member.anchor.mark}" if member.anchor else ""
                x, y = member.foot
                text = f"{name} at {keys[member.support]} down to ({x:.6g}, {y:.6g}){block}"
                out.print(_safe(text))
    if cable.deck:
        out.print(f"deck line of {len(cable.deck)} points")
    if cable.frame:
        f = cable.frame
        out.print(
            f"frame for the force diagram from ({f.x0:.6g}, {f.y0:.6g}) to ({f.x1:.6g}, {f.y1:.6g})"
        )


def _summary(formed: FormedCable, layout: Layout) -> str:
    """Write the main figures in a few lines."""
    unit = layout.length_unit
    weight = "weightless" if not formed.weight else "with its weight"
    stretch = "inextensible" if formed.ea is None else f"EA {_force(formed.ea, layout)}"
    governs = formed.governs
    at = f" at {governs.support}" if governs.support else ""
    lines = [
        f"{_formed_words(formed, layout)}; {weight}, {stretch}",
        f"pull {_force(formed.horizontal or 0.0, layout)}, largest tension "
        f"{_force(formed.max_tension, layout)} in {governs.segment}{at}, "
        f"sag {format_length(formed.sag, unit)}",
        f"length {format_length(formed.length, unit)}, "
        f"unstressed {format_length(formed.unstressed_length, unit)}",
    ]
    if formed.capacity is not None and formed.utilization is not None:
        lines.append(
            f"capacity {_force(formed.capacity, layout)}, utilization {formed.utilization:.3f}"
        )
    return _safe("\n".join(lines))


def _formed_words(formed: FormedCable, layout: Layout) -> str:
    """Say what governs the shape, under what: the rule, or of a cut cable what is held."""
    assumed = ", assumed" if formed.level_is_assumed else ""
    change = f", {formed.delta_t:+.6g} K" if formed.delta_t else ""
    under = f"under {formed.under} ({formed.level}{assumed}{change})"
    rule = rule_words(formed.rule, layout)
    if formed.status == CUT:
        return f"cut, its unstressed lengths held {under}; first formed by {rule}"
    return f"formed by {rule} {under}"


def _points_table(formed: FormedCable, layout: Layout) -> Table:
    """List nodes left to right, reactions at supports."""
    table = _table("point", "x", "elevation", "load", "hanger", "reaction H", "reaction V")
    reactions = {r.support: r for r in formed.reactions}
    for node in formed.nodes:
        hanger = "" if node.hanger is None else format_length(node.hanger, layout.length_unit)
        reaction = reactions.get(node.support) if node.support is not None else None
        table.add_row(
            _safe(node.mark),
            f"{node.x:.6g}",
            _elevation(node.elevation, layout),
            "" if node.is_support else _force(node.load, layout),
            hanger,
            _force(reaction.horizontal, layout) if reaction else "",
            _force(reaction.vertical, layout) if reaction else "",
        )
    return table


def _segments_table(formed: FormedCable, layout: Layout) -> Table:
    """List the pieces."""
    table = _table("segment", "tension", "slope", "length", "unstressed")
    for segment in formed.segments:
        table.add_row(
            segment.name,
            _force(segment.tension, layout),
            f"{segment.angle:.2f} deg",
            format_length(segment.length, layout.length_unit),
            format_length(segment.unstressed_length, layout.length_unit),
        )
    return table


def _anchorage_words(found: Anchorage, layout: Layout) -> str:
    """Write the forces at one support."""
    parts = []
    if found.mast is not None:
        parts.append(f"mast {_force(found.mast, layout)}")
    parts += [f"stay {_force(force, layout)}" for force in found.stays]
    for foot, anchor in zip(anchor_feet(found), found.anchors, strict=True):
        name = f"anchor {anchor.mark}" if anchor.mark else foot.lower()
        parts.append(
            f"{name} horizontal {_force(anchor.horizontal, layout)}, "
            f"uplift {_force(anchor.uplift, layout)}"
        )
        if anchor.sliding_factor is not None:
            parts.append(f"sliding factor {anchor.sliding_factor:.3f}")
        if anchor.uplift_factor is not None:
            parts.append(f"uplift factor {anchor.uplift_factor:.3f}")
    return _safe(f"at {found.mark}: {'; '.join(parts)} (tension +, compression -)")


def _elevation(value: float, layout: Layout) -> str:
    """Write an elevation, bare while the unit is not known."""
    if not layout.length_unit:
        return f"{value:.6g}"
    return format_elevation(value, layout.length_unit)


def _force(value: float, layout: Layout) -> str:
    """Write a force, bare while its unit is not known."""
    if layout.force_unit not in FORCE_UNITS:
        return f"{value:.{_DIGITS}g}"
    return format_force(value, layout.force_unit, _DIGITS)


def _origin(kind: str, handle: str | None, line: int | None) -> str:
    """Say where a value came from."""
    name = f"{kind} {handle}" if handle else kind
    return f"{name}, line {line}" if line is not None else name


def _safe(text: str) -> str:
    """Replace what a terminal cannot show: bytes that did not decode."""
    return text.encode("utf-8", "backslashreplace").decode("utf-8")
