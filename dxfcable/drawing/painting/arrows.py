"""Forces as arrows: what supports give to the cable, what anchors take, stays and masts."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.painting import turned_boxes
from dxfcable.drawing.painting.naming import unique_parts

if TYPE_CHECKING:
    from dxfcable.drawing.painting.drawn_ground import DrawnGround
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import Anchorage, Point

LENGTH = 4.0  # of an arrow, in text heights
HEAD = 1.1
# Of the corner of a pair from its point, sideways and up, in text heights.
_ASIDE = (1.0, 1.9, 2.8, 3.7)
_UP = (1.0, 1.9, 2.8, 3.7, 4.6)
_CLEAR = 0.3  # kept free about an arrow
_ON_LINE, _ON_BOX, _FURTHER = 30.0, 100.0, 8.0
_FROM_JOINT = 5.0  # of a member's arrowhead
_LAYER = "reaction"


@dataclass(frozen=True, slots=True, kw_only=True)
class ArrowPair:
    """A level and an upright arrow that meet in a corner beside a point.

    Attributes
    ----------
    name : str
        First part of ids.
    words : tuple of str
        Ids and words of the level and of the upright force.
    values : tuple of float
        Level force, positive as it points along `side`; upright force, positive up [force].
    shown : tuple of float
        The same with the signs of the label.
    side : int
        -1 where the pair stands left of its point, else 1.
    corner, aside, above : Point
        Corner and the ends of both arrows.
    """

    name: str
    words: tuple[tuple[str, str], tuple[str, str]]
    values: tuple[float, float]
    shown: tuple[float, float]
    side: int
    corner: Point
    aside: Point
    above: Point


def plan_arrows(view: View, drawn: DrawnGround) -> tuple[ArrowPair, ...]:
    """Choose the places of all pairs of a view, clear of what the drafter drew there."""
    pairs = []
    words = (("H", "H"), ("V", "V"))
    for reaction, part in zip(view.formed.reactions, view.reaction_names(), strict=True):
        node, side = view.support_node(reaction.support), view.outward(reaction)
        force = (reaction.horizontal, reaction.vertical)
        name = f"{view.prefix}/reaction/{part}"
        pairs.append(_pair(view, drawn, name, words, (node.x, node.y), side, force, force))
    words = (("H", "H"), ("uplift", "UPLIFT"))
    for part, anchorage in view.anchorages:
        marks = unique_parts([anchor.mark for anchor in anchorage.anchors], "anchor")
        for mark, anchor in zip(marks, anchorage.anchors, strict=True):
            side = 1 if anchor.at[0] > anchorage.at[0] else -1
            # An anchor is pulled towards the head, so against the side that its arrows stand on.
            force, shown = (-anchor.horizontal, anchor.uplift), (anchor.horizontal, anchor.uplift)
            name = f"{view.prefix}/anchorage/{part}/{mark}"
            pairs.append(_pair(view, drawn, name, words, anchor.at, side, force, shown))
    return tuple(pairs)


def _pair(
    view: View,
    drawn: DrawnGround,
    name: str,
    words: tuple[tuple[str, str], tuple[str, str]],
    at: Point,
    side: int,
    values: tuple[float, float],
    shown: tuple[float, float],
) -> ArrowPair:
    """Set a pair beside its point, at the corner that costs least."""
    h, long = view.height, LENGTH * view.height
    offsets = np.array([(dx, dy) for dy in _UP for dx in _ASIDE])
    corners = np.array(at) + h * offsets * np.array((side, 1.0))
    level = np.hstack((corners, corners + np.array((side * long, 0.0))))
    upright = np.hstack((corners, corners + np.array((0.0, long))))
    rows = turned_boxes.of_lines(np.concatenate((level, upright)), _CLEAR * h)
    burdens = drawn.burdens(rows, 1e-6 * h, _ON_LINE, _ON_BOX, at)
    costs = burdens[: len(offsets)] + burdens[len(offsets) :] + _FURTHER * offsets.sum(axis=1)
    x, y = corners[int(np.argmin(np.round(costs, 6)))].tolist()
    return ArrowPair(
        name=name,
        words=words,
        values=values,
        shown=shown,
        side=side,
        corner=(x, y),
        aside=(x + side * long, y),
        above=(x, y + long),
    )


def draw_arrows(view: View, sketch: Sketch, pairs: tuple[ArrowPair, ...]) -> None:
    """Draw the arrows that are not zero, each as it acts, and the forces of stays and masts."""
    size = HEAD * view.height
    for pair in pairs:
        for (key, _), far, value in zip(
            pair.words, (pair.aside, pair.above), pair.values, strict=True
        ):
            if view.wording.force(value).startswith("0 "):
                continue
            tail, tip = (pair.corner, far) if value > 0 else (far, pair.corner)
            sketch.line(f"{pair.name}/{key}-arrow", _LAYER, tail, tip)
            towards = (tip[0] - tail[0], tip[1] - tail[1])
            sketch.arrowhead(f"{pair.name}/{key}-head", _LAYER, tip, towards, size)
    for part, anchorage in view.anchorages:
        for key, _, foot, value in members(anchorage):
            _draw_member(
                view, sketch, f"{view.prefix}/anchorage/{part}/{key}", anchorage.at, foot, value
            )


def members(anchorage: Anchorage) -> list[tuple[str, str, Point, float]]:
    """List stays and mast: part of ids, word, foot, force with tension positive."""
    stays = zip(anchorage.stay_feet, anchorage.stays, strict=False)
    rows = [(f"stay-{n}", "STAY", foot, value) for n, (foot, value) in enumerate(stays, start=1)]
    if anchorage.mast is not None and anchorage.mast_foot is not None:
        rows.append(("mast", "MAST", anchorage.mast_foot, anchorage.mast))
    return rows


def _draw_member(
    view: View, sketch: Sketch, name: str, head: Point, foot: Point, value: float
) -> None:
    """Draw an arrowhead near each end: away from the joint for tension, towards it else."""
    h, length = view.height, math.dist(head, foot)
    if view.wording.force(value).startswith("0 ") or length < 4.0 * HEAD * h:
        return
    off = min(_FROM_JOINT * h, 0.25 * length)
    for number, (joint, other) in enumerate(((head, foot), (foot, head)), start=1):
        away = ((other[0] - joint[0]) / length, (other[1] - joint[1]) / length)
        turn = 1.0 if value > 0 else -1.0
        tip = (joint[0] + off * away[0], joint[1] + off * away[1])
        towards = (turn * away[0], turn * away[1])
        sketch.arrowhead(f"{name}/head-{number}", _LAYER, tip, towards, HEAD * h)
