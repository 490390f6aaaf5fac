"""An outcome as one JSON document: keys and exit codes are public."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.model import Finding, FormedCable, Layout, Rule, RuleKind, Severity

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.items import PlacedDiagram
    from dxfcable.errors import DxfcableError
    from dxfcable.job import Outcome
    from dxfcable.model import Anchorage, Node, Point, Reaction, Segment

FORMAT = 1
Json = dict[str, object]


def solved(drawing: str, outcome: Outcome) -> Json:
    """Describe a solved drawing."""
    layout, solution, painting = outcome.layout, outcome.solution, outcome.painting
    assert layout is not None
    assert solution is not None
    diagrams = painting.diagrams if painting else ()
    cables = [
        _cable(formed, k, solution.anchorages, diagrams) for k, formed in enumerate(solution.cables)
    ]
    return {
        "format": FORMAT,
        "drawing": drawing,
        "length_unit": layout.length_unit,
        "force_unit": layout.force_unit,
        "cables": cables,
        **_plan(layout),
        "layers": list(outcome.layers),
        "findings": findings(outcome.findings),
    }


def revised(drawing: str, outcome: Outcome) -> Json:
    """Describe a revised drawing: what a solve says, and what moved."""
    from dxfcable.reporting.report_states import movement

    result = solved(drawing, outcome)
    assert outcome.solution is not None
    cables = result["cables"]
    assert isinstance(cables, list)
    for described, change in zip(cables, outcome.solution.revised, strict=True):
        before = change.before
        described["held"] = change.held
        described["before"] = {
            "status": before.status,
            "horizontal": before.horizontal,
            "max_tension": before.max_tension,
            "sag": before.sag,
            "length": before.length,
            "points": [_node(n) for n in before.nodes],
            "segments": [_segment(s) for s in before.segments],
            "reactions": [_reaction(r) for r in before.reactions],
        }
        described["movement"] = [movement(m) for m in change.movement]
    return result


def understood(drawing: str, outcome: Outcome) -> Json:
    """Describe what was read of a drawing; `error` stands beside where solve would refuse."""
    layout = outcome.layout
    assert layout is not None
    result: Json = {
        "format": FORMAT,
        "drawing": drawing,
        "version": layout.version,
        "length_unit": layout.length_unit or None,
        "force_unit": layout.force_unit,
        "cables": [_drawn_cable(layout, k) for k in range(len(layout.cables))],
        **_plan(layout),
        "findings": findings(outcome.findings),
    }
    stopping = [f for f in outcome.findings if f.severity is Severity.ERROR]
    if stopping:
        result["error"] = finding(stopping[0])
    return result


def refused(drawing: str, found: Sequence[Finding]) -> Json:
    """Describe a drawing that was refused: the first finding that stops, and all of them."""
    stopping = [f for f in found if f.severity is Severity.ERROR]
    return {
        "format": FORMAT,
        "drawing": drawing,
        "error": finding(stopping[0]) if stopping else None,
        "findings": findings(found),
    }


def written(drawing: str, paths: Sequence[str], found: Sequence[Finding], **more: object) -> Json:
    """Describe files that were written."""
    return {
        "format": FORMAT,
        "drawing": drawing,
        "written": list(paths),
        **more,
        "findings": findings(found),
    }


def several(documents: Sequence[Json]) -> Json:
    """Join the documents of several drawings."""
    return {"format": FORMAT, "drawings": list(documents)}


def error_finding(error: DxfcableError) -> Finding:
    """Turn an error that stopped a drawing into a finding."""
    return Finding(
        code=error.code,
        severity=Severity.ERROR,
        text=error.message,
        remedy=error.remedy,
        handle=error.handle,
        layer=error.layer,
        line=error.line,
        at=error.at,
    )


def sentence(found: Finding) -> str:
    """Write one finding as a person reads it, with where it is and what to do."""
    where = []
    if found.line is not None:
        where.append(f"line {found.line}")
    if found.handle:
        where.append(f"handle {found.handle}")
    place = f" [{', '.join(where)}]" if where else ""
    stop = "" if found.text.rstrip().endswith((".", "!", "?")) else "."
    remedy = f"{stop} {found.remedy}" if found.remedy else ""
    return f"{found.severity.value}: {found.text}{place}{remedy} ({found.code})"


def findings(found: Sequence[Finding]) -> list[Json]:
    """Describe findings."""
    return [finding(f) for f in found]


def finding(found: Finding) -> Json:
    """Describe one finding."""
    return {
        "code": found.code,
        "severity": found.severity.value,
        "cable": found.cable,
        "handle": found.handle,
        "line": found.line,
        "layer": found.layer,
        "at": list(found.at) if found.at else None,
        "raw": found.raw,
        "text": found.text,
        "remedy": found.remedy,
    }


def _cable(
    formed: FormedCable,
    number: int,
    anchorages: Sequence[Anchorage],
    diagrams: Sequence[PlacedDiagram],
) -> Json:
    """Describe one formed cable."""
    keys = {n.support for n in formed.nodes if n.is_support}
    governs = formed.governs
    return {
        "mark": formed.mark,
        "status": formed.status,
        "rule": _rule(formed.rule),
        "under": formed.under,
        "level": formed.level,
        "level_assumed": formed.level_is_assumed,
        "supports_rigid": formed.supports_rigid,
        "weight": formed.weight,
        "ea": formed.ea,
        "weight_case": formed.weight_case,
        "capacity": formed.capacity,
        "utilization": formed.utilization,
        "loads_source": formed.loads_source,
        "horizontal": formed.horizontal,
        "max_tension": formed.max_tension,
        "governs": {
            "segment": governs.segment,
            "end": governs.end,
            "support": governs.support,
        },
        "sag": formed.sag,
        "length": formed.length,
        "unstressed_length": formed.unstressed_length,
        "points": [_node(n) for n in formed.nodes],
        "segments": [_segment(s) for s in formed.segments],
        "spans": [
            {"from": s.start, "to": s.end, "horizontal": s.horizontal, "sag": s.sag}
            for s in formed.spans
        ],
        "reactions": [_reaction(r) for r in formed.reactions],
        "force_diagrams": [_diagram(d) for d in diagrams if d.cable == number],
        "anchorages": [_anchorage(a) for a in anchorages if a.support in keys],
        **_checked(formed),
    }


def _checked(formed: FormedCable) -> Json:
    """Describe clearance, states and envelope."""
    if not formed.states and formed.clearance is None:
        return {"clearance": None, "states": [], "envelope": None}
    from dxfcable.reporting import report_states as more

    return {
        "clearance": more.clearance(formed.clearance),
        "states": [more.state(s, _node, _segment, _reaction, _anchorage) for s in formed.states],
        "envelope": more.envelope(formed.envelope),
    }


def _plan(layout: Layout) -> Json:
    """Describe the loaded areas of a framing plan, where one is drawn."""
    if not layout.plan:
        return {}
    from dxfcable.reporting.report_states import plan_area

    marks = [cable.mark for cable in layout.cables]
    return {"plan": [plan_area(area, marks) for area in layout.plan]}


def _rule(rule: Rule) -> Json:
    """Describe a rule; THROUGH has the point as its value."""
    value: object = list(rule.point or ()) if rule.kind is RuleKind.THROUGH else rule.value
    return {"kind": rule.kind.value, "value": value}


def _node(node: Node) -> Json:
    result: Json = {
        "mark": node.mark,
        "x": node.x,
        "elevation": node.elevation,
        "load": node.load,
        "support": node.is_support,
    }
    if not node.is_support:
        result["hanger"] = node.hanger
    return result


def _segment(segment: Segment) -> Json:
    return {
        "name": segment.name,
        "tension": segment.tension,
        "tension_left": segment.tension_left,
        "tension_right": segment.tension_right,
        "angle_deg": segment.angle,
        "angle_left": segment.angle_left,
        "angle_right": segment.angle_right,
        "length": segment.length,
        "unstressed_length": segment.unstressed_length,
    }


def _reaction(reaction: Reaction) -> Json:
    return {
        "support": reaction.mark,
        "horizontal": reaction.horizontal,
        "vertical": reaction.vertical,
    }


def _diagram(placed: PlacedDiagram) -> Json:
    def points(found: Sequence[Point]) -> list[list[float]]:
        return [list(point) for point in found]

    return {
        "pole": list(placed.pole),
        "load_line": points(placed.load_line),
        "rays": points(placed.rays),
        "scale_force_per_length": placed.scale,
    }


def _anchorage(found: Anchorage) -> Json:
    return {
        "support": found.mark,
        "mast": found.mast,
        "stays": list(found.stays),
        "anchors": [
            {
                "mark": a.mark,
                "horizontal": a.horizontal,
                "uplift": a.uplift,
                "sliding_factor": a.sliding_factor,
                "uplift_factor": a.uplift_factor,
            }
            for a in found.anchors
        ],
        "head_shear": found.head_shear,
        "base_moment": found.base_moment,
        "residual": list(found.residual),
    }


def _drawn_cable(layout: Layout, number: int) -> Json:
    """Describe one cable as it was read."""
    cable = layout.cables[number]
    datum = cable.datum or 0.0
    return {
        "mark": cable.mark,
        "supports": [
            {
                "mark": s.mark,
                "x": s.x,
                "y": s.y,
                "elevation": s.y + datum,
                "kind": s.kind.value,
            }
            for s in cable.supports
        ],
        "loads": [
            {"mark": p.mark, "x": p.x, "y": p.y, "cases": dict(p.cases)} for p in cable.loads
        ],
        "support_loads": [
            {"support": layout.supports[key].mark, "mark": p.mark, "cases": dict(p.cases)}
            for key, p in cable.support_loads
        ],
        "rule": _rule(cable.rule) if cable.rule else None,
        "under": cable.under,
        "weight": cable.weight,
        "ea": cable.ea,
        "capacity": cable.capacity,
        "masts": sum(m.support in {s.key for s in cable.supports} for m in layout.masts),
        "stays": sum(t.support in {s.key for s in cable.supports} for t in layout.stays),
    }
