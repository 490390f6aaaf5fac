"""Force diagram and joint triangles on a sheet, each at a usual force scale with its bar."""

from __future__ import annotations

import itertools
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.force_polygon import diagram_size, draw_force_polygon
from dxfcable.drawing.painting.joint_triangle import draw_joint, joint_size
from dxfcable.drawing.painting.sketch import Sketch
from dxfcable.drawing.sheeting.blocks import Drawing
from dxfcable.drawing.sheeting.diagram_rows import in_rows
from dxfcable.drawing.sheeting.load_line_letters import has_clash, sparse, spread_letters
from dxfcable.drawing.sheeting.paper_view import ROUNDER, on_paper, plotting_of, scale_words
from dxfcable.drawing.sheeting.saying import brief, under_words
from dxfcable.drawing.sheeting.titles import (
    BAR_RISE,
    draw_bar,
    draw_view_title,
    force_bar,
    force_scale_words,
    title_size,
)
from dxfcable.quantities import is_imperial

if TYPE_CHECKING:
    from collections.abc import Iterator

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.model import Anchorage

MOST_DIAGRAM = 120.0  # text heights that a diagram of one span measures at most
_LEGIBLE, _LEGIBLE_SPAN = 12.0, 6.0  # text heights at least: of one diagram, of one of several
_JOINT = 26.0  # text heights that a joint's polygon may measure
_WORDS = ("/words/", "/scale-bar")
_TRIED = 10  # usual scales, one after the other


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class DiagramMaker:
    """Draws the force diagram and the joints of one cable.

    Attributes
    ----------
    view : View
        In drawing units.
    paper : Paper
    form_scale : float
        Of the elevation, stated with the diagram.
    """

    view: View
    paper: Paper
    form_scale: float
    _side_by_side: dict[float, Sketch] = field(default_factory=dict)
    _drawn: dict[tuple[float, float], Drawing] = field(default_factory=dict)

    @property
    def _is_inch(self) -> bool:
        """Whether forces are stated by the inch of paper: as the drawing, whatever the paper."""
        return is_imperial(self.view.wording.length_unit)

    def scales(self, width: float, height: float, most: float) -> Iterator[tuple[float, float]]:
        """List usual scales by which the bare diagrams may fit a room, the finest first.

        Parameters
        ----------
        width, height : float
            Of the room [mm].
        most : float
            What the diagram of one span may measure [mm].

        Yields
        ------
        tuple of float
            Force by paper unit; the larger measure of the largest diagram [mm], legible.
        """
        plotting = plotting_of(self.paper.text, is_inch=self._is_inch)
        sizes = [diagram_size(diagram) for diagram in self.view.formed.diagrams]
        legible = (_LEGIBLE if len(sizes) == 1 else _LEGIBLE_SPAN) * self.paper.text
        wide, high = max(w for w, _ in sizes), max(h for _, h in sizes)
        room = min(width, most), min(height, most)
        least = max(wide / room[0], high / room[1]) * plotting.on_drawing(1.0)
        for per_paper in itertools.islice(plotting.force_scales(least), _TRIED):
            size = max(wide, high) / plotting.force_per_length(per_paper)
            if size < legible:
                return
            yield per_paper, size

    def drawn(self, per_paper: float, width: float) -> Drawing:
        """Draw the force diagram at a scale, those of a chain in rows of some width [mm]."""
        key = (per_paper, width if len(self.view.formed.diagrams) > 1 else 0.0)
        if key not in self._drawn:  # of one span the same for every room
            sketch = self._diagram(self._paper_view(), per_paper, width)
            self._drawn[key] = Drawing(sketch=sketch)
        return self._drawn[key]

    def fitting(self, width: float, height: float, most: float) -> Drawing | None:
        """Draw the force diagram at the finest usual scale that fits; None if too small."""
        for per_paper, _ in self.scales(width, height, most):
            drawn = self.drawn(per_paper, width)
            wide, high = drawn.size
            if wide <= width + 1e-6 and high <= height + 1e-6:
                return drawn
        return None

    def _paper_view(self) -> View:
        return on_paper(self.view, self.form_scale, self.paper.text)

    def _polygons(self, view: View, per_paper: float) -> Sketch:
        """Draw the diagrams of all spans side by side, once for each scale."""
        if per_paper in self._side_by_side:
            return self._side_by_side[per_paper]
        plotting = plotting_of(self.paper.text, is_inch=self._is_inch)
        drawn = draw_force_polygon(view, plotting, per_paper, ROUNDER)
        sketch = Sketch(ROUNDER)
        sketch.items = [i for i in drawn.sketch.items if not any(w in i.id for w in _WORDS)]
        if view.is_dense or has_clash(sketch.items):
            # Short loads: their letters in a column of their own; the values stand in the strip.
            few = draw_force_polygon(sparse(view), plotting, per_paper, ROUNDER)
            sketch.items = [i for i in few.sketch.items if not any(w in i.id for w in _WORDS)]
            if len(view.formed.diagrams) == 1:
                spread_letters(sketch, view, few)
        self._side_by_side[per_paper] = sketch
        return sketch

    def _diagram(self, view: View, per_paper: float, width: float) -> Sketch:
        """Draw the diagrams of all spans in rows of some width, their title and their bar."""
        sketch = Sketch(ROUNDER)
        sketch.items = list(in_rows(self._polygons(view, per_paper), view, width))
        formed = view.formed
        assumed = ", ASSUMED" if formed.level_is_assumed else ""
        lines = (
            force_scale_words(per_paper, view.wording.force_unit, is_inch=self._is_inch),
            f"FORM {scale_words(self.form_scale, view.wording.length_unit)}",
            f"{under_words(view)} ({formed.level.upper()}{assumed})",
        )
        title = f"FORCE DIAGRAM {brief(formed.mark)}"
        self._finish(sketch, f"{view.prefix}/diagram-title", title, lines, per_paper)
        return sketch

    def _finish(
        self, sketch: Sketch, name: str, title: str, lines: tuple[str, ...], per_paper: float
    ) -> None:
        """Write title and scale below a diagram, then its bar."""
        h = self.paper.text
        left, bottom, right, _ = sketch.bounds()
        unit = self.view.wording.force_unit
        step, labels = force_bar(per_paper, unit, is_inch=self._is_inch)
        width, _ = title_size(self.paper, title, lines)
        y = draw_view_title(sketch, name, (left, bottom - h), self.paper, title, lines)
        beside = left + width + 5.0 * h
        if beside + step * (len(labels) - 1) <= right:
            draw_bar(sketch, name, (beside, y + (BAR_RISE + 0.4) * h), h, step, labels)
        else:
            draw_bar(sketch, name, (left, y - 0.5 * h), h, step, labels)

    def joints(self) -> list[Sketch]:
        """Draw the force polygons of the joints."""
        sizes = [joint_size(anchorage) for _, anchorage in self.view.anchorages]
        if not any(sizes):
            return []
        plotting = plotting_of(self.paper.text, is_inch=self._is_inch)
        # One scale for all, that of the largest: joints are compared by eye.
        least = max(sizes) / (_JOINT * self.paper.text) * plotting.on_drawing(1.0)
        per_paper = next(plotting.force_scales(least))
        return [
            self._joint(name, anchorage, per_paper)
            for (name, anchorage), size in zip(self.view.anchorages, sizes, strict=True)
            if size > 0.0
        ]

    def _joint(self, name: str, anchorage: Anchorage, per_paper: float) -> Sketch:
        """Draw one joint."""
        view = self._paper_view()
        plotting = plotting_of(self.paper.text, is_inch=self._is_inch)
        drawn = draw_joint(view, name, anchorage, plotting, per_paper, ROUNDER)
        sketch = Sketch(ROUNDER)
        sketch.items = [i for i in drawn.items if not any(w in i.id for w in _WORDS)]
        lines = (
            force_scale_words(per_paper, view.wording.force_unit, is_inch=self._is_inch),
            f"FORCES ON THE JOINT, {under_words(view)}",
        )
        title = f"JOINT {brief(anchorage.mark)}"
        self._finish(sketch, f"{view.prefix}/joint-title/{name}", title, lines, per_paper)
        return sketch
