"""Composes sheets: elevation and force diagram first, all else where there is room, the rest on.

A cell is the room of one cable on a sheet. What finds no place there goes on to further sheets.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.drawing.sheeting.diagram_blocks import DiagramMaker
from dxfcable.drawing.sheeting.elevation_block import ElevationMaker
from dxfcable.drawing.sheeting.packing import FreeRoom
from dxfcable.drawing.sheeting.paper_view import ROUNDER, per_unit
from dxfcable.drawing.sheeting.ruled_table import RuledTable, table_sketch
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
    from dxfcable.drawing.sheeting.elevation_block import ElevationBlock
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.model import CableRevisions

_BELOW = 0.62  # of a cell's height that an elevation over its diagram may have
_BESIDE = 0.66  # of a cell's width that an elevation beside its diagram may have
_DIAGRAMS = (0.76, 0.55)  # of a cell's width that a diagram below may have
_MOST_DIAGRAM = 120.0  # text heights that a diagram of one span measures at most
_LONG = 24  # rows from which a table may be continued elsewhere
_PART = 15  # rows that it shows at least beside other things
_SMALL = 45.0  # text heights: an elevation that is less wide may have a sheet for itself
_MUCH_FINER = 2.0  # if it is so much larger there
_MOST_STRETCH = (1.25, 1.5)  # across, down


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class DiagramWanted:
    """A force diagram that found no room beside its elevation."""

    maker: DiagramMaker


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Drawing:
    """A block of fixed size."""

    sketch: Sketch


Wanted = DiagramWanted | Drawing | RuledTable


@dataclass(slots=True, kw_only=True, eq=False)
class Cell:
    """What stands in a room of a sheet, what is free of it, and what is still wanted.

    Attributes
    ----------
    scale : float or None
        Of the elevation.
    per_paper : float
        Scale of the diagram: force by paper unit.
    is_beside : bool
        Whether it stands beside the elevation.
    """

    region: Bounds
    free: FreeRoom
    placed: list[tuple[Sketch, Bounds]] = field(default_factory=list)
    wanted: list[Wanted] = field(default_factory=list)
    scale: float | None = None
    per_paper: float = math.inf
    is_beside: bool = False

    def put(self, sketch: Sketch, x: float, top: float) -> Bounds:
        """Put a sketch with its upper left corner at a place, and take its room."""
        a, b, c, d = sketch.bounds()
        box = (x, top - (d - b), x + (c - a), top)
        self.placed.append((sketch, box))
        self.free.take(box)
        return box

    @property
    def is_empty(self) -> bool:
        """Whether nothing was put yet."""
        return not self.placed

    def items(self) -> list[Item]:
        """Give what was put, spread over the room: what was level or in line stays so."""
        x0, _, _, y1 = self.region
        across, down = self._stretch()
        items: list[Item] = []
        for sketch, (left, _, _, top) in self.placed:
            a, _, _, d = sketch.bounds()
            at = (x0 + across * (left - x0) - a, y1 - down * (y1 - top) - d)
            items += sketch.moved(ROUNDER.point(at), ROUNDER)
        return items

    def _stretch(self) -> tuple[float, float]:
        """Give the factors by which the upper left corners move apart from the room's.

        Corners that move apart leave no two blocks nearer to each other than before.
        """
        x0, y0, x1, y1 = self.region
        across, down = _MOST_STRETCH
        for _, (left, bottom, right, top) in self.placed:
            if left - x0 > 1e-6:
                across = min(across, (x1 - x0 - (right - left)) / (left - x0))
            if y1 - top > 1e-6:
                down = min(down, (y1 - y0 - (top - bottom)) / (y1 - top))
        return max(1.0, across), max(1.0, down)

    def settle(self) -> bool:
        """Put what is wanted where there is room; tell whether anything was put."""
        rest: list[Wanted] = []
        has_put = False
        for wanted in self.wanted:
            left = self._settle(wanted)
            has_put |= left is not wanted
            if left is not None:
                rest.append(left)
        self.wanted = rest
        return has_put

    def _settle(self, wanted: Wanted) -> Wanted | None:
        if isinstance(wanted, DiagramWanted):
            return self._settle_diagram(wanted)
        if isinstance(wanted, Drawing):
            a, b, c, d = wanted.sketch.bounds()
            room = self.free.find(c - a, d - b)
            if room is None:
                return wanted
            self.put(wanted.sketch, room[0], room[3])
            return None
        return self._settle_table(wanted)

    def _settle_diagram(self, wanted: DiagramWanted) -> Wanted | None:
        most = _MOST_DIAGRAM * wanted.maker.paper.text
        for room in sorted(self.free.rooms, key=lambda r: -(r[2] - r[0]) * (r[3] - r[1])):
            drawn = wanted.maker.fitting(room[2] - room[0], room[3] - room[1], most)
            if drawn is not None:
                self.put(drawn[0], room[0], room[3])
                return None
        return wanted

    def _settle_table(self, table: RuledTable) -> Wanted | None:
        """Put a table whole where it fits, a long one run by run from the highest room on."""
        room = self.free.find(*table.size)
        if room is not None:
            self.put(table_sketch(table), room[0], room[3])
            return None
        if table.count < _LONG and not self.is_empty:
            return table  # whole on the next sheet rather than in two pieces
        least = 1 if self.is_empty else _PART
        rest: RuledTable | None = table
        for room in self.free.by_place():
            if rest is None or rest.size[0] > room[2] - room[0] + 1e-6:
                continue
            part, other = rest.fitting(room[3] - room[1], least)
            if part is not None and room in self.free.rooms:
                self.put(table_sketch(part), room[0], room[3])
                rest = other
        return rest


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
    """

    view: View
    paper: Paper
    temperature: str
    plot_scale: float | None = None
    revisions: CableRevisions | None = None
    fabrication: Fabrication = field(default_factory=Fabrication)

    def cell(self, region: Bounds) -> Cell | None:
        """Draw elevation and diagram into a room; None where not even the elevation fits.

        The finest usual scale of the elevation decides, then whether all else finds room, then
        the size of the diagram, which stands beside the elevation or below it.
        """
        width, height = region[2] - region[0], region[3] - region[1]
        maker = ElevationMaker(
            view=self.view,
            paper=self.paper,
            temperature=self.temperature,
            revisions=self.revisions,
        )
        beside = maker.fitting(_BESIDE * width, height, self.plot_scale)
        below = maker.fitting(width, _BELOW * height, self.plot_scale)
        found = [
            cell
            for block, shares in ((beside, (0.0,)), (below, _DIAGRAMS))
            if block is not None
            for share in shares
            if (cell := self._with_diagram(region, block, share)) is not None
        ]
        for cell in found:
            cell.settle()
        best = min(found, key=_rank, default=None)
        if best is not None and self._span(best) >= _SMALL * self.paper.text:
            return best
        alone = maker.fitting(width, height, self.plot_scale)
        if alone is not None and (best is None or _MUCH_FINER * alone.scale <= _scale(best)):
            best = self._alone(region, alone)
        return best

    def _span(self, cell: Cell) -> float:
        """Give the width of the cable as drawn [mm]."""
        nodes = self.view.formed.nodes
        unit = self.view.wording.length_unit
        return (nodes[-1].x - nodes[0].x) * per_unit(_scale(cell), unit)

    def _start(self, region: Bounds, block: ElevationBlock) -> tuple[Cell, Bounds]:
        cell = Cell(region=region, free=FreeRoom(region, self.paper.gap), scale=block.scale)
        return cell, cell.put(block.sketch, region[0], region[3])

    def _with_diagram(self, region: Bounds, block: ElevationBlock, share: float) -> Cell | None:
        """Put the diagram below an elevation, with a share of 0 beside it; None if too small."""
        x0, y0, x1, y1 = region
        cell, box = self._start(region, block)
        gap = self.paper.gap
        if share == 0.0:
            room = (box[2] + gap, y0, x1, y1)
        else:
            room = (x0, y0, x0 + share * (x1 - x0), box[1] - gap)
        most = _MOST_DIAGRAM * self.paper.text
        maker = DiagramMaker(view=self.view, paper=self.paper, form_scale=block.scale)
        size = (room[2] - room[0], room[3] - room[1])
        drawn = maker.fitting(*size, most) if min(size) > 0 else None
        if drawn is None:
            return None
        cell.put(drawn[0], room[0], room[3])
        cell.per_paper, cell.is_beside = drawn[1], share == 0.0
        cell.wanted += self._rest(maker, block)
        return cell

    def _alone(self, region: Bounds, block: ElevationBlock) -> Cell:
        """Leave the diagram to wherever there is room."""
        cell, _ = self._start(region, block)
        maker = DiagramMaker(view=self.view, paper=self.paper, form_scale=block.scale)
        cell.wanted += [DiagramWanted(maker=maker), *self._rest(maker, block)]
        return cell

    def _rest(self, maker: DiagramMaker, block: ElevationBlock) -> list[Wanted]:
        """List joints and schedules."""
        schedules = [
            *cable_schedules(
                self.view, self.temperature, self.fabrication, has_places=block.has_places
            ),
            *change_schedules(self.view, self.revisions),
            *state_schedules(self.view),
        ]
        joints = [Drawing(sketch=sketch) for sketch in maker.joints()]
        return [*joints, *ruled(schedules, f"{self.view.prefix}/schedule", self.paper)]


def _scale(cell: Cell) -> float:
    return cell.scale or 0.0


def _rank(cell: Cell) -> tuple[float, bool, float]:
    """Rank a composition: its elevation, whether all finds room, whether its diagram is small.

    The diagram beside the elevation comes first, and stays unless it is half as large there.
    """
    share = 0.51 if cell.is_beside else 1.0
    return _scale(cell), bool(cell.wanted), share * cell.per_paper


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


def continued(wanted: Sequence[Wanted], region: Bounds, paper: Paper) -> Cell:
    """Start a further sheet with what is still wanted.

    Raises
    ------
    DxfcableError
        With code `sheet-small`, where none of it fits even an empty sheet.
    """
    cell = Cell(region=region, free=FreeRoom(region, paper.gap), wanted=list(wanted))
    if not cell.settle():
        message = f"the diagrams and schedules do not fit a sheet {paper.name}"
        raise DxfcableError(message, code="sheet-small", remedy="Give a larger --size.")
    return cell
