"""The load states of one cable, checked and brought to a common number of states.

Signs, order and units: see the package's docstring.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.beam import finite, frozen
from dxfcable.statics.catenary_chain import Chain, chain_of

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

    from dxfcable.statics.beam import Floats


def states_of(
    unstressed_lengths: ArrayLike,
    weight: float,
    loads: ArrayLike,
    ends: ArrayLike,
    soft: float,
    weight_factors: ArrayLike,
    alpha: float,
    delta_t: ArrayLike,
) -> tuple[Floats, Chain, Floats]:
    """Check what a response is asked for, and give every quantity a row for every state.

    Parameters
    ----------
    unstressed_lengths, weight, loads, ends, weight_factors, alpha, delta_t
        As in `catenary.respond`.
    soft : float
        1 / EA [1/force].

    Returns
    -------
    ends : (s, 2, 2) array
        Supports [length].
    chain : Chain
        The states.
    weights : (s,) array
        Per unstressed length [force/length].

    Raises
    ------
    ValueError
        If shapes do not match or a number is out of its range.
    """
    lengths = _rows("unstressed_lengths", unstressed_lengths, 1)
    forces = _rows("loads", loads, 1)
    points = _rows("ends", ends, 2)
    factors = _rows("weight_factors", weight_factors, 0)
    heat = 1.0 + finite("alpha", alpha) * _rows("delta_t", delta_t, 0)
    if points.shape[1:] != (2, 2) or forces.shape[1] != lengths.shape[1] - 1:
        message = (
            f"{lengths.shape[1]} pieces need {lengths.shape[1] - 1} loads and two ends of two "
            f"coordinates, not loads of shape {forces.shape} and ends of shape {points.shape}"
        )
        raise ValueError(message)
    if not (np.all(lengths > 0.0) and finite("weight", weight) >= 0.0 and np.all(heat > 0.0)):
        message = "unstressed lengths and thermal factors must be positive, the weight not negative"
        raise ValueError(message)
    count = max(len(a) for a in (lengths, forces, points, factors, heat))
    lengths, forces, points, factors, heat = (
        _repeated(a, count) for a in (lengths, forces, points, factors, heat)
    )
    apart = points[:, 1] - points[:, 0]
    if not np.all(apart[:, 0] > 0.0):
        message = "the right end must be to the right of the left end in every state"
        raise ValueError(message)
    per_length = frozen(weight * factors)
    chain = chain_of(
        lengths,
        per_length[:, np.newaxis] * lengths,
        forces,
        (apart[:, 0], apart[:, 1]),
        soft=soft,
        heat=heat,
    )
    return points, chain, per_length


def _rows(name: str, values: ArrayLike, dimensions: int) -> Floats:
    """Values as an array with a leading axis for states, or one sentence on what is wrong."""
    array = np.asarray(values, dtype=np.float64)
    if array.ndim == dimensions:
        array = array[np.newaxis]
    if array.ndim != dimensions + 1 or array.shape[0] == 0:
        message = f"{name} must have {dimensions} axes, or one more for states, not {array.shape}"
        raise ValueError(message)
    if not np.all(np.isfinite(array)):
        message = f"{name} must be finite numbers"
        raise ValueError(message)
    return array


def _repeated(array: Floats, count: int) -> Floats:
    """Give one state's row to all states without copying it."""
    if len(array) not in (1, count):
        message = f"all quantities must have one state or {count}, not {len(array)}"
        raise ValueError(message)
    return np.broadcast_to(array, (count, *array.shape[1:]))
