"""From Layout and Solution to items: elevation, labels, force diagram, joints, schedule.

Nothing here computes a force. Places are decided on rounded numbers and in a fixed order.
"""

from __future__ import annotations

import itertools
from collections import Counter
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Painting, PlacedDiagram
from dxfcable.drawing.painting.arrows import plan_arrows
from dxfcable.drawing.painting.block_places import BlockPlaces
from dxfcable.drawing.painting.clearance_view import draw_clearance, draw_clearance_row
from dxfcable.drawing.painting.diagram_block import BETWEEN, BlockMaker, arranged
from dxfcable.drawing.painting.drawn_ground import DrawnGround
from dxfcable.drawing.painting.elevation_labels import clear_above, elevation_labels
from dxfcable.drawing.painting.elevation_view import (
    View,
    draw_elevation,
    draw_span_dimensions,
    extent,
)
from dxfcable.drawing.painting.free_place import grown
from dxfcable.drawing.painting.label_ground import LabelGround
from dxfcable.drawing.painting.label_placing import Group, put_labels
from dxfcable.drawing.painting.plan_view import PlanView
from dxfcable.drawing.painting.plotting import plan_plotting
from dxfcable.drawing.painting.revision_table import draw_revisions
from dxfcable.drawing.painting.revision_tags import draw_tags
from dxfcable.drawing.painting.revision_view import draw_old_profile, revision_labels
from dxfcable.drawing.painting.schedule_text import arrangements, draw_schedule
from dxfcable.drawing.painting.sketch import Sketch
from dxfcable.drawing.painting.views import join_views, rounder_of
from dxfcable.model import Finding, Severity

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

    from dxfcable.drawing.excerpt import Obstacles
    from dxfcable.drawing.items import Item
    from dxfcable.drawing.painting.diagram_block import Block
    from dxfcable.drawing.painting.plotting import Plotting
    from dxfcable.drawing.painting.rounding import Rounder
    from dxfcable.drawing.painting.schedule_text import Arrangement
    from dxfcable.model import Layout, Point, Rectangle, Solution
    from dxfcable.settings import Settings

_MARGIN = 3.0  # kept free about a block, in text heights
_ROUND = 25.0  # drawing about an elevation that its labels look at, in text heights
_COLUMN = 6.0  # by which the drawing is sorted for its labels, in text heights


def paint(
    layout: Layout,
    solution: Solution,
    *,
    obstacles: Obstacles,
    settings: Settings,
    plot_scale: str | None,
    held_places: Mapping[str, Point],
) -> Painting:
    """Paint all cables of a drawing.

    Parameters
    ----------
    layout, solution : Layout, Solution
        What is drawn, what follows; cables in the same order.
    obstacles : Obstacles
        The drafter's drawing.
    settings : Settings
        Text heights and plotting scale.
    plot_scale : str or None
        As given on the command line.
    held_places : mapping of str to Point
        Id of a label, or a part, to the place that a drafter gave it: its alignment point, or
        the part's origin as `Painting.origins` names it.

    Returns
    -------
    Painting

    Raises
    ------
    ValueError
        If layout and solution do not have the same cables.
    QuantityError
        If the plotting scale told is none.
    """
    plotting = _planned(layout, solution, settings, plot_scale)
    painter = _Painter(
        layout=layout,
        obstacles=obstacles,
        places=BlockPlaces(obstacles, _MARGIN * plotting.text_height),
        plotting=plotting,
        held_places=held_places,
    )
    views = join_views(layout, solution, settings, plotting.text_height)
    painter.paint_elevations(views)
    plan = PlanView(
        layout=layout,
        views=views,
        obstacles=obstacles,
        held_places=held_places,
    )
    plan.paint_cells()
    painter.places.add_items(plan.items)
    for index, view in enumerate(views):
        shapes = arrangements(view, settings.show.reference_temperature)
        painter.places.prepare(view.prefix, [(shape.width, shape.height) for shape in shapes])
        painter.paint_diagram(index, view)
        painter.paint_schedule(view, shapes)
        painter.paint_revisions(view)
    plan.paint_list((*painter.items, *plan.items))
    items = (*painter.items, *plan.items)
    _check_ids(items)
    return Painting(
        items=items,
        diagrams=tuple(painter.diagrams),
        origins=(*painter.origins, *plan.origins),
        text_height=plotting.text_height,
        plot_scale=plotting.scale,
        findings=(plotting.finding, *painter.findings, *plan.findings),
    )


def _planned(
    layout: Layout, solution: Solution, settings: Settings, plot_scale: str | None
) -> Plotting:
    """Plan the plotting by the greatest span and the size of the largest elevation."""
    spans = [cable.supports[-1].x - cable.supports[0].x for cable in layout.cables]
    if not spans:
        message = "there is no cable to paint"
        raise ValueError(message)
    greatest = max(
        b.x - a.x for cable in layout.cables for a, b in itertools.pairwise(cable.supports)
    )
    heights = [max(n.y for n in c.nodes) - min(n.y for n in c.nodes) for c in solution.cables]
    size = (max(spans), max(heights))
    return plan_plotting(layout, settings, plot_scale, span=greatest, size=size)


def _check_ids(items: Iterable[Item]) -> None:
    """Two items of one id would be one entity to the ledger: a fault of ours."""
    doubled = [name for name, count in Counter(item.id for item in items).items() if count > 1]
    if doubled:
        message = f"ids are not unique: {', '.join(doubled)}"
        raise ValueError(message)


@dataclass(slots=True, kw_only=True, eq=False)
class _Painter:
    """Items painted so far, and where blocks stand."""

    layout: Layout
    obstacles: Obstacles
    places: BlockPlaces
    plotting: Plotting
    held_places: Mapping[str, Point]
    items: list[Item] = field(default_factory=list)
    diagrams: list[PlacedDiagram] = field(default_factory=list)
    origins: list[tuple[str, Point]] = field(default_factory=list)
    findings: list[Finding] = field(default_factory=list)

    def paint_elevations(self, views: tuple[View, ...]) -> None:
        """Paint the linework of all cables, then their labels clear of all of it."""
        ground = LabelGround(self.plotting.text_height)
        groups = []
        for view in views:
            sketch = Sketch(rounder_of(view.cable))
            region = grown(extent(view), _ROUND * view.height)
            drawn = DrawnGround(self.obstacles, region, _COLUMN * view.height)
            arrows = plan_arrows(view, drawn)
            draw_elevation(view, sketch, arrows)
            draw_old_profile(view, sketch)
            level = draw_span_dimensions(view, sketch, drawn, clear_above(view, arrows))
            clearance = draw_clearance(view, sketch, drawn)
            ground.add(sketch.items)
            labels = (*clearance, *elevation_labels(view, level, arrows), *revision_labels(view))
            groups.append(Group(labels=labels, sketch=sketch, drawn=drawn))
        put_labels(groups, ground, self.held_places)
        for view, group in zip(views, groups, strict=True):
            sketch = group.sketch
            self.origins += draw_tags(view, sketch)
            self.origins += draw_clearance_row(view, sketch)
            self.items += sketch.items
            self.places.add_view(view.prefix, sketch.bounds(), view.cable.frame, sketch.items)

    def paint_diagram(self, index: int, view: View) -> None:
        """Paint force diagram and joints: in the frame, else where it is free."""
        rounder = rounder_of(view.cable)
        maker = BlockMaker(view=view, plotting=self.plotting, rounder=rounder)
        if view.cable.frame is not None and self._paint_in_frame(
            index, view, maker, view.cable.frame
        ):
            return
        block = maker.free_standing()
        free = [sketch for name, sketch in block.parts if name not in self.held_places]
        corner, where = (0.0, 0.0), ""
        if free:
            _, width, height = arranged(free, BETWEEN * view.height)
            x0, y0, _, _ = self.places.bounds[view.prefix]
            wanted = (x0, y0 - _MARGIN * view.height - height)
            _, corner, where = self.places.find(view.prefix, [(width, height)], [wanted])
        self._stand(index, view, block, rounder, corner, where)

    def _paint_in_frame(self, index: int, view: View, maker: BlockMaker, frame: Rectangle) -> bool:
        """Paint the block in the middle of the frame; False, with a note, if it is too small."""
        block = maker.in_frame(frame.x1 - frame.x0, frame.y1 - frame.y0)
        if block is None:
            self._note(
                "frame-small",
                view,
                "the frame is too small for the force diagram at this plotting scale",
                (frame.x0, frame.y0),
                "Draw a larger frame, or plot at a larger scale, as 1:50 for 1:100.",
            )
            return False
        corner = (
            0.5 * (frame.x0 + frame.x1 - block.width),
            0.5 * (frame.y0 + frame.y1 - block.height),
        )
        rounder = maker.rounder
        self._stand(index, view, block, rounder, corner, "in the frame drawn")
        self.places.add_block(view.prefix, (frame.x0, frame.y0, frame.x1, frame.y1), ())
        for name, sketch in maker.joints_only(block):
            self._paint_joint(view, name, sketch, rounder)
        return True

    def _paint_joint(self, view: View, name: str, sketch: Sketch, rounder: Rounder) -> None:
        """Paint a joint that stands by itself, beside what was painted last."""
        x0, y0, x1, y1 = sketch.bounds()
        origin, where = self._held(name, rounder)
        if origin is None:
            size = (x1 - x0, y1 - y0)
            _, corner, where = self.places.find(
                view.prefix, [size], [self.places.beside(view.prefix, size)]
            )
            origin = rounder.point((corner[0] - x0, corner[1] - y0))
        self._add_part(view, name, sketch, origin, rounder)
        self._note("joint-placed", view, f"the joint stands {where}", origin)

    def paint_schedule(self, view: View, shapes: list[Arrangement]) -> None:
        """Paint the schedule right of the diagram, or where it is free, in the shape that fits."""
        rounder = rounder_of(view.cable)
        name = f"{view.prefix}/schedule"
        sizes = [(shape.width, shape.height) for shape in shapes]
        # The shape does not depend on whether a drafter moved the schedule.
        chosen, (x, y), where = self.places.find(
            view.prefix, sizes, [self.places.beside(view.prefix, size) for size in sizes]
        )
        sketch = draw_schedule(view, shapes[chosen], rounder)
        origin, held = self._held(name, rounder)
        if origin is None:
            origin, held = rounder.point((x, y + shapes[chosen].height)), where
        self._add_part(view, name, sketch, origin, rounder)
        self._note("schedule-placed", view, f"the schedule stands {held}", origin)

    def paint_revisions(self, view: View) -> None:
        """Paint the rows of revision below the schedule, or where it is free."""
        if view.revisions is None:
            return
        rounder = rounder_of(view.cable)
        name = f"{view.prefix}/revisions"
        sketch = draw_revisions(view, view.revisions, rounder)
        x0, y0, x1, y1 = sketch.bounds()
        size = (x1 - x0, y1 - y0)
        origin, where = self._held(name, rounder)
        if origin is None:
            _, corner, where = self.places.find(
                view.prefix, [size], [self.places.below(view.prefix, size)]
            )
            origin = rounder.point((corner[0] - x0, corner[1] - y0))
        self._add_part(view, name, sketch, origin, rounder)
        self._note("revisions-placed", view, f"the revisions stand {where}", origin)

    def _held(self, name: str, rounder: Rounder) -> tuple[Point | None, str]:
        """Give the origin that a drafter gave a part, None if he did not."""
        if name not in self.held_places:
            return None, ""
        return rounder.point(self.held_places[name]), "where it was moved to"

    def _stand(
        self,
        index: int,
        view: View,
        block: Block,
        rounder: Rounder,
        corner: Point,
        where: str,
    ) -> None:
        """Put a block's parts in a row from a corner on; a held part goes where it is held."""
        free = [part for part in block.parts if part[0] not in self.held_places]
        offsets: tuple[Point, ...] = ()
        if free:
            offsets, _, _ = arranged([sketch for _, sketch in free], BETWEEN * view.height)
        origins = {
            name: rounder.point((corner[0] + dx, corner[1] + dy))
            for (name, _), (dx, dy) in zip(free, offsets, strict=True)
        }
        before = len(self.places.blocks[view.prefix])
        for name, sketch in block.parts:
            origin = origins.get(name) or rounder.point(self.held_places[name])
            self._add_part(view, name, sketch, origin, rounder)
        diagram_name = block.parts[0][0]
        origin = dict(self.origins)[diagram_name]
        self._record_diagrams(index, block, origin, rounder)
        self.places.join_blocks(view.prefix, before)
        stands = "where it was moved to" if diagram_name in self.held_places else where
        self._note("diagram-placed", view, f"the force diagram stands {stands}", origin)

    def _record_diagrams(self, index: int, block: Block, origin: Point, rounder: Rounder) -> None:
        def there(point: Point) -> Point:
            return rounder.point((point[0] + origin[0], point[1] + origin[1]))

        for span, geometry in enumerate(block.diagram.spans):
            self.diagrams.append(
                PlacedDiagram(
                    cable=index,
                    span=span,
                    pole=there(geometry.pole),
                    load_line=tuple(there(p) for p in geometry.load_line),
                    rays=tuple(there(p) for p in geometry.rays),
                    scale=block.diagram.scale,
                )
            )

    def _add_part(
        self, view: View, name: str, sketch: Sketch, origin: Point, rounder: Rounder
    ) -> None:
        items = sketch.moved(origin, rounder)
        self.items += items
        self.origins.append((name, origin))
        x0, y0, x1, y1 = sketch.bounds()
        bounds = (x0 + origin[0], y0 + origin[1], x1 + origin[0], y1 + origin[1])
        self.places.add_block(view.prefix, bounds, items)

    def _note(self, code: str, view: View, what: str, at: Point, remedy: str = "") -> None:
        """Add a note with the place of what it tells."""
        text = f"Cable {view.formed.mark}: {what}, at ({at[0]:.6g}, {at[1]:.6g})."
        self.findings.append(
            Finding(
                code=code,
                severity=Severity.NOTE,
                text=text,
                remedy=remedy,
                cable=view.formed.mark,
                at=at,
            )
        )
