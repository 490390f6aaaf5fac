"""Labels of forces in the elevation: arrows, stays and masts, loads overruled, Bow's letters."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.painting.arrows import members
from dxfcable.drawing.painting.elevation_view import sag_line
from dxfcable.drawing.painting.label_ground import Label
from dxfcable.drawing.painting.label_places import (
    about_point,
    beside_line,
    further_off,
    in_space,
    readable_angle,
)
from dxfcable.drawing.painting.labels import text_width

if TYPE_CHECKING:
    from collections.abc import Iterator

    from dxfcable.drawing.painting.arrows import ArrowPair
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.model import Anchorage, LoadPoint, Node, Point

# Of a text in the middle of a panel over its load point, near and further off.
_NEAR_RISES, _FAR_RISES = (0.95, 1.5, 2.1, 2.7), (3.6, 4.5, 5.4, 6.3, 7.5)
_TALL = 1.3  # height of a line of text with its descenders, in text heights


def force_labels(view: View, arrows: tuple[ArrowPair, ...]) -> Iterator[Label]:
    """Label both arrows of each pair."""
    for pair in arrows:
        (level, level_word), (upright, upright_word) = pair.words
        yield _force(view, f"{pair.name}/{level}", level_word, pair.shown[0], pair, is_level=True)
        yield _force(
            view, f"{pair.name}/{upright}", upright_word, pair.shown[1], pair, is_level=False
        )


def _force(
    view: View, name: str, word: str, value: float, pair: ArrowPair, *, is_level: bool
) -> Label:
    """Label one arrow: beyond its end, beside it, or about it."""
    h, side, corner = view.height, float(pair.side), pair.corner
    text = f"{word} {view.wording.force(value)}"
    width = text_width(text, h)
    half = 0.5 * width + 0.4 * h
    if is_level:
        end = pair.aside
        middle = (0.5 * (corner[0] + end[0]), end[1])
        places = [
            (end[0] + side * (half + more * h), end[1] + rise * h)
            for more in (0.0, 0.8, 1.6)
            for rise in (0.0, 0.95, -0.95)
        ]
        places += [
            (corner[0] + side * (half + more * h), end[1] + rise * h)
            for rise in (0.95, -0.95, 2.1, -2.1, 3.0, -3.0)
            for more in (0.0, 1.2, 2.4)
        ]
        places += about_point(middle, width, h)
    else:
        end = pair.above
        middle = (corner[0], 0.5 * (corner[1] + end[1]))
        places = [
            (end[0] + turn * (half + more * h), end[1] - drop * h)
            for more in (0.0, 0.8, 1.6, 2.4)
            for turn in (side, -side)
            for drop in (0.5, 1.5, 2.5)
        ]
        places += [
            (end[0] + turn * h, end[1] + rise * h)
            for rise in (0.95, 1.6, 2.3)
            for turn in (0.0, side, -side, 2.0 * side, -2.0 * side)
        ]
    return Label(id=name, layer="reaction", text=text, places=tuple(places), target=(corner, end))


def anchorage_labels(view: View, name: str, anchorage: Anchorage) -> Iterator[Label]:
    """Label mast and stays with their forces."""
    h, force = view.height, view.wording.force
    for key, word, foot, value in members(anchorage):
        yield Label(
            id=f"{name}/{key}",
            layer="reaction",
            text=f"{word} {force(value)}",
            places=beside_line(anchorage.at, foot, h, first_side=1),
            rotation=readable_angle(anchorage.at, foot),
            target=(anchorage.at, foot),
        )
    for key, word, result in (
        ("head-shear", "HEAD SHEAR", force(anchorage.head_shear)),
        ("base-moment", "BASE MOMENT", view.wording.moment(anchorage.base_moment)),
    ):
        if result.startswith("0 "):
            continue
        at = anchorage.mast_foot if key == "base-moment" and anchorage.mast_foot else anchorage.at
        text = f"{word} {result}"
        places = about_point(at, text_width(text, h), h, first_side=-1)
        yield Label(id=f"{name}/{key}", layer="reaction", text=text, places=places, target=(at, at))


def overruled_labels(view: View) -> Iterator[Label]:
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
            text = f"{view.wording.load(node.load)} (drawn {_drawn_words(view, load)})"
            at, width = (load.x, load.y), text_width(text, h)
            middles = [x for x in _middles(view, node) if abs(x - at[0]) < 0.5 * width + 2.5 * h]
            near = about_point(at, width, h, first_side=-1)
            near += tuple(_in_panels(middles, at, _NEAR_RISES, h))
            far = tuple(_in_panels(middles, at, _FAR_RISES, h))
            far += further_off(at, (width, _TALL * h), h)
            yield Label(
                id=f"{view.prefix}/load/{name}",
                layer="reaction",
                text=text,
                places=(*near, *far),
                target=(at, at),
                far=len(far),
            )


def _middles(view: View, node: Node) -> list[float]:
    """Give the middles of both panels at a load: a long text just fits between hangers there."""
    xs = [n.x for n in view.formed.nodes]
    k = xs.index(node.x)
    return [0.5 * (xs[k] + xs[k + 1]), 0.5 * (xs[k - 1] + xs[k])]


def _in_panels(
    middles: list[float], at: Point, rises: tuple[float, ...], h: float
) -> Iterator[Point]:
    """Give middles of texts over and under a load point, in the middle of a panel beside it."""
    for rise in rises:
        yield from ((x, at[1] + side * rise * h) for side in (1, -1) for x in middles)


def _drawn_words(view: View, load: LoadPoint) -> str:
    """Give what the drawing states: of several cases only those that are others now."""
    drawn, used = load.drawn_cases or (), dict(load.cases)
    changed = [(case, value) for case, value in drawn if used.get(case) != value]
    if len(drawn) < 2 or not changed:
        return load.drawn
    unit = f" {view.wording.force_unit}"  # said once, by the value used: panels are narrow
    return " ".join(
        f"{case}={view.wording.load(value).removesuffix(unit)}" for case, value in changed
    )


def letter_labels(view: View) -> Iterator[Label]:
    """Put Bow's letters into the spaces between the external forces.

    Those spaces lie below the cable where the loads hang from it, above it where they are
    drawn as arrows upon it.
    """
    letters = [letter for diagram in view.formed.diagrams for letter in diagram.letters]
    rows = (1.35, 2.2, 3.0) if view.is_dense or view.load_side > 0 else (2.75, 1.35, 2.2)
    for letter, segment in zip(letters, view.formed.segments, strict=True):
        yield Label(
            id=f"{view.prefix}/letter/{letter}",
            layer="letters",
            text=letter,
            places=in_space(
                segment.start,
                segment.end,
                view.height,
                first_side=view.load_side,
                rows=rows,
            ),
            is_optional=view.is_dense,
        )


def pole_labels(view: View) -> Iterator[Label]:
    """Put O, the letter of the pole, between closing string and cable where there is room."""
    h = view.height
    for number in range(1, len(view.formed.spans) + 1):
        top, bottom = sag_line(view, number - 1)
        places = tuple(
            (top[0] + side * away * h, top[1] + share * (bottom[1] - top[1]))
            for away in (6.0, 9.0, 12.0, 15.0)
            for side in (-1, 1)
            for share in (0.5, 0.35, 0.65)
        )
        if top[1] - bottom[1] > 4.0 * h:
            name = f"{view.prefix}/letter/O-{number}"
            yield Label(id=name, layer="letters", text="O", places=places, is_optional=True)
