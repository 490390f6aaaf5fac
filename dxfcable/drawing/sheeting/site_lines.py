"""What the drafter drew about a cable, drawn again on the sheet: supports, masts, stays, loads."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.painting.arrows import HEAD

if TYPE_CHECKING:
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import Anchorage, Node, Point

ARROW = 3.2  # length of a load's arrow, in text heights
_PIN, _BASE = 1.3, 0.9  # height and half width of a support's triangle


def draw_site(view: View, sketch: Sketch) -> None:
    """Draw supports, masts, stays, anchors, deck, clearance line and loads of a cable."""
    for name, anchorage in view.anchorages:
        _draw_anchorage(view, sketch, f"{view.prefix}/site/{name}", anchorage)
    standing = {a.support for _, a in view.anchorages}
    for name, node in zip(view.node_names, view.formed.nodes, strict=True):
        if node.is_support:
            at = (node.x, node.y)
            sketch.circle(f"{view.prefix}/support/{name}", "support", at, 0.3 * view.height)
            if node.support not in standing:
                _draw_pin(view, sketch, f"{view.prefix}/support/{name}", "support", at)
        else:
            _draw_load(view, sketch, f"{view.prefix}/load-arrow/{name}", node)
    for role, line in (("deck", view.cable.deck), ("clearance", view.cable.clearance)):
        if len(line) > 1:
            sketch.polyline(f"{view.prefix}/{role}", role, line)


def _draw_pin(view: View, sketch: Sketch, name: str, role: str, at: Point) -> None:
    """Draw a triangle below a point that is held, on a base line."""
    h, (x, y) = view.height, at
    low, half = y - _PIN * h, _BASE * h
    sketch.line(f"{name}/side-1", role, (x, y), (x - half, low))
    sketch.line(f"{name}/side-2", role, (x, y), (x + half, low))
    sketch.line(f"{name}/base", role, (x - 1.6 * half, low), (x + 1.6 * half, low))


def _draw_anchorage(view: View, sketch: Sketch, name: str, anchorage: Anchorage) -> None:
    """Draw a mast on its base, stays down to anchor blocks."""
    h = view.height
    if anchorage.mast_foot is not None:
        sketch.line(f"{name}/mast", "mast", anchorage.at, anchorage.mast_foot)
        _draw_pin(view, sketch, f"{name}/base", "anchor", anchorage.mast_foot)
    for number, foot in enumerate(anchorage.stay_feet, start=1):
        sketch.line(f"{name}/stay-{number}", "stay", anchorage.at, foot)
        x, y = foot
        block = (x - 1.4 * h, y - 1.8 * h, x + 1.4 * h, y)
        sketch.rectangle(f"{name}/block-{number}", "anchor", block)


def load_ends(view: View, node: Node) -> tuple[Point, Point]:
    """Give tail and tip of a load's arrow: down from the hanger, or from or upon the cable."""
    long = ARROW * view.height
    if node.hanger_foot is not None:
        high, low = (node.x, node.hanger_foot), (node.x, node.hanger_foot - long)
    elif view.load_side > 0:
        high, low = (node.x, node.y + long), (node.x, node.y)
    else:
        high, low = (node.x, node.y), (node.x, node.y - long)
    return (low, high) if node.load < 0 else (high, low)


def _draw_load(view: View, sketch: Sketch, name: str, node: Node) -> None:
    """Draw an arrow for a load; none where it is zero."""
    if node.load == 0:
        return
    tail, tip = load_ends(view, node)
    sketch.line(name, "load", tail, tip)
    towards = (tip[0] - tail[0], tip[1] - tail[1])
    sketch.arrowhead(f"{name}/head", "load", tip, towards, HEAD * view.height)
