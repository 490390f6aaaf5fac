"""Force diagram and joint triangles of a cable as one block: their scales and arrangement."""

from __future__ import annotations

import math
from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.force_polygon import DiagramSketch, diagram_size, draw_force_polygon
from dxfcable.drawing.painting.joint_triangle import draw_joint, joint_size

if TYPE_CHECKING:
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.plotting import Plotting
    from dxfcable.drawing.painting.rounding import Rounder
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import ForceDiagram, Point

_SHARE = 0.5  # of the span: what a diagram may measure where no frame says
_JOINT_SHARE = 0.2
_LEAST = 12.0  # text heights that a diagram may measure in any case
_STEP = 1.6  # text heights that short loads measure, so that their letters stand apart
_MOST_SHARE = 1.0  # of the span: how large short loads may make a diagram
BETWEEN = 4.0  # between the parts, in text heights
_MARGIN = 0.1  # of a frame that stays free, both sides together
_LEGIBLE = 8.0  # text heights: a smaller diagram shows nothing
_EPSILON = 1e-9


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Block:
    """Sketches side by side, each the part that its name says; the diagram is the first.

    `width` and `height` are those of all in a row [length].
    """

    diagram: DiagramSketch
    parts: tuple[tuple[str, Sketch], ...]
    width: float
    height: float


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class BlockMaker:
    """Draws the block of one cable at a scale."""

    view: View
    plotting: Plotting
    rounder: Rounder

    def free_standing(self) -> Block:
        """Draw the block at the scale that gives it a size like the elevation's."""
        nodes, h = self.view.formed.nodes, self.view.height
        span = (nodes[-1].x - nodes[0].x) / len(self.view.formed.diagrams)
        usual = max(_SHARE * span, _LEAST * h)
        per_paper = next(self.plotting.force_scales(self._least_scale((usual, usual))))
        if not self.view.is_dense and self._step(per_paper) < _STEP * h:
            # Short loads: the coarsest finer scale at which letters fit, else the finest.
            most = max(_MOST_SHARE * span, usual)
            finer = [per_paper]
            for scale in self.plotting.force_scales(self._least_scale((most, most))):
                if scale >= per_paper:
                    break
                finer.append(scale)
            fitting = [scale for scale in finer if self._step(scale) >= _STEP * h]
            per_paper = max(fitting, default=min(finer))
        return self._block(per_paper, has_joints=True)

    def in_frame(self, width: float, height: float) -> Block | None:
        """Draw the block at the finest usual scale by which it fits, with a margin, in a frame.

        Parameters
        ----------
        width, height : float
            Of the frame [length].

        Returns
        -------
        Block or None
            Without the joints where only the diagram fits; None where not even that does.
        """
        room = (1 - _MARGIN) * width * (1 + _EPSILON), (1 - _MARGIN) * height * (1 + _EPSILON)
        least = self._least_scale(room)
        for has_joints in (True, False):
            scales = self.plotting.force_scales(least)
            for number, per_paper in enumerate(scales):
                if number and self._size(per_paper) < _LEGIBLE * self.view.height:
                    break
                block = self._block(per_paper, has_joints=has_joints)
                if block.width <= room[0] and block.height <= room[1]:
                    return block
        return None

    def joints_only(self, block: Block) -> tuple[tuple[str, Sketch], ...]:
        """Draw the joints that a block in a frame had no room for."""
        drawn = {name for name, _ in block.parts}
        return tuple(part for part in self._joints(None) if part[0] not in drawn)

    def _size(self, per_paper: float) -> float:
        """Give the larger side of the largest diagram [length]."""
        force = max(max(diagram_size(diagram)) for diagram in self.view.formed.diagrams)
        return force / self.plotting.force_per_length(per_paper)

    def _step(self, per_paper: float) -> float:
        """Give the length of a short load on the load line: a quarter of them are shorter."""
        steps = sorted(
            abs(b - a)
            for diagram in self.view.formed.diagrams
            for a, b in _load_steps(diagram)
            if a != b
        )
        force = steps[len(steps) // 4] if steps else math.inf
        return force / self.plotting.force_per_length(per_paper)

    def _least_scale(self, room: tuple[float, float]) -> float:
        """Give the force by paper unit at which the largest diagram just fills a room."""
        sizes = [diagram_size(diagram) for diagram in self.view.formed.diagrams]
        forces = (max(width for width, _ in sizes), max(height for _, height in sizes))
        per_length = max(force / side for force, side in zip(forces, room, strict=True))
        return per_length * self.plotting.on_drawing(1.0)

    def _block(self, per_paper: float, *, has_joints: bool) -> Block:
        diagram = draw_force_polygon(self.view, self.plotting, per_paper, self.rounder)
        name = f"{self.view.prefix}/diagram"
        parts = ((name, diagram.sketch), *(self._joints(per_paper) if has_joints else ()))
        _, width, height = arranged([s for _, s in parts], BETWEEN * self.view.height)
        return Block(diagram=diagram, parts=parts, width=width, height=height)

    def _joints(self, per_paper: float | None) -> tuple[tuple[str, Sketch], ...]:
        """Draw the joints, at the diagram's scale where that suits them."""
        view, h = self.view, self.view.height
        nodes = view.formed.nodes
        room = max(_JOINT_SHARE * (nodes[-1].x - nodes[0].x), _LEAST * h)
        parts = []
        for name, anchorage in view.anchorages:
            size = joint_size(anchorage)
            if size <= 0.0:
                continue
            least = size / room * self.plotting.on_drawing(1.0)
            own = next(self.plotting.force_scales(least))
            suits = per_paper is not None and least <= per_paper <= 2.5 * own
            scale = per_paper if suits and per_paper is not None else own
            sketch = draw_joint(view, name, anchorage, self.plotting, scale, self.rounder)
            parts.append((f"{view.prefix}/joint/{name}", sketch))
        return tuple(parts)


def arranged(sketches: list[Sketch], between: float) -> tuple[tuple[Point, ...], float, float]:
    """Set sketches in a row, tops level.

    Parameters
    ----------
    sketches : list of Sketch
        From left to right.
    between : float
        Room between neighbours [length].

    Returns
    -------
    offsets : tuple of Point
        Origin of each from the row's lower left corner.
    width, height : float
        Of the row.
    """
    bounds = [sketch.bounds() for sketch in sketches]
    height = max(y1 - y0 for _, y0, _, y1 in bounds)
    offsets, x = [], 0.0
    for x0, _, x1, y1 in bounds:
        offsets.append((x - x0, height - y1))
        x += x1 - x0 + between
    return tuple(offsets), x - between, height


def _load_steps(diagram: ForceDiagram) -> list[tuple[float, float]]:
    """Give the ends of each load on the load line, a cable's own weight left out."""
    line = diagram.load_line
    steps = list(pairwise(line))
    return steps[1::2] if len(line) == 2 * len(diagram.letters) else steps
