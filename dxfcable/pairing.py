"""Pair the rows of a table of costs with its columns, so that all pairs together cost least."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import ArrayLike, NDArray


def pair(costs: ArrayLike) -> list[tuple[int, int]]:
    """Pair rows with columns at the least sum of costs.

    Parameters
    ----------
    costs : (m, n) array of float
        Cost of each pair, finite.

    Returns
    -------
    list of (int, int)
        min(m, n) pairs of row and column, by row.

    Raises
    ------
    ValueError
        If a cost is not finite.

    Notes
    -----
    The assignment problem by shortest augmenting paths with potentials (H. W. Kuhn 1955,
    J. Munkres 1957: MEM), one row after the other, n m^2 steps.

    Examples
    --------
    >>> pair([[4.0, 1.0, 3.0], [2.0, 0.0, 5.0]])
    [(0, 1), (1, 0)]
    """
    table = np.asarray(costs, dtype=np.float64)
    if table.size == 0:
        return []
    if not np.all(np.isfinite(table)):
        message = "all costs must be finite"
        raise ValueError(message)
    if table.shape[0] > table.shape[1]:
        return sorted((row, column) for column, row in pair(table.T))
    rows, columns = table.shape
    row_of = np.full(columns + 1, -1)  # the last column stands for the row that looks for a place
    heights, depths = np.zeros(rows), np.zeros(columns + 1)
    for row in range(rows):
        row_of[columns] = row
        _augment(table, row_of, heights, depths)
    return sorted((int(row_of[column]), column) for column in range(columns) if row_of[column] >= 0)


def _augment(
    table: NDArray[np.float64],
    row_of: NDArray[np.int64],
    heights: NDArray[np.float64],
    depths: NDArray[np.float64],
) -> None:
    """Give one more row a column along the cheapest path of exchanges."""
    columns = table.shape[1]
    least = np.full(columns, np.inf)
    came_from = np.full(columns, columns)
    seen = np.zeros(columns + 1, dtype=bool)
    at = columns
    while row_of[at] >= 0:
        seen[at] = True
        row = row_of[at]
        free = ~seen[:columns]
        reduced = table[row] - heights[row] - depths[:columns]
        better = free & (reduced < least)
        least[better] = reduced[better]
        came_from[better] = at
        following = int(np.argmin(np.where(free, least, np.inf)))
        step = least[following]
        heights[row_of[seen]] += step
        depths[seen] -= step
        least[free] -= step
        at = following
    while at != columns:
        before = int(came_from[at])
        row_of[at] = row_of[before]
        at = before
