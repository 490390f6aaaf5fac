"""The integrals of many pieces summed along their chains, with as few array passes as may be.

Signs, order and units: see the package's docstring; formulas as in `catenary_ends`.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.catenary_ends import SHORT, Ends, atanh_over

if TYPE_CHECKING:
    from collections.abc import Iterator

    from dxfcable.statics.beam import Floats

_BLOCK = 12288  # elements of one array worked on at a time: a dozen of them fit the cache


def blocks(rows: int, columns: int, *, whole_rows: bool = False) -> Iterator[tuple[slice, slice]]:
    """Split a table into blocks that fit the processor's cache.

    Parameters
    ----------
    rows, columns : int
        Size of the table.
    whole_rows : bool
        Whether rows are kept whole, however long.

    Yields
    ------
    slice, slice
        Rows and columns of a block.
    """
    height = max(1, _BLOCK // columns)
    width = columns if whole_rows else _BLOCK
    for row in range(0, rows, height):
        for column in range(0, columns, width):
            yield slice(row, row + height), slice(column, column + width)


def row_sums(pull: Floats, left: Floats, lengths: Floats, weights: Floats) -> Floats:
    """Sum over each row's pieces what projections and derivatives are made of.

    Parameters
    ----------
    pull : (s, 1) array
        H [force].
    left, lengths, weights : (s, n) array
        V1 [force] (overwritten), unstressed length [length], weight of the piece [force].

    Returns
    -------
    (4, s) array
        Integrals over the unstressed length of 1 / T, V / T, V / T^3 and 1 / T^3.

    Notes
    -----
    Short pieces (r < 0.1) take as many terms of atanh(r) / r as the longest of them needs.
    """
    right = left + weights
    first = left * left
    squared = pull * pull
    first += squared
    np.sqrt(first, out=first)
    second = right * right
    second += squared
    np.sqrt(second, out=second)
    total = first + second
    squares = weights / total
    squares *= squares
    largest = float(np.max(squares))
    if not largest < SHORT * SHORT:
        return _long_sums(pull, left, lengths, weights)
    first *= second
    shares = np.divide(lengths, total, out=total)
    turns = atanh_over(squares, largest)
    turns *= shares
    right += left
    rise = np.multiply(right, shares, out=left)
    sums = np.empty((4, left.shape[0]))
    np.add.reduce(turns, axis=1, out=sums[0])
    np.add.reduce(rise, axis=1, out=sums[1])
    shares /= first
    right *= shares
    np.add.reduce(right, axis=1, out=sums[2])
    np.subtract(1.0, squares, out=squares)
    shares /= squares
    np.add.reduce(shares, axis=1, out=sums[3])
    sums[[0, 3]] *= 2.0
    return sums


def _long_sums(pull: Floats, left: Floats, lengths: Floats, weights: Floats) -> Floats:
    ends = Ends(pull, left, left + weights, weights)
    both = lengths * (left + ends.right) / ends.total
    products = ends.first * ends.second
    parts = (lengths * ends.turn, both, both / products, lengths * ends.spread / products)
    return np.stack([np.sum(part, axis=1) for part in parts])
