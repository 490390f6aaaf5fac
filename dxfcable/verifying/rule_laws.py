"""The governing rule, held against the cable as it is drawn."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.model import RuleKind

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.model import Point, Rule
    from dxfcable.verifying.shapes import Shape
    from dxfcable.verifying.tally import Tally
    from dxfcable.verifying.words import Reader

RULE = "governing rule"
_LONG_RULES = frozenset({RuleKind.MAX_TENSION, RuleKind.LENGTH, RuleKind.CUT_LENGTH})
_SMALL = 1e-9  # relative: what forming leaves


@dataclass(frozen=True, slots=True, kw_only=True)
class RuleAsked:
    """A rule with what its words leave open.

    Attributes
    ----------
    half : float
        Half the worth of the last place; 0 from a data block.
    source : str
        Ends a sentence: who states it.
    """

    kind: RuleKind
    value: float
    half: float
    point: Point | None
    source: str


def asked_by(rule: Rule, datum: float | None) -> RuleAsked:
    """Take the rule of the data block, a low point as an ordinate."""
    is_low = rule.kind is RuleKind.LOW_POINT
    return RuleAsked(
        kind=rule.kind,
        value=rule.value - (datum or 0.0) if is_low else rule.value,
        half=0.0,
        point=rule.point,
        source="the data block",
    )


def measured(kind: RuleKind, shape: Shape, point: Point | None) -> tuple[float, float]:
    """Measure what a rule is about on one span.

    Returns
    -------
    value, error : float
        What is drawn, and what rounding makes of it. For THROUGH the ordinate over the point.
    """
    span = shape.span
    grain = span.grain
    lean = max(abs(span.vertical(0, 0)), abs(span.vertical(span.pieces - 1, 1))) / span.pull
    # With weight the curve between nodes is known by its forces too.
    by_force = abs(span.curve[-1][0] - span.curve[0][0]) * span.scale / span.pull
    along = 4.0 * grain * (1.0 + lean) ** 2 * (1.0 + (by_force if shape.curve is not None else 0.0))
    match kind:
        case RuleKind.MAX_TENSION:
            return shape.max_tension, span.force_error
        case RuleKind.PULL:
            return span.pull, span.force_error
        case RuleKind.SAG:
            return shape.sag, along
        case RuleKind.LOW_POINT:
            return shape.low_point[1], along
        case RuleKind.LENGTH:
            return math.fsum(shape.lengths), along * span.pieces
        case RuleKind.CUT_LENGTH:
            return math.fsum(shape.unstressed), along * span.pieces
        case RuleKind.THROUGH:
            assert point is not None
            return shape.ordinate(point[0]), along


def hold_rule(
    tally: Tally,
    shapes: Sequence[Shape],
    asked: RuleAsked,
    entity: IssuedEntity | None,
    reader: Reader,
) -> bool:
    """Hold the cable against its rule; over several spans one must meet it, or all together."""
    if asked.kind is RuleKind.THROUGH and asked.point is None:
        tally.fail(RULE, f"{asked.source} says THROUGH and no point is drawn", entity)
        return False
    wanted = asked.point[1] if asked.kind is RuleKind.THROUGH and asked.point else asked.value
    shapes = _reached(shapes, asked)
    cases = [measured(asked.kind, shape, asked.point) for shape in shapes]
    if not cases:
        tally.fail(RULE, f"the rule of {asked.source} cannot be held against anything", entity)
        return False
    if asked.kind is RuleKind.MAX_TENSION:
        cases = [max(cases)]
    elif asked.kind in _LONG_RULES:
        cases = [(math.fsum(c[0] for c in cases), math.fsum(c[1] for c in cases))]
    drawn, error = min(cases, key=lambda case: abs(case[0] - wanted))
    text = f"{asked.kind.name}: {asked.source} says {wanted:.9g}, the drawing has {drawn:.9g}, off"
    allowed = asked.half + error + _SMALL * abs(wanted)
    is_force = asked.kind in (RuleKind.MAX_TENSION, RuleKind.PULL)
    unit = reader.force_unit if is_force else reader.length_unit
    return tally.hold(RULE, abs(drawn - wanted), allowed, text, entity, unit)


def _reached(shapes: Sequence[Shape], asked: RuleAsked) -> list[Shape]:
    """Leave out spans that do not reach the point of THROUGH."""
    point = asked.point
    if asked.kind is not RuleKind.THROUGH or point is None:
        return list(shapes)
    ends = [(s.span.curve[0][0], s.span.curve[-1][0]) for s in shapes]
    return [s for s, (a, b) in zip(shapes, ends, strict=True) if a <= point[0] <= b]
