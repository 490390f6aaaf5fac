"""What the schedule of one cable says: rule and results, points, pieces, anchorages."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.naming import anchor_names, unique_parts
from dxfcable.drawing.painting.text_table import Table
from dxfcable.model import RuleKind
from dxfcable.recorded import CUT

if TYPE_CHECKING:
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.model import Anchorage

_Row = tuple[str, tuple[str, ...]]


def rule_words(view: View) -> str:
    """Say the governing rule in words."""
    rule, wording = view.formed.rule, view.wording
    match rule.kind:
        case RuleKind.MAX_TENSION:
            return f"LARGEST TENSION {wording.load(rule.value)}"
        case RuleKind.PULL:
            return f"PULL {wording.load(rule.value)}"
        case RuleKind.SAG:
            return f"SAG {wording.length(rule.value)}"
        case RuleKind.LOW_POINT:
            return f"LOW POINT {wording.level(rule.value)}"
        case RuleKind.LENGTH:
            return f"LENGTH {wording.length(rule.value)}"
        case RuleKind.CUT_LENGTH:
            return f"UNSTRESSED LENGTH {wording.length(rule.value)}"
        case RuleKind.THROUGH:
            if rule.point is None:
                return "THROUGH A POINT"
            first = view.formed.nodes[0]
            level = wording.level(rule.point[1] + first.elevation - first.y)
            return f"THROUGH X {wording.length(rule.point[0] - view.left)}, {level}"


def held_rows(view: View) -> list[tuple[str, str, str]]:
    """Say what governs: the rule, or of a cable that is cut what no load changes any more."""
    if view.formed.status != CUT:
        return [("rule", "RULE", rule_words(view))]
    return [
        ("rule", "RULE", "UNSTRESSED LENGTHS HELD"),
        ("first", "FIRST FORMED BY", rule_words(view)),
    ]


def level_words(level: str, *, is_assumed: bool) -> str:
    """Say a level, and whether it is assumed."""
    return f"{level.upper()}{' (ASSUMED)' if is_assumed else ''}"


def cut_words(view: View) -> str:
    """Say in a table's head that a cable already cut runs as inextensible; "" for any other."""
    is_rigid = view.formed.status == CUT and not view.formed.ea
    return "CUT, INEXTENSIBLE" if is_rigid else ""


def summary_table(view: View, temperature: str) -> Table:
    """Pair what governs and what follows with its words."""
    formed, wording = view.formed, view.wording
    level = level_words(formed.level, is_assumed=formed.level_is_assumed)
    at = f" AT {formed.governs.support}" if formed.governs.support else f" {formed.governs.end}"
    weight = "WEIGHTLESS"
    if formed.weight:
        case = f" (CASE {formed.weight_case})" if formed.weight_case else ""
        weight = f"{wording.weight(formed.weight)}{case}"
    rows: list[tuple[str, str, str]] = [
        ("status", "STATUS", formed.status.upper()),
        *held_rows(view),
        ("under", "UNDER", formed.under),
        ("level", "LEVEL", level),
        *_pulls(view),
        (
            "largest-tension",
            "LARGEST TENSION",
            f"{wording.force(formed.max_tension)}, {formed.governs.segment}{at}",
        ),
        ("sag", "SAG", wording.length(formed.sag)),
        ("length", "LENGTH", wording.length(formed.length)),
        ("unstressed", "UNSTRESSED LENGTH", wording.length(formed.unstressed_length)),
        ("weight", "CABLE WEIGHT", weight),
        ("ea", "EA", wording.load(formed.ea) if formed.ea else "INEXTENSIBLE"),
        (
            "supports",
            "SUPPORTS",
            "HELD RIGID" if formed.supports_rigid else "MOVE WITH THEIR STAYS",
        ),
    ]
    rows.append(("elevations", "ELEVATIONS", _levels_words(view)))
    if view.cable.strand:
        rows.append(("strand", "STRAND", view.cable.strand))
    if formed.capacity is not None:
        used = "" if formed.utilization is None else f", UTILIZATION {formed.utilization:.2f}"
        rows.append(("capacity", "CAPACITY", f"{wording.load(formed.capacity)}{used}"))
    if temperature:
        rows.append(("temperature", "REFERENCE TEMPERATURE", temperature))
    if formed.delta_t:
        rows.append(("delta-t", "DELTA_T", f"{formed.delta_t:+.6g} K FROM REFERENCE"))
    rows += _support_loads(view)
    for name, anchorage in view.anchorages:
        rows += _anchorage_rows(view, name, anchorage)
    return Table(
        columns=("name", "value"),
        head=("", ""),
        aligns=(Align.LEFT, Align.LEFT),
        rows=tuple((key, (name, value)) for key, name, value in rows),
        title=cut_words(view),
    )


def _levels_words(view: View) -> str:
    """Say what heights count from; a support that gave way shows its own movement so."""
    if view.wording.has_datum:
        return "DATUM OF EL"
    first, drawn = view.formed.nodes[0], view.cable.supports[0]
    is_moved = (first.x, first.y) != (drawn.x, drawn.y)
    return f"DIFFERENCES FROM {first.mark or 'LEFT'}{' AS DRAWN' if is_moved else ''}"


def _pulls(view: View) -> list[tuple[str, str, str]]:
    """Give the pull, span by span where spans differ."""
    formed, force = view.formed, view.wording.force
    if formed.horizontal is not None:
        return [("pull", "PULL H", force(formed.horizontal))]
    return [
        (f"pull-{i}", f"PULL H {span.start} - {span.end}", force(span.horizontal))
        for i, span in enumerate(formed.spans, start=1)
    ]


def _support_loads(view: View) -> list[tuple[str, str, str]]:
    """Show the loads that stand at a support and not on the cable."""
    marks = {support.key: support.mark for support in view.cable.supports}
    return [
        (
            f"support-load-{number}",
            f"DRAWN AT {marks.get(key, '')}, NOT ON CABLE",
            ", ".join(f"{case} {view.wording.load(value)}" for case, value in load.cases),
        )
        for number, (key, load) in enumerate(view.cable.support_loads, start=1)
    ]


def _anchorage_rows(view: View, name: str, anchorage: Anchorage) -> list[tuple[str, str, str]]:
    """List mast, stays, what is left over, and anchors with the factors reached."""
    force, mark = view.wording.force, anchorage.mark
    rows: list[tuple[str, str, str]] = []
    if anchorage.mast is not None:
        rows.append((f"{name}-mast", f"{mark} MAST", force(anchorage.mast)))
    for number, stay in enumerate(anchorage.stays, start=1):
        word = "STAY" if len(anchorage.stays) == 1 else f"STAY {number}"
        rows.append((f"{name}-stay-{number}", f"{mark} {word}", force(stay)))
    if anchorage.head_shear:
        rows.append((f"{name}-shear", f"{mark} HEAD SHEAR", force(anchorage.head_shear)))
    if anchorage.base_moment:
        moment = view.wording.moment(anchorage.base_moment)
        rows.append((f"{name}-moment", f"{mark} BASE MOMENT", moment))
    if any(anchorage.residual):
        x, y = anchorage.residual
        rows.append((f"{name}-residual", f"{mark} NOT HELD X, Y", f"{force(x)}, {force(y)}"))
    parts = unique_parts([anchor.mark for anchor in anchorage.anchors], "anchor")
    words = anchor_names(anchorage)
    for part, word, anchor in zip(parts, words, anchorage.anchors, strict=True):
        key = f"{name}-{part}"
        both = f"H {force(anchor.horizontal)}, UPLIFT {force(anchor.uplift)}"
        rows.append((key, word, both))
        factors = (("SLIDING", anchor.sliding_factor), ("UPLIFT", anchor.uplift_factor))
        reached = ", ".join(f"{kind} {value:.2f}" for kind, value in factors if value is not None)
        if reached:
            rows.append((f"{key}-factor", f"{word} FACTOR", reached))
    return rows


def point_table(view: View) -> Table:
    """List nodes with place, height, load and hanger."""
    wording, nodes = view.wording, view.formed.nodes
    rows: list[_Row] = []
    for name, node in zip(view.node_names, nodes, strict=True):
        cells = (
            node.mark,
            wording.length(node.x - view.left),
            wording.level(node.elevation),
            "" if node.is_support else wording.load(node.load),
            "" if node.hanger is None else wording.length(node.hanger),
        )
        rows.append((name, cells))
    return Table(
        columns=("mark", "x", "elevation", "load", "hanger"),
        head=("POINT", "X", "LEVEL" if wording.has_datum else "FROM LEFT", "LOAD", "HANGER"),
        aligns=(Align.LEFT, *(Align.RIGHT,) * 4),
        rows=tuple(rows),
        title=cut_words(view),
    )


def segment_table(view: View) -> Table:
    """List pieces with their tensions and lengths."""
    force, length = view.wording.force, view.wording.length
    rows: list[_Row] = []
    for number, piece in enumerate(view.formed.segments, start=1):
        cells = (
            piece.name,
            force(piece.tension_left),
            force(piece.tension_right),
            f"{round(piece.angle, 2) + 0.0:.2f}%%d",
            length(piece.length),
            length(piece.unstressed_length),
        )
        rows.append((str(number), cells))
    return Table(
        columns=("name", "left", "right", "angle", "length", "unstressed"),
        head=("PIECE", "T LEFT", "T RIGHT", "SLOPE", "LENGTH", "UNSTRESSED"),
        aligns=(Align.LEFT, *(Align.RIGHT,) * 5),
        rows=tuple(rows),
        title=cut_words(view),
    )
