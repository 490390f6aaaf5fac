"""Which of many states governs."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import ArrayLike, NDArray

TIE = 1e-9  # of the greatest size in all states: so near, the first state governs


def governing(values: ArrayLike) -> tuple[NDArray[np.int64], NDArray[np.int64]]:
    """Find the states that bring the largest and the least value of each quantity.

    Parameters
    ----------
    values : (s, k) array of float
        One row a state, one column a quantity, all of one kind. Not-a-number where a state has
        no value; it never governs.

    Returns
    -------
    most, least : (k,) array of int
        Rows. Of states within 1e-9 of the greatest size the first, so that rounding does not
        choose; -1 where no state has a value.

    Raises
    ------
    ValueError
        If `values` is not a table, or holds an infinite value.

    Examples
    --------
    >>> most, least = governing([[1.0, 5.0], [3.0, float("nan")], [3.0, 4.0]])
    >>> most.tolist(), least.tolist()
    ([1, 0], [0, 2])
    """
    table = np.asarray(values, dtype=np.float64)
    if table.ndim != 2 or np.any(np.isinf(table)):
        message = f"values must be a table of finite numbers or nan, not of shape {table.shape}"
        raise ValueError(message)
    tie = TIE * np.max(np.abs(table), initial=0.0, where=~np.isnan(table))
    return _first_largest(table, tie), _first_largest(-table, tie)


def _first_largest(table: NDArray[np.float64], tie: float) -> NDArray[np.int64]:
    """Return the first row of each column that is its largest within the tie."""
    if table.shape[0] == 0:
        return np.full(table.shape[1], -1, dtype=np.int64)
    filled = np.where(np.isnan(table), -np.inf, table)
    rows = np.argmax(filled >= np.max(filled, axis=0) - tie, axis=0)
    return np.where(np.all(np.isnan(table), axis=0), -1, rows).astype(np.int64)
