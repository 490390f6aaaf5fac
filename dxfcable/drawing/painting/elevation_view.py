"""The cable in the elevation: profile, closing string, hangers, dimensions, reaction arrows."""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from dxfcable.drawing.painting.free_place import OccupancyGrid
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.drawing.painting.wording import Wording
    from dxfcable.model import Anchorage, Cable, FormedCable, Node, Point, Reaction

_CORNER = 0.9  # where the reaction arrows start off the support, in text heights
_ARROW = 4.0
_HEAD = 1.1
_MOST_LABELLED = 20  # points up to which nothing is dropped


@dataclass(frozen=True, slots=True, kw_only=True)
class View:
    """One cable's elevation.

    Attributes
    ----------
    prefix : str
        First part of the cable's ids.
    cable, formed : Cable, FormedCable
        As drawn, as formed.
    anchorages : tuple of (str, Anchorage)
        Those shown with this cable, each with its part of ids.
    wording : Wording
        Writes the numbers.
    height : float
        Text height [length].
    node_names : tuple of str
        Part of ids of each node.
    """

    prefix: str
    cable: Cable
    formed: FormedCable
    anchorages: tuple[tuple[str, Anchorage], ...]
    wording: Wording
    height: float
    node_names: tuple[str, ...]

    @property
    def is_dense(self) -> bool:
        """Tell whether there are too many points to label them all."""
        return len(self.cable.loads) > _MOST_LABELLED

    def spans(self) -> tuple[tuple[int, int], ...]:
        """Give first and last node of each span."""
        ends = [i for i, node in enumerate(self.formed.nodes) if node.is_support]
        return tuple(itertools.pairwise(ends))

    def node_point(self, index: int) -> Point:
        """Give a node's place."""
        node = self.formed.nodes[index]
        return node.x, node.y

    def outward(self, reaction: Reaction) -> int:
        """Give the direction of a positive horizontal: -1 at the left end, else 1."""
        first = next(node for node in self.formed.nodes if node.is_support)
        return -1 if reaction.support == first.support else 1

    def support_node(self, key: int) -> Node:
        """Give the node of a support."""
        return next(node for node in self.formed.nodes if node.support == key)


def draw_elevation(view: View, sketch: Sketch) -> None:
    """Draw profile, closing strings, sag, hangers and reaction arrows of one cable."""
    for number, (first, last) in enumerate(view.spans(), start=1):
        points = [view.node_point(i) for i in range(first, last + 1)]
        sketch.polyline(f"{view.prefix}/profile/{number}", "profile", points)
        name = f"{view.prefix}/closing-string/{number}"
        sketch.line(name, "closing_string", points[0], points[-1], is_chain=True)
        _draw_sag(view, sketch, number)
    for name, node in zip(view.node_names, view.formed.nodes, strict=True):
        if node.hanger is not None and node.hanger_foot is not None:
            foot = (node.x, node.hanger_foot)
            sketch.line(f"{view.prefix}/hanger/{name}", "hanger", (node.x, node.y), foot)
    for reaction, name in zip(view.formed.reactions, reaction_names(view), strict=True):
        _draw_reaction(view, sketch, reaction, f"{view.prefix}/reaction/{name}")


def reaction_names(view: View) -> tuple[str, ...]:
    """Give the part of ids of each reaction: that of its support's node."""
    by_support = {
        node.support: name
        for name, node in zip(view.node_names, view.formed.nodes, strict=True)
        if node.is_support
    }
    return tuple(by_support[reaction.support] for reaction in view.formed.reactions)


def sag_line(view: View, span: int) -> tuple[Point, Point]:
    """Give the ends of a span's sag dimension: on the closing string, on the curve."""
    shape = view.formed.spans[span]
    x, y = shape.sag_at
    return (x, y + shape.sag), (x, y)


def _draw_sag(view: View, sketch: Sketch, number: int) -> None:
    """Draw the sag dimension with an arrowhead at each end."""
    top, bottom = sag_line(view, number - 1)
    if top[1] <= bottom[1]:
        return
    name = f"{view.prefix}/sag/{number}"
    size = min(_HEAD * view.height, 0.3 * (top[1] - bottom[1]))
    sketch.line(name, "closing_string", top, bottom)
    sketch.arrowhead(f"{name}/head-1", "closing_string", top, (0.0, 1.0), size)
    sketch.arrowhead(f"{name}/head-2", "closing_string", bottom, (0.0, -1.0), size)


def reaction_arrow(view: View, reaction: Reaction) -> tuple[Point, Point, Point]:
    """Give corner, end of the horizontal and end of the vertical arrow of a reaction."""
    node, side, h = view.support_node(reaction.support), view.outward(reaction), view.height
    corner = (node.x + side * _CORNER * h, node.y + _CORNER * h)
    return (
        corner,
        (corner[0] + side * _ARROW * h, corner[1]),
        (corner[0], corner[1] + _ARROW * h),
    )


def _draw_reaction(view: View, sketch: Sketch, reaction: Reaction, name: str) -> None:
    """Draw both components where they are not zero, each as it acts on the cable."""
    corner, aside, above = reaction_arrow(view, reaction)
    size = _HEAD * view.height
    for letter, far, value in (("H", aside, reaction.horizontal), ("V", above, reaction.vertical)):
        if view.wording.force(value).startswith("0 "):
            continue
        tail, tip = (corner, far) if value > 0 else (far, corner)
        sketch.line(f"{name}/{letter}-arrow", "reaction", tail, tip)
        towards = (tip[0] - tail[0], tip[1] - tail[1])
        sketch.arrowhead(f"{name}/{letter}-head", "reaction", tip, towards, size)


def draw_span_dimensions(view: View, sketch: Sketch, drawn: OccupancyGrid, clear: float) -> float:
    """Draw the chain of span dimensions in a free strip above the view, else below it.

    Parameters
    ----------
    view : View
        The cable.
    sketch : Sketch
        Gets the items.
    drawn : OccupancyGrid
        The drafter's drawing.
    clear : float
        Room that labels above the supports take [length].

    Returns
    -------
    float
        Ordinate of the dimension line.
    """
    h = view.height
    supports = [node for node in view.formed.nodes if node.is_support]
    level = _dimension_level(view, drawn, clear)
    for number, (left, right) in enumerate(itertools.pairwise(supports), start=1):
        name = f"{view.prefix}/span/{number}"
        sketch.line(name, "closing_string", (left.x, level), (right.x, level))
        size = min(_HEAD * h, 0.3 * (right.x - left.x))
        sketch.arrowhead(f"{name}/head-1", "closing_string", (left.x, level), (-1, 0), size)
        sketch.arrowhead(f"{name}/head-2", "closing_string", (right.x, level), (1, 0), size)
    for number, node in enumerate(supports, start=1):
        side = 1 if level > node.y else -1
        start, end = (node.x, node.y + side * 0.8 * h), (node.x, level + side * 0.8 * h)
        sketch.line(f"{view.prefix}/span/extension-{number}", "closing_string", start, end)
    return level


def _dimension_level(view: View, drawn: OccupancyGrid, clear: float) -> float:
    """Choose the dimension line's ordinate: the first strip that the drafter left free."""
    h, nodes = view.height, view.formed.nodes
    top = max(node.y for node in nodes) + clear + 2.0 * h
    feet = [node.hanger_foot for node in nodes if node.hanger_foot is not None]
    bottom = min([node.y for node in nodes] + feet) - 5.0 * h
    levels = [top + 2.5 * h * i for i in range(5)] + [bottom - 2.5 * h * i for i in range(5)]
    strips = np.array([(nodes[0].x, y - h, nodes[-1].x, y + 2.0 * h) for y in levels])
    return levels[int(np.argmin(drawn.taken(strips) > 0))]
