"""Labels of an elevation that a sheet sets in its own way: supports, sags, masts and stays."""

from __future__ import annotations

import itertools
import math
from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.arrows import members
from dxfcable.drawing.painting.elevation_view import sag_line
from dxfcable.drawing.painting.label_ground import Label
from dxfcable.drawing.painting.label_places import about_point, beside_line, readable_angle
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.sheeting.saying import brief
from dxfcable.model import SupportKind

if TYPE_CHECKING:
    from collections.abc import Iterator

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.model import Point

_OFF = (0.8, 2.0, 3.5, 5.0, 7.0, 9.0, 11.0)  # of a label from a member too short for it
_SHARES = (0.5, 0.3, 0.7, 0.1, 0.9)
_PANEL = 3.0
_SHORT = 36.0
_RISES = tuple(3.8 + 1.3 * k for k in range(9))  # of a low point's label from its point
_LEVELS = (0.0, 2.2, -2.2, 4.4, -4.4, 6.6, -6.6)


def is_short(view: View) -> bool:
    """Tell whether spans of a chain are too short for all that could be said at each saddle.

    Marks stand there then; levels, reactions and sags where they have room, and in the strip
    and the schedules in any case.
    """
    spans = view.spans()
    nodes = view.formed.nodes
    return len(spans) > 1 and any(nodes[b].x - nodes[a].x < _SHORT * view.height for a, b in spans)


def own_labels(view: View) -> Iterator[Label]:
    """Give the labels, in the order in which they take their places."""
    yield from _support_labels(view)
    yield from _sag_labels(view)
    yield from _member_labels(view)


def adapted(view: View, label: Label) -> Label:
    """Give a usual label as a sheet has it: more places for low points, letters where they fit.

    On a small sheet panels may be narrower than a letter; the schedules name each piece too.
    """
    kind, _, rest = label.id.removeprefix(f"{view.prefix}/").partition("/")
    h, nodes = view.height, view.formed.nodes
    if kind == "letter" and min(b.x - a.x for a, b in itertools.pairwise(nodes)) < _PANEL * h:
        return replace(label, is_optional=True)
    if is_short(view) and (kind == "reaction" or rest.startswith("low-point")):
        return replace(label, is_optional=True)
    if kind == "elevation" and rest.startswith("low-point") and label.target is not None:
        x, y = label.target[0]
        further = tuple(
            (x + across * h, y + side * rise * h)
            for rise in _RISES
            for across in (0.0, -3.0, 3.0)
            for side in (-1, 1)
        )
        return replace(label, places=label.places + further)
    return label


def member_ids(view: View) -> set[str]:
    """Give the ids of the labels of masts and stays."""
    return {
        f"{view.prefix}/anchorage/{name}/{key}"
        for name, anchorage in view.anchorages
        for key, _, _, _ in members(anchorage)
    }


def _member_labels(view: View) -> Iterator[Label]:
    """Label masts and stays along them, level and with a leader where they are too short."""
    h, force = view.height, view.wording.force
    for name, anchorage in view.anchorages:
        for key, word, foot, value in members(anchorage):
            text = f"{word} {force(value)}"
            width = text_width(text, h)
            is_along = math.dist(anchorage.at, foot) > width + 1.5 * h
            places = _level_places(anchorage.at, foot, width, h)
            if is_along:
                places = beside_line(anchorage.at, foot, h, first_side=1)
            yield Label(
                id=f"{view.prefix}/anchorage/{name}/{key}",
                layer="reaction",
                text=text,
                places=places,
                rotation=readable_angle(anchorage.at, foot) if is_along else 0.0,
                target=(anchorage.at, foot),
            )


def _level_places(start: Point, end: Point, width: float, h: float) -> tuple[Point, ...]:
    """List middles of a level text on both sides of a line, near ones first, then below it."""
    beside = tuple(
        (
            start[0] + share * (end[0] - start[0]) + side * (0.5 * width + off * h),
            start[1] + share * (end[1] - start[1]) + rise * h,
        )
        for off in _OFF
        for rise in (0.0, 1.3, -1.3)
        for share in _SHARES
        for side in (-1, 1)
    )
    below = tuple(
        (end[0] + side * across * width, end[1] - (3.5 + abs(rise)) * h)
        for rise in _LEVELS
        for across in (0.0, 0.5, 0.9)
        for side in (-1, 1)
    )
    return beside + below


def _sag_labels(view: View) -> Iterator[Label]:
    """Label the sag of each span: level beside its line, upright where panels are narrow."""
    h, nodes = view.height, view.formed.nodes
    for number, span in enumerate(view.formed.spans, start=1):
        top, bottom = sag_line(view, number - 1)
        text = f"SAG {view.wording.length(span.sag)}"
        width = text_width(text, h)
        panels = [b.x - a.x for a, b in itertools.pairwise(nodes) if a.x <= top[0] <= b.x]
        is_upright = span.sag > width + 3.0 * h and width + h > min(panels)
        aside = 0.5 * width + 0.5 * h
        places = tuple(
            (top[0] + side * (aside + more * h), top[1] + share * (bottom[1] - top[1]))
            for more in (0.0, 0.8, 1.6, 2.4)
            for share in (0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8)
            for side in (1, -1)
        )
        places += about_point(top, width, h)
        if is_upright:
            places = beside_line(bottom, top, h, first_side=1)
        yield Label(
            id=f"{view.prefix}/sag-label/{number}",
            layer="closing_string",
            text=text,
            places=places,
            rotation=90.0 * is_upright,
            target=(top, bottom),
            is_optional=is_short(view),
        )


def _support_labels(view: View) -> Iterator[Label]:
    """Label each support with its mark, what kind it is, and its level."""
    h = view.height
    kinds = {support.key: support.kind for support in view.cable.supports}
    for name, node in zip(view.node_names, view.formed.nodes, strict=True):
        if not node.is_support:
            continue
        kind = kinds.get(node.support or 0, SupportKind.END)
        word = "" if kind is SupportKind.END else f" ({kind.value.upper()})"
        text = f"{brief(node.mark)}{word} {view.wording.level(node.elevation)}".strip()
        if is_short(view):
            text = brief(node.mark)
        at = (node.x, node.y)
        yield Label(
            id=f"{view.prefix}/support-label/{name}",
            layer="elevation",
            text=text,
            places=about_point(at, text_width(text, h), h),
            target=(at, at),
        )
