"""The framing plan: what each hanger point carries, and the list of loaded areas.

Everything stands on the layer of the tables: it is a table's content, drawn where it applies.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.block_places import FreeGround
from dxfcable.drawing.painting.drawn_ground import DrawnGround
from dxfcable.drawing.painting.free_place import extents, grown
from dxfcable.drawing.painting.naming import id_part
from dxfcable.drawing.painting.plan_labels import PlanLabels, shapes
from dxfcable.drawing.painting.plan_table import DIGITS, cell_name, draw_list, load_words
from dxfcable.drawing.painting.rounding import rounder_for
from dxfcable.drawing.painting.sketch import Sketch
from dxfcable.model import Finding, Severity
from dxfcable.pressures import format_area

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.drawing.excerpt import Obstacles
    from dxfcable.drawing.items import Item
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.plan_labels import Shape
    from dxfcable.drawing.painting.rounding import Rounder
    from dxfcable.drawing.painting.sketch import Bounds
    from dxfcable.model import Layout, PlanArea, PlanCell, Point

_LAYER = "table"
_COLUMN = 6.0  # by which the drawing is sorted, in text heights
_REACH = 2.0  # how far off the list may stand, in sizes of the plan


@dataclass(slots=True, kw_only=True, eq=False)
class PlanView:
    """A framing plan being painted.

    Attributes
    ----------
    layout : Layout
        Areas with their cells.
    views : sequence of View
        The cables, in the layout's order.
    obstacles : Obstacles
        The drafter's drawing.
    held_places : mapping of str to Point
        What a drafter moved.
    items, origins, findings : list
        Painted so far, as in `Painting`.
    """

    layout: Layout
    views: Sequence[View]
    obstacles: Obstacles
    held_places: Mapping[str, Point]
    items: list[Item] = field(default_factory=list)
    origins: list[tuple[str, Point]] = field(default_factory=list)
    findings: list[Finding] = field(default_factory=list)
    _unlabelled: list[tuple[PlanArea, PlanCell]] = field(default_factory=list)

    @property
    def areas(self) -> tuple[PlanArea, ...]:
        """Those that carry something to a point."""
        return tuple(area for area in self.layout.plan if area.cells)

    @property
    def height(self) -> float:
        """Of texts [length]."""
        return self.views[0].height

    def bounds(self) -> Bounds:
        """Give the rectangle about all outlines."""
        points = [p for area in self.areas for p in area.outline]
        xs, ys = [x for x, _ in points], [y for _, y in points]
        return min(xs), min(ys), max(xs), max(ys)

    def paint_cells(self) -> None:
        """Paint outlines of cells and what each carries; cells too small go into the list."""
        if not self.areas:
            return
        height = self.height
        region = grown(self.bounds(), height)
        drawn = DrawnGround(self.obstacles, region, _COLUMN * height)
        labels = PlanLabels(drawn, height)
        rounder = self._rounder()
        # Rounded first: places are decided on numbers that are the same on every machine.
        cells = [
            (area, name, replace(cell, rings=_rounded(cell.rings, rounder)))
            for area in self.areas
            for name, cell in self._named(area)
        ]
        for _, name, cell in cells:
            sketch = Sketch(rounder)
            for k, ring in enumerate(cell.rings, start=1):
                sketch.polyline(f"{name}/outline/{k}", _LAYER, ring, is_closed=True)
            self.items += sketch.items
            labels.add_outline(cell.rings)
        for area, name, cell in cells:
            words = format_area(cell.area, self.layout.length_unit, DIGITS)
            name_shown = cell_name(self.layout, area, cell)
            ways = shapes(name_shown, words, load_words(self.layout, cell.cases))
            if not self._label(name, ways, cell.rings, _middle(cell.rings), labels):
                self._unlabelled.append((area, cell))
        for area in self.areas:
            at = area.value_origin.at if area.value_origin else None
            ways = shapes(f"AREA {area.number}", "", ())
            rings = (area.outline, *area.holes)
            self._label(self._name(area), ways, rings, at or area.outline[0], labels)

    def paint_list(self, painted: Sequence[Item]) -> None:
        """Paint the list of areas below the plan, or where it is free.

        Parameters
        ----------
        painted : sequence of Item
            Everything of ours that stands already.
        """
        if not self.areas:
            return
        name = f"{self.views[0].prefix}/plan/list"
        rounder = self._rounder()
        sketch = draw_list(self.layout, name, self._unlabelled, self.height, rounder)
        x0, y0, x1, y1 = sketch.bounds()
        size = (x1 - x0, y1 - y0)
        plan = self.bounds()
        margin = 3.0 * self.height
        reach = _REACH * max(plan[2] - plan[0], plan[3] - plan[1], *size) + 2.0 * margin
        ground = FreeGround(plan, reach, margin, self.obstacles, extents(self.obstacles))
        ground.add(painted)
        wanted = (plan[0], plan[1] - 2.0 * margin - size[1])
        _, corner, where = ground.place([size], [wanted], [plan], [])
        origin = (corner[0] - x0, corner[1] - y0)
        if name in self.held_places:
            origin, where = self.held_places[name], "where it was moved to"
        origin = rounder.point(origin)
        self.items += sketch.moved(origin, rounder)
        self.origins.append((name, origin))
        text = f"The list of loaded areas stands {where}, at ({origin[0]:.6g}, {origin[1]:.6g})."
        self.findings.append(
            Finding(code="plan-list-placed", severity=Severity.NOTE, text=text, at=origin)
        )

    def _rounder(self) -> Rounder:
        """Make the plan's rounder, the drafter's coordinates verbatim."""
        supports = self.layout.cables[0].supports
        points = [p for area in self.layout.plan for r in (area.outline, *area.holes) for p in r]
        return rounder_for(supports[-1].x - supports[0].x, [v for p in points for v in p])

    def _name(self, area: PlanArea) -> str:
        """Give the first part of an area's ids: under the cable of its first cell."""
        return f"{self.views[area.cells[0].cable].prefix}/plan/{area.number}"

    def _named(self, area: PlanArea) -> list[tuple[str, PlanCell]]:
        """Pair the cells of an area with the first part of their ids, each under its cable."""
        found: dict[str, PlanCell] = {}
        for cell in area.cells:
            stem = f"{self.views[cell.cable].prefix}/plan/{area.number}/{id_part(cell.mark, 'P')}"
            name, k = stem, 1
            while name.casefold() in {known.casefold() for known in found}:
                k += 1
                name = f"{stem}~{k}"
            found[name] = cell
        return list(found.items())

    def _label(
        self,
        name: str,
        ways: Sequence[Shape],
        rings: Sequence[Sequence[Point]],
        wanted: Point,
        labels: PlanLabels,
    ) -> bool:
        """Write a label where it fits; False where it fits nowhere."""
        found = labels.place(ways, rings, wanted)
        if found is None:
            return False
        shape, middle = found
        rounder = self._rounder()
        part = f"{name}/label"
        origin = rounder.point(self.held_places.get(part, middle))
        sketch = Sketch(rounder, part)
        for k, (line, at) in enumerate(
            zip(shape.lines, shape.places(self.height), strict=True), start=1
        ):
            sketch.text(
                f"{part}/{k}",
                _LAYER,
                line,
                at,
                self.height,
                align=Align.CENTER,
                rotation=90.0 if shape.is_turned else 0.0,
            )
        self.items += sketch.moved(origin, rounder)
        self.origins.append((part, origin))
        return True


def _middle(rings: Sequence[Sequence[Point]]) -> Point:
    """Give the middle of the rectangle about some rings."""
    xs, ys = zip(*(point for ring in rings for point in ring), strict=True)
    return 0.5 * (min(xs) + max(xs)), 0.5 * (min(ys) + max(ys))


def _rounded(rings: Sequence[Sequence[Point]], rounder: Rounder) -> tuple[tuple[Point, ...], ...]:
    """Give rings with their coordinates rounded."""
    return tuple(tuple(rounder.point(point) for point in ring) for ring in rings)
