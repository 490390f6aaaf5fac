"""Composes sheets: the views first, schedules in columns about them, the rest on further sheets.

A cell is the room of one cable on a sheet. What finds no place there goes on to further sheets.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.drawing.sheeting.blocks import DiagramWanted, Drawing, sketch_of
from dxfcable.drawing.sheeting.cable_composing import Composer
from dxfcable.drawing.sheeting.columns import Room, fill
from dxfcable.drawing.sheeting.diagram_blocks import MOST_DIAGRAM, DiagramMaker
from dxfcable.drawing.sheeting.elevation_block import ElevationMaker
from dxfcable.drawing.sheeting.paper_view import ROUNDER, per_unit
from dxfcable.drawing.sheeting.ruling import ruled
from dxfcable.drawing.sheeting.schedules import (
    Fabrication,
    cable_schedules,
    change_schedules,
)
from dxfcable.drawing.sheeting.state_schedules import state_schedules
from dxfcable.errors import DxfcableError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.items import Item
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.sketch import Bounds, Sketch
    from dxfcable.drawing.sheeting.blocks import Block, Wanted
    from dxfcable.drawing.sheeting.columns import Filling
    from dxfcable.drawing.sheeting.elevation_block import ElevationBlock
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.model import CableRevisions

_BELOW = 0.62  # of a cell's height that an elevation over its diagram may have
_BESIDE = 0.66  # of a cell's width that an elevation beside its diagram may have
_COARSER = 2.01  # than the finest scale that fits: so much, if then all finds room
_SMALL = 45.0  # text heights: an elevation that is less wide may have a sheet for itself
_MUCH_FINER = 2.0  # if it is so much larger there


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Cell:
    """What stands in a room of a sheet, and what is still wanted.

    Attributes
    ----------
    placed : tuple of (Sketch, tuple of float)
        With the boxes that they take.
    wanted : tuple of Wanted
    scale : float or None
        Of the elevation.
    """

    placed: tuple[tuple[Sketch, Bounds], ...]
    wanted: tuple[Wanted, ...] = ()
    scale: float | None = None

    def items(self) -> list[Item]:
        """Give what was put."""
        items: list[Item] = []
        for sketch, (left, _, _, top) in self.placed:
            a, _, _, d = sketch.bounds()
            items += sketch.moved(ROUNDER.point((left - a, top - d)), ROUNDER)
        return items


def _drawn(filling: Filling) -> list[tuple[Sketch, Bounds]]:
    """Draw what was put in columns."""
    return [(sketch_of(block), box) for block, box in filling.placed]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class CableSheet:
    """What is needed to draw one cable.

    Attributes
    ----------
    view : View
        In drawing units.
    paper : Paper
    temperature : str
        Reference temperature, or "".
    plot_scale : float or None
        Scale of the elevation to try first.
    revisions : CableRevisions or None
    fabrication : Fabrication
        What schedules say beyond the state shown.
    further : tuple of Block
        What is to stand on its sheets beside.
    """

    view: View
    paper: Paper
    temperature: str
    plot_scale: float | None = None
    revisions: CableRevisions | None = None
    fabrication: Fabrication = field(default_factory=Fabrication)
    further: tuple[Block, ...] = ()

    def cell(self, region: Bounds) -> Cell | None:
        """Draw elevation and diagram into a room; None where not even the elevation fits.

        The elevation has the finest usual scale that fits, or one up to half as fine if then
        all else finds room; where the office asks for a scale, there is no other.
        """
        width, height = region[2] - region[0], region[3] - region[1]
        maker = ElevationMaker(
            view=self.view,
            paper=self.paper,
            temperature=self.temperature,
            revisions=self.revisions,
        )
        rooms = ((_BESIDE * width, height), (width, _BELOW * height))
        best: Cell | None = None
        finest = 0.0
        for block in maker.fittings(rooms, self.plot_scale):
            finest = finest or block.scale
            is_small = self._span(block) < _SMALL * self.paper.text
            if block.scale > _COARSER * finest or (best is not None and is_small):
                break
            cell = self._composed(region, block)
            if cell is not None and (best is None or not cell.wanted):
                best = cell
            if best is not None and not (best.wanted and self._may_help(block, region)):
                break
        if best is not None and finest and not is_small:
            return best
        alone = next(maker.fittings(((width, height),), self.plot_scale), None)
        if alone is not None and (best is None or _is_much_finer(alone, best)):
            best = self._alone(region, alone)
        return best

    def _may_help(self, block: ElevationBlock, region: Bounds) -> bool:
        """Tell whether all may find room about a coarser elevation than one that leaves some."""
        if self.plot_scale is not None:
            return False
        x0, y0, x1, y1 = region
        least = Drawing(sketch=block.sketch).area / _COARSER**2
        schedules = sum(each.area for each in self._schedules(block))
        return least + schedules <= (x1 - x0) * (y1 - y0)

    def _span(self, block: ElevationBlock) -> float:
        """Give the width of the cable as drawn [mm]."""
        nodes = self.view.formed.nodes
        unit = self.view.wording.length_unit
        return (nodes[-1].x - nodes[0].x) * per_unit(block.scale, unit)

    def _composed(self, region: Bounds, block: ElevationBlock) -> Cell | None:
        """Compose an elevation with all else; None where not even a diagram has room."""
        diagrams = DiagramMaker(view=self.view, paper=self.paper, form_scale=block.scale)
        composer = Composer(
            region=region,
            paper=self.paper,
            elevation=Drawing(sketch=block.sketch),
            diagrams=diagrams,
            joints=tuple(Drawing(sketch=sketch) for sketch in diagrams.joints()),
            schedules=self._schedules(block),
        )
        found = composer.best()
        if found is None:
            return None
        views = [(view.sketch, box) for view, box in found.views]
        placed = (*views, *_drawn(found.filling))
        return Cell(placed=placed, wanted=found.filling.rest, scale=block.scale)

    def _alone(self, region: Bounds, block: ElevationBlock) -> Cell:
        """Leave the diagram to a further sheet."""
        maker = DiagramMaker(view=self.view, paper=self.paper, form_scale=block.scale)
        x0, _, _, y1 = region
        width, height = Drawing(sketch=block.sketch).size
        box = (x0, y1 - height, x0 + width, y1)
        joints = [Drawing(sketch=sketch) for sketch in maker.joints()]
        room = Room(region=region, taken=(box,), gap=self.paper.gap, in_order=False)
        filling = fill((*joints, *self._schedules(block)), room)
        return Cell(
            placed=((block.sketch, box), *_drawn(filling)),
            wanted=(DiagramWanted(maker=maker), *filling.rest),
            scale=block.scale,
        )

    def _schedules(self, block: ElevationBlock) -> tuple[Block, ...]:
        """List schedules, and what is to stand beside."""
        schedules = [
            *cable_schedules(
                self.view, self.temperature, self.fabrication, has_places=block.has_places
            ),
            *state_schedules(self.view),
            *change_schedules(self.view, self.revisions),
        ]
        tables = ruled(schedules, f"{self.view.prefix}/schedule", self.paper)
        return (*tables, *self.further)


def _is_much_finer(block: ElevationBlock, cell: Cell) -> bool:
    return cell.scale is not None and _MUCH_FINER * block.scale <= cell.scale


def cells_of(region: Bounds, count: int, gap: float) -> list[Bounds]:
    """Divide a room for several cables: one over the other, from four on in two columns."""
    x0, y0, x1, y1 = region
    columns = 1 if count <= 3 else 2
    rows = -(-count // columns)
    wide = (x1 - x0 - gap * (columns - 1)) / columns
    high = (y1 - y0 - gap * (rows - 1)) / rows
    return [
        (
            x0 + (k % columns) * (wide + gap),
            y1 - (k // columns + 1) * high - (k // columns) * gap,
            x0 + (k % columns) * (wide + gap) + wide,
            y1 - (k // columns) * (high + gap),
        )
        for k in range(count)
    ]


def continued(wanted: Sequence[Wanted], region: Bounds, paper: Paper, *, in_order: bool) -> Cell:
    """Start a further sheet with what is still wanted.

    Parameters
    ----------
    wanted : sequence of Wanted
    region : tuple of float
        Left, bottom, right, top [mm].
    paper : Paper
    in_order : bool
        Schedules keep their order, else a later one may use what is free.

    Returns
    -------
    Cell

    Raises
    ------
    DxfcableError
        With code `sheet-small`, where none of it fits even an empty sheet.
    """
    x0, y0, x1, y1 = region
    views: list[tuple[Sketch, Bounds]] = []
    left: list[Wanted] = []
    blocks: list[Block] = []
    for each in wanted:
        if not isinstance(each, DiagramWanted):
            blocks.append(each)
            continue
        drawn = each.maker.fitting(x1 - x0, y1 - y0, MOST_DIAGRAM * paper.text)
        if drawn is None or views:
            left.append(each)
            continue
        width, height = drawn.size
        views.append((drawn.sketch, (x0, y1 - height, x0 + width, y1)))
    taken = tuple(box for _, box in views)
    filling = fill(blocks, Room(region=region, taken=taken, gap=paper.gap, in_order=in_order))
    placed = (*views, *_drawn(filling))
    if not placed:
        message = f"the diagrams and schedules do not fit a sheet {paper.name}"
        raise DxfcableError(message, code="sheet-small", remedy="Give a larger --size.")
    return Cell(placed=placed, wanted=(*left, *filling.rest))
