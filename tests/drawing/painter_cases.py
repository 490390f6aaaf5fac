"""Layouts and solutions for the painter's tests, formed here by H = M / sag and nothing else.

All scenarios are invented. The forming is written anew from the general cable theorem, so that
the tests do not lean on the package's own statics.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field

import numpy as np

from dxfcable.drawing.excerpt import Obstacles
from dxfcable.model import (
    Anchorage,
    AnchorForce,
    Cable,
    ForceDiagram,
    FormedCable,
    Governs,
    JointSide,
    Layout,
    LoadPoint,
    LoadSymbol,
    Mast,
    Node,
    Point,
    Reaction,
    Rectangle,
    Rule,
    RuleKind,
    Segment,
    Solution,
    SpanShape,
    Stay,
    Support,
    SupportKind,
)

LETTERS = "ABCDEFGHJKLMNPQRSTUVWXYZ"


def letter(number: int) -> str:
    """Bow's letters: A to Z without I and O, then AA, AB .."""
    if number < len(LETTERS):
        return LETTERS[number]
    return letter(number // len(LETTERS) - 1) + LETTERS[number % len(LETTERS)]


@dataclass(frozen=True, kw_only=True)
class Span:
    """One span to be formed."""

    x: tuple[float, ...]  # stations with both supports
    loads: tuple[float, ...]
    y: tuple[float, float]
    sag: float


@dataclass(frozen=True, kw_only=True)
class Shape:
    """A formed span."""

    y: tuple[float, ...]
    horizontal: float
    verticals: tuple[float, ...]  # rising to the right positive, one a piece
    sag_index: int


def form(span: Span) -> Shape:
    """Form a span by the general cable theorem: H times drop below the string = M."""
    x, length = span.x, span.x[-1] - span.x[0]
    left = sum(p * (x[-1] - a) for a, p in zip(x[1:-1], span.loads, strict=True)) / length
    moments = [
        left * (a - x[0])
        - sum(p * (a - b) for b, p in zip(x[1:-1], span.loads, strict=True) if b < a)
        for a in x
    ]
    most = max(range(len(x)), key=lambda i: moments[i])
    pull = moments[most] / span.sag
    rise = (span.y[1] - span.y[0]) / length
    y = [span.y[0] + rise * (a - x[0]) - m / pull for a, m in zip(x, moments, strict=True)]
    y[0], y[-1] = span.y
    verticals = tuple(pull * (y[i + 1] - y[i]) / (x[i + 1] - x[i]) for i in range(len(x) - 1))
    return Shape(y=tuple(y), horizontal=pull, verticals=verticals, sag_index=most)


@dataclass(frozen=True, kw_only=True)
class Case:
    """What a test wants drawn."""

    spans: tuple[Span, ...]
    mark: str = "C1"
    unit: str = "m"
    force: str = "kN"
    datum: float | None = 0.0
    deck: float | None = None
    drawn: tuple[tuple[int, str], ...] = ()
    marks: tuple[str, ...] = ()
    support_marks: tuple[str, ...] = ()
    frame: Rectangle | None = None
    mast: float | None = None  # height of a mast at each end, with a stay of that run
    stay_run: float = 0.0
    first_key: int = 0
    ea: float = 9000.0
    rule: Rule = field(default_factory=lambda: Rule(kind=RuleKind.SAG, value=2.4))


def even(
    count: int,
    length: float,
    *,
    load: float = 15.0,
    sag: float | None = None,
    rise: float = 0.0,
    x0: float = 0.0,
    y0: float = 12.0,
) -> Span:
    """Span with loads at even panels, some of them doubled so that they differ."""
    x = tuple(x0 + length * i / (count + 1) for i in range(count + 2))
    loads = tuple(load * (1.0 + 0.25 * (i % 3)) for i in range(count))
    return Span(x=x, loads=loads, y=(y0, y0 + rise), sag=length / 10 if sag is None else sag)


def build(case: Case) -> tuple[Cable, FormedCable, tuple[Anchorage, ...]]:
    """Make a cable, what follows, and its anchorages."""
    shapes = [form(span) for span in case.spans]
    supports, loads, nodes, segments, shapes_out, diagrams = [], [], [], [], [], []
    lift = case.datum or 0.0
    ends = [(span.x[0], span.y[0]) for span in case.spans]
    ends.append((case.spans[-1].x[-1], case.spans[-1].y[1]))
    for i, (x, y) in enumerate(ends):
        mark = case.support_marks[i] if case.support_marks else f"S{i + 1}"
        inner = 0 < i < len(ends) - 1
        kind = SupportKind.FIXED if inner else SupportKind.END
        supports.append(Support(key=case.first_key + i, mark=mark, x=x, y=y, kind=kind))
    count = number = 0
    for s, (span, shape) in enumerate(zip(case.spans, shapes, strict=True)):
        letters = []
        for i in range(len(span.x)):
            is_support = i in (0, len(span.x) - 1)
            if i > 0:
                segments.append(_segment(span, shape, i - 1, letter(number), case.ea))
                letters.append(letter(number))
                number += 1
            if is_support and i == 0 and s > 0:
                continue
            if is_support:
                support = supports[s if i == 0 else s + 1]
                nodes.append(
                    Node(
                        mark=support.mark,
                        x=support.x,
                        y=support.y,
                        elevation=support.y + lift,
                        load=0.0,
                        is_support=True,
                        support=support.key,
                    )
                )
                continue
            y, load = shape.y[i], span.loads[i - 1]
            mark = case.marks[count] if case.marks else f"P{count + 1}"
            foot = case.deck
            nodes.append(
                Node(
                    mark=mark,
                    x=span.x[i],
                    y=y,
                    elevation=y + lift,
                    load=load,
                    is_support=False,
                    hanger=None if foot is None else y - foot,
                    hanger_foot=foot,
                )
            )
            drawn = dict(case.drawn).get(count, "")
            loads.append(
                LoadPoint(
                    mark=mark,
                    x=span.x[i],
                    y=case.deck if case.deck is not None else span.y[0] - 4,
                    cases=(("D", load),),
                    symbol=LoadSymbol.POINT,
                    drawn=drawn,
                )
            )
            count += 1
        low = min(range(len(span.x)), key=lambda i: shape.y[i])
        at = (span.x[shape.sag_index], shape.y[shape.sag_index])
        shapes_out.append(
            SpanShape(
                start=supports[s].mark,
                end=supports[s + 1].mark,
                horizontal=shape.horizontal,
                sag=span.sag,
                sag_at=at,
                low_point=(span.x[low], shape.y[low]),
            )
        )
        rise = (span.y[1] - span.y[0]) / (span.x[-1] - span.x[0])
        pole = shape.verticals[0]
        line = tuple((-np.cumsum([0.0, *span.loads])).tolist())
        diagrams.append(
            ForceDiagram(
                letters=tuple(letters),
                load_line=line,
                pole=(shape.horizontal, pole),
                closing=pole - shape.horizontal * rise,
            )
        )
    most = max(segments, key=lambda piece: piece.tension)
    reactions = []
    for i, support in enumerate(supports):
        across, up = 0.0, 0.0
        if i > 0:
            across, up = shapes[i - 1].horizontal, shapes[i - 1].verticals[-1]
        if i < len(shapes):
            across, up = (
                (shapes[i].horizontal if i == 0 else across - shapes[i].horizontal),
                up - shapes[i].verticals[0],
            )
        reactions.append(
            Reaction(support=support.key, mark=support.mark, horizontal=across, vertical=up)
        )
    pulls = {round(shape.horizontal, 6) for shape in shapes}
    formed = FormedCable(
        mark=case.mark,
        status="formed",
        rule=case.rule,
        under="D",
        level="service",
        level_is_assumed=True,
        supports_rigid=True,
        weight=0.0,
        weight_case="D",
        ea=case.ea,
        capacity=200.0,
        utilization=most.tension / 200.0,
        loads_source="drawing",
        horizontal=shapes[0].horizontal if len(pulls) == 1 else None,
        max_tension=most.tension,
        governs=Governs(segment=most.name, end="right", support=supports[-1].mark),
        sag=max(span.sag for span in case.spans),
        length=sum(p.length for p in segments),
        unstressed_length=sum(p.unstressed_length for p in segments),
        nodes=tuple(nodes),
        segments=tuple(segments),
        spans=tuple(shapes_out),
        reactions=tuple(reactions),
        diagrams=tuple(diagrams),
    )
    cable = Cable(
        mark=case.mark,
        supports=tuple(supports),
        loads=tuple(loads),
        rule=case.rule,
        under="D",
        datum=case.datum,
        ea=case.ea,
        capacity=200.0,
        frame=case.frame,
    )
    return cable, formed, _anchorages(case, supports, reactions)


def _segment(span: Span, shape: Shape, i: int, name: str, ea: float) -> Segment:
    start, end = (span.x[i], shape.y[i]), (span.x[i + 1], shape.y[i + 1])
    tension = math.hypot(shape.horizontal, shape.verticals[i])
    angle = math.degrees(math.atan2(end[1] - start[1], end[0] - start[0]))
    length = math.dist(start, end)
    return Segment(
        name=f"{name}O",
        start=start,
        end=end,
        tension_left=tension,
        tension_right=tension,
        angle_left=angle,
        angle_right=angle,
        length=length,
        unstressed_length=length / (1 + tension / ea),
    )


def _anchorages(
    case: Case, supports: list[Support], reactions: list[Reaction]
) -> tuple[Anchorage, ...]:
    if case.mast is None:
        return ()
    found = []
    for support, reaction, side in (
        (supports[0], reactions[0], -1),
        (supports[-1], reactions[-1], 1),
    ):
        pull, down = reaction.horizontal, reaction.vertical
        at, foot, anchor = (
            (support.x, support.y),
            (support.x, support.y - case.mast),
            (support.x + side * case.stay_run, support.y - case.mast),
        )
        slope = case.mast / case.stay_run
        stay, mast = pull * math.hypot(1, slope), -(down + pull * slope)
        sides = (
            JointSide(name="cable 1", force=(-side * pull, -down)),
            JointSide(name="stay 1", force=(side * pull, -pull * slope)),
            JointSide(name="mast", force=(0.0, -mast)),
        )
        found.append(
            Anchorage(
                support=support.key,
                mark=support.mark,
                at=at,
                mast=mast,
                stays=(stay,),
                anchors=(AnchorForce(mark="", at=anchor, horizontal=pull, uplift=pull * slope),),
                sides=sides,
                mast_foot=foot,
                stay_feet=(anchor,),
            )
        )
    return tuple(found)


def layout_of(*cases: Case, text_height: float | None = None) -> tuple[Layout, Solution]:
    """Make layout and solution of several cables."""
    built = [build(case) for case in cases]
    cables = tuple(cable for cable, _, _ in built)
    anchorages = tuple(a for _, _, some in built for a in some)
    masts = tuple(Mast(support=a.support, foot=a.mast_foot) for a in anchorages if a.mast_foot)
    stays = tuple(Stay(support=a.support, foot=f) for a in anchorages for f in a.stay_feet)
    layout = Layout(
        version="AC1015",
        length_unit=cases[0].unit,
        force_unit=cases[0].force,
        supports=tuple(s for c in cables for s in c.supports),
        cables=cables,
        masts=masts,
        stays=stays,
        text_height=text_height,
    )
    return layout, Solution(cables=tuple(formed for _, formed, _ in built), anchorages=anchorages)


def obstacles_of(
    layout: Layout, extra: tuple[tuple[float, float, float, float], ...] = ()
) -> Obstacles:
    """Give what a drafter would have drawn: strings, loads, masts, stays, and more."""
    rows: list[tuple[float, float, float, float]] = list(extra)
    ends: dict[int, Point] = {s.key: (s.x, s.y) for s in layout.supports}
    for cable in layout.cables:
        pairs = zip(cable.supports, cable.supports[1:], strict=False)
        rows += [(a.x, a.y, b.x, b.y) for a, b in pairs]
        rows += [(load.x, load.y, load.x, load.y) for load in cable.loads]
    rows += [(*ends[mast.support], *mast.foot) for mast in layout.masts]
    rows += [(*ends[stay.support], *stay.foot) for stay in layout.stays]
    return Obstacles(np.array(rows, dtype=np.float64).reshape(-1, 4), np.zeros((0, 4)))
