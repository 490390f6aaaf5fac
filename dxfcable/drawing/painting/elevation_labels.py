"""Labels of the elevation: tensions, elevations, letters, hangers, reactions, dimensions."""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.elevation_view import reaction_arrow, reaction_names, sag_line
from dxfcable.drawing.painting.label_ground import Label
from dxfcable.drawing.painting.label_places import (
    about_point,
    beside_line,
    in_space,
    readable_angle,
    upright_over,
)
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.naming import unique_parts

if TYPE_CHECKING:
    from collections.abc import Iterator

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.model import Anchorage, Point


def elevation_labels(view: View, dimension_level: float) -> Iterator[Label]:
    """Give all labels of one cable's elevation, in the order in which they take their places."""
    yield from _tensions(view)
    if not view.is_dense:
        yield from _letters(view)
    yield from _dimensions(view, dimension_level)
    yield from _elevations(view)
    yield from _hangers(view)
    yield from _reactions(view)
    for name, anchorage in view.anchorages:
        yield from _anchorage(view, f"{view.prefix}/anchorage/{name}", anchorage)
    yield from _overruled(view)
    if view.is_dense:
        yield from _letters(view)


def slope_beside(view: View, index: int) -> float:
    """Give the steeper slope of the two pieces at a node."""
    pieces = view.formed.segments[max(0, index - 1) : index + 1]
    return max(
        abs((piece.end[1] - piece.start[1]) / (piece.end[0] - piece.start[0])) for piece in pieces
    )


def has_upright_levels(view: View) -> bool:
    """Tell whether panels are too narrow for level texts, so that heights stand upright."""
    h, nodes = view.height, view.formed.nodes
    widest = max(text_width(view.wording.level(node.elevation), h) for node in nodes)
    panel = min(b.x - a.x for a, b in itertools.pairwise(nodes))
    return panel < widest + 0.8 * h and not view.is_dense


def room_above(view: View) -> float:
    """Give the height above the supports that reaction arrows and upright labels may need."""
    h = view.height
    if not has_upright_levels(view):
        return 6.0 * h
    widest = max(text_width(view.wording.level(node.elevation), h) for node in view.formed.nodes)
    sags = (f"SAG {view.wording.length(span.sag)}" for span in view.formed.spans)
    return max(widest, *(text_width(text, h) for text in sags)) + 4.0 * h


def _tensions(view: View) -> Iterator[Label]:
    """Label each piece along its side, or upright where it is shorter than its label."""
    h, segments = view.height, view.formed.segments
    most = max(range(len(segments)), key=lambda i: segments[i].tension)
    kept = {0, len(segments) - 1, most}
    for index, segment in enumerate(segments):
        if view.is_dense and index not in kept:
            continue
        text = view.wording.force(segment.tension)
        width = text_width(text, h)
        start, end = segment.start, segment.end
        name = f"{view.prefix}/tension/{index + 1}"
        if width + 1.2 * h <= math.dist(start, end):
            places = beside_line(start, end, h, first_side=-1)
            angle = readable_angle(start, end)
            yield Label(id=name, layer="tension", text=text, places=places, rotation=angle)
            continue
        middle = (0.5 * (start[0] + end[0]), 0.5 * (start[1] + end[1]))
        slope = slope_beside(view, index)
        reach = max(0.0, 0.5 * (end[0] - start[0]) - 0.3 * h)
        places = upright_over(middle, slope, width, h, first_side=-1, near_end=-1, reach=reach)
        yield Label(
            id=name, layer="tension", text=text, places=places, rotation=90.0, align=Align.RIGHT
        )


def _elevations(view: View) -> Iterator[Label]:
    """Label each node's height; upright where the panels are too narrow for level texts."""
    h, nodes = view.height, view.formed.nodes
    texts = [view.wording.level(node.elevation) for node in nodes]
    lowest = min(range(len(nodes)), key=lambda i: nodes[i].y)
    is_upright = has_upright_levels(view)
    # Nodes at a sag dimension have the least room, so they choose first.
    sags = {span.sag_at[0] for span in view.formed.spans}
    order = sorted(range(len(nodes)), key=lambda i: nodes[i].x not in sags)
    for index in order:
        node, text = nodes[index], texts[index]
        if view.is_dense and not node.is_support and index != lowest:
            continue
        name = f"{view.prefix}/elevation/{view.node_names[index]}"
        width = text_width(text, h)
        if is_upright:
            slope = slope_beside(view, index)
            places = upright_over(
                (node.x, node.y), slope, width, h, first_side=1, near_end=1, reach=2.5 * h
            )
            yield Label(
                id=name,
                layer="elevation",
                text=text,
                places=places,
                rotation=90.0,
                align=Align.LEFT,
            )
        else:
            places = about_point((node.x, node.y), width, h)
            yield Label(id=name, layer="elevation", text=text, places=places)
    yield from _low_points(view)


def _low_points(view: View) -> Iterator[Label]:
    """Label a span's low point where it lies between nodes, as under a cable's own weight."""
    h, nodes = view.height, view.formed.nodes
    touch = 1e-6 * (nodes[-1].x - nodes[0].x)
    lift = nodes[0].elevation - nodes[0].y
    for number, span in enumerate(view.formed.spans, start=1):
        if min(abs(node.x - span.low_point[0]) for node in nodes) <= touch:
            continue
        text = f"LOW {view.wording.level(span.low_point[1] + lift)}"
        places = about_point(span.low_point, text_width(text, h), h, first_side=-1)
        name = f"{view.prefix}/elevation/low-point-{number}"
        yield Label(id=name, layer="elevation", text=text, places=places)


def _hangers(view: View) -> Iterator[Label]:
    """Label each hanger with its length, along it."""
    if view.is_dense:
        return
    for name, node in zip(view.node_names, view.formed.nodes, strict=True):
        if node.hanger is None or node.hanger_foot is None:
            continue
        h, text = view.height, view.wording.length(node.hanger)
        beside = beside_line((node.x, node.hanger_foot), (node.x, node.y), h, first_side=1)
        half = 0.5 * text_width(text, h)
        below = tuple(
            (node.x + shift * h, node.hanger_foot - half - step * h)
            for step in (0.5, 1.2, 2.0, 2.7)
            for shift in (0.0, -0.4, 0.4, -0.8, 0.8)
        )
        yield Label(
            id=f"{view.prefix}/hanger-length/{name}",
            layer="hanger",
            text=text,
            places=beside + below,
            rotation=90.0,
        )


def _dimensions(view: View, level: float) -> Iterator[Label]:
    """Label sag and span."""
    h = view.height
    for number, (first, last) in enumerate(view.spans(), start=1):
        top, bottom = sag_line(view, number - 1)
        text = f"SAG {view.wording.length(view.formed.spans[number - 1].sag)}"
        is_upright = has_upright_levels(view)
        places = _beside_sag(top, bottom, text_width(text, h), h, is_upright=is_upright)
        name = f"{view.prefix}/sag-label/{number}"
        yield Label(
            id=name, layer="closing_string", text=text, places=places, rotation=90.0 * is_upright
        )
        left, right = view.formed.nodes[first].x, view.formed.nodes[last].x
        places = beside_line((left, level), (right, level), h, first_side=1)
        name = f"{view.prefix}/span-label/{number}"
        text = view.wording.length(right - left)
        yield Label(id=name, layer="closing_string", text=text, places=places)


def _beside_sag(
    top: Point, bottom: Point, width: float, h: float, *, is_upright: bool
) -> tuple[Point, ...]:
    """List places of a sag's label: level beside its line, or upright in narrow panels."""
    if is_upright:
        over = tuple(
            (top[0] + shift * h, top[1] + 0.5 * width + step * h)
            for step in (0.5, 1.2, 2.0, 2.7)
            for shift in (0.0, -0.5, 0.5, -1.0, 1.0)
        )
        return beside_line(bottom, top, h, first_side=1) + over
    aside = 0.5 * width + 0.5 * h
    return tuple(
        (top[0] + side * (aside + more * h), top[1] + share * (bottom[1] - top[1]))
        for more in (0.0, 1.2, 2.4)
        for share in (0.5, 0.35, 0.65, 0.2, 0.8)
        for side in (1, -1)
    )


def _reactions(view: View) -> Iterator[Label]:
    """Label both components of each reaction at its arrows."""
    h = view.height
    for reaction, name in zip(view.formed.reactions, reaction_names(view), strict=True):
        corner, aside, above = reaction_arrow(view, reaction)
        side = 1.0 if aside[0] > corner[0] else -1.0
        text = f"H {view.wording.force(reaction.horizontal)}"
        half = 0.5 * text_width(text, h) + 0.4 * h
        level: list[Point] = [
            (corner[0] + side * (half + more * h), corner[1] + rise * h)
            for rise in (0.95, -0.95, 2.1, -2.1)
            for more in (0.0, 1.2, 2.4)
        ]
        places = ((aside[0] + side * half, aside[1]), *level)
        name = f"{view.prefix}/reaction/{name}"
        yield Label(id=f"{name}/H", layer="reaction", text=text, places=places)
        text = f"V {view.wording.force(reaction.vertical)}"
        half = 0.5 * text_width(text, h) + 0.4 * h
        beside: list[Point] = [
            (above[0] + turn * half, above[1] - drop * h)
            for turn in (side, -side)
            for drop in (0.5, 1.5, 2.5)
        ]
        over: list[Point] = [
            (above[0] + turn * h, above[1] + 0.95 * h) for turn in (0, side, -side)
        ]
        yield Label(id=f"{name}/V", layer="reaction", text=text, places=(*beside, *over))


def _anchorage(view: View, name: str, anchorage: Anchorage) -> Iterator[Label]:
    """Label mast, stays and anchors with their forces."""
    h, force = view.height, view.wording.force
    members = list(zip(anchorage.stay_feet, anchorage.stays, strict=False))
    rows = [(f"stay-{n}", "STAY", foot, value) for n, (foot, value) in enumerate(members, start=1)]
    if anchorage.mast is not None and anchorage.mast_foot is not None:
        rows.append(("mast", "MAST", anchorage.mast_foot, anchorage.mast))
    for key, word, foot, value in rows:
        places = beside_line(anchorage.at, foot, h, first_side=1)
        angle = readable_angle(anchorage.at, foot)
        text = f"{word} {force(value)}"
        yield Label(id=f"{name}/{key}", layer="reaction", text=text, places=places, rotation=angle)
    for key, word, result in (
        ("head-shear", "HEAD SHEAR", force(anchorage.head_shear)),
        ("base-moment", "BASE MOMENT", view.wording.moment(anchorage.base_moment)),
    ):
        if result.startswith("0 "):
            continue
        at = anchorage.mast_foot if key == "base-moment" and anchorage.mast_foot else anchorage.at
        text = f"{word} {result}"
        places = about_point(at, text_width(text, h), h, first_side=-1)
        yield Label(id=f"{name}/{key}", layer="reaction", text=text, places=places)
    marks = unique_parts([anchor.mark for anchor in anchorage.anchors], "anchor")
    for part, anchor in zip(marks, anchorage.anchors, strict=True):
        for key, text in (
            ("H", f"H {force(anchor.horizontal)}"),
            ("uplift", f"UPLIFT {force(anchor.uplift)}"),
        ):
            places = about_point(anchor.at, text_width(text, h), h, first_side=-1)
            yield Label(id=f"{name}/{part}/{key}", layer="reaction", text=text, places=places)


def _overruled(view: View) -> Iterator[Label]:
    """Say at a load point that the value used is not the one drawn."""
    h = view.height
    names = [
        name
        for name, node in zip(view.node_names, view.formed.nodes, strict=True)
        if not node.is_support
    ]
    nodes = [node for node in view.formed.nodes if not node.is_support]
    for name, node, load in zip(names, nodes, view.cable.loads, strict=True):
        if load.drawn:
            text = f"{view.wording.load(node.load)} (drawn {load.drawn})"
            places = about_point((load.x, load.y), text_width(text, h), h, first_side=-1)
            yield Label(id=f"{view.prefix}/load/{name}", layer="reaction", text=text, places=places)


def _letters(view: View) -> Iterator[Label]:
    """Put Bow's letters into the spaces between the external forces, above the cable."""
    letters = [letter for diagram in view.formed.diagrams for letter in diagram.letters]
    for letter, segment in zip(letters, view.formed.segments, strict=True):
        places = in_space(segment.start, segment.end, view.height)
        yield Label(
            id=f"{view.prefix}/letter/{letter}",
            layer="letters",
            text=letter,
            places=places,
            is_optional=view.is_dense,
        )
