"""Labels of the elevation: tensions, elevations, hangers, dimensions; the order of all."""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.elevation_view import sag_line
from dxfcable.drawing.painting.force_labels import (
    anchorage_labels,
    force_labels,
    letter_labels,
    overruled_labels,
    pole_labels,
)
from dxfcable.drawing.painting.label_ground import Label
from dxfcable.drawing.painting.label_places import (
    about_point,
    beside_line,
    readable_angle,
    upright_over,
)
from dxfcable.drawing.painting.labels import text_width

if TYPE_CHECKING:
    from collections.abc import Iterator

    from dxfcable.drawing.painting.arrows import ArrowPair
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.model import Point


def elevation_labels(
    view: View, dimension_level: float, arrows: tuple[ArrowPair, ...]
) -> Iterator[Label]:
    """Give all labels of one cable's elevation, in the order in which they take their places."""
    yield from _tensions(view)
    if not view.is_dense:
        yield from letter_labels(view)
    yield from _dimensions(view, dimension_level)
    yield from _elevations(view)
    yield from _hangers(view)
    yield from force_labels(view, arrows)
    for name, anchorage in view.anchorages:
        yield from anchorage_labels(view, f"{view.prefix}/anchorage/{name}", anchorage)
    yield from overruled_labels(view)
    if view.is_dense:
        yield from letter_labels(view)
    yield from pole_labels(view)


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


def clear_above(view: View, arrows: tuple[ArrowPair, ...]) -> float:
    """Give the ordinate up to which arrows and labels above the supports reach."""
    h, nodes = view.height, view.formed.nodes
    first = {node.support for node in nodes if node.is_support}
    tops = [pair.above[1] for pair in arrows if pair.name.startswith(f"{view.prefix}/reaction/")]
    top = max([node.y for node in nodes if node.support in first] + tops) + 1.8 * h
    if not has_upright_levels(view):
        return top
    widest = max(text_width(view.wording.level(node.elevation), h) for node in nodes)
    sags = (f"SAG {view.wording.length(span.sag)}" for span in view.formed.spans)
    rise = max(widest, *(text_width(text, h) for text in sags)) + 4.0 * h
    return max(top, max(node.y for node in nodes) + rise)


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
            yield Label(
                id=name,
                layer="tension",
                text=text,
                places=places,
                rotation=angle,
                target=(start, end),
            )
            continue
        middle = (0.5 * (start[0] + end[0]), 0.5 * (start[1] + end[1]))
        slope = slope_beside(view, index)
        reach = max(0.0, 0.5 * (end[0] - start[0]) - 0.3 * h)
        places = upright_over(middle, slope, width, h, first_side=-1, near_end=-1, reach=reach)
        yield Label(
            id=name,
            layer="tension",
            text=text,
            places=places,
            rotation=90.0,
            align=Align.RIGHT,
            target=(start, end),
        )


def _elevations(view: View) -> Iterator[Label]:
    """Label each node's height; upright where the panels are too narrow for level texts."""
    h, nodes = view.height, view.formed.nodes
    lowest = min(range(len(nodes)), key=lambda i: nodes[i].y)
    # Nodes at a sag dimension have the least room, so they choose first.
    sags = {span.sag_at[0] for span in view.formed.spans}
    order = sorted(range(len(nodes)), key=lambda i: nodes[i].x not in sags)
    for index in order:
        node = nodes[index]
        if view.is_dense and not node.is_support and index != lowest:
            continue
        text = view.wording.level(node.elevation)
        width, at = text_width(text, h), (node.x, node.y)
        is_upright = has_upright_levels(view)
        if is_upright:
            slope = slope_beside(view, index)
            places = upright_over(at, slope, width, h, first_side=1, near_end=1, reach=2.5 * h)
        else:
            places = about_point(at, width, h)
        yield Label(
            id=f"{view.prefix}/elevation/{view.node_names[index]}",
            layer="elevation",
            text=text,
            places=places,
            rotation=90.0 * is_upright,
            align=Align.LEFT if is_upright else Align.CENTER,
            target=(at, at),
        )
    yield from _low_points(view)


def _low_points(view: View) -> Iterator[Label]:
    """Mark each span's low point, with its height where it lies between nodes."""
    h, nodes = view.height, view.formed.nodes
    touch = 1e-6 * (nodes[-1].x - nodes[0].x)
    lift = nodes[0].elevation - nodes[0].y
    for number, span in enumerate(view.formed.spans, start=1):
        at = span.low_point
        near = [node for node in nodes if abs(node.x - at[0]) <= touch]
        if any(node.is_support for node in near):
            continue
        is_between = not near
        text = f"LOW PT {view.wording.level(at[1] + lift)}" if is_between else "LOW PT"
        yield Label(
            id=f"{view.prefix}/elevation/low-point-{number}",
            layer="elevation",
            text=text,
            places=about_point(at, text_width(text, h), h, first_side=-1),
            target=(at, at),
        )


def _hangers(view: View) -> Iterator[Label]:
    """Label each hanger with its length, along it, or level beside one that is too short."""
    if view.is_dense:
        return
    h, nodes = view.height, view.formed.nodes
    panel = min(b.x - a.x for a, b in itertools.pairwise(nodes))
    for name, node in zip(view.node_names, nodes, strict=True):
        if node.hanger is None or node.hanger_foot is None:
            continue
        text = view.wording.length(node.hanger)
        width = text_width(text, h)
        foot, top = (node.x, node.hanger_foot), (node.x, node.y)
        is_level = node.hanger < width + 1.6 * h and panel > width + 1.5 * h
        if is_level:
            places = _level_beside(foot, top, width, h) + _under(foot, width, h)
        else:
            places = beside_line(foot, top, h, first_side=1) + tuple(
                (node.x + shift * h, node.hanger_foot - 0.5 * width - step * h)
                for step in (0.5, 1.2, 2.0, 2.7)
                for shift in (0.0, -0.4, 0.4, -0.8, 0.8)
            )
        yield Label(
            id=f"{view.prefix}/hanger-length/{name}",
            layer="hanger",
            text=text,
            places=places,
            rotation=0.0 if is_level else 90.0,
            target=(foot, top),
        )


def _under(foot: Point, width: float, h: float) -> tuple[Point, ...]:
    """List middles of a level text under an upright line."""
    return tuple(
        (foot[0] + slide * width, foot[1] - drop * h)
        for drop in (0.95, 1.6, 2.3, 3.0)
        for slide in (0.0, -0.25, 0.25)
    )


def _level_beside(bottom: Point, top: Point, width: float, h: float) -> tuple[Point, ...]:
    """List middles of a level text beside an upright line, then above and below its ends."""
    aside = 0.5 * width + 0.4 * h
    return tuple(
        (bottom[0] + side * (aside + more * h), bottom[1] + share * (top[1] - bottom[1]))
        for more in (0.0, 0.8, 1.6, 2.4)
        for share in (0.5, 0.38, 0.62, 0.26, 0.74, 0.14, 0.86)
        for side in (-1, 1)
    )


def _dimensions(view: View, level: float) -> Iterator[Label]:
    """Label sag and span."""
    h = view.height
    for number, (first, last) in enumerate(view.spans(), start=1):
        top, bottom = sag_line(view, number - 1)
        text = f"SAG {view.wording.length(view.formed.spans[number - 1].sag)}"
        is_upright = has_upright_levels(view)
        places = _beside_sag(top, bottom, text_width(text, h), h, is_upright=is_upright)
        yield Label(
            id=f"{view.prefix}/sag-label/{number}",
            layer="closing_string",
            text=text,
            places=places,
            rotation=90.0 * is_upright,
            target=(top, bottom),
        )
        ends = (view.formed.nodes[first].x, level), (view.formed.nodes[last].x, level)
        yield Label(
            id=f"{view.prefix}/span-label/{number}",
            layer="closing_string",
            text=view.wording.length(ends[1][0] - ends[0][0]),
            places=beside_line(*ends, h, first_side=1),
            target=ends,
        )


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
        for more in (0.0, 0.8, 1.6, 2.4)
        for share in (0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8)
        for side in (1, -1)
    )
