"""Laws of the elevation: the profile at its supports and loads, strings, sag, hangers, curve."""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.pairing import pair
from dxfcable.solving.hangers import hanger_feet
from dxfcable.solving.remarks import Remarks
from dxfcable.statics.catenary_piece import hang
from dxfcable.units import convert
from dxfcable.verifying.diagram_laws import PARALLEL

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.model import Cable, Point, Support
    from dxfcable.verifying.loads import Carried
    from dxfcable.verifying.measure import SpanFigures
    from dxfcable.verifying.shapes import Shape
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.tally import Tally

SUPPORTS, POINTS, STRINGS, CURVE, HANGERS = (
    "profile at supports",
    "profile under load points",
    "strings and dimensions",
    "curve of the cable's weight",
    "hangers",
)
_MILLIMETRE = 1.01


def hold_ends(
    tally: Tally,
    span: SpanFigures,
    supports: tuple[Support, Support],
    moved: Mapping[int, Point],
) -> None:
    """Hold the ends of a profile against the supports drawn.

    `moved` has the heads of masts that stretching stays let go, by the support's key.
    """
    for support, end in zip(supports, (span.curve[0], span.curve[-1]), strict=True):
        if support.key in moved:
            continue
        off = math.dist(end, (support.x, support.y))
        text = f"the profile does not end at support {support.mark}"
        tally.hold(SUPPORTS, off, 2.0 * span.grain, text, span.profile)
    if span.profile.is_bent or span.profile.is_closed:
        tally.fail(SUPPORTS, "the profile has arcs or is closed", span.profile)


def hold_stations(
    tally: Tally, span: SpanFigures, carried: Sequence[Carried], *, is_cut: bool
) -> None:
    """Hold the inner nodes against the vertical lines of their loads, where they must stay there.

    A cable of fixed unstressed lengths takes its clamps along, so that its nodes may move.
    """
    nodes = span.nodes[1:-1]
    if len(nodes) != len(carried):
        text = (
            f"the profile has {len(nodes)} nodes between its ends, {len(carried)} loads are drawn"
        )
        tally.fail(POINTS, text, span.profile)
        return
    if span.per_piece == 1 and len(span.curve) != len(span.nodes):
        text = f"the profile has {len(span.curve)} vertices, {len(span.nodes)} are due"
        tally.fail(POINTS, text, span.profile)
    for node, load in zip(nodes, carried, strict=True):
        if is_cut:
            continue
        off = abs(node[0] - load.point.x)
        text = f"the profile has no vertex in line with load {load.name}"
        tally.hold(POINTS, off, 2.0 * span.grain, text, span.profile)


def hold_strings(tally: Tally, sheet: Sheet, span: SpanFigures, shape: Shape | None) -> None:
    """Hold closing string, sag and span dimension against the profile."""
    near = 2.0 * span.grain
    first, last = span.curve[0], span.curve[-1]
    head, k = span.prefix, span.number
    string = _line(tally, sheet, f"{head}/closing-string/{k}")
    if string is not None:
        off = max(math.dist(string.start, first), math.dist(string.end, last))
        text = f"{string.id} does not join the ends of the profile"
        tally.hold(STRINGS, off, near, text, string)
    if shape is not None:
        _hold_sag(tally, sheet, span, shape)
    line = _line(tally, sheet, f"{head}/span/{k}")
    if line is None:
        return
    off = max(
        abs(line.start[0] - first[0]),
        abs(line.end[0] - last[0]),
        abs(line.start[1] - line.end[1]),
    )
    tally.hold(STRINGS, off, near, f"{line.id} does not measure the span", line)
    for number, (x, y) in ((k, first), (k + 1, last)):
        mark = _line(tally, sheet, f"{head}/span/extension-{number}")
        if mark is None:
            continue
        off = max(abs(mark.start[0] - x), abs(mark.end[0] - x))
        tally.hold(STRINGS, off, near, f"{mark.id} does not stand over its support", mark)
        level, room = line.start[1], 2.0 * sheet.height
        off = max(abs(mark.start[1] - y), abs(mark.end[1] - level))
        text = f"{mark.id} does not run from its support to the dimension"
        tally.hold(STRINGS, off, room, text, mark)


def hold_pole_distance(tally: Tally, sheet: Sheet, span: SpanFigures) -> None:
    """Hold the dimension from the load line to the pole, and its extension lines."""
    pole, axis = span.pole, next((j[0] for j in span.joints if j is not None), None)
    if pole is None or axis is None:
        return
    name, near = f"{span.prefix}/pole-distance/{span.number}", 2.0 * span.grain
    line = _line(tally, sheet, name)
    if line is not None:
        ends = abs(line.start[0] - axis), abs(line.end[0] - pole[0])
        off = max(*ends, abs(line.start[1] - line.end[1]))
        tally.hold(STRINGS, off, near, f"{name} does not measure the pole distance", line)
    for number, x in enumerate((axis, pole[0]), start=1):
        mark = _line(tally, sheet, f"{name}/extension-{number}")
        if mark is not None:
            off = max(abs(mark.start[0] - x), abs(mark.end[0] - x))
            tally.hold(STRINGS, off, near, f"{mark.id} is off what it is drawn from", mark)


def _hold_sag(tally: Tally, sheet: Sheet, span: SpanFigures, shape: Shape) -> None:
    """Hold the sag dimension: upright from string to curve, where the drop is greatest."""
    near = 4.0 * span.grain
    line = sheet.named.get(f"{span.prefix}/sag/{span.number}")
    if line is None:
        if shape.sag > near:
            tally.fail(STRINGS, f"{span.prefix}/sag/{span.number} is missing")
        return
    x = line.end[0]
    bottom = shape.ordinate(x)
    slope = abs(shape.span.vertical(0, 0)) / shape.span.pull
    off = max(
        abs(line.start[0] - x),
        abs(line.end[1] - bottom),
        abs(line.start[1] - bottom - shape.drop(x)),
        abs(shape.sag - shape.drop(x)),
    )
    text = f"{line.id} does not show the greatest sag"
    tally.hold(STRINGS, off, near * (1.0 + slope), text, line)


def feet_of(
    sheet: Sheet, span: SpanFigures, cable: Cable, carried: Sequence[Carried], *, is_cut: bool
) -> list[float | None]:
    """Give what each hanger of a span runs down to, None where there is none.

    Hangers of a cable that is cut keep the lengths they were formed with and take the deck along:
    they end where they are drawn.
    """
    nodes = span.nodes[1:-1]
    if len(nodes) != len(carried):
        return [None] * len(carried)
    if is_cut:
        lines = [sheet.named.get(f"{span.prefix}/hanger/{load.name}") for load in carried]
        return [line.end[1] if line is not None else None for line in lines]
    mine = {load.point: node[1] for load, node in zip(carried, nodes, strict=True)}
    heights = [mine.get(point, point.y) for point in cable.loads]
    feet = dict(zip(cable.loads, hanger_feet(cable, heights, Remarks(cable)), strict=True))
    return [feet[load.point] for load in carried]


def hold_hangers(
    tally: Tally,
    sheet: Sheet,
    span: SpanFigures,
    cable: Cable,
    carried: Sequence[Carried],
    *,
    is_cut: bool,
) -> None:
    """Hold hangers against nodes and deck."""
    nodes = span.nodes[1:-1]
    if len(nodes) != len(carried):
        return
    feet = feet_of(sheet, span, cable, carried, is_cut=is_cut)
    for node, load, foot in zip(nodes, carried, feet, strict=True):
        name = f"{span.prefix}/hanger/{load.name}"
        line = sheet.named.get(name)
        if foot is None:
            if line is not None:
                tally.fail(HANGERS, f"{name} is drawn where none is due", line)
        elif line is None:
            if node[1] - foot > 4.0 * span.grain:
                tally.fail(HANGERS, f"{name} is missing")
        else:
            off = max(math.dist(line.start, node), abs(line.end[1] - foot))
            off = max(off, abs(line.end[0] - line.start[0]))
            text = f"{name} does not run from the cable to what it carries"
            tally.hold(HANGERS, off, 4.0 * span.grain, text, line)


def name_hangers(
    sheet: Sheet, span: SpanFigures, cable: Cable, carried: Sequence[Carried], *, is_cut: bool
) -> None:
    """Find hangers without marks by their nodes and feet; of a cut cable by nodes alone."""
    nodes = span.nodes[1:-1]
    feet = feet_of(sheet, span, cable, carried, is_cut=False)
    due = [
        (load.name, node, (node[0], node[1] if foot is None else foot))
        for load, node, foot in zip(carried, nodes, feet, strict=False)
        if foot is not None or is_cut
    ]
    pool = [e for e in sheet.loose if e.kind == "LINE" and "hanger" in e.roles]
    pool = [e for e in pool if span.curve[0][0] <= e.start[0] <= span.curve[-1][0]]
    costs = [
        [
            math.dist(e.start, top)
            + (abs(e.end[0] - foot[0]) if is_cut else math.dist(e.end, foot))
            for _, top, foot in due
        ]
        for e in pool
    ]
    for i, j in pair(costs) if pool and due else ():
        if not is_cut or costs[i][j] <= sheet.height:
            sheet.adopt(f"{span.prefix}/hanger/{due[j][0]}", pool[i])


def hold_curve(tally: Tally, span: SpanFigures, shape: Shape, length_unit: str) -> None:
    """Hold a cable with weight against its curve, its rays against the end tangents."""
    curve = shape.curve
    assert curve is not None
    rises = np.cumsum(np.concatenate(([0.0], _ups(shape))))
    for k in range(span.pieces):
        # The right end's force follows from the left end's and the weight between them.
        length = math.dist(*span.side(k))
        lean = max(abs(span.vertical(k, 0)), abs(span.vertical(k, 1))) / span.pull
        off = abs(span.vertical(k, 1) - float(curve.verticals_right[k])) / span.scale
        ray = span.rays[2 * k + 1]
        size = span.tension(k, 1) / span.scale
        per_force = curve.weight * length / span.pull * (1.0 + lean) ** 2
        weigh = curve.weight * (1.0 + lean) / span.scale
        allowed = 4.0 * span.grain * (1.0 + lean + per_force + weigh)
        text = f"the rays of piece {k + 1} do not hold its weight between them"
        tally.hold(PARALLEL, off / size, allowed / size, text, ray)
        rise = span.side(k)[1][1] - span.side(k)[0][1]
        off = abs(float(rises[k + 1] - rises[k]) - rise)
        share = length * span.scale / span.pull
        allowed = 4.0 * span.grain * (1.0 + lean) * (1.0 + share * (1.0 + lean))
        text = f"piece {k + 1} of the profile does not leave its node along its ray"
        tally.hold(PARALLEL, off / length, allowed / length, text, span.profile)
        _hold_vertices(tally, span, shape, k, allowed)
    _hold_fineness(tally, span, shape, convert(1.0, "mm", length_unit))


def _ups(shape: Shape) -> list[float]:
    """Give the rise of each piece as its forces say."""
    curve = shape.curve
    assert curve is not None
    found = hang(
        curve.unstressed_lengths,
        curve.weight,
        curve.horizontal,
        curve.verticals_left,
        ea=curve.ea,
        thermal=curve.thermal,
    )
    ups: list[float] = found.up.tolist()
    return ups


def _hold_vertices(
    tally: Tally, span: SpanFigures, shape: Shape, piece: int, allowed: float
) -> None:
    """Hold the vertices between two nodes against the curve."""
    inner = span.curve[span.places[piece] + 1 : span.places[piece + 1]]
    for number, (x, y) in enumerate(inner, start=span.places[piece] + 2):
        off = abs(shape.ordinate(x) - y)
        text = f"vertex {number} of the profile is off the curve"
        tally.hold(CURVE, off, allowed, text, span.profile)


def _hold_fineness(tally: Tally, span: SpanFigures, shape: Shape, millimetre: float) -> None:
    """Hold the sides of the profile against the curve between them: true to a millimetre."""
    for a, b in itertools.pairwise(span.curve):
        x = 0.5 * (a[0] + b[0])
        off = abs(shape.ordinate(x) - 0.5 * (a[1] + b[1]))
        text = f"the profile leaves the curve between x {a[0]:.6g} and {b[0]:.6g}"
        allowed = _MILLIMETRE * millimetre + 4.0 * span.grain
        tally.hold(CURVE, off, allowed, text, span.profile)


def _line(tally: Tally, sheet: Sheet, name: str) -> IssuedEntity | None:
    """Get a line that must be there."""
    line = sheet.named.get(name)
    if line is None or len(line.points) < 2:
        tally.fail(STRINGS, f"{name} is missing")
        return None
    return line
