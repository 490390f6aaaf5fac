"""How much of an elastic cable it takes to go a given way across.

Signs, order and units: see the package's docstring; the pieces are those of `catenary_piece`.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.errors import ConvergenceError

if TYPE_CHECKING:
    from dxfcable.statics.beam import Floats

_ITERATIONS = 100
_EPSILON = float(np.finfo(np.float64).eps)


def unstressed_for_width(
    pull: Floats,
    left: Floats,
    weight: Floats | float,
    widths: Floats,
    soft: float,
    heat: Floats | float = 1.0,
) -> Floats:
    """Find the unstressed length after which a piece has gone a given way across.

    Parameters
    ----------
    pull, left : array of float
        H > 0 and V1 [force].
    weight : array of float or float
        Per unstressed length [force/length].
    widths : array of float
        Horizontal projection wanted [length], >= 0.
    soft, heat : float, array
        1 / EA [1/force] and thermal factor.

    Returns
    -------
    array
        Unstressed lengths [length].

    Raises
    ------
    ConvergenceError
        If the iteration does not reach the widths.

    Notes
    -----
    The unknown p is the turn asinh(V2/H) - asinh(V1/H) over its inextensible value
    b = weight width / H. t p + f H (sinh(a + p b) - sinh a) / b = 1 increases with p, so
    Newton is kept inside the bracket (0, 1/t]; the length is width p (sinh(a + p b) -
    sinh a) / (p b), which needs no division by the weight.
    """
    pull, left, heavy, widths, warm = (
        np.asarray(a, dtype=np.float64)
        for a in np.broadcast_arrays(pull, left, np.asarray(weight), widths, np.asarray(heat))
    )
    start = np.arcsinh(left / pull)
    turns = heavy * widths / pull
    stiff = soft * pull
    low, high = np.zeros_like(pull), 1.0 / warm
    part = 1.0 / (warm + stiff * np.cosh(start))
    worst = np.inf
    for _ in range(_ITERATIONS):
        rise = _rise(start, part * turns)
        error = part * (warm + stiff * rise) - 1.0
        worst = float(np.max(np.abs(error), initial=0.0))
        if worst <= 8.0 * _EPSILON:
            break
        low, high = np.where(error < 0.0, part, low), np.where(error > 0.0, part, high)
        step = part - error / (warm + stiff * np.cosh(start + part * turns))
        part = np.where((step > low) & (step <= high), step, 0.5 * (low + high))
        if np.all(high - low <= 4.0 * _EPSILON * high):
            break
    else:
        message = "The length of a piece was not found for its width."
        raise ConvergenceError(message, residual=worst, iterations=_ITERATIONS)
    return widths * part * _rise(start, part * turns)


def _rise(start: Floats, turn: Floats) -> Floats:
    """(sinh(a + d) - sinh a) / d, the average of cosh over the turn."""
    half = 0.5 * turn
    rise: Floats = np.cosh(start + half) * sinh_over(half)
    return rise


def sinh_over(values: Floats) -> Floats:
    """Value of sinh(z) / z, 1 at zero."""
    zero = values == 0.0
    result: Floats = np.where(zero, 1.0, np.sinh(values) / np.where(zero, 1.0, values))
    return result
