"""Numbers rounded to a billionth of the span, so that machines agree on every byte."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable

    from dxfcable.model import Point


@dataclass(frozen=True, slots=True)
class Rounder:
    """Rounds coordinates to a power of ten, and leaves the drafter's own as they are.

    Attributes
    ----------
    digits : int
        Decimal places kept; negative for tens and hundreds.
    verbatim : frozenset of float
        The drafter's coordinates, returned bit for bit.
    """

    digits: int
    verbatim: frozenset[float] = frozenset()

    def value(self, number: float) -> float:
        """Round one number; never a negative zero."""
        if number in self.verbatim:
            return number + 0.0
        return round(number, self.digits) + 0.0

    def point(self, point: Point) -> Point:
        """Round both coordinates."""
        return self.value(point[0]), self.value(point[1])


def rounder_for(span: float, verbatim: Iterable[float] = ()) -> Rounder:
    """Make the rounder whose step is the greatest power of ten within 1e-9 of the span.

    Parameters
    ----------
    span : float
        Horizontal distance between supports [length], > 0.
    verbatim : iterable of float
        Coordinates that are the drafter's own.

    Returns
    -------
    Rounder

    Raises
    ------
    ValueError
        If the span is not a positive number.

    Examples
    --------
    >>> rounder_for(24.0).value(1 / 3)
    0.33333333
    """
    if not (math.isfinite(span) and span > 0):
        message = f"the span must be a positive length, not {span!r}"
        raise ValueError(message)
    return Rounder(-math.floor(math.log10(1e-9 * span)), frozenset(verbatim))
