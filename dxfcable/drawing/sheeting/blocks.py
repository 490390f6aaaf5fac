"""What stands on a sheet in a place of its own: views and other drawings, tables, with sizes."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

from dxfcable.drawing.sheeting.ruled_table import RuledTable, table_sketch

if TYPE_CHECKING:
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.drawing.sheeting.diagram_blocks import DiagramMaker


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class DiagramWanted:
    """A force diagram that found no room beside its elevation."""

    maker: DiagramMaker


@dataclass(frozen=True, kw_only=True, eq=False)
class Drawing:
    """A block of fixed size; those of one `chain`, if it has any, stand in their order."""

    sketch: Sketch
    chain: str = ""

    @cached_property
    def size(self) -> tuple[float, float]:
        """Width and height [mm]."""
        a, b, c, d = self.sketch.bounds()
        return c - a, d - b

    @property
    def area(self) -> float:
        """Area [mm2]."""
        return self.size[0] * self.size[1]


Block = Drawing | RuledTable
Wanted = DiagramWanted | Block


def sketch_of(block: Block) -> Sketch:
    """Draw a block."""
    return block.sketch if isinstance(block, Drawing) else table_sketch(block)
