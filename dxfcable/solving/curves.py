"""The curve of a cable with weight as a polyline that is true to a millimetre."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, TypeAlias

import numpy as np

from dxfcable.statics.catenary_shape import Catenary
from dxfcable.statics.funicular import Funicular

if TYPE_CHECKING:
    from dxfcable.model import Point

Shape: TypeAlias = Funicular | Catenary
_SHARE = 0.5  # of the millimetre: the rest is for rounding
_MOST = 2000  # points a piece


def curves(shape: Shape, millimetre: float) -> tuple[tuple[Point, ...], ...]:
    """Return one polyline a span, nodes included; none where the nodes alone are the shape.

    Parameters
    ----------
    shape : Funicular or Catenary
        One span.
    millimetre : float
        In the drawing's unit.

    Notes
    -----
    A piece whose slope changes by s over a width b departs from its chord by at most b s / 8,
    and from k equal chords by a k-th of a k-th of that.
    """
    if not isinstance(shape, Catenary) or not shape.weight:
        return ()
    stations: list[float] = []
    for k, width in enumerate(np.diff(shape.x).tolist()):
        turn = abs(float(shape.verticals_right[k] - shape.verticals_left[k])) / shape.horizontal
        chords = math.ceil(math.sqrt(width * turn / 8 / (_SHARE * millimetre)))
        count = min(max(chords, 1), _MOST)
        stations += np.linspace(shape.x[k], shape.x[k + 1], count + 1)[:-1].tolist()
    stations.append(float(shape.x[-1]))
    ordinates = shape.ordinates_at(stations)
    return (tuple(zip(stations, ordinates.tolist(), strict=True)),)
