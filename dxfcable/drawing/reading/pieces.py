"""What is on our layers as plain values: kind, role, points in world coordinates, text."""

from __future__ import annotations

import enum
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable

    from dxfcable.model import Origin, Point


class Kind(enum.StrEnum):
    """How a piece is read."""

    POINT = "point"
    CIRCLE = "circle"
    LINE = "line"
    POLYLINE = "polyline"
    LEADER = "leader"
    TEXT = "text"
    BLOCK = "block"
    DIMENSION = "dimension"
    SYMBOL = "symbol"  # hatches and fills
    OTHER = "other"


@dataclass(frozen=True, slots=True, kw_only=True)
class Attribute:
    """One attribute of a block: its tag in capitals, its text without blanks at the ends."""

    tag: str
    text: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Piece:
    """One entity on a layer of ours, blocks resolved.

    Attributes
    ----------
    role : str
        A key of the settings' `[layers]`.
    points : tuple of Point
        Position, or vertices in the order drawn; empty for symbols and others.
    z : tuple of float
        The third coordinate of each.
    size : float
        Radius of a circle, height of a text, else 0.
    text : str
        Plain text, or a dimension's override.
    block : str
        Name of a block, the true one of a dynamic block.
    measured : float
        What a dimension measures.
    """

    kind: Kind
    role: str
    origin: Origin
    points: tuple[Point, ...] = ()
    z: tuple[float, ...] = ()
    is_closed: bool = False
    size: float = 0.0
    text: str = ""
    block: str = ""
    attributes: tuple[Attribute, ...] = ()
    measured: float = 0.0

    @property
    def at(self) -> Point:
        """First point."""
        return self.points[0]

    def under_role(self, role: str) -> Piece:
        """Give the same piece another role."""
        return replace(self, role=role)


@dataclass(slots=True)
class Pieces:
    """All pieces of a drawing, in file order, and what was hidden on the way."""

    every: list[Piece] = field(default_factory=list)

    def of(self, role: str, *kinds: Kind) -> tuple[Piece, ...]:
        """List the pieces of a role, of some kinds or of all."""
        return tuple(p for p in self.every if p.role == role and (not kinds or p.kind in kinds))

    def extend(self, more: Iterable[Piece]) -> None:
        """Add pieces behind the others."""
        self.every.extend(more)
