"""A cable laid out from its forces and unstressed lengths.

Signs, order and units: see the package's docstring.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.beam import frozen
from dxfcable.statics.catenary_piece import hang
from dxfcable.statics.catenary_shape import Catenary

if TYPE_CHECKING:
    from dxfcable.statics.beam import Floats


def shape_from(
    loads: Floats,
    supports: tuple[tuple[float, float], tuple[float, float]],
    unstressed_lengths: Floats,
    horizontal: float,
    verticals_left: Floats,
    *,
    weight: float,
    ea: float | None,
    thermal: float = 1.0,
    x: Floats | None = None,
    iterations: int = 0,
) -> Catenary:
    """Lay out a cable whose forces and unstressed lengths are known.

    Parameters
    ----------
    loads : (n,) array
        At the inner points [force].
    supports : ((float, float), (float, float))
        Left and right support [length].
    unstressed_lengths, verticals_left : (n+1,) array
        Of each piece [length, force].
    horizontal, weight, ea, thermal : float
        As in `Catenary`.
    x : (n+2,) array, optional
        Stations where they are given; else they follow from the pieces.
    iterations : int
        Steps that the forces took.

    Returns
    -------
    Catenary
        Its last node is the right support; `residual` is what the pieces miss.
    """
    (x_left, y_left), (x_right, y_right) = supports
    pieces = hang(unstressed_lengths, weight, horizontal, verticals_left, ea=ea, thermal=thermal)
    across = np.concatenate([[0.0], np.cumsum(pieces.across)])
    up = np.concatenate([[0.0], np.cumsum(pieces.up)])
    miss = math.hypot(across[-1] - (x_right - x_left), up[-1] - (y_right - y_left))
    stations = x_left + across if x is None else np.array(x, dtype=np.float64)
    if x is not None:
        miss = max(miss, float(np.max(np.abs(pieces.across - np.diff(stations)))))
    ordinates = y_left + up
    stations[-1], ordinates[-1] = x_right, y_right
    return Catenary(
        x=frozen(stations),
        y=frozen(ordinates),
        loads=frozen(np.array(loads, dtype=np.float64)),
        weight=weight,
        ea=ea,
        thermal=thermal,
        horizontal=float(horizontal),
        verticals_left=frozen(pieces.verticals_left.copy()),
        verticals_right=frozen(pieces.verticals_right),
        tensions_left=frozen(pieces.tensions_left),
        tensions_right=frozen(pieces.tensions_right),
        lengths=frozen(pieces.lengths),
        unstressed_lengths=frozen(np.array(unstressed_lengths, dtype=np.float64)),
        residual=miss,
        iterations=iterations,
    )
