"""The force diagrams of a cable: load line, pole, rays, letters, closing ray, pole distance."""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.label_ground import Label, LabelGround
from dxfcable.drawing.painting.label_places import beside_line, readable_angle
from dxfcable.drawing.painting.label_placing import Group, put_labels
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.scale_words import draw_force_scale, under_words
from dxfcable.drawing.painting.sketch import Sketch

if TYPE_CHECKING:
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.plotting import Plotting
    from dxfcable.drawing.painting.rounding import Rounder
    from dxfcable.model import ForceDiagram, Point

_LAYER = "force_diagram"
_ASIDE = 4.0  # between the diagrams of neighbouring spans, in text heights
_ACROSS = (0.45, 1.5, 2.55)  # of a letter from the load line
_COLUMN = 8.0
_ALONG = (0.0, 0.65, -0.65, 1.3, -1.3, 2.0, -2.0, 2.6, -2.6)


@dataclass(frozen=True, slots=True, kw_only=True)
class DiagramGeometry:
    """Where one span's diagram lies in the sketch; `rays` are outer ends."""

    pole: Point
    load_line: tuple[Point, ...]
    rays: tuple[Point, ...]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class DiagramSketch:
    """All force diagrams of a cable about the top of the first load line as origin."""

    sketch: Sketch
    spans: tuple[DiagramGeometry, ...]
    scale: float  # force per length of drawing


def diagram_size(diagram: ForceDiagram) -> tuple[float, float]:
    """Give width and height of a force diagram [force]."""
    ordinates = (*diagram.load_line, diagram.pole[1], diagram.closing)
    return abs(diagram.pole[0]), max(ordinates) - min(ordinates)


def draw_force_polygon(
    view: View,
    plotting: Plotting,
    per_paper: float,
    rounder: Rounder,
) -> DiagramSketch:
    """Draw the diagrams of all spans side by side, with their scales in words and as a bar.

    Parameters
    ----------
    view : View
        The cable.
    plotting : Plotting
        Plotting scale and text height.
    per_paper : float
        Force scale: force by paper unit.
    rounder : Rounder
        Rounds coordinates about the origin.

    Returns
    -------
    DiagramSketch
    """
    scale = plotting.force_per_length(per_paper)
    whole = Sketch(rounder, f"{view.prefix}/diagram")
    spans: list[DiagramGeometry] = []
    first_ray = first_load = 1
    right = 0.0
    for number, diagram in enumerate(view.formed.diagrams, start=1):
        drawn = _SpanDiagram(view, number, diagram, scale, rounder)
        drawn.draw(first_ray, first_load)
        left = drawn.sketch.bounds()[0]
        aside = 0.0 if number == 1 else rounder.value(right - left + _ASIDE * view.height)
        whole.items += drawn.sketch.moved((aside, 0.0), rounder)
        spans.append(_moved(drawn.geometry, aside, rounder))
        right = whole.bounds()[2]
        first_ray += len(diagram.load_line)
        first_load += len(diagram.load_line) - 1
    words = _words(view, plotting)
    unit = view.wording.force_unit
    draw_force_scale(whole, f"{view.prefix}/diagram", plotting, per_paper, unit, words)
    return DiagramSketch(sketch=whole, spans=tuple(spans), scale=scale)


def _words(view: View, plotting: Plotting) -> tuple[str, ...]:
    """Give the title and the state that the diagram shows."""
    return (
        f"FORCE DIAGRAM {view.formed.mark}",
        under_words(view),
        "LOADS DOWN +, TENSION +, COMPRESSION -",
        f"FORM {plotting.words}",
    )


def _moved(geometry: DiagramGeometry, aside: float, rounder: Rounder) -> DiagramGeometry:
    def there(point: Point) -> Point:
        return rounder.point((point[0] + aside, point[1]))

    return DiagramGeometry(
        pole=there(geometry.pole),
        load_line=tuple(there(p) for p in geometry.load_line),
        rays=tuple(there(p) for p in geometry.rays),
    )


class _SpanDiagram:
    """One span's diagram, its load line from the origin downwards."""

    def __init__(
        self,
        view: View,
        number: int,
        diagram: ForceDiagram,
        scale: float,
        rounder: Rounder,
    ) -> None:
        self.view, self.number, self.diagram = view, number, diagram
        self.height = view.height
        self.sketch = Sketch(rounder, f"{view.prefix}/diagram")
        load_line = tuple(rounder.point((0.0, y / scale)) for y in diagram.load_line)
        pole = rounder.point((diagram.pole[0] / scale, diagram.pole[1] / scale))
        self.geometry = DiagramGeometry(pole=pole, load_line=load_line, rays=load_line)
        self.closing = rounder.point((0.0, diagram.closing / scale))
        self.side = -1.0 if pole[0] >= 0 else 1.0  # of letters and values
        # With weight, each piece has two ordinates: where its tension line starts and ends.
        self.per_piece = len(load_line) // len(diagram.letters)

    def draw(self, first_ray: int, first_load: int) -> None:
        """Draw linework, then place the labels clear of it."""
        self._draw_rays(first_ray)
        self._draw_loads(first_load)
        self._draw_pole_distance()
        ground = LabelGround(self.height, self.sketch.items)
        labels = (*self._letters(), *self._values(first_load), *self._notes(first_ray))
        put_labels([Group(labels=tuple(labels), sketch=self.sketch)], ground)

    def _draw_rays(self, first: int) -> None:
        prefix, pole = self.view.prefix, self.geometry.pole
        for number, end in enumerate(self.geometry.rays, start=first):
            self.sketch.line(f"{prefix}/ray/{number}", _LAYER, pole, end)
        name = f"{prefix}/closing-ray/{self.number}"
        self.sketch.line(name, _LAYER, pole, self.closing, is_chain=True)
        self.sketch.circle(f"{prefix}/pole/{self.number}", _LAYER, pole, 0.25 * self.height)

    def _steps(self) -> list[tuple[int, Point, Point, bool]]:
        """Give number, ends and kind of the load line's steps; True for a piece's own weight."""
        points = self.geometry.load_line
        pairs = itertools.pairwise(points)
        return [(i, a, b, self.per_piece == 2 and i % 2 == 0) for i, (a, b) in enumerate(pairs)]

    def _draw_loads(self, first: int) -> None:
        for index, start, end, is_weight in self._steps():
            name = f"{self.view.prefix}/load-line/{first + index}"
            self.sketch.line(name, _LAYER, start, end)
            if not is_weight:
                drop = (0.0, end[1] - start[1])
                size = min(1.1 * self.height, 0.4 * abs(drop[1]))
                self.sketch.arrowhead(f"{name}/head", _LAYER, end, drop, size)

    def _draw_pole_distance(self) -> None:
        """Draw the dimension from the load line to the pole, below all rays."""
        h, pole, points = self.height, self.geometry.pole, self.geometry.load_line
        level = min(pole[1], *(p[1] for p in points)) - 2.4 * h
        name = f"{self.view.prefix}/pole-distance/{self.number}"
        self.sketch.line(name, _LAYER, (0.0, level), (pole[0], level))
        size = min(1.1 * h, 0.3 * abs(pole[0]))
        self.sketch.arrowhead(f"{name}/head-1", _LAYER, (0.0, level), (-pole[0], 0.0), size)
        self.sketch.arrowhead(f"{name}/head-2", _LAYER, (pole[0], level), (pole[0], 0.0), size)
        foot = min(p[1] for p in points)
        for number, top in ((1, (0.0, foot - 0.6 * h)), (2, (pole[0], pole[1] - 0.6 * h))):
            self.sketch.line(f"{name}/extension-{number}", _LAYER, top, (top[0], level - 0.8 * h))

    def _letters(self) -> list[Label]:
        """Put the letters beside the load line; the second of a heavy piece gets a stroke."""
        h, labels = self.height, []
        for index, (_, y) in enumerate(self.geometry.load_line):
            letter = self.diagram.letters[index // self.per_piece]
            letter += "'" * (index % self.per_piece)
            half = 0.5 * text_width(letter, h)
            places = tuple(
                (self.side * (half + across * h), y + along * h)
                for along in (_ALONG[:3] if self.view.is_dense else _ALONG)
                for across in _ACROSS
            )
            labels.append(
                Label(
                    id=f"{self.view.prefix}/load-line-letter/{letter}",
                    layer="letters",
                    text=letter,
                    places=places,
                    is_optional=self.view.is_dense,
                )
            )
        x, y = self.geometry.pole
        at = tuple(
            (x - self.side * across * h, y + along * h)
            for across in (1.1, 2.0, 0.0)
            for along in (0.0, 1.1, -1.1, 2.0)
        )
        name = f"{self.view.prefix}/pole-letter/{self.number}"
        labels.append(Label(id=name, layer="letters", text="O", places=at))
        return labels

    def _values(self, first: int) -> list[Label]:
        """Put the loads' values beside the letters."""
        h, labels = self.height, []
        for index, start, end, is_weight in self._steps():
            if is_weight or start == end or self.view.is_dense:
                continue
            ordinates = self.diagram.load_line
            text = self.view.wording.load(ordinates[index] - ordinates[index + 1])
            half = 0.5 * text_width(text, h)
            middle = 0.5 * (start[1] + end[1])
            places = tuple(
                (self.side * (half + across * h), middle + along * h)
                for column in (0.0, _COLUMN)  # a second one where loads are too short
                for along in _ALONG
                for across in (0.6 + column, 1.9 + column, 2.8 + column)
            )
            name = f"{self.view.prefix}/load-value/{first + index}"
            labels.append(
                Label(
                    id=name,
                    layer=_LAYER,
                    text=text,
                    places=places,
                    target=(start, end),
                    leader_from=4.0,
                )
            )
        return labels

    def _notes(self, first_ray: int) -> list[Label]:
        """Label the pole distance, and the largest tension on its ray."""
        h, view, pole = self.height, self.view, self.geometry.pole
        level = min(pole[1], *(p[1] for p in self.geometry.load_line)) - 2.4 * h
        labels = [
            Label(
                id=f"{view.prefix}/pole-distance/{self.number}/label",
                layer=_LAYER,
                text=f"H {view.wording.force(abs(self.diagram.pole[0]))}",
                places=beside_line((0.0, level), (pole[0], level), h, first_side=-1),
            )
        ]
        pieces = view.formed.segments
        ends = [
            (tension, i * self.per_piece + j)
            for i, piece in enumerate(pieces)
            for j, tension in enumerate((piece.tension_left, piece.tension_right)[: self.per_piece])
        ]
        most = max(range(len(ends)), key=lambda i: ends[i][0])
        ray = ends[most][1] - (first_ray - 1)
        if 0 <= ray < len(self.geometry.rays):
            end = self.geometry.rays[ray]
            side = 1 if end[1] >= pole[1] else -1
            labels.append(
                Label(
                    id=f"{view.prefix}/largest-tension/{self.number}",
                    layer=_LAYER,
                    text=f"MAX {view.wording.force(max(t for t, _ in ends))}",
                    places=beside_line(pole, end, h, first_side=side),
                    rotation=readable_angle(pole, end),
                )
            )
        return labels
