"""Shape of a measured span: sag, low point, lengths, tensions, its curve where it has weight."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.catenary_piece import flexibility, hang
from dxfcable.statics.catenary_shape import Catenary
from dxfcable.statics.catenary_width import unstressed_for_width

if TYPE_CHECKING:
    from dxfcable.model import Point
    from dxfcable.verifying.measure import SpanFigures


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Shape:
    """What follows from the linework of one span.

    Attributes
    ----------
    lengths, unstressed : tuple of float
        Of each piece [length].
    sag, sag_x, low_point : float, float, Point
        Greatest drop below the closing string and its station; lowest point of the curve.
    curve : Catenary or None
        The curve between the nodes; None where the cable has no weight.
    """

    span: SpanFigures
    lengths: tuple[float, ...]
    unstressed: tuple[float, ...]
    sag: float
    sag_x: float
    low_point: Point
    curve: Catenary | None = None

    @property
    def max_tension(self) -> float:
        """Largest tension of the span [force]."""
        return max(self.span.largest(k) for k in range(self.span.pieces))

    def ordinate(self, x: float) -> float:
        """Ordinate of the cable at a station between its ends [length]."""
        if self.curve is not None:
            low, high = float(self.curve.x[0]), float(self.curve.x[-1])
            return float(self.curve.ordinates_at([min(max(x, low), high)])[0])
        nodes = np.array(self.span.nodes)
        return float(np.interp(x, nodes[:, 0], nodes[:, 1]))

    def drop(self, x: float) -> float:
        """Distance of the cable below its closing string at a station [length]."""
        (x0, y0), (x1, y1) = self.span.nodes[0], self.span.nodes[-1]
        return y0 + (y1 - y0) * (x - x0) / (x1 - x0) - self.ordinate(x)


def shape_of(
    span: SpanFigures, weight: float, ea: float | None, thermal: float = 1.0
) -> Shape | None:
    """Work out the shape of a span; None where its force diagram is not whole.

    Parameters
    ----------
    weight : float
        Per unstressed length with its factor [force/length].
    ea : float or None
        Axial stiffness [force].
    thermal : float
        1 + expansion times change from the reference temperature.

    Notes
    -----
    Without weight the profile is the shape. With weight each piece is the elastic catenary
    that leaves its left node with the forces of its left ray and ends over the right node.
    """
    if not span.is_whole or not span.pull > 0.0:
        return None
    if span.per_piece == 2:
        return _hanging(span, weight, ea, thermal) if weight > 0.0 else None
    nodes = span.nodes
    lengths = tuple(math.dist(a, b) for a, b in (span.side(k) for k in range(span.pieces)))
    soft = flexibility(ea)
    tensions = [span.tension(k, 0) for k in range(span.pieces)]
    (x0, y0), (x1, y1) = nodes[0], nodes[-1]
    drops = [y0 + (y1 - y0) * (x - x0) / (x1 - x0) - y for x, y in nodes]
    deepest = max(range(len(nodes)), key=lambda k: drops[k])
    return Shape(
        span=span,
        lengths=lengths,
        unstressed=tuple(
            one / (thermal + soft * force) for one, force in zip(lengths, tensions, strict=True)
        ),
        sag=drops[deepest],
        sag_x=nodes[deepest][0],
        low_point=min(nodes, key=lambda node: node[1]),
    )


def _hanging(span: SpanFigures, weight: float, ea: float | None, thermal: float) -> Shape:
    nodes = np.array(span.nodes)
    pull = np.full(span.pieces, span.pull)
    left = np.array([span.vertical(k, 0) for k in range(span.pieces)])
    unstressed = unstressed_for_width(
        pull, left, weight, np.diff(nodes[:, 0]), flexibility(ea), thermal
    )
    pieces = hang(unstressed, weight, pull, left, ea=ea, thermal=thermal)
    loads = pieces.verticals_left[1:] - pieces.verticals_right[:-1]
    curve = Catenary(
        x=nodes[:, 0],
        y=nodes[:, 1],
        loads=loads,
        weight=weight,
        ea=ea,
        thermal=thermal,
        horizontal=span.pull,
        verticals_left=pieces.verticals_left,
        verticals_right=pieces.verticals_right,
        tensions_left=pieces.tensions_left,
        tensions_right=pieces.tensions_right,
        lengths=pieces.lengths,
        unstressed_lengths=unstressed,
        residual=0.0,
        iterations=0,
    )
    return Shape(
        span=span,
        lengths=tuple(pieces.lengths.tolist()),
        unstressed=tuple(unstressed.tolist()),
        sag=curve.sag,
        sag_x=curve.sag_point[0],
        low_point=curve.low_point,
        curve=curve,
    )
