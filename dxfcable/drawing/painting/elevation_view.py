"""The cable in the elevation: profile, closing string, hangers, dimensions, reaction arrows."""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.painting import turned_boxes
from dxfcable.drawing.painting.arrows import HEAD, draw_arrows
from dxfcable.drawing.painting.labels import text_width

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.drawing.painting.arrows import ArrowPair
    from dxfcable.drawing.painting.drawn_ground import DrawnGround
    from dxfcable.drawing.painting.sketch import Bounds, Sketch
    from dxfcable.drawing.painting.wording import Wording
    from dxfcable.model import (
        Anchorage,
        Cable,
        CableRevisions,
        FormedCable,
        Node,
        Point,
        Reaction,
    )

_LEVELS, _LEVEL_STEP = 14, 0.9  # places for the span dimension above and below, text heights
_SPOILT, _CROSSED = 40.0, 0.6
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
    revisions : CableRevisions or None
        What the revision layer shows.
    """

    prefix: str
    cable: Cable
    formed: FormedCable
    anchorages: tuple[tuple[str, Anchorage], ...]
    wording: Wording
    height: float
    node_names: tuple[str, ...]
    revisions: CableRevisions | None = None

    @property
    def is_dense(self) -> bool:
        """Tell whether there are too many points to label them all."""
        return len(self.cable.loads) > _MOST_LABELLED

    @property
    def left(self) -> float:
        """Where places along the cable count from: the left support as drawn [length]."""
        return self.cable.supports[0].x

    @property
    def load_side(self) -> int:
        """Give the side of the cable that its loads are drawn on: 1 above, -1 below."""
        nodes = [node for node in self.formed.nodes if not node.is_support]
        above = sum(load.y > node.y for load, node in zip(self.cable.loads, nodes, strict=True))
        return 1 if 2 * above > len(nodes) else -1

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

    def reaction_names(self) -> tuple[str, ...]:
        """Give the part of ids of each reaction: that of its support's node."""
        by_support = {
            node.support: name
            for name, node in zip(self.node_names, self.formed.nodes, strict=True)
            if node.is_support
        }
        return tuple(by_support[reaction.support] for reaction in self.formed.reactions)

    def support_node(self, key: int) -> Node:
        """Give the node of a support."""
        return next(node for node in self.formed.nodes if node.support == key)


def extent(view: View) -> Bounds:
    """Give the rectangle about a cable's nodes, hangers, masts and stays."""
    points = [(node.x, node.y) for node in view.formed.nodes]
    points += [
        (node.x, node.hanger_foot) for node in view.formed.nodes if node.hanger_foot is not None
    ]
    for _, anchorage in view.anchorages:
        feet = (*anchorage.stay_feet, *(anchor.at for anchor in anchorage.anchors))
        points += [*feet, *([anchorage.mast_foot] if anchorage.mast_foot else [])]
    across, up = [x for x, _ in points], [y for _, y in points]
    return min(across), min(up), max(across), max(up)


def draw_elevation(view: View, sketch: Sketch, arrows: tuple[ArrowPair, ...]) -> None:
    """Draw profile, closing strings, sag, hangers and the arrows of one cable."""
    for number, (first, last) in enumerate(view.spans(), start=1):
        points = [view.node_point(i) for i in range(first, last + 1)]
        # With weight the cable is a curve between its nodes, else the nodes are the shape.
        curve = view.formed.curves[number - 1] if view.formed.curves else points
        sketch.polyline(f"{view.prefix}/profile/{number}", "profile", curve)
        name = f"{view.prefix}/closing-string/{number}"
        sketch.line(name, "closing_string", points[0], points[-1], is_chain=True)
        _draw_sag(view, sketch, number)
    for name, node in zip(view.node_names, view.formed.nodes, strict=True):
        if node.hanger is not None and node.hanger_foot is not None:
            foot = (node.x, node.hanger_foot)
            sketch.line(f"{view.prefix}/hanger/{name}", "hanger", (node.x, node.y), foot)
    draw_arrows(view, sketch, arrows)


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
    size = min(HEAD * view.height, 0.3 * (top[1] - bottom[1]))
    sketch.line(name, "closing_string", top, bottom)
    sketch.arrowhead(f"{name}/head-1", "closing_string", top, (0.0, 1.0), size)
    sketch.arrowhead(f"{name}/head-2", "closing_string", bottom, (0.0, -1.0), size)


def draw_span_dimensions(view: View, sketch: Sketch, drawn: DrawnGround, clear: float) -> float:
    """Draw the chain of span dimensions in a free strip above the view, else below it.

    Parameters
    ----------
    view : View
        The cable.
    sketch : Sketch
        Gets the items.
    drawn : DrawnGround
        The drafter's drawing.
    clear : float
        Ordinate up to which arrows and labels above the supports reach.

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
        size = min(HEAD * h, 0.3 * (right.x - left.x))
        sketch.arrowhead(f"{name}/head-1", "closing_string", (left.x, level), (-1, 0), size)
        sketch.arrowhead(f"{name}/head-2", "closing_string", (right.x, level), (1, 0), size)
    for number, node in enumerate(supports, start=1):
        side = 1 if level > node.y else -1
        start, end = (node.x, node.y + side * 0.8 * h), (node.x, level + side * 0.8 * h)
        sketch.line(f"{view.prefix}/span/extension-{number}", "closing_string", start, end)
    return level


def _dimension_level(view: View, drawn: DrawnGround, clear: float) -> float:
    """Choose the dimension line's ordinate: the strip and text room that the drafter left free.

    Lines that cross a strip upright, as grid lines do, are common and count little.
    """
    h, nodes = view.height, view.formed.nodes
    top = clear + h
    feet = [node.hanger_foot for node in nodes if node.hanger_foot is not None]
    bottom = min([node.y for node in nodes] + feet) - 5.0 * h
    levels = np.array(
        [top + _LEVEL_STEP * h * i for i in range(_LEVELS)]
        + [bottom - _LEVEL_STEP * h * i for i in range(_LEVELS)]
    )
    left, right = nodes[0].x, nodes[-1].x
    half = 0.5 * text_width(view.wording.length(right - left), h) + 0.5 * h
    middle = 0.5 * (left + right)
    inset = min(1.5 * h, 0.2 * (right - left))  # extension lines and grid lines end the strip
    words = _boxes(levels, (middle - half, middle + half), (0.1 * h, 2.0 * h))
    # A line along the strip, or a text in it, spoils it; one across it does not.
    order = np.argsort(levels, kind="stable")
    band = (left + inset, levels.min() - h, right - inset, levels.max() + h)
    along, across = drawn.strips(levels[order], 0.7 * h, band, 0.5 * h)
    costs = np.empty(len(levels))
    costs[order] = _SPOILT * along + _CROSSED * across
    costs += drawn.burdens(turned_boxes.of_boxes(words), 1e-6 * h, _SPOILT, _SPOILT)
    costs += np.concatenate((np.arange(_LEVELS), np.arange(_LEVELS) + 2.0))
    return float(levels[int(np.argmin(np.round(costs, 6)))])


def _boxes(
    levels: NDArray[np.float64], across: tuple[float, float], up: tuple[float, float]
) -> NDArray[np.float64]:
    """Give a box at each level."""
    ends = np.broadcast_to(across, (len(levels), 2))
    return np.column_stack((ends[:, 0], levels + up[0], ends[:, 1], levels + up[1]))
