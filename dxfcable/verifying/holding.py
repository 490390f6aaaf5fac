"""One cable held against all laws."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.verifying import (
    clearance_laws,
    diagram_laws,
    furniture,
    joint_laws,
    profile_laws,
    scale_laws,
)
from dxfcable.verifying.labelling import ELEVATIONS, LABELS, LETTERS, hold_labels
from dxfcable.verifying.rule_laws import RULE, RuleAsked, asked_by, hold_rule
from dxfcable.verifying.schedule_cells import SCHEDULE
from dxfcable.verifying.schedule_laws import hold_schedule
from dxfcable.verifying.staleness import plain_under
from dxfcable.verifying.tally import Tally
from dxfcable.verifying.wholeness import READS, WHOLE

if TYPE_CHECKING:
    from dxfcable.verifying.cable_on_bench import CableOnBench
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.words import Reader

UNDER = "combination"


def hold_cable(sheet: Sheet, cable: CableOnBench, reader: Reader) -> Tally:
    """Hold one cable against all laws."""
    tally = Tally()
    length, force = reader.length_unit, reader.force_unit
    for name, unit in (
        (READS, ""),
        (diagram_laws.PARALLEL, "rad"),
        (diagram_laws.CLOSED, length),
        (diagram_laws.LOADS, force),
        (diagram_laws.CLOSING, "rad"),
        (profile_laws.SUPPORTS, length),
        (profile_laws.POINTS, length),
        (profile_laws.CURVE, length),
        (profile_laws.STRINGS, length),
        (profile_laws.HANGERS, length),
        (clearance_laws.CLEARANCE, length),
        (scale_laws.SCALE, ""),
        (LABELS, ""),
        (ELEVATIONS, length),
        (LETTERS, ""),
        (joint_laws.JOINTS, length),
        (furniture.ARROWS, ""),
        (SCHEDULE, ""),
        (RULE, ""),
        (UNDER, ""),
        (WHOLE, ""),
    ):
        tally.open(name, unit)
    _hold_spans(tally, sheet, cable, reader)
    _hold_numbers(tally, sheet, cable)
    _hold_scales(tally, sheet, cable, reader)
    hold_labels(tally, sheet, cable.wanted, reader)
    for joint in cable.joints:
        if math.isfinite(joint.scale) and any(joint.sides):
            joint_laws.hold_joint(tally, sheet, joint)
    furniture.hold_arrows(tally, sheet, cable.arrows)
    furniture.hold_heads(tally, sheet, cable.heads)
    if cable.demand is not None or cable.schedule is None:
        hold_schedule(tally, cable.schedule, cable.labels, cable.joints, reader)
    if cable.demand is not None:
        drawn = cable.demand.cable
        clearance_laws.hold_clearance(tally, sheet, cable.prefix, drawn, cable.spans, reader)
    _hold_under(tally, cable)
    _hold_rule(tally, cable, reader)
    return tally


def _hold_spans(tally: Tally, sheet: Sheet, cable: CableOnBench, reader: Reader) -> None:
    demand = cable.demand
    if not cable.spans:
        strays = [e for e in sheet.loose if "profile" in e.roles and e.kind == "LWPOLYLINE"]
        what = "has lost its mark" if sheet.has_marks and strays else "is missing"
        text = f"the profile of {cable.prefix} {what}"
        tally.fail(profile_laws.SUPPORTS, text, strays[0] if strays else None)
    if demand is None:
        tally.fail(READS, "the drafter's drawing has no such cable")
    elif len(cable.spans) != len(demand.cable.supports) - 1 and cable.spans:
        tally.fail(
            profile_laws.SUPPORTS,
            f"{len(cable.spans)} spans are issued for {len(demand.cable.supports)} supports",
            cable.spans[0].profile,
        )
    for span, shape in zip(cable.spans, cable.shapes, strict=True):
        carried = cable.carried_on(span.number)
        if demand is not None and carried is not None:
            ends = demand.cable.supports[span.number - 1 : span.number + 1]
            profile_laws.hold_ends(tally, span, (ends[0], ends[1]), cable.moved)
            profile_laws.hold_stations(tally, span, carried, is_cut=cable.is_cut)
            profile_laws.hold_hangers(
                tally, sheet, span, demand.cable, carried, is_cut=cable.is_cut
            )
        diagram_laws.hold_diagram(tally, sheet, span, carried)
        profile_laws.hold_strings(tally, sheet, span, shape)
        profile_laws.hold_pole_distance(tally, sheet, span)
        if shape is not None and shape.curve is not None:
            profile_laws.hold_curve(tally, span, shape, reader.length_unit)


def _hold_numbers(tally: Tally, sheet: Sheet, cable: CableOnBench) -> None:
    """Tell rays and steps beyond those that are due."""
    if cable.demand is None:
        return
    due = {
        "ray": sum(len(span.rays) for span in cable.spans),
        "load-line": sum(len(span.steps) for span in cable.spans),
    }
    for word, count in due.items():
        for number in sheet.numbers(f"{cable.prefix}/{word}/"):
            if number > count:
                name = f"{cable.prefix}/{word}/{number}"
                tally.fail(diagram_laws.CLOSED, f"{name} is one too many", sheet.named[name])


def _hold_scales(tally: Tally, sheet: Sheet, cable: CableOnBench, reader: Reader) -> None:
    part = f"{cable.prefix}/diagram"
    if cable.block is not None and cable.demand is not None:
        scale_laws.hold_words(tally, cable.block, ("FORCE DIAGRAM", cable.mark), part)
    if cable.block is None or not math.isfinite(cable.scale):
        tally.fail(scale_laws.SCALE, f"{part}: the scale of forces is missing")
    else:
        scale_laws.hold_scale(tally, sheet, cable.block, cable.scale, reader, part)
    for joint in cable.joints:
        block = joint.block
        if block is not None:
            title = ("JOINT", joint.anchorage.mark)
            scale_laws.hold_words(tally, block, title, joint.part)
        if block is not None and math.isfinite(joint.scale):
            scale_laws.hold_scale(tally, sheet, block, joint.scale, reader, joint.part)
        elif joint.sides:
            tally.fail(scale_laws.SCALE, f"{joint.part}: the scale of forces is missing")


def _hold_under(tally: Tally, cable: CableOnBench) -> None:
    """Hold the combination that schedule, diagram and data block say against each other."""
    combination = cable.demand.combination if cable.demand else None
    if combination is None:
        return
    said = [cable.words_of("UNDER"), scale_laws.under_of(cable.block) if cable.block else None]
    words = [(e, scale_laws.combination_in(e.text)) for e in said if e is not None]
    for joint in cable.joints:
        block = joint.block
        line = scale_laws.under_of(block) if block is not None else None
        words += [(line, scale_laws.combination_in(line.text))] if line is not None else []
    for entity, found in words:
        if found != combination.text:
            text = f'"{entity.text}" is not the combination "{combination.text}" of the others'
            tally.fail(UNDER, text, entity)
        else:
            tally.hold(UNDER, 0.0, 1.0, "", entity)
    drawn = cable.demand.cable.under if cable.demand else None
    if "UNDER" in cable.overruled:
        return
    if drawn is not None and plain_under(drawn) != plain_under(combination.text):
        text = f'the data block says UNDER "{drawn}", the drawing is issued under'
        tally.fail(UNDER, f'{text} "{combination.text}"', words[0][0] if words else None)


def _hold_rule(tally: Tally, cable: CableOnBench, reader: Reader) -> None:
    """Hold the rule of the data block, else of the schedule's words; both where both are."""
    shapes = [s for s in cable.shapes if s is not None]
    entity = cable.schedule.value("RULE") if cable.schedule else None
    drawn = cable.demand.cable if cable.demand else None
    if not shapes or len(shapes) != len(cable.shapes) or drawn is None:
        tally.fail(RULE, "the cable is not whole, so its rule cannot be held", entity)
        return
    words = _words_of_rule(cable, reader)
    if cable.is_cut:
        return  # its unstressed lengths govern, which the schedule states
    if drawn.rule is not None and "RULE" not in cable.overruled:
        profile = cable.spans[0].profile
        hold_rule(tally, shapes, asked_by(drawn.rule, drawn.datum), profile, reader)
    if words is None:
        tally.fail(RULE, "the schedule does not say the rule", entity)
    else:
        hold_rule(tally, shapes, words, entity, reader)


def _words_of_rule(cable: CableOnBench, reader: Reader) -> RuleAsked | None:
    """Read the rule in the schedule's words."""
    entity = cable.schedule.value("RULE") if cable.schedule else None
    found = reader.rule(entity.text.strip()) if entity else None
    if found is None or cable.demand is None:
        return None
    kind, first, second = found
    drawn = cable.demand.cable
    left = cable.spans[0].curve[0]
    # Levels are elevations over a datum, else differences from the left support.
    lift = -(drawn.datum or 0.0) if drawn.datum is not None else left[1]
    source = "the schedule"
    if second is not None:
        point = (left[0] + first.value, second.value + lift)
        lean = max(abs(s.span.vertical(0, 0)) / s.span.pull for s in cable.shapes if s)
        half = second.half + lean * first.half
        return RuleAsked(kind=kind, value=point[1], half=half, point=point, source=source)
    is_level = kind.value == "low_point"
    value = first.value + lift if is_level else first.value
    return RuleAsked(kind=kind, value=value, half=first.half, point=None, source=source)
