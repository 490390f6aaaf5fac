"""The integrals along a piece of a catenary from the forces at its ends, without lost digits.

Signs, order and units: see the package's docstring. Nothing cancels as the weight W goes to
zero or as the piece hangs down on both sides of its low point: with r = W / (T1 + T2) the
difference asinh(V2 / H) - asinh(V1 / H) is 2 atanh(r), T2 - T1 is W (V1 + V2) / (T1 + T2), and
T1 + T2 - abs(W) is summed from positive terms (derived here, tested against 90 digits).
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from dxfcable.statics.beam import Floats

SHORT = 0.1  # below this r the series of atanh(r) / r needs nine terms at most
_DIGITS = 17.0


class Ends:
    """What all integrals over a piece share; see the module for the formulas.

    Attributes
    ----------
    first, second, total : array
        Tensions at both ends and their sum [force].
    turn : array
        asinh(V2 / H) - asinh(V1 / H) over W [1/force]: the average of 1 / T over the length.
    gaps, sizes : array
        T1 + T2 - abs(W) and abs(W) [force].
    """

    __slots__ = (
        "first",
        "gaps",
        "left",
        "pull_squared",
        "right",
        "second",
        "sizes",
        "total",
        "turn",
    )

    def __init__(self, pull: Floats, left: Floats, right: Floats, weights: Floats) -> None:
        self.left, self.right = left, right
        self.pull_squared = pull * pull
        self.first = np.sqrt(self.pull_squared + left * left)
        self.second = np.sqrt(self.pull_squared + right * right)
        self.total = self.first + self.second
        self.sizes = np.abs(weights)
        ratios = self.sizes / self.total
        largest = float(np.max(ratios, initial=0.0))
        if largest < SHORT:
            self.gaps = self.total - self.sizes
            ratios *= ratios
            atanh = atanh_over(ratios, largest * largest)
        else:
            self.gaps = self._gaps(weights)
            twice = np.log1p(2.0 * self.sizes / self.gaps)
            atanh = np.where(ratios > 0.0, 0.5 * twice / np.where(ratios > 0.0, ratios, 1.0), 1.0)
        atanh *= 2.0
        self.turn = np.divide(atanh, self.total, out=atanh)

    @property
    def spread(self) -> Floats:
        """Sinh of the turn over W [1/force]: the average of T1 T2 / T^3 over the length."""
        spread: Floats = 2.0 * self.total / (self.gaps * (self.total + self.sizes))
        return spread

    @property
    def mean_tension(self) -> Floats:
        """Average tension over the unstressed length [force], from positive terms."""
        both = self.left + self.right
        mean: Floats = 0.25 * (self.total + both * both / self.total)
        mean += 0.5 * self.pull_squared * self.turn
        return mean

    def _gaps(self, weights: Floats) -> Floats:
        """T1 + T2 - |W| from positive terms; the sign of W only mirrors the piece."""
        sign = np.where(weights < 0.0, -1.0, 1.0)
        ahead, behind = sign * self.right, -sign * self.left
        high, low = self.second + np.abs(ahead), self.first + np.abs(behind)
        safe_high, safe_low = np.where(ahead > 0.0, high, 1.0), np.where(behind > 0.0, low, 1.0)
        end = np.where(ahead > 0.0, self.pull_squared / safe_high, high)
        gaps: Floats = end + np.where(behind > 0.0, self.pull_squared / safe_low, low)
        return gaps


def atanh_over(squares: Floats, largest: float) -> Floats:
    """Value of atanh(r) / r for short pieces, from r squared.

    Parameters
    ----------
    squares : array of float
        r^2, below `SHORT`^2.
    largest : float
        The largest of them: it tells how many terms of the series all digits need.

    Returns
    -------
    array
        1 + r^2 / 3 + r^4 / 5 ..
    """
    enough = largest <= 10.0**-_DIGITS
    terms = 1 if enough else math.ceil(_DIGITS / -math.log10(largest))
    value = np.full_like(squares, 1.0 / (2 * terms + 1))
    for k in range(terms - 1, -1, -1):
        value *= squares
        value += 1.0 / (2 * k + 1)
    return value
