"""Which of several candidates something belongs to, by distance, or the doubt about it."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence


@dataclass(frozen=True, slots=True, kw_only=True)
class Claim:
    """The nearest candidate and, if there is one, the next; -1 stands for none.

    `is_clear` means that the next is at least the ratio times as far.
    """

    first: int
    first_distance: float
    second: int
    second_distance: float
    is_clear: bool


def claim(distances: Sequence[float], ratio: float) -> Claim:
    """Find the nearest candidate.

    Parameters
    ----------
    distances : sequence of float
        Of each candidate; infinite for those that do not count.
    ratio : float
        How many times as far the next one must be.

    Returns
    -------
    Claim

    Examples
    --------
    >>> claim([3.0, 1.0, 1.4], 1.5).is_clear
    False
    """
    order = sorted(range(len(distances)), key=lambda i: distances[i])
    order = [i for i in order if math.isfinite(distances[i])]
    if not order:
        return Claim(
            first=-1, first_distance=math.inf, second=-1, second_distance=math.inf, is_clear=False
        )
    near = distances[order[0]]
    if len(order) == 1:
        return Claim(
            first=order[0],
            first_distance=near,
            second=-1,
            second_distance=math.inf,
            is_clear=True,
        )
    far = distances[order[1]]
    return Claim(
        first=order[0],
        first_distance=near,
        second=order[1],
        second_distance=far,
        is_clear=far > 0 and far >= ratio * near,
    )
