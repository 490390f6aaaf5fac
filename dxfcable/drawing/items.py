"""What is to be drawn, before it is DXF: plain geometry with a stable id, layer and part.

The painter makes items; `export.py` makes entities of them. A part is what a drafter would
move as one (a diagram, a schedule, one label).
"""

from __future__ import annotations

import enum
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.model import Finding, Point


class Align(enum.StrEnum):
    """Horizontal place of a text's alignment point."""

    LEFT = "left"
    CENTER = "center"
    RIGHT = "right"


class VAlign(enum.StrEnum):
    """Vertical place of a text's alignment point."""

    BASELINE = "baseline"
    BOTTOM = "bottom"
    MIDDLE = "middle"
    TOP = "top"


@dataclass(frozen=True, slots=True, kw_only=True)
class Item:
    """Common to all items.

    Attributes
    ----------
    id : str
        Stable and unique in the drawing, ASCII, e.g. `C1/ray/3`.
    layer : str
        Role of the layer: a key of the settings' `[layers]` from `profile` on.
    part : str
        Movable group, e.g. `C1/diagram`; a lone label's part is its own id.
    """

    id: str
    layer: str
    part: str


@dataclass(frozen=True, slots=True, kw_only=True)
class LineItem(Item):
    """A straight line; `is_chain` draws it long-dashed with short dashes between."""

    start: Point
    end: Point
    is_chain: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class PolylineItem(Item):
    """A polyline without bulges."""

    points: tuple[Point, ...]
    is_closed: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class CircleItem(Item):
    """A circle."""

    center: Point
    radius: float


@dataclass(frozen=True, slots=True, kw_only=True)
class TriangleItem(Item):
    """A filled triangle: arrowheads."""

    points: tuple[Point, Point, Point]


@dataclass(frozen=True, slots=True, kw_only=True)
class TextItem(Item):
    """One line of text, ASCII with %%c, %%d, %%p only; rotation in degrees."""

    text: str
    at: Point
    height: float
    rotation: float = 0.0
    align: Align = Align.LEFT
    valign: VAlign = VAlign.BASELINE


@dataclass(frozen=True, slots=True, kw_only=True)
class PlacedDiagram:
    """Where one force diagram stands in the drawing."""

    cable: int  # position in Solution.cables
    span: int
    pole: Point
    load_line: tuple[Point, ...]
    rays: tuple[Point, ...]  # outer ends
    scale: float  # force per length of drawing


@dataclass(frozen=True, slots=True, kw_only=True)
class Painting:
    """All items of a drawing, and what was decided on the way.

    `origins` gives the place of each part that is more than one item, so that a part moved
    as a whole can be put there again.
    """

    items: tuple[Item, ...]
    diagrams: tuple[PlacedDiagram, ...]
    origins: tuple[tuple[str, Point], ...]
    text_height: float
    plot_scale: float  # denominator, in drawing units per drawing unit on paper
    findings: tuple[Finding, ...] = ()
